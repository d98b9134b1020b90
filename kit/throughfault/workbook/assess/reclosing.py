"""A second fault after a reclosing pause, for information."""

from __future__ import annotations

from throughfault.cells import thermal_withstand as withstand
from throughfault.declare import Step
from throughfault.errors import OutsideValidity
from throughfault.numerics.heat import Shots, repeated_shots
from throughfault.quantities import Quantity
from throughfault.tables import table
from throughfault.workbook.assess.thermal_inputs import HeatInputs
from throughfault.workbook.assess.thermal_method import conductor_of

__all__ = ["reclosing"]


def reclosing(given: HeatInputs, density: Step) -> tuple[tuple[Step, ...], Shots | None]:
    """Work out a second fault after a reclosing pause, for information; the slowest cooling is taken.

    Nothing is worked out where no cooling is tabled for the immersion, or where all heat cannot be taken as stored.
    """
    tabled = {row["immersion"]: row["greatest"] for row in table("winding_cooling").rows}
    if given.immersion not in tabled or given.duration.to("s") > withstand.ADIABATIC_TO:
        return (), None
    cooling = Quantity(tabled[given.immersion], "min")
    try:
        steps = _steps(given, density, cooling)
    except OutsideValidity:
        return (), None
    return steps, _shots(given, density, cooling)


def _steps(given: HeatInputs, density: Step, cooling: Quantity) -> tuple[Step, ...]:
    material, prefix = conductor_of(given), f"thermal.{given.winding}.reclosing"
    constants = {
        "thermal_constant": Quantity(material.constant, "A^2 s/mm^4"),
        "temperature_offset": Quantity(material.offset, "K"),
    }
    heat = withstand.heat_integral.step(
        f"{prefix}.heat_integral", current_density=density.result, duration=given.duration
    )
    exact = withstand.exact_temperature
    first = exact.step(f"{prefix}.first", initial_temperature=given.start, heat_integral=heat.result, **constants)
    rested = withstand.temperature_after_pause.step(
        f"{prefix}.after_pause",
        conductor_temperature=first.result,
        initial_temperature=given.start,
        dead_time=Quantity(table("reclosing").rows[0]["dead_time"], "s"),
        cooling_time_constant=cooling,
    )
    second = exact.step(f"{prefix}.second", initial_temperature=rested.result, heat_integral=heat.result, **constants)
    return (heat, first, rested, second)


def _shots(given: HeatInputs, density: Step, cooling: Quantity) -> Shots:
    material, pause = conductor_of(given), table("reclosing").rows[0]
    return repeated_shots(
        given.start.to("degC"), density.result.value, type(material)(material.constant, material.offset),
        duration=given.duration.to("s"), pause=pause["dead_time"], count=int(pause["shots"]), cooling=cooling.to("s"),
    )  # fmt: skip

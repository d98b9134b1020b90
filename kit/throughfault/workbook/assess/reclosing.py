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
    """Work out a second fault after a reclosing pause, for information; the slowest cooling is taken."""
    pause = table("reclosing").rows[0]
    cooling = Quantity(table("winding_cooling").rows[0]["greatest"], "min")
    material = conductor_of(given)
    prefix = f"thermal.{given.winding}.reclosing"
    constants = {
        "thermal_constant": Quantity(material.constant, "A^2 s/mm^4"),
        "temperature_offset": Quantity(material.offset, "K"),
    }
    try:
        heat = withstand.heat_integral.step(
            f"{prefix}.heat_integral", current_density=density.result, duration=given.duration
        )
        exact = withstand.exact_temperature
        first = exact.step(f"{prefix}.first", initial_temperature=given.start, heat_integral=heat.result, **constants)
        rested = withstand.temperature_after_pause.step(
            f"{prefix}.after_pause",
            conductor_temperature=first.result,
            initial_temperature=given.start,
            dead_time=Quantity(pause["dead_time"], "s"),
            cooling_time_constant=cooling,
        )
        second = exact.step(
            f"{prefix}.second", initial_temperature=rested.result, heat_integral=heat.result, **constants
        )
    except OutsideValidity:
        return (), None
    shots = repeated_shots(
        given.start.to("degC"), density.result.value, type(material)(material.constant, material.offset),
        duration=given.duration.to("s"), pause=pause["dead_time"], count=int(pause["shots"]), cooling=cooling.to("s"),
    )  # fmt: skip
    return (heat, first, rested, second), shots

"""The two forms of the temperature that can decide, and what is shown beside them, as worked steps."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass

import numpy as np

from throughfault.cells import heat_content
from throughfault.cells import heat_stored as stored
from throughfault.cells import thermal_withstand as withstand
from throughfault.cells.fault_current import offset_time_constant
from throughfault.declare import Cell, Limit, Step
from throughfault.errors import OutsideValidity
from throughfault.numerics.case import Floats
from throughfault.numerics.heat import Conductor, average_temperature, exact_temperature, offset_heat
from throughfault.quantities import Quantity
from throughfault.tables import table
from throughfault.workbook.assess.thermal_inputs import HeatInputs

__all__ = ["METHODS", "Method", "comparison_steps", "conductor_of", "curve_of"]

StepCell = Cell[...]
AVERAGE: dict[str, StepCell] = {
    "copper": withstand.average_temperature_copper,
    "aluminium": withstand.average_temperature_aluminium,
}
AVERAGE_DURATION: dict[str, StepCell] = {
    "copper": withstand.permissible_duration_copper,
    "aluminium": withstand.permissible_duration_aluminium,
}
HEAT_CONTENT: dict[str, StepCell] = {
    "copper": heat_content.heat_content_copper,
    "aluminium": heat_content.heat_content_aluminium,
}
POINTS = 80
SHORT_OF_THE_POLE = 0.8  # of the thermal constant, where the average form ends on a plot


@dataclass(frozen=True, slots=True)
class Method:
    """One form: its last step is the result."""

    name: str
    temperature: Callable[[HeatInputs, Step, str], tuple[Step, ...]]
    permissible: Callable[[HeatInputs, Step, Limit, str], tuple[Step, ...]]


def conductor_of(given: HeatInputs) -> Conductor:
    """Return constants of the winding's material, with its eddy share where its reference is known."""
    row = table("iec60076_5_2006_thermal_constant").row(material=given.material)
    if given.reference is None:
        return Conductor(row["constant"], row["temperature_offset"])
    return Conductor(row["constant"], row["temperature_offset"], given.eddy_share, given.reference.to("degC"))


@contextmanager
def computable(name: str) -> Iterator[None]:
    """Say of numbers that no float holds that they are outside what the form holds for.

    Raises
    ------
    OutsideValidity
        In the place of an overflow.
    """
    try:
        yield
    except OverflowError:
        raise OutsideValidity(
            f"{name}: the current density is too high for the temperature to have a number."
        ) from None


def _average(given: HeatInputs, density: Step, id_: str) -> tuple[Step, ...]:
    cell = AVERAGE[given.material]
    step = cell.step(id_, initial_temperature=given.start, current_density=density.result, duration=given.duration)
    return (step,)


def _average_permissible(given: HeatInputs, density: Step, limit: Limit, id_: str) -> tuple[Step, ...]:
    cell = AVERAGE_DURATION[given.material]
    permitted = Quantity(limit.value, limit.unit)
    step = cell.step(
        id_, initial_temperature=given.start, current_density=density.result, permitted_temperature=permitted
    )
    return (step,)


@dataclass(frozen=True, slots=True)
class _Start:
    """Steps common to temperature and duration of the all-heat-stored form."""

    offset: Quantity
    loss: Step
    share: Step


def _start(given: HeatInputs, density: Step, id_: str) -> _Start:
    if given.reference is None and given.eddy_share > 0.0:
        raise OutsideValidity(
            f"{id_}: the eddy share has no tabled reference temperature for this immersion (IEEEC57.12.00-2015, 7.4)."
        )
    material = table("conductor_material").row(material=given.material)
    offset = table("ieee_c57_12_00_2015_heat_content").row(material=given.material)["temperature_offset"]
    at = {"start_temperature": given.start, "temperature_offset": Quantity(offset, "K")}
    loss = heat_content.start_loss.step(
        f"{id_}.start_loss",
        current_density=density.result,
        resistivity_20=Quantity(material["resistivity_20"], "uohm m"),
        density=Quantity(material["density"], "kg/m^3"),
        **at,
    )
    share = heat_content.start_eddy_share.step(
        f"{id_}.start_eddy_share",
        eddy_share=Quantity(given.eddy_share, "1"),
        reference_temperature=given.reference or given.start,
        **at,
    )
    return _Start(at["temperature_offset"], loss, share)


def _content(given: HeatInputs, final: Quantity, id_: str) -> Step:
    return HEAT_CONTENT[given.material].step(
        f"{id_}.heat_content",
        start_temperature=given.start,
        final_temperature=final,
        insulation_section=given.insulation,
        conductor_section=given.section,
    )


def final_temperature(given: HeatInputs, density: float, duration: float) -> float:
    """Return the all-heat-stored temperature in degC for any density and duration."""
    reference = given.reference.to("degC") if given.reference is not None else given.start.to("degC")
    form = stored.final_temperature_all_heat_stored
    with computable(form.name):
        return float(
            form(
                material=given.material,
                start_temperature=given.start.to("degC"),
                current_density=density,
                duration=duration,
                eddy_share=given.eddy_share,
                reference_temperature=reference,
                insulation_section=given.insulation.to("mm^2"),
                conductor_section=given.section.to("mm^2"),
            )
        )


def _stored(given: HeatInputs, density: Step, id_: str) -> tuple[Step, ...]:
    start = _start(given, density, id_)
    final = final_temperature(given, density.result.value, given.duration.to("s"))
    content = _content(given, Quantity(final, "degC"), id_)
    ratio = heat_content.heating_ratio.step(
        f"{id_}.heating_ratio",
        start_loss=start.loss.result,
        duration=given.duration,
        heat_content=content.result,
        start_temperature=given.start,
        temperature_offset=start.offset,
    )
    low = ratio.result.value <= stored.SERIES_TO
    form: StepCell = stored.final_temperature_series if low else stored.final_temperature_exponential
    last = form.step(
        id_,
        start_temperature=given.start,
        temperature_offset=start.offset,
        heating_ratio=ratio.result,
        start_eddy_share=start.share.result,
    )
    return (start.loss, start.share, content, ratio, last)


def _stored_permissible(given: HeatInputs, density: Step, limit: Limit, id_: str) -> tuple[Step, ...]:
    start = _start(given, density, id_)
    permitted = Quantity(limit.value, limit.unit)
    content = _content(given, permitted, id_)
    at = {"start_temperature": given.start, "temperature_offset": start.offset}
    end = {"permitted_temperature": permitted, "start_eddy_share": start.share.result}
    ratio = stored.permitted_heating_ratio_series.step(f"{id_}.heating_ratio", **at, **end)
    if ratio.result.value > stored.SERIES_TO:
        ratio = stored.permitted_heating_ratio_exponential.step(f"{id_}.heating_ratio", **at, **end)
    last = stored.permissible_duration_heat_stored.step(
        id_, heating_ratio=ratio.result, heat_content=content.result, start_loss=start.loss.result, **at
    )
    return (start.loss, start.share, content, ratio, last)


METHODS: dict[str, Method] = {
    "average temperature": Method("average temperature", _average, _average_permissible),
    "all heat stored": Method("all heat stored", _stored, _stored_permissible),
}


def _exact(given: HeatInputs, heat: Step, id_: str) -> Step:
    material = conductor_of(given)
    return withstand.exact_temperature.step(
        id_,
        initial_temperature=given.start,
        heat_integral=heat.result,
        thermal_constant=Quantity(material.constant, "A^2 s/mm^4"),
        temperature_offset=Quantity(material.offset, "K"),
    )


def _with_eddy(given: HeatInputs, heat: Step, id_: str) -> Step:
    material = conductor_of(given)
    return withstand.exact_temperature_with_eddy_loss.step(
        id_,
        initial_temperature=given.start,
        heat_integral=heat.result,
        thermal_constant=Quantity(material.constant, "A^2 s/mm^4"),
        temperature_offset=Quantity(material.offset, "K"),
        eddy_share=Quantity(material.eddy_share, "1"),
        reference_temperature=Quantity(material.reference, "degC"),
    )


def _decaying(given: HeatInputs, density: Step, frequency: Quantity, prefix: str) -> tuple[Step, ...]:
    constant = offset_time_constant.step(
        f"{prefix}.offset_time_constant", x_over_r=Quantity(given.x_over_r or 0.0, "1"), frequency=frequency
    )
    heat = withstand.heat_integral_with_offset.step(
        f"{prefix}.heat_integral_with_offset",
        current_density=density.result,
        duration=given.duration,
        offset_time_constant=constant.result,
    )
    return (constant, heat, _exact(given, heat, f"{prefix}.temperature_with_offset"))


def comparison_steps(given: HeatInputs, density: Step, frequency: Quantity, method: str) -> dict[str, tuple[Step, ...]]:
    """Return what is shown beside the deciding form, by name: each with its steps, the last one the result.

    ``exact``; ``eddy`` with an eddy share; ``offset`` with a known X/R; ``other`` the other standard's form from the
    same start. A form that does not hold for these inputs is left out; beyond the duration for which all heat is taken
    as stored none holds.
    """
    if given.duration.to("s") > withstand.ADIABATIC_TO:
        return {}
    prefix = f"thermal.{given.winding}"
    other = METHODS["all heat stored" if method == "average temperature" else "average temperature"]
    heat = withstand.heat_integral.step(
        f"{prefix}.heat_integral", current_density=density.result, duration=given.duration
    )
    wanted: dict[str, Callable[[], tuple[Step, ...]]] = {
        "exact": lambda: (heat, _exact(given, heat, f"{prefix}.temperature_exact")),
        "other": lambda: other.temperature(given, density, f"{prefix}.temperature_other_standard"),
    }
    if given.eddy_share > 0.0 and given.reference is not None:
        wanted["eddy"] = lambda: (_with_eddy(given, heat, f"{prefix}.temperature_with_eddy_loss"),)
    if given.x_over_r is not None and given.x_over_r > 0.0:
        wanted["offset"] = lambda: _decaying(given, density, frequency, prefix)
    found = {}
    for name, make in wanted.items():
        try:
            found[name] = make()
        except OutsideValidity:
            continue
    return found


def curve_of(
    given: HeatInputs, density: float, method: str, until: float, time_constant: float | None
) -> dict[str, Floats]:
    """Return ``time`` (s) and, in degC, ``standard``, ``exact`` and, with a time constant, ``offset`` for a plot.

    Nothing is returned where the current density is beyond what can be drawn.
    """
    try:
        with computable("curve"):
            return _curve(given, density, method, until, time_constant)
    except OutsideValidity:
        return {}


def _curve(
    given: HeatInputs, density: float, method: str, until: float, time_constant: float | None
) -> dict[str, Floats]:
    material = conductor_of(given)
    start = given.start.to("degC")
    end = min(until, withstand.ADIABATIC_TO, SHORT_OF_THE_POLE * material.constant / density**2)
    time = np.linspace(0.0, end, POINTS)
    made = {"time": time, "exact": exact_temperature(start, density**2 * time, material)}
    if method == "average temperature":
        made["standard"] = average_temperature(start, density**2 * time, material)
    else:
        later = [final_temperature(given, density, float(t)) for t in time[1:]]
        made["standard"] = np.asarray([start, *later])
    if time_constant is not None:
        made["offset"] = exact_temperature(start, offset_heat(density, time, time_constant), material)
    return made

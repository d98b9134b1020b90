"""Temperature of a conductor after a short circuit: the all-heat-stored form with eddy loss and insulation."""

from __future__ import annotations

from collections.abc import Callable
from math import exp, log, sqrt
from typing import Annotated, Any

from throughfault import nomenclature as nom
from throughfault.cells.heat_content import (
    CLAUSE,
    TEMPERATURE,
    heat_content_aluminium,
    heat_content_copper,
    heating_ratio,
    start_eddy_share,
    start_loss,
)
from throughfault.cells.thermal_withstand import ADIABATIC_TO
from throughfault.declare import Condition, Equation, Range, algorithm, cell
from throughfault.errors import OutsideValidity
from throughfault.sources import Source
from throughfault.tables import table

SERIES_TO = 0.6  # heating ratio up to which the series form holds
TESTS = "tests/cells/test_heat_stored.py"
NEAR_ENOUGH = 1e-10  # K between two rounds
ROUNDS = 200
HOTTEST = 2000.0  # degC; beyond any conductor, so the iteration is refused rather than let run away


FINAL = (
    Range("start_temperature", **TEMPERATURE),
    Range("temperature_offset", at_least=200.0, at_most=300.0),
    Range("start_eddy_share", at_least=0.0, at_most=5.0),
)


@cell(
    title="Final temperature, series form",
    source=CLAUSE,
    valid_for=(*FINAL, Range("heating_ratio", at_least=0.0, at_most=0.6)),
    checks=("tests/published/thermal.toml::rise by heating ratio: 0.536 for a ratio of 0.4 and an eddy share of 0.1",),
)
def final_temperature_series(
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    heating_ratio: Annotated[float, nom.heating_ratio],
    start_eddy_share: Annotated[float, nom.start_eddy_share],
) -> Annotated[float, nom.final_temperature]:
    """For heating ratios up to 0.6."""
    T_s, T_k, m, e = start_temperature, temperature_offset, heating_ratio, start_eddy_share
    return (T_k + T_s) * m * (1 + e + 0.6 * m) + T_s


@cell(
    title="Final temperature, exponential form",
    source=CLAUSE,
    valid_for=(*FINAL, Range("heating_ratio", at_least=0.0, at_most=2.0)),
    checks=(
        "tests/published/thermal.toml::rise by heating ratio: 0.532 and 1.313 for ratios of 0.4 and 0.8",
        f"{TESTS}::test_exponential_form_solves_the_heat_equation: by numerical integration",
    ),
)
def final_temperature_exponential(
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    heating_ratio: Annotated[float, nom.heating_ratio],
    start_eddy_share: Annotated[float, nom.start_eddy_share],
) -> Annotated[float, nom.final_temperature]:
    """Exact for a constant heat content; asked for above a heating ratio of 0.6."""
    T_s, T_k, m, e = start_temperature, temperature_offset, heating_ratio, start_eddy_share
    return (T_k + T_s) * (sqrt(exp(2 * m) + e * (exp(2 * m) - 1)) - 1) + T_s


ABOVE_START = Condition(
    "permitted temperature above the starting temperature",
    lambda permitted_temperature, start_temperature, **_: permitted_temperature > start_temperature,
)
SOLVED = Source("IEEEC57.12.00-2015", "7.4, solved for the heating ratio", "derived")


@cell(
    title="Heating ratio at the permitted temperature, series form",
    source=SOLVED,
    valid_for=(*FINAL, ABOVE_START),
    terms={"r": nom.relative_rise},
    checks=(f"{TESTS}::test_permitted_ratios_reach_the_permitted_temperature: put into the form",),
)
def permitted_heating_ratio_series(
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    permitted_temperature: Annotated[float, nom.permitted_temperature],
    start_eddy_share: Annotated[float, nom.start_eddy_share],
) -> Annotated[float, nom.heating_ratio]:
    """Solve the series form, which holds where the result is at most 0.6."""
    T_s, T_k, theta_2, e = start_temperature, temperature_offset, permitted_temperature, start_eddy_share
    r = (theta_2 - T_s) / (T_k + T_s)
    return (sqrt((1 + e) ** 2 + 2.4 * r) - (1 + e)) / 1.2


@cell(
    title="Heating ratio at the permitted temperature, exponential form",
    source=SOLVED,
    valid_for=(*FINAL, ABOVE_START),
    terms={"r": nom.relative_rise},
    checks=(f"{TESTS}::test_permitted_ratios_reach_the_permitted_temperature: put into the form",),
)
def permitted_heating_ratio_exponential(
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    permitted_temperature: Annotated[float, nom.permitted_temperature],
    start_eddy_share: Annotated[float, nom.start_eddy_share],
) -> Annotated[float, nom.heating_ratio]:
    """Solve the exponential form, for ratios above 0.6."""
    T_s, T_k, theta_2, e = start_temperature, temperature_offset, permitted_temperature, start_eddy_share
    r = (theta_2 - T_s) / (T_k + T_s)
    return log(((1 + r) ** 2 + e) / (1 + e)) / 2


@cell(
    title="Duration in which the conductor reaches the permitted temperature, all heat stored",
    source=SOLVED,
    valid_for=(
        Range("heating_ratio", above=0.0),
        Range("heat_content", above=0.0),
        Range("start_temperature", **TEMPERATURE),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
        Range("start_loss", above=0.0),
    ),
    checks=(f"{TESTS}::test_permissible_duration_reaches_the_permitted_temperature: put into the whole iteration",),
)
def permissible_duration_heat_stored(
    heating_ratio: Annotated[float, nom.heating_ratio],
    heat_content: Annotated[float, nom.heat_content],
    start_temperature: Annotated[float, nom.start_temperature],
    temperature_offset: Annotated[float, nom.temperature_offset],
    start_loss: Annotated[float, nom.start_loss],
) -> Annotated[float, nom.permissible_duration]:
    """Take the heat content up to the permitted temperature."""
    m, C_h, T_s, T_k, W_s = heating_ratio, heat_content, start_temperature, temperature_offset, start_loss
    return m * C_h * (T_k + T_s) / W_s


HEAT_CONTENT: dict[str, Callable[..., float]] = {"copper": heat_content_copper, "aluminium": heat_content_aluminium}


def _once_more(final: float, given: dict[str, Any]) -> float:
    """One round: heat content at the last temperature, heating ratio, next temperature."""
    material = table("conductor_material").row(material=given["material"])
    offset = table("ieee_c57_12_00_2015_heat_content").row(material=given["material"])["temperature_offset"]
    start = given["start_temperature"]
    loss = start_loss(given["current_density"], start, offset, material["resistivity_20"], material["density"])
    content = HEAT_CONTENT[given["material"]](start, final, given["insulation_section"], given["conductor_section"])
    ratio = heating_ratio(loss, given["duration"], content, start, offset)
    share = start_eddy_share(given["eddy_share"], given["reference_temperature"], start, offset)
    form = final_temperature_series if ratio <= SERIES_TO else final_temperature_exponential
    return form(start, offset, ratio, share)


def _settled(given: dict[str, Any]) -> float:
    """Repeat until two rounds agree."""
    if not 0.0 < given["duration"] <= ADIABATIC_TO:
        raise OutsideValidity(
            f"final_temperature_all_heat_stored: 'duration' must be above 0 and at most {ADIABATIC_TO:g} s "
            f"({CLAUSE.citation}), got {given['duration']:g} s."
        )
    final = given["start_temperature"]
    for _ in range(ROUNDS):
        before, final = final, _once_more(final, given)
        if final > HOTTEST:
            break
        if abs(final - before) < NEAR_ENOUGH:
            return float(final)
    raise OutsideValidity(
        f"final_temperature_all_heat_stored: the conductor passes {HOTTEST:g} degC ({CLAUSE.citation})."
    )


def _balance(given: dict[str, Any], got: float) -> float:
    return abs(_once_more(got, given) / got - 1.0)


def _balance_when_hot(given: dict[str, Any], _: float) -> float:
    hot = {**given, "current_density": 110.0}
    return _balance(hot, float(final_temperature_all_heat_stored(**hot)))


EXAMPLE = {
    "material": "copper", "start_temperature": 110.0, "current_density": 70.0, "duration": 2.0, "eddy_share": 0.08,
    "reference_temperature": 85.0, "insulation_section": 40.0, "conductor_section": 62.0,
}  # fmt: skip


@algorithm(
    title="Final temperature, all heat stored",
    source=CLAUSE,
    equations=(
        Equation(r"m=\frac{W_s\,t}{C_h(T_f)\,(T_k+T_s)}", _balance),
        Equation(r"T_f=(T_k+T_s)\,m\,(1+e+0.6\,m)+T_s\quad(m\le 0.6)", _balance),
        Equation(
            r"T_f=(T_k+T_s)\left[\sqrt{e^{2m}+e\,(e^{2m}-1)}-1\right]+T_s\quad(m>0.6)",
            _balance_when_hot,
        ),
    ),
    example=lambda: dict(EXAMPLE),
    valid_for=(f"duration above 0 and at most {ADIABATIC_TO:g} s; final temperature at most {HOTTEST:g} degC",),
    checks=("tests/published/thermal.toml::all heat stored from 105 degC: copper and aluminium, within 0.7 %",),
)
def final_temperature_all_heat_stored(
    *,
    material: str,
    start_temperature: float,
    current_density: float,
    duration: float,
    eddy_share: float,
    reference_temperature: float,
    insulation_section: float,
    conductor_section: float,
) -> float:
    """Give the final temperature in degC; the heat content depends on it, so it is found by repetition.

    Units: degC, A/mm^2, s, eddy share as a number at the reference temperature, mm^2.
    """
    return _settled(dict(locals()))

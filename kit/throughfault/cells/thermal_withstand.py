"""Temperature of a winding after a short circuit: the average-temperature form and the exact exponential."""

from __future__ import annotations

from math import exp, log, sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Condition, Range, cell
from throughfault.sources import Source
from throughfault.tables import table

AVERAGE = Source("IEC60076-5:2006", "4.1.5", "recalled")
INVERTED = Source("IEC60076-5:2006", "4.1.5, solved for the duration", "derived")
HEAT = "HeatBalance"
ADIABATIC_TO: float = table("iec60076_5_2006_duration").rows[0]["adiabatic_to"]  # s, all heat taken as stored
DURATION = Range("duration", above=0.0, at_most=ADIABATIC_TO)
DENSITY = Range("current_density", above=0.0)
START = Range("initial_temperature", at_least=-60.0, at_most=400.0)
ABOVE_START = Condition(
    "permitted temperature above the initial temperature",
    lambda permitted_temperature, initial_temperature, **_: permitted_temperature > initial_temperature,
)
TESTS = "tests/cells/test_thermal_withstand.py"
ABOVE = f"{TESTS}::test_average_form_lies_just_above_the_exponential: by 2.5 % of the rise at most"
INTEGRATED = f"{TESTS}::test_exact_forms_solve_the_heat_equation: by numerical integration"


@cell(
    title="Current density during the short circuit",
    source=Source("CircuitTheory", "current over section (as in IEC 60076-5:2006, 4.1.5)", "derived"),
    valid_for=(Range("winding_current", at_least=0.0), Range("conductor_section", above=0.0)),
    checks=(f"{TESTS}::test_density_of_a_kiloampere: in 1000 mm^2",),
)
def current_density(
    winding_current: Annotated[float, nom.winding_current], conductor_section: Annotated[float, nom.conductor_section]
) -> Annotated[float, nom.current_density]:
    """Symmetrical r.m.s. current of the winding over the section of one turn; the thousand turns kA into A."""
    current, section = winding_current, conductor_section
    return 1000 * current / section


@cell(
    title="Average temperature of a copper winding after a short circuit",
    source=AVERAGE,
    valid_for=(
        START,
        DENSITY,
        DURATION,
        Condition("J^2 t < 106000", lambda current_density, duration, **_: current_density**2 * duration < 106000),
    ),
    checks=(
        "tests/published/thermal.toml::density that reaches the limit in 2 s: 96.5 A/mm^2 from 105 to 250 degC",
        ABOVE,
    ),
)
def average_temperature_copper(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    duration: Annotated[float, nom.duration],
) -> Annotated[float, nom.average_temperature]:
    """All heat stays in the conductor; the resistance is that of the mean temperature; the offset is left out."""
    theta_0, J, t = initial_temperature, current_density, duration
    return theta_0 + 2 * (theta_0 + 235) / (106000 / (J**2 * t) - 1)


@cell(
    title="Average temperature of an aluminium winding after a short circuit",
    source=AVERAGE,
    valid_for=(
        START,
        DENSITY,
        DURATION,
        Condition("J^2 t < 45700", lambda current_density, duration, **_: current_density**2 * duration < 45700),
    ),
    checks=(
        "tests/published/thermal.toml::density that reaches the limit in 2 s: 53.6 A/mm^2 from 105 to 200 degC",
        ABOVE,
    ),
)
def average_temperature_aluminium(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    duration: Annotated[float, nom.duration],
) -> Annotated[float, nom.average_temperature]:
    """All heat stays in the conductor; the resistance is that of the mean temperature; the offset is left out."""
    theta_0, J, t = initial_temperature, current_density, duration
    return theta_0 + 2 * (theta_0 + 225) / (45700 / (J**2 * t) - 1)


@cell(
    title="Duration in which a copper winding reaches the permitted temperature",
    source=INVERTED,
    valid_for=(START, DENSITY, ABOVE_START),
    checks=(f"{TESTS}::test_permissible_duration_reaches_the_permitted_temperature: put into the average form",),
)
def permissible_duration_copper(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    permitted_temperature: Annotated[float, nom.permitted_temperature],
) -> Annotated[float, nom.permissible_duration]:
    """Solve the average-temperature form for the duration; the form holds for results up to 10 s."""
    theta_0, J, theta_2 = initial_temperature, current_density, permitted_temperature
    return 106000 / J**2 / (1 + 2 * (theta_0 + 235) / (theta_2 - theta_0))


@cell(
    title="Duration in which an aluminium winding reaches the permitted temperature",
    source=INVERTED,
    valid_for=(START, DENSITY, ABOVE_START),
    checks=(f"{TESTS}::test_permissible_duration_reaches_the_permitted_temperature: put into the average form",),
)
def permissible_duration_aluminium(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    permitted_temperature: Annotated[float, nom.permitted_temperature],
) -> Annotated[float, nom.permissible_duration]:
    """Solve the average-temperature form for the duration; the form holds for results up to 10 s."""
    theta_0, J, theta_2 = initial_temperature, current_density, permitted_temperature
    return 45700 / J**2 / (1 + 2 * (theta_0 + 225) / (theta_2 - theta_0))


@cell(
    title="Heat integral of the symmetrical current",
    source=Source(HEAT, "integral of the squared current density, without offset", "derived"),
    valid_for=(Range("current_density", at_least=0.0), Range("duration", at_least=0.0)),
    checks=(f"{TESTS}::test_without_offset_the_heat_is_density_squared_times_duration: against the offset form",),
)
def heat_integral(
    current_density: Annotated[float, nom.current_density], duration: Annotated[float, nom.duration]
) -> Annotated[float, nom.heat_integral]:
    """Squared symmetrical density times duration."""
    J, t = current_density, duration
    return J**2 * t


@cell(
    title="Heat integral with full decaying offset",
    source=Source(HEAT, "integral of the squared offset wave, alternating cross term left out", "derived"),
    valid_for=(
        Range("current_density", at_least=0.0),
        Range("duration", above=0.0),
        Range("offset_time_constant", above=0.0),
    ),
    checks=(f"{TESTS}::test_offset_form_is_the_integral_of_the_wave: within 0.007 s",),
)
def heat_integral_with_offset(
    current_density: Annotated[float, nom.current_density],
    duration: Annotated[float, nom.duration],
    offset_time_constant: Annotated[float, nom.offset_time_constant],
) -> Annotated[float, nom.heat_integral]:
    """Add up to one time constant to the duration; the standards leave the offset out."""
    J, t, tau = current_density, duration, offset_time_constant
    return J**2 * (t + tau * (1 - exp(-2 * t / tau)))


@cell(
    title="Conductor temperature from the heat integral, exact",
    source=Source(HEAT, "resistance proportional to temperature, all heat stored", "derived"),
    valid_for=(
        Range("initial_temperature", at_least=-60.0, at_most=400.0),
        Range("heat_integral", at_least=0.0),
        Range("thermal_constant", above=0.0),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
        Condition(
            "2 H below 3 C", lambda heat_integral, thermal_constant, **_: 2 * heat_integral < 3 * thermal_constant
        ),
    ),
    checks=(INTEGRATED,),
)
def exact_temperature(
    initial_temperature: Annotated[float, nom.initial_temperature],
    heat_integral: Annotated[float, nom.heat_integral],
    thermal_constant: Annotated[float, nom.thermal_constant],
    temperature_offset: Annotated[float, nom.temperature_offset],
) -> Annotated[float, nom.conductor_temperature]:
    """Solution of the heat balance with specific heat constant; C is twice the physical constant of the conductor."""
    theta_0, H, C, T_k = initial_temperature, heat_integral, thermal_constant, temperature_offset
    return (theta_0 + T_k) * exp(2 * H / C) - T_k


@cell(
    title="Conductor temperature from the heat integral with eddy loss, exact",
    source=Source(HEAT, "d.c. loss rising and eddy loss falling with temperature, all heat stored", "derived"),
    valid_for=(
        Range("initial_temperature", at_least=-60.0, at_most=400.0),
        Range("heat_integral", at_least=0.0),
        Range("thermal_constant", above=0.0),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
        Range("eddy_share", at_least=0.0, at_most=5.0),
        Range("reference_temperature", at_least=0.0, at_most=250.0),
        Condition(
            "2 H below 3 C", lambda heat_integral, thermal_constant, **_: 2 * heat_integral < 3 * thermal_constant
        ),
    ),
    terms={"y_0": nom.start_above_zero_resistance, "y_r": nom.reference_above_zero_resistance},
    checks=(INTEGRATED, f"{TESTS}::test_without_eddy_loss_the_form_is_the_exponential: at a share of zero"),
)
def exact_temperature_with_eddy_loss(
    initial_temperature: Annotated[float, nom.initial_temperature],
    heat_integral: Annotated[float, nom.heat_integral],
    thermal_constant: Annotated[float, nom.thermal_constant],
    temperature_offset: Annotated[float, nom.temperature_offset],
    eddy_share: Annotated[float, nom.eddy_share],
    reference_temperature: Annotated[float, nom.reference_temperature],
) -> Annotated[float, nom.conductor_temperature]:
    """Take the average of the winding, not its end turns; the share is that at the reference temperature."""
    theta_0, H, C, T_k, e_r, T_r = (
        initial_temperature, heat_integral, thermal_constant, temperature_offset, eddy_share, reference_temperature,
    )  # fmt: skip
    y_0 = theta_0 + T_k
    y_r = T_r + T_k
    return sqrt((y_0**2 + e_r * y_r**2) * exp(4 * H / C) - e_r * y_r**2) - T_k


@cell(
    title="Duration in which the conductor reaches the permitted temperature, exact",
    source=Source(HEAT, "resistance proportional to temperature, all heat stored, solved for the duration", "derived"),
    valid_for=(
        START,
        DENSITY,
        ABOVE_START,
        Range("thermal_constant", above=0.0),
        Range("temperature_offset", at_least=200.0, at_most=300.0),
    ),
    checks=(f"{TESTS}::test_exact_duration_reaches_the_permitted_temperature: put into the exact form",),
)
def exact_permissible_duration(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    permitted_temperature: Annotated[float, nom.permitted_temperature],
    thermal_constant: Annotated[float, nom.thermal_constant],
    temperature_offset: Annotated[float, nom.temperature_offset],
) -> Annotated[float, nom.permissible_duration]:
    """Without eddy loss and offset."""
    theta_0, J, theta_2, C, T_k = (
        initial_temperature, current_density, permitted_temperature, thermal_constant, temperature_offset,
    )  # fmt: skip
    return C / (2 * J**2) * log((theta_2 + T_k) / (theta_0 + T_k))


@cell(
    title="Temperature after a time without current",
    source=Source(HEAT, "one time constant from winding to liquid", "derived"),
    valid_for=(
        Range("conductor_temperature", at_least=-60.0),
        Range("initial_temperature", at_least=-60.0),
        Range("dead_time", at_least=0.0),
        Range("cooling_time_constant", above=0.0),
    ),
    checks=(f"{TESTS}::test_pause_cools_along_the_exponential: by numerical integration",),
)
def temperature_after_pause(
    conductor_temperature: Annotated[float, nom.conductor_temperature],
    initial_temperature: Annotated[float, nom.initial_temperature],
    dead_time: Annotated[float, nom.dead_time],
    cooling_time_constant: Annotated[float, nom.cooling_time_constant],
) -> Annotated[float, nom.temperature_before_next_shot]:
    """Fall back towards the temperature before the first fault; with minutes of time constant a pause cools little."""
    theta, theta_0, pause, tau_w = conductor_temperature, initial_temperature, dead_time, cooling_time_constant
    return theta_0 + (theta - theta_0) * exp(-pause / tau_w)

"""Rated and short-circuit currents of a unit behind a system; impedances and sequence forms are passed on."""

from __future__ import annotations

from math import pi, sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.cells.sequence_fault import (
    double_line_to_earth_current,
    line_to_earth_current,
    line_to_line_current,
    three_phase_fault_current,
    x_over_r_double_line_to_earth,
    x_over_r_line_to_earth,
    x_over_r_line_to_line,
)
from throughfault.cells.short_circuit_impedance import (
    POWER,
    THEORY,
    VOLTAGE,
    least_impedance_ratio,
    rated_impedance_ratio,
    reactance_ratio,
    resistance_ratio,
    system_impedance,
    system_reactance,
    system_resistance,
    system_share,
    transformer_impedance,
)
from throughfault.declare import Condition, Range, cell
from throughfault.sources import Source

__all__ = [
    "common_winding_current",
    "current_multiple",
    "delta_winding_current",
    "double_line_to_earth_current",
    "least_impedance_ratio",
    "line_to_earth_current",
    "line_to_line_current",
    "offset_time_constant",
    "rated_current",
    "rated_current_delta",
    "rated_current_single_phase",
    "rated_impedance_ratio",
    "reactance_ratio",
    "resistance_ratio",
    "symmetrical_short_circuit_current",
    "symmetrical_short_circuit_current_single_phase",
    "system_impedance",
    "system_reactance",
    "system_resistance",
    "system_share",
    "three_phase_fault_current",
    "transformer_impedance",
    "x_over_r_double_line_to_earth",
    "x_over_r_line_to_earth",
    "x_over_r_line_to_line",
    "x_over_r_of_circuit",
]

TESTS = "tests/cells/test_fault_current.py"


@cell(
    title="Rated current",
    source=Source(THEORY, "three-phase power", "derived"),
    valid_for=(POWER, VOLTAGE),
    checks=("tests/published/fault_current.toml::40 MVA unit at 132 kV: current of 174.95 A",),
)
def rated_current(
    rated_power: Annotated[float, nom.rated_power], rated_voltage: Annotated[float, nom.rated_voltage]
) -> Annotated[float, nom.rated_current]:
    """Line current of a three-phase unit; the thousand turns kA into A."""
    S, U = rated_power, rated_voltage
    return 1000 * S / (sqrt(3) * U)


@cell(
    title="Rated current of a single-phase unit",
    source=Source(THEORY, "single-phase power", "derived"),
    valid_for=(POWER, VOLTAGE),
    checks=(f"{TESTS}::test_single_phase_power_is_voltage_times_current: gives the power back",),
)
def rated_current_single_phase(
    rated_power: Annotated[float, nom.rated_power], rated_voltage: Annotated[float, nom.rated_voltage]
) -> Annotated[float, nom.rated_current]:
    """Take the rated voltage as that across the winding."""
    S, U = rated_power, rated_voltage
    return 1000 * S / U


@cell(
    title="Rated current of a delta winding",
    source=Source(THEORY, "symmetrical delta", "derived"),
    valid_for=(POWER, VOLTAGE),
    checks=(f"{TESTS}::test_rated_delta_current_is_the_line_current_over_root_three: against the line current",),
)
def rated_current_delta(
    rated_power: Annotated[float, nom.rated_power], rated_voltage: Annotated[float, nom.rated_voltage]
) -> Annotated[float, nom.rated_current]:
    """Take a third of the power at the voltage between lines."""
    S, U = rated_power, rated_voltage
    return 1000 * S / (3 * U)


@cell(
    title="Rated current of the common winding of an autotransformer",
    source=Source(THEORY, "currents at the tap of the winding", "derived"),
    valid_for=(
        Range("low_voltage_current", above=0.0),
        Range("high_voltage_current", above=0.0),
        Condition(
            "high-voltage current below low-voltage current",
            lambda low_voltage_current, high_voltage_current: high_voltage_current < low_voltage_current,
        ),
    ),
    checks=(f"{TESTS}::test_ampere_turns_of_an_autotransformer_balance: series against common winding",),
)
def common_winding_current(
    low_voltage_current: Annotated[float, nom.low_voltage_current],
    high_voltage_current: Annotated[float, nom.high_voltage_current],
) -> Annotated[float, nom.rated_current]:
    """Subtract the series current, which comes from the other side, from the load current."""
    I_X, I_H = low_voltage_current, high_voltage_current
    return I_X - I_H


@cell(
    title="Symmetrical short-circuit current, three-phase",
    source=Source(THEORY, "one phase of transformer and system (as in IEC 60076-5:2006, 4.1.2.1)", "derived"),
    valid_for=(
        VOLTAGE,
        Range("transformer_impedance", above=0.0),
        Range("system_impedance", at_least=0.0),
    ),
    checks=(
        "tests/published/fault_current.toml::40 MVA unit at 132 kV: behind 10 000 MVA",
        f"{TESTS}::test_three_phase_current_is_that_of_the_network: with equal angles",
    ),
)
def symmetrical_short_circuit_current(
    rated_voltage: Annotated[float, nom.rated_voltage],
    transformer_impedance: Annotated[float, nom.transformer_impedance],
    system_impedance: Annotated[float, nom.system_impedance],
) -> Annotated[float, nom.symmetrical_current]:
    """Terminal current of a two-winding unit; magnitudes are added, so equal angles are assumed."""
    U, Z_t, Z_s = rated_voltage, transformer_impedance, system_impedance
    return U / (sqrt(3) * (Z_t + Z_s))


@cell(
    title="Symmetrical short-circuit current, single-phase unit",
    source=Source(THEORY, "one loop of transformer and system", "derived"),
    valid_for=(
        VOLTAGE,
        Range("transformer_impedance", above=0.0),
        Range("system_impedance", at_least=0.0),
    ),
    checks=(f"{TESTS}::test_infinite_system_gives_rated_current_over_impedance: 8 % behind an infinite system",),
)
def symmetrical_short_circuit_current_single_phase(
    rated_voltage: Annotated[float, nom.rated_voltage],
    transformer_impedance: Annotated[float, nom.transformer_impedance],
    system_impedance: Annotated[float, nom.system_impedance],
) -> Annotated[float, nom.symmetrical_current]:
    """Short the other winding; equal angles are assumed."""
    U, Z_t, Z_s = rated_voltage, transformer_impedance, system_impedance
    return U / (Z_t + Z_s)


@cell(
    title="Current over rated current",
    source=Source(THEORY, "ratio", "derived"),
    valid_for=(Range("symmetrical_current", at_least=0.0), Range("rated_current", above=0.0)),
    checks=("tests/published/fault_current.toml::40 MVA unit at 132 kV: 1682.3 A over 174.95 A",),
)
def current_multiple(
    symmetrical_current: Annotated[float, nom.symmetrical_current], rated_current: Annotated[float, nom.rated_current]
) -> Annotated[float, nom.current_multiple]:
    """Multiple that ceilings, durations and through-fault curves refer to."""
    current, rated = symmetrical_current, rated_current
    return 1000 * current / rated


@cell(
    title="Current in a delta winding from the line current",
    source=Source(THEORY, "symmetrical delta", "derived"),
    valid_for=(Range("symmetrical_current", at_least=0.0),),
    checks=(f"{TESTS}::test_delta_current_is_that_of_the_network: star-delta unit",),
)
def delta_winding_current(
    symmetrical_current: Annotated[float, nom.symmetrical_current],
) -> Annotated[float, nom.winding_current]:
    """Take a balanced, three-phase line current."""
    current = symmetrical_current
    return current / sqrt(3)


@cell(
    title="X/R of transformer and system",
    source=Source(THEORY, "series resistances and reactances (as in IEC 60076-5:2006, 4.2.3)", "derived"),
    valid_for=(
        Range("transformer_reactance", above=0.0),
        Range("system_reactance", at_least=0.0),
        Range("transformer_resistance", above=0.0),
        Range("system_resistance", at_least=0.0),
    ),
    checks=(f"{TESTS}::test_ratio_of_the_circuit_lies_between_its_parts: for any parts",),
)
def x_over_r_of_circuit(
    transformer_reactance: Annotated[float, nom.transformer_reactance],
    system_reactance: Annotated[float, nom.system_reactance],
    transformer_resistance: Annotated[float, nom.transformer_resistance],
    system_resistance: Annotated[float, nom.system_resistance],
) -> Annotated[float, nom.x_over_r]:
    """Add reactances and resistances; the system's parts are zero where it is left out."""
    X_t, X_s, R_t, R_s = transformer_reactance, system_reactance, transformer_resistance, system_resistance
    return (X_t + X_s) / (R_t + R_s)


@cell(
    title="Time constant of the offset",
    source=Source(THEORY, "series resistance and reactance", "derived"),
    valid_for=(Range("x_over_r", at_least=0.0), Range("frequency", above=0.0)),
    checks=(f"{TESTS}::test_time_constant_is_inductance_over_resistance: 10 ohm over 0.5 ohm",),
)
def offset_time_constant(
    x_over_r: Annotated[float, nom.x_over_r], frequency: Annotated[float, nom.frequency]
) -> Annotated[float, nom.offset_time_constant]:
    """Decay of the d.c. part of the current."""
    ratio, f = x_over_r, frequency
    return ratio / (2 * pi * f)

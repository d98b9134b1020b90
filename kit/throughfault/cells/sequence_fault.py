"""Currents and X/R of a fault, from the sequence impedances at the fault."""

from __future__ import annotations

from math import hypot, sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Range, cell
from throughfault.sources import Source

SEQUENCE = (
    Range("resistance_1", at_least=0.0),
    Range("reactance_1", above=0.0),
    Range("resistance_0", at_least=0.0),
    Range("reactance_0", at_least=0.0),
)
FAULT_VOLTAGE = Range("fault_voltage", above=0.0)
TESTS = "tests/cells/test_sequence_fault.py"


@cell(
    title="Three-phase short-circuit current at the fault",
    source=Source("Wagner-Evans-1933", "three-phase fault, positive sequence alone", "derived"),
    valid_for=(FAULT_VOLTAGE, *SEQUENCE[:2]),
    checks=(
        f"{TESTS}::test_three_phase_fault_current_meets_the_conditions: in phase quantities",
        "tests/published/fault_current.toml::3.75 MVA unit of a textbook: 1500 A",
    ),
)
def three_phase_fault_current(
    fault_voltage: Annotated[float, nom.fault_voltage],
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
) -> Annotated[float, nom.symmetrical_current]:
    """Give the current at the fault; no other sequence carries any."""
    U, R_1, X_1 = fault_voltage, resistance_1, reactance_1
    return U / (sqrt(3) * hypot(R_1, X_1))


@cell(
    title="Line-to-line short-circuit current",
    source=Source("Wagner-Evans-1933", "line-to-line fault, equal positive and negative sequence", "derived"),
    valid_for=(FAULT_VOLTAGE, *SEQUENCE[:2]),
    checks=(f"{TESTS}::test_line_to_line_current_meets_the_conditions: in phase quantities",),
)
def line_to_line_current(
    fault_voltage: Annotated[float, nom.fault_voltage],
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
) -> Annotated[float, nom.symmetrical_current]:
    """Give the current at the fault; negative- equals positive-sequence impedance."""
    U, R_1, X_1 = fault_voltage, resistance_1, reactance_1
    return U / (2 * hypot(R_1, X_1))


@cell(
    title="Line-to-earth short-circuit current",
    source=Source("Wagner-Evans-1933", "line-to-earth fault, equal positive and negative sequence", "derived"),
    valid_for=(FAULT_VOLTAGE, *SEQUENCE),
    checks=(f"{TESTS}::test_line_to_earth_current_meets_the_conditions: in phase quantities",),
)
def line_to_earth_current(
    fault_voltage: Annotated[float, nom.fault_voltage],
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
    resistance_0: Annotated[float, nom.resistance_0],
    reactance_0: Annotated[float, nom.reactance_0],
) -> Annotated[float, nom.earth_current]:
    """Give the current at the fault, three times the zero-sequence current."""
    U, R_1, X_1, R_0, X_0 = fault_voltage, resistance_1, reactance_1, resistance_0, reactance_0
    return sqrt(3) * U / hypot(2 * R_1 + R_0, 2 * X_1 + X_0)


@cell(
    title="Current to earth of a double line-to-earth short circuit",
    source=Source("Wagner-Evans-1933", "double line-to-earth fault, equal positive and negative sequence", "derived"),
    valid_for=(FAULT_VOLTAGE, *SEQUENCE),
    checks=(f"{TESTS}::test_double_line_to_earth_current_meets_the_conditions: in phase quantities",),
)
def double_line_to_earth_current(
    fault_voltage: Annotated[float, nom.fault_voltage],
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
    resistance_0: Annotated[float, nom.resistance_0],
    reactance_0: Annotated[float, nom.reactance_0],
) -> Annotated[float, nom.earth_current]:
    """Give the current to earth, three times the zero-sequence current."""
    U, R_1, X_1, R_0, X_0 = fault_voltage, resistance_1, reactance_1, resistance_0, reactance_0
    return sqrt(3) * U / hypot(R_1 + 2 * R_0, X_1 + 2 * X_0)


@cell(
    title="X/R at a three-phase or line-to-line fault",
    source=Source("Wagner-Evans-1933", "three-phase and line-to-line fault, sequence networks", "derived"),
    valid_for=(Range("resistance_1", above=0.0), SEQUENCE[1]),
    checks=(f"{TESTS}::test_equal_sequences_have_the_ratio_of_one: with Z0 = Z1",),
)
def x_over_r_line_to_line(
    resistance_1: Annotated[float, nom.resistance_1], reactance_1: Annotated[float, nom.reactance_1]
) -> Annotated[float, nom.x_over_r]:
    """Ratio of the driving-point impedance, the same as at a three-phase fault."""
    R_1, X_1 = resistance_1, reactance_1
    return X_1 / R_1


@cell(
    title="X/R at a line-to-earth fault",
    source=Source("Wagner-Evans-1933", "line-to-earth fault, sequence networks in series", "derived"),
    valid_for=(
        Range("resistance_1", above=0.0),
        *SEQUENCE[1:],
    ),
    checks=(f"{TESTS}::test_equal_sequences_have_the_ratio_of_one: with Z0 = Z1",),
)
def x_over_r_line_to_earth(
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
    resistance_0: Annotated[float, nom.resistance_0],
    reactance_0: Annotated[float, nom.reactance_0],
) -> Annotated[float, nom.x_over_r]:
    """Ratio of the driving-point impedance, two positive- and one zero-sequence network in series."""
    R_1, X_1, R_0, X_0 = resistance_1, reactance_1, resistance_0, reactance_0
    return (2 * X_1 + X_0) / (2 * R_1 + R_0)


@cell(
    title="X/R at a double line-to-earth fault",
    source=Source("Wagner-Evans-1933", "double line-to-earth fault, sequence networks", "derived"),
    valid_for=(Range("resistance_1", above=0.0), *SEQUENCE[1:]),
    terms={
        "R_p": nom.resistance_parallel,
        "X_p": nom.reactance_parallel,
    },
    checks=(
        f"{TESTS}::test_double_line_ratio_is_that_of_the_complex_impedance: in complex arithmetic",
        f"{TESTS}::test_equal_sequences_have_the_ratio_of_one: with Z0 = Z1",
    ),
)
def x_over_r_double_line_to_earth(
    resistance_1: Annotated[float, nom.resistance_1],
    reactance_1: Annotated[float, nom.reactance_1],
    resistance_0: Annotated[float, nom.resistance_0],
    reactance_0: Annotated[float, nom.reactance_0],
) -> Annotated[float, nom.x_over_r]:
    """Ratio seen by the positive sequence: it is in series with the negative and zero sequences in parallel."""
    R_1, X_1, R_0, X_0 = resistance_1, reactance_1, resistance_0, reactance_0
    R_p = (R_1 * (R_0**2 + X_0**2) + R_0 * (R_1**2 + X_1**2)) / ((R_1 + R_0) ** 2 + (X_1 + X_0) ** 2)
    X_p = (X_1 * (R_0**2 + X_0**2) + X_0 * (R_1**2 + X_1**2)) / ((R_1 + R_0) ** 2 + (X_1 + X_0) ** 2)
    return (X_1 + X_p) / (R_1 + R_p)

"""Rated quantities, impedances and short-circuit currents of a unit behind a system."""

from __future__ import annotations

from math import hypot, pi, sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Condition, Range, cell
from throughfault.sources import Source

POWER = Range("rated_power", above=0.0)
VOLTAGE = Range("rated_voltage", above=0.0)
THEORY = "CircuitTheory"
IEC = "IEC60076-5:2006"
EXAMPLE = "tests/published/fault_current.toml: the 40 MVA, 132 kV unit"


@cell(
    title="Rated current",
    source=Source(THEORY, "three-phase power", "derived"),
    valid_for=(POWER, VOLTAGE),
    checks=(EXAMPLE,),
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
    checks=("tests/cells/test_fault_current.py: power comes back as voltage times current",),
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
    checks=("tests/cells/test_fault_current.py: the line current over the square root of three",),
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
    checks=("tests/cells/test_fault_current.py: ampere-turns of series and common winding balance",),
)
def common_winding_current(
    low_voltage_current: Annotated[float, nom.low_voltage_current],
    high_voltage_current: Annotated[float, nom.high_voltage_current],
) -> Annotated[float, nom.rated_current]:
    """Subtract the series current, which comes from the other side, from the load current."""
    I_X, I_H = low_voltage_current, high_voltage_current
    return I_X - I_H


@cell(
    title="Impedance of the system",
    source=Source(IEC, "4.1.2.1", "recalled"),
    valid_for=(Range("system_voltage", above=0.0), Range("short_circuit_power", above=0.0)),
    checks=(EXAMPLE,),
)
def system_impedance(
    system_voltage: Annotated[float, nom.system_voltage], short_circuit_power: Annotated[float, nom.short_circuit_power]
) -> Annotated[float, nom.system_impedance]:
    """Impedance per phase at the system's rated voltage; no voltage factor is applied."""
    U, S = system_voltage, short_circuit_power
    return U**2 / S


@cell(
    title="Short-circuit impedance of the transformer",
    source=Source(IEC, "4.1.2.1", "recalled"),
    valid_for=(Range("impedance_ratio", above=0.0), POWER, VOLTAGE),
    checks=(EXAMPLE,),
)
def transformer_impedance(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    rated_voltage: Annotated[float, nom.rated_voltage],
    rated_power: Annotated[float, nom.rated_power],
) -> Annotated[float, nom.transformer_impedance]:
    """Impedance per phase of the tapping considered, on the side of the voltage."""
    z, U, S = impedance_ratio, rated_voltage, rated_power
    return z * U**2 / (100 * S)


@cell(
    title="Symmetrical short-circuit current, three-phase",
    source=Source(IEC, "4.1.2.1", "recalled"),
    valid_for=(
        VOLTAGE,
        Range("transformer_impedance", above=0.0),
        Range("system_impedance", at_least=0.0),
    ),
    checks=(EXAMPLE, "tests/cells/test_fault_current.py: against the fault network with equal angles"),
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
    checks=("tests/cells/test_fault_current.py: rated current over impedance when the system is infinite",),
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
    title="Share of the system in the impedance",
    source=Source(IEC, "3.2.2.2", "recalled"),
    valid_for=(Range("transformer_impedance", above=0.0), Range("system_impedance", at_least=0.0)),
    checks=("tests/published/fault_current.toml: the 630 kVA and the 2500 kVA unit behind 500 MVA",),
)
def system_share(
    system_impedance: Annotated[float, nom.system_impedance],
    transformer_impedance: Annotated[float, nom.transformer_impedance],
) -> Annotated[float, nom.system_share]:
    """Decides, with the category, whether the system may be left out."""
    Z_s, Z_t = system_impedance, transformer_impedance
    return 100 * Z_s / Z_t


@cell(
    title="Current over rated current",
    source=Source(THEORY, "ratio", "derived"),
    valid_for=(Range("symmetrical_current", at_least=0.0), Range("rated_current", above=0.0)),
    checks=(EXAMPLE,),
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
    checks=("tests/cells/test_fault_current.py: against the fault network of a delta",),
)
def delta_winding_current(
    symmetrical_current: Annotated[float, nom.symmetrical_current],
) -> Annotated[float, nom.winding_current]:
    """Take a balanced, three-phase line current."""
    current = symmetrical_current
    return current / sqrt(3)


@cell(
    title="Resistance from the load loss",
    source=Source("IEC60076-1:2011", "load loss and short-circuit impedance", "common practice"),
    valid_for=(Range("load_loss", at_least=0.0), Range("base_power", above=0.0)),
    checks=("tests/test_published_values.py: the two low-voltage transformers of the network standard",),
)
def resistance_ratio(
    load_loss: Annotated[float, nom.load_loss], base_power: Annotated[float, nom.base_power]
) -> Annotated[float, nom.resistance_ratio]:
    """A.c. resistance in per cent; kW over MVA gives a tenth of a per cent."""
    P, S = load_loss, base_power
    return P / (10 * S)


@cell(
    title="Reactance from impedance and resistance",
    source=Source(THEORY, "right triangle of impedance", "derived"),
    valid_for=(
        Range("impedance_ratio", above=0.0),
        Range("resistance_ratio", at_least=0.0),
        Condition("r_t not above z_t", lambda impedance_ratio, resistance_ratio: resistance_ratio <= impedance_ratio),
    ),
    checks=("tests/test_published_values.py: the two low-voltage transformers of the network standard",),
)
def reactance_ratio(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    resistance_ratio: Annotated[float, nom.resistance_ratio],
) -> Annotated[float, nom.reactance_ratio]:
    """Reactance in per cent."""
    z, r = impedance_ratio, resistance_ratio
    return sqrt(z**2 - r**2)


@cell(
    title="Impedance on the rated power",
    source=Source(THEORY, "change of base", "derived"),
    valid_for=(Range("impedance_ratio", above=0.0), POWER, Range("base_power", above=0.0)),
    checks=("tests/cells/test_fault_current.py: the impedance in ohm stays",),
)
def rated_impedance_ratio(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    rated_power: Annotated[float, nom.rated_power],
    base_power: Annotated[float, nom.base_power],
) -> Annotated[float, nom.rated_impedance_ratio]:
    """Change the base; the voltage stays."""
    z, S, S_b = impedance_ratio, rated_power, base_power
    return z * S / S_b


@cell(
    title="Impedance less its tolerance",
    source=Source("IEC60076-1:2011", "Table 1", "recalled"),
    valid_for=(Range("impedance_ratio", above=0.0), Range("impedance_tolerance", at_least=0.0, below=100.0)),
    checks=("tests/cells/test_fault_current.py: no tolerance, no change",),
)
def least_impedance_ratio(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    impedance_tolerance: Annotated[float, nom.impedance_tolerance],
) -> Annotated[float, nom.least_impedance_ratio]:
    """Give the impedance of the greatest current before the unit has been measured."""
    z, tolerance = impedance_ratio, impedance_tolerance
    return z * (1 - tolerance / 100)


@cell(
    title="Resistance of the system",
    source=Source(THEORY, "right triangle of impedance", "derived"),
    valid_for=(Range("system_impedance", at_least=0.0), Range("system_x_over_r", at_least=0.0)),
    checks=("tests/cells/test_fault_current.py: resistance and reactance give the impedance back",),
)
def system_resistance(
    system_impedance: Annotated[float, nom.system_impedance], system_x_over_r: Annotated[float, nom.system_x_over_r]
) -> Annotated[float, nom.system_resistance]:
    """Resistive part of the system's impedance."""
    Z, ratio = system_impedance, system_x_over_r
    return Z / sqrt(1 + ratio**2)


@cell(
    title="Reactance of the system",
    source=Source(THEORY, "right triangle of impedance", "derived"),
    valid_for=(Range("system_impedance", at_least=0.0), Range("system_x_over_r", at_least=0.0)),
    checks=("tests/cells/test_fault_current.py: resistance and reactance give the impedance back",),
)
def system_reactance(
    system_impedance: Annotated[float, nom.system_impedance], system_x_over_r: Annotated[float, nom.system_x_over_r]
) -> Annotated[float, nom.system_reactance]:
    """Reactive part of the system's impedance."""
    Z, ratio = system_impedance, system_x_over_r
    return Z * ratio / sqrt(1 + ratio**2)


@cell(
    title="X/R of transformer and system",
    source=Source(IEC, "4.2.3", "recalled"),
    valid_for=(
        Range("transformer_reactance", above=0.0),
        Range("system_reactance", at_least=0.0),
        Range("transformer_resistance", above=0.0),
        Range("system_resistance", at_least=0.0),
    ),
    checks=("tests/cells/test_fault_current.py: between the two ratios it is made of",),
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
    checks=("tests/cells/test_fault_current.py: inductance over resistance",),
)
def offset_time_constant(
    x_over_r: Annotated[float, nom.x_over_r], frequency: Annotated[float, nom.frequency]
) -> Annotated[float, nom.offset_time_constant]:
    """Decay of the d.c. part of the current."""
    ratio, f = x_over_r, frequency
    return ratio / (2 * pi * f)


SEQUENCE = (
    Range("resistance_1", at_least=0.0),
    Range("reactance_1", above=0.0),
    Range("resistance_0", at_least=0.0),
    Range("reactance_0", at_least=0.0),
)
FAULT_VOLTAGE = Range("fault_voltage", above=0.0)
AGAINST_NETWORK = "tests/cells/test_fault_current.py: against the boundary conditions of the fault in phase quantities"


@cell(
    title="Three-phase short-circuit current at the fault",
    source=Source("Wagner-Evans-1933", "three-phase fault, positive sequence alone", "derived"),
    valid_for=(FAULT_VOLTAGE, *SEQUENCE[:2]),
    checks=(AGAINST_NETWORK,),
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
    checks=(AGAINST_NETWORK,),
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
    checks=(AGAINST_NETWORK,),
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
    checks=(AGAINST_NETWORK,),
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
    title="X/R at a line-to-earth fault",
    source=Source("Wagner-Evans-1933", "line-to-earth fault, sequence networks in series", "derived"),
    valid_for=(
        Range("resistance_1", above=0.0),
        *SEQUENCE[1:],
    ),
    checks=("tests/cells/test_fault_current.py: equal sequences give the ratio of one",),
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
    title="X/R at a line-to-line fault",
    source=Source("Wagner-Evans-1933", "line-to-line fault, sequence networks in series", "derived"),
    valid_for=(Range("resistance_1", above=0.0), SEQUENCE[1]),
    checks=("tests/cells/test_fault_current.py: equal sequences give the ratio of one",),
)
def x_over_r_line_to_line(
    resistance_1: Annotated[float, nom.resistance_1], reactance_1: Annotated[float, nom.reactance_1]
) -> Annotated[float, nom.x_over_r]:
    """Ratio of the driving-point impedance, the same as at a three-phase fault."""
    R_1, X_1 = resistance_1, reactance_1
    return X_1 / R_1


@cell(
    title="X/R at a double line-to-earth fault",
    source=Source("Wagner-Evans-1933", "double line-to-earth fault, sequence networks", "derived"),
    valid_for=(Range("resistance_1", above=0.0), *SEQUENCE[1:]),
    terms={
        "R_p": nom.resistance_parallel,
        "X_p": nom.reactance_parallel,
    },
    checks=("tests/cells/test_fault_current.py: equal sequences give the ratio of one",),
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

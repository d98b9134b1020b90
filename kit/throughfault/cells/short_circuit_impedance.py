"""Impedances of a unit and of the system behind it."""

from __future__ import annotations

from math import sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Condition, Range, cell
from throughfault.sources import Source

POWER = Range("rated_power", above=0.0)
VOLTAGE = Range("rated_voltage", above=0.0)
THEORY = "CircuitTheory"
TESTS = "tests/cells/test_short_circuit_impedance.py"


@cell(
    title="Impedance on the rated power",
    source=Source(THEORY, "change of base", "derived"),
    valid_for=(Range("impedance_ratio", above=0.0), POWER, Range("base_power", above=0.0)),
    checks=(
        f"{TESTS}::test_impedance_in_ohm_stays_on_another_base: the ohms stay",
        "tests/published/fault_current.toml::three-winding unit of 15 MVA: 8 % on 10 MVA is 12 %",
    ),
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
    source=Source(THEORY, "lower end of the tolerance (as in IEC 60076-1:2011, Table 1)", "derived"),
    valid_for=(Range("impedance_ratio", above=0.0), Range("impedance_tolerance", at_least=0.0, below=100.0)),
    checks=(f"{TESTS}::test_no_tolerance_leaves_the_impedance: with and without a tolerance",),
)
def least_impedance_ratio(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    impedance_tolerance: Annotated[float, nom.impedance_tolerance],
) -> Annotated[float, nom.least_impedance_ratio]:
    """Give the impedance of the greatest current before the unit has been measured."""
    z, tolerance = impedance_ratio, impedance_tolerance
    return z * (1 - tolerance / 100)


@cell(
    title="Resistance from the load loss",
    source=Source(THEORY, "loss at rated current over rated power (as in IEC 60076-1:2011)", "derived"),
    valid_for=(Range("load_loss", at_least=0.0), Range("base_power", above=0.0)),
    checks=(
        "tests/test_published_values.py::test_low_voltage_transformers_of_the_network_standard: 630 kVA and 400 kVA",
    ),
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
    checks=(
        "tests/test_published_values.py::test_low_voltage_transformers_of_the_network_standard: 630 kVA and 400 kVA",
    ),
)
def reactance_ratio(
    impedance_ratio: Annotated[float, nom.impedance_ratio],
    resistance_ratio: Annotated[float, nom.resistance_ratio],
) -> Annotated[float, nom.reactance_ratio]:
    """Reactance in per cent."""
    z, r = impedance_ratio, resistance_ratio
    return sqrt(z**2 - r**2)


@cell(
    title="Short-circuit impedance of the transformer",
    source=Source(THEORY, "per cent of the rated impedance (as in IEC 60076-5:2006, 4.1.2.1)", "derived"),
    valid_for=(Range("impedance_ratio", above=0.0), POWER, VOLTAGE),
    checks=(
        "tests/published/fault_current.toml::40 MVA unit at 132 kV: 10 % per phase",
        "tests/published/fault_current.toml::20 kVA unit as autotransformer: 0.0525 ohm of a textbook",
    ),
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
    title="Impedance of the system",
    source=Source(THEORY, "voltage and power of the network (as in IEC 60076-5:2006, 4.1.2.1)", "derived"),
    valid_for=(Range("system_voltage", above=0.0), Range("short_circuit_power", above=0.0)),
    checks=("tests/published/fault_current.toml::40 MVA unit at 132 kV: network of 10 000 MVA",),
)
def system_impedance(
    system_voltage: Annotated[float, nom.system_voltage], short_circuit_power: Annotated[float, nom.short_circuit_power]
) -> Annotated[float, nom.system_impedance]:
    """Impedance per phase at the system's rated voltage; no voltage factor is applied."""
    U, S = system_voltage, short_circuit_power
    return U**2 / S


@cell(
    title="Resistance of the system",
    source=Source(THEORY, "right triangle of impedance", "derived"),
    valid_for=(Range("system_impedance", at_least=0.0), Range("system_x_over_r", at_least=0.0)),
    checks=(f"{TESTS}::test_resistance_and_reactance_give_the_impedance_back: for any X/R",),
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
    checks=(f"{TESTS}::test_resistance_and_reactance_give_the_impedance_back: for any X/R",),
)
def system_reactance(
    system_impedance: Annotated[float, nom.system_impedance], system_x_over_r: Annotated[float, nom.system_x_over_r]
) -> Annotated[float, nom.system_reactance]:
    """Reactive part of the system's impedance."""
    Z, ratio = system_impedance, system_x_over_r
    return Z * ratio / sqrt(1 + ratio**2)


@cell(
    title="Share of the system in the impedance",
    source=Source(THEORY, "ratio of impedances (as in IEC 60076-5:2006, 3.2.2.2)", "derived"),
    valid_for=(Range("transformer_impedance", above=0.0), Range("system_impedance", at_least=0.0)),
    checks=("tests/published/fault_current.toml::distribution units behind 500 MVA: 630 kVA and 2500 kVA",),
)
def system_share(
    system_impedance: Annotated[float, nom.system_impedance],
    transformer_impedance: Annotated[float, nom.transformer_impedance],
) -> Annotated[float, nom.system_share]:
    """Decides, with the category, whether the system may be left out."""
    Z_s, Z_t = system_impedance, transformer_impedance
    return 100 * Z_s / Z_t

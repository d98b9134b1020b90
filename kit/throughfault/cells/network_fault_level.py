"""Factors of the calculation of network fault levels, for comparison; not for the withstand duty of a unit."""

from __future__ import annotations

from math import exp, sqrt
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Range, cell
from throughfault.sources import Source


@cell(
    title="Peak factor of the network calculation",
    source=Source("IEC60909-0:2016", "4.3.1", "recalled"),
    valid_for=(Range("x_over_r", above=0.0),),
    checks=(
        "tests/published/peak_factor.toml::3.75 MVA unit of a textbook: kappa 1.38, to 0.8 %",
        "tests/cells/test_network_fault_level.py::test_network_factor_lies_near_the_withstand_table: from X/R 2 on",
    ),
)
def peak_factor_of_network(x_over_r: Annotated[float, nom.x_over_r]) -> Annotated[float, nom.peak_factor]:
    """Shown beside the factor that decides."""
    ratio = x_over_r
    return (1.02 + 0.98 * exp(-3 / ratio)) * sqrt(2)


@cell(
    title="Impedance correction of a network transformer",
    source=Source("IEC60909-0:2016", "3.3.3", "recalled"),
    valid_for=(Range("reactance_ratio", above=0.0, at_most=100.0), Range("voltage_factor", at_least=0.9, at_most=1.1)),
    checks=("tests/cells/test_network_fault_level.py::test_correction_by_reactance: 4 to 15 %",),
)
def network_impedance_correction(
    reactance_ratio: Annotated[float, nom.reactance_ratio], voltage_factor: Annotated[float, nom.voltage_factor]
) -> Annotated[float, nom.impedance_correction]:
    """Belongs to fault levels of networks; neither it nor the voltage factor enters the duty of this review."""
    x, c = reactance_ratio, voltage_factor
    return 0.95 * c / (1 + 0.6 * x / 100)

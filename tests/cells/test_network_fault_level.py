"""Factors of the network calculation, shown beside those of the withstand duty."""

import math

import pytest

from throughfault.cells.network_fault_level import network_impedance_correction, peak_factor_of_network
from throughfault.tables import table


def test_network_factor_lies_near_the_withstand_table():
    """peak_factor_of_network within 0.6 % of the withstand standard's table from X/R 2 on (own arithmetic)."""
    for row in table("iec60076_5_2006_peak_factor").rows:
        if row["x_over_r"] >= 2.0:
            assert peak_factor_of_network(row["x_over_r"]) == pytest.approx(row["peak_factor"], rel=0.0065)


def test_network_factor_ends_at_twice_root_two():
    """Without resistance kappa is 2."""
    assert peak_factor_of_network(1e9) == pytest.approx(2 * math.sqrt(2))


@pytest.mark.parametrize(
    ("reactance", "factor"), [(4.0, 1.021), (6.0, 1.009), (10.0, 0.986), (12.5, 0.972), (15.0, 0.959)]
)
def test_correction_by_reactance(reactance, factor):
    """network_impedance_correction with c = 1.1 (own arithmetic: 1.045 / (1 + 0.6 x))."""
    assert network_impedance_correction(reactance, 1.1) == pytest.approx(factor, abs=0.00055)

"""Impedances: identities and limiting cases."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.short_circuit_impedance import (
    least_impedance_ratio,
    rated_impedance_ratio,
    system_reactance,
    system_resistance,
    transformer_impedance,
)

SIZES = st.floats(0.05, 50.0)


@given(SIZES, st.floats(0.0, 60.0))
def test_resistance_and_reactance_give_the_impedance_back(z, ratio):
    """R^2 + X^2 = Z^2 and X / R is the ratio; system_resistance and system_reactance belong together."""
    r, x = system_resistance(z, ratio), system_reactance(z, ratio)
    assert math.hypot(r, x) == pytest.approx(z)
    assert x == pytest.approx(ratio * r)


def test_no_tolerance_leaves_the_impedance():
    """least_impedance_ratio with and without a tolerance."""
    assert least_impedance_ratio(12.5, 0.0) == 12.5
    assert least_impedance_ratio(12.5, 10.0) == pytest.approx(11.25)


def test_impedance_in_ohm_stays_on_another_base():
    """rated_impedance_ratio changes the base only."""
    on_base = transformer_impedance(12.5, 132.0, 40.0)
    assert transformer_impedance(rated_impedance_ratio(12.5, 60.0, 40.0), 132.0, 60.0) == pytest.approx(on_base)

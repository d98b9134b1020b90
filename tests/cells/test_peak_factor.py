"""Peak factors: closed form, exact first maximum and table."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from throughfault.cells.peak_factor import (
    peak_factor_closed_form,
    peak_factor_exact,
    peak_factor_from_table,
    peak_factor_table_range,
    peak_short_circuit_current,
)
from throughfault.errors import OutsideValidity
from throughfault.quantities import Quantity
from throughfault.tables import table


@pytest.mark.parametrize("ratio", [0.3, 1.0, 2.0, 5.0, 14.0, 40.0])
def test_exact_factor_is_the_integrated_circuit(ratio):
    """peak_factor_exact against integration of L di/dt + R i = sqrt2 U sin(w t) from voltage zero, I = 1."""
    omega = 2 * math.pi * 50.0
    z = math.hypot(1.0, ratio)

    def rate(t, i):
        return (math.sqrt(2) * z * math.sin(omega * t) - i) * omega / ratio

    run = solve_ivp(rate, (0.0, 0.02), [0.0], rtol=1e-11, atol=1e-12, dense_output=True)
    time = np.linspace(0.0, 0.02, 200_001)
    assert peak_factor_exact(ratio) == pytest.approx(float(run.sol(time)[0].max()), abs=1e-7)


@given(st.floats(0.2, 500.0))
def test_closed_form_lies_just_below_the_exact_maximum(ratio):
    """peak_factor_closed_form: never above, at most 1 % below."""
    closed, exact = peak_factor_closed_form(ratio), peak_factor_exact(ratio)
    assert exact * 0.99 < closed <= exact * (1 + 1e-12)


@pytest.mark.parametrize("ratio", [1e-9, 1e8, 1e300])
def test_closed_form_holds_for_any_ratio(ratio):
    """peak_factor_closed_form as a worked step: between root two and twice that, however extreme X/R."""
    factor = peak_factor_closed_form.step("a", x_over_r=Quantity(ratio, "1")).result
    assert math.sqrt(2) <= factor.value <= 2 * math.sqrt(2)
    peak_short_circuit_current.step("b", symmetrical_current=Quantity(1.0, "kA"), peak_factor=factor)


def test_range_is_that_of_the_table():
    """peak_factor_table_range: the first and the last X/R of the table."""
    ratios = table("iec60076_5_2006_peak_factor").column("x_over_r")
    assert peak_factor_table_range() == (min(ratios), max(ratios)) == (1.0, 14.0)


def test_ends_of_the_exact_factor():
    """Without reactance the factor is root two, without resistance twice that."""
    assert peak_factor_exact(0.0) == pytest.approx(math.sqrt(2))
    assert peak_factor_exact(math.inf) == pytest.approx(2 * math.sqrt(2))


def test_table_returns_its_rows_and_a_straight_line_between():
    """peak_factor_from_table: rows as tabled; halfway between X/R 8 and 10 halfway between 2.38 and 2.46."""
    rows = table("iec60076_5_2006_peak_factor").rows
    assert [peak_factor_from_table(row["x_over_r"]) for row in rows] == [row["peak_factor"] for row in rows]
    assert peak_factor_from_table(9.0) == pytest.approx(2.42)


@pytest.mark.parametrize("ratio", [0.999, 14.001, math.nan])
def test_table_is_not_extrapolated(ratio):
    """Outside its rows the table refuses."""
    with pytest.raises(OutsideValidity) as raised:
        peak_factor_from_table(ratio)
    assert str(raised.value) == (
        "peak_factor_from_table: 'x_over_r' must be at least 1 and at most 14 (IEC60076-5:2006, 4.2.3, Table 4)."
    )


def test_peak_is_current_times_factor():
    """peak_short_circuit_current: 10 kA with 2.55."""
    assert peak_short_circuit_current(10.0, 2.55) == pytest.approx(25.5)

"""Through-fault duration: the two parts and how they join."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.through_fault import (
    corner_current,
    corner_duration,
    corner_thermal_duration,
    fault_impedance,
    mechanical_duration,
    thermal_curve_duration,
    thermal_duration,
)
from throughfault.errors import OutsideValidity
from throughfault.tables import table


@given(st.floats(2.0, 40.0))
def test_two_seconds_at_the_greatest_current(multiple):
    """mechanical_duration at 1/Z, with Z from fault_impedance, is 2 s; 0.5 s would come of the wrong constant 1/(2 Z^2)."""
    assert mechanical_duration(multiple, fault_impedance(multiple)) == pytest.approx(2.0)


@given(st.sampled_from([50.0, 70.0]), st.floats(0.03, 0.3))
def test_corner_lies_on_both_parts(share, impedance):
    """corner_current, corner_duration and corner_thermal_duration lie on the mechanical part and on 1250/I^2."""
    corner = corner_current(share, impedance)
    assert mechanical_duration(corner, impedance) == pytest.approx(corner_duration(share))
    assert thermal_duration(corner) == pytest.approx(corner_thermal_duration(share, impedance))


def test_curve_returns_its_points():
    """thermal_curve_duration at the tabled points, falling between them."""
    rows = table("ieee_c57_109_2018_thermal_curve").rows
    assert [thermal_curve_duration(row["multiple"]) for row in rows] == pytest.approx([r["duration"] for r in rows])
    between = thermal_curve_duration(np.geomspace(2.0, 25.0, 50))
    assert np.all(np.diff(between) < 0.0)


def test_upper_curve_is_the_constant_integral():
    """From 4.75 times base on the curve follows 1250/I^2 within the rounding of its points."""
    for multiple in (6.0, 9.0, 15.0, 24.0):
        assert thermal_curve_duration(multiple) == pytest.approx(thermal_duration(multiple), rel=0.06)


@pytest.mark.parametrize("multiple", [1.99, 25.01])
def test_curve_is_not_extrapolated(multiple):
    """Outside its points the curve refuses."""
    with pytest.raises(OutsideValidity) as raised:
        thermal_curve_duration(multiple)
    assert str(raised.value) == (
        "thermal_curve_duration: 'current_multiple' must be at least 2 and at most 25 (IEEEC57.109-2018)."
    )

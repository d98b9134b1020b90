"""Faults against their boundary conditions in phase quantities, and limiting cases of X/R."""

import cmath
import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.sequence_fault import (
    double_line_to_earth_current,
    line_to_earth_current,
    line_to_line_current,
    three_phase_fault_current,
    x_over_r_double_line_to_earth,
    x_over_r_line_to_earth,
    x_over_r_line_to_line,
)

A = cmath.exp(2j * math.pi / 3)
SIZES = st.floats(0.05, 50.0)


def behind(z1, z0, voltage, rows):
    """Phase currents into a fault behind Z1 = Z2 and Z0, from the fault's own conditions; `rows` act on (V, I)."""
    turn = np.array([[1, 1, 1], [1, A * A, A], [1, A, A * A]])
    z = turn @ np.diag([z0, z1, z1]) @ np.linalg.inv(turn)
    emf = voltage / math.sqrt(3) * np.array([1, A * A, A])
    matrix, right = [], []
    for v, i in rows:  # v.V + i.I = 0 with V = E - Z I
        matrix.append(np.asarray(i) - np.asarray(v) @ z)
        right.append(-np.asarray(v) @ emf)
    return np.linalg.solve(np.array(matrix), np.array(right))


NO, V_A, V_B, V_C = [0, 0, 0], [1, 0, 0], [0, 1, 0], [0, 0, 1]


@given(SIZES, SIZES, SIZES, SIZES)
def test_line_to_earth_current_meets_the_conditions(r1, x1, r0, x0):
    """V_a = 0, I_b = I_c = 0."""
    current = behind(complex(r1, x1), complex(r0, x0), 33.0, [(V_A, NO), (NO, V_B), (NO, V_C)])
    assert line_to_earth_current(33.0, r1, x1, r0, x0) == pytest.approx(abs(current[0]), rel=1e-9)


@given(SIZES, SIZES, SIZES, SIZES)
def test_three_phase_fault_current_meets_the_conditions(r1, x1, r0, x0):
    """V_a = V_b = V_c = 0; the zero sequence has no part."""
    current = behind(complex(r1, x1), complex(r0, x0), 33.0, [(V_A, NO), (V_B, NO), (V_C, NO)])
    assert np.abs(current) == pytest.approx(three_phase_fault_current(33.0, r1, x1), rel=1e-9)


@given(SIZES, SIZES, SIZES, SIZES)
def test_line_to_line_current_meets_the_conditions(r1, x1, r0, x0):
    """V_b = V_c, I_b + I_c = 0, I_a = 0; the zero sequence has no part."""
    current = behind(complex(r1, x1), complex(r0, x0), 33.0, [([0, 1, -1], NO), (NO, [0, 1, 1]), (NO, V_A)])
    assert line_to_line_current(33.0, r1, x1) == pytest.approx(abs(current[1]), rel=1e-9)


@given(SIZES, SIZES, SIZES, SIZES)
def test_double_line_to_earth_current_meets_the_conditions(r1, x1, r0, x0):
    """V_b = V_c = 0, I_a = 0; the current to earth is I_b + I_c."""
    current = behind(complex(r1, x1), complex(r0, x0), 33.0, [(V_B, NO), (V_C, NO), (NO, V_A)])
    assert double_line_to_earth_current(33.0, r1, x1, r0, x0) == pytest.approx(abs(current.sum()), rel=1e-9)


@given(SIZES, SIZES)
def test_equal_sequences_have_the_ratio_of_one(r, x):
    """With Z0 = Z1 every fault sees the same X/R."""
    for ratio in (
        x_over_r_line_to_earth(r, x, r, x), x_over_r_double_line_to_earth(r, x, r, x), x_over_r_line_to_line(r, x),
    ):  # fmt: skip
        assert ratio == pytest.approx(x / r, rel=1e-12)


@given(SIZES, SIZES, SIZES, SIZES)
def test_double_line_ratio_is_that_of_the_complex_impedance(r1, x1, r0, x0):
    """Z1 + Z1 Z0 / (Z1 + Z0) in complex arithmetic."""
    z1, z0 = complex(r1, x1), complex(r0, x0)
    z = z1 + z1 * z0 / (z1 + z0)
    assert x_over_r_double_line_to_earth(r1, x1, r0, x0) == pytest.approx(z.imag / z.real, rel=1e-9)

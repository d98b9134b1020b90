"""Currents and impedances: identities, limiting cases, and faults against their boundary conditions in phase quantities."""

import cmath
import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.fault_current import (
    common_winding_current,
    delta_winding_current,
    double_line_to_earth_current,
    least_impedance_ratio,
    line_to_earth_current,
    line_to_line_current,
    offset_time_constant,
    rated_current,
    rated_current_delta,
    rated_current_single_phase,
    rated_impedance_ratio,
    symmetrical_short_circuit_current,
    symmetrical_short_circuit_current_single_phase,
    system_impedance,
    system_reactance,
    system_resistance,
    three_phase_fault_current,
    transformer_impedance,
    x_over_r_double_line_to_earth,
    x_over_r_line_to_earth,
    x_over_r_line_to_line,
    x_over_r_of_circuit,
)
from throughfault.cells.fault_network import fault_currents
from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding

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


@given(SIZES, st.floats(0.0, 60.0))
def test_resistance_and_reactance_give_the_impedance_back(z, ratio):
    """R^2 + X^2 = Z^2 and X / R is the ratio; system_resistance and system_reactance belong together."""
    r, x = system_resistance(z, ratio), system_reactance(z, ratio)
    assert math.hypot(r, x) == pytest.approx(z)
    assert x == pytest.approx(ratio * r)


@given(SIZES, SIZES, SIZES, SIZES)
def test_ratio_of_the_circuit_lies_between_its_parts(x_t, x_s, r_t, r_s):
    """x_over_r_of_circuit is a mean of both ratios."""
    both = x_over_r_of_circuit(x_t, x_s, r_t, r_s)
    assert min(x_t / r_t, x_s / r_s) * (1 - 1e-12) <= both <= max(x_t / r_t, x_s / r_s) * (1 + 1e-12)


def test_time_constant_is_inductance_over_resistance():
    """offset_time_constant: 10 ohm reactance at 50 Hz over 0.5 ohm."""
    assert offset_time_constant(10.0 / 0.5, 50.0) == pytest.approx(10.0 / (2 * math.pi * 50.0) / 0.5)


def test_no_tolerance_leaves_the_impedance():
    """least_impedance_ratio with and without a tolerance."""
    assert least_impedance_ratio(12.5, 0.0) == 12.5
    assert least_impedance_ratio(12.5, 10.0) == pytest.approx(11.25)


def test_impedance_in_ohm_stays_on_another_base():
    """rated_impedance_ratio changes the base only."""
    on_base = transformer_impedance(12.5, 132.0, 40.0)
    assert transformer_impedance(rated_impedance_ratio(12.5, 60.0, 40.0), 132.0, 60.0) == pytest.approx(on_base)


def test_single_phase_power_is_voltage_times_current():
    """rated_current_single_phase gives the power back."""
    assert 20.0 * rated_current_single_phase(5.0, 20.0) / 1000.0 == pytest.approx(5.0)


def test_rated_delta_current_is_the_line_current_over_root_three():
    """rated_current_delta against rated_current."""
    assert rated_current_delta(40.0, 33.0) == pytest.approx(rated_current(40.0, 33.0) / math.sqrt(3))


def test_ampere_turns_of_an_autotransformer_balance():
    """common_winding_current: (U_H - U_X) I_H = U_X I_common, voltage standing for turns."""
    high, low = rated_current(100.0, 220.0), rated_current(100.0, 110.0)
    assert (220.0 - 110.0) * high == pytest.approx(110.0 * common_winding_current(low, high))


def test_infinite_system_gives_rated_current_over_impedance():
    """symmetrical_short_circuit_current_single_phase without system impedance is 100/z times rated."""
    own = transformer_impedance(8.0, 20.0, 5.0)
    current = symmetrical_short_circuit_current_single_phase(20.0, own, 0.0)
    assert 1000 * current == pytest.approx(rated_current_single_phase(5.0, 20.0) * 100 / 8)


def network(second, ratio):
    """Three-phase fault at the second winding of a two-winding unit, fed from the first, all angles equal."""
    unit = Transformer((Winding("HV", "Y"), second))
    z = 0.125 * ratio / math.hypot(1, ratio.imag) if isinstance(ratio, complex) else 0.125j
    source = system_impedance(132.0, 10000.0) * (z / abs(z))
    cases = Cases.of(
        unit, voltage=[132e3, 33e3], base_power=40e6, z1=[[0, z], [z, 0]], fault=["3ph"], at=1, frequency=50.0,
        source_z1=[source, np.inf], source_z0=[source, np.inf], neutral=[0.0, np.inf],
    )  # fmt: skip
    return fault_currents(unit, cases)


def test_three_phase_current_is_that_of_the_network():
    """symmetrical_short_circuit_current against the fault network with equal angles."""
    own = transformer_impedance(12.5, 132.0, 40.0)
    current = symmetrical_short_circuit_current(132.0, own, system_impedance(132.0, 10000.0))
    solved = network(Winding("LV", "Y", 0), complex(1.0, 12.0))
    assert abs(solved.winding_current[0, 0, 0]) / 1000 == pytest.approx(current, rel=1e-9)


def test_delta_current_is_that_of_the_network():
    """delta_winding_current against the fault network of a star-delta unit."""
    solved = network(Winding("LV", "D", 11), complex(1.0, 12.0))
    line = abs(solved.terminal_current[0, 1, 0]) / 1000
    assert abs(solved.winding_current[0, 1, 0]) / 1000 == pytest.approx(delta_winding_current(line), rel=1e-9)

"""Currents: identities, limiting cases, and the fault network with equal angles."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.fault_current import (
    common_winding_current,
    delta_winding_current,
    offset_time_constant,
    rated_current,
    rated_current_delta,
    rated_current_single_phase,
    symmetrical_short_circuit_current,
    symmetrical_short_circuit_current_single_phase,
    x_over_r_of_circuit,
)
from throughfault.cells.fault_network import fault_currents
from throughfault.cells.short_circuit_impedance import system_impedance, transformer_impedance
from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding

SIZES = st.floats(0.05, 50.0)


@given(SIZES, SIZES, SIZES, SIZES)
def test_ratio_of_the_circuit_lies_between_its_parts(x_t, x_s, r_t, r_s):
    """x_over_r_of_circuit is a mean of both ratios."""
    both = x_over_r_of_circuit(x_t, x_s, r_t, r_s)
    assert min(x_t / r_t, x_s / r_s) * (1 - 1e-12) <= both <= max(x_t / r_t, x_s / r_s) * (1 + 1e-12)


def test_time_constant_is_inductance_over_resistance():
    """offset_time_constant: 10 ohm reactance at 50 Hz over 0.5 ohm."""
    assert offset_time_constant(10.0 / 0.5, 50.0) == pytest.approx(10.0 / (2 * math.pi * 50.0) / 0.5)


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

"""Vector groups: phase displacement, coils and refusals."""

import re

import numpy as np
import pytest

from throughfault.errors import NetworkError
from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding
from throughfault.numerics.impedance import coil_voltages
from throughfault.numerics.network import solve

EVEN, ODD = (0, 2, 4, 6, 8, 10), (1, 3, 5, 7, 9, 11)
GROUPS = [(h, x, k) for h, x, clocks in (
    ("Y", "Y", EVEN), ("D", "D", EVEN), ("Y", "D", ODD), ("D", "Y", ODD), ("Y", "Z", ODD), ("D", "Z", EVEN), ("Z", "Y", ODD)
) for k in clocks]  # fmt: skip


def unit_of(*letters):
    return Transformer(tuple(Winding(f"W{i}", x, k) for i, (x, k) in enumerate(letters)))


def open_circuit(unit, voltage):
    """Line voltages to the middle of each terminal, [winding, phase], from the coils' no-load voltages."""
    nodes = sorted({node for coil in unit.coils for pair in coil.ends for node in pair})
    volts = coil_voltages(unit, np.array([voltage]))[0]
    rows, right = [], []
    for coil, u in zip(unit.coils, volts, strict=True):
        for limb, (start, end) in enumerate(coil.ends):
            rows.append([(node == start) - (node == end) for node in nodes])
            right.append(u * np.exp(-2j * np.pi / 3 * limb))
    v = dict(zip(nodes, np.linalg.lstsq(np.array(rows, float), np.array(right), rcond=None)[0], strict=True))
    lines = np.array([[v[("line", w, p)] for p in range(3)] for w in range(len(voltage))])
    return lines - lines.mean(1, keepdims=True)


@pytest.mark.parametrize(("high", "low", "clock"), GROUPS)
def test_no_load_voltages_have_the_clock_number_and_the_ratio(high, low, clock):
    """The lower-voltage phasor lags by 30 degrees for each hour, phase by phase, and has the rated voltage."""
    v = open_circuit(unit_of((high, 0), (low, clock)), [33e3, 11e3])
    assert np.allclose(v[1] / v[0], np.exp(-1j * np.pi / 6 * clock) / 3, rtol=0, atol=1e-12)
    assert np.allclose(v[0, 1] / v[0, 0], np.exp(-2j * np.pi / 3), rtol=0, atol=1e-12)
    assert np.isclose(abs(v[0, 0]), 33e3 / np.sqrt(3), rtol=1e-12)


def test_autotransformer_with_delta_at_no_load():
    """YNa0d11: common and series part add up to the HV voltage, the delta leads by 30 degrees."""
    v = open_circuit(unit_of(("Y", 0), ("A", 0), ("D", 11)), [400e3, 230e3, 33e3])
    assert np.allclose(v[0] / v[1], 400 / 230, rtol=0, atol=1e-12)
    assert np.allclose(v[2] / v[0], 33 / 400 * np.exp(1j * np.pi / 6), rtol=0, atol=1e-12)


@pytest.mark.parametrize(("high", "low", "clock"), GROUPS)
def test_three_phase_currents_turn_by_the_clock_number(high, low, clock):
    """In a three-phase fault the currents out of the LV lag those into the HV by the clock number."""
    unit = unit_of((high, 0), (low, clock))
    cases = Cases.of(unit, voltage=[33e3, 11e3], base_power=10e6, z1=[[0, 0.1j], [0.1j, 0.03j]], fault="3ph", at=1,
                     frequency=50, source_z1=[1j, np.inf])  # fmt: skip
    current = solve(unit, cases).terminal_current[0]
    assert np.allclose(-current[1] / current[0], 3 * np.exp(-1j * np.pi / 6 * clock), rtol=0, atol=1e-9)


@pytest.mark.parametrize(
    ("windings", "phases", "message"),
    [
        ((("Y", 0), ("D", 4)), 3, "winding W1: clock number 4 cannot be wound with D after Y"),
        ((("D", 0), ("Z", 11)), 3, "winding W1: clock number 11 cannot be wound with Z after D"),
        ((("Y", 1), ("Y", 0)), 3, "winding W0: the clock number of the first winding must be 0, got 1"),
        (
            (("D", 0), ("A", 0)),
            3,
            "winding W1: the common part of an autotransformer must stand second, after Y or I, with clock number 0",
        ),
        ((("Y", 0), ("Q", 0)), 3, "winding W1: connection must be one of Y, D, Z, A, I, got 'Q'"),
        (
            (("Y", 0), ("I", 0)),
            3,
            "winding W1: connection must be I or A in one phase and Y, D, Z or A in three, got I",
        ),
        ((("I", 0), ("I", 5)), 1, "winding W1: clock number 5 cannot be wound with I after I"),
        ((("Y", 0),), 3, "a transformer must have two windings or more, got 1"),
        (
            (("Y", 0), ("Y", 3), ("D", 2)),
            3,
            "winding W1: clock number 3 cannot be wound with Y after Y; winding W2: clock number 2 cannot be wound with D after Y",
        ),
    ],
)
def test_what_cannot_be_wound_is_refused(windings, phases, message):
    """All faults stand in one sentence."""
    with pytest.raises(NetworkError, match=f"^{re.escape(message)}$"):
        Transformer(tuple(Winding(f"W{i}", x, k) for i, (x, k) in enumerate(windings)), phases)

"""Paths, infeeds, single-phase units, cases and refusals of the fault network."""

import doctest
import re

import numpy as np
import pytest
from tests.numerics.units import near, wound

from throughfault.errors import NetworkError
from throughfault.numerics import case as case_module
from throughfault.numerics import connection, network, transient
from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding
from throughfault.numerics.impedance import magnetising_path
from throughfault.numerics.network import solve

PAIR = np.array([[0, 0.005 + 0.1j], [0.005 + 0.1j, 0]])
ENDLESS = (
    r"^case 0 or one like it \(3ph\) has a path without impedance through the fault; "
    r"give sources, windings or the fault an impedance \(ohm\)$"
)
SINGLE = Transformer((Winding("HV", "I"), Winding("LV", "I")), 1)


def two(group, fault, at, **more):
    unit = wound(group)
    given = {"voltage": [33e3, 11e3], "base_power": 10e6, "z1": PAIR, "frequency": 50.0,
             "source_z1": [0.1 + 1j, np.inf], "source_z0": [0.1 + 1j, np.inf], "neutral": [0.0, 0.0]} | more  # fmt: skip
    return solve(unit, Cases.of(unit, fault=fault, at=at, **given))


@pytest.mark.parametrize("module", [connection, case_module, network, transient])
def test_examples_in_the_docstrings_hold(module):
    """Every example gives what it prints."""
    result = doctest.testmod(module)
    assert result.attempted
    assert not result.failed


@pytest.mark.parametrize(
    ("group", "at", "neutral", "infeed", "exists"),
    [
        ("YNd11", 1, [0, np.inf], (0,), False),  # delta without earth
        ("Dyn11", 1, [np.inf, 0], (0,), True),
        ("Dyn11", 1, [np.inf, np.inf], (0,), False),  # isolated star
        ("Dyn11", 0, [np.inf, 0], (0,), True),  # through the source's earth
        ("YNyn0", 1, [np.inf, 0], (0,), False),  # no zero-sequence path on the other side
        ("YNyn0", 1, [0, 0], (0,), True),
        ("YNa0", 1, [np.inf, np.inf], (0,), False),  # metallic, but nothing balances the series winding's ampere-turns
        ("YNd11", 0, [0, np.inf], (1,), True),  # fed from the delta, earthed by the own neutral
    ],
)
def test_earth_fault_has_a_path_only_where_earth_current_can_return(group, at, neutral, infeed, exists):
    """LG and LLG: without a path no current to earth, an infinite Z0, and LLG falls back to LL."""
    source = np.where(np.isin([0, 1], infeed), 0.1 + 1j, np.inf)
    got = two(group, ["LG", "LLG", "LL", "3ph"], at, neutral=neutral, source_z1=source, source_z0=source)
    assert got.path_exists.tolist() == [exists, exists, True, True]
    assert np.isinf(got.z0).all() != exists
    if not exists:
        assert np.abs(got.fault_current[0]).max() < 1e-6
        assert near(got.coil_current[1], got.coil_current[2], floor=1.0)
        assert np.isinf(got.driving_point[0])
        assert near(got.driving_point[1], got.driving_point[2])


def test_unearthed_source_carries_no_earth_current():
    """An infinite source Z0 leaves the YN neutral as the only way back, and it has none."""
    got = two("YNyn0", "LG", 0, source_z0=np.inf, neutral=[0.0, np.inf])
    assert not got.path_exists[0]
    assert np.abs(got.fault_current).max() < 1e-6


def test_without_infeed_nothing_flows():
    """A fault that no source feeds has no path and no current."""
    got = two("YNd11", ["3ph", "LG", "LL", "LLG"], 1, source_z1=np.inf)
    assert not got.path_exists.any()
    assert not got.coil_current.any()
    assert np.isinf(got.z1).all()


def test_ideal_source_gives_the_impedance_voltage_current():
    """Behind an ideal source the three-phase current is the rated one over 10 %, here with 0.5 % of resistance."""
    got = two("YNd11", "3ph", 1, source_z1=[0.0, np.inf], source_z0=[0.0, np.inf])
    assert near(np.abs(got.terminal_current[0, 0]), np.full(3, 10e6 / np.sqrt(3) / 33e3 / abs(PAIR[0, 1])))


@pytest.mark.parametrize("clock", [0, 6])
def test_single_phase_pair(clock):
    """Ii0 and Ii6: V / (Zs + Zt) in both windings, ampere-turns balanced, current reversed at the terminal for Ii6."""
    unit = Transformer((Winding("HV", "I"), Winding("LV", "I", clock)), 1)
    cases = Cases.of(unit, voltage=[33e3, 11e3], base_power=10e6, z1=PAIR, fault="LL", at=1, frequency=50,
                     source_z1=[0.1 + 1j, np.inf], fault_impedance=0.3)  # fmt: skip
    got = solve(unit, cases)
    ohm = PAIR[0, 1] * 11e3**2 / 10e6 + (0.1 + 1j) / 9
    assert near(got.fault_current[0, 0], 11e3 / (ohm + 0.3))
    assert near(got.terminal_current[0, 1, 0], -11e3 / (ohm + 0.3))
    assert near(got.terminal_current[0, 0, 0], 11e3 / (ohm + 0.3) / 3 * (-1) ** (clock // 6))
    assert near(got.coil_current[0, 0] * 33e3, -got.coil_current[0, 1] * 11e3)
    assert near(got.driving_point[0], ohm + 0.3)


def test_single_phase_autotransformer():
    """Ia0: the series part carries the HV current, the common part the difference to the LV."""
    unit = Transformer((Winding("HV", "I"), Winding("LV", "A")), 1)
    cases = Cases.of(unit, voltage=[400e3, 230e3], base_power=100e6, z1=PAIR, fault="LL", at=1, frequency=50,
                     source_z1=[2j, np.inf])  # fmt: skip
    got = solve(unit, cases)
    high = 400e3 / (PAIR[0, 1] * 400e3**2 / 100e6 + 2j)
    assert near(got.winding_current[0, :, 0], np.array([high, high - high * 400 / 230]))


def test_mixed_cases_are_solved_as_alone():
    """Order and company of the cases change nothing."""
    unit = wound("YNyn0d11")
    z = 0.1j * (1 - np.eye(3)) + 0.004 * (1 - np.eye(3))
    rng = np.random.default_rng(3)
    count = 60
    at = rng.integers(0, 2, count)
    source = np.where(rng.random((count, 3)) < 0.6, 2 + 5j, np.inf)
    source[:, 2] = np.inf
    source[np.arange(count), 1 - at] = 1 + 4j
    cases = Cases.of(
        unit, voltage=np.array([132e3, 66e3, 11e3]) * rng.choice([0.9, 1, 1.1], (count, 1)) ** [1, 0, 0], base_power=40e6,
        z1=z, fault=rng.choice(["3ph", "LG", "LL", "LLG"], count), at=at, frequency=50, source_z1=source, source_z0=source,
        neutral=np.where(rng.random((count, 3)) < 0.5, 0.0, np.inf),
        magnetising=np.where(rng.random((count, 1)) < 0.5, magnetising_path(z, 0, 0.6j), np.inf))  # fmt: skip
    together = solve(unit, cases)
    for number in range(count):
        alone = solve(unit, cases[number])
        for name in ("coil_current", "terminal_current", "neutral_current", "fault_current"):
            assert near(getattr(together, name)[number], getattr(alone, name)[0], 1e-11, floor=1.0), (number, name)
        assert together.path_exists[number] == alone.path_exists[0]


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"fault": "LLL"}, "fault must be one of 3ph, LG, LL, LLG, out_of_phase, unlike case 0"),
        ({"at": 2}, "at of case 0 must be a winding from 0 to 1, got 2"),
        ({"voltage": [33e3, -1.0]}, "voltage must be finite and positive (V), unlike case 0"),
        ({"z1": [[0, 0.1], [0.2, 0]]}, "z1 and z0 must be symmetric, unlike case 0"),
        ({"z1": [[0, np.nan], [np.nan, 0]]},
         "z1 must be finite (per unit), unlike case 0; z0 must be finite (per unit), unlike case 0"),
        ({"at": 0, "source_z1": [0.0, np.inf]}, "source_z1 at the faulted terminal must not be zero (ohm), unlike case 0"),
        ({"fault": "out_of_phase"}, "source_z1 must be finite where the source is switched on (ohm), unlike case 0"),
        ({"frequency": 0.0, "base_power": [1e6, 0.0]},
         "base_power must be finite and positive (VA), unlike case 1; frequency must be finite and positive (Hz), unlike case 0"),
        ({"source_z1": [np.nan, np.inf], "neutral": [np.nan, 0.0], "magnetising": [0.5j, np.inf]},
         ("source_z1, source_z2 and source_z0 must be numbers or infinite (ohm), unlike case 0; neutral must be a number or "
         "infinite (ohm), unlike case 0; magnetising must be finite for all windings or infinite for all (per unit), unlike case 0")),
        ({"voltage": [33e3, 11e3, 1e3]},
         "arrays of the cases must share one leading axis and have 2 windings, got voltage (3,), z1 (2, 2), z0 (2, 2), source_z1 (2,), source_z2 (2,)"),
    ],
)  # fmt: skip
def test_wrong_cases_are_refused(change, message):
    """Each message names the argument, what it must be, and the first case that is wrong; all at once."""
    given = {"voltage": [33e3, 11e3], "base_power": 10e6, "z1": PAIR, "fault": "3ph", "at": 1, "frequency": 50.0,
             "source_z1": [1j, np.inf]} | change  # fmt: skip
    with pytest.raises(NetworkError, match=f"^{re.escape(message)}$"):
        Cases.of(wound("YNd11"), **given)


def test_earth_faults_are_refused_in_one_phase():
    """A single-phase unit knows the fault across its terminals only."""
    with pytest.raises(NetworkError, match=r"^fault must be one of LL, out_of_phase, unlike case 0$"):
        Cases.of(SINGLE, voltage=[2.0, 1.0], base_power=1.0, z1=PAIR, fault="LG", at=1, frequency=50)


def test_autotransformer_must_step_down():
    """The series part needs a voltage of its own."""
    with pytest.raises(
        NetworkError, match=r"^voltage of an autotransformer must fall from HV to LV \(V\), unlike case 0$"
    ):
        Cases.of(wound("YNa0"), voltage=[1.0, 1.0], base_power=1.0, z1=PAIR, fault="3ph", at=1, frequency=50)


def test_path_without_impedance_is_refused():
    """An ideal source and windings without impedance leave nothing to hold the current."""
    with pytest.raises(NetworkError, match=ENDLESS):
        two("YNd11", "3ph", 1, z1=np.zeros((2, 2)), source_z1=[0.0, np.inf], source_z0=[0.0, np.inf])


def test_path_without_impedance_is_found_beside_one_that_has_it():
    """A second terminal's source with impedance does not hide the loop of the first, where only rounding is left."""
    z = np.array([[0, 0, 0.1j], [0, 0, 0.1j], [0.1j, 0.1j, 0]])
    unit = wound("YNyn0d11")
    cases = Cases.of(unit, voltage=[132e3, 66e3, 11e3], base_power=40e6, z1=z, fault="3ph", at=1, frequency=50,
                     source_z1=[0, 1j, 0.1j], source_z0=[0, 1j, 0.1j], neutral=[0, 0, 0])  # fmt: skip
    with pytest.raises(NetworkError, match=ENDLESS):
        solve(unit, cases)

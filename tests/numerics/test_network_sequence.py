"""Symmetrical-component closed forms against the phase-domain solution.

Formulas of Wagner and Evans, Symmetrical Components, 1933 (from memory): fault currents, current dividers, equivalent
star, delta current from the balance of ampere-turns.
"""

import numpy as np
import pytest
from tests.numerics.units import near, stack, wound

from throughfault.numerics.impedance import coil_voltages, magnetising_path
from throughfault.numerics.network import solve

A = np.exp(2j * np.pi / 3)
S = 100e6
FAULTS = ("3ph", "LG", "LL", "LLG")
Z_H, Z_X, Z_T = 0.002 + 0.07j, 0.001 + 0.03j, 0.004 + 0.09j
ZERO_H, ZERO_X, ZERO_T = 0.003 + 0.06j, 0.001 + 0.028j, 0.004 + 0.08j
SOURCE_H, SOURCE_X = 0.001 + 0.02j, 0.004 + 0.05j
SOURCE_H0, SOURCE_X0 = 0.002 + 0.03j, 0.003 + 0.04j


def sequences(fault, z1, z0, z_f=0.0):
    """I1, I2, I0 out of the bus, per unit; phases b and c for LL and LLG, a for LG."""
    if fault == "3ph":
        return np.array([1 / (z1 + z_f), 0, 0])
    if fault == "LG":
        return np.ones(3) / (2 * z1 + z0 + 3 * z_f)
    if fault == "LL":
        return np.array([1, -1, 0]) / (2 * z1 + z_f)
    earth = z0 + 3 * z_f
    one = 1 / (z1 + z1 * earth / (z1 + earth))
    return np.array([one, -one * earth / (z1 + earth), -one * z1 / (z1 + earth)])


def phases(i1, i2, i0):
    """Phase currents a, b, c."""
    p = np.arange(3)
    return i1 * A**-p + i2 * A**p + i0


def parallel(a, b):
    return a * b / (a + b)


def star_pairs(legs):
    legs = np.array(legs)
    return np.where(np.eye(len(legs)), 0, legs[:, None] + legs)


def run(group, voltage, z1, z0, fault, at, sources, neutral, **more):
    """Solve one case, impedances per unit on S: the kit's solution and the base currents of the terminals."""
    unit = wound(group)
    voltage = np.array(voltage)
    ohm = voltage**2 / S
    absent = np.full(len(voltage), np.inf)
    s1, s0 = absent.astype(complex), absent.astype(complex)
    for w, (one, zero) in sources.items():
        s1[w], s0[w] = one * ohm[w], zero * ohm[w]
    case = {
        "voltage": voltage, "base_power": S, "z1": z1, "z0": z0, "fault": fault, "at": at, "frequency": 50.0,
        "prefault": voltage[at] / np.sqrt(3), "source_z1": s1, "source_z0": s0, "neutral": np.array(neutral) * ohm, **more,
    }  # fmt: skip
    return (
        unit,
        solve(unit, stack(unit, [case])),
        S / (np.sqrt(3) * voltage),
        S / 3 / coil_voltages(unit, voltage[None])[0],
    )


def three_winding(fault, at, neutral):
    """Currents out of H and X terminals, per unit by phase, of a star-star-delta unit with a source on both sides.

    ``neutral`` holds 3 Zn of each side.  Returns the transformer's currents out of the two terminals, the fault's.
    """
    near_leg, far_leg = (Z_H, Z_X) if at == 0 else (Z_X, Z_H)
    near0, far0 = (ZERO_H, ZERO_X) if at == 0 else (ZERO_X, ZERO_H)
    near_s, far_s = (SOURCE_H, SOURCE_X) if at == 0 else (SOURCE_X, SOURCE_H)
    near_s0, far_s0 = (SOURCE_H0, SOURCE_X0) if at == 0 else (SOURCE_X0, SOURCE_H0)
    through1 = near_leg + far_leg + far_s
    far_path = far0 + neutral[1 - at] + far_s0
    through0 = near0 + neutral[at] + parallel(ZERO_T, far_path)
    i1, i2, i0 = sequences(fault, parallel(near_s, through1), parallel(near_s0, through0))
    share1, share0 = near_s / (near_s + through1), near_s0 / (near_s0 + through0)
    to_far0 = share0 * ZERO_T / (ZERO_T + far_path)
    own = phases(share1 * i1, share1 * i2, share0 * i0)
    other = phases(-share1 * i1, -share1 * i2, -to_far0 * i0)
    return ((own, other) if at == 0 else (other, own)), phases(i1, i2, i0), (share0 * i0, to_far0 * i0)


@pytest.mark.parametrize("at", [0, 1])
@pytest.mark.parametrize("fault", FAULTS)
def test_star_star_delta_with_both_sides_fed(fault, at):
    """YNyn0d11: windings, lines, neutrals (one through 5 %) and the delta's circulating current."""
    z1, z0 = star_pairs([Z_H, Z_X, Z_T]), star_pairs([ZERO_H, ZERO_X, ZERO_T])
    sources = {0: (SOURCE_H, SOURCE_H0), 1: (SOURCE_X, SOURCE_X0)}
    _, got, line, coil = run("YNyn0d11", [132e3, 66e3, 11e3], z1, z0, fault, at, sources, [0.05, 0.0, np.inf])
    out, total, (near0, far0) = three_winding(fault, at, (0.15, 0.0))
    for w in (0, 1):
        assert near(got.terminal_current[0, w] / line[w], -out[w])
        assert near(got.winding_current[0, w] / coil[w], -out[w])
    neutral = np.array([near0, -far0]) if at == 0 else np.array([-far0, near0])
    assert near(got.neutral_current[0, :2] / line[:2], -3 * neutral, floor=1.0)
    assert near(got.winding_current[0, 2] / coil[2], out[0] + out[1], floor=1.0)
    faulted = {"3ph": [1, 1, 1], "LG": [1, 0, 0], "LL": [0, 1, 1], "LLG": [0, 1, 1]}[fault]
    assert near(got.fault_current[0] / line[at], total * faulted)


@pytest.mark.parametrize("at", [0, 1])
@pytest.mark.parametrize("fault", FAULTS)
def test_autotransformer_with_delta_and_both_sides_fed(fault, at):
    """YNa0d11: series winding carries the HV line current, common the sum of both lines, the neutral 3 I0 of both."""
    z1, z0 = star_pairs([Z_H, Z_X, Z_T]), star_pairs([ZERO_H, ZERO_X, ZERO_T])
    sources = {0: (SOURCE_H, SOURCE_H0), 1: (SOURCE_X, SOURCE_X0)}
    _, got, line, coil = run("YNa0d11", [400e3, 230e3, 33e3], z1, z0, fault, at, sources, [0.0, np.inf, np.inf])
    out, _, (near0, far0) = three_winding(fault, at, (0.0, 0.0))
    high, low = -out[0] * line[0], -out[1] * line[1]
    assert near(got.terminal_current[0, 0], high)
    assert near(got.terminal_current[0, 1], low)
    assert near(got.winding_current[0, 0], high)
    assert near(got.winding_current[0, 1], high + low)
    h0, x0 = (near0, -far0) if at == 0 else (-far0, near0)
    assert near(got.neutral_current[0, 0], -3 * (h0 * line[0] + x0 * line[1]), floor=line[0])
    assert near(got.winding_current[0, 2] / coil[2], out[0] + out[1], floor=1.0)


@pytest.mark.parametrize("fault", FAULTS)
def test_star_delta_faulted_on_the_star_side(fault):
    """YNd11 with 8 % in the neutral and a generator on the delta: the delta's lines differ from its windings."""
    z1, z0 = star_pairs([0.0, 0.004 + 0.12j]), star_pairs([0.0, 0.003 + 0.1j])
    sources = {0: (SOURCE_H, SOURCE_H0), 1: (SOURCE_X, np.inf)}
    _, got, line, coil = run("YNd11", [132e3, 11e3], z1, z0, fault, 0, sources, [0.08, np.inf])
    through1, through0 = z1[0, 1] + SOURCE_X, z0[0, 1] + 0.24
    i1, i2, i0 = sequences(fault, parallel(SOURCE_H, through1), parallel(SOURCE_H0, through0))
    part1, part0 = SOURCE_H / (SOURCE_H + through1), SOURCE_H0 / (SOURCE_H0 + through0)
    out = phases(part1 * i1, part1 * i2, part0 * i0)
    assert near(got.terminal_current[0, 0] / line[0], -out)
    assert near(got.winding_current[0, 1] / coil[1], out)
    turn = np.exp(1j * np.pi / 6)  # delta leads the star by 30 degrees in the positive sequence
    assert near(got.terminal_current[0, 1] / line[1], phases(part1 * i1 * turn, part1 * i2 / turn, 0))
    assert near(got.neutral_current[0, 0] / line[0], -3 * part0 * i0, floor=1.0)


@pytest.mark.parametrize("fault", ["3ph", "LL"])
def test_star_delta_faulted_on_the_delta_side(fault):
    """YNd11, no infeed on the delta: line-to-line puts 2/sqrt3 of the positive sequence current in one HV line."""
    z1 = star_pairs([0.0, 0.004 + 0.12j])
    _, got, line, coil = run("YNd11", [132e3, 11e3], z1, z1, fault, 1, {0: (SOURCE_H, SOURCE_H0)}, [0.08, np.inf])
    i1, i2, i0 = sequences(fault, z1[0, 1] + SOURCE_H, np.inf)
    turn = np.exp(1j * np.pi / 6)
    high = phases(i1 / turn, i2 * turn, 0)
    assert near(got.terminal_current[0, 0] / line[0], high)
    assert near(got.winding_current[0, 1] / coil[1], -high)
    assert near(got.terminal_current[0, 1] / line[1], -phases(i1, i2, i0))


@pytest.mark.parametrize("fault", FAULTS)
def test_delta_star_faulted_on_the_star_side(fault):
    """Dyn11 with 3 % in the neutral: no zero-sequence current in the HV lines."""
    z1, z0 = star_pairs([0.0, 0.01 + 0.06j]), star_pairs([0.0, 0.009 + 0.05j])
    sources = {0: (SOURCE_H, SOURCE_H0)}
    _, got, line, coil = run("Dyn11", [11e3, 433.0], z1, z0, fault, 1, sources, [np.inf, 0.03])
    i1, i2, i0 = sequences(fault, z1[0, 1] + SOURCE_H, z0[0, 1] + 0.09)
    turn = np.exp(1j * np.pi / 6)
    assert near(got.terminal_current[0, 0] / line[0], phases(i1 / turn, i2 * turn, 0))
    assert near(got.winding_current[0, 1] / coil[1], -phases(i1, i2, i0))
    assert near(got.winding_current[0, 0] / coil[0], phases(i1, i2, i0))
    assert near(got.neutral_current[0, 1] / line[1], -3 * i0, floor=1.0)


@pytest.mark.parametrize("fault", FAULTS)
def test_star_star_on_a_three_limb_core_without_delta(fault):
    """Yyn0: the earth fault current returns by the magnetising path of 55 %; none of it in the HV winding."""
    z1, z0 = star_pairs([0.0, 0.005 + 0.04j]), star_pairs([0.0, 0.005 + 0.035j])
    path = magnetising_path(z0, 1, 0.05 + 0.55j)
    sources = {0: (SOURCE_H, SOURCE_H0)}
    _, got, line, coil = run(
        "YNyn0", [11e3, 400.0], z1, z0, fault, 1, sources, [np.inf, 0.02], magnetising=path
    )  # fmt: skip
    i1, i2, i0 = sequences(fault, z1[0, 1] + SOURCE_H, 0.05 + 0.55j + 0.06)
    assert near(got.winding_current[0, 1] / coil[1], -phases(i1, i2, i0))
    assert near(got.winding_current[0, 0] / coil[0], phases(i1, i2, 0))
    assert near(got.neutral_current[0, 1] / line[1], -3 * i0, floor=1.0)
    assert got.path_exists.all()


@pytest.mark.parametrize(("group", "voltage"), [("Yzn11", [11e3, 400.0]), ("Dzn0", [11e3, 400.0])])
@pytest.mark.parametrize("fault", FAULTS)
def test_interstar_keeps_earth_current_out_of_the_other_winding(group, voltage, fault):
    """Yzn11 and Dzn0: its own zero-sequence impedance of 1 %; HV ampere-turns carry no zero sequence."""
    z1 = star_pairs([0.0, 0.01 + 0.04j])
    z0 = z1.copy()
    z0[1, 1] = 0.004 + 0.01j
    _, got, line, coil = run(group, voltage, z1, z0, fault, 1, {0: (SOURCE_H, SOURCE_H0)}, [np.inf, 0.02])
    i1, i2, i0 = sequences(fault, z1[0, 1] + SOURCE_H, z0[1, 1] + 0.06)
    turn = np.exp(1j * np.pi / 6) if group == "Yzn11" else 1.0
    assert near(got.terminal_current[0, 1] / line[1], -phases(i1, i2, i0))
    assert near(got.terminal_current[0, 0] / line[0], phases(i1 / turn, i2 * turn, 0))
    assert near(got.neutral_current[0, 1] / line[1], -3 * i0, floor=1.0)
    assert near(got.z0[0] / (voltage[1] ** 2 / S), z0[1, 1] + 0.06)
    limbs = got.coil_current[0, 1] + got.coil_current[0, 2]
    assert near(limbs.sum() / coil[1], 0.0, floor=1.0)


@pytest.mark.parametrize("fault", FAULTS)
def test_driving_point_impedance(fault):
    """Z1, Z1 + Z2, Z1 + Z2 + Z0, Z1 + Z2 in series with Z2 and Z0 in parallel, with the fault impedance."""
    z1, z0 = star_pairs([0.0, 0.01 + 0.06j]), star_pairs([0.0, 0.009 + 0.05j])
    ohm, z_f = 433.0**2 / S, 0.02 + 0.01j
    _, got, _, _ = run("Dyn11", [11e3, 433.0], z1, z0, fault, 1, {0: (SOURCE_H, SOURCE_H0)}, [np.inf, 0.03],
                       fault_impedance=z_f * ohm)  # fmt: skip
    one, zero = z1[0, 1] + SOURCE_H, z0[0, 1] + 0.09
    earth = zero + 3 * z_f
    expected = {"3ph": one + z_f, "LL": 2 * one + z_f, "LG": 2 * one + earth, "LLG": one + parallel(one, earth)}
    assert near(got.driving_point[0] / ohm, expected[fault])
    assert near(got.z1[0] / ohm, one)
    assert near(got.z2[0] / ohm, one)
    assert near(got.z0[0] / ohm, zero)


@pytest.mark.parametrize("step", [np.pi, 2 * np.pi / 3])
def test_out_of_phase_closing(step):
    """The voltage step (1 - e^jd) V drives its current through both sources and the transformer in series."""
    z1 = star_pairs([0.0, 0.004 + 0.12j])
    sources = {0: (SOURCE_H, SOURCE_H0), 1: (SOURCE_X, np.inf)}
    _, got, line, _ = run("YNd11", [132e3, 11e3], z1, z1, "out_of_phase", 1, sources, [0.0, np.inf], step=step)
    current = (1 - np.exp(1j * step)) / (SOURCE_H + z1[0, 1] + SOURCE_X)
    assert near(got.terminal_current[0, 1] / line[1], phases(current, 0, 0))
    assert near(np.abs(got.terminal_current[0, 0]) / line[0], np.full(3, abs(current)))
    assert near(got.driving_point[0] / (11e3**2 / S), SOURCE_H + z1[0, 1] + SOURCE_X)


def test_fault_on_the_terminals_of_a_stabilising_delta():
    """Three-phase at the tertiary: both star legs in parallel behind its own; lines are sqrt3 times the windings."""
    z = star_pairs([Z_H, Z_X, Z_T])
    sources = {0: (SOURCE_H, SOURCE_H0), 1: (SOURCE_X, SOURCE_X0)}
    _, got, line, coil = run("YNyn0d11", [132e3, 66e3, 11e3], z, z, "3ph", 2, sources, [0.0, 0.0, np.inf])
    i1 = 1 / (Z_T + parallel(Z_H + SOURCE_H, Z_X + SOURCE_X))
    assert near(np.abs(got.terminal_current[0, 2]) / line[2], np.full(3, abs(i1)))
    assert near(np.abs(got.winding_current[0, 2]) / coil[2], np.full(3, abs(i1)))

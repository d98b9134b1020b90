"""Random networks against modified nodal analysis."""

import numpy as np
import pytest
from tests.numerics.nodal import LINES, WOUND, coil_pairs, solve_nodal
from tests.numerics.units import near, random_case, stack, wound

from throughfault.numerics.impedance import magnetising_path
from throughfault.numerics.network import solve

FAULTS = ("3ph", "LG", "LL", "LLG")


def drawn(group, seed):
    rng = np.random.default_rng(seed)
    return [random_case(group, rng, fault, at) for fault in FAULTS for at in (0, 1) for _ in range(3)]


def lines_of(coil, group, terminal):
    """Line currents into the transformer from coil currents and the coils wound by hand."""
    sums = dict.fromkeys(LINES[terminal], 0)
    for ends, currents in zip(WOUND[group][1], coil, strict=True):
        for (start, end), current in zip(ends, currents, strict=True):
            if start in sums:
                sums[start] += current
            if end in sums:
                sums[end] -= current
    return np.array(list(sums.values()))


@pytest.mark.parametrize("group", WOUND)
def test_every_current_of_random_networks_equals_nodal_analysis(group):
    """Windings by limb, lines and neutrals agree to 1e-9 of the largest current at that voltage."""
    cases, unit = drawn(group, 7), wound(group)
    solution = solve(unit, stack(unit, cases))
    for number, case in enumerate(cases):
        coil, neutral, _ = solve_nodal(group, case)
        assert solution.coil_current.shape[1] == len(coil)
        volts = case["voltage"][[c.winding for c in unit.coils]][:, None]
        size = max(np.abs(coil * volts).max(), case["base_power"])  # at least the rated volt-amperes
        assert np.abs((solution.coil_current[number] - coil) * volts).max() <= 1e-9 * size
        for terminal in (0, 1):
            gap = (solution.terminal_current[number, terminal] - lines_of(coil, group, terminal)) * case["voltage"][
                terminal
            ]
            assert np.abs(gap).max() <= 1e-9 * size
        brought = [w for w, (x, _) in enumerate(WOUND[group][0]) if x in "YZ" and np.isfinite(case["neutral"][w])]
        gap = (solution.neutral_current[number, brought] - neutral) * case["voltage"][brought]
        assert np.abs(gap).max(initial=0) <= 1e-9 * size


@pytest.mark.parametrize(("group", "at"), [("YNyn0", 0), ("YNyn0", 1), ("YNa0", 0), ("YNa0", 1), ("YNyn0d11", 1)])
def test_magnetising_path_of_a_three_limb_core_equals_a_closed_zero_sequence_winding(group, at):
    """A path of 55 % seen from one winding gives the nodal currents with one more, closed, zero-sequence winding."""
    cases, unit = drawn(group, 11), wound(group)
    for case in cases:
        path = magnetising_path(case["z0"], at, 0.02 + 0.55j)
        assert path[at] == 0.02 + 0.55j
        case["magnetising"] = path
    solution = solve(unit, stack(unit, cases))
    for number, case in enumerate(cases):
        last = len(case["z0"])
        wider = np.zeros((last + 1, last + 1), complex)
        wider[:last, :last], wider[last, :last], wider[:last, last] = (
            case["z0"],
            case["magnetising"],
            case["magnetising"],
        )
        turned = coil_pairs_with_path(group, wider, case["voltage"])
        coil, _, _ = solve_nodal(group, {**case, "magnetising": turned})
        volts = case["voltage"][[c.winding for c in unit.coils]][:, None]
        assert near(solution.coil_current[number] * volts, coil * volts, floor=case["base_power"])


def coil_pairs_with_path(group, wider, voltage):
    """The path's pairwise impedances on the coils: it behaves as a tertiary."""
    if not group.startswith("YNa"):
        return wider[-1, :-1]
    q = voltage[0] / (voltage[0] - voltage[1])
    return np.array([wider[0, 1] * q * (q - 1) + wider[0, 2] * q - wider[1, 2] * (q - 1), wider[1, 2]])


def test_pairs_of_the_oracle_are_those_of_the_terminals_without_auto_or_interstar():
    """The oracle turns nothing where a winding is one coil."""
    z = np.array([[0, 0.1j], [0.1j, 0]])
    assert (coil_pairs("YNd11", z, z, np.array([2.0, 1.0])) == z).all()

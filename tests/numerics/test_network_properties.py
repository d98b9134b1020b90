"""What holds for every network: balance, energy, symmetry, freedom from units."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from tests.numerics.nodal import WOUND
from tests.numerics.units import near, random_case, stack, wound

from throughfault.numerics.branch import branch_impedance
from throughfault.numerics.case import Cases
from throughfault.numerics.impedance import coil_voltages
from throughfault.numerics.loops import allowed_currents, port_rule
from throughfault.numerics.network import groups, solve

GROUPS = st.sampled_from(sorted(WOUND))
SEEDS = st.integers(0, 2**32 - 1)
FAULTS = st.sampled_from(["3ph", "LG", "LL", "LLG"])
SIDES = st.integers(0, 1)


def random_network(group, seed, fault, at):
    unit = wound(group)
    case = random_case(group, np.random.default_rng(seed), fault, at)
    return unit, case, stack(unit, [case])


@settings(max_examples=60, deadline=None)
@given(GROUPS, SEEDS, FAULTS, SIDES)
def test_ampere_turns_balance_on_every_limb(group, seed, fault, at):
    """Voltage times current, summed over the coils of a limb, is nothing."""
    unit, case, cases = random_network(group, seed, fault, at)
    turns = coil_voltages(unit, cases.voltage)[0][:, None] * solve(unit, cases).coil_current[0]
    assert np.abs(turns.sum(0)).max() <= 1e-10 * max(np.abs(turns).max(), case["base_power"])


@settings(max_examples=60, deadline=None)
@given(GROUPS, SEEDS, FAULTS, SIDES)
def test_energy_in_the_impedances_is_never_negative(group, seed, fault, at):
    """Active and reactive power of any allowed current, and of the fault's own, are not negative."""
    unit, _, cases = random_network(group, seed, fault, at)
    (part,) = groups(unit, cases)
    z = branch_impedance(unit, part.network, part.cases)
    coil = coil_voltages(unit, cases.voltage)
    ((_, free),) = allowed_currents(part.network, cases.voltage, coil, port_rule(fault, 3)[:0])
    power = free[0].T @ z[0] @ free[0]
    for form in (power.real, power.imag):
        assert np.linalg.eigvalsh(form).min(initial=0.0) >= -1e-12 * np.abs(form).max(initial=0.0)


@settings(max_examples=40, deadline=None)
@given(GROUPS, SEEDS, FAULTS, SIDES)
def test_fault_currents_obey_kirchhoff(group, seed, fault, at):
    """Currents in and out of earth agree: the fault's earth current is what sources and neutrals return."""
    unit, case, cases = random_network(group, seed, fault, at)
    got = solve(unit, cases)
    into = got.terminal_current[0].sum(1) - got.neutral_current[0]
    if unit.auto:
        into = np.append(into[0] + into[1], into[2:])
    assert np.abs(into).max() * case["voltage"].min() <= 1e-9 * max(
        np.abs(got.fault_current).max() * case["voltage"].max(), case["base_power"]
    )


@settings(max_examples=40, deadline=None)
@given(GROUPS, SEEDS, SIDES)
def test_three_phase_fault_is_the_same_in_every_phase(group, seed, at):
    """Turning the phases by one turns the currents by a third of a cycle."""
    unit, case, cases = random_network(group, seed, "3ph", at)
    got = solve(unit, cases)
    turn = np.exp(-2j * np.pi / 3)
    for current in (got.coil_current[0] * case["voltage"].max(), got.fault_current):
        assert near(np.roll(current, 1, axis=-1) * turn, current, 1e-9, floor=case["base_power"])


@settings(max_examples=40, deadline=None)
@given(GROUPS, SEEDS, st.sampled_from(["LL", "LLG"]), SIDES)
def test_earth_current_follows_from_the_impedances_at_the_port(group, seed, fault, at):
    """None in LL; in LLG what Z1, Z0 and the fault impedance leave, whatever stands behind the port."""
    unit, _, cases = random_network(group, seed, fault, at)
    got = solve(unit, cases)
    total = got.fault_current[0].sum()
    if fault == "LL" or not got.path_exists[0]:
        assert abs(total) <= 1e-9 * np.abs(got.fault_current).max()
    else:
        v = cases.prefault[0]
        z_f = cases.fault_impedance[0]
        # I_b + I_c = 3 I0 = -3 V Z1 / (Z1^2 + 2 Z1 (Z0 + 3 Zg)), Wagner and Evans 1933 (from memory)
        earth = got.z0[0] + 3 * z_f
        assert near(total, -3 * v / (got.z1[0] + 2 * earth))


@settings(max_examples=40, deadline=None)
@given(GROUPS, SEEDS, FAULTS, SIDES, st.floats(1e-3, 1e3), st.floats(1e-3, 1e3))
def test_scaling_of_base_and_units_changes_no_result(group, seed, fault, at, base, unit_of_voltage):
    """Another base for the same impedance, and volts counted in another unit, give the same currents."""
    unit, case, cases = random_network(group, seed, fault, at)
    got = solve(unit, cases)
    other = stack(unit, [case | {"base_power": 40e6 * base, "z1": case["z1"] * base, "z0": case["z0"] * base}])
    size = case["base_power"] / case["voltage"].min()
    assert near(solve(unit, other).coil_current, got.coil_current, floor=size)
    scaled = case | {name: case[name] * unit_of_voltage for name in ("voltage", "prefault")}
    for name in ("source_z1", "source_z0", "neutral", "fault_impedance"):
        there = np.isfinite(case[name])
        scaled[name] = np.where(there, np.where(there, case[name], 0) * unit_of_voltage, np.inf)
    scaled["base_power"] = case["base_power"] * unit_of_voltage
    assert near(solve(unit, stack(unit, [scaled])).coil_current, got.coil_current, floor=size)


@pytest.mark.parametrize("group", WOUND)
def test_currents_are_proportional_to_the_voltage_before_the_fault(group):
    """Twice the voltage, twice the current."""
    unit, case, cases = random_network(group, 1, "LL", 1)
    twice = Cases.of(unit, **case | {"prefault": 2 * case["prefault"]})
    assert near(solve(unit, twice).coil_current, 2 * solve(unit, cases).coil_current)

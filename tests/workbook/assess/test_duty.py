"""The duty: which cases are run, what they give, which governs."""

import math
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from throughfault.cells.peak_factor import peak_factor_from_table
from throughfault.numerics.network import solve
from throughfault.workbook.assess.duty import assess_duty
from throughfault.workbook.assess.fault_case import fault_cases
from throughfault.workbook.assess.fault_network import NetworkData, build_cases, transformer_of
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.inputs import read_unit, read_unit_text

EXAMPLES = Path(__file__).parents[3] / "example_reviews"
TAGS = ("BV-T1", "BV-T2", "BV-D7")

TWO_WINDING = """
format = "throughfault-unit/1"
standard = "IEC 60076-5:2006"
[identity]
tag = "BV-X1"
title = "Brackwater Vale, a unit for tests"
[rating]
phases = {phases}
frequency = "50 Hz"
vector_group = "{group}"
immersion = "oil"
core = "{core}"
[windings.HV]
rated_power = "40 MVA"
rated_voltage = "132 kV"
highest_voltage = "145 kV"
[windings.LV]
rated_power = "40 MVA"
rated_voltage = "33 kV"
highest_voltage = "36 kV"
[[impedances]]
between = ["HV", "LV"]
tapping = "principal"
impedance = "10 %"
base_power = "40 MVA"
{impedance}
[system.HV]
short_circuit_power = "10000 MVA"
{system}
"""


def make(group="YNd11", core="three-limb", phases=3, impedance="", system="", more=""):
    text = TWO_WINDING.format(group=group, core=core, phases=phases, impedance=impedance, system=system) + more
    return read_unit_text(text, "unit.toml")


def duty_of(unit):
    return assess_duty(unit, rules_for(unit))


@pytest.fixture(scope="module", params=TAGS)
def example(request):
    unit = read_unit(EXAMPLES / request.param / "unit.toml")
    return unit, duty_of(unit)


def test_worked_figures_of_the_trade():
    """40 MVA, 132 kV, 10 %, 10 000 MVA: 1.682 kA and 2.55 times that at the peak (own arithmetic of A4 in the standard)."""
    duty = duty_of(make())
    case = next(entry for entry in duty.entries if entry["id"] == "principal/LV/3ph/HV")
    assert case["terminals"]["HV"]["a"]["rms"] == pytest.approx(1.682, abs=0.0005)
    assert case["terminals"]["HV"]["a"]["peak"] == pytest.approx(4.29, abs=0.005)


def test_closed_form_and_network_agree_when_angles_do():
    """Without resistance magnitudes add as phasors do, so the standard's sum is the network's current."""
    duty = duty_of(make())
    closed = next(step for step in duty.fragment.steps if step.id == "duty.closed_form.HV-LV.symmetrical")
    case = next(entry for entry in duty.entries if entry["id"] == "principal/LV/3ph/HV")
    assert case["terminals"]["HV"]["a"]["rms"] == pytest.approx(closed.result.value, rel=1e-12)


def test_every_terminal_fault_and_infeed_is_run(example):
    """Case ids cover tappings, terminals brought out, faults and infeeds, once each."""
    unit, duty = example
    names = [entry["id"] for entry in duty.entries]
    assert len(names) == len(set(names))
    assert {entry["tapping"] for entry in duty.entries} == set(unit.tappings)
    assert {entry["at"] for entry in duty.entries} == {n for n, w in unit.windings.items() if not w.stabilising}
    assert all(f"{t}/LV/3ph/HV" in names for t in unit.tappings)


def test_no_case_exceeds_the_largest(example):
    """What governs is at least as large as every phase of every case."""
    _, duty = example
    for entry in duty.entries:
        for name, phases in entry["currents"].items():
            for phase in phases.values():
                assert phase["rms"] <= duty.windings[name].symmetrical * (1 + 1e-9)
                assert phase["peak"] <= duty.windings[name].peak * (1 + 1e-9)


def test_governing_case_gives_the_value(example):
    """The case named as governing holds the value."""
    _, duty = example
    entries = {entry["id"]: entry for entry in duty.entries}
    for name, winding in duty.windings.items():
        phases = entries[winding.symmetrical_case]["currents"][name].values()
        assert max(phase["rms"] for phase in phases) == pytest.approx(winding.symmetrical, rel=1e-12)


def test_ampere_turns_balance_in_every_case(example):
    """Currents into the dotted ends, times phase-winding voltages, sum to zero on every limb."""
    unit, _ = example
    rules = rules_for(unit)
    data = NetworkData(unit, rules, None)
    cases, _missing = fault_cases(unit, rules)
    transformer = transformer_of(unit)
    arrays = build_cases(data, transformer, cases)
    solution = solve(transformer, arrays)
    share = {"Y": 1 / math.sqrt(3), "D": 1.0}
    turns = arrays.voltage * [share[c.letter] for c in unit.group.windings]
    balance = (solution.winding_current * turns[:, :, None]).sum(axis=1)
    assert np.abs(balance).max() < 1e-9 * np.abs(solution.winding_current * turns[:, :, None]).max()


def test_what_the_standard_requires_is_told_apart():
    """IEC requires the three-phase fault of a two-winding unit; the others are extra."""
    duty = duty_of(make())
    required = {entry["fault"] for entry in duty.entries if entry["required_by_standard"]}
    assert required == {"3ph"}
    assert {entry["fault"] for entry in duty.entries} == {"3ph", "LG", "LL", "LLG"}


def test_earth_faults_only_where_a_path_exists():
    """On the delta side nothing returns through earth, so no earth fault is run there."""
    faults = {(entry["at"], entry["fault"]) for entry in duty_of(make()).entries}
    assert ("LV", "LG") not in faults
    assert ("HV", "LG") in faults


def test_tolerance_runs_the_smaller_impedance_too():
    """A guaranteed impedance with tolerance gives a second case, larger by about the tolerance."""
    duty = duty_of(make(impedance='tolerance = "7.5 %"'))
    rms = {entry["id"]: entry["currents"]["HV"]["a"]["rms"] for entry in duty.entries}
    plain, reduced = rms["principal/LV/3ph/HV"], rms["principal/LV/3ph/HV/tolerance"]
    assert reduced / plain == pytest.approx((0.1 + 0.004) / (0.1 * 0.925 + 0.004), rel=1e-12)
    assert duty.windings["HV"].symmetrical_case == "principal/LV/3ph/HV/tolerance"


def test_minimum_source_is_run_and_is_extra():
    """The lowest fault level gives cases of their own that the standard does not ask for."""
    duty = duty_of(make(system='short_circuit_power_minimum = "2000 MVA"'))
    low = next(entry for entry in duty.entries if entry["id"] == "principal/LV/3ph/HV/minimum")
    assert not low["required_by_standard"]
    assert low["currents"]["HV"]["a"]["rms"] == pytest.approx(40 / (math.sqrt(3) * 132) / (0.1 + 0.02), rel=1e-9)


def test_both_ends_of_the_zero_sequence_range_are_run():
    """Where X0/X1 is not given both ends count, and so do both shares of the impedance with a delta."""
    names = {entry["id"] for entry in duty_of(make()).entries if entry["fault"] == "LG"}
    head = "principal/HV/LG/HV"
    assert names == {head, f"{head}/x0(HV)=3", f"{head}/z0=0.85z", f"{head}/x0(HV)=3/z0=0.85z"}
    given = {e["id"] for e in duty_of(make(system="x0_over_x1 = 1.5", impedance='zero_sequence = "9 %"')).entries}
    assert {name for name in given if "/LG/" in name} == {head}


def test_three_limb_without_delta_needs_the_magnetising_impedance():
    """Earth faults of such a unit are not assessed until the measured value is given."""
    duty = duty_of(make(group="YNyn0"))
    assert {entry["fault"] for entry in duty.entries} == {"3ph", "LL"}
    assert {m.id for m in duty.fragment.missing} == {"duty.earth_fault.HV", "duty.earth_fault.LV"}
    assert all(m.keys == ("zero_sequence.at", "zero_sequence.magnetising") for m in duty.fragment.missing)
    more = '[zero_sequence]\nat = "LV"\nmagnetising = "55 %"\n'
    assert "LG" in {entry["fault"] for entry in duty_of(make(group="YNyn0", more=more)).entries}


def test_interstar_needs_its_own_zero_sequence_impedance():
    """Earth faults at an interstar winding are not assessed without the pair's zero-sequence impedance."""
    bare = duty_of(make(group="Dzn0"))
    assert [m.keys for m in bare.fragment.missing] == [("impedances.zero_sequence",)]
    given = duty_of(make(group="Dzn0", impedance='zero_sequence = "4 %"'))
    entry = next(e for e in given.entries if e["id"] == "principal/LV/LG/HV")
    three_phase = next(e for e in given.entries if e["id"] == "principal/LV/3ph/HV")
    assert entry["terminals"]["LV"]["a"]["rms"] > three_phase["terminals"]["LV"]["a"]["rms"]


def test_single_phase_unit_has_line_to_line_faults_only():
    """A single-phase unit is faulted across its winding."""
    duty = duty_of(make(group="Ii0", core="single-phase", phases=1))
    assert {entry["fault"] for entry in duty.entries} == {"LL"}
    entry = next(e for e in duty.entries if e["id"] == "principal/LV/LL/HV")
    assert entry["terminals"]["HV"]["a"]["rms"] == pytest.approx(40 / 132 / (0.1 + 0.004), rel=1e-9)


def test_out_of_phase_closing_is_run_when_asked():
    """Closing at 180 degrees drives twice the voltage through both networks and the transformer."""
    system = 'out_of_phase = "180 deg"\n[system.LV]\nshort_circuit_power = "2000 MVA"'
    duty = duty_of(make(system=system))
    entry = next(e for e in duty.entries if e["fault"] == "OP")
    assert not entry["required_by_standard"]
    expected = 2 * 40 / (math.sqrt(3) * 132) / (0.1 + 0.004 + 0.02)
    assert entry["terminals"]["HV"]["a"]["rms"] == pytest.approx(expected, rel=1e-9)


def test_series_reactance_adds_to_the_source():
    """A reactor at the terminal limits the current."""
    duty = duty_of(make(system='series_reactance = "10 ohm"'))
    entry = next(e for e in duty.entries if e["id"] == "principal/LV/3ph/HV")
    ohm = 43.56 + 1.7424 + 10
    assert entry["terminals"]["HV"]["a"]["rms"] == pytest.approx(132 / math.sqrt(3) / ohm, rel=1e-9)


def test_a_small_source_impedance_is_neglected_in_category_one():
    """630 kVA, 4 %, behind 500 MVA: the system is 3.15 % of the transformer and left out (25 times rated current)."""
    text = TWO_WINDING.format(group="Dyn11", core="three-limb", phases=3, impedance="", system="")
    for old, new in (
        ("40 MVA", "630 kVA"),
        ("132 kV", "20 kV"),
        ("145 kV", "24 kV"),
        ("33 kV", "400 V"),
        ("36 kV", "1.1 kV"),
        ("10 %", "4 %"),
        ("10000 MVA", "500 MVA"),
    ):
        text = text.replace(old, new)
    duty = duty_of(read_unit_text(text, "unit.toml"))
    entry = next(e for e in duty.entries if e["id"] == "principal/LV/3ph/HV")
    assert entry["terminals"]["HV"]["a"]["rms"] == pytest.approx(25 * 0.63 / (math.sqrt(3) * 20), rel=1e-9)


def test_no_infeed_is_reported_not_guessed():
    """Without any network behind a terminal nothing is assessed, and the key is named."""
    unit = make(system="")
    text = TWO_WINDING.format(group="YNd11", core="three-limb", phases=3, impedance="", system="").split("[system.HV]")[
        0
    ]
    duty = duty_of(read_unit_text(text, "unit.toml"))
    assert duty.entries == ()
    assert duty.windings["HV"].symmetrical is None
    assert duty.fragment.missing[0].keys == ("system.<winding>.short_circuit_power",)
    assert unit.windings.keys() == duty.windings.keys()


def test_missing_impedance_row_leaves_its_tapping_out():
    """The cases of a tapping without impedance row are not assessed, and the row is named."""
    text = TWO_WINDING.format(group="YNd11", core="three-limb", phases=3, impedance="", system="")
    text = text.replace(
        'highest_voltage = "145 kV"',
        'highest_voltage = "145 kV"\ntappings = { plus = "138.6 kV", principal = "132 kV" }',
    )
    duty = duty_of(read_unit_text(text, "unit.toml"))
    assert {entry["tapping"] for entry in duty.entries} == {"principal"}
    assert duty.fragment.missing[0].keys == ("impedances between HV and LV, tapping 'plus'",)


def test_exact_peak_above_the_standard_is_an_open_point():
    """Where the default factor is below the exact first maximum the record says so."""
    duty = duty_of(make(impedance='resistance = "0.2 %"'))
    point = next(p for p in duty.fragment.open_points if p.id == "duty.HV.peak_exact")
    assert point.values["exact"].value > point.values["peak"].value


def test_direct_current_resistance_governs_the_offset_only():
    """A smaller d.c. resistance raises X/R and leaves the symmetrical current alone."""
    plain, direct = (duty_of(make(impedance=f'resistance = "2 %"\n{more}')) for more in ("", 'dc_resistance = "1 %"'))
    assert direct.windings["HV"].symmetrical == pytest.approx(plain.windings["HV"].symmetrical, rel=1e-12)
    assert direct.windings["HV"].peak > plain.windings["HV"].peak


@pytest.mark.parametrize("more", ["", 'dc_resistance = "1 %"'])
def test_worked_ratio_is_the_one_the_factor_was_taken_for(more):
    """X/R on the page, the factor beside it and the driving-point impedance of the case are of one piece."""
    duty = duty_of(make(impedance=f'resistance = "2 %"\n{more}'))
    step = next(s for s in duty.fragment.steps if s.id == "duty.HV.x_over_r")
    entry = next(e for e in duty.entries if e["id"] == duty.windings["HV"].peak_case)
    driving = entry["driving_point"]
    assert step.result.value == pytest.approx(driving["reactance"] / driving["resistance"], rel=1e-9)
    found = {o.id: o.value for o in duty.fragment.quantities}
    assert found["duty.HV.peak_factor_table"] == pytest.approx(peak_factor_from_table(step.result.value), rel=1e-12)


@settings(max_examples=15, deadline=None)
@given(st.floats(2.0, 30.0), st.floats(100.0, 50000.0))
def test_units_of_the_file_do_not_matter(percent, power):
    """The same numbers in other units give the same duty."""
    first = make(impedance="", system="")
    text = TWO_WINDING.format(group="YNd11", core="three-limb", phases=3, impedance="", system="")
    one = text.replace("10 %", f"{percent!r} %").replace("10000 MVA", f"{power!r} MVA")
    other = text.replace("10 %", f"{percent / 100!r} p.u.").replace("10000 MVA", f"{power * 1000!r} kVA")
    duties = [duty_of(read_unit_text(t, "unit.toml")).windings["LV"].symmetrical for t in (one, other)]
    assert duties[0] == pytest.approx(duties[1], rel=1e-9)
    assert first.windings.keys() == {"HV", "LV"}


BANK = """
format = "throughfault-unit/1"
standard = "IEC 60076-5:2006"
[identity]
tag = "BV-X2"
title = "Brackwater Vale, a bank for tests"
[rating]
phases = {phases}
frequency = "50 Hz"
vector_group = "YNa0d11"
immersion = "oil"
core = "single-phase"
bank = true
[windings.HV]
rated_power = "{power}"
rated_voltage = "400 kV"
[windings.LV]
rated_power = "{power}"
rated_voltage = "230 kV"
[windings.TV]
rated_power = "{power}"
rated_voltage = "33 kV"
stabilising = true
{rows}
[system.HV]
short_circuit_power = "40000 MVA"
x0_over_x1 = 1.0
"""


def bank(phases, power, more=""):
    row = '[[impedances]]\nbetween = ["{}", "{}"]\ntapping = "principal"\nimpedance = "{} %"\nbase_power = "{}"\nresistance = "0.2 %"\n'
    pairs = (("HV", "LV", 12), ("HV", "TV", 40), ("LV", "TV", 25))
    rows = "".join(row.format(a, b, z, power) for a, b, z in pairs)
    return read_unit_text(BANK.format(phases=phases, power=power, rows=rows) + more, "unit.toml")


def test_a_bank_may_state_one_unit_or_the_whole():
    """Powers of one unit with phases = 1 and of the bank with phases = 3 describe the same transformer."""
    one, whole = duty_of(bank(1, "100 MVA")), duty_of(bank(3, "300 MVA"))
    assert one.windings["HV"].symmetrical == pytest.approx(whole.windings["HV"].symmetrical, rel=1e-12)
    assert one.category == whole.category == "III"


def test_the_stabilising_winding_of_a_bank_is_faulted_at_its_terminals():
    """Unless a reason is given why such a fault cannot occur."""
    at = {entry["at"] for entry in duty_of(bank(3, "300 MVA")).entries}
    assert at == {"HV", "LV", "TV"}
    excluded = '[system.TV]\nterminal_fault_excluded = "phase-segregated and enclosed"\n'
    assert {entry["at"] for entry in duty_of(bank(3, "300 MVA", excluded)).entries} == {"HV", "LV"}


def test_series_and_common_winding_carry_their_own_currents():
    """At a three-phase fault of the low-voltage terminal the common winding carries what the ratio leaves."""
    entry = next(e for e in duty_of(bank(3, "300 MVA")).entries if e["id"] == "principal/LV/3ph/HV")
    series, common = entry["currents"]["HV"]["a"]["rms"], entry["currents"]["LV"]["a"]["rms"]
    assert common / series == pytest.approx((400 - 230) / 230, rel=1e-9)
    assert entry["terminals"]["LV"]["a"]["rms"] == pytest.approx(series + common, rel=1e-9)


def test_closed_form_table_and_exact_factor_stand_beside_the_deciding_one():
    """Within the table all three are given, and they lie within a per cent."""
    found = {o.id: o.value for o in duty_of(make(impedance='resistance = "2 %"')).fragment.quantities}
    factors = [found[f"duty.HV.peak_factor{suffix}"] for suffix in ("", "_closed_form", "_exact", "_table")]
    assert factors[0] == factors[3]
    assert max(factors) / min(factors) < 1.01


def test_apparatus_limits_are_replaced_by_a_signatory():
    """A figure under [limits] decides, and the one of the unit file is kept beside it."""
    more = '[bushings.LV]\nshort_time_current = "5 kA"\nduration = "1 s"\npeak_current = "20 kA"\n'
    more += '[limits]\n"apparatus.bushings.LV.short_time_current" = { value = "6.5 kA", source = "type test report" }\n'
    unit = make(more=more, system="x_over_r = 10.0")
    checks = {check.id: check.entry() for check in duty_of(unit).fragment.checks}
    replaced = checks["apparatus.bushings.LV.short_time_current"]
    assert (replaced["limit"], replaced["limit_provenance"]) == (6.5, "signatory")
    assert replaced["kit_limit"]["value"] == pytest.approx(5.0 / math.sqrt(2.0))
    assert checks["apparatus.bushings.LV.peak_current"]["verdict"] == "within"

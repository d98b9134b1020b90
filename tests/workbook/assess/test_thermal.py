"""Thermal ability of every winding, with a duty made by hand."""

import math
from pathlib import Path
from types import SimpleNamespace

import numpy as np
import pytest

from throughfault.cells.thermal_withstand import average_temperature_aluminium, average_temperature_copper
from throughfault.declare import Missing
from throughfault.errors import InputError
from throughfault.workbook.assess.duty import assess_duty
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.assess.thermal import assess_thermal
from throughfault.workbook.assess.thermal_method import METHODS
from throughfault.workbook.assess.winding_current import rated_steps
from throughfault.workbook.inputs import read_unit, read_unit_text

EXAMPLES = Path(__file__).parents[3] / "example_reviews"
FILE = """
format = "throughfault-unit/1"
standard = "IEC 60076-5:2006"
[identity]
tag = "BV-X2"
title = "Brackwater Vale, a unit for tests"
[rating]
phases = 3
frequency = "50 Hz"
vector_group = "YNd11"
immersion = "oil"
core = "three-limb"
thermal_class = 105
start_temperature = "105 degC"
fault_duration = "2 s"
[windings.HV]
rated_power = "40 MVA"
rated_voltage = "132 kV"
highest_voltage = "145 kV"
conductor_material = "copper"
conductor_section = "25 mm^2"
eddy_share = 0.10
[windings.LV]
rated_power = "40 MVA"
rated_voltage = "33 kV"
highest_voltage = "36 kV"
conductor_material = "aluminium"
conductor_section = "90 mm^2"
[[impedances]]
between = ["HV", "LV"]
impedance = "12.5 %"
base_power = "40 MVA"
load_loss = "180 kW"
[system.HV]
short_circuit_power = "10000 MVA"
x_over_r = 12.0
"""
CASE = "principal/LV/3ph/HV"
ENTRY = {
    "id": CASE, "fault": "3ph", "required_by_standard": True, "driving_point": {"resistance": 0.5, "reactance": 10.0},
}  # fmt: skip
IEEE = ('"IEC 60076-5:2006"', '"IEEE C57.12.00"')


def unit_of(*changes):
    """The unit above with texts replaced; each must stand in it."""
    text = FILE
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    return read_unit_text(text)


def duty_of(entries=(ENTRY,), **currents):
    windings = {n: SimpleNamespace(symmetrical=i, symmetrical_case=CASE if i else None) for n, i in currents.items()}
    return SimpleNamespace(windings=windings, entries=entries)


def assessed(*changes, duty=None):
    unit = unit_of(*changes)
    return assess_thermal(unit, rules_for(unit), duty or duty_of(HV=1.5, LV=3.4))


def outcomes(thermal):
    return {outcome.id: outcome for outcome in thermal.fragment.quantities}


def test_iec_form_decides_under_iec():
    """Density and temperature of both windings by the standard's form, with the case that governs."""
    thermal = assessed()
    hv, lv = thermal.windings["HV"], thermal.windings["LV"]
    assert (hv.density, lv.density) == (60.0, pytest.approx(37.7778, abs=1e-4))
    assert hv.temperature == average_temperature_copper(105.0, 60.0, 2.0)
    assert lv.temperature == average_temperature_aluminium(105.0, lv.density, 2.0)
    found = outcomes(thermal)
    assert found["thermal.HV.temperature"].value == hv.temperature
    assert found["thermal.HV.temperature"].governing_case == CASE
    assert [c.id for c in thermal.fragment.checks] == ["thermal.HV.temperature", "thermal.LV.temperature"]
    assert [c.limit.value for c in thermal.fragment.checks] == [250.0, 200.0]
    assert {c.verdict for c in thermal.fragment.checks} == {"within"}
    assert {c.ability for c in thermal.fragment.checks} == {"thermal"}


@pytest.mark.parametrize("standard", [(), (IEEE,)], ids=["IEC", "IEEE"])
def test_temperature_at_the_permissible_duration_is_the_limit(standard):
    """Running the fault for the permissible duration ends at the limit, by the form that decides."""
    first = assessed(*standard, duty=duty_of(HV=1.5, LV=3.9))
    for name in ("HV", "LV"):
        duration = first.windings[name].permissible_duration
        changed = ('fault_duration = "2 s"', f'fault_duration = "{duration!r} s"')
        again = assessed(*standard, changed, duty=duty_of(HV=1.5, LV=3.9))
        assert again.windings[name].temperature == pytest.approx(first.windings[name].limit.value, rel=1e-9)


@pytest.mark.parametrize("standard", [(), (IEEE,)], ids=["IEC", "IEEE"])
def test_a_permissible_duration_beyond_the_form_is_not_given(standard):
    """Where the limit is reached after more than 10 s there is the reason and no number; the curve ends at 10 s."""
    thermal = assessed(*standard, duty=duty_of(HV=0.5, LV=3.4))
    found = outcomes(thermal)["thermal.HV.permissible_duration"]
    assert (found.value, found.reason) == (None, "longer than the 10 s for which the adiabatic form holds")
    hv = thermal.windings["HV"]
    assert (hv.permissible_duration, hv.check.verdict) == (None, "within")
    assert not [step for step in thermal.fragment.steps if step.id.startswith(found.id)]
    assert hv.curve["time"][-1] == 10.0


@pytest.mark.parametrize("standard", [(), (IEEE,)], ids=["IEC", "IEEE"])
def test_a_dry_unit_has_no_second_fault(standard):
    """The cooling that is tabled is that of windings in liquid."""
    dry = (('immersion = "oil"', 'immersion = "dry"'), ("thermal_class = 105", "thermal_class = 180"))
    thermal = assessed(*standard, *dry)
    assert thermal.windings["LV"].temperature is not None
    assert thermal.windings["LV"].shots is None
    assert not [name for name in outcomes(thermal) if "reclosing" in name]


def test_the_limit_of_a_dry_unit_is_another_standards():
    """Under IEEE C57.12.00 the limit of a dry-type unit comes from C57.12.01, which is said; a signatory's own is not."""
    dry = (('immersion = "oil"', 'immersion = "dry"'), ("thermal_class = 105", "thermal_class = 180"))
    points = {point.id: point for point in assessed(IEEE, *dry).fragment.open_points}
    assert points["thermal.LV.limit"].text == (
        "LV: the limit is the dry-type standard's, the form of the temperature the liquid-immersed standard's."
    )
    assert points["thermal.LV.limit"].clause == "IEEEC57.12.01, temperature limits"
    assert "thermal.HV.limit" in points  # not assessed for its eddy share, and the limit is still that one
    own = '[limits]\n"thermal.LV.temperature" = { value = "350 degC", source = "own" }\n[windings.HV]'
    settled = assessed(IEEE, *dry, ("[windings.HV]", own))
    assert "thermal.LV.limit" not in {point.id for point in settled.fragment.open_points}
    assert not [p.id for p in assessed(*dry).fragment.open_points if p.id.endswith(".limit")]


def test_ieee_form_decides_under_ieee():
    """The all-heat-stored form with its worked lines; the other standard's form stands beside."""
    thermal = assessed(IEEE)
    hv = thermal.windings["HV"]
    assert hv.method == thermal.method == "all heat stored"
    cells = [s.cell.name for s in thermal.fragment.steps if s.id.startswith("thermal.HV.temperature")]
    assert cells[:5] == [
        "start_loss", "start_eddy_share", "heat_content_copper", "heating_ratio", "final_temperature_series",
    ]  # fmt: skip
    assert hv.comparisons["other"][1].value == average_temperature_copper(105.0, 60.0, 2.0)
    assert hv.temperature > hv.comparisons["other"][1].value


def test_plain_circuit_relations_are_no_clause_of_the_other_standard():
    """Under IEEE only the other standard's form, shown beside, is cited as IEC's."""
    steps = [s for s in assessed(IEEE).fragment.steps if not s.id.endswith("other_standard")]
    assert {s.id for s in steps} >= {"thermal.HV.density", "thermal.HV.multiple"}
    assert not [s.id for s in steps if s.cell.source.key.startswith("IEC")]
    density = next(s for s in steps if s.id == "thermal.HV.density").cell.source
    assert (density.citation, density.provenance) == (
        "CircuitTheory, current over section (as in IEC 60076-5:2006, 4.1.5)", "derived",
    )  # fmt: skip


def test_exponential_form_above_its_ratio():
    """A heating ratio above 0.6 passes to the exponential form, in the temperature and in its inverse."""
    thermal = assessed(IEEE, duty=duty_of(HV=3.3, LV=3.4))
    names = [s.cell.name for s in thermal.fragment.steps if s.id == "thermal.HV.temperature"]
    assert names == ["final_temperature_exponential"]
    assert thermal.windings["HV"].check.verdict == "exceeds"
    high = assessed(
        IEEE,
        ("[windings.HV]", '[limits]\n"thermal.HV.temperature" = { value = "450 degC", source = "own" }\n[windings.HV]'),
        duty=duty_of(HV=3.3, LV=3.4),
    )
    ratio = [s.cell.name for s in high.fragment.steps if s.id == "thermal.HV.permissible_duration.heating_ratio"]
    assert ratio == ["permitted_heating_ratio_exponential"]


def test_comparisons_stand_beside_and_are_not_checked():
    """Exact, eddy, offset and the other standard's form have ids of their own and no check."""
    thermal = assessed()
    hv = thermal.windings["HV"]
    assert set(hv.comparisons) == {"exact", "eddy", "offset", "other"}
    exact = hv.comparisons["exact"][1].value
    assert exact < hv.temperature
    assert hv.comparisons["eddy"][1].value > exact
    assert hv.comparisons["offset"][1].value > exact
    assert set(thermal.windings["LV"].comparisons) == {"exact", "offset", "other"}  # no eddy share given
    for _, outcome in hv.comparisons.values():
        assert outcomes(thermal)[outcome.id] == outcome


def test_no_offset_without_resistance_or_case():
    """Without X/R of the governing case the effect of the offset is left out."""
    still = {**ENTRY, "driving_point": {"resistance": 0.0, "reactance": 10.0}}
    for entries in ((still,), ()):
        assert "offset" not in assessed(duty=duty_of(entries, HV=1.5, LV=3.4)).windings["HV"].comparisons


def test_an_effect_beyond_the_limit_is_an_open_point():
    """Within by the standard's form, but with eddy loss past the limit: said, with both numbers."""
    thermal = assessed(duty=duty_of(HV=2.4, LV=3.4))
    hv = thermal.windings["HV"]
    assert hv.check.verdict == "within"
    assert [p.id for p in thermal.fragment.open_points] == [
        "thermal.HV.temperature_with_eddy_loss.above_limit",
        "thermal.HV.temperature_with_offset.above_limit",
    ]
    point = thermal.fragment.open_points[0]
    assert point.template == "HV: exact, with eddy loss, the winding reaches {other}; the limit is {limit}."
    assert point.values["limit"].value == 250.0


def test_missing_inputs_are_named_and_the_review_goes_on():
    """A winding without section and material is not assessed, naming both keys; the other one is."""
    thermal = assessed(('conductor_material = "copper"\nconductor_section = "25 mm^2"\n', ""))
    assert thermal.windings["HV"].check.verdict == "not assessed"
    assert thermal.windings["LV"].check.verdict == "within"
    missing = thermal.fragment.missing[0]
    assert missing.id == "thermal.HV.temperature"
    assert missing.keys == ("windings.HV.conductor_material", "windings.HV.conductor_section")
    assert missing.reason == "the temperature cannot be worked out without these inputs"
    assert outcomes(thermal)["thermal.HV.temperature"].reason == missing.reason


def test_iec_needs_the_start_temperature():
    """Without it IEC does not assess; IEEE takes its default and says so."""
    gone = ('start_temperature = "105 degC"\n', "")
    iec = assessed(gone)
    assert [m.keys for m in iec.fragment.missing] == [("rating.start_temperature",)] * 2
    assert outcomes(iec)["thermal.HV.start_temperature"].reason == "ambient and rated rise belong to the unit"
    ieee = assessed(IEEE, gone)
    assert ieee.windings["HV"].start.value == 110.0
    assert outcomes(ieee)["thermal.HV.start_temperature"].source == "IEEEC57.12.00-2015, 7.4"


def test_a_winding_without_current_is_not_assessed():
    """Where the duty has no current there is no temperature, and no rated multiple."""
    thermal = assessed(duty=duty_of(HV=None, LV=3.4))
    assert thermal.windings["HV"].multiple is None
    assert thermal.windings["HV"].check.reason == "the current of the winding is not assessed"
    assert "thermal.HV.multiple" not in outcomes(thermal)


def test_own_values_of_a_winding_come_first():
    """Duration and start of a winding stand before those of the unit, and the source says so."""
    own = ("eddy_share = 0.10", 'eddy_share = 0.10\nfault_duration = "1 s"\nstart_temperature = "95 degC"')
    thermal = assessed(own)
    hv, lv = thermal.windings["HV"], thermal.windings["LV"]
    assert (hv.duration.value, hv.start.value, lv.duration.value, lv.start.value) == (1.0, 95.0, 2.0, 105.0)
    assert hv.duration.source == "unit file, windings.HV.fault_duration"
    assert lv.start.source == "unit file, rating.start_temperature"


def test_default_duration_is_the_standards():
    """Without a duration the standard's 2 s, recalled."""
    thermal = assessed(('fault_duration = "2 s"\n', ""))
    found = outcomes(thermal)["thermal.HV.duration"]
    assert (found.value, found.provenance, found.source) == (2.0, "recalled", "IEC60076-5:2006, 4.1.3, 4.1.5")


@pytest.mark.parametrize(("standard", "clause"), [
    ((), "IEC60076-5:2006, 4.1.5"),
    ((IEEE,), "IEEEC57.12.00-2015, 7.4"),
])  # fmt: skip
def test_a_fault_longer_than_the_form_holds_is_not_assessed(standard, clause):
    """A duration beyond the range of the form gives no number and no verdict, but the reason and the key to change."""
    thermal = assessed(*standard, ('fault_duration = "2 s"', 'fault_duration = "12 s"'))
    reason = f"rating.fault_duration is 12 s, longer than the 10 s for which the adiabatic form holds ({clause})"
    assert thermal.fragment.missing[0] == Missing("thermal.HV.temperature", ("rating.fault_duration",), reason)
    hv = thermal.windings["HV"]
    assert hv.temperature is None
    assert (hv.check.verdict, hv.check.reason) == ("not assessed", reason)
    assert outcomes(thermal)["thermal.HV.temperature"].reason == reason
    assert (hv.comparisons, hv.shots) == ({}, None)


def test_a_windings_own_fault_duration_is_named():
    """Where the winding has a duration of its own, that key is the one to change."""
    own = ("eddy_share = 0.10", 'eddy_share = 0.10\nfault_duration = "11 s"')
    (missing,) = assessed(own).fragment.missing
    assert missing.keys == ("windings.HV.fault_duration",)
    assert missing.reason.startswith("windings.HV.fault_duration is 11 s, longer than the 10 s ")


@pytest.mark.parametrize(("standard", "current"), [((), 10.0), ((IEEE,), 20.0)], ids=["IEC", "IEEE"])
def test_beyond_the_form_the_permissible_duration_decides(standard, current):
    """Without a temperature, a fault that outlasts the permissible duration is past the limit all the same."""
    thermal = assessed(*standard, duty=duty_of(HV=current, LV=3.4))
    hv = thermal.windings["HV"]
    temperature, duration = (c for c in thermal.fragment.checks if c.id.startswith("thermal.HV."))
    assert (temperature.id, temperature.verdict) == ("thermal.HV.temperature", "not assessed")
    assert (duration.id, duration.unit, duration.ability) == ("thermal.HV.permissible_duration", "s", "thermal")
    assert (duration.value, duration.limit.value, duration.limit.sense) == (hv.permissible_duration, 2.0, "at least")
    assert duration.value < 2.0
    assert (duration.verdict, duration.governing_case) == ("exceeds", CASE)
    assert duration.limit.source.startswith("unit file, rating.fault_duration; the limit reached is that of ")
    assert duration.unconfirmed  # the temperature that is reached is recalled


def test_a_confirmed_limit_leaves_the_duration_as_given():
    """With the signatory's limit the check stands on the duration alone and is as well known as that."""
    own = '[limits]\n"thermal.HV.temperature" = { value = "250 degC", source = "read" }\n[windings.HV]'
    confirmed = ("[windings.HV]", own)
    check = assessed(confirmed, duty=duty_of(HV=10.0, LV=3.4)).fragment.checks[1]
    assert (check.limit.source, check.limit.provenance) == ("unit file, rating.fault_duration", "maker")
    by_standard = ('fault_duration = "2 s"\n', "")
    check = assessed(confirmed, by_standard, duty=duty_of(HV=10.0, LV=3.4)).fragment.checks[1]
    assert (check.limit.source, check.limit.provenance) == ("IEC60076-5:2006, 4.1.3, 4.1.5", "recalled")


def test_the_permissible_duration_decides_nothing_beside_a_temperature():
    """With a temperature, or beyond the duration for which the form holds, it is no check."""
    hot = assessed(duty=duty_of(HV=4.0, LV=3.4))
    assert hot.windings["HV"].permissible_duration < 2.0
    assert [c.id for c in hot.fragment.checks] == ["thermal.HV.temperature", "thermal.LV.temperature"]
    long = assessed(('fault_duration = "2 s"', 'fault_duration = "12 s"'), duty=duty_of(HV=4.0, LV=3.4))
    assert long.windings["HV"].permissible_duration < 2.0
    assert {c.verdict for c in long.fragment.checks} == {"not assessed"}
    assert len(long.fragment.checks) == 2


@pytest.mark.parametrize("standard", [(), (IEEE,)], ids=["IEC", "IEEE"])
@pytest.mark.parametrize("section", ["0.001 mm^2", "1e-9 mm^2"])
def test_a_section_of_nearly_nothing_ends_in_no_number(standard, section):
    """However high the density, there is a reason and no failure; what can be drawn is finite."""
    thermal = assessed(*standard, ('"25 mm^2"', f'"{section}"'))
    hv = thermal.windings["HV"]
    assert (hv.temperature, hv.check.verdict) == (None, "not assessed")
    assert hv.check.reason
    assert hv.shots is None
    assert all(np.all(np.isfinite(line)) for line in hv.curve.values())


def test_beyond_the_pole_there_is_no_temperature():
    """A current that would melt the conductor is refused by the form's own condition; comparisons that fail are left out."""
    thermal = assessed(duty=duty_of(HV=10.0, LV=3.4))
    hv = thermal.windings["HV"]
    assert hv.check.reason == "average_temperature_copper: requires J^2 t < 106000 (IEC60076-5:2006, 4.1.5)."
    assert hv.comparisons == {}
    assert hv.shots is None
    assert np.all(np.isfinite(hv.curve["standard"]))


def test_start_above_the_limit_has_no_permissible_duration():
    """A start at or above the limit is past it already; the temperature itself is still checked."""
    thermal = assessed(('start_temperature = "105 degC"', 'start_temperature = "260 degC"'))
    found = outcomes(thermal)["thermal.HV.permissible_duration"]
    assert found.value is None
    assert found.reason == (
        "permissible_duration_copper: requires permitted temperature above the initial temperature "
        "(IEC60076-5:2006, 4.1.5, solved for the duration)."
    )
    assert thermal.windings["HV"].check.verdict == "exceeds"
    ieee = assessed(IEEE, ('start_temperature = "105 degC"', 'start_temperature = "260 degC"'))
    assert ieee.windings["HV"].permissible_duration is None


def test_a_signatory_replaces_the_limit():
    """The signatory's figure decides and remembers the kit's own."""
    own = '[limits]\n"thermal.HV.temperature" = { value = "150 degC", source = "read by the reviewer" }\n[windings.HV]'
    thermal = assessed(("[windings.HV]", own))
    limit = thermal.windings["HV"].limit
    assert (limit.value, limit.provenance, limit.source) == (150.0, "signatory", "read by the reviewer")
    assert limit.instead_of.value == 250.0
    assert thermal.windings["HV"].check.verdict == "exceeds"


def test_a_signatory_settles_what_the_table_does_not():
    """A dry-type unit without class has no limit; the signatory's figure gives one."""
    dry = (('immersion = "oil"', 'immersion = "dry"'), ("thermal_class = 105\n", ""))
    thermal = assessed(*dry)
    check = thermal.windings["HV"].check
    assert (check.verdict, check.reason) == ("not assessed", "the limit depends on the thermal class")
    assert thermal.fragment.missing[0].keys == ("rating.thermal_class",)
    assert outcomes(thermal)["thermal.HV.permissible_duration"].reason == "there is no limit to reach"
    own = '[limits]\n"thermal.HV.temperature" = { value = "350 degC", source = "own" }\n[windings.HV]'
    settled = assessed(*dry, ("[windings.HV]", own))
    assert settled.windings["HV"].check.verdict == "within"
    assert settled.windings["HV"].limit.instead_of is None


def test_a_limit_of_another_kind_is_refused():
    """A signatory's limit that is no temperature is the user's error, by key."""
    unit = unit_of()
    object.__setattr__(unit, "limits", {"thermal.HV.temperature": SimpleNamespace(value=0.35, source="own")})
    with pytest.raises(InputError) as raised:
        assess_thermal(unit, rules_for(unit), duty_of(HV=1.5, LV=3.4))
    assert str(raised.value) == (
        'limits."thermal.HV.temperature".value: must be a temperature such as "250 degC", got a share of Rp0.2.'
    )


def test_material_without_a_limit_says_so():
    """Without a material there is no limit to hold against either."""
    thermal = assessed(('conductor_material = "copper"\n', ""))
    assert thermal.windings["HV"].limit is None
    assert thermal.fragment.missing[0].keys == ("windings.HV.conductor_material",)


def test_ieee_dry_with_eddy_loss_is_not_assessed():
    """The eddy share of a dry-type unit has no tabled reference temperature, so IEEE's form refuses it."""
    dry = (('immersion = "oil"', 'immersion = "dry"'), ("thermal_class = 105", "thermal_class = 180"))
    thermal = assessed(IEEE, *dry)
    assert thermal.windings["HV"].check.reason == (
        "thermal.HV.temperature: the eddy share has no tabled reference temperature for this immersion "
        "(IEEEC57.12.00-2015, 7.4)."
    )
    assert thermal.windings["LV"].check.verdict == "within"


def test_an_uncertain_recalled_limit_does_not_decide():
    """A limit of low confidence leaves the check not assessed, and says what is needed."""
    unit = unit_of()

    class Uncertain:
        """The rule set with a limit of low confidence."""

        def __getattr__(self, name):
            return getattr(rules_for(unit), name)

        def temperature_limit(self, *given):
            found = rules_for(unit).temperature_limit(*given)
            weak = type(found.limit)(found.limit.value, "degC", "at most", found.limit.source, "recalled", "L")
            return type(found)(weak)

    thermal = assess_thermal(unit, Uncertain(), duty_of(HV=1.5, LV=3.4))
    check = thermal.windings["HV"].check
    assert check.verdict == "not assessed"
    assert check.reason == "the recalled limit is uncertain; a signatory's own figure is needed"


@pytest.mark.parametrize("standard", [(), (IEEE,)], ids=["IEC", "IEEE"])
def test_curve_passes_through_start_and_result(standard):
    """The curve begins at the start temperature and passes through the result at the duration."""
    hv = assessed(*standard).windings["HV"]
    assert hv.curve["standard"][0] == pytest.approx(105.0)
    at_duration = np.interp(2.0, hv.curve["time"], hv.curve["standard"])
    assert at_duration == pytest.approx(hv.temperature, abs=0.1)
    assert hv.curve["time"][-1] == pytest.approx(min(10.0, 1.25 * hv.permissible_duration))
    assert np.all(hv.curve["offset"] >= hv.curve["exact"])


def test_second_fault_after_a_pause_is_information():
    """Two faults with a pause: the second ends higher; it has an id, worked lines and no check."""
    thermal = assessed()
    hv = thermal.windings["HV"]
    second = outcomes(thermal)["thermal.HV.reclosing.second"].value
    assert hv.shots.ends[0] < hv.shots.ends[1] == pytest.approx(second, abs=1e-9)
    twice = 340.0 * math.exp(2 * 2 * 7200 / 106000) - 235.0
    assert second == pytest.approx(twice, abs=0.1)
    assert second < twice


def test_multiple_refers_to_the_winding_or_to_the_self_cooled_base():
    """A delta winding's rated current is a third of the power at line voltage; IEEE refers to the self-cooled power."""
    iec = assessed()
    assert iec.windings["HV"].multiple == pytest.approx(1500 / (40e3 / (math.sqrt(3) * 132)))
    assert iec.windings["LV"].multiple == pytest.approx(3400 / (40e3 / (3 * 33)))
    cooled = ("fault_duration", 'self_cooled_power = "20 MVA"\nfault_duration')
    assert assessed(IEEE, cooled).windings["HV"].multiple == pytest.approx(2 * iec.windings["HV"].multiple)
    assert assessed(cooled).windings["HV"].multiple == pytest.approx(iec.windings["HV"].multiple)


@pytest.mark.parametrize(
    ("group", "core", "phases", "expected"),
    [
        ("YNa0", "three-limb", 3, (40e3 / (math.sqrt(3) * 132), 40e3 / math.sqrt(3) * (1 / 33 - 1 / 132))),
        ("Ii0", "single-phase", 1, (40e3 / 132, 40e3 / 33)),
        ("Dyn11", "three-limb", 3, (40e3 / (3 * 132), 40e3 / (math.sqrt(3) * 33))),
    ],
)
def test_rated_current_of_each_connection(group, core, phases, expected):
    """Series and common windings, single-phase and delta windings."""
    unit = unit_of(("YNd11", group), ("three-limb", core), ("phases = 3", f"phases = {phases}"))
    rated = [rated_steps(unit, rules_for(unit), name).current.value for name in unit.windings]
    assert rated == pytest.approx(expected)


def test_through_fault_curve_of_the_unit():
    """Category III at 30 MVA upwards IV: mechanical part from half the greatest current, always; own points drawn in."""
    curve = assessed().through_fault
    assert curve.category == "IV"
    assert curve.frequent_above is None
    greatest = max(p.multiple for p in curve.points)
    currents, durations = curve.mechanical
    assert (currents[0], currents[-1]) == (pytest.approx(greatest / 2), pytest.approx(greatest))
    assert durations[-1] == pytest.approx(2.0)
    assert durations[1] == pytest.approx(8.0)
    assert curve.thermal[0][0] == 2.0
    assert curve.thermal[1][0] == pytest.approx(1800.0)
    assert {p.winding: p.duration for p in curve.points} == {"HV": 2.0, "LV": 2.0}


@pytest.mark.parametrize(
    ("power", "current", "category", "frequent", "last"),
    [("4 MVA", 0.15, "II", 10.0, 25.0), ("20 MVA", 0.8, "III", 5.0, 25.0), ("400 kVA", 0.03, "I", None, 40.0)],
)
def test_through_fault_curve_by_category(power, current, category, frequent, last):
    """Faults in life above which the mechanical part counts; category I has one curve to 40 times base."""
    thermal = assessed(("40 MVA", power), ("180 kW", "3 kW"), duty=duty_of(HV=current, LV=current))
    curve = thermal.through_fault
    assert (curve.category, curve.frequent_above) == (category, frequent)
    assert curve.thermal[0][-1] == last
    assert (curve.mechanical is None) == (category == "I")
    if category == "I":
        assert curve.reason == "the category has one curve, without a mechanical part"


@pytest.mark.parametrize(("power", "current", "category"), [("4 MVA", 0.7, "II"), ("40 MVA", 8.0, "IV")])
def test_thermal_part_runs_to_the_greatest_current(power, current, category):
    """Beyond 25 times base the thermal part goes on along 1250/I^2 to the unit's own greatest multiple."""
    thermal = assessed(("40 MVA", power), ("180 kW", "3 kW"), duty=duty_of(HV=current, LV=current))
    curve = thermal.through_fault
    greatest = max(p.multiple for p in curve.points)
    assert greatest > 25.0
    assert curve.category == category
    assert curve.thermal[0][-1] == greatest
    assert curve.thermal[1][-1] == pytest.approx(1250 / greatest**2)
    assert list(curve.thermal[0]) == sorted(curve.thermal[0])


@pytest.mark.parametrize(
    ("power", "hv", "reason"),
    [
        ("10 kVA", 0.001, "the rated power lies below the first category"),
        ("40 MVA", None, "no current is assessed"),
        ("40 MVA", 0.01, "fault_impedance: 'current_multiple' must be at least 1 1 "),
    ],
)
def test_through_fault_curve_says_why_it_has_no_mechanical_part(power, hv, reason):
    """Below the first category, without a current, or with a current below the base."""
    thermal = assessed(("40 MVA", power), ("180 kW", "1 W"), duty=duty_of(HV=hv, LV=hv))
    assert thermal.through_fault.mechanical is None
    assert thermal.through_fault.reason.startswith(reason)


def test_joint_below_the_thermal_curve_is_joined_at_the_longest():
    """A corner below twice base lies left of the thermal curve; the upright joint then takes the constant integral."""
    duty = duty_of(HV=0.5, LV=0.5)
    currents, durations = assessed(duty=duty).through_fault.mechanical
    assert currents[0] < 2.0
    assert durations[0] == pytest.approx(1250 / currents[0] ** 2)


@pytest.mark.parametrize("tag", ["BV-T1", "BV-T2", "BV-D7"])
def test_examples_have_unique_ids_and_every_winding(tag):
    """Every winding of the examples is assessed; no id stands twice; steps end in the quantities of the same id."""
    unit = read_unit(EXAMPLES / tag / "unit.toml")
    rules = rules_for(unit)
    thermal = assess_thermal(unit, rules, assess_duty(unit, rules))
    assert set(thermal.windings) == set(unit.windings)
    fragment = thermal.fragment
    for items in (fragment.quantities, fragment.steps, fragment.checks):
        assert len({item.id for item in items}) == len(items)
    results = {step.id: step.result.value for step in fragment.steps}
    for outcome in fragment.quantities:
        if outcome.id in results:
            assert outcome.value == results[outcome.id]
    assert fragment.entry()["checks"][0]["verdict"] in ("within", "exceeds")


def test_methods_are_those_the_rule_sets_name():
    """Every rule set's form exists."""
    assert set(METHODS) == {"average temperature", "all heat stored"}

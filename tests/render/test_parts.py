"""The sections of a record show every number as data that the results file holds."""

import re

import pytest
from tests.render import demo

from throughfault.render import parts
from throughfault.render.html import table
from throughfault.render.numbers import full_value
from throughfault.render.record import data_ids, lint, loose_digits
from throughfault.workbook.results import lookup

PARTS = demo.html()


@pytest.mark.parametrize("name", PARTS)
def test_no_loose_digit(name):
    """Digits stand in data, formulas, names, citations and versions only."""
    assert loose_digits(PARTS[name]) == []


@pytest.mark.parametrize("name", PARTS)
def test_every_data_is_in_the_results_file(name):
    """Id and full value agree."""
    for id_, value in data_ids(PARTS[name]):
        assert full_value(lookup(demo.RESULTS, id_)) == value, id_


@pytest.mark.parametrize("name", PARTS)
def test_a_part_is_clean(name):
    """Nothing on it could load, run or restyle."""
    assert [fault for fault in lint(PARTS[name]) if fault.startswith("line")] == []


def leaves(node, path=()):
    """Every value of the unit file by its path."""
    if isinstance(node, dict):
        return {k2: v2 for k, v in node.items() for k2, v2 in leaves(v, (*path, k)).items()}
    if isinstance(node, list):
        return {k2: v2 for k, v in enumerate(node) for k2, v2 in leaves(v, (*path, str(k))).items()}
    return {"/".join(("inputs", *path)): full_value(node)}


@pytest.mark.parametrize("inputs", [demo.INPUTS, {
    "windings": {"HV": {"rated_power": "1 MVA"}},
    "design": {
        "core": {"limbs": 3},
        "coils": [
            {"name": f"C{n}", "blocks": [{"bottom": "90 mm", "turns": {"plus": 20, "minus": -40}}], "conductor": {"bonded": False}}
            for n in range(8)
        ],
    },
    "impedances": [{"impedance": "1 %"}],
    "empty": {},
}])  # fmt: skip
def test_every_key_of_the_unit_file_is_shown(inputs):
    """Nothing that was given is left out, whatever its nesting."""
    assert dict(data_ids(parts.unit_data_part(inputs, {}))) == leaves(inputs)


def test_defaults_are_named():
    """Each default in force stands with its key."""
    assert ("defaults/windings.HV.eddy_share", "0") in data_ids(PARTS["unit_data"])
    assert "No default was needed." in parts.unit_data_part({}, {})


def test_every_case_is_shown_by_its_largest_phase():
    """R.m.s. and peak of the phase that carries most, for every winding of every case with current."""
    ids = {id_ for id_, _ in data_ids(PARTS["duty"])}
    for case in demo.CASES:
        for name, phases in case["currents"].items():
            for measure in ("rms", "peak"):
                most = max(phases, key=lambda p, m=measure, held=phases: held[p][m])
                assert f"cases/{case['id']}/currents/{name}/{most}/{measure}" in ids


def test_a_case_without_current_in_the_transformer_is_left_out():
    """A fault fed by its own terminal's network stands in the results file only."""
    still = {**demo.CASES[0], "id": "principal/HV/3ph/HV"}
    none = {"rms": 0.0, "angle": 0.0, "peak": 0.0}
    still["currents"] = {name: dict.fromkeys(phases, none) for name, phases in still["currents"].items()}
    shown = parts.duty_part({**demo.DUTY.entry(), "cases": [*demo.CASES, still]})
    assert "cases/principal/HV/3ph/HV/" not in {id_[: len("cases/principal/HV/3ph/HV/")] for id_, _ in data_ids(shown)}


def test_every_quantity_of_a_part_is_shown():
    """Results of any name find a place."""
    for name, fragment in (("duty", demo.DUTY), ("thermal", demo.THERMAL), ("requirement", demo.REQUIREMENT)):
        ids = {id_ for id_, _ in data_ids(PARTS[name])}
        for quantity in fragment.quantities:
            assert quantity.id in ids or quantity.value is None


def test_tapping_table_picks_the_largest():
    """Governing current by tapping, by its place among the cases."""
    largest = max(demo.CASES, key=lambda case: case["currents"]["LV"]["a"]["peak"])
    assert f"cases/{largest['id']}/currents/LV/a/peak" in {i for i, _ in data_ids(PARTS["duty"])}


def test_a_result_not_assessed_gives_its_reason():
    """The reason is printed where the number would stand."""
    assert "outside the range X/R 1 to 14" in PARTS["duty"]


def test_a_single_phase_unit_and_absent_currents():
    """One phase, a winding without current in a case, a part without cases."""
    case = {
        "id": "principal/LV/LL/HV",
        "tapping": "principal",
        "fault": "LL",
        "at": "LV",
        "required_by_standard": True,
        "currents": {"HV": {"a": {"rms": 1.0, "peak": None}}, "LV": {"a": {}}},
        "terminals": {},
    }
    entry = {"quantities": {}, "cases": [case], "checks": []}
    shown = parts.duty_part(entry)
    assert {i for i, _ in data_ids(shown)} == {"cases/principal/LV/LL/HV/currents/HV/a/rms"}
    assert data_ids(parts.duty_part({"quantities": {}, "cases": [], "checks": []})) == []


def test_thermal_part_shows_points_to_note():
    """Open points of the part stand in it."""
    entry = {**demo.THERMAL.entry(), "open_points": demo.RESULTS["open_points"][:1]}
    assert ("open_points/duty.peak_exact/more", "1.27") in data_ids(parts.thermal_part(entry))


def test_verdict_is_said_in_words_with_its_reason():
    """Each ability has a sentence on what its verdict rests on."""
    check = demo.RESULTS["checks"]
    alone = {"thermal": "withstands", "dynamic": "not assessed", "overall": "not assessed"}
    shown = parts.verdict_part(alone, check[:1], (), "none complete")
    assert "every check that applies is within its limit" in shown
    assert "no check applies" in shown
    assert "No limit unconfirmed" in shown
    one = parts.verdict_part(alone, [check[3]], (), "none complete")
    assert "a check that applies is not assessed" in one
    two = parts.verdict_part(alone, [check[3], check[3] | {"id": "b"}], ("a", "b"), "none complete")
    assert "several checks that apply are not assessed" in two
    assert "limits unconfirmed</strong>" in two
    assert "several checks exceed their limits" in parts.verdict_part(alone, check, (), "none complete")


def test_first_page_lists_what_bars_approval_first():
    """Blocking points lead; limits already listed as unconfirmed are not said twice."""
    shown = PARTS["summary"]
    assert shown.index("category") < shown.index("duty.peak_exact")
    assert "limit.thermal.LV.temperature" not in shown
    assert "limit.thermal.LV.temperature" in PARTS["open_point"]


def test_cautions():
    """What every record says, the margins of the force models among it."""
    for told in (
        "carry margins",
        "withstand only",
        "re-energise",
        "maker&#39;s responsibility",
        "licensed practice",
        "live workbook",
    ):
        assert told in parts.cautions()


def test_first_page_names_the_governing_case_of_each_quantity():
    """Current, peak and temperature of one winding may be governed by different cases; each row has its own."""
    cases = ("plus/LV/LL/HV", "minus/LV/3ph/HV", "minus/LV/LG/HV")
    ids = ("duty.HV.symmetrical", "duty.HV.peak", "thermal.HV.temperature")
    made = {i: {**demo.RESULTS["quantities"][i], "governing_case": c} for i, c in zip(ids, cases, strict=True)}
    shown = parts.summary_part({**demo.RESULTS, "quantities": made}, ())
    rows = re.findall(r"<tr>(.*?)</tr>", shown[shown.index("Governing case of each") :], re.DOTALL)[1:4]
    assert '<th scope="rowgroup" rowspan="3"><span class="identity">HV</span></th>' in rows[0]
    for id_, case, row in zip(ids, cases, rows, strict=True):
        assert [i for i, _ in data_ids(row)] == [id_]
        assert case in row.replace("\N{ZERO WIDTH SPACE}", "")
        assert "<math" in row
    assert "Governing case of each" not in parts.summary_part({**demo.RESULTS, "quantities": {}}, ())


def test_declared_values_stand_beside_calculated_ones():
    """One row a declared value, every number of it in the results; a zero has no deviation; nothing declared, no table."""
    declared = {
        "declared.duty.HV.peak": demo.outcome("a", 4.0, "kA", ""),
        "declared.duty.HV.peak.deviation": demo.outcome("b", 0.725, "%", ""),
        "declared.duty.LV.peak": demo.outcome("c", 0.0, "kA", ""),
    }
    entries = {name: outcome.entry() for name, outcome in declared.items()}
    quantities = demo.RESULTS["quantities"] | entries
    shown = parts.declared_table(entries, quantities)
    assert data_ids(shown) == [
        ("declared.duty.HV.peak", "4.0"), ("duty.HV.peak", "4.029"), ("declared.duty.HV.peak.deviation", "0.725"),
        ("declared.duty.LV.peak", "0.0"), ("duty.LV.peak", "9.3047"),
    ]  # fmt: skip
    assert loose_digits(shown) == []
    assert parts.declared_table({}, quantities) == ""


def test_a_long_table_may_break():
    """A table of many rows may break across printed pages, a short one may not."""
    rows = [["a", "b"]] * 16
    assert '<table class="results long">' in table("t", ["x", "y"], rows, "results")
    assert '<table class="results">' in table("t", ["x", "y"], rows[1:], "results")


def test_signatures_and_how_to_verify():
    """Each role has a line; the commands need nothing of the kit but the last two."""
    shown = PARTS["signature"]
    for told in (
        "Author",
        "Checker",
        "Approver",
        "Witness",
        "sha256sum -c SHA256SUMS",
        "ssh-keygen -Y verify",
        "throughfault verify BV-T1-A",
        "throughfault reproduce BV-T1-A",
    ):
        assert told in shown


def test_hostile_names_are_inert():
    """Markup in any text of the unit file stays text in every part."""
    bad = "<img src=x onerror=alert(1)>"
    inputs = {
        bad: bad,
        "identity": {"purchaser": bad},
        "windings": {bad: {bad: bad}},
        "list": [{"name": bad, "between": [bad, bad]}],
    }
    unit = {"tag": bad, "title": bad, "revision": bad}
    results = {**demo.RESULTS, "unit": unit, "inputs": inputs, "standard": bad}
    shown = (
        parts.summary_part(results, [bad]) + parts.unit_data_part(inputs, {bad: bad}) + parts.signature_part(bad, bad)
    )
    assert "<img" not in shown


def test_many_measures_stand_below_each_other():
    """A table of many quantities turns upright, so that it never grows wider than the page; nothing is lost."""
    measures = ("density", "temperature", "permissible_duration", "multiple", "offset_2", "duration")
    made = {
        f"thermal.{w}.{m}": demo.outcome(f"thermal.{w}.{m}", 1.5, "s", "" if m == "multiple" else "t")
        for w in ("HV", "LV") for m in measures if (w, m) != ("LV", "multiple")
    }  # fmt: skip
    quantities = demo.Fragment(quantities=tuple(made.values())).entry()["quantities"]
    shown = parts.thermal_part({"quantities": quantities, "checks": [], "open_points": []})
    assert {id_ for id_, _ in data_ids(shown)} == set(made)
    assert '<th scope="col">Quantity</th><th scope="col">Symbol</th><th scope="col" class="number">' in shown
    assert '<th scope="row">Governing case</th>' in shown
    assert loose_digits(shown) == []


def test_a_value_that_is_no_table_is_shown():
    """A list of plain values at the top of the file has its own block."""
    assert data_ids(parts.unit_data_part({"notes": ["one", "two"]}, {})) == [
        ("inputs/notes/0", "one"),
        ("inputs/notes/1", "two"),
    ]

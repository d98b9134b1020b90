"""Reproduction: the numbers come out again, and what does not is named."""

import copy
import json

import pytest

from throughfault.errors import RecordError, UnitFileError
from throughfault.workbook import reproduce as module
from throughfault.workbook.reproduce import compare_results, reproduce
from throughfault.workbook.results import read_results, results_bytes


def alter(record, change):
    results = read_results(record)
    change(results)
    (record / "results.json").write_bytes(results_bytes(results))


def test_an_untouched_record_comes_out_again(record):
    """Every number, word, id and governing case is found again."""
    comparison = reproduce(record)
    assert comparison.differences == ()
    assert comparison.notes == ()
    assert comparison.compared > 1000
    assert comparison.exit_code == 0


def test_an_altered_result_is_named_with_both_values(record):
    """A changed number, verdict and case are each named."""

    def change(results):
        results["quantities"]["duty.HV.peak"]["value"] *= 1.0 + 1e-8
        results["verdicts"]["thermal"] = "does not withstand"
        results["quantities"]["thermal.LV.temperature"]["governing_case"] = "principal/LV/3ph/HV"
        del results["quantities"]["thermal.HV.density"]["symbol"]
        results["cases"][0]["extra"] = 1

    alter(record, change)
    comparison = reproduce(record)
    names = [line.split(":")[0] for line in comparison.differences]
    assert names == [
        "cases/principal/HV/3ph/HV/extra",
        "quantities/duty.HV.peak/value",
        "quantities/thermal.HV.density/symbol",
        "quantities/thermal.LV.temperature/governing_case",
        "verdicts/thermal",
    ]
    assert comparison.differences[1].endswith(" kA")
    assert comparison.exit_code == 1


def test_altered_inputs_are_named(record):
    """Inputs that are not those of the results are named, with what follows from them."""
    unit_file = record / "inputs" / "unit.toml"
    unit_file.write_text(unit_file.read_text(encoding="utf-8").replace("10000 MVA", "9000 MVA"), encoding="utf-8")
    comparison = reproduce(record)
    assert comparison.differences[0] == "inputs_sha256: the inputs are not those of the results"
    assert any(line.startswith("quantities/duty.HV.symmetrical/value: ") for line in comparison.differences)


def test_another_kit_and_template_are_told(record, tmp_path, monkeypatch):
    """Kit versions, changes between them and a changed template are told beside the numbers."""
    changes = tmp_path / "CHANGES.md"
    changes.write_text(
        "# Changes\n\n## 9.2.0\n\n### Results changed\n\nPeak of HV,\nby 1 %.\n\n### Added\n\nx\n\n"
        "## 9.1.0\n\n### Added\n\ny\n\n## 0.0.1\n\n### Results changed\n\nold\n"
    )
    monkeypatch.setattr(module, "changes_file", lambda: changes)
    alter(record, lambda results: (results["kit"].update(version="0.0.1"), results["template"].update(sha256="0" * 64)))
    comparison = reproduce(record)
    assert comparison.differences == ()
    assert comparison.notes == (
        "template 'rating' differs from the one of the record (SHA-256 0000000000000000...)",
        f"kit: the record was made with 0.0.1, this is {module.__version__}",
        "9.2.0: results changed: Peak of HV, by 1 %.",
        "9.1.0: results changed: not stated",
    )


def test_a_foreign_template_must_be_named_and_be_the_recorded_one(record, tmp_path):
    """A template the kit does not ship is named by path, and its hash must be the recorded one."""
    alter(record, lambda results: results["template"].update(name="own"))
    with pytest.raises(RecordError) as fault:
        reproduce(record)
    assert str(fault.value) == "--template: the record was made with 'own', which the kit does not ship; give its path."
    other = tmp_path / "own.ipynb"
    text = module.read_template(module.find_template("rating")).data.decode()
    other.write_text(text.replace("cell-02", "cell-99"))
    with pytest.raises(
        RecordError, match=r"^--template: must have the recorded SHA-256 [0-9a-f]{64}, got [0-9a-f]{64}\.$"
    ):
        reproduce(record, other)
    other.write_bytes(text.encode())
    comparison = reproduce(record, other)
    assert comparison.differences == ()


def test_a_folder_without_results_is_no_record(tmp_path):
    """Only a record can be reproduced."""
    with pytest.raises(RecordError, match=r"must be a record folder, results\.json is missing or cannot be read\.$"):
        reproduce(tmp_path)


@pytest.mark.parametrize(
    "change", [lambda r: r["kit"].clear(), lambda r: r["template"].update(name=[1]), lambda r: r.update(checks=3)]
)
def test_results_that_lack_what_every_record_names_are_refused(record, change):
    """A malformed record is bad input, not a fault of the kit."""
    alter(record, change)
    with pytest.raises(RecordError, match=r": results\.json: (kit\.version|template\.name|checks): "):
        reproduce(record)


def test_a_record_without_a_usable_unit_file_is_refused(record):
    """What cannot be reviewed cannot be reproduced, and every fault of the file is named."""
    (record / "inputs" / "unit.toml").write_text("format = 3\n", encoding="utf-8")
    with pytest.raises(UnitFileError, match=r"unit\.toml: .*format: must be "):
        reproduce(record)
    (record / "inputs" / "unit.toml").unlink()
    with pytest.raises(UnitFileError, match=r"/inputs/unit\.toml: cannot be read: "):
        reproduce(record)


def test_whole_numbers_beyond_a_double_are_compared(results):
    """A number that no float holds is a difference, not a failure."""
    new = copy.deepcopy(results)
    new["quantities"]["duty.HV.peak"]["value"] = 10**400
    (line,) = compare_results(results, new)[0]
    assert line.startswith("quantities/duty.HV.peak/value: record ")


@pytest.fixture(scope="module")
def results(issued):
    return json.loads((issued.folder / "results.json").read_bytes())


@pytest.mark.parametrize(
    ("name", "relative", "differs"),
    [
        ("duty.HV.peak", 5e-10, False),
        ("duty.HV.peak", 2e-9, True),
        ("force.HV.radial", 5e-7, False),
        ("force.HV.radial", 2e-6, True),
    ],
)
def test_tolerance_depends_on_how_a_number_is_found(results, name, relative, differs):
    """Closed forms and network agree to 1e-9, solved fields to 1e-6."""
    old = copy.deepcopy(results)
    old["quantities"][name] = {**old["quantities"]["duty.HV.peak"], "value": 1000.0}
    new = copy.deepcopy(old)
    new["quantities"][name]["value"] = 1000.0 * (1.0 + relative)
    assert bool(compare_results(old, new)[0]) == differs


def test_rounding_about_zero_is_no_difference(results):
    """Below the floor of its unit a number is rounding, and a phasor of no length has no angle."""
    new = copy.deepcopy(results)
    case = next(c for c in new["cases"] if c["currents"]["HV"]["a"]["rms"] == 0.0)
    case["currents"]["HV"]["a"].update(rms=1e-11, angle=77.0)
    assert compare_results(results, new)[0] == []


def test_one_sided_entries_are_named(results):
    """What only one of two results holds is named."""
    new = copy.deepcopy(results)
    del new["quantities"]["duty.HV.peak"]["reason" if "reason" in new["quantities"]["duty.HV.peak"] else "cell"]
    new["route"] = {"special": 1}
    assert compare_results(results, new)[0] == [
        "quantities/duty.HV.peak/cell: only in the record",
        "route/special: only in this run",
        "route: only in the record",
    ]

"""The results file: merged from fragments, looked up by id."""

import json

import pytest
from nbformat.v4 import new_code_cell, new_notebook, new_output

from throughfault.errors import DeclarationError, RecordError, RunError
from throughfault.workbook import results
from throughfault.workbook.results import MIME, emitted_fragments, lookup, merge_fragments, read_results, results_bytes

FRAGMENT = {
    "quantities": {"duty.HV.peak": {"value": 4.29, "unit": "kA"}},
    "steps": [{"id": "s", "arguments": {"t": {"value": 2.0, "unit": "s"}}, "result": 3.0, "unit": "kA"}],
    "checks": [{"id": "thermal.HV.temperature", "value": 200.0, "limit": 250.0}],
    "cases": [{"id": "principal/LV/3ph/HV", "currents": {"HV": {"a": {"rms": 1.5}}}}, {"id": "principal/LV", "x": 1}],
    "open_points": [{"id": "p", "values": {"z": {"value": 3.0, "unit": "%"}}}],
    "missing": [],
}


def test_fragments_are_taken_from_displayed_outputs():
    """What cells display under the kit's type is collected in order."""
    shown = [new_output("display_data", {MIME: {"quantities": {str(i): {}}}}) for i in range(2)]
    plain = new_output("stream", text="x")
    notebook = new_notebook(cells=[new_code_cell(outputs=[plain, shown[0]]), new_code_cell(outputs=[shown[1]])])
    assert [list(f["quantities"]) for f in emitted_fragments(notebook)] == [["0"], ["1"]]


def test_merging_keeps_order_and_single_entries():
    """Lists are joined and single entries kept."""
    merged = merge_fragments([FRAGMENT, {"verdicts": {"overall": "withstands"}, "steps": [{"id": "t"}]}])
    assert [step["id"] for step in merged["steps"]] == ["s", "t"]
    assert merged["verdicts"] == {"overall": "withstands"}


def test_a_duplicate_id_is_an_error_that_names_them_all():
    """The same id twice stops the run."""
    with pytest.raises(RunError) as fault:
        merge_fragments([FRAGMENT, FRAGMENT, {"route": "a"}, {"route": "b"}])
    assert str(fault.value) == (
        "results: the same id was emitted twice: cases: principal/LV, cases: principal/LV/3ph/HV, "
        "checks: thermal.HV.temperature, duty.HV.peak, open_points: p, route, steps: s."
    )


@pytest.mark.parametrize(
    ("path", "value"),
    [
        ("duty.HV.peak", 4.29),
        ("steps/s/result", 3.0),
        ("steps/s/arguments/t", 2.0),
        ("checks/thermal.HV.temperature/limit", 250.0),
        ("cases/principal/LV/3ph/HV/currents/HV/a/rms", 1.5),
        ("cases/principal/LV/x", 1),
        ("open_points/p/z", 3.0),
        ("inputs/impedances/0/impedance", "12.5 %"),
    ],
)
def test_what_an_id_stands_for(path, value):
    """Every id shown on a record leads to one value."""
    results = {**merge_fragments([FRAGMENT]), "inputs": {"impedances": [{"impedance": "12.5 %"}]}}
    assert lookup(results, path) == value


@pytest.mark.parametrize("path", ["duty.LV.peak", "cases/none", "inputs/x", "steps/s/arguments/x", "checks"])
def test_an_id_that_leads_nowhere_is_an_error(path):
    """An unknown id is an error, not an empty answer."""
    results = {**merge_fragments([FRAGMENT]), "inputs": {}}
    with pytest.raises(DeclarationError) as fault:
        lookup(results, path)
    assert str(fault.value) == f"results: nothing stands under '{path}'."


def test_results_hold_no_nan():
    """A number that is none cannot be written."""
    with pytest.raises(ValueError, match="not JSON compliant"):
        results_bytes({"x": float("nan")})


HEAD = b'{"format": "throughfault-results/1"'
WHOLE = {
    "format": "throughfault-results/1",
    "unit": {"tag": "BV-T9", "revision": "A"},
    "kit": {"version": "0.1.0"},
    "template": {"name": "rating", "sha256": "ab" * 32},
    "inputs_sha256": "cd" * 32,
    "checks": [],
}


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (None, ": must be a record folder, results.json is missing or cannot be read."),
        (b"[]", ": results.json must be of format throughfault-results/1."),
        (b'{"format": "other"}', ": results.json must be of format throughfault-results/1."),
        (HEAD + b', "x": NaN}', ": results.json is not strict JSON in UTF-8: NaN is not a JSON number."),
        (HEAD + b', "x": ' + b"[" * 100_000, ": results.json is nested too deeply to be read."),
        (HEAD + b', "x": ' + b"[" * 300 + b"]" * 300 + b"}", ": results.json is nested too deeply to be read."),
        (
            HEAD + b', "kit": {}}',
            ": results.json: unit: Field required; kit.version: Field required; template: Field required; inputs_sha256: Field required; checks: Field required.",
        ),
    ],
)
def test_what_is_no_record_is_refused(content, message, tmp_path):
    """A folder without readable results of the format, with what every record names, is no record."""
    if content is not None:
        (tmp_path / "results.json").write_bytes(content)
    with pytest.raises(RecordError) as fault:
        read_results(tmp_path)
    assert str(fault.value) == f"{tmp_path}{message}"


def test_results_larger_than_a_record_may_hold_are_refused_unread(tmp_path, monkeypatch):
    """No more is read than is allowed."""
    monkeypatch.setattr(results, "RESULTS_LIMIT", 10)
    (tmp_path / "results.json").write_bytes(results_bytes(WHOLE))
    with pytest.raises(RecordError, match=r"results\.json is larger than the 10 bytes allowed\.$"):
        read_results(tmp_path)


def test_results_read_back(tmp_path):
    """What is written is what is read."""
    (tmp_path / "results.json").write_bytes(results_bytes({**WHOLE, "µ": 0.1}))
    assert read_results(tmp_path)["µ"] == 0.1
    assert json.loads(results_bytes(FRAGMENT)) == FRAGMENT

"""Committed example reviews: the numbers of today are the numbers of their records."""

import json
from pathlib import Path

import pytest

from throughfault.render.record import data_ids, lint, loose_digits
from throughfault.workbook.reproduce import reproduce
from throughfault.workbook.results import lookup
from throughfault.workbook.verify import verify

EXAMPLES = (Path(__file__).parents[1] / "example_reviews").resolve()
RECORDS = sorted(path.parent for path in EXAMPLES.glob("*/*/results.json"))


def test_every_unit_has_its_record():
    """Each example unit file has a committed record."""
    units = {path.parent.name for path in EXAMPLES.glob("*/unit.toml")}
    assert {"BV-T1", "BV-T2", "BV-D7"} <= units
    assert units == {record.parent.name for record in RECORDS}


@pytest.mark.parametrize("record", RECORDS, ids=lambda path: path.name)
def test_numbers_are_those_of_the_committed_record(record):
    """A number that moves needs an entry under Results changed in kit/CHANGES.md and rebuilt examples."""
    comparison = reproduce(record)
    assert comparison.differences == (), "rebuild with tests/rebuild_examples.py and write under Results changed"


@pytest.mark.parametrize("record", RECORDS, ids=lambda path: path.name)
def test_the_committed_record_is_whole_and_unsigned(record):
    """Hashes are right, nothing is signed, the unit file is the one beside it."""
    report = verify(record)
    assert (report.exit_code, report.state) == (0, "unsigned")
    assert (record / "inputs" / "unit.toml").read_bytes() == (record.parent / "unit.toml").read_bytes()


@pytest.mark.parametrize("record", RECORDS, ids=lambda path: path.name)
def test_every_number_of_the_page_is_in_its_results(record):
    """Shown numbers lead to results, no digits stand loose, the page is inert."""
    page = (record / "record.html").read_text(encoding="utf-8")
    results = json.loads((record / "results.json").read_bytes())
    for name, value in data_ids(page):
        found = lookup(results, name)
        assert (
            float(value) == found
            if isinstance(found, float)
            else value == (str(found).lower() if isinstance(found, bool) else str(found))
        )
    assert loose_digits(page) == []
    assert lint(page) == []


@pytest.mark.parametrize("record", RECORDS, ids=lambda path: path.name)
def test_results_name_what_made_them(record):
    """Every quantity names cell or source and provenance; every check its limit's origin."""
    results = json.loads((record / "results.json").read_bytes())
    for entry in results["quantities"].values():
        assert entry["source"]
        assert entry["provenance"]
    for check in results["checks"]:
        assert check["limit"] is None or (check["limit_source"] and check["limit_provenance"])

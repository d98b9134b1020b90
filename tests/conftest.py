"""One review of an example, run once for every test that needs a record."""

import shutil
from pathlib import Path

import pytest

from throughfault.workbook.run import review

EXAMPLES = Path(__file__).parent / ".." / "example_reviews"


@pytest.fixture(scope="session")
def issued(tmp_path_factory):
    """A record of the 40 MVA unit; do not change it."""
    return review((EXAMPLES / "BV-T1" / "unit.toml").resolve(), tmp_path_factory.mktemp("records"))


@pytest.fixture
def record(issued, tmp_path):
    """A copy of the record that a test may change."""
    return Path(shutil.copytree(issued.folder, tmp_path / "records" / issued.folder.name))

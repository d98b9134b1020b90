"""The whole unit file, every key given, and ways to change it."""

from pathlib import Path

import pytest

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import read_unit_text

WHOLE = Path(__file__).with_name("whole.toml").read_text(encoding="utf-8")


def edited(text: str, *edits: tuple[str, str]) -> str:
    """Return the text with each first part replaced, once; a part that is not there is a mistake of the test."""
    for old, new in edits:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


@pytest.fixture
def whole() -> str:
    return WHOLE


@pytest.fixture
def change():
    """Read the whole file after edits."""
    return lambda *edits: read_unit_text(edited(WHOLE, *edits))


@pytest.fixture
def refused(change):
    """Return the faults of the whole file after edits."""

    def faults(*edits):
        with pytest.raises(UnitFileError) as caught:
            change(*edits)
        return list(caught.value.faults)

    return faults

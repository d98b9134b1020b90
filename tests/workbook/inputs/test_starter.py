"""Unit files to start from."""

import re

import pytest

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import KINDS_OF_UNIT, read_unit_text, starter


@pytest.mark.parametrize("kind", KINDS_OF_UNIT)
def test_a_starter_is_sound(kind):
    """A starting file reads without a fault or an open point, under its tag."""
    unit = read_unit_text(starter(kind, "BV-X9"))
    assert unit.identity.tag == "BV-X9"
    assert unit.warnings == ()


@pytest.mark.parametrize("kind", KINDS_OF_UNIT)
def test_a_starter_teaches(kind):
    """Every key but the repeated ones stands beside a remark, and none of the keys in remarks is unknown."""
    text = starter(kind, "BV-X9")
    assert text.count(" # ") > 15
    lines = [line[2:] for line in text.splitlines() if re.match(r"# (\[|[a-z_0-9]+ = |\"[a-z])", line)]
    head, tail = [], []
    for line in lines:
        (tail if line.startswith(("[", '"')) or tail else head).append(line)
    assert tail
    text = text.replace("vector_group", "\n".join(line for line in head if line.startswith("self")) + "vector_group", 1)
    read_unit_text(text + "\n" + "\n".join(tail))


def test_unknown_kind_and_bad_tag():
    """Both faults are told at once."""
    with pytest.raises(UnitFileError) as caught:
        starter("three-windings", "../x")
    assert caught.value.faults == (
        (
            "kind must be one of two-winding, three-winding, auto, distribution, got 'three-windings' "
            "(did you mean 'three-winding'?)."
        ),
        'tag must be a tag such as "BV-T1": at most 64 letters, digits and ". _ -", first a letter or digit, got \'../x\'.',
    )

"""Whatever the bytes, a unit or a report comes of them."""

from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import read_unit, read_unit_text

WHOLE = Path(__file__).with_name("whole.toml").read_text(encoding="utf-8")
LINES = WHOLE.splitlines()
ODD = [
    "nan", "-inf", "0x" + "f" * 300, '"\\u0000"', "[]", "{}", "[[[[1]]]]", '"1e308 kV"', '"-0 kV"', "true", "1979-05-27",
    '"0.35 Rp0.2"', "-1", "1e400", '""', '"\\u202e"', "{ a = { b = { c = 1 } } }", '"5 ohm - 12j ohm"', "07:32:00", "0",
]  # fmt: skip


def read(text):
    """Read the text; where it is refused, look at the report."""
    faults = ()
    try:
        read_unit_text(text)
    except UnitFileError as error:
        faults = error.faults or ("no fault told",)
    assert all(fault.startswith("unit.toml: ") and fault.endswith(".") for fault in faults)
    assert all(fault.isprintable() and "pydantic" not in fault for fault in faults)


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(data=st.binary(max_size=400))
def test_random_bytes(tmp_path, data):
    """Random bytes are refused, never a crash."""
    path = tmp_path / "unit.toml"
    path.write_bytes(data)
    with pytest.raises(UnitFileError):
        read_unit(path)


@settings(max_examples=150, deadline=None)
@given(edits=st.lists(st.tuples(st.integers(0, len(WHOLE) - 1), st.characters(codec="utf-8")), min_size=1, max_size=4))
def test_random_characters(edits):
    """Some characters exchanged give a unit or a report."""
    text = WHOLE
    for place, character in edits:
        text = text[:place] + character + text[place + 1 :]
    read(text)


@settings(max_examples=200, deadline=None)
@given(edits=st.lists(st.tuples(st.integers(0, len(LINES) - 1), st.sampled_from(ODD)), min_size=1, max_size=5))
def test_odd_values(edits):
    """Odd values in any place give a unit or a report."""
    lines = list(LINES)
    for place, value in edits:
        if " = " in lines[place]:
            lines[place] = f"{lines[place].split(' = ')[0]} = {value}"
    read("\n".join(lines))


@settings(max_examples=150, deadline=None)
@given(dropped=st.sets(st.integers(0, len(LINES) - 1), max_size=8), doubled=st.integers(0, len(LINES) - 1))
def test_lines_left_out_and_repeated(dropped, doubled):
    """Lines left out or repeated give a unit or a report."""
    lines = [line for number, line in enumerate(LINES) if number not in dropped]
    lines.insert(min(doubled, len(lines)), LINES[doubled])
    read("\n".join(lines))

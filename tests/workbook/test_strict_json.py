"""JSON that two readers could read differently is refused."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.workbook.strict_json import parse_strict, read_bounded, too_deep


@pytest.mark.parametrize(
    ("data", "message"),
    [
        (b'{"a": 1, "a": 2}', "is not strict JSON in UTF-8: the key 'a' stands twice"),
        (b"[NaN]", "is not strict JSON in UTF-8: NaN is not a JSON number"),
        (b"[-Infinity]", "is not strict JSON in UTF-8: -Infinity is not a JSON number"),
        (b"[1e999]", "is not strict JSON in UTF-8: 1e999 is beyond the range of a double"),
        (b"", "is not strict JSON in UTF-8: Expecting value: line 1 column 1 (char 0)"),
        (b"[" * 100_000, "is nested too deeply to be read"),
    ],
)
def test_doubtful_json_is_refused(data, message):
    """The message says what is wrong."""
    with pytest.raises(ValueError) as caught:
        parse_strict(data)
    assert str(caught.value) == message


def test_strict_json_is_read():
    """Plain JSON gives its values."""
    assert parse_strict('{"a": [1, 2.5e3, true, null, "\u00b0"]}'.encode()) == {"a": [1, 2500.0, True, None, "°"]}


def test_other_encodings_are_refused():
    """Bytes that are not UTF-8, and a byte order mark, are refused."""
    for data in (b'"\xff"', b"\xef\xbb\xbf1", '"x"'.encode("utf-16")):
        with pytest.raises(ValueError, match=r"^is not strict JSON in UTF-8: "):
            parse_strict(data)


def test_large_file_is_not_read(tmp_path):
    """A file above the bound is refused."""
    path = tmp_path / "big"
    path.write_bytes(b"x" * 11)
    with pytest.raises(ValueError) as caught:
        read_bounded(path, 10)
    assert str(caught.value) == "is larger than the 10 bytes allowed"
    assert read_bounded(path, 11) == b"x" * 11


@given(st.binary(max_size=200))
def test_any_bytes_give_a_value_or_a_sentence(data):
    """No bytes lead to anything but a value or a ValueError."""
    try:
        parse_strict(data)
    except ValueError as error:
        assert str(error).startswith("is n")  # noqa: PT017 - a value is as good


@pytest.mark.parametrize(("deep", "answer"), [(20, False), (21, True), (50_000, True)])
def test_depth_is_bounded(deep, answer):
    """Tables and lists may stand in each other to a depth, counted without recursion."""
    document = 1
    for level in range(deep):
        document = [document] if level % 2 else {"x": document}
    assert too_deep(document) is answer

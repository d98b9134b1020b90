"""Where a key stands in the text."""

import pytest

from throughfault.workbook.inputs.lines import line_of, lines_of_keys, path_text

TEXT = '''a = 1
[t]
"b c" = 2
d.e = 3   # remark
f = """
g = 4
[h]
"""
[[r]]
x = 1
[r.s]
y = 1
[[r]]
x = 2
[[r.u]]
z = 1
[[r.u]]
z = 2
[[r.u.v]]
w = 3
'''


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("a",), 1),
        (("t",), 2),
        (("t", "b c"), 3),
        (("t", "d", "e"), 4),
        (("t", "f"), 5),
        (("t", "g"), 2),
        (("h",), None),
        (("r", 0, "x"), 10),
        (("r", 0, "s", "y"), 12),
        (("r", 1, "x"), 14),
        (("r", 1, "u", 0, "z"), 16),
        (("r", 1, "u", 1, "z"), 18),
        (("r", 1, "u", 1, "v", 0, "w"), 20),
        (("r", 1, "u", 1, "missing"), 17),
        ((), None),
    ],
)
def test_lines(path, line):
    """A key is found under its table and row, else the nearest table round it."""
    assert line_of(path, lines_of_keys(TEXT)) == line


def test_a_key_that_stands_twice_has_no_line():
    """Where the place is not unique no line is told."""
    assert line_of(("a",), lines_of_keys("a = 1\na = 2\n")) is None


@pytest.mark.parametrize(
    ("path", "text"),
    [
        (("a", "b"), "a.b"),
        (("r", 0, "x"), "r[1].x"),
        (("a b",), '"a b"'),
        (("limits", "duty.LV.peak"), 'limits."duty.LV.peak"'),
        (("x\x1b\n",), '"x\\x1b\\n"'),
        (("y" * 100,), '"' + "y" * 40 + '..."'),
        ((), "the file"),
    ],
)
def test_paths_as_text(path, text):
    """Paths are written as in the file, rows from 1, and never carry control characters."""
    assert path_text(path) == text

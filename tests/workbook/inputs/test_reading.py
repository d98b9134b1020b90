"""From bytes to a unit: what is refused before and while the text is parsed."""

import os
import re

import pytest

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import read_unit, read_unit_text

BYTES = {
    "empty": (b"", "unit.toml: is empty; `throughfault new` writes a unit file to start from."),
    "blank": (b" \n\t\n", "unit.toml: is empty; `throughfault new` writes a unit file to start from."),
    "binary": (b"\x7fELF\x00\x01", "unit.toml: must be a text file, got binary data."),
    "not UTF-8": (b'a = 1\nb = "\xff"\n', "unit.toml: [line 2] must be UTF-8 text, got byte 0xff."),
    "UTF-16": ('a = "x"'.encode("utf-16"), "unit.toml: must be a text file, got binary data."),
    "too large": (b"#" * (1024 * 1024 + 1), "unit.toml: must be a unit file of at most 1 MiB; it is larger."),
    "long line": (
        b"a = 1\n#" + b"x" * 1000,
        "unit.toml: [line 2] a line must have at most 1000 characters, got 1001.",
    ),
    "truncated text": (b'a = "x', "unit.toml: is not TOML: unterminated string, at the end of the file."),
    "truncated array": (b"a = [1,\n", "unit.toml: is not TOML: invalid value, at the end of the file."),
    "no value": (b"a = 1\nb =\n", "unit.toml: [line 2] is not TOML: invalid value."),
    "the same key twice": (b"a = 1\na = 2\n", "unit.toml: [line 2] is not TOML: cannot overwrite a value."),
    "the same table twice": (
        b"[a]\n[b]\n[a]\n",
        "unit.toml: [line 3] is not TOML: cannot declare ('a',) twice.",
    ),
    "control character": (b'a = "\x01"\n', "unit.toml: [line 1] is not TOML: illegal character '\\x01'."),
    "deep nesting": (
        b"\n".join([b"a = " + b"[" * 900, *[b"[" * 900] * 20]),
        "unit.toml: is nested too deeply to be a unit file.",
    ),
}


def reported(tmp_path, data):
    path = tmp_path / "unit.toml"
    path.write_bytes(data)
    with pytest.raises(UnitFileError) as caught:
        read_unit(path)
    return caught.value


@pytest.mark.parametrize("name", BYTES)
def test_bytes_that_are_no_unit_file(name, tmp_path):
    """What cannot be read at all is refused in one sentence."""
    data, message = BYTES[name]
    assert reported(tmp_path, data).faults == (f"{tmp_path}/{message}",)


def test_deep_tables_are_unknown_keys(tmp_path):
    """Tables nested by hundreds of dotted keys are refused like any unknown key."""
    path = f"{tmp_path}/unit.toml"
    faults = reported(tmp_path, b"[" + b"a." * 400 + b"a]\n" + b"b." * 400 + b"b = 1\n").faults
    assert [f for f in faults if "not a known key" in f] == [
        (
            f"{path}: a: is not a known key; known here: format, standard, identity, rating, windings, impedances, "
            "system, earthing, zero_sequence, tap_changer, bushings, neutral, design, limits, declared."
        )
    ]


def test_a_missing_file(tmp_path):
    """A file that is not there is bad input; the path is told as it was given."""
    with pytest.raises(UnitFileError) as caught:
        read_unit(tmp_path / "none.toml")
    assert str(caught.value) == f"{tmp_path}/none.toml: cannot be read: No such file or directory."


@pytest.mark.parametrize("folder", [".", ".."])
def test_a_folder(folder):
    """A folder is bad input, named as it was given."""
    with pytest.raises(UnitFileError) as caught:
        read_unit(folder)
    assert str(caught.value) == f"{folder}: cannot be read: Is a directory."


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="has no named pipes")
def test_a_named_pipe_is_not_waited_for(tmp_path):
    """A pipe that nobody writes to is refused, not read."""
    os.mkfifo(tmp_path / "pipe")
    with pytest.raises(UnitFileError) as caught:
        read_unit(tmp_path / "pipe")
    assert str(caught.value) == f"{tmp_path}/pipe: cannot be read: must be a regular file."


def test_a_path_that_cannot_be():
    """A path with a null character is bad input."""
    with pytest.raises(UnitFileError, match=re.escape("unit?.toml: cannot be read: the path is not valid.")):
        read_unit("unit\0.toml")


def test_line_ends_and_byte_order_mark(tmp_path, whole):
    """A file written on another system reads the same."""
    path = tmp_path / "unit.toml"
    path.write_bytes(b"\xef\xbb\xbf" + whole.replace("\n", "\r\n").encode())
    assert read_unit(path) == read_unit_text(whole)


def test_all_faults_at_once(refused):
    """Faults of single keys and contradictions stand in one report, in the order of the file."""
    assert refused(
        ('tag = "BV-T1"', 'tag = "../T1"'),
        ("phases = 3\n", ""),
        ('frequency = "50 Hz"', 'frequency = "50 kHz"'),
        ('highest_voltage = "145 kV"', 'highest_voltage = "123 kV"'),
        ('rated_voltage = "33 kV"', 'rated_voltage = "33"'),
        ('tapping = "plus"', 'tapping = "pluss"'),
        ("x_over_r = 12.0", "x_over_rr = 12.0"),
        ("LV = 0.5, HV = 0.5 }", "LV = 0.5, HV = 0.6 }"),
    ) == [
        (
            'unit.toml: [line 5] identity.tag: must be a tag such as "BV-T1": at most 64 letters, digits and ". _ -", '
            "first a letter or digit, got '../T1'; source: order specification."
        ),
        "unit.toml: [line 12] rating.phases: is missing; it must be one of 1, 3; source: rating plate.",
        (
            "unit.toml: [line 13] rating.frequency: must be a frequency such as \"1 Hz\" (unit one of Hz), got '50 kHz' with "
            "unknown unit 'kHz' (did you mean 'Hz'?); source: rating plate."
        ),
        (
            "unit.toml: [line 27] windings.HV.highest_voltage: must not be below rated_voltage, 132 kV, got 123 kV "
            "(Um, IEC 60076-3)."
        ),
        (
            "unit.toml: [line 37] windings.LV.rated_voltage: must be a voltage such as \"1 kV\" (unit one of V, kV), got '33' "
            "without a unit; source: rating plate."
        ),
        (
            "unit.toml: [line 61] impedances[2].tapping: is 'pluss', which no winding has (did you mean 'plus'?); "
            "known: principal, plus, minus."
        ),
        "unit.toml: [line 87] system.HV.x_over_rr: is not a known key (did you mean 'x_over_r'?).",
        "unit.toml: [line 184] design.clamping.clamping_share: must add up to 1, got 1.1.",
    ]


def test_a_refused_value_causes_no_second_fault(refused):
    """A value that was refused takes part in no comparison."""
    assert refused(('rated_voltage = "132 kV"', 'rated_voltage = "132 kA"'), ("turns = 402", 'turns = "many"')) == [
        (
            'unit.toml: [line 27] windings.HV.rated_voltage: must be a voltage such as "1 kV" (unit one of V, kV), '
            "got '132 kA', which is of kind current; source: rating plate."
        ),
        (
            "unit.toml: [line 130] design.coils[1].blocks[1].turns: must be a number of turns (negative against the main "
            "coil), got 'many'; source: maker's design sheet."
        ),
    ]


def test_a_file_of_only_the_format():
    """Everything that is missing is named."""
    with pytest.raises(UnitFileError) as caught:
        read_unit_text('format = "throughfault-unit/1"', "bare.toml")
    assert list(caught.value.faults) == [
        (
            'bare.toml: standard: is missing; it must be "IEC 60076-5" or "IEEE C57.12.00", an edition may follow '
            '(":2006", "-2015").'
        ),
        "bare.toml: identity: is missing; it must be a table.",
        "bare.toml: rating: is missing; it must be a table.",
        "bare.toml: windings: is missing; it must be a table.",
        "bare.toml: impedances: is missing; it must be an array of tables [[impedances]].",
    ]


def test_markup_is_only_text(change):
    """Markup in a text is kept as it is; escaping is the renderer's."""
    title = "<script>alert(1)</script> & $x$ [a](b)"
    assert change(('title = "Brackwater Vale, transformer T1"', f'title = "{title}"')).identity.title == title


def test_a_name_with_control_characters_is_shown_safely(tmp_path):
    """The file's own name cannot carry control characters into the report."""
    path = tmp_path / "unit\x1b[31m.toml"
    path.write_bytes(b"")
    with pytest.raises(UnitFileError, match=re.escape("unit?[31m.toml: is empty")):
        read_unit(path)


def test_a_long_number_is_refused(refused):
    """Digits beyond any number are refused by the whole report, whatever parses them."""
    assert refused(("sticks = 24", "sticks = " + "9" * 900)) == [
        (
            "unit.toml: [line 143] design.coils[1].supports.sticks: must be a whole number from 1 to 100000, "
            "got a whole number of more than 64 digits; source: maker's design sheet."
        )
    ]


def test_a_report_has_an_end():
    """A file of thousands of faults is reported with the first 500 and the number of the others."""
    with pytest.raises(UnitFileError) as caught:
        read_unit_text("\n".join(f"k{n} = 1" for n in range(600)))
    assert len(caught.value.faults) == 501
    assert caught.value.faults[-1] == "unit.toml: 106 more faults."


def test_more_entries_than_any_unit_has(whole):
    """Tables of thousands of entries are refused before each is compared with each."""
    many = "".join(f'[windings.W{n}]\nrated_power = "1 MVA"\nrated_voltage = "1 kV"\n' for n in range(2000))
    with pytest.raises(UnitFileError, match=re.escape("unit.toml: windings: must have at most 9 entries.")):
        read_unit_text(f"{whole}\n{many}")


def test_more_tappings_than_any_unit_has(refused):
    """A table by tapping is bounded too."""
    table = "{ " + ", ".join(f"t{n} = 1.0" for n in range(61)) + " }"
    assert refused(("{ minus = 1.1 }", table)) == [
        "unit.toml: [line 82] system.prefault_voltage: must name at most 60 tappings, got 61; source: network operator."
    ]

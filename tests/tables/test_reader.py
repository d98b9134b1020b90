"""The one reader of tables: every fault of a file is named."""

import hashlib
from importlib.resources import files

import pytest

from throughfault.errors import DeclarationError
from throughfault.tables import read_table, table, table_digests, table_names

HEADER = """# title = "Invented"
# source = "CommonPractice"
# where = "nowhere"
# edition = "-"
# provenance = "common practice"
# confidence = "M"
# transcribed_by = "kit"
# checked_by = "-"
# errata = "none known"
# columns = [
#   { name = "kind", unit = "text", description = "words" },
#   { name = "power", unit = "MVA", description = "a number" },
# ]
"""
ROWS = "kind,power\nsmall,1.50\nlarge,\n"


def test_a_table_is_its_header_and_rows():
    """Words stay words, numbers become floats, an empty field is None."""
    made = read_table("invented", HEADER + ROWS)
    assert made.rows == ({"kind": "small", "power": 1.5}, {"kind": "large", "power": None})
    assert made.column("power") == (1.5, None)
    assert made.row(kind="small")["power"] == 1.5
    assert made.source.citation == "CommonPractice, nowhere"
    assert made.confidence == "M"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (HEADER.replace('# edition = "-"\n', "") + ROWS, "table invented: header lacks edition."),
        (HEADER.replace('"MVA"', '"horse"') + ROWS, "table invented: unknown unit 'horse'."),
        (HEADER + "kind,might\nsmall,1\n", "table invented: rows do not fit the columns ['kind', 'power']."),
        (HEADER + "kind,power\n", "table invented: rows do not fit the columns ['kind', 'power']."),
        (HEADER + "kind,power\nsmall\n", "table invented: rows do not fit the columns ['kind', 'power']."),
        (HEADER + "kind,power\nsmall,much\n", "table invented: 'much' in column 'power' is no number."),
        (HEADER.replace('"M"', '"S"') + ROWS, "table invented: confidence must be H, M or L."),
        (
            HEADER.replace('"CommonPractice"', '"CommonPractise"') + ROWS,
            "source 'CommonPractise' is not in the bibliography (did you mean 'CommonPractice'?).",
        ),
    ],
)
def test_a_faulty_file_is_refused(text, message):
    """One sentence for each fault of a file."""
    with pytest.raises(DeclarationError) as raised:
        read_table("invented", text)
    assert str(raised.value) == message


@pytest.mark.parametrize(
    ("ask", "message"),
    [
        (lambda t: t.column("pover"), "table invented: no column 'pover' (did you mean 'power'?)."),
        (lambda t: t.row(kind="huge"), "table invented: 0 rows with {'kind': 'huge'}."),
    ],
)
def test_asking_for_what_is_not_there(ask, message):
    """A column or row that does not exist is named."""
    with pytest.raises(DeclarationError) as raised:
        ask(read_table("invented", HEADER + ROWS))
    assert str(raised.value) == message


def test_an_unknown_table_is_named_with_the_nearest():
    """A slip of the pen meets the nearest name."""
    with pytest.raises(DeclarationError) as raised:
        table("iec60076_5_2006_peak_factr")
    assert str(raised.value) == (
        "there is no table 'iec60076_5_2006_peak_factr' (did you mean 'iec60076_5_2006_peak_factor'?)."
    )


def test_digests_are_those_of_the_files():
    """One SHA-256 for each file, by name."""
    digests = table_digests()
    assert tuple(name.removesuffix(".csv") for name in digests) == table_names()
    name, digest = next(iter(digests.items()))
    assert hashlib.sha256(files("throughfault.tables").joinpath(name).read_bytes()).hexdigest() == digest


def test_digests_are_those_of_the_tables_alone(tmp_path, monkeypatch):
    """Every table is hashed under its file name, and nothing that is no table."""
    (tmp_path / "a.csv").write_bytes(b"abc")
    (tmp_path / "__init__.py").write_bytes(b"")
    monkeypatch.setattr("throughfault.tables.files", lambda package: tmp_path)
    # SHA-256 of "abc": FIPS 180-4, example published by NIST
    assert table_digests() == {"a.csv": "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"}

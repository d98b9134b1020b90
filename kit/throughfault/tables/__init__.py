"""Tabled values of the standards: data files with a provenance header, and their one reader.

A file is a block of comment lines that together are TOML, then comma-separated rows with the
digits as transcribed. Required header keys: ``title``, ``source`` (key of the bibliography),
``where``, ``edition``, ``provenance``, ``confidence`` (H, M or L), ``transcribed_by``,
``checked_by``, ``errata`` and ``columns`` (list of ``{name, unit, description}``; unit ``text`` for words).
An ``evidence`` key names columns that stand there for the tests alone.
Nothing is extrapolated; a new edition is a new file.
"""

from __future__ import annotations

import csv
import hashlib
import tomllib
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Any

from throughfault.errors import DeclarationError, did_you_mean
from throughfault.quantities import UNITS
from throughfault.sources import Source

__all__ = ["Table", "table", "table_digests", "table_names"]

REQUIRED = {
    "title", "source", "where", "edition", "provenance", "confidence",
    "transcribed_by", "checked_by", "errata", "columns",
}  # fmt: skip


@dataclass(frozen=True)
class Table:
    """A published table: its header and its rows.

    Attributes
    ----------
    name
        File name without ending.
    header
        Everything the header says.
    rows
        One dictionary a row; numbers as float (an empty field is None), words as text.
    """

    name: str
    header: dict[str, Any]
    rows: tuple[dict[str, Any], ...]

    @property
    def source(self) -> Source:
        """Where the table stands."""
        return Source(self.header["source"], self.header["where"], self.header["provenance"])

    @property
    def confidence(self) -> str:
        """``H``, ``M`` or ``L``."""
        return str(self.header["confidence"])

    def column(self, name: str) -> tuple[Any, ...]:
        """Return one column."""
        if name not in self.rows[0]:
            raise DeclarationError(f"table {self.name}: no column '{name}'{did_you_mean(name, self.rows[0])}.")
        return tuple(row[name] for row in self.rows)

    def row(self, **wanted: str) -> dict[str, Any]:
        """Return the one row whose words equal the wanted ones."""
        found = [row for row in self.rows if all(row[k] == v for k, v in wanted.items())]
        if len(found) != 1:
            raise DeclarationError(f"table {self.name}: {len(found)} rows with {wanted}.")
        return found[0]


def _field(table: str, column: dict[str, str], text: str) -> Any:
    if column["unit"] == "text":
        return text
    if text == "":
        return None
    try:
        return float(text)
    except ValueError:
        raise DeclarationError(f"table {table}: '{text}' in column '{column['name']}' is no number.") from None


def read_table(name: str, text: str) -> Table:
    """Read a table file.

    Raises
    ------
    DeclarationError
        If a header key is missing, a unit or source is unknown, or the rows do not fit the columns.
    """
    lines = text.splitlines()
    header = tomllib.loads("\n".join(line[1:].strip() for line in lines if line.startswith("#")))
    if missing := REQUIRED - set(header):
        raise DeclarationError(f"table {name}: header lacks {', '.join(sorted(missing))}.")
    columns = header["columns"]
    for column in columns:
        if column["unit"] not in UNITS and column["unit"] != "text":
            raise DeclarationError(f"table {name}: unknown unit '{column['unit']}'.")
    rows = list(csv.reader(line for line in lines if line and not line.startswith("#")))
    names = [column["name"] for column in columns]
    if not rows or rows[0] != names or any(len(row) != len(names) for row in rows) or len(rows) == 1:
        raise DeclarationError(f"table {name}: rows do not fit the columns {names}.")
    body = tuple({c["name"]: _field(name, c, f) for c, f in zip(columns, row, strict=True)} for row in rows[1:])
    made = Table(name, header, body)
    if made.source and made.confidence not in ("H", "M", "L"):
        raise DeclarationError(f"table {name}: confidence must be H, M or L.")
    return made


def _files() -> dict[str, bytes]:
    folder = files("throughfault.tables")
    return {f.name.removesuffix(".csv"): f.read_bytes() for f in folder.iterdir() if f.name.endswith(".csv")}


def table_names() -> tuple[str, ...]:
    """Return the names of all tables."""
    return tuple(sorted(_files()))


def table_digests() -> dict[str, str]:
    """Return ``{file name: SHA-256}`` of all tables."""
    return {f"{name}.csv": hashlib.sha256(data).hexdigest() for name, data in sorted(_files().items())}


@cache
def table(name: str) -> Table:
    """Return a table by name.

    Raises
    ------
    DeclarationError
        If there is none of that name.
    """
    found = _files()
    if name not in found:
        raise DeclarationError(f"there is no table '{name}'{did_you_mean(name, found)}.")
    return read_table(name, found[name].decode("utf-8"))

"""From the bytes of a unit file to a validated unit."""

from __future__ import annotations

import re
import stat
import tomllib
from collections.abc import Callable, Iterable
from dataclasses import replace
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from throughfault.declare import OpenPoint
from throughfault.errors import UnitFileError
from throughfault.workbook.inputs.contradictions import contradictions
from throughfault.workbook.inputs.defaults import defaults_used
from throughfault.workbook.inputs.lines import lines_of_keys
from throughfault.workbook.inputs.messages import Fault, faults_of, report
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.open_points import open_points
from throughfault.workbook.inputs.unit import Unit, make_unit

__all__ = ["LARGEST_FILE", "read_unit", "read_unit_text"]

LARGEST_FILE = 1024 * 1024  # bytes
LONGEST_LINE = 1000  # characters; the TOML reader's time grows with the square of a dotted key
_AT_LINE = re.compile(r" \(at (?:line (\d+), column \d+|end of document)\)$")

ExtraWarnings = Iterable[Callable[[Unit], Iterable[OpenPoint]]]


def read_unit(path: str | Path, extra_warnings: ExtraWarnings = ()) -> Unit:
    """Read and validate a unit file.

    Parameters
    ----------
    path
        The file, a regular one of at most 1 MiB of UTF-8 text.
    extra_warnings
        Further functions that look for open points, such as comparisons with a standard's tables.

    Raises
    ------
    UnitFileError
        With every fault found.
    """
    return read_unit_text(_text_of(path), str(path), extra_warnings)


def _text_of(path: str | Path) -> str:
    name = _printable(str(path))
    try:
        mode = Path(path).stat().st_mode
        if not (stat.S_ISREG(mode) or stat.S_ISDIR(mode)):  # reading a pipe might never end; a folder says so itself
            raise UnitFileError(f"{name}: cannot be read: must be a regular file.")
        with Path(path).open("rb") as file:
            data = file.read(LARGEST_FILE + 1)
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) and error.strerror else "the path is not valid"
        raise UnitFileError(f"{name}: cannot be read: {reason}.") from None
    return _decoded(data, name)


def read_unit_text(text: str, name: str = "unit.toml", extra_warnings: ExtraWarnings = ()) -> Unit:
    """Validate the text of a unit file; `name` stands before each fault.

    Raises
    ------
    UnitFileError
        With every fault found.
    """
    name = _printable(name)
    raw = _parsed(text, name)
    faults: list[Fault] = []
    file = None
    try:
        file = UnitFile.model_validate(raw)
    except ValidationError as error:
        faults += faults_of(error)
    faults += contradictions(file or UnitFile.model_validate(raw, context={"holes": True}))
    if faults or file is None:
        raise UnitFileError(report(name, faults, lines_of_keys(text)))
    unit = replace(make_unit(file, raw), defaults=defaults_used(file))
    warnings = [*open_points(unit), *(point for look in extra_warnings for point in look(unit))]
    return replace(unit, warnings=tuple(warnings))


def _decoded(data: bytes, name: str) -> str:
    if len(data) > LARGEST_FILE:
        raise UnitFileError(f"{name}: must be a unit file of at most 1 MiB; it is larger.")
    if b"\0" in data:
        raise UnitFileError(f"{name}: must be a text file, got binary data.")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data[: error.start].count(b"\n") + 1
        raise UnitFileError(f"{name}: [line {line}] must be UTF-8 text, got byte 0x{data[error.start]:02x}.") from None


def _parsed(text: str, name: str) -> dict[str, Any]:
    if not text.strip():
        raise UnitFileError(f"{name}: is empty; `throughfault new` writes a unit file to start from.")
    for number, line in enumerate(text.split("\n"), 1):
        if len(line) > LONGEST_LINE:
            length = f"at most {LONGEST_LINE} characters, got {len(line)}"
            raise UnitFileError(f"{name}: [line {number}] a line must have {length}.")
    try:
        return tomllib.loads(text)
    except RecursionError:
        raise UnitFileError(f"{name}: is nested too deeply to be a unit file.") from None
    except ValueError as error:  # TOML errors, and numbers of thousands of digits
        raise UnitFileError(_toml_fault(str(error), name)) from None


def _toml_fault(text: str, name: str) -> str:
    place = _AT_LINE.search(text)
    line = f"[line {place[1]}] " if place and place[1] else ""
    reason = text[: place.start()] if place else "a number has too many digits"
    end = ", at the end of the file" if place and not place[1] else ""
    return f"{name}: {line}is not TOML: {_quiet(reason[:1].lower() + reason[1:])}{end}."


def _quiet(text: str) -> str:
    """Return the text without control characters and of bounded length, for a message."""
    return _printable(text)[:200]


def _printable(text: str) -> str:
    return "".join(c if c.isprintable() else "?" for c in text)

"""Faults of a unit file in the kit's words."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Any, get_args, get_origin

from pydantic import ValidationError
from pydantic.fields import FieldInfo

from throughfault.errors import did_you_mean
from throughfault.quantities import shown
from throughfault.workbook.inputs.annotations import leaf_of, plain_type
from throughfault.workbook.inputs.lines import KeyPath, line_of, path_text
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.section import Section

__all__ = ["Fault", "faults_of", "report", "unknown_name"]

MOST_FAULTS = 500  # a reader needs no more
#: what stands in the model but not in the file
_INNER = ("system", "terminals")


@dataclass(frozen=True, slots=True)
class Fault:
    """One fault: where, and what is wrong there."""

    path: KeyPath
    text: str


def report(name: str, faults: Iterable[Fault], places: dict[KeyPath, list[int]]) -> list[str]:
    """Write the faults in the order of the file, each with file, line and key path."""
    placed = [(line_of(fault.path, places), path_text(fault.path), fault.text) for fault in faults]
    placed.sort(key=lambda p: p[0] or 0)
    more = [f"{name}: {len(placed) - MOST_FAULTS} more faults."] if len(placed) > MOST_FAULTS else []
    told = [f"{name}: {f'[line {line}] ' if line else ''}{path}: {text}" for line, path, text in placed[:MOST_FAULTS]]
    return told + more


def faults_of(error: ValidationError) -> Iterator[Fault]:
    """Translate what the model found."""
    entries = error.errors(include_url=False)
    locations = [tuple(entry["loc"]) for entry in entries]
    for entry, location in zip(entries, locations, strict=True):
        path = _file_path(location)
        if entry["type"] == "extra_forbidden":
            yield Fault(path, _unknown(location))
        elif location[-1:] == ("[key]",):
            yield Fault(path[:-1], f"its name {_lowered(str(entry['msg']))}")
        elif entry["type"] == "missing":
            yield Fault(path, f"is missing; it must be {_wanted(location)}{_source(location)}.")
        elif entry["type"] == "refused":
            yield Fault(path, f"{str(entry['msg']).removesuffix('.')}{_source(location)}.")
        elif entry["type"] == "too_short":
            if not any(_inside(other, location) for other in locations):  # else the entries have faults of their own
                least, got = entry["ctx"]["min_length"], entry["ctx"]["actual_length"]
                yield Fault(
                    path,
                    "must not be empty." if least == 1 else f"must have at least {least} entries, got {got}.",
                )
        elif entry["type"] == "too_long":
            yield Fault(path, f"must have at most {entry['ctx']['max_length']} entries.")
        else:  # a table or an array of tables was wanted
            yield Fault(path, f"must be {_wanted(location)}, got {shown(entry['input'])}.")


def unknown_name(name: str, known: Iterable[str]) -> str:
    """Return the nearest known name, and the known ones."""
    names = list(known)
    shown_names = ", ".join(names[:12]) + (", ..." if len(names) > 12 else "")
    return f"{did_you_mean(name, names)}; known: {shown_names}."


def _inside(location: KeyPath, table: KeyPath) -> bool:
    return len(location) > len(table) and location[: len(table)] == table


def _lowered(text: str) -> str:
    return text[:1].lower() + text[1:]


def _file_path(location: KeyPath) -> KeyPath:
    return (location[0], *location[2:]) if location[:2] == _INNER and len(location) > 2 else location


def _unknown(location: KeyPath) -> str:
    section = _section(location[:-1])
    known = [name for name in section.model_fields if name != "terminals"] if section else []
    name = str(location[-1])
    near = did_you_mean(name, known) if len(name) <= 64 else ""
    return f"is not a known key{near or '; known here: ' + ', '.join(known)}."


def _wanted(location: KeyPath) -> str:
    field = _field(location)
    leaf = leaf_of(field) if field is not None else None
    if leaf is not None:
        return leaf.wanted
    if field is not None and get_origin(plain_type(field.annotation)) is tuple and not isinstance(location[-1], int):
        return f"an array of tables [[{path_text(_file_path(location))}]]"
    return "a table"


def _source(location: KeyPath) -> str:
    field = _field(location)
    extra = field.json_schema_extra if field is not None else None
    source = extra.get("source") if isinstance(extra, dict) else ""
    return f"; source: {source}" if source else ""


def _field(location: KeyPath) -> FieldInfo | None:
    """Return the field a location ends at; an entry of a table or array belongs to the table's field."""
    for length in range(len(location) - 1, -1, -1):
        section, name = _section(location[:length]), location[length]
        if section is not None and isinstance(name, str) and name in section.model_fields:
            return section.model_fields[name]
    return None


def _section(location: KeyPath) -> type[Section] | None:
    """Return the table a location leads to."""
    current: Any = UnitFile
    for part in location:
        if isinstance(current, type) and issubclass(current, Section):
            field = current.model_fields.get(str(part))
            current = plain_type(field.annotation) if field is not None else None
        else:  # an entry of a dict or a row of a tuple
            inner = [a for a in get_args(current) if a is not Ellipsis]
            current = plain_type(inner[-1]) if inner else None
    return current if isinstance(current, type) and issubclass(current, Section) else None

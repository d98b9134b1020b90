"""Where a key stands in the text of a unit file."""

from __future__ import annotations

import re

__all__ = ["KeyPath", "line_of", "lines_of_keys", "path_text"]

KeyPath = tuple[str | int, ...]
_BARE = r"[A-Za-z0-9_-]+"
_PART = rf'(?:{_BARE}|"[^"\\]*"|\'[^\']*\')'
_KEY = rf"{_PART}(?:\s*\.\s*{_PART})*"
_HEADER = re.compile(rf"\s*(\[\[?)\s*({_KEY})\s*\]\]?\s*(?:#.*)?")
_ASSIGNMENT = re.compile(rf"\s*({_KEY})\s*=\s*(.*)")
_QUOTES = ('"""', "'''")


def lines_of_keys(text: str) -> dict[KeyPath, list[int]]:
    """Return the lines, from 1, on which each table header or key stands.

    Keys inside inline tables are not found; their table is.
    """
    places: dict[KeyPath, list[int]] = {}
    counts: dict[KeyPath, int] = {}
    table: KeyPath = ()
    inside = ""  # the quotes of the multi-line text the scan is in
    for number, line in enumerate(text.split("\n"), 1):
        if inside:
            inside = "" if inside in line else inside
            continue
        header, assignment = _HEADER.fullmatch(line.rstrip()), _ASSIGNMENT.match(line)
        if header:
            table = _table(header, counts)
            places.setdefault(table, []).append(number)
        elif assignment:
            places.setdefault((*table, *_parts(assignment[1])), []).append(number)
            inside = next((q for q in _QUOTES if assignment[2].count(q) == 1), "")
    return places


def _table(header: re.Match[str], counts: dict[KeyPath, int]) -> KeyPath:
    """Return the path of a table header; a row of an array of tables gets its index."""
    path: KeyPath = ()
    for part in _parts(header[2]):
        path = (*path, part)
        if path in counts and not (header[1] == "[[" and len(_strip(path)) == len(_parts(header[2]))):
            path = (*path, counts[path])
    if header[1] == "[[":
        counts[path] = counts.get(path, -1) + 1
        path = (*path, counts[path])
    return path


def _strip(path: KeyPath) -> KeyPath:
    return tuple(part for part in path if isinstance(part, str))


def _parts(key: str) -> list[str]:
    return [part.strip().strip("\"'") for part in re.findall(_PART, key)]


def line_of(path: KeyPath, places: dict[KeyPath, list[int]]) -> int | None:
    """Return the line of a key, or of the nearest table round it, where that is unique."""
    for length in range(len(path), 0, -1):
        found = places.get(path[:length])
        if found:
            return found[0] if len(found) == 1 else None
    return None


def path_text(path: KeyPath) -> str:
    """Write a key path; rows of arrays count from 1, unusual keys stand in quotes."""
    text = ""
    for part in path:
        if isinstance(part, int):
            text += f"[{part + 1}]"
        else:
            shown = part if re.fullmatch(_BARE, part) and len(part) <= 64 else _quoted(part)
            text += f".{shown}" if text else shown
    return text or "the file"


def _quoted(part: str) -> str:
    short = part if len(part) <= 64 else f"{part[:40]}..."
    return '"' + short.encode("unicode_escape").decode("ascii").replace('"', '\\"') + '"'

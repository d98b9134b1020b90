"""What a page shows against the results file: ids of data, loose digits, values that do not agree."""

from __future__ import annotations

import re
from collections.abc import Mapping
from html.parser import HTMLParser
from typing import Any

from throughfault.render.numbers import full_value

__all__ = ["EXEMPT", "data_ids", "lookup", "loose_digits", "unresolved"]

#: classes in which digits may stand outside ``data`` and ``math``
EXEMPT = frozenset({"clause", "contents", "identity", "version"})
_VOID = {"br", "hr", "img", "meta", "col", "input", "link", "wbr", "base", "area", "source", "track", "embed"}
_DIGIT = re.compile(r"\d")
_LISTS = ("checks", "cases", "steps", "open_points", "missing")


class _Page(HTMLParser):
    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.data: list[tuple[str, str]] = []
        self.loose: list[str] = []
        self._open: list[tuple[str, bool]] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        given = dict(attrs)
        if tag == "data":
            self.data.append((given.get("data-id") or "", given.get("value") or ""))
        if tag not in _VOID:
            classes = set((given.get("class") or "").split())
            self._open.append((tag, tag in ("data", "math", "style") or bool(classes & EXEMPT)))

    def handle_endtag(self, tag: str) -> None:
        while any(name == tag for name, _ in self._open):
            if self._open.pop()[0] == tag:
                return

    def handle_data(self, data: str) -> None:
        if _DIGIT.search(data) and not any(exempt for _, exempt in self._open):
            self.loose.append(" ".join(data.split()))


def _read(page: str) -> _Page:
    reader = _Page()
    reader.feed(page)
    reader.close()
    return reader


def data_ids(page: str) -> list[tuple[str, str]]:
    """Return id and full value of every ``data`` element, in the order of the page."""
    return _read(page).data


def loose_digits(page: str) -> list[str]:
    """Return the texts with digits that stand outside data, formulas, names, citations and versions."""
    return _read(page).loose


def _walk(node: Any, path: str) -> Any:
    for key in path.split("/"):
        name = key.replace("~1", "/").replace("~0", "~")
        node = node[int(name)] if isinstance(node, list) else node[name]
    return node


def lookup(results: Mapping[str, Any], id: str) -> Any:  # noqa: A002 - the record's own word
    """Return what stands in the results under the id of a ``data`` element.

    An id is that of a quantity, or a path of keys and list positions; entries of lists are named by
    their own id, which may hold slashes.

    Raises
    ------
    LookupError
        If nothing stands there.
    """
    if id in results["quantities"]:
        return results["quantities"][id]["value"]
    first, _, rest = id.partition("/")
    if first not in _LISTS:
        return _walk(results, id)
    for entry in results[first]:
        if rest.startswith(f"{entry['id']}/"):
            found = _walk(_named(first, entry), rest.removeprefix(f"{entry['id']}/"))
            return found["value"] if isinstance(found, Mapping) else found
    raise LookupError(id)


def _named(part: str, entry: Mapping[str, Any]) -> Mapping[str, Any]:
    return entry["values"] if part == "open_points" else entry


def unresolved(page: str, results: Mapping[str, Any]) -> list[str]:
    """List the data of a page whose id or value the results file does not hold."""
    faults = []
    for id, value in data_ids(page):  # noqa: A001 - the record's own word
        try:
            held = full_value(lookup(results, id))
        except (LookupError, TypeError, ValueError):
            faults.append(f"'{id}' is not in the results file.")
            continue
        if held != value:
            faults.append(f"'{id}' shows {value}, the results file holds {held}.")
    return faults

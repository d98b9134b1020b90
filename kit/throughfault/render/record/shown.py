"""What a page shows: the ids and values of its data, and digits that stand where none may."""

from __future__ import annotations

import re
from html.parser import HTMLParser

__all__ = ["EXEMPT", "data_ids", "loose_digits"]

#: classes in which digits may stand outside ``data`` and ``math``
EXEMPT = frozenset({"clause", "contents", "identity", "version"})
_VOID = {"br", "hr", "img", "meta", "col", "input", "link", "wbr", "base", "area", "source", "track", "embed"}
_DIGIT = re.compile(r"\d")


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

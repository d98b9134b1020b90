"""The last look at a finished page: whatever could load, run or restyle is listed."""

from __future__ import annotations

import re
from base64 import b64encode
from collections import Counter
from hashlib import sha256
from html.parser import HTMLParser

from throughfault.render.record.sanitise import ATTRIBUTES, IMAGE, LINK, TAGS

__all__ = ["POLICY", "lint"]

#: the page's own policy; the hash is that of its one style element
POLICY = (
    "default-src 'none'; script-src 'none'; style-src 'sha256-{}'; img-src data:; font-src data:; "
    "base-uri 'none'; form-action 'none'"
)
_FRAME = {"html", "head", "meta", "title", "style", "body", "header", "main", "footer", "h1"}
_FRAME_ATTRIBUTES = {
    "html": {"lang"}, "main": {"tabindex"}, "meta": {"charset", "content", "http-equiv", "name"}, "title": {"class"},
}  # fmt: skip
_META = {"viewport", "generator", "color-scheme"}
_LOADING = re.compile(r"@import|url\(\s*['\"]?(?!data:font/woff;base64,)|expression\(|-moz-binding", re.IGNORECASE)


def style_hash(style: str) -> str:
    """Return the hash by which the policy admits a style element."""
    return b64encode(sha256(style.encode()).digest()).decode("ascii")


class _Reader(HTMLParser):
    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.faults: list[str] = []
        self.styles: list[str] = []
        self.policies: list[str] = []
        self.ids: Counter[str] = Counter()
        self.elements = 0
        self._in_style = False

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        line = f"line {self.getpos()[0]}"
        self.elements += 1
        self._in_style = tag == "style"
        if tag == "style":
            self.styles.append("")
        if tag not in TAGS | _FRAME:
            self.faults.append(f"{line}: element '{tag}' is not on the allowlist.")
        if len({name for name, _ in attrs}) != len(attrs):
            self.faults.append(f"{line}: '{tag}' names an attribute twice.")
        for name, value in attrs:
            self._attribute(line, tag, name, value or "")
        if tag == "meta":
            self._meta(line, {name: value or "" for name, value in attrs})

    def _attribute(self, line: str, tag: str, name: str, value: str) -> None:
        allowed = ATTRIBUTES["*"] | ATTRIBUTES.get(tag, set()) | _FRAME_ATTRIBUTES.get(tag, set()) | {"rel"}
        if name not in allowed:
            self.faults.append(f"{line}: attribute '{name}' of '{tag}' is not on the allowlist.")
        elif name == "src" and not IMAGE.fullmatch(value):
            self.faults.append(f"{line}: '{tag}' has a source that is not part of the page.")
        elif name == "href" and not LINK.fullmatch(value):
            self.faults.append(f"{line}: '{tag}' refers neither to a place in the page nor to an https address.")
        elif name == "id":
            self.ids[value] += 1

    def _meta(self, line: str, attributes: dict[str, str]) -> None:
        kind = attributes.get("http-equiv", "").lower()
        if kind == "content-security-policy":
            self.policies.append(attributes.get("content", ""))
            # A policy given by an element governs only what follows it.
            if self.elements > 4 or self.styles:  # html, head, meta charset, meta policy
                self.faults.append(f"{line}: the content security policy must come first in the head.")
        elif kind or not ("charset" in attributes or attributes.get("name") in _META):
            self.faults.append(f"{line}: a 'meta' element that is not on the allowlist.")

    def handle_comment(self, data: str) -> None:  # noqa: ARG002 - the parser's signature
        self.faults.append(f"line {self.getpos()[0]}: a comment has no place in a record.")

    def handle_pi(self, data: str) -> None:
        self.handle_comment(data)

    def unknown_decl(self, data: str) -> None:
        self.handle_comment(data)

    def handle_decl(self, decl: str) -> None:
        if decl.lower() != "doctype html":
            self.handle_comment(decl)

    def handle_data(self, data: str) -> None:
        if self._in_style:
            self.styles[-1] += data

    def handle_endtag(self, tag: str) -> None:
        if tag == "style":
            self._in_style = False


def lint(page: str) -> list[str]:
    """List whatever in a finished page could load, run or restyle; an empty list is a clean page."""
    reader = _Reader()
    reader.feed(page)
    reader.close()
    faults = reader.faults
    if len(reader.styles) != 1:
        faults.append(f"the page must have one style element, it has {len(reader.styles)}.")
    faults += ["the style sheet loads something." for style in reader.styles if _LOADING.search(style)]
    wanted = POLICY.format(style_hash(reader.styles[0])) if reader.styles else ""
    if reader.policies != [wanted]:
        faults.append("the page must have one content security policy, the record's own with its style's hash.")
    faults += [f"id '{name}' is used {count} times." for name, count in reader.ids.items() if count > 1]
    return faults

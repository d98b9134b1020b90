"""What may stand in a record: an allowlist of elements and attributes, nothing that loads, runs or restyles."""

from __future__ import annotations

import re

import nh3

__all__ = ["ATTRIBUTES", "IMAGE", "LINK", "TAGS", "sanitise"]

_MATH = {
    "annotation", "math", "mfrac", "mi", "mmultiscripts", "mn", "mo", "mover", "mpadded", "mphantom", "mprescripts",
    "mroot", "mrow", "mspace", "msqrt", "mstyle", "msub", "msubsup", "msup", "mtable", "mtd", "mtext", "mtr", "munder",
    "munderover", "none", "semantics",
}  # fmt: skip
_TEXT = {
    "a", "abbr", "b", "br", "caption", "code", "data", "dd", "div", "dl", "dt", "em", "figcaption", "figure", "h2",
    "h3", "h4", "h5", "hr", "i", "img", "li", "nav", "ol", "p", "pre", "section", "span", "strong", "sub", "sup",
    "table", "tbody", "td", "tfoot", "th", "thead", "tr", "ul",
}  # fmt: skip
#: elements a finding or a note may use
TAGS = _MATH | _TEXT
#: attributes by element; those under ``*`` on any
ATTRIBUTES: dict[str, set[str]] = {
    "*": {"aria-label", "aria-labelledby", "class", "dir", "id", "lang", "role"},
    "a": {"href"},
    "data": {"data-id", "value"},
    "img": {"alt", "height", "src", "width"},
    "ol": {"start"},
    "td": {"colspan", "headers", "rowspan"},
    "th": {"colspan", "headers", "rowspan", "scope"},
    "annotation": {"encoding"},
    "math": {"display"},
    "mfrac": {"linethickness"},
    "mi": {"mathvariant"},
    "mo": {"fence", "form", "largeop", "lspace", "maxsize", "minsize", "movablelimits", "rspace", "separator",
           "stretchy", "symmetric"},
    "mover": {"accent"},
    "munder": {"accentunder"},
    "munderover": {"accent", "accentunder"},
    "mpadded": {"depth", "height", "lspace", "voffset", "width"},
    "mspace": {"depth", "height", "width"},
    "mstyle": {"displaystyle", "scriptlevel"},
    "mtable": {"displaystyle", "scriptlevel"},
    "mtd": {"columnspan", "rowspan"},
}  # fmt: skip
#: images are part of the page; an image in SVG shown by ``img`` runs no script and loads nothing
IMAGE = re.compile(r"data:image/(?:svg\+xml|png|jpeg);base64,[A-Za-z0-9+/=]*")
LINK = re.compile(r"#[\w.-]+|https://[^\s\"'<>]+")


def _attribute(tag: str, name: str, value: str) -> str | None:
    if name == "src":
        return value if IMAGE.fullmatch(value) else None
    if tag == "a" and name == "href":
        return value if LINK.fullmatch(value) else None
    return value


_cleaner = nh3.Cleaner(
    tags=TAGS,
    attributes=ATTRIBUTES,
    attribute_filter=_attribute,
    url_schemes={"data", "https"},
    link_rel="noreferrer",
    strip_comments=True,
    clean_content_tags={"script", "style", "svg", "iframe", "object", "template", "noscript"},
)


def sanitise(markup: str) -> str:
    """Return the markup with everything taken out that is not on the allowlist."""
    return _cleaner.clean(markup)

"""LaTeX to MathML; what the converter does not know is refused, never guessed."""

from __future__ import annotations

import re
from functools import cache, lru_cache

from markupsafe import Markup
from math_core import LatexError, LatexToMathML

from throughfault.errors import DeclarationError

__all__ = ["mathml"]

# The converter lays out alternatives with style attributes; the record allows none, so that each
# known one becomes a class of the record's own style sheet.
_STYLES = {
    "text-align: left;justify-items: start;padding-right: 0;": "case",
    "text-align: left;justify-items: start;padding-right: 0;padding-left:1em;": "condition",
    "text-align: right;justify-items: end;padding-right: 0;": "aligned",
    "text-align: left;justify-items: start;padding-left: 0;": "case",
    "text-align: right;justify-items: end;padding-left: 0;padding-right: 0;": "aligned",
    "text-align: left;justify-items: start;padding-left: 0;padding-right: 0;": "case",
}
_STYLE = re.compile(r' style="([^"]*)"')


@cache
def _converter() -> LatexToMathML:
    return LatexToMathML(annotation=True, fancy_error=False)


@lru_cache(maxsize=4096)
def mathml(latex: str, *, display: bool = False) -> Markup:
    """Convert one formula; the LaTeX stays inside as annotation.

    Raises
    ------
    DeclarationError
        If the converter does not know a command, or lays out in a way the record has no class for.
    """
    try:
        converted = _converter().convert_with_local_state(latex, displaystyle=display)
    except LatexError as error:
        raise DeclarationError(f"'{latex}' cannot be set as a formula: {str(error).strip()}") from error
    markup, annotation, rest = converted.partition("<annotation")
    unknown = set(_STYLE.findall(markup)) - set(_STYLES)
    if unknown:
        raise DeclarationError(f"'{latex}' cannot be set as a formula: no class for the style '{min(unknown)}'.")
    classed = _STYLE.sub(lambda m: f' class="{_STYLES[m[1]]}"', markup)
    return Markup(classed.replace("&ApplyFunction;", "&#x2061;") + annotation + rest)  # noqa: S704 - escaped by the converter

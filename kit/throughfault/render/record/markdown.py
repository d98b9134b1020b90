"""Notes of a template (Markdown cells) as HTML: escaped, formulas set, code spans as names."""

from __future__ import annotations

from functools import cache
from typing import Any

import mistune
from markupsafe import Markup
from mistune.plugins.math import math
from mistune.plugins.table import table

from throughfault.render.mathml import mathml

__all__ = ["note_html"]

LOWEST, HIGHEST = 2, 5


class _Notes(mistune.HTMLRenderer):
    """Escapes everything; the first-level heading is the kind of document, not a part of it."""

    def __init__(self) -> None:
        super().__init__(escape=True)

    def heading(self, text: str, level: int, **attrs: Any) -> str:
        if level < LOWEST:
            return f'<p class="kind">{text}</p>\n'
        return super().heading(text, min(level, HIGHEST), **attrs)

    def codespan(self, text: str) -> str:
        return Markup('<code class="identity">{}</code>').format(text)

    def inline_math(self, text: str) -> str:
        return mathml(text)

    def block_math(self, text: str) -> str:
        return f'<div class="equation">{mathml(text.strip(), display=True)}</div>\n'


@cache
def _reader() -> mistune.Markdown:
    # A renderer's own methods go before those a plugin brings, which leave the formula to a script.
    return mistune.Markdown(renderer=_Notes(), plugins=[table, math])


def note_html(source: str) -> str:
    """Turn the Markdown of a note into HTML.

    Raises
    ------
    DeclarationError
        If a formula cannot be set.
    """
    return str(_reader()(source))

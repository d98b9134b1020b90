"""The one style sheet of a record: the common part, the bars, the page's margin boxes, the font."""

from __future__ import annotations

import re
from functools import cache
from importlib.resources import files

from throughfault.render.blocks import BAR_STEPS, FULL_BAR
from throughfault.render.font import FAMILY, font_face

__all__ = ["style_sheet"]

_UNSAFE = re.compile(r"[^A-Za-z0-9 ._,:-]")


@cache
def _common() -> str:
    sheet = files("throughfault.render.record").joinpath("style.css").read_text(encoding="utf-8")
    bars = "".join(f".u{step}>.fill{{width:{step / FULL_BAR:g}%}}\n" for step in range(BAR_STEPS + 1))
    return sheet.replace("RECORD_MATH", f'"{FAMILY}"') + bars


def _string(text: str) -> str:
    """Write text as a CSS string that cannot end early."""
    return '"' + _UNSAFE.sub(lambda m: f"\\{ord(m[0]):x} ", text) + '"'


def style_sheet(body: str, tag: str, revision: str) -> str:
    """Return the style sheet for a record's body; tag and revision stand at the head of every printed page."""
    boxes = (
        f"@page{{@top-left{{content:{_string(tag)}}}@top-right{{content:{_string(f'Revision {revision}')}}}"
        '@bottom-left{content:"Short-circuit withstand: design review record"}'
        '@bottom-right{content:"Page " counter(page) " of " counter(pages)}}\n'
    )
    return "\n" + font_face(body) + _common() + boxes

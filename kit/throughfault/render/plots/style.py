"""One look for every figure, and its bytes: no date, no random ids, glyphs as paths."""

from __future__ import annotations

import base64
from collections.abc import Iterator
from contextlib import contextmanager
from io import BytesIO
from typing import Any

import matplotlib as mpl
from markupsafe import Markup
from matplotlib.figure import Figure

from throughfault.render.html import Text, figure

__all__ = ["ACCENT", "GREY", "INK", "LINES", "MARKERS", "axes", "figure_html", "look", "svg_bytes"]

INK, GREY, ACCENT = "#1a1a1a", "#7d7d7d", "#1f4e79"
#: told apart without colour, in this order
LINES: tuple[Any, ...] = ("-", (0, (6, 2)), (0, (1.5, 1.5)), (0, (6, 2, 1.5, 2)), (0, (10, 2, 1, 2, 1, 2)))
MARKERS = ("o", "s", "^", "D", "v", "P", "X", "<", ">")
WIDTH = 6.9  # inches; the text width of an A4 page
_SETTINGS: dict[Any, Any] = {
    "svg.hashsalt": "throughfault",
    "svg.fonttype": "path",
    "text.parse_math": False,  # names come from the unit file
    "font.family": ["DejaVu Sans"],
    "font.size": 8.5,
    "axes.titlesize": 9,
    "axes.titleweight": "bold",
    "axes.titlelocation": "left",
    "axes.labelsize": 8.5,
    "axes.edgecolor": INK,
    "axes.linewidth": 0.8,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.grid": True,
    "grid.color": "#dddddd",
    "grid.linewidth": 0.6,
    "xtick.direction": "out",
    "ytick.direction": "out",
    "lines.linewidth": 1.4,
    "legend.frameon": False,
    "figure.constrained_layout.use": True,
}


@contextmanager
def look() -> Iterator[None]:
    """Draw with the record's settings, whatever the user's own are."""
    with mpl.rc_context():
        mpl.rcdefaults()
        mpl.rcParams.update(_SETTINGS)
        yield


def axes(height: float, rows: int = 1) -> tuple[Figure, list[Any]]:
    """Make a figure of the page's width with axes one below the other; call within `look`."""
    made = Figure(figsize=(WIDTH, height))
    return made, list(made.subplots(rows, 1, squeeze=False)[:, 0])


def svg_bytes(drawn: Figure) -> bytes:
    """Return the figure as SVG; the same figure gives the same bytes."""
    out = BytesIO()
    with look():
        drawn.savefig(out, format="svg", metadata={"Date": None, "Creator": None})
    return out.getvalue()


def figure_html(drawn: Figure, id: str, caption: Text, alternative: str) -> Markup:  # noqa: A002 - the element's own word
    """Set a figure with its caption and text alternative."""
    encoded = base64.b64encode(svg_bytes(drawn)).decode("ascii")
    return figure(f"data:image/svg+xml;base64,{encoded}", id, caption, alternative)

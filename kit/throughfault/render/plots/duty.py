"""First peaks of every case, a panel for each winding."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from matplotlib.figure import Figure

from throughfault.render.plots.style import ACCENT, INK, MARKERS, axes, look

__all__ = ["duty_by_case"]

ROW_HEIGHT = 0.19  # inches
PANEL_HEIGHT = 0.62
SPREAD = 0.5  # of a row, between the first and the last tapping


def _largest(case: Mapping[str, Any], winding: str) -> float | None:
    peaks = [phase["peak"] for phase in case["currents"].get(winding, {}).values() if phase.get("peak") is not None]
    return max(peaks, default=None)


def _draw(ax: Any, winding: str, cases: Sequence[Mapping[str, Any]], rows: list[str], tappings: list[str]) -> None:
    worst: tuple[float, float, str] | None = None
    for number, tapping in enumerate(tappings):
        shift = SPREAD * (number / max(1, len(tappings) - 1) - 0.5) if len(tappings) > 1 else 0.0
        here = [(c, peak) for c in cases if c["tapping"] == tapping and (peak := _largest(c, winding)) is not None]
        at = [rows.index(_row(case)) + shift for case, _ in here]
        peaks = [peak for _, peak in here]
        ax.plot(peaks, at, linestyle="", marker=MARKERS[number % len(MARKERS)], markersize=4.2, markerfacecolor="white",
                markeredgecolor=INK, markeredgewidth=0.9, label=tapping, clip_on=False)  # fmt: skip
        for y, (case, peak) in zip(at, here, strict=True):
            if worst is None or peak > worst[0]:
                worst = (peak, y, case["id"])
    if worst is not None:
        ring = {"markerfacecolor": "none", "markeredgecolor": ACCENT, "markeredgewidth": 1.5}
        ax.plot(worst[0], worst[1], marker="o", markersize=9, **ring)
        text = {"textcoords": "offset points", "color": ACCENT, "fontweight": "bold"}
        ax.annotate(f"{worst[0]:.2f} kA", worst[:2], xytext=(8, -3), **text)
    ax.set_title(f"Winding {winding}")
    ax.set_yticks(range(len(rows)), rows)
    ax.set_ylim(len(rows) - 0.5, -0.5)
    ax.set_xlim(left=0.0)
    ax.margins(x=0.12)
    ax.grid(visible=False, axis="y")


def _row(case: Mapping[str, Any]) -> str:
    return f"{case['fault']} at {case['at']}"


def duty_by_case(cases: Sequence[Mapping[str, Any]]) -> Figure:
    """Draw the largest phase peak of each winding in every case.

    Parameters
    ----------
    cases
        Entries of the results file. Rows are kind and place of the fault, markers the tapping;
        several markers of one kind in a row are infeeds. The governing one is ringed and labelled.
    """
    windings = list(dict.fromkeys(name for case in cases for name in case["currents"]))
    rows = list(dict.fromkeys(_row(case) for case in cases))
    tappings = list(dict.fromkeys(case["tapping"] for case in cases))
    with look():
        drawn, panels = axes(len(windings) * (PANEL_HEIGHT + ROW_HEIGHT * len(rows)) + 0.3, len(windings))
        for ax, winding in zip(panels, windings, strict=True):
            _draw(ax, winding, cases, rows, tappings)
        panels[-1].set_xlabel("first peak of the largest phase current, kA")
        handles, labels = panels[0].get_legend_handles_labels()
        drawn.legend(handles, labels, loc="outside upper left", ncols=5, title="tapping", alignment="left")
        return drawn

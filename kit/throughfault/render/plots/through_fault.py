"""Through-fault curve: permissible duration against current, with the unit's own points."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from matplotlib.figure import Figure
from matplotlib.ticker import FuncFormatter, LogLocator, NullFormatter
from numpy.typing import NDArray

from throughfault.render.plots.style import ACCENT, INK, LINES, MARKERS, axes, look

__all__ = ["Curve", "UnitPoint", "through_fault_curve"]

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Curve:
    """A line of the diagram: name, current in multiples of rated current, duration in s; both of shape (n,)."""

    name: str
    multiple: Sequence[float] | Array
    duration: Sequence[float] | Array


@dataclass(frozen=True)
class UnitPoint:
    """A point of the unit under review: name, current in multiples of rated current, duration in s."""

    name: str
    multiple: float
    duration: float


def _plain(value: float, _: object = None) -> str:
    return f"{value:g}"


def through_fault_curve(curves: Sequence[Curve], points: Sequence[UnitPoint] = ()) -> Figure:
    """Draw permissible durations on logarithmic axes, with the unit's own points."""
    with look():
        drawn, (ax,) = axes(3.9)
        for number, curve in enumerate(curves):
            ax.plot(curve.multiple, curve.duration, color=INK, linestyle=LINES[number % len(LINES)], label=curve.name)
        for number, point in enumerate(points):
            ax.plot(point.multiple, point.duration, linestyle="", marker=MARKERS[number % len(MARKERS)], markersize=7,
                    markerfacecolor=ACCENT, markeredgecolor="white", label=point.name)  # fmt: skip
        ax.set_xscale("log")
        ax.set_yscale("log")
        for axis in (ax.xaxis, ax.yaxis):
            axis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0)))
            axis.set_major_formatter(FuncFormatter(_plain))
            axis.set_minor_formatter(NullFormatter())
        ax.set_xlabel("current in multiples of rated current")
        ax.set_ylabel("duration, s")
        ax.legend(loc="upper right")
        return drawn

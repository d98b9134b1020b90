"""Winding temperature during the fault against what is permitted."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from matplotlib.figure import Figure
from numpy.typing import NDArray

from throughfault.render.plots.style import ACCENT, INK, LINES, MARKERS, axes, look

__all__ = ["temperature_curve"]

Array = NDArray[np.float64]
MARKS = 6  # markers along a curve


def temperature_curve(
    temperature: Mapping[str, tuple[Sequence[float] | Array, Sequence[float] | Array]],
    limit: Mapping[str, float],
    duration: float | None = None,
) -> Figure:
    """Draw the temperature of each winding over the duration of the fault.

    Parameters
    ----------
    temperature
        By winding: instants in s and temperatures in degC, both of shape (n,).
    limit
        Permitted temperature in degC by name of what it holds for; equal ones are drawn once.
    duration
        Duration of the fault in s, marked.
    """
    with look():
        drawn, (ax,) = axes(3.1)
        for number, (name, (time, values)) in enumerate(temperature.items()):
            marks = {"marker": MARKERS[number % len(MARKERS)], "markevery": max(1, len(values) // MARKS)}
            line = {"color": INK, "linestyle": LINES[number % len(LINES)], "markerfacecolor": "white"}
            ax.plot(time, values, label=f"winding {name}", markersize=4.5, **marks, **line)
        for value in dict.fromkeys(limit.values()):
            names = ", ".join(name for name, held in limit.items() if held == value)
            ax.axhline(value, color=ACCENT, linewidth=1.6)
            ax.annotate(f"limit {value:g} °C ({names})", (0.0, value), xytext=(4, 4), textcoords="offset points",
                        color=ACCENT, fontweight="bold")  # fmt: skip
        if duration is not None:
            ax.axvline(duration, color=INK, linewidth=0.8, linestyle=LINES[2])
            ax.annotate(f"fault duration {duration:g} s", (duration, 0.0), xycoords=("data", "axes fraction"),
                        xytext=(5, 5), textcoords="offset points", ha="left", va="bottom")  # fmt: skip
        ax.set_xlabel("time since the fault began, s")
        ax.set_ylabel("winding temperature, °C")
        ax.margins(x=0.0, y=0.12)
        ax.legend(loc="center right")
        return drawn

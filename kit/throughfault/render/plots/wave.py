"""The fault current of the governing case against time."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from matplotlib.figure import Figure
from numpy.typing import NDArray

from throughfault.render.plots.style import ACCENT, GREY, INK, LINES, axes, look

__all__ = ["fault_wave"]

Array = NDArray[np.float64]


def fault_wave(
    time: Sequence[float] | Array,
    current: Sequence[float] | Array,
    *,
    offset: Sequence[float] | Array | None = None,
    envelope: Sequence[float] | Array | None = None,
    peak: tuple[float, float] | None = None,
) -> Figure:
    """Draw the offset wave with its decaying offset and envelope.

    Parameters
    ----------
    time
        Instants in ms, shape (n,).
    current, offset, envelope
        In kA, shape (n,); the envelope is its upper line.
    peak
        Instant in ms and current in kA of the first peak, marked and labelled.
    """
    with look():
        drawn, (ax,) = axes(2.4)
        if envelope is not None:
            ax.plot(time, envelope, color=GREY, linestyle=LINES[1], linewidth=1.0, label="envelope")
        if offset is not None:
            ax.plot(time, offset, color=INK, linestyle=LINES[2], linewidth=1.2, label="offset")
        ax.plot(time, current, color=INK, label="current")
        ax.axhline(0.0, color=INK, linewidth=0.6)
        if peak is not None:
            ring = {"markerfacecolor": "white", "markeredgecolor": ACCENT, "markeredgewidth": 1.6}
            ax.plot(*peak, marker="o", markersize=6, **ring)
            ax.annotate(
                f"first peak {peak[1]:.2f} kA at {peak[0]:.1f} ms", peak, xytext=(9, 3), textcoords="offset points",
                color=ACCENT, fontweight="bold",
            )  # fmt: skip
        ax.set_xlabel("time since the fault began, ms")
        ax.set_ylabel("current, kA")
        ax.margins(x=0.0, y=0.14)
        ax.legend(loc="upper right", ncols=3)
        return drawn

"""The wave of a governing case, for the eye: current, direct component, envelope and first peak."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from throughfault.numerics.case import Floats
from throughfault.numerics.connection import Transformer
from throughfault.numerics.transient import Transient

__all__ = ["Wave", "governing_wave"]

CYCLES = 8
SAMPLES = 200  # in one cycle


@dataclass(frozen=True)
class Wave:
    """Current of one winding phase at the closing angle of its largest peak.

    Attributes
    ----------
    case
        The case shown.
    time
        ms after the fault.
    current, direct, upper, lower
        Current, its decaying component, and the envelope, kA.
    peak_time, peak
        The largest magnitude shown, ms and kA (with its sign).
    """

    case: str
    time: Floats
    current: Floats
    direct: Floats
    upper: Floats
    lower: Floats
    peak_time: float
    peak: float


def governing_wave(
    wave: Transient, transformer: Transformer, winding: int, case: str | None, names: Sequence[str]
) -> Wave | None:
    """Return the wave of a winding in the case that governs its exact peak; None where no case does."""
    if case is None:
        return None
    chosen = wave[list(names).index(case)]
    coil = next(i for i, each in enumerate(transformer.coils) if each.winding == winding)
    rows = slice(coil * transformer.phases, (coil + 1) * transformer.phases)
    period = 2.0 * np.pi / float(chosen.omega[0])
    time = np.arange(CYCLES * SAMPLES + 1) * period / SAMPLES
    h = np.sqrt(2.0) * chosen.envelope(time[None, :])[0, rows] / 1000.0
    phase, at = np.unravel_index(np.abs(h).argmax(), h.shape)
    turn = np.exp(-1j * np.angle(h[phase, at]))
    current = (turn * h[phase]).real
    decaying = np.exp(-chosen.rate[0][:, None] * time[None, :])
    direct = -(turn * np.sqrt(2.0) * (chosen.coefficient[0, rows][phase] @ decaying)).real / 1000.0
    crest = np.sqrt(2.0) * abs(chosen.phasor[0, rows][phase]) / 1000.0
    return Wave(
        case,
        time * 1000.0,
        current,
        direct,
        direct + crest,
        direct - crest,
        float(time[at]) * 1000.0,
        float(current[at]),
    )

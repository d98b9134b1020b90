"""Adiabatic heating of a conductor as closed forms over arrays: curves against time, and repeated shots.

With the resistance proportional to y = temperature + offset and all heat stored,

    dy/dt = (2 j(t)^2 / C) (y + e yr^2 / y),        y^2 + e yr^2 = (y0^2 + e yr^2) exp(4 H / C),

H being the integral of the squared current density j, e the eddy share at yr and C twice the physical constant.
Temperatures in degC, density in A/mm^2, time in s, C in A^2 s/mm^4.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from throughfault.numerics.case import Floats

__all__ = ["Conductor", "Shots", "average_temperature", "exact_temperature", "offset_heat", "repeated_shots"]


@dataclass(frozen=True, slots=True)
class Conductor:
    """What heats: thermal constant C, temperature offset, eddy share and the temperature it refers to."""

    constant: float
    offset: float
    eddy_share: float = 0.0
    reference: float = 0.0


@dataclass(frozen=True, slots=True)
class Shots:
    """Temperature in a row of shots: [point] s and degC, and [shot] degC at each end."""

    time: Floats
    temperature: Floats
    ends: Floats


def average_temperature(start: float, heat: ArrayLike, conductor: Conductor) -> Floats:
    """Return the average-temperature form at each heat integral, which must lie below the thermal constant.

    Raises
    ------
    ValueError
        If a heat integral is negative or reaches the thermal constant, where the form has its pole.
    """
    h = np.asarray(heat, np.float64)
    if not bool(np.all((h >= 0.0) & (h < conductor.constant))):
        raise ValueError(f"heat must be at least 0 and below {conductor.constant:g} A^2 s/mm^4, got {h.max():g}")
    return np.asarray(start + 2.0 * (start + conductor.offset) * h / (conductor.constant - h))


def exact_temperature(start: float, heat: ArrayLike, conductor: Conductor) -> Floats:
    """Return the exact temperature at each heat integral."""
    share = conductor.eddy_share * (conductor.reference + conductor.offset) ** 2
    growth = np.exp(4.0 * np.asarray(heat, np.float64) / conductor.constant)
    return np.asarray(np.sqrt(((start + conductor.offset) ** 2 + share) * growth - share) - conductor.offset)


def offset_heat(density: float, time: ArrayLike, time_constant: float) -> Floats:
    """Return the heat integral of a fully offset current up to each time, alternating cross term left out."""
    t = np.asarray(time, np.float64)
    return np.asarray(density**2 * (t - time_constant * np.expm1(-2.0 * t / time_constant)))


def repeated_shots(
    start: float,
    density: float,
    conductor: Conductor,
    *,
    duration: float,
    pause: float,
    count: int,
    cooling: float,
    points: int = 40,
) -> Shots:
    """Return the temperature during a row of equal shots; in the pauses it falls back towards the start.

    Parameters
    ----------
    duration, pause, cooling
        Of one shot, between two shots, and the time constant of cooling, s.
    points
        Points on each shot and each pause.
    """
    run, rest = (np.linspace(0.0, length, points)[1:] for length in (duration, pause))
    time, temperature, ends = [np.zeros(1)], [np.full(1, start)], list[float]()
    for shot in range(count):
        if shot:
            time.append(time[-1][-1] + rest)
            temperature.append(start + (ends[-1] - start) * np.exp(-rest / cooling))
        time.append(time[-1][-1] + run)
        temperature.append(exact_temperature(float(temperature[-1][-1]), density**2 * run, conductor))
        ends.append(float(temperature[-1][-1]))
    return Shots(np.concatenate(time), np.concatenate(temperature), np.asarray(ends))

"""The wave of one R-L circuit after closing: its first maximum and its heat integral, exactly.

With the symmetrical current I (r.m.s.) and the d.c. decay at the rate w R/X the current is

    i(t) = sqrt2 I [cos(a) exp(-w t R/X) - cos(w t + a)],

a = 0 giving the largest d.c. part, a = pi/2 - arctan(X/R) closing at the zero of the voltage (the largest maximum).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from throughfault.errors import NetworkError
from throughfault.numerics.case import Floats

__all__ = ["first_maximum", "heat_integral"]

_STEPS = 8  # Newton doubles the digits with every step


def first_maximum(x_over_r: ArrayLike) -> Floats:
    """Return the largest maximum of the current over its symmetrical r.m.s. value.

    Parameters
    ----------
    x_over_r
        Reactance over resistance of the circuit, 0 or more, infinite without resistance.

    Returns
    -------
    Floats
        From sqrt2 (no reactance) to 2 sqrt2 (no resistance); the maximum over time and closing angle, which falls
        on closing at the zero of the voltage.

    Raises
    ------
    NetworkError
        A ratio is negative or not a number.
    """
    ratio = np.asarray(x_over_r, np.float64)
    if not (ratio >= 0).all():
        raise NetworkError(f"x_over_r must be 0 or more, got {ratio[~(ratio >= 0)].flat[0]}")
    phi = np.arctan(ratio)
    sine, cosine = np.sin(phi), np.cos(phi)
    # d/dx [sin(x - phi) + sin(phi) exp(-x cot(phi))] = cos(x - phi) - cos(phi) exp(-x cot(phi)) = 0
    with np.errstate(over="ignore"):  # next to no reactance: the d.c. part is gone at once
        rate = np.divide(cosine, sine, out=np.full(ratio.shape, np.inf), where=sine > 0)
    x = _crest(phi, rate)
    return np.asarray(np.sqrt(2) * (np.sin(x - phi) + sine * np.exp(-x * rate)))


def _crest(phi: Floats, rate: Floats) -> Floats:
    """Return the phase of the first maximum by Newton's method, begun at the crest of the alternating part."""
    x = phi + np.pi / 2
    cosine = np.cos(phi)
    for _ in range(_STEPS):
        decay = np.exp(-x * rate)
        slope = -np.sin(x - phi) + np.where(decay > 0, cosine * np.where(decay > 0, rate, 0.0) * decay, 0.0)
        x = x - (np.cos(x - phi) - cosine * decay) / slope
    return np.asarray(x)


def heat_integral(
    current: ArrayLike, x_over_r: ArrayLike, frequency: ArrayLike, duration: ArrayLike, angle: ArrayLike = 0.0
) -> Floats:
    """Return the integral of the squared current from closing to ``duration``, A^2 s.

    Parameters
    ----------
    current
        Symmetrical r.m.s. value, A.
    x_over_r
        Above 0; infinite without resistance.
    frequency, duration
        Hz, s.
    angle
        The angle a of the module's wave, rad.
    """
    omega = 2 * np.pi * np.asarray(frequency, np.float64)
    t, a = np.asarray(duration, np.float64), np.asarray(angle, np.float64)
    rate = omega / np.asarray(x_over_r, np.float64)
    offset = np.cos(a)
    # 2 (k e - cos)^2 = 2 cos^2 - 4 k e cos + 2 k^2 e^2, each integrated from 0 to t
    steady = t + (np.sin(2 * (omega * t + a)) - np.sin(2 * a)) / (2 * omega)
    pole = 1j * omega - rate
    cross = (np.exp(1j * a) * np.expm1(pole * t) / pole).real
    with np.errstate(invalid="ignore", divide="ignore"):
        direct = np.where(rate > 0, -np.expm1(-2 * rate * t) / rate, 2 * t)
    return np.asarray(np.asarray(current, np.float64) ** 2 * (steady - 4 * offset * cross + offset**2 * direct))

"""Exact currents after the inception of a fault, all starting from zero.

The network T'(R + L d/dt)T x = T' e(t) falls apart into modes with real decay rates, because R and L are symmetric.
A current is then i(t) = sqrt2 Re[exp(j a) h(t)] with the closing angle a and

    h(t) = I exp(j w t) - sum_k c_k exp(-s_k t),

so that its largest magnitude over the closing angle is sqrt2 |h(t)|: only time has to be searched.

Example
-------
>>> import numpy as np
>>> from throughfault.numerics.case import Cases
>>> from throughfault.numerics.connection import Transformer, Winding
>>> unit = Transformer((Winding("HV", "Y"), Winding("LV", "D", 11)))
>>> z = 0.005 + 0.125j
>>> cases = Cases.of(unit, voltage=[132e3, 33e3], base_power=40e6, z1=[[0, z], [z, 0]], fault="3ph", at=1,
...                  frequency=50.0, source_z1=[0.0, np.inf], source_z0=[0.0, np.inf], neutral=[0.0, np.inf])
>>> wave = transient(unit, cases)
>>> current = waveform(wave[0], np.linspace(0, 0.1, 2001), angle=0.0)
>>> current.coil.shape
(2, 3, 2001)
>>> peak = peak_exact(wave)
>>> print(f"{peak.terminal[0, 0, 0]:.0f}")  # 1398 A times 2.663 at X/R = 25
3725
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Self

import numpy as np
from numpy.typing import ArrayLike

from throughfault.errors import NetworkError
from throughfault.numerics.case import Cases, Complexes, Floats
from throughfault.numerics.connection import Transformer
from throughfault.numerics.network import Group, groups, observe, split

__all__ = ["Currents", "Transient", "observe_rows", "peak_exact", "transient", "waveform"]

CHUNK = 500
SAMPLES = 64  # in one cycle, before refinement
CYCLES = 12
_STEPS = 5


@dataclass(frozen=True)
class Transient:
    """Modes of all cases.

    Attributes
    ----------
    transformer
        Whose currents they are.
    omega
        [case] rad/s.
    phasor
        [case, row] steady state, complex r.m.s. A; the rows are coils limb by limb, terminals phase by phase, neutrals.
    coefficient, rate
        [case, row, mode] complex r.m.s. A and [case, mode] 1/s: the decaying part is their sum of c exp(-s t).
    """

    transformer: Transformer
    omega: Floats
    phasor: Complexes
    coefficient: Complexes
    rate: Floats

    def __len__(self) -> int:
        return len(self.omega)

    def __getitem__(self, index: Any) -> Self:
        """Take the cases of a number, slice, list or mask."""
        rows = np.atleast_1d(np.arange(len(self))[index])
        return type(self)(
            self.transformer, self.omega[rows], self.phasor[rows], self.coefficient[rows], self.rate[rows]
        )

    def envelope(self, time: Floats) -> Complexes:
        """Return h at [case, time] s as [case, row, time]; a current is sqrt2 Re[exp(j angle) h]."""
        turning = np.exp(1j * self.omega[:, None] * time)
        decaying = np.exp(-self.rate[:, :, None] * time[:, None, :])
        h: Complexes = self.phasor[:, :, None] * turning[:, None, :] - self.coefficient @ decaying
        return h


@dataclass(frozen=True)
class Currents:
    """Real currents, A: ``coil`` [(case,) coil, limb(, time)], ``terminal`` [... winding, phase ...], ``neutral``."""

    coil: Floats
    terminal: Floats
    neutral: Floats


def transient(transformer: Transformer, cases: Cases) -> Transient:
    """Find the modes of all cases.

    Raises
    ------
    NetworkError
        A network is not passive, or a source has unlike positive- and negative-sequence impedances.
    """
    if (wrong := ((cases.source_z1 != cases.source_z2) & np.isfinite(cases.source_z1)).any(1)).any():
        message = f"source_z2 must equal source_z1 (ohm) for a transient, unlike case {wrong.argmax()}"
        raise NetworkError(message)
    omega = 2 * np.pi * cases.frequency
    parts = [(group.rows, *_modes(transformer, group)) for group in groups(transformer, cases)]
    modes = max((rate.shape[1] for _, _, rate in parts), default=0)
    rows = observe_rows(transformer)
    coefficient = np.zeros((len(cases), rows, modes), np.complex128)
    phasor, rate = np.zeros((len(cases), rows), np.complex128), np.zeros((len(cases), modes))
    for where, own, decay in parts:
        phasor[where] = own.sum(2)
        lasting = np.isfinite(decay)
        coefficient[where, :, : decay.shape[1]] = np.where(lasting[:, None, :], own, 0.0)
        rate[where, : decay.shape[1]] = np.where(lasting, decay, 0.0)
    return Transient(transformer, omega, phasor, coefficient, rate)


def observe_rows(transformer: Transformer) -> int:
    """Return the number of observed currents: coils by limb, terminals by phase, neutrals."""
    windings = len(transformer.windings)
    return (len(transformer.coils) + windings) * transformer.phases + windings


def _modes(transformer: Transformer, group: Group) -> tuple[Complexes, Floats]:
    """Amplitudes of the observed currents in every mode, [case, row, mode] A, and the rates, [case, mode] 1/s.

    With G = R + X positive definite, R v = r G v gives r between 0 and 1 and the rate w r / (1 - r); r = 1 is a path
    without reactance, whose current has no memory.
    """
    turned = group.basis.transpose(0, 2, 1)
    reduced = turned @ group.impedance @ group.basis
    try:
        lower = np.linalg.cholesky(_symmetric(reduced.real + reduced.imag))
    except np.linalg.LinAlgError as error:
        what = "must be passive: its winding pairs' resistances or reactances make the energy negative"
        message = f"case {group.rows[0]} or one like it ({group.kind}) {what}"
        raise NetworkError(message) from error
    inverse = np.linalg.inv(lower)
    share, vector = np.linalg.eigh(_symmetric(inverse @ reduced.real @ inverse.transpose(0, 2, 1)))
    shape = inverse.transpose(0, 2, 1) @ vector
    drive = (shape.transpose(0, 2, 1) @ turned @ group.emf[:, :, None])[:, :, 0]
    amplitude = drive / (share + 1j * (1 - share))
    omega = 2 * np.pi * group.cases.frequency[:, None]
    stored = np.where(np.abs(1 - share) > 1e-12, 1 - share, 0.0)
    rate = np.divide(omega * share, stored, out=np.full(share.shape, np.inf), where=stored > 0)
    return (observe(transformer, group.network) @ group.basis @ shape) * amplitude[:, None, :], rate


def _symmetric(matrix: Floats) -> Floats:
    half: Floats = (matrix + matrix.transpose(0, 2, 1)) / 2
    return half


def waveform(wave: Transient, time: ArrayLike, angle: float) -> Currents:
    """Return the currents of one case at [time] s for a closing angle in rad, without the axis of cases."""
    if len(wave) != 1:
        message = f"waveform takes one case, got {len(wave)}; take one with transient[number]"
        raise NetworkError(message)
    h = wave.envelope(np.atleast_1d(np.asarray(time, np.float64))[None, :])
    current = np.sqrt(2) * (np.exp(1j * angle) * h).real
    coil, terminal, neutral = split(wave.transformer, current)
    return Currents(coil[0], terminal[0], neutral[0])


def peak_exact(wave: Transient) -> Currents:
    """Return for every current of every case the largest magnitude over time and closing angle, A.

    Cycle after cycle is searched and refined, until what can still follow is smaller, at most for ``CYCLES`` cycles.
    """
    parts = [_peaks(wave[start : start + CHUNK]) for start in range(0, len(wave), CHUNK)]
    peaks = np.concatenate(parts) if parts else np.zeros((0, observe_rows(wave.transformer)))
    return Currents(*split(wave.transformer, peaks))


def _peaks(wave: Transient) -> Floats:
    best = np.zeros(wave.phasor.shape)
    period = 2 * np.pi / wave.omega
    active = np.arange(len(wave))
    for cycle in range(CYCLES):
        part = wave[active]
        best[active] = np.maximum(best[active], _cycle_peaks(part, period[active], cycle))
        left = np.abs(part.coefficient) @ np.exp(-part.rate[:, :, None] * ((cycle + 1) * period[active])[:, None, None])
        bound = np.sqrt(2) * (np.abs(part.phasor) + left[:, :, 0])
        active = active[(bound > best[active] * (1 + 1e-12)).any(1)]
        if not len(active):
            break
    return best


def _cycle_peaks(wave: Transient, period: Floats, cycle: int) -> Floats:
    """Find the best sample of a cycle for every current and refine it by Newton's method on the slope of |h|^2."""
    grid = (cycle + np.arange(SAMPLES + 1) / SAMPLES) * period[:, None]
    value = np.abs(wave.envelope(grid))
    index = value.argmax(2)
    start = np.take_along_axis(grid, index, axis=1)
    step = (period / SAMPLES)[:, None]
    time = start
    for _ in range(_STEPS):
        h, first, second = _derivatives(wave, time)
        slope, bend = (h.conj() * first).real, (np.abs(first) ** 2 + (h.conj() * second).real)
        move = np.divide(-slope, bend, out=np.zeros_like(slope), where=bend < 0)
        time = np.maximum(np.clip(time + move, start - step, start + step), 0.0)  # the sample brackets its maximum
    refined = np.abs(_derivatives(wave, time)[0])
    peak: Floats = np.sqrt(2) * np.maximum(refined, value.max(2))
    return peak


def _derivatives(wave: Transient, time: Floats) -> tuple[Complexes, Complexes, Complexes]:
    """Return h and its first two derivatives at [case, row] s."""
    turn = 1j * wave.omega[:, None]
    steady = wave.phasor * np.exp(turn * time)
    decay = wave.coefficient * np.exp(-wave.rate[:, None, :] * time[:, :, None])
    rate = wave.rate[:, None, :]
    return (
        steady - decay.sum(2),
        turn * steady + (rate * decay).sum(2),
        turn**2 * steady - (rate**2 * decay).sum(2),
    )

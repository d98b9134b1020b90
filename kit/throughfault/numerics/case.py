"""Fault cases of one transformer as arrays, in coherent SI units.

Example
-------
>>> from throughfault.numerics.connection import Transformer, Winding
>>> unit = Transformer((Winding("HV", "Y"), Winding("LV", "D", 11)))
>>> cases = Cases.of(
...     unit, voltage=[132e3, 33e3], base_power=40e6, z1=[[0, 0.125j], [0.125j, 0]],
...     fault=["3ph", "LL"], at=1, frequency=50.0, source_z1=[1.74j, np.inf], source_z0=[1.74j, np.inf],
...     neutral=[0.0, np.inf])
>>> len(cases)
2
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import Any, Self, TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray

from throughfault.errors import NetworkError
from throughfault.numerics.connection import Transformer

Floats: TypeAlias = NDArray[np.float64]
Complexes: TypeAlias = NDArray[np.complex128]

THREE_PHASE, LINE_EARTH, LINE_LINE, LINE_LINE_EARTH = "3ph", "LG", "LL", "LLG"
OUT_OF_PHASE = "out_of_phase"
KINDS = (THREE_PHASE, LINE_EARTH, LINE_LINE, LINE_LINE_EARTH, OUT_OF_PHASE)


@dataclass(frozen=True)
class Cases:
    """Fault cases; every array leads with the case.  Make them with :meth:`of`, which broadcasts.

    Attributes
    ----------
    voltage
        [case, winding] terminal voltage at the tapping, V: between lines in three phases, across the terminals in one.
    base_power
        [case] base of ``z1``, ``z0`` and ``magnetising``, VA (three-phase or single-phase power).
    z1, z0
        [case, winding, winding] pairwise impedance between terminals, per unit, every other winding open; symmetric.
        The diagonal is not read, except that of an interstar winding in ``z0``: its own zero-sequence impedance.
    fault
        [case] ``3ph``, ``LG`` (phase a), ``LL`` and ``LLG`` (phases b, c), or ``out_of_phase``; one phase: ``LL``.
    at
        [case] index of the faulted winding; for ``out_of_phase`` the one whose source is switched on.
    prefault
        [case] voltage before the fault at that terminal, phase to neutral (one phase: across), V.
    frequency
        [case] Hz.
    source_z1, source_z2, source_z0
        [case, winding] source at the terminal, ohm; ``z1`` infinite: no infeed, zero: ideal; ``z0`` infinite:
        unearthed.
    neutral
        [case, winding] neutral to earth, ohm; infinite: isolated.  Read where a winding has a neutral; in one phase
        the return end is always joined.
    magnetising
        [case, winding] zero-sequence impedance to a fictitious closed winding, per unit, that stands for the
        zero-sequence magnetising path; infinite: none (see ``impedance.magnetising_path``).
    fault_impedance
        [case] ohm: each phase of ``3ph``, to earth in ``LG`` and ``LLG``, between the phases in ``LL``.
    step
        [case] voltage angle by which ``out_of_phase`` closing is wrong, rad.
    """

    voltage: Floats
    base_power: Floats
    z1: Complexes
    z0: Complexes
    fault: NDArray[np.str_]
    at: NDArray[np.intp]
    prefault: Floats
    frequency: Floats
    source_z1: Complexes
    source_z2: Complexes
    source_z0: Complexes
    neutral: Complexes
    magnetising: Complexes
    fault_impedance: Complexes
    step: Floats

    @classmethod
    def of(
        cls,
        transformer: Transformer,
        *,
        voltage: ArrayLike,
        base_power: ArrayLike,
        z1: ArrayLike,
        fault: ArrayLike,
        at: ArrayLike,
        frequency: ArrayLike,
        z0: ArrayLike | None = None,
        prefault: ArrayLike | None = None,
        source_z1: ArrayLike = np.inf,
        source_z2: ArrayLike | None = None,
        source_z0: ArrayLike = np.inf,
        neutral: ArrayLike = np.inf,
        magnetising: ArrayLike = np.inf,
        fault_impedance: ArrayLike = 0.0,
        step: ArrayLike = np.pi,
    ) -> Self:
        """Broadcast and check; a leading axis of 1, or none, serves every case.

        Absent: ``z0`` equal to ``z1``, ``source_z2`` to ``source_z1``, ``prefault`` to the tapping's voltage.

        Raises
        ------
        NetworkError
            Shapes or values do not describe a network; all faults in one sentence.
        """
        return cls._checked(transformer, locals())

    @classmethod
    def _checked(cls, transformer: Transformer, given: dict[str, Any]) -> Self:
        instead = {"z0": given["z1"], "source_z2": given["source_z1"], "prefault": np.nan}
        names = [field.name for field in fields(cls)]
        filled = {name: instead.get(name) if given[name] is None else given[name] for name in names}
        cases = cls(**_broadcast(filled, len(transformer.windings)))
        if outside := _outside(cases, len(transformer.windings)):
            raise NetworkError(outside)
        if given["prefault"] is None:
            phase = cases.at_fault(cases.voltage) / np.sqrt(transformer.phases)
            cases = cls(**{**cases._columns(), "prefault": phase})
        if faults := _faults(transformer, cases):
            raise NetworkError("; ".join(faults))
        return cases

    def __len__(self) -> int:
        return len(self.at)

    def __getitem__(self, index: Any) -> Self:
        """Take the cases of a slice, a list of indices or a mask."""
        rows = np.atleast_1d(np.arange(len(self))[index])
        return type(self)(**{name: column[rows] for name, column in self._columns().items()})

    def _columns(self) -> dict[str, Any]:
        return {field.name: getattr(self, field.name) for field in fields(self)}

    def at_fault(self, column: Floats | Complexes) -> Any:
        """Return the entry of each case's own faulted winding, [case], from [case, winding]."""
        return column[np.arange(len(self)), self.at]


_TRAILING = {
    "voltage": 1, "z1": 2, "z0": 2, "source_z1": 1, "source_z2": 1, "source_z0": 1, "neutral": 1, "magnetising": 1,
}  # fmt: skip
_COMPLEX = ("z1", "z0", "source_z1", "source_z2", "source_z0", "neutral", "magnetising", "fault_impedance")


def _typed(name: str, value: ArrayLike) -> NDArray[Any]:
    if name == "fault":
        return np.asarray(value, np.str_)
    if name == "at":
        return np.asarray(value, np.intp)
    return np.asarray(value, np.complex128 if name in _COMPLEX else np.float64)


def _broadcast(given: dict[str, Any], windings: int) -> dict[str, Any]:
    arrays = {name: _typed(name, value) for name, value in given.items()}
    leading = [array.shape[: max(array.ndim - _TRAILING.get(name, 0), 0)] for name, array in arrays.items()]
    try:
        (count,) = np.broadcast_shapes((1,), *leading)
        shapes = {name: (count, *(windings,) * _TRAILING.get(name, 0)) for name in arrays}
        return {name: np.broadcast_to(array, shapes[name]) for name, array in arrays.items()}
    except ValueError as error:
        shapes_given = ", ".join(f"{name} {array.shape}" for name, array in arrays.items() if array.ndim)
        message = f"arrays of the cases must share one leading axis and have {windings} windings, got {shapes_given}"
        raise NetworkError(message) from error


def _outside(cases: Cases, windings: int) -> str:
    wrong = (cases.at < 0) | (cases.at >= windings)
    if not wrong.any():
        return ""
    return f"at of case {wrong.argmax()} must be a winding from 0 to {windings - 1}, got {cases.at[wrong][0]}"


def _faults(transformer: Transformer, cases: Cases) -> list[str]:
    """All faults of the values, each naming the first case that has it."""
    kinds = KINDS if transformer.phases == 3 else (LINE_LINE, OUT_OF_PHASE)
    pairs = ~np.eye(len(transformer.windings), dtype=bool)
    source, closing = cases.at_fault(cases.source_z1), cases.fault == OUT_OF_PHASE
    checks = {
        f"fault must be one of {', '.join(kinds)}": ~np.isin(cases.fault, kinds),
        "voltage must be finite and positive (V)": ~(np.isfinite(cases.voltage) & (cases.voltage > 0)).all(1),
        "base_power must be finite and positive (VA)": ~(np.isfinite(cases.base_power) & (cases.base_power > 0)),
        "frequency must be finite and positive (Hz)": ~(np.isfinite(cases.frequency) & (cases.frequency > 0)),
        "prefault must be finite (V)": ~np.isfinite(cases.prefault),
        "fault_impedance must be finite (ohm)": ~np.isfinite(cases.fault_impedance),
        "z1 must be finite (per unit)": ~np.isfinite(cases.z1[:, pairs]).all(1),
        "z0 must be finite (per unit)": ~np.isfinite(cases.z0[:, pairs]).all(1),
        "z1 and z0 must be symmetric": _skew(cases.z1, pairs) | _skew(cases.z0, pairs),
        "source_z1, source_z2 and source_z0 must be numbers or infinite (ohm)": np.any(
            [_blank(z).any(1) for z in (cases.source_z1, cases.source_z2, cases.source_z0)], axis=0
        ),
        "neutral must be a number or infinite (ohm)": _blank(cases.neutral).any(1),
        "magnetising must be finite for all windings or infinite for all (per unit)": ~(
            np.isfinite(cases.magnetising).all(1) | np.isinf(cases.magnetising).all(1)
        ),
        "source_z1 at the faulted terminal must not be zero (ohm)": (source == 0) & ~closing,
        "source_z1 must be finite where the source is switched on (ohm)": np.isinf(source) & closing,
    }
    if transformer.auto:
        checks["voltage of an autotransformer must fall from HV to LV (V)"] = cases.voltage[:, 0] <= cases.voltage[:, 1]
    return [f"{what}, unlike case {wrong.argmax()}" for what, wrong in checks.items() if wrong.any()]


def _blank(z: Complexes) -> NDArray[np.bool_]:
    return np.asarray(np.isnan(z) & ~np.isinf(z))


def _skew(z: Complexes, pairs: NDArray[np.bool_]) -> NDArray[np.bool_]:
    unlike: NDArray[np.bool_] = np.asarray(np.abs(z - z.transpose(0, 2, 1)) > 1e-9 * np.abs(z))
    skew: NDArray[np.bool_] = np.any(unlike[:, pairs], axis=1)
    return skew

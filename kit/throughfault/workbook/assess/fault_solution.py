"""The fault cases of a unit solved: phasors, driving-point impedances, peak factors, exact peaks."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from throughfault.declare import Missing
from throughfault.errors import NetworkError
from throughfault.numerics.case import Complexes, Floats
from throughfault.numerics.connection import Transformer
from throughfault.numerics.network import Solution, solve
from throughfault.numerics.transient import Transient, peak_exact, transient
from throughfault.workbook.assess.fault_case import EARTH_FAULTS, FaultCase
from throughfault.workbook.assess.fault_network import NetworkData, build_cases, earth_fault_obstacle, transformer_of
from throughfault.workbook.assess.rules import PeakFactor
from throughfault.workbook.inputs import Unit

__all__ = ["Solved", "ratio_of", "solve_cases"]

#: currents below this share of the largest of their case are zero by symmetry and left by rounding
ROUNDING = 1e-11


@dataclass(frozen=True)
class Solved:
    """Cases solved: all arrays lead with the case; kA."""

    unit: Unit
    transformer: Transformer
    cases: tuple[FaultCase, ...]
    factors: tuple[PeakFactor, ...]
    solution: Solution
    decay: Solution
    wave: Transient
    exact: dict[str, Floats]

    @property
    def driving(self) -> Complexes:
        """Driving-point impedance of every case, ohm, with the resistances that let the offset decay."""
        return self.decay.driving_point

    @property
    def factor(self) -> Floats:
        """Peak factor of every case; not a number where the standard gives none."""
        return np.array([np.nan if f.value is None else f.value for f in self.factors])

    def currents(self, kind: str) -> Any:
        """Return complex currents [case, winding, phase] in kA, noise of symmetry removed."""
        raw = {
            "winding": self.solution.winding_current,
            "terminal": self.solution.terminal_current,
            "neutral": self.solution.neutral_current[:, :, None],
        }[kind] / 1000.0
        fault = np.abs(self.solution.fault_current).max(axis=1, initial=0.0)
        scale = np.maximum(fault, np.abs(self.solution.winding_current).max(axis=(1, 2), initial=0.0)) / 1000.0
        return np.where(np.abs(raw) > ROUNDING * scale[:, None, None], raw, 0.0)


def solve_cases(data: NetworkData, wanted: Sequence[FaultCase]) -> tuple[Solved | None, list[Missing]]:
    """Solve the cases that have a path and can be assessed; return them and what cannot be."""
    transformer = transformer_of(data.unit)
    if not wanted:
        return None, []
    missing = _obstacles(data.unit, wanted)
    assessable = [c for c in wanted if c.fault not in EARTH_FAULTS or earth_fault_obstacle(data.unit, c.at) is None]
    if not assessable:
        return None, missing
    exists = solve(transformer, build_cases(data, transformer, assessable)).path_exists
    kept = [case for case, path in zip(assessable, exists, strict=True) if path]
    if not kept:
        return None, missing
    return _solved(data, transformer, kept), missing


def _solved(data: NetworkData, transformer: Transformer, cases: list[FaultCase]) -> Solved:
    """Solve with a.c. resistances for the steady state, and with d.c. ones, where given, for what decays."""
    steady = decaying = build_cases(data, transformer, cases)
    solution = decay = solve(transformer, steady)
    if any(row.dc_resistance is not None for row in data.unit.impedances):
        decaying = build_cases(replace(data, direct_current=True), transformer, cases)
        decay = solve(transformer, decaying)
    wave = transient(transformer, decaying)
    peaks = peak_exact(wave)
    exact = {
        "winding": _of_windings(transformer, peaks.coil),
        "terminal": peaks.terminal,
        "neutral": peaks.neutral[:, :, None],
    }
    factors = tuple(_factor(data, case, z) for case, z in zip(cases, decay.driving_point, strict=True))
    return Solved(data.unit, transformer, tuple(cases), factors, solution, decay, wave, exact)


def _of_windings(transformer: Transformer, coil: Any) -> Any:
    """Keep the first half of interstar windings: both carry the line current."""
    return coil[:, [index for index, each in enumerate(transformer.coils) if each.half == 0]]


def _obstacles(unit: Unit, cases: Sequence[FaultCase]) -> list[Missing]:
    found = {}
    for case in cases:
        obstacle = earth_fault_obstacle(unit, case.at) if case.fault in EARTH_FAULTS else None
        if obstacle is not None:
            found[case.at] = Missing(f"duty.earth_fault.{case.at}", obstacle[0], obstacle[1])
    return list(found.values())


def ratio_of(driving: complex) -> float:
    """Return X/R of a driving-point impedance, infinite without resistance.

    Raises
    ------
    NetworkError
        If the impedance would give energy.
    """
    if driving.real < -ROUNDING * abs(driving):
        raise NetworkError(
            f"the driving-point impedance at the fault must not have negative resistance, got {driving} ohm"
        )
    return float("inf") if driving.real <= ROUNDING * abs(driving) else float(driving.imag / driving.real)


def _factor(data: NetworkData, case: FaultCase, driving: complex) -> PeakFactor:
    """Return the standard's factor for the driving-point impedance at the fault."""
    ratio = ratio_of(driving)
    given = [data.unit.system.terminals[name].peak_factor for name in case.infeed]
    stated = [factor for factor in given if factor is not None]
    return data.rules.peak_factor(ratio, data.category, max(stated) if stated else None)

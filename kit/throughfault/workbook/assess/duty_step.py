"""Worked lines of the case that governs a winding: X/R, fault current, peak factor, peak."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from throughfault.cells import fault_current as cells
from throughfault.cells.peak_factor import (
    peak_factor_closed_form,
    peak_factor_exact,
    peak_factor_from_table,
    peak_factor_table_range,
    peak_short_circuit_current,
)
from throughfault.declare import Cell, Outcome, Step
from throughfault.errors import OutsideValidity
from throughfault.quantities import Quantity
from throughfault.workbook.assess.fault_case import FaultCase
from throughfault.workbook.assess.rules import PeakFactor

__all__ = ["CaseFacts", "factor_outcomes", "fault_steps", "peak_step"]


FACTOR_CELLS = {
    "table, interpolated": "peak_factor_from_table",
    "exact first maximum": "peak_factor_exact",
    "closed form": "peak_factor_closed_form",
}


@dataclass(frozen=True, slots=True)
class CaseFacts:
    """What the worked lines of one case need.

    Impedances at the fault in ohm (with a.c. resistances, and with those that let the offset decay), the voltage in
    kV, the largest current of each winding in kA.
    """

    factor: PeakFactor
    x_over_r: float
    z1: complex
    z0: complex
    decay_z1: complex
    decay_z0: complex
    fault_voltage: float
    largest: Mapping[str, float]


def _ohm(value: float) -> Quantity:
    return Quantity(value, "ohm")


def _sequence(z1: complex, z0: complex | None) -> dict[str, Quantity]:
    given = {"resistance_1": _ohm(z1.real), "reactance_1": _ohm(z1.imag)}
    if z0 is not None:
        given |= {"resistance_0": _ohm(z0.real), "reactance_0": _ohm(z0.imag)}
    return given


RATIO_CELLS: dict[str, Cell[Any]] = {
    "LG": cells.x_over_r_line_to_earth,
    "LLG": cells.x_over_r_double_line_to_earth,
}
CURRENT_CELLS: dict[str, Cell[Any]] = {
    "3ph": cells.three_phase_fault_current,
    "LG": cells.line_to_earth_current,
    "LL": cells.line_to_line_current,
    "LLG": cells.double_line_to_earth_current,
}


def fault_steps(name: str, case: FaultCase, facts: CaseFacts, *, delta: bool) -> Iterator[Step]:
    """Yield X/R and current of the fault in the case that governs a winding's peak.

    A line is left out where its formula does not hold (no resistance, no zero-sequence path). With `delta`, the
    faulted winding is a delta, and its own current follows where no network of its terminal feeds the fault.
    """
    earth = case.fault in RATIO_CELLS
    ratio = RATIO_CELLS.get(case.fault, cells.x_over_r_line_to_line)
    decaying = _sequence(facts.decay_z1, facts.decay_z0 if earth else None)
    yield from _where_valid(lambda: ratio.step(f"duty.{name}.x_over_r", **decaying))
    if case.fault not in CURRENT_CELLS:
        return
    steady = _sequence(facts.z1, facts.z0 if earth else None)
    voltage = Quantity(facts.fault_voltage, "kV")
    current = CURRENT_CELLS[case.fault]
    found = [*_where_valid(lambda: current.step(f"duty.{name}.fault_current", fault_voltage=voltage, **steady))]
    yield from found
    if found and delta and case.fault == "3ph" and case.at not in case.infeed:
        line = found[0].result
        yield cells.delta_winding_current.step(f"duty.{name}.delta_current", symmetrical_current=line)


def peak_step(name: str, facts: CaseFacts) -> Iterator[Step]:
    """Yield the peak of a winding in the case that governs it."""
    if facts.factor.value is not None:
        current, factor = Quantity(facts.largest[name], "kA"), Quantity(facts.factor.value, "1")
        yield peak_short_circuit_current.step(f"duty.{name}.peak", symmetrical_current=current, peak_factor=factor)


def _where_valid(make: Callable[[], Step]) -> Iterator[Step]:
    try:
        yield make()
    except OutsideValidity:
        return


def factor_outcomes(name: str, case: FaultCase, facts: CaseFacts) -> Iterator[Outcome]:
    """Yield the peak factor that decides for a winding, and beside it the closed form and the exact first maximum."""
    factor = facts.factor
    if factor.value is None:
        return
    head, symbol = f"duty.{name}.peak_factor", r"k\sqrt{2}"
    yield Outcome(
        head,
        factor.value,
        "1",
        symbol,
        FACTOR_CELLS.get(factor.how, ""),
        factor.source,
        factor.provenance,
        case.name,
    )
    if facts.x_over_r == math.inf or facts.x_over_r <= 0.0:
        return
    beside: dict[str, Any] = {"closed_form": peak_factor_closed_form, "exact": peak_factor_exact}
    least, greatest = peak_factor_table_range()
    if least <= facts.x_over_r <= greatest:
        beside["table"] = peak_factor_from_table
    for suffix, cell in beside.items():
        value, source = float(cell(facts.x_over_r)), cell.source
        yield Outcome(f"{head}_{suffix}", value, "1", symbol, cell.name, source.citation, source.provenance, case.name)

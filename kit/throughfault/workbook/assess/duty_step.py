"""Worked lines of the duty: the closed forms beside the network, and how each governing peak comes about."""

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
    peak_short_circuit_current,
)
from throughfault.declare import Cell, Outcome, Step
from throughfault.errors import OutsideValidity
from throughfault.quantities import Quantity
from throughfault.workbook.assess.fault_case import FaultCase, source_power, sources_of
from throughfault.workbook.assess.fault_network import NetworkData
from throughfault.workbook.assess.rules import PeakFactor

__all__ = ["CaseFacts", "closed_form_steps", "factor_outcomes", "fault_steps", "peak_step"]


LEAST_TABLED, GREATEST_TABLED = 1.0, 14.0  # X/R of the table's ends
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
    "LG": cells.line_to_earth_current,
    "LL": cells.line_to_line_current,
    "LLG": cells.double_line_to_earth_current,
}


def fault_steps(name: str, case: FaultCase, facts: CaseFacts) -> Iterator[Step]:
    """Yield X/R and current of the fault in the case that governs a winding's peak.

    A line is left out where its formula does not hold (no resistance, no zero-sequence path).
    """
    earth = case.fault in RATIO_CELLS
    ratio = RATIO_CELLS.get(case.fault, cells.x_over_r_line_to_line)
    decaying = _sequence(facts.decay_z1, facts.decay_z0 if earth else None)
    yield from _where_valid(lambda: ratio.step(f"duty.{name}.x_over_r", **decaying))
    if case.fault in CURRENT_CELLS:
        current = CURRENT_CELLS[case.fault]
        steady = _sequence(facts.z1, facts.z0 if earth else None)
        voltage = Quantity(facts.fault_voltage, "kV")
        yield from _where_valid(lambda: current.step(f"duty.{name}.fault_current", fault_voltage=voltage, **steady))


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
        FACTOR_CELLS.get(factor.how, factor.how),
        factor.source,
        factor.provenance,
        case.name,
    )
    if facts.x_over_r == math.inf or facts.x_over_r <= 0.0:
        return
    beside: dict[str, Any] = {"closed_form": peak_factor_closed_form, "exact": peak_factor_exact}
    if LEAST_TABLED <= facts.x_over_r <= GREATEST_TABLED:
        beside["table"] = peak_factor_from_table
    for suffix, cell in beside.items():
        value, source = float(cell(facts.x_over_r)), cell.source
        yield Outcome(f"{head}_{suffix}", value, "1", symbol, cell.name, source.citation, source.provenance, case.name)


def closed_form_steps(data: NetworkData) -> Iterator[Step]:
    """Yield the standard's closed form for a three-phase fault behind each single network, principal tapping.

    The standard adds magnitudes and the network adds phasors, so that the two agree as far as the angles do.
    """
    if data.unit.group.single_phase:
        return
    for name in sources_of(data.unit, data.rules):
        for at in data.names:
            row = data.unit.impedance(name, at) if at != name else None
            if row is not None and not data.unit.windings[at].stabilising:
                yield from _pair_steps(data, name, at)


def _pair_steps(data: NetworkData, name: str, at: str) -> Iterator[Step]:
    unit, row = data.unit, data.unit.impedance(name, at)
    power = source_power(unit, data.rules, name)
    if row is None or power is None:
        return
    head = f"duty.closed_form.{name}-{at}"
    winding, source = unit.windings[name], unit.system.terminals[name]
    voltage, base = (
        unit.voltage(name),
        Quantity(data.base_power / 1e6 * row.base_power.to("VA") / winding.rated_power.to("VA"), "MVA"),
    )
    if row.load_loss is not None:
        yield cells.resistance_ratio.step(
            f"{head}.resistance_ratio", load_loss=row.load_loss, base_power=row.base_power
        )
    yield cells.rated_current.step(f"{head}.rated_current", rated_power=winding.rated_power, rated_voltage=voltage)
    z_t = cells.transformer_impedance.step(
        f"{head}.transformer_impedance", impedance_ratio=row.impedance, rated_voltage=voltage, rated_power=base
    )
    z_s = cells.system_impedance.step(
        f"{head}.system_impedance", system_voltage=source.voltage or winding.rated_voltage, short_circuit_power=power
    )
    yield z_t
    yield z_s
    yield cells.system_share.step(f"{head}.system_share", system_impedance=z_s.result, transformer_impedance=z_t.result)
    yield from _current_steps(data, head, name, at, z_t.result, z_s.result)


def _current_steps(data: NetworkData, head: str, name: str, at: str, z_t: Quantity, z_s: Quantity) -> Iterator[Step]:
    unit, row = data.unit, data.unit.impedance(name, at)
    source = unit.system.terminals[name]
    left_out = data.neglect(name, at, "principal").neglected
    counted = _ohm(0.0) if left_out else z_s
    before = Quantity(unit.voltage(name).to("kV") * unit.prefault_voltage(), "kV")
    current = cells.symmetrical_short_circuit_current.step(
        f"{head}.symmetrical", rated_voltage=before, transformer_impedance=z_t, system_impedance=counted
    )
    yield current
    resistance = (row.resistance_value.to("p.u.") / row.impedance.to("p.u.") if row is not None else 0.0) * z_t.value
    if resistance <= 0.0:
        return
    reactance = math.sqrt(z_t.value**2 - resistance**2)
    ratio = Quantity(source.x_over_r, "1") if source.x_over_r is not None else None
    r_s = (
        cells.system_resistance.step(f"{head}.system_resistance", system_impedance=counted, system_x_over_r=ratio)
        if ratio
        else None
    )
    x_s = (
        cells.system_reactance.step(f"{head}.system_reactance", system_impedance=counted, system_x_over_r=ratio)
        if ratio
        else None
    )
    yield from (step for step in (r_s, x_s) if step is not None)
    x_over_r = cells.x_over_r_of_circuit.step(
        f"{head}.x_over_r",
        transformer_reactance=_ohm(reactance),
        system_reactance=x_s.result if x_s else counted,
        transformer_resistance=_ohm(resistance),
        system_resistance=r_s.result if r_s else _ohm(0.0),
    )
    yield x_over_r
    yield cells.offset_time_constant.step(
        f"{head}.offset_time_constant", x_over_r=x_over_r.result, frequency=unit.rating.frequency
    )
    factor = peak_factor_closed_form.step(f"{head}.peak_factor", x_over_r=x_over_r.result)
    yield factor
    yield peak_short_circuit_current.step(f"{head}.peak", symmetrical_current=current.result, peak_factor=factor.result)

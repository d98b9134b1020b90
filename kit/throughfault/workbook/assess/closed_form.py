"""The standard's closed form beside the network: a three-phase fault fed through the unit by one network.

The standard adds magnitudes and the network adds phasors, so that the two agree as far as the angles do.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from throughfault.cells import fault_current as cells
from throughfault.cells.peak_factor import peak_factor_closed_form, peak_short_circuit_current
from throughfault.declare import Step
from throughfault.quantities import Quantity
from throughfault.workbook.assess.fault_case import FaultCase, source_power, sources_of
from throughfault.workbook.assess.fault_network import NetworkData
from throughfault.workbook.assess.winding_current import three_phase_power
from throughfault.workbook.inputs.impedances import ImpedanceRow
from throughfault.workbook.inputs.windings import PRINCIPAL

__all__ = ["closed_form_steps"]

NOTHING = Quantity(0.0, "ohm")


@dataclass(frozen=True, slots=True)
class _Path:
    """From which network to which terminal, at which tapping, with or without the tolerance taken off."""

    source: str
    at: str
    tapping: str = PRINCIPAL
    tolerance: bool = False

    @property
    def head(self) -> str:
        parts = [f"duty.closed_form.{self.source}-{self.at}"]
        parts += [self.tapping] if self.tapping != PRINCIPAL else []
        return ".".join([*parts, *(["tolerance"] if self.tolerance else [])])


def closed_form_steps(data: NetworkData, governing: Iterable[FaultCase]) -> Iterator[Step]:
    """Yield the closed form on the principal tapping behind each network, and for governing cases that are of its kind.

    A reactor at the terminal has no place in the closed form: behind one, the network alone decides.
    """
    if data.unit.group.single_phase:
        return
    ends = [(name, at) for name in sources_of(data.unit, data.rules) for at in data.names if at != name]
    paths = [_Path(name, at) for name, at in ends if not data.unit.windings[at].stabilising]
    alike = (case for case in governing if case.fault == "3ph" and len(case.infeed) == 1 and not case.variant.minimum)
    paths += [_Path(c.infeed[0], c.at, c.tapping, c.variant.tolerance) for c in alike if c.infeed[0] != c.at]
    for path in dict.fromkeys(paths):
        row = data.unit.impedance(path.source, path.at, path.tapping)
        if row is not None and data.unit.system.terminals[path.source].series_reactance is None:
            yield from _impedance_steps(data, path, row)


def _impedance_steps(data: NetworkData, path: _Path, row: ImpedanceRow) -> Iterator[Step]:
    """Yield rated current, impedances of transformer and network, and what follows from them."""
    unit, power = data.unit, source_power(data.unit, data.rules, path.source)
    winding, source = unit.windings[path.source], unit.system.terminals[path.source]
    voltage, base = unit.voltage(path.source, path.tapping), three_phase_power(unit, row.base_power)
    if power is None:
        return
    if row.load_loss is not None:
        yield cells.resistance_ratio.step(
            f"{path.head}.resistance_ratio", load_loss=row.load_loss, base_power=row.base_power
        )
    rated = three_phase_power(unit, winding.rated_power)
    yield cells.rated_current.step(f"{path.head}.rated_current", rated_power=rated, rated_voltage=voltage)
    ratio = row.impedance
    if path.tolerance and row.basis == "guaranteed" and row.tolerance is not None:
        least = cells.least_impedance_ratio.step(
            f"{path.head}.impedance", impedance_ratio=ratio, impedance_tolerance=row.tolerance
        )
        yield least
        ratio = least.result
    z_t = cells.transformer_impedance.step(
        f"{path.head}.transformer_impedance", impedance_ratio=ratio, rated_voltage=voltage, rated_power=base
    )
    at = source.voltage or winding.rated_voltage
    z_s = cells.system_impedance.step(f"{path.head}.system_impedance", system_voltage=at, short_circuit_power=power)
    yield from (z_t, z_s)
    yield from _current_steps(data, path, row, z_t, z_s)


def _current_steps(data: NetworkData, path: _Path, row: ImpedanceRow, z_t: Step, z_s: Step) -> Iterator[Step]:
    """Yield the share of the network, the current, and the first peak by the closed form of the factor."""
    unit = data.unit
    share = cells.system_share.step(
        f"{path.head}.system_share", system_impedance=z_s.result, transformer_impedance=z_t.result
    )
    yield share
    counted = NOTHING if data.neglect(path.source, path.at, path.tapping).neglected else z_s.result
    before = unit.voltage(path.source, path.tapping).to("kV") * unit.prefault_voltage(path.tapping)
    current = cells.symmetrical_short_circuit_current.step(
        f"{path.head}.symmetrical",
        rated_voltage=Quantity(before, "kV"),
        transformer_impedance=z_t.result,
        system_impedance=counted,
    )
    yield current
    ratio = [*_ratio_steps(data, path, row, z_t.result, counted)]
    yield from ratio
    if ratio:
        yield from _peak_steps(data, path, current, ratio[-1])


def _ratio_steps(data: NetworkData, path: _Path, row: ImpedanceRow, z_t: Quantity, counted: Quantity) -> Iterator[Step]:
    """Yield X/R of transformer and network, last; nothing where the transformer has no resistance."""
    size = row.impedance.to("p.u.") * (1.0 - (row.tolerance.to("p.u.") if path.tolerance and row.tolerance else 0.0))
    resistance = row.resistance_value.to("p.u.") / size * z_t.value
    if resistance <= 0.0:
        return
    given = data.unit.system.terminals[path.source].x_over_r
    r_s, x_s = NOTHING, counted
    if given is not None:
        parts = {"system_impedance": counted, "system_x_over_r": Quantity(given, "1")}
        resistive = cells.system_resistance.step(f"{path.head}.system_resistance", **parts)
        reactive = cells.system_reactance.step(f"{path.head}.system_reactance", **parts)
        yield from (resistive, reactive)
        r_s, x_s = resistive.result, reactive.result
    yield cells.x_over_r_of_circuit.step(
        f"{path.head}.x_over_r",
        transformer_reactance=Quantity(math.sqrt(z_t.value**2 - resistance**2), "ohm"),
        system_reactance=x_s,
        transformer_resistance=Quantity(resistance, "ohm"),
        system_resistance=r_s,
    )


def _peak_steps(data: NetworkData, path: _Path, current: Step, ratio: Step) -> Iterator[Step]:
    frequency = data.unit.rating.frequency
    head = path.head
    yield cells.offset_time_constant.step(f"{head}.offset_time_constant", x_over_r=ratio.result, frequency=frequency)
    factor = peak_factor_closed_form.step(f"{head}.peak_factor", x_over_r=ratio.result)
    yield factor
    yield peak_short_circuit_current.step(f"{head}.peak", symmetrical_current=current.result, peak_factor=factor.result)

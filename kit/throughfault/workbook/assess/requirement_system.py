"""The networks that the duty takes: power, impedance, whether they are left out, zero sequence."""

from __future__ import annotations

from dataclasses import dataclass

from throughfault.cells.fault_current import system_impedance, system_share, transformer_impedance
from throughfault.declare import Missing, Step
from throughfault.quantities import Quantity
from throughfault.workbook.assess.requirement_line import Asked, Lines
from throughfault.workbook.assess.rules import Category, Neglect, RuleSet, Tabled, separate_pair
from throughfault.workbook.assess.winding_current import three_phase_power
from throughfault.workbook.inputs import Unit
from throughfault.workbook.inputs.system import Source

__all__ = ["SystemUsed", "system_used"]


@dataclass(frozen=True, slots=True)
class SystemUsed:
    """The network at one terminal as the duty takes it.

    Attributes
    ----------
    power
        Short-circuit power in MVA with its source; the value is None where the table has none.
    neglect
        For each other winding with an impedance to it: whether the network is left out for a fault there, and why.
    x0_over_x1
        The ratios run for earth faults.
    """

    terminal: str
    power: Tabled
    neglect: dict[str, Neglect]
    x0_over_x1: tuple[Tabled, ...]


def system_used(unit: Unit, rules: RuleSet, name: str, category: Category, found: Lines) -> SystemUsed | None:
    """Take in what the network at one terminal is, None where there is none."""
    source, winding = unit.system.terminals[name], unit.windings[name]
    if source.short_circuit_power is None:
        return None
    head = f"requirement.{name}"
    power = _power(unit, rules, name, source)
    found.tabled(f"{head}.short_circuit_power", power, "S", f"short-circuit power at {name}")
    ratios = _ratios(rules, name, source, found)
    if power.value is None:
        key = f"system.{name}.short_circuit_power"
        found.missing.append(Missing(f"{head}.short_circuit_power", (key,), power.note))
        return SystemUsed(name, power, {}, ratios)
    at = source.voltage or winding.rated_voltage
    impedance = found.step(
        system_impedance.step(
            f"{head}.system_impedance", system_voltage=at, short_circuit_power=Quantity(power.value, "MVA")
        ),
        f"impedance of the network at {name}",
    )
    neglect = {}
    for other in unit.windings:
        step = None if other == name else _share(unit, name, other, impedance, found)
        if step is not None:
            ratio = step.result.to("p.u.")
            neglect[other] = rules.source_neglected(category.name, ratio, two_winding=separate_pair(unit))
            found.asked[-1] = Asked(found.asked[-1].label, found.asked[-1].outcome, neglect[other].reason)
    return SystemUsed(name, power, neglect, ratios)


def _power(unit: Unit, rules: RuleSet, name: str, source: Source) -> Tabled:
    """Return the short-circuit power: as given, else of the standard's table for the highest voltage."""
    given = source.short_circuit_power
    if isinstance(given, Quantity):
        return Tabled(given.to("MVA"), "MVA", f"unit file, system.{name}.short_circuit_power", "maker", "H", "as given")
    highest = unit.windings[name].highest_voltage
    if highest is None:
        reason = f"the table needs windings.{name}.highest_voltage"
        return Tabled(None, "MVA", f"unit file, system.{name}.short_circuit_power", "maker", "H", reason)
    return rules.system_short_circuit_power(highest.to("kV"), source.column)


def _ratios(rules: RuleSet, name: str, source: Source, found: Lines) -> tuple[Tabled, ...]:
    if source.x0_over_x1 is not None:
        where = f"unit file, system.{name}.x0_over_x1"
        given = Tabled(source.x0_over_x1, "1", where, "maker", "H", "as given")
        found.tabled(
            f"requirement.{name}.x0_over_x1",
            given,
            "X_0/X_1",
            f"zero- over positive-sequence impedance of the network at {name}",
        )
        return (given,)
    scan = rules.x0_over_x1_scan()
    ends = ("x0_over_x1",) if len(scan) == 1 else ("x0_over_x1_least", "x0_over_x1_greatest")
    for end, tabled in zip(ends, scan, strict=True):
        found.tabled(
            f"requirement.{name}.{end}",
            tabled,
            "X_0/X_1",
            f"zero- over positive-sequence impedance of the network at {name}",
        )
    return scan


def _share(unit: Unit, name: str, other: str, impedance: Step, found: Lines) -> Step | None:
    row = unit.impedance(name, other)
    if row is None:
        return None
    head = f"requirement.{name}.to_{other}"
    own = transformer_impedance.step(
        f"{head}.transformer_impedance",
        impedance_ratio=row.impedance,
        rated_voltage=unit.windings[name].rated_voltage,
        rated_power=three_phase_power(unit, row.base_power),
    )
    found.step(own, f"impedance of {name}-{other} seen from {name}")
    share = system_share.step(
        f"{head}.system_share", system_impedance=impedance.result, transformer_impedance=own.result
    )
    return found.step(share, f"network at {name} over {name}-{other}")

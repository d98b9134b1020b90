"""What the standard asks of the unit, and what of it rests on the standard's own defaults."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from throughfault.cells.fault_current import rated_impedance_ratio
from throughfault.declare import Fragment, OpenPoint
from throughfault.quantities import Quantity
from throughfault.workbook.assess.requirement_line import Asked, Lines
from throughfault.workbook.assess.requirement_system import SystemUsed, system_used
from throughfault.workbook.assess.rules import Category, RuleSet, Tabled, category_of, separate_pair
from throughfault.workbook.assess.thermal_inputs import DutyLike, duration_of
from throughfault.workbook.assess.winding_current import multiple_step, rated_steps, three_phase_power
from throughfault.workbook.inputs import Unit
from throughfault.workbook.inputs.windings import PRINCIPAL

__all__ = ["Asked", "FaultKind", "Requirement", "SystemUsed", "assess_requirement"]


@dataclass(frozen=True, slots=True)
class FaultKind:
    """Cases of one kind of fault: how many the standard requires, and how many are run beyond it."""

    fault: str
    required: int
    extra: int


@dataclass(frozen=True)
class Requirement:
    """What the standard asks.

    Attributes
    ----------
    asked
        Every line in the order of a record.
    faults
        Cases by kind of fault.
    """

    standard: str
    edition: str
    category: Category
    asked: tuple[Asked, ...]
    systems: tuple[SystemUsed, ...]
    faults: tuple[FaultKind, ...]
    fragment: Fragment


def assess_requirement(unit: Unit, rules: RuleSet, duty: DutyLike) -> Requirement:
    """Collect what the standard asks of this unit; nothing here is a check of its ability."""
    found = Lines()
    category = category_of(unit, rules)
    _category(found, category)
    _immersion(unit, rules, found)
    _impedances(unit, rules, found)
    _tolerances(unit, rules, found)
    systems = tuple(system_used(unit, rules, name, category, found) for name in unit.system.terminals)
    _base(unit, rules, found)
    _durations(unit, rules, duty, category, found)
    faults = _faults(duty, found)
    fragment = Fragment(
        quantities=tuple(line.outcome for line in found.asked),
        steps=tuple(found.steps),
        missing=tuple(found.missing),
        open_points=tuple(found.points),
    )
    return Requirement(
        rules.title, rules.edition, category, tuple(found.asked), tuple(s for s in systems if s), faults, fragment
    )


def _category(found: Lines, category: Category) -> None:
    if category.name is None:
        text = f"The unit belongs to no category of the standard: {category.note}."
        found.points.append(OpenPoint("requirement.category", text, clause=category.source))


def _immersion(unit: Unit, rules: RuleSet, found: Lines) -> None:
    """Point out a dry-type unit under a standard that is for liquid-immersed ones."""
    if unit.rating.immersion not in rules.immersions:
        text = (
            f"{rules.title} is for liquid-immersed units and is applied to a dry-type unit: its categories, networks, "
            "durations and form of the temperature; the standard for dry-type units differs."
        )
        found.points.append(OpenPoint("requirement.immersion", text, clause=rules.key))


def _impedances(unit: Unit, rules: RuleSet, found: Lines) -> None:
    """Hold the principal impedance of two separate windings against the standard's minimum."""
    power = three_phase_power(unit, max((w.rated_power for w in unit.windings.values()), key=lambda q: q.to("MVA")))
    least = rules.minimum_impedance(power.to("MVA"))
    found.tabled("requirement.minimum_impedance", least, r"z_{\min}", "minimum impedance, principal tapping")
    if not separate_pair(unit):
        return
    row = unit.impedance(*unit.windings)
    if row is None:
        return
    pair = "-".join(unit.windings)
    step = found.step(
        rated_impedance_ratio.step(
            f"requirement.{pair}.impedance",
            impedance_ratio=row.impedance,
            rated_power=power,
            base_power=three_phase_power(unit, row.base_power),
        ),
        f"impedance of {pair} on the rated power",
        row.basis,
    )
    if least.value is not None and step.result.value < least.value:
        text = f"The impedance of {pair}, {{impedance}}, is below the standard's minimum, {{least}}."
        values = {"impedance": step.result, "least": Quantity(least.value, "%")}
        found.points.append(OpenPoint("requirement.minimum_impedance", text, values, least.source))


def _tolerances(unit: Unit, rules: RuleSet, found: Lines) -> None:
    """Point out guaranteed impedances whose tolerance the duty does not take off."""
    first = set(unit.impedances[0].between) if unit.impedances else set()
    for row in unit.impedances:
        principal, of_first = row.tapping == PRINCIPAL, set(row.between) == first
        usual = rules.usual_tolerance(row.impedance.to("%"), principal=principal, first_pair=of_first)
        if row.basis != "guaranteed" or row.tolerance is not None or usual.value is None:
            continue
        pair = "-".join(row.between)
        text = (
            f"{pair}, tapping '{row.tapping}': guaranteed without a tolerance; usual is {{tolerance}}, not taken off."
        )
        values = {"tolerance": Quantity(usual.value, "%")}
        point = f"requirement.{pair}.{row.tapping}.tolerance"
        found.points.append(OpenPoint(point, text, values, usual.source))


def _base(unit: Unit, rules: RuleSet, found: Lines) -> None:
    """Point out that multiples refer to the rated power where the self-cooled one is asked and not given."""
    if rules.base_power_is_self_cooled and unit.rating.self_cooled_power is None:
        text = "Multiples of the current refer to the rated power: rating.self_cooled_power is not given."
        found.points.append(OpenPoint("requirement.base_power", text, clause="IEEEC57.12.00-2015, 7.1.5"))


def _durations(unit: Unit, rules: RuleSet, duty: DutyLike, category: Category, found: Lines) -> None:
    """State duration and ceiling of every winding."""
    lowest = min(w.rated_voltage.to("kV") for w in unit.windings.values())
    for name, winding in unit.windings.items():
        current = duty.windings[name].symmetrical
        multiple = None
        if current is not None:
            over = multiple_step(name, Quantity(current, "kA"), rated_steps(unit, rules, name))
            multiple = over.result.value
        by_standard = rules.fault_duration(category.name, multiple)
        found.tabled(f"requirement.{name}.duration", by_standard, "t", f"duration asked of {name}")
        _shorter(name, duration_of(unit, rules, name, category.name, multiple), by_standard, found)
        power, two_winding = winding.rated_power.to("MVA"), separate_pair(unit)
        ceiling = rules.current_ceiling(category.name, power, unit.rating.phases, lowest, two_winding=two_winding)
        if ceiling.value is not None:
            found.tabled(f"requirement.{name}.ceiling", ceiling, r"N_{\max}", f"ceiling of the current of {name}")
        _above_ceiling(name, multiple, ceiling, found)


def _shorter(name: str, taken: Tabled, asked: Tabled, found: Lines) -> None:
    if taken.value is not None and asked.value is not None and taken.value < asked.value:
        text = f"{name}: the review takes a duration of {{taken}}; without an agreement the standard asks {{asked}}."
        values = {"taken": Quantity(taken.value, "s"), "asked": Quantity(asked.value, "s")}
        found.points.append(OpenPoint(f"requirement.{name}.duration", text, values, asked.source))


def _above_ceiling(name: str, multiple: float | None, ceiling: Tabled, found: Lines) -> None:
    if multiple is not None and ceiling.value is not None and multiple > ceiling.value:
        text = f"{name}: the duty is {{multiple}} times base; the standard asks no more than {{ceiling}} times."
        values = {"multiple": Quantity(multiple, "1"), "ceiling": Quantity(ceiling.value, "1")}
        found.points.append(OpenPoint(f"requirement.{name}.ceiling", text, values, ceiling.source))


def _faults(duty: DutyLike, found: Lines) -> tuple[FaultKind, ...]:
    """Count the cases the standard requires and those beyond it, by kind of fault."""
    kinds: dict[str, list[int]] = {}
    for entry in duty.entries:
        kinds.setdefault(entry["fault"], [0, 0])[0 if entry["required_by_standard"] else 1] += 1
    for word, place in (("required", 0), ("extra", 1)):
        count = float(sum(counts[place] for counts in kinds.values()))
        tabled = Tabled(count, "1", "the cases of this review", "derived", "H")
        found.tabled(
            f"requirement.cases_{word}",
            tabled,
            "n",
            f"cases {word} by the standard" if not place else "cases beyond it",
        )
    return tuple(FaultKind(fault, *counts) for fault, counts in _sorted(kinds))


def _sorted(kinds: dict[str, Any]) -> Iterator[tuple[str, Any]]:
    order = ("3ph", "LL", "LG", "LLG")
    yield from sorted(
        kinds.items(), key=lambda item: (order.index(item[0]) if item[0] in order else len(order), item[0])
    )

"""Rated current of each winding (not of its terminal), and the multiple that the duty is of it."""

from __future__ import annotations

from dataclasses import dataclass

from throughfault.cells.fault_current import (
    common_winding_current,
    current_multiple,
    rated_current,
    rated_current_delta,
    rated_current_single_phase,
)
from throughfault.declare import Step
from throughfault.quantities import Quantity
from throughfault.workbook.assess.rules import RuleSet, bank_power
from throughfault.workbook.inputs import Unit

__all__ = ["Rated", "base_power", "multiple_step", "rated_steps", "three_phase_power"]


@dataclass(frozen=True, slots=True)
class Rated:
    """Rated current of a winding in A on the power that multiples refer to, and the steps that give it."""

    current: Quantity
    steps: tuple[Step, ...]


def three_phase_power(unit: Unit, power: Quantity) -> Quantity:
    """Return a power of the file in MVA, of the bank where the file states one unit of it."""
    return Quantity(bank_power(power.to("MVA"), unit.rating.phases, bank=unit.rating.bank), "MVA")


def base_power(unit: Unit, rules: RuleSet, winding: str) -> Quantity:
    """Return the power that a winding's multiple refers to: rated, or under IEEE the self-cooled share of it."""
    rated = unit.windings[winding].rated_power
    own = unit.rating.self_cooled_power
    if own is None or not rules.base_power_is_self_cooled:
        return rated
    largest = max(w.rated_power.to("MVA") for w in unit.windings.values())
    return Quantity(rated.to("MVA") * own.to("MVA") / largest, "MVA")


def rated_steps(unit: Unit, rules: RuleSet, winding: str) -> Rated:
    """Work out the rated current of a winding: line current in a star, a third of the power in a delta.

    Of an autotransformer the first winding carries the line current, the second the difference.
    """
    letter = unit.connections[winding].letter
    step = _of_terminal(unit, rules, winding, f"thermal.{winding}.rated_current", delta=letter == "D")
    if letter != "auto":
        return Rated(step.result, (step,))
    series = next(iter(unit.windings))
    high = _of_terminal(unit, rules, series, f"thermal.{winding}.high_voltage_current", delta=False)
    low = _of_terminal(unit, rules, winding, f"thermal.{winding}.low_voltage_current", delta=False)
    common = common_winding_current.step(
        f"thermal.{winding}.rated_current", low_voltage_current=low.result, high_voltage_current=high.result
    )
    return Rated(common.result, (high, low, common))


def _of_terminal(unit: Unit, rules: RuleSet, winding: str, id_: str, *, delta: bool) -> Step:
    power, voltage = base_power(unit, rules, winding), unit.windings[winding].rated_voltage
    if unit.group.single_phase:
        return rated_current_single_phase.step(id_, rated_power=power, rated_voltage=voltage)
    cell = rated_current_delta if delta else rated_current
    return cell.step(id_, rated_power=three_phase_power(unit, power), rated_voltage=voltage)


def multiple_step(winding: str, current: Quantity, rated: Rated) -> Step:
    """Work out the symmetrical current of a winding over its rated one."""
    return current_multiple.step(
        f"thermal.{winding}.multiple", symmetrical_current=current, rated_current=rated.current
    )

"""Tap-changer, bushings and neutral against the currents they are proven for, where the file says what that is."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from typing import Literal, Protocol

from throughfault.declare import Check, Limit
from throughfault.quantities import Quantity
from throughfault.workbook.assess.rules import RuleSet
from throughfault.workbook.inputs import Unit
from throughfault.workbook.inputs.system import Withstand

__all__ = ["apparatus_checks"]


class Currents(Protocol):
    """Largest currents in kA with their cases."""

    @property
    def symmetrical(self) -> float | None:
        """Largest symmetrical current."""

    @property
    def symmetrical_case(self) -> str | None:
        """Its case."""

    @property
    def peak(self) -> float | None:
        """Largest peak."""

    @property
    def peak_case(self) -> str | None:
        """Its case."""


def apparatus_checks(
    unit: Unit,
    rules: RuleSet,
    windings: Mapping[str, Currents],
    terminals: Mapping[str, Currents],
    neutrals: Mapping[str, Currents],
) -> tuple[Check, ...]:
    """Return the checks of every apparatus whose proven currents the file gives."""
    return tuple(_all(unit, rules, windings, terminals, neutrals))


def _all(
    unit: Unit,
    rules: RuleSet,
    windings: Mapping[str, Currents],
    terminals: Mapping[str, Currents],
    neutrals: Mapping[str, Currents],
) -> Iterator[Check]:
    tapped = [name for name, winding in unit.windings.items() if winding.tappings]
    if unit.tap_changer is not None and tapped:
        yield from _pair(unit, rules, "tap_changer", tapped[0], unit.tap_changer, windings.get(tapped[0]))
    for name, proven in unit.bushings.items():
        yield from _pair(unit, rules, f"bushings.{name}", name, proven, terminals.get(name))
    for name, proven in unit.neutral.items():
        yield from _pair(unit, rules, f"neutral.{name}", name, proven, neutrals.get(name))


def _pair(
    unit: Unit, rules: RuleSet, key: str, winding: str, proven: Withstand, current: Currents | None
) -> Iterator[Check]:
    """Yield the thermal and the peak check of one apparatus."""
    if proven.short_time_current is not None:
        stated = unit.fault_duration(winding)
        duration = stated.to("s") if stated is not None else rules.fault_duration(None, None).value
        limit = _limit(_permitted(proven, duration), f"unit file, {key}.short_time_current")
        value, case = (current.symmetrical, current.symmetrical_case) if current else (None, None)
        yield _check(unit, f"{key}.short_time_current", value, limit, "thermal", case)
    if proven.peak_current is not None:
        limit = _limit(proven.peak_current.to("kA"), f"unit file, {key}.peak_current")
        value, case = (current.peak, current.peak_case) if current else (None, None)
        yield _check(unit, f"{key}.peak_current", value, limit, "dynamic", case)


def _permitted(proven: Withstand, duration: float | None) -> float:
    """Return the short-time current for the fault's duration in kA: the heat integral is kept for a longer fault."""
    current = proven.short_time_current.to("kA") if proven.short_time_current is not None else 0.0
    proven_for = proven.duration.to("s") if proven.duration is not None else None
    if proven_for is None or duration is None or duration <= proven_for:
        return current
    return current * math.sqrt(proven_for / duration)


def _limit(value: float, source: str) -> Limit:
    return Limit(value, "kA", "at most", source, "maker")


def _check(
    unit: Unit,
    name: str,
    value: float | None,
    limit: Limit,
    ability: Literal["thermal", "dynamic"],
    case: str | None,
) -> Check:
    given = unit.limits.get(f"apparatus.{name}")
    if given is not None and isinstance(given.value, Quantity):
        limit = limit.replaced(given.value, given.source)
    reason = None if value is not None else "no case could be run for the current through it"
    return Check(f"apparatus.{name}", value, "kA", limit, ability, case, reason)

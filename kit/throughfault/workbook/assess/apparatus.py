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
    tapped = {name: windings.get(name) for name, winding in unit.windings.items() if winding.tappings}
    if unit.tap_changer is not None and tapped:
        yield from _pair(unit, rules, "tap_changer", unit.tap_changer, tapped)
    for name, proven in unit.bushings.items():
        yield from _pair(unit, rules, f"bushings.{name}", proven, {name: terminals.get(name)})
    for name, proven in unit.neutral.items():
        yield from _pair(unit, rules, f"neutral.{name}", proven, {name: neutrals.get(name)})


def _pair(
    unit: Unit, rules: RuleSet, key: str, proven: Withstand, currents: Mapping[str, Currents | None]
) -> Iterator[Check]:
    """Yield the thermal and the peak check of one apparatus, by the winding whose current tries it most."""
    if proven.short_time_current is not None:
        name = f"{key}.short_time_current"
        made = (
            _check(
                unit,
                name,
                _short_time(proven, proven.short_time_current, _duration(unit, rules, winding), name),
                "thermal",
                (found.symmetrical, found.symmetrical_case) if found else (None, None),
            )
            for winding, found in currents.items()
        )
        yield max(made, key=_severity)
    if proven.peak_current is not None:
        name = f"{key}.peak_current"
        limit = Limit(proven.peak_current.to("kA"), "kA", "at most", f"unit file, {name}", "maker")
        peaks = ((found.peak, found.peak_case) if found else (None, None) for found in currents.values())
        yield max((_check(unit, name, limit, "dynamic", peak) for peak in peaks), key=_severity)


def _severity(check: Check) -> float:
    """Order checks by utilisation; one that exceeds comes before one that could not be assessed, that before others."""
    used = check.utilisation
    return 1.0 + 1e-12 if used is None else used


def _duration(unit: Unit, rules: RuleSet, winding: str) -> float | None:
    stated = unit.fault_duration(winding)
    return stated.to("s") if stated is not None else rules.fault_duration(None, None).value


def _short_time(proven: Withstand, current: Quantity, duration: float | None, name: str) -> Limit:
    """Return the short-time current for the fault's duration: the heat integral is kept for a longer fault."""
    source = f"unit file, {name}"
    proven_for = proven.duration.to("s") if proven.duration is not None else None
    if proven_for is None or duration is None or duration <= proven_for:
        return Limit(current.to("kA"), "kA", "at most", source, "maker")
    permitted = current.to("kA") * math.sqrt(proven_for / duration)
    return Limit(permitted, "kA", "at most", f"{source}, heat integral kept for the longer fault", "derived")


def _check(
    unit: Unit,
    name: str,
    limit: Limit,
    ability: Literal["thermal", "dynamic"],
    current: tuple[float | None, str | None],
) -> Check:
    given = unit.limits.get(f"apparatus.{name}")
    if given is not None and isinstance(given.value, Quantity):
        limit = limit.replaced(given.value, given.source)
    value, case = current
    reason = None if value is not None else "no case was run that gives the current through it"
    return Check(f"apparatus.{name}", value, "kA", limit, ability, case, reason)

"""Verdicts by ability, the route that would complete them, and the limits nobody has confirmed."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from throughfault.declare import ABILITIES, Check, Fragment, Missing, OpenPoint, overall_verdict, verdict_of
from throughfault.errors import did_you_mean
from throughfault.workbook.inputs import Unit

__all__ = ["NO_ROUTE", "Conclusion", "conclude", "route_check"]

NO_ROUTE = "none complete"
ROUTE_ID = "dynamic.route"
ROUTE_REASON = "no route is complete: neither a special test, nor a calculation, nor a similar tested unit is in hand"

DESIGN_REASON = "design data are given, and this version of the kit does not calculate forces and strength from them"


@dataclass(frozen=True)
class Conclusion:
    """What the review concludes from its checks.

    Attributes
    ----------
    checks
        Every check of the unit, whichever template shows them.
    verdicts
        ``thermal``, ``dynamic`` and ``overall``.
    route
        The route by which dynamic ability is demonstrated.
    unconfirmed
        Checks whose verdict rests on a recalled limit.
    """

    checks: tuple[Check, ...]
    verdicts: dict[str, str]
    route: str
    unconfirmed: tuple[Check, ...]
    fragment: Fragment

    def entry(self) -> dict[str, Any]:
        """Return what the verdict part adds to the results file."""
        return {**self.fragment.entry(), "verdicts": self.verdicts, "route": self.route}


def route_check(unit: Unit) -> tuple[Check, Missing]:
    """Return the check that dynamic ability needs a route, and what would supply one."""
    keys, reason = (("design",), ROUTE_REASON) if unit.design is None else ((), DESIGN_REASON)
    check = Check(ROUTE_ID, None, "1", None, "dynamic", reason=reason)
    return check, Missing(ROUTE_ID, keys, reason)


def conclude(unit: Unit, checks: Sequence[Check]) -> Conclusion:
    """Draw the verdicts from all checks of a unit.

    Dynamic ability needs one complete route; checks alone, of apparatus for instance, do not make one.
    """
    route, missing = route_check(unit)
    everything = (*checks, route)
    verdicts: dict[str, str] = {a: verdict_of(c for c in everything if c.ability == a) for a in ABILITIES}
    worst = overall_verdict(verdict_of(c for c in everything if c.ability == a) for a in ABILITIES)
    unconfirmed = tuple(check for check in everything if check.unconfirmed)
    points = (*(_unconfirmed_point(check) for check in unconfirmed), *_unused_limits(unit, everything))
    fragment = Fragment(checks=everything, missing=(missing,), open_points=points)
    return Conclusion(everything, {**verdicts, "overall": worst}, NO_ROUTE, unconfirmed, fragment)


def _unconfirmed_point(check: Check) -> OpenPoint:
    template = f"{check.id}: a recalled limit carries the verdict; a signatory must confirm it from a licensed copy"
    return OpenPoint(f"limit.{check.id}", template, clause=check.limit.source if check.limit else "", blocking=True)


def _unused_limits(unit: Unit, checks: Sequence[Check]) -> Iterator[OpenPoint]:
    """Yield a point for each limit of the unit file that no check of this review takes."""
    known = {check.id for check in checks}
    told = {point.id for point in unit.warnings}
    for name, limit in unit.limits.items():
        if name not in known and f"input.limits.{name}" not in told:
            template = f"limits.'{name}': no check of this review takes this limit{did_you_mean(name, known)}"
            yield OpenPoint(f"limits.{name}", template, clause=limit.source)

"""How long a winding bears its current, and what that decides where the temperature itself is beyond the form."""

from __future__ import annotations

from throughfault.cells import thermal_withstand as withstand
from throughfault.cells.heat_content import CLAUSE
from throughfault.declare import Check, Limit, Missing, Outcome, Step
from throughfault.errors import OutsideValidity
from throughfault.workbook.assess.rules import Tabled
from throughfault.workbook.assess.thermal_inputs import HeatInputs
from throughfault.workbook.assess.thermal_method import METHODS

__all__ = ["LONGER", "duration_check", "not_worked_out", "permissible_duration", "too_long"]

LONGER = f"longer than the {withstand.ADIABATIC_TO:g} s for which the adiabatic form holds"
UNIT_FILE = "unit file, "
HOLDS_BY = {"average temperature": withstand.AVERAGE, "all heat stored": CLAUSE}


def not_worked_out(id_: str, unit: str, symbol: str, case: str | None, reason: str) -> Outcome:
    """Return a result that has a reason and no number."""
    return Outcome(id_, None, unit, symbol, "", "-", "derived", case, reason)


def permissible_duration(
    method: str, given: HeatInputs, density: Step, limit: Limit | None
) -> tuple[Outcome, tuple[Step, ...]]:
    """Return the duration in which the winding reaches its limit, with its steps."""
    id_ = f"thermal.{given.winding}.permissible_duration"
    reason = "there is no limit to reach"
    if limit is not None:
        try:
            steps = METHODS[method].permissible(given, density, limit, id_)
        except OutsideValidity as outside:
            reason = str(outside)
        else:
            if steps[-1].result.to("s") <= withstand.ADIABATIC_TO:
                return Outcome.of_step(steps[-1], governing_case=given.case), steps
            reason = LONGER
    return not_worked_out(id_, "s", r"t_{\max}", given.case, reason), ()


def too_long(method: str, given: HeatInputs, taken: Tabled, id_: str) -> Missing | None:
    """Name the key of the duration where that lies beyond the form, so that no temperature can be given."""
    duration = given.duration.to("s")
    if duration <= withstand.ADIABATIC_TO:
        return None
    own = taken.source.startswith(UNIT_FILE)
    key = taken.source.removeprefix(UNIT_FILE) if own else "rating.fault_duration"
    return Missing(id_, (key,), f"{key} is {given.duration}, {LONGER} ({HOLDS_BY[method].citation})")


def duration_check(
    given: HeatInputs, temperature: Outcome, allowed: Outcome, taken: Tabled, limit: Limit | None
) -> tuple[Check, ...]:
    """Return the check that decides where the fault outlasts what is permitted and the temperature has no number.

    Close to the pole of the average form, or beyond the hottest temperature of the other, there is no temperature to
    hold against the limit; that the limit is reached before the fault ends is known all the same. The check stands on
    the limit of the temperature as much as on the duration, and is as unconfirmed as either.
    """
    duration = given.duration.to("s")
    decided = temperature.value is not None or duration > withstand.ADIABATIC_TO
    if decided or limit is None or not limit.decides or allowed.value is None or allowed.value >= duration:
        return ()
    recalled = limit.provenance == "recalled"
    source = f"{taken.source}; the limit reached is that of {limit.source}" if recalled else taken.source
    least = Limit(
        duration, "s", "at least", source, "recalled" if recalled else taken.provenance,
        "M" if taken.confidence == "M" or limit.confidence == "M" else "H",
    )  # fmt: skip
    return (Check(allowed.id, allowed.value, "s", least, "thermal", given.case),)

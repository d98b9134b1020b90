"""Thermal ability: the temperature of every winding after the fault, held against the standard's limit."""

from __future__ import annotations

from dataclasses import dataclass, field

from throughfault.cells import thermal_withstand as withstand
from throughfault.declare import Check, Fragment, Limit, Missing, OpenPoint, Outcome, Step
from throughfault.errors import OutsideValidity
from throughfault.numerics.case import Floats
from throughfault.numerics.heat import Shots
from throughfault.quantities import Quantity
from throughfault.workbook.assess.reclosing import reclosing
from throughfault.workbook.assess.rules import LimitOrReason, RuleSet, Tabled, category_of
from throughfault.workbook.assess.thermal_duration import (
    LONGER,
    duration_check,
    not_worked_out,
    permissible_duration,
    too_long,
)
from throughfault.workbook.assess.thermal_inputs import (
    DutyLike,
    HeatInputs,
    duration_of,
    heat_inputs,
    limit_of,
    material_of,
    outcome_of,
    start_of,
)
from throughfault.workbook.assess.thermal_method import METHODS, comparison_steps, curve_of
from throughfault.workbook.assess.through_fault import ThroughFault, assess_through_fault
from throughfault.workbook.assess.winding_current import multiple_step, rated_steps
from throughfault.workbook.inputs import Unit

__all__ = ["Thermal", "WindingThermal", "assess_thermal"]

LABELS = {
    "exact": "exact exponential",
    "eddy": "exact, with eddy loss",
    "offset": "exact, with decaying offset",
    "other": "form of the other standard, from the same start",
}
BEYOND = 1.25  # plots run this much beyond the duration or the permissible duration


@dataclass(frozen=True)
class WindingThermal:
    """The temperature of one winding.

    Attributes
    ----------
    density, temperature, permissible_duration
        A/mm^2, degC, s; None where not assessed.
    start, duration
        What was taken, and from where.
    limit
        None where the standard gives none.
    comparisons
        ``{name: (label, outcome)}`` shown beside the deciding form, never checked.
    curve
        ``time`` in s and ``standard``, ``exact``, ``offset`` in degC, for a plot; empty where not assessed.
    shots
        Two faults in a row, for information; None where not assessed.
    multiple
        Symmetrical current over rated or base current.
    """

    winding: str
    case: str | None
    method: str
    start: Tabled
    duration: Tabled
    multiple: float | None
    limit: Limit | None
    check: Check
    density: float | None = None
    temperature: float | None = None
    permissible_duration: float | None = None
    comparisons: dict[str, tuple[str, Outcome]] = field(default_factory=dict)
    curve: dict[str, Floats] = field(default_factory=dict)
    shots: Shots | None = None
    fragment: Fragment = field(default_factory=Fragment)


@dataclass(frozen=True)
class Thermal:
    """Thermal ability of the unit.

    Attributes
    ----------
    method
        Form of the temperature that decides.
    start_is
        What the start temperature means under this standard.
    through_fault
        Through-fault duration curve with the unit's own points.
    """

    method: str
    start_is: str
    windings: dict[str, WindingThermal]
    through_fault: ThroughFault
    fragment: Fragment


def assess_thermal(unit: Unit, rules: RuleSet, duty: DutyLike) -> Thermal:
    """Assess every winding; what lacks inputs is not assessed, and the rest goes on."""
    windings = {name: _winding(unit, rules, name, duty) for name in unit.windings}
    multiples = {name: w.multiple for name, w in windings.items()}
    durations = {name: w.duration for name, w in windings.items()}
    curve = assess_through_fault(unit, multiples, durations)
    parts = [*(w.fragment for w in windings.values()), curve.fragment]
    return Thermal(rules.thermal_method, rules.start_is, windings, curve, _joined(parts))


def _joined(parts: list[Fragment]) -> Fragment:
    return Fragment(
        quantities=tuple(q for part in parts for q in part.quantities),
        steps=tuple(s for part in parts for s in part.steps),
        checks=tuple(c for part in parts for c in part.checks),
        missing=tuple(m for part in parts for m in part.missing),
        open_points=tuple(p for part in parts for p in part.open_points),
    )


def _winding(unit: Unit, rules: RuleSet, name: str, duties: DutyLike) -> WindingThermal:
    duty = duties.windings[name]
    steps: list[Step] = []
    multiple = None
    if duty.symmetrical is not None:
        rated = rated_steps(unit, rules, name)
        over = multiple_step(name, Quantity(duty.symmetrical, "kA"), rated)
        steps += [*rated.steps, over]
        multiple = over.result.value
    duration = duration_of(unit, rules, name, category_of(unit, rules).name, multiple)
    limit = limit_of(unit, rules, name, material_of(unit, name))
    given = heat_inputs(unit, rules, name, duties, duration)
    common = _Common(name, duty.symmetrical_case, rules.thermal_method, start_of(unit, rules, name), duration, multiple)
    if isinstance(given, Missing):
        return _not_assessed(common, limit, given, steps)
    return _assessed(common, limit, given, steps, unit.rating.frequency)


@dataclass(frozen=True, slots=True)
class _Common:
    winding: str
    case: str | None
    method: str
    start: Tabled
    duration: Tabled
    multiple: float | None

    @property
    def outcomes(self) -> tuple[Outcome, ...]:
        """What was taken for start and duration."""
        prefix = f"thermal.{self.winding}"
        return (
            outcome_of(f"{prefix}.start_temperature", self.start, r"\theta_0"),
            outcome_of(f"{prefix}.duration", self.duration, "t"),
        )


def _made(common: _Common, limit: Limit | None, check: Check, **more: object) -> WindingThermal:
    return WindingThermal(
        winding=common.winding,
        case=common.case,
        method=common.method,
        start=common.start,
        duration=common.duration,
        multiple=common.multiple,
        limit=limit,
        check=check,
        **more,  # type: ignore[arg-type]
    )


def _multiple_outcome(common: _Common, steps: list[Step]) -> tuple[Outcome, ...]:
    if common.multiple is None:
        return ()
    return (Outcome.of_step(steps[-1], governing_case=common.case),)


def _not_assessed(common: _Common, limit: LimitOrReason, missing: Missing, steps: list[Step]) -> WindingThermal:
    check = Check(missing.id, None, "degC", limit.limit, "thermal", common.case, missing.reason)
    prefix = f"thermal.{common.winding}"
    none = tuple(
        Outcome(f"{prefix}.{what}", None, unit, symbol, "", "-", "derived", common.case, missing.reason)
        for what, unit, symbol in (("density", "A/mm^2", "J"), ("temperature", "degC", r"\theta_1"))
    )
    quantities = (*common.outcomes, *_multiple_outcome(common, steps), *none)
    points = _limit_points(common.winding, limit)
    fragment = Fragment(quantities, tuple(steps), (check,), missing=(missing,), open_points=points)
    return _made(common, limit.limit, check, fragment=fragment)


def _assessed(
    common: _Common, limit: LimitOrReason, given: HeatInputs, steps: list[Step], frequency: Quantity
) -> WindingThermal:
    density = withstand.current_density.step(
        f"thermal.{given.winding}.density", winding_current=given.current, conductor_section=given.section
    )
    temperature, found = _deciding(common, given, density)
    allowed, more = permissible_duration(common.method, given, density, limit.limit)
    beside = comparison_steps(given, density, frequency, common.method)
    again, shots = reclosing(given, density)
    shown = {k: (LABELS[k], Outcome.of_step(s[-1], governing_case=given.case)) for k, s in beside.items()}
    check, missing = _check(common, temperature, limit, given)
    first, *last = (Outcome.of_step(step, governing_case=given.case) for step in (density, *again[-1:]))
    results = (first, temperature, allowed, *(outcome for _, outcome in shown.values()), *last)
    quantities = (*common.outcomes, *_multiple_outcome(common, steps), *results)
    every = (*steps, density, *found, *more, *(step for s in beside.values() for step in s), *again)
    checks = (check, *duration_check(given, temperature, allowed, common.duration, limit.limit))
    points = (*_limit_points(given.winding, limit), *_points(given, check, shown))
    return _made(
        common, limit.limit, check,
        density=density.result.value,
        temperature=temperature.value,
        permissible_duration=allowed.value,
        comparisons=shown,
        curve=_curve(given, density, common.method, allowed, beside),
        shots=shots,
        fragment=Fragment(quantities, every, checks, missing=missing, open_points=points),
    )  # fmt: skip


def _curve(
    given: HeatInputs, density: Step, method: str, allowed: Outcome, beside: dict[str, tuple[Step, ...]]
) -> dict[str, Floats]:
    longest = withstand.ADIABATIC_TO if allowed.reason == LONGER else allowed.value or 0.0
    until = BEYOND * max(given.duration.to("s"), longest)
    constant = beside["offset"][0].result.value if "offset" in beside else None
    return curve_of(given, density.result.value, method, until, constant)


def _deciding(common: _Common, given: HeatInputs, density: Step) -> tuple[Outcome, tuple[Step, ...]]:
    """Work out the temperature by the standard's form; outside its range it is not assessed."""
    id_ = f"thermal.{given.winding}.temperature"
    unknown = too_long(common.method, given, common.duration, id_)
    if unknown is not None:
        return not_worked_out(id_, "degC", r"\theta_1", given.case, unknown.reason), ()
    try:
        steps = METHODS[common.method].temperature(given, density, id_)
    except OutsideValidity as outside:
        return not_worked_out(id_, "degC", r"\theta_1", given.case, str(outside)), ()
    return Outcome.of_step(steps[-1], governing_case=given.case), steps


def _check(
    common: _Common, temperature: Outcome, limit: LimitOrReason, given: HeatInputs
) -> tuple[Check, tuple[Missing, ...]]:
    reason = temperature.reason
    unknown = too_long(common.method, given, common.duration, temperature.id)
    missing: tuple[Missing, ...] = () if unknown is None else (unknown,)
    if limit.limit is None:
        reason = reason or limit.reason
        missing += (Missing(temperature.id, (limit.key,), limit.reason),)
    elif not limit.limit.decides:
        reason = reason or "the recalled limit is uncertain; a signatory's own figure is needed"
    return Check(temperature.id, temperature.value, "degC", limit.limit, "thermal", given.case, reason), missing


def _limit_points(winding: str, limit: LimitOrReason) -> tuple[OpenPoint, ...]:
    if limit.limit is None or not limit.note:
        return ()
    return (OpenPoint(f"thermal.{winding}.limit", f"{winding}: {limit.note}.", clause=limit.limit.source),)


def _points(given: HeatInputs, check: Check, shown: dict[str, tuple[str, Outcome]]) -> tuple[OpenPoint, ...]:
    """Point out where an effect that the standard's form leaves out would take the winding past the limit."""
    points = []
    for name in ("eddy", "offset"):
        if name not in shown or check.verdict != "within" or check.limit is None:
            continue
        label, other = shown[name]
        if other.value is not None and other.value > check.limit.value:
            text = f"{given.winding}: {label}, the winding reaches {{other}}; the limit is {{limit}}."
            values = {"other": Quantity(other.value, "degC"), "limit": Quantity(check.limit.value, "degC")}
            points.append(OpenPoint(f"{other.id}.above_limit", text, values, check.limit.source))
    return tuple(points)

"""The duty: fault currents of every winding, terminal and neutral in every case, and which case governs."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import partial
from typing import Any

import numpy as np

from throughfault.declare import ABILITIES, Check, Fragment, Missing, OpenPoint, Outcome, Step
from throughfault.numerics.case import Floats
from throughfault.quantities import Quantity
from throughfault.workbook.assess.apparatus import apparatus_checks
from throughfault.workbook.assess.closed_form import closed_form_steps
from throughfault.workbook.assess.duty_entry import Largest, WindingDuty, case_entry, duty_outcomes
from throughfault.workbook.assess.duty_step import CaseFacts, factor_outcomes, fault_steps, peak_step
from throughfault.workbook.assess.fault_case import FaultCase, fault_cases
from throughfault.workbook.assess.fault_network import NetworkData
from throughfault.workbook.assess.fault_solution import Solved, ratio_of, solve_cases
from throughfault.workbook.assess.fault_wave import Wave, governing_wave
from throughfault.workbook.assess.rules import RuleSet, category_of
from throughfault.workbook.inputs import Unit

__all__ = ["Duty", "Largest", "WindingDuty", "assess_duty", "completeness_checks"]

EARTH_FAULT = "duty.earth_fault."
#: what is missing under these ids hides cases that may govern
HIDING = (EARTH_FAULT, "duty.infeed", "duty.out_of_phase.", "duty.tapping.")


@dataclass(frozen=True)
class Duty:
    """Everything about the fault currents.

    Attributes
    ----------
    windings, terminals
        By winding; terminals of stabilising windings have none.
    neutrals
        By winding with a neutral: largest r.m.s. current into earth and its peak.
    entries
        Every case as it stands in the results file.
    waves
        By winding: the wave of the case that governs its exact peak.
    category
        Category of the unit by the standard, or None.
    """

    windings: dict[str, WindingDuty]
    terminals: dict[str, WindingDuty]
    neutrals: dict[str, WindingDuty]
    cases: tuple[FaultCase, ...]
    entries: tuple[Mapping[str, Any], ...]
    waves: dict[str, Wave | None]
    category: str | None
    fragment: Fragment = field(repr=False)


def assess_duty(unit: Unit, rules: RuleSet) -> Duty:
    """Run every case of a unit.

    Raises
    ------
    NetworkError
        If the data describe no network that can be solved.
    """
    category = category_of(unit, rules).name
    wanted, missing = fault_cases(unit, rules)
    data = NetworkData(unit, rules, category)
    solved, unassessed = solve_cases(data, wanted)
    missing += unassessed
    if solved is None:
        nothing = Fragment(checks=completeness_checks(missing), missing=tuple(missing))
        return Duty({n: _nothing() for n in unit.windings}, {}, {}, (), (), {}, category, nothing)
    return _duty(solved, data, missing)


def completeness_checks(missing: Sequence[Missing]) -> tuple[Check, ...]:
    """Return, where cases that apply could not be run, a check of each ability that is not assessed for it."""
    hidden = [item.id for item in missing if item.id.startswith(HIDING)]
    if not hidden:
        return ()
    reason = f"cases that apply could not be run: {', '.join(hidden)}"
    return tuple(Check(f"duty.complete.{a}", None, "1", None, a, reason=reason) for a in ABILITIES)


def _loaded(neutral: WindingDuty) -> WindingDuty:
    """Keep a neutral's current where any case loads it: that none was run which does is no zero."""
    return neutral if neutral.symmetrical else _nothing()


def _nothing() -> WindingDuty:
    return WindingDuty(Largest(None, None), Largest(None, None), Largest(None, None))


def _duty(solved: Solved, data: NetworkData, missing: list[Missing]) -> Duty:
    unit, names = solved.unit, list(solved.unit.windings)
    brought_out = [n for n, w in unit.windings.items() if not w.stabilising]
    earthed = [n for n in names if unit.earthing.get(n, "isolated") != "isolated"]
    known = not any(item.id.startswith(EARTH_FAULT) for item in missing)
    largest = partial(_largest, solved)
    windings = {n: largest("winding", n) for n in names}
    entries = tuple(case_entry(solved, data.rules, number) for number in range(len(solved.cases)))
    duty = Duty(
        windings,
        {n: largest("terminal", n) for n in brought_out},
        {n: _loaded(largest("neutral", n)) if known else _nothing() for n in earthed},
        solved.cases,
        entries,
        {n: _wave(solved, n, d) for n, d in windings.items()},
        data.category,
        Fragment(),
    )
    return replace(duty, fragment=_fragment(solved, data, duty, missing))


def _wave(solved: Solved, name: str, duty: WindingDuty) -> Wave | None:
    cases = [case.name for case in solved.cases]
    index = list(solved.unit.windings).index(name)
    return governing_wave(solved.wave, solved.transformer, index, duty.peak_exact.case, cases)


def _fragment(solved: Solved, data: NetworkData, duty: Duty, missing: list[Missing]) -> Fragment:
    steps, factors = _worked(solved, duty)
    names = [case.name for case in solved.cases]
    deciding = {name for w in duty.windings.values() for name in (w.symmetrical_case, w.peak_case)}
    governing = [case for case in solved.cases if case.name in deciding]
    checks = apparatus_checks(solved.unit, data.rules, duty.windings, duty.terminals, duty.neutrals)
    return Fragment(
        quantities=(*duty_outcomes(duty, dict(zip(names, solved.factors, strict=True))), *factors),
        steps=(*closed_form_steps(data, governing), *steps),
        checks=(*checks, *completeness_checks(missing)),
        cases=duty.entries,
        missing=tuple(missing),
        open_points=_open_points(duty),
    )


def _worked(solved: Solved, duty: Duty) -> tuple[list[Step], list[Outcome]]:
    """Return the worked lines and peak factors of the case that governs each winding's peak."""
    number = {case.name: n for n, case in enumerate(solved.cases)}
    steps: list[Step] = []
    outcomes: list[Outcome] = []
    shown: set[str] = set()
    for name, winding in duty.windings.items():
        if winding.peak_case is None:
            continue
        at = number[winding.peak_case]
        case, facts = solved.cases[at], _facts(solved, at)
        if case.name not in shown:  # windings that one case governs share its lines
            steps += fault_steps(name, case, facts, delta=solved.unit.connections[case.at].letter == "D")
        steps += peak_step(name, facts)
        shown.add(case.name)
        outcomes += factor_outcomes(name, case, facts)
    return steps, outcomes


def _facts(solved: Solved, number: int) -> CaseFacts:
    unit, case = solved.unit, solved.cases[number]
    rms = np.abs(solved.currents("winding")[number]).max(axis=1)
    voltage = unit.voltage(case.at, case.tapping).to("kV") * unit.prefault_voltage(case.tapping)
    steady, decay = solved.solution, solved.decay
    return CaseFacts(
        factor=solved.factors[number],
        x_over_r=ratio_of(complex(solved.driving[number])),
        z1=complex(steady.z1[number]),
        z0=complex(steady.z0[number]),
        decay_z1=complex(decay.z1[number]),
        decay_z0=complex(decay.z0[number]),
        fault_voltage=voltage,
        largest={name: float(value) for name, value in zip(unit.windings, rms, strict=True)},
    )


def _largest(solved: Solved, kind: str, name: str) -> WindingDuty:
    index = list(solved.unit.windings).index(name)
    rms = np.abs(solved.currents(kind)[:, index]).max(axis=1)
    peak = rms * solved.factor
    exact = solved.exact[kind][:, index].max(axis=1) / 1000.0
    names = [case.name for case in solved.cases]

    def at_most(values: Floats) -> Largest:
        if np.isnan(values).any():
            return Largest(None, None)
        number = _first_of_largest(values)
        return Largest(float(values[number]), names[number])

    return WindingDuty(at_most(rms), at_most(peak), at_most(exact))


def _first_of_largest(values: Floats) -> int:
    """Return the first case that is the largest but for rounding, so that equal cases do not change places."""
    return int(np.flatnonzero(values >= values.max() * (1.0 - 1e-9))[0])


def _open_points(duty: Duty) -> tuple[OpenPoint, ...]:
    points = []
    for name, winding in duty.windings.items():
        exact, peak = winding.peak_exact.value, winding.peak
        if exact is None or peak is None or exact <= peak * (1.0 + 1e-9):
            continue
        template = f"winding {name}: the exact first peak {{exact}} is larger than the standard's {{peak}}"
        values = {"exact": Quantity(exact, "kA"), "peak": Quantity(peak, "kA")}
        points.append(OpenPoint(f"duty.{name}.peak_exact", template, values))
    return tuple(points)

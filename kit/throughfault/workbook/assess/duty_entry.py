"""The cases and the largest currents as they stand in the results file."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Protocol

import numpy as np

from throughfault.declare import Outcome
from throughfault.workbook.assess.fault_solution import Solved
from throughfault.workbook.assess.rules import PeakFactor, RuleSet, separate_pair

__all__ = ["Largest", "WindingDuty", "case_entry", "duty_outcomes"]

PHASES = ("a", "b", "c")
PEAK = r"\hat{\imath}"
NETWORK = "fault_currents"
THEORY = "CircuitTheory, phase-domain network"


@dataclass(frozen=True, slots=True)
class Largest:
    """The largest of a current over all cases, in kA, and the case that gives it; None where there is no case."""

    value: float | None
    case: str | None


@dataclass(frozen=True, slots=True)
class WindingDuty:
    """Largest currents of one winding; ``peak_exact`` from the full transient."""

    symmetrical_current: Largest
    peak_current: Largest
    peak_exact: Largest

    @property
    def symmetrical(self) -> float | None:
        """Largest symmetrical current, kA."""
        return self.symmetrical_current.value

    @property
    def symmetrical_case(self) -> str | None:
        """Its case."""
        return self.symmetrical_current.case

    @property
    def peak(self) -> float | None:
        """Largest first peak by the standard, kA."""
        return self.peak_current.value

    @property
    def peak_case(self) -> str | None:
        """Its case."""
        return self.peak_current.case


class Duties(Protocol):
    """Largest currents of windings, terminals and neutrals."""

    @property
    def windings(self) -> Mapping[str, WindingDuty]:
        """By winding."""

    @property
    def terminals(self) -> Mapping[str, WindingDuty]:
        """By winding brought out."""

    @property
    def neutrals(self) -> Mapping[str, WindingDuty]:
        """By winding with an earthed neutral."""


def _phasors(currents: Any, factor: float | None) -> dict[str, dict[str, float | None]]:
    return {
        PHASES[p]: {
            "rms": float(abs(value)),
            "angle": float(np.degrees(np.angle(value))) if value else 0.0,
            "peak": None if factor is None else float(abs(value)) * factor,
        }
        for p, value in enumerate(currents)
    }


def case_entry(solved: Solved, rules: RuleSet, number: int) -> dict[str, Any]:
    """Return one case as it stands in the results file."""
    case, unit, factor = solved.cases[number], solved.unit, solved.factors[number]
    phases = 1 if unit.group.single_phase else 3
    required = rules.required_by_standard(case.fault, two_winding=separate_pair(unit), phases=phases)
    winding, terminal = solved.currents("winding")[number], solved.currents("terminal")[number]
    neutral = solved.currents("neutral")[number]
    names = list(unit.windings)
    driving = solved.driving[number]
    return {
        "id": case.name,
        "tapping": case.tapping,
        "fault": case.fault,
        "at": case.at,
        "infeed": list(case.infeed),
        "variant": list(case.marks),
        "required_by_standard": required and case.fault != "OP" and not case.variant.minimum and bool(winding.any()),
        "driving_point": {"resistance": float(driving.real), "reactance": float(driving.imag), "unit": "ohm"},
        "peak_factor": {"value": factor.value, "how": factor.how, "source": factor.source},
        "currents": {n: _phasors(winding[i], factor.value) for i, n in enumerate(names)},
        "neutrals": {
            n: _phasors(neutral[i], factor.value)["a"]
            for i, n in enumerate(names)
            if unit.earthing.get(n, "isolated") != "isolated"
        },
        "terminals": {
            n: _phasors(terminal[i], factor.value) for i, n in enumerate(names) if not unit.windings[n].stabilising
        },
    }


REASON = "no case was run that loads it, or the standard gives no peak factor"


def _outcome(name: str, largest: Largest, symbol: str) -> Outcome:
    reason = None if largest.value is not None else REASON
    return Outcome(name, largest.value, "kA", symbol, NETWORK, THEORY, "derived", largest.case, reason)


def _peak_outcome(name: str, largest: Largest, factors: Mapping[str, PeakFactor]) -> Outcome:
    """Make a peak of what the standard's factor makes of it: it is known as well as the factor is."""
    if largest.value is None or largest.case is None:
        return _outcome(name, largest, PEAK)
    factor = factors[largest.case]
    cell = "peak_short_circuit_current"
    return Outcome(name, largest.value, "kA", PEAK, cell, factor.source, factor.provenance, largest.case)


def duty_outcomes(duty: Duties, factors: Mapping[str, PeakFactor]) -> tuple[Outcome, ...]:
    """Return every largest current as a result; `factors` gives the deciding peak factor of each case."""
    made = []
    for name, winding in duty.windings.items():
        made.append(_outcome(f"duty.{name}.symmetrical", winding.symmetrical_current, "I"))
        made.append(_peak_outcome(f"duty.{name}.peak", winding.peak_current, factors))
        made.append(_outcome(f"duty.{name}.peak_exact", winding.peak_exact, r"\hat{\imath}_e"))
    for name, terminal in duty.terminals.items():
        made.append(_outcome(f"duty.{name}.terminal_symmetrical", terminal.symmetrical_current, "I"))
        made.append(_peak_outcome(f"duty.{name}.terminal_peak", terminal.peak_current, factors))
    made += [_outcome(f"duty.neutral.{name}", n.symmetrical_current, "I_n") for name, n in duty.neutrals.items()]
    return tuple(made)

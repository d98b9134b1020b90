"""The cases and the largest currents as they stand in the results file."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Protocol

import numpy as np

from throughfault.declare import Outcome
from throughfault.workbook.assess.fault_solution import Solved
from throughfault.workbook.assess.rules import RuleSet

__all__ = ["Largest", "WindingDuty", "case_entry", "duty_outcomes"]

PHASES = ("a", "b", "c")
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
    separate = len(unit.windings) == 2 and not unit.group.auto
    required = rules.required_by_standard(case.fault, two_winding=separate, phases=unit.rating.phases)
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
        "required_by_standard": required and case.fault != "OP" and not case.variant.minimum,
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


def _outcome(name: str, largest: Largest, symbol: str, cell: str) -> Outcome:
    reason = None if largest.value is not None else "no case could be run for it, or the standard gives no peak factor"
    return Outcome(name, largest.value, "kA", symbol, cell, THEORY, "derived", largest.case, reason)


def duty_outcomes(duty: Duties) -> tuple[Outcome, ...]:
    """Return every largest current as a result."""
    made = []
    for name, winding in duty.windings.items():
        made.append(_outcome(f"duty.{name}.symmetrical", winding.symmetrical_current, "I", NETWORK))
        made.append(_outcome(f"duty.{name}.peak", winding.peak_current, r"\hat{\imath}", "peak_short_circuit_current"))
        made.append(_outcome(f"duty.{name}.peak_exact", winding.peak_exact, r"\hat{\imath}_e", NETWORK))
    for name, terminal in duty.terminals.items():
        made.append(_outcome(f"duty.{name}.terminal_symmetrical", terminal.symmetrical_current, "I", NETWORK))
        made.append(
            _outcome(f"duty.{name}.terminal_peak", terminal.peak_current, r"\hat{\imath}", "peak_short_circuit_current")
        )
    for name, neutral in duty.neutrals.items():
        made.append(_outcome(f"duty.neutral.{name}", neutral.symmetrical_current, "I_n", NETWORK))
    return tuple(made)

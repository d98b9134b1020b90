"""Lines of what the standard asks, collected with their steps, open points and missing inputs."""

from __future__ import annotations

from dataclasses import dataclass, field

from throughfault.declare import Missing, OpenPoint, Outcome, Step
from throughfault.workbook.assess.rules import Tabled
from throughfault.workbook.assess.thermal_inputs import outcome_of

__all__ = ["Asked", "Lines"]


@dataclass(frozen=True, slots=True)
class Asked:
    """One line of what the standard asks: a label, the result, and a remark."""

    label: str
    outcome: Outcome
    remark: str = ""


@dataclass
class Lines:
    """Collects while the parts are gone through."""

    asked: list[Asked] = field(default_factory=list)
    steps: list[Step] = field(default_factory=list)
    points: list[OpenPoint] = field(default_factory=list)
    missing: list[Missing] = field(default_factory=list)

    def step(self, step: Step, label: str, remark: str = "") -> Step:
        """Take in a worked step as a line."""
        self.steps.append(step)
        self.asked.append(Asked(label, Outcome.of_step(step), remark))
        return step

    def tabled(self, id_: str, tabled: Tabled, symbol: str, label: str) -> None:
        """Take in a value of the standard as a line."""
        remark = tabled.note if tabled.value is not None else ""  # without a value the note is the reason
        self.asked.append(Asked(label, outcome_of(id_, tabled, symbol), remark))

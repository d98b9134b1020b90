"""Findings: results, limits, checks, open points and the verdicts drawn from them."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import asdict, dataclass, field, replace
from typing import Any, Literal

from throughfault.declare.cell import Step
from throughfault.errors import DeclarationError
from throughfault.quantities import UNITS, Quantity
from throughfault.sources import PROVENANCES

__all__ = [
    "ABILITIES",
    "Check",
    "Fragment",
    "Limit",
    "Missing",
    "OpenPoint",
    "Outcome",
    "overall_verdict",
    "verdict_of",
]

Ability = Literal["thermal", "dynamic"]
Sense = Literal["at most", "at least"]
CheckVerdict = Literal["within", "exceeds", "not assessed"]
Verdict = Literal["withstands", "does not withstand", "not assessed"]
ABILITIES: tuple[Ability, ...] = ("thermal", "dynamic")


@dataclass(frozen=True, slots=True)
class Outcome:
    """A result as it stands in the results file; ``value`` is None when it is not assessed."""

    id: str
    value: float | None
    unit: str
    symbol: str
    cell: str
    source: str
    provenance: str
    governing_case: str | None = None
    reason: str | None = None

    def __post_init__(self) -> None:
        if self.unit not in UNITS or self.provenance not in PROVENANCES:
            raise DeclarationError(
                f"{self.id}: unit '{self.unit}' or provenance '{self.provenance}' is not in the lists."
            )
        if (self.value is None) != (self.reason is not None):
            raise DeclarationError(f"{self.id}: a result has a value, or the reason why it is not assessed.")

    def entry(self) -> dict[str, Any]:
        """Return the outcome as it stands in the results file, under its id."""
        made = asdict(self)
        del made["id"]
        if self.reason is None:
            del made["reason"]
        return made

    @classmethod
    def of_step(cls, step: Step, id: str | None = None, governing_case: str | None = None) -> Outcome:  # noqa: A002
        """Make an outcome of a step's result."""
        source = step.cell.source
        return cls(
            id or step.id, step.result.value, step.result.unit, step.cell.result.latex, step.cell.name,
            source.citation, source.provenance, governing_case,
        )  # fmt: skip


@dataclass(frozen=True, slots=True)
class Limit:
    """What is permitted, by whom, and how the kit came to know it.

    Attributes
    ----------
    confidence
        ``H``, ``M`` or ``L``; a recalled limit of low confidence never decides.
    instead_of
        The kit's own limit, when a signatory's replaces it.
    """

    value: float
    unit: str
    sense: Sense
    source: str
    provenance: str
    confidence: Literal["H", "M", "L"] = "H"
    instead_of: Limit | None = None

    def __post_init__(self) -> None:
        if not 0.0 < self.value < math.inf:
            got = f"{self.value:g} {self.unit} ({self.source})"
            raise DeclarationError(f"a limit must be above zero and finite, got {got}.")

    @property
    def decides(self) -> bool:
        """Whether the limit may carry a verdict."""
        return not (self.provenance == "recalled" and self.confidence == "L")

    def replaced(self, quantity: Quantity, source: str) -> Limit:
        """Return the signatory's figure, which remembers this one."""
        return replace(
            self, value=quantity.to(self.unit), source=source, provenance="signatory", confidence="H", instead_of=self
        )


@dataclass(frozen=True, slots=True)
class Check:
    """A result held against a limit."""

    id: str
    value: float | None
    unit: str
    limit: Limit | None
    ability: Ability
    governing_case: str | None = None
    reason: str | None = None

    @property
    def utilisation(self) -> float | None:
        """Value over limit (``at most``) or limit over value (``at least``)."""
        if self.value is None or self.limit is None:
            return None
        value = abs(self.value)
        if self.limit.sense == "at most":
            return value / self.limit.value
        return self.limit.value / value if value else None

    @property
    def verdict(self) -> CheckVerdict:
        """``within`` up to a utilisation of 1."""
        if self.value is None or self.limit is None or not self.limit.decides:
            return "not assessed"
        used = self.utilisation
        return "within" if used is not None and used <= 1.0 else "exceeds"

    @property
    def unconfirmed(self) -> bool:
        """Whether a recalled limit carries the verdict."""
        return self.verdict != "not assessed" and self.limit is not None and self.limit.provenance == "recalled"

    def entry(self) -> dict[str, Any]:
        """Return the check as it stands in the results file."""
        limit = self.limit
        made: dict[str, Any] = {
            "id": self.id,
            "value": self.value,
            "unit": self.unit,
            "limit": limit.value if limit else None,
            "sense": limit.sense if limit else None,
            "utilisation": self.utilisation,
            "verdict": self.verdict,
            "limit_source": limit.source if limit else None,
            "limit_provenance": limit.provenance if limit else None,
            "governing_case": self.governing_case,
            "ability": self.ability,
        }
        if limit and limit.instead_of:
            original = limit.instead_of
            made["kit_limit"] = {"value": original.value, "source": original.source, "provenance": original.provenance}
        if self.reason is not None:
            made["reason"] = self.reason
        return made


def _rounded(quantity: Quantity) -> str:
    return str(Quantity(float(f"{quantity.value:.6g}"), quantity.unit))


@dataclass(frozen=True, slots=True)
class OpenPoint:
    """Something a reviewer must settle or know; numbers stand in `values`, never loose in the text.

    Attributes
    ----------
    template
        A sentence with ``{name}`` for each value.
    values
        Quantities by name.
    clause
        Where it is asked, if anywhere.
    blocking
        Whether an approver may not sign while it is open.
    """

    id: str
    template: str
    values: Mapping[str, Quantity] = field(default_factory=dict)
    clause: str = ""
    blocking: bool = False

    @property
    def text(self) -> str:
        """The sentence with its numbers to six significant digits; `values` hold them in full."""
        return self.template.format(**{name: _rounded(q) for name, q in self.values.items()})

    def entry(self) -> dict[str, Any]:
        """Return the point as it stands in the results file."""
        values = {name: {"value": q.value, "unit": q.unit} for name, q in self.values.items()}
        return {**asdict(self), "values": values, "text": self.text}


@dataclass(frozen=True, slots=True)
class Missing:
    """A result that could not be assessed for want of inputs, with the keys that would supply it."""

    id: str
    keys: tuple[str, ...]
    reason: str


@dataclass(frozen=True, slots=True)
class Fragment:
    """What one part of a review found."""

    quantities: tuple[Outcome, ...] = ()
    steps: tuple[Step, ...] = ()
    checks: tuple[Check, ...] = ()
    cases: tuple[Mapping[str, Any], ...] = ()
    missing: tuple[Missing, ...] = ()
    open_points: tuple[OpenPoint, ...] = ()

    def entry(self) -> dict[str, Any]:
        """Return the fragment as display data for the results file."""
        return {
            "quantities": {o.id: o.entry() for o in self.quantities},
            "steps": [s.entry() for s in self.steps],
            "checks": [c.entry() for c in self.checks],
            "cases": [dict(c) for c in self.cases],
            "missing": [asdict(m) for m in self.missing],
            "open_points": [p.entry() for p in self.open_points],
        }


def verdict_of(checks: Iterable[Check]) -> Verdict:
    """Draw the verdict of one ability from its applicable checks."""
    verdicts = [check.verdict for check in checks]
    if "exceeds" in verdicts:
        return "does not withstand"
    if not verdicts or "not assessed" in verdicts:
        return "not assessed"
    return "withstands"


def overall_verdict(verdicts: Iterable[Verdict]) -> Verdict:
    """Return the worst of the verdicts by ability."""
    order: tuple[Verdict, ...] = ("does not withstand", "not assessed", "withstands")
    return min(verdicts, key=order.index)

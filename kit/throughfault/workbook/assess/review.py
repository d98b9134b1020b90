"""A review as a whole: each part computed once, when it is first asked for."""

from __future__ import annotations

from functools import cached_property

from throughfault.declare import Check, Fragment, Outcome, Step
from throughfault.workbook.assess.declared import assess_declared
from throughfault.workbook.assess.duty import Duty, assess_duty
from throughfault.workbook.assess.requirement import Requirement, assess_requirement
from throughfault.workbook.assess.rules import RuleSet, rules_for
from throughfault.workbook.assess.thermal import Thermal, assess_thermal
from throughfault.workbook.assess.verdict import Conclusion, conclude
from throughfault.workbook.inputs import Unit

__all__ = ["Review"]


class Review:
    """The findings on one unit file.

    Parameters
    ----------
    unit
        The unit file as read.
    """

    def __init__(self, unit: Unit) -> None:
        self.unit = unit

    @cached_property
    def rules(self) -> RuleSet:
        """The standard that decides."""
        return rules_for(self.unit)

    @property
    def standard(self) -> str:
        """The standard and edition that decide, as people write them."""
        separator = ":" if self.rules.title.startswith("IEC") else "-"
        return f"{self.rules.title}{separator}{self.rules.edition}"

    @cached_property
    def duty(self) -> Duty:
        """Fault currents."""
        return assess_duty(self.unit, self.rules)

    @cached_property
    def thermal(self) -> Thermal:
        """Winding temperatures."""
        return assess_thermal(self.unit, self.rules, self.duty)

    @cached_property
    def requirement(self) -> Requirement:
        """What the standard asks."""
        return assess_requirement(self.unit, self.rules, self.duty)

    @cached_property
    def declared(self) -> Fragment:
        """What the maker declares, compared."""
        found: dict[str, Outcome] = {o.id: o for f in self._found for o in f.quantities}
        return assess_declared(self.unit.declared, self.unit.raw.get("declared", {}), found)

    @property
    def _found(self) -> tuple[Fragment, ...]:
        return (self.requirement.fragment, self.duty.fragment, self.thermal.fragment)

    @cached_property
    def conclusion(self) -> Conclusion:
        """Verdicts."""
        return conclude(self.unit, self.checks)

    @property
    def fragments(self) -> tuple[Fragment, ...]:
        """What every part found, in the order of a record."""
        return (*self._found, self.declared, Fragment(open_points=self.unit.warnings), self.conclusion.fragment)

    @property
    def checks(self) -> tuple[Check, ...]:
        """Every check of the parts."""
        return tuple(check for fragment in self._found for check in fragment.checks)

    def steps(self, cell: str) -> tuple[Step, ...]:
        """Return the worked steps of one cell in this review."""
        return tuple(s for fragment in self._found for s in fragment.steps if s.cell.name == cell)

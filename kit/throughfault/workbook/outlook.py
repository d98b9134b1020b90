"""What can be said of a unit file before its review is run: for `check`."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path

from throughfault.declare import Missing, OpenPoint
from throughfault.workbook.assess.review import Review
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.inputs import Default, read_unit

__all__ = ["Outlook", "outlook"]


@dataclass(frozen=True)
class Outlook:
    """What a review of a unit file would start from.

    Attributes
    ----------
    standard
        The standard and edition that would decide.
    open_points
        What is unusual but possible, of the file and by what the standard asks.
    defaults
        Defaults that would be used.
    missing
        What cannot be assessed, with the keys that would supply it.
    """

    standard: str
    open_points: tuple[OpenPoint, ...]
    defaults: tuple[Default, ...]
    missing: tuple[Missing, ...]

    @property
    def lines(self) -> tuple[str, ...]:
        """The sentences to print."""
        return (
            *(f"open point: {point.text}" for point in self.open_points),
            *(f"default used: {default.path} = {default.value}" for default in self.defaults),
            *(_sentence(missing) for missing in self.missing),
        )

    @property
    def summary(self) -> str:
        """How much there is to settle, and by what it was looked at."""
        points = _counted(len(self.open_points), "open point")
        return f"{points}, {_counted(len(self.missing), 'result')} not assessed, by {self.standard}"


def outlook(path: Path) -> Outlook:
    """Read a unit file and look at it through the rules of its standard; no workbook is run.

    Raises
    ------
    UnitFileError
        With every fault of the file.
    InputError
        If the kit does not carry the standard, or a limit is of no use.
    """
    unit = read_unit(path)
    rules_for(unit, str(path))
    review = Review(unit)
    points = _once((*unit.warnings, *review.requirement.fragment.open_points))
    missing = dict.fromkeys(m for fragment in review.fragments for m in fragment.missing)
    return Outlook(review.standard, points, unit.defaults, tuple(missing))


def _once(points: Iterable[OpenPoint]) -> tuple[OpenPoint, ...]:
    return tuple({point.id: point for point in points}.values())


def _sentence(missing: Missing) -> str:
    needs = f"; needs {', '.join(missing.keys)}" if missing.keys else ""
    return f"not assessed: {missing.id}: {missing.reason}{needs}"


def _counted(count: int, noun: str) -> str:
    return f"{count} {noun}{'' if count == 1 else 's'}"

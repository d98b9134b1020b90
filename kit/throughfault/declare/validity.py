"""Where a formula holds: ranges of one argument and joint conditions of several.

A range belongs to the formula and its source; what is permitted is a limit, and no business of
this module.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

__all__ = ["Condition", "Range"]


@dataclass(frozen=True, slots=True)
class Range:
    """An interval of one argument, each end open, closed or absent."""

    argument: str
    above: float | None = None
    at_least: float | None = None
    below: float | None = None
    at_most: float | None = None

    def holds(self, arguments: Mapping[str, float]) -> bool:
        """Tell whether the argument lies inside."""
        value = arguments[self.argument]
        return (
            (self.above is None or value > self.above)
            and (self.at_least is None or value >= self.at_least)
            and (self.below is None or value < self.below)
            and (self.at_most is None or value <= self.at_most)
        )

    @property
    def text(self) -> str:
        """The interval in words, e.g. ``above 0 and at most 10``."""
        ends = (("above", self.above), ("at least", self.at_least), ("below", self.below), ("at most", self.at_most))
        return " and ".join(f"{word} {end:g}" for word, end in ends if end is not None)


@dataclass(frozen=True, slots=True)
class Condition:
    """A joint condition of several arguments, in words a reviewer recognises."""

    text: str
    condition: Callable[..., bool]

    def holds(self, arguments: Mapping[str, float]) -> bool:
        """Tell whether the condition is met."""
        return bool(self.condition(**arguments))

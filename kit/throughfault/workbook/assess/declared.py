"""What the maker declares, held against what the review finds, one by one."""

from __future__ import annotations

import re
from collections.abc import Mapping

from throughfault.declare import Fragment, Missing, OpenPoint, Outcome
from throughfault.quantities import Quantity

__all__ = ["assess_declared", "half_last_digit"]

_DIGITS = re.compile(r"[+-]?\d+(?:\.(\d*))?(?:[eE]([+-]?\d+))?")


def half_last_digit(text: str) -> float:
    """Return half a unit of the last digit as typed, in the unit of the text."""
    match = _DIGITS.match(text.strip())
    if match is None:
        return 0.0
    decimals = len(match[1] or "") - int(match[2] or 0)
    return 0.5 * 10.0**-decimals


def assess_declared(
    declared: Mapping[str, Quantity], typed: Mapping[str, str], found: Mapping[str, Outcome]
) -> Fragment:
    """Compare declared values with calculated ones.

    A value agrees when the calculated one rounds to it; every other difference is an open point.

    Parameters
    ----------
    declared, typed
        The maker's values by result id, as quantities and as they were typed.
    found
        The review's results by id.
    """
    points, missing = [], []
    for name, quantity in declared.items():
        outcome = found.get(name)
        if outcome is None or outcome.value is None:
            missing.append(Missing(f"declared.{name}", (f"declared.{name}",), "the review has no result of this id"))
            continue
        calculated = Quantity(outcome.value, outcome.unit)
        if abs(quantity.value - calculated.to(quantity.unit)) > half_last_digit(typed[name]):
            points.append(_difference(name, quantity, calculated))
    return Fragment(missing=tuple(missing), open_points=tuple(points))


def _difference(name: str, declared: Quantity, calculated: Quantity) -> OpenPoint:
    template = f"{name}: the maker declares {{declared}}, calculated {{calculated}}"
    values = {"declared": declared, "calculated": calculated}
    if declared.value != 0.0:
        template += " ({deviation} against the declared value)"
        values["deviation"] = Quantity(100.0 * (calculated.to(declared.unit) / declared.value - 1.0), "%")
    return OpenPoint(f"declared.{name}", template, values)

"""What the maker declares, held against what the review finds, one by one."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping

from throughfault.declare import Fragment, Missing, OpenPoint, Outcome
from throughfault.quantities import Quantity

__all__ = ["assess_declared", "half_last_digit"]

_DIGITS = re.compile(r"[+-]?\d*(?:\.(\d*))?(?:[eE]([+-]?\d+))?")


def half_last_digit(text: str | float) -> float:
    """Return half a unit of the last digit as typed, in the unit of the text."""
    match = _DIGITS.match(str(text).strip())
    fraction, exponent = match.groups() if match else (None, None)
    return 0.5 * 10.0 ** (int(exponent or 0) - len(fraction or ""))


def assess_declared(
    declared: Mapping[str, Quantity], typed: Mapping[str, str | float], found: Mapping[str, Outcome]
) -> Fragment:
    """Compare declared values with calculated ones.

    Each declared value becomes a result ``declared.<id>`` in the unit of the calculated one, with its deviation
    beside it. A value agrees when the calculated one rounds to it; every other difference is an open point.

    Parameters
    ----------
    declared, typed
        The maker's values by result id, as quantities and as they were typed.
    found
        The review's results by id.
    """
    outcomes: list[Outcome] = []
    points, missing = [], []
    for name, quantity in declared.items():
        outcome = found.get(name)
        if outcome is None or outcome.value is None:
            missing.append(_missing(name, "the review has no result of this id"))
            continue
        calculated = Quantity(outcome.value, outcome.unit)
        if calculated.kind != quantity.kind:
            missing.append(_missing(name, f"the review's result is in {calculated.unit}, which this value is not"))
            continue
        deviation = _deviation(quantity, calculated)
        outcomes += _outcomes(name, quantity.to(outcome.unit), outcome.unit, deviation)
        if abs(quantity.value - calculated.to(quantity.unit)) > half_last_digit(typed[name]):
            points.append(_difference(name, quantity, calculated, deviation))
    return Fragment(quantities=tuple(outcomes), missing=tuple(missing), open_points=tuple(points))


def _missing(name: str, reason: str) -> Missing:
    return Missing(f"declared.{name}", (f"declared.{name}",), reason)


def _deviation(declared: Quantity, calculated: Quantity) -> Quantity | None:
    """Return by how much the calculated value is above the declared one; None where the latter is zero."""
    if declared.value == 0.0:
        return None
    return Quantity(100.0 * (calculated.to(declared.unit) / declared.value - 1.0), "%")


def _outcomes(name: str, value: float, unit: str, deviation: Quantity | None) -> Iterator[Outcome]:
    yield Outcome(f"declared.{name}", value, unit, "", "", "unit file, declared", "maker")
    if deviation is not None:
        source = "calculated against declared value"
        yield Outcome(f"declared.{name}.deviation", deviation.value, deviation.unit, "", "", source, "derived")


def _difference(name: str, declared: Quantity, calculated: Quantity, deviation: Quantity | None) -> OpenPoint:
    template = f"{name}: the maker declares {{declared}}, calculated {{calculated}}"
    values = {"declared": declared, "calculated": calculated}
    if deviation is not None:
        template += " ({deviation} against the declared value)"
        values["deviation"] = deviation
    return OpenPoint(f"declared.{name}", template, values)

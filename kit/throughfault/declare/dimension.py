"""Whether a printed formula is an equation between quantities.

Many sources write a formula for numbers in units of their own, with a conversion such as 1000 inside it. Such a
line is true of the numbers and false of the quantities, so that units must not be printed into it.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from itertools import product
from typing import Any

import pint

from throughfault.declare.formula import (
    BINARY_FUNCTION,
    COMPARE_FUNCTION,
    FUNCTIONS,
    Binary,
    Call,
    Choice,
    Formula,
    Negative,
    Node,
)
from throughfault.quantities import as_pint

__all__ = ["holds_as_quantities"]

AGREEMENT = 1e-9  # relative
#: roots of primes: no two arguments are equal and no ratio of them is a power of ten, which could hide a conversion
_NUMBERS = tuple(math.sqrt(prime) for prime in (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37))
POINTS = 4


def _absolute(value: Any) -> Any:
    """Count a temperature from absolute zero: twice 20 degC is no 40 degC."""
    offset = isinstance(value, pint.Quantity) and value.units == as_pint(0.0, "degC").units
    return value.to_base_units() if offset else value


def _root_of_squares(*parts: Any) -> Any:
    return sum((part**2 for part in parts[1:]), parts[0] ** 2) ** 0.5


_ROOTS = {"sqrt": lambda value: value**0.5, "hypot": _root_of_squares}


def _evaluate(node: Node, values: Mapping[str, Any]) -> Any:
    """Evaluate a tree with quantities; temperatures keep their offset in sums and differences only."""
    match node:
        case Negative(node=inner):
            return -_absolute(_evaluate(inner, values))
        case Binary(sign=sign, left=left, right=right):
            sides = (_evaluate(left, values), _evaluate(right, values))
            return BINARY_FUNCTION[sign](*(sides if sign in ("+", "-") else map(_absolute, sides)))
        case Call(function=function, arguments=arguments):
            return (FUNCTIONS | _ROOTS)[function](*(_absolute(_evaluate(a, values)) for a in arguments))
        case Choice(test=test, then=then, otherwise=otherwise):
            applies = COMPARE_FUNCTION[test.sign](_evaluate(test.left, values), _evaluate(test.right, values))
            return _evaluate(then if applies else otherwise, values)
    return node.evaluate(values)


def _equal(found: Any, value: float, unit: str) -> bool:
    quantity = found if isinstance(found, pint.Quantity) else as_pint(found, "1")
    return math.isclose(quantity.m_as(as_pint(value, unit).units), value, rel_tol=AGREEMENT)


def _holds_at(formula: Formula, numbers: Mapping[str, float], units: Mapping[str, str], unit: str) -> bool | None:
    """Compare every line at one point; None where the formula has no real value there."""
    try:
        result, terms = formula.evaluate(numbers)
        plain = {**numbers, **terms}
        if not all(math.isfinite(value) for value in (result, *terms.values())):
            return None
    except (ArithmeticError, ValueError, TypeError):
        return None
    values = {name: as_pint(value, units[name]) for name, value in plain.items()}
    try:
        return all(
            _equal(_evaluate(line.node, values), plain[line.term], units[line.term])
            if line.term is not None
            else _equal(_evaluate(line.node, values), result, unit)
            for line in formula.lines
        )
    except (pint.PintError, ValueError):  # the latter where a quantity is compared with a plain number
        return False


def holds_as_quantities(formula: Formula, arguments: tuple[str, ...], units: Mapping[str, str], unit: str) -> bool:
    """Tell whether every printed line is true with the units of its symbols written into it.

    Parameters
    ----------
    arguments
        Names of the arguments.
    units
        Units of arguments and intermediate terms.
    unit
        Of the result.
    """
    found = []
    for shift, names in product(
        range(POINTS), (arguments, arguments[::-1])
    ):  # rising and falling: one gives real roots
        numbers = {name: _NUMBERS[(index + shift) % len(_NUMBERS)] for index, name in enumerate(names)}
        found.append(_holds_at(formula, numbers, units, unit))
    return any(found) and False not in found

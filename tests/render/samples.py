"""Cells that exercise every node a formula may hold; not registered, so that the library stays clean."""

from math import atan, cos, exp, hypot, log, log10, pi, sin, sqrt, tan
from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Cell, Condition, Range, Symbol
from throughfault.declare.cell import _symbols
from throughfault.declare.formula import read_formula
from throughfault.sources import Source

PHI = Symbol("phi", r"\varphi", "rad", "angle of the impedance")
A = Symbol("first", "a", "1", "first number")
B = Symbol("second", "b", "1", "second number")
R = Symbol("ratio", "X/R", "1", "reactance over resistance")
Y = Symbol("outcome", "y", "1", "outcome")
L = Symbol("length", r"\ell_{\mathrm{eq}}", "mm", "equivalent length")


def made(function, terms=None, valid_for=()):
    """Declare a cell without entering it in the library."""
    arguments, result = _symbols(function)
    source = Source("CircuitTheory", "sample", "derived")
    return Cell(
        function, "Sample", source, arguments, terms or {}, result, valid_for, ("none",), read_formula(function)
    )


def average(
    initial_temperature: Annotated[float, nom.initial_temperature],
    current_density: Annotated[float, nom.current_density],
    duration: Annotated[float, nom.duration],
) -> Annotated[float, nom.average_temperature]:
    """Heat stays in the conductor."""
    theta_0, J, t = initial_temperature, current_density, duration
    return theta_0 + 2 * (theta_0 + 235) / (106000 / (J**2 * t) - 1)


def factor(ratio: Annotated[float, R]) -> Annotated[float, nom.peak_factor]:
    """Close to the exact maximum."""
    phi = atan(ratio)
    return (1 + exp(-(phi + pi / 2) / ratio) * sin(phi)) * sqrt(2)


def brackets(first: Annotated[float, A], second: Annotated[float, B]) -> Annotated[float, Y]:
    """Every place a bracket may be due."""
    a, b = first, second
    return -(a - b) - (a + b) * -a - a * (b * a) + (a / b) ** 2 + (a**b) ** 2 - (-a) / (a - (b - 1)) + 2.5e-7**a - -b


def functions(first: Annotated[float, A], second: Annotated[float, B]) -> Annotated[float, Y]:
    """Every function."""
    a, b = first, second
    return (
        hypot(a, b + 1)
        + abs(a - b) * min(a, b)
        - max(a, 2 * b)
        + log(a) * log10(b)
        + cos(a) ** 2
        + tan(b) / exp(a) ** 2
    )


def branches(
    first: Annotated[float, A], second: Annotated[float, B], length: Annotated[float, L]
) -> Annotated[float, Y]:
    """Two choices, one inside the other's bracket."""
    a, b = first, second
    return 2 * (a if a < b else b * 3 if a >= 2 * b else a - b) + (1 if length <= 100 else 0.001)


def ratios(ratio: Annotated[float, R], length: Annotated[float, L]) -> Annotated[float, Y]:
    """A letter built of letters, under a power and a product."""
    return 2 * ratio**2 * length - length / ratio * ratio


def equal(first: Annotated[float, A], second: Annotated[float, B]) -> Annotated[float, Y]:
    """Greater or not."""
    return first if first > second else second  # noqa: FURB136 - a choice is wanted


def signs(first: Annotated[float, A], second: Annotated[float, B]) -> Annotated[float, Y]:
    """Products that begin with a sign."""
    a, b = first, second
    return -2 * a / b - (-a) * b


AVERAGE = made(
    average,
    valid_for=(
        Range("duration", above=0.0, at_most=10.0),
        Condition("J^2 t below 106000", lambda current_density, duration, **_: current_density**2 * duration < 106000),
    ),
)
FACTOR = made(factor, {"phi": PHI})
SAMPLES = {
    c.name: c
    for c in (AVERAGE, FACTOR, made(brackets), made(functions), made(branches), made(ratios), made(equal), made(signs))
}

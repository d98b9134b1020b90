"""How a calculation is declared once: symbols, ranges, cells, steps, limits and findings."""

from throughfault.declare.cell import Algorithm, Cell, Equation, Step, algorithm, cell, registry
from throughfault.declare.finding import (
    ABILITIES,
    Check,
    Fragment,
    Limit,
    Missing,
    OpenPoint,
    Outcome,
    overall_verdict,
    verdict_of,
)
from throughfault.declare.symbol import Symbol
from throughfault.declare.validity import Condition, Range

__all__ = [
    "ABILITIES",
    "Algorithm",
    "Cell",
    "Check",
    "Condition",
    "Equation",
    "Fragment",
    "Limit",
    "Missing",
    "OpenPoint",
    "Outcome",
    "Range",
    "Step",
    "Symbol",
    "algorithm",
    "cell",
    "overall_verdict",
    "registry",
    "verdict_of",
]

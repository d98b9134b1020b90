"""How a calculation is declared once: symbols, ranges, cells, steps, limits and findings."""

from throughfault.declare.algorithm import Algorithm, Equation, algorithm
from throughfault.declare.cell import Cell, Step, cell
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
from throughfault.declare.registry import registry
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

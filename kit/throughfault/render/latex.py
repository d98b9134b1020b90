"""Formula trees as LaTeX: once with symbols, once with the numbers and units of a run.

The author's order is kept, every product sign is written, brackets follow from precedence alone.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from typing import Any

from throughfault.declare import Cell, Step, Symbol
from throughfault.declare.formula import CONSTANTS, Binary, Call, Choice, Compare, Name, Negative, Node, Number
from throughfault.quantities import Quantity
from throughfault.render.numbers import number_latex, unit_latex

__all__ = ["formula_lines", "worked_lines", "worked_units"]

# Precedence: what binds tighter is larger. A quantity with a unit and a fraction may stand in a
# product without brackets, yet not under a power.
CASES, SUM, PRODUCT, POWER, ATOM = range(5)
_ATOMIC = re.compile(r"\\?[A-Za-z]+(?:_(?:[A-Za-z0-9]|\{[^{}]*(?:\{[^{}]*\}[^{}]*)*\}))?")
_COMPARE = {"<": "<", "<=": r"\le", ">": ">", ">=": r"\ge"}
_OPPOSITE = {"<": ">=", "<=": ">", ">": "<=", ">=": "<"}
_NAMED = {"sin": r"\sin", "cos": r"\cos", "tan": r"\tan", "atan": r"\arctan", "log": r"\ln",
          "log10": r"\log_{10}", "min": r"\min", "max": r"\max"}  # fmt: skip


@dataclass(frozen=True, slots=True)
class _Printed:
    text: str
    binds: int

    def within(self, least: int) -> str:
        """Return the text, in brackets where it binds less than `least`."""
        return self.text if self.binds >= least else rf"\left({self.text}\right)"


def _number(text: str) -> _Printed:
    """Print a number as the author wrote it; a power of ten is spelt out."""
    digits, _, power = text.lower().partition("e")
    if not power:
        return _Printed(digits.removesuffix(".0"), ATOM)
    return _Printed(rf"{digits.removesuffix('.0')} \times 10^{{{int(power)}}}", POWER)


def _symbol(symbol: Symbol) -> _Printed:
    # A letter built of others, such as X/R, is bracketed wherever it would bind to its neighbour.
    binds = ATOM if _ATOMIC.fullmatch(symbol.latex) else PRODUCT if "/" in symbol.latex else POWER
    return _Printed(symbol.latex, binds)


def _quantity(quantity: Quantity, *, bare: bool = False) -> _Printed:
    text, unit = number_latex(quantity.value), "" if bare else unit_latex(quantity.unit)
    if text.startswith("-"):
        return _Printed(text + unit, SUM)
    return _Printed(text + unit, ATOM if not unit and "times" not in text else POWER)


@dataclass(slots=True)
class _Printer:
    """Prints one tree; `leaf` prints a term.

    With `holds`, a choice shows only the branch that was taken, and its condition is kept in `taken`.
    """

    leaf: Callable[[str], _Printed]
    holds: Callable[[Compare], bool] | None = None
    taken: list[str] = field(default_factory=list)

    def node(self, node: Node) -> _Printed:
        match node:
            case Number(text=text):
                return _number(text)
            case Name(term=term):
                return _Printed(rf"\{term}", ATOM) if term in CONSTANTS else self.leaf(term)
            case Negative(node=inner):
                return _Printed(f"-{self.node(inner).within(PRODUCT)}", SUM)
            case Binary():
                return self.binary(node)
            case Call(function=function, arguments=arguments):
                return self.call(function, [self.node(a).text for a in arguments], node)
            case Choice():
                return self.choice(node)

    def binary(self, node: Binary) -> _Printed:
        left, right = self.node(node.left), self.node(node.right)
        match node.sign:
            case "/":
                return _Printed(rf"\frac{{{left.text}}}{{{right.text}}}", POWER)
            case "**":
                return _Printed(f"{left.within(ATOM)}^{{{right.text}}}", POWER)
            case "*" if isinstance(node.left, Negative):  # a leading sign needs no bracket of its own
                return _Printed(rf"{left.text} \cdot {right.within(POWER)}", SUM)
            case "*":
                return _Printed(rf"{left.within(PRODUCT)} \cdot {right.within(POWER)}", PRODUCT)
        return _Printed(f"{left.within(SUM)} {node.sign} {right.within(PRODUCT)}", SUM)

    def call(self, function: str, arguments: list[str], node: Call) -> _Printed:
        match function:
            case "sqrt":
                return _Printed(rf"\sqrt{{{arguments[0]}}}", ATOM)
            case "exp":
                return _Printed(rf"\mathrm{{e}}^{{{arguments[0]}}}", POWER)  # upright: a letter e may be a symbol
            case "abs":
                return _Printed(rf"\left|{arguments[0]}\right|", ATOM)
            case "hypot":
                squares = [f"{self.node(a).within(ATOM)}^{{2}}" for a in node.arguments]
                return _Printed(rf"\sqrt{{{' + '.join(squares)}}}", ATOM)
        return _Printed(rf"{_NAMED[function]}\left({', '.join(arguments)}\right)", POWER)

    def compare(self, test: Compare, sign: str) -> str:
        return f"{self.node(test.left).within(SUM)} {_COMPARE[sign]} {self.node(test.right).within(SUM)}"

    def choice(self, node: Choice) -> _Printed:
        if self.holds is None:
            rows = r" \\ ".join(self.rows(node))
            return _Printed(rf"\begin{{cases}} {rows} \end{{cases}}", CASES)
        applies = self.holds(node.test)
        self.taken.append(self.compare(node.test, node.test.sign if applies else _OPPOSITE[node.test.sign]))
        return self.node(node.then if applies else node.otherwise)

    def rows(self, node: Node) -> list[str]:
        if not isinstance(node, Choice):
            return [rf"{self.node(node).text} & \text{{otherwise}}"]
        first = rf"{self.node(node.then).text} & \text{{if }} {self.compare(node.test, node.test.sign)}"
        return [first, *self.rows(node.otherwise)]


def formula_lines(cell: Cell[Any]) -> list[str]:
    """Print the formula of a cell with its symbols, one LaTeX line for each term and the result."""
    printer = _Printer(lambda term: _symbol(cell.symbol(term)))
    return [f"{_left(cell, line.term)} = {printer.node(line.node).text}" for line in cell.formula.lines]


def worked_lines(step: Step) -> list[str]:
    """Print the same formula with the numbers of the run, each line closed by its result with its unit.

    Units stand in the formula where it is true of quantities; otherwise the numbers stand alone, and `worked_units`
    tells their units. Where the formula has a choice, the branch that applied stands with the comparison that chose it.
    """
    quantities = step.arguments | step.terms
    bare = not step.cell.holds_as_quantities
    values = {term: quantity.value for term, quantity in quantities.items()}
    lines = []
    for line in step.cell.formula.lines:
        printer = _Printer(lambda term: _quantity(quantities[term], bare=bare), lambda test: test.holds(values))
        worked = printer.node(line.node).text
        result = _quantity(step.result if line.term is None else step.terms[line.term]).text
        taken = r" \text{ and } ".join(printer.taken)
        because = rf" \quad \text{{as }} {taken}" if taken else ""
        lines.append(f"{_left(step.cell, line.term)} = {worked} = {result}{because}")
    return lines


def _terms(node: object) -> Iterator[str]:
    """Yield the terms of a tree in the order of the page."""
    if isinstance(node, Name):
        yield node.term
    for slot in getattr(node, "__slots__", ()):
        child = getattr(node, slot)
        for part in child if isinstance(child, tuple) else (child,):
            yield from _terms(part)


def worked_units(step: Step) -> list[tuple[str, ...]]:
    """Return for each worked line the units of the numbers that stand in it without, in the order of the page."""
    cell = step.cell
    if cell.holds_as_quantities:
        return [() for _ in cell.formula.lines]
    used = ([cell.symbol(t).unit for t in _terms(line.node) if t not in CONSTANTS] for line in cell.formula.lines)
    return [tuple(dict.fromkeys(unit for unit in units if unit != "1")) for units in used]


def _left(cell: Cell[Any], term: str | None) -> str:
    return (cell.result if term is None else cell.terms[term]).latex

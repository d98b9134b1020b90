"""The printed formula, taken from the source text of the function that computes.

A formula function may hold: one line that rebinds its arguments to short letters (not printed),
assignments of intermediate terms, and one return. Anything else is refused when the function is
declared, so that what is printed is what is computed.
"""

from __future__ import annotations

import ast
import inspect
import math
import operator
import textwrap
from collections.abc import Callable, Mapping
from dataclasses import dataclass

from throughfault.errors import DeclarationError

__all__ = [
    "Binary",
    "Call",
    "Choice",
    "Compare",
    "Formula",
    "Line",
    "Name",
    "Negative",
    "Node",
    "Number",
    "read_formula",
]

FUNCTIONS: dict[str, Callable[..., float]] = {
    "sqrt": math.sqrt, "exp": math.exp, "log": math.log, "log10": math.log10, "sin": math.sin, "cos": math.cos,
    "tan": math.tan, "atan": math.atan, "hypot": math.hypot, "abs": abs, "min": min, "max": max,
}  # fmt: skip
CONSTANTS = {"pi": math.pi}
BINARY: dict[type[ast.operator], tuple[str, Callable[[float, float], float]]] = {
    ast.Add: ("+", operator.add),
    ast.Sub: ("-", operator.sub),
    ast.Mult: ("*", operator.mul),
    ast.Div: ("/", operator.truediv),
    ast.Pow: ("**", operator.pow),
}
COMPARE: dict[type[ast.cmpop], tuple[str, Callable[[float, float], bool]]] = {
    ast.Lt: ("<", operator.lt),
    ast.LtE: ("<=", operator.le),
    ast.Gt: (">", operator.gt),
    ast.GtE: (">=", operator.ge),
}
BINARY_FUNCTION = dict(BINARY.values())
COMPARE_FUNCTION = dict(COMPARE.values())


@dataclass(frozen=True, slots=True)
class Number:
    """A number as written in the source."""

    text: str

    def evaluate(self, _: Mapping[str, float]) -> float:
        """Return the number."""
        return float(self.text)


@dataclass(frozen=True, slots=True)
class Name:
    """An argument, an intermediate term, or a constant of mathematics."""

    term: str

    def evaluate(self, values: Mapping[str, float]) -> float:
        """Look the name up."""
        return CONSTANTS[self.term] if self.term in CONSTANTS else values[self.term]


@dataclass(frozen=True, slots=True)
class Negative:
    """The opposite of a node."""

    node: Node

    def evaluate(self, values: Mapping[str, float]) -> float:
        """Return the opposite."""
        return -self.node.evaluate(values)


@dataclass(frozen=True, slots=True)
class Binary:
    """Sum, difference, product, quotient or power."""

    sign: str
    left: Node
    right: Node

    def evaluate(self, values: Mapping[str, float]) -> float:
        """Apply the operation."""
        return BINARY_FUNCTION[self.sign](self.left.evaluate(values), self.right.evaluate(values))


@dataclass(frozen=True, slots=True)
class Call:
    """A function of mathematics."""

    function: str
    arguments: tuple[Node, ...]

    def evaluate(self, values: Mapping[str, float]) -> float:
        """Call the function."""
        return FUNCTIONS[self.function](*(a.evaluate(values) for a in self.arguments))


@dataclass(frozen=True, slots=True)
class Compare:
    """A comparison of two nodes."""

    sign: str
    left: Node
    right: Node

    def holds(self, values: Mapping[str, float]) -> bool:
        """Tell whether it is true."""
        return COMPARE_FUNCTION[self.sign](self.left.evaluate(values), self.right.evaluate(values))


@dataclass(frozen=True, slots=True)
class Choice:
    """One node if a comparison is true, else another."""

    test: Compare
    then: Node
    otherwise: Node

    def evaluate(self, values: Mapping[str, float]) -> float:
        """Evaluate the branch that applies."""
        return (self.then if self.test.holds(values) else self.otherwise).evaluate(values)


Node = Number | Name | Negative | Binary | Call | Choice


@dataclass(frozen=True, slots=True)
class Line:
    """One printed line: a term (``None`` for the result) and its expression."""

    term: str | None
    node: Node


@dataclass(frozen=True, slots=True)
class Formula:
    """The lines of a formula, in the author's order."""

    lines: tuple[Line, ...]

    def evaluate(self, arguments: Mapping[str, float]) -> tuple[float, dict[str, float]]:
        """Return the result and the intermediate terms for the given arguments."""
        values = dict(arguments)
        terms: dict[str, float] = {}
        for line in self.lines[:-1]:
            assert line.term is not None  # noqa: S101 - by construction only the last line has no term
            values[line.term] = terms[line.term] = line.node.evaluate(values)
        return self.lines[-1].node.evaluate(values), terms


class _Reader:
    """Turns the syntax tree of one function into a `Formula`."""

    def __init__(self, function: Callable[..., object]) -> None:
        self.name = function.__name__
        self.arguments = tuple(inspect.signature(function).parameters)
        self.letters: dict[str, str] = {name: name for name in self.arguments}

    def refuse(self, node: ast.AST) -> DeclarationError:
        return DeclarationError(f"{self.name}: '{ast.unparse(node)}' cannot be printed as a formula.")

    def node(self, node: ast.expr) -> Node:
        match node:
            case ast.Constant(value=int() | float()) if not isinstance(node.value, bool):
                return Number(ast.unparse(node))
            case ast.Name(id=letter) if letter in self.letters or letter in CONSTANTS:
                return Name(self.letters.get(letter, letter))
            case ast.UnaryOp(op=ast.USub(), operand=operand):
                return Negative(self.node(operand))
            case ast.BinOp(left=left, op=op, right=right) if type(op) in BINARY:
                return Binary(BINARY[type(op)][0], self.node(left), self.node(right))
            case ast.Call(func=ast.Name(id=function), args=args, keywords=[]) if function in FUNCTIONS:
                return Call(function, tuple(self.node(a) for a in args))
            case ast.IfExp(test=ast.Compare(left=left, ops=[op], comparators=[right]), body=body, orelse=orelse) if (
                type(op) in COMPARE
            ):
                test = Compare(COMPARE[type(op)][0], self.node(left), self.node(right))
                return Choice(test, self.node(body), self.node(orelse))
        raise self.refuse(node)

    def rebinds(self, statement: ast.stmt) -> bool:
        """Take in a line that only renames arguments; tell whether it was one."""
        if not isinstance(statement, ast.Assign) or len(statement.targets) != 1:
            return False
        target, value = statement.targets[0], statement.value
        letters = target.elts if isinstance(target, ast.Tuple) else [target]
        terms = value.elts if isinstance(value, ast.Tuple) else [value]
        if len(letters) != len(terms):
            return False
        pairs = [
            (a.id, b.id)
            for a, b in zip(letters, terms, strict=True)
            if isinstance(a, ast.Name) and isinstance(b, ast.Name)
        ]
        if len(pairs) != len(letters) or any(term not in self.arguments for _, term in pairs):
            return False
        self.letters.update({letter: self.letters[term] for letter, term in pairs})
        return True

    def line(self, statement: ast.stmt) -> Line:
        match statement:
            case ast.Assign(targets=[ast.Name(id=term)], value=value):
                line = Line(term, self.node(value))
                self.letters[term] = term
                return line
            case ast.Return(value=ast.expr() as value):
                return Line(None, self.node(value))
        raise self.refuse(statement)

    def read(self, body: list[ast.stmt]) -> Formula:
        if body and isinstance(body[0], ast.Expr):  # the docstring
            body = body[1:]
        if body and self.rebinds(body[0]):
            body = body[1:]
        lines = tuple(self.line(statement) for statement in body)
        if not lines or lines[-1].term is not None or any(line.term is None for line in lines[:-1]):
            raise DeclarationError(f"{self.name}: a formula ends with its one return.")
        return Formula(lines)


def read_formula(function: Callable[..., object]) -> Formula:
    """Read the formula that a function computes from its own source text.

    Raises
    ------
    DeclarationError
        If the function holds anything but rebinding, assignments of terms and one return.
    """
    tree = ast.parse(textwrap.dedent(inspect.getsource(function)))
    definition = tree.body[0]
    if not isinstance(definition, ast.FunctionDef):
        raise DeclarationError(f"{function.__name__}: a formula is a plain function.")
    return _Reader(function).read(definition.body)

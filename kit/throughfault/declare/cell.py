"""Cells: published formulas, declared once.

The decorator `cell` wraps a plain function of floats with its symbols, source, range of validity
and printed formula. Called with floats a cell *is* the function; `Cell.step` takes quantities and
gives a `Step`, plain data that notebook, record, command line and tests share.
"""

from __future__ import annotations

import inspect
import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from typing import Annotated, Any, Generic, ParamSpec, get_args, get_origin, get_type_hints

from throughfault.declare.dimension import holds_as_quantities
from throughfault.declare.formula import Formula, Name, Node, read_formula
from throughfault.declare.registry import register
from throughfault.declare.symbol import Symbol
from throughfault.declare.validity import Condition, Range
from throughfault.errors import DeclarationError, InputError, OutsideValidity, did_you_mean
from throughfault.quantities import Quantity
from throughfault.sources import Source

__all__ = ["Cell", "Step", "cell"]

P = ParamSpec("P")
AGREEMENT = 1e-12  # relative; the printed tree and the function do the same operations


@dataclass(frozen=True, slots=True)
class Step:
    """One evaluation of a cell with the numbers of this run.

    Attributes
    ----------
    id
        Identifier on the record.
    cell
        The cell evaluated.
    arguments, terms, result
        Quantities in the cell's own units.
    """

    id: str
    cell: Cell[Any]
    arguments: dict[str, Quantity]
    terms: dict[str, Quantity]
    result: Quantity

    def entry(self) -> dict[str, Any]:
        """Return the step as it stands in the results file."""
        arguments = {name: {"value": q.value, "unit": q.unit} for name, q in self.arguments.items()}
        return {
            "id": self.id,
            "cell": self.cell.name,
            "arguments": arguments,
            "result": self.result.value,
            "unit": self.result.unit,
            "source": self.cell.source.citation,
        }


@dataclass(frozen=True)
class Cell(Generic[P]):
    """A published formula: one plain function, its symbols, source, range and printed form."""

    function: Callable[P, float]
    title: str
    source: Source
    arguments: dict[str, Symbol]
    terms: dict[str, Symbol]
    result: Symbol
    valid_for: tuple[Range | Condition, ...]
    checks: tuple[str, ...]
    formula: Formula = field(repr=False)

    @property
    def name(self) -> str:
        """Name of the cell: the quantity it gives, as a noun."""
        return self.function.__name__

    @property
    def documentation(self) -> str:
        """What is assumed."""
        return inspect.getdoc(self.function) or ""

    def __call__(self, *args: P.args, **kwargs: P.kwargs) -> float:
        """Be the plain function: floats in the declared units in, a float out."""
        return self.function(*args, **kwargs)

    @cached_property
    def holds_as_quantities(self) -> bool:
        """Whether the printed formula is true of quantities, or only of numbers in the units declared."""
        units = {name: symbol.unit for name, symbol in (self.arguments | self.terms).items()}
        return holds_as_quantities(self.formula, tuple(self.arguments), units, self.result.unit)

    def symbol(self, term: str) -> Symbol:
        """Return the symbol of an argument or intermediate term."""
        return self.arguments[term] if term in self.arguments else self.terms[term]

    def outside(self, values: Mapping[str, float]) -> str | None:
        """Return why the arguments lie outside the range of validity, or None."""
        for validity in self.valid_for:
            if validity.holds(values):
                continue
            if isinstance(validity, Condition):
                return f"{self.name}: requires {validity.text} ({self.source.citation})."
            unit = self.arguments[validity.argument].unit
            got = Quantity(values[validity.argument], unit)
            return (
                f"{self.name}: '{validity.argument}' must be {validity.text} {unit} "
                f"({self.source.citation}), got {got}."
            )
        return None

    def _values(self, quantities: Mapping[str, Quantity]) -> dict[str, float]:
        faults = [
            f"{self.name}: unknown argument '{name}'{did_you_mean(name, self.arguments)}."
            for name in quantities
            if name not in self.arguments
        ]
        for name, symbol in self.arguments.items():
            given = quantities.get(name)
            wanted = f"{self.name}: '{name}' must be given in {symbol.unit} or a unit of its kind"
            if given is None:
                faults.append(f"{wanted}, it is missing.")
            elif given.kind != Quantity(0.0, symbol.unit).kind:
                faults.append(f"{wanted}, got {given}.")
        if faults:
            raise InputError(faults)
        return {name: quantities[name].to(symbol.unit) for name, symbol in self.arguments.items()}

    def _computed(self, values: Mapping[str, float]) -> tuple[float, float, dict[str, float]]:
        """Return what the function gives, what the printed formula gives, and its terms."""
        try:
            result = float(self.function(**values))  # type: ignore[arg-type, call-arg]
            printed, terms = self.formula.evaluate(values)
        except (OverflowError, ZeroDivisionError, ValueError) as error:
            raise self._beyond(values) from error
        if not math.isfinite(result):
            raise self._beyond(values)
        return result, printed, terms

    def _beyond(self, values: Mapping[str, float]) -> OutsideValidity:
        got = ", ".join(f"'{name}' {Quantity(value, self.arguments[name].unit)}" for name, value in values.items())
        what = "the numbers given lie outside what the formula can take"
        return OutsideValidity(f"{self.name}: {what} ({self.source.citation}), got {got}.")

    def step(self, id: str, /, **quantities: Quantity) -> Step:  # noqa: A002 - the record's own word
        """Evaluate the cell with quantities.

        Raises
        ------
        InputError
            If an argument is missing, unknown or of another kind; all faults at once.
        OutsideValidity
            If the arguments lie outside the range in which the source holds, or outside what the formula can take.
        """
        values = self._values(quantities)
        outside = self.outside(values)
        if outside is not None:
            raise OutsideValidity(outside)
        result, printed, terms = self._computed(values)
        if not math.isclose(result, printed, rel_tol=AGREEMENT, abs_tol=1e-300):
            raise DeclarationError(f"{self.name}: the printed formula gives {printed!r}, the function {result!r}.")
        return Step(
            id=id,
            cell=self,
            arguments={name: Quantity(value, self.arguments[name].unit) for name, value in values.items()},
            terms={name: Quantity(value, self.terms[name].unit) for name, value in terms.items()},
            result=Quantity(result, self.result.unit),
        )


def _symbols(function: Callable[..., object]) -> tuple[dict[str, Symbol], Symbol]:
    hints = get_type_hints(function, include_extras=True)
    found: dict[str, Symbol] = {}
    for name in (*inspect.signature(function).parameters, "return"):
        hint = hints.get(name)
        symbol = (
            next((a for a in get_args(hint)[1:] if isinstance(a, Symbol)), None)
            if get_origin(hint) is Annotated
            else None
        )
        if symbol is None:
            raise DeclarationError(f"{function.__name__}: '{name}' must be annotated with a symbol.")
        found[name] = symbol
    return {name: symbol for name, symbol in found.items() if name != "return"}, found["return"]


def _names(node: Node | object) -> set[str]:
    if isinstance(node, Name):
        return {node.term}
    children = [getattr(node, slot) for slot in getattr(node, "__slots__", ())]
    nested = [item for child in children for item in (child if isinstance(child, tuple) else (child,))]
    return set().union(*(_names(item) for item in nested if hasattr(item, "__slots__")))


def cell(
    *,
    title: str,
    source: Source,
    valid_for: tuple[Range | Condition, ...] = (),
    terms: Mapping[str, Symbol] | None = None,
    checks: tuple[str, ...],
) -> Callable[[Callable[P, float]], Cell[P]]:
    """Declare a formula cell.

    Parameters
    ----------
    title
        What it gives, for readers.
    source
        Where it is published.
    valid_for
        Ranges and joint conditions in which the source holds.
    terms
        Symbols of the intermediate terms that the body assigns.
    checks
        What stands behind it in the tests, one line each.

    Raises
    ------
    DeclarationError
        When the module is imported: an argument without symbol, a term without symbol, a range on
        a name that is no argument, an argument that the formula does not use, a body that cannot be printed.
    """

    def declare(function: Callable[P, float]) -> Cell[P]:
        arguments, result = _symbols(function)
        formula = read_formula(function)
        assigned = {line.term for line in formula.lines if line.term is not None}
        if assigned != set(terms or {}):
            raise DeclarationError(
                f"{function.__name__}: terms {sorted(assigned)} and symbols {sorted(terms or {})} differ."
            )
        for validity in valid_for:
            if isinstance(validity, Range) and validity.argument not in arguments:
                raise DeclarationError(f"{function.__name__}: range of '{validity.argument}', which is no argument.")
        used = set().union(*(_names(line.node) for line in formula.lines))
        if unused := set(arguments) - used:
            raise DeclarationError(f"{function.__name__}: the formula does not use {sorted(unused)}.")
        made = Cell(function, title, source, arguments, dict(terms or {}), result, valid_for, checks, formula)
        register(made)
        return made

    return declare

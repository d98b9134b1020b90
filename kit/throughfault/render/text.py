"""What the command line prints: the cell library and the verdict table."""

from __future__ import annotations

import textwrap
from collections.abc import Mapping, Sequence
from typing import Any

from throughfault.declare import Algorithm, Cell, Condition, Range, Symbol
from throughfault.render.html import source_text
from throughfault.render.numbers import number_text, unit_text
from throughfault.render.plain import formula_text, letter_text

__all__ = ["cell_list", "cell_text", "verdict_table"]

WIDTH = 100


def _columns(rows: Sequence[Sequence[str]], gap: str = "  ") -> list[str]:
    """Set rows in columns, the last one ragged."""
    widths = [max(len(row[i]) for row in rows) for i in range(len(rows[0]))]
    return [gap.join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip() for row in rows]


def _indented(lines: Sequence[str]) -> list[str]:
    return [f"  {line}" for line in lines]


def _wrapped(text: str) -> list[str]:
    return textwrap.wrap(" ".join(text.split()), WIDTH - 2, initial_indent="  ", subsequent_indent="  ")


def _symbol_row(symbol: Symbol, term: str) -> list[str]:
    return [letter_text(symbol.latex), unit_text(symbol.unit) or "1", term, symbol.description]


def _validity(cell: Cell[Any]) -> list[str]:
    lines = []
    for validity in cell.valid_for:
        if isinstance(validity, Condition):
            lines.append(validity.text)
        elif isinstance(validity, Range):
            unit = unit_text(cell.arguments[validity.argument].unit)
            lines.append(f"{validity.argument} {validity.text} {unit}".rstrip())
    return lines or ["no range stated by the source"]


def cell_list(cells: Sequence[Cell[Any] | Algorithm]) -> str:
    """List the library: name, kind, title, source."""
    if not cells:
        return "The cell library is empty."
    rows = [[cell.name, cell.title, source_text(cell.source.citation)] for cell in cells]
    return "\n".join(_columns([["Cell", "Gives", "Source"], *rows]))


def cell_text(cell: Cell[Any] | Algorithm) -> str:
    """Show one cell: formula, symbols, units, source, provenance, range, checks behind it."""
    source = f"{source_text(cell.source.citation)} ({cell.source.provenance})"
    lines = [f"{cell.name}: {cell.title}", ""]
    if isinstance(cell, Cell):
        given = [*cell.arguments.items(), *cell.terms.items(), (cell.result.term, cell.result)]
        symbols = _columns([_symbol_row(symbol, term) for term, symbol in given])
        lines += ["Formula", *_indented(formula_text(cell)), "", "Symbols", *_indented(symbols)]
        validity = _validity(cell)
    else:
        lines += ["Governing equations (LaTeX)", *_indented([equation.latex for equation in cell.equations])]
        validity = list(cell.valid_for)
    checks = [line for check in cell.checks for line in _wrapped(check)]
    lines += ["", "Source", f"  {source}", "", "Range", *_indented(validity)]
    lines += ["", "Assumes", *_wrapped(cell.documentation), "", "Checks behind it", *checks]
    return "\n".join(lines)


def _check_row(check: Mapping[str, Any]) -> list[str]:
    unit = unit_text(check["unit"])
    value = "-" if check["value"] is None else f"{number_text(check['value'])} {unit}".rstrip()
    limit = "-" if check["limit"] is None else f"{check['sense']} {number_text(check['limit'])} {unit}".rstrip()
    used = "-" if check["utilisation"] is None else f"{check['utilisation']:.3f}"
    return [check["id"], value, limit, used, check["verdict"]]


def verdict_table(results: Mapping[str, Any]) -> str:
    """Print checks and verdicts of a review, with the limits nobody has confirmed.

    Parameters
    ----------
    results
        In the form of the results file.
    """
    unit, verdicts = results["unit"], results["verdicts"]
    lines = [f"{unit['tag']}, revision {unit['revision']}: {unit['title']}", source_text(results["standard"]), ""]
    head = ["Check", "Value", "Limit", "Utilisation", "Verdict"]
    lines += _columns([head, *map(_check_row, results["checks"])])
    told = {"thermal": "Thermal ability", "dynamic": "Dynamic ability", "overall": "Overall"}
    lines += ["", *_columns([[told[ability], verdicts[ability]] for ability in told if ability in verdicts])]
    count = int(results.get("unconfirmed", {}).get("limits", 0))
    if count:
        lines.append(f"{count} {'limit' if count == 1 else 'limits'} unconfirmed: recalled, see the open points.")
    return "\n".join(lines)

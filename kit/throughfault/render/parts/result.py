"""Tables of results: one row a subject (winding, coil, terminal), one column a quantity."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.render.html import (
    NOT_ASSESSED,
    Column,
    Text,
    breakable,
    clause,
    code,
    data,
    identity,
    joined,
    label,
    quantity,
    sentence,
    table,
)
from throughfault.render.mathml import mathml
from throughfault.render.numbers import column_text, unit_text

__all__ = ["case_name", "numbers", "origins", "reasons", "result_list", "result_matrix", "words"]

Entry = Mapping[str, Any]
WIDEST = 4  # measures beside each other that fit on A4


def words(term: str) -> str:
    """Write a term of the files as words."""
    return term.replace("_", " ").replace(".", ", ")


def case_name(case: str | None) -> Markup:
    """Write the id of a case so that it may break at its slashes."""
    if not case:
        return Markup("")
    return breakable(case)


def numbers(ids: Sequence[str], values: Sequence[float | None]) -> list[Markup]:
    """Show one column of numbers with a common count of decimals."""
    texts = column_text(values)
    return [
        NOT_ASSESSED if value is None else data(id_, value, text)
        for id_, value, text in zip(ids, values, texts, strict=True)
    ]


def _head(measure: str, entries: Iterable[Entry]) -> Column:
    units = {entry["unit"] for entry in entries}
    symbols = {entry["symbol"] for entry in entries}
    symbol = mathml(symbols.pop()) if len(symbols) == 1 and "" not in symbols else ""
    unit = unit_text(units.pop())
    parts: list[Text] = [label(sentence(words(measure))), *([symbol] if symbol else []), *([unit] if unit else [])]
    return Column(joined(parts, Markup("<br>")), numeric=True)


def result_matrix(
    caption: Text,
    subject: str,
    quantities: Mapping[str, Entry],
    place: Callable[[str], tuple[str, str] | None],
    governing: str | None = None,
) -> Markup:
    """Set results in a table; `place` gives (subject, measure) of an id, or None where it does not belong here.

    With `governing`, the case that governs that measure closes the row (or the column) of each subject. Many
    measures stand one below the other, so that the table never grows wider than the page.
    """
    cells = {place(id_): (id_, entry) for id_, entry in quantities.items()}
    cells.pop(None, None)
    if not cells:
        return Markup("")
    subjects = list(dict.fromkeys(key[0] for key in cells if key))
    measures = list(dict.fromkeys(key[1] for key in cells if key))
    if len(measures) > WIDEST:
        return _upright(caption, subjects, measures, cells, governing)
    columns: list[Column | str] = [subject]
    shown: list[list[Text]] = [[identity(name)] for name in subjects]
    for measure in measures:
        held = [cells.get((name, measure)) for name in subjects]
        columns.append(_head(measure, [pair[1] for pair in held if pair]))
        present = [pair for pair in held if pair]
        texts = iter(numbers([id_ for id_, _ in present], [entry["value"] for _, entry in present]))
        for row, pair in zip(shown, held, strict=True):
            row.append(next(texts) if pair else "")
    if governing:
        columns.append("Governing case")
        for row, name in zip(shown, subjects, strict=True):
            pair = cells.get((name, governing))
            row.append(case_name(pair[1]["governing_case"] if pair else None))
    return table(caption, columns, shown, "results")


def _upright(
    caption: Text,
    subjects: Sequence[str],
    measures: Sequence[str],
    cells: Mapping[tuple[str, str] | None, tuple[str, Entry]],
    governing: str | None,
) -> Markup:
    """Set one row a measure, one column a subject."""
    rows: list[list[Text]] = []
    for measure in measures:
        held = [cells.get((name, measure)) for name in subjects]
        entry = next(pair[1] for pair in held if pair)
        symbol = mathml(entry["symbol"]) if entry["symbol"] else ""
        shown = (quantity(pair[0], pair[1]["value"], pair[1]["unit"]) if pair else "" for pair in held)
        rows.append([label(sentence(words(measure))), symbol, *shown])
    if governing:
        pairs = (cells.get((name, governing)) for name in subjects)
        rows.append(["Governing case", "", *(case_name(pair[1]["governing_case"] if pair else None) for pair in pairs)])
    columns: list[Column | str] = ["Quantity", "Symbol", *(Column(identity(name), numeric=True) for name in subjects)]
    return table(caption, columns, rows, "results")


def result_list(caption: Text, quantities: Mapping[str, Entry]) -> Markup:
    """Set results one below the other with source and governing case."""
    if not quantities:
        return Markup("")
    rows: list[list[Text]] = [
        [
            breakable(id_),
            quantity(id_, entry["value"], entry["unit"]),
            clause(entry["source"], entry["provenance"]),
            case_name(entry["governing_case"]),
        ]
        for id_, entry in quantities.items()
    ]
    return table(caption, ["Result", Column("Value", numeric=True), "Source", "Governing case"], rows, "results")


def origins(quantities: Mapping[str, Entry]) -> Markup:
    """Tell from which cells and sources the results come."""
    given = (entry for entry in quantities.values() if entry["value"] is not None)
    found = dict.fromkeys((e["cell"], e["source"], e["provenance"]) for e in given if e["cell"])
    if not found:
        return Markup("")
    told = joined((Markup("{}, {}").format(code(cell), clause(source, known)) for cell, source, known in found), "; ")
    return Markup('<p class="origin">Computed by {}.</p>').format(told)


def reasons(quantities: Mapping[str, Entry]) -> Markup:
    """Tell why results are not assessed."""
    rows: list[list[Text]] = [
        [breakable(id_), Markup('<span class="clause">{}</span>').format(entry["reason"])]
        for id_, entry in quantities.items()
        if entry["value"] is None
    ]
    return table("Results not assessed", ["Result", "Reason"], rows) if rows else Markup("")

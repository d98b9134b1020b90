"""Blocks of a record that recur: a worked formula, checks with their utilisation, open points."""

from __future__ import annotations

import string
from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.declare import Algorithm, Step
from throughfault.render.html import (
    NOT_ASSESSED,
    Column,
    Text,
    breakable,
    clause,
    code,
    data,
    items,
    joined,
    label,
    prose,
    quantity,
    sentence,
    slug,
    table,
)
from throughfault.render.latex import formula_lines, worked_lines, worked_units
from throughfault.render.mathml import mathml
from throughfault.render.numbers import quantity_text, unit_text

__all__ = [
    "algorithm_block",
    "check_table",
    "formula_block",
    "formula_blocks",
    "missing_list",
    "open_point_list",
    "step_name",
    "utilisation_bar",
]

FULL_BAR = 1.25  # the bar's right end; its mark at 1 stands at four fifths
BAR_STEPS = 125
WIDEST = 3  # evaluations beside each other in one table of arguments

Entry = Mapping[str, Any]


def _lines(lines: Iterable[str], kind: str) -> Markup:
    return joined(Markup('<div class="{}">{}</div>').format(kind, mathml(line, display=True)) for line in lines)


def _arguments(steps: Sequence[Step]) -> Markup:
    """Set the arguments: a row each, a column of numbers for every evaluation."""
    cell = steps[0].cell
    rows = [
        [
            mathml(cell.symbol(name).latex),
            label(cell.symbol(name).description),
            *(
                quantity(f"steps/{s.id}/arguments/{name}", s.arguments[name].value, s.arguments[name].unit)
                for s in steps
            ),
        ]
        for name in steps[0].arguments
    ]
    heads = [Column(_identity(n) if len(steps) > 1 else "Value", numeric=True) for n in _short([s.id for s in steps])]
    return table("Where", ["Symbol", "Quantity", *heads], rows, "where several" if len(steps) > 1 else "where")


def step_name(step: Step) -> Markup:
    """Write the id of a step so that it may break at its dots."""
    return _identity(step.id)


def _identity(name: str) -> Markup:
    return Markup('<span class="identity step-name">{}</span>').format(name.replace(".", ".\N{ZERO WIDTH SPACE}"))


def _short(ids: Sequence[str]) -> list[str]:
    """Leave out of ids what they end and begin with in common: they stand in full above the table."""
    names = [id_.split(".") for id_ in ids]
    while min(map(len, names)) > 1 and len({name[-1] for name in names}) == 1:
        names = [name[:-1] for name in names]
    while min(map(len, names)) > 1 and len({name[0] for name in names}) == 1:
        names = [name[1:] for name in names]
    return [".".join(name) for name in names]


def _worked_lines(step: Step) -> Markup:
    """Set the worked lines; beside one whose numbers stand without units, their units in words."""
    beside = (
        Markup(' <span class="units identity">(numbers in {})</span>').format(", ".join(map(unit_text, units)))
        if units
        else Markup("")
        for units in worked_units(step)
    )
    return joined(
        Markup('<div class="equation worked">{}{}</div>').format(mathml(line, display=True), told)
        for line, told in zip(worked_lines(step), beside, strict=True)
    )


def _worked(step: Step) -> Markup:
    result = quantity(f"steps/{step.id}/result", step.result.value, step.result.unit)
    return Markup('<div class="run"><p class="of">{}: {} = {}</p>{}</div>').format(
        step_name(step), mathml(step.cell.result.latex), result, _worked_lines(step)
    )


def _work(steps: Sequence[Step]) -> Markup:
    kind = "work below" if len(steps) > 1 else "work"
    return Markup('<div class="{}"><div>{}</div>{}</div>').format(kind, joined(map(_worked, steps)), _arguments(steps))


def formula_block(steps: Step | Sequence[Step], heading: Text | None = None, anchor: str = "step") -> Markup:
    """Show evaluations of one cell: title, citation, the formula, then each with its own numbers and result.

    Steps shown a second time on a page take another `anchor`.
    """
    runs = [steps] if isinstance(steps, Step) else list(steps)
    cell = runs[0].cell
    chunks = [runs[start : start + WIDEST] for start in range(0, len(runs), WIDEST)]
    return Markup(
        '<section class="formula" aria-labelledby="{id}"><div class="opening"><h4 id="{id}">{title}</h4>'
        '<p class="source">{gives}. {source}</p>{formula}</div>{work}</section>\n'
    ).format(
        id=f"{anchor}-{slug(runs[0].id)}", title=label(cell.title) if heading is None else heading,
        source=clause(cell.source.citation, cell.source.provenance),
        gives=label(sentence(cell.result.description.rstrip("."))),
        formula=_lines(formula_lines(cell), "equation"),
        work=joined(map(_work, chunks)),
    )  # fmt: skip


def formula_blocks(steps: Iterable[Step], anchor: str = "step") -> Markup:
    """Show steps by cell, each formula once, in the order in which cells are first used."""
    by_cell: dict[str, list[Step]] = {}
    for step in steps:
        by_cell.setdefault(step.cell.name, []).append(step)
    return joined(formula_block(group, anchor=anchor) for group in by_cell.values())


def algorithm_block(algorithm: Algorithm, content: Text = "", anchor: str = "cell") -> Markup:
    """Show the governing equations of a solver, where it holds, and what it gave."""
    holds = Markup('<span class="clause">{}</span>')
    validity = items((holds.format(text) for text in algorithm.valid_for), "validity")
    return Markup(
        '<section class="formula" aria-labelledby="{id}"><h4 id="{id}">{title}</h4>'
        '<p class="source">{source}</p>{equations}<p>Holds for:</p>{validity}{content}</section>\n'
    ).format(
        id=f"{anchor}-{slug(algorithm.name)}", title=label(algorithm.title),
        source=clause(algorithm.source.citation, algorithm.source.provenance),
        equations=_lines((e.latex for e in algorithm.equations), "equation"), validity=validity, content=content,
    )  # fmt: skip


def utilisation_bar(id: str, used: float | None) -> Markup:  # noqa: A002 - the record's own word
    """Show a utilisation as number and bar; the mark on the bar is 1, a hatched bar lies beyond it."""
    if used is None:
        return NOT_ASSESSED
    shown = f"{used:.3f}"
    width = min(BAR_STEPS, round(used * 100))
    beyond = " beyond" if used > 1.0 else ""
    return Markup(
        '<span class="bar u{}{}" role="img" aria-label="utilisation {}"><span class="fill"></span></span> {}'
    ).format(width, beyond, shown, data(id, used, shown))  # fmt: skip


def _limit(check: Entry) -> Markup:
    if check["limit"] is None:
        return NOT_ASSESSED
    shown = quantity_text(check["limit"], check["unit"])
    return Markup("{} {}").format(check["sense"], data(f"checks/{check['id']}/limit", check["limit"], shown))


def _limit_source(check: Entry) -> Markup:
    if not check["limit_source"]:
        return Markup("")
    source = clause(check["limit_source"], check["limit_provenance"])
    kit = check.get("kit_limit")
    if kit is None:
        return source
    original = data(f"checks/{check['id']}/kit_limit/value", kit["value"], quantity_text(kit["value"], check["unit"]))
    instead = Markup('<br><span class="instead">instead of {}, {}</span>')
    return source + instead.format(original, clause(kit["source"], kit["provenance"]))


def _check_row(check: Entry) -> list[Text]:
    source = _limit_source(check)
    reason = check.get("reason")
    verdict = Markup('<strong class="verdict">{}</strong>').format(check["verdict"])
    if reason:
        verdict += Markup('<br><span class="clause">{}</span>').format(reason)
    governing = breakable(check["governing_case"]) if check["governing_case"] else Markup("")
    return [
        breakable(check["id"]),
        quantity(f"checks/{check['id']}/value", check["value"], check["unit"]),
        _limit(check),
        utilisation_bar(f"checks/{check['id']}/utilisation", check["utilisation"]),
        verdict,
        joined([source, governing], Markup("<br>") if source and governing else ""),
    ]


def check_table(checks: Sequence[Entry], caption: Text = "Results held against their limits") -> Markup:
    """Set the checks of a review (entries of the results file) with utilisation, verdict and source."""
    columns: list[Column | str] = [
        "Check", Column("Value", numeric=True), Column("Limit", numeric=True), "Utilisation", "Verdict",
        "Source of the limit; governing case",
    ]  # fmt: skip
    return table(caption, columns, [_check_row(check) for check in checks], "checks")


def _point(point: Entry) -> Markup:
    parts: list[Text] = []
    for literal, name, _, _ in string.Formatter().parse(point["template"]):
        parts.append(prose(literal))
        if name is not None:
            q = point["values"][name]
            parts.append(quantity(f"open_points/{point['id']}/{name}", q["value"], q["unit"]))
    if point["clause"]:
        parts += [" (", clause(point["clause"]), ")"]
    if point["blocking"]:
        parts.append(Markup(" <strong>[to be settled before approval]</strong>"))
    return joined(parts)


def open_point_list(points: Sequence[Entry]) -> Markup:
    """List what a reviewer must settle or know, its numbers as data; says so when there is none."""
    if not points:
        return Markup("<p>No open points.</p>")
    return items(Markup("{}: {}").format(code(p["id"]), _point(p)) for p in points)


def missing_list(missing: Sequence[Entry]) -> Markup:
    """List what could not be assessed, why, and the keys that would supply it."""
    if not missing:
        return Markup("<p>Nothing is left out for want of inputs.</p>")
    reason = Markup('<span class="clause">{}</span>')
    rows = [[breakable(m["id"]), reason.format(m["reason"]), joined(map(code, m["keys"]), ", ")] for m in missing]
    return table("Not assessed for want of inputs", ["Result", "Reason", "Keys that would supply it"], rows)

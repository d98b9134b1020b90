"""Parts that show results by winding with their worked formulas: thermal ability, requirements."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.declare import Step
from throughfault.render.blocks import check_table, formula_blocks, open_point_list
from throughfault.render.html import (
    Column,
    Text,
    clause,
    definitions,
    identity,
    label,
    quantity,
    section,
    sentence,
    table,
)
from throughfault.render.parts.result import origins, reasons, result_list, result_matrix

__all__ = ["finding_part", "requirement_part", "thermal_part"]

Entry = Mapping[str, Any]


def finding_part(
    title: str,
    prefix: str,
    subject: str,
    entry: Entry,
    steps: Sequence[Step] = (),
    figures: Sequence[Text] = (),
    content: Text = "",
) -> Markup:
    """Show results named ``<prefix>.<subject>.<measure>``, then the others, checks, figures and worked formulas.

    Parameters
    ----------
    entry
        What the part adds to the results file.
    content
        Goes behind the tables of results.
    """

    def place(id_: str) -> tuple[str, str] | None:
        first, _, rest = id_.partition(".")
        name, _, measure = rest.partition(".")
        return (name, measure) if first == prefix and measure else None

    quantities = entry["quantities"]
    others = {id_: q for id_, q in quantities.items() if place(id_) is None}
    parts: list[Text] = [
        result_matrix(f"Results by {subject.lower()}", subject, quantities, place, _first_governed(quantities, place)),
        result_list("Further results", others),
        reasons(quantities), origins(quantities), content,
    ]  # fmt: skip
    if entry["checks"]:
        parts.append(check_table(entry["checks"]))
    parts += figures
    if entry["open_points"]:
        parts.append(section("To note", open_point_list(entry["open_points"]), id=f"{prefix}-points", level=3))
    if steps:
        parts.append(section("Worked", formula_blocks(steps), id=f"{prefix}-worked", level=3))
    return section(title, *parts, id=prefix)


def _first_governed(quantities: Mapping[str, Entry], place: Any) -> str | None:
    placed = ((place(id_), entry) for id_, entry in quantities.items())
    return next((key[1] for key, entry in placed if key and entry["governing_case"]), None)


def thermal_part(entry: Entry, steps: Sequence[Step] = (), figures: Sequence[Text] = (), content: Text = "") -> Markup:
    """Show density, temperature at the end of the fault and permissible duration of every winding."""
    return finding_part("Thermal ability", "thermal", "Winding", entry, steps, figures, content)


def requirement_part(
    entry: Entry,
    steps: Sequence[Step],
    category: Text,
    lines: Sequence[tuple[str, str, str]],
    faults: Sequence[tuple[str, str]],
) -> Markup:
    """Show what the standard asks of this unit.

    Parameters
    ----------
    category
        In words, with its source.
    lines
        Label, id of the result and remark of each thing asked.
    faults
        Kind of fault, and whether the standard requires it.
    """
    quantities = entry["quantities"]
    rows: list[list[Text]] = [
        [
            label(sentence(name)),
            quantity(id_, quantities[id_]["value"], quantities[id_]["unit"]),
            clause(quantities[id_]["source"], quantities[id_]["provenance"]),
            label(remark),
        ]
        for name, id_, remark in lines
    ]
    kinds: list[list[Text]] = [[identity(fault), asked] for fault, asked in faults]
    asked = table(
        "Values asked and taken", ["What", Column("Value", numeric=True), "Source", "Remark"], rows, "results"
    )
    parts: list[Text] = [definitions([("Category", category)]), asked, reasons(quantities)]
    if kinds:
        parts.append(table("Kinds of fault run", ["Fault", "By the standard"], kinds))
    if entry["open_points"]:
        parts.append(
            section("What it leaves open", open_point_list(entry["open_points"]), id="requirement-points", level=3)
        )
    if steps:
        parts.append(section("Worked", formula_blocks(steps), id="requirement-worked", level=3))
    return section("What the standard asks", *parts, id="requirement")

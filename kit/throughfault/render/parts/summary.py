"""The first page: what was reviewed, the verdict, the governing cases, what is open, the cautions."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.render.blocks import open_point_list
from throughfault.render.html import (
    Column,
    Text,
    clause,
    definitions,
    identity,
    joined,
    quantity,
    section,
    sentence,
    source_text,
    spanned_table,
    version,
)
from throughfault.render.mathml import mathml
from throughfault.render.parts.caution import cautions
from throughfault.render.parts.result import case_name
from throughfault.render.parts.verdict import unconfirmed_limits, verdict_table

__all__ = ["summary_part"]

Entry = Mapping[str, Any]
_MEASURES = {
    ("duty", "symmetrical"): "symmetrical current",
    ("duty", "peak"): "first peak",
    ("thermal", "temperature"): "temperature after the fault",
}


def _governing(quantities: Mapping[str, Entry]) -> Markup:
    """Set one row a winding and quantity, those of a winding below each other: each has its own governing case."""
    by_winding: dict[str, list[list[Text]]] = {}
    for id_, entry in quantities.items():
        first, _, rest = id_.partition(".")
        name, _, measure = rest.rpartition(".")
        told = _MEASURES.get((first, measure))
        if not name or told is None:
            continue
        symbol = mathml(entry["symbol"]) if entry["symbol"] else ""
        value = quantity(id_, entry["value"], entry["unit"])
        named = joined([sentence(told), symbol], " ")
        by_winding.setdefault(name, []).append([named, value, case_name(entry["governing_case"])])
    if not by_winding:
        return Markup("")
    columns: list[Column | str] = ["Winding", "Quantity", Column("Value", numeric=True), "Governing case"]
    return spanned_table("Governing case of each winding", columns, by_winding, "governing")


def _identity(results: Entry) -> Markup:
    unit, given = results["unit"], results.get("inputs", {}).get("identity", {})
    pairs: list[tuple[Text, Text]] = [
        ("Transformer", identity(unit["title"])),
        ("Tag, revision", identity(f"{unit['tag']}, {unit['revision']}")),
    ]
    pairs += [(name.capitalize(), identity(given[name])) for name in ("purchaser", "maker", "order") if given.get(name)]
    pairs.append(("Standard", clause(source_text(results["standard"]))))
    pairs.append(("Made with", version(f"Throughfault {results['kit']['version']}")))
    return definitions(pairs)


def _points(results: Entry, unconfirmed: Sequence[str]) -> list[Entry]:
    """Return the open points, those that bar approval first; unconfirmed limits are listed already."""
    listed = {f"limit.{check}" for check in unconfirmed}
    points = [point for point in results["open_points"] if point["id"] not in listed]
    return sorted(points, key=lambda point: not point["blocking"])


def summary_part(results: Entry, unconfirmed: Sequence[str]) -> Markup:
    """Make the first page.

    Parameters
    ----------
    results
        In the form of the results file: unit, standard, kit, inputs, verdicts, checks, quantities, open_points.
    unconfirmed
        Ids of the checks whose verdict rests on a recalled limit.
    """
    first = section(
        "Summary",
        _identity(results),
        verdict_table(results["verdicts"], results["checks"]),
        unconfirmed_limits(unconfirmed),
        _governing(results["quantities"]),
        section("Open points", open_point_list(_points(results, unconfirmed)), id="summary-points", level=3),
        cautions(),
        id="summary", kind="part first",
    )  # fmt: skip
    return first + Markup('<nav class="contents"></nav>')

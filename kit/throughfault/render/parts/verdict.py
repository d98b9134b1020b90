"""Checks and the verdicts drawn from them; open points and what is missing."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.render.blocks import check_table, missing_list, open_point_list
from throughfault.render.html import Column, Text, breakable, code, data, items, joined, quantity, section, table

__all__ = ["declared_table", "open_point_part", "unconfirmed_limits", "verdict_part", "verdict_table"]

Entry = Mapping[str, Any]
DECLARED = "declared."
_ABILITY = {"thermal": "Thermal ability", "dynamic": "Dynamic ability", "overall": "Overall"}


def _rests_on(checks: Sequence[Entry], ability: str) -> str:
    these = [c for c in checks if ability in (c["ability"], "overall")]
    exceeding = sum(c["verdict"] == "exceeds" for c in these)
    absent = sum(c["verdict"] == "not assessed" for c in these)
    if exceeding:
        return "a check exceeds its limit" if exceeding == 1 else "several checks exceed their limits"
    if not these:
        return "no check applies"
    if absent:
        return "a check that applies is not assessed" if absent == 1 else "several checks that apply are not assessed"
    return "every check that applies is within its limit"


def verdict_table(verdicts: Mapping[str, str], checks: Sequence[Entry]) -> Markup:
    """Set the verdicts by ability in words, each with what it rests on."""
    rows: list[list[Text]] = [
        [_ABILITY[ability], Markup("<strong>{}</strong>").format(verdicts[ability]), _rests_on(checks, ability)]
        for ability in _ABILITY
        if ability in verdicts
    ]
    return table("Verdict by ability", ["Ability", "Verdict", "Because"], rows, "verdicts")


def unconfirmed_limits(ids: Sequence[str]) -> Markup:
    """Say how many limits that carry a verdict are recalled and not confirmed, and list them."""
    if not ids:
        return Markup('<p class="unconfirmed">No limit unconfirmed: each deciding one has been read or signed for.</p>')
    count = data("unconfirmed/limits", len(ids))
    told = "limit unconfirmed" if len(ids) == 1 else "limits unconfirmed"
    return Markup(
        '<p class="unconfirmed"><strong>{} {}</strong> (recalled from memory; a signatory must confirm each from a '
        "licensed copy):</p>{}"
    ).format(count, told, items(map(code, ids), "names"))


def verdict_part(
    verdicts: Mapping[str, str], checks: Sequence[Entry], unconfirmed: Sequence[str], route: str, content: Text = ""
) -> Markup:
    """Show every check with limit, utilisation and origin, then the verdicts.

    Parameters
    ----------
    unconfirmed
        Ids of the checks whose verdict rests on a recalled limit.
    route
        How dynamic ability is demonstrated, in words.
    content
        Goes behind the verdicts.
    """
    by_ability = joined(
        check_table([c for c in checks if c["ability"] == ability], f"{_ABILITY[ability]}: checks")
        for ability in ("thermal", "dynamic")
        if any(c["ability"] == ability for c in checks)
    )
    said = Markup("<p>Route by which dynamic ability is demonstrated: {}.</p>").format(route)
    legend = Markup(
        '<p class="origin">A bar shows the utilisation of a limit; its mark is full use, a hatched bar lies beyond.</p>'
    )
    return section(
        "Checks and verdict", by_ability, legend, verdict_table(verdicts, checks), said,
        unconfirmed_limits(unconfirmed), content, id="verdict",
    )  # fmt: skip


def declared_table(declared: Mapping[str, Entry], quantities: Mapping[str, Entry]) -> Markup:
    """Set what the maker declares beside what was calculated; empty where nothing is declared.

    Parameters
    ----------
    declared
        Results ``declared.<id>`` and ``declared.<id>.deviation``.
    quantities
        The calculated results by id.
    """
    rows: list[list[Text]] = []
    for id_, entry in declared.items():
        name = id_.removeprefix(DECLARED)
        found = quantities.get(name)
        if found is None:  # a deviation, or a result of no such name
            continue
        deviation = declared.get(f"{id_}.deviation")
        rows.append([
            breakable(name),
            quantity(id_, entry["value"], entry["unit"]),
            quantity(name, found["value"], found["unit"]),
            quantity(f"{id_}.deviation", deviation["value"], deviation["unit"]) if deviation else "",
        ])  # fmt: skip
    numbers = [Column(head, numeric=True) for head in ("Declared", "Calculated", "Deviation")]
    return table("Declared by the maker, and calculated", ["Result", *numbers], rows) if rows else Markup("")


def open_point_part(points: Sequence[Entry], missing: Sequence[Entry]) -> Markup:
    """List open points, those that bar approval first, and what could not be assessed."""
    ordered = sorted(points, key=lambda point: not point["blocking"])
    return section("Open points", open_point_list(ordered), missing_list(missing), id="open-points")

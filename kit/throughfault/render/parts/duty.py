"""The duty: governing currents by winding and tapping, then every case."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.declare import Algorithm, Step
from throughfault.render.blocks import algorithm_block, check_table, formula_block
from throughfault.render.html import Column, Text, data, identity, joined, note, section, table
from throughfault.render.numbers import column_text, unit_text
from throughfault.render.parts.result import case_name, origins, reasons, result_list, result_matrix

__all__ = ["duty_part"]

Entry = Mapping[str, Any]
CURRENT = "kA"
_WINDING = ("symmetrical", "peak", "peak_exact")
_TERMINAL = ("terminal_symmetrical", "terminal_peak")


def _of_winding(id_: str) -> tuple[str, str] | None:
    first, _, rest = id_.partition(".")
    name, _, measure = rest.rpartition(".")
    return (name, measure) if first == "duty" and measure in _WINDING else None


def _of_terminal(id_: str) -> tuple[str, str] | None:
    first, _, rest = id_.partition(".")
    name, _, measure = rest.rpartition(".")
    return (f"{name} terminal", measure.removeprefix("terminal_")) if first == "duty" and measure in _TERMINAL else None


def _further(quantities: Mapping[str, Entry]) -> dict[str, Entry]:
    return {id_: entry for id_, entry in quantities.items() if _of_winding(id_) is None and _of_terminal(id_) is None}


def _phases(case: Entry, kind: str, name: str) -> Iterable[tuple[str, Entry]]:
    """Yield id and entry of each phase of a winding or terminal."""
    for phase, entry in case[kind][name].items():
        yield f"cases/{case['id']}/{kind}/{name}/{phase}", entry


def _largest(cases: Sequence[Entry], name: str, measure: str) -> tuple[str, float, Entry] | None:
    """Pick the phase current of a winding that is largest in some cases: (id, value, case)."""
    found = [
        (f"{id_}/{measure}", float(entry[measure]), case)
        for case in cases
        for id_, entry in _phases(case, "currents", name)
        if entry.get(measure) is not None
    ]
    return max(found, key=lambda item: item[1], default=None)


def _by_tapping(cases: Sequence[Entry]) -> Markup:
    windings = list(dict.fromkeys(name for case in cases for name in case["currents"]))
    groups: dict[Text, list[list[Text]]] = {}
    for name in windings:
        rows: list[list[Text]] = []
        for tapping in dict.fromkeys(case["tapping"] for case in cases):
            these = [case for case in cases if case["tapping"] == tapping]
            pairs = [_largest(these, name, measure) for measure in ("rms", "peak")]
            if pairs[0] is None:
                continue
            shown = [data(p[0], p[1], f"{p[1]:.3f}") if p else Markup("") for p in pairs]
            rows.append([identity(tapping), *shown, case_name((pairs[1] or pairs[0])[2]["id"])])
        groups[Markup("Winding {}").format(identity(name))] = rows
    columns: list[Column | str] = [
        "Tapping", Column(f"Largest r.m.s., {CURRENT}", numeric=True), Column(f"Largest peak, {CURRENT}", numeric=True),
        "Case of the peak",
    ]  # fmt: skip
    return table("Largest phase current of each winding by tapping", columns, groups, "by-tapping")


def _case_rows(case: Entry, kind: str, phases: Sequence[str]) -> list[list[Text]]:
    rows: list[list[Text]] = []
    for name in case[kind]:
        entries = dict(_phases(case, kind, name))
        ids = [f"cases/{case['id']}/{kind}/{name}/{phase}/{m}" for m in ("rms", "peak") for phase in phases]
        values = [entries.get(i.rpartition("/")[0], {}).get(i.rpartition("/")[2]) for i in ids]
        texts = column_text(values)
        rows.append([
            identity(name),
            *(data(i, v, t) if v is not None else "" for i, v, t in zip(ids, values, texts, strict=True)),
        ])  # fmt: skip
    return rows


def _all_cases(cases: Sequence[Entry], kind: str, caption: str) -> Markup:
    phases = list(dict.fromkeys(p for case in cases for name in case[kind] for p in case[kind][name]))
    groups: dict[Text, list[list[Text]]] = {}
    for case in cases:
        asked = "" if case["required_by_standard"] else Markup(' <span class="extra">extra to the standard</span>')
        if rows := _case_rows(case, kind, phases):
            groups[Markup("{}{}").format(identity(case["id"]), asked)] = rows
    if not groups:
        return Markup("")
    heads = [Column(f"{m}, phase {p}, {unit_text(CURRENT)}", numeric=True) for m in ("R.m.s.", "Peak") for p in phases]
    return table(caption, ["Case", *heads], groups, "cases")


def duty_part(
    entry: Entry, steps: Sequence[Step] = (), figures: Sequence[Text] = (), algorithms: Sequence[Algorithm] = ()
) -> Markup:
    """Show the fault currents: governing values, figures, worked formulas, checks, every case.

    Parameters
    ----------
    entry
        What the duty part adds to the results file.
    steps
        Worked formulas, in the order of reading.
    figures
        Made by ``figure_html``.
    algorithms
        Solvers whose governing equations are shown.
    """
    quantities, cases = entry["quantities"], entry["cases"]
    title = "Largest phase current of each winding over all cases"
    governing = joined([
        result_matrix(title, "Winding", quantities, _of_winding, "peak"),
        result_matrix("At the line terminals", "Terminal", quantities, _of_terminal, "peak"),
        result_list("Neutrals and further currents", _further(quantities)),
        reasons(quantities), origins(quantities),
    ])  # fmt: skip
    worked = joined([*map(formula_block, steps), *map(algorithm_block, algorithms)])
    parts: list[Text] = [governing, _by_tapping(cases) if cases else "", *figures]
    if entry["checks"]:
        parts.append(check_table(entry["checks"], "Currents held against short-time ratings"))
    if worked:
        parts.append(section("How the currents follow", worked, id="duty-worked", level=3))
    if cases:
        parts.append(section("Every case", *_every_case(cases), id="duty-cases", level=3))
    return section("Fault currents", *parts, id="duty")


def _every_case(cases: Sequence[Entry]) -> list[Markup]:
    return [
        note(
            "A case is named by tapping, faulted terminal, kind of fault and infeed. Cases the standard does not ask "
            "for are marked; they count for the governing values as well. Angles stand in the results file."
        ),
        _all_cases(cases, "currents", "Phase currents of the windings in every case"),
        _all_cases(cases, "terminals", "Currents at the line terminals in every case"),
    ]

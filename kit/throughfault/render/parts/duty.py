"""The duty: governing currents by winding and tapping, then every case."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.declare import Algorithm, Step
from throughfault.render.blocks import algorithm_block, check_table, formula_block
from throughfault.render.html import Column, Text, breakable, data, identity, joined, note, section, table
from throughfault.render.numbers import decimals_of
from throughfault.render.parts.result import case_name, origins, reasons, result_list, result_matrix

__all__ = ["duty_part"]

Entry = Mapping[str, Any]
CURRENT = "kA"
MEASURES = ("rms", "peak")
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
            pairs = [_largest(these, name, measure) for measure in MEASURES]
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


def _values(case: Entry, kind: str, name: str, phases: Sequence[str]) -> tuple[list[str], list[float | None]]:
    """Return ids and values of a row: r.m.s. of each phase, then peak of each phase."""
    entries = dict(_phases(case, kind, name))
    paths = [(f"cases/{case['id']}/{kind}/{name}/{phase}", m) for m in MEASURES for phase in phases]
    return [f"{path}/{m}" for path, m in paths], [entries.get(path, {}).get(m) for path, m in paths]


def _case_body(case: Entry, kind: str, phases: Sequence[str], decimals: int) -> Markup:
    extra = Markup('<br><span class="extra">extra to the standard</span>')
    asked = Markup("") if case["required_by_standard"] else extra
    head = Markup('<th scope="rowgroup" rowspan="{}">{}{}</th>').format(len(case[kind]), breakable(case["id"]), asked)
    rows = []
    for name in case[kind]:
        ids, values = _values(case, kind, name, phases)
        shown = (data(i, v, f"{v:.{decimals}f}") if v is not None else "" for i, v in zip(ids, values, strict=True))
        cells = joined(Markup('<td class="number">{}</td>').format(cell) for cell in shown)
        rows.append(Markup('<tr>{}<th scope="row">{}</th>{}</tr>\n').format(head, identity(name), cells))
        head = Markup("")
    return Markup('<tbody class="case">{}</tbody>\n').format(joined(rows))


def _decimals(cases: Sequence[Entry], kind: str, phases: Sequence[str]) -> int:
    """Choose one count of decimals for the table, by the winding that carries least."""
    by_name: dict[str, list[float | None]] = {}
    for case in cases:
        for name in case[kind]:
            by_name.setdefault(name, []).extend(_values(case, kind, name, phases)[1])
    return max((decimals_of(values) for values in by_name.values()), default=0)


def _all_cases(cases: Sequence[Entry], kind: str, caption: str) -> Markup:
    """Set the complete table of cases, a body of rows for each."""
    these = [case for case in cases if case[kind]]
    if not these:
        return Markup("")
    phases = list(dict.fromkeys(p for case in these for name in case[kind] for p in case[kind][name]))
    decimals = _decimals(these, kind, phases)
    over = joined(
        Markup('<th scope="colgroup" colspan="{}" class="over">{}</th>').format(len(phases), f"{word}, {CURRENT}")
        for word in ("R.m.s.", "First peak")
    )
    letters = joined(Markup('<th scope="col" class="number">{}</th>').format(p) for p in [*phases, *phases])
    head = Markup('<tr><td></td><td></td>{}</tr><tr><th scope="col">Case</th><th scope="col">{}</th>{}</tr>').format(
        over, "Winding" if kind == "currents" else "Terminal", letters
    )
    body = joined(_case_body(case, kind, phases, decimals) for case in these)
    return Markup(
        '<div class="scroll"><table class="cases"><caption>{}</caption><thead>{}</thead>\n{}</table></div>\n'
    ).format(caption, head, body)  # fmt: skip


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
            "A case is named by tapping, faulted terminal, kind of fault and infeed; a, b and c are the phases. Cases "
            "the standard does not ask for are marked; they count for the governing values as well. Angles stand in "
            "the results file."
        ),
        _all_cases(cases, "currents", "Phase currents of the windings in every case"),
        _all_cases(cases, "terminals", "Currents at the line terminals in every case"),
    ]

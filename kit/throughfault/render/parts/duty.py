"""The duty: governing currents by winding and tapping, then every case."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.declare import Algorithm, Step
from throughfault.render.blocks import algorithm_block, check_table, formula_blocks
from throughfault.render.html import (
    Column,
    Text,
    breakable,
    clause,
    data,
    identity,
    joined,
    label,
    note,
    quantity,
    section,
    table,
)
from throughfault.render.numbers import decimals_of, quantity_text
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


def _of_factor(id_: str) -> tuple[str, str] | None:
    first, _, rest = id_.partition(".")
    name, _, measure = rest.rpartition(".")
    return (name, measure) if first == "duty" and measure.startswith("peak_factor") else None


def _further(quantities: Mapping[str, Entry]) -> dict[str, Entry]:
    places = (_of_winding, _of_terminal, _of_factor)
    return {id_: entry for id_, entry in quantities.items() if all(place(id_) is None for place in places)}


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


def _flows(case: Entry) -> bool:
    return any(entry["rms"] for name in case["currents"] for _, entry in _phases(case, "currents", name))


def _case_row(case: Entry, names: Sequence[str], decimals: Mapping[str, int]) -> Markup:
    """Set one case: of each winding the phase that carries most."""
    extra = Markup(' <span class="extra">extra</span>')
    cells = []
    for name in names:
        for measure in MEASURES:
            found = _largest([case], name, measure)
            shown = data(found[0], found[1], f"{found[1]:.{decimals[name]}f}") if found else Markup("")
            cells.append(Markup('<td class="number">{}</td>').format(shown))
    asked = Markup("") if case["required_by_standard"] else extra
    return Markup('<tr><th scope="row">{}{}</th>{}</tr>\n').format(breakable(case["id"]), asked, joined(cells))


def _all_cases(cases: Sequence[Entry]) -> Markup:
    """Set the table of cases, one row for each in which current flows through the transformer."""
    these = [case for case in cases if _flows(case)]
    names = list(dict.fromkeys(name for case in these for name in case["currents"]))
    largest = {name: [_largest([case], name, m) for case in these for m in MEASURES] for name in names}
    decimals = {name: decimals_of([found[1] for found in all_ if found]) for name, all_ in largest.items()}
    over = joined(Markup('<th scope="colgroup" colspan="2" class="over">{}</th>').format(identity(n)) for n in names)
    units = joined(
        Markup('<th scope="col" class="number">{}, {}</th>').format(word, CURRENT)
        for _ in names
        for word in ("r.m.s.", "peak")
    )
    head = Markup('<tr><td></td>{}</tr><tr><th scope="col">Case</th>{}</tr>').format(over, units)
    body = joined(_case_row(case, names, decimals) for case in these)
    return Markup(
        '<div class="scroll"><table class="cases"><caption>Largest phase current of each winding, by case</caption>'
        "<thead>{}</thead>\n<tbody>{}</tbody></table></div>\n"
    ).format(head, body)


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
        result_matrix("Peak factor that decides, and others", "Winding", quantities, _of_factor, "peak_factor"),
        _governing(quantities, cases),
        result_list("Neutrals and further currents", _further(quantities)),
        reasons(quantities), origins(quantities),
    ])  # fmt: skip
    worked = joined([formula_blocks(steps), *map(algorithm_block, algorithms)])
    parts: list[Text] = [governing, _by_tapping(cases) if cases else "", *figures]
    if entry["checks"]:
        parts.append(check_table(entry["checks"], "Currents held against short-time ratings"))
    if worked:
        parts.append(section("How the currents follow", worked, id="duty-worked", level=3))
    if cases:
        parts.append(section("Every case", *_every_case(cases), id="duty-cases", level=3))
    return section("Fault currents", *parts, id="duty")


def _governing(quantities: Mapping[str, Entry], cases: Sequence[Entry]) -> Markup:
    """Tell of each governing case how its peak factor came about."""
    named: dict[str, list[str]] = {}
    for id_, entry in quantities.items():
        if _of_winding(id_) is not None and entry["governing_case"]:
            named.setdefault(entry["governing_case"], []).append(id_)
    rows = []
    for case in cases:
        if case["id"] in named and "driving_point" in case:
            at, head = case["driving_point"], f"cases/{case['id']}"
            parts = [(f"{head}/driving_point/{name}", at[name]) for name in ("resistance", "reactance")]
            shown: list[Text] = [data(id_, value, quantity_text(value, at["unit"])) for id_, value in parts]
            factor = case["peak_factor"]
            chosen = quantity(f"{head}/peak_factor/value", factor["value"], "1")
            source = Markup("{}; {}").format(label(factor["how"]), clause(factor["source"]))
            rows.append([case_name(case["id"]), *shown, chosen, source])
    if not rows:
        return Markup("")
    columns: list[Column | str] = [
        "Case", Column("R at the fault", numeric=True), Column("X at the fault", numeric=True),
        Column("Peak factor", numeric=True), "How it was found",
    ]  # fmt: skip
    told = note(
        "The factor belongs to the whole network seen from the fault, with the resistances that let the offset decay. "
        "The exact peak is that of the winding's own current, whose share of the offset may differ."
    )
    return table("Cases that govern a winding", columns, rows, "results") + told


def _every_case(cases: Sequence[Entry]) -> list[Markup]:
    return [
        note(
            "A case is named by tapping, faulted terminal, kind of fault, infeed, and by what of the data was varied: "
            "minimum for the lowest network powers, tolerance for impedances less their tolerance, a ratio of zero- to "
            "positive-sequence impedance of a network (named in brackets) or of the transformer where none is given. "
            "Cases beyond the standard's are marked extra; they count for the governing values as well. Faults fed by "
            "their own terminal's network alone, with no current in the transformer, are left out here. Every phase of "
            "windings, terminals and neutrals, with its angle, stands in the results file."
        ),
        _all_cases(cases),
    ]

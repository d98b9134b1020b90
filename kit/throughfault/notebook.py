"""What a notebook may import: one call a cell, each shows one part of the review and emits its results.

Nothing is computed here: the findings come from the assessment, their look from the renderers. What a
part shows goes into the notebook as HTML, what it found as display data of the kit's own type.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Any

from markupsafe import Markup

import throughfault.cells
from throughfault import __version__
from throughfault.declare import Algorithm, Cell, Fragment, registry
from throughfault.errors import InputError, did_you_mean
from throughfault.render.blocks import algorithm_block, formula_block
from throughfault.render.html import clause, note, section
from throughfault.render.parts.duty import duty_part
from throughfault.render.parts.finding import requirement_part, thermal_part
from throughfault.render.parts.signature import signature_part
from throughfault.render.parts.summary import summary_part
from throughfault.render.parts.unit_data import unit_data_part
from throughfault.render.parts.verdict import declared_table, open_point_part
from throughfault.render.parts.verdict import verdict_part as render_verdict
from throughfault.workbook.assess.review import Review
from throughfault.workbook.figures import duty_figures, thermal_figures
from throughfault.workbook.inputs import read_unit
from throughfault.workbook.results import MIME

__all__ = [
    "Shown",
    "Workbook",
    "calculation",
    "duty",
    "open_point",
    "open_review",
    "requirement",
    "signature",
    "summary",
    "thermal",
    "unit_data",
    "verdict",
]

_ = throughfault.cells  # importing it declares the library
LISTS = ("steps", "checks", "cases", "missing", "open_points")


class Shown:
    """A part as a notebook displays it: HTML for people, results for the runner."""

    def __init__(self, html: str, results: Mapping[str, Any]) -> None:
        self._bundle: dict[str, Any] = {"text/html": str(html)}
        if results:
            self._bundle[MIME] = dict(results)

    def __repr__(self) -> str:
        """Be the same in every run: a notebook keeps it beside the HTML."""
        return "<part of a review>"

    def _repr_mimebundle_(self, **_: Any) -> dict[str, Any]:
        return self._bundle


class Workbook:
    """A review and what of it this notebook has emitted already; nothing is emitted twice."""

    def __init__(self, review: Review) -> None:
        self.review = review
        self._emitted: set[tuple[str, str]] = set()

    def emit(self, *fragments: Fragment, **single: Any) -> dict[str, Any]:
        """Return the entries of fragments that were not emitted before, with single entries beside them."""
        fresh: dict[str, Any] = {"quantities": {}, **{name: [] for name in LISTS}}
        for fragment in fragments:
            entry = fragment.entry()
            fresh["quantities"].update({k: v for k, v in entry["quantities"].items() if self._first("quantities", k)})
            for name in LISTS:
                fresh[name] += [item for item in entry[name] if self._first(name, item["id"])]
        return {**{key: value for key, value in fresh.items() if value}, **single}

    def _first(self, kind: str, name: str) -> bool:
        fresh = (kind, name) not in self._emitted
        self._emitted.add((kind, name))
        return fresh

    @property
    def points(self) -> list[dict[str, Any]]:
        """Every open point of the review."""
        return [point for fragment in self.review.fragments for point in fragment.entry()["open_points"]]


def open_review(inputs: str) -> Workbook:
    """Open the inputs of a review.

    Parameters
    ----------
    inputs
        Folder that holds ``unit.toml``, relative to the working folder.

    Raises
    ------
    UnitFileError
        If the unit file is at fault; all faults in one report.
    """
    return Workbook(Review(read_unit(Path(inputs) / "unit.toml")))


def _whole(book: Workbook) -> dict[str, Any]:
    """Return the review in the form of the results file, for the first page."""
    review, unit = book.review, book.review.unit
    return {
        "unit": _unit(review),
        "standard": review.standard,
        "kit": {"version": __version__},
        "inputs": unit.raw,
        "verdicts": review.conclusion.verdicts,
        "route": review.conclusion.route,
        "quantities": _quantities(review),
        "checks": [check.entry() for check in review.conclusion.checks],
        "open_points": book.points,
    }


def _quantities(review: Review) -> dict[str, Any]:
    return {outcome.id: outcome.entry() for fragment in review.fragments for outcome in fragment.quantities}


def _unit(review: Review) -> dict[str, str]:
    identity = review.unit.identity
    return {"tag": identity.tag, "title": identity.title, "revision": identity.revision}


def _unconfirmed(review: Review) -> list[str]:
    return [check.id for check in review.conclusion.unconfirmed]


def summary(book: Workbook) -> Shown:
    """Show the first page: identity, verdicts, governing cases, limits unconfirmed, open points, cautions."""
    review = book.review
    unconfirmed = _unconfirmed(review)
    emitted = {"unit": _unit(review), "standard": review.standard, "unconfirmed": {"limits": len(unconfirmed)}}
    return Shown(summary_part(_whole(book), unconfirmed), emitted)


def unit_data(book: Workbook) -> Shown:
    """Show the unit file as given and the defaults that were used."""
    unit = book.review.unit
    defaults = {default.path: str(default.value) for default in unit.defaults}
    return Shown(unit_data_part(unit.raw, defaults), {"inputs": unit.raw, "defaults": defaults})


def requirement(book: Workbook) -> Shown:
    """Show what the standard asks of the unit; steps that the duty shows as well are worked there."""
    found = book.review.requirement
    worked = [(step.cell.name, step.arguments) for step in book.review.duty.fragment.steps]
    words = {True: "required", False: "extra"}
    html = requirement_part(
        found.fragment.entry(),
        [step for step in found.fragment.steps if (step.cell.name, step.arguments) not in worked],
        Markup("{} {}").format(
            found.category.name or f"none: {found.category.note}",
            clause(found.category.source, found.category.provenance),
        ),
        [(line.label, line.outcome.id, line.remark) for line in found.asked],
        [(kind.fault, words[bool(kind.required)]) for kind in found.faults],
    )
    return Shown(html, book.emit(found.fragment))


def duty(book: Workbook) -> Shown:
    """Show the fault currents of every case and the governing ones."""
    found = book.review.duty
    figures = duty_figures(found)
    algorithms = [made for made in _used(found.fragment) if isinstance(made, Algorithm)]
    html = duty_part(found.fragment.entry(), found.fragment.steps, figures, algorithms)
    return Shown(html, book.emit(found.fragment))


def thermal(book: Workbook) -> Shown:
    """Show the winding temperatures at the end of the fault."""
    found = book.review.thermal
    figures = thermal_figures(found)
    return Shown(thermal_part(found.fragment.entry(), found.fragment.steps, figures), book.emit(found.fragment))


def verdict(book: Workbook) -> Shown:
    """Show every check with its limit, the verdicts, and what the maker declares beside what was calculated."""
    review, made = book.review, book.review.conclusion
    compared = declared_table(review.declared.entry()["quantities"], _quantities(review))
    checks = [check.entry() for check in made.checks]
    html = render_verdict(made.verdicts, checks, _unconfirmed(review), made.route, compared)
    return Shown(html, book.emit(made.fragment, review.declared, verdicts=made.verdicts, route=made.route))


def open_point(book: Workbook) -> Shown:
    """Show what is open and what could not be assessed; emit all that no other part has."""
    missing = [item for fragment in book.review.fragments for item in fragment.entry()["missing"]]
    return Shown(open_point_part(book.points, missing), book.emit(*book.review.fragments))


def signature(book: Workbook) -> Shown:
    """Show signature lines and how to verify the record."""
    identity = book.review.unit.identity
    return Shown(signature_part(identity.tag, identity.revision), {})


def _used(fragment: Fragment) -> Iterable[Cell[Any] | Algorithm]:
    """Return the cells behind a fragment's results, once each, in order."""
    known = registry()
    names = dict.fromkeys(outcome.cell for outcome in fragment.quantities)
    return [known[name] for name in names if name in known]


def calculation(book: Workbook, name: str) -> Shown:
    """Show one cell of the library with every evaluation of it in this review.

    Raises
    ------
    InputError
        If the library has no such cell.
    """
    known = registry()
    if name not in known:
        raise InputError(f"calculation: must name a cell of the library, got '{name}'{did_you_mean(name, known)}.")
    made = known[name]
    if isinstance(made, Algorithm):
        return Shown(section(made.title, algorithm_block(made, anchor="calculation"), id=f"library-{name}"), {})
    steps = book.review.steps(name)
    content = formula_block(steps, anchor="calculation") if steps else note("No step of this review uses it.")
    return Shown(section(made.title, content, id=f"library-{name}"), book.emit(Fragment(steps=steps)))

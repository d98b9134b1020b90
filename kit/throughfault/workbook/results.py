"""The results file: fragments emitted by the notebook's cells, merged into one document."""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Any

import nbformat
from pydantic import ValidationError

from throughfault.errors import DeclarationError, RecordError, RunError
from throughfault.workbook.documents import RESULTS, RESULTS_LIMIT, ResultsFace
from throughfault.workbook.strict_json import model_faults, parse_strict, read_bounded, too_deep

__all__ = ["FORMAT", "MIME", "emitted_fragments", "lookup", "merge_fragments", "read_results", "results_bytes"]

FORMAT = "throughfault-results/1"
MIME = "application/vnd.throughfault.results+json"
LISTS = ("steps", "checks", "cases", "missing", "open_points")
SINGLE = ("verdicts", "route", "unit", "standard", "inputs", "defaults", "unconfirmed")


def emitted_fragments(notebook: nbformat.NotebookNode) -> list[dict[str, Any]]:
    """Return the result fragments that the cells of an executed notebook displayed, in order."""
    outputs = (output for cell in notebook.cells if cell.cell_type == "code" for output in cell.outputs)
    return [output.data[MIME] for output in outputs if MIME in output.get("data", {})]


def merge_fragments(fragments: Iterable[Mapping[str, Any]]) -> dict[str, Any]:
    """Merge fragments into one document.

    Raises
    ------
    RunError
        If two fragments carry the same id, or a single entry twice; all of them named.
    """
    merged: dict[str, Any] = {"quantities": {}, **{name: [] for name in LISTS}}
    twice: list[str] = []
    for fragment in fragments:
        for name in SINGLE:
            if name in fragment:
                twice.extend([name] if name in merged else [])
                merged[name] = fragment[name]
        for key, entry in fragment.get("quantities", {}).items():
            twice.extend([key] if key in merged["quantities"] else [])
            merged["quantities"][key] = entry
        for name in LISTS:
            known = {entry["id"] for entry in merged[name]}
            twice.extend(f"{name}: {entry['id']}" for entry in fragment.get(name, ()) if entry["id"] in known)
            merged[name].extend(fragment.get(name, ()))
    if twice:
        raise RunError(f"results: the same id was emitted twice: {', '.join(sorted(set(twice)))}.")
    return merged


def results_bytes(results: Mapping[str, Any]) -> bytes:
    """Return the results as the bytes of the file: readable, key order kept, no NaN."""
    return (json.dumps(results, indent=1, ensure_ascii=False, allow_nan=False) + "\n").encode("utf-8")


def read_results(record: Path) -> dict[str, Any]:
    """Read the results of a record, strictly and no more than a record may hold.

    Raises
    ------
    RecordError
        If the folder holds no readable results of a known format, or they lack what every record names.
    """
    try:
        results = parse_strict(read_bounded(record / RESULTS, RESULTS_LIMIT))
    except OSError:
        raise RecordError(f"{record}: must be a record folder, {RESULTS} is missing or cannot be read.") from None
    except ValueError as fault:
        raise RecordError(f"{record}: {RESULTS} {fault}.") from None
    if not isinstance(results, dict) or results.get("format") != FORMAT:
        raise RecordError(f"{record}: {RESULTS} must be of format {FORMAT}.")
    if too_deep(results):
        raise RecordError(f"{record}: {RESULTS} is nested too deeply to be read.")
    try:
        ResultsFace.model_validate(results)
    except ValidationError as error:
        raise RecordError(f"{record}: {RESULTS}: {'; '.join(model_faults(error))}.") from None
    return results


def _by_id(entries: Iterable[Mapping[str, Any]], wanted: str) -> tuple[Mapping[str, Any], str]:
    """Return the entry whose id begins the path, and the rest of the path (ids may hold slashes)."""
    fitting = [e for e in entries if wanted == e["id"] or wanted.startswith(e["id"] + "/")]
    entry = max(fitting, key=lambda e: len(e["id"]))
    return entry, wanted[len(entry["id"]) + 1 :]


def lookup(results: Mapping[str, Any], data_id: str) -> Any:
    """Return what an id shown on a record stands for.

    A quantity id, or a path: ``checks/<id>/limit``, ``cases/<id>/currents/HV/a/rms``,
    ``steps/<id>/result``, ``open_points/<id>/<value>``, ``inputs/rating/frequency``.

    Raises
    ------
    DeclarationError
        If nothing of that id stands in the results.
    """
    try:
        if data_id in results["quantities"]:
            return results["quantities"][data_id]["value"]
        head, _, rest = data_id.partition("/")
        found: Any = results[head]
        if head in LISTS:
            found, rest = _by_id(found, rest)
            if head == "open_points":
                found = found["values"]
        for key in rest.split("/") if rest else ():
            found = found[int(key)] if isinstance(found, list) else found[key]
        return found["value"] if isinstance(found, Mapping) and "value" in found else found
    except (KeyError, ValueError, IndexError, TypeError):
        raise DeclarationError(f"results: nothing stands under '{data_id}'.") from None

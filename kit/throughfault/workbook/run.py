"""Run a review: inputs and template in, whole record out; nothing is left when it fails."""

from __future__ import annotations

import shutil
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import nbformat
import papermill
from nbclient.exceptions import DeadKernelError
from papermill.exceptions import PapermillExecutionError

from throughfault import __version__
from throughfault.errors import RecordError, RunError
from throughfault.render.record import export_record, normalise
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.folder import recover_exchange, replace_record, staging_folder
from throughfault.workbook.inputs import Unit, read_unit
from throughfault.workbook.kernel import ENGINE, kernel_environment
from throughfault.workbook.manifest import inputs_sha256, write_manifest
from throughfault.workbook.results import FORMAT, emitted_fragments, merge_fragments, results_bytes
from throughfault.workbook.template import Template, find_template, read_template, shipped_templates

__all__ = ["Issued", "default_template", "fill_record", "review"]

UNIT_FILE = "unit.toml"
SCRATCH = ".scratch"
SHOWN_TRACEBACK = 12


@dataclass(frozen=True)
class Issued:
    """A record that was written."""

    folder: Path
    results: dict[str, Any]


def default_template(unit: Unit) -> str:
    """Return the template a unit file asks for: ``design`` where it has design data and the kit has one."""
    return "design" if unit.design is not None and "design" in shipped_templates() else "rating"


def review(unit_file: Path, out: Path, template: str | None = None, *, progress: bool = False) -> Issued:
    """Run the workbook on a unit file and write its record as ``<out>/<tag>-<revision>``.

    Raises
    ------
    InputError
        If the unit file or template is at fault, its standard is not carried, a signed record stands where this
        one would, or the record cannot be written.
    RunError
        If the workbook could not be executed. In every case nothing is written.
    """
    unit = read_unit(unit_file)
    rules_for(unit, str(unit_file))
    chosen = read_template(find_template(template or default_template(unit)))
    name = f"{unit.identity.tag}-{unit.identity.revision}"
    recover_exchange(out / name)
    _refuse_signed(out / name)
    with staging_folder(out, name) as staging, _storage(out):
        results = fill_record(staging, {UNIT_FILE: unit_file.read_bytes()}, chosen, progress=progress)
        replace_record(staging, out / name)
    return Issued(out / name, results)


def _refuse_signed(record: Path) -> None:
    """Say so before the work is done, and not only when it is to be put in place."""
    signatures = record / "signatures"
    if signatures.is_dir() and any(signatures.iterdir()):
        raise RecordError(f"{record}: is signed and stays as it is; give the unit file another revision.")


@contextmanager
def _storage(out: Path) -> Iterator[None]:
    try:
        yield
    except OSError as fault:
        raise RecordError(f"{out}: the record could not be written ({fault.strerror}); nothing was changed.") from fault


def fill_record(
    staging: Path, inputs: Mapping[str, bytes], template: Template, *, progress: bool = False
) -> dict[str, Any]:
    """Fill an empty folder with a whole unsigned record and return its results.

    Raises
    ------
    RunError
        If a cell fails, the kernel dies, or the page would load, run or restyle anything.
    """
    for name, data in inputs.items():
        target = staging / "inputs" / name
        target.parent.mkdir(parents=True, exist_ok=True)
        target.write_bytes(data)
    notebook = normalise(_execute(staging, template, progress=progress))
    results = _complete(merge_fragments(emitted_fragments(notebook)), inputs_sha256(staging), template)
    page = export_record(notebook, results)
    (staging / "record.html").write_text(page, encoding="utf-8", newline="\n")
    (staging / "results.json").write_bytes(results_bytes(results))
    nbformat.write(notebook, str(staging / "workbook.ipynb"))
    write_manifest(staging)
    return results


def _execute(staging: Path, template: Template, *, progress: bool) -> nbformat.NotebookNode:
    """Execute the template in the staging folder; its scratch files are gone afterwards."""
    scratch = staging / SCRATCH
    scratch.mkdir()
    source = scratch / "template.ipynb"
    source.write_bytes(template.data)
    try:
        with kernel_environment(scratch):
            return papermill.execute_notebook(
                str(source), None, parameters={"inputs": "inputs"}, engine_name=ENGINE, kernel_name="python3",
                cwd=str(staging), progress_bar=progress, request_save_on_cell_execute=False,
            )  # fmt: skip
    except PapermillExecutionError as fault:
        tail = "\n".join(str(fault.evalue).splitlines()[-SHOWN_TRACEBACK:])
        call = str(fault.source).strip().splitlines()[-1]
        raise RunError(f"{template.name}: the cell '{call}' failed: {fault.ename}: {tail}") from fault
    except DeadKernelError as fault:
        raise RunError(f"{template.name}: the kernel died while the workbook ran; nothing was written.") from fault
    finally:
        shutil.rmtree(scratch, ignore_errors=True)


def _complete(merged: dict[str, Any], digest: str, template: Template) -> dict[str, Any]:
    """Put the document in the order of the format, with what only the runner knows."""
    head = {
        "format": FORMAT,
        "unit": merged.pop("unit"),
        "standard": merged.pop("standard"),
        "kit": {"version": __version__},
        "inputs_sha256": digest,
        "template": {"name": template.name, "sha256": template.sha256},
        "verdicts": merged.pop("verdicts"),
        "route": merged.pop("route"),
        "inputs": merged.pop("inputs"),
    }
    return {**head, **merged}

"""Notebook templates assembled from the cell library."""

from __future__ import annotations

import contextlib
import os
from collections.abc import Sequence
from pathlib import Path

import nbformat
from nbformat.v4 import new_code_cell, new_notebook

import throughfault.cells
from throughfault.declare import registry
from throughfault.errors import InputError, TemplateError, did_you_mean
from throughfault.workbook.part import FRAME_AFTER, FRAME_BEFORE, PARTS
from throughfault.workbook.template import shipped_templates, template_faults

__all__ = ["assemble", "template_bytes", "write_template"]

_ = throughfault.cells  # importing it declares the library
FORMAT = "throughfault-template/1"
OPENING = "from throughfault import notebook as tf\n\nreview = tf.open_review(inputs)"


def _names(cells: Sequence[str]) -> list[str]:
    """Return the cell list in its frame: what every record carries is added when it is not named."""
    named = list(cells)
    before = [name for name in FRAME_BEFORE if name not in named]
    after = [name for name in FRAME_AFTER if name not in named]
    return [*before, *named, *after]


def _faults(cells: Sequence[str]) -> list[str]:
    if not cells:
        return ["--cells: must name at least one part of a workbook or cell of the library, got none."]
    known = [*PARTS, *registry()]
    faults = [
        f"--cells: must name parts of a workbook or cells of the library, got '{name}'{did_you_mean(name, known)}."
        for name in cells
        if name not in known
    ]
    twice = sorted({name for name in cells if list(cells).count(name) > 1})
    return faults + [f"--cells: '{name}' is named twice." for name in twice]


def assemble(cells: Sequence[str]) -> nbformat.NotebookNode:
    """Build a template from names of parts and of library cells, in the order given.

    Raises
    ------
    InputError
        With every unknown or repeated name.
    """
    if faults := _faults(cells):
        raise InputError(faults)
    made = [new_code_cell('inputs = "inputs"', metadata={"tags": ["parameters"]})]
    made.append(new_code_cell(OPENING, metadata={"tags": ["calculation"]}))
    for name in _names(cells):
        call = PARTS[name].call if name in PARTS else f'tf.calculation(review, "{name}")'
        tag = PARTS[name].tag if name in PARTS else "finding"
        made.append(new_code_cell(call, metadata={"tags": [tag]}))
    for position, cell in enumerate(made):
        cell["id"] = f"cell-{position:02d}"
    notebook = new_notebook(cells=made, metadata=_metadata(cells))
    if faults := template_faults(notebook, "assembled template"):
        raise TemplateError(faults)
    return notebook


def _metadata(cells: Sequence[str]) -> dict[str, object]:
    return {
        "kernelspec": {"display_name": "Python 3", "language": "python", "name": "python3"},
        "language_info": {"name": "python"},
        "throughfault": {"format": FORMAT, "cells": list(cells)},
    }


def template_bytes(notebook: nbformat.NotebookNode) -> bytes:
    """Return a template as the bytes of its file."""
    text = str(nbformat.writes(notebook, version=nbformat.NO_CONVERT))
    return (text.rstrip("\n") + "\n").encode("utf-8")


def write_template(cells: Sequence[str], name: str, folder: Path, *, replace: bool = False) -> Path:
    """Assemble a template and write it whole as ``<folder>/<name>.ipynb``.

    Raises
    ------
    InputError
        As `assemble`, or if the name is not a plain file name, is taken by a template and `replace` is not given, or
        the file cannot be written.
    """
    if not name or Path(name).name != name or name.startswith("."):
        raise InputError(f"NAME: must be a plain name without folder, got '{name}'.")
    target = folder / f"{name.removesuffix('.ipynb')}.ipynb"
    if not replace:
        _refuse_taken(target)
    data = template_bytes(assemble(cells))
    try:
        folder.mkdir(parents=True, exist_ok=True)
        _write_whole(target, data)
    except OSError as fault:
        raise InputError(f"{target}: cannot be written ({fault.strerror}).") from fault
    return target


def _refuse_taken(target: Path) -> None:
    if target.exists():
        raise InputError(f"{target}: exists already; --replace would replace it.")
    if target.stem in shipped_templates():
        raise InputError(
            f"NAME: '{target.stem}' is a template of the kit, which would be found first; take another name "
            "(--replace would write it all the same)."
        )


def _write_whole(target: Path, data: bytes) -> None:
    temporary = target.with_name(f".{target.name}.{os.getpid()}.part")
    try:
        temporary.write_bytes(data)
        temporary.replace(target)
    finally:
        with contextlib.suppress(FileNotFoundError):
            temporary.unlink()

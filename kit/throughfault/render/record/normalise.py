"""An executed notebook without what differs between two equal runs: ids, times, hosts."""

from __future__ import annotations

from typing import Any

from nbformat import NotebookNode, from_dict

__all__ = ["normalise"]

_CELL_METADATA = ("tags", "editable", "deletable")
_NOTEBOOK_METADATA = ("kernelspec", "language_info", "throughfault")
_KERNEL = {"display_name": "Python 3", "language": "python", "name": "python3"}


def _output(output: dict[str, Any], count: int) -> dict[str, Any]:
    kept = {key: value for key, value in output.items() if key != "transient"}
    if "metadata" in kept:
        kept["metadata"] = {}
    if "execution_count" in kept:
        kept["execution_count"] = count
    return kept


def _cell(cell: dict[str, Any], position: int, count: int) -> dict[str, Any]:
    kept = dict(cell)
    kept["id"] = f"cell-{position:02d}"
    kept["metadata"] = {key: value for key, value in sorted(cell["metadata"].items()) if key in _CELL_METADATA}
    if cell["cell_type"] == "code":
        kept["execution_count"] = count if cell["execution_count"] is not None else None
        kept["outputs"] = [_output(output, count) for output in cell["outputs"]]
    return kept


def normalise(notebook: NotebookNode) -> NotebookNode:
    """Return a copy with cells numbered and every trace of time, host and kernel dropped."""
    cells, count = [], 0
    for position, cell in enumerate(notebook["cells"], start=1):
        count += cell["cell_type"] == "code"
        cells.append(_cell(cell, position, count))
    metadata = {key: value for key, value in sorted(notebook["metadata"].items()) if key in _NOTEBOOK_METADATA}
    if "language_info" in metadata:
        metadata["language_info"] = {"name": "python"}
    if "kernelspec" in metadata:
        metadata["kernelspec"] = _KERNEL
    made: NotebookNode = from_dict({"cells": cells, "metadata": metadata, "nbformat": 4, "nbformat_minor": 5})
    return made

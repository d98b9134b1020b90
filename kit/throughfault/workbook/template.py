"""Notebook templates: found by name or path, and guarded before anything runs."""

from __future__ import annotations

import ast
import hashlib
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import nbformat

from throughfault.errors import TemplateError, did_you_mean
from throughfault.workbook.resources import templates_folder

__all__ = ["TAGS", "Template", "find_template", "read_template", "shipped_templates", "template_faults"]

TAGS = ("parameters", "calculation", "finding", "note", "signature")
PARAMETER = "inputs"
ALLOWED_IMPORT = "throughfault"
_COMPUTING = (ast.BinOp, ast.AugAssign, ast.Compare, ast.Lambda, ast.FunctionDef, ast.AsyncFunctionDef, ast.ClassDef)
_COMPUTING_STATEMENTS = (
    ast.For, ast.While, ast.With, ast.Try, ast.ListComp, ast.DictComp, ast.SetComp, ast.GeneratorExp,
)  # fmt: skip


@dataclass(frozen=True)
class Template:
    """A template as read: name, bytes, hash, notebook."""

    name: str
    data: bytes
    sha256: str
    notebook: nbformat.NotebookNode
    shipped: bool


def shipped_templates() -> tuple[str, ...]:
    """Return the names of the templates that travel with the kit."""
    return tuple(sorted(path.stem for path in templates_folder().glob("*.ipynb")))


def find_template(name: str) -> Path:
    """Return the file of a template given by shipped name, by name in ``./templates``, or by path.

    Raises
    ------
    TemplateError
        If there is none.
    """
    candidates = [templates_folder() / f"{name}.ipynb", Path("templates") / f"{name}.ipynb"]
    if name.endswith(".ipynb"):
        candidates = [Path(name)]
    found = next((path for path in candidates if path.is_file()), None)
    if found is None:
        known = shipped_templates()
        raise TemplateError(
            f"--template: must be one of {', '.join(known)} or the path of a .ipynb file, "
            f"got '{name}'{did_you_mean(name, known)}."
        )
    return found


def read_template(path: Path) -> Template:
    """Read and guard a template.

    Raises
    ------
    TemplateError
        With every fault: not a notebook, outputs left in, unknown tags, no or several parameters cells,
        code that computes or imports.
    """
    data = path.read_bytes()
    try:
        notebook = nbformat.reads(data.decode("utf-8"), as_version=nbformat.NO_CONVERT)
        nbformat.validate(notebook)
    except Exception as fault:  # noqa: BLE001 - the reader's own errors are of many kinds
        reason = str(fault).splitlines()[0][:120] if str(fault) else type(fault).__name__
        raise TemplateError(f"{path.name}: must be a notebook (nbformat 4.5), could not be read: {reason}") from None
    faults = template_faults(notebook, path.name)
    if faults:
        raise TemplateError(faults)
    shipped = path.resolve().parent == templates_folder().resolve()
    return Template(path.stem, data, hashlib.sha256(data).hexdigest(), notebook, shipped)


def template_faults(notebook: nbformat.NotebookNode, name: str) -> list[str]:
    """Return every reason why a notebook may not serve as a template."""
    code = [cell for cell in notebook.cells if cell.cell_type == "code"]
    parameters = [cell for cell in code if "parameters" in cell.metadata.get("tags", [])]
    faults = []
    if len(parameters) != 1:
        faults.append(f"{name}: must have exactly one code cell tagged 'parameters', has {len(parameters)}.")
    for position, cell in enumerate(notebook.cells, start=1):
        faults.extend(f"{name}: cell {position}: {fault}" for fault in _cell_faults(cell))
    return faults


def _cell_faults(cell: nbformat.NotebookNode) -> Iterator[str]:
    tags = cell.metadata.get("tags", [])
    for tag in tags:
        if tag not in TAGS:
            yield f"tag must be one of {', '.join(TAGS)}, got '{tag}'{did_you_mean(tag, TAGS)}."
    if cell.cell_type != "code":
        return
    if cell.get("outputs") or cell.get("execution_count") is not None:
        yield "must be stored without outputs and execution count."
    try:
        tree = ast.parse(cell.source)
    except SyntaxError as fault:
        yield f"must be Python, line {fault.lineno} cannot be read."
        return
    yield from _parameter_faults(tree) if "parameters" in tags else _code_faults(tree)


def _parameter_faults(tree: ast.Module) -> Iterator[str]:
    match tree.body:
        case [ast.Assign(targets=[ast.Name(id=name)], value=ast.Constant(value=str()))] if name == PARAMETER:
            return
    yield f'the parameters cell must hold the one line {PARAMETER} = "...".'


def _code_faults(tree: ast.Module) -> Iterator[str]:
    for node in ast.walk(tree):
        if isinstance(node, _COMPUTING + _COMPUTING_STATEMENTS):
            line = ast.unparse(node).splitlines()[0][:60]
            yield f"a notebook calls and does not compute; '{line}' belongs in a cell of the library."
        elif isinstance(node, ast.Import | ast.ImportFrom) and not _allowed(node):
            yield f"may import throughfault.notebook only, got '{ast.unparse(node)}'."


def _allowed(node: ast.Import | ast.ImportFrom) -> bool:
    if isinstance(node, ast.Import):
        return False
    return node.module == ALLOWED_IMPORT and [alias.name for alias in node.names] == ["notebook"]

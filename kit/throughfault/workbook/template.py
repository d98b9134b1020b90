"""Notebook templates: found by name or path, and guarded before anything runs."""

from __future__ import annotations

import ast
import hashlib
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import nbformat

from throughfault.errors import TemplateError, did_you_mean
from throughfault.workbook.part import PARTS
from throughfault.workbook.resources import templates_folder

__all__ = ["TAGS", "Template", "find_template", "read_template", "shipped_templates", "template_faults"]

TAGS = ("parameters", "calculation", "finding", "note", "signature")
PARAMETER = "inputs"
ALLOWED_IMPORT = "throughfault"
#: what a notebook may call of it
CALLS = frozenset({"open_review", "calculation", *PARTS})
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
        With every fault: cannot be read, not a notebook, outputs left in, unknown tags, no or several parameters cells,
        code that does more than call `throughfault.notebook`.
    """
    data = _bytes_of(path)
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


def _bytes_of(path: Path) -> bytes:
    if path.exists() and not path.is_file():  # a named pipe would never end
        raise TemplateError(f"--template: must be the path of a .ipynb file, got '{path}', which is no file.")
    try:
        return path.read_bytes()
    except OSError as fault:
        raise TemplateError(
            f"--template: must be the path of a .ipynb file, got '{path}', which cannot be read ({fault.strerror})."
        ) from None


def template_faults(notebook: nbformat.NotebookNode, name: str) -> list[str]:
    """Return every reason why a notebook may not serve as a template."""
    code = [cell for cell in notebook.cells if cell.cell_type == "code"]
    parameters = [cell for cell in code if "parameters" in cell.metadata.get("tags", [])]
    faults = []
    if len(parameters) != 1:
        faults.append(f"{name}: must have exactly one code cell tagged 'parameters', has {len(parameters)}.")
    imported: set[str] = set()
    for position, cell in enumerate(notebook.cells, start=1):
        faults.extend(f"{name}: cell {position}: {fault}" for fault in _cell_faults(cell, imported))
    return faults


def _cell_faults(cell: nbformat.NotebookNode, imported: set[str]) -> Iterator[str]:
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
    except (ValueError, RecursionError, MemoryError):  # a NUL, or brackets beyond what the reader holds
        yield "must be Python, and cannot be read."
        return
    yield from _parameter_faults(tree) if "parameters" in tags else _code_faults(tree, imported)


def _parameter_faults(tree: ast.Module) -> Iterator[str]:
    match tree.body:
        case [ast.Assign(targets=[ast.Name(id=name)], value=ast.Constant(value=str()))] if name == PARAMETER:
            return
    yield f'the parameters cell must hold the one line {PARAMETER} = "...".'


def _code_faults(tree: ast.Module, imported: set[str]) -> Iterator[str]:
    """Yield a fault for every statement but the import, calls on what it imports, and names given to such calls."""
    for statement in tree.body:
        if isinstance(statement, ast.ImportFrom) and _allowed(statement):
            imported.update(alias.asname or alias.name for alias in statement.names)
        elif not _is_call(statement, imported):
            yield _fault_of(statement)


def _is_call(statement: ast.stmt, imported: set[str]) -> bool:
    match statement:
        case ast.Assign(targets=[ast.Name(id=name)], value=ast.Call() as call):
            if name in imported or name.startswith("_"):
                return False
        case ast.Expr(value=ast.Call() as call):
            pass
        case _:
            return False
    match call:
        case ast.Call(func=ast.Attribute(value=ast.Name(id=module), attr=function), args=arguments, keywords=[]):
            return module in imported and function in CALLS and all(_is_plain(argument) for argument in arguments)
    return False


def _is_plain(argument: ast.expr) -> bool:
    match argument:
        case ast.Name(id=name):
            return not name.startswith("_")
        case ast.Constant(value=str()):
            return True
    return False


def _fault_of(statement: ast.stmt) -> str:
    """Say what is wrong with a statement: it computes, it imports, or it calls something else."""
    nodes = list(ast.walk(statement))
    computing = next((node for node in nodes if isinstance(node, _COMPUTING + _COMPUTING_STATEMENTS)), None)
    if computing is not None:
        return f"a notebook calls and does not compute; '{_line(computing)}' belongs in a cell of the library."
    imports = next((node for node in nodes if isinstance(node, ast.Import | ast.ImportFrom)), None)
    if imports is not None:
        return f"may import throughfault.notebook only, got '{_line(imports)}'."
    return f"may call throughfault.notebook only, with names and texts, got '{_line(statement)}'."


def _line(node: ast.AST) -> str:
    try:
        return ast.unparse(node).splitlines()[0][:60]
    except RecursionError:
        return "..."


def _allowed(node: ast.ImportFrom) -> bool:
    module = node.module == ALLOWED_IMPORT and node.level == 0
    names = [(alias.name, (alias.asname or alias.name).startswith("_")) for alias in node.names]
    return module and names == [("notebook", False)]

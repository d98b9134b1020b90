"""The schema page: every key of the unit file in tables, made from the model."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any, get_args, get_origin

from pydantic.fields import FieldInfo

from throughfault.workbook.inputs.annotations import leaf_of, plain_type
from throughfault.workbook.inputs.leaves import Leaf
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.section import Section

__all__ = ["schema_page"]

_INTRODUCTION = """# The unit file

One TOML file describes one transformer. This page is made from the model that reads the file.

- Quantities are text: a number and a unit of the list, `"132 kV"`. Bare numbers stand for counts and ratios only.
- A file is UTF-8 text of at most 1 MiB, a line of at most 1000 characters.
- Unknown keys, missing or wrong units and contradictions are refused, all of them in one report.
- `<W>` stands for the name of a winding, `<t>` of a tapping, `<C>` of a coil, `<id>` for a result id.
  Names have at most 16 letters, digits and underscores and begin with a letter.
- A key that is neither required nor has a default may be left out; what cannot be judged without it is not assessed.
"""
#: how the names in a table of tables are written on the page
_NAMES = {
    "windings": "<W>", "tappings": "<t>", "terminals": "<W>", "earthing": "<W>", "bushings": "<W>", "neutral": "<W>",
    "clamping_share": "<C>", "limits": '"<id>"', "declared": '"<id>"',
}  # fmt: skip


def schema_page() -> str:
    """Return the page as Markdown."""
    return _INTRODUCTION + "".join(f"\n{part}" for part in _tables(UnitFile, "", "the top of the file"))


def _tables(section: type[Section], path: str, heading: str) -> Iterator[str]:
    """Yield the table of a section and of those inside it, in the order of the model."""
    rows, inner = [], []
    for name, field in section.model_fields.items():
        kind = plain_type(field.annotation)
        where = path if name == "terminals" else f"{path}.{name}" if path else name
        entry = _entry_type(kind)
        if _is_section(kind):
            inner.append((kind, where, f"`[{where}]`"))
        elif _is_section(entry) and get_origin(kind) is dict:
            inner.append((entry, f"{where}.{_NAMES[name]}", f"`[{where}.{_NAMES[name]}]`"))
        elif _is_section(entry):
            inner.append((entry, where, f"`[[{where}]]`"))
        else:
            rows.append(_row(name, field, entry if get_origin(kind) is dict else None))
    if rows:
        about = (section.__doc__ or "").strip().split("\n")[0].replace("``", "`")
        head = "| key | meaning | must be | unit | required or default | source |\n|---|---|---|---|---|---|\n"
        yield f"## {heading[0].upper()}{heading[1:]}\n\n{about}\n\n{head}{''.join(rows)}"
    for kind, where, title in inner:
        yield from _tables(kind, where, title)


def _row(name: str, field: FieldInfo, entry: Any) -> str:
    extra = field.json_schema_extra if isinstance(field.json_schema_extra, dict) else {}
    leaf = leaf_of(field) if entry is None else _leaf_in(field)
    label = name if entry is None else f"{name}.{_NAMES[name]}"
    wanted = leaf.wanted.split(" (unit one of")[0] if leaf else "-"
    cells = [
        f"`{label}`",
        field.description or "",
        wanted,
        leaf.unit if leaf else "-",
        "required" if field.is_required() else _default(field, str(extra.get("default_in_words", ""))),
        str(extra.get("source", "")) or "-",
    ]
    return "| " + " | ".join(cell.replace("|", "\\|") for cell in cells) + " |\n"


def _default(field: FieldInfo, words: str) -> str:
    value = field.get_default(call_default_factory=True)
    if words:
        return words
    if value is None or value == {}:
        return "none"
    if isinstance(value, bool):
        return str(value).lower()
    return f"{value:g}" if isinstance(value, float) else str(value)


def _leaf_in(field: FieldInfo) -> Leaf | None:
    """Return the leaf of the values in a table."""
    value = get_args(plain_type(field.annotation))[-1]
    return next((item for item in getattr(value, "__metadata__", ()) if isinstance(item, Leaf)), None)


def _entry_type(kind: Any) -> Any:
    inner = [argument for argument in get_args(kind) if argument is not Ellipsis]
    return plain_type(inner[-1]) if inner and get_origin(kind) in (dict, tuple) else None


def _is_section(kind: Any) -> bool:
    return isinstance(kind, type) and issubclass(kind, Section)

"""The unit file as it was given, key by key, and the defaults that were used."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from markupsafe import Markup

from throughfault.render.html import Text, data, definitions, identity, joined, note, section, slug, table
from throughfault.render.numbers import full_value
from throughfault.render.parts.result import words

__all__ = ["unit_data_part"]

WIDEST = 6  # columns of given values that fit on A4
Path = tuple[str, ...]
_PLAIN = (str, int, float, bool)


def _leaves(node: Any, path: Path) -> Iterator[tuple[Path, Any]]:
    """Yield every value below a node with its path; a list of plain values is one leaf."""
    if isinstance(node, Mapping):
        for key, value in node.items():
            yield from _leaves(value, (*path, str(key)))
    elif isinstance(node, list | tuple) and not all(isinstance(item, _PLAIN) for item in node):
        for index, item in enumerate(node):
            yield from _leaves(item, (*path, str(index)))
    else:
        yield path, node


def _given(path: Path, value: Any) -> Markup:
    """Show one value as it was typed."""
    name = "/".join(("inputs", *path))
    if isinstance(value, list | tuple):
        return joined((data(f"{name}/{i}", item, full_value(item)) for i, item in enumerate(value)), ", ")
    return data(name, value, full_value(value))


def _label(path: Path) -> Markup:
    return identity(words(".".join(path)))


def _facts(node: Mapping[str, Any], path: Path) -> Markup:
    pairs: list[tuple[Text, Text]] = [(_label(p[len(path) :]), _given(p, v)) for p, v in _leaves(node, path)]
    return definitions(pairs) if pairs else Markup("")


def _matrix(title: Text, columns: Sequence[tuple[str, Any, Path]]) -> Markup:
    """Set alike entries beside each other: one row a key, one column an entry; wide ones in several tables."""
    parts = []
    for start in range(0, len(columns), WIDEST):
        these = columns[start : start + WIDEST]
        held = [{p[len(path) :]: _given(p, v) for p, v in _leaves(node, path)} for _, node, path in these]
        keys = dict.fromkeys(key for column in held for key in column)
        rows: list[list[Text]] = [[_label(key), *(column.get(key, "") for column in held)] for key in keys]
        parts.append(table(title, ["Key", *(identity(name) for name, _, _ in these)], rows, "given"))
    return joined(parts)


def _columns(node: Any, path: Path, windings: Sequence[str]) -> list[tuple[str, Any, Path]] | None:
    """Return the entries of a node that stand beside each other, or None where it is no such node."""
    if isinstance(node, Mapping) and node and all(isinstance(v, Mapping) and k in windings for k, v in node.items()):
        return [(str(key), value, (*path, str(key))) for key, value in node.items()]
    if isinstance(node, list | tuple) and node and all(isinstance(item, Mapping) for item in node):
        return [(_entry_name(item, index), item, (*path, str(index))) for index, item in enumerate(node)]
    return None


def _entry_name(item: Mapping[str, Any], index: int) -> str:
    between = item.get("between")
    pair = "-".join(map(str, between)) if isinstance(between, list | tuple) else ""
    named = " ".join(str(part) for part in (pair, item.get("tapping", "")) if part)
    return str(item.get("name", "")) or named or f"{index + 1}"


def _block(key: str, node: Any, path: Path, windings: Sequence[str]) -> Markup:
    """Show one table of the unit file."""
    if columns := _columns(node, path, windings):
        return _matrix("By winding" if isinstance(node, Mapping) else "By entry", columns)
    if not isinstance(node, Mapping):
        return definitions([(_label((key,)), _given(path, node))])
    beside = {k: v for k, v in node.items() if isinstance(v, Mapping) and k in windings}
    apart = {k: v for k, v in node.items() if k not in beside and _columns(v, (*path, k), windings)}
    plain = {k: v for k, v in node.items() if k not in beside and k not in apart}
    parts = [_facts(plain, path)]
    if beside:
        parts.append(_matrix("By winding", [(k, v, (*path, k)) for k, v in beside.items()]))
    parts += [_block(k, v, (*path, k), windings) for k, v in apart.items()]
    return joined(parts)


def unit_data_part(inputs: Mapping[str, Any], defaults: Mapping[str, str]) -> Markup:
    """Show every key of the unit file as typed, and the defaults in force.

    Parameters
    ----------
    inputs
        The unit file as it stands in the results file.
    defaults
        Value in words by key path; the results file holds them under ``defaults``.
    """
    windings = tuple(inputs.get("windings", {}))
    plain = {key: value for key, value in inputs.items() if not isinstance(value, Mapping | list)}
    parts: list[Text] = [_facts(plain, ())]
    for key, node in inputs.items():
        if key not in plain and node:
            shown = _block(key, node, (key,), windings)
            parts.append(section(words(key).capitalize(), shown, id=f"given-{slug(key)}", level=3))
    rows: list[list[Text]] = [[identity(path), data(f"defaults/{path}", value)] for path, value in defaults.items()]
    none = note("No default was needed.")
    used = table("Defaults in force", ["Key not given", "Value taken"], rows, "given") if rows else none
    parts.append(section("Defaults that were used", used, id="given-defaults", level=3))
    return section("Unit data as given", *parts, id="unit-data")

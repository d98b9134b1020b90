"""Which defaults a unit file leaves in force."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from throughfault.quantities import Quantity
from throughfault.tables import table
from throughfault.workbook.inputs.lines import KeyPath, path_text
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.refused_rows import has_path
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.unit import Default
from throughfault.workbook.inputs.windings import Winding

__all__ = ["defaults_used"]

#: optional keys whose absence means "none", nothing is assumed for them
_NONE: tuple[Any, ...] = ((), {}, None)


#: keys of a winding that another key or table stands for
_OF_WINDING = ("thermal_class", "start_temperature", "fault_duration", "stabilising")


def defaults_used(file: UnitFile) -> tuple[Default, ...]:
    """Return each default that stands for a key the file does not give, in the order of the file."""
    return (*_of(file, ()), *_settled(file))


def _of(section: Section, path: KeyPath) -> Iterator[Default]:
    for name, field in type(section).model_fields.items():
        value, where = getattr(section, name), (*path, name)
        extra = field.json_schema_extra
        words = str(extra["default_in_words"]) if isinstance(extra, dict) else ""
        if name in section.model_fields_set:
            yield from _inside(value, path if name == "terminals" else where)
        elif isinstance(value, Section):
            yield from _of(value, where)
        elif value not in _NONE and not _follows(section, name):
            yield Default(path_text(where), _shown(value))
        elif words and not _follows(section, name):
            yield Default(path_text(where), words)


def _inside(value: Any, path: KeyPath) -> Iterator[Default]:
    if isinstance(value, Section):
        yield from _of(value, path)
    elif isinstance(value, Mapping):
        for name, item in value.items():
            yield from _inside(item, (*path, name))
    elif isinstance(value, tuple):
        for index, item in enumerate(value):
            yield from _inside(item, (*path, index))


def _follows(section: Section, name: str) -> bool:
    """Tell whether the absent key says nothing: another one stands for it, or the default is listed with its value."""
    given = section.model_fields_set
    if name == "resistance":
        return "load_loss" in given
    if name == "column":
        return getattr(section, "short_circuit_power", None) != "table"
    if name in {"x_over_r", "x0_over_x1"}:
        return "short_circuit_power" not in given
    if isinstance(section, Winding) and name in _OF_WINDING:
        return True
    return name in {"voltage", "earthing", "strands", "tappings", "zero_sequence", "conductor_section"}


def _settled(file: UnitFile) -> Iterator[Default]:
    """Yield the defaults that take their value from other keys."""
    for name, source in file.system.terminals.items():
        if source.voltage is None:
            yield Default(f"system.{name}.voltage", file.windings[name].rated_voltage)
    for name, connection in list(file.connections.items())[1:]:
        if (
            connection.letter == "D"
            and not connection.stabilising
            and "stabilising" not in file.windings[name].model_fields_set
        ):
            yield Default(f"windings.{name}.stabilising", "false")
    for name, connection in file.connections.items():
        if connection.neutral and name not in file.earthing:
            yield Default(f"earthing.{name}", "solid")
    words = _zero_sequence(file)
    if words:
        yield Default("impedances.zero_sequence", words)


def _zero_sequence(file: UnitFile) -> str:
    """Say what stands for the zero-sequence impedances that are not given; nothing where they do not matter."""
    earthed = any(c.neutral and file.earthing.get(name, "solid") != "isolated" for name, c in file.connections.items())
    lacking = any(row.zero_sequence is None and has_path(file, row) for row in file.impedances)
    if file.group.single_phase or not earthed or not lacking:
        return ""
    if file.rating.core != "three-limb":
        return "equal to the impedance"
    if any(connection.letter == "D" for connection in file.group.windings):
        (shares,) = table("iec60076_8_1997_zero_sequence_share").rows
        return f"between {shares['share_least']:g} and {shares['share_greatest']:g} times the impedance, both run"
    # Without the magnetising impedance the faults that need one are not run.
    return "equal to the impedance" if file.zero_sequence is not None else ""


def _shown(value: Any) -> Quantity | str:
    if isinstance(value, bool):
        return str(value).lower()
    return Quantity(float(value), "1") if isinstance(value, int | float) else value

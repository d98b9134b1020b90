"""The unit file: read, validate, describe and start one."""

from throughfault.workbook.inputs.reading import read_unit, read_unit_text
from throughfault.workbook.inputs.unit import Default, Unit
from throughfault.workbook.inputs.vector_group import VectorGroup, WindingConnection, parse_vector_group

__all__ = [
    "Default",
    "Unit",
    "VectorGroup",
    "WindingConnection",
    "parse_vector_group",
    "read_unit",
    "read_unit_text",
]

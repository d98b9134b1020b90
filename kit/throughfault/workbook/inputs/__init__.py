"""The unit file: read, validate, describe and start one."""

from throughfault.workbook.inputs.design_data import (
    conductor_section,
    phase_voltage,
    series_turns,
    turn_section,
)
from throughfault.workbook.inputs.limits import Limit, ProofStressShare
from throughfault.workbook.inputs.reading import read_unit, read_unit_text
from throughfault.workbook.inputs.schema import json_schema
from throughfault.workbook.inputs.schema_page import schema_page
from throughfault.workbook.inputs.starter import KINDS_OF_UNIT, starter
from throughfault.workbook.inputs.unit import Default, Unit
from throughfault.workbook.inputs.vector_group import VectorGroup, WindingConnection, parse_vector_group

__all__ = [
    "KINDS_OF_UNIT",
    "Default",
    "Limit",
    "ProofStressShare",
    "Unit",
    "VectorGroup",
    "WindingConnection",
    "conductor_section",
    "json_schema",
    "parse_vector_group",
    "phase_voltage",
    "read_unit",
    "read_unit_text",
    "schema_page",
    "series_turns",
    "starter",
    "turn_section",
]

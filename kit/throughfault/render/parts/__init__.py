"""The sections of a record, one function each; they take entries of the results file and give HTML."""

from throughfault.render.parts.caution import cautions
from throughfault.render.parts.duty import duty_part
from throughfault.render.parts.finding import finding_part, requirement_part, thermal_part
from throughfault.render.parts.signature import signature_part
from throughfault.render.parts.summary import summary_part
from throughfault.render.parts.unit_data import unit_data_part
from throughfault.render.parts.verdict import declared_table, open_point_part, verdict_part

__all__ = [
    "cautions",
    "declared_table",
    "duty_part",
    "finding_part",
    "open_point_part",
    "requirement_part",
    "signature_part",
    "summary_part",
    "thermal_part",
    "unit_data_part",
    "verdict_part",
]

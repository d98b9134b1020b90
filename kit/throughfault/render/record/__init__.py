"""The record: one HTML page that opens without network or script, made from an executed notebook."""

from throughfault.render.record.exporter import RecordExporter, export_record
from throughfault.render.record.lint import lint
from throughfault.render.record.normalise import normalise
from throughfault.render.record.shown import data_ids, loose_digits

__all__ = [
    "RecordExporter",
    "data_ids",
    "export_record",
    "lint",
    "loose_digits",
    "normalise",
]

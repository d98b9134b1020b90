"""Figures of a record: vector images with text alternative, told apart by line and marker, not by colour."""

from throughfault.render.plots.duty import duty_by_case
from throughfault.render.plots.style import figure_html, svg_bytes
from throughfault.render.plots.temperature import temperature_curve
from throughfault.render.plots.through_fault import Curve, UnitPoint, through_fault_curve
from throughfault.render.plots.wave import fault_wave

__all__ = [
    "Curve",
    "UnitPoint",
    "duty_by_case",
    "fault_wave",
    "figure_html",
    "svg_bytes",
    "temperature_curve",
    "through_fault_curve",
]

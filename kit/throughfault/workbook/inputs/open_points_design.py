"""What is unusual but possible in a mechanical design."""

from __future__ import annotations

from collections.abc import Iterator

from throughfault.declare import OpenPoint
from throughfault.quantities import Quantity
from throughfault.workbook.inputs.design import Design
from throughfault.workbook.inputs.design_data import radial_fill, turn_section
from throughfault.workbook.inputs.refused_design import turn_deviations
from throughfault.workbook.inputs.unit import Unit

NOTED_TURNS = 0.005
USUAL_FILL = (0.60, 1.00)
NOTED_SECTION = 0.05  # square corners alone make a section up to some per cent too large


def turns_off(unit: Unit, design: Design) -> Iterator[OpenPoint]:
    """Find turns that follow the voltages only roughly."""
    for name, reference, tapping, off in turn_deviations(unit, design):
        if abs(off) > NOTED_TURNS:
            text = (
                f"The turns of {name} over {reference} at tapping '{tapping}' are {{off}} off "
                "the ratio of the voltages."
            )
            yield OpenPoint(f"input.{name}.{tapping}.turns", text, {"off": Quantity(100.0 * off, "%")})


def build_filled(_unit: Unit, design: Design) -> Iterator[OpenPoint]:
    """Find coils whose conductors do not fit, or hardly fill, the radial build."""
    for coil in design.coils:
        fill = radial_fill(coil)
        if not USUAL_FILL[0] <= fill <= USUAL_FILL[1]:
            text = (
                f"The covered conductors of coil {coil.name} fill {{fill}} of its radial build; "
                "usual are {least} to {most}."
            )
            least, most = (Quantity(100.0 * bound, "%") for bound in USUAL_FILL)
            values = {"fill": Quantity(100.0 * fill, "%"), "least": least, "most": most}
            yield OpenPoint(f"input.{coil.name}.fill", text, values, "common practice")


def section_and_strands(unit: Unit, design: Design) -> Iterator[OpenPoint]:
    """Compare the section given with that of the strands; the one given is used."""
    for coil in design.coils:
        given, strands = unit.windings[coil.winding].conductor_section, turn_section(coil)
        if given is None or strands is None:
            continue
        if abs(strands / given.to("mm^2") - 1.0) > NOTED_SECTION:
            text = (
                f"The strands of coil {coil.name} make a turn of {{strands}}, conductor_section of {coil.winding} is "
                "{given}; stresses use the latter."
            )
            values = {"strands": Quantity(strands, "mm^2"), "given": given}
            yield OpenPoint(f"input.{coil.name}.section", text, values)


def windings_without_coil(unit: Unit, design: Design) -> Iterator[OpenPoint]:
    """Find windings that no coil belongs to."""
    wound = {coil.winding for coil in design.coils}
    for name in unit.windings:
        if name not in wound:
            text = f"The design has no coil of {name}; its field and forces are not assessed."
            yield OpenPoint(f"input.{name}.no_coil", text)


def coils_in_order(_unit: Unit, design: Design) -> Iterator[OpenPoint]:
    """Find coils that do not stand innermost first."""
    for before, coil in zip(design.coils, design.coils[1:], strict=False):
        if coil.inner_radius.to("mm") < before.inner_radius.to("mm"):
            text = (
                f"Coil {coil.name} stands inside coil {before.name}, which is listed before it; innermost comes first."
            )
            yield OpenPoint(f"input.{coil.name}.order", text)


DESIGN_POINTS = (turns_off, build_filled, section_and_strands, windings_without_coil, coils_in_order)

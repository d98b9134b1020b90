"""Contradictions within the mechanical design, and of the design with the rating."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from throughfault.workbook.inputs.design import Block, Coil, Design
from throughfault.workbook.inputs.design_data import Described, phase_voltage, series_turns
from throughfault.workbook.inputs.messages import Fault, unknown_name
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.windings import PRINCIPAL

TOUCH = 1e-6  # mm; coils and blocks that share a face do not overlap
REFUSED_TURNS = 0.10  # relative difference of the ratio of turns from that of the voltages


def turn_deviations(file: Described, design: Design) -> Iterator[tuple[str, str, str, float]]:
    """Yield for each pair of wound windings the tapping at which turns and voltages differ most.

    Yields
    ------
    tuple
        Winding, reference winding, tapping, relative difference of the ratio of turns from that of the voltages.
    """
    wound = [name for name in file.windings if series_turns(design, name) > 0.0]
    for name in wound[:-1]:
        reference = wound[-1]
        tapped = dict.fromkeys([PRINCIPAL, *file.windings[name].tappings, *file.windings[reference].tappings])
        found = {tapping: _deviation(file, design, (name, reference), tapping) for tapping in tapped}
        worst = max(found, key=lambda tapping: abs(found[tapping]))
        yield name, reference, worst, found[worst]


def _deviation(file: Described, design: Design, pair: tuple[str, str], tapping: str) -> float:
    turns = [series_turns(design, name, tapping) for name in pair]
    voltages = [phase_voltage(file, name, tapping) for name in pair]
    if min(*turns, *voltages) <= 0.0:  # a fault of its own
        return 0.0
    return turns[0] / turns[1] * voltages[1] / voltages[0] - 1.0


def positive_turns(file: UnitFile, design: Design) -> Iterator[Fault]:
    """See that every wound winding has turns at every tapping."""
    for name in dict.fromkeys(coil.winding for coil in design.coils if coil.winding in file.windings):
        for tapping in file.tapping_names:
            turns = series_turns(design, name, tapping)
            if turns <= 0.0:
                text = f"must give '{name}' turns at every tapping, got {turns:.6g} in series at '{tapping}'."
                yield Fault(("design", "coils"), text)


def turns_and_voltages(file: UnitFile, design: Design) -> Iterator[Fault]:
    """Compare the ratio of turns with that of the voltages."""
    if any(coil.winding not in file.windings for coil in design.coils):
        return  # a fault of its own; the turns of a winding are not all known
    for name, reference, tapping, off in turn_deviations(file, design):
        if abs(off) > REFUSED_TURNS:
            text = (
                f"must have turns that follow the voltages within {100.0 * REFUSED_TURNS:g} %, got '{name}' over "
                f"'{reference}' {100.0 * off:+.3g} % off at tapping '{tapping}'."
            )
            yield Fault(("design", "coils"), text)


def coil_names(_file: UnitFile, design: Design) -> Iterator[Fault]:
    """Find names used twice."""
    seen: dict[str, int] = {}
    for index, coil in enumerate(design.coils):
        first = seen.setdefault(coil.name.casefold(), index)
        if first != index:
            other = design.coils[first].name
            yield Fault(("design", "coils", index, "name"), f"repeats the name of coil {first + 1}, '{other}'.")


def coils_apart(_file: UnitFile, design: Design) -> Iterator[Fault]:
    """Find coils that overlap in radius and height."""
    for index, coil in enumerate(design.coils):
        for other in design.coils[:index]:
            across = _overlap(_radii(coil), _radii(other))
            along = _longest_overlap(_all_heights(coil), _all_heights(other)) if across > TOUCH else 0.0
            if along > TOUCH:
                text = f"overlaps coil '{other.name}' by {across:.4g} mm in radius and {along:.4g} mm in height."
                yield Fault(("design", "coils", index), text)


def limbs_apart(_file: UnitFile, design: Design) -> Iterator[Fault]:
    """See that coils of neighbouring limbs do not overlap."""
    spacing = None if design.core is None else design.core.axis_spacing
    if spacing is None or not design.coils:
        return
    outermost = max(coil.outer_radius.to("mm") for coil in design.coils)
    if spacing.to("mm") < 2.0 * outermost - TOUCH:
        text = f"must be at least twice the largest outer radius, {2.0 * outermost:.4g} mm, got {spacing}."
        yield Fault(("design", "core", "axis_spacing"), text)


def clamping(_file: UnitFile, design: Design) -> Iterator[Fault]:
    """Compare the clamping structure with the coils and within itself."""
    given = design.clamping
    if given is None:
        return
    path = ("design", "clamping")
    coils = [coil.name for coil in design.coils]
    for name in given.clamping_share:
        if coils and name not in coils:  # without coils nothing can be compared
            text = f"names '{name}', which is not a coil{unknown_name(name, coils)}"
            yield Fault((*path, "clamping_share"), text)
    total = sum(given.clamping_share.values())
    if given.clamping_share and not math.isclose(total, 1.0, abs_tol=0.01):
        yield Fault((*path, "clamping_share"), f"must add up to 1, got {total:.4g}.")
    inner, outer = given.ring_inner_radius, given.ring_outer_radius
    if inner is not None and outer is not None and inner.to("mm") >= outer.to("mm"):
        yield Fault((*path, "ring_outer_radius"), f"must be above ring_inner_radius, {inner}, got {outer}.")


def zigzag_halves(file: UnitFile, design: Design) -> Iterator[Fault]:
    """See that the coils of a zigzag winding, and only those, name their half."""
    for index, coil in enumerate(design.coils):
        connection = file.connections.get(coil.winding)
        zigzag = connection is not None and connection.letter == "Z"
        path = ("design", "coils", index, "half")
        if zigzag and coil.half is None:
            yield Fault(path, f"must be 1 or 2: '{coil.winding}' is a zigzag winding.")
        if connection is not None and not zigzag and coil.half is not None:
            yield Fault(path, f"must not be given: '{coil.winding}' is not a zigzag winding.")


def coil_winding(file: UnitFile, design: Design, index: int) -> Iterator[Fault]:
    """See that the coil belongs to a winding and is of its material."""
    coil, path = design.coils[index], ("design", "coils", index)
    winding = file.windings.get(coil.winding)
    if winding is None:
        text = f"names '{coil.winding}', which is not a winding{unknown_name(coil.winding, file.windings)}"
        yield Fault((*path, "winding"), text)
    elif winding.conductor_material is not None and winding.conductor_material != coil.conductor.material:
        text = f'is "{coil.conductor.material}", but windings.{coil.winding}.conductor_material is'
        yield Fault((*path, "conductor", "material"), f'{text} "{winding.conductor_material}".')


def coil_radii(_file: UnitFile, design: Design, index: int) -> Iterator[Fault]:
    """See that the coil has a build and stands outside the limb."""
    coil, path = design.coils[index], ("design", "coils", index)
    if coil.outer_radius.to("mm") <= coil.inner_radius.to("mm"):
        text = f"must be above inner_radius, {coil.inner_radius}, got {coil.outer_radius}."
        yield Fault((*path, "outer_radius"), text)
    if design.core is None:
        return
    diameter = design.core.limb_diameter
    if coil.inner_radius.to("mm") < diameter.to("mm") / 2.0 - TOUCH:
        text = f"must be outside the limb, half of limb_diameter {diameter}, got {coil.inner_radius}."
        yield Fault((*path, "inner_radius"), text)


def coil_blocks(file: UnitFile, design: Design, index: int) -> Iterator[Fault]:
    """See that the blocks stand in the window, apart, and know their tappings."""
    coil, path = design.coils[index], ("design", "coils", index, "blocks")
    window = None if design.core is None else design.core.window_height
    heights = _all_heights(coil)
    for number, block in enumerate(coil.blocks):
        if block.top.to("mm") <= block.bottom.to("mm"):
            yield Fault((*path, number), f"must have its top above its bottom, {block.bottom}, got {block.top}.")
        if window is not None and block.top.to("mm") > window.to("mm") + TOUCH:
            yield Fault((*path, number), f"must end within the window, {window}, got top {block.top}.")
        for other in range(number):
            if _overlap(heights[number], heights[other]) > TOUCH:
                yield Fault((*path, number), f"overlaps block {other + 1} in height.")
        yield from _block_tappings(file, block, (*path, number, "turns"))


def _block_tappings(file: UnitFile, block: Block, path: tuple[str | int, ...]) -> Iterator[Fault]:
    if not isinstance(block.turns, dict):
        return
    known = file.tapping_names
    for name in block.turns:
        if name not in known:
            yield Fault(path, f"names '{name}', which is not a tapping{unknown_name(name, known)}")
    missing = [name for name in known if name not in block.turns]
    if missing:
        yield Fault(path, f"must name every tapping; missing: {', '.join(missing)}.")


def coil_conductor(_file: UnitFile, design: Design, index: int) -> Iterator[Fault]:
    """Compare the number of strands with the kind of conductor."""
    conductor, path = design.coils[index].conductor, ("design", "coils", index, "conductor", "strands")
    fixed = {"strip": 1, "foil": 1, "twin": 2}.get(conductor.kind)
    if fixed is not None and conductor.strand_count != fixed:
        yield Fault(path, f'must be {fixed} for a conductor of kind "{conductor.kind}", got {conductor.strands}.')
    if fixed is None and conductor.strands is None:
        yield Fault(path, 'is missing; a conductor of kind "transposed" must state the strands of one cable.')


def coil_supports(_file: UnitFile, design: Design, index: int) -> Iterator[Fault]:
    """See that sticks and spacers find room round the inner circumference."""
    coil = design.coils[index]
    given, path = coil.supports, ("design", "coils", index, "supports")
    if given is None:
        return
    room = 2.0 * math.pi * coil.inner_radius.to("mm")
    for key, count, width in (
        ("stick_width", given.sticks, given.stick_width),
        ("spacer_width", given.spacers, given.spacer_width),
    ):
        if count is not None and width is not None and count * width.to("mm") > room:
            text = f"times {count} must not exceed the inner circumference, {room:.4g} mm, got {width}."
            yield Fault((*path, key), text)


def _radii(coil: Coil) -> tuple[float, float]:
    return coil.inner_radius.to("mm"), coil.outer_radius.to("mm")


def _heights(block: Block) -> tuple[float, float]:
    return block.bottom.to("mm"), block.top.to("mm")


def _all_heights(coil: Coil) -> list[tuple[float, float]]:
    return [_heights(block) for block in coil.blocks]


def _longest_overlap(one: list[tuple[float, float]], other: list[tuple[float, float]]) -> float:
    """Return the largest overlap of any two intervals [mm]."""
    first, second = np.array(one), np.array(other)
    tops = np.minimum.outer(first[:, 1], second[:, 1])
    return float((tops - np.maximum.outer(first[:, 0], second[:, 0])).max())


def _overlap(one: tuple[float, float], other: tuple[float, float]) -> float:
    return min(one[1], other[1]) - max(one[0], other[0])


DESIGN_CHECKS = (
    positive_turns,
    turns_and_voltages,
    coil_names,
    coils_apart,
    limbs_apart,
    clamping,
    zigzag_halves,
)
COIL_CHECKS = (coil_winding, coil_radii, coil_blocks, coil_conductor, coil_supports)

"""What follows from the coils of a design: turns, phase voltages, fill, turn section."""

from __future__ import annotations

import math
from typing import Protocol

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.design import Coil, Design
from throughfault.workbook.inputs.vector_group import VectorGroup, WindingConnection
from throughfault.workbook.inputs.windings import PRINCIPAL, Winding

__all__ = [
    "Described",
    "conductor_section",
    "phase_voltage",
    "radial_fill",
    "series_turns",
    "turn_section",
]


class Described(Protocol):
    """A unit, or a unit file not yet made into one."""

    @property
    def windings(self) -> dict[str, Winding]:
        """Windings by name."""

    @property
    def connections(self) -> dict[str, WindingConnection]:
        """Connections by name."""

    @property
    def group(self) -> VectorGroup:
        """The vector group."""

    @property
    def design(self) -> Design | None:
        """The design."""

    def voltage(self, winding: str, tapping: str = PRINCIPAL) -> Quantity:
        """Voltage at a tapping."""


def block_turns(coil: Coil, tapping: str) -> list[float]:
    """Return the turns of each block at a tapping."""
    return [b.turns.get(tapping, 0.0) if isinstance(b.turns, dict) else b.turns for b in coil.blocks]


def series_turns(design: Design, winding: str, tapping: str = PRINCIPAL) -> float:
    """Return the turns of a winding in series at a tapping, all its coils together.

    Each path of a coil has its own blocks, so the turns of all blocks over the number of paths are in series.
    """
    coils = [coil for coil in design.coils if coil.winding == winding]
    return sum(sum(block_turns(coil, tapping)) / coil.parallel_paths for coil in coils)


def phase_voltage(unit: Described, winding: str, tapping: str = PRINCIPAL) -> float:
    """Return the voltage induced in the turns of one phase of a winding, in V.

    Star: line voltage over root three; delta and single-phase: line voltage. Both halves of a zigzag in sum:
    two thirds of the line voltage, since the halves stand at 120 degrees. Series winding of an
    autotransformer: difference of the terminals.
    """
    line = unit.voltage(winding, tapping).to("V")
    first, *others = unit.connections
    if unit.group.auto and winding == first:
        line -= unit.voltage(others[0], tapping).to("V")
    letter = unit.connections[winding].letter
    star = letter == "Y" or (letter == "auto" and not unit.group.single_phase)
    return line / math.sqrt(3.0) if star else 2.0 * line / 3.0 if letter == "Z" else line


def radial_fill(coil: Coil) -> float:
    """Return the radial size of the covered conductors over the radial build.

    A twin lies with both strands side by side in the radial direction; the strands of a transposed cable
    stand in two columns, one strand more than half of them high where they cross.
    """
    conductor = coil.conductor
    strands = conductor.strand_count
    high = {"twin": 2.0, "transposed": (strands + 1) / 2.0}.get(conductor.kind, 1.0)
    one = high * conductor.strand_radial.to("mm") + conductor.covering.to("mm")
    return conductor.radial_count * one / (coil.outer_radius.to("mm") - coil.inner_radius.to("mm"))


def turn_section(coil: Coil) -> float | None:
    """Return the bare section of one turn, all parallel conductors and paths, in mm^2.

    Conductors that lie side by side but are not turns in series are in parallel. None where the discs or
    axial turn layers of the coil are not given. Corners are taken as square.
    """
    given = coil.supports.discs if coil.supports is not None else None
    layers = given or sum(block.discs or 0 for block in coil.blocks)
    tappings = {name for b in coil.blocks if isinstance(b.turns, dict) for name in b.turns} or {PRINCIPAL}
    turns = max(sum(abs(t) for t in block_turns(coil, tapping)) for tapping in tappings)
    if not layers or not turns:
        return None
    conductor = coil.conductor
    side_by_side = max(1, round(conductor.radial_count * layers / turns))
    strand = conductor.strand_radial.to("mm") * conductor.strand_axial.to("mm")
    return coil.parallel_paths * side_by_side * conductor.axial_count * conductor.strand_count * strand


def conductor_section(unit: Described, winding: str) -> Quantity | None:
    """Return the section of one turn of a winding: as given, else the smallest of its coils; None if unknown."""
    given = unit.windings[winding].conductor_section
    if given is not None or unit.design is None:
        return given
    sections = [turn_section(coil) for coil in unit.design.coils if coil.winding == winding]
    known = [section for section in sections if section is not None]
    return Quantity(min(known), "mm^2") if known and len(known) == len(sections) else None

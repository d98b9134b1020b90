"""The mechanical design: core, coils, conductors, supports, clamping."""

from dataclasses import dataclass
from typing import Annotated, Literal

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.leaves import Count, Number, OneOf
from throughfault.workbook.inputs.measures import ByTapping, Measure
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vocabulary import (
    DESIGN,
    MOST_BLOCKS,
    MOST_COILS,
    Area,
    Force,
    Height,
    Length,
    Material,
    Name,
    Stress,
    Title,
    Whole,
    Yes,
    key,
)

Covering = Annotated[Quantity, Measure("mm", least_allowed=True)]


@dataclass(frozen=True)
class Turns(Number):
    """Turns, negative where they oppose the main coil."""

    least: float = -100_000.0
    most: float = 100_000.0
    least_allowed: bool = True

    @property
    def wanted(self) -> str:
        """In words."""
        return "a number of turns (negative against the main coil)"


class Core(Section):
    """The core and its window."""

    limbs: Annotated[int, Count(1, 5)] = key("Wound and return limbs.", DESIGN)
    limb_diameter: Length = key("Diameter of the limb.", DESIGN)
    window_height: Length = key("Yoke to yoke.", DESIGN)
    axis_spacing: Length | None = key("Limb to limb.", DESIGN, default=None)
    tank_distance: Length | None = key("Outermost coil to tank wall.", DESIGN, default=None)


class Block(Section):
    """A part of a coil with uniform turns."""

    bottom: Height = key("Lower end above the lower yoke.", DESIGN)
    top: Height = key("Upper end above the lower yoke.", DESIGN)
    turns: Annotated[float | dict[str, float], ByTapping(Turns())] = key(
        "Series turns of the block in its own path; may be a table by tapping, negative against the main coil.",
        DESIGN,
    )
    discs: Whole | None = key("Discs of the block.", DESIGN, default=None)


class Conductor(Section):
    """The conductor of a coil."""

    kind: Annotated[Literal["strip", "twin", "transposed", "foil"], OneOf(("strip", "twin", "transposed", "foil"))] = (
        key("Kind of conductor.", DESIGN)
    )
    material: Material = key("Material.", DESIGN)
    strand_radial: Length = key("Radial size of one bare strand.", DESIGN)
    strand_axial: Length = key("Axial size of one bare strand.", DESIGN)
    strands: Annotated[int, Count(1, 200)] | None = key(
        "Strands in one cable.", DESIGN, default=None, in_words="1, of a twin 2; a transposed cable states it"
    )
    radial_count: Whole = key("Strips, twins or cables across the whole radial build of the coil.", DESIGN)
    axial_count: Whole = key("Conductors in parallel, stacked axially, in one turn.", DESIGN, default=1)
    bonded: Yes = key("Resin-bonded.", DESIGN, default=False)
    proof_stress: Stress | None = key("Rp0.2, guaranteed minimum at 20 degC.", "conductor's certificate", default=None)
    covering: Covering = key("Paper or enamel, both sides together.", DESIGN, default=Quantity(0.0, "mm"))

    @property
    def strand_count(self) -> int:
        """Strands in one strip (1), twin (2) or cable."""
        return self.strands if self.strands is not None else 2 if self.kind == "twin" else 1


class Supports(Section):
    """What holds the coil radially and axially."""

    sticks: Whole | None = key("Axial sticks round the circumference.", DESIGN, default=None)
    stick_width: Length | None = key("Width of a stick.", DESIGN, default=None)
    inner_support: Yes = key("Rests on a rigid cylinder through the sticks.", DESIGN, default=False)
    spacers: Whole | None = key("Radial spacers round the circumference, per gap.", DESIGN, default=None)
    spacer_width: Length | None = key("Width of a spacer.", DESIGN, default=None)
    spacer_thickness: Length | None = key("Thickness of the spacers of one gap.", DESIGN, default=None)
    discs: Whole | None = key("Discs or axial turn layers in the coil.", DESIGN, default=None)


class Coil(Section):
    """A physical coil."""

    name: Name = key("Name of the coil, used in result ids.", DESIGN)
    winding: Name = key("Winding it belongs to; several coils of a winding are in series.", DESIGN)
    kind: Annotated[Literal["disc", "helical", "layer", "foil"], OneOf(("disc", "helical", "layer", "foil"))] = key(
        "Kind of coil.", DESIGN
    )
    inner_radius: Length = key("Inner radius.", DESIGN)
    outer_radius: Length = key("Outer radius.", DESIGN)
    parallel_paths: Whole = key("Parallel paths; each carries its share of the current.", DESIGN, default=1)
    half: Annotated[Literal[1, 2] | None, OneOf((1, 2))] = key(
        "Half of a zigzag winding the coil belongs to.", DESIGN, default=None
    )
    blocks: tuple[Block, ...] = key("Parts of the coil.", DESIGN, at_least=1, at_most=MOST_BLOCKS)
    conductor: Conductor = key("Its conductor.", DESIGN)
    supports: Supports | None = key("Its supports.", DESIGN, default=None)


class Clamping(Section):
    """Clamping structure of one limb."""

    clamping_force: Force | None = key("Clamping force of one limb at assembly.", DESIGN, default=None)
    clamping_share: dict[Name, Annotated[float, Number(most=1.0, least_allowed=True)]] = key(
        "Share of the clamping force on each coil.",
        DESIGN,
        default={},
        in_words="by bearing area",
        at_most=MOST_COILS,
    )
    ring_inner_radius: Length | None = key("Inner radius of the press ring.", DESIGN, default=None)
    ring_outer_radius: Length | None = key("Outer radius of the press ring.", DESIGN, default=None)
    ring_thickness: Length | None = key("Thickness of the press ring.", DESIGN, default=None)
    ring_material: Title | None = key("Material of the press ring.", DESIGN, default=None)
    clamping_points: Whole | None = key("Points at which the ring is pressed.", DESIGN, default=None)
    tie_section: Area | None = key("Section of the tie rods or flitch plates of one limb.", DESIGN, default=None)
    tie_yield: Stress | None = key("Yield stress of the ties.", DESIGN, default=None)
    end_stack_thickness: Length | None = key("Insulation between coil and yoke, one end.", DESIGN, default=None)


class Design(Section):
    """The mechanical design, as far as it is known; what needs a part that is missing is left out."""

    core: Core | None = key("Core.", DESIGN, default=None)
    coils: tuple[Coil, ...] = key("Physical coils, innermost first.", DESIGN, default=(), at_most=MOST_COILS)
    clamping: Clamping | None = key("Clamping structure.", DESIGN, default=None)

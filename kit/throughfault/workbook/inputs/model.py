"""The unit file as a whole."""

from typing import Annotated, Literal

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.design import Design
from throughfault.workbook.inputs.hole import HoleMetError
from throughfault.workbook.inputs.impedances import ImpedanceRow, ZeroSequence
from throughfault.workbook.inputs.leaves import OneOf
from throughfault.workbook.inputs.limits import Declared, Limit, ResultId
from throughfault.workbook.inputs.rating import FORMAT, Identity, Rating, Standard
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.system import Earthing, System, Withstand
from throughfault.workbook.inputs.vector_group import VectorGroup, WindingConnection, parse_vector_group
from throughfault.workbook.inputs.vocabulary import MOST_RESULTS, MOST_ROWS, MOST_WINDINGS, Name, key
from throughfault.workbook.inputs.windings import PRINCIPAL, Winding


class UnitFile(Section):
    """One transformer."""

    format: Annotated[Literal["throughfault-unit/1"], OneOf((FORMAT,))] = key("Format of the file.")
    standard: Standard = key("Standard the review follows; without an edition the newest the kit carries.")
    identity: Identity = key("Whose transformer this is.")
    rating: Rating = key("The unit as a whole.")
    windings: dict[Name, Winding] = key(
        "Windings, in the order of the vector group's letters.", at_least=2, at_most=MOST_WINDINGS
    )
    impedances: tuple[ImpedanceRow, ...] = key(
        "One row for each pair of windings and tapping.", at_least=1, at_most=MOST_ROWS
    )
    system: System = key("Networks at the terminals.", default=System())
    earthing: dict[Name, Earthing] = key(
        'Earthing of the neutrals: "solid", "isolated" or an impedance.',
        "network operator",
        default={},
        at_most=MOST_WINDINGS,
        in_words="solid where the letter has N or n",
    )
    zero_sequence: ZeroSequence | None = key("Magnetising zero-sequence impedance.", default=None)
    tap_changer: Withstand | None = key("Tap changer.", default=None)
    bushings: dict[Name, Withstand] = key("Bushings or leads, by winding.", default={}, at_most=MOST_WINDINGS)
    neutral: dict[Name, Withstand] = key("Neutral bushings or leads, by winding.", default={}, at_most=MOST_WINDINGS)
    design: Design | None = key("Mechanical design.", default=None)
    limits: dict[ResultId, Limit] = key("A signatory's own limits, by check id.", default={}, at_most=MOST_RESULTS)
    declared: dict[ResultId, Declared] = key("What the maker states, by result id.", default={}, at_most=MOST_RESULTS)

    @property
    def group(self) -> VectorGroup:
        """The vector group, read."""
        return parse_vector_group(self.rating.vector_group)

    @property
    def connections(self) -> dict[str, WindingConnection]:
        """The connection of each winding by name.

        Raises
        ------
        HoleMetError
            If the vector group has not as many letters as there are windings (a fault of its own).
        """
        connections = self.group.windings
        if len(connections) != len(self.windings):
            raise HoleMetError
        return dict(zip(self.windings, connections, strict=True))

    @property
    def tapping_names(self) -> tuple[str, ...]:
        """Names of all tappings, principal first."""
        names = dict.fromkeys([PRINCIPAL])
        for winding in self.windings.values():
            names.update(dict.fromkeys(winding.tappings))
        return tuple(names)

    def voltage(self, winding: str, tapping: str = PRINCIPAL) -> Quantity:
        """Return the winding's voltage at a tapping (its rated voltage where it has no such tapping)."""
        found = self.windings[winding]
        return found.tappings.get(tapping, found.rated_voltage)

"""Windings and their tappings."""

from typing import Annotated

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.leaves import Number
from throughfault.workbook.inputs.measures import MOST_TAPPINGS, Measure
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vocabulary import (
    DESIGN,
    ORDER,
    PLATE,
    Area,
    Class,
    Duration,
    Material,
    Name,
    Power,
    Temperature,
    Voltage,
    Yes,
    key,
)

PRINCIPAL = "principal"


class Winding(Section):
    """One winding; the tables stand in the order of the vector group's letters.

    Of an autotransformer the first winding is the series, the second the common one in currents,
    sections and coils; ``rated_voltage`` is that of the terminal.
    """

    rated_power: Power = key("Rated power of the winding; of a bank that of one unit.", PLATE)
    rated_voltage: Voltage = key(
        "Rated voltage of the terminal, line to line, also of a bank; of a single-phase unit across the winding.",
        PLATE,
    )
    highest_voltage: Voltage | None = key("Highest voltage for equipment, Um.", PLATE, default=None)
    conductor_material: Material | None = key("Material of the conductor.", DESIGN, default=None)
    conductor_section: Area | None = key(
        "Bare section of one turn of one phase, all parallel conductors and paths.",
        DESIGN,
        default=None,
        in_words="from [design], where its coils give it",
    )
    stabilising: Yes = key(
        'Terminals not brought out (or "+d" in the vector group).',
        PLATE,
        default=False,
        in_words="as the vector group",
    )
    eddy_share: Annotated[float, Number(most=5.0, least_allowed=True)] = key(
        "Winding eddy loss over d.c. loss at reference temperature.", DESIGN, default=0.0
    )
    insulation_section: Annotated[Quantity, Measure("mm^2", least_allowed=True)] = key(
        "Section of the turn's insulation, for the IEEE heat content.", DESIGN, default=Quantity(0.0, "mm^2")
    )
    tappings: dict[Name, Voltage] = key(
        'Tapping voltages by name; names are free, "principal" must be among them.',
        PLATE,
        default={},
        at_most=MOST_TAPPINGS,
        in_words="principal only",
    )
    thermal_class: Class | None = key("As rating.thermal_class.", PLATE, default=None, in_words="as [rating]")
    start_temperature: Temperature | None = key("As rating.start_temperature.", default=None, in_words="as [rating]")
    fault_duration: Duration | None = key("As rating.fault_duration.", ORDER, default=None, in_words="as [rating]")

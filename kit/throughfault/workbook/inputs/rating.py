"""Identity and rating of the unit."""

import re
from dataclasses import dataclass
from typing import Annotated, Any, Literal

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs.leaves import Leaf, Match, OneOf, Refused
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vector_group import parse_vector_group
from throughfault.workbook.inputs.vocabulary import (
    ORDER,
    PLATE,
    Class,
    Duration,
    Frequency,
    Power,
    Temperature,
    Title,
    Yes,
    key,
)

TAG = re.compile(r"[A-Za-z0-9][A-Za-z0-9._-]{0,63}")
REVISION = re.compile(r"[A-Za-z0-9][A-Za-z0-9._]{0,63}")
STANDARD = re.compile(r"IEC 60076-5(:[0-9]{4})?|IEEE C57\.12\.00(-[0-9]{4})?")
FORMAT = "throughfault-unit/1"
TAG_FORM = 'a tag such as "BV-T1": at most 64 letters, digits and ". _ -", first a letter or digit'
Standard = Annotated[
    str, Match(STANDARD, '"IEC 60076-5" or "IEEE C57.12.00", an edition may follow (":2006", "-2015")')
]


@dataclass(frozen=True)
class VectorGroupSymbol(Leaf):
    """The symbol as text."""

    @property
    def wanted(self) -> str:
        """An example."""
        return 'a vector group such as "YNd11" (IEC 60076-1), the high-voltage winding first'

    def read(self, value: object) -> str:
        """Read the symbol to see that it can be read."""
        if not isinstance(value, str):
            raise self.refuse(value)
        try:
            return parse_vector_group(value).symbol
        except UnitFileError as error:
            raise Refused(error.faults[0]) from None

    def schema(self) -> dict[str, Any]:
        """Give the form."""
        return {
            "type": "string",
            "pattern": r"^(YN|ZN|Y|Z|D|I)(\+?(yn|zn|y|z|d|i|a)([0-9]|1[01])?)+$",
            "examples": ["YNd11", "Dyn11", "YNyn0+d", "YNa0d11", "Ii0"],
        }


class Identity(Section):
    """Whose transformer this is; stands on every page of the record."""

    tag: Annotated[str, Match(TAG, TAG_FORM)] = key("Tag of the unit; names the record folder.", ORDER)
    title: Title = key("Name of the unit in words.", ORDER)
    purchaser: Title | None = key("Purchaser.", ORDER, default=None)
    maker: Title | None = key("Maker.", PLATE, default=None)
    order: Title | None = key("Order or contract number.", ORDER, default=None)
    revision: Annotated[str, Match(REVISION, 'a revision such as "A": letters, digits and ". _"')] = key(
        "Revision of this review.", default="A"
    )


class Rating(Section):
    """The unit as a whole."""

    phases: Annotated[Literal[1, 3], OneOf((1, 3))] = key(
        "Phases of the unit. In a bank: 1 where powers are one unit's, 3 where they are the bank's.", PLATE
    )
    frequency: Frequency = key("Rated frequency.", PLATE)
    vector_group: Annotated[str, VectorGroupSymbol()] = key(
        "Vector group (IEC 60076-1), high voltage first; that of the bank for a bank.", PLATE
    )
    immersion: Annotated[Literal["oil", "dry"], OneOf(("oil", "dry"))] = key(
        "Liquid-immersed or dry; decides the temperature limits.", PLATE
    )
    core: Annotated[
        Literal["three-limb", "five-limb", "shell", "single-phase"],
        OneOf(("three-limb", "five-limb", "shell", "single-phase")),
    ] = key("Form of the core; decides the zero-sequence path.", "maker's outline or design sheet")
    bank: Yes = key("Single-phase units forming a three-phase bank.", PLATE, default=False)
    thermal_class: Class | None = key(
        "Temperature class of the winding insulation in degC; may also stand per winding.",
        PLATE,
        default=None,
    )
    start_temperature: Temperature | None = key(
        "Temperature when the fault begins: IEC mean, IEEE hottest spot; may also stand per winding.",
        "standard or type test report",
        default=None,
    )
    fault_duration: Duration | None = key(
        "Duration of the fault; may also stand per winding.", ORDER, default=None, in_words="as the standard"
    )
    self_cooled_power: Power | None = key("Self-cooled rating, the IEEE base.", PLATE, default=None)
    voltage_variation: Annotated[
        Literal["constant flux", "variable flux"], OneOf(("constant flux", "variable flux"))
    ] = key("Category of voltage variation of the tappings (IEC 60076-1).", PLATE, default="constant flux")

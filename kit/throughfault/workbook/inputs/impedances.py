"""Short-circuit impedances between pairs of windings."""

from dataclasses import dataclass
from typing import Annotated, Any, Literal

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.leaves import NAME, Leaf, OneOf
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vocabulary import PLATE, TEST, Loss, Name, Percent, Power, Tolerance, key
from throughfault.workbook.inputs.windings import PRINCIPAL

REPORT = f"{TEST} or {PLATE}"


@dataclass(frozen=True)
class TwoNames(Leaf):
    """Names of two windings."""

    @property
    def wanted(self) -> str:
        """An example."""
        return 'the names of two windings such as ["HV", "LV"]'

    def read(self, value: object) -> tuple[str, str]:
        """Read an array of two different names."""
        if not isinstance(value, list) or len(value) != 2 or not all(isinstance(n, str) for n in value):
            raise self.refuse(value)
        for name in value:
            if not NAME.fullmatch(name):
                raise self.refuse(name)
        if value[0] == value[1]:
            raise self.refuse(f"{value[0]}, {value[1]}")
        return value[0], value[1]

    def schema(self) -> dict[str, Any]:
        """Give an array of two names."""
        name = {"type": "string", "pattern": f"^(?:{NAME.pattern})$"}
        return {"type": "array", "items": name, "minItems": 2, "maxItems": 2, "uniqueItems": True}


class ImpedanceRow(Section):
    """One pair at one tapping, every other winding open; per cent on the base power and the tapping's own voltage."""

    between: Annotated[tuple[str, str], TwoNames()] = key("The two windings, in either order.", REPORT)
    tapping: Name = key("Tapping the row holds for.", REPORT, default=PRINCIPAL)
    impedance: Percent = key("Short-circuit impedance, its magnitude.", REPORT)
    base_power: Power = key("Power the per cent values refer to; of a bank that of one unit.", REPORT)
    load_loss: Loss | None = key(
        "Load loss at base power and reference temperature; or resistance.", TEST, default=None
    )
    resistance: Percent | None = key(
        "A.c. resistance; or load_loss.",
        TEST,
        default=None,
        in_words="load_loss over base_power; without either zero",
    )
    dc_resistance: Percent | None = key(
        "D.c. resistance, for the decay of the offset.", TEST, default=None, in_words="the a.c. resistance"
    )
    zero_sequence: Percent | None = key(
        "Zero-sequence impedance of the pair, with the angle of the impedance.",
        TEST,
        default=None,
        in_words="from the core and the vector group",
    )
    basis: Annotated[Literal["guaranteed", "measured"], OneOf(("guaranteed", "measured"))] = key(
        "Whether the impedance is a guaranteed or a measured value.", REPORT, default="guaranteed"
    )
    tolerance: Tolerance | None = key(
        "Tolerance; the duty is also run at impedance (1 - tolerance).",
        "order specification or standard",
        default=None,
    )

    @property
    def resistance_value(self) -> Quantity:
        """A.c. resistance in per cent of the row's base; zero where the file gives none."""
        if self.resistance is not None:
            return self.resistance
        if self.load_loss is not None:
            return Quantity(100.0 * self.load_loss.to("W") / self.base_power.to("VA"), "%")
        return Quantity(0.0, "%")


class ZeroSequence(Section):
    """The magnetising zero-sequence impedance of a three-limb unit without a delta."""

    at: Name = key("Winding from which it was measured.", TEST)
    magnetising: Percent = key("Its value, on the rated power and voltage of that winding.", TEST)

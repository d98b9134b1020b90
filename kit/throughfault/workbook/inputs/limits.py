"""A signatory's own limits and the maker's declared results, by result id."""

import re
from dataclasses import dataclass
from typing import Annotated, Any

from throughfault.errors import QuantityError, did_you_mean
from throughfault.quantities import UNITS, Quantity, parse, shown
from throughfault.workbook.inputs.leaves import Leaf, Match, Number, Refused
from throughfault.workbook.inputs.measures import LARGEST, NUMBER_PATTERN
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vocabulary import Title, key

RESULT_ID = re.compile(r"[a-z]+(\.[A-Za-z0-9_-]{1,64}){1,4}")
SMALLEST, GREATEST = 1e-12, 1e12  # in the unit as typed; far beyond any result, far from an overflow when converted
_UNIT = re.compile(rf"{NUMBER_PATTERN}\s*(?P<unit>[A-Za-z%].*)", re.ASCII)
_PROOF = re.compile(r"([0-9]*\.?[0-9]+)\s*Rp0\.2", re.ASCII)


@dataclass(frozen=True, slots=True)
class ProofStressShare:
    """A limit given as a share of the conductor's proof stress."""

    share: float


@dataclass(frozen=True)
class AnyQuantity(Leaf):
    """A quantity of any kind, or a bare number for a ratio; a limit is above zero and may be a share of Rp0.2."""

    limit: bool = False

    @property
    def wanted(self) -> str:
        """Examples."""
        proof = ', a share such as "0.35 Rp0.2"' if self.limit else ""
        return f'a quantity such as "8 kA"{proof} or a bare number for a ratio'

    @property
    def unit(self) -> str:
        """Any."""
        return "as the result, or Rp0.2" if self.limit else "as the result"

    def read(self, value: object) -> Quantity | ProofStressShare:
        """Find the unit, then read."""
        if isinstance(value, int | float) and not isinstance(value, bool):
            return self._ranged(Quantity(Number(-LARGEST, LARGEST, least_allowed=True).read(value), "1"), value)
        if not isinstance(value, str) or len(value) > 64:
            raise self.refuse(value)
        share = _PROOF.fullmatch(value.strip()) if self.limit else None
        if share:
            return ProofStressShare(Number(most=2.0).read(float(share[1])))
        found = _UNIT.fullmatch(value.strip())
        unit = found["unit"] if found else ""
        if unit not in UNITS:
            raise Refused(f"must be {self.wanted}, got {shown(value)}{did_you_mean(unit, UNITS)}.")
        try:
            quantity = parse(value, unit)
        except QuantityError as error:
            raise Refused(error.faults[0]) from None
        return self._ranged(quantity, value)

    def _ranged(self, quantity: Quantity, value: object) -> Quantity:
        """Refuse a limit that nothing could keep, and numbers too small or too large to work with."""
        if self.limit and quantity.value <= 0.0:
            raise Refused(f"must be above zero, as a limit is, got {shown(value)}.")
        if quantity.value != 0.0 and not SMALLEST <= abs(quantity.value) <= GREATEST:
            raise Refused(f"must be zero or of a size from {SMALLEST:g} to {GREATEST:g}, got {shown(value)}.")
        return quantity

    def schema(self) -> dict[str, Any]:
        """Give number or text."""
        units = "|".join(re.escape(unit) for unit in UNITS) + ("|Rp0\\.2" if self.limit else "")
        number = {"type": "number", "exclusiveMinimum": 0} if self.limit else {"type": "number"}
        text = NUMBER_PATTERN.replace("[+-]?", "[+]?", 1) if self.limit else NUMBER_PATTERN
        return {
            "anyOf": [
                number,
                {"type": "string", "pattern": rf"^\s*{text}\s*({units})\s*$"},
            ]
        }


ResultId = Annotated[str, Match(RESULT_ID, 'a result id such as "duty.LV.peak"')]
Declared = Annotated[Quantity, AnyQuantity()]


class Limit(Section):
    """What is permitted, and who says so."""

    value: Annotated[Quantity | ProofStressShare, AnyQuantity(limit=True)] = key("The limit.")
    source: Title = key("Clause of a licensed copy with date and reader, or the maker's proven rule.")

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
_UNIT = re.compile(r"[0-9.]\s*([A-Za-z%].*)", re.ASCII)
_PROOF = re.compile(r"([0-9]*\.?[0-9]+)\s*Rp0\.2", re.ASCII)


@dataclass(frozen=True, slots=True)
class ProofStressShare:
    """A limit given as a share of the conductor's proof stress."""

    share: float


@dataclass(frozen=True)
class AnyQuantity(Leaf):
    """A quantity of any kind, or a bare number for a ratio."""

    proof_stress: bool = False

    @property
    def wanted(self) -> str:
        """Examples."""
        proof = ', a share such as "0.35 Rp0.2"' if self.proof_stress else ""
        return f'a quantity such as "8 kA"{proof} or a bare number for a ratio'

    @property
    def unit(self) -> str:
        """Any."""
        return "as the result, or Rp0.2" if self.proof_stress else "as the result"

    def read(self, value: object) -> Quantity | ProofStressShare:
        """Find the unit, then read."""
        if isinstance(value, int | float) and not isinstance(value, bool):
            return Quantity(Number(-LARGEST, LARGEST, least_allowed=True).read(value), "1")
        if not isinstance(value, str) or len(value) > 64:
            raise self.refuse(value)
        share = _PROOF.fullmatch(value.strip()) if self.proof_stress else None
        if share:
            return ProofStressShare(Number(most=2.0).read(float(share[1])))
        found = _UNIT.search(value.strip())
        unit = found[1] if found else ""
        if unit not in UNITS:
            raise Refused(f"must be {self.wanted}, got {shown(value)}{did_you_mean(unit, UNITS)}.")
        try:
            return parse(value, unit)
        except QuantityError as error:
            raise Refused(error.faults[0]) from None

    def schema(self) -> dict[str, Any]:
        """Give number or text."""
        units = "|".join(re.escape(unit) for unit in UNITS) + ("|Rp0\\.2" if self.proof_stress else "")
        return {
            "anyOf": [
                {"type": "number"},
                {"type": "string", "pattern": rf"^\s*{NUMBER_PATTERN}\s*({units})\s*$"},
            ]
        }


ResultId = Annotated[str, Match(RESULT_ID, 'a result id such as "duty.LV.peak"')]
Declared = Annotated[Quantity, AnyQuantity()]


class Limit(Section):
    """What is permitted, and who says so."""

    value: Annotated[Quantity | ProofStressShare, AnyQuantity(proof_stress=True)] = key("The limit.")
    source: Title = key("Clause of a licensed copy with date and reader, or the maker's proven rule.")

    @property
    def quantity(self) -> Quantity | None:
        """The limit, unless it is a share of the proof stress."""
        return self.value if isinstance(self.value, Quantity) else None

    @property
    def proof_stress_share(self) -> float | None:
        """The share of Rp0.2, where the limit is one."""
        return self.value.share if isinstance(self.value, ProofStressShare) else None

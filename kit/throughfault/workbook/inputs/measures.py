"""Leaves with a unit, and leaves made of others."""

import math
import re
from dataclasses import dataclass
from typing import Any

from throughfault.errors import QuantityError
from throughfault.quantities import KINDS, UNITS, Quantity, expectation, parse, parse_impedance, shown
from throughfault.workbook.inputs.leaves import NAME, Leaf, Refused, nearest

MOST_TAPPINGS = 60  # far more than any unit has
LARGEST = 1e9  # in the unit of the model; far beyond any transformer, far below an overflow
NUMBER_PATTERN = r"[+-]?([0-9]+(\.[0-9]*)?|\.[0-9]+)([eE][+-]?[0-9]{1,3})?"


@dataclass(frozen=True)
class Measure(Leaf):
    """A quantity; `typical` is any unit of its kind, in which `least` and `most` are given."""

    typical: str
    least: float = 0.0
    most: float = LARGEST
    least_allowed: bool = False

    @property
    def wanted(self) -> str:
        """Kind, example and units."""
        return expectation(self.typical)

    @property
    def unit(self) -> str:
        """Units allowed."""
        return ", ".join(KINDS[UNITS[self.typical][0]])

    def _range(self, number: float) -> str:
        """Say which range was missed."""
        kind = UNITS[self.typical][0]
        article = "an" if kind[0] in "aeiou" else "a"
        if self.most < LARGEST:
            lower = "from" if self.least_allowed else "above"
            return f"{article} {kind} {lower} {self.least:g} to {self.most:g} {self.typical}"
        if number > 0.0:
            return f"{article} {kind} from {1.0 / LARGEST:g} to {LARGEST:g} {self.typical}"
        return f"zero or a positive {kind}" if self.least_allowed else f"a positive {kind}"

    def read(self, value: object) -> Quantity:
        """Read text such as "132 kV"."""
        if not isinstance(value, str):
            raise self.refuse(value)
        try:
            quantity = parse(value, self.typical)
        except QuantityError as error:
            raise Refused(error.faults[0]) from None
        number = quantity.to(self.typical)
        inside = self.least <= number <= self.most and (self.least_allowed or number != self.least)
        if not inside or 0.0 < abs(number) < 1.0 / LARGEST:
            raise Refused(f"must be {self._range(number)}, got {shown(value)}.")
        return quantity

    def schema(self) -> dict[str, Any]:
        """Give the pattern of number and unit."""
        units = "|".join(re.escape(unit) for unit in KINDS[UNITS[self.typical][0]])
        pattern = rf"^\s*{NUMBER_PATTERN}\s*({units})\s*$"
        return {"type": "string", "pattern": pattern, "examples": [f"1 {self.typical}"]}


@dataclass(frozen=True)
class Impedance(Leaf):
    """An impedance in ohm, real or complex; non-negative resistance, not zero."""

    @property
    def wanted(self) -> str:
        """Examples."""
        return 'an impedance such as "20 ohm" or "5 ohm + 12j ohm" (unit one of mohm, ohm, kohm)'

    @property
    def unit(self) -> str:
        """Units allowed."""
        return ", ".join(KINDS["impedance"])

    def read(self, value: object) -> complex:
        """Read the text in ohm."""
        try:
            number = parse_impedance(value) if isinstance(value, str) else complex(math.nan)
        except QuantityError:
            number = complex(math.nan)
        if not number.real >= 0.0 or not 1.0 / LARGEST < abs(number) < LARGEST:
            raise self.refuse(value)
        return number

    def schema(self) -> dict[str, Any]:
        """Give the pattern of one or two parts."""
        unit = "(" + "|".join(KINDS["impedance"]) + ")"
        imaginary = rf"\s*[+-]\s*{NUMBER_PATTERN.removeprefix('[+-]?')}j\s*{unit}"
        return {"type": "string", "pattern": rf"^\s*{NUMBER_PATTERN}\s*{unit}({imaginary})?\s*$"}


@dataclass(frozen=True)
class Either(Leaf):
    """One leaf, or a word instead of it."""

    leaf: Leaf
    words: tuple[str, ...]

    @property
    def wanted(self) -> str:
        """The words, then the leaf."""
        return ", ".join(f'"{word}"' for word in self.words) + f" or {self.leaf.wanted}"

    @property
    def unit(self) -> str:
        """Units of the leaf."""
        return self.leaf.unit

    def read(self, value: object) -> Any:
        """Try the words first."""
        if isinstance(value, str) and value in self.words:
            return value
        try:
            return self.leaf.read(value)
        except Refused as refused:
            words = ", ".join(f'"{word}"' for word in self.words)
            text = str(refused).replace("must be ", f"must be {words} or ", 1).removesuffix(".")
            raise Refused(f"{text}{nearest(value, self.words)}.") from None

    def schema(self) -> dict[str, Any]:
        """Give both."""
        return {"anyOf": [{"enum": list(self.words)}, self.leaf.schema()]}


@dataclass(frozen=True)
class ByTapping(Leaf):
    """One value for every tapping, or a table of values by tapping name."""

    leaf: Leaf

    @property
    def wanted(self) -> str:
        """The leaf, or a table of it."""
        return f"{self.leaf.wanted}, or a table of them by tapping"

    @property
    def unit(self) -> str:
        """Units of the leaf."""
        return self.leaf.unit

    def read(self, value: object) -> Any:
        """Read one value, or a dict of values."""
        if not isinstance(value, dict):
            return self.leaf.read(value)
        if not value:
            raise Refused("must name at least one tapping, got an empty table.")
        if len(value) > MOST_TAPPINGS:
            raise Refused(f"must name at most {MOST_TAPPINGS} tappings, got {len(value)}.")
        made = {}
        for name, item in value.items():
            if not NAME.fullmatch(name):
                raise Refused(f"must be keyed by names of tappings, got {shown(name)}.")
            try:
                made[name] = self.leaf.read(item)
            except Refused as refused:
                raise Refused(f"of tapping '{name}' {refused}") from None
        return made

    def schema(self) -> dict[str, Any]:
        """Give both."""
        leaf = self.leaf.schema()
        return {"anyOf": [leaf, {"type": "object", "additionalProperties": leaf, "minProperties": 1}]}

"""How one value of the unit file is read and described: the leaves of the model.

Every leaf words its own refusal, so that a reader meets one voice; pydantic composes them.
"""

import math
import re
import unicodedata
from dataclasses import dataclass
from typing import Annotated, Any, Literal

from pydantic import Field, GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic_core import CoreSchema, PydanticCustomError, core_schema

from throughfault.errors import QuantityError, did_you_mean
from throughfault.quantities import KINDS, UNITS, Quantity, expectation, parse, parse_impedance, shown

LONGEST_TEXT = 500
LARGEST = 1e9  # in the unit of the model; far beyond any transformer, far below an overflow
NUMBER_PATTERN = r"[+-]?([0-9]+(\.[0-9]*)?|\.[0-9]+)([eE][+-]?[0-9]{1,3})?"
TAG = re.compile(r"[A-Za-z0-9][A-Za-z0-9._-]{0,63}")
REVISION = re.compile(r"[A-Za-z0-9][A-Za-z0-9._]{0,63}")
NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]{0,15}")
#: names that result ids or the keys of the unit file use themselves
RESERVED = ("neutral", "clamping", "prefault_voltage", "terminals")

#: where a user finds a value
PLATE = "rating plate"
TEST = "routine test report"
NETWORK = "network operator"
DESIGN = "maker's design sheet"
ORDER = "order specification"


class Refused(ValueError):  # noqa: N818 - what is said about a value
    """A value is not what its key wants; the text goes on the report behind the key."""


@dataclass(frozen=True)
class Leaf:
    """A value that is not a table; subclasses say how it is read and what it must be."""

    @property
    def wanted(self) -> str:
        """What the value must be, to follow "must be"."""
        raise NotImplementedError

    @property
    def unit(self) -> str:
        """Units for the schema page."""
        return "-"

    def read(self, value: object) -> Any:
        """Return the value read.

        Raises
        ------
        Refused
            With the reason.
        """
        raise NotImplementedError

    def schema(self) -> dict[str, Any]:
        """Return the JSON schema of the value."""
        raise NotImplementedError

    def refuse(self, value: object) -> Refused:
        """Return the refusal of a value."""
        return Refused(f"must be {self.wanted}, got {shown(value)}.")

    def _validated(self, value: object) -> Any:
        try:
            return self.read(value)
        except Refused as refused:
            raise PydanticCustomError("refused", "{text}", {"text": str(refused)}) from None

    def __get_pydantic_core_schema__(self, _source: Any, _handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_plain_validator_function(self._validated)

    def __get_pydantic_json_schema__(self, _core: CoreSchema, _handler: GetJsonSchemaHandler) -> dict[str, Any]:
        return self.schema()


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

    @property
    def range(self) -> str:
        """The range in words."""
        if self.least == 0.0 and self.most == LARGEST:
            return "zero or positive" if self.least_allowed else "positive"
        lower = f"from {self.least:g}" if self.least_allowed else f"above {self.least:g}"
        return f"{lower} to {self.most:g} {self.typical}"

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
            raise Refused(f"must be {self.range}, got {shown(value)}.")
        return quantity

    def schema(self) -> dict[str, Any]:
        """Give the pattern of number and unit."""
        units = "|".join(re.escape(unit) for unit in KINDS[UNITS[self.typical][0]])
        return {"type": "string", "pattern": rf"^\s*{NUMBER_PATTERN}\s*({units})\s*$", "examples": [f"1 {self.typical}"]}


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
class Number(Leaf):
    """A bare number: a ratio or a share."""

    least: float = 0.0
    most: float = 1e6
    least_allowed: bool = False

    @property
    def wanted(self) -> str:
        """The range."""
        return f"a number {'from' if self.least_allowed else 'above'} {self.least:g} to {self.most:g}, without a unit"

    def read(self, value: object) -> float:
        """Read an integer or a float."""
        if isinstance(value, bool) or not isinstance(value, int | float):
            raise self.refuse(value)
        inside = self.least <= value <= self.most and (self.least_allowed or value != self.least)
        if not inside:  # also a NaN, which compares with nothing
            raise self.refuse(value)
        return float(value)

    def schema(self) -> dict[str, Any]:
        """Give the range."""
        return {"type": "number", "minimum" if self.least_allowed else "exclusiveMinimum": self.least, "maximum": self.most}


@dataclass(frozen=True)
class Count(Leaf):
    """A whole number."""

    least: int = 1
    most: int = 100_000

    @property
    def wanted(self) -> str:
        """The range."""
        return f"a whole number from {self.least} to {self.most}"

    def read(self, value: object) -> int:
        """Read an integer."""
        if isinstance(value, bool) or not isinstance(value, int) or not self.least <= value <= self.most:
            raise self.refuse(value)
        return value

    def schema(self) -> dict[str, Any]:
        """Give the range."""
        return {"type": "integer", "minimum": self.least, "maximum": self.most}


@dataclass(frozen=True)
class Flag(Leaf):
    """True or false."""

    @property
    def wanted(self) -> str:
        """Both words."""
        return "true or false"

    def read(self, value: object) -> bool:
        """Read a boolean."""
        if not isinstance(value, bool):
            raise self.refuse(value)
        return value

    def schema(self) -> dict[str, Any]:
        """Give the type."""
        return {"type": "boolean"}


@dataclass(frozen=True)
class OneOf(Leaf):
    """One of a few words (or counts)."""

    options: tuple[str | int, ...]

    @property
    def wanted(self) -> str:
        """The words."""
        return "one of " + ", ".join(f'"{o}"' if isinstance(o, str) else str(o) for o in self.options)

    def read(self, value: object) -> str | int:
        """Compare with the options."""
        for option in self.options:
            if type(value) is type(option) and value == option:
                return option
        near = did_you_mean(value, [str(o) for o in self.options]) if _is_short(value) else ""
        raise Refused(f"must be {self.wanted}, got {shown(value)}{near}.")

    def schema(self) -> dict[str, Any]:
        """Give the options."""
        return {"enum": list(self.options)}


@dataclass(frozen=True)
class Text(Leaf):
    """Free text: markup is only text, control characters are refused."""

    @property
    def wanted(self) -> str:
        """The kind of text."""
        return f"text of at most {LONGEST_TEXT} characters, not blank"

    def read(self, value: object) -> str:
        """Check length and characters."""
        if not isinstance(value, str) or not value.strip() or len(value) > LONGEST_TEXT:
            raise self.refuse(value)
        bad = next((c for c in value if _is_control(c)), None)
        if bad is not None:
            raise Refused(f"must be text without control characters, got U+{ord(bad):04X} in {shown(value)}.")
        return value

    def schema(self) -> dict[str, Any]:
        """Give the length."""
        return {"type": "string", "minLength": 1, "maxLength": LONGEST_TEXT, "pattern": r"\S"}


@dataclass(frozen=True)
class Match(Leaf):
    """Text of a fixed form."""

    pattern: re.Pattern[str]
    form: str

    @property
    def wanted(self) -> str:
        """The form."""
        return self.form

    def read(self, value: object) -> str:
        """Compare with the pattern."""
        if not isinstance(value, str) or len(value) > LONGEST_TEXT or not self.pattern.fullmatch(value):
            raise self.refuse(value)
        if value in RESERVED and self.pattern is NAME:
            raise Refused(f"must be another name: '{value}' is reserved for result ids and keys.")
        return value

    def schema(self) -> dict[str, Any]:
        """Give the pattern."""
        return {"type": "string", "pattern": f"^(?:{self.pattern.pattern})$"}


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
            near = did_you_mean(value, self.words) if _is_short(value) else ""
            words = ", ".join(f'"{word}"' for word in self.words)
            raise Refused(str(refused).replace("must be ", f"must be {words} or ", 1).removesuffix(".") + f"{near}.") from None

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


def _is_short(value: object) -> Any:
    """Tell whether a value may be compared with known words: long texts would take long."""
    return isinstance(value, str) and len(value) <= 64


def _is_control(character: str) -> bool:
    """Tell control characters, line separators and direction overrides, which could disguise a record."""
    return unicodedata.category(character) in {"Cc", "Cs", "Zl", "Zp"} or "\u202a" <= character <= "\u202e" or "\u2066" <= character <= "\u2069"


def key(meaning: str, source: str = "", *, default: Any = ..., in_words: str = "", at_least: int | None = None) -> Any:
    """Declare a key of the unit file.

    Parameters
    ----------
    meaning, source
        What the value means and where a user finds it.
    default, in_words
        Its default, and the default in words where None stands for something found later.
    at_least
        Fewest entries of an array or table.
    """
    extra = {"source": source, "default_in_words": in_words}
    if isinstance(default, Quantity | dict | tuple):
        return Field(default_factory=lambda: default, description=meaning, min_length=at_least, json_schema_extra=extra)
    return Field(default, description=meaning, min_length=at_least, json_schema_extra=extra)


Title = Annotated[str, Text()]
Name = Annotated[str, Match(NAME, "a name of at most 16 letters, digits and underscores, first a letter")]
Yes = Annotated[bool, Flag()]
Whole = Annotated[int, Count()]
Ratio = Annotated[float, Number()]
Voltage = Annotated[Quantity, Measure("kV")]
Current = Annotated[Quantity, Measure("kA")]
Power = Annotated[Quantity, Measure("MVA")]
Loss = Annotated[Quantity, Measure("kW")]
Percent = Annotated[Quantity, Measure("%", most=1000.0)]
Tolerance = Annotated[Quantity, Measure("%", most=50.0)]
Ohm = Annotated[Quantity, Measure("ohm")]
Length = Annotated[Quantity, Measure("mm")]
Height = Annotated[Quantity, Measure("mm", least_allowed=True)]
Area = Annotated[Quantity, Measure("mm^2")]
Duration = Annotated[Quantity, Measure("s", most=3600.0)]
Frequency = Annotated[Quantity, Measure("Hz", most=400.0)]
Angle = Annotated[Quantity, Measure("deg", most=180.0)]
Class = Annotated[int, Count(90, 300)]
Temperature = Annotated[Quantity, Measure("degC", least=-60.0, most=400.0)]
Stress = Annotated[Quantity, Measure("MPa", most=10_000.0)]
Force = Annotated[Quantity, Measure("kN")]
Material = Annotated[Literal["copper", "aluminium"], OneOf(("copper", "aluminium"))]

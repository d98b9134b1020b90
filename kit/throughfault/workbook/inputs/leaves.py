"""How one value of the unit file is read and described: the plain leaves of the model.

Every leaf words its own refusal, so that a reader meets one voice; pydantic composes them.
"""

import re
import unicodedata
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

from pydantic import GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic_core import CoreSchema, PydanticCustomError, core_schema

from throughfault.errors import did_you_mean
from throughfault.quantities import shown

LONGEST_TEXT = 500
NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]{0,15}")
#: names that result ids or the keys of the unit file use themselves
RESERVED = ("neutral", "clamping", "prefault_voltage", "terminals")


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
        least = "minimum" if self.least_allowed else "exclusiveMinimum"
        return {"type": "number", least: self.least, "maximum": self.most}


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
        near = nearest(value, [str(o) for o in self.options])
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


def nearest(value: object, known: Iterable[str]) -> str:
    """Return the nearest known word, in brackets; long texts are not compared, that would take long."""
    return did_you_mean(value, known) if isinstance(value, str) and len(value) <= 64 else ""


def _is_control(character: str) -> bool:
    """Tell control characters, line separators and direction overrides, which could disguise a record."""
    override = "\u202a" <= character <= "\u202e" or "\u2066" <= character <= "\u2069"
    return override or unicodedata.category(character) in {"Cc", "Cs", "Zl", "Zp"}

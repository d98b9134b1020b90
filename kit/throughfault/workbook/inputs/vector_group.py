"""The vector group symbol of IEC 60076-1."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

from throughfault.errors import UnitFileError

__all__ = ["VectorGroup", "WindingConnection", "parse_vector_group"]

Letter = Literal["Y", "D", "Z", "I", "auto"]
STABILISING_CLOCK = 11  # common practice where the symbol gives none
_FIRST = re.compile(r"(YN|ZN|Y|Z|D|I)", re.ASCII)
_NEXT = re.compile(r"(\+?)(yn|zn|y|z|d|i|a)(\d{1,2})?", re.ASCII)
_LETTERS: dict[str, Letter] = {"Y": "Y", "D": "D", "Z": "Z", "I": "I", "A": "auto"}
_SOURCE = "IEC 60076-1, clause on connection symbols"


@dataclass(frozen=True, slots=True)
class WindingConnection:
    """How one winding is connected.

    Attributes
    ----------
    letter
        ``Y``, ``D``, ``Z``, ``I`` (single-phase) or ``auto`` (the common winding of an autotransformer).
    neutral
        Whether a neutral of its own is brought out; that of an autotransformer belongs to the first winding.
    clock
        Hours by which the winding lags the first one.
    stabilising
        Not brought out (``+d``).
    """

    letter: Letter
    neutral: bool
    clock: int
    stabilising: bool = False


@dataclass(frozen=True, slots=True)
class VectorGroup:
    """The connections of all windings, high voltage first."""

    symbol: str
    windings: tuple[WindingConnection, ...]

    @property
    def auto(self) -> bool:
        """Whether the first two windings form an autotransformer."""
        return any(winding.letter == "auto" for winding in self.windings)

    @property
    def single_phase(self) -> bool:
        """Whether the symbol is that of a single-phase unit."""
        return self.windings[0].letter == "I"


def parse_vector_group(symbol: str) -> VectorGroup:
    """Read a symbol such as ``YNyn0d11``, ``YNyn0+d``, ``YNa0d11``, ``Dzn0`` or ``Ii0``.

    Raises
    ------
    UnitFileError
        If the symbol is not of that form, or names a clock hour its letters cannot have.
    """
    first = _FIRST.match(symbol) if len(symbol) <= 40 else None
    if first is None:
        raise _refused(symbol, "begins with YN, Y, ZN, Z, D or I for the high-voltage winding")
    windings = [_connection(first[1].upper(), 0, stabilising=False)]
    position = first.end()
    while position < len(symbol):
        found = _NEXT.match(symbol, position)
        if found is None:
            raise _refused(symbol, f"cannot be read from {symbol[position:]!r} on")
        windings.append(_following(symbol, windings, found))
        position = found.end()
    if len(windings) < 2:
        raise _refused(symbol, "names one winding only")
    return VectorGroup(symbol, tuple(windings))


def _following(symbol: str, before: list[WindingConnection], found: re.Match[str]) -> WindingConnection:
    plus, letters, hour = found.groups()
    _check_place(symbol, before, letters, stabilising=bool(plus))
    if hour is None and letters != "a" and not plus:
        raise _refused(symbol, f"has no clock number behind '{letters}'")
    clock = int(hour) if hour is not None else 0 if letters == "a" else STABILISING_CLOCK
    made = _connection(letters.upper(), clock, stabilising=bool(plus))
    allowed = _clocks(before[0], made)
    if clock not in allowed:
        hours = ", ".join(str(h) for h in allowed)
        raise _refused(symbol, f"has clock number {clock} behind '{letters}', which can only be one of {hours}")
    return made


def _check_place(symbol: str, before: list[WindingConnection], letters: str, *, stabilising: bool) -> None:
    first = before[0].letter
    if letters == "a" and (len(before) > 1 or first not in {"Y", "I"}):
        raise _refused(symbol, "has 'a' elsewhere than second behind a Y or I winding")
    if (first == "I") != (letters == "i") and not (first == "I" and letters == "a"):
        raise _refused(symbol, "mixes single-phase and three-phase letters")
    if stabilising and letters != "d":
        raise _refused(symbol, f"has '+{letters}', but a stabilising winding is a delta")


def _clocks(first: WindingConnection, second: WindingConnection) -> tuple[int, ...]:
    """Return the hours two connections can make: a star, or two equal or two turned systems, differ by even hours."""
    if second.letter == "auto":
        return (0,)
    if first.letter == "I":
        return (0, 6)
    # A star takes the line-to-neutral direction, a delta and a zigzag one turned by an odd hour.
    odd = (first.letter == "Y") != (second.letter == "Y")
    return tuple(range(1 if odd else 0, 12, 2))


def _connection(letters: str, clock: int, *, stabilising: bool) -> WindingConnection:
    return WindingConnection(_LETTERS[letters[0]], letters.endswith("N"), clock, stabilising)


def _refused(symbol: str, why: str) -> UnitFileError:
    shown = symbol if len(symbol) <= 40 else f"{symbol[:40]}..."
    return UnitFileError(f'must be a vector group such as "YNd11" ({_SOURCE}), got {shown!r}, which {why}.')

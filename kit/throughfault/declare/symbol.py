"""Symbols: the term, the letter, the unit."""

from __future__ import annotations

from dataclasses import dataclass

from throughfault.errors import DeclarationError, did_you_mean
from throughfault.quantities import UNITS

__all__ = ["Symbol"]


@dataclass(frozen=True, slots=True)
class Symbol:
    """One quantity of the trade as it is named, printed and measured.

    Attributes
    ----------
    term
        Full term in snake case, as arguments and keys use it.
    latex
        The letter as printed.
    unit
        Unit in which cells take and give it (a key of `throughfault.quantities.UNITS`).
    description
        One line for readers.

    Raises
    ------
    DeclarationError
        If the unit does not exist or the term is no identifier.
    """

    term: str
    latex: str
    unit: str
    description: str

    def __post_init__(self) -> None:
        if not self.term.isidentifier():
            raise DeclarationError(f"symbol '{self.term}' must be a Python identifier.")
        if self.unit not in UNITS:
            raise DeclarationError(f"symbol '{self.term}': unknown unit '{self.unit}'{did_you_mean(self.unit, UNITS)}.")

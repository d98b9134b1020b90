"""The one bibliography and the citations that point into it."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Literal, get_args

from throughfault.errors import DeclarationError, did_you_mean

__all__ = ["PROVENANCES", "Provenance", "Source", "bibliography"]

Provenance = Literal["published", "recalled", "derived", "common practice", "maker", "signatory"]
PROVENANCES: tuple[str, ...] = get_args(Provenance)


@cache
def bibliography() -> dict[str, dict[str, str]]:
    """Return ``{key: {title, edition}}`` of every source the kit may cite."""
    return tomllib.loads(files("throughfault").joinpath("sources.toml").read_text(encoding="utf-8"))


@dataclass(frozen=True, slots=True)
class Source:
    """A place in a source, and how the kit came to know what stands there.

    Attributes
    ----------
    key
        Key of the bibliography.
    where
        Clause, table, equation or page; never empty.
    provenance
        One of `PROVENANCES`.

    Raises
    ------
    DeclarationError
        If the key is unknown, the place is empty or the provenance is no word of the list.
    """

    key: str
    where: str
    provenance: Provenance

    def __post_init__(self) -> None:
        if self.key not in bibliography():
            near = did_you_mean(self.key, bibliography())
            raise DeclarationError(f"source '{self.key}' is not in the bibliography{near}.")
        if not self.where.strip():
            raise DeclarationError(f"source '{self.key}' needs a place: clause, table, equation or page.")
        if self.provenance not in PROVENANCES:
            raise DeclarationError(f"provenance must be one of {', '.join(PROVENANCES)}, got '{self.provenance}'.")

    @property
    def citation(self) -> str:
        """Key and place in one line."""
        return f"{self.key}, {self.where}"

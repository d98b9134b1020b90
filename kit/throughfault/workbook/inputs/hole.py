"""A hole: stands where a value of the unit file was refused, so that the other values can still be compared."""

from __future__ import annotations

from typing import Any, NoReturn

__all__ = ["HOLE", "Hole", "HoleMetError"]


class HoleMetError(Exception):
    """A comparison needs a value that was refused; the comparison is left out."""


class Hole:
    """Refuses every use: whoever touches it learns that the value is not known."""

    def _met(self, *_args: Any) -> NoReturn:
        raise HoleMetError

    __getattr__ = __eq__ = __ne__ = __lt__ = __le__ = __gt__ = __ge__ = __bool__ = __iter__ = __len__ = _met
    __getitem__ = __contains__ = __float__ = __add__ = __radd__ = __mul__ = __rmul__ = __sub__ = __rsub__ = _met
    __truediv__ = __rtruediv__ = __neg__ = __abs__ = __hash__ = __str__ = _met

    def __repr__(self) -> str:
        return "<hole>"


HOLE = Hole()

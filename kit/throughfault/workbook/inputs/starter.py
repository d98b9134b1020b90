"""Unit files to start from."""

from __future__ import annotations

from importlib.resources import files

from throughfault.errors import UnitFileError, did_you_mean
from throughfault.quantities import shown
from throughfault.workbook.inputs.rating import TAG, TAG_FORM

__all__ = ["KINDS_OF_UNIT", "starter"]

KINDS_OF_UNIT = ("two-winding", "three-winding", "auto", "distribution")
_PLACE = "@TAG@"


def starter(kind: str, tag: str) -> str:
    """Return a commented unit file to start from.

    Raises
    ------
    UnitFileError
        If the kind is unknown or the tag cannot be one.
    """
    faults = []
    if kind not in KINDS_OF_UNIT:
        known = ", ".join(KINDS_OF_UNIT)
        faults.append(f"kind must be one of {known}, got {shown(kind)}{did_you_mean(kind[:64], KINDS_OF_UNIT)}.")
    if not TAG.fullmatch(tag):
        faults.append(f"tag must be {TAG_FORM}, got {shown(tag)}.")
    if faults:
        raise UnitFileError(faults)
    text = files("throughfault.workbook.starters").joinpath(f"{kind}.toml").read_text(encoding="utf-8")
    return text.replace(_PLACE, tag)

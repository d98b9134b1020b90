"""How numbers and units are written, in one place, for text, HTML and LaTeX.

Five significant digits, whole numbers up to seven digits written out, no thousands mark, a power of
ten only below 0.0001 and from 10 million. The full value always stands beside in the record's markup.
"""

from __future__ import annotations

import json
import math
import re
from collections.abc import Sequence
from decimal import ROUND_HALF_EVEN, Decimal

from throughfault.errors import DeclarationError

__all__ = [
    "column_text",
    "decimals_of",
    "full_value",
    "number_latex",
    "number_text",
    "quantity_text",
    "unit_latex",
    "unit_text",
]

DIGITS = 5
SMALL_DIGITS = 3
NEGLIGIBLE = 1e-4
COLUMN_DIGITS = 4
SMALLEST_PLAIN = 1e-4
LARGEST_PLAIN = 1e7
MINUS = "\N{MINUS SIGN}"
_RAISED = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
_SIGNS = {"degC": "°C", "deg": "°", "ohm": "Ω", "mohm": "mΩ", "kohm": "kΩ", "uohm": "µΩ", "um": "µm"}
_LETTERS = re.compile(r"[A-Za-z]+")
_POWER = re.compile(r"\^(-?\d+)")


def _signs(unit: str) -> str:
    return "" if unit == "1" else _LETTERS.sub(lambda m: _SIGNS.get(m[0], m[0]), unit)


def _split(value: float, digits: int) -> tuple[str, int | None]:
    """Return the digits of a number and its power of ten, ``None`` where none is written."""
    if not math.isfinite(value):
        raise DeclarationError(f"a number to be shown must be finite, got {value}.")
    if value == 0.0:
        return "0", None
    exact = Decimal(repr(float(value)))
    if SMALLEST_PLAIN <= abs(value) < LARGEST_PLAIN:
        last = min(0, exact.adjusted() - digits + 1)
        return _trim(exact.quantize(Decimal(1).scaleb(last), ROUND_HALF_EVEN)), None
    mantissa, _, power = f"{exact:.{digits - 1}e}".partition("e")
    return _trim(Decimal(mantissa)), int(power)


def _trim(number: Decimal) -> str:
    text = f"{number:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def number_text(value: float, digits: int = DIGITS) -> str:
    """Write a number for readers.

    Raises
    ------
    DeclarationError
        If it is not finite: such a result is not assessed, and never shown as a number.
    """
    plain, power = _split(value, digits)
    raised = "" if power is None else f"\N{MULTIPLICATION SIGN}10{str(power).translate(_RAISED)}"
    return plain.replace("-", MINUS) + raised


def number_latex(value: float, digits: int = DIGITS) -> str:
    """Write a number in LaTeX, by the same rules."""
    plain, power = _split(value, digits)
    return plain if power is None else rf"{plain} \times 10^{{{power}}}"


def _largest_power(values: Sequence[float | None]) -> int:
    present = [Decimal(repr(float(v))) for v in values if v is not None]
    return max((number.adjusted() for number in present if number), default=0)


def decimals_of(values: Sequence[float | None], digits: int = COLUMN_DIGITS) -> int:
    """Return the decimals with which the largest keeps `digits` significant digits and small ones at least three.

    Values below a ten-thousandth of the largest count as nothing.
    """
    largest = _largest_power(values)
    sizes = [abs(v) for v in values if v]
    counted = [size for size in sizes if size > NEGLIGIBLE * max(sizes)]
    least = SMALL_DIGITS - 1 - _largest_power([min(counted)]) if counted else 0
    return max(0, digits - 1 - largest, least)


def column_text(values: Sequence[float | None], digits: int = COLUMN_DIGITS) -> list[str]:
    """Write the numbers of one table column with one count of decimals, ``None`` as an empty text.

    The largest keeps `digits` significant digits, so that decimal points stand below each other.
    """
    largest = _largest_power(values)
    if not -4 <= largest < 7:  # the powers of ten of the two bounds above
        return ["" if v is None else number_text(v, digits) for v in values]
    decimals = decimals_of(values, digits)
    return ["" if v is None else f"{Decimal(repr(float(v))):.{decimals}f}".replace("-", MINUS) for v in values]


def full_value(value: object) -> str:
    """Write a value in full, as it stands in the results file; text as it was typed."""
    return value if isinstance(value, str) else json.dumps(value)


def unit_text(unit: str) -> str:
    """Write a unit of the kit's list for readers, e.g. ``A/mm²``; the unit of a pure number is empty."""
    return _POWER.sub(lambda m: m[1].translate(_RAISED), _signs(unit)).replace(" ", "·")


def unit_latex(unit: str) -> str:
    """Write a unit upright in LaTeX, with its leading thin space; empty for a pure number."""
    text = _POWER.sub(r"^{\1}", _signs(unit)).replace("%", r"\%").replace(" ", r"\,")
    text = text.replace("Ω", r"\Omega ").replace("µ", r"\mu ")
    return rf"\,\mathrm{{{text}}}" if text else ""


def quantity_text(value: float, unit: str, digits: int = DIGITS) -> str:
    """Write a number with its unit for readers."""
    written = unit_text(unit)
    space = "" if written in ("", "°") else "\N{NO-BREAK SPACE}"
    return f"{number_text(value, digits)}{space}{written}"

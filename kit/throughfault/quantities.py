"""Numbers with units: one registry, a closed list of units, and a strict grammar.

A quantity is read from text such as ``"132 kV"`` by pattern and table, never evaluated as an
expression. Units carry a *kind* above their dimension, so that a watt does not pass for a
volt-ampere, nor a temperature rise for a temperature.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from datetime import date, time
from functools import lru_cache

import pint

from throughfault.errors import DeclarationError, QuantityError, did_you_mean

__all__ = ["KINDS", "UNITS", "Quantity", "as_pint", "convert", "expectation", "parse", "parse_impedance", "shown"]

LONGEST_TEXT = 64

#: what the listed units are made of; the library's own catalogue of a thousand units takes longer to read than a review
_DEFINITIONS = """
micro- = 1e-6
milli- = 1e-3
centi- = 1e-2
kilo- = 1e3
mega- = 1e6
giga- = 1e9
meter = [length]
second = [time]
ampere = [current]
gram = [mass]
kelvin = [temperature]; offset: 0
radian = []
degree = 3.141592653589793 / 180 * radian
percent = 0.01
degree_Celsius = kelvin; offset: 273.15
minute = 60 * second
hour = 3600 * second
hertz = 1 / second
newton = kilogram * meter / second ** 2
pascal = newton / meter ** 2
joule = newton * meter
watt = joule / second
volt = watt / ampere
ohm = volt / ampere
tesla = volt * second / meter ** 2
metric_ton = 1000 * kilogram
"""

_registry: pint.UnitRegistry[float] = pint.UnitRegistry(None, autoconvert_offset_to_baseunit=True)
for _line in _DEFINITIONS.split("\n"):
    if _line:
        _registry.define(_line)

#: unit text -> (kind, unit as the registry names it)
UNITS: dict[str, tuple[str, str]] = {
    "1": ("number", "dimensionless"),
    "%": ("ratio", "percent"),
    "p.u.": ("ratio", "dimensionless"),
    "V": ("voltage", "volt"),
    "kV": ("voltage", "kilovolt"),
    "mA": ("current", "milliampere"),
    "A": ("current", "ampere"),
    "kA": ("current", "kiloampere"),
    "VA": ("apparent power", "watt"),
    "kVA": ("apparent power", "kilowatt"),
    "MVA": ("apparent power", "megawatt"),
    "GVA": ("apparent power", "gigawatt"),
    "W": ("power", "watt"),
    "kW": ("power", "kilowatt"),
    "MW": ("power", "megawatt"),
    "mohm": ("impedance", "milliohm"),
    "ohm": ("impedance", "ohm"),
    "kohm": ("impedance", "kiloohm"),
    "Hz": ("frequency", "hertz"),
    "um": ("length", "micrometer"),
    "mm": ("length", "millimeter"),
    "cm": ("length", "centimeter"),
    "m": ("length", "meter"),
    "mm^2": ("area", "millimeter ** 2"),
    "cm^2": ("area", "centimeter ** 2"),
    "m^2": ("area", "meter ** 2"),
    "ms": ("time", "millisecond"),
    "s": ("time", "second"),
    "min": ("time", "minute"),
    "h": ("time", "hour"),
    "degC": ("temperature", "degree_Celsius"),
    "K": ("temperature rise", "delta_degree_Celsius"),
    "deg": ("angle", "degree"),
    "rad": ("angle", "radian"),
    "N": ("force", "newton"),
    "kN": ("force", "kilonewton"),
    "MN": ("force", "meganewton"),
    "Pa": ("stress", "pascal"),
    "kPa": ("stress", "kilopascal"),
    "MPa": ("stress", "megapascal"),
    "GPa": ("stress", "gigapascal"),
    "N/mm^2": ("stress", "newton / millimeter ** 2"),
    "g": ("mass", "gram"),
    "kg": ("mass", "kilogram"),
    "t": ("mass", "metric_ton"),
    "mT": ("flux density", "millitesla"),
    "T": ("flux density", "tesla"),
    "J": ("energy", "joule"),
    "kJ": ("energy", "kilojoule"),
    "A/mm^2": ("current density", "ampere / millimeter ** 2"),
    "A^2 s/mm^4": ("heat integral", "ampere ** 2 * second / millimeter ** 4"),
    "W s/(kg K)": ("specific heat", "watt * second / kilogram / delta_degree_Celsius"),
    "W/kg": ("loss per mass", "watt / kilogram"),
    "W s/(kg K^2)": ("slope of specific heat", "watt * second / kilogram / delta_degree_Celsius ** 2"),
    "uohm m": ("resistivity", "microohm * meter"),
    "kg/m^3": ("density", "kilogram / meter ** 3"),
}

#: kind -> the units it may be written in
KINDS: dict[str, tuple[str, ...]] = {
    kind: tuple(unit for unit, (k, _) in UNITS.items() if k == kind) for kind, _ in UNITS.values()
}

_NUMBER = r"[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d{1,3})?"
_QUANTITY = re.compile(rf"({_NUMBER})\s*([A-Za-z%].*)", re.ASCII)
_BARE = re.compile(_NUMBER, re.ASCII)
_IMPEDANCE = re.compile(
    rf"({_NUMBER})\s*(\w+)\s*([+-])\s*((?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d{{1,3}})?)j\s*(\w+)", re.ASCII
)


@lru_cache(maxsize=512)
def _scale(source: str, target: str) -> tuple[float, float]:
    """Return factor and offset of the linear conversion between two units of one kind."""
    for unit in (source, target):
        if unit not in UNITS:
            raise DeclarationError(f"unit '{unit}' is not in the kit's list{did_you_mean(unit, UNITS)}.")
    if UNITS[source][0] != UNITS[target][0]:
        kinds = f"{UNITS[source][0]} to {UNITS[target][0]}"
        raise DeclarationError(f"'{source}' cannot be converted to '{target}': {kinds}.")
    if source == target:
        return 1.0, 0.0
    one = _registry.Quantity(1.0, UNITS[source][1]).to(UNITS[target][1]).magnitude
    zero = _registry.Quantity(0.0, UNITS[source][1]).to(UNITS[target][1]).magnitude
    return float(one - zero), float(zero)


def as_pint(value: float, unit: str) -> pint.Quantity[float]:
    """Return a number with its unit as a quantity of the units library, which calculates with units.

    A temperature has an offset unit there: added to a plain number it is refused, in a product it counts from
    absolute zero.
    """
    return _registry.Quantity(value, UNITS[unit][1])


def convert(value: float, source: str, target: str) -> float:
    """Convert a plain number between two units of the same kind.

    Raises
    ------
    DeclarationError
        If a unit is unknown or the kinds differ (a fault of the kit: user input is parsed).
    """
    factor, offset = _scale(source, target)
    # Division keeps 0.001-type factors exact where the reverse factor is a whole number.
    if offset == 0.0 and 0.0 < factor < 1.0:
        return value / _scale(target, source)[0]
    return value * factor + offset


@dataclass(frozen=True, slots=True)
class Quantity:
    """A number and the unit it was written in.

    Attributes
    ----------
    value
        The number, finite; complex for an impedance only.
    unit
        A key of `UNITS`.
    """

    value: float
    unit: str

    def to(self, unit: str) -> float:
        """Return the number in another unit of the same kind."""
        return convert(self.value, self.unit, unit)

    @property
    def kind(self) -> str:
        """The kind of quantity, e.g. ``voltage``."""
        return UNITS[self.unit][0]

    def __str__(self) -> str:
        return f"{self.value:.15g} {self.unit}" if self.unit != "1" else f"{self.value:.15g}"


def expectation(unit: str) -> str:
    """Say what a text must be, for a message: kind, example and the units allowed."""
    kind = UNITS[unit][0]
    return f'{"an" if kind[0] in "aeiou" else "a"} {kind} such as "1 {unit}" (unit one of {", ".join(KINDS[kind])})'


def shown(text: object) -> str:
    """Show a value in a message: shortened, and never so deep or long that showing it fails."""
    if isinstance(text, dict | list):
        return "a table" if isinstance(text, dict) else "an array"
    if isinstance(text, int) and abs(text) >= 10**LONGEST_TEXT:
        return f"a whole number of more than {LONGEST_TEXT} digits"
    if isinstance(text, bool):
        return str(text).lower()
    whole = str(text) if isinstance(text, date | time) else repr(text)
    return whole if len(whole) <= LONGEST_TEXT else f"{whole[:40]}... ({len(whole)} characters)"


def parse(text: object, unit: str) -> Quantity:
    """Read ``"number unit"``; `unit` is any unit of the wanted kind.

    Raises
    ------
    QuantityError
        With what was expected and what was found; the caller puts the key in front.
    """
    wanted = f"must be {expectation(unit)}"
    if not isinstance(text, str):
        raise QuantityError(f"{wanted}, got {shown(text)}.")
    match = _QUANTITY.fullmatch(text.strip()) if len(text) <= LONGEST_TEXT else None
    if match is None:
        bare = len(text) <= LONGEST_TEXT and _BARE.fullmatch(text.strip())
        problem = f", got {shown(text)} without a unit." if bare else f", got {shown(text)}."
        raise QuantityError(wanted + problem)
    found = match[2]
    if found not in UNITS:
        near = did_you_mean(found, KINDS[UNITS[unit][0]])
        raise QuantityError(f"{wanted}, got {shown(text)} with unknown unit {found!r}{near}.")
    if UNITS[found][0] != UNITS[unit][0]:
        raise QuantityError(f"{wanted}, got {shown(text)}, which is of kind {UNITS[found][0]}.")
    value = float(match[1])
    if not math.isfinite(value):
        raise QuantityError(f"{wanted}, finite, got {shown(text)}.")
    return Quantity(value, found)


def parse_impedance(text: object) -> complex:
    """Read ``"20 ohm"`` or ``"5 ohm + 12j ohm"`` in ohm.

    Raises
    ------
    QuantityError
        As `parse`.
    """
    match = _IMPEDANCE.fullmatch(text.strip()) if isinstance(text, str) and len(text) <= LONGEST_TEXT else None
    if match is None:
        return complex(parse(text, "ohm").to("ohm"))
    real = parse(f"{match[1]} {match[2]}", "ohm").to("ohm")
    imaginary = parse(f"{match[3]}{match[4]} {match[5]}", "ohm").to("ohm")
    return complex(real, imaginary)

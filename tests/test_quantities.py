"""Quantities: the grammar, the kinds, the conversions."""

import contextlib
import math

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.errors import DeclarationError, QuantityError
from throughfault.quantities import KINDS, UNITS, Quantity, convert, parse, parse_impedance

VOLTAGE = 'must be a voltage such as "1 V" (unit one of V, kV)'


@pytest.mark.parametrize(
    ("text", "unit", "value"),
    [
        ("132 kV", "V", 132000.0),
        ("132kV", "V", 132000.0),
        (" 1.5e1 mm ", "mm", 15.0),
        ("-5 degC", "degC", -5.0),
        ("12.5 %", "p.u.", 0.125),
        ("62 mm^2", "m^2", 6.2e-05),
        ("180 deg", "rad", math.pi),
        ("2 min", "s", 120.0),
        ("1 N/mm^2", "MPa", 1.0),
    ],
)
def test_reads_number_and_unit(text, unit, value):
    """A number and a known unit give the number in any unit of the kind."""
    assert parse(text, unit).to(unit) == pytest.approx(value, rel=1e-15)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("132", f"{VOLTAGE}, got '132' without a unit."),
        (132, f"{VOLTAGE}, got 132."),
        ("132 Kv", f"{VOLTAGE}, got '132 Kv' with unknown unit 'Kv' (did you mean 'kV'?)."),
        ("5 MW", f"{VOLTAGE}, got '5 MW', which is of kind power."),
        ("9**9**9", f"{VOLTAGE}, got '9**9**9'."),
        ("__import__('os') V", f"{VOLTAGE}, got \"__import__('os') V\"."),
        ("nan V", f"{VOLTAGE}, got 'nan V'."),
        ("inf V", f"{VOLTAGE}, got 'inf V'."),
        ("1e999 V", f"{VOLTAGE}, finite, got '1e999 V'."),
        ("", f"{VOLTAGE}, got ''."),
        ("1" * 100 + " V", f"{VOLTAGE}, got '{'1' * 39}... (104 characters)."),
        ("٣ V", f"{VOLTAGE}, got '٣ V'."),
    ],
)
def test_refuses_with_one_sentence(text, message):
    """What is no voltage is refused with what was expected and what was got."""
    with pytest.raises(QuantityError) as fault:
        parse(text, "V")
    assert str(fault.value) == message


@pytest.mark.parametrize(
    ("text", "value"), [("20 ohm", 20), ("5 ohm + 12j ohm", 5 + 12j), ("5 ohm - 1.5j kohm", 5 - 1500j)]
)
def test_reads_impedances(text, value):
    """An impedance may be complex, each part with its unit."""
    assert parse_impedance(text) == value


def test_refuses_an_impedance_in_volts():
    """A complex impedance of the wrong unit is refused."""
    with pytest.raises(
        QuantityError, match=r"^must be an impedance such as .* got '\+12 V', which is of kind voltage\.$"
    ):
        parse_impedance("5 ohm + 12j V")


def test_kinds_stand_above_dimensions():
    """A watt is no volt-ampere, and a temperature no temperature rise."""
    with pytest.raises(DeclarationError, match=r"^'MW' cannot be converted to 'MVA': power to apparent power\.$"):
        convert(1.0, "MW", "MVA")
    with pytest.raises(
        DeclarationError, match=r"^'K' cannot be converted to 'degC': temperature rise to temperature\.$"
    ):
        convert(65.0, "K", "degC")


def test_unknown_unit_is_a_fault_of_the_kit():
    """Converting to a unit that does not exist names the nearest one."""
    with pytest.raises(DeclarationError, match=r"^unit 'KA' is not in the kit's list \(did you mean 'kA'\?\)\.$"):
        convert(1.0, "A", "KA")


@given(st.floats(-1e9, 1e9), st.sampled_from(sorted(KINDS)), st.data())
def test_conversion_there_and_back(value, kind, data):
    """Converting there and back changes nothing but rounding."""
    source, target = (data.draw(st.sampled_from(KINDS[kind])) for _ in range(2))
    assert convert(convert(value, source, target), target, source) == pytest.approx(value, rel=1e-12, abs=1e-12)


@given(st.text(max_size=80))
def test_no_text_does_more_than_fail(text):
    """Whatever the text, it is read as a quantity or refused."""
    with contextlib.suppress(QuantityError):
        assert math.isfinite(parse(text, "V").to("V"))


def test_definitions_are_those_of_the_library():
    """Every unit of the kit's short list is the unit of that name in the library's own catalogue."""
    catalogue = pint.UnitRegistry(autoconvert_offset_to_baseunit=True)
    for units in KINDS.values():
        for source in units:
            for target in units:
                there = catalogue.Quantity(1.7, UNITS[source][1]).to(UNITS[target][1]).magnitude
                assert convert(1.7, source, target) == pytest.approx(there, rel=1e-14)


def test_text_of_a_quantity_reads_back():
    """The text of a quantity is one the grammar reads."""
    for unit in UNITS:
        if unit != "1":
            assert parse(str(Quantity(12.5, unit)), unit) == Quantity(12.5, unit)
    assert str(Quantity(2.0, "1")) == "2"

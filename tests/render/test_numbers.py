"""Numbers and units are written by one set of rules."""

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.errors import DeclarationError
from throughfault.quantities import UNITS
from throughfault.render.mathml import mathml
from throughfault.render.numbers import (
    column_text,
    full_value,
    number_latex,
    number_text,
    quantity_text,
    unit_latex,
    unit_text,
)

WRITTEN = [
    (0, "0"),
    (1, "1"),
    (105.0, "105"),
    (132.0, "132"),
    (106000, "106000"),
    (123456.7, "123457"),
    (1234567.8, "1234568"),
    (12.3456789, "12.346"),
    (0.1 + 0.2, "0.3"),
    (99999.96, "100000"),
    (-5.5, "−5.5"),
    (0.00012345678, "0.00012346"),
    (2.5470, "2.547"),
    (1e7, "1×10⁷"),
    (-1.23456e-5, "−1.2346×10⁻⁵"),
    (9.99999e-6, "1×10⁻⁵"),
]


@pytest.mark.parametrize(("value", "text"), WRITTEN)
def test_a_number_keeps_five_digits_and_no_idle_zero(value, text):
    """Everyday sizes are written out, without thousands marks; others carry a power of ten."""
    assert number_text(value) == text


def test_latex_follows_the_same_rules():
    """A power of ten is a product in LaTeX."""
    assert number_latex(12.3456789) == "12.346"
    assert number_latex(-1.23456e-5) == r"-1.2346 \times 10^{-5}"


@pytest.mark.parametrize("value", [float("nan"), float("inf")])
def test_a_number_that_is_not_finite_is_never_shown(value):
    """Such a result is not assessed."""
    with pytest.raises(DeclarationError, match=re.escape(f"a number to be shown must be finite, got {value}.")):
        number_text(value)


@given(st.floats(min_value=1e-12, max_value=1e12))
def test_five_digits_tell_the_number(value):
    """What is written differs from the value by half a unit of the fifth digit at most."""
    mantissa, _, power = number_latex(value).partition(r" \times 10^{")
    assert float(mantissa) * 10.0 ** int(power.rstrip("}") or 0) == pytest.approx(value, rel=5.0001e-5)


def test_a_column_has_one_count_of_decimals():
    """Decimal points stand below each other; what is absent stays empty."""
    assert column_text([13.921, 5.03, None, -0.4124, 1e-17]) == ["13.921", "5.030", "", "−0.412", "0.000"]
    assert column_text([2.5e8, 1.0]) == ["2.5×10⁸", "1"]
    assert column_text([None, 0.0]) == ["", "0.000"]


def test_full_values():
    """A value is kept in full, text as typed, truth as the results file writes it."""
    assert [full_value(v) for v in ("132 kV", 0.1, 3, True)] == ["132 kV", "0.1", "3", "true"]


@pytest.mark.parametrize("unit", UNITS)
def test_every_unit_can_be_set_upright(unit):
    """No unit of the list is beyond the converter, and none shows its spelling of the file."""
    shown = mathml("1" + unit_latex(unit))
    assert "ohm" not in shown
    assert "degC" not in shown
    assert "^" not in unit_text(unit)


def test_units_for_readers():
    """Raised powers and signs of the trade."""
    assert [unit_text(u) for u in ("1", "A/mm^2", "degC", "ohm", "A^2 s/mm^4")] == ["", "A/mm²", "°C", "Ω", "A²·s/mm⁴"]
    assert quantity_text(25.5, "A/mm^2") == "25.5\N{NO-BREAK SPACE}A/mm²"
    assert quantity_text(2.0, "1") == "2"

"""Declared values against calculated ones."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.declare import Outcome
from throughfault.quantities import parse
from throughfault.workbook.assess.declared import assess_declared, half_last_digit


@pytest.mark.parametrize(
    ("text", "half"),
    [
        ("8.0 kA", 0.05),
        ("13 kA", 0.5),
        ("1.50e3 A", 5.0),
        ("2e-3 kA", 0.0005),
        ("-4.25 kA", 0.005),
        ("7. kA", 0.5),
        (".25 kA", 0.005),
        (2.2, 0.05),
    ],
)
def test_half_of_the_last_digit_typed(text, half):
    """The digits as typed say how exactly a value is declared."""
    assert half_last_digit(text) == pytest.approx(half)


def found(value):
    return {"duty.LV.peak": Outcome("duty.LV.peak", value, "kA", "i", "cell", "source", "derived")}


def compare(text, value):
    return assess_declared({"duty.LV.peak": parse(text, "kA")}, {"duty.LV.peak": text}, found(value))


def test_a_value_that_rounds_to_the_declared_one_agrees():
    """Agreement is judged by the digits as typed."""
    assert compare("8.0 kA", 8.04).open_points == ()
    assert compare("8000 A", 8.0004).open_points == ()


def test_what_agrees_leaves_its_trace():
    """Declared value and deviation are results, in the unit of the calculated one, whether they agree or not."""
    found = {o.id: o for o in compare("8000 A", 8.0004).quantities}
    assert list(found) == ["declared.duty.LV.peak", "declared.duty.LV.peak.deviation"]
    value, deviation = found.values()
    assert (value.value, value.unit, value.provenance) == (pytest.approx(8.0), "kA", "maker")
    assert (value.symbol, value.cell, value.source) == ("", "", "unit file, declared")
    assert (deviation.value, deviation.unit, deviation.provenance) == (pytest.approx(0.005), "%", "derived")
    assert [o.value for o in compare("8.0 kA", 8.4).quantities] == pytest.approx([8.0, 5.0])


def test_against_a_declared_zero_there_is_no_deviation():
    """Nothing is so many per cent above zero."""
    assert [o.id for o in compare("0.0 kA", 8.4).quantities] == ["declared.duty.LV.peak"]


def test_a_value_of_another_kind_is_missing():
    """A declared value that cannot be compared with the result of its id is named, not compared."""
    outcome = {"duty.LV.x_over_r": Outcome("duty.LV.x_over_r", 20.0, "1", "x", "cell", "source", "derived")}
    fragment = assess_declared({"duty.LV.x_over_r": parse("12 kA", "kA")}, {"duty.LV.x_over_r": "12 kA"}, outcome)
    assert fragment.quantities == ()
    assert [missing.reason for missing in fragment.missing] == ["the review's result is in 1, which this value is not"]


def test_a_difference_is_an_open_point_with_both_values():
    """A value that does not round to the declared one is named with its deviation."""
    (point,) = compare("8.0 kA", 8.4).open_points
    assert point.id == "declared.duty.LV.peak"
    assert point.values["deviation"].value == pytest.approx(5.0)
    assert not point.blocking


def test_a_declared_zero_is_compared_too():
    """A declared zero against something is a difference."""
    assert len(compare("0.0 kA", 8.4).open_points) == 1


def test_what_the_review_does_not_give_is_missing():
    """A declared id without a result is named."""
    fragment = assess_declared({"force.LV.radial": parse("9 MN", "kN")}, {"force.LV.radial": "9 MN"}, found(1.0))
    assert [missing.id for missing in fragment.missing] == ["declared.force.LV.radial"]


@given(st.integers(1, 9999), st.integers(0, 3))
def test_a_value_agrees_with_its_own_rounding(digits, decimals):
    """Whatever is declared to some digits agrees with itself."""
    text = f"{digits / 10**decimals:.{decimals}f} kA"
    assert compare(text, parse(text, "kA").value).open_points == ()

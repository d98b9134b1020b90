"""Findings: utilisation, verdicts, limits replaced, fragments."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.declare import Check, Fragment, Limit, Missing, OpenPoint, Outcome, overall_verdict, verdict_of
from throughfault.errors import DeclarationError
from throughfault.quantities import Quantity

AT_MOST = Limit(250.0, "degC", "at most", "a clause", "recalled")
AT_LEAST = Limit(100.0, "kN", "at least", "a clause", "published")


@pytest.mark.parametrize(
    ("value", "limit", "utilisation", "verdict"),
    [
        (200.0, AT_MOST, 0.8, "within"),
        (250.0, AT_MOST, 1.0, "within"),
        (250.1, AT_MOST, 1.0004, "exceeds"),
        (-300.0, AT_MOST, 1.2, "exceeds"),
        (125.0, AT_LEAST, 0.8, "within"),
        (50.0, AT_LEAST, 2.0, "exceeds"),
        (0.0, AT_LEAST, None, "exceeds"),
        (None, AT_MOST, None, "not assessed"),
        (10.0, None, None, "not assessed"),
        (10.0, Limit(80.0, "MPa", "at most", "a clause", "recalled", "L"), 0.125, "not assessed"),
        (10.0, Limit(80.0, "MPa", "at most", "a clause", "maker", "L"), 0.125, "within"),
    ],
)
def test_utilisation_and_verdict(value, limit, utilisation, verdict):
    """Utilisation is value over limit or limit over value; a recalled limit of low confidence never decides."""
    check = Check("id", value, "degC", limit, "thermal")
    assert check.utilisation == (pytest.approx(utilisation) if utilisation is not None else None)
    assert check.verdict == verdict


def test_a_signatory_replaces_a_limit_and_both_are_kept():
    """The signatory's figure decides, and the record still shows the kit's."""
    limit = AT_MOST.replaced(Quantity(240.0, "degC"), "read by a signatory")
    entry = Check("thermal.HV.temperature", 245.0, "degC", limit, "thermal", "case").entry()
    assert entry["verdict"] == "exceeds"
    assert (entry["limit"], entry["limit_provenance"]) == (240.0, "signatory")
    assert entry["kit_limit"] == {"value": 250.0, "source": "a clause", "provenance": "recalled"}


def test_text_of_a_point_is_rounded_and_its_values_are_not():
    """Six significant digits are read; the values stay whole."""
    point = OpenPoint(
        "a", "{peak} after {cases}", {"peak": Quantity(4.50062193560628, "kA"), "cases": Quantity(12.0, "1")}
    )
    assert point.text == "4.50062 kA after 12"
    assert point.entry()["values"]["peak"] == {"value": 4.50062193560628, "unit": "kA"}


def test_a_check_not_assessed_says_why():
    """The reason stands in the entry."""
    assert Check("id", None, "1", None, "dynamic", reason="no design").entry()["reason"] == "no design"


def test_unconfirmed_means_recalled_and_deciding():
    """Only a recalled limit that carries a verdict is unconfirmed."""
    assert Check("id", 1.0, "degC", AT_MOST, "thermal").unconfirmed
    assert not Check("id", None, "degC", AT_MOST, "thermal").unconfirmed
    assert not Check("id", 1.0, "kN", AT_LEAST, "thermal").unconfirmed


@pytest.mark.parametrize(
    ("values", "verdict"),
    [
        ((), "not assessed"),
        ((1.0,), "withstands"),
        ((1.0, None), "not assessed"),
        ((None, 300.0), "does not withstand"),
    ],
)
def test_verdict_of_an_ability(values, verdict):
    """One check beyond its limit decides; else one not assessed blocks 'withstands'."""
    assert verdict_of(Check("id", value, "degC", AT_MOST, "thermal") for value in values) == verdict


def test_overall_is_the_worst():
    """The overall verdict is the worst of the abilities."""
    assert overall_verdict(["withstands", "not assessed"]) == "not assessed"
    assert overall_verdict(["not assessed", "does not withstand"]) == "does not withstand"
    assert overall_verdict(["withstands", "withstands"]) == "withstands"


@given(st.floats(1e-6, 1e6), st.floats(1e-6, 1e6))
def test_within_means_utilisation_up_to_one(value, bound):
    """Within and a utilisation up to 1 are the same thing, both ways round."""
    for sense in ("at most", "at least"):
        check = Check("id", value, "kN", Limit(bound, "kN", sense, "s", "maker"), "dynamic")
        assert (check.verdict == "within") == (check.utilisation <= 1.0)


@pytest.mark.parametrize("value", [0.0, -5.0, float("inf"), float("nan")])
def test_a_limit_is_above_zero_and_finite(value):
    """No path leads to "within" by a limit that is none, a signatory's neither."""
    with pytest.raises(DeclarationError) as fault:
        Limit(value, "degC", "at most", "a clause", "maker")
    assert str(fault.value) == f"a limit must be above zero and finite, got {value:g} degC (a clause)."
    with pytest.raises(DeclarationError):
        AT_MOST.replaced(Quantity(value, "degC"), "read by a signatory")


def test_outcomes_have_a_value_or_a_reason():
    """A result without value says why; one with a value gives no reason; units and provenances exist."""
    with pytest.raises(DeclarationError, match=r"^x: a result has a value, or the reason why it is not assessed\.$"):
        Outcome("x", None, "kA", "I", "cell", "source", "derived")
    with pytest.raises(DeclarationError, match=r"^x: unit 'kAmp' or provenance 'derived' is not in the lists\.$"):
        Outcome("x", 1.0, "kAmp", "I", "cell", "source", "derived")
    assert Outcome("x", None, "kA", "I", "cell", "source", "derived", reason="no data").entry()["reason"] == "no data"


def test_fragment_entry_holds_all_kinds():
    """A fragment gives display data with every list of the results file."""
    point = OpenPoint("p", "impedance {z} is low", {"z": Quantity(3.0, "%")}, "a clause")
    fragment = Fragment(
        quantities=(Outcome("q", 1.0, "kA", "I", "cell", "source", "derived"),),
        missing=(Missing("m", ("key",), "not given"),),
        open_points=(point,),
        cases=({"id": "c"},),
        checks=(Check("k", 1.0, "kN", AT_LEAST, "dynamic"),),
    )
    entry = fragment.entry()
    assert list(entry["quantities"]) == ["q"]
    assert entry["open_points"][0]["text"] == "impedance 3 % is low"
    assert entry["missing"] == [{"id": "m", "keys": ("key",), "reason": "not given"}]
    assert [entry[name][0]["id"] for name in ("cases", "checks")] == ["c", "k"]

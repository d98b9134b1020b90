"""Verdicts by ability, limits unconfirmed and limits unused."""

from pathlib import Path

import pytest

from throughfault.declare import Check, Limit
from throughfault.workbook.assess.verdict import conclude
from throughfault.workbook.inputs import read_unit_text

T1 = (Path(__file__).parents[3] / "example_reviews" / "BV-T1" / "unit.toml").read_text(encoding="utf-8")


def check(value, provenance="recalled", ability="thermal", name="thermal.HV.temperature"):
    return Check(name, value, "degC", Limit(250.0, "degC", "at most", "a clause", provenance), ability)


@pytest.mark.parametrize(
    ("value", "thermal", "overall"),
    [
        (200.0, "withstands", "not assessed"),
        (300.0, "does not withstand", "does not withstand"),
        (None, "not assessed", "not assessed"),
    ],
)
def test_dynamic_ability_needs_a_route(value, thermal, overall):
    """Without a route dynamic ability is not assessed, and the overall verdict is the worst."""
    made = conclude(read_unit_text(T1), [check(value)])
    assert made.verdicts == {"thermal": thermal, "dynamic": "not assessed", "overall": overall}
    assert made.route == "none complete"
    assert [missing.keys for missing in made.fragment.missing] == [("design",)]
    assert made.entry()["verdicts"] == made.verdicts


def test_apparatus_alone_does_not_make_a_route():
    """Checks of apparatus within their limits leave dynamic ability not assessed; one beyond decides."""
    within = conclude(read_unit_text(T1), [check(1.0, "maker", "dynamic", "apparatus.tap_changer.peak_current")])
    beyond = conclude(read_unit_text(T1), [check(300.0, "maker", "dynamic", "apparatus.tap_changer.peak_current")])
    assert within.verdicts["dynamic"] == "not assessed"
    assert beyond.verdicts["dynamic"] == "does not withstand"


def test_a_recalled_limit_that_decides_is_a_blocking_point():
    """Each recalled limit that carries a verdict is named, and only those."""
    made = conclude(read_unit_text(T1), [check(200.0), check(200.0, "signatory", name="thermal.LV.temperature")])
    assert [c.id for c in made.unconfirmed] == ["thermal.HV.temperature"]
    (point,) = made.fragment.open_points
    assert point.blocking
    assert point.text == (
        "thermal.HV.temperature: a recalled limit carries the verdict; a signatory must confirm it from a licensed copy"
    )


def test_a_limit_no_check_takes_is_told():
    """A signatory's limit under an id that no check has is an open point with the nearest id."""
    more = '\n[limits]\n"thermal.LV.temperature" = { value = "240 degC", source = "a licensed copy" }\n'
    unit = read_unit_text(T1 + more)
    points = conclude(unit, [check(200.0, "maker")]).fragment.open_points
    assert [point.text for point in points] == [
        "limits.'thermal.LV.temperature': no check of this review takes this limit (did you mean 'thermal.HV.temperature'?)"
    ]


def test_design_data_are_not_passed_over_in_silence():
    """Where design data are given, the reason says that nothing is calculated from them."""
    whole = (Path(__file__).parents[1] / "inputs" / "whole.toml").read_text(encoding="utf-8")
    (missing,) = conclude(read_unit_text(whole), [check(200.0, "maker")]).fragment.missing
    assert missing.reason == (
        "design data are given, and this version of the kit does not calculate forces and strength from them"
    )

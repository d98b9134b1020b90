"""Apparatus in the current's way against what it is proven for."""

import math
from dataclasses import dataclass
from pathlib import Path

import pytest

from throughfault.workbook.assess.apparatus import apparatus_checks
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.inputs import read_unit_text

T1 = (Path(__file__).parents[3] / "example_reviews" / "BV-T1" / "unit.toml").read_text(encoding="utf-8")
TAPPED = 'conductor_section = "135 mm^2"\n'
CHANGER = '\n[tap_changer]\nshort_time_current = "6 kA"\nduration = "2 s"\npeak_current = "15 kA"\n'


@dataclass(frozen=True)
class Current:
    """Currents of one winding in kA."""

    symmetrical: float | None
    peak: float | None
    symmetrical_case: str | None = None
    peak_case: str | None = None


def checks(text, **windings):
    unit = read_unit_text(text)
    made = apparatus_checks(unit, rules_for(unit), windings, {}, {})
    return {check.id.removeprefix("apparatus."): check for check in made if "tap_changer" in check.id}


def both_tapped():
    start = T1.index("\n[tap_changer]")
    text = T1[:start] + CHANGER
    assert text.count(TAPPED) == 1
    return text.replace(TAPPED, TAPPED + 'tappings = { principal = "33 kV" }\n')


def test_the_tap_changer_is_checked_for_every_tapped_winding():
    """The largest current among the windings with tappings is held against it, with its own case."""
    found = checks(both_tapped(), HV=Current(1.0, 2.0, "a", "b"), LV=Current(7.0, 14.0, "c", "d"))
    current, peak = found["tap_changer.short_time_current"], found["tap_changer.peak_current"]
    assert (current.value, current.governing_case, current.verdict) == (7.0, "c", "exceeds")
    assert (peak.value, peak.governing_case, peak.verdict) == (14.0, "d", "within")


def test_the_duration_is_that_of_the_winding():
    """A smaller current may try the tap changer more when it flows for longer."""
    text = both_tapped().replace(TAPPED, TAPPED + 'fault_duration = "8 s"\n')
    check = checks(text, HV=Current(4.0, 1.0, "a"), LV=Current(3.5, 1.0, "c"))["tap_changer.short_time_current"]
    assert (check.value, check.governing_case) == (3.5, "c")
    assert check.limit.value == pytest.approx(6.0 * math.sqrt(2.0 / 8.0))
    assert check.verdict == "exceeds"


@pytest.mark.parametrize(("known", "verdict"), [(1.0, "not assessed"), (60.0, "exceeds")])
def test_a_current_that_is_not_known_is_not_passed_over(known, verdict):
    """One winding without a result leaves the check not assessed, unless another one exceeds already."""
    found = checks(both_tapped(), HV=Current(None, None), LV=Current(known, known))
    assert {check.verdict for check in found.values()} == {verdict}


def test_a_longer_fault_says_that_the_limit_is_derived():
    """The maker's figure stands as it is for a fault no longer than proven; rescaled it is derived and says so."""
    plain = checks(both_tapped(), HV=Current(1.0, 1.0), LV=Current(0.5, 1.0))["tap_changer.short_time_current"]
    assert (plain.limit.source, plain.limit.provenance) == ("unit file, tap_changer.short_time_current", "maker")
    shorter = both_tapped().replace('duration = "2 s"\npeak', 'duration = "1 s"\npeak')
    check = checks(shorter, HV=Current(1.0, 1.0), LV=Current(0.5, 1.0))["tap_changer.short_time_current"]
    assert check.limit.value == pytest.approx(6.0 / math.sqrt(2.0))
    assert check.limit.source == ("unit file, tap_changer.short_time_current, heat integral kept for the longer fault")
    assert check.limit.provenance == "derived"

"""Blocks escape every text and mark every number."""

import re
from dataclasses import replace

import pytest
from markupsafe import Markup
from tests.render import demo

from throughfault.declare import Cell
from throughfault.render.blocks import check_table, formula_block, missing_list, open_point_list, utilisation_bar
from throughfault.render.html import (
    clause,
    code,
    data,
    definitions,
    figure,
    identity,
    items,
    note,
    prose,
    quantity,
    section,
    slug,
    source_text,
    spanned_table,
    table,
    version,
)
from throughfault.render.record import data_ids, loose_digits

HOSTILE = "</script><script>alert(1)</script>\"'><img src=x onerror=alert(1)>&amp;"


@pytest.mark.parametrize("made", [
    lambda t: data(t, t), lambda t: data(t, 1.0, t), identity, code, version,
    lambda t: clause(t, t), prose, lambda t: prose(f"`{t}`"), lambda t: note(t, t), lambda t: items([t]),
    lambda t: definitions([(t, t)]), lambda t: section(t, t, id=t), lambda t: figure(t, t, t, t),
    lambda t: table(t, [t, t], [[t, t]]), lambda t: table(t, [t], {t: [[t]]}), lambda t: quantity(t, 1.0, "1"),
    lambda t: spanned_table(t, [t, t], {t: [[t]]}),
])  # fmt: skip
def test_hostile_text_is_inert(made):
    """No text becomes an element or leaves its attribute."""
    shown = str(made(HOSTILE))
    assert "<script" not in shown
    assert "<img src=x" not in shown
    assert "&lt;img src=x onerror=alert(1)&gt;" in shown


def test_hostile_review_is_inert():
    """Every text of checks, points and missing inputs is escaped."""
    check = {
        **demo.RESULTS["checks"][0],
        "id": HOSTILE,
        "limit_source": HOSTILE,
        "governing_case": HOSTILE,
        "reason": HOSTILE,
        "kit_limit": {"value": 1.0, "source": HOSTILE, "provenance": HOSTILE},
    }
    point = {
        "id": HOSTILE,
        "template": HOSTILE + " {n}",
        "values": {"n": {"value": 1.0, "unit": "kA"}},
        "clause": HOSTILE,
        "blocking": True,
    }
    missing = {"id": HOSTILE, "keys": (HOSTILE,), "reason": HOSTILE}
    shown = check_table([check]) + open_point_list([point]) + missing_list([missing])
    assert "<script" not in shown
    assert "<img" not in shown


def test_data_keeps_the_full_value():
    """The shown number is rounded, the value is not."""
    assert data("duty.HV.peak", 4.0290000001) == Markup(
        '<data value="4.0290000001" data-id="duty.HV.peak">4.029</data>'
    )
    assert quantity("a", 1.0, "kA") == Markup('<data value="1.0" data-id="a">1\N{NO-BREAK SPACE}kA</data>')
    assert quantity("a", None, "kA") == Markup('<span class="absent">not assessed</span>')


@pytest.mark.parametrize(("citation", "told"), [
    ("IEC60076-5:2006, 4.1.5", "IEC 60076-5:2006, 4.1.5"),
    ("IEEEC57.12.00-2015, 7.4", "IEEE C57.12.00-2015, 7.4"),
    ("IECTR60909-4, 3.2", "IEC TR 60909-4, 3.2"),
    ("CircuitTheory, phase-domain network", "circuit theory, phase-domain network"),
    ("HeatBalance, all heat stored", "heat balance, all heat stored"),
    ("CommonPractice", "common practice"),
    ("Wagner-Evans-1933, p. 12", "Wagner, Evans (1933), p. 12"),
    ("Rao-Switchgear, p. 3", "Rao, Switchgear, p. 3"),
    ("MakerRules, sheet 12", "MakerRules, sheet 12"),
    ("unit file, declared", "unit file, declared"),
])  # fmt: skip
def test_sources_are_written_in_words(citation, told):
    """Keys of the bibliography become words; standards keep their designations, other texts stay as they are."""
    assert source_text(citation) == told
    assert source_text(told) == told


def test_units_stand_beside_numbers_without():
    """A formula of numbers has its units in plain text beside the worked line; one of quantities has none."""
    assert '<span class="units identity">(numbers in °C, A/mm², s)</span></div>' in formula_block(demo.steps()[1])
    assert "numbers in" not in formula_block(demo.steps()[2])


def test_a_formula_stays_with_its_first_evaluations():
    """Heading, formula, first runs and their table are one block; later ones follow, each with its table."""
    step = demo.steps()[1]
    shown = formula_block([replace(step, id=f"s{n}") for n in range(4)])
    opening, first, last = re.split(r'<div class="work(?: below)?">', shown)
    assert '<div class="opening"><h4' in opening
    assert [part.count("<table") for part in (opening, first, last)] == [0, 1, 1]
    assert [part.count('<div class="run">') for part in (opening, first, last)] == [0, 3, 1]


@pytest.mark.parametrize(("ids", "heads"), [
    (("a.HV.x", "a.LV.x"), ("HV", "LV")),
    (("duty.form.HV-LV.x", "duty.form.HV-LV.minus.x"), ("HV-LV", "HV-LV.minus")),
    (("peak", "duty.peak"), ("peak", "duty.peak")),
    (("a.x", "a.x"), ("a", "a")),
])  # fmt: skip
def test_heads_of_evaluations_leave_out_what_they_have_in_common(ids, heads):
    """Above the table each id stands in full; its column is headed by what tells it from its neighbours."""
    shown = formula_block([replace(demo.steps()[1], id=id_) for id_ in ids])
    found = re.findall(r'<th scope="col" class="number"><span class="identity step-name">(.*?)</span>', shown)
    assert tuple(head.replace("\N{ZERO WIDTH SPACE}", "") for head in found) == heads


def test_names_in_a_sentence():
    """Backquotes and single quotes mark names, an apostrophe does not."""
    assert prose("the unit's tapping 'tap1' and `T2`") == Markup(
        'the unit&#39;s tapping &#39;<span class="identity">tap1</span>&#39; and <span class="identity">T2</span>'
    )


def test_a_number_takes_its_row_and_column():
    """The first cell heads its row; numeric columns are marked."""
    shown = table("T", ["A", "B"], {"first": [["x", "y"]]})
    assert '<th scope="rowgroup" colspan="2">first</th>' in shown
    assert '<th scope="row">x</th><td>y</td>' in shown


def test_slugs():
    """An id is made of any text."""
    assert [slug("Fault currents"), slug("§")] == ["fault-currents", "part"]


@pytest.mark.parametrize(
    ("used", "classes"), [(0.601, "bar u60"), (1.134, "bar u113 beyond"), (7.0, "bar u125 beyond"), (1.0, "bar u100")]
)
def test_utilisation_bar(used, classes):
    """The width is a class; beyond the limit the bar is marked, and it never leaves its frame."""
    assert f'<span class="{classes}"' in utilisation_bar("checks/a/utilisation", used)


def test_absent_utilisation_is_said():
    """No bar without a number."""
    assert utilisation_bar("a", None) == Markup('<span class="absent">not assessed</span>')


def test_replaced_limit_shows_both():
    """A signatory's figure stands with the kit's own."""
    shown = check_table(demo.RESULTS["checks"][:1])
    assert {i for i, _ in data_ids(shown)} == {
        f"checks/thermal.HV.temperature/{k}" for k in ("value", "limit", "utilisation", "kit_limit/value")
    }
    assert "instead of" in shown
    assert "signatory" in shown


def test_open_points_show_their_values_as_data():
    """Numbers stand in data, the sentence around them is kept."""
    shown = open_point_list(demo.RESULTS["open_points"][:1])
    assert data_ids(shown) == [("open_points/duty.peak_exact/more", "1.27")]
    assert loose_digits(shown) == []


def test_nothing_open_is_said():
    """An empty list is a statement."""
    assert open_point_list([]) == Markup("<p>No open points.</p>")
    assert missing_list([]) == Markup("<p>Nothing is left out for want of inputs.</p>")


@pytest.mark.parametrize("step", demo.steps(), ids=lambda step: step.id)
def test_formula_block_holds_formula_worked_line_and_result(step):
    """Title, citation with its provenance word, formula, numbers of the run, arguments, result."""
    assert isinstance(step.cell, Cell)
    shown = formula_block(step)
    assert shown.count('class="equation"') == shown.count('class="equation worked"') == len(step.cell.formula.lines)
    assert f"({step.cell.source.provenance})" in shown
    assert data_ids(shown)[0] == (f"steps/{step.id}/result", repr(step.result.value))
    assert len(data_ids(shown)) == len(step.arguments) + 1
    assert loose_digits(shown) == []

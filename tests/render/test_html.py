"""Blocks escape every text and mark every number."""

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

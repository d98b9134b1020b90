"""What notebooks call: every part shows HTML and emits its results, nothing twice."""

from pathlib import Path

import pytest

from throughfault import notebook as tf
from throughfault.declare import registry
from throughfault.errors import InputError
from throughfault.render.numbers import full_value
from throughfault.render.record import data_ids, loose_digits
from throughfault.workbook.part import PARTS
from throughfault.workbook.results import MIME, merge_fragments

EXAMPLES = (Path(__file__).parents[1] / "example_reviews").resolve()


def bundles(unit, names=tuple(PARTS)):
    book = tf.open_review(str(EXAMPLES / unit))
    return [getattr(tf, name)(book)._repr_mimebundle_() for name in names]


@pytest.mark.parametrize("unit", ["BV-T1", "BV-T2", "BV-D7"])
def test_every_part_shows_and_what_is_emitted_merges(unit):
    """Each part gives HTML without loose digits; together they emit every id once."""
    made = bundles(unit)
    assert all(loose_digits(bundle["text/html"]) == [] for bundle in made)
    merged = merge_fragments([bundle[MIME] for bundle in made if MIME in bundle])
    assert merged["unit"]["tag"] == unit
    assert merged["verdicts"]["thermal"] == "withstands"
    assert len(merged["steps"]) > 20


def test_parts_left_out_are_emitted_at_the_end():
    """Open points come last and carry whatever no part has emitted."""
    whole = merge_fragments([b[MIME] for b in bundles("BV-T1") if MIME in b])
    short = merge_fragments(
        [b[MIME] for b in bundles("BV-T1", ("summary", "unit_data", "verdict", "open_point")) if MIME in b]
    )
    assert short["quantities"].keys() == whole["quantities"].keys()
    assert [case["id"] for case in short["cases"]] == [case["id"] for case in whole["cases"]]


def test_declared_values_are_shown_with_the_verdict():
    """The verdict part compares what the maker declares; all its numbers stand in the results."""
    whole = merge_fragments([b[MIME] for b in bundles("BV-T1") if MIME in b])
    (shown,) = bundles("BV-T1", ("verdict",))
    assert "Declared by the maker, and calculated" in shown["text/html"]
    held = {id_: value for id_, value in data_ids(shown["text/html"]) if id_.startswith("declared.")}
    assert held
    assert {i: full_value(whole["quantities"][i]["value"]) for i in held} == held
    assert {i for i in whole["quantities"] if i.startswith("declared.")} == set(held)


def test_a_step_is_worked_once():
    """What the duty works out is not worked again under the requirement; the results keep both steps."""
    book = tf.open_review(str(EXAMPLES / "BV-T1"))
    found, duty = book.review.requirement.fragment.steps, book.review.duty.fragment.steps
    again = [s for s in found if any(s.cell is d.cell and s.arguments == d.arguments for d in duty)]
    shown = tf.requirement(book)._repr_mimebundle_()
    ids = {id_.split("/")[1] for id_, _ in data_ids(shown["text/html"]) if id_.startswith("steps/")}
    assert again
    assert ids == {s.id for s in found} - {s.id for s in again}
    assert {s["id"] for s in shown[MIME]["steps"]} == {s.id for s in found}


def test_a_part_looks_the_same_in_every_run():
    """The plain text beside the HTML holds no address."""
    book = tf.open_review(str(EXAMPLES / "BV-T1"))
    assert repr(tf.signature(book)) == "<part of a review>"


def test_every_cell_of_the_library_can_be_shown():
    """Used or not, a cell gives its title and formula or equations."""
    book = tf.open_review(str(EXAMPLES / "BV-T1"))
    for name, cell in registry().items():
        html = tf.calculation(book, name)._repr_mimebundle_()["text/html"]
        assert f'id="library-{name}"' in html
        assert "No step of this review uses it." in html or "<math" in html, cell.title


def test_an_unknown_cell_is_named_with_the_nearest():
    """A misspelt cell is refused."""
    book = tf.open_review(str(EXAMPLES / "BV-T1"))
    with pytest.raises(InputError) as fault:
        tf.calculation(book, "rated_curent")
    assert str(fault.value) == (
        "calculation: must name a cell of the library, got 'rated_curent' (did you mean 'rated_current'?)."
    )

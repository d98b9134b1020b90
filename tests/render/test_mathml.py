"""Formulas become MathML or are refused."""

import re

import pytest

from throughfault.errors import DeclarationError
from throughfault.render import mathml as module
from throughfault.render.mathml import mathml


def test_the_latex_stays_as_annotation():
    """A reader's tool finds what the author wrote."""
    assert '<annotation encoding="application/x-tex">\\frac{a}{b}</annotation>' in mathml(r"\frac{a}{b}")


def test_display_and_inline():
    """Display formulas are marked so."""
    assert mathml("a", display=True).startswith('<math display="block">')
    assert mathml("a").startswith("<math>")


def test_alternatives_keep_no_style_attribute():
    """The converter's layout becomes classes."""
    shown = mathml(r"\begin{cases} a & \text{if } b \le 1 \\ c & \text{otherwise} \end{cases}")
    assert " style=" not in shown
    assert 'class="condition"' in shown


def test_an_unknown_command_is_refused():
    """Nothing is guessed."""
    message = r"'\fraction' cannot be set as a formula: 0: Unknown command \"\fraction\"."
    with pytest.raises(DeclarationError, match=re.escape(message.replace('\\"', '"'))):
        mathml(r"\fraction")


def test_a_layout_without_class_is_refused(monkeypatch):
    """A style the sheet does not know would be lost under the page's policy."""
    monkeypatch.setattr(module, "_STYLES", {})
    with pytest.raises(DeclarationError, match=re.escape("no class for the style 'text-align: left;")):
        mathml(r"\begin{cases} q & r \end{cases}")


def test_markup_in_a_formula_is_text():
    """Angle brackets stay text."""
    assert "<script" not in mathml(r"\text{<script>} < y")

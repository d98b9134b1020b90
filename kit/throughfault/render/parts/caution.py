"""What every record says about its own use."""

from __future__ import annotations

from markupsafe import Markup

from throughfault.render.html import Text, items, section
from throughfault.render.mathml import mathml

__all__ = ["cautions"]

_ALWAYS = (
    "The fault duties stated here serve to judge withstand only, not to choose switchgear or to set protection.",
    "A verdict of this record permits nobody to energise or to re-energise a transformer.",
    "The maker's responsibility stays with the maker.",
    "The record replaces neither the standards in force, nor local codes, nor licensed practice.",
    "Only this record, whole and verified, is a review; figures tried out in a live workbook are not.",
    "Values marked as recalled were written down from memory and must be confirmed from a licensed copy.",
)


def _margins() -> Markup:
    return Markup(
        "The models of force carry margins of their own: about {} on axial and about {} on hoop quantities. "
        "Agreement with another solver of the same model says nothing about this accuracy."
    ).format(mathml(r"\pm 30\,\%"), mathml(r"\pm 3\,\%"))


def cautions() -> Markup:
    """List the cautions, the margins of the force models among them."""
    said: list[Text] = [*_ALWAYS, _margins()]
    return section("Cautions", items(said), id="cautions", kind="cautions", level=3)

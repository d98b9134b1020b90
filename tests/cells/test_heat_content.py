"""Heat put in and taken up: constants and limiting cases."""

import pytest

from throughfault.cells.heat_content import (
    heat_content_aluminium,
    heat_content_copper,
    heating_ratio,
    start_eddy_share,
)
from throughfault.tables import table


def test_heat_contents_are_those_of_the_table():
    """heat_content_copper and heat_content_aluminium carry the digits of the table."""
    for material, cell in (("copper", heat_content_copper), ("aluminium", heat_content_aluminium)):
        row = table("ieee_c57_12_00_2015_heat_content").row(material=material)
        assert cell(0.0, 0.0, 0.0, 1.0) == row["base"]
        assert cell(100.0, 0.0, 0.0, 1.0) - row["base"] == pytest.approx(100 * row["slope"])
        assert cell(0.0, 0.0, 1.0, 1.0) - row["base"] == pytest.approx(row["insulation"])


def test_eddy_share_is_unchanged_at_the_reference_temperature():
    """start_eddy_share at its own reference, and lower when hotter."""
    assert start_eddy_share(0.1, 85.0, 85.0, 234.5) == pytest.approx(0.1)
    assert start_eddy_share(0.1, 85.0, 110.0, 234.5) < 0.1


def test_ratio_of_one_doubles_the_resistance():
    """heating_ratio is one when the starting loss alone would double the temperature above zero resistance."""
    content = heat_content_copper(110.0, 110.0, 0.0, 1.0)
    assert heating_ratio(content * 344.5 / 2.0, 2.0, content, 110.0, 234.5) == pytest.approx(1.0)

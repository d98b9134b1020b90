"""The unit files of the example reviews."""

from pathlib import Path

import pytest

from throughfault.workbook.inputs import conductor_section, phase_voltage, read_unit

EXAMPLES = Path(__file__).parents[3] / "example_reviews"
GROUPS = {"BV-T1": ("YNd11", 40.0), "BV-T2": ("YNyn0+d11", 160.0), "BV-D7": ("Dyn11", 0.63)}


@pytest.mark.parametrize("tag", GROUPS)
def test_an_example_reads(tag):
    """Each example reads without a fault or an open point, under its folder's name."""
    unit = read_unit(EXAMPLES / tag / "unit.toml")
    assert unit.identity.tag == tag
    assert unit.warnings == ()
    assert (unit.rating.vector_group, unit.windings["HV"].rated_power.to("MVA")) == GROUPS[tag]
    assert "Brackwater Vale" in unit.identity.title


@pytest.mark.parametrize(("tag", "usual"), [("BV-T1", (2.5, 3.5)), ("BV-T2", (2.5, 3.5)), ("BV-D7", (1.3, 2.0))])
def test_rated_current_densities_are_usual(tag, usual):
    """Rated densities lie where oil-cooled windings have them (common practice)."""
    unit = read_unit(EXAMPLES / tag / "unit.toml")
    for name, winding in unit.windings.items():
        current = winding.rated_power.to("VA") / 3.0 / phase_voltage(unit, name)
        assert usual[0] <= current / conductor_section(unit, name).to("mm^2") <= usual[1]


def test_the_stabilising_winding_is_hidden():
    """The delta of BV-T2 is not brought out and has no network."""
    unit = read_unit(EXAMPLES / "BV-T2" / "unit.toml")
    assert unit.windings["TV"].stabilising
    assert set(unit.system.terminals) == {"HV", "LV"}
    assert [s.x0_over_x1 for s in unit.system.terminals.values()] == [1.0, None]
    assert len(unit.impedances) == 9

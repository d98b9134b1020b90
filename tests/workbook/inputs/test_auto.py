"""Contradictions that only an autotransformer, a zigzag or a number in a limit can have."""

import pytest

from throughfault.errors import UnitFileError
from throughfault.workbook.inputs import phase_voltage, read_unit_text, starter


def refused(text):
    with pytest.raises(UnitFileError) as caught:
        read_unit_text(text)
    return list(caught.value.faults)


@pytest.fixture
def auto():
    return starter("auto", "BV-A1")


def test_common_winding_at_the_voltage_of_the_series_winding(auto):
    """An autotransformer needs a difference of voltages for its series winding."""
    text = auto.replace('rated_voltage = "132 kV"', 'rated_voltage = "400 kV"').replace('"145 kV"', '"420 kV"')
    assert refused(text) == [
        (
            "unit.toml: [line 31] windings.HV.rated_voltage: must be above that of 'LV', 400 kV, at tapping 'principal' of "
            "an autotransformer, got 400 kV."
        )
    ]


def test_neutral_under_the_common_winding(auto):
    """The one neutral of an autotransformer is named with its first winding."""
    assert refused(auto.replace('HV = "solid"', 'HV = "solid"\nLV = "solid"')) == [
        (
            "unit.toml: [line 85] earthing.LV: belongs under 'HV': an autotransformer has one neutral, named with its first "
            "winding."
        )
    ]


def test_zero_sequence_of_an_autotransformer(auto):
    """The common winding shares the neutral, so the pair has a zero-sequence path."""
    unit = read_unit_text(auto.replace('load_loss = "520 kW"', 'load_loss = "520 kW"\nzero_sequence = "17 %"'))
    assert unit.impedances[0].zero_sequence.to("%") == 17.0
    assert unit.earthing == {"HV": "solid"}


def test_series_winding(auto):
    """The series winding has the difference of the terminals' voltages: (400 - 132) kV over root three."""
    assert phase_voltage(read_unit_text(auto), "HV") == pytest.approx(268e3 / 3**0.5)


def test_zero_sequence_of_a_zigzag(whole):
    """An interstar winding with a neutral is balanced on each limb by itself, whatever the other winding."""
    text = whole[: whole.index("[system]\n")].replace("YNd11", "Yzn11")
    assert read_unit_text(text).impedances[0].zero_sequence.to("%") == pytest.approx(11.2)


def test_two_windings_at_least(whole):
    """One winding is no transformer."""
    start, end = whole.index("[windings.LV]"), whole.index("[[impedances]]")
    text = whole[:start] + whole[end : whole.index("[system]\n")]
    assert "unit.toml: windings: must have at least 2 entries, got 1." in refused(text)


def test_a_limit_of_thousands_of_volts(change):
    """A limit may be any quantity where the kind of its result is not known."""
    made = change(('"strength.LV.buckling" = { value = 1.8', '"headroom.LV.margin" = { value = "12 kV"'))
    assert made.limits["headroom.LV.margin"].value.to("V") == 12000.0


def test_out_of_phase_closing_needs_a_network(refused):
    """A stabilising winding has no network that could be closed out of phase."""
    faults = refused(("[earthing]", '[system.LV]\nout_of_phase = "180 deg"\n\n[earthing]'))
    assert faults == [
        "unit.toml: [line 95] system.LV.out_of_phase: needs system.LV.short_circuit_power beside it.",
    ]

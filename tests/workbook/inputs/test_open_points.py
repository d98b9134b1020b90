"""What is unusual but possible: accepted, with an open point."""

import re

import pytest

from throughfault.declare import OpenPoint
from throughfault.workbook.inputs import read_unit_text


def edited(text, *edits):
    """Return the text with each first part replaced, once."""
    for old, new in edits:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


def rounded(text):
    """Return the text with long numbers in five digits."""
    return re.sub(r"\d+\.\d{3,}", lambda number: f"{float(number[0]):.5g}", text)


POINTS = {
    "tapping above Um": (
        [('highest_voltage = "145 kV"', 'highest_voltage = "138 kV"')],
        {
            "input.HV.plus.above_highest_voltage": "Tapping 'plus' of HV, 138.6 kV, is above the highest voltage for "
            "equipment, 138 kV."
        },
    ),
    "no impedance at a tapping": (
        [('tapping = "plus"', 'tapping = "principal"'), ('between = ["HV", "LV"]\ntapping = "principal"', 'between = ["HV", "LV"]\ntapping = "plus"'),
         ('minus = "118.8 kV" }', 'minus = "118.8 kV", lowest = "118.8 kV" }'), ("minus = -93 }", "minus = -93, lowest = -93 }")],
        {
            "input.HV-LV.lowest.no_impedance": "No impedance of HV and LV at tapping 'lowest' is given; the fault cases "
            "that need it are not assessed."
        },
    ),
    "no resistance": (
        [('load_loss = "180 kW"\n', ""), ('dc_resistance = "0.38 %"\n', "")],
        {
            "input.HV-LV.principal.no_resistance": "HV and LV at tapping 'principal' have neither load loss nor "
            "resistance; the resistance is taken as zero."
        },
    ),
    "high X/R of a pair": (
        [('load_loss = "180 kW"', 'load_loss = "20 kW"'), ('dc_resistance = "0.38 %"\n', "")],
        {"input.HV-LV.principal.x_over_r": "X/R of HV and LV at tapping 'principal' is 250; usual are 0.5 to 100."},
    ),
    "low X/R of a network": (
        [("x_over_r = 12.0", "x_over_r = 0.2")],
        {"input.system.HV.x_over_r": "X/R of the network at HV is 0.2; usual are 1 to 60."},
    ),
    "network at another voltage": (
        [('voltage = "132 kV"\nshort', 'voltage = "66 kV"\nshort')],
        {"input.system.HV.voltage": "The network at HV is stated at 66 kV, its terminals are rated 132 kV."},
    ),
    "no network": (
        [('short_circuit_power = "10000 MVA"\nshort_circuit_power_minimum = "4000 MVA"\nx_over_r = 12.0\nx0_over_x1 = 1.5\npeak_factor = 2.6\nout_of_phase = "180 deg"\n', ""), ('series_reactance = "2 ohm"\n', "")],
        {"input.system.no_source": "No terminal has a network behind it ([system.<winding>] with short_circuit_power)."},
    ),
    "limit of an unknown result": (
        [('"strength.LV.buckling" = { value', '"strength.LV.bukling" = { value')],
        {
            "input.limits.strength.LV.bukling": "limits.'strength.LV.bukling': the kit knows no result that ends so "
            "(did you mean 'buckling'?); the limit decides nothing."
        },
    ),
    "turns slightly off": (
        [("turns = 402", "turns = 410")],
        {"input.HV.plus.turns": "The turns of HV over LV at tapping 'plus' are -2.0315 % off the ratio of the voltages."},
    ),
    "build overfilled": (
        [("radial_count = 20", "radial_count = 21")],
        {
            "input.LV.fill": "The covered conductors of coil LV fill 105 % of its radial build; usual are 60 % to 100 %."
        },
    ),
    "build hardly filled": (
        [('outer_radius = "600 mm"', 'outer_radius = "650 mm"'), ('ring_outer_radius = "620 mm"', 'ring_outer_radius = "660 mm"')],
        {
            "input.RW.fill": "The covered conductors of coil RW fill 46.545 % of its radial build; usual are 60 % to 100 %."
        },
    ),
    "section unlike the strands": (
        [('conductor_section = "135 mm^2"', 'conductor_section = "120 mm^2"')],
        {
            "input.LV.section": "The strands of coil LV make a turn of 135.2 mm^2, conductor_section of LV is 120 mm^2; "
            "stresses use the latter."
        },
    ),
    "coils out of order": (
        [('inner_radius = "540 mm"\nouter_radius = "600 mm"', 'inner_radius = "371 mm"\nouter_radius = "419 mm"'), ("radial_count = 16", "radial_count = 15"),
         ('"2.6 mm"\nstrand_axial = "12 mm"\nradial_count = 15\ncovering = "0.6 mm"', '"2.6 mm"\nstrand_axial = "12 mm"\nradial_count = 15\ncovering = "0.3 mm"')],
        {"input.RW.order": "Coil RW stands inside coil HV, which is listed before it; innermost comes first."},
    ),
}  # fmt: skip


@pytest.mark.parametrize("name", POINTS)
def test_each_open_point(name, change):
    """What is unusual is accepted and noted, numbers kept apart from the words."""
    edits, expected = POINTS[name]
    found = change(*edits).warnings
    assert {point.id: rounded(point.text) for point in found} == expected
    assert all(isinstance(point, OpenPoint) for point in found)


def test_the_whole_file_has_none(change):
    """A consistent file has no open point."""
    assert change().warnings == ()


def test_names_against_tappings(whole):
    """A plus tapping below the principal is noted, as is a minus tapping above it."""
    text = whole[: whole.index("[system]\n")]
    text = edited(text, ('plus = "138.6 kV"', 'plus = "125 kV"'), ('minus = "118.8 kV"', 'minus = "138 kV"'))
    points = {p.id: p.text for p in read_unit_text(text).warnings if p.id.endswith("name")}
    assert points == {
        "input.HV.plus.against_its_name": "Tapping 'plus' of HV is 125 kV, on the other side of the principal tapping, "
        "132 kV, than its name says.",
        "input.HV.minus.against_its_name": "Tapping 'minus' of HV is 138 kV, on the other side of the principal tapping, "
        "132 kV, than its name says.",
    }


def test_a_tap_changer_without_tappings(whole):
    """A tap changer needs tappings to change."""
    text = edited(whole, ('tappings = { plus = "138.6 kV", principal = "132 kV", minus = "118.8 kV" }\n', ""))
    text = (
        text[: text.index('[[impedances]]\nbetween = ["HV", "LV"]\ntapping = "plus"')]
        + '[tap_changer]\nduration = "3 s"\n'
    )
    assert [p.text for p in read_unit_text(text).warnings] == [
        "No terminal has a network behind it ([system.<winding>] with short_circuit_power).",
        "A tap changer is given, but no winding has tappings.",
    ]


def test_a_winding_without_a_coil(whole):
    """A design that leaves out a winding says so."""
    start, end = whole.index('[[design.coils]]\nname = "HV"'), whole.index("[design.clamping]")
    text = whole[:start] + whole[end:].replace("LV = 0.5, HV = 0.5", "LV = 1.0")
    assert [p.text for p in read_unit_text(text).warnings] == [
        "The design has no coil of HV; its field and forces are not assessed."
    ]


def test_further_warnings(whole):
    """Other layers add what they find, after the inputs' own."""
    point = OpenPoint("z.minimum", "Impedance of {tag} is low.".replace("{tag}", "T1"))
    assert read_unit_text(whole, extra_warnings=[lambda unit: [point] if unit.design else []]).warnings == (point,)

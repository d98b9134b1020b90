"""The unit as the rest of the kit sees it."""

import dataclasses

import pytest

from throughfault.errors import UnitFileError
from throughfault.quantities import Quantity
from throughfault.workbook.inputs import (
    ProofStressShare,
    conductor_section,
    phase_voltage,
    read_unit_text,
    series_turns,
    turn_section,
)
from throughfault.workbook.inputs.design_data import radial_fill


def edited(text, *edits):
    """Return the text with each first part replaced, once."""
    for old, new in edits:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


@pytest.fixture
def unit(change):
    return change()


def bare(whole):
    """Return the whole file without what is optional below the impedances, and without the design."""
    return whole[: whole.index("[system]\n")]


def test_keys_are_attributes(unit):
    """Attributes are named as the keys, quantities keep the unit in which they were written."""
    assert unit.standard == "IEC 60076-5:2006"
    assert unit.identity.tag == "BV-T1"
    assert unit.rating.vector_group == "YNd11"
    assert unit.rating.thermal_class == 105
    assert unit.windings["HV"].rated_voltage == Quantity(132.0, "kV")
    assert unit.windings["HV"].tappings["minus"] == Quantity(118.8, "kV")
    assert unit.impedances[2].between == ("LV", "HV")
    assert unit.system.prefault_voltage == {"minus": 1.1}
    assert unit.system.terminals["HV"].short_circuit_power == Quantity(10000.0, "MVA")
    assert unit.system.terminals["HV"].out_of_phase == Quantity(180.0, "deg")
    assert unit.earthing == {"HV": 5 + 12j}
    assert unit.zero_sequence.magnetising == Quantity(55.0, "%")
    assert unit.tap_changer.peak_current == Quantity(15.0, "kA")
    assert unit.bushings["HV"].duration == Quantity(2.0, "s")
    assert unit.neutral["HV"].short_time_current == Quantity(20.0, "kA")
    assert unit.design.core.window_height == Quantity(1700.0, "mm")
    assert unit.design.coils[2].blocks[0].turns == {"plus": 46.0, "principal": 0.0, "minus": -93.0}
    assert unit.design.coils[0].conductor.proof_stress == Quantity(180.0, "MPa")
    assert unit.design.clamping.clamping_share == {"LV": 0.5, "HV": 0.5}
    assert unit.declared["duty.LV.peak"] == Quantity(8.0, "kA")
    assert unit.raw["rating"]["vector_group"] == "YNd11"


def test_limits(unit):
    """A limit is a quantity or a share of the proof stress."""
    hoop, buckling = unit.limits["strength.LV.hoop"], unit.limits["strength.LV.buckling"]
    assert hoop.value == ProofStressShare(0.35)
    assert buckling.value == Quantity(1.8, "1")


def test_a_limit_with_a_unit(change):
    """A limit may be a quantity of the result's kind."""
    made = change(('value = "0.35 Rp0.2"', 'value = "63 N/mm^2"'))
    assert made.limits["strength.LV.hoop"].value.to("MPa") == pytest.approx(63.0)


def test_a_limit_with_an_exponent(change):
    """A number may have an exponent, as everywhere else in the file."""
    made = change(('value = "0.35 Rp0.2"', 'value = "6.3e7 Pa"'))
    assert made.limits["strength.LV.hoop"].value.to("MPa") == pytest.approx(63.0)


def test_a_unit_is_frozen(unit):
    """A validated unit cannot be changed by accident."""
    with pytest.raises(dataclasses.FrozenInstanceError):
        unit.standard = "other"
    with pytest.raises(ValueError, match="frozen"):
        unit.rating.phases = 1


def test_pairs_and_tappings(unit):
    """Pairs stand in the order of the vector group, the principal tapping first."""
    assert unit.pairs == (("HV", "LV"),)
    assert unit.tappings == ("principal", "plus", "minus")
    assert list(unit.connections) == ["HV", "LV"]


def test_voltage_at_a_tapping(unit):
    """A winding without that tapping keeps its rated voltage."""
    assert unit.voltage("HV", "minus") == Quantity(118.8, "kV")
    assert unit.voltage("LV", "minus") == Quantity(33.0, "kV")
    assert unit.voltage("HV") == Quantity(132.0, "kV")


def test_rows_in_either_order(unit):
    """A pair is found in either order of its names."""
    assert unit.impedance("HV", "LV", "minus") is unit.impedances[2]
    assert unit.impedance("LV", "HV", "plus") is unit.impedances[1]


def test_a_missing_row_of_a_tapped_pair(change):
    """A pair with tapped windings has no row for a tapping that none was given for."""
    made = change(
        ('tapping = "plus"', 'tapping = "minus"'),
        ('between = ["LV", "HV"]\ntapping = "minus"', 'between = ["LV", "HV"]\ntapping = "plus"'),
    )
    assert made.impedance("HV", "LV", "plus") is made.impedances[2]


def test_an_untapped_pair_keeps_its_principal_row():
    """The impedance of two windings without tappings is the same at every tapping of a third."""
    made = read_unit_text(THREE)
    assert made.impedance("LV", "TV", "minus") is made.impedance("TV", "LV")
    assert made.impedance("HV", "TV", "minus") is None


def test_resistance_of_a_row(unit):
    """Resistance comes from its key, else from load loss over base power: 180 kW of 40 MVA are 0.45 %."""
    assert unit.impedances[0].resistance_value.to("%") == pytest.approx(0.45)
    assert unit.impedances[1].resistance_value == Quantity(0.44, "%")


def test_prefault_voltage(unit, change):
    """A tapping that is not named has one per unit; a number holds for all."""
    assert [unit.prefault_voltage(t) for t in ("principal", "minus")] == [1.0, 1.1]
    made = change(("prefault_voltage = { minus = 1.1 }", "prefault_voltage = 1.05"))
    assert made.prefault_voltage("plus") == 1.05


def test_data_of_a_winding_before_those_of_the_unit(unit):
    """What stands at the winding wins over what stands at the unit."""
    assert [unit.thermal_class(w) for w in ("HV", "LV")] == [105, 120]
    assert [unit.start_temperature(w) for w in ("HV", "LV")] == [
        Quantity(105.0, "degC"),
        Quantity(100.0, "degC"),
    ]
    assert [unit.fault_duration(w) for w in ("HV", "LV")] == [Quantity(2.0, "s"), Quantity(1.0, "s")]


def test_rows_alone_are_enough(whole):
    """Everything below the impedances is optional; neutrals are earthed solidly then."""
    made = read_unit_text(bare(whole))
    assert made.earthing == {"HV": "solid"}
    assert made.system.terminals == {}
    assert made.system.prefault_voltage == 1.0
    assert (made.design, made.tap_changer, made.zero_sequence) == (None, None, None)
    assert (made.limits, made.declared, made.bushings, made.neutral) == ({}, {}, {}, {})


THREE = """
format = "throughfault-unit/1"
standard = "IEEE C57.12.00-2015"
identity = { tag = "X", title = "Brackwater Vale" }
rating = { phases = 3, frequency = "60 Hz", vector_group = "YNyn0+d", immersion = "oil", core = "five-limb" }
[windings]
HV = { rated_power = "100 MVA", rated_voltage = "230 kV", tappings = { principal = "230 kV", minus = "207 kV" } }
LV = { rated_power = "100 MVA", rated_voltage = "69 kV" }
TV = { rated_power = "30 MVA", rated_voltage = "13.8 kV" }
[[impedances]]
between = ["HV", "LV"]
impedance = "10 %"
base_power = "100 MVA"
[[impedances]]
between = ["TV", "LV"]
impedance = "0.05 p.u."
base_power = "30 MVA"
resistance = "0.3 %"
[[impedances]]
between = ["HV", "TV"]
impedance = "9 %"
base_power = "30 MVA"
load_loss = "100 kW"
[system.LV]
short_circuit_power = "2 GVA"
[system.HV]
short_circuit_power = "table"
[earthing]
LV = "isolated"
"""
THREE = THREE.replace('rated_voltage = "230 kV", t', 'rated_voltage = "230 kV", highest_voltage = "245 kV", t')


def test_defaults_are_named():
    """Each default in force stands with its key and value, and nothing that was given."""
    found = {d.path: str(d.value) for d in read_unit_text(THREE).defaults}
    assert found == {
        "identity.revision": "A",
        "rating.bank": "false",
        "rating.fault_duration": "as the standard",
        "rating.voltage_variation": "constant flux",
        "windings.HV.eddy_share": "0",
        "windings.HV.insulation_section": "0 mm^2",
        "windings.LV.eddy_share": "0",
        "windings.LV.insulation_section": "0 mm^2",
        "windings.TV.eddy_share": "0",
        "windings.TV.insulation_section": "0 mm^2",
        "impedances[1].tapping": "principal",
        "impedances[1].resistance": "load_loss over base_power; without either zero",
        "impedances[1].dc_resistance": "the a.c. resistance",
        "impedances[1].basis": "guaranteed",
        "impedances[2].tapping": "principal",
        "impedances[2].dc_resistance": "the a.c. resistance",
        "impedances[2].basis": "guaranteed",
        "impedances[3].tapping": "principal",
        "impedances[3].dc_resistance": "the a.c. resistance",
        "impedances[3].basis": "guaranteed",
        "system.prefault_voltage": "1",
        "system.LV.x_over_r": "no resistance",
        "system.LV.x0_over_x1": "as the standard",
        "system.HV.column": "as the standard's edition",
        "system.HV.x_over_r": "no resistance",
        "system.HV.x0_over_x1": "as the standard",
        "system.LV.voltage": "69 kV",
        "system.HV.voltage": "230 kV",
        "earthing.HV": "solid",
        "impedances.zero_sequence": "equal to the impedance",
    }


GIVEN = [(f'zero_sequence = "{value} %"\n', "") for value in (11.2, 11.5, 10.9)]
MAGNETISING = ('[zero_sequence]\nat = "HV"\nmagnetising = "55 %"\n', "")


@pytest.mark.parametrize(
    ("edits", "words"),
    [
        ([], None),
        (GIVEN[:1], "between 0.85 and 1 times the impedance, both run"),
        (GIVEN, "between 0.85 and 1 times the impedance, both run"),
        ([*GIVEN, ('core = "three-limb"', 'core = "five-limb"')], "equal to the impedance"),
        ([*GIVEN, ('HV = "5 ohm + 12j ohm"', 'HV = "isolated"')], None),
        (
            [
                *GIVEN,
                MAGNETISING,
                ("YNd11", "Yd11"),
                ("[neutral.HV]", "[bushings.LV]"),
                ("[earthing]\nHV", "[earthing]\n#"),
            ],
            None,
        ),
    ],
)
def test_what_stands_for_the_zero_sequence_impedance(change, edits, words):
    """What is taken for it is named where a current can reach earth, and only there."""
    found = {d.path: d.value for d in change(*edits).defaults}
    assert found.get("impedances.zero_sequence") == words


TWO_STARS = """
format = "throughfault-unit/1"
standard = "IEC 60076-5:2006"
identity = { tag = "X", title = "Brackwater Vale" }
rating = { phases = 3, frequency = "50 Hz", vector_group = "YNyn0", immersion = "oil", core = "three-limb" }
[windings]
HV = { rated_power = "1 MVA", rated_voltage = "11 kV" }
LV = { rated_power = "1 MVA", rated_voltage = "400 V" }
[[impedances]]
between = ["HV", "LV"]
impedance = "5 %"
base_power = "1 MVA"
load_loss = "10 kW"
"""


@pytest.mark.parametrize(
    ("more", "words"), [("", None), ('[zero_sequence]\nat = "LV"\nmagnetising = "55 %"\n', "equal to the impedance")]
)
def test_a_three_limb_unit_without_a_delta_needs_its_magnetising_impedance(more, words):
    """Without it the faults to earth are not run, so that nothing is taken."""
    text = TWO_STARS + more
    found = {d.path: d.value for d in read_unit_text(text).defaults}
    assert found.get("impedances.zero_sequence") == words


def test_stabilising_by_the_group_or_the_key():
    """A winding is stabilising by "+d" or by its key; winding and group agree."""
    by_group = read_unit_text(THREE)
    text = edited(
        THREE,
        ('"YNyn0+d"', '"YNyn0d11"'),
        ('rated_voltage = "13.8 kV"', 'rated_voltage = "13.8 kV", stabilising = true'),
    )
    for made in (by_group, read_unit_text(text)):
        assert [w.stabilising for w in made.windings.values()] == [False, False, True]
        assert [c.stabilising for c in made.group.windings] == [False, False, True]


def test_a_delta_brought_out_is_said_to_be():
    """A delta that is neither marked stabilising nor said not to be is named as a default."""
    text = edited(THREE, ('"YNyn0+d"', '"YNyn0d11"'))
    assert ("windings.TV.stabilising", "false") in read_unit_text(text).defaults


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ('rated_voltage = "132 kV"', 'rated_voltage = "132000 V"'),
        ('rated_power = "40 MVA"', 'rated_power = "40000 kVA"'),
        ('impedance = "12.5 %"', 'impedance = "0.125 p.u."'),
        ('load_loss = "180 kW"', 'load_loss = "0.18 MW"'),
        ('conductor_section = "62 mm^2"', 'conductor_section = "0.62 cm^2"'),
        ('short_circuit_power = "10000 MVA"', 'short_circuit_power = "10 GVA"'),
        ('limb_diameter = "560 mm"', 'limb_diameter = "56 cm"'),
        ('fault_duration = "2 s"', 'fault_duration = "2000 ms"'),
        ('HV = "5 ohm + 12j ohm"', 'HV = "5000 mohm + 0.012j kohm"'),
    ],
)
def test_unit_changes_change_nothing(change, old, new):
    """The same quantity in another unit is the same unit, in SI."""
    assert in_si(change((old, new))) == pytest.approx(in_si(change()), rel=1e-14)


def in_si(unit):
    """Return every quantity of a unit in SI, in the order of the file."""
    base = {
        "voltage": "V",
        "apparent power": "VA",
        "ratio": "p.u.",
        "power": "W",
        "area": "m^2",
        "length": "m",
        "time": "s",
    }
    found = []

    def walk(value):
        if isinstance(value, Quantity):
            found.append(value.to(base.get(value.kind, value.unit)))
        elif isinstance(value, complex):
            found.extend([value.real, value.imag])
        elif isinstance(value, dict):
            [walk(v) for v in value.values()]
        elif isinstance(value, tuple):
            [walk(v) for v in value]
        elif hasattr(type(value), "model_fields"):
            [walk(getattr(value, name)) for name in type(value).model_fields]

    walk((unit.rating, unit.windings, unit.impedances, unit.system, unit.earthing, unit.design, unit.declared))
    return found


def test_turns_in_series(unit):
    """Turns of all coils of a winding add up at each tapping."""
    assert [series_turns(unit.design, "HV", t) for t in unit.tappings] == [928.0, 974.0, 835.0]


def test_turns_of_parallel_paths(change):
    """Blocks of different paths are in parallel: half of their sum is in series."""
    made = change(
        ('outer_radius = "500 mm"\n', 'outer_radius = "500 mm"\nparallel_paths = 2\n'),
        ("turns = 464 }, {", "turns = 928 }, {"),
        ("turns = 464 } ]", "turns = 928 } ]"),
    )
    assert series_turns(made.design, "HV") == 928.0


# Closed forms of the connections: star root three, zigzag two thirds of the line voltage for both halves.
@pytest.mark.parametrize(
    ("group", "first", "second"),
    [
        ("YNd11", 132e3 / 3**0.5, 33e3),
        ("Dyn11", 132e3, 33e3 / 3**0.5),
        ("Dzn0", 132e3, 22e3),
        ("YNa0", 99e3 / 3**0.5, 33e3 / 3**0.5),
    ],
)
def test_phase_voltages(whole, group, first, second):
    """The voltage of one phase's turns follows from the connection."""
    text = bare(whole).replace("YNd11", group)
    text = "".join(line for line in text.splitlines(keepends=True) if "zero_sequence" not in line)
    made = read_unit_text(text)
    assert phase_voltage(made, "HV") == pytest.approx(first)
    assert phase_voltage(made, "LV") == pytest.approx(second)


@pytest.mark.parametrize(("group", "first"), [("Ii0", 132e3), ("Ia0", 99e3)])
def test_phase_voltages_of_single_phase_units(whole, group, first):
    """Without three phases there is no root three."""
    text = edited(
        bare(whole), ("YNd11", group), ("phases = 3", "phases = 1"), ('core = "three-limb"', 'core = "shell"')
    )
    text = "".join(line for line in text.splitlines(keepends=True) if "zero_sequence" not in line)
    made = read_unit_text(text)
    assert [phase_voltage(made, w) for w in ("HV", "LV")] == pytest.approx([first, 33e3])


def test_section_given_wins(unit):
    """The section given is used, whatever the strands make."""
    assert conductor_section(unit, "HV") == Quantity(62.0, "mm^2")


def test_section_from_the_strands(change):
    """Without conductor_section the strands make it: 2 strips of 2.6 mm by 12 mm in parallel are 62.4 mm^2."""
    made = change(('conductor_section = "62 mm^2"\n', ""))
    assert conductor_section(made, "HV").to("mm^2") == pytest.approx(62.4)


def test_section_unknown(whole, change):
    """Without discs, or without a design, the section stays unknown."""
    assert conductor_section(change(('conductor_section = "62 mm^2"\n', ""), (", discs = 12", "")), "HV") is None
    assert conductor_section(read_unit_text(bare(whole).replace('conductor_section = "62 mm^2"\n', "")), "HV") is None


def test_section_of_a_transposed_cable(change):
    """All strands of a cable count: 21 of 1.5 mm by 5 mm are 157.5 mm^2; their stack is 11 strands high."""
    made = change(
        ('kind = "strip"', 'kind = "transposed"'), ("strands = 1", "strands = 21"), ('strand_radial = "2.6 mm"', 'strand_radial = "1.5 mm"'),
        ('strand_axial = "13 mm"', 'strand_axial = "5 mm"'), ("radial_count = 20", "radial_count = 3"), ("turns = 402, discs = 80", "turns = 402, discs = 134"),
        ('spacer_thickness = "5.6 mm"\ndiscs = 80\n', ""),
    )  # fmt: skip
    coil = made.design.coils[0]
    assert turn_section(coil) == pytest.approx(157.5)
    assert radial_fill(coil) == pytest.approx(3 * (11 * 1.5 + 0.4) / 60)


def test_a_twin_lies_two_high(change):
    """A twin has two strands side by side in the radial direction."""
    made = change(
        ('kind = "strip"', 'kind = "twin"'), ("strands = 1\n", ""), ("radial_count = 20", "radial_count = 10")
    )
    coil = made.design.coils[0]
    assert radial_fill(coil) == pytest.approx(10 * (2 * 2.6 + 0.4) / 60)
    assert turn_section(coil) == pytest.approx(2 * 2 * 2.6 * 13)


@pytest.mark.parametrize("missing", ["core", "coils", "clamping", "all"])
def test_a_design_may_be_known_in_part(whole, missing):
    """Whatever part of a design is missing, the file is read and the other parts are kept."""
    head, core = whole.split("[design.core]")
    core, coils = core.split("[[design.coils]]", 1)
    coils, clamping = coils.split("[design.clamping]")
    clamping = clamping.split("[limits]")[0]
    parts = {
        "core": f"[design.core]{core}",
        "coils": f"[[design.coils]]{coils}",
        "clamping": f"[design.clamping]{clamping}",
    }
    kept = "[design]\n" if missing == "all" else "".join(text for name, text in parts.items() if name != missing)
    design = read_unit_text(head + kept).design
    found = {"core": design.core, "coils": design.coils or None, "clamping": design.clamping}
    absent = {"core", "coils", "clamping"} if missing == "all" else {missing}
    assert {name for name, part in found.items() if part is None} == absent


def test_what_a_missing_core_does_not_hide(whole):
    """Coils are still held against each other and against the voltages."""
    start, end = whole.index("[design.core]"), whole.index("[[design.coils]]")
    text = (whole[:start] + whole[end:]).replace('inner_radius = "310 mm"', 'inner_radius = "380 mm"', 1)
    with pytest.raises(UnitFileError, match=r"outer_radius: must be above inner_radius, 380 mm, got 370 mm\.$"):
        read_unit_text(text)

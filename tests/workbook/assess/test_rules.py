"""Two rule sets: what each standard asks, and the reason where it asks nothing."""

import math
from types import SimpleNamespace

import pytest

from throughfault.errors import InputError
from throughfault.workbook.assess.rules import bank_power, category_of, every_combination, rules_for
from throughfault.workbook.assess.rules_iec import IEC60076_5_2006 as IEC
from throughfault.workbook.assess.rules_ieee import IEEEC57_12_00_2015 as IEEE


@pytest.mark.parametrize(
    ("standard", "rules"),
    [
        ("IEC 60076-5:2006", IEC),
        ("IEC 60076-5", IEC),
        ("IEEE C57.12.00", IEEE),
        ("IEEE C57.12.00-2015", IEEE),
    ],
)
def test_a_standard_without_edition_is_the_newest_carried(standard, rules):
    """The edition may be left out."""
    assert rules_for(SimpleNamespace(standard=standard)) is rules


def test_another_edition_is_refused_with_what_is_carried():
    """An edition that the kit does not carry is the user's to know, in one sentence."""
    with pytest.raises(InputError) as raised:
        rules_for(SimpleNamespace(standard="IEC 60076-5:2000"))
    assert str(raised.value) == (
        'standard: must be one of "IEC 60076-5", "IEC 60076-5:2006", "IEEE C57.12.00", "IEEE C57.12.00-2015", '
        "got 'IEC 60076-5:2000' (did you mean 'IEC 60076-5:2006'?)."
    )


def test_what_the_rule_sets_say_of_themselves():
    """Key, title, edition, deciding form and meaning of the start temperature."""
    assert (IEC.key, IEC.title, IEC.edition) == ("IEC60076-5:2006", "IEC 60076-5", "2006")
    assert (IEC.thermal_method, IEC.start_is) == ("average temperature", "mean winding temperature")
    assert (IEEE.key, IEEE.title, IEEE.edition) == ("IEEEC57.12.00-2015", "IEEE C57.12.00", "2015")
    assert (IEEE.thermal_method, IEEE.start_is) == ("all heat stored", "hottest-spot temperature")


@pytest.mark.parametrize(
    ("rules", "power", "phases", "bank", "category"),
    [
        (IEC, 0.0249, 3, False, None), (IEC, 0.025, 3, False, "I"), (IEC, 2.5, 3, False, "I"),
        (IEC, 2.501, 3, False, "II"), (IEC, 100.0, 3, False, "II"), (IEC, 100.1, 3, False, "III"),
        (IEC, 40.0, 1, True, "III"), (IEC, 40.0, 3, True, "II"), (IEC, 40.0, 1, False, "II"),
        (IEEE, 0.014, 3, False, None), (IEEE, 0.5, 3, False, "I"), (IEEE, 5.0, 3, False, "II"),
        (IEEE, 5.001, 3, False, "III"), (IEEE, 30.0, 3, False, "III"), (IEEE, 30.1, 3, False, "IV"),
        (IEEE, 1.667, 1, False, "II"), (IEEE, 10.0, 1, False, "III"), (IEEE, 10.1, 1, False, "IV"),
        (IEEE, 10.0, 1, True, "III"), (IEEE, 30.0, 3, True, "III"), (IEEE, 31.0, 3, True, "IV"),
        (IEEE, 0.4, 1, True, "II"), (IEEE, 1.2, 3, True, "II"), (IEEE, 0.4, 1, False, "I"),
    ],
)  # fmt: skip
def test_category_by_power(rules, power, phases, bank, category):
    """Borders of the categories; a bank counts by its own power, under IEEE in the three-phase column."""
    found = rules.category(power, phases, bank=bank)
    assert found.name == category
    assert (found.note == "") == (category is not None)


def test_unit_category_by_standard():
    """IEC takes the largest winding, IEEE the smaller of the two principal ones."""

    def winding(mva):
        return SimpleNamespace(rated_power=SimpleNamespace(to=lambda _: mva))

    rating = SimpleNamespace(phases=3, bank=False)
    unit = SimpleNamespace(windings={"HV": winding(31.0), "LV": winding(29.0), "TV": winding(4.0)}, rating=rating)
    assert category_of(unit, IEC).name == "II"
    assert category_of(unit, IEEE).name == "III"


def test_power_of_a_bank():
    """A file that states one unit of a bank states a third of its power."""
    assert bank_power(40.0, 1, bank=True) == 120.0
    assert bank_power(40.0, 3, bank=True) == 40.0
    assert bank_power(40.0, 1, bank=False) == 40.0


@pytest.mark.parametrize(
    ("power", "least"),
    [
        (0.63, 4.0),
        (1.25, 5.0),
        (2.5, 6.0),
        (6.3, 7.0),
        (25.0, 8.0),
        (40.0, 10.0),
        (63.0, 11.0),
        (100.0, 12.5),
        (160.0, 12.5),
    ],
)
def test_minimum_impedance_by_power(power, least):
    """Last power of each row; above 100 MVA more than the last value, by agreement."""
    found = IEC.minimum_impedance(power)
    assert (found.value, found.unit, found.provenance) == (least, "%", "recalled")
    assert found.note == ("by agreement; more than this value" if power > 100 else "")


def test_no_minimum_impedance_where_the_standard_has_none():
    """Below the first row, and under IEEE."""
    assert IEC.minimum_impedance(0.02).note == "the rated power lies below the first row of the table"
    assert IEEE.minimum_impedance(40.0).value is None
    assert IEEE.minimum_impedance(40.0).note == "the standard sets no minimum impedance"


@pytest.mark.parametrize(
    ("rules", "voltage", "column", "power"),
    [
        (IEC, 24.0, None, 500.0), (IEC, 7.2, "european", 500.0), (IEC, 36.0, "north american", 1500.0),
        (IEC, 145.0, "european", 10000.0), (IEC, 145.0, "north american", 15000.0), (IEC, 765.0, None, 83500.0),
        (IEC, 1.1, None, None), (IEC, 40.5, None, None), (IEC, 800.0, None, None),
        (IEEE, 15.0, None, 4300.0), (IEEE, 48.3, None, 4300.0), (IEEE, 145.0, None, 30200.0), (IEEE, 245.0, None, None),
    ],
)  # fmt: skip
def test_system_power_is_tabled_and_never_extrapolated(rules, voltage, column, power):
    """Rows of both tables; a highest voltage without a row gives a reason."""
    found = rules.system_short_circuit_power(voltage, column)
    assert found.value == power
    assert found.provenance == "recalled"
    if power is None:
        assert found.note == "the table has no row for the highest voltage of the winding"


@pytest.mark.parametrize(
    ("rules", "category", "ratio", "neglected"),
    [
        (IEC, "I", 0.0315, True), (IEC, "I", 0.05, True), (IEC, "I", 0.083, False), (IEC, "II", 0.01, False),
        (IEC, None, 0.01, False), (IEEE, "I", 0.2, True), (IEEE, "II", 0.2, True), (IEEE, "III", 0.001, False),
    ],
)  # fmt: skip
def test_when_the_system_is_left_out(rules, category, ratio, neglected):
    """IEC: category I up to 5 %; IEEE: categories I and II take the transformer alone."""
    found = rules.source_neglected(category, ratio)
    assert found.neglected is neglected
    assert found.reason


def test_the_system_counts_for_more_than_two_separate_windings():
    """IEC leaves the system out of two separate windings only; IEEE goes by category alone."""
    found = IEC.source_neglected("I", 0.01, two_winding=False)
    assert (found.neglected, found.reason) == (
        False, "the system impedance counts: only units with two separate windings may leave it out",
    )  # fmt: skip
    assert IEEE.source_neglected("I", 0.01, two_winding=False).neglected


@pytest.mark.parametrize(
    ("impedance", "principal", "first_pair", "tolerance"),
    [
        (9.9, True, True, 10.0), (10.0, True, True, 7.5), (9.9, False, True, 15.0), (10.0, False, True, 10.0),
        (9.9, True, False, 15.0), (10.0, True, False, 10.0), (10.0, False, False, 10.0),
    ],
)  # fmt: skip
def test_usual_tolerance_of_an_impedance(impedance, principal, first_pair, tolerance):
    """The narrow tolerance is that of the first pair on its principal tapping; IEEE has none here."""
    found = IEC.usual_tolerance(impedance, principal=principal, first_pair=first_pair)
    assert (found.value, found.source) == (tolerance, "IEC60076-1:2011, Table 1")
    assert IEEE.usual_tolerance(impedance, principal=principal, first_pair=first_pair).value is None


def test_x0_over_x1_where_none_is_given():
    """IEC gives a range, so both ends; IEEE one default."""
    assert [t.value for t in IEC.x0_over_x1_scan()] == [1.0, 3.0]
    assert [t.value for t in IEEE.x0_over_x1_scan()] == [2.0]


POWERS = {"HV": 100.0, "LV": 100.0, "TV": 30.0, "XV": 36.0}


def test_iec_infeeds_are_each_source_and_all():
    """Each source alone and all together."""
    assert IEC.infeeds(("HV", "LV", "TV"), POWERS, "LV") == (("HV",), ("LV",), ("TV",), ("HV", "LV", "TV"))
    assert IEC.infeeds(("HV",), POWERS, "LV") == (("HV",),)
    assert IEC.infeeds((), POWERS, "LV") == ()


def test_ieee_infeeds_are_at_most_two_large_unfaulted_ones():
    """A source of 35 % or less does not feed; the faulted terminal's own system may stand beside two others."""
    assert IEEE.infeeds(("HV", "TV"), POWERS, "LV") == (("HV",),)
    found = IEEE.infeeds(("HV", "LV", "XV"), POWERS, "TV")
    assert found == (("HV",), ("LV",), ("XV",), ("HV", "LV"), ("HV", "XV"), ("LV", "XV"))
    own = IEEE.infeeds(("HV", "LV"), POWERS, "LV")
    assert own == (("HV",), ("LV",), ("HV", "LV"))


def test_combinations_of_at_most_two():
    """Singles and pairs, never three."""
    assert every_combination("abc", 2) == (("a",), ("b",), ("c",), ("a", "b"), ("a", "c"), ("b", "c"))


@pytest.mark.parametrize(
    ("rules", "fault", "two_winding", "phases", "required"),
    [
        (IEC, "3ph", True, 3, True), (IEC, "LG", True, 3, False), (IEC, "LG", False, 3, True), (IEC, "LL", True, 1, True),
        (IEEE, "LG", True, 3, True), (IEEE, "LLG", False, 3, True),
    ],
)  # fmt: skip
def test_what_is_required(rules, fault, two_winding, phases, required):
    """IEC asks the three-phase fault of two separate windings, everything of others; IEEE everything."""
    assert rules.required_by_standard(fault, two_winding=two_winding, phases=phases) is required


@pytest.mark.parametrize(
    ("ratio", "category", "given", "factor", "how"),
    [
        (2.0, "II", None, 1.76, "table, interpolated"), (12.0, "II", None, 2.505, "table, interpolated"),
        (12.0, "II", 2.7, 2.505, "table, interpolated"), (14.0, "III", None, 2.55, "table, interpolated"),
        (20.0, "I", None, 2.55, "default of the category"), (20.0, "III", None, 2.69, "default of the category"),
        (math.inf, "II", None, 2.55, "default of the category"), (20.0, "II", 2.62, 2.62, "as given for the system"),
        (20.0, None, None, None, "no category, so no default factor"), (0.0, "I", None, math.sqrt(2), "exact first maximum"),
    ],
)  # fmt: skip
def test_iec_peak_factor(ratio, category, given, factor, how):
    """Table from 1 to 14, exact first maximum below, default of the category or a given factor above."""
    found = IEC.peak_factor(ratio, category, given)
    assert found.value == (None if factor is None else pytest.approx(factor, abs=1e-9))
    assert found.how == how


@pytest.mark.parametrize(
    ("ratio", "factor"),
    [(0.0, math.sqrt(2)), (2.0, 1.746), (20.0, 2.624), (1e9, 2 * math.sqrt(2)), (math.inf, 2 * math.sqrt(2))],
)
def test_ieee_peak_factor(ratio, factor):
    """The closed form and its two ends, whatever the category."""
    found = IEEE.peak_factor(ratio, "IV")
    assert found.value == pytest.approx(factor, abs=0.0005)
    assert found.how == "closed form"


@pytest.mark.parametrize(
    ("power", "phases", "ceiling"),
    [
        (0.025, 1, 40.0),
        (0.1, 1, 35.0),
        (0.5, 1, 25.0),
        (0.075, 3, 40.0),
        (0.3, 3, 35.0),
        (0.5, 3, 25.0),
        (0.1, 3, None),
    ],
)
def test_ieee_ceiling_of_category_one(power, phases, ceiling):
    """40, 35 and 25 times base by power; between the bands no row."""
    found = IEEE.current_ceiling("I", power, phases, 0.48)
    assert found.value == ceiling
    assert found.note == ("" if ceiling else "the table has no row for this power")


def test_no_ceiling_elsewhere():
    """Other categories, a high secondary voltage, more than two separate windings, and IEC."""
    why = "ceilings hold for two-winding category I units with a low-voltage secondary only"
    assert IEEE.current_ceiling("II", 2.0, 3, 0.48).note == why
    assert IEEE.current_ceiling("I", 0.3, 3, 4.16).note == why
    assert IEEE.current_ceiling("I", 0.3, 3, 0.601).note == why
    assert IEEE.current_ceiling("I", 0.3, 3, 0.48, two_winding=False).note == why
    assert IEEE.current_ceiling("I", 0.3, 3, 0.6).value == 35.0
    assert IEC.current_ceiling("I", 0.3, 3, 0.4).note == "the standard sets no ceiling on the current"


@pytest.mark.parametrize(
    ("rules", "category", "multiple", "duration"),
    [
        (IEC, "II", 9.6, 2.0), (IEC, "I", 40.0, 2.0), (IEEE, "I", 40.0, 0.78125), (IEEE, "I", 25.0, 2.0),
        (IEEE, "I", None, 2.0), (IEEE, "IV", 30.0, 2.0),
    ],
)  # fmt: skip
def test_duration_where_none_is_given(rules, category, multiple, duration):
    """2 s; IEEE category I above 25 times base: 1250/I^2. IEC only says that less may be agreed."""
    found = rules.fault_duration(category, multiple)
    assert found.value == duration
    if rules is IEC:
        assert found.note == ("a shorter duration may be agreed" if multiple > 25 else "")


def test_start_temperature_where_none_is_given():
    """IEC has none; IEEE the hottest spot of the higher rise, for liquid-immersed units."""
    assert IEC.start_temperature("oil").value is None
    assert IEC.start_temperature("oil").note == "ambient and rated rise belong to the unit"
    assert IEEE.start_temperature("oil").value == 110.0
    assert IEEE.start_temperature("dry").note == "the defaults hold for liquid-immersed units"


def test_reference_temperature():
    """75 degC under IEC, 85 degC under IEEE for the higher rise; none for dry-type units."""
    assert IEC.reference_temperature("oil").value == 75.0
    assert IEEE.reference_temperature("oil").value == 85.0
    for rules in (IEC, IEEE):
        assert rules.reference_temperature("dry").note == "the reference temperature of dry-type units is not tabled"


@pytest.mark.parametrize(
    ("rules", "material", "immersion", "thermal_class", "limit"),
    [
        (IEC, "copper", "oil", None, 250.0), (IEC, "aluminium", "oil", 105, 200.0), (IEC, "copper", "dry", 155, 350.0),
        (IEC, "aluminium", "dry", 105, 180.0), (IEEE, "copper", "oil", None, 250.0), (IEEE, "aluminium", "oil", 120, 200.0),
        (IEEE, "copper", "dry", 180, 400.0),
    ],
)  # fmt: skip
def test_temperature_limit(rules, material, immersion, thermal_class, limit):
    """Limits by material, immersion and class; oil without a class counts as its only class."""
    found = rules.temperature_limit(material, immersion, thermal_class)
    assert found.limit.value == limit
    assert (found.limit.sense, found.limit.provenance, found.reason) == ("at most", "recalled", "")


@pytest.mark.parametrize(
    ("rules", "immersion", "thermal_class", "reason"),
    [
        (IEC, "dry", None, "the limit depends on the thermal class"),
        (IEC, "oil", 120, "the table has no row for this class"),
        (IEEE, "dry", None, "the limit depends on the thermal class"),
        (IEEE, "dry", 105, "the table has no row for this class"),
    ],
)
def test_no_temperature_limit(rules, immersion, thermal_class, reason):
    """Where the standard has no row there is no guess, but a reason and the key that would settle it."""
    found = rules.temperature_limit("copper", immersion, thermal_class)
    assert (found.limit, found.reason, found.key) == (None, reason, "rating.thermal_class")

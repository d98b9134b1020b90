"""The contract that every table keeps, and tables against their own formulas."""

import math
import re
from pathlib import Path

import pytest

from throughfault.cells.fault_current import system_impedance
from throughfault.cells.peak_factor import peak_factor_closed_form, peak_factor_exact
from throughfault.cells.through_fault import thermal_duration
from throughfault.quantities import UNITS
from throughfault.sources import PROVENANCES, bibliography
from throughfault.tables import table, table_digests, table_names

ASCENDING = {
    "iec60076_5_2006_category": ("from",),
    "iec60076_5_2006_minimum_impedance": ("from", "impedance"),
    "iec60076_5_2006_peak_factor": ("x_over_r", "peak_factor"),
    "iec60076_5_2006_system_power": ("highest_voltage_from", "highest_voltage_to", "european", "north_american"),
    "ieee_c57_12_00_2015_system_power": ("highest_voltage", "nominal_voltage"),
    "ieee_c57_12_00_2015_peak_factor": ("r_over_x",),
    "ieee_c57_109_2018_thermal_curve": ("multiple",),
}
ROOT = Path(__file__).parent.parent
KIT = {path: path.read_text(encoding="utf-8") for path in (ROOT / "kit").rglob("*.py")}
TESTS = "\n".join(path.read_text(encoding="utf-8") for path in (ROOT / "tests").rglob("*.py"))
MADE_UP = {"copper", "aluminium", "copper_confidence", "aluminium_confidence"}  # columns named by the material


@pytest.mark.parametrize("name", table_names())
def test_header_is_complete_and_honest(name):
    """Source, place, edition, provenance and confidence are known words; names carry no spaces."""
    found = table(name)
    assert found.source.key in bibliography()
    assert found.source.provenance in PROVENANCES
    assert found.confidence in ("H", "M", "L")
    assert found.header["edition"]
    assert found.header["errata"]
    assert name == name.lower().replace(" ", "_")
    assert name in {digest.removesuffix(".csv") for digest in table_digests()}


@pytest.mark.parametrize("name", table_names())
def test_columns_have_units_and_finite_numbers(name):
    """Every column says its unit, and every number in it is finite."""
    found = table(name)
    for column in found.header["columns"]:
        assert column["unit"] in UNITS or column["unit"] == "text"
        assert column["description"]
        for value in found.column(column["name"]):
            assert value is None or isinstance(value, str) or math.isfinite(value)
            if column["unit"] != "text":
                assert value is None or isinstance(value, float)


@pytest.mark.parametrize("name", table_names())
def test_every_column_is_read_or_said_to_be_evidence(name):
    """What no module reads by name stands in the header as evidence, and a test reads it."""
    evidence = table(name).header.get("evidence", [])
    columns = {column["name"] for column in table(name).header["columns"]}
    assert set(evidence) <= columns
    readers = "\n".join(text for text in KIT.values() if f'"{name}"' in text)
    read = {column for column in columns if re.search(rf"""["']{column}["']|\b{column}=""", readers)}
    assert columns - read - MADE_UP <= set(evidence)
    for column in evidence:
        assert f'"{column}"' in TESTS, column


@pytest.mark.parametrize("key", bibliography())
def test_every_source_is_cited(key):
    """A source of the bibliography is cited by a cell, a table or a published value."""
    tables = (path.read_text(encoding="utf-8") for path in (ROOT / "kit/throughfault/tables").glob("*.csv"))
    published = (path.read_text(encoding="utf-8") for path in (ROOT / "tests/published").iterdir() if path.is_file())
    assert any(f'"{key}"' in text or f"({key})" in text for text in (*KIT.values(), *tables, *published, TESTS))


@pytest.mark.parametrize(("name", "column"), [(n, c) for n, columns in ASCENDING.items() for c in columns])
def test_ordered_columns_ascend(name, column):
    """A column declared ordered never falls."""
    values = table(name).column(column)
    assert list(values) == sorted(values)


@pytest.mark.parametrize("name", ["iec60076_5_2006_category", "iec60076_5_2006_minimum_impedance"])
def test_power_bands_join(name):
    """Each band begins one kVA above the end of the last."""
    rows = table(name).rows
    assert [row["from"] for row in rows[1:]] == [row["to"] + 1 for row in rows[:-1]]
    assert rows[-1]["to"] is None


def test_iec_peak_factors_are_the_exact_first_maximum():
    """Every row of the IEC table equals the first maximum of the offset wave rounded to 0.01 (own arithmetic)."""
    rows = table("iec60076_5_2006_peak_factor").rows
    assert [row["peak_factor"] for row in rows] == [round(peak_factor_exact(row["x_over_r"]), 2) for row in rows]


def test_iec_closed_form_lies_below_its_table():
    """The closed form gives less than the table, at most 0.8 % (own arithmetic)."""
    for row in table("iec60076_5_2006_peak_factor").rows:
        under = 1 - peak_factor_closed_form(row["x_over_r"]) / row["peak_factor"]
        assert -0.002 < under < 0.0085


def test_ieee_peak_factors_follow_the_closed_form():
    """Every row of the IEEE table equals the closed form to its last digit."""
    for row in table("ieee_c57_12_00_2015_peak_factor").rows:
        assert peak_factor_closed_form(1 / row["r_over_x"]) == pytest.approx(row["peak_factor"], abs=0.0005)


def test_default_peak_factors_are_their_asymmetry_times_root_two():
    """1.8 and 1.9 times the square root of two, to 0.01."""
    for row in table("iec60076_5_2006_peak_factor_default").rows:
        assert row["asymmetry"] * math.sqrt(2) == pytest.approx(row["peak_factor"], abs=0.005)


def test_ieee_system_power_is_root_three_voltage_current():
    """MVA = root 3 x nominal kV x kA to the rounding of the table; the last row fits 700 kV (own arithmetic)."""
    for row in table("ieee_c57_12_00_2015_system_power").rows:
        power = math.sqrt(3) * row["nominal_voltage"] * row["current"]
        assert power == pytest.approx(row["power"], rel=0.006), row


def test_iec_system_power_gives_plausible_currents():
    """The European column gives 12 to 66 kA at the highest voltage, rising within a few kA (own arithmetic)."""
    expected = {24: 12, 36: 16, 72.5: 24, 123: 28, 170: 34, 245: 47, 300: 58, 362: 56, 420: 55, 525: 66, 765: 63}
    for row in table("iec60076_5_2006_system_power").rows:
        voltage = row["highest_voltage_to"]
        if voltage in expected:
            current = voltage / math.sqrt(3) / system_impedance(voltage, row["european"])
            assert current == pytest.approx(expected[voltage], abs=0.55)


@pytest.mark.parametrize(
    ("material", "heat", "density", "resistivity", "spread"),
    [("copper", 398.4, 8894, 0.0224e-6, 0.001), ("aluminium", 928, 2685, 0.0355e-6, 0.002)],
)
def test_thermal_constants_come_from_material_data(material, heat, density, resistivity, spread):
    """2 (100 + offset) c gamma / rho at 100 degC gives 105 985 and 45 622, within the stated spread (own arithmetic)."""
    row = table("iec60076_5_2006_thermal_constant").row(material=material)
    own = 2 * (100 + row["temperature_offset"]) * heat * density / resistivity / 1e12
    assert own == pytest.approx(row["constant"], rel=spread)


def test_conductor_data_lie_in_the_physical_range():
    """c gamma (T_k + theta) / rho of copper is 50 800 to 52 500, of aluminium 21 300 to 22 800 A^2 s/mm^4 (own arithmetic)."""
    physical = {"copper": (50_800, 52_500), "aluminium": (21_300, 22_800)}
    for row in table("conductor_material").rows:
        resistivity = row["resistivity_20"] * 1e-6 / (20 + row["temperature_offset"])
        own = row["specific_heat"] * row["density"] / resistivity / 1e12
        low, high = physical[row["material"]]
        assert low < own < high


def test_ieee_heat_content_is_the_pound_figure():
    """174 + 0.0225 and 110, 405 + 0.1 and 360 W s/(lb degC) times 2.20462 are the figures per kilogram, rounded."""
    pounds = {"copper": (174, 0.0225, 110), "aluminium": (405, 0.1, 360)}
    for material, per_pound in pounds.items():
        row = table("ieee_c57_12_00_2015_heat_content").row(material=material)
        per_kilogram = [2.20462 * value for value in per_pound]
        assert per_kilogram == pytest.approx([row["base"], row["slope"], row["insulation"]], rel=0.003)


def test_upper_thermal_points_lie_on_the_constant_integral():
    """6.3, 11.3 and 25 times base lie on 1250/I^2 to the rounding of the points; 2 and 3 times do not."""
    rows = table("ieee_c57_109_2018_thermal_curve").rows
    for row in rows:
        if row["multiple"] > 4.75:
            assert thermal_duration(row["multiple"]) == pytest.approx(row["duration"], rel=0.055)
    assert 1250 / rows[0]["multiple"] ** 2 == pytest.approx(312.5)
    assert rows[0]["duration"] == 1800


def test_start_and_reference_temperatures_follow_from_the_rated_rise():
    """30 degC ambient, rated rise and a hottest-spot allowance of 15 K or 10 K; 20 degC and rated rise (from memory)."""
    for row, allowance in zip(table("ieee_c57_12_00_2015_start_temperature").rows, (15.0, 10.0), strict=True):
        assert row["temperature"] == 30.0 + row["average_rise"] + allowance
        assert row["reference_temperature"] == 20.0 + row["average_rise"]


def test_zero_sequence_shares_are_in_order():
    """The lower share of a three-limb unit lies below the greater, which is the impedance itself."""
    row = table("iec60076_8_1997_zero_sequence_share").rows[0]
    assert 0.0 < row["share_least"] < row["share_greatest"] == 1.0


def test_short_duration_of_category_one_joins_the_rule():
    """The constant integral gives the full duration exactly where the shorter one begins: 1250 / 25^2 = 2 s."""
    row = table("ieee_c57_12_00_2015_duration").rows[0]
    assert row["heat_integral"] / row["shorter_above"] ** 2 == row["duration"]

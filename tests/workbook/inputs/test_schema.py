"""The schema for editors and the schema page."""

import copy
import tomllib
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from throughfault.workbook.inputs import KINDS_OF_UNIT, json_schema, schema_page, starter
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.section import Section

ROOT = Path(__file__).parents[3]
EXAMPLES = ["BV-T1", "BV-T2", "BV-D7"]


@pytest.fixture(scope="module")
def validator():
    schema = json_schema()
    Draft202012Validator.check_schema(schema)
    return Draft202012Validator(schema)


@pytest.mark.parametrize("tag", EXAMPLES)
def test_the_examples_satisfy_it(validator, tag):
    """The example reviews satisfy the schema."""
    validator.validate(tomllib.loads((ROOT / "example_reviews" / tag / "unit.toml").read_text(encoding="utf-8")))


@pytest.mark.parametrize("kind", KINDS_OF_UNIT)
def test_the_starters_satisfy_it(validator, kind):
    """The starting files satisfy the schema."""
    validator.validate(tomllib.loads(starter(kind, "BV-X1")))


def test_the_whole_file_satisfies_it(validator, whole):
    """A file with every key satisfies the schema."""
    validator.validate(tomllib.loads(whole))


WRONG = {
    "unknown key": lambda raw: raw["rating"].update(colour="red"),
    "missing unit": lambda raw: raw["windings"]["HV"].update(rated_voltage="132"),
    "wrong unit": lambda raw: raw["windings"]["HV"].update(rated_voltage="132 MVA"),
    "bare number": lambda raw: raw["windings"]["HV"].update(rated_voltage=132),
    "unknown word": lambda raw: raw["rating"].update(core="four-limb"),
    "missing key": lambda raw: raw["rating"].pop("phases"),
    "bad tag": lambda raw: raw["identity"].update(tag="../x"),
    "bad name": lambda raw: raw["windings"].update({"L/V": raw["windings"]["LV"]}),
    "bad vector group": lambda raw: raw["rating"].update(vector_group="YNq"),
    "null": lambda raw: raw["rating"].update(thermal_class=None),
    "bad pair": lambda raw: raw["impedances"][0].update(between=["HV", "HV"]),
    "bad terminal": lambda raw: raw["system"]["HV"].update(x_over_r=-1.0),
    "bad prefault voltage": lambda raw: raw["system"].update(prefault_voltage={"minus": "1.1"}),
    "bad earthing": lambda raw: raw["earthing"].update(HV="soild"),
    "bad limit": lambda raw: raw["limits"].update({"strength.LV.hoop": {"value": "0.3 Rp"}}),
    "bad count": lambda raw: raw["design"]["coils"][0].update(parallel_paths=0),
}


@pytest.mark.parametrize("name", WRONG)
def test_a_wrong_file_does_not(validator, whole, name):
    """What the reader refuses for one key, the schema refuses too."""
    raw = copy.deepcopy(tomllib.loads(whole))
    assert validator.is_valid(raw)
    WRONG[name](raw)
    assert not validator.is_valid(raw)


def test_dialect_and_title():
    """The schema names its dialect, and no key of the model's own leaks into it."""
    schema = json_schema()
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert "'terminals'" not in str(schema)
    assert "'null'" not in str(schema)


def test_descriptions_name_the_source():
    """An editor shows what a key means and where its value is found."""
    voltage = json_schema()["$defs"]["Winding"]["properties"]["highest_voltage"]
    assert voltage["description"] == "Highest voltage for equipment, Um. Source: rating plate."


def sections(section=UnitFile):
    """Yield every table of the model."""
    yield section
    for other in Section.__subclasses__():
        if other is not section:
            yield other


def test_the_page_is_made_from_the_model():
    """The page in the project is the one the model gives."""
    assert (ROOT / "kit" / "SCHEMA.md").read_text(encoding="utf-8") == schema_page()


def test_the_page_shows_every_key():
    """Each key of each table stands on the page."""
    page = schema_page()
    for section in sections():
        for name in section.model_fields:
            assert f"`{name}" in page or f"[{name}" in page or f".{name}" in page or name == "terminals", name


def test_every_key_says_what_it_means():
    """No key is without a meaning."""
    assert [(s.__name__, n) for s in sections() for n, f in s.model_fields.items() if not f.description] == []

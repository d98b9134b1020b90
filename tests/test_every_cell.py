"""The contract that every registered cell keeps; new cells come under it by being declared."""

import ast
import math
import random
import re
import tomllib
import types
from pathlib import Path

import numpy as np
import pint
import pytest

import throughfault.cells  # noqa: F401 - fills the registry
from throughfault.declare import Algorithm, Cell, Condition, OpenPoint, Range, registry
from throughfault.errors import OutsideValidity
from throughfault.quantities import KINDS, UNITS, Quantity, convert

ROOT = Path(__file__).parent.parent
FORMULAS = [c for c in registry().values() if isinstance(c, Cell)]
ALGORITHMS = [c for c in registry().values() if isinstance(c, Algorithm)]
LIMITS = [(c, v) for c in FORMULAS for v in c.valid_for if isinstance(v, Range)]
JOINT = [(c, v) for c in FORMULAS for v in c.valid_for if isinstance(v, Condition)]
BY_HELPERS = {"fault_currents"}  # its tests reach the solver through helpers of their files
# where a range leaves an end open, values of the trade by unit
USUAL = {
    "MVA": (0.02, 500.0), "kV": (0.2, 500.0), "%": (0.5, 60.0), "ohm": (0.05, 80.0), "kW": (0.5, 900.0), "kA": (0.1, 80.0),
    "A": (10.0, 9000.0), "1": (0.05, 30.0), "s": (0.05, 8.0), "A/mm^2": (5.0, 90.0), "mm^2": (5.0, 900.0),
    "degC": (20.0, 200.0), "K": (225.0, 240.0), "Hz": (16.0, 60.0), "A^2 s/mm^4": (500.0, 40000.0), "p.u.": (0.02, 0.3),
    "W/kg": (500.0, 60000.0), "W s/(kg K)": (380.0, 1500.0), "uohm m": (0.015, 0.03), "kg/m^3": (2600.0, 9000.0),
}  # fmt: skip


def ids(items):
    return [getattr(item, "name", None) or f"{item[0].name}-{getattr(item[1], 'argument', 'joint')}" for item in items]


def interval(cell, name):
    """Ends of the samples of one argument: within its ranges, else the usual ones of its unit."""
    low, high = USUAL[cell.arguments[name].unit]
    for validity in cell.valid_for:
        if isinstance(validity, Range) and validity.argument == name:
            ends = [e for e in (validity.above, validity.at_least) if e is not None]
            low = max([low, *ends]) if not ends or ends[0] < high else ends[0]
            tops = [e for e in (validity.below, validity.at_most) if e is not None]
            high = min([high, *tops])
            if high <= low:
                low = ends[0] if ends else 0.0
    return low, high


def sample(cell, rng, *, wanted=None):
    """Draw arguments inside every range and condition; or, for `wanted`, inside all but that condition."""
    for _ in range(100_000):
        values = {name: rng.uniform(*interval(cell, name)) for name in cell.arguments}
        if wanted is not None:  # a wider draw, so that a joint condition can be broken
            values = {name: value * rng.choice([1, 1, 3, 10, 30]) for name, value in values.items()}
        held = [v.holds(values) for v in cell.valid_for if v is not wanted]
        if all(held) and (wanted is None or not wanted.holds(values)):
            return values
    raise AssertionError(f"{cell.name}: no sample found")


def seeded(cell):
    """Points of a cell are the same in every run."""
    return random.Random(cell.name)  # noqa: S311 - sample points are no secrets


def quantities(cell, values):
    return {name: Quantity(value, cell.arguments[name].unit) for name, value in values.items()}


@pytest.mark.parametrize("cell", FORMULAS, ids=ids(FORMULAS))
def test_printed_formula_equals_the_function(cell):
    """At random points inside the range the printed tree gives the function's number, finite."""
    rng = seeded(cell)
    for _ in range(50):
        values = sample(cell, rng)
        printed, _ = cell.formula.evaluate(values)
        computed = cell(**values)
        assert math.isfinite(computed)
        assert printed == pytest.approx(computed, rel=1e-12, abs=1e-12)


@pytest.mark.parametrize("cell", FORMULAS, ids=ids(FORMULAS))
def test_result_does_not_depend_on_units(cell):
    """The same arguments in any unit of their kind give the same result."""
    rng = seeded(cell)
    values = sample(cell, rng)
    expected = cell.step("a", **quantities(cell, values)).result.value
    for name, symbol in cell.arguments.items():
        for unit in KINDS[UNITS[symbol.unit][0]]:
            given = quantities(cell, values)
            given[name] = Quantity(convert(values[name], symbol.unit, unit), unit)
            assert cell.step("b", **given).result.value == pytest.approx(expected, rel=1e-9, abs=1e-9)


LIBRARY_OF_UNITS = pint.UnitRegistry(autoconvert_offset_to_baseunit=True)
#: a system of units in which no base unit is that of another: metre, kilogram, second, ampere and kelvin over these
STRANGE = {"[length]": 3.1, "[mass]": 0.57, "[time]": 7.3, "[current]": 1.9, "[temperature]": 0.83}


def in_strange_units(value, unit):
    """Write a value in a coherent system of units that nobody uses, temperatures from absolute zero."""
    base = LIBRARY_OF_UNITS.Quantity(value, UNITS[unit][1]).to_base_units()
    size = math.prod(STRANGE[name] ** power for name, power in base.dimensionality.items())
    return base.to(LIBRARY_OF_UNITS.Quantity(1, UNITS[unit][1]).to_base_units().units).magnitude * size * si(base)


def si(base):
    """Factor from the library's base units (gram) to those of the SI; it scales masses only."""
    return 0.001 ** base.dimensionality.get("[mass]", 0)


@pytest.mark.parametrize("cell", FORMULAS, ids=ids(FORMULAS))
def test_units_are_printed_where_the_formula_is_true_of_quantities(cell):
    """A formula of quantities gives the same quantity in every coherent system of units; one of numbers does not."""
    rng = seeded(cell)
    for _ in range(5):
        values = sample(cell, rng)
        strange = {name: in_strange_units(value, cell.arguments[name].unit) for name, value in values.items()}
        expected = in_strange_units(cell(**values), cell.result.unit)
        try:
            held = cell.function(**strange) == pytest.approx(expected, rel=1e-9)
        except (ArithmeticError, ValueError):
            held = False
        assert cell.holds_as_quantities is held


@pytest.mark.parametrize("cell", [c for c in FORMULAS if c.holds_as_quantities], ids=lambda cell: cell.name)
def test_a_line_printed_with_units_is_an_equation_of_quantities(cell):
    """The function itself, given quantities of a units library, gives the result in its unit."""

    def root_of_squares(*parts):
        return sum((part**2 for part in parts[1:]), parts[0] ** 2) ** 0.5

    roots = {"sqrt": lambda value: value**0.5, "hypot": root_of_squares}
    function = types.FunctionType(cell.function.__code__, cell.function.__globals__ | roots)
    values = sample(cell, seeded(cell))
    given = {n: LIBRARY_OF_UNITS.Quantity(v, UNITS[cell.arguments[n].unit][1]) for n, v in values.items()}
    got = LIBRARY_OF_UNITS.Quantity(1.0) * function(**given) if cell.result.unit != "degC" else function(**given)
    assert got.to(UNITS[cell.result.unit][1]).magnitude == pytest.approx(cell(**values), rel=1e-9)


@pytest.mark.parametrize(("cell", "validity"), LIMITS, ids=ids(LIMITS))
def test_just_outside_a_range_is_refused(cell, validity):
    """One step beyond each end is refused in a whole sentence; a closed end itself is inside."""
    base = sample(cell, seeded(cell))
    for end, outward, closed in (
        (validity.above, -math.inf, False), (validity.at_least, -math.inf, True),
        (validity.below, math.inf, False), (validity.at_most, math.inf, True),
    ):  # fmt: skip
        if end is None:
            continue
        assert validity.holds({**base, validity.argument: end}) is closed
        beyond = math.nextafter(end, outward) if closed else end
        got = Quantity(beyond, cell.arguments[validity.argument].unit)
        with pytest.raises(OutsideValidity) as raised:
            cell.step("a", **quantities(cell, {**base, validity.argument: beyond}))
        assert str(raised.value) == (
            f"{cell.name}: '{validity.argument}' must be {validity.text} {got.unit} "
            f"({cell.source.citation}), got {got}."
        )


@pytest.mark.parametrize(("cell", "validity"), JOINT, ids=ids(JOINT))
def test_a_broken_condition_is_refused(cell, validity):
    """Inside every range but against a joint condition the cell refuses, and says the condition."""
    values = sample(cell, seeded(cell), wanted=validity)
    with pytest.raises(OutsideValidity) as raised:
        cell.step("a", **quantities(cell, values))
    assert str(raised.value) == f"{cell.name}: requires {validity.text} ({cell.source.citation})."


@pytest.mark.parametrize("cell", ALGORITHMS, ids=ids(ALGORITHMS))
def test_governing_equations_are_met(cell):
    """What an algorithm gives for its example satisfies every equation it prints."""
    given = cell.example()
    got = cell(**given)
    for equation in cell.equations:
        residual = equation.residual(given, got)
        assert math.isfinite(residual)
        assert residual < 1e-8, equation.latex


@pytest.mark.parametrize("name", ["peak_factor_from_table", "peak_factor_exact", "thermal_curve_duration"])
def test_governing_equations_notice_a_wrong_result(name):
    """A result off by a thousandth leaves a residual in at least one printed equation."""
    cell = registry()[name]
    given = cell.example()
    wrong = cell(**given) * 1.001
    assert max(equation.residual(given, wrong) for equation in cell.equations) > 1e-5


def names_used(path):
    """Test functions and classes of a file, each with the names and texts that it and its constants use."""
    text = path.read_text(encoding="utf-8")
    body = ast.parse(text).body
    constants = {
        n.targets[0].id: ast.get_source_segment(text, n)
        for n in body
        if isinstance(n, ast.Assign) and isinstance(n.targets[0], ast.Name)
    }
    found = {}
    for node in body:
        if isinstance(node, ast.FunctionDef | ast.ClassDef) and node.name.lower().startswith("test"):
            names = {n.id for n in ast.walk(node) if isinstance(n, ast.Name)}
            found[node.name] = names | {w for c in names & set(constants) for w in re.findall(r"\w+", constants[c])}
            found[node.name] |= {n.value for n in ast.walk(node) if isinstance(n, ast.Constant)}
    return found


@pytest.mark.parametrize("cell", registry().values(), ids=registry())
def test_checks_named_behind_a_cell_exist(cell):
    """A check is ``file::test: what it shows`` with a test that uses the cell, or a file of values and an entry of it."""
    assert cell.checks
    for check in cell.checks:
        file, _, rest = check.partition("::")
        name, _, shown = rest.partition(": ")
        assert shown, check
        path = ROOT / file
        if path.suffix == ".toml":
            entries = tomllib.loads(path.read_text(encoding="utf-8"))["value"]
            assert (name, cell.name) in {(entry["name"], entry["cell"]) for entry in entries}, check
        else:
            used = names_used(path).get(name)
            assert used is not None, check
            assert cell.name in used | BY_HELPERS, check


@pytest.mark.parametrize("cell", registry().values(), ids=registry())
def test_a_cell_says_what_it_is(cell):
    """Title, documentation and source are there, and the text stands alone."""
    assert cell.title[0].isupper()
    assert not cell.title.endswith(".")
    assert cell.documentation.endswith(".")
    assert cell.source.citation


def test_the_library_is_not_empty():
    """The tests above have something to run over."""
    assert len(FORMULAS) >= 30
    assert len(ALGORITHMS) >= 4
    assert len(JOINT) >= 3


def test_arrays_keep_their_shape():
    """Algorithm cells over arrays return arrays of the same shape and floats for floats."""
    for name, point in (("peak_factor_exact", 7.0), ("peak_factor_from_table", 7.0), ("thermal_curve_duration", 7.0)):
        cell = registry()[name]
        assert isinstance(cell(point), float)
        assert cell(np.full((2, 3), point)) == pytest.approx(np.full((2, 3), cell(point)))


def test_open_point_of_a_cell_is_text():
    """A refusal can stand in an open point as it is."""
    point = OpenPoint("a", "b: {got}", {"got": Quantity(1.0, "kA")})
    assert point.text == "b: 1 kA"

"""The printed formula, read back by an independent reader, is the formula that computes."""

import math
import random
import re

import pytest
from tests.render.latex_reader import read, read_lines
from tests.render.samples import AVERAGE, FACTOR, SAMPLES

import throughfault.cells  # noqa: F401 - declares the library
from throughfault.declare import Cell, Range, registry
from throughfault.quantities import Quantity
from throughfault.render.latex import formula_lines, worked_lines, worked_units
from throughfault.render.mathml import mathml

LIBRARY = {name: cell for name, cell in registry().items() if isinstance(cell, Cell)}
CELLS = SAMPLES | LIBRARY
POINTS = 6


def draw(cell, rng):
    """Draw arguments inside the ranges of a cell; a wide everyday span where none is declared."""
    for _ in range(2000):
        values = {}
        for name in cell.arguments:
            low, high = 0.2, 50.0
            for validity in cell.valid_for:
                if isinstance(validity, Range) and validity.argument == name:
                    low = next((v for v in (validity.above, validity.at_least) if v is not None), low)
                    high = next((v for v in (validity.below, validity.at_most) if v is not None), max(high, low + 10.0))
            values[name] = rng.uniform(low, high)
        try:
            if cell.outside(values) is None and math.isfinite(cell.function(**values)):
                return values
        except (ArithmeticError, ValueError):
            continue
    raise AssertionError(f"no valid arguments found for {cell.name}")


def letters(cell, values):
    return {cell.symbol(name).latex: value for name, value in values.items()}


@pytest.mark.parametrize("name", CELLS)
def test_every_symbol_of_a_cell_is_printed_with_a_letter_of_its_own(name):
    """Two quantities of one formula never share a letter."""
    cell = CELLS[name]
    printed = [s.latex for s in (*cell.arguments.values(), *cell.terms.values())]
    assert len(printed) == len(set(printed)), printed


@pytest.mark.parametrize("name", CELLS)
def test_printed_formula_is_the_function(name):
    """What is printed is what is computed, at random points of the range."""
    cell, rng = CELLS[name], random.Random(name)  # noqa: S311 - repeatable points
    for _ in range(POINTS):
        values = draw(cell, rng)
        assert read_lines(formula_lines(cell), letters(cell, values)) == pytest.approx(
            cell.function(**values), rel=1e-11, abs=1e-12
        )


@pytest.mark.parametrize("name", CELLS)
def test_worked_line_states_the_numbers_of_the_run(name):
    """The numbers printed give the result printed, as far as five digits carry; it ends with the result."""
    cell, rng = CELLS[name], random.Random(f"{name} worked")  # noqa: S311 - repeatable points
    rounded = {n: float(f"{v:.3g}") for n, v in draw(cell, rng).items()}
    if cell.outside(rounded) is not None:
        rounded = draw(cell, rng)
    step = cell.step("s", **{n: Quantity(v, cell.arguments[n].unit) for n, v in rounded.items()})
    for line, term in zip(worked_lines(step), [*step.terms.values(), step.result], strict=True):
        parts = re.split(r" \\quad \\text\{as \}", line)[0].split(" = ")
        assert read(parts[-1], {}) == pytest.approx(term.value, rel=5e-5, abs=1e-300)
        spread = max(abs(v) for v in (*rounded.values(), *(t.value for t in step.terms.values()), 1.0))
        assert read(parts[1], {}) == pytest.approx(term.value, rel=2e-2, abs=1e-3 * spread)


@pytest.mark.parametrize("name", CELLS)
def test_every_printed_line_can_be_set(name):
    """The converter to MathML knows every command that formulas use."""
    for line in formula_lines(CELLS[name]):
        assert mathml(line, display=True).startswith('<math display="block">')


@pytest.mark.parametrize(
    "mutant",
    [
        ("235", "253"),
        ("106000", "16000"),
        ("+ 235", "- 235"),
        ("- 1", "+ 1"),
        ("^{2}", "^{3}"),
        (r"2 \cdot", r"3 \cdot"),
    ],
)
def test_a_swapped_digit_or_sign_is_caught(mutant):
    """The comparison has teeth: each single change of the printed formula is found."""
    values = draw(AVERAGE, random.Random(1))  # noqa: S311 - repeatable points
    (line,) = formula_lines(AVERAGE)
    assert mutant[0] in line
    changed = line.replace(*mutant, 1)
    assert read_lines([changed], letters(AVERAGE, values)) != pytest.approx(AVERAGE.function(**values), rel=1e-6)


def test_the_page_of_the_closed_form():
    """The lines read as an author would write them."""
    assert formula_lines(AVERAGE) == [
        r"\theta_1 = \theta_0 + \frac{2 \cdot \left(\theta_0 + 235\right)}{\frac{106000}{J^{2} \cdot t} - 1}"
    ]
    assert formula_lines(FACTOR) == [
        r"\varphi = \arctan\left(X/R\right)",
        r"k\sqrt{2} = \left(1 + \mathrm{e}^{\frac{-\left(\varphi + \frac{\pi}{2}\right)}{X/R}} \cdot \sin\left(\varphi\right)\right) \cdot \sqrt{2}",
    ]


def test_numbers_stand_alone_where_the_formula_is_one_of_numbers():
    """A constant for numbers of degC allows no units in the line; they are told beside it, the result keeps its own."""
    step = AVERAGE.step(
        "s",
        initial_temperature=Quantity(105, "degC"),
        current_density=Quantity(80, "A/mm^2"),
        duration=Quantity(2000, "ms"),
    )
    assert worked_lines(step) == [
        (
            r"\theta_1 = 105 + \frac{2 \cdot \left(105 + 235\right)}"
            r"{\frac{106000}{80^{2} \cdot 2} - 1} = 198.39\,\mathrm{°C}"
        )
    ]
    assert worked_units(step) == [("degC", "A/mm^2", "s")]


def test_worked_line_carries_units_where_it_is_true_of_quantities():
    """Numbers of the run stand with their units, a unit under a power in brackets; none is told beside."""
    step = LIBRARY["system_impedance"].step(
        "s", system_voltage=Quantity(132, "kV"), short_circuit_power=Quantity(10, "GVA")
    )
    assert worked_lines(step) == [
        r"Z_s = \frac{\left(132\,\mathrm{kV}\right)^{2}}{10000\,\mathrm{MVA}} = 1.7424\,\Omega".replace(
            r"\Omega", r"\mathrm{\Omega }"
        )
    ]
    assert worked_units(step) == [()]


def test_units_are_told_line_by_line():
    """Each line names the units of its own numbers, pure numbers and constants none."""
    cell = LIBRARY["permitted_heating_ratio_series"]
    given = {"start_temperature": 100.0, "temperature_offset": 225.0, "permitted_temperature": 200.0}
    step = cell.step(
        "s",
        start_eddy_share=Quantity(0.1, "1"),
        **{name: Quantity(value, cell.arguments[name].unit) for name, value in given.items()},
    )
    assert worked_units(step) == [("degC", "K"), ()]


def test_choice_prints_as_cases_and_works_with_the_branch_that_applied():
    """The formula shows every branch; the worked line shows the one taken and why."""
    equal = SAMPLES["equal"]
    assert formula_lines(equal) == [r"y = \begin{cases} a & \text{if } a > b \\ b & \text{otherwise} \end{cases}"]
    step = equal.step("s", first=Quantity(1, "1"), second=Quantity(2.5, "1"))
    assert worked_lines(step) == [r"y = 2.5 = 2.5 \quad \text{as } 1 \le 2.5"]


def test_negative_numbers_stand_in_brackets():
    """A negative number under a power or after a sign is bracketed."""
    step = SAMPLES["brackets"].step("s", first=Quantity(-2, "1"), second=Quantity(3, "1"))
    assert r"\left(-2\right)^{3}" in worked_lines(step)[0]
    assert r"2.5 \times 10^{-7}" in formula_lines(SAMPLES["brackets"])[0]


def test_a_leading_sign_needs_no_bracket():
    """The sign of a first factor stands before the product; the product is bracketed where it must be."""
    line = formula_lines(SAMPLES["signs"])[0]
    assert line == r"y = \frac{-2 \cdot a}{b} - \left(-a \cdot b\right)"

"""What the terminal shows of cells and verdicts."""

import pytest
from tests.render import demo
from tests.render.samples import AVERAGE, SAMPLES

from throughfault.declare import registry
from throughfault.render.plain import formula_text, letter_text
from throughfault.render.text import cell_list, cell_text, verdict_table

LETTERS = {
    r"\theta_1": "θ_1",
    r"\hat{\imath}": "î",
    r"k\sqrt{2}": "k√2",
    r"\varphi": "φ",
    r"R_{\mathrm{p}0.2}": "R_p0.2",
    r"\Omega": "Ω",
    r"\unknown x": "unknownx",
    r"\lambda": "λ",
    r"X/R": "X/R",
    r"\dot{U}": "U̇",
}


@pytest.mark.parametrize(("latex", "text"), LETTERS.items())
def test_letters_without_latex(latex, text):
    """A symbol's letter is written as text."""
    assert letter_text(latex) == text


FORMULAS = {
    "average": ["θ_1 = θ_0 + 2·(θ_0 + 235)/(106000/(J^2·t) − 1)"],
    "factor": ["φ = arctan(X/R)", "k√2 = (1 + exp((−(φ + π/2))/(X/R))·sin(φ))·√2"],
    "ratios": ["y = 2·(X/R)^2·ℓ_eq − ℓ_eq/(X/R)·(X/R)"],
    "equal": ["y = a if a > b, otherwise b"],
    "brackets": ["y = −(a − b) − (a + b)·(−a) − a·(b·a) + (a/b)^2 + (a^b)^2 − (−a)/(a − (b − 1)) + 2.5e-07^a − (−b)"],
}


@pytest.mark.parametrize(("name", "lines"), FORMULAS.items())
def test_formulas_as_text(name, lines):
    """The author's order, every product sign, brackets by precedence."""
    assert formula_text(SAMPLES[name]) == lines


def test_a_cell_shows_everything_declared():
    """Formula, symbols with units, source with provenance, range, assumptions, checks."""
    assert cell_text(AVERAGE) == "\n".join([
        "average: Sample", "",
        "Formula", "  θ_1 = θ_0 + 2·(θ_0 + 235)/(106000/(J^2·t) − 1)", "",
        "Symbols",
        "  θ_0  °C     initial_temperature  winding temperature when the fault begins",
        f"  J    A/mm²  current_density      {AVERAGE.arguments['current_density'].description}",
        "  t    s      duration             duration of the fault",
        f"  θ_1  °C     {AVERAGE.result.term:<19}  {AVERAGE.result.description}", "",
        "Source", "  circuit theory, sample (derived)", "",
        "Range", "  duration above 0 and at most 10 s", "  J^2 t below 106000", "",
        "Assumes", "  Heat stays in the conductor.", "",
        "Checks behind it", "  none",
    ])  # fmt: skip


@pytest.mark.parametrize("name", registry())
def test_every_cell_of_the_library_can_be_shown(name):
    """No cell is beyond the terminal, and no LaTeX is left where a formula could be read."""
    shown = cell_text(registry()[name])
    assert shown.startswith(f"{name}: ")
    assert "{" not in shown or "Governing equations (LaTeX)" in shown


def test_a_cell_without_range_says_so():
    """Nothing is implied."""
    assert "  no range stated by the source" in cell_text(SAMPLES["equal"])


def test_the_list_of_cells():
    """Name, title, source; an empty library is said."""
    assert cell_list([AVERAGE]).splitlines() == [
        "Cell     Gives   Source",
        "average  Sample  circuit theory, sample",
    ]
    assert cell_list([]) == "The cell library is empty."


def test_verdict_table():
    """Checks with utilisation and verdict, verdicts by ability, unconfirmed limits counted."""
    lines = verdict_table(demo.RESULTS).splitlines()
    assert lines[0] == "BV-T1, revision A: Brackwater Vale, transformer T1"
    assert lines[4].split() == ["thermal.HV.temperature", "147.21", "°C", "at", "most", "245", "°C", "0.601", "within"]
    assert lines[7].split() == ["dynamic.route", "-", "-", "-", "not", "assessed"]
    assert lines[-2:] == ["Overall          does not withstand", "1 limit unconfirmed: recalled, see the open points."]
    assert "unconfirmed" not in verdict_table({**demo.RESULTS, "unconfirmed": {"limits": 0}})
    assert verdict_table({**demo.RESULTS, "unconfirmed": {"limits": 2}}).endswith(
        "2 limits unconfirmed: recalled, see the open points."
    )

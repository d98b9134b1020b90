"""Cells: what the declaration checks, what a step holds, what lies outside a range."""

from math import atan, exp, pi, sin, sqrt
from typing import Annotated

import pytest

from throughfault import nomenclature as nom
from throughfault.declare import Condition, Outcome, Range, Symbol, algorithm, cell, registry
from throughfault.declare import cell as declare_cell
from throughfault.declare.registry import _registry
from throughfault.errors import DeclarationError, InputError, OutsideValidity
from throughfault.quantities import Quantity
from throughfault.sources import Source

SOURCE = Source("CommonPractice", "example", "common practice")
ANGLE = Symbol("angle", r"\varphi", "rad", "angle")
Density = Annotated[float, nom.current_density]
Duration = Annotated[float, nom.duration]
Ratio = Annotated[float, nom.x_over_r]
Factor = Annotated[float, nom.peak_factor]


@pytest.fixture(autouse=True)
def _own_registry():
    before = dict(_registry)
    yield
    _registry.clear()
    _registry.update(before)


def declare(function, **options):
    return cell(**{"title": "Example", "source": SOURCE, "checks": ("this test",), **options})(function)


def factor(x_over_r: Ratio) -> Factor:
    """Offset wave."""
    phi = atan(x_over_r)
    return (1 + exp(-(phi + pi / 2) / x_over_r) * sin(phi)) * sqrt(2)


def heat(current_density: Density, duration: Duration) -> Factor:
    """Just an example."""
    J, t = current_density, duration
    return J**2 * t if J < 100 else -(0 - J**2) * t


def test_called_with_floats_it_is_the_function():
    """A cell called with floats returns the float of the function."""
    made = declare(factor, terms={"phi": ANGLE})
    assert made(14.0) == factor(14.0)
    assert made.documentation == "Offset wave."
    assert made.name == "factor"


def test_step_holds_arguments_terms_and_result_in_declared_units():
    """A step converts to the cell's units and keeps intermediate terms."""
    made = declare(heat)
    step = made.step("an.id", current_density=Quantity(80.0, "A/mm^2"), duration=Quantity(2000.0, "ms"))
    assert step.arguments["duration"] == Quantity(2.0, "s")
    assert step.entry() == {
        "id": "an.id",
        "cell": "heat",
        "arguments": {
            "current_density": {"value": 80.0, "unit": "A/mm^2"},
            "duration": {"value": 2.0, "unit": "s"},
        },
        "result": 12800.0,
        "unit": "1",
        "source": "CommonPractice, example",
    }
    angle = declare(factor, terms={"phi": ANGLE}).step("f", x_over_r=Quantity(1.0, "1")).terms["phi"]
    assert angle == Quantity(pi / 4, "rad")
    assert Outcome.of_step(step, governing_case="a case").entry()["governing_case"] == "a case"


def test_printed_and_computed_must_agree():
    """A step whose printed tree differs from the function is refused."""
    made = declare(heat)
    lying = type(made)(**{**made.__dict__, "function": lambda current_density, duration: 1.0})
    lying.function.__name__ = "heat"
    with pytest.raises(DeclarationError, match=r"^heat: the printed formula gives 200\.0, the function 1\.0\.$"):
        lying.step("id", current_density=Quantity(10.0, "A/mm^2"), duration=Quantity(2.0, "s"))


def test_all_faulty_arguments_at_once():
    """Unknown, missing and wrong arguments are all named."""
    with pytest.raises(InputError) as fault:
        declare(heat).step("id", current_densty=Quantity(1.0, "A/mm^2"), duration=Quantity(1.0, "mm"))
    assert fault.value.faults == (
        "heat: unknown argument 'current_densty' (did you mean 'current_density'?).",
        "heat: 'current_density' must be given in A/mm^2 or a unit of its kind, it is missing.",
        "heat: 'duration' must be given in s or a unit of its kind, got 1 mm.",
    )


@pytest.mark.parametrize(
    ("duration", "message"),
    [
        (0.0, "heat: 'duration' must be above 0 and at most 10 s (CommonPractice, example), got 0 s."),
        (10.5, "heat: 'duration' must be above 0 and at most 10 s (CommonPractice, example), got 10.5 s."),
        (9.0, "heat: requires J t below 800 (CommonPractice, example)."),
    ],
)
def test_outside_its_range_a_formula_says_so(duration, message):
    """Nothing is clipped outside a range or condition; the sentence names both."""
    joint = Condition("J t below 800", lambda current_density, duration: current_density * duration < 800)
    made = declare(heat, valid_for=(Range("duration", above=0, at_most=10), joint))
    with pytest.raises(OutsideValidity) as fault:
        made.step("id", current_density=Quantity(90.0, "A/mm^2"), duration=Quantity(duration, "s"))
    assert str(fault.value) == message


def steep(x_over_r: Ratio, duration: Duration) -> Factor:
    """Just an example."""
    return exp(x_over_r) / duration + sqrt(x_over_r)


def overflowing(x_over_r: Ratio, duration: Duration) -> Factor:
    """Just an example."""
    return x_over_r * x_over_r * duration


@pytest.mark.parametrize(
    ("function", "x_over_r", "duration"),
    [(steep, 1000.0, 1.0), (steep, 1.0, 0.0), (steep, -1.0, 1.0), (overflowing, 1e200, 1.0)],
)
def test_numbers_a_formula_cannot_take_are_refused(function, x_over_r, duration):
    """Overflow, division by zero and roots of negative numbers are outside the validity, said in one sentence."""
    given = {"x_over_r": Quantity(x_over_r, "1"), "duration": Quantity(duration, "s")}
    with pytest.raises(OutsideValidity) as fault:
        declare(function).step("id", **given)
    assert str(fault.value) == (
        f"{function.__name__}: the numbers given lie outside what the formula can take (CommonPractice, example), "
        f"got 'x_over_r' {given['x_over_r']}, 'duration' {given['duration']}."
    )


@pytest.mark.parametrize(
    ("given", "inside"), [({"at_least": 1.0}, (1.0, 5.0)), ({"below": 2.0}, (1.0,)), ({"at_most": 2.0}, (2.0,))]
)
def test_range_ends_are_open_or_closed(given, inside):
    """Each end of a range is open, closed or absent."""
    assert all(Range("x", **given).holds({"x": value}) for value in inside)


def no_symbol(x: float) -> Factor:
    """Example."""
    return x


def loop(x_over_r: Ratio) -> Factor:
    """Example."""
    for _ in range(3):
        x_over_r = 2 * x_over_r
    return x_over_r


def unknown_function(x_over_r: Ratio) -> Factor:
    """Example."""
    return repr(x_over_r)


def unused(x_over_r: Ratio, duration: Duration) -> Factor:
    """Example."""
    return 2 * x_over_r


def no_return(x_over_r: Ratio) -> Factor:
    """Example."""
    y = x_over_r  # noqa: F841


def swapped(x_over_r: Ratio, duration: Duration) -> Factor:
    """Example."""
    (x, t), y = (x_over_r, duration), 3
    return x * t * y


@pytest.mark.parametrize(
    ("function", "options", "message"),
    [
        (no_symbol, {}, "no_symbol: 'x' must be annotated with a symbol."),
        (loop, {}, "loop: 'for _ in range(3):\n    x_over_r = 2 * x_over_r' cannot be printed as a formula."),
        (unknown_function, {}, "unknown_function: 'repr(x_over_r)' cannot be printed as a formula."),
        (unused, {}, "unused: the formula does not use ['duration']."),
        (no_return, {}, "no_return: a formula ends with its one return."),
        (swapped, {}, "swapped: '(x, t), y = ((x_over_r, duration), 3)' cannot be printed as a formula."),
        (factor, {}, "factor: terms ['phi'] and symbols [] differ."),
        (heat, {"valid_for": (Range("time", above=0),)}, "heat: range of 'time', which is no argument."),
        (heat, {"checks": ()}, "heat: needs a docstring and the checks behind it."),
    ],
)
def test_wrong_declarations_fail_at_import(function, options, message):
    """A cell declared wrongly fails when its module is imported."""
    with pytest.raises(DeclarationError) as fault:
        declare(function, **options)
    assert str(fault.value) == message


def test_formula_is_a_plain_function():
    """A lambda has no name to print under and no symbols."""
    with pytest.raises(DeclarationError, match=r"^<lambda>: 'x' must be annotated with a symbol\.$"):
        declare(lambda x: x)


def test_a_name_is_declared_once():
    """The same name from another module is refused."""
    declare(heat)

    def other(current_density: Density, duration: Duration) -> Factor:
        """Another."""
        return current_density * duration

    other.__name__, other.__module__ = "heat", "elsewhere"
    with pytest.raises(DeclarationError, match=r"^heat: declared twice\.$"):
        declare(other)


def test_algorithms_are_registered_too():
    """An algorithm shows its equations and is called as its function."""

    @algorithm(title="t", source=SOURCE, equations=(), example=dict, valid_for=(), checks=("this test",))
    def solved(x):
        """Doc."""
        return 2 * x

    assert solved(2) == 4
    assert registry()["solved"].documentation == "Doc."


@pytest.mark.parametrize(
    ("make", "message"),
    [
        (lambda: Symbol("a b", "x", "1", ""), "symbol 'a b' must be a Python identifier."),
        (lambda: Symbol("a", "x", "Kv", ""), "symbol 'a': unknown unit 'Kv' (did you mean 'kV'?)."),
        (
            lambda: Source("IEC60076-5:2005", "4", "recalled"),
            "source 'IEC60076-5:2005' is not in the bibliography (did you mean 'IEC60076-5:2006'?).",
        ),
        (
            lambda: Source("CommonPractice", " ", "recalled"),
            "source 'CommonPractice' needs a place: clause, table, equation or page.",
        ),
        (
            lambda: Source("CommonPractice", "x", "hearsay"),
            "provenance must be one of published, recalled, derived, common practice, maker, signatory, got 'hearsay'.",
        ),
    ],
)
def test_symbols_and_sources_are_checked(make, message):
    """Symbols need a unit that exists; sources a key, a place and a provenance of the list."""
    with pytest.raises(DeclarationError) as fault:
        make()
    assert str(fault.value) == message


def test_decorator_is_public():
    """The decorator is what the package exports."""
    assert declare_cell is cell

"""First peak of the short-circuit current over its r.m.s. symmetrical value, by three routes."""

from __future__ import annotations

from itertools import pairwise
from math import atan, cos, exp, pi, sin, sqrt
from typing import Annotated, Any

import numpy as np
from numpy.typing import ArrayLike

from throughfault import nomenclature as nom
from throughfault.declare import Equation, Range, algorithm, cell
from throughfault.errors import OutsideValidity
from throughfault.numerics.wave import first_maximum
from throughfault.sources import Source
from throughfault.tables import table

__all__ = [
    "peak_factor_closed_form",
    "peak_factor_exact",
    "peak_factor_from_table",
    "peak_factor_table_range",
    "peak_short_circuit_current",
]


@cell(
    title="Peak factor, closed form",
    source=Source("IEC60076-5:2006", "4.2.3 (the same as K of IEEE C57.12.00, 7.2)", "recalled"),
    valid_for=(Range("x_over_r", above=0.0),),
    terms={"phi": nom.impedance_angle},
    checks=(
        "tests/published/peak_factor.toml::table of K: eleven factors, to the last digit",
        "tests/cells/test_peak_factor.py::test_closed_form_lies_just_below_the_exact_maximum: by less than 1 %",
    ),
)
def peak_factor_closed_form(x_over_r: Annotated[float, nom.x_over_r]) -> Annotated[float, nom.peak_factor]:
    """Envelope of the offset wave at the crest of its alternating part; up to 0.8 % below the true first maximum."""
    x = x_over_r
    phi = atan(x)
    return (1 + exp(-(phi + pi / 2) / x) * sin(phi)) * sqrt(2)


def _first_crest(x_over_r: float) -> tuple[float, float]:
    """Return phase and height of the first crest by search, without the equation that the solver uses."""
    from scipy.optimize import minimize_scalar  # noqa: PLC0415 - slow to import, and needed by the comparison only

    phi = atan(x_over_r)

    def below(theta: float) -> float:
        return -sqrt(2) * (sin(theta - phi) + sin(phi) * exp(-theta / x_over_r))

    found = minimize_scalar(below, bounds=(phi, phi + pi), method="bounded", options={"xatol": 1e-12})
    return float(found.x), -float(found.fun)


def _slope_there(given: dict[str, float], got: float) -> float:
    del got
    x = given["x_over_r"]
    phi, (phase, _) = atan(x), _first_crest(x)
    return abs(cos(phase - phi) - cos(phi) * exp(-phase / x))


def _crest(given: dict[str, float], got: float) -> float:
    return abs(_first_crest(given["x_over_r"])[1] / got - 1.0)


@algorithm(
    title="Peak factor, exact first maximum",
    source=Source("CircuitTheory", "series resistance and reactance closed at voltage zero", "derived"),
    equations=(
        Equation(r"\cos(\vartheta-\varphi)-\cos\varphi\,e^{-\vartheta R/X}=0", _slope_there),
        Equation(r"k\sqrt{2}=\sqrt{2}\left[\sin(\vartheta-\varphi)+\sin\varphi\,e^{-\vartheta R/X}\right]", _crest),
    ),
    example=lambda: {"x_over_r": 7.0},
    valid_for=("X/R at least 0; closing at voltage zero, which gives the greatest first peak",),
    checks=(
        "tests/test_every_table.py::test_iec_peak_factors_are_the_exact_first_maximum: every row, rounded to 0.01",
        "tests/cells/test_peak_factor.py::test_exact_factor_is_the_integrated_circuit: by numerical integration",
    ),
)
def peak_factor_exact(x_over_r: ArrayLike) -> Any:
    """First maximum of the wave of a series circuit closed at voltage zero; a float, or an array of the same shape."""
    peak = first_maximum(x_over_r)
    return float(peak) if peak.ndim == 0 else peak


def peak_factor_table_range() -> tuple[float, float]:
    """Return X/R of the first and of the last row of the standard's table."""
    ratios = table("iec60076_5_2006_peak_factor").column("x_over_r")
    return ratios[0], ratios[-1]


def _between_its_rows(given: dict[str, float], got: float) -> float:
    """Residual of the two-point form of the straight line through the neighbouring rows."""
    factors = table("iec60076_5_2006_peak_factor")
    rows = list(zip(factors.column("x_over_r"), factors.column("peak_factor"), strict=True))
    x = given["x_over_r"]
    (x1, k1), (x2, k2) = next((a, b) for a, b in pairwise(rows) if a[0] <= x <= b[0])
    return float(abs((got - k1) * (x2 - x1) - (k2 - k1) * (x - x1)))


@algorithm(
    title="Peak factor, table",
    source=Source("IEC60076-5:2006", "4.2.3, Table 4", "recalled"),
    equations=(
        Equation(
            r"k\sqrt{2}=(k\sqrt{2})_1+\frac{(k\sqrt{2})_2-(k\sqrt{2})_1}{(X/R)_2-(X/R)_1}\left[X/R-(X/R)_1\right]",
            _between_its_rows,
        ),
    ),
    example=lambda: {"x_over_r": 7.0},
    valid_for=("X/R at least {:g} and at most {:g}".format(*peak_factor_table_range()),),
    checks=("tests/cells/test_peak_factor.py::test_table_returns_its_rows_and_a_straight_line_between: X/R 9 halfway",),
)
def peak_factor_from_table(x_over_r: ArrayLike) -> Any:
    """Factor of the standard's table, interpolated linearly; a float, or an array of the same shape."""
    factors = table("iec60076_5_2006_peak_factor")
    x = np.asarray(x_over_r, dtype=np.float64)
    least, greatest = peak_factor_table_range()
    if not bool(np.all((x >= least) & (x <= greatest))):
        ends = f"at least {least:g} and at most {greatest:g}"
        raise OutsideValidity(f"peak_factor_from_table: 'x_over_r' must be {ends} ({factors.source.citation}).")
    factor = np.asarray(np.interp(x, factors.column("x_over_r"), factors.column("peak_factor")))
    return float(factor) if factor.ndim == 0 else factor


@cell(
    title="First peak of the short-circuit current",
    source=Source("CircuitTheory", "factor times r.m.s. current (as in IEC 60076-5:2006, 4.2.3)", "derived"),
    valid_for=(Range("symmetrical_current", at_least=0.0), Range("peak_factor", at_least=sqrt(2), at_most=2 * sqrt(2))),
    checks=(
        "tests/published/fault_current.toml::40 MVA unit at 132 kV: 2.55 times 1.682 kA",
        "tests/published/peak_factor.toml::3.75 MVA unit of a textbook: 2930 A",
    ),
)
def peak_short_circuit_current(
    symmetrical_current: Annotated[float, nom.symmetrical_current],
    peak_factor: Annotated[float, nom.peak_factor],
) -> Annotated[float, nom.peak_current]:
    """Greatest first peak of the phase in which the short circuit begins at voltage zero."""
    current, factor = symmetrical_current, peak_factor
    return current * factor

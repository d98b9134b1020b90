"""Duration of through-fault currents: the thermal and the mechanical part of the curves."""

from __future__ import annotations

from typing import Annotated, Any

import numpy as np
from numpy.typing import ArrayLike

from throughfault import nomenclature as nom
from throughfault.declare import Equation, Range, algorithm, cell
from throughfault.errors import OutsideValidity
from throughfault.sources import Source
from throughfault.tables import table

GUIDE = Source("IEEEC57.109-2018", "4", "recalled")
IMPEDANCE = Range("fault_impedance", above=0.0, at_most=1.0)
SHARE = Range("mechanical_share", above=0.0, at_most=100.0)
CORNERS = "tests/published/through_fault.toml::corner points: of categories II, III and IV"
CURVE = "tests/cells/test_through_fault.py"
AT_GREATEST = f"{CURVE}::test_two_seconds_at_the_greatest_current: for any impedance"


@cell(
    title="Duration by a constant heat integral",
    source=Source("IEEEC57.12.00-2015", "7.1.3", "recalled"),
    valid_for=(Range("current_multiple", at_least=4.75),),
    checks=("tests/published/through_fault.toml::constant heat integral: 25, 35 and 40 times",),
)
def thermal_duration(current_multiple: Annotated[float, nom.current_multiple]) -> Annotated[float, nom.duration]:
    """Upper part of the thermal curve; below it the curve allows more."""
    N = current_multiple
    return 1250 / N**2


@cell(
    title="Duration by the mechanical part of the curve",
    source=GUIDE,
    valid_for=(Range("current_multiple", above=0.0), IMPEDANCE),
    checks=(AT_GREATEST,),
)
def mechanical_duration(
    current_multiple: Annotated[float, nom.current_multiple], fault_impedance: Annotated[float, nom.fault_impedance]
) -> Annotated[float, nom.duration]:
    """Two seconds at the greatest possible current, and the same product of squared current and time below it."""
    N, Z = current_multiple, fault_impedance
    return 2 / (Z**2 * N**2)


@cell(
    title="Current at the lower end of the mechanical part",
    source=GUIDE,
    valid_for=(SHARE, IMPEDANCE),
    checks=(CORNERS,),
)
def corner_current(
    mechanical_share: Annotated[float, nom.mechanical_share], fault_impedance: Annotated[float, nom.fault_impedance]
) -> Annotated[float, nom.current_multiple]:
    """Multiple of the base current from which the mechanical part holds."""
    s, Z = mechanical_share, fault_impedance
    return s / 100 / Z


@cell(
    title="Duration at the lower end of the mechanical part",
    source=GUIDE,
    valid_for=(SHARE,),
    checks=(CORNERS,),
)
def corner_duration(mechanical_share: Annotated[float, nom.mechanical_share]) -> Annotated[float, nom.duration]:
    """Independent of the impedance."""
    s = mechanical_share
    return 2 / (s / 100) ** 2


@cell(
    title="Duration of the thermal part at the lower end of the mechanical part",
    source=GUIDE,
    valid_for=(SHARE, IMPEDANCE),
    checks=(CORNERS,),
)
def corner_thermal_duration(
    mechanical_share: Annotated[float, nom.mechanical_share], fault_impedance: Annotated[float, nom.fault_impedance]
) -> Annotated[float, nom.duration]:
    """Where the two parts are joined upright."""
    s, Z = mechanical_share, fault_impedance
    return 1250 * Z**2 / (s / 100) ** 2


@cell(
    title="Impedance that bounds the through-fault current",
    source=Source("IEEEC57.109-2018", "4, from the greatest current of the duty", "derived"),
    valid_for=(Range("current_multiple", at_least=1.0),),
    checks=(AT_GREATEST,),
)
def fault_impedance(
    current_multiple: Annotated[float, nom.current_multiple],
) -> Annotated[float, nom.fault_impedance]:
    """Take the largest multiple of the duty over all windings brought out, transformer and system together."""
    N = current_multiple
    return 1 / N


def _points() -> tuple[tuple[float, ...], tuple[float, ...]]:
    curve = table("ieee_c57_109_2018_thermal_curve")
    return curve.column("multiple"), curve.column("duration")


def _on_the_line(given: dict[str, float], got: float) -> float:
    """Residual of the straight line between the neighbouring points on logarithmic axes."""
    multiples, durations = (np.log(points) for points in _points())
    place = int(np.searchsorted(multiples, np.log(given["current_multiple"])))
    across = (np.log(given["current_multiple"]) - multiples[place - 1]) * (durations[place] - durations[place - 1])
    along = (np.log(got) - durations[place - 1]) * (multiples[place] - multiples[place - 1])
    return float(abs(across - along))


@algorithm(
    title="Duration by the thermal curve",
    source=Source("IEEEC57.109-2018", "thermal duration curve", "recalled"),
    equations=(
        Equation(r"\frac{\log t-\log t_1}{\log t_2-\log t_1}=\frac{\log N-\log N_1}{\log N_2-\log N_1}", _on_the_line),
    ),
    example=lambda: {"current_multiple": 8.0},
    valid_for=("current at least 2 and at most 25 times base",),
    checks=(
        f"{CURVE}::test_curve_returns_its_points: falling between them",
        f"{CURVE}::test_upper_curve_is_the_constant_integral: from 4.75 times on",
    ),
)
def thermal_curve_duration(current_multiple: ArrayLike) -> Any:
    """Duration in s, straight between the tabled points on logarithmic axes; a float, or an array of the same shape."""
    multiples, durations = _points()
    N = np.asarray(current_multiple, dtype=np.float64)
    if not bool(np.all((multiples[0] <= N) & (multiples[-1] >= N))):
        ends = f"at least {multiples[0]:g} and at most {multiples[-1]:g}"
        raise OutsideValidity(f"thermal_curve_duration: 'current_multiple' must be {ends} (IEEEC57.109-2018).")
    made = np.exp(np.interp(np.log(N), np.log(multiples), np.log(durations)))
    return float(made) if made.ndim == 0 else made

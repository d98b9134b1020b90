"""Through-fault duration curve of a unit, with its own points."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from throughfault.cells.through_fault import (
    corner_current,
    corner_duration,
    corner_thermal_duration,
    fault_impedance,
    mechanical_duration,
    thermal_curve_duration,
    thermal_duration,
)
from throughfault.declare import Fragment, Outcome, Step
from throughfault.errors import OutsideValidity
from throughfault.numerics.case import Floats
from throughfault.quantities import Quantity
from throughfault.tables import table
from throughfault.workbook.assess.rules import Tabled, category_of
from throughfault.workbook.assess.rules_ieee import IEEEC57_12_00_2015
from throughfault.workbook.inputs import Unit

__all__ = ["OwnPoint", "ThroughFault", "assess_through_fault"]

POINTS = 60


@dataclass(frozen=True, slots=True)
class OwnPoint:
    """Largest current of a winding over its base current, and the duration it is assessed for, s."""

    winding: str
    multiple: float
    duration: float


@dataclass(frozen=True)
class ThroughFault:
    """Curve of duration (s) against current over base current.

    Attributes
    ----------
    category
        IEEE category, None below the first.
    thermal
        (multiples, durations) of the thermal part.
    mechanical
        The same of the mechanical part for frequent faults, upright joint included; empty where there is none.
    frequent_above
        Faults in the life of the unit above which the mechanical part holds; None where it always or never holds.
    points
        The unit's own.
    reason
        Why there is no mechanical part, or no curve.
    """

    category: str | None
    thermal: tuple[Floats, Floats]
    mechanical: tuple[Floats, Floats] | None = None
    frequent_above: float | None = None
    points: tuple[OwnPoint, ...] = ()
    reason: str = ""
    fragment: Fragment = field(default_factory=Fragment)


def _thermal(category: str | None, greatest: float) -> tuple[Floats, Floats]:
    """Return the thermal part: the tabled points, and on by the constant heat integral to the category's end."""
    rows = table("ieee_c57_109_2018_thermal_curve").column("multiple")
    multiples = np.unique(np.concatenate([np.geomspace(rows[0], rows[-1], POINTS), rows]))
    multiples = np.clip(multiples, rows[0], rows[-1])  # the ends of a geometric row are rounded
    durations = thermal_curve_duration(multiples)
    ends = {row["category"]: row["multiple_to"] for row in table("ieee_c57_109_2018_category").rows}
    last = None if category is None else ends[category] or greatest
    if last is not None and last > rows[-1]:
        multiples = np.append(multiples, last)
        durations = np.append(durations, thermal_duration(last))
    return multiples, durations


def assess_through_fault(
    unit: Unit, multiples: Mapping[str, float | None], durations: Mapping[str, Tabled]
) -> ThroughFault:
    """Draw the curve of the unit's IEEE category; under another standard it stands for comparison only."""
    category = category_of(unit, IEEEC57_12_00_2015).name
    known = {name: m for name, m in multiples.items() if m is not None and not unit.windings[name].stabilising}
    points = tuple(
        OwnPoint(name, m, d)
        for name, m in multiples.items()
        if m is not None and (d := durations[name].value) is not None
    )
    greatest = max(known.values(), default=0.0)
    thermal = _thermal(category, greatest)
    shares = {row["category"]: row for row in table("ieee_c57_109_2018_category").rows}
    if category is None or not known:
        why = "the rated power lies below the first category" if category is None else "no current is assessed"
        return ThroughFault(category, thermal, points=points, reason=why)
    if shares[category]["mechanical_from"] is None:
        why = "the category has one curve, without a mechanical part"
        return ThroughFault(category, thermal, points=points, reason=why)
    return _with_mechanical(category, shares[category], greatest, thermal, points)


def _with_mechanical(
    category: str, row: dict[str, float], greatest: float, thermal: tuple[Floats, Floats], points: tuple[OwnPoint, ...]
) -> ThroughFault:
    steps = _corner_steps(Quantity(row["mechanical_from"], "%"), Quantity(greatest, "1"))
    if isinstance(steps, str):
        return ThroughFault(category, thermal, points=points, reason=steps)
    impedance, lowest, longest, joint = (step.result.value for step in steps)
    currents = np.geomspace(lowest, greatest, POINTS)
    durations = np.asarray([mechanical_duration(float(n), impedance) for n in currents])
    upright = thermal_curve_duration(lowest) if _on_curve(lowest) else joint
    mechanical = (np.append(lowest, currents), np.append(max(upright, longest), durations))
    quantities = tuple(Outcome.of_step(step) for step in steps)
    above = row["infrequent_up_to"] or None
    return ThroughFault(category, thermal, mechanical, above, points, fragment=Fragment(quantities, steps))


def _on_curve(multiple: float) -> bool:
    rows = table("ieee_c57_109_2018_thermal_curve").column("multiple")
    return bool(rows[0] <= multiple <= rows[-1])


def _corner_steps(share: Quantity, greatest: Quantity) -> tuple[Step, ...] | str:
    try:
        bound = fault_impedance.step("through_fault.impedance", current_multiple=greatest)
        return (
            bound,
            corner_current.step("through_fault.corner_current", mechanical_share=share, fault_impedance=bound.result),
            corner_duration.step("through_fault.corner_duration", mechanical_share=share),
            corner_thermal_duration.step(
                "through_fault.corner_thermal_duration", mechanical_share=share, fault_impedance=bound.result
            ),
        )
    except OutsideValidity as outside:
        return str(outside)

"""What is unusual but possible in a unit file: open points, not faults."""

from __future__ import annotations

import math
from collections.abc import Iterator

from throughfault.declare import OpenPoint
from throughfault.errors import did_you_mean
from throughfault.quantities import Quantity
from throughfault.workbook.inputs.open_points_design import DESIGN_POINTS
from throughfault.workbook.inputs.refused_results import KINDS_OF_RESULTS, kind_of_result
from throughfault.workbook.inputs.unit import Unit

__all__ = ["open_points"]

#: common practice: outside these an X/R is more likely a slip of the pen than a transformer or a network
USUAL_X_OVER_R = (0.5, 100.0)
USUAL_SOURCE_X_OVER_R = (1.0, 60.0)
USUAL_VOLTAGE_DIFFERENCE = 0.20


def open_points(unit: Unit) -> tuple[OpenPoint, ...]:
    """Return the open points of the inputs alone; comparisons with a standard's tables are made elsewhere."""
    points = [point for look in _POINTS for point in look(unit)]
    if unit.design is not None:
        points += [point for look in DESIGN_POINTS for point in look(unit, unit.design)]
    return tuple(points)


def tapping_above_highest_voltage(unit: Unit) -> Iterator[OpenPoint]:
    """Compare tappings with Um."""
    for name, winding in unit.windings.items():
        for tapping, voltage in winding.tappings.items():
            highest = winding.highest_voltage
            if highest is not None and voltage.to("V") > highest.to("V"):
                yield OpenPoint(
                    f"input.{name}.{tapping}.above_highest_voltage",
                    f"Tapping '{tapping}' of {name}, {{voltage}}, is above the highest voltage for equipment, "
                    "{highest}.",
                    {"voltage": voltage, "highest": highest},
                    "IEC 60076-3",
                )


def tapping_against_its_name(unit: Unit) -> Iterator[OpenPoint]:
    """Find a plus tapping below, or a minus tapping above the principal."""
    for name, winding in unit.windings.items():
        for tapping, voltage in winding.tappings.items():
            higher = voltage.to("V") - winding.rated_voltage.to("V")
            wrong = (tapping.startswith("plus") and higher < 0.0) or (tapping.startswith("minus") and higher > 0.0)
            if wrong:
                yield OpenPoint(
                    f"input.{name}.{tapping}.against_its_name",
                    f"Tapping '{tapping}' of {name} is {{voltage}}, on the other side of the principal tapping, "
                    "{principal}, than its name says.",
                    {"voltage": voltage, "principal": winding.rated_voltage},
                    "IEC 60076-1",
                )


def missing_rows(unit: Unit) -> Iterator[OpenPoint]:
    """Find pairs and tappings without an impedance row; the cases that need them are not assessed."""
    for first, second in unit.pairs:
        for tapping in unit.tappings:
            if unit.impedance(first, second, tapping) is None:
                yield OpenPoint(
                    f"input.{first}-{second}.{tapping}.no_impedance",
                    f"No impedance of {first} and {second} at tapping '{tapping}' is given; "
                    "the fault cases that need it are not assessed.",
                )


def resistance_of_rows(unit: Unit) -> Iterator[OpenPoint]:
    """Find rows without a resistance, or with an unusual X/R."""
    for row in unit.impedances:
        where = f"input.{'-'.join(row.between)}.{row.tapping}"
        pair = f"{row.between[0]} and {row.between[1]} at tapping '{row.tapping}'"
        if row.load_loss is None and row.resistance is None:
            text = f"{pair} have neither load loss nor resistance; the resistance is taken as zero."
            yield OpenPoint(f"{where}.no_resistance", text)
            continue
        impedance, resistance = row.impedance.to("%"), row.resistance_value.to("%")
        ratio = math.sqrt(impedance**2 - resistance**2) / resistance
        if not USUAL_X_OVER_R[0] <= ratio <= USUAL_X_OVER_R[1]:
            text = f"X/R of {pair} is {{ratio}}; usual are {{least}} to {{most}}."
            yield OpenPoint(f"{where}.x_over_r", text, _ratios(ratio, USUAL_X_OVER_R), "common practice")


def sources(unit: Unit) -> Iterator[OpenPoint]:
    """Find unusual sources, and a unit without any."""
    for name, source in unit.system.terminals.items():
        rated = unit.windings[name].rated_voltage
        if source.x_over_r is not None and not USUAL_SOURCE_X_OVER_R[0] <= source.x_over_r <= USUAL_SOURCE_X_OVER_R[1]:
            text = f"X/R of the network at {name} is {{ratio}}; usual are {{least}} to {{most}}."
            values = _ratios(source.x_over_r, USUAL_SOURCE_X_OVER_R)
            yield OpenPoint(f"input.system.{name}.x_over_r", text, values, "common practice")
        if source.voltage is not None and abs(source.voltage.to("V") / rated.to("V") - 1.0) > USUAL_VOLTAGE_DIFFERENCE:
            text = f"The network at {name} is stated at {{voltage}}, its terminals are rated {{rated}}."
            yield OpenPoint(f"input.system.{name}.voltage", text, {"voltage": source.voltage, "rated": rated})
    if all(source.short_circuit_power is None for source in unit.system.terminals.values()):
        text = "No terminal has a network behind it ([system.<winding>] with short_circuit_power)."
        yield OpenPoint("input.system.no_source", text)


def limits_of_unknown_results(unit: Unit) -> Iterator[OpenPoint]:
    """Find limits under ids of which the kit knows no kind of quantity."""
    for name, limit in unit.limits.items():
        if kind_of_result(name) is None:
            near = did_you_mean(name.rsplit(".", 1)[-1], KINDS_OF_RESULTS)
            text = f"limits.'{name}': the kit knows no result that ends so{near}; the limit decides nothing."
            yield OpenPoint(f"input.limits.{name}", text, clause=limit.source)


def tap_changer_without_tappings(unit: Unit) -> Iterator[OpenPoint]:
    """Find a tap changer in a unit without tappings."""
    if unit.tap_changer is not None and len(unit.tappings) == 1:
        yield OpenPoint("input.tap_changer.no_tappings", "A tap changer is given, but no winding has tappings.")


def _ratios(ratio: float, usual: tuple[float, float]) -> dict[str, Quantity]:
    return {"ratio": Quantity(ratio, "1"), "least": Quantity(usual[0], "1"), "most": Quantity(usual[1], "1")}


_POINTS = (
    tapping_above_highest_voltage,
    tapping_against_its_name,
    missing_rows,
    resistance_of_rows,
    sources,
    limits_of_unknown_results,
    tap_changer_without_tappings,
)

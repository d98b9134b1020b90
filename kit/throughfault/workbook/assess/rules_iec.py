"""The rule set of IEC 60076-5:2006."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from throughfault.cells.peak_factor import peak_factor_exact, peak_factor_from_table, peak_factor_table_range
from throughfault.declare import Limit
from throughfault.tables import Table, table
from throughfault.workbook.assess.rules import (
    Category,
    LimitOrReason,
    Neglect,
    PeakFactor,
    Tabled,
    ThermalMethod,
    bank_power,
    every_combination,
)

__all__ = ["IEC60076_5_2006", "Iec60076Part5"]

SYSTEM_COLUMNS = {"european": "european", "north american": "north_american"}


def _for_power(rows: Table, power: float) -> dict[str, Any] | None:
    """Return the first row whose upper end is not exceeded; None below the first row. Power in MVA."""
    kva = power * 1000.0
    if kva < rows.rows[0]["from"]:
        return None
    return next(row for row in rows.rows if row["to"] is None or kva <= row["to"])


@dataclass(frozen=True)
class Iec60076Part5:
    """Power transformers, part 5: ability to withstand short circuit."""

    key: str = "IEC60076-5:2006"
    title: str = "IEC 60076-5"
    edition: str = "2006"
    thermal_method: ThermalMethod = "average temperature"
    start_is: str = "mean winding temperature"
    base_power_is_self_cooled: bool = False
    immersions: tuple[str, ...] = ("oil", "dry")

    def category(self, power: float, phases: int, *, bank: bool) -> Category:
        """Return the category; units of a bank take the bank's power."""
        rows = table("iec60076_5_2006_category")
        row = _for_power(rows, bank_power(power, phases, bank=bank))
        source = rows.source
        if row is None:
            return Category(None, source.citation, source.provenance, "the rated power lies below the first category")
        return Category(row["category"], source.citation, source.provenance)

    def minimum_impedance(self, power: float) -> Tabled:
        """Return the minimum impedance of the principal tapping; above the last border the value must be exceeded."""
        rows = table("iec60076_5_2006_minimum_impedance")
        row = _for_power(rows, power)
        if row is None:
            return Tabled.of(rows, None, "%", "the rated power lies below the first row of the table")
        note = "by agreement; more than this value" if row["to"] is None else ""
        return Tabled.of(rows, row["impedance"], "%", note, row["confidence"])

    def usual_tolerance(self, impedance: float, *, principal: bool, first_pair: bool) -> Tabled:
        """Return the tolerance by the size of the impedance; the narrow one is the first pair's, principal tapping."""
        rows = table("iec60076_1_2011_impedance_tolerance")
        row = next(row for row in rows.rows if row["below"] is None or impedance < row["below"])
        return Tabled.of(rows, row["tolerance" if principal and first_pair else "tolerance_elsewhere"], "%")

    def system_short_circuit_power(self, highest_voltage: float, column: str | None) -> Tabled:
        """Return the tabled power; the European column unless the North American one is named."""
        rows = table("iec60076_5_2006_system_power")
        name = SYSTEM_COLUMNS[column or "european"]
        for row in rows.rows:
            if row["highest_voltage_from"] <= highest_voltage <= row["highest_voltage_to"]:
                return Tabled.of(rows, row[name], "MVA", f"column for current {column or 'european'} practice")
        return Tabled.of(rows, None, "MVA", "the table has no row for the highest voltage of the winding")

    def source_neglected(self, category: str | None, ratio: float, *, two_winding: bool = True) -> Neglect:
        """Leave the system out of two separate windings in category I up to the tabled share only."""
        rows = table("iec60076_5_2006_source")
        row, source = rows.rows[0], rows.source
        if not two_winding:
            left_out, reason = (
                False,
                "the system impedance counts: only units with two separate windings may leave it out",
            )
        elif category != row["neglected_in"]:
            left_out, reason = False, "the system impedance counts in this category"
        elif ratio * 100.0 > row["neglected_up_to"]:
            left_out, reason = False, "the share of the system impedance is too large"
        else:
            left_out, reason = True, "the system impedance is a small share of the transformer's, in category I"
        return Neglect(neglected=left_out, reason=reason, source=source.citation, provenance=source.provenance)

    def x0_over_x1_scan(self) -> tuple[Tabled, ...]:
        """Return both ends of the range that the standard gives."""
        rows = table("iec60076_5_2006_source")
        row = rows.rows[0]
        ends = (row["x0_over_x1_least"], row["x0_over_x1_greatest"])
        return tuple(Tabled.of(rows, end, "1", "one end of the range", row["x0_over_x1_confidence"]) for end in ends)

    def infeeds(self, sources: Sequence[str], powers: Mapping[str, float], at: str) -> tuple[tuple[str, ...], ...]:  # noqa: ARG002
        """Return each source alone and all together."""
        return every_combination(sources)

    def required_by_standard(self, fault: str, *, two_winding: bool, phases: int = 3) -> bool:
        """Require the three-phase fault alone of two separate windings on a three-phase network, else every kind."""
        return not (two_winding and phases == 3) or fault == "3ph"

    def peak_factor(self, x_over_r: float, category: str | None, given: float | None = None) -> PeakFactor:
        """Take the table between its ends, the exact first maximum below, the default above unless one is given."""
        least, greatest = peak_factor_table_range()
        if least <= x_over_r <= greatest:
            made = peak_factor_from_table
            return PeakFactor(made(x_over_r), "table, interpolated", made.source.citation, made.source.provenance)
        if x_over_r < least:
            exact = peak_factor_exact
            return PeakFactor(exact(x_over_r), "exact first maximum", exact.source.citation, exact.source.provenance)
        if given is not None:
            return PeakFactor(given, "as given for the system", "unit file, system.peak_factor", "maker")
        defaults = table("iec60076_5_2006_peak_factor_default")
        cite, known = defaults.source.citation, defaults.source.provenance
        if category is None:
            return PeakFactor(None, "no category, so no default factor", cite, known)
        return PeakFactor(defaults.row(category=category)["peak_factor"], "default of the category", cite, known)

    def current_ceiling(
        self, category: str | None, power: float, phases: int, low_voltage: float, *, two_winding: bool = True
    ) -> Tabled:
        """Return None: the standard sets no ceiling."""
        del category, power, phases, low_voltage, two_winding
        return Tabled.of(table("iec60076_5_2006_duration"), None, "1", "the standard sets no ceiling on the current")

    def fault_duration(self, category: str | None, multiple: float | None) -> Tabled:  # noqa: ARG002
        """Return the standard duration; a shorter one for high currents needs an agreement, so it is never assumed."""
        rows = table("iec60076_5_2006_duration")
        row = rows.rows[0]
        may = multiple is not None and math.isfinite(multiple) and multiple > row["shorter_above"]
        return Tabled.of(rows, row["duration"], "s", "a shorter duration may be agreed" if may else "")

    def start_temperature(self, immersion: str) -> Tabled:  # noqa: ARG002 - same for both
        """Return None: ambient and rise belong to the unit."""
        source = "IEC60076-5:2006, 4.1.5"
        return Tabled(None, "degC", source, "recalled", "H", "ambient and rated rise belong to the unit")

    def reference_temperature(self, immersion: str) -> Tabled:
        """Return the reference temperature of liquid-immersed units."""
        rows = table("iec60076_1_2011_reference_temperature")
        if immersion != rows.rows[0]["immersion"]:
            return Tabled.of(rows, None, "degC", "the reference temperature of dry-type units is not tabled")
        return Tabled.of(rows, rows.rows[0]["temperature"], "degC")

    def temperature_limit(self, material: str, immersion: str, thermal_class: float | None) -> LimitOrReason:
        """Return the limit of the average winding temperature; oil without a class counts as its only class."""
        rows = table("iec60076_5_2006_temperature_limit")
        known = [row for row in rows.rows if row["immersion"] == immersion]
        if thermal_class is None and len(known) == 1:
            thermal_class = float(known[0]["thermal_class"])
        if thermal_class is None:
            return LimitOrReason(None, "the limit depends on the thermal class", "rating.thermal_class")
        row = next((row for row in known if float(row["thermal_class"]) == thermal_class), None)
        if row is None:
            return LimitOrReason(None, "the table has no row for this class", "rating.thermal_class")
        source = rows.source
        confidence = row[f"{material}_confidence"]
        return LimitOrReason(Limit(row[material], "degC", "at most", source.citation, source.provenance, confidence))


IEC60076_5_2006 = Iec60076Part5()

"""The rule set of IEEE C57.12.00-2015 with the test code C57.12.90."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from throughfault.cells.peak_factor import peak_factor_closed_form
from throughfault.declare import Limit
from throughfault.tables import table
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

__all__ = ["IEEEC57_12_00_2015", "IeeeC57Part12"]

WITHOUT_RESISTANCE = 2.0 * math.sqrt(2.0)


@dataclass(frozen=True)
class IeeeC57Part12:
    """General requirements for liquid-immersed transformers."""

    key: str = "IEEEC57.12.00-2015"
    title: str = "IEEE C57.12.00"
    edition: str = "2015"
    thermal_method: ThermalMethod = "all heat stored"
    start_is: str = "hottest-spot temperature"
    base_power_is_self_cooled: bool = True
    immersions: tuple[str, ...] = ("oil",)

    def category(self, power: float, phases: int, *, bank: bool) -> Category:
        """Return the category; a bank counts as a three-phase unit of its own power."""
        rows = table("ieee_c57_12_90_draft_category")
        cite, known = rows.source.citation, rows.source.provenance
        kva = bank_power(power, phases, bank=bank) * 1000.0
        column = "1" if phases == 1 and not bank else "3"
        fitting = [row for row in rows.rows if row["phases"] == column]
        if kva < fitting[0]["from"]:
            return Category(None, cite, known, "the rated power lies below the first category")
        row = next(row for row in fitting if row["to"] is None or kva <= row["to"])
        return Category(row["category"], cite, known)

    def minimum_impedance(self, power: float) -> Tabled:  # noqa: ARG002
        """Return None: the standard sets none."""
        why = "the standard sets no minimum impedance"
        return Tabled(None, "%", "IEEEC57.12.00-2015, 7.1", "recalled", "H", why)

    def usual_tolerance(self, impedance: float, *, principal: bool, first_pair: bool) -> Tabled:  # noqa: ARG002
        """Return None: the tolerance of the other standard is not carried over."""
        return Tabled(None, "%", "IEEEC57.12.00-2015", "recalled", "M", "no tolerance of this standard is tabled")

    def system_short_circuit_power(self, highest_voltage: float, column: str | None) -> Tabled:  # noqa: ARG002 - one column
        """Return the default power; the first row holds for every lower voltage."""
        rows = table("ieee_c57_12_00_2015_system_power")
        if highest_voltage <= rows.rows[0]["highest_voltage"]:
            return Tabled.of(rows, rows.rows[0]["power"], "MVA")
        for row in rows.rows:
            if row["highest_voltage"] == highest_voltage:
                return Tabled.of(rows, row["power"], "MVA")
        return Tabled.of(rows, None, "MVA", "the table has no row for the highest voltage of the winding")

    def source_neglected(self, category: str | None, ratio: float, *, two_winding: bool = True) -> Neglect:  # noqa: ARG002 - by category alone
        """Take the transformer alone in the lower categories."""
        rows = table("ieee_c57_12_00_2015_source")
        cite, known = rows.source.citation, rows.source.provenance
        if category in rows.rows[0]["neglected_in"].split():
            return Neglect(
                neglected=True, reason="the transformer alone counts in this category", source=cite, provenance=known
            )
        return Neglect(
            neglected=False, reason="the system impedance counts in this category", source=cite, provenance=known
        )

    def x0_over_x1_scan(self) -> tuple[Tabled, ...]:
        """Return the one default."""
        rows = table("ieee_c57_12_00_2015_source")
        return (Tabled.of(rows, rows.rows[0]["x0_over_x1"], "1", "default"),)

    def infeeds(self, sources: Sequence[str], powers: Mapping[str, float], at: str) -> tuple[tuple[str, ...], ...]:
        """Return at most two feeding terminals, each large enough, and the faulted terminal's own system."""
        row = table("ieee_c57_12_00_2015_source").rows[0]
        least = row["infeed_share"] / 100.0 * max(powers.values())
        able = [name for name in sources if name != at and powers[name] > least]
        remote = every_combination(able, int(row["infeed_count"]))
        own = (at,) if at in sources else ()
        order = {name: place for place, name in enumerate(sources)}
        with_own = tuple(tuple(sorted((*own, *names), key=order.__getitem__)) for names in remote) if own else ()
        return (*remote, *((own,) if own else ()), *with_own)

    def required_by_standard(self, fault: str, *, two_winding: bool, phases: int = 3) -> bool:  # noqa: ARG002
        """Require every kind of fault."""
        return True

    def peak_factor(self, x_over_r: float, category: str | None, given: float | None = None) -> PeakFactor:  # noqa: ARG002
        """Take the closed form."""
        closed = peak_factor_closed_form
        ends = {0.0: math.sqrt(2.0), math.inf: WITHOUT_RESISTANCE}  # the closed form's own limits
        value = ends[x_over_r] if x_over_r in ends else closed(x_over_r)
        return PeakFactor(value, "closed form", "IEEEC57.12.00-2015, 7.2", "recalled")

    def current_ceiling(
        self, category: str | None, power: float, phases: int, low_voltage: float, *, two_winding: bool = True
    ) -> Tabled:
        """Return the ceiling of a category I distribution unit with two separate windings."""
        rows = table("ieee_c57_12_00_2015_current_ceiling")
        if category != "I" or not two_winding or low_voltage * 1000.0 > max(rows.column("secondary_up_to")):
            why = "ceilings hold for two-winding category I units with a low-voltage secondary only"
            return Tabled.of(rows, None, "1", why)
        kva = power * 1000.0
        for row in rows.rows:
            if row["phases"] == str(phases) and row["from"] <= kva <= row["to"]:
                return Tabled.of(rows, row["ceiling"], "1")
        return Tabled.of(rows, None, "1", "the table has no row for this power")

    def fault_duration(self, category: str | None, multiple: float | None) -> Tabled:
        """Return the duration; category I above the tabled multiple has a constant heat integral."""
        rows = table("ieee_c57_12_00_2015_duration")
        row = rows.rows[0]
        if category == "I" and multiple is not None and multiple > row["shorter_above"]:
            return Tabled.of(rows, row["heat_integral"] / multiple**2, "s", "shorter: constant heat integral")
        return Tabled.of(rows, row["duration"], "s")

    def start_temperature(self, immersion: str) -> Tabled:
        """Return the hottest spot of the higher rated rise: the lower one must be given to be used."""
        rows = table("ieee_c57_12_00_2015_start_temperature")
        if immersion != "oil":
            return Tabled.of(rows, None, "degC", "the defaults hold for liquid-immersed units")
        return Tabled.of(rows, max(rows.column("temperature")), "degC", "default for the higher rated rise")

    def reference_temperature(self, immersion: str) -> Tabled:
        """Return the reference temperature of the higher rated rise, which gives the greater eddy loss."""
        rows = table("ieee_c57_12_00_2015_start_temperature")
        if immersion != "oil":
            return Tabled.of(rows, None, "degC", "the reference temperature of dry-type units is not tabled")
        return Tabled.of(rows, max(rows.column("reference_temperature")), "degC", "for the higher rated rise")

    def temperature_limit(self, material: str, immersion: str, thermal_class: float | None) -> LimitOrReason:
        """Return the limit of the conductor temperature; dry-type by the companion standard's classes."""
        if immersion == "oil":
            rows = table("ieee_c57_12_00_2015_temperature_limit")
            value = rows.row(material=material)["temperature"]
            return LimitOrReason(Limit(value, "degC", "at most", rows.source.citation, rows.source.provenance))
        rows = table("ieee_c57_12_01_temperature_limit")
        if thermal_class is None:
            return LimitOrReason(None, "the limit depends on the thermal class", "rating.thermal_class")
        row = next((row for row in rows.rows if float(row["thermal_class"]) == thermal_class), None)
        if row is None:
            return LimitOrReason(None, "the table has no row for this class", "rating.thermal_class")
        source = rows.source
        limit = Limit(
            row["temperature"], "degC", "at most", source.citation, source.provenance, rows.header["confidence"]
        )
        note = "the limit is the dry-type standard's, the form of the temperature the liquid-immersed standard's"
        return LimitOrReason(limit, note=note)


IEEEC57_12_00_2015 = IeeeC57Part12()

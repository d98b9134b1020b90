"""What the thermal assessment of a winding starts from, with the source of each value; or what is missing."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Protocol

from throughfault.declare import Limit, Missing, Outcome
from throughfault.errors import InputError
from throughfault.quantities import Quantity
from throughfault.workbook.assess.rules import LimitOrReason, RuleSet, Tabled
from throughfault.workbook.inputs import Unit
from throughfault.workbook.inputs.design_data import conductor_section

__all__ = ["DutyLike", "HeatInputs", "WindingDuty", "duration_of", "heat_inputs", "limit_of"]


class WindingDuty(Protocol):
    """What the thermal part needs of a winding's duty."""

    @property
    def symmetrical(self) -> float | None:
        """Largest symmetrical current in kA, None if not assessed."""

    @property
    def symmetrical_case(self) -> str | None:
        """The case that gives it."""


class DutyLike(Protocol):
    """The duty, by winding."""

    @property
    def windings(self) -> Mapping[str, WindingDuty]:
        """Largest currents of each winding."""

    @property
    def entries(self) -> Sequence[Mapping[str, Any]]:
        """Every case, with its driving-point impedance."""


@dataclass(frozen=True, slots=True)
class HeatInputs:
    """Settled inputs of one winding.

    Attributes
    ----------
    current, section, start, duration, insulation
        kA, mm^2, degC, s, mm^2.
    eddy_share, reference
        Eddy loss over d.c. loss, and the temperature it refers to (None where no standard tables it).
    x_over_r
        Of the governing case, None if unknown.
    """

    winding: str
    case: str | None
    immersion: str
    material: str
    current: Quantity
    section: Quantity
    start: Quantity
    duration: Quantity
    insulation: Quantity
    eddy_share: float
    reference: Quantity | None
    x_over_r: float | None


def duration_of(unit: Unit, rules: RuleSet, winding: str, category: str | None, multiple: float | None) -> Tabled:
    """Return the duration in s that the review takes: as given, else by the standard."""
    given = unit.fault_duration(winding)
    if given is None:
        return rules.fault_duration(category, multiple)
    return Tabled(given.to("s"), "s", _where(unit, winding, "fault_duration"), "maker", "H", "as given")


def start_of(unit: Unit, rules: RuleSet, winding: str) -> Tabled:
    """Return the temperature in degC at the start: as given, else by the standard, which may have none."""
    given = unit.start_temperature(winding)
    if given is None:
        return rules.start_temperature(unit.rating.immersion)
    return Tabled(given.to("degC"), "degC", _where(unit, winding, "start_temperature"), "maker", "H", "as given")


def _where(unit: Unit, winding: str, key: str) -> str:
    own = getattr(unit.windings[winding], key) is not None
    return f"unit file, windings.{winding}.{key}" if own else f"unit file, rating.{key}"


def material_of(unit: Unit, winding: str) -> str | None:
    """Return the conductor material: as given, else of the winding's coils."""
    given = unit.windings[winding].conductor_material
    coils = unit.design.coils if unit.design is not None else ()
    return given or next((coil.conductor.material for coil in coils if coil.winding == winding), None)


def x_over_r_of(duty: DutyLike, case: str | None) -> float | None:
    """Return X/R at the driving point of a case; None if the case is unknown or has no resistance."""
    entry = next((entry for entry in duty.entries if entry["id"] == case), None)
    if entry is None or entry["driving_point"]["resistance"] <= 0.0:
        return None
    return float(entry["driving_point"]["reactance"] / entry["driving_point"]["resistance"])


def heat_inputs(unit: Unit, rules: RuleSet, winding: str, duties: DutyLike, duration: Tabled) -> HeatInputs | Missing:
    """Settle the inputs of a winding, or name every key that is missing."""
    duty, own = duties.windings[winding], unit.windings[winding]
    start, material, section = (
        start_of(unit, rules, winding), material_of(unit, winding), conductor_section(unit, winding),
    )  # fmt: skip
    if duty.symmetrical is None or material is None or section is None or start.value is None or duration.value is None:
        return _missing(winding, duty, {"material": material, "section": section, "start": start.value})
    reference = rules.reference_temperature(unit.rating.immersion).value
    return HeatInputs(
        winding=winding,
        case=duty.symmetrical_case,
        immersion=unit.rating.immersion,
        material=material,
        current=Quantity(duty.symmetrical, "kA"),
        section=section,
        start=Quantity(start.value, "degC"),
        duration=Quantity(duration.value, "s"),
        insulation=own.insulation_section,
        eddy_share=own.eddy_share,
        reference=Quantity(reference, "degC") if reference is not None else None,
        x_over_r=x_over_r_of(duties, duty.symmetrical_case),
    )


def _missing(winding: str, duty: WindingDuty, found: Mapping[str, object]) -> Missing:
    keys = {
        "material": f"windings.{winding}.conductor_material",
        "section": f"windings.{winding}.conductor_section",
        "start": "rating.start_temperature",
    }
    wanted = tuple(key for name, key in keys.items() if found[name] is None)
    id_ = f"thermal.{winding}.temperature"
    if duty.symmetrical is None:
        return Missing(id_, ("the duty", *wanted), "the current of the winding is not assessed")
    return Missing(id_, wanted, "the temperature cannot be worked out without these inputs")


def limit_of(unit: Unit, rules: RuleSet, winding: str, material: str | None) -> LimitOrReason:
    """Return the limit of the winding's temperature; a signatory's own figure replaces the standard's.

    Raises
    ------
    InputError
        If that figure is no temperature.
    """
    thermal_class = unit.thermal_class(winding)
    found = LimitOrReason(None, "the limit depends on the conductor material", f"windings.{winding}.conductor_material")
    if material is not None:
        found = rules.temperature_limit(material, unit.rating.immersion, thermal_class)
    own = unit.limits.get(f"thermal.{winding}.temperature")
    if own is None:
        return found
    if not isinstance(own.value, Quantity) or own.value.kind != "temperature":
        given = own.value if isinstance(own.value, Quantity) else "a share of Rp0.2"
        key = f'limits."thermal.{winding}.temperature".value'
        raise InputError(f'{key}: must be a temperature such as "250 degC", got {given}.')
    if found.limit is not None:
        return LimitOrReason(found.limit.replaced(own.value, own.source))
    return LimitOrReason(Limit(own.value.to("degC"), "degC", "at most", own.source, "signatory"))


def outcome_of(id_: str, tabled: Tabled, symbol: str) -> Outcome:
    """Return a value that was taken as it stands in the results file."""
    reason = tabled.note or "not given" if tabled.value is None else None
    return Outcome(id_, tabled.value, tabled.unit, symbol, "", tabled.source, tabled.provenance, None, reason)

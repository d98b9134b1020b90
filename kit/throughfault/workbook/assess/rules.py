"""What a standard asks, as one interface: two rule sets, each of one edition, all numbers from the tables."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations
from typing import Literal, Protocol

from throughfault.declare import Limit
from throughfault.errors import InputError, did_you_mean
from throughfault.tables import Table
from throughfault.workbook.inputs import Unit

__all__ = [
    "Category",
    "LimitOrReason",
    "Neglect",
    "PeakFactor",
    "RuleSet",
    "Tabled",
    "ThermalMethod",
    "bank_power",
    "category_of",
    "rules_for",
    "separate_pair",
]

ThermalMethod = Literal["average temperature", "all heat stored"]


@dataclass(frozen=True, slots=True)
class Tabled:
    """A value of a standard, or the reason why the standard gives none (``value`` None, reason in ``note``)."""

    value: float | None
    unit: str
    source: str
    provenance: str
    confidence: str
    note: str = ""

    @classmethod
    def of(cls, table: Table, value: float | None, unit: str, note: str = "", confidence: str = "") -> Tabled:
        """Make one from a cell of a table, with the table's own source."""
        return cls(value, unit, table.source.citation, table.source.provenance, confidence or table.confidence, note)


@dataclass(frozen=True, slots=True)
class Category:
    """Category of a unit (``I`` to ``IV``), or None with the reason in ``note``."""

    name: str | None
    source: str
    provenance: str
    note: str = ""


@dataclass(frozen=True, slots=True)
class Neglect:
    """Whether the system impedance is left out of the duty, and why."""

    neglected: bool
    reason: str
    source: str
    provenance: str


@dataclass(frozen=True, slots=True)
class PeakFactor:
    """First peak over r.m.s. symmetrical current, and how it was found; None with the reason in ``how``."""

    value: float | None
    how: str
    source: str
    provenance: str


@dataclass(frozen=True, slots=True)
class LimitOrReason:
    """A limit, or the reason why the standard gives none and the key that would settle it.

    ``note`` says what a reviewer must know of a limit that there is.
    """

    limit: Limit | None
    reason: str = ""
    key: str = ""
    note: str = ""


class RuleSet(Protocol):
    """What the review asks of a standard."""

    @property
    def key(self) -> str:
        """Key of the bibliography."""

    @property
    def title(self) -> str:
        """The standard, without edition."""

    @property
    def edition(self) -> str:
        """The edition."""

    @property
    def thermal_method(self) -> ThermalMethod:
        """Form of the temperature that decides."""

    @property
    def start_is(self) -> str:
        """What the start temperature means."""

    @property
    def base_power_is_self_cooled(self) -> bool:
        """Whether multiples of the current refer to the self-cooled power."""

    @property
    def immersions(self) -> tuple[str, ...]:
        """The kinds of unit that the standard is for."""

    def category(self, power: float, phases: int, *, bank: bool) -> Category:
        """Return the category for a rated power in MVA, that of one unit of a bank where ``phases`` is 1."""

    def minimum_impedance(self, power: float) -> Tabled:
        """Return the minimum impedance in % for a rated power in MVA."""

    def usual_tolerance(self, impedance: float, *, principal: bool, first_pair: bool) -> Tabled:
        """Return the tolerance in % of a guaranteed impedance in %, as usual where none is agreed."""

    def system_short_circuit_power(self, highest_voltage: float, column: str | None) -> Tabled:
        """Return the default short-circuit power in MVA for a highest voltage in kV."""

    def source_neglected(self, category: str | None, ratio: float, *, two_winding: bool = True) -> Neglect:
        """Tell whether a system impedance, as share of the transformer's (0.05 = 5 %), is left out.

        ``two_winding``: a unit with two separate windings.
        """

    def x0_over_x1_scan(self) -> tuple[Tabled, ...]:
        """Return the X0/X1 values to run where none is given."""

    def infeeds(self, sources: Sequence[str], powers: Mapping[str, float], at: str) -> tuple[tuple[str, ...], ...]:
        """Return the combinations of sources to run for a fault at a winding's terminals."""

    def required_by_standard(self, fault: str, *, two_winding: bool, phases: int = 3) -> bool:
        """Tell whether the standard requires a fault.

        ``two_winding``: two separate windings, no autotransformer. ``phases``: of the network that the unit serves,
        1 only with a single-phase vector group; a bank of single-phase units with a three-phase group counts as 3.
        """

    def peak_factor(self, x_over_r: float, category: str | None, given: float | None = None) -> PeakFactor:
        """Return the factor that decides; ``x_over_r`` may be infinite."""

    def current_ceiling(
        self, category: str | None, power: float, phases: int, low_voltage: float, *, two_winding: bool = True
    ) -> Tabled:
        """Return the highest current, times rated, that is asked of a unit (MVA, kV)."""

    def fault_duration(self, category: str | None, multiple: float | None) -> Tabled:
        """Return the duration in s where none is given; ``multiple`` is the symmetrical current over rated."""

    def start_temperature(self, immersion: str) -> Tabled:
        """Return the temperature in degC when the fault begins, where none is given."""

    def reference_temperature(self, immersion: str) -> Tabled:
        """Return the temperature in degC that eddy shares and losses refer to."""

    def temperature_limit(self, material: str, immersion: str, thermal_class: float | None) -> LimitOrReason:
        """Return the highest permitted temperature."""


def bank_power(power: float, phases: int, *, bank: bool) -> float:
    """Return the three-phase power of a bank whose file states one unit (``phases`` 1), else the power itself."""
    return 3.0 * power if bank and phases == 1 else power


def separate_pair(unit: Unit) -> bool:
    """Tell whether a unit has two separate windings and no more."""
    return len(unit.windings) == 2 and not unit.group.auto


def category_of(unit: Unit, rules: RuleSet) -> Category:
    """Return the unit's category: by its largest winding, under IEEE by the smaller of its two principal windings."""
    powers = [winding.rated_power.to("MVA") for winding in unit.windings.values()]
    power = min(powers[:2]) if rules.base_power_is_self_cooled else max(powers)
    return rules.category(power, unit.rating.phases, bank=unit.rating.bank)


def every_combination(sources: Sequence[str], most: int | None = None) -> tuple[tuple[str, ...], ...]:
    """Return each source alone and then the combinations: all together, or all of at most `most`."""
    alone = [(s,) for s in sources]
    if most is None:
        return (*alone, tuple(sources)) if len(sources) > 1 else tuple(alone)
    sizes = range(2, min(most, len(sources)) + 1)
    return (*alone, *(c for size in sizes for c in combinations(sources, size)))


class HasStandard(Protocol):
    """What `rules_for` needs of a unit."""

    @property
    def standard(self) -> str:
        """The standard as typed in the unit file."""


def rules_for(unit: HasStandard, name: str = "") -> RuleSet:
    """Return the rule set of the standard that the unit names; without an edition the newest the kit carries.

    Parameters
    ----------
    name
        The unit file, for the message.

    Raises
    ------
    InputError
        If the kit carries no such standard or edition.
    """
    from throughfault.workbook.assess.rules_iec import IEC60076_5_2006  # noqa: PLC0415 - they build on this module
    from throughfault.workbook.assess.rules_ieee import IEEEC57_12_00_2015  # noqa: PLC0415

    known: dict[str, RuleSet] = {
        "IEC 60076-5": IEC60076_5_2006,
        "IEC 60076-5:2006": IEC60076_5_2006,
        "IEEE C57.12.00": IEEEC57_12_00_2015,
        "IEEE C57.12.00-2015": IEEEC57_12_00_2015,
    }
    if unit.standard not in known:
        names = ", ".join(f'"{name}"' for name in known)
        near = did_you_mean(unit.standard, known)
        where = f"{name}: " if name else ""
        raise InputError(f"{where}standard: must be one of {names}, got {unit.standard!r}{near}.")
    return known[unit.standard]

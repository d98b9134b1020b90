"""Which fault cases a review runs: every terminal, tapping, kind of fault, infeed and variant of the data."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import product

from throughfault.declare import Missing
from throughfault.quantities import Quantity
from throughfault.tables import table
from throughfault.workbook.assess.rules import RuleSet
from throughfault.workbook.inputs import Unit

__all__ = [
    "EARTH_FAULTS",
    "FaultCase",
    "Variant",
    "fault_cases",
    "faulted_terminals",
    "infeed_powers",
    "source_power",
    "sources_of",
    "stated_sources",
]

EARTH_FAULTS = ("LG", "LLG")
THREE_PHASE_KINDS = ("3ph", "LG", "LL", "LLG")
OUT_OF_PHASE = "OP"


@dataclass(frozen=True, slots=True)
class Variant:
    """What of the data was varied; the plain variant is the data as given.

    Attributes
    ----------
    tolerance
        Whether guaranteed impedances are reduced by their tolerance.
    minimum
        Whether sources stand at their minimum short-circuit power.
    x0_over_x1
        Ratio taken for each infeeding source that gives none.
    zero_sequence_share
        Zero-sequence over positive-sequence impedance where the file gives none.
    """

    tolerance: bool = False
    minimum: bool = False
    x0_over_x1: tuple[tuple[str, float], ...] = ()
    zero_sequence_share: float = 1.0


@dataclass(frozen=True, slots=True)
class FaultCase:
    """One case; `name` is its id on the record."""

    tapping: str
    at: str
    fault: str
    infeed: tuple[str, ...]
    variant: Variant
    marks: tuple[str, ...]

    @property
    def base(self) -> str:
        """Tapping, terminal, fault and infeed."""
        return f"{self.tapping}/{self.at}/{self.fault}/{'+'.join(self.infeed)}"

    @property
    def name(self) -> str:
        """The id: the base, and what was varied, if anything."""
        return "/".join((self.base, *self.marks))


def source_power(unit: Unit, rules: RuleSet, name: str, *, minimum: bool = False) -> Quantity | None:
    """Return the short-circuit power of the network at a terminal; None where the table has none for it."""
    source, winding = unit.system.terminals[name], unit.windings[name]
    if minimum and source.short_circuit_power_minimum is not None:
        return source.short_circuit_power_minimum
    if isinstance(source.short_circuit_power, Quantity):
        return source.short_circuit_power
    if source.short_circuit_power is None or winding.highest_voltage is None:
        return None
    tabled = rules.system_short_circuit_power(winding.highest_voltage.to("kV"), source.column)
    return None if tabled.value is None else Quantity(tabled.value, tabled.unit)


def stated_sources(unit: Unit) -> tuple[str, ...]:
    """Return the terminals whose network the file states, in the order of the vector group."""
    terminals = unit.system.terminals
    return tuple(
        name for name in unit.windings if name in terminals and terminals[name].short_circuit_power is not None
    )


def sources_of(unit: Unit, rules: RuleSet) -> tuple[str, ...]:
    """Return the stated networks whose short-circuit power is known."""
    return tuple(name for name in stated_sources(unit) if source_power(unit, rules, name) is not None)


def infeed_powers(unit: Unit) -> dict[str, float]:
    """Return the rated power of every winding in MVA."""
    return {name: winding.rated_power.to("MVA") for name, winding in unit.windings.items()}


def faulted_terminals(unit: Unit) -> tuple[str, ...]:
    """Return the terminals at which faults are run.

    A stabilising delta is not faulted at its own terminals, except in a bank unless a reason is given.
    """
    return tuple(name for name in unit.windings if not unit.windings[name].stabilising or _bank_fault(unit, name))


def _bank_fault(unit: Unit, name: str) -> bool:
    given = unit.system.terminals.get(name)
    return unit.rating.bank and not (given and given.terminal_fault_excluded)


def _kinds(unit: Unit, at: str) -> tuple[str, ...]:
    kinds = ("LL",) if unit.group.single_phase else THREE_PHASE_KINDS
    given = unit.system.terminals.get(at)
    return (*kinds, OUT_OF_PHASE) if given is not None and given.out_of_phase is not None else kinds


def _infeeds(unit: Unit, rules: RuleSet, at: str, fault: str) -> tuple[tuple[str, ...], ...]:
    sources = sources_of(unit, rules)
    if fault == OUT_OF_PHASE:  # the network at the terminal is switched on to all others
        return (sources,) if len(sources) > 1 else ()
    return rules.infeeds(sources, infeed_powers(unit), at)


def _carries_zero_sequence(unit: Unit, name: str, at: str) -> bool:
    """Tell whether a network's zero-sequence impedance can matter: at the fault, or behind an earthed neutral."""
    owner = next(iter(unit.windings)) if unit.connections[name].letter == "auto" else name
    return name == at or unit.earthing.get(owner, "isolated") != "isolated"


def _x0_choices(
    unit: Unit, rules: RuleSet, at: str, fault: str, infeed: tuple[str, ...]
) -> list[tuple[tuple[str, float], ...]]:
    if fault not in EARTH_FAULTS:
        return [()]
    given = unit.system.terminals
    open_ones = [n for n in infeed if given[n].x0_over_x1 is None and _carries_zero_sequence(unit, n, at)]
    ends = [tabled.value for tabled in rules.x0_over_x1_scan() if tabled.value is not None]
    return [tuple(zip(open_ones, chosen, strict=True)) for chosen in product(ends, repeat=len(open_ones))]


def _shares(unit: Unit, fault: str) -> tuple[float, ...]:
    """Return the zero-sequence shares to run: only a delta on a three-limb core leaves two."""
    given = all(row.zero_sequence is not None for row in unit.impedances)
    delta = any(connection.letter == "D" for connection in unit.group.windings)
    if fault not in EARTH_FAULTS or given or unit.rating.core != "three-limb" or not delta:
        return (1.0,)
    usual = table("iec60076_8_1997_zero_sequence_share").rows[0]
    return (usual["share_greatest"], usual["share_least"])


def _variants(unit: Unit, rules: RuleSet, at: str, fault: str, infeed: tuple[str, ...]) -> Iterator[Variant]:
    tolerance = any(row.tolerance is not None and row.basis == "guaranteed" for row in unit.impedances)
    minimum = any(unit.system.terminals[name].short_circuit_power_minimum is not None for name in infeed)
    choices = _x0_choices(unit, rules, at, fault, infeed)
    for reduced, low in product((False, True)[: 1 + tolerance], (False, True)[: 1 + minimum]):
        for x0, share in product(choices, _shares(unit, fault)):
            yield Variant(reduced, low, x0, share)


def _marks(variant: Variant, first: Variant) -> tuple[str, ...]:
    """Return what tells a variant from the first one of its case."""
    named = [f"x0({name})={ratio:g}" for name, ratio in variant.x0_over_x1]
    before = [f"x0({name})={ratio:g}" for name, ratio in first.x0_over_x1]
    marks = [mark for mark in named if mark not in before]
    if variant.zero_sequence_share != first.zero_sequence_share:
        marks.append(f"z0={variant.zero_sequence_share:g}z")
    return (*marks, *(("minimum",) if variant.minimum else ()), *(("tolerance",) if variant.tolerance else ()))


def fault_cases(unit: Unit, rules: RuleSet) -> tuple[list[FaultCase], list[Missing]]:
    """Return the cases to run, and what cannot be run for want of inputs."""
    cases: list[FaultCase] = []
    missing: list[Missing] = []
    missing += [_unknown_power(name) for name in stated_sources(unit) if source_power(unit, rules, name) is None]
    if not stated_sources(unit):
        missing.append(Missing("duty.infeed", ("system.<winding>.short_circuit_power",), "no terminal has an infeed"))
    missing += _out_of_phase_alone(unit, rules)
    for tapping in unit.tappings:
        lacking = _lacking(unit, tapping)
        if lacking:
            reason = f"the cases of tapping '{tapping}' cannot be run"
            missing.append(Missing(f"duty.tapping.{tapping}", lacking, reason))
            continue
        for at in faulted_terminals(unit):
            for fault in _kinds(unit, at):
                for infeed in _infeeds(unit, rules, at, fault):
                    variants = list(_variants(unit, rules, at, fault, infeed))
                    cases += [FaultCase(tapping, at, fault, infeed, v, _marks(v, variants[0])) for v in variants]
    return cases, missing


def _out_of_phase_alone(unit: Unit, rules: RuleSet) -> list[Missing]:
    """Return the terminals whose out-of-phase closing lacks a second network to close on."""
    if len(sources_of(unit, rules)) > 1:
        return []
    asked = [n for n, given in unit.system.terminals.items() if given.out_of_phase is not None]
    reason = "closing out of phase needs a network at another terminal too"
    brought_out = [name for name, winding in unit.windings.items() if not winding.stabilising]
    return [
        Missing(
            f"duty.out_of_phase.{name}",
            tuple(f"system.{other}.short_circuit_power" for other in brought_out if other != name),
            reason,
        )
        for name in asked
    ]


def _unknown_power(name: str) -> Missing:
    keys = (f"system.{name}.short_circuit_power", f"windings.{name}.highest_voltage")
    return Missing(f"duty.infeed.{name}", keys, f"the table gives no short-circuit power for the network at {name}")


def _lacking(unit: Unit, tapping: str) -> tuple[str, ...]:
    """Return the keys without which a tapping cannot be run."""
    lacking = [
        f"impedances between {first} and {second}, tapping '{tapping}'"
        for first, second in unit.pairs
        if unit.impedance(first, second, tapping) is None
    ]
    if unit.rating.voltage_variation == "variable flux" and tapping != "principal":
        lacking += [f"windings.{n}.tappings.{tapping}" for n, w in unit.windings.items() if tapping not in w.tappings]
    return tuple(lacking)

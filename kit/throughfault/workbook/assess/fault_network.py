"""From a unit file's data to the arrays of the fault network, in coherent SI units."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from throughfault.errors import NetworkError
from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Letter, Transformer, Winding
from throughfault.numerics.impedance import magnetising_path
from throughfault.quantities import Quantity
from throughfault.workbook.assess.fault_case import OUT_OF_PHASE, FaultCase, source_power
from throughfault.workbook.assess.rules import Neglect, RuleSet, separate_pair
from throughfault.workbook.inputs import Unit
from throughfault.workbook.inputs.impedances import ImpedanceRow

__all__ = ["NetworkData", "build_cases", "earth_fault_obstacle", "source_impedance", "transformer_of"]

_KINDS = {OUT_OF_PHASE: "out_of_phase"}


def transformer_of(unit: Unit) -> Transformer:
    """Return the windings with their connections."""
    letters: dict[str, Letter] = {"Y": "Y", "D": "D", "Z": "Z", "I": "I", "auto": "A"}
    windings = tuple(Winding(name, letters[c.letter], c.clock) for name, c in unit.connections.items())
    return Transformer(windings, phases=1 if unit.group.single_phase else 3)


def source_impedance(unit: Unit, name: str, power: Quantity) -> complex:
    """Return the positive-sequence impedance of a network in ohm, without the reactor of its terminal."""
    source = unit.system.terminals[name]
    voltage = (source.voltage or unit.windings[name].rated_voltage).to("V")
    size = voltage**2 / power.to("VA")
    if source.x_over_r is None:
        return complex(0.0, size)
    return size * complex(1.0, source.x_over_r) / math.hypot(1.0, source.x_over_r)


@dataclass(frozen=True)
class NetworkData:
    """One unit's data under one rule set, as the network takes them.

    Attributes
    ----------
    direct_current
        Whether d.c. resistances stand for the a.c. ones (decay of the offset).
    """

    unit: Unit
    rules: RuleSet
    category: str | None
    direct_current: bool = False

    @property
    def names(self) -> list[str]:
        """Windings in the order of the vector group."""
        return list(self.unit.windings)

    @property
    def base_power(self) -> float:
        """Common base in VA: rated power of the first winding, of the whole bank."""
        rating = self.unit.rating
        units = 3.0 if rating.bank and rating.phases == 1 else 1.0
        return units * next(iter(self.unit.windings.values())).rated_power.to("VA")

    def _row_base(self, row: ImpedanceRow) -> float:
        rating = self.unit.rating
        return row.base_power.to("VA") * (3.0 if rating.bank and rating.phases == 1 else 1.0)

    def _impedance(self, row: ImpedanceRow, *, tolerance: bool) -> complex:
        """Return one pair's impedance per unit of the common base."""
        size = row.impedance.to("p.u.")
        resistance = row.resistance_value.to("p.u.")
        reactance = math.sqrt(self._reduced(row, size, tolerance=tolerance) ** 2 - resistance**2)
        if self.direct_current and row.dc_resistance is not None:
            resistance = row.dc_resistance.to("p.u.")
        return complex(resistance, reactance) * self.base_power / self._row_base(row)

    @staticmethod
    def _reduced(row: ImpedanceRow, size: float, *, tolerance: bool) -> float:
        if tolerance and row.basis == "guaranteed" and row.tolerance is not None:
            return size * (1.0 - row.tolerance.to("p.u."))
        return size

    def _zero_sequence(self, row: ImpedanceRow, positive: complex, share: float) -> complex:
        if row.zero_sequence is None:
            return share * positive
        return positive * row.zero_sequence.to("p.u.") / row.impedance.to("p.u.")

    def pairs(self, case: FaultCase) -> tuple[Any, Any]:
        """Return positive- and zero-sequence pairwise impedances [winding, winding], per unit."""
        count = len(self.names)
        z1, z0 = np.zeros((count, count), np.complex128), np.zeros((count, count), np.complex128)
        for i, first in enumerate(self.names):
            for j, second in enumerate(self.names[i + 1 :], start=i + 1):
                row = self.unit.impedance(first, second, case.tapping)
                if row is None:
                    continue
                z = self._impedance(row, tolerance=case.variant.tolerance)
                z1[i, j] = z1[j, i] = z
                z0[i, j] = z0[j, i] = self._zero_sequence(row, z, case.variant.zero_sequence_share)
        for i, name in enumerate(self.names):
            z0[i, i] = self._interstar(name, case)
        return z1, z0

    def _interstar(self, name: str, case: FaultCase) -> complex:
        """Return an interstar winding's own zero-sequence impedance, from the pair that gives it.

        Without one its earth faults are not run, and no other fault depends on it: the impedance of the pair then
        only keeps the equations well-conditioned.
        """
        if self.unit.connections[name].letter != "Z":
            return 0j
        others = [self.unit.impedance(name, other, case.tapping) for other in self.names if other != name]
        rows = [row for row in others if row is not None]
        row = next((r for r in rows if r.zero_sequence is not None), rows[0])
        return self._zero_sequence(row, self._impedance(row, tolerance=case.variant.tolerance), 1.0)

    def magnetising(self, z0: Any) -> Any:
        """Return the zero-sequence magnetising path [winding], per unit; infinite where there is none."""
        given = self.unit.zero_sequence
        if given is None:
            return np.full(len(self.names), np.inf, np.complex128)
        own = self.unit.windings[given.at].rated_power.to("VA")
        size = given.magnetising.to("p.u.") * self.base_power / own
        return magnetising_path(z0, self.names.index(given.at), complex(0.0, size))

    def neglect(self, name: str, at: str, tapping: str) -> Neglect:
        """Tell whether the network at a terminal is left out for a fault at another one."""
        power = source_power(self.unit, self.rules, name)
        row = None if name == at else self.unit.impedance(name, at, tapping)
        if row is None or power is None:
            return Neglect(
                neglected=False, reason="the network is at the faulted terminal", source="", provenance="derived"
            )
        transformer = row.impedance.to("p.u.") * self.unit.voltage(name, tapping).to("V") ** 2 / self._row_base(row)
        share = abs(source_impedance(self.unit, name, power)) / transformer
        return self.rules.source_neglected(self.category, share, two_winding=separate_pair(self.unit))

    def sources(self, case: FaultCase) -> tuple[list[complex], list[complex]]:
        """Return positive- and zero-sequence impedances of the networks [winding] in ohm; infinite: no infeed."""
        first, zero = [], []
        for name in self.names:
            z1, z0 = self._source(name, case) if name in case.infeed else (complex(np.inf), complex(np.inf))
            first.append(z1)
            zero.append(z0)
        return first, zero

    def _source(self, name: str, case: FaultCase) -> tuple[complex, complex]:
        source = self.unit.system.terminals[name]
        power = source_power(self.unit, self.rules, name, minimum=case.variant.minimum)
        reactor = complex(0.0, source.series_reactance.to("ohm") if source.series_reactance is not None else 0.0)
        if power is None:
            raise NetworkError(f"system.{name}: a network without short-circuit power cannot feed a fault.")
        if self.neglect(name, case.at, case.tapping).neglected:
            return reactor, reactor
        z1 = source_impedance(self.unit, name, power)
        ratio = source.x0_over_x1 if source.x0_over_x1 is not None else dict(case.variant.x0_over_x1).get(name, 1.0)
        return z1 + reactor, ratio * z1 + reactor

    def neutrals(self) -> list[complex]:
        """Return neutral-to-earth impedances [winding] in ohm; infinite: isolated or none."""
        words: dict[object, complex] = {"solid": 0j, "isolated": complex(np.inf)}
        found = [self.unit.earthing.get(name, "isolated") for name in self.names]
        return [words[value] if isinstance(value, str) else complex(value) for value in found]


def build_cases(data: NetworkData, transformer: Transformer, cases: Sequence[FaultCase]) -> Cases:
    """Return all cases as arrays."""
    unit, names = data.unit, data.names
    pairs = [data.pairs(case) for case in cases]
    sources = [data.sources(case) for case in cases]
    voltage = np.array([[unit.voltage(name, case.tapping).to("V") for name in names] for case in cases])
    at = np.array([names.index(case.at) for case in cases], np.intp)
    before = np.array([unit.prefault_voltage(case.tapping) for case in cases])
    return Cases.of(
        transformer,
        voltage=voltage,
        base_power=data.base_power,
        z1=np.array([z1 for z1, _ in pairs]),
        z0=np.array([z0 for _, z0 in pairs]),
        fault=np.array([_KINDS.get(case.fault, case.fault) for case in cases]),
        at=at,
        frequency=unit.rating.frequency.to("Hz"),
        prefault=before * voltage[np.arange(len(cases)), at] / math.sqrt(transformer.phases),
        source_z1=np.array([z1 for z1, _ in sources]),
        source_z0=np.array([z0 for _, z0 in sources]),
        neutral=data.neutrals(),
        magnetising=np.array([data.magnetising(z0) for _, z0 in pairs]),
        step=np.array([_step(unit, case) for case in cases]),
    )


def _step(unit: Unit, case: FaultCase) -> float:
    source = unit.system.terminals.get(case.at)
    return source.out_of_phase.to("rad") if source is not None and source.out_of_phase is not None else math.pi


def earth_fault_obstacle(unit: Unit, at: str) -> tuple[tuple[str, ...], str] | None:
    """Return the missing keys and the reason why earth faults at a terminal cannot be assessed, or None.

    Only a winding with an earthed neutral takes zero-sequence current from a fault at its own terminal.
    """
    letter = unit.connections[at].letter
    owner = next(iter(unit.windings)) if letter == "auto" else at
    if unit.earthing.get(owner, "isolated") == "isolated":
        return None
    if letter == "Z":  # its halves on one limb balance: no other path is needed
        given = any(at in row.between and row.zero_sequence is not None for row in unit.impedances)
        reason = "an interstar winding's own zero-sequence impedance is not given"
        return None if given else (("impedances.zero_sequence",), reason)
    delta = any(connection.letter == "D" for connection in unit.group.windings)
    if unit.rating.core == "three-limb" and not delta and unit.zero_sequence is None:
        keys = ("zero_sequence.at", "zero_sequence.magnetising")
        return keys, "a three-limb unit without a delta has a zero-sequence path that must be measured"
    return None

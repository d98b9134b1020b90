"""The unit as the rest of the kit sees it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Literal, NamedTuple

from throughfault.declare import OpenPoint
from throughfault.quantities import Quantity
from throughfault.workbook.inputs.design import Design
from throughfault.workbook.inputs.impedances import ImpedanceRow, ZeroSequence
from throughfault.workbook.inputs.limits import Limit
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.rating import Identity, Rating
from throughfault.workbook.inputs.system import System, Withstand
from throughfault.workbook.inputs.vector_group import VectorGroup, WindingConnection
from throughfault.workbook.inputs.windings import PRINCIPAL, Winding

__all__ = ["Default", "EarthingOf", "Unit", "make_unit"]

EarthingOf = complex | Literal["solid", "isolated"]


class Default(NamedTuple):
    """A default that was used: the key path and the value taken, a bare number with unit "1", or words."""

    path: str
    value: Quantity | str


@dataclass(frozen=True)
class Unit:
    """A validated unit file; attributes are named as the keys of the file.

    Attributes
    ----------
    group
        The vector group, read; its windings in the order of `windings`.
    earthing
        By winding with a neutral: ``"solid"``, ``"isolated"`` or an impedance in ohm; defaults filled in.
    raw
        The file as parsed, for the record.
    warnings
        What is unusual but possible.
    defaults
        Each default that was used.
    """

    standard: str
    identity: Identity
    rating: Rating
    group: VectorGroup
    windings: dict[str, Winding]
    impedances: tuple[ImpedanceRow, ...]
    system: System
    earthing: dict[str, EarthingOf]
    zero_sequence: ZeroSequence | None
    tap_changer: Withstand | None
    bushings: dict[str, Withstand]
    neutral: dict[str, Withstand]
    design: Design | None
    limits: dict[str, Limit]
    declared: dict[str, Quantity]
    raw: dict[str, Any]
    warnings: tuple[OpenPoint, ...] = ()
    defaults: tuple[Default, ...] = ()

    @property
    def connections(self) -> dict[str, WindingConnection]:
        """Connection of each winding by name."""
        return dict(zip(self.windings, self.group.windings, strict=True))

    @property
    def pairs(self) -> tuple[tuple[str, str], ...]:
        """All pairs of windings, in the order of the vector group."""
        names = list(self.windings)
        return tuple((a, b) for i, a in enumerate(names) for b in names[i + 1 :])

    @property
    def tappings(self) -> tuple[str, ...]:
        """Names of all tappings, ``principal`` first."""
        names = dict.fromkeys([PRINCIPAL])
        for winding in self.windings.values():
            names.update(dict.fromkeys(winding.tappings))
        return tuple(names)

    def voltage(self, winding: str, tapping: str = PRINCIPAL) -> Quantity:
        """Return the winding's voltage at a tapping (its rated voltage where it has no such tapping)."""
        found = self.windings[winding]
        return found.tappings.get(tapping, found.rated_voltage)

    def impedance(self, first: str, second: str, tapping: str = PRINCIPAL) -> ImpedanceRow | None:
        """Return the row of a pair (in either order) at a tapping.

        A pair of which neither winding has that tapping keeps its principal row.
        """
        rows = {row.tapping: row for row in self.impedances if set(row.between) == {first, second}}
        tapped = any(tapping in self.windings[name].tappings for name in (first, second))
        return rows.get(tapping) or (None if tapped else rows.get(PRINCIPAL))

    def prefault_voltage(self, tapping: str = PRINCIPAL) -> float:
        """Return the voltage before the fault, per unit of the tapping's voltage."""
        given = self.system.prefault_voltage
        return given.get(tapping, 1.0) if isinstance(given, dict) else given

    def thermal_class(self, winding: str) -> int | None:
        """Return the winding's temperature class in degC: its own, or the unit's."""
        own = self.windings[winding].thermal_class
        return own if own is not None else self.rating.thermal_class

    def start_temperature(self, winding: str) -> Quantity | None:
        """Return the temperature when the fault begins: the winding's own, or the unit's."""
        return self.windings[winding].start_temperature or self.rating.start_temperature

    def fault_duration(self, winding: str) -> Quantity | None:
        """Return the fault's duration: the winding's own, or the unit's."""
        return self.windings[winding].fault_duration or self.rating.fault_duration


def make_unit(file: UnitFile, raw: dict[str, Any]) -> Unit:
    """Settle what follows from other keys: stabilising windings and the earthing of neutrals."""
    windings, connections = {}, []
    for (name, winding), letter in zip(file.windings.items(), file.group.windings, strict=True):
        hidden = winding.stabilising or letter.stabilising
        windings[name] = winding.model_copy(update={"stabilising": hidden})
        connections.append(WindingConnection(letter.letter, letter.neutral, letter.clock, hidden))
    earthing = {name: file.earthing.get(name, "solid") for name, c in file.connections.items() if c.neutral}
    return Unit(
        group=VectorGroup(file.group.symbol, tuple(connections)),
        windings=windings,
        earthing=earthing,
        raw=raw,
        **{name: getattr(file, name) for name in _SAME},
    )


_SAME = (
    "standard", "identity", "rating", "impedances", "system", "zero_sequence", "tap_changer", "bushings",
    "neutral", "design", "limits", "declared",
)  # fmt: skip

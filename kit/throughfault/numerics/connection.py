"""Windings, vector group and the nodes between which each winding stands.

A transformer is an ordered list of windings, the high-voltage one first, each with the letter and the clock
number of its vector group. Its *coils* are the parts that carry one current each: a winding is one coil, an
interstar winding two half coils on neighbouring limbs, an autotransformer its series and its common part.

Example
-------
>>> unit = Transformer((Winding("HV", "Y"), Winding("LV", "D", 11)))  # YNd11
>>> [coil.winding for coil in unit.coils]
[0, 1]
>>> Transformer((Winding("HV", "Y"), Winding("LV", "A"), Winding("TV", "D", 11))).auto  # YNa0d11
True
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal, TypeAlias

from throughfault.errors import NetworkError

Letter: TypeAlias = Literal["Y", "D", "Z", "A", "I"]
Node: TypeAlias = tuple[str, int, int]

EARTH: Node = ("earth", 0, 0)
_NATURAL_CLOCK = {"Y": 0, "D": 1, "Z": 11, "A": 0, "I": 0}
# Taking the coil of the next limb turns a phasor by four hours, reversing the coil by six.
_TURN = {0: (0, False), 4: (1, False), 8: (2, False), 6: (0, True), 10: (1, True), 2: (2, True)}


@dataclass(frozen=True)
class Winding:
    """One winding of the vector group.

    Parameters
    ----------
    name
        Name used in errors.
    connection
        ``Y`` star, ``D`` delta, ``Z`` interstar, ``A`` common part of an autotransformer (second winding only),
        ``I`` single-phase.
    clock
        Clock number with respect to the first winding.
    """

    name: str
    connection: Letter
    clock: int = 0


@dataclass(frozen=True)
class Coil:
    """One coil on each limb: the winding it belongs to, its half, and on each limb the node it leaves and enters.

    The first node is the dotted end: currents into the dotted ends of a limb balance in ampere-turns.
    """

    winding: int
    half: int
    ends: tuple[tuple[Node, Node], ...]


@dataclass(frozen=True)
class Transformer:
    """Windings in the order of the vector group, and the number of phases (3 or 1).

    Raises
    ------
    NetworkError
        The letters and clock numbers cannot be wound; all faults in one sentence.
    """

    windings: tuple[Winding, ...]
    phases: int = 3

    def __post_init__(self) -> None:
        if faults := self._faults():
            raise NetworkError("; ".join(faults))

    def _faults(self) -> list[str]:
        faults = []
        if self.phases not in (1, 3):
            faults.append(f"phases of the transformer must be 1 or 3, got {self.phases}")
        if len(self.windings) < 2:
            faults.append(f"a transformer must have two windings or more, got {len(self.windings)}")
        faults += [fault for index in range(len(self.windings)) if (fault := self._winding_fault(index))]
        return faults

    def _winding_fault(self, index: int) -> str:
        winding = self.windings[index]
        name = f"winding {winding.name}"
        if winding.connection not in _NATURAL_CLOCK:
            return f"{name}: connection must be one of Y, D, Z, A, I, got {winding.connection!r}"
        if (self.phases == 1) != (winding.connection == "I") and winding.connection != "A":
            return f"{name}: connection must be I or A in one phase and Y, D, Z or A in three, got {winding.connection}"
        if winding.connection == "A" and (index != 1 or self.windings[0].connection not in "YI" or winding.clock):
            return f"{name}: the common part of an autotransformer must stand second, after Y or I, with clock number 0"
        steps = (0, 6) if self.phases == 1 else tuple(_TURN)
        if index and self._turn(index) not in steps:
            letters = f"{winding.connection} after {self.windings[0].connection}"
            return f"{name}: clock number {winding.clock} cannot be wound with {letters}"
        if index == 0 and winding.clock:
            return f"{name}: the clock number of the first winding must be 0, got {winding.clock}"
        return ""

    def _turn(self, index: int) -> int:
        first, winding = self.windings[0], self.windings[index]
        return (_NATURAL_CLOCK[first.connection] + winding.clock - _NATURAL_CLOCK[winding.connection]) % 12

    @property
    def auto(self) -> bool:
        """Whether the first two windings are the series and the common part of an autotransformer."""
        return self.windings[1].connection == "A"

    @cached_property
    def neutrals(self) -> tuple[bool, ...]:
        """For each winding whether it owns a neutral; the one of an autotransformer belongs to the first."""
        return tuple(winding.connection in "YZI" for winding in self.windings)

    @cached_property
    def coils(self) -> tuple[Coil, ...]:
        """Coils in the order of the windings, an interstar winding giving two."""
        return tuple(coil for index in range(len(self.windings)) for coil in self._coils_of(index))

    def _coils_of(self, index: int) -> tuple[Coil, ...]:
        shift, reverse = _TURN[self._turn(index)]
        halves = (0, 1) if self.windings[index].connection == "Z" else (0,)
        return tuple(Coil(index, half, self._placed(index, half, shift + half, reverse=reverse)) for half in halves)

    def _placed(self, index: int, half: int, shift: int, *, reverse: bool) -> tuple[tuple[Node, Node], ...]:
        ends = [self._ends(index, half, (limb - shift) % self.phases) for limb in range(self.phases)]
        return tuple((end, start) if reverse else (start, end) for start, end in ends)

    def _ends(self, index: int, half: int, phase: int) -> tuple[Node, Node]:
        connection = self.windings[index].connection
        line: Node = ("line", index, phase)
        if connection == "D":
            return line, ("line", index, (phase + 1) % self.phases)
        if connection == "Z":
            middle: Node = ("middle", index, phase)
            return (("neutral", index, 0), middle) if half else (line, middle)
        if index == 0 and self.auto:
            return line, ("line", 1, phase)
        return line, ("neutral", 0 if connection == "A" else index, 0)

"""Which currents a fault network allows: Kirchhoff's current law, ampere-turn balance and the kind of fault.

The unknowns of the solver are loop currents, so floating parts (an open delta, an isolated star) need no care: their
potential never appears.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray

from throughfault.numerics.case import LINE_EARTH, LINE_LINE, LINE_LINE_EARTH, OUT_OF_PHASE, THREE_PHASE, Floats
from throughfault.numerics.connection import EARTH, Node, Transformer

ROUNDING = 1e-9
Ends = tuple[Node, Node]


@dataclass(frozen=True)
class Layout:
    """What decides the form of a network: where sources, neutrals, the fault and the magnetising path are."""

    infeed: tuple[bool, ...]
    earthed: tuple[bool, ...]
    neutral: tuple[bool, ...]
    at: int
    closing: bool
    magnetising: bool


@dataclass(frozen=True, eq=False)
class Network:
    """Branches of a layout and their independent loops.

    Attributes
    ----------
    ends
        Start and end node of each branch: coils limb by limb, sources, neutrals, the faulted port.  The fictitious
        winding of the magnetising path, where there is one, is one more branch without nodes.
    coils
        Number of coils; their branches are the first ``coils * phases``.
    source, neutral, port
        Branch numbers: of the sources and neutrals by winding, and of the faulted port.
    loops
        [branch, loop] of -1, 0 and 1.
    chord
        [loop] winding whose voltage scales the loop.
    """

    phases: int
    coils: int
    ends: tuple[Ends, ...]
    source: dict[int, list[int]]
    neutral: dict[int, int]
    port: list[int]
    loops: Floats
    chord: list[int]
    magnetising: bool


@cache
def network_of(transformer: Transformer, layout: Layout) -> Network:
    """Build the branches and loops of a layout."""
    phases, windings = range(transformer.phases), range(len(transformer.windings))
    branches: list[tuple[int, Ends]] = [(coil.winding, ends) for coil in transformer.coils for ends in coil.ends]
    source: dict[int, list[int]] = {}
    neutral: dict[int, int] = {}
    for w in (w for w in windings if layout.infeed[w]):
        star = EARTH if layout.earthed[w] or transformer.phases == 1 else ("source", w, 0)
        source[w] = [len(branches) + p for p in phases]
        branches += [(w, (star, ("line", w, p))) for p in phases]
    for w in (w for w in windings if layout.neutral[w]):
        neutral[w] = len(branches)
        branches.append((w, (("neutral", w, 0), EARTH)))
    port = source[layout.at] if layout.closing else [len(branches) + p for p in phases]
    if not layout.closing:
        branches += [(layout.at, (("line", layout.at, p), EARTH)) for p in phases]
    ends = tuple(pair for _, pair in branches)
    loops, chords = _with_fictitious(*fundamental_loops(ends), magnetising=layout.magnetising)
    chord = [branches[b][0] if b < len(branches) else 0 for b in chords]
    coils = len(transformer.coils)
    return Network(transformer.phases, coils, ends, source, neutral, port, loops, chord, layout.magnetising)


def _with_fictitious(loops: Floats, chords: list[int], *, magnetising: bool) -> tuple[Floats, list[int]]:
    """Add the branch of the magnetising path, a loop of its own."""
    if not magnetising:
        return loops, chords
    rows, columns = loops.shape
    larger = np.zeros((rows + 1, columns + 1))
    larger[:rows, :columns] = loops
    larger[rows, columns] = 1.0
    return larger, [*chords, rows]


def fundamental_loops(ends: Sequence[Ends]) -> tuple[Floats, list[int]]:
    """Return the loops [branch, loop] that each branch outside a spanning forest closes, and those branches."""
    path: dict[Node, Floats] = {EARTH: np.zeros(len(ends))}
    tree = set(_grow(path, ends))
    chords = [branch for branch in range(len(ends)) if branch not in tree]
    unit = np.eye(len(ends))
    loops = [unit[branch] + path[ends[branch][0]] - path[ends[branch][1]] for branch in chords]
    return np.array(loops).reshape(len(chords), len(ends)).T, chords


def _grow(path: dict[Node, Floats], ends: Sequence[Ends]) -> Iterator[int]:
    """Reach every node from its root, filling in the path, and yield the branches of the forest."""
    unit = np.eye(len(ends))
    while not all(node in path for pair in ends for node in pair):
        step = next((b for b, (u, v) in enumerate(ends) if (u in path) != (v in path)), None)
        if step is None:
            path[next(u for u, _ in ends if u not in path)] = np.zeros(len(ends))
            continue
        start, end = ends[step]
        if start in path:
            path[end] = path[start] + unit[step]
        else:
            path[start] = path[end] - unit[step]
        yield step


def port_rule(kind: str, phases: int) -> Floats:
    """Return the combinations of port currents that a kind of fault forces to zero, [rule, phase]."""
    if phases == 1 or kind == OUT_OF_PHASE:
        return np.zeros((0, phases))
    rules = {
        THREE_PHASE: [[1, 1, 1]],
        LINE_EARTH: [[0, 1, 0], [0, 0, 1]],
        LINE_LINE: [[1, 0, 0], [0, 1, 1]],
        LINE_LINE_EARTH: [[1, 0, 0]],
    }
    return np.array(rules[kind], float)


def port_witness(kind: str, phases: int) -> Floats:
    """Return the combination of port currents, [phase], that can flow only if the fault has a path."""
    if phases == 1 or kind in {OUT_OF_PHASE, LINE_EARTH, THREE_PHASE}:
        return np.array([1.0, 0.0, 0.0][:phases])
    return np.array([0.0, 1.0, 0.0 if kind == LINE_LINE else 1.0])


def allowed_currents(
    network: Network, voltage: Floats, coil_voltage: Floats, rule: Floats
) -> list[tuple[NDArray[np.intp], Floats]]:
    """Return bases of the currents that a network allows.

    Parameters
    ----------
    voltage, coil_voltage
        [set, winding], [set, coil] terminal and coil voltages, V; their ratios are the turns ratios.
    rule
        [rule, phase] from :func:`port_rule`.

    Returns
    -------
    list
        Pairs of set numbers and basis [set, branch, dimension]; more than one pair only if turns ratios differ so
        that the number of independent currents does.
    """
    basis = network.loops / voltage[:, None, network.chord]
    limbs = _limb_sums(network, voltage, coil_voltage) @ basis
    forced = (rule @ basis[:, network.port, :]) * voltage.max(1)[:, None, None]
    # Loops of low voltage carry large numbers; the rules are judged against the largest of each row.
    rows = np.concatenate([limbs, forced], axis=1)
    rows = rows / np.maximum(np.abs(rows).max(2, keepdims=True, initial=0.0), np.finfo(float).tiny)
    _, values, right = np.linalg.svd(rows, full_matrices=True)
    ranks = (values > ROUNDING).sum(1)
    return [
        (which := np.flatnonzero(ranks == rank), basis[which] @ right[which, rank:, :].transpose(0, 2, 1))
        for rank in np.unique(ranks)
    ]


def _limb_sums(network: Network, voltage: Floats, coil_voltage: Floats) -> Floats:
    """Ampere-turns of each limb, [set, limb, branch], as voltage times current."""
    sums = np.zeros((len(voltage), network.phases, network.loops.shape[0]))
    for limb in range(network.phases):
        sums[:, limb, limb : network.coils * network.phases : network.phases] = coil_voltage
    if network.magnetising:
        sums[:, :, -1] = voltage[:, :1]
    return sums

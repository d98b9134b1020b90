"""Fault currents of a transformer in the phase domain, many cases in one call.

Allowed currents i = T x satisfy Kirchhoff's current law and the ampere-turn balance; (T' Z T) x = T' E gives them,
with E the voltage before the fault at the faulted port (superposition: no load, no circulating current).

Example
-------
>>> import numpy as np
>>> from throughfault.numerics.case import Cases
>>> from throughfault.numerics.connection import Transformer, Winding
>>> unit = Transformer((Winding("HV", "Y"), Winding("LV", "D", 11)))
>>> cases = Cases.of(unit, voltage=[132e3, 33e3], base_power=40e6, z1=[[0, 0.125j], [0.125j, 0]], fault="3ph", at=1,
...                  frequency=50.0, source_z1=[0.0, np.inf], source_z0=[0.0, np.inf], neutral=[0.0, np.inf])
>>> solution = solve(unit, cases)
>>> print(f"{abs(solution.terminal_current[0, 0, 0]):.1f}")  # 40 MVA / (sqrt3 132 kV) / 0.125
1399.6
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from throughfault.errors import NetworkError
from throughfault.numerics.branch import TURN, branch_emf, branch_impedance
from throughfault.numerics.case import (
    LINE_EARTH,
    LINE_LINE,
    LINE_LINE_EARTH,
    OUT_OF_PHASE,
    THREE_PHASE,
    Cases,
    Complexes,
    Floats,
)
from throughfault.numerics.connection import Transformer
from throughfault.numerics.impedance import coil_voltages
from throughfault.numerics.loops import (
    ROUNDING,
    Layout,
    Network,
    allowed_currents,
    network_of,
    port_rule,
    port_witness,
)

__all__ = ["Group", "Solution", "groups", "observe", "solve", "split"]

CHUNK = 1000
ENDLESS = 1e12
INFINITE = complex(np.inf)


@dataclass(frozen=True)
class Solution:
    """Currents of all cases, complex r.m.s. in A; the voltage before the fault in phase a is the zero of angle.

    Attributes
    ----------
    coil_current
        [case, coil, limb] into the dotted end: ampere-turns of every limb balance.  Feeds the forces.
    winding_current
        [case, winding, limb] the same, an interstar winding by its first half (both halves carry its line currents).
    terminal_current
        [case, winding, phase] into the transformer at its own line terminal, without that terminal's source.
    neutral_current
        [case, winding] from the neutral into earth; an autotransformer's stands with its first winding.
    fault_current
        [case, phase] out of each line into the fault; for out-of-phase closing, through the source.
    z1, z2, z0
        [case] impedance of the whole network at the faulted port, ohm; infinite where no current can flow.
    driving_point
        [case] z1 (3ph, one phase), z1 + z2 (LL), z1 + z2 + z0 (LG), z1 + z2 z0 / (z2 + z0) (LLG), ohm; with the
        fault impedance.
    path_exists
        [case] whether the fault, with earth where the kind says so, closes a path.
    """

    coil_current: Complexes
    winding_current: Complexes
    terminal_current: Complexes
    neutral_current: Complexes
    fault_current: Complexes
    z1: Complexes
    z2: Complexes
    z0: Complexes
    driving_point: Complexes
    path_exists: NDArray[np.bool_]


@dataclass(frozen=True)
class Group:
    """Cases of one layout and kind with as many independent currents: what one batched solution needs.

    Attributes
    ----------
    rows
        Numbers of the cases.
    basis, free
        [case, branch, dimension] currents that the fault allows, and those allowed with the port left free.
    impedance
        [case, branch, branch] ohm.
    emf
        [case, branch] r.m.s. V.
    """

    network: Network
    kind: str
    rows: NDArray[np.intp]
    cases: Cases
    basis: Floats
    free: Floats
    impedance: Complexes
    emf: Complexes


def solve(transformer: Transformer, cases: Cases) -> Solution:
    """Solve all cases, whatever mixture of faults, sources and earthing they are.

    Raises
    ------
    NetworkError
        A path without impedance closes on the fault.
    """
    count, phases = len(cases), transformer.phases
    observed = np.zeros((count, _observed_rows(transformer)), np.complex128)
    port = np.zeros((count, phases), np.complex128)
    admittance = np.zeros((count, phases, phases), np.complex128)
    exists = np.zeros(count, bool)
    for group in groups(transformer, cases):
        currents = _currents(group)
        observed[group.rows] = currents @ observe(transformer, group.network).T
        port[group.rows] = currents[:, group.network.port]
        admittance[group.rows] = _port_admittance(group)
        exists[group.rows] = _has_path(group)
    coil, terminal, neutral = split(transformer, observed)
    first = [index for index, each in enumerate(transformer.coils) if each.half == 0]
    z1, z2, z0 = _sequence_impedance(admittance)
    driving = _driving_point(cases, z1, z2 if phases == 3 else np.zeros_like(z1), z0)
    return Solution(coil, coil[:, first], terminal, neutral, port, z1, z2, z0, driving, exists)


def groups(transformer: Transformer, cases: Cases) -> Iterator[Group]:
    """Part the cases by layout, kind and dimension, in chunks that bound the memory."""
    for layout, kind, rows in _layouts(transformer, cases):
        network = network_of(transformer, layout)
        for start in range(0, len(rows), CHUNK):
            part = rows[start : start + CHUNK]
            yield from _chunk_groups(transformer, network, kind, part, cases[part])


def _layouts(transformer: Transformer, cases: Cases) -> Iterator[tuple[Layout, str, NDArray[np.intp]]]:
    infeed = np.isfinite(cases.source_z1)
    neutral = np.array(transformer.neutrals) & (np.isfinite(cases.neutral) | (transformer.phases == 1))
    magnetising = np.isfinite(cases.magnetising).any(1, keepdims=True) & (transformer.phases == 3)
    kinds, kind = np.unique(cases.fault, return_inverse=True)
    parts = [infeed, infeed & np.isfinite(cases.source_z0), neutral, magnetising]
    key = np.concatenate([*parts, kind[:, None], cases.at[:, None]], axis=1).astype(np.intp)
    patterns, group = np.unique(key, axis=0, return_inverse=True)
    w = len(transformer.windings)
    for number, pattern in enumerate(patterns):
        flags = [tuple(bool(flag) for flag in pattern[i * w : (i + 1) * w]) for i in range(3)]
        name = str(kinds[pattern[-2]])
        members: NDArray[np.intp] = np.flatnonzero(np.asarray(group == number))
        layout = Layout(flags[0], flags[1], flags[2], int(pattern[-1]), name == OUT_OF_PHASE, bool(pattern[-3]))
        yield layout, name, members


def _chunk_groups(
    transformer: Transformer, network: Network, kind: str, rows: NDArray[np.intp], cases: Cases
) -> Iterator[Group]:
    sets, which = np.unique(cases.voltage, axis=0, return_inverse=True)
    coil_sets = coil_voltages(transformer, sets)
    rule = port_rule(kind, network.phases)
    bases = allowed_currents(network, sets, coil_sets, rule)
    frees = allowed_currents(network, sets, coil_sets, rule[:0]) if len(rule) else bases
    impedance, emf = branch_impedance(transformer, network, cases), branch_emf(network, kind, cases)
    for members, basis in bases:
        for free_members, free in frees:
            both = np.intersect1d(members, free_members)
            inside = np.flatnonzero(np.isin(which, both))
            if not len(inside):
                continue
            own, other = np.searchsorted(members, which[inside]), np.searchsorted(free_members, which[inside])
            yield Group(
                network, kind, rows[inside], cases[inside], basis[own], free[other], impedance[inside], emf[inside]
            )


def _currents(group: Group) -> Complexes:
    """Branch currents of every case of a group, [case, branch] A."""
    turned = group.basis.transpose(0, 2, 1)
    unknown = _solved(turned @ group.impedance @ group.basis, turned @ group.emf[:, :, None], group)
    # The unknowns are in volt-amperes; beyond this multiple of the base only rounding holds the current.
    if (endless := (np.abs(unknown[:, :, 0]) > ENDLESS * group.cases.base_power[:, None]).any(1)).any():
        raise NetworkError(_no_impedance(group, int(endless.argmax())))
    currents: Complexes = (group.basis @ unknown)[:, :, 0]
    return currents


def _port_admittance(group: Group) -> Complexes:
    """Admittance between the phases of the faulted port, without fault impedance, [case, phase, phase] S."""
    port = slice(group.network.port[0], group.network.port[-1] + 1)
    impedance = group.impedance
    if group.kind != OUT_OF_PHASE:
        impedance = impedance.copy()
        impedance[:, port, port] = 0.0
    turned, rows = group.free.transpose(0, 2, 1), group.free[:, port, :]
    unknown = _solved(turned @ impedance @ group.free, rows.transpose(0, 2, 1).astype(np.complex128), group)
    admittance: Complexes = rows @ unknown
    return admittance


def _solved(matrix: Complexes, right: Complexes, group: Group) -> Complexes:
    try:
        solved = np.asarray(np.linalg.solve(matrix, right), np.complex128)
    except np.linalg.LinAlgError as error:
        raise NetworkError(_no_impedance(group, 0)) from error
    return solved


def _no_impedance(group: Group, number: int) -> str:
    what = "has a path without impedance through the fault; give sources, windings or the fault an impedance (ohm)"
    return f"case {group.rows[number]} or one like it ({group.kind}) {what}"


def _has_path(group: Group) -> NDArray[np.bool_]:
    witness = port_witness(group.kind, group.network.phases) @ group.basis[:, group.network.port, :]
    scale = group.cases.at_fault(group.cases.voltage)
    exists: NDArray[np.bool_] = np.abs(witness).max(1, initial=0.0) * scale > ROUNDING
    return exists


def _sequence_impedance(admittance: Complexes) -> tuple[Complexes, Complexes, Complexes]:
    """Positive-, negative- and zero-sequence impedance of a port from the first row of its circulant admittance."""
    row = admittance[:, 0, :]
    phases = np.arange(row.shape[1])
    y1, y2, y0 = row @ TURN**-phases, row @ TURN**phases, row.sum(1)
    if len(phases) == 1:
        y0 = np.zeros_like(y1)
    y0[np.abs(y0) < ROUNDING * np.abs(y1)] = 0.0
    z1, z2, z0 = (np.divide(1.0, y, out=np.full(y.shape, INFINITE), where=y != 0) for y in (y1, y2, y0))
    return z1, z2, z0


def _driving_point(cases: Cases, z1: Complexes, z2: Complexes, z0: Complexes) -> Complexes:
    z_f = cases.fault_impedance
    earth = np.where(np.isinf(z0), INFINITE, z0 + 3 * z_f)
    with np.errstate(invalid="ignore"):  # what the infinite spoils is not chosen
        joined = np.where(np.isinf(earth), z2, z2 * earth / (z2 + earth))
        values = [z1 + z_f, z1 + z2 + z_f, np.where(np.isinf(earth), INFINITE, z1 + z2 + earth), z1 + joined, z1]
    order = (THREE_PHASE, LINE_LINE, LINE_EARTH, LINE_LINE_EARTH, OUT_OF_PHASE)
    result: Complexes = np.select([cases.fault == kind for kind in order], values)
    return result


def observe(transformer: Transformer, network: Network) -> Floats:
    """Return the matrix [coil limbs + terminal phases + neutrals, branch] that reads currents off the branches."""
    phases, windings, coils = transformer.phases, len(transformer.windings), network.coils * transformer.phases
    rows = np.zeros((_observed_rows(transformer), network.loops.shape[0]))
    rows[:coils, :coils] = np.eye(coils)
    for branch, pair in enumerate(network.ends[:coils]):
        for (kind, w, p), sign in zip(pair, (1.0, -1.0), strict=True):
            if kind == "line":
                rows[coils + w * phases + p, branch] += sign
    for w, branch in network.neutral.items():
        rows[coils + windings * phases + w, branch] = 1.0
    return rows


def _observed_rows(transformer: Transformer) -> int:
    windings = len(transformer.windings)
    return len(transformer.coils) * transformer.phases + windings * transformer.phases + windings


def split(transformer: Transformer, observed: NDArray[Any]) -> tuple[NDArray[Any], NDArray[Any], NDArray[Any]]:
    """Part observed currents [case, row, ...] into coils, terminals and neutrals."""
    phases, windings, coils = transformer.phases, len(transformer.windings), len(transformer.coils)
    first, second = coils * phases, (coils + windings) * phases
    lead, rest = observed.shape[:1], observed.shape[2:]
    return (
        observed[:, :first].reshape(*lead, coils, phases, *rest),
        observed[:, first:second].reshape(*lead, windings, phases, *rest),
        observed[:, second:],
    )

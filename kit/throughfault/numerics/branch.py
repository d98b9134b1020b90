"""Impedance and driving voltage of the branches of a fault network."""

from __future__ import annotations

import numpy as np

from throughfault.numerics.case import (
    LINE_EARTH,
    LINE_LINE,
    LINE_LINE_EARTH,
    OUT_OF_PHASE,
    THREE_PHASE,
    Cases,
    Complexes,
)
from throughfault.numerics.connection import Transformer
from throughfault.numerics.impedance import coil_drops, coil_voltages
from throughfault.numerics.loops import Network

__all__ = ["TURN", "branch_emf", "branch_impedance"]

TURN = np.exp(2j * np.pi / 3)


def branch_impedance(transformer: Transformer, network: Network, cases: Cases) -> Complexes:
    """Return the impedance between the branches of a network, [case, branch, branch] ohm."""
    z = np.zeros((len(cases), *(network.loops.shape[0],) * 2), np.complex128)
    _set_coils(z, transformer, network, cases)
    for w, rows in network.source.items():
        earthed = np.where(np.isinf(cases.source_z0[:, w]), cases.source_z1[:, w], cases.source_z0[:, w])
        block = _source_block(cases.source_z1[:, w], cases.source_z2[:, w], earthed, network.phases)
        z[:, rows[0] : rows[-1] + 1, rows[0] : rows[-1] + 1] = block
    for w, row in network.neutral.items():
        z[:, row, row] = cases.neutral[:, w] if network.phases == 3 else 0.0
    if network.port[0] not in {row for rows in network.source.values() for row in rows}:
        port = slice(network.port[0], network.port[-1] + 1)
        z[:, port, port] = _fault_block(cases, network.phases)
    return z


def _set_coils(z: Complexes, transformer: Transformer, network: Network, cases: Cases) -> None:
    """Fill in the coils: (Z0 + 2 Z1)/3 on one limb, (Z0 - Z1)/3 between limbs."""
    phases, coils = network.phases, network.coils
    voltage = coil_voltages(transformer, cases.voltage)
    scale = (voltage[:, :, None] * voltage[:, None, :]) / (cases.base_power / phases)[:, None, None]
    drop1, drop0 = coil_drops(transformer, cases)
    one, zero = drop1[:, :coils, :coils] * scale, drop0[:, :coils, :coils] * scale
    mutual = (zero - one) / 3 if phases == 3 else np.zeros_like(one)
    block = np.einsum("ncd,pq->ncpdq", one, np.eye(phases)) + np.einsum("ncd,pq->ncpdq", mutual, np.ones((phases,) * 2))
    z[:, : coils * phases, : coils * phases] = block.reshape(len(cases), coils * phases, coils * phases)
    if network.magnetising:
        unit = voltage * (cases.voltage[:, 0] / (cases.base_power / phases))[:, None]
        column = np.repeat(drop0[:, :coils, coils] * unit, phases, axis=1)
        z[:, : coils * phases, -1] = z[:, -1, : coils * phases] = column


def _source_block(z1: Complexes, z2: Complexes, z0: Complexes, phases: int) -> Complexes:
    if phases == 1:
        return z1[:, None, None]
    turn = TURN ** (np.arange(3)[:, None] - np.arange(3))
    block: Complexes = (z0[:, None, None] + z1[:, None, None] / turn + z2[:, None, None] * turn) / 3
    return block


def _fault_block(cases: Cases, phases: int) -> Complexes:
    pattern = {
        THREE_PHASE: np.eye(3),
        LINE_EARTH: np.diag([1.0, 0, 0]),
        LINE_LINE: np.diag([0, 0.5, 0.5]),
        LINE_LINE_EARTH: np.outer([0.0, 1, 1], [0.0, 1, 1]),
    }
    shape = np.ones((1, 1)) if phases == 1 else pattern[str(cases.fault[0])]
    block: Complexes = cases.fault_impedance[:, None, None] * shape
    return block


def branch_emf(network: Network, kind: str, cases: Cases) -> Complexes:
    """Return the voltage before the fault in the branches of the faulted port, [case, branch] V."""
    emf = np.zeros((len(cases), network.loops.shape[0]), np.complex128)
    step = 1 - np.exp(1j * cases.step) if kind == OUT_OF_PHASE else np.ones(len(cases))
    emf[:, network.port] = (cases.prefault * step)[:, None] * TURN ** -np.arange(network.phases)
    return emf

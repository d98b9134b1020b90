"""Leakage impedance of the coils from the pairwise impedances of the terminals.

On the balanced subspace (ampere-turns of every limb sum to zero) the leakage drops of any number of coils follow
from the symmetric matrix -1/2 z_ij with zero diagonal, z_ij being the pairwise short-circuit impedances on one base;
no reference winding and no star point is needed (after Brandwajn, Dommel and Dommel, IEEE Trans. PAS-101, 1982).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from throughfault.numerics.case import Cases, Complexes, Floats
from throughfault.numerics.connection import Transformer

__all__ = ["coil_drops", "coil_voltages", "magnetising_path"]


def coil_voltages(transformer: Transformer, voltage: Floats) -> Floats:
    """Return the no-load voltage of every coil, [case, coil] V, from terminal voltages [case, winding]."""
    root = np.sqrt(transformer.phases)
    letter = [winding.connection for winding in transformer.windings]
    share = {"Y": 1 / root, "A": 1 / root, "D": 1.0, "Z": 1 / 3, "I": 1.0}
    columns = [voltage[:, coil.winding] * share[letter[coil.winding]] for coil in transformer.coils]
    if transformer.auto:
        columns[0] = columns[0] - columns[1]
    return np.stack(columns, axis=1)


def coil_drops(transformer: Transformer, cases: Cases) -> tuple[Complexes, Complexes]:
    """Return positive- and zero-sequence drop matrices of the coils, per unit of each coil's own voltage.

    Returns
    -------
    tuple
        Both [case, coil + 1, coil + 1]; the last row stands for the fictitious winding of the magnetising path
        (zero where there is none, and always in the positive sequence).
    """
    magnetising = np.where(np.isinf(cases.magnetising), 0.0, cases.magnetising)
    none = np.zeros_like(magnetising)
    return _drops(transformer, cases, cases.z1, none), _drops(transformer, cases, cases.z0, magnetising)


def _drops(transformer: Transformer, cases: Cases, z: Complexes, last: Complexes) -> Complexes:
    winding = [coil.winding for coil in transformer.coils]
    count = len(winding)
    pair = np.zeros((len(cases), count + 1, count + 1), np.complex128)
    pair[:, :count, :count] = z[:, winding][:, :, winding]
    pair[:, :count, count] = pair[:, count, :count] = last[:, winding]
    for first in [index for index, coil in enumerate(transformer.coils) if coil.half == 1]:
        _split_interstar(pair, first - 1, cases.z0[:, winding[first], winding[first]])
    diagonal = np.arange(count + 1)
    pair[:, diagonal, diagonal] = 0.0
    drops: Complexes = -0.5 * pair
    return _auto(drops, cases.voltage) if transformer.auto else drops


def _split_interstar(pair: Complexes, first: int, own: Complexes) -> None:
    """Part an interstar winding into halves.

    In the zero sequence its halves work against each other: z_ab / 3 is the terminal's; what the halves leak between
    them is taken out of the pairs with other windings, so that those keep their value at the terminals.
    """
    halves = slice(first, first + 2)
    pair[:, halves, :] += own[:, None, None] / 2
    pair[:, :, halves] += own[:, None, None] / 2
    pair[:, first, first + 1] = pair[:, first + 1, first] = 3 * own


def _auto(drops: Complexes, voltage: Floats) -> Complexes:
    """Pass from the terminals H, X to the series and common parts: i_H = i_S, i_X = i_C - i_S."""
    q = voltage[:, 0] / (voltage[:, 0] - voltage[:, 1])
    change = np.broadcast_to(np.eye(drops.shape[1]), drops.shape).copy()
    change[:, 0, 0] = q
    change[:, 1, 0] = 1 - q
    passed: Complexes = change.transpose(0, 2, 1) @ drops @ change
    return passed


def magnetising_path(z0: ArrayLike, at: int, z_m: ArrayLike) -> Complexes:
    """Return ``Cases.magnetising`` for a zero-sequence magnetising impedance seen from one terminal, others open.

    Parameters
    ----------
    z0
        [..., winding, winding] pairwise zero-sequence impedance, per unit.
    at
        Index of the terminal from which ``z_m`` is seen.
    z_m
        [...] per unit on the same base.
    """
    column = np.array(np.asarray(z0, np.complex128)[..., at])
    column[..., at] = 0.0
    result: Complexes = column + np.asarray(z_m, np.complex128)[..., None]
    return result

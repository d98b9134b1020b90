"""Contradictions within the impedance rows and the zero-sequence data."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from throughfault.workbook.inputs.impedances import ImpedanceRow
from throughfault.workbook.inputs.messages import Fault, unknown_name
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.vector_group import WindingConnection
from throughfault.workbook.inputs.windings import PRINCIPAL

ROUNDING = 0.02  # relative difference of resistance and load loss that rounding explains
SMALLEST_DIFFERENCE = 0.01  # percentage points


def known_windings(file: UnitFile, index: int) -> Iterator[Fault]:
    """Find names that are no windings."""
    for name in file.impedances[index].between:
        if name not in file.windings:
            near = unknown_name(name, file.windings)
            yield Fault(("impedances", index, "between"), f"names '{name}', which is not a winding{near}")


def known_tapping(file: UnitFile, index: int) -> Iterator[Fault]:
    """Find names that are no tappings."""
    tapping, known = file.impedances[index].tapping, file.tapping_names
    if tapping not in known:
        text = f"is '{tapping}', which no winding has{unknown_name(tapping, known)}"
        yield Fault(("impedances", index, "tapping"), text)


def repeated_rows(file: UnitFile) -> Iterator[Fault]:
    """Find a pair and tapping given twice."""
    seen: dict[tuple[frozenset[str], str], int] = {}
    for index, row in enumerate(file.impedances):
        first = seen.setdefault((frozenset(row.between), row.tapping), index)
        if first != index:
            pair = " and ".join(row.between)
            text = f"repeats row {first + 1}: {pair} at tapping '{row.tapping}'."
            yield Fault(("impedances", index), text)


def resistance_below_impedance(file: UnitFile, index: int) -> Iterator[Fault]:
    """Compare resistance and impedance."""
    row = file.impedances[index]
    resistance, impedance = row.resistance_value.to("%"), row.impedance.to("%")
    if resistance >= impedance:
        key = "resistance" if row.resistance is not None else "load_loss"
        text = f"makes a resistance of {resistance:.4g} %, which must be below the impedance, {row.impedance}."
        yield Fault(("impedances", index, key), text)


def resistance_below_reduced_impedance(file: UnitFile, index: int) -> Iterator[Fault]:
    """See that the tolerance leaves a reactance."""
    row = file.impedances[index]
    if row.tolerance is None:
        return
    resistance, impedance = row.resistance_value.to("%"), row.impedance.to("%")
    reduced = impedance * (1.0 - row.tolerance.to("p.u."))
    if reduced <= resistance < impedance:  # a resistance above the impedance itself is a fault of its own
        text = f"leaves an impedance of {reduced:.4g} %, which must be above the resistance, {resistance:.4g} %"
        yield Fault(("impedances", index, "tolerance"), f"{text}, got {row.tolerance}.")


def resistance_and_loss(file: UnitFile, index: int) -> Iterator[Fault]:
    """Compare resistance with load loss where both are given."""
    row = file.impedances[index]
    if row.resistance is None or row.load_loss is None:
        return
    from_loss = 100.0 * row.load_loss.to("W") / row.base_power.to("VA")
    difference = abs(row.resistance.to("%") - from_loss)
    if difference > max(ROUNDING * from_loss, SMALLEST_DIFFERENCE):
        text = f"is {row.resistance}, but load_loss over base_power is {from_loss:.4g} %; give one, or make them agree."
        yield Fault(("impedances", index, "resistance"), text)


def direct_below_alternating(file: UnitFile, index: int) -> Iterator[Fault]:
    """Compare the d.c. with the a.c. resistance."""
    row = file.impedances[index]
    total = row.resistance_value
    if row.dc_resistance is None or (row.resistance is None and row.load_loss is None):
        return
    if row.dc_resistance.to("%") > total.to("%") * (1.0 + ROUNDING):
        text = f"must not be above the a.c. resistance, {total.to('%'):.4g} %, got {row.dc_resistance}."
        yield Fault(("impedances", index, "dc_resistance"), text)


def zero_sequence_path(file: UnitFile, index: int) -> Iterator[Fault]:
    """Find zero-sequence data of a pair that has no such path."""
    row = file.impedances[index]
    if row.zero_sequence is None:
        return
    path = ("impedances", index, "zero_sequence")
    if file.group.single_phase:
        yield Fault(path, "must not be given for a single-phase unit, which has no zero sequence.")
    elif set(row.between) <= set(file.windings) and not has_path(file, row):
        first, second = row.between
        text = f"must not be given where no path exists: between '{first}' and '{second}' of {file.group.symbol}"
        yield Fault(path, f"{text} no zero-sequence current can flow.")


def has_path(file: UnitFile, row: ImpedanceRow) -> bool:
    """Tell whether current can enter at one winding of the pair and be balanced in it or in the other."""
    pair = [file.connections[name] for name in row.between]
    if any(c.letter == "Z" and c.neutral for c in pair):  # balanced on each limb by itself
        return True
    entered = [_reaches_earth(file, c) for c in pair]
    closed = [reaches or c.letter == "D" for reaches, c in zip(entered, pair, strict=True)]
    return any(entered) and all(closed)


def _reaches_earth(file: UnitFile, connection: WindingConnection) -> bool:
    # The common winding of an autotransformer shares the first winding's neutral.
    return connection.neutral or (connection.letter == "auto" and file.group.windings[0].neutral)


def magnetising_winding(file: UnitFile) -> Iterator[Fault]:
    """See that the magnetising zero-sequence impedance is seen from a winding with a neutral."""
    if file.zero_sequence is None:
        return
    at, path = file.zero_sequence.at, ("zero_sequence", "at")
    if at not in file.windings:
        yield Fault(path, f"names '{at}', which is not a winding{unknown_name(at, file.windings)}")
    elif not _reaches_earth(file, file.connections[at]):
        text = f"names '{at}', which has no neutral in {file.group.symbol}: no zero-sequence current can enter."
        yield Fault(path, text)


def passive_pairs(file: UnitFile) -> Iterator[Fault]:
    """See that some set of coils can have the reactances of all pairs: no current may store negative energy."""
    names = list(file.windings)
    if len(names) < 3:
        return
    for tapping in file.tapping_names:
        for reduced in (False, True):
            reactances = _reactances(file, names, tapping, reduced=reduced)
            if reactances is None or _passive(reactances):
                continue
            less = ", less their tolerances" if reduced else ""
            no_such = f"no windings can have these impedances between pairs{less}."
            yield Fault(("impedances",), f"contradict each other at tapping '{tapping}': {no_such}")
            break


def _passive(reactances: NDArray[np.float64]) -> bool:
    last = reactances[:-1, -1]
    energy = 0.5 * (last[:, None] + last[None, :] - reactances[:-1, :-1])
    return bool(np.linalg.eigvalsh(energy)[0] > 0.0)


def _reactances(file: UnitFile, names: list[str], tapping: str, *, reduced: bool) -> NDArray[np.float64] | None:
    """Return pairwise reactances on one base, [winding, winding]; None where a row is missing.

    Reduced are guaranteed impedances by their tolerances, as the duty is run too.
    """
    rows = {(frozenset(row.between), row.tapping): row for row in file.impedances}
    found = np.zeros((len(names), len(names)))
    for i, j in combinations(range(len(names)), 2):
        pair = frozenset((names[i], names[j]))
        row = rows.get((pair, tapping)) or rows.get((pair, PRINCIPAL))
        if row is None:
            return None
        impedance = row.impedance.to("p.u.")
        if reduced and row.basis == "guaranteed" and row.tolerance is not None:
            impedance *= 1.0 - row.tolerance.to("p.u.")
        size = math.sqrt(max(impedance**2 - row.resistance_value.to("p.u.") ** 2, 0.0))
        found[i, j] = found[j, i] = size / row.base_power.to("MVA")
    return found


TABLE_CHECKS = (repeated_rows, magnetising_winding, passive_pairs)
ROW_CHECKS = (
    known_windings,
    known_tapping,
    resistance_below_impedance,
    resistance_below_reduced_impedance,
    resistance_and_loss,
    direct_below_alternating,
    zero_sequence_path,
)

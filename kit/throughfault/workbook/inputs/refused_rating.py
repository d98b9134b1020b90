"""Contradictions within the rating and the windings."""

from __future__ import annotations

import math
from collections.abc import Iterator

from throughfault.workbook.inputs.messages import Fault
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.windings import PRINCIPAL

SAME = 5e-4  # relative; a rounded nameplate value still names the same voltage


def letters_and_windings(file: UnitFile) -> Iterator[Fault]:
    """Compare the number of letters with the number of windings."""
    letters, windings = len(file.group.windings), len(file.windings)
    if letters != windings:
        names = ", ".join(file.windings)
        text = f"names {letters} windings, but {windings} are given ({names})."
        yield Fault(("rating", "vector_group"), text)


def phases_and_letters(file: UnitFile) -> Iterator[Fault]:
    """Compare phases, bank and letters."""
    phases, bank, single = file.rating.phases, file.rating.bank, file.group.single_phase
    if single and (phases == 3 or bank):
        whose = "a bank" if bank else "a three-phase unit"
        yield Fault(("rating", "vector_group"), f"has the letter I of a single-phase unit, but this is {whose}.")
    elif not single and phases == 1 and not bank:
        text = "has three-phase letters, but rating.phases is 1 and rating.bank is not true."
        yield Fault(("rating", "vector_group"), text)


def core_and_phases(file: UnitFile) -> Iterator[Fault]:
    """Compare the core with the phases."""
    phases, core, bank = file.rating.phases, file.rating.core, file.rating.bank
    if phases == 3 and core == "single-phase" and not bank:
        yield Fault(("rating", "core"), 'is "single-phase", but rating.phases is 3.')
    if (phases == 1 or bank) and core in {"three-limb", "five-limb"}:
        why = "rating.bank is true" if bank else "rating.phases is 1"
        text = f'is "{core}", which is a three-phase core, but {why}; write "single-phase" or "shell".'
        yield Fault(("rating", "core"), text)


def highest_first(file: UnitFile) -> Iterator[Fault]:
    """See that the first winding has the highest voltage."""
    names = list(file.windings)
    first = file.windings[names[0]].rated_voltage
    for name in names[1:]:
        voltage = file.windings[name].rated_voltage
        if voltage.to("V") > first.to("V") * (1.0 + SAME):
            text = f"must not be above that of the first winding, {first} of '{names[0]}', got {voltage}"
            yield Fault(("windings", name, "rated_voltage"), f"{text} (IEC 60076-1: high voltage first).")


def autotransformer_voltages(file: UnitFile) -> Iterator[Fault]:
    """See that the series winding of an autotransformer has a voltage at every tapping."""
    if not file.group.auto:
        return
    first, second = list(file.windings)[:2]
    for tapping in file.tapping_names:
        high, low = (file.voltage(name, tapping) for name in (first, second))
        if high.to("V") <= low.to("V") * (1.0 + SAME):
            text = f"must be above that of '{second}', {low}, at tapping '{tapping}' of an autotransformer, got {high}."
            yield Fault(("windings", first, "rated_voltage"), text)


def names_alike(file: UnitFile) -> Iterator[Fault]:
    """Find windings whose names differ by case only."""
    seen: dict[str, str] = {}
    for name in file.windings:
        other = seen.setdefault(name.casefold(), name)
        if other != name:
            yield Fault(("windings", name), f"must differ from '{other}' by more than upper and lower case.")


def self_cooled(file: UnitFile) -> Iterator[Fault]:
    """Compare the self-cooled rating with the rated power."""
    given = file.rating.self_cooled_power
    if given is None:
        return
    highest = max((w.rated_power for w in file.windings.values()), key=lambda power: power.to("VA"))
    if given.to("VA") > highest.to("VA") * (1.0 + SAME):
        text = f"must not be above the rated power, {highest}, got {given}."
        yield Fault(("rating", "self_cooled_power"), text)


def above_highest_voltage(file: UnitFile, name: str) -> Iterator[Fault]:
    """Compare Um with the rated voltage."""
    winding = file.windings[name]
    if winding.highest_voltage is None:
        return
    # A winding's insulation is chosen from its line-to-line voltage, in a single-phase unit its own.
    if winding.highest_voltage.to("V") < winding.rated_voltage.to("V"):
        text = f"must not be below rated_voltage, {winding.rated_voltage}, got {winding.highest_voltage}"
        yield Fault(("windings", name, "highest_voltage"), f"{text} (Um, IEC 60076-3).")


def principal_tapping(file: UnitFile, name: str) -> Iterator[Fault]:
    """See that the principal tapping is there and is the rated voltage."""
    winding = file.windings[name]
    path = ("windings", name, "tappings")
    if len(winding.tappings) == 0:
        return
    principal = winding.tappings.get(PRINCIPAL)
    if principal is None:
        names = ", ".join(winding.tappings)
        yield Fault(path, f'must name the tapping "{PRINCIPAL}", got {names}.')
    elif not math.isclose(principal.to("V"), winding.rated_voltage.to("V"), rel_tol=SAME):
        text = f"must be the rated voltage, {winding.rated_voltage}, got {principal}."
        yield Fault((*path, PRINCIPAL), text)


def stabilising_winding(file: UnitFile, name: str) -> Iterator[Fault]:
    """See that a stabilising winding is a delta."""
    if file.windings[name].stabilising and file.connections[name].letter != "D":
        text = f"is true, but the vector group {file.group.symbol} does not make '{name}' a delta"
        yield Fault(("windings", name, "stabilising"), f"{text} (IEC 60076-1: a stabilising winding is one).")


def stabilising_first(file: UnitFile) -> Iterator[Fault]:
    """See that at least two windings are brought out."""
    out = [n for n, c in file.connections.items() if not (c.stabilising or file.windings[n].stabilising)]
    if len(out) < 2:
        yield Fault(("windings",), "must have at least two that are brought out; stabilising windings are not.")


RATING_CHECKS = (
    letters_and_windings,
    phases_and_letters,
    core_and_phases,
    highest_first,
    autotransformer_voltages,
    names_alike,
    self_cooled,
    stabilising_first,
)
WINDING_CHECKS = (above_highest_voltage, principal_tapping, stabilising_winding)

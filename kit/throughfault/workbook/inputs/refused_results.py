"""Contradictions of limits and declared results with the results they name."""

from __future__ import annotations

from collections.abc import Iterator

from throughfault.quantities import UNITS, Quantity
from throughfault.workbook.inputs.limits import ProofStressShare
from throughfault.workbook.inputs.lines import KeyPath
from throughfault.workbook.inputs.messages import Fault, unknown_name
from throughfault.workbook.inputs.model import UnitFile

#: families of results, and whether their second part names a winding, a coil or something else
FAMILIES = {
    "duty": "winding",
    "thermal": "winding or coil",
    "field": "coil or pair",
    "force": "coil",
    "strength": "coil",
    "dynamic": "coil",
    "apparatus": "",
    "impedance": "",
    "test": "",
    "similar": "",
    "spread": "",
    "headroom": "",
}
#: last part of an id -> kind of quantity
KINDS_OF_RESULTS = {
    **dict.fromkeys(
        (
            "symmetrical", "peak", "peak_exact", "terminal_symmetrical", "terminal_peak", "short_time_current",
            "peak_current",
        ),
        "current",
    ),
    "density": "current density",
    "temperature": "temperature",
    "reactance": "ratio",
    **dict.fromkeys(("axial_flux", "radial_flux"), "flux density"),
    **dict.fromkeys(
        (
            "radial", "radial_outward", "radial_inward", "compression", "thrust_up", "thrust_down", "tilting",
            "end_force",
        ),
        "force",
    ),
    **dict.fromkeys(
        (
            "hoop_mean", "hoop", "hoop_tension", "hoop_compression", "radial_bending", "axial_bending", "spacer",
            "ring", "ties",
        ),
        "stress",
    ),
    "buckling": "number",
    "frequency": "frequency",
}  # fmt: skip
#: what an id of apparatus names after its family, and what it ends with
APPARATUS = ("tap_changer", "bushings", "neutral")
PROVEN = ("short_time_current", "peak_current")
_SUFFIXES = ("_envelope", "_redistributed")


def declared_results(file: UnitFile) -> Iterator[Fault]:
    """Compare declared ids and units."""
    for result, quantity in file.declared.items():
        path = ("declared", result)
        yield from _known(file, result, path)
        yield from _fitting(result, quantity, path)


def limits(file: UnitFile) -> Iterator[Fault]:
    """Compare ids and units of limits."""
    for result, limit in file.limits.items():
        path = ("limits", result)
        yield from _known(file, result, path)
        if isinstance(limit.value, Quantity):
            yield from _fitting(result, limit.value, (*path, "value"))
        elif isinstance(limit.value, ProofStressShare) and kind_of_result(result) != "stress":
            kind = kind_of_result(result) or "unknown"
            text = f"is a share of Rp0.2, but '{result}' is of kind {kind}."
            yield Fault((*path, "value"), text)


def _known(file: UnitFile, result: str, path: KeyPath) -> Iterator[Fault]:
    family, name = result.split(".")[:2]
    if family not in FAMILIES:
        yield Fault(path, f"is not a result: '{family}' is no family of results{unknown_name(family, FAMILIES)}")
        return
    if family == "apparatus":
        yield from _apparatus(file, result, path)
    names = _names(file, FAMILIES[family])
    if names and name not in names and not (family == "strength" and name == "clamping"):
        wanted = FAMILIES[family]
        yield Fault(path, f"is not a result: '{name}' is not a {wanted}{unknown_name(name, dict.fromkeys(names))}")


def _apparatus(file: UnitFile, result: str, path: KeyPath) -> Iterator[Fault]:
    """Compare an id such as ``apparatus.bushings.HV.peak_current`` with what the file can have."""
    _, name, *rest = result.split(".")
    if name not in APPARATUS:
        yield Fault(path, f"is not a result: '{name}' is no apparatus{unknown_name(name, APPARATUS)}")
        return
    if name != "tap_changer":
        winding, rest = (rest or [""])[0], rest[1:]
        if winding not in file.windings:
            yield Fault(path, f"is not a result: '{winding}' is not a winding{unknown_name(winding, file.windings)}")
    last = ".".join(rest)
    if last not in PROVEN:
        yield Fault(path, f"is not a result: '{last}' is nothing apparatus is proven for{unknown_name(last, PROVEN)}")


def _names(file: UnitFile, wanted: str) -> list[str]:
    """Return the names that may stand second in an id; none where that cannot be told."""
    windings = list(file.windings)
    coils = [coil.name for coil in file.design.coils] if file.design is not None else windings
    pairs = [f"{a}-{b}" for i, a in enumerate(windings) for b in windings[i + 1 :]]
    return {
        "winding": [*windings, "neutral"],
        "winding or coil": [*windings, *coils],
        "coil": coils,
        "coil or pair": [*coils, *pairs],
    }.get(wanted, [])


def kind_of_result(result: str) -> str | None:
    """Return the kind of quantity that a result id promises; None where the kit knows no such result."""
    if result.startswith("duty.neutral."):
        return "current"
    last = result.rsplit(".", 1)[-1]
    for suffix in _SUFFIXES:
        last = last.removesuffix(suffix)
    return KINDS_OF_RESULTS.get(last)


def _fitting(result: str, quantity: Quantity, path: KeyPath) -> Iterator[Fault]:
    kind = kind_of_result(result)
    if kind is not None and quantity.kind != kind:
        units = ", ".join(unit for unit, (k, _) in UNITS.items() if k == kind)
        wanted = "a bare number" if kind == "number" else f"a {kind} (unit one of {units})"
        yield Fault(path, f"must be {wanted} for '{result}', got {quantity}.")


RESULT_CHECKS = (declared_results, limits)

"""Contradictions of the network, the earthing and the components in the current's way."""

from __future__ import annotations

from collections.abc import Iterator

from throughfault.workbook.inputs.messages import Fault, unknown_name
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.system import Source, Withstand


def known_terminal(file: UnitFile, name: str) -> Iterator[Fault]:
    """Find networks at terminals that do not exist."""
    if name not in file.windings:
        near = unknown_name(name, [*file.windings, "prefault_voltage"])
        yield Fault(("system", name), f"is not a winding{near}")


def terminal_brought_out(file: UnitFile, name: str) -> Iterator[Fault]:
    """Find networks at a winding that is not brought out, and an exclusion that excludes nothing."""
    if name not in file.windings:
        return
    source = file.system.terminals[name]
    hidden = file.windings[name].stabilising or file.connections[name].stabilising
    if hidden and source.short_circuit_power is not None:
        text = f"must not be given: '{name}' is a stabilising winding, its terminals are not brought out."
        yield Fault(("system", name, "short_circuit_power"), text)
    if source.terminal_fault_excluded is not None and not (hidden and file.rating.bank):
        text = "holds for the stabilising winding of a bank only; other terminals are always faulted."
        yield Fault(("system", name, "terminal_fault_excluded"), text)


def fault_level(file: UnitFile, name: str) -> Iterator[Fault]:
    """Compare the keys of the fault level with each other."""
    source = file.system.terminals[name]
    power, path = source.short_circuit_power, ("system", name)
    if power == "table":
        winding = file.windings.get(name)
        if winding is not None and winding.highest_voltage is None:
            text = f'is "table", which needs windings.{name}.highest_voltage.'
            yield Fault((*path, "short_circuit_power"), text)
    elif source.column is not None:
        yield Fault((*path, "column"), 'holds for short_circuit_power = "table" only.')
    if power is None:
        yield from _needs_power(source, name)


#: what says something of a network only, or is run with one only
_OF_A_NETWORK = (
    "short_circuit_power_minimum", "x_over_r", "x0_over_x1", "peak_factor", "out_of_phase", "series_reactance",
)  # fmt: skip


def _needs_power(source: Source, name: str) -> Iterator[Fault]:
    for key in _OF_A_NETWORK:
        if getattr(source, key) is not None:
            yield Fault(("system", name, key), f"needs system.{name}.short_circuit_power beside it.")


def lowest_fault_level(file: UnitFile, name: str) -> Iterator[Fault]:
    """Compare the lowest fault level with the highest."""
    source = file.system.terminals[name]
    power, lowest = source.short_circuit_power, source.short_circuit_power_minimum
    if power is None or isinstance(power, str) or lowest is None:
        return
    if lowest.to("VA") > power.to("VA"):
        text = f"must not be above short_circuit_power, {power}, got {lowest}."
        yield Fault(("system", name, "short_circuit_power_minimum"), text)


def prefault_tappings(file: UnitFile) -> Iterator[Fault]:
    """Find names that are no tappings."""
    given = file.system.prefault_voltage
    for name in given if isinstance(given, dict) else ():
        if name not in file.tapping_names:
            near = unknown_name(name, file.tapping_names)
            yield Fault(("system", "prefault_voltage"), f"names '{name}', which is not a tapping{near}")


def earthed_winding(file: UnitFile, name: str) -> Iterator[Fault]:
    """Find earthing where there is no neutral."""
    path = ("earthing", name)
    if name not in file.windings:
        yield Fault(path, f"is not a winding{unknown_name(name, file.windings)}")
    elif file.earthing[name] != "isolated":
        yield from _needs_neutral(file, name, path)


def _needs_neutral(file: UnitFile, name: str, path: tuple[str, ...]) -> Iterator[Fault]:
    connection, symbol = file.connections[name], file.group.symbol
    if connection.letter == "auto":
        first = next(iter(file.windings))
        yield Fault(
            path,
            f"belongs under '{first}': an autotransformer has one neutral, named with its first winding.",
        )
    elif connection.letter == "D":
        yield Fault(path, f"must not be given: '{name}' is a delta in {symbol}, which has no neutral to earth.")
    elif not connection.neutral:
        text = f"must not be given: the neutral of '{name}' is not brought out in {symbol}."
        yield Fault(path, text)


def components(file: UnitFile) -> Iterator[Fault]:
    """Compare the data of tap changer, bushings and neutral leads."""
    if file.tap_changer is not None:
        yield from _peak_above_rms(file.tap_changer, ("tap_changer",))
    for name, component in file.bushings.items():
        if name not in file.windings:
            yield Fault(("bushings", name), f"is not a winding{unknown_name(name, file.windings)}")
        yield from _peak_above_rms(component, ("bushings", name))
    for name, component in file.neutral.items():
        if name not in file.windings:
            yield Fault(("neutral", name), f"is not a winding{unknown_name(name, file.windings)}")
        else:
            yield from _needs_neutral(file, name, ("neutral", name))
        yield from _peak_above_rms(component, ("neutral", name))


def _peak_above_rms(component: Withstand, path: tuple[str, ...]) -> Iterator[Fault]:
    rms, peak = component.short_time_current, component.peak_current
    if rms is not None and peak is not None and peak.to("A") < rms.to("A"):
        yield Fault((*path, "peak_current"), f"must not be below short_time_current, {rms}, got {peak}.")


TERMINAL_CHECKS = (known_terminal, terminal_brought_out, fault_level, lowest_fault_level)
EARTHING_CHECKS = (earthed_winding,)
NETWORK_CHECKS = (prefault_tappings, components)

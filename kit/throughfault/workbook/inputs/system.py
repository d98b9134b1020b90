"""The network at the terminals, the earthing and what stands in the current's way."""

from typing import Annotated, Any, Literal

from pydantic import model_validator

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.leaves import Number, OneOf
from throughfault.workbook.inputs.measures import ByTapping, Either, Impedance, Measure
from throughfault.workbook.inputs.section import Section
from throughfault.workbook.inputs.vocabulary import (
    MOST_WINDINGS,
    NETWORK,
    Angle,
    Current,
    Duration,
    Name,
    Ohm,
    Power,
    Title,
    Voltage,
    key,
)

Earthing = Annotated[complex | Literal["solid", "isolated"], Either(Impedance(), ("solid", "isolated"))]


class Source(Section):
    """The network behind one terminal."""

    voltage: Voltage | None = key(
        "Line-to-line voltage the fault level is stated at.",
        NETWORK,
        default=None,
        in_words="rated_voltage",
    )
    short_circuit_power: Annotated[Quantity | Literal["table"] | None, Either(Measure("MVA"), ("table",))] = key(
        'Fault level, three-phase; "table" takes the standard\'s default for highest_voltage.',
        NETWORK,
        default=None,
        in_words="no infeed",
    )
    column: Annotated[Literal["european", "north american"] | None, OneOf(("european", "north american"))] = key(
        'Practice followed by "table".', NETWORK, default=None, in_words="as the standard's edition"
    )
    short_circuit_power_minimum: Power | None = key(
        "Lowest fault level; those cases are run too.", NETWORK, default=None
    )
    x_over_r: Annotated[float, Number(most=1000.0)] | None = key(
        "Reactance over resistance of the source.", NETWORK, default=None, in_words="no resistance"
    )
    x0_over_x1: Annotated[float, Number(most=100.0)] | None = key(
        "Zero- over positive-sequence impedance of the source.",
        NETWORK,
        default=None,
        in_words="as the standard",
    )
    peak_factor: Annotated[float, Number(1.4, 2.83, least_allowed=True)] | None = key(
        "First peak over rms symmetrical current, replacing the standard's default above X/R of its table.",
        "agreement between purchaser and maker",
        default=None,
    )
    out_of_phase: Angle | None = key("Angle of out-of-phase closing, where it is to be run.", NETWORK, default=None)
    series_reactance: Ohm | None = key("Reactor between network and terminal.", NETWORK, default=None)
    terminal_fault_excluded: Title | None = key(
        "Why a fault at the terminals of a stabilising winding of a bank cannot occur.", NETWORK, default=None
    )


class System(Section):
    """The networks; in the file the terminals stand beside ``prefault_voltage`` as [system.HV] and so on."""

    prefault_voltage: Annotated[float | dict[str, float], ByTapping(Number(0.5, 1.5, least_allowed=True))] = key(
        "Voltage before the fault, per unit of the tapping's voltage; may be a table by tapping.",
        NETWORK,
        default=1.0,
    )
    terminals: dict[Name, Source] = key(
        "One table for each terminal with a network behind it.", default={}, at_most=MOST_WINDINGS
    )

    @model_validator(mode="before")
    @classmethod
    def _gather(cls, data: Any) -> Any:
        if not isinstance(data, dict):
            return data
        tables = {n: v for n, v in data.items() if isinstance(v, dict) and n != "prefault_voltage"}
        return {**{n: v for n, v in data.items() if n not in tables}, "terminals": tables}


class Withstand(Section):
    """What a component in the current's way is proven for."""

    short_time_current: Current | None = key("Short-time current, rms.", "component's data sheet", default=None)
    duration: Duration | None = key("Duration of the short-time current.", "component's data sheet", default=None)
    peak_current: Current | None = key("Peak current.", "component's data sheet", default=None)

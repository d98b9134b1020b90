"""Figures of a review: data of the assessment handed to the plots, with captions and text alternatives."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from markupsafe import Markup

from throughfault.render.html import clause, identity
from throughfault.render.parts.result import case_name
from throughfault.render.plots import (
    Curve,
    UnitPoint,
    duty_by_case,
    fault_wave,
    figure_html,
    temperature_curve,
    through_fault_curve,
)
from throughfault.workbook.assess.duty import Duty
from throughfault.workbook.assess.thermal import Thermal

__all__ = ["duty_figures", "thermal_figures"]


def duty_figures(duty: Duty) -> list[Markup]:
    """Return the wave of each winding's governing case, and the duty by case and tapping."""
    figures = [_wave(duty, name) for name in duty.waves if duty.waves[name] is not None]
    if duty.entries:
        caption = Markup("First peak of each winding by kind and place of the fault, tapping and infeed.")
        alternative = "Dots for every fault case, one panel for each winding; the governing case is ringed."
        flowing = [entry for entry in duty.entries if _flows(entry)]
        figures.append(figure_html(duty_by_case(flowing), "figure-duty", caption, alternative))
    return figures


def _flows(entry: Mapping[str, Any]) -> bool:
    """Tell whether the transformer carries any current: a fault may be fed past it."""
    return any(phase["rms"] for phases in entry["currents"].values() for phase in phases.values())


def _wave(duty: Duty, name: str) -> Markup:
    wave = duty.waves[name]
    if wave is None:
        return Markup("")
    peak = (wave.peak_time, wave.peak)
    drawn = fault_wave(wave.time, wave.current, offset=wave.direct, envelope=wave.upper, peak=peak)
    caption = Markup("Winding {}: exact current in case {}, closed at the worst angle.").format(
        identity(name), case_name(wave.case)
    )
    alternative = f"Offset fault current of winding {name} over time with its decaying offset, envelope and first peak."
    return figure_html(drawn, f"figure-wave-{name}", caption, alternative)


def thermal_figures(thermal: Thermal) -> list[Markup]:
    """Return the temperature of every winding over time, and the through-fault curve with the unit's own points."""
    figures = []
    curves = {name: w.curve for name, w in thermal.windings.items() if w.curve}
    if curves:
        limits = {name: w.limit.value for name, w in thermal.windings.items() if w.limit is not None}
        durations = {w.duration.value for name, w in thermal.windings.items() if name in curves}
        common = durations.pop() if len(durations) == 1 else None
        drawn = temperature_curve({name: (c["time"], c["standard"]) for name, c in curves.items()}, limits, common)
        caption = "Temperature of every winding by the deciding form while its largest symmetrical current flows."
        alternative = "Temperature of each winding over the duration of the fault, with the permitted temperature."
        figures.append(figure_html(drawn, "figure-temperature", caption, alternative))
    if thermal.through_fault.points:
        figures.append(_through_fault(thermal))
    return figures


def _through_fault(thermal: Thermal) -> Markup:
    found = thermal.through_fault
    curves = [Curve("thermal", *found.thermal)]
    if found.mechanical is not None:
        curves.append(Curve("mechanical, frequent faults", *found.mechanical))
    points = [UnitPoint(f"winding {p.winding}", p.multiple, p.duration) for p in found.points]
    caption = Markup("Through-fault curve by {}, with the unit's own points; for information, not a check.").format(
        clause("IEEEC57.109-2018")
    )
    alternative = "Permissible duration against current on logarithmic axes, with one point for each winding."
    return figure_html(through_fault_curve(curves, points), "figure-through-fault", caption, alternative)

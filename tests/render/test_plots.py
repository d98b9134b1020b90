"""Figures: same bytes every time, self-contained, told apart without colour, inert names."""

import base64
import re
from xml.etree import ElementTree as ET

import matplotlib as mpl
import numpy as np
import pytest
from tests.render import demo

from throughfault.render import plots
from throughfault.render.record.lint import lint

FIGURES = demo.figures()


@pytest.mark.parametrize("name", FIGURES)
def test_equal_bytes_every_time(name):
    """No date, no random id, whatever settings the user has."""
    first = plots.svg_bytes(FIGURES[name])
    with mpl.rc_context({"font.size": 30, "svg.fonttype": "none", "axes.grid": False}):
        again = plots.svg_bytes(demo.figures()[name])
    assert first == again


@pytest.mark.parametrize("name", FIGURES)
def test_an_image_loads_and_runs_nothing(name):
    """Well-formed, glyphs as paths, no reference outside, no script."""
    svg = plots.svg_bytes(FIGURES[name])
    root = ET.fromstring(svg)  # noqa: S314 - drawn here
    links = [v for e in root.iter() for k, v in e.attrib.items() if k.endswith("href")]
    assert all(link.startswith("#") for link in links)
    assert not {e.tag.rpartition("}")[2] for e in root.iter()} & {"script", "image", "text", "foreignObject"}


@pytest.mark.parametrize("name", FIGURES)
def test_axes_name_quantity_and_unit(name):
    """Every lower axis and, where it is a scale, every left one is labelled."""
    labels = [ax.get_xlabel() for ax in FIGURES[name].axes][-1:]
    assert all(labels)
    assert re.search(r", (ms|kA|s)$|multiples of rated current$", labels[0])


@pytest.mark.parametrize("name", ["wave", "temperature", "through"])
def test_curves_differ_by_line_or_marker(name):
    """Two curves of one figure never share line style and marker."""
    lines = [line for line in FIGURES[name].axes[0].get_lines() if not line.get_label().startswith("_")]
    kinds = [(str(line.get_linestyle()), str(line._dash_pattern), line.get_marker()) for line in lines]
    assert len(kinds) == len(set(kinds)) > 1


def test_duty_rings_the_governing_case():
    """The label states the largest peak of the winding."""
    largest = max(p["peak"] for c in demo.CASES for p in c["currents"]["LV"].values())
    assert f"{largest:.2f} kA" in [text.get_text() for text in FIGURES["duty"].axes[1].texts]


def test_one_tapping_and_a_winding_without_peaks():
    """A single tapping needs no spread; a winding whose peaks are absent is drawn empty."""
    case = {"id": "p/HV/LG/HV", "tapping": "p", "fault": "LG", "at": "HV", "currents": {"HV": {"a": {"rms": 1.0}}}}
    assert plots.duty_by_case([case]).axes[0].texts[:] == []


def test_names_are_never_read_as_formulas():
    """A name with dollar signs is text."""
    time = np.array([0.0, 1.0])
    made = plots.temperature_curve({"$\\frac{$": (time, time + 100)}, {"<b>$x$": 250.0})
    assert plots.svg_bytes(made)
    assert plots.svg_bytes(plots.fault_wave(time, time))


def test_figure_html_carries_caption_and_alternative():
    """An image of the page's own data, with text for those who cannot see it."""
    shown = plots.figure_html(FIGURES["wave"], "f", "Caption", 'A "wave"')
    match = re.fullmatch(
        r'<figure id="f"><img alt="A &#34;wave&#34;" src="data:image/svg\+xml;base64,([^"]+)"><figcaption>Caption</figcaption></figure>',
        shown,
    )
    assert base64.b64decode(match[1]).startswith(b"<?xml")
    assert not [fault for fault in lint(shown) if "allowlist" in fault or "source" in fault]

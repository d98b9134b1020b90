"""A made-up review in the form of the results file, for looking at pages and for tests. Every name is invented."""

import numpy as np
from tests.render.samples import AVERAGE, FACTOR

import throughfault.cells  # noqa: F401 - declares the library
from throughfault.declare import Check, Fragment, Limit, Missing, OpenPoint, Outcome, registry
from throughfault.quantities import Quantity
from throughfault.render import parts, plots

IEC = "IEC60076-5:2006, 4.2.3"
TAPPINGS = ("plus", "principal", "minus")

INPUTS = {
    "format": "throughfault-unit/1",
    "standard": "IEC 60076-5:2006",
    "identity": {
        "tag": "BV-T1",
        "title": "Brackwater Vale, transformer T1",
        "purchaser": "Brackwater Vale Networks",
        "maker": "Brackwater Vale Works",
        "order": "BV 2204",
        "revision": "A",
    },
    "rating": {
        "phases": 3,
        "frequency": "50 Hz",
        "vector_group": "YNd11",
        "immersion": "oil",
        "bank": False,
        "thermal_class": 105,
        "fault_duration": "2 s",
    },
    "windings": {
        "HV": {
            "rated_power": "40 MVA",
            "rated_voltage": "132 kV",
            "highest_voltage": "145 kV",
            "conductor_material": "copper",
            "conductor_section": "62 mm^2",
            "tappings": {"plus": "138.6 kV", "principal": "132 kV", "minus": "118.8 kV"},
        },
        "LV": {
            "rated_power": "40 MVA",
            "rated_voltage": "33 kV",
            "highest_voltage": "36 kV",
            "conductor_material": "copper",
            "conductor_section": "135 mm^2",
        },
    },
    "impedances": [
        {"between": ["HV", "LV"], "tapping": t, "impedance": z, "base_power": "40 MVA", "load_loss": "180 kW"}
        for t, z in zip(TAPPINGS, ("12.9 %", "12.5 %", "11.8 %"), strict=True)
    ],
    "system": {"prefault_voltage": {"minus": 1.1}, "HV": {"short_circuit_power": "10000 MVA", "x_over_r": 12.0}},
    "earthing": {"HV": "5 ohm + 12j ohm"},
    "limits": {"thermal.HV.temperature": {"value": "245 degC", "source": "maker's rules, sheet 12"}},
}


def case(tapping, at, fault, scale):
    """Make one case with the ratio of currents of a YNd unit."""

    def phases(winding, factor):
        return {
            p: {"rms": scale * factor * s, "angle": -80.0 + 120 * i, "peak": 2.55 * scale * factor * s}
            for i, (p, s) in enumerate(zip("abc", (1.0, 0.5 if fault != "3ph" else 1.0, 1.0), strict=True))
        }

    currents = {"HV": phases("HV", 1.0), "LV": phases("LV", 132 / 33 / 3**0.5)}
    return {
        "id": f"{tapping}/{at}/{fault}/HV",
        "tapping": tapping,
        "fault": fault,
        "at": at,
        "infeed": ["HV"],
        "required_by_standard": fault == "3ph",
        "currents": currents,
        "terminals": {"HV": currents["HV"], "LV": phases("LV", 4.0)},
    }


CASES = tuple(
    case(t, at, f, s * k)
    for t, s in zip(TAPPINGS, (1.21, 1.32, 1.58), strict=True)
    for at, f, k in (("LV", "3ph", 1.0), ("LV", "LL", 0.866), ("HV", "LG", 0.31), ("HV", "LLG", 0.42))
)
GOVERNING = "minus/LV/3ph/HV"


def outcome(id_, value, unit, symbol, reason=None):
    """Make a result with the usual source."""
    return Outcome(
        id_, value, unit, symbol, "peak_short_circuit_current", IEC, "recalled", GOVERNING if value else None, reason
    )


def steps():
    """Work two samples and some of the library."""
    made = [
        FACTOR.step("duty.peak_factor", ratio=Quantity(14, "1")),
        AVERAGE.step(
            "thermal.HV",
            initial_temperature=Quantity(105, "degC"),
            current_density=Quantity(25.5, "A/mm^2"),
            duration=Quantity(2, "s"),
        ),
    ]
    library = registry()
    made.append(
        library["symmetrical_short_circuit_current"].step(
            "duty.HV.symmetrical",
            **{
                name: Quantity({"kV": 118.8, "ohm": 35.4}.get(s.unit, 1.0), s.unit)
                for name, s in library["symmetrical_short_circuit_current"].arguments.items()
            },
        )
    )
    return made


LIMIT = Limit(250.0, "degC", "at most", "IEC60076-5:2006, Table 3", "recalled")
CHECKS = (
    Check(
        "thermal.HV.temperature",
        147.213456,
        "degC",
        LIMIT.replaced(Quantity(245, "degC"), "maker's rules, sheet 12"),
        "thermal",
        GOVERNING,
    ),
    Check("thermal.LV.temperature", 283.4, "degC", LIMIT, "thermal", GOVERNING),
    Check("dynamic.tap_changer", 6.1, "kA", Limit(6.0, "kA", "at most", "maker", "maker"), "dynamic", GOVERNING),
    Check("dynamic.route", None, "1", None, "dynamic", reason="no route is complete"),
)
POINTS = (
    OpenPoint(
        "duty.peak_exact",
        "the exact first peak of 'HV' is {more} above the standard's factor; see `principal/LV/3ph/HV`",
        {"more": Quantity(1.27, "%")},
        "IEC60076-5:2006, 4.2.3",
    ),
    OpenPoint(
        "limit.thermal.LV.temperature",
        "the limit carries a verdict and is recalled",
        clause="IEC60076-5:2006, Table 3",
        blocking=True,
    ),
    OpenPoint("category", "the neutral earthing is not given in every operating state", blocking=True),
)
MISSING = (Missing("strength", ("design.coils", "design.clamping"), "forces need the coils"),)
DUTY = Fragment(
    quantities=(
        outcome("duty.HV.symmetrical", 1.58, "kA", "I"),
        outcome("duty.HV.peak", 4.029, "kA", r"\hat{\imath}"),
        outcome("duty.HV.peak_exact", 4.08, "kA", r"\hat{\imath}"),
        outcome("duty.LV.symmetrical", 3.6489, "kA", "I"),
        outcome("duty.LV.peak", 9.3047, "kA", r"\hat{\imath}"),
        outcome("duty.LV.peak_exact", None, "kA", r"\hat{\imath}", "outside the range X/R 1 to 14"),
        outcome("duty.HV.terminal_symmetrical", 1.58, "kA", "I"),
        outcome("duty.HV.terminal_peak", 4.029, "kA", r"\hat{\imath}"),
        outcome("duty.LV.terminal_symmetrical", 6.32, "kA", "I"),
        outcome("duty.LV.terminal_peak", 16.116, "kA", r"\hat{\imath}"),
        outcome("duty.neutral.HV", 1.02, "kA", "I"),
    ),
    steps=tuple(s for s in steps() if s.id.startswith("duty")),
    cases=CASES,
    checks=CHECKS[2:3],
    open_points=POINTS[:1],
)
THERMAL = Fragment(
    quantities=(
        outcome("thermal.HV.density", 25.48, "A/mm^2", "J"),
        outcome("thermal.HV.temperature", 147.213456, "degC", r"\theta_1"),
        outcome("thermal.HV.permissible_duration", 8.123, "s", "t"),
        outcome("thermal.LV.density", 27.03, "A/mm^2", "J"),
        outcome("thermal.LV.temperature", 283.4, "degC", r"\theta_1"),
        outcome("thermal.LV.permissible_duration", 7.25, "s", "t"),
    ),
    steps=tuple(s for s in steps() if s.id.startswith("thermal")),
    checks=CHECKS[:2],
)
REQUIREMENT = Fragment(quantities=(outcome("requirement.minimum_impedance", 11.0, "%", "z"),))
VERDICT = Fragment(checks=CHECKS, missing=MISSING, open_points=POINTS)
DEFAULTS = {"rating.core": "three-limb", "system.HV.x0_over_x1": "1 and 3, both run", "windings.HV.eddy_share": "0"}
UNCONFIRMED = ("thermal.LV.temperature",)
RESULTS = {
    "format": "throughfault-results/1",
    "unit": {"tag": "BV-T1", "title": "Brackwater Vale, transformer T1", "revision": "A"},
    "standard": "IEC 60076-5:2006",
    "kit": {"version": "0.1.0"},
    "verdicts": {"thermal": "does not withstand", "dynamic": "not assessed", "overall": "does not withstand"},
    "route": "none complete",
    "inputs": INPUTS,
    "defaults": DEFAULTS,
    "unconfirmed": {"limits": 1, "checks": list(UNCONFIRMED)},
    "quantities": {**DUTY.entry()["quantities"], **THERMAL.entry()["quantities"], **REQUIREMENT.entry()["quantities"]},
    "steps": [s.entry() for s in steps()],
    "checks": VERDICT.entry()["checks"],
    "cases": [dict(c) for c in CASES],
    "missing": VERDICT.entry()["missing"],
    "open_points": VERDICT.entry()["open_points"],
}


def figures():
    """Draw every figure from made-up curves."""
    time = np.linspace(0, 100, 400)
    decay = np.exp(-time / 35)
    wave = 3.65 * 2**0.5 * (decay - np.cos(2 * np.pi * time / 20))
    seconds = np.linspace(0, 2, 60)
    multiple = np.geomspace(2, 25, 50)
    return {
        "wave": plots.fault_wave(
            time,
            wave,
            offset=3.65 * 2**0.5 * decay,
            envelope=3.65 * 2**0.5 * (1 + decay),
            peak=(9.8, float(wave.max())),
        ),
        "duty": plots.duty_by_case(CASES),
        "temperature": plots.temperature_curve(
            {"HV": (seconds, 105 + 21 * seconds), "LV": (seconds, 105 + 89 * seconds)}, {"HV": 250.0, "LV": 250.0}, 2.0
        ),
        "through": plots.through_fault_curve(
            [
                plots.Curve("thermal", multiple, 1250 / multiple**2),
                plots.Curve("mechanical", multiple[30:], 400 / multiple[30:] ** 2),
            ],
            [plots.UnitPoint("HV, governing case", 8.0, 2.0)],
        ),
    }


def html():
    """Return the findings of a made-up notebook, part by part."""
    drawn = {
        name: plots.figure_html(f, f"figure-{name}", caption, alternative)
        for (name, f), (caption, alternative) in zip(
            figures().items(),
            (
                (
                    "Fault current of the governing case, with its decaying offset and envelope.",
                    "Current against time: an offset wave decaying from its first peak.",
                ),
                (
                    "First peak of every case; the governing one is ringed.",
                    "Dots of the first peak by kind of fault, one panel for each winding.",
                ),
                (
                    "Winding temperature during the fault against the limit.",
                    "Temperature rising with time for each winding, with a line at the limit.",
                ),
                ("Through-fault curve with the unit's own point.", "Duration against current on logarithmic axes."),
            ),
            strict=True,
        )
    }
    return {
        "summary": parts.summary_part(RESULTS, UNCONFIRMED),
        "unit_data": parts.unit_data_part(INPUTS, DEFAULTS),
        "requirement": parts.requirement_part(
            REQUIREMENT.entry(),
            (),
            "II",
            [("minimum impedance", "requirement.minimum_impedance", "")],
            [("3ph", "required")],
        ),
        "duty": parts.duty_part(
            DUTY.entry(), DUTY.steps, [drawn["wave"], drawn["duty"]], [registry()["peak_factor_exact"]]
        ),
        "thermal": parts.thermal_part(THERMAL.entry(), THERMAL.steps, [drawn["temperature"], drawn["through"]]),
        "verdict": parts.verdict_part(RESULTS["verdicts"], RESULTS["checks"], UNCONFIRMED, RESULTS["route"]),
        "open_point": parts.open_point_part(RESULTS["open_points"], RESULTS["missing"]),
        "signature": parts.signature_part("BV-T1", "A"),
    }


def notebook(findings=None):
    """Make the executed notebook that shows the parts."""
    from nbformat.v4 import new_code_cell, new_markdown_cell, new_notebook, new_output

    cells = [new_markdown_cell("# Rating review of the ability to withstand a short circuit")]
    for name, shown in (findings or html()).items():
        output = new_output("execute_result", data={"text/html": str(shown), "text/plain": name}, execution_count=1)
        cells.append(new_code_cell(f"tf.{name}(review)", outputs=[output], execution_count=1))
    return new_notebook(cells=cells)

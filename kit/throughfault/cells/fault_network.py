"""The fault network of a transformer and its systems, phase by phase."""

from __future__ import annotations

from typing import Any

import numpy as np

from throughfault.declare import Equation, algorithm
from throughfault.numerics.case import LINE_EARTH, Cases
from throughfault.numerics.connection import Transformer, Winding
from throughfault.numerics.impedance import coil_voltages
from throughfault.numerics.network import Solution, solve
from throughfault.sources import Source

__all__ = ["fault_currents"]


def _example() -> dict[str, Any]:
    """Return a line-to-earth fault at the star side of an invented star-delta unit, fed from both sides."""
    unit = Transformer((Winding("HV", "Y"), Winding("LV", "D", 11)))
    pair = 0.0045 + 0.1249j
    cases = Cases.of(
        unit,
        voltage=[132e3, 33e3],
        base_power=40e6,
        z1=[[0, pair], [pair, 0]],
        z0=[[0, 0.9 * pair], [0.9 * pair, 0]],
        fault=[LINE_EARTH],
        at=0,
        frequency=50.0,
        source_z1=[0.15 + 1.73j, 0.2 + 2.1j],
        source_z0=[0.3 + 3.5j, 0.2 + 2.1j],
        neutral=[8.0, np.inf],
    )
    return {"transformer": unit, "cases": cases}


def _ampere_turns(given: dict[str, Any], got: Solution) -> float:
    """Ampere-turns left over on any limb, over the greatest of a winding: voltage stands for turns."""
    turns = coil_voltages(given["transformer"], given["cases"].voltage)
    each = turns[:, :, None] * got.coil_current
    return float(np.max(np.abs(each.sum(1))) / np.max(np.abs(each)))


def _kirchhoff(given: dict[str, Any], got: Solution) -> float:
    """Currents into the terminals of the star winding less the current of its neutral."""
    del given
    into = got.terminal_current[:, 0].sum(1)
    out = got.neutral_current[:, 0]
    return float(np.max(np.abs(into - out)) / np.max(np.abs(into)))


def _unfaulted_phases(given: dict[str, Any], got: Solution) -> float:
    """Compare the current into the fault in the two sound phases with that of the faulted one."""
    del given
    return float(np.max(np.abs(got.fault_current[:, 1:])) / np.max(np.abs(got.fault_current[:, 0])))


def _sequence_form(given: dict[str, Any], got: Solution) -> float:
    """Difference from the series connection of the three sequence networks."""
    expected = 3 * given["cases"].prefault / (got.z1 + got.z2 + got.z0)
    return float(np.max(np.abs(got.fault_current[:, 0] / expected - 1)))


@algorithm(
    title="Currents of the fault network",
    source=Source("Brandwajn-1982", "p. 1369; connections and faults by incidence", "recalled"),
    equations=(
        Equation(r"\sum_w N_w I_{w,p}=0\quad\text{on every limb}\;p", _ampere_turns),
        Equation(r"I_a+I_b+I_c=I_N", _kirchhoff),
        Equation(r"I_{F,b}=I_{F,c}=0", _unfaulted_phases),
        Equation(r"I_{F,a}=\frac{3\,E}{Z_1+Z_2+Z_0}", _sequence_form),
    ),
    example=_example,
    valid_for=(
        "linear leakage impedances; no saturation, no load and no circulating current before the fault",
        "two or more windings in star, delta, interstar, auto or single-phase connection on common limbs",
    ),
    checks=(
        "tests/numerics/test_network_sequence.py::test_star_delta_faulted_on_the_star_side: symmetrical components",
        "tests/numerics/test_network_sequence.py::test_autotransformer_with_delta_and_both_sides_fed: the same, auto",
        "tests/numerics/test_network_nodal.py::test_every_current_of_random_networks_equals_nodal_analysis: any unit",
        "tests/numerics/test_network_properties.py::test_ampere_turns_balance_on_every_limb: for any unit",
        "tests/numerics/test_network_properties.py::test_energy_in_the_impedances_is_never_negative: for any unit",
        "tests/published/test_fault_current_network.py::TestIec60909Network: printed currents of eight buses",
    ),
)
def fault_currents(transformer: Transformer, cases: Cases) -> Solution:
    """Solve phase quantities of all cases at once: windings, terminals, neutrals and the fault.

    The windings' impedances come from the pairs, each limb balancing its ampere-turns; sources, neutral
    impedances and the fault are branches. The equations are shown for a line-to-earth fault.
    """
    return solve(transformer, cases)

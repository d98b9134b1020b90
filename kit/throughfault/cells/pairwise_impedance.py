"""From impedances measured between pairs of terminals to windings and equivalent stars."""

from __future__ import annotations

from typing import Annotated

from throughfault import nomenclature as nom
from throughfault.declare import Condition, Range, cell
from throughfault.sources import Source

TERMINAL = Source("CircuitTheory", "ampere-turns and voltages of series and common windings", "derived")
TESTS = "tests/cells/test_pairwise_impedance.py"
AGAINST = f"{TESTS}::test_pairs_of_coils_give_the_terminal_impedances_back: coupled coils of an autotransformer"


@cell(
    title="Leg of the equivalent star of three windings",
    source=Source("Wagner-Evans-1933", "equivalent circuit of a three-winding transformer", "derived"),
    checks=("tests/published/fault_current.toml::three-winding unit of 15 MVA: 2, 5 and 7 % of a textbook",),
)
def star_leg(
    impedance_12: Annotated[float, nom.impedance_12],
    impedance_13: Annotated[float, nom.impedance_13],
    impedance_23: Annotated[float, nom.impedance_23],
) -> Annotated[float, nom.star_leg]:
    """Leg of winding 1; all impedances on one base, angles taken as equal. A leg may be negative."""
    z_12, z_13, z_23 = impedance_12, impedance_13, impedance_23
    return (z_12 + z_13 - z_23) / 2


@cell(
    title="Ratio of an autotransformer's high voltage to its series winding",
    source=TERMINAL,
    valid_for=(
        Range("high_voltage", above=0.0),
        Range("low_voltage", above=0.0),
        Condition("U_X below U_H", lambda high_voltage, low_voltage: low_voltage < high_voltage),
    ),
    checks=(f"{TESTS}::test_ratio_is_turns_of_both_windings_over_the_series_turns: 220/110 kV",),
)
def auto_ratio(
    high_voltage: Annotated[float, nom.high_voltage], low_voltage: Annotated[float, nom.low_voltage]
) -> Annotated[float, nom.auto_ratio]:
    """Divide the turns of both windings by those of the series winding."""
    U_H, U_X = high_voltage, low_voltage
    return U_H / (U_H - U_X)


@cell(
    title="Impedance between series and common winding",
    source=TERMINAL,
    valid_for=(Range("terminal_impedance_hx", above=0.0), Range("auto_ratio", above=1.0)),
    checks=(AGAINST, "tests/published/fault_current.toml::20 kVA unit as autotransformer: 7.29 % of a textbook"),
)
def series_common_impedance(
    terminal_impedance_hx: Annotated[float, nom.terminal_impedance_hx], auto_ratio: Annotated[float, nom.auto_ratio]
) -> Annotated[float, nom.series_common_impedance]:
    """On the same power, each winding at its own voltage."""
    z_HX, q = terminal_impedance_hx, auto_ratio
    return z_HX * q**2


@cell(
    title="Impedance between series winding and tertiary",
    source=TERMINAL,
    valid_for=(
        Range("terminal_impedance_hx", above=0.0),
        Range("terminal_impedance_ht", above=0.0),
        Range("terminal_impedance_xt", above=0.0),
        Range("auto_ratio", above=1.0),
    ),
    checks=(AGAINST,),
)
def series_tertiary_impedance(
    terminal_impedance_hx: Annotated[float, nom.terminal_impedance_hx],
    terminal_impedance_ht: Annotated[float, nom.terminal_impedance_ht],
    terminal_impedance_xt: Annotated[float, nom.terminal_impedance_xt],
    auto_ratio: Annotated[float, nom.auto_ratio],
) -> Annotated[float, nom.series_tertiary_impedance]:
    """On the same power, each winding at its own voltage; the common winding keeps the impedance of its terminal."""
    z_HX, z_HT, z_XT, q = terminal_impedance_hx, terminal_impedance_ht, terminal_impedance_xt, auto_ratio
    return z_HX * q * (q - 1) + z_HT * q - z_XT * (q - 1)

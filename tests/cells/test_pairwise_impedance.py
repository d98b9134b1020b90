"""Terminal impedances of an autotransformer against its coupled coils."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from throughfault.cells.pairwise_impedance import (
    auto_ratio,
    series_common_impedance,
    series_tertiary_impedance,
    star_leg,
)

TURNS = np.array([110.0, 110.0, 33.0])  # series, common, tertiary: volts per phase stand for turns


def leakage(z_sc, z_st, z_ct):
    """Legs of the star of three coils, from their pairs in per cent on one base."""
    # legs on one base: the drop of coil i is leg i times its per-unit current
    return np.array([star_leg(z_sc, z_st, z_ct), star_leg(z_sc, z_ct, z_st), star_leg(z_st, z_ct, z_sc)])


def measured(legs, current):
    """Per-unit drop seen when ampere-turns `current` (summing to zero) flow: sum of leg times current squared."""
    return float(np.sum(legs * current**2))


@given(st.floats(5, 30), st.floats(5, 40), st.floats(5, 40), st.floats(1.2, 8.0))
def test_pairs_of_coils_give_the_terminal_impedances_back(z_sc, z_st, z_ct, q):
    """Coils with z_SC, z_ST, z_CT are joined to an autotransformer; its terminals are measured and converted back.

    With the high side at U_H, ampere-turns per unit: H fed, X shorted: series 1/q in MMF, common -1/q.
    """
    legs = leakage(z_sc, z_st, z_ct)
    share = 1.0 / q  # turns of the series winding over all turns
    # H to X shorted: the line current at base power makes ampere-turns `share` in series, the opposite in common
    z_hx = measured(legs, np.array([share, -share, 0.0]))
    # H to T shorted: series and common carry the same line current, in proportion to their turns
    z_ht = measured(legs, np.array([share, 1.0 - share, -1.0]))
    # X to T shorted: the common winding alone
    z_xt = measured(legs, np.array([0.0, 1.0, -1.0]))
    assert series_common_impedance(z_hx, q) == pytest.approx(z_sc, rel=1e-9)
    assert z_xt == pytest.approx(z_ct, rel=1e-9)
    assert series_tertiary_impedance(z_hx, z_ht, z_xt, q) == pytest.approx(z_st, rel=1e-9)


def test_ratio_is_turns_of_both_windings_over_the_series_turns():
    """auto_ratio of 220/110 kV is 2: half of the turns are series turns."""
    assert auto_ratio(220.0, 110.0) == pytest.approx((TURNS[0] + TURNS[1]) / TURNS[0])


@given(st.floats(1, 30), st.floats(1, 30), st.floats(1, 30))
def test_legs_add_up_to_the_pairs(a, b, c):
    """star_leg: two legs in series are the impedance of their pair."""
    assert star_leg(a, b, c) + star_leg(a, c, b) == pytest.approx(a)

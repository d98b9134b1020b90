"""All-heat-stored form: forms, constants and iteration."""

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from throughfault.cells import heat_stored
from throughfault.cells.heat_content import heat_content_copper, start_eddy_share, start_loss
from throughfault.cells.heat_stored import (
    final_temperature_all_heat_stored,
    final_temperature_exponential,
    final_temperature_series,
    permissible_duration_heat_stored,
    permitted_heating_ratio_exponential,
    permitted_heating_ratio_series,
)
from throughfault.errors import OutsideValidity
from throughfault.tables import table

SHARES = st.floats(0.0, 0.5)
CASE = {
    "material": "copper", "start_temperature": 110.0, "current_density": 70.0, "duration": 2.0, "eddy_share": 0.08,
    "reference_temperature": 85.0, "insulation_section": 40.0, "conductor_section": 62.0,
}  # fmt: skip


@pytest.mark.parametrize("ratio", [0.1, 0.5, 1.0])
@pytest.mark.parametrize("share", [0.0, 0.1, 0.4])
def test_exponential_form_solves_the_heat_equation(ratio, share):
    """final_temperature_exponential against dy/dm = y + e/y in units of the starting temperature above zero resistance."""
    end = solve_ivp(lambda _, y: y + share / y, (0.0, ratio), [1.0], rtol=1e-11, atol=1e-12).y[0, -1]
    expected = (234.5 + 110.0) * end - 234.5
    assert final_temperature_exponential(110.0, 234.5, ratio, share) == pytest.approx(expected, abs=1e-6)


@given(st.floats(0.01, 0.6), SHARES)
def test_series_form_stays_near_the_exponential(ratio, share):
    """final_temperature_series within 7 % of the rise up to a ratio of 0.6."""
    rise = final_temperature_series(110.0, 234.5, ratio, share) - 110.0
    exact = final_temperature_exponential(110.0, 234.5, ratio, share) - 110.0
    assert rise == pytest.approx(exact, rel=0.07)


def test_series_form_leaves_the_exponential_above_its_range():
    """At a ratio of 0.8 and a share of 0.1 the series gives a rise of 1.264, the exponential 1.313 (own arithmetic)."""
    series = 0.8 * (1 + 0.1 + 0.6 * 0.8)
    assert series == pytest.approx(1.264)
    assert (final_temperature_exponential(0.0, 234.5, 0.8, 0.1)) / 234.5 == pytest.approx(1.313, abs=0.0005)


@given(st.floats(5.0, 250.0), SHARES)
def test_permitted_ratios_reach_the_permitted_temperature(rise, share):
    """permitted_heating_ratio_series and permitted_heating_ratio_exponential invert their forms."""
    by_series = permitted_heating_ratio_series(110.0, 234.5, 110.0 + rise, share)
    assert final_temperature_series(110.0, 234.5, by_series, share) == pytest.approx(110.0 + rise, rel=1e-9)
    exact = permitted_heating_ratio_exponential(110.0, 234.5, 110.0 + rise, share)
    assert final_temperature_exponential(110.0, 234.5, exact, share) == pytest.approx(110.0 + rise, rel=1e-9)


@pytest.mark.parametrize("limit", [200.0, 250.0])
def test_permissible_duration_reaches_the_permitted_temperature(limit):
    """permissible_duration_heat_stored, put into the whole iteration, gives the limit."""
    row = table("conductor_material").row(material="copper")
    loss = start_loss(70.0, 110.0, 234.5, row["resistivity_20"], row["density"])
    share = start_eddy_share(0.08, 85.0, 110.0, 234.5)
    ratio = permitted_heating_ratio_series(110.0, 234.5, limit, share)
    duration = permissible_duration_heat_stored(
        ratio, heat_content_copper(110.0, limit, 40.0, 62.0), 110.0, 234.5, loss
    )
    assert ratio <= heat_stored.SERIES_TO
    assert final_temperature_all_heat_stored(**{**CASE, "duration": duration}) == pytest.approx(limit, abs=1e-6)


def test_insulation_takes_up_heat():
    """With more insulation the conductor stays cooler, with eddy loss it gets hotter."""
    plain = final_temperature_all_heat_stored(**CASE)
    assert final_temperature_all_heat_stored(**{**CASE, "insulation_section": 80.0}) < plain
    assert final_temperature_all_heat_stored(**{**CASE, "eddy_share": 0.2}) > plain


@pytest.mark.parametrize("duration", [0.0, -1.0, 10.5])
def test_iteration_refuses_other_durations(duration):
    """All heat is taken as stored up to 10 s only."""
    with pytest.raises(OutsideValidity) as raised:
        final_temperature_all_heat_stored(**{**CASE, "duration": duration})
    assert str(raised.value) == (
        "final_temperature_all_heat_stored: 'duration' must be above 0 and at most 10 s "
        f"(IEEEC57.12.00-2015, 7.4), got {duration:g} s."
    )


@pytest.mark.parametrize("density", [200.0, 400.0])
def test_iteration_refuses_to_melt(density):
    """Beyond 2000 degC the repetition is refused, not continued."""
    with pytest.raises(OutsideValidity) as raised:
        final_temperature_all_heat_stored(**{**CASE, "current_density": density, "duration": 8.0})
    assert str(raised.value) == (
        "final_temperature_all_heat_stored: the conductor passes 2000 degC (IEEEC57.12.00-2015, 7.4)."
    )

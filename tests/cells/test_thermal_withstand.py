"""Average-temperature form, exact exponential and what inverts them."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from throughfault.cells.thermal_withstand import (
    average_temperature_aluminium,
    average_temperature_copper,
    current_density,
    exact_permissible_duration,
    exact_temperature,
    exact_temperature_with_eddy_loss,
    heat_integral,
    heat_integral_with_offset,
    permissible_duration_aluminium,
    permissible_duration_copper,
    temperature_after_pause,
)
from throughfault.numerics.wave import heat_integral as wave_heat_integral
from throughfault.tables import table

STARTS, DENSITIES = st.floats(20.0, 155.0), st.floats(10.0, 90.0)
CONSTANTS = {"copper": (106000.0, 235.0), "aluminium": (45700.0, 225.0)}
AVERAGE = {"copper": average_temperature_copper, "aluminium": average_temperature_aluminium}
ALLOWED = {"copper": permissible_duration_copper, "aluminium": permissible_duration_aluminium}


def test_density_of_a_kiloampere():
    """current_density: 1 kA in 1000 mm^2 is 1 A/mm^2."""
    assert current_density(1.0, 1000.0) == 1.0


@pytest.mark.parametrize("material", ["copper", "aluminium"])
@given(STARTS, st.floats(10.0, 60.0))
def test_average_form_lies_just_above_the_exponential(material, start, density):
    """average_temperature_copper and average_temperature_aluminium: never below the exact one; 2.5 % of the rise at most."""
    constant, offset = CONSTANTS[material]
    average = AVERAGE[material](start, density, 2.0)
    exact = exact_temperature(start, density**2 * 2.0, constant, offset)
    assert exact - 1e-9 <= average <= exact + 0.025 * (exact - start) + 1e-9


@pytest.mark.parametrize("material", ["copper", "aluminium"])
def test_constants_are_those_of_the_table(material):
    """The average forms and their inverses carry constant and offset of the table: half the constant adds 2 (T + T_k)."""
    row = table("iec60076_5_2006_thermal_constant").row(material=material)
    constant, offset = row["constant"], row["temperature_offset"]
    assert AVERAGE[material](100.0, constant**0.5, 0.5) == pytest.approx(100.0 + 2 * (100.0 + offset), rel=1e-12)
    allowed = ALLOWED[material](100.0, constant**0.5, 100.0 + 2 * (100.0 + offset))
    assert allowed == pytest.approx(0.5, rel=1e-12)


def test_average_form_errs_high_by_the_known_amounts():
    """Against the exponential from 105 degC, copper: +0.5 K at 198 degC, +2.3 K at 263 degC (own arithmetic)."""
    for density, level, excess in ((80.0, 198.4, 0.5), (100.0, 263.1, 2.3)):
        average = average_temperature_copper(105.0, density, 2.0)
        exact = exact_temperature(105.0, density**2 * 2.0, 106000.0, 235.0)
        assert average == pytest.approx(level, abs=0.05)
        assert average - exact == pytest.approx(excess, abs=0.15)


@pytest.mark.parametrize("material", ["copper", "aluminium"])
@given(STARTS, st.floats(25.0, 90.0), st.floats(1.0, 200.0))
def test_permissible_duration_reaches_the_permitted_temperature(material, start, density, rise):
    """permissible_duration_copper and permissible_duration_aluminium invert the average form."""
    duration = ALLOWED[material](start, density, start + rise)
    assert AVERAGE[material](start, density, duration) == pytest.approx(start + rise, rel=1e-9)


@given(STARTS, DENSITIES, st.floats(1.0, 200.0))
def test_exact_duration_reaches_the_permitted_temperature(start, density, rise):
    """exact_permissible_duration inverts exact_temperature."""
    duration = exact_permissible_duration(start, density, start + rise, 106000.0, 235.0)
    assert exact_temperature(start, density**2 * duration, 106000.0, 235.0) == pytest.approx(start + rise, rel=1e-9)


@pytest.mark.parametrize(("share", "density"), [(0.0, 60.0), (0.15, 80.0), (0.6, 40.0)])
def test_exact_forms_solve_the_heat_equation(share, density):
    """exact_temperature and exact_temperature_with_eddy_loss against integration of dy/dt = 2 J^2/C (y + e yr^2/y)."""
    yr = 75.0 + 235.0

    def rate(_, y):
        return 2 * density**2 / 106000.0 * (y + share * yr**2 / y)

    end = solve_ivp(rate, (0.0, 2.0), [105.0 + 235.0], rtol=1e-11, atol=1e-9).y[0, -1] - 235.0
    heat = heat_integral(density, 2.0)
    assert exact_temperature_with_eddy_loss(105.0, heat, 106000.0, 235.0, share, 75.0) == pytest.approx(end, abs=1e-6)
    if share == 0.0:
        assert exact_temperature(105.0, heat, 106000.0, 235.0) == pytest.approx(end, abs=1e-6)


@given(STARTS, DENSITIES)
def test_without_eddy_loss_the_form_is_the_exponential(start, density):
    """exact_temperature_with_eddy_loss at a share of zero."""
    heat = heat_integral(density, 2.0)
    plain = exact_temperature(start, heat, 106000.0, 235.0)
    assert exact_temperature_with_eddy_loss(start, heat, 106000.0, 235.0, 0.0, 75.0) == pytest.approx(plain, rel=1e-12)


def test_eddy_loss_of_fifteen_per_cent_adds_ten_kelvin():
    """At 80 A/mm^2 for 2 s from 105 degC a share of 0.15 adds about 10 K, less than 15 % of the rise (own arithmetic)."""
    heat = heat_integral(80.0, 2.0)
    added = exact_temperature_with_eddy_loss(105.0, heat, 106000.0, 235.0, 0.15, 75.0) - exact_temperature(
        105.0, heat, 106000.0, 235.0
    )
    assert added == pytest.approx(10.0, abs=1.0)


@pytest.mark.parametrize(("ratio", "duration"), [(14.0, 0.25), (19.0, 2.0), (40.0, 1.0)])
def test_offset_form_is_the_integral_of_the_wave(ratio, duration):
    """heat_integral_with_offset against the exact integral of the wave: the cross term stays below 0.007 s."""
    tau = ratio / (2 * np.pi * 50.0)
    exact = float(wave_heat_integral(60.0, ratio, 50.0, duration))
    assert abs(heat_integral_with_offset(60.0, duration, tau) - exact) < 0.007 * 60.0**2


def test_without_offset_the_heat_is_density_squared_times_duration():
    """heat_integral_with_offset with a vanishing time constant is heat_integral."""
    assert heat_integral_with_offset(60.0, 2.0, 1e-9) == pytest.approx(heat_integral(60.0, 2.0))


def test_pause_cools_along_the_exponential():
    """temperature_after_pause against integration of the cooling: 95 K above, 0.3 s of 600 s."""
    end = solve_ivp(lambda _, x: -(x - 105.0) / 600.0, (0.0, 0.3), [200.0], rtol=1e-12, atol=1e-12).y[0, -1]
    assert temperature_after_pause(200.0, 105.0, 0.3, 600.0) == pytest.approx(end, abs=1e-9)

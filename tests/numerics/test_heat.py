"""Closed forms of adiabatic heating against numerical integration of the heat equation."""

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from throughfault.numerics.heat import (
    Conductor,
    average_temperature,
    exact_temperature,
    offset_heat,
    repeated_shots,
)

COPPER = Conductor(106000.0, 235.0)
ALUMINIUM = Conductor(45700.0, 225.0)
LOSSY = Conductor(106000.0, 235.0, eddy_share=0.15, reference=75.0)


def integrated(start, density, duration, conductor, current=lambda t: 1.0):
    """Temperature by integrating dtheta/dt = 2 j^2/C (y + e yr^2/y)."""
    yr = conductor.reference + conductor.offset

    def rate(t, theta):
        y = theta + conductor.offset
        return 2.0 * (density * current(t)) ** 2 / conductor.constant * (y + conductor.eddy_share * yr**2 / y)

    found = solve_ivp(rate, (0.0, duration), [start], rtol=1e-11, atol=1e-9, max_step=duration / 200)
    return float(found.y[0, -1])


@pytest.mark.parametrize("conductor", [COPPER, ALUMINIUM, LOSSY])
@pytest.mark.parametrize(("start", "density", "duration"), [(105.0, 60.0, 2.0), (30.0, 90.0, 0.5), (155.0, 40.0, 5.0)])
def test_exact_form_solves_the_heat_equation(conductor, start, density, duration):
    """The closed form equals the integrated heat equation to 1e-7 K, with and without eddy loss."""
    closed = exact_temperature(start, density**2 * duration, conductor)
    assert closed == pytest.approx(integrated(start, density, duration, conductor), abs=1e-7)


@pytest.mark.parametrize("conductor", [COPPER, ALUMINIUM])
def test_average_form_is_the_pade_form_of_the_exponential(conductor):
    """The standard's form lies above the exact one and agrees with it to third order in the heat integral."""
    small = np.array([0.01, 0.02]) * conductor.constant
    over = average_temperature(20.0, small, conductor) - exact_temperature(20.0, small, conductor)
    assert over[0] > 0.0
    assert over[1] / over[0] == pytest.approx(8.0, rel=0.05)


@pytest.mark.parametrize("heat", [-1.0, 106000.0, 2e5])
def test_average_form_refuses_its_pole(heat):
    """At the thermal constant the form has a pole, so it is refused, not continued."""
    with pytest.raises(ValueError) as raised:
        average_temperature(105.0, heat, COPPER)
    assert str(raised.value) == f"heat must be at least 0 and below 106000 A^2 s/mm^4, got {heat:g}"


@pytest.mark.parametrize(("time_constant", "duration"), [(0.045, 0.25), (0.06, 2.0), (0.12, 0.5)])
def test_offset_adds_its_share_of_the_heat(time_constant, duration):
    """The heat of the offset wave, integrated, exceeds the closed form by less than 0.007 s of current squared."""
    omega = 2 * np.pi * 50.0
    time = np.linspace(0.0, duration, 400_001)
    wave = np.sqrt(2) * (np.exp(-time / time_constant) - np.cos(omega * time))
    exact = np.trapezoid(wave**2, time)
    closed = offset_heat(1.0, duration, time_constant)
    assert abs(exact - closed) < 0.007
    assert closed - duration == pytest.approx(time_constant, rel=1e-3)


def test_two_shots_with_a_pause_follow_the_heat_equation():
    """Two shots and the cooling between them equal the integrated sequence."""
    shots = repeated_shots(105.0, 80.0, LOSSY, duration=1.0, pause=0.3, count=2, cooling=180.0)
    first = integrated(105.0, 80.0, 1.0, LOSSY)
    cooled = solve_ivp(lambda _, x: -(x - 105.0) / 180.0, (0.0, 0.3), [first], rtol=1e-11, atol=1e-9).y[0, -1]
    second = integrated(cooled, 80.0, 1.0, LOSSY)
    assert shots.ends == pytest.approx([first, second], abs=1e-6)
    assert shots.time[-1] == pytest.approx(2.3)
    assert shots.temperature.max() == shots.ends[-1]
    assert np.all(np.diff(shots.time) > 0.0)


def test_without_a_pause_two_shots_are_one_of_twice_the_duration():
    """Adiabatic exponents add."""
    twice = repeated_shots(105.0, 70.0, COPPER, duration=1.0, pause=1e-9, count=2, cooling=180.0).ends[-1]
    assert twice == pytest.approx(float(exact_temperature(105.0, 70.0**2 * 2.0, COPPER)), abs=1e-6)

"""First maximum and heat integral of one R-L circuit."""

import itertools

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad, solve_ivp
from scipy.optimize import minimize_scalar

from throughfault.errors import NetworkError
from throughfault.numerics.wave import first_maximum, heat_integral

# IEC 60076-5:2006, 4.2.3, table of X/R against k sqrt2 (from memory), printed to 0.01
IEC_TABLE = {1: 1.51, 1.5: 1.64, 2: 1.76, 3: 1.95, 4: 2.09, 5: 2.19, 6: 2.27, 8: 2.38, 10: 2.46, 14: 2.55}


@pytest.mark.parametrize("ratio", IEC_TABLE)
def test_first_maximum_is_the_table_of_the_standard(ratio):
    """Each value of the table is the exact first maximum rounded to 0.01: half the last printed digit."""
    assert abs(first_maximum(ratio) - IEC_TABLE[ratio]) <= 0.005


def test_limits_of_the_first_maximum():
    """sqrt2 without reactance, 2 sqrt2 without resistance."""
    assert np.allclose(first_maximum([0.0, np.inf]), [np.sqrt(2), 2 * np.sqrt(2)], rtol=1e-15, atol=0)


@pytest.mark.parametrize("ratio", [0.05, 0.6, 2.0, 14.0, 60.0])
def test_first_maximum_is_the_largest_of_time_integration(ratio):
    """Closing at the zero of the voltage, L di/dt + R i = u integrated in time has this largest current."""
    omega, phi = 2 * np.pi * 50, np.arctan(ratio)

    def slope(t, i):
        return omega / np.sin(phi) * (np.sqrt(2) * np.sin(omega * t) - np.cos(phi) * i)

    run = solve_ivp(
        slope, (0, 0.02), [0.0], method="Radau" if ratio < 0.1 else "DOP853", rtol=1e-10, atol=1e-10, dense_output=True
    )
    found = minimize_scalar(lambda t: -run.sol(t)[0], bounds=(0.004, 0.0125), method="bounded", options={"xatol": 1e-9})
    assert abs(first_maximum(ratio) + found.fun) <= 1e-6


@given(st.floats(0.0, 1e4), st.floats(0.0, 2 * np.pi), st.floats(-np.pi, np.pi))
def test_no_instant_and_no_closing_angle_exceeds_the_first_maximum(ratio, x, angle):
    """It is the maximum over time and closing angle."""
    decay = np.exp(-x / ratio) if ratio else 0.0
    current = np.sqrt(2) * (np.cos(angle) * decay - np.cos(x + angle))
    offset_free = x == 0.0 or ratio == 0.0  # the wave begins at zero only with a reactance
    assert offset_free or abs(current) <= first_maximum(ratio) * (1 + 1e-12)


def test_first_maximum_rises_with_the_ratio():
    """More reactance, more peak."""
    assert (np.diff(first_maximum(np.geomspace(0.1, 1e3, 500))) > 0).all()


@pytest.mark.parametrize("ratio", [-0.1, np.nan])
def test_ratio_must_be_a_ratio(ratio):
    """Negative or missing ratios are refused."""
    with pytest.raises(NetworkError, match=rf"^x_over_r must be 0 or more, got {ratio}$"):
        first_maximum([1.0, ratio])


@pytest.mark.parametrize("duration", [0.001, 0.0137, 0.25, 2.0])
@pytest.mark.parametrize("angle", [0.0, 0.4, -1.3, np.pi / 2])
@pytest.mark.parametrize("ratio", [0.5, 14.0, np.inf])
def test_heat_integral_is_the_integral_of_the_wave(duration, angle, ratio):
    """Against adaptive quadrature over every half cycle."""
    omega = 2 * np.pi * 50

    def squared(t):
        return 2 * 7.0**2 * (np.cos(angle) * np.exp(-omega * t / ratio) - np.cos(omega * t + angle)) ** 2

    edges = np.append(np.arange(0, duration, 0.01), duration)
    whole = sum(quad(squared, a, b, epsabs=0, epsrel=1e-12)[0] for a, b in itertools.pairwise(edges))
    assert np.isclose(heat_integral(7.0, ratio, 50.0, duration, angle), whole, rtol=1e-11, atol=0)

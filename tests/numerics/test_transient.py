"""Exact currents after inception against time integration of the circuit."""

import re

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from tests.numerics.nodal import WOUND, coil_volts, solve_nodal
from tests.numerics.units import near, random_case, stack, wound

from throughfault.errors import NetworkError
from throughfault.numerics.case import Cases
from throughfault.numerics.network import solve
from throughfault.numerics.transient import peak_exact, transient, waveform
from throughfault.numerics.wave import first_maximum

FAULTS = ("3ph", "LG", "LL", "LLG")


def star_delta(**more):
    """YNd11 fed on the star side, an earth fault there, 2 ohm (or as given) in the neutral."""
    given = {"voltage": [33e3, 11e3], "base_power": 10e6, "z1": [[0, 0.006 + 0.1j], [0.006 + 0.1j, 0]], "fault": "LG",
             "at": 0, "frequency": 50.0, "source_z1": [0.5 + 6j, np.inf], "source_z0": [1.5 + 9j, np.inf],
             "neutral": [2.0, np.inf]} | more  # fmt: skip
    unit = wound("YNd11")
    return unit, Cases.of(unit, **given)


def integrated(time, angle, cases):
    """The earth fault of ``star_delta`` as two loops, integrated in time.

    The delta, open to no line, carries one current: all HV windings carry the same i.  The source's phase a carries i
    and the fault current f, phases b and c carry i.  Loop one runs through the three windings in turn, the delta
    joining them, and the neutral with 3 i; loop two through the source's phase a and the fault.
    """
    omega = 2 * np.pi * 50
    ohm = 33e3**2 / 10e6
    r_t, l_t = 0.006 * ohm, 0.1 * ohm / omega
    one, zero = cases.source_z1[0, 0], cases.source_z0[0, 0]
    same, other = (zero + 2 * one) / 3, (zero - one) / 3
    z = np.array([[3 * same + 6 * other, same + 2 * other], [same + 2 * other, same]])
    z[0, 0] += 3 * (r_t + 1j * omega * l_t) + 9 * cases.neutral[0, 0]
    r, inductance = z.real, z.imag / omega
    peak = np.sqrt(2) * 33e3 / np.sqrt(3)
    inverse = np.linalg.inv(inductance)

    def slope(t, x):
        # before the fault phase a has its voltage, which the fault takes away; the sum of the three is nothing
        return inverse @ (np.array([0.0, peak * np.cos(omega * t + angle)]) - r @ x)

    run = solve_ivp(slope, (0, time[-1]), [0, 0], method="DOP853", t_eval=time, rtol=1e-11, atol=1e-8)
    return run.y


@pytest.mark.parametrize("angle", [0.0, 0.7, -1.5])
def test_earth_fault_with_a_resistor_in_the_neutral_follows_time_integration(angle):
    """Winding, neutral and delta currents of LG at a star earthed by 2 ohm follow an independent circuit in time."""
    unit, cases = star_delta()
    time = np.linspace(0, 0.2, 401)
    got = waveform(transient(unit, cases), time, angle)
    winding, _ = integrated(time, angle, cases)
    for phase in range(3):
        assert near(got.coil[0, phase], winding, 1e-7)
        assert near(got.coil[1, phase], -winding * 33e3 / np.sqrt(3) / 11e3, 1e-7)
    assert near(got.neutral[0], 3 * winding, 1e-7)


def test_largest_current_of_the_earth_fault_is_that_of_time_integration():
    """The exact peak is the largest of 180 integrated closing angles, found to the angle's coarseness."""
    unit, cases = star_delta()
    peak = peak_exact(transient(unit, cases)).neutral[0, 0]
    time = np.linspace(0, 0.04, 2001)
    swept = max(
        np.abs(3 * integrated(time, angle, cases)[0]).max() for angle in np.linspace(0, np.pi, 60, endpoint=False)
    )
    assert swept <= peak * (1 + 1e-9)
    assert swept >= peak * np.cos(np.pi / 120) * (1 - 1e-4)


def test_single_circuit_peak_is_the_exact_first_maximum():
    """With one X/R in the whole path every peak is the r.m.s. value times the factor of that X/R."""
    unit, cases = star_delta(fault="3ph", at=1, source_z1=[0.36 + 6j, np.inf], source_z0=[0.36 + 6j, np.inf])
    peak, rms = peak_exact(transient(unit, cases)), solve(unit, cases)
    factor = first_maximum(6 / 0.36)
    assert near(peak.coil[0], np.abs(rms.coil_current[0]) * factor)
    assert near(peak.terminal[0, 1], np.abs(rms.terminal_current[0, 1]) * factor)


@pytest.mark.parametrize("group", ["YNd11", "Dyn11", "YNyn0d11", "YNa0d11", "Yzn11"])
def test_modes_start_at_zero_and_end_as_phasors(group):
    """Currents start at zero, balance on every limb and end as the phasors of the network."""
    rng = np.random.default_rng(5)
    drawn = [random_case(group, rng, fault, at) for fault in FAULTS for at in (0, 1) for _ in range(2)]
    unit = wound(group)
    cases = stack(unit, drawn)
    wave, steady = transient(unit, cases), solve(unit, cases)
    volts = np.array([coil_volts(group, case["voltage"]) for case in drawn])
    for number, case in enumerate(drawn):
        assert near(wave[number].phasor[0, : volts.shape[1] * 3].reshape(-1, 3) * volts[number][:, None],
                    steady.coil_current[number] * volts[number][:, None], floor=case["base_power"])  # fmt: skip
        got = waveform(wave[number], np.linspace(0, 0.1, 101), 0.4).coil * volts[number][:, None, None]
        assert np.abs(got[:, :, 0]).max() <= 1e-9 * max(np.abs(got).max(), case["base_power"])
        assert np.abs(got.sum(0)).max() <= 1e-9 * max(np.abs(got).max(), case["base_power"])
    assert (wave.rate >= 0).all()


def at_real_frequency(case, s):
    """The case with every R + jX replaced by R + s L."""
    turned = dict(case)
    for name in ("z1", "z0", "source_z1", "source_z0", "neutral", "fault_impedance"):
        there = np.isfinite(case[name])
        z = np.where(there, case[name], 0)
        turned[name] = np.where(there, z.real + s * z.imag / (2 * np.pi * case["frequency"]), np.inf)
    return turned


@pytest.mark.parametrize("s", [5.0, 60.0, 900.0])
@pytest.mark.parametrize("group", WOUND)
def test_laplace_transform_of_the_currents_is_nodal_analysis_at_that_frequency(group, s):
    """For exp(jwt) switched on, I/(s - jw) - sum c/(s + s_k) is the network of R + sL driven by V/(s - jw)."""
    rng = np.random.default_rng(6)
    drawn = [random_case(group, rng, fault, at) for fault in FAULTS for at in (0, 1) for _ in range(2)]
    unit = wound(group)
    wave = transient(unit, stack(unit, drawn))
    for number, case in enumerate(drawn):
        omega = 2 * np.pi * case["frequency"]
        coils = len(unit.coils)
        own = wave[number].phasor[0] / (s - 1j * omega) - (
            wave[number].coefficient[0] / (s + wave[number].rate[0])
        ).sum(1)
        expected = solve_nodal(group, at_real_frequency(case, s))[0] / (s - 1j * omega)
        volts = coil_volts(group, case["voltage"])[:, None]
        floor = case["base_power"] / abs(s - 1j * omega)
        assert near(own[: 3 * coils].reshape(coils, 3) * volts, expected * volts, floor=floor)


def test_exact_peak_is_the_largest_of_a_dense_search():
    """No sample of any current at any closing angle exceeds the exact peak, and some come within 0.01 %."""
    rng = np.random.default_rng(9)
    drawn = [random_case("YNyn0d11", rng, fault, at) for fault in FAULTS for at in (0, 1)]
    unit = wound("YNyn0d11")
    wave = transient(unit, stack(unit, drawn))
    peak = peak_exact(wave)
    dense = np.sqrt(2) * np.abs(wave.envelope(np.broadcast_to(np.linspace(0, 0.1, 8001), (len(drawn), 8001)))).max(2)
    exact = np.concatenate([peak.coil.reshape(len(drawn), -1), peak.terminal.reshape(len(drawn), -1), peak.neutral], 1)
    assert (dense <= exact * (1 + 1e-9) + 1e-9).all()
    assert (dense >= exact * (1 - 1e-4) - 1e-6).all()


def test_peak_that_comes_after_the_first_cycle_is_found():
    """Two opposed decaying parts, one fast: the largest current of the healthy neutral side is not in the first cycle."""
    unit, cases = star_delta()
    wave = transient(unit, cases)
    slow = type(wave)(
        unit, wave.omega, np.full_like(wave.phasor, 1.0), wave.coefficient[:, :, :1] * 0, wave.rate[:, :1] * 0
    )
    late = type(wave)(unit, slow.omega, slow.phasor,
                      np.broadcast_to([2.0, -1.0], (*slow.phasor.shape, 2)).astype(complex), np.array([[0.1, 30.0]]))  # fmt: skip
    time = np.linspace(0, 0.24, 48001)[None]
    dense = np.sqrt(2) * np.abs(late.envelope(time))[0, 0]
    assert time[0, dense.argmax()] > 0.02
    assert near(peak_exact(late).coil[0, 0, 0], dense.max(), 1e-6)


def test_resistive_fault_path_without_reactance_has_no_memory():
    """A resistive source shorted at its own terminal gives its current at once; the rest of the network is apart."""
    unit, cases = star_delta(fault="3ph", source_z1=[0.5, np.inf], source_z0=[0.5, np.inf])
    wave = transient(unit, cases)
    assert np.isfinite(wave.rate).all()
    assert near(solve(unit, cases).fault_current[0, 0], 33e3 / np.sqrt(3) / 0.5)


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"z1": [[0, -0.3j], [-0.3j, 0]]},
         "case 0 or one like it (3ph) must be passive: its winding pairs' resistances or reactances make the energy negative"),
        ({"source_z2": [0.5 + 5j, np.inf]}, "source_z2 must equal source_z1 (ohm) for a transient, unlike case 0"),
    ],
)  # fmt: skip
def test_what_has_no_modes_is_refused(change, message):
    """A network that gives energy away, and a rotating source, are refused by name."""
    unit, cases = star_delta(**{"fault": "3ph", "at": 1} | change)
    with pytest.raises(NetworkError, match=f"^{re.escape(message)}$"):
        transient(unit, cases)


def test_waveform_takes_one_case():
    """Two cases at once are refused."""
    unit, cases = star_delta(fault=["LG", "LL"])
    with pytest.raises(NetworkError, match=r"^waveform takes one case, got 2; take one with transient\[number\]$"):
        waveform(transient(unit, cases), [0.0], 0.0)

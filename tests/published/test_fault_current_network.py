"""Fault currents of published worked examples, from the phase-domain network.

Generator, line and feeder impedances of a book's network are the source of the terminal they feed; its transformer is
the kit's.  Tolerance: half the last printed digit; where a book rounds on its way the reason stands beside it.
"""

import numpy as np
import pytest

from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding
from throughfault.numerics.network import solve

INF = np.inf
NAMES = ("HV", "LV", "TV")


def unit_of(*letters, phases=3):
    return Transformer(tuple(Winding(NAMES[i], x, k) for i, (x, k) in enumerate(letters)), phases)


def pair(z):
    return np.array([[0, z], [z, 0]])


def fault(letters, kind, at, **given):
    """Solve one case of a transformer of these letters and clock numbers, at 50 Hz."""
    unit = unit_of(*letters)
    return solve(unit, Cases.of(unit, fault=kind, at=at, frequency=50.0, **given))


STAR_DELTA, DELTA_STAR, STAR_STAR, DELTA_DELTA = (
    [(a, 0), (b, clock)] for a, b, clock in (("Y", "D", 1), ("D", "Y", 11), ("Y", "Y", 0), ("D", "D", 0))
)  # fmt: skip


class TestStevenson:
    """Stevenson, Elements of Power System Analysis, 4th ed., example 10.1, p. 253; results from memory.

    Two generators on the delta side, 75 MVA 69 kV star / 13.8 kV delta, three-phase fault on the HV side at 66 kV.
    """

    ohm = 13.8e3**2 / 75e6
    g1, g2 = 0.25 * 75 / 50, 0.25 * 75 / 25
    got = fault(STAR_DELTA, "3ph", 0, voltage=[69e3, 13.8e3], base_power=75e6, z1=pair(0.10j), prefault=66e3 / 3**0.5,
                source_z1=[INF, 1j * ohm * g1 * g2 / (g1 + g2)])  # fmt: skip
    base = 75e6 / np.sqrt(3) / np.array([69e3, 13.8e3])

    def test_current_in_the_fault(self):
        """2.735 p.u.; the book rounds 66/69 to 0.957 on the way, hence 0.08 %."""
        assert abs(self.got.fault_current[0, 0]) / self.base[0] == pytest.approx(2.735, rel=8e-4)

    def test_voltage_on_the_delta_side(self):
        """0.2735 p.u. at the generators: the fault current over the transformer's 10 %; 0.08 % as above."""
        assert abs(self.got.terminal_current[0, 1, 0]) / self.base[1] * 0.10 == pytest.approx(0.2735, rel=8e-4)

    @pytest.mark.parametrize(("own", "ampere"), [(g1, 5720), (g2, 2860)])
    def test_currents_of_the_generators(self, own, ampere):
        """5720 and 2860 A of the terminal current, in inverse proportion to the reactances; 0.08 % as above."""
        share = self.g1 * self.g2 / (self.g1 + self.g2) / own
        assert abs(self.got.terminal_current[0, 1, 0]) * share == pytest.approx(ampere, rel=8e-4)


class TestThreeWindingStar:
    """Stevenson, Elements of Power System Analysis, 4th ed., p. 154: Zp 2 %, Zs 5 %, Zt 7 % on 15 MVA."""

    ps, pt, st = 0.07j, 0.09j, 0.08j * 15 / 10

    @pytest.mark.parametrize(("at", "leg"), [(0, 0.02), (1, 0.05), (2, 0.07)])
    def test_network_behaves_as_that_star(self, at, leg):
        """With ideal sources on the other two windings a fault sees its own leg and the others in parallel."""
        z = np.array([[0, self.ps, self.pt], [self.ps, 0, self.st], [self.pt, self.st, 0]])
        source = np.where(np.arange(3) == at, INF, 0.0)
        voltage = np.array([66e3, 13.2e3, 2.3e3])
        got = fault(
            [("Y", 0), ("Y", 0), ("D", 11)], "3ph", at, voltage=voltage, base_power=15e6, z1=z, source_z1=source
        )
        a, b = (x for x in (0.02, 0.05, 0.07) if x != leg)
        assert got.z1[0] == pytest.approx(1j * (leg + a * b / (a + b)) * voltage[at] ** 2 / 15e6, rel=1e-12)


def machine(kind, **more):
    """Wadhwa's generator alone: an open transformer whose delta lets no zero sequence through hangs on its terminals."""
    ohm = 13.2e3**2 / 25e6
    return fault(DELTA_STAR, kind, 0, voltage=[13.2e3, 400.0], base_power=25e6, z1=pair(0.1j),
                 source_z1=[0.25j * ohm, INF], source_z2=[0.35j * ohm, INF], source_z0=[0.10j * ohm, INF], **more)  # fmt: skip


class TestWadhwa:
    """Wadhwa, Electrical Power Systems, examples 13.3 to 13.5, pp. 314-322: Z1, Z2, Z0 = j0.25, j0.35, j0.10.

    The base current is rounded to 1093 A in the book (1093.47 A), hence 0.05 %.
    """

    def test_line_to_earth(self):
        """4686 A."""
        assert abs(machine("LG").fault_current[0, 0]) == pytest.approx(4686, rel=5e-4)

    def test_line_to_line(self):
        """3155 A."""
        assert abs(machine("LL").fault_current[0, 1]) == pytest.approx(3155, rel=5e-4)

    def test_double_line_to_earth(self):
        """7781 A to earth, with unlike positive- and negative-sequence impedances."""
        assert abs(machine("LLG").fault_current[0].sum()) == pytest.approx(7781, rel=5e-4)


class TestSaadat:
    """Saadat, Power System Analysis, example 10.5; results from memory.

    Z1 = Z2 = j0.22, Z0 = j0.35 at the bus, j0.1 in the fault; here split over a source and a star-star transformer.
    """

    @staticmethod
    def current(kind):
        volt, power = 1e3, 1e6
        ohm = volt**2 / power
        return fault(STAR_STAR, kind, 1, voltage=[volt, volt], base_power=power, z1=pair(0.12j), z0=pair(0.20j),
                     source_z1=[0.10j * ohm, INF], source_z0=[0.15j * ohm, INF], neutral=[0, 0],
                     fault_impedance=0.1j * ohm).fault_current[0] / (power / np.sqrt(3) / volt)  # fmt: skip

    def test_three_phase(self):
        """3.125 p.u."""
        assert abs(self.current("3ph")[0]) == pytest.approx(3.125, abs=5e-4)

    def test_line_to_earth(self):
        """2.7523 p.u."""
        assert abs(self.current("LG")[0]) == pytest.approx(2.7523, abs=5e-5)

    def test_line_to_line(self):
        """3.2075 p.u."""
        assert abs(self.current("LL")[1]) == pytest.approx(3.2075, abs=5e-5)

    def test_double_line_to_earth(self):
        """4.058 p.u. at 165.93 degrees in phase b."""
        current = self.current("LLG")[1]
        assert abs(current) == pytest.approx(4.058, abs=5e-4)
        assert np.degrees(np.angle(current)) == pytest.approx(165.93, abs=5e-3)


class TestGlover:
    """Glover, Sarma and Overbye, Power System Analysis and Design, SI ed. 2022, examples 10.2 to 10.5, pp. 499-510.

    Results from memory.  Bus 2: generator, first transformer and line behind a star-delta transformer of 10 %, the
    motor on its delta side with 5 % in the neutral; 100 MVA, 13.8 kV, 1.05 p.u. before the fault.
    """

    base = 100e6 / np.sqrt(3) / 13.8e3

    @staticmethod
    def solved(kind):
        high, low = 138e3**2 / 100e6, 13.8e3**2 / 100e6
        return fault(STAR_DELTA, kind, 1, voltage=[138e3, 13.8e3], base_power=100e6, z1=pair(0.10j),
                     prefault=1.05 * 13.8e3 / np.sqrt(3), neutral=[0, INF],
                     source_z1=[0.355j * high, 0.20j * low], source_z2=[0.375j * high, 0.21j * low],
                     source_z0=[0.415j * high, 0.25j * low])  # fmt: skip

    def test_line_to_earth(self):
        """I0 = 1.96427 p.u., 24.65 kA; the first within 0.02 %, as the book rounds the sequence impedances."""
        current = abs(self.solved("LG").fault_current[0, 0])
        assert current / 3 / self.base == pytest.approx(1.96427, rel=2e-4)
        assert current == pytest.approx(24.65e3, abs=5)

    def test_line_to_line(self):
        """26.74 kA; 0.02 %, as the book rounds the sequence impedances."""
        assert abs(self.solved("LL").fault_current[0, 1]) == pytest.approx(26.74e3, rel=2e-4)

    def test_double_line_to_earth(self):
        """6.8983 p.u. in phase b, 21.00 kA in the neutral."""
        current = self.solved("LLG").fault_current[0]
        assert abs(current[1]) / self.base == pytest.approx(6.8983, rel=2e-4)
        assert abs(current.sum()) == pytest.approx(21.00e3, abs=5)


def two_transformers(power, x_t, line, high, kind, *, x1=0.10):
    """A generator at 6.6 kV (Z2 = 0.7 Z1), a step-up transformer, a line and the kit's step-down transformer."""
    ohm = high**2 / power
    source = [1j * (x + x_t + line / ohm) * ohm for x in (x1, 0.7 * x1)]
    return fault(DELTA_STAR, kind, 1, voltage=[high, 6.6e3], base_power=power, z1=pair(1j * x_t), neutral=[INF, 0],
                 source_z1=[source[0], INF], source_z2=[source[1], INF]).fault_current[0]  # fmt: skip


class TestChakrabartiCable:
    """Chakrabarti, Soni, Gupta and Bhatnagar, Power System Engineering, 2nd ed., example 3.4.6, p. 515."""

    def test_line_to_line(self):
        """784 A."""
        assert abs(two_transformers(2e6, 0.05, 0.5, 11e3, "LL")[1]) == pytest.approx(784, abs=0.5)

    def test_line_to_earth(self):
        """1202 A; 0.03 %, as the companion rounds the base current."""
        assert abs(two_transformers(2e6, 0.05, 0.5, 11e3, "LG")[0]) == pytest.approx(1202, rel=3e-4)


class TestChakrabartiLine:
    """The same book, example 3.4.12, p. 521, with the negative sequence as corrected by its solution companion.

    The currents are printed to the ampere, from a base current rounded to 2624.3 A: 0.01 %.
    """

    @pytest.mark.parametrize(("kind", "phase", "ampere"), [("3ph", 0, 7948), ("LG", 0, 11404), ("LL", 1, 7211)])
    def test_current(self, kind, phase, ampere):
        """7948, 11404 and 7211 A."""
        assert abs(two_transformers(30e6, 0.06, 4.0, 33e3, kind)[phase]) == pytest.approx(ampere, rel=1e-4)


class TestFitzgerald:
    """Fitzgerald, Kingsley and Umans, Electric Machinery, example 2.9, p. 89; winding currents from memory.

    Three 50 kVA 2400:240 V units delta-delta, 1.42 + j1.82 ohm each on the HV side, behind a feeder of j0.8 ohm and a
    sending transformer of 0.17 + j0.92 ohm.  The book rounds the whole impedance to 2.42 ohm, hence 0.43 %.
    """

    got = fault(DELTA_DELTA, "3ph", 1, voltage=[2400.0, 240.0], base_power=150e3,
                z1=pair((1.42 + 1.82j) / (2400**2 / 50e3)), source_z1=[0.17 + 1.72j, INF])  # fmt: skip

    @pytest.mark.parametrize(("terminal", "ampere"), [(0, 572), (1, 5720)])
    def test_lines(self, terminal, ampere):
        """572 A in the feeder, 5720 A at the 240 V terminals."""
        assert np.abs(self.got.terminal_current[0, terminal]) == pytest.approx(np.full(3, ampere), rel=4.3e-3)

    @pytest.mark.parametrize(("winding", "ampere"), [(0, 330), (1, 3300)])
    def test_windings(self, winding, ampere):
        """330 and 3300 A."""
        assert np.abs(self.got.winding_current[0, winding]) == pytest.approx(np.full(3, ampere), rel=4.3e-3)


class TestGloverAutotransformer:
    """Glover, Sarma and Overbye: 20 kVA, 480/120 V, 0.0525 ohm at 120 V, as a 600/120 V autotransformer; from memory."""

    unit = unit_of(("I", 0), ("A", 0), phases=1)
    got = solve(unit, Cases.of(unit, voltage=[600.0, 120.0], base_power=25e3, z1=pair(0.05832j), fault="LL", at=1,
                               frequency=60.0, source_z1=[0.0, INF]))  # fmt: skip

    def test_windings_see_their_own_impedance(self):
        """0.05832 p.u. on 25 kVA 600 V is 0.0729 p.u. (0.0525 ohm at 120 V) between the windings, to 0.03 % as printed."""
        series, common = self.got.coil_current[0, :, 0]
        # LV shorted: the 600 V stands across the series winding, whose 480 V side sees the common's leakage
        ohm = 600 / abs(series) * (120 / 480) ** 2
        assert ohm == pytest.approx(0.0525, rel=3e-4)
        assert ohm / (120**2 / 20e3) == pytest.approx(0.0729, rel=3e-4)
        assert common == pytest.approx(-series * 4, rel=1e-12)


class TestIec60909Network:
    """IEC TR 60909-4 (IECTR60909-4), test network: initial three-phase short-circuit currents at the eight buses.

    Every transformer is its terminal admittance as the kit's network gives it (currents into all terminals, one of them
    at unit voltage and the others shorted); lines, sources and the correction factors of IEC 60909-0 stand here.
    """

    c = 1.1
    nominal = np.array([380, 110, 110, 110, 110, 10, 10, 30]) * 1e3
    printed = np.array([40.6447, 31.7831, 19.6730, 16.2277, 33.1894, 37.5629, 25.5895, 13.5778])

    @staticmethod
    def admittance(letters, voltage, power, z):
        """Terminal admittance [winding, winding] S of the positive sequence."""
        columns = []
        for at in range(len(voltage)):
            source = np.where(np.arange(len(voltage)) == at, INF, 0.0)
            got = fault(letters, "3ph", at, voltage=voltage, base_power=power, z1=z, prefault=1.0, source_z1=source)
            columns.append(-got.terminal_current[0, :, 0])
        return np.array(columns).T

    @staticmethod
    def leakage(percent, resistive):
        return resistive / 100 + 1j * np.sqrt(percent**2 - resistive**2) / 100

    def corrected(self, percent, resistive):
        """Short-circuit impedance times KT = 0.95 c / (1 + 0.6 xT), 3.3.3 of IEC 60909-0."""
        z = self.leakage(percent, resistive)
        return z * 0.95 * self.c / (1 + 0.6 * z.imag)

    def coupling(self):
        """The 400/120/30 kV transformer's admittance, pairs on 350, 50 and 50 MVA brought to 350."""
        ab, ac, bc = self.corrected(21, 0.26), self.corrected(10, 0.16) * 7, self.corrected(7, 0.16) * 7
        z = np.array([[0, ab, ac], [ab, 0, bc], [ac, bc, 0]])
        return self.admittance([("Y", 0), ("Y", 0), ("D", 5)], [400e3, 120e3, 30e3], 350e6, z)

    def power_station(self, generator, transformer, factor):
        """Impedance on the HV side of a generator behind its transformer, by a fault there, times KS."""
        power, volt, x, r = generator
        percent, high, low = transformer
        z = self.leakage(percent, 0.5)
        got = fault(STAR_DELTA, "3ph", 0, voltage=[high, low], base_power=power, z1=pair(z),
                    source_z1=[INF, r + 1j * x * volt**2 / power])  # fmt: skip
        return got.z1[0] * factor

    def with_tap_changer(self):
        sine, x_t = np.sin(np.arccos(0.85)), self.leakage(16, 0.5).imag
        factor = (110 / 21) ** 2 * (21 / 115) ** 2 * self.c / (1 + abs(0.14 - x_t) * sine)
        return self.power_station((150e6, 21e3, 0.14, 0.002), (16, 115e3, 21e3), factor)

    def without_tap_changer(self):
        sine = np.sin(np.arccos(0.9))
        factor = 110 / (10.5 * 1.075) * (10.5 / 120) * self.c / (1 + 0.16 * sine)
        return self.power_station((100e6, 10.5e3, 0.16, 0.005), (12, 120e3, 10.5e3), factor)

    def shunts(self):
        """Feeders, power stations, generator and motors: bus and impedance, ohm."""

        def sloped(size):
            return size * (0.1 + 1j) / np.sqrt(1.01)

        generator = (0.018 + 1j * 0.10 * 10.5**2 / 10) * (10 / 10.5) * self.c / (1 + 0.10 * np.sin(np.arccos(0.8)))
        large = sloped(10**2 / (5 / (0.88 * 0.975)) / 5.0)
        small = sloped(10**2 / (2 / (0.89 * 0.968)) / 5.2) / 2
        return [
            (1, sloped(self.c * 380 / np.sqrt(3) / 38)), (5, sloped(self.c * 110 / np.sqrt(3) / 16)),
            (4, self.with_tap_changer()), (3, self.without_tap_changer()), (6, generator), (7, large), (7, small),
        ]  # fmt: skip

    def bus_admittance(self):
        y = np.zeros((9, 9), complex)  # the ninth is the open 30 kV side of the first coupling transformer
        lines = [(2, 3, 20 * (0.12 + 0.39j)), (3, 4, 10 * (0.12 + 0.39j)), (2, 5, 2.5 * (0.12 + 0.39j)),
                 (5, 3, 10 * (0.096 + 0.388j)), (5, 4, 15 * (0.12 + 0.386j)), (6, 7, 0.082 + 0.086j)]  # fmt: skip
        for a, b, z in lines:
            y[np.ix_([a - 1, b - 1], [a - 1, b - 1])] += np.array([[1, -1], [-1, 1]]) / z
        distribution = self.admittance(STAR_STAR, [115e3, 10.5e3], 31.5e6, pair(self.corrected(12, 0.5)))
        for buses, block in ([1, 2, 9], self.coupling()), ([1, 2, 8], self.coupling()), ([5, 6], 2 * distribution):
            at = np.array(buses) - 1
            # bus 8 and the open side lag by 150 degrees, which the currents' magnitudes do not see
            y[np.ix_(at, at)] += block
        for bus, z in self.shunts():
            y[bus - 1, bus - 1] += 1 / z
        return y

    def test_three_phase_currents_of_all_buses(self):
        """All printed digits: 0.1 A."""
        z = np.linalg.inv(self.bus_admittance())
        current = self.c * self.nominal / np.sqrt(3) / np.abs(np.diag(z)[:8]) / 1e3
        assert current == pytest.approx(self.printed, abs=5e-5)

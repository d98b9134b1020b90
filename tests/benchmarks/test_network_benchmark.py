"""Ten thousand fault cases in one call against the same public function once per case."""

from time import perf_counter

import numpy as np
from tests.numerics.units import wound

from throughfault.numerics.case import Cases
from throughfault.numerics.network import solve
from throughfault.numerics.transient import peak_exact, transient

COUNT = 10_000
NEEDED = 20  # reported beside the measured ratio; equality is what is asserted


def autotransformer_cases(count):
    """An invented 400/230/33 kV autotransformer: faults, sides, tappings, infeeds and impedances all mixed."""
    rng = np.random.default_rng(20)
    unit = wound("YNa0d11")
    z = 0.002 * (1 - np.eye(3)) + 1j * np.array([[0, 0.12, 0.35], [0.12, 0, 0.22], [0.35, 0.22, 0]])
    tapping = rng.choice([0.9, 0.95, 1.0, 1.05, 1.1], count)[:, None] ** [1, 0, 0]
    both = rng.random((count, 3)) < [0.8, 0.8, 0]
    both[~both.any(1), 0] = True
    cases = Cases.of(
        unit, voltage=np.array([400e3, 230e3, 33e3]) * tapping, base_power=160e6,
        z1=z * rng.uniform(0.9, 1.1, (count, 1, 1)), fault=rng.choice(["3ph", "LG", "LL", "LLG"], count),
        at=rng.integers(0, 2, count), frequency=50.0, source_z1=np.where(both, [0.4 + 5j, 0.3 + 3j, 0], np.inf),
        source_z0=np.where(both, [0.8 + 9j, 0.5 + 5j, 0], np.inf), neutral=[0.0, np.inf, np.inf])  # fmt: skip
    return unit, cases


def test_one_call_equals_a_call_per_case_and_the_ratio_is_reported(benchmark, capsys):
    """The same currents to 1e-9; the ratio of the times is printed and recorded, never asserted."""
    unit, cases = autotransformer_cases(COUNT)
    together = benchmark.pedantic(solve, (unit, cases), rounds=3, warmup_rounds=1)
    start = perf_counter()
    alone = [solve(unit, cases[number]) for number in range(COUNT)]
    if benchmark.stats is not None:  # None where benchmarks are disabled: the comparison below still counts
        ratio = (perf_counter() - start) / benchmark.stats.stats.median
        benchmark.extra_info.update(cases=COUNT, ratio=round(ratio, 1), needed=NEEDED)
        with capsys.disabled():
            print(f"\nnetwork: {COUNT} cases in one call {ratio:.1f} times faster than one by one (needed: {NEEDED})")
    for name in ("coil_current", "terminal_current", "neutral_current", "fault_current"):
        expected = np.concatenate([getattr(one, name) for one in alone])
        assert np.abs(getattr(together, name) - expected).max() <= 1e-9 * np.abs(expected).max()
    assert (together.path_exists == np.concatenate([one.path_exists for one in alone])).all()


def test_exact_peaks_of_many_cases(benchmark):
    """Modes and exact peaks of a thousand cases; a few of them equal those solved alone."""
    unit, cases = autotransformer_cases(1000)
    together = benchmark.pedantic(lambda: peak_exact(transient(unit, cases)), rounds=2, warmup_rounds=1)
    for number in range(0, 1000, 97):
        alone = peak_exact(transient(unit, cases[number])).coil[0]
        assert np.abs(together.coil[number] - alone).max() <= 1e-9 * alone.max()

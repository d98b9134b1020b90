"""Invented transformers and cases that several test files use."""

import numpy as np
from tests.numerics.nodal import WOUND

from throughfault.numerics.case import Cases
from throughfault.numerics.connection import Transformer, Winding

NAMES = ("HV", "LV", "TV")


def wound(group):
    """The kit's transformer of a vector group that the oracle has wound by hand."""
    return Transformer(tuple(Winding(NAMES[i], x, k) for i, (x, k) in enumerate(WOUND[group][0])))


def random_case(group, rng, fault, at):
    """A passive network of this group with random impedances, sources at the first two terminals."""
    count = len(WOUND[group][0])
    legs = [rng.uniform(0.02, 0.08, count) + rng.uniform(0.05, 0.12, count) * 1j for _ in range(2)]
    z1, z0 = (np.where(np.eye(count), 0, leg[:, None] + leg) for leg in legs)
    if WOUND[group][0][1][0] == "Z":
        z0[1, 1] = rng.uniform(0.002, 0.01) + 1j * rng.uniform(0.01, 0.03)
    voltage = np.array([132e3, 33e3, 11e3])[:count] * rng.uniform(0.9, 1.1, count)
    ohm = voltage**2 / 40e6
    source = [ohm * (rng.uniform(0.001, 0.02, count) + 1j * rng.uniform(0.01, 0.1, count)) for _ in range(2)]
    inside = np.arange(count) < 2
    neutral = np.where(rng.random(count) < 0.7, ohm * rng.choice([0, 0.05, 0.03 + 0.1j], count), np.inf)
    return {
        "voltage": voltage, "base_power": 40e6, "z1": z1, "z0": z0, "fault": fault, "at": at,
        "prefault": voltage[at] / np.sqrt(3) * rng.uniform(0.9, 1.1), "frequency": 50.0,
        "source_z1": np.where(inside, source[0], np.inf),
        "source_z0": np.where(inside & (rng.random(count) < 0.7), source[1], np.inf),
        "neutral": neutral, "fault_impedance": ohm[at] * rng.choice([0, 0.02 + 0.01j]),
    }  # fmt: skip


def stack(unit, cases):
    """Cases of the kit from a list of dictionaries."""
    return Cases.of(unit, **{name: np.array([case[name] for case in cases]) for name in cases[0]})


def near(actual, expected, tolerance=1e-9, floor=0.0):
    """Whether arrays agree to a share of the largest entry, or of a floor where the expected is nothing."""
    size = max(np.abs(expected).max(), floor)
    return np.abs(np.asarray(actual) - expected).max() <= tolerance * size

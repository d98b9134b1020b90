"""Modified nodal analysis of a transformer with its sources, as an oracle: nothing in it comes from the kit.

Leakage by a reference winding (Brandwajn, Dommel and Dommel, IEEE Trans. PAS-101, 1982, p. 1369, from memory), coils
as lists of named nodes wound by hand, sources with their internal voltages and no superposition, least squares for
what floats.
"""

import numpy as np

A = np.exp(2j * np.pi / 3)
UP, LOW, EXTRA = "ABC", "abc", "xyz"


def star(lines, neutral):
    return [(line, neutral) for line in lines]


def delta_lag(lines):
    """Delta whose coil p runs from line p to line p - 1: clock 11 after a star."""
    return [(lines[p], lines[p - 1]) for p in range(3)]


def delta_lead(lines):
    """Delta whose coil p runs from line p to line p + 1: clock 1 after a star."""
    return [(lines[p], lines[(p + 1) % 3]) for p in range(3)]


# name: letters and clocks for the kit, coils by hand, windings' coils, ratio of coil to terminal voltage
WOUND = {
    "YNd11": ([("Y", 0), ("D", 11)], [star(UP, "N"), delta_lag(LOW)]),
    "YNd1": ([("Y", 0), ("D", 1)], [star(UP, "N"), delta_lead(LOW)]),
    "YNd5": ([("Y", 0), ("D", 5)], [star(UP, "N"), [(b, a) for a, b in delta_lag(LOW)]]),
    "Dyn11": ([("D", 0), ("Y", 11)], [delta_lead(UP), star(LOW, "n")]),
    "Dyn5": ([("D", 0), ("Y", 5)], [delta_lead(UP), [("n", line) for line in LOW]]),
    "Dd0": ([("D", 0), ("D", 0)], [delta_lead(UP), delta_lead(LOW)]),
    "YNyn0": ([("Y", 0), ("Y", 0)], [star(UP, "N"), star(LOW, "n")]),
    "YNyn4": ([("Y", 0), ("Y", 4)], [star(UP, "N"), [("c", "n"), ("a", "n"), ("b", "n")]]),
    "YNyn0d11": ([("Y", 0), ("Y", 0), ("D", 11)], [star(UP, "N"), star(LOW, "n"), delta_lag(EXTRA)]),
    "YNa0d11": ([("Y", 0), ("A", 0), ("D", 11)], [list(zip(UP, LOW, strict=True)), star(LOW, "N"), delta_lag(EXTRA)]),
    "YNa0": ([("Y", 0), ("A", 0)], [list(zip(UP, LOW, strict=True)), star(LOW, "N")]),
    "Yzn11": (
        [("Y", 0), ("Z", 11)],
        [star(UP, "N"), [("a", "m1"), ("b", "m2"), ("c", "m3")], [("n", "m3"), ("n", "m1"), ("n", "m2")]],
    ),
    "Dzn0": (
        # the line's half stands reversed on the limb before, the neutral's half forward on the phase's own
        [("D", 0), ("Z", 0)],
        [delta_lead(UP), [("m2", "b"), ("m3", "c"), ("m1", "a")], [("m1", "n"), ("m2", "n"), ("m3", "n")]],
    ),
}  # fmt: skip
LINES = (UP, LOW, EXTRA)
NEUTRALS = ("N", "n", None)
SHARE = {"Y": 1 / np.sqrt(3), "D": 1.0, "A": 1 / np.sqrt(3)}


def reference_admittance(pair):
    """Admittance, zero row sums, of windings with these pairwise impedances; the last one is the reference."""
    last = len(pair) - 1
    reduced = np.array(
        [[(pair[i, last] + pair[j, last] - pair[i, j] * (i != j)) / 2 for j in range(last)] for i in range(last)]
    )
    to_reference = np.hstack([np.eye(last), -np.ones((last, 1))])
    return to_reference.T @ np.linalg.inv(reduced) @ to_reference


def coil_pairs(group, z, z0, voltage):
    """Pairwise impedances of the coils, on their own voltages, from those of the terminals."""
    letters = [letter for letter, _ in WOUND[group][0]]
    pair = np.array(z, complex)
    if "A" in letters:
        q = voltage[0] / (voltage[0] - voltage[1])
        out = pair.copy()
        out[0, 1] = out[1, 0] = z[0, 1] * q**2
        if len(z) > 2:
            out[0, 2] = out[2, 0] = z[0, 1] * q * (q - 1) + z[0, 2] * q - z[1, 2] * (q - 1)
        return out
    if "Z" in letters:  # HV and the two halves: z_HZ = (z_Ha + z_Hb)/2 - z_ab/6, z0 = z_ab/3
        own, side = z0[1, 1], z[0, 1] + z0[1, 1] / 2
        return np.array([[0, side, side], [side, 0, 3 * own], [side, 3 * own, 0]])
    return pair


def coil_volts(group, voltage):
    letters = [letter for letter, _ in WOUND[group][0]]
    volts = []
    for letter, u in zip(letters, voltage, strict=True):
        volts += [u / 3, u / 3] if letter == "Z" else [u * SHARE[letter]]
    if "A" in letters:
        volts[0] -= volts[1]
    return np.array(volts)


def leakage(group, case):
    """Admittance [coil limb, coil limb] S."""
    volts = coil_volts(group, case["voltage"])
    y1 = reference_admittance(coil_pairs(group, case["z1"], case["z0"], case["voltage"]))
    pair0 = coil_pairs(group, case["z0"], case["z0"], case["voltage"])
    if case.get("magnetising") is not None:  # a closed winding of the zero sequence: its row and column fall away
        pair0 = np.block([[pair0, case["magnetising"][:, None]], [case["magnetising"][None, :], np.zeros((1, 1))]])
    y0 = reference_admittance(pair0)[: len(volts), : len(volts)]
    scale = case["base_power"] / 3 / np.outer(volts, volts)
    same, between = (y0 + 2 * y1) / 3 * scale, (y0 - y1) / 3 * scale
    return np.kron(same - between, np.eye(3)) + np.kron(between, np.ones((3, 3)))


def solve_nodal(group, case):
    """Return coil currents [coil, limb], neutral currents and fault branch currents of one case."""
    windings, coils = WOUND[group]
    flat = [pair for coil in coils for pair in coil]
    names = sorted(
        {node for pair in flat for node in pair} | {"N", "n"} | {"F"} | {f"s{w}" for w in range(len(windings))}
    )
    number = {name: i for i, name in enumerate(names)}
    incidence = np.zeros((len(names), len(flat)))
    for k, (start, end) in enumerate(flat):
        incidence[number[start], k] += 1
        incidence[number[end], k] -= 1
    y_coil = leakage(group, case)
    y = incidence @ y_coil @ incidence.T
    j = np.zeros(len(names), complex)
    turn = case["prefault"] * case["voltage"] / case["voltage"][case["at"]]
    for w, (_, clock) in enumerate(windings):
        if np.isinf(case["source_z1"][w]):
            continue
        at = [number[line] for line in LINES[w]]
        angle = np.exp(-1j * np.pi / 6 * (clock - windings[case["at"]][1]))
        emf = turn[w] * angle * A ** -np.arange(3)
        z1, z0 = case["source_z1"][w], case["source_z0"][w]
        y1, y0 = 1 / z1, 0 if np.isinf(z0) else 1 / z0
        block = (y0 - y1) / 3 * np.ones((3, 3)) + y1 * np.eye(3)
        y[np.ix_(at, at)] += block
        j[at] += block @ emf
    branches = fault_branches(case, LINES[case["at"]], number)
    for w, (letter, _) in enumerate(windings):
        if letter in "YZ" and np.isfinite(case["neutral"][w]):
            branches.append((number[NEUTRALS[w]], None, case["neutral"][w]))
    current, v = constrained(y, j, branches)
    own = len(branches) - sum(np.isfinite(case["neutral"][w]) for w, (x, _) in enumerate(windings) if x in "YZ")
    return (y_coil @ incidence.T @ v).reshape(len(coils), 3), current[own:], current[:own]


def fault_branches(case, lines, number):
    a, b, c = (number[line] for line in lines)
    f, z = number["F"], case["fault_impedance"]
    return {
        "3ph": [(a, f, z), (b, f, z), (c, f, z)],
        "LG": [(a, None, z)],
        "LL": [(b, c, z)],
        "LLG": [(b, f, 0), (c, f, 0), (f, None, z)],
    }[case["fault"]].copy()


def constrained(y, j, branches):
    """Node voltages and currents of branches whose impedance may be zero; floating parts by the least norm."""
    nodes, count = len(y), len(branches)
    full = np.zeros((nodes + count, nodes + count), complex)
    full[:nodes, :nodes] = y
    for k, (start, end, z) in enumerate(branches):
        for node, sign in ((start, 1), (end, -1)):
            if node is not None:
                full[node, nodes + k] = full[nodes + k, node] = sign
        full[nodes + k, nodes + k] = -z
    scale = np.ones(nodes + count)
    diagonal = np.abs(np.diag(y))
    scale[:nodes] = np.where(diagonal > 0, 1 / np.sqrt(np.where(diagonal > 0, diagonal, 1)), 1)
    for k, (start, _, _) in enumerate(branches):
        scale[nodes + k] = 1 / scale[start]
    right = np.concatenate([j, np.zeros(count)]) * scale
    x = np.linalg.pinv(full * np.outer(scale, scale), rcond=1e-11) @ right * scale
    return x[nodes:], x[:nodes]

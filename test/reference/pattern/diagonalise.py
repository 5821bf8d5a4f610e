"""Spin systems by plain diagonalisation of the full Hamiltonian, one spin-1/2 at a time: no composite spins, no blocks.

    python3 diagonalise.py > spinSystems.json

Each case: nuclei one by one (signal, Hz), couplings as a full matrix. Output: lines above 1e-6 of a nucleus, merged within
1e-6 Hz, as [frequency in Hz, intensity], intensities summing to the number of nuclei.
"""
import json
from itertools import combinations

import numpy as np

IX = np.array([[0, 0.5], [0.5, 0]], dtype=complex)
IY = np.array([[0, -0.5j], [0.5j, 0]])
IZ = np.array([[0.5, 0], [0, -0.5]], dtype=complex)


def on(operator, spin, count):
    full = np.eye(1)
    for index in range(count):
        full = np.kron(full, operator if index == spin else np.eye(2))
    return full


def lines(frequencies, couplings):
    count = len(frequencies)
    x = [on(IX, i, count) for i in range(count)]
    y = [on(IY, i, count) for i in range(count)]
    z = [on(IZ, i, count) for i in range(count)]
    h = sum(f * z[i] for i, f in enumerate(frequencies))
    for i, j in combinations(range(count), 2):
        if couplings[i][j]:
            h = h + couplings[i][j] * (x[i] @ x[j] + y[i] @ y[j] + z[i] @ z[j])
    # A tiny extra field separates blocks of total Mz so that degenerate states never mix between them.
    mz = sum(z)
    energies, vectors = np.linalg.eigh(h + 1e5 * mz)
    lowering = vectors.conj().T @ (sum(x) - 1j * sum(y)) @ vectors
    found = []
    for f, i in zip(*np.where(np.abs(lowering) ** 2 > 1e-9)):
        found.append((energies[i] - energies[f] - 1e5, abs(lowering[f, i]) ** 2 / 2 ** (count - 1)))
    found.sort(reverse=True)
    merged = []
    for frequency, intensity in found:
        if merged and merged[-1][2] - frequency < 1e-6:
            merged[-1][0] += frequency * intensity
            merged[-1][1] += intensity
        else:
            merged.append([frequency * intensity, intensity, frequency])
    return [[round(m / i, 7), round(i, 9)] for m, i, _ in merged if i > 1e-6]


def system(groups, pairs):
    """groups: (signal, nuclei, Hz); pairs: {(a, b): J between every nucleus of a and every one of b}; 'like' adds J inside."""
    names, frequencies = [], []
    for name, nuclei, frequency in groups:
        names += [name] * nuclei
        frequencies += [frequency] * nuclei
    count = len(names)
    couplings = [[0.0] * count for _ in range(count)]
    for i, j in combinations(range(count), 2):
        value = pairs.get((names[i], names[j]), pairs.get((names[j], names[i]), 0.0))
        couplings[i][j] = couplings[j][i] = value
    return {"groups": [list(group) for group in groups], "pairs": [[a, b, v] for (a, b), v in pairs.items()],
            "lines": lines(frequencies, couplings)}


CASES = {
    "AB": ([("A", 1, 15.0), ("B", 1, -15.0)], {("A", "B"): 12.0}),
    "ABX": ([("A", 1, 220.0), ("B", 1, 205.0), ("X", 1, 20.0)], {("A", "B"): -14.0, ("A", "X"): 4.5, ("B", "X"): 9.5}),
    "A2B": ([("A", 2, 10.0), ("B", 1, 0.0)], {("A", "B"): 7.0}),
    "A3B": ([("A", 3, 12.0), ("B", 1, 0.0)], {("A", "B"): 6.5}),
    "A2B2": ([("A", 2, 20.0), ("B", 2, 0.0)], {("A", "B"): 7.0}),
    "A2B3 ethyl at 60 MHz": ([("A", 2, 141.0), ("B", 3, 70.2)], {("A", "B"): 7.0}),
    "A2B3 close": ([("A", 2, 15.0), ("B", 3, 0.0)], {("A", "B"): 7.5}),
    # The coupling inside a group of equivalent nuclei must not show: it is set here and absent in the composite spins.
    "A2B3 with a coupling inside": ([("A", 2, 15.0), ("B", 3, 0.0)], {("A", "B"): 7.5, ("A", "A"): -12.0, ("B", "B"): -11.0}),
    "A6B isopropyl": ([("A", 6, 72.0), ("B", 1, 300.0)], {("A", "B"): 6.2}),
    "A3B2C2 propyl": ([("A", 3, 57.0), ("B", 2, 99.0), ("C", 2, 243.0)], {("A", "B"): 7.4, ("B", "C"): 6.7}),
    "A3B2C2D2 butyl": (
        [("A", 3, 55.8), ("B", 2, 82.8), ("C", 2, 96.6), ("D", 2, 243.6)],
        {("A", "B"): 7.3, ("B", "C"): 7.5, ("C", "D"): 6.7},
    ),
    "AA'BB' ring": (
        [("A1", 1, 440.0), ("A2", 1, 440.0), ("B1", 1, 410.0), ("B2", 1, 410.0)],
        {("A1", "B1"): 8.5, ("A2", "B2"): 8.5, ("A1", "B2"): 0.5, ("A2", "B1"): 0.5, ("A1", "A2"): 2.5, ("B1", "B2"): 2.5},
    ),
    "AA'BB'C phenyl": (
        [("A1", 1, 482.0), ("A2", 1, 482.0), ("B1", 1, 446.0), ("B2", 1, 446.0), ("C", 1, 454.0)],
        {("A1", "B1"): 7.7, ("A2", "B2"): 7.7, ("A1", "B2"): 0.6, ("A2", "B1"): 0.6, ("A1", "A2"): 2.0, ("B1", "B2"): 1.5,
         ("B1", "C"): 7.5, ("B2", "C"): 7.5, ("A1", "C"): 1.3, ("A2", "C"): 1.3},
    ),
}

if __name__ == "__main__":
    print(json.dumps({name: system(*case) for name, case in CASES.items()}, indent=0, separators=(",", ":")))

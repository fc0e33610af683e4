"""Sets the times of repair.c beside its own eigendecompositions and beside statsmodels' corr_nearest
on the same matrices.

    build/bench/repair | /usr/bin/python3 tests/bench/repair.py
"""
import sys
import time
import warnings

import numpy as np

YEARS, USED, LARGEST = 40, 30, 100      # corr_nearest takes minutes beyond


def uniforms(seed, n):
    """splitmix64 as in repair.c"""
    with np.errstate(over="ignore"):
        z = np.uint64(seed) + np.arange(1, n + 1, dtype=np.uint64) * np.uint64(0x9E3779B97F4A7C15)
        z = (z ^ (z >> np.uint64(30))) * np.uint64(0xBF58476D1CE4E5B9)
        z = (z ^ (z >> np.uint64(27))) * np.uint64(0x94D049BB133111EB)
        z = z ^ (z >> np.uint64(31))
    return ((z >> np.uint64(12)).astype(float) + 0.5) * 2.0**-52


def pairwise(d):
    """the matrix of repair.c"""
    u = uniforms(20020329 + d, YEARS + d * YEARS + d * (d - 1) // 2)
    common, own, windows = np.split(u, [YEARS, YEARS + d * YEARS])
    x = own.reshape(d, YEARS) - 0.5 + (common - 0.5)
    start = np.zeros((d, d), int)
    start[np.tril_indices(d, -1)] = (windows * (YEARS - USED + 1)).astype(int)
    tau = np.eye(d)
    earlier, later = np.triu_indices(USED, 1)
    for first in range(YEARS - USED + 1):
        part = x[:, first:first + USED]
        signs = np.sign(part[:, later] - part[:, earlier])
        chosen = np.tril(start == first, -1)
        tau[chosen] = (signs @ signs.T / len(later))[chosen]
    tau = np.tril(tau, -1) + np.tril(tau, -1).T
    matrix = np.sin(np.pi / 2 * tau)
    np.fill_diagonal(matrix, 1)
    return matrix


def best(f, rounds):
    times = []
    for _ in range(rounds):
        before = time.perf_counter()
        f()
        times.append(time.perf_counter() - before)
    return min(times)


def main():
    ours = {}
    for line in sys.stdin:
        name, seconds = line.rsplit("\t", 1)
        kind, size = name.rsplit(" ", 1)
        ours[kind, int(size)] = float(seconds)
    try:
        from statsmodels.stats.correlation_tools import corr_nearest
    except ImportError:
        corr_nearest = None
        print("statsmodels is not installed: python3-statsmodels")
    warnings.simplefilter("ignore")
    print(f"{'d':>5} {'repair ms':>10} {'in dsyevd':>10} {'weighted ms':>12} {'corr_nearest ms':>16} {'ratio':>7}")
    for d in sorted(size for kind, size in ours if kind == "repair"):
        repair = ours["repair", d]
        weighted = ours.get(("weighted", d))
        theirs = ratio = ""
        if corr_nearest and d <= LARGEST:
            matrix = pairwise(d)
            seconds = best(lambda: corr_nearest(matrix), 3 if d <= 50 else 1)
            theirs, ratio = f"{seconds * 1e3:.3g}", f"{seconds / repair:.0f}"
        print(f"{d:>5} {repair * 1e3:>10.3g} {repair / ours['eigen', d]:>10.2f} "
              f"{'' if weighted is None else format(weighted * 1e3, '.3g'):>12} {theirs:>16} {ratio:>7}")


if __name__ == "__main__":
    main()

"""Kendall's tau in SciPy beside ours: build/bench/tau | tests/bench/tau.py

Reads lines "name<TAB>seconds" and times scipy.stats.kendalltau on data of the same size and kind.
"""
import sys
import time

import numpy as np
from scipy.stats import kendalltau

rng = np.random.default_rng(1)


def make(rows, cols, kind):
    x = 0.6 * rng.standard_normal((rows, 1)) + 0.8 * rng.standard_normal((rows, cols))
    if "heavy" in kind:
        x = np.exp(3 * x)
    if "outlier" in kind:
        x = 1 + 1e-9 * x
        x[0] = 1e300
    if "ties" in kind:
        x = np.floor(10 * x)
    if "gaps" in kind:
        x[rng.random((rows, cols)) < 0.1] = np.nan
    return x


def grid(x):
    there = ~np.isnan(x)
    for i in range(x.shape[1]):
        for j in range(i):
            rows = there[:, i] & there[:, j]
            kendalltau(x[rows, i], x[rows, j])


def best(run, rows, cols, kind, seconds=0.5):
    """Goes round many data sets, as the other side does."""
    sets = [make(rows, cols, kind) for _ in range(min(200, 400000 // (rows * cols) + 1))]
    took = []
    start = time.perf_counter()
    while not took or time.perf_counter() - start < seconds:
        begin = time.perf_counter()
        for x in sets:
            run(x)
        took.append((time.perf_counter() - begin) / len(sets))
    return min(took)


def scipy_seconds(name):
    words = name.split()
    if words[0] == "tau" and "weights" not in name:
        return best(lambda x: kendalltau(x[:, 0], x[:, 1]), int(words[1]), 2, name)
    if words[0] == "grid":
        return best(grid, int(words[3]), int(words[1]), name)
    return None


print(f"{'':32}{'Jointsheet':>12}{'SciPy':>12}{'ratio':>9}   (seconds)")
for line in sys.stdin:
    name, ours = line.rstrip("\n").split("\t")
    ours, theirs = float(ours), scipy_seconds(name)
    if theirs is None:
        print(f"{name:32}{ours:12.3g}{'-':>12}{'-':>9}", flush=True)
    else:
        print(f"{name:32}{ours:12.3g}{theirs:12.3g}{theirs / ours:9.1f}", flush=True)

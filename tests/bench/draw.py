"""Sets the times of draw.c beside those of SciPy doing the same work on one core.

    build/bench/draw | /usr/bin/python3 tests/bench/draw.py
"""
import os

for threads in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS"):
    os.environ[threads] = "1"

import sys
import time

import numpy as np
from scipy import special, stats

LINES, ROWS, DF = 5, 100000, 4.2
MATRIX = 0.5 * np.eye(LINES) + 0.5
rng = np.random.default_rng(1)


def independent():
    return rng.random((ROWS, LINES))


def gaussian():
    return stats.norm.cdf(stats.multivariate_normal(cov=MATRIX, seed=rng).rvs(ROWS))


def t():
    return stats.t.cdf(stats.multivariate_t(shape=MATRIX, df=DF, seed=rng).rvs(ROWS), DF)


def grouped_t():
    degrees = 3 + np.arange(LINES)
    z = stats.multivariate_normal(cov=MATRIX, seed=rng).rvs(ROWS)
    chi = stats.chi2.ppf(rng.random(ROWS)[:, None], degrees)
    return stats.t.cdf(z / np.sqrt(chi / degrees), degrees)


def exponentials():
    return rng.standard_exponential((ROWS, LINES))


def clayton(theta=2):
    return (1 + exponentials() / rng.gamma(1 / theta, size=ROWS)[:, None]) ** (-1 / theta)


def gumbel(theta=2):
    angle, wait = np.pi * rng.random(ROWS), rng.standard_exponential(ROWS)
    v = (np.sin(angle / theta) / np.sin(angle) ** theta
         * (np.sin((1 - 1 / theta) * angle) / wait) ** (theta - 1))
    return np.exp(-(exponentials() / v[:, None]) ** (1 / theta))


def frank(theta=5.736):
    p = -np.expm1(-theta)
    v = rng.logseries(p, size=ROWS)
    return -np.log1p(-p * np.exp(-exponentials() / v[:, None])) / theta


def joe(theta=2.856):
    a = 1 / theta
    ratio = rng.beta(1 - a, a, size=ROWS)
    v = 1 + np.floor(np.log(rng.random(ROWS)) / np.log(ratio))
    return 1 - (-np.expm1(-exponentials() / v[:, None])) ** a


def best(work, repeats=3):
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


OTHERS = {"independent": independent, "gaussian": gaussian, "t": t, "grouped t": grouped_t,
          "clayton": clayton, "gumbel": gumbel, "frank": frank, "joe": joe}

print(f"{ROWS} rows of {LINES} columns: nanoseconds a number")
print(f"{'':14}{'here':>9}{'SciPy':>9}{'ratio':>8}")
for line in sys.stdin:
    name, seconds = line.rstrip("\n").split("\t")
    if name not in OTHERS:
        print(f"{name:14}{1e6 * float(seconds):7.0f} microseconds")
        continue
    scale = 1e9 / ROWS / LINES
    here, there = scale * float(seconds), scale * best(OTHERS[name])
    print(f"{name:14}{here:9.1f}{there:9.1f}{there / here:8.1f}")

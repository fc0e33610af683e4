"""Sets the times of price.c beside those of NumPy and SciPy doing the same work on one core.

    build/bench/price | /usr/bin/python3 tests/bench/price.py
"""
import os

for threads in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS"):
    os.environ[threads] = "1"

import sys
import time

import numpy as np
from scipy import special, stats

LINES, ROWS, LEVEL, THETA = 5, 100000, 0.99, 1.7
rng = np.random.default_rng(1)
uniforms = rng.random(ROWS)
sample = stats.lognorm.ppf(uniforms, 1.2, scale=np.exp(6))


def gamma_quantiles():
    return stats.gamma.ppf(uniforms, 2.5, scale=400)


def lognormal_quantiles():
    return np.exp(6 + 1.2 * special.ndtri(uniforms))


def value_at_risk(losses=sample):
    k = int(np.ceil(len(losses) * LEVEL))
    return np.partition(losses, k - 1)[k - 1]


def shortfall(losses=sample):
    k = int(np.ceil(len(losses) * LEVEL))
    return np.partition(losses, k)[k:].mean()


def draw_t(rows):
    factor = np.linalg.cholesky(0.6 * np.eye(LINES) + 0.4)
    z = rng.standard_normal((rows, LINES)) @ factor.T
    return special.stdtr(4, z / np.sqrt(rng.chisquare(4, rows) / 4)[:, None])


def draw_gumbel(rows):
    alpha = 1 / THETA
    angle, wait = np.pi * (rng.random(rows) - 0.5), rng.standard_exponential(rows)
    turned = alpha * (angle + np.pi / 2)
    frailty = (np.sin(turned) / np.cos(angle) ** THETA
               * (np.cos(angle - turned) / wait) ** ((1 - alpha) / alpha))
    return np.exp(-(rng.standard_exponential((rows, LINES)) / frailty[:, None]) ** alpha)


def price(draw, rows):
    """Losses, layers, aggregate; moments, VaR, TVaR and parts of gross, ceded and retained."""
    u = draw(rows)
    losses = np.column_stack([
        np.exp(6 + 1.2 * special.ndtri(u[:, 0])),
        400 * special.gammaincinv(2.5, u[:, 1]),
        300 * (1 - u[:, 2]) ** (-1 / 2.2),
        900 * ((1 - u[:, 3]) ** (-1 / 3.1) - 1),
        700 * (-np.log1p(-u[:, 4])) ** (1 / 0.8),
    ])
    ceded = 0.8 * np.minimum(np.maximum(losses - 500, 0), 2000)
    before = ceded.sum(axis=1)
    after = np.minimum(np.maximum(before - 1000, 0), 8000)
    ceded *= np.divide(after, before, out=np.zeros(rows), where=before > 0)[:, None]
    figures = []
    for view in (losses, ceded, losses - ceded):
        total = view.sum(axis=1)
        at_risk = value_at_risk(total)
        figures.append((total.mean(), total.std(ddof=1), at_risk, shortfall(total), view.mean(axis=0),
                        view.std(axis=0, ddof=1), view[total > at_risk].mean(axis=0)))
    return figures


WORK = {
    "100000 gamma quantiles": gamma_quantiles,
    "100000 lognormal quantiles": lognormal_quantiles,
    "VaR of 100000": value_at_risk,
    "TVaR of 100000": shortfall,
    "price, t copula, 5 lines, 100000 rows": lambda: price(draw_t, ROWS),
    "price, gumbel copula, 5 lines, 100000 rows": lambda: price(draw_gumbel, ROWS),
}


def best(work, repeats=3):
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


print(f"{'':45}{'here ms':>10}{'SciPy ms':>10}{'ratio':>8}")
for line in sys.stdin:
    name, seconds = line.rstrip("\n").split("\t")
    here = float(seconds)
    if name in WORK:
        theirs = best(WORK[name])
        print(f"{name:45}{1e3 * here:10.2f}{1e3 * theirs:10.2f}{theirs / here:8.1f}")
    else:
        print(f"{name:45}{1e3 * here:10.2f}{'':>10}{'':>8}")

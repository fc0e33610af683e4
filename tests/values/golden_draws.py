#!/usr/bin/python3
"""Recomputes most of golden_draws.csv by an independent program: Philox in whole numbers, distributions from
SciPy. Prints the largest difference of each case, and fails beyond 1e-9 (SciPy's own accuracy for the t)."""
import csv
import math
import os
import sys

import numpy as np
from scipy import special, stats

MASK = 0xFFFFFFFF


def philox(counter, key):
    a, b, c, d = counter
    k, l = key
    for _ in range(10):
        p, q = 0xD2511F53 * a, 0xCD9E8D57 * c
        a, b, c, d = (q >> 32) ^ b ^ k, q & MASK, (p >> 32) ^ d ^ l, p & MASK
        k, l = (k + 0x9E3779B9) & MASK, (l + 0xBB67AE85) & MASK
    return a, b, c, d


def uniform(seed, purpose, row, number):
    words = philox((row & MASK, row >> 32, number // 2, purpose), (seed & MASK, seed >> 32))
    low, high = words[2:] if number % 2 else words[:2]
    return ((((high << 32) | low) >> 12) + 0.5) / 2.0 ** 52


def normals(seed, row, d):
    return np.array([special.ndtri(uniform(seed, 0, row, j)) for j in range(d)])


def correlated(seed, row, d, rho):
    factor = np.zeros((d, d))
    matrix = np.full((d, d), rho) + (1 - rho) * np.eye(d)
    for i in range(d):
        for j in range(i + 1):
            rest = matrix[i, j] - factor[i, :j] @ factor[j, :j]
            if i == j:
                factor[i, i] = math.sqrt(rest) if rest > 1e-14 else 0
            elif factor[j, j] > 0:
                factor[i, j] = rest / factor[j, j]
    return factor @ normals(seed, row, d)


def gaussian(rho):
    return lambda seed, row, d: special.ndtr(correlated(seed, row, d, rho))


def t(rho, df, last=None):
    def draw(seed, row, d):
        degrees = np.full(d, float(df))
        degrees[-1] = last or df
        chi = stats.chi2.ppf(uniform(seed, 1, row, 0), degrees)
        return special.stdtr(degrees, correlated(seed, row, d, rho) / np.sqrt(chi / degrees))
    return draw


def gumbel(theta):
    def draw(seed, row, d):
        angle = math.pi * uniform(seed, 1, row, 0)
        e = -math.log(uniform(seed, 1, row, 1))
        v = (math.sin(angle / theta) / math.sin(angle) ** theta
             * (math.sin((1 - 1 / theta) * angle) / e) ** (theta - 1))
        return [math.exp(-(-math.log(uniform(seed, 0, row, j)) / v) ** (1 / theta)) for j in range(d)]
    return draw


def frank(theta):
    def draw(seed, row, d):
        q = 1 - math.exp(-theta * uniform(seed, 1, row, 0))
        v = 1 + math.floor(math.log(uniform(seed, 1, row, 1)) / math.log(q))
        p = 1 - math.exp(-theta)
        return [-math.log(1 - p * uniform(seed, 0, row, j) ** (1 / v)) / theta for j in range(d)]
    return draw


def frank_negative(theta):
    return lambda seed, row, d: np.abs(np.array([0, 1]) - frank(-theta)(seed, row, d))


def by_conditional(below):
    """v with P(V <= v | U = u) = w, by bisection"""
    def draw(seed, row, d):
        u, w = uniform(seed, 0, row, 0), uniform(seed, 0, row, 1)
        low, high = 0.0, 1.0
        for _ in range(200):
            v = (low + high) / 2
            low, high = (low, v) if below(u, v) >= w else (v, high)
        return [u, v]
    return draw


def amh(theta):
    def below(u, v):
        return v * (1 - theta * (1 - v)) / (1 - theta * (1 - u) * (1 - v)) ** 2
    return by_conditional(below)


def plackett(theta):
    def below(u, v):
        eta = theta - 1
        root = math.sqrt((1 + eta * (u + v)) ** 2 - 4 * u * v * theta * eta)
        return 0.5 - (1 + eta * u - (eta + 2) * v) / (2 * root)
    return by_conditional(below)


def fgm(theta):
    return by_conditional(lambda u, v: v * (1 + theta * (1 - v) * (1 - 2 * u)))


def independent(seed, row, d):
    return [uniform(seed, 0, row, j) for j in range(d)]


CASES = {
    'independent': (independent, 1, 0), 'independent, row beyond 2^32': (independent, 2 ** 53, 4294967294),
    'gaussian': (gaussian(0.5), 1, 0), 'gaussian, skipped': (gaussian(-0.75), 2, 1000000),
    'gaussian, singular': (gaussian(-0.5), 3, 0), 'gaussian, comonotone': (gaussian(1), 3, 0),
    'gaussian, 50 columns': (gaussian(0.25), 4, 0),
    't, df 0.5': (t(0.3, 0.5), 1, 0), 't, df 4': (t(0.5, 4), 1, 0), 't, df 5.5': (t(0.5, 5.5), 1, 0),
    't, df 1e6': (t(0.5, 1e6), 1, 0), 't, grouped 3 and 30': (t(0.5, 3, 30), 1, 0),
    'gumbel': (gumbel(2), 1, 0), 'frank': (frank(5.75), 1, 0), 'frank, negative': (frank_negative(-8), 1, 0),
    'amh': (amh(0.75), 1, 0), 'amh, theta -1': (amh(-1), 1, 0), 'plackett': (plackett(12), 1, 0),
    'plackett, negative': (plackett(0.0625), 1, 0), 'fgm': (fgm(1), 1, 0), 'fgm, negative': (fgm(-0.75), 1, 0),
}


def main():
    here = os.path.dirname(os.path.abspath(__file__))
    worst, rows = {}, {}
    with open(os.path.join(here, 'golden_draws.csv')) as f:
        for line in csv.DictReader(f):
            rows.setdefault((line['case'], int(line['row'])), []).append(float.fromhex(line['u']))
    for (case, row), u in rows.items():
        if case in CASES:
            draw, seed, first = CASES[case]
            apart = np.max(np.abs(np.array(draw(seed, first + row, len(u))) - u))
            worst[case] = max(worst.get(case, 0), apart)
    for case in CASES:
        print(f'{case:30} {worst[case]:.1e}')
    return int(max(worst.values()) > 1e-9)


if __name__ == '__main__':
    sys.exit(main())

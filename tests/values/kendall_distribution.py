"""Writes kendall_distribution.csv: P(C(U) <= w) of copulas that have neither a formula nor a curve,
by simulation with NumPy and SciPy: U from scrambled Sobol' points, C at each of them by definition.
C of gaussian and t with correlations a_i a_j ("loadings" a) is an integral over one common normal
number, and for t over the uniform that drives the chi-squares, by the trapezoid rule; with rotation
180 it is a sum over all subsets. The mean and its standard error from eight scramblings.

    python3 tests/values/kendall_distribution.py > tests/values/kendall_distribution.csv
"""
import itertools

import numpy as np
from scipy.special import ndtr, ndtri
from scipy.stats import chi2, gamma, qmc

LEVELS = (0.001, 0.01, 0.05, 0.2, 0.5, 0.8, 0.95)
SEEDS = 8


def trapezoid(end, steps):
    z = np.linspace(-end, end, steps + 1)
    weights = np.exp(-z * z / 2)
    return z, weights / weights.sum()


def roots(v, df):
    """sqrt(chi-square / df) of each column at the uniforms v"""
    return np.array([np.sqrt(chi2.ppf(v, f) / f) for f in df])


def elliptical_values(u, loadings, df):
    """C at points drawn by uniforms u, of which the last drives the chi-squares"""
    a, n = np.array(loadings), len(u)
    z = ndtri(u)
    x = a * z[:, :1] + np.sqrt(1 - a * a) * z[:, 1:len(a) + 1]
    scales, mixing = np.ones((len(a), 1)), np.ones(1)
    if df:
        x /= roots(u[:, -1], df).T
        score, mixing = trapezoid(7.5, 40)
        scales = roots(ndtr(score), df)
    common, weights = trapezoid(8, 64)
    value = np.zeros(n)
    for s, m in enumerate(mixing):
        for c, w in zip(common, weights):
            product = np.full(n, w * m)
            for j in range(len(a)):
                product *= ndtr((x[:, j] * scales[j, s] - a[j] * c) / np.sqrt(1 - a[j] ** 2))
            value += product
    return value


def clayton(theta, d, u):
    def psi(t):
        return (1 + t) ** (-1 / theta)
    return psi, lambda p: p ** -theta - 1, gamma.ppf(u[:, 0], 1 / theta)


def gumbel(theta, d, u):
    angle, rest = np.pi * u[:, 0], -np.log(u[:, 1])     # Chambers, Mallows & Stuck (1976)
    part = 1 / theta
    stable = (np.sin(part * angle) / np.sin(angle) ** theta
              * (np.sin((1 - part) * angle) / rest) ** (theta - 1))
    return lambda t: np.exp(-t ** part), lambda p: (-np.log(p)) ** theta, stable


def survival_values(u, family, theta, d):
    psi, inverse, frailty = family(theta, d, u)
    above = psi(-np.log(u[:, 2:]) / frailty[:, None])   # the unrotated columns
    total = np.zeros(len(u))
    for size in range(d + 1):
        for chosen in itertools.combinations(range(d), size):
            total += (-1) ** size * psi(sum((inverse(above[:, j]) for j in chosen),
                                            np.zeros(len(u))))
    return total


def report(words, values, dimensions, points):
    shares = np.empty((SEEDS, len(LEVELS)))
    for seed in range(SEEDS):
        u = qmc.Sobol(dimensions, seed=seed).random(points).clip(1e-12, 1 - 1e-12)
        c = values(u)
        shares[seed] = [np.mean(c <= w) for w in LEVELS]
    errors = shares.std(axis=0, ddof=1) / np.sqrt(SEEDS)
    for w, k, error in zip(LEVELS, shares.mean(axis=0), errors):
        print(",".join(words) + f",{w},{k:.6f},{error:.1g}", flush=True)


def elliptical(family, loadings, df, points):
    words = (family, str(len(loadings)), "0", " ".join(map(str, loadings)),
             " ".join(map(str, df or ())))
    report(words, lambda u: elliptical_values(u, loadings, df), len(loadings) + 2, points)


def survival(family, theta, d, points):
    words = (family.__name__, str(d), "180", str(theta), "")
    report(words, lambda u: survival_values(u, family, theta, d), d + 2, points)


print("family,dimension,rotation,parameters,df,w,k,error")
elliptical("gaussian", (0.7, 0.7, 0.7), None, 2 ** 18)
elliptical("gaussian", (0.9, -0.5, 0.3, 0.6), None, 2 ** 18)
elliptical("gaussian", (0.6,) * 10, None, 2 ** 17)
elliptical("gaussian", (0.8,) * 20, None, 2 ** 16)
elliptical("t", (0.8, 0.6, -0.4), (4,) * 3, 2 ** 15)
elliptical("t", (0.7, 0.7), (3, 8), 2 ** 15)
elliptical("t", (0.9, 0.5, 0.7, 0.3), (3, 3, 10, 25), 2 ** 14)
survival(clayton, 2, 3, 2 ** 18)
survival(gumbel, 1.7, 3, 2 ** 18)
survival(clayton, 0.5, 5, 2 ** 18)

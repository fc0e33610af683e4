"""Nearest correlation matrices with firm and held entries, by a general optimiser (SciPy).

    firm_matrices.py FILE.csv

A correlation matrix is V V' with rows of V of length 1, so that the least sum of firmness x
change^2 is an unconstrained problem in V without holds (least squares), and one with equations
where entries are held (sequential quadratic programming). Several starts must agree.
"""
import csv
import os
import sys

import numpy as np
import scipy
from scipy import optimize

VALUES = os.path.join(os.path.dirname(os.path.abspath(__file__)), '..', 'values')
STARTS = 6


def published(name):
    """A matrix of nearest_correlation.csv."""
    with open(os.path.join(VALUES, 'nearest_correlation.csv'), newline='') as f:
        rows = [r for r in csv.DictReader(f) if r['matrix'] == name]
    d = max(int(r['j']) for r in rows)
    matrix = np.eye(d)
    for r in rows:
        i, j = int(r['i']) - 1, int(r['j']) - 1
        matrix[i, j] = matrix[j, i] = float(r['given'])
    return matrix


def firmness_of(d, rule):
    w = np.ones((d, d))
    for i in range(d):
        for j in range(d):
            w[i, j] = rule(min(i, j), max(i, j))
    return w


def correlations(v, d):
    rows = v.reshape(d, d)
    rows = rows / np.sqrt((rows ** 2).sum(axis=1))[:, None]
    return rows @ rows.T


def start_from(matrix, generator):
    values, vectors = np.linalg.eigh(matrix)
    root = vectors * np.sqrt(np.maximum(values, 1e-3))
    return (root + 0.05 * generator.standard_normal(matrix.shape)).ravel()


def nearest(given, firmness, held):
    d = len(given)
    lower = np.tril_indices(d, -1)
    free = ~held[lower]
    roots = np.sqrt(firmness[lower][free])

    def changes(v):
        return (roots * (correlations(v, d)[lower] - given[lower])[free])

    def broken(v):
        return (correlations(v, d)[lower] - given[lower])[~free]

    best = []
    for seed in range(STARTS):
        v = start_from(given, np.random.default_rng(seed))
        if held.any():
            found = optimize.minimize(lambda u: (changes(u) ** 2).sum(), v, method='SLSQP',
                                      constraints={'type': 'eq', 'fun': broken},
                                      options={'ftol': 1e-16, 'maxiter': 2000})
            assert np.abs(broken(found.x)).max() < 1e-9
            v = found.x
        else:
            v = optimize.least_squares(changes, v, method='trf', xtol=1e-15, ftol=1e-15, gtol=1e-15,
                                       max_nfev=5000).x
        best.append(((changes(v) ** 2).sum(), correlations(v, d)))
    best.sort(key=lambda each: each[0])
    apart = np.abs(best[0][1] - best[1][1]).max()
    return best[0][1], best[0][0], apart


CASES = [
    ('high02', lambda i, j: 4.0 if (i, j) == (0, 1) else 1.0, ()),
    ('tec03', lambda i, j: 1.0 + 3 * (i + j), ()),
    ('chain99', lambda i, j: 0.1 if (i, j) == (0, 2) else 2.0, ()),
    ('shrink5', lambda i, j: 1.0 / (1 + i), ()),
    ('block6', lambda i, j: 10.0 if j - i == 1 else 1.0, ()),
    ('shrink5', lambda i, j: 1.0, ((0, 1), (0, 2), (1, 2))),
    ('chain99', lambda i, j: 1.0, ((0, 1),)),
    ('tec03', lambda i, j: 1.0 + 3 * (i + j), ((0, 3),)),
    ('block6', lambda i, j: 1.0, ((0, 1), (3, 4))),
]


def main():
    source = ('general optimiser, SciPy %s: least_squares on V V\', SLSQP where entries are held; '
              'the best of %d starts' % (scipy.__version__, STARTS))
    with open(sys.argv[1], 'w', newline='') as f:
        out = csv.writer(f, lineterminator='\n')
        out.writerow('matrix case i j given firmness held nearest objective tolerance source status'
                     .split())
        for number, (name, rule, holds) in enumerate(CASES):
            given = published(name)
            d = len(given)
            held = np.zeros((d, d), dtype=bool)
            for i, j in holds:
                held[i, j] = held[j, i] = True
            firmness = firmness_of(d, rule)
            x, objective, apart = nearest(given, firmness, held)
            print('%-8s case %d: two best starts apart by %.1e' % (name, number, apart))
            for i in range(d):
                for j in range(i + 1, d):
                    out.writerow([name, number, i + 1, j + 1, repr(float(given[i, j])),
                                  repr(float(firmness[i, j])), int(held[i, j]), '%.12f' % x[i, j],
                                  '%.12f' % objective, '2e-6', source,
                                  'recomputed: SciPy'])


if __name__ == '__main__':
    main()

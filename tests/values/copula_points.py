#!/usr/bin/python3
"""Writes student_tail.csv, student_pair.csv, archimedean_points.csv, rotated_cdf.csv and survival_cdf.csv with mpmath:
probabilities of Student's t by integrals of its density, those of a t pair by the arcsine-angle integral (in the
correlation from -1 on), Archimedean copulas by Taylor coefficients of their generators at 400 digits, rotated pairs by
the definitions of the families and of the rotations at 800 digits, at the doubles nearest to u and v; survival_cdf.csv,
rotation 180 in any dimension, by inclusion and exclusion with as many digits as make it agree with itself at twice as
many. equicorrelated.csv and small_boxes.csv, normal and t copulas in many dimensions and far down, with SciPy: an
integral over what columns share."""
import csv
import os
import sys

import numpy
from mpmath import mp, mpf, asinh, asin, betainc, binomial, cos, exp, expm1, factorial, log, log1p, pi, quad, sin, \
    sqrt, taylor, loggamma, cosh, inf, nstr
from scipy import special, stats

HERE = os.path.dirname(os.path.abspath(__file__))


def write(name, header, rows):
    with open(os.path.join(HERE, name), 'w', newline='') as f:
        out = csv.writer(f, lineterminator='\n')
        out.writerow(header)
        out.writerows(rows)


def tail(t, df):
    """P(T > t), t >= 0, in y = asinh(t / sqrt(df))"""
    mp.dps = 40
    df, y = mpf(df), asinh(mpf(t) / sqrt(mpf(df)))
    log_peak = loggamma((df + 1) / 2) - loggamma(df / 2) - log(pi) / 2
    scale = 1 / (df * mp.tanh(y) + sqrt(df))
    points = [y + scale * k for k in (0, 1, 2, 4, 8, 16, 32, 64, 128, 256)]
    start = df * log(cosh(y))
    return exp(log_peak - start) * quad(lambda z: exp(start - df * log(cosh(z))), points)


def student_tails():
    for df in ('0.05', '0.5', '1', '2.5', '5.5', '30', '1000', '1000000', '1000000000'):
        for t in ('0.001', '0.3', '1', '1.3', '2', '5', '12', '30', '1000', '1e12'):
            p = tail(t, df)
            if p > mpf('1e-290'):
                yield df, t, nstr(asinh(mpf(t) / sqrt(mpf(df))), 20), nstr(p, 20), '1e-12 relative'


def pair(x, y, rho, df):
    mp.dps = 30
    x, y, rho, df = mpf(x), mpf(y), mpf(rho), mpf(df)

    def along(a):
        c = cos(a)
        return exp(-df / 2 * log1p((x * x - 2 * x * y * sin(a) + y * y) / (df * c * c)))

    lower = max(mpf(0), below(x, df) + below(y, df) - 1)
    end = asin(rho)
    cuts = [-pi / 2 + (end + pi / 2) * mpf(k) / 16 for k in range(17)]
    ends = [cuts[-1] - (end + pi / 2) / 16 * mpf(2) ** -k for k in range(1, 40)]
    cuts = cuts[:-1] + ends + [end]
    scale = max(along(a) for a in cuts[1:])         # quad() looks at absolute errors
    return lower + scale * quad(lambda a: along(a) / scale, cuts) / (2 * pi)


def below(x, df):
    return 1 - tail(x, df) if x >= 0 else tail(-x, df)


def student_pairs():
    for df in ('0.5', '5.5', '1000000'):
        for rho in ('-0.9', '0.3', '0.95'):
            for x, y in ((-1, -1), (-3, -2), (-9, -8), (-25, -1), (0.5, -4), (1, 2)):
                yield (df, rho, nstr(below(mpf(x), df), 22), nstr(below(mpf(y), df), 22),
                       nstr(pair(x, y, rho, df), 22), '1e-10 relative')


GENERATORS = {
    'clayton': (lambda t, a: (1 + t) ** (-1 / a), lambda u, a: u ** -a - 1),
    'gumbel': (lambda t, a: exp(-t ** (1 / a)), lambda u, a: (-log(u)) ** a),
    'frank': (lambda t, a: -log1p(expm1(-a) * exp(-t)) / a, lambda u, a: -log(expm1(-a * u) / expm1(-a))),
    'joe': (lambda t, a: 1 - (-expm1(-t)) ** (1 / a), lambda u, a: -log1p(-(1 - u) ** a)),
}

POINTS = ['0.2 0.7 0.9', '0.01 0.02 0.99', '0.5 0.5 0.5 0.5 0.5', '1e-12 0.3 0.6', '0.0001 0.0002 0.0003',
          '0.9375 0.96875 0.984375', '0.1 0.2 0.3 0.4 0.5 0.6 0.7 0.8 0.9 0.95',
          ' '.join(str((k * 7 % 20 + 0.5) / 20) for k in range(20))]


def archimedean(family, theta, point):
    mp.dps = 400
    psi, inverse = GENERATORS[family]
    a = mpf(float(theta))
    u = [mpf(float(x)) for x in point.split()]
    t = [inverse(x, a) for x in u]
    d, total, before = len(u), sum(t), sum(t[:-1])

    def derivative(order, at):
        return taylor(lambda x: psi(x, a), at, order, h=at * mpf(10) ** -14)[order] * factorial(order)

    density = abs(derivative(d, total))
    for x in t:
        density /= abs(derivative(1, x))
    given = derivative(d - 1, total) / derivative(d - 1, before)
    return nstr(psi(total, a), 20), nstr(log(density), 20), nstr(given, 20)


def archimedean_points():
    for family, thetas in (('clayton', ('1e-9', '0.5', '8')), ('gumbel', ('1.0001', '2', '20')),
                           ('frank', ('1e-9', '0.001', '5.736', '50')), ('joe', ('1.0001', '2', '8'))):
        for theta in thetas:
            for point in POINTS:
                yield (family, theta, point) + archimedean(family, theta, point) + ('1e-11',)


def plackett(u, v, a):
    s = 1 + (a - 1) * (u + v)
    return (s - sqrt(s * s - 4 * u * v * a * (a - 1))) / (2 * (a - 1))


PAIRS = {
    'clayton': lambda u, v, a: max(mpf(0), u ** -a + v ** -a - 1) ** (-1 / a),
    'gumbel': lambda u, v, a: exp(-((-log(u)) ** a + (-log(v)) ** a) ** (1 / a)),
    'frank': lambda u, v, a: -log1p(expm1(-a * u) * expm1(-a * v) / expm1(-a)) / a,
    'joe': lambda u, v, a: 1 - ((1 - u) ** a + (1 - v) ** a - (1 - u) ** a * (1 - v) ** a) ** (1 / a),
    'amh': lambda u, v, a: u * v / (1 - a * (1 - u) * (1 - v)),
    'plackett': plackett,
    'fgm': lambda u, v, a: u * v * (1 + a * (1 - u) * (1 - v)),
}

ROTATED = [('clayton', '1'), ('clayton', '1000'), ('clayton', '-0.9'), ('clayton', '-0.999'), ('clayton', '-1e-6'),
           ('clayton', '0.01'), ('gumbel', '1.0001'), ('gumbel', '1.5'), ('gumbel', '2'),
           ('gumbel', '5'), ('frank', '20'), ('frank', '-5'), ('frank', '-40'), ('joe', '1.001'), ('joe', '2'),
           ('joe', '5'), ('amh', '0.9'),
           ('amh', '-1'), ('plackett', '1e4'), ('plackett', '1e-4'), ('fgm', '1'), ('fgm', '-0.8')]

MORE = [('clayton', '1000', 90, '0.999999996', '0.00066'), ('clayton', '-0.9', 90, '0.384831', '0.000304478'),
        ('gumbel', '5', 270, '0.99999', '0.0009'), ('joe', '5', 270, '0.9998', '0.0007'),
        ('gumbel', '2', 180, '0.0001', '0.0001'), ('gumbel', '2', 180, '1e-8', '1e-8'),
        ('gumbel', '2', 90, '1e-6', '1e-6'), ('joe', '2', 270, '1e-4', '0.001'), ('frank', '20', 90, '0.3', '0.2'),
        ('plackett', '1e4', 90, '0.4', '0.3'), ('gumbel', '2', 180, '3e-17', '3e-18'),
        ('gumbel', '10000', 270, '0.9999999828163686', '1.7163467413520618e-08'),
        ('clayton', '19998', 90, '0.993249998355257', '0.006742191818910982')]


SMALL = [('1e-8', '1e-9'), ('1e-12', '1e-12'), ('1e-130', '1e-140'), ('1e-250', '0.4'), ('0.02', '0.3')]


def rotated(family, parameter, rotation, u, v):
    mp.dps = 800
    a, u, v, c = mpf(float(parameter)), mpf(float(u)), mpf(float(v)), PAIRS[family]
    return {90: lambda: v - c(1 - u, v, a), 180: lambda: u + v - 1 + c(1 - u, 1 - v, a),
            270: lambda: u - c(u, 1 - v, a)}[rotation]()


def rotated_pairs():
    near_one, near_zero = ('0.99', '0.995', '0.999', '0.9999'), ('9e-4', '5e-4', '1e-5')
    grid = [(u, v) for u in near_one for v in near_zero] + SMALL
    cases = [(f, a, rotation) + at for f, a in ROTATED for rotation in (90, 180, 270)
             for at in grid + [(v, u) for u, v in grid]]
    for case in cases + MORE:
        value = rotated(*case)
        small = value < mpf('1e-290')
        yield case + ('0', 'absolute 1e-290') if small else case + (nstr(value, 20), '1e-10 relative')


SURVIVAL = [('clayton', ('1e-9', '0.0202', '0.857', '3', '18', '198', '10000')),
            ('gumbel', ('1.000000001', '1.0101', '1.4286', '2.5', '10', '100', '10000')),
            ('frank', ('1e-9', '0.09', '2.917', '7.93', '38.28', '398', '10000')),
            ('joe', ('1.000000001', '1.0175', '1.77', '3.83', '18.7', '198', '10000'))]

# one number and how often it stands, for each group of columns
GROUPS = [[('1e-300', 1), ('0.5', 1)], [('1e-300', 2)], [('1e-12', 2)], [('0.02', 2)], [('1e-140', 1), ('1e-145', 1)],
          [('1e-8', 1), ('1e-9', 1)],
          [('0.01', 1), ('0.005', 1)], [('0.9999999999', 1), ('1e-10', 1)], [('0.3', 1), ('0.9999999999', 1)],
          [('0.01', 3)], [('1e-20', 1), ('1e-6', 1), ('0.7', 1)], [('1e-90', 2), ('1e-80', 1)],
          [(x, 1) for x in ('0.001', '0.002', '0.05', '0.4', '0.9999999999')], [('1e-50', 5)],
          [(str(k / 20), 1) for k in range(1, 11)], [('0.01', 10)], [('1e-25', 4), ('1e-12', 4), ('0.25', 2)],
          [('0.05', 20)], [('1e-10', 10), ('0.1', 10)], [('1e-4', 8), ('0.02', 6), ('0.999', 6)],
          [('0.01', 40)], [('1e-5', 20), ('0.2', 20)], [('0.6', 39), ('1e-100', 1)]]


def alternating(family, theta, groups, digits):
    mp.dps = digits
    psi, inverse = GENERATORS[family]
    a = mpf(float(theta))
    sums = [(mpf(0), 1)]                     # of t over a subset, and how many such subsets with their sign
    for u, n in groups:
        t = inverse(1 - mpf(float(u)), a)
        sums = [(s + k * t, m * (-1) ** k * binomial(n, k)) for s, m in sums for k in range(n + 1)]
    return mp.fsum(m * psi(s, a) for s, m in sums)


def survival(family, theta, groups):
    digits, before = 400, alternating(family, theta, groups, 200)
    while True:
        value = alternating(family, theta, groups, digits)
        if abs(value - before) < max(abs(value) * mpf('1e-22'), mpf('1e-300')):
            return value
        digits, before = digits * 2, value


def survivals():
    for family, thetas in SURVIVAL:
        for theta in thetas:
            for groups in GROUPS:
                value = survival(family, theta, groups)
                if value > mpf('1e-290'):
                    point = ' '.join(' '.join([u] * n) for u, n in groups)
                    yield family, theta, point, nstr(value, 20), '1e-10 relative'


def equicorrelated():
    """Given a normal factor, and for t the chi-square, columns are independent: 800 Gauss-Legendre points in each."""
    node, weight = numpy.polynomial.legendre.leggauss(800)
    z, weight = 9 * node, 9 * weight * stats.norm.pdf(9 * node)
    for df in (None, 4):
        for d in (129, 200, 500):
            for rho in (0.1, 0.5, 0.9):
                for u in (0.9, 0.99, 0.999):
                    x = special.ndtri(u) if df is None else stats.t.ppf(u, df)
                    scale = numpy.ones(1) if df is None else numpy.sqrt(stats.chi2.ppf(special.ndtr(z), df) / df)
                    given = special.ndtr((x * scale[:, None] - rho ** 0.5 * z) / (1 - rho) ** 0.5) ** d @ weight
                    yield d, df or '', rho, u, repr(float(given[0] if df is None else given @ weight))


def log_box(x, rho, d):
    """log P(all of d equicorrelated normal columns <= x) for each x: over the factor they share, in logarithms."""
    z = numpy.linspace(-40, 12, 20001)
    return numpy.array([special.logsumexp(stats.norm.logpdf(z) + d * special.log_ndtr(
        (each - rho ** 0.5 * z) / (1 - rho) ** 0.5)) + numpy.log(z[1] - z[0]) for each in numpy.atleast_1d(x)])


def small_boxes():
    """The same in the lower tail, and for t over log(chi-square/df)."""
    cases = ((20, 4, .3, .01), (20, None, .3, .01), (20, 8, .2, .01), (40, 8, .3, .01), (40, 8, .2, .01),
             (3, 4, .3, .01), (3, None, .3, .001), (5, 4, .5, 1e-6), (100, None, .5, .01), (100, 8, .2, .05),
             (10, None, .9, 1e-10), (10, 2.5, .9, .2), (50, None, .1, .9), (50, 30, .2, .95), (4, .5, .5, .01))
    for d, df, rho, u in cases:
        if df is None:
            value = log_box(special.ndtri(u), rho, d)[0]
        else:
            t = numpy.linspace(-90, 8, 3000)
            log_density = stats.chi2.logpdf(numpy.exp(t) * df, df) + t + numpy.log(df)
            x = stats.t.ppf(u, df) * numpy.exp(t / 2)
            value = special.logsumexp(log_density + log_box(x, rho, d)) + numpy.log(t[1] - t[0])
        yield d, df or '', rho, u, repr(float(numpy.exp(value)))


def main():
    which = sys.argv[1:] or ['tail', 'pair', 'archimedean', 'rotated', 'survival', 'equicorrelated', 'small']
    if 'tail' in which:
        write('student_tail.csv', ['df', 't', 'y', 'tail', 'tolerance'], student_tails())
    if 'pair' in which:
        write('student_pair.csv', ['df', 'correlation', 'u', 'v', 'C', 'tolerance'], student_pairs())
    if 'archimedean' in which:
        write('archimedean_points.csv', ['family', 'theta', 'u', 'C', 'log_density', 'conditional', 'tolerance'],
              archimedean_points())
    if 'survival' in which:
        write('survival_cdf.csv', ['family', 'theta', 'u', 'C', 'tolerance'], survivals())
    if 'equicorrelated' in which:
        write('equicorrelated.csv', ['d', 'df', 'correlation', 'u', 'C'], equicorrelated())
    if 'small' in which:
        write('small_boxes.csv', ['d', 'df', 'correlation', 'u', 'C'], small_boxes())
    if 'rotated' in which:
        write('rotated_cdf.csv', ['family', 'parameter', 'rotation', 'u', 'v', 'C', 'tolerance'], rotated_pairs())


if __name__ == '__main__':
    main()

"""Copulas where doubles are short of digits: writes extreme_points.csv, extreme_rotated.csv,
extreme_rho.csv, extreme_tail.csv and extreme_theta_of_rho.csv.

By definition, with mpmath: the copula from its generator or formula, its derivatives by power series of the
generator or by central differences at thousands of digits, elliptical ones from their densities. Every number of a
row is the double nearest to its decimals.

    /usr/bin/python3 extreme_points.py
"""
import csv
import os

from mpmath import (asinh, erfc, exp, expm1, factorial, findroot, hyp2f1, inf, log, log1p, loggamma, mp, mpf, nstr, pi,
                    quad, sinh, sqrt, tanh)

HERE = os.path.dirname(os.path.abspath(__file__))


def write(name, header, rows):
    with open(os.path.join(HERE, name), 'w', newline='') as f:
        out = csv.writer(f, lineterminator='\n')
        out.writerow(header)
        out.writerows(rows)


# ---- Archimedean: Taylor coefficients of psi(T (1 + x)) in x ----

def exp_series(a):
    e = [exp(a[0])]
    for k in range(1, len(a)):
        e.append(sum(j * a[j] * e[k - j] for j in range(1, k + 1)) / k)
    return e


def log_series(a):
    e = [log(a[0])]
    for k in range(1, len(a)):
        e.append((a[k] - sum(j * e[j] * a[k - j] for j in range(1, k)) / k) / a[0])
    return e


def power_series(a, p):
    b = [a[0] ** p]
    for k in range(1, len(a)):
        b.append(sum((p * j - (k - j)) * a[j] * b[k - j] for j in range(1, k + 1)) / (k * a[0]))
    return b


def psi_series(family, t, a, n):
    line = ([mpf(0), t] + [mpf(0)] * n)[:n + 1]
    if family == 'clayton':
        line[0] = 1 + t
        return power_series(line, -1 / a)
    if family == 'gumbel':
        line[0] = t
        return exp_series([-x for x in power_series(line, 1 / a)])
    falling = [exp(-t) * (-t) ** k / factorial(k) for k in range(n + 1)]
    if family == 'frank':
        inner = [expm1(-a) * x for x in falling]
        inner[0] += 1
        return [-x / a for x in log_series(inner)]
    inner = [-x for x in falling]
    inner[0] = -expm1(-t)
    b = [-x for x in power_series(inner, 1 / a)]
    b[0] += 1
    return b


def inverse(family, u, a):
    return {'clayton': lambda: u ** -a - 1, 'gumbel': lambda: (-log(u)) ** a,
            'frank': lambda: -log(expm1(-a * u) / expm1(-a)), 'joe': lambda: -log1p(-(1 - u) ** a)}[family]()


def derivative(family, t, a, order):
    return abs(psi_series(family, t, a, order)[order]) * factorial(order) / abs(t) ** order


def archimedean(family, a, u):
    d = len(u)
    mp.dps = 400 + (int(-3 * log(abs(a), 10)) if abs(a) < 1e-5 else 0) + (int(abs(a)) if family == 'frank' else 0)
    t = [inverse(family, x, a) for x in u]
    total, before = sum(t), sum(t[:-1])
    if family == 'clayton' and total <= -1:
        return mpf(0), -inf, mpf(0)
    slope = derivative(family, total, a, d - 1) / derivative(family, before, a, d - 1)
    density = log(derivative(family, total, a, d)) - sum(log(derivative(family, x, a, 1)) for x in t)
    return psi_series(family, total, a, 0)[0], density, slope


# ---- pairs by their formula ----

def plackett(u, v, a):
    s = 1 + (a - 1) * (u + v)
    return (s - sqrt(s * s - 4 * u * v * a * (a - 1))) / (2 * (a - 1))


PAIRS = {'amh': lambda u, v, a: u * v / (1 - a * (1 - u) * (1 - v)),
         'fgm': lambda u, v, a: u * v * (1 + a * (1 - u) * (1 - v)), 'plackett': plackett}


def pair(family, a, point):
    mp.dps = 4000
    u, v, c = point[0], point[1], PAIRS[family]
    h, k = min(u, 1 - u) * mpf(10) ** -300, min(v, 1 - v) * mpf(10) ** -300
    slope = (c(u + h, v, a) - c(u - h, v, a)) / (2 * h)
    density = (c(u + h, v + k, a) - c(u - h, v + k, a) - c(u + h, v - k, a) + c(u - h, v - k, a)) / (4 * h * k)
    return c(u, v, a), log(density), slope


# ---- elliptical, without the copula itself; df 0 is the normal one ----

def log_cosh(y):
    y = abs(y)
    return y + log1p(exp(-2 * y)) - log(2)


def log_peak(df):
    return loggamma((df + 1) / 2) - loggamma(df / 2) - log(pi) / 2


def beyond(y, df):
    """P(T > sqrt(df) sinh(y)), y >= 0"""
    if tanh(y) ** 2 > 0.5 and df < 2000:
        x = exp(-2 * log_cosh(y))
        return exp(df / 2 * log(x) + log_peak(df)) * tanh(y) / df * hyp2f1((df + 1) / 2, 1, df / 2 + 1, x)
    scale, at = 1 / (df * tanh(y) + sqrt(df)), log_cosh(y)
    cuts = [y + scale * k for k in (0, 2, 5, 10, 20, 50, 100, 200)] + [y + 200 * scale + 400 / df]
    return exp(log_peak(df) - df * at) * quad(lambda s: exp(-df * (log_cosh(s) - at)), cuts)


def tail(y, df):
    return erfc(y / sqrt(2)) / 2 if df == 0 else beyond(y, df)


def below(y, df):
    return tail(-y, df) if y <= 0 else 1 - tail(y, df)


def quantile(u, df):
    """by Newton's steps on the logarithm of the tail; for t in y"""
    if u == 0.5:
        return mpf(0)
    p = min(u, 1 - u)
    z = sqrt(-2 * log(p)) if p < 0.1 else mpf('0.5')
    y = z if df == 0 else max(asinh(z / sqrt(df)), -log(p) / df - 1 if df < 2 else 0)
    for _ in range(200):
        t = tail(y, df)
        density = exp(-y * y / 2) / sqrt(2 * pi) if df == 0 else exp(log_peak(df) - df * log_cosh(y))
        step = (log(t) - log(p)) * t / density
        y = max(y + step, y / 2)
        if abs(step) < mpf(10) ** -25:
            break
    return -y if u < 0.5 else y


def elliptical(r, df, u):
    """one correlation for all pairs"""
    mp.dps = 45
    d = len(u)
    factor = [[mpf(0)] * d for _ in range(d)]
    for i in range(d):
        for j in range(i + 1):
            rest = (1 if i == j else r) - sum(factor[i][k] * factor[j][k] for k in range(j))
            factor[i][j] = sqrt(rest) if i == j else rest / factor[j][j]
    x = [quantile(p, df) if df == 0 else sinh(quantile(p, df)) for p in u]
    y, squares, before = [], mpf(0), mpf(0)
    for j in range(d):
        y.append((x[j] - sum(factor[j][k] * y[k] for k in range(j))) / factor[j][j])
        before, squares = squares, squares + y[j] ** 2
    density = -sum(log(factor[j][j]) for j in range(d))
    if df == 0:
        return density + (sum(a * a for a in x) - squares) / 2, below(y[-1], df)
    density += loggamma((df + d) / 2) + (d - 1) * loggamma(df / 2) - d * loggamma((df + 1) / 2)
    density += (df + 1) / 2 * sum(log1p(a * a) for a in x) - (df + d) / 2 * log1p(squares)
    return density, below(asinh(y[-1] / sqrt(1 + before)), df + d - 1)


# ---- the points ----

NEAR = ['1e-300 1e-300', '1e-300 3e-301', '1e-200 1e-200', '1e-100 1.00002e-100', '1e-300 0.5', '0.5 1e-300', '1e-20 0.3',
        '1e-12 0.9999999999999999', '0.9999999999999999 1e-12', '0.99 0.01', '0.999999999999 0.999999999998',
        '0.9999999999999999 0.9999999999999999', '0.5 0.5001', '0.3 0.7', '1e-20 0.999999999999', '2e-298 1e-305']
THETAS = {'clayton': ['-0.999999999999', '-0.999', '-0.5', '-1e-8', '1e-300', '1e-8', '0.5', '3', '19998'],
          'gumbel': ['1.0000000000000002', '1.00000001', '1.3', '100', '10000'],
          'frank': ['-700', '-5', '-1e-8', '-1e-20', '-2e-308', '2e-308', '1e-300', '1e-15', '1e-8', '0.5', '700'],
          'joe': ['1.0000000000000002', '1.00000001', '1.999999999', '2', '20000'],
          'amh': ['-1', '-1e-8', '1e-300', '0.5', '0.999999999999', '1'],
          'plackett': ['1e-300', '1e-50', '1e-12', '0.5', '1.00000001', '30', '1e12', '1e200', '1e300'],
          'fgm': ['-1', '1e-300', '0.3', '1']}
MANY = [('clayton', '19998', '1e-300 1.00001e-300 1e-300 0.5 1.00003e-300'), ('clayton', '1e-300', '1e-300 0.5 1e-200 0.9'),
        ('clayton', '0.5', '1e-300 1e-12 0.999999999999 1e-300 0.5'), ('gumbel', '10000', '0.3 0.30001 0.29999 0.3'),
        ('joe', '20000', '0.3 0.30001 0.29999 0.3'), ('frank', '700', '0.3 0.301 0.299 1e-300')]
ELLIPTICAL = [(r, df, u) for df in ('0', '0.05', '0.5', '1', '5.5', '1e6') for r in ('-0.9999', '0', '0.3', '0.999999')
              for u in ('1e-300 1e-300', '1e-300 0.5', '0.5 1e-300', '1e-20 4e-31', '0.3 0.3001', '0.3 0.7',
                        '1e-12 0.9999999999999999')]
ELLIPTICAL += [('0.3', df, u) for df in ('0', '0.05', '0.5', '5.5')
               for u in ('0.5001 0.3 1e-300', '1e-300 0.5001 1e-100 0.2', '0.1 0.2 0.3 0.4 0.5')]


def numbers(text):
    return [mpf(float(x)) for x in text.split()]


def rows():
    points = [(f, a, u) for f, thetas in THETAS.items() for a in thetas for u in NEAR] + MANY
    for family, a, u in points:
        mp.dps = 60
        work = pair if family in PAIRS else archimedean
        yield (family, a, '0', u) + tuple(nstr(x, 20) for x in work(family, mpf(float(a)), numbers(u)))
    for r, df, u in ELLIPTICAL:
        mp.dps = 45
        values = elliptical(mpf(float(r)), mpf(float(df)), numbers(u))
        yield ('t' if float(df) else 'gaussian', r, df, u, '') + tuple(nstr(x, 20) for x in values)


def rotated_rows():
    """P(V <= v | U = u) of rotated pairs, at points whose 1 - u and 1 - v are doubles"""
    thetas = {'clayton': ['-0.9', '-0.5', '1e-8', '2', '20'], 'gumbel': ['1.00000001', '2', '100'],
              'frank': ['-300', '-1e-8', '1e-8', '5', '300'], 'joe': ['1.00000001', '2', '50'], 'amh': ['-1', '0.5', '1'],
              'plackett': ['1e-12', '0.5', '1e12'], 'fgm': ['-1', '0.3', '1']}
    ends = (mpf(1) / 4, mpf(3) / 4, mpf(2) ** -10, 1 - mpf(2) ** -10, mpf(2) ** -40, 1 - mpf(2) ** -40)
    for family, values in thetas.items():
        work = pair if family in PAIRS else archimedean
        for text, rotation, u, v in ((t, r, u, v) for t in values for r in (180, 270) for u in ends for v in ends):
            mp.dps = 60
            below_v = work(family, mpf(float(text)), [1 - u if rotation == 180 else u, 1 - v])[2]
            yield family, text, rotation, nstr(u, 20), nstr(v, 20), nstr(1 - below_v, 20)


def rho_rows():
    """12 times the integral of C - uv, which joe loses to rounding near independence"""
    mp.dps = 40
    for text in ('1.0000000000000002', '1.000000000001', '1.00000001', '1.001', '1.3', '2'):
        a = mpf(float(text))

        def apart(u, v):
            # with x = (1-u)^a, y = (1-v)^a: 1 - (x + y - x y)^(1/a) - u v
            x, y = a * log(1 - u), a * log(1 - v)
            return 1 - exp(log(exp(x) + exp(y) - exp(x + y)) / a) - u * v
        yield 'joe', text, nstr(12 * quad(lambda u: quad(lambda v: apart(u, v), [0, 1]), [0, 1]), 18)


def rho_gumbel(a):
    """12 times the integral of (1 + A)^-2, less 3, with Pickands' function A (Nelsen 2006)"""
    def pickands(w):
        return (w ** a + (1 - w) ** a) ** (1 / a)
    cuts = sorted({mpf(0), mpf('0.2'), mpf('0.4'), mpf('0.5')} | {mpf('0.5') - min(mpf('0.5'), k / a) for k in (1, 3, 10, 30)})
    return 24 * quad(lambda w: (1 + pickands(w)) ** -2, cuts) - 3


def rho_frank(a):
    """1 - 12 (D1 - D2) / theta with the Debye functions (Nelsen 2006)"""
    cuts = [0, 1, 5, 20, 60, 150, a] if a > 150 else [0, a / 4, a]
    first = quad(lambda t: t / expm1(t), cuts) / a
    return 1 - 12 * (first - 2 * quad(lambda t: t * t / expm1(t), cuts) / a ** 2) / a


def rho_plackett(a):
    return (a + 1) / (a - 1) - 2 * a * log(a) / (a - 1) ** 2


def strong_rows():
    mp.dps = 40
    for text in ('0.97', '0.99', '0.9999', '0.99999999', '0.999999999999'):
        left = 1 - mpf(float(text))
        for family, rho, start in (('gumbel', rho_gumbel, sqrt(1 / left)), ('frank', rho_frank, sqrt(20 / left)),
                                   ('plackett', rho_plackett, -2 * log(left) / left)):
            theta = findroot(lambda x: log((1 - rho(exp(x))) / left), (log(start), log(start) + 0.1), solver='secant')
            yield family, text, nstr(exp(theta), 18)


def tail_rows():
    mp.dps = 45
    for df in ('0.001', '0.5', '2.5', '30', '10000'):
        for r in ('-0.999999999999999', '-0.5', '0', '0.99', '0.999999', '0.999999999999999'):
            x = mpf(float(r))
            value = 2 * beyond(asinh(sqrt((1 - x) / (1 + x))), mpf(float(df)) + 1)
            if value > mpf('1e-300'):
                yield df, r, nstr(value, 18)


if __name__ == '__main__':
    write('extreme_points.csv', ['family', 'parameter', 'df', 'u', 'C', 'log_density', 'conditional'], rows())
    write('extreme_rotated.csv', ['family', 'parameter', 'rotation', 'u', 'v', 'conditional'], rotated_rows())
    write('extreme_rho.csv', ['family', 'theta', 'rho'], rho_rows())
    write('extreme_theta_of_rho.csv', ['family', 'rho', 'theta'], strong_rows())
    write('extreme_tail.csv', ['df', 'correlation', 'lambda'], tail_rows())

#!/usr/bin/python3
"""Writes chi_square_score.csv, grouped_points.csv and grouped_pair.csv with mpmath, 26 digits, by definition: with V
uniform and chi_j the chi-square quantile of V with df_j degrees of freedom, column j is a normal number times
sqrt(df_j/chi_j). The integrals are over the logarithm of chi_1/df_1, whose density is elementary; the other chi-squares
there are quantiles of the probability of the first. u, df and correlation are the doubles nearest to what stands."""
import csv
import os
import sys

from mpmath import asinh, cholesky, cosh, erfc, exp, log, log1p, loggamma, matrix, mp, mpf, nstr, pi, quad, sinh, \
    sqrt, tanh

HERE = os.path.dirname(os.path.abspath(__file__))
mp.dps = 26


def write(name, header, rows):
    with open(os.path.join(HERE, name), 'w', newline='') as f:
        out = csv.writer(f, lineterminator='\n')
        out.writerow(header)
        for row in rows:
            out.writerow(row)
            f.flush()


# ---- chi-square: y = log(chi/df); the log of its lower or upper probability ----

def log_front(y, df):
    """log of the density of y"""
    a = df / 2
    return a * log(a) - loggamma(a) + a * y - a * exp(y)


def log_tail(y, df, upper):
    """Abramowitz & Stegun (1964), 6.5.29, and 6.5.31 in the form of Lentz"""
    a = df / 2
    x = a * exp(y)
    if upper and x < a + 1:
        return log1p(-exp(log_tail(y, df, False)))
    if not upper:
        term, total, n = mpf(1), mpf(1), 0
        while term > total * mpf(10) ** -27:
            n += 1
            term *= x / (a + n)
            total += term
        return log_front(y, df) + log(total) - log(a)
    b, n = x + 1 - a, 0
    c, d = mpf(10) ** 40, 1 / b
    f, change = d, mpf(0)
    while abs(change - 1) > mpf(10) ** -26:
        n += 1
        b += 2
        d = 1 / (-n * (n - a) * d + b)
        c = -n * (n - a) / c + b
        change = c * d
        f *= change
    return log_front(y, df) + log(f)


def log_tails(y, df):
    """the side that is the smaller and its log-probability"""
    if y < log1p(1 / df):
        below = log_tail(y, df, False)
        if below < -0.7:
            return False, below
    return True, log_tail(y, df, True)


def quantile(upper, log_p, df, near=None):
    """y with that probability beyond it: Newton's steps, from outside where the logarithm is concave, or from `near`"""
    a = df / 2
    part = -log_p / a
    y = log1p(part + sqrt(2 * part)) if upper else -part - sqrt(2 * part) - 1
    if not upper and a < 5:
        y = (log_p + loggamma(a + 1)) / a - log(a)
    if near is not None:
        y = near
    for _ in range(200):
        found = log_tail(y, df, upper)
        slope = exp(log_front(y, df) - found)
        step = (found - log_p) / slope * (1 if upper else -1)
        step = max(mpf(-2), min(mpf(2), step)) if abs(y) < 4 else step
        y += step
        if abs(step) < mpf(10) ** -22 * max(1, abs(y)):
            return y
    raise ValueError((upper, log_p, df))


def log_phi(z):
    """log P(Z > z), z > 0"""
    return log(erfc(z / sqrt(mpf(2))) / 2)


def scores():
    for df in ('0.001', '0.05', '0.7', '3', '30', '1000', '1000000'):
        for z in ('-300', '-60', '-37.5', '-20.3', '-9', '-8.1', '-3', '1', '8.05', '9.7', '25', '38', '140', '4000'):
            upper = mpf(z) > 0
            if abs(mpf(z)) < 4 and float(df) < 0.5:
                continue
            y = quantile(upper, log_phi(abs(mpf(z))), mpf(float(df)))
            yield df, z, nstr(y / 2, 18)


# ---- t: quantiles by a = asinh(x/sqrt(df)) ----

def t_log_tail(a, df):
    """log P(A > a), a >= 0, and the slope of it"""
    log_peak = loggamma((df + 1) / 2) - loggamma(df / 2) - log(pi) / 2
    scale = 1 / (df * tanh(a) + sqrt(df))
    start = df * log(cosh(a))
    points = [a + scale * k for k in (0, 1, 2, 4, 8, 16, 32, 64, 128, 256)]
    integral = quad(lambda y: exp(start - df * log(cosh(y))), points)
    return log_peak - start + log(integral), 1 / integral


def t_quantile(u, df):
    if u == mpf('0.5'):
        return mpf(0)
    wanted = log(u) if u < 0.5 else log(1 - u)
    a = asinh(sqrt(-2 * wanted) / sqrt(df)) if -wanted < df else (log(mpf(2)) * df - wanted) / df
    for _ in range(200):
        found, slope = t_log_tail(a, df)
        step = (found - wanted) / slope
        a = max(a / 4, a + step)
        if abs(step) < mpf(10) ** -22 * max(1, a):
            return -a if u < 0.5 else a
    raise ValueError((u, df))


# ---- integrals over y_1 ----

class Columns:
    def __init__(self, u, df, correlation):
        self.df = [mpf(float(x)) for x in df]
        self.u = [mpf(float(x)) for x in u]
        d = len(df)
        self.a = [t_quantile(x, v) for x, v in zip(self.u, self.df)]
        r = matrix(d, d)
        for i in range(d):
            for j in range(d):
                r[i, j] = 1 if i == j else mpf(float(correlation))
        self.factor = cholesky(r) if abs(float(correlation)) < 1 else None
        self.known, self.near = {}, {}

    def logs(self, y):
        """log(chi_j/df_j) of every column where that of the first is y"""
        key = nstr(y, 26)
        if key not in self.known:
            upper, log_p = log_tails(y, self.df[0])
            for v in set(self.df):
                last = self.near.get((v, upper))
                start = last[1] if last and abs(last[0] - log_p) < 3 else None
                self.near[v, upper] = log_p, y if v == self.df[0] else quantile(upper, log_p, v, start)
            self.known[key] = [self.near[v, upper][1] for v in self.df]
        return self.known[key]

    def normals(self, y):
        return [sqrt(v) * sinh(a) * exp(s / 2) for v, a, s in zip(self.df, self.a, self.logs(y))]

    def given(self, y, n):
        """log density of y and the first n columns, and the standardised column n"""
        logs, x, e = self.logs(y), self.normals(y), []
        total = log_front(y, self.df[0])
        for j in range(min(n + 1, len(x))):
            row = self.factor[j, :]
            e.append((x[j] - sum(row[i] * e[i] for i in range(j))) / row[j])
            if j < n:
                total += logs[j] / 2 - e[j] ** 2 / 2 - log(row[j]) - log(2 * pi) / 2
        return total, e[-1]


def where(f):
    """the peak of the log-integrand f, and the ends of where it is more than exp(-38) of that"""
    ys = [mpf(k) / 4 for k in range(-40, 13)]
    for _ in range(60):
        values = [f(y) for y in ys]
        best = max(range(len(ys)), key=lambda k: values[k])
        if best == 0:
            ys = [y * 4 - 6 for y in ys if y < -3]
            continue
        low, high = ys[best - 1], ys[min(best + 1, len(ys) - 1)]
        if values[best] - min(f(low), f(high)) < 0.5:
            break
        ys = [low + (high - low) * k / 8 for k in range(9)]
    top, peak, ends = values[best], ys[best], []
    for way in (-1, 1):
        step = high - low
        while top - f(peak + way * step) < 38:
            step *= mpf('1.5')
        ends.append(peak + way * step)
    return top, ends[0], ends[1]


def log_integral(f):
    """the trapezoid rule, its step halved until 13 digits agree: the last halving squares the error"""
    top, low, high = where(f)
    n, before = 32, mpf(0)
    step = (high - low) / n
    total = sum(exp(f(low + step * k) - top) for k in range(n + 1))
    while abs(total * step - before) > mpf(10) ** -13 * total * step:
        before = total * step
        total += sum(exp(f(low + step * (k + mpf('0.5'))) - top) for k in range(n))
        n, step = 2 * n, step / 2
    return top + log(total * step)


def log_density(c):
    d = len(c.u)
    total = log_integral(lambda y: c.given(y, d)[0])
    for a, v in zip(c.a, c.df):
        total -= loggamma((v + 1) / 2) - loggamma(v / 2) - log(pi * v) / 2 - (v + 1) * log(cosh(a))
    return total


def log_normal(x):
    return log(erfc(-x / sqrt(mpf(2))) / 2)


def conditional(c):
    """of the last column"""
    n = len(c.u) - 1

    def numerator(y):
        given, last = c.given(y, n)
        return given + log_normal(last)

    return exp(log_integral(numerator) - log_integral(lambda y: c.given(y, n)[0]))


POINTS = [
    ('3 8', '0.5', '1e-9 0.3'), ('3 8', '0.5', '1e-300 0.9999999999999999'), ('0.05 100', '0.5', '1e-300 0.3'),
    ('1 4', '0.9', '1e-250 0.99999'), ('30 1000', '-0.9', '1e-300 1e-200'), ('0.2 0.7', '0.99', '0.4 0.6'),
    ('0.5 4 1000', '0.4', '0.5 0.5 0.5'), ('0.5 4 1000', '0.4', '1e-12 0.7 0.999'),
    ('12 3 0.05', '-0.2', '0.9999999 0.2 1e-99'), ('2 5 9 100 0.3', '0.5', '0.1 0.5 0.9 0.00001 0.3'),
    ('2 5 9 100 0.3', '0.5', '1e-30 1e-300 1e-20 1e-8 1e-200'), ('1 4 30' + ' 4' * 17, '0.4', ' '.join(['0.5'] * 20)),
    ('1 4 30' + ' 4' * 17, '0.4', ' '.join(['1e-250'] * 20)),
    ('1 4 0.1' + ' 30' * 17, '0.2', ' '.join('%g' % ((k * 7 % 20 + 0.5) / 20) for k in range(20))),
]


def points():
    for df, correlation, u in POINTS:
        c = Columns(u.split(), df.split(), correlation)
        yield df, correlation, u, nstr(log_density(c), 18), nstr(conditional(c), 18)


# ---- pairs ----

def normal_density(x):
    return exp(-x * x / 2) / sqrt(2 * pi)


def normal_pair(x, y, correlation):
    if correlation == 1:
        return erfc(-min(x, y) / sqrt(mpf(2))) / 2
    if correlation == -1:
        return max(mpf(0), (erfc(-x / sqrt(mpf(2))) - erfc(y / sqrt(mpf(2)))) / 2)
    x, y = min(x, y), max(x, y)
    spread, x = sqrt(1 - correlation ** 2), min(x, mpf(12))
    cuts, step = [x], min(1 / (1 + abs(x)), 4 * spread)
    while x - cuts[-1] < 14 + 4 / (1 + abs(x)) and (x - cuts[-1]) * (abs(x) if x < 0 else 0) < 80:
        cuts.append(cuts[-1] - step)
        step *= 2
    scale = normal_density(x) if x < 0 else 1
    return scale * quad(lambda t: normal_density(t) / scale * erfc((correlation * t - y) / spread / sqrt(mpf(2))) / 2,
                        cuts[::-1])


def pair(u, v, df, correlation):
    c = Columns([u, v], df, '0')
    r = mpf(float(correlation))

    def integrand(y):
        x = c.normals(y)
        value = normal_pair(x[0], x[1], r)
        return log_front(y, c.df[0]) + (log(value) if value > 0 else -100000 - abs(x[0] + x[1]))

    if abs(r) < 1:
        return exp(log_integral(integrand))
    top, low, high = where(integrand)

    def apart(y):
        x = c.normals(y)
        return log(abs(x[0] / x[1]))

    if (apart(low) > 0) == (apart(high) > 0):
        return exp(log_integral(integrand))
    left, right = low, high
    for _ in range(100):
        middle = (left + right) / 2
        left, right = (middle, right) if (apart(middle) > 0) == (apart(low) > 0) else (left, middle)
    cuts = [low + (left - low) * k / 4 for k in range(5)] + [left + (high - left) * k / 4 for k in range(1, 5)]
    return exp(top) * quad(lambda y: exp(integrand(y) - top), cuts, maxdegree=4)


PAIRS = [
    ('3 8', '1', '0.3', '0.3'), ('3 8', '1', '1e-9', '1.1e-9'), ('3 8', '-1', '0.3', '0.7'), ('3 8', '-1', '0.4', '0.61'),
    ('0.5 20', '1', '1e-100', '1e-80'), ('0.5 20', '-1', '0.01', '0.995'), ('3 8', '0.5', '1e-9', '0.3'),
    ('3 8', '0.5', '1e-280', '1e-280'), ('1 4', '-0.9', '1e-12', '1e-9'), ('1 4', '0.99', '0.3', '0.35'),
    ('30 1000', '0.9', '1e-250', '1e-240'),
]


def pairs():
    for df, correlation, u, v in PAIRS:
        yield df, correlation, u, v, nstr(pair(u, v, df.split(), correlation), 18)


def main():
    which = sys.argv[1:] or ['score', 'points', 'pair']
    if 'score' in which:
        write('chi_square_score.csv', ['df', 'z', 'log_scale'], scores())
    if 'points' in which:
        write('grouped_points.csv', ['df', 'correlation', 'u', 'log_density', 'conditional'], points())
    if 'pair' in which:
        write('grouped_pair.csv', ['df', 'correlation', 'u', 'v', 'C'], pairs())


if __name__ == '__main__':
    main()

#!/usr/bin/python3
"""Writes generator_derivatives.csv with mpmath: the log of |psi^(order)(t)| at t = exp(log_t) by Cauchy's integral,
psi^(n)(t) / n! = 1/(2 pi i) int psi(t + z) z^(-n-1) dz on the circle |z| = r m, 0 < r < 1, where m is the distance from t to the
nearest singularity. On a circle the trapezoidal rule with N points leaves out only the coefficients of orders n + N, n + 2 N, ...
As psi is completely monotone, psi(t - r m) bounds the integrand: r is where psi(t - r m) / r^n is least, and the digits that the
integral loses are known when it is done; it is done again with more until 30 are left. Argument: the number of processes."""
import csv
import multiprocessing
import os
import sys

from mpmath import mp, mpf, exp, expjpi, expm1, factorial, log, log1p, nstr

HERE = os.path.dirname(os.path.abspath(__file__))

def log_rest(z):
    """log(1 - exp(-z))"""
    return log1p(-exp(-z)) if abs(z) > 1 else log(-expm1(-z))


# psi at distance m (1 - s) from the nearest singularity, s in the unit circle
PSI = {
    'gumbel': lambda m, s, a: exp(-(m * (1 - s)) ** (1 / a)),
    'frank': lambda m, s, a: -log_rest(m * (1 - s)) / a,
    'joe': lambda m, s, a: -expm1(log_rest(m * (1 - s)) / a),
}


def distance(family, t, a):
    return t - log_rest(a) if family == 'frank' else t


def circle(family, m, a, n):
    """The logarithm of the bound is convex in log r."""
    def bound(e):
        r = -expm1(e)
        return log(abs(PSI[family](m, r, a))) - n * log(r)
    low, high = mpf(-7), mpf(-1) / mpf(10) ** 9
    for _ in range(60):
        one, two = low + (high - low) / 3, high - (high - low) / 3
        low, high = (low, two) if bound(one) < bound(two) else (one, high)
    return -expm1(low)


def derivative(job):
    family, theta, n, log_t = job
    left, digits = 0, 60
    while left < 30:
        mp.dps = digits
        a, t = mpf(float(theta)), exp(mpf(float(log_t)))
        m = distance(family, t, a)
        r = min(circle(family, m, a, n), mpf('0.97'))
        count = n + int(120 / -log(r)) + 60
        total = PSI[family](m, r, a) / 2
        for j in range(1, (count + 1) // 2):
            total += (PSI[family](m, r * expjpi(mpf(2 * j) / count), a) * expjpi(-mpf(2 * j * (n % count)) / count)).real
        if count % 2 == 0:
            total += PSI[family](m, -r, a) / 2 * (-1) ** n
        total *= mpf(2) / count
        largest = abs(PSI[family](m, r, a)) + abs(PSI[family](m, -r, a))
        left = digits - max(0, float(log(largest / abs(total), 10))) if total > 0 else 0
        value = log(abs(total)) + log(factorial(n)) - n * (log(r) + log(m))
        digits *= 2
    return family, theta, n, log_t, nstr(value, 20)


def jobs():
    ts = (1e-300, 1e-3, 0.5, 2.1, 5, 20, 60)
    for n in (1, 3, 32, 33, 50, 300, 1000, 1500, 2049):
        for theta in ('1.000000001', '1.01', '2', '20', '10000'):
            for x in (1e-16, 1e-3, 0.3, 5, 60, 1000, 690 * n ** (1 / float(theta))):
                yield 'gumbel', theta, n, repr(float(theta) * float(log(mpf(x))))
        for family, thetas in (('frank', ('1e-9', '5', '50', '700')), ('joe', ('1.000000001', '1.01', '2', '8', '10000'))):
            for theta in thetas:
                for t in ts + (690 * n,):
                    yield family, theta, n, repr(float(log(mpf(t))))


def main():
    with multiprocessing.Pool(int(sys.argv[1]) if len(sys.argv) > 1 else 1) as workers:
        rows = workers.map(derivative, jobs(), chunksize=1)
    with open(os.path.join(HERE, 'generator_derivatives.csv'), 'w', newline='') as f:
        out = csv.writer(f, lineterminator='\n')
        out.writerow(['family', 'theta', 'order', 'log_t', 'log_derivative'])
        out.writerows(rows)


if __name__ == '__main__':
    main()

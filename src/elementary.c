/* elementary.c - exp, log and their like with the same bits everywhere.
 *
 * Method
 *   exp      x = n ln 2 + r, |r| <= ln(2)/2, r in two parts; power series to r^13; exact scaling
 *            by 2^n.
 *   log      x = 2^k (1 + f), s = f / (2 + f); log(1 + f) = f - f^2/2 + s (f^2/2 + R(s^2)), the
 *            form and polynomial of fdlibm (Ng 1993).
 *   log1p    the same with the rounding error of 1 + x put back.
 *   sin pi   reflected to [0;1/2], there the power series of sine or cosine up to pi/4.
 *   Only + - x / and integer operations, compiled without contraction.
 *
 * Special cases
 *   As in elementary.h. Subnormal arguments of log are scaled up first.
 *
 * Accuracy
 *   As in elementary.h; tests/core/elementary.c measures it against long double.
 */
#include "elementary.h"

#include <math.h>

static const double LN2 = 0x1.62e42fefa39efp-1;

/* 2^n for -1022 <= n <= 1023 */
static double power_of_two(int n)
{
    return from_bits((uint64_t)(n + 1023) << 52);
}

/* e^x = 2^n (1 + p): returns p */
static double reduced(double x, int *n)
{
    double whole = (x * 0x1.71547652b82fep+0 + WHOLE) - WHOLE;
    *n = (int)whole;
    return expm1_reduced(x - whole * LN2_HIGH, whole * LN2_LOW);
}

double portable_exp(double x)
{
    if (x != x) return x;
    if (x > 709.8) return INFINITY;
    if (x < -746.0) return 0.0;
    if (x >= -708.0 && x <= 709.0) return exp_within(x);
    int n;
    double p = reduced(x, &n);
    int half = n / 2;
    return (1.0 + p) * power_of_two(half) * power_of_two(n - half);
}

double portable_expm1(double x)
{
    if (x != x) return x;
    if (x > 100.0) return portable_exp(x);
    if (x < -50.0) return -1.0;
    int n;
    double p = reduced(x, &n);
    return n == 0 ? p : power_of_two(n) * (p + (1.0 - power_of_two(-n)));
}

double portable_exp_beyond_line(double x)
{
    if (fabs(x) > 0.5) return portable_expm1(x) - x;
    double sum = 0.0;
    for (int n = 16; n >= 2; n--) sum = (1.0 + sum) * x / n;
    return sum * x;
}

double portable_log(double x)
{
    if (x != x || x < 0.0) return NAN;
    if (x == 0.0) return -INFINITY;
    if (x == INFINITY) return x;
    if (x >= 0x1p-1022) return log_within(x);
    double f, k = split_off_power(x * 0x1p54, &f);
    return log_assembled(k - 54.0, f, 0.0);
}

double portable_log1p(double x)
{
    if (x != x || x < -1.0) return NAN;
    if (x == -1.0) return -INFINITY;
    if (x > 1e300) return portable_log(x);
    return log1p_within(x);
}

double portable_log1pexp(double x)
{
    if (x > 40.0) return x;
    return portable_log1p(portable_exp(x));
}

double portable_log1mexp(double x)
{
    if (x > -LN2) return portable_log(-portable_expm1(x));
    return portable_log1p(-portable_exp(x));
}

double portable_sin_pi(double x)
{
    return sin_pi_within(x);
}

double portable_pow(double x, double y)
{
    return portable_exp(y * portable_log(x));
}

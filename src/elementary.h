/* elementary.h - exp, log and their like whose bits are the same on every machine.
 *
 * Whatever fixes a draw under a seed is computed with these and with + - x / sqrt
 * alone: the system's own functions change bits with the processor. Errors are
 * below one unit in the last place unless it says otherwise. No errno, no state;
 * NaN gives NaN.
 */
#ifndef ELEMENTARY_H
#define ELEMENTARY_H

#include <stdint.h>
#include <string.h>

/* e^x; 0 far below, infinite above 709.78. Subnormal results keep their last bit or the next. */
double portable_exp(double x);

/* e^x - 1 without cancellation; below two units in the last place. */
double portable_expm1(double x);

/* e^x - 1 - x without cancellation */
double portable_exp_beyond_line(double x);

/* natural logarithm; log 0 is -infinity, of a negative number NaN */
double portable_log(double x);

/* log(1 + x) without cancellation; at -1 it is -infinity, below NaN */
double portable_log1p(double x);

/* log(1 + e^x) for every x, without overflow; below three units */
double portable_log1pexp(double x);

/* log(1 - e^x) for x < 0, -infinity at 0; below three units */
double portable_log1mexp(double x);

/* sin(pi x) for 0 <= x <= 1, exactly 0 at both ends; below two units */
double portable_sin_pi(double x);

/* x^y for x > 0 by way of exp(y log x): the relative error grows with |y log x|. */
double portable_pow(double x, double y);

/* Functions that loops over rows call must be expanded in place, or the loops do not become vector
 * code. */
#define IN_LOOPS static inline __attribute__((always_inline))

/* 2^52 + 2^51: adding it rounds a small number to a whole one, whose low bits then
 * stand in the low bits of the sum. */
static const double WHOLE = 6755399441055744.0;

static const double LN2_HIGH = 0x1.62e42feep-1, LN2_LOW = 0x1.a39ef35793c76p-33;
static const double SQRT_HALF = 0x1.6a09e667f3bcdp-1;

IN_LOOPS uint64_t bits_of(double x)
{
    uint64_t b;
    memcpy(&b, &x, sizeof b);
    return b;
}

IN_LOOPS double from_bits(uint64_t b)
{
    double x;
    memcpy(&x, &b, sizeof x);
    return x;
}

/* a or b, without a branch, which a compiler may make of ?: and which then keeps a loop scalar */
IN_LOOPS double chosen(int first, double a, double b)
{
    uint64_t mask = 0 - (uint64_t)(first != 0);
    return from_bits((bits_of(a) & mask) | (bits_of(b) & ~mask));
}

/* e^r - 1 for r = high - low, |r| <= 0.3466, by its power series, whose first term left out is
 * below 2^-60; high is exact and low tiny */
IN_LOOPS double expm1_reduced(double high, double low)
{
    double r = high - low, p = 1.0 / 6227020800.0;
    p = p * r + 1.0 / 479001600.0;
    p = p * r + 1.0 / 39916800.0;
    p = p * r + 1.0 / 3628800.0;
    p = p * r + 1.0 / 362880.0;
    p = p * r + 1.0 / 40320.0;
    p = p * r + 1.0 / 5040.0;
    p = p * r + 1.0 / 720.0;
    p = p * r + 1.0 / 120.0;
    p = p * r + 1.0 / 24.0;
    p = p * r + 1.0 / 6.0;
    p = p * r + 0.5;
    return high + (r * r * p - low);
}

/* e^x for -708 <= x <= 709, without a branch, so that loops over it become vector code */
IN_LOOPS double exp_within(double x)
{
    double shifted = x * 0x1.71547652b82fep+0 + WHOLE, n = shifted - WHOLE;
    double p = expm1_reduced(x - n * LN2_HIGH, n * LN2_LOW);
    return (1.0 + p) * from_bits((bits_of(shifted) + 1023) << 52);
}

/* what is common to the logarithms: log(2^k (1 + f)) + c, with 1 + f within sqrt(1/2) and
 * sqrt(2) and c tiny. The polynomial is that of fdlibm (Ng, 1993): log((1 + s)/(1 - s)). */
IN_LOOPS double log_assembled(double k, double f, double c)
{
    double s = f / (2.0 + f), z = s * s, half = 0.5 * f * f;
    double r = 1.479819860511658591e-01;
    r = r * z + 1.531383769920937332e-01;
    r = r * z + 1.818357216161805012e-01;
    r = r * z + 2.222219843214978396e-01;
    r = r * z + 2.857142874366239149e-01;
    r = r * z + 3.999999999940941908e-01;
    r = r * z + 6.666666666666735130e-01;
    r = r * z;
    return k * LN2_HIGH - ((half - (s * (half + r) + (k * LN2_LOW + c))) - f);
}

/* splits a positive normal number into 2^k (1 + f) */
IN_LOOPS double split_off_power(double x, double *f)
{
    uint64_t b = bits_of(x) + (0x3ff0000000000000u - 0x3fe6a09e667f3bcdu);
    double k = from_bits((b >> 52) | 0x4330000000000000u) - (0x1p52 + 1023.0);
    *f = from_bits((b & 0x000fffffffffffffu) + 0x3fe6a09e667f3bcdu) - 1.0;
    return k;
}

/* log x for positive normal finite x, without a branch */
IN_LOOPS double log_within(double x)
{
    double f, k = split_off_power(x, &f);
    return log_assembled(k, f, 0.0);
}

/* log(1 + x) for -0.99 <= x <= 1e300, without a branch. What 1 + x loses to rounding comes back
 * as c; with k = 0 nothing of x need be lost. */
IN_LOOPS double log1p_within(double x)
{
    double u = 1.0 + x, f, k = split_off_power(u, &f);
    double lost = chosen(x < 1.0, x - (u - 1.0), 1.0 - (u - x));
    return log_assembled(k, chosen(k == 0.0, x, f), chosen(k == 0.0, 0.0, lost / u));
}

/* e^x - 1 for -708 <= x <= 709, and e^x beside it, without a branch; below two units */
IN_LOOPS double expm1_within(double x, double *exp_x)
{
    double shifted = x * 0x1.71547652b82fep+0 + WHOLE, n = shifted - WHOLE;
    double p = expm1_reduced(x - n * LN2_HIGH, n * LN2_LOW);
    double scale = from_bits((bits_of(shifted) + 1023) << 52);
    *exp_x = (1.0 + p) * scale;
    return p * scale + (scale - 1.0);
}

/* sin(pi x) for 0 <= x <= 1 without a branch: both the sine and the cosine about the nearest
 * multiple of 1/2, of which one is chosen */
IN_LOOPS double sin_pi_within(double x)
{
    double y = chosen(x > 0.5, 1.0 - x, x), near = chosen(y <= 0.25, y, 0.5 - y);
    double t = near * 0x1.921fb54442d18p+1, z = t * t;
    double sine = 1.0 / 355687428096000.0, cosine = 1.0 / 20922789888000.0;
    sine = sine * z - 1.0 / 1307674368000.0;
    sine = sine * z + 1.0 / 6227020800.0;
    sine = sine * z - 1.0 / 39916800.0;
    sine = sine * z + 1.0 / 362880.0;
    sine = sine * z - 1.0 / 5040.0;
    sine = sine * z + 1.0 / 120.0;
    sine = sine * z - 1.0 / 6.0;
    cosine = cosine * z - 1.0 / 87178291200.0;
    cosine = cosine * z + 1.0 / 479001600.0;
    cosine = cosine * z - 1.0 / 3628800.0;
    cosine = cosine * z + 1.0 / 40320.0;
    cosine = cosine * z - 1.0 / 720.0;
    cosine = cosine * z + 1.0 / 24.0;
    cosine = cosine * z - 0.5;
    return chosen(y <= 0.25, t + t * z * sine, 1.0 + z * cosine);
}

/* the whole part of 0 <= x < 2^51, where floor() would keep a loop scalar */
IN_LOOPS double whole_part(double x)
{
    double nearest = (x + 0x1p52) - 0x1p52;
    return nearest - chosen(nearest > x, 1.0, 0.0);
}

/* x held within low and high; NaN gives low */
IN_LOOPS double held(double x, double low, double high)
{
    double above = chosen(x > low, x, low);
    return chosen(above < high, above, high);
}

#endif

/* normal.c - the normal distribution function and its inverse
 *
 * Method
 *   Phi      P(Z > x) exp(x^2/2) (x + 2) as a polynomial in (x - 5.5)/(x + 5.5), the form of
 *            Shepherd & Laframboise (1981), Chebyshev approximation of (1 + 2x) exp(x^2) erfc x.
 *            The coefficients are a Chebyshev fit in quadruple precision (error 2e-16). The part
 *            of x^2 that rounding loses is put back into the exponential.
 *   log Phi  below -10 by Laplace's continued fraction (Abramowitz & Stegun 1964, 26.2.14).
 *   inverse  Wichura (1988), algorithm AS 241: rational functions of u - 1/2 in the middle and of
 *            sqrt(-log p) in the tails.
 *   One formula for all rows, chosen between by selection, so that the loops become vector code.
 *
 * Special cases
 *   u = 0 and 1 give -infinity and infinity, u outside [0;1] and NaN give NaN.
 *
 * Accuracy
 *   As in normal.h; tests/core/normal.c measures it against the long double erfc.
 */
#include "normal.h"

#include <math.h>

static const double SMALLEST = 0x1p-53;

/* P(Z > x) for 0 <= x <= 37.5 */
IN_LOOPS double upper_tail(double x)
{
    double far = x + 5.5, near = x + 2.0, d = 1.0 / (far * near);
    double t = (x - 5.5) * near * d;
    double p = -9.6698208630886781e-12;
    p = p * t - 2.2050777005037531e-09;
    p = p * t + 8.0280700228200614e-10;
    p = p * t + 2.6653639453288258e-08;
    p = p * t - 1.851520941470719e-08;
    p = p * t - 1.9825045177634306e-07;
    p = p * t + 2.8657219720082757e-07;
    p = p * t + 1.1463007527210937e-06;
    p = p * t - 3.55018008181738e-06;
    p = p * t - 3.0658349945724444e-06;
    p = p * t + 3.3849676796756741e-05;
    p = p * t - 5.4566887701790709e-05;
    p = p * t - 0.00013548224899313755;
    p = p * t + 0.00096113396810653133;
    p = p * t - 0.0027645379159102431;
    p = p * t + 0.0048559275438877373;
    p = p * t - 0.0041571780665019854;
    p = p * t - 0.0054745145124048683;
    p = p * t + 0.03176104708241035;
    p = p * t - 0.079843661635031232;
    p = p * t + 0.14716651781441228;
    p = p * t - 0.22097108494000825;
    p = p * t + 0.52757020518845921;
    double square = x * x, high = from_bits(bits_of(x) & 0xfffffffff8000000u), low = x - high;
    double lost = ((high * high - square) + 2.0 * high * low) + low * low;
    return p * far * d * (exp_within(-0.5 * square) * (1.0 - 0.5 * lost));
}

double normal_probability(double x)
{
    if (x != x) return x;
    if (x < -38.0) return 0.0;
    if (x > 38.0) return 1.0;
    if (fabs(x) > 37.5) return x < 0.0 ? 0x1p-1022 : 1.0;
    double tail = upper_tail(fabs(x));
    return x < 0.0 ? tail : 1.0 - tail;
}

double normal_log_probability(double x)
{
    if (x > 0.0) return portable_log1p(-normal_probability(-x));
    if (x > -10.0) return portable_log(normal_probability(x));
    double fraction = -x;
    for (int k = 24; k > 0; k--) fraction = k / fraction - x;
    return -0.5 * x * x - 0.918938533204672742 - portable_log(fraction);
}

FOR_EACH_PROCESSOR
void normal_probabilities_of_rows(double *restrict x)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double size = fabs(x[i]), sign = copysign(1.0, x[i]);
        double tail = upper_tail(chosen(size < 9.0, size, 9.0));
        x[i] = (0.5 + 0.5 * sign) - sign * chosen(tail > SMALLEST, tail, SMALLEST);
    }
}

/* AS 241 for |q| <= 0.425, q = u - 1/2 */
IN_LOOPS double middle(double q)
{
    double r = 0.180625 - q * q, a = 2.5090809287301226727e+3, b = 5.2264952788528545610e+3;
    a = a * r + 3.3430575583588128105e+4;
    a = a * r + 6.7265770927008700853e+4;
    a = a * r + 4.5921953931549871457e+4;
    a = a * r + 1.3731693765509461125e+4;
    a = a * r + 1.9715909503065514427e+3;
    a = a * r + 1.3314166789178437745e+2;
    a = a * r + 3.3871328727963666080e+0;
    b = b * r + 2.8729085735721942674e+4;
    b = b * r + 3.9307895800092710610e+4;
    b = b * r + 2.1213794301586595867e+4;
    b = b * r + 5.3941960214247511077e+3;
    b = b * r + 6.8718700749205790830e+2;
    b = b * r + 4.2313330701600911252e+1;
    b = b * r + 1.0;
    return q * a / b;
}

/* AS 241 for r = sqrt(-log p) <= 5: the quantile of 1 - p */
IN_LOOPS double tail(double r)
{
    double a = 7.74545014278341407640e-4, b = 1.05075007164441684324e-9;
    r -= 1.6;
    a = a * r + 2.27238449892691845833e-2;
    a = a * r + 2.41780725177450611770e-1;
    a = a * r + 1.27045825245236838258e+0;
    a = a * r + 3.64784832476320460504e+0;
    a = a * r + 5.76949722146069140550e+0;
    a = a * r + 4.63033784615654529590e+0;
    a = a * r + 1.42343711074968357734e+0;
    b = b * r + 5.47593808499534494600e-4;
    b = b * r + 1.51986665636164571966e-2;
    b = b * r + 1.48103976427480074590e-1;
    b = b * r + 6.89767334985100004550e-1;
    b = b * r + 1.67638483018380384940e+0;
    b = b * r + 2.05319162663775882187e+0;
    b = b * r + 1.0;
    return a / b;
}

/* AS 241 for r > 5 */
static double far_tail(double r)
{
    double a = 2.01033439929228813265e-7, b = 2.04426310338993978564e-15;
    r -= 5.0;
    a = a * r + 2.71155556874348757815e-5;
    a = a * r + 1.24266094738807843860e-3;
    a = a * r + 2.65321895265761230930e-2;
    a = a * r + 2.96560571828504891230e-1;
    a = a * r + 1.78482653991729133580e+0;
    a = a * r + 5.46378491116411436990e+0;
    a = a * r + 6.65790464350110377720e+0;
    b = b * r + 1.42151175831644588870e-7;
    b = b * r + 1.84631831751005468180e-5;
    b = b * r + 7.86869131145613259100e-4;
    b = b * r + 1.48753612908506148525e-2;
    b = b * r + 1.36929880922735805310e-1;
    b = b * r + 5.99832206555887937690e-1;
    b = b * r + 1.0;
    return a / b;
}

double normal_quantile(double u)
{
    double q = u - 0.5;
    if (!(u > 0.0 && u < 1.0)) return u == 0.0 ? -INFINITY : u == 1.0 ? INFINITY : NAN;
    if (fabs(q) <= 0.425) return middle(q);
    double r = sqrt(-portable_log(u < 0.5 ? u : 1.0 - u)), x = r <= 5.0 ? tail(r) : far_tail(r);
    return u < 0.5 ? -x : x;
}

FOR_EACH_PROCESSOR
void normal_scores_of_rows(double *restrict u)
{
    double smallest = 0.5, before[ROWS_AT_ONCE];
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double q = u[i] - 0.5, p = 0.5 - fabs(q), in = middle(q);
        double out = tail(sqrt(-log_within(p)));
        before[i] = u[i];
        u[i] = chosen(fabs(q) <= 0.425, in, copysign(out, q));
    }
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double p = 0.5 - fabs(before[i] - 0.5);
        smallest = p < smallest ? p : smallest;
    }
    if (smallest > 1.4e-11) return;
    for (int i = 0; i < ROWS_AT_ONCE; i++) u[i] = normal_quantile(before[i]);
}

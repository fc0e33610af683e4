/* frailty.c - the mixing variables of Archimedean copulas, as logarithms
 *
 * Method
 *   gamma       half a chi-square with 2/theta degrees of freedom, by the tables of student.c.
 *   stable      Kanter (1975), a case of Chambers, Mallows & Stuck (1976): a closed form in a
 *               uniform and an exponential.
 *   log-series  Kemp (1981): geometric with ratio q = 1 - exp(-theta U), so V = 1 + floor(log U' /
 *               log q).
 *   Sibuya      P(V > n) = prod_{k <= n} (1 - a/k) = Gamma(n+1-a) / (Gamma(1-a) n!), a = 1/theta.
 *               Values up to WALK by comparison; beyond, with h = a/2 and w = n + 1/2 - h,
 *               log P = -log Gamma(1-a) - 2h log w + B3/(3 w^2) + B5/(10 w^4) + B7/(21 w^6), where
 *               B_k is the Bernoulli polynomial at 1/2 + h (Abramowitz & Stegun 6.1.41 and 23.1),
 *               is solved for log w by steps that shrink the error a thousandfold.
 *   A large V need not be rounded to a whole number: its logarithm is taken as it stands, so that
 *   nothing overflows for tau up to 1 - 1e-15.
 *
 * Special cases
 *   stable and Sibuya with theta = 1: V = 1.
 *
 * Accuracy
 *   log V to about 1e-15 |log V| plus 1e-14; P(V > n) of Sibuya to 1e-10 relative.
 */
#include "frailty.h"

#include "elementary.h"
#include "laplace.h"
#include "normal.h"
#include "stirling.h"

/* e^34 is 6e14: whether V is a whole number there changes log V by less than 2e-15. */
static const double LN2 = 0x1.62e42fefa39efp-1, LARGE = 34.0;

static status prepare_theta(struct frailty_tables *t, double theta, pool *p)
{
    (void)p;
    t->theta = theta;
    return OK;
}

static status prepare_gamma(struct frailty_tables *t, double theta, pool *p)
{
    t->theta = theta;
    return chi_square_table(&t->chi_square, 2.0 / theta, p);
}

static void log_gammas(const struct frailty_tables *t, double *restrict a, const double *restrict b)
{
    (void)b;
    double score[ROWS_AT_ONCE];
    memcpy(score, a, sizeof score);
    normal_scores_of_rows(score);
    log_chi_squares_of_rows(&t->chi_square, score, a);
    for (int i = 0; i < ROWS_AT_ONCE; i++) a[i] -= LN2;
}

FOR_EACH_PROCESSOR
static void log_stables(const struct frailty_tables *t, double *restrict a,
                        const double *restrict b)
{
    double theta = t->theta, beyond = theta - 1.0, share = beyond / theta;
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double angle = log_within(sin_pi_within(a[i] / theta));
        double whole = log_within(sin_pi_within(a[i]));
        double rest = log_within(sin_pi_within(a[i] * share) / -log_within(b[i]));
        a[i] = angle - theta * whole + beyond * rest;
    }
}

/* log(k + floor(x)), given log x */
IN_LOOPS double log_of_count(double log_x, double k)
{
    double x = exp_within(held(log_x, -700.0, LARGE));
    return chosen(log_x > LARGE, log_x, log_within(k + whole_part(x)));
}

/* Where theta U is above 40, log q is -exp(-theta U) to the last bit. */
FOR_EACH_PROCESSOR
static void log_log_series(const struct frailty_tables *t, double *restrict a,
                           const double *restrict b)
{
    double theta = t->theta;
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double exponent = theta * a[i], e, q = -expm1_within(-held(exponent, 0.0, 690.0), &e);
        double log_q = chosen(e < 0.5, log1p_within(-e), log_within(q));
        double log_minus = chosen(exponent > 40.0, -exponent, log_within(-log_q));
        a[i] = log_of_count(log_within(-log_within(b[i])) - log_minus, 1.0);
    }
}

static status prepare_sibuya(struct frailty_tables *t, double theta, pool *p)
{
    (void)p;
    double a = 1.0 / theta, rest = (theta - 1.0) / theta;
    t->theta = theta;
    t->log_gamma = theta == 1.0 ? 0.0 : portable_log_gamma(2.0 - a) - portable_log(rest);
    t->beyond[0] = 1.0;
    for (int k = 1; k <= WALK; k++) {
        t->beyond[k] = rest;
        rest *= 1.0 - a / (k + 1);
    }
    return OK;
}

FOR_EACH_PROCESSOR
static void log_sibuyas(const struct frailty_tables *t, double *restrict a,
                        const double *restrict b)
{
    (void)b;
    double theta = t->theta, h = 0.5 / theta, s = h * h;
    double c2 = (s - 0.25) / 6.0, c4 = ((s - 5.0 / 6.0) * s + 7.0 / 48.0) / 20.0;
    double c6 = (((s - 7.0 / 4.0) * s + 49.0 / 48.0) * s - 31.0 / 192.0) / 42.0;
    double start[ROWS_AT_ONCE], log_w[ROWS_AT_ONCE], k[ROWS_AT_ONCE];
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        log_w[i] = start[i] = -theta * (log_within(a[i]) + t->log_gamma);
        k[i] = 1.0;
    }
    for (int step = 0; step < 4; step++)
        for (int i = 0; i < ROWS_AT_ONCE; i++) {
            double z = exp_within(-2.0 * held(log_w[i], 2.0, 300.0));
            log_w[i] = start[i] + z * (c2 + z * (c4 + z * c6));
        }
    for (int n = 1; n <= WALK; n++)
        for (int i = 0; i < ROWS_AT_ONCE; i++) k[i] += chosen(a[i] <= t->beyond[n], 1.0, 0.0);
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double x = exp_within(held(log_w[i], 0.0, LARGE)), count = 1.0 + whole_part(x - 0.5 + h);
        double far = chosen(log_w[i] > LARGE, log_w[i], log_within(count));
        a[i] = chosen(a[i] <= t->beyond[WALK], far, log_within(k[i]));
    }
}

const struct frailty gamma_frailty = { prepare_gamma, log_gammas, gamma_transforms, gamma_mean };
const struct frailty stable_frailty = { prepare_theta, log_stables, stable_transforms,
                                        stable_mean };
const struct frailty log_series_frailty = { prepare_theta, log_log_series, log_series_transforms,
                                            log_series_mean };
const struct frailty sibuya_frailty = { prepare_sibuya, log_sibuyas, sibuya_transforms,
                                        sibuya_mean };

/* spearman_inverse.c - Spearman's rho to the parameter.
 *
 * Method
 *   rho grows with tau, so tau is searched for and theta is that of tau. The search is bracketed by
 *   1 - sqrt(2 (1 - rho)) <= tau (Durbin & Stuart 1951) and tau <= rho, which holds for pairs that
 *   are left-tail decreasing and right-tail increasing (Caperaa & Genest 1993), as all positively
 *   dependent ones here are; for negative rho the signs change. Where rho is near 1 neither tau nor
 *   1 - rho as a difference carries theta, so that 1 - rho is searched for by log theta. Families
 *   whose rho and tau reach differently far have a search of their own.
 *
 * Special cases
 *   rho = 0 and, where the family reaches them, -1 and 1 have the theta of the same tau.
 */
#include "spearman_inverse.h"
#include "root.h"

#include <math.h>

static const double STRONG = 0.98;

struct target {
    const family *family;
    double rho, df;
};

static double over(double tau, const void *with)
{
    const struct target *t = with;
    double theta, rho;
    if (t->family->theta_from_tau(tau, &theta) != OK) return NAN;
    return t->family->rho_from_theta(theta, t->df, &rho) == OK ? rho - t->rho : NAN;
}

static double strong_over(double log_theta, const void *with)
{
    const struct target *t = with;
    return (1 - t->rho) - t->family->one_minus_rho(exp(log_theta));
}

/* theta of rho = `size`, which is in (0;1); that of rho has its sign */
static status theta_from_strong(const family *f, double size, double rho, double *theta)
{
    struct target t = { f, size, 0 };
    double low, high, log_theta;
    status s = f->theta_from_tau(1 - sqrt(2 * (1 - size)), &low);
    if (s == OK) s = f->theta_from_tau(size, &high);
    if (s == OK) s = root_between(strong_over, &t, log(low), log(high), &log_theta);
    if (s == OK) *theta = copysign(exp(log_theta), rho);
    return s == OK ? OK : NOT_SETTLED;
}

status theta_from_rho(const family *f, double rho, double df, double *theta)
{
    if (f->theta_from_spearman) return f->theta_from_spearman(rho, theta);
    double tau = rho, size = fabs(rho);
    status s = f->theta_from_tau(tau, theta);
    if (s != OK || rho == 0 || size == 1) return s;

    bool alike = rho > 0 || f->theta_low == -f->theta_high;        /* as -rho has -theta */
    if (size > STRONG && alike && f->one_minus_rho)
        return theta_from_strong(f, size, rho, theta);
    struct target t = { f, rho, df };
    double nearest = copysign(fmax(0, 1 - sqrt(2 * (1 - size))), rho);
    s = root_between(over, &t, nearest, rho, &tau);
    return s == OK ? f->theta_from_tau(tau, theta) : NOT_SETTLED;
}

/* pair_measures.c - tau, rho and tail dependence of two columns.
 *
 * Method
 *   Any two columns of a one-parameter family are that family's pair, of an elliptical copula the
 *   pair with their correlation and df. Rotation by 90 or 270 turns one column round, which changes
 *   the sign of tau and rho; rotation by 180 exchanges the corners.
 *
 * Accuracy
 *   That of the families; grouped t as in grouped_t.h.
 */
#include "pair_measures.h"
#include "grouped_t.h"
#include "root.h"

#include <math.h>

static const double LOWEST_DF = 1e-6, HIGHEST_DF = 1e9;

static double theta_of_pair(const copula *c, size_t i, size_t j)
{
    return c->family->has_matrix ? c->matrix[i * c->dimension + j] : c->theta;
}

static double df_of(const copula *c, size_t i)
{
    return c->family->has_df ? c->df[i] : 0;
}

static double sign_of(const copula *c)
{
    return c->rotation == 90 || c->rotation == 270 ? -1 : 1;
}

status tau_of_pair(const copula *c, size_t i, size_t j, double *tau, pool *p)
{
    double theta = theta_of_pair(c, i, j), df1 = df_of(c, i), df2 = df_of(c, j);
    status s = df1 == df2 ? c->family->tau_from_theta(theta, tau)
                          : tau_of_grouped(theta, df1, df2, tau, p);
    if (s == OK) *tau *= sign_of(c);
    return s;
}

status rho_of_pair(const copula *c, size_t i, size_t j, double *rho, pool *p)
{
    double theta = theta_of_pair(c, i, j), df1 = df_of(c, i), df2 = df_of(c, j);
    status s = df1 == df2 ? c->family->rho_from_theta(theta, df1, rho)
                          : rho_of_grouped(theta, df1, df2, rho, p);
    if (s == OK) *rho *= sign_of(c);
    return s;
}

status tail_of_pair(const copula *c, size_t i, size_t j, enum corner corner, double *lambda)
{
    double theta = theta_of_pair(c, i, j), df1 = df_of(c, i), df2 = df_of(c, j);
    if (c->rotation == 180) corner = corner == LOWER ? UPPER : LOWER;
    if (sign_of(c) < 0) corner = CROSSED;
    *lambda = df1 == df2 ? c->family->tail(theta, df1, corner)
                         : tail_of_grouped(corner == CROSSED ? -theta : theta, df1, df2);
    return isnan(*lambda) ? NOT_SETTLED : OK;
}

static bool grouped(const copula *c, size_t i, size_t j)
{
    return df_of(c, i) != df_of(c, j);
}

double tau_seconds(const copula *c, size_t i, size_t j)
{
    return grouped(c, i, j) ? 3.5e-3 : 1e-6;
}

double rho_seconds(const copula *c, size_t i, size_t j)
{
    double df1 = df_of(c, i), df2 = df_of(c, j);
    if (grouped(c, i, j)) return 7.5e-3 * (df1 < 1 ? 2.5 : 1) * (df2 < 1 ? 2.5 : 1);
    return !c->family->has_df ? 1e-6 : df1 < 2 ? 2e-3 : 2e-4;
}

double tail_seconds(const copula *c, size_t i, size_t j)
{
    return grouped(c, i, j) ? 6e-4 : 5e-6;
}

bool one_for_all_pairs(const copula *c)
{
    return c->dimension == 2 || !c->family->has_matrix;
}

struct tail_target {
    const family *family;
    double correlation, log_lambda;
};

static double log_tail_over(double log_df, const void *with)
{
    const struct tail_target *t = with;
    double lambda = t->family->tail(t->correlation, exp(log_df), LOWER);
    return lambda > 0 ? log(lambda) - t->log_lambda : -1e6;
}

status df_from_tail(double correlation, double lambda, double *df, double *highest)
{
    if (!(fabs(correlation) < 1)) return OUT_OF_DOMAIN;
    *highest = 1 - acos(correlation) / 3.14159265358979323846;
    if (!(lambda > 0 && lambda < *highest)) return OUT_OF_DOMAIN;
    struct tail_target t = { family_named("t"), correlation, log(lambda) };
    double log_df;
    status s = root_between(log_tail_over, &t, log(LOWEST_DF), log(HIGHEST_DF), &log_df);
    if (s == OK) *df = exp(log_df);
    return s;
}

/* independent.c - independence: C(u) = u_1 ... u_d.
 *
 * Special cases
 *   There is no parameter; tau is 0 and nothing else.
 */
#include "families.h"
#include "../evaluate.h"

static status theta_from_tau(double tau, double *theta)
{
    *theta = 0;
    return tau == 0 ? OK : OUT_OF_DOMAIN;
}

static status tau_from_theta(double theta, double *tau)
{
    (void)theta;
    *tau = 0;
    return OK;
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    return tau_from_theta(theta, rho);
}

static double tail(double theta, double df, enum corner corner)
{
    (void)theta;
    (void)df;
    (void)corner;
    return 0;
}

const family independent_family = {
    .word = "independent",
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .tail = tail,
    .draw = draw_independent,
    .evaluator = &independent_evaluator,
    .use = "what others are compared with",
    .source = "",
};

/* family_texts.c - what there is to say of a copula family in words. */
#include "family_texts.h"
#include "models.h"

static const char *range_text(double low, double high, int open, pool *p)
{
    return text_from(p, "%s%g;%g%s", open & LOW_END_OPEN ? "(" : "[", low, high,
                     open & HIGH_END_OPEN ? ")" : "]");
}

const char *theta_range(const family *f, size_t dimension, pool *p)
{
    int open;
    double low = lowest_theta(f, dimension, &open);
    return range_text(low, f->theta_high, open, p);
}

const char *tau_range(const family *f, pool *p)
{
    return range_text(f->tau_low, f->tau_high, f->tau_open, p);
}

const char *rho_range(const family *f, pool *p)
{
    if (f->rho_low == 0 && f->rho_high == 0) return tau_range(f, p);
    return range_text(f->rho_low, f->rho_high, f->tau_open, p);
}

const char *parameter_text(const family *f, pool *p)
{
    if (f->has_matrix) return f->has_df ? "matrix, df" : "matrix";
    if (!f->has_theta) return "none";
    const char *pairs = theta_range(f, 2, p), *beyond = theta_range(f, 3, p);
    if (!pairs || !beyond) return NULL;
    if (f->theta_low == f->theta_low_beyond_pairs) return text_from(p, "theta %s", pairs);
    return text_from(p, "theta %s, beyond pairs %s", pairs, beyond);
}

const char *tails_text(const family *f)
{
    double theta;
    if (f->theta_from_tau(0.3, &theta) != OK) return "none";
    bool lower = f->tail(theta, 4, LOWER) > 0, upper = f->tail(theta, 4, UPPER) > 0;
    return lower && upper ? "both" : lower ? "lower" : upper ? "upper" : "none";
}

const char *dimensions_text(const family *f, pool *p)
{
    if (!f->most_dimensions) return "2 or more";
    return f->most_dimensions == 2 ? "2" : text_from(p, "2 to %zu", f->most_dimensions);
}

const char *rotations_text(const family *f)
{
    return f->most_dimensions == 2 ? "0 90 180 270" : "0 90 180 270, beyond pairs 0 180";
}

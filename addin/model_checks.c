/* model_checks.c - what makes a copula admissible. */
#include "models.h"
#include "family_texts.h"
#include "../src/correlation.h"
#include "../src/family.h"

#include <math.h>

enum { MOST_COLUMNS = 16384, MOST_IN_MATRIX = 4000 };

static const double HIGHEST_DF = 1e9;

/* Where pairs have more than higher dimensions, the end that those have belongs to them. */
double lowest_theta(const family *f, size_t dimension, int *open)
{
    bool beyond = dimension > 2 && f->theta_low_beyond_pairs > f->theta_low;
    *open = beyond ? f->theta_open & HIGH_END_OPEN : f->theta_open;
    return beyond ? f->theta_low_beyond_pairs : f->theta_low;
}

status check_columns(const family *f, double dimension, report *r)
{
    if (dimension < 2)
        return refuse(r, OUT_OF_DOMAIN, "dimension is %g, but must be at least 2", dimension);
    size_t most = f->has_matrix ? MOST_IN_MATRIX : MOST_COLUMNS;
    if (f->most_dimensions) most = f->most_dimensions;
    if (dimension > (double)most)
        return refuse(r, OUT_OF_DOMAIN, "dimension is %g, but %s has at most %zu", dimension,
                      f->word, most);
    return OK;
}

static status check_dimension(const copula *c, report *r)
{
    return check_columns(c->family, (double)c->dimension, r);
}

status check_degrees(double rotation, report *r)
{
    if (rotation != 0 && rotation != 90 && rotation != 180 && rotation != 270)
        return refuse(r, OUT_OF_DOMAIN, "rotation is %g, but must be 0, 90, 180 or 270", rotation);
    return OK;
}

static status check_rotation(const copula *c, report *r)
{
    status s = check_degrees(c->rotation, r);
    if (s == OK && c->dimension > 2 && c->rotation % 180)
        return refuse(r, OUT_OF_DOMAIN,
                      "rotation is %d, but in more than two dimensions must be 0 or 180",
                      c->rotation);
    return s;
}

static status check_theta(const copula *c, report *r)
{
    const family *f = c->family;
    if (!f->has_theta) return OK;
    int open;
    double low = lowest_theta(f, c->dimension, &open), theta = c->theta;
    bool above = open & LOW_END_OPEN ? theta > low : theta >= low;
    bool below = open & HIGH_END_OPEN ? theta < f->theta_high : theta <= f->theta_high;
    if (above && below) return OK;
    const char *range = theta_range(f, c->dimension, r->pool);
    if (!range) return NO_MEMORY;
    return refuse(r, OUT_OF_DOMAIN, "theta is %g, but %s in %s takes %s%s", theta, f->word,
                  c->dimension > 2 ? "more than two dimensions" : "two dimensions", range,
                  theta == 0 ? " (a blank cell counts as 0)" : "");
}

static status check_df(const copula *c, report *r)
{
    if (!c->family->has_df) return OK;
    for (size_t i = 0; i < c->dimension; i++)
        if (!(c->df[i] > 0 && c->df[i] <= HIGHEST_DF))
            return refuse(r, OUT_OF_DOMAIN, "df is %g, but must be above 0 and at most %g",
                          c->df[i], HIGHEST_DF);
    return OK;
}

static status refuse_infeasible(const copula *c, report *r)
{
    double lowest;
    status s = lowest_eigenvalue(c->matrix, c->dimension, &lowest, r->pool);
    if (s != OK) return s;
    return refuse(r, OUT_OF_DOMAIN,
                  "the matrix is not feasible, its lowest eigenvalue is %g "
                  "(JOINT.REPAIR gives the nearest matrix that is)",
                  lowest);
}

/* Where a matrix that is none came from its reader knows better, and has refused it. */
static status check_matrix(const copula *c, report *r)
{
    if (!c->family->has_matrix) return OK;
    size_t d = c->dimension;
    if (matrix_defect(c->matrix, d).what != NO_DEFECT)
        return refuse(r, OUT_OF_DOMAIN, "the matrix is no matrix of correlations");
    bool feasible;
    status s = matrix_feasible(c->matrix, d, 0, &feasible, r->pool);
    return s != OK || feasible ? s : refuse_infeasible(c, r);
}

struct check {
    const char *label;
    status (*of)(const copula *c, report *r);
};

status check_copula(const copula *c, const char **label, report *r)
{
    static const struct check checks[] = { { "dimension", check_dimension },
                                           { "rotation", check_rotation },
                                           { "theta", check_theta },
                                           { "df", check_df },
                                           { "matrix", check_matrix } };
    for (size_t i = 0; i < sizeof checks / sizeof *checks; i++) {
        status s = checks[i].of(c, r);
        if (s == OK) continue;
        if (label) *label = checks[i].label;
        return s;
    }
    return OK;
}

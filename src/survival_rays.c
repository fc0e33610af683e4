/* survival_rays.c - Archimedean copulas with rotation 180 cut into rays.
 *
 * Method
 *   Columns are U_j = 1 - psi(R W_j): with R = sum of psi^-1(1 - U_j) and W = psi^-1(1 - U) / R, R
 *   and W are independent and W uniform on the simplex (McNeil & Neslehova 2009, theorem 3.1). W
 *   chooses the ray, R is the place on it, and P(R <= r) = 1 - K_0(psi(r)) where K_0 is the Kendall
 *   distribution of the unrotated copula (Barbe, Genest, Ghoudi & Remillard 1996). Of R the place
 *   is the normal score of 1 - psi(R).
 *   W is made stick by stick from uniforms (Devroye 1986, chapter XI.4). C by cdf_at().
 */
#include "archimedean.h"
#include "kendall_rays.h"
#include "normal.h"

#include <math.h>

static const double FARTHEST = 8.3;           /* scores, as far as doubles go near 1 */

struct survival_cut {
    double *log_share, *point;                /* log W_j */
};

static void choose(const struct rays *r, const double *u, int seed, size_t index)
{
    struct survival_cut *c = r->own;
    size_t last = r->dimensions;
    double log_rest = 0;
    (void)seed;
    (void)index;
    for (size_t j = 0; j < last; j++) {
        double log_kept = log(u[j]) / (double)(last - j);
        c->log_share[j] = log_rest + log_one_minus_exp(log(-log_kept));
        log_rest += log_kept;
    }
    c->log_share[last] = log_rest;
}

static status cdf(const struct rays *r, double place, double *value)
{
    const struct survival_cut *c = r->own;
    const copula *of = r->e->c;
    double log_r = of->family->generator->log_inverse(normal_probability(-place), of->theta), error;
    for (size_t j = 0; j < of->dimension; j++)
        c->point[j] = 1 - of->family->psi(log_r + c->log_share[j], of->theta);
    status s = cdf_at(r->e, c->point, value, &error);
    return s == NOT_SETTLED ? OK : s;         /* next to 0 */
}

static double score(const struct rays *r, double place)
{
    double before = 1 - r->e->by->kendall(r->e, normal_probability(-place));
    return held(normal_quantile(before), -FARTHEST, FARTHEST);
}

status survival_rays(const struct evaluation *e, struct rays *r, pool *p)
{
    struct survival_cut *c = pool_take(p, 1, sizeof *c);
    size_t d = e->c->dimension;
    if (!c) return NO_MEMORY;
    c->log_share = pool_take(p, d, sizeof *c->log_share);
    c->point = pool_take(p, d, sizeof *c->point);
    *r = (struct rays){ .e = e, .dimensions = d - 1, .low = -8, .high = 37, .own = c,
                        .choose = choose, .cdf = cdf, .score = score };
    return c->log_share && c->point ? OK : NO_MEMORY;
}

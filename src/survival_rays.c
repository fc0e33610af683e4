/* survival_rays.c - Archimedean copulas with rotation 180 cut into rays.
 *
 * Method
 *   Columns are U_j = 1 - psi(R W_j): with R = sum of psi^-1(1 - U_j) and W = psi^-1(1 - U) / R, R
 *   and W are independent and W uniform on the simplex (McNeil & Neslehova 2009, theorem 3.1). W
 *   chooses the ray, R is the place on it, and P(R <= r) = 1 - K_0(psi(r)) where K_0 is the Kendall
 *   distribution of the unrotated copula (Barbe, Genest, Ghoudi & Remillard 1996). Of R the place
 *   is the normal score of 1 - psi(R).
 *   W is made stick by stick from uniforms (Devroye 1986, chapter XI.4). C of few columns is a sum
 *   over all subsets of them, whose shares of the ray are added once; where that cancels, and of
 *   more columns, it is by cdf_at().
 */
#include "archimedean.h"
#include "kendall_rays.h"
#include "normal.h"

#include <math.h>

static const double FARTHEST = 8.3;           /* scores, as far as doubles go near 1 */
static const double CANCELS = 1e-6;           /* 2^10 subsets leave nine digits of it */

struct survival_cut {
    double *log_share, *point;                /* log W_j */
    double *log_sum;                          /* of the subsets of few columns, by their bits */
};

static void add_shares(const struct survival_cut *c, size_t columns)
{
    c->log_sum[0] = -HUGE_VAL;
    for (size_t j = 0; j < columns; j++)
        for (size_t set = 0, bit = (size_t)1 << j; set < bit; set++)
            c->log_sum[bit + set] = log_added(c->log_sum[set], c->log_share[j]);
}

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
    if (c->log_sum) add_shares(c, last + 1);
}

/* 1 - U_j is below psi(R W_j) in all columns of a set with probability psi(R sum of W_j). */
static double over_subsets(const struct survival_cut *c, const copula *of, double log_r)
{
    double sum = 1;
    for (size_t set = 1; set < (size_t)1 << of->dimension; set++) {
        double sign = -1;
        for (size_t bits = set & (set - 1); bits; bits &= bits - 1) sign = -sign;
        sum += sign * of->family->psi(log_r + c->log_sum[set], of->theta);
    }
    return sum;
}

static status cdf(const struct rays *r, double place, double *value)
{
    const struct survival_cut *c = r->own;
    const copula *of = r->e->c;
    double log_r = of->family->generator->log_inverse(normal_probability(-place), of->theta), error;
    *value = c->log_sum ? over_subsets(c, of, log_r) : 0;
    if (*value > CANCELS) return OK;
    for (size_t j = 0; j < of->dimension; j++)
        c->point[j] = 1 - of->family->psi(log_r + c->log_share[j], of->theta);
    return cdf_at(r->e, c->point, value, &error);
}

static double score(const struct rays *r, double place)
{
    double before = 1 - r->e->by->kendall(r->e, normal_probability(-place));
    return held(normal_quantile(before), -FARTHEST, FARTHEST);
}

status survival_rays(const struct evaluation *e, struct rays *r, pool *p)
{
    struct survival_cut *c = pool_take_zeroed(p, 1, sizeof *c);
    size_t d = e->c->dimension;
    bool few = d <= FEW_FOR_SUBSETS;
    if (!c) return NO_MEMORY;
    if (few) c->log_sum = pool_take(p, (size_t)1 << d, sizeof *c->log_sum);
    if (few && !c->log_sum) return NO_MEMORY;
    c->log_share = pool_take(p, d, sizeof *c->log_share);
    c->point = pool_take(p, d, sizeof *c->point);
    *r = (struct rays){ .e = e, .dimensions = d - 1, .low = -8, .high = 37, .own = c,
                        .choose = choose, .cdf = cdf, .score = score };
    return c->log_share && c->point ? OK : NO_MEMORY;
}

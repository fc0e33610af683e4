/* tau_band.c - confidence intervals for Kendall's tau
 *
 * Method
 *   As tau_band.h says for each method. A resample draws rows with replacement, from the scores
 *   that are already ranked, and counts its pairs like any other sample.
 *
 * Special cases
 *   Perfect dependence has limits of 1 or -1 and an error of 0, whatever the method.
 *
 * Accuracy
 *   Errors and limits by formula: 1e-13 relative. Coverage at nominal 95 %, simulated: free
 *   92-94 % at ten rows and 94-96 % from twenty.
 */
#include "tau_band.h"
#include "gaps.h"
#include "normal.h"
#include "random.h"
#include "tau_scores.h"

#include <math.h>
#include <stdlib.h>

enum { RESAMPLES = 2000 };

static const double PI = 3.141592653589793;

double tau_variance_binormal(double correlation, size_t n)
{
    double m = (double)n, tau = 2 / PI * asin(correlation), part = 2 / PI * asin(correlation / 2);
    double zeta1 = 1.0 / 9 - part * part, zeta2 = 1 - tau * tau;
    return 2 / (m * (m - 1)) * (2 * (m - 2) * zeta1 + zeta2);
}

static double within(double tau)
{
    return tau > 1 ? 1 : tau < -1 ? -1 : tau;
}

static void symmetric_limits(struct tau_band *b, double z)
{
    b->low = within(b->tau - z * b->error);
    b->high = within(b->tau + z * b->error);
}

static void fisher_limits(struct tau_band *b, double z)
{
    double root = sqrt(0.437 / ((double)b->used - 4)), centre = atanh(b->tau);
    b->low = tanh(centre - z * root);
    b->high = tanh(centre + z * root);
    b->error = (1 - b->tau * b->tau) * root;
}

/* The pair made ready: complete columns and their rankings. */
struct pair {
    double *x, *y;
    ranking *r;
    struct rank_room *sorting;
};

static status make_ready(const double *x, const double *y, size_t n, struct pair *made,
                         size_t *used, pool *p)
{
    double *copies = pool_take(p, n, 2 * sizeof *copies);
    if (!copies) return NO_MEMORY;
    made->x = copies;
    made->y = copies + n;
    *used = complete_pairs(x, y, NULL, n, made->x, made->y, NULL);
    status s = new_rankings(n, 2, &made->r, p);
    if (!s) s = new_rank_room(n, &made->sorting, p);
    if (s) return s;
    rank_values(made->x, *used, &made->r[0], made->sorting);
    rank_values(made->y, *used, &made->r[1], made->sorting);
    return OK;
}

/* Tau of rows drawn with replacement. */
static status tau_of_resample(const struct pair *from, size_t n, struct stream *draws,
                              struct pair *into, struct pair_room *counting, double *tau)
{
    struct tau_counts c;
    for (size_t i = 0; i < n; i++) {
        size_t row = (size_t)stream_below(draws, n);
        into->x[i] = from->x[row];
        into->y[i] = from->y[row];
    }
    rank_values(into->x, n, &into->r[0], into->sorting);
    rank_values(into->y, n, &into->r[1], into->sorting);
    tau_count_ranked(&into->r[0], &into->r[1], &c, counting);
    return tau_b(&c, tau);
}

static int ascending(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Percentiles and standard deviation of the resamples' tau. */
static void summarize(double *taus, size_t n, double coverage, struct tau_band *b)
{
    double mean = 0, squares = 0;
    for (size_t k = 0; k < n; k++) {                 /* running mean and squares (Welford 1962) */
        double apart = taus[k] - mean;
        mean += apart / (double)(k + 1);
        squares += apart * (taus[k] - mean);
    }
    qsort(taus, n, sizeof *taus, ascending);
    size_t beyond = (size_t)floor((double)n * (1 - coverage) / 2);
    b->low = taus[beyond];
    b->high = taus[n - 1 - beyond];
    b->error = sqrt(squares / (double)(n - 1));
}

static status bootstrap(const struct pair *from, double coverage, uint64_t seed,
                        struct tau_band *b, pool *p)
{
    size_t n = b->used, ignored, kept = 0;
    struct pair into;
    struct pair_room counting;
    double *taus = pool_take(p, RESAMPLES, sizeof *taus);
    if (!taus) return NO_MEMORY;
    status s = make_ready(from->x, from->y, n, &into, &ignored, p);
    if (!s) s = new_pair_room(n, &counting, p);
    if (s) return s;
    for (size_t k = 0; k < RESAMPLES; k++) {
        struct stream draws = stream_of(seed, FOR_RESAMPLING, k);
        kept += tau_of_resample(from, n, &draws, &into, &counting, &taus[kept]) == OK;
    }
    if (kept < RESAMPLES / 2) return NO_VARIATION;
    summarize(taus, kept, coverage, b);
    return OK;
}

/* Error and limits; tau and used are there. Scores are overwritten. */
static status find_limits(const struct pair *pair, struct tau_scores *scores, double coverage,
                          band_method method, uint64_t seed, struct tau_band *b, pool *p)
{
    double z = -normal_quantile((1 - coverage) / 2);
    status s = OK;
    if (method == BAND_BOOTSTRAP) return bootstrap(pair, coverage, seed, b, p);
    if (method == BAND_FISHERZ) {
        fisher_limits(b, z);
        return OK;
    }
    if (method == BAND_FREE) s = tau_error_free(scores, &b->error);
    else if (method == BAND_JACKKNIFE) s = tau_error_jackknife(scores, &b->error);
    else b->error = sqrt(fmax(0, tau_variance_binormal(sin(PI / 2 * b->tau), b->used)));
    if (fabs(b->tau) == 1) b->error = 0;
    if (s == OK) symmetric_limits(b, z);
    return s;
}

static status band_of(const double *x, const double *y, size_t n, double coverage,
                      band_method method, uint64_t seed, struct tau_band *b, pool *p)
{
    struct pair pair;
    struct score_room *room;
    struct tau_scores scores;
    status s = make_ready(x, y, n, &pair, &b->used, p);
    if (!s) s = new_score_room(n, &room, p);
    if (s) return s;
    if (b->used < (method == BAND_FISHERZ ? 5 : 3)) return TOO_FEW;
    tau_scores_ranked(&pair.r[0], &pair.r[1], &scores, room);
    s = tau_b(&scores.counts, &b->tau);
    return s ? s : find_limits(&pair, &scores, coverage, method, seed, b, p);
}

status tau_band(const double *x, const double *y, size_t n, double coverage, band_method method,
                uint64_t seed, struct tau_band *band, pool *p)
{
    struct block *mark = p->last;
    status s = band_of(x, y, n, coverage, method, seed, band, p);
    pool_back_to(p, mark);
    return s;
}

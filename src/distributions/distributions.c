/* distributions.c - the list of loss distributions, and what holds for all of them.
 *
 * Method: none of its own. Special cases: a quantile beyond the median is taken from the upper
 * tail, where 1 - u is exact. Accuracy: that of the row.
 */
#include "distributions.h"

#include <math.h>
#include <string.h>

const distribution *const distributions[] = {
    &normal_distribution,
    &lognormal_distribution,
    &gamma_distribution,
    &exponential_distribution,
    &weibull_distribution,
    &pareto_distribution,
    &lomax_distribution,
    &sample_distribution,
    NULL
};

const distribution *distribution_named(const char *word)
{
    for (size_t i = 0; distributions[i]; i++) {
        if (strcmp(distributions[i]->word, word) == 0) return distributions[i];
    }
    return NULL;
}

size_t distribution_parameters(const distribution *d)
{
    size_t n = 0;
    while (n < MARGIN_PARAMETERS && d->parameter[n].name) n++;
    return n;
}

double margin_parameter(const margin *m, size_t k)
{
    return k == 0 ? m->a : k == 1 ? m->b : m->c;
}

static status parameter_check(const struct parameter *p, double x)
{
    if (isnan(x)) return p->name ? BAD_KIND : OK;
    if (!p->name) return BAD_KIND;
    if (isinf(x) || x < p->low || (p->low_open && x == p->low)) return OUT_OF_DOMAIN;
    return p->whole && x != floor(x) ? OUT_OF_DOMAIN : OK;
}

status margin_check(const margin *m, size_t *which)
{
    for (size_t k = 0; k < MARGIN_PARAMETERS; k++) {
        *which = k;
        status s = parameter_check(&m->distribution->parameter[k], margin_parameter(m, k));
        if (s != OK) return s;
    }
    return OK;
}

double margin_quantile(const margin *m, double u)
{
    return u > 0.5 ? m->distribution->quantile(m, 1 - u, true)
                   : m->distribution->quantile(m, u, false);
}

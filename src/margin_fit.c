/* margin_fit.c - maximum likelihood for any distribution of the table.
 *
 * Method
 *   Each distribution finds its own maximum, see src/distributions/. Here are the checks before
 *   it and the likelihood after it; aic = 2 (number of parameters) - 2 log-likelihood (Akaike
 *   1974).
 *
 * Special cases
 *   Losses that are all alike are refused: most likelihoods have no maximum there. Losses whose sum
 *   is beyond the range of numbers do not settle.
 *
 * Accuracy
 *   Parameters to 1e-12 relative or so, where the likelihood determines them that well.
 */
#include "margin_fit.h"

#include <math.h>

double mean_loss(const double *loss, size_t n)
{
    double sum = 0, rest = 0;
    for (size_t i = 0; i < n; i++) sum += loss[i];
    double mean = sum / (double)n;
    for (size_t i = 0; i < n; i++) rest += loss[i] - mean;
    return mean + rest / (double)n;
}

double mean_log_loss(const double *loss, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += log(loss[i]);
    return sum / (double)n;
}

static bool takes(const distribution *d, double loss)
{
    return d->fitted_to == ANY_LOSS || loss > 0 || (d->fitted_to == FROM_ZERO && loss == 0);
}

static status check_losses(const distribution *d, const double *loss, size_t n, size_t *row)
{
    bool varies = false;
    for (*row = 0; *row < n; (*row)++) {
        if (!takes(d, loss[*row])) return OUT_OF_DOMAIN;
        varies = varies || loss[*row] != loss[0];
    }
    if (n < 2) return TOO_FEW;
    return varies ? OK : NO_VARIATION;
}

status fit_margin(const distribution *d, const double *loss, size_t n, margin_fit *fit, size_t *row)
{
    status s = check_losses(d, loss, n, row);
    if (s != OK) return s;
    *fit = (margin_fit){ .error = { NAN, NAN, NAN } };
    s = d->fit(loss, n, &fit->margin, fit->error);
    for (size_t i = 0; s == OK && i < n; i++)
        fit->log_likelihood += d->log_density(&fit->margin, loss[i]);
    fit->aic = 2 * (double)distribution_parameters(d) - 2 * fit->log_likelihood;
    return s == OK && !isfinite(fit->log_likelihood) ? NOT_SETTLED : s;
}

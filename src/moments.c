/* moments.c - moments of a stream of numbers.
 *
 * Method
 *   Blocks of at most BLOCK numbers, each about its own mean, then joined to what came before by
 *   the formulas of Chan, Golub & LeVeque (1983) and Pebay (2008). A block's mean is taken of the
 *   distances from its first number, so that numbers that are all alike have exactly that mean.
 *   The error of the standard deviation s is sqrt((m4 - s^4) / n) / (2 s).
 *
 * Special cases
 *   Numbers that are all alike have sd 0 with error 0, whatever they are. What needs powers beyond
 *   the range of numbers is NaN: the sd from about 1e154 on, its error from about 1e77 on.
 *
 * Accuracy
 *   A few 1e-15 relative for the mean of numbers of one sign and for the sd, for a million of them
 *   too; how the numbers were cut into blocks shows in the last bits only.
 */
#include "moments.h"
#include "random.h"

#include <math.h>

/* Sums go into so many places side by side, since each addition waits for the one before it in its
 * place; so the loops become vector code, with the same bits on every processor. */
enum { PLACES = 8, BLOCK = 2048 };

static double sum_of(const double *place)
{
    return ((place[0] + place[1]) + (place[2] + place[3]))
           + ((place[4] + place[5]) + (place[6] + place[7]));
}

FOR_EACH_PROCESSOR
static double mean_of(const double *x, size_t n)
{
    double sum[PLACES] = { 0 }, first = x[0];
    size_t whole = n - n % PLACES;
    for (size_t i = 0; i < whole; i += PLACES)
        for (size_t k = 0; k < PLACES; k++) sum[k] += x[i + k] - first;
    for (size_t i = whole; i < n; i++) sum[i - whole] += x[i] - first;
    return first + sum_of(sum) / (double)n;
}

static inline void add_powers(double away, double *second, double *third, double *fourth)
{
    double square = away * away;
    *second += square;
    *third += square * away;
    *fourth += square * square;
}

FOR_EACH_PROCESSOR
static running_moments of_block(const double *x, size_t n)
{
    double mean = mean_of(x, n), second[PLACES] = { 0 }, third[PLACES] = { 0 },
           fourth[PLACES] = { 0 };
    size_t whole = n - n % PLACES;
    for (size_t i = 0; i < whole; i += PLACES)
        for (size_t k = 0; k < PLACES; k++)
            add_powers(x[i + k] - mean, second + k, third + k, fourth + k);
    for (size_t i = whole; i < n; i++)
        add_powers(x[i] - mean, second + (i - whole), third + (i - whole), fourth + (i - whole));
    return (running_moments){ (double)n, mean, sum_of(second), sum_of(third), sum_of(fourth) };
}

static void join(running_moments *m, running_moments b)
{
    const running_moments a = *m;
    if (a.count == 0) {
        *m = b;
        return;
    }
    double count = a.count + b.count, d = b.mean - a.mean, d2 = d * d;
    double fa = a.count / count, fb = b.count / count, cross = a.count * fb;
    m->count = count;
    m->mean = a.mean + d * fb;
    m->second = a.second + b.second + d2 * cross;
    m->third = a.third + b.third + d * d2 * cross * (fa - fb)
               + 3 * d * (fa * b.second - fb * a.second);
    m->fourth = a.fourth + b.fourth + d2 * d2 * cross * (fa * fa - fa * fb + fb * fb)
                + 6 * d2 * (fa * fa * b.second + fb * fb * a.second)
                + 4 * d * (fa * b.third - fb * a.third);
}

void moments_add(running_moments *m, const double *x, size_t n)
{
    for (size_t first = 0; first < n; first += BLOCK)
        join(m, of_block(x + first, n - first < BLOCK ? n - first : BLOCK));
}

static double finite_or_nan(double x)
{
    return isfinite(x) ? x : NAN;
}

estimate moments_mean(const running_moments *m)
{
    double n = m->count;
    return (estimate){ m->mean, n > 1 ? finite_or_nan(sqrt(m->second / (n - 1) / n)) : NAN };
}

estimate moments_sd(const running_moments *m)
{
    double n = m->count;
    if (!(n > 1)) return (estimate){ NAN, NAN };
    double variance = m->second / (n - 1), sd = finite_or_nan(sqrt(variance));
    double excess = m->fourth / n - variance * variance;
    if (!isfinite(excess)) return (estimate){ sd, NAN };
    return (estimate){ sd, sd > 0 ? sqrt(fmax(excess, 0) / n) / (2 * sd) : 0 };
}

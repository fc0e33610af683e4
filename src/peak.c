/* peak.c - integrals of positive functions with one peak.
 *
 * Method
 *   Golden sections close in on the maximum until both ends of the interval are within 1 of it:
 *   then the interval is about as wide as the peak. Gauss and Legendre's rule, adapted, on it and
 *   outward from it over panels of which each is twice as long as the one before, until one adds
 *   nothing.
 *
 * Special cases
 *   A peak with one side a thousand times as wide as the other takes some ten panels more.
 *
 * Accuracy
 *   As in peak.h, if log_f itself is as good.
 */
#include "peak.h"
#include "quadrature.h"

#include <math.h>

struct peak {
    double (*log_f)(double x, const void *with);
    const void *with;
    double low, high, most;           /* an interval about as wide as it, the log of its height */
};

/* The part of a golden section. */
static const double GOLDEN = 0.38196601125010515;

static void find(struct peak *p)
{
    enum { MOST_SECTIONS = 300 };
    double x = p->low + GOLDEN * (p->high - p->low), y = p->high - GOLDEN * (p->high - p->low);
    double at_low = p->log_f(p->low, p->with), at_high = p->log_f(p->high, p->with);
    double at_x = p->log_f(x, p->with), at_y = p->log_f(y, p->with);
    for (int i = 0; i < MOST_SECTIONS; i++) {
        p->most = fmax(fmax(at_low, at_high), fmax(at_x, at_y));
        if (at_low > p->most - 1 && at_high > p->most - 1) return;
        if (at_x >= at_y) {
            p->high = y, at_high = at_y;
            y = x, at_y = at_x;
            x = p->low + GOLDEN * (p->high - p->low);
            at_x = p->log_f(x, p->with);
        } else {
            p->low = x, at_low = at_x;
            x = y, at_x = at_y;
            y = p->high - GOLDEN * (p->high - p->low);
            at_y = p->log_f(y, p->with);
        }
    }
}

static double scaled(double x, const void *with)
{
    const struct peak *p = with;
    return exp(p->log_f(x, p->with) - p->most);
}

/* From one side of the peak to `end`, over panels the first of which has this length. */
static double outward(const struct peak *p, double from, double length, double end, double sum)
{
    enum { MOST_PANELS = 100 };
    double added = 0, ignored = 0, enough = 1e-13 * (p->high - p->low);
    for (int panel = 0; panel < MOST_PANELS && from != end; panel++) {
        double to = from + length;
        if (length < 0 ? to < end : to > end) to = end;
        double part = fabs(adapted_integral(scaled, p, from, to, enough, &ignored));
        added += part;
        if (part <= 1e-17 * (sum + added)) break;
        from = to;
        length *= 2;
    }
    return added;
}

double log_integral_of_peak(double (*log_f)(double x, const void *with), const void *with,
                            double low, double high, double from, double to)
{
    struct peak p = { log_f, with, from, to, -HUGE_VAL };
    find(&p);
    if (p.most == -HUGE_VAL) return p.most;
    double width = p.high - p.low, ignored = 0;
    double sum = adapted_integral(scaled, &p, p.low, p.high, 1e-13 * width, &ignored);
    double left = outward(&p, p.low, -width, low, sum);
    double right = outward(&p, p.high, width, high, sum);
    return p.most + log(sum + left + right);
}

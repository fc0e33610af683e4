/* placed_nodes.c - the trapezoid rule on the line, with its nodes where the integrand is.
 *
 * Method
 *   Nodes from -10 to 10 are spread until what lies beyond them is known to be nothing, then drawn
 *   in to where the logarithm is within CUT of its highest, as long as that is much less than they
 *   span. A lower peak between nodes may be narrow and higher than it looks there, and one may be
 *   hidden between nodes where the caller says that they do not tell: nodes drawn in there do. Then
 *   the step is halved until the sums over even and over odd nodes agree to 3e-11. Halving a step
 *   squares the error of the rule at least, for integrands analytic in a strip (Trefethen &
 *   Weideman 2014), so that the sum over all is far better, but for parts of the integrand that are
 *   smaller than that.
 *   Where the integrand has a cliff that is narrow beside its span, the rule is applied in t with
 *   the cliff at t = 0 of centre + width sinh(t), which it crosses in a few steps of t while the
 *   span grows with log(span/width) only.
 *
 * Special cases
 *   A logarithm of -infinity is an integrand of 0.
 *
 * Accuracy
 *   As above; tests/core/placed_nodes.c.
 */
#include "placed_nodes.h"

#include <math.h>

enum { MOST_MOVES = 200, PEAK_NODES = 17, MOST_EQUAL_NODES = 385 };
static const double CUT = 44, ENOUGH = 30, SETTLED = 3e-11, ROUGHLY = 3e-7, FIRST_REACH = 10;
static const double CLIFF = 0.25;             /* of its height, from a node to the next */

double node_at(const struct placed_nodes *nodes, size_t k)
{
    double t = nodes->first + (double)k * nodes->step;
    return nodes->width > 0 ? nodes->centre + nodes->width * sinh(t) : t;
}

double node_weight(const struct placed_nodes *nodes, size_t k)
{
    double t = nodes->first + (double)k * nodes->step;
    return nodes->width > 0 ? nodes->step * nodes->width * cosh(t) : nodes->step;
}

static void fill(struct placed_nodes *nodes, double from, double to, size_t n, log_terms *of,
                 void *with)
{
    nodes->n = n;
    nodes->first = from;
    nodes->step = (to - from) / (double)(n - 1);
    nodes->width = 0;
    of(nodes, with);
}

static double highest_of(const struct placed_nodes *nodes)
{
    double most = -HUGE_VAL;
    for (size_t k = 0; k < nodes->n; k++) most = fmax(most, nodes->log_term[k]);
    return most;
}

static bool hides_any(const struct placed_nodes *nodes, double least)
{
    for (size_t k = 0; nodes->hidden && k + 1 < nodes->n; k++)
        if (nodes->hidden[k] >= least) return true;
    return false;
}

struct placed_sum sum_over_nodes(const struct placed_nodes *nodes)
{
    struct placed_sum s = { .highest = highest_of(nodes), .log_integral = -HUGE_VAL };
    if (!isfinite(s.highest)) return s;
    double half[2] = { 0, 0 };
    for (size_t k = 0; k < nodes->n; k++)
        half[k & 1] += exp(nodes->log_term[k] - s.highest) * node_weight(nodes, k);
    double ends = fmax(nodes->log_term[0], nodes->log_term[nodes->n - 1]);
    s.log_integral = s.highest + log(half[0] + half[1]);
    double apart = fabs(half[0] - half[1]) / (half[0] + half[1]);
    bool all = ends < s.highest - ENOUGH && !hides_any(nodes, s.highest - ENOUGH);
    s.settled = all && apart < SETTLED;
    s.roughly = all && apart < ROUGHLY;
    return s;
}

/* Whether there may be something beyond an end, and then goes further on that side. */
static bool spread(struct placed_nodes *nodes, log_terms *of, void *with)
{
    double least = highest_of(nodes) - CUT;
    double from = nodes->first, to = node_at(nodes, nodes->n - 1), length = to - from;
    if (nodes->below < least && nodes->above < least) return false;
    if (!(nodes->below < least)) from -= length;
    if (!(nodes->above < least)) to += length;
    fill(nodes, from, to, nodes->n, of, with);
    return true;
}

/* Where nodes are wanted. */
struct span {
    double from, to;
};

static struct span around(const struct placed_nodes *nodes, size_t first, size_t last)
{
    return (struct span){ node_at(nodes, first > 0 ? first - 1 : 0),
                          node_at(nodes, last + 1 < nodes->n ? last + 1 : last) };
}

/* Where the logarithm is above `least`, and a node more on each side. */
static struct span span_above(const struct placed_nodes *nodes, double least)
{
    size_t first = nodes->n - 1, last = 0;
    for (size_t k = 0; k < nodes->n; k++)
        if (nodes->log_term[k] >= least) {
            if (k < first) first = k;
            last = k;
        }
    return around(nodes, first, last);
}

static bool is_peak(const struct placed_nodes *nodes, size_t k)
{
    const double *f = nodes->log_term;
    return f[k] > f[k - 1] && f[k] > f[k + 1];
}

/* How high a peak between these ends is, by nodes drawn in around it. */
static double height_within(struct placed_nodes *nodes, struct span s, log_terms *of, void *with)
{
    double highest = -HUGE_VAL;
    for (int i = 0; i < 20; i++) {
        fill(nodes, s.from, s.to, PEAK_NODES, of, with);
        double now = highest_of(nodes);
        if (now < highest + 1) return fmax(now, highest);
        highest = now;
        s = span_above(nodes, now);
    }
    return highest;
}

/* Between two nodes that do not tell: at nodes between them, and between those. */
static double hidden_height(struct placed_nodes *nodes, struct span s, double least, int depth,
                            log_terms *of, void *with)
{
    struct span within[PEAK_NODES];
    int n = 0;
    fill(nodes, s.from, s.to, PEAK_NODES, of, with);
    double highest = highest_of(nodes);
    for (size_t k = 0; depth > 0 && k + 1 < nodes->n; k++)
        if (nodes->hidden && nodes->hidden[k] >= least)
            within[n++] = (struct span){ node_at(nodes, k), node_at(nodes, k + 1) };
    highest = fmax(highest, height_within(nodes, span_above(nodes, highest), of, with));
    for (int i = 0; i < n; i++)
        highest = fmax(highest, hidden_height(nodes, within[i], least, depth - 1, of, with));
    return highest;
}

/* Where the nodes leave open how high the logarithm is. */
struct open_span {
    struct span span;
    double height;
};

/* Peaks that look too low at the nodes, and places between nodes that do not tell, both outside of
 * where it is high. How many. */
static size_t take_open_spans(const struct placed_nodes *nodes, double least, struct span high,
                              struct open_span *open, size_t room)
{
    size_t n = 0;
    for (size_t k = 0; k + 1 < nodes->n && n < room; k++) {
        bool peak = k > 0 && nodes->log_term[k] < least && is_peak(nodes, k);
        bool hides = nodes->hidden && nodes->hidden[k] >= least;
        struct span s = { node_at(nodes, k - peak), node_at(nodes, k + 1) };
        if ((peak || hides) && (s.from < high.from || s.to > high.to))
            open[n++].span = s;
    }
    return n;
}

/* The span of the nodes drawn in. */
static struct span drawn_in(struct placed_nodes *nodes, log_terms *of, void *with)
{
    struct open_span open[FIRST_NODES];
    double highest = highest_of(nodes), least = highest - CUT;
    struct span whole = { nodes->first, node_at(nodes, nodes->n - 1) };
    size_t all = nodes->n, n = take_open_spans(nodes, least, span_above(nodes, least), open,
                                               FIRST_NODES);
    for (size_t i = 0; i < n; i++) {
        open[i].height = hidden_height(nodes, open[i].span, least, 3, of, with);
        highest = fmax(highest, open[i].height);
    }
    if (n > 0) fill(nodes, whole.from, whole.to, all, of, with);
    least = highest - CUT;
    struct span in = { HUGE_VAL, -HUGE_VAL };
    if (highest_of(nodes) >= least) in = span_above(nodes, least);
    for (size_t i = 0; i < n; i++) {
        if (open[i].height < least) continue;
        in.from = fmin(in.from, open[i].span.from);
        in.to = fmax(in.to, open[i].span.to);
    }
    return in;
}

static void halve_step(struct placed_nodes *nodes, log_terms *of, void *with)
{
    for (size_t k = nodes->n - 1; k > 0; k--) nodes->log_term[2 * k] = nodes->log_term[k];
    nodes->n = 2 * nodes->n - 1;
    nodes->step /= 2;
    nodes->halved = true;
    of(nodes, with);
    nodes->halved = false;
}

/* Twice as many nodes until they settle. */
static struct placed_sum with_more(struct placed_nodes *nodes, log_terms *of, void *with,
                                   size_t most)
{
    struct placed_sum s = sum_over_nodes(nodes);
    while (!s.settled && 2 * nodes->n - 1 <= most) {
        halve_step(nodes, of, with);
        s = sum_over_nodes(nodes);
    }
    return s;
}

static double beside_peak(const struct placed_nodes *nodes, size_t k, double highest)
{
    return k < nodes->n ? exp(nodes->log_term[k] - highest) : 0;
}

/* The first of the two neighbours between which ninth differences are largest: of a smooth
 * integrand they are next to nothing, however steep it is. */
static size_t roughest(const struct placed_nodes *nodes, double highest)
{
    static const double times[] = { 126, -84, 36, -9, 1 };
    size_t at = 0;
    double most = 0;
    for (size_t k = 0; k + 1 < nodes->n; k++) {
        double sum = 0;
        for (size_t i = 0; i < 5; i++)
            sum += times[i] * (beside_peak(nodes, k - i, highest)
                               - beside_peak(nodes, k + 1 + i, highest));
        if (fabs(sum) > most) at = k;
        most = fmax(most, fabs(sum));
    }
    return at;
}

/* The first of the two neighbours that are furthest apart, which are so by `drop` of the range. */
static size_t steepest(const struct placed_nodes *nodes, double highest, double *drop)
{
    size_t at = 0;
    double least = 1, most = 0, apart = 0;
    for (size_t k = 0; k < nodes->n; k++) {
        double here = beside_peak(nodes, k, highest), next = beside_peak(nodes, k + 1, highest);
        least = fmin(least, here);
        most = fmax(most, here);
        if (k + 1 < nodes->n && fabs(here - next) > apart) at = k;
        if (k + 1 < nodes->n) apart = fmax(apart, fabs(here - next));
    }
    *drop = apart / (most - least);
    return at;
}

static void crowd_at_cliff(struct placed_nodes *nodes, double highest, log_terms *of, void *with)
{
    double from = node_at(nodes, 0), to = node_at(nodes, nodes->n - 1), drop = 1, centre, width;
    size_t k = roughest(nodes, highest);
    for (int i = 0;; i++) {
        double left = node_at(nodes, k), right = node_at(nodes, k + 1);
        centre = left + (right - left) / 2;
        width = 2 * nodes->step;
        if (!(drop > CLIFF) || i > 20) break;
        fill(nodes, left, right, PEAK_NODES, of, with);
        k = steepest(nodes, highest, &drop);
    }
    nodes->n = 2 * FIRST_NODES - 1;
    nodes->centre = centre;
    nodes->width = width;
    nodes->first = asinh((from - centre) / width);
    nodes->step = (asinh((to - centre) / width) - nodes->first) / (double)(nodes->n - 1);
    of(nodes, with);
}

struct placed_sum span_nodes(struct placed_nodes *nodes, log_terms *of, void *with)
{
    fill(nodes, -FIRST_REACH, FIRST_REACH, FIRST_NODES, of, with);
    for (int i = 0; i < MOST_MOVES && spread(nodes, of, with); i++) continue;
    for (int i = 0; i < MOST_MOVES; i++) {
        double length = nodes->step * (double)(nodes->n - 1);
        struct span in = drawn_in(nodes, of, with);
        bool same = in.to - in.from > 0.7 * length;
        if (same) break;
        fill(nodes, in.from, in.to, FIRST_NODES, of, with);
    }
    return sum_over_nodes(nodes);
}

struct placed_sum settle_nodes(struct placed_nodes *nodes, log_terms *of, void *with,
                               size_t most)
{
    size_t equal = most < MOST_EQUAL_NODES ? most : MOST_EQUAL_NODES;
    struct placed_sum s = with_more(nodes, of, with, equal);
    if (s.settled || !isfinite(s.highest)) return s;
    crowd_at_cliff(nodes, s.highest, of, with);
    return with_more(nodes, of, with, most);
}

struct placed_sum place_nodes(struct placed_nodes *nodes, log_terms *of, void *with,
                              size_t most)
{
    span_nodes(nodes, of, with);
    return settle_nodes(nodes, of, with, most);
}

/* t_rho.c - Spearman's rho of a pair of the t copula.
 *
 * Method
 *   Spearman's rho is (6/pi) E asin(correlation sqrt(XY)): given gamma variables G, G', G'' that
 *   scale three independent rows, the pair whose concordance it counts is normal, and
 *   X = G'/(G + G'), Y = G''/(G + G''), all with shape a = df/2.
 *
 *   From df 1: with p, q = log(G'/G), log(G''/G) the density is proportional to
 *   exp(a(p + q)) / (1 + exp p + exp q)^(3a), and analytic in a strip of half-width pi, so that the
 *   trapezoid rule converges exponentially (Trefethen & Weideman 2014).
 *
 *   Below, its range grows like 1/df, while nearly all of it is flat. So sort the three: with u the
 *   second largest by the largest, v the smallest by the second, every order has a density
 *   proportional to u^(2a-1) v^(a-1) (1 + u + uv)^(-3a) over the unit square. In -log u and -log v
 *   all else is analytic in the same strip and has its limit, to rounding, by FAR; the weight
 *   beyond is known in closed form. What is left are panels of fixed width.
 *
 * Special cases
 *   As df falls to 0 rho falls to tau: G' and G'' both exceed G or XY is 0. A correlation of -1 or
 *   1 is its own rho.
 *
 * Accuracy
 *   1e-13.
 */
#include "t_rho.h"
#include "quadrature.h"

#include <math.h>

static const double PI = 3.14159265358979323846;

/* The step of the trapezoid rule: fine enough for the poles of the integrand at a distance of pi
 * and for the width of its peak. Beyond the range the density is below 1e-17 of its peak. */
struct grid {
    double step, range;
};

static struct grid grid_for(double shape)
{
    double width = sqrt(1.5 / shape);
    return (struct grid){ fmin(0.45, 0.65 * width), 40 / shape + 14 * width };
}

/* One row of the double sum: the weights, and weights times asin. */
static void add_row(double correlation, double shape, double p, const struct grid *g,
                    double *weights, double *sum)
{
    double ep = exp(p), peak = -3 * shape * log(3);
    for (double q = -g->range; q <= p; q += g->step) {
        double eq = exp(q), log_weight = shape * (p + q) - 3 * shape * log(1 + ep + eq) - peak;
        if (log_weight < -42) continue;
        double weight = exp(log_weight) * (q < p - g->step / 2 ? 2 : 1);
        *weights += weight;
        *sum += weight * asin(correlation * sqrt(1 / (1 + 1 / ep) / (1 + 1 / eq)));
    }
}

static double mean_by_trapezoids(double correlation, double shape)
{
    double weights = 0, sum = 0;
    struct grid g = grid_for(shape);
    for (double p = -g.range; p <= g.range; p += g.step)
        add_row(correlation, shape, p, &g, &weights, &sum);
    return sum / weights;
}

enum { PANELS = 13, NODES = PANELS * QUADRATURE_POINTS + 1 };

static const double FAR = 78;

/* Nodes x in (0;1) and weights that sum to 1 for the density power x^(power - 1), the last of them
 * for all that lies below exp(-FAR). */
struct ratios {
    double x[NODES], weight[NODES];
};

static void take_ratios(double power, struct ratios *r)
{
    for (int k = 0; k < PANELS; k++) {
        double *x = r->x + k * QUADRATURE_POINTS, *weight = r->weight + k * QUADRATURE_POINTS;
        quadrature_points(k * FAR / PANELS, (k + 1) * FAR / PANELS, x, weight);
        for (int i = 0; i < QUADRATURE_POINTS; i++) {
            weight[i] *= power * exp(-power * x[i]);
            x[i] = exp(-x[i]);
        }
    }
    r->x[NODES - 1] = 0;
    r->weight[NODES - 1] = exp(-power * FAR);
}

/* The sum of asin over the orders in which G, G', G'' can come, G' and G'' being alike: G first,
 * second and last. */
static double over_orders(double correlation, double u, double v)
{
    double one = 1 / (1 + u), two = 1 / (1 + v), both = u * v / (1 + u * v);
    return asin(correlation * sqrt(u * one * both)) + asin(correlation * sqrt(one * v * two))
         + asin(correlation * sqrt(two / (1 + u * v)));
}

static double mean_by_order(double correlation, double shape)
{
    double weights = 0, sum = 0;
    struct ratios second, third;
    take_ratios(2 * shape, &second);
    take_ratios(shape, &third);
    for (int i = 0; i < NODES; i++)
        for (int j = 0; j < NODES; j++) {
            double u = second.x[i], v = third.x[j];
            double weight = second.weight[i] * third.weight[j]
                          * exp(-3 * shape * log1p(u + u * v));
            weights += weight;
            sum += weight * over_orders(correlation, u, v);
        }
    return sum / (3 * weights);
}

double rho_of_t(double correlation, double df)
{
    if (fabs(correlation) == 1) return correlation;
    double mean = df < 1 ? mean_by_order(correlation, df / 2)
                         : mean_by_trapezoids(correlation, df / 2);
    return mean / (PI / 6);
}

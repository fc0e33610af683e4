/* grouped_t.c - tau, rho and tail dependence where the degrees of freedom differ.
 *
 * Method
 *   Columns are sqrt(w_i) Z_i with normal Z and w_i = df_i / chi-square_i, both chi-squares at the
 *   probability Phi(z) of one normal z (Daul, De Giorgi, Lindskog & McNeil 2003). Given the z of
 *   the rows compared, the differences whose concordance tau and rho count are normal, so
 *     tau = (2/pi) E asin(correlation c), c = (sqrt(w_1 w_2) + sqrt(w_1' w_2'))
 *                                            / sqrt((w_1 + w_1')(w_2 + w_2')),
 *     rho = (6/pi) E asin(correlation sqrt(w_1/(w_1 + w_1') w_2/(w_2 + w_2''))),
 *   over independent z, z', z'' by the trapezoid rule with normal weights. Where scores are level w
 *   all but jumps when the df are few, over a width of about df: there the rule runs over the
 *   logarithm of their distance (Trefethen & Weideman 2014).
 *   Tail: with m_i = E max(Z_i, 0)^df_i it is E min(Z_1^df_1 / m_1, Z_2^df_2 / m_2) over the
 *   quadrant where both are positive. In polar coordinates the radius gives incomplete gamma
 *   functions; the angle is integrated by the double exponential rule (Takahasi & Mori 1974), in
 *   panels as wide as the peak of the integrand is for the larger df.
 *
 * Special cases
 *   A correlation of 1 leaves only the radius, of -1 nothing.
 */
#include "grouped_t.h"
#include "root.h"
#include "student.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_gamma.h>
#include <math.h>
#include <stdbool.h>

static const double PI = 3.14159265358979323846;

/* The tables of log chi-square for either column; log w is their negative but for a constant. */
struct columns {
    struct student first, second;
};

/* The lower df first, so that a pair gives the same bits either way round. Below the smallest
 * distance that counts (FIRST_LOG) all df are alike. */
static status take_columns(double df1, double df2, struct columns *c, pool *p)
{
    const double LEAST = 1e-20;
    if (!(df1 > 0 && df2 > 0)) return OUT_OF_DOMAIN;
    double low = fmax(fmin(df1, df2), LEAST), high = fmax(fmax(df1, df2), LEAST);
    status made = chi_square_table(&c->first, low, p);
    return made == OK ? chi_square_table(&c->second, high, p) : made;
}

/* Scores beyond it are too rare to matter. The tables reach a little further. */
static const double LAST_SCORE = 8;

/* Distances from a score, equally spaced in their logarithm, where a column with few df all but
 * jumps: the jump is about df wide. */
enum { DISTANCES = 134 };

static const double LOG_STEP = 0.2, FIRST_LOG = -24;

/* log(2 cosh x) */
static double log_cosh(double x)
{
    return fabs(x) + log1p(exp(-2 * fabs(x)));
}

/* Half of log w at z less that at z', as far as c can tell. */
static double half_ratio(const struct student *column, double z, double other)
{
    double half = (log_chi_square(column, other) - log_chi_square(column, z)) / 2;
    return fmax(-60, fmin(60, half));
}

static double tau_between(const struct columns *columns, double correlation, double z, double other)
{
    double d1 = half_ratio(&columns->first, z, other), d2 = half_ratio(&columns->second, z, other);
    double c = exp(log_cosh((d1 + d2) / 2) - (log_cosh(d1) + log_cosh(d2)) / 2);
    return asin(correlation * fmin(1, c));
}

/* The mean over z > z', in the independent normal variables (z + z')/sqrt 2, their middle, and
 * (z - z')/sqrt 2, their distance. */
static double mean_for_tau(const struct columns *c, double correlation)
{
    enum { MIDDLES = 161 };
    double weights = 0, sum = 0;
    for (int l = 0; l < DISTANCES; l++) {
        double distance = exp(FIRST_LOG + LOG_STEP * l);
        for (int k = 0; k < MIDDLES; k++) {
            double middle = LAST_SCORE * (2.0 * k / (MIDDLES - 1) - 1);
            double z = (middle + distance) / sqrt(2), other = (middle - distance) / sqrt(2);
            if (fabs(z) > LAST_SCORE || fabs(other) > LAST_SCORE) continue;
            double weight = distance * exp(-(middle * middle + distance * distance) / 2);
            weights += weight;
            sum += weight * tau_between(c, correlation, z, other);
        }
    }
    return sum / weights;
}

status tau_of_grouped(double correlation, double df1, double df2, double *tau, pool *p)
{
    struct block *mark = p->last;
    struct columns c;
    status made = take_columns(df1, df2, &c, p);
    if (made == OK) *tau = mean_for_tau(&c, correlation) / (PI / 2);
    pool_back_to(p, mark);
    return made;
}

/* sqrt(w/(w + w')) of one column at the scores z' of a row that is compared with a row at z. */
struct parts {
    int n;
    double weight[2 * DISTANCES], part[2 * DISTANCES];
};

static void add_part(const struct student *column, double z, double other, double weight,
                     struct parts *s)
{
    if (fabs(other) > LAST_SCORE) return;
    double chi = log_chi_square(column, z) - log_chi_square(column, other);
    s->weight[s->n] = weight * exp(-other * other / 2);
    s->part[s->n++] = 1 / sqrt(1 + exp(chi));
}

/* From df 1 equal steps resolve the jump at z. */
static void take_parts(const struct student *column, double z, struct parts *s)
{
    enum { SCORES = 101 };
    s->n = 0;
    for (int k = 0; column->df >= 1 && k < SCORES; k++)
        add_part(column, z, LAST_SCORE * (2.0 * k / (SCORES - 1) - 1), 1, s);
    for (int k = 0; column->df < 1 && k < DISTANCES; k++) {
        double distance = exp(FIRST_LOG + LOG_STEP * k);
        add_part(column, z, z - distance, distance, s);
        add_part(column, z, z + distance, distance, s);
    }
    double sum = 0;
    for (int k = 0; k < s->n; k++) sum += s->weight[k];
    for (int k = 0; k < s->n; k++) s->weight[k] /= sum;
}

/* The sum over z' and z'' for one z. */
static double rho_at(const struct columns *c, double correlation, double z)
{
    double sum = 0;
    struct parts first, second;
    take_parts(&c->first, z, &first);
    take_parts(&c->second, z, &second);
    for (int k = 0; k < first.n; k++) {
        double with = correlation * first.part[k], inner = 0;
        for (int l = 0; l < second.n; l++) inner += second.weight[l] * asin(with * second.part[l]);
        sum += first.weight[k] * inner;
    }
    return sum;
}

static double mean_for_rho(const struct columns *c, double correlation)
{
    enum { SCORES = 101 };
    double weights = 0, sum = 0;
    for (int k = 0; k < SCORES; k++) {
        double z = LAST_SCORE * (2.0 * k / (SCORES - 1) - 1), weight = exp(-z * z / 2);
        weights += weight;
        sum += weight * rho_at(c, correlation, z);
    }
    return sum / weights;
}

status rho_of_grouped(double correlation, double df1, double df2, double *rho, pool *p)
{
    struct block *mark = p->last;
    struct columns c;
    status made = take_columns(df1, df2, &c, p);
    if (made == OK) *rho = mean_for_rho(&c, correlation) / (PI / 6);
    pool_back_to(p, mark);
    return made;
}

/* log of 2 sqrt(pi) Gamma(df/2 + 1) / Gamma((df + 1)/2) */
static double log_scale(double df)
{
    return log(2 * sqrt(PI)) + gsl_sf_lnpoch((df + 1) / 2, 0.5);
}

/* log of m_high / m_low, where m = E max(Z, 0)^df */
static double log_moments(double low, double high)
{
    return (high - low) / 2 * log(2) + gsl_sf_lnpoch((low + 1) / 2, (high - low) / 2);
}

/* The lower (below) or upper incomplete gamma function, regularised. */
static double gamma_part(double shape, double log_x, bool below)
{
    if (log_x > 700 || log_x < -700) return (log_x > 0) == below;
    gsl_sf_result part;
    double x = exp(log_x);
    int failed = below ? gsl_sf_gamma_inc_P_e(shape, x, &part)
                       : gsl_sf_gamma_inc_Q_e(shape, x, &part);
    return failed && failed != GSL_EUNDRFLW ? NAN : part.val;
}

/* A pair in polar coordinates: Z_1 = R cos(angle), Z_2 = R cos(angle - turn). */
struct corner_pair {
    double turn, low, high, moments;
};

/* How much the first column is ahead of the second at radius 1, in logarithms. */
static double ahead(double cos1, double cos2, const struct corner_pair *c)
{
    return c->low * log(cos1) - c->high * log(cos2) + c->moments;
}

/* At the radius where most of the mass is. */
static double ahead_at(double angle, const void *with)
{
    const struct corner_pair *c = with;
    double cos1 = fmax(cos(angle), 1e-300), cos2 = fmax(cos(angle - c->turn), 1e-300);
    double there = ahead(cos1, cos2, c) - (c->high - c->low) / 2 * log(c->high + 2);
    return fmax(-1e6, fmin(1e6, there));
}

/* The logarithm of R^2/2 at which both are level. */
static double log_meet(double ahead, const struct corner_pair *c)
{
    return 2 / (c->high - c->low) * ahead - log(2);
}

static double tail_at(double angle, const struct corner_pair *c)
{
    double cos1 = cos(angle), cos2 = cos(angle - c->turn);
    if (!(cos1 > 0 && cos2 > 0)) return 0;
    double meet = log_meet(ahead(cos1, cos2, c), c);
    return exp(log_scale(c->high) + c->high * log(cos2)) * gamma_part(c->high / 2 + 1, meet, true)
         + exp(log_scale(c->low) + c->low * log(cos1)) * gamma_part(c->low / 2 + 1, meet, false);
}

static double tail_between(double from, double to, const struct corner_pair *c)
{
    double half = (to - from) / 2, step = 1.0 / 16, sum = 0;
    for (int k = -56; k <= 56; k++) {
        double t = k * step, s = PI / 2 * sinh(t), slope = PI / 2 * cosh(t) / (cosh(s) * cosh(s));
        double beside = 2 * half / (1 + exp(2 * fabs(s)));
        double angle = s < 0 ? from + beside : to - beside;
        sum += slope * tail_at(angle, c);
    }
    return sum * step * half;
}

/* Where the df are close the integrand all but breaks where both columns are level: split there,
 * unless they are level only within rounding of an end. */
static double tail_of_panel(double from, double to, const struct corner_pair *c)
{
    double level;
    if (!(from < to)) return 0;
    if (root_between(ahead_at, c, from, to, &level) != OK) return tail_between(from, to, c);
    return tail_between(from, level, c) + tail_between(level, to, c);
}

/* Puts an angle in its place among those given before. */
static void insert(double angle, double *angles, int *n)
{
    int k = (*n)++;
    for (; k > 0 && angles[k - 1] > angle; k--) angles[k] = angles[k - 1];
    angles[k] = angle;
}

/* How far the first is ahead turns where tan(angle - turn) = ratio tan(angle), which is a quadratic
 * in the tangent: between those angles the columns are level at most once. */
static void insert_turning_points(const struct corner_pair *c, double *angles, int *n)
{
    double ratio = c->low / c->high, rest = (c->high - c->low) / c->high, slant = tan(c->turn);
    double inside = rest * rest - 4 * ratio * slant * slant;
    if (!(inside >= 0 && slant > 0)) return;
    double larger = rest + sqrt(inside);
    insert(atan(2 * slant / larger), angles, n);
    insert(atan(larger / (2 * ratio * slant)), angles, n);
}

/* The integrand is at most either term without its gamma function, and so nothing beyond REACH
 * standard deviations 1/sqrt(df) of either peak, at 0 and at `turn`. */
static double tail_over_angles(const struct corner_pair *c)
{
    enum { REACH = 9, PANELS = 2 * REACH };
    double width = 1 / sqrt(c->high), wide = REACH / sqrt(c->low), angles[PANELS + 3], sum = 0;
    double from = fmax(c->turn - PI / 2, -wide), to = fmin(PI / 2, wide);
    int n = 0;
    for (int k = 0; k <= PANELS; k++) insert(c->turn + (k - REACH) * width, angles, &n);
    insert_turning_points(c, angles, &n);
    for (int k = 0; k + 1 < n; k++)
        sum += tail_of_panel(fmax(from, angles[k]), fmin(to, angles[k + 1]), c);
    return sum / (2 * PI);
}

/* Z_1 = Z_2: the first is the smaller one beyond the point where they are level. */
static double tail_of_one(const struct corner_pair *c)
{
    double meet = log_meet(c->moments, c);
    return gamma_part((c->high + 1) / 2, meet, true) + gamma_part((c->low + 1) / 2, meet, false);
}

double tail_of_grouped(double correlation, double df1, double df2)
{
    double low = fmin(df1, df2), high = fmax(df1, df2);
    struct corner_pair c = { acos(correlation), low, high, log_moments(low, high) };
    return c.turn > 0 ? fmin(1, tail_over_angles(&c)) : tail_of_one(&c);
}

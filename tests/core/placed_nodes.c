/* The trapezoid rule with its nodes where the integrand is, against closed forms. */
#include "table.h"

#include "../../src/normal.h"
#include "../../src/placed_nodes.h"

struct shape {
    double (*log_of)(double z, const struct shape *s);
    double a, b, width;
};

static double log_two_peaks(double z, const struct shape *s)
{
    double narrow = (z - s->a) / s->width, wide = (z - s->b) / 0.5;
    double first = -narrow * narrow / 2 - log(s->width), second = -wide * wide / 2 - log(0.5);
    return fmax(first, second) + log1p(exp(-fabs(first - second)));
}

/* One peak falls beyond an end where it falls at it. */
static void terms(struct placed_nodes *nodes, void *with)
{
    const struct shape *s = with;
    for (size_t k = nodes->halved; k < nodes->n; k += 1 + nodes->halved)
        nodes->log_term[k] = s->log_of(node_at(nodes, k), s);
    double first = node_at(nodes, 0), last = node_at(nodes, nodes->n - 1), beside = 1e-6;
    double below = s->log_of(first, s), above = s->log_of(last, s);
    nodes->below = below < s->log_of(first + beside, s) ? below : HUGE_VAL;
    if (s->log_of == log_two_peaks && first > s->a) nodes->below = HUGE_VAL;
    nodes->above = above < s->log_of(last - beside, s) ? above : HUGE_VAL;
}

static struct placed_sum placed(struct shape s)
{
    static double room[MOST_NODES];
    struct placed_nodes nodes = { .log_term = room };
    return place_nodes(&nodes, terms, &s, MOST_NODES);
}

static double log_gamma_shape(double z, const struct shape *s)
{
    return s->a * (z - s->b) - exp(fmin(z - s->b, 700));
}

/* Euler: the integral of exp(a z - exp z) is Gamma(a); far from 0 too */
static void gamma_function(void **state)
{
    (void)state;
    for (double a = 0.01; a < 1e5; a *= 3)
        for (double shift = -3000; shift < 4000; shift += 1500) {
            struct placed_sum s = placed((struct shape){ log_gamma_shape, a, shift, 0 });
            assert_true(s.settled);
            assert_within(s.log_integral, lgamma(a), 1e-11 * fmax(1, fabs(lgamma(a))));
        }
}

static double log_cliff(double z, const struct shape *s)
{
    return -z * z / 2 + normal_log_probability((s->a - z) / s->width);
}

/* P(Z + width Z' <= a): the integrand ends at a cliff, or all but reaches it in its tail */
static void cliffs(void **state)
{
    (void)state;
    for (double a = -30; a < 8; a += 1.37)
        for (double width = 1; width > 1e-9; width /= 7) {
            struct placed_sum s = placed((struct shape){ log_cliff, a, 0, width });
            double want = normal_log_probability(a / sqrt(1 + width * width));
            assert_true(s.settled);
            assert_within(s.log_integral - log(sqrt(2 * acos(-1))), want, 1e-10);
        }
}

/* Two normal densities, each with the integral 1, one of them narrow: between the first nodes it is
 * all but missed. */
static void two_peaks(void **state)
{
    (void)state;
    for (double a = -40; a < -12; a += 3.3)
        for (double width = 0.3; width > 0.01; width /= 2) {
            struct placed_sum s = placed((struct shape){ log_two_peaks, a, 3, width });
            assert_true(s.roughly);
            assert_within(s.log_integral, log(2 * sqrt(2 * acos(-1))), 1e-10);
        }
}

static double log_of_nothing(double z, const struct shape *s)
{
    return s->a + 0 * z - HUGE_VAL;
}

static void nothing(void **state)
{
    (void)state;
    struct placed_sum s = placed((struct shape){ log_of_nothing, 0, 0, 0 });
    assert_true(s.log_integral == -HUGE_VAL && !s.settled);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(gamma_function), cmocka_unit_test(cliffs), cmocka_unit_test(two_peaks),
        cmocka_unit_test(nothing),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}

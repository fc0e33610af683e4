/* Tests of src/conjugate.c: A step = -gradient is what it is for. */
#include "table.h"

#include "../../src/conjugate.h"

enum { MOST = 30 };

typedef struct {
    double a[MOST * MOST];
    size_t n, rounds;
} square;

static void multiply(const void *with, const double *h, double *image)
{
    square *s = (square *)with;
    s->rounds++;
    for (size_t i = 0; i < s->n; i++) {
        image[i] = 0;
        for (size_t j = 0; j < s->n; j++) image[i] += s->a[i * s->n + j] * h[j];
    }
}

/* B B' + I for a random B, scaled badly on purpose */
static void make(square *s, uint64_t *state, double *scale)
{
    double b[MOST * MOST];
    s->rounds = 0;
    for (size_t i = 0; i < s->n * s->n; i++) b[i] = random_normal(state);
    for (size_t i = 0; i < s->n; i++) scale[i] = exp(3 * random_normal(state));
    for (size_t i = 0; i < s->n; i++)
        for (size_t j = 0; j < s->n; j++) {
            double sum = i == j;
            for (size_t k = 0; k < s->n; k++) sum += b[i * s->n + k] * b[j * s->n + k];
            s->a[i * s->n + j] = scale[i] * scale[j] * sum;
        }
}

static void the_system_is_solved(void **unused)
{
    (void)unused;
    uint64_t state = 1952;
    for (size_t round = 0; round < effort(100); round++) {
        square s = { .n = 1 + random_below(&state, MOST) };
        double scale[MOST], diagonal[MOST], gradient[MOST], step[MOST], scratch[3 * MOST];
        double image[MOST], size = 0, rest = 0;
        make(&s, &state, scale);
        for (size_t i = 0; i < s.n; i++) {
            diagonal[i] = s.a[i * s.n + i];
            gradient[i] = scale[i] * random_normal(&state);
            size += gradient[i] * gradient[i];
        }
        const linear_system a = { multiply, &s, diagonal, gradient, s.n };
        conjugate_gradients(&a, 1e-8 * sqrt(size), 1000, step, scratch);
        multiply(&s, step, image);
        for (size_t i = 0; i < s.n; i++)
            rest += (image[i] + gradient[i]) * (image[i] + gradient[i]);
        assert_true(sqrt(rest) <= 1e-7 * sqrt(size));
    }
}

/* With a diagonal matrix as its own preconditioner one round is enough. */
static void rounds_are_counted(void **unused)
{
    (void)unused;
    square s = { .n = 2, .a = { 4, 0, 0, 0.01 } };
    const double diagonal[] = { 4, 0.01 }, gradient[] = { 1, 1 };
    double step[2], scratch[6];
    const linear_system a = { multiply, &s, diagonal, gradient, 2 };
    conjugate_gradients(&a, 1e-12, 100, step, scratch);
    assert_int_equal(s.rounds, 1);
    assert_close(step[0], -0.25, 1e-15);
    assert_close(step[1], -100, 1e-14);
    conjugate_gradients(&a, 1e-12, 0, step, scratch);
    assert_same(step[0], 0);
    assert_int_equal(s.rounds, 1);
}

/* Where A is not positive the step stays as it was. */
static void a_matrix_that_is_not_positive(void **unused)
{
    (void)unused;
    square s = { .n = 1, .a = { -1 } };
    const double diagonal[] = { 1 }, gradient[] = { 1 };
    double step[1], scratch[3];
    const linear_system a = { multiply, &s, diagonal, gradient, 1 };
    conjugate_gradients(&a, 1e-12, 100, step, scratch);
    assert_same(step[0], 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_system_is_solved),
        cmocka_unit_test(rounds_are_counted),
        cmocka_unit_test(a_matrix_that_is_not_positive),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}

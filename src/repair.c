/* repair.c - the nearest correlation matrix by Newton's method on the dual.
 *
 * Method: the nearest matrix is the positive part of G + Diag(y), where y minimises the convex
 * function
 *     theta(y) = |(G + Diag(y))+|^2 / 2 - sum y,
 * whose gradient, diag((G + Diag(y))+) - 1, is semismooth, so that Newton's method converges
 * quadratically (Qi & Sun, A quadratically convergent Newton method for computing the nearest
 * correlation matrix, SIAM J. Matrix Anal. Appl. 28, 2006). Each step is solved by conjugate
 * gradients preconditioned with the diagonal of the Hessian (Borsdorf & Higham, A preconditioned
 * Newton algorithm for the nearest correlation matrix, IMA J. Numer. Anal. 30, 2010) and shortened
 * until theta falls enough (Armijo). With eigenvectors P, positive eigenvalues in the set a and the
 * others in c, the Hessian is
 *     V h = (B o B) h + 2 diag(Pa (W o (Pa' Diag(h) Pc)) Pc'),
 *     B = Pa Pa',  W_kl = v_k / (v_k - v_l),
 * o being the product entry by entry: two products of half size for each conjugate gradient step. A
 * floor f: X >= f I with unit diagonal is X = f I + (1 - f) Y with a correlation matrix Y, which
 * must be nearest to (G - f I) / (1 - f).
 * Special cases: a feasible matrix is returned as it is. The diagonal of G only shifts y.
 * Accuracy: the gradient is brought below 1e-11 sqrt d before the diagonal is scaled to exactly 1,
 * which leaves the entries within about 1e-11 of the optimum unless the matrix found is close to
 * having fewer than two positive eigenvalues.
 */
#include "repair.h"
#include "conjugate.h"
#include "correlation.h"
#include "linear.h"

#include <math.h>
#include <string.h>

/* The dual problem at one y. */
typedef struct {
    size_t d, positive;          /* dimension; number of positive eigenvalues, the last ones */
    double *given;               /* G off the diagonal times scale; 1 on it */
    double scale, largest;       /* the largest entry off the diagonal, scaled */
    double *y, *gradient;        /* the point and the gradient of theta there */
    double theta, norm;          /* theta, and the Euclidean norm of the gradient */
    double *values, *vectors;    /* of G + Diag(y), lowest first */
    eigen_room room;
    size_t decompositions;
} dual;

/* The Hessian at one y, and scratch of the same shapes. */
typedef struct {
    double *projector;           /* (B o B), d x d */
    double *weights;             /* W, (d - positive) x positive, column by column */
    double *across;              /* as weights */
    double *side, *squares;      /* d x d at most */
    double damping;              /* times I, added to the Hessian, which may be singular early on */
    double *diagonal;            /* of both: the preconditioner */
    double *step, *scratch;      /* d; 3 d */
} newton;

static double dot(const double *a, const double *b, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += a[i] * b[i];
    return sum;
}

static status make_dual(dual *q, size_t d, pool *p)
{
    *q = (dual){ .d = d };
    status s = make_eigen_room(&q->room, d, true, p);
    if (s) return s;
    q->given = pool_take(p, d, d * sizeof *q->given);
    q->y = pool_take_zeroed(p, d, sizeof *q->y);
    q->gradient = pool_take(p, d, sizeof *q->gradient);
    q->values = pool_take(p, d, sizeof *q->values);
    q->vectors = pool_take(p, d, d * sizeof *q->vectors);
    return q->given && q->y && q->gradient && q->values && q->vectors ? OK : NO_MEMORY;
}

static status make_newton(newton *w, size_t d, pool *p)
{
    size_t largest = d * d / 4 + 1;      /* of positive * (d - positive) */
    w->projector = pool_take(p, d, d * sizeof *w->projector);
    w->weights = pool_take(p, largest, sizeof *w->weights);
    w->across = pool_take(p, largest, sizeof *w->across);
    w->side = pool_take(p, d, d * sizeof *w->side);
    w->squares = pool_take(p, d, d * sizeof *w->squares);
    double *rows = pool_take(p, 5 * d, sizeof *rows);
    if (!w->projector || !w->weights || !w->across || !w->side || !w->squares || !rows)
        return NO_MEMORY;
    w->diagonal = rows;
    w->step = rows + d;
    w->scratch = rows + 2 * d;
    return OK;
}

/* theta and its gradient from the eigenvalues and eigenvectors at q->y */
static void measure(dual *q)
{
    size_t d = q->d, negative = 0;
    while (negative < d && q->values[negative] <= 0) negative++;
    q->positive = d - negative;
    q->theta = 0;
    for (size_t i = 0; i < d; i++) {
        q->gradient[i] = -1;
        q->theta -= q->y[i];
    }
    for (size_t k = negative; k < d; k++) {
        const double *vector = q->vectors + k * d;
        q->theta += q->values[k] * q->values[k] / 2;
        for (size_t i = 0; i < d; i++) q->gradient[i] += q->values[k] * vector[i] * vector[i];
    }
    q->norm = sqrt(dot(q->gradient, q->gradient, d));
}

static status evaluate(dual *q)
{
    size_t d = q->d;
    memcpy(q->vectors, q->given, d * d * sizeof *q->vectors);
    for (size_t i = 0; i < d; i++) q->vectors[i * d + i] += q->y[i];
    q->decompositions++;
    status s = eigen(q->vectors, q->values, &q->room);
    if (!s) measure(q);
    return s;
}

/* Lowers all of y by the same amount, which moves the eigenvalues and keeps the eigenvectors: to
 * where the positive eigenvalues sum to d, the minimum of theta on that line. It saves about one
 * Newton step for nothing. */
static void shift(dual *q)
{
    size_t d = q->d;
    double sum = 0, lower = 0;
    for (size_t m = 1; m <= d; m++) {
        double value = q->values[d - m];
        sum += value;
        if (value * (double)m > sum - (double)d) lower = (sum - (double)d) / (double)m;
    }
    for (size_t i = 0; i < d; i++) {
        q->y[i] -= lower;
        q->values[i] -= lower;
    }
    measure(q);
}

/* The diagonal of low c high', where low is d x negative, c is negative x positive, high is d x
 * positive. */
static void diagonal_between(const dual *q, const double *low, const double *c, const double *high,
                             double *side, double *diagonal)
{
    size_t d = q->d;
    product(low, c, d, d - q->positive, q->positive, side);
    memset(diagonal, 0, d * sizeof *diagonal);
    for (size_t k = 0; k < q->positive; k++)
        for (size_t i = 0; i < d; i++) diagonal[i] += side[k * d + i] * high[k * d + i];
}

/* B o B, where B = Pa Pa' = I - Pc Pc', from whichever side has fewer eigenvectors */
static void square_projector(const dual *q, newton *w)
{
    size_t d = q->d, negative = d - q->positive;
    bool few_positive = q->positive <= negative;
    const double *few = few_positive ? q->vectors + negative * d : q->vectors;
    outer_product(few, d, few_positive ? q->positive : negative, w->projector);
    if (!few_positive)
        for (size_t i = 0; i < d; i++) w->projector[i * d + i] = 1 - w->projector[i * d + i];
    for (size_t i = 0; i < d * d; i++) w->projector[i] *= w->projector[i];
}

static void make_hessian(const dual *q, newton *w)
{
    size_t d = q->d, negative = d - q->positive;
    w->damping = fmin(1e-3, 1e-2 * q->norm);
    square_projector(q, w);
    for (size_t k = 0; k < q->positive; k++) {
        double high = q->values[negative + k];
        for (size_t l = 0; l < negative; l++)
            w->weights[k * negative + l] = high / (high - q->values[l]);
    }
    for (size_t i = 0; i < d * d; i++) w->squares[i] = q->vectors[i] * q->vectors[i];
    diagonal_between(q, w->squares, w->weights, w->squares + negative * d, w->side, w->diagonal);
    for (size_t i = 0; i < d; i++)
        w->diagonal[i] = w->projector[i * d + i] + 2 * w->diagonal[i] + w->damping;
}

/* what apply_hessian() needs */
typedef struct {
    const dual *q;
    newton *w;
} hessian;

/* image = (V + damping I) h */
static void apply_hessian(const void *with, const double *h, double *image)
{
    const dual *q = ((const hessian *)with)->q;
    newton *w = ((const hessian *)with)->w;
    size_t d = q->d, negative = d - q->positive;
    const double *low = q->vectors, *high = q->vectors + negative * d;
    for (size_t k = 0; k < q->positive; k++)
        for (size_t i = 0; i < d; i++) w->side[k * d + i] = h[i] * high[k * d + i];
    transposed_product(low, w->side, negative, d, q->positive, w->across);
    for (size_t i = 0; i < negative * q->positive; i++) w->across[i] *= w->weights[i];
    diagonal_between(q, low, w->across, high, w->side, image);
    for (size_t i = 0; i < d; i++)
        image[i] = 2 * image[i] + dot(w->projector + i * d, h, d) + w->damping * h[i];
}

/* (V + damping I) step = -gradient, until the residual has fallen by `reduction`. */
static void solve_newton(const dual *q, newton *w, double reduction)
{
    const hessian h = { q, w };
    const linear_system system = { apply_hessian, &h, w->diagonal, q->gradient, q->d };
    conjugate_gradients(&system, reduction * q->norm, 10 + q->d, w->step, w->scratch);
}

/* Goes along the step, halving it until theta has fallen enough or, near the end where theta no
 * longer tells, until the gradient has halved. Sets *moved; otherwise the point is where it was. */
static status search_line(dual *q, const newton *w, bool *moved)
{
    enum { HALVINGS = 30 };
    size_t d = q->d;
    double theta = q->theta, norm = q->norm, slope = dot(q->gradient, w->step, d), length = 1;
    double taken = 0;
    for (int halving = 0; halving < HALVINGS; halving++) {
        for (size_t i = 0; i < d; i++) q->y[i] += (length - taken) * w->step[i];
        taken = length;
        status s = evaluate(q);
        if (s) return s;
        *moved = q->theta <= theta + 1e-4 * length * slope || q->norm <= norm / 2;
        if (*moved) return OK;
        length /= 2;
    }
    for (size_t i = 0; i < d; i++) q->y[i] -= taken * w->step[i];
    return evaluate(q);
}

/* from a point that has been evaluated */
static status minimise(dual *q, newton *w, course *how)
{
    enum { MOST_STEPS = 400 };
    double wanted = 1e-11 * sqrt((double)q->d) * fmax(1, q->largest / 1000);
    double good_enough = 100 * wanted;
    status s = OK;
    while (!s && q->norm > wanted) {
        if (how->iterations == MOST_STEPS || q->positive == 0) return NOT_SETTLED;
        bool moved = false;
        make_hessian(q, w);
        solve_newton(q, w, fmax(fmin(0.1, q->norm), wanted / (10 * q->norm)));
        s = search_line(q, w, &moved);
        how->iterations++;
        if (!s && !moved) return q->norm <= good_enough ? OK : NOT_SETTLED;
    }
    return s;
}

/* The positive part of G + Diag(y), its diagonal scaled to exactly 1, mapped back to the floor. */
static void finish(const dual *q, double floor, double *scratch, double *nearest)
{
    size_t d = q->d, negative = d - q->positive;
    bool few_positive = q->positive <= negative;
    size_t first = few_positive ? negative : 0, behind = few_positive ? d : negative;
    double *few = q->vectors + first * d;
    for (size_t k = first; k < behind; k++) {
        double root = sqrt(fabs(q->values[k]));
        for (size_t i = 0; i < d; i++) q->vectors[k * d + i] *= root;
    }
    outer_product(few, d, behind - first, scratch);
    if (!few_positive) {
        for (size_t i = 0; i < d * d; i++) scratch[i] += q->given[i];
        for (size_t i = 0; i < d; i++) scratch[i * d + i] += q->y[i];
    }
    for (size_t i = 0; i < d; i++) {
        for (size_t j = 0; j < i; j++) {
            double entry = scratch[i * d + j] / sqrt(scratch[i * d + i] * scratch[j * d + j]);
            nearest[i * d + j] = nearest[j * d + i] = (1 - floor) * fmin(1, fmax(-1, entry));
        }
        nearest[i * d + i] = 1;
    }
}

/* Cheap, and certain where it says yes. */
static status surely_fine(const double *given, size_t d, double floor, bool *fine, pool *p)
{
    *fine = false;
    return unit_diagonal(given, d) ? lies_above(given, d, floor, fine, p) : OK;
}

static void rescale(dual *q, const double *given, double scale)
{
    size_t d = q->d;
    q->scale = scale;
    q->largest = 0;
    for (size_t j = 0; j < d; j++) {
        for (size_t i = j + 1; i < d; i++) {
            double entry = q->given[j * d + i] = q->given[i * d + j] = scale * given[j * d + i];
            q->largest = fmax(q->largest, fabs(entry));
        }
        q->given[j * d + j] = 1;
    }
}

/* Newton's method at the scale that is wanted. Where that makes entries large, which a floor near 1
 * does, the way there starts from a smaller scale: y grows about as fast as the scale. */
static status climb(dual *q, newton *w, const double *given, double scale, course *how)
{
    enum { MODERATE = 10, GROWTH = 4 };
    double start = scale * fmin(1, MODERATE / q->largest);
    status s = OK;
    if (start < scale) {
        rescale(q, given, start);
        s = evaluate(q);
    }
    if (!s) shift(q);
    if (!s) s = minimise(q, w, how);
    while (!s && q->scale < scale) {
        double growth = fmin(GROWTH, scale / q->scale);
        rescale(q, given, growth < GROWTH ? scale : growth * q->scale);
        for (size_t i = 0; i < q->d; i++) q->y[i] *= growth;
        s = evaluate(q);
        if (!s) s = minimise(q, w, how);
    }
    return s;
}

/* from what Newton's method knows at y = 0: eigenvalues of I + scale (G - I) */
static bool fine_as_given(const dual *q, const double *given, double floor)
{
    double lowest = 1 + (q->values[0] - 1) / q->scale;
    return lowest >= floor - 1e-12 * (double)q->d && unit_diagonal(given, q->d);
}

static status by_newton(const double *given, size_t d, double floor, double *nearest,
                        course *how, pool *p)
{
    dual q;
    newton w;
    status s = make_dual(&q, d, p);
    if (s) return s;
    rescale(&q, given, 1 / (1 - floor));
    s = evaluate(&q);
    bool fine = !s && fine_as_given(&q, given, floor);
    if (!s && !fine) s = make_newton(&w, d, p);
    if (!s && !fine) s = climb(&q, &w, given, q.scale, how);
    how->decompositions = q.decompositions;
    if (fine) memmove(nearest, given, d * d * sizeof *nearest);
    else if (!s) finish(&q, floor, w.side, nearest);
    return s;
}

status nearest_correlation(const double *given, size_t d, double floor, double *nearest,
                           course *how, pool *p)
{
    course unasked, *told = how ? how : &unasked;
    *told = (course){ 0, 0 };
    if (!(floor >= 0 && floor < 1) || d == 0) return OUT_OF_DOMAIN;
    bool fine;
    struct block *mark = p->last;
    status s = surely_fine(given, d, floor, &fine, p);
    if (!s && fine) memmove(nearest, given, d * d * sizeof *nearest);
    if (!s && !fine) s = by_newton(given, d, floor, nearest, told, p);
    pool_back_to(p, mark);
    return s;
}

/* firm_repair.c - the nearest correlation matrix with firmness, by augmented Lagrangians.
 *
 * Method: minimise sum w (x - g)^2 / 2 over the entries x that are not held, subject to X - f I
 * having no negative eigenvalue. The constraint's multiplier S, a matrix without negative
 * eigenvalues, is found by the augmented Lagrangian method: for a penalty r, X minimises
 *     sum w (x - g)^2 / 2 + |M+|^2 / (2 r),   M = S - r (X - f I),
 * then S becomes M+, the positive part of M, and r grows (Qi & Sun, An augmented Lagrangian dual
 * approach for the H-weighted nearest correlation matrix problem, IMA J. Numer. Anal. 31, 2011;
 * Rockafellar 1976). The inner problem is convex with the semismooth gradient w (x - g) - M+,
 * solved by Newton's method with conjugate gradients. With M = P Diag(v) P' the Hessian takes a
 * direction H to
 *     w o H + r P (W o (P' H P)) P',  W_kl = 1, v_k / (v_k - v_l), 0
 * for v_k, v_l both positive, k positive only, none positive. It costs four products with the
 * eigenvectors of whichever sign is rarer.
 * Special cases: a feasible matrix is returned as it is. Entries held are no variables, so they
 * keep their bits. Groups of lines that are held throughout are looked at first (holds.h). When the
 * holds clash in another way S grows without bound, and is a proof of that as soon as <S, X - f I>
 * < 0 for the entries held and any others in [-1;1]; that is looked for after each outer step.
 * Holds that can be met only by matrices at the floor, such as a correlation of 1, leave S without
 * bound too, and then nothing settles.
 * Accuracy: stops when the gradient is below 1e-12 d, or what rounding allows with a large penalty,
 * in units of the geometric mean of firmness, and X is within 2e-14 d of feasible. Without entries
 * held the rest is removed by a last mix with I, else it remains.
 */
#include "firm_repair.h"
#include "conjugate.h"
#include "correlation.h"
#include "holds.h"
#include "linear.h"

#include <math.h>
#include <string.h>

/* The inner problem at one X. Matrices are d x d. */
typedef struct {
    size_t d, positive;          /* positive eigenvalues of M, the last ones */
    double floor, penalty;
    double *given, *weight;      /* weight 0 where held and on the diagonal; else 1 on average */
    bool *free;
    double *x, *multiplier;      /* X and S */
    double *positive_part;       /* M+ */
    double *scratch;
    double *gradient;            /* 0 where not free */
    double objective, norm;
    double *values, *vectors;    /* of M, lowest first */
    eigen_room room;
    size_t decompositions;
} inner;

typedef struct {
    double *weights;             /* W for the rarer sign: d x rare, its own block halved */
    double *left, *right;        /* d x rare scratch */
    double *squares;             /* d x d scratch */
    double *diagonal;            /* about the Hessian's: the preconditioner */
    double *step, *scratch;      /* d x d; three times that */
    size_t rare;                 /* number of eigenvectors of the rarer sign */
    const double *rare_vectors;
    bool rare_is_positive;
} newton;

static double dot(const double *a, const double *b, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += a[i] * b[i];
    return sum;
}

static status take_matrices(pool *p, size_t d, double **matrices[], size_t n)
{
    for (size_t k = 0; k < n; k++)
        if (!(*matrices[k] = pool_take_zeroed(p, d, d * sizeof **matrices[k]))) return NO_MEMORY;
    return OK;
}

static status make_inner(inner *q, size_t d, pool *p)
{
    *q = (inner){ .d = d };
    double **matrices[] = { &q->given, &q->weight, &q->x, &q->multiplier, &q->positive_part,
                            &q->gradient, &q->vectors, &q->scratch };
    q->values = pool_take(p, d, sizeof *q->values);
    q->free = pool_take_zeroed(p, d, d * sizeof *q->free);
    if (!q->values || !q->free) return NO_MEMORY;
    status s = take_matrices(p, d, matrices, sizeof matrices / sizeof *matrices);
    return s ? s : make_eigen_room(&q->room, d, true, p);
}

static status make_newton(newton *w, size_t d, pool *p)
{
    *w = (newton){ .rare = 0 };
    double **matrices[] = { &w->weights, &w->left, &w->right, &w->squares, &w->diagonal,
                            &w->step };
    w->scratch = pool_take(p, 3 * d, d * sizeof *w->scratch);
    if (!w->scratch) return NO_MEMORY;
    return take_matrices(p, d, matrices, sizeof matrices / sizeof *matrices);
}
/* c = a b' + b a' for the d x n matrices a and b; by way of `turned`, room for n x d */
static void symmetric_product(const double *a, const double *b, size_t d, size_t n, double *turned,
                              double *c)
{
    for (size_t k = 0; k < n; k++)
        for (size_t i = 0; i < d; i++) turned[i * n + k] = b[k * d + i];
    product(a, turned, d, n, d, c);
    for (size_t j = 0; j < d; j++)
        for (size_t i = 0; i <= j; i++) c[i * d + j] = c[j * d + i] = c[i * d + j] + c[j * d + i];
}

/* M+ from the eigenvectors of whichever sign is rarer. */
static void take_positive_part(inner *q)
{
    size_t d = q->d, negative = d - q->positive;
    bool few_positive = q->positive <= negative;
    size_t first = few_positive ? negative : 0, n = few_positive ? q->positive : negative;
    for (size_t k = 0; k < n; k++) {
        double root = sqrt(fabs(q->values[first + k]));
        const double *vector = q->vectors + (first + k) * d;
        for (size_t i = 0; i < d; i++) q->scratch[k * d + i] = root * vector[i];
    }
    outer_product(q->scratch, d, n, q->positive_part);
    for (size_t i = 0; !few_positive && i < d * d; i++)
        q->positive_part[i] += q->multiplier[i] - q->penalty * q->x[i];
    for (size_t i = 0; !few_positive && i < d; i++)
        q->positive_part[i * d + i] += q->penalty * q->floor;
}

/* All that follows from X, S and the penalty. */
static status evaluate(inner *q)
{
    size_t d = q->d;
    for (size_t i = 0; i < d * d; i++) q->vectors[i] = q->multiplier[i] - q->penalty * q->x[i];
    for (size_t i = 0; i < d; i++) q->vectors[i * d + i] += q->penalty * q->floor;
    q->decompositions++;
    status s = eigen(q->vectors, q->values, &q->room);
    if (s) return s;
    size_t negative = 0;
    while (negative < d && q->values[negative] <= 0) negative++;
    q->positive = d - negative;
    take_positive_part(q);
    q->objective = 0;
    for (size_t k = negative; k < d; k++)
        q->objective += q->values[k] * q->values[k] / (2 * q->penalty);
    for (size_t i = 0; i < d * d; i++) {
        double change = q->x[i] - q->given[i];
        q->objective += q->weight[i] * change * change / 2;
        q->gradient[i] = q->free[i] ? q->weight[i] * change - q->positive_part[i] : 0;
    }
    q->norm = sqrt(dot(q->gradient, q->gradient, d * d));
    return OK;
}

/* The eigenvectors of the rarer sign and what W is in their columns. Their own block is halved
 * because symmetric_product() adds it twice. For rare negative eigenvalues it is 1 - W, and the
 * Hessian's second part is H less what these columns give. */
static void choose_side(const inner *q, newton *w)
{
    size_t d = q->d, negative = d - q->positive;
    w->rare_is_positive = q->positive <= negative;
    w->rare = w->rare_is_positive ? q->positive : negative;
    size_t first = w->rare_is_positive ? negative : 0;
    w->rare_vectors = q->vectors + first * d;
    for (size_t k = 0; k < w->rare; k++) {
        double own = q->values[first + k];
        for (size_t l = 0; l < d; l++) {
            bool same_sign = (l >= negative) == w->rare_is_positive;
            w->weights[k * d + l] = same_sign ? 0.5 : own / (own - q->values[l]);
        }
    }
}

/* The diagonal of the Hessian for the pair (i, j), less a term that has no sign and is smaller. */
static void make_preconditioner(const inner *q, newton *w)
{
    size_t d = q->d;
    const double *rare = w->squares + (w->rare_vectors - q->vectors);
    for (size_t i = 0; i < d * d; i++) w->squares[i] = q->vectors[i] * q->vectors[i];
    product(w->squares, w->weights, d, d, w->rare, w->left);
    symmetric_product(w->left, rare, d, w->rare, w->right, w->diagonal);
    for (size_t i = 0; i < d * d; i++) {
        double share = w->rare_is_positive ? w->diagonal[i] : 1 - w->diagonal[i];
        w->diagonal[i] = q->free[i] ? q->weight[i] + q->penalty * fmax(0, share) : 1;
    }
}

/* what apply_hessian() needs */
typedef struct {
    const inner *q;
    newton *w;
} hessian;

/* image = Hessian h */
static void apply_hessian(const void *with, const double *h, double *image)
{
    const inner *q = ((const hessian *)with)->q;
    newton *w = ((const hessian *)with)->w;
    size_t d = q->d;
    product(h, w->rare_vectors, d, d, w->rare, w->left);
    transposed_product(q->vectors, w->left, d, d, w->rare, w->right);
    for (size_t i = 0; i < d * w->rare; i++) w->right[i] *= w->weights[i];
    product(q->vectors, w->right, d, d, w->rare, w->left);
    symmetric_product(w->left, w->rare_vectors, d, w->rare, w->right, image);
    for (size_t i = 0; i < d * d; i++) {
        double part = w->rare_is_positive ? image[i] : h[i] - image[i];
        image[i] = q->free[i] ? q->weight[i] * h[i] + q->penalty * part : 0;
    }
}

/* Hessian step = -gradient, until the residual has fallen to `wanted`. */
static void solve_newton(const inner *q, newton *w, double wanted)
{
    enum { MOST_ROUNDS = 300 };
    const hessian h = { q, w };
    const linear_system system = { apply_hessian, &h, w->diagonal, q->gradient, q->d * q->d };
    conjugate_gradients(&system, wanted, MOST_ROUNDS, w->step, w->scratch);
}

/* As in repair.c: along the step, halving it until the objective has fallen enough, or the gradient
 * halved. */
static status search_line(inner *q, const newton *w, bool *moved)
{
    enum { HALVINGS = 30 };
    size_t n = q->d * q->d;
    double objective = q->objective, norm = q->norm, slope = dot(q->gradient, w->step, n);
    double length = 1, taken = 0;
    for (int halving = 0; halving < HALVINGS; halving++) {
        for (size_t i = 0; i < n; i++) q->x[i] += (length - taken) * w->step[i];
        taken = length;
        status s = evaluate(q);
        if (s) return s;
        *moved = q->objective <= objective + 1e-4 * length * slope || q->norm <= norm / 2;
        if (*moved) return OK;
        length /= 2;
    }
    for (size_t i = 0; i < n; i++) q->x[i] -= taken * w->step[i];
    return evaluate(q);
}

/* The inner problem, until the gradient is below `wanted` or rounding lets it fall no further. */
static status minimise(inner *q, newton *w, double wanted, course *how)
{
    enum { MOST_STEPS = 50 };
    status s = evaluate(q);
    bool moved = true;
    for (int step = 0; !s && moved && q->norm > wanted && step < MOST_STEPS; step++) {
        choose_side(q, w);
        make_preconditioner(q, w);
        solve_newton(q, w, fmax(wanted / 2, q->norm * fmin(0.1, q->norm)));
        s = search_line(q, w, &moved);
        how->iterations++;
    }
    return s;
}

/* Whether S proves that the entries held cannot be met: <S, X - f I> < 0 for each X that has them.
 */
static bool proves_clash(const inner *q, const double *s)
{
    size_t d = q->d;
    double most = 0, trace = 0;
    for (size_t i = 0; i < d; i++) {
        trace += s[i * d + i];
        for (size_t j = 0; j < d; j++)
            most += q->free[i * d + j] ? fabs(s[i * d + j]) : s[i * d + j] * q->x[i * d + j];
    }
    return most - q->floor * trace < -1e-12 * (double)d * trace;
}

/* S becomes M+. Returns how far X - f I can be from having no negative eigenvalue. */
static double take_multiplier(inner *q)
{
    double sum = 0;
    for (size_t i = 0; i < q->d * q->d; i++) {
        double change = (q->positive_part[i] - q->multiplier[i]) / q->penalty;
        sum += change * change;
        q->multiplier[i] = q->positive_part[i];
    }
    return sqrt(sum);
}

/* The outer iteration. The penalty grows until each step brings X much closer; a larger one would
 * cost conjugate gradients and digits. */
static status multiply(inner *q, newton *w, bool *clash, course *how)
{
    enum { MOST_ROUNDS = 40 };
    const double LARGEST_PENALTY = 1e6, GROWTH = 4, MUCH_CLOSER = 0.05;
    double d = (double)q->d, wanted = 1e-2, before = INFINITY;
    for (int round = 0; round < MOST_ROUNDS; round++) {
        double reachable = d * fmax(1e-12, 4e-15 * q->penalty);
        status s = minimise(q, w, fmax(wanted, reachable), how);
        if (s) return s;
        double gap = take_multiplier(q);
        *clash = proves_clash(q, q->multiplier);
        if (*clash) return OUT_OF_DOMAIN;
        if (gap <= 2e-14 * d && q->norm <= 2 * reachable) return OK;
        wanted = fmin(wanted / 2, gap / 10);
        if (gap > fmax(MUCH_CLOSER * before, 1e-10))
            q->penalty = fmin(LARGEST_PENALTY, q->penalty * GROWTH);
        before = gap;
    }
    return before <= 1e-12 * d && q->norm <= 1e-9 * d ? OK : NOT_SETTLED;
}

static bool acceptable(const double *firmness, size_t d)
{
    for (size_t i = 0; i < d; i++)
        for (size_t j = i + 1; j < d; j++)
            if (!(firmness[i * d + j] > 0)) return false;
    return true;
}

/* The geometric mean of what is not held; 1 when everything is. */
static double typical_firmness(const double *firmness, size_t d)
{
    double sum = 0, n = 0;
    for (size_t i = 0; i < d; i++)
        for (size_t j = i + 1; j < d; j++)
            if (isfinite(firmness[i * d + j])) {
                sum += log(firmness[i * d + j]);
                n++;
            }
    return n > 0 ? exp(sum / n) : 1;
}

static void fill(inner *q, const double *given, const double *firmness, double typical)
{
    size_t d = q->d;
    for (size_t i = 0; i < d; i++) {
        q->given[i * d + i] = q->x[i * d + i] = 1;
        for (size_t j = i + 1; j < d; j++) {
            size_t here = i * d + j, mirrored = j * d + i;
            q->free[here] = q->free[mirrored] = isfinite(firmness[here]);
            q->weight[here] = q->weight[mirrored] = q->free[here] ? firmness[here] / typical : 0;
            q->given[here] = q->given[mirrored] = q->x[here] = q->x[mirrored] = given[here];
        }
    }
}

/* X, mixed with I as far as rounding makes necessary, which entries held do not allow. */
static status finish(const inner *q, double *nearest, pool *p)
{
    size_t d = q->d;
    double lowest;
    status s = lowest_eigenvalue(q->x, d, &lowest, p);
    if (s) return s;
    bool held = false;
    for (size_t i = 0; i < d * d; i++) held = held || (!q->free[i] && i % (d + 1));
    double short_of = fmax(0, q->floor - lowest);
    if (held && short_of > 1e-12 * (double)d) return NOT_SETTLED;
    double kept = held ? 1 : 1 - short_of / (1 - lowest);
    for (size_t i = 0; i < d * d; i++) {
        bool free = q->free[i];
        nearest[i] = free ? fmin(1, fmax(-1, kept * q->x[i])) : q->given[i];
    }
    return OK;
}

static status by_multipliers(const double *given, const double *firmness, size_t d, double floor,
                             double *nearest, double *proof, bool *clash, course *how, pool *p)
{
    inner q;
    newton w;
    status s = make_inner(&q, d, p);
    if (!s) s = make_newton(&w, d, p);
    if (s) return s;
    double typical = typical_firmness(firmness, d);
    fill(&q, given, firmness, typical);
    q.floor = floor;
    q.penalty = 1;
    s = multiply(&q, &w, clash, how);
    how->decompositions = q.decompositions;
    for (size_t i = 0; proof && i < d * d; i++) proof[i] = typical * q.multiplier[i];
    return s ? s : finish(&q, nearest, p);
}

status nearest_firm(const double *given, const double *firmness, size_t d, double floor,
                    double *nearest, double *proof, bool *clash, course *how, pool *p)
{
    bool unasked_clash, *told_clash = clash ? clash : &unasked_clash, fine = false;
    course unasked, *told = how ? how : &unasked;
    *told = (course){ 0, 0 };
    *told_clash = false;
    if (!(floor >= 0 && floor < 1) || d == 0 || !acceptable(firmness, d)) return OUT_OF_DOMAIN;
    status s = unit_diagonal(given, d) ? matrix_feasible(given, d, floor, &fine, p) : OK;
    if (s) return s;
    if (fine) {
        memmove(nearest, given, d * d * sizeof *nearest);
        if (proof) memset(proof, 0, d * d * sizeof *proof);
        return OK;
    }
    s = clash_in_groups(given, firmness, d, floor, told_clash, proof, p);
    if (s || *told_clash) return s ? s : OUT_OF_DOMAIN;
    struct block *mark = p->last;
    s = by_multipliers(given, firmness, d, floor, nearest, proof, told_clash, told, p);
    pool_back_to(p, mark);
    return s;
}

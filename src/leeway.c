/* leeway.c - how far entries of a correlation matrix can go, and triples that have gone too far.
 *
 * Method: with K the correlations among the other lines, a and b those of the two lines with them,
 * the matrix has no negative eigenvalue exactly when K has none, a and b are in the range of K, and
 * the Schur complement
 *     1 - a' K^-1 a        x - a' K^-1 b
 *     x - a' K^-1 b        1 - b' K^-1 b
 * has none (Horn & Johnson, Matrix Analysis, 2nd edition 2013, theorem 7.7.9), which bounds x. K^-1
 * is taken from the eigenvalues of K, without those that are zero to rounding. Where K is close to
 * singular, so that its Schur complement cannot tell, the eigenvalues of K with a, and of K with b,
 * say whether any x will do. The lowest eigenvalue of a triple is the lowest root of its
 * characteristic cubic, by cosines (Viete). The triples that clash most are held
 * in a heap, so that holding many of them costs little.
 * Special cases: pairs are free in [-1;1]. A triple needs no decomposition: K is 1.
 * Accuracy: 1e-15 for triples and about 1e-15 divided by the lowest eigenvalue of K else.
 */
#include "leeway.h"
#include "correlation.h"
#include "linear.h"

#include <math.h>
#include <stdlib.h>

/* 1 - a' K^-1 a, 1 - b' K^-1 b and a' K^-1 b */
typedef struct {
    double rest_a, rest_b, across;
    bool in_range;
} complement;

static complement decomposed(const double *values, const double *vectors, const double *a,
                             const double *b, size_t n)
{
    complement c = { 1, 1, 0, true };
    double zero = 4e-16 * (double)n * fmax(1, values[n - 1]), nothing = 1e-7 * (double)n;
    for (size_t k = 0; k < n; k++) {
        double along_a = 0, along_b = 0;
        for (size_t i = 0; i < n; i++) {
            along_a += vectors[k * n + i] * a[i];
            along_b += vectors[k * n + i] * b[i];
        }
        if (values[k] > zero) {
            c.rest_a -= along_a * along_a / values[k];
            c.rest_b -= along_b * along_b / values[k];
            c.across += along_a * along_b / values[k];
        } else if (values[k] < -1e-12 * (double)n || fmax(fabs(along_a), fabs(along_b)) > nothing) {
            c.in_range = false;
        }
    }
    return c;
}

/* The matrix without two lines; they may be the same. */
static void strike_out(const double *matrix, size_t d, size_t one, size_t other, double *rest)
{
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++)
            if (i != one && i != other && j != one && j != other) *rest++ = matrix[i * d + j];
}

static status schur_complement(const double *matrix, size_t d, size_t row, size_t column,
                               complement *c, pool *p)
{
    size_t n = d - 2, i = 0;
    eigen_room room;
    status s = make_eigen_room(&room, n, true, p);
    if (s) return s;
    double *others = pool_take(p, n, n * sizeof *others);
    double *values = pool_take(p, 3 * n, sizeof *values);
    if (!others || !values) return NO_MEMORY;
    double *a = values + n, *b = values + 2 * n;
    strike_out(matrix, d, row, column, others);
    for (size_t from = 0; from < d; from++) {
        if (from == row || from == column) continue;
        a[i] = matrix[row * d + from];
        b[i++] = matrix[column * d + from];
    }
    s = eigen(others, values, &room);
    if (s) return s;
    *c = decomposed(values, others, a, b, n);
    return OK;
}

/* Whether some value of the entry may do: OUT_OF_DOMAIN unless the matrix is feasible without the
 * one line and without the other, as far as it may be in the whole matrix: to -1e-12 d. */
static status feasible_without_either(const double *matrix, size_t d, size_t row, size_t column,
                                      pool *p)
{
    const size_t lines[] = { row, column };
    double *rest = pool_take(p, d - 1, (d - 1) * sizeof *rest);
    bool feasible = true;
    status s = rest ? OK : NO_MEMORY;
    for (size_t k = 0; k < 2 && s == OK && feasible; k++) {
        strike_out(matrix, d, lines[k], lines[k], rest);
        s = matrix_feasible(rest, d - 1, -1e-12, &feasible, p);
    }
    return s == OK && !feasible ? OUT_OF_DOMAIN : s;
}

void third_correlation(double r_ab, double r_bc, double *low, double *high)
{
    double reach = sqrt((1 - r_ab) * (1 + r_ab) * ((1 - r_bc) * (1 + r_bc)));
    *low = fmax(-1, r_ab * r_bc - reach);
    *high = fmin(1, r_ab * r_bc + reach);
}

static bool tells(const complement *c)
{
    return c->in_range && c->rest_a >= 0 && c->rest_b >= 0;
}

static void from_complement(const complement *c, double *low, double *high)
{
    double reach = sqrt(fmax(0, c->rest_a) * fmax(0, c->rest_b));
    *low = fmin(1, fmax(-1, c->across - reach));
    *high = fmax(-1, fmin(1, c->across + reach));
}

status entry_leeway(const double *matrix, size_t d, size_t row, size_t column, double *low,
                    double *high, pool *p)
{
    if (row >= d || column >= d || row == column) return OUT_OF_DOMAIN;
    if (d == 2) {
        *low = -1;
        *high = 1;
        return OK;
    }
    if (d == 3) {
        size_t other = 3 - row - column;
        double a = matrix[row * 3 + other], b = matrix[other * 3 + column];
        if (!(fabs(a) <= 1 && fabs(b) <= 1)) return OUT_OF_DOMAIN;
        third_correlation(a, b, low, high);
        return OK;
    }
    complement c;
    struct block *mark = p->last;
    status s = schur_complement(matrix, d, row, column, &c, p);
    if (s == OK && !tells(&c)) s = feasible_without_either(matrix, d, row, column, p);
    pool_back_to(p, mark);
    if (s == OK) from_complement(&c, low, high);
    return s;
}

/* The lowest eigenvalue of three correlations. The cubic of the matrix less I has no square term.
 */
static double lowest_of_three(double a, double b, double c)
{
    double size = sqrt((a * a + b * b + c * c) / 3);
    if (size == 0) return 1;
    double turn = fmax(-1, fmin(1, a * b * c / (size * size * size)));
    return 1 + 2 * size * cos((acos(turn) + 2 * acos(-1)) / 3);
}

static bool before(const clash *a, const clash *b)
{
    if (a->lowest != b->lowest) return a->lowest < b->lowest;
    for (int k = 0; k < 2; k++)
        if (a->line[k] != b->line[k]) return a->line[k] < b->line[k];
    return a->line[2] < b->line[2];
}

static int by_weight(const void *a, const void *b)
{
    return before(a, b) ? -1 : before(b, a);
}

/* The clashes that are kept, as a heap: the mildest first, and each before both that hang on it. */
typedef struct {
    clash *of;
    size_t n, most;
} worst_clashes;

static void rise(clash *heap, size_t k, clash c)
{
    for (; k > 0 && before(&heap[(k - 1) / 2], &c); k = (k - 1) / 2) heap[k] = heap[(k - 1) / 2];
    heap[k] = c;
}

static void sink(clash *heap, size_t n, clash c)
{
    size_t k = 0;
    for (size_t child; (child = 2 * k + 1) < n; k = child) {
        if (child + 1 < n && before(&heap[child], &heap[child + 1])) child++;
        if (!before(&c, &heap[child])) break;
        heap[k] = heap[child];
    }
    heap[k] = c;
}

static void keep_if_worse(worst_clashes *w, const clash *c)
{
    if (w->n < w->most) rise(w->of, w->n++, *c);
    else if (w->n > 0 && before(c, w->of)) sink(w->of, w->n, *c);
}

status clashing_triples(const double *matrix, size_t d, size_t most, clash **found, size_t *n_found,
                        size_t *n_all, pool *p)
{
    *n_found = *n_all = 0;
    worst_clashes kept = { pool_take(p, most ? most : 1, sizeof(clash)), 0, most };
    if (!kept.of) return NO_MEMORY;
    for (size_t i = 0; i < d; i++)
        for (size_t j = i + 1; j < d; j++)
            for (size_t k = j + 1; k < d; k++) {
                double a = matrix[i * d + j], b = matrix[i * d + k], c = matrix[j * d + k];
                if (1 + 2 * a * b * c - a * a - b * b - c * c >= 0) continue;
                clash now = { { i, j, k }, lowest_of_three(a, b, c), 0, 0 };
                if (now.lowest >= -3e-12) continue;
                ++*n_all;
                third_correlation(a, b, &now.low, &now.high);
                keep_if_worse(&kept, &now);
            }
    qsort(kept.of, kept.n, sizeof *kept.of, by_weight);
    *found = kept.of;
    *n_found = kept.n;
    return OK;
}

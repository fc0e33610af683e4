/* holds.c - whether entries held can stand together.
 *
 * Method: a principal submatrix of a matrix without eigenvalues below f has none either (Cauchy's
 * interlacing). Groups are grown greedily: from a held pair that no group has yet, adding each line
 * that is held with all lines so far.
 * Special cases: a pair is a group of two, which shows entries outside [-1;1].
 * Accuracy: that of LAPACK's eigenvalues, about 1e-15.
 */
#include "holds.h"
#include "linear.h"

#include <math.h>
#include <string.h>

typedef struct {
    size_t *line, n;             /* the group */
    bool *seen;                  /* d x d: pairs that a group has had */
    double *part, *values;       /* its matrix, then its eigenvectors; its eigenvalues */
} group;

static status make_group(group *g, size_t d, pool *p)
{
    g->line = pool_take(p, d, sizeof *g->line);
    g->seen = pool_take_zeroed(p, d, d * sizeof *g->seen);
    g->part = pool_take(p, d, d * sizeof *g->part);
    g->values = pool_take(p, d, sizeof *g->values);
    return g->line && g->seen && g->part && g->values ? OK : NO_MEMORY;
}

static bool held(const double *firmness, size_t d, size_t i, size_t j)
{
    return isinf(firmness[i < j ? i * d + j : j * d + i]);
}

static void grow(group *g, const double *firmness, size_t d, size_t i, size_t j)
{
    g->n = 2;
    g->line[0] = i;
    g->line[1] = j;
    for (size_t k = 0; k < d; k++) {
        size_t fits = 0;
        while (fits < g->n && g->line[fits] != k && held(firmness, d, k, g->line[fits])) fits++;
        if (fits == g->n) g->line[g->n++] = k;
    }
    for (size_t a = 0; a < g->n; a++)
        for (size_t b = 0; b < g->n; b++) g->seen[g->line[a] * d + g->line[b]] = true;
}

static void write_proof(const group *g, size_t d, double *proof)
{
    memset(proof, 0, d * d * sizeof *proof);
    for (size_t a = 0; a < g->n; a++)
        for (size_t b = 0; b < g->n; b++)
            proof[g->line[a] * d + g->line[b]] = g->part[a] * g->part[b];
}

/* the group's eigenvalues and eigenvectors; the first eigenvector fills the first g->n places */
static status decompose(group *g, const double *given, size_t d, pool *p)
{
    for (size_t a = 0; a < g->n; a++)
        for (size_t b = 0; b < g->n; b++) {
            size_t i = g->line[a], j = g->line[b];
            g->part[a * g->n + b] = i == j ? 1 : given[i < j ? i * d + j : j * d + i];
        }
    eigen_room room;
    struct block *mark = p->last;
    status s = make_eigen_room(&room, g->n, true, p);
    if (!s) s = eigen(g->part, g->values, &room);
    pool_back_to(p, mark);
    return s;
}

status clash_in_groups(const double *given, const double *firmness, size_t d, double floor,
                       bool *clash, double *proof, pool *p)
{
    group g;
    struct block *mark = p->last;
    status s = make_group(&g, d, p);
    *clash = false;
    for (size_t i = 0; !s && !*clash && i < d; i++)
        for (size_t j = i + 1; !s && !*clash && j < d; j++) {
            if (g.seen[i * d + j] || !held(firmness, d, i, j)) continue;
            grow(&g, firmness, d, i, j);
            s = decompose(&g, given, d, p);
            *clash = !s && g.values[0] < floor - 1e-12 * (double)d;
            if (*clash && proof) write_proof(&g, d, proof);
        }
    pool_back_to(p, mark);
    return s;
}

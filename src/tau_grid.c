/* tau_grid.c - Kendall's tau of every pair of columns
 *
 * Method
 *   Each column is ranked once. Where there are columns enough to repay it and not too many
 *   rows, each column also gets its bit planes (tau_planes.h), which take n^2/128 steps a
 *   pair, of two or four words each. Beyond, pairs are counted by inversions of the shared
 *   ranks (tau.h), in O(n) steps for each of their digits.
 *
 * Special cases
 *   Columns of gaps only and columns without variation are counted like others; tau_b()
 *   says what is wrong with their pairs.
 *
 * Accuracy
 *   Both ways count exactly, so the choice changes no bit of any result. Planes are
 *   not made when they would hold more than MOST_PLANE_BYTES.
 */
#include "tau_grid.h"
#include "tau_planes.h"

enum {                       /* where planes are no longer faster, as measured */
    MOST_ROWS_PLAIN = 1600,
    MOST_ROWS_WITH_GAPS_OR_TIES = 800,
    FEWEST_PLANE_COLUMNS = 4
};

static const size_t MOST_PLANE_BYTES = 64u << 20;

struct tau_grid {
    ranking *rankings;
    struct planes *planes;       /* NULL when pairs are counted by ranks */
    struct pair_room room;
};

static bool all_plain(const ranking *r, size_t columns)
{
    for (size_t j = 0; j < columns; j++)
        if (r[j].tied_pairs || r[j].observed < r[j].rows) return false;
    return true;
}

static status rank_columns(const samples *s, struct tau_grid *g, pool *p)
{
    status made = new_rankings(s->rows, s->cols, &g->rankings, p);
    struct block *mark = p->last;
    struct rank_room *room;
    if (!made) made = new_rank_room(s->rows, &room, p);
    for (size_t j = 0; !made && j < s->cols; j++)
        rank_values(column(s, j), s->rows, &g->rankings[j], room);
    pool_back_to(p, mark);
    return made;
}

static status make_planes(const samples *s, struct tau_grid *g, pool *p)
{
    size_t plane = plane_words(s->rows);
    size_t row = (row_words(s->rows) + 7) / 8 * 8;       /* planes begin on cache lines */
    bool both = !all_plain(g->rankings, s->cols);
    size_t each = (both ? 2 : 1) * plane + row;
    g->planes = pool_take(p, s->cols, sizeof *g->planes);
    uint64_t *words = pool_take(p, s->cols * each + row, sizeof *words);
    if (!g->planes || !words) return NO_MEMORY;
    for (size_t j = 0; j < s->cols; j++) {
        uint64_t *at = words + j * each;
        g->planes[j] = (struct planes){ at + row, both ? at + row + plane : NULL, at };
        fill_planes(&g->rankings[j], &g->planes[j], words + s->cols * each);
    }
    return OK;
}

static bool planes_suit(const samples *s, const ranking *r)
{
    bool plain = all_plain(r, s->cols);
    return s->cols >= FEWEST_PLANE_COLUMNS
        && s->rows <= (plain ? MOST_ROWS_PLAIN : MOST_ROWS_WITH_GAPS_OR_TIES)
        && s->cols * plane_words(s->rows) * (plain ? 1 : 2) * sizeof(uint64_t) <= MOST_PLANE_BYTES;
}

status new_tau_grid(const samples *s, counting how, struct tau_grid **grid, pool *p)
{
    struct tau_grid *g = pool_take_zeroed(p, 1, sizeof *g);
    if (!g) return NO_MEMORY;
    status made = rank_columns(s, g, p);
    if (made) return made;
    *grid = g;
    if (how == COUNT_BY_PLANES || (how == COUNT_AS_SUITS && planes_suit(s, g->rankings)))
        return make_planes(s, g, p);
    return new_pair_room(s->rows, &g->room, p);
}

void tau_grid_counts(struct tau_grid *grid, size_t i, size_t j, struct tau_counts *c)
{
    const ranking *x = &grid->rankings[i], *y = &grid->rankings[j];
    if (grid->planes) tau_count_planes(x, &grid->planes[i], y, &grid->planes[j], c);
    else tau_count_ranked(x, y, c, &grid->room);
}

const ranking *tau_grid_ranking(const struct tau_grid *grid, size_t j)
{
    return &grid->rankings[j];
}

/* counting_tree.h - how many of those met so far have a rank below a given one
 * (Fenwick 1994). A tree for ranks 0 .. n - 1 is n + 1 numbers, all 0 to begin with.
 */
#ifndef COUNTING_TREE_H
#define COUNTING_TREE_H

#include <stddef.h>
#include <stdint.h>

static inline uint32_t tree_below(const uint32_t *tree, size_t rank)
{
    uint32_t sum = 0;
    for (size_t k = rank; k > 0; k &= k - 1) sum += tree[k];
    return sum;
}

static inline void tree_add(uint32_t *tree, size_t ranks, size_t rank)
{
    for (size_t k = rank + 1; k <= ranks; k += k & -k) tree[k]++;
}

#endif

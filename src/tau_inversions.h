/* tau_inversions.h - how many pairs of a sequence stand in the wrong order. */
#ifndef TAU_INVERSIONS_H
#define TAU_INVERSIONS_H

#include <stddef.h>
#include <stdint.h>

/* How many pairs k < l have seq[k] > seq[l], for n numbers below `bound`, n below 2^32. Both seq
 * and spare (n numbers too) are overwritten. */
uint64_t count_inversions(uint32_t *seq, size_t n, size_t bound, uint32_t *spare);

#endif

/* checksum.h - a fingerprint of the arguments of a call. */
#ifndef CHECKSUM_H
#define CHECKSUM_H

#include "report.h"

#include <stdint.h>

/* The 64-bit FNV-1a hash (Fowler, Noll & Vo) of every argument as it came: shape, numbers,
 * texts and empty cells. A 1 x 1 range counts as its single cell, arguments left out at the end
 * do not count, -0 is 0. */
uint64_t checksum_of(const value *given, size_t n);

/* the same as 16 hexadecimal digits; NULL when there is no memory */
const char *checksum_text(const value *given, size_t n, pool *p);

#endif

/* cache.h - the last results of costly functions.
 *
 * The office may ask for one result many times: a hundred cells of INDEX(f();i;1) are a hundred
 * calls. Whole inputs are compared, what is kept is bounded, and a lock guards it. A failure to
 * keep is no error.
 */
#ifndef CACHE_H
#define CACHE_H

#include "function.h"

/* Gives a copy of an earlier result of the same call, facts included. */
bool cache_finds(const function *f, const value *in, size_t n_in, value *out, report *r);

void cache_keeps(const function *f, const value *in, size_t n_in, const value *out,
                 const report *r);

/* Forgets everything. */
void cache_empty(void);

#endif

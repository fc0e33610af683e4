/* uno_types.h - the types of UNO that this add-in names, and its texts.
 *
 * Every type returned here is static: it lives as long as the office and must
 * never be released (releasing one corrupts the heap of the office).
 */
#ifndef UNO_TYPES_H
#define UNO_TYPES_H

#include "uno_c.h"
#include "../src/memory.h"

typedef typelib_TypeDescriptionReference uno_type;

uno_type *simple_type(typelib_TypeClass class);

uno_type *strings_type(void);        /* []string */
uno_type *types_type(void);          /* []type */
uno_type *bytes_type(void);          /* []byte */
uno_type *anys_type(void);           /* []any */
uno_type *any_rows_type(void);       /* [][]any */
uno_type *numbers_type(void);        /* []double */
uno_type *number_rows_type(void);    /* [][]double */

/* Whether an office text is this ASCII text. */
bool same_text(const rtl_uString *text, const char *ascii);

/* A new office text from UTF-8, to be released by the caller. A byte that is no
 * UTF-8 becomes U+FFFD. NULL when there is no memory. */
rtl_uString *office_text(const char *utf8);

/* Where converted texts are put: many to a block of the pool. Starts as { 0 }. */
struct letters {
    char *at;
    size_t left;
};

/* An office text as UTF-8 in memory of the pool. A zero or half a surrogate pair becomes
 * U+FFFD. NULL when there is no memory. */
const char *plain_text(const rtl_uString *text, struct letters *into, pool *p);

#endif

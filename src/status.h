/* status.h - how every function in src/ says what went wrong.
 *
 * Numbers come back through pointers and mean nothing unless the status is OK.
 */
#ifndef STATUS_H
#define STATUS_H

typedef enum {
    OK,
    BAD_KIND,        /* the wrong kind of thing, an unknown word, a shape that does not fit */
    OUT_OF_DOMAIN,   /* a number outside its domain, or a result too large */
    NO_VARIATION,    /* undefined because nothing varies */
    TOO_FEW,         /* too few observations */
    NOT_SETTLED,     /* an iteration did not settle */
    NO_MEMORY
} status;

#endif

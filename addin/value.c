/* value.c - the numbers that mark a gap and an error. */
#include "value.h"

#include <stdint.h>
#include <string.h>

/* Quiet NaNs with a payload of our own; the low bits of a fault hold the status. */
static const uint64_t GAP = UINT64_C(0x7ff84a5300000000), FAULT = UINT64_C(0x7ff84a5400000000);

static double from_bits(uint64_t bits)
{
    double x;
    memcpy(&x, &bits, sizeof x);
    return x;
}

static uint64_t to_bits(double x)
{
    uint64_t bits;
    memcpy(&bits, &x, sizeof bits);
    return bits;
}

double gap(void)
{
    return from_bits(GAP);
}

bool marks_gap(double x)
{
    return to_bits(x) == GAP;
}

double fault(status s)
{
    return from_bits(FAULT | (uint64_t)s);
}

status fault_in(double x)
{
    uint64_t bits = to_bits(x);
    return (bits & ~UINT64_C(0xff)) == FAULT ? (status)(bits & 0xff) : OK;
}

/* running_sum.h - a sum of very many numbers, with what rounding loses of it.
 *
 * The rounding error of each addition is found exactly and added up beside the sum (Knuth, The Art
 * of Computer Programming, vol. 2, 4.2.2, theorem B; Ogita, Rump & Oishi 2005), so that a million
 * numbers of one sign lose no more than two do.
 */
#ifndef RUNNING_SUM_H
#define RUNNING_SUM_H

/* Start from { 0 }. */
typedef struct { double sum, lost; } running_sum;

static inline void sum_add(running_sum *s, double x)
{
    double sum = s->sum + x, added = sum - s->sum;
    s->lost += (s->sum - (sum - added)) + (x - added);
    s->sum = sum;
}

static inline double sum_total(const running_sum *s)
{
    return s->sum + s->lost;
}

#endif

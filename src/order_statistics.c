/* order_statistics.c - selection and sorting of numbers.
 *
 * Method
 *   Quickselect with a three-way partition (Hoare 1961; Bentley & McIlroy 1993). In long
 *   stretches the pivot comes from a sample, a little to the far side of where the order wanted
 *   should lie, so that one pass leaves little to search (Floyd & Rivest 1975). A stretch that
 *   does not shrink as it should is heap-sorted, so that no input is slow (Musser 1997).
 *   Several orders at once: the middle one first, then those on each side of it in what is left
 *   there.
 *
 * Special cases
 *   Ties cost nothing: a stretch of equal numbers ends the search. -0 and 0 are equal.
 *
 * Accuracy
 *   Exact.
 */
#include "order_statistics.h"

#include <math.h>
#include <stdbool.h>
#include <stdlib.h>

enum { SHORT = 24, SAMPLE = 96, LONG = 1000 };

double whole_if_near(double x)
{
    double whole = round(x);
    return fabs(x - whole) < 1e-9 ? whole : x;
}

size_t order_of(size_t n, double level)
{
    double k = ceil(whole_if_near((double)n * level));
    return k < 1 ? 1 : k > (double)n ? n : (size_t)k;
}

static void swap(double *a, double *b)
{
    double t = *a;
    *a = *b;
    *b = t;
}

static double median(double a, double b, double c)
{
    if (a > b) swap(&a, &b);
    return c < a ? a : c > b ? b : c;
}

static void insertion_sort(double *x, size_t n)
{
    for (size_t i = 1; i < n; i++) {
        double moved = x[i];
        size_t j = i;
        for (; j > 0 && x[j - 1] > moved; j--) x[j] = x[j - 1];
        x[j] = moved;
    }
}

/* From a sample of evenly spaced numbers, the one beyond which the k-th (from 0) of x hardly
 * lies: above it in the lower half, below it in the upper. */
static double pivot_near(const double *x, size_t n, size_t k)
{
    double sample[SAMPLE];
    for (size_t i = 0; i < SAMPLE; i++) sample[i] = x[i * (n / SAMPLE) + i % 3];
    insertion_sort(sample, SAMPLE);
    double share = (double)k / (double)n, place = share * SAMPLE;
    double margin = 1.5 * sqrt(place * (1 - share)) + 1;
    place += share < 0.5 ? margin : -margin;
    return sample[(size_t)fmin(fmax(place, 0), SAMPLE - 1)];
}

static double pivot_for(const double *x, size_t n, size_t k)
{
    return n < LONG ? median(x[0], x[n / 2], x[n - 1]) : pivot_near(x, n, k);
}

static void sift_down(double *x, size_t root, size_t n)
{
    for (size_t child; (child = 2 * root + 1) < n; root = child) {
        if (child + 1 < n && x[child + 1] > x[child]) child++;
        if (!(x[child] > x[root])) return;
        swap(x + root, x + child);
    }
}

static void heap_sort(double *x, size_t n)
{
    for (size_t root = n / 2; root-- > 0;) sift_down(x, root, n);
    for (size_t last = n; last-- > 1;) {
        swap(x, x + last);
        sift_down(x, 0, last);
    }
}

/* Puts what is below the pivot first and what is above it last: x[*below .. *above - 1] equals
 * it. */
static void partition(double *x, size_t n, double pivot, size_t *below, size_t *above)
{
    size_t low = 0, at = 0, high = n;
    while (at < high) {
        if (x[at] < pivot) swap(x + low++, x + at++);
        else if (x[at] > pivot) swap(x + at, x + --high);
        else at++;
    }
    *below = low;
    *above = high;
}

/* One partition after another until order k (from 0) stands in its place; [*from;*to) is then the
 * stretch known to hold it, everything before being no larger and everything behind no smaller. */
static void settle(double *x, size_t n, size_t k, size_t *from, size_t *to)
{
    size_t low = 0, high = n, budget = 4;
    for (size_t m = n; m > 0; m /= 2) budget += 2;
    while (high - low > SHORT) {
        if (budget-- == 0) {
            heap_sort(x + low, high - low);
            break;
        }
        size_t below, above;
        double pivot = pivot_for(x + low, high - low, k - low);
        partition(x + low, high - low, pivot, &below, &above);
        if (k < low + below) {
            high = low + below;
        } else if (k >= low + above) {
            low += above;
        } else {
            *from = low + below;
            *to = low + above;
            return;
        }
    }
    if (high - low <= SHORT) insertion_sort(x + low, high - low);
    *from = k;
    *to = k + 1;
}

/* `skipped` numbers stand before x in the whole sample */
static void select_within(double *x, size_t n, const size_t *wanted, size_t count, size_t skipped)
{
    while (count > 0 && n > 1) {
        size_t middle = count / 2, from, to;
        settle(x, n, wanted[middle] - 1 - skipped, &from, &to);
        size_t before = middle;
        while (before > 0 && wanted[before - 1] - 1 - skipped >= from) before--;
        select_within(x, from, wanted, before, skipped);
        while (middle < count && wanted[middle] - 1 - skipped < to) middle++;
        wanted += middle;
        count -= middle;
        x += to;
        n -= to;
        skipped += to;
    }
}

void select_orders(double *x, size_t n, const size_t *wanted, size_t count)
{
    select_within(x, n, wanted, count, 0);
}

double select_order(double *x, size_t n, size_t k)
{
    select_within(x, n, &k, 1, 0);
    return x[k - 1];
}

static int compare(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

void sort_numbers(double *x, size_t n)
{
    qsort(x, n, sizeof *x, compare);
}

/* duality.c - a bound for the distance from the optimum that does not ask how x was found.
 *
 * Method: with S = firmness x (x - given) off the diagonal, any feasible Z that keeps what is held
 * has sum(Z) - sum(x) >= 2 <S, Z - x>, since the sum is convex and the diagonals agree; the
 * diagonal of S and its entries where something is held may therefore be anything. When S has no
 * eigenvalue below -e, <S, Z - floor I> >= -e trace(Z - floor I) = -e d (1 - floor), so that
 *     gap = 2 <S, x - floor I> + 2 e d (1 - floor)
 * (weak duality; Boyd & Vandenberghe 2004, chapter 5). The diagonal of S is chosen to make each row
 * of S (x - floor I) add up to 0, which is what optimality asks for: the first term then is 0.
 */
#include "duality.h"
#include "correlation.h"

#include <math.h>

static double multiplier(const double *given, const double *firmness, const double *proof,
                         const double *x, size_t at)
{
    double firm = firmness ? firmness[at] : 1;
    return isinf(firm) ? proof[at] : firm * (x[at] - given[at]);
}

status duality_gap(const double *given, const double *firmness, const double *proof,
                   const double *x, size_t d, double floor, double *gap, pool *p)
{
    double *s = pool_take(p, d, d * sizeof *s), lowest;
    if (!s) return NO_MEMORY;
    for (size_t i = 0; i < d; i++) {
        double row = 0;
        for (size_t j = 0; j < d; j++) {
            if (i == j) continue;
            s[i * d + j] = multiplier(given, firmness, proof, x, i * d + j);
            row += s[i * d + j] * x[j * d + i];
        }
        s[i * d + i] = -row / (1 - floor);
    }
    status done = lowest_eigenvalue(s, d, &lowest, p);
    if (done == OK) *gap = 2 * fmax(0, -lowest) * (double)d * (1 - floor);
    return done;
}

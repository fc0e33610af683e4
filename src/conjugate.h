/* conjugate.h - conjugate gradients for a positive definite system known by its products. */
#ifndef CONJUGATE_H
#define CONJUGATE_H

#include <stddef.h>

/* What is to be solved: A step = -gradient, for n numbers. */
typedef struct {
    void (*apply)(const void *with, const double *h, double *image);     /* image = A h */
    const void *with;
    const double *diagonal;      /* about that of A, all positive: the preconditioner */
    const double *gradient;
    size_t n;
} linear_system;

/* Leaves a step whose residual has a Euclidean norm of at most `wanted`, or the best after `most`
 * rounds. scratch is room for 3 n numbers. */
void conjugate_gradients(const linear_system *a, double wanted, size_t most, double *step,
                         double *scratch);

#endif

/* clayton_points.h - what a Clayton copula with theta >= 0 says at points. */
#ifndef CLAYTON_POINTS_H
#define CLAYTON_POINTS_H

#include "evaluate.h"

/* As archimedean_evaluator of archimedean.h, by the closed forms of this family. */
extern const struct evaluator clayton_evaluator;

/* log(u/v), relative also near 0 */
double log_ratio(double u, double v);

#endif

/* laplace.h - the Laplace transforms psi of the frailties in frailty.h, for a block of rows.
 *
 * Each turns log t, of ROWS_AT_ONCE rows, into psi(t) in its place, to about 1e-14 relative;
 * results below 1e-300 may be anything below that. The bits are the same on every machine.
 */
#ifndef LAPLACE_H
#define LAPLACE_H

/* clayton, theta > 0: (1 + t)^(-1/theta) */
void gamma_transforms(double *restrict log_t, double theta);

/* gumbel: exp(-t^(1/theta)) */
void stable_transforms(double *restrict log_t, double theta);

/* frank, theta > 0: -log(1 - (1 - exp(-theta)) exp(-t)) / theta */
void log_series_transforms(double *restrict log_t, double theta);

/* joe: 1 - (1 - exp(-t))^(1/theta) */
void sibuya_transforms(double *restrict log_t, double theta);

#endif

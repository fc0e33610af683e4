#!/usr/bin/python3
"""Writes grouped_pair.csv, grouped_points.csv and chi_square_score.csv with mpmath, 50 digits, by definition: with V
uniform and chi_j the chi-square quantile of V, columns j are t quantiles of normal numbers times sqrt(df_j/chi_j).
The variable of integration is the logarithm of chi_1, whose density is known, so that of the others is a quantile
found by bisection and the secant rule on the incomplete gamma function; every integral by mpmath's tanh-sinh rule on
pieces between 12 and more cuts where the integrand is, until 20 digits agree. u is the double nearest to what stands."""

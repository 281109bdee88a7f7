/* The elongation of a bar in long double, and how much rounding may have moved it. */
#ifndef SCT_ANALYSIS_ELONGATION_H
#define SCT_ANALYSIS_ELONGATION_H

#include <float.h>
#include <math.h>

#include "analysis/structure.h"

_Static_assert(LDBL_MANT_DIG >= 64, "residuals need a long double that is wider than double");

/** gamma(k) of long double: k u / (1 - k u), u = 2^-64 for the 64 digits that are asked for. */
static inline long double sct_gamma_long(long double k)
{
    return k * 0x1p-64L / (1.0L - k * 0x1p-64L);
}

/**
 * b'u of a bar for the unknowns u of one case. Where both joints are free along the same axes it is summed from
 * differences, so that a bar which is carried along loses nothing.
 *
 * *size  out: a number such that the error is at most gamma_long(7) size
 */
static inline long double sct_elongation(const sct_bar *bar, const long double u[], long double *size)
{
    const int half = bar->n_dof / 2;
    bool by_differences = bar->n_dof > 0 && bar->n_dof % 2 == 0;
    for (int i = 0; i < half; i++) by_differences = by_differences && bar->b[half + i] == -bar->b[i];
    long double sum = 0.0L, sizes = 0.0L;
    for (int i = 0; i < (by_differences ? half : bar->n_dof); i++) {
        const long double moved = by_differences ? u[bar->dof[half + i]] - u[bar->dof[i]] : u[bar->dof[i]];
        const long double term = moved * bar->b[by_differences ? half + i : i];
        sum += term;
        sizes += fabsl(term);
    }
    *size = sizes;
    return sum;
}

/** E A / L, three factors: error at most gamma_long(2) of it. */
static inline long double sct_axial_stiffness(const sct_bar *bar, const double A[])
{
    return (long double)bar->E * A[bar->group] / bar->L;
}
#endif

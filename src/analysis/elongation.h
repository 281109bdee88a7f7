/* The elongation of a spring in long double, and how much rounding may have moved it. */
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
 * b'u of a spring for the unknowns u of one case. Where both joints are free along the same axes the displacements are
 * summed from differences, so that a member which is carried along loses nothing.
 *
 * *size  out: a number such that the error is at most gamma_long(14) size: a difference, a product, 12 sums
 */
static inline long double sct_elongation(const sct_spring *spring, const long double u[], long double *size)
{
    const int n = spring->n_pairs;
    long double sum = 0.0L, sizes = 0.0L;
    for (int i = 0; i < n; i++) {
        const long double term = (u[spring->dof[n + i]] - u[spring->dof[i]]) * spring->b[n + i];
        sum += term;
        sizes += fabsl(term);
    }
    for (int i = 2 * n; i < spring->n_dof; i++) {
        const long double term = u[spring->dof[i]] * spring->b[i];
        sum += term;
        sizes += fabsl(term);
    }
    *size = sizes;
    return sum;
}

/** E P / L, three factors: error at most gamma_long(2) of it. */
static inline long double sct_stiffness_long(const sct_spring *spring, const sct_properties sizes[])
{
    const double P = spring->group < 0 ? 1.0 : sizes[spring->group].P[spring->property];
    return (long double)spring->E * P / spring->L;
}
#endif

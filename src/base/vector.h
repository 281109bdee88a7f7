/* Vectors of three components. */
#ifndef SCT_BASE_VECTOR_H
#define SCT_BASE_VECTOR_H

#include <math.h>
#include <stdbool.h>

static inline double sct_dot3(const double a[3], const double b[3])
{
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

static inline double sct_length3(const double a[3])
{
    return hypot(hypot(a[0], a[1]), a[2]);
}

/** d = a - b */
static inline void sct_subtract3(const double a[3], const double b[3], double d[3])
{
    for (int i = 0; i < 3; i++) d[i] = a[i] - b[i];
}

/** c = a x b; c is neither a nor b */
static inline void sct_cross3(const double a[3], const double b[3], double c[3])
{
    c[0] = a[1] * b[2] - a[2] * b[1];
    c[1] = a[2] * b[0] - a[0] * b[2];
    c[2] = a[0] * b[1] - a[1] * b[0];
}

static inline bool sct_is_zero3(const double a[3])
{
    return a[0] == 0.0 && a[1] == 0.0 && a[2] == 0.0;
}

/** a loses its part in the span of n orthonormal vectors. */
static inline void sct_project_off3(double a[3], int n, const double v[][3])
{
    for (int pass = 0; pass < 2; pass++) { /* twice is enough (Kahan; Parlett) */
        for (int k = 0; k < n; k++) {
            const double along = sct_dot3(a, v[k]);
            for (int i = 0; i < 3; i++) a[i] -= along * v[k][i];
        }
    }
}
#endif

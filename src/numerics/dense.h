/**
 * Small dense matrices: Cholesky factor and symmetric eigenvalues, for 2 to a few hundred rows, single-threaded.
 *
 * Matrices are n x n, row-major, full storage.
 */
#ifndef SCT_NUMERICS_DENSE_H
#define SCT_NUMERICS_DENSE_H

#include <stdbool.h>

/** a'b of n entries; four partial sums, so that the additions do not wait for each other. */
static inline double sct_dot(int n, const double a[], const double b[])
{
    double s0 = 0, s1 = 0, s2 = 0, s3 = 0;
    int i = 0;
    for (; i + 3 < n; i += 4) {
        s0 += a[i] * b[i];
        s1 += a[i + 1] * b[i + 1];
        s2 += a[i + 2] * b[i + 2];
        s3 += a[i + 3] * b[i + 3];
    }
    for (; i < n; ++i) s0 += a[i] * b[i];
    return (s0 + s1) + (s2 + s3);
}

/** y += t x, n entries. */
static inline void sct_axpy(int n, double t, const double x[], double y[])
{
    for (int i = 0; i < n; ++i) y[i] += t * x[i];
}

/**
 * A = L L'. Reads the lower triangle of A and overwrites it with L; the upper triangle is neither read nor written.
 * false: not positive definite to working precision (A is spoiled then).
 */
bool sct_cholesky(int n, double A[]);

/**
 * Eigenvalues and eigenvectors of a symmetric matrix: A = sum_k lambda[k] q_k q_k'.
 *
 * A       in: the matrix (both triangles). out: row k is the eigenvector q_k, of length 1
 * lambda  out, n, in no particular order
 * work    scratch, n (n + 2)
 *
 * false: no convergence (entries that are not finite); A and lambda are spoiled then.
 * Householder tridiagonalization, then implicit QL (Wilkinson and Reinsch, Linear Algebra, 1971, II/2 and II/4).
 */
bool sct_eigen(int n, double A[], double lambda[], double work[]);
#endif

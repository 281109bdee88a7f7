/* Cholesky factor and symmetric eigenvalues of small dense matrices. */
#include "numerics/dense.h"
#include <float.h>
#include <math.h>
#include <string.h>

bool sct_cholesky(int n, double A[])
{
    for (int j = 0; j < n; ++j) {
        double *L_j = A + (size_t)j * (size_t)n;
        for (int i = 0; i < j; ++i) {
            const double *L_i = A + (size_t)i * (size_t)n;
            L_j[i] = (L_j[i] - sct_dot(i, L_j, L_i)) / L_i[i];
        }
        const double pivot = L_j[j] - sct_dot(j, L_j, L_j);
        /* what is left of a diagonal entry after cancelling all its digits is noise */
        if (!(pivot > n * DBL_EPSILON * L_j[j]) || !isfinite(pivot)) return false;
        L_j[j] = sqrt(pivot);
    }
    return true;
}

/* The reflection I - beta v v' that maps x (m entries, overwritten by v) to -+|x| e_1; returns that first entry. */
static double reflect(int m, double x[], double *beta)
{
    double largest = 0;
    for (int i = 1; i < m; ++i) largest = fmax(largest, fabs(x[i]));
    *beta = 0;
    if (largest == 0) return x[0];
    largest = fmax(largest, fabs(x[0]));
    for (int i = 0; i < m; ++i) x[i] /= largest;
    const double alpha = -copysign(sqrt(sct_dot(m, x, x)), x[0]);
    *beta = 1 / (alpha * (alpha - x[0]));
    x[0] -= alpha;
    return alpha * largest;
}

/* A = Q T Q': diagonal and off-diagonal of T; Q' overwrites A. Column k of the Householder vectors is kept in row k
 * of V, so that every inner loop runs along a row. */
static void tridiagonalize(int n, double A[], double diagonal[], double off[], double V[])
{
    const size_t N = (size_t)n;
    double *beta = diagonal; /* free until the end: T's diagonal is read off A last */
    for (int k = 0; k + 2 < n; ++k) {
        const int m = n - k - 1;
        double *v = V + (size_t)k * N + k + 1, *p = off; /* off[k + 1 ...] is not yet in use */
        memcpy(v, A + (size_t)k * N + k + 1, (size_t)m * sizeof *v);
        const double first = reflect(m, v, &beta[k]);
        if (beta[k] != 0) {
            for (int i = 0; i < m; ++i) { p[k + 1 + i] = beta[k] * sct_dot(m, A + (size_t)(k + 1 + i) * N + k + 1, v); }
            const double half = 0.5 * beta[k] * sct_dot(m, p + k + 1, v);
            sct_axpy(m, -half, v, p + k + 1); /* w = p - (beta/2)(p'v) v;  A -= v w' + w v' */
            for (int i = 0; i < m; ++i) {
                double *row = A + (size_t)(k + 1 + i) * N + k + 1;
                const double v_i = v[i], w_i = p[k + 1 + i];
                for (int j = 0; j < m; ++j) row[j] -= v_i * p[k + 1 + j] + w_i * v[j];
            }
        }
        off[k] = first;
    }
    if (n > 1) off[n - 2] = A[(size_t)(n - 2) * N + (size_t)n - 1];
    off[n - 1] = 0;

    for (int k = n - 1; k >= 0; --k) { /* Q' = H_last ... H_1 H_0, built from the last: W <- W H_k */
        const double d = A[(size_t)k * N + (size_t)k];
        for (int j = k; j < n; ++j) A[(size_t)k * N + (size_t)j] = A[(size_t)j * N + (size_t)k] = j == k;
        if (k + 2 < n && beta[k] != 0) {
            const int m = n - k - 1;
            const double *v = V + (size_t)k * N + k + 1;
            for (int i = k + 1; i < n; ++i) {
                double *row = A + (size_t)i * N + k + 1;
                sct_axpy(m, -beta[k] * sct_dot(m, row, v), v, row);
            }
        }
        diagonal[k] = d;
    }
}

static void rotate(int n, double c, double s, double a[], double b[])
{
    for (int i = 0; i < n; ++i) {
        const double t = b[i];
        b[i] = s * a[i] + c * t;
        a[i] = c * a[i] - s * t;
    }
}

/* Implicit QL on T; the rotations are applied to the rows of W. */
static bool implicit_ql(int n, double d[], double e[], double W[])
{
    enum { MOST_SWEEPS = 60 };
    for (int l = 0; l < n; ++l) {
        for (int sweep = 0;; ++sweep) {
            int m = l;
            while (m + 1 < n && !(fabs(e[m]) <= DBL_EPSILON * (fabs(d[m]) + fabs(d[m + 1])))) ++m;
            if (m == l) break;
            if (sweep == MOST_SWEEPS) return false;
            double g = (d[l + 1] - d[l]) / (2 * e[l]); /* Wilkinson's shift */
            double r = hypot(g, 1);
            g = d[m] - d[l] + e[l] / (g + copysign(r, g));
            double s = 1, c = 1, p = 0;
            int i = m - 1;
            for (; i >= l; --i) {
                const double f = s * e[i], b = c * e[i];
                r = hypot(f, g);
                e[i + 1] = r;
                if (r == 0) { /* T splits here */
                    d[i + 1] -= p;
                    e[m] = 0;
                    break;
                }
                s = f / r;
                c = g / r;
                g = d[i + 1] - p;
                r = (d[i] - g) * s + 2 * c * b;
                p = s * r;
                d[i + 1] = g + p;
                g = c * r - b;
                rotate(n, c, s, W + (size_t)i * (size_t)n, W + (size_t)(i + 1) * (size_t)n);
            }
            if (r == 0 && i >= l) continue;
            d[l] -= p;
            e[l] = g;
            e[m] = 0;
        }
    }
    return true;
}

bool sct_eigen(int n, double A[], double lambda[], double work[])
{
    for (size_t i = 0; i < (size_t)n * (size_t)n; ++i) {
        if (!isfinite(A[i])) return false;
    }
    double *off = work, *V = work + 2 * (size_t)n;
    tridiagonalize(n, A, lambda, off, V);
    return implicit_ql(n, lambda, off, A);
}

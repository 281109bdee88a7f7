/**
 * Factorization of one symmetric positive definite sparse pattern with many values: symbolic work once, then
 * values -> factor -> solve; after the first factor without allocation. Two engines behind one interface, same answers:
 *   small   fixed-pattern LDL' of our own: plane trusses up to some thousand unknowns, space trusses up to some hundred
 *   sparse  SuiteSparse CHOLMOD (numerics/sparse.c is its door)
 */
#ifndef SCT_NUMERICS_FACTOR_H
#define SCT_NUMERICS_FACTOR_H

#include "scantling.h"

/* Upper triangle (diagonal included, every diagonal entry present) by compressed columns, rows ascending. */
typedef struct sct_pattern {
    int n;
    const int *column; /* n + 1 */
    const int *row;    /* column[n]; row <= its column */
} sct_pattern;

typedef struct sct_factor sct_factor;

/** Ordering and symbolic factorization. `engine` SCT_ENGINE_AUTO chooses by the work of one factorization.
 * *status: SCT_OK, SCT_NO_MEMORY or SCT_TOO_LARGE. */
sct_factor *sct_factor_new(const sct_pattern *pattern, sct_engine engine, sct_status *status);
void sct_factor_free(sct_factor *factor);
sct_engine sct_factor_engine(const sct_factor *factor);

/** Entries of L, known before any number is: one right-hand side takes about 4 operations for each. */
double sct_factor_entries(const sct_factor *factor);
/** [bytes] that the first update takes; INFINITY when L is beyond the engine's indices. */
double sct_factor_bytes(const sct_factor *factor);

/**
 * Factors the matrix with these values (pattern->column[n] of them, in the order of the pattern).
 *
 * SCT_OK; SCT_NOT_CONVEX: not positive definite or not finite, *stopped_at (may be NULL) is the unknown where it
 * stopped; SCT_NO_MEMORY, SCT_TOO_LARGE. A failed factor must not be solved with.
 */
sct_status sct_factor_update(sct_factor *factor, const double values[], int *stopped_at);

/**
 * How far the product of the factors of the latest update is from the matrix M that was factored: a proven bound of
 * || L D L' - M ||_2 (L L' where D = 1), rounding in the bound itself included.
 *
 * Row p of M is made of sums of at most t_p products, t_p the stored entries of row p of L left of the diagonal, each
 * with at most `c` roundings more for the scaling by a pivot. Then, for any order of summation,
 *
 *     |L D L' - M| <= gamma(min(t_p, t_q) + c) |L| D |L'|   entry by entry (Higham, Accuracy and Stability of Numerical
 *                                                           Algorithms, 2nd ed., lemma 8.4 and theorem 10.3)
 *     || . ||_2 <= max_p gamma(t_p + c) (|L| D |L'| e)_p     (a symmetric matrix: its largest row sum; e: all ones)
 *
 * with gamma(k) = k u / (1 - k u), u = 2^-53. Underflow is not charged: DEVELOPERS.md, "Accuracy".
 */
double sct_factor_rounding(sct_factor *factor);

/** gamma(k) with a little more for its own rounding. */
static inline double sct_gamma(double k)
{
    static const double U = 0x1p-53;
    return k * U / (1.0 - k * U) * (1.0 + 0x1p-50);
}

/** Solves for `count` right-hand sides in place: b is n x count, column-major. */
void sct_factor_solve(sct_factor *factor, int count, double b[]);
#endif

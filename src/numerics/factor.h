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

/** Solves for `count` right-hand sides in place: b is n x count, column-major. */
void sct_factor_solve(sct_factor *factor, int count, double b[]);
#endif

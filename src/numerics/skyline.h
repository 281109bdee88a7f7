/**
 * Cholesky factor of a symmetric positive definite matrix inside its envelope (skyline), in the order given: row i
 * keeps columns first[i] .. i. Simple and independent of factor.h: for checking what that gives.
 */
#ifndef SCT_NUMERICS_SKYLINE_H
#define SCT_NUMERICS_SKYLINE_H

#include <stdbool.h>
#include <stddef.h>

typedef struct sct_skyline sct_skyline;

/** Multiplications of one factorization and entries stored, to decide before anything is allocated. */
void sct_skyline_cost(int n, const int first[], double *multiplications, double *entries);

/** A matrix of zeros; NULL when out of memory. first[i] <= i. */
sct_skyline *sct_skyline_new(int n, const int first[]);
void sct_skyline_free(sct_skyline *skyline);

/** Entry (i, j) of the lower triangle, first[i] <= j <= i. */
double *sct_skyline_at(sct_skyline *skyline, int i, int j);

/** A = L L' in place; false: not positive definite, or not finite. */
bool sct_skyline_factor(sct_skyline *skyline);

/** Solves in place with the factor. */
void sct_skyline_solve(const sct_skyline *skyline, double b[]);
#endif

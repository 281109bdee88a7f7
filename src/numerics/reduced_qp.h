/**
 * The quadratic program of numerics/qp.h when it is known nearly which variables end at a bound, as from the solution
 * of a similar one. These are fixed; the rest is solved in its own space; fixed variables with a multiplier of the
 * wrong sign are set free, and so on until none is wrong. The answer is that of the whole program, because the signs
 * prove it, at the cost of a program with so many variables as are free.
 */
#ifndef SCT_NUMERICS_REDUCED_QP_H
#define SCT_NUMERICS_REDUCED_QP_H

#include "numerics/qp.h"

typedef struct sct_reduced_qp sct_reduced_qp;

/** Workspace for up to n variables and m rows; NULL when out of memory. */
sct_reduced_qp *sct_reduced_qp_new(int n, int m);
void sct_reduced_qp_free(sct_reduced_qp *reduced);

/**
 * As sct_qp_solve, with a guess and mu_bound not NULL.
 *
 * side   in: n, the guess: -1 ends at its lower bound, 1 at its upper bound, 0 may be anywhere (all 0: nothing is
 *        known). out, with SCT_OK: the same of the solution
 */
sct_status sct_reduced_qp_solve(sct_reduced_qp *reduced, const sct_qp_data *data, signed char side[], double x[],
                                double mu[], double mu_bound[]);

/** Iterations of all programs of the last solve. */
int sct_reduced_qp_iterations(const sct_reduced_qp *reduced);
#endif

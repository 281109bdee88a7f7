/**
 * Exact derivatives of displacements and spring forces with respect to the size variables z = ln A, one per sized group
 * (dq/dA = (dq/dz)/A). Self-weight, temperature, lack of fit and settlements are included.
 */
#ifndef SCT_ANALYSIS_SENSITIVITY_H
#define SCT_ANALYSIS_SENSITIVITY_H

#include "analysis/solver.h"

/** Direct: du (n_cases x n_dof x n_vars) = du/dz of every case, by n_cases * n_vars solves with the factor at hand,
 * batched by 32. SCT_OK, SCT_NO_MEMORY. */
sct_status sct_sensitivity_direct(sct_solver *solver, const sct_response *response, double *du);

/** dS (n_vars) = dS/dz of the force of one spring (of a member: 0 .. n_bars-1) in case k, from du. */
void sct_sensitivity_force(const sct_solver *solver, const sct_response *response, const double *du, int spring, int k,
                           double dS[]);

/** d (n_vars) = derivative of the displacement of a joint along `direction` in case k, from du. */
void sct_sensitivity_displacement(const sct_solver *solver, const double *du, int joint, const double direction[3],
                                  int k, double d[]);

/* A weighted sum of forces and displacements of all cases: q = sum_k ( sum_e N[k][e] wN[k][e] + sum_i u[k][i] wu[k][i]
 * ). wN n_cases x n_springs, wu n_cases x n_dof; NULL: all zero. A force in a combination is one bar with the
 * combination's factors. */
typedef struct sct_weights {
    const double *wN, *wu;
} sct_weights;

/**
 * Adjoint: dq (count x n_vars) of `count` weighted sums, n_cases solves each, batched by 32 right-hand sides.
 * SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_sensitivity_adjoint(sct_solver *solver, const sct_response *response, int count, const sct_weights q[],
                                   double *dq);

/**
 * Second derivatives: adds the Hessian of one weighted sum with respect to z to H (n_vars x n_vars, full), with weights
 * held constant. Needs du of the same response and n_cases solves (work: n_cases x n_dof, overwritten).
 */
void sct_sensitivity_curvature(sct_solver *solver, const sct_response *response, const double *du, sct_weights q,
                               double *work, double *H);
#endif

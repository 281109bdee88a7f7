/**
 * Linear-elastic analysis of one structure for many sizes: symbolic work once, then per design fill, factor, solve all
 * load cases, bar forces. No allocation after the first analysis.
 */
#ifndef SCT_ANALYSIS_SOLVER_H
#define SCT_ANALYSIS_SOLVER_H

#include "analysis/structure.h"
#include "numerics/factor.h"

/* Response of every case. u n_cases x n_dof [m, rad]; N n_cases x n_springs [N, N m]: spring forces, those of the
 * members first; u_error, N_error likewise: proven bounds of their errors, set by sct_accuracy_refine (NAN: none could
 * be proven), 0 until then. */
typedef struct sct_response {
    double *u, *N, *u_error, *N_error;
} sct_response;

typedef struct sct_solver sct_solver;

/** *status: SCT_OK, SCT_NO_MEMORY, SCT_TOO_LARGE. The solver borrows the structure. */
sct_solver *sct_solver_new(const sct_structure *st, sct_engine engine, sct_status *status);
void sct_solver_free(sct_solver *solver);

sct_status sct_response_new(const sct_structure *st, sct_response *response);
void sct_response_free(sct_response *response);

/**
 * Analyses with the areas A (n_groups, [m2], > 0): fills and factors the stiffness, solves every case, recovers
 * forces.
 *
 * SCT_OK; SCT_MECHANISM: the matrix is not positive definite (mechanism.h tells how it moves); SCT_NOT_ACCURATE: a
 * value that is not finite; SCT_NO_MEMORY.
 */
sct_status sct_solver_analyse(sct_solver *solver, const double A[], sct_response *response);

/** The same for sizes with properties of their own: sections from a list, the envelope of a ladder. (By areas alone the
 * properties are those of sct_properties_at_area.) */
sct_status sct_solver_analyse_sizes(sct_solver *solver, const sct_properties sizes[], sct_response *response);

/** Number of factorizations so far. */
int sct_solver_analyses(const sct_solver *solver);

/** Solves K x = b in place for `count` right-hand sides (n_dof x count, column-major) with the factor of the latest
 * analysis, in batches. */
void sct_solver_solve(sct_solver *solver, int count, double b[]);

/** The factor, for mechanism.c, eigenvalue.c and for asking its size: whoever updates it spoils it for sct_solver_solve
 * until the next analysis. */
sct_factor *sct_solver_factor(sct_solver *solver);

/** Areas of the latest analysis (n_groups). */
const double *sct_solver_areas(const sct_solver *solver);
/** Properties of the latest analysis (n_groups), and the stiffnesses of its springs (n_springs). */
const sct_properties *sct_solver_sizes(const sct_solver *solver);
const double *sct_solver_stiffnesses(const sct_solver *solver);
const sct_structure *sct_solver_structure(const sct_solver *solver);
/** The stiffness matrix of the latest analysis, for accuracy.c and mechanism.c: upper triangle in *pattern. */
const double *sct_solver_stiffness(const sct_solver *solver, const sct_pattern **pattern);
/** Where spring e stands in that matrix: place of (dof[i], dof[j]) for j = 0 .. n_dof-1 and, inside, i = 0 .. j. */
const int *sct_solver_places(const sct_solver *solver, int e);
#endif

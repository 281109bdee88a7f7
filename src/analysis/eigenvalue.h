/* How soft a structure is at least: a proven lower bound of the smallest eigenvalue of its scaled stiffness. */
#ifndef SCT_ANALYSIS_EIGENVALUE_H
#define SCT_ANALYSIS_EIGENVALUE_H

#include "analysis/solver.h"

/**
 * The bound holds for S K S, where K = sum over bars of E A / L b b' without any rounding and S = diag(s) are powers of
 * two that bring the diagonal into [0.5, 2].
 *
 * solver   after sct_solver_analyse. Its factor is lost: analyse again before solving
 * s        out, n_dof
 * *lambda  out: > 0, or 0 when nothing could be proven (or there are no unknowns)
 *
 * SCT_OK, SCT_NO_MEMORY. Cost: one factorization as a rule (more where the estimate was too high), three solves.
 * Source: Rump, Verification of positive definiteness, BIT 46, 2006; Higham, Accuracy and Stability of Numerical
 * Algorithms, 2nd ed., theorem 10.3. Derivation: DEVELOPERS.md, "Accuracy".
 */
sct_status sct_eigenvalue_bound(sct_solver *solver, double s[], double *lambda);
#endif

/* A proven bound on the error of every displacement and bar force of an analysis. */
#ifndef SCT_ANALYSIS_CERTIFICATE_H
#define SCT_ANALYSIS_CERTIFICATE_H

#include "analysis/solver.h"

/**
 * Fills response->u_error and response->N_error: bounds of |u - exact| and |N - exact| where exact is what the
 * structure with its numbers as they stand in sct_structure (lengths, direction cosines, loads) answers without any
 * rounding. NAN when nothing can be proven.
 *
 * solver    after an analysis; its factor is lost: analyse again before solving
 * u, step   n_cases x n_dof: the displacements are their sum, which is nowhere rounded
 * response  u, N: the numbers reported, of which the error is wanted
 *
 * SCT_OK, SCT_NO_MEMORY. Derivation: DEVELOPERS.md, "Accuracy".
 */
sct_status sct_certify(sct_solver *solver, const long double u[], const long double step[], sct_response *response);
#endif

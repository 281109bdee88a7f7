/* Ways in which a structure can move without resistance, told as joints and directions. */
#ifndef SCT_ANALYSIS_MECHANISM_H
#define SCT_ANALYSIS_MECHANISM_H

#include "analysis/solver.h"

/**
 * Looks for mechanisms before any number is shown: no support, too few or badly placed supports, parts without
 * connection or support, joints that can move or turn, also those that rounding hides (scaled smallest eigenvectors by
 * block inverse iteration; the stretch of the springs tells a mechanism from mere softness).
 *
 * SCT_OK: stable; a warning per motion (at most 6) that only springs resist which are hardly stiff beside the others
 * (below 1e-10 of half of the members': E A / L against displacements, E I / L^3 against rotations). SCT_MECHANISM:
 * issues gain one error per independent motion found (at most 6), in words such as "joint U3 can move in y", "joint U3
 * can turn about x" where the rotations are what moves. SCT_NOT_ACCURATE: too ill-conditioned to tell.
 * SCT_NO_MEMORY.
 * Borrows the solver's factor: analyse again before solving.
 * A: areas to judge with (n_groups).
 */
sct_status sct_mechanism_find(sct_solver *solver, const double A[], sct_issues *issues);
#endif

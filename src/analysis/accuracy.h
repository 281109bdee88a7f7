/* How far an analysis can be trusted: iterative refinement with residuals summed bar by bar in long double, and a
 * proven bound on what is left. */
#ifndef SCT_ANALYSIS_ACCURACY_H
#define SCT_ANALYSIS_ACCURACY_H

#include "analysis/solver.h"
#include "base/text.h"

/* Relative errors above which a result is warned about and refused (evidence: measured on random models,
 * DEVELOPERS.md). */
static const double SCT_ERROR_WARN = 1e-6, SCT_ERROR_REFUSE = 1e-3;

/**
 * Refines the response in place (two steps, up to five where the model is badly scaled), tells how much the last one
 * moved it, and proves how far it can be off: response->u_error, N_error and accuracy->bound.
 *
 * SCT_OK: *accuracy is set; issues gain a warning where the bound is above SCT_ERROR_WARN.
 * SCT_NOT_ACCURATE: estimate or bound above SCT_ERROR_REFUSE, or nothing could be proven (the bound is NAN), or the
 * refinement does not contract, or an imbalance above 1e-9 remains: issues name the stiffest and the softest member; no
 * number of the response may be shown. SCT_NO_MEMORY. The factor of the solver is lost: analyse again before solving.
 */
sct_status sct_accuracy_refine(sct_solver *solver, sct_response *response, sct_accuracy *accuracy, sct_issues *issues);

/** Adds words on the stiffest and the softest member (E A / L), for messages about lost accuracy; returns the index of
 * the stiffest. */
int sct_stiffness_words(const sct_structure *st, const double A[], sct_text *text);
#endif

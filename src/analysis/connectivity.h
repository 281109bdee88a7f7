/* Mechanisms that geometry alone shows: parts, their supports, and joints that their own members do not hold. */
#ifndef SCT_ANALYSIS_CONNECTIVITY_H
#define SCT_ANALYSIS_CONNECTIVITY_H

#include "analysis/structure.h"

/**
 * Tells parts without support, parts that their supports let shift or turn, and loose joints; each as an error (at most
 * SCT_MOTIONS_TOLD). Parts without connection that each stand alone are a warning.
 *
 * ground   out, n_dof: true for one unknown per independent motion found; held there, the structure has exactly these
 *          motions less, whatever else may still move
 * n_found  out: independent motions found; n_told out: errors written
 * SCT_OK (also with motions found), SCT_NO_MEMORY. Linear in the size of the structure.
 */
sct_status sct_connectivity_check(const sct_structure *st, bool ground[], int *n_found, int *n_told,
                                  sct_issues *issues);
#endif

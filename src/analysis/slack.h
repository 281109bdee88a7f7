/**
 * Bars that carry tension only. Where such a bar would be compressed it goes slack: its joints come nearer to one
 * another by some d >= 0 than its unstressed length, without any force. So a slack bar is one that is made shorter by
 * d, and the forces of a combination are those of all bars acting plus sum_f d_f times hidden case f (structure.h):
 *
 *     N_e = N_e(d = 0) + sum_f G_ef d_f >= 0,     d_e >= 0,     N_e d_e = 0     (e, f: bars that carry tension only)
 *
 * a linear complementarity problem in each combination; G is positive semidefinite. The d are the factors of the hidden
 * cases, so that all that sums over cases (forces, displacements, reactions, error bounds) holds with slack bars, too.
 * Cases by themselves are with all bars acting.
 */
#ifndef SCT_ANALYSIS_SLACK_H
#define SCT_ANALYSIS_SLACK_H

#include "analysis/solver.h"

typedef struct sct_slack sct_slack;

/** NULL: out of memory. Borrows the structure. */
sct_slack *sct_slack_new(const sct_structure *st);
void sct_slack_free(sct_slack *slack);

/**
 * Finds the slack bars of every combination from the response to all cases, and puts what they lack to be taut into the
 * structure's factors.
 *
 * Bars with N < 0 go slack and slack ones with d < 0 come back, all at once, for some rounds; where that does not end,
 * one or two at a time by the criss-cross rule, which visits no set twice (den Hertog, Roos and Terlaky, The linear
 * complementarity problem, sufficient matrices, and the criss-cross method, Linear Algebra and its Applications 187,
 * 1993). Forces of 1e-9 of the largest are none. Where both of two crossed bars could be slack with nothing to hold the
 * panel, and no load sways it, one is kept with no force.
 *
 * SCT_OK; SCT_MECHANISM: without its slack bars the structure does not carry a combination; SCT_NOT_ACCURATE: no
 * consistent set of slack bars was found. sct_slack_tell says which bars.
 */
sct_status sct_slack_find(sct_slack *slack, const sct_solver *solver, const sct_response *response);

/** Did the latest sct_slack_find fail, and why: adds an error, or nothing where it did not. */
bool sct_slack_failed(const sct_slack *slack);
void sct_slack_tell(const sct_slack *slack, sct_issues *issues);

/** Is tension-only bar i (structure.h: ties[i]) slack in a combination, as found last? */
bool sct_slack_is(const sct_slack *slack, int combination, int i);

/** Derivatives of the factors d of the hidden cases with respect to z = ln A while the same bars are slack; du from
 * sct_sensitivity_direct of the response of the latest sct_slack_find. */
void sct_slack_derive(sct_slack *slack, const sct_solver *solver, const sct_response *response, const double *du);

/** dd/dz (n_vars) of tension-only bar i in a combination; NULL: it is taut there. */
const double *sct_slack_change(const sct_slack *slack, int combination, int i);

/**
 * For a quantity q whose values in the hidden cases are q (n_ties, read where the bar is slack): the weights by which
 * the forces N of the slack bars join it, lambda (n_ties, 0 for taut ones), so that q + sum lambda_e N_e does not
 * change with the d. As N stays 0, its derivative at fixed d is the whole one of q:
 *
 *     q' = (q + sum lambda N)'      H = H of (q + sum lambda N) + sum_f (r_f d_f'^T + d_f' r_f^T)
 *
 * with H the second derivatives and r_f the derivative of (q + sum lambda N) in hidden case f.
 */
void sct_slack_weights(sct_slack *slack, int combination, const double q[], double lambda[]);
#endif

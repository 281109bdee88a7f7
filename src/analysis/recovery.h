/* From the cases to what is reported: combinations, joint displacements, reactions. Sums only, never new solves. */
#ifndef SCT_ANALYSIS_RECOVERY_H
#define SCT_ANALYSIS_RECOVERY_H

#include "analysis/solver.h"

/** N (n_bars) of one combination = sum of factor * case. */
void sct_combine_forces(const sct_structure *st, const sct_response *response, int combination, double *N);

/** S (n_springs) likewise: all spring forces. */
void sct_combine_springs(const sct_structure *st, const sct_response *response, int combination, double *S);

/** u (n_joints x 3) of one combination in the model's axes, settlements included. */
void sct_combine_displacements(const sct_structure *st, const sct_response *response, int combination, double *u);

/** Displacement of one joint in one combination. */
void sct_joint_moved(const sct_structure *st, const sct_response *response, int combination, int joint, double d[3]);

/** Likewise the rotations of the joints. */
void sct_combine_rotations(const sct_structure *st, const sct_response *response, int combination, double *theta);

/** load (n_joints x 6: forces and moments in the model's axes) of one combination: loads at joints, what loads on
 * members put on them, and self-weight with the areas A. */
void sct_combine_loads(const sct_structure *st, const double A[], int combination, double *load);

/** reaction (n_joints x 6) that the supports give, elastic ones included: what balances spring forces S (n_springs) and
 * loads at each joint with a support; 0 elsewhere. */
void sct_reactions(const sct_structure *st, const double S[], const double load[], double *reaction);

/** Proven bounds of the errors of sct_combine_forces for one spring, and of a joint's displacement along a direction;
 * NAN where the analysis is not certified. Only after sct_accuracy_refine. */
double sct_combined_force_error(const sct_structure *st, const sct_response *response, int combination, int spring);
double sct_combined_displacement_error(const sct_structure *st, const sct_response *response, int combination,
                                       int joint, const double direction[3]);
#endif

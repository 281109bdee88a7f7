/**
 * The same structure with its beams divided into pieces, for what depends on the shape between joints: buckling and
 * vibration. It is built as a model of its own and numbered as any other, so supports, releases, sprung ends and sizes
 * are those of the structure it comes from; it carries no loads, because the forces of the structure itself are exact.
 *
 * A pin-ended bar stays one piece and straight: its own buckling is the check of the member. So does a beam whose group
 * does not state the second moment of area of both planes of bending (it keeps one cubic). A beam that is pinned at
 * both ends in one plane only bends in that plane as a simple beam between its joints. Restraints between joints that
 * only an effective length tells are not known here.
 */
#ifndef SCT_ANALYSIS_FINE_H
#define SCT_ANALYSIS_FINE_H

#include "analysis/solver.h"

/* Pieces of a beam for what is reported: cubic pieces find the buckling load of a column too large by 0.003 % (simple
 * ends) to 0.05 % (both ends fixed); frequencies by less. Two find them too large by 0.75 % (simple ends) to 2.6 % (one
 * end fixed), sway by 0.05 % and less: enough for the steps of a search, in a fourth of the time. */
enum { SCT_PIECES = 8, SCT_PIECES_FEW = 2 };

typedef struct sct_fine sct_fine;

/** Divides every beam of the structure, which is borrowed, into `pieces` >= 1. *status: SCT_OK, SCT_NO_MEMORY,
 * SCT_TOO_LARGE; SCT_BAD_INPUT where the pieces are too short for the size of the model. */
sct_fine *sct_fine_new(const sct_structure *coarse, int pieces, sct_engine engine, sct_status *status);
void sct_fine_free(sct_fine *fine);

/** Takes sizes (n_groups) over and factors the stiffness, nothing left out. As sct_solver_analyse_sizes. */
sct_status sct_fine_update(sct_fine *fine, const sct_properties sizes[]);

/** Leaves bars that carry tension only (flags, n_bars of the structure; NULL: none) out of the stiffness until the next
 * call or update: slack ones. */
void sct_fine_leave_out(sct_fine *fine, const bool left_out[]);

/** The stiffness with the latest sizes, without what is left out: upper triangle in *pattern. */
const double *sct_fine_stiffness(const sct_fine *fine, const sct_pattern **pattern);

/** The factor of the stiffness with the latest sizes. *status as that of sct_factor_update. NULL unless SCT_OK. */
sct_factor *sct_fine_factor(sct_fine *fine, sct_status *status);
/** Factors other values on the pattern of the stiffness; sct_fine_factor brings the stiffness back when asked. */
sct_status sct_fine_factor_other(sct_fine *fine, const double values[]);
/** The factor as it is. */
sct_factor *sct_fine_factor_now(sct_fine *fine);

/** The divided structure: its first n_joints joints are those of the structure, its bars the pieces, its groups,
 * variables and sizes the same. */
const sct_structure *sct_fine_structure(const sct_fine *fine);
const sct_structure *sct_fine_coarse(const sct_fine *fine);
/** Its solver with the latest sizes, to read from. */
const sct_solver *sct_fine_solver(const sct_fine *fine);

/** Pieces of a member: bars *first .. *first + (value) - 1 of the divided structure, in order, of equal length. */
int sct_fine_pieces(const sct_fine *fine, int member, int *first);

/** The joint at the start of piece k of a member; k = its number of pieces: the end of the last. */
int sct_fine_joint(const sct_fine *fine, int member, int k);

/** Displacements of all joints of the divided structure (n_joints x 3, model's axes) in a mode x, scaled so that the
 * largest component is 1. */
void sct_fine_shape(const sct_fine *fine, const double x[], double shape[]);

/** D (n_vars) = x'K'y with respect to z = ln A of each variable. */
void sct_fine_stiffness_derivative(const sct_fine *fine, const double x[], const double y[], double D[]);
#endif

/* The steps in which structure.c builds a structure, one file each. Only for these files. */
#ifndef SCT_ANALYSIS_STRUCTURE_PARTS_H
#define SCT_ANALYSIS_STRUCTURE_PARTS_H

#include "analysis/structure.h"

/* Relative: part of a vector outside the directions it may have. */
static const double SCT_TOL_DIRECTION = 1e-9;

/* How the elongation of a spring of a member follows from what its two joints do: move . (u_to - u_from) +
 * turn[0] . theta_from + turn[1] . theta_to + the turns of its own sprung ends. */
typedef struct sct_mode_shape {
    double move[3];
    double turn[2][3];
    int end_dof[2]; /* -1: none */
    double end_b[2];
} sct_mode_shape;
sct_mode_shape sct_mode_shape_of(const sct_structure *st, const sct_spring *spring);

/** The axis of rotation r (SCT_IN_PLANE, SCT_OUT_OF_PLANE, SCT_TWIST) of a member's ends. */
void sct_turn_axis(const sct_bar *bar, int r, double axis[3]);

/** oddities.c: members through joints, joints at one place, members side by side: warned about. `size` [m] of the
 * model, `tol` [m]. false: out of memory. */
bool sct_find_oddities(const sct_structure *st, double tol, sct_issues *issues);

/** freedoms.c: unknowns of joints and of sprung ends; `has_member` per joint. Needs the axes and hinges of members. */
void sct_number_freedoms(sct_structure *st, const bool has_member[]);

/** freedoms.c: orthonormal vectors of the span of n unit vectors; returns how many. */
int sct_span_of(int n, const double v[][3], double span[3][3]);

/** springs.c: lists the springs of all members and supports, with their unknowns. SCT_OK, SCT_NO_MEMORY, SCT_BAD_INPUT
 * with issues. */
sct_status sct_list_springs(sct_structure *st, sct_issues *issues);

/** springs.c: what loads on the ends of a member (3 forces, 3 moments each, in the model's axes) put on its unknowns:
 * on[i] on bar->dof[i]. `end` loses what acts on sprung ends: the rest acts on the joints. */
void sct_project_ends(const sct_structure *st, const sct_bar *bar, double end[2][6], double on[]);

enum { SCT_MOST_BAR_DOF = 18 };

/** actions.c: the loads of all cases. */
sct_status sct_add_actions(sct_structure *st, const bool has_member[], bool warned[], sct_issues *issues);
#endif

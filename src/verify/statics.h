/**
 * A second analysis of a model, made only to disagree with the first: member by member from the model itself, with
 * other unknowns (every joint keeps all directions and, in frames, all rotations; supports are projections), other
 * elements, another matrix and another solver, refined in long double. It shares no code with src/analysis;
 * tests/cli_layers.sh holds that.
 */
#ifndef SCT_VERIFY_STATICS_H
#define SCT_VERIFY_STATICS_H

#include "verify/supports.h"

/* What rounding in the direction cosines may do in one case to any displacement, rotation, force along a member, and
 * to any force or moment at the end of a beam. */
typedef struct sct_shaky {
    double u, turn, N, end[2];
} sct_shaky;

typedef struct sct_statics {
    bool has_turns;               /* some joint turns: a frame */
    double *u, *turn;             /* [m], [rad] n_cases x n_joints x 3 */
    double *N;                    /* [N] n_cases x n_members: the mean along the member */
    double *load;                 /* [N] n_cases x n_joints x 3, self-weight and what loads on members give included */
    double *moment_load;          /* [N m] likewise; of a truss NULL, as turn */
    double *given, *moment_given; /* the loads at joints themselves, with own weight of bars; NULL without elements */
    sct_shaky *shaky;             /* n_cases */
    double error;                 /* size of the last refinement, relative to the largest of its case */
    sct_supports supports;
    /* beams, and bars that are loaded between their joints */
    int n_elements, *element_of; /* n_members; -1: none */
    sct_element *elements;
    sct_element_load *element_loads;
    double (*end)[12]; /* n_cases x n_elements: forces and moments that hold the ends, see element.h */
} sct_statics;

/**
 * Analyses every case with the sections (n_groups), without the stiffness of the members left out (n_members; NULL:
 * none). Their own weight stays.
 *
 * SCT_OK; SCT_SELF_CHECK: the matrix has no factor; SCT_NO_MEMORY, SCT_TOO_LARGE. Free *statics in every case.
 */
sct_status sct_statics_solve(const sct_model *model, const sct_verify_section sections[], const bool left_out[],
                             sct_statics *statics);
void sct_statics_free(sct_statics *statics);
#endif

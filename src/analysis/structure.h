/**
 * The structure that is analysed: joints and bars with numbers, directions and lengths, and only the degrees of freedom
 * that exist. Built once from a model; constant afterwards.
 *
 * Signs: bar force tension positive; joint forces and displacements in the model's axes.
 * Unknowns: each joint has the part of space that its supports leave free, spanned by orthonormal `basis` vectors; a
 * joint without support has x, y (, z) themselves. Joints without members have no unknowns.
 */
#ifndef SCT_ANALYSIS_STRUCTURE_H
#define SCT_ANALYSIS_STRUCTURE_H

#include "model/model.h"

static const double SCT_GRAVITY =
    9.80665; /* [m/s2] standard value, ISO 80000-3; downwards: -y in the plane, -z in space */

typedef struct sct_bar {
    int from, to, group;
    double L;      /* [m] */
    double dir[3]; /* unit vector from `from` to `to` */
    double E, density, expansion;
    /* elongation = sum_i b[i] u[dof[i]] + (prescribed part): unknowns of both joints, n_dof of them (0 to 6) */
    int n_dof, dof[6];
    double b[6];
    double half_weight; /* [N/m2] weight per unit area that goes to each of its joints: density g L / 2 */
    double w[6];        /* [N/m2] the same on its unknowns, downwards (unit factor) */
} sct_bar;

typedef struct sct_structure {
    const sct_model *model; /* borrowed */
    int dim;                /* 2 or 3 */
    int n_joints, n_bars, n_groups, n_cases, n_combinations;
    int n_dof;         /* unknowns */
    int n_vars;        /* groups that are sized */
    int *var_of_group; /* n_groups: 0 .. n_vars-1, or -1 for a held group */
    int *group_of_var; /* n_vars */
    sct_bar *bars;
    int *first_dof;        /* n_joints: its first unknown; its unknowns are consecutive */
    int *n_free;           /* n_joints: 0 .. dim */
    double (*basis)[3][3]; /* n_joints: basis[j][i] is the direction of unknown first_dof[j] + i; orthonormal */
    /* loads, per case */
    double *f;       /* [N]  n_cases x n_dof: joint loads on the unknowns */
    double *stretch; /* [m]  n_cases x n_bars: prescribed part of the elongation (settlements) minus the free
                      * elongation (temperature, lack of fit): N = E A / L (b'u + stretch) */
    double *settled; /* [m]  n_cases x n_joints x 3 prescribed displacement of held directions */
} sct_structure;

/**
 * Numbers and checks the model: bars of no length, members through one place, settlement in a free direction, loads at
 * joints without members (error), joints without members and two members between the same joints (warning), ...
 *
 * SCT_OK; SCT_BAD_INPUT, SCT_NO_MEMORY, SCT_TOO_LARGE with issues (not NULL). The structure borrows the model.
 */
sct_status sct_structure_build(const sct_model *model, sct_structure **structure, sct_issues *issues);
void sct_structure_free(sct_structure *structure);

/** weight [N] (n_dof): own weight of all bars with the areas A (n_groups) on the unknowns, unit factor. The load of
 * case k on the unknowns is f[k] + model->cases[k].self_weight * weight. */
void sct_structure_weight(const sct_structure *st, const double A[], double weight[]);

/** Displacement of a joint in the model's axes, from the unknowns of one case or combination plus its settlement
 * (settled: n_joints x 3 of the case, or NULL). */
void sct_joint_displacement(const sct_structure *st, const double u[], const double *settled, int joint, double d[3]);
#endif

/**
 * A second analysis of a model, made only to disagree with the first: member by member from the model itself, with
 * other unknowns (every joint keeps all directions, supports are projections), another matrix and another solver,
 * refined in long double. It shares no code with src/analysis; tests/cli_layers.sh holds that.
 */
#ifndef SCT_VERIFY_STATICS_H
#define SCT_VERIFY_STATICS_H

#include "model/model.h"

typedef struct sct_statics {
    double *u;                 /* [m] n_cases x n_joints x 3 */
    double *N;                 /* [N] n_cases x n_members */
    double *load;              /* [N] n_cases x n_joints x 3, self-weight included */
    double *u_shaky, *N_shaky; /* n_cases: what rounding in the direction cosines may do to any displacement or force */
    double error;              /* size of the last refinement, relative to the largest of its case */
    double (*held)[3][3];      /* n_joints: projects onto the directions that the support holds */
} sct_statics;

/**
 * Analyses every case with the areas A (n_groups).
 *
 * SCT_OK; SCT_SELF_CHECK: the matrix has no factor; SCT_NO_MEMORY, SCT_TOO_LARGE. Free *statics in every case.
 */
sct_status sct_statics_solve(const sct_model *model, const double A[], sct_statics *statics);
void sct_statics_free(sct_statics *statics);
#endif

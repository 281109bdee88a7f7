/* The stiffness matrix of the second path: blocks of `size` unknowns per joint in the joints' order, factored within
 * its envelope, or by CHOLMOD where that would take long. */
#ifndef SCT_VERIFY_MATRIX_H
#define SCT_VERIFY_MATRIX_H

#include "model/model.h"

typedef struct sct_matrix sct_matrix;

/** Zeros. *status: SCT_OK, SCT_NO_MEMORY, SCT_TOO_LARGE. */
sct_matrix *sct_matrix_new(const sct_model *model, int size, sct_status *status);
void sct_matrix_free(sct_matrix *matrix);

/** Adds to entry (i, j), i >= j: unknowns of one joint, or of two joints that a member ties. */
void sct_matrix_add(sct_matrix *matrix, int i, int j, double value);

/** SCT_OK; SCT_SELF_CHECK: no factor; SCT_NO_MEMORY, SCT_TOO_LARGE. */
sct_status sct_matrix_factor(sct_matrix *matrix);

/** Solves in place with the factor. */
void sct_matrix_solve(sct_matrix *matrix, double b[]);
#endif

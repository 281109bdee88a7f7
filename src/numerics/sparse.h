/* Sparse Cholesky of one pattern with many values: the door to SuiteSparse CHOLMOD. */
#ifndef SCT_NUMERICS_SPARSE_H
#define SCT_NUMERICS_SPARSE_H

#include "numerics/factor.h"

typedef struct sct_sparse sct_sparse;

/** Symbolic work. *status: SCT_OK, SCT_NO_MEMORY, SCT_TOO_LARGE (beyond what 32-bit indices hold). pattern->n >= 1. */
sct_sparse *sct_sparse_new(const sct_pattern *pattern, sct_status *status);
void sct_sparse_free(sct_sparse *sparse);

/** Entries of L. */
double sct_sparse_entries(const sct_sparse *sparse);

/** As sct_factor_update; SCT_TOO_LARGE when L has more entries than 32-bit indices reach. */
sct_status sct_sparse_update(sct_sparse *sparse, const double values[], int *stopped_at);

/** As sct_factor_rounding. */
double sct_sparse_rounding(sct_sparse *sparse);

/** As sct_factor_solve. */
void sct_sparse_solve(sct_sparse *sparse, int count, double b[]);
#endif

/**
 * Convex quadratic programs by the dual active set method of Goldfarb and Idnani (Mathematical Programming 27, 1983).
 *
 *     minimise   a'x + 1/2 x'G x
 *     subject to rows_i'x  = b_i   for i < m_eq
 *                rows_i'x <= b_i   for m_eq <= i < m
 *                lower <= x <= upper
 *
 * G symmetric positive definite, dense. Bounds are kept as one-entry normals, not as rows.
 */
#ifndef SCT_NUMERICS_QP_H
#define SCT_NUMERICS_QP_H

#include "scantling.h"

typedef struct sct_qp sct_qp; /* the workspace: no allocation while solving */

/** Workspace for up to n variables and m rows; NULL when out of memory. */
sct_qp *sct_qp_new(int n, int m);
void sct_qp_free(sct_qp *qp);

/* One problem. All arrays are borrowed. Rows are dense, row-major, `stride` doubles apart (stride >= n). */
typedef struct sct_qp_data {
    int n, m, m_eq, stride;
    const double *G;             /* n x n, full storage */
    const double *a;             /* n */
    const double *rows, *b;      /* m x n, m */
    const double *lower, *upper; /* n each; NULL: no bounds; -INFINITY and INFINITY allowed */
} sct_qp_data;

/**
 * Solves one problem.
 *
 * x          out, n
 * mu         out, m: multipliers of the rows, so that G x + a + rows' mu + mu_bound = 0;
 *            >= 0 for inequalities, either sign for equalities
 * mu_bound   out, n: > 0 at an upper bound, < 0 at a lower bound, else 0 (NULL: not wanted)
 *
 * SCT_OK; SCT_INFEASIBLE: no x keeps all rows and bounds; SCT_NOT_CONVEX: G has no Cholesky factor;
 * SCT_NOT_CONVERGED: cycling through rounding, stopped by an iteration limit. Outputs are set only with SCT_OK.
 */
sct_status sct_qp_solve(sct_qp *qp, const sct_qp_data *data, double x[], double mu[], double mu_bound[]);

/** Iterations (constraints added or dropped) of the last solve. */
int sct_qp_iterations(const sct_qp *qp);
#endif

/**
 * The lowest modes of a divided structure: K x = lambda B x with B a sum of squares. Buckling: B = -K_geo, lambda the
 * critical load factor. Vibration: B = mass, lambda = omega^2.
 */
#ifndef SCT_ANALYSIS_MODES_H
#define SCT_ANALYSIS_MODES_H

#include "analysis/fine.h"
#include "analysis/squares.h"

typedef struct sct_modes {
    int n;                /* found, 0 .. wanted: as many positive lambda as there seem to be */
    const double *lambda; /* n, ascending */
    const double *error;  /* n: an exact eigenvalue lies in [lambda / (1 + error), lambda / (1 - error)]; of the divided
                           * structure, rounding apart. error as in numerics/subspace.h; lambda itself is better */
    const double *X;      /* n x n_dof of the divided structure, one after the other: X'K X = I, X'B X = 1/lambda */
    double none_below;    /* proven (a Cholesky factor exists): no eigenvalue lies in (0, none_below]; 0: not shown */
    int factors, blocks;  /* work: factorizations, multiplications of a block */
} sct_modes;

/* How to look for them. */
typedef enum sct_mode_search {
    SCT_MODES_COLD,
    SCT_MODES_WARM,  /* from the vectors of the finder's run before: for small steps of the sizes, a third of the work;
                      * what is reported in the end should come from one of the others */
    SCT_MODES_PROVEN /* cold, and shows that no eigenvalue lies below 0.999 of the first: two factorizations more */
} sct_mode_search;

typedef struct sct_mode_finder sct_mode_finder;

/** Borrows both; `wanted` modes, >= 1; eigenvalues beyond `largest` > 0 are none. *status: SCT_OK, SCT_NO_MEMORY. */
sct_mode_finder *sct_mode_finder_new(sct_fine *fine, sct_squares *B, int wanted, double largest, sct_status *status);
void sct_mode_finder_free(sct_mode_finder *finder);

/**
 * Finds the lowest modes with the coefficients of B as they are and the latest sizes of the divided structure. *modes
 * points into the finder until its next run. Allocates nothing.
 *
 * SCT_OK: errors within 1e-8, or as small as rounding lets them become beside eigenvalues of the other sign (a shift is
 * tried where the first has more than 1e-6); SCT_NOT_CONVERGED: estimates, their errors hold, or the first could not be
 * proven; SCT_MECHANISM, SCT_NOT_ACCURATE, SCT_NO_MEMORY.
 */
sct_status sct_mode_finder_run(sct_mode_finder *finder, sct_mode_search how, sct_modes *modes);

/** How many modes from mode i on are equal to it within the relative distance `apart` (a cluster; 1: a simple one). The
 * vectors of a cluster are any orthonormal ones of their space, and ln lambda has derivatives along directions only:
 * the eigenvalues of the matrix of derivatives of the pairs within the cluster. */
int sct_modes_cluster(const sct_modes *modes, int i, double apart);
#endif

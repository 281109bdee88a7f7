/**
 * The lowest positive eigenvalues of  K x = lambda B x:  K symmetric positive definite and factored, B symmetric and
 * known by its products only; B may be singular or indefinite. Buckling: K + lambda K_geo with B = -K_geo, lambda the
 * load factor. Vibration: B = M, lambda = omega^2.
 *
 * Method. With mu = 1/lambda the largest positive eigenvalues of K^-1 B are wanted, which is symmetric in the inner
 * product x'K y. A block of vectors is multiplied again and again by K^-1 B as in subspace iteration (Bathe and Wilson,
 * Numerical Methods in Finite Element Analysis, 1976), but all blocks are kept for the Rayleigh-Ritz step, not the last
 * one alone: a block Lanczos process with full orthogonalization. It finds the largest mu in algebraic order, so
 * negative ones of any size do not hide them. A full basis is restarted with the Ritz vectors of both ends (Wu and
 * Simon, Thick-restart Lanczos method, SIAM J. Matrix Anal. Appl. 22, 2000). No product with K is needed: F = K V is
 * carried along.
 *
 * What is guaranteed. Up to rounding, an eigenvalue lies in each interval of `error` (below). That none lies between
 * is not proven: it is made likely by random start vectors, a block of `wanted` + 2 and by going on until one pair
 * more than wanted stands still, or until nothing positive is left above it. A warm start has one random vector only
 * (and takes three blocks at least, for it to show what the old vectors do not hold): use a cold one for what is to be
 * reported.
 *
 * A shift proves, and helps. When K - sigma B with sigma > 0 has a Cholesky factor, then K - t B is positive definite
 * for all t in [0, sigma] and no eigenvalue lies in (0, sigma]. So one factorization with sigma = the load factor that
 * is required answers most questions, and one with sigma a little below lambda[0] proves that pair to be the first.
 * The factor of K - sigma B may also be handed in as K: the eigenvalues are then lambda - sigma. Where negative mu are
 * a thousand times larger than the wanted ones (a structure nearly all in tension) this is the way: without a shift
 * the search needs hundreds of blocks there; with it negative mu stay above -1/sigma.
 *
 * Derivative with respect to a parameter, K' and B' the derivatives of K and B along it:
 *     simple lambda    lambda' = x'(K' - lambda B')x / x'B x,   and x'B x = 1 / lambda for the x given here
 *     cluster lambda   the eigenvalues of the matrix lambda X'(K' - lambda B')X, X the m vectors of the cluster
 * (Haug, Choi and Komkov, Design Sensitivity Analysis of Structural Systems, 1986, chapter 1; directional for m > 1.)
 */
#ifndef SCT_NUMERICS_SUBSPACE_H
#define SCT_NUMERICS_SUBSPACE_H

#include <stdbool.h>

#include "numerics/factor.h"

/** Y = B X; both n x count, column-major, apart. */
typedef void sct_multiply(void *user, int count, const double X[], double Y[]);

typedef struct sct_subspace_settings {
    double tolerance;   /* on `error`; lambda itself is better as a rule: about error^2 / relative gap; default 1e-8 */
    int most_blocks;    /* multiplications of a block, >= 1; default 200 */
    double largest;     /* eigenvalues above are of no interest, > 0; default INFINITY */
    bool is_warm_start; /* start with the vectors of the run before (K and B may be new); default false */
} sct_subspace_settings;

typedef struct sct_eigenpairs {
    int found;            /* 0 to `wanted`: as many positive eigenvalues up to `largest` as there seem to be */
    int blocks;           /* multiplications of a block */
    int solves;           /* right-hand sides solved with K, all told */
    const double *lambda; /* found, ascending */
    const double *X;      /* n x found, column-major, X'K X = I: also within a repeated eigenvalue */
    const double *error; /* found, each < 1: some exact eigenvalue lies in [lambda / (1 + error), lambda / (1 - error)].
                          * error = sqrt(g'K^-1 g) / mu, g = B x - mu K x: an eigenvalue of a symmetric A lies within
                          * ||A v - mu v|| / ||v|| of mu (Parlett, The Symmetric Eigenvalue Problem, section 4.5), here
                          * A = L^-1 B L^-T, K = L L', v = L'x. Rounding of the solves and of B x is not in it. */
} sct_eigenpairs;

typedef struct sct_subspace sct_subspace;

/** For n unknowns and up to `wanted` >= 1 pairs. All memory: 2 n (5 wanted + 42) numbers and what does not grow with n.
 * *status: SCT_OK or SCT_NO_MEMORY (NULL is returned then). */
sct_subspace *sct_subspace_new(int n, int wanted, sct_status *status);
void sct_subspace_free(sct_subspace *subspace);

sct_subspace_settings sct_subspace_defaults(void);

/**
 * Finds the pairs. K is what the latest update of `factor` factored. Allocates nothing.
 *
 * settings may be NULL for the defaults. *pairs points into the object and lives until its next run.
 * SCT_OK: all found pairs, and the one after them, are within the tolerance (or where rounding stops them: 1e-14 of the
 * largest |mu|). A mu below 1e-12 of the largest |mu| counts as zero, and where `largest` is infinite
 * the search for more ends once it has come down to 1e-6 of the largest |mu|. SCT_NOT_CONVERGED: `most_blocks` was
 * reached (the next mu are too near for the tolerance, or K too ill-conditioned); the pairs are estimates, their
 * `error` holds. SCT_NOT_ACCURATE: a number was not finite; found = 0.
 */
sct_status sct_subspace_run(sct_subspace *subspace, sct_factor *factor, sct_multiply *multiply, void *user,
                            const sct_subspace_settings *settings, sct_eigenpairs *pairs);
#endif

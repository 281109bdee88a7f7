#include "analysis/modes.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/subspace.h"

enum {
    PATIENCE = 40,      /* blocks before a shift is tried: an easy problem takes 3 to 10 */
    MOST_BLOCKS = 300,  /* after it */
    MOST_RETREATS = 12, /* of the shift */
    MOST_PROOFS = 3
};
static const double BELOW = 0.9;        /* a shift lies so far under the first estimate, */
static const double RETREAT = 0.5;      /* and so much lower each time that an eigenvalue lies below */
static const double COARSE = 1e-6;      /* error of a result that a shift can better */
static const double JUST_BELOW = 0.999; /* what is proven: nearer, rounding might not let a factor exist */

struct sct_mode_finder {
    sct_fine *fine;
    sct_squares *B;
    sct_subspace *subspace;
    int n;
    double largest;         /* eigenvalues beyond are none */
    double *shifted;        /* values of K - sigma B */
    double *lambda, *error; /* wanted */
    double *X;              /* n x wanted */
};

sct_mode_finder *sct_mode_finder_new(sct_fine *fine, sct_squares *B, int wanted, double largest, sct_status *status)
{
    sct_mode_finder *f = calloc(1, sizeof *f);
    *status = SCT_NO_MEMORY;
    if (f == NULL) return NULL;
    const sct_pattern *pattern;
    sct_solver_stiffness(sct_fine_solver(fine), &pattern);
    const size_t n = (size_t)pattern->n, count = (size_t)wanted;
    *f = (sct_mode_finder){.fine = fine, .B = B, .n = pattern->n, .largest = largest};
    f->subspace = sct_subspace_new(pattern->n, wanted, status);
    f->shifted = calloc((size_t)pattern->column[pattern->n] + 1, sizeof *f->shifted);
    f->lambda = calloc(count, sizeof *f->lambda);
    f->error = calloc(count, sizeof *f->error);
    f->X = calloc(n * count + 1, sizeof *f->X);
    if (f->subspace != NULL && f->shifted != NULL && f->lambda != NULL && f->error != NULL && f->X != NULL) return f;
    *status = SCT_NO_MEMORY;
    sct_mode_finder_free(f);
    return NULL;
}

void sct_mode_finder_free(sct_mode_finder *f)
{
    if (f == NULL) return;
    sct_subspace_free(f->subspace);
    free(f->shifted);
    free(f->lambda);
    free(f->error);
    free(f->X);
    free(f);
}

/* Factors K - sigma B. SCT_NOT_CONVEX: an eigenvalue lies in (0, sigma]. */
static sct_status factor_shifted(sct_mode_finder *f, double sigma, sct_modes *modes)
{
    const sct_pattern *pattern;
    const double *K = sct_fine_stiffness(f->fine, &pattern);
    memcpy(f->shifted, K, (size_t)pattern->column[pattern->n] * sizeof *K);
    sct_squares_assemble(f->B, -sigma, pattern, f->shifted);
    modes->factors++;
    return sct_fine_factor_other(f->fine, f->shifted);
}

/* Takes the pairs of K - sigma B over: lambda' = lambda - sigma, and x'K x = lambda/lambda' before scaling. */
static void take_pairs(sct_mode_finder *f, const sct_eigenpairs *pairs, double sigma, sct_modes *modes)
{
    const size_t n = (size_t)f->n;
    modes->n = pairs->found;
    for (int i = 0; i < pairs->found; i++) {
        const double part = pairs->lambda[i] / (pairs->lambda[i] + sigma), scale = sqrt(part);
        f->lambda[i] = pairs->lambda[i] + sigma;
        f->error[i] = pairs->error[i] * part;
        for (size_t k = (size_t)i * n; k < ((size_t)i + 1) * n; k++) f->X[k] = scale * pairs->X[k];
    }
}

/* With the factor at hand, that of K - sigma B. */
static sct_status search(sct_mode_finder *f, double sigma, int most_blocks, bool is_warm, sct_modes *modes)
{
    sct_subspace_settings settings = sct_subspace_defaults();
    sct_eigenpairs pairs;
    settings.most_blocks = most_blocks;
    settings.is_warm_start = is_warm;
    settings.largest = f->largest - sigma;
    const sct_status status =
        sct_subspace_run(f->subspace, sct_fine_factor_now(f->fine), sct_squares_multiply, f->B, &settings, &pairs);
    modes->blocks += pairs.blocks;
    take_pairs(f, &pairs, sigma, modes);
    return status;
}

/* Negative eigenvalues of great size (a structure nearly all in tension) keep the search from the positive ones; a
 * shift between zero and the first positive one puts them aside. *sigma starts at an estimate. */
static sct_status search_shifted(sct_mode_finder *f, double sigma, sct_modes *modes)
{
    sct_status status = SCT_NOT_CONVEX;
    for (int i = 0; i < MOST_RETREATS && status == SCT_NOT_CONVEX; i++) {
        if (i > 0) sigma *= RETREAT;
        status = factor_shifted(f, sigma, modes);
    }
    if (status != SCT_OK) return status == SCT_NOT_CONVEX ? SCT_NOT_CONVERGED : status;
    return search(f, sigma, MOST_BLOCKS, false, modes);
}

/* The same without an estimate: up by tens from 1 until an eigenvalue lies below. */
static sct_status climb(sct_mode_finder *f, sct_modes *modes)
{
    for (double sigma = 1.0; modes->none_below < f->largest; sigma *= 10.0) {
        const double next = fmin(sigma, f->largest);
        const sct_status status = factor_shifted(f, next, modes);
        if (status != SCT_OK) return status == SCT_NOT_CONVEX ? search_shifted(f, next / 10.0, modes) : status;
        modes->none_below = next;
    }
    return SCT_OK;
}

/* An eigenvalue below the first found was missed when the factor does not exist: then searches from lower down. */
static sct_status prove(sct_mode_finder *f, sct_modes *modes)
{
    for (int i = 0; i < MOST_PROOFS; i++) {
        const double sigma = modes->n > 0 ? JUST_BELOW * f->lambda[0] / (1.0 + f->error[0]) : f->largest;
        const sct_status factored = factor_shifted(f, sigma, modes);
        if (factored == SCT_OK) modes->none_below = sigma;
        if (factored != SCT_NOT_CONVEX) return factored;
        const sct_status status = search_shifted(f, RETREAT * sigma, modes);
        if (status != SCT_OK) return status;
    }
    return SCT_NOT_CONVERGED;
}

/* Is what a search without a shift found good enough? Beside large negative eigenvalues rounding may spoil it. */
static bool is_sound(const sct_modes *modes, sct_status status)
{
    return status != SCT_NOT_CONVERGED && (modes->n == 0 || modes->error[0] <= COARSE);
}

sct_status sct_mode_finder_run(sct_mode_finder *f, sct_mode_search how, sct_modes *modes)
{
    sct_status status;
    *modes = (sct_modes){.lambda = f->lambda, .error = f->error, .X = f->X};
    if (sct_fine_factor(f->fine, &status) == NULL) return status == SCT_NOT_CONVEX ? SCT_MECHANISM : status;
    status = search(f, 0.0, PATIENCE, how == SCT_MODES_WARM, modes);
    if (!is_sound(modes, status))
        status = modes->n > 0 ? search_shifted(f, BELOW * f->lambda[0] / (1.0 + f->error[0]), modes) : climb(f, modes);
    return status == SCT_OK && how == SCT_MODES_PROVEN ? prove(f, modes) : status;
}

int sct_modes_cluster(const sct_modes *modes, int i, double apart)
{
    int n = 1;
    while (i + n < modes->n && modes->lambda[i + n] <= modes->lambda[i] * (1.0 + apart)) n++;
    return n;
}

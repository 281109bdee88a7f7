/* Quadratic programs with most variables fixed at bounds that were guessed. */
#include "numerics/reduced_qp.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/dense.h"

static const double TOL_SIGN = 1e-12; /* of the terms that make a multiplier: rounding of their sum */

struct sct_reduced_qp {
    sct_qp *qp;
    int *free; /* the variables that are not fixed, ascending */
    int n_free, iterations;
    double *block;                                           /* owns all doubles below */
    double *G, *a, *lower, *upper, *x, *mu_bound, *rows, *b; /* of the free variables */
};

sct_reduced_qp *sct_reduced_qp_new(int n, int m)
{
    const size_t N = (size_t)n, M = (size_t)m, most = SIZE_MAX / sizeof(double) / 4;
    if (N + 5 > most / (N + 1) || M > most / (N + 1)) return NULL;
    sct_reduced_qp *r = calloc(1, sizeof *r);
    if (r == NULL) return NULL;
    r->qp = sct_qp_new(n, m);
    r->free = malloc((N + 1) * sizeof *r->free);
    r->block = malloc((N * N + 5 * N + M * N + M + 1) * sizeof(double)); /* only what is free is ever touched */
    if (r->qp == NULL || r->free == NULL || r->block == NULL) {
        sct_reduced_qp_free(r);
        return NULL;
    }
    r->G = r->block;
    r->a = r->G + N * N;
    r->lower = r->a + N;
    r->upper = r->lower + N;
    r->x = r->upper + N;
    r->mu_bound = r->x + N;
    r->b = r->mu_bound + N;
    r->rows = r->b + M;
    return r;
}

void sct_reduced_qp_free(sct_reduced_qp *r)
{
    if (r == NULL) return;
    sct_qp_free(r->qp);
    free(r->free);
    free(r->block);
    free(r);
}

int sct_reduced_qp_iterations(const sct_reduced_qp *r)
{
    return r->iterations;
}

/* Does the variable have the bound of its guessed side, and no other that contradicts it? */
static bool can_be_fixed(const sct_qp_data *p, int i, int side)
{
    const double lower = p->lower != NULL ? p->lower[i] : -INFINITY, upper = p->upper != NULL ? p->upper[i] : INFINITY;
    return isfinite(side < 0 ? lower : upper) && lower <= upper;
}

/* Fixes x where a side is guessed, and lists the others. */
static void split(sct_reduced_qp *r, const sct_qp_data *p, signed char side[], double x[])
{
    r->n_free = 0;
    for (int i = 0; i < p->n; ++i) {
        if (side[i] != 0 && !can_be_fixed(p, i, side[i])) side[i] = 0;
        if (side[i] == 0) r->free[r->n_free++] = i;
        x[i] = side[i] == 0 ? 0 : side[i] < 0 ? p->lower[i] : p->upper[i];
    }
}

/* The program in the free variables; x holds the fixed ones and 0 elsewhere. */
static sct_qp_data gather(sct_reduced_qp *r, const sct_qp_data *p, const double x[])
{
    const int n = p->n, n_free = r->n_free;
    const size_t N = (size_t)n, N_free = (size_t)n_free;
    for (int k = 0; k < n_free; ++k) {
        const double *row = p->G + (size_t)r->free[k] * N;
        for (int l = 0; l < n_free; ++l) r->G[(size_t)k * N_free + (size_t)l] = row[r->free[l]];
        r->a[k] = p->a[r->free[k]] + sct_dot(n, row, x);
        r->lower[k] = p->lower != NULL ? p->lower[r->free[k]] : -INFINITY;
        r->upper[k] = p->upper != NULL ? p->upper[r->free[k]] : INFINITY;
    }
    for (int c = 0; c < p->m; ++c) {
        const double *row = p->rows + (size_t)c * (size_t)p->stride;
        for (int k = 0; k < n_free; ++k) r->rows[(size_t)c * N_free + (size_t)k] = row[r->free[k]];
        r->b[c] = p->b[c] - sct_dot(n, row, x);
    }
    return (sct_qp_data){.n = n_free,
                         .m = p->m,
                         .m_eq = p->m_eq,
                         .stride = n_free,
                         .G = r->G,
                         .a = r->a,
                         .rows = r->rows,
                         .b = r->b,
                         .lower = r->lower,
                         .upper = r->upper};
}

/* Multipliers of the fixed variables, -(G x + a + rows' mu); those of the wrong sign are set free. How many were. */
static int judge_sides(const sct_qp_data *p, signed char side[], const double x[], const double mu[], double mu_bound[])
{
    const int n = p->n;
    int wrong = 0;
    for (int i = 0; i < n; ++i) {
        if (side[i] != 0) mu_bound[i] = -p->a[i] - sct_dot(n, p->G + (size_t)i * (size_t)n, x);
    }
    for (int c = 0; c < p->m; ++c) {
        const double *row = p->rows + (size_t)c * (size_t)p->stride;
        for (int i = 0; mu[c] != 0 && i < n; ++i) {
            if (side[i] != 0) mu_bound[i] -= mu[c] * row[i];
        }
    }
    for (int i = 0; i < n; ++i) {
        if (side[i] == 0 || mu_bound[i] * side[i] > 0) continue;
        if (fabs(mu_bound[i]) > TOL_SIGN * fabs(p->a[i])) {
            side[i] = 0;
            ++wrong;
        }
        mu_bound[i] = 0;
    }
    return wrong;
}

static sct_status solve_whole(sct_reduced_qp *r, const sct_qp_data *p, signed char side[], double x[], double mu[],
                              double mu_bound[])
{
    const sct_status status = sct_qp_solve(r->qp, p, x, mu, mu_bound);
    r->iterations += sct_qp_iterations(r->qp);
    for (int i = 0; i < p->n && status == SCT_OK; ++i) side[i] = (signed char)((mu_bound[i] > 0) - (mu_bound[i] < 0));
    return status;
}

sct_status sct_reduced_qp_solve(sct_reduced_qp *r, const sct_qp_data *p, signed char side[], double x[], double mu[],
                                double mu_bound[])
{
    r->iterations = 0;
    for (;;) {
        split(r, p, side, x);
        if (r->n_free == p->n || r->n_free == 0) return solve_whole(r, p, side, x, mu, mu_bound);
        const sct_qp_data free = gather(r, p, x);
        const sct_status status = sct_qp_solve(r->qp, &free, r->x, mu, r->mu_bound);
        r->iterations += sct_qp_iterations(r->qp);
        if (status != SCT_OK) return solve_whole(r, p, side, x, mu, mu_bound); /* the guess was no good */
        for (int k = 0; k < r->n_free; ++k) {
            x[r->free[k]] = r->x[k];
            mu_bound[r->free[k]] = r->mu_bound[k];
        }
        if (judge_sides(p, side, x, mu, mu_bound) > 0) continue; /* fewer are fixed each time: it ends */
        for (int k = 0; k < r->n_free; ++k)
            side[r->free[k]] = (signed char)((r->mu_bound[k] > 0) - (r->mu_bound[k] < 0));
        return SCT_OK;
    }
}

/**
 * Derivatives with respect to z = ln A. With k = E A / L, N = k (b'u + stretch), W the weight of unit areas, s the
 * self-weight factor of a case, and e in g meaning that bar e has the size of variable g:
 *
 *   K u_g    = s A_g w_g - sum_{e in g} b N                                         (1)
 *   N_g      = [e in g] N + k b'u_g                                                 (2)
 *   K u_gh   = [g = h] s A_g w_g
 *              - sum_e b ([e in g][e in h] N + [e in g] k b'u_h + [e in h] k b'u_g) (3)
 *   N_gh     = [e in g][e in h] N + [e in g] k b'u_h + [e in h] k b'u_g + k b'u_gh  (4)
 *
 * K_g = sum_{e in g} k b b' and the load of a prescribed stretch, -b k stretch, join in the N of (1) and (3).
 */
#include "sensitivity.h"

#include <stdlib.h>
#include <string.h>

#include "numerics/dense.h"

enum { BATCH = 32 }; /* right-hand sides at once */

static double stiffness(const sct_solver *solver, const sct_bar *bar)
{
    return bar->E * sct_solver_areas(solver)[bar->group] / bar->L;
}

static double elongation(const sct_bar *bar, const double u[])
{
    double sum = 0.0;
    for (int i = 0; i < bar->n_dof; i++) sum += bar->b[i] * u[bar->dof[i]];
    return sum;
}

/* w'u of one bar: work of its weight per unit area. */
static double weight_work(const sct_bar *bar, const double u[])
{
    double sum = 0.0;
    for (int i = 0; i < bar->n_dof; i++) sum += bar->w[i] * u[bar->dof[i]];
    return sum;
}

/* Right-hand sides of (1), columns first .. first + count - 1 of all cases and variables. */
static void fill_batch(const sct_solver *solver, const sct_response *response, size_t first, size_t count, double *rhs)
{
    const sct_structure *st = sct_solver_structure(solver);
    const double *A = sct_solver_areas(solver);
    const size_t n = (size_t)st->n_dof, vars = (size_t)st->n_vars;
    memset(rhs, 0, count * n * sizeof *rhs);
    for (size_t k = first / vars; k * vars < first + count; k++) {
        const double s = st->model->cases[k].self_weight;
        const double *N = response->N + k * (size_t)st->n_bars;
        for (int e = 0; e < st->n_bars; e++) {
            const sct_bar *bar = &st->bars[e];
            const int g = st->var_of_group[bar->group];
            const size_t c = k * vars + (size_t)g;
            if (g < 0 || c < first || c >= first + count) continue;
            double *column = rhs + (c - first) * n;
            for (int i = 0; i < bar->n_dof; i++)
                column[bar->dof[i]] += s * A[bar->group] * bar->w[i] - bar->b[i] * N[e];
        }
    }
}

sct_status sct_sensitivity_direct(sct_solver *solver, const sct_response *response, double *du)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof, vars = (size_t)st->n_vars, columns = (size_t)st->n_cases * vars;
    double *rhs = malloc((n * BATCH + 1) * sizeof *rhs);
    if (rhs == NULL) return SCT_NO_MEMORY;
    for (size_t first = 0; first < columns; first += BATCH) {
        const size_t count = columns - first < BATCH ? columns - first : BATCH;
        fill_batch(solver, response, first, count, rhs);
        sct_solver_solve(solver, (int)count, rhs);
        for (size_t c = 0, run; c < count; c += run) { /* columns of one case */
            const size_t k = (first + c) / vars, v = (first + c) % vars;
            run = vars - v < count - c ? vars - v : count - c;
            for (size_t i = 0; i < n; i++)
                for (size_t j = 0; j < run; j++) du[(k * n + i) * vars + v + j] = rhs[(c + j) * n + i];
        }
    }
    free(rhs);
    return SCT_OK;
}

void sct_sensitivity_force(const sct_solver *solver, const sct_response *response, const double *du, int bar, int k,
                           double dN[])
{
    const sct_structure *st = sct_solver_structure(solver);
    const sct_bar *b = &st->bars[bar];
    const int n_vars = st->n_vars, own = st->var_of_group[b->group];
    const double *du_k = du + (size_t)k * (size_t)st->n_dof * (size_t)n_vars, k_bar = stiffness(solver, b);
    for (int v = 0; v < n_vars; v++) dN[v] = 0.0;
    for (int i = 0; i < b->n_dof; i++) sct_axpy(n_vars, b->b[i], du_k + (size_t)b->dof[i] * (size_t)n_vars, dN);
    for (int v = 0; v < n_vars; v++) dN[v] *= k_bar;
    if (own >= 0) dN[own] += response->N[(size_t)k * (size_t)st->n_bars + (size_t)bar];
}

void sct_sensitivity_displacement(const sct_solver *solver, const double *du, int joint, const double direction[3],
                                  int k, double d[])
{
    const sct_structure *st = sct_solver_structure(solver);
    const int n_vars = st->n_vars;
    const double *du_k = du + (size_t)k * (size_t)st->n_dof * (size_t)n_vars;
    for (int v = 0; v < n_vars; v++) d[v] = 0.0;
    for (int i = 0; i < st->n_free[joint]; i++) {
        const double *e = st->basis[joint][i], part = e[0] * direction[0] + e[1] * direction[1] + e[2] * direction[2];
        sct_axpy(n_vars, part, du_k + (size_t)(st->first_dof[joint] + i) * (size_t)n_vars, d);
    }
}

/* Load of the adjoint problem of case k: sum_e wN k b + wu. False when it is zero throughout. */
static bool adjoint_load(const sct_solver *solver, sct_weights q, int k, double *rhs)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_bars : NULL;
    const double *wu = q.wu != NULL ? q.wu + (size_t)k * n : NULL;
    bool any = false;
    for (size_t i = 0; i < n; i++) {
        rhs[i] = wu != NULL ? wu[i] : 0.0;
        any = any || rhs[i] != 0.0;
    }
    for (int e = 0; wN != NULL && e < st->n_bars; e++) {
        if (wN[e] == 0.0) continue;
        const sct_bar *bar = &st->bars[e];
        const double k_bar = stiffness(solver, bar);
        for (int i = 0; i < bar->n_dof; i++) rhs[bar->dof[i]] += wN[e] * k_bar * bar->b[i];
        any = true;
    }
    return any;
}

/* One column of a batch: weighted sum q of case k. */
typedef struct column {
    int q, k;
} column;

/* Adds what case k contributes to dq/dz, with the adjoint displacements lambda: work of lambda on the right of (1), and
 * the first part of (2). */
static void add_gradient(const sct_solver *solver, const sct_response *response, sct_weights q, int k,
                         const double lambda[], double dq[])
{
    const sct_structure *st = sct_solver_structure(solver);
    const double *A = sct_solver_areas(solver), s = st->model->cases[k].self_weight;
    const double *N = response->N + (size_t)k * (size_t)st->n_bars;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_bars : NULL;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const int g = st->var_of_group[bar->group];
        if (g < 0) continue;
        dq[g] += ((wN != NULL ? wN[e] : 0.0) - elongation(bar, lambda)) * N[e];
        if (s != 0.0) dq[g] += s * A[bar->group] * weight_work(bar, lambda);
    }
}

static void finish_batch(sct_solver *solver, const sct_response *response, const sct_weights q[], int n_columns,
                         const column columns[], double lambda[], double *dq)
{
    const sct_structure *st = sct_solver_structure(solver);
    sct_solver_solve(solver, n_columns, lambda);
    for (int c = 0; c < n_columns; c++) {
        add_gradient(solver, response, q[columns[c].q], columns[c].k, lambda + (size_t)c * (size_t)st->n_dof,
                     dq + (size_t)columns[c].q * (size_t)st->n_vars);
    }
}

sct_status sct_sensitivity_adjoint(sct_solver *solver, const sct_response *response, int count, const sct_weights q[],
                                   double *dq)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof;
    double *lambda = calloc(n * BATCH + 1, sizeof *lambda);
    if (lambda == NULL) return SCT_NO_MEMORY;
    memset(dq, 0, (size_t)count * (size_t)st->n_vars * sizeof *dq);
    column columns[BATCH];
    int n_columns = 0;
    for (int i = 0; i < count; i++) {
        for (int k = 0; k < st->n_cases; k++) {
            if (!adjoint_load(solver, q[i], k, lambda + (size_t)n_columns * n)) continue; /* a case that has no part */
            columns[n_columns++] = (column){.q = i, .k = k};
            if (n_columns < BATCH) continue;
            finish_batch(solver, response, q, n_columns, columns, lambda, dq);
            n_columns = 0;
        }
    }
    finish_batch(solver, response, q, n_columns, columns, lambda, dq);
    free(lambda);
    return SCT_OK;
}

/* Adds (3) and (4) of case k: every bracket is weighted by wN - b'lambda, because K^-1 is taken over by lambda. */
static void add_curvature(const sct_solver *solver, const sct_response *response, const double *du, sct_weights q,
                          int k, const double lambda[], double *H)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof, vars = (size_t)st->n_vars;
    const double *A = sct_solver_areas(solver), s = st->model->cases[k].self_weight;
    const double *N = response->N + (size_t)k * (size_t)st->n_bars;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_bars : NULL;
    const double *du_k = du + (size_t)k * n * vars;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        if (st->var_of_group[bar->group] < 0) continue;
        const size_t g = (size_t)st->var_of_group[bar->group];
        const double weight = (wN != NULL ? wN[e] : 0.0) - elongation(bar, lambda);
        const double k_weight = stiffness(solver, bar) * weight;
        H[g * vars + g] += weight * N[e];
        if (s != 0.0) H[g * vars + g] += s * A[bar->group] * weight_work(bar, lambda);
        for (size_t h = 0; h < vars; h++) {
            double sum = 0.0; /* b'u_h */
            for (int i = 0; i < bar->n_dof; i++) sum += bar->b[i] * du_k[(size_t)bar->dof[i] * vars + h];
            const double part = k_weight * sum;
            H[g * vars + h] += part;
            H[h * vars + g] += part;
        }
    }
}

void sct_sensitivity_curvature(sct_solver *solver, const sct_response *response, const double *du, sct_weights q,
                               double *work, double *H)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof;
    for (int k = 0; k < st->n_cases; k++) adjoint_load(solver, q, k, work + (size_t)k * n);
    sct_solver_solve(solver, st->n_cases, work);
    for (int k = 0; k < st->n_cases; k++) add_curvature(solver, response, du, q, k, work + (size_t)k * n, H);
}

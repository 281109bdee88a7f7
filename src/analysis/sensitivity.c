/**
 * Derivatives with respect to z = ln A. With S = k (b'u + stretch), k1 = dk/dz and k2 = d2k/dz2 of a spring with
 * respect to the variable of its group (k itself for E A / L; 0 for a constant spring), r1 = k1/k and r2 = k2/k, W the
 * weight of unit areas, s the self-weight factor of a case, and m in g meaning that spring m has the size of variable
 * g:
 *
 *   K u_g    = s A_g w_g - sum_{m in g} b r1 S                                         (1)
 *   S_g      = [m in g] r1 S + k b'u_g                                                 (2)
 *   K u_gh   = [g = h] s A_g w_g
 *              - sum_m b ([m in g][m in h] r2 S + [m in g] k1 b'u_h + [m in h] k1 b'u_g) (3)
 *   S_gh     = [m in g][m in h] r2 S + [m in g] k1 b'u_h + [m in h] k1 b'u_g + k b'u_gh  (4)
 *
 * K_g = sum_{m in g} k1 b b' and the load of a prescribed stretch, -b k1 stretch, join in the S of (1) and (3).
 */
#include "sensitivity.h"

#include <stdlib.h>
#include <string.h>

#include "numerics/dense.h"

enum { BATCH = 32 }; /* right-hand sides at once */

/* The variable of a spring; -1: its stiffness is constant. */
static int variable_of(const sct_structure *st, const sct_spring *spring)
{
    return spring->group < 0 ? -1 : st->var_of_group[spring->group];
}

/* (dk/dz)/k and (d2k/dz2)/k of a spring that has a variable. */
static double r1(const sct_solver *solver, const sct_spring *spring)
{
    const sct_properties *size = &sct_solver_sizes(solver)[spring->group];
    return size->d1[spring->property] / size->P[spring->property];
}

static double r2(const sct_solver *solver, const sct_spring *spring)
{
    const sct_properties *size = &sct_solver_sizes(solver)[spring->group];
    return size->d2[spring->property] / size->P[spring->property];
}

static double elongation(const sct_spring *spring, const double u[])
{
    double sum = 0.0;
    for (int i = 0; i < spring->n_dof; i++) sum += spring->b[i] * u[spring->dof[i]];
    return sum;
}

/* w'u of one bar: work of its weight per unit area. */
static double weight_work(const sct_bar *bar, const double u[])
{
    double sum = 0.0;
    for (int i = 0; i < bar->n_dof; i++) sum += bar->w[i] * u[bar->dof[i]];
    return sum;
}

/* Right-hand sides of (1), columns first .. first + count - 1 of all cases and variables: the column of variable g in
 * case k, or NULL when it is not among them. */
static double *column_of(const sct_structure *st, size_t k, int g, size_t first, size_t count, double *rhs)
{
    const size_t c = k * (size_t)st->n_vars + (size_t)g;
    return g < 0 || c < first || c >= first + count ? NULL : rhs + (c - first) * (size_t)st->n_dof;
}

static void fill_batch(const sct_solver *solver, const sct_response *response, size_t first, size_t count, double *rhs)
{
    const sct_structure *st = sct_solver_structure(solver);
    const double *A = sct_solver_areas(solver);
    memset(rhs, 0, count * (size_t)st->n_dof * sizeof *rhs);
    for (size_t k = first / (size_t)st->n_vars; k * (size_t)st->n_vars < first + count; k++) {
        const double s = st->self_weight[k];
        const double *S = response->N + k * (size_t)st->n_springs;
        for (int e = 0; e < st->n_bars && s != 0.0; e++) {
            const sct_bar *bar = &st->bars[e];
            double *column = column_of(st, k, st->var_of_group[bar->group], first, count, rhs);
            for (int i = 0; i < bar->n_dof && column != NULL; i++) column[bar->dof[i]] += s * A[bar->group] * bar->w[i];
        }
        for (int e = 0; e < st->n_springs; e++) {
            const sct_spring *spring = &st->springs[e];
            double *column = column_of(st, k, variable_of(st, spring), first, count, rhs);
            if (column == NULL) continue;
            const double part = r1(solver, spring) * S[e];
            for (int i = 0; i < spring->n_dof; i++) column[spring->dof[i]] -= spring->b[i] * part;
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

void sct_sensitivity_force(const sct_solver *solver, const sct_response *response, const double *du, int spring, int k,
                           double dS[])
{
    const sct_structure *st = sct_solver_structure(solver);
    const sct_spring *s = &st->springs[spring];
    const int n_vars = st->n_vars, own = variable_of(st, s);
    const double *du_k = du + (size_t)k * (size_t)st->n_dof * (size_t)n_vars;
    const double stiffness = sct_solver_stiffnesses(solver)[spring];
    for (int v = 0; v < n_vars; v++) dS[v] = 0.0;
    for (int i = 0; i < s->n_dof; i++) sct_axpy(n_vars, s->b[i], du_k + (size_t)s->dof[i] * (size_t)n_vars, dS);
    for (int v = 0; v < n_vars; v++) dS[v] *= stiffness;
    if (own >= 0) dS[own] += r1(solver, s) * response->N[(size_t)k * (size_t)st->n_springs + (size_t)spring];
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

/* Load of the adjoint problem of case k: sum_m wN k b + wu. False when it is zero throughout. */
static bool adjoint_load(const sct_solver *solver, sct_weights q, int k, double *rhs)
{
    const sct_structure *st = sct_solver_structure(solver);
    const size_t n = (size_t)st->n_dof;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_springs : NULL;
    const double *wu = q.wu != NULL ? q.wu + (size_t)k * n : NULL;
    bool any = false;
    for (size_t i = 0; i < n; i++) {
        rhs[i] = wu != NULL ? wu[i] : 0.0;
        any = any || rhs[i] != 0.0;
    }
    const double *stiffness = sct_solver_stiffnesses(solver);
    for (int e = 0; wN != NULL && e < st->n_springs; e++) {
        if (wN[e] == 0.0) continue;
        const sct_spring *spring = &st->springs[e];
        for (int i = 0; i < spring->n_dof; i++) rhs[spring->dof[i]] += wN[e] * stiffness[e] * spring->b[i];
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
    const double *A = sct_solver_areas(solver), s = st->self_weight[k];
    const double *S = response->N + (size_t)k * (size_t)st->n_springs;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_springs : NULL;
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        const int g = variable_of(st, spring);
        if (g >= 0) dq[g] += ((wN != NULL ? wN[e] : 0.0) - elongation(spring, lambda)) * r1(solver, spring) * S[e];
    }
    for (int e = 0; e < st->n_bars && s != 0.0; e++) {
        const sct_bar *bar = &st->bars[e];
        const int g = st->var_of_group[bar->group];
        if (g >= 0) dq[g] += s * A[bar->group] * weight_work(bar, lambda);
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
    const double *A = sct_solver_areas(solver), s = st->self_weight[k];
    const double *S = response->N + (size_t)k * (size_t)st->n_springs;
    const double *wN = q.wN != NULL ? q.wN + (size_t)k * (size_t)st->n_springs : NULL;
    const double *du_k = du + (size_t)k * n * vars;
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        if (variable_of(st, spring) < 0) continue;
        const size_t g = (size_t)variable_of(st, spring);
        const double weight = (wN != NULL ? wN[e] : 0.0) - elongation(spring, lambda);
        const double k1_weight = sct_solver_stiffnesses(solver)[e] * r1(solver, spring) * weight;
        H[g * vars + g] += weight * r2(solver, spring) * S[e];
        for (size_t h = 0; h < vars; h++) {
            double sum = 0.0; /* b'u_h */
            for (int i = 0; i < spring->n_dof; i++) sum += spring->b[i] * du_k[(size_t)spring->dof[i] * vars + h];
            const double part = k1_weight * sum;
            H[g * vars + h] += part;
            H[h * vars + g] += part;
        }
    }
    for (int e = 0; e < st->n_bars && s != 0.0; e++) {
        const sct_bar *bar = &st->bars[e];
        const int g = st->var_of_group[bar->group];
        if (g >= 0) H[(size_t)g * vars + (size_t)g] += s * A[bar->group] * weight_work(bar, lambda);
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

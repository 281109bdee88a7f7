#include "sizing/form.h"

#include <string.h>

#include "base/vector.h"
#include "numerics/dense.h"

static const double *factors(const sct_form *form, const sct_structure *st)
{
    return st->model->combinations[form->combination].factor;
}

/* row = sum_s w_s dS_s/dz in the form's combination. */
static void add_springs(const sct_form *form, const double w[], const sct_form_source *from, double row[])
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const double *factor = factors(form, st);
    for (int s = 0; s < form->n_springs; s++) {
        for (int k = 0; k < st->n_cases; k++) {
            if (w[s] == 0.0 || factor[k] == 0.0) continue;
            sct_sensitivity_force(from->solver, from->response, from->du, form->spring[s], k, from->part);
            sct_axpy(st->n_vars, w[s] * factor[k], from->part, row);
        }
    }
}

static void clear(int n, double row[])
{
    memset(row, 0, (size_t)n * sizeof *row);
}

/* row += sum_j dir_j . du_j/dz in the form's combination. */
static void add_joints(const sct_form *form, const double dir[][3], const sct_form_source *from, double row[])
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const double *factor = factors(form, st);
    for (int j = 0; j < form->n_joints; j++) {
        for (int k = 0; k < st->n_cases; k++) {
            if (factor[k] == 0.0) continue;
            sct_sensitivity_displacement(from->solver, from->du, form->joint[j], dir[j], k, from->part);
            sct_axpy(st->n_vars, factor[k], from->part, row);
        }
    }
}

void sct_form_gradient(const sct_form *form, const sct_form_source *from, double row[])
{
    const sct_structure *st = sct_solver_structure(from->solver);
    clear(st->n_vars, row);
    add_springs(form, form->w, from, row);
    add_joints(form, (const double(*)[3])form->dir, from, row);
    if (form->own >= 0) row[form->own] += form->e1;
}

/* The parts by S'' and u'': weights, to be worked out for all forms at once. */
static void add_weights(const sct_form *form, const sct_structure *st, double weight, double *wN, double *wu)
{
    const double *factor = factors(form, st);
    for (int k = 0; k < st->n_cases; k++) {
        double *N = wN + (size_t)k * (size_t)st->n_springs, *u = wu + (size_t)k * (size_t)st->n_dof;
        for (int s = 0; s < form->n_springs; s++) N[form->spring[s]] += weight * form->w[s] * factor[k];
        for (int j = 0; j < form->n_joints; j++) {
            const int joint = form->joint[j];
            for (int d = 0; d < st->n_free[joint]; d++)
                u[st->first_dof[joint] + d] += weight * factor[k] * sct_dot3(st->basis[joint][d], form->dir[j]);
        }
    }
}

void sct_form_curvature(const sct_form *form, const sct_form_source *from, double weight, double *t, double *r,
                        double *wN, double *wu, double *H)
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const size_t n = (size_t)st->n_vars;
    add_weights(form, st, weight, wN, wu);
    if (form->own >= 0) {
        const size_t own = (size_t)form->own;
        clear((int)n, t);
        add_springs(form, form->w1, from, t);
        for (size_t v = 0; v < n; v++) {
            H[own * n + v] += weight * t[v];
            H[v * n + own] += weight * t[v];
        }
        H[own * n + own] += weight * form->e2;
    }
    if (form->q_xx != 0.0) {
        clear((int)n, r);
        add_springs(form, form->wx, from, r);
        add_joints(form, (const double(*)[3])form->dirx, from, r);
        if (form->own >= 0) r[form->own] += form->ex;
        for (size_t a = 0; a < n; a++) sct_axpy((int)n, -weight * r[a] / form->q_xx, r, H + a * n);
    }
}

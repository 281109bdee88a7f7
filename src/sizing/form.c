#include "sizing/form.h"

#include <string.h>

#include "base/vector.h"
#include "numerics/dense.h"

/* Cases first .. first + n - 1 with their factors: a combination, or one case. */
typedef struct cases {
    int first, n;
    const double *factor;
} cases;

static cases cases_of(const sct_form *form, const sct_structure *st)
{
    return (cases){0, st->n_cases, sct_factors(st, form->combination)};
}

static cases hidden_case(const sct_structure *st, int i)
{
    static const double ONE = 1.0;
    return (cases){st->n_cases - st->n_ties + i, 1, &ONE};
}

/* What of the response counts: a form's own weights, or their derivatives. dir: NULL: no joints. */
typedef struct weights {
    const double *w;
    const double (*dir)[3];
} weights;

static weights weights_of(const sct_form *form)
{
    return (weights){form->w, (const double(*)[3])form->dir};
}

static void clear(int n, double row[])
{
    memset(row, 0, (size_t)n * sizeof *row);
}

/* ---- at fixed factors of the cases ---------------------------------------------------------------------------------
 */

/* row += sum_s w_s dS_s/dz + sum_j dir_j . du_j/dz of some cases. */
static void add_cases(const sct_form *form, weights by, cases of, const sct_form_source *from, double row[])
{
    const int n_vars = sct_solver_structure(from->solver)->n_vars;
    for (int s = 0; s < form->n_springs; s++) {
        for (int k = 0; k < of.n; k++) {
            if (by.w[s] == 0.0 || of.factor[k] == 0.0) continue;
            sct_sensitivity_force(from->solver, from->response, from->du, form->spring[s], of.first + k, from->part);
            sct_axpy(n_vars, by.w[s] * of.factor[k], from->part, row);
        }
    }
    for (int j = 0; j < form->n_joints && by.dir != NULL; j++) {
        for (int k = 0; k < of.n; k++) {
            if (of.factor[k] == 0.0) continue;
            sct_sensitivity_displacement(from->solver, from->du, form->joint[j], by.dir[j], of.first + k, from->part);
            sct_axpy(n_vars, of.factor[k], from->part, row);
        }
    }
}

/* ---- what slack bars lack changes with the sizes -------------------------------------------------------------------
 */

/* sum_s w_s S_s + sum_j dir_j . u_j in the hidden case of bar i. */
static double hidden_value(const sct_form *form, weights by, const sct_form_source *from, int i)
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const size_t k = (size_t)hidden_case(st, i).first;
    const double *S = from->response->N + k * (size_t)st->n_springs, *u = from->response->u + k * (size_t)st->n_dof;
    double sum = 0.0;
    for (int s = 0; s < form->n_springs; s++) sum += by.w[s] * S[form->spring[s]];
    for (int j = 0; j < form->n_joints && by.dir != NULL; j++) {
        double d[3];
        sct_joint_displacement(st, u, NULL, form->joint[j], d);
        sum += sct_dot3(d, by.dir[j]);
    }
    return sum;
}

/* row += the whole derivative in the form's combination. */
static void add_combination(const sct_form *form, weights by, const sct_form_source *from, double row[])
{
    const sct_structure *st = sct_solver_structure(from->solver);
    add_cases(form, by, cases_of(form, st), from, row);
    for (int i = 0; i < st->n_ties; i++) {
        const double *change = sct_slack_change(from->slack, form->combination, i);
        if (change != NULL) sct_axpy(st->n_vars, hidden_value(form, by, from, i), change, row);
    }
}

void sct_form_gradient(const sct_form *form, const sct_form_source *from, double row[])
{
    clear(sct_solver_structure(from->solver)->n_vars, row);
    add_combination(form, weights_of(form), from, row);
    if (form->own >= 0) row[form->own] += form->e1;
}

/* ---- second derivatives --------------------------------------------------------------------------------------------
 */

/* The parts by S'' and u'': weights, to be worked out for all forms at once. */
static void add_weights(const sct_form *form, const sct_structure *st, double weight, double *wN, double *wu)
{
    const double *factor = sct_factors(st, form->combination);
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

/* H += weight (a b' + b a') */
static void add_both(size_t n, double weight, const double a[], const double b[], double *H)
{
    for (size_t v = 0; v < n; v++) {
        sct_axpy((int)n, weight * a[v], b, H + v * n);
        sct_axpy((int)n, weight * b[v], a, H + v * n);
    }
}

/* The forces of slack bars join the form (sct_slack_weights). r: scratch. */
static void add_slackening(const sct_form *form, const sct_form_source *from, double weight, double *r, double *scratch,
                           double *wN, double *H)
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const double *factor = sct_factors(st, form->combination);
    double *lambda = scratch, *q = scratch + st->n_ties;
    for (int i = 0; i < st->n_ties; i++) q[i] = hidden_value(form, weights_of(form), from, i);
    sct_slack_weights(from->slack, form->combination, q, lambda);
    for (int i = 0; i < st->n_ties; i++) {
        const double *change = sct_slack_change(from->slack, form->combination, i);
        const cases hidden = hidden_case(st, i);
        if (change == NULL) continue;
        for (int k = 0; k < st->n_cases; k++)
            wN[(size_t)k * (size_t)st->n_springs + (size_t)st->ties[i]] += weight * lambda[i] * factor[k];
        clear(st->n_vars, r);
        add_cases(form, weights_of(form), hidden, from, r);
        for (int e = 0; e < st->n_ties; e++) {
            if (lambda[e] == 0.0) continue;
            sct_sensitivity_force(from->solver, from->response, from->du, st->ties[e], hidden.first, from->part);
            sct_axpy(st->n_vars, lambda[e], from->part, r);
        }
        add_both((size_t)st->n_vars, weight, r, change, H);
    }
}

void sct_form_curvature(const sct_form *form, const sct_form_source *from, double weight, double *t, double *r,
                        double *lambda, double *wN, double *wu, double *H)
{
    const sct_structure *st = sct_solver_structure(from->solver);
    const size_t n = (size_t)st->n_vars;
    add_weights(form, st, weight, wN, wu);
    if (st->n_ties > 0) add_slackening(form, from, weight, r, lambda, wN, H);
    if (form->own >= 0) {
        const size_t own = (size_t)form->own;
        clear((int)n, t);
        add_combination(form, (weights){form->w1, NULL}, from, t);
        for (size_t v = 0; v < n; v++) {
            H[own * n + v] += weight * t[v];
            H[v * n + own] += weight * t[v];
        }
        H[own * n + own] += weight * form->e2;
    }
    if (form->q_xx != 0.0) {
        clear((int)n, r);
        add_combination(form, (weights){form->wx, (const double(*)[3])form->dirx}, from, r);
        if (form->own >= 0) r[form->own] += form->ex;
        for (size_t a = 0; a < n; a++) sct_axpy((int)n, -weight * r[a] / form->q_xx, r, H + a * n);
    }
}

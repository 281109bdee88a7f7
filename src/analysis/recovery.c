/* Combinations as sums of cases, and reactions from equilibrium of the supported joints. */
#include "recovery.h"

#include <float.h>
#include <math.h>

static double factor_of(const sct_structure *st, int combination, int k)
{
    return st->model->combinations[combination].factor[k];
}

void sct_combine_forces(const sct_structure *st, const sct_response *response, int combination, double *N)
{
    for (int e = 0; e < st->n_bars; e++) N[e] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = factor_of(st, combination, k);
        if (factor == 0.0) continue;
        const double *N_k = response->N + (size_t)k * (size_t)st->n_bars;
        for (int e = 0; e < st->n_bars; e++) N[e] += factor * N_k[e];
    }
}

void sct_combine_displacements(const sct_structure *st, const sct_response *response, int combination, double *u)
{
    for (int i = 0; i < 3 * st->n_joints; i++) u[i] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = factor_of(st, combination, k);
        if (factor == 0.0) continue;
        const double *u_k = response->u + (size_t)k * (size_t)st->n_dof;
        const double *settled = st->settled + (size_t)k * (size_t)st->n_joints * 3;
        for (int j = 0; j < st->n_joints; j++) {
            double d[3];
            sct_joint_displacement(st, u_k, settled, j, d);
            for (int i = 0; i < 3; i++) u[3 * j + i] += factor * d[i];
        }
    }
}

void sct_combine_loads(const sct_structure *st, const double A[], int combination, double *load)
{
    double weight_factor = 0.0;
    for (int i = 0; i < 3 * st->n_joints; i++) load[i] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const sct_case *c = &st->model->cases[k];
        const double factor = factor_of(st, combination, k);
        weight_factor += factor * c->self_weight;
        for (int p = 0; p < c->n_loads; p++) {
            for (int i = 0; i < 3; i++) load[3 * c->loads[p].joint + i] += factor * c->loads[p].F[i];
        }
    }
    if (weight_factor == 0.0) return;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const double half = weight_factor * A[bar->group] * bar->half_weight; /* [N] downwards */
        load[3 * bar->from + st->dim - 1] -= half;
        load[3 * bar->to + st->dim - 1] -= half;
    }
}

void sct_reactions(const sct_structure *st, const double N[], const double load[], double *reaction)
{
    for (int i = 0; i < 3 * st->n_joints; i++) reaction[i] = -load[i];
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        for (int i = 0; i < 3; i++) { /* a bar in tension pulls its joints towards each other */
            reaction[3 * bar->from + i] -= N[e] * bar->dir[i];
            reaction[3 * bar->to + i] += N[e] * bar->dir[i];
        }
    }
    for (int j = 0; j < st->n_joints; j++) {
        double *r = reaction + 3 * (size_t)j;
        if (st->model->joints[j].n_held == 0) r[0] = r[1] = r[2] = 0.0;
        for (int k = 0; k < st->n_free[j]; k++) { /* a support gives nothing in its free directions but rounding */
            const double *v = st->basis[j][k];
            const double along = v[0] * r[0] + v[1] * r[1] + v[2] * r[2];
            for (int i = 0; i < 3; i++) r[i] -= along * v[i];
        }
    }
}

/* What the sums of a combination may add by rounding: products and sums of n_cases terms. */
static double sum_rounding(const sct_structure *st, double terms)
{
    return (st->n_cases + 2) * DBL_EPSILON * terms;
}

double sct_combined_force_error(const sct_structure *st, const sct_response *response, int combination, int bar)
{
    double error = 0.0, terms = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = fabs(factor_of(st, combination, k));
        const size_t at = (size_t)k * (size_t)st->n_bars + (size_t)bar;
        if (factor == 0.0) continue;
        error += factor * response->N_error[at];
        terms += factor * fabs(response->N[at]);
    }
    return error + sum_rounding(st, terms);
}

double sct_combined_displacement_error(const sct_structure *st, const sct_response *response, int combination,
                                       int joint, const double direction[3])
{
    double error = 0.0, terms = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = fabs(factor_of(st, combination, k));
        if (factor == 0.0) continue;
        for (int i = 0; i < st->n_free[joint]; i++) {
            const size_t at = (size_t)k * (size_t)st->n_dof + (size_t)(st->first_dof[joint] + i);
            const double *v = st->basis[joint][i];
            const double along = fabs(v[0] * direction[0] + v[1] * direction[1] + v[2] * direction[2]);
            error += factor * along * response->u_error[at];
            terms += factor * fabs(response->u[at]);
        }
    }
    return error + sum_rounding(st, terms);
}

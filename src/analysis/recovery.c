/* Combinations as sums of cases, and reactions from equilibrium of the supported joints. */
#include "recovery.h"

#include <float.h>
#include <math.h>

#include "analysis/structure_parts.h"
#include "base/vector.h"

static double factor_of(const sct_structure *st, int combination, int k)
{
    return sct_factors(st, combination)[k];
}

/* The first n of the spring forces. */
static void combine(const sct_structure *st, const sct_response *response, int combination, int n, double *S)
{
    for (int e = 0; e < n; e++) S[e] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = factor_of(st, combination, k);
        if (factor == 0.0) continue;
        const double *S_k = response->N + (size_t)k * (size_t)st->n_springs;
        for (int e = 0; e < n; e++) S[e] += factor * S_k[e];
    }
}

void sct_combine_forces(const sct_structure *st, const sct_response *response, int combination, double *N)
{
    combine(st, response, combination, st->n_bars, N);
}

void sct_combine_springs(const sct_structure *st, const sct_response *response, int combination, double *S)
{
    combine(st, response, combination, st->n_springs, S);
}

typedef void of_joint(const sct_structure *st, const double u[], const double *prescribed, int joint, double d[3]);

/* Sums what `of` gives of a joint for each case; prescribed: n_cases x n_joints x 3. */
static void combine_joint(const sct_structure *st, const sct_response *response, int combination, of_joint *of,
                          const double prescribed[], int joint, double sum[3])
{
    sum[0] = sum[1] = sum[2] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = factor_of(st, combination, k);
        double d[3];
        if (factor == 0.0) continue;
        of(st, response->u + (size_t)k * (size_t)st->n_dof, prescribed + (size_t)k * (size_t)st->n_joints * 3, joint,
           d);
        for (int i = 0; i < 3; i++) sum[i] += factor * d[i];
    }
}

void sct_joint_moved(const sct_structure *st, const sct_response *response, int combination, int joint, double d[3])
{
    combine_joint(st, response, combination, sct_joint_displacement, st->settled, joint, d);
}

void sct_combine_displacements(const sct_structure *st, const sct_response *response, int combination, double *u)
{
    for (int j = 0; j < st->n_joints; j++)
        combine_joint(st, response, combination, sct_joint_displacement, st->settled, j, u + 3 * (size_t)j);
}

void sct_combine_rotations(const sct_structure *st, const sct_response *response, int combination, double *theta)
{
    for (int j = 0; j < st->n_joints; j++)
        combine_joint(st, response, combination, sct_joint_rotation, st->turned, j, theta + 3 * (size_t)j);
}

void sct_combine_loads(const sct_structure *st, const double A[], int combination, double *load)
{
    double weight_factor = 0.0;
    const int n = 6 * st->n_joints;
    for (int i = 0; i < n; i++) load[i] = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = factor_of(st, combination, k), *of_case = st->joint_load + (size_t)k * (size_t)n;
        weight_factor += factor * st->self_weight[k];
        for (int i = 0; i < n && factor != 0.0; i++) load[i] += factor * of_case[i];
    }
    if (weight_factor == 0.0) return;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const double weight = weight_factor * A[bar->group];
        double end[2][6], on[SCT_MOST_BAR_DOF];
        sct_bar_weight(st, e, end);
        sct_project_ends(st, bar, end, on); /* what acts on sprung ends is not the joint's */
        for (int i = 0; i < 6; i++) {
            load[6 * bar->from + i] += weight * end[0][i];
            load[6 * bar->to + i] += weight * end[1][i];
        }
    }
}

/* A support gives nothing along n free directions but rounding. */
static void clear_along(int n, const double basis[][3], double r[3])
{
    for (int k = 0; k < n; k++) {
        const double along = sct_dot3(basis[k], r);
        for (int i = 0; i < 3; i++) r[i] -= along * basis[k][i];
    }
}

void sct_reactions(const sct_structure *st, const double S[], const double load[], double *reaction)
{
    for (int i = 0; i < 6 * st->n_joints; i++) reaction[i] = -load[i];
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        double end[2][6];
        sct_bar_pull(st, S, e, end);
        for (int i = 0; i < 6; i++) {
            reaction[6 * bar->from + i] -= end[0][i];
            reaction[6 * bar->to + i] -= end[1][i];
        }
    }
    for (int j = 0; j < st->n_joints; j++) {
        const sct_joint *joint = &st->model->joints[j];
        double *r = reaction + 6 * (size_t)j;
        if (joint->n_springs > 0) continue; /* they give something along free directions */
        if (joint->n_held == 0) r[0] = r[1] = r[2] = 0.0;
        if (joint->n_turns_held == 0) r[3] = r[4] = r[5] = 0.0;
        clear_along(st->n_free[j], (const double(*)[3])st->basis[j], r);
        clear_along(st->n_turns[j], (const double(*)[3])st->turn_basis[j], r + 3);
    }
}

/* What the sums of a combination may add by rounding: products and sums of n_cases terms; for a displacement also the
 * way from the unknowns to the axes (4) and to a direction (3). */
static double sum_rounding(const sct_structure *st, double terms)
{
    return (st->n_cases + 8) * DBL_EPSILON * terms;
}

double sct_combined_force_error(const sct_structure *st, const sct_response *response, int combination, int spring)
{
    double error = 0.0, terms = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double factor = fabs(factor_of(st, combination, k));
        const size_t at = (size_t)k * (size_t)st->n_springs + (size_t)spring;
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
        const double *settled = st->settled + 3 * ((size_t)k * (size_t)st->n_joints + (size_t)joint);
        if (factor == 0.0) continue;
        for (int i = 0; i < 3; i++) terms += factor * fabs(settled[i]);
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

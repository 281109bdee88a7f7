#include "analysis/vibration.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

struct sct_vibration {
    sct_fine *fine;
    sct_squares mass;
    sct_mode_finder *finder;
    double loads; /* [kg] */
};

/* ---- mass of loads ----------------------------------------------------------------------------------------------- */

/* Part of a downward load that vibrates. */
static double part_of(const sct_model *m, int k)
{
    return m->mass_factor == NULL ? 0.0 : m->mass_factor[k] / SCT_GRAVITY;
}

/* [N] or [N/m] of a local vector downwards, upwards is nothing. */
static double downwards(const sct_structure *st, const sct_bar *bar, const double q[3])
{
    double up = 0.0;
    for (int i = 0; i < 3; i++) up += q[i] * bar->axes[i][st->dim - 1];
    return fmax(-up, 0.0);
}

/* The share of a load between a and b, p at a to q at b, that lies in [x0, x1]: its sum and its moment about x0. */
static void cut_load(double a, double b, double p, double q, double x0, double x1, double *sum, double *moment)
{
    const double from = fmax(a, x0), to = fmin(b, x1), h = to - from;
    *sum = *moment = 0.0;
    if (!(h > 0.0)) return;
    const double at_from = p + (q - p) * (from - a) / (b - a), at_to = p + (q - p) * (to - a) / (b - a);
    *sum = (at_from + at_to) * h / 2.0;
    *moment = *sum * (from - x0) + (at_from + 2.0 * at_to) * h * h / 6.0;
}

/* Adds part * a load on a member to the masses at the joints of its pieces. */
static void add_member_load(const sct_fine *fine, const sct_member_load *load, double part, double mass[])
{
    const sct_structure *st = sct_fine_coarse(fine);
    const sct_bar *bar = &st->bars[load->member];
    const sct_beam_load local = sct_local_load(bar, load);
    const double qa = downwards(st, bar, local.qa), qb = downwards(st, bar, local.qb);
    int first;
    const int n = sct_fine_pieces(fine, load->member, &first);
    const double h = bar->L / n;
    for (int k = 0; k < n; k++) {
        double sum, moment;
        if (local.is_point) {
            const bool is_here = fmin(floor(local.a / h), n - 1) == k;
            sum = is_here ? downwards(st, bar, local.F) : 0.0;
            moment = sum * (local.a - k * h);
        } else {
            cut_load(local.a, local.b, qa, qb, k * h, (k + 1) * h, &sum, &moment);
        }
        mass[sct_fine_joint(fine, load->member, k)] += part * (sum - moment / h);
        mass[sct_fine_joint(fine, load->member, k + 1)] += part * moment / h;
    }
}

static void find_masses(const sct_fine *fine, double mass[])
{
    const sct_structure *st = sct_fine_coarse(fine);
    for (int k = 0; k < st->model->n_cases; k++) {
        const sct_case *c = &st->model->cases[k];
        const double part = part_of(st->model, k);
        if (part == 0.0) continue;
        for (int i = 0; i < c->n_loads; i++) mass[c->loads[i].joint] += part * fmax(-c->loads[i].F[st->dim - 1], 0.0);
        for (int i = 0; i < c->n_member_loads; i++) add_member_load(fine, &c->member_loads[i], part, mass);
    }
}

static sct_status add_masses(sct_vibration *v)
{
    const sct_structure *st = sct_fine_structure(v->fine);
    double *mass = calloc((size_t)st->n_joints + 1, sizeof *mass);
    if (mass == NULL) return SCT_NO_MEMORY;
    find_masses(v->fine, mass);
    sct_status status = SCT_OK;
    for (int j = 0; j < st->n_joints && status == SCT_OK; j++) {
        v->loads += mass[j];
        if (mass[j] > 0.0) status = sct_squares_add_joint(st, j, mass[j], &v->mass);
    }
    free(mass);
    return status;
}

/* ---- the object -------------------------------------------------------------------------------------------------- */

sct_vibration *sct_vibration_new(sct_fine *fine, int wanted, sct_status *status)
{
    sct_vibration *v = calloc(1, sizeof *v);
    *status = SCT_NO_MEMORY;
    if (v == NULL) return NULL;
    v->fine = fine;
    *status = sct_squares_of_mass(sct_fine_structure(fine), &v->mass);
    if (*status == SCT_OK) *status = add_masses(v);
    if (*status == SCT_OK) v->finder = sct_mode_finder_new(fine, &v->mass, wanted, (double)INFINITY, status);
    if (*status == SCT_OK) return v;
    sct_vibration_free(v);
    return NULL;
}

void sct_vibration_free(sct_vibration *v)
{
    if (v == NULL) return;
    sct_mode_finder_free(v->finder);
    sct_squares_free(&v->mass);
    free(v);
}

sct_status sct_vibration_find(sct_vibration *v, sct_mode_search how, sct_modes *modes)
{
    const sct_structure *st = sct_fine_structure(v->fine);
    const double *A = sct_solver_areas(sct_fine_solver(v->fine));
    sct_fine_leave_out(v->fine, NULL);
    for (int j = 0; j < v->mass.count; j++) {
        sct_square *square = &v->mass.square[j];
        if (square->bar >= 0) square->c = square->g * A[st->bars[square->bar].group];
    }
    return sct_mode_finder_run(v->finder, how, modes);
}

double sct_frequency(const sct_modes *modes, int i)
{
    return sqrt(modes->lambda[i]) / (2.0 * acos(-1.0));
}

double sct_vibration_mass(const sct_vibration *v)
{
    const sct_structure *st = sct_fine_structure(v->fine);
    const double *A = sct_solver_areas(sct_fine_solver(v->fine));
    double sum = v->loads;
    for (int e = 0; e < st->n_bars; e++) sum += st->bars[e].density * A[st->bars[e].group] * st->bars[e].L;
    return sum;
}

void sct_vibration_derivative(const sct_vibration *v, const sct_modes *modes, int i, int j, double D[])
{
    const sct_structure *st = sct_fine_structure(v->fine);
    const sct_properties *sizes = sct_solver_sizes(sct_fine_solver(v->fine));
    const double *x = modes->X + (size_t)i * (size_t)st->n_dof, *y = modes->X + (size_t)j * (size_t)st->n_dof;
    const double lambda = (modes->lambda[i] + modes->lambda[j]) / 2.0;
    sct_fine_stiffness_derivative(v->fine, x, y, D);
    for (int s = 0; s < v->mass.count; s++) {
        const sct_square *square = &v->mass.square[s];
        if (square->bar < 0) continue;
        const int group = st->bars[square->bar].group, var = st->var_of_group[group];
        if (var < 0) continue;
        D[var] -= lambda * square->g * sizes[group].d1[SCT_OF_AREA] * sct_square_value(&v->mass, square, x) *
                  sct_square_value(&v->mass, square, y);
    }
}

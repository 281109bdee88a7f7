#include "sizing/whole.h"

#include <stdlib.h>
#include <string.h>

static const double FAR = 1e-6; /* limit / value of what does not exist: ln is left alone by the search */

bool sct_whole_is_limited(const sct_model *model)
{
    return model->least_factor > 0.0 || model->least_frequency > 0.0;
}

bool sct_whole_amplifies(const sct_model *model)
{
    return model->amplifies;
}

static bool is_needed(const sct_structure *st)
{
    bool has_beams = false;
    for (int e = 0; e < st->n_bars; e++) has_beams = has_beams || st->bars[e].n > 0;
    return has_beams || sct_whole_is_limited(st->model) || sct_whole_amplifies(st->model);
}

static sct_status fill(sct_whole *w, sct_engine engine, int n, const int combinations[])
{
    sct_status status;
    w->buckling = calloc((size_t)n + 1, sizeof *w->buckling);
    w->of_mode = calloc((size_t)w->st->n_bars + 1, sizeof *w->of_mode);
    if (w->buckling == NULL || w->of_mode == NULL) return SCT_NO_MEMORY;
    w->lowest = -1;
    w->n = n;
    for (int k = 0; k < n; k++) {
        w->buckling[k] = (sct_whole_buckling){.combination = combinations[k], .sway = INFINITY};
        for (int i = 0; i < SCT_WHOLE_MODES; i++) w->buckling[k].alpha[i] = INFINITY;
        w->buckling[k].order = sct_second_order_of(INFINITY, false);
    }
    w->fine = sct_fine_new(w->st, SCT_PIECES, engine, &status);
    if (w->fine == NULL) return status;
    w->stability = sct_stability_new(w->fine, SCT_WHOLE_MODES, &status);
    if (w->stability == NULL) return status;
    if (!(w->st->model->least_frequency > 0.0)) return SCT_OK;
    w->vibration = sct_vibration_new(w->fine, SCT_WHOLE_MODES, &status);
    return w->vibration == NULL ? status : SCT_OK;
}

sct_status sct_whole_new(const sct_structure *st, sct_engine engine, sct_slack *slack, int n, const int combinations[],
                         sct_whole **whole)
{
    *whole = NULL;
    if (!is_needed(st)) return SCT_OK;
    sct_whole *w = calloc(1, sizeof *w);
    if (w == NULL) return SCT_NO_MEMORY;
    w->st = st;
    const sct_status status = fill(w, engine, n, combinations);
    if (status == SCT_OK) {
        sct_stability_set_slack(w->stability, slack);
        *whole = w;
    } else
        sct_whole_free(w);
    return status;
}

void sct_whole_free(sct_whole *w)
{
    if (w == NULL) return;
    sct_vibration_free(w->vibration);
    sct_stability_free(w->stability);
    sct_fine_free(w->fine);
    free(w->buckling);
    free(w->of_mode);
    free(w);
}

/* ---- analysis -------------------------------------------------------------------------------------------------------
 */

static void note(sct_whole *w, sct_whole_buckling *b, const sct_modes *modes)
{
    for (int i = 0; i < SCT_WHOLE_MODES; i++) b->alpha[i] = i < modes->n ? modes->lambda[i] : (double)INFINITY;
    b->error = modes->n > 0 ? modes->error[0] : 0.0;
    b->is_proven = modes->n == 0 ? modes->none_below > 0.0 : modes->none_below >= 0.99 * modes->lambda[0];
    b->sway = sct_sway_factor(w->stability, modes, &b->is_sway_bound);
    b->order = sct_second_order_of(b->sway / (1.0 + b->error), w->st->model->amplifies);
    if (b->alpha[0] <= 1.0) b->order = sct_second_order_of(b->alpha[0], false);
}

/* An estimate that has not settled is taken with its error: what is too uncertain fails later, by its bound. */
static bool is_usable(sct_status status)
{
    return status == SCT_OK || status == SCT_NOT_CONVERGED;
}

/* Keeps what a mode says of the members, when its factor is the lowest so far. */
static void note_members(sct_whole *w, int k, const sct_modes *modes)
{
    if (modes->n == 0 || (w->lowest >= 0 && modes->lambda[0] >= w->buckling[w->lowest].alpha[0])) return;
    w->lowest = k;
    for (int e = 0; e < w->st->n_bars; e++)
        for (int plane = 0; plane < w->st->dim - 1; plane++)
            w->of_mode[e][plane] = sct_stability_member(w->stability, modes, 0, e, plane);
}

sct_status sct_whole_analyse(sct_whole *w, const sct_solver *solver, const sct_response *response, sct_mode_search how)
{
    sct_modes modes;
    sct_status status = sct_fine_update(w->fine, sct_solver_sizes(solver));
    w->lowest = -1;
    const sct_model *m = w->st->model; /* the search looks for what it is limited by */
    const bool wants_factors = how == SCT_MODES_PROVEN || m->least_factor > 0.0 || m->amplifies;
    for (int k = 0; k < w->n && status == SCT_OK && wants_factors; k++) {
        status = sct_stability_find(w->stability, response, w->buckling[k].combination, how, &modes);
        if (!is_usable(status)) return status;
        status = SCT_OK;
        note(w, &w->buckling[k], &modes);
        if (how == SCT_MODES_PROVEN) note_members(w, k, &modes);
    }
    for (int i = 0; i < SCT_WHOLE_MODES; i++) w->frequency[i] = INFINITY;
    if (status != SCT_OK || w->vibration == NULL) return status;
    status = sct_vibration_find(w->vibration, how, &modes);
    if (!is_usable(status)) return status;
    for (int i = 0; i < modes.n && i < SCT_WHOLE_MODES; i++) w->frequency[i] = sct_frequency(&modes, i);
    w->mass = sct_vibration_mass(w->vibration);
    return SCT_OK;
}

double sct_whole_utilisation(const sct_whole *w)
{
    const sct_model *m = w->st->model;
    double most = 0.0;
    for (int k = 0; k < w->n && m->least_factor > 0.0; k++)
        most = fmax(most, m->least_factor * (1.0 + w->buckling[k].error) / w->buckling[k].alpha[0]);
    if (w->vibration != NULL) most = fmax(most, m->least_frequency / w->frequency[0]);
    return most;
}

double sct_whole_amplification(const sct_whole *w, int combination)
{
    for (int k = 0; w != NULL && k < w->n; k++)
        if (w->buckling[k].combination == combination) return w->buckling[k].order.factor;
    return 1.0;
}

/* ---- derivatives
 * ------------------------------------------------------------------------------------------------------ */

/* The modes of buckling[k] once more: derivatives are those of what was found last. */
static sct_status find_again(sct_whole *w, const sct_response *response, int k, sct_modes *modes)
{
    const sct_status status =
        sct_stability_find(w->stability, response, w->buckling[k].combination, SCT_MODES_COLD, modes);
    return status == SCT_NOT_CONVERGED ? SCT_OK : status;
}

sct_status sct_whole_factor_limits(sct_whole *w, sct_solver *solver, const sct_response *response, int k, double g[],
                                   double *dg)
{
    const double least = w->st->model->least_factor;
    for (int i = 0; i < SCT_WHOLE_MODES; i++) g[i] = log(fmax(least / w->buckling[k].alpha[i], FAR));
    if (dg == NULL) return SCT_OK;
    sct_modes modes;
    double found[SCT_WHOLE_MODES];
    const sct_status status = find_again(w, response, k, &modes);
    if (status != SCT_OK) return status;
    return sct_stability_limits(w->stability, solver, response, &modes, least, SCT_WHOLE_MODES, found, dg);
}

sct_status sct_whole_frequency_limits(sct_whole *w, double g[], double *dg)
{
    const size_t n = (size_t)w->st->n_vars;
    for (int i = 0; i < SCT_WHOLE_MODES; i++) g[i] = log(fmax(w->st->model->least_frequency / w->frequency[i], FAR));
    if (dg == NULL) return SCT_OK;
    memset(dg, 0, SCT_WHOLE_MODES * n * sizeof *dg);
    sct_modes modes;
    const sct_status status = sct_vibration_find(w->vibration, SCT_MODES_COLD, &modes);
    if (!is_usable(status)) return status;
    for (int i = 0; i < modes.n && i < SCT_WHOLE_MODES; i++)
        sct_vibration_derivative(w->vibration, &modes, i, i, dg + (size_t)i * n);
    for (size_t k = 0; k < SCT_WHOLE_MODES * n; k++) dg[k] *= -0.5; /* ln f = ln(omega^2)/2 - ln 2 pi */
    return SCT_OK;
}

sct_status sct_whole_amplification_slope(sct_whole *w, sct_solver *solver, const sct_response *response, int k,
                                         double D[])
{
    memset(D, 0, (size_t)w->st->n_vars * sizeof *D);
    if (w->buckling[k].order.slope == 0.0) return SCT_OK;
    sct_modes modes;
    sct_status status = find_again(w, response, k, &modes);
    if (status != SCT_OK) return status;
    bool is_bound;
    const double sway = sct_sway_factor(w->stability, &modes, &is_bound);
    int i = 0;
    while (i < modes.n && modes.lambda[i] != sway) i++;
    if (i == modes.n) return SCT_OK; /* a bound moves with no mode */
    status = sct_stability_derivative(w->stability, solver, response, &modes, i, i, D);
    for (int v = 0; v < w->st->n_vars; v++) D[v] *= w->buckling[k].order.slope;
    return status;
}

sct_status sct_whole_worst_limit(sct_whole *w, sct_solver *solver, const sct_response *response, double *g, double *dg)
{
    const size_t n = (size_t)w->st->n_vars;
    int worst = -1;
    *g = -INFINITY;
    for (int k = 0; k < w->n && w->st->model->least_factor > 0.0; k++) {
        const double of_k = log(fmax(w->st->model->least_factor / w->buckling[k].alpha[0], FAR));
        if (of_k <= *g) continue;
        *g = of_k;
        worst = k;
    }
    double all[SCT_WHOLE_MODES], *rows = calloc(SCT_WHOLE_MODES * n + 1, sizeof *rows);
    if (rows == NULL) return SCT_NO_MEMORY;
    const bool is_frequency =
        w->vibration != NULL && log(fmax(w->st->model->least_frequency / w->frequency[0], FAR)) > *g;
    const sct_status status = is_frequency ? sct_whole_frequency_limits(w, all, rows)
                                           : sct_whole_factor_limits(w, solver, response, worst, all, rows);
    *g = all[0];
    memcpy(dg, rows, n * sizeof *dg);
    free(rows);
    return status;
}

/* What a result tells of members that carry moments. */
#include <math.h>
#include <string.h>

#include "analysis/recovery.h"
#include "sizing/result.h"

/* ---- members --------------------------------------------------------------------------------------------------------
 */

static double form_error(const sct_duty *duty, const sct_form *form)
{
    double error = 0.0;
    for (int s = 0; s < form->n_springs; s++)
        error +=
            fabs(form->w[s]) * sct_combined_force_error(duty->st, &duty->response, form->combination, form->spring[s]);
    for (int j = 0; j < form->n_joints; j++)
        error +=
            sct_combined_displacement_error(duty->st, &duty->response, form->combination, form->joint[j], form->dir[j]);
    return isnan(error) ? INFINITY : error;
}

static void consider_place(sct_result *r, sct_member_result *m, const sct_duty *duty, const sct_bent_member *member,
                           const sct_bent_place *place)
{
    const sct_form form = sct_bent_form(member, place, -1, NULL);
    r->utilisation_at_most = sct_worse(r->utilisation_at_most, place->utilisation + form_error(duty, &form));
    if (isnan(m->utilisation) || place->utilisation <= m->utilisation) return;
    m->utilisation = place->utilisation;
    m->check = sct_bent_check_kind(place->kind);
    m->combination = member->combination;
    m->N = place->q[0];
    m->x = place->x;
    m->M[0] = place->q[1];
    m->M[1] = place->q[2];
}

static double largest(const sct_beam_line *line, const sct_beam_state *state, int quantity, double sign, double *at)
{
    double c[SCT_BEAM_QUANTITIES] = {0.0};
    c[quantity] = sign;
    const sct_beam_extreme most = sct_beam_largest(line, state, c);
    if (at != NULL) *at = most.x;
    return sign * most.value;
}

/* Largest moments, forces and bows of one combination. */
static void consider_extremes(sct_member_result *m, const sct_bent_member *member, const sct_shape *shape, double E)
{
    const sct_beam_line line = sct_member_line(member->lines, member->bar, member->combination, member->A);
    const sct_beam_state state = sct_member_state(member->st, member->S, member->bar);
    const double N_max = largest(&line, &state, SCT_BEAM_N, 1.0, NULL),
                 N_min = largest(&line, &state, SCT_BEAM_N, -1.0, NULL);
    if (N_max > m->N_max) {
        m->N_max = N_max;
        m->N_max_in = member->combination;
    }
    if (N_min < m->N_min) {
        m->N_min = N_min;
        m->N_min_in = member->combination;
    }
    for (int plane = 0; plane < 2; plane++) {
        for (int sign = 1; sign >= -1; sign -= 2) {
            double x;
            const double M = largest(&line, &state, SCT_BEAM_M + plane, sign, &x);
            if (!(fabs(M) > fabs(m->M_most[plane]))) continue;
            m->M_most[plane] = M;
            m->M_most_at[plane] = x;
            m->M_most_in[plane] = member->combination;
        }
        const sct_beam_bending bending = {.plane = plane,
                                          .EI = E * shape->i[plane] * shape->i[plane] * shape->A,
                                          .kappa =
                                              sct_free_curvature(member->st, member->combination, member->bar, plane)};
        if (!(bending.EI > 0.0)) continue;
        const double v = sct_beam_largest_bow(&line, &state, &bending).value;
        if (!(fabs(v) > fabs(m->bow[plane]))) continue;
        m->bow[plane] = v;
        m->bow_in[plane] = member->combination;
    }
}

void sct_result_fill_bent(sct_result *r, const sct_duty *duty, const sct_design *design, int bar)
{
    const sct_bar *b = &duty->st->bars[bar];
    const sct_shape shape = sct_design_shape(design, b->group);
    sct_member_result *m = &r->members[bar];
    m->N_max = -INFINITY;
    m->N_min = INFINITY;
    for (int c = 0; c < r->n_combinations; c++) {
        const sct_bent_member member = sct_duty_bent_member(duty, bar, c);
        consider_extremes(m, &member, &shape, b->E);
    }
    for (int k = 0; k < duty->n_allowable; k++) {
        const sct_bent_member member = sct_duty_bent_member(duty, bar, duty->allowable[k]);
        sct_bent_place places[SCT_BENT_PLACES];
        sct_bent_places(&member, &duty->rules[bar], &shape, places);
        for (int p = 0; p < SCT_BENT_PLACES; p++) consider_place(r, m, duty, &member, &places[p]);
    }
}

/* ---- bows
 * ------------------------------------------------------------------------------------------------------------ */

static double EI_of(const sct_duty *duty, const sct_design *design, const sct_bow_row *row)
{
    const sct_bar *bar = &duty->st->bars[row->bar];
    const double i = design->i[bar->group][duty->st->model->bows[row->limit].axis];
    return bar->E * i * i * design->A[bar->group];
}

static void consider_bow(sct_result *r, const sct_duty *duty, const sct_design *design, const sct_bow_row *row,
                         sct_bow_result *out)
{
    const double EI = EI_of(duty, design, row);
    const sct_bent_member member = sct_duty_bent_member(duty, row->bar, row->combination);
    const sct_bow_place place = sct_bow_farthest(&member, &duty->response, row, EI);
    const sct_form form = sct_bow_form(&member, row, &place, EI, -1, NULL);
    const double utilisation = sct_settled(fabs(place.v) / row->at_most);
    r->utilisation_at_most =
        sct_worse(r->utilisation_at_most, (fabs(place.v) + form_error(duty, &form)) / row->at_most);
    if (out->combination >= 0 && (isnan(out->utilisation) || utilisation <= out->utilisation)) return;
    out->combination = row->combination;
    out->x = place.x;
    out->v = place.v;
    out->utilisation = utilisation;
    r->utilisation = sct_worse(r->utilisation, utilisation);
}

/* Rows of one limit, member and run go into one result. */
static sct_bow_result *bow_of(sct_result *r, const sct_duty *duty, const sct_bow_row *row)
{
    const sct_model *model = duty->st->model;
    const char *run = row->run >= 0 ? model->runs[row->run].name : NULL;
    for (int k = 0; k < r->n_bows; k++) {
        sct_bow_result *b = &r->bows[k];
        if (b->limit == row->limit && b->member == row->bar && b->run == run) return b;
    }
    sct_bow_result *b = &r->bows[r->n_bows++];
    *b = (sct_bow_result){.limit = row->limit,
                          .member = row->bar,
                          .combination = -1,
                          .axis = model->bows[row->limit].axis,
                          .at_most = row->at_most,
                          .label = model->bows[row->limit].label,
                          .run = run};
    return b;
}

static sct_status fill_bows(sct_result *r, const sct_duty *duty, const sct_design *design)
{
    r->bows = sct_result_array(r, (size_t)duty->n_bows, sizeof *r->bows);
    if (r->bows == NULL) return SCT_NO_MEMORY;
    for (int k = 0; k < duty->n_bows; k++)
        consider_bow(r, duty, design, &duty->bows[k], bow_of(r, duty, &duty->bows[k]));
    return SCT_OK;
}

/* ---- ends and what stations need
 * --------------------------------------------------------------------------------------- */

static void fill_ends(const sct_duty *duty, int c, double *ends)
{
    static const int ORDER[6] = {SCT_BEAM_N, SCT_BEAM_V, SCT_BEAM_V + 1, SCT_BEAM_M, SCT_BEAM_M + 1, SCT_BEAM_T};
    for (int bar = 0; bar < duty->st->n_bars; bar++) {
        const sct_bent_member m = sct_duty_bent_member(duty, bar, c);
        const sct_beam_line line = sct_member_line(m.lines, bar, c, m.A);
        const sct_beam_state state = sct_member_state(m.st, m.S, bar);
        for (int end = 0; end < 2; end++) {
            double value[SCT_BEAM_QUANTITIES];
            sct_beam_values(&line, &state, end == 0 ? 0 : line.n - 1, end == 0 ? 0.0 : line.L, value);
            for (int i = 0; i < 6; i++) ends[((size_t)bar * 2 + (size_t)end) * 6 + (size_t)i] = value[ORDER[i]];
        }
    }
}

static void fill_axes(sct_result *r, const sct_duty *duty)
{
    for (int bar = 0; bar < r->n_members; bar++) {
        const sct_bar *b = &duty->st->bars[bar];
        sct_member_result *m = &r->members[bar];
        memcpy(m->axes, b->axes, sizeof m->axes);
        for (int end = 0; end < 2; end++)
            for (int turn = 0; turn < SCT_TURNS; turn++) {
                m->hinged[end][turn] = b->hinges.free_turn[turn][end];
                m->sprung[end][turn] = b->end_dof[end][turn] >= 0;
            }
    }
}

/* A structure of the result's own: the duty's goes with the search. */
static sct_status keep_structure(sct_result_memory *memory, const sct_duty *duty, const sct_design *design)
{
    const size_t n_S = (size_t)duty->st->n_combinations * (size_t)duty->st->n_springs,
                 n_groups = (size_t)duty->st->n_groups;
    sct_issues *issues = sct_issues_new(); /* they have been told */
    if (issues == NULL) return SCT_NO_MEMORY;
    const sct_status status = sct_structure_build(duty->st->model, &memory->st, issues);
    sct_issues_free(issues);
    if (status != SCT_OK) return status;
    memory->lines = sct_member_lines_new(memory->st);
    memory->S = sct_result_array(&memory->open, n_S, sizeof *memory->S);
    memory->A = sct_result_array(&memory->open, n_groups, sizeof *memory->A);
    memory->I = sct_result_array(&memory->open, n_groups, sizeof *memory->I);
    if (memory->lines == NULL || memory->S == NULL || memory->A == NULL || memory->I == NULL) return SCT_NO_MEMORY;
    memcpy(memory->S, duty->S, n_S * sizeof *memory->S);
    memcpy(memory->A, design->A, n_groups * sizeof *memory->A);
    for (size_t g = 0; g < n_groups; g++)
        for (int axis = 0; axis < 2; axis++)
            memory->I[g][axis] = design->i[g][axis] * design->i[g][axis] * design->A[g];
    return SCT_OK;
}

/* ---- the whole
 * ---------------------------------------------------------------------------------------------------------- */

static sct_status fill_whole(sct_result *r, const sct_duty *duty)
{
    const sct_model *model = duty->st->model;
    r->least_factor = model->least_factor > 0.0 ? model->least_factor : (double)NAN;
    r->least_frequency = model->least_frequency > 0.0 ? model->least_frequency : (double)NAN;
    r->frequency = r->vibrating_mass = NAN;
    r->lowest_critical = -1;
    for (int e = 0; e < r->n_members; e++)
        for (int plane = 0; plane < 2; plane++) r->members[e].mode_Lcr[plane] = NAN;
    if (!duty->has_whole) return SCT_OK;
    const sct_whole *w = duty->whole;
    r->criticals = sct_result_array(r, (size_t)w->n, sizeof *r->criticals);
    if (r->criticals == NULL) return SCT_NO_MEMORY;
    r->n_criticals = w->n;
    for (int k = 0; k < w->n; k++) {
        const sct_whole_buckling *b = &w->buckling[k];
        r->criticals[k] = (sct_critical_result){
            .combination = b->combination,
            .factor = b->alpha[0],
            .error = b->error,
            .is_proven = b->is_proven,
            .sway = b->sway,
            .is_sway_bound = b->is_sway_bound,
            .amplification = b->order.factor,
            .has_verdict = b->order.kind != SCT_NO_VERDICT && b->order.kind != SCT_BUCKLED,
            .words = b->order.words,
        };
    }
    r->lowest_critical = w->lowest;
    for (int e = 0; e < r->n_members && w->lowest >= 0; e++)
        for (int plane = 0; plane < r->dimensions - 1; plane++) {
            const sct_member_mode *mode = &w->of_mode[e][plane];
            r->members[e].mode_share[plane] = mode->share;
            if (isfinite(mode->Lcr)) r->members[e].mode_Lcr[plane] = mode->Lcr;
        }
    if (w->vibration != NULL) {
        r->frequency = w->frequency[0];
        r->vibrating_mass = w->mass;
    }
    const double utilisation = sct_settled(sct_whole_utilisation(w));
    r->utilisation = sct_worse(r->utilisation, utilisation);
    r->utilisation_at_most = sct_worse(r->utilisation_at_most, utilisation);
    return SCT_OK;
}

sct_status sct_result_fill_frame(sct_result *r, const sct_duty *duty, const sct_design *design)
{
    r->has_bent = duty->n_bent > 0;
    fill_axes(r, duty);
    sct_status status = fill_whole(r, duty);
    if (status == SCT_OK) status = fill_bows(r, duty, design);
    if (status != SCT_OK || !r->has_bent) return status;
    const size_t block = (size_t)r->n_members * 12;
    r->ends = sct_result_array(r, (size_t)r->n_combinations * block, sizeof *r->ends);
    if (r->ends == NULL) return SCT_NO_MEMORY;
    for (int c = 0; c < r->n_combinations; c++) fill_ends(duty, c, r->ends + (size_t)c * block);
    return keep_structure((sct_result_memory *)r, duty, design);
}

/* What a structure must do, and one design judged against it. */
#include "duty.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/recovery.h"

static const double NO_FORCE = 1e-9; /* of the largest force in its combination: rounding, not load */

/* The reader promises these; a NAN among them would make every check pass in silence. */
static bool is_sound(const sct_bar_rule *r)
{
    return r->E > 0.0 && r->f_t > 0.0 && r->f_c > 0.0 && r->Lcr[0] > 0.0 && r->Lcr[1] > 0.0 &&
           (r->buckling == SCT_BUCKLING_NONE || r->safety >= 1.0) &&
           (r->buckling != SCT_BUCKLING_EULER_JOHNSON || r->yield > 0.0) && r->slenderness_any > 0.0 &&
           r->slenderness_compression > 0.0;
}

/* By limit, combination, joint. */
static void list_rows(const sct_model *model, sct_deflection_row *rows, int *n)
{
    *n = 0;
    for (int limit = 0; limit < model->n_deflections; limit++) {
        const sct_deflection_limit *d = &model->deflections[limit];
        for (int c = 0; c < model->n_combinations; c++)
            for (int k = 0; d->in[c] && k < d->n_joints; k++) {
                if (rows != NULL)
                    rows[*n] = (sct_deflection_row){limit, d->joints[k], c, d->from != NULL ? d->from[k] : -1};
                (*n)++;
            }
    }
}

static sct_status fill(sct_duty *duty, sct_engine engine)
{
    const sct_structure *st = duty->st;
    const sct_model *model = st->model;
    const size_t n_bars = (size_t)st->n_bars, n_groups = (size_t)st->n_groups, n_comb = (size_t)st->n_combinations;
    sct_status status;
    duty->solver = sct_solver_new(st, engine, &status);
    if (duty->solver == NULL) return status;
    status = sct_response_new(st, &duty->response);
    if (status != SCT_OK) return status;
    duty->slack = sct_slack_new(st);
    if (duty->slack == NULL) return SCT_NO_MEMORY;
    duty->arena = sct_arena_new();
    if (duty->arena == NULL) return SCT_NO_MEMORY;
    list_rows(model, NULL, &duty->n_rows);
    duty->rules = sct_arena_array(duty->arena, n_bars, sizeof *duty->rules);
    duty->length = sct_arena_array(duty->arena, n_groups, sizeof(double));
    duty->unit_mass = sct_arena_array(duty->arena, n_groups, sizeof(double));
    duty->allowable = sct_arena_array(duty->arena, n_comb, sizeof(int));
    duty->rows = sct_arena_array(duty->arena, (size_t)duty->n_rows, sizeof *duty->rows);
    duty->N = sct_arena_array(duty->arena, n_comb * n_bars, sizeof(double));
    duty->S = sct_arena_array(duty->arena, n_comb * (size_t)st->n_springs, sizeof(double));
    duty->of_joints = sct_arena_array(duty->arena, 12 * (size_t)st->n_joints, sizeof(double));
    duty->u = sct_arena_array(duty->arena, (size_t)duty->n_rows, sizeof(double));
    duty->worst_compression = sct_arena_array(duty->arena, n_bars, sizeof(double));
    duty->n_bows = sct_bow_rows(st, NULL);
    duty->bows = sct_arena_array(duty->arena, (size_t)duty->n_bows, sizeof *duty->bows);
    duty->bent = sct_arena_array(duty->arena, n_bars, sizeof *duty->bent);
    duty->sizes = sct_arena_array(duty->arena, n_groups, sizeof *duty->sizes);
    duty->lines = sct_member_lines_new(st);
    if (duty->bows == NULL || duty->bent == NULL || duty->sizes == NULL || duty->lines == NULL) return SCT_NO_MEMORY;
    if (duty->rules == NULL || duty->length == NULL || duty->unit_mass == NULL || duty->allowable == NULL ||
        duty->rows == NULL || duty->N == NULL || duty->S == NULL || duty->of_joints == NULL || duty->u == NULL ||
        duty->worst_compression == NULL)
        return SCT_NO_MEMORY;
    list_rows(model, duty->rows, &duty->n_rows);
    sct_bow_rows(st, duty->bows);
    for (int bar = 0; bar < st->n_bars; bar++)
        if (st->bars[bar].is_bent) duty->bent[duty->n_bent++] = bar;
    for (int bar = 0; bar < st->n_bars; bar++) {
        duty->rules[bar] = sct_bar_rule_of(model, bar, st->bars[bar].L);
        if (!is_sound(&duty->rules[bar])) return SCT_SELF_CHECK;
        duty->length[st->bars[bar].group] += st->bars[bar].L;
        duty->unit_mass[st->bars[bar].group] += st->bars[bar].L * st->bars[bar].density;
    }
    for (int c = 0; c < st->n_combinations; c++)
        if (model->combinations[c].basis == SCT_ALLOWABLE) duty->allowable[duty->n_allowable++] = c;
    return sct_whole_new(st, engine, duty->slack, duty->n_allowable, duty->allowable, &duty->whole);
}

sct_duty *sct_duty_new(const sct_structure *st, sct_engine engine, sct_status *status)
{
    sct_duty *duty = calloc(1, sizeof *duty);
    *status = SCT_NO_MEMORY;
    if (duty == NULL) return NULL;
    duty->st = st;
    *status = fill(duty, engine);
    if (*status == SCT_OK) return duty;
    sct_duty_free(duty);
    return NULL;
}

void sct_duty_free(sct_duty *duty)
{
    if (duty == NULL) return;
    sct_whole_free(duty->whole);
    sct_member_lines_free(duty->lines);
    sct_slack_free(duty->slack);
    sct_solver_free(duty->solver);
    sct_response_free(&duty->response);
    sct_arena_free(duty->arena);
    free(duty);
}

sct_status sct_design_new(sct_arena *arena, int n_groups, sct_design *design)
{
    design->A = sct_arena_array(arena, (size_t)n_groups, sizeof *design->A);
    design->i = sct_arena_array(arena, (size_t)n_groups, sizeof *design->i);
    design->W = sct_arena_array(arena, (size_t)n_groups, sizeof *design->W);
    design->J = sct_arena_array(arena, (size_t)n_groups, sizeof *design->J);
    design->section = sct_arena_array(arena, (size_t)n_groups, sizeof *design->section);
    if (design->A == NULL || design->i == NULL || design->W == NULL || design->J == NULL || design->section == NULL)
        return SCT_NO_MEMORY;
    for (int g = 0; g < n_groups; g++) design->section[g] = -1;
    return SCT_OK;
}

void sct_design_copy(int n_groups, const sct_design *from, sct_design *to)
{
    memcpy(to->A, from->A, (size_t)n_groups * sizeof *to->A);
    memcpy(to->i, from->i, (size_t)n_groups * sizeof *to->i);
    memcpy(to->W, from->W, (size_t)n_groups * sizeof *to->W);
    memcpy(to->J, from->J, (size_t)n_groups * sizeof *to->J);
    memcpy(to->section, from->section, (size_t)n_groups * sizeof *to->section);
}

void sct_design_section(const sct_model *model, int group, int section, sct_design *design)
{
    const sct_section *x = &model->families[model->groups[group].family].sections[section];
    design->section[group] = section;
    design->A[group] = x->A;
    design->J[group] = x->J;
    for (int axis = 0; axis < 2; axis++) {
        design->i[group][axis] = sqrt(x->I[axis] / x->A);
        design->W[group][axis] = x->W[axis];
    }
}

sct_shape sct_design_shape(const sct_design *design, int g)
{
    return (sct_shape){
        .A = design->A[g], .i = {design->i[g][0], design->i[g][1]}, .W = {design->W[g][0], design->W[g][1]}};
}

sct_properties sct_design_properties(const sct_design *design, int g)
{
    const double A = design->A[g], *i = design->i[g];
    sct_properties p = {.P = {A, i[0] * i[0] * A, i[1] * i[1] * A, design->J[g]}};
    memcpy(p.d1, p.P, sizeof p.P);
    memcpy(p.d2, p.P, sizeof p.P);
    return p;
}

void sct_design_area(const sct_model *model, int group, double A, sct_design *design)
{
    design->section[group] = -1;
    design->A[group] = A;
    const sct_group *g = &model->groups[group];
    design->J[group] = g->J.c * pow(A, g->J.p);
    for (int axis = 0; axis < 2; axis++) {
        design->i[group][axis] = sqrt(g->I[axis].c * pow(A, g->I[axis].p - 1.0));
        design->W[group][axis] = g->W[axis].c * pow(A, g->W[axis].p);
    }
}

double sct_duty_mass(const sct_duty *duty, const sct_design *design)
{
    double mass = 0.0;
    for (int g = 0; g < duty->st->n_groups; g++) mass += duty->unit_mass[g] * design->A[g];
    return mass;
}

/* Forces of one combination, with what is only rounding taken for what it is: none. */
static void gather_forces(sct_duty *duty, int c)
{
    const size_t n_bars = (size_t)duty->st->n_bars;
    double *S = duty->S + (size_t)c * (size_t)duty->st->n_springs, largest = 0.0;
    sct_combine_springs(duty->st, &duty->response, c, S);
    for (size_t bar = 0; bar < n_bars; bar++) largest = fmax(largest, fabs(S[bar]));
    for (size_t bar = 0; bar < n_bars; bar++)
        if (fabs(S[bar]) <= NO_FORCE * largest) S[bar] = 0.0;
    for (int i = 0; i < duty->st->n_ties; i++) {
        double *N = &S[duty->st->ties[i]];
        if (*N < 0.0 || sct_slack_is(duty->slack, c, i)) *N = 0.0;
    }
    memcpy(duty->N + (size_t)c * n_bars, S, n_bars * sizeof *S);
}

static void gather_compression(sct_duty *duty)
{
    const sct_structure *st = duty->st;
    for (int bar = 0; bar < st->n_bars; bar++) {
        double least = 0.0;
        for (int k = 0; k < duty->n_allowable; k++)
            least = fmin(least, duty->N[(size_t)duty->allowable[k] * (size_t)st->n_bars + (size_t)bar]);
        duty->worst_compression[bar] = least;
    }
}

static double row_displacement(const sct_duty *duty, const sct_deflection_row *row)
{
    const sct_structure *st = duty->st;
    const double *factor = sct_factors(st, row->combination);
    const double *dir = st->model->deflections[row->limit].direction;
    double u = 0.0;
    for (int k = 0; k < st->n_cases; k++) {
        const double *u_k = duty->response.u + (size_t)k * (size_t)st->n_dof;
        const double *settled = st->settled + (size_t)k * (size_t)st->n_joints * 3;
        double d[3], from[3] = {0.0};
        if (factor[k] == 0.0) continue;
        sct_joint_displacement(st, u_k, settled, row->joint, d);
        if (row->from >= 0) sct_joint_displacement(st, u_k, settled, row->from, from);
        u += factor[k] * ((d[0] - from[0]) * dir[0] + (d[1] - from[1]) * dir[1] + (d[2] - from[2]) * dir[2]);
    }
    return u;
}

sct_status sct_duty_gather(sct_duty *duty)
{
    const sct_structure *st = duty->st;
    const sct_status status = sct_slack_find(duty->slack, duty->solver, &duty->response);
    if (status != SCT_OK) return status;
    for (int c = 0; c < st->n_combinations; c++) gather_forces(duty, c);
    for (int r = 0; r < duty->n_rows; r++) duty->u[r] = row_displacement(duty, &duty->rows[r]);
    gather_compression(duty);
    duty->has_whole = false;
    return SCT_OK;
}

sct_status sct_duty_find_whole(sct_duty *duty, sct_mode_search how)
{
    if (duty->whole == NULL || (duty->has_whole && how != SCT_MODES_PROVEN)) return SCT_OK;
    const sct_status status = sct_whole_analyse(duty->whole, duty->solver, &duty->response, how);
    duty->has_whole = status == SCT_OK;
    return status;
}

/* What the search goes by: only where something depends on it. */
static sct_status finish(sct_duty *duty)
{
    const sct_model *model = duty->st->model;
    const sct_status status = sct_duty_gather(duty);
    if (status != SCT_OK || (!sct_whole_is_limited(model) && !sct_whole_amplifies(model))) return status;
    return sct_duty_find_whole(duty, SCT_MODES_COLD);
}

sct_status sct_duty_analyse_areas(sct_duty *duty, const double A[])
{
    const sct_status status = sct_solver_analyse(duty->solver, A, &duty->response);
    return status == SCT_OK ? finish(duty) : status;
}

sct_status sct_duty_analyse_sizes(sct_duty *duty, const sct_properties sizes[])
{
    const sct_status status = sct_solver_analyse_sizes(duty->solver, sizes, &duty->response);
    return status == SCT_OK ? finish(duty) : status;
}

sct_status sct_duty_analyse(sct_duty *duty, const sct_design *design)
{
    if (duty->st->n_springs == duty->st->n_bars) return sct_duty_analyse_areas(duty, design->A);
    for (int g = 0; g < duty->st->n_groups; g++) duty->sizes[g] = sct_design_properties(design, g);
    return sct_duty_analyse_sizes(duty, duty->sizes);
}

bool sct_duty_is_compressed(const sct_duty *duty, int bar)
{
    return duty->worst_compression[bar] < 0.0;
}

sct_bent_member sct_duty_bent_member(const sct_duty *duty, int bar, int combination)
{
    return (sct_bent_member){.lines = duty->lines,
                             .st = duty->st,
                             .bar = bar,
                             .combination = combination,
                             .S = duty->S + (size_t)combination * (size_t)duty->st->n_springs,
                             .A = sct_solver_areas(duty->solver)[duty->st->bars[bar].group],
                             .amplification =
                                 duty->has_whole ? sct_whole_amplification(duty->whole, combination) : 1.0};
}

static double bent_utilisation(const sct_duty *duty, int bar, int combination, const sct_shape *shape)
{
    const sct_bent_member member = sct_duty_bent_member(duty, bar, combination);
    sct_bent_place places[SCT_BENT_PLACES];
    double most = 0.0;
    sct_bent_places(&member, &duty->rules[bar], shape, places);
    for (int p = 0; p < SCT_BENT_PLACES; p++) most = sct_worse(most, places[p].utilisation);
    return most;
}

double sct_duty_bar_utilisation(const sct_duty *duty, int bar, const sct_shape *shape)
{
    const sct_bar_rule *rule = &duty->rules[bar];
    double most = sct_bar_slenderness(rule, shape->i, sct_duty_is_compressed(duty, bar), NULL).utilisation;
    for (int k = 0; k < duty->n_allowable; k++) {
        const double N = duty->N[(size_t)duty->allowable[k] * (size_t)duty->st->n_bars + (size_t)bar];
        sct_bar_check checks[SCT_MOST_BAR_CHECKS];
        if (duty->st->bars[bar].is_bent) {
            most = sct_worse(most, bent_utilisation(duty, bar, duty->allowable[k], shape));
            continue;
        }
        const int n = sct_bar_checks(rule, N, shape->A, shape->i, checks);
        for (int j = 0; j < n; j++) most = sct_worse(most, checks[j].utilisation);
    }
    return most;
}

double sct_duty_bow_utilisation(const sct_duty *duty, int row, const sct_shape *shape)
{
    const sct_bow_row *r = &duty->bows[row];
    const sct_bent_member member = sct_duty_bent_member(duty, r->bar, r->combination);
    const double i = shape->i[duty->st->model->bows[r->limit].axis];
    const double EI = duty->rules[r->bar].E * i * i * shape->A;
    return fabs(sct_bow_farthest(&member, &duty->response, r, EI).v) / r->at_most;
}

sct_form sct_duty_deflection_form(const sct_duty *duty, int index)
{
    const sct_deflection_row *row = &duty->rows[index];
    const double *dir = duty->st->model->deflections[row->limit].direction;
    sct_form form = {.combination = row->combination, .value = duty->u[index], .n_joints = 1, .own = -1};
    form.joint[0] = row->joint;
    memcpy(form.dir[0], dir, sizeof form.dir[0]);
    if (row->from < 0) return form;
    form.n_joints = 2;
    form.joint[1] = row->from;
    for (int i = 0; i < 3; i++) form.dir[1][i] = -dir[i];
    return form;
}

double sct_duty_row_utilisation(const sct_duty *duty, int row)
{
    return fabs(duty->u[row]) / duty->st->model->deflections[duty->rows[row].limit].at_most;
}

double sct_duty_utilisation(const sct_duty *duty, const sct_design *design)
{
    double most = 0.0;
    for (int bar = 0; bar < duty->st->n_bars; bar++) {
        const int g = duty->st->bars[bar].group;
        const sct_shape shape = sct_design_shape(design, g);
        most = sct_worse(most, sct_duty_bar_utilisation(duty, bar, &shape));
    }
    for (int r = 0; r < duty->n_rows; r++) most = sct_worse(most, sct_duty_row_utilisation(duty, r));
    for (int r = 0; r < duty->n_bows; r++) {
        const sct_shape shape = sct_design_shape(design, duty->st->bars[duty->bows[r].bar].group);
        most = sct_worse(most, sct_duty_bow_utilisation(duty, r, &shape));
    }
    if (duty->has_whole) most = sct_worse(most, sct_whole_utilisation(duty->whole));
    return most;
}

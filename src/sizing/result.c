/* The finished result of one design. */
#include "result.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/recovery.h"
#include "base/number.h"
#include "base/text.h"

void *sct_result_array(sct_result *result, size_t n, size_t size)
{
    return sct_arena_array(((sct_result_memory *)result)->arena, n, size);
}

void sct_result_free(sct_result *result)
{
    if (result == NULL) return;
    sct_result_memory *memory = (sct_result_memory *)result;
    sct_member_lines_free(memory->lines);
    sct_structure_free(memory->st);
    sct_arena_free(memory->arena);
    free(memory);
}

static sct_status allocate(sct_result *r, const sct_duty *duty)
{
    const sct_model *model = duty->st->model;
    r->model = model;
    r->us_customary = model->us_customary;
    r->title = model->title;
    r->dimensions = model->dimensions;
    r->n_joints = model->n_joints;
    r->n_members = model->n_members;
    r->n_groups = model->n_groups;
    r->n_combinations = model->n_combinations;
    r->n_cases = model->n_cases;
    for (int k = 0; k < model->n_deflections; k++) r->n_deflections += model->deflections[k].n_joints;
    const size_t n_comb = (size_t)r->n_combinations, n_joints = (size_t)r->n_joints, n_members = (size_t)r->n_members;
#define ARRAY(what, count) ((r->what = sct_result_array(r, (count), sizeof *r->what)) != NULL)
    const bool ok = ARRAY(joints, n_joints) && ARRAY(members, n_members) && ARRAY(groups, (size_t)r->n_groups) &&
                    ARRAY(combinations, n_comb) && ARRAY(is_for_strength, n_comb) && ARRAY(u, n_comb * n_joints * 3) &&
                    ARRAY(N, n_comb * n_members) && ARRAY(reaction, n_comb * n_joints * 3) &&
                    ARRAY(load, n_comb * n_joints * 3) && ARRAY(moment, n_comb * n_joints * 3) &&
                    ARRAY(turn, n_comb * n_joints * 3) && ARRAY(moment_load, n_comb * n_joints * 3) &&
                    ARRAY(deflections, (size_t)r->n_deflections);
#undef ARRAY
    return ok ? SCT_OK : SCT_NO_MEMORY;
}

/* Forces and moments of joints apart. */
static void part(int n_joints, const double both[], double *forces, double *moments)
{
    for (int i = 0; i < 3 * n_joints; i++) {
        forces[i] = both[6 * (i / 3) + i % 3];
        moments[i] = both[6 * (i / 3) + 3 + i % 3];
    }
}

static void fill_responses(sct_result *r, const sct_duty *duty, const sct_design *design)
{
    const size_t block = (size_t)r->n_joints * 3, n_members = (size_t)r->n_members;
    double *load = duty->of_joints, *reaction = load + 6 * r->n_joints;
    memcpy(r->N, duty->N, (size_t)r->n_combinations * n_members * sizeof *r->N);
    for (int c = 0; c < r->n_combinations; c++) {
        const size_t k = (size_t)c;
        r->combinations[c] = duty->st->model->combinations[c].name;
        r->is_for_strength[c] = duty->st->model->combinations[c].basis == SCT_ALLOWABLE;
        sct_combine_displacements(duty->st, &duty->response, c, r->u + k * block);
        sct_combine_rotations(duty->st, &duty->response, c, r->turn + k * block);
        sct_combine_loads(duty->st, design->A, c, load);
        sct_reactions(duty->st, duty->S + k * (size_t)duty->st->n_springs, load, reaction);
        part(r->n_joints, load, r->load + k * block, r->moment_load + k * block);
        part(r->n_joints, reaction, r->reaction + k * block, r->moment + k * block);
    }
}

/* Which of the members that carry tension only are slack. */
static sct_status fill_slack(sct_result *r, const sct_duty *duty)
{
    const sct_structure *st = duty->st;
    if (st->n_ties == 0) return SCT_OK;
    r->slack = sct_result_array(r, (size_t)r->n_combinations * (size_t)r->n_members, sizeof *r->slack);
    if (r->slack == NULL) return SCT_NO_MEMORY;
    for (int c = 0; c < r->n_combinations; c++)
        for (int i = 0; i < st->n_ties; i++)
            r->slack[(size_t)c * (size_t)r->n_members + (size_t)st->ties[i]] = sct_slack_is(duty->slack, c, i);
    return SCT_OK;
}

static void fill_joints(sct_result *r, const sct_model *model)
{
    for (int j = 0; j < r->n_joints; j++) {
        const sct_joint *joint = &model->joints[j];
        r->joints[j] = (sct_joint_result){.name = joint->name, .n_held = joint->n_held};
        memcpy(r->joints[j].at, joint->at, sizeof joint->at);
        memcpy(r->joints[j].held, joint->held, sizeof joint->held);
    }
}

static void fill_groups(sct_result *r, const sct_duty *duty, const sct_design *design)
{
    static const double TUBE = 2.8284271247461903; /* sqrt 8: depth / radius of gyration of a thin round tube */
    const sct_model *model = duty->st->model;
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group *group = &model->groups[g];
        const double A = design->A[g], *i = design->i[g], density = model->materials[group->material].density;
        const sct_section *section =
            design->section[g] >= 0 ? &model->families[group->family].sections[design->section[g]] : NULL;
        sct_group_result *out = &r->groups[g];
        *out = (sct_group_result){
            .name = group->name,
            .material = model->materials[group->material].name,
            .section = section != NULL ? section->name : NULL,
            .is_held = group->kind == SCT_HELD_AREA || group->kind == SCT_HELD_SECTION,
            .A = A,
            .I = {i[0] * i[0] * A, i[1] * i[1] * A},
            .length = duty->length[g],
            .unit_mass = density * A,
            .mass = density * A * duty->length[g],
            .A_continuous = NAN,
            .worst_member = -1,
        };
        if (section != NULL) {
            out->I[0] = section->I[0];
            out->I[1] = section->I[1];
        }
        out->J = design->J[g];
        memcpy(out->W, design->W[g], sizeof out->W);
        out->depth = section != NULL && section->depth > 0.0 ? section->depth : i[0] > 0.0 ? TUBE * i[0] : 0.0;
    }
}

double sct_settled(double utilisation)
{
    return utilisation > 1.0 && sct_keeps(utilisation) ? 1.0 : utilisation;
}

static void consider(sct_member_result *m, const sct_bar_check *check, int combination, double N)
{
    if (isnan(m->utilisation) || check->utilisation <= m->utilisation) return;
    m->utilisation = check->utilisation;
    m->check = check->kind;
    m->combination = combination;
    m->N = N;
}

/* The strength checks of a bar, with its force moved either way by what its error may be. */
static double utilisation_at_most(const sct_duty *duty, int combination, int bar, double N, double A, const double i[2])
{
    const double error = sct_combined_force_error(duty->st, &duty->response, combination, bar);
    double most = 0.0;
    for (int side = -1; side <= 1 && N != 0.0; side += 2) {
        sct_bar_check checks[SCT_MOST_BAR_CHECKS];
        const int n = sct_bar_checks(&duty->rules[bar], N + side * error, A, i, checks);
        for (int j = 0; j < n; j++) most = sct_worse(most, checks[j].utilisation);
    }
    return most;
}

static void fill_member(sct_result *r, const sct_duty *duty, const sct_design *design, int bar)
{
    const sct_bar *b = &duty->st->bars[bar];
    const sct_bar_rule *rule = &duty->rules[bar];
    const double *i = design->i[b->group];
    sct_member_result *m = &r->members[bar];
    *m = (sct_member_result){
        .name = duty->st->model->members[bar].name,
        .group = b->group,
        .from = b->from,
        .to = b->to,
        .L = b->L,
        .Lcr = {rule->Lcr[0], rule->Lcr[1]},
        .lambda = {rule->Lcr[0] / i[0], rule->Lcr[1] / i[1]},
        .mass = b->density * design->A[b->group] * b->L,
        .combination = -1,
        .N_max = -INFINITY,
        .N_min = INFINITY,
        .compressed = sct_duty_is_compressed(duty, bar),
        .is_bent = b->is_bent,
    };
    for (int c = 0; c < r->n_combinations; c++) {
        const double N = r->N[(size_t)c * (size_t)r->n_members + (size_t)bar];
        if (N > m->N_max) {
            m->N_max = N;
            m->N_max_in = c;
        }
        if (N < m->N_min) {
            m->N_min = N;
            m->N_min_in = c;
        }
    }
    if (b->is_bent) sct_result_fill_bent(r, duty, design, bar);
    for (int k = 0; k < duty->n_allowable && !b->is_bent; k++) {
        const int c = duty->allowable[k];
        const double N = r->N[(size_t)c * (size_t)r->n_members + (size_t)bar];
        sct_bar_check checks[SCT_MOST_BAR_CHECKS];
        const int n = sct_bar_checks(rule, N, design->A[b->group], i, checks);
        for (int j = 0; j < n; j++) consider(m, &checks[j], c, N);
        r->utilisation_at_most =
            sct_worse(r->utilisation_at_most, utilisation_at_most(duty, c, bar, N, design->A[b->group], i));
    }
    const sct_bar_check slender = sct_bar_slenderness(rule, i, m->compressed, NULL);
    consider(m, &slender, -1, m->compressed ? m->N_min : m->N_max); /* the force that the limit is about */
    r->utilisation_at_most = sct_worse(r->utilisation_at_most, slender.utilisation);
    m->utilisation = sct_settled(m->utilisation);
    sct_group_result *g = &r->groups[b->group];
    g->n_members++;
    if (g->worst_member < 0 || m->utilisation > r->members[g->worst_member].utilisation) g->worst_member = bar;
    r->utilisation = sct_worse(r->utilisation, m->utilisation);
}

static void consider_row(sct_result *r, const sct_duty *duty, int row, sct_deflection_result *out)
{
    const double utilisation = sct_settled(sct_duty_row_utilisation(duty, row));
    const sct_deflection_row *at = &duty->rows[row];
    const sct_deflection_limit *limit = &duty->st->model->deflections[at->limit];
    const double error =
        sct_combined_displacement_error(duty->st, &duty->response, at->combination, at->joint, limit->direction);
    r->utilisation_at_most = sct_worse(r->utilisation_at_most, (fabs(duty->u[row]) + error) / limit->at_most);
    if (out->combination >= 0 && (isnan(out->utilisation) || utilisation <= out->utilisation)) return;
    out->combination = at->combination;
    out->u = duty->u[row];
    out->utilisation = utilisation;
    r->utilisation = sct_worse(r->utilisation, utilisation);
}

/* The duty's rows come by limit, combination, joint. */
static void fill_deflections(sct_result *r, const sct_duty *duty)
{
    const sct_model *model = duty->st->model;
    sct_deflection_result *out = r->deflections;
    int row = 0;
    for (int limit = 0; limit < model->n_deflections; limit++) {
        const sct_deflection_limit *d = &model->deflections[limit];
        for (int k = 0; k < d->n_joints; k++) {
            out[k] = (sct_deflection_result){.limit = limit,
                                             .joint = d->joints[k],
                                             .combination = -1,
                                             .at_most = d->at_most,
                                             .label = d->label,
                                             .from = d->from != NULL ? d->from[k] : -1};
            memcpy(out[k].direction, d->direction, sizeof out[k].direction);
        }
        for (int c = 0; c < model->n_combinations; c++)
            for (int k = 0; d->in[c] && k < d->n_joints; k++) consider_row(r, duty, row++, &out[k]);
        out += d->n_joints;
    }
}

sct_status sct_result_new(const sct_duty *duty, const sct_design *design, sct_accuracy accuracy, sct_result **result)
{
    *result = NULL;
    sct_result_memory *memory = calloc(1, sizeof *memory);
    if (memory == NULL) return SCT_NO_MEMORY;
    sct_result *r = &memory->open;
    memory->arena = sct_arena_new();
    if (memory->arena == NULL || allocate(r, duty) != SCT_OK) {
        sct_result_free(r);
        return SCT_NO_MEMORY;
    }
    r->outcome = SCT_CHECKED;
    r->accuracy = accuracy;
    r->mass = sct_duty_mass(duty, design);
    r->mass_continuous = r->kkt = r->violation = NAN;
    r->best_start = -1;
    r->analyses = sct_solver_analyses(duty->solver);
    fill_responses(r, duty, design);
    fill_joints(r, duty->st->model);
    fill_groups(r, duty, design);
    for (int bar = 0; bar < r->n_members; bar++) fill_member(r, duty, design, bar);
    fill_deflections(r, duty);
    if (fill_slack(r, duty) != SCT_OK || sct_result_fill_frame(r, duty, design) != SCT_OK) {
        sct_result_free(r);
        return SCT_NO_MEMORY;
    }
    r->kept = sct_keeps(r->utilisation_at_most); /* kept only when the error does not matter */
    for (int k = 0; k < r->n_criticals; k++) r->kept = r->kept && r->criticals[k].has_verdict;
    sct_result_judge(r, false);
    *result = r;
    return SCT_OK;
}

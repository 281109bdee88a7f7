/* Fuzzing the reader: any bytes as a model. What is refused has an error with words; what is accepted can be numbered
 * or is refused with words. */
#include "fuzz.h"

#include <math.h>

#include "analysis/structure.h"
#include "model/axes.h"
#include "model/model.h"

static void check_issues(const sct_issues *issues, sct_status status)
{
    for (int i = 0; i < sct_issues_count(issues); i++) {
        char *line = sct_issue_line(sct_issues_get(issues, i));
        MUST(line != NULL && line[0] != '\0');
        for (const char *p = line; *p != '\0'; p++) MUST((unsigned char)*p >= 0x20 && *p != 0x7f);
        free(line);
    }
    MUST((status == SCT_OK) == (sct_issues_errors(issues) == 0));
}

static void check_units(const double v[][3], int n)
{
    for (int i = 0; i < n; i++) MUST(fabs(hypot(hypot(v[i][0], v[i][1]), v[i][2]) - 1.0) < 1e-12);
}

static void check_finite(const double v[3])
{
    MUST(isfinite(v[0]) && isfinite(v[1]) && isfinite(v[2]));
}

/* What the reader promises of ends, springs and runs. */
static void check_frame(const sct_model *m)
{
    for (int j = 0; j < m->n_joints; j++) {
        const sct_joint *joint = &m->joints[j];
        MUST(joint->n_turns_held >= 0 && joint->n_turns_held <= (m->dimensions == 2 ? 1 : 3));
        check_units((const double(*)[3])joint->held, joint->n_held);
        check_units((const double(*)[3])joint->turns_held, joint->n_turns_held);
        for (int i = 0; i < joint->n_springs; i++)
            MUST(joint->springs[i].stiffness > 0.0 && isfinite(joint->springs[i].stiffness));
    }
    for (int e = 0; e < m->n_members; e++) {
        const sct_member *member = &m->members[e];
        MUST(member->run >= -1 && member->run < m->n_runs && isfinite(member->roll));
        for (int k = 0; k < 2 * SCT_TURNS; k++) {
            const sct_member_end *end = &member->end[k / SCT_TURNS];
            MUST(end->fixity[k % SCT_TURNS] != SCT_SPRUNG || end->stiffness[k % SCT_TURNS] > 0.0);
            MUST(m->dimensions == 3 || k % SCT_TURNS == SCT_IN_PLANE || end->fixity[k % SCT_TURNS] == SCT_PINNED);
        }
    }
    for (int i = 0; i < m->n_runs; i++) {
        const sct_run *run = &m->runs[i];
        MUST(run->n > 0 && run->first >= 0 && run->first + run->n <= m->n_members);
        for (int k = 0; k < run->n; k++) {
            MUST(m->members[run->first + k].run == i);
            MUST(k == 0 || m->members[run->first + k].from == m->members[run->first + k - 1].to);
        }
    }
}

/* What it promises of actions and limits. */
static void check_actions(const sct_model *m)
{
    for (int c = 0; c < m->n_cases; c++) {
        const sct_case *k = &m->cases[c];
        for (int i = 0; i < k->n_loads; i++) {
            MUST(k->loads[i].joint >= 0 && k->loads[i].joint < m->n_joints);
            check_finite(k->loads[i].F);
            check_finite(k->loads[i].M);
        }
        for (int i = 0; i < k->n_bar_actions; i++)
            MUST(k->bar_actions[i].member >= 0 && k->bar_actions[i].member < m->n_members &&
                 isfinite(k->bar_actions[i].lack) && isfinite(k->bar_actions[i].gradient[1]));
        for (int i = 0; i < k->n_member_loads; i++) {
            const sct_member_load *load = &k->member_loads[i];
            MUST(load->member >= 0 && load->member < m->n_members);
            const sct_member *member = &m->members[load->member];
            const double L = sct_joint_distance(m, member->from, member->to);
            MUST(0.0 <= load->a && load->b <= L && (load->is_point ? load->a == load->b : load->a < load->b));
            check_finite(load->qa);
            check_finite(load->qb);
            check_finite(load->F);
            check_finite(load->M);
        }
    }
    for (int i = 0; i < m->n_deflections; i++) {
        const sct_deflection_limit *limit = &m->deflections[i];
        MUST(limit->at_most > 0.0 && limit->label != NULL && limit->direction_label != NULL);
        for (int k = 0; k < limit->n_joints && limit->from != NULL; k++) MUST(limit->from[k] != limit->joints[k]);
    }
    for (int i = 0; i < m->n_bows; i++) MUST(m->bows[i].at_most > 0.0 || m->bows[i].part > 0.0);
}

/* What the reader promises of a model. */
static void check_model(const sct_model *m)
{
    MUST(m->dimensions == 2 || m->dimensions == 3);
    MUST(m->n_joints > 0 && m->n_members > 0 && m->n_groups > 0 && m->n_combinations > 0);
    for (int j = 0; j < m->n_joints; j++) {
        const sct_joint *joint = &m->joints[j];
        MUST(isfinite(joint->at[0]) && isfinite(joint->at[1]) && isfinite(joint->at[2]));
        MUST(joint->n_held >= 0 && joint->n_held <= m->dimensions);
    }
    for (int e = 0; e < m->n_members; e++) {
        const sct_member *member = &m->members[e];
        MUST(member->from >= 0 && member->from < m->n_joints && member->to >= 0 && member->to < m->n_joints);
        MUST(member->from != member->to && member->group >= 0 && member->group < m->n_groups);
    }
    for (int g = 0; g < m->n_groups; g++) {
        const sct_group *group = &m->groups[g];
        const sct_material *material = &m->materials[group->material];
        MUST(material->E > 0.0 && isfinite(material->E) && material->density > 0.0 && isfinite(material->density));
        if (group->kind == SCT_FREE_AREA)
            MUST(group->A_min > 0.0 && group->A_min <= group->A_max && isfinite(group->A_max));
        if (group->kind == SCT_HELD_AREA) MUST(group->A_held > 0.0 && isfinite(group->A_held));
        if (group->kind == SCT_LADDER) MUST(group->n_ladder > 0);
    }
    check_frame(m);
    check_actions(m);
}

int LLVMFuzzerTestOneInput(const unsigned char *data, size_t size)
{
    char *text = fuzz_copy(data, size);
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    MUST(issues != NULL);
    sct_status status = sct_model_parse("fuzz", text, size, &model, issues);
    MUST(status == SCT_OK || status == SCT_BAD_INPUT || status == SCT_TOO_LARGE);
    MUST((status == SCT_OK) == (model != NULL));
    check_issues(issues, status);
    if (status == SCT_OK) {
        check_model(model);
        sct_model_free(model);
        status = sct_model_parse("fuzz", text, size, &model, issues);
    }
    if (status == SCT_OK) {
        sct_structure *structure = NULL;
        status = sct_structure_build(model, &structure, issues);
        MUST(status == SCT_OK || status == SCT_BAD_INPUT || status == SCT_TOO_LARGE || status == SCT_MECHANISM);
        MUST((status == SCT_OK) == (structure != NULL));
        check_issues(issues, status);
        sct_structure_free(structure);
    }
    sct_model_free(model);
    sct_issues_free(issues);
    free(text);
    return 0;
}

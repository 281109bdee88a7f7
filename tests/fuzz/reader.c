/* Fuzzing the reader: any bytes as a model. What is refused has an error with words; what is accepted can be numbered
 * or is refused with words. */
#include "fuzz.h"

#include <math.h>

#include "analysis/structure.h"
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
    for (int d = 0; d < m->n_deflections; d++) MUST(m->deflections[d].at_most > 0.0);
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

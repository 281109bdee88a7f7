/* A member by its name. */
#include "report/find_member.h"

#include <string.h>

#include "base/issues.h"
#include "base/names.h"
#include "model/model.h"

int sct_find_member(const sct_result *result, const char *member, sct_issues *issues)
{
    for (int k = 0; k < result->n_members; k++)
        if (strcmp(result->members[k].name, member) == 0) return k;
    sct_names *names = sct_names_new(result->n_members);
    for (int k = 0; names != NULL && k < result->n_members; k++) sct_names_put(names, result->members[k].name, k);
    const char *near = names != NULL ? sct_names_nearest(names, member) : NULL;
    const sct_where where = {.file = result->model->file};
    if (near != NULL)
        sct_issue_add(issues, SCT_ERROR, where, "no member \"%.64s\"; did you mean \"%s\"?", member, near);
    else
        sct_issue_add(issues, SCT_ERROR, where, "no member \"%.64s\"", member);
    sct_names_free(names);
    return -1;
}

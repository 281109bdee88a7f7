/* Sizes a truss with the library and prints its groups: the whole of a small program, every error handled.
 *
 *     cc examples/size_a_truss.c -Iinclude build/libscantling.a -lcholmod -lamd -lcjson -lm -o build/size_a_truss
 *     build/size_a_truss models/demo_roof.json
 */
#include <scantling.h>
#include <stdio.h>
#include <stdlib.h>

static void print_issues(const sct_issues *issues)
{
    for (int i = 0; i < sct_issues_count(issues); i++) {
        char *line = sct_issue_line(sct_issues_get(issues, i));
        if (line != NULL) fprintf(stderr, "%s\n", line);
        free(line);
    }
}

static void print_result(const sct_result *result)
{
    printf("%s\n%s\n", result->title, result->verdict);
    for (int g = 0; g < result->n_groups; g++) {
        const sct_group_result *group = &result->groups[g];
        if (group->section != NULL)
            printf("  %-22s %-16s %8.1f kg\n", group->name, group->section, group->mass);
        else
            printf("  %-22s %10.0f mm2   %8.1f kg\n", group->name, 1e6 * group->A, group->mass);
    }
    printf("  %-22s %-16s %8.1f kg\n%s\n", "all", "", result->mass, SCT_CAUTION);
}

int main(int argc, char **argv)
{
    if (argc != 2) {
        fprintf(stderr, "usage: size_a_truss MODEL\n");
        return 2;
    }
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    sct_result *result = NULL;
    if (issues == NULL) return 7;
    sct_status status = sct_model_read(argv[1], &model, issues);
    if (status == SCT_OK) status = sct_size(model, NULL, &result, issues);
    print_issues(issues);
    if (status == SCT_OK)
        print_result(result);
    else
        fprintf(stderr, "%s\n", sct_status_text(status));
    const int code = status != SCT_OK ? 3 : result->kept ? 0 : 1;
    sct_result_free(result);
    sct_model_free(model);
    sct_issues_free(issues);
    return code;
}

/* The model written anew: sizes go in, everything else stays, and it reads back. */
#include "support.h"

#include <string.h>

#include "base/random.h"
#include "benchmark_optima.h"
#include "model/rewrite.h"

static const char MODEL[] =
    "{ \"scantling\": 1, \"title\": \"Tie \\u0026 \\\"strut\\\"\", \"notes\": \"kept\",\n"
    "  \"dimensions\":2, \"units\":{\"length\":\"m\",\"force\":\"kN\",\"stress\":\"MPa\"},\n"
    "  \"materials\":{\"S355H\":{\"E\":2.1e5,\"density\":\"7850 kg/m3\",\"yield\":355,\n"
    "     \"allowable\":{\"tension\":213,\"compression\":213}}},\n"
    "  \"joints\":{\"A\":{\"at\":[0,0],\"support\":[\"x\",\"y\"]},\"B\":{\"at\":[6,0],\"support\":[\"y\"]},\n"
    "     \"C\":{\"at\":[3,1.50],\"notes\":\"ridge\"}},\n"
    "  \"groups\":{\n"
    "     \"tie\":{\"material\":\"S355H\",\"area\":{\"at_least\":\"100 mm2\",\"at_most\":0.01},\n"
    "        \"second_moment\":{\"c\":1e0},\"restraint\":{\"out_of_plane\":\"3 m\"}},\n"
    "     \"left\":{\"notes\":\"stock\",\"material\":\"S355H\",\"family\":\"stock\",\"sections\":[\"T1\",\"T2\"]},\n"
    "     \"right\":{\"material\":\"S355H\",\"family\":\"stock\",\"section\":\"T3\"}},\n"
    "  \"families\":{\"stock\":{\"sections\":{\"T1\":{\"A\":\"500 mm2\",\"I\":\"2e5 mm4\"},\n"
    "     \"T2\":{\"A\":\"700 mm2\",\"I\":\"2.8e5 mm4\"},\"T3\":{\"A\":\"900 mm2\",\"I\":\"4e5 mm4\"}}}},\n"
    "  "
    "\"members\":{\"T\":{\"from\":\"A\",\"to\":\"B\",\"group\":\"tie\"},\"L\":{\"from\":\"A\",\"to\":\"C\",\"group\":"
    "\"left\"},\n"
    "     \"R\":{\"from\":\"C\",\"to\":\"B\",\"group\":\"right\"}},\n"
    "  \"cases\":{\"G\":{\"self_weight\":true,\"joints\":{\"C\":[0,-10.0]}}},\n"
    "  \"combinations\":{\"S1\":{\"for\":\"allowable\",\"sum\":{\"G\":1.0}}},\n"
    "  \"limits\":{\"buckling\":{\"by\":\"Euler and Johnson\",\"safety\":1.92}}}\n";

static const char REWRITTEN[] = "{\n"
                                "  \"scantling\": 1,\n"
                                "  \"title\": \"Tie & \\\"strut\\\"\",\n"
                                "  \"notes\": \"kept\",\n"
                                "  \"dimensions\": 2,\n"
                                "  \"units\": {\"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\"},\n"
                                "  \"materials\": {\n"
                                "    \"S355H\": {\n"
                                "      \"E\": 210000,\n"
                                "      \"density\": \"7850 kg/m3\",\n"
                                "      \"yield\": 355,\n"
                                "      \"allowable\": {\"tension\": 213, \"compression\": 213}\n"
                                "    }\n"
                                "  },\n"
                                "  \"joints\": {\n"
                                "    \"A\": {\"at\": [0, 0], \"support\": [\"x\", \"y\"]},\n"
                                "    \"B\": {\"at\": [6, 0], \"support\": [\"y\"]},\n"
                                "    \"C\": {\"at\": [3, 1.5], \"notes\": \"ridge\"}\n"
                                "  },\n"
                                "  \"groups\": {\n"
                                "    \"tie\": {\n"
                                "      \"material\": \"S355H\",\n"
                                "      \"area\": \"123.5 mm2\",\n"
                                "      \"second_moment\": {\"c\": 1},\n"
                                "      \"restraint\": {\"out_of_plane\": \"3 m\"}\n"
                                "    },\n"
                                "    \"left\": {\n"
                                "      \"notes\": \"stock\",\n"
                                "      \"material\": \"S355H\",\n"
                                "      \"family\": \"stock\",\n"
                                "      \"section\": \"T2\",\n"
                                "      \"sections\": [\"T1\", \"T2\"]\n"
                                "    },\n"
                                "    \"right\": {\"material\": \"S355H\", \"family\": \"stock\", \"section\": \"T3\"}\n"
                                "  },\n"
                                "  \"families\": {\n"
                                "    \"stock\": {\n"
                                "      \"sections\": {\n"
                                "        \"T1\": {\"A\": \"500 mm2\", \"I\": \"2e5 mm4\"},\n"
                                "        \"T2\": {\"A\": \"700 mm2\", \"I\": \"2.8e5 mm4\"},\n"
                                "        \"T3\": {\"A\": \"900 mm2\", \"I\": \"4e5 mm4\"}\n"
                                "      }\n"
                                "    }\n"
                                "  },\n"
                                "  \"members\": {\n"
                                "    \"T\": {\"from\": \"A\", \"to\": \"B\", \"group\": \"tie\"},\n"
                                "    \"L\": {\"from\": \"A\", \"to\": \"C\", \"group\": \"left\"},\n"
                                "    \"R\": {\"from\": \"C\", \"to\": \"B\", \"group\": \"right\"}\n"
                                "  },\n"
                                "  \"cases\": {\n"
                                "    \"G\": {\n"
                                "      \"self_weight\": true,\n"
                                "      \"joints\": {\"C\": [0, -10]}\n"
                                "    }\n"
                                "  },\n"
                                "  \"combinations\": {\n"
                                "    \"S1\": {\"for\": \"allowable\", \"sum\": {\"G\": 1}}\n"
                                "  },\n"
                                "  \"limits\": {\"buckling\": {\"by\": \"Euler and Johnson\", \"safety\": 1.92}}\n"
                                "}\n";

static sct_model *parsed(const char *text)
{
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    const sct_status status = sct_model_parse("model.json", text, strlen(text), &model, issues);
    if (status != SCT_OK) ck_abort_msg("%s", sct_issue_line(sct_issues_get(issues, 0)));
    sct_issues_free(issues);
    return model;
}

static char *rewritten(const sct_model *model, const sct_size_choice choice[])
{
    sct_text out = {0};
    ck_assert_int_eq(sct_model_rewrite(model, choice, &out), SCT_OK);
    return sct_text_take(&out, NULL);
}

START_TEST(sizes_go_in_and_all_else_stays)
{
    const sct_size_choice choice[3] = {{NULL, 123.5e-6}, {"T2", 700e-6}, {"T3", 900e-6}};
    sct_model *model = parsed(MODEL);
    char *text = rewritten(model, choice);
    ck_assert_str_eq(text, REWRITTEN);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(a_model_with_every_size_held_is_its_own_rewriting)
{
    sct_model *model = parsed(REWRITTEN);
    for (int g = 0; g < model->n_groups; g++) ck_assert_int_ge((int)model->groups[g].kind, (int)SCT_HELD_AREA);
    char *text = rewritten(model, NULL);
    ck_assert_str_eq(text, REWRITTEN);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(an_area_reads_back_as_itself_or_the_next_larger_double)
{
    sct_random random = {7};
    for (int i = 0; i < 200; i++) {
        const double A = 1e-4 + 9e-3 * sct_random_unit(&random);
        const sct_size_choice choice[3] = {{NULL, A}, {"T1", 500e-6}, {"T3", 900e-6}};
        sct_model *model = parsed(MODEL);
        model->us_customary = i % 2 == 1;
        char *text = rewritten(model, choice);
        sct_model *again = parsed(text);
        ck_assert_double_ge(again->groups[0].A_held, A);
        ck_assert_double_le(again->groups[0].A_held, nextafter(A, 1));
        sct_model_free(model);
        sct_model_free(again);
        free(text);
    }
}
END_TEST

static void assert_same_but_for_sizes(const sct_model *a, const sct_model *b)
{
    ck_assert_str_eq(a->title, b->title);
    ck_assert_int_eq(a->n_joints, b->n_joints);
    ck_assert_int_eq(a->n_members, b->n_members);
    ck_assert_int_eq(a->n_cases, b->n_cases);
    ck_assert_int_eq(a->n_deflections, b->n_deflections);
    for (int j = 0; j < a->n_joints; j++) {
        ck_assert_str_eq(a->joints[j].name, b->joints[j].name);
        ck_assert_mem_eq(a->joints[j].at, b->joints[j].at, sizeof a->joints[j].at);
        ck_assert_int_eq(a->joints[j].n_held, b->joints[j].n_held);
    }
    for (int m = 0; m < a->n_members; m++) {
        ck_assert_str_eq(a->members[m].name, b->members[m].name);
        ck_assert_int_eq(a->members[m].from, b->members[m].from);
        ck_assert_int_eq(a->members[m].group, b->members[m].group);
    }
    for (int c = 0; c < a->n_cases; c++) {
        ck_assert_int_eq(a->cases[c].n_loads, b->cases[c].n_loads);
        for (int i = 0; i < a->cases[c].n_loads; i++)
            ck_assert_mem_eq(a->cases[c].loads[i].F, b->cases[c].loads[i].F, sizeof a->cases[c].loads[i].F);
    }
}

/* The largest section of a group's ladder, or an area with no short decimal. */
static sct_size_choice some_size(const sct_model *model, const sct_group *group)
{
    if (group->kind == SCT_FREE_AREA) return (sct_size_choice){NULL, sqrt(group->A_min * group->A_max)};
    const sct_section *section = &model->families[group->family].sections[group->ladder[group->n_ladder - 1]];
    return (sct_size_choice){section->name, section->A};
}

START_TEST(benchmark_models_read_back_with_every_group_held)
{
    char path[128];
    snprintf(path, sizeof path, "models/benchmarks/%s", BENCHMARKS[_i].file);
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    sct_size_choice choice[64];
    const sct_status status = sct_model_read(path, &model, issues);
    if (status != SCT_OK) ck_abort_msg("%s", sct_issue_line(sct_issues_get(issues, 0)));
    ck_assert_int_le(model->n_groups, 64);
    for (int g = 0; g < model->n_groups; g++) choice[g] = some_size(model, &model->groups[g]);
    char *text = rewritten(model, choice);
    sct_model *again = parsed(text);
    assert_same_but_for_sizes(model, again);
    for (int g = 0; g < model->n_groups; g++) {
        const sct_group *held = &again->groups[g];
        if (choice[g].section == NULL) {
            ck_assert_int_eq(held->kind, SCT_HELD_AREA);
            ck_close(held->A_held, choice[g].A, 1e-15);
        } else {
            ck_assert_int_eq(held->kind, SCT_HELD_SECTION);
            ck_assert_str_eq(again->families[held->family].sections[held->held].name, choice[g].section);
        }
    }
    char *twice = rewritten(again, NULL);
    ck_assert_str_eq(twice, text);
    sct_model_free(model);
    sct_model_free(again);
    sct_issues_free(issues);
    free(text);
    free(twice);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("rewrite");
    TCase *t = tcase_create("rewrite");
    tcase_add_test(t, sizes_go_in_and_all_else_stays);
    tcase_add_test(t, a_model_with_every_size_held_is_its_own_rewriting);
    tcase_add_test(t, an_area_reads_back_as_itself_or_the_next_larger_double);
    tcase_add_loop_test(t, benchmark_models_read_back_with_every_group_held, 0, N_BENCHMARKS);
    suite_add_tcase(suite, t);
    return run_suite(suite);
}

/* Models of hundreds and thousands of members: sized, or refused with the memory that they would need. */
#include "support.h"

#include <string.h>
#include <sys/resource.h>

#include "grid.h"
#include "scantling.h"

#if defined(__SANITIZE_ADDRESS__)
enum { HAS_ADDRESS_LIMIT = 0 }; /* the sanitizer's own tables are larger than any limit */
#else
enum { HAS_ADDRESS_LIMIT = 1 };
#endif

static bool is_full(void)
{
    return getenv("SCT_TEST_FULL") != NULL;
}

static sct_model *grid_model(grid_spec spec)
{
    sct_text text = {0};
    sct_model *model = NULL;
    sct_issues *issues = sct_issues_new();
    grid_json(&spec, &text);
    ck_assert(!text.failed);
    ck_assert_int_eq(sct_model_parse("grid.json", text.data, text.size, &model, issues), SCT_OK);
    sct_issues_free(issues);
    sct_text_free(&text);
    return model;
}

/* Sizes a grid from `starts` starts; every limit kept at a point that passes the optimality test, in few analyses. */
static void ck_sized(const char *name, grid_spec spec, int starts, int most_analyses)
{
    sct_model *model = grid_model(spec);
    sct_settings settings = sct_settings_defaults();
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    settings.starts = starts;
    ck_assert_int_eq(sct_size(model, &settings, &r, issues), SCT_OK);
    printf("measured: %s, %d members, %d groups, 4 cases: %d start(s), best %d analyses, %.0f kg, KKT %.0e\n", name,
           r->n_members, r->n_groups, r->n_starts, r->starts[r->best_start].analyses, r->mass, r->kkt);
    ck_assert_int_eq(r->outcome, SCT_OPTIMUM);
    ck_assert(r->kept);
    ck_assert_double_le(r->kkt, 1e-6);
    ck_assert_double_le(r->accuracy.error, 1e-9);
    for (int k = 0; k < r->n_starts; k++) {
        ck_assert_int_eq(r->starts[k].outcome, SCT_OPTIMUM);
        ck_assert_int_le(r->starts[k].analyses, most_analyses);
    }
    sct_result_free(r);
    sct_issues_free(issues);
    sct_model_free(model);
}

START_TEST(a_grid_of_800_members_in_42_groups_is_sized_from_three_starts)
{
    ck_sized("space grid", (grid_spec){.nx = 10, .ny = 10, .zones = 4}, 3, 20);
}
END_TEST

START_TEST(a_grid_of_5000_members_in_93_groups_is_sized)
{
    ck_sized("space grid", (grid_spec){.nx = 25, .ny = 25, .zones = 6}, 1, 20);
}
END_TEST

/* More variables than the QP takes without guessing which end at their bounds. */
START_TEST(members_that_are_each_sized_by_themselves)
{
    ck_sized("own sizes", (grid_spec){.nx = 8, .ny = 4, .deep = true}, 1, 25);
    if (is_full()) ck_sized("own sizes", (grid_spec){.nx = 25, .ny = 5}, 1, 25);
}
END_TEST

START_TEST(every_writer_writes_5000_members)
{
    sct_model *model = grid_model((grid_spec){.nx = 25, .ny = 25, .zones = 6, .deep = true});
    sct_settings settings = sct_settings_defaults();
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    settings.iterations = 0;
    ck_assert_int_eq(sct_size(model, &settings, &r, issues), SCT_OK);
    for (int format = SCT_SUMMARY; format <= SCT_DRAWING_SVG; format++) {
        char *text = NULL;
        size_t size = 0;
        ck_assert_int_eq(sct_write(r, (sct_format)format, NULL, &text, &size), SCT_OK);
        ck_assert_uint_gt(size, 5000);
        free(text);
    }
    sct_result_free(r);
    sct_issues_free(issues);
    sct_model_free(model);
}
END_TEST

/* Address space for `MB` more than nothing; what is there already counts too. */
static void limit_memory(long MB)
{
    struct rlimit limit;
    ck_assert_int_eq(getrlimit(RLIMIT_AS, &limit), 0);
    limit.rlim_cur = (rlim_t)MB * 1000000;
    ck_assert_int_eq(setrlimit(RLIMIT_AS, &limit), 0);
}

START_TEST(a_model_beyond_the_memory_is_refused_with_what_it_needs)
{
    if (!HAS_ADDRESS_LIMIT) return;
    sct_model *model = grid_model((grid_spec){.nx = 12, .ny = 12});
    sct_settings settings = sct_settings_defaults();
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    settings.starts = 1;
    limit_memory(200);
    ck_assert_int_eq(sct_size(model, &settings, &r, issues), SCT_TOO_LARGE);
    ck_assert_ptr_null(r);
    const char *message = sct_issues_get(issues, sct_issues_count(issues) - 1)->message;
    ck_assert_msg(strstr(message, "the model is too large: ") == message && strstr(message, "at most 180 MB") != NULL,
                  "%s", message);
    /* 1152 variables: 9 squares of 11 MB, twice 35 MB of derivatives, twice 43 MB of gradients */
    const char *about = strstr(message, "need about ");
    const double needed = about != NULL ? atof(about + strlen("need about ")) : NAN;
    ck_assert_msg(needed > 200.0 && needed < 300.0, "%s", message);
    sct_issues_free(issues);
    sct_model_free(model);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("large models");
    TCase *tests = tcase_create("large");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, a_grid_of_800_members_in_42_groups_is_sized_from_three_starts);
    tcase_add_test(tests, a_grid_of_5000_members_in_93_groups_is_sized);
    tcase_add_test(tests, members_that_are_each_sized_by_themselves);
    tcase_add_test(tests, every_writer_writes_5000_members);
    tcase_add_test(tests, a_model_beyond_the_memory_is_refused_with_what_it_needs);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

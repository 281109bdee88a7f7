/* The second path: it agrees with the first on published problems and random trusses, and finds every number that is
 * changed by a millionth. */
#define _POSIX_C_SOURCE 200809L
#include "support.h"

#include <glob.h>
#include <string.h>
#include <time.h>

#include "numerics/skyline.h"
#include "truss_shapes.h"

/* ---- the factor ---------------------------------------------------------------------------------------------------
 */

START_TEST(the_skyline_factor_solves_what_was_multiplied)
{
    sct_random r = {7};
    enum { N = 60 };
    int first[N];
    double A[N][N] = {{0}}, x[N], b[N] = {0};
    for (int i = 0; i < N; i++) first[i] = i - ts_pick(&r, i < 9 ? i + 1 : 9);
    sct_skyline *s = sct_skyline_new(N, first);
    for (int i = 0; i < N; i++) {
        x[i] = ts_between(&r, -1.0, 1.0);
        for (int j = first[i]; j <= i; j++) {
            A[i][j] = A[j][i] = i == j ? 20.0 : ts_between(&r, -1.0, 1.0);
            *sct_skyline_at(s, i, j) = A[i][j];
        }
    }
    for (int i = 0; i < N; i++) {
        for (int j = 0; j < N; j++) b[i] += A[i][j] * x[j];
    }
    ck_assert(sct_skyline_factor(s));
    sct_skyline_solve(s, b);
    for (int i = 0; i < N; i++) ck_assert_double_eq_tol(b[i], x[i], 1e-14);
    sct_skyline_free(s);
}
END_TEST

START_TEST(a_matrix_that_is_not_positive_definite_has_no_skyline_factor)
{
    const double bad[] = {-1.0, 0.0, 1.0, NAN, INFINITY};
    for (size_t k = 0; k < sizeof bad / sizeof bad[0]; k++) {
        const int first[2] = {0, 0};
        sct_skyline *s = sct_skyline_new(2, first);
        *sct_skyline_at(s, 0, 0) = 1.0;
        *sct_skyline_at(s, 1, 0) = 1.0;
        *sct_skyline_at(s, 1, 1) = bad[k];
        ck_assert(!sct_skyline_factor(s));
        sct_skyline_free(s);
    }
}
END_TEST

/* ---- agreement ----------------------------------------------------------------------------------------------------
 */

static sct_status verify(const sct_model *sized, const sct_result *result, bool print)
{
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_verify(sized, result, issues);
    for (int i = 0; print && i < sct_issues_count(issues); i++) printf("%s\n", sct_issues_get(issues, i)->message);
    ck_assert_int_eq(sct_issues_errors(issues) > 0, status != SCT_OK);
    sct_issues_free(issues);
    return status;
}

/* A file sized, its sized model read back. */
typedef struct sized {
    sct_model *model, *back;
    sct_result *result;
} sized;

static sized size_file(const char *path)
{
    sized s = {0};
    char *text;
    size_t size;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_model_read(path, &s.model, issues), SCT_OK);
    ck_assert_int_eq(sct_size(s.model, NULL, &s.result, issues), SCT_OK);
    ck_assert_int_eq(sct_write(s.result, SCT_MODEL_JSON, NULL, &text, &size), SCT_OK);
    ck_assert_int_eq(sct_model_parse("model.json", text, size, &s.back, issues), SCT_OK);
    free(text);
    sct_issues_free(issues);
    return s;
}

static void sized_free(sized *s)
{
    sct_result_free(s->result);
    sct_model_free(s->model);
    sct_model_free(s->back);
}

START_TEST(both_paths_agree_on_the_demo_and_all_published_problems)
{
    glob_t files;
    ck_assert_int_eq(glob("models/benchmarks/*.json", 0, NULL, &files), 0);
    ck_assert_int_ge((int)files.gl_pathc, 10);
    for (size_t i = 0; i <= files.gl_pathc; i++) {
        sized s = size_file(i < files.gl_pathc ? files.gl_pathv[i] : "models/demo_roof.json");
        ck_assert_int_eq(verify(s.back, s.result, true), SCT_OK);
        sized_free(&s);
    }
    globfree(&files);
}
END_TEST

/* Rules for every group, limits on some joints, combinations of cases with heat and settlements; inclined supports. */
static void furnish(sct_model *m, sct_random *r)
{
    for (int k = 0; k < m->n_materials; k++) m->materials[k].yield = 355e6;
    for (int g = 0; g < m->n_groups; g++) {
        sct_group *group = &m->groups[g];
        group->allowable[0] = 200e6;
        group->allowable[1] = 160e6;
        group->buckling = g % 3 == 0 ? SCT_BUCKLING_EULER : g % 3 == 1 ? SCT_BUCKLING_EULER_JOHNSON : SCT_BUCKLING_NONE;
        group->safety = 1.67;
        group->I[0].c = ts_between(r, 0.3, 4.0);
        group->I[1].c = ts_between(r, 0.3, 4.0);
        group->slenderness_any = 300.0;
        group->slenderness_compression = g % 2 == 0 ? 200.0 : INFINITY;
    }
    for (int e = 0; e < m->n_members; e++) {
        sct_member *member = &m->members[e];
        for (int axis = 0; axis < 2; axis++) {
            const int kind = ts_pick(r, 3);
            member->source[axis] = kind == 0 ? SCT_LENGTH_SYSTEM : kind == 1 ? SCT_LENGTH_FACTOR : SCT_LENGTH_RESTRAINT;
            member->length[axis] = kind == 1 ? ts_between(r, 0.5, 1.2) : ts_between(r, 0.3, 3.0);
        }
    }
    mb_case(m, 0.0);
    mb_act(m, 1, ts_pick(r, m->n_members), 35.0, 0.0);
    mb_act(m, 1, ts_pick(r, m->n_members), 0.0, 2e-3);
    const double *h = m->joints[0].held[0];
    mb_settle(m, 1, 0, 2e-3 * h[0], 2e-3 * h[1], 2e-3 * h[2]);
    mb_combination(m, 2, (double[]){1.0, 0.0});
    mb_combination(m, 2, (double[]){1.35, -0.7});
    const int service = mb_combination(m, 2, (double[]){0.9, 1.0});
    m->combinations[service].basis = SCT_SERVICE;
    sct_deflection_limit *limit = sct_arena_array(m->arena, 1, sizeof *limit);
    *limit = (sct_deflection_limit){.n_joints = 2, .direction = {0.6, 0.8, 0.0}, .at_most = 0.02, .label = "20 mm"};
    limit->joints = sct_arena_array(m->arena, 2, sizeof(int));
    limit->joints[0] = m->n_joints - 1;
    limit->joints[1] = m->n_joints / 2;
    limit->in = sct_arena_array(m->arena, 3, sizeof(bool));
    limit->in[1] = limit->in[2] = true;
    m->deflections = limit;
    m->n_deflections = 1;
}

/* A truss whose supports are a pin, a hinge line and inclined rollers, as its making allows. */
static sct_model *random_model(uint64_t seed, int n_joints)
{
    sct_random r = {seed};
    const int dim = 2 + (int)(seed % 2);
    sct_model *m = ts_random(dim, n_joints, 1 + ts_pick(&r, 6), seed);
    if (dim == 3 && seed % 4 == 1) { /* a joint on an inclined plane, tied to the pinned ground instead */
        const int j = m->n_joints - 1;
        mb_hold(m, j, ts_between(&r, -1.0, 1.0), ts_between(&r, -1.0, 1.0), 1.0);
        mb_hold(m, j - 1, 1.0, ts_between(&r, -1.0, 1.0), 0.3);
        mb_hold(m, j - 1, 0.0, 1.0, ts_between(&r, -1.0, 1.0));
    } else if (dim == 2) {
        mb_hold(m, m->n_joints - 1, ts_between(&r, -1.0, 1.0), 1.0, 0.0);
    }
    furnish(m, &r);
    return m;
}

static sct_result *check(const sct_model *m)
{
    sct_result *result = NULL;
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_check(m, NULL, &result, issues);
    for (int i = 0; status != SCT_OK && i < sct_issues_count(issues); i++)
        printf("%s\n", sct_issues_get(issues, i)->message);
    ck_assert_int_eq(status, SCT_OK);
    sct_issues_free(issues);
    return result;
}

START_TEST(both_paths_agree_on_random_trusses)
{
    const int n = getenv("SCT_TEST_FULL") != NULL ? 5000 : 300;
    for (int i = 1; i <= n; i++) {
        sct_model *m = random_model((uint64_t)i, 6 + i % 60);
        sct_result *result = check(m);
        const sct_status status = verify(m, result, true);
        if (status != SCT_OK) printf("seed %d\n", i);
        ck_assert_int_eq(status, SCT_OK);
        sct_result_free(result);
        mb_free(m);
    }
    printf("measured: second path: both agree on %d random trusses\n", n);
}
END_TEST

/* Checks a model that may be refused; an answer that is given must not be doubted by the second path. */
static void agree_or_refuse(sct_model *m, int *n_answered, int *n_refused)
{
    for (int g = 0; g < m->n_groups; g++) m->groups[g].allowable[0] = m->groups[g].allowable[1] = 200e6;
    mb_each_case(m);
    sct_result *result = NULL;
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_check(m, NULL, &result, issues);
    ck_assert(status == SCT_OK || status == SCT_NOT_ACCURATE || status == SCT_MECHANISM);
    if (status == SCT_OK) ck_assert_int_eq(verify(m, result, true), SCT_OK);
    *n_answered += status == SCT_OK;
    *n_refused += status != SCT_OK;
    sct_result_free(result);
    sct_issues_free(issues);
    mb_free(m);
}

START_TEST(badly_scaled_and_almost_movable_trusses_give_no_false_alarm)
{
    int answered = 0, refused = 0;
    for (int power = -18; power <= 18; power++) {
        for (int e = 1; e < 41; e += 3) {
            sct_model *m = e % 2 == 0 ? ts_cantilever(10, 1.0, 1.0, -1) : ts_beam(10, 1.0, 1.0, -1);
            mb_group(m, 0, 1e-3 * pow(10.0, power), false);
            m->members[e].group = 1;
            mb_bar(m, 1, 2, 0);
            agree_or_refuse(m, &answered, &refused);
        }
    }
    for (int power = 0; power <= 18; power++) { /* two bars in almost one line */
        sct_model *m = ts_new(2, 1e-3);
        for (int j = 0; j < 3; j++) mb_joint(m, 1.7 * j, j == 1 ? pow(10.0, -0.5 * power) : 0.0, 0.0);
        mb_pin(m, 0);
        mb_pin(m, 2);
        mb_bar(m, 0, 1, 0);
        mb_bar(m, 1, 2, 0);
        mb_load(m, mb_case(m, 1.0), 1, 20.0, -1e3, 0.0);
        agree_or_refuse(m, &answered, &refused);
    }
    const int n = getenv("SCT_TEST_FULL") != NULL ? 3000 : 200;
    for (int seed = 1; seed <= n; seed++) { /* stiffness of 1e-6 to 1e8 of the usual, here and there */
        sct_random r = {(uint64_t)seed};
        sct_model *m = ts_random(2 + seed % 2, 8 + ts_pick(&r, 60), ts_pick(&r, 6), (uint64_t)seed);
        for (int g = 0; g < 4; g++) mb_group(m, 0, 1e-3 * pow(10.0, ts_between(&r, -6.0, 8.0)), false);
        for (int e = 0; e < m->n_members; e += 3) m->members[e].group = 4 + ts_pick(&r, 4);
        agree_or_refuse(m, &answered, &refused);
    }
    printf("measured: second path: no false alarm on %d badly scaled trusses (%d more are refused)\n", answered,
           refused);
    ck_assert_int_ge(answered, 500);
}
END_TEST

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static void agree_on(const char *name, sct_model *m)
{
    m->groups[0].allowable[0] = m->groups[0].allowable[1] = 200e6;
    mb_each_case(m);
    double start = now();
    sct_result *result = check(m);
    const double first = now() - start;
    start = now();
    ck_assert_int_eq(verify(m, result, true), SCT_OK);
    printf("measured: second path: %s, %d members: first path %.3f s, second %.3f s\n", name, m->n_members, first,
           now() - start);
    sct_result_free(result);
    mb_free(m);
}

START_TEST(both_paths_agree_on_long_trusses_in_any_order)
{
    agree_on("cantilever of 400 panels", ts_cantilever(400, 1.0, 1.0, -1));
    agree_on("cantilever of 2000 panels", ts_cantilever(2000, 1.0, 1.0, -1));
    sct_model *m = ts_beam(2000, 1.0, 1.0, -1);
    ts_shuffle_joints(m, 3); /* the envelope is full, and the sparse solver takes over */
    agree_on("beam of 2000 panels, joints shuffled", m);
}
END_TEST

/* ---- wrong numbers ------------------------------------------------------------------------------------------------
 */

/* Changes every number of n that is at least 1e-4 of the largest by a millionth, one after the other. */
static int change_each(const sct_model *m, const sct_result *result, int n, double x[], int *caught)
{
    double largest = 0.0;
    int tried = 0;
    for (int i = 0; i < n; i++) largest = fmax(largest, fabs(x[i]));
    for (int i = 0; i < n; i++) {
        const double right = x[i];
        if (!(fabs(right) > 1e-4 * largest)) continue;
        x[i] = right * (1.0 + 1e-6);
        *caught += verify(m, result, false) == SCT_SELF_CHECK;
        x[i] = right;
        tried++;
    }
    return tried;
}

START_TEST(every_number_changed_by_a_millionth_is_caught)
{
    int tried = 0, caught = 0;
    for (uint64_t seed = 1; seed <= 6; seed++) {
        sct_model *m = random_model(seed, 8);
        sct_result *r = check(m);
        const int n3 = 3 * r->n_joints;
        ck_assert_int_eq(verify(m, r, true), SCT_OK);
        for (int c = 0; c < r->n_combinations; c++) {
            tried += change_each(m, r, r->n_members, r->N + c * r->n_members, &caught);
            tried += change_each(m, r, n3, r->u + c * n3, &caught);
            tried += change_each(m, r, n3, r->load + c * n3, &caught);
            tried += change_each(m, r, n3, r->reaction + c * n3, &caught);
        }
        for (int e = 0; e < r->n_members; e++) {
            tried += change_each(m, r, 1, &r->members[e].utilisation, &caught);
            tried += change_each(m, r, 1, &r->members[e].L, &caught);
        }
        for (int g = 0; g < r->n_groups; g++) {
            if (r->groups[g].n_members > 0) tried += change_each(m, r, 1, &r->groups[g].mass, &caught);
            tried += change_each(m, r, 1, &r->groups[g].A, &caught);
            tried += change_each(m, r, 2, r->groups[g].I, &caught);
        }
        for (int k = 0; k < r->n_deflections; k++) {
            tried += change_each(m, r, 1, &r->deflections[k].u, &caught);
            tried += change_each(m, r, 1, &r->deflections[k].utilisation, &caught);
        }
        tried += change_each(m, r, 1, &r->mass, &caught);
        tried += change_each(m, r, 1, &r->utilisation, &caught);
        r->kept = !r->kept;
        tried++;
        caught += verify(m, r, false) == SCT_SELF_CHECK;
        sct_result_free(r);
        mb_free(m);
    }
    printf("measured: second path: %d of %d numbers changed by a millionth are caught\n", caught, tried);
    ck_assert_int_ge(tried, 1000);
    ck_assert_int_eq(caught, tried);
}
END_TEST

START_TEST(numbers_that_are_none_are_caught)
{
    sct_model *m = random_model(2, 8);
    sct_result *r = check(m);
    double *number[] = {&r->N[3], &r->u[10], &r->mass, &r->members[2].utilisation, &r->utilisation};
    for (size_t i = 0; i < sizeof number / sizeof number[0]; i++) {
        const double right = *number[i], wrong[] = {NAN, INFINITY, -INFINITY};
        for (int k = 0; k < 3; k++) {
            *number[i] = wrong[k];
            ck_assert_int_eq(verify(m, r, false), SCT_SELF_CHECK);
        }
        *number[i] = right;
    }
    ck_assert_int_eq(verify(m, r, true), SCT_OK);
    sct_result_free(r);
    mb_free(m);
}
END_TEST

START_TEST(both_numbers_stand_in_the_message)
{
    sized s = size_file("models/demo_roof.json");
    sct_issues *issues = sct_issues_new();
    const double right = s.result->N[0];
    char words[200];
    s.result->N[0] *= 1.0 + 1e-6;
    ck_assert_int_eq(sct_verify(s.back, s.result, issues), SCT_SELF_CHECK);
    const char *message = sct_issues_get(issues, 0)->message;
    snprintf(words, sizeof words, "internal check failed: force of \"%s\" in \"%s\": the result says %.17g, ",
             s.result->members[0].name, s.result->combinations[0], s.result->N[0]);
    ck_assert_msg(strncmp(message, words, strlen(words)) == 0, "%s", message);
    const char *second = strstr(message, "written model ");
    ck_assert_ptr_nonnull(second);
    ck_close(strtod(second + strlen("written model "), NULL), right, 1e-9);
    sct_issues_free(issues);
    sized_free(&s);
}
END_TEST

START_TEST(another_model_is_caught)
{
    sized s = size_file("models/demo_roof.json");
    ck_assert_int_eq(verify(s.model, s.result, false), SCT_SELF_CHECK); /* sizes left open */
    sct_model *other = random_model(2, 8);
    ck_assert_int_eq(verify(other, s.result, false), SCT_SELF_CHECK);
    mb_free(other);
    for (int g = 0; g < s.back->n_groups; g++) {
        sct_group *group = &s.back->groups[g];
        if (group->kind != SCT_HELD_SECTION) continue;
        group->held++; /* the next section of its family */
        ck_assert_int_eq(verify(s.back, s.result, false), SCT_SELF_CHECK);
        group->held--;
    }
    ck_assert_int_eq(verify(s.back, s.result, true), SCT_OK);
    sized_free(&s);
}
END_TEST

START_TEST(a_model_that_differs_in_a_count_a_name_or_an_end_is_caught)
{
    sized s = size_file("models/demo_roof.json");
    sct_model *m = s.back;
    int *counts[] = {&m->n_joints, &m->n_members, &m->n_groups, &m->n_cases, &m->n_combinations, &m->n_deflections};
    for (size_t k = 0; k < sizeof counts / sizeof *counts; k++) {
        --*counts[k];
        ck_assert_int_eq(verify(m, s.result, false), SCT_SELF_CHECK);
        ++*counts[k];
    }
    m->dimensions = 3;
    ck_assert_int_eq(verify(m, s.result, false), SCT_SELF_CHECK);
    m->dimensions = 2;
    sct_member *member = &m->members[3];
    int *ends[] = {&member->group, &member->from, &member->to};
    for (int k = 0; k < 3; k++) {
        *ends[k] += *ends[k] == 0 ? 1 : -1;
        ck_assert_int_eq(verify(m, s.result, false), SCT_SELF_CHECK);
        *ends[k] = k == 0 ? s.result->members[3].group : k == 1 ? s.result->members[3].from : s.result->members[3].to;
    }
    const char **names[] = {&member->name, &m->groups[0].name};
    for (int k = 0; k < 2; k++) {
        const char *name = *names[k];
        *names[k] = "another";
        ck_assert_int_eq(verify(m, s.result, false), SCT_SELF_CHECK);
        *names[k] = name;
    }
    ck_assert_int_eq(verify(m, s.result, true), SCT_OK);
    sized_free(&s);
}
END_TEST

/* A mechanism has no second analysis either. */
START_TEST(a_matrix_without_a_factor_is_caught)
{
    sct_model *m = random_model(2, 8);
    sct_result *r = check(m);
    m->joints[0].n_held = m->joints[1].n_held = m->joints[m->n_joints - 1].n_held = 0;
    ck_assert_int_eq(verify(m, r, false), SCT_SELF_CHECK);
    sct_result_free(r);
    mb_free(m);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("verify");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, the_skyline_factor_solves_what_was_multiplied);
    tcase_add_test(tests, a_matrix_that_is_not_positive_definite_has_no_skyline_factor);
    tcase_add_test(tests, both_paths_agree_on_the_demo_and_all_published_problems);
    tcase_add_test(tests, both_paths_agree_on_random_trusses);
    tcase_add_test(tests, badly_scaled_and_almost_movable_trusses_give_no_false_alarm);
    tcase_add_test(tests, both_paths_agree_on_long_trusses_in_any_order);
    tcase_add_test(tests, every_number_changed_by_a_millionth_is_caught);
    tcase_add_test(tests, numbers_that_are_none_are_caught);
    tcase_add_test(tests, both_numbers_stand_in_the_message);
    tcase_add_test(tests, another_model_is_caught);
    tcase_add_test(tests, a_model_that_differs_in_a_count_a_name_or_an_end_is_caught);
    tcase_add_test(tests, a_matrix_without_a_factor_is_caught);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

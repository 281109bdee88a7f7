/* Sizing: derivatives of the problem, closed forms, outcomes, prices, sections. Models are invented. */
#include "support.h"

#include <fenv.h>
#include <string.h>
#ifdef __SSE2__
#include <xmmintrin.h>
#endif

#include "base/text.h"
#include "sized.h"

/* A triangle: tie between the supports, two rafters. Everything a test changes is a parameter. */
static char *triangle(const char *tie, const char *rafters, const char *limits, const char *cases)
{
    sct_text t = {0};
    sct_text_format(&t,
                    "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\","
                    " \"stress\": \"MPa\", \"area\": \"mm2\", \"displacement\": \"mm\" },"
                    "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"yield\": 355,"
                    " \"expansion\": \"12e-6 1/K\", \"allowable\": { \"tension\": 200, \"compression\": 160 } } },"
                    "\"joints\": { \"A\": { \"at\": [0, 0], \"support\": [\"x\", \"y\"] },"
                    " \"B\": { \"at\": [8, 0], \"support\": [\"y\"] }, \"C\": { \"at\": [4, 3] } },"
                    "\"groups\": { \"tie\": { \"material\": \"S\", %s }, \"rafters\": { \"material\": \"S\", %s } },"
                    "\"members\": { \"AB\": { \"from\": \"A\", \"to\": \"B\", \"group\": \"tie\" },"
                    " \"AC\": { \"from\": \"A\", \"to\": \"C\", \"group\": \"rafters\" },"
                    " \"CB\": { \"from\": \"C\", \"to\": \"B\", \"group\": \"rafters\" } },"
                    "\"cases\": { %s },"
                    "\"combinations\": { \"all\": { \"for\": \"allowable\", \"sum\": { \"Q\": 1 } } },"
                    "\"limits\": { %s } }",
                    tie, rafters, cases != NULL ? cases : "\"Q\": { \"joints\": { \"C\": [0, -60] } }", limits);
    return sct_text_take(&t, NULL);
}

static const char AREA[] = "\"area\": { \"at_least\": 10, \"at_most\": 100000 }";
static const char NO_BUCKLING[] = "\"buckling\": { \"by\": \"none\" }";

/* ---- derivatives ------------------------------------------------------------------------------------------------ */

START_TEST(derivatives_agree_with_differences)
{
    static const char *const FILES[] = {"models/demo_roof.json", "models/benchmarks/10bar_case1.json",
                                        "models/benchmarks/25bar.json", "models/benchmarks/18bar_euler.json"};
    sct_model *model = read_file(FILES[_i]);
    for (unsigned seed = 1; seed <= 3; seed++) {
        /* the second derivative of a ladder's envelope jumps at its knots: a difference across one is off */
        check_derivatives(model, false, seed, _i == 0 ? 1e-4 : 1e-5);
        check_derivatives(model, true, seed, 1e-5);
    }
    sct_model_free(model);
}
END_TEST

/* Two ties of different temperature beside a settling support make a redundant truss in which every term counts. */
START_TEST(derivatives_agree_with_self_weight_temperature_and_settlement)
{
    sct_model *model = parse(
        "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\" "
        "},"
        "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"expansion\": \"12e-6 1/K\","
        " \"allowable\": { \"tension\": 200, \"compression\": 160 } } },"
        "\"joints\": { \"A\": { \"at\": [0, 0], \"support\": [\"x\", \"y\"] }, \"B\": { \"at\": [4, 0] },"
        " \"C\": { \"at\": [8, 0], \"support\": [[0.6, 0.8], \"x\"] }, \"D\": { \"at\": [4, 3] }, \"E\": { \"at\": [8, "
        "3.5] } },"
        "\"groups\": { \"a\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"50 cm2\" } },"
        " \"b\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"50 cm2\" } },"
        " \"c\": { \"material\": \"S\", \"area\": \"12 cm2\" },"
        " \"d\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"50 cm2\" } } },"
        "\"members\": { \"1\": { \"from\": \"A\", \"to\": \"B\", \"group\": \"a\" }, \"2\": { \"from\": \"B\", \"to\": "
        "\"C\", \"group\": \"a\" },"
        " \"3\": { \"from\": \"A\", \"to\": \"D\", \"group\": \"b\" }, \"4\": { \"from\": \"B\", \"to\": \"D\", "
        "\"group\": \"c\" },"
        " \"5\": { \"from\": \"D\", \"to\": \"C\", \"group\": \"b\" }, \"6\": { \"from\": \"D\", \"to\": \"E\", "
        "\"group\": \"d\" },"
        " \"7\": { \"from\": \"B\", \"to\": \"E\", \"group\": \"d\" }, \"8\": { \"from\": \"C\", \"to\": \"E\", "
        "\"group\": \"c\" } },"
        "\"cases\": { \"G\": { \"self_weight\": 1.1, \"joints\": { \"D\": [0, -50] } }, \"T\": { \"members\": { \"1\": "
        "{ \"temperature\": \"40 K\" },"
        " \"6\": { \"lack_of_fit\": \"3 mm\" } } }, \"S\": { \"settlements\": { \"C\": [\"0 mm\", \"-12 mm\"] } } },"
        "\"combinations\": { \"1\": { \"for\": \"allowable\", \"sum\": { \"G\": 1, \"T\": 1 } }, \"2\": { \"for\": "
        "\"allowable\", \"sum\": { \"G\": 0.9, \"T\": -0.5, \"S\": 1 } } },"
        "\"limits\": { \"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": \"all\", \"direction\": "
        "\"y\", \"at_most\": \"10 mm\" } ] } }");
    for (unsigned seed = 1; seed <= 5; seed++) check_derivatives(model, false, seed, 1e-5);
    sct_model_free(model);
}
END_TEST

/* ---- closed forms ------------------------------------------------------------------------------------------------ */

/* By hand: 60 kN at C, rafters 5 m with slope 3/5: each -30/(3/5) = -50 kN, tie 40 kN. */
START_TEST(a_determinate_truss_gets_force_over_allowable_stress)
{
    char *text = triangle(AREA, AREA, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_OPTIMUM);
    ck_assert(r->kept);
    ck_close(r->groups[0].A, 40e3 / 200e6, 1e-8);
    ck_close(r->groups[1].A, 50e3 / 160e6, 1e-8);
    ck_close(r->mass, 7850 * (8 * 40e3 / 200e6 + 10 * 50e3 / 160e6), 1e-8);
    ck_assert_double_le(r->utilisation, 1.0);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* Euler with safety 2 on I = 0.5 A^2: A = sqrt(2 N L^2/(pi^2 E 0.5)). */
START_TEST(a_strut_under_euler_has_its_closed_form)
{
    char *text = triangle(AREA,
                          "\"area\": { \"at_least\": 10, \"at_most\": 100000 }, \"second_moment\": { \"c\": 0.5 },"
                          "\"buckling\": { \"by\": \"Euler\", \"safety\": 2 }",
                          NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    const double PI = 3.14159265358979323846;
    ck_close(r->groups[1].A, sqrt(2 * 50e3 * 25 / (PI * PI * 210e9 * 0.5)), 1e-8);
    ck_assert_int_eq(r->members[1].check, SCT_CHECK_BUCKLING_IN);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* One displacement limit, by Lagrange: u = sum N n L/(E A) <= U, mass = rho sum A L gives A_i = sqrt(N_i n_i) s with
 * s = sum L sqrt(N n) / (E U), groups summed. */
START_TEST(a_deflection_limit_alone_has_its_closed_form)
{
    char *text = triangle(AREA, AREA,
                          "\"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": [\"C\"], \"direction\": "
                          "\"y\", \"at_most\": 1 } ]",
                          NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    const double N[2] = {40e3, 50e3}, n[2] = {40.0 / 60, 50.0 / 60}, L[2] = {8, 10}, E = 210e9, U = 1e-3;
    const double s = (L[0] * sqrt(N[0] * n[0]) + L[1] * sqrt(N[1] * n[1])) / (E * U);
    for (int g = 0; g < 2; g++) ck_close(r->groups[g].A, sqrt(N[g] * n[g]) * s, 2e-6);
    ck_close(r->mass, 7850 * (L[0] * sqrt(N[0] * n[0]) + L[1] * sqrt(N[1] * n[1])) * s, 1e-7);
    ck_assert_int_eq(r->n_prices, 1);
    /* mass ~ 1/U: dm/dU = -m/U, exactly the multiplier per metre */
    ck_close(r->prices[0].per_unit, r->mass / U, 1e-5);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* ---- outcomes -----------------------------------------------------------------------------------------------------
 */

START_TEST(slack_limits_leave_the_smallest_sizes)
{
    char *text = triangle("\"area\": { \"at_least\": 5000, \"at_most\": 100000 }",
                          "\"area\": { \"at_least\": 6000, \"at_most\": 100000 }", NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_OPTIMUM);
    ck_close(r->groups[0].A, 5000e-6, 1e-12);
    ck_close(r->groups[1].A, 6000e-6, 1e-12);
    ck_assert_int_eq(r->n_prices, 2);
    ck_assert_int_eq(r->prices[0].kind, SCT_CHECK_SMALLEST);
    ck_assert_ptr_nonnull(strstr(r->verdict, "the smallest sizes allowed govern"));
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(an_infeasible_problem_is_told_with_its_limit)
{
    char *text = triangle("\"area\": { \"at_least\": 10, \"at_most\": 100 }", AREA, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_NO_FEASIBLE_DESIGN);
    ck_assert(!r->kept);
    ck_close(r->utilisation, 2.0, 1e-6); /* needs 200 mm2, may have 100 */
    ck_assert_ptr_nonnull(strstr(r->verdict, "tension of member \"AB\""));
    ck_assert_ptr_nonnull(strstr(r->verdict, "2.00"));
    for (int k = 0; k < r->n_starts; k++) ck_assert_int_le(r->starts[k].analyses, 25);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(an_impossible_slenderness_is_told_before_the_search)
{
    char *text = triangle(AREA,
                          "\"area\": { \"at_least\": 10, \"at_most\": 1000 }, \"second_moment\": { \"c\": 0.5 }, "
                          "\"slenderness\": { \"any\": 50 }",
                          NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_NO_FEASIBLE_DESIGN);
    ck_assert(!r->kept);
    ck_assert_ptr_nonnull(strstr(r->verdict, "slenderness limit 50"));
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* i^2 = c A: lambda <= 200 asks A >= (5/200)^2/0.5; only the compressed rafters must keep it. */
START_TEST(slenderness_of_compression_binds_compressed_members_only)
{
    const char *group = "\"area\": { \"at_least\": 10, \"at_most\": 100000 }, \"second_moment\": { \"c\": 0.5 }, "
                        "\"slenderness\": { \"compression\": 200 }";
    char *text = triangle(group, group, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_close(r->groups[0].A, 40e3 / 200e6, 1e-8);
    ck_close(r->groups[1].A, 25.0 / 40000 / 0.5, 1e-8);
    ck_assert_int_eq(r->members[1].check, SCT_CHECK_SLENDERNESS);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(without_iterations_the_start_is_checked_and_marked)
{
    char *text =
        triangle("\"area\": { \"at_least\": 10, \"at_most\": 100000, \"start\": 777 }", AREA, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_settings settings = sct_settings_defaults();
    settings.iterations = 0;
    sct_result *r = size_with(model, &settings);
    ck_assert_int_eq(r->outcome, SCT_NOT_OPTIMISED);
    ck_close(r->groups[0].A, 777e-6, 1e-12);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

static bool stop_at_once(const sct_progress *progress, void *user)
{
    (void)progress;
    return ++*(int *)user < 3;
}

START_TEST(an_observer_can_stop_the_search_and_gets_the_best_so_far)
{
    sct_model *model = read_file("models/demo_roof.json");
    int calls = 0;
    sct_settings settings = sct_settings_defaults();
    settings.observer = stop_at_once;
    settings.user = &calls;
    sct_result *r = size_with(model, &settings);
    ck_assert_int_eq(r->outcome, SCT_STOPPED);
    ck_assert_int_eq(calls, 3);
    for (int g = 0; g < r->n_groups; g++) ck_assert_ptr_nonnull(r->groups[g].section);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

/* What was told as the best mass when the second start began. */
static bool keep_best(const sct_progress *progress, void *user)
{
    double *best = user;
    if (progress->start == 2 && isnan(*best)) *best = progress->best;
    return true;
}

START_TEST(an_observer_is_told_the_best_of_the_starts_before)
{
    sct_model *model = read_file("models/benchmarks/10bar_case1.json");
    double best = NAN;
    sct_settings settings = sct_settings_defaults();
    settings.starts = 2;
    settings.observer = keep_best;
    settings.user = &best;
    sct_result *r = size_with(model, &settings);
    ck_assert_int_eq(r->starts[0].outcome, SCT_OPTIMUM);
    ck_assert(best == r->starts[0].mass);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

START_TEST(unsound_settings_are_refused)
{
    sct_model *model = read_file("models/demo_roof.json");
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    const double bad[] = {0.0, -1.0, NAN, 1.0};
    for (int k = 0; k < 4; k++) {
        sct_settings settings = sct_settings_defaults();
        settings.tolerance = bad[k];
        ck_assert_int_eq(sct_size(model, &settings, &r, issues), SCT_BAD_INPUT);
        ck_assert_ptr_null(r);
    }
    sct_issues_free(issues);
    sct_model_free(model);
}
END_TEST

START_TEST(settings_are_sound_up_to_their_bounds_and_not_beyond)
{
    static const struct {
        int starts, iterations, engine;
        const char *fault; /* begins with it; NULL: sound */
    } CASES[] = {{0, 0, SCT_ENGINE_AUTO, NULL},          {1000, 100000, SCT_ENGINE_SPARSE, NULL},
                 {-1, 0, SCT_ENGINE_AUTO, "starts"},     {1001, 0, SCT_ENGINE_AUTO, "starts"},
                 {0, -1, SCT_ENGINE_AUTO, "iterations"}, {0, 100001, SCT_ENGINE_AUTO, "iterations"},
                 {0, 0, -1, "no such engine"},           {0, 0, SCT_ENGINE_SPARSE + 1, "no such engine"}};
    for (size_t i = 0; i < sizeof CASES / sizeof *CASES; i++) {
        sct_settings settings = sct_settings_defaults();
        settings.starts = CASES[i].starts;
        settings.iterations = CASES[i].iterations;
        settings.engine = (sct_engine)CASES[i].engine;
        const char *fault = sct_settings_fault(&settings);
        ck_assert((fault == NULL) == (CASES[i].fault == NULL));
        if (fault != NULL) ck_assert_int_eq(strncmp(fault, CASES[i].fault, strlen(CASES[i].fault)), 0);
    }
}
END_TEST

static void check_arithmetic(const sct_model *model, sct_status expected, const char *words)
{
    sct_result *result;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_size(model, NULL, &result, issues), expected);
    if (words != NULL) ck_assert_ptr_nonnull(strstr(sct_issues_get(issues, 0)->message, words));
    sct_result_free(result);
    sct_issues_free(issues);
}

/* Every bound rests on it; a host program may have changed it. */
START_TEST(another_arithmetic_than_the_usual_is_refused)
{
    sct_model *model = read_file("models/benchmarks/10bar_case1.json");
    check_arithmetic(model, SCT_OK, NULL);
    ck_assert_int_eq(fesetround(FE_UPWARD), 0);
    check_arithmetic(model, SCT_SELF_CHECK, "not rounded to the nearest");
    ck_assert_int_eq(fesetround(FE_TONEAREST), 0);
#ifdef __SSE2__
    _mm_setcsr(_mm_getcsr() | 0x8000u); /* flush to zero, as libraries built with -ffast-math set it */
    check_arithmetic(model, SCT_SELF_CHECK, "flushed to zero");
    _mm_setcsr(_mm_getcsr() & ~0x8000u);
#endif
    check_arithmetic(model, SCT_OK, NULL);
    sct_model_free(model);
}
END_TEST

START_TEST(check_refuses_a_group_without_a_size)
{
    sct_model *model = read_file("models/demo_roof.json");
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    ck_assert_int_eq(sct_check(model, NULL, &r, issues), SCT_BAD_INPUT);
    ck_assert_ptr_null(r);
    ck_assert_int_eq(sct_issues_errors(issues), 7);
    sct_issues_free(issues);
    sct_model_free(model);
}
END_TEST

/* ---- search -------------------------------------------------------------------------------------------------------
 */

START_TEST(the_same_run_gives_the_same_bits_with_either_engine_near)
{
    sct_model *model = read_file("models/benchmarks/72bar_case1.json");
    sct_settings settings = sct_settings_defaults();
    sct_result *a = size_with(model, &settings), *b = size_with(model, &settings);
    ck_assert(memcmp(&a->mass, &b->mass, sizeof a->mass) == 0);
    for (int g = 0; g < a->n_groups; g++) ck_assert(memcmp(&a->groups[g].A, &b->groups[g].A, sizeof(double)) == 0);
    settings.engine = SCT_ENGINE_SPARSE;
    sct_result *c = size_with(model, &settings);
    ck_close(c->mass, a->mass, 1e-6);
    sct_result_free(a);
    sct_result_free(b);
    sct_result_free(c);
    sct_model_free(model);
}
END_TEST

/* A price is what the limit costs: size again with limits 0.05 % wider and narrower, compare with the multiplier. */
START_TEST(the_price_of_deflection_is_what_a_wider_limit_saves)
{
    const double limit[3] = {1.3, 1.29935, 1.30065};
    char words[200], *text[3];
    sct_result *r[3];
    sct_model *model[3];
    for (int k = 0; k < 3; k++) {
        snprintf(words, sizeof words,
                 "\"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": [\"C\"], \"direction\": \"y\", "
                 "\"at_most\": %.6f } ]",
                 limit[k]);
        text[k] = triangle("\"area\": { \"at_least\": 200, \"at_most\": 900 }", AREA, words, NULL);
        model[k] = parse(text[k]);
        r[k] = size_with(model[k], NULL);
    }
    ck_assert_int_ge(r[0]->n_prices, 2);
    ck_assert_int_eq(r[0]->prices[0].kind, SCT_CHECK_DEFLECTION);
    ck_assert_int_eq(r[0]->prices[1].kind, SCT_CHECK_LARGEST);
    const double saved = r[1]->mass - r[2]->mass;
    ck_assert_double_eq_tol(r[0]->prices[0].multiplier * 0.001, saved, 1e-4 * saved);
    for (int k = 0; k < 3; k++) {
        sct_result_free(r[k]);
        sct_model_free(model[k]);
        free(text[k]);
    }
}
END_TEST

/* Ladder and free area in one truss. */
START_TEST(ladders_and_free_areas_mix)
{
    char *text = triangle(AREA,
                          "\"family\": \"CHS\", \"buckling\": { \"by\": \"Euler and Johnson\", \"safety\": 1.92 }, "
                          "\"slenderness\": { \"compression\": 180 }",
                          "\"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": [\"C\"], \"direction\": "
                          "\"y\", \"at_most\": 4 } ]",
                          NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_SECTIONS_FOUND);
    ck_assert(r->kept);
    ck_assert_ptr_null(r->groups[0].section);
    ck_assert_ptr_nonnull(r->groups[1].section);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* Every lighter pair of sections fails: checked one by one through sct_check on a model with the sections put in. */
START_TEST(no_lighter_pair_of_sections_keeps_the_limits)
{
    static const char *const LIST[] = {"CHS 42.4x2.6", "CHS 48.3x2.6", "CHS 48.3x3.2", "CHS 60.3x2.6",
                                       "CHS 60.3x3.2", "CHS 60.3x4",   "CHS 76.1x2.6", "CHS 76.1x3.2",
                                       "CHS 76.1x4",   "CHS 88.9x3.2", "CHS 88.9x4",   "CHS 114.3x3.2"};
    enum { N = sizeof LIST / sizeof LIST[0] };
    char list[400] = "\"family\": \"CHS\", \"sections\": [";
    for (int k = 0; k < N; k++)
        snprintf(list + strlen(list), sizeof list - strlen(list), "%s\"%s\"", k ? ", " : "", LIST[k]);
    strcat(list, "]");
    const char *limits = "\"buckling\": { \"by\": \"Euler and Johnson\", \"safety\": 1.92 }, \"slenderness\": { "
                         "\"any\": 300, \"compression\": 180 },"
                         "\"deflection\": [ { \"joints\": [\"C\"], \"direction\": \"y\", \"at_most\": 4.4 } ]";
    char *text = triangle(list, list, limits, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert(r->kept);
    double best = INFINITY;
    for (int a = 0; a < N; a++)
        for (int b = 0; b < N; b++) {
            char one[80], two[80];
            snprintf(one, sizeof one, "\"family\": \"CHS\", \"section\": \"%s\"", LIST[a]);
            snprintf(two, sizeof two, "\"family\": \"CHS\", \"section\": \"%s\"", LIST[b]);
            char *held = triangle(one, two, limits, NULL);
            sct_model *given = parse(held);
            sct_issues *issues = sct_issues_new();
            sct_result *checked = NULL;
            ck_assert_int_eq(sct_check(given, NULL, &checked, issues), SCT_OK);
            if (checked->kept) best = fmin(best, checked->mass);
            sct_result_free(checked);
            sct_issues_free(issues);
            sct_model_free(given);
            free(held);
        }
    ck_close(r->mass, best, 1e-12);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* The published method in plain areas: slower, the same optimum where it arrives. */
START_TEST(the_plain_method_reaches_the_same_optimum_of_a_small_problem)
{
    sct_model *model = read_file("models/benchmarks/3bar_symmetric.json");
    sct_settings settings = sct_settings_defaults();
    sct_result *fine = size_with(model, &settings);
    settings.plain = true;
    settings.starts = 1;
    settings.iterations = 2000;
    sct_result *plain = size_with(model, &settings);
    ck_assert(plain->kept);
    ck_close(plain->mass, fine->mass, 1e-4);
    ck_assert_int_gt(plain->starts[0].analyses, fine->starts[0].analyses);
    sct_result_free(fine);
    sct_result_free(plain);
    sct_model_free(model);
}
END_TEST

/* ---- what a review found ----------------------------------------------------------------------------------------- */

/* A post between two raking ties, held by its own lack of fit: its force changes sign with its size. */
static char *raked(const char *post, const char *ties, double lift, double safety)
{
    sct_text t = {0};
    sct_text_format(&t,
                    "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\","
                    " \"stress\": \"MPa\", \"area\": \"mm2\" },"
                    "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\","
                    " \"allowable\": { \"tension\": 140, \"compression\": 140 } } },"
                    "\"joints\": { \"A\": { \"at\": [0, 0], \"support\": [\"x\", \"y\"] },"
                    " \"B\": { \"at\": [2, 0], \"support\": [\"x\", \"y\"] },"
                    " \"D\": { \"at\": [-2, 0], \"support\": [\"x\", \"y\"] }, \"C\": { \"at\": [0, 2] } },"
                    "\"groups\": { \"p\": { \"material\": \"S\", %s }, \"s\": { \"material\": \"S\", %s } },"
                    "\"members\": { \"post\": { \"from\": \"A\", \"to\": \"C\", \"group\": \"p\" },"
                    " \"l\": { \"from\": \"D\", \"to\": \"C\", \"group\": \"s\" },"
                    " \"r\": { \"from\": \"B\", \"to\": \"C\", \"group\": \"s\" } },"
                    "\"cases\": { \"d\": { \"joints\": { \"C\": [0, %g] }, \"members\": { \"post\": { \"lack_of_fit\": "
                    "\"%g mm\" } } } },"
                    "\"combinations\": { \"c\": { \"for\": \"allowable\", \"sum\": { \"d\": 1 } } },"
                    "\"limits\": { \"buckling\": { \"by\": \"Euler\", \"safety\": %g } } }",
                    post, ties, lift, lift > 0 ? 0.8 : 0.0, safety);
    return sct_text_take(&t, NULL);
}

/* At middle sizes the post is compressed and could never keep 150; at the optimum it is a tie. */
START_TEST(a_member_that_is_a_tie_at_the_optimum_need_not_keep_the_limit_of_struts)
{
    char *text = raked("\"area\": { \"at_least\": 20, \"at_most\": 2000 }, \"second_moment\": { \"c\": 0.04 }, "
                       "\"slenderness\": { \"compression\": 150 }",
                       "\"area\": { \"at_least\": 50, \"at_most\": 5000 }, \"second_moment\": { \"c\": 5 }", 20, 1.92);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_OPTIMUM);
    ck_assert(r->kept);
    ck_assert(!r->members[0].compressed);
    ck_assert_double_lt(r->mass, 3.6);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

/* The price of a held column: a longer life by 1 % of length is compared with sizing again. */
START_TEST(the_price_of_a_held_column_is_what_a_shorter_one_saves)
{
    const double factor[3] = {1.0, 0.9995, 1.0005};
    sct_result *r[3];
    sct_model *model[3];
    char *text[3], post[200];
    for (int k = 0; k < 3; k++) {
        snprintf(post, sizeof post,
                 "\"area\": 300, \"second_moment\": { \"c\": 0.5 }, \"length_factor\": { \"in_plane\": %.4f, "
                 "\"out_of_plane\": 0.5 }",
                 factor[k]);
        text[k] = raked(post, "\"area\": { \"at_least\": 10, \"at_most\": 5000 }, \"second_moment\": { \"c\": 5 }", -20,
                        1.92);
        model[k] = parse(text[k]);
        r[k] = size_with(model[k], NULL);
    }
    ck_assert_int_eq(r[0]->n_prices, 1);
    ck_assert_int_eq(r[0]->prices[0].kind, SCT_CHECK_BUCKLING_IN);
    const double saved = r[2]->mass - r[1]->mass; /* for 0.1 % of the length */
    ck_assert_double_gt(saved, 0.0);
    ck_assert_double_eq_tol(0.1 * r[0]->prices[0].saving, saved, 1e-3 * saved);
    for (int k = 0; k < 3; k++) {
        sct_result_free(r[k]);
        sct_model_free(model[k]);
        free(text[k]);
    }
}
END_TEST

/* Prices of stress and of a free column: determinate, so that the next sizing tells exactly what a relief saves. */
START_TEST(the_price_of_stress_is_what_a_higher_stress_saves)
{
    char *text = triangle(AREA, AREA, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->n_prices, 2);
    /* mass ~ 1/f: the multiplier of each group is its mass */
    for (int k = 0; k < 2; k++) ck_close(r->prices[k].multiplier, r->groups[r->prices[k].group].mass, 1e-6);
    ck_assert_double_ge(r->prices[0].saving, r->prices[1].saving);
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(a_refusal_names_the_limit_that_applies)
{
    const char *group = "\"family\": \"CHS\", \"sections\": [\"CHS 21.3x2.6\"], \"slenderness\": { \"any\": 350, "
                        "\"compression\": 180 }";
    char *text = triangle(group, AREA, NO_BUCKLING, NULL);
    sct_model *model = parse(text);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_NO_FEASIBLE_DESIGN);
    ck_assert_ptr_nonnull(strstr(r->verdict, "slenderness limit 350"));
    ck_assert_ptr_nonnull(strstr(r->verdict, "the best reaches 1198")); /* 8000 mm / sqrt(6805.7/152.7) mm, by hand */
    sct_result_free(r);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(a_number_that_is_none_is_the_worst_and_is_not_kept)
{
    ck_assert(isnan(sct_worse(NAN, 0.5)));
    ck_assert(isnan(sct_worse(0.5, NAN)));
    ck_assert(isnan(sct_worse(sct_worse(0.0, NAN), 0.5)));
    ck_assert(sct_worse(0.4, 0.5) == 0.5 && sct_worse(0.5, 0.4) == 0.5);
    ck_assert(!sct_keeps(NAN) && sct_keeps(1.0 + 1e-12) && !sct_keeps(1.0 + 1e-8));
}
END_TEST

/* What the reader promises is asked for again where the checks are made: without it every check would pass in silence.
 */
START_TEST(a_limit_that_is_no_number_ends_the_check)
{
    char *text =
        triangle("\"area\": 5000, \"second_moment\": { \"c\": 1 }", "\"area\": 6000, \"second_moment\": { \"c\": 1 }",
                 "\"buckling\": { \"by\": \"Euler and Johnson\", \"safety\": 1.9 }, \"slenderness\": { \"any\": 300, "
                 "\"compression\": 200 }",
                 NULL);
    for (int k = -1; k < 8; k++) {
        sct_model *model = parse(text);
        sct_issues *issues = sct_issues_new();
        sct_result *r = NULL;
        sct_group *g = &model->groups[1];
        double *const poisoned[] = {&g->allowable[0],
                                    &g->allowable[1],
                                    &g->safety,
                                    &g->slenderness_any,
                                    &g->slenderness_compression,
                                    &model->materials[0].yield,
                                    &model->members[1].length[0],
                                    &model->members[1].length[1]};
        if (k >= 6) model->members[1].source[k - 6] = SCT_LENGTH_RESTRAINT;
        if (k >= 0) *poisoned[k] = NAN;
        ck_assert_int_eq(sct_check(model, NULL, &r, issues), k < 0 ? SCT_OK : SCT_SELF_CHECK);
        ck_assert((r != NULL) == (k < 0));
        sct_result_free(r);
        sct_issues_free(issues);
        sct_model_free(model);
    }
    free(text);
}
END_TEST

/* Eight triangles apart from one another, each held at one corner only. */
START_TEST(at_most_six_parts_that_turn_are_told)
{
    sct_text t = {0};
    sct_text_add(
        &t,
        "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\" "
        "}, "
        "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"allowable\": { \"tension\": 200, "
        "\"compression\": 160 } } }, \"groups\": { \"all\": { \"material\": \"S\", \"area\": \"500 mm2\" } }, "
        "\"cases\": { \"Q\": { \"joints\": { \"B0\": [1, 0] } } }, \"combinations\": { \"Q\": { \"for\": "
        "\"allowable\", \"sum\": { \"Q\": 1 } } }, \"limits\": { \"buckling\": { \"by\": \"none\" } }, \"joints\": {");
    for (int i = 0; i < 8; i++)
        sct_text_format(&t,
                        "%s \"A%d\": { \"at\": [1, %d], \"support\": [\"x\", \"y\"] }, \"B%d\": { \"at\": [4, %d] }, "
                        "\"C%d\": { \"at\": [2.5, %d] }",
                        i > 0 ? "," : "", i, 3 * i, i, 3 * i, i, 3 * i + 1);
    sct_text_add(&t, " }, \"members\": {");
    for (int i = 0; i < 24; i++)
        sct_text_format(&t, "%s \"M%d\": { \"from\": \"%c%d\", \"to\": \"%c%d\", \"group\": \"all\" }",
                        i > 0 ? "," : "", i, "ABC"[i % 3], i / 3, "BCA"[i % 3], i / 3);
    sct_text_add(&t, " } }");
    sct_model *model = parse(t.data);
    sct_issues *issues = sct_issues_new();
    sct_result *r = NULL;
    ck_assert_int_eq(sct_check(model, NULL, &r, issues), SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_errors(issues), 6);
    ck_assert_ptr_nonnull(strstr(sct_issues_get(issues, 2)->message, "\"A2\" can turn about (1, 6) m"));
    sct_issues_free(issues);
    sct_model_free(model);
    sct_text_free(&t);
}
END_TEST

START_TEST(doubts_are_kept_in_the_result)
{
    char *text = triangle("\"area\": 300", "\"area\": 400",
                          "\"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": [\"C\"], \"direction\": "
                          "\"y\", \"at_most\": 400 } ]",
                          "\"Q\": { \"joints\": { \"C\": [0, -6] }, \"settlements\": { \"B\": [0, -200] } }");
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    sct_result *r = NULL;
    ck_assert_int_eq(sct_model_parse("t", text, strlen(text), &model, issues), SCT_OK);
    ck_assert_int_eq(sct_check(model, NULL, &r, issues), SCT_OK);
    ck_assert_int_eq(r->n_warnings, 3);
    ck_assert_ptr_nonnull(strstr(r->warnings[0], "buckling is not checked"));
    ck_assert_ptr_nonnull(strstr(r->warnings[1], "supports settle"));
    ck_assert_ptr_nonnull(strstr(r->warnings[2], "linear theory"));
    static const sct_format FORMATS[] = {SCT_SUMMARY, SCT_RESULT_JSON, SCT_SCHEDULE_CSV};
    for (int k = 0; k < 3; k++) {
        char *words = NULL;
        ck_assert_int_eq(sct_write(r, FORMATS[k], NULL, &words, NULL), SCT_OK);
        ck_assert_ptr_nonnull(strstr(words, "buckling is not checked"));
        free(words);
    }
    sct_result_free(r);
    sct_model_free(model);
    sct_issues_free(issues);
    free(text);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("sizing");
    TCase *c = tcase_create("sizing");
    tcase_set_timeout(c, 60);
    tcase_add_loop_test(c, derivatives_agree_with_differences, 0, 4);
    tcase_add_test(c, derivatives_agree_with_self_weight_temperature_and_settlement);
    tcase_add_test(c, a_determinate_truss_gets_force_over_allowable_stress);
    tcase_add_test(c, a_strut_under_euler_has_its_closed_form);
    tcase_add_test(c, a_deflection_limit_alone_has_its_closed_form);
    tcase_add_test(c, slack_limits_leave_the_smallest_sizes);
    tcase_add_test(c, an_infeasible_problem_is_told_with_its_limit);
    tcase_add_test(c, an_impossible_slenderness_is_told_before_the_search);
    tcase_add_test(c, slenderness_of_compression_binds_compressed_members_only);
    tcase_add_test(c, without_iterations_the_start_is_checked_and_marked);
    tcase_add_test(c, an_observer_can_stop_the_search_and_gets_the_best_so_far);
    tcase_add_test(c, an_observer_is_told_the_best_of_the_starts_before);
    tcase_add_test(c, unsound_settings_are_refused);
    tcase_add_test(c, settings_are_sound_up_to_their_bounds_and_not_beyond);
    tcase_add_test(c, another_arithmetic_than_the_usual_is_refused);
    tcase_add_test(c, check_refuses_a_group_without_a_size);
    tcase_add_test(c, the_same_run_gives_the_same_bits_with_either_engine_near);
    tcase_add_test(c, the_price_of_deflection_is_what_a_wider_limit_saves);
    tcase_add_test(c, ladders_and_free_areas_mix);
    tcase_add_test(c, no_lighter_pair_of_sections_keeps_the_limits);
    tcase_add_test(c, the_plain_method_reaches_the_same_optimum_of_a_small_problem);
    tcase_add_test(c, a_member_that_is_a_tie_at_the_optimum_need_not_keep_the_limit_of_struts);
    tcase_add_test(c, the_price_of_a_held_column_is_what_a_shorter_one_saves);
    tcase_add_test(c, the_price_of_stress_is_what_a_higher_stress_saves);
    tcase_add_test(c, a_refusal_names_the_limit_that_applies);
    tcase_add_test(c, a_number_that_is_none_is_the_worst_and_is_not_kept);
    tcase_add_test(c, a_limit_that_is_no_number_ends_the_check);
    tcase_add_test(c, at_most_six_parts_that_turn_are_told);
    tcase_add_test(c, doubts_are_kept_in_the_result);
    suite_add_tcase(s, c);
    return run_suite(s);
}

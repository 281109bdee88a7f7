/* Sizing with bars that carry tension only: derivatives, the braced demo, what is told and what is refused. */
#include "sized.h"

#include "base/text.h"

/* A frame whose bracing is slack or taut by combination, with everything that may depend on it: own weight, a bow, a
 * drift, a joint; a rod that is stretched when built; temperature. Rods through two storeys make sets of several. */
static const char BRACED[] =
    "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\" },"
    "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"yield\": 235, \"expansion\": \"12e-6 "
    "1/K\", \"allowable\": { \"tension\": 140, \"compression\": 140 } } },"
    "\"joints\": { \"A0\": { \"at\": [0, 0], \"support\": [\"x\", \"y\"] }, \"B0\": { \"at\": [5, 0], \"support\": "
    "[\"x\", \"y\"] }, \"A1\": { \"at\": [0, 4] }, \"B1\": { \"at\": [5, 4] }, \"A2\": { \"at\": [0.4, 7.5] }, \"B2\": "
    "{ \"at\": [5, 7] } },"
    "\"groups\": {"
    " \"columns\": { \"material\": \"S\", \"area\": { \"at_least\": \"20 cm2\", \"at_most\": \"200 cm2\" }, \"shape\": "
    "{ \"kind\": \"square tube\", \"width_to_wall\": 25 } },"
    " \"beams\": { \"material\": \"S\", \"area\": { \"at_least\": \"20 cm2\", \"at_most\": \"200 cm2\" }, "
    "\"second_moment\": { \"c\": 2.1 }, \"section_modulus\": { \"c\": 0.7 } },"
    " \"lower\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"20 cm2\" }, \"buckling\": "
    "{ "
    "\"by\": \"none\" } },"
    " \"upper\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"20 cm2\" }, \"buckling\": "
    "{ "
    "\"by\": \"none\" } } },"
    "\"members\": {"
    " \"a\": { \"through\": [\"A0\", \"A1\", \"A2\"], \"group\": \"columns\", \"ends\": \"pinned\" },"
    " \"b\": { \"through\": [\"B0\", \"B1\", \"B2\"], \"group\": \"columns\", \"ends\": \"pinned\" },"
    " \"c\": { \"from\": \"A1\", \"to\": \"B1\", \"group\": \"beams\" }, \"d\": { \"from\": \"A2\", \"to\": \"B2\", "
    "\"group\": \"beams\", \"ends\": [\"fixed\", \"pinned\"] },"
    " \"u1\": { \"from\": \"A0\", \"to\": \"B1\", \"group\": \"lower\", \"tension_only\": true },"
    " \"d1\": { \"from\": \"A1\", \"to\": \"B0\", \"group\": \"lower\", \"tension_only\": true },"
    " \"u2\": { \"from\": \"A1\", \"to\": \"B2\", \"group\": \"upper\", \"tension_only\": true },"
    " \"d2\": { \"from\": \"A2\", \"to\": \"B1\", \"group\": \"upper\", \"tension_only\": true },"
    " \"long\": { \"from\": \"A0\", \"to\": \"B2\", \"group\": \"upper\", \"tension_only\": true } },"
    "\"cases\": { \"G\": { \"self_weight\": true, \"loads\": [{ \"on\": [\"c\", \"d\"], \"line\": [0, -14] }] },"
    " \"W\": { \"joints\": { \"A1\": [30, 0], \"A2\": [22, 0] }, \"loads\": [{ \"on\": \"b 2\", \"line\": [2, 0] }] },"
    " \"T\": { \"members\": { \"a 1\": { \"temperature\": \"25 K\" }, \"d2\": { \"lack_of_fit\": \"-2 mm\" } } } },"
    "\"combinations\": { \"1\": { \"for\": \"allowable\", \"sum\": { \"G\": 1, \"W\": 1 } },"
    " \"2\": { \"for\": \"allowable\", \"sum\": { \"G\": 1, \"W\": -1, \"T\": 1 } },"
    " \"3\": { \"for\": \"allowable\", \"sum\": { \"G\": 1.2, \"W\": 0.4, \"T\": -0.5 } } },"
    "\"limits\": { \"buckling\": { \"by\": \"Euler\", \"safety\": 1.8 },"
    " \"deflection\": [ { \"joints\": [\"A2\"], \"direction\": \"x\", \"at_most\": \"12 mm\" } ],"
    " \"drift\": [ { \"along\": [\"A0\", \"A1\", \"A2\"], \"direction\": \"x\", \"at_most\": \"h/300\" } ],"
    " \"bow\": [ { \"members\": [\"c\", \"a 1\"], \"at_most\": \"L/300\" }, { \"members\": [\"b\"], \"at_most\": "
    "\"L/400\" } ] } }";

START_TEST(derivatives_with_slack_bars_agree_with_differences)
{
    sct_model *model = parse(BRACED);
    for (unsigned seed = 1; seed <= 6; seed++) check_derivatives(model, false, seed, 1e-5);
    check_derivatives(model, true, 1, 1e-5);
    sct_model_free(model);
}
END_TEST

/* With a limit on the critical load factor, and moments amplified by sway. */
START_TEST(derivatives_of_critical_load_factors_with_slack_bars_agree_with_differences)
{
    static const char *const LIMITS[] = {"\"critical_factor\": { \"at_least\": 10 }, ", "\"amplify_sway\": true, "};
    static const char BEFORE[] = "\"buckling\": { \"by\": \"Euler\"";
    const char *at = strstr(BRACED, BEFORE);
    sct_text t = {0};
    sct_text_format(&t, "%.*s%s%s", (int)(at - BRACED), BRACED, LIMITS[_i], at);
    sct_model *model = parse(t.data);
    for (unsigned seed = 1; seed <= 4; seed++) check_gradients(model, seed);
    sct_model_free(model);
    sct_text_free(&t);
}
END_TEST

/* The result with its sizes put in, read back and analysed by the second path. */
static sct_status verified(const sct_result *r)
{
    char *text;
    size_t size;
    ck_assert_int_eq(sct_write(r, SCT_MODEL_JSON, NULL, &text, &size), SCT_OK);
    sct_model *sized = parse(text);
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_verify(sized, r, issues);
    sct_issues_free(issues);
    sct_model_free(sized);
    free(text);
    return status;
}

static int member_of(const sct_result *r, const char *name)
{
    int m = 0;
    while (strcmp(r->members[m].name, name) != 0) m++;
    return m;
}

static bool slack_in(const sct_result *r, int combination, const char *name)
{
    return r->slack[combination * r->n_members + member_of(r, name)];
}

START_TEST(a_braced_frame_is_sized_to_an_optimum_that_both_paths_agree_on)
{
    sct_model *model = parse(BRACED);
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_OPTIMUM);
    ck_assert(r->kept);
    ck_assert(r->kkt <= 1e-6);
    ck_assert(slack_in(r, 0, "d1") && !slack_in(r, 0, "u1"));
    ck_assert(slack_in(r, 1, "u1") && !slack_in(r, 1, "d1"));
    for (int i = 0; i < r->n_starts; i++) ck_assert_int_eq(r->starts[i].outcome, SCT_OPTIMUM);
    for (int m = 0; m < r->n_members; m++)
        if (model->members[m].tension_only) ck_assert(r->members[m].N_min >= 0.0 && !r->members[m].compressed);
    ck_assert_int_eq(verified(r), SCT_OK);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

static bool says(const sct_result *r, sct_format format, const char *words)
{
    char *text;
    ck_assert_int_eq(sct_write(r, format, NULL, &text, NULL), SCT_OK);
    const bool found = strstr(text, words) != NULL;
    free(text);
    return found;
}

START_TEST(the_braced_demo_tells_its_slack_members)
{
    sct_model *model = read_file("models/demo_braced.json");
    sct_result *r = size_with(model, NULL);
    ck_assert_int_eq(r->outcome, SCT_SECTIONS_FOUND);
    ck_assert_int_eq(verified(r), SCT_OK);
    ck_assert(says(r, SCT_SUMMARY, "  In \"wind from the left\": \"down 1\", \"down 2\"\n"));
    ck_assert(says(r, SCT_RESULT_JSON, "\"slack\": "));
    ck_assert(says(r, SCT_RESULT_JSON, "[\"down 1\", \"down 2\"]"));
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

START_TEST(a_wrong_set_of_slack_members_is_found_by_the_second_path)
{
    sct_model *model = parse(BRACED);
    sct_result *r = size_with(model, NULL);
    static const char *const NAMES[] = {"u1", "d1", "u2", "d2", "long", "a 1"};
    for (int c = 0; c < r->n_combinations; c++)
        for (size_t i = 0; i < sizeof NAMES / sizeof NAMES[0]; i++) {
            bool *slack = &r->slack[c * r->n_members + member_of(r, NAMES[i])];
            *slack = !*slack;
            ck_assert_int_eq(verified(r), SCT_SELF_CHECK);
            *slack = !*slack;
        }
    ck_assert_int_eq(verified(r), SCT_OK);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

/* Only one diagonal, and wind from both sides. */
static const char ONE_WAY[] =
    "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\" },"
    "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"allowable\": { \"tension\": 140, "
    "\"compression\": 140 } } },"
    "\"joints\": { \"A0\": { \"at\": [0, 0], \"support\": [\"x\", \"y\"] }, \"B0\": { \"at\": [4, 0], \"support\": "
    "[\"x\", \"y\"] }, \"A1\": { \"at\": [0, 3] }, \"B1\": { \"at\": [4, 3] } },"
    "\"groups\": { \"g\": { \"material\": \"S\", \"area\": { \"at_least\": \"1 cm2\", \"at_most\": \"90 cm2\" } } },"
    "\"members\": { \"a\": { \"from\": \"A0\", \"to\": \"A1\", \"group\": \"g\" }, \"b\": { \"from\": \"B0\", \"to\": "
    "\"B1\", \"group\": \"g\" }, \"c\": { \"from\": \"A1\", \"to\": \"B1\", \"group\": \"g\" }, \"rod\": { \"from\": "
    "\"A0\", \"to\": \"B1\", \"group\": \"g\", \"tension_only\": true } },"
    "\"cases\": { \"W\": { \"joints\": { \"A1\": [10, 0] } } },"
    "\"combinations\": { \"from the left\": { \"for\": \"allowable\", \"sum\": { \"W\": 1 } }, \"from the right\": { "
    "\"for\": \"allowable\", \"sum\": { \"W\": -1 } } },"
    "\"limits\": { \"buckling\": { \"by\": \"none\" } } }";

START_TEST(a_combination_that_nothing_carries_is_refused_by_name)
{
    sct_model *model = parse(ONE_WAY);
    sct_issues *issues = sct_issues_new();
    sct_result *r;
    ck_assert_int_eq(sct_size(model, NULL, &r, issues), SCT_MECHANISM);
    ck_assert_ptr_null(r);
    ck_assert_int_eq(sct_issues_errors(issues), 1);
    const sct_issue *said = sct_issues_get(issues, sct_issues_count(issues) - 1);
    ck_assert_str_eq(said->message,
                     "combination \"from the right\" is not carried: it compresses members that carry tension only "
                     "(\"rod\"), and when they are slack the structure moves without resistance");
    ck_assert_str_eq(said->pointer, "/combinations/from the right");
    sct_issues_free(issues);
    sct_model_free(model);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("sizing with slack bars");
    TCase *c = tcase_create("slack");
    tcase_set_timeout(c, 120);
    tcase_add_test(c, derivatives_with_slack_bars_agree_with_differences);
    tcase_add_loop_test(c, derivatives_of_critical_load_factors_with_slack_bars_agree_with_differences, 0, 2);
    tcase_add_test(c, a_braced_frame_is_sized_to_an_optimum_that_both_paths_agree_on);
    tcase_add_test(c, the_braced_demo_tells_its_slack_members);
    tcase_add_test(c, a_wrong_set_of_slack_members_is_found_by_the_second_path);
    tcase_add_test(c, a_combination_that_nothing_carries_is_refused_by_name);
    suite_add_tcase(s, c);
    return run_suite(s);
}

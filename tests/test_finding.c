/* What a result says in words: its finding, the quantities of a drawing, and one member's checks with the numbers put
 * in. The bracket's forces are those of the 3-4-5 triangle. */
#include "support.h"

#include <string.h>

#include "report/finding.h"
#include "report/quantity.h"
#include "synthetic_result.h"

static synthetic made;

static const char *heading(const sct_result *r)
{
    static sct_text text;
    sct_text_free(&text);
    sct_finding_heading(r, &text);
    sct_text_add(&text, "");
    return text.data;
}

static const char *details(const sct_result *r)
{
    static sct_text text;
    sct_text_free(&text);
    sct_finding_details(r, &text);
    return text.data;
}

static void member_at(double utilisation)
{
    made.members[0].utilisation = utilisation;
}

START_TEST(the_heading_names_what_governs)
{
    sct_result *r = synthetic_result(&made);
    ck_assert_str_eq(heading(r), "Every limit is kept; R1 governs at 0.94");
    member_at(0.5);
    ck_assert_str_eq(heading(r), "Every limit is kept; deflection governs at 0.92");
    r->n_members = 0;
    ck_assert_str_eq(heading(r), "Every limit is kept; deflection governs at 0.92");
    r->n_deflections = 0;
    ck_assert_str_eq(heading(r), "");
}
END_TEST

START_TEST(the_heading_names_limits_on_bows_and_on_the_whole)
{
    sct_result *r = synthetic_result(&made);
    sct_bow_result bow = {.member = 1, .utilisation = 0.97};
    sct_critical_result critical = {.combination = 1, .factor = 5};
    r->bows = &bow;
    r->n_bows = 1;
    ck_assert_str_eq(heading(r), "Every limit is kept; the bow of R2 governs at 0.97");
    r->criticals = &critical;
    r->n_criticals = 1;
    r->least_factor = 4.95;
    ck_assert_str_eq(heading(r), "Every limit is kept; the critical load factor under W governs at 0.99");
    r->least_frequency = 3;
    r->frequency = 2.5;
    r->kept = false;
    ck_assert_str_eq(heading(r), "The lowest frequency is at 1.20 of its limit");
}
END_TEST

START_TEST(a_deflection_names_the_joint_that_it_counts_against)
{
    sct_result *r = synthetic_result(&made);
    made.deflections[0].from = 1;
    ck_assert_ptr_nonnull(strstr(details(r), "Deflection at C 18.3 of 20.0\xE2\x80\xAFmm relative to B (L/300)."));
}
END_TEST

START_TEST(the_heading_names_what_is_not_kept)
{
    sct_result *r = synthetic_result(&made);
    r->kept = false;
    ck_assert_str_eq(heading(r), "Not every limit is kept");
    made.deflections[0].utilisation = 1.201;
    ck_assert_str_eq(heading(r), "The deflection at C is 1.21 of its limit");
    member_at(1.5);
    ck_assert_str_eq(heading(r), "One of 2 members is above 1");
    made.members[1].utilisation = 1.1;
    ck_assert_str_eq(heading(r), "Two of 2 members are above 1");
    static sct_member_result many[12];
    for (int m = 0; m < 12; m++) many[m] = made.members[0];
    r->members = many;
    r->n_members = 12;
    ck_assert_str_eq(heading(r), "12 of 12 members are above 1");
}
END_TEST

START_TEST(details_tell_the_worst_member_the_others_and_the_deflection)
{
    sct_result *r = synthetic_result(&made);
    r->n_warnings = 1;
    ck_assert_str_eq(details(r), "R1: 0.94 in buckling in plane under W. Deflection at C 18.3 of 20.0\xE2\x80\xAFmm "
                                 "(L/300). 1 warning: see the schedule.");
    made.deflections[0].label = NULL;
    made.deflections[0].utilisation = 1.2;
    r->n_warnings = 2;
    r->us_customary = true;
    member_at(0.9301);
    made.members[0].combination = -1;
    ck_assert_str_eq(details(r), "R1: 0.94 in buckling in plane. Deflection at C 0.72 of 0.79\xE2\x80\xAFin, not kept. "
                                 "2 warnings: see the schedule.");
    made.deflections[0].label = "";
    made.members[0].combination = 2; /* none of them */
    r->n_warnings = 0;
    ck_assert_str_eq(details(r),
                     "R1: 0.94 in buckling in plane. Deflection at C 0.72 of 0.79\xE2\x80\xAFin, not kept.");
    made.deflections[0].utilisation = 0.5;
    made.members[1].utilisation = 1.02;
    member_at(1.5);
    r->outcome = SCT_NO_FEASIBLE_DESIGN;
    ck_assert_str_eq(details(r), "R1: 1.50 in buckling in plane. Also above 1: R2 (1.02). Deflections are kept. No "
                                 "design was found that keeps every limit.");
    r->n_members = 0;
    r->n_deflections = 0;
    r->outcome = SCT_OUTCOME_COUNT;
    sct_text none = {0};
    sct_finding_details(r, &none);
    ck_assert_uint_eq(none.size, 0);
}
END_TEST

START_TEST(at_most_four_more_members_are_named)
{
    sct_result *r = synthetic_result(&made);
    static sct_member_result many[8];
    for (int m = 0; m < 8; m++) {
        many[m] = made.members[0];
        many[m].utilisation = m == 1 ? 0.5 : 1.1 + 0.1 * m;
    }
    r->members = many;
    r->n_members = 8;
    r->n_warnings = r->n_deflections = 0;
    ck_assert_str_eq(details(r),
                     "R1: 1.80 in buckling in plane under W. Also above 1: R1 (1.10), R1 (1.30), R1 (1.40), "
                     "R1 (1.50) and 2 more.");
}
END_TEST

START_TEST(every_outcome_has_a_task_and_no_other_value)
{
    sct_result *r = synthetic_result(&made);
    for (int k = 0; k < SCT_OUTCOME_COUNT; k++) {
        r->outcome = (sct_outcome)k;
        ck_assert_str_ne(sct_finding_task(r), "");
    }
    r->outcome = SCT_OUTCOME_COUNT;
    ck_assert_str_eq(sct_finding_task(r), "");
}
END_TEST

START_TEST(quantities_of_a_drawing_have_signs_groups_and_units)
{
    sct_quantity q;
    sct_quantity_number(q, -1234567.0, 1);
    ck_assert_str_eq(q, "\xE2\x88\x92"
                        "1\xE2\x80\xAF"
                        "234\xE2\x80\xAF"
                        "567.0");
    sct_quantity_number(q, -0.01, 1);
    ck_assert_str_eq(q, "0.0");
    sct_quantity_number(q, (double)NAN, 1);
    ck_assert_str_eq(q, "\xE2\x88\x9E");
    sct_quantity_force(q, -99.96e3, false);
    ck_assert_str_eq(q, "100");
    sct_quantity_force(q, 4448.2216152605, true); /* 1 lbf = 4.4482216152605 N exactly */
    ck_assert_str_eq(q, "1.0");
    sct_quantity_movement(q, -0.0254, true);
    ck_assert_str_eq(q, "1.00");
    sct_quantity_length(q, 0.3048, 2, true);
    ck_assert_str_eq(q, "1.00");
    sct_quantity_mass(q, 0.45359237, true);
    ck_assert_str_eq(q, "1\xE2\x80\xAFlb");
    sct_quantity_area(q, 6.4516e-4, true);
    ck_assert_str_eq(q, "1.00\xE2\x80\xAFin\xC2\xB2");
    sct_quantity_area(q, 99.94e-6, false);
    ck_assert_str_eq(q, "99.9\xE2\x80\xAFmm\xC2\xB2");
    sct_quantity_area(q, 1000e-6, false);
    ck_assert_str_eq(q, "1000\xE2\x80\xAFmm\xC2\xB2");
}
END_TEST

START_TEST(a_utilisation_in_a_drawing_never_rounds_to_a_pass)
{
    sct_quantity q;
    sct_quantity_utilisation(q, 0.991);
    ck_assert_str_eq(q, "1.00");
    sct_quantity_utilisation(q, nextafter(1.0, 2.0));
    ck_assert_str_eq(q, "1.01");
    sct_quantity_utilisation(q, 1000.0);
    ck_assert_str_eq(q, ">999");
    sct_quantity_utilisation(q, (double)INFINITY);
    ck_assert_str_eq(q, "\xE2\x88\x9E");
    sct_quantity_utilisation(q, (double)NAN);
    ck_assert_str_eq(q, "\xE2\x80\x93");
}
END_TEST

/* ---- one member worked out -----------------------------------------------------------------------------------------
 */

/* Tie B-C of 5 m and strut A-C of 4 m; 30 kN down at C: +50 and -40 kN. %s: area of both, buckling, slenderness. */
static const char BRACKET[] =
    "{\"scantling\": 1, \"dimensions\": 2, \"units\": {\"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\"},"
    "\"materials\": {\"S\": {\"E\": 210000, \"density\": \"7850 kg/m3\", \"yield\": 235,"
    "\"allowable\": {\"tension\": 100, \"compression\": 80}}},"
    "\"joints\": {\"A\": {\"at\": [0, 0], \"support\": [\"x\", \"y\"]}, \"B\": {\"at\": [0, 3], \"support\": [\"x\", "
    "\"y\"]}, \"C\": {\"at\": [4, 0]}},"
    "\"groups\": {\"g\": {\"material\": \"S\", \"area\": \"1000 mm2\"%s}},"
    "\"members\": {\"tie\": {\"from\": \"B\", \"to\": \"C\", \"group\": \"g\"}, \"strut\": {\"from\": \"A\", \"to\": "
    "\"C\", \"group\": \"g\"}},"
    "\"cases\": {\"load\": {\"action\": \"other\", \"joints\": {\"C\": [0, -30]}}, \"push\": {\"action\": \"other\", "
    "\"joints\": {\"C\": [-8, 0]}}},"
    "\"combinations\": {\"full\": {\"for\": \"allowable\", \"sum\": {\"load\": 1}}, \"flat\": {\"for\": "
    "\"allowable\", \"sum\": {\"push\": 1}}, \"show\": {\"for\": \"service\", \"sum\": {\"load\": 1}}},"
    "\"limits\": {%s}}";

/* The words and the JSON of a member, in static memory; asserts that the model is sound. */
typedef struct worked {
    char words[4096], json[8192];
} worked;

static const worked *explain(const char *group, const char *limits, const char *member)
{
    static worked w;
    static char model_text[4096];
    char *words, *json;
    sct_issues *issues = sct_issues_new();
    sct_model *model;
    sct_result *result;
    snprintf(model_text, sizeof model_text, BRACKET, group, limits);
    ck_assert_int_eq(sct_model_parse("bracket", model_text, strlen(model_text), &model, issues), SCT_OK);
    ck_assert_int_eq(sct_check(model, NULL, &result, issues), SCT_OK);
    ck_assert_int_eq(sct_explain(result, member, &words, issues), SCT_OK);
    ck_assert_int_eq(sct_explain_json(result, member, &json, issues), SCT_OK);
    snprintf(w.words, sizeof w.words, "%s", words);
    snprintf(w.json, sizeof w.json, "%s", json);
    free(words);
    free(json);
    ck_assert_int_eq(sct_explain(result, "nobody", &words, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_explain_json(result, "nobody", &json, issues), SCT_BAD_INPUT);
    sct_result_free(result);
    sct_model_free(model);
    sct_issues_free(issues);
    return &w;
}

#define ck_says(text, part) ck_assert_msg(strstr((text), (part)) != NULL, "no \"%s\" in:\n%s", (part), (text))

START_TEST(a_member_without_a_buckling_rule_is_checked_for_stress_only)
{
    const worked *w = explain("", "\"buckling\": {\"by\": \"none\"}", "strut");
    ck_says(w->words, "not checked: the model says \"none\"");
    ck_says(w->words, "full: N = -40000 N, compression\n");
    ck_says(w->words, "|N|/A = 40000/1000 = 40 MPa");
    ck_says(w->words, "40/80 = 0.50  passes");
    ck_says(w->words, "; for deflections only, no strength check");
    ck_assert_ptr_null(strstr(w->words, ", i = "));
    ck_says(w->json, "\"column_strengths\": []");
    ck_says(w->json, "\"slenderness_check\": null");
    ck_says(w->json, "\"safety\": null");
}
END_TEST

START_TEST(an_idle_member_is_neither_in_tension_nor_in_compression)
{
    const worked *w = explain("", "\"buckling\": {\"by\": \"none\"}", "tie");
    ck_says(w->words, "full: N = 50000 N, tension\n");
    ck_says(w->words, "flat: N = 0 N\n");
}
END_TEST

/* I = 0.4 A^2: i = sqrt(0.4 A) = 20 mm for A = 1000 mm^2; strut Lcr/i = 4000/20 = 200. */
START_TEST(a_slender_member_follows_Euler_and_a_stocky_one_Johnson)
{
    static const char MOMENT[] = ", \"second_moment\": {\"c\": 0.4}";
    static const char LIMITS[] =
        "\"buckling\": {\"by\": \"Euler and Johnson\", \"safety\": 2}, \"slenderness\": {\"any\": "
        "300, \"compression\": 180}";
    const worked *w = explain(MOMENT, LIMITS, "strut");
    ck_says(w->words, "lambda = Lcr/i = 4000/20 = 200");
    ck_says(w->words, "Euler: sigma_cr = pi^2 E/lambda^2 = pi^2 x 210000/200^2 = 51.815 MPa"); /* pi^2 5.25 */
    ck_says(w->words, "f = sigma_cr/n = 51.815/2 = 25.908 MPa");
    ck_says(w->words, "Slenderness, in compression in some combination");
    ck_says(w->words, "(Lcr/i)/limit = (4000/20)/180 = 1.12  fails");
    ck_says(w->json, "\"formula\": \"Euler\"");
    ck_says(w->json, "\"passes\": false");
    w = explain(MOMENT, LIMITS, "tie");
    ck_says(w->words, "Slenderness, never in compression");
    ck_says(w->words, "(Lcr/i)/limit = (5000/20)/300 = 0.84  passes");
    w = explain(", \"second_moment\": {\"c\": 40}", LIMITS, "strut"); /* i = 200 mm, Lcr/i = 20 */
    ck_says(w->words, "Johnson: sigma_cr");
    ck_says(w->json, "\"formula\": \"Johnson\"");
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("finding");
    TCase *c = tcase_create("finding");
    tcase_add_test(c, the_heading_names_what_governs);
    tcase_add_test(c, the_heading_names_what_is_not_kept);
    tcase_add_test(c, the_heading_names_limits_on_bows_and_on_the_whole);
    tcase_add_test(c, a_deflection_names_the_joint_that_it_counts_against);
    tcase_add_test(c, details_tell_the_worst_member_the_others_and_the_deflection);
    tcase_add_test(c, at_most_four_more_members_are_named);
    tcase_add_test(c, every_outcome_has_a_task_and_no_other_value);
    tcase_add_test(c, quantities_of_a_drawing_have_signs_groups_and_units);
    tcase_add_test(c, a_utilisation_in_a_drawing_never_rounds_to_a_pass);
    tcase_add_test(c, a_member_without_a_buckling_rule_is_checked_for_stress_only);
    tcase_add_test(c, an_idle_member_is_neither_in_tension_nor_in_compression);
    tcase_add_test(c, a_slender_member_follows_Euler_and_a_stocky_one_Johnson);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}

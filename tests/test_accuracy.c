/* The refined response against a solution in quadruple precision, and refusals where the numbers cannot be trusted. */
#include "support.h"

#include "analysis/accuracy.h"
#include "base/number.h"
#include "base/random.h"
#include "analysis/mechanism.h"
#include "truss_shapes.h"

__extension__ typedef __float128 quad; /* 113 bits of mantissa: 1e-34 */

/* A model with all that stands on it. */
typedef struct bench {
    sct_model *m;
    sct_structure *st;
    sct_solver *solver;
    sct_response response;
    sct_issues *issues;
    sct_accuracy accuracy;
    double A[64];
} bench;

static bench set_up(sct_model *m)
{
    bench b = {.m = m, .issues = sct_issues_new()};
    sct_status status;
    sct_issues *of_building = sct_issues_new(); /* parallel members, empty cases: not asked about here */
    ck_assert_int_eq(sct_structure_build(m, &b.st, of_building), SCT_OK);
    sct_issues_free(of_building);
    b.solver = sct_solver_new(b.st, SCT_ENGINE_AUTO, &status);
    ck_assert_int_eq(status, SCT_OK);
    ck_assert_int_eq(sct_response_new(b.st, &b.response), SCT_OK);
    for (int g = 0; g < m->n_groups; g++) b.A[g] = m->groups[g].A_held;
    return b;
}

static void tear_down(bench *b)
{
    sct_response_free(&b->response);
    sct_solver_free(b->solver);
    sct_structure_free(b->st);
    sct_issues_free(b->issues);
    mb_free(b->m);
}

/* The chain of a run: mechanisms, analysis, refinement. */
static sct_status run(bench *b)
{
    sct_status status = sct_mechanism_find(b->solver, b->A, b->issues);
    if (status == SCT_OK) status = sct_solver_analyse(b->solver, b->A, &b->response);
    if (status == SCT_OK) status = sct_accuracy_refine(b->solver, &b->response, &b->accuracy, b->issues);
    return status;
}

static bool told(const bench *b, sct_severity severity, const char *words)
{
    for (int i = 0; i < sct_issues_count(b->issues); i++) {
        const sct_issue *issue = sct_issues_get(b->issues, i);
        if (issue->severity == severity && strstr(issue->message, words) != NULL) return true;
    }
    return false;
}

/* ---- the reference: dense Gaussian elimination in quadruple precision ---------------------------------------------
 */

static void solve_dense(int n, quad *K, quad *x)
{
    for (int k = 0; k < n; k++) {
        for (int i = k + 1; i < n; i++) {
            const quad factor = K[i * n + k] / K[k * n + k];
            if (factor == 0) continue;
            for (int j = k; j < n; j++) K[i * n + j] -= factor * K[k * n + j];
            x[i] -= factor * x[k];
        }
    }
    for (int i = n - 1; i >= 0; i--) {
        for (int j = i + 1; j < n; j++) x[i] -= K[i * n + j] * x[j];
        x[i] /= K[i * n + i];
    }
}

/* u (n_dof) and N (n_bars) of case 0. */
static void solve_reference(const bench *b, quad *u, quad *N)
{
    const sct_structure *st = b->st;
    const int n = st->n_dof;
    quad *K = calloc((size_t)(n * n), sizeof *K);
    for (int i = 0; i < n; i++) u[i] = st->f[i];
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        const quad A = b->A[bar->group], k = bar->E * A / bar->L;
        for (int i = 0; i < bar->n_dof; i++) {
            u[bar->dof[i]] += b->m->cases[0].self_weight * A * st->bars[e].w[i] - k * st->stretch[e] * bar->b[i];
            for (int j = 0; j < bar->n_dof; j++) K[bar->dof[i] * n + bar->dof[j]] += k * bar->b[i] * bar->b[j];
        }
    }
    solve_dense(n, K, u);
    free(K);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        N[e] = st->stretch[e];
        for (int i = 0; i < bar->n_dof; i++) N[e] += u[bar->dof[i]] * bar->b[i];
        N[e] *= bar->E * (quad)b->A[bar->group] / bar->L;
    }
}

/* Largest error of n numbers, relative to each or to a thousandth of the largest. */
static double error_of(int n, const double x[], const quad exact[])
{
    double largest = 0.0, worst = 0.0;
    for (int i = 0; i < n; i++) largest = fmax(largest, fabs((double)exact[i]));
    for (int i = 0; i < n; i++) {
        const double scale = fmax(fabs((double)exact[i]), 1e-3 * largest);
        if (scale > 0.0) worst = fmax(worst, fabs((double)(x[i] - exact[i])) / scale);
    }
    return worst;
}

static double true_error(const bench *b)
{
    quad *u = calloc((size_t)b->st->n_dof + 1, sizeof *u), *N = calloc((size_t)b->st->n_bars, sizeof *N);
    solve_reference(b, u, N);
    const double of_u = error_of(b->st->n_dof, b->response.u, u), of_N = error_of(b->st->n_bars, b->response.N, N);
    free(u);
    free(N);
    return fmax(of_u, of_N);
}

/* ---- agreement -----------------------------------------------------------------------------------------------------
 */

START_TEST(refined_answers_agree_with_quadruple_precision)
{
    for (uint64_t seed = 1; seed <= 40; seed++) {
        const int dimensions = 2 + (int)(seed % 2);
        bench b = set_up(ts_random(dimensions, 12 + (int)seed, (int)(seed % 7), seed));
        ck_assert_int_eq(run(&b), SCT_OK);
        ck_assert_double_le(true_error(&b), 1e-13);
        ck_assert_double_le(b.accuracy.error, 1e-9);
        ck_assert_double_le(b.accuracy.equilibrium, 1e-9);
        tear_down(&b);
    }
}
END_TEST

START_TEST(prescribed_elongations_and_settlements_are_refined_too)
{
    for (uint64_t seed = 1; seed <= 10; seed++) {
        sct_model *m = ts_random(2, 15, 5, seed);
        m->cases[0].n_loads = 0;
        m->cases[0].self_weight = 0.0;
        for (int e = 0; e < m->n_members; e += 3) mb_act(m, 0, e, 30.0, 1e-3);
        mb_settle(m, 0, 0, 2e-3, -5e-3, 0.0);
        bench b = set_up(m);
        ck_assert_int_eq(run(&b), SCT_OK);
        ck_assert_double_le(true_error(&b), 1e-13);
        tear_down(&b);
    }
}
END_TEST

/* Forces by the method of sections, deflection by virtual work (sum N^2 L / (E A) / P); 8000 unknowns. */
START_TEST(a_cantilever_of_2000_panels_is_right_to_nine_digits)
{
    const int n = 2000;
    const double P = 1e4, EA = 210e9 * 1e-3, root2 = sqrt(2.0);
    bench b = set_up(ts_cantilever(n, 1.0, 1.0, -1));
    ck_assert_int_eq(run(&b), SCT_OK);
    ck_assert_double_le(b.accuracy.error, SCT_ERROR_WARN);
    long double work = 0.0L;
    for (int i = 0; i < n; i++) {
        const double lower = -P * (n - i - 1), upper = P * (n - i), diagonal = -P * root2, post = P;
        const double *N = b.response.N + 1 + 4 * i;
        ck_close(N[1], upper, 1e-9);
        ck_close(N[2], diagonal, 1e-9 * n); /* of the forces at its joints */
        work += (long double)lower * lower + (long double)upper * upper + diagonal * diagonal * root2 + post * post;
    }
    const double tip = b.response.u[b.st->first_dof[2 * n] + 1];
    ck_close(tip, (double)(-work / EA / P), 1e-9);
    tear_down(&b);
}
END_TEST

START_TEST(a_response_with_one_wrong_entry_is_put_right)
{
    bench b = set_up(ts_beam(8, 3.0, 2.0, -1));
    ck_assert_int_eq(sct_solver_analyse(b.solver, b.A, &b.response), SCT_OK);
    b.response.u[5] *= 1.0 + 1e-6;
    b.response.N[3] = 12345.0;
    ck_assert_int_eq(sct_accuracy_refine(b.solver, &b.response, &b.accuracy, b.issues), SCT_OK);
    ck_assert_double_le(true_error(&b), 1e-14);
    tear_down(&b);
}
END_TEST

/* ---- badly scaled models --------------------------------------------------------------------------------------------
 */

/* A strip in which member e is `ratio` times as strong as the others. */
static bench strip_with_odd_member(int e, double ratio, bool is_beam)
{
    sct_model *m = is_beam ? ts_beam(10, 1.0, 1.0, -1) : ts_cantilever(10, 1.0, 1.0, -1);
    mb_group(m, 0, 1e-3 * ratio, false);
    m->members[e].group = 1;
    mb_bar(m, 1, 2, 0); /* a second diagonal: statically indeterminate */
    return set_up(m);
}

START_TEST(bad_scaling_is_never_silent)
{
    int n_plain = 0, n_warned = 0, n_refused = 0;
    for (int power = -18; power <= 18; power++) {
        for (int e = 1; e < 41; e += 3) {
            for (int is_beam = 0; is_beam < 2; is_beam++) {
                bench b = strip_with_odd_member(e, pow(10.0, power), is_beam);
                const sct_status status = run(&b);
                if (status == SCT_OK) {
                    ck_assert_double_le(true_error(&b), b.accuracy.error + 1e-13);
                    ck_assert_double_le(b.accuracy.error, SCT_ERROR_REFUSE);
                    ck_assert_double_le(b.accuracy.bound, SCT_ERROR_REFUSE); /* never without one */
                    const bool is_plain = b.accuracy.bound <= SCT_ERROR_WARN;
                    ck_assert(told(&b, SCT_WARNING, "may be as large as") == !is_plain);
                    n_warned += !is_plain;
                    n_plain += is_plain;
                } else {
                    ck_assert(status == SCT_NOT_ACCURATE || status == SCT_MECHANISM);
                    ck_assert_int_ge(sct_issues_errors(b.issues), 1);
                    n_refused++;
                }
                if (abs(power) <= 6) ck_assert_int_eq(status, SCT_OK);
                tear_down(&b);
            }
        }
    }
    ck_assert_int_ge(n_plain, 400);
    ck_assert_int_ge(n_warned, 10);
    ck_assert_int_ge(n_refused, 50);
}
END_TEST

START_TEST(ratios_of_the_catalogue_get_their_verdict)
{
    const struct {
        double ratio;
        bool answered;
    } cases[] = {{1e6, true},  {1e9, true},  {1e12, true},  {1e16, false}, {1e20, false},
                 {1e-6, true}, {1e-9, true}, {1e-12, true}, {1e-16, false}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        bench b = strip_with_odd_member(19, cases[i].ratio, false); /* the diagonal of panel 4 */
        const sct_status status = run(&b);
        ck_assert_int_eq(status, cases[i].answered ? SCT_OK : SCT_NOT_ACCURATE);
        if (!cases[i].answered) ck_assert(told(&b, SCT_ERROR, "\"M19\"")); /* the odd one is named */
        tear_down(&b);
    }
}
END_TEST

START_TEST(a_bar_of_1e_14_of_the_rest_is_refused_with_its_name)
{
    bench b = strip_with_odd_member(19, 1e-14, false);
    ck_assert_int_eq(run(&b), SCT_NOT_ACCURATE);
    ck_assert(told(&b, SCT_ERROR, "times as stiff (E A / L) as member \"M19\""));
    ck_assert_int_eq(sct_issues_errors(b.issues), 1);
    tear_down(&b);
}
END_TEST

/* Between 1e-6 and 1e-3 the answer is given with a warning. */
START_TEST(an_error_between_the_limits_is_a_warning_with_both_members)
{
    int n = 0;
    for (double ratio = 1e9; ratio < 1e17; ratio *= 1.3) {
        sct_model *m = ts_random(2, 20, 6, 3);
        mb_group(m, 0, 1e-3 * ratio, false);
        m->members[10].group = 4;
        bench b = set_up(m);
        if (run(&b) == SCT_OK && b.accuracy.bound > SCT_ERROR_WARN) {
            ck_assert(told(&b, SCT_WARNING, "may be as large as"));
            ck_assert(told(&b, SCT_WARNING, "member \"M10\" is "));
            ck_assert_int_eq(sct_issues_errors(b.issues), 0);
            ck_assert_double_le(true_error(&b), b.accuracy.bound);
            n++;
        }
        tear_down(&b);
    }
    ck_assert_int_ge(n, 1);
}
END_TEST

static sct_result *check_with_stress(bench *b, double most)
{
    sct_result *result = NULL;
    for (int g = 0; g < b->m->n_groups; g++) {
        sct_group *group = &b->m->groups[g];
        group->allowable[0] = group->allowable[1] = g > 0 ? most : 1e30; /* the odd one governs */
    }
    ck_assert_int_eq(sct_check(b->m, NULL, &result, b->issues), SCT_OK);
    return result;
}

/* A stress limit that the analysis reaches to the last digit: kept where the bound is below the tolerance on limits,
 * and left open where it is above. */
START_TEST(a_limit_within_the_proven_error_is_not_decided)
{
    static const double RATIO[] = {1.0, 1e10};
    for (int k = 0; k < 2; k++) {
        bench b = strip_with_odd_member(19, RATIO[k], false);
        mb_each_case(b.m);
        sct_result *result = check_with_stress(&b, 1e12);
        const double most = 1e12 * result->utilisation;
        sct_result_free(result);
        result = check_with_stress(&b, most);
        ck_assert_double_eq_tol(result->utilisation, 1.0, 1e-12);
        ck_assert_double_gt(result->utilisation_at_most, result->utilisation);
        ck_assert_int_eq(result->kept, k == 0);
        ck_assert_int_eq(strncmp(result->verdict, "Not decided: ", 13) == 0, k == 1);
        if (k == 1) ck_assert_ptr_nonnull(strstr(result->verdict, "is at its limit, within the error of the analysis"));
        ck_assert_int_eq(sct_verify(b.m, result, b.issues), SCT_OK);
        sct_result_free(result);
        tear_down(&b);
    }
}
END_TEST

START_TEST(a_printed_bound_is_never_below_the_bound)
{
    sct_random r = {1};
    for (int i = 0; i < 20000; i++) {
        char text[SCT_NUMBER_ROOM];
        const double bound = pow(10.0, 600.0 * sct_random_unit(&r) - 300.0);
        sct_number_format(text, sizeof text, "%.0e", sct_number_rounded_up(bound));
        ck_assert_double_ge(atof(text), bound);
        ck_assert_double_le(atof(text), 2.0 * bound * (1.0 + 1e-12));
    }
    ck_assert_double_eq(sct_number_rounded_up(3e-8), 3e-8);
    ck_assert_double_eq(sct_number_rounded_up(3.01e-8), 4e-8);
    ck_assert_double_eq(sct_number_rounded_up(9.01e-8), 1e-7);
}
END_TEST

/* ---- what must not be refused --------------------------------------------------------------------------------------
 */

START_TEST(heat_in_a_determinate_truss_gives_no_force_and_no_refusal)
{
    sct_model *m = ts_beam(6, 2.0, 1.5, -1);
    m->cases[0].n_loads = 0;
    for (int e = 0; e < m->n_members; e++) mb_act(m, 0, e, 20.0 + e, 0.0);
    bench b = set_up(m);
    ck_assert_int_eq(run(&b), SCT_OK);
    for (int e = 0; e < m->n_members; e++) ck_assert_double_eq_tol(b.response.N[e], 0.0, 1e-6); /* of 50 kN held */
    ck_assert_double_le(b.accuracy.equilibrium, 1e-9);
    tear_down(&b);
}
END_TEST

START_TEST(joints_that_stand_still_by_symmetry_are_no_error)
{
    sct_model *m = ts_new(2, 1e-3);
    for (int j = 0; j < 3; j++) mb_joint(m, 0.7 * j, 0.1 * j, 0.0);
    mb_pin(m, 0);
    mb_pin(m, 2);
    mb_hold(m, 1, -1.0, 7.0, 0.0);
    mb_bar(m, 0, 1, 0);
    mb_bar(m, 1, 2, 0);
    mb_case(m, 0.0);
    mb_act(m, 0, 0, 40.0, 0.0);
    mb_act(m, 0, 1, 40.0, 0.0);
    bench b = set_up(m);
    ck_assert_int_eq(run(&b), SCT_OK);
    ck_close(b.response.N[0], -12e-6 * 40.0 * 210e9 * 1e-3, 1e-12); /* alpha dT E A */
    tear_down(&b);
}
END_TEST

START_TEST(an_empty_case_beside_a_loaded_one_is_no_error)
{
    sct_model *m = ts_beam(6, 2.0, 1.5, -1);
    mb_case(m, 0.0);
    mb_case(m, 1.0);
    bench b = set_up(m);
    ck_assert_int_eq(run(&b), SCT_OK);
    ck_assert_double_le(b.accuracy.error, 1e-12);
    for (int e = 0; e < b.st->n_bars; e++) ck_assert_double_eq(b.response.N[b.st->n_bars + e], 0.0);
    tear_down(&b);
}
END_TEST

START_TEST(a_structure_without_unknowns_is_exact)
{
    sct_model *m = ts_new(2, 1e-3);
    for (int j = 0; j < 2; j++) {
        mb_joint(m, 3.0 * j, 0.0, 0.0);
        mb_pin(m, j);
    }
    mb_bar(m, 0, 1, 0);
    mb_case(m, 0.0);
    mb_act(m, 0, 0, 10.0, 0.0);
    bench b = set_up(m);
    ck_assert_int_eq(run(&b), SCT_OK);
    ck_close(b.response.N[0], -12e-6 * 10.0 * 210e9 * 1e-3, 1e-14);
    ck_assert_double_eq(b.accuracy.error, 0.0);
    tear_down(&b);
}
END_TEST

START_TEST(units_do_not_change_the_verdict)
{
    double error[2];
    for (int i = 0; i < 2; i++) { /* the same truss in metres, and as if millimetres had been metres */
        const double s = i == 0 ? 1.0 : 1024.0;
        sct_model *m = ts_new(2, 1e-3 * s * s);
        ts_strip(m, 9, 2.0 * s, 1.0 * s, -1);
        mb_pin(m, 0);
        mb_hold(m, 18, 0.0, 1.0, 0.0);
        mb_load(m, mb_case(m, 0.0), 8, 300.0, -1e4, 0.0);
        bench b = set_up(m);
        ck_assert_int_eq(run(&b), SCT_OK);
        error[i] = b.accuracy.error;
        tear_down(&b);
    }
    ck_assert_double_eq(error[0], error[1]); /* a power of two: the same bits */
}
END_TEST

START_TEST(a_response_that_is_not_a_number_is_refused)
{
    bench b = set_up(ts_beam(6, 2.0, 1.5, -1));
    ck_assert_int_eq(sct_solver_analyse(b.solver, b.A, &b.response), SCT_OK);
    b.response.u[3] = NAN;
    ck_assert_int_eq(sct_accuracy_refine(b.solver, &b.response, &b.accuracy, b.issues), SCT_NOT_ACCURATE);
    ck_assert_int_eq(sct_issues_errors(b.issues), 1);
    tear_down(&b);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("accuracy");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 60);
    tcase_add_test(tests, refined_answers_agree_with_quadruple_precision);
    tcase_add_test(tests, prescribed_elongations_and_settlements_are_refined_too);
    tcase_add_test(tests, a_cantilever_of_2000_panels_is_right_to_nine_digits);
    tcase_add_test(tests, a_response_with_one_wrong_entry_is_put_right);
    tcase_add_test(tests, bad_scaling_is_never_silent);
    tcase_add_test(tests, ratios_of_the_catalogue_get_their_verdict);
    tcase_add_test(tests, a_bar_of_1e_14_of_the_rest_is_refused_with_its_name);
    tcase_add_test(tests, an_error_between_the_limits_is_a_warning_with_both_members);
    tcase_add_test(tests, a_limit_within_the_proven_error_is_not_decided);
    tcase_add_test(tests, a_printed_bound_is_never_below_the_bound);
    tcase_add_test(tests, heat_in_a_determinate_truss_gives_no_force_and_no_refusal);
    tcase_add_test(tests, joints_that_stand_still_by_symmetry_are_no_error);
    tcase_add_test(tests, an_empty_case_beside_a_loaded_one_is_no_error);
    tcase_add_test(tests, a_structure_without_unknowns_is_exact);
    tcase_add_test(tests, units_do_not_change_the_verdict);
    tcase_add_test(tests, a_response_that_is_not_a_number_is_refused);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

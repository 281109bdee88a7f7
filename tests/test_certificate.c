/* The proven error bounds against answers in quadruple precision: never below the true error, on thousands of random
 * trusses; how sharp they are, and what the proof costs. */
#define _POSIX_C_SOURCE 200809L
#include "numerics/dense.h"
#include "quad_reference.h"
#include "truss_shapes.h"

/* ---- models ------------------------------------------------------------------------------------------------------ */

/* Groups of 1e-6 to 1e8 times the common area, spread over the members at random; a second case of heat and lack of
 * fit. */
static void mix(sct_model *m, sct_random *r, double low, double high)
{
    for (int g = 0; g < 8; g++) mb_group(m, 0, 1e-3 * pow(10.0, ts_between(r, low, high)), false);
    const int n_groups = m->n_groups;
    for (int e = 0; e < m->n_members; e++) {
        if (ts_pick(r, 3) == 0) m->members[e].group = n_groups - 1 - ts_pick(r, 8);
    }
    mb_case(m, 0.5);
    const int heated = m->n_cases - 1;
    mb_act(m, heated, ts_pick(r, m->n_members), 40.0, 0.0);
    mb_act(m, heated, ts_pick(r, m->n_members), 0.0, 1e-3);
}

/* A plane braced grid of a x b panels on its lower edge. */
static sct_model *grid(int a, int b)
{
    sct_model *m = ts_new(2, 1e-3);
    for (int j = 0; j <= b; j++) {
        for (int i = 0; i <= a; i++) mb_joint(m, 1.0 * i, 0.8 * j, 0.0);
    }
    for (int i = 0; i <= a; i++) mb_pin(m, i);
    for (int j = 0; j <= b; j++) {
        for (int i = 0; i <= a; i++) {
            const int k = j * (a + 1) + i;
            if (i < a && j > 0) mb_bar(m, k, k + 1, 0);
            if (j < b) mb_bar(m, k, k + a + 1, 0);
            if (i < a && j < b) mb_bar(m, k, k + a + 2, 0);
            if (i < a && j < b) mb_bar(m, k + 1, k + a + 1, 0);
        }
    }
    mb_case(m, 0.0);
    for (int i = 0; i <= a; i++) mb_load(m, 0, b * (a + 1) + i, 300.0 * i, -1e4, 0.0);
    return m;
}

/* A cantilever of n x h panels, held along its left edge, with a load down at its tip. */
static sct_model *deep_cantilever(int n, int h)
{
    sct_model *m = ts_new(2, 1e-3);
    for (int i = 0; i <= n; i++) {
        for (int j = 0; j <= h; j++) mb_joint(m, 1.0 * i, 1.0 * j, 0.0);
    }
    for (int j = 0; j <= h; j++) mb_pin(m, j);
    for (int i = 0; i <= n; i++) {
        for (int j = 0; j <= h; j++) {
            const int k = i * (h + 1) + j;
            if (i < n) mb_bar(m, k, k + h + 1, 0);
            if (j < h && i > 0) mb_bar(m, k, k + 1, 0);
            if (i < n && j < h) mb_bar(m, k, k + h + 2, 0);
            if (i < n && j < h) mb_bar(m, k + 1, k + h + 1, 0);
        }
    }
    mb_load(m, mb_case(m, 0.0), n * (h + 1), 0.0, -1e4, 0.0);
    return m;
}

static sct_model *any_model(uint64_t seed)
{
    sct_random r = {seed};
    sct_model *m;
    const int kind = (int)(seed % 5);
    const double largest = pow(sct_random_unit(&r), 3.0); /* many small ones, some up to 760 unknowns */
    if (kind < 2) {
        const int dim = 2 + kind;
        m = ts_random(dim, dim + 4 + (int)(largest * 374 * 2 / dim), ts_pick(&r, 6), seed);
    } else if (kind == 2) {
        m = ts_cantilever(2 + (int)(largest * 187), 1.0, ts_between(&r, 0.3, 1.0), -1);
    } else if (kind == 3) {
        m = ts_beam(2 + (int)(largest * 187), 1.0, ts_between(&r, 0.3, 1.0), -1);
    } else {
        m = grid(2 + ts_pick(&r, 5), 1 + (int)(largest * 50));
    }
    if (seed % 3 != 0) mix(m, &r, seed % 3 == 1 ? -2.0 : -6.0, seed % 3 == 1 ? 2.0 : 8.0);
    return m;
}

/* ---- tests ------------------------------------------------------------------------------------------------------- */

START_TEST(no_error_is_above_its_bound_on_random_trusses)
{
    const bool full = getenv("SCT_TEST_FULL") != NULL;
    const int n = full ? 10000 : 300;
    tally t = {0};
    for (int i = 1; i <= n; i++) {
        take(any_model((uint64_t)i), i % 2 == 0 ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE, &t);
    }
    printf(
        "measured: error bounds: %d random trusses of 8 to 760 unknowns, %d certified (%d with a warning), %d "
        "refused (%d for want of a proof), %d violations, bound / true error of displacements %.0f in the (geometric) "
        "mean, largest bound %.0e\n",
        t.n, t.certified, t.warned, t.refused, t.unproven, t.violations, exp(t.log_ratio / t.n_ratio), t.worst_bound);
    ck_assert_int_eq(t.violations, 0);
    ck_assert_int_ge(t.certified, n * 8 / 10);
}
END_TEST

/* The smallest eigenvalue of the scaled matrix of a small model, by numerics/dense.c (good to 1e-15). */
static double smallest_eigenvalue(const bench *b, const double s[])
{
    const sct_pattern *pattern;
    const double *K = sct_solver_stiffness(b->solver, &pattern);
    const int n = pattern->n;
    double *A = calloc((size_t)(n * n), sizeof *A), *lambda = malloc((size_t)n * sizeof *lambda);
    double *work = malloc((size_t)(n * (n + 2)) * sizeof *work), least = INFINITY;
    for (int j = 0; j < n; j++) {
        for (int p = pattern->column[j]; p < pattern->column[j + 1]; p++) {
            const int i = pattern->row[p];
            A[i * n + j] = A[j * n + i] = s[i] * K[p] * s[j];
        }
    }
    ck_assert(sct_eigen(n, A, lambda, work));
    for (int i = 0; i < n; i++) least = fmin(least, lambda[i]);
    free(A);
    free(lambda);
    free(work);
    return least;
}

START_TEST(the_smallest_eigenvalue_is_bounded_from_below_and_closely)
{
    for (uint64_t seed = 1; seed <= 60; seed++) {
        for (sct_engine engine = SCT_ENGINE_SMALL; engine <= SCT_ENGINE_SPARSE; engine++) {
            bench b = set_up(ts_random(2 + (int)(seed % 2), 6 + (int)(seed % 30), (int)(seed % 7), seed), engine);
            double s[256], lambda;
            ck_assert_int_eq(sct_solver_analyse(b.solver, b.A, &b.response), SCT_OK);
            ck_assert_int_eq(sct_eigenvalue_bound(b.solver, s, &lambda), SCT_OK);
            const double exact = smallest_eigenvalue(&b, s);
            ck_assert_double_le(lambda, exact + 1e-14);
            ck_assert_double_ge(lambda, 0.3 * exact - 1e-13);
            tear_down(&b);
        }
    }
}
END_TEST

/* Closed form: the force of the upper chord in panel i of a cantilever with a load at its tip is P (n - i). */
START_TEST(a_cantilever_of_2000_panels_is_certified_and_its_bound_holds)
{
    const int n = 2000;
    bench b = set_up(ts_cantilever(n, 1.0, 1.0, -1), SCT_ENGINE_AUTO);
    ck_assert_int_eq(run(&b), SCT_OK);
    ck_assert_double_le(b.accuracy.bound, SCT_ERROR_WARN);
    for (int i = 0; i < n; i++) {
        const double N = b.response.N[1 + 4 * i + 1], error = b.response.N_error[1 + 4 * i + 1];
        ck_assert_double_le(fabs(N - 1e4 * (n - i)), error + 1e-9); /* slopes are 1: cosines of chords are exact */
    }
    tally t = {0};
    compare(&b, &t);
    ck_assert_int_eq(t.violations, 0);
    tear_down(&b);
}
END_TEST

START_TEST(what_cannot_be_proven_is_refused_in_so_many_words)
{
    bench b = set_up(deep_cantilever(8000, 4), SCT_ENGINE_AUTO);
    ck_assert_int_eq(run(&b), SCT_NOT_ACCURATE);
    ck_assert(isnan(b.accuracy.bound));
    ck_assert(isnan(b.response.u_error[0]) && isnan(b.response.N_error[0]));
    ck_assert_int_eq(sct_issues_errors(b.issues), 1);
    ck_assert_int_eq(sct_issues_count(b.issues), 1);
    ck_assert_ptr_nonnull(strstr(sct_issues_get(b.issues, 0)->message, "accuracy not certified; estimate "));
    tear_down(&b);
}
END_TEST

START_TEST(bounds_stay_small_and_cheap_on_slender_and_large_trusses)
{
    tell("braced grid 9 x 9", grid(9, 9), 1e-12);
    tell("braced grid 119 x 119", grid(119, 119), 1e-9);
    tell("cantilever 400 x 4", deep_cantilever(400, 4), 1e-8);
    tell("cantilever 2000 x 4", deep_cantilever(2000, 4), SCT_ERROR_WARN);
    if (getenv("SCT_TEST_FULL") != NULL) tell("braced grid 249 x 249", grid(249, 249), 1e-9);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("certificate");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 1800);
    tcase_add_test(tests, no_error_is_above_its_bound_on_random_trusses);
    tcase_add_test(tests, the_smallest_eigenvalue_is_bounded_from_below_and_closely);
    tcase_add_test(tests, a_cantilever_of_2000_panels_is_certified_and_its_bound_holds);
    tcase_add_test(tests, what_cannot_be_proven_is_refused_in_so_many_words);
    tcase_add_test(tests, bounds_stay_small_and_cheap_on_slender_and_large_trusses);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

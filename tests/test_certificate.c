/* The proven error bounds against answers in quadruple precision: never below the true error, on thousands of random
 * trusses; how sharp they are, and what the proof costs. */
#define _POSIX_C_SOURCE 200809L
#include "support.h"

#include <time.h>

#include "analysis/accuracy.h"
#include "analysis/eigenvalue.h"
#include "numerics/dense.h"
#include "truss_shapes.h"

__extension__ typedef __float128 quad; /* 113 bits of mantissa: 1e-34 */

typedef struct bench {
    sct_model *m;
    sct_structure *st;
    sct_solver *solver;
    sct_response response;
    sct_issues *issues;
    sct_accuracy accuracy;
    double A[64];
} bench;

static bench set_up(sct_model *m, sct_engine engine)
{
    bench b = {.m = m, .issues = sct_issues_new()};
    sct_status status;
    sct_issues *of_building = sct_issues_new(); /* parallel members: not asked about here */
    ck_assert_int_eq(sct_structure_build(m, &b.st, of_building), SCT_OK);
    sct_issues_free(of_building);
    b.solver = sct_solver_new(b.st, engine, &status);
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

static sct_status run(bench *b)
{
    const sct_status status = sct_solver_analyse(b->solver, b->A, &b->response);
    return status == SCT_OK ? sct_accuracy_refine(b->solver, &b->response, &b->accuracy, b->issues) : status;
}

/* ---- the reference: L D L' in quadruple precision, row by row inside the envelope of the lower triangle ---------- */

typedef struct envelope {
    int n, *first;
    size_t *start; /* row i: columns first[i] .. i at a[start[i]] */
    quad *a;
} envelope;

static quad *at(const envelope *v, int i, int j)
{
    return &v->a[v->start[i] + (size_t)(j - v->first[i])];
}

static envelope assemble(const bench *b)
{
    const sct_structure *st = b->st;
    envelope v = {.n = st->n_dof};
    v.first = malloc((size_t)(v.n + 1) * sizeof *v.first);
    v.start = calloc((size_t)v.n + 2, sizeof *v.start);
    for (int i = 0; i < v.n; i++) v.first[i] = i;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        for (int i = 0; i < bar->n_dof; i++) {
            for (int j = 0; j < bar->n_dof; j++) {
                if (bar->dof[j] < v.first[bar->dof[i]]) v.first[bar->dof[i]] = bar->dof[j];
            }
        }
    }
    for (int i = 0; i < v.n; i++) v.start[i + 1] = v.start[i] + (size_t)(i - v.first[i] + 1);
    v.a = calloc(v.start[v.n] + 1, sizeof *v.a);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        const quad k = (quad)bar->E * b->A[bar->group] / bar->L;
        for (int i = 0; i < bar->n_dof; i++) {
            for (int j = 0; j < bar->n_dof; j++) {
                if (bar->dof[j] <= bar->dof[i]) *at(&v, bar->dof[i], bar->dof[j]) += k * bar->b[i] * bar->b[j];
            }
        }
    }
    return v;
}

static void factor(envelope *v)
{
    for (int i = 0; i < v->n; i++) {
        for (int j = v->first[i]; j < i; j++) { /* first y = L D, then L */
            quad y = *at(v, i, j);
            const int from = v->first[i] > v->first[j] ? v->first[i] : v->first[j];
            for (int k = from; k < j; k++) y -= *at(v, i, k) * *at(v, j, k);
            *at(v, i, j) = y;
        }
        for (int j = v->first[i]; j < i; j++) {
            const quad y = *at(v, i, j);
            *at(v, i, j) = y / *at(v, j, j);
            *at(v, i, i) -= y * *at(v, i, j);
        }
    }
}

static void solve(const envelope *v, quad x[])
{
    for (int i = 0; i < v->n; i++) {
        for (int j = v->first[i]; j < i; j++) x[i] -= *at(v, i, j) * x[j];
    }
    for (int i = 0; i < v->n; i++) x[i] /= *at(v, i, i);
    for (int i = v->n - 1; i >= 0; i--) {
        for (int j = v->first[i]; j < i; j++) x[j] -= *at(v, i, j) * x[i];
    }
}

/* u (n_dof) and N (n_bars) of case k. */
static void solve_case(const bench *b, const envelope *v, int k, quad u[], quad N[])
{
    const sct_structure *st = b->st;
    const double *stretch = st->stretch + (size_t)k * (size_t)st->n_bars;
    for (int i = 0; i < st->n_dof; i++) u[i] = st->f[k * st->n_dof + i];
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        const quad A = b->A[bar->group], stiffness = bar->E * A / bar->L;
        for (int i = 0; i < bar->n_dof; i++) {
            u[bar->dof[i]] += b->m->cases[k].self_weight * A * st->bars[e].w[i] - stiffness * stretch[e] * bar->b[i];
        }
    }
    solve(v, u);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_spring *bar = &st->springs[e];
        N[e] = stretch[e];
        for (int i = 0; i < bar->n_dof; i++) N[e] += u[bar->dof[i]] * bar->b[i];
        N[e] *= bar->E * (quad)b->A[bar->group] / bar->L;
    }
}

/* What came of comparing bounds with true errors. */
typedef struct tally {
    int n, certified, warned, unproven, refused, violations;
    double log_ratio; /* sum over the certified of ln(largest bound / largest true error) */
    int n_ratio;
    double worst_bound;
} tally;

static double magnitude(quad x)
{
    return (double)(x < 0 ? -x : x);
}

/* How many of n numbers are further from the exact ones than their bounds say; the largest bound and error. */
static int count_violations(int n, const double x[], const double bound[], const quad exact[], double *most,
                            double *error)
{
    int count = 0;
    for (int i = 0; i < n; i++) {
        const double off = magnitude(x[i] - exact[i]);
        count += !(off <= bound[i]);
        *most = fmax(*most, bound[i]);
        *error = fmax(*error, off);
    }
    return count;
}

static void compare(const bench *b, tally *t)
{
    const sct_structure *st = b->st;
    quad *u = malloc(((size_t)st->n_dof + 1) * sizeof *u), *N = malloc(((size_t)st->n_bars + 1) * sizeof *N);
    envelope v = assemble(b);
    factor(&v);
    for (int k = 0; k < st->n_cases; k++) {
        const size_t at_u = (size_t)k * (size_t)st->n_dof, at_N = (size_t)k * (size_t)st->n_bars;
        double bound = 0.0, error = 0.0;
        solve_case(b, &v, k, u, N);
        t->violations +=
            count_violations(st->n_bars, b->response.N + at_N, b->response.N_error + at_N, N, &bound, &error);
        bound = error = 0.0;
        t->violations +=
            count_violations(st->n_dof, b->response.u + at_u, b->response.u_error + at_u, u, &bound, &error);
        if (!(error > 0.0)) continue;
        t->log_ratio += log(bound / error);
        t->n_ratio++;
    }
    free(v.first);
    free(v.start);
    free(v.a);
    free(u);
    free(N);
}

static void take(sct_model *m, sct_engine engine, tally *t)
{
    bench b = set_up(m, engine);
    const sct_status status = run(&b);
    t->n++;
    if (status == SCT_OK) {
        t->certified++;
        t->warned += b.accuracy.bound > SCT_ERROR_WARN;
        t->worst_bound = fmax(t->worst_bound, b.accuracy.bound);
        compare(&b, t);
    } else {
        t->refused++;
        t->unproven += status == SCT_NOT_ACCURATE && isnan(b.accuracy.bound) && b.accuracy.error <= SCT_ERROR_REFUSE;
        ck_assert(status == SCT_MECHANISM || sct_issues_errors(b.issues) >= 1); /* never silent */
    }
    tear_down(&b);
}

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

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

typedef struct cost {
    double factor, proof; /* [s] the shorter of two */
} cost;

static cost measure(bench *b, double *lambda)
{
    cost c = {INFINITY, INFINITY};
    const sct_pattern *pattern;
    double *s = malloc((size_t)b->st->n_dof * sizeof *s);
    const double *K = sct_solver_stiffness(b->solver, &pattern);
    for (int k = 0; k < 2; k++) {
        ck_assert_int_eq(sct_solver_analyse(b->solver, b->A, &b->response), SCT_OK);
        double start = now();
        ck_assert_int_eq(sct_factor_update(sct_solver_factor(b->solver), K, NULL), SCT_OK);
        c.factor = fmin(c.factor, now() - start);
        start = now();
        ck_assert_int_eq(sct_eigenvalue_bound(b->solver, s, lambda), SCT_OK);
        c.proof = fmin(c.proof, now() - start);
    }
    free(s);
    return c;
}

/* One line of the table: bound, sharpness, cost; `most`: the largest bound. */
static void tell(const char *name, sct_model *m, double most)
{
    bench b = set_up(m, SCT_ENGINE_AUTO);
    double lambda;
    ck_assert_int_eq(sct_solver_analyse(b.solver, b.A, &b.response), SCT_OK);
    const cost c = measure(&b, &lambda);
    ck_assert_int_eq(run(&b), SCT_OK);
    printf("measured: %s, %d unknowns: smallest eigenvalue >= %.1e, error estimated %.0e, proven %.0e; factorization "
           "%.4f s, "
           "proof %.4f s (%.2f of it)\n",
           name, b.st->n_dof, lambda, b.accuracy.error, b.accuracy.bound, c.factor, c.proof, c.proof / c.factor);
    ck_assert_double_le(b.accuracy.bound, most);
    if (lambda >= 1e-6) ck_assert_double_le(b.accuracy.bound, 1e-9);
    tear_down(&b);
}

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

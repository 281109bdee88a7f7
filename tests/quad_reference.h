/* The proven error bounds against answers in quadruple precision: what test_certificate*.c share. Define
 * _POSIX_C_SOURCE first. */
#ifndef TESTS_QUAD_REFERENCE_H
#define TESTS_QUAD_REFERENCE_H

#include "support.h"

#include <time.h>

#include "analysis/accuracy.h"
#include "analysis/eigenvalue.h"
#include "model_build.h"

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

static inline double property(const bench *b, const sct_spring *s)
{
    return s->group < 0 ? 1.0 : sct_solver_sizes(b->solver)[s->group].P[s->property];
}

static inline bench set_up(sct_model *m, sct_engine engine)
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

static inline void tear_down(bench *b)
{
    sct_response_free(&b->response);
    sct_solver_free(b->solver);
    sct_structure_free(b->st);
    sct_issues_free(b->issues);
    mb_free(b->m);
}

static inline sct_status run(bench *b)
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

static inline quad *quad_at(const envelope *v, int i, int j)
{
    return &v->a[v->start[i] + (size_t)(j - v->first[i])];
}

static inline envelope quad_assemble(const bench *b)
{
    const sct_structure *st = b->st;
    envelope v = {.n = st->n_dof};
    v.first = malloc((size_t)(v.n + 1) * sizeof *v.first);
    v.start = calloc((size_t)v.n + 2, sizeof *v.start);
    for (int i = 0; i < v.n; i++) v.first[i] = i;
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *s = &st->springs[e];
        for (int i = 0; i < s->n_dof; i++) {
            for (int j = 0; j < s->n_dof; j++) {
                if (s->dof[j] < v.first[s->dof[i]]) v.first[s->dof[i]] = s->dof[j];
            }
        }
    }
    for (int i = 0; i < v.n; i++) v.start[i + 1] = v.start[i] + (size_t)(i - v.first[i] + 1);
    v.a = calloc(v.start[v.n] + 1, sizeof *v.a);
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *s = &st->springs[e];
        const quad k = (quad)s->E * property(b, s) / s->L;
        for (int i = 0; i < s->n_dof; i++) {
            for (int j = 0; j < s->n_dof; j++) {
                if (s->dof[j] <= s->dof[i]) *quad_at(&v, s->dof[i], s->dof[j]) += k * s->b[i] * s->b[j];
            }
        }
    }
    return v;
}

static inline void quad_factor(envelope *v)
{
    for (int i = 0; i < v->n; i++) {
        for (int j = v->first[i]; j < i; j++) { /* first y = L D, then L */
            quad y = *quad_at(v, i, j);
            const int from = v->first[i] > v->first[j] ? v->first[i] : v->first[j];
            for (int k = from; k < j; k++) y -= *quad_at(v, i, k) * *quad_at(v, j, k);
            *quad_at(v, i, j) = y;
        }
        for (int j = v->first[i]; j < i; j++) {
            const quad y = *quad_at(v, i, j);
            *quad_at(v, i, j) = y / *quad_at(v, j, j);
            *quad_at(v, i, i) -= y * *quad_at(v, i, j);
        }
    }
}

static inline void quad_solve(const envelope *v, quad x[])
{
    for (int i = 0; i < v->n; i++) {
        for (int j = v->first[i]; j < i; j++) x[i] -= *quad_at(v, i, j) * x[j];
    }
    for (int i = 0; i < v->n; i++) x[i] /= *quad_at(v, i, i);
    for (int i = v->n - 1; i >= 0; i--) {
        for (int j = v->first[i]; j < i; j++) x[j] -= *quad_at(v, i, j) * x[i];
    }
}

/* u (n_dof) and N (n_springs) of case k. */
static inline void quad_solve_case(const bench *b, const envelope *v, int k, quad u[], quad N[])
{
    const sct_structure *st = b->st;
    const double *stretch = st->stretch + (size_t)k * (size_t)st->n_springs;
    for (int i = 0; i < st->n_dof; i++) u[i] = st->f[k * st->n_dof + i];
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const quad factor = (quad)b->m->cases[k].self_weight * b->A[bar->group];
        for (int i = 0; i < bar->n_dof; i++) u[bar->dof[i]] += factor * bar->w[i];
    }
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *s = &st->springs[e];
        const quad stiffness = (quad)s->E * property(b, s) / s->L;
        for (int i = 0; i < s->n_dof; i++) u[s->dof[i]] -= stiffness * stretch[e] * s->b[i];
    }
    quad_solve(v, u);
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *s = &st->springs[e];
        N[e] = stretch[e];
        for (int i = 0; i < s->n_dof; i++) N[e] += u[s->dof[i]] * s->b[i];
        N[e] *= (quad)s->E * property(b, s) / s->L;
    }
}

/* What came of comparing bounds with true errors. */
typedef struct tally {
    int n, certified, warned, unproven, refused, violations;
    double log_ratio; /* sum over the certified of ln(largest bound / largest true error) */
    int n_ratio;
    double worst_bound;
} tally;

static inline double magnitude(quad x)
{
    return (double)(x < 0 ? -x : x);
}

/* How many of n numbers are further from the exact ones than their bounds say; the largest bound and error. */
static inline int count_violations(int n, const double x[], const double bound[], const quad exact[], double *most,
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

static inline void compare(const bench *b, tally *t)
{
    const sct_structure *st = b->st;
    quad *u = malloc(((size_t)st->n_dof + 1) * sizeof *u), *N = malloc(((size_t)st->n_springs + 1) * sizeof *N);
    envelope v = quad_assemble(b);
    quad_factor(&v);
    for (int k = 0; k < st->n_cases; k++) {
        const size_t at_u = (size_t)k * (size_t)st->n_dof, at_N = (size_t)k * (size_t)st->n_springs;
        double bound = 0.0, error = 0.0;
        quad_solve_case(b, &v, k, u, N);
        t->violations +=
            count_violations(st->n_springs, b->response.N + at_N, b->response.N_error + at_N, N, &bound, &error);
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

static inline void take(sct_model *m, sct_engine engine, tally *t)
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

/* ---- what a proof costs ------------------------------------------------------------------------------------------ */

static inline double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

typedef struct cost {
    double factor, proof; /* [s] the shorter of two */
} cost;

static inline cost measure(bench *b, double *lambda)
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
static inline void tell(const char *name, sct_model *m, double most)
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
#endif

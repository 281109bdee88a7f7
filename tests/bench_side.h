/* One structure analysed by this program and by bare CHOLMOD with the same matrix and settings. */
#ifndef TESTS_BENCH_SIDE_H
#define TESTS_BENCH_SIDE_H

#include "bench.h"

#include <cholmod.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/sensitivity.h"
#include "model_build.h"

typedef struct side {
    sct_model *model;
    sct_structure *st;
    sct_solver *solver;
    sct_response r;
    double A[2];
    sct_properties sizes[2];
    /* CHOLMOD */
    cholmod_common common;
    cholmod_sparse *K;
    cholmod_factor *L;
    cholmod_dense *f, *u, *Y, *E;
    int *entry; /* place in K of each pair of unknowns of each spring */
    double *N;
    bool with_forces;
    /* many right-hand sides, gradients */
    int count;
    double *b;
    cholmod_dense *many, *many_x;
    sct_weights *weights;
    double *dq;
} side;

static inline int place(const sct_pattern *p, int i, int j)
{
    const int row = i < j ? i : j, column = i < j ? j : i;
    int k = p->column[column];
    while (p->row[k] != row) k++;
    return k;
}

static inline void map_springs(side *s, const sct_pattern *p)
{
    const size_t most = (size_t)(s->st->most_dof * (s->st->most_dof + 1) / 2);
    s->entry = malloc((size_t)s->st->n_springs * most * sizeof *s->entry);
    int *next = s->entry;
    for (int e = 0; e < s->st->n_springs; e++) {
        const sct_spring *spring = &s->st->springs[e];
        for (int j = 0; j < spring->n_dof; j++)
            for (int i = 0; i <= j; i++) *next++ = place(p, spring->dof[i], spring->dof[j]);
    }
}

static inline void find_sizes(side *s)
{
    for (int g = 0; g < s->st->n_groups; g++)
        s->sizes[g] = s->st->n_springs == s->st->n_bars ? (sct_properties){.P = {s->A[g]}}
                                                        : sct_properties_at_area(s->model, g, s->A[g]);
}

static inline void fill(side *s)
{
    double *x = s->K->x;
    const int *next = s->entry;
    memset(x, 0, s->K->nzmax * sizeof *x);
    find_sizes(s);
    for (int e = 0; e < s->st->n_springs; e++) {
        const sct_spring *spring = &s->st->springs[e];
        const double k = sct_spring_stiffness(spring, s->sizes);
        for (int j = 0; j < spring->n_dof; j++)
            for (int i = 0; i <= j; i++) x[*next++] += k * spring->b[i] * spring->b[j];
    }
}

static inline void open_cholmod(side *s, bool ll)
{
    const sct_pattern *p;
    cholmod_common *c = &s->common;
    sct_solver_stiffness(s->solver, &p);
    cholmod_start(c);
    c->supernodal = CHOLMOD_SIMPLICIAL;
    c->final_ll = ll;
    c->nmethods = 1; /* as in numerics/sparse.c */
    c->method[0].ordering = CHOLMOD_AMD;
    s->K = cholmod_allocate_sparse((size_t)p->n, (size_t)p->n, (size_t)p->column[p->n], 1, 1, 1, CHOLMOD_REAL, c);
    memcpy(s->K->p, p->column, ((size_t)p->n + 1) * sizeof(int));
    memcpy(s->K->i, p->row, (size_t)p->column[p->n] * sizeof(int));
    map_springs(s, p);
    fill(s);
    s->L = cholmod_analyze(s->K, c);
    s->f = cholmod_allocate_dense((size_t)p->n, (size_t)s->st->n_cases, (size_t)p->n, CHOLMOD_REAL, c);
    memcpy(s->f->x, s->st->f, (size_t)s->st->n_cases * (size_t)p->n * sizeof(double));
    s->N = malloc((size_t)s->st->n_springs * (size_t)s->st->n_cases * sizeof *s->N);
}

static inline void close_cholmod(side *s)
{
    cholmod_common *c = &s->common;
    cholmod_free_sparse(&s->K, c);
    cholmod_free_factor(&s->L, c);
    cholmod_free_dense(&s->f, c);
    cholmod_free_dense(&s->u, c);
    cholmod_free_dense(&s->Y, c);
    cholmod_free_dense(&s->E, c);
    cholmod_free_dense(&s->many, c);
    cholmod_free_dense(&s->many_x, c);
    cholmod_finish(c);
    free(s->entry);
    free(s->N);
}

static inline void open_side(side *s, sct_model *model, sct_engine engine)
{
    sct_issues *issues = sct_issues_new();
    sct_status status;
    *s = (side){.model = model, .A = {1e-3, 2e-3}};
    if (sct_structure_build(model, &s->st, issues) != SCT_OK) abort();
    s->solver = sct_solver_new(s->st, engine, &status);
    if (s->solver == NULL || sct_response_new(s->st, &s->r) != SCT_OK) abort();
    sct_issues_free(issues);
}

static inline void close_side(side *s)
{
    sct_response_free(&s->r);
    sct_solver_free(s->solver);
    sct_structure_free(s->st);
    mb_free(s->model);
}

static inline void analyse(void *arg)
{
    side *s = arg;
    s->A[0] *= 1.0000001;
    if (sct_solver_analyse(s->solver, s->A, &s->r) != SCT_OK) abort();
}

static inline void forces(side *s)
{
    for (int k = 0; k < s->st->n_cases; k++) {
        const double *u = (const double *)s->u->x + (size_t)k * s->u->d;
        double *N = s->N + (size_t)k * (size_t)s->st->n_springs;
        for (int e = 0; e < s->st->n_springs; e++) {
            const sct_spring *spring = &s->st->springs[e];
            double elongation = 0.0;
            for (int i = 0; i < spring->n_dof; i++) elongation += spring->b[i] * u[spring->dof[i]];
            N[e] = sct_spring_stiffness(spring, s->sizes) * elongation;
        }
    }
}

static inline void analyse_bare(void *arg)
{
    side *s = arg;
    s->A[0] *= 1.0000001;
    fill(s);
    if (!cholmod_factorize(s->K, s->L, &s->common) || s->common.status != CHOLMOD_OK) abort();
    cholmod_solve2(CHOLMOD_A, s->L, s->f, NULL, &s->u, NULL, &s->Y, &s->E, &s->common);
    if (s->with_forces) forces(s);
}

static inline void factor_only(void *arg)
{
    side *s = arg;
    const sct_pattern *pattern;
    const double *K = sct_solver_stiffness(s->solver, &pattern);
    if (sct_factor_update(sct_solver_factor(s->solver), K, NULL) != SCT_OK) abort();
}

/* The two must have found the same displacements. */
static inline void compare(const side *s)
{
    double most = 0.0, error = 0.0;
    for (int i = 0; i < s->st->n_dof; i++) {
        most = fmax(most, fabs(s->r.u[i]));
        error = fmax(error, fabs(s->r.u[i] - ((const double *)s->u->x)[i]));
    }
    if (!(error <= 1e-6 * most)) abort();
}

/* Returns the time of one factorization. */
static inline double against_bare(const char *name, sct_model *m, int rounds)
{
    side s;
    char text[100];
    open_side(&s, m, SCT_ENGINE_SPARSE);
    open_cholmod(&s, true);
    bench_racer racers[] = {
        {.run = analyse, .arg = &s}, {.run = analyse_bare, .arg = &s}, {.run = factor_only, .arg = &s}};
    bench_race(3, racers, rounds);
    s.A[0] = 1e-3; /* both once more with the same areas */
    if (sct_solver_analyse(s.solver, s.A, &s.r) != SCT_OK) abort();
    s.A[0] = 1e-3 / 1.0000001;
    analyse_bare(&s);
    compare(&s);
    snprintf(text, sizeof text, "%s, %d unknowns: analysis / bare", name, s.st->n_dof);
    bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", 1.25, false);
    snprintf(text, sizeof text, "%s, %d unknowns: one analysis", name, s.st->n_dof);
    bench_figure(text, 1e3 * racers[0].seconds, "ms", NAN, false);
    snprintf(text, sizeof text, "%s, %d unknowns: entries of the factor", name, s.st->n_dof);
    bench_figure(text, sct_factor_entries(sct_solver_factor(s.solver)), "", NAN, false);
    close_cholmod(&s);
    close_side(&s);
    return racers[2].seconds;
}
#endif

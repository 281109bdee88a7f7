/* One analysis of a new design against bare CHOLMOD with the same matrix, the same engine and settings; the small
 * engine against CHOLMOD's; many right-hand sides; adjoint gradients; growth with size. */
#include "bench.h"

#include <cholmod.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>

#include "analysis/sensitivity.h"
#include "analysis/solver.h"
#include "model_build.h"

/* ---- models ---------------------------------------------------------------------------------------------------- */

/* A lattice of nx x ny (x nz) square panels, crossed in every face, held along its base, with `cases` load cases. */
static sct_model *lattice(int nx, int ny, int nz, int cases)
{
    const int dim = nz > 0 ? 3 : 2, rows = nx + 1, layer = rows * (ny + 1);
    sct_model *m = mb_new(dim);
    mb_group(m, mb_material(m, 210e9, 7850.0, 12e-6), 1e-3, true);
    mb_group(m, 0, 2e-3, true);
    for (int z = 0; z <= nz; z++)
        for (int y = 0; y <= ny; y++)
            for (int x = 0; x <= nx; x++) {
                const int j = mb_joint(m, x, y, z);
                if (dim == 2 ? y == 0 : z == 0) mb_pin(m, j);
            }
    const int step[3] = {1, rows, layer};
    for (int z = 0; z <= nz; z++)
        for (int y = 0; y <= ny; y++)
            for (int x = 0; x <= nx; x++) {
                const int j = x + rows * y + layer * z, room[3] = {x < nx, y < ny, z < nz};
                for (int a = 0; a < dim; a++) {
                    if (room[a]) mb_bar(m, j, j + step[a], 0);
                    for (int b = a + 1; b < dim; b++) {
                        if (!room[a] || !room[b]) continue;
                        mb_bar(m, j, j + step[a] + step[b], 1);
                        mb_bar(m, j + step[a], j + step[b], 1);
                    }
                }
            }
    for (int k = 0; k < cases; k++) {
        mb_case(m, 0.0);
        for (int j = k; j < m->n_joints; j += 1 + k)
            mb_load(m, k, j, 1e3, dim == 2 ? -1e4 : 1e3, dim == 3 ? -1e4 : 0.0);
    }
    mb_each_case(m);
    return m;
}

/* ---- both sides ------------------------------------------------------------------------------------------------- */

typedef struct side {
    sct_model *model;
    sct_structure *st;
    sct_solver *solver;
    sct_response r;
    double A[2];
    /* CHOLMOD */
    cholmod_common common;
    cholmod_sparse *K;
    cholmod_factor *L;
    cholmod_dense *f, *u, *Y, *E;
    int *entry; /* place in K of each pair of unknowns of each bar */
    double *N;
    bool with_forces;
    /* many right-hand sides, gradients */
    int count;
    double *b;
    cholmod_dense *many, *many_x;
    sct_weights *weights;
    double *dq;
} side;

static int place(const sct_pattern *p, int i, int j)
{
    const int row = i < j ? i : j, column = i < j ? j : i;
    int k = p->column[column];
    while (p->row[k] != row) k++;
    return k;
}

static void map_bars(side *s, const sct_pattern *p)
{
    s->entry = malloc((size_t)s->st->n_bars * 21 * sizeof *s->entry);
    int *next = s->entry;
    for (int e = 0; e < s->st->n_bars; e++) {
        const sct_spring *bar = &s->st->springs[e];
        for (int j = 0; j < bar->n_dof; j++)
            for (int i = 0; i <= j; i++) *next++ = place(p, bar->dof[i], bar->dof[j]);
    }
}

static void fill(side *s)
{
    double *x = s->K->x;
    const int *next = s->entry;
    memset(x, 0, s->K->nzmax * sizeof *x);
    for (int e = 0; e < s->st->n_bars; e++) {
        const sct_spring *bar = &s->st->springs[e];
        const double k = bar->E * s->A[bar->group] / bar->L;
        for (int j = 0; j < bar->n_dof; j++)
            for (int i = 0; i <= j; i++) x[*next++] += k * bar->b[i] * bar->b[j];
    }
}

static void open_cholmod(side *s, bool ll)
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
    map_bars(s, p);
    fill(s);
    s->L = cholmod_analyze(s->K, c);
    s->f = cholmod_allocate_dense((size_t)p->n, (size_t)s->st->n_cases, (size_t)p->n, CHOLMOD_REAL, c);
    memcpy(s->f->x, s->st->f, (size_t)s->st->n_cases * (size_t)p->n * sizeof(double));
    s->N = malloc((size_t)s->st->n_bars * (size_t)s->st->n_cases * sizeof *s->N);
}

static void close_cholmod(side *s)
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

static void open_side(side *s, sct_model *model, sct_engine engine)
{
    sct_issues *issues = sct_issues_new();
    sct_status status;
    *s = (side){.model = model, .A = {1e-3, 2e-3}};
    if (sct_structure_build(model, &s->st, issues) != SCT_OK) abort();
    s->solver = sct_solver_new(s->st, engine, &status);
    if (s->solver == NULL || sct_response_new(s->st, &s->r) != SCT_OK) abort();
    sct_issues_free(issues);
}

static void close_side(side *s)
{
    sct_response_free(&s->r);
    sct_solver_free(s->solver);
    sct_structure_free(s->st);
    mb_free(s->model);
}

static void analyse(void *arg)
{
    side *s = arg;
    s->A[0] *= 1.0000001;
    if (sct_solver_analyse(s->solver, s->A, &s->r) != SCT_OK) abort();
}

static void forces(side *s)
{
    for (int k = 0; k < s->st->n_cases; k++) {
        const double *u = (const double *)s->u->x + (size_t)k * s->u->d;
        double *N = s->N + (size_t)k * (size_t)s->st->n_bars;
        for (int e = 0; e < s->st->n_bars; e++) {
            const sct_spring *bar = &s->st->springs[e];
            double elongation = 0.0;
            for (int i = 0; i < bar->n_dof; i++) elongation += bar->b[i] * u[bar->dof[i]];
            N[e] = bar->E * s->A[bar->group] / bar->L * elongation;
        }
    }
}

static void analyse_bare(void *arg)
{
    side *s = arg;
    s->A[0] *= 1.0000001;
    fill(s);
    if (!cholmod_factorize(s->K, s->L, &s->common) || s->common.status != CHOLMOD_OK) abort();
    cholmod_solve2(CHOLMOD_A, s->L, s->f, NULL, &s->u, NULL, &s->Y, &s->E, &s->common);
    if (s->with_forces) forces(s);
}

static void factor_only(void *arg)
{
    side *s = arg;
    const sct_pattern *pattern;
    const double *K = sct_solver_stiffness(s->solver, &pattern);
    if (sct_factor_update(sct_solver_factor(s->solver), K, NULL) != SCT_OK) abort();
}

/* The two must have found the same displacements. */
static void compare(const side *s)
{
    double most = 0.0, error = 0.0;
    for (int i = 0; i < s->st->n_dof; i++) {
        most = fmax(most, fabs(s->r.u[i]));
        error = fmax(error, fabs(s->r.u[i] - ((const double *)s->u->x)[i]));
    }
    if (!(error <= 1e-6 * most)) abort();
}

/* ---- what is measured ---------------------------------------------------------------------------------------------
 */

typedef struct family {
    const char *name;
    int nx, ny, nz;
} family;

static double log_ratio(double a, double b)
{
    return log(a / b);
}

/* Returns the time of one factorization. */
static double against_bare(const char *name, sct_model *m, int rounds)
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

static void large_analyses(bool full)
{
    bench_section("analysis",
                  "One analysis (fill, factor, solve, forces) / bare CHOLMOD (fill, factor, solve), simplicial LL'");
    const double t2[3] = {against_bare("plane", lattice(22, 22, 0, 1), 9),
                          against_bare("plane", lattice(70, 70, 0, 1), 5),
                          against_bare("plane", lattice(223, 223, 0, 1), 3)};
    const double t3[2] = {against_bare("space", lattice(6, 6, 7, 1), 9),
                          against_bare("space", lattice(14, 14, 15, 1), 3)};
    double t3_large = NAN, t2_large = NAN;
    if (full) {
        t3_large = against_bare("space", lattice(31, 31, 32, 1), 1);
        t2_large = against_bare("plane", lattice(707, 707, 0, 1), 1);
    }
    bench_section("growth", "Time of one factorization ~ unknowns ^ exponent (aims for supernodal factors)");
    bench_figure("plane, 1e3 to 1e4", log_ratio(t2[1], t2[0]) / log_ratio(2 * 70 * 71, 2 * 22 * 23), "exponent", 1.2,
                 false);
    bench_figure("plane, 1e4 to 1e5", log_ratio(t2[2], t2[1]) / log_ratio(2 * 223 * 224, 2 * 70 * 71), "exponent", 1.2,
                 false);
    bench_figure("space, 1e3 to 1e4", log_ratio(t3[1], t3[0]) / log_ratio(3 * 15 * 225, 3 * 7 * 49), "exponent", 1.7,
                 false);
    if (!full) return;
    bench_figure("plane, 1e5 to 1e6", log_ratio(t2_large, t2[2]) / log_ratio(2.0 * 707 * 708, 2 * 223 * 224),
                 "exponent", 1.2, false);
    bench_figure("space, 1e4 to 1e5", log_ratio(t3_large, t3[1]) / log_ratio(3 * 32 * 1024, 3 * 15 * 225), "exponent",
                 NAN, false);
    struct rusage usage;
    getrusage(RUSAGE_SELF, &usage);
    bench_figure("peak memory up to here", (double)usage.ru_maxrss / 1024.0, "MB", NAN, false);
}

static void small_analyses(void)
{
    static const family SIZES[] = {{"plane", 3, 1, 0},  {"plane", 7, 1, 0}, {"plane", 15, 1, 0}, {"plane", 7, 4, 0},
                                   {"plane", 19, 5, 0}, {"space", 1, 1, 2}, {"space", 2, 2, 2},  {"space", 3, 3, 4}};
    bench_section("small", "The small engine / CHOLMOD simplicial LDL' (fill, factor, solve, forces)");
    for (size_t k = 0; k < sizeof SIZES / sizeof *SIZES; k++)
        for (int cases = 1; cases <= 5; cases += 4) {
            side s;
            char text[100];
            open_side(&s, lattice(SIZES[k].nx, SIZES[k].ny, SIZES[k].nz, cases), SCT_ENGINE_SMALL);
            open_cholmod(&s, false);
            s.with_forces = true;
            bench_racer racers[] = {{.run = analyse, .arg = &s}, {.run = analyse_bare, .arg = &s}};
            bench_race(2, racers, 15);
            snprintf(text, sizeof text, "%s, %d unknowns, %d case%s (%.3g us)", SIZES[k].name, s.st->n_dof, cases,
                     cases > 1 ? "s" : "", 1e6 * racers[0].seconds);
            bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", cases > 1 ? 0.7 : 0.5, false);
            close_cholmod(&s);
            close_side(&s);
        }
}

static void solve_many(void *arg)
{
    side *s = arg;
    sct_solver_solve(s->solver, s->count, s->b);
}

static void solve_many_bare(void *arg)
{
    side *s = arg;
    cholmod_solve2(CHOLMOD_A, s->L, s->many, NULL, &s->many_x, NULL, &s->Y, &s->E, &s->common);
}

static void fifty_gradients(void *arg)
{
    side *s = arg;
    if (sct_sensitivity_adjoint(s->solver, &s->r, 50, s->weights, s->dq) != SCT_OK) abort();
}

static void many_right_hand_sides(const char *name, sct_model *m, sct_engine engine)
{
    static const int COUNTS[] = {1, 8, 32, 64};
    side s;
    char text[100];
    double one = NAN;
    open_side(&s, m, engine);
    open_cholmod(&s, true);
    const size_t n = (size_t)s.st->n_dof;
    analyse(&s);
    analyse_bare(&s);
    s.b = calloc(64 * n, sizeof *s.b);
    for (size_t k = 0; k < 4; k++) {
        s.count = COUNTS[k];
        s.many = cholmod_ones(n, (size_t)s.count, CHOLMOD_REAL, &s.common);
        bench_racer racers[] = {{.run = solve_many, .arg = &s}, {.run = solve_many_bare, .arg = &s}};
        bench_race(2, racers, 7);
        const double each = racers[0].seconds / s.count;
        if (k == 0) one = each;
        snprintf(text, sizeof text, "%s, %zu unknowns, %d at once: each / one alone", name, n, s.count);
        if (k > 0) bench_figure(text, each / one, "ratio", NAN, false);
        snprintf(text, sizeof text, "%s, %zu unknowns, %d at once / CHOLMOD", name, n, s.count);
        bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", NAN, false);
        cholmod_free_dense(&s.many, &s.common);
        cholmod_free_dense(&s.many_x, &s.common);
    }
    free(s.b);
    s.weights = calloc(50, sizeof *s.weights);
    s.dq = calloc(50 * 2, sizeof *s.dq);
    double *wu = calloc(50 * n, sizeof *wu);
    for (size_t i = 0; i < 50; i++) {
        wu[i * n + i * n / 50] = 1.0;
        s.weights[i].wu = wu + i * n;
    }
    bench_racer racers[] = {{.run = fifty_gradients, .arg = &s}, {.run = factor_only, .arg = &s}};
    bench_race(2, racers, 7);
    snprintf(text, sizeof text, "%s, %zu unknowns: 50 adjoint gradients / one factor", name, n);
    bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", 1.5, false);
    free(wu);
    free(s.weights);
    free(s.dq);
    close_cholmod(&s);
    close_side(&s);
}

void bench_analysis(bool full)
{
    small_analyses();
    bench_section("right_hand_sides", "Many right-hand sides, and gradients of 50 limits");
    many_right_hand_sides("plane, small engine", lattice(22, 22, 0, 1), SCT_ENGINE_SMALL);
    many_right_hand_sides("plane", lattice(22, 22, 0, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("space", lattice(6, 6, 7, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("plane", lattice(70, 70, 0, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("space", lattice(14, 14, 15, 1), SCT_ENGINE_SPARSE);
    large_analyses(full);
}

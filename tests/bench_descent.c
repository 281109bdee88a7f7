/* The descent against general libraries on the same compiled callbacks; whole sizings. */
#include "bench.h"

#include <math.h>
#include <nlopt.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>

#include "base/random.h"
#include "grid.h"
#include "sizing/problem.h"

enum { MOST_STARTS = 15, MOST_GOALS = 23 };

/* A model as two programs: in ln A, and in areas relative to the middle of their ranges (for libraries that prefer it).
 */
typedef struct contest {
    sct_model *model;
    sct_structure *st;
    sct_duty *duty;
    sct_problem *problem[2];
} contest;

static void open_contest(contest *c, sct_model *model)
{
    sct_issues *issues = sct_issues_new();
    sct_status status;
    sct_fault why;
    c->model = model;
    if (sct_structure_build(model, &c->st, issues) != SCT_OK) abort();
    c->duty = sct_duty_new(c->st, SCT_ENGINE_AUTO, &status);
    bool *compressed = calloc((size_t)c->st->n_bars, sizeof *compressed);
    for (int plain = 0; plain < 2; plain++)
        if (c->duty == NULL ||
            sct_problem_new(c->duty, compressed, NULL, NULL, plain, &c->problem[plain], why) != SCT_OK)
            abort();
    free(compressed);
    sct_issues_free(issues);
}

static void close_contest(contest *c)
{
    for (int plain = 0; plain < 2; plain++) sct_problem_free(c->problem[plain]);
    sct_duty_free(c->duty);
    sct_structure_free(c->st);
    sct_model_free(c->model);
}

/* Areas of start k: the middle of the ranges, all largest, then random within a factor of 10 of the middle. */
static void place_start(const contest *c, int k, sct_random *random, double A[])
{
    double lower[1000], upper[1000];
    sct_bound_source source[1000];
    sct_problem_bounds(c->problem[0], lower, upper, source);
    for (int v = 0; v < c->st->n_vars; v++) {
        double s = k == 1 ? upper[v] : 0.5 * (lower[v] + upper[v]);
        if (k >= 2) s += log(10.0) * (2.0 * sct_random_unit(random) - 1.0);
        A[c->st->group_of_var[v]] = exp(fmin(fmax(s, lower[v]), upper[v]));
    }
}

/* One run of one method: NAN where it did not arrive. */
typedef struct run {
    double seconds, mass;
    int analyses;
} run;

static run run_descent(const contest *c, const double A[])
{
    const sct_nlp *nlp = sct_problem_nlp(c->problem[0]);
    double *x = calloc((size_t)nlp->n, sizeof *x);
    sct_descent *descent = sct_descent_new(nlp);
    sct_descent_settings settings = sct_descent_defaults();
    settings.eps = log(1.0 / 0.4);
    settings.move = log(4.0);
    sct_problem_point(c->problem[0], A, x);
    const int before = sct_solver_analyses(c->duty->solver);
    const double start = bench_seconds();
    sct_problem_scale(c->problem[0], x);
    const sct_descent_info info = sct_descent_run(descent, nlp, &settings, x, NULL, NULL);
    run r = {bench_seconds() - start, info.f, sct_solver_analyses(c->duty->solver) - before};
    if (info.status != SCT_OK) r.seconds = NAN;
    sct_descent_free(descent);
    free(x);
    return r;
}

/* ---- NLopt ------------------------------------------------------------------------------------------------------ */

typedef struct library {
    const contest *c;
    const sct_nlp *nlp;
    nlopt_opt opt;
    int *rows;
    double unit, *g, *df;
    const double *goals; /* masses that count as arrived */
    int n_goals;
    double start;
    run arrived;
} library;

/* Stops a library as soon as it stands at an optimum: mass within 1e-6, limits kept within 1e-6. */
static void look(library *l, double f)
{
    double violation = -INFINITY;
    for (int j = 0; j < l->nlp->m; j++) violation = fmax(violation, l->g[j]);
    for (int k = 0; k < l->n_goals; k++) {
        if (violation > 1e-6 || fabs(f * l->unit - l->goals[k]) > 1e-6 * l->goals[k]) continue;
        if (isnan(l->arrived.seconds)) l->arrived.seconds = bench_seconds() - l->start;
        nlopt_force_stop(l->opt);
    }
}

static double objective(unsigned n, const double *x, double *grad, void *user)
{
    library *l = user;
    double f = HUGE_VAL;
    (void)n;
    if (l->nlp->value(l->nlp->user, x, &f, l->g) != SCT_OK) return HUGE_VAL;
    look(l, f);
    if (grad != NULL) l->nlp->gradient(l->nlp->user, x, 0, l->rows, grad, NULL);
    return f;
}

static void constraints(unsigned m, double *g, unsigned n, const double *x, double *grad, void *user)
{
    library *l = user;
    double f;
    (void)n;
    if (l->nlp->value(l->nlp->user, x, &f, g) != SCT_OK) {
        for (unsigned j = 0; j < m; j++) g[j] = HUGE_VAL;
        return;
    }
    if (grad != NULL) l->nlp->gradient(l->nlp->user, x, (int)m, l->rows, l->df, grad);
}

static run run_library(const contest *c, bool plain, nlopt_algorithm algorithm, const double A[], const double goals[],
                       int n_goals, double most_seconds)
{
    const sct_nlp *nlp = sct_problem_nlp(c->problem[plain]);
    const size_t n = (size_t)nlp->n, m = (size_t)nlp->m;
    library l = {
        .c = c, .nlp = nlp, .unit = sct_problem_mass_unit(c->problem[plain]), .goals = goals, .n_goals = n_goals};
    double *x = calloc(n, sizeof *x), *tol = calloc(m, sizeof *tol), f;
    l.rows = calloc(m, sizeof *l.rows);
    l.g = calloc(m, sizeof *l.g);
    l.df = calloc(n, sizeof *l.df);
    for (size_t j = 0; j < m; j++) {
        l.rows[j] = (int)j;
        tol[j] = 1e-8;
    }
    sct_problem_point(c->problem[plain], A, x);
    l.opt = nlopt_create(algorithm, (unsigned)n);
    nlopt_set_lower_bounds(l.opt, nlp->lower);
    nlopt_set_upper_bounds(l.opt, nlp->upper);
    nlopt_set_min_objective(l.opt, objective, &l);
    nlopt_add_inequality_mconstraint(l.opt, (unsigned)m, constraints, &l, tol);
    nlopt_set_maxtime(l.opt, most_seconds); /* of the wall */
    nlopt_set_xtol_rel(l.opt, 1e-12);
    l.arrived = (run){NAN, NAN, 0};
    const int before = sct_solver_analyses(c->duty->solver);
    l.start = bench_seconds();
    nlopt_optimize(l.opt, x, &f);
    l.arrived.analyses = sct_solver_analyses(c->duty->solver) - before;
    nlopt_destroy(l.opt);
    free(x);
    free(tol);
    free(l.rows);
    free(l.g);
    free(l.df);
    return l.arrived;
}

static int ascending(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Median of times and of counts of the runs that arrived, and how many did. */
static run median(int n, const run runs[], int *n_arrived)
{
    double t[MOST_STARTS], k[MOST_STARTS];
    *n_arrived = 0;
    for (int i = 0; i < n; i++) {
        if (isnan(runs[i].seconds)) continue;
        t[*n_arrived] = runs[i].seconds;
        k[(*n_arrived)++] = runs[i].analyses;
    }
    if (*n_arrived == 0) return (run){INFINITY, NAN, 0};
    qsort(t, (size_t)*n_arrived, sizeof *t, ascending);
    qsort(k, (size_t)*n_arrived, sizeof *k, ascending);
    return (run){t[*n_arrived / 2], NAN, (int)k[*n_arrived / 2]};
}

static void against(const contest *c, const char *name, const char *library_name, nlopt_algorithm algorithm, int starts,
                    double most_seconds, double *const A[], int n_goals, const double goals[], double ours,
                    double target)
{
    char text[100];
    run in[2];
    int arrived[2];
    for (int plain = 0; plain < 2; plain++) {
        run runs[MOST_STARTS];
        for (int k = 0; k < starts; k++) runs[k] = run_library(c, plain, algorithm, A[k], goals, n_goals, most_seconds);
        in[plain] = median(starts, runs, &arrived[plain]);
    }
    /* the form in which more runs arrive, or the faster one */
    const int best = arrived[0] != arrived[1] ? arrived[1] > arrived[0] : in[1].seconds < in[0].seconds;
    snprintf(text, sizeof text, "%s: %s in %s, arrived of %d", name, library_name, best == 0 ? "ln A" : "A", starts);
    bench_figure(text, arrived[best], "runs", NAN, false);
    if (arrived[best] == 0) return;
    snprintf(text, sizeof text, "%s: %s, analyses", name, library_name);
    bench_figure(text, in[best].analyses, "", NAN, false);
    snprintf(text, sizeof text, "%s: time of %s / ours", name, library_name);
    bench_figure(text, in[best].seconds / ours, "ratio", target, true);
}

static void contest_of(const char *name, sct_model *model, int starts, int n_goals, double most_seconds, double target)
{
    contest c;
    char text[100];
    run ours[MOST_GOALS];
    double *A[MOST_GOALS], goals[MOST_GOALS];
    sct_random random = {1};
    int n_arrived, kept = 0;
    open_contest(&c, model);
    for (int k = 0; k < n_goals; k++) { /* more starts than are compared: optima that a library may end at */
        A[k] = calloc((size_t)c.st->n_groups, sizeof *A[k]);
        place_start(&c, k, &random, A[k]);
        run_descent(&c, A[k]); /* the first time touches the memory */
        ours[k] = run_descent(&c, A[k]);
        if (!isnan(ours[k].seconds)) goals[kept++] = ours[k].mass;
    }
    const run middle = median(starts, ours, &n_arrived);
    snprintf(text, sizeof text, "%s: descent, arrived of %d", name, starts);
    bench_figure(text, n_arrived, "runs", starts, true);
    snprintf(text, sizeof text, "%s: descent, analyses", name);
    bench_figure(text, middle.analyses, "", NAN, false);
    snprintf(text, sizeof text, "%s: descent", name);
    bench_figure(text, 1e3 * middle.seconds, "ms", NAN, false);
    against(&c, name, "SLSQP", NLOPT_LD_SLSQP, starts, most_seconds, A, kept, goals, middle.seconds, target);
    against(&c, name, "MMA", NLOPT_LD_MMA, starts, most_seconds, A, kept, goals, middle.seconds, target);
    for (int k = 0; k < n_goals; k++) free(A[k]);
    close_contest(&c);
}

/* ---- models ------------------------------------------------------------------------------------------------------ */

static sct_model *read_file(const char *path)
{
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    if (sct_model_read(path, &model, issues) != SCT_OK) abort();
    sct_issues_free(issues);
    return model;
}

static sct_model *read_grid(grid_spec spec)
{
    sct_text text = {0};
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    grid_json(&spec, &text);
    if (sct_model_parse("grid.json", text.data, text.size, &model, issues) != SCT_OK) abort();
    sct_issues_free(issues);
    sct_text_free(&text);
    return model;
}

/* ---- whole sizings ------------------------------------------------------------------------------------------------
 */

typedef struct sizing {
    sct_model *model;
    sct_settings settings;
    int analyses;
} sizing;

static void size_once(void *arg)
{
    sizing *s = arg;
    sct_issues *issues = sct_issues_new();
    sct_result *result = NULL;
    if (sct_size(s->model, &s->settings, &result, issues) != SCT_OK) abort();
    s->analyses = result->analyses;
    sct_result_free(result);
    sct_issues_free(issues);
}

static double seconds_of_sizing(sct_model *model, int starts, int rounds, int *analyses)
{
    sizing s = {.model = model, .settings = sct_settings_defaults()};
    s.settings.starts = starts;
    bench_racer racer = {.run = size_once, .arg = &s};
    if (rounds > 1) {
        bench_race(1, &racer, rounds);
    } else {
        const double start = bench_seconds();
        size_once(&s);
        racer.seconds = bench_seconds() - start;
    }
    *analyses = s.analyses;
    sct_model_free(model);
    return racer.seconds;
}

static void whole_sizings(bool full)
{
    int analyses;
    double t = seconds_of_sizing(read_file("models/demo_roof.json"), 0, 7, &analyses);
    bench_section("sizings", "Whole sizings on one core (model in memory to checked result)");
    bench_figure("demo roof, 8 starts, sections picked: sizings per second", 1.0 / t, "1/s", NAN, false);
    bench_figure("demo roof: analyses of one sizing", analyses, "", NAN, false);
    t = seconds_of_sizing(read_file("models/benchmarks/10bar_case1.json"), 1, 7, &analyses);
    bench_figure("10 bars, one start: sizings per second", 1.0 / t, "1/s", NAN, false);
    t = seconds_of_sizing(read_file("models/benchmarks/72bar_case1.json"), 1, 7, &analyses);
    bench_figure("72 bars, one start: sizings per second", 1.0 / t, "1/s", NAN, false);
    t = seconds_of_sizing(read_grid((grid_spec){.nx = 10, .ny = 10, .zones = 4}), 1, 3, &analyses);
    bench_figure("space grid, 800 members, 42 groups, one start", t, "s", NAN, false);
    t = seconds_of_sizing(read_grid((grid_spec){.nx = 25, .ny = 25, .zones = 6}), 1, 1, &analyses);
    bench_figure("space grid, 5000 members, 93 groups, one start", t, "s", 3.0, false);
    bench_figure("space grid, 5000 members: analyses", analyses, "", NAN, false);
    t = seconds_of_sizing(read_grid((grid_spec){.nx = 25, .ny = 5}), 1, 1, &analyses);
    bench_figure("1000 members, each sized by itself, one start", t, "s", 10.0, false);
    bench_figure("1000 members: analyses", analyses, "", NAN, false);
    if (!full) return;
    t = seconds_of_sizing(read_grid((grid_spec){.nx = 25, .ny = 10}), 1, 1, &analyses);
    bench_figure("2000 members, each sized by itself, one start", t, "s", NAN, false);
    bench_figure("2000 members: analyses", analyses, "", NAN, false);
}

void bench_descent(bool full)
{
    bench_section("descent",
                  "The descent against NLopt on the same callbacks: median of seeded starts, better of ln A and A");
    contest_of("10 bars, case 1", read_file("models/benchmarks/10bar_case1.json"), 15, 15, 5.0, 1.5);
    contest_of("10 bars, stress", read_file("models/benchmarks/10bar_stress.json"), 15, 15, 5.0, 1.5);
    contest_of("25 bars", read_file("models/benchmarks/25bar.json"), 15, 15, 5.0, 3.0);
    contest_of("72 bars", read_file("models/benchmarks/72bar_case1.json"), 9, 9, 5.0, 10.0);
    contest_of("200 bars", read_file("models/benchmarks/200bar.json"), 5, 23, 10.0, 10.0);
    contest_of("space grid, 800 members", read_grid((grid_spec){.nx = 10, .ny = 10, .zones = 4}), full ? 3 : 1,
               full ? 3 : 1, 60.0, 30.0);
    whole_sizings(full);
}

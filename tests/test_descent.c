/* The constrained descent on published nonlinear programs, in its published form, and at its edges. */
#include "base/random.h"
#include "nlp_problems.h"
#include "numerics/descent.h"
#include "support.h"
#include <string.h>

/* ---- published problems as callbacks --------------------------------------------------------------------------- */

static sct_status hs_value(void *user, const double x[], double *f, double g[])
{
    const nlp_problem *p = user;
    double df[NLP_N], dg[NLP_M][NLP_N];
    p->functions(x, f, g, df, dg);
    return SCT_OK;
}

static sct_status hs_gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    const nlp_problem *p = user;
    double f, g[NLP_M], all[NLP_M][NLP_N];
    p->functions(x, &f, g, df, all);
    for (int r = 0; r < n_rows; ++r) memcpy(dg + r * p->n, all[rows[r]], (size_t)p->n * sizeof *dg);
    return SCT_OK;
}

/* Hessian of the Lagrangian from central differences of its gradient. */
static sct_status hs_curvature(void *user, const double x[], int n_rows, const int rows[], const double mu[], double *H)
{
    const nlp_problem *p = user;
    const double step = 1e-5;
    const int n = p->n;
    for (int i = 0; i < n; ++i) {
        double L[2][NLP_N], y[NLP_N], f, g[NLP_M], dg[NLP_M][NLP_N];
        for (int side = 0; side < 2; ++side) {
            memcpy(y, x, (size_t)n * sizeof *y);
            y[i] += side == 0 ? -step : step;
            p->functions(y, &f, g, L[side], dg);
            for (int r = 0; r < n_rows; ++r)
                for (int k = 0; k < n; ++k) L[side][k] += mu[r] * dg[rows[r]][k];
        }
        for (int k = 0; k < n; ++k) H[i * n + k] = (L[1][k] - L[0][k]) / (2 * step);
    }
    for (int i = 0; i < n; ++i)
        for (int k = 0; k < i; ++k) H[i * n + k] = H[k * n + i] = (H[i * n + k] + H[k * n + i]) / 2;
    return SCT_OK;
}

static sct_nlp hs_nlp(const nlp_problem *p)
{
    return (sct_nlp){.n = p->n,
                     .m = p->m,
                     .m_eq = p->m_eq,
                     .lower = p->lower,
                     .upper = p->upper,
                     .user = (void *)p,
                     .value = hs_value,
                     .gradient = hs_gradient,
                     .f_scale = fmax(1, fabs(p->f))};
}

static const nlp_problem *hs(const char *name)
{
    for (int k = 0; k < N_NLP_PROBLEMS; ++k)
        if (strcmp(NLP_PROBLEMS[k].name, name) == 0) return &NLP_PROBLEMS[k];
    ck_abort_msg("no problem %s", name);
    return NULL;
}

static sct_descent_info run(const sct_nlp *nlp, const sct_descent_settings *settings, double x[], double mu[],
                            double mu_bound[])
{
    ck_assert_ptr_null(sct_descent_settings_fault(settings));
    sct_descent *descent = sct_descent_new(nlp);
    ck_assert_ptr_nonnull(descent);
    const sct_descent_info info = sct_descent_run(descent, nlp, settings, x, mu, mu_bound);
    sct_descent_free(descent);
    return info;
}

/* The KKT conditions recomputed from the problem's own functions. */
static double kkt_error(const nlp_problem *p, const double x[], const double mu[], const double mu_bound[])
{
    double f, g[NLP_M], df[NLP_N], dg[NLP_M][NLP_N], error = 0;
    p->functions(x, &f, g, df, dg);
    for (int i = 0; i < p->n; ++i) {
        double L = df[i] + mu_bound[i];
        for (int j = 0; j < p->m; ++j) L += mu[j] * dg[j][i];
        error = fmax(error, fabs(L));
        if (mu_bound[i] < 0) error = fmax(error, fabs(mu_bound[i] * (x[i] - p->lower[i])));
        if (mu_bound[i] > 0) error = fmax(error, fabs(mu_bound[i] * (p->upper[i] - x[i])));
        if (p->lower != NULL) error = fmax(error, p->lower[i] - x[i]);
        if (p->upper != NULL) error = fmax(error, x[i] - p->upper[i]);
    }
    for (int j = 0; j < p->m; ++j) {
        error = fmax(error, j < p->m_eq ? fabs(g[j]) : fmax(g[j], fmax(-mu[j], fabs(mu[j] * g[j]))));
    }
    return error;
}

static int solve_published(const nlp_problem *p, const sct_nlp *nlp, const sct_descent_settings *settings)
{
    double x[NLP_N], mu[NLP_M], mu_bound[NLP_N];
    memcpy(x, p->start, sizeof x);
    const sct_descent_info info = run(nlp, settings, x, mu, mu_bound);
    ck_assert_msg(info.status == SCT_OK, "%s: status %d after %d values, KKT %g", p->name, (int)info.status,
                  info.values, info.kkt);
    const double error = kkt_error(p, x, mu, mu_bound) / nlp->f_scale;
    ck_assert_msg(error <= 2e-6, "%s: KKT error %g", p->name, error);
    ck_assert_msg(fabs(info.f - p->f) <= 2e-6 * nlp->f_scale, "%s: f - f* = %g", p->name, info.f - p->f);
    return info.values;
}

START_TEST(derivatives_of_the_published_problems_agree_with_differences)
{
    const nlp_problem *p = &NLP_PROBLEMS[_i];
    double y[NLP_N], f[2], g[2][NLP_M], df[NLP_N], dg[NLP_M][NLP_N], unused[NLP_N], unused_rows[NLP_M][NLP_N];
    const double step = 1e-5;
    for (int i = 0; i < p->n; ++i) {
        for (int side = 0; side < 2; ++side) {
            for (int k = 0; k < p->n; ++k) y[k] = p->start[k] + 0.1 * (k + 1);
            y[i] += side == 0 ? -step : step;
            p->functions(y, &f[side], g[side], unused, unused_rows);
        }
        y[i] -= step;
        double f_here, g_here[NLP_M];
        p->functions(y, &f_here, g_here, df, dg);
        ck_assert_double_eq_tol(df[i], (f[1] - f[0]) / (2 * step), 1e-6 * (1 + fabs(df[i]) + fabs(f_here)));
        for (int j = 0; j < p->m; ++j) {
            ck_assert_double_eq_tol(dg[j][i], (g[1][j] - g[0][j]) / (2 * step),
                                    1e-6 * (1 + fabs(dg[j][i]) + fabs(g_here[j])));
        }
    }
}
END_TEST

START_TEST(published_problems_are_solved_from_gradients_alone)
{
    const nlp_problem *p = &NLP_PROBLEMS[_i];
    const sct_nlp nlp = hs_nlp(p);
    sct_descent_settings settings = sct_descent_defaults();
    settings.eps = INFINITY; /* these constraints are not normalised */
    ck_assert_int_le(solve_published(p, &nlp, &settings), 60);
}
END_TEST

START_TEST(published_problems_are_solved_with_exact_curvature)
{
    const nlp_problem *p = &NLP_PROBLEMS[_i];
    sct_nlp nlp = hs_nlp(p);
    nlp.curvature = hs_curvature;
    sct_descent_settings settings = sct_descent_defaults();
    settings.eps = INFINITY;
    settings.floor = 1e-3;
    ck_assert_int_le(solve_published(p, &nlp, &settings), 30);
}
END_TEST

START_TEST(the_potential_set_does_not_change_the_solution)
{
    const nlp_problem *p = &NLP_PROBLEMS[_i];
    const sct_nlp nlp = hs_nlp(p);
    sct_descent_settings settings = sct_descent_defaults();
    settings.eps = 0.6;
    solve_published(p, &nlp, &settings);
}
END_TEST

/* Where the identity is a fair metric the published form gets there, too. */
START_TEST(the_published_form_solves_well_scaled_problems)
{
    static const char *const names[] = {"HS6",  "HS10", "HS11", "HS14", "HS22", "HS28", "HS30", "HS39",
                                        "HS40", "HS48", "HS50", "HS51", "HS65", "HS71", "HS76"};
    for (size_t k = 0; k < sizeof names / sizeof *names; ++k) {
        const nlp_problem *p = hs(names[k]);
        const sct_nlp nlp = hs_nlp(p);
        sct_descent_settings settings = sct_descent_defaults();
        settings.eps = INFINITY;
        settings.plain = true;
        settings.max_iterations = 200;
        solve_published(p, &nlp, &settings);
    }
}
END_TEST

/* ---- the published iteration, step by step --------------------------------------------------------------------- */

typedef struct trace {
    double *x; /* of the latest value call */
    double f[200], step[200], kkt[200];
    int n, stop_at, iteration[200], values[200];
} trace;

static bool record(const sct_descent_step *step, void *user)
{
    trace *t = user;
    t->f[t->n] = step->f;
    t->step[t->n] = step->step;
    t->kkt[t->n] = step->kkt;
    t->iteration[t->n] = step->iteration;
    t->values[t->n] = step->values;
    ++t->n;
    return t->n != t->stop_at;
}

/* Without constraints: x - t grad f, t halved until f falls by gamma t |grad f|^2. Rosenbrock's function (HS1 without
 * its bound). */
START_TEST(without_constraints_the_plain_step_is_steepest_descent)
{
    nlp_problem p = *hs("HS1");
    p.lower = NULL;
    const sct_nlp nlp = hs_nlp(&p);
    double y[2] = {-2, 1};
    for (int count = 1; count <= 25; ++count) {
        sct_descent_settings settings = sct_descent_defaults();
        settings.plain = true;
        settings.max_iterations = count;
        double x[2] = {-2, 1};
        run(&nlp, &settings, x, NULL, NULL);

        double f, f_new, df[NLP_N], unused[NLP_N], t = 1, z[2];
        p.functions(y, &f, NULL, df, NULL);
        const double slope = df[0] * df[0] + df[1] * df[1];
        for (;; t /= 2) {
            for (int i = 0; i < 2; ++i) z[i] = y[i] - t * df[i];
            p.functions(z, &f_new, NULL, unused, NULL);
            if (f_new <= f - settings.gamma * t * slope) break;
        }
        memcpy(y, z, sizeof y);
        ck_close(x[0], y[0], 1e-12);
        ck_close(x[1], y[1], 1e-12);
    }
}
END_TEST

/* One inequality: the QP has the closed solution mu = max(0, (g - a'c)/a'a), d = -(c + mu a); c = grad f, a = grad g.
 * R = max(R, mu); t halved until f + R V falls by gamma t |d|^2 (Pshenichny and Danilin 1978). */
START_TEST(the_plain_setting_repeats_the_published_iteration)
{
    static const char *const names[] = {"HS12", "HS29", "HS11"};
    for (int which = 0; which < 3; ++which) {
        const nlp_problem *p = hs(names[which]);
        const sct_nlp nlp = hs_nlp(p);
        const int n = p->n;
        double y[NLP_N], R = 0;
        memcpy(y, p->start, sizeof y);
        for (int count = 1; count <= 20; ++count) {
            sct_descent_settings settings = sct_descent_defaults();
            settings.plain = true;
            settings.eps = INFINITY;
            settings.max_iterations = count;
            double x[NLP_N];
            memcpy(x, p->start, sizeof x);
            if (run(&nlp, &settings, x, NULL, NULL).status == SCT_OK) break;

            double f, g[NLP_M], c[NLP_N], a[NLP_M][NLP_N], d[NLP_N], z[NLP_N], ac = 0, aa = 0, dd = 0;
            p->functions(y, &f, g, c, a);
            for (int i = 0; i < n; ++i) ac += a[0][i] * c[i], aa += a[0][i] * a[0][i];
            const double mu = aa > 0 ? fmax(0, (g[0] - ac) / aa) : 0;
            for (int i = 0; i < n; ++i) d[i] = -(c[i] + mu * a[0][i]), dd += d[i] * d[i];
            R = fmax(R, mu);
            const double Phi = f + R * fmax(0, g[0]);
            for (double t = 1;; t /= 2) {
                double f_new, g_new[NLP_M], df[NLP_N], dg[NLP_M][NLP_N];
                for (int i = 0; i < n; ++i) z[i] = y[i] + t * d[i];
                p->functions(z, &f_new, g_new, df, dg);
                if (f_new + R * fmax(0, g_new[0]) <= Phi - settings.gamma * t * dd) break;
            }
            memcpy(y, z, sizeof y);
            for (int i = 0; i < n; ++i) ck_assert_double_eq_tol(x[i], y[i], 1e-9 * (1 + fabs(y[i])));
        }
    }
}
END_TEST

/* ---- a problem like the sizing of a truss ---------------------------------------------------------------------- */

enum { SIZE_N = 40, SIZE_M = 120 };

/* x = ln A, f = sum w_i exp(x_i), g_j = ln sum_i a_ji exp(-x_i): convex, its solution does not depend on the start. */
typedef struct sizing {
    int n, m;
    double w[SIZE_N], a[SIZE_M][SIZE_N];
    double share[SIZE_M][SIZE_N]; /* a_ji exp(-x_i) / sum, at the latest value call */
    double lower[SIZE_N], latest[SIZE_N];
    int values, cluster[SIZE_M];
} sizing;

static sct_status sizing_value(void *user, const double x[], double *f, double g[])
{
    sizing *p = user;
    ++p->values;
    *f = 0;
    for (int i = 0; i < p->n; ++i) *f += p->w[i] * exp(x[i]);
    for (int j = 0; j < p->m; ++j) {
        double sum = 0;
        for (int i = 0; i < p->n; ++i) sum += p->share[j][i] = p->a[j][i] * exp(-x[i]);
        for (int i = 0; i < p->n; ++i) p->share[j][i] /= sum;
        g[j] = log(sum);
    }
    memcpy(p->latest, x, (size_t)p->n * sizeof *x);
    return SCT_OK;
}

static sct_status sizing_gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    const sizing *p = user;
    for (int i = 0; i < p->n; ++i) {
        ck_assert(x[i] == p->latest[i]);
        df[i] = p->w[i] * exp(x[i]);
    }
    for (int r = 0; r < n_rows; ++r)
        for (int i = 0; i < p->n; ++i) dg[r * p->n + i] = -p->share[rows[r]][i];
    return SCT_OK;
}

static sct_status sizing_curvature(void *user, const double x[], int n_rows, const int rows[], const double mu[],
                                   double *H)
{
    const sizing *p = user;
    const int n = p->n;
    ck_assert(x[0] == p->latest[0]);
    memset(H, 0, (size_t)(n * n) * sizeof *H);
    for (int r = 0; r < n_rows; ++r) {
        const double *s = p->share[rows[r]];
        for (int i = 0; i < n; ++i) {
            H[i * n + i] += mu[r] * s[i];
            for (int k = 0; k < n; ++k) H[i * n + k] -= mu[r] * s[i] * s[k];
        }
    }
    return SCT_OK;
}

static void sizing_objective(void *user, const double x[], const double d[], double df[], double ddf[])
{
    const sizing *p = user;
    for (int i = 0; i < p->n; ++i) df[i] = ddf[i] = p->w[i] * exp(x[i] + d[i]);
}

static sct_nlp random_sizing(sct_random *r, int n, int m, sizing *p)
{
    *p = (sizing){.n = n, .m = m};
    for (int i = 0; i < n; ++i) {
        p->w[i] = 0.5 + sct_random_unit(r);
        p->lower[i] = log(0.05);
    }
    for (int j = 0; j < m; ++j) {
        p->cluster[j] = j % n;
        for (int i = 0; i < n; ++i) p->a[j][i] = sct_random_unit(r) < 0.5 ? 1e-3 : sct_random_unit(r);
        p->a[j][j % n] += 0.5;
    }
    return (sct_nlp){.n = n,
                     .m = m,
                     .lower = p->lower,
                     .user = p,
                     .value = sizing_value,
                     .gradient = sizing_gradient,
                     .curvature = sizing_curvature,
                     .objective = sizing_objective};
}

static sct_descent_settings sizing_settings(void)
{
    sct_descent_settings settings = sct_descent_defaults();
    settings.move = log(4);
    return settings;
}

static void random_start(sct_random *r, int n, double x[])
{
    for (int i = 0; i < n; ++i) x[i] = log(10) * (2 * sct_random_unit(r) - 1);
}

START_TEST(a_sizing_problem_converges_in_ten_values_from_every_start)
{
    static sizing p;
    static const int sizes[][2] = {{2, 4}, {5, 15}, {10, 30}, {10, 100}, {40, 120}};
    sct_random r = {11};
    const sct_descent_settings settings = sizing_settings();
    for (size_t k = 0; k < sizeof sizes / sizeof *sizes; ++k) {
        const sct_nlp nlp = random_sizing(&r, sizes[k][0], sizes[k][1], &p);
        double best = 0;
        for (int start = 0; start < 23; ++start) {
            double x[SIZE_N];
            random_start(&r, p.n, x);
            p.values = 0;
            const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
            ck_assert_int_eq(info.status, SCT_OK);
            ck_assert_int_eq(info.values, p.values);
            ck_assert_msg(info.values <= 10, "n %d start %d: %d values", p.n, start, info.values);
            ck_assert_double_le(info.kkt, 1e-6);
            ck_assert_double_le(info.violation, 1e-6);
            if (start == 0) best = info.f;
            ck_close(info.f, best, 2e-6);
        }
    }
}
END_TEST

START_TEST(a_cluster_cap_leaves_the_solution_as_it_is)
{
    static sizing p;
    sct_random r = {12};
    sct_nlp nlp = random_sizing(&r, 10, 100, &p);
    sct_descent_settings settings = sizing_settings();
    double x[SIZE_N], mu[SIZE_M];
    random_start(&r, p.n, x);
    const double f = run(&nlp, &settings, x, mu, NULL).f;
    nlp.cluster = p.cluster;
    nlp.n_clusters = 10;
    for (settings.per_cluster = 1; settings.per_cluster <= 4; ++settings.per_cluster) {
        for (int start = 0; start < 23; ++start) {
            random_start(&r, p.n, x);
            const sct_descent_info info = run(&nlp, &settings, x, mu, NULL);
            ck_assert_int_eq(info.status, SCT_OK);
            ck_close(info.f, f, 2e-6);
        }
    }
}
END_TEST

/* Of one cluster only per_cluster rows are asked for at the first point. */
static int n_rows_asked;
static sct_status counting_gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    n_rows_asked = n_rows;
    for (int k = 1; k < n_rows; ++k) ck_assert_int_gt(rows[k], rows[k - 1]);
    return sizing_gradient(user, x, n_rows, rows, df, dg);
}

START_TEST(a_cluster_gives_only_its_most_violated_constraints)
{
    static sizing p;
    static int one[SIZE_M];
    sct_random r = {13};
    sct_nlp nlp = random_sizing(&r, 10, 100, &p);
    sct_descent_settings settings = sizing_settings();
    settings.observer = record;
    trace t = {.stop_at = 1};
    settings.user = &t;
    nlp.gradient = counting_gradient;
    nlp.cluster = one;
    nlp.n_clusters = 1;
    double x[SIZE_N];
    for (int i = 0; i < p.n; ++i) x[i] = -1; /* everything is violated */
    ck_assert_int_eq(run(&nlp, &settings, x, NULL, NULL).status, SCT_INTERRUPTED);
    ck_assert_int_eq(n_rows_asked, settings.per_cluster);
    for (int j = 0; j < 7; ++j) one[j] = -1;
    t.n = 0;
    run(&nlp, &settings, x, NULL, NULL);
    ck_assert_int_eq(n_rows_asked, settings.per_cluster + 7);
}
END_TEST

START_TEST(without_curvature_the_model_takes_updates_and_converges)
{
    static sizing p;
    sct_random r = {14};
    sct_nlp nlp = random_sizing(&r, 10, 30, &p);
    const sct_descent_settings settings = sizing_settings();
    double x[SIZE_N];
    random_start(&r, p.n, x);
    const double f = run(&nlp, &settings, x, NULL, NULL).f;
    nlp.curvature = NULL;
    for (int start = 0; start < 23; ++start) {
        random_start(&r, p.n, x);
        const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
        ck_assert_msg(info.status == SCT_OK, "start %d: status %d, KKT %g", start, (int)info.status, info.kkt);
        ck_close(info.f, f, 2e-6);
    }
}
END_TEST

/* ---- edges ----------------------------------------------------------------------------------------------------- */

/* f = sum x_i; x_1^2 + x_2^2 + 1 <= 0 (or = 0): never, the least violation is 1. */
static void never(const double x[], double *f, double g[], double df[], double dg[][NLP_N])
{
    *f = x[0] + x[1];
    g[0] = sq(x[0]) + sq(x[1]) + 1;
    df[0] = df[1] = 1;
    dg[0][0] = 2 * x[0];
    dg[0][1] = 2 * x[1];
}

/* x_1 + x_2 <= 1 and x_1 + x_2 >= 2: the least violation is 1/2. */
static void contradiction(const double x[], double *f, double g[], double df[], double dg[][NLP_N])
{
    *f = sq(x[0]) + sq(x[1]);
    g[0] = x[0] + x[1] - 1;
    g[1] = 2 - x[0] - x[1];
    df[0] = 2 * x[0];
    df[1] = 2 * x[1];
    dg[0][0] = dg[0][1] = 1;
    dg[1][0] = dg[1][1] = -1;
}

START_TEST(infeasible_problems_are_reported_with_their_least_violation)
{
    const nlp_problem problems[] = {{"never", 2, 1, 0, {3, 4}, 1, NULL, NULL, never},
                                    {"never equal", 2, 1, 1, {3, 4}, 1, NULL, NULL, never},
                                    {"contradiction", 2, 2, 0, {3, 4}, 1, NULL, NULL, contradiction},
                                    {"contradicting equalities", 2, 2, 2, {3, 4}, 1, NULL, NULL, contradiction}};
    const double least[] = {1, 1, 0.5, 0.5};
    for (int k = 0; k < 4; ++k) {
        const sct_nlp nlp = hs_nlp(&problems[k]);
        const sct_descent_settings settings = sct_descent_defaults();
        double x[NLP_N];
        memcpy(x, problems[k].start, sizeof x);
        const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
        ck_assert_msg(info.status == SCT_INFEASIBLE, "%s: status %d, V %g, %d iterations", problems[k].name,
                      (int)info.status, info.violation, info.iterations);
        ck_assert_msg(fabs(info.violation - least[k]) < 1e-3, "%s: V %.9g", problems[k].name, info.violation);
        double f, g[NLP_M];
        hs_value((void *)&problems[k], x, &f, g);
        ck_close(info.violation, fabs(g[info.worst]), 1e-15);
    }
}
END_TEST

/* Upper bounds too small for the constraints: found within 25 values, at the upper bounds. */
START_TEST(an_infeasible_sizing_problem_is_reported_within_25_values)
{
    static sizing p;
    sct_random r = {15};
    sct_nlp nlp = random_sizing(&r, 10, 30, &p);
    const sct_descent_settings settings = sizing_settings();
    double upper[SIZE_N], x[SIZE_N], f, g[SIZE_M], V = 0;
    for (int i = 0; i < p.n; ++i) upper[i] = log(0.3);
    sizing_value(&p, upper, &f, g);
    for (int j = 0; j < p.m; ++j) V = fmax(V, g[j]);
    ck_assert_double_gt(V, 0.1);
    nlp.upper = upper;
    for (int start = 0; start < 23; ++start) {
        random_start(&r, p.n, x);
        const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
        ck_assert_int_eq(info.status, SCT_INFEASIBLE);
        ck_assert_int_le(info.values, 25);
        ck_assert_double_eq_tol(info.violation, V, 1e-6);
        ck_assert(memcmp(x, p.latest, (size_t)p.n * sizeof *x) == 0);
    }
}
END_TEST

/* f = 10 x - ln x, not defined for x <= 0; the full steepest descent step from 1 goes to -8. */
typedef struct barrier {
    int n_refused, calls, fail_at;
    sct_status failure;
} barrier;

static sct_status barrier_value(void *user, const double x[], double *f, double g[])
{
    barrier *b = user;
    (void)g;
    if (++b->calls == b->fail_at) return b->failure;
    if (!(x[0] > 0)) {
        ++b->n_refused;
        if (b->failure == SCT_OK) {
            *f = NAN;
            return SCT_OK;
        }
        return SCT_MECHANISM;
    }
    *f = 10 * x[0] - log(x[0]);
    return SCT_OK;
}

static sct_status barrier_gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    (void)user, (void)n_rows, (void)rows, (void)dg;
    df[0] = 10 - 1 / x[0];
    return SCT_OK;
}

static sct_descent_info run_barrier(barrier *b, double x[])
{
    const sct_nlp nlp = {.n = 1, .user = b, .value = barrier_value, .gradient = barrier_gradient};
    const sct_descent_settings settings = sct_descent_defaults();
    return run(&nlp, &settings, x, NULL, NULL);
}

START_TEST(where_the_value_fails_the_step_is_halved)
{
    const sct_status failures[] = {SCT_MECHANISM, SCT_OK /* NAN instead of a status */};
    for (int k = 0; k < 2; ++k) {
        barrier b = {.failure = failures[k]};
        double x[1] = {1};
        const sct_descent_info info = run_barrier(&b, x);
        ck_assert_int_eq(info.status, SCT_OK);
        ck_assert_int_gt(b.n_refused, 0);
        ck_assert_int_eq(info.values, b.calls);
        ck_close(x[0], 0.1, 1e-4);
    }
}
END_TEST

START_TEST(a_failure_at_the_start_or_without_remedy_ends_the_run)
{
    double x[1] = {1};
    barrier at_start = {.fail_at = 1, .failure = SCT_MECHANISM};
    ck_assert_int_eq(run_barrier(&at_start, x).status, SCT_MECHANISM);
    x[0] = -1;
    barrier not_a_number = {.failure = SCT_OK};
    ck_assert_int_eq(run_barrier(&not_a_number, x).status, SCT_BAD_INPUT);
    const sct_status fatal[] = {SCT_NO_MEMORY, SCT_INTERRUPTED};
    for (int k = 0; k < 2; ++k) {
        x[0] = 1;
        barrier later = {.fail_at = 4, .failure = fatal[k]};
        const sct_descent_info info = run_barrier(&later, x);
        ck_assert_int_eq(info.status, fatal[k]);
        ck_assert_int_eq(info.values, 4);
    }
}
END_TEST

START_TEST(an_observer_sees_every_point_and_can_stop_the_run)
{
    const nlp_problem *p = hs("HS43");
    const sct_nlp nlp = hs_nlp(p);
    sct_descent_settings settings = sct_descent_defaults();
    trace t = {.stop_at = 4};
    settings.observer = record;
    settings.user = &t;
    double x[NLP_N];
    memcpy(x, p->start, sizeof x);
    const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
    ck_assert_int_eq(info.status, SCT_INTERRUPTED);
    ck_assert_int_eq(t.n, 4);
    ck_assert_int_eq(info.iterations, 3);
    ck_assert(t.step[0] == 0);
    for (int k = 0; k < t.n; ++k) ck_assert_int_eq(t.iteration[k], k);
    ck_assert_int_eq(t.values[0], 1);
    ck_assert_int_eq(t.values[3], info.values);
    double f, g[NLP_M];
    hs_value((void *)p, x, &f, g);
    ck_assert(f == t.f[3] && f == info.f);
}
END_TEST

START_TEST(with_no_iterations_the_start_is_only_evaluated)
{
    const nlp_problem *p = hs("HS65");
    const sct_nlp nlp = hs_nlp(p);
    sct_descent_settings settings = sct_descent_defaults();
    settings.max_iterations = 0;
    double x[NLP_N] = {-9, 9, 0}; /* clipped to 4.5 */
    const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
    ck_assert_int_eq(info.status, SCT_NOT_CONVERGED);
    ck_assert_int_eq(info.values, 1);
    ck_assert_int_eq(info.iterations, 0);
    ck_assert(isnan(info.kkt));
    ck_assert(x[0] == -4.5 && x[1] == 4.5);
    ck_close(info.f, 81 + 100.0 / 9 + 25, 1e-14);
    ck_assert(info.violation == 0);
    ck_assert_int_eq(info.worst, 0);
}
END_TEST

START_TEST(the_iteration_limit_ends_a_run_as_not_converged)
{
    const nlp_problem *p = hs("HS100");
    const sct_nlp nlp = hs_nlp(p);
    sct_descent_settings settings = sct_descent_defaults();
    settings.max_iterations = 3;
    double x[NLP_N], f, g[NLP_M];
    memcpy(x, p->start, sizeof x);
    const sct_descent_info info = run(&nlp, &settings, x, NULL, NULL);
    ck_assert_int_eq(info.status, SCT_NOT_CONVERGED);
    ck_assert_int_eq(info.iterations, 3);
    ck_assert_double_gt(info.kkt, 1e-6);
    hs_value((void *)p, x, &f, g);
    ck_assert(f == info.f);
}
END_TEST

/* min x, x >= -100 from 0 with move 1: steps of 1 until the bound. */
static sct_status line_value(void *user, const double x[], double *f, double g[])
{
    (void)user, (void)g;
    *f = 5 * x[0];
    return SCT_OK;
}
static sct_status line_gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    (void)user, (void)x, (void)n_rows, (void)rows, (void)dg;
    df[0] = 5;
    return SCT_OK;
}

START_TEST(no_step_is_longer_than_the_move_limit)
{
    const double lower[1] = {-10.5};
    const sct_nlp nlp = {.n = 1, .lower = lower, .value = line_value, .gradient = line_gradient, .f_scale = 1};
    sct_descent_settings settings = sct_descent_defaults();
    settings.move = 1;
    for (int count = 1; count <= 10; ++count) {
        double x[1] = {0}, mu_bound[1];
        settings.max_iterations = count;
        const sct_descent_info info = run(&nlp, &settings, x, NULL, mu_bound);
        ck_assert_int_eq(info.status, SCT_NOT_CONVERGED);
        ck_close(x[0], -1.0 * count, 1e-15);
        ck_assert(count == 10 || mu_bound[0] == 0); /* the move limit has no price */
    }
    double x[1] = {0}, mu_bound[1];
    settings.max_iterations = 100;
    ck_assert_int_eq(run(&nlp, &settings, x, NULL, mu_bound).status, SCT_OK);
    ck_assert(x[0] == -10.5);
    ck_close(mu_bound[0], -5.0, 1e-14);
}
END_TEST

START_TEST(a_workspace_gives_the_same_run_again)
{
    const nlp_problem *p = hs("HS113");
    const sct_nlp nlp = hs_nlp(p);
    const sct_descent_settings settings = sct_descent_defaults();
    sct_descent *descent = sct_descent_new(&nlp);
    double x[2][NLP_N], mu[2][NLP_M];
    for (int k = 0; k < 2; ++k) {
        memcpy(x[k], p->start, sizeof x[k]);
        ck_assert_int_eq(sct_descent_run(descent, &nlp, &settings, x[k], mu[k], NULL).status, SCT_OK);
    }
    ck_assert(memcmp(x[0], x[1], sizeof x[0]) == 0);
    ck_assert(memcmp(mu[0], mu[1], sizeof mu[0]) == 0);
    sct_descent_free(descent);
    sct_descent_free(NULL);
}
END_TEST

START_TEST(settings_out_of_range_are_named)
{
    sct_descent_settings s = sct_descent_defaults();
    ck_assert_ptr_null(sct_descent_settings_fault(&s));
#define FAULT(field, bad, word)                                                                                        \
    do {                                                                                                               \
        s = sct_descent_defaults();                                                                                    \
        s.field = bad;                                                                                                 \
        ck_assert_ptr_nonnull(sct_descent_settings_fault(&s));                                                         \
        ck_assert_ptr_nonnull(strstr(sct_descent_settings_fault(&s), word));                                           \
    } while (0)
    FAULT(max_iterations, -1, "max_iterations");
    FAULT(tol_kkt, NAN, "tol_kkt");
    FAULT(tol_violation, 0, "tol_violation");
    FAULT(eps, NAN, "eps");
    FAULT(move, 0, "move");
    FAULT(gamma, 1, "gamma");
    FAULT(gamma, 0, "gamma");
    FAULT(tol_kkt, 0, "tol_kkt");
    FAULT(eps, 0, "eps");
    FAULT(memory, 0, "memory");
    FAULT(memory, SCT_DESCENT_MEMORY + 1, "32");
    FAULT(passes, 0, "passes");
    FAULT(floor, NAN, "floor");
    FAULT(per_cluster, 0, "per_cluster");
#define SOUND(field, good)                                                                                             \
    do {                                                                                                               \
        s = sct_descent_defaults();                                                                                    \
        s.field = good;                                                                                                \
        ck_assert_ptr_null(sct_descent_settings_fault(&s));                                                            \
    } while (0)
    SOUND(max_iterations, 0);
    SOUND(memory, 1);
    SOUND(memory, SCT_DESCENT_MEMORY);
    SOUND(passes, 1);
    SOUND(per_cluster, 1);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("descent");
    TCase *published = tcase_create("published"), *sizing_like = tcase_create("sizing"), *edges = tcase_create("edges");
    tcase_add_loop_test(published, derivatives_of_the_published_problems_agree_with_differences, 0, N_NLP_PROBLEMS);
    tcase_add_loop_test(published, published_problems_are_solved_from_gradients_alone, 0, N_NLP_PROBLEMS);
    tcase_add_loop_test(published, published_problems_are_solved_with_exact_curvature, 0, N_NLP_PROBLEMS);
    tcase_add_loop_test(published, the_potential_set_does_not_change_the_solution, 0, N_NLP_PROBLEMS);
    tcase_add_test(published, the_published_form_solves_well_scaled_problems);
    tcase_add_test(published, without_constraints_the_plain_step_is_steepest_descent);
    tcase_add_test(published, the_plain_setting_repeats_the_published_iteration);
    tcase_add_test(sizing_like, a_sizing_problem_converges_in_ten_values_from_every_start);
    tcase_add_test(sizing_like, a_cluster_cap_leaves_the_solution_as_it_is);
    tcase_add_test(sizing_like, a_cluster_gives_only_its_most_violated_constraints);
    tcase_add_test(sizing_like, without_curvature_the_model_takes_updates_and_converges);
    tcase_add_test(edges, infeasible_problems_are_reported_with_their_least_violation);
    tcase_add_test(edges, an_infeasible_sizing_problem_is_reported_within_25_values);
    tcase_add_test(edges, where_the_value_fails_the_step_is_halved);
    tcase_add_test(edges, a_failure_at_the_start_or_without_remedy_ends_the_run);
    tcase_add_test(edges, an_observer_sees_every_point_and_can_stop_the_run);
    tcase_add_test(edges, with_no_iterations_the_start_is_only_evaluated);
    tcase_add_test(edges, the_iteration_limit_ends_a_run_as_not_converged);
    tcase_add_test(edges, no_step_is_longer_than_the_move_limit);
    tcase_add_test(edges, a_workspace_gives_the_same_run_again);
    tcase_add_test(edges, settings_out_of_range_are_named);
    suite_add_tcase(suite, published);
    suite_add_tcase(suite, sizing_like);
    suite_add_tcase(suite, edges);
    return run_suite(suite);
}

/* Constrained steepest descent: one QP (or a few) per point, then a rough line search. */
#include "numerics/descent.h"
#include "numerics/dense.h"
#include "numerics/reduced_qp.h"
#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

enum {
    MOST_HALVINGS = 12,
    MOST_SMALL_STEPS = 3, /* in a row: the search has stalled */
    GUESS_FROM = 200      /* variables: the QP guesses that the bounds of the last one are reached again */
};
static const double SMALL_STEP = 1e-10;  /* of max(1, |x_i|) */
static const double SMALL_PASS = 1e-9;   /* the next pass would not change the direction */
static const double AT_BOUND = 1e-10;    /* of max(1, |x_i|): rounding of x + d */
static const double PHI_ROUNDING = 1e-9; /* of |f|: Phi need not fall by less than this; the published form asks more */
static const double PHI_ROUNDING_PLAIN = 1e-14;
static const double MOVE_FACTOR = 4; /* the move limit is move * ln(factor) / ln(MOVE_FACTOR) */
static const double LEAST_FACTOR = 1.05;
static const double FIRST_PENALTY = 10, MOST_PENALTY = 1e4; /* of the size of f: price of the elastic slack */
static const double EXCESSIVE = 1e8;                        /* multipliers above this are cut off by the slack, too */

struct sct_descent {
    int n, m, m_eq;
    const sct_nlp *nlp; /* of the run in hand */
    const sct_descent_settings *set;

    sct_reduced_qp *qp;
    signed char *side; /* n + 1: bounds that the last QP ended at, where they are guessed */
    double *block;     /* owns all doubles below but `rows` */
    double *rows;      /* gradients of the constraints in W, `stride` apart */
    int stride, n_W;
    int *W, *curved, *best; /* the potential set, ascending; scratch for curvature and for clusters */
    bool *in_W, *ever;      /* of every constraint; ever: had a positive multiplier */

    double *g, *df;                  /* at x */
    double *y, *g_y;                 /* trial point */
    double *x_least;                 /* the least violated point */
    double *d, *e, *h, *D, *D_0, *a; /* direction, next direction, model gradient and Hessian, linear term of a QP */
    double *b, *lo, *hi;             /* right-hand sides and step box */
    double *mu, *mu_W, *mu_box;      /* multipliers of all constraints, of W, of the step box */
    double *mu_next, *mu_box_next;   /* of the QP in hand */
    double *G, *C, *S, *M, *lambda,
        *work;          /* QP matrix, curvature beyond D, Lagrangian Hessian, scaled, its eigenvalues */
    double *B, *dL, *s; /* updated Hessian, gradient of the Lagrangian, last step */

    double f, V, R, kkt, factor; /* at x; factor: of the move limit */
    double f_model, V_model;     /* what the QP expects at x + d */
    double f_y, V_y;
    int worst, worst_y, values, qp_iterations;
    bool has_mu, has_step, has_B, is_elastic; /* s is a step that led here; B is in use; the last QP was elastic */
    double past_f[SCT_DESCENT_MEMORY], past_V[SCT_DESCENT_MEMORY];
    int n_past;
};

sct_descent_settings sct_descent_defaults(void)
{
    return (sct_descent_settings){.max_iterations = 100,
                                  .tol_kkt = 1e-6,
                                  .tol_violation = 1e-6,
                                  .eps = 0.6,
                                  .move = INFINITY,
                                  .gamma = 0.01,
                                  .memory = 5,
                                  .passes = 2,
                                  .floor = 0.05,
                                  .per_cluster = 4};
}

const char *sct_descent_settings_fault(const sct_descent_settings *settings)
{
    if (settings->max_iterations < 0) return "max_iterations must be at least 0";
    if (!(settings->tol_kkt > 0)) return "tol_kkt must be greater than 0";
    if (!(settings->tol_violation > 0)) return "tol_violation must be greater than 0";
    if (!(settings->eps > 0)) return "eps must be greater than 0";
    if (!(settings->move > 0)) return "move must be greater than 0";
    if (!(settings->gamma > 0 && settings->gamma < 1)) return "gamma must be between 0 and 1";
    if (settings->memory < 1 || settings->memory > SCT_DESCENT_MEMORY) return "memory must be from 1 to 32";
    if (settings->passes < 1) return "passes must be at least 1";
    if (!(settings->floor > 0 && settings->floor < INFINITY)) return "floor must be greater than 0";
    if (settings->per_cluster < 1) return "per_cluster must be at least 1";
    return NULL;
}

/* ---- workspace ------------------------------------------------------------------------------------------------- */

/* Cuts `count` doubles off the block; with block NULL only the sum grows. */
static double *cut(double *block, size_t *used, size_t count)
{
    double *at = block == NULL ? NULL : block + *used;
    *used += count;
    return at;
}

static size_t lay_out(sct_descent *w, double *block)
{
    const size_t n = (size_t)w->n, m = (size_t)w->m, all = m + (size_t)w->m_eq;
    size_t used = 0;
    double **const of_n[] = {&w->df, &w->y, &w->x_least, &w->h, &w->D, &w->D_0, &w->lambda, &w->dL, &w->s};
    double **const of_n_1[] = {&w->d, &w->e, &w->a, &w->lo, &w->hi, &w->mu_box, &w->mu_box_next};
    double **const of_m[] = {&w->g, &w->g_y, &w->mu};
    double **const of_all[] = {&w->b, &w->mu_W, &w->mu_next};
    double **const of_n_n[] = {&w->C, &w->S, &w->M, &w->B};
    for (size_t k = 0; k < sizeof of_n / sizeof *of_n; ++k) *of_n[k] = cut(block, &used, n);
    for (size_t k = 0; k < sizeof of_n_1 / sizeof *of_n_1; ++k) *of_n_1[k] = cut(block, &used, n + 1);
    for (size_t k = 0; k < sizeof of_m / sizeof *of_m; ++k) *of_m[k] = cut(block, &used, m);
    for (size_t k = 0; k < sizeof of_all / sizeof *of_all; ++k) *of_all[k] = cut(block, &used, all);
    for (size_t k = 0; k < sizeof of_n_n / sizeof *of_n_n; ++k) *of_n_n[k] = cut(block, &used, n * n);
    w->G = cut(block, &used, (n + 1) * (n + 1));
    w->work = cut(block, &used, n * (n + 2));
    return used;
}

/* Square matrices here and in the QP; gradients of the potential set, in the QP once more; vectors of all. */
double sct_descent_bytes(double n, double m, double at_once)
{
    enum { SQUARES = 9, OF_ALL = 8 };
    return (double)sizeof(double) * (SQUARES * n * n + 2 * at_once * n + OF_ALL * m);
}

sct_descent *sct_descent_new(const sct_nlp *nlp)
{
    const size_t n = (size_t)nlp->n, m = (size_t)nlp->m, all = m + (size_t)nlp->m_eq;
    const size_t most = SIZE_MAX / sizeof(double) / 8;
    if (n + 2 > most / (n + 2) || all + 1 > most / (n + 1)) return NULL;
    sct_descent *w = calloc(1, sizeof *w);
    if (w == NULL) return NULL;
    w->n = nlp->n;
    w->m = nlp->m;
    w->m_eq = nlp->m_eq;
    w->block = malloc(lay_out(w, NULL) * sizeof(double));
    w->rows = malloc((all * (n + 1) + 1) * sizeof(double)); /* only what the potential sets need is ever touched */
    w->W = malloc((m + 1) * sizeof *w->W);
    w->curved = malloc((m + 1) * sizeof *w->curved);
    w->best = malloc(((size_t)nlp->n_clusters + 1) * sizeof *w->best);
    w->in_W = malloc((m + 1) * sizeof *w->in_W);
    w->ever = malloc((m + 1) * sizeof *w->ever);
    w->qp = sct_reduced_qp_new(nlp->n + 1, nlp->m + nlp->m_eq);
    w->side = calloc(n + 1, sizeof *w->side);
    if (!w->side || !w->block || !w->rows || !w->W || !w->curved || !w->best || !w->in_W || !w->ever || !w->qp) {
        sct_descent_free(w);
        return NULL;
    }
    lay_out(w, w->block);
    return w;
}

void sct_descent_free(sct_descent *w)
{
    if (w == NULL) return;
    sct_reduced_qp_free(w->qp);
    free(w->side);
    free(w->block);
    free(w->rows);
    free(w->W);
    free(w->curved);
    free(w->best);
    free(w->in_W);
    free(w->ever);
    free(w);
}

/* ---- the problem at a point ------------------------------------------------------------------------------------ */

static double lower(const sct_descent *w, int i)
{
    return w->nlp->lower == NULL ? -INFINITY : w->nlp->lower[i];
}

static double upper(const sct_descent *w, int i)
{
    return w->nlp->upper == NULL ? INFINITY : w->nlp->upper[i];
}

static double scale(const sct_descent *w)
{
    return w->nlp->f_scale > 0 ? w->nlp->f_scale : fmax(fabs(w->f), DBL_MIN);
}

/* Counted. Values that are not finite are refused like a failed call. */
static sct_status evaluate(sct_descent *w, const double x[], double g[], double *f, double *V, int *worst)
{
    ++w->values;
    const sct_status status = w->nlp->value(w->nlp->user, x, f, g);
    if (status != SCT_OK) return status;
    if (!isfinite(*f)) return SCT_BAD_INPUT;
    *V = 0;
    *worst = -1;
    for (int j = 0; j < w->m; ++j) {
        const double violation = j < w->m_eq ? fabs(g[j]) : g[j];
        if (!(violation <= DBL_MAX)) return SCT_BAD_INPUT;
        if (*worst < 0 || violation > (*worst < w->m_eq ? fabs(g[*worst]) : g[*worst])) *worst = j;
        *V = fmax(*V, violation);
    }
    return SCT_OK;
}

/* Of each cluster the per_cluster most violated constraints that are in_W stay in it, and all that were ever active. */
static void thin_out(sct_descent *w)
{
    const int *cluster = w->nlp->cluster;
    int *best = w->best;
    for (int j = w->m_eq; j < w->m; ++j) {
        if (cluster[j] >= 0 && w->in_W[j]) w->in_W[j] = w->ever[j];
    }
    for (int k = 0; k < w->set->per_cluster; ++k) { /* the next most violated of every cluster at once */
        bool is_any = false;
        for (int c = 0; c < w->nlp->n_clusters; ++c) best[c] = -1;
        for (int j = w->m_eq; j < w->m; ++j) {
            const int c = cluster[j];
            if (c < 0 || w->in_W[j] || w->g[j] < -w->set->eps) continue;
            if (best[c] < 0 || w->g[j] > w->g[best[c]]) best[c] = j;
        }
        for (int c = 0; c < w->nlp->n_clusters; ++c) {
            if (best[c] < 0) continue;
            w->in_W[best[c]] = true;
            is_any = true;
        }
        if (!is_any) break;
    }
}

/* The potential set. Without second derivatives the constraints with multipliers stay in it: the update of the metric
 * needs their gradients at both ends of a step. */
static void choose_rows(sct_descent *w)
{
    const bool keeps_active = !w->set->plain && w->nlp->curvature == NULL;
    for (int j = 0; j < w->m; ++j) w->in_W[j] = j < w->m_eq || w->g[j] >= -w->set->eps;
    if (w->nlp->cluster != NULL) thin_out(w);
    w->n_W = 0;
    for (int j = 0; j < w->m; ++j) {
        if (keeps_active && w->has_mu && w->mu[j] > 0) w->in_W[j] = true;
        if (w->in_W[j]) w->W[w->n_W++] = j;
    }
}

static sct_status take_gradients(sct_descent *w, const double x[])
{
    choose_rows(w);
    w->stride = w->n;
    return w->nlp->gradient(w->nlp->user, x, w->n_W, w->W, w->df, w->rows);
}

/* ---- metric ---------------------------------------------------------------------------------------------------- */

static bool has_model(const sct_descent *w)
{
    return w->nlp->objective != NULL && !w->set->plain;
}

/* The objective's model at x + d: gradient h, diagonal D. */
static void model(sct_descent *w, const double x[], const double d[], double h[], double D[])
{
    if (has_model(w)) {
        w->nlp->objective(w->nlp->user, x, d, h, D);
        return;
    }
    memcpy(h, w->df, (size_t)w->n * sizeof *h);
    for (int i = 0; i < w->n; ++i) D[i] = 1;
}

/* M = D_0^-1/2 S D_0^-1/2 - shift I */
static void scale_hessian(sct_descent *w, double shift)
{
    const size_t N = (size_t)w->n;
    for (size_t i = 0; i < N; ++i) w->work[i] = sqrt(w->D_0[i]);
    for (size_t i = 0; i < N; ++i) {
        for (size_t k = 0; k < N; ++k) w->M[i * N + k] = w->S[i * N + k] / (w->work[i] * w->work[k]);
        w->M[i * N + i] -= shift;
    }
}

/* C = S - diag(D_0), with the eigenvalues of D_0^-1/2 S D_0^-1/2 raised to the floor. A Cholesky factor tells cheaply
 * when there is nothing to raise. */
static void set_curvature(sct_descent *w)
{
    const int n = w->n;
    const size_t N = (size_t)n;
    memcpy(w->C, w->S, N * N * sizeof *w->C);
    scale_hessian(w, w->set->floor);
    if (!sct_cholesky(n, w->M)) {
        scale_hessian(w, 0);
        if (!sct_eigen(n, w->M, w->lambda, w->work)) { /* not finite: do without */
            memset(w->C, 0, N * N * sizeof *w->C);
            return;
        }
        for (int k = 0; k < n; ++k) {
            const double rise = w->set->floor - w->lambda[k];
            double *q = w->M + (size_t)k * N;
            if (!(rise > 0)) continue;
            for (int i = 0; i < n; ++i) q[i] *= sqrt(w->D_0[i]);
            for (int i = 0; i < n; ++i) sct_axpy(n, rise * q[i], q, w->C + (size_t)i * N);
        }
    }
    for (size_t i = 0; i < N; ++i) w->C[i * N + i] -= w->D_0[i];
}

/* C from the curvature callback: the Hessian of the Lagrangian with the multipliers of the last point. */
static sct_status exact_curvature(sct_descent *w, const double x[])
{
    const size_t N = (size_t)w->n;
    int n_rows = 0;
    for (int k = 0; k < w->n_W; ++k) {
        const int j = w->W[k];
        if (!w->has_mu || w->mu[j] == 0) continue;
        w->curved[n_rows] = j;
        w->mu_next[n_rows++] = w->mu[j];
    }
    if (n_rows == 0 && has_model(w)) {
        memset(w->C, 0, N * N * sizeof *w->C);
        return SCT_OK;
    }
    const sct_status status = w->nlp->curvature(w->nlp->user, x, n_rows, w->curved, w->mu_next, w->S);
    if (status != SCT_OK) return status;
    if (has_model(w)) {
        for (size_t i = 0; i < N; ++i) w->S[i * N + i] += w->D_0[i];
    }
    set_curvature(w);
    return SCT_OK;
}

/* Damped update (Powell, A fast algorithm for nonlinearly constrained optimization calculations, 1978) of B, the
 * Hessian of the Lagrangian, over the last step. y overwrites dL. */
static void update(sct_descent *w)
{
    const int n = w->n;
    const size_t N = (size_t)n;
    double *y = w->dL, *Bs = w->work;
    for (int i = 0; i < n; ++i) y[i] = w->df[i] - y[i];
    for (int k = 0; k < w->n_W; ++k) {
        const double mu = w->mu[w->W[k]];
        if (mu != 0) sct_axpy(n, mu, w->rows + (size_t)k * (size_t)w->stride, y);
    }
    const double sy = sct_dot(n, w->s, y);
    if (!w->has_B) { /* start from the metric; the identity first gets the size that the step shows */
        const double size = !has_model(w) && sy > 0 ? sct_dot(n, y, y) / sy : 1;
        memset(w->B, 0, N * N * sizeof *w->B);
        for (size_t i = 0; i < N; ++i) w->B[i * N + i] = w->D_0[i] * size;
        w->has_B = true;
    }
    for (int i = 0; i < n; ++i) Bs[i] = sct_dot(n, w->B + (size_t)i * N, w->s);
    const double sBs = sct_dot(n, w->s, Bs);
    if (!(sBs > 0)) return;
    const double theta = sy >= 0.2 * sBs ? 1 : 0.8 * sBs / (sBs - sy);
    for (int i = 0; i < n; ++i) y[i] = theta * y[i] + (1 - theta) * Bs[i];
    const double sr = sct_dot(n, w->s, y);
    if (!(sr > 0)) return;
    for (int i = 0; i < n; ++i) {
        double *row = w->B + (size_t)i * N;
        for (int k = 0; k < n; ++k) row[k] += y[i] * y[k] / sr - Bs[i] * Bs[k] / sBs;
    }
}

/* h, D_0 and C at x. */
static sct_status take_metric(sct_descent *w, const double x[])
{
    const size_t N = (size_t)w->n;
    memset(w->d, 0, N * sizeof *w->d);
    model(w, x, w->d, w->h, w->D_0);
    memset(w->C, 0, N * N * sizeof *w->C);
    if (w->set->plain) return SCT_OK;
    if (w->nlp->curvature != NULL) return exact_curvature(w, x);
    if (w->has_step) update(w);
    if (w->has_B) {
        memcpy(w->C, w->B, N * N * sizeof *w->C);
        for (size_t i = 0; i < N; ++i) w->C[i * N + i] -= w->D_0[i];
    }
    return SCT_OK;
}

/* ---- direction ------------------------------------------------------------------------------------------------- */

/* The step box: bounds and move limit. */
static void set_box(sct_descent *w, const double x[])
{
    const double limit = w->set->move * log(w->factor) / log(MOVE_FACTOR);
    for (int i = 0; i < w->n; ++i) {
        w->lo[i] = fmax(lower(w, i) - x[i], -limit);
        w->hi[i] = fmin(upper(w, i) - x[i], limit);
    }
}

/* G = C + diag(D) with rows `size` apart, a = h - D d: the QP in the whole step. */
static void set_quadratic(sct_descent *w, size_t size)
{
    const size_t N = (size_t)w->n;
    for (size_t i = 0; i < N; ++i) {
        memcpy(w->G + i * size, w->C + i * N, N * sizeof *w->G);
        w->G[i * size + i] += w->D[i];
        w->a[i] = w->h[i] - w->D[i] * w->d[i];
    }
}

/* e, mu_next and mu_box_next get the solution. */
static sct_status solve(sct_descent *w, const sct_qp_data *data)
{
    if (w->n < GUESS_FROM) memset(w->side, 0, (size_t)w->n + 1);
    const sct_status status = sct_reduced_qp_solve(w->qp, data, w->side, w->e, w->mu_next, w->mu_box_next);
    w->qp_iterations += sct_reduced_qp_iterations(w->qp);
    return status;
}

/* The QP over d. */
static sct_status solve_qp(sct_descent *w)
{
    const sct_qp_data data = {.n = w->n,
                              .m = w->n_W,
                              .m_eq = w->m_eq,
                              .stride = w->stride,
                              .G = w->G,
                              .a = w->a,
                              .rows = w->rows,
                              .b = w->b,
                              .lower = w->lo,
                              .upper = w->hi};
    set_quadratic(w, (size_t)w->n);
    return solve(w, &data);
}

/* What multipliers are compared with: f, or how much f changes with x. */
static double objective_size(const sct_descent *w)
{
    double F = 0;
    for (int i = 0; i < w->n; ++i) F += fabs(w->df[i]);
    return fmax(F, scale(w));
}

/* The QP with one slack s >= 0 in every row, at the price R_e s + 0.005 F s^2: always feasible. An equality becomes
 * two inequalities. The rows are spread in place to make room for the slack's column. */
static sct_status solve_elastic(sct_descent *w)
{
    const int n = w->n, n_W = w->n_W, m_eq = w->m_eq;
    const size_t N = (size_t)n, size = N + 1;
    for (int k = n_W - 1; k >= 0; --k) {
        double *row = w->rows + (size_t)k * size;
        memmove(row, w->rows + (size_t)k * N, N * sizeof *row);
        row[n] = -1;
    }
    for (int k = 0; k < m_eq; ++k) {
        double *row = w->rows + (size_t)(n_W + k) * size;
        for (int i = 0; i < n; ++i) row[i] = -w->rows[(size_t)k * size + (size_t)i];
        row[n] = -1;
        w->b[n_W + k] = -w->b[k];
    }
    w->stride = n + 1;
    w->is_elastic = true;

    const double F = objective_size(w);
    const double R_e = fmax(w->R, fmin(fmax(2 * w->R, FIRST_PENALTY * F), MOST_PENALTY * F));
    w->R = R_e;

    set_quadratic(w, size);
    for (size_t i = 0; i < N; ++i) w->G[i * size + N] = w->G[N * size + i] = 0;
    w->G[N * size + N] = 0.01 * F;
    w->a[n] = R_e;
    w->lo[n] = 0;
    w->hi[n] = INFINITY;
    w->side[n] = 0; /* the slack will be needed */
    const sct_qp_data data = {.n = n + 1,
                              .m = n_W + m_eq,
                              .stride = n + 1,
                              .G = w->G,
                              .a = w->a,
                              .rows = w->rows,
                              .b = w->b,
                              .lower = w->lo,
                              .upper = w->hi};
    const sct_status status = solve(w, &data);
    for (int k = 0; k < m_eq && status == SCT_OK; ++k) w->mu_next[k] -= w->mu_next[n_W + k];
    return status;
}

/* e becomes d; the largest change. */
static double keep_solution(sct_descent *w)
{
    double change = 0;
    for (int i = 0; i < w->n; ++i) {
        change = fmax(change, fabs(w->e[i] - w->d[i]));
        w->d[i] = w->e[i];
        w->mu_box[i] = w->mu_box_next[i];
    }
    memcpy(w->mu_W, w->mu_next, (size_t)w->n_W * sizeof *w->mu_W);
    return change;
}

/* The multipliers of W to their constraints; R and `ever` follow. */
static void spread_multipliers(sct_descent *w)
{
    double sum = 0;
    memset(w->mu, 0, (size_t)w->m * sizeof *w->mu);
    for (int k = 0; k < w->n_W; ++k) {
        w->mu[w->W[k]] = w->mu_W[k];
        if (w->mu_W[k] > 0) w->ever[w->W[k]] = true;
        sum += fabs(w->mu_W[k]);
    }
    w->R = fmax(w->R, sum);
    w->has_mu = true;
}

/* max(0, violation of W) after the step d, to first order */
static double linear_violation(const sct_descent *w)
{
    double V = 0;
    for (int k = 0; k < w->n_W; ++k) {
        const double g = sct_dot(w->n, w->rows + (size_t)k * (size_t)w->stride, w->d) - w->b[k];
        V = fmax(V, w->W[k] < w->m_eq ? fabs(g) : g);
    }
    return V;
}

/* f(x + d) as the model has it: to first order, or the integral of its gradient by the two-point Hermite rule, exact
 * to the fourth power of d. */
static double model_value(sct_descent *w, const double x[])
{
    if (!has_model(w)) return w->f + sct_dot(w->n, w->df, w->d);
    double f = w->f;
    model(w, x, w->d, w->h, w->D);
    for (int i = 0; i < w->n; ++i) { f += w->d[i] * ((w->df[i] + w->h[i]) / 2 + w->d[i] * (w->D_0[i] - w->D[i]) / 12); }
    return f;
}

/* The linear constraints can be met, but at such a price that it can hardly be done in truth. */
static bool is_excessive(const sct_descent *w)
{
    double sum = 0;
    for (int k = 0; k < w->n_W; ++k) sum += fabs(w->mu_next[k]);
    return sum > EXCESSIVE * objective_size(w);
}

/* d and its multipliers. A second pass, with the objective renewed at x + d, may find no convex QP: then the first
 * answer stays. */
static sct_status take_direction(sct_descent *w, const double x[])
{
    const int passes = has_model(w) ? w->set->passes : 1;
    set_box(w, x);
    for (int k = 0; k < w->n_W; ++k) w->b[k] = -w->g[w->W[k]];
    memcpy(w->D, w->D_0, (size_t)w->n * sizeof *w->D);
    w->is_elastic = false;
    for (int pass = 0; pass < passes && !w->is_elastic; ++pass) {
        if (pass > 0) model(w, x, w->d, w->h, w->D);
        sct_status status = solve_qp(w);
        if (status != SCT_OK && pass > 0) break;
        const bool is_hopeless = status == SCT_OK ? is_excessive(w) : status != SCT_NOT_CONVEX;
        if (is_hopeless && pass == 0) status = solve_elastic(w);
        if (status != SCT_OK) return status;
        if (keep_solution(w) < SMALL_PASS) break;
    }
    spread_multipliers(w);
    w->f_model = model_value(w, x);
    w->V_model = linear_violation(w);
    return SCT_OK;
}

/* dL = the gradient of the Lagrangian; the KKT residual relative to the scale of f. */
static void take_kkt(sct_descent *w, const double x[])
{
    double complementarity = 0, stationarity = 0;
    memcpy(w->dL, w->df, (size_t)w->n * sizeof *w->dL);
    for (int k = 0; k < w->n_W; ++k) {
        if (w->mu_W[k] == 0) continue;
        complementarity += fabs(w->mu_W[k] * w->g[w->W[k]]);
        sct_axpy(w->n, w->mu_W[k], w->rows + (size_t)k * (size_t)w->stride, w->dL);
    }
    for (int i = 0; i < w->n; ++i) {
        const double near = AT_BOUND * fmax(1, fabs(x[i]));
        if (w->dL[i] > 0 && x[i] - lower(w, i) <= near) continue;
        if (w->dL[i] < 0 && upper(w, i) - x[i] <= near) continue;
        stationarity = fmax(stationarity, fabs(w->dL[i]));
    }
    w->kkt = fmax(complementarity, stationarity) / scale(w);
}

/* ---- line search ----------------------------------------------------------------------------------------------- */

/* What the full step should bring, >= 0: the fall of Phi that the QP expects; |d|^2 in the published form. */
static double expected_decrease(const sct_descent *w)
{
    if (w->set->plain) return sct_dot(w->n, w->d, w->d);
    return fmax(0, w->f - w->f_model + w->R * (w->V - w->V_model));
}

/* The largest Phi of the last points, with the present R. */
static double reference(const sct_descent *w)
{
    const int memory = w->set->plain ? 1 : w->set->memory;
    double largest = w->f + w->R * w->V;
    for (int k = 1; k < memory && k <= w->n_past; ++k) {
        const int at = (w->n_past - k) % SCT_DESCENT_MEMORY;
        largest = fmax(largest, w->past_f[at] + w->R * w->past_V[at]);
    }
    return largest;
}

/* Halves the step until Phi falls enough. *t: the step taken; 0: none was good, and the latest value is not at x. */
static sct_status search(sct_descent *w, const double x[], double *t)
{
    const double decrease = expected_decrease(w), Phi = reference(w);
    const double rounding = (w->set->plain ? PHI_ROUNDING_PLAIN : PHI_ROUNDING) * fabs(w->f);
    *t = 1;
    for (int halvings = 0; halvings <= MOST_HALVINGS; ++halvings, *t /= 2) {
        for (int i = 0; i < w->n; ++i) w->y[i] = fmin(fmax(x[i] + *t * w->d[i], lower(w, i)), upper(w, i));
        const sct_status status = evaluate(w, w->y, w->g_y, &w->f_y, &w->V_y, &w->worst_y);
        if (status == SCT_NO_MEMORY || status == SCT_INTERRUPTED) return status;
        if (status == SCT_OK && w->f_y + w->R * w->V_y <= Phi - w->set->gamma * *t * decrease + rounding) {
            return SCT_OK;
        }
    }
    *t = 0;
    return SCT_OK;
}

/* y becomes x; the largest change, relative to max(1, |x_i|). */
static double accept(sct_descent *w, double x[], double t)
{
    w->past_f[w->n_past % SCT_DESCENT_MEMORY] = w->f;
    w->past_V[w->n_past % SCT_DESCENT_MEMORY] = w->V;
    ++w->n_past;
    double largest = 0;
    for (int i = 0; i < w->n; ++i) {
        w->s[i] = w->y[i] - x[i];
        largest = fmax(largest, fabs(w->s[i]) / fmax(1, fabs(x[i])));
        x[i] = w->y[i];
    }
    double *g = w->g;
    w->g = w->g_y;
    w->g_y = g;
    w->f = w->f_y;
    w->V = w->V_y;
    w->worst = w->worst_y;
    w->has_step = largest > 0;
    w->factor = t < 1 ? fmax(LEAST_FACTOR, 1 + (w->factor - 1) / 2) : fmin(MOVE_FACTOR, 1 + 1.5 * (w->factor - 1));
    return largest;
}

/* ---- the run --------------------------------------------------------------------------------------------------- */

static sct_status begin(sct_descent *w, const sct_nlp *nlp, const sct_descent_settings *settings, double x[])
{
    w->nlp = nlp;
    w->set = settings;
    w->R = 0;
    w->kkt = NAN;
    w->factor = MOVE_FACTOR;
    w->values = w->qp_iterations = w->n_past = 0;
    w->has_mu = w->has_step = w->has_B = w->is_elastic = false;
    w->f = w->V = NAN;
    w->worst = -1;
    memset(w->side, 0, (size_t)w->n + 1);
    memset(w->mu, 0, (size_t)w->m * sizeof *w->mu);
    memset(w->ever, 0, (size_t)w->m * sizeof *w->ever);
    memset(w->mu_box, 0, (size_t)w->n * sizeof *w->mu_box);
    for (int i = 0; i < w->n; ++i) x[i] = fmin(fmax(x[i], lower(w, i)), upper(w, i));
    return evaluate(w, x, w->g, &w->f, &w->V, &w->worst);
}

/* Gradients, metric, direction and KKT residual at x. */
static sct_status look_around(sct_descent *w, const double x[])
{
    sct_status status = take_gradients(w, x);
    if (status == SCT_OK) status = take_metric(w, x);
    if (status == SCT_OK) status = take_direction(w, x);
    if (status == SCT_OK) take_kkt(w, x);
    return status;
}

/* One search from x to its end: SCT_OK only when converged. */
static sct_status iterate(sct_descent *w, double x[], int *iterations)
{
    const sct_descent_settings *set = w->set;
    double t = 0, V_least = INFINITY;
    int small_steps = 0;
    for (;; ++*iterations) {
        sct_status status = look_around(w, x);
        if (status != SCT_OK) return status;
        if (w->V < V_least) {
            V_least = w->V;
            memcpy(w->x_least, x, (size_t)w->n * sizeof *x);
        }
        const sct_descent_step step = {*iterations, w->values, w->f, w->V, w->kkt, t};
        const bool goes_on = set->observer == NULL || set->observer(&step, set->user);
        if (w->kkt <= set->tol_kkt && w->V <= set->tol_violation) return SCT_OK;
        if (!goes_on) return SCT_INTERRUPTED;
        if (!isfinite(w->kkt) || *iterations >= set->max_iterations) return SCT_NOT_CONVERGED;
        if (small_steps >= MOST_SMALL_STEPS) break;

        status = search(w, x, &t);
        if (status != SCT_OK) return status;
        if (t > 0) {
            small_steps = accept(w, x, t) < SMALL_STEP ? small_steps + 1 : 0;
            continue;
        }
        status = evaluate(w, x, w->g, &w->f, &w->V, &w->worst);
        if (status != SCT_OK) return status;
        if (!w->has_B) break;
        w->has_B = w->has_step = false; /* once more with the metric alone */
    }
    if (!w->is_elastic || !(w->V > set->tol_violation)) return SCT_NOT_CONVERGED;
    if (w->V > V_least) {
        memcpy(x, w->x_least, (size_t)w->n * sizeof *x);
        w->kkt = NAN;
        const sct_status status = evaluate(w, x, w->g, &w->f, &w->V, &w->worst);
        if (status != SCT_OK) return status;
    }
    return SCT_INFEASIBLE;
}

sct_descent_info sct_descent_run(sct_descent *descent, const sct_nlp *nlp, const sct_descent_settings *settings,
                                 double x[], double mu[], double mu_bound[])
{
    sct_descent *w = descent;
    sct_descent_info info = {.iterations = 0};
    info.status = begin(w, nlp, settings, x);
    if (info.status == SCT_OK) {
        info.status = settings->max_iterations == 0 ? SCT_NOT_CONVERGED : iterate(w, x, &info.iterations);
    }
    info.f = w->f;
    info.violation = w->V;
    info.kkt = w->kkt;
    info.values = w->values;
    info.qp_iterations = w->qp_iterations;
    info.worst = w->worst;
    if (mu != NULL) memcpy(mu, w->mu, (size_t)w->m * sizeof *mu);
    for (int i = 0; i < w->n && mu_bound != NULL; ++i) { /* the move limit is no bound of the problem */
        const bool is_bound = w->mu_box[i] < 0 ? w->lo[i] <= lower(w, i) - x[i] : w->hi[i] >= upper(w, i) - x[i];
        mu_bound[i] = w->mu_box[i] != 0 && is_bound ? w->mu_box[i] : 0;
    }
    return info;
}

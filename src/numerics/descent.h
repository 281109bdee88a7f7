/**
 * Constrained steepest descent for smooth nonlinear programs.
 *
 *     minimise f(x)   subject to   g_j(x) = 0 (j < m_eq),   g_j(x) <= 0 (m_eq <= j < m),   lower <= x <= upper
 *
 * At a point a QP over the potential set (constraints with g_j >= -eps) gives a direction d and multipliers mu; a rough
 * line search lowers Pshenichny's descent function Phi = f + R V, V = max(0, g_j, |g_eq|), R >= sum |mu|.
 * With no constraint and the identity as metric the step is steepest descent; `plain` settings give the published
 * method: identity metric, monotone search. (Pshenichny and Danilin, Numerical Methods in Extremal Problems, 1978;
 * Arora, Introduction to Optimum Design, chapter on constrained steepest descent.)
 * What makes it fast where the problem offers more: an exact model of a cheap objective, the exact curvature of the
 * constraints, a nonmonotone test. Knows nothing of structures.
 */
#ifndef SCT_NUMERICS_DESCENT_H
#define SCT_NUMERICS_DESCENT_H

#include "scantling.h"

/* The problem: sizes, bounds and callbacks. All pointers are borrowed. x has n entries everywhere. */
typedef struct sct_nlp {
    int n, m, m_eq;
    const double *lower, *upper; /* NULL: none; entries may be infinite */
    void *user;

    /** f and all m constraints at x. Any status but SCT_OK means "x cannot be evaluated" and shortens the step
     * (SCT_NO_MEMORY, SCT_INTERRUPTED end the search). This is the costly call: it is what is counted. */
    sct_status (*value)(void *user, const double x[], double *f, double g[]);

    /** Gradient of f into df (n), of constraint rows[i] into dg + i*n, at the x of the latest value call. */
    sct_status (*gradient)(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg);

    /** Optional (NULL): H (n x n, full, overwritten) = sum_i mu[i] * Hessian of constraint rows[i], at the x of the
     * latest gradient call (rows are among its rows). Without `objective` the Hessian of f is added to it: then it is
     * the Hessian of the whole Lagrangian, and n_rows may be 0. Without this callback the metric takes damped BFGS
     * updates over the steps. */
    sct_status (*curvature)(void *user, const double x[], int n_rows, const int rows[], const double mu[], double *H);

    /** Optional (NULL): for a separable objective that is cheap to evaluate: its gradient (n) and the diagonal of its
     * Hessian (n; > 0) at x + d. It becomes the metric, and the QP is solved `passes` times with the objective
     * renewed. */
    void (*objective)(void *user, const double x[], const double d[], double df[], double ddf[]);

    /** Optional (NULL): cluster[j] >= 0 puts inequality j into a cluster; of each cluster only the `per_cluster` most
     * violated constraints enter the QP (and all that ever had a positive multiplier). -1: always enters. */
    const int *cluster;
    int n_clusters;
    double f_scale; /* KKT residuals are relative to this; 0: to |f| at each point (not for an f that may end at 0) */
} sct_nlp;

/* One accepted point, for an observer. */
typedef struct sct_descent_step {
    int iteration, values; /* values: calls of `value` so far */
    double f, violation, kkt, step;
} sct_descent_step;

#define SCT_DESCENT_MEMORY 32

typedef struct sct_descent_settings {
    int max_iterations;   /* default 100, >= 0; 0: x0 is only evaluated */
    double tol_kkt;       /* default 1e-6 */
    double tol_violation; /* default 1e-6 */
    double eps;           /* potential set g >= -eps; default 0.6 */
    double move;          /* largest step of each x_i; INFINITY (default): no limit. Shrinks and grows between steps */
    double gamma;         /* Armijo constant, default 0.01 */
    int memory;           /* Phi is compared with the worst of the last `memory` points; 1: monotone; default 5,
                           * at most SCT_DESCENT_MEMORY */
    int passes;           /* QPs per point when `objective` is given; default 2 */
    double floor;         /* smallest eigenvalue of the Lagrangian Hessian relative to the metric (absolute where there
                           * is no `objective`: lower it for flat minima), default 0.05 */
    int per_cluster;      /* default 4 */
    bool plain;           /* the published form: identity metric (no curvature, no objective model, no updates), Phi
                           * falls monotonically by gamma t |d|^2; default false */
    bool (*observer)(const sct_descent_step *step, void *user); /* false: stop */
    void *user;
} sct_descent_settings;

sct_descent_settings sct_descent_defaults(void);
/** NULL when all is sound, else what is wrong, in words. */
const char *sct_descent_settings_fault(const sct_descent_settings *settings);

typedef struct sct_descent sct_descent; /* workspace */

typedef struct sct_descent_info {
    sct_status status; /* SCT_OK: converged. SCT_INFEASIBLE: no feasible point near, `violation` is the least found.
                        * SCT_NOT_CONVERGED: iteration limit or stalled. SCT_INTERRUPTED: the observer said stop.
                        * Others: from `value` at x0 (SCT_BAD_INPUT where it is not finite), from `gradient` or
                        * `curvature`; SCT_NO_MEMORY and SCT_INTERRUPTED from any `value`; SCT_NOT_CONVEX: the Hessian
                        * of `objective` is not positive. */
    double f, violation, kkt; /* at the x returned; kkt NAN where it was not computed */
    int iterations, values, qp_iterations;
    int worst; /* the constraint of the largest violation, -1 when m = 0 */
} sct_descent_info;

/** [bytes] that the workspace comes to use for n variables and m constraints, `at_once` of them in the potential set.
 */
double sct_descent_bytes(double n, double m, double at_once);
/** Workspace for problems of this size; NULL when out of memory. */
sct_descent *sct_descent_new(const sct_nlp *nlp);
void sct_descent_free(sct_descent *descent);

/**
 * Runs from x (in: start, clipped to the bounds; out: the end). The latest `value` call before it returns is at the x
 * returned. mu (m, may be NULL): multipliers, 0 for constraints outside the last potential set; mu_bound (n, may be
 * NULL): > 0 at an upper, < 0 at a lower bound.
 */
sct_descent_info sct_descent_run(sct_descent *descent, const sct_nlp *nlp, const sct_descent_settings *settings,
                                 double x[], double mu[], double mu_bound[]);
#endif

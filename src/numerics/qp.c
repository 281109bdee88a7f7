/* The dual active set method of Goldfarb and Idnani.
 *
 * Every constraint c is kept as n_c'x >= beta_c. With G = L L', J = L^-T Q satisfies J'GJ = I, and the normals N of
 * the active set satisfy J'N = [R; 0]. Row k of JT is column k of J, so that all inner loops run along rows.
 * x always minimises the objective over the active constraints, with multipliers u >= 0; each step adds a violated
 * constraint, dropping others on the way where their multipliers would turn negative.
 */
#include "numerics/qp.h"
#include "numerics/dense.h"
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

static const double TOL_VIOLATION = 1e-12; /* of |b| + |row| |x|: rounding of a slack is about n DBL_EPSILON of that */
static const double TOL_DEPENDENT =
    1e-12; /* of |J'n| + sum |r_k| |J'n_k|: the terms that cancel in a dependent normal */
static const double TOL_CONSISTENT = 1e-9; /* of |b| + |row| |x|: a dependent row so little violated is redundant */
static const double TOL_RATIO = 1e-13;     /* of max |r|: smaller entries are rounding and may not drop a constraint */

enum { INACTIVE, ACTIVE, REDUNDANT };

struct sct_qp {
    int n_most, m_most;
    int n, m;    /* of the problem in hand */
    int q, q_eq; /* active constraints; the first q_eq of them are equalities and stay */
    int iterations;
    double *block;             /* owns all doubles below */
    double *JT, *R;            /* n x n each; column j of R starts at R + j n (R holds L at first) */
    double *d, *z, *r, *u;     /* J'n, step, R^-1 d, multipliers of the active set */
    double *image;             /* |J'n| of the active set */
    double *size;              /* of the variables: lengths are measured in x_i sqrt(G_ii) */
    double *norm;              /* of the rows */
    int *active;               /* row c: c; lower bound of x_i: m + i; upper bound: m + n + i */
    signed char *sign, *state; /* of the equalities, which never leave: -1 when turned round; of every constraint */
};

sct_qp *sct_qp_new(int n, int m)
{
    const size_t N = (size_t)n, M = (size_t)m;
    if (N > 0 && N > SIZE_MAX / sizeof(double) / (2 * N + 7)) return NULL;
    sct_qp *qp = calloc(1, sizeof *qp);
    if (qp == NULL) return NULL;
    qp->n_most = n;
    qp->m_most = m;
    qp->block = malloc((2 * N * N + 6 * N + M + 1) * sizeof(double));
    qp->active = malloc((N + 1) * sizeof *qp->active);
    qp->sign = malloc(N + 1);
    qp->state = malloc(2 * N + M + 1);
    if (qp->block == NULL || qp->active == NULL || qp->sign == NULL || qp->state == NULL) {
        sct_qp_free(qp);
        return NULL;
    }
    qp->JT = qp->block;
    qp->R = qp->JT + N * N;
    qp->d = qp->R + N * N;
    qp->z = qp->d + N;
    qp->r = qp->z + N;
    qp->u = qp->r + N;
    qp->image = qp->u + N;
    qp->size = qp->image + N;
    qp->norm = qp->size + N;
    return qp;
}

void sct_qp_free(sct_qp *qp)
{
    if (qp == NULL) return;
    free(qp->block);
    free(qp->active);
    free(qp->sign);
    free(qp->state);
    free(qp);
}

int sct_qp_iterations(const sct_qp *qp)
{
    return qp->iterations;
}

/* J = L^-T, and the minimiser without constraints, x = -J J'a. */
static bool start(sct_qp *qp, const sct_qp_data *p, double x[])
{
    const int n = qp->n;
    const size_t N = (size_t)n;
    memcpy(qp->R, p->G, N * N * sizeof *qp->R);
    if (!sct_cholesky(n, qp->R)) return false;
    memset(qp->JT, 0, N * N * sizeof *qp->JT);
    memset(x, 0, N * sizeof *x);
    for (int k = 0; k < n; ++k) {
        const double *L = qp->R + (size_t)k * N;
        double *row = qp->JT + (size_t)k * N;
        for (int i = 0; i < k; ++i) sct_axpy(i + 1, -L[i], qp->JT + (size_t)i * N, row);
        for (int i = 0; i < k; ++i) row[i] /= L[k];
        row[k] = 1 / L[k];
        sct_axpy(k + 1, -sct_dot(k + 1, row, p->a), row, x);
    }
    for (int i = 0; i < n; ++i) qp->size[i] = sqrt(p->G[(size_t)i * N + (size_t)i]);
    for (int c = 0; c < qp->m; ++c) {
        const double *row = p->rows + (size_t)c * (size_t)p->stride;
        for (int i = 0; i < n; ++i) qp->z[i] = row[i] / qp->size[i];
        qp->norm[c] = sqrt(sct_dot(n, qp->z, qp->z));
    }
    memset(qp->state, INACTIVE, 2 * N + (size_t)qp->m);
    qp->q = qp->q_eq = qp->iterations = 0;
    return true;
}

static double length(const sct_qp *qp, const double x[])
{
    double sum = 0;
    for (int i = 0; i < qp->n; ++i) sum += x[i] * x[i] * qp->size[i] * qp->size[i];
    return sqrt(sum);
}

/* n_c'x - beta_c; *size: what its rounding is relative to. */
static double slack(const sct_qp *qp, const sct_qp_data *p, int c, const double x[], double x_length, double *size)
{
    if (c < qp->m) {
        *size = fabs(p->b[c]) + qp->norm[c] * x_length;
        return p->b[c] - sct_dot(qp->n, p->rows + (size_t)c * (size_t)p->stride, x);
    }
    const int i = (c - qp->m) % qp->n;
    const bool is_lower = c < qp->m + qp->n;
    const double bound = is_lower ? p->lower[i] : p->upper[i];
    *size = fabs(bound) + x_length / qp->size[i];
    return is_lower ? x[i] - bound : bound - x[i];
}

/* The inequality with the largest violation as a distance; -1 when all are kept. */
static int most_violated(const sct_qp *qp, const sct_qp_data *p, const double x[])
{
    const double x_length = length(qp, x);
    const int first_bound = qp->m, n_all = qp->m + 2 * qp->n;
    int worst = -1;
    double least = 0, size;
    for (int c = p->m_eq; c < n_all; ++c) {
        if (c == first_bound && p->lower == NULL) c += qp->n;
        if (c == first_bound + qp->n && p->upper == NULL) break;
        if (qp->state[c] != INACTIVE) continue;
        const double s = slack(qp, p, c, x, x_length, &size);
        if (!(s < -TOL_VIOLATION * size)) continue;
        double distance = s;
        if (c >= qp->m)
            distance *= qp->size[(c - qp->m) % qp->n];
        else if (qp->norm[c] > 0)
            distance /= qp->norm[c];
        if (distance < least) {
            least = distance;
            worst = c;
        }
    }
    return worst;
}

/* d = J'n_c */
static void project(sct_qp *qp, const sct_qp_data *p, int c, double sign)
{
    const int n = qp->n;
    const size_t N = (size_t)n;
    if (c < qp->m) {
        const double *row = p->rows + (size_t)c * (size_t)p->stride;
        for (int k = 0; k < n; ++k) qp->d[k] = -sign * sct_dot(n, qp->JT + (size_t)k * N, row);
    } else {
        const double entry = c < qp->m + n ? 1 : -1;
        const double *column = qp->JT + (c - qp->m) % n;
        for (int k = 0; k < n; ++k) qp->d[k] = entry * column[(size_t)k * N];
    }
}

/* Rows a and b of JT: (a, b) <- (c a + s b, c b - s a) */
static void rotate(int n, double c, double s, double a[], double b[])
{
    for (int i = 0; i < n; ++i) {
        const double t = a[i];
        a[i] = c * t + s * b[i];
        b[i] = c * b[i] - s * t;
    }
}

/* The constraint whose J'n is in d joins the active set: d[q + 1 ...] is rotated to zero. */
static void add(sct_qp *qp, int c, double sign, double u, double image)
{
    const int n = qp->n, q = qp->q;
    const size_t N = (size_t)n;
    double *d = qp->d;
    for (int k = q + 1; k < n; ++k) {
        if (d[k] == 0) continue;
        const double h = hypot(d[q], d[k]);
        rotate(n, d[q] / h, d[k] / h, qp->JT + (size_t)q * N, qp->JT + (size_t)k * N);
        d[q] = h;
    }
    memcpy(qp->R + (size_t)q * N, d, ((size_t)q + 1) * sizeof *d);
    qp->active[q] = c;
    qp->sign[q] = (signed char)sign;
    qp->u[q] = u;
    qp->image[q] = image;
    qp->state[c] = ACTIVE;
    ++qp->q;
}

/* The constraint at position l leaves: its column of R goes, and the Hessenberg rest is made triangular again. */
static void drop(sct_qp *qp, int l)
{
    const int n = qp->n, q = --qp->q;
    const size_t N = (size_t)n;
    qp->state[qp->active[l]] = INACTIVE;
    for (int k = l; k < q; ++k) {
        qp->active[k] = qp->active[k + 1];
        qp->u[k] = qp->u[k + 1];
        qp->image[k] = qp->image[k + 1];
        memcpy(qp->R + (size_t)k * N, qp->R + (size_t)(k + 1) * N, ((size_t)k + 2) * sizeof *qp->R);
    }
    for (int k = l; k < q; ++k) {
        double *column = qp->R + (size_t)k * N;
        if (column[k + 1] == 0) continue;
        const double h = hypot(column[k], column[k + 1]), c = column[k] / h, s = column[k + 1] / h;
        for (int j = k; j < q; ++j) rotate(1, c, s, qp->R + (size_t)j * N + k, qp->R + (size_t)j * N + k + 1);
        rotate(n, c, s, qp->JT + (size_t)k * N, qp->JT + (size_t)(k + 1) * N);
    }
}

/* r = R^-1 d (first q entries): how the active multipliers fall per unit of the new one. */
static void solve_R(sct_qp *qp)
{
    memcpy(qp->r, qp->d, (size_t)qp->q * sizeof *qp->r);
    for (int j = qp->q - 1; j >= 0; --j) {
        const double *column = qp->R + (size_t)j * (size_t)qp->n;
        qp->r[j] /= column[j];
        sct_axpy(j, -qp->r[j], column, qp->r);
    }
}

/* The longest dual step that keeps the active inequalities' multipliers >= 0, and who blocks it. */
static double dual_step(const sct_qp *qp, int *blocking)
{
    double largest = 0, t = INFINITY;
    for (int k = 0; k < qp->q; ++k) largest = fmax(largest, fabs(qp->r[k]));
    for (int k = qp->q_eq; k < qp->q; ++k) {
        if (qp->r[k] > TOL_RATIO * largest && qp->u[k] < t * qp->r[k]) {
            t = fmax(0, qp->u[k] / qp->r[k]);
            *blocking = k;
        }
    }
    return t;
}

/* Makes the violated constraint c (sign * n_c for an equality) active, in as many steps as it takes. */
static sct_status bring_in(sct_qp *qp, const sct_qp_data *p, int c, double sign, int most, double x[])
{
    const int n = qp->n;
    double u = 0, size;
    for (;;) {
        if (++qp->iterations > most) return SCT_NOT_CONVERGED;
        const int q = qp->q;
        project(qp, p, c, sign);
        solve_R(qp);
        const double free2 = sct_dot(n - q, qp->d + q, qp->d + q);
        const double image = sqrt(free2 + sct_dot(q, qp->d, qp->d));
        double terms = image;
        for (int k = 0; k < q; ++k) terms += fabs(qp->r[k]) * qp->image[k];
        const bool is_free = sqrt(free2) > TOL_DEPENDENT * terms;
        const double s = sign * slack(qp, p, c, x, length(qp, x), &size);

        int blocking = -1;
        const double t_dual = dual_step(qp, &blocking), t_full = is_free ? fmax(0, -s / free2) : INFINITY;
        const double t = fmin(t_dual, t_full);
        if (!(t < INFINITY)) {
            if (u > 0 || !(-s <= TOL_CONSISTENT * size)) return SCT_INFEASIBLE;
            qp->state[c] = REDUNDANT;
            return SCT_OK;
        }
        if (is_free) { /* x += t J2 d2 */
            memset(qp->z, 0, (size_t)n * sizeof *qp->z);
            for (int k = q; k < n; ++k) sct_axpy(n, qp->d[k], qp->JT + (size_t)k * (size_t)n, qp->z);
            sct_axpy(n, t, qp->z, x);
        }
        sct_axpy(q, -t, qp->r, qp->u);
        u += t;
        if (t_full <= t_dual) {
            add(qp, c, sign, u, image);
            return SCT_OK;
        }
        drop(qp, blocking);
    }
}

static void hand_out(const sct_qp *qp, const sct_qp_data *p, double x[], double mu[], double mu_bound[])
{
    const int n = qp->n, m = qp->m;
    for (int c = 0; c < m; ++c) mu[c] = 0;
    for (int i = 0; i < n && mu_bound != NULL; ++i) mu_bound[i] = 0;
    for (int k = 0; k < qp->q; ++k) {
        const int c = qp->active[k];
        const double u = k < qp->q_eq ? qp->sign[k] * qp->u[k] : fmax(0, qp->u[k]);
        if (c < m) {
            mu[c] = u;
            continue;
        }
        const int i = (c - m) % n;
        const bool is_lower = c < m + n;
        x[i] = is_lower ? p->lower[i] : p->upper[i]; /* exactly, for callers that ask whether a bound is reached */
        if (mu_bound != NULL) mu_bound[i] = is_lower ? -u : u;
    }
}

sct_status sct_qp_solve(sct_qp *qp, const sct_qp_data *data, double x[], double mu[], double mu_bound[])
{
    qp->n = data->n;
    qp->m = data->m;
    if (!start(qp, data, x)) return SCT_NOT_CONVEX;
    const int most = 100 + 20 * (qp->n + qp->m < 1000000 ? qp->n + qp->m : 1000000);

    for (int c = 0; c < data->m_eq; ++c) {
        double size;
        const double s = slack(qp, data, c, x, length(qp, x), &size);
        const sct_status status = bring_in(qp, data, c, s > 0 ? -1 : 1, most, x);
        if (status != SCT_OK) return status;
        qp->q_eq = qp->q;
    }
    for (int c; (c = most_violated(qp, data, x)) >= 0;) {
        const sct_status status = bring_in(qp, data, c, 1, most, x);
        if (status != SCT_OK) return status;
    }
    hand_out(qp, data, x, mu, mu_bound);
    return SCT_OK;
}

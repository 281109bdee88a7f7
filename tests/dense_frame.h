/* A second analysis of small frames by the textbook's way, to compare with: 12 x 12 element matrices of Euler-Bernoulli
 * beams, loads by Hermite shapes and Gauss points, supports by Lagrange multipliers, LAPACK. Nothing of src/analysis is
 * used but local axes. Source: Przemieniecki, Theory of Matrix Structural Analysis, chapter 5 (from memory). */
#ifndef TESTS_DENSE_FRAME_H
#define TESTS_DENSE_FRAME_H

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/structure.h"

void dgesv_(const int *n, const int *nrhs, double *a, const int *lda, int *pivots, double *b, const int *ldb,
            int *info);
double dlange_(const char *norm, const int *m, const int *n, const double *a, const int *lda, double *work);
void dgecon_(const char *norm, const int *n, const double *a, const int *lda, const double *anorm, double *rcond,
             double *work, int *iwork, int *info);
void dsyev_(const char *job, const char *uplo, const int *n, double *a, const int *lda, double *w, double *work,
            const int *lwork, int *info);

/* Unknowns: 6 per joint in the model's axes, then the rotations of ends that are not fixed, about local axes. */
typedef struct dense_frame {
    const sct_structure *st;
    const double *A; /* n_groups */
    int n, size;     /* unknowns; with multipliers */
    int *own;        /* n_bars x 12: an end rotation's own unknown, or -1 */
    double *K, *f;   /* size x size, size: overwritten by the solution */
    double rcond;    /* of K: what its own rounding may do is 1e-16 / rcond */
} dense_frame;

/* Order within an element: u v w, rotations about local axes 0 1 2; at its start, then at its end. */
typedef double dense_element[12][12];

static inline void dense_put(dense_element K, int i, int j, double k)
{
    K[i][j] = K[j][i] = k;
}

/* One plane of bending: displacements v, rotations r of both ends; sign: +1 when r = v', -1 when r = -v'. */
static inline void dense_bending(dense_element K, int v, int r, double sign, double EI, double L)
{
    for (int a = 0; a < 2; a++)
        for (int b = 0; b < 2; b++) {
            K[v + 6 * a][v + 6 * b] = (a == b ? 12 : -12) * EI / (L * L * L);
            K[r + 6 * a][r + 6 * b] = (a == b ? 4 : 2) * EI / L;
            dense_put(K, v + 6 * a, r + 6 * b, sign * (a == 0 ? 6 : -6) * EI / (L * L));
        }
}

/* Free to twist at an end, it resists no twist at the other; then it must have no moment about its axis. */
static inline bool dense_spins(const sct_member *m)
{
    return m->end[0].fixity[SCT_TWIST] == SCT_PINNED || m->end[1].fixity[SCT_TWIST] == SCT_PINNED;
}

static inline void dense_stiffness(const dense_frame *d, int e, dense_element K)
{
    const sct_structure *st = d->st;
    const sct_bar *bar = &st->bars[e];
    const sct_group *g = &st->model->groups[bar->group];
    const double A = d->A[bar->group], E = bar->E, L = bar->L, G = st->model->materials[g->material].G;
    memset(K, 0, sizeof(dense_element));
    K[0][0] = K[6][6] = E * A / L;
    dense_put(K, 0, 6, -E * A / L);
    dense_bending(K, 1, 5, 1.0, E * g->I[0].c * A * A, L);
    dense_bending(K, 2, 4, -1.0, E * (st->dim == 3 ? g->I[1].c : g->I[0].c) * A * A, L);
    const double GJ = st->dim == 2 || dense_spins(&st->model->members[e]) ? 0.0 : G * g->J.c * pow(A, g->J.p);
    K[3][3] = K[9][9] = GJ / L;
    dense_put(K, 3, 9, -GJ / L);
}

/* A force p and a moment m at x, local axes: work with the element's shapes. */
static inline void dense_point(double L, double x, const double p[3], const double m[3], double f[12])
{
    const double t = x / L;
    const double shape[4] = {1 - 3 * t * t + 2 * t * t * t, L * t * (1 - t) * (1 - t), t * t * (3 - 2 * t),
                             L * t * t * (t - 1)};
    const double slope[4] = {-6 * t * (1 - t) / L, 1 - 4 * t + 3 * t * t, 6 * t * (1 - t) / L, 3 * t * t - 2 * t};
    for (int end = 0; end < 2; end++) {
        double *at = f + 6 * end;
        const double *N = shape + 2 * end, *N1 = slope + 2 * end, linear = end == 0 ? 1 - t : t;
        at[0] += linear * p[0];
        at[3] += linear * m[0];
        at[1] += N[0] * p[1] + N1[0] * m[2];
        at[5] += N[1] * p[1] + N1[1] * m[2];
        at[2] += N[0] * p[2] - N1[0] * m[1];
        at[4] -= N[1] * p[2] - N1[1] * m[1];
    }
}

static inline void dense_load(double L, const sct_beam_load *load, double f[12])
{
    static const double AT[3] = {0.1127016653792583114820734600, 0.5, 0.8872983346207416885179265400};
    static const double WEIGHT[3] = {5.0 / 18, 8.0 / 18, 5.0 / 18};
    const double none[3] = {0}, h = load->b - load->a;
    if (load->is_point) {
        dense_point(L, load->a, load->F, load->M, f);
        return;
    }
    for (int i = 0; i < 3; i++) {
        double p[3];
        for (int x = 0; x < 3; x++) p[x] = WEIGHT[i] * h * ((1 - AT[i]) * load->qa[x] + AT[i] * load->qb[x]);
        dense_point(L, load->a + AT[i] * h, p, none, f);
    }
}

/* Own weight per metre of a member in case k, local axes. */
static inline void dense_weight(const dense_frame *d, int e, int k, double q[3])
{
    const sct_bar *bar = &d->st->bars[e];
    const double g = d->st->model->cases[k].self_weight * bar->density * SCT_GRAVITY * d->A[bar->group];
    for (int i = 0; i < 3; i++) q[i] = -g * bar->axes[i][d->st->dim - 1];
}

/* Consistent loads of element e in case k, own weight of a beam included. */
static inline void dense_member_loads(const dense_frame *d, int e, int k, double f[12])
{
    const sct_structure *st = d->st;
    const sct_case *c = &st->model->cases[k];
    const sct_bar *bar = &st->bars[e];
    sct_beam_load own = {.b = bar->L};
    memset(f, 0, 12 * sizeof *f);
    for (int i = 0; i < c->n_member_loads; i++) {
        if (c->member_loads[i].member != e) continue;
        const sct_beam_load load = sct_local_load(bar, &c->member_loads[i]);
        dense_load(bar->L, &load, f);
    }
    dense_weight(d, e, k, own.qa);
    memcpy(own.qb, own.qa, sizeof own.qb);
    if (bar->n > 0) dense_load(bar->L, &own, f);
}

/* That of a bar goes to its joints. */
static inline void dense_bar_weight(const dense_frame *d, int e, int k, double f[12])
{
    double q[3];
    dense_weight(d, e, k, q);
    for (int i = 0; i < 12 && d->st->bars[e].n == 0; i++) f[i] += i % 6 < 3 ? q[i % 6] * d->st->bars[e].L / 2 : 0.0;
}

/* Displacements of the end of a member that is held at its start and free to follow temperature and lack of fit. */
static inline void dense_free_shape(const dense_frame *d, int e, int k, double u[12])
{
    const sct_case *c = &d->st->model->cases[k];
    const sct_bar *bar = &d->st->bars[e];
    const double L = bar->L;
    memset(u, 0, 12 * sizeof *u);
    for (int i = 0; i < c->n_bar_actions; i++) {
        const sct_bar_action *a = &c->bar_actions[i];
        if (a->member != e) continue;
        const double v2 = -bar->expansion * a->gradient[0], w2 = -bar->expansion * a->gradient[1];
        u[6] += bar->expansion * a->dT * L + a->lack;
        u[7] += v2 * L * L / 2;
        u[11] += v2 * L;
        u[8] += w2 * L * L / 2;
        u[10] -= w2 * L;
    }
}

/* Local number i of element e as a sum over at most three unknowns. */
static inline int dense_terms(const dense_frame *d, int e, int i, int at[3], double part[3])
{
    const sct_bar *bar = &d->st->bars[e];
    if (d->own[12 * e + i] >= 0) {
        at[0] = d->own[12 * e + i];
        part[0] = 1.0;
        return 1;
    }
    for (int x = 0; x < 3; x++) {
        at[x] = 6 * (i < 6 ? bar->from : bar->to) + 3 * (i % 6 / 3) + x;
        part[x] = bar->axes[i % 3][x];
    }
    return 3;
}

static inline void dense_add_element(dense_frame *d, int e, int k)
{
    dense_element K;
    double f[12], free_shape[12];
    dense_stiffness(d, e, K);
    dense_member_loads(d, e, k, f);
    dense_bar_weight(d, e, k, f);
    dense_free_shape(d, e, k, free_shape);
    for (int i = 0; i < 12; i++) {
        int p[3], q[3];
        double a[3], b[3];
        const int n_p = dense_terms(d, e, i, p, a);
        for (int j = 0; j < 12; j++) f[i] += K[i][j] * free_shape[j];
        for (int x = 0; x < n_p; x++) d->f[p[x]] += a[x] * f[i];
        for (int j = 0; j < 12; j++) {
            const int n_q = dense_terms(d, e, j, q, b);
            for (int x = 0; x < n_p; x++)
                for (int y = 0; y < n_q; y++) d->K[p[x] * d->size + q[y]] += a[x] * K[i][j] * b[y];
        }
    }
}

/* The spring between an end's own rotation and its joint's. */
static inline void dense_add_end(dense_frame *d, int e, int i, double k)
{
    const sct_bar *bar = &d->st->bars[e];
    int at[4] = {d->own[12 * e + i]};
    double b[4] = {-1.0};
    for (int x = 0; x < 3; x++) {
        at[1 + x] = 6 * (i < 6 ? bar->from : bar->to) + 3 + x;
        b[1 + x] = bar->axes[i % 3][x];
    }
    for (int x = 0; x < 4; x++)
        for (int y = 0; y < 4; y++) d->K[at[x] * d->size + at[y]] += k * b[x] * b[y];
}

/* Local number of an end's rotation r (SCT_IN_PLANE, ...) turns about local axis 2, 1 (backwards), 0. */
static inline int dense_turn(int end, int r)
{
    return 6 * end + 3 + (r == SCT_IN_PLANE ? 2 : r == SCT_OUT_OF_PLANE ? 1 : 0);
}

static inline bool dense_counts(const sct_structure *st, int r)
{
    return st->dim == 3 || r == SCT_IN_PLANE;
}

static inline void dense_number(dense_frame *d)
{
    const sct_structure *st = d->st;
    d->n = 6 * st->n_joints;
    for (int i = 0; i < 12 * st->n_bars; i++) d->own[i] = -1;
    for (int e = 0; e < st->n_bars; e++)
        for (int end = 0; end < 2; end++)
            for (int r = 0; r < SCT_TURNS; r++)
                if (dense_counts(st, r) && st->model->members[e].end[end].fixity[r] != SCT_FIXED)
                    d->own[12 * e + dense_turn(end, r)] = d->n++;
}

/* One more equation dir . (displacement or rotation of the joint) = value. */
static inline void dense_hold(dense_frame *d, int *next, int at, const double dir[3], double value, double scale)
{
    for (int x = 0; x < 3; x++) d->K[(at + x) * d->size + *next] = d->K[*next * d->size + at + x] = scale * dir[x];
    d->f[(*next)++] = scale * value;
}

static inline double dense_dot(const double a[3], const double b[3])
{
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/* Rotations that nothing resists, neither members (pinned to the joint) nor supports, get a stiffness of their own. */
static inline void dense_calm(dense_frame *d, int j, double scale)
{
    const sct_joint *joint = &d->st->model->joints[j];
    const int at = 6 * j + 3, three = 3, room = 16;
    double V[9], w[3], work[16], calm[9] = {0};
    int info;
    for (int i = 0; i < 9; i++) V[i] = d->K[(at + i / 3) * d->size + at + i % 3];
    for (int h = 0; h < joint->n_turns_held; h++) /* stiff enough to be told from nothing */
        for (int i = 0; i < 9; i++) V[i] += scale * joint->turns_held[h][i / 3] * joint->turns_held[h][i % 3];
    dsyev_("V", "U", &three, V, &three, w, work, &room, &info);
    for (int k = 0; k < 3; k++)
        for (int i = 0; i < 9 && w[k] <= 1e-14 * scale; i++) calm[i] += scale * V[3 * k + i / 3] * V[3 * k + i % 3];
    for (int i = 0; i < 9; i++) d->K[(at + i / 3) * d->size + at + i % 3] += calm[i];
}

static inline void dense_add_joint(dense_frame *d, int j, int k, int *next, double scale)
{
    const sct_joint *joint = &d->st->model->joints[j];
    const sct_case *c = &d->st->model->cases[k];
    double settled[6] = {0};
    for (int i = 0; i < c->n_loads; i++)
        for (int x = 0; x < 6 && c->loads[i].joint == j; x++)
            d->f[6 * j + x] += x < 3 ? c->loads[i].F[x] : c->loads[i].M[x - 3];
    for (int i = 0; i < c->n_settlements; i++)
        for (int x = 0; x < 6 && c->settlements[i].joint == j; x++)
            settled[x] += x < 3 ? c->settlements[i].d[x] : c->settlements[i].turn[x - 3];
    for (int i = 0; i < joint->n_springs; i++) {
        const sct_joint_spring *s = &joint->springs[i];
        for (int x = 0; x < 9; x++)
            d->K[(6 * j + 3 * s->is_turn + x / 3) * d->size + 6 * j + 3 * s->is_turn + x % 3] +=
                s->stiffness * s->dir[x / 3] * s->dir[x % 3];
    }
    for (int i = 0; i < joint->n_held; i++)
        dense_hold(d, next, 6 * j, joint->held[i], dense_dot(joint->held[i], settled), scale);
    for (int i = 0; i < joint->n_turns_held; i++)
        dense_hold(d, next, 6 * j + 3, joint->turns_held[i], dense_dot(joint->turns_held[i], settled + 3), scale);
    if (d->st->dim == 2) {
        dense_hold(d, next, 6 * j, (double[3]){0, 0, 1}, 0.0, scale);
        dense_hold(d, next, 6 * j + 3, (double[3]){1, 0, 0}, 0.0, scale);
        dense_hold(d, next, 6 * j + 3, (double[3]){0, 1, 0}, 0.0, scale);
    }
}

/* Solves case k; the answer lies in f. */
static inline dense_frame dense_solve(const sct_structure *st, const double A[], int k)
{
    dense_frame d = {.st = st, .A = A, .own = calloc((size_t)(12 * st->n_bars), sizeof(int))};
    int info, one = 1;
    double scale = 0.0;
    dense_number(&d);
    d.size = d.n;
    for (int j = 0; j < st->n_joints; j++)
        d.size += st->model->joints[j].n_held + st->model->joints[j].n_turns_held + (st->dim == 2 ? 3 : 0);
    d.K = calloc((size_t)(d.size * d.size), sizeof *d.K);
    d.f = calloc((size_t)d.size, sizeof *d.f);
    int *pivots = calloc((size_t)d.size, sizeof *pivots);
    for (int e = 0; e < st->n_bars; e++) {
        dense_add_element(&d, e, k);
        for (int end = 0; end < 2; end++)
            for (int r = 0; r < SCT_TURNS; r++) {
                const sct_member_end *at = &st->model->members[e].end[end];
                if (dense_counts(st, r) && at->fixity[r] == SCT_SPRUNG)
                    dense_add_end(&d, e, dense_turn(end, r), at->stiffness[r]);
            }
    }
    for (int i = 0; i < d.n; i++) scale = fmax(scale, d.K[i * d.size + i]);
    for (int i = 6 * st->n_joints; i < d.n; i++) /* what spins freely within its ends */
        if (d.K[i * d.size + i] == 0.0) d.K[i * d.size + i] = scale;
    int next = d.n;
    for (int j = 0; j < st->n_joints; j++) dense_add_joint(&d, j, k, &next, scale);
    for (int j = 0; j < st->n_joints; j++) dense_calm(&d, j, scale);
    double *work = calloc((size_t)(4 * d.size), sizeof *work);
    const double norm = dlange_("1", &d.size, &d.size, d.K, &d.size, work);
    dgesv_(&d.size, &one, d.K, &d.size, pivots, d.f, &d.size, &info);
    if (info != 0) abort();
    dgecon_("1", &d.size, d.K, &d.size, &norm, &d.rcond, work, pivots, &info);
    free(pivots);
    free(work);
    return d;
}

static inline void dense_free(dense_frame *d)
{
    free(d->own);
    free(d->K);
    free(d->f);
}

/* N, V1, V2, M_in, M_out, T at both ends of member e in case k: signs of analysis/beam.h. */
static inline void dense_end_forces(const dense_frame *d, int e, int k, double value[2][6])
{
    static const int OF[6] = {0, 1, 2, 5, 4, 3};
    static const double SIGN[2][6] = {{-1, 1, 1, -1, 1, -1}, {1, -1, -1, 1, -1, 1}};
    dense_element K;
    double f[12], u[12], free_shape[12], S[12];
    dense_stiffness(d, e, K);
    dense_member_loads(d, e, k, f);
    dense_free_shape(d, e, k, free_shape);
    for (int i = 0; i < 12; i++) {
        int at[3];
        double part[3];
        const int n = dense_terms(d, e, i, at, part);
        u[i] = -free_shape[i];
        for (int x = 0; x < n; x++) u[i] += part[x] * d->f[at[x]];
    }
    for (int i = 0; i < 12; i++) {
        S[i] = -f[i];
        for (int j = 0; j < 12; j++) S[i] += K[i][j] * u[j];
    }
    for (int end = 0; end < 2; end++)
        for (int q = 0; q < 6; q++) value[end][q] = SIGN[end][q] * S[6 * end + OF[q]];
}
#endif

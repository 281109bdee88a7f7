/* A second analysis of a model.
 *
 * With P the projection of a joint onto the directions its support leaves free, the displacements are u = settlement +
 * P x, and x solves (P K P + c (I - P)) x = P (load - forces of the settlement). */
#include "verify/statics.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/random.h"
#include "numerics/skyline.h"
#include "numerics/sparse.h"

static const long double GRAVITY = 9.80665L; /* [m/s2] standard value, ISO 80000-3 */
/* The skyline is used up to about a second and 160 MB; above, CHOLMOD. */
static const double MOST_MULTIPLICATIONS = 1e9, MOST_ENTRIES = 2e7;
static const double COSINE = 4e-16; /* rounding of a direction cosine: four units */

typedef struct work {
    const sct_model *m;
    const double *A;
    int d, n;                      /* dimensions, unknowns: d per joint */
    size_t n3;                     /* 3 n_joints */
    long double (*dir)[3], *L, *k; /* n_members */
    double (*P)[3][3];             /* n_joints */
    double *c;                     /* n_joints: stiffness that stands for a support */
    int *first;                    /* n */
    sct_skyline *skyline;
    sct_sparse *sparse; /* one of the two */
    int *column, *row;
    double *values;
    double *b;                      /* n */
    long double *u, *r, *free_part; /* n3, n3, n_members: prescribed free elongation */
} work;

static void work_free(work *w)
{
    free(w->dir);
    free(w->L);
    free(w->k);
    free(w->P);
    free(w->c);
    free(w->first);
    sct_skyline_free(w->skyline);
    sct_sparse_free(w->sparse);
    free(w->column);
    free(w->row);
    free(w->values);
    free(w->b);
    free(w->u);
    free(w->r);
    free(w->free_part);
}

static bool work_allocate(work *w)
{
    const size_t joints = (size_t)w->m->n_joints, members = (size_t)w->m->n_members;
    w->dir = calloc(members + 1, sizeof *w->dir);
    w->L = calloc(members + 1, sizeof *w->L);
    w->k = calloc(members + 1, sizeof *w->k);
    w->P = calloc(joints + 1, sizeof *w->P);
    w->c = calloc(joints + 1, sizeof *w->c);
    w->first = calloc(3 * joints + 1, sizeof *w->first);
    w->b = calloc(3 * joints + 1, sizeof *w->b);
    w->u = calloc(3 * joints + 1, sizeof *w->u);
    w->r = calloc(3 * joints + 1, sizeof *w->r);
    w->free_part = calloc(members + 1, sizeof *w->free_part);
    return w->dir && w->L && w->k && w->P && w->c && w->first && w->b && w->u && w->r && w->free_part;
}

/* ---- geometry -----------------------------------------------------------------------------------------------------
 */

static void measure_members(work *w)
{
    for (int e = 0; e < w->m->n_members; e++) {
        const sct_member *member = &w->m->members[e];
        const double *a = w->m->joints[member->from].at, *b = w->m->joints[member->to].at;
        long double square = 0.0L;
        for (int i = 0; i < 3; i++) {
            w->dir[e][i] = (long double)b[i] - a[i];
            square += w->dir[e][i] * w->dir[e][i];
        }
        w->L[e] = sqrtl(square);
        for (int i = 0; i < 3; i++) w->dir[e][i] /= w->L[e];
        const int g = member->group;
        w->k[e] = (long double)w->m->materials[w->m->groups[g].material].E * w->A[g] / w->L[e];
        w->c[member->from] += (double)w->k[e];
        w->c[member->to] += (double)w->k[e];
    }
}

/* H = sum of h h' / h'h for one held direction; in space the normal of two held ones is what is left free. */
static void project(const sct_joint *joint, int d, double held[3][3])
{
    memset(held, 0, sizeof(double[3][3]));
    const double *p = joint->held[0], *q = joint->held[1];
    double v[3] = {p[0], p[1], p[2]};
    if (joint->n_held == 0) return;
    if (joint->n_held == 2 && d == 3) {
        for (int i = 0; i < 3; i++) v[i] = p[(i + 1) % 3] * q[(i + 2) % 3] - p[(i + 2) % 3] * q[(i + 1) % 3];
    }
    const double square = v[0] * v[0] + v[1] * v[1] + v[2] * v[2];
    for (int i = 0; i < d; i++) {
        for (int j = 0; j < d; j++) {
            const double along = v[i] * v[j] / square, one = i == j;
            held[i][j] = joint->n_held == d ? one : joint->n_held == 2 ? one - along : along;
        }
    }
}

static void project_joints(work *w, sct_statics *out)
{
    for (int j = 0; j < w->m->n_joints; j++) {
        project(&w->m->joints[j], w->d, out->held[j]);
        const bool is_free = w->c[j] > 0.0; /* some member ends here */
        for (int i = 0; i < w->d; i++) {
            for (int k = 0; k < w->d; k++) w->P[j][i][k] = is_free ? (i == k) - out->held[j][i][k] : 0.0;
        }
        if (!is_free) w->c[j] = 1.0;
    }
}

/* ---- the matrix ---------------------------------------------------------------------------------------------------
 */

static int compare_pairs(const void *a, const void *b)
{
    const int *p = a, *q = b;
    return p[1] != q[1] ? (p[1] > q[1]) - (p[1] < q[1]) : (p[0] > q[0]) - (p[0] < q[0]);
}

/* The pattern of CHOLMOD's upper triangle: blocks of joints that a member ties, and the diagonal. */
static sct_status build_sparse(work *w)
{
    const int n_pairs = w->m->n_members + w->m->n_joints, d = w->d;
    int(*pair)[2] = calloc((size_t)n_pairs, sizeof *pair);
    sct_status status = SCT_NO_MEMORY;
    w->column = calloc((size_t)w->n + 2, sizeof *w->column);
    w->row = calloc((size_t)n_pairs * (size_t)(d * d), sizeof *w->row);
    w->values = calloc((size_t)n_pairs * (size_t)(d * d), sizeof *w->values);
    if (pair != NULL && w->column != NULL && w->row != NULL && w->values != NULL) {
        for (int e = 0; e < w->m->n_members; e++) {
            const int a = w->m->members[e].from, b = w->m->members[e].to;
            pair[e][0] = a < b ? a : b;
            pair[e][1] = a < b ? b : a;
        }
        for (int j = 0; j < w->m->n_joints; j++) pair[w->m->n_members + j][0] = pair[w->m->n_members + j][1] = j;
        qsort(pair, (size_t)n_pairs, sizeof *pair, compare_pairs);
        int size = 0;
        for (int begin = 0, end; begin < n_pairs; begin = end) { /* the pairs of one column of blocks */
            for (end = begin; end < n_pairs && pair[end][1] == pair[begin][1]; end++) continue;
            for (int c = 0; c < d; c++) {
                for (int p = begin; p < end; p++) {
                    if (p > begin && pair[p][0] == pair[p - 1][0]) continue;
                    const int rows = pair[p][0] == pair[p][1] ? c + 1 : d;
                    for (int i = 0; i < rows; i++) w->row[size++] = pair[p][0] * d + i;
                }
                w->column[pair[begin][1] * d + c + 1] = size;
            }
        }
        const sct_pattern pattern = {.n = w->n, .column = w->column, .row = w->row};
        w->sparse = sct_sparse_new(&pattern, &status);
    }
    free(pair);
    return status;
}

static sct_status choose_solver(work *w)
{
    double multiplications, entries;
    for (int i = 0; i < w->n; i++) w->first[i] = i - i % w->d;
    for (int e = 0; e < w->m->n_members; e++) {
        const int a = w->m->members[e].from, b = w->m->members[e].to, low = a < b ? a : b, high = a < b ? b : a;
        for (int i = 0; i < w->d; i++) {
            if (low * w->d < w->first[high * w->d + i]) w->first[high * w->d + i] = low * w->d;
        }
    }
    sct_skyline_cost(w->n, w->first, &multiplications, &entries);
    if (multiplications > MOST_MULTIPLICATIONS || entries > MOST_ENTRIES) return build_sparse(w);
    w->skyline = sct_skyline_new(w->n, w->first);
    return w->skyline != NULL ? SCT_OK : SCT_NO_MEMORY;
}

/* Adds to entry (i, j), i >= j. */
static void add(work *w, int i, int j, double value)
{
    if (w->skyline != NULL) {
        *sct_skyline_at(w->skyline, i, j) += value;
        return;
    }
    int low = w->column[i], high = w->column[i + 1] - 1; /* the upper triangle: column i, row j */
    while (low < high) {
        const int middle = low + (high - low) / 2;
        if (w->row[middle] < j)
            low = middle + 1;
        else
            high = middle;
    }
    w->values[low] += value;
}

static sct_status factor(work *w)
{
    for (int e = 0; e < w->m->n_members; e++) {
        const int end[2] = {w->m->members[e].from, w->m->members[e].to};
        double g[6];
        int at[6];
        for (int s = 0; s < 2; s++) {
            for (int i = 0; i < w->d; i++) {
                double along = 0.0;
                for (int k = 0; k < w->d; k++) along += w->P[end[s]][i][k] * (double)w->dir[e][k];
                g[s * w->d + i] = s == 0 ? -along : along;
                at[s * w->d + i] = end[s] * w->d + i;
            }
        }
        for (int p = 0; p < 2 * w->d; p++) {
            for (int q = 0; q < 2 * w->d; q++) {
                if (at[p] >= at[q]) add(w, at[p], at[q], (double)w->k[e] * g[p] * g[q]);
            }
        }
    }
    for (int j = 0; j < w->m->n_joints; j++) {
        for (int i = 0; i < w->d; i++) {
            for (int k = 0; k <= i; k++) add(w, j * w->d + i, j * w->d + k, w->c[j] * ((i == k) - w->P[j][i][k]));
        }
    }
    if (w->skyline != NULL) return sct_skyline_factor(w->skyline) ? SCT_OK : SCT_SELF_CHECK;
    const sct_status status = sct_sparse_update(w->sparse, w->values, NULL);
    return status == SCT_NOT_CONVEX ? SCT_SELF_CHECK : status;
}

/* b = P M^-1 P r; r (n3) */
static void solve(work *w, const long double r[], double step[])
{
    for (int j = 0; j < w->m->n_joints; j++) {
        for (int i = 0; i < w->d; i++) {
            long double sum = 0.0L;
            for (int k = 0; k < w->d; k++) sum += w->P[j][i][k] * r[3 * j + k];
            w->b[j * w->d + i] = (double)sum;
        }
    }
    if (w->skyline != NULL)
        sct_skyline_solve(w->skyline, w->b);
    else
        sct_sparse_solve(w->sparse, 1, w->b);
    for (int j = 0; j < w->m->n_joints; j++) {
        for (int i = 0; i < 3; i++) {
            step[3 * j + i] = 0.0;
            for (int k = 0; k < w->d && i < w->d; k++) step[3 * j + i] += w->P[j][i][k] * w->b[j * w->d + k];
        }
    }
}

/* ---- one case -----------------------------------------------------------------------------------------------------
 */

static long double along(const work *w, int e, const long double u[])
{
    const sct_member *member = &w->m->members[e];
    long double sum = 0.0L;
    for (int i = 0; i < 3; i++) sum += w->dir[e][i] * (u[3 * member->to + i] - u[3 * member->from + i]);
    return sum;
}

/* Settlements into u, loads into load, free elongations of the members. */
static void begin_case(work *w, const sct_case *c, double load[])
{
    memset(w->u, 0, w->n3 * sizeof *w->u);
    for (int i = 0; i < c->n_settlements; i++) {
        for (int k = 0; k < 3; k++) w->u[3 * c->settlements[i].joint + k] += c->settlements[i].d[k];
    }
    for (int i = 0; i < c->n_loads; i++) {
        for (int k = 0; k < 3; k++) load[3 * c->loads[i].joint + k] += c->loads[i].F[k];
    }
    for (int e = 0; e < w->m->n_members; e++) {
        const sct_member *member = &w->m->members[e];
        const sct_group *g = &w->m->groups[member->group];
        const long double half =
            0.5L * c->self_weight * w->m->materials[g->material].density * GRAVITY * w->A[member->group] * w->L[e];
        load[3 * member->from + w->d - 1] -= (double)half;
        load[3 * member->to + w->d - 1] -= (double)half;
        w->free_part[e] = 0.0L;
    }
    for (int i = 0; i < c->n_bar_actions; i++) {
        const sct_bar_action *action = &c->bar_actions[i];
        const sct_material *material = &w->m->materials[w->m->groups[w->m->members[action->member].group].material];
        if (action->dT != 0.0)
            w->free_part[action->member] += material->expansion * (long double)action->dT * w->L[action->member];
        w->free_part[action->member] += action->lack;
    }
}

static void push(const work *w, int e, long double N, long double r[])
{
    const sct_member *member = &w->m->members[e];
    for (int i = 0; i < 3; i++) {
        r[3 * member->from + i] += N * w->dir[e][i];
        r[3 * member->to + i] -= N * w->dir[e][i];
    }
}

static double largest(size_t n, const double a[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(a[i]));
    return most;
}

/* What errors of COSINE in the directions do: forces push joints sideways a little, one way or the other. */
static void shake(work *w, const double N[], double step[], double *u_shaky, double *N_shaky)
{
    sct_random random = {1};
    memset(w->r, 0, w->n3 * sizeof *w->r);
    for (int e = 0; e < w->m->n_members; e++) {
        const int end[2] = {w->m->members[e].from, w->m->members[e].to};
        for (int s = 0; s < 2; s++) {
            for (int i = 0; i < w->d; i++) {
                w->r[3 * end[s] + i] += COSINE * N[e] * (sct_random_unit(&random) < 0.5 ? -1.0 : 1.0);
            }
        }
    }
    solve(w, w->r, step);
    for (size_t i = 0; i < w->n3; i++) w->r[i] = step[i];
    *u_shaky = largest(w->n3, step);
    *N_shaky = 0.0;
    for (int e = 0; e < w->m->n_members; e++) *N_shaky = fmax(*N_shaky, fabs((double)(w->k[e] * along(w, e, w->r))));
}

static void solve_case(work *w, int k, double step[], sct_statics *out)
{
    enum { MOST_STEPS = 12 };
    static const double SMALL = 1e-14;
    const size_t members = (size_t)w->m->n_members;
    double *load = out->load + (size_t)k * w->n3, *u = out->u + (size_t)k * w->n3, *N = out->N + (size_t)k * members;
    begin_case(w, &w->m->cases[k], load);
    double size = INFINITY;
    for (int s = 0; s < MOST_STEPS && size > SMALL; s++) {
        for (size_t i = 0; i < w->n3; i++) w->r[i] = load[i];
        for (int e = 0; e < w->m->n_members; e++) push(w, e, w->k[e] * (along(w, e, w->u) - w->free_part[e]), w->r);
        solve(w, w->r, step);
        for (size_t i = 0; i < w->n3; i++) w->r[i] = step[i];
        for (int e = 0; e < w->m->n_members; e++) { /* before the sum is rounded: a stiff member hardly stretches */
            N[e] = (double)(w->k[e] * (along(w, e, w->u) - w->free_part[e]) + w->k[e] * along(w, e, w->r));
        }
        for (size_t i = 0; i < w->n3; i++) {
            w->u[i] += step[i];
            u[i] = (double)w->u[i];
        }
        const double moved = largest(w->n3, step), all = largest(w->n3, u), before = size;
        size = moved > 0.0 ? moved / all : 0.0;
        if (s > 1 && !(size < 0.5 * before)) break;
    }
    out->error = size <= out->error ? out->error : size; /* keeps a NAN */
    shake(w, N, step, &out->u_shaky[k], &out->N_shaky[k]);
}

static sct_status run(work *w, sct_statics *out)
{
    const size_t cases = (size_t)w->m->n_cases, members = (size_t)w->m->n_members;
    double *step = calloc(w->n3 + 1, sizeof *step);
    out->u = calloc(cases * w->n3 + 1, sizeof *out->u);
    out->N = calloc(cases * members + 1, sizeof *out->N);
    out->load = calloc(cases * w->n3 + 1, sizeof *out->load);
    out->u_shaky = calloc(cases + 1, sizeof *out->u_shaky);
    out->N_shaky = calloc(cases + 1, sizeof *out->N_shaky);
    out->held = calloc((size_t)w->m->n_joints + 1, sizeof *out->held);
    sct_status status = SCT_NO_MEMORY;
    if (step && out->u && out->N && out->load && out->u_shaky && out->N_shaky && out->held && work_allocate(w)) {
        measure_members(w);
        project_joints(w, out);
        status = choose_solver(w);
        if (status == SCT_OK) status = factor(w);
        for (int k = 0; k < w->m->n_cases && status == SCT_OK; k++) solve_case(w, k, step, out);
    }
    free(step);
    return status;
}

sct_status sct_statics_solve(const sct_model *model, const double A[], sct_statics *statics)
{
    work w = {.m = model,
              .A = A,
              .d = model->dimensions,
              .n = model->n_joints * model->dimensions,
              .n3 = 3 * (size_t)model->n_joints};
    *statics = (sct_statics){0};
    const sct_status status = run(&w, statics);
    work_free(&w);
    return status;
}

void sct_statics_free(sct_statics *s)
{
    free(s->u);
    free(s->N);
    free(s->load);
    free(s->u_shaky);
    free(s->N_shaky);
    free(s->held);
    *s = (sct_statics){0};
}

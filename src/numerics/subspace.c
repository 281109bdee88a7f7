/* Block Lanczos for K^-1 B in the inner product of K, with thick restarts. */
#include "numerics/subspace.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/random.h"
#include "numerics/dense.h"

enum {
    GUARDS = 2,      /* vectors in a block beyond those wanted */
    MORE_ROOM = 32,  /* columns of the basis beyond four blocks */
    WARM_BLOCKS = 3, /* fewest after a warm start: old vectors may be perfect and still not the ones wanted now; it
                        takes some products of the random vector to show others */
    CHUNK = 64       /* rows rotated at once */
};
static const double TOL_GUARD = 1e-3; /* of the pair after the wanted: where its mu is matters, its vector does not */
static const double ZERO = 1e-12;     /* of the largest |mu|: rounding of products and solves stays below */
static const double ROUNDING = 1e-14; /* of the largest |mu|: what a residual cannot be pressed below */
static const double NOTHING = 1e-6;   /* of the largest |mu|: resolution of "nothing positive is left" */

struct sct_subspace {
    int n, wanted, block, capacity;
    double *V, *F; /* n x (capacity + block): V'F = I, F = K V; then a block that waits to join them */
    int count;     /* columns of V that are a basis */
    int expanded;  /* columns of V that have been multiplied; B V is known within span F and the waiting block */
    int waiting;   /* columns of the waiting block */
    int kept;      /* columns of V that a warm start can use */
    int blocks, solves, restarts;
    double *H;              /* capacity x capacity: V'B V */
    double *G;              /* block x block: Z'K Z of the waiting block Z, before it is orthonormal */
    int first;              /* the waiting block is what is left of K^-1 B V[first ... expanded) */
    double *Q;              /* count x count: row k is the k-th eigenvector of H */
    double *theta;          /* capacity: Ritz values, and */
    double *r;              /* capacity: ||K^-1 B x - theta x||_K of their vectors */
    int *order;             /* capacity: rows of Q by falling theta */
    int *chosen;            /* capacity: rows of Q that survive a restart */
    double *work;           /* capacity (capacity + 2), and capacity x CHUNK */
    double *lambda, *error; /* wanted */
};

/* The problem at hand. */
typedef struct pencil {
    sct_factor *factor;
    sct_multiply *multiply;
    void *user;
} pencil;

sct_subspace_settings sct_subspace_defaults(void)
{
    return (sct_subspace_settings){.tolerance = 1e-8, .most_blocks = 200, .largest = INFINITY};
}

void sct_subspace_free(sct_subspace *s)
{
    if (s == NULL) return;
    free(s->V);
    free(s->F);
    free(s->H);
    free(s->G);
    free(s->Q);
    free(s->theta);
    free(s->r);
    free(s->order);
    free(s->chosen);
    free(s->work);
    free(s->lambda);
    free(s->error);
    free(s);
}

static int smaller(int a, int b)
{
    return a < b ? a : b;
}

static double *numbers(size_t rows, size_t columns)
{
    return calloc(rows * columns + 1, sizeof(double));
}

sct_subspace *sct_subspace_new(int n, int wanted, sct_status *status)
{
    *status = SCT_NO_MEMORY;
    sct_subspace *s = calloc(1, sizeof *s);
    if (s == NULL) return NULL;
    s->n = n;
    s->wanted = wanted;
    s->block = smaller(n, wanted + GUARDS);
    s->capacity = smaller(n, 4 * s->block + MORE_ROOM);
    const size_t rows = (size_t)n, m = (size_t)s->capacity, b = (size_t)s->block;
    s->V = numbers(rows, m + b);
    s->F = numbers(rows, m + b);
    s->H = numbers(m, m);
    s->G = numbers(b, b);
    s->Q = numbers(m, m);
    s->theta = numbers(m, 1);
    s->r = numbers(m, 1);
    s->order = calloc(m + 1, sizeof *s->order);
    s->chosen = calloc(m + 1, sizeof *s->chosen);
    s->work = numbers(m, m + 2 + CHUNK);
    s->lambda = numbers((size_t)wanted, 1);
    s->error = numbers((size_t)wanted, 1);
    if (!(s->V && s->F && s->H && s->G && s->Q && s->theta && s->r && s->order && s->chosen && s->work && s->lambda &&
          s->error)) {
        sct_subspace_free(s);
        return NULL;
    }
    *status = SCT_OK;
    return s;
}

static double *column(const sct_subspace *s, double M[], int j)
{
    return M + (size_t)j * (size_t)s->n;
}

/* V = K^-1 F for the columns from `first` on. */
static void solve(sct_subspace *s, const pencil *p, int first, int count)
{
    double *V = column(s, s->V, first);
    memcpy(V, column(s, s->F, first), (size_t)count * (size_t)s->n * sizeof *V);
    sct_factor_solve(p->factor, count, V);
    s->solves += count;
}

/* x'K x of column j. */
static double square(const sct_subspace *s, int j)
{
    return sct_dot(s->n, column(s, s->V, j), column(s, s->F, j));
}

/* Takes the part along v_i off column j, v_j and F_j alike; returns v_i'K v_j as it was. */
static double deflate(sct_subspace *s, int i, int j)
{
    const double c = sct_dot(s->n, column(s, s->F, i), column(s, s->V, j));
    sct_axpy(s->n, -c, column(s, s->V, i), column(s, s->V, j));
    sct_axpy(s->n, -c, column(s, s->F, i), column(s, s->F, j));
    return c;
}

/* Makes column j orthonormal to those before it; it is so to those before `first` already. False: it depends on them,
 * what is left is not more than `least`. */
static bool orthonormalise(sct_subspace *s, const pencil *p, int first, int j, double least)
{
    const double before = sqrt(fmax(0.0, square(s, j)));
    for (int pass = 0; pass < 2; pass++)
        for (int i = first; i < j; i++) deflate(s, i, j);
    double norm = sqrt(fmax(0.0, square(s, j)));
    if (!(norm > least)) return false;
    if (norm < 0.1 * before) { /* the digits lost are not the same in v and in F: v anew from what is left of F */
        const double left = norm;
        solve(s, p, j, 1);
        for (int i = 0; i < j; i++) deflate(s, i, j);
        norm = sqrt(fmax(0.0, square(s, j)));
        if (!(norm > fmax(least, 0.5 * left))) return false;
    }
    double *v = column(s, s->V, j), *F = column(s, s->F, j);
    for (int i = 0; i < s->n; i++) v[i] /= norm;
    for (int i = 0; i < s->n; i++) F[i] /= norm;
    return true;
}

/* The waiting block joins the basis. */
static void append(sct_subspace *s, const pencil *p, double least)
{
    const int first = s->count;
    const size_t bytes = (size_t)s->n * sizeof *s->V;
    for (int k = 0; k < s->waiting && s->count < s->n; k++) {
        if (first + k != s->count) {
            memcpy(column(s, s->V, s->count), column(s, s->V, first + k), bytes);
            memcpy(column(s, s->F, s->count), column(s, s->F, first + k), bytes);
        }
        if (orthonormalise(s, p, first, s->count, least)) s->count++;
    }
    s->waiting = 0;
}

/* The first block: kept vectors, multiplied once, and random ones. */
static void start(sct_subspace *s, const pencil *p, bool is_warm)
{
    const int kept = is_warm ? smaller(s->kept, s->block - 1) : 0;
    sct_random random = {.state = 1};
    if (kept > 0) p->multiply(p->user, kept, s->V, s->F);
    for (size_t i = (size_t)kept * (size_t)s->n; i < (size_t)s->block * (size_t)s->n; i++)
        s->F[i] = 2.0 * sct_random_unit(&random) - 1.0;
    s->blocks = s->solves = s->restarts = s->expanded = s->count = s->kept = 0;
    s->waiting = s->block;
    solve(s, p, 0, s->block);
    append(s, p, 0.0);
}

/* Multiplies the latest block. What K^-1 B makes of it, less its part in the basis, waits to join the basis. */
static void expand(sct_subspace *s, const pencil *p)
{
    const int first = s->expanded, b = s->count - first, m = s->capacity;
    p->multiply(p->user, b, column(s, s->V, first), column(s, s->F, s->count));
    for (int k = 0; k < b; k++) { /* F first: the solve then keeps the digits of what is left */
        double *Y = column(s, s->F, s->count + k);
        for (int i = 0; i < s->count; i++) {
            const double h = sct_dot(s->n, column(s, s->V, i), Y);
            sct_axpy(s->n, -h, column(s, s->F, i), Y);
            s->H[i * m + first + k] = h;
        }
    }
    solve(s, p, s->count, b);
    for (int k = 0; k < b; k++) {
        for (int i = 0; i < s->count; i++) s->H[i * m + first + k] += deflate(s, i, s->count + k);
    }
    for (int j = first; j < s->count; j++) {
        for (int i = 0; i < first; i++) s->H[j * m + i] = s->H[i * m + j];
        for (int i = first; i < j; i++) s->H[i * m + j] = s->H[j * m + i] = 0.5 * (s->H[i * m + j] + s->H[j * m + i]);
    }
    for (int j = 0; j < b; j++) {
        for (int i = 0; i <= j; i++) {
            const double *Y = column(s, s->F, s->count + j);
            s->G[i * s->block + j] = s->G[j * s->block + i] = sct_dot(s->n, column(s, s->V, s->count + i), Y);
        }
    }
    s->first = first;
    s->expanded = s->count;
    s->waiting = b;
    s->blocks++;
}

/* ||K^-1 B x - theta x||_K of the Ritz vector x = V q: only the latest block leaves the basis, as Z. */
static double residual(const sct_subspace *s, const double q[])
{
    double sum = 0.0;
    for (int i = 0; i < s->waiting; i++)
        sum += q[s->first + i] * sct_dot(s->waiting, s->G + i * s->block, q + s->first);
    return sqrt(fmax(0.0, sum));
}

/* Ritz values, their vectors in terms of V, and residuals. False: not finite. */
static bool find_ritz(sct_subspace *s)
{
    const int count = s->count;
    for (int i = 0; i < count; i++) memcpy(s->Q + i * count, s->H + i * s->capacity, (size_t)count * sizeof *s->Q);
    if (!sct_eigen(count, s->Q, s->theta, s->work)) return false;
    for (int k = 0; k < count; k++) {
        int at = k;
        for (; at > 0 && s->theta[s->order[at - 1]] < s->theta[k]; at--) s->order[at] = s->order[at - 1];
        s->order[at] = k;
        s->r[k] = residual(s, s->Q + k * count);
        if (!isfinite(s->r[k])) return false;
    }
    return true;
}

/* The largest |mu| that is known. */
static double scale(const sct_subspace *s)
{
    if (s->count == 0) return 0.0;
    return fmax(fabs(s->theta[s->order[0]]), fabs(s->theta[s->order[s->count - 1]]));
}

/* Values of mu up to here are not wanted. */
static double floor_of(const sct_subspace *s, const sct_subspace_settings *settings)
{
    return fmax(1.0 / settings->largest, ZERO * scale(s));
}

static bool is_settled(const sct_subspace *s, const sct_subspace_settings *settings)
{
    const double floor = floor_of(s, settings), rounding = ROUNDING * scale(s);
    if (settings->is_warm_start && s->blocks < WARM_BLOCKS) return false;
    for (int k = 0; k <= s->wanted; k++) {
        if (k == s->count) return false;
        const double theta = s->theta[s->order[k]], r = s->r[s->order[k]];
        if (!(theta > floor)) /* nothing more, but not by the first look */
            return s->restarts > 0 && theta + r <= (isfinite(settings->largest) ? floor : NOTHING * scale(s));
        const double tolerance = k < s->wanted ? settings->tolerance : fmax(settings->tolerance, TOL_GUARD);
        if (!(r <= fmax(tolerance * theta, rounding))) return false;
    }
    return true;
}

/* M = M Q' for `keep` chosen rows of Q, in place; M: n x count. */
static void rotate(const sct_subspace *s, double M[], int keep)
{
    double *out = s->work;
    for (int row = 0; row < s->n; row += CHUNK) {
        const int rows = smaller(CHUNK, s->n - row);
        memset(out, 0, (size_t)keep * CHUNK * sizeof *out);
        for (int k = 0; k < keep; k++) {
            const double *q = s->Q + s->chosen[k] * s->count;
            for (int j = 0; j < s->count; j++) sct_axpy(rows, q[j], column(s, M, j) + row, out + k * CHUNK);
        }
        for (int k = 0; k < keep; k++) memcpy(column(s, M, k) + row, out + k * CHUNK, (size_t)rows * sizeof *out);
    }
}

/* The chosen Ritz vectors become the basis; the waiting block stays the next one. */
static void shrink(sct_subspace *s, int keep)
{
    const size_t bytes = (size_t)s->waiting * (size_t)s->n * sizeof *s->V;
    rotate(s, s->V, keep);
    rotate(s, s->F, keep);
    memmove(column(s, s->V, keep), column(s, s->V, s->count), bytes);
    memmove(column(s, s->F, keep), column(s, s->F, s->count), bytes);
    memset(s->H, 0, (size_t)s->capacity * (size_t)s->capacity * sizeof *s->H);
    for (int k = 0; k < keep; k++) s->H[k * s->capacity + k] = s->theta[s->chosen[k]];
    s->count = s->expanded = keep;
}

/* Keeps half a basis: the upper end, which is wanted, and of the lower end what is so large that it slows the upper one
 * down. */
static void restart(sct_subspace *s)
{
    const int keep = (s->capacity - s->block) / 2, most_lower = keep / 2;
    const double top = fabs(s->theta[s->order[0]]);
    int lower = 0;
    while (lower < most_lower && s->theta[s->order[s->count - 1 - lower]] < -top) lower++;
    for (int k = 0; k < keep - lower; k++) s->chosen[k] = s->order[k];
    for (int k = 0; k < lower; k++) s->chosen[keep - lower + k] = s->order[s->count - 1 - k];
    shrink(s, keep);
    s->restarts++;
}

static sct_status iterate(sct_subspace *s, const pencil *p, const sct_subspace_settings *settings)
{
    for (;;) {
        expand(s, p);
        if (!find_ritz(s)) return SCT_NOT_ACCURATE;
        if (is_settled(s, settings)) return SCT_OK;
        if (s->blocks >= settings->most_blocks) return SCT_NOT_CONVERGED;
        const double least = ROUNDING * scale(s);
        if (smaller(s->n, s->count + s->waiting) > s->capacity) restart(s);
        append(s, p, least);
        if (s->count == s->expanded) return SCT_OK; /* K^-1 B leads nowhere else: all Ritz pairs are eigenpairs */
    }
}

/* The uppermost Ritz pairs, in V, with residuals that are worked out afresh. */
static void finish(sct_subspace *s, const pencil *p, const sct_subspace_settings *settings, sct_eigenpairs *pairs)
{
    const double floor = floor_of(s, settings);
    const int keep = smaller(s->block, s->count);
    int found = 0;
    for (; found < smaller(s->wanted, keep) && s->theta[s->order[found]] > floor; found++)
        s->lambda[found] = 1.0 / s->theta[s->order[found]];
    for (int k = 0; k < keep; k++) s->chosen[k] = s->order[k];
    s->waiting = 0;
    shrink(s, keep);
    s->kept = keep;
    solve(s, p, 0, found);
    p->multiply(p->user, found, s->V, column(s, s->F, keep));
    for (int k = 0; k < found; k++)
        sct_axpy(s->n, -s->H[k * s->capacity + k], column(s, s->F, k), column(s, s->F, keep + k));
    solve(s, p, keep, found);
    while (pairs->found < found) {
        const int k = pairs->found;
        s->error[k] = sqrt(fmax(0.0, square(s, keep + k))) * s->lambda[k];
        if (!(s->error[k] < 1.0)) break; /* it may as well be negative */
        pairs->found++;
    }
}

sct_status sct_subspace_run(sct_subspace *s, sct_factor *factor, sct_multiply *multiply, void *user,
                            const sct_subspace_settings *settings, sct_eigenpairs *pairs)
{
    const sct_subspace_settings defaults = sct_subspace_defaults();
    const pencil p = {.factor = factor, .multiply = multiply, .user = user};
    *pairs = (sct_eigenpairs){.lambda = s->lambda, .X = s->V, .error = s->error};
    if (s->n == 0) return SCT_OK;
    if (settings == NULL) settings = &defaults;
    start(s, &p, settings->is_warm_start);
    const sct_status status = s->count > 0 ? iterate(s, &p, settings) : SCT_NOT_ACCURATE;
    if (status != SCT_NOT_ACCURATE) finish(s, &p, settings, pairs);
    pairs->blocks = s->blocks;
    pairs->solves = s->solves;
    return status;
}

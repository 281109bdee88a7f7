/**
 * The door to SuiteSparse CHOLMOD: simplicial LL', which gives the same bits on every processor, needs neither BLAS nor
 * threads, and is under the LGPL (the supernodal module is not).
 *
 * CHOLMOD's own pitfalls, met here: factorize returns TRUE for a matrix that is not positive definite, so the status is
 * read at once (the next call resets it); its default LDL' accepts indefinite matrices, so LL' is asked for; NaN and
 * Inf pass every mode, so values are looked at before and pivots after.
 */
#include "sparse.h"

#include <cholmod.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>

#include "numerics/lanes.h"
#include "numerics/pairs.h"

enum { WIDEST = 3 }; /* columns swept together */

/* The matrix is put into elimination order here, once, so that CHOLMOD has nothing to permute and allocates nothing
 * after the first factorization. */
struct sct_sparse {
    cholmod_common common;
    cholmod_sparse *A; /* upper triangle, permuted */
    cholmod_factor *L;
    sct_lanes *b;   /* n x SCT_AT_ONCE: right-hand sides, permuted and interleaved */
    int *order;     /* order[k]: unknown of the pattern that stands k-th */
    int *place;     /* value of the pattern -> place in A */
    double entries; /* of L */
};

static sct_status status_of(int cholmod_status)
{
    return cholmod_status == CHOLMOD_TOO_LARGE ? SCT_TOO_LARGE : SCT_NO_MEMORY;
}

static void settle(cholmod_common *common)
{
    cholmod_start(common);
    common->print = 0;
    common->error_handler = NULL;
    common->supernodal = CHOLMOD_SIMPLICIAL;
    common->final_ll = 1;
}

/* AMD's ordering and CHOLMOD's postorder of it, copied to s->order. By itself CHOLMOD would try METIS too where AMD
 * looks poor (dense lattices in space, which then take two thirds of the time); but METIS draws from the random
 * numbers of the whole process, and takes SIGTERM and SIGABRT for itself while it runs. */
static sct_status find_order(sct_sparse *s, const sct_pattern *pattern)
{
    cholmod_sparse upper = {.nrow = (size_t)pattern->n,
                            .ncol = (size_t)pattern->n,
                            .nzmax = (size_t)pattern->column[pattern->n],
                            .p = (void *)(uintptr_t)pattern->column, /* only read: the interface has no const */
                            .i = (void *)(uintptr_t)pattern->row,
                            .stype = 1,
                            .itype = CHOLMOD_INT,
                            .xtype = CHOLMOD_PATTERN,
                            .dtype = CHOLMOD_DOUBLE,
                            .sorted = 1,
                            .packed = 1};
    s->common.nmethods = 1;
    s->common.method[0].ordering = CHOLMOD_AMD;
    cholmod_factor *L = cholmod_analyze(&upper, &s->common);
    if (L == NULL) return status_of(s->common.status);
    for (int k = 0; k < pattern->n; k++) s->order[k] = ((const int *)L->Perm)[k];
    cholmod_free_factor(&L, &s->common);
    return SCT_OK;
}

/* Scratch of the set-up: row and column of every value in elimination order, and what sorting them takes. */
typedef struct scratch {
    int *inverse, *row, *column, *sorted, *work;
} scratch;

static bool scratch_allocate(scratch *t, size_t n, size_t n_values)
{
    t->inverse = calloc(n, sizeof *t->inverse);
    t->row = calloc(n_values, sizeof *t->row);
    t->column = calloc(n_values, sizeof *t->column);
    t->sorted = calloc(n_values, sizeof *t->sorted);
    t->work = calloc(n + 1 + n_values, sizeof *t->work);
    return t->inverse != NULL && t->row != NULL && t->column != NULL && t->sorted != NULL && t->work != NULL;
}

static void scratch_free(scratch *t)
{
    free(t->inverse);
    free(t->row);
    free(t->column);
    free(t->sorted);
    free(t->work);
}

/* Lays out s->A and fills s->place. */
static void permute(sct_sparse *s, const sct_pattern *pattern, const scratch *t)
{
    const int n = pattern->n, n_values = pattern->column[n];
    int *column = s->A->p, *row = s->A->i;
    for (int k = 0; k < n; k++) t->inverse[s->order[k]] = k;
    for (int j = 0; j < n; j++) {
        for (int k = pattern->column[j]; k < pattern->column[j + 1]; k++) {
            const int p = t->inverse[pattern->row[k]], q = t->inverse[j];
            t->row[k] = p < q ? p : q;
            t->column[k] = p < q ? q : p;
        }
    }
    sct_sort_pairs(n, n_values, t->row, t->column, t->sorted, t->work);
    for (int j = 0; j <= n; j++) column[j] = 0;
    for (int k = 0; k < n_values; k++) {
        const int value = t->sorted[k];
        column[t->column[value] + 1]++;
        row[k] = t->row[value];
        s->place[value] = k;
    }
    for (int j = 0; j < n; j++) column[j + 1] += column[j];
}

/* Symbolic work only: the numbers of the factor are allocated by the first update, so that its size can be asked for
 * before. */
static sct_status set_up(sct_sparse *s, const sct_pattern *pattern, const scratch *t)
{
    const size_t n = (size_t)pattern->n;
    cholmod_common *common = &s->common;
    const sct_status ordered = find_order(s, pattern);
    if (ordered != SCT_OK) return ordered;
    s->A = cholmod_allocate_sparse(n, n, (size_t)pattern->column[n], 1, 1, 1, CHOLMOD_REAL, common);
    if (s->A == NULL) return status_of(common->status);
    permute(s, pattern, t);
    common->method[0].ordering = CHOLMOD_NATURAL;
    common->postorder = 0;
    s->L = cholmod_analyze(s->A, common);
    if (s->L == NULL) return status_of(common->status);
    s->entries = common->lnz;
    return SCT_OK;
}

sct_sparse *sct_sparse_new(const sct_pattern *pattern, sct_status *status)
{
    const size_t n = (size_t)pattern->n, n_values = (size_t)pattern->column[n];
    *status = SCT_NO_MEMORY;
    sct_sparse *s = calloc(1, sizeof *s);
    if (s == NULL) return NULL;
    settle(&s->common);
    s->order = calloc(n, sizeof *s->order);
    s->place = calloc(n_values, sizeof *s->place);
    s->b = calloc(n * SCT_AT_ONCE, sizeof *s->b);
    scratch t = {0};
    if (scratch_allocate(&t, n, n_values) && s->order != NULL && s->place != NULL && s->b != NULL) {
        *status = set_up(s, pattern, &t);
    }
    scratch_free(&t);
    if (*status == SCT_OK) return s;
    sct_sparse_free(s);
    return NULL;
}

void sct_sparse_free(sct_sparse *s)
{
    if (s == NULL) return;
    cholmod_free_sparse(&s->A, &s->common);
    cholmod_free_factor(&s->L, &s->common);
    cholmod_finish(&s->common);
    free(s->order);
    free(s->place);
    free(s->b);
    free(s);
}

double sct_sparse_entries(const sct_sparse *s)
{
    return s->entries;
}

static sct_status stop(const sct_sparse *s, size_t column, int *stopped_at)
{
    if (stopped_at != NULL) *stopped_at = s->order[column < s->A->ncol ? column : s->A->ncol - 1];
    return SCT_NOT_CONVEX;
}

/* The first column of A with a value that is not finite; ncol when there is none. */
static size_t first_not_finite(const cholmod_sparse *A)
{
    const int *column = A->p;
    const double *x = A->x;
    for (size_t j = 0; j < A->ncol; j++) {
        for (int k = column[j]; k < column[j + 1]; k++) {
            if (!isfinite(x[k])) return j;
        }
    }
    return A->ncol;
}

sct_status sct_sparse_update(sct_sparse *s, const double values[], int *stopped_at)
{
    double *x = s->A->x;
    for (size_t k = 0; k < s->A->nzmax; k++) x[s->place[k]] = values[k];
    const size_t bad = first_not_finite(s->A);
    if (bad < s->A->ncol) return stop(s, bad, stopped_at);

    const int done = cholmod_factorize(s->A, s->L, &s->common);
    const int status = s->common.status;
    if (status == CHOLMOD_NOT_POSDEF) return stop(s, s->L->minor, stopped_at);
    if (!done || status < CHOLMOD_OK) return status_of(status);
    if (s->L->minor < s->L->n) return stop(s, s->L->minor, stopped_at);
    const int *column = s->L->p;
    const double *l = s->L->x;
    for (size_t j = 0; j < s->L->n; j++) {
        if (!(l[column[j]] > 0.0 && isfinite(l[column[j]]))) return stop(s, j, stopped_at);
    }
    return SCT_OK;
}

/* Row by row: l(k, i) = (a(k, i) - sum of products) / l(i, i), l(k, k) = sqrt(a(k, k) - sum of squares): two roundings
 * more than the products by the formula, four if a pivot is inverted first. */
double sct_sparse_rounding(sct_sparse *s)
{
    enum { BY_PIVOT = 4 };
    const size_t n = s->L->n;
    const int *column = s->L->p, *count = s->L->nz, *row = s->L->i;
    const double *x = s->L->x;
    double *z = (double *)s->b, *t = z + n, most = 0.0;
    for (size_t p = 0; p < 2 * n; p++) z[p] = 0.0;
    for (size_t j = 0; j < n; j++) {
        const int start = column[j], end = start + count[j];
        double v = 0.0;
        for (int p = start; p < end; p++) v += fabs(x[p]);
        for (int p = start; p < end; p++) z[row[p]] += fabs(x[p]) * v;
        for (int p = start + 1; p < end; p++) t[row[p]] += 1.0;
    }
    for (size_t p = 0; p < n; p++) most = fmax(most, sct_gamma(t[p] + BY_PIVOT) * z[p]);
    return most * (1.0 + sct_gamma(3.0 * (double)n + 8.0));
}

/* Column j of L: diagonal first, rows ascending, nz[j] entries. Neighbouring columns with the same rows below them, as
 * the unknowns of a joint have, are swept together. */
typedef struct columns {
    int n;
    const int *start, *count, *row;
    const double *x;
} columns;

/* Does column j + 1 continue column j? It holds all rows that j has below, so that their numbers tell. */
static inline bool continues(const columns *L, int j)
{
    return j + 1 < L->n && L->count[j] == L->count[j + 1] + 1 && L->row[L->start[j] + 1] == j + 1;
}

/* L y = b for w columns from j on and P pairs of right-hand sides, in place. */
SCT_INLINE void forward_columns(const int w, const int P, const columns *L, int j, sct_lanes *restrict b)
{
    const double *x[WIDEST];
    sct_lanes v[WIDEST * SCT_AT_ONCE];
    SCT_UNROLL
    for (int c = 0; c < w; c++) {
        x[c] = L->x + L->start[j + c];
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            v[c * P + r] = b[(j + c) * P + r];
            SCT_UNROLL
            for (int e = 0; e < c; e++) v[c * P + r] -= x[e][c - e] * v[e * P + r];
            v[c * P + r] /= x[c][0];
            b[(j + c) * P + r] = v[c * P + r];
        }
    }
    const int *row = L->row + L->start[j] + w;
    const int m = L->count[j] - w;
    for (int k = 0; k < m; k++) {
        sct_lanes *z = b + row[k] * P;
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            sct_lanes sum = z[r];
            SCT_UNROLL
            for (int c = 0; c < w; c++) sum -= x[c][w - c + k] * v[c * P + r];
            z[r] = sum;
        }
    }
}

/* L'x = y for the same. */
SCT_INLINE void backward_columns(const int w, const int P, const columns *L, int j, sct_lanes *restrict b)
{
    const double *x[WIDEST];
    sct_lanes v[WIDEST * SCT_AT_ONCE];
    SCT_UNROLL
    for (int c = 0; c < w; c++) {
        x[c] = L->x + L->start[j + c];
        SCT_UNROLL
        for (int r = 0; r < P; r++) v[c * P + r] = b[(j + c) * P + r];
    }
    const int *row = L->row + L->start[j] + w;
    const int m = L->count[j] - w;
    for (int k = 0; k < m; k++) {
        const sct_lanes *z = b + row[k] * P;
        SCT_UNROLL
        for (int c = 0; c < w; c++) {
            SCT_UNROLL
            for (int r = 0; r < P; r++) v[c * P + r] -= x[c][w - c + k] * z[r];
        }
    }
    SCT_UNROLL
    for (int c = w - 1; c >= 0; c--) {
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            SCT_UNROLL
            for (int e = c + 1; e < w; e++) v[c * P + r] -= x[c][e - c] * v[e * P + r];
            v[c * P + r] /= x[c][0];
            b[(j + c) * P + r] = v[c * P + r];
        }
    }
}

SCT_INLINE void sweep(const int P, const columns *L, sct_lanes *restrict b)
{
    for (int j = 0, w; j < L->n; j += w) {
        for (w = 1; w < WIDEST && continues(L, j + w - 1);) w++;
        switch (w) {
        case 1: forward_columns(1, P, L, j, b); break;
        case 2: forward_columns(2, P, L, j, b); break;
        default: forward_columns(3, P, L, j, b); break;
        }
    }
    for (int end = L->n, w; end > 0; end -= w) {
        for (w = 1; w < WIDEST && w < end && continues(L, end - w - 1);) w++;
        switch (w) {
        case 1: backward_columns(1, P, L, end - 1, b); break;
        case 2: backward_columns(2, P, L, end - 2, b); break;
        default: backward_columns(3, P, L, end - 3, b); break;
        }
    }
}

/* Solves for `count` <= 2 P right-hand sides. */
SCT_INLINE void solve_block(const int P, const sct_sparse *s, int count, double *restrict rhs)
{
    const columns L = {(int)s->L->n, s->L->p, s->L->nz, s->L->i, s->L->x};
    sct_lanes_gather(P, L.n, count, s->order, rhs, s->b);
    sweep(P, &L, s->b);
    sct_lanes_scatter(P, L.n, count, s->order, s->b, rhs);
}

/* Not cholmod_solve2: its work arrays are allocated anew whenever the number of right-hand sides changes. */
void sct_sparse_solve(sct_sparse *s, int count, double b[])
{
    for (int done = 0; done < count; done += 2 * SCT_AT_ONCE) {
        const int left = count - done;
        double *rhs = b + (size_t)done * s->L->n;
        if (left <= 2)
            solve_block(1, s, left, rhs);
        else
            solve_block(SCT_AT_ONCE, s, left < 2 * SCT_AT_ONCE ? left : 2 * SCT_AT_ONCE, rhs);
    }
}

/* LDL' of one small sparse pattern without allocation: right-looking, by panels of up to three equal columns. */
#include "small.h"

#include <float.h>
#include <math.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/order.h"
#include "numerics/lanes.h"

enum { WIDEST = 3 }; /* columns of a panel: the unknowns of a joint */

/* Neighbouring columns of L with the same rows below them. The w x w block on the diagonal is stored as a packed lower
 * triangle, the rectangle below it row by row, so that one pass over the targets does the work of all w columns. */
typedef struct panel {
    int first, w, m;   /* first column, number of columns, number of rows below */
    int diagonal;      /* where the triangle starts in x */
    int rectangle;     /* where the rectangle starts in x */
    const int *row;    /* m rows, ascending */
    const int *target; /* m (m + 1) / 2 places in x: for each q, of (row[p], row[q]) for p = q .. m-1 */
} panel;

struct sct_small {
    int n, n_panels, n_values;
    panel *panels;
    int *row, *target; /* behind the panels */
    int *order;        /* order[k]: unknown of the pattern that stands k-th */
    int *place;        /* value of the pattern -> place in x */
    size_t size;       /* of x */
    double *x;         /* triangles and rectangles of all panels */
    double *inverse;   /* n: 1 / D */
    double *t;         /* largest rectangle: L D of the panel at work */
    sct_lanes *b;      /* n x SCT_AT_ONCE: right-hand sides, permuted and interleaved */
};

/* Rows of L by columns: entries below the diagonal of column j are row[start[j]] .. row[start[j + 1] - 1]. */
typedef struct columns {
    int *parent, *count, *mark;
    int *upper_start, *upper; /* for each i: the j < i with A(i, j) != 0 in the permuted matrix */
    size_t *start;
    int *row;
} columns;

static void columns_free(columns *c)
{
    free(c->parent);
    free(c->count);
    free(c->mark);
    free(c->upper_start);
    free(c->upper);
    free(c->start);
    free(c->row);
}

static void *array(size_t n, size_t size)
{
    return calloc(n + 1, size); /* + 1: nothing is a pointer too */
}

/* The strictly upper triangle of the permuted matrix by columns. */
static void permute_upper(const sct_pattern *a, const int inverse_order[], columns *c)
{
    for (int pass = 0; pass < 2; pass++) {
        for (int j = 0; j < a->n; j++) {
            for (int k = a->column[j]; k < a->column[j + 1]; k++) {
                const int p = inverse_order[a->row[k]], q = inverse_order[j];
                if (p == q) continue;
                const int i = p > q ? p : q;
                if (pass == 0)
                    c->upper_start[i + 1]++;
                else
                    c->upper[c->upper_start[i] + c->mark[i]++] = p > q ? q : p;
            }
        }
        for (int i = 0; pass == 0 && i < a->n; i++) c->upper_start[i + 1] += c->upper_start[i];
    }
}

/* Elimination tree (Liu 1990) with path compression; mark serves as the ancestors. */
static void find_parents(int n, columns *c)
{
    for (int i = 0; i < n; i++) {
        c->parent[i] = c->mark[i] = -1;
        for (int k = c->upper_start[i]; k < c->upper_start[i + 1]; k++) {
            for (int j = c->upper[k], next; j != -1 && j < i; j = next) {
                next = c->mark[j];
                c->mark[j] = i;
                if (next == -1) c->parent[j] = i;
            }
        }
    }
}

/* Row i of L is the part of the elimination tree that is reached from the entries of A in row i. Visiting the rows in
 * order makes each column ascending. First pass (row == NULL) counts, second writes. Gives up beyond `most` entries;
 * returns how many there are. */
static size_t walk_rows(int n, size_t most, columns *c)
{
    size_t entries = 0;
    for (int i = 0; i < n; i++) c->mark[i] = -1;
    for (int i = 0; i < n && entries <= most; i++) {
        c->mark[i] = i;
        for (int k = c->upper_start[i]; k < c->upper_start[i + 1]; k++) {
            for (int j = c->upper[k]; c->mark[j] != i; j = c->parent[j]) {
                c->mark[j] = i;
                if (c->row != NULL) c->row[c->start[j] + (size_t)c->count[j]] = i;
                c->count[j]++;
                entries++;
            }
        }
    }
    return entries;
}

/* SCT_OK, SCT_NO_MEMORY; SCT_TOO_LARGE when L has more entries than `most` (counted before they are stored). */
static sct_status find_columns(const sct_pattern *a, const int inverse_order[], size_t most, columns *c)
{
    const size_t n = (size_t)a->n;
    c->parent = array(n, sizeof *c->parent);
    c->count = array(n, sizeof *c->count);
    c->mark = array(n, sizeof *c->mark);
    c->upper_start = array(n + 1, sizeof *c->upper_start);
    c->upper = array((size_t)a->column[n], sizeof *c->upper);
    c->start = array(n + 1, sizeof *c->start);
    if (!c->parent || !c->count || !c->mark || !c->upper_start || !c->upper || !c->start) return SCT_NO_MEMORY;
    permute_upper(a, inverse_order, c);
    find_parents(a->n, c);
    if (walk_rows(a->n, most, c) > most) return SCT_TOO_LARGE;
    for (size_t j = 0; j < n; j++) c->start[j + 1] = c->start[j] + (size_t)c->count[j];
    c->row = array(c->start[n], sizeof *c->row);
    if (c->row == NULL) return SCT_NO_MEMORY;
    memset(c->count, 0, n * sizeof *c->count);
    walk_rows(a->n, most, c);
    return SCT_OK;
}

/* Does column j + 1 continue the panel that column j is in? */
static bool continues(const columns *c, int j)
{
    return c->parent[j] == j + 1 && c->count[j] == c->count[j + 1] + 1;
}

/* Cuts the columns into panels and lays out x. Returns the number of updates. */
static size_t lay_out(sct_small *s, const columns *c, int panel_of[])
{
    size_t updates = 0, widest = 0;
    s->n_panels = 0;
    s->size = 0;
    for (int j = 0; j < s->n;) {
        panel *p = &s->panels[s->n_panels];
        *p = (panel){.first = j, .w = 1};
        while (p->w < WIDEST && j + p->w < s->n && continues(c, j + p->w - 1)) p->w++;
        const int last = j + p->w - 1;
        p->m = c->count[last];
        p->row = s->row + c->start[last];
        p->diagonal = (int)s->size;
        p->rectangle = (int)s->size + p->w * (p->w + 1) / 2;
        s->size += (size_t)(p->w * (p->w + 1) / 2) + (size_t)p->m * (size_t)p->w;
        updates += (size_t)p->m * ((size_t)p->m + 1) / 2;
        if ((size_t)p->m * (size_t)p->w > widest) widest = (size_t)p->m * (size_t)p->w;
        for (int k = 0; k < p->w; k++) panel_of[j + k] = s->n_panels;
        j += p->w;
        s->n_panels++;
    }
    s->t = array(widest, sizeof *s->t);
    return updates;
}

/* Place in x of L(i, j), i >= j; *hint is where to start looking in the rows of j's panel, and moves on. */
static int place_of(const panel *p, int i, int j, int *hint)
{
    const int c = j - p->first, r = i - p->first;
    if (r < p->w) return p->diagonal + r * (r + 1) / 2 + c;
    while (p->row[*hint] != i) ++*hint;
    return p->rectangle + *hint * p->w + c;
}

static void find_targets(sct_small *s, const int panel_of[])
{
    int *next = s->target;
    for (int k = 0; k < s->n_panels; k++) {
        panel *p = &s->panels[k];
        p->target = next;
        for (int q = 0; q < p->m; q++) {
            int hint = 0;
            for (int r = q; r < p->m; r++) {
                *next++ = place_of(&s->panels[panel_of[p->row[q]]], p->row[r], p->row[q], &hint);
            }
        }
    }
}

static void find_places(sct_small *s, const sct_pattern *a, const int inverse_order[], const int panel_of[])
{
    for (int j = 0; j < a->n; j++) {
        for (int k = a->column[j]; k < a->column[j + 1]; k++) {
            const int p = inverse_order[a->row[k]], q = inverse_order[j];
            const int low = p < q ? p : q, high = p < q ? q : p;
            int hint = 0;
            s->place[k] = place_of(&s->panels[panel_of[low]], high, low, &hint);
        }
    }
}

/* Everything that depends on the pattern only. */
static sct_status set_up(sct_small *s, const sct_pattern *a, int most_updates, int inverse_order[], int panel_of[],
                         columns *c)
{
    const sct_status ordered = sct_order_amd(a, s->order);
    if (ordered != SCT_OK) return ordered;
    for (int k = 0; k < a->n; k++) inverse_order[s->order[k]] = k;
    /* A panel of w <= 3 columns and m rows has at most w m + 3 entries and at least m updates. */
    const size_t most_entries = WIDEST * ((size_t)most_updates + (size_t)a->n);
    const sct_status found = find_columns(a, inverse_order, most_entries, c);
    if (found != SCT_OK) return found;
    s->row = c->row; /* taken over; the panels point into it */
    c->row = NULL;
    const size_t updates = lay_out(s, c, panel_of);
    if (updates > (size_t)most_updates) return SCT_TOO_LARGE;
    s->target = array(updates, sizeof *s->target);
    s->x = array(s->size, sizeof *s->x);
    if (s->t == NULL || s->target == NULL || s->x == NULL) return SCT_NO_MEMORY;
    find_targets(s, panel_of);
    find_places(s, a, inverse_order, panel_of);
    return SCT_OK;
}

sct_small *sct_small_new(const sct_pattern *pattern, int most_updates, sct_status *status)
{
    const size_t n = (size_t)pattern->n;
    sct_small *s = calloc(1, sizeof *s);
    int *inverse_order = array(n, sizeof *inverse_order), *panel_of = array(n, sizeof *panel_of);
    columns c = {0};
    *status = SCT_NO_MEMORY;
    if (s != NULL) {
        s->n = pattern->n;
        s->n_values = pattern->column[n];
        s->panels = array(n, sizeof *s->panels);
        s->order = array(n, sizeof *s->order);
        s->place = array((size_t)s->n_values, sizeof *s->place);
        s->inverse = array(n, sizeof *s->inverse);
        s->b = array(n * SCT_AT_ONCE, sizeof *s->b);
        if (inverse_order && panel_of && s->panels && s->order && s->place && s->inverse && s->b) {
            *status = set_up(s, pattern, most_updates, inverse_order, panel_of, &c);
        }
    }
    columns_free(&c);
    free(inverse_order);
    free(panel_of);
    if (*status == SCT_OK) return s;
    sct_small_free(s);
    return NULL;
}

void sct_small_free(sct_small *s)
{
    if (s == NULL) return;
    free(s->panels);
    free(s->row);
    free(s->target);
    free(s->order);
    free(s->place);
    free(s->x);
    free(s->inverse);
    free(s->t);
    free(s->b);
    free(s);
}

double sct_small_entries(const sct_small *s)
{
    return (double)s->size;
}

/* The triangle D = L d L' in place. Returns the column with a bad pivot, or -1. */
SCT_INLINE int factor_triangle(const int w, double *restrict D, double *restrict inverse)
{
    for (int c = 0; c < w; c++) {
        double *row = D + c * (c + 1) / 2, y[WIDEST];
        double d = row[c];
        for (int e = 0; e < c; e++) {
            const double *l = D + e * (e + 1) / 2;
            y[e] = row[e];
            for (int g = 0; g < e; g++) y[e] -= y[g] * l[g];
        }
        for (int e = 0; e < c; e++) {
            row[e] = y[e] * inverse[e];
            d -= y[e] * row[e];
        }
        if (!(d >= DBL_MIN && d <= DBL_MAX)) return c; /* also NaN; a subnormal pivot has no finite inverse */
        inverse[c] = 1.0 / d;
    }
    return -1;
}

/* The rectangle: t = L d by substitution with the triangle, and L itself in place. */
SCT_INLINE void factor_rectangle(const int w, int m, const double *restrict D, const double *restrict inverse,
                                 double *restrict l, double *restrict t)
{
    for (int p = 0; p < m; p++, l += w, t += w) {
        for (int c = 0; c < w; c++) {
            double y = l[c];
            for (int e = 0; e < c; e++) y -= t[e] * D[c * (c + 1) / 2 + e];
            t[c] = y;
        }
        for (int c = 0; c < w; c++) l[c] = t[c] * inverse[c];
    }
}

/* A(row[p], row[q]) -= sum_c L d(q, c) L(p, c). The targets lie in later panels: never in l. */
SCT_INLINE void update_targets(const int w, int m, const double *restrict l, const double *restrict t,
                               const int *restrict target, double *restrict x)
{
    for (int q = 0; q < m; q++, t += w, l += w) {
        int p = 0;
        for (; p + 1 < m - q; p += 2) { /* two at once: measured up to 1.3 times as fast */
            double first = t[0] * l[p * w], second = t[0] * l[p * w + w];
            for (int c = 1; c < w; c++) {
                first += t[c] * l[p * w + c];
                second += t[c] * l[p * w + w + c];
            }
            x[target[p]] -= first;
            x[target[p + 1]] -= second;
        }
        if (p < m - q) {
            double last = t[0] * l[p * w];
            for (int c = 1; c < w; c++) last += t[c] * l[p * w + c];
            x[target[p]] -= last;
        }
        target += m - q;
    }
}

SCT_INLINE int factor_panel(const int w, const panel *p, double *x, double *inverse, double *t)
{
    const int bad = factor_triangle(w, x + p->diagonal, inverse + p->first);
    if (bad >= 0) return p->first + bad;
    factor_rectangle(w, p->m, x + p->diagonal, inverse + p->first, x + p->rectangle, t);
    update_targets(w, p->m, x + p->rectangle, t, p->target, x);
    return -1;
}

sct_status sct_small_update(sct_small *s, const double values[], int *stopped_at)
{
    memset(s->x, 0, s->size * sizeof *s->x);
    for (int k = 0; k < s->n_values; k++) s->x[s->place[k]] = values[k];
    for (int k = 0; k < s->n_panels; k++) {
        const panel *p = &s->panels[k];
        int bad;
        switch (p->w) {
        case 1: bad = factor_panel(1, p, s->x, s->inverse, s->t); break;
        case 2: bad = factor_panel(2, p, s->x, s->inverse, s->t); break;
        default: bad = factor_panel(3, p, s->x, s->inverse, s->t); break;
        }
        if (bad >= 0) {
            if (stopped_at != NULL) *stopped_at = s->order[bad];
            return SCT_NOT_CONVEX;
        }
    }
    return SCT_OK;
}

/* y = L^-1 b for the columns of a panel, for P interleaved pairs of right-hand sides. */
SCT_INLINE void forward_panel(const int w, const int P, const panel *p, const double *restrict x, sct_lanes *restrict b)
{
    const double *D = x + p->diagonal, *l = x + p->rectangle;
    sct_lanes *y = b + p->first * P, v[WIDEST * SCT_AT_ONCE];
    SCT_UNROLL
    for (int c = 0; c < w; c++) {
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            v[c * P + r] = y[c * P + r];
            SCT_UNROLL
            for (int e = 0; e < c; e++) v[c * P + r] -= D[c * (c + 1) / 2 + e] * v[e * P + r];
            y[c * P + r] = v[c * P + r];
        }
    }
    for (int k = 0; k < p->m; k++, l += w) {
        sct_lanes *z = b + p->row[k] * P;
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            sct_lanes sum = l[0] * v[r];
            SCT_UNROLL
            for (int c = 1; c < w; c++) sum += l[c] * v[c * P + r];
            z[r] -= sum;
        }
    }
}

/* b = L'^-1 D^-1 y for the columns of a panel. */
SCT_INLINE void backward_panel(const int w, const int P, const panel *p, const double *restrict x,
                               const double *restrict inverse, sct_lanes *restrict b)
{
    const double *D = x + p->diagonal, *l = x + p->rectangle;
    sct_lanes *y = b + p->first * P, v[WIDEST * SCT_AT_ONCE];
    SCT_UNROLL
    for (int c = 0; c < w; c++) {
        SCT_UNROLL
        for (int r = 0; r < P; r++) v[c * P + r] = y[c * P + r] * inverse[p->first + c];
    }
    for (int k = 0; k < p->m; k++, l += w) {
        const sct_lanes *z = b + p->row[k] * P;
        SCT_UNROLL
        for (int c = 0; c < w; c++) {
            SCT_UNROLL
            for (int r = 0; r < P; r++) v[c * P + r] -= l[c] * z[r];
        }
    }
    SCT_UNROLL
    for (int c = w - 1; c >= 0; c--) {
        SCT_UNROLL
        for (int r = 0; r < P; r++) {
            SCT_UNROLL
            for (int e = c + 1; e < w; e++) v[c * P + r] -= D[e * (e + 1) / 2 + c] * v[e * P + r];
            y[c * P + r] = v[c * P + r];
        }
    }
}

/* Both sweeps over `count` <= 2 P right-hand sides. */
SCT_INLINE void solve_block(const int P, const sct_small *s, int count, double *restrict rhs)
{
    sct_lanes_gather(P, s->n, count, s->order, rhs, s->b);
    for (int k = 0; k < s->n_panels; k++) {
        const panel *p = &s->panels[k];
        switch (p->w) {
        case 1: forward_panel(1, P, p, s->x, s->b); break;
        case 2: forward_panel(2, P, p, s->x, s->b); break;
        default: forward_panel(3, P, p, s->x, s->b); break;
        }
    }
    for (int k = s->n_panels - 1; k >= 0; k--) {
        const panel *p = &s->panels[k];
        switch (p->w) {
        case 1: backward_panel(1, P, p, s->x, s->inverse, s->b); break;
        case 2: backward_panel(2, P, p, s->x, s->inverse, s->b); break;
        default: backward_panel(3, P, p, s->x, s->inverse, s->b); break;
        }
    }
    sct_lanes_scatter(P, s->n, count, s->order, s->b, rhs);
}

/* v = D |L'| e by the columns of a panel, and in t the number of entries of L left of the diagonal. */
static void weigh_columns(const panel *p, const double *x, const double *inverse, double v[], double t[])
{
    const double *D = x + p->diagonal, *l = x + p->rectangle;
    for (int c = 0; c < p->w; c++) {
        double sum = 1.0;
        for (int r = c + 1; r < p->w; r++) sum += fabs(D[r * (r + 1) / 2 + c]);
        for (int k = 0; k < p->m; k++) sum += fabs(l[k * p->w + c]);
        v[p->first + c] = sum / inverse[p->first + c];
        t[p->first + c] += c;
    }
    for (int k = 0; k < p->m; k++) t[p->row[k]] += p->w;
}

/* z += |L| v by the columns of a panel. */
static void add_columns(const panel *p, const double *x, const double v[], double z[])
{
    const double *D = x + p->diagonal, *l = x + p->rectangle;
    for (int c = 0; c < p->w; c++) {
        const double v_c = v[p->first + c];
        z[p->first + c] += v_c;
        for (int r = c + 1; r < p->w; r++) z[p->first + r] += fabs(D[r * (r + 1) / 2 + c]) * v_c;
        for (int k = 0; k < p->m; k++) z[p->row[k]] += fabs(l[k * p->w + c]) * v_c;
    }
}

/* An entry is L(p, k) = fl(y(p, k) fl(1 / d_k)), and y(p, q) what is left after t_p products y(q, k) L(p, k) at most:
 * two roundings more than the products. */
double sct_small_rounding(sct_small *s)
{
    enum { BY_PIVOT = 2 };
    const size_t n = (size_t)s->n;
    double *v = (double *)s->b, *z = v + n, *t = z + n, most = 0.0;
    memset(v, 0, 3 * n * sizeof *v);
    for (int k = 0; k < s->n_panels; k++) weigh_columns(&s->panels[k], s->x, s->inverse, v, t);
    for (int k = 0; k < s->n_panels; k++) add_columns(&s->panels[k], s->x, v, z);
    for (size_t p = 0; p < n; p++) most = fmax(most, sct_gamma(t[p] + BY_PIVOT) * z[p]);
    return most * (1.0 + sct_gamma(3.0 * (double)n + 8.0)); /* sums of up to n terms, three deep */
}

void sct_small_solve(sct_small *s, int count, double b[])
{
    for (int done = 0; done < count; done += 2 * SCT_AT_ONCE) {
        const int left = count - done;
        double *rhs = b + (size_t)done * (size_t)s->n;
        if (left <= 2)
            solve_block(1, s, left, rhs);
        else
            solve_block(SCT_AT_ONCE, s, left < 2 * SCT_AT_ONCE ? left : 2 * SCT_AT_ONCE, rhs);
    }
}

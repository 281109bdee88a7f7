#include "verify/matrix.h"

#include <stdlib.h>

#include "numerics/skyline.h"
#include "numerics/sparse.h"

/* The skyline is used up to about a second and 160 MB; above, CHOLMOD. */
static const double MOST_MULTIPLICATIONS = 1e9, MOST_ENTRIES = 2e7;

struct sct_matrix {
    int n;
    sct_skyline *skyline;
    sct_sparse *sparse; /* one of the two */
    int *column, *row;  /* of the sparse one */
    double *values;
};

/* ---- sparse -------------------------------------------------------------------------------------------------------
 */

static int compare_pairs(const void *a, const void *b)
{
    const int *p = a, *q = b;
    return p[1] != q[1] ? (p[1] > q[1]) - (p[1] < q[1]) : (p[0] > q[0]) - (p[0] < q[0]);
}

/* The pairs of joints that a member ties, and each joint with itself, by the second. */
static void list_pairs(const sct_model *m, int pair[][2])
{
    for (int e = 0; e < m->n_members; e++) {
        const int a = m->members[e].from, b = m->members[e].to;
        pair[e][0] = a < b ? a : b;
        pair[e][1] = a < b ? b : a;
    }
    for (int j = 0; j < m->n_joints; j++) pair[m->n_members + j][0] = pair[m->n_members + j][1] = j;
    qsort(pair, (size_t)(m->n_members + m->n_joints), sizeof *pair, compare_pairs);
}

/* The pattern of CHOLMOD's upper triangle. */
static void list_rows(sct_matrix *x, int size, int n_pairs, int pair[][2])
{
    int n = 0;
    for (int begin = 0, end; begin < n_pairs; begin = end) { /* the pairs of one column of blocks */
        for (end = begin; end < n_pairs && pair[end][1] == pair[begin][1]; end++) continue;
        for (int c = 0; c < size; c++) {
            for (int p = begin; p < end; p++) {
                if (p > begin && pair[p][0] == pair[p - 1][0]) continue;
                const int rows = pair[p][0] == pair[p][1] ? c + 1 : size;
                for (int i = 0; i < rows; i++) x->row[n++] = pair[p][0] * size + i;
            }
            x->column[pair[begin][1] * size + c + 1] = n;
        }
    }
}

static sct_status build_sparse(sct_matrix *x, const sct_model *m, int size)
{
    const int n_pairs = m->n_members + m->n_joints;
    int(*pair)[2] = calloc((size_t)n_pairs, sizeof *pair);
    sct_status status = SCT_NO_MEMORY;
    x->column = calloc((size_t)x->n + 2, sizeof *x->column);
    x->row = calloc((size_t)n_pairs * (size_t)(size * size), sizeof *x->row);
    x->values = calloc((size_t)n_pairs * (size_t)(size * size), sizeof *x->values);
    if (pair != NULL && x->column != NULL && x->row != NULL && x->values != NULL) {
        list_pairs(m, pair);
        list_rows(x, size, n_pairs, pair);
        const sct_pattern pattern = {.n = x->n, .column = x->column, .row = x->row};
        x->sparse = sct_sparse_new(&pattern, &status);
    }
    free(pair);
    return status;
}

/* ---- either -------------------------------------------------------------------------------------------------------
 */

static sct_status build(sct_matrix *x, const sct_model *m, int size)
{
    double multiplications, entries;
    int *first = calloc((size_t)x->n + 1, sizeof *first);
    if (first == NULL) return SCT_NO_MEMORY;
    for (int i = 0; i < x->n; i++) first[i] = i - i % size;
    for (int e = 0; e < m->n_members; e++) {
        const int a = m->members[e].from, b = m->members[e].to, low = a < b ? a : b, high = a < b ? b : a;
        for (int i = 0; i < size; i++) {
            if (low * size < first[high * size + i]) first[high * size + i] = low * size;
        }
    }
    sct_skyline_cost(x->n, first, &multiplications, &entries);
    const bool is_large = multiplications > MOST_MULTIPLICATIONS || entries > MOST_ENTRIES;
    if (!is_large) x->skyline = sct_skyline_new(x->n, first);
    free(first);
    if (is_large) return build_sparse(x, m, size);
    return x->skyline != NULL ? SCT_OK : SCT_NO_MEMORY;
}

sct_matrix *sct_matrix_new(const sct_model *model, int size, sct_status *status)
{
    sct_matrix *x = calloc(1, sizeof *x);
    *status = SCT_NO_MEMORY;
    if (x == NULL) return NULL;
    x->n = model->n_joints * size;
    *status = build(x, model, size);
    if (*status == SCT_OK) return x;
    sct_matrix_free(x);
    return NULL;
}

void sct_matrix_free(sct_matrix *x)
{
    if (x == NULL) return;
    sct_skyline_free(x->skyline);
    sct_sparse_free(x->sparse);
    free(x->column);
    free(x->row);
    free(x->values);
    free(x);
}

void sct_matrix_add(sct_matrix *x, int i, int j, double value)
{
    if (x->skyline != NULL) {
        *sct_skyline_at(x->skyline, i, j) += value;
        return;
    }
    int low = x->column[i], high = x->column[i + 1] - 1; /* the upper triangle: column i, row j */
    while (low < high) {
        const int middle = low + (high - low) / 2;
        if (x->row[middle] < j)
            low = middle + 1;
        else
            high = middle;
    }
    x->values[low] += value;
}

sct_status sct_matrix_factor(sct_matrix *x)
{
    if (x->skyline != NULL) return sct_skyline_factor(x->skyline) ? SCT_OK : SCT_SELF_CHECK;
    const sct_status status = sct_sparse_update(x->sparse, x->values, NULL);
    return status == SCT_NOT_CONVEX ? SCT_SELF_CHECK : status;
}

void sct_matrix_solve(sct_matrix *x, double b[])
{
    if (x->skyline != NULL)
        sct_skyline_solve(x->skyline, b);
    else
        sct_sparse_solve(x->sparse, 1, b);
}

/* Cholesky factor inside the envelope, row by row. */
#include "numerics/skyline.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/dense.h"

struct sct_skyline {
    int n;
    int *first;    /* n */
    size_t *start; /* n + 1: row i at a[start[i]] */
    double *a;
};

void sct_skyline_cost(int n, const int first[], double *multiplications, double *entries)
{
    *multiplications = *entries = 0.0;
    for (int i = 0; i < n; i++) {
        const double width = (double)(i - first[i]) + 1.0;
        *entries += width;
        *multiplications += 0.5 * width * width;
    }
}

sct_skyline *sct_skyline_new(int n, const int first[])
{
    sct_skyline *s = calloc(1, sizeof *s);
    if (s == NULL) return NULL;
    s->n = n;
    s->first = calloc((size_t)n + 1, sizeof *s->first);
    s->start = calloc((size_t)n + 1, sizeof *s->start);
    if (s->first != NULL && s->start != NULL) {
        for (int i = 0; i < n; i++) s->start[i + 1] = s->start[i] + (size_t)(i - first[i]) + 1;
        memcpy(s->first, first, (size_t)n * sizeof *first);
        s->a = calloc(s->start[n] + 1, sizeof *s->a);
    }
    if (s->a != NULL) return s;
    sct_skyline_free(s);
    return NULL;
}

void sct_skyline_free(sct_skyline *s)
{
    if (s == NULL) return;
    free(s->first);
    free(s->start);
    free(s->a);
    free(s);
}

double *sct_skyline_at(sct_skyline *s, int i, int j)
{
    return s->a + s->start[i] + (size_t)(j - s->first[i]);
}

bool sct_skyline_factor(sct_skyline *s)
{
    for (int i = 0; i < s->n; i++) {
        const int from = s->first[i];
        double *L_i = sct_skyline_at(s, i, from), pivot = L_i[i - from];
        for (int j = from; j < i; j++) {
            const int k = from > s->first[j] ? from : s->first[j];
            const double l =
                (L_i[j - from] - sct_dot(j - k, L_i + (k - from), sct_skyline_at(s, j, k))) / *sct_skyline_at(s, j, j);
            L_i[j - from] = l;
            pivot -= l * l;
        }
        if (!(pivot > 0.0) || !isfinite(pivot)) return false;
        L_i[i - from] = sqrt(pivot);
    }
    return true;
}

void sct_skyline_solve(const sct_skyline *s, double b[])
{
    for (int i = 0; i < s->n; i++) {
        const int from = s->first[i];
        const double *L_i = s->a + s->start[i];
        b[i] = (b[i] - sct_dot(i - from, L_i, b + from)) / L_i[i - from];
    }
    for (int i = s->n - 1; i >= 0; i--) {
        const int from = s->first[i];
        const double *L_i = s->a + s->start[i];
        b[i] /= L_i[i - from];
        sct_axpy(i - from, -b[i], L_i, b + from);
    }
}

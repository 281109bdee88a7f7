/* Spans of a few short vectors. */
#include "span.h"

#include <math.h>
#include <string.h>

double sct_dot(int n, const double a[], const double b[])
{
    double sum = 0.0;
    for (int i = 0; i < n; i++) sum += a[i] * b[i];
    return sum;
}

void sct_span_normalise(int n, double v[])
{
    const double length = sqrt(sct_dot(n, v, v));
    for (int i = 0; i < n; i++) v[i] /= length;
}

void sct_span_remove(int n, int r, sct_row E[], double v[])
{
    for (int i = 0; i < 2 * r; i++) {
        const double c = sct_dot(n, E[i % r], v);
        for (int j = 0; j < n; j++) v[j] -= c * E[i % r][j];
    }
}

static void copy(int n, const double from[], double to[])
{
    memcpy(to, from, (size_t)n * sizeof *to);
}

/* Gram-Schmidt, the longest row next; returns the rank. */
static int row_space(int m, int n, sct_row rows[], double tol, sct_row E[])
{
    int rank = 0;
    while (rank < n) {
        int longest = -1;
        double best = tol * tol;
        for (int i = 0; i < m; i++) {
            const double length2 = sct_dot(n, rows[i], rows[i]);
            if (!(length2 > best)) continue;
            best = length2;
            longest = i;
        }
        if (longest < 0) break;
        copy(n, rows[longest], E[rank]);
        sct_span_normalise(n, E[rank++]);
        for (int i = 0; i < m; i++) sct_span_remove(n, rank, E, rows[i]);
    }
    return rank;
}

/* The row space, completed by what unit vectors have outside it, the farthest first. */
int sct_span_null(int m, int n, sct_row rows[], double tol, sct_row N[])
{
    sct_row E[SCT_ROW];
    const int rank = row_space(m, n, rows, tol, E);
    for (int k = rank; k < n; k++) {
        double best = 0.0;
        for (int axis = 0; axis < n; axis++) {
            sct_row unit = {0.0};
            unit[axis] = 1.0;
            sct_span_remove(n, k, E, unit);
            const double length2 = sct_dot(n, unit, unit);
            if (!(length2 > best + 1e-12)) continue; /* ties: the first axis */
            best = length2;
            copy(n, unit, E[k]);
        }
        sct_span_normalise(n, E[k]);
        copy(n, E[k], N[k - rank]);
    }
    return n - rank;
}

int sct_span_reduce(int k, int n, int first, int from, int to, sct_row V[], double tol, int pivot[])
{
    int done = first;
    for (; done < k; done++) {
        int r = -1, c = -1;
        double best = tol;
        for (int i = done; i < k; i++) {
            for (int j = from; j < to; j++) {
                if (!(fabs(V[i][j]) > best * (1.0 + 1e-9))) continue; /* ties: the first row, the first column */
                best = fabs(V[i][j]);
                r = i;
                c = j;
            }
        }
        if (r < 0) break;
        for (int j = 0; j < n; j++) {
            const double swap = V[done][j];
            V[done][j] = V[r][j];
            V[r][j] = swap;
        }
        const double top = V[done][c];
        for (int j = 0; j < n; j++) V[done][j] /= top;
        for (int i = 0; i < k; i++) {
            const double factor = V[i][c];
            for (int j = 0; j < n && i != done; j++) V[i][j] -= factor * V[done][j];
        }
        if (pivot != NULL) pivot[done - first] = c;
    }
    return done - first;
}

/* The same span by vectors that are as local as they can be. */
#include "local_basis.h"

#include <math.h>
#include <stddef.h>

static void swap(int n, double a[], double b[])
{
    for (int i = 0; i < n; i++) {
        const double kept = a[i];
        a[i] = b[i];
        b[i] = kept;
    }
}

/* Gauss-Jordan with full pivoting. */
static void localise(int n, int m, double V[])
{
    for (int done = 0; done < m; done++) {
        double best = 0.0;
        int r = done, c = 0;
        for (int k = done; k < m; k++) {
            for (int i = 0; i < n; i++) {
                const double value = fabs(V[(size_t)k * (size_t)n + (size_t)i]);
                if (!(value > best * (1.0 + 1e-9))) continue; /* ties: the first unknown */
                best = value;
                r = k;
                c = i;
            }
        }
        if (!(best > 0.0)) return;
        double *top = V + (size_t)done * (size_t)n, *pivot = V + (size_t)r * (size_t)n;
        swap(n, top, pivot);
        const double scale_by = 1.0 / top[c];
        for (int i = 0; i < n; i++) top[i] *= scale_by;
        for (int k = 0; k < m; k++) {
            double *v = V + (size_t)k * (size_t)n;
            const double factor = v[c];
            if (k == done) continue;
            for (int i = 0; i < n; i++) v[i] -= factor * top[i];
        }
    }
}

/* The first entry that is shown; pivots are 1. */
static int first_shown(int n, const double v[], double shown)
{
    int i = 0;
    while (i < n - 1 && !(fabs(v[i]) >= shown)) i++;
    return i;
}

static void sort(int n, int m, double V[], double shown)
{
    for (int done = 0; done < m; done++) {
        int best = done, best_at = n;
        for (int k = done; k < m; k++) {
            const int at = first_shown(n, V + (size_t)k * (size_t)n, shown);
            if (at >= best_at) continue;
            best_at = at;
            best = k;
        }
        if (best != done) swap(n, V + (size_t)done * (size_t)n, V + (size_t)best * (size_t)n);
    }
}

void sct_local_basis(int n, int m, double V[], double shown)
{
    localise(n, m, V);
    sort(n, m, V, shown);
}

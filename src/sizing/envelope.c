/* Radius of gyration over area: a power law, or the C1 upper hull of a ladder. */
#include "envelope.h"

#include <math.h>

static sct_status allocate(sct_arena *arena, int n, sct_envelope *e)
{
    e->n = n;
    e->s = sct_arena_array(arena, (size_t)n, sizeof(double));
    e->h = sct_arena_array(arena, (size_t)n, sizeof(double));
    e->slope = sct_arena_array(arena, (size_t)n, sizeof(double));
    return e->s == NULL || e->h == NULL || e->slope == NULL ? SCT_NO_MEMORY : SCT_OK;
}

sct_status sct_envelope_power(sct_arena *arena, double c, double p, sct_envelope *e)
{
    *e = (sct_envelope){0};
    if (!(c > 0.0)) return SCT_OK;
    const sct_status status = allocate(arena, 1, e);
    if (status != SCT_OK) return status;
    e->h[0] = log(c); /* a straight line through (0, ln c) */
    e->slope[0] = p;
    return SCT_OK;
}

sct_status sct_envelope_relation(sct_arena *arena, double c, double p, sct_envelope *e)
{
    const sct_status status = sct_envelope_power(arena, c, 0.5 * (p - 1.0), e); /* i = sqrt(c A^(p - 1)) */
    if (status == SCT_OK && e->n > 0) e->h[0] *= 0.5;
    return status;
}

static double secant(const sct_envelope *e, int k)
{
    return (e->h[k + 1] - e->h[k]) / (e->s[k + 1] - e->s[k]);
}

/* Keeps the points of the upper hull: each new point drops those before it that lie below the chord. Points on it stay:
 * the curve then follows a relation that sections were made by. */
static void push(sct_envelope *e, double s, double h)
{
    static const double SAME = 1e-9; /* in ln A */
    if (e->n > 0 && s - e->s[e->n - 1] < SAME) {
        if (h <= e->h[e->n - 1]) return;
        e->n--;
    }
    if (e->n > 0 && h <= e->h[e->n - 1]) return; /* heavier and not stiffer: the flat end covers it */
    static const double ON = 1e-9;               /* relative: secants of points on one line */
    while (e->n >= 2 && (h - e->h[e->n - 1]) / (s - e->s[e->n - 1]) > secant(e, e->n - 2) * (1.0 + ON)) e->n--;
    e->s[e->n] = s;
    e->h[e->n++] = h;
}

sct_status sct_envelope_points(sct_arena *arena, int n, const double s[], const double h[], sct_envelope *e)
{
    *e = (sct_envelope){0};
    for (int k = 0; k < n; k++)
        if (isnan(h[k])) return SCT_OK;
    const sct_status status = allocate(arena, n, e);
    if (status != SCT_OK) return status;
    e->n = 0;
    for (int k = 0; k < n; k++) push(e, s[k], h[k]);
    /* Slopes between the two secants keep the cubic on or above each chord: weighted harmonic mean (Fritsch and
     * Butland, SIAM J. Sci. Stat. Comput. 5, 1984). First: its secant. Last: flat, as what follows. */
    const int last = e->n - 1;
    e->slope[0] = last > 0 ? secant(e, 0) : 0.5;
    for (int k = 1; k < last; k++) {
        const double a = secant(e, k - 1), b = secant(e, k), da = e->s[k] - e->s[k - 1], db = e->s[k + 1] - e->s[k];
        const double wa = (da + 2.0 * db) / (3.0 * (da + db));
        e->slope[k] = 1.0 / (wa / a + (1.0 - wa) / b);
    }
    if (last > 0) e->slope[last] = 0.0;
    return SCT_OK;
}

sct_status sct_envelope_ladder(sct_arena *arena, const sct_family *family, int n, const int sections[], int axis,
                               sct_envelope *e)
{
    double *s = sct_arena_array(arena, (size_t)n, sizeof *s), *h = sct_arena_array(arena, (size_t)n, sizeof *h);
    if (s == NULL || h == NULL) return SCT_NO_MEMORY;
    for (int k = 0; k < n; k++) { /* lightest first */
        const sct_section *x = &family->sections[sections[k]];
        s[k] = log(x->A);
        h[k] = 0.5 * log(x->I[axis] / x->A);
    }
    return sct_envelope_points(arena, n, s, h, e);
}

sct_curve sct_envelope_at(const sct_envelope *e, double s)
{
    const int last = e->n - 1;
    if (last == 0 || s <= e->s[0]) return (sct_curve){e->h[0] + e->slope[0] * (s - e->s[0]), e->slope[0], 0.0};
    if (s >= e->s[last]) return (sct_curve){e->h[last] + e->slope[last] * (s - e->s[last]), e->slope[last], 0.0};
    int lo = 0, hi = last;
    while (hi - lo > 1) {
        const int mid = (lo + hi) / 2;
        if (e->s[mid] <= s)
            lo = mid;
        else
            hi = mid;
    }
    const double w = e->s[hi] - e->s[lo], t = (s - e->s[lo]) / w, D = secant(e, lo), a = e->slope[lo], b = e->slope[hi];
    const double c2 = 3.0 * D - 2.0 * a - b, c3 = a + b - 2.0 * D; /* h = h0 + w (a t + c2 t^2 + c3 t^3) */
    return (sct_curve){
        e->h[lo] + w * t * (a + t * (c2 + t * c3)),
        a + t * (2.0 * c2 + 3.0 * t * c3),
        (2.0 * c2 + 6.0 * t * c3) / w,
    };
}

#include "sizing/shapes.h"

#include <math.h>

sct_status sct_curves_of_area(sct_arena *arena, const sct_group *g, sct_group_curves *curves)
{
    sct_status status = sct_envelope_power(arena, g->J.c, g->J.p, &curves->J);
    for (int axis = 0; axis < 2 && status == SCT_OK; axis++) {
        status = sct_envelope_relation(arena, g->I[axis].c, g->I[axis].p, &curves->i[axis]);
        if (status == SCT_OK) status = sct_envelope_power(arena, g->W[axis].c, g->W[axis].p, &curves->W[axis]);
    }
    return status;
}

sct_status sct_curves_of_ladder(sct_arena *arena, const sct_family *family, int n, const int sections[],
                                sct_group_curves *curves)
{
    double *s = sct_arena_array(arena, (size_t)n, sizeof *s), *h = sct_arena_array(arena, 3 * (size_t)n, sizeof *h);
    if (s == NULL || h == NULL) return SCT_NO_MEMORY;
    for (int k = 0; k < n; k++) {
        const sct_section *x = &family->sections[sections[k]];
        s[k] = log(x->A);
        h[k] = log(x->W[0]);
        h[n + k] = log(x->W[1]);
        h[2 * n + k] = log(x->J);
    }
    sct_status status = sct_envelope_points(arena, n, s, h + 2 * n, &curves->J);
    for (int axis = 0; axis < 2 && status == SCT_OK; axis++) {
        status = sct_envelope_ladder(arena, family, n, sections, axis, &curves->i[axis]);
        if (status == SCT_OK) status = sct_envelope_points(arena, n, s, h + axis * n, &curves->W[axis]);
    }
    return status;
}

static sct_curve at(const sct_envelope *e, double z)
{
    return e->n > 0 ? sct_envelope_at(e, z) : (sct_curve){.h = NAN};
}

sct_shape_slopes sct_curves_slopes(const sct_group_curves *curves, double A)
{
    const double z = log(A);
    return (sct_shape_slopes){.i = {at(&curves->i[0], z), at(&curves->i[1], z)},
                              .W = {at(&curves->W[0], z), at(&curves->W[1], z)}};
}

sct_shape sct_curves_shape(const sct_group_curves *curves, double A)
{
    const sct_shape_slopes s = sct_curves_slopes(curves, A);
    return (sct_shape){.A = A, .i = {exp(s.i[0].h), exp(s.i[1].h)}, .W = {exp(s.W[0].h), exp(s.W[1].h)}};
}

sct_curve sct_curve_of_I(sct_curve i, double A)
{
    return (sct_curve){.h = log(A) + 2.0 * i.h, .h1 = 1.0 + 2.0 * i.h1, .h2 = 2.0 * i.h2};
}

/* y = e^h: y' = y h', y'' = y (h'^2 + h''). */
static void put(sct_properties *p, sct_property which, sct_curve ln)
{
    p->P[which] = exp(ln.h);
    p->d1[which] = p->P[which] * ln.h1;
    p->d2[which] = p->P[which] * (ln.h1 * ln.h1 + ln.h2);
}

sct_properties sct_curves_properties(const sct_group_curves *curves, double A)
{
    const double z = log(A);
    sct_properties p = {.P = {A}, .d1 = {A}, .d2 = {A}};
    put(&p, SCT_OF_INERTIA_IN, sct_curve_of_I(at(&curves->i[0], z), A));
    put(&p, SCT_OF_INERTIA_OUT, sct_curve_of_I(at(&curves->i[1], z), A));
    put(&p, SCT_OF_TORSION, at(&curves->J, z));
    return p;
}

#include "diagram_curves.h"

#include <math.h>
#include <stdlib.h>

enum { BETWEEN = 20, ENVELOPE_POINTS = 61 };

double sct_curve_at(const sct_curve *c, double x)
{
    int i = 0;
    while (i + 2 < c->n && c->x[i + 1] <= x) i++;
    if (c->n < 2) return c->n == 1 ? c->v[0] : 0;
    const double h = c->x[i + 1] - c->x[i];
    const double t = h > 0 ? fmin(fmax((x - c->x[i]) / h, 0), 1) : 1;
    return (1 - t) * c->v[i] + t * c->v[i + 1];
}

static double value(const sct_station *s, const sct_diagram_of *of)
{
    return of->kind == DIAGRAM_MOMENT ? s->M[of->plane] : of->kind == DIAGRAM_SHEAR ? s->V[of->plane] : s->N;
}

static bool room_for(const sct_scene *scene, int n, sct_curve *out)
{
    out->n = n;
    out->x = sct_arena_array(scene->arena, (size_t)n, sizeof *out->x);
    out->v = sct_arena_array(scene->arena, (size_t)n, sizeof *out->v);
    return out->x != NULL && out->v != NULL;
}

/* One member in one combination. A member without moments carries its force alone. */
static sct_status curve_of(const sct_scene *scene, const sct_diagram_of *of, int combination, int member,
                           sct_curve *out)
{
    const sct_result *r = scene->result;
    const sct_member_result *m = &r->members[member];
    if (!m->is_bent) {
        if (of->kind != DIAGRAM_AXIAL) return SCT_OK;
        if (!room_for(scene, 2, out)) return SCT_NO_MEMORY;
        out->x[0] = 0;
        out->x[1] = m->L;
        out->v[0] = out->v[1] = r->N[(size_t)combination * (size_t)r->n_members + (size_t)member];
        return SCT_OK;
    }
    sct_station *stations = NULL;
    int n = 0;
    sct_status status = sct_result_stations(r, combination, member, BETWEEN, &stations, &n);
    if (status != SCT_OK) return status;
    if (!room_for(scene, n, out)) status = SCT_NO_MEMORY;
    for (int i = 0; i < n && status == SCT_OK; i++) {
        out->x[i] = stations[i].x;
        out->v[i] = value(&stations[i], of);
    }
    free(stations);
    return status;
}

static void widen(sct_member_curves *out, const sct_curve *c, int combination)
{
    for (int i = 0; i < out->curve[0].n; i++) {
        const double v = sct_curve_at(c, out->curve[0].x[i]);
        out->curve[0].v[i] = fmax(out->curve[0].v[i], v);
        out->curve[1].v[i] = fmin(out->curve[1].v[i], v);
    }
    for (int i = 0; i < c->n; i++)
        for (int side = 0; side < 2; side++) {
            sct_extreme *e = &out->extreme[side];
            const bool beyond = side == 0 ? c->v[i] > e->v : c->v[i] < e->v;
            if (e->combination < 0 || beyond) *e = (sct_extreme){c->x[i], c->v[i], combination};
        }
}

/* Over the combinations in which strength is checked; over all where it is checked in none. */
static sct_status envelope_of(const sct_scene *scene, const sct_diagram_of *of, int member, sct_member_curves *out)
{
    const sct_result *r = scene->result;
    bool any = false;
    for (int c = 0; c < r->n_combinations; c++) any |= r->is_for_strength[c];
    if (!r->members[member].is_bent && of->kind != DIAGRAM_AXIAL) return SCT_OK;
    for (int side = 0; side < 2; side++) {
        if (!room_for(scene, ENVELOPE_POINTS, &out->curve[side])) return SCT_NO_MEMORY;
        out->extreme[side].combination = -1;
        for (int i = 0; i < ENVELOPE_POINTS; i++) {
            out->curve[side].x[i] = r->members[member].L * i / (ENVELOPE_POINTS - 1);
            out->curve[side].v[i] = side == 0 ? -INFINITY : INFINITY;
        }
    }
    for (int c = 0; c < r->n_combinations; c++) {
        sct_curve one = {0};
        if (any && !r->is_for_strength[c]) continue;
        const sct_status status = curve_of(scene, of, c, member, &one);
        if (status != SCT_OK) return status;
        widen(out, &one, c);
    }
    return SCT_OK;
}

sct_status sct_curves_of(const sct_scene *scene, const sct_diagram_of *of, sct_member_curves **curves, double *largest)
{
    const sct_result *r = scene->result;
    *largest = 0;
    *curves = sct_arena_array(scene->arena, (size_t)r->n_members, sizeof **curves);
    if (*curves == NULL) return SCT_NO_MEMORY;
    for (int m = 0; m < r->n_members && r->n_combinations > 0; m++) {
        sct_member_curves *out = &(*curves)[m];
        const sct_status status = of->is_envelope ? envelope_of(scene, of, m, out)
                                                  : curve_of(scene, of, scene->options.combination, m, &out->curve[0]);
        if (status != SCT_OK) return status;
        for (int side = 0; side < 2; side++) {
            for (int i = 0; i < out->curve[side].n; i++) *largest = fmax(*largest, fabs(out->curve[side].v[i]));
            if (of->is_envelope) *largest = fmax(*largest, fabs(out->extreme[side].v));
        }
    }
    return SCT_OK;
}

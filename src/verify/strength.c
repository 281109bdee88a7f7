/* Capacities of one member. */
#include "verify/strength.h"

#include <math.h>

static const double PI_SQUARE = 9.86960440108935861883;

static double effective_length(const sct_member *m, int axis, double L)
{
    if (m->source[axis] == SCT_LENGTH_RESTRAINT) return m->length[axis];
    return m->source[axis] == SCT_LENGTH_FACTOR ? m->length[axis] * L : L;
}

/* Euler: pi^2 E I / Lcr^2. Johnson where that exceeds half the yield force: N_y - N_y^2 / (4 N_E). */
static double column_strength(const sct_group *g, const sct_material *material, double A, double I, double Lcr)
{
    const double euler = PI_SQUARE * material->E * I / (Lcr * Lcr);
    if (g->buckling == SCT_BUCKLING_EULER) return euler;
    const double yield = material->yield * A;
    return 2.0 * euler <= yield ? euler : yield - yield * yield / (4.0 * euler);
}

/* The least about both axes, with its safety; INFINITY: none applies. */
static double column_capacity(const sct_model *model, const sct_member *m, const sct_verify_section *s, double L)
{
    const sct_group *g = &model->groups[m->group];
    double least = INFINITY;
    for (int axis = 0; axis < 2 && g->buckling != SCT_BUCKLING_NONE; axis++) {
        if (isnan(s->I[axis])) continue;
        const double Lcr = effective_length(m, axis, L);
        least = fmin(least, column_strength(g, &model->materials[g->material], s->A, s->I[axis], Lcr) / g->safety);
    }
    return least;
}

double sct_verify_capacity(const sct_model *model, int member, double L, bool tension)
{
    const sct_member *m = &model->members[member];
    const sct_group *g = &model->groups[m->group];
    const sct_verify_section s = sct_verify_section_of(model, m->group);
    return tension ? g->allowable[0] * s.A : fmin(g->allowable[1] * s.A, column_capacity(model, m, &s, L));
}

bool sct_verify_bending(const sct_model *model, int member, double L, sct_verify_kind kind, sct_verify_capacities *out)
{
    const sct_member *m = &model->members[member];
    const double *allowable = model->groups[m->group].allowable, f = allowable[kind != SCT_FIBRE_TENSION];
    const sct_verify_section s = sct_verify_section_of(model, m->group);
    for (int axis = 0; axis < 2; axis++) out->moment[axis] = s.W[axis] > 0.0 ? f * s.W[axis] : INFINITY;
    out->force = kind == SCT_FIBRE_TENSION       ? f * s.A
                 : kind == SCT_FIBRE_COMPRESSION ? -f * s.A
                                                 : -column_capacity(model, m, &s, L);
    return isfinite(out->force);
}

double sct_verify_slenderness(const sct_model *model, int member, double L, bool compressed)
{
    const sct_member *m = &model->members[member];
    const sct_group *g = &model->groups[m->group];
    const sct_verify_section s = sct_verify_section_of(model, m->group);
    double most = 0.0, limit = g->slenderness_any;
    if (compressed) limit = fmin(limit, g->slenderness_compression);
    for (int axis = 0; axis < 2 && isfinite(limit); axis++) {
        if (!isnan(s.I[axis])) most = fmax(most, effective_length(m, axis, L) / sqrt(s.I[axis] / s.A) / limit);
    }
    return most;
}

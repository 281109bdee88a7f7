/* The properties of a group's size as functions of its area. */
#include <math.h>

#include "analysis/structure.h"

/* c A^p in P, with its derivatives for z = ln A. */
static void set_power(sct_properties *size, sct_property which, double c, double p, double A)
{
    size->P[which] = c * pow(A, p);
    size->d1[which] = p * size->P[which];
    size->d2[which] = p * p * size->P[which];
}

static sct_properties constant(const sct_section *s)
{
    return (sct_properties){.P = {s->A, s->I[0], s->I[1], s->J}};
}

/* The power through two sections' values at their areas. */
static void set_between(sct_properties *size, sct_property which, double A, double A1, double v1, double A2, double v2)
{
    const double p = A2 > A1 ? log(v2 / v1) / log(A2 / A1) : 0.0;
    set_power(size, which, v1 * pow(A1, -p), p, A);
}

static sct_properties on_ladder(const sct_group *g, const sct_section sections[], double A)
{
    int k = 0;
    while (k + 2 < g->n_ladder && sections[g->ladder[k + 1]].A < A) k++;
    const sct_section *a = &sections[g->ladder[k]], *b = &sections[g->ladder[k + 1 < g->n_ladder ? k + 1 : k]];
    sct_properties size;
    set_power(&size, SCT_OF_AREA, 1.0, 1.0, A);
    set_between(&size, SCT_OF_INERTIA_IN, A, a->A, a->I[0], b->A, b->I[0]);
    set_between(&size, SCT_OF_INERTIA_OUT, A, a->A, a->I[1], b->A, b->I[1]);
    set_between(&size, SCT_OF_TORSION, A, a->A, a->J, b->A, b->J);
    return size;
}

static const sct_section *sections_of(const sct_model *model, const sct_group *g)
{
    return model->families[g->family].sections;
}

sct_properties sct_properties_at_area(const sct_model *model, int group, double A)
{
    const sct_group *g = &model->groups[group];
    if (g->kind == SCT_HELD_SECTION) return constant(&sections_of(model, g)[g->held]);
    if (g->kind == SCT_LADDER) return on_ladder(g, sections_of(model, g), A);
    sct_properties size;
    set_power(&size, SCT_OF_AREA, 1.0, 1.0, A);
    set_power(&size, SCT_OF_INERTIA_IN, g->I[0].c, g->I[0].p, A);
    set_power(&size, SCT_OF_INERTIA_OUT, g->I[1].c, g->I[1].p, A);
    set_power(&size, SCT_OF_TORSION, g->J.c, g->J.p, A);
    return size;
}

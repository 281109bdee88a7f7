#include "verify/section.h"

#include <math.h>

sct_verify_section sct_verify_section_of(const sct_model *model, int group)
{
    const sct_group *g = &model->groups[group];
    if (g->kind == SCT_HELD_SECTION) {
        const sct_section *s = &model->families[g->family].sections[g->held];
        return (sct_verify_section){s->A, {s->I[0], s->I[1]}, {s->W[0], s->W[1]}, s->J};
    }
    const double A = g->kind == SCT_HELD_AREA ? g->A_held : NAN;
    return (sct_verify_section){.A = A,
                                .I = {g->I[0].c * pow(A, g->I[0].p), g->I[1].c * pow(A, g->I[1].p)},
                                .W = {g->W[0].c * pow(A, g->W[0].p), g->W[1].c * pow(A, g->W[1].p)},
                                .J = g->J.c * pow(A, g->J.p)};
}

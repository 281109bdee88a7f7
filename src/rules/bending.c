#include "rules/bending.h"

#include <math.h>

static double over(double W, double f)
{
    return W > 0.0 ? 1.0 / (W * f) : 0.0;
}

/* The axis of least column strength; -1: none applies. */
static int weakest(const sct_bar_rule *rule, const sct_shape *shape, sct_bent_coefficients *out)
{
    out->axis = -1;
    for (int axis = 0; axis < 2 && rule->buckling != SCT_BUCKLING_NONE; axis++) {
        const double lambda = rule->Lcr[axis] / shape->i[axis];
        if (!(lambda > 0.0)) continue;
        const sct_column column = sct_column_strength(rule->buckling, rule->E, rule->yield, lambda);
        if (out->axis >= 0 && column.sigma >= out->column.sigma) continue;
        out->axis = axis;
        out->lambda = lambda;
        out->column = column;
    }
    return out->axis;
}

bool sct_bent_coefficients_of(const sct_bar_rule *rule, sct_bent_kind kind, const sct_shape *shape,
                              sct_bent_coefficients *out)
{
    const double f = kind == SCT_BENT_TENSION ? rule->f_t : rule->f_c;
    *out = (sct_bent_coefficients){.c = {0.0, over(shape->W[0], f), over(shape->W[1], f)}, .lambda = NAN, .axis = -1};
    if (kind == SCT_BENT_TENSION) out->c[0] = 1.0 / (shape->A * f);
    if (kind == SCT_BENT_COMPRESSION) out->c[0] = -1.0 / (shape->A * f);
    if (kind != SCT_BENT_BUCKLING) return true;
    if (weakest(rule, shape, out) < 0) return false;
    out->c[0] = -rule->safety / (shape->A * out->column.sigma);
    return true;
}

sct_check_kind sct_bent_check_kind(sct_bent_kind kind)
{
    return kind == SCT_BENT_TENSION       ? SCT_CHECK_BENT_TENSION
           : kind == SCT_BENT_COMPRESSION ? SCT_CHECK_BENT_COMPRESSION
                                          : SCT_CHECK_BENT_BUCKLING;
}

/* The general allowable stress rules. */
#include "allowable.h"

#include <math.h>

static const double PI = 3.14159265358979323846;

static double effective_length(const sct_member *m, int axis, double L)
{
    switch (m->source[axis]) {
    case SCT_LENGTH_FACTOR: return m->length[axis] * L;
    case SCT_LENGTH_RESTRAINT: return m->length[axis];
    default: return L;
    }
}

sct_bar_rule sct_bar_rule_of(const sct_model *model, int member, double L)
{
    const sct_member *m = &model->members[member];
    const sct_group *g = &model->groups[m->group];
    const sct_material *material = &model->materials[g->material];
    return (sct_bar_rule){
        .E = material->E,
        .yield = material->yield,
        .f_t = g->allowable[0],
        .f_c = g->allowable[1],
        .buckling = g->buckling,
        .safety = g->safety,
        .Lcr = {effective_length(m, SCT_IN_PLANE, L), effective_length(m, SCT_OUT_OF_PLANE, L)},
        .slenderness_any = g->slenderness_any,
        .slenderness_compression = g->slenderness_compression,
    };
}

sct_column sct_column_strength(sct_buckling buckling, double E, double yield, double lambda)
{
    if (buckling == SCT_BUCKLING_NONE) return (sct_column){.sigma = INFINITY};
    const double euler = PI * PI * E / (lambda * lambda);
    if (buckling == SCT_BUCKLING_EULER || euler <= 0.5 * yield) return (sct_column){.sigma = euler, .s1 = -2.0};
    /* sigma = fy (1 - q), q = fy / (4 sigma_E) ~ lambda^2; in logs: s1 = -2q/(1-q), ds1/dl = -4q/(1-q)^2 */
    const double q = yield / (4.0 * euler);
    return (sct_column){
        .sigma = yield * (1.0 - q),
        .s1 = -2.0 * q / (1.0 - q),
        .s2 = -4.0 * q / ((1.0 - q) * (1.0 - q)),
        .johnson = true,
    };
}

int sct_bar_checks(const sct_bar_rule *rule, double N, double A, const double i[2],
                   sct_bar_check checks[SCT_MOST_BAR_CHECKS])
{
    const double sigma = fabs(N) / A;
    if (N == 0.0) return 0;
    if (N > 0.0) {
        checks[0] = (sct_bar_check){SCT_CHECK_TENSION, sigma, rule->f_t, NAN, NAN, false, sigma / rule->f_t};
        return 1;
    }
    int n = 0;
    checks[n++] = (sct_bar_check){SCT_CHECK_COMPRESSION, sigma, rule->f_c, NAN, NAN, false, sigma / rule->f_c};
    if (rule->buckling == SCT_BUCKLING_NONE) return n;
    for (int axis = 0; axis < 2; axis++) {
        if (!(i[axis] > 0.0)) continue;
        const double lambda = rule->Lcr[axis] / i[axis];
        const sct_column c = sct_column_strength(rule->buckling, rule->E, rule->yield, lambda);
        const double limit = c.sigma / rule->safety;
        const sct_check_kind kind = axis == SCT_IN_PLANE ? SCT_CHECK_BUCKLING_IN : SCT_CHECK_BUCKLING_OUT;
        checks[n++] = (sct_bar_check){kind, sigma, limit, lambda, c.sigma, c.johnson, sigma / limit};
    }
    return n;
}

sct_bar_check sct_bar_slenderness(const sct_bar_rule *rule, const double i[2], bool compressed, int *axis)
{
    const double limit =
        compressed ? fmin(rule->slenderness_any, rule->slenderness_compression) : rule->slenderness_any;
    const double lambda[2] = {rule->Lcr[0] / i[0], rule->Lcr[1] / i[1]};
    const int worse = lambda[1] > lambda[0];
    if (axis != NULL) *axis = worse;
    if (!isfinite(limit) || !(lambda[worse] > 0.0)) return (sct_bar_check){.kind = SCT_CHECK_NONE};
    return (sct_bar_check){SCT_CHECK_SLENDERNESS, lambda[worse], limit, lambda[worse], NAN, false,
                           lambda[worse] / limit};
}

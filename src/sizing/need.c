/* The area that a bar needs for a force. */
#include "need.h"

#include <math.h>

/* phi(s) = ln of the column's allowable force at area e^s = s + ln sigma_cr(ln Lcr - h(s)) - ln n; increasing, because
 * the radius does not fall with the area and sigma_cr falls with slenderness. */
static sct_curve resistance(const sct_bar_rule *rule, const sct_envelope *envelope, int axis, double s, double *s1)
{
    const sct_curve i = sct_envelope_at(envelope, s);
    const sct_column c = sct_column_strength(rule->buckling, rule->E, rule->yield, rule->Lcr[axis] * exp(-i.h));
    *s1 = c.s1;
    return (sct_curve){
        s + log(c.sigma / rule->safety),
        1.0 - c.s1 * i.h1,
        c.s2 * i.h1 * i.h1 - c.s1 * i.h2,
    };
}

static sct_need column_need(const sct_bar_rule *rule, const sct_envelope *envelope, int axis, double p, double near)
{
    enum { MOST_STEPS = 60 };
    double lo = -INFINITY, hi = INFINITY, s = near, s1 = 0.0;
    sct_curve phi = {0};
    for (int step = 0; step < MOST_STEPS; step++) {
        phi = resistance(rule, envelope, axis, s, &s1);
        const double miss = phi.h - p;
        if (fabs(miss) <= 1e-13 * (1.0 + fabs(p))) break;
        if (miss > 0.0)
            hi = s;
        else
            lo = s;
        double next = s - miss / phi.h1; /* Newton; slopes are at least 1, so this never runs away */
        if (!(next > lo && next < hi)) next = 0.5 * (lo + hi);
        if (next == s) break;
        s = next;
    }
    return (sct_need){
        .s = s,
        .s1 = 1.0 / phi.h1,
        .s2 = -phi.h2 / (phi.h1 * phi.h1 * phi.h1),
        .sL = -s1 / phi.h1,
        .kind = axis == SCT_IN_PLANE ? SCT_CHECK_BUCKLING_IN : SCT_CHECK_BUCKLING_OUT,
    };
}

sct_need sct_area_needed(const sct_bar_rule *rule, const sct_envelope envelope[2], bool tension, double p, double near)
{
    if (tension) return (sct_need){.s = p - log(rule->f_t), .s1 = 1.0, .kind = SCT_CHECK_TENSION};
    sct_need most = {.s = p - log(rule->f_c), .s1 = 1.0, .kind = SCT_CHECK_COMPRESSION};
    if (rule->buckling == SCT_BUCKLING_NONE) return most;
    for (int axis = 0; axis < 2; axis++) {
        if (envelope[axis].n == 0) continue;
        const sct_need column = column_need(rule, &envelope[axis], axis, p, near);
        if (column.s > most.s) most = column;
    }
    return most;
}

/* What each limit costs. With g = ln(needed / limit) a multiplier is mass per unit of ln(limit): the first-order saving
 * of a limit wider by a small part of itself. */
#include "price.h"

#include <math.h>
#include <stdlib.h>

#include "base/number.h"
#include "sizing/result.h"

static const double LEAST = 1e-4;    /* of the mass: smaller prices are left out */
static const double POUND = 0.45359237, INCH = 0.0254; /* exact by definition (international yard and pound, 1959) */

typedef struct tally {
    double sum, length; /* multiplier; and mass per unit of ln(effective length) for columns */
    double most;        /* largest single multiplier, and the joint it belongs to */
    int joint;
} tally;

static int by_multiplier(const void *a, const void *b)
{
    const sct_price *p = a, *q = b;
    if (p->multiplier != q->multiplier) return p->multiplier > q->multiplier ? -1 : 1;
    if (p->group != q->group) return p->group - q->group;
    if (p->limit != q->limit) return p->limit - q->limit;
    return (int)p->kind - (int)q->kind;
}

static const char *shown_mass(const sct_result *r, double kg, char out[32])
{
    const double value = r->us_customary ? kg / POUND : kg;
    const char *unit = r->us_customary ? "lb" : "kg";
    if (fabs(value) < 0.095) sct_number_format(out, 32, "%.2g %s", value, unit);
    else sct_number_format(out, 32, "%.*f %s", fabs(value) < 10.0 ? 2 : 1, value, unit);
    return out;
}

static void add(sct_result *r, sct_price price)
{
    r->prices[r->n_prices++] = price;
}

static void price_deflection(sct_result *r, const sct_duty *duty, int limit, const tally *t)
{
    const sct_deflection_limit *d = &duty->st->model->deflections[limit];
    const double step = r->us_customary ? 0.1 * INCH : 1e-3;
    sct_price price = {.kind = SCT_CHECK_DEFLECTION, .group = -1, .limit = limit, .multiplier = t->sum,
                       .per_unit = t->sum / d->at_most};
    char mass[32];
    sct_number_format(price.words, sizeof price.words, "%s more deflection (%.24s in %.16s at %.40s) saves %s",
                      r->us_customary ? "0.1 in" : "1 mm", d->label, d->direction_label, r->joints[t->joint].name,
                      shown_mass(r, price.per_unit * step, mass));
    add(r, price);
}

static void price_group(sct_result *r, int group, sct_check_kind kind, const tally *t)
{
    sct_price price = {.kind = kind, .group = group, .limit = -1, .multiplier = t->sum, .per_unit = NAN};
    const bool column = kind == SCT_CHECK_BUCKLING_IN || kind == SCT_CHECK_BUCKLING_OUT;
    const char *what = kind == SCT_CHECK_TENSION       ? "higher allowable stress in tension"
                       : kind == SCT_CHECK_COMPRESSION ? "higher allowable stress in compression"
                       : kind == SCT_CHECK_BUCKLING_IN ? "shorter effective length in plane"
                                                       : "shorter effective length out of plane";
    char mass[32];
    sct_number_format(price.words, sizeof price.words, "1 %% %s of %.40s saves %s", what, r->groups[group].name,
                      shown_mass(r, 0.01 * (column ? t->length : t->sum), mass));
    add(r, price);
}

static void price_bound(sct_result *r, const sct_duty *duty, int group, bool upper, sct_bound_source source, double s,
                        double multiplier)
{
    const double A = exp(s);
    const sct_group *g = &duty->st->model->groups[group];
    sct_price price = {.kind = upper ? SCT_CHECK_LARGEST : source.kind, .group = group, .limit = -1,
                       .multiplier = multiplier, .per_unit = multiplier / A};
    char mass[32];
    if (!upper && source.kind == SCT_CHECK_SLENDERNESS)
        sct_number_format(price.words, sizeof price.words, "1 %% more slenderness of %.40s (member %.40s) saves about %s",
                          g->name, r->members[source.bar].name,
                          shown_mass(r, 0.01 * (g->kind == SCT_LADDER ? 1.0 : 2.0) * multiplier, mass));
    else
        sct_number_format(price.words, sizeof price.words, "1 %% %s area of %.40s%s saves %s",
                          upper ? "more largest" : "less smallest", g->name, g->kind == SCT_LADDER ? " (end of its ladder)" : "",
                          shown_mass(r, 0.01 * multiplier, mass));
    add(r, price);
}

static sct_status price_bounds(const sct_problem *P, const sct_duty *duty, const double mu_bound[], sct_result *r)
{
    const size_t n = (size_t)duty->st->n_vars;
    double *lower = sct_result_array(r, n, sizeof *lower), *upper = sct_result_array(r, n, sizeof *upper);
    sct_bound_source *source = sct_result_array(r, n, sizeof *source);
    if (lower == NULL || upper == NULL || source == NULL) return SCT_NO_MEMORY;
    sct_problem_bounds(P, lower, upper, source);
    for (size_t v = 0; v < n; v++) {
        const bool is_upper = mu_bound[v] > 0.0;
        if (fabs(mu_bound[v]) < LEAST * r->mass_continuous || !(lower[v] < upper[v])) continue;
        price_bound(r, duty, duty->st->group_of_var[v], is_upper, source[v], is_upper ? upper[v] : lower[v],
                    fabs(mu_bound[v]));
    }
    return SCT_OK;
}

sct_status sct_prices(const sct_problem *P, const sct_duty *duty, const double mu[], const double mu_bound[], sct_result *r)
{
    const sct_model *model = duty->st->model;
    const int kinds = SCT_CHECK_COUNT, n_groups = r->n_groups;
    tally *group = calloc((size_t)n_groups * (size_t)kinds + 1, sizeof *group);
    tally *limit = calloc((size_t)model->n_deflections + 1, sizeof *limit);
    r->prices = sct_result_array(r, (size_t)n_groups * 6 + (size_t)model->n_deflections, sizeof *r->prices);
    sct_status status = group == NULL || limit == NULL || r->prices == NULL ? SCT_NO_MEMORY : SCT_OK;
    const int m = sct_problem_nlp(P)->m;
    for (int j = 0; status == SCT_OK && j < m; j++) {
        if (!(mu[j] > 0.0)) continue;
        const sct_constraint c = sct_problem_constraint(P, j);
        tally *t = c.bar >= 0 ? &group[duty->st->bars[c.bar].group * kinds + (int)c.need.kind]
                              : &limit[duty->rows[c.row].limit];
        t->sum += mu[j];
        t->length += mu[j] * c.need.sL;
        if (c.row >= 0 && mu[j] > t->most) {
            t->most = mu[j];
            t->joint = duty->rows[c.row].joint;
        }
    }
    for (int k = 0; status == SCT_OK && k < model->n_deflections; k++)
        if (limit[k].sum >= LEAST * r->mass_continuous) price_deflection(r, duty, k, &limit[k]);
    for (int k = 0; status == SCT_OK && k < n_groups * kinds; k++)
        if (group[k].sum >= LEAST * r->mass_continuous) price_group(r, k / kinds, (sct_check_kind)(k % kinds), &group[k]);
    if (status == SCT_OK) status = price_bounds(P, duty, mu_bound, r);
    if (status == SCT_OK) qsort(r->prices, (size_t)r->n_prices, sizeof *r->prices, by_multiplier);
    free(group);
    free(limit);
    return status;
}

/* What each limit costs. With g = ln(needed / limit) a multiplier is mass per unit of ln(limit): the first-order saving
 * of a limit wider by a small part of itself. */
#include "price.h"

#include <math.h>
#include <stdlib.h>

#include "base/number.h"
#include "base/text.h"
#include "sizing/result.h"

static const double LEAST = 1e-4;        /* of the mass: smaller prices are left out */
static const double PERCENT = 0.01;      /* the relief that is priced: beyond a few per cent a multiplier says little */
static const double WIDEST_STEP = 0.025; /* of a deflection limit: 1 mm (0.1 in) is priced where it is no more */
static const double POUND = 0.45359237, INCH = 0.0254; /* exact by definition (international yard and pound, 1959) */

/* The multipliers of one limit, added up. */
typedef struct tally {
    double sum, length; /* of ln(limit); of ln(effective length) for columns */
    double most;        /* largest single multiplier, and the joint (of a bow: the member) it belongs to */
    int joint;
} tally;

static int by_saving(const void *a, const void *b)
{
    const sct_price *p = a, *q = b;
    if (p->saving != q->saving) return p->saving > q->saving ? -1 : 1;
    if (p->group != q->group) return p->group - q->group;
    if (p->limit != q->limit) return p->limit - q->limit;
    return (int)p->kind - (int)q->kind;
}

typedef struct mass_words {
    char text[32];
} mass_words;

static mass_words shown_mass(const sct_result *r, double kg)
{
    mass_words out = {0};
    const double value = r->us_customary ? kg / POUND : kg;
    const char *unit = r->us_customary ? "lb" : "kg";
    if (fabs(value) < 0.095)
        sct_number_format(out.text, sizeof out.text, "%.2g %s", value, unit);
    else
        sct_number_format(out.text, sizeof out.text, "%.*f %s", fabs(value) < 10.0 ? 2 : 1, value, unit);
    return out;
}

static void price_deflection(sct_result *r, const sct_duty *duty, int limit, const tally *t)
{
    const sct_deflection_limit *d = &duty->st->model->deflections[limit];
    const double unit = r->us_customary ? 0.1 * INCH : 1e-3;
    const bool by_unit = unit <= WIDEST_STEP * d->at_most;
    sct_price price = {.kind = SCT_CHECK_DEFLECTION,
                       .group = -1,
                       .limit = limit,
                       .multiplier = t->sum,
                       .per_unit = t->sum / d->at_most,
                       .saving = t->sum * (by_unit ? unit / d->at_most : PERCENT)};
    sct_number_format(price.words, sizeof price.words, "%s more deflection (%s in %s at %s) saves %s",
                      !by_unit          ? "1 %"
                      : r->us_customary ? "0.1 in"
                                        : "1 mm",
                      sct_show(d->label).text, sct_show(d->direction_label).text,
                      sct_show(r->joints[t->joint].name).text, shown_mass(r, price.saving).text);
    r->prices[r->n_prices++] = price;
}

static void price_group(sct_result *r, int group, sct_check_kind kind, const tally *t)
{
    const bool column = kind == SCT_CHECK_BUCKLING_IN || kind == SCT_CHECK_BUCKLING_OUT;
    sct_price price = {.kind = kind,
                       .group = group,
                       .limit = -1,
                       .multiplier = t->sum,
                       .per_unit = NAN,
                       .saving = PERCENT * (column ? t->length : t->sum)};
    const char *what = kind == SCT_CHECK_TENSION            ? "higher allowable stress in tension"
                       : kind == SCT_CHECK_COMPRESSION      ? "higher allowable stress in compression"
                       : kind == SCT_CHECK_BUCKLING_IN      ? "shorter effective length in plane"
                       : kind == SCT_CHECK_BUCKLING_OUT     ? "shorter effective length out of plane"
                       : kind == SCT_CHECK_BENT_TENSION     ? "higher allowable stress in tension, with bending,"
                       : kind == SCT_CHECK_BENT_COMPRESSION ? "higher allowable stress in compression, with bending,"
                                                            : "more strength in buckling with bending";
    sct_number_format(price.words, sizeof price.words, "1 %% %s of %s saves %s", what,
                      sct_show(r->groups[group].name).text, shown_mass(r, price.saving).text);
    r->prices[r->n_prices++] = price;
}

static void price_bow(sct_result *r, const sct_duty *duty, int limit, const tally *t)
{
    const sct_bow_limit *b = &duty->st->model->bows[limit];
    sct_price price = {.kind = SCT_CHECK_BOW,
                       .group = -1,
                       .limit = limit,
                       .multiplier = t->sum,
                       .per_unit = NAN,
                       .saving = PERCENT * t->sum};
    sct_number_format(price.words, sizeof price.words, "1 %% more bow (%s, %s) saves %s", sct_show(b->label).text,
                      sct_show(r->members[t->joint].name).text, shown_mass(r, price.saving).text);
    r->prices[r->n_prices++] = price;
}

static void price_whole(sct_result *r, bool is_frequency, const tally *t)
{
    sct_price price = {.kind = is_frequency ? SCT_CHECK_FREQUENCY : SCT_CHECK_CRITICAL,
                       .group = -1,
                       .limit = -1,
                       .multiplier = t->sum,
                       .per_unit = NAN,
                       .saving = PERCENT * t->sum};
    sct_number_format(price.words, sizeof price.words, "1 %% lower %s saves %s",
                      is_frequency ? "least frequency" : "least critical load factor",
                      shown_mass(r, price.saving).text);
    r->prices[r->n_prices++] = price;
}

/* The end of a variable's range: a size, or what slenderness leaves of it. A free area has i^2 = c A^(p - 1), so that 1
 * % more slenderness is 2/(p - 1) % less area; a ladder moves by rungs, so that only the area can be priced. */
static void price_bound(sct_result *r, const sct_duty *duty, int group, bool upper, sct_bound_source source, double s,
                        double multiplier)
{
    const sct_group *g = &duty->st->model->groups[group];
    const bool slender = !upper && source.kind == SCT_CHECK_SLENDERNESS, ladder = g->kind == SCT_LADDER;
    sct_price price = {.kind = upper ? SCT_CHECK_LARGEST : source.kind,
                       .group = group,
                       .limit = -1,
                       .multiplier = multiplier,
                       .per_unit = multiplier / exp(s),
                       .saving = PERCENT * (slender && !ladder ? 2.0 / (g->I[0].p - 1.0) : 1.0) * multiplier};
    const mass_words mass = shown_mass(r, price.saving);
    if (slender && ladder)
        sct_number_format(price.words, sizeof price.words,
                          "slenderness of %s sets the lightest section of %s: 1 %% less area would save %s",
                          sct_show(r->members[source.bar].name).text, sct_show(g->name).text, mass.text);
    else if (slender)
        sct_number_format(price.words, sizeof price.words, "1 %% more slenderness of %s (group %s) saves %s",
                          sct_show(r->members[source.bar].name).text, sct_show(g->name).text, mass.text);
    else
        sct_number_format(price.words, sizeof price.words, "1 %% %s area of %s%s saves %s",
                          upper ? "more largest" : "less smallest", sct_show(g->name).text,
                          ladder ? " (end of its ladder)" : "", mass.text);
    r->prices[r->n_prices++] = price;
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

sct_status sct_prices(const sct_problem *P, const sct_duty *duty, const double mu[], const double mu_bound[],
                      sct_result *r)
{
    const sct_model *model = duty->st->model;
    const int kinds = SCT_CHECK_COUNT, n_groups = r->n_groups;
    const size_t n_pairs = (size_t)n_groups * (size_t)kinds;
    tally *group = calloc(n_pairs + 1, sizeof *group);
    tally *limit = calloc((size_t)model->n_deflections + (size_t)model->n_bows + 1, sizeof *limit);
    tally *bow = limit + model->n_deflections, whole[2] = {{0}};
    /* of each group: tension, compression, two columns, three with bending, one bound */
    const size_t most = (size_t)n_groups * 8 + (size_t)model->n_deflections + (size_t)model->n_bows + 2;
    r->prices = sct_result_array(r, most, sizeof *r->prices);
    sct_status status = group == NULL || limit == NULL || r->prices == NULL ? SCT_NO_MEMORY : SCT_OK;
    const int m = sct_problem_nlp(P)->m;
    for (int j = 0; status == SCT_OK && j < m; j++) {
        if (!(mu[j] > 0.0)) continue;
        const sct_constraint c = sct_problem_constraint(P, j);
        tally *t = c.bar >= 0   ? &group[(size_t)duty->st->bars[c.bar].group * (size_t)kinds + (size_t)c.need.kind]
                   : c.row >= 0 ? &limit[duty->rows[c.row].limit]
                   : c.bow >= 0 ? &bow[duty->bows[c.bow].limit]
                                : &whole[c.need.kind == SCT_CHECK_FREQUENCY];
        t->sum += mu[j];
        t->length += mu[j] * c.need.sL;
        if ((c.row >= 0 || c.bow >= 0) && mu[j] > t->most) {
            t->most = mu[j];
            t->joint = c.row >= 0 ? duty->rows[c.row].joint : duty->bows[c.bow].bar;
        }
    }
    for (int k = 0; status == SCT_OK && k < model->n_deflections; k++)
        if (limit[k].sum >= LEAST * r->mass_continuous) price_deflection(r, duty, k, &limit[k]);
    for (int k = 0; status == SCT_OK && k < model->n_bows; k++)
        if (bow[k].sum >= LEAST * r->mass_continuous) price_bow(r, duty, k, &bow[k]);
    for (int k = 0; status == SCT_OK && k < 2; k++)
        if (whole[k].sum >= LEAST * r->mass_continuous) price_whole(r, k == 1, &whole[k]);
    for (size_t k = 0; status == SCT_OK && k < n_pairs; k++)
        if (group[k].sum >= LEAST * r->mass_continuous)
            price_group(r, (int)(k / (size_t)kinds), (sct_check_kind)(k % (size_t)kinds), &group[k]);
    if (status == SCT_OK) status = price_bounds(P, duty, mu_bound, r);
    if (status == SCT_OK) qsort(r->prices, (size_t)r->n_prices, sizeof *r->prices, by_saving);
    free(group);
    free(limit);
    return status;
}

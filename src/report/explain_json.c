/* One member's checks as JSON: what explain.c words, in SI units and full precision. */
#include <math.h>

#include "base/text.h"
#include "report/explain_json_bent.h"
#include "report/find_member.h"
#include "report/json_text.h"
#include "rules/allowable.h"

/* The member, and what every part needs of it. */
typedef struct subject {
    const sct_result *r;
    const sct_model *model;
    int index;
    const sct_member_result *m;
    const sct_group_result *g;
    sct_bar_rule rule;
    double i[2];
} subject;

static const char *const AXIS[2] = {"in_plane", "out_of_plane"};

static void given(sct_json *w, const subject *s)
{
    static const char *const SOURCE[] = {"joints", "factor", "restraint"};
    const sct_member *member = &s->model->members[s->index];
    sct_json_string(w, "member", s->m->name);
    sct_json_string(w, "group", s->g->name);
    sct_json_string(w, "material", s->g->material);
    sct_json_string(w, "section", s->g->section);
    sct_json_number(w, "area_m2", s->g->A);
    sct_json_both_axes(w, "radius_of_gyration_m", s->i);
    if (s->m->is_bent) sct_json_both_axes(w, "section_modulus_m3", s->g->W);
    sct_json_number(w, "length_m", s->m->L);
    sct_json_both_axes(w, "effective_length_m", s->m->Lcr);
    sct_json_key(w, "effective_length_from");
    sct_json_begin(w, "{");
    for (int axis = 0; axis < 2; axis++) sct_json_string(w, AXIS[axis], SOURCE[member->source[axis]]);
    sct_json_end(w, "}");
    sct_json_both_axes(w, "slenderness", s->m->lambda);
    sct_json_number(w, "E_Pa", s->rule.E);
    sct_json_number(w, "yield_Pa", s->rule.yield);
    sct_json_number(w, "allowable_tension_Pa", s->rule.f_t);
    sct_json_number(w, "allowable_compression_Pa", s->rule.f_c);
}

/* One entry for each axis about which the column is checked. */
static void column_strengths(sct_json *w, const subject *s)
{
    sct_json_number(w, "safety", s->rule.buckling != SCT_BUCKLING_NONE ? s->rule.safety : NAN);
    sct_json_key(w, "column_strengths");
    sct_json_begin(w, "[");
    for (int axis = 0; axis < 2 && s->rule.buckling != SCT_BUCKLING_NONE; axis++) {
        if (!(s->i[axis] > 0.0)) continue;
        const double lambda = s->rule.Lcr[axis] / s->i[axis];
        const sct_column c = sct_column_strength(s->rule.buckling, s->rule.E, s->rule.yield, lambda);
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "axis", AXIS[axis]);
        sct_json_string(w, "formula", c.johnson ? "Johnson" : "Euler");
        sct_json_number(w, "critical_stress_Pa", c.sigma);
        sct_json_number(w, "allowable_Pa", c.sigma / s->rule.safety);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void check(sct_json *w, const sct_bar_check *c, const char *value, const char *limit)
{
    sct_json_string(w, "check", sct_check_text(c->kind));
    sct_json_number(w, value, c->value);
    sct_json_number(w, limit, c->limit);
    sct_json_number(w, "utilisation", c->utilisation);
    sct_json_boolean(w, "passes", c->utilisation <= 1.0 + SCT_KEPT_TO);
}

/* The checks of a bar without moments. */
static void bar_checks(sct_json *w, const subject *s, double N, bool counts)
{
    sct_bar_check checks[SCT_MOST_BAR_CHECKS];
    const int n = counts ? sct_bar_checks(&s->rule, N, s->g->A, s->i, checks) : 0;
    sct_json_key(w, "checks");
    sct_json_begin(w, "[");
    for (int k = 0; k < n; k++) {
        sct_json_entry(w);
        sct_json_begin(w, "{");
        check(w, &checks[k], "value_Pa", "limit_Pa");
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static sct_status combination(sct_json *w, const subject *s, int c)
{
    const double N = s->r->N[(size_t)c * (size_t)s->r->n_members + (size_t)s->index];
    const bool counts = s->model->combinations[c].basis == SCT_ALLOWABLE;
    sct_status status = SCT_OK;
    sct_json_entry(w);
    sct_json_begin(w, "{");
    sct_json_string(w, "name", s->r->combinations[c]);
    sct_json_boolean(w, "checks_strength", counts);
    sct_json_number(w, "force_N", N);
    sct_json_number(w, "stress_Pa", N / s->g->A);
    if (s->r->slack != NULL)
        sct_json_boolean(w, "is_slack", s->r->slack[(size_t)c * (size_t)s->r->n_members + (size_t)s->index]);
    if (s->m->is_bent)
        status = sct_explain_json_bent(w, s->r, c, s->index, counts);
    else
        bar_checks(w, s, N, counts);
    sct_json_end(w, "}");
    return status;
}

static void slenderness(sct_json *w, const subject *s)
{
    int axis = 0;
    const sct_bar_check c = sct_bar_slenderness(&s->rule, s->i, s->m->compressed, &axis);
    sct_json_key(w, "slenderness_check");
    if (c.kind == SCT_CHECK_NONE) {
        sct_text_add(w->out, "null");
        return;
    }
    sct_json_begin(w, "{");
    sct_json_string(w, "axis", AXIS[axis]);
    check(w, &c, "value", "limit");
    sct_json_end(w, "}");
}

static void governing(sct_json *w, const subject *s)
{
    sct_json_key(w, "governing");
    sct_json_begin(w, "{");
    sct_json_string(w, "check", sct_check_text(s->m->check));
    sct_json_string(w, "combination", s->m->combination >= 0 ? s->r->combinations[s->m->combination] : NULL);
    if (s->m->is_bent) {
        sct_json_number(w, "place_m", s->m->x);
        sct_json_number(w, "force_N", s->m->N);
        sct_json_both_axes(w, "moment_Nm", s->m->M);
    }
    sct_json_number(w, "utilisation", s->m->utilisation);
    sct_json_boolean(w, "passes", s->m->utilisation <= 1.0 + SCT_KEPT_TO);
    sct_json_end(w, "}");
}

sct_status sct_explain_json(const sct_result *result, const char *member, char **text, sct_issues *issues)
{
    *text = NULL;
    const int index = sct_find_member(result, member, issues);
    if (index < 0) return SCT_BAD_INPUT;
    const sct_member_result *m = &result->members[index];
    const sct_group_result *g = &result->groups[m->group];
    const subject s = {result,
                       result->model,
                       index,
                       m,
                       g,
                       sct_bar_rule_of(result->model, index, m->L),
                       {sqrt(g->I[0] / g->A), sqrt(g->I[1] / g->A)}};
    sct_text out = {0};
    sct_json w = {&out, 0, true};
    sct_json_begin(&w, "{");
    sct_json_string(&w, "caution", SCT_CAUTION);
    sct_json_string(&w, "format", "scantling explanation");
    sct_json_whole(&w, "version", SCT_EXPLANATION_FORMAT);
    sct_json_string(&w, "program", SCT_VERSION);
    sct_json_string(&w, "title", result->title);
    sct_json_string(&w, "rules", "allowable stress, no published code");
    given(&w, &s);
    column_strengths(&w, &s);
    sct_json_key(&w, "combinations");
    sct_json_begin(&w, "[");
    sct_status status = SCT_OK;
    for (int c = 0; c < result->n_combinations && status == SCT_OK; c++) status = combination(&w, &s, c);
    sct_json_end(&w, "]");
    slenderness(&w, &s);
    if (m->is_bent) sct_explain_json_bows(&w, result, index);
    governing(&w, &s);
    sct_json_end(&w, "}");
    sct_text_add(&out, "\n");
    if (status != SCT_OK) {
        sct_text_free(&out);
        return status;
    }
    *text = sct_text_take(&out, NULL);
    return *text != NULL ? SCT_OK : SCT_NO_MEMORY;
}

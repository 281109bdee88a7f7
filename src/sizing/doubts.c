/* What a person must know although every number is right. */
#include "doubts.h"

#include <math.h>
#include <string.h>

#include "base/text.h"
#include "sizing/result.h"

/* Linear theory takes displacements to be small against the structure: its smallest extent, a truss's depth. */
void sct_doubt_movement(const sct_result *r, sct_issues *issues)
{
    static const double LARGE = 0.05; /* common practice, no source */
    double extent = INFINITY, most = 0.0;
    int joint = -1, combination = -1;
    for (int i = 0; i < r->dimensions; i++) {
        double low = INFINITY, high = -INFINITY;
        for (int j = 0; j < r->n_joints; j++) {
            low = fmin(low, r->joints[j].at[i]);
            high = fmax(high, r->joints[j].at[i]);
        }
        if (high > low) extent = fmin(extent, high - low);
    }
    for (int c = 0; c < r->n_combinations; c++)
        for (int j = 0; j < r->n_joints; j++) {
            const double *u = r->u + 3 * ((size_t)c * (size_t)r->n_joints + (size_t)j);
            const double size = hypot(hypot(u[0], u[1]), u[2]);
            if (size <= most) continue;
            most = size;
            joint = j;
            combination = c;
        }
    if (most > LARGE * extent)
        sct_issue_add(
            issues, SCT_WARNING, r->model->joints[joint].where,
            "joint \"%s\" moves %.3g m in \"%s\", %.2g times the smallest extent of the structure; linear theory "
            "holds for small movements only",
            sct_show(r->joints[joint].name).text, most, sct_show(r->combinations[combination]).text, most / extent);
}

/* Displacements are absolute: a settling support moves the joints with it, and can hide a sag or fill a limit alone. */
void sct_doubt_settlements(const sct_model *m, sct_issues *issues)
{
    for (int limit = 0; limit < m->n_deflections; limit++)
        for (int c = 0; c < m->n_combinations; c++)
            for (int k = 0; m->deflections[limit].in[c] && k < m->n_cases; k++) {
                if (m->combinations[c].factor[k] == 0.0 || m->cases[k].n_settlements == 0) continue;
                sct_issue_add(
                    issues, SCT_WARNING, m->deflections[limit].where,
                    "this limit holds in \"%s\", where supports settle: displacements are absolute, the settlement "
                    "is counted in; give \"in\" combinations without settlement to limit the sag alone",
                    sct_show(m->combinations[c].name).text);
                c = m->n_combinations;
                break;
            }
}

/* Nothing that is sized can mend these: better said before the search than after it. */
void sct_doubt_held_slenderness(const sct_duty *duty, const sct_design *design, sct_issues *issues)
{
    const sct_model *model = duty->st->model;
    for (int bar = 0; bar < duty->st->n_bars; bar++) {
        const int g = duty->st->bars[bar].group;
        if (duty->st->var_of_group[g] >= 0) continue;
        const sct_bar_check c = sct_bar_slenderness(&duty->rules[bar], design->i[g], false, NULL);
        if (c.kind == SCT_CHECK_SLENDERNESS && !sct_keeps(c.utilisation))
            sct_issue_add(
                issues, SCT_WARNING, model->groups[g].where,
                "the size that the group is held at has slenderness %.1f in member \"%s\", limit %.0f, whatever else "
                "is sized",
                c.value, sct_show(model->members[bar].name).text, c.limit);
    }
}

sct_status sct_doubts_keep(sct_result *r, const sct_issues *issues)
{
    if (sct_issues_lost(issues)) return SCT_NO_MEMORY; /* a result without some of its warnings is none */
    const int n = sct_issues_count(issues);
    r->warnings = sct_result_array(r, (size_t)n, sizeof *r->warnings);
    if (r->warnings == NULL) return SCT_NO_MEMORY;
    for (int i = 0; i < n; i++) {
        const sct_issue *issue = sct_issues_get(issues, i);
        if (issue->severity != SCT_WARNING) continue;
        const size_t size = strlen(issue->message) + 1;
        char *copy = sct_result_array(r, size, 1);
        if (copy == NULL) return SCT_NO_MEMORY;
        r->warnings[r->n_warnings++] = memcpy(copy, issue->message, size);
    }
    return SCT_OK;
}

void sct_doubt_sway(const sct_result *r, sct_issues *issues)
{
    for (int k = 0; k < r->n_criticals; k++) {
        const sct_critical_result *c = &r->criticals[k];
        const sct_second_order order = sct_second_order_of(c->sway / (1.0 + c->error), r->model->amplifies);
        if (order.kind != SCT_UNAMPLIFIED) continue;
        sct_issue_add(issues, SCT_WARNING, r->model->combinations[c->combination].where,
                      "combination \"%s\": the critical load factor of sway is %s%.1f; %s",
                      sct_show(r->combinations[c->combination]).text, c->is_sway_bound ? "above " : "", c->sway,
                      order.words);
    }
}

void sct_doubt_slack(const sct_result *r, sct_issues *issues)
{
    for (int k = 0; k < r->n_criticals && r->slack != NULL; k++) {
        const sct_critical_result *c = &r->criticals[k];
        const bool *slack = r->slack + (size_t)c->combination * (size_t)r->n_members;
        int n = 0, first = -1;
        for (int m = r->n_members - 1; m >= 0; m--) {
            if (!slack[m]) continue;
            n++;
            first = m;
        }
        if (n == 0 || c->factor >= SCT_FIRST_ORDER_HOLDS) continue;
        sct_issue_add(
            issues, SCT_WARNING, r->model->combinations[c->combination].where,
            "combination \"%s\": the critical load factor is %.2f while %d members that carry tension only are "
            "slack (\"%s\" first) and hold nothing until they are taut; tightened ones (a negative "
            "\"lack_of_fit\") would hold",
            sct_show(r->combinations[c->combination]).text, c->factor, n, sct_show(r->members[first].name).text);
    }
}

/* One member's checks with the numbers put in. */
#include <math.h>
#include <string.h>

#include "report/explain_bent.h"
#include "report/find_member.h"
#include "report/shown.h"
#include "report/worked.h"

static const char *const AXIS[2] = {"in plane", "out of plane"};

static void head(sct_worked *s)
{
    sct_text_add(s->out, "Member ");
    sct_text_plain(s->out, s->m->name, 64);
    sct_text_add(s->out, ", group ");
    sct_text_plain(s->out, s->g->name, 64);
    sct_text_add(s->out, s->g->section != NULL ? ": " : ": area");
    if (s->g->section != NULL) sct_text_plain(s->out, s->g->section, 64);
    sct_text_add(s->out, ", ");
    sct_text_plain(s->out, s->g->material, 64);
    sct_text_add(s->out, "\nGeneral allowable stress rules, no published code.\n\nGiven\n");
}

static void given(sct_worked *s, int index)
{
    static const char *const SOURCE[] = {"distance of the joints, default",
                                         "given factor times the distance of the joints",
                                         "given distance of restraints"};
    const sct_member *member = &s->model->members[index];
    const sct_hand_units *u = &s->in;
    sct_worked_first_column(s, "area");
    sct_worked_line(s, "A = # @2\n", (double[]){s->g->A / (u->length * u->length)});
    for (int axis = 0; axis < 2; axis++) {
        sct_worked_first_column(s, AXIS[axis]);
        sct_worked_line(s, "Lcr = # @", (double[]){s->m->Lcr[axis] / u->length});
        sct_text_format(s->out, " (%s)", SOURCE[member->source[axis]]);
        if (s->i[axis] > 0.0) sct_worked_line(s, ", i = # @", (double[]){s->i[axis] / u->length});
        if (s->m->is_bent && s->g->W[axis] > 0.0)
            sct_worked_line(s, ", W = # @3", (double[]){s->g->W[axis] / pow(u->length, 3)});
        sct_text_add(s->out, "\n");
    }
    sct_worked_first_column(s, "material");
    sct_worked_line(s, "E = # $", (double[]){s->rule.E / u->stress});
    if (s->rule.yield > 0.0) sct_worked_line(s, ", fy = # $", (double[]){s->rule.yield / u->stress});
    sct_text_add(s->out, "\n");
}

/* sigma_cr by the formula that holds, and the allowable stress from it. */
static void column_strength(sct_worked *s, int axis)
{
    static const double PI = 3.14159265358979323846;
    const sct_hand_units *u = &s->in;
    const double E = s->rule.E / u->stress, fy = s->rule.yield / u->stress, lambda = s->rule.Lcr[axis] / s->i[axis];
    const sct_column c = sct_column_strength(s->rule.buckling, s->rule.E, s->rule.yield, lambda);
    const double sigma = c.sigma / u->stress;
    sct_worked_first_column(s, axis == SCT_IN_PLANE ? "buckling in plane" : "buckling out of plane");
    sct_worked_line(s, "lambda = Lcr/i = #/# = #\n",
                    (double[]){s->rule.Lcr[axis] / u->length, s->i[axis] / u->length, lambda});
    sct_worked_first_column(s, "");
    if (c.johnson) {
        sct_worked_line(s, "below pi sqrt(2E/fy) = #, Johnson: sigma_cr = fy (1 - fy lambda^2/(4 pi^2 E))\n",
                        (double[]){PI * sqrt(2.0 * E / fy)});
        sct_worked_first_column(s, "");
        sct_worked_line(s, "= # (1 - # x #^2/(4 pi^2 x #)) = # $\n", (double[]){fy, fy, lambda, E, sigma});
    } else {
        sct_worked_line(s, "Euler: sigma_cr = pi^2 E/lambda^2 = pi^2 x #/#^2 = # $\n", (double[]){E, lambda, sigma});
    }
    sct_worked_first_column(s, "");
    sct_worked_line(s, "f = sigma_cr/n = #/# = # $\n", (double[]){sigma, s->rule.safety, sigma / s->rule.safety});
}

static void strengths(sct_worked *s)
{
    sct_text_add(s->out, "\nAllowable stresses f\n");
    sct_worked_first_column(s, "tension");
    sct_worked_line(s, "f = # $ (given)\n", (double[]){s->rule.f_t / s->in.stress});
    sct_worked_first_column(s, "compression");
    sct_worked_line(s, "f = # $ (given)\n", (double[]){s->rule.f_c / s->in.stress});
    if (s->rule.buckling == SCT_BUCKLING_NONE) {
        sct_worked_first_column(s, "buckling");
        sct_text_add(s->out, "not checked: the model says \"none\"\n");
        return;
    }
    for (int axis = 0; axis < 2; axis++)
        if (s->i[axis] > 0.0) column_strength(s, axis);
}

static void combination(sct_worked *s, int c, int index)
{
    const sct_hand_units *u = &s->in;
    const double N = s->r->N[(size_t)c * (size_t)s->r->n_members + (size_t)index], A = u->length * u->length;
    const bool counts = s->model->combinations[c].basis == SCT_ALLOWABLE;
    const bool is_slack = s->r->slack != NULL && s->r->slack[(size_t)c * (size_t)s->r->n_members + (size_t)index];
    sct_text_add(s->out, "\n");
    sct_text_plain(s->out, s->r->combinations[c], 64);
    sct_worked_line(s, ": N = # !", (double[]){N / u->force});
    sct_text_add(s->out, N > 0.0 ? ", tension" : N < 0.0 ? ", compression" : is_slack ? ", slack" : "");
    sct_text_add(s->out, counts ? "\n" : "; for deflections only, no strength check\n");
    sct_bar_check checks[SCT_MOST_BAR_CHECKS];
    const int n = counts ? sct_bar_checks(&s->rule, N, s->g->A, s->i, checks) : 0;
    if (n > 0) {
        sct_worked_first_column(s, "stress");
        sct_worked_line(s, "|N|/A = #/# = # $\n",
                        (double[]){fabs(N) / u->force, s->g->A / A, checks[0].value / u->stress});
    }
    for (int k = 0; k < n; k++) {
        sct_worked_first_column(s, sct_check_text(checks[k].kind));
        sct_worked_line(s, "#/#", (double[]){checks[k].value / u->stress, checks[k].limit / u->stress});
        sct_worked_verdict(s, checks[k].utilisation);
    }
}

static void slenderness(sct_worked *s)
{
    int axis;
    const sct_bar_check c = sct_bar_slenderness(&s->rule, s->i, s->m->compressed, &axis);
    if (c.kind == SCT_CHECK_NONE) return;
    sct_text_format(s->out, "\nSlenderness, %s\n",
                    s->m->compressed ? "in compression in some combination" : "never in compression");
    sct_worked_first_column(s, AXIS[axis]);
    sct_worked_line(s, "(Lcr/i)/limit = (#/#)/#",
                    (double[]){s->m->Lcr[axis] / s->in.length, s->i[axis] / s->in.length, c.limit});
    sct_worked_verdict(s, c.utilisation);
}

sct_status sct_explain(const sct_result *result, const char *member, char **text, sct_issues *issues)
{
    *text = NULL;
    const int index = sct_find_member(result, member, issues);
    if (index < 0) return SCT_BAD_INPUT;
    sct_text out = {0};
    const sct_member_result *m = &result->members[index];
    const sct_group_result *g = &result->groups[m->group];
    sct_worked s = {&out,
                    result,
                    result->model,
                    m,
                    g,
                    sct_hand_units_of(result->us_customary),
                    sct_bar_rule_of(result->model, index, m->L),
                    {sqrt(g->I[0] / g->A), sqrt(g->I[1] / g->A)},
                    m->is_bent ? 28 : 26};
    head(&s);
    given(&s, index);
    strengths(&s);
    sct_status status = SCT_OK;
    for (int c = 0; c < result->n_combinations && status == SCT_OK; c++) {
        if (m->is_bent)
            status = sct_explain_bent(&s, c, index);
        else
            combination(&s, c, index);
    }
    slenderness(&s);
    if (m->is_bent) sct_explain_bows(&s, index);
    sct_text_format(&out, "\nGoverning: %s", sct_check_text(m->check));
    if (m->combination >= 0) {
        sct_text_add(&out, " in ");
        sct_text_plain(&out, result->combinations[m->combination], 64);
        if (m->is_bent) sct_worked_line(&s, " at x = # @", (double[]){m->x / s.in.length});
    }
    sct_worked_verdict(&s, m->utilisation);
    sct_text_format(&out, "\n%s\n", SCT_CAUTION);
    if (status != SCT_OK) {
        sct_text_free(&out);
        return status;
    }
    *text = sct_text_take(&out, NULL);
    return *text != NULL ? SCT_OK : SCT_NO_MEMORY;
}

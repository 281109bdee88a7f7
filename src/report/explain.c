/* One member's checks with the numbers put in, so that each can be done again by hand. Inputs and intermediates carry
 * five significant digits, results four: a line recomputes from what it shows. */
#include <math.h>
#include <string.h>

#include "base/issues.h"
#include "base/names.h"
#include "base/number.h"
#include "base/text.h"
#include "report/shown.h"
#include "rules/allowable.h"

/* Units of a worked line: stresses, section lengths and forces that fit each other. */
typedef struct hand_units {
    double stress, length, force;
    const char *stress_name, *length_name, *force_name;
} hand_units;

static const hand_units METRIC = {1e6, 1e-3, 1.0, "MPa", "mm", "N"};
static const hand_units US = {6894757.2931683617, 0.0254, 4448.2216152605, "ksi", "in", "kip"};

/* The parts that every line needs. */
typedef struct sheet {
    sct_text *out;
    const sct_result *r;
    const sct_model *model;
    const sct_member_result *m;
    const sct_group_result *g;
    hand_units in;
    sct_bar_rule rule;
    double i[2];
} sheet;

static const char *const AXIS[2] = {"in plane", "out of plane"};

static void verdict(sheet *s, double utilisation)
{
    sct_text_add(s->out, " = ");
    sct_text_utilisation(s->out, utilisation);
    sct_text_add(s->out, utilisation <= 1.0 ? "  passes\n" : "  fails\n");
}

static void head(sheet *s, int index)
{
    static const char *const SOURCE[] = {"distance of the joints, default", "given factor times the distance of the joints",
                                         "given distance of restraints"};
    static const char *const BUCKLING[] = {"none", "Euler", "Euler and Johnson"};
    const sct_member *member = &s->model->members[index];
    const sct_group *group = &s->model->groups[s->m->group];
    const hand_units *u = &s->in;
    sct_text_add(s->out, "Member ");
    sct_text_plain(s->out, s->m->name, 64);
    sct_text_add(s->out, " of group ");
    sct_text_plain(s->out, s->g->name, 64);
    sct_text_add(s->out, ": ");
    sct_text_plain(s->out, s->g->section != NULL ? s->g->section : "area", 64);
    sct_text_add(s->out, ", ");
    sct_text_plain(s->out, s->g->material, 64);
    sct_text_format(s->out, "\n  A = %.5g %s2", s->g->A / (u->length * u->length), u->length_name);
    for (int axis = 0; axis < 2; axis++)
        if (s->i[axis] > 0.0) sct_text_format(s->out, ", i = %.5g %s %s", s->i[axis] / u->length, u->length_name, AXIS[axis]);
    sct_text_format(s->out, "\n  L = %.5g %s", s->m->L / u->length, u->length_name);
    for (int axis = 0; axis < 2; axis++)
        sct_text_format(s->out, "; Lcr = %.5g %s %s (%s)", s->m->Lcr[axis] / u->length, u->length_name, AXIS[axis],
                        SOURCE[member->source[axis]]);
    sct_text_format(s->out, "\n  E = %.5g %s", s->rule.E / u->stress, u->stress_name);
    if (s->rule.yield > 0.0) sct_text_format(s->out, ", fy = %.5g %s", s->rule.yield / u->stress, u->stress_name);
    sct_text_format(s->out, "; allowable stress %.5g %s in tension, %.5g %s in compression\n", s->rule.f_t / u->stress,
                    u->stress_name, s->rule.f_c / u->stress, u->stress_name);
    if (group->buckling == SCT_BUCKLING_NONE) sct_text_add(s->out, "  Buckling is not checked: the model says \"none\".\n");
    else sct_text_format(s->out, "  Buckling by %s, safety n = %.5g\n", BUCKLING[group->buckling], s->rule.safety);
    sct_text_add(s->out, "  Rules: general allowable stress, no published code.\n");
}

/* sigma_cr by the formula that holds, and the ratio. */
static void column_line(sheet *s, const sct_bar_check *c, double N)
{
    static const double PI = 3.14159265358979323846;
    const hand_units *u = &s->in;
    const int axis = c->kind == SCT_CHECK_BUCKLING_IN ? SCT_IN_PLANE : SCT_OUT_OF_PLANE;
    const double E = s->rule.E / u->stress, fy = s->rule.yield / u->stress, A = s->g->A / (u->length * u->length);
    const char *pad = "                          ";
    sct_text_format(s->out, "lambda = Lcr/i = %.5g/%.5g = %.5g\n", s->m->Lcr[axis] / u->length, s->i[axis] / u->length,
                    c->lambda);
    if (c->johnson)
        sct_text_format(s->out, "%sbelow pi sqrt(2E/fy) = %.5g, Johnson: sigma_cr = fy (1 - fy lambda^2/(4 pi^2 E))\n"
                                "%s= %.5g (1 - %.5g x %.5g^2/(4 pi^2 x %.5g)) = %.5g %s\n",
                        pad, PI * sqrt(2.0 * E / fy), pad, fy, fy, c->lambda, E, c->sigma_cr / u->stress, u->stress_name);
    else
        sct_text_format(s->out, "%sEuler: sigma_cr = pi^2 E/lambda^2 = pi^2 x %.5g/%.5g^2 = %.5g %s\n", pad, E, c->lambda,
                        c->sigma_cr / u->stress, u->stress_name);
    sct_text_format(s->out, "%s|N|/(A sigma_cr/n) = %.5g/(%.5g x %.5g/%.5g)", pad, fabs(N) / u->force, A,
                    c->sigma_cr / u->stress, s->rule.safety);
    verdict(s, c->utilisation);
}

static void check_line(sheet *s, const sct_bar_check *c, double N)
{
    const hand_units *u = &s->in;
    const size_t start = s->out->size;
    sct_text_format(s->out, "  %s", sct_check_text(c->kind));
    sct_text_pad(s->out, start, 26, false);
    if (c->kind == SCT_CHECK_BUCKLING_IN || c->kind == SCT_CHECK_BUCKLING_OUT) {
        column_line(s, c, N);
        return;
    }
    sct_text_format(s->out, "|N|/(A f) = %.5g/(%.5g x %.5g)", fabs(N) / u->force, s->g->A / (u->length * u->length),
                    c->limit / u->stress);
    verdict(s, c->utilisation);
}

static void combination_block(sheet *s, int c, int index)
{
    const double N = s->r->N[(size_t)c * (size_t)s->r->n_members + (size_t)index];
    sct_text_add(s->out, "\n");
    sct_text_plain(s->out, s->r->combinations[c], 64);
    sct_text_format(s->out, ": N = %.5g %s (%s)\n", N / s->in.force, s->in.force_name,
                    N > 0.0 ? "tension" : N < 0.0 ? "compression" : "none");
    if (s->model->combinations[c].basis != SCT_ALLOWABLE) {
        sct_text_add(s->out, "  for deflections only: no strength check\n");
        return;
    }
    sct_bar_check checks[SCT_MOST_BAR_CHECKS];
    const int n = sct_bar_checks(&s->rule, N, s->g->A, s->i, checks);
    for (int k = 0; k < n; k++) check_line(s, &checks[k], N);
    if (n == 0) sct_text_add(s->out, "  nothing to check\n");
}

static void slenderness_block(sheet *s)
{
    int axis;
    const sct_bar_check c = sct_bar_slenderness(&s->rule, s->i, s->m->compressed, &axis);
    if (c.kind == SCT_CHECK_NONE) return;
    sct_text_format(s->out, "\nSlenderness, all combinations\n  Lcr/i %s = %.5g/%.5g = %.4g; at most %.5g (%s)", AXIS[axis],
                    s->m->Lcr[axis] / s->in.length, s->i[axis] / s->in.length, c.value, c.limit,
                    s->m->compressed ? "in compression in some combination" : "never in compression");
    verdict(s, c.utilisation);
}

sct_status sct_explain(const sct_result *result, const char *member, char **text, sct_issues *issues)
{
    *text = NULL;
    int index = -1;
    for (int k = 0; index < 0 && k < result->n_members; k++)
        if (strcmp(result->members[k].name, member) == 0) index = k;
    if (index < 0) {
        sct_names *names = sct_names_new(result->n_members);
        for (int k = 0; names != NULL && k < result->n_members; k++) sct_names_put(names, result->members[k].name, k);
        const char *near = names != NULL ? sct_names_nearest(names, member) : NULL;
        const sct_where where = {.file = result->model->file};
        if (near != NULL) sct_issue_add(issues, SCT_ERROR, where, "no member \"%.64s\"; did you mean \"%s\"?", member, near);
        else sct_issue_add(issues, SCT_ERROR, where, "no member \"%.64s\"", member);
        sct_names_free(names);
        return SCT_BAD_INPUT;
    }
    sct_text out = {0};
    const sct_member_result *m = &result->members[index];
    const sct_group_result *g = &result->groups[m->group];
    sheet s = {&out, result, result->model, m, g, result->us_customary ? US : METRIC,
               sct_bar_rule_of(result->model, index, m->L), {sqrt(g->I[0] / g->A), sqrt(g->I[1] / g->A)}};
    head(&s, index);
    for (int c = 0; c < result->n_combinations; c++) combination_block(&s, c, index);
    slenderness_block(&s);
    sct_text_format(&out, "\nGoverning: %s", sct_check_text(m->check));
    if (m->combination >= 0) {
        sct_text_add(&out, " in ");
        sct_text_plain(&out, result->combinations[m->combination], 64);
    }
    verdict(&s, m->utilisation);
    sct_text_format(&out, "\n%s\n", SCT_CAUTION);
    *text = sct_text_take(&out, NULL);
    return *text != NULL ? SCT_OK : SCT_NO_MEMORY;
}

/* One member's checks with the numbers put in, so that each can be done again by hand. Inputs and intermediates carry
 * five significant digits, results four: a line recomputes from what it shows. */
#include <math.h>
#include <string.h>

#include "base/number.h"
#include "base/text.h"
#include "report/find_member.h"
#include "report/shown.h"
#include "rules/allowable.h"

/* Units of a worked line: stresses, section lengths and forces that fit each other. */
typedef struct hand_units {
    double stress, length, force;
    const char *stress_name, *length_name, *force_name;
} hand_units;

static const hand_units METRIC = {1e6, 1e-3, 1.0, "MPa", "mm", "N"};
static const hand_units US = {6894757.2931683617, 0.0254, 4448.2216152605, "ksi", "in", "kip"};

/* Five significant digits (or `digits`) without exponent and without trailing zeros: 210000, 39.068, 0.00125. */
static void number(sct_text *out, double value, int digits)
{
    const int whole = value == 0.0 ? 1 : 1 + (int)floor(log10(fabs(value)));
    char text[400];
    const int decimals = digits - whole > 0 ? digits - whole : 0;
    sct_number_format(text, sizeof text, "%.*f", decimals, value);
    if (decimals > 0) {
        size_t n = strlen(text);
        while (text[n - 1] == '0') text[--n] = '\0';
        if (text[n - 1] == '.') text[n - 1] = '\0';
    }
    sct_text_add(out, text);
}

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
enum { WIDTH = 26 }; /* of the first column */

/* Words with numbers put in: # takes the next number, $ is the unit of stress, @ of length, ! of force. */
static void line(sheet *s, const char *words, const double numbers[])
{
    for (int k = 0; *words != '\0'; words++) {
        if (*words == '#')
            number(s->out, numbers[k++], 5);
        else if (*words == '$')
            sct_text_add(s->out, s->in.stress_name);
        else if (*words == '@')
            sct_text_add(s->out, s->in.length_name);
        else if (*words == '!')
            sct_text_add(s->out, s->in.force_name);
        else
            sct_text_bytes(s->out, words, 1);
    }
}

static void first_column(sheet *s, const char *words)
{
    const size_t start = s->out->size;
    sct_text_add(s->out, "  ");
    sct_text_add(s->out, words);
    sct_text_pad(s->out, start, WIDTH, false);
}

static void verdict(sheet *s, double utilisation)
{
    sct_text_add(s->out, " = ");
    sct_text_utilisation(s->out, utilisation);
    sct_text_add(s->out, utilisation <= 1.0 + SCT_KEPT_TO ? "  passes\n" : "  fails\n");
}

static void head(sheet *s)
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

static void given(sheet *s, int index)
{
    static const char *const SOURCE[] = {"distance of the joints, default",
                                         "given factor times the distance of the joints",
                                         "given distance of restraints"};
    const sct_member *member = &s->model->members[index];
    const hand_units *u = &s->in;
    first_column(s, "area");
    line(s, "A = # @2\n", (double[]){s->g->A / (u->length * u->length)});
    for (int axis = 0; axis < 2; axis++) {
        first_column(s, AXIS[axis]);
        line(s, "Lcr = # @", (double[]){s->m->Lcr[axis] / u->length});
        sct_text_format(s->out, " (%s)", SOURCE[member->source[axis]]);
        if (s->i[axis] > 0.0) line(s, ", i = # @", (double[]){s->i[axis] / u->length});
        sct_text_add(s->out, "\n");
    }
    first_column(s, "material");
    line(s, "E = # $", (double[]){s->rule.E / u->stress});
    if (s->rule.yield > 0.0) line(s, ", fy = # $", (double[]){s->rule.yield / u->stress});
    sct_text_add(s->out, "\n");
}

/* sigma_cr by the formula that holds, and the allowable stress from it. */
static void column_strength(sheet *s, int axis)
{
    static const double PI = 3.14159265358979323846;
    const hand_units *u = &s->in;
    const double E = s->rule.E / u->stress, fy = s->rule.yield / u->stress, lambda = s->rule.Lcr[axis] / s->i[axis];
    const sct_column c = sct_column_strength(s->rule.buckling, s->rule.E, s->rule.yield, lambda);
    const double sigma = c.sigma / u->stress;
    first_column(s, axis == SCT_IN_PLANE ? "buckling in plane" : "buckling out of plane");
    line(s, "lambda = Lcr/i = #/# = #\n", (double[]){s->rule.Lcr[axis] / u->length, s->i[axis] / u->length, lambda});
    first_column(s, "");
    if (c.johnson) {
        line(s, "below pi sqrt(2E/fy) = #, Johnson: sigma_cr = fy (1 - fy lambda^2/(4 pi^2 E))\n",
             (double[]){PI * sqrt(2.0 * E / fy)});
        first_column(s, "");
        line(s, "= # (1 - # x #^2/(4 pi^2 x #)) = # $\n", (double[]){fy, fy, lambda, E, sigma});
    } else {
        line(s, "Euler: sigma_cr = pi^2 E/lambda^2 = pi^2 x #/#^2 = # $\n", (double[]){E, lambda, sigma});
    }
    first_column(s, "");
    line(s, "f = sigma_cr/n = #/# = # $\n", (double[]){sigma, s->rule.safety, sigma / s->rule.safety});
}

static void strengths(sheet *s)
{
    sct_text_add(s->out, "\nAllowable stresses f\n");
    first_column(s, "tension");
    line(s, "f = # $ (given)\n", (double[]){s->rule.f_t / s->in.stress});
    first_column(s, "compression");
    line(s, "f = # $ (given)\n", (double[]){s->rule.f_c / s->in.stress});
    if (s->rule.buckling == SCT_BUCKLING_NONE) {
        first_column(s, "buckling");
        sct_text_add(s->out, "not checked: the model says \"none\"\n");
        return;
    }
    for (int axis = 0; axis < 2; axis++)
        if (s->i[axis] > 0.0) column_strength(s, axis);
}

static void combination(sheet *s, int c, int index)
{
    const hand_units *u = &s->in;
    const double N = s->r->N[(size_t)c * (size_t)s->r->n_members + (size_t)index], A = u->length * u->length;
    const bool counts = s->model->combinations[c].basis == SCT_ALLOWABLE;
    sct_text_add(s->out, "\n");
    sct_text_plain(s->out, s->r->combinations[c], 64);
    line(s, ": N = # !", (double[]){N / u->force});
    sct_text_add(s->out, N > 0.0 ? ", tension" : N < 0.0 ? ", compression" : "");
    sct_text_add(s->out, counts ? "\n" : "; for deflections only, no strength check\n");
    sct_bar_check checks[SCT_MOST_BAR_CHECKS];
    const int n = counts ? sct_bar_checks(&s->rule, N, s->g->A, s->i, checks) : 0;
    if (n > 0) {
        first_column(s, "stress");
        line(s, "|N|/A = #/# = # $\n", (double[]){fabs(N) / u->force, s->g->A / A, checks[0].value / u->stress});
    }
    for (int k = 0; k < n; k++) {
        first_column(s, sct_check_text(checks[k].kind));
        line(s, "#/#", (double[]){checks[k].value / u->stress, checks[k].limit / u->stress});
        verdict(s, checks[k].utilisation);
    }
}

static void slenderness(sheet *s)
{
    int axis;
    const sct_bar_check c = sct_bar_slenderness(&s->rule, s->i, s->m->compressed, &axis);
    if (c.kind == SCT_CHECK_NONE) return;
    sct_text_format(s->out, "\nSlenderness, %s\n",
                    s->m->compressed ? "in compression in some combination" : "never in compression");
    first_column(s, AXIS[axis]);
    line(s, "(Lcr/i)/limit = (#/#)/#", (double[]){s->m->Lcr[axis] / s->in.length, s->i[axis] / s->in.length, c.limit});
    verdict(s, c.utilisation);
}

sct_status sct_explain(const sct_result *result, const char *member, char **text, sct_issues *issues)
{
    *text = NULL;
    const int index = sct_find_member(result, member, issues);
    if (index < 0) return SCT_BAD_INPUT;
    sct_text out = {0};
    const sct_member_result *m = &result->members[index];
    const sct_group_result *g = &result->groups[m->group];
    sheet s = {&out,
               result,
               result->model,
               m,
               g,
               result->us_customary ? US : METRIC,
               sct_bar_rule_of(result->model, index, m->L),
               {sqrt(g->I[0] / g->A), sqrt(g->I[1] / g->A)}};
    head(&s);
    given(&s, index);
    strengths(&s);
    for (int c = 0; c < result->n_combinations; c++) combination(&s, c, index);
    slenderness(&s);
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

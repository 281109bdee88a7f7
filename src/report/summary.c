/* A result as a person reads it in a terminal: short sections, each a list cut to what matters most. */
#include "summary.h"

#include <math.h>
#include <string.h>

#include "base/number.h"
#include "report/page.h"
#include "report/summary_bent.h"
#include "report/summary_slack.h"
#include "report/supports.h"
#include "report/whole.h"

enum {
    MOST_GROUPS = 40,
    MOST_DEFLECTIONS = 6,
    MOST_PRICES = 8,
    MOST_REACTIONS = 12,
    MOST_ENDS = 4,
};
static const double SAME_MASS = 1e-5; /* relative: starts this near ended at the same optimum */

static void add_verdict(const sct_page *p)
{
    const sct_result *r = p->r;
    sct_text verdict = {0};
    sct_page_wrapped_plain(&verdict, r->verdict[0] != '\0' ? r->verdict : sct_outcome_text(r->outcome), 0);
    if (verdict.failed)
        p->out->failed = true;
    else
        sct_text_ink(p->out, verdict.data, r->kept ? SCT_INK_GOOD : SCT_INK_BAD, p->colour);
    sct_text_free(&verdict);
    if (r->title[0] == '\0') return;
    sct_text_plain(p->out, r->title, SCT_PAGE_COLUMNS);
    sct_text_add(p->out, "\n");
}

/* Three cells: the check, its member, its combination. */
static void governed_by(const sct_page *p, sct_table *t, const sct_group_result *group)
{
    const sct_member_result *worst = group->worst_member >= 0 ? &p->r->members[group->worst_member] : NULL;
    if (worst != NULL && worst->utilisation > 1) sct_text_add(&t->cells, "FAILS ");
    sct_table_words(t, worst != NULL ? sct_check_text(worst->check) : "");
    sct_page_name_cell(t, worst != NULL && worst->check != SCT_CHECK_NONE ? worst->name : "");
    sct_page_combination_cell(p, t, worst != NULL ? worst->combination : -1);
}

static void group_row(const sct_page *p, sct_table *t, const sct_group_result *group)
{
    const double utilisation = group->worst_member >= 0 ? p->r->members[group->worst_member].utilisation : NAN;
    sct_table_row(t, utilisation > 1 ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
    sct_page_name_cell(t, group->name);
    if (group->section != NULL) {
        sct_text_plain(&t->cells, group->section, SCT_NAME_COLUMNS);
    } else {
        sct_text_shown(&t->cells, group->A, SCT_SHOWN_AREA, p->us);
        sct_text_format(&t->cells, " %s", sct_shown_unit(SCT_SHOWN_AREA, p->us));
    }
    sct_table_words(t, group->is_held ? " held" : "");
    sct_text_format(&t->cells, "%d", group->n_members);
    sct_table_cell(t);
    sct_page_shown_cell(p, t, group->length, SCT_SHOWN_LENGTH);
    sct_page_shown_cell(p, t, group->unit_mass, SCT_SHOWN_UNIT_MASS);
    sct_page_shown_cell(p, t, group->mass, SCT_SHOWN_MASS);
    sct_page_utilisation_cell(t, utilisation);
    governed_by(p, t, group);
}

static void groups_total_row(const sct_page *p, sct_table *t)
{
    double length = 0;
    for (int g = 0; g < p->r->n_groups; g++) length += p->r->groups[g].length;
    sct_table_row(t, SCT_ROW_TOTAL);
    sct_table_words(t, "total");
    sct_table_words(t, "");
    sct_text_format(&t->cells, "%d", p->r->n_members);
    sct_table_cell(t);
    sct_page_shown_cell(p, t, length, SCT_SHOWN_LENGTH);
    sct_table_words(t, "");
    sct_page_shown_cell(p, t, p->r->mass, SCT_SHOWN_MASS);
    sct_page_utilisation_cell(t, p->r->utilisation);
    sct_table_words(t, "largest of all checks");
}

static void add_groups(const sct_page *p)
{
    const int n = p->r->n_groups < MOST_GROUPS ? p->r->n_groups : MOST_GROUPS;
    sct_table t = {.align = "llrrrrrlll"};
    sct_page_heading(p, "Groups");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "group");
    sct_table_words(&t, "size");
    sct_table_words(&t, "members");
    sct_page_unit_head(p, &t, "length", SCT_SHOWN_LENGTH);
    sct_page_unit_head(p, &t, "", SCT_SHOWN_UNIT_MASS);
    sct_page_unit_head(p, &t, "mass", SCT_SHOWN_MASS);
    sct_table_words(&t, "used");
    sct_table_words(&t, "governed by");
    sct_table_words(&t, "member");
    sct_table_words(&t, "in");
    for (int g = 0; g < n; g++) group_row(p, &t, &p->r->groups[g]);
    groups_total_row(p, &t);
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, p->r->n_groups - n, "schedule.csv");
}

static double deflection_utilisation(const sct_result *r, int i)
{
    return r->deflections[i].utilisation;
}

static void direction_cell(const sct_page *p, sct_table *t, const double d[3])
{
    int n_parts = 0, axis = 0;
    for (int k = 0; k < 3; k++) {
        if (d[k] == 0) continue;
        n_parts++;
        axis = k;
    }
    if (n_parts == 1) {
        sct_text_bytes(&t->cells, &"xyz"[axis], 1);
    } else {
        for (int k = 0; k < p->r->dimensions; k++) sct_text_format(&t->cells, "%s%.3g", k > 0 ? ", " : "(", d[k]);
        sct_text_add(&t->cells, ")");
    }
    sct_table_cell(t);
}

/* "R3", or "R3 relative to A0". */
static void deflection_joint_cell(const sct_page *p, sct_table *t, const sct_deflection_result *d)
{
    sct_text_plain(&t->cells, p->r->joints[d->joint].name, SCT_NAME_COLUMNS);
    if (d->from >= 0) {
        sct_text_add(&t->cells, " relative to ");
        sct_text_plain(&t->cells, p->r->joints[d->from].name, SCT_NAME_COLUMNS);
    }
    sct_table_cell(t);
}

static void add_deflections(const sct_page *p)
{
    int worst[MOST_DEFLECTIONS];
    const int n = sct_page_largest(p->r, deflection_utilisation, p->r->n_deflections, MOST_DEFLECTIONS, worst);
    if (n == 0) return;
    sct_table t = {.align = "llrrllr"};
    sct_page_heading(p, "Deflections");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "joint");
    sct_table_words(&t, "along");
    sct_page_unit_head(p, &t, "moves", SCT_SHOWN_DEFLECTION);
    sct_page_unit_head(p, &t, "at most", SCT_SHOWN_DEFLECTION);
    sct_table_words(&t, "limit");
    sct_table_words(&t, "in");
    sct_table_words(&t, "used");
    for (int i = 0; i < n; i++) {
        const sct_deflection_result *d = &p->r->deflections[worst[i]];
        const bool fails = d->utilisation > 1;
        sct_table_row(&t, fails ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
        deflection_joint_cell(p, &t, d);
        direction_cell(p, &t, d->direction);
        sct_page_signed_cell(p, &t, d->u, SCT_SHOWN_DEFLECTION);
        sct_page_shown_cell(p, &t, d->at_most, SCT_SHOWN_DEFLECTION);
        sct_page_name_cell(&t, d->label != NULL ? d->label : "");
        sct_page_combination_cell(p, &t, d->combination);
        sct_text_utilisation(&t.cells, d->utilisation);
        sct_table_words(&t, fails ? " FAILS" : "");
    }
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, p->r->n_deflections - n, "result.json, none used more than these");
}

static void add_prices(const sct_page *p)
{
    const int n = p->r->n_prices < MOST_PRICES ? p->r->n_prices : MOST_PRICES; /* the dearest come first */
    if (n == 0) return;
    sct_page_heading(p, "What the limits cost (at the continuous sizes)");
    for (int i = 0; i < n; i++) sct_page_wrapped_plain(p->out, p->r->prices[i].words, 2);
    sct_page_say_left_out(p, p->r->n_prices - n, "result.json");
}

static void add_mass(const sct_page *p, sct_text *out, double mass)
{
    sct_text_shown(out, mass, SCT_SHOWN_MASS, p->us);
    sct_text_format(out, " %s", sct_shown_unit(SCT_SHOWN_MASS, p->us));
}

/* The next heavier end of a start after `mass`, and how many starts ended there; 0 when there is none. */
static int next_end(const sct_result *r, double after, double *mass)
{
    int n = 0;
    *mass = INFINITY;
    for (int i = 0; i < r->n_starts; i++) {
        const sct_start_result *s = &r->starts[i];
        if (s->outcome == SCT_OPTIMUM && s->mass > after * (1 + SAME_MASS) && s->mass < *mass) *mass = s->mass;
    }
    for (int i = 0; i < r->n_starts; i++) {
        const sct_start_result *s = &r->starts[i];
        n += s->outcome == SCT_OPTIMUM && s->mass >= *mass && s->mass <= *mass * (1 + SAME_MASS);
    }
    return n;
}

/* "8 starts over continuous sizes: 5 ended at the best, 2296 kg; 2 at 2303 kg; 1 without convergence." */
static void add_ends(const sct_page *p, sct_text *line)
{
    const sct_result *r = p->r;
    int told = 0, converged = 0, listed = 0;
    double mass = 0;
    sct_text_format(line, "%d %s over continuous sizes: ", r->n_starts, r->n_starts == 1 ? "start" : "starts");
    for (int i = 0; i < r->n_starts; i++) converged += r->starts[i].outcome == SCT_OPTIMUM;
    while (listed < MOST_ENDS) {
        const int n = next_end(r, mass, &mass);
        if (n == 0) break;
        if (listed > 0)
            sct_text_format(line, "; %d at ", n);
        else if (n == r->n_starts)
            sct_text_add(line, n == 1 ? "it ended at " : "all ended at ");
        else
            sct_text_format(line, "%d ended at the best, ", n);
        add_mass(p, line, mass);
        told += n;
        listed++;
    }
    if (converged > told) sct_text_format(line, "; %d heavier", converged - told);
    int impossible = 0;
    for (int i = 0; i < r->n_starts; i++) impossible += r->starts[i].outcome == SCT_NO_FEASIBLE_DESIGN;
    if (impossible > 0)
        sct_text_format(line, "%s%d found no sizes that keep every limit", converged > 0 ? "; " : "", impossible);
    if (r->n_starts > converged + impossible)
        sct_text_format(line, "%s%d ended without convergence", converged + impossible > 0 ? "; " : "",
                        r->n_starts - converged - impossible);
    sct_text_format(line, ". %d analyses in all.", r->analyses);
}

static void add_evidence(const sct_page *p, sct_text *line)
{
    const sct_result *r = p->r;
    if (isfinite(r->kkt)) {
        sct_text_format(line, " Best: KKT residual %.1g, ", r->kkt);
        if (r->violation > r->settings.tolerance)
            sct_text_format(line, "limits exceeded by up to %.3g %%.", 100 * expm1(r->violation));
        else if (r->violation > 0)
            sct_text_format(line, "limits met to %.1g.", r->violation);
        else
            sct_text_add(line, "every limit met.");
    }
    if (!(fabs(r->mass - r->mass_continuous) > SAME_MASS * r->mass)) return; /* also where there is none: NAN */
    sct_text_add(line, " The design shown weighs ");
    add_mass(p, line, r->mass);
    sct_text_add(line, "; ");
    add_mass(p, line, r->mass_continuous);
    sct_text_add(line, " is where the continuous search ended, not a bound.");
}

static void add_search(const sct_page *p)
{
    const sct_result *r = p->r;
    sct_text line = {0};
    sct_page_heading(p, "How it was found");
    if (r->n_starts > 0) {
        add_ends(p, &line);
        add_evidence(p, &line);
    } else {
        sct_text_format(&line, "%s %d %s.",
                        r->outcome == SCT_CHECKED ? "The sizes given were checked; no search was made."
                                                  : "No search was made: the largest sizes are shown.",
                        r->analyses, r->analyses == 1 ? "analysis" : "analyses");
    }
    if (line.failed)
        p->out->failed = true;
    else
        sct_page_wrapped(p->out, line.data, 2);
    sct_text_free(&line);
}

static void add_reactions(const sct_page *p)
{
    int n = 0;
    sct_table t = {.align = "llrlrl"};
    sct_page_heading(p, "Reactions");
    sct_page_reaction_head(p, &t, "along", SCT_SHOWN_FORCE);
    for (int j = 0; j < p->r->n_joints; j++) {
        for (int axis = 0; axis < p->r->dimensions; axis++) {
            if (!sct_support_gives_force(p->r, j, axis)) continue;
            if (n++ < MOST_REACTIONS) sct_page_reaction_row(p, &t, p->r->reaction, j, axis, SCT_SHOWN_FORCE);
        }
    }
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, n - MOST_REACTIONS, "result.json");
}

static void add_accuracy(const sct_page *p)
{
    const sct_accuracy *a = &p->r->accuracy;
    if (!isfinite(a->equilibrium) || !isfinite(a->error) || !isfinite(a->bound)) return;
    sct_text line = {0};
    sct_text_format(&line, "Accuracy: joints balance to %.0e of the largest force; ", a->equilibrium);
    sct_text_format(&line,
                    "displacements and forces are good to about %.0e, proven to %.0e of each (of 1/1000 of the largest "
                    "where they are smaller).",
                    a->error, sct_number_rounded_up(a->bound));
    if (line.failed) p->out->failed = true;
    sct_text_add(p->out, "\n");
    if (!line.failed) sct_page_wrapped(p->out, line.data, 0);
    sct_text_free(&line);
}

static void add_warnings(const sct_page *p)
{
    if (p->r->n_warnings == 0) return;
    sct_page_heading(p, "Warnings");
    for (int i = 0; i < p->r->n_warnings; i++) sct_page_wrapped_plain(p->out, p->r->warnings[i], 2);
}

sct_status sct_summary(const sct_result *result, bool colour, sct_text *out)
{
    const sct_page p = {result, colour, result->us_customary, out};
    add_verdict(&p);
    add_groups(&p);
    sct_summary_bending(&p);
    add_deflections(&p);
    sct_summary_bows(&p);
    sct_summary_whole(&p);
    sct_summary_slack(&p);
    add_prices(&p);
    add_search(&p);
    add_reactions(&p);
    sct_summary_moments(&p);
    add_accuracy(&p);
    add_warnings(&p);
    sct_text_add(out, "\n");
    sct_text_ink(out, SCT_CAUTION, SCT_INK_HEAD, colour);
    sct_text_add(out, "\n");
    return out->failed ? SCT_NO_MEMORY : SCT_OK;
}

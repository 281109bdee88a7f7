/* A result as a person reads it in a terminal: short sections, each a list cut to what matters most. */
#include "summary.h"

#include <math.h>
#include <string.h>

#include "base/number.h"
#include "report/shown.h"
#include "report/table.h"

enum {
    PAGE_COLUMNS = 96,
    NAME_COLUMNS = 24,
    MOST_GROUPS = 40,
    MOST_DEFLECTIONS = 6,
    MOST_PRICES = 8,
    MOST_REACTIONS = 12,
    MOST_ENDS = 4,
};
static const double SAME_MASS = 1e-5; /* relative: starts this near ended at the same optimum */

typedef struct page {
    const sct_result *r;
    bool colour, us;
    sct_text *out;
} page;

static void heading(const page *p, const char *words)
{
    sct_text_add(p->out, "\n");
    sct_text_ink(p->out, words, SCT_INK_HEAD, p->colour);
    sct_text_add(p->out, "\n");
}

static void name_cell(sct_table *t, const char *name)
{
    sct_text_plain(&t->cells, name, NAME_COLUMNS);
    sct_table_cell(t);
}

static void combination_cell(const page *p, sct_table *t, int combination)
{
    name_cell(t, combination >= 0 ? p->r->combinations[combination] : "");
}

static void shown_cell(const page *p, sct_table *t, double value, sct_display quantity)
{
    sct_text_shown(&t->cells, value, quantity, p->us);
    sct_table_cell(t);
}

/* Forces carry their sign, + too; a rounded zero has none. */
static void signed_cell(const page *p, sct_table *t, double value, sct_display quantity)
{
    sct_text shown = {0};
    sct_text_shown(&shown, value, quantity, p->us);
    if (!shown.failed && shown.data != NULL) {
        if (value > 0 && shown.data[strspn(shown.data, "0.")] != '\0') sct_text_add(&t->cells, "+");
        sct_text_add(&t->cells, shown.data);
    }
    t->cells.failed = t->cells.failed || shown.failed;
    sct_text_free(&shown);
    sct_table_cell(t);
}

static void utilisation_cell(sct_table *t, double utilisation)
{
    sct_text_utilisation(&t->cells, utilisation);
    sct_table_cell(t);
}

static void unit_head(const page *p, sct_table *t, const char *words, sct_display quantity)
{
    sct_text_format(&t->cells, "%s%s%s", words, *words != '\0' ? " " : "", sct_shown_unit(quantity, p->us));
    sct_table_cell(t);
}

static void finish_table(const page *p, sct_table *t)
{
    sct_table_write(t, p->colour, p->out);
    sct_text_free(&t->cells);
}

static void say_left_out(const page *p, int n, const char *where)
{
    if (n > 0) sct_text_format(p->out, "  ... and %d more in %s\n", n, where);
}

/* Words broken between blanks to lines of PAGE_COLUMNS, each after `indent` blanks. */
static void wrapped(sct_text *out, const char *words, int indent)
{
    int column = 0;
    while (*words != '\0') {
        const size_t length = strcspn(words, " ");
        int width = 0;
        for (size_t i = 0; i < length; i++) width += ((unsigned char)words[i] & 0xC0) != 0x80;
        if (column > 0 && column + 1 + width > PAGE_COLUMNS) {
            sct_text_add(out, "\n");
            column = 0;
        }
        if (column == 0)
            sct_text_format(out, "%*s", indent, "");
        else
            sct_text_add(out, " ");
        sct_text_bytes(out, words, length);
        column = (column == 0 ? indent : column + 1) + width;
        words += length + strspn(words + length, " ");
    }
    sct_text_add(out, "\n");
}

/* The same for words that may hold names and may have been cut in a character. */
static void wrapped_plain(sct_text *out, const char *words, int indent)
{
    sct_text whole = {0}, plain = {0};
    sct_text_bytes(&whole, words, sct_whole_characters(words));
    if (!whole.failed) sct_text_plain(&plain, whole.data, 0);
    sct_text_add(&plain, "");
    if (whole.failed || plain.failed)
        out->failed = true;
    else
        wrapped(out, plain.data, indent);
    sct_text_free(&whole);
    sct_text_free(&plain);
}

static void add_verdict(const page *p)
{
    const sct_result *r = p->r;
    sct_text verdict = {0};
    wrapped_plain(&verdict, r->verdict[0] != '\0' ? r->verdict : sct_outcome_text(r->outcome), 0);
    if (verdict.failed)
        p->out->failed = true;
    else
        sct_text_ink(p->out, verdict.data, r->kept ? SCT_INK_GOOD : SCT_INK_BAD, p->colour);
    sct_text_free(&verdict);
    if (r->title[0] == '\0') return;
    sct_text_plain(p->out, r->title, PAGE_COLUMNS);
    sct_text_add(p->out, "\n");
}

/* Three cells: the check, its member, its combination. */
static void governed_by(const page *p, sct_table *t, const sct_group_result *group)
{
    const sct_member_result *worst = group->worst_member >= 0 ? &p->r->members[group->worst_member] : NULL;
    if (worst != NULL && worst->utilisation > 1) sct_text_add(&t->cells, "FAILS ");
    sct_table_words(t, worst != NULL ? sct_check_text(worst->check) : "");
    name_cell(t, worst != NULL && worst->check != SCT_CHECK_NONE ? worst->name : "");
    combination_cell(p, t, worst != NULL ? worst->combination : -1);
}

static void group_row(const page *p, sct_table *t, const sct_group_result *group)
{
    const double utilisation = group->worst_member >= 0 ? p->r->members[group->worst_member].utilisation : NAN;
    sct_table_row(t, utilisation > 1 ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
    name_cell(t, group->name);
    if (group->section != NULL) {
        sct_text_plain(&t->cells, group->section, NAME_COLUMNS);
    } else {
        sct_text_shown(&t->cells, group->A, SCT_SHOWN_AREA, p->us);
        sct_text_format(&t->cells, " %s", sct_shown_unit(SCT_SHOWN_AREA, p->us));
    }
    sct_table_words(t, group->is_held ? " held" : "");
    sct_text_format(&t->cells, "%d", group->n_members);
    sct_table_cell(t);
    shown_cell(p, t, group->length, SCT_SHOWN_LENGTH);
    shown_cell(p, t, group->unit_mass, SCT_SHOWN_UNIT_MASS);
    shown_cell(p, t, group->mass, SCT_SHOWN_MASS);
    utilisation_cell(t, utilisation);
    governed_by(p, t, group);
}

static void groups_total_row(const page *p, sct_table *t)
{
    double length = 0;
    for (int g = 0; g < p->r->n_groups; g++) length += p->r->groups[g].length;
    sct_table_row(t, SCT_ROW_TOTAL);
    sct_table_words(t, "total");
    sct_table_words(t, "");
    sct_text_format(&t->cells, "%d", p->r->n_members);
    sct_table_cell(t);
    shown_cell(p, t, length, SCT_SHOWN_LENGTH);
    sct_table_words(t, "");
    shown_cell(p, t, p->r->mass, SCT_SHOWN_MASS);
    utilisation_cell(t, p->r->utilisation);
    sct_table_words(t, "largest of all checks");
}

static void add_groups(const page *p)
{
    const int n = p->r->n_groups < MOST_GROUPS ? p->r->n_groups : MOST_GROUPS;
    sct_table t = {.align = "llrrrrrlll"};
    heading(p, "Groups");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "group");
    sct_table_words(&t, "size");
    sct_table_words(&t, "members");
    unit_head(p, &t, "length", SCT_SHOWN_LENGTH);
    unit_head(p, &t, "", SCT_SHOWN_UNIT_MASS);
    unit_head(p, &t, "mass", SCT_SHOWN_MASS);
    sct_table_words(&t, "used");
    sct_table_words(&t, "governed by");
    sct_table_words(&t, "member");
    sct_table_words(&t, "in");
    for (int g = 0; g < n; g++) group_row(p, &t, &p->r->groups[g]);
    groups_total_row(p, &t);
    finish_table(p, &t);
    say_left_out(p, p->r->n_groups - n, "schedule.csv");
}

/* Indices of the `most` largest values, largest first, first of equals first; returns how many. */
static int largest(const sct_result *r, double value(const sct_result *, int), int n, int most, int index[])
{
    int found = 0;
    for (int i = 0; i < n; i++) {
        int at = found;
        while (at > 0 && value(r, i) > value(r, index[at - 1])) at--;
        if (at >= most) continue;
        if (found < most) found++;
        for (int k = found - 1; k > at; k--) index[k] = index[k - 1];
        index[at] = i;
    }
    return found;
}

static double deflection_utilisation(const sct_result *r, int i)
{
    return r->deflections[i].utilisation;
}

static void direction_cell(const page *p, sct_table *t, const double d[3])
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

static void add_deflections(const page *p)
{
    int worst[MOST_DEFLECTIONS];
    const int n = largest(p->r, deflection_utilisation, p->r->n_deflections, MOST_DEFLECTIONS, worst);
    if (n == 0) return;
    sct_table t = {.align = "llrrllr"};
    heading(p, "Deflections");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "joint");
    sct_table_words(&t, "along");
    unit_head(p, &t, "moves", SCT_SHOWN_DEFLECTION);
    unit_head(p, &t, "at most", SCT_SHOWN_DEFLECTION);
    sct_table_words(&t, "limit");
    sct_table_words(&t, "in");
    sct_table_words(&t, "used");
    for (int i = 0; i < n; i++) {
        const sct_deflection_result *d = &p->r->deflections[worst[i]];
        const bool fails = d->utilisation > 1;
        sct_table_row(&t, fails ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
        name_cell(&t, p->r->joints[d->joint].name);
        direction_cell(p, &t, d->direction);
        signed_cell(p, &t, d->u, SCT_SHOWN_DEFLECTION);
        shown_cell(p, &t, d->at_most, SCT_SHOWN_DEFLECTION);
        name_cell(&t, d->label != NULL ? d->label : "");
        combination_cell(p, &t, d->combination);
        sct_text_utilisation(&t.cells, d->utilisation);
        sct_table_words(&t, fails ? " FAILS" : "");
    }
    finish_table(p, &t);
    say_left_out(p, p->r->n_deflections - n, "result.json, none used more than these");
}

static void add_prices(const page *p)
{
    const int n = p->r->n_prices < MOST_PRICES ? p->r->n_prices : MOST_PRICES; /* the dearest come first */
    if (n == 0) return;
    heading(p, "What the limits cost (at the continuous sizes)");
    for (int i = 0; i < n; i++) wrapped_plain(p->out, p->r->prices[i].words, 2);
    say_left_out(p, p->r->n_prices - n, "result.json");
}

static void add_mass(const page *p, sct_text *out, double mass)
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
static void add_ends(const page *p, sct_text *line)
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

static void add_evidence(const page *p, sct_text *line)
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

static void add_search(const page *p)
{
    const sct_result *r = p->r;
    sct_text line = {0};
    heading(p, "How it was found");
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
        wrapped(p->out, line.data, 2);
    sct_text_free(&line);
}

static bool is_held_along(const sct_joint_result *joint, int axis)
{
    for (int i = 0; i < joint->n_held; i++) {
        if (joint->held[i][axis] != 0) return true;
    }
    return false;
}

static void reaction_row(const page *p, sct_table *t, int joint, int axis)
{
    const sct_result *r = p->r;
    int low = 0, high = 0;
    double min = NAN, max = NAN;
    for (int c = 0; c < r->n_combinations; c++) {
        const double R = r->reaction[((size_t)c * (size_t)r->n_joints + (size_t)joint) * 3 + (size_t)axis];
        if (!(R >= min)) {
            min = R;
            low = c;
        }
        if (!(R <= max)) {
            max = R;
            high = c;
        }
    }
    sct_table_row(t, SCT_ROW_PLAIN);
    name_cell(t, r->joints[joint].name);
    sct_text_bytes(&t->cells, &"xyz"[axis], 1);
    sct_table_cell(t);
    signed_cell(p, t, min, SCT_SHOWN_FORCE);
    combination_cell(p, t, r->n_combinations > 0 ? low : -1);
    signed_cell(p, t, max, SCT_SHOWN_FORCE);
    combination_cell(p, t, r->n_combinations > 0 ? high : -1);
}

static void add_reactions(const page *p)
{
    int n = 0;
    sct_table t = {.align = "llrlrl"};
    heading(p, "Reactions");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "support");
    sct_table_words(&t, "along");
    unit_head(p, &t, "smallest", SCT_SHOWN_FORCE);
    sct_table_words(&t, "in");
    unit_head(p, &t, "largest", SCT_SHOWN_FORCE);
    sct_table_words(&t, "in");
    for (int j = 0; j < p->r->n_joints; j++) {
        for (int axis = 0; axis < p->r->dimensions; axis++) {
            if (!is_held_along(&p->r->joints[j], axis)) continue;
            if (n++ < MOST_REACTIONS) reaction_row(p, &t, j, axis);
        }
    }
    finish_table(p, &t);
    say_left_out(p, n - MOST_REACTIONS, "result.json");
}

static void add_accuracy(const page *p)
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
    if (!line.failed) wrapped(p->out, line.data, 0);
    sct_text_free(&line);
}

static void add_warnings(const page *p)
{
    if (p->r->n_warnings == 0) return;
    heading(p, "Warnings");
    for (int i = 0; i < p->r->n_warnings; i++) wrapped_plain(p->out, p->r->warnings[i], 2);
}

sct_status sct_summary(const sct_result *result, bool colour, sct_text *out)
{
    const page p = {result, colour, result->us_customary, out};
    add_verdict(&p);
    add_groups(&p);
    add_deflections(&p);
    add_prices(&p);
    add_search(&p);
    add_reactions(&p);
    add_accuracy(&p);
    add_warnings(&p);
    sct_text_add(out, "\n");
    sct_text_ink(out, SCT_CAUTION, SCT_INK_HEAD, colour);
    sct_text_add(out, "\n");
    return out->failed ? SCT_NO_MEMORY : SCT_OK;
}

#include "report/whole.h"

#include <math.h>

enum { MOST_CRITICALS = 12 };

double sct_critical_utilisation(const sct_result *r, const sct_critical_result *c)
{
    return r->least_factor > 0 ? r->least_factor * (1 + c->error) / c->factor : (double)NAN;
}

double sct_frequency_utilisation(const sct_result *r)
{
    return r->least_frequency > 0 ? r->least_frequency / r->frequency : (double)NAN;
}

double sct_amplification_in(const sct_result *r, int combination)
{
    for (int i = 0; i < r->n_criticals; i++)
        if (r->criticals[i].combination == combination) return r->criticals[i].amplification;
    return 1;
}

/* "9.87", "above 9.87" where it is a bound, "none" where nothing buckles. */
static void factor_cell(sct_table *t, double factor, bool is_bound)
{
    if (isfinite(factor))
        sct_text_format(&t->cells, "%s%.2f", is_bound ? "above " : "", factor);
    else
        sct_text_add(&t->cells, "none");
    sct_table_cell(t);
}

static void critical_row(const sct_page *p, sct_table *t, const sct_critical_result *c)
{
    const double used = sct_critical_utilisation(p->r, c);
    sct_table_row(t, used > 1 || !c->has_verdict ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
    sct_page_combination_cell(p, t, c->combination);
    factor_cell(t, c->factor, false);
    factor_cell(t, c->sway, c->is_sway_bound);
    if (c->amplification != 1) sct_text_format(&t->cells, "%.4f", c->amplification);
    sct_table_cell(t);
    sct_page_utilisation_cell(t, used);
    sct_table_words(t, c->words);
}

static void add_criticals(const sct_page *p)
{
    const int n = p->r->n_criticals < MOST_CRITICALS ? p->r->n_criticals : MOST_CRITICALS;
    sct_table t = {.align = "lrrrrl"};
    if (n == 0) return;
    sct_page_heading(p, "Elastic critical load factors");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "in");
    sct_table_words(&t, "factor");
    sct_table_words(&t, "of sway");
    sct_table_words(&t, "moments x");
    sct_table_words(&t, "used");
    sct_table_words(&t, "what it says");
    for (int i = 0; i < n; i++) critical_row(p, &t, &p->r->criticals[i]);
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, p->r->n_criticals - n, "result.json");
    if (p->r->least_factor > 0) sct_text_format(p->out, "  At least %.4g is asked for.\n", p->r->least_factor);
}

static const double TAKES_PART = 0.05; /* of the mode's energy of bending: below, an implied length means nothing */
enum { MOST_IMPLIED = 8 };

static bool takes_part(const sct_member_result *m, int axis)
{
    return m->mode_share[axis] >= TAKES_PART && m->mode_Lcr[axis] > 0;
}

static void implied_row(const sct_page *p, sct_table *t, const sct_member_result *m, int axis)
{
    sct_table_row(t, SCT_ROW_PLAIN);
    sct_page_name_cell(t, m->name);
    sct_table_words(t, axis == 0 ? "in plane" : "out of plane");
    sct_text_format(&t->cells, "%.0f %%", 100 * m->mode_share[axis]);
    sct_table_cell(t);
    sct_text_shown(&t->cells, m->mode_Lcr[axis], SCT_SHOWN_LENGTH, p->us);
    sct_table_cell(t);
    sct_text_shown(&t->cells, m->Lcr[axis], SCT_SHOWN_LENGTH, p->us);
    sct_table_cell(t);
}

static void implied_head(const sct_page *p, sct_table *t)
{
    sct_table_row(t, SCT_ROW_HEAD);
    sct_table_words(t, "member");
    sct_table_words(t, "plane");
    sct_table_words(t, "of the mode");
    sct_page_unit_head(p, t, "implied", SCT_SHOWN_LENGTH);
    sct_page_unit_head(p, t, "used", SCT_SHOWN_LENGTH);
}

/* The effective lengths that the lowest mode implies, beside those that were used. */
static void add_implied(const sct_page *p)
{
    const sct_result *r = p->r;
    sct_table t = {.align = "llrrr"};
    int n = 0;
    implied_head(p, &t);
    for (int e = 0; e < r->n_members && r->lowest_critical >= 0; e++)
        for (int axis = 0; axis < 2; axis++)
            if (takes_part(&r->members[e], axis) && n++ < MOST_IMPLIED) implied_row(p, &t, &r->members[e], axis);
    if (n == 0) {
        sct_text_free(&t.cells);
        return;
    }
    sct_page_heading(p, "Effective lengths that the lowest of these modes implies");
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, n > MOST_IMPLIED ? n - MOST_IMPLIED : 0, "result.json");
}

void sct_summary_whole(const sct_page *p)
{
    const sct_result *r = p->r;
    add_criticals(p);
    add_implied(p);
    if (!(r->least_frequency > 0)) return;
    sct_page_heading(p, "Vibration");
    sct_text_format(p->out, "  Lowest frequency %.2f Hz, at least %.4g Hz, with ", r->frequency, r->least_frequency);
    sct_text_shown(p->out, r->vibrating_mass, SCT_SHOWN_MASS, p->us);
    sct_text_format(p->out, " %s: ", sct_shown_unit(SCT_SHOWN_MASS, p->us));
    sct_text_utilisation(p->out, sct_frequency_utilisation(r));
    sct_text_add(p->out, sct_frequency_utilisation(r) <= 1 ? ".\n" : " FAILS.\n");
}

void sct_json_whole_structure(sct_json *w, const sct_result *r)
{
    if (r->n_criticals > 0) {
        if (r->least_factor > 0) sct_json_number(w, "critical_load_factor_at_least", r->least_factor);
        sct_json_key(w, "critical_load_factors");
        sct_json_begin(w, "[");
        for (int i = 0; i < r->n_criticals; i++) {
            const sct_critical_result *c = &r->criticals[i];
            sct_json_entry(w);
            sct_json_begin(w, "{");
            sct_json_string(w, "combination", r->combinations[c->combination]);
            sct_json_number(w, "factor", c->factor);
            sct_json_number(w, "error", c->error);
            sct_json_boolean(w, "is_proven", c->is_proven);
            sct_json_number(w, "sway_factor", c->sway);
            sct_json_boolean(w, "sway_factor_is_a_bound", c->is_sway_bound);
            sct_json_number(w, "moments_times", c->amplification);
            sct_json_boolean(w, "has_verdict", c->has_verdict);
            sct_json_string(w, "words", c->words);
            sct_json_end(w, "}");
        }
        sct_json_end(w, "]");
    }
    if (!(r->least_frequency > 0)) return;
    sct_json_number(w, "frequency_Hz", r->frequency);
    sct_json_number(w, "frequency_at_least_Hz", r->least_frequency);
    sct_json_number(w, "vibrating_mass_kg", r->vibrating_mass);
}

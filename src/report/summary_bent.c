/* What a summary says of members that carry moments. */
#include "report/summary_bent.h"

#include "report/supports.h"

enum { MOST_BENT = 40, MOST_BOWS = 6, MOST_MOMENTS = 12 };

static const sct_member_result *worst_bent(const sct_result *r, int g)
{
    const int m = r->groups[g].worst_member;
    return m >= 0 && r->members[m].is_bent && r->members[m].combination >= 0 ? &r->members[m] : NULL;
}

static void bending_row(const sct_page *p, sct_table *t, const sct_member_result *m)
{
    const sct_group_result *group = &p->r->groups[m->group];
    sct_table_row(t, m->utilisation > 1 ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
    sct_page_name_cell(t, m->name);
    sct_page_combination_cell(p, t, m->combination);
    sct_page_shown_cell(p, t, m->x, SCT_SHOWN_LENGTH);
    sct_page_signed_cell(p, t, m->N, SCT_SHOWN_FORCE);
    for (int axis = 0; axis < p->r->dimensions - 1; axis++) {
        sct_page_signed_cell(p, t, m->M[axis], SCT_SHOWN_MOMENT);
        sct_page_shown_cell(p, t, group->W[axis], SCT_SHOWN_SECTION_MODULUS);
    }
    sct_page_utilisation_cell(t, m->utilisation);
}

void sct_summary_bending(const sct_page *p)
{
    const bool in_space = p->r->dimensions == 3;
    sct_table t = {.align = in_space ? "llrrrrrrr" : "llrrrrr"};
    int n = 0;
    for (int g = 0; g < p->r->n_groups; g++) n += worst_bent(p->r, g) != NULL;
    if (n == 0) return;
    sct_page_heading(p, "Bending, at the place that governs the worst member of each group");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "member");
    sct_table_words(&t, "in");
    sct_page_unit_head(p, &t, "x", SCT_SHOWN_LENGTH);
    sct_page_unit_head(p, &t, "N", SCT_SHOWN_FORCE);
    sct_page_unit_head(p, &t, in_space ? "M in plane" : "M", SCT_SHOWN_MOMENT);
    sct_page_unit_head(p, &t, "W", SCT_SHOWN_SECTION_MODULUS);
    if (in_space) {
        sct_page_unit_head(p, &t, "M out of plane", SCT_SHOWN_MOMENT);
        sct_page_unit_head(p, &t, "W", SCT_SHOWN_SECTION_MODULUS);
    }
    sct_table_words(&t, "used");
    int shown = 0;
    for (int g = 0; g < p->r->n_groups && shown < MOST_BENT; g++) {
        const sct_member_result *m = worst_bent(p->r, g);
        if (m == NULL) continue;
        bending_row(p, &t, m);
        shown++;
    }
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, n - shown, "schedule.csv");
}

static double bow_utilisation(const sct_result *r, int i)
{
    return r->bows[i].utilisation;
}

static void bow_row(const sct_page *p, sct_table *t, const sct_bow_result *b)
{
    const bool fails = b->utilisation > 1;
    sct_table_row(t, fails ? SCT_ROW_FAILS : SCT_ROW_PLAIN);
    sct_page_name_cell(t, p->r->members[b->member].name);
    sct_page_name_cell(t, b->run != NULL ? b->run : "its ends");
    sct_table_words(t, b->axis == 0 ? "in plane" : "out of plane");
    sct_page_shown_cell(p, t, b->x, SCT_SHOWN_LENGTH);
    sct_page_signed_cell(p, t, b->v, SCT_SHOWN_DEFLECTION);
    sct_page_shown_cell(p, t, b->at_most, SCT_SHOWN_DEFLECTION);
    sct_page_name_cell(t, b->label != NULL ? b->label : "");
    sct_page_combination_cell(p, t, b->combination);
    sct_text_utilisation(&t->cells, b->utilisation);
    sct_table_words(t, fails ? " FAILS" : "");
}

void sct_summary_bows(const sct_page *p)
{
    int worst[MOST_BOWS];
    const int n = sct_page_largest(p->r, bow_utilisation, p->r->n_bows, MOST_BOWS, worst);
    if (n == 0) return;
    sct_table t = {.align = "lllrrrllr"};
    sct_page_heading(p, "Bows");
    sct_table_row(&t, SCT_ROW_HEAD);
    sct_table_words(&t, "member");
    sct_table_words(&t, "off the line of");
    sct_table_words(&t, "plane");
    sct_page_unit_head(p, &t, "x", SCT_SHOWN_LENGTH);
    sct_page_unit_head(p, &t, "bows", SCT_SHOWN_DEFLECTION);
    sct_page_unit_head(p, &t, "at most", SCT_SHOWN_DEFLECTION);
    sct_table_words(&t, "limit");
    sct_table_words(&t, "in");
    sct_table_words(&t, "used");
    for (int i = 0; i < n; i++) bow_row(p, &t, &p->r->bows[worst[i]]);
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, p->r->n_bows - n, "result.json, none used more than these");
}

void sct_summary_moments(const sct_page *p)
{
    const sct_result *r = p->r;
    int n = 0;
    sct_table t = {.align = "llrlrl"};
    for (int j = 0; j < r->n_joints; j++) {
        for (int axis = r->dimensions == 2 ? 2 : 0; axis < 3; axis++) {
            if (!sct_support_gives_moment(r, j, axis)) continue;
            if (n++ == 0) {
                sct_page_heading(p, "Moments of supports");
                sct_page_reaction_head(p, &t, "about", SCT_SHOWN_MOMENT);
            }
            if (n <= MOST_MOMENTS) sct_page_reaction_row(p, &t, r->moment, j, axis, SCT_SHOWN_MOMENT);
        }
    }
    if (n == 0) return;
    sct_page_finish_table(p, &t);
    sct_page_say_left_out(p, n - MOST_MOMENTS, "result.json");
}

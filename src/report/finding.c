/* The finding of a result in words. */
#include "finding.h"

#include <math.h>

#include "quantity.h"
#include "whole.h"

static const char *const NUMBERS[] = {"None", "One",   "Two",   "Three", "Four", "Five",
                                      "Six",  "Seven", "Eight", "Nine",  "Ten"};

static int count_above(const sct_result *r, int *worst)
{
    int n = 0;
    *worst = -1;
    for (int m = 0; m < r->n_members; m++) {
        n += r->members[m].utilisation > 1;
        if (*worst < 0 || r->members[m].utilisation > r->members[*worst].utilisation) *worst = m;
    }
    return n;
}

static int worst_deflection(const sct_result *r)
{
    int worst = -1;
    for (int i = 0; i < r->n_deflections; i++)
        if (worst < 0 || r->deflections[i].utilisation > r->deflections[worst].utilisation) worst = i;
    return worst;
}

static const char *combination_name(const sct_result *r, int combination)
{
    return combination >= 0 && combination < r->n_combinations ? r->combinations[combination] : NULL;
}

/* What is worked hardest of all that is neither a member nor a joint: its utilisation and its name; 0 for none. */
static double worst_other(const sct_result *r, sct_text *what)
{
    double most = 0;
    const char *kind = "", *name = "";
    for (int i = 0; i < r->n_bows; i++)
        if (r->bows[i].utilisation > most) {
            most = r->bows[i].utilisation;
            kind = "bow of ";
            name = r->members[r->bows[i].member].name;
        }
    for (int i = 0; i < r->n_criticals; i++)
        if (sct_critical_utilisation(r, &r->criticals[i]) > most) {
            most = sct_critical_utilisation(r, &r->criticals[i]);
            kind = "critical load factor under ";
            name = r->combinations[r->criticals[i].combination];
        }
    if (sct_frequency_utilisation(r) > most) {
        most = sct_frequency_utilisation(r);
        kind = "lowest frequency";
        name = "";
    }
    sct_text_format(what, "%s%s", kind, name);
    return most;
}

/* What governs a design that keeps every limit: another limit, a deflection, or a member. */
static void tell_governing(const sct_result *r, int worst, int d, double of_other, const char *other, sct_text *out)
{
    const double of_member = worst >= 0 ? r->members[worst].utilisation : -1;
    const double of_deflection = d >= 0 ? r->deflections[d].utilisation : -1;
    sct_quantity words;
    if (of_other > fmax(0, fmax(of_member, of_deflection))) {
        sct_quantity_utilisation(words, of_other);
        sct_text_format(out, "Every limit is kept; the %s governs at %s", other, words);
    } else if (d >= 0 && of_deflection > of_member) {
        sct_quantity_utilisation(words, of_deflection);
        sct_text_format(out, "Every limit is kept; deflection governs at %s", words);
    } else if (worst >= 0) {
        sct_quantity_utilisation(words, of_member);
        sct_text_format(out, "Every limit is kept; %s governs at %s", r->members[worst].name, words);
    }
}

void sct_finding_heading(const sct_result *r, sct_text *out)
{
    sct_quantity words;
    int worst;
    const int n = count_above(r, &worst), d = worst_deflection(r);
    sct_text other = {0};
    const double of_other = worst_other(r, &other);
    if (other.failed) {
        out->failed = true;
    } else if (n > 0) {
        if (n <= 10)
            sct_text_add(out, NUMBERS[n]);
        else
            sct_text_format(out, "%d", n);
        sct_text_format(out, " of %d members %s above 1", r->n_members, n == 1 ? "is" : "are");
    } else if (d >= 0 && r->deflections[d].utilisation > 1) {
        sct_quantity_utilisation(words, r->deflections[d].utilisation);
        sct_text_format(out, "The deflection at %s is %s of its limit", r->joints[r->deflections[d].joint].name, words);
    } else if (of_other > 1) {
        sct_quantity_utilisation(words, of_other);
        sct_text_format(out, "The %s is at %s of its limit", other.data, words);
    } else if (!r->kept) {
        sct_text_add(out, "Not every limit is kept");
    } else {
        tell_governing(r, worst, d, of_other, other.data, out);
    }
    sct_text_free(&other);
}

static void tell_worst_member(const sct_result *r, int worst, sct_text *out)
{
    const sct_member_result *m = &r->members[worst];
    const char *in = combination_name(r, m->combination);
    sct_quantity words;
    sct_quantity_utilisation(words, m->utilisation);
    sct_text_format(out, "%s: %s in %s", m->name, words, sct_check_text(m->check));
    if (in != NULL) sct_text_format(out, " under %s", in);
    sct_text_add(out, ".");
}

/* "Also above 1: D4 (1.14), V2 (1.02)": up to four more, in the order of the model. */
static void tell_others_above(const sct_result *r, int worst, int n, sct_text *out)
{
    enum { MOST = 4 };
    int told = 0;
    for (int m = 0; m < r->n_members && told < MOST; m++) {
        if (m == worst || !(r->members[m].utilisation > 1)) continue;
        sct_quantity words;
        sct_quantity_utilisation(words, r->members[m].utilisation);
        sct_text_format(out, "%s%s (%s)", told == 0 ? " Also above 1: " : ", ", r->members[m].name, words);
        told++;
    }
    if (n - 1 > told) sct_text_format(out, " and %d more", n - 1 - told);
    if (told > 0) sct_text_add(out, ".");
}

static void tell_deflection(const sct_result *r, int d, sct_text *out)
{
    const sct_deflection_result *p = &r->deflections[d];
    sct_quantity u, most;
    sct_quantity_movement(u, p->u, r->us_customary);
    sct_quantity_movement(most, p->at_most, r->us_customary);
    sct_text_format(out, " Deflection at %s %s of %s\xE2\x80\xAF%s", r->joints[p->joint].name, u, most,
                    r->us_customary ? "in" : "mm");
    if (p->from >= 0) sct_text_format(out, " relative to %s", r->joints[p->from].name);
    if (p->label != NULL && p->label[0] != '\0') sct_text_format(out, " (%s)", p->label);
    sct_text_add(out, p->utilisation > 1 ? ", not kept." : ".");
}

void sct_finding_details(const sct_result *r, sct_text *out)
{
    static const char *const ENDINGS[SCT_OUTCOME_COUNT] = {
        [SCT_NO_FEASIBLE_DESIGN] = " No design was found that keeps every limit.",
        [SCT_STALLED] = " The search ended before its tolerance.",
        [SCT_NOT_OPTIMISED] = " Start design, not optimised.",
        [SCT_STOPPED] = " The search was interrupted.",
    };
    int worst;
    const int n = count_above(r, &worst), d = worst_deflection(r);
    if (worst >= 0) tell_worst_member(r, worst, out);
    if (n > 1) tell_others_above(r, worst, n, out);
    if (n > 0 && d >= 0 && r->deflections[d].utilisation <= 1)
        sct_text_add(out, " Deflections are kept.");
    else if (d >= 0)
        tell_deflection(r, d, out);
    if (r->outcome < SCT_OUTCOME_COUNT && ENDINGS[r->outcome] != NULL) sct_text_add(out, ENDINGS[r->outcome]);
    if (r->n_warnings > 0)
        sct_text_format(out, " %d warning%s: see the schedule.", r->n_warnings, r->n_warnings == 1 ? "" : "s");
}

const char *sct_finding_task(const sct_result *r)
{
    static const char *const TASKS[SCT_OUTCOME_COUNT] = {
        [SCT_CHECKED] = "Check of given sizes",  [SCT_OPTIMUM] = "Lightest areas found",
        [SCT_SECTIONS_FOUND] = "Sections found", [SCT_NO_FEASIBLE_DESIGN] = "No design keeps the limits",
        [SCT_STALLED] = "Best areas found",      [SCT_NOT_OPTIMISED] = "Start design",
        [SCT_STOPPED] = "Best design so far",
    };
    return r->outcome < SCT_OUTCOME_COUNT && TASKS[r->outcome] != NULL ? TASKS[r->outcome] : "";
}

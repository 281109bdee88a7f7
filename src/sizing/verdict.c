/* The finding of a result in one or two sentences. */
#include <math.h>
#include <string.h>

#include "base/number.h"
#include "base/text.h"
#include "sizing/result.h"

/* Utilisation for a sentence: two decimals upwards, and never a pass when it is none. */
static double shown(double utilisation)
{
    const double up = ceil(100.0 * utilisation * (1.0 - 1e-9)) / 100.0;
    return utilisation > 1.0 && up < 1.01 ? 1.01 : up;
}

/* What is worked hardest: its utilisation, and its words in a sentence. */
typedef struct finding {
    double most;
    char what[800];
    bool is_any;
} finding;

/* NAN is the worst. */
static bool is_worse(finding *f, double utilisation)
{
    if (utilisation <= f->most) return false;
    f->most = utilisation;
    f->is_any = true;
    return true;
}

static void look_at_members(const sct_result *r, finding *f)
{
    for (int k = 0; k < r->n_members; k++) {
        const sct_member_result *m = &r->members[k];
        if (!is_worse(f, m->utilisation)) continue;
        const size_t used = (size_t)sct_number_format(f->what, sizeof f->what, "%s of member \"%s\"",
                                                      sct_check_text(m->check), sct_show(m->name).text);
        if (m->combination >= 0 && used < sizeof f->what)
            sct_number_format(f->what + used, sizeof f->what - used, " in \"%s\"",
                              sct_show(r->combinations[m->combination]).text);
    }
}

static void look_at_movements(const sct_result *r, finding *f)
{
    for (int k = 0; k < r->n_deflections; k++) {
        const sct_deflection_result *d = &r->deflections[k];
        if (is_worse(f, d->utilisation))
            sct_number_format(f->what, sizeof f->what, "deflection (%.40s) of joint \"%s\" in \"%s\"", d->label,
                              sct_show(r->joints[d->joint].name).text, sct_show(r->combinations[d->combination]).text);
    }
    for (int k = 0; k < r->n_bows; k++) {
        const sct_bow_result *b = &r->bows[k];
        if (is_worse(f, b->utilisation))
            sct_number_format(f->what, sizeof f->what, "bow (%.40s) of member \"%s\" in \"%s\"", b->label,
                              sct_show(r->members[b->member].name).text,
                              sct_show(r->combinations[b->combination]).text);
    }
}

static void look_at_whole(const sct_result *r, finding *f)
{
    for (int k = 0; k < r->n_criticals && r->least_factor > 0.0; k++) {
        const sct_critical_result *c = &r->criticals[k];
        if (is_worse(f, sct_settled(r->least_factor * (1.0 + c->error) / c->factor)))
            sct_number_format(f->what, sizeof f->what, "the critical load factor of \"%s\", %.2f, at least %.3g,",
                              sct_show(r->combinations[c->combination]).text, c->factor, r->least_factor);
    }
    if (r->least_frequency > 0.0 && is_worse(f, sct_settled(r->least_frequency / r->frequency)))
        sct_number_format(f->what, sizeof f->what, "the lowest frequency, %.2f Hz, at least %.3g Hz,", r->frequency,
                          r->least_frequency);
}

/* The first combination whose first-order results say too little; NULL: none. */
static const sct_critical_result *undecided(const sct_result *r)
{
    for (int k = 0; k < r->n_criticals; k++)
        if (!r->criticals[k].has_verdict) return &r->criticals[k];
    return NULL;
}

static void tell_undecided(sct_result *r, const sct_critical_result *c)
{
    sct_number_format(r->verdict, sizeof r->verdict, "No verdict: the critical load factor of \"%s\" is %.2f; %s.",
                      sct_show(r->combinations[c->combination]).text, fmin(c->factor, c->sway), c->words);
}

void sct_result_judge(sct_result *r, bool at_smallest)
{
    finding f = {.most = 0.0};
    look_at_members(r, &f);
    look_at_movements(r, &f);
    look_at_whole(r, &f);
    const double most = f.most;
    const char *what = f.what;
    const sct_critical_result *open = undecided(r);
    if (open != NULL && sct_keeps(r->utilisation))
        tell_undecided(r, open);
    else if (r->outcome == SCT_NOT_OPTIMISED)
        sct_number_format(r->verdict, sizeof r->verdict,
                          "Not optimised: the start design %s every limit; %s is at %.2f.",
                          r->kept ? "keeps" : "does not keep", what, shown(most));
    else if (r->kept && at_smallest && most < 0.995) /* shows as less than 1 */
        sct_number_format(r->verdict, sizeof r->verdict,
                          "Every limit is kept; the smallest sizes allowed govern: %s is at %.2f only.", what,
                          shown(most));
    else if (r->kept && !f.is_any)
        sct_number_format(r->verdict, sizeof r->verdict, "Every limit is kept; no member carries a force.");
    else if (r->kept)
        sct_number_format(r->verdict, sizeof r->verdict, "Every limit is kept; %s governs at %.2f.", what, shown(most));
    else if (sct_keeps(r->utilisation) && !sct_keeps(r->utilisation_at_most))
        sct_number_format(r->verdict, sizeof r->verdict,
                          "Not decided: %s is at its limit, within the error of the analysis (%.0e of it).", what,
                          sct_number_rounded_up(r->utilisation_at_most - r->utilisation));
    else if (r->outcome == SCT_NO_FEASIBLE_DESIGN)
        sct_number_format(r->verdict, sizeof r->verdict,
                          "No design found that keeps every limit; the least violation found leaves %s at %.2f.", what,
                          shown(most));
    else
        sct_number_format(r->verdict, sizeof r->verdict, "Not every limit is kept: %s is at %.2f.", what, shown(most));
    if (r->outcome == SCT_STALLED && r->n_starts > 0) {
        const size_t used = strlen(r->verdict);
        sct_number_format(r->verdict + used, sizeof r->verdict - used,
                          " The search ended short of an optimum (KKT residual %.0e after %d iterations).", r->kkt,
                          r->starts[r->best_start].iterations);
    }
}

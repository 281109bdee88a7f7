#include "report/explain_bent.h"

#include <math.h>

#include "report/bent_checks.h"
#include "report/shown.h"

static const char *const AXIS[2] = {"in plane", "out of plane"};

/* A moment counts where it could be other than 0: out of plane in space only. */
static bool counts(const sct_worked *s, int axis)
{
    return axis < s->r->dimensions - 1 && s->g->W[axis] > 0.0;
}

static void formula(sct_worked *s, const sct_bent_check *c)
{
    static const char *const TERM[2] = {"|M_in|/(W_in f)", "|M_out|/(W_out f)"};
    sct_worked_line(s, "at x = # @: ", (double[]){c->x / s->in.length});
    sct_text_add(s->out, c->kind == SCT_CHECK_BENT_TENSION       ? "N/(A f)"
                         : c->kind == SCT_CHECK_BENT_COMPRESSION ? "-N/(A f)"
                                                                 : "|N|/(A sigma_cr/n)");
    for (int axis = 0; axis < 2; axis++)
        if (counts(s, axis)) sct_text_format(s->out, " + %s%s", c->amplification != 1 ? "a " : "", TERM[axis]);
    if (c->amplification != 1) sct_worked_line(s, ", a = #", (double[]){c->amplification});
    sct_worked_line(s, ", f = # $\n", (double[]){c->f / s->in.stress});
}

static void numbers(sct_worked *s, const sct_bent_check *c)
{
    const sct_hand_units *u = &s->in;
    const double A = s->g->A / (u->length * u->length), f = c->f / u->stress, moment = u->force * u->length;
    const double N = (c->kind == SCT_CHECK_BENT_TENSION ? 1 : -1) * c->N / u->force;
    if (c->kind == SCT_CHECK_BENT_BUCKLING)
        sct_worked_line(s, "= #/(# x #/#)", (double[]){N, A, c->by.column.sigma / u->stress, s->rule.safety});
    else
        sct_worked_line(s, "= #/(# x #)", (double[]){N, A, f});
    for (int axis = 0; axis < 2; axis++)
        if (counts(s, axis)) {
            sct_text_add(s->out, " + ");
            if (c->amplification != 1) sct_worked_line(s, "# x ", (double[]){c->amplification});
            sct_worked_line(s, "#/(# x #)",
                            (double[]){fabs(c->M[axis]) / moment, s->g->W[axis] / pow(u->length, 3), f});
        }
    sct_text_add(s->out, "\n");
}

static void check(sct_worked *s, const sct_bent_check *c)
{
    sct_worked_first_column(s, sct_check_text(c->kind));
    formula(s, c);
    if (c->kind == SCT_CHECK_BENT_BUCKLING) {
        sct_worked_first_column(s, "");
        sct_text_format(s->out, "N: largest compression along the member; sigma_cr: %s\n", AXIS[c->by.axis]);
    }
    sct_worked_first_column(s, "");
    numbers(s, c);
    sct_worked_first_column(s, "");
    sct_worked_line(s, "= #", (double[]){c->by.c[0] * c->N});
    for (int axis = 0; axis < 2; axis++)
        if (counts(s, axis)) sct_worked_line(s, " + #", (double[]){c->by.c[1 + axis] * fabs(c->M[axis])});
    sct_worked_verdict(s, c->utilisation);
}

sct_status sct_explain_bent(sct_worked *s, int combination, int member)
{
    const sct_hand_units *u = &s->in;
    const bool is_checked = s->model->combinations[combination].basis == SCT_ALLOWABLE;
    sct_bent_checks checks;
    const sct_status status = sct_bent_checks_of(s->r, combination, member, &checks);
    if (status != SCT_OK) return status;
    sct_text_add(s->out, "\n");
    sct_text_plain(s->out, s->r->combinations[combination], 64);
    sct_worked_line(s, ": N from # to # !", (double[]){checks.N[0] / u->force, checks.N[1] / u->force});
    sct_text_add(s->out, is_checked ? "\n" : "; for deflections only, no strength check\n");
    for (int axis = 0; axis < s->r->dimensions - 1; axis++) {
        const double *M = checks.M[axis], moment = u->force * u->length;
        sct_worked_first_column(s, axis == 0 ? "M in plane" : "M out of plane");
        sct_worked_line(s, "from # to # ! @\n", (double[]){M[0] / moment, M[1] / moment});
    }
    for (int k = 0; is_checked && k < checks.n; k++) check(s, &checks.check[k]);
    return SCT_OK;
}

void sct_explain_bows(sct_worked *s, int member)
{
    bool is_first = true;
    for (int i = 0; i < s->r->n_bows; i++) {
        const sct_bow_result *b = &s->r->bows[i];
        if (b->member != member) continue;
        if (is_first) sct_text_add(s->out, "\nBow, |v|/limit\n");
        is_first = false;
        sct_worked_first_column(s, AXIS[b->axis]);
        sct_worked_line(s, "at x = # @", (double[]){b->x / s->in.length});
        if (b->combination >= 0) {
            sct_text_add(s->out, " in ");
            sct_text_plain(s->out, s->r->combinations[b->combination], 64);
        }
        if (b->run != NULL) {
            sct_text_add(s->out, ", off the line of run ");
            sct_text_plain(s->out, b->run, 64);
        }
        sct_worked_line(s, ": #/#", (double[]){fabs(b->v) / s->in.length, b->at_most / s->in.length});
        sct_worked_verdict(s, b->utilisation);
    }
}

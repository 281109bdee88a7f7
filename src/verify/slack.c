#include "verify/slack.h"

#include <math.h>

static bool has_ties(const sct_model *m)
{
    bool any = false;
    for (int e = 0; e < m->n_members; e++) any = any || m->members[e].tension_only;
    return any;
}

int sct_verify_analyses(const sct_model *m)
{
    return has_ties(m) && m->n_combinations > 0 ? m->n_combinations : 1;
}

const bool *sct_verify_left_out(const sct_verifier *v, int i)
{
    return v->r->slack != NULL && has_ties(v->m) ? v->r->slack + (size_t)i * (size_t)v->m->n_members : NULL;
}

/* What its joints have come nearer, less the part that needs no force: temperature, lack of fit. */
static double shortening(const sct_verifier *v, int e, int c)
{
    const sct_member *member = &v->m->members[e];
    const sct_material *material = &v->m->materials[v->m->groups[member->group].material];
    const double *a = v->m->joints[member->from].at, *b = v->m->joints[member->to].at, L = sct_verify_length(v->m, e);
    const double *u = v->u + 3 * (size_t)c * (size_t)v->m->n_joints;
    double sum = 0.0;
    for (int i = 0; i < 3; i++) sum -= (u[3 * member->to + i] - u[3 * member->from + i]) * (b[i] - a[i]) / L;
    for (int k = 0; k < v->m->n_cases; k++) {
        const double factor = v->m->combinations[c].factor[k];
        for (int i = 0; i < v->m->cases[k].n_bar_actions && factor != 0.0; i++) {
            const sct_bar_action *action = &v->m->cases[k].bar_actions[i];
            if (action->member != e) continue;
            if (action->dT != 0.0) sum += factor * material->expansion * action->dT * L;
            sum += factor * action->lack;
        }
    }
    return sum;
}

/* A shortening that is none to rounding is none to the force of a bar as stiff as this one. */
void sct_verify_slack(sct_verifier *v, int c)
{
    const sct_open *open = &v->open_of[c];
    for (int e = 0; e < v->m->n_members; e++) {
        const size_t at = (size_t)c * (size_t)v->m->n_members + (size_t)e;
        const bool is_slack = v->r->slack != NULL && v->r->slack[at];
        const char *name = v->r->members[e].name, *combination = v->r->combinations[c];
        const double N_open = open->N + 1.5 * open->N_none;
        if (!v->m->members[e].tension_only) {
            if (is_slack) sct_differ(v, "\"slack\" of member", name, combination, 1.0, 0.0);
            continue;
        }
        if (!is_slack) {
            if (!(v->N[at] >= -N_open)) sct_differ(v, "force of tension member", name, combination, 0.0, v->N[at]);
            continue;
        }
        const int g = v->m->members[e].group;
        const double EA = v->m->materials[v->m->groups[g].material].E * v->sections[g].A, d = shortening(v, e, c);
        const double d_open = 2.0 * open->u + N_open * sct_verify_length(v->m, e) / EA;
        if (!(d >= -d_open)) sct_differ(v, "shortening of slack member", name, combination, 0.0, d);
    }
}

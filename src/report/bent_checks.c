#include "report/bent_checks.h"

#include <math.h>
#include <stdlib.h>

#include "report/whole.h"

enum { BETWEEN = 40 }; /* stations between neighbouring loads and extremes: N and M there are quadratics and cubics */

static double sum(const sct_bent_check *c)
{
    return c->by.c[0] * c->N + c->by.c[1] * fabs(c->M[0]) + c->by.c[2] * fabs(c->M[1]);
}

/* The place where a check is worst. */
static void find_worst(const sct_bent_checks *range, const sct_station stations[], int n, sct_bent_kind kind,
                       sct_bent_check *out)
{
    out->utilisation = -INFINITY;
    for (int i = 0; i < n; i++) {
        sct_bent_check at = *out;
        at.x = stations[i].x;
        at.N = kind == SCT_BENT_BUCKLING ? range->N[0] : stations[i].N;
        at.M[0] = stations[i].M[0];
        at.M[1] = stations[i].M[1];
        at.utilisation = sum(&at);
        if (at.utilisation > out->utilisation) *out = at;
    }
}

static void find_range(const sct_station stations[], int n, sct_bent_checks *out)
{
    out->N[0] = out->M[0][0] = out->M[1][0] = INFINITY;
    out->N[1] = out->M[0][1] = out->M[1][1] = -INFINITY;
    for (int i = 0; i < n; i++) {
        const double *M = stations[i].M;
        out->N[0] = fmin(out->N[0], stations[i].N);
        out->N[1] = fmax(out->N[1], stations[i].N);
        for (int axis = 0; axis < 2; axis++) {
            out->M[axis][0] = fmin(out->M[axis][0], M[axis]);
            out->M[axis][1] = fmax(out->M[axis][1], M[axis]);
        }
    }
}

sct_status sct_bent_checks_of(const sct_result *r, int combination, int member, sct_bent_checks *out)
{
    const sct_member_result *m = &r->members[member];
    const sct_group_result *g = &r->groups[m->group];
    const sct_bar_rule rule = sct_bar_rule_of(r->model, member, m->L);
    const sct_shape shape = {g->A, {sqrt(g->I[0] / g->A), sqrt(g->I[1] / g->A)}, {g->W[0], g->W[1]}};
    sct_station *stations = NULL;
    int n = 0;
    *out = (sct_bent_checks){0};
    const sct_status status = sct_result_stations(r, combination, member, BETWEEN, &stations, &n);
    if (status != SCT_OK) return status;
    find_range(stations, n, out);
    for (int kind = 0; kind < SCT_BENT_KINDS; kind++) {
        sct_bent_check *c = &out->check[out->n];
        if (!sct_bent_coefficients_of(&rule, (sct_bent_kind)kind, &shape, &c->by)) continue;
        if (kind == SCT_BENT_BUCKLING && !(out->N[0] < 0)) continue;
        c->amplification = sct_amplification_in(r, combination);
        for (int axis = 0; axis < 2; axis++) c->by.c[1 + axis] *= c->amplification;
        c->kind = sct_bent_check_kind((sct_bent_kind)kind);
        c->f = kind == SCT_BENT_TENSION ? rule.f_t : rule.f_c;
        find_worst(out, stations, n, (sct_bent_kind)kind, c);
        if (c->kind == m->check && combination == m->combination) { /* the true extreme, not the nearest station */
            c->x = m->x;
            c->N = m->N;
            c->M[0] = m->M[0];
            c->M[1] = m->M[1];
            c->utilisation = m->utilisation;
        }
        out->n++;
    }
    free(stations);
    return SCT_OK;
}

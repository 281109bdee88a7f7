#include "analysis/member_line.h"

#include <stdlib.h>
#include <string.h>

#include "base/vector.h"

/* A load with its case. */
typedef struct case_load {
    int k;
    sct_beam_load load;
} case_load;

struct sct_member_lines {
    const sct_structure *st;
    int *at;            /* n_bars + 1: loads of bar e are loads[at[e]] .. loads[at[e + 1] - 1] */
    case_load *loads;   /* by bar, then case */
    sct_beam_load *own; /* n_bars: own weight of unit area */
    /* scratch: the most loads of a member, own weight included */
    sct_beam_load *merged;
    sct_beam_piece *pieces;
};

/* ---- the loads of members ------------------------------------------------------------------------------------------
 */

static void count_loads(sct_member_lines *l)
{
    const sct_model *m = l->st->model;
    for (int k = 0; k < m->n_cases; k++)
        for (int i = 0; i < m->cases[k].n_member_loads; i++) l->at[m->cases[k].member_loads[i].member + 1]++;
    for (int e = 0; e < l->st->n_bars; e++) l->at[e + 1] += l->at[e];
}

/* A counting sort by bars; leaves `at` as it was. */
static void list_loads(sct_member_lines *l)
{
    const sct_model *m = l->st->model;
    for (int k = 0; k < m->n_cases; k++) {
        for (int i = 0; i < m->cases[k].n_member_loads; i++) {
            const sct_member_load *load = &m->cases[k].member_loads[i];
            l->loads[l->at[load->member]++] =
                (case_load){.k = k, .load = sct_local_load(&l->st->bars[load->member], load)};
        }
    }
    for (int e = l->st->n_bars; e > 0; e--) l->at[e] = l->at[e - 1];
    l->at[0] = 0;
}

static void find_weights(sct_member_lines *l)
{
    for (int e = 0; e < l->st->n_bars; e++) {
        const sct_bar *bar = &l->st->bars[e];
        sct_beam_load *own = &l->own[e];
        own->b = bar->L;
        for (int i = 0; i < 3 && bar->n > 0; i++)
            own->qa[i] = own->qb[i] = -bar->density * SCT_GRAVITY * bar->axes[i][l->st->dim - 1];
    }
}

sct_member_lines *sct_member_lines_new(const sct_structure *st)
{
    sct_member_lines *l = calloc(1, sizeof *l);
    if (l == NULL) return NULL;
    l->st = st;
    l->at = calloc((size_t)st->n_bars + 2, sizeof *l->at);
    l->own = calloc((size_t)st->n_bars + 1, sizeof *l->own);
    int most = 0;
    if (l->at != NULL && l->own != NULL) {
        count_loads(l);
        for (int e = 0; e < st->n_bars; e++)
            if (l->at[e + 1] - l->at[e] > most) most = l->at[e + 1] - l->at[e];
        l->loads = calloc((size_t)l->at[st->n_bars] + 1, sizeof *l->loads);
        l->merged = calloc((size_t)most + 1, sizeof *l->merged);
        l->pieces = calloc((size_t)sct_beam_pieces_at_most(most + 1), sizeof *l->pieces);
    }
    if (l->loads == NULL || l->merged == NULL || l->pieces == NULL) {
        sct_member_lines_free(l);
        return NULL;
    }
    list_loads(l);
    find_weights(l);
    return l;
}

void sct_member_lines_free(sct_member_lines *l)
{
    if (l == NULL) return;
    free(l->at);
    free(l->loads);
    free(l->own);
    free(l->merged);
    free(l->pieces);
    free(l);
}

double sct_weight_factor(const sct_structure *st, int combination)
{
    double sum = 0.0;
    for (int k = 0; k < st->n_cases; k++) sum += sct_factors(st, combination)[k] * st->self_weight[k];
    return sum;
}

sct_beam_line sct_member_line(sct_member_lines *l, int bar, int combination, double A)
{
    const sct_structure *st = l->st;
    const double *factor = st->model->combinations[combination].factor;
    const double weight = A * sct_weight_factor(st, combination);
    int n = 0;
    for (int i = l->at[bar]; i < l->at[bar + 1]; i++) {
        if (factor[l->loads[i].k] == 0.0) continue;
        sct_beam_loads_scaled(factor[l->loads[i].k], 1, &l->loads[i].load, &l->merged[n++]);
    }
    if (st->bars[bar].n > 0 && weight != 0.0) sct_beam_loads_scaled(weight, 1, &l->own[bar], &l->merged[n++]);
    return sct_beam_line_make(st->bars[bar].L, &st->bars[bar].hinges, n, l->merged, l->pieces);
}

sct_beam_line sct_member_weight_line(sct_member_lines *l, int bar)
{
    const sct_bar *b = &l->st->bars[bar];
    return sct_beam_line_make(b->L, &b->hinges, b->n > 0 ? 1 : 0, &l->own[bar], l->pieces);
}

/* ---- what springs carry --------------------------------------------------------------------------------------------
 */

sct_beam_state sct_spring_influence(const sct_structure *st, const sct_spring *s)
{
    const sct_beam_hinges *hinges = &st->bars[s->bar].hinges;
    sct_beam_state state = {0};
    switch (s->mode) {
    case SCT_MODE_AXIAL: state.N = 1.0; break;
    case SCT_MODE_TWIST: state.T = 1.0; break;
    case SCT_MODE_SYMMETRIC:
    case SCT_MODE_TO:
    case SCT_MODE_FROM: sct_beam_mode(hinges, s->plane, 0, state.M[s->plane]); break;
    case SCT_MODE_ANTISYMMETRIC: sct_beam_mode(hinges, s->plane, 1, state.M[s->plane]); break;
    case SCT_MODE_END:
    case SCT_MODE_SUPPORT: break;
    }
    return state;
}

static void add_state(const sct_structure *st, int spring, double S, sct_beam_state *sum)
{
    const sct_beam_state of = sct_spring_influence(st, &st->springs[spring]);
    sum->N += S * of.N;
    sum->T += S * of.T;
    for (int p = 0; p < 2; p++)
        for (int end = 0; end < 2; end++) sum->M[p][end] += S * of.M[p][end];
}

sct_beam_state sct_member_state(const sct_structure *st, const double S[], int bar)
{
    const sct_bar *b = &st->bars[bar];
    sct_beam_state state = {0};
    add_state(st, bar, S[bar], &state);
    for (int i = b->first; i < b->first + b->n; i++) add_state(st, i, S[i], &state);
    return state;
}

double sct_free_curvature(const sct_structure *st, int combination, int bar, int plane)
{
    const sct_model *m = st->model;
    double kappa = 0.0;
    for (int k = 0; k < m->n_cases; k++) {
        const double factor = m->combinations[combination].factor[k];
        for (int i = 0; i < m->cases[k].n_bar_actions && factor != 0.0; i++) {
            const sct_bar_action *action = &m->cases[k].bar_actions[i];
            if (action->member == bar && action->gradient[plane] != 0.0)
                kappa -= factor * st->bars[bar].expansion * action->gradient[plane];
        }
    }
    return kappa;
}

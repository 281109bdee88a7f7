#include "sizing/bent.h"

#include <math.h>

/* N, M_in, M_out among the quantities of beam_diagram.h. */
static const int QUANTITY[3] = {SCT_BEAM_N, SCT_BEAM_M, SCT_BEAM_M + 1};

/* A member with what every place of it needs. */
typedef struct cut {
    sct_beam_line line;
    sct_beam_state state;
    double N; /* most compressive along it, 0 at most, at x_N */
    double x_N;
    int piece_N;
} cut;

static cut cut_of(const sct_bent_member *m)
{
    static const double MOST_COMPRESSED[SCT_BEAM_QUANTITIES] = {-1.0};
    cut c = {0};
    c.line = sct_member_line(m->lines, m->bar, m->combination, m->A);
    c.state = sct_member_state(m->st, m->S, m->bar);
    const sct_beam_extreme least = sct_beam_largest(&c.line, &c.state, MOST_COMPRESSED);
    c.N = least.value > 0.0 ? -least.value : 0.0;
    if (isnan(least.value)) c.N = NAN;
    c.x_N = least.x;
    c.piece_N = least.piece;
    return c;
}

/* Takes the check of kind k at a place when it is the worst there. q: N, M_in, M_out at x. */
static void consider(const cut *c, sct_bent_kind kind, const sct_bent_coefficients *rule, const double q[3], double x,
                     int piece, double q_xx, sct_bent_place *place)
{
    const bool is_buckling = kind == SCT_BENT_BUCKLING;
    sct_bent_place p = {.kind = kind, .rule = *rule, .x = x, .piece = piece, .x_N = x, .piece_N = piece, .q_xx = q_xx};
    for (int i = 0; i < 3; i++) {
        p.q[i] = q[i];
        p.c[i] = i > 0 && q[i] < 0.0 ? -rule->c[i] : rule->c[i];
    }
    if (is_buckling) {
        p.q[0] = c->N;
        p.x_N = c->x_N;
        p.piece_N = c->piece_N;
    }
    for (int i = 0; i < 3; i++) p.utilisation += p.c[i] * p.q[i];
    if (p.utilisation > place->utilisation || isnan(p.utilisation)) *place = p;
}

static void at_end(const cut *c, sct_bent_kind kind, const sct_bent_coefficients *rule, bool is_to,
                   sct_bent_place *place)
{
    const int piece = is_to ? c->line.n - 1 : 0;
    const double x = is_to ? c->line.L : 0.0;
    double value[SCT_BEAM_QUANTITIES], q[3];
    sct_beam_values(&c->line, &c->state, piece, x, value);
    for (int i = 0; i < 3; i++) q[i] = value[QUANTITY[i]];
    consider(c, kind, rule, q, x, piece, 0.0, place);
}

/* The worst of both signs of both moments; a place counts with the signs that its moments have. */
static void inside(const cut *c, sct_bent_kind kind, const sct_bent_coefficients *rule, sct_bent_place *place)
{
    for (int signs = 0; signs < 4; signs++) {
        double sum[SCT_BEAM_QUANTITIES] = {0.0}, value[SCT_BEAM_QUANTITIES], q[3];
        if ((signs & 2) != 0 && rule->c[2] == 0.0) break;
        sum[SCT_BEAM_N] = kind == SCT_BENT_BUCKLING ? 0.0 : rule->c[0];
        sum[SCT_BEAM_M] = (signs & 1) != 0 ? -rule->c[1] : rule->c[1];
        sum[SCT_BEAM_M + 1] = (signs & 2) != 0 ? -rule->c[2] : rule->c[2];
        const sct_beam_extreme most = sct_beam_largest_inside(&c->line, &c->state, sum);
        if (!(most.value > -INFINITY)) continue;
        sct_beam_values(&c->line, &c->state, most.piece, most.x, value);
        for (int i = 0; i < 3; i++) q[i] = value[QUANTITY[i]];
        if ((q[1] < 0.0) != ((signs & 1) != 0) || (rule->c[2] != 0.0 && (q[2] < 0.0) != ((signs & 2) != 0)))
            continue; /* another's place */
        consider(c, kind, rule, q, most.x, most.piece, most.is_inside ? most.curvature : 0.0, place);
    }
}

void sct_bent_places(const sct_bent_member *member, const sct_bar_rule *rule, const sct_shape *shape,
                     sct_bent_place places[SCT_BENT_PLACES])
{
    const cut c = cut_of(member);
    for (int p = 0; p < SCT_BENT_PLACES; p++) places[p] = (sct_bent_place){.utilisation = 0.0};
    for (sct_bent_kind kind = 0; kind < SCT_BENT_KINDS; kind++) {
        sct_bent_coefficients of;
        if (!sct_bent_coefficients_of(rule, kind, shape, &of)) continue;
        for (int plane = 0; plane < 2; plane++) of.c[1 + plane] *= member->amplification;
        if (kind == SCT_BENT_BUCKLING && c.N == 0.0) continue;
        at_end(&c, kind, &of, false, &places[SCT_BENT_FROM]);
        at_end(&c, kind, &of, true, &places[SCT_BENT_TO]);
        inside(&c, kind, &of, &places[SCT_BENT_INSIDE]);
    }
}

/* ---- derivatives ---------------------------------------------------------------------------------------------------
 */

/* d ln|c_i|/dz and d2 ln|c_i|/dz2 for the member's own size: c_N ~ 1/A, c_M ~ 1/W; of buckling c_N ~ 1/(A sigma_cr)
 * with ln sigma_cr a function of ln lambda = ln Lcr - ln i. */
static void slopes_of(const sct_bent_place *place, const sct_shape_slopes *of, double e1[3], double e2[3])
{
    e1[0] = -1.0;
    e2[0] = 0.0;
    if (place->kind == SCT_BENT_BUCKLING) {
        const sct_column *column = &place->rule.column;
        const sct_curve *i = &of->i[place->rule.axis];
        e1[0] += column->s1 * i->h1;
        e2[0] += column->s1 * i->h2 - column->s2 * i->h1 * i->h1;
    }
    for (int axis = 0; axis < 2; axis++) {
        e1[1 + axis] = -of->W[axis].h1;
        e2[1 + axis] = -of->W[axis].h2;
    }
}

/* What spring `s` adds per unit of its force to N at x_N, M_in and M_out at x; and their derivatives by x. */
static void influence(const sct_bent_member *m, const sct_bent_place *place, int s, double f[3], double fx[3])
{
    const double L = m->st->bars[m->bar].L;
    const sct_beam_state state = sct_spring_influence(m->st, &m->st->springs[s]);
    f[0] = state.N;
    fx[0] = 0.0;
    for (int plane = 0; plane < 2; plane++) {
        f[1 + plane] = sct_beam_mode_moment(L, state.M[plane], place->x);
        fx[1 + plane] = (state.M[plane][1] - state.M[plane][0]) / L;
    }
}

static void add_spring(const sct_bent_member *m, const sct_bent_place *place, int s, const double e1[3], sct_form *form)
{
    double f[3], fx[3], w = 0.0, w1 = 0.0, wx = 0.0;
    influence(m, place, s, f, fx);
    for (int i = 0; i < 3; i++) {
        w += place->c[i] * f[i];
        w1 += place->c[i] * e1[i] * f[i];
        wx += place->c[i] * fx[i];
    }
    if (w == 0.0 && wx == 0.0) return;
    const int n = form->n_springs++;
    form->spring[n] = s;
    form->w[n] = w;
    form->w1[n] = w1;
    form->wx[n] = wx;
}

/* N at x_N, M_in, M_out at x of a line with a state, and their derivatives by x; that of N, which changes little along
 * a member, is left out. */
static void values(const sct_beam_line *line, const sct_beam_state *state, const sct_bent_place *place, int piece,
                   int piece_N, double q[3], double qx[3])
{
    double at[SCT_BEAM_QUANTITIES], at_N[SCT_BEAM_QUANTITIES];
    sct_beam_values(line, state, piece, place->x, at);
    sct_beam_values(line, state, piece_N, place->x_N, at_N);
    q[0] = at_N[SCT_BEAM_N];
    q[1] = at[SCT_BEAM_M];
    q[2] = at[SCT_BEAM_M + 1];
    qx[0] = place->kind == SCT_BENT_BUCKLING ? 0.0 : sct_beam_N_slope(line, piece, place->x);
    qx[1] = at[SCT_BEAM_V];
    qx[2] = at[SCT_BEAM_V + 1];
}

sct_form sct_bent_form(const sct_bent_member *m, const sct_bent_place *place, int own, const sct_shape_slopes *slopes)
{
    const sct_bar *bar = &m->st->bars[m->bar];
    const double weight = m->A * sct_weight_factor(m->st, m->combination);
    sct_form form = {.combination = m->combination, .value = place->utilisation, .own = own, .q_xx = place->q_xx};
    double e1[3] = {0.0}, e2[3] = {0.0};
    if (own >= 0) slopes_of(place, slopes, e1, e2);
    add_spring(m, place, m->bar, e1, &form);
    for (int s = bar->first; s < bar->first + bar->n; s++) add_spring(m, place, s, e1, &form);
    if (own < 0) return form;
    const sct_beam_state none = {0}, state = sct_member_state(m->st, m->S, m->bar);
    double of_weight[3] = {0.0}, of_weight_x[3] = {0.0}, q[3], qx[3];
    if (weight != 0.0 && bar->n > 0) { /* one piece: a uniform load; in proportion to A */
        const sct_beam_line unit = sct_member_weight_line(m->lines, m->bar);
        values(&unit, &none, place, 0, 0, of_weight, of_weight_x);
    }
    const sct_beam_line line = sct_member_line(m->lines, m->bar, m->combination, m->A);
    values(&line, &state, place, place->piece, place->piece_N, q, qx);
    for (int i = 0; i < 3; i++) {
        const double c = place->c[i], w = weight * of_weight[i], wx = weight * of_weight_x[i];
        form.e1 += c * (e1[i] * q[i] + w);
        form.e2 += c * ((e1[i] * e1[i] + e2[i]) * q[i] + 2.0 * e1[i] * w + w);
        form.ex += c * (e1[i] * qx[i] + wx);
    }
    return form;
}

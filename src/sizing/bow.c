#include "sizing/bow.h"

#include <math.h>

#include "analysis/recovery.h"
#include "base/vector.h"

/* ---- rows ----------------------------------------------------------------------------------------------------------
 */

static double run_length(const sct_structure *st, const sct_run *run)
{
    double L = 0.0;
    for (int e = run->first; e < run->first + run->n; e++) L += st->bars[e].L;
    return L;
}

static double at_most(const sct_bow_limit *limit, double L)
{
    return limit->at_most > 0.0 ? limit->at_most : limit->part * L;
}

int sct_bow_rows(const sct_structure *st, sct_bow_row *rows)
{
    const sct_model *m = st->model;
    int n = 0;
    for (int b = 0; b < m->n_bows; b++) {
        const sct_bow_limit *limit = &m->bows[b];
        for (int c = 0; c < m->n_combinations; c++) {
            for (int k = 0; limit->in[c] && k < limit->n_members; k++, n++) {
                const int bar = limit->members[k];
                if (rows != NULL) rows[n] = (sct_bow_row){b, bar, -1, c, at_most(limit, st->bars[bar].L)};
            }
            for (int k = 0; limit->in[c] && k < limit->n_runs; k++) {
                const sct_run *run = &m->runs[limit->runs[k]];
                for (int e = run->first; e < run->first + run->n; e++, n++)
                    if (rows != NULL)
                        rows[n] = (sct_bow_row){b, e, limit->runs[k], c, at_most(limit, run_length(st, run))};
            }
        }
    }
    return n;
}

/* ---- offsets of a run's pieces
 * ---------------------------------------------------------------------------------------- */

/* Both joints of a piece and both ends of its run; where the former lie between the latter, as parts of the length. */
typedef struct chord {
    int joint[4]; /* from, to, start and end of the run */
    double t[2];
} chord;

static chord chord_of(const sct_structure *st, const sct_bow_row *row)
{
    const sct_bar *bar = &st->bars[row->bar];
    const sct_run *run = &st->model->runs[row->run];
    chord c = {.joint = {bar->from, bar->to, st->bars[run->first].from, st->bars[run->first + run->n - 1].to}};
    double before = 0.0;
    for (int e = run->first; e < row->bar; e++) before += st->bars[e].L;
    c.t[0] = before / run_length(st, run);
    c.t[1] = (before + bar->L) / run_length(st, run);
    return c;
}

/* Weights of the four joints at a part s of the piece. */
static void chord_weights(const chord *c, double s, double weight[4])
{
    const double t = (1.0 - s) * c->t[0] + s * c->t[1];
    weight[0] = 1.0 - s;
    weight[1] = s;
    weight[2] = -(1.0 - t);
    weight[3] = -t;
}

/* How far both ends of a member are off the line against which it counts. */
static void find_offsets(const sct_bent_member *m, const sct_response *response, const sct_bow_row *row, int axis,
                         double offset[2])
{
    offset[0] = offset[1] = 0.0;
    if (row->run < 0) return;
    const chord c = chord_of(m->st, row);
    for (int end = 0; end < 2; end++) {
        double weight[4];
        chord_weights(&c, end, weight);
        for (int j = 0; j < 4; j++) {
            double d[3];
            sct_joint_moved(m->st, response, m->combination, c.joint[j], d);
            offset[end] += weight[j] * sct_dot3(d, m->st->bars[m->bar].axes[1 + axis]);
        }
    }
}

/* ---- the farthest place
 * ------------------------------------------------------------------------------------------------ */

sct_bow_place sct_bow_farthest(const sct_bent_member *m, const sct_response *response, const sct_bow_row *row,
                               double EI)
{
    const int axis = m->st->model->bows[row->limit].axis;
    sct_beam_bending bending = {.plane = axis, .EI = EI};
    bending.kappa = sct_free_curvature(m->st, m->combination, m->bar, axis);
    find_offsets(m, response, row, axis, bending.offset);
    const sct_beam_line line = sct_member_line(m->lines, m->bar, m->combination, m->A);
    const sct_beam_state state = sct_member_state(m->st, m->S, m->bar);
    const sct_beam_extreme most = sct_beam_largest_bow(&line, &state, &bending);
    sct_bow_place place = {.v = most.value, .x = most.x};
    const sct_beam_bending bent = {.plane = axis, .EI = EI};
    place.v_bend = sct_beam_deflection(&line, &state, &bent, most.x);
    place.v_bend_x = sct_beam_slope(&line, &state, &bent, most.x);
    if (most.is_inside) place.q_xx = most.curvature;
    return place;
}

/* The influence of a spring on v at x, and on its slope. */
static void add_spring(const sct_bent_member *m, int s, int axis, double x, double EI, double I1, sct_form *form)
{
    const double L = m->st->bars[m->bar].L;
    const sct_beam_state state = sct_spring_influence(m->st, &m->st->springs[s]);
    const double w = sct_beam_mode_bow(L, state.M[axis], x) / EI;
    const double slope = sct_beam_mode_slope(L, state.M[axis], x) / EI;
    if (w == 0.0 && slope == 0.0) return;
    const int n = form->n_springs++;
    form->spring[n] = s;
    form->w[n] = w;
    form->w1[n] = -I1 * w;
    form->wx[n] = slope;
}

sct_form sct_bow_form(const sct_bent_member *m, const sct_bow_row *row, const sct_bow_place *place, double EI, int own,
                      const sct_curve *I)
{
    const sct_bar *bar = &m->st->bars[m->bar];
    const int axis = m->st->model->bows[row->limit].axis;
    const double I1 = own >= 0 ? I->h1 : 0.0, I2 = own >= 0 ? I->h2 : 0.0;
    sct_form form = {.combination = m->combination, .value = place->v, .own = own, .q_xx = place->q_xx};
    for (int s = bar->first; s < bar->first + bar->n; s++) add_spring(m, s, axis, place->x, EI, I1, &form);
    if (row->run >= 0) {
        const chord c = chord_of(m->st, row);
        double weight[4], from[4], slope[4];
        chord_weights(&c, place->x / bar->L, weight);
        chord_weights(&c, 0.0, from);
        chord_weights(&c, 1.0, slope);
        for (int j = 0; j < 4; j++) slope[j] -= from[j];
        form.n_joints = 4;
        for (int j = 0; j < 4; j++) {
            form.joint[j] = c.joint[j];
            for (int i = 0; i < 3; i++) {
                form.dir[j][i] = weight[j] * bar->axes[1 + axis][i];
                form.dirx[j][i] = slope[j] / bar->L * bar->axes[1 + axis][i];
            }
        }
    }
    if (own < 0) return form;
    const sct_beam_state none = {0};
    const sct_beam_bending bent = {.plane = axis, .EI = EI};
    double w = 0.0, wx = 0.0; /* what own weight alone adds */
    if (bar->n > 0) {
        const sct_beam_line unit = sct_member_weight_line(m->lines, m->bar);
        const double weight = m->A * sct_weight_factor(m->st, m->combination);
        w = weight * sct_beam_deflection(&unit, &none, &bent, place->x);
        wx = weight * sct_beam_slope(&unit, &none, &bent, place->x);
    }
    form.e1 = -I1 * place->v_bend + w;
    form.ex = -I1 * place->v_bend_x + wx;
    form.e2 = (I1 * I1 - I2) * place->v_bend + (1.0 - 2.0 * I1) * w;
    return form;
}

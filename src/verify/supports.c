#include "verify/supports.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const double SAME_AXIS = 1e-6; /* sine: an axis nearer to others adds no rotation */

/* ---- projections --------------------------------------------------------------------------------------------------
 */

/* H = h h' / h'h for one held direction h = p; in space the normal of two held ones, p and q, is what is left free. */
static void project(int n_held, const double p[3], const double q[3], int d, double H[3][3])
{
    double v[3] = {p[0], p[1], p[2]};
    if (n_held == 0) return;
    if (n_held == 2 && d == 3) {
        for (int i = 0; i < 3; i++) v[i] = p[(i + 1) % 3] * q[(i + 2) % 3] - p[(i + 2) % 3] * q[(i + 1) % 3];
    }
    const double square = v[0] * v[0] + v[1] * v[1] + v[2] * v[2];
    for (int i = 0; i < d; i++) {
        for (int j = 0; j < d; j++) {
            const double along = v[i] * v[j] / square, one = i == j;
            H[i][j] = n_held == d ? one : n_held == 2 ? one - along : along;
        }
    }
}

/* Adds an axis to what P projects onto; the second pass makes it square to the last digit. */
static void add_axis(const double axis[3], double P[3][3])
{
    double v[3] = {axis[0], axis[1], axis[2]};
    for (int pass = 0; pass < 2; pass++) {
        double w[3];
        for (int i = 0; i < 3; i++) w[i] = v[i] - P[i][0] * v[0] - P[i][1] * v[1] - P[i][2] * v[2];
        const double length = sqrt(w[0] * w[0] + w[1] * w[1] + w[2] * w[2]);
        if (pass == 0 && !(length > SAME_AXIS)) return;
        for (int i = 0; i < 3; i++) v[i] = w[i] / length;
    }
    for (int i = 0; i < 3; i++) {
        for (int j = 0; j < 3; j++) P[i][j] += v[i] * v[j];
    }
}

static double trace(const double P[3][3])
{
    return P[0][0] + P[1][1] + P[2][2];
}

/* ---- joints -------------------------------------------------------------------------------------------------------
 */

static void find_displacements(const sct_model *m, sct_supports *s)
{
    const int d = m->dimensions;
    for (int e = 0; e < m->n_members; e++) {
        const int end[2] = {m->members[e].from, m->members[e].to};
        for (int i = 0; i < d; i++) s->free[0][end[0]][i][i] = s->free[0][end[1]][i][i] = 1.0;
    }
    for (int j = 0; j < m->n_joints; j++) {
        double(*H)[3] = s->held[0][j], (*F)[3] = s->free[0][j];
        const bool has_member = F[0][0] > 0.0;
        project(m->joints[j].n_held, m->joints[j].held[0], m->joints[j].held[1], d, H);
        for (int i = 0; i < d && has_member; i++) {
            for (int k = 0; k < d; k++) F[i][k] -= H[i][k];
        }
    }
}

/* Springs tie a joint to the ground about any axis, but only where some member feels it turn. */
static void add_springs(const sct_joint *joint, const double H[3][3], double P[3][3])
{
    if (trace((const double(*)[3])P) < trace(H) + 0.5) return;
    for (int k = 0; k < joint->n_springs; k++)
        if (joint->springs[k].is_turn) add_axis(joint->springs[k].dir, P);
}

static void find_turns(const sct_model *m, int n_elements, const sct_element elements[], sct_supports *s)
{
    for (int j = 0; j < m->n_joints; j++) {
        project(m->joints[j].n_turns_held, m->joints[j].turns_held[0], m->joints[j].turns_held[1], 3, s->held[1][j]);
        memcpy(s->free[1][j], s->held[1][j], sizeof s->free[1][j]);
    }
    for (int b = 0; b < n_elements; b++) {
        const sct_member *member = &m->members[elements[b].member];
        for (int i = 0; i < 2 * SCT_TURNS; i++) {
            double axis[3];
            if (!sct_element_turns(m, elements[b].member, i / SCT_TURNS, i % SCT_TURNS)) continue;
            sct_element_turn_axis(&elements[b], i % SCT_TURNS, axis);
            add_axis(axis, s->free[1][i < SCT_TURNS ? member->from : member->to]);
        }
    }
    for (int j = 0; j < m->n_joints; j++) {
        double(*F)[3] = s->free[1][j];
        const double(*H)[3] = (const double(*)[3])s->held[1][j];
        add_springs(&m->joints[j], H, F);
        for (int i = 0; i < 9; i++) F[i / 3][i % 3] -= H[i / 3][i % 3];
    }
}

sct_status sct_supports_find(const sct_model *model, int n_elements, const sct_element elements[], bool with_turns,
                             sct_supports *supports)
{
    const size_t joints = (size_t)model->n_joints + 1;
    *supports = (sct_supports){0};
    for (int kind = 0; kind < (with_turns ? 2 : 1); kind++) {
        supports->held[kind] = calloc(joints, sizeof *supports->held[kind]);
        supports->free[kind] = calloc(joints, sizeof *supports->free[kind]);
        if (supports->held[kind] == NULL || supports->free[kind] == NULL) return SCT_NO_MEMORY;
    }
    find_displacements(model, supports);
    if (with_turns) find_turns(model, n_elements, elements, supports);
    return SCT_OK;
}

void sct_supports_free(sct_supports *s)
{
    for (int kind = 0; kind < 2; kind++) {
        free(s->held[kind]);
        free(s->free[kind]);
    }
    *s = (sct_supports){0};
}

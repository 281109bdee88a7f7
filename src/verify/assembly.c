/* The stiffness of the second path from its members, elements and supports. */
#include <string.h>

#include "verify/work.h"

/* v (stride) = P v of one joint */
static void leave_free(const sct_work *w, int joint, double v[])
{
    for (int kind = 0; 3 * kind < w->stride; kind++) {
        const double(*P)[3] = (const double(*)[3])w->out->supports.free[kind][joint];
        const double x[3] = {v[3 * kind], v[3 * kind + 1], v[3 * kind + 2]};
        for (int i = 0; i < 3; i++) v[3 * kind + i] = P[i][0] * x[0] + P[i][1] * x[1] + P[i][2] * x[2];
    }
}

/* Adds the block value * g h' of two joints' projected rows to the lower triangle. */
static void add_block(sct_work *w, const int joint[2], const double g[], const double h[], double value)
{
    for (int p = 0; p < w->size; p++) {
        for (int q = 0; q < w->size; q++) {
            const int i = joint[0] * w->size + p, j = joint[1] * w->size + q;
            if (i >= j) sct_matrix_add(w->matrix, i, j, value * g[w->at[p]] * h[w->at[q]]);
        }
    }
}

/* Adds sum_ij K_ij row_i row_j' of a member; rows: [unknown][end][six], projected here. */
static void add_member(sct_work *w, int e, int n, double row[][2][6], const long double K[4][4])
{
    const int end[2] = {w->m->members[e].from, w->m->members[e].to};
    for (int i = 0; i < n; i++) {
        for (int s = 0; s < 2; s++) leave_free(w, end[s], row[i][s]);
    }
    for (int s = 0; s < 2; s++) {
        for (int t = 0; t < 2; t++) {
            for (int i = 0; i < n; i++) {
                for (int j = 0; j < n; j++)
                    add_block(w, (int[2]){end[s], end[t]}, row[i][s], row[j][t], (double)K[i][j]);
            }
        }
    }
}

static void add_axial(sct_work *w, int e)
{
    const long double K[4][4] = {{w->k[e]}};
    double row[1][2][6] = {{{0}}};
    for (int i = 0; i < w->d; i++) {
        row[0][0][i] = -(double)w->dir[e][i];
        row[0][1][i] = (double)w->dir[e][i];
    }
    w->c[0][w->m->members[e].from] += (double)w->k[e];
    w->c[0][w->m->members[e].to] += (double)w->k[e];
    add_member(w, e, 1, row, K);
}

static void add_element(sct_work *w, const sct_element *x)
{
    const sct_member *member = &w->m->members[x->member];
    for (int part = 0; part < SCT_TURNS; part++) {
        double row[4][2][6];
        const int n = sct_element_rows(x, part, row), turn = part == SCT_TWIST ? 0 : 1;
        w->c[1][member->from] += (double)x->part[part].K[turn][turn];
        w->c[1][member->to] += (double)x->part[part].K[n - 1][n - 1];
        if (part == SCT_IN_PLANE || w->d == 3) add_member(w, x->member, n, row, x->part[part].K);
    }
}

/* Elastic supports, and c (I - P). */
static void add_supports(sct_work *w, int joint)
{
    const sct_joint *j = &w->m->joints[joint];
    for (int k = 0; k < j->n_springs; k++) {
        const int kind = j->springs[k].is_turn;
        double row[6] = {0};
        if (3 * kind >= w->stride) continue;
        memcpy(row + 3 * kind, j->springs[k].dir, sizeof j->springs[k].dir);
        leave_free(w, joint, row);
        add_block(w, (int[2]){joint, joint}, row, row, j->springs[k].stiffness);
        w->c[kind][joint] += j->springs[k].stiffness;
    }
    for (int p = 0; p < w->size; p++) {
        for (int q = 0; q <= p; q++) {
            const int kind = w->at[p] / 3, i = w->at[p] % 3, k = w->at[q] % 3;
            if (w->at[q] / 3 != kind) continue;
            const double c = w->c[kind][joint] > 0.0 ? w->c[kind][joint] : 1.0;
            const double away = (i == k) - w->out->supports.free[kind][joint][i][k];
            sct_matrix_add(w->matrix, joint * w->size + p, joint * w->size + q, c * away);
        }
    }
}

sct_status sct_work_factor(sct_work *w)
{
    sct_status status;
    w->matrix = sct_matrix_new(w->m, w->size, &status);
    if (status != SCT_OK) return status;
    for (int e = 0; e < w->m->n_members; e++) add_axial(w, e);
    for (int b = 0; b < w->out->n_elements && w->stride == 6; b++) add_element(w, &w->out->elements[b]);
    for (int j = 0; j < w->m->n_joints; j++) add_supports(w, j);
    return sct_matrix_factor(w->matrix);
}

void sct_work_solve(sct_work *w, const long double r[])
{
    for (int j = 0; j < w->m->n_joints; j++) {
        double v[6];
        for (int i = 0; i < w->stride; i++) v[i] = (double)r[w->stride * j + i];
        leave_free(w, j, v);
        for (int p = 0; p < w->size; p++) w->b[j * w->size + p] = v[w->at[p]];
    }
    sct_matrix_solve(w->matrix, w->b);
    for (int j = 0; j < w->m->n_joints; j++) {
        double *v = w->step + w->stride * j;
        for (int i = 0; i < w->stride; i++) v[i] = 0.0;
        for (int p = 0; p < w->size; p++) v[w->at[p]] = w->b[j * w->size + p];
        leave_free(w, j, v);
    }
}

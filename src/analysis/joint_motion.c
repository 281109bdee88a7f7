/* A motion of the structure as what its joints do, and in words. */
#include "analysis/joint_motion.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/motion.h"
#include "analysis/structure_parts.h"
#include "base/vector.h"

bool sct_joint_motion_allocate(sct_joint_motion *m, const sct_structure *st)
{
    const size_t n = (size_t)st->n_joints;
    m->st = st;
    m->d = calloc(n + 1, sizeof *m->d);
    m->theta = calloc(n + 1, sizeof *m->theta);
    m->size = malloc((n + 1) * sizeof *m->size);
    m->moving = malloc((n + 1) * sizeof *m->moving);
    return m->d != NULL && m->theta != NULL && m->size != NULL && m->moving != NULL;
}

void sct_joint_motion_free(sct_joint_motion *m)
{
    free(m->d);
    free(m->theta);
    free(m->size);
    free(m->moving);
}

/* ---- what the joints do ------------------------------------------------------------------------------------------ */

/* The turn of a sprung end stands for its joint where it is the larger. */
static void add_ends(sct_joint_motion *m, const double v[])
{
    for (int e = 0; e < m->st->n_bars; e++) {
        const sct_bar *bar = &m->st->bars[e];
        for (int end = 0; end < 2 && bar->n > 0; end++) {
            double *theta = m->theta[end == 0 ? bar->from : bar->to], axis[3];
            for (int r = 0; r < SCT_TURNS; r++) {
                const int dof = bar->end_dof[end][r];
                if (dof < 0 || !(fabs(v[dof]) > sct_length3(theta) * (1.0 + 1e-9))) continue;
                sct_turn_axis(bar, r, axis);
                for (int i = 0; i < 3; i++) theta[i] = v[dof] * axis[i];
            }
        }
    }
}

static int larger_first(const void *left, const void *right)
{
    const sct_moving_joint *a = left, *b = right;
    if (a->key != b->key) return a->key < b->key ? 1 : -1;
    return (a->joint > b->joint) - (a->joint < b->joint);
}

/* Lists the joints to be named. */
static void list_moving(sct_joint_motion *m, double largest)
{
    m->n = 0;
    for (int j = 0; j < m->st->n_joints; j++) {
        if (!(m->size[j] >= SCT_MOTION_SHOWN * largest) || largest <= 0.0) continue;
        m->moving[m->n++] = (sct_moving_joint){.joint = j, .key = lround(1e6 * m->size[j] / largest)};
    }
    qsort(m->moving, (size_t)m->n, sizeof *m->moving, larger_first);
}

void sct_joint_motion_set(sct_joint_motion *m, const double v[])
{
    double most_d = 0.0, most_theta = 0.0;
    for (int j = 0; j < m->st->n_joints; j++) {
        sct_joint_displacement(m->st, v, NULL, j, m->d[j]);
        sct_joint_rotation(m->st, v, NULL, j, m->theta[j]);
    }
    add_ends(m, v);
    for (int j = 0; j < m->st->n_joints; j++) {
        m->size[j] = sct_length3(m->d[j]);
        most_d = fmax(most_d, m->size[j]);
        most_theta = fmax(most_theta, sct_length3(m->theta[j]));
    }
    m->largest = fmax(most_d, m->st->lever * most_theta);
    m->is_turn = most_d < SCT_MOTION_SHOWN * m->st->lever * most_theta;
    for (int j = 0; j < m->st->n_joints && m->is_turn; j++) m->size[j] = sct_length3(m->theta[j]);
    list_moving(m, m->is_turn ? most_theta : most_d);
}

/* ---- in words ---------------------------------------------------------------------------------------------------- */

static const double *what_moves(const sct_joint_motion *m, int joint)
{
    return m->is_turn ? m->theta[joint] : m->d[joint];
}

/* Do all joints listed move along (turn about) one line? */
static bool is_in_one_direction(const sct_joint_motion *m)
{
    const int first = m->moving[0].joint;
    for (int i = 1; i < m->n; i++) {
        const int j = m->moving[i].joint;
        const double along = fabs(sct_dot3(what_moves(m, j), what_moves(m, first))) / (m->size[j] * m->size[first]);
        if (along < 1.0 - 1e-9) return false; /* cosine: an angle of 4e-5 */
    }
    return true;
}

/* +1 or -1: the sense in which the first joint listed moves along its first component. */
static double sense(const sct_joint_motion *m)
{
    const double *d = what_moves(m, m->moving[0].joint);
    for (int i = 0; i < 3; i++) {
        if (fabs(d[i]) > 1e-6 * m->size[m->moving[0].joint]) return d[i] < 0.0 ? -1.0 : 1.0;
    }
    return 1.0;
}

static void add_direction(const sct_joint_motion *m, int joint, double sign, bool has_sense, sct_text *text)
{
    const double *a = what_moves(m, joint), d[3] = {sign * a[0], sign * a[1], sign * a[2]};
    if (m->is_turn && m->st->dim == 2) return; /* there is one axis only */
    sct_text_add(text, m->is_turn ? " about " : " in ");
    sct_motion_direction(text, m->st->dim, d, has_sense);
}

int sct_joint_motion_words(const sct_joint_motion *m, sct_text *text)
{
    const int shown = m->n < SCT_JOINTS_NAMED ? m->n : SCT_JOINTS_NAMED;
    if (m->n == 0) {
        sct_text_add(text, "the structure can move");
        return 0;
    }
    const bool one_direction = is_in_one_direction(m);
    const double sign = sense(m);
    sct_text_add(text, m->n == 1 ? "joint " : "joints ");
    for (int i = 0; i < shown; i++) {
        if (i > 0) sct_text_add(text, i == m->n - 1 ? " and " : ", ");
        sct_motion_name(text, m->st->model->joints[m->moving[i].joint].name);
        if (!one_direction) add_direction(m, m->moving[i].joint, sign, true, text);
    }
    if (m->n > shown) sct_text_format(text, " and %d more", m->n - shown);
    sct_text_add(text, m->is_turn ? " can turn" : " can move");
    if (m->n > 1) sct_text_add(text, " together");
    if (one_direction) add_direction(m, m->moving[0].joint, 1.0, false, text);
    return m->moving[0].joint;
}

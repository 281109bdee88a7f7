/* Random frames that are stable by their making, with every kind of end, support, load and action. */
#ifndef TESTS_FRAME_SHAPES_H
#define TESTS_FRAME_SHAPES_H

#include "truss_shapes.h"

static inline void fs_direction(sct_random *r, int dimensions, double dir[3])
{
    double length = 0.0;
    dir[2] = 0.0;
    for (int i = 0; i < dimensions; i++) {
        dir[i] = ts_between(r, -1.0, 1.0);
        length = hypot(length, dir[i]);
    }
    for (int i = 0; i < 3; i++) dir[i] = length > 0.1 ? dir[i] / length : i == 0;
}

static inline double fs_distance(const sct_model *m, int a, int b)
{
    double length = 0.0;
    for (int i = 0; i < 3; i++) length = hypot(length, m->joints[b].at[i] - m->joints[a].at[i]);
    return length;
}

/* A joint in a random direction from joint `from`, not too near to another. */
static inline int fs_joint(sct_model *m, sct_random *r, int from)
{
    for (;;) {
        double dir[3];
        const double L = ts_between(r, 1.5, 4.0), *at = m->joints[from].at;
        fs_direction(r, m->dimensions, dir);
        if (ts_pick(r, 3) == 0) memcpy(dir, (double[3]){0, m->dimensions == 2, m->dimensions == 3}, sizeof dir);
        const int j = mb_joint(m, at[0] + L * dir[0], at[1] + L * dir[1], at[2] + L * dir[2]);
        bool is_far = true;
        for (int i = 0; i < j; i++) is_far = is_far && fs_distance(m, i, j) > 1.0;
        if (is_far) return j;
        m->n_joints--;
    }
}

/* An axis that local axis 1 leans to, and a roll. */
static inline void fs_turn_section(sct_model *m, sct_random *r, int e)
{
    sct_member *member = &m->members[e];
    if (m->dimensions == 2 || ts_pick(r, 2) == 0) return;
    double t[3], across[3];
    for (int i = 0; i < 3; i++) t[i] = m->joints[member->to].at[i] - m->joints[member->from].at[i];
    do {
        fs_direction(r, 3, member->up);
        for (int i = 0; i < 3; i++)
            across[i] = member->up[(i + 1) % 3] * t[(i + 2) % 3] - member->up[(i + 2) % 3] * t[(i + 1) % 3];
    } while (hypot(hypot(across[0], across[1]), across[2]) < 0.3);
    if (ts_pick(r, 2) == 0) member->roll = ts_between(r, -3.0, 3.0);
}

static inline void fs_end(sct_random *r, sct_member_end *end, int turn, sct_fixity fixity)
{
    end->fixity[turn] = fixity;
    end->stiffness[turn] = fixity == SCT_SPRUNG ? pow(10.0, ts_between(r, 5.0, 8.0)) : 0.0;
}

/* Ties a new joint to an earlier one so that it is held, with its rotations. */
static inline int fs_held_beam(sct_model *m, sct_random *r, int from, int to)
{
    const bool turned = ts_pick(r, 2) == 0;
    const int e = mb_beam(m, turned ? to : from, turned ? from : to, ts_pick(r, m->n_groups));
    for (int s = 0; s < 2; s++)
        for (int turn = 0; turn < SCT_TURNS; turn++)
            if (ts_pick(r, 5) == 0) fs_end(r, &m->members[e].end[s], turn, SCT_SPRUNG);
    fs_turn_section(m, r, e);
    return e;
}

/* Any member more. */
static inline void fs_extra_member(sct_model *m, sct_random *r, int n_tree)
{
    const int a = ts_pick(r, m->n_joints), b = ts_pick(r, m->n_joints);
    if (a == b) return;
    for (int e = 0; e < m->n_members; e++) {
        const sct_member *other = &m->members[e];
        if ((other->from == a && other->to == b) || (other->from == b && other->to == a)) return;
    }
    const int e = mb_bar(m, a, b, ts_pick(r, m->n_groups));
    for (int i = 0; i < 2 * SCT_TURNS && e % 3 != 0; i++)
        fs_end(r, &m->members[e].end[i / SCT_TURNS], i % SCT_TURNS, (sct_fixity)ts_pick(r, 3));
    if (a >= n_tree && b >= n_tree) fs_end(r, &m->members[e].end[0], SCT_TWIST, SCT_PINNED); /* both would spin */
    fs_turn_section(m, r, e);
}

/* A joint that only bars hold: its rotations concern nobody. */
static inline void fs_bar_joint(sct_model *m, sct_random *r, int n_tree)
{
    const int first = m->n_joints, near = ts_pick(r, n_tree), j = fs_joint(m, r, near), d = m->dimensions;
    double dir[3][3] = {{0}};
    int other[3];
    for (int tries = 0; tries < 100; tries++) {
        for (int i = 0; i < d; i++) {
            other[i] = ts_pick(r, first);
            for (int k = 0; k < 3; k++)
                dir[i][k] = (m->joints[j].at[k] - m->joints[other[i]].at[k]) / fs_distance(m, j, other[i]);
        }
        if (ts_spread(d, (const double(*)[3])dir) < 0.2) continue;
        for (int i = 0; i < d; i++) mb_bar(m, other[i], j, ts_pick(r, m->n_groups));
        return;
    }
    mb_beam(m, near, j, 0);
}

static inline void fs_supports(sct_model *m, sct_random *r, int n_tree)
{
    double dir[3];
    const int roller = 1 + ts_pick(r, n_tree - 1), springy = 1 + ts_pick(r, n_tree - 1);
    mb_fix(m, 0);
    fs_direction(r, m->dimensions, dir);
    mb_hold(m, roller, dir[0], dir[1], dir[2]);
    if (ts_pick(r, 2) == 0) {
        sct_joint *joint = &m->joints[roller];
        fs_direction(r, 3, joint->turns_held[joint->n_turns_held]);
        if (m->dimensions == 2) memcpy(joint->turns_held[0], (double[3]){0, 0, 1}, sizeof joint->turns_held[0]);
        joint->n_turns_held++;
    }
    fs_direction(r, m->dimensions, dir);
    mb_spring(m, springy, false, dir, pow(10.0, ts_between(r, 4.0, 8.0)));
    if (m->dimensions == 3) fs_direction(r, 3, dir);
    mb_spring(m, springy, true, m->dimensions == 3 ? dir : (double[]){0, 0, 1}, pow(10.0, ts_between(r, 4.0, 8.0)));
}

static inline void fs_member_load(sct_model *m, sct_random *r, int k, int e)
{
    const double L = fs_distance(m, m->members[e].from, m->members[e].to);
    const sct_member_end *end = m->members[e].end;
    const bool spins = end[0].fixity[SCT_TWIST] == SCT_PINNED || end[1].fixity[SCT_TWIST] == SCT_PINNED;
    sct_member_load *load = mb_member_load(m, k, e);
    load->axes = (sct_load_axes)ts_pick(r, 3);
    load->is_point = ts_pick(r, 2) == 0;
    double a = ts_pick(r, 5) == 0 ? 0.0 : ts_between(r, 0.0, L), b = ts_pick(r, 5) == 0 ? L : ts_between(r, 0.0, L);
    load->a = fmin(a, b);
    load->b = load->is_point ? load->a : fmax(a, b);
    for (int i = 0; i < m->dimensions; i++) {
        load->qa[i] = load->is_point ? 0.0 : ts_between(r, -1e4, 1e4);
        load->qb[i] = load->is_point ? 0.0 : ts_between(r, -1e4, 1e4);
        load->F[i] = load->is_point ? ts_between(r, -2e4, 2e4) : 0.0;
    }
    if (load->is_point && load->axes == SCT_AXES_PROJECTED) load->axes = SCT_AXES_MODEL;
    if (!load->is_point || (m->dimensions == 3 && spins)) return;
    for (int i = m->dimensions == 3 ? 0 : 2; i < 3; i++) load->M[i] = ts_between(r, -1e4, 1e4);
}

static inline void fs_act(sct_model *m, sct_random *r, int k, int e)
{
    mb_act(m, k, e, ts_between(r, -30.0, 30.0), ts_between(r, -1e-3, 1e-3));
    sct_bar_action *action = &m->cases[k].bar_actions[m->cases[k].n_bar_actions - 1];
    action->gradient[0] = ts_between(r, -100.0, 100.0);
    action->gradient[1] = m->dimensions == 3 ? ts_between(r, -100.0, 100.0) : 0.0;
}

/* Case 0: own weight and loads at joints; case 1: loads on members; case 2: actions and a settlement. */
static inline void fs_cases(sct_model *m, sct_random *r, int n_tree)
{
    mb_case(m, 1.0);
    mb_case(m, 0.0);
    mb_case(m, 0.5);
    for (int j = 1; j < n_tree; j++) {
        if (ts_pick(r, 2) == 0) continue;
        mb_load(m, 0, j, ts_between(r, -1e4, 1e4), ts_between(r, -1e4, 1e4),
                m->dimensions == 3 ? ts_between(r, -1e4, 1e4) : 0.0);
        sct_joint_load *load = &m->cases[0].loads[m->cases[0].n_loads - 1];
        for (int i = m->dimensions == 3 ? 0 : 2; i < 3; i++) load->M[i] = ts_between(r, -1e4, 1e4);
    }
    for (int e = 0; e < m->n_members; e++) {
        for (int n = ts_pick(r, 4); n > 0; n--) fs_member_load(m, r, 1, e);
        if (ts_pick(r, 3) == 0) fs_act(m, r, 2, e);
    }
    mb_settle(m, 2, 0, ts_between(r, -3e-3, 3e-3), ts_between(r, -3e-3, 3e-3), 0.0);
    sct_settlement *s = &m->cases[2].settlements[m->cases[2].n_settlements - 1];
    for (int i = m->dimensions == 3 ? 0 : 2; i < 3; i++) s->turn[i] = ts_between(r, -2e-3, 2e-3);
}

/* A tree of n_tree joints on held beams, two joints on bars, `extra` more members; three cases. */
static inline sct_model *fs_random(int dimensions, int n_tree, int extra, uint64_t seed)
{
    sct_random r = {seed};
    sct_model *m = mb_new(dimensions);
    mb_material(m, 210e9, 7850.0, 12e-6);
    m->materials[0].G = 81e9;
    for (int g = 0; g < 3; g++) {
        const double A = ts_between(&r, 1e-3, 6e-3);
        mb_frame_group(m, A, ts_between(&r, 0.5, 4.0) * A * A, ts_between(&r, 0.1, 3.0) * A * A);
        m->groups[g].c[1] *= ts_between(&r, 0.1, 1.0);
        for (int axis = 0; axis < 2; axis++) m->groups[g].W[axis] = (sct_power){ts_between(&r, 0.5, 2.0), 1.5};
    }
    mb_joint(m, 0.0, 0.0, 0.0);
    for (int j = 1; j < n_tree; j++) {
        const int from = ts_pick(&r, j);
        fs_held_beam(m, &r, from, fs_joint(m, &r, from));
    }
    for (int i = 0; i < 2; i++) fs_bar_joint(m, &r, n_tree);
    for (int i = 0; i < extra; i++) fs_extra_member(m, &r, n_tree);
    fs_supports(m, &r, n_tree);
    fs_cases(m, &r, n_tree);
    return m;
}
#endif

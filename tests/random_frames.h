/* Seeded random frames of beams and bars, with everything that members, ends, supports and cases can have. */
#ifndef TESTS_RANDOM_FRAMES_H
#define TESTS_RANDOM_FRAMES_H

#include "solved.h"

/* What a random frame goes without. */
enum {
    RF_WEIGHTLESS = 1,   /* no own weight */
    RF_ROUND = 2,        /* second moments in plane and out of plane are the same */
    RF_NO_MOMENTS = 4,   /* no moments on members */
    RF_NO_ELASTIC = 8,   /* no elastic supports, no sprung ends */
    RF_FORCES_ONLY = 16, /* no third case */
    RF_NO_HUNG = 32      /* every joint turns about all axes */
};

static inline void rf_direction(sct_random *r, int dim, double v[3])
{
    double length;
    do {
        for (int i = 0; i < 3; i++) v[i] = i < dim ? between(r, -1, 1) : 0.0;
        length = hypot(hypot(v[0], v[1]), v[2]);
    } while (length < 0.2 || length > 1.0);
    for (int i = 0; i < 3; i++) v[i] /= length;
}

static inline double rf_distance(const sct_model *m, int a, int b)
{
    const double *p = m->joints[a].at, *q = m->joints[b].at;
    return hypot(hypot(p[0] - q[0], p[1] - q[1]), p[2] - q[2]);
}

/* A place at least 1.5 m from all joints before. */
static inline int rf_joint(sct_random *r, sct_model *m)
{
    const int j = mb_joint(m, 0, 0, 0);
    const double size = 3.0 * sqrt(j + 1.0);
    double nearest;
    do {
        nearest = INFINITY;
        for (int i = 0; i < m->dimensions; i++) m->joints[j].at[i] = between(r, 0, size);
        for (int i = 0; i < j; i++) nearest = fmin(nearest, rf_distance(m, i, j));
    } while (nearest < 1.5);
    return j;
}

static inline void rf_support(sct_random *r, sct_model *m, int joint, unsigned without)
{
    double v[3], z[3] = {0, 0, 1};
    rf_direction(r, m->dimensions, v);
    switch (below(r, without & RF_NO_ELASTIC ? 4 : 6)) {
    case 0: mb_pin(m, joint); break;
    case 1: mb_fix(m, joint); break;
    case 2: mb_hold(m, joint, v[0], v[1], v[2]); break;
    case 3:
        if (m->dimensions == 2)
            mb_hold_turn(m, joint, 0, 0, 1);
        else
            mb_hold_turn(m, joint, v[0], v[1], v[2]);
        break;
    case 4: mb_spring(m, joint, false, v, pow(10.0, between(r, 5, 8))); break;
    default: mb_spring(m, joint, true, m->dimensions == 2 ? z : v, pow(10.0, between(r, 5, 8))); break;
    }
}

/* Fixes, pins or springs each rotation of an end by itself; pinned: how often. */
static inline void rf_end(sct_random *r, sct_member_end *end, int dim, double pinned, unsigned without)
{
    for (int i = 0; i < (dim == 2 ? 1 : SCT_TURNS); i++) {
        const double p = sct_random_unit(r), k = pow(10.0, between(r, 5, 7.5));
        end->fixity[i] = p < pinned ? SCT_PINNED : p < 0.75 || without & RF_NO_ELASTIC ? SCT_FIXED : SCT_SPRUNG;
        if (end->fixity[i] == SCT_SPRUNG) end->stiffness[i] = k;
    }
}

static inline bool rf_are_joined(const sct_model *m, int a, int b)
{
    for (int e = 0; e < m->n_members; e++) {
        const int from = m->members[e].from, to = m->members[e].to;
        if ((from == a && to == b) || (from == b && to == a)) return true;
    }
    return false;
}

static inline void rf_member(sct_random *r, sct_model *m, int from, int to, double pinned, unsigned without)
{
    const int e = mb_beam(m, from, to, below(r, m->n_groups));
    sct_member *member = &m->members[e];
    for (int end = 0; end < 2; end++) rf_end(r, &member->end[end], m->dimensions, pinned, without);
    if (m->dimensions == 2 || below(r, 2) == 0) return;
    const double *p = m->joints[from].at, *q = m->joints[to].at, L = rf_distance(m, from, to);
    double along, v[3];
    do { /* across the member, more or less */
        rf_direction(r, 3, v);
        along = (v[0] * (q[0] - p[0]) + v[1] * (q[1] - p[1]) + v[2] * (q[2] - p[2])) / L;
    } while (fabs(along) > 0.8);
    memcpy(member->up, v, sizeof v);
    member->roll = between(r, -3, 3);
}

/* Any load on a member. */
static inline void rf_member_load(sct_random *r, sct_model *m, int k, int e, unsigned without)
{
    const sct_member *member = &m->members[e];
    const int dim = m->dimensions;
    const double L = rf_distance(m, member->from, member->to);
    const sct_fixity *from = member->end[0].fixity, *to = member->end[1].fixity;
    const bool twists = from[SCT_TWIST] != SCT_PINNED && to[SCT_TWIST] != SCT_PINNED;
    sct_member_load *load = mb_member_load(m, k, e);
    load->is_point = below(r, 2) == 0;
    load->axes = (sct_load_axes)below(r, 3);
    load->a = between(r, 0, 0.9) * L;
    load->b = load->is_point ? load->a : between(r, load->a / L, 1.0) * L;
    for (int i = 0; i < dim; i++) {
        if (load->is_point)
            load->F[i] = between(r, -1e4, 1e4);
        else {
            load->qa[i] = between(r, -5e3, 5e3);
            load->qb[i] = between(r, -5e3, 5e3);
        }
    }
    const double turned = between(r, -1, 1); /* the projection is that of one direction */
    for (int i = 0; i < dim && load->axes == SCT_AXES_PROJECTED; i++) load->qb[i] = turned * load->qa[i];
    if (!load->is_point || without & RF_NO_MOMENTS || below(r, 2) == 0) return;
    if (dim == 2)
        load->M[2] = between(r, -1e4, 1e4);
    else if (twists)
        for (int i = 0; i < 3; i++) load->M[i] = between(r, -1e4, 1e4);
}

/* The first n_rigid joints take any moment. */
static inline void rf_cases(sct_random *r, sct_model *m, int n_rigid, unsigned without)
{
    const int dim = m->dimensions;
    mb_case(m, without & RF_WEIGHTLESS ? 0.0 : 1.2);
    mb_case(m, 0.0);
    for (int j = 1; j < m->n_joints; j++) {
        mb_load(m, 0, j, between(r, -1e4, 1e4), between(r, -1e4, 1e4), dim == 3 ? between(r, -1e4, 1e4) : 0.0);
        const double M = between(r, -1e4, 1e4);
        if (j < n_rigid && below(r, 2) == 0) mb_moment(m, 0, j, dim == 3 ? M / 2 : 0.0, dim == 3 ? -M / 3 : 0.0, M);
    }
    for (int i = 0; i < m->n_members; i++) rf_member_load(r, m, 1, below(r, m->n_members), without);
    if (without & RF_FORCES_ONLY) return;
    mb_case(m, 0.0);
    for (int i = 0; i < 3; i++) {
        mb_act(m, 2, below(r, m->n_members), between(r, -40, 40), i == 0 ? 1e-3 : 0.0);
        sct_bar_action *action = &m->cases[2].bar_actions[i];
        for (int p = 0; p < dim - 1; p++) action->gradient[p] = between(r, -100, 100);
    }
    mb_settle(m, 2, 0, 1e-3, -2e-3, dim == 3 ? 1e-3 : 0.0);
    double *turn = m->cases[2].settlements[0].turn;
    for (int i = dim == 2 ? 2 : 0; i < 3; i++) turn[i] = between(r, -1e-3, 1e-3);
}

/* One more joint, tied to some of the first n by `dim` members well apart in direction, whose ends may be pinned: it
 * may turn about one axis or two, or none. */
static inline void rf_hang(sct_random *r, sct_model *m, int n, unsigned without)
{
    const int dim = m->dimensions;
    int others[3] = {0, 0, 0};
    bool is_found = false;
    for (int tries = 0; tries < 200 && n >= dim && !is_found; tries++) {
        const int last = rf_joint(r, m);
        for (int i = 0; i < dim; i++) others[i] = below(r, n);
        const bool differ = others[0] != others[1] && (dim == 2 || (others[0] != others[2] && others[1] != others[2]));
        is_found = differ && spread(m, last, others) > 0.2;
        if (!is_found) m->n_joints--;
    }
    if (!is_found) return; /* the others lie almost in a line */
    const int j = m->n_joints - 1;
    for (int i = 0; i < dim; i++) rf_member(r, m, others[i], j, 0.6, without);
    if (below(r, 3) == 0) rf_support(r, m, j, without);
}

/**
 * A stable frame: joint 0 is fixed; every other joint hangs on an earlier one by a beam whose ends are fixed or sprung;
 * `extra` more members have any ends, or are bars; up to two joints more hang on members with any ends. Three to five
 * groups, the last one held. Three cases: own weight with loads at joints; loads on members; temperature, lack of fit
 * and a settlement.
 */
static inline sct_model *rf_frame(sct_random *r, int dim, int n_joints, int extra, unsigned without)
{
    sct_model *m = mb_new(dim);
    const int n_groups = 3 + below(r, 3);
    for (int i = 0; i < 2; i++) {
        mb_material(m, between(r, 50e9, 210e9), between(r, 2000, 8000), 12e-6);
        m->materials[i].G = m->materials[i].E / 2.6;
    }
    for (int g = 0; g < n_groups; g++) {
        const double A = pow(10.0, between(r, -3.0, -1.5)), I = between(r, 0.3, 3.0) * A * A;
        mb_group(m, below(r, 2), A, g < n_groups - 1);
        mb_stiffen(m, g, I, without & RF_ROUND ? I : between(r, 0.2, 1.0) * I, between(r, 0.2, 2.0) * I);
        m->groups[g].J.p = between(r, 1.0, 3.0);
        m->groups[g].J.c *= pow(A, 2.0 - m->groups[g].J.p);
    }
    for (int j = 0; j < n_joints; j++) {
        rf_joint(r, m);
        if (j == 0)
            mb_fix(m, 0);
        else
            rf_member(r, m, below(r, j), j, 0.0, without);
    }
    for (int j = 1; j < n_joints; j++)
        if (below(r, 4) == 0) rf_support(r, m, j, without);
    for (int i = 0; i < extra; i++) {
        const int a = below(r, n_joints), b = below(r, n_joints);
        if (a != b && !rf_are_joined(m, a, b)) rf_member(r, m, a, b, below(r, 3) == 0 ? 1.0 : 0.4, without);
    }
    const int n_hung = below(r, 3);
    for (int i = 0; i < n_hung && !(without & RF_NO_HUNG); i++) rf_hang(r, m, n_joints, without);
    rf_cases(r, m, n_joints, without);
    return m;
}

/* Frame number `seed` of 2 to 8 joints; odd ones are plane. */
static inline sct_model *rf_any(uint64_t seed, unsigned without)
{
    sct_random r = {seed};
    const int n = 2 + below(&r, 7);
    return rf_frame(&r, seed % 2 == 1 ? 2 : 3, n, below(&r, n + 1), without);
}
#endif

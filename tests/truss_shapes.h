/* Trusses of known kinds, for tests of stability and accuracy: strips, and random ones grown joint by joint. */
#ifndef TESTS_TRUSS_SHAPES_H
#define TESTS_TRUSS_SHAPES_H

#include "base/random.h"
#include "model_build.h"

/* A new model with one material (steel, SI) and one held group of area A. */
static inline sct_model *ts_new(int dimensions, double A)
{
    sct_model *m = mb_new(dimensions);
    mb_material(m, 210e9, 7850.0, 12e-6);
    mb_group(m, 0, A, false);
    return m;
}

/* Joints and members of a parallel strip of n panels dx by h: lower joint i is 2 i, upper joint 2 i + 1. Panel i has
 * the lower chord 4 i + 1, upper chord 4 i + 2, diagonal 4 i + 3, post 4 i + 4; post 0 is member 0. `without`: the
 * panel whose diagonal is left out (the numbers behind it shift), -1: none. */
static inline void ts_strip(sct_model *m, int n, double dx, double h, int without)
{
    for (int i = 0; i <= n; i++) {
        mb_joint(m, i * dx, 0.0, 0.0);
        mb_joint(m, i * dx, h, 0.0);
    }
    mb_bar(m, 0, 1, 0);
    for (int i = 0; i < n; i++) {
        mb_bar(m, 2 * i, 2 * i + 2, 0);
        mb_bar(m, 2 * i + 1, 2 * i + 3, 0);
        if (i != without) mb_bar(m, 2 * i, 2 * i + 3, 0);
        mb_bar(m, 2 * i + 2, 2 * i + 3, 0);
    }
}

/* The strip held at its left end, with a load down at its tip. */
static inline sct_model *ts_cantilever(int n, double dx, double h, int without)
{
    sct_model *m = ts_new(2, 1e-3);
    ts_strip(m, n, dx, h, without);
    mb_pin(m, 0);
    mb_pin(m, 1);
    mb_load(m, mb_case(m, 0.0), 2 * n, 0.0, -1e4, 0.0);
    return m;
}

/* The strip on a pin and a roller, with a load down in the middle. */
static inline sct_model *ts_beam(int n, double dx, double h, int without)
{
    sct_model *m = ts_new(2, 1e-3);
    ts_strip(m, n, dx, h, without);
    mb_pin(m, 0);
    mb_hold(m, 2 * n, 0.0, 1.0, 0.0);
    mb_load(m, mb_case(m, 0.0), 2 * (n / 2), 0.0, -1e4, 0.0);
    return m;
}

/* Is the sine of the angle between two bars that hold a new joint, or the volume of three of them, fit for a truss? */
static inline double ts_spread(int dimensions, const double d[3][3])
{
    if (dimensions == 2) return fabs(d[0][0] * d[1][1] - d[0][1] * d[1][0]);
    return fabs(d[0][0] * (d[1][1] * d[2][2] - d[1][2] * d[2][1]) - d[0][1] * (d[1][0] * d[2][2] - d[1][2] * d[2][0]) +
                d[0][2] * (d[1][0] * d[2][1] - d[1][1] * d[2][0]));
}

static inline double ts_between(sct_random *r, double low, double high)
{
    return low + (high - low) * sct_random_unit(r);
}

static inline int ts_pick(sct_random *r, int n)
{
    return (int)(sct_random_bits(r) % (uint64_t)n);
}

/* A random truss that is stable by its making: a ground of pinned joints, then each new joint is tied to `dimensions`
 * earlier ones in a wide enough angle (Henneberg's first step), then `extra` more members. The first members of joint
 * number j (from n_ground) are dimensions * (j - n_ground) and on. Loads at all free joints. */
static inline sct_model *ts_random(int dimensions, int n_joints, int extra, uint64_t seed)
{
    sct_model *m = mb_new(dimensions);
    sct_random r = {seed};
    mb_material(m, 210e9, 7850.0, 12e-6);
    for (int g = 0; g < 4; g++) mb_group(m, 0, pow(10.0, ts_between(&r, -4.0, -2.0)), false);
    for (int j = 0; j < dimensions; j++) {
        mb_joint(m, j == 1 ? 4.0 : 0.0, 0.0, j == 2 ? 4.0 : 0.0);
        mb_pin(m, j);
    }
    while (m->n_joints < n_joints) {
        const int j = m->n_joints, back = j < 6 ? j : 6;
        const double y = 1.0 * (j / dimensions);
        const double at[3] = {ts_between(&r, -1.0, 5.0), ts_between(&r, y, y + 2.0),
                              dimensions == 3 ? ts_between(&r, -1.0, 5.0) : 0.0};
        int to[3] = {0};
        double d[3][3] = {{0}};
        for (int tries = 0, found = 0; tries < 50 && !found; tries++) {
            found = 1;
            for (int k = 0; k < dimensions; k++) {
                to[k] = j - 1 - ts_pick(&r, back);
                const double *a = m->joints[to[k]].at;
                const double L = hypot(hypot(at[0] - a[0], at[1] - a[1]), at[2] - a[2]);
                for (int i = 0; i < 3; i++) d[k][i] = (at[i] - a[i]) / L;
                found = found && L > 0.3;
            }
            found = found && ts_spread(dimensions, (const double(*)[3])d) > 0.2;
            if (!found) continue;
            mb_joint(m, at[0], at[1], at[2]);
            for (int k = 0; k < dimensions; k++) mb_bar(m, j, to[k], ts_pick(&r, 4));
        }
    }
    for (int e = 0; e < extra; e++) {
        const int a = ts_pick(&r, n_joints), b = ts_pick(&r, n_joints);
        if (a != b) mb_bar(m, a, b, ts_pick(&r, 4));
    }
    mb_case(m, 1.0);
    for (int j = dimensions; j < n_joints; j++) {
        mb_load(m, 0, j, ts_between(&r, -1e4, 1e4), ts_between(&r, -1e4, 1e4),
                dimensions == 3 ? ts_between(&r, -1e4, 1e4) : 0.0);
    }
    return m;
}

/* Joints in a random order: each member then ties joints far apart in number. */
static inline void ts_shuffle_joints(sct_model *m, uint64_t seed)
{
    sct_random r = {seed};
    int *place = malloc((size_t)m->n_joints * sizeof *place);
    sct_joint *joints = malloc((size_t)m->n_joints * sizeof *joints);
    for (int j = 0; j < m->n_joints; j++) place[j] = j;
    for (int j = m->n_joints - 1; j > 0; j--) {
        const int k = ts_pick(&r, j + 1), swap = place[j];
        place[j] = place[k];
        place[k] = swap;
    }
    memcpy(joints, m->joints, (size_t)m->n_joints * sizeof *joints);
    for (int j = 0; j < m->n_joints; j++) m->joints[place[j]] = joints[j];
    for (int e = 0; e < m->n_members; e++) {
        m->members[e].from = place[m->members[e].from];
        m->members[e].to = place[m->members[e].to];
    }
    for (int k = 0; k < m->n_cases; k++) {
        for (int i = 0; i < m->cases[k].n_loads; i++) m->cases[k].loads[i].joint = place[m->cases[k].loads[i].joint];
    }
    free(place);
    free(joints);
}
#endif

/* A model of model_build.h, analysed: what tests of the analysis start from. */
#ifndef TESTS_SOLVED_H
#define TESTS_SOLVED_H

#include "support.h"

#include "analysis/recovery.h"
#include "analysis/solver.h"
#include "base/random.h"
#include "model_build.h"

typedef struct solved {
    sct_model *model;
    sct_issues *issues;
    sct_structure *st;
    sct_solver *solver;
    sct_response r;
    double *A; /* n_groups */
} solved;

/* Takes the model over; every group gets the area that it holds or starts from. One combination per case is added when
 * the model has none. */
static inline solved solve_with(sct_model *model, sct_engine engine)
{
    solved s = {.model = model, .issues = sct_issues_new()};
    sct_status status = SCT_OK;
    if (model->n_combinations == 0) mb_each_case(model);
    ck_assert_int_eq(sct_structure_build(model, &s.st, s.issues), SCT_OK);
    s.solver = sct_solver_new(s.st, engine, &status);
    ck_assert_int_eq(status, SCT_OK);
    ck_assert_int_eq(sct_response_new(s.st, &s.r), SCT_OK);
    s.A = calloc((size_t)model->n_groups + 1, sizeof *s.A);
    for (int g = 0; g < model->n_groups; g++) s.A[g] = model->groups[g].A_held;
    ck_assert_int_eq(sct_solver_analyse(s.solver, s.A, &s.r), SCT_OK);
    return s;
}

static inline solved solve(sct_model *model)
{
    return solve_with(model, SCT_ENGINE_AUTO);
}

static inline void solved_free(solved *s)
{
    sct_response_free(&s->r);
    sct_solver_free(s->solver);
    sct_structure_free(s->st);
    sct_issues_free(s->issues);
    mb_free(s->model);
    free(s->A);
}

static inline double force(const solved *s, int k, int bar)
{
    return s->r.N[k * s->st->n_bars + bar];
}

/* Component `axis` of the displacement of a joint in case k. */
static inline double moved(const solved *s, int k, int joint, int axis)
{
    double d[3];
    sct_joint_displacement(s->st, s->r.u + k * s->st->n_dof, s->st->settled + (size_t)k * (size_t)s->st->n_joints * 3,
                           joint, d);
    return d[axis];
}

/* Loads and reactions of a combination, 3 n_joints each, for free(). */
static inline double *forces_of(const solved *s, const double *both)
{
    double *force = calloc((size_t)(3 * s->st->n_joints), sizeof *force);
    for (int i = 0; i < 3 * s->st->n_joints; i++) force[i] = both[6 * (i / 3) + i % 3];
    return force;
}

static inline double *loads_of(const solved *s, int combination)
{
    double *both = calloc((size_t)(6 * s->st->n_joints), sizeof *both);
    sct_combine_loads(s->st, s->A, combination, both);
    double *load = forces_of(s, both);
    free(both);
    return load;
}

static inline double *reactions_of(const solved *s, int combination)
{
    double *load = calloc((size_t)(6 * s->st->n_joints), sizeof *load);
    double *S = calloc((size_t)s->st->n_springs, sizeof *S);
    double *both = calloc((size_t)(6 * s->st->n_joints), sizeof *both);
    sct_combine_loads(s->st, s->A, combination, load);
    sct_combine_springs(s->st, &s->r, combination, S);
    sct_reactions(s->st, S, load, both);
    double *reaction = forces_of(s, both);
    free(load);
    free(S);
    free(both);
    return reaction;
}

/* ---- seeded random trusses ------------------------------------------------------------------------------------- */

static inline double between(sct_random *r, double low, double high)
{
    return low + (high - low) * sct_random_unit(r);
}

static inline int below(sct_random *r, int n)
{
    return (int)(sct_random_bits(r) % (uint64_t)n);
}

/* How well new bars from joint `j` to `others` span space: the determinant of their unit vectors. */
static inline double spread(const sct_model *m, int j, const int others[3])
{
    double v[3][3] = {{0}, {0}, {0, 0, 1}};
    for (int i = 0; i < m->dimensions; i++) {
        double length = 0.0;
        for (int x = 0; x < 3; x++) {
            v[i][x] = m->joints[others[i]].at[x] - m->joints[j].at[x];
            length = hypot(length, v[i][x]);
        }
        for (int x = 0; x < 3; x++) v[i][x] /= length;
    }
    return fabs(v[0][0] * (v[1][1] * v[2][2] - v[1][2] * v[2][1]) - v[0][1] * (v[1][0] * v[2][2] - v[1][2] * v[2][0]) +
                v[0][2] * (v[1][0] * v[2][1] - v[1][1] * v[2][0]));
}

/**
 * A stable truss: `dim` pinned joints, then joints tied to earlier ones by dim bars well apart in direction, then
 * `extra` redundant bars. Three to five groups, the last one held; three cases: loads with self-weight, loads alone,
 * and temperature, lack of fit and a settlement.
 */
static inline sct_model *random_truss(sct_random *r, int dim, int n_joints, int extra)
{
    sct_model *m = mb_new(dim);
    const int n_groups = 3 + below(r, 3);
    for (int i = 0; i < 2; i++) mb_material(m, between(r, 50e9, 210e9), between(r, 2000, 8000), 12e-6);
    for (int g = 0; g < n_groups; g++) mb_group(m, below(r, 2), between(r, 5e-4, 5e-3), g < n_groups - 1);
    for (int j = 0; j < n_joints; j++) {
        const bool is_base = j < dim;
        mb_joint(m, between(r, 0, 10), between(r, 0, 10), dim == 3 ? between(r, 0, 10) : 0.0);
        if (is_base) {
            memcpy(m->joints[j].at,
                   (double[3]){dim == 3 ? 5 + 5 * cos(2.1 * j) : 10.0 * j, dim == 3 ? 5 + 5 * sin(2.1 * j) : 0.0, 0.0},
                   sizeof m->joints[j].at);
            mb_pin(m, j);
            continue;
        }
        int others[3];
        for (int tries = 0;; tries++) {
            for (int i = 0; i < dim; i++) others[i] = below(r, j);
            const bool differ =
                others[0] != others[1] && (dim == 2 || (others[0] != others[2] && others[1] != others[2]));
            if (differ && spread(m, j, others) > 0.3) break;
            if (tries % 50 == 49) { /* a joint that nothing spans well: put it elsewhere */
                memcpy(m->joints[j].at,
                       (double[3]){between(r, 0, 10), between(r, 0, 10), dim == 3 ? between(r, 0, 10) : 0.0},
                       sizeof m->joints[j].at);
            }
        }
        for (int i = 0; i < dim; i++) mb_bar(m, others[i], j, below(r, n_groups));
    }
    for (int i = 0; i < extra; i++) {
        const int a = below(r, n_joints), b = below(r, n_joints);
        if (a != b && (a >= dim || b >= dim)) mb_bar(m, a, b, below(r, n_groups));
    }
    mb_case(m, 1.0);
    mb_case(m, 0.0);
    mb_case(m, 0.0);
    for (int k = 0; k < 2; k++) {
        for (int j = dim; j < n_joints; j++) {
            mb_load(m, k, j, between(r, -1e4, 1e4), between(r, -1e4, 1e4), dim == 3 ? between(r, -1e4, 1e4) : 0.0);
        }
    }
    mb_act(m, 2, below(r, m->n_members), 40.0, 0.0);
    mb_act(m, 2, below(r, m->n_members), 0.0, 1e-3);
    mb_settle(m, 2, 0, 0.0, -2e-3, 0.0);
    return m;
}
#endif

/* Towers with crossed bracing that carries tension only, and their slack bars. */
#ifndef TESTS_SLACK_SOLVED_H
#define TESTS_SLACK_SOLVED_H

#include "solved.h"

#include "analysis/slack.h"

typedef struct slackened {
    solved s;
    sct_slack *slack;
    sct_status status;
} slackened;

/* Takes the model over. */
static inline slackened slacken(sct_model *m)
{
    slackened x = {.s = solve(m)};
    x.slack = sct_slack_new(x.s.st);
    ck_assert_ptr_nonnull(x.slack);
    x.status = sct_slack_find(x.slack, x.s.solver, &x.s.r);
    return x;
}

static inline void slackened_free(slackened *x)
{
    sct_slack_free(x->slack);
    solved_free(&x->s);
}

static inline double combined(const slackened *x, int combination, int bar)
{
    double *N = calloc((size_t)x->s.st->n_bars, sizeof *N);
    sct_combine_forces(x->s.st, &x->s.r, combination, N);
    const double force = N[bar];
    free(N);
    return force;
}

static inline bool is_slack(const slackened *x, int combination, int bar)
{
    for (int i = 0; i < x->s.st->n_ties; i++)
        if (x->s.st->ties[i] == bar) return sct_slack_is(x->slack, combination, i);
    return false;
}

/* The force of a bar in case k. */
static inline double alone(const slackened *x, int k, int bar)
{
    return x->s.r.N[k * x->s.st->n_springs + bar];
}

/* What a bar lacks to be taut. */
static inline double lacks(const slackened *x, int combination, int bar)
{
    const sct_structure *st = x->s.st;
    for (int i = 0; i < st->n_ties; i++)
        if (st->ties[i] == bar) return sct_factors(st, combination)[st->n_cases - st->n_ties + i];
    return 0.0;
}

static inline void tie(sct_model *m, int from, int to, int group)
{
    const int e = mb_bar(m, from, to, group);
    m->members[e].tension_only = true;
}

/* Storeys of width w and height h: joints 2 i, 2 i + 1 on level i; per storey a left and a right column, a beam, and
 * two ties, one up to the right and one down to the right. Group 0: columns and beams, pin-ended bars or beams that are
 * continuous; group 1: ties. Pinned feet, no case yet. */
static inline sct_model *tower(int storeys, double w, double h, bool is_stiff)
{
    sct_model *m = mb_new(2);
    mb_material(m, 210e9, 7850, 12e-6);
    mb_group(m, 0, 3e-3, false);
    mb_stiffen(m, 0, 8e-6, 8e-6, 1e-7);
    mb_group(m, 0, 4e-4, false);
    for (int i = 0; i <= storeys; i++) {
        mb_joint(m, 0, i * h, 0);
        mb_joint(m, w, i * h, 0);
        if (i == 0) {
            mb_pin(m, 0);
            mb_pin(m, 1);
            continue;
        }
        const int a = 2 * i;
        int (*member)(sct_model *, int, int, int) = is_stiff ? mb_beam : mb_bar;
        member(m, a - 2, a, 0);
        member(m, a - 1, a + 1, 0);
        member(m, a, a + 1, 0);
        tie(m, a - 2, a + 1, 1);
        tie(m, a, a - 1, 1);
    }
    return m;
}
enum { LEFT, RIGHT, ACROSS, UP, DOWN, PER_STOREY };
#endif

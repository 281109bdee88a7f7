/* Facts about random frames, each tried on many: how far is one missed, relative to the largest of its kind? */
#ifndef TESTS_FRAME_RELATIONS_H
#define TESTS_FRAME_RELATIONS_H

#include <sys/mman.h>

#include "frame_answers.h"
#include "random_frames.h"

#define DOES_NOT_APPLY (-1.0)

enum { FRAME_MODELS = 200, FRAME_MODELS_FULL = 2000 };

/* What was seen, in memory that forked tests share. */
typedef struct frames_seen {
    int relations, models;
    double farthest; /* largest deviation / tolerance */
    char at[120];
} frames_seen;

static frames_seen *seen_by_all;

static inline void try_frames(const char *fact, double tolerance, double (*miss)(uint64_t seed))
{
    const int count = getenv("SCT_TEST_FULL") != NULL ? FRAME_MODELS_FULL : FRAME_MODELS;
    double farthest = 0.0;
    int tried = 0;
    for (uint64_t seed = 1; tried < count; seed++) {
        ck_assert_msg(seed < 20 * (uint64_t)count, "applies to too few models");
        const double off = miss(seed);
        if (off == DOES_NOT_APPLY) continue;
        ck_assert_msg(off <= tolerance, "seed %d: missed by %.3g, at most %g", (int)seed, off, tolerance);
        farthest = fmax(farthest, off);
        tried++;
    }
    seen_by_all->relations++;
    seen_by_all->models += tried;
    if (farthest / tolerance > seen_by_all->farthest) {
        seen_by_all->farthest = farthest / tolerance;
        snprintf(seen_by_all->at, sizeof seen_by_all->at, "%.1e of %g allowed in %s", farthest, tolerance, fact);
    }
    if (getenv("SCT_TEST_VERBOSE") != NULL) printf("%-80s %8.1e of %g\n", fact, farthest, tolerance);
    fflush(stdout);
}

/* RELATION(fact, tolerance) { ... } defines the test `fact`; its body sees `seed` and returns how far it is missed. */
#define RELATION(fact, tolerance)                                                                                      \
    static double fact##_missed(uint64_t seed);                                                                        \
    START_TEST(fact)                                                                                                   \
    {                                                                                                                  \
        try_frames(#fact, tolerance, fact##_missed);                                                                   \
    }                                                                                                                  \
    END_TEST                                                                                                           \
    static double fact##_missed(uint64_t seed)

static inline void open_frames(void)
{
    seen_by_all = mmap(NULL, sizeof *seen_by_all, PROT_READ | PROT_WRITE, MAP_SHARED | MAP_ANONYMOUS, -1, 0);
    if (seen_by_all == MAP_FAILED) abort();
    memset(seen_by_all, 0, sizeof *seen_by_all);
}

static inline void tell_frames(const char *of)
{
    printf("measured: %d %s held on %d random frames; nearest to its limit: %s\n", seen_by_all->relations, of,
           seen_by_all->models, seen_by_all->at);
    fflush(stdout);
}

/* ---- sizes ------------------------------------------------------------------------------------------------------- */

/* The largest force, moments divided by the mean length: of springs, of loads, of what prescribed elongations would do.
 */
static inline double frame_F_scale(const frame *f, int k)
{
    const sct_structure *st = f->s.st;
    const double *stiffness = sct_solver_stiffnesses(f->s.solver);
    double most = 0.0;
    for (int i = 0; i < st->n_springs; i++) {
        const double span = st->springs[i].span;
        most = fmax(most, fabs(f->S[k * st->n_springs + i]) / span);
        for (int c = 0; c < st->n_cases; c++)
            if (st->model->combinations[k].factor[c] != 0.0)
                most = fmax(most, fabs(st->stretch[c * st->n_springs + i] * stiffness[i]) / span);
    }
    for (int i = 0; i < 6 * st->n_joints; i++)
        most = fmax(most, fabs(f->load[k * 6 * st->n_joints + i]) / (i % 6 < 3 ? 1.0 : st->lever));
    return most;
}

/* The largest displacement, rotations times the mean length of members: of joints, and of the stiffest spring under the
 * largest force. */
static inline double frame_u_scale(const frame *f, int k)
{
    const sct_structure *st = f->s.st;
    const double *stiffness = sct_solver_stiffnesses(f->s.solver);
    double most = 0.0, stiffest = 0.0;
    for (int j = 0; j < st->n_joints; j++)
        for (int i = 0; i < 6; i++) most = fmax(most, fabs(frame_moved(f, k, j, i)) * (i < 3 ? 1.0 : st->lever));
    for (int i = 0; i < st->n_springs; i++)
        stiffest = fmax(stiffest, stiffness[i] / (st->springs[i].span * st->springs[i].span));
    return fmax(most, frame_F_scale(f, k) / stiffest);
}

/* ---- comparing --------------------------------------------------------------------------------------------------- */

enum { FRAME_QUANTITIES = SCT_BEAM_QUANTITIES + 2 }; /* N V1 V2 M1 M2 T and the two deflections */

/* How the second frame's answers follow from the first's. Zero numbers and NULL: no change. */
typedef struct frame_change {
    const double (*R)[3];          /* vectors turn by R */
    bool is_mirrored;              /* det R = -1 */
    double ku, kF, kl;             /* displacements, forces, lengths grow */
    const int *joint, *member;     /* things move to */
    int n_joints, n_members;       /* compare the first so many only */
    double sign[FRAME_QUANTITIES]; /* along members; 0: + */
    bool is_reversed;              /* every member */
} frame_change;

static inline double frame_part(const double (*R)[3], const double v[3], int i)
{
    return R == NULL ? v[i] : R[i][0] * v[0] + R[i][1] * v[1] + R[i][2] * v[2];
}

static inline double or_one(double k)
{
    return k != 0.0 ? k : 1.0;
}

static inline double joint_missed(const frame *a, const frame *b, int k, int j, const frame_change *c)
{
    const int to = c->joint != NULL ? c->joint[j] : j;
    const double ku = or_one(c->ku), kF = or_one(c->kF), kl = or_one(c->kl), turn = c->is_mirrored ? -1.0 : 1.0;
    const double of_u = frame_u_scale(a, k) * fabs(ku), of_F = frame_F_scale(a, k) * fabs(kF), lever = a->s.st->lever;
    double most = 0.0;
    for (int part = 0; part < 2; part++) {
        double u[3], F[3];
        const double u_factor = part == 0 ? ku : turn * ku / kl, F_factor = part == 0 ? kF : turn * kF * kl;
        const double u_size = part == 0 ? of_u : of_u / (lever * kl), F_size = part == 0 ? of_F : of_F * lever * kl;
        for (int i = 0; i < 3; i++) {
            u[i] = u_factor * frame_moved(a, k, j, 3 * part + i);
            F[i] = F_factor * frame_reaction(a, k, j, 3 * part + i);
        }
        for (int i = 0; i < 3; i++) {
            const double du = frame_part(c->R, u, i) - frame_moved(b, k, to, 3 * part + i);
            const double dF = frame_part(c->R, F, i) - frame_reaction(b, k, to, 3 * part + i);
            if (u_size > 0.0) most = fmax(most, fabs(du) / u_size);
            if (F_size > 0.0) most = fmax(most, fabs(dF) / F_size);
        }
    }
    return most;
}

static inline void member_values(const frame *f, int k, int e, double x, int side, double value[FRAME_QUANTITIES])
{
    frame_forces(f, k, e, x, side, value);
    for (int p = 0; p < 2; p++) value[SCT_BEAM_QUANTITIES + p] = frame_bow(f, k, e, p, x);
}

/* How far two sets of values along a member are apart, by the sizes of displacements and forces. */
static inline double values_missed(const double a[FRAME_QUANTITIES], const double b[FRAME_QUANTITIES], double of_u,
                                   double of_F, double lever)
{
    double most = 0.0;
    for (int q = 0; q < FRAME_QUANTITIES; q++) {
        const bool is_moment = q == SCT_BEAM_M || q == SCT_BEAM_M + 1 || q == SCT_BEAM_T;
        const double of = q >= SCT_BEAM_QUANTITIES ? of_u : is_moment ? of_F * lever : of_F;
        if (of > 0.0) most = fmax(most, fabs(a[q] - b[q]) / of);
        if (isnan(a[q]) || isnan(b[q])) return INFINITY;
    }
    return most;
}

/* Sizes that hold along member e as well: it may bow more than joints move. */
static inline double member_u_scale(const frame *f, int k, int e, double of_u)
{
    const double L = f->s.st->bars[e].L;
    return fmax(of_u, fmax(fabs(frame_bow(f, k, e, 0, L / 2)), fabs(frame_bow(f, k, e, 1, L / 2))));
}

static inline double member_missed(const frame *a, const frame *b, int k, int e, const frame_change *c)
{
    static const double AT[] = {0.0, 0.23, 0.5, 0.81, 1.0};
    const int to = c->member != NULL ? c->member[e] : e;
    const double ku = or_one(c->ku), kF = or_one(c->kF), kl = or_one(c->kl), L = a->s.st->bars[e].L;
    const double of_u = member_u_scale(a, k, e, frame_u_scale(a, k)), of_F = frame_F_scale(a, k);
    double most = 0.0;
    for (size_t i = 0; i < sizeof AT / sizeof *AT; i++) {
        const double x = AT[i] * L, kx = kl * (c->is_reversed ? L - x : x);
        double p[FRAME_QUANTITIES], q[FRAME_QUANTITIES];
        member_values(a, k, e, x, -1, p);
        member_values(b, k, to, fmin(kx, b->s.st->bars[to].L), c->is_reversed ? 1 : -1, q);
        for (int n = 0; n < FRAME_QUANTITIES; n++) {
            const bool is_moment = n == SCT_BEAM_M || n == SCT_BEAM_M + 1 || n == SCT_BEAM_T;
            p[n] *= or_one(c->sign[n]) * (n >= SCT_BEAM_QUANTITIES ? ku : is_moment ? kF * kl : kF);
        }
        most = fmax(most, values_missed(p, q, of_u * fabs(ku), of_F * fabs(kF), a->s.st->lever * kl));
    }
    return most;
}

/* How far the second frame is from what the change makes of the first, in combinations first .. last. */
static inline double sums_missed(const frame *a, const frame *b, int first, int last, const frame_change *c)
{
    const sct_structure *st = a->s.st;
    const int n_joints = c->n_joints > 0 ? c->n_joints : st->n_joints;
    const int n_members = c->n_members > 0 ? c->n_members : st->n_bars;
    double most = 0.0;
    for (int k = first; k <= last; k++) {
        for (int j = 0; j < n_joints; j++) most = fmax(most, joint_missed(a, b, k, j, c));
        for (int e = 0; e < n_members; e++) most = fmax(most, member_missed(a, b, k, e, c));
    }
    return most;
}

/* The same in all combinations; frees both. */
static inline double frames_missed(frame *a, frame *b, const frame_change *c)
{
    const double most = sums_missed(a, b, 0, a->s.st->n_combinations - 1, c);
    frame_free(a);
    frame_free(b);
    return most;
}
#endif

/* What a frame answers at its joints and along its members, for tests that compare it with something. */
#ifndef TESTS_FRAME_ANSWERS_H
#define TESTS_FRAME_ANSWERS_H

#include "analysis/accuracy.h"
#include "analysis/member_line.h"
#include "solved.h"

typedef struct frame {
    solved s;
    sct_member_lines *lines;
    double *u, *theta, *reaction, *load; /* n_combinations x n_joints x 3; reaction, load: x 6 */
    double *S;                           /* n_combinations x n_springs */
} frame;

/* Takes the model over, analyses and refines it; combinations: one per case when it has none. */
static inline frame frame_solve(sct_model *model)
{
    frame f = {.s = solve(model)};
    sct_accuracy accuracy;
    const sct_status status = sct_accuracy_refine(f.s.solver, &f.s.r, &accuracy, f.s.issues);
    const int said = sct_issues_count(f.s.issues);
    ck_assert_msg(status == SCT_OK, "%s", said > 0 ? sct_issues_get(f.s.issues, said - 1)->message : "");
    const sct_structure *st = f.s.st;
    const size_t sums = (size_t)st->n_combinations, joints = (size_t)st->n_joints, springs = (size_t)st->n_springs;
    f.lines = sct_member_lines_new(st);
    f.u = calloc(sums * joints * 3, sizeof *f.u);
    f.theta = calloc(sums * joints * 3, sizeof *f.theta);
    f.reaction = calloc(sums * joints * 6, sizeof *f.reaction);
    f.load = calloc(sums * joints * 6, sizeof *f.load);
    f.S = calloc(sums * springs, sizeof *f.S);
    if (!f.lines || !f.u || !f.theta || !f.reaction || !f.load || !f.S) abort();
    for (size_t k = 0; k < sums; k++) {
        sct_combine_displacements(st, &f.s.r, (int)k, f.u + k * joints * 3);
        sct_combine_rotations(st, &f.s.r, (int)k, f.theta + k * joints * 3);
        sct_combine_loads(st, f.s.A, (int)k, f.load + k * joints * 6);
        sct_combine_springs(st, &f.s.r, (int)k, f.S + k * springs);
        sct_reactions(st, f.S + k * springs, f.load + k * joints * 6, f.reaction + k * joints * 6);
    }
    return f;
}

static inline void frame_free(frame *f)
{
    sct_member_lines_free(f->lines);
    free(f->u);
    free(f->theta);
    free(f->reaction);
    free(f->load);
    free(f->S);
    solved_free(&f->s);
}

/* Displacement (i = 0 .. 2) and rotation (3 .. 5) of a joint in combination k. */
static inline double frame_moved(const frame *f, int k, int joint, int i)
{
    const int at = 3 * (k * f->s.st->n_joints + joint);
    return i < 3 ? f->u[at + i] : f->theta[at + i - 3];
}

/* Force (i = 0 .. 2) and moment (3 .. 5) of its support. */
static inline double frame_reaction(const frame *f, int k, int joint, int i)
{
    return f->reaction[6 * (k * f->s.st->n_joints + joint) + i];
}

static inline sct_beam_line frame_line(const frame *f, int k, int e)
{
    return sct_member_line(f->lines, e, k, f->s.A[f->s.st->bars[e].group]);
}

static inline sct_beam_state frame_state(const frame *f, int k, int e)
{
    return sct_member_state(f->s.st, f->S + k * f->s.st->n_springs, e);
}

/* N, V, M, T (SCT_BEAM_N, ...) of member e at x; side: of a jump there, < 0 left of it. */
static inline void frame_forces(const frame *f, int k, int e, double x, int side, double value[SCT_BEAM_QUANTITIES])
{
    const sct_beam_line line = frame_line(f, k, e);
    const sct_beam_state state = frame_state(f, k, e);
    sct_beam_values(&line, &state, sct_beam_piece_at(&line, x, side), x, value);
}

/* How it bends in a plane, against its chord. */
static inline sct_beam_bending frame_bending(const frame *f, int k, int e, int plane)
{
    const sct_structure *st = f->s.st;
    const sct_bar *bar = &st->bars[e];
    const double I = sct_properties_at_area(st->model, bar->group, f->s.A[bar->group]).P[SCT_OF_INERTIA_IN + plane];
    return (sct_beam_bending){.plane = plane, .EI = bar->E * I, .kappa = sct_free_curvature(st, k, e, plane)};
}

/* Deflection of member e at x off its chord along local axis 1 (plane 0) or 2 (plane 1). */
static inline double frame_bow(const frame *f, int k, int e, int plane, double x)
{
    const sct_beam_line line = frame_line(f, k, e);
    const sct_beam_state state = frame_state(f, k, e);
    const sct_beam_bending bending = frame_bending(f, k, e, plane);
    return sct_beam_deflection(&line, &state, &bending, x);
}

/* Bending moment in plane. */
static inline double frame_M(const frame *f, int k, int e, double x)
{
    double value[SCT_BEAM_QUANTITIES];
    frame_forces(f, k, e, x, -1, value);
    return value[SCT_BEAM_M];
}
#endif

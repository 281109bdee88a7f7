/* How far an analysis can be trusted: iterative refinement with residuals summed spring by spring in long double.
 *
 * The matrix never enters: a residual is load minus spring forces, and a spring force comes from the displacements of
 * its ends. So rounding in the assembly is repaired as well, and where it cannot be, the steps do not shrink.
 * Displacements are kept in long double while they are refined: then a healthy second step is at least a hundred times
 * smaller than the first, however badly scaled the model is, and its size is an estimate of what is left that
 * errs on the safe side. (Wilkinson; Higham, Accuracy and Stability of Numerical Algorithms, chapter 12.) What is left
 * in the end is bounded by certificate.c. */
#include "analysis/accuracy.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/certificate.h"
#include "analysis/elongation.h"
#include "analysis/motion.h"
#include "base/number.h"

enum { MOST_STEPS = 5 }; /* two always; more while they win digits and two have left an error above ENOUGH */

static const double BALANCE = 1e-9;      /* largest imbalance of a joint / largest force there; good solves: 1e-15 */
static const double CONTRACTION = 0.5;   /* a step must be this much smaller than the one before ... */
static const double AT_ROUNDING = 1e-13; /* ... unless it is below this already */
static const double ENOUGH = 1e-10;      /* a step of this size is the last */
/* Small displacements and forces are measured against this part of the largest of their case: what is zero by symmetry
 * has no relative error. */
static const double SMALL_PART = 1e-3;

/* The displacements are u + step, not rounded together: a stiff member that is carried along keeps its small
 * elongation. */
typedef struct refinement {
    const sct_structure *st;
    const double *A;
    const sct_properties *sizes;
    size_t n, n_springs, n_cases, n_joints;
    long double *weight; /* n: own weight, unit factor */
    long double *u;      /* n_cases x n */
    long double *step;   /* n_cases x n: the latest one */
    long double *r;      /* n: residual of one case */
    double *d;           /* n_cases x n: residuals, then steps */
    double *dN;          /* n_springs: what a step adds to the forces of one case */
    double *force;       /* n_joints: largest force at each joint; a moment counts by its span */
} refinement;

static void refinement_free(refinement *w)
{
    free(w->weight);
    free(w->u);
    free(w->step);
    free(w->r);
    free(w->d);
    free(w->dN);
    free(w->force);
}

static bool refinement_allocate(refinement *w)
{
    w->weight = calloc(w->n + 1, sizeof *w->weight);
    w->u = malloc((w->n_cases * w->n + 1) * sizeof *w->u);
    w->step = calloc(w->n_cases * w->n + 1, sizeof *w->step);
    w->r = malloc((w->n + 1) * sizeof *w->r);
    w->d = malloc((w->n_cases * w->n + 1) * sizeof *w->d);
    w->dN = malloc((w->n_springs + 1) * sizeof *w->dN);
    w->force = malloc((w->n_joints + 1) * sizeof *w->force);
    return w->weight && w->u && w->step && w->r && w->d && w->dN && w->force;
}

static double stretch(const refinement *w, size_t k, size_t e)
{
    return w->st->stretch[k * w->n_springs + e];
}

/* Force of spring e in case k for the displacements u of that case, without the latest step. */
static long double spring_force(const refinement *w, size_t k, size_t e)
{
    long double size;
    const sct_spring *spring = &w->st->springs[e];
    const long double elongation = stretch(w, k, e) + sct_elongation(spring, w->u + k * w->n, &size);
    return sct_stiffness_long(spring, w->sizes) * elongation;
}

static void weigh(refinement *w)
{
    for (int e = 0; e < w->st->n_bars; e++) {
        const sct_bar *bar = &w->st->bars[e];
        for (int i = 0; i < bar->n_dof; i++) w->weight[bar->dof[i]] += (long double)w->A[bar->group] * bar->w[i];
    }
}

/* r = load of case k, to be reduced by spring forces. */
static void start_with_load(refinement *w, size_t k)
{
    const long double factor = w->st->self_weight[k];
    for (size_t i = 0; i < w->n; i++) w->r[i] = w->st->f[k * w->n + i] + factor * w->weight[i];
}

static void subtract_force(refinement *w, const sct_spring *spring, long double S)
{
    for (int i = 0; i < spring->n_dof; i++) w->r[spring->dof[i]] -= S * spring->b[i];
}

static double largest(size_t n, const double a[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(a[i]));
    return most;
}

/* |change| relative to |value|, or to a part of the case's largest when the value is smaller; NAN is never small. */
static double relative(double change, double value, double scale)
{
    const double of = fmax(fabs(value), SMALL_PART * scale);
    if (change == 0.0) return 0.0;
    return of > 0.0 ? fabs(change) / of : INFINITY;
}

/* fmax that keeps a NAN. */
static double worse(double a, double b)
{
    return a > b || isnan(a) ? a : b;
}

/* The displacement of a joint, or its rotation. */
typedef enum part { MOVES, TURNS, PARTS } part;

static size_t first_of(const sct_structure *st, size_t joint, part which)
{
    return (size_t)st->first_dof[joint] + (which == TURNS ? (size_t)st->n_free[joint] : 0);
}

static int count_of(const sct_structure *st, size_t joint, part which)
{
    return which == TURNS ? st->n_turns[joint] : st->n_free[joint];
}

static double joint_size(const sct_structure *st, size_t joint, part which, const long double u[])
{
    const long double *v = u + first_of(st, joint, which);
    long double sum = 0.0L;
    for (int i = 0; i < count_of(st, joint, which); i++) sum += v[i] * v[i];
    return (double)sqrtl(sum);
}

static double joint_step(const sct_structure *st, size_t joint, part which, const double d[])
{
    const double *v = d + first_of(st, joint, which);
    double sum = 0.0;
    for (int i = 0; i < count_of(st, joint, which); i++) sum = hypot(sum, v[i]);
    return sum;
}

/* The size of changes du (n) of the displacements and dN of the forces N of case k, relative to them. Prescribed
 * elongations count as sizes too: heat may strain a truss that hardly moves, or move one without force. Moments count
 * beside forces by their span, rotations beside displacements by the mean length of a member. A sprung end may be all
 * that moves. */
static double relative_size(refinement *w, size_t k, const double N[], const double du[], const double dN[])
{
    const sct_structure *st = w->st;
    const double lever[PARTS] = {1.0, st->lever};
    long double *u = w->r; /* free between two residuals */
    double u_scale = 0.0, N_scale = 0.0, size = 0.0;
    for (size_t i = 0; i < w->n; i++) u[i] = w->u[k * w->n + i] + w->step[k * w->n + i];
    for (size_t e = 0; e < w->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        const long double stiffness = sct_stiffness_long(spring, w->sizes);
        u_scale = fmax(u_scale, fabs(stretch(w, k, e)) * spring->span);
        N_scale = fmax(N_scale, fabs((double)(stiffness * stretch(w, k, e))) / spring->span);
        N_scale = fmax(N_scale, fabs(N[e]) / spring->span);
        if (spring->mode == SCT_MODE_END) u_scale = fmax(u_scale, fabs(N[e]) / (double)stiffness * spring->span);
    }
    for (size_t j = 0; j < w->n_joints; j++)
        for (part p = MOVES; p < PARTS; p++) u_scale = fmax(u_scale, lever[p] * joint_size(st, j, p, u));
    for (size_t j = 0; j < w->n_joints; j++)
        for (part p = MOVES; p < PARTS; p++)
            size = worse(relative(joint_step(st, j, p, du), joint_size(st, j, p, u), u_scale / lever[p]), size);
    for (size_t e = 0; e < w->n_springs; e++) size = worse(relative(dN[e], N[e], N_scale * st->springs[e].span), size);
    return size;
}

/* Makes d the step of case k and returns its size; N: forces of u + step, each part by itself. */
static double take_step(refinement *w, size_t k, double N[])
{
    const double *d = w->d + k * w->n;
    long double *step = w->step + k * w->n;
    for (size_t i = 0; i < w->n; i++) step[i] = d[i];
    for (size_t e = 0; e < w->n_springs; e++) {
        long double size;
        const sct_spring *spring = &w->st->springs[e];
        const long double added = sct_stiffness_long(spring, w->sizes) * sct_elongation(spring, step, &size);
        w->dN[e] = (double)added;
        N[e] = (double)(spring_force(w, k, e) + added);
    }
    return relative_size(w, k, N, d, w->dN);
}

/* One step for all cases: u += the step before; step = K^-1 (load - spring forces); forces N (n_cases x n_springs).
 * Returns its size. */
static double refine(refinement *w, sct_solver *solver, double N[])
{
    for (size_t i = 0; i < w->n_cases * w->n; i++) w->u[i] += w->step[i];
    for (size_t k = 0; k < w->n_cases; k++) {
        start_with_load(w, k);
        for (size_t e = 0; e < w->n_springs; e++) subtract_force(w, &w->st->springs[e], spring_force(w, k, e));
        for (size_t i = 0; i < w->n; i++) w->d[k * w->n + i] = (double)w->r[i];
    }
    sct_solver_solve(solver, (int)w->n_cases, w->d);
    double size = 0.0;
    for (size_t k = 0; k < w->n_cases; k++) size = worse(take_step(w, k, N + k * w->n_springs), size);
    return size;
}

static void raise(double *most, double value)
{
    *most = fmax(*most, value);
}

/* Largest force that acts at each joint in case k: load, spring forces N, forces of prescribed elongations. */
static void find_joint_forces(refinement *w, size_t k, const double N[])
{
    const sct_structure *st = w->st;
    start_with_load(w, k);
    for (size_t j = 0; j < w->n_joints; j++)
        w->force[j] = fmax(joint_size(st, j, MOVES, w->r), joint_size(st, j, TURNS, w->r) / st->lever);
    for (size_t e = 0; e < w->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        if (spring->bar < 0) continue;
        const double held = fabs((double)(sct_stiffness_long(spring, w->sizes) * stretch(w, k, e)));
        const double force = fmax(fabs(N[e]), held) / spring->span;
        raise(&w->force[st->bars[spring->bar].from], force);
        raise(&w->force[st->bars[spring->bar].to], force);
    }
}

/* Largest imbalance of a joint / largest force there, from the forces that are reported. */
static double imbalance(refinement *w, size_t k, const double N[])
{
    const sct_structure *st = w->st;
    const double lever[PARTS] = {1.0, st->lever};
    find_joint_forces(w, k, N);
    const double scale = largest(w->n_joints, w->force);
    double worst = 0.0;
    start_with_load(w, k);
    for (size_t e = 0; e < w->n_springs; e++) subtract_force(w, &st->springs[e], N[e]);
    for (size_t j = 0; j < w->n_joints; j++)
        for (part p = MOVES; p < PARTS; p++)
            worst = worse(relative(joint_size(st, j, p, w->r) / lever[p], w->force[j], scale), worst);
    return worst;
}

int sct_stiffness_words(const sct_structure *st, const double A[], sct_text *text)
{
    int stiffest = 0, softest = 0;
    double most = -1.0, least = INFINITY;
    for (int e = 0; e < st->n_bars; e++) {
        const double k = st->bars[e].E * A[st->bars[e].group] / st->bars[e].L;
        if (k > most) {
            most = k;
            stiffest = e;
        }
        if (k < least) {
            least = k;
            softest = e;
        }
    }
    const double ratio = least > 0.0 ? most / least : INFINITY;
    sct_text_add(text, "member ");
    sct_motion_name(text, st->model->members[stiffest].name);
    sct_text_format(text, " is %.1e times as stiff (E A / L) as member ", ratio);
    sct_motion_name(text, st->model->members[softest].name);
    const bool unlike = ratio > 1e4; /* below, members alone do not cost half of the digits */
    sct_text_add(text, unlike ? "; make them more alike" : ", which is not much: the shape itself is almost movable");
    return stiffest;
}

/* Says that the numbers are good to `error` only; SCT_NO_MEMORY or `status`. */
static sct_status tell(const refinement *w, const char *what, double figure, sct_status status, sct_issues *issues)
{
    sct_text text = {0};
    sct_text_format(&text, what, figure);
    const int stiffest = sct_stiffness_words(w->st, w->A, &text);
    const sct_severity severity = status == SCT_OK ? SCT_WARNING : SCT_ERROR;
    return sct_motion_tell(&text, severity, w->st->model->members[stiffest].where, issues) ? status : SCT_NO_MEMORY;
}

/* Refines until the steps are small or stop shrinking: *contracts tells whether the second one was smaller enough than
 * the first. Returns the size of the last. */
static double refine_fully(refinement *w, sct_solver *solver, double N[], bool *contracts)
{
    double before = refine(w, solver, N), last = refine(w, solver, N);
    *contracts = last <= CONTRACTION * before || last <= AT_ROUNDING;
    for (int s = 2; s < MOST_STEPS && last > ENOUGH && last <= CONTRACTION * before; s++) {
        before = last;
        last = refine(w, solver, N);
    }
    return last;
}

/* By the estimate, before a proof is tried. */
static sct_status judge_estimate(const refinement *w, bool contracts, const sct_accuracy *accuracy, sct_issues *issues)
{
    if (!(accuracy->error <= SCT_ERROR_REFUSE)) {
        return tell(w, "the answer cannot be trusted: its relative error is about %.0e; ", accuracy->error,
                    SCT_NOT_ACCURATE, issues);
    }
    if (!contracts) {
        return tell(w, "the answer cannot be trusted: its corrections do not shrink (the last is %.0e of it); ",
                    accuracy->error, SCT_NOT_ACCURATE, issues);
    }
    if (!(accuracy->equilibrium <= BALANCE)) {
        return tell(w, "the answer cannot be trusted: a joint is out of balance by %.0e of the forces there; ",
                    accuracy->equilibrium, SCT_NOT_ACCURATE, issues);
    }
    return SCT_OK;
}

static sct_status judge_bound(const refinement *w, const sct_accuracy *accuracy, sct_issues *issues)
{
    if (isnan(accuracy->bound)) {
        return tell(
            w,
            "the answer cannot be vouched for: accuracy not certified; estimate %.0e of displacements and forces: the "
            "structure is almost movable, or its members are too unlike, for a proof; ",
            accuracy->error, SCT_NOT_ACCURATE, issues);
    }
    if (!(accuracy->bound <= SCT_ERROR_REFUSE)) {
        return tell(w, "the answer cannot be trusted: its relative error is proven to be below %.0e only; ",
                    sct_number_rounded_up(accuracy->bound), SCT_NOT_ACCURATE, issues);
    }
    if (accuracy->bound > SCT_ERROR_WARN) {
        return tell(w, "the relative error of displacements and forces may be as large as %.0e; ",
                    sct_number_rounded_up(accuracy->bound), SCT_OK, issues);
    }
    return SCT_OK;
}

static double bound_of(refinement *w, const sct_response *response)
{
    double bound = 0.0;
    for (size_t k = 0; k < w->n_cases; k++) {
        bound = worse(relative_size(w, k, response->N + k * w->n_springs, response->u_error + k * w->n,
                                    response->N_error + k * w->n_springs),
                      bound);
    }
    return bound;
}

static sct_status run(refinement *w, sct_solver *solver, sct_response *response, sct_accuracy *accuracy,
                      sct_issues *issues)
{
    bool contracts;
    if (!refinement_allocate(w)) return SCT_NO_MEMORY;
    weigh(w);
    for (size_t i = 0; i < w->n_cases * w->n; i++) w->u[i] = response->u[i];
    accuracy->error = refine_fully(w, solver, response->N, &contracts);
    for (size_t i = 0; i < w->n_cases * w->n; i++) response->u[i] = (double)(w->u[i] + w->step[i]);
    for (size_t k = 0; k < w->n_cases; k++) {
        accuracy->equilibrium = worse(imbalance(w, k, response->N + k * w->n_springs), accuracy->equilibrium);
    }
    sct_status status = judge_estimate(w, contracts, accuracy, issues);
    if (status == SCT_OK) status = sct_certify(solver, w->u, w->step, response);
    if (status != SCT_OK) return status;
    accuracy->bound = bound_of(w, response);
    return judge_bound(w, accuracy, issues);
}

sct_status sct_accuracy_refine(sct_solver *solver, sct_response *response, sct_accuracy *accuracy, sct_issues *issues)
{
    const sct_structure *st = sct_solver_structure(solver);
    refinement w = {
        .st = st,
        .A = sct_solver_areas(solver),
        .sizes = sct_solver_sizes(solver),
        .n = (size_t)st->n_dof,
        .n_springs = (size_t)st->n_springs,
        .n_cases = (size_t)st->n_cases,
        .n_joints = (size_t)st->n_joints,
    };
    *accuracy = (sct_accuracy){.bound = NAN};
    const sct_status status = run(&w, solver, response, accuracy, issues);
    refinement_free(&w);
    return status;
}

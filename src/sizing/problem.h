/**
 * Sizing as a nonlinear program for numerics/descent.h: one variable per sized group, mass as objective, every limit as
 * the logarithm of needed over present:
 *
 *     bar     g = ln(area needed for the force) - ln A        (for each strength combination)
 *     joint   g = ln(|u| / limit)
 *     member with moments   g = ln(utilisation), at both ends and at the worst place between
 *     bow     g = ln(|v| / limit), where v is largest
 *
 * In z = ln A mass has equal gradient and diagonal Hessian (w_g A_g), which is the metric; forces of a determinate
 * truss do not depend on z, so its constraints are nearly linear. Plain setting: areas and mass relative to the middle
 * of their ranges, and needed / present - 1, for comparison.
 */
#ifndef SCT_SIZING_PROBLEM_H
#define SCT_SIZING_PROBLEM_H

#include "numerics/descent.h"
#include "sizing/duty.h"
#include "sizing/need.h"

typedef struct sct_problem sct_problem;

enum { SCT_FAULT_ROOM = 800 };
typedef char sct_fault[SCT_FAULT_ROOM]; /* why no design can keep a limit, in one sentence */

/* Which limit sets the lower end of a variable. */
typedef struct sct_bound_source {
    sct_check_kind kind; /* SCT_CHECK_SMALLEST or SCT_CHECK_SLENDERNESS */
    int bar;             /* the member whose slenderness it is, or -1 */
} sct_bound_source;

/**
 * The problem of a duty (borrowed). compressed (n_bars): which members must keep the slenderness limit of members in
 * compression. fixed (design of n_groups, and one flag per group; NULL: none): groups whose size is given with true
 * properties although they could be sized. SCT_OK, SCT_NO_MEMORY; SCT_INFEASIBLE: no size of a group keeps its
 * slenderness limit, `why` says which.
 */
sct_status sct_problem_new(sct_duty *duty, const bool compressed[], const bool is_fixed[], const sct_design *fixed,
                           bool plain, sct_problem **problem, sct_fault why);
void sct_problem_free(sct_problem *problem);

/** [bytes] that the problem of a duty and a descent on it come to use. */
double sct_problem_bytes(const sct_duty *duty);

const sct_nlp *sct_problem_nlp(const sct_problem *problem);

/** [kg] what the objective counts in. */
double sct_problem_mass_unit(const sct_problem *problem);

/** Lowers every limit by a part of itself (0: as the model says). */
void sct_problem_tighten(sct_problem *problem, double margin);

/** Areas of all groups (n_groups) at x, and back. */
void sct_problem_areas(const sct_problem *problem, const double x[], double A[]);
void sct_problem_point(const sct_problem *problem, const double A[], double x[]);

/** Puts an area of a group into a design, with the properties that its curves give. */
void sct_problem_put(const sct_problem *problem, int group, double A, sct_design *design);

/** Radius of gyration of a group's envelope at area A [m2]; NAN where none is stated. */
double sct_problem_radius(const sct_problem *problem, int group, int axis, double A);

/** ln A at the ends of each variable, whatever the form of x. */
void sct_problem_bounds(const sct_problem *problem, double lower[], double upper[], sct_bound_source source[]);

/** Analyses the sizes at x: what the duty gathers then is theirs. */
sct_status sct_problem_analyse(sct_problem *problem, const double x[]);

/** Scales the sizes of a start together until the worst limit is just kept (exact but for self-weight and bounds): one
 * analysis, returned. Not for the plain form. */
int sct_problem_scale(sct_problem *problem, double x[]);

/* What constraint j is about. */
typedef struct sct_constraint {
    int bar; /* a check of a member; -1 for a deflection or a bow */
    int row; /* row of a deflection limit; else -1 */
    int bow; /* row of a bow limit; else -1 */
    int combination;
    sct_need need; /* of a bar check at the latest value call */
} sct_constraint;
sct_constraint sct_problem_constraint(const sct_problem *problem, int j);
#endif

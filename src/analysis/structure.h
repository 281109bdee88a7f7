/**
 * The structure that is analysed: joints, members and springs with numbers, directions and lengths, and only the
 * degrees of freedom that exist. Built once from a model; constant afterwards.
 *
 * Every stiffness is a spring: K = sum_m k_m b_m b_m', S_m = k_m (b_m'u + stretch_m). A pin-ended member is one spring,
 * k = E A / L with direction cosines for b. An Euler-Bernoulli member adds two springs per plane of bending, the
 * natural modes in which its stiffness is diagonal; with phi the rotations of its ends relative to the chord:
 *
 *     symmetric       k = E I / L     elongation phi_to - phi_from
 *     antisymmetric   k = 3 E I / L   elongation phi_from + phi_to
 *     hinged at one end: k = 3 E I / L with phi of the other end alone; at both: none
 *
 * and one for twist, k = G J / L. An elastic support is a spring of constant stiffness; so is a sprung end of a member,
 * whose turn then is an unknown of its own.
 *
 * Signs: N tension positive; joint forces and displacements in the model's axes; rotations by the right hand. Bending
 * in plane is v(x) along local axis 1, out of plane w(x) along local axis 2; M = E I v'', E I w''.
 * Unknowns: each joint has the part of space that its supports leave free, spanned by orthonormal `basis` vectors, then
 * the rotations that some member's end takes part in and no support holds, spanned by `turn_basis`. A joint without
 * support has x, y (, z) themselves. Joints without members have no unknowns.
 */
#ifndef SCT_ANALYSIS_STRUCTURE_H
#define SCT_ANALYSIS_STRUCTURE_H

#include "analysis/beam.h"
#include "model/model.h"

static const double SCT_GRAVITY =
    9.80665; /* [m/s2] standard value, ISO 80000-3; downwards: -y in the plane, -z in space */

/* What a stiffness is proportional to. */
typedef enum sct_property {
    SCT_OF_AREA,
    SCT_OF_INERTIA_IN,
    SCT_OF_INERTIA_OUT,
    SCT_OF_TORSION,
    SCT_PROPERTIES,
    SCT_CONSTANT = SCT_PROPERTIES
} sct_property;

/* The properties of a group's size, and their first and second derivatives with respect to z = ln A. SI; NAN where a
 * property is not stated. */
typedef struct sct_properties {
    double P[SCT_PROPERTIES], d1[SCT_PROPERTIES], d2[SCT_PROPERTIES];
} sct_properties;

/* How a spring of a member counts its elongation. */
typedef enum sct_mode {
    SCT_MODE_AXIAL,
    SCT_MODE_SYMMETRIC,     /* phi_to - phi_from */
    SCT_MODE_ANTISYMMETRIC, /* phi_from + phi_to */
    SCT_MODE_TO,            /* phi_to: hinged at `from` */
    SCT_MODE_FROM,          /* phi_from: hinged at `to` */
    SCT_MODE_TWIST,
    SCT_MODE_END,    /* rotation of the joint minus that of the sprung end */
    SCT_MODE_SUPPORT /* of a joint against the ground */
} sct_mode;

enum { SCT_MOST_SPRING_DOF = 12 };

/* Springs 0 .. n_bars-1 are the axial ones of the members, in their order. */
typedef struct sct_spring {
    sct_mode mode;
    int bar;               /* whose it is; -1: a support's */
    int plane;             /* bending in plane 0, out of plane 1, twist 2: of bending and sprung ends; else 0 */
    int end;               /* of a sprung end; else 0 */
    int group;             /* -1: constant stiffness */
    sct_property property; /* k = E P / L */
    double E, L;           /* E includes the 3 of bending and is G for twist; a constant spring has P = 1 */
    double span; /* [m] compares moments with forces: S / span is a force, k / span^2 a stiffness against displacement;
                  * 1 for forces */
    /* elongation = sum_i b[i] u[dof[i]] + (prescribed part). The first n_pairs are unknowns at `from` whose b is
     * exactly minus that of the next n_pairs, at `to`. */
    int n_dof, n_pairs;
    int *dof;
    double *b;
} sct_spring;

typedef struct sct_bar {
    int from, to, group;
    double L;          /* [m] */
    double axes[3][3]; /* local axes, unit vectors: 0 from `from` to `to`, 1 in plane, 2 out of plane */
    double E, density, expansion;
    sct_beam_hinges hinges;    /* where nothing passes between member and joint */
    int end_dof[2][SCT_TURNS]; /* the unknown of a sprung end; -1: the joint's own rotation counts */
    bool is_bent;              /* carries moments: a beam, or a bar loaded between its joints */
    int first, n;              /* its springs beyond the axial one: first .. first + n - 1; n = 0: a bar */
    double half_weight;        /* [N/m2] weight per unit area that goes to each of its joints: density g L / 2 */
    /* own weight per unit area on unknowns: w[i] on dof[i], downwards (unit factor), [N/m2] or [N m/m2] */
    int n_dof;
    int *dof;
    double *w;
} sct_bar;

typedef struct sct_structure {
    const sct_model *model; /* borrowed */
    int dim;                /* 2 or 3 */
    int n_joints, n_bars, n_springs, n_groups, n_combinations;
    int n_cases;       /* those of the model, then one hidden case for each bar that carries tension only */
    int n_dof;         /* unknowns */
    int most_dof;      /* of a spring */
    int n_vars;        /* groups that are sized */
    int *var_of_group; /* n_groups: 0 .. n_vars-1, or -1 for a held group */
    int *group_of_var; /* n_vars */
    double lever;      /* [m] the mean length of a member: a rotation times this is beside a displacement */
    sct_bar *bars;
    sct_spring *springs;
    int *first_dof;             /* n_joints: its first unknown; its unknowns are consecutive, displacements first */
    int *n_free;                /* n_joints: 0 .. dim */
    double (*basis)[3][3];      /* n_joints: basis[j][i] is the direction of unknown first_dof[j] + i; orthonormal */
    int *n_turns;               /* n_joints: rotations, 0 .. 1 or 0 .. 3 */
    double (*turn_basis)[3][3]; /* n_joints: axis of unknown first_dof[j] + n_free[j] + i; orthonormal */
    /* Bars that carry tension only. Hidden case n_cases - n_ties + i makes bar ties[i] one metre shorter, nothing
     * else; what a slack bar lacks to be taut is the factor of its case (slack.h). */
    int n_ties, *ties;
    double *factor; /* n_combinations x n_cases: the model's; hidden ones are 0 until slack.h finds them */
    /* loads, per case */
    double *self_weight; /* n_cases: times the members' own weight */
    double *f;           /* [N, N m] n_cases x n_dof: loads on the unknowns, without own weight */
    double *joint_load; /* [N, N m] n_cases x n_joints x 6: forces and moments in the model's axes, from loads at joints
                         * and on members, without own weight */
    double *stretch; /* n_cases x n_springs: prescribed part of the elongation (settlements) minus the free elongation
                      * (temperature, lack of fit) */
    double *settled; /* [m]  n_cases x n_joints x 3 prescribed displacement of held directions */
    double *turned;  /* [rad] likewise rotations */
    /* the pools that springs and members point into */
    int *dof_pool;
    double *b_pool;
} sct_structure;

/**
 * Numbers and checks the model: bars of no length, members through one place, settlement in a free direction, loads at
 * joints without members (error), joints without members and two members between the same joints (warning), ...
 *
 * SCT_OK; SCT_BAD_INPUT, SCT_NO_MEMORY, SCT_TOO_LARGE with issues (not NULL). The structure borrows the model.
 */
sct_status sct_structure_build(const sct_model *model, sct_structure **structure, sct_issues *issues);
void sct_structure_free(sct_structure *structure);

/** The factors of all cases in a combination, n_cases. */
static inline const double *sct_factors(const sct_structure *st, int combination)
{
    return st->factor + (size_t)combination * (size_t)st->n_cases;
}

/** The properties of a group at an area: by its relation; those of the held section; on a ladder between the sections
 * beside it, straight in logarithms. */
sct_properties sct_properties_at_area(const sct_model *model, int group, double A);

/** Stiffness of a spring. */
static inline double sct_spring_stiffness(const sct_spring *s, const sct_properties sizes[])
{
    if (s->group < 0) return s->E / s->L;
    const sct_properties *size = &sizes[s->group];
    return s->E * size->P[s->property] / s->L;
}

/** A member's load in its local axes. */
sct_beam_load sct_local_load(const sct_bar *bar, const sct_member_load *load);

/** weight (n_dof): own weight of all bars with the areas A (n_groups) on the unknowns, unit factor. The load of case k
 * on the unknowns is f[k] + self_weight[k] * weight. */
void sct_structure_weight(const sct_structure *st, const double A[], double weight[]);

/** Own weight of one member of unit area on its two joints, unit factor: 3 forces and 3 moments each, in the model's
 * axes. */
void sct_bar_weight(const sct_structure *st, int bar, double end[2][6]);

/** Displacement of a joint in the model's axes, from the unknowns of one case or combination plus its settlement
 * (settled: n_joints x 3 of the case, or NULL). */
void sct_joint_displacement(const sct_structure *st, const double u[], const double *settled, int joint, double d[3]);
/** Its rotation, likewise; 0 about axes that no member's end takes part in. */
void sct_joint_rotation(const sct_structure *st, const double u[], const double *turned, int joint, double theta[3]);

/** What the springs of a bar pull its joints with, for the spring forces S (n_springs) of one case or combination:
 * 3 forces and 3 moments on each joint, in the model's axes. Loads between its ends are not included. */
void sct_bar_pull(const sct_structure *st, const double S[], int bar, double end[2][6]);
#endif

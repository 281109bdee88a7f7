/* What a model file says, in SI units, and where it says it. Plain data; references are indices; checked by the reader:
 * every reference exists, every number is finite and in its range. What needs geometry is checked in structure.c. */
#ifndef SCT_MODEL_MODEL_H
#define SCT_MODEL_MODEL_H

#include "base/arena.h"
#include "base/issues.h"

/* Axes of bending. */
enum { SCT_IN_PLANE = 0, SCT_OUT_OF_PLANE = 1 };

/* NAN stands for "not given" in every optional number below, unless the comment says otherwise. */

typedef struct sct_material {
    const char *name;
    sct_where where;
    double E;            /* [Pa] Young's modulus, > 0 */
    double density;      /* [kg/m3] > 0 */
    double expansion;    /* [1/K]; NAN: not given */
    double yield;        /* [Pa]; NAN: not given */
    double G;            /* [Pa] shear modulus, for torsion; NAN: not given */
    double allowable[2]; /* [Pa] tension, compression; NAN: not given */
} sct_material;

typedef struct sct_joint {
    const char *name;
    sct_where where;
    double at[3];            /* [m]; z = 0 in a plane model */
    int n_held;              /* 0 to dimensions */
    double held[3][3];       /* unit vectors, linearly independent, not necessarily orthogonal */
    int n_turns_held;        /* rotations held: 0 or 1 (about z) in a plane model, 0 to 3 in space */
    double turns_held[3][3]; /* unit vectors of their axes, as `held` */
    int n_springs;
    struct sct_joint_spring *springs;
} sct_joint;

/* An elastic support: a force or a moment against the displacement or the rotation of a joint. */
typedef struct sct_joint_spring {
    bool is_turn;
    double dir[3];    /* unit vector: direction, or axis of rotation */
    double stiffness; /* [N/m] or [N m/rad], > 0 */
    sct_where where;
} sct_joint_spring;

typedef struct sct_section {
    const char *name;
    double A;     /* [m2] > 0 */
    double I[2];  /* [m4] in plane, out of plane; > 0 */
    double W[2];  /* [m3] elastic section modulus of the farther fibre; NAN: not given */
    double J;     /* [m4] torsion constant; NAN: not given */
    double depth; /* [m] for drawing; 0: not given */
} sct_section;

/* A family of sections, lightest first (ties in the order given). */
typedef struct sct_family {
    const char *name;
    sct_where where;
    int n;
    sct_section *sections;
} sct_family;

typedef enum sct_sizing_kind {
    SCT_FREE_AREA,   /* any area between A_min and A_max */
    SCT_LADDER,      /* one of `ladder` */
    SCT_HELD_AREA,   /* A_held */
    SCT_HELD_SECTION /* section `held` of the family */
} sct_sizing_kind;

typedef enum sct_buckling {
    SCT_BUCKLING_NONE,         /* said in so many words: "none"; warned about */
    SCT_BUCKLING_EULER,        /* pi^2 E / lambda^2 */
    SCT_BUCKLING_EULER_JOHNSON /* Euler, and Johnson's parabola above half the yield strength */
} sct_buckling;

/* c A^p with A in m2, the result in SI units. c NAN: not stated. */
typedef struct sct_power {
    double c, p;
} sct_power;

typedef struct sct_group {
    const char *name;
    sct_where where;
    int material;
    sct_sizing_kind kind;
    double A_min, A_max;     /* [m2] free area: 0 < A_min <= A_max */
    double A_start;          /* [m2] free area: first start; NAN: none given */
    double A_held;           /* [m2] held area */
    sct_power I[2], W[2], J; /* held or free area: second moment [m4], section modulus [m3], torsion constant [m4]; NAN:
                              * not stated */
    int family;              /* ladder, held section; else -1 */
    int n_ladder;
    int *ladder;         /* ladder: indices into the family's sections, lightest first */
    int held;            /* held section: index into the family's sections; else -1 */
    double allowable[2]; /* [Pa] tension, compression: the group's own or its material's; NAN: not given. They hold
                          * for the extreme fibres of beams, too. */
    sct_buckling buckling;
    double safety;                  /* on the column strength, >= 1 */
    double slenderness_any;         /* Lcr/i at most, every member; INFINITY: no limit */
    double slenderness_compression; /* members in compression in some combination; INFINITY: no limit */
} sct_group;

typedef enum sct_length_source { SCT_LENGTH_SYSTEM, SCT_LENGTH_FACTOR, SCT_LENGTH_RESTRAINT } sct_length_source;

/* How a member's end hangs on its joint, for each of the rotations below. */
typedef enum sct_fixity { SCT_PINNED, SCT_FIXED, SCT_SPRUNG } sct_fixity;
enum { SCT_TWIST = 2, SCT_TURNS = 3 }; /* bending in plane, bending out of plane, twist about the member's own axis */

typedef struct sct_member_end {
    sct_fixity fixity[SCT_TURNS];
    double stiffness[SCT_TURNS]; /* [N m/rad] where SPRUNG, > 0 */
} sct_member_end;

typedef struct sct_member {
    const char *name; /* a piece of a run: "top 1", "top 2", ... */
    sct_where where;
    int from, to, group;
    int run;               /* the run that it is a piece of, or -1 */
    sct_member_end end[2]; /* at `from`, at `to`; all pinned: a bar. In a plane model what is not in plane is pinned. */
    bool tension_only;     /* slack when it would be compressed */
    /* Local axes: 0 along the member; 1 the direction of bending in plane; 2 = 0 x 1. In a plane model 1 is 0 turned
     * by +90 degrees. In space 1 lies in the plane of 0 and `up`, towards it, turned by `roll` about 0. up = 0: z, and
     * x for a vertical member. */
    double up[3];
    double roll; /* [rad] */
    /* Effective length about each axis: the member's own word or its group's.
     * SYSTEM: distance between the joints (default). FACTOR: length[] times that. RESTRAINT: length[] in metres. */
    sct_length_source source[2];
    double length[2];
} sct_member;

/* A member that is declared once and goes on through joints: it is continuous over the inner ones. */
typedef struct sct_run {
    const char *name;
    sct_where where;
    int first, n; /* its pieces: members first .. first + n - 1, each ending where the next begins */
} sct_run;

typedef struct sct_joint_load {
    int joint;
    double F[3], M[3]; /* [N], [N m]; M about the model's axes */
    sct_where where;
} sct_joint_load; /* [N] */
typedef struct sct_settlement {
    int joint;
    double d[3], turn[3]; /* [m], [rad] */
    sct_where where;
} sct_settlement;
typedef struct sct_bar_action {
    int member;
    double dT, lack;
    double gradient[2]; /* [K/m] in plane, out of plane: warmer towards local axis 1, 2 */
    sct_where where;
} sct_bar_action;
/* dT [K] warmer than when built; lack [m] bar made longer than the distance of its joints (free elongation) */

/* A load on a member between its joints. */
typedef enum sct_load_axes {
    SCT_AXES_MODEL,     /* components along x, y, z of the model, per metre of member */
    SCT_AXES_MEMBER,    /* along local axes 0, 1, 2 */
    SCT_AXES_PROJECTED, /* as MODEL, per metre of the member's projection square to the load (per metre of plan); the
                         * reader lets one component pass */
} sct_load_axes;

typedef struct sct_member_load {
    int member;
    bool is_point;
    sct_load_axes axes;
    double a, b;         /* [m] from the start of the member: 0 <= a <= b <= L; a point load acts at a = b */
    double qa[3], qb[3]; /* [N/m] at a and at b, straight between */
    double F[3], M[3];   /* [N], [N m] of a point load; M about the axes above */
    sct_where where;
} sct_member_load;

typedef struct sct_case {
    const char *name;
    sct_where where;
    const char *action; /* "permanent", "imposed", "snow", "wind", "temperature", "other" */
    double self_weight; /* times the members' own weight, downwards; 0: without */
    int n_loads, n_settlements, n_bar_actions, n_member_loads;
    sct_joint_load *loads;
    sct_settlement *settlements;
    sct_bar_action *bar_actions;
    sct_member_load *member_loads;
} sct_case;

typedef enum sct_basis { SCT_STRENGTH, SCT_ALLOWABLE, SCT_SERVICE } sct_basis;

typedef struct sct_combination {
    const char *name;
    sct_where where;
    sct_basis basis;
    double *factor; /* one per case; 0 where the case is not named */
} sct_combination;

typedef struct sct_deflection_limit {
    sct_where where;
    int n_joints, *joints;
    int *from;                   /* n_joints: the displacement counts relative to this joint; NULL: absolute */
    double direction[3];         /* unit vector; |displacement along it| is limited */
    double at_most;              /* [m] > 0 */
    const char *label;           /* as written: "L/300", "20 mm", "20" */
    const char *direction_label; /* "x", "y", "z" or "along (0.6, 0.8)" */
    bool *in;                    /* one per combination: does the limit hold in it? */
} sct_deflection_limit;

/* How far members may bow: the displacement between their ends, off the straight line between these. */
typedef struct sct_bow_limit {
    sct_where where;
    int n_members, *members; /* single members and pieces; a run is held against the line between its own ends by */
    int n_runs, *runs;       /* naming it here */
    int axis;                /* SCT_IN_PLANE, SCT_OUT_OF_PLANE */
    double at_most;          /* [m] > 0; NAN: a part of the length instead */
    double part;             /* 1/300 of the length of member or run; NAN: at_most holds */
    const char *label;       /* as written: "L/300", "20 mm" */
    bool *in;                /* one per combination */
} sct_bow_limit;

typedef struct sct_model {
    sct_arena *arena;   /* owns everything below */
    const char *file;   /* for messages */
    const char *source; /* the bytes read, zero-terminated, for rewriting */
    size_t source_size;
    const char *title; /* "" when none */
    int dimensions;    /* 2 or 3 */
    bool us_customary; /* the file's length unit is in or ft: writers follow */
    int n_materials, n_joints, n_members, n_groups, n_cases, n_combinations, n_deflections, n_families, n_runs, n_bows;
    sct_material *materials;
    sct_joint *joints;
    sct_member *members;
    sct_group *groups;
    sct_case *cases;
    sct_combination *combinations;
    sct_deflection_limit *deflections;
    sct_run *runs;
    sct_bow_limit *bows;
    double least_factor;    /* elastic critical load factor, at least, in combinations for strength; NAN: no limit */
    bool amplifies;         /* sway moments of combinations with a factor of 3 to 10 are amplified by 1/(1 - 1/alpha) */
    double least_frequency; /* [Hz] lowest natural frequency, at least; NAN: no limit */
    double *mass_factor;    /* n_cases: part of each case's downward loads that vibrates as mass; NULL: none stated */
    sct_family *families;   /* the shipped ones that the model names, and its own */
} sct_model;
#endif

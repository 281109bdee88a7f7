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
    double allowable[2]; /* [Pa] tension, compression; NAN: not given */
} sct_material;

typedef struct sct_joint {
    const char *name;
    sct_where where;
    double at[3];      /* [m]; z = 0 in a plane model */
    int n_held;        /* 0 to dimensions */
    double held[3][3]; /* unit vectors, linearly independent, not necessarily orthogonal */
} sct_joint;

typedef struct sct_section {
    const char *name;
    double A;     /* [m2] > 0 */
    double I[2];  /* [m4] in plane, out of plane; > 0 */
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

typedef struct sct_group {
    const char *name;
    sct_where where;
    int material;
    sct_sizing_kind kind;
    double A_min, A_max; /* [m2] free area: 0 < A_min <= A_max */
    double A_start;      /* [m2] free area: first start; NAN: none given */
    double A_held;       /* [m2] held area */
    double c[2];         /* held or free area: I = c A^2 about each axis; NAN: not stated */
    int family;          /* ladder, held section; else -1 */
    int n_ladder;
    int *ladder;         /* ladder: indices into the family's sections, lightest first */
    int held;            /* held section: index into the family's sections; else -1 */
    double allowable[2]; /* [Pa] tension, compression: the group's own or its material's; NAN: not given */
    sct_buckling buckling;
    double safety;                  /* on the column strength, >= 1 */
    double slenderness_any;         /* Lcr/i at most, every member; INFINITY: no limit */
    double slenderness_compression; /* members in compression in some combination; INFINITY: no limit */
} sct_group;

typedef enum sct_length_source { SCT_LENGTH_SYSTEM, SCT_LENGTH_FACTOR, SCT_LENGTH_RESTRAINT } sct_length_source;

typedef struct sct_member {
    const char *name;
    sct_where where;
    int from, to, group;
    /* Effective length about each axis: the member's own word or its group's.
     * SYSTEM: distance between the joints (default). FACTOR: length[] times that. RESTRAINT: length[] in metres. */
    sct_length_source source[2];
    double length[2];
} sct_member;

typedef struct sct_joint_load {
    int joint;
    double F[3];
    sct_where where;
} sct_joint_load; /* [N] */
typedef struct sct_settlement {
    int joint;
    double d[3];
    sct_where where;
} sct_settlement; /* [m] */
typedef struct sct_bar_action {
    int member;
    double dT, lack;
    sct_where where;
} sct_bar_action;
/* dT [K] warmer than when built; lack [m] bar made longer than the distance of its joints (free elongation) */

typedef struct sct_case {
    const char *name;
    sct_where where;
    const char *action; /* "permanent", "imposed", "snow", "wind", "temperature", "other" */
    double self_weight; /* times the members' own weight, downwards; 0: without */
    int n_loads, n_settlements, n_bar_actions;
    sct_joint_load *loads;
    sct_settlement *settlements;
    sct_bar_action *bar_actions;
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
    double direction[3];         /* unit vector; |displacement along it| is limited */
    double at_most;              /* [m] > 0 */
    const char *label;           /* as written: "L/300", "20 mm", "20" */
    const char *direction_label; /* "x", "y", "z" or "along (0.6, 0.8)" */
    bool *in;                    /* one per combination: does the limit hold in it? */
} sct_deflection_limit;

typedef struct sct_model {
    sct_arena *arena;   /* owns everything below */
    const char *file;   /* for messages */
    const char *source; /* the bytes read, zero-terminated, for rewriting */
    size_t source_size;
    const char *title; /* "" when none */
    int dimensions;    /* 2 or 3 */
    bool us_customary; /* the file's length unit is in or ft: writers follow */
    int n_materials, n_joints, n_members, n_groups, n_cases, n_combinations, n_deflections, n_families;
    sct_material *materials;
    sct_joint *joints;
    sct_member *members;
    sct_group *groups;
    sct_case *cases;
    sct_combination *combinations;
    sct_deflection_limit *deflections;
    sct_family *families; /* the shipped ones that the model names, and its own */
} sct_model;
#endif

/**
 * A beam of the second path: the textbook element with twelve forces at its ends, in local axes; pinned and sprung ends
 * are condensed out of stiffness and loads.
 *
 * The twelve: 0, 1, 2 along the local axes at the start, 3, 4, 5 about them, 6 to 11 likewise at the end. Local axes as
 * in sct_member. What is along the member (0 and 6) is not in the stiffness: every member has that, see statics.c.
 */
#ifndef SCT_VERIFY_ELEMENT_H
#define SCT_VERIFY_ELEMENT_H

#include "verify/section.h"

/* A load of one case, in local axes. */
typedef struct sct_element_load {
    int k; /* the case */
    bool is_point;
    long double a, b, qa[3], qb[3], F[3], M[3]; /* as sct_member_load */
} sct_element_load;

/* A rotation that is not the joint's: what acts on it goes to the other unknowns and, kept by the spring, to the joint.
 */
typedef struct sct_element_release {
    int at;
    bool is_sprung;
    long double taken[4], kept;
} sct_element_release;

/* Bending in one plane: deflection and slope of the start, then of the end; or twist: both rotations. */
typedef struct sct_element_part {
    long double K[4][4];
    int n_releases;
    sct_element_release release[2];
} sct_element_part;

typedef struct sct_element {
    int member;
    long double L, axes[3][3], EI[2];
    long double weight[3];            /* [N/m] own weight for a factor of 1, along the axes; 0 where joints take it */
    sct_element_part part[SCT_TURNS]; /* bending in plane, out of plane, twist */
    int n_loads;
    sct_element_load *loads; /* borrowed */
} sct_element;

/** Does a rotation of the member at an end belong to its joint? A member that is free to twist at one end takes none
 * at the other. */
bool sct_element_turns(const sct_model *model, int member, int end, int turn);
/** The axis of that rotation. */
void sct_element_turn_axis(const sct_element *element, int turn, double axis[3]);
/** Does the member take part in any rotation of its joints? */
bool sct_element_is_beam(const sct_model *model, int member);

/** A member as a beam; its loads are left for the caller. */
sct_element sct_element_make(const sct_model *model, int member, const sct_verify_section *section);
/** A load of the model in its axes. */
sct_element_load sct_element_load_of(const sct_element *element, int k, const sct_member_load *load);

/**
 * What the loads of case k (own weight and curvature by temperature included) put on the two joints.
 *
 * q      as the joints feel it
 * at     with sprung ends held and without what acts on them: what reports call the loads at the joints
 */
void sct_element_held(const sct_model *model, const sct_element *element, int k, long double q[12], long double at[12]);

/** f: what holds the ends when the two joints move by u[0], u[1] (3 displacements, 3 rotations in the model's axes),
 * but for what is along the member. */
void sct_element_pull(const sct_element *element, const long double u[2][6], long double f[12]);

/** Unknown i of a part (4 of bending, 2 of twist) is the sum of row[end][j] times the joints' movements. */
int sct_element_rows(const sct_element *element, int part, double row[4][2][6]);

/** From local numbers to 3 forces and 3 moments at each joint, in the model's axes. */
void sct_element_to_model(const sct_element *element, const long double local[12], long double end[2][6]);
#endif

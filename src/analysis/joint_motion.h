/* A motion of the structure as what its joints do, and in words. */
#ifndef SCT_ANALYSIS_JOINT_MOTION_H
#define SCT_ANALYSIS_JOINT_MOTION_H

#include "analysis/structure.h"
#include "base/text.h"

/* Joints that move at least this part of the largest displacement (turn: rotation) are named. */
static const double SCT_MOTION_SHOWN = 0.05;

/* Joints named, of which the rest are counted. */
enum { SCT_JOINTS_NAMED = 10 };

typedef struct sct_moving_joint {
    int joint;
    long key; /* size in millionths of the largest: equal sizes stay equal, whatever the rounding */
} sct_moving_joint;

typedef struct sct_joint_motion {
    const sct_structure *st;
    double (*d)[3];           /* n_joints: displacement, in the model's axes */
    double (*theta)[3];       /* n_joints: rotation, of the joint itself or of a sprung end there if that is larger */
    double largest;           /* of all displacements, and of all rotations times the lever */
    bool is_turn;             /* the rotations are what there is to tell: the displacements are small beside them */
    double *size;             /* n_joints: of the displacement; of the rotation when is_turn */
    int n;                    /* joints to be named */
    sct_moving_joint *moving; /* n_joints: those first, largest first */
} sct_joint_motion;

/** false: out of memory; free it all the same. */
bool sct_joint_motion_allocate(sct_joint_motion *m, const sct_structure *st);
void sct_joint_motion_free(sct_joint_motion *m);

/** From v (n_dof), in unknowns. */
void sct_joint_motion_set(sct_joint_motion *m, const double v[]);

/** Adds `joints "A", "B" and 3 more can move together in y`, or `joint "A" can turn about x` ("can turn" in the plane),
 * and returns the first joint named. */
int sct_joint_motion_words(const sct_joint_motion *m, sct_text *text);
#endif

/* The lines that members run along: their lengths and local axes, as model.h says them. */
#ifndef SCT_MODEL_AXES_H
#define SCT_MODEL_AXES_H

#include "model/model.h"

/** The distance [m] of two joints. */
double sct_joint_distance(const sct_model *model, int from, int to);

/**
 * The local axes of a member as rows: along it, the direction of bending in plane, and their cross product.
 * False where there are none: the length is zero, or `up` points along the member.
 */
bool sct_member_axes(const sct_model *model, const sct_member *member, double axes[3][3]);
#endif

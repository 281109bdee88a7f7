/* Supports that trusses do not have: held rotations and elastic supports. */
#ifndef SCT_REPORT_HELD_H
#define SCT_REPORT_HELD_H

#include "scene.h"

/** A support in the plane that holds the rotation; `way`: away from the structure. */
void sct_fixed_draw(sct_scene *scene, int joint, sct_point way);
/** A square about a joint in space whose rotations are held, wholly or in part. */
void sct_turns_draw(sct_scene *scene, int joint);

/** The springs of a joint: zigzags to the ground, spirals. */
void sct_springs_draw(sct_scene *scene, int joint);
/** Takes the places of all of these. */
void sct_held_block(sct_scene *scene, int joint);
/** The stiffnesses, where there is room. */
void sct_springs_words(sct_scene *scene, int joint);
/** What the marks drawn mean, as sentences; nothing for a truss. */
void sct_held_key(const sct_scene *scene, sct_text *out);
#endif

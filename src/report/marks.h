/* Marks, values and names of a drawing: where each may stand, and the ink of what got a place. */
#ifndef SCT_REPORT_MARKS_H
#define SCT_REPORT_MARKS_H

#include "scene.h"

/** Blocks the places of all members and joints. */
void sct_marks_block(sct_scene *scene);

/** Places the marks of the labelled members along them, then the names of joints, then leaders for the members left,
 * and draws all of it. */
void sct_marks_members(sct_scene *scene);
void sct_marks_joints(sct_scene *scene);
void sct_marks_leaders(sct_scene *scene);

/** The labelled members that found no place: "Not labelled: V3, V5 (see schedule)."; nothing when there are none. */
void sct_marks_left(const sct_scene *scene, sct_text *out);

/** Places one upright line of words about a point, its edge from `distance` off, best towards `way` (a unit vector;
 * {0, 0}: above or below). Returns false when there is no room; otherwise draws it. */
bool sct_marks_near(sct_scene *scene, sct_point at, double distance, sct_point way, const sct_word_run runs[], int n);
#endif

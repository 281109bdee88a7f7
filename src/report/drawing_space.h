/* What a space truss has of its own: the axonometric view, its axes, levels, and members from back to front. */
#ifndef SCT_REPORT_DRAWING_SPACE_H
#define SCT_REPORT_DRAWING_SPACE_H

#include "scene.h"

/** Chooses turn and tilt so that joints do not hide one another where that can be had, for a drawing of about
 * `width` x `height` [u], and projects the joints. */
void sct_space_view(sct_scene *scene, double width, double height);
/** From back to front. SCT_NO_MEMORY. */
sct_status sct_space_members(sct_scene *scene);
/** The axes x, y, z in a free corner. */
void sct_space_axes(sct_scene *scene);
/** The levels of a tower at the right of everything drawn so far; nothing for other shapes. */
void sct_space_levels(sct_scene *scene);
/** Overall size along x, y, z [m]. */
void sct_space_extents(const sct_result *result, double size[3]);
/** Overall size: "3.60 x 3.60 x 15.00 m". */
void sct_space_size(const sct_result *result, char *out, size_t room);
#endif

/* What a plane truss has of its own: order of members, slope; and the dimensions of any flat view. */
#ifndef SCT_REPORT_DRAWING_PLANE_H
#define SCT_REPORT_DRAWING_PLANE_H

#include "scene.h"

/** Webs, then compression chords, then tension chords. */
void sct_plane_members(sct_scene *scene);
/** A slope triangle over pitched chords of one simple slope; nothing otherwise. */
void sct_plane_slope(sct_scene *scene);
/** Widths below and heights at the right of everything drawn so far. */
void sct_plane_dimensions(sct_scene *scene);
#endif

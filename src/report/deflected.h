/* The deflected shape of one combination: a drawing of its own, below the utilisations at the same scale. */
#ifndef SCT_REPORT_DEFLECTED_H
#define SCT_REPORT_DEFLECTED_H

#include "scene.h"

/** The factor on displacements: 1, 2 or 5 times a power of ten, the largest displacement at most 0.08 of the span; 0
 * when nothing moves. SCT_NO_MEMORY. */
sct_status sct_deflected_factor(const sct_scene *scene, double *factor);

/** Draws it into scene->sheet and fills scene->labels, both emptied by the caller. Joints with a deflection limit get
 * an arrow and "31.2 of 80.0 mm", members with a limit on their bow likewise. Bent members are drawn as they bend.
 * SCT_NO_MEMORY. */
sct_status sct_deflected_draw(sct_scene *scene, double factor);
#endif

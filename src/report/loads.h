/* The loads of one combination as arrows at the joints. */
#ifndef SCT_REPORT_LOADS_H
#define SCT_REPORT_LOADS_H

#include "scene.h"

/** Draws the loads of the scene's combination and blocks their places. Those below 5 % of the largest (mostly
 * self-weight) are left out; returns the size from which on they are drawn [N], 0 when all are, NAN when there are
 * none. */
double sct_loads_draw(sct_scene *scene);
#endif

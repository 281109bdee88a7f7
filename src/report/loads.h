/* The loads of one combination: arrows at joints and on members, moments. */
#ifndef SCT_REPORT_LOADS_H
#define SCT_REPORT_LOADS_H

#include "scene.h"

/* What was drawn, for the legend. */
typedef struct sct_loads_drawn {
    bool any;
    double least;      /* [N] arrows below this size are left out; 0: none was */
    double least_line; /* [N/m] likewise of line loads */
    bool lines, moments;
    bool without_weight; /* own weight acts, too, and is not drawn */
} sct_loads_drawn;

/** Draws the loads of the scene's combination and blocks their places. Those below 5 % of the largest of their kind are
 * left out. Of a truss own weight counts at the joints; of a frame it is not drawn. SCT_NO_MEMORY. */
sct_status sct_loads_draw(sct_scene *scene, sct_loads_drawn *drawn);
#endif

/* One member as a band: solid in tension, a lined tube in compression, half of each where it is mainly bent, dots
 * without force, hatched above 1. */
#ifndef SCT_REPORT_BAND_H
#define SCT_REPORT_BAND_H

#include "scene.h"

/** Draws a band from p to q, `depth` across, in the colour of the ramp for `utilisation`. */
void sct_band_draw(sct_sheet *sheet, sct_point p, sct_point q, double depth, sct_sense sense, double utilisation);

/** Draws a member short of its pins, with its hover title. In space it lies on a casing of page colour, so that it
 * breaks what is behind it. */
void sct_band_member(sct_scene *scene, int member);
#endif

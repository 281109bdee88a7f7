/* How the ends of members meet their joints: gaps before rings, rigid corners, releases, springs. */
#ifndef SCT_REPORT_ENDS_H
#define SCT_REPORT_ENDS_H

#include "scene.h"

/** How far the band of a member goes on past its joint; negative: it stops short of it [u]. */
double sct_end_reach(const sct_scene *scene, int member, int end);

/** Takes the places of releases and springs. */
void sct_ends_block(sct_scene *scene);
/** Rings on joints that are pins, releases and springs on members. */
void sct_ends_draw(sct_scene *scene);
/** The stiffnesses of sprung ends, where there is room. */
void sct_ends_words(sct_scene *scene);
/** What the marks drawn mean, as sentences; nothing for a truss. */
void sct_ends_key(const sct_scene *scene, sct_text *out);
#endif

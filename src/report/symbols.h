/* The textbook symbols: supports, arrows, dimensions, slope, scale bar. */
#ifndef SCT_REPORT_SYMBOLS_H
#define SCT_REPORT_SYMBOLS_H

#include "scene.h"

/** An arrow from tail to tip with a filled head. */
void sct_arrow(sct_sheet *sheet, sct_point tail, sct_point tip, sct_role role, double weight);

/** The support of a joint, drawn away from the structure; a plane triangle or a pyramid in space. Blocks its place. */
void sct_support_block(sct_scene *scene, int joint);
void sct_support_draw(sct_scene *scene, int joint);

/** A line of dimensions with a tick at each of n points. `along`: unit vector to the right, or upwards. */
void sct_dimension(sct_sheet *sheet, const sct_point at[], int n, sct_point along);
/** The words of one dimension, above the middle of p to q. */
void sct_dimension_words(sct_sheet *sheet, sct_point p, sct_point q, sct_point along, const char *words);

/** Draws a line that stops short of what is solid in labels. */
void sct_line_round_labels(sct_sheet *sheet, const sct_labels *labels, sct_point p, sct_point q, sct_role role);

/** A scale bar whose left end is at `at`; returns its length [u]. With sheet NULL it is only measured. */
double sct_scale_bar(sct_sheet *sheet, sct_point at, double scale, bool us_customary);
#endif

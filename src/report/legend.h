/* What stands about a drawing: its legend, the table of groups, the strip of utilisations, the title block. */
#ifndef SCT_REPORT_LEGEND_H
#define SCT_REPORT_LEGEND_H

#include "scene.h"

/** The ramp with its edges and "above 1"; `field` is the width of one step. 33 u high below its title's baseline. */
void sct_legend_ramp(sct_sheet *sheet, sct_point at, double field, const char *title);
/** The three kinds of member in a row of about 235 u, on the baseline `at`; of a frame a fourth in a row below. Returns
 * the height of the rows after the first. */
double sct_legend_senses(sct_sheet *sheet, sct_point at, bool of_frame);

/** The table of groups, `width` wide, its head on the baseline `at`; returns its height. Above 12 groups the worst are
 * shown and the others counted. */
double sct_group_table(sct_sheet *sheet, const sct_result *result, sct_point at, double width);
/** Every member as a tick on the utilisation scale, one row per group; likewise. */
double sct_group_strip(sct_sheet *sheet, const sct_result *result, sct_point at, double width);

/** The strip at the bottom: title and what is drawn, two notes, the caution. */
void sct_title_block(sct_sheet *sheet, double y, double width, const char *title, const char *drawn,
                     const char *const notes[2]);
enum { SCT_TITLE_BLOCK = 60 }; /* its height with the margin below [u] */
#endif

/* Motions in words: joints and directions as a person reads them. */
#ifndef SCT_ANALYSIS_MOTION_H
#define SCT_ANALYSIS_MOTION_H

#include "base/text.h"
#include "model/model.h"

enum { SCT_MOTIONS_TOLD = 6 }; /* one error per independent motion, at most so many */

/** "x", "y" or "z" when d lies along an axis, else "(0.71, -0.71)"; d need not be a unit vector. Either way along a
 * line reads the same, unless has_sense: then against an axis is "-x". */
void sct_motion_direction(sct_text *text, int dim, const double d[3], bool has_sense);

/** "(3, 0) m", or in feet when the model's own unit is in or ft. */
void sct_motion_point(sct_text *text, const sct_model *model, const double at[3]);

/** The name in quotes, control characters escaped, cut at 64 characters. */
void sct_motion_name(sct_text *text, const char *name);

/** Has the model members whose ends are not all pinned (in a plane model: for bending in plane)? Then it is called a
 * frame. */
bool sct_motion_is_frame(const sct_model *model);

/** Adds the text as one issue at `where` and frees it; false when memory ran out while it was written. */
bool sct_motion_tell(sct_text *text, sct_severity severity, sct_where where, sct_issues *issues);
#endif

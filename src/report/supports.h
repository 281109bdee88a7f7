/* What the supports of a joint give, elastic ones included. */
#ifndef SCT_REPORT_SUPPORTS_H
#define SCT_REPORT_SUPPORTS_H

#include "scantling.h"

/** A force with a component along `axis` of the model. */
bool sct_support_gives_force(const sct_result *result, int joint, int axis);
/** A moment with a component about `axis` of the model. */
bool sct_support_gives_moment(const sct_result *result, int joint, int axis);
/** Anything at all. */
bool sct_support_gives_any(const sct_result *result, int joint);
/** How many independent rotations of the joint are held. */
int sct_support_turns_held(const sct_result *result, int joint);
#endif

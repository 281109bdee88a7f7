/* The checks of one member, written a second time from the formulas: capacities in newtons instead of stresses. */
#ifndef SCT_VERIFY_STRENGTH_H
#define SCT_VERIFY_STRENGTH_H

#include "verify/section.h"

/** What the member carries [N] in tension, or in compression (the least of stress and column strength about both axes).
 */
double sct_verify_capacity(const sct_model *model, int member, double L, bool tension);

/** Slenderness over its limit; 0 when no limit applies. */
double sct_verify_slenderness(const sct_model *model, int member, double L, bool compressed);
#endif

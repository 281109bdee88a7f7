/* The checks of one member, written a second time from the formulas: capacities in newtons instead of stresses. */
#ifndef SCT_VERIFY_STRENGTH_H
#define SCT_VERIFY_STRENGTH_H

#include "model/model.h"

/** The size of a group that holds a section or an area: A [m2], I [m4] in and out of plane (NAN: not stated). */
void sct_verify_size(const sct_model *model, int group, double *A, double I[2]);

/** What the member carries [N] in tension, or in compression (the least of stress and column strength about both axes).
 */
double sct_verify_capacity(const sct_model *model, int member, double L, bool tension);

/** Slenderness over its limit; 0 when no limit applies. */
double sct_verify_slenderness(const sct_model *model, int member, double L, bool compressed);
#endif

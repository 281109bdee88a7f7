/* The checks of one member, written a second time from the formulas: capacities in newtons instead of stresses. */
#ifndef SCT_VERIFY_STRENGTH_H
#define SCT_VERIFY_STRENGTH_H

#include "verify/section.h"

/** What the member carries [N] in tension, or in compression (the least of stress and column strength about both axes).
 */
double sct_verify_capacity(const sct_model *model, int member, double L, bool tension);

/* Checks of members with moments: extreme fibre in tension and in compression, column strength with bending. */
typedef enum sct_verify_kind {
    SCT_FIBRE_TENSION,
    SCT_FIBRE_COMPRESSION,
    SCT_BENT_COLUMN,
    SCT_VERIFY_KINDS
} sct_verify_kind;

/* Utilisation = N / force + |M_in| / moment[0] + |M_out| / moment[1]; INFINITY where a part is not looked at. */
typedef struct sct_verify_capacities {
    double force, moment[2];
} sct_verify_capacities;

/** false: no such check applies. */
bool sct_verify_bending(const sct_model *model, int member, double L, sct_verify_kind kind, sct_verify_capacities *out);

/** Slenderness over its limit; 0 when no limit applies. */
double sct_verify_slenderness(const sct_model *model, int member, double L, bool compressed);
#endif

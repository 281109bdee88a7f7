/**
 * LDL' of one small sparse pattern, as often as wanted, without allocation: every update of the elimination has its
 * target worked out once. Faster than a general library up to a few hundred unknowns; memory grows with the number of
 * multiplications.
 */
#ifndef SCT_NUMERICS_SMALL_H
#define SCT_NUMERICS_SMALL_H

#include "numerics/factor.h"

typedef struct sct_small sct_small;

/** *status: SCT_OK; SCT_NO_MEMORY; SCT_TOO_LARGE when the elimination has more than `most_updates` updates. */
sct_small *sct_small_new(const sct_pattern *pattern, int most_updates, sct_status *status);
void sct_small_free(sct_small *small);

/** Entries of L. */
double sct_small_entries(const sct_small *small);

/** As sct_factor_update; refuses pivots that are not positive or not finite. Never SCT_NO_MEMORY. */
sct_status sct_small_update(sct_small *small, const double values[], int *stopped_at);

/** As sct_factor_rounding. */
double sct_small_rounding(sct_small *small);

/** As sct_factor_solve. */
void sct_small_solve(sct_small *small, int count, double b[]);
#endif

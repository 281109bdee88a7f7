/* Fill-reducing ordering: the door to SuiteSparse AMD. */
#ifndef SCT_NUMERICS_ORDER_H
#define SCT_NUMERICS_ORDER_H

#include "numerics/factor.h"

/**
 * Approximate minimum degree ordering (Amestoy, Davis and Duff 2004): order[k] is the unknown that is eliminated k-th.
 *
 * order  out, pattern->n
 *
 * SCT_OK, SCT_NO_MEMORY, SCT_TOO_LARGE.
 */
sct_status sct_order_amd(const sct_pattern *pattern, int order[]);
#endif

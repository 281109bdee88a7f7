/* One interface to two factorizations, chosen by size. */
#include "factor.h"

#include <limits.h>
#include <math.h>
#include <stdlib.h>

#include "numerics/small.h"
#include "numerics/sparse.h"

/* Updates of the small engine, 4 bytes each: AUTO goes over to CHOLMOD where the tables no longer fit a cache
 * (measured: below, the small engine takes 0.2 to 0.55 of CHOLMOD's time); beyond the second figure they are refused.
 */
enum { AUTO_UPDATES = 2 * 1000 * 1000, MOST_UPDATES = 64 * 1000 * 1000 };

struct sct_factor {
    sct_small *small;
    sct_sparse *sparse; /* exactly one of the two */
};

sct_factor *sct_factor_new(const sct_pattern *pattern, sct_engine engine, sct_status *status)
{
    sct_factor *factor = calloc(1, sizeof *factor);
    *status = SCT_NO_MEMORY;
    if (factor == NULL) return NULL;
    const bool is_auto = engine == SCT_ENGINE_AUTO;
    if (engine != SCT_ENGINE_SPARSE || pattern->n == 0) {
        factor->small = sct_small_new(pattern, is_auto ? AUTO_UPDATES : MOST_UPDATES, status);
    }
    const bool is_too_much = is_auto && *status == SCT_TOO_LARGE;
    if (factor->small == NULL && (engine == SCT_ENGINE_SPARSE || is_too_much)) {
        factor->sparse = sct_sparse_new(pattern, status);
    }
    if (*status == SCT_OK) return factor;
    sct_factor_free(factor);
    return NULL;
}

void sct_factor_free(sct_factor *factor)
{
    if (factor == NULL) return;
    sct_small_free(factor->small);
    sct_sparse_free(factor->sparse);
    free(factor);
}

sct_engine sct_factor_engine(const sct_factor *factor)
{
    return factor->small != NULL ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE;
}

double sct_factor_entries(const sct_factor *factor)
{
    return factor->small != NULL ? sct_small_entries(factor->small) : sct_sparse_entries(factor->sparse);
}

double sct_factor_bytes(const sct_factor *factor)
{
    if (factor->small != NULL) return 0.0;
    const double entries = sct_sparse_entries(factor->sparse);
    return entries < INT_MAX ? entries * (sizeof(double) + sizeof(int)) : INFINITY;
}

sct_status sct_factor_update(sct_factor *factor, const double values[], int *stopped_at)
{
    return factor->small != NULL ? sct_small_update(factor->small, values, stopped_at)
                                 : sct_sparse_update(factor->sparse, values, stopped_at);
}

double sct_factor_rounding(sct_factor *factor)
{
    return factor->small != NULL ? sct_small_rounding(factor->small) : sct_sparse_rounding(factor->sparse);
}

void sct_factor_solve(sct_factor *factor, int count, double b[])
{
    if (factor->small != NULL)
        sct_small_solve(factor->small, count, b);
    else
        sct_sparse_solve(factor->sparse, count, b);
}

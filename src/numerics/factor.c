/* One interface to two factorizations, chosen by size. */
#include "factor.h"

#include <stdlib.h>

#include "numerics/small.h"
#include "numerics/sparse.h"

enum {
    SMALL_UP_TO = 250,          /* unknowns: where AUTO goes over to CHOLMOD */
    MOST_UPDATES = 64 * 1000000 /* of the small engine: 256 MB of targets */
};

struct sct_factor {
    sct_small *small;
    sct_sparse *sparse; /* exactly one of the two */
};

sct_factor *sct_factor_new(const sct_pattern *pattern, sct_engine engine, sct_status *status)
{
    sct_factor *factor = calloc(1, sizeof *factor);
    *status = SCT_NO_MEMORY;
    if (factor == NULL) return NULL;
    const bool is_small =
        pattern->n == 0 || engine == SCT_ENGINE_SMALL || (engine == SCT_ENGINE_AUTO && pattern->n <= SMALL_UP_TO);
    if (is_small)
        factor->small = sct_small_new(pattern, MOST_UPDATES, status);
    else
        factor->sparse = sct_sparse_new(pattern, status);
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

sct_status sct_factor_update(sct_factor *factor, const double values[], int *stopped_at)
{
    return factor->small != NULL ? sct_small_update(factor->small, values, stopped_at)
                                 : sct_sparse_update(factor->sparse, values, stopped_at);
}

void sct_factor_solve(sct_factor *factor, int count, double b[])
{
    if (factor->small != NULL)
        sct_small_solve(factor->small, count, b);
    else
        sct_sparse_solve(factor->sparse, count, b);
}

/* Fill-reducing ordering: the door to SuiteSparse AMD. */
#include "order.h"

#include <amd.h>

sct_status sct_order_amd(const sct_pattern *pattern, int order[])
{
    if (pattern->n == 0) return SCT_OK;
    double control[AMD_CONTROL];
    amd_defaults(control);
    /* AMD works on the pattern of A + A', so the upper triangle is enough. */
    const int result = amd_order(pattern->n, pattern->column, pattern->row, order, control, NULL);
    if (result == AMD_OUT_OF_MEMORY) return SCT_NO_MEMORY;
    return result == AMD_OK || result == AMD_OK_BUT_JUMBLED ? SCT_OK : SCT_TOO_LARGE;
}

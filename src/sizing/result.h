/* The finished result of one design: every check, force, displacement and reaction that reports show. */
#ifndef SCT_SIZING_RESULT_H
#define SCT_SIZING_RESULT_H

#include "sizing/duty.h"

/**
 * A result with everything that follows from the latest analysis of the duty (already refined) and the design; what the
 * search adds (starts, prices, outcome) is left empty: outcome SCT_CHECKED, NAN for its numbers.
 *
 * SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_result_new(const sct_duty *duty, const sct_design *design, sct_accuracy accuracy, sct_result **result);

/** Zeroed memory that lives as long as the result. */
void *sct_result_array(sct_result *result, size_t n, size_t size);

/** Writes the finding into result->verdict from the checks of the design shown. at_smallest: every size that was sought
 * is the smallest allowed. */
void sct_result_judge(sct_result *result, bool at_smallest);
#endif

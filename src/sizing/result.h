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

/* The public struct with what is behind it. The structure and the rest are there where some member carries moments. */
typedef struct sct_result_memory {
    sct_result open;
    sct_arena *arena;
    sct_structure *st; /* its own */
    sct_member_lines *lines;
    double *S;      /* n_combinations x n_springs */
    double *A;      /* n_groups */
    double (*I)[2]; /* [m4] n_groups */
} sct_result_memory;

/** What is above 1 by rounding alone is 1, here and so in every report. */
double sct_settled(double utilisation);

/** result_frames.c: the checks of a member that carries moments, its extremes; what the rest of its fields tell must be
 * there. */
void sct_result_fill_bent(sct_result *result, const sct_duty *duty, const sct_design *design, int bar);
/** result_frames.c: bow limits; internal forces at the ends of all members; what stations need. SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_result_fill_frame(sct_result *result, const sct_duty *duty, const sct_design *design);

/** Zeroed memory that lives as long as the result. */
void *sct_result_array(sct_result *result, size_t n, size_t size);

/** Writes the finding into result->verdict from the checks of the design shown. at_smallest: every size that was sought
 * is the smallest allowed. */
void sct_result_judge(sct_result *result, bool at_smallest);
#endif

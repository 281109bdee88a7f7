/**
 * The choice of sections from ladders: frozen-force rounds, repair, and descent by single and paired changes. Every
 * design that is accepted was analysed with its true properties. A heuristic: it proves nothing about the catalogue.
 * (A search with proof takes this place later: same input, same output.)
 */
#ifndef SCT_SIZING_SECTIONS_H
#define SCT_SIZING_SECTIONS_H

#include "sizing/duty.h"

typedef struct sct_pick {
    bool kept;          /* every limit is kept */
    double utilisation; /* largest, at the design returned */
    double mass;
} sct_pick;

/**
 * Picks sections for the ladder groups. design in: continuous areas (and the sizes of all other groups, which stay);
 * out: the lightest design found that keeps every limit, or the one of least violation. The latest analysis of the duty
 * is of that design. more(user) false: stop with the best so far. most_analyses: budget.
 *
 * SCT_OK; SCT_NO_MEMORY; otherwise the status of an analysis that failed.
 */
sct_status sct_sections_pick(sct_duty *duty, sct_design *design, int most_analyses,
                             bool (*more)(double mass, void *user), void *user, sct_pick *pick);
#endif

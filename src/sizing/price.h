/* What each limit costs: the multipliers of the continuous optimum in the words and units of the user. */
#ifndef SCT_SIZING_PRICE_H
#define SCT_SIZING_PRICE_H

#include "sizing/problem.h"

/**
 * Prices of all limits that hold the mass up at x, the latest point judged, with the multipliers of the descent there
 * (mu nlp.m, mu_bound nlp.n; log form). All constraints that one limit generates are summed. Written into the result,
 * dearest first.
 *
 * SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_prices(const sct_problem *problem, const sct_duty *duty, const double mu[], const double mu_bound[],
                      sct_result *result);
#endif

/* A result as a person reads it in a terminal. */
#ifndef SCT_REPORT_SUMMARY_H
#define SCT_REPORT_SUMMARY_H

#include "base/text.h"
#include "scantling.h"

/**
 * Appends the summary: the verdict, the groups, the worst deflections, the price of the limits that hold the mass up,
 * how the search ended, the reactions, the accuracy, the caution. Long lists are cut; the last line of a cut list says
 * how much is left out. Names are shown with control characters as \xNN, so that none reaches the terminal.
 *
 * colour  terminal colours (ECMA-48); the words carry the same meaning without
 *
 * SCT_NO_MEMORY.
 */
sct_status sct_summary(const sct_result *result, bool colour, sct_text *out);
#endif

/* The finding of a result in words: a heading, and what stands below it. */
#ifndef SCT_REPORT_FINDING_H
#define SCT_REPORT_FINDING_H

#include "base/text.h"
#include "scantling.h"

/** "Two of 29 members are above 1", "Every limit is kept; B1 governs at 0.96", ... */
void sct_finding_heading(const sct_result *result, sct_text *out);
/** The check and combination that govern, how the run ended where that is not plain success, deflections, mass. */
void sct_finding_details(const sct_result *result, sct_text *out);
/** What was done: "Check of given sizes", "Lightest sections found", ... */
const char *sct_finding_task(const sct_result *result);
#endif

/* What reports say of the structure as a whole: critical load factors and the lowest frequency. */
#ifndef SCT_REPORT_WHOLE_H
#define SCT_REPORT_WHOLE_H

#include "report/json_text.h"
#include "report/page.h"

/** The part of its limit that a critical load factor takes, with its error; NAN without a limit. Likewise frequency. */
double sct_critical_utilisation(const sct_result *result, const sct_critical_result *critical);
double sct_frequency_utilisation(const sct_result *result);
/** What moments of a combination are multiplied with in checks; 1 without. */
double sct_amplification_in(const sct_result *result, int combination);

/** The factors of all combinations and what they say; nothing without any. */
void sct_summary_whole(const sct_page *p);
/** "critical_load_factors", "frequency_Hz" and what belongs to it, where the result has them. */
void sct_json_whole_structure(sct_json *w, const sct_result *result);
#endif

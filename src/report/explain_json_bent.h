/* What sct_explain_json says of a member that carries moments. */
#ifndef SCT_REPORT_EXPLAIN_JSON_BENT_H
#define SCT_REPORT_EXPLAIN_JSON_BENT_H

#include "report/json_text.h"
#include "scantling.h"

/** Entries of a combination's object: ranges of forces along it, the checks with their places. SCT_NO_MEMORY. */
sct_status sct_explain_json_bent(sct_json *w, const sct_result *result, int combination, int member, bool is_checked);
/** The list "bows" of the limits on its bow. */
void sct_explain_json_bows(sct_json *w, const sct_result *result, int member);
#endif

/* What result.json says of frames beyond trusses. */
#ifndef SCT_REPORT_JSON_BENT_H
#define SCT_REPORT_JSON_BENT_H

#include "report/json_text.h"
#include "scantling.h"

/* The six numbers just inside an end of a member, in the order of sct_result's `ends`. */
enum { SCT_END_NUMBERS = 6 };

/** The numbers of one end (0: from, 1: to). */
const double *sct_end_forces(const sct_result *result, int combination, int member, int end);

/** More entries of a member's object: its place of governing, moments, bows, local axes, ends. */
void sct_json_bent_member(sct_json *w, const sct_result *result, int member);
/** The list "bows". */
void sct_json_bows(sct_json *w, const sct_result *result);
#endif

/* The columns that the schedule of a frame has beyond those of a truss. Nothing is written for a truss. */
#ifndef SCT_REPORT_CSV_BENT_H
#define SCT_REPORT_CSV_BENT_H

#include "base/text.h"
#include "scantling.h"

/** Text as a field: quoted, and guarded against spreadsheets (csv.h). */
void sct_csv_text(sct_text *out, const char *raw);

/* Each appends all of these columns, a comma in front of every one. */
void sct_csv_bent_head(sct_text *out, const sct_result *result);
/** Those of a member; empty for NULL and for members without moments. */
void sct_csv_bent_member(sct_text *out, const sct_result *result, const sct_member_result *member);
/** Those of an end (0: from, 1: to). */
void sct_csv_bent_end(sct_text *out, const sct_result *result, int combination, int member, int end);
#endif

/* The member schedule as CSV. */
#ifndef SCT_REPORT_CSV_H
#define SCT_REPORT_CSV_H

#include "base/text.h"
#include "scantling.h"

/**
 * Appends the schedule: a head, one record per member, totals by section and by material, the grand total, and the
 * caution as last record. The column `record` tells which: member, section, material, total, warning, caution. Frames
 * have more columns and, behind the total, a record `end` for each end of each member in each combination.
 *
 * RFC 4180: lines end in CR LF, every record has as many fields as the head, UTF-8, '.' as decimal mark. Units stand in
 * the head and follow result->us_customary. Tension is positive. A field without value is empty.
 *
 * Text that a spreadsheet would take for a formula (it starts with = + - @, tab, CR or LF, also behind blanks) gets an
 * apostrophe in front; so does text that starts with an apostrophe. Whoever reads the file back drops one leading
 * apostrophe from text. Numbers are never changed.
 *
 * SCT_NO_MEMORY.
 */
sct_status sct_schedule_csv(const sct_result *result, sct_text *out);
#endif

/* A summary as it grows: headings, tables whose cells know units, wrapped words. */
#ifndef SCT_REPORT_PAGE_H
#define SCT_REPORT_PAGE_H

#include "report/shown.h"
#include "report/table.h"
#include "scantling.h"

enum { SCT_PAGE_COLUMNS = 96, SCT_NAME_COLUMNS = 24 };

typedef struct sct_page {
    const sct_result *r;
    bool colour, us;
    sct_text *out;
} sct_page;

void sct_page_heading(const sct_page *p, const char *words);

/* Cells. Names are cut to SCT_NAME_COLUMNS; a combination of -1 is an empty cell. */
void sct_page_name_cell(sct_table *t, const char *name);
void sct_page_combination_cell(const sct_page *p, sct_table *t, int combination);
void sct_page_shown_cell(const sct_page *p, sct_table *t, double value, sct_display quantity);
/** Forces carry their sign, + too; a rounded zero has none. */
void sct_page_signed_cell(const sct_page *p, sct_table *t, double value, sct_display quantity);
void sct_page_utilisation_cell(sct_table *t, double utilisation);
void sct_page_unit_head(const sct_page *p, sct_table *t, const char *words, sct_display quantity);

/** The head and one row of a table of reactions: smallest and largest over all combinations of component `axis` in
 * `table` (n_combinations x n_joints x 3). */
void sct_page_reaction_head(const sct_page *p, sct_table *t, const char *along, sct_display quantity);
void sct_page_reaction_row(const sct_page *p, sct_table *t, const double *table, int joint, int axis,
                           sct_display quantity);

/** Writes the table and frees its cells. */
void sct_page_finish_table(const sct_page *p, sct_table *t);
/** "... and 3 more in result.json"; nothing for n <= 0. */
void sct_page_say_left_out(const sct_page *p, int n, const char *where);

/** Indices of the `most` largest values, largest first, first of equals first; returns how many. */
int sct_page_largest(const sct_result *r, double value(const sct_result *, int), int n, int most, int index[]);

/** Words broken between blanks to lines of SCT_PAGE_COLUMNS, each after `indent` blanks. */
void sct_page_wrapped(sct_text *out, const char *words, int indent);
/** The same for words that may hold names and may have been cut in a character. */
void sct_page_wrapped_plain(sct_text *out, const char *words, int indent);
#endif

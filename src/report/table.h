/* Aligned columns for a terminal. */
#ifndef SCT_REPORT_TABLE_H
#define SCT_REPORT_TABLE_H

#include "base/text.h"

/* How a row looks: the words say it too, colour is never the only sign. */
typedef enum sct_row { SCT_ROW_PLAIN, SCT_ROW_HEAD, SCT_ROW_TOTAL, SCT_ROW_FAILS } sct_row;

enum { SCT_TABLE_COLUMNS = 12 };

/* Fill it by sct_table_row, then the cells of that row: append to `cells` and call sct_table_cell after each one. Free
 * `cells` with sct_text_free. */
typedef struct sct_table {
    const char *align; /* one letter per column: 'l' or 'r'; at most SCT_TABLE_COLUMNS */
    sct_text cells;
} sct_table;

void sct_table_row(sct_table *table, sct_row row);
/** Ends the cell that was appended. Names must have gone through sct_text_plain: no control characters. */
void sct_table_cell(sct_table *table);
/** The same for a cell that is one text of the program's own. */
void sct_table_words(sct_table *table, const char *words);

/** Appends the table with two blanks between columns and none at line ends. */
void sct_table_write(const sct_table *table, bool colour, sct_text *out);

/* Terminal colours (ECMA-48), by meaning. */
typedef enum sct_ink { SCT_INK_HEAD, SCT_INK_GOOD, SCT_INK_BAD, SCT_INK_SOFT } sct_ink;
/** Appends `words` in that ink, plain without `colour`. */
void sct_text_ink(sct_text *out, const char *words, sct_ink ink, bool colour);
#endif

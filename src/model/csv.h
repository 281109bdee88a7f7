/* Comma-separated text, one record after the other. */
#ifndef SCT_MODEL_CSV_H
#define SCT_MODEL_CSV_H

#include <stdbool.h>
#include <stddef.h>

enum { SCT_CSV_MOST_FIELDS = 64, SCT_CSV_MOST_BYTES = 4096 };

/* One record. Lines that begin with # are comments and are passed over, as are empty lines. */
typedef struct sct_csv {
    const char *text; /* borrowed; need not end with a zero */
    size_t size, at;
    int line, next_line;                    /* of the record, and behind it; from 1 */
    int n;                                  /* fields of the record */
    const char *field[SCT_CSV_MOST_FIELDS]; /* into `buffer`; valid until the next record */
    char buffer[SCT_CSV_MOST_BYTES];
    const char *fault; /* NULL, or why reading stopped at `line` */
} sct_csv;

void sct_csv_start(sct_csv *csv, const char *text, size_t size);
/**
 * The next record: fields parted by commas, plain or in double quotes ("" stands for a quote; commas and line ends may
 * stand inside); LF, CR or CRLF ends a record. Blanks belong to a field.
 *
 * False at the end, and at a fault: an open quote, text behind a closing quote, more fields or bytes than there is
 * room. Source: RFC 4180.
 */
bool sct_csv_next(sct_csv *csv);
/** The field of the current record with this text, -1 when there is none: for the column of a heading. */
int sct_csv_column(const sct_csv *csv, const char *heading);
#endif

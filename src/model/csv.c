/* Comma-separated text: one pass, fields copied into the record's buffer. */
#include "csv.h"

#include <string.h>

void sct_csv_start(sct_csv *csv, const char *text, size_t size)
{
    csv->text = text;
    csv->size = size;
    csv->at = 0;
    csv->line = csv->next_line = 1;
    csv->n = 0;
    csv->fault = NULL;
}

static int peek(const sct_csv *csv)
{
    return csv->at < csv->size ? (unsigned char)csv->text[csv->at] : -1;
}

static bool is_line_end(int c)
{
    return c == '\n' || c == '\r' || c < 0;
}

static void skip_line_end(sct_csv *csv)
{
    const int c = peek(csv);
    if (c < 0) return;
    csv->at++;
    if (c == '\r' && peek(csv) == '\n') csv->at++;
    csv->next_line++;
}

static void skip_comments(sct_csv *csv)
{
    while (csv->at < csv->size && (peek(csv) == '#' || is_line_end(peek(csv)))) {
        while (!is_line_end(peek(csv))) csv->at++;
        skip_line_end(csv);
    }
}

static bool put(sct_csv *csv, size_t *used, char c)
{
    if (*used + 1 >= sizeof csv->buffer) {
        csv->fault = "the record is too long";
        return false;
    }
    csv->buffer[(*used)++] = c;
    return true;
}

static bool read_quoted(sct_csv *csv, size_t *used)
{
    csv->at++;
    for (;;) {
        const int c = peek(csv);
        if (c < 0) {
            csv->fault = "the text ends inside quotes";
            return false;
        }
        if (c == '"') {
            csv->at++;
            if (peek(csv) != '"') break;
        }
        if (c == '\n') csv->next_line++;
        if (!put(csv, used, (char)c)) return false;
        csv->at++;
    }
    if (peek(csv) == ',' || is_line_end(peek(csv))) return true;
    csv->fault = "text stands behind a closing quote";
    return false;
}

static bool read_field(sct_csv *csv, size_t *used)
{
    if (csv->n == SCT_CSV_MOST_FIELDS) {
        csv->fault = "the record has too many fields";
        return false;
    }
    csv->field[csv->n++] = csv->buffer + *used;
    if (peek(csv) == '"') {
        if (!read_quoted(csv, used)) return false;
    } else {
        for (; peek(csv) != ',' && !is_line_end(peek(csv)); csv->at++)
            if (!put(csv, used, (char)peek(csv))) return false;
    }
    csv->buffer[(*used)++] = '\0'; /* put() leaves room for it */
    return true;
}

bool sct_csv_next(sct_csv *csv)
{
    size_t used = 0;
    csv->n = 0;
    if (csv->fault != NULL) return false;
    skip_comments(csv);
    csv->line = csv->next_line;
    if (csv->at >= csv->size) return false;
    while (read_field(csv, &used)) {
        if (peek(csv) != ',') {
            skip_line_end(csv);
            return true;
        }
        csv->at++;
        if (used >= sizeof csv->buffer) {
            csv->fault = "the record is too long";
            break;
        }
    }
    return false;
}

int sct_csv_column(const sct_csv *csv, const char *heading)
{
    for (int i = 0; i < csv->n; i++)
        if (strcmp(csv->field[i], heading) == 0) return i;
    return -1;
}

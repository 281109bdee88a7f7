/* Aligned columns for a terminal: cells are kept as one text, each ended by CELL_END, each row begun by its kind. */
#include "table.h"

#include <string.h>

static const char CELL_END = '\x1f', ROW_END = '\n';

static const char *const INK[] = {
    [SCT_INK_HEAD] = "\x1b[1m",
    [SCT_INK_GOOD] = "\x1b[1;32m",
    [SCT_INK_BAD] = "\x1b[1;31m",
    [SCT_INK_SOFT] = "\x1b[2m",
};
static const char INK_OFF[] = "\x1b[0m";

void sct_text_ink(sct_text *out, const char *words, sct_ink ink, bool colour)
{
    if (colour) sct_text_add(out, INK[ink]);
    sct_text_add(out, words);
    if (colour) sct_text_add(out, INK_OFF);
}

void sct_table_row(sct_table *table, sct_row row)
{
    const char kind = (char)('0' + (int)row);
    if (table->cells.size > 0) sct_text_bytes(&table->cells, &ROW_END, 1);
    sct_text_bytes(&table->cells, &kind, 1);
}

void sct_table_cell(sct_table *table)
{
    sct_text_bytes(&table->cells, &CELL_END, 1);
}

void sct_table_words(sct_table *table, const char *words)
{
    sct_text_add(&table->cells, words);
    sct_table_cell(table);
}

/* Columns that `size` bytes take: characters, not bytes. */
static int width_of(const char *bytes, size_t size)
{
    int n = 0;
    for (size_t i = 0; i < size; i++) n += ((unsigned char)bytes[i] & 0xC0) != 0x80;
    return n;
}

static void measure(const sct_table *table, int width[SCT_TABLE_COLUMNS])
{
    memset(width, 0, SCT_TABLE_COLUMNS * sizeof width[0]);
    const char *p = table->cells.data, *all = p + table->cells.size;
    while (p < all) {
        p++; /* the kind of the row */
        for (int c = 0; p < all && *p != ROW_END; c++) {
            const char *cell = p;
            while (*p != CELL_END) p++;
            const int w = width_of(cell, (size_t)(p - cell));
            if (w > width[c]) width[c] = w;
            p++;
        }
        if (p < all) p++;
    }
}

static void write_row(const char *p, const char *row_end, const char *align, const int width[], sct_text *out)
{
    const size_t start = out->size;
    for (int c = 0; p < row_end; c++) {
        const char *cell = p;
        while (*p != CELL_END) p++;
        if (c > 0) sct_text_add(out, "  ");
        const size_t at = out->size;
        sct_text_bytes(out, cell, (size_t)(p - cell));
        sct_text_pad(out, at, width[c], align[c] == 'r');
        p++;
    }
    while (!out->failed && out->size > start && out->data[out->size - 1] == ' ') out->data[--out->size] = '\0';
}

void sct_table_write(const sct_table *table, bool colour, sct_text *out)
{
    static const char *const ink_of_row[] = {
        [SCT_ROW_PLAIN] = "",
        [SCT_ROW_HEAD] = "\x1b[2m",
        [SCT_ROW_TOTAL] = "\x1b[1m",
        [SCT_ROW_FAILS] = "\x1b[31m",
    };
    int width[SCT_TABLE_COLUMNS];
    if (table->cells.failed) {
        out->failed = true;
        return;
    }
    if (table->cells.size == 0) return;
    measure(table, width);
    const char *p = table->cells.data, *all = p + table->cells.size;
    while (p < all) {
        const char *row_end = memchr(p, ROW_END, (size_t)(all - p));
        if (row_end == NULL) row_end = all;
        const char *ink = colour ? ink_of_row[*p - '0'] : "";
        sct_text_add(out, "  ");
        sct_text_add(out, ink);
        write_row(p + 1, row_end, table->align, width, out);
        if (*ink != '\0') sct_text_add(out, INK_OFF);
        sct_text_add(out, "\n");
        p = row_end + 1;
    }
}

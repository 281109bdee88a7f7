/* Cells, headings and wrapped words of a summary. */
#include "report/page.h"

#include <math.h>
#include <string.h>

#include "report/shown.h"

void sct_page_heading(const sct_page *p, const char *words)
{
    sct_text_add(p->out, "\n");
    sct_text_ink(p->out, words, SCT_INK_HEAD, p->colour);
    sct_text_add(p->out, "\n");
}

void sct_page_name_cell(sct_table *t, const char *name)
{
    sct_text_plain(&t->cells, name, SCT_NAME_COLUMNS);
    sct_table_cell(t);
}

void sct_page_combination_cell(const sct_page *p, sct_table *t, int combination)
{
    sct_page_name_cell(t, combination >= 0 ? p->r->combinations[combination] : "");
}

void sct_page_shown_cell(const sct_page *p, sct_table *t, double value, sct_display quantity)
{
    sct_text_shown(&t->cells, value, quantity, p->us);
    sct_table_cell(t);
}

/* Forces carry their sign, + too; a rounded zero has none. */
void sct_page_signed_cell(const sct_page *p, sct_table *t, double value, sct_display quantity)
{
    sct_text shown = {0};
    sct_text_shown(&shown, value, quantity, p->us);
    if (!shown.failed && shown.data != NULL) {
        if (value > 0 && shown.data[strspn(shown.data, "0.")] != '\0') sct_text_add(&t->cells, "+");
        sct_text_add(&t->cells, shown.data);
    }
    t->cells.failed = t->cells.failed || shown.failed;
    sct_text_free(&shown);
    sct_table_cell(t);
}

void sct_page_utilisation_cell(sct_table *t, double utilisation)
{
    sct_text_utilisation(&t->cells, utilisation);
    sct_table_cell(t);
}

void sct_page_unit_head(const sct_page *p, sct_table *t, const char *words, sct_display quantity)
{
    sct_text_format(&t->cells, "%s%s%s", words, *words != '\0' ? " " : "", sct_shown_unit(quantity, p->us));
    sct_table_cell(t);
}

void sct_page_reaction_head(const sct_page *p, sct_table *t, const char *along, sct_display quantity)
{
    sct_table_row(t, SCT_ROW_HEAD);
    sct_table_words(t, "support");
    sct_table_words(t, along);
    sct_page_unit_head(p, t, "smallest", quantity);
    sct_table_words(t, "in");
    sct_page_unit_head(p, t, "largest", quantity);
    sct_table_words(t, "in");
}

void sct_page_reaction_row(const sct_page *p, sct_table *t, const double *table, int joint, int axis,
                           sct_display quantity)
{
    const sct_result *r = p->r;
    int low = 0, high = 0;
    double min = NAN, max = NAN;
    for (int c = 0; c < r->n_combinations; c++) {
        const double R = table[((size_t)c * (size_t)r->n_joints + (size_t)joint) * 3 + (size_t)axis];
        if (!(R >= min)) {
            min = R;
            low = c;
        }
        if (!(R <= max)) {
            max = R;
            high = c;
        }
    }
    sct_table_row(t, SCT_ROW_PLAIN);
    sct_page_name_cell(t, r->joints[joint].name);
    sct_text_bytes(&t->cells, &"xyz"[axis], 1);
    sct_table_cell(t);
    sct_page_signed_cell(p, t, min, quantity);
    sct_page_combination_cell(p, t, r->n_combinations > 0 ? low : -1);
    sct_page_signed_cell(p, t, max, quantity);
    sct_page_combination_cell(p, t, r->n_combinations > 0 ? high : -1);
}

int sct_page_largest(const sct_result *r, double value(const sct_result *, int), int n, int most, int index[])
{
    int found = 0;
    for (int i = 0; i < n; i++) {
        int at = found;
        while (at > 0 && value(r, i) > value(r, index[at - 1])) at--;
        if (at >= most) continue;
        if (found < most) found++;
        for (int k = found - 1; k > at; k--) index[k] = index[k - 1];
        index[at] = i;
    }
    return found;
}

void sct_page_finish_table(const sct_page *p, sct_table *t)
{
    sct_table_write(t, p->colour, p->out);
    sct_text_free(&t->cells);
}

void sct_page_say_left_out(const sct_page *p, int n, const char *where)
{
    if (n > 0) sct_text_format(p->out, "  ... and %d more in %s\n", n, where);
}

/* Words broken between blanks to lines of SCT_PAGE_COLUMNS, each after `indent` blanks. */
void sct_page_wrapped(sct_text *out, const char *words, int indent)
{
    int column = 0;
    while (*words != '\0') {
        const size_t length = strcspn(words, " ");
        int width = 0;
        for (size_t i = 0; i < length; i++) width += ((unsigned char)words[i] & 0xC0) != 0x80;
        if (column > 0 && column + 1 + width > SCT_PAGE_COLUMNS) {
            sct_text_add(out, "\n");
            column = 0;
        }
        if (column == 0)
            sct_text_format(out, "%*s", indent, "");
        else
            sct_text_add(out, " ");
        sct_text_bytes(out, words, length);
        column = (column == 0 ? indent : column + 1) + width;
        words += length + strspn(words + length, " ");
    }
    sct_text_add(out, "\n");
}

/* The same for words that may hold names and may have been cut in a character. */
void sct_page_wrapped_plain(sct_text *out, const char *words, int indent)
{
    sct_text whole = {0}, plain = {0};
    sct_text_bytes(&whole, words, sct_whole_characters(words));
    if (!whole.failed) sct_text_plain(&plain, whole.data, 0);
    sct_text_add(&plain, "");
    if (whole.failed || plain.failed)
        out->failed = true;
    else
        sct_page_wrapped(out, plain.data, indent);
    sct_text_free(&whole);
    sct_text_free(&plain);
}

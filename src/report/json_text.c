/* JSON as it is written: commas, lines and keys. */
#include "report/json_text.h"

#include <string.h>

#include "report/shown.h"

enum { LINES_DOWN_TO = 2 }; /* entries at this depth still have their own line */

void sct_json_entry(sct_json *w)
{
    if (!w->is_first) sct_text_add(w->out, ",");
    if (w->depth <= LINES_DOWN_TO)
        sct_text_format(w->out, "\n%*s", 2 * w->depth, "");
    else if (!w->is_first)
        sct_text_add(w->out, " ");
    w->is_first = false;
}

void sct_json_key(sct_json *w, const char *name)
{
    sct_json_entry(w);
    sct_text_json(w->out, name);
    sct_text_add(w->out, ": ");
}

void sct_json_begin(sct_json *w, const char *bracket)
{
    sct_text_add(w->out, bracket);
    w->depth++;
    w->is_first = true;
}

void sct_json_end(sct_json *w, const char *bracket)
{
    const bool is_empty = w->is_first;
    w->depth--;
    if (w->depth < LINES_DOWN_TO && !is_empty) sct_text_format(w->out, "\n%*s", 2 * w->depth, "");
    sct_text_add(w->out, bracket);
    w->is_first = false;
}

void sct_json_string(sct_json *w, const char *name, const char *value)
{
    sct_json_key(w, name);
    if (value != NULL)
        sct_text_json(w->out, value);
    else
        sct_text_add(w->out, "null");
}

/* Words from a buffer of fixed room, which may have cut a character: all of it but that. */
void sct_json_words(sct_json *w, const char *name, const char *value)
{
    char cut[512] = "";
    const size_t length = sct_whole_characters(value);
    memcpy(cut, value, length < sizeof cut ? length : sizeof cut - 1);
    sct_json_string(w, name, cut);
}

void sct_json_number(sct_json *w, const char *name, double value)
{
    sct_json_key(w, name);
    sct_text_number(w->out, value);
}

void sct_json_whole(sct_json *w, const char *name, int value)
{
    sct_json_key(w, name);
    sct_text_format(w->out, "%d", value);
}

void sct_json_boolean(sct_json *w, const char *name, bool value)
{
    sct_json_key(w, name);
    sct_text_add(w->out, value ? "true" : "false");
}

void sct_json_vector(sct_json *w, const double v[], int n)
{
    sct_text_add(w->out, "[");
    for (int i = 0; i < n; i++) {
        if (i > 0) sct_text_add(w->out, ", ");
        sct_text_number(w->out, v[i]);
    }
    sct_text_add(w->out, "]");
}

void sct_json_both_axes(sct_json *w, const char *name, const double v[2])
{
    sct_json_key(w, name);
    sct_json_begin(w, "{");
    sct_json_number(w, "in_plane", v[0]);
    sct_json_number(w, "out_of_plane", v[1]);
    sct_json_end(w, "}");
}

/* JSON as it is written: one line for each thing in a list, units in the keys. */
#ifndef SCT_REPORT_JSON_TEXT_H
#define SCT_REPORT_JSON_TEXT_H

#include <stdbool.h>

#include "base/text.h"

/* A writer that knows whether a comma is due; begin with {out, 0, true}. Lists and the outermost object take a line per
 * entry, inner ones none. */
typedef struct sct_json {
    sct_text *out;
    int depth;
    bool is_first;
} sct_json;

/** The place of the next entry of a list; its value is appended to w->out, or begun. */
void sct_json_entry(sct_json *w);
/** The place and key of the next entry of an object. */
void sct_json_key(sct_json *w, const char *name);
/** An object "{" or a list "["; ended with "}" or "]". */
void sct_json_begin(sct_json *w, const char *bracket);
void sct_json_end(sct_json *w, const char *bracket);

/* Entries of an object. */
void sct_json_string(sct_json *w, const char *name, const char *value); /* NULL: null */
void sct_json_words(sct_json *w, const char *name, const char *value);  /* from a buffer that may cut a character */
void sct_json_number(sct_json *w, const char *name, double value);      /* shortest; null when not finite */
void sct_json_whole(sct_json *w, const char *name, int value);
void sct_json_boolean(sct_json *w, const char *name, bool value);
void sct_json_both_axes(sct_json *w, const char *name, const double v[2]);

/** A list of numbers as a value. */
void sct_json_vector(sct_json *w, const double v[], int n);
#endif

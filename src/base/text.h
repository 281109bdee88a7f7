/* A growing text buffer: what every writer appends to. */
#ifndef SCT_BASE_TEXT_H
#define SCT_BASE_TEXT_H

#include <stdbool.h>
#include <stddef.h>

/* Zero it to start. When memory runs out `failed` is set, the text stays as it was, and later appends do nothing. */
typedef struct sct_text {
    char *data; /* zero-terminated when size > 0; NULL while nothing was added */
    size_t size, room;
    bool failed;
} sct_text;

void sct_text_free(sct_text *text);
void sct_text_bytes(sct_text *text, const char *bytes, size_t size);
void sct_text_add(sct_text *text, const char *string);
/** printf without locale: the decimal mark of %f, %e and %g is always '.'. */
__attribute__((format(printf, 2, 3))) void sct_text_format(sct_text *text, const char *format, ...);
/** Shortest decimal that reads back to the same double. */
void sct_text_number(sct_text *text, double value);
/** `value` with `digits` decimals; a rounded zero has no sign. */
void sct_text_fixed(sct_text *text, double value, int digits);
/** A JSON string with its quotes. */
void sct_text_json(sct_text *text, const char *raw);
/** Text for XML and HTML: & < > " ' escaped; control characters other than tab and line feed become U+FFFD. */
void sct_text_xml(sct_text *text, const char *raw);
/** Text for a terminal: control characters as \xNN, cut at `most` characters with "..." (0: not cut). */
void sct_text_plain(sct_text *text, const char *raw, int most);
/* A name cut at 64 characters and cleaned, for a message: sct_show(name).text. */
typedef struct sct_shown {
    char text[272];
} sct_shown;
sct_shown sct_show(const char *name);
/** Pads with blanks to `width` columns what was added since `start` (a value of text->size), on the right, or on the
 * left when `right` is set. Characters count, not bytes. */
void sct_text_pad(sct_text *text, size_t start, int width, bool right);
/** Hands the string to the caller for free(); NULL when it failed. Empties the buffer. */
char *sct_text_take(sct_text *text, size_t *size);
#endif

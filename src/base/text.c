/* A growing text buffer: what every writer appends to. */
#include "text.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "number.h"

void sct_text_free(sct_text *text)
{
    free(text->data);
    *text = (sct_text){0};
}

static bool grow(sct_text *text, size_t more)
{
    if (text->failed) return false;
    if (text->room - text->size > more) return true;
    size_t room = text->room < 128 ? 256 : text->room;
    while (room - text->size <= more) {
        if (room > (size_t)-1 / 2) {
            text->failed = true;
            return false;
        }
        room *= 2;
    }
    char *data = realloc(text->data, room);
    if (data == NULL) {
        text->failed = true;
        return false;
    }
    text->data = data;
    text->room = room;
    return true;
}

void sct_text_bytes(sct_text *text, const char *bytes, size_t size)
{
    if (!grow(text, size)) return;
    if (size > 0) memcpy(text->data + text->size, bytes, size);
    text->size += size;
    text->data[text->size] = '\0';
}

void sct_text_add(sct_text *text, const char *string)
{
    sct_text_bytes(text, string, strlen(string));
}

void sct_text_format(sct_text *text, const char *format, ...)
{
    char small[256];
    va_list args, again;
    va_start(args, format);
    va_copy(again, args);
    const int n = sct_number_vformat(small, sizeof small, format, args);
    if (n >= 0 && (size_t)n < sizeof small) {
        sct_text_bytes(text, small, (size_t)n);
    } else if (n >= 0 && grow(text, (size_t)n + 1)) {
        const int m = sct_number_vformat(text->data + text->size, text->room - text->size, format, again);
        text->size += m > 0 ? (size_t)m : 0;
    }
    va_end(again);
    va_end(args);
}

void sct_text_number(sct_text *text, double value)
{
    char out[SCT_NUMBER_ROOM];
    sct_number_write(value, out);
    sct_text_add(text, out);
}

void sct_text_fixed(sct_text *text, double value, int digits)
{
    char out[400];
    sct_number_format(out, sizeof out, "%.*f", digits, value);
    const char *p = out;
    if (*p == '-' && strspn(p + 1, "0.") == strlen(p + 1)) p++; /* "-0.0" is 0.0 */
    sct_text_add(text, p);
}

void sct_text_json(sct_text *text, const char *raw)
{
    sct_text_add(text, "\"");
    for (const char *p = raw; *p != '\0'; p++) {
        const unsigned char c = (unsigned char)*p;
        if (c == '"' || c == '\\') {
            const char pair[2] = {'\\', *p};
            sct_text_bytes(text, pair, 2);
        } else if (c == '\n') {
            sct_text_add(text, "\\n");
        } else if (c == '\t') {
            sct_text_add(text, "\\t");
        } else if (c < 0x20 || c == 0x7f) {
            sct_text_format(text, "\\u%04x", c);
        } else {
            sct_text_bytes(text, p, 1);
        }
    }
    sct_text_add(text, "\"");
}

void sct_text_xml(sct_text *text, const char *raw)
{
    for (const char *p = raw; *p != '\0'; p++) {
        switch (*p) {
        case '&': sct_text_add(text, "&amp;"); break;
        case '<': sct_text_add(text, "&lt;"); break;
        case '>': sct_text_add(text, "&gt;"); break;
        case '"': sct_text_add(text, "&quot;"); break;
        case '\'': sct_text_add(text, "&#39;"); break;
        default:
            if ((unsigned char)*p < 0x20 && *p != '\t' && *p != '\n')
                sct_text_add(text, "\xEF\xBF\xBD");
            else
                sct_text_bytes(text, p, 1);
        }
    }
}

static bool starts_character(char c)
{
    return ((unsigned char)c & 0xC0) != 0x80;
}

enum { SHOWN_ROOM = 5 };

/* What a terminal is shown for the character at *p, which moves on: C0, DEL, and the C1 controls that terminals obey
 * too (U+0080 to U+009F: C2 80 to C2 9F) as \xNN. Returns how many bytes. */
static size_t show_next(const char **p, char out[SHOWN_ROOM])
{
    const unsigned char c = (unsigned char)**p, second = c == 0xC2 ? (unsigned char)(*p)[1] : 0;
    const bool c1 = second >= 0x80 && second < 0xA0;
    *p += c1 ? 2 : 1;
    if (c1 || c < 0x20 || c == 0x7f) return (size_t)snprintf(out, SHOWN_ROOM, "\\x%02x", c1 ? second : c);
    out[0] = (char)c;
    return 1;
}

void sct_text_plain(sct_text *text, const char *raw, int most)
{
    int n = 0;
    char out[SHOWN_ROOM];
    for (const char *p = raw; *p != '\0';) {
        if (starts_character(*p) && most > 0 && n++ >= most) {
            sct_text_add(text, "...");
            return;
        }
        sct_text_bytes(text, out, show_next(&p, out));
    }
}

/* Takes no memory: what is said of a model must not depend on it. */
sct_shown sct_show(const char *name)
{
    enum { MOST = 64 };
    sct_shown shown = {""};
    size_t size = 0;
    int n = 0;
    for (const char *p = name; *p != '\0';) {
        if ((starts_character(*p) && n++ >= MOST) || size + SHOWN_ROOM + 3 > sizeof shown.text) {
            memcpy(shown.text + size, "...", 4);
            break;
        }
        size += show_next(&p, shown.text + size);
        shown.text[size] = '\0';
    }
    return shown;
}

void sct_text_pad(sct_text *text, size_t start, int width, bool right)
{
    if (text->failed) return;
    int columns = 0;
    for (size_t i = start; i < text->size; i++) columns += starts_character(text->data[i]);
    if (columns >= width) return;
    const size_t blanks = (size_t)(width - columns), length = text->size - start;
    for (size_t i = 0; i < blanks; i++) sct_text_bytes(text, " ", 1);
    if (!right || text->failed) return;
    memmove(text->data + start + blanks, text->data + start, length);
    memset(text->data + start, ' ', blanks);
}

char *sct_text_take(sct_text *text, size_t *size)
{
    if (!text->failed && text->data == NULL) sct_text_add(text, "");
    if (text->failed) {
        sct_text_free(text);
        return NULL;
    }
    char *data = text->data;
    if (size != NULL) *size = text->size;
    *text = (sct_text){0};
    return data;
}

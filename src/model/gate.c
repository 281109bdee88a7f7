/* The gate: one pass over the bytes, without recursion; doubled keys are found by sorting the hashes of each object. */
#include "gate.h"

#include <stdarg.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/number.h"
#include "base/text.h"

typedef struct place {
    int line, column;
} place;

/* A key of an object that is still open. */
typedef struct key {
    uint64_t hash;
    const char *text; /* behind the opening quote */
    uint32_t value;
} key;

/* An array or object that is still open. */
typedef struct level {
    bool is_object;
    uint32_t value;
    uint32_t count;   /* entries begun */
    size_t first_key; /* of the object, in scan.keys */
} level;

typedef struct scan {
    const char *file, *text;
    size_t size, at;
    int line;
    size_t line_begin;
    size_t continued; /* UTF-8 continuation bytes in this line so far: they are no columns */
    sct_gate_value *values;
    size_t n, room;
    key *keys;
    size_t n_keys, keys_room;
    level levels[SCT_MOST_DEPTH];
    int depth;
    sct_issues *issues;
    sct_status status;
} scan;

/* ---- faults ---------------------------------------------------------------------------------------------------- */

static place here(const scan *s)
{
    return (place){s->line, (int)(s->at - s->line_begin - s->continued) + 1};
}

__attribute__((format(printf, 3, 4))) static bool fault(scan *s, place p, const char *format, ...)
{
    char message[512];
    va_list args;
    va_start(args, format);
    sct_number_vformat(message, sizeof message, format, args);
    va_end(args);
    const sct_where where = {.file = s->file, .line = p.line, .column = p.column};
    sct_issue_add(s->issues, SCT_ERROR, where, "%s", message);
    s->status = SCT_BAD_INPUT;
    return false;
}

static bool no_memory(scan *s)
{
    s->status = SCT_NO_MEMORY;
    return false;
}

static bool at_end(const scan *s)
{
    return s->at >= s->size;
}

/* The byte at an offset from here; 0 behind the end (a zero byte in the text is a fault wherever it stands). */
static unsigned char peek(const scan *s, size_t offset)
{
    return s->at + offset < s->size ? (unsigned char)s->text[s->at + offset] : 0;
}

static bool is_digit(unsigned char c)
{
    return c >= '0' && c <= '9';
}

static bool is_word(unsigned char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_' || c == '$' || is_digit(c);
}

static bool ends_inside(scan *s, const char *what, place began)
{
    return fault(s, here(s), "the file ends inside the %s that begins at %d:%d", what, began.line, began.column);
}

/* The length of the UTF-8 character at p, of which `left` bytes are there; 0: none begins here (RFC 3629, section 4).
 */
static size_t utf8_length(const unsigned char *p, size_t left)
{
    if (p[0] < 0x80) return 1;
    const size_t length = p[0] >= 0xF0 ? 4 : p[0] >= 0xE0 ? 3 : 2;
    if (p[0] < 0xC2 || p[0] > 0xF4 || left < length) return 0;
    const unsigned char least = p[0] == 0xE0 ? 0xA0 : p[0] == 0xF0 ? 0x90 : 0x80;
    const unsigned char most = p[0] == 0xED ? 0x9F : p[0] == 0xF4 ? 0x8F : 0xBF;
    if (p[1] < least || p[1] > most) return 0;
    for (size_t i = 2; i < length; i++)
        if ((p[i] & 0xC0) != 0x80) return 0;
    return length;
}

static bool not_utf8(scan *s)
{
    return fault(s, here(s), "byte 0x%02X (number %zu of the file) is not UTF-8; save the file as UTF-8", peek(s, 0),
                 s->at + 1);
}

/* Where `expected` should stand, something else does: names it, with a hint where it is a known slip. */
static bool unexpected(scan *s, const char *expected)
{
    const place p = here(s);
    const unsigned char c = peek(s, 0);
    const unsigned char *text = (const unsigned char *)s->text + s->at;
    if (c == 0) return fault(s, p, "found a zero byte; expected %s", expected);
    if (c < 0x20 || c == 0x7F) return fault(s, p, "found the control byte 0x%02X; expected %s", c, expected);
    if (c == '#' || (c == '/' && (peek(s, 1) == '/' || peek(s, 1) == '*')))
        return fault(s, p, "found \"%c\"; JSON has no comments (use a key \"notes\")", c);
    if (c == '"') return fault(s, p, "found a string; expected %s", expected);
    if (c == '\'') return fault(s, p, "found a single quote; JSON wants double quotes");
    if (is_word(c)) {
        size_t length = 1;
        while (length < 40 && is_word(peek(s, length))) length++;
        return fault(s, p, "found %.*s; expected %s", (int)length, s->text + s->at, expected);
    }
    if (c < 0x80) return fault(s, p, "found \"%c\"; expected %s", c, expected);
    const size_t length = utf8_length(text, s->size - s->at);
    if (length == 0) return not_utf8(s);
    if (length == 2 && memcmp(text, "\xC2\xA0", 2) == 0)
        return fault(s, p, "found a no-break space (U+00A0); only plain blanks may stand between values");
    if (length == 3 && (memcmp(text, "\xE2\x80\x9C", 3) == 0 || memcmp(text, "\xE2\x80\x9D", 3) == 0))
        return fault(s, p, "found a typographic quote; JSON wants the plain double quote");
    return fault(s, p, "found \"%.*s\"; expected %s", (int)length, s->text + s->at, expected);
}

/* ---- blanks and lines ------------------------------------------------------------------------------------------- */

static void skip_blanks(scan *s)
{
    for (; s->at < s->size; s->at++) {
        const char c = s->text[s->at];
        if (c == ' ' || c == '\t') continue;
        if (c != '\n' && c != '\r') return;
        if (c == '\r' && peek(s, 1) == '\n') s->at++;
        s->line++;
        s->line_begin = s->at + 1;
        s->continued = 0;
    }
}

/* ---- strings ---------------------------------------------------------------------------------------------------- */

/* Four hexadecimal digits at p, or -1. */
static long hex4(const char *p, size_t left)
{
    long value = 0;
    if (left < 4) return -1;
    for (int i = 0; i < 4; i++) {
        const char c = p[i];
        const int digit = c >= '0' && c <= '9'   ? c - '0'
                          : c >= 'a' && c <= 'f' ? c - 'a' + 10
                          : c >= 'A' && c <= 'F' ? c - 'A' + 10
                                                 : -1;
        if (digit < 0) return -1;
        value = 16 * value + digit;
    }
    return value;
}

static bool is_high(long u)
{
    return u >= 0xD800 && u <= 0xDBFF;
}

static bool is_low(long u)
{
    return u >= 0xDC00 && u <= 0xDFFF;
}

/* Steps over the escape here. */
static bool scan_escape(scan *s, place began)
{
    const place p = here(s);
    const char c = (char)peek(s, 1);
    if (s->at + 1 >= s->size) {
        s->at = s->size;
        return ends_inside(s, "string", began);
    }
    if (c != 'u') {
        if (c == '\0' || strchr("\"\\/bfnrt", c) == NULL)
            return fault(s, p, "a backslash in a string must be followed by one of \" \\ / b f n r t u");
        s->at += 2;
        return true;
    }
    const size_t left = s->size - s->at;
    const long u = hex4(s->text + s->at + 2, left - 2);
    if (u < 0 && left < 6) {
        s->at = s->size;
        return ends_inside(s, "string", began);
    }
    if (u < 0) return fault(s, p, "\\u must be followed by four hexadecimal digits");
    if (u == 0) return fault(s, p, "\\u0000 is not allowed in a string");
    if (is_low(u)) return fault(s, p, "\\u%04lx is the second half of a pair; the first half is missing", u);
    s->at += 6;
    if (!is_high(u)) return true;
    if (peek(s, 0) != '\\' || peek(s, 1) != 'u' || !is_low(hex4(s->text + s->at + 2, s->size - s->at - 2)))
        return fault(s, p, "\\u%04lx is the first half of a pair; the second half does not follow", u);
    s->at += 6;
    return true;
}

/* Steps over the string here, from quote to quote. */
static bool scan_string(scan *s)
{
    const place began = here(s);
    const size_t begin = ++s->at;
    for (;;) {
        while (s->at < s->size) {
            const unsigned char c = (unsigned char)s->text[s->at];
            if (c < 0x20 || c >= 0x7F || c == '"' || c == '\\') break;
            s->at++;
        }
        if (at_end(s)) return ends_inside(s, "string", began);
        if (s->at - begin > SCT_MOST_STRING_BYTES)
            return fault(s, began, "a string of more than %d bytes; that is the most that is read",
                         SCT_MOST_STRING_BYTES);
        const unsigned char c = peek(s, 0);
        if (c == '"') break;
        if (c == '\\') {
            if (!scan_escape(s, began)) return false;
        } else if (c == '\n' || c == '\r') {
            return fault(s, here(s),
                         "the line ends inside the string that begins at %d:%d; close it with \", or write "
                         "\\n for a line feed",
                         began.line, began.column);
        } else if (c == 0) {
            return fault(s, here(s), "a zero byte in a string; no text holds one");
        } else if (c < 0x20) {
            return fault(s, here(s), "a raw byte 0x%02X in a string; write \\u%04x", c, c);
        } else {
            const size_t length = utf8_length((const unsigned char *)s->text + s->at, s->size - s->at);
            if (length == 0) return not_utf8(s);
            s->at += length;
            s->continued += length - 1;
        }
    }
    s->at++;
    return true;
}

/* The next character of a string that was found right, as UTF-8, and the step over it; 0 at its closing quote. */
static size_t decode(const char **p, char out[4])
{
    const char *q = *p;
    if (*q == '"') {
        out[0] = '\0';
        return 0;
    }
    if (*q != '\\') {
        out[0] = *q;
        *p = q + 1;
        return 1;
    }
    if (q[1] != 'u') {
        static const char LETTER[] = "bfnrt", MEANING[] = "\b\f\n\r\t";
        const char *letter = strchr(LETTER, q[1]);
        out[0] = letter != NULL ? MEANING[letter - LETTER] : q[1];
        *p = q + 2;
        return 1;
    }
    unsigned long u = (unsigned long)hex4(q + 2, 4);
    *p = q + 6;
    if (is_high((long)u)) {
        u = 0x10000 + ((u - 0xD800) << 10) + ((unsigned long)hex4(q + 8, 4) - 0xDC00);
        *p = q + 12;
    }
    const size_t length = u < 0x80 ? 1 : u < 0x800 ? 2 : u < 0x10000 ? 3 : 4;
    static const unsigned char LEAD[] = {0, 0x00, 0xC0, 0xE0, 0xF0};
    for (size_t i = length - 1; i > 0; i--, u >>= 6) out[i] = (char)(0x80 | (u & 0x3F));
    out[0] = (char)(LEAD[length] | u);
    return length;
}

/* ---- doubled keys ----------------------------------------------------------------------------------------------- */

static uint64_t key_hash(const char *text)
{
    uint64_t h = 14695981039346656037u; /* FNV-1a, 64 bit */
    char c[4];
    for (size_t n; (n = decode(&text, c)) > 0;)
        for (size_t i = 0; i < n; i++) h = (h ^ (unsigned char)c[i]) * 1099511628211u;
    return h;
}

/* Compares what two keys mean, whatever escapes they are written with. */
static int compare_texts(const char *a, const char *b)
{
    char ca[4], cb[4];
    size_t na = 0, nb = 0, ia = 0, ib = 0;
    for (;;) { /* byte by byte: an escape gives up to four */
        if (ia == na) {
            na = decode(&a, ca);
            ia = 0;
        }
        if (ib == nb) {
            nb = decode(&b, cb);
            ib = 0;
        }
        const int byte = (unsigned char)ca[ia++], difference = byte - (unsigned char)cb[ib++];
        if (difference != 0 || byte == 0) return difference; /* a zero byte is the end: no key holds one */
    }
}

static int compare_keys(const void *a, const void *b)
{
    const key *x = a, *y = b;
    if (x->hash != y->hash) return x->hash < y->hash ? -1 : 1;
    const int order = compare_texts(x->text, y->text);
    return order != 0 ? order : (x->value > y->value) - (x->value < y->value);
}

static int compare_values(const void *a, const void *b)
{
    const key *x = a, *y = b;
    return (x->value > y->value) - (x->value < y->value);
}

static void add_token(sct_text *out, const char *text)
{
    char c[4];
    sct_text_add(out, "/");
    for (size_t n; (n = decode(&text, c)) > 0;) {
        if (n == 1 && c[0] == '~')
            sct_text_add(out, "~0");
        else if (n == 1 && c[0] == '/')
            sct_text_add(out, "~1");
        else
            sct_text_bytes(out, c, n);
    }
}

/* Tells of a doubled key: its first value and itself. */
static bool doubled(scan *s, uint32_t first, const key *second)
{
    sct_text pointer = {0}, name = {0}, shown = {0};
    for (int i = 0; i + 1 < s->depth; i++) {
        if (!s->levels[i].is_object)
            sct_text_format(&pointer, "/%u", s->levels[i].count - 1);
        else
            add_token(&pointer, s->text + s->values[s->levels[i + 1].value].key_begin + 1);
    }
    add_token(&pointer, second->text);
    char c[4];
    const char *text = second->text;
    for (size_t n; (n = decode(&text, c)) > 0;) sct_text_bytes(&name, c, n);
    sct_text_plain(&shown, name.data != NULL ? name.data : "", 64);
    const bool failed = pointer.failed || name.failed || shown.failed;
    if (!failed) {
        const sct_gate_value *one = &s->values[first], *two = &s->values[second->value];
        const sct_where where = {s->file, two->key_line, two->key_column, pointer.data};
        sct_issue_add(s->issues, SCT_ERROR, where, "the key \"%s\" stands twice in one object; the first is at %d:%d",
                      shown.data != NULL ? shown.data : "", one->key_line, one->key_column);
        s->status = SCT_BAD_INPUT;
    }
    sct_text_free(&pointer);
    sct_text_free(&name);
    sct_text_free(&shown);
    if (failed) return no_memory(s);
    return true;
}

/* Looks for doubled keys in the object that closes here. Hashes of few keys are compared pair by pair; many are sorted.
 * Equal hashes are sorted by their text, so that keys made to collide cost no more than their sorting. */
static bool check_keys(scan *s, const level *object)
{
    const size_t n = s->n_keys - object->first_key;
    if (n == 0) return true; /* there may be no table yet */
    key *keys = s->keys + object->first_key;
    bool suspect = n > 12;
    for (size_t i = 1; i < n && !suspect; i++)
        for (size_t j = 0; j < i; j++) suspect |= keys[i].hash == keys[j].hash;
    s->n_keys = object->first_key;
    if (!suspect) return true;
    qsort(keys, n, sizeof *keys, compare_keys);
    key first = keys[0]; /* of the keys equal to keys[i] */
    size_t n_doubled = 0;
    for (size_t i = 1; i < n; i++) {
        if (keys[i].hash != first.hash || compare_texts(keys[i].text, first.text) != 0)
            first = keys[i];
        else
            keys[n_doubled++] = (key){first.value, keys[i].text, keys[i].value}; /* to be told in document order */
    }
    qsort(keys, n_doubled, sizeof *keys, compare_values);
    for (size_t i = 0; i < n_doubled; i++)
        if (!doubled(s, (uint32_t)keys[i].hash, &keys[i])) return false;
    return true;
}

/* ---- numbers ---------------------------------------------------------------------------------------------------- */

static size_t skip_digits(scan *s)
{
    const size_t begin = s->at;
    while (is_digit(peek(s, 0))) s->at++;
    return s->at - begin;
}

static bool bad_number(scan *s, place began, const char *what)
{
    if (at_end(s)) return ends_inside(s, "number", began);
    return fault(s, here(s), "the number that begins at %d:%d %s", began.line, began.column, what);
}

/* The value must be a finite double, and not vanish unless its digits are all zero. */
static bool check_value(scan *s, place began, const char *text, size_t length)
{
    double value = 0.0;
    if (!sct_number_read(text, length, &value))
        return fault(s, began, "%.*s is too large for a number (the largest is about 1.8e308)", (int)length, text);
    if (value != 0.0) return true;
    for (size_t i = 0; text[i] != 'e' && text[i] != 'E'; i++) /* there is one: see scan_number */
        if (text[i] >= '1')
            return fault(s, began, "%.*s is too small for a number: it underflows to zero", (int)length, text);
    return true;
}

static bool scan_number(scan *s)
{
    const place began = here(s);
    const size_t begin = s->at;
    bool has_exponent = false;
    if (peek(s, 0) == '-') s->at++;
    const bool leading_zero = peek(s, 0) == '0';
    if (leading_zero)
        s->at++;
    else if (skip_digits(s) == 0)
        return bad_number(s, began, "has no digit behind its minus sign");
    if (leading_zero && is_digit(peek(s, 0))) return bad_number(s, began, "has a leading zero; leave it out");
    if (leading_zero && (peek(s, 0) | 0x20) == 'x') return bad_number(s, began, "is hexadecimal; write it in decimals");
    if (peek(s, 0) == '.') {
        s->at++;
        if (skip_digits(s) == 0) return bad_number(s, began, "has no digit behind its decimal point");
    }
    if (peek(s, 0) == 'e' || peek(s, 0) == 'E') {
        has_exponent = true;
        s->at++;
        if (peek(s, 0) == '+' || peek(s, 0) == '-') s->at++;
        if (skip_digits(s) == 0) return bad_number(s, began, "has no digit in its exponent");
    }
    if (is_word(peek(s, 0)) || peek(s, 0) == '.' || peek(s, 0) == '+' || peek(s, 0) == '-')
        return bad_number(s, began,
                          "ends here with a character that no number has; a quantity with a unit is a string "
                          "such as \"3 m\"");
    const size_t length = s->at - begin;
    if (length > SCT_MOST_NUMBER_CHARACTERS)
        return fault(s, began, "a number of %zu characters; at most %d are read", length, SCT_MOST_NUMBER_CHARACTERS);
    /* without exponent, 64 characters can neither overflow nor vanish */
    return !has_exponent || check_value(s, began, s->text + begin, length);
}

/* ---- values ----------------------------------------------------------------------------------------------------- */

static bool scan_word(scan *s)
{
    static const char *const WORDS[] = {"true", "false", "null"};
    size_t length = 0;
    while (is_word(peek(s, length))) length++;
    for (size_t i = 0; i < sizeof WORDS / sizeof *WORDS; i++) {
        const bool whole = length == strlen(WORDS[i]);
        if (length > strlen(WORDS[i]) || memcmp(s->text + s->at, WORDS[i], length) != 0) continue;
        if (!whole && s->at + length < s->size) continue;
        const place began = here(s);
        s->at += length;
        if (!whole) return ends_inside(s, "word", began);
        return true;
    }
    static const char *const SLIPS[][2] = {{"True", "true"},   {"TRUE", "true"}, {"False", "false"},
                                           {"FALSE", "false"}, {"None", "null"}, {"nul", "null"}};
    static const char *const NO_NUMBERS[] = {"NaN", "nan", "NAN", "Infinity", "infinity", "inf", "Inf", "INF"};
    for (size_t i = 0; i < sizeof NO_NUMBERS / sizeof *NO_NUMBERS; i++)
        if (length == strlen(NO_NUMBERS[i]) && memcmp(s->text + s->at, NO_NUMBERS[i], length) == 0)
            return fault(s, here(s), "JSON has no infinity and no not-a-number; expected a number");
    for (size_t i = 0; i < sizeof SLIPS / sizeof *SLIPS; i++)
        if (length == strlen(SLIPS[i][0]) && memcmp(s->text + s->at, SLIPS[i][0], length) == 0)
            return fault(s, here(s), "found %s; did you mean %s?", SLIPS[i][0], SLIPS[i][1]);
    return unexpected(s, "a value: a number, true, false, null, or a string in double quotes");
}

static bool scan_scalar(scan *s)
{
    const unsigned char c = peek(s, 0);
    if (c == '"') return scan_string(s);
    if (c == '-' && (peek(s, 1) == 'i' || peek(s, 1) == 'I' || peek(s, 1) == 'N'))
        return fault(s, here(s), "JSON has no infinity and no not-a-number; expected a number");
    if (c == '-' || is_digit(c)) return scan_number(s);
    if (c == '+') return fault(s, here(s), "a number has no plus sign in JSON; leave it out");
    if (c == '.') return fault(s, here(s), "a number needs a digit before its decimal point");
    if (is_word(c)) return scan_word(s);
    if (c == ',') return unexpected(s, "a value before the comma");
    const bool after_comma = s->depth > 0 && !s->levels[s->depth - 1].is_object && s->levels[s->depth - 1].count > 1;
    return unexpected(s, c == ']' && after_comma ? "a value (no comma may stand behind the last one)" : "a value");
}

/* Room for one more entry of `size` bytes in a growing array; NULL when out of memory (the array stays). */
static void *grow(void *array, size_t n, size_t *room, size_t size)
{
    if (n < *room) return array;
    const size_t more = *room == 0 ? 256 : 2 * *room;
    void *p = realloc(array, more * size);
    if (p != NULL) *room = more;
    return p;
}

/* Begins the value that stands here. */
static bool begin_value(scan *s)
{
    sct_gate_value *values = grow(s->values, s->n, &s->room, sizeof *values);
    if (values == NULL) return no_memory(s);
    s->values = values;
    const place p = here(s);
    sct_gate_value *v = &values[s->n++];
    v->begin = (uint32_t)s->at;
    v->line = p.line;
    v->column = p.column;
    if (s->depth == 0 || !s->levels[s->depth - 1].is_object) {
        v->key_begin = v->key_end = 0;
        v->key_line = v->key_column = 0;
    }
    if (s->depth > 0) s->levels[s->depth - 1].count++;
    return true;
}

/* Steps over a key and its colon; its place waits in the next value's record. */
static bool scan_key(scan *s)
{
    skip_blanks(s);
    const level *object = &s->levels[s->depth - 1];
    const sct_gate_value *of = &s->values[object->value];
    const place p = here(s);
    if (at_end(s)) return ends_inside(s, "object", (place){of->line, of->column});
    if (peek(s, 0) == '}') return unexpected(s, "a key (no comma may stand behind the last entry)");
    if (is_digit(peek(s, 0))) return unexpected(s, "a key in double quotes (the decimal mark is a point, not a comma)");
    if (peek(s, 0) != '"') return unexpected(s, "a key in double quotes");
    const size_t begin = s->at;
    if (!scan_string(s)) return false;
    sct_gate_value *values = grow(s->values, s->n, &s->room, sizeof *values);
    if (values == NULL) return no_memory(s);
    s->values = values;
    key *keys = grow(s->keys, s->n_keys, &s->keys_room, sizeof *keys);
    if (keys == NULL) return no_memory(s);
    s->keys = keys;
    sct_gate_value *v = &values[s->n];
    v->key_begin = (uint32_t)begin;
    v->key_end = (uint32_t)s->at;
    v->key_line = p.line;
    v->key_column = p.column;
    keys[s->n_keys++] = (key){key_hash(s->text + begin + 1), s->text + begin + 1, (uint32_t)s->n};
    skip_blanks(s);
    if (at_end(s)) return ends_inside(s, "object", (place){values[object->value].line, values[object->value].column});
    if (peek(s, 0) != ':') return unexpected(s, "\":\" behind the key");
    s->at++;
    return true;
}

/* Opens the array or object here. `again`: a value follows (not where it is empty: then it was closed too). */
static bool open_container(scan *s, bool *again)
{
    const bool is_object = peek(s, 0) == '{';
    if (s->depth == SCT_MOST_DEPTH)
        return fault(s, here(s), "nested deeper than %d levels; that is the most that is read", SCT_MOST_DEPTH);
    s->levels[s->depth++] = (level){.is_object = is_object, .value = (uint32_t)(s->n - 1), .first_key = s->n_keys};
    s->at++;
    skip_blanks(s);
    *again = peek(s, 0) != (is_object ? '}' : ']');
    return !*again || !is_object || scan_key(s);
}

/* Behind a value: closes what ends here. `again`: another value follows. */
static bool close_containers(scan *s, bool *again)
{
    *again = false;
    while (s->depth > 0) {
        const level *top = &s->levels[s->depth - 1];
        sct_gate_value *of = &s->values[top->value];
        skip_blanks(s);
        if (at_end(s)) return ends_inside(s, top->is_object ? "object" : "array", (place){of->line, of->column});
        const unsigned char c = peek(s, 0);
        if (c == ',') {
            *again = true;
            s->at++;
            return !top->is_object || scan_key(s);
        }
        if (c != (top->is_object ? '}' : ']'))
            return unexpected(s, top->is_object ? "\",\" or \"}\"" : "\",\" or \"]\"");
        s->at++;
        of->end = (uint32_t)s->at;
        if (top->is_object && !check_keys(s, top)) return false;
        s->depth--;
    }
    return true;
}

static bool scan_document(scan *s)
{
    bool again = true;
    while (again) {
        skip_blanks(s);
        if (at_end(s)) {
            const sct_gate_value *of = &s->values[s->levels[s->depth - 1].value];
            return ends_inside(s, s->levels[s->depth - 1].is_object ? "object" : "array",
                               (place){of->line, of->column});
        }
        if (peek(s, 0) != '{' && peek(s, 0) != '[') {
            const size_t value = s->n;
            if (!begin_value(s) || !scan_scalar(s)) return false;
            s->values[value].end = (uint32_t)s->at;
            again = false;
        } else if (!begin_value(s) || !open_container(s, &again)) {
            return false;
        }
        if (!again && !close_containers(s, &again)) return false;
    }
    skip_blanks(s);
    if (at_end(s)) return true;
    return unexpected(s, "nothing more behind the end of the document");
}

/* ---- the whole ----------------------------------------------------------------------------------------------------
 */

/* Other encodings: by their byte order mark, or by the zero bytes that stand beside the first characters. */
static const char *other_encoding(const unsigned char *p, size_t size)
{
    if (size >= 4 && memcmp(p, "\xFF\xFE\0\0", 4) == 0) return "UTF-32 (little endian)";
    if (size >= 4 && memcmp(p, "\0\0\xFE\xFF", 4) == 0) return "UTF-32 (big endian)";
    if (size >= 2 && memcmp(p, "\xFF\xFE", 2) == 0) return "UTF-16 (little endian)";
    if (size >= 2 && memcmp(p, "\xFE\xFF", 2) == 0) return "UTF-16 (big endian)";
    if (size >= 4 && p[0] != 0 && p[1] == 0 && p[2] == 0 && p[3] == 0) return "UTF-32 (little endian)";
    if (size >= 4 && p[0] == 0 && p[1] == 0 && p[2] == 0 && p[3] != 0) return "UTF-32 (big endian)";
    if (size >= 4 && p[0] != 0 && p[1] == 0 && p[3] == 0) return "UTF-16 (little endian)";
    if (size >= 4 && p[0] == 0 && p[1] != 0 && p[2] == 0) return "UTF-16 (big endian)";
    return NULL;
}

static bool check_start(scan *s)
{
    const unsigned char *p = (const unsigned char *)s->text;
    const char *encoding = other_encoding(p, s->size);
    const place start = {1, 1};
    if (encoding != NULL) return fault(s, start, "the file looks like %s; save it as UTF-8", encoding);
    if (s->size >= 3 && memcmp(p, "\xEF\xBB\xBF", 3) == 0) s->line_begin = s->at = 3;
    skip_blanks(s);
    if (!at_end(s)) return true;
    return fault(s, start, "the file is empty; expected a model, which is a JSON object { ... }");
}

sct_status sct_gate_check(const char *file, const char *text, size_t size, sct_gate_value **values, size_t *n,
                          sct_issues *issues)
{
    *values = NULL;
    *n = 0;
    if (size > SCT_MOST_BYTES) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = file},
                      "the file is larger than %d bytes, the most that is read", SCT_MOST_BYTES);
        return SCT_TOO_LARGE;
    }
    scan s = {.file = file, .text = text, .size = size, .line = 1, .issues = issues};
    const bool read = check_start(&s) && scan_document(&s);
    free(s.keys);
    if (!read || s.status != SCT_OK) {
        free(s.values);
        return s.status;
    }
    *values = s.values;
    *n = s.n;
    return SCT_OK;
}

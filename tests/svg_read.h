/* Drawings read back by tests: well-formed, words as the rectangles that they cover, none on another. */
#ifndef TESTS_SVG_READ_H
#define TESTS_SVG_READ_H

#include "support.h"

#include <stdbool.h>
#include <string.h>

#include "report/labels.h"
#include "report/sheet.h"

static inline bool holds(const sct_text *svg, const char *words)
{
    return strstr(svg->data, words) != NULL;
}

/* As ck_assert, but silent when it holds: Check logs every assertion, and here are millions. */
#define must(holds)                                                                                                    \
    do {                                                                                                               \
        if (!(holds)) ck_abort_msg("%s", #holds);                                                                      \
    } while (0)

/* ---- reading SVG back ---------------------------------------------------------------------------------------------
 */

static const char *const ELEMENTS[] = {"svg",  "title",  "desc", "style", "g",    "rect",
                                       "line", "circle", "path", "text",  "tspan"};

static inline bool is_known_element(const char *name, size_t n)
{
    for (size_t i = 0; i < sizeof ELEMENTS / sizeof *ELEMENTS; i++)
        if (strlen(ELEMENTS[i]) == n && strncmp(ELEMENTS[i], name, n) == 0) return true;
    return false;
}

/* Tags nest and match, only the elements of our drawings, every & starts an entity; XML 1.0 without a library. */
static inline void check_well_formed(const sct_text *svg)
{
    const char *open[64];
    size_t length[64];
    int depth = 0;
    for (const char *p = svg->data; *p != '\0';) {
        if (*p == '&')
            must(strncmp(p, "&amp;", 5) == 0 || strncmp(p, "&lt;", 4) == 0 || strncmp(p, "&gt;", 4) == 0 ||
                 strncmp(p, "&quot;", 6) == 0 || strncmp(p, "&#39;", 5) == 0);
        must((unsigned char)*p >= 0x20 || *p == '\n');
        if (*p++ != '<') continue;
        const bool closes = *p == '/';
        p += closes;
        const char *name = p;
        const size_t n = strcspn(p, " />");
        must(is_known_element(name, n));
        const char *end = strchr(p, '>');
        must(end != NULL);
        int quotes = 0;
        for (const char *q = p; q < end; q++) {
            quotes += *q == '"';
            must(*q != '<');
        }
        must(quotes % 2 == 0);
        if (closes) {
            must(depth > 0);
            depth--;
            must(length[depth] == n && strncmp(open[depth], name, n) == 0);
        } else if (end[-1] != '/') {
            must(depth < 64);
            open[depth] = name;
            length[depth++] = n;
        }
        p = end + 1;
    }
    must(depth == 0);
}

enum { WORDS_MOST = 4096 };
typedef struct words {
    sct_box box;
    char text[200];
} words;

/* The number behind `name` inside one tag; NAN when it is not there. */
static inline double attribute_of(const char *tag, const char *name)
{
    const size_t n = strlen(name);
    for (const char *p = tag; *p != '>' && *p != '\0'; p++)
        if (strncmp(p, name, n) == 0) return strtod(p + n, NULL);
    return NAN;
}

/* The characters of one <text>, entities undone, and its width: an upper bound over the usual faces. */
static inline double read_runs(const char *p, double size, char text[200])
{
    const char *end = strstr(p, "</text>");
    double width = 0;
    size_t n = 0;
    int runs = 0;
    while ((p = strstr(p, "<tspan")) != NULL && p < end) {
        const bool bold = !isnan(attribute_of(p, "font-weight=\""));
        char run[400];
        size_t k = 0;
        for (p = strchr(p, '>') + 1; *p != '<' && k < sizeof run - 1; k++) {
            if (*p != '&') {
                run[k] = *p++;
                continue;
            }
            run[k] = p[1] == 'l' ? '<' : p[1] == 'g' ? '>' : p[1] == 'q' ? '"' : p[1] == 'a' ? '&' : '\'';
            p = strchr(p, ';') + 1;
        }
        run[k] = '\0';
        width += sct_words_width(run, size, bold) + (runs++ > 0 ? 0.33 * size : 0);
        if (n + k + 2 < 200) n += (size_t)snprintf(text + n, 200 - n, "%s%s", runs > 1 ? " " : "", run);
    }
    return width;
}

/* Every <text> of a drawing as the rectangle that it covers. */
static inline int read_words(const sct_text *svg, words out[WORDS_MOST])
{
    int n = 0, depth = 0, moved_at = -1;
    double dy = 0;
    for (const char *p = svg->data; (p = strchr(p, '<')) != NULL; p++) {
        if (strncmp(p, "<g", 2) == 0) {
            const double y = attribute_of(p, "translate(0 ");
            if (!isnan(y)) {
                dy = y;
                moved_at = depth;
            }
            depth++;
        } else if (strncmp(p, "</g", 3) == 0 && --depth == moved_at) {
            dy = 0;
            moved_at = -1;
        }
        if (strncmp(p, "<text ", 6) != 0) continue;
        must(n < WORDS_MOST);
        const double size = attribute_of(p, "font-size=\""), x = attribute_of(p, " x=\""), y = attribute_of(p, " y=\"");
        const double turn = attribute_of(p, "rotate("), angle = isnan(turn) ? 0 : turn * 0.017453292519943295;
        const char *anchor = strstr(p, "text-anchor=\""), *end = strchr(p, '>'); /* every sheet has an anchored text */
        const double width = read_runs(p, size, out[n].text);
        const double shift = anchor == NULL || anchor > end ? 0.5 : anchor[13] == 'm' ? 0 : -0.5;
        const double c = cos(angle), s = sin(angle), along = shift * width, up = 0.36 * size;
        out[n].box = (sct_box){x + along * c + up * s, y + dy + along * s - up * c, c, s, 0.5 * width, 0.42 * size};
        n++;
    }
    return n;
}

static inline void check_labels(const sct_text *svg)
{
    static words all[WORDS_MOST];
    const int n = read_words(svg, all);
    const double W = attribute_of(svg->data, " width=\""), H = attribute_of(svg->data, " height=\"");
    ck_assert_int_gt(n, 5);
    for (int i = 0; i < n; i++) {
        const sct_point reach = sct_box_reach(&all[i].box);
        if (all[i].box.x - reach.x < 0 || all[i].box.x + reach.x > W || all[i].box.y - reach.y < 0 ||
            all[i].box.y + reach.y > H)
            ck_abort_msg("\"%s\" leaves the sheet", all[i].text);
        for (int k = 0; k < i; k++)
            if (sct_boxes_meet(&all[i].box, &all[k].box, 0))
                ck_abort_msg("\"%s\" lies on \"%s\"", all[i].text, all[k].text);
    }
}

/* Numbers in attributes have at most two decimals. */
static inline void check_decimals(const sct_text *svg)
{
    for (const char *p = strstr(svg->data, "</style>"); *p != '\0'; p++) {
        if (*p != '.' || p[1] < '0' || p[1] > '9') continue;
        const size_t digits = strspn(p + 1, "0123456789");
        must(digits <= 3);
        if (digits == 3) must(strncmp(p + 4, " = ", 3) == 0); /* a panel of a dimension in words */
    }
}
#endif

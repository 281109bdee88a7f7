/* A sheet of SVG. */
#include "sheet.h"

#include <math.h>
#include <string.h>

typedef struct role_colour {
    const char *name, *light, *dark;
} role_colour;

/* Contrast on the page: every step of the ramp at least 3:1, text at least 6.5:1; neighbours of the ramp stay apart in
 * protan, deutan, tritan vision (Machado, Oliveira and Fernandes 2009) and in grey. */
static const role_colour ROLES[ROLE_COUNT] = {
    [ROLE_PAGE] = {"page", "#ffffff", "#11161c"},   [ROLE_INK] = {"ink", "#1a2128", "#e8edf1"},
    [ROLE_SOFT] = {"soft", "#4d5964", "#aab6c1"},   [ROLE_LINE] = {"line", "#838f9a", "#6d7a86"},
    [ROLE_FAINT] = {"faint", "#d5dce2", "#333d47"}, [ROLE_OVER] = {"over", "#ad301c", "#f6895e"},
    [ROLE_U0] = {"u0", "#4694bf", "#1f7097"},       [ROLE_U1] = {"u1", "#1a78a5", "#378db9"},
    [ROLE_U2] = {"u2", "#005b82", "#5caad5"},       [ROLE_U3] = {"u3", "#003e5d", "#8dc8eb"},
    [ROLE_U4] = {"u4", "#002235", "#c7e9fd"},
};

static const char *const FACES = "system-ui,-apple-system,'Segoe UI',Roboto,'Helvetica Neue',Arial,"
                                 "'Liberation Sans','DejaVu Sans',sans-serif";

/* At most two decimals, no trailing zeros. */
static void put(sct_text *out, double value)
{
    sct_text_fixed(out, value, 2);
    if (out->failed) return;
    while (out->data[out->size - 1] == '0') out->size--;
    if (out->data[out->size - 1] == '.') out->size--;
    out->data[out->size] = '\0';
}

static void attribute(sct_text *out, const char *name, double value)
{
    sct_text_format(out, " %s=\"", name);
    put(out, value);
    sct_text_add(out, "\"");
}

static void paint(sct_text *out, sct_role fill, sct_role stroke, double weight)
{
    sct_text_add(out, " class=\"");
    if (fill != ROLE_NONE) sct_text_format(out, "sc-f-%s", ROLES[fill].name);
    if (stroke != ROLE_NONE) sct_text_format(out, "%ssc-s-%s", fill != ROLE_NONE ? " " : "", ROLES[stroke].name);
    sct_text_format(out, "\" fill=\"%s\"", fill != ROLE_NONE ? ROLES[fill].light : "none");
    if (stroke == ROLE_NONE) return;
    sct_text_format(out, " stroke=\"%s\"", ROLES[stroke].light);
    attribute(out, "stroke-width", weight);
}

static void point(sct_text *out, const char *before, sct_point p)
{
    sct_text_add(out, before);
    put(out, p.x);
    sct_text_add(out, " ");
    put(out, p.y);
}

static void ends(sct_sheet *sheet, sct_point a, sct_point b)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<line");
    attribute(out, "x1", a.x);
    attribute(out, "y1", a.y);
    attribute(out, "x2", b.x);
    attribute(out, "y2", b.y);
}

void sct_sheet_line(sct_sheet *sheet, sct_point a, sct_point b, sct_role role, double weight)
{
    ends(sheet, a, b);
    paint(&sheet->body, ROLE_NONE, role, weight);
    sct_text_add(&sheet->body, "/>\n");
}

void sct_sheet_dots(sct_sheet *sheet, sct_point a, sct_point b)
{
    ends(sheet, a, b);
    paint(&sheet->body, ROLE_NONE, ROLE_SOFT, MEDIUM);
    sct_text_add(&sheet->body, " stroke-dasharray=\"0.1 4.4\" stroke-linecap=\"round\"/>\n");
}

void sct_sheet_circle(sct_sheet *sheet, sct_point at, double radius, sct_role fill, sct_role stroke, double weight)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<circle");
    attribute(out, "cx", at.x);
    attribute(out, "cy", at.y);
    attribute(out, "r", radius);
    paint(out, fill, stroke, weight);
    sct_text_add(out, "/>\n");
}

void sct_sheet_rect(sct_sheet *sheet, sct_point corner, double width, double height, sct_role fill, sct_role stroke,
                    double weight)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<rect");
    attribute(out, "x", corner.x);
    attribute(out, "y", corner.y);
    attribute(out, "width", width);
    attribute(out, "height", height);
    paint(out, fill, stroke, weight);
    sct_text_add(out, "/>\n");
}

void sct_sheet_polygon(sct_sheet *sheet, const sct_point corners[], int n, sct_role fill, sct_role stroke,
                       double weight)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<path d=\"");
    for (int i = 0; i < n; i++) point(out, i == 0 ? "M" : "L", corners[i]);
    sct_text_add(out, "Z\"");
    paint(out, fill, stroke, weight);
    sct_text_add(out, "/>\n");
}

void sct_sheet_polyline(sct_sheet *sheet, const sct_point at[], int n, sct_role role, double weight)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<path d=\"");
    for (int i = 0; i < n; i++) point(out, i == 0 ? "M" : "L", at[i]);
    sct_text_add(out, "\"");
    paint(out, ROLE_NONE, role, weight);
    sct_text_add(out, " stroke-linejoin=\"round\"/>\n");
}

void sct_sheet_path_open(sct_sheet *sheet)
{
    sct_text_add(&sheet->body, "<path d=\"");
}

void sct_sheet_stroke(sct_sheet *sheet, sct_point a, sct_point b)
{
    point(&sheet->body, "M", a);
    point(&sheet->body, "L", b);
}

void sct_sheet_path_close(sct_sheet *sheet, sct_role stroke, double weight)
{
    sct_text_add(&sheet->body, "\"");
    paint(&sheet->body, ROLE_NONE, stroke, weight);
    sct_text_add(&sheet->body, "/>\n");
}

void sct_sheet_group_open(sct_sheet *sheet, const char *title)
{
    sct_text_add(&sheet->body, "<g><title>");
    sct_text_xml(&sheet->body, title);
    sct_text_add(&sheet->body, "</title>\n");
}

void sct_sheet_group_close(sct_sheet *sheet)
{
    sct_text_add(&sheet->body, "</g>\n");
}

/* The next character of UTF-8; bytes that are not well formed count as one character each. */
static unsigned next_character(const char **p)
{
    const unsigned char *s = (const unsigned char *)*p;
    const int more = s[0] >= 0xF0 ? 3 : s[0] >= 0xE0 ? 2 : s[0] >= 0xC0 ? 1 : 0;
    unsigned c = more == 0 ? s[0] : s[0] & (0x3Fu >> more);
    int i = 1;
    for (; i <= more && (s[i] & 0xC0) == 0x80; i++) c = c << 6 | (s[i] & 0x3Fu);
    *p += i;
    return c;
}

/* Marks that turn the direction of writing. A name that holds one could make the number behind it read backwards. */
static bool turns_writing(unsigned c)
{
    return (c >= 0x202A && c <= 0x202E) || (c >= 0x2066 && c <= 0x2069);
}

static void add_words(sct_text *out, const char *words)
{
    for (const char *p = words; *p != '\0';) {
        char one[8] = {0};
        const char *start = p;
        if (turns_writing(next_character(&p))) continue;
        memcpy(one, start, (size_t)(p - start));
        sct_text_xml(out, one);
    }
}

void sct_sheet_put(sct_sheet *sheet, const sct_sheet *part, sct_point by)
{
    sct_text *out = &sheet->body;
    sct_text_add(out, "<g transform=\"translate(");
    point(out, "", by);
    sct_text_add(out, ")\">\n");
    if (part->body.failed) out->failed = true;
    if (part->body.size > 0) sct_text_bytes(out, part->body.data, part->body.size);
    sct_text_add(out, "</g>\n");
}

void sct_sheet_runs(sct_sheet *sheet, sct_point at, double size, sct_anchor anchor, double degrees,
                    const sct_word_run runs[], int n)
{
    static const char *const ANCHORS[] = {"", " text-anchor=\"middle\"", " text-anchor=\"end\""};
    sct_text *out = &sheet->body;
    sct_text_add(out, "<text");
    attribute(out, "x", at.x);
    attribute(out, "y", at.y);
    attribute(out, "font-size", size);
    sct_text_add(out, ANCHORS[anchor]);
    if (fabs(degrees) >= 0.005) {
        sct_text_add(out, " transform=\"rotate(");
        put(out, degrees);
        point(out, " ", at);
        sct_text_add(out, ")\"");
    }
    sct_text_add(out, ">");
    for (int i = 0; i < n; i++) {
        sct_text_format(out, "<tspan class=\"sc-f-%s\" fill=\"%s\"", ROLES[runs[i].role].name,
                        ROLES[runs[i].role].light);
        if (runs[i].bold) sct_text_add(out, " font-weight=\"600\"");
        if (i > 0) attribute(out, "dx", 0.33 * size);
        sct_text_add(out, ">");
        add_words(out, runs[i].text);
        sct_text_add(out, "</tspan>");
    }
    sct_text_add(out, "</text>\n");
}

void sct_sheet_words(sct_sheet *sheet, sct_point at, double size, sct_anchor anchor, sct_role role, const char *words)
{
    sct_sheet_runs(sheet, at, size, anchor, 0, &(sct_word_run){words, role, false}, 1);
}

/* ---- width of words ------------------------------------------------------------------------------------------------
 */

/* Upper bounds [em] over the common sans faces, regular weight. */
static double character_width(unsigned c)
{
    if (c == 0x202F || c == 0x2009) return 0.21;
    if (c < 0x80 && strchr(" .,:;'|!iljI()[]/", (int)c) != NULL) return 0.4;
    if (c < 0x80 && strchr("+=<>~", (int)c) != NULL) return 0.86;
    if (c == 0x2212 || c == 0xD7 || c == 0x2264 || c == 0x2265) return 0.86;
    if (c < 0x80 && strchr("mM%@W", (int)c) != NULL) return 1.0;
    if ((c >= 'A' && c <= 'Z') || (c >= 0xC0 && c <= 0xDE)) return 0.78;
    if (c < 0x250) return 0.645;
    if (c < 0x1100) return 0.9; /* Greek, Cyrillic and other alphabets, wide capitals included */
    return c < 0x2000 || c >= 0x2E80 ? 1.35 : c == 0x2026 || c >= 0x2100 ? 1.1 : 0.645;
}

double sct_words_width(const char *words, double size, bool bold)
{
    double width = 0;
    while (*words != '\0') width += character_width(next_character(&words));
    return width * size * (bold ? 1.1 : 1.0);
}

double sct_runs_width(const sct_word_run *runs, int n, double size)
{
    double width = n > 1 ? 0.33 * size * (n - 1) : 0;
    for (int i = 0; i < n; i++) width += sct_words_width(runs[i].text, size, runs[i].bold);
    return width;
}

void sct_words_fit(const char *words, double width, double size, bool bold, char *out, size_t room)
{
    static const char ELLIPSIS[] = "\xE2\x80\xA6";
    if (sct_words_width(words, size, bold) <= width && strlen(words) < room) {
        memcpy(out, words, strlen(words) + 1);
        return;
    }
    const double em = size * (bold ? 1.1 : 1.0);
    double used = em * character_width(0x2026);
    const char *end = words;
    for (const char *p = words; *p != '\0';) {
        used += em * character_width(next_character(&p));
        if (used > width || (size_t)(p - words) + sizeof ELLIPSIS > room) break;
        end = p;
    }
    const size_t n = (size_t)(end - words);
    memcpy(out, words, n);
    memcpy(out + n, ELLIPSIS, sizeof ELLIPSIS);
}

size_t sct_words_line(const char *words, double width, double size)
{
    const char *end = NULL;
    double used = 0;
    for (const char *p = words;;) {
        if (*p == ' ' || *p == '\0') {
            if (end != NULL && used > width) break;
            end = p;
        }
        if (*p == '\0') break;
        used += size * character_width(next_character(&p));
    }
    return (size_t)(end - words);
}

/* ---- the file ------------------------------------------------------------------------------------------------------
 */

void sct_sheet_write(const sct_sheet *sheet, double width, double height, const char *id, const char *title,
                     const char *description, sct_text *out)
{
    sct_text_add(out, "<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"sc\" viewBox=\"0 0 ");
    put(out, width);
    sct_text_add(out, " ");
    put(out, height);
    sct_text_add(out, "\"");
    attribute(out, "width", width);
    attribute(out, "height", height);
    sct_text_format(out, " role=\"img\" aria-labelledby=\"%s-t %s-d\" font-family=\"%s\" font-size=\"12\">\n", id, id,
                    FACES);
    sct_text_format(out, "<title id=\"%s-t\">", id);
    sct_text_xml(out, title);
    sct_text_format(out, "</title>\n<desc id=\"%s-d\">", id);
    sct_text_xml(out, description);
    sct_text_add(out, "</desc>\n<style>.sc{font-variant-numeric:tabular-nums lining-nums}"
                      "@media screen and (prefers-color-scheme:dark){");
    for (int i = 0; i < ROLE_COUNT; i++)
        sct_text_format(out, ".sc-f-%s{fill:%s}.sc-s-%s{stroke:%s}", ROLES[i].name, ROLES[i].dark, ROLES[i].name,
                        ROLES[i].dark);
    sct_text_add(out, "}</style>\n<rect");
    attribute(out, "width", width);
    attribute(out, "height", height);
    paint(out, ROLE_PAGE, ROLE_NONE, 0);
    sct_text_add(out, "/>\n");
    if (sheet->body.failed) out->failed = true;
    if (sheet->body.size > 0) sct_text_bytes(out, sheet->body.data, sheet->body.size);
    sct_text_add(out, "</svg>\n");
}

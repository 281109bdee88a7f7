/* A sheet of SVG: lines, shapes and words in the roles and weights of our drawings. Coordinates are in u, y downwards;
 * 1 u prints as 0.225 mm. Literal attributes hold the light colours, a style rule turns them dark on a dark screen. */
#ifndef SCT_REPORT_SHEET_H
#define SCT_REPORT_SHEET_H

#include "base/text.h"

typedef enum sct_role {
    ROLE_NONE = -1,
    ROLE_PAGE,
    ROLE_INK,
    ROLE_SOFT, /* secondary text, leaders, dimensions */
    ROLE_LINE, /* graphics only, never text */
    ROLE_FAINT,
    ROLE_OVER, /* utilisation above 1, nothing else */
    ROLE_U0,   /* the utilisation ramp, low to high */
    ROLE_U1,
    ROLE_U2,
    ROLE_U3,
    ROLE_U4,
    ROLE_COUNT
} sct_role;

/* Line weights [u]. */
static const double HAIR = 0.8, THIN = 1.1, MEDIUM = 1.6, THICK = 2.2;
/* Sizes of type [u]. */
static const double LABEL = 11, TEXT = 12, HEADING = 16;
/* The baseline stands this much of the size below the middle of the capitals. */
static const double BASELINE = 0.36;

typedef struct sct_point {
    double x, y;
} sct_point;

/* Zero it to start. */
typedef struct sct_sheet {
    sct_text body;
} sct_sheet;

typedef enum sct_anchor { ANCHOR_START, ANCHOR_MIDDLE, ANCHOR_END } sct_anchor;

/* A run of words in one role; runs of a line are set a third of the size apart. */
typedef struct sct_word_run {
    const char *text; /* UTF-8, not escaped */
    sct_role role;
    bool bold;
} sct_word_run;

void sct_sheet_line(sct_sheet *sheet, sct_point a, sct_point b, sct_role role, double weight);
/** Round dots: no force. */
void sct_sheet_dots(sct_sheet *sheet, sct_point a, sct_point b);
void sct_sheet_circle(sct_sheet *sheet, sct_point at, double radius, sct_role fill, sct_role stroke, double weight);
void sct_sheet_rect(sct_sheet *sheet, sct_point corner, double width, double height, sct_role fill, sct_role stroke,
                    double weight);
void sct_sheet_polygon(sct_sheet *sheet, const sct_point corners[], int n, sct_role fill, sct_role stroke,
                       double weight);

/** An open line through n points. */
void sct_sheet_polyline(sct_sheet *sheet, const sct_point at[], int n, sct_role role, double weight);

/** Many strokes as one path: open, strokes, close. */
void sct_sheet_path_open(sct_sheet *sheet);
void sct_sheet_stroke(sct_sheet *sheet, sct_point a, sct_point b);
void sct_sheet_path_close(sct_sheet *sheet, sct_role stroke, double weight);

/** A group whose hover title is `title` (escaped here). */
void sct_sheet_group_open(sct_sheet *sheet, const char *title);
void sct_sheet_group_close(sct_sheet *sheet);

/** All of another sheet, moved. */
void sct_sheet_put(sct_sheet *sheet, const sct_sheet *part, sct_point by);

/** Words on a baseline through `at`, turned by `degrees` clockwise about it. */
void sct_sheet_runs(sct_sheet *sheet, sct_point at, double size, sct_anchor anchor, double degrees,
                    const sct_word_run runs[], int n);
void sct_sheet_words(sct_sheet *sheet, sct_point at, double size, sct_anchor anchor, sct_role role, const char *words);

/** Upper bound of the width of one run, and of a line of runs, over the usual system faces. */
double sct_words_width(const char *words, double size, bool bold);
double sct_runs_width(const sct_word_run *runs, int n, double size);

/** Copies `words` to out, cut with an ellipsis at a character boundary to be at most `width` wide and to fit. */
void sct_words_fit(const char *words, double width, double size, bool bold, char *out, size_t room);

/** Bytes of the longest start of `words` that ends at a blank (or at the end) and is at most `width` wide; a first
 * word that is wider counts whole. */
size_t sct_words_line(const char *words, double width, double size);

/** Writes the whole file: head, title, description, style, body. `id` is the prefix of its ids. */
void sct_sheet_write(const sct_sheet *sheet, double width, double height, const char *id, const char *title,
                     const char *description, sct_text *out);
#endif

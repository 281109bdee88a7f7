/* What stands about a drawing. */
#include "legend.h"

#include <math.h>
#include <string.h>

#include "band.h"
#include "base/number.h"
#include "quantity.h"

static const double MARGIN = 20, ROW = 19, STRIP_ROW = 22, NOTES = 170, CAUTION_MOST = 424;
/* Columns of the group table as fractions of its width: left edge of a text, right edge of numbers. */
static const double SECTION_AT = 0.31, PIECES_AT = 0.73, WORST_AT = 0.87;
enum { ROWS_MOST = 12, LINE_ROOM = 256 };

static void note(sct_sheet *sheet, double x, double y, const char *words)
{
    sct_sheet_words(sheet, (sct_point){x, y}, LABEL, ANCHOR_START, ROLE_SOFT, words);
}

void sct_legend_ramp(sct_sheet *sheet, sct_point at, double field, const char *title)
{
    static const char *const EDGES[] = {"0", "0.25", "0.50", "0.75", "0.90", "1"};
    note(sheet, at.x, at.y, title);
    const double x = at.x + 2, y = at.y + 8, over = x + 5 * field + 6;
    for (int i = 0; i < 5; i++)
        sct_sheet_rect(sheet, (sct_point){x + i * field, y}, field, 9, (sct_role)(ROLE_U0 + i), ROLE_NONE, 0);
    sct_band_draw(sheet, (sct_point){over, y + 4.5}, (sct_point){over + field, y + 4.5}, 8, SENSE_COMPRESSION, 2);
    for (int i = 0; i < 6; i++)
        sct_sheet_words(sheet, (sct_point){x + i * field, y + 21}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, EDGES[i]);
    sct_sheet_words(sheet, (sct_point){over + 0.5 * field + 8, y + 21}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, "above 1");
}

double sct_legend_senses(sct_sheet *sheet, sct_point at, bool of_frame)
{
    static const struct {
        sct_sense sense;
        double x;
        const char *words;
    } KINDS[] = {{SENSE_TENSION, 0, "tension"}, {SENSE_COMPRESSION, 86, "compression"}, {SENSE_NONE, 197, "none"}};
    for (int i = 0; i < 3; i++) {
        const double x = at.x + KINDS[i].x, y = at.y - 4;
        sct_band_draw(sheet, (sct_point){x, y}, (sct_point){x + 26, y}, 8.5, KINDS[i].sense, 0.6);
        note(sheet, x + 31, at.y, KINDS[i].words);
    }
    if (!of_frame) return 0;
    const double y = at.y + 18;
    sct_band_draw(sheet, (sct_point){at.x, y - 4}, (sct_point){at.x + 26, y - 4}, 8.5, SENSE_BENT, 0.6);
    note(sheet, at.x + 31, y, "bending more than force");
    return 18;
}

/* ---- groups --------------------------------------------------------------------------------------------------------
 */

static double worst_of(const sct_result *r, int g)
{
    const int m = r->groups[g].worst_member;
    return m >= 0 && m < r->n_members ? r->members[m].utilisation : 0;
}

/* Which groups get a row: all, or the worst ones in the order of the model; returns how many. */
static int choose_groups(const sct_result *r, int rows[ROWS_MOST])
{
    int n = 0;
    if (r->n_groups <= ROWS_MOST) {
        for (int g = 0; g < r->n_groups; g++) rows[n++] = g;
        return n;
    }
    for (int g = 0; g < r->n_groups; g++) { /* rows[] holds the worst so far, the least bad leaves */
        if (n < ROWS_MOST) {
            rows[n++] = g;
            continue;
        }
        int least = 0;
        for (int i = 1; i < n; i++)
            if (worst_of(r, rows[i]) < worst_of(r, rows[least])) least = i;
        if (worst_of(r, g) <= worst_of(r, rows[least])) continue;
        for (int i = least; i + 1 < n; i++) rows[i] = rows[i + 1];
        rows[n - 1] = g;
    }
    return n;
}

static void cell(sct_sheet *sheet, double x, double y, sct_anchor anchor, double width, sct_role role, bool bold,
                 const char *words)
{
    char cut[LINE_ROOM];
    sct_words_fit(words, width, LABEL, bold, cut, sizeof cut);
    sct_sheet_runs(sheet, (sct_point){x, y}, LABEL, anchor, 0, &(sct_word_run){cut, role, bold}, 1);
}

static void rule(sct_sheet *sheet, double x, double y, double width, sct_role role, double weight)
{
    sct_sheet_line(sheet, (sct_point){x, y}, (sct_point){x + width, y}, role, weight);
}

static void group_row(sct_sheet *sheet, const sct_result *r, int g, double x, double y, double width)
{
    const sct_group_result *group = &r->groups[g];
    const double u = worst_of(r, g);
    sct_quantity words;
    cell(sheet, x, y, ANCHOR_START, 0.3 * width, ROLE_INK, false, group->name);
    if (group->section == NULL) sct_quantity_area(words, group->A, r->us_customary);
    cell(sheet, x + SECTION_AT * width, y, ANCHOR_START, 0.305 * width, ROLE_INK, false,
         group->section != NULL ? group->section : words);
    sct_quantity_number(words, group->n_members, 0);
    cell(sheet, x + PIECES_AT * width, y, ANCHOR_END, 60, ROLE_INK, false, words);
    if (group->n_members == 0) return;
    cell(sheet, x + WORST_AT * width, y, ANCHOR_END, 0.12 * width, ROLE_INK, false,
         r->members[group->worst_member].name);
    sct_quantity_utilisation(words, u);
    cell(sheet, x + width, y, ANCHOR_END, 60, u > 1 ? ROLE_OVER : ROLE_INK, true, words);
}

double sct_group_table(sct_sheet *sheet, const sct_result *r, sct_point at, double width)
{
    int rows[ROWS_MOST] = {0};
    const int n = choose_groups(r, rows);
    const double x = at.x;
    double y = at.y;
    sct_quantity words;
    cell(sheet, x, y, ANCHOR_START, 100, ROLE_SOFT, false, "group");
    cell(sheet, x + SECTION_AT * width, y, ANCHOR_START, 100, ROLE_SOFT, false, "section");
    cell(sheet, x + PIECES_AT * width, y, ANCHOR_END, 60, ROLE_SOFT, false, "pieces");
    cell(sheet, x + WORST_AT * width, y, ANCHOR_END, 60, ROLE_SOFT, false, "worst");
    cell(sheet, x + width, y, ANCHOR_END, 60, ROLE_SOFT, false, "util.");
    rule(sheet, x, y + 6, width, ROLE_INK, THIN);
    y += 3;
    for (int i = 0; i < n; i++) {
        group_row(sheet, r, rows[i], x, y += ROW, width);
        rule(sheet, x, y + 6, width, ROLE_FAINT, HAIR);
    }
    if (r->n_groups > n) {
        char more[64];
        sct_number_format(more, sizeof more, "and %d more groups, less used", r->n_groups - n);
        cell(sheet, x, y += ROW, ANCHOR_START, width, ROLE_SOFT, false, more);
    }
    y += ROW + 2;
    cell(sheet, x, y, ANCHOR_START, 60, ROLE_INK, true, "all");
    sct_quantity_number(words, r->n_members, 0);
    cell(sheet, x + PIECES_AT * width, y, ANCHOR_END, 60, ROLE_INK, true, words);
    sct_quantity_mass(words, r->mass, r->us_customary);
    cell(sheet, x + width, y, ANCHOR_END, 0.265 * width, ROLE_INK, true, words);
    return y - at.y;
}

static void ticks(sct_sheet *sheet, const sct_result *r, int g, double x, double y, double unit, double most)
{
    for (int step = 0; step <= 5; step++) {
        const sct_role role = step < 5 ? (sct_role)(ROLE_U0 + step) : ROLE_OVER;
        bool open = false;
        for (int m = 0; m < r->n_members; m++) {
            if (r->members[m].group != g || sct_ramp(r->members[m].utilisation) != role) continue;
            const double at = x + unit * fmin(r->members[m].utilisation, most);
            const double above = role == ROLE_OVER ? 3 : 0; /* longer above 1: shape, not colour alone */
            if (!open) sct_sheet_path_open(sheet);
            open = true;
            sct_sheet_stroke(sheet, (sct_point){at, y - 10 - above}, (sct_point){at, y + 2});
        }
        if (open) sct_sheet_path_close(sheet, role, MEDIUM);
    }
}

double sct_group_strip(sct_sheet *sheet, const sct_result *r, sct_point at, double width)
{
    static const struct {
        double u;
        const char *words;
    } MARKS[] = {{0, "0"}, {0.25, "0.25"}, {0.5, "0.50"}, {0.75, "0.75"}, {0.9, NULL}, {1, "1"}};
    int rows[ROWS_MOST] = {0};
    const int n = choose_groups(r, rows);
    /* Above 1 the scale goes on to the largest, at most to 2: what lies beyond stands at its end. */
    const double most = r->utilisation > 1 ? fmin(2, fmax(1.1, r->utilisation)) : 1;
    const double x = at.x + 0.335 * width, unit = 0.665 * width / most, low = at.y + 16 + STRIP_ROW * n + 4;
    note(sheet, at.x, at.y,
         r->n_groups > n ? "Every member of these groups on the utilisation scale"
                         : "Every member on the utilisation scale");
    for (size_t i = 0; i < sizeof MARKS / sizeof *MARKS; i++) {
        const double u = MARKS[i].u;
        sct_sheet_line(sheet, (sct_point){x + unit * u, at.y + 16}, (sct_point){x + unit * u, low},
                       u == 1 ? ROLE_INK : ROLE_FAINT, u == 1 ? THIN : HAIR);
        if (MARKS[i].words != NULL)
            sct_sheet_words(sheet, (sct_point){x + unit * u, low + 12}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT,
                            MARKS[i].words);
    }
    if (most > 1) {
        sct_quantity words;
        sct_quantity_number(words, most, 1);
        if (unit * (most - 1) > 30)
            sct_sheet_words(sheet, (sct_point){x + unit * most + 4, low + 12}, LABEL, ANCHOR_END, ROLE_SOFT,
                            r->utilisation > 2 ? "2 and more" : words);
    }
    for (int i = 0; i < n; i++) {
        const double y = at.y + 16 + STRIP_ROW * i + 16;
        cell(sheet, at.x, y, ANCHOR_START, 0.32 * width, ROLE_INK, false, r->groups[rows[i]].name);
        ticks(sheet, r, rows[i], x, y, unit, most);
    }
    return low + 12 - at.y;
}

/* ---- title block ---------------------------------------------------------------------------------------------------
 */

/* One line of at most `width` from *rest, which moves on. */
static void take_line(const char **rest, double width, char line[LINE_ROOM])
{
    size_t n = sct_words_line(*rest, width, LABEL);
    if (n > LINE_ROOM - 1) n = LINE_ROOM - 1;
    memcpy(line, *rest, n);
    line[n] = '\0';
    *rest += n + ((*rest)[n] == ' ');
}

static void caution(sct_sheet *sheet, double x, double y, double width)
{
    static const char CAUTION[] = SCT_CAUTION;
    _Static_assert(sizeof CAUTION <= LINE_ROOM, "the caution fits a line buffer");
    char first[LINE_ROOM], line[LINE_ROOM];
    const char *stop = strchr(CAUTION, '.'), *rest = stop + 2; /* its first sentence stands out */
    const size_t n = (size_t)(stop + 1 - CAUTION);
    memcpy(first, CAUTION, n);
    first[n] = '\0';
    take_line(&rest, width - sct_words_width(first, LABEL, true) - 4, line);
    const sct_word_run runs[2] = {{first, ROLE_INK, true}, {line, ROLE_SOFT, false}};
    sct_sheet_runs(sheet, (sct_point){x, y}, LABEL, ANCHOR_START, 0, runs, 2);
    for (int i = 1; *rest != '\0'; i++) {
        take_line(&rest, width, line);
        note(sheet, x, y + 15 * i, line);
    }
}

void sct_title_block(sct_sheet *sheet, double y, double width, const char *title, const char *drawn,
                     const char *const notes[2])
{
    const double second = MARGIN + 0.24 * width, third = second + NOTES, first_width = second - MARGIN - 16;
    const double cells[2] = {second, third};
    double below = y + 32;
    rule(sheet, MARGIN, y, width - 2 * MARGIN, ROLE_INK, THIN);
    if (sct_words_width(title, LABEL, true) <= first_width) {
        cell(sheet, MARGIN, y + 17, ANCHOR_START, first_width, ROLE_INK, true, title);
    } else { /* in two lines, the second one cut if need be */
        char line[LINE_ROOM];
        take_line(&title, first_width / 1.1, line);
        cell(sheet, MARGIN, y + 17, ANCHOR_START, first_width, ROLE_INK, true, line);
        cell(sheet, MARGIN, y + 32, ANCHOR_START, first_width, ROLE_INK, true, title);
        below = y + 47;
    }
    cell(sheet, MARGIN, below, ANCHOR_START, first_width, ROLE_SOFT, false, drawn);
    for (int i = 0; i < 2; i++)
        sct_sheet_line(sheet, (sct_point){cells[i] - 10, y + 6}, (sct_point){cells[i] - 10, y + 46}, ROLE_FAINT, HAIR);
    for (int i = 0; i < 2; i++)
        cell(sheet, second, y + 17 + 15 * i, ANCHOR_START, NOTES - 16, ROLE_SOFT, false, notes[i]);
    caution(sheet, third, y + 17, fmin(width - MARGIN - third, CAUTION_MOST));
}

/* drawing.svg: puts heading, figure, tables, legend and title block on one sheet. */
#include "drawing.h"

#include <math.h>

#include "base/number.h"
#include "drawing_space.h"
#include "ends.h"
#include "figures.h"
#include "finding.h"
#include "held.h"
#include "legend.h"
#include "marks.h"
#include "quantity.h"
#include "scene.h"
#include "symbols.h"

static const double REPORT_WIDTH = 800, WIDE = 1150;
static const double HEIGHT_FIGURE = 420, HEIGHT_TALL = 560;
enum { LINES_MOST = 3 };

typedef struct words_of_sheet { /* everything written that is not in the figure */
    sct_text heading, details, left;
    char loads[192], small_loads[2 * SCT_QUANTITY_ROOM + 64], depths[96], lengths[128];
} words_of_sheet;

/* ---- layout --------------------------------------------------------------------------------------------------------
 */

static void measure(const sct_scene *scene, double *across, double *down)
{
    sct_point low = {INFINITY, INFINITY}, high = {-INFINITY, -INFINITY};
    for (int j = 0; j < scene->result->n_joints; j++) {
        low = (sct_point){fmin(low.x, scene->at[j].x), fmin(low.y, scene->at[j].y)};
        high = (sct_point){fmax(high.x, scene->at[j].x), fmax(high.y, scene->at[j].y)};
    }
    *across = fmax(high.x - low.x, 1e-9);
    *down = fmax(high.y - low.y, 1e-9);
}

static sct_layout layout_for(double width, bool is_beside)
{
    sct_layout l = {.width = width, .is_beside = is_beside};
    if (is_beside) {
        l.corner = (sct_point){SHEET_MARGIN + 60, 0};
        l.figure_width = width - PANEL - PANEL_GAP - SHEET_MARGIN - 60 - 100;
        l.figure_height = HEIGHT_TALL;
    } else {
        l.corner = (sct_point){SHEET_MARGIN + 40, 0};
        l.figure_width = width - 124;
        l.figure_height = HEIGHT_FIGURE;
    }
    return l;
}

/* The report's width where the drawing is as complete on it as on a wide sheet. */
static sct_layout choose_layout(const sct_scene *scene)
{
    double across, down;
    measure(scene, &across, &down);
    const bool in_space = scene->result->dimensions == 3;
    if (down > (in_space ? 1.05 : 1.2) * across) return layout_for(REPORT_WIDTH, true);
    const sct_layout report = layout_for(REPORT_WIDTH, false), wide = layout_for(WIDE, false);
    const double at_report = fmin(report.figure_width / across, report.figure_height / down);
    const double at_wide = fmin(wide.figure_width / across, wide.figure_height / down);
    return sct_scene_detail(scene, at_wide) < sct_scene_detail(scene, at_report) || across > 8 * down ? wide : report;
}

/* ---- words ---------------------------------------------------------------------------------------------------------
 */

static void write_notes(const sct_scene *scene, words_of_sheet *w)
{
    const sct_result *r = scene->result;
    const bool us = r->us_customary;
    sct_quantity mass;
    sct_quantity_mass(mass, r->mass, us);
    if (scene->depth_factor == 0)
        sct_number_format(w->depths, sizeof w->depths, "Depths not to scale");
    else if (scene->depth_factor == 1)
        sct_number_format(w->depths, sizeof w->depths, "Depths to scale");
    else
        sct_number_format(w->depths, sizeof w->depths, "Depths drawn \xC3\x97%.2g", scene->depth_factor);
    if (r->dimensions == 3)
        sct_space_size(r, w->lengths, sizeof w->lengths);
    else
        sct_number_format(w->lengths, sizeof w->lengths, "%s, lengths in %s", mass, sct_length_unit_name(us));
    if (r->dimensions == 3)
        sct_text_format(&w->left, "Seen from 16\xC2\xB0 above; z is drawn at %.2f of the scale. ", cos(scene->tilt));
    if (scene->is_widened) sct_text_add(&w->left, "Thin members widened. ");
    if (scene->detail != DETAIL_FULL)
        sct_text_format(&w->left, "Labelled: members above %s, the governing one of each group. ",
                        scene->detail == DETAIL_SELECTIVE ? "0.90" : "1 (20 worst)");
    sct_ends_key(scene, &w->left);
    sct_held_key(scene, &w->left);
    if (sct_figure_has_views(r))
        sct_text_add(&w->left, "In the flat views the most used of members that lie behind one another is in front. ");
    sct_marks_left(scene, &w->left);
}

/* "loads (full), kN and kN/m", and what of them is left out. */
static void write_load_notes(const sct_scene *scene, const sct_loads_drawn *loads, words_of_sheet *w)
{
    const bool us = scene->result->us_customary;
    const char *unit = us ? "kip" : "kN", *line_unit = us ? "kip/ft" : "kN/m";
    sct_quantity force, line;
    char name[128];
    if (!loads->any) return;
    sct_figure_combination(scene, name);
    sct_number_format(w->loads, sizeof w->loads, "loads (%s), %s%s", name, unit,
                      loads->without_weight ? ", own weight not drawn" : "");
    sct_quantity_force(force, loads->least, us);
    sct_quantity_line_load(line, loads->least_line, us);
    if (loads->least > 0 && loads->least_line > 0)
        sct_number_format(w->small_loads, sizeof w->small_loads, "below %s%s%s and %s%s%s not drawn", force,
                          "\xE2\x80\xAF", unit, line, "\xE2\x80\xAF", line_unit);
    else if (loads->least > 0 || loads->least_line > 0)
        sct_number_format(w->small_loads, sizeof w->small_loads, "below %s%s%s not drawn",
                          loads->least > 0 ? force : line, "\xE2\x80\xAF", loads->least > 0 ? unit : line_unit);
}

/* Words in at most LINES_MOST lines, the last one cut if need be; returns the baseline of the last. */
static double put_lines(sct_sheet *page, double y, double width, double size, const char *words)
{
    for (int i = 0; i < LINES_MOST && *words != '\0'; i++) {
        char line[512];
        const size_t n = sct_words_line(words, width, size);
        const bool is_whole = i < LINES_MOST - 1 && n < sizeof line;
        if (is_whole)
            sct_number_format(line, sizeof line, "%.*s", (int)n, words);
        else
            sct_words_fit(words, width, size, false, line, sizeof line);
        if (i > 0) y += size + 4;
        sct_sheet_words(page, (sct_point){SHEET_MARGIN, y}, size, ANCHOR_START, ROLE_SOFT, line);
        words += n + (words[n] == ' ');
    }
    return y;
}

/* ---- sheet ---------------------------------------------------------------------------------------------------------
 */

static void ramp_title(const sct_result *r, char *out, size_t room)
{
    if (r->n_combinations > 1)
        sct_number_format(out, room, "Utilisation, worst of %d combinations", r->n_combinations);
    else
        sct_number_format(out, room, "Utilisation");
}

/* One or two lines; returns their height. */
static double put_load_key(sct_sheet *page, sct_point at, double width, const words_of_sheet *w)
{
    char cut[200];
    if (w->loads[0] == '\0') return 0;
    sct_arrow(page, (sct_point){at.x + 13, at.y - 13}, (sct_point){at.x + 13, at.y + 2}, ROLE_U2, MEDIUM);
    sct_words_fit(w->loads, width - 31, LABEL, false, cut, sizeof cut);
    sct_sheet_words(page, (sct_point){at.x + 31, at.y}, LABEL, ANCHOR_START, ROLE_SOFT, cut);
    if (w->small_loads[0] == '\0') return 24;
    sct_sheet_words(page, (sct_point){at.x + 31, at.y + 15}, LABEL, ANCHOR_START, ROLE_SOFT, w->small_loads);
    return 39;
}

/* Legend and scale bar in a row under the drawing; returns the bottom. */
static double put_legend_below(const sct_scene *scene, const sct_layout *l, sct_sheet *page, double y,
                               const words_of_sheet *w)
{
    char title[64];
    const bool us = scene->result->us_customary;
    ramp_title(scene->result, title, sizeof title);
    sct_legend_ramp(page, (sct_point){SHEET_MARGIN, y}, 44, title);
    const double middle = SHEET_MARGIN + 310;
    sct_sheet_words(page, (sct_point){middle, y}, LABEL, ANCHOR_START, ROLE_SOFT, "Force in that combination");
    const double more = sct_legend_senses(page, (sct_point){middle, y + 17}, scene->result->has_bent);
    const double key =
        more + put_load_key(page, (sct_point){middle, y + 37 + more}, l->width - SHEET_MARGIN - middle - 180, w);
    const double bar = sct_scale_bar(NULL, (sct_point){0, 0}, scene->scale, us);
    sct_scale_bar(page, (sct_point){l->width - SHEET_MARGIN - 14 - bar, y + 9}, scene->scale, us);
    return y + (key > 24 ? 56 + more : 41);
}

/* Tables, legend and scale bar stacked at the right; returns the bottom. */
static double put_panel(const sct_scene *scene, const sct_layout *l, sct_sheet *page, double y, const words_of_sheet *w)
{
    const sct_result *r = scene->result;
    const double x = l->width - SHEET_MARGIN - PANEL;
    char title[64];
    ramp_title(r, title, sizeof title);
    y += 16;
    y += sct_group_table(page, r, (sct_point){x, y}, PANEL) + 40;
    y += sct_group_strip(page, r, (sct_point){x, y}, PANEL) + 40;
    sct_legend_ramp(page, (sct_point){x, y}, 41, title);
    y += 58;
    y += sct_legend_senses(page, (sct_point){x, y}, r->has_bent);
    y += put_load_key(page, (sct_point){x, y + 24}, PANEL, w);
    sct_scale_bar(page, (sct_point){x + 4, y + 30}, scene->scale, r->us_customary);
    return y + 40;
}

/* The group table and the strip side by side under the drawing; returns the bottom. */
static double put_tables_below(const sct_scene *scene, const sct_layout *l, sct_sheet *page, double y)
{
    const double half = 0.5 * (l->width - 2 * SHEET_MARGIN - 40);
    const double table = sct_group_table(page, scene->result, (sct_point){SHEET_MARGIN, y}, half);
    const double strip = sct_group_strip(page, scene->result, (sct_point){SHEET_MARGIN + half + 40, y}, half);
    return y + fmax(table, strip);
}

static double put_heading(sct_sheet *page, const sct_layout *l, const words_of_sheet *w)
{
    char cut[256];
    const double width = l->width - 2 * SHEET_MARGIN;
    sct_words_fit(w->heading.data != NULL ? w->heading.data : "", width, HEADING, true, cut, sizeof cut);
    sct_sheet_runs(page, (sct_point){SHEET_MARGIN, 28}, HEADING, ANCHOR_START, 0, &(sct_word_run){cut, ROLE_INK, true},
                   1);
    return put_lines(page, 47, width, TEXT, w->details.data != NULL ? w->details.data : "") + 15;
}

static sct_status put_page(sct_scene *scene, const sct_layout *l, sct_sheet *page, words_of_sheet *w, double *height)
{
    const sct_result *r = scene->result;
    sct_loads_drawn loads;
    sct_finding_heading(r, &w->heading);
    sct_finding_details(r, &w->details);
    const double top = put_heading(page, l, w);
    double y = top + 6;
    sct_status status = sct_figure_utilisations(scene, l, page, &y, &loads);
    if (status != SCT_OK) return status;
    write_notes(scene, w);
    write_load_notes(scene, &loads, w);
    if (scene->options.draw_deflected) status = sct_figure_deflected(scene, l, page, &y);
    if (status == SCT_OK) status = sct_figure_diagrams(scene, l, page, &y);
    if (status != SCT_OK) return status;
    if (l->is_beside)
        y = fmax(y, put_panel(scene, l, page, top, w));
    else if (r->dimensions == 3 || scene->detail == DETAIL_OVERVIEW)
        y = put_tables_below(scene, l, page, y + 36);
    if (sct_figure_has_views(r)) status = sct_figure_views(scene, l, page, &y);
    if (status != SCT_OK) return status;
    if (w->left.data != NULL && w->left.size > 0)
        y = put_lines(page, y + 26, l->width - 2 * SHEET_MARGIN, LABEL, w->left.data);
    if (!l->is_beside) y = put_legend_below(scene, l, page, y + 28, w);
    y = floor(y + 14);
    const char *const notes[2] = {w->depths, w->lengths};
    sct_title_block(page, y, l->width,
                    r->title[0] != '\0' ? r->title
                    : r->has_bent       ? "Frame without title"
                                        : "Truss without title",
                    sct_finding_task(r), notes);
    *height = y + SCT_TITLE_BLOCK;
    return SCT_OK;
}

/* A prefix for ids that differs between drawings of different titles, views and options (FNV-1a). */
static void write_id(const sct_scene *scene, char out[16])
{
    unsigned long h = 2166136261u;
    for (const char *p = scene->result->title; *p != '\0'; p++) h = ((h ^ (unsigned char)*p) * 16777619u) & 0xFFFFFFFFu;
    const int more[4] = {scene->result->n_members, scene->options.combination, scene->options.draw_loads,
                         scene->options.draw_deflected};
    for (int i = 0; i < 4; i++) h = ((h ^ (unsigned)more[i]) * 16777619u) & 0xFFFFFFFFu;
    const int diagrams[3] = {(int)scene->options.draw_moment, (int)scene->options.draw_shear,
                             (int)scene->options.draw_axial};
    for (int i = 0; i < 3; i++)
        if (diagrams[i] != 0) h = ((h ^ (unsigned)(4 * i + diagrams[i])) * 16777619u) & 0xFFFFFFFFu;
    sct_number_format(out, 16, "sc%08lx", h);
}

static void write_description(const sct_scene *scene, const words_of_sheet *w, sct_text *out)
{
    const sct_result *r = scene->result;
    char size[160];
    sct_space_size(r, size, sizeof size);
    sct_text_format(out, "%s of a %s, %s, %d members in %d groups. ",
                    r->dimensions == 3 ? "Axonometric view" : "Elevation", r->has_bent ? "frame" : "truss", size,
                    r->n_members, r->n_groups);
    sct_text_format(out, "%s. %s", w->heading.data != NULL ? w->heading.data : "",
                    w->details.data != NULL ? w->details.data : "");
}

static sct_status write_sheet(sct_scene *scene, const sct_layout *l, sct_text *out)
{
    words_of_sheet w = {0};
    sct_sheet page = {0};
    sct_text title = {0}, description = {0};
    double height = 0;
    char id[16];
    sct_status status = put_page(scene, l, &page, &w, &height);
    sct_text_format(&title, "%s: utilisation of each member",
                    scene->result->title[0] != '\0' ? scene->result->title
                    : scene->result->has_bent       ? "Frame"
                                                    : "Truss");
    write_description(scene, &w, &description);
    write_id(scene, id);
    if (title.failed || description.failed || w.heading.failed || w.details.failed || w.left.failed || page.body.failed)
        status = SCT_NO_MEMORY;
    if (status == SCT_OK) sct_sheet_write(&page, l->width, height, id, title.data, description.data, out);
    sct_text_free(&w.heading);
    sct_text_free(&w.details);
    sct_text_free(&w.left);
    sct_text_free(&title);
    sct_text_free(&description);
    sct_text_free(&page.body);
    return out->failed ? SCT_NO_MEMORY : status;
}

sct_status sct_drawing_svg(const sct_result *result, const sct_write_options *options, sct_text *out)
{
    sct_scene scene;
    sct_status status = sct_scene_open(&scene, result, options);
    if (status == SCT_OK) {
        if (result->dimensions == 3)
            sct_space_view(&scene, 420, HEIGHT_TALL);
        else
            sct_project(result, 0, 0, scene.at, scene.away);
        const sct_layout l = choose_layout(&scene);
        sct_scene_lay(&scene, l.corner, l.figure_width, l.figure_height);
        status = write_sheet(&scene, &l, out);
    }
    sct_scene_close(&scene);
    return status;
}

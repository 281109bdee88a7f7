/* drawing.svg: puts heading, figure, tables, legend and title block on one sheet. */
#include "drawing.h"

#include <math.h>

#include "base/number.h"
#include "deflected.h"
#include "drawing_plane.h"
#include "drawing_space.h"
#include "finding.h"
#include "legend.h"
#include "loads.h"
#include "marks.h"
#include "quantity.h"
#include "scene.h"
#include "symbols.h"

static const double MARGIN = 20, REPORT_WIDTH = 800, WIDE = 1150, PANEL = 292, PANEL_GAP = 30;
static const double HEIGHT_FIGURE = 420, HEIGHT_TALL = 560;
static const double ABOUT = 110; /* [u] room for labels about the joints */
enum { LINES_MOST = 3 };

/* Where things go on the sheet. */
typedef struct layout {
    double width;
    bool is_beside;   /* tables and legend at the right of a tall figure, not below it */
    sct_point corner; /* of the joints; y is the figure's own */
    double figure_width, figure_height;
} layout;

typedef struct words_of_sheet { /* everything written that is not in the figure */
    sct_text heading, details, left;
    char loads[192], small_loads[SCT_QUANTITY_ROOM + 32], deflected[192], depths[96], lengths[128];
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

static layout layout_for(double width, bool is_beside)
{
    layout l = {.width = width, .is_beside = is_beside};
    if (is_beside) {
        l.corner = (sct_point){MARGIN + 60, 0};
        l.figure_width = width - PANEL - PANEL_GAP - MARGIN - 60 - 100;
        l.figure_height = HEIGHT_TALL;
    } else {
        l.corner = (sct_point){MARGIN + 40, 0};
        l.figure_width = width - 124;
        l.figure_height = HEIGHT_FIGURE;
    }
    return l;
}

/* The report's width where the drawing is as complete on it as on a wide sheet. */
static layout choose_layout(const sct_scene *scene)
{
    double across, down;
    measure(scene, &across, &down);
    const bool in_space = scene->result->dimensions == 3;
    if (down > (in_space ? 1.05 : 1.2) * across) return layout_for(REPORT_WIDTH, true);
    const layout report = layout_for(REPORT_WIDTH, false), wide = layout_for(WIDE, false);
    const double at_report = fmin(report.figure_width / across, report.figure_height / down);
    const double at_wide = fmin(wide.figure_width / across, wide.figure_height / down);
    return sct_scene_detail(scene, at_wide) < sct_scene_detail(scene, at_report) || across > 8 * down ? wide : report;
}

/* ---- figure --------------------------------------------------------------------------------------------------------
 */

static sct_status new_labels(sct_scene *scene, const layout *l)
{
    sct_labels_free(scene->labels);
    const double right = l->is_beside ? l->width - MARGIN - PANEL - PANEL_GAP - 50 : l->width - MARGIN - 22;
    scene->labels =
        sct_labels_new((sct_point){MARGIN, scene->low.y - ABOUT}, (sct_point){right, scene->high.y + ABOUT});
    return scene->labels == NULL ? SCT_NO_MEMORY : SCT_OK;
}

/* Draws the truss with all its labels into scene->sheet; *least: the smallest load drawn. */
static sct_status draw_figure(sct_scene *scene, const layout *l, double *least)
{
    const sct_result *r = scene->result;
    const bool in_space = r->dimensions == 3;
    sct_status status = new_labels(scene, l);
    if (status != SCT_OK) return status;
    sct_marks_block(scene);
    for (int j = 0; j < r->n_joints; j++) sct_support_block(scene, j);
    for (int j = 0; j < r->n_joints && in_space; j++) sct_support_draw(scene, j);
    if (in_space)
        status = sct_space_members(scene);
    else
        sct_plane_members(scene);
    if (status != SCT_OK) return status;
    for (int j = 0; j < r->n_joints && !in_space; j++) sct_support_draw(scene, j);
    for (int j = 0; j < r->n_joints; j++)
        sct_sheet_circle(&scene->sheet, scene->at[j], scene->ring, ROLE_PAGE, ROLE_INK, THIN);
    *least = scene->options.draw_loads ? sct_loads_draw(scene) : NAN;
    if (in_space) sct_space_axes(scene);
    sct_marks_members(scene);
    sct_marks_joints(scene);
    sct_marks_leaders(scene);
    if (in_space) {
        sct_space_levels(scene);
    } else {
        sct_plane_slope(scene);
        sct_plane_dimensions(scene);
    }
    return sct_labels_failed(scene->labels) ? SCT_NO_MEMORY : SCT_OK;
}

/* Puts scene->sheet on the page with its top at *y, and moves *y to its bottom. */
static void put_figure(sct_scene *scene, sct_sheet *page, double *y)
{
    sct_point corner, opposite;
    sct_labels_bounds(scene->labels, &corner, &opposite);
    sct_sheet_put(page, &scene->sheet, (sct_point){0, floor(*y - corner.y + 0.5)});
    sct_text_free(&scene->sheet.body);
    *y += opposite.y - corner.y;
}

static sct_status put_deflected(sct_scene *scene, const layout *l, sct_sheet *page, double *y, const char *words)
{
    const double factor = sct_deflected_factor(scene);
    if (factor == 0) return SCT_OK;
    const sct_status status = new_labels(scene, l);
    if (status != SCT_OK) return status;
    sct_sheet_words(page, (sct_point){MARGIN, *y + 34}, TEXT, ANCHOR_START, ROLE_SOFT, words);
    sct_deflected_draw(scene, factor);
    *y += 50;
    put_figure(scene, page, y);
    return sct_labels_failed(scene->labels) ? SCT_NO_MEMORY : SCT_OK;
}

/* ---- words ---------------------------------------------------------------------------------------------------------
 */

/* The name of the combination whose loads and shape are shown, cut to a line. */
static void chosen_combination(const sct_scene *scene, char out[128])
{
    const sct_result *r = scene->result;
    sct_words_fit(r->n_combinations > 0 ? r->combinations[scene->options.combination] : "", 300, LABEL, false, out,
                  128);
}

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
    sct_marks_left(scene, &w->left);
}

static void write_option_notes(const sct_scene *scene, double least, words_of_sheet *w)
{
    const char *unit = scene->result->us_customary ? "kip" : "kN";
    sct_quantity words;
    char name[128];
    chosen_combination(scene, name);
    if (!isnan(least)) sct_number_format(w->loads, sizeof w->loads, "loads (%s), %s", name, unit);
    if (least > 0) {
        sct_quantity_force(words, least, scene->result->us_customary);
        sct_number_format(w->small_loads, sizeof w->small_loads, "below %s%s%s not drawn", words, "\xE2\x80\xAF", unit);
    }
    const double factor = scene->options.draw_deflected ? sct_deflected_factor(scene) : 0;
    if (factor > 0)
        sct_number_format(w->deflected, sizeof w->deflected, "Deflected shape (%s), displacements \xC3\x97%.10g", name,
                          factor);
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
        sct_sheet_words(page, (sct_point){MARGIN, y}, size, ANCHOR_START, ROLE_SOFT, line);
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
static double put_legend_below(const sct_scene *scene, const layout *l, sct_sheet *page, double y,
                               const words_of_sheet *w)
{
    char title[64];
    const bool us = scene->result->us_customary;
    ramp_title(scene->result, title, sizeof title);
    sct_legend_ramp(page, (sct_point){MARGIN, y}, 44, title);
    const double middle = MARGIN + 310;
    sct_sheet_words(page, (sct_point){middle, y}, LABEL, ANCHOR_START, ROLE_SOFT, "Force in that combination");
    sct_legend_senses(page, (sct_point){middle, y + 17});
    const double key = put_load_key(page, (sct_point){middle, y + 37}, l->width - MARGIN - middle - 180, w);
    const double bar = sct_scale_bar(NULL, (sct_point){0, 0}, scene->scale, us);
    sct_scale_bar(page, (sct_point){l->width - MARGIN - 14 - bar, y + 9}, scene->scale, us);
    return y + (key > 24 ? 56 : 41);
}

/* Tables, legend and scale bar stacked at the right; returns the bottom. */
static double put_panel(const sct_scene *scene, const layout *l, sct_sheet *page, double y, const words_of_sheet *w)
{
    const sct_result *r = scene->result;
    const double x = l->width - MARGIN - PANEL;
    char title[64];
    ramp_title(r, title, sizeof title);
    y += 16;
    y += sct_group_table(page, r, (sct_point){x, y}, PANEL) + 40;
    y += sct_group_strip(page, r, (sct_point){x, y}, PANEL) + 40;
    sct_legend_ramp(page, (sct_point){x, y}, 41, title);
    sct_legend_senses(page, (sct_point){x, y += 58});
    y += put_load_key(page, (sct_point){x, y + 24}, PANEL, w);
    sct_scale_bar(page, (sct_point){x + 4, y + 30}, scene->scale, r->us_customary);
    return y + 40;
}

/* The group table and the strip side by side under the drawing; returns the bottom. */
static double put_tables_below(const sct_scene *scene, const layout *l, sct_sheet *page, double y)
{
    const double half = 0.5 * (l->width - 2 * MARGIN - 40);
    const double table = sct_group_table(page, scene->result, (sct_point){MARGIN, y}, half);
    const double strip = sct_group_strip(page, scene->result, (sct_point){MARGIN + half + 40, y}, half);
    return y + fmax(table, strip);
}

static double put_heading(sct_sheet *page, const layout *l, const words_of_sheet *w)
{
    char cut[256];
    const double width = l->width - 2 * MARGIN;
    sct_words_fit(w->heading.data != NULL ? w->heading.data : "", width, HEADING, true, cut, sizeof cut);
    sct_sheet_runs(page, (sct_point){MARGIN, 28}, HEADING, ANCHOR_START, 0, &(sct_run){cut, ROLE_INK, true}, 1);
    return put_lines(page, 47, width, TEXT, w->details.data != NULL ? w->details.data : "") + 15;
}

static sct_status put_page(sct_scene *scene, const layout *l, sct_sheet *page, words_of_sheet *w, double *height)
{
    const sct_result *r = scene->result;
    double least = NAN;
    sct_finding_heading(r, &w->heading);
    sct_finding_details(r, &w->details);
    const double top = put_heading(page, l, w);
    sct_status status = draw_figure(scene, l, &least);
    if (status != SCT_OK) return status;
    write_notes(scene, w);
    write_option_notes(scene, least, w);
    double y = top + 6;
    put_figure(scene, page, &y);
    if (w->deflected[0] != '\0') status = put_deflected(scene, l, page, &y, w->deflected);
    if (status != SCT_OK) return status;
    if (l->is_beside)
        y = fmax(y, put_panel(scene, l, page, top, w));
    else if (r->dimensions == 3 || scene->detail == DETAIL_OVERVIEW)
        y = put_tables_below(scene, l, page, y + 36);
    if (w->left.data != NULL && w->left.size > 0)
        y = put_lines(page, y + 26, l->width - 2 * MARGIN, LABEL, w->left.data);
    if (!l->is_beside) y = put_legend_below(scene, l, page, y + 28, w);
    y = floor(y + 14);
    const char *const notes[2] = {w->depths, w->lengths};
    sct_title_block(page, y, l->width, r->title[0] != '\0' ? r->title : "Truss without title", sct_finding_task(r),
                    notes);
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
    sct_number_format(out, 16, "sc%08lx", h);
}

static void write_description(const sct_scene *scene, const words_of_sheet *w, sct_text *out)
{
    const sct_result *r = scene->result;
    char size[160];
    sct_space_size(r, size, sizeof size);
    sct_text_format(out, "%s of a truss, %s, %d members in %d groups. ",
                    r->dimensions == 3 ? "Axonometric view" : "Elevation", size, r->n_members, r->n_groups);
    sct_text_format(out, "%s. %s", w->heading.data != NULL ? w->heading.data : "",
                    w->details.data != NULL ? w->details.data : "");
}

static sct_status write_sheet(sct_scene *scene, const layout *l, sct_text *out)
{
    words_of_sheet w = {0};
    sct_sheet page = {0};
    sct_text title = {0}, description = {0};
    double height = 0;
    char id[16];
    sct_status status = put_page(scene, l, &page, &w, &height);
    sct_text_format(&title, "%s: utilisation of each member",
                    scene->result->title[0] != '\0' ? scene->result->title : "Truss");
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
        const layout l = choose_layout(&scene);
        sct_scene_lay(&scene, l.corner, l.figure_width, l.figure_height);
        status = write_sheet(&scene, &l, out);
    }
    sct_scene_close(&scene);
    return status;
}

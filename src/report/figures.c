#include "figures.h"

#include <math.h>

#include "base/number.h"
#include "deflected.h"
#include "diagram.h"
#include "drawing_plane.h"
#include "drawing_space.h"
#include "ends.h"
#include "held.h"
#include "marks.h"
#include "symbols.h"

static const double ABOUT = 110; /* [u] room for labels about the joints */
enum { HEADING_DOWN = 34, HEADING_HEIGHT = 50 };

void sct_figure_combination(const sct_scene *scene, char out[128])
{
    const sct_result *r = scene->result;
    sct_words_fit(r->n_combinations > 0 ? r->combinations[scene->options.combination] : "", 300, LABEL, false, out,
                  128);
}

static sct_status new_labels(sct_scene *scene, const sct_layout *l)
{
    sct_labels_free(scene->labels);
    const double right = l->is_beside ? l->width - SHEET_MARGIN - PANEL - PANEL_GAP - 50 : l->width - SHEET_MARGIN - 22;
    scene->labels =
        sct_labels_new((sct_point){SHEET_MARGIN, scene->low.y - ABOUT}, (sct_point){right, scene->high.y + ABOUT});
    return scene->labels == NULL ? SCT_NO_MEMORY : SCT_OK;
}

/* Puts scene->sheet on the page. */
static sct_status put(sct_scene *scene, sct_sheet *page, double *y)
{
    sct_point corner, opposite;
    sct_labels_bounds(scene->labels, &corner, &opposite);
    sct_sheet_put(page, &scene->sheet, (sct_point){0, floor(*y - corner.y + 0.5)});
    sct_text_free(&scene->sheet.body);
    *y += opposite.y - corner.y;
    return sct_labels_failed(scene->labels) ? SCT_NO_MEMORY : SCT_OK;
}

static sct_status draw_members(sct_scene *scene)
{
    const sct_result *r = scene->result;
    const bool in_space = r->dimensions == 3;
    sct_status status = SCT_OK;
    for (int j = 0; j < r->n_joints; j++) sct_support_block(scene, j);
    for (int j = 0; j < r->n_joints && in_space; j++) sct_support_draw(scene, j);
    if (in_space)
        status = sct_space_members(scene);
    else
        sct_plane_members(scene);
    for (int j = 0; j < r->n_joints && !in_space; j++) sct_support_draw(scene, j);
    sct_ends_draw(scene);
    return status;
}

sct_status sct_figure_utilisations(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y,
                                   sct_loads_drawn *loads)
{
    const sct_result *r = scene->result;
    const bool in_space = r->dimensions == 3;
    *loads = (sct_loads_drawn){0};
    sct_status status = new_labels(scene, l);
    if (status != SCT_OK) return status;
    sct_marks_block(scene);
    sct_ends_block(scene);
    status = draw_members(scene);
    if (status == SCT_OK && scene->options.draw_loads) status = sct_loads_draw(scene, loads);
    if (status != SCT_OK) return status;
    if (in_space) sct_space_axes(scene);
    sct_marks_members(scene);
    sct_marks_joints(scene);
    sct_ends_words(scene);
    for (int j = 0; j < r->n_joints; j++) sct_springs_words(scene, j);
    sct_marks_leaders(scene);
    if (in_space) {
        sct_space_levels(scene);
    } else {
        sct_plane_slope(scene);
        sct_plane_dimensions(scene);
    }
    return put(scene, page, y);
}

static void head(sct_sheet *page, const sct_layout *l, double *y, const char *words)
{
    char cut[320];
    sct_words_fit(words, l->width - 2 * SHEET_MARGIN, TEXT, false, cut, sizeof cut);
    sct_sheet_words(page, (sct_point){SHEET_MARGIN, *y + HEADING_DOWN}, TEXT, ANCHOR_START, ROLE_SOFT, cut);
    *y += HEADING_HEIGHT;
}

sct_status sct_figure_deflected(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y)
{
    double factor;
    char name[128], words[192];
    sct_status status = sct_deflected_factor(scene, &factor);
    if (status != SCT_OK || factor == 0) return status;
    sct_figure_combination(scene, name);
    sct_number_format(words, sizeof words, "Deflected shape (%s), displacements \xC3\x97%.10g", name, factor);
    status = new_labels(scene, l);
    if (status == SCT_OK) status = sct_deflected_draw(scene, factor);
    if (status != SCT_OK) return status;
    head(page, l, y, words);
    return put(scene, page, y);
}

static sct_status put_diagram(sct_scene *scene, const sct_layout *l, const sct_diagram_of *of, sct_sheet *page,
                              double *y)
{
    bool drawn = false;
    char words[320];
    sct_status status = new_labels(scene, l);
    if (status == SCT_OK) status = sct_diagram_draw(scene, of, l->width, &drawn);
    if (status != SCT_OK || !drawn) return status;
    sct_diagram_words(scene, of, words, sizeof words);
    head(page, l, y, words);
    return put(scene, page, y);
}

sct_status sct_figure_diagrams(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y)
{
    const struct {
        sct_diagram_kind kind;
        sct_diagram wanted;
    } KINDS[] = {{DIAGRAM_MOMENT, scene->options.draw_moment},
                 {DIAGRAM_SHEAR, scene->options.draw_shear},
                 {DIAGRAM_AXIAL, scene->options.draw_axial}};
    for (int i = 0; i < 3; i++) {
        const int planes = scene->result->dimensions == 2 || KINDS[i].kind == DIAGRAM_AXIAL ? 1 : 2;
        for (int plane = 0; plane < planes && KINDS[i].wanted != SCT_NO_DIAGRAM; plane++) {
            const sct_diagram_of of = {KINDS[i].kind, plane, KINDS[i].wanted == SCT_DIAGRAM_ENVELOPE};
            const sct_status status = put_diagram(scene, l, &of, page, y);
            if (status != SCT_OK) return status;
        }
    }
    return SCT_OK;
}

/* ---- flat views ----------------------------------------------------------------------------------------------------
 */

enum { VIEWS = 3, VIEW_MEMBERS = 1000 };
static const double VIEW_GAP = 76, VIEW_HIGHEST = 280, VIEW_LABELS = 60; /* [u] between views, for their dimensions */
static const struct {
    int across, up;
    const char *words;
} VIEW[VIEWS] = {{0, 2, "Seen along y"}, {1, 2, "Seen along \xE2\x88\x92x"}, {0, 1, "From above"}};

bool sct_figure_has_views(const sct_result *result)
{
    return result->dimensions == 3 && result->n_members <= VIEW_MEMBERS;
}

/* The least used first, so that where members lie behind one another the most used is seen. */
static sct_status draw_view(sct_scene *scene)
{
    const sct_result *r = scene->result;
    for (int m = 0; m < r->n_members; m++) scene->sticks[m].away = -r->members[m].utilisation;
    return draw_members(scene);
}

static sct_status put_view(const sct_scene *whole, int view, sct_point corner, double scale, sct_sheet *page,
                           sct_point *opposite)
{
    sct_scene scene;
    sct_point low;
    sct_status status = sct_scene_open(&scene, whole->result, &whole->options);
    if (status == SCT_OK) {
        scene.given_factor = whole->depth_factor;
        sct_project_flat(&scene, VIEW[view].across, VIEW[view].up);
        sct_scene_lay_to_scale(&scene, corner, scale);
        scene.labels = sct_labels_new((sct_point){scene.low.x - VIEW_LABELS, scene.low.y - VIEW_LABELS},
                                      (sct_point){scene.high.x + VIEW_LABELS, scene.high.y + VIEW_LABELS});
        status = scene.labels == NULL ? SCT_NO_MEMORY : SCT_OK;
    }
    if (status == SCT_OK) {
        sct_marks_block(&scene);
        status = draw_view(&scene);
    }
    if (status == SCT_OK) {
        sct_plane_dimensions(&scene);
        sct_labels_bounds(scene.labels, &low, opposite);
        sct_sheet_put(page, &scene.sheet, (sct_point){0, 0});
        if (sct_labels_failed(scene.labels)) status = SCT_NO_MEMORY;
    }
    sct_scene_close(&scene);
    return status;
}

sct_status sct_figure_views(const sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y)
{
    double size[3], across = 0, down = 0;
    sct_space_extents(scene->result, size);
    for (int v = 0; v < VIEWS; v++) {
        across += size[VIEW[v].across];
        down = fmax(down, size[VIEW[v].up]);
    }
    if (!(across > 0) || !(down > 0)) return SCT_OK;
    const double room = l->width - 2 * SHEET_MARGIN - VIEWS * VIEW_GAP;
    const double scale = fmin(scene->scale, fmin(room / across, VIEW_HIGHEST / down));
    const double top = *y + HEADING_HEIGHT + 14;
    double x = SHEET_MARGIN + 20, bottom = *y;
    const double spare = (room - scale * across) / VIEWS;
    for (int v = 0; v < VIEWS; v++) {
        const double fall = scale * (down - size[VIEW[v].up]); /* they stand on one line */
        sct_point opposite;
        char cut[64];
        sct_words_fit(VIEW[v].words, scale * size[VIEW[v].across] + spare + VIEW_GAP - 8, TEXT, false, cut, sizeof cut);
        sct_sheet_words(page, (sct_point){x - 20, *y + HEADING_DOWN}, TEXT, ANCHOR_START, ROLE_SOFT, cut);
        const sct_status status = put_view(scene, v, (sct_point){x, top + fall}, scale, page, &opposite);
        if (status != SCT_OK) return status;
        bottom = fmax(bottom, opposite.y);
        x += scale * size[VIEW[v].across] + VIEW_GAP + spare;
    }
    *y = bottom;
    return SCT_OK;
}

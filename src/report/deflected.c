/* The deflected shape of one combination. */
#include "deflected.h"

#include <math.h>
#include <stdlib.h>

#include "base/number.h"
#include "marks.h"
#include "quantity.h"
#include "symbols.h"

static const double LARGEST_OF_SPAN = 0.08;
enum { ARROWS_MOST = 8, BETWEEN = 24 };

static const double *displacement(const sct_scene *scene, int joint)
{
    return scene->result->u +
           ((size_t)scene->options.combination * (size_t)scene->result->n_joints + (size_t)joint) * 3;
}

static sct_status stations_of(const sct_scene *scene, int member, sct_station **stations, int *n)
{
    return sct_result_stations(scene->result, scene->options.combination, member, BETWEEN, stations, n);
}

static double size_of(const double u[3])
{
    return sqrt(u[0] * u[0] + u[1] * u[1] + u[2] * u[2]);
}

/* The largest displacement along the bent members, where it is more than `largest`. */
static sct_status look_along_members(const sct_scene *scene, double *largest)
{
    for (int m = 0; m < scene->result->n_members; m++) {
        sct_station *stations = NULL;
        int n = 0;
        if (!scene->result->members[m].is_bent) continue;
        const sct_status status = stations_of(scene, m, &stations, &n);
        if (status != SCT_OK) return status;
        for (int i = 0; i < n; i++) *largest = fmax(*largest, size_of(stations[i].d));
        free(stations);
    }
    return SCT_OK;
}

sct_status sct_deflected_factor(const sct_scene *scene, double *factor)
{
    const sct_result *r = scene->result;
    double largest = 0;
    *factor = 0;
    for (int j = 0; j < r->n_joints && r->n_combinations > 0; j++) {
        largest = fmax(largest, size_of(displacement(scene, j)));
    }
    const sct_status status = r->n_combinations > 0 ? look_along_members(scene, &largest) : SCT_OK;
    if (status != SCT_OK || !(largest > 0)) return status;
    const double span = fmax(scene->high.x - scene->low.x, scene->high.y - scene->low.y) / scene->scale; /* [m] */
    const double most = LARGEST_OF_SPAN * span / largest;
    if (!(most > 0) || !isfinite(most)) return SCT_OK;
    const double power = pow(10, floor(log10(most))), times = most / power;
    *factor = power * (times >= 5 ? 5 : times >= 2 ? 2 : 1);
    return SCT_OK;
}

static sct_point moved(const sct_scene *scene, sct_point p, const double u[3], double factor)
{
    const sct_point d = sct_project_direction(scene, u);
    const double stretch = factor * scene->scale;
    return (sct_point){p.x + stretch * d.x, p.y + stretch * d.y};
}

static sct_point displaced(const sct_scene *scene, int joint, double factor)
{
    return moved(scene, scene->at[joint], displacement(scene, joint), factor);
}

/* "31.2 of 80.0 mm" and what it counts against, at the tip of an arrow. */
static void show_amount(sct_scene *scene, sct_point tail, sct_point tip, double amount, double at_most,
                        const char *against)
{
    const bool us = scene->result->us_customary;
    sct_quantity is, most;
    char words[2 * SCT_QUANTITY_ROOM + 128];
    sct_arrow(&scene->sheet, tail, tip, ROLE_INK, THIN);
    sct_labels_block(scene->labels, sct_box_about(tail, tip, 2), SCT_SOLID, -1);
    sct_quantity_movement(is, amount, us);
    sct_quantity_movement(most, at_most, us);
    sct_number_format(words, sizeof words, "%s of %s\xE2\x80\xAF%s", is, most, us ? "in" : "mm");
    const sct_word_run runs[2] = {{words, fabs(amount) > at_most ? ROLE_OVER : ROLE_INK, true},
                                  {against, ROLE_SOFT, false}};
    bool done = false;
    for (int n = against[0] != '\0' ? 2 : 1; n > 0 && !done; n--) /* what it counts against gives way */
        for (double off = 4; off < 60 && !done; off += 15)
            done = sct_marks_near(scene, tip, off, (sct_point){0, 0}, runs, n);
}

/* At a joint along the limited direction; the arrow starts where the joint came to lie if it had moved with the one
 * that it counts against. */
static void show_limit(sct_scene *scene, const sct_deflection_result *limit, double factor)
{
    const double *u = displacement(scene, limit->joint), *n = limit->direction;
    const double *base = limit->from >= 0 ? displacement(scene, limit->from) : NULL;
    double before = 0, along = 0;
    for (int i = 0; i < 3; i++) {
        before += base != NULL ? base[i] * n[i] : 0;
        along += u[i] * n[i];
    }
    const double start[3] = {before * n[0], before * n[1], before * n[2]};
    const double end[3] = {along * n[0], along * n[1], along * n[2]};
    const sct_point p = scene->at[limit->joint];
    char against[96] = "";
    if (base != NULL) {
        char name[64];
        sct_words_fit(scene->result->joints[limit->from].name, 80, LABEL, false, name, sizeof name);
        sct_number_format(against, sizeof against, "from %s", name);
    }
    show_amount(scene, base != NULL ? moved(scene, p, start, factor) : p, moved(scene, p, end, factor), along - before,
                limit->at_most, against);
}

/* The limits with the largest utilisations in the order of the model, one per joint. */
static bool is_among_worst(const sct_result *r, int i)
{
    int worse = 0;
    for (int k = 0; k < r->n_deflections; k++) {
        const bool before = r->deflections[k].utilisation > r->deflections[i].utilisation ||
                            (k < i && r->deflections[k].utilisation == r->deflections[i].utilisation);
        if (before && r->deflections[k].joint == r->deflections[i].joint) return false;
        worse += before;
    }
    return worse < ARROWS_MOST;
}

/* The curve of a bent member through its stations. */
static sct_status draw_bent(sct_scene *scene, int member, double factor)
{
    const sct_stick *s = &scene->sticks[member];
    const double L = scene->result->members[member].L;
    sct_station *stations = NULL;
    int n = 0;
    const sct_status status = stations_of(scene, member, &stations, &n);
    if (status != SCT_OK) return status;
    sct_point *at = sct_arena_array(scene->arena, (size_t)n, sizeof *at);
    for (int i = 0; at != NULL && i < n; i++) {
        const double t = stations[i].x / L;
        const sct_point p = {s->from.x + t * (s->to.x - s->from.x), s->from.y + t * (s->to.y - s->from.y)};
        at[i] = moved(scene, p, stations[i].d, factor);
        if (i > 0) sct_labels_block(scene->labels, sct_box_about(at[i - 1], at[i], 1.5), SCT_BAND, member);
    }
    if (at != NULL) sct_sheet_polyline(&scene->sheet, at, n, ROLE_U2, MEDIUM);
    free(stations);
    return at != NULL ? SCT_OK : SCT_NO_MEMORY;
}

/* The limited bow of a member, from its chord. */
static sct_status show_bow(sct_scene *scene, const sct_bow_result *bow, double factor)
{
    const sct_member_result *m = &scene->result->members[bow->member];
    const sct_stick *s = &scene->sticks[bow->member];
    sct_station *stations = NULL;
    int n = 0, at = 0;
    const sct_status status = stations_of(scene, bow->member, &stations, &n);
    if (status != SCT_OK) return status;
    for (int i = 0; i < n; i++)
        if (fabs(stations[i].bow[bow->axis]) > fabs(stations[at].bow[bow->axis])) at = i;
    if (n > 0) {
        const sct_station *p = &stations[at];
        const double t = p->x / m->L, v = p->bow[bow->axis], *e = m->axes[1 + bow->axis];
        const double chord[3] = {p->d[0] - v * e[0], p->d[1] - v * e[1], p->d[2] - v * e[2]};
        const sct_point place = {s->from.x + t * (s->to.x - s->from.x), s->from.y + t * (s->to.y - s->from.y)};
        show_amount(scene, moved(scene, place, chord, factor), moved(scene, place, p->d, factor), v, bow->at_most,
                    "bow");
    }
    free(stations);
    return SCT_OK;
}

static bool is_bow_among_worst(const sct_result *r, int i)
{
    int worse = 0;
    for (int k = 0; k < r->n_bows; k++)
        worse += r->bows[k].utilisation > r->bows[i].utilisation ||
                 (k < i && r->bows[k].utilisation == r->bows[i].utilisation);
    return worse < ARROWS_MOST && r->bows[i].run == NULL; /* the chord of a run is not that of its pieces */
}

sct_status sct_deflected_draw(sct_scene *scene, double factor)
{
    const sct_result *r = scene->result;
    for (int m = 0; m < r->n_members; m++) {
        const sct_stick *s = &scene->sticks[m];
        sct_sheet_line(&scene->sheet, s->from, s->to, ROLE_LINE, HAIR);
        sct_labels_block(scene->labels, sct_box_about(s->from, s->to, 1), SCT_BAND, m);
    }
    for (int m = 0; m < r->n_members; m++) {
        if (r->members[m].is_bent) {
            const sct_status status = draw_bent(scene, m, factor);
            if (status != SCT_OK) return status;
            continue;
        }
        const sct_point p = displaced(scene, r->members[m].from, factor),
                        q = displaced(scene, r->members[m].to, factor);
        sct_sheet_line(&scene->sheet, p, q, ROLE_U2, MEDIUM);
        sct_labels_block(scene->labels, sct_box_about(p, q, 1.5), SCT_BAND, m);
    }
    for (int j = 0; j < r->n_joints; j++) sct_support_draw(scene, j);
    for (int j = 0; j < r->n_joints; j++) sct_support_block(scene, j);
    for (int i = 0; i < r->n_deflections; i++)
        if (is_among_worst(r, i)) show_limit(scene, &r->deflections[i], factor);
    for (int i = 0; i < r->n_bows; i++) {
        if (!is_bow_among_worst(r, i)) continue;
        const sct_status status = show_bow(scene, &r->bows[i], factor);
        if (status != SCT_OK) return status;
    }
    return SCT_OK;
}

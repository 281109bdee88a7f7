/* The deflected shape of one combination. */
#include "deflected.h"

#include <math.h>

#include "base/number.h"
#include "marks.h"
#include "quantity.h"
#include "symbols.h"

static const double LARGEST_OF_SPAN = 0.08;
enum { ARROWS_MOST = 8 };

static const double *displacement(const sct_scene *scene, int joint)
{
    return scene->result->u +
           ((size_t)scene->options.combination * (size_t)scene->result->n_joints + (size_t)joint) * 3;
}

double sct_deflected_factor(const sct_scene *scene)
{
    const sct_result *r = scene->result;
    double largest = 0;
    for (int j = 0; j < r->n_joints && r->n_combinations > 0; j++) {
        const double *u = displacement(scene, j);
        largest = fmax(largest, sqrt(u[0] * u[0] + u[1] * u[1] + u[2] * u[2]));
    }
    if (!(largest > 0)) return 0;
    const double span = fmax(scene->high.x - scene->low.x, scene->high.y - scene->low.y) / scene->scale; /* [m] */
    const double most = LARGEST_OF_SPAN * span / largest;
    if (!(most > 0) || !isfinite(most)) return 0;
    const double power = pow(10, floor(log10(most))), times = most / power;
    return power * (times >= 5 ? 5 : times >= 2 ? 2 : 1);
}

static sct_point displaced(const sct_scene *scene, int joint, double factor)
{
    const sct_point d = sct_project_direction(scene, displacement(scene, joint)), p = scene->at[joint];
    const double stretch = factor * scene->scale;
    return (sct_point){p.x + stretch * d.x, p.y + stretch * d.y};
}

/* "31.2 of 80.0 mm" at the tip of an arrow along the limited direction. */
static void show_limit(sct_scene *scene, const sct_deflection_result *limit, double factor)
{
    const bool us = scene->result->us_customary;
    const double *u = displacement(scene, limit->joint), *n = limit->direction;
    const double along = u[0] * n[0] + u[1] * n[1] + u[2] * n[2];
    const double moved[3] = {along * n[0], along * n[1], along * n[2]};
    const sct_point d = sct_project_direction(scene, moved), p = scene->at[limit->joint];
    const sct_point tip = {p.x + factor * scene->scale * d.x, p.y + factor * scene->scale * d.y};
    sct_arrow(&scene->sheet, p, tip, ROLE_INK, THIN);
    sct_labels_block(scene->labels, sct_box_about(p, tip, 2), SCT_SOLID, -1);
    sct_quantity is, most;
    char words[2 * SCT_QUANTITY_ROOM + 16];
    sct_quantity_movement(is, along, us);
    sct_quantity_movement(most, limit->at_most, us);
    sct_number_format(words, sizeof words, "%s of %s\xE2\x80\xAF%s", is, most, us ? "in" : "mm");
    const bool is_over = fabs(along) > limit->at_most;
    const sct_run run = {words, is_over ? ROLE_OVER : ROLE_INK, true};
    bool done = false;
    for (double off = 4; off < 60 && !done; off += 15)
        done = sct_marks_near(scene, tip, off, (sct_point){0, 0}, &run, 1);
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

void sct_deflected_draw(sct_scene *scene, double factor)
{
    const sct_result *r = scene->result;
    for (int m = 0; m < r->n_members; m++) {
        const sct_stick *s = &scene->sticks[m];
        sct_sheet_line(&scene->sheet, s->from, s->to, ROLE_LINE, HAIR);
        sct_labels_block(scene->labels, sct_box_about(s->from, s->to, 1), SCT_BAND, m);
    }
    for (int m = 0; m < r->n_members; m++) {
        const sct_point p = displaced(scene, r->members[m].from, factor),
                        q = displaced(scene, r->members[m].to, factor);
        sct_sheet_line(&scene->sheet, p, q, ROLE_U2, MEDIUM);
        sct_labels_block(scene->labels, sct_box_about(p, q, 1.5), SCT_BAND, m);
    }
    for (int j = 0; j < r->n_joints; j++) sct_support_draw(scene, j);
    for (int j = 0; j < r->n_joints; j++) sct_support_block(scene, j);
    for (int i = 0; i < r->n_deflections; i++)
        if (is_among_worst(r, i)) show_limit(scene, &r->deflections[i], factor);
}

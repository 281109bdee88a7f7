/* The loads of one combination. */
#include "loads.h"

#include <math.h>
#include <string.h>

#include "base/number.h"
#include "base/vector.h"
#include "marks.h"
#include "member_loads.h"
#include "quantity.h"
#include "symbols.h"

static const double OFF = 8, SHORTEST = 10, LONGEST = 34, LEAST_OF_LARGEST = 0.05, HALF_WIDTH = 3;
static const double LINE_HIGHEST = 26, LINE_SHORTEST = 8, ARROW_PITCH = 18, LINE_OFF = 3; /* [u] of line loads */
static const double MOMENT = 9;                                                           /* [u] radius */
static const double TURN = 6.283185307179586;

/* Half the depth of the deepest member at a joint: arrows end clear of it. */
static double clearance(const sct_scene *scene, int joint)
{
    double deepest = 0;
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++)
        deepest = fmax(deepest, scene->sticks[scene->near[i]].depth);
    return fmax(OFF, 0.5 * deepest + 4);
}

/* ---- forces --------------------------------------------------------------------------------------------------------
 */

/* Before the place, pushing; behind it, pulling, where something takes the place before it. `off`: clear of members. */
static void draw_force(sct_scene *scene, sct_point p, double off, const double F[3], double length)
{
    const double size = sct_length3(F), unit[3] = {F[0] / size, F[1] / size, F[2] / size};
    sct_point d = sct_project_direction(scene, unit);
    const double seen = hypot(d.x, d.y);
    if (!(seen > 0.2)) return; /* it points at the viewer */
    d = (sct_point){d.x / seen, d.y / seen};
    length *= seen;
    sct_point tip = {p.x - off * d.x, p.y - off * d.y}, tail = {tip.x - length * d.x, tip.y - length * d.y};
    sct_box box = sct_box_about(tail, tip, HALF_WIDTH);
    sct_point far_end = tail;
    if (!sct_labels_are_clear_of(scene->labels, &box, SCT_SOLID | SCT_BAND)) {
        const sct_point start = {p.x + off * d.x, p.y + off * d.y},
                        end = {start.x + length * d.x, start.y + length * d.y};
        const sct_box behind = sct_box_about(start, end, HALF_WIDTH);
        if (sct_labels_are_clear_of(scene->labels, &behind, SCT_SOLID | SCT_BAND)) {
            tail = start;
            far_end = tip = end;
            box = behind;
        }
    }
    sct_labels_block(scene->labels, box, SCT_SOLID, -1);
    sct_arrow(&scene->sheet, tail, tip, ROLE_U2, MEDIUM);
    if (scene->detail == DETAIL_OVERVIEW) return;
    sct_quantity words;
    sct_quantity_force(words, size, scene->result->us_customary);
    const double outwards = far_end.x == tip.x && far_end.y == tip.y ? 1 : -1;
    sct_marks_near(scene, far_end, 2, (sct_point){outwards * d.x, outwards * d.y},
                   &(sct_word_run){words, ROLE_INK, false}, 1);
}

/* ---- moments -------------------------------------------------------------------------------------------------------
 */

/* Three quarters of a circle with a head, as it turns when seen from its axis' tip; in space about its main axis. */
static void draw_moment(sct_scene *scene, sct_point p, double radius, const double M[3])
{
    enum { POINTS = 28 };
    sct_point at[POINTS];
    int axis = 2;
    for (int i = 0; i < 2; i++)
        if (fabs(M[i]) > fabs(M[axis])) axis = i;
    const double ex[3] = {axis == 2, axis == 0, axis == 1}, ey[3] = {axis == 1, axis == 2, axis == 0};
    const sct_point a = sct_project_direction(scene, ex), b = sct_project_direction(scene, ey);
    for (int i = 0; i < POINTS; i++) {
        const double t = (M[axis] > 0 ? 1 : -1) * TURN * 0.75 * i / (POINTS - 1) - 0.125 * TURN;
        at[i] = (sct_point){p.x + radius * (a.x * cos(t) + b.x * sin(t)), p.y + radius * (a.y * cos(t) + b.y * sin(t))};
    }
    sct_sheet_polyline(&scene->sheet, at, POINTS - 3, ROLE_U2, MEDIUM);
    sct_arrow(&scene->sheet, at[POINTS - 5], at[POINTS - 1], ROLE_U2, MEDIUM);
    sct_labels_block(scene->labels, sct_box_level(p, radius + 1, radius + 1), SCT_SOLID, -1);
    if (scene->detail == DETAIL_OVERVIEW) return;
    sct_quantity size;
    char words[SCT_QUANTITY_ROOM + 16];
    sct_quantity_moment(size, sct_length3(M), scene->result->us_customary);
    sct_number_format(words, sizeof words, "%s\xE2\x80\xAF%s", size, scene->result->us_customary ? "kip ft" : "kNm");
    bool done = false;
    for (double off = radius + 2; off < radius + 50 && !done; off += 15)
        done = sct_marks_near(scene, p, off, (sct_point){0, 0}, &(sct_word_run){words, ROLE_INK, false}, 1);
}

/* ---- line loads ----------------------------------------------------------------------------------------------------
 */

/* A line load on the sheet. */
typedef struct stretch {
    sct_point base[2];  /* its ends beside the member */
    sct_point reach[2]; /* from there to the far line: against the load where it pushes, along it where it pulls */
    bool pulls;
} stretch;

static sct_point on_member(const sct_scene *scene, int member, double x)
{
    const sct_stick *s = &scene->sticks[member];
    const double t = x / scene->result->members[member].L;
    return (sct_point){s->from.x + t * (s->to.x - s->from.x), s->from.y + t * (s->to.y - s->from.y)};
}

/* Chords are loaded on their free side; others on the side that the load comes from. */
static stretch lay(const sct_scene *scene, const sct_line_load *l, double unit)
{
    const sct_stick *s = &scene->sticks[l->member];
    const sct_point q[2] = {sct_project_direction(scene, l->qa), sct_project_direction(scene, l->qb)};
    const sct_point n = {-(s->to.y - s->from.y) / s->length, (s->to.x - s->from.x) / s->length};
    const double across = (q[0].x + q[1].x) * n.x + (q[0].y + q[1].y) * n.y;
    const double size = hypot(q[0].x + q[1].x, q[0].y + q[1].y);
    double side = s->outside != 0 ? s->outside : across > 0 ? -1 : 1;
    stretch out = {.pulls = side * across > 0.02 * size};
    for (int e = 0; e < 2; e++) {
        const sct_point p = on_member(scene, l->member, e == 0 ? l->a : l->b);
        const double off = side * (0.5 * s->depth + LINE_OFF), sign = out.pulls ? 1 : -1;
        out.base[e] = (sct_point){p.x + off * n.x, p.y + off * n.y};
        out.reach[e] = (sct_point){sign * unit * q[e].x, sign * unit * q[e].y};
    }
    return out;
}

static sct_point far_end(const stretch *s, double t)
{
    const double x = (1 - t) * s->reach[0].x + t * s->reach[1].x, y = (1 - t) * s->reach[0].y + t * s->reach[1].y;
    return (sct_point){(1 - t) * s->base[0].x + t * s->base[1].x + x, (1 - t) * s->base[0].y + t * s->base[1].y + y};
}

static void line_words(sct_scene *scene, const sct_line_load *l, const stretch *s)
{
    const bool us = scene->result->us_customary;
    sct_quantity from, to;
    char words[2 * SCT_QUANTITY_ROOM + 24];
    sct_quantity_line_load(from, sct_length3(l->qa), us);
    sct_quantity_line_load(to, sct_length3(l->qb), us);
    const char *unit = us ? "kip/ft" : "kN/m";
    if (strcmp(from, to) == 0)
        sct_number_format(words, sizeof words, "%s\xE2\x80\xAF%s", from, unit);
    else
        sct_number_format(words, sizeof words, "%s to %s\xE2\x80\xAF%s", from, to, unit);
    static const double PLACES[] = {0.5, 0.35, 0.65, 0.2, 0.8};
    const double x = s->reach[0].x + s->reach[1].x, y = s->reach[0].y + s->reach[1].y, length = fmax(hypot(x, y), 1e-9);
    bool done = false;
    for (int i = 0; i < 5 && !done; i++)
        done = sct_marks_near(scene, far_end(s, PLACES[i]), 3, (sct_point){x / length, y / length},
                              &(sct_word_run){words, ROLE_INK, false}, 1);
}

/* The far line, and arrows between it and the member. */
static void draw_line(sct_scene *scene, const sct_line_load *l, double unit)
{
    if (!(scene->sticks[l->member].length > 4)) return;
    const stretch s = lay(scene, l, unit);
    const sct_point p = far_end(&s, 0), q = far_end(&s, 1);
    const double length = hypot(s.base[1].x - s.base[0].x, s.base[1].y - s.base[0].y);
    const int n = (int)fmax(1, floor(length / ARROW_PITCH + 0.5));
    sct_sheet_line(&scene->sheet, p, q, ROLE_U2, MEDIUM);
    for (int i = 0; i <= n; i++) {
        const double t = (double)i / n;
        const sct_point near = {s.base[0].x + t * (s.base[1].x - s.base[0].x),
                                s.base[0].y + t * (s.base[1].y - s.base[0].y)},
                        far = far_end(&s, t);
        if (hypot(far.x - near.x, far.y - near.y) < 2) continue;
        sct_arrow(&scene->sheet, s.pulls ? near : far, s.pulls ? far : near, ROLE_U2, HAIR);
    }
    const sct_point low = {0.5 * (s.base[0].x + p.x), 0.5 * (s.base[0].y + p.y)},
                    high = {0.5 * (s.base[1].x + q.x), 0.5 * (s.base[1].y + q.y)};
    const double half = 0.5 * fmax(hypot(s.reach[0].x, s.reach[0].y), hypot(s.reach[1].x, s.reach[1].y));
    sct_labels_block(scene->labels, sct_box_about(low, high, half + 1), SCT_SOLID, -1);
}

static void draw_lines(sct_scene *scene, const sct_drawn_loads *loads, sct_loads_drawn *drawn)
{
    double largest = 0;
    for (int i = 0; i < loads->n_lines; i++)
        largest = fmax(largest, fmax(sct_length3(loads->lines[i].qa), sct_length3(loads->lines[i].qb)));
    const double least = LEAST_OF_LARGEST * largest, unit = LINE_HIGHEST / largest;
    for (int pass = 0; pass < 2; pass++) /* words keep clear of every line */
        for (int i = 0; i < loads->n_lines; i++) {
            const sct_line_load *l = &loads->lines[i];
            const double size = fmax(sct_length3(l->qa), sct_length3(l->qb));
            if (!(size >= least)) {
                if (size > 1e-9 * largest) drawn->least_line = least;
                continue;
            }
            const double its_unit = fmax(unit, LINE_SHORTEST / size);
            const stretch s = lay(scene, l, its_unit);
            if (pass == 0) draw_line(scene, l, its_unit);
            if (pass == 1 && scene->detail != DETAIL_OVERVIEW) line_words(scene, l, &s);
            drawn->lines = drawn->any = true;
        }
}

/* ---- all -----------------------------------------------------------------------------------------------------------
 */

static void draw_points(sct_scene *scene, const sct_drawn_loads *loads, sct_loads_drawn *drawn)
{
    double largest = 0, largest_moment = 0;
    for (int i = 0; i < loads->n_points; i++) {
        largest = fmax(largest, sct_length3(loads->points[i].F));
        largest_moment = fmax(largest_moment, sct_length3(loads->points[i].M));
    }
    for (int i = 0; i < loads->n_points; i++) {
        const sct_point_load *l = &loads->points[i];
        const double size = sct_length3(l->F), moment = sct_length3(l->M);
        const sct_point at = l->member < 0 ? scene->at[l->joint] : on_member(scene, l->member, l->x);
        const double off = l->member < 0 ? clearance(scene, l->joint) : 0.5 * scene->sticks[l->member].depth + LINE_OFF;
        if (size >= LEAST_OF_LARGEST * largest && size > 0)
            draw_force(scene, at, off, l->F, fmax(SHORTEST, LONGEST * size / largest));
        else if (size > 1e-9 * largest)
            drawn->least = LEAST_OF_LARGEST * largest;
        if (moment >= LEAST_OF_LARGEST * largest_moment && moment > 0) {
            draw_moment(scene, at, fmax(MOMENT, off), l->M);
            drawn->moments = true;
        }
        drawn->any = true;
    }
}

static sct_status draw_of_frame(sct_scene *scene, sct_loads_drawn *drawn)
{
    sct_drawn_loads loads = {0};
    const sct_status status = sct_drawn_loads_of(scene->result, scene->options.combination, scene->arena, &loads);
    if (status != SCT_OK) return status;
    drawn->without_weight = loads.has_weight;
    draw_lines(scene, &loads, drawn);
    draw_points(scene, &loads, drawn);
    return SCT_OK;
}

sct_status sct_loads_draw(sct_scene *scene, sct_loads_drawn *drawn)
{
    const sct_result *r = scene->result;
    *drawn = (sct_loads_drawn){0};
    if (r->n_combinations == 0) return SCT_OK;
    if (r->has_bent && r->model != NULL) return draw_of_frame(scene, drawn);
    const double *load = r->load + (size_t)scene->options.combination * (size_t)r->n_joints * 3;
    double largest = 0;
    for (int j = 0; j < r->n_joints; j++) largest = fmax(largest, sct_length3(load + 3 * j));
    if (!(largest > 0)) return SCT_OK;
    drawn->any = true;
    for (int j = 0; j < r->n_joints; j++) {
        const double size = sct_length3(load + 3 * j);
        if (size != 0 && size < LEAST_OF_LARGEST * largest) drawn->least = LEAST_OF_LARGEST * largest;
        if (size >= LEAST_OF_LARGEST * largest)
            draw_force(scene, scene->at[j], clearance(scene, j), load + 3 * j,
                       fmax(SHORTEST, LONGEST * size / largest));
    }
    return SCT_OK;
}

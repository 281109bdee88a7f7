#include "held.h"

#include <math.h>

#include "marks.h"
#include "model/model.h"
#include "quantity.h"
#include "supports.h"

static const double SIZE = 12, START = 3, GROUND_PITCH = 5, GROUND_STROKE = 4; /* [u] */
static const double GUIDE_GAP = 3.6, SQUARE = 5.5, SPIRAL_IN = 4, SPIRAL_OUT = 9.5;
static const double TURN = 6.283185307179586;
enum { SPIRAL_POINTS = 37 };

static sct_point ahead(sct_point p, sct_point direction, double distance)
{
    return (sct_point){p.x + distance * direction.x, p.y + distance * direction.y};
}

/* Strokes of the ground behind a line through `middle` square to `way`. */
static void ground(sct_sheet *sheet, sct_point middle, sct_point way, double half, double weight)
{
    const sct_point n = {way.y, -way.x};
    sct_sheet_line(sheet, ahead(middle, n, -half), ahead(middle, n, half), ROLE_INK, weight);
    sct_sheet_path_open(sheet);
    for (double at = 4 - half; at <= half; at += GROUND_PITCH) {
        const sct_point start = ahead(middle, n, at);
        sct_sheet_stroke(sheet, start, ahead(ahead(start, n, -GROUND_STROKE), way, GROUND_STROKE));
    }
    sct_sheet_path_close(sheet, ROLE_INK, HAIR);
}

void sct_turns_draw(sct_scene *scene, int joint)
{
    const sct_point p = scene->at[joint];
    sct_sheet_rect(&scene->sheet, (sct_point){p.x - SQUARE, p.y - SQUARE}, 2 * SQUARE, 2 * SQUARE, ROLE_NONE, ROLE_INK,
                   MEDIUM);
}

void sct_fixed_draw(sct_scene *scene, int joint, sct_point way)
{
    const sct_point p = scene->at[joint], n = {way.y, -way.x};
    const int n_held = scene->result->joints[joint].n_held;
    if (n_held == 0) {
        sct_turns_draw(scene, joint);
        return;
    }
    if (n_held == 1) { /* it slides: a gap before the ground */
        sct_sheet_line(&scene->sheet, ahead(p, n, -1.1 * SIZE), ahead(p, n, 1.1 * SIZE), ROLE_INK, THICK);
        ground(&scene->sheet, ahead(p, way, GUIDE_GAP), way, 1.1 * SIZE, MEDIUM);
    } else {
        ground(&scene->sheet, p, way, 1.1 * SIZE, THICK);
    }
}

/* ---- springs -------------------------------------------------------------------------------------------------------
 */

static const sct_joint *said(const sct_scene *scene, int joint)
{
    return scene->result->model != NULL ? &scene->result->model->joints[joint] : NULL;
}

/* Along the spring, away from the members that meet there; {0, 0} where it points at the viewer. */
static sct_point spring_way(const sct_scene *scene, int joint, const sct_joint_spring *spring)
{
    const sct_result *r = scene->result;
    sct_point d = sct_project_direction(scene, spring->dir), all = {0, 0};
    const double L = hypot(d.x, d.y);
    if (!(L > 0.2)) return (sct_point){0, 0};
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++) {
        const sct_member_result *m = &r->members[scene->near[i]];
        const sct_point p = scene->at[joint], q = scene->at[m->from == joint ? m->to : m->from];
        const double length = fmax(hypot(q.x - p.x, q.y - p.y), 1e-9);
        all = (sct_point){all.x + (q.x - p.x) / length, all.y + (q.y - p.y) / length};
    }
    const double towards = all.x * d.x + all.y * d.y;
    const bool turned = towards > 1e-6 || (fabs(towards) <= 1e-6 && d.y < 0);
    return (sct_point){(turned ? -d.x : d.x) / L, (turned ? -d.y : d.y) / L};
}

static void zigzag(sct_scene *scene, sct_point p, sct_point way)
{
    const sct_point n = {way.y, -way.x};
    sct_point at[8];
    for (int i = 0; i < 8; i++) {
        const double side = i == 0 || i == 7 ? 0 : i % 2 == 0 ? 4 : -4;
        at[i] = ahead(ahead(p, way, START + SIZE * i / 7), n, side);
    }
    sct_sheet_polyline(&scene->sheet, at, 8, ROLE_INK, MEDIUM);
    ground(&scene->sheet, ahead(p, way, START + SIZE), way, 0.95 * SIZE, MEDIUM);
}

static void spiral(sct_scene *scene, sct_point p)
{
    sct_point at[SPIRAL_POINTS];
    for (int i = 0; i < SPIRAL_POINTS; i++) {
        const double t = (double)i / (SPIRAL_POINTS - 1), angle = TURN * (0.25 + 1.5 * t);
        const double radius = SPIRAL_IN + (SPIRAL_OUT - SPIRAL_IN) * t;
        at[i] = (sct_point){p.x + radius * cos(angle), p.y + radius * sin(angle)};
    }
    sct_sheet_polyline(&scene->sheet, at, SPIRAL_POINTS, ROLE_INK, THIN);
}

void sct_springs_draw(sct_scene *scene, int joint)
{
    const sct_joint *j = said(scene, joint);
    for (int i = 0; j != NULL && i < j->n_springs; i++) {
        const sct_point way = spring_way(scene, joint, &j->springs[i]);
        if (j->springs[i].is_turn)
            spiral(scene, scene->at[joint]);
        else if (way.x != 0 || way.y != 0)
            zigzag(scene, scene->at[joint], way);
    }
}

void sct_held_block(sct_scene *scene, int joint)
{
    const sct_joint *j = said(scene, joint);
    const sct_point p = scene->at[joint];
    for (int i = 0; j != NULL && i < j->n_springs; i++) {
        const sct_point end = ahead(p, spring_way(scene, joint, &j->springs[i]), START + SIZE + GROUND_STROKE);
        if (j->springs[i].is_turn)
            sct_labels_block(scene->labels, sct_box_level(p, SPIRAL_OUT, SPIRAL_OUT), SCT_SOLID, -1);
        else
            sct_labels_block(scene->labels, sct_box_about(p, end, 0.95 * SIZE), SCT_SOLID, -1);
    }
    if (sct_support_turns_held(scene->result, joint) > 0)
        sct_labels_block(scene->labels, sct_box_level(p, SQUARE, SQUARE), SCT_SOLID, -1);
}

void sct_springs_words(sct_scene *scene, int joint)
{
    const sct_joint *j = said(scene, joint);
    for (int i = 0; j != NULL && i < j->n_springs; i++) {
        const sct_joint_spring *s = &j->springs[i];
        const sct_point way = spring_way(scene, joint, s);
        const sct_point at = s->is_turn ? scene->at[joint] : ahead(scene->at[joint], way, START + SIZE);
        sct_quantity words;
        sct_quantity_stiffness(words, s->stiffness, s->is_turn, scene->result->us_customary);
        sct_marks_near(scene, at, s->is_turn ? SPIRAL_OUT + 2 : 7, s->is_turn ? (sct_point){0, 0} : way,
                       &(sct_word_run){words, ROLE_SOFT, false}, 1);
    }
}

void sct_held_key(const sct_scene *scene, sct_text *out)
{
    const sct_result *r = scene->result;
    bool turn_spring = false, square = false;
    for (int j = 0; j < r->n_joints; j++) {
        const sct_joint *joint = said(scene, j);
        const int turns = sct_support_turns_held(r, j);
        square |= r->dimensions == 3 ? turns > 0 && (turns < 3 || r->joints[j].n_held < 3)
                                     : turns > 0 && r->joints[j].n_held == 0;
        for (int i = 0; joint != NULL && i < joint->n_springs; i++) turn_spring |= joint->springs[i].is_turn;
    }
    if (square) sct_text_add(out, "A square about a joint: rotations are held. ");
    if (turn_spring) sct_text_add(out, "A spiral about a joint: a spring holds its rotation. ");
}

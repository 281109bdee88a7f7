/* The loads of one combination as arrows at the joints. */
#include "loads.h"

#include <math.h>

#include "marks.h"
#include "quantity.h"
#include "symbols.h"

static const double OFF = 8, SHORTEST = 10, LONGEST = 34, LEAST_OF_LARGEST = 0.05, HALF_WIDTH = 3;

static double size_of(const double F[3])
{
    return sqrt(F[0] * F[0] + F[1] * F[1] + F[2] * F[2]);
}

/* Half the depth of the deepest member at a joint: arrows end clear of it. */
static double clearance(const sct_scene *scene, int joint)
{
    double deepest = 0;
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++)
        deepest = fmax(deepest, scene->sticks[scene->near[i]].depth);
    return fmax(OFF, 0.5 * deepest + 4);
}

/* Before the joint, pushing; behind it, pulling, where members take the place before it. */
static void draw_load(sct_scene *scene, int joint, const double F[3], double length)
{
    const double size = size_of(F), unit[3] = {F[0] / size, F[1] / size, F[2] / size};
    sct_point d = sct_project_direction(scene, unit);
    const double seen = hypot(d.x, d.y), off = clearance(scene, joint);
    if (!(seen > 0.2)) return; /* it points at the viewer */
    d = (sct_point){d.x / seen, d.y / seen};
    length *= seen;
    const sct_point p = scene->at[joint];
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
    sct_marks_near(scene, far_end, 2, (sct_point){outwards * d.x, outwards * d.y}, &(sct_run){words, ROLE_INK, false},
                   1);
}

double sct_loads_draw(sct_scene *scene)
{
    const sct_result *r = scene->result;
    if (r->n_combinations == 0) return NAN;
    const double *load = r->load + (size_t)scene->options.combination * (size_t)r->n_joints * 3;
    double largest = 0;
    for (int j = 0; j < r->n_joints; j++) largest = fmax(largest, size_of(load + 3 * j));
    if (!(largest > 0)) return NAN;
    bool all = true;
    for (int j = 0; j < r->n_joints; j++) {
        const double size = size_of(load + 3 * j);
        all &= size == 0 || size >= LEAST_OF_LARGEST * largest;
        if (size >= LEAST_OF_LARGEST * largest)
            draw_load(scene, j, load + 3 * j, fmax(SHORTEST, LONGEST * size / largest));
    }
    return all ? 0 : LEAST_OF_LARGEST * largest;
}

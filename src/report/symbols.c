/* The textbook symbols. */
#include "symbols.h"

#include <math.h>

#include "base/number.h"
#include "held.h"
#include "quantity.h"
#include "supports.h"
#include "base/vector.h"

static const double SIZE = 12;                    /* [u] of a support */
static const double HEAD = 6.5, HEAD_WIDTH = 4.2; /* [u] of an arrow */
static const double SLIDE_GAP = 3.6, GROUND_PITCH = 5, GROUND_STROKE = 4, TICK = 3.4;
static const double COLLIDES = 0.82; /* cosine: a member within 35 degrees of the support's axis */
static const double SCALE_BAR_MOST = 150;

static sct_point ahead(sct_point p, sct_point direction, double distance)
{
    return (sct_point){p.x + distance * direction.x, p.y + distance * direction.y};
}

void sct_arrow(sct_sheet *sheet, sct_point tail, sct_point tip, sct_role role, double weight)
{
    const double L = hypot(tip.x - tail.x, tip.y - tail.y);
    if (!(L > 1e-6)) return;
    const sct_point d = {(tip.x - tail.x) / L, (tip.y - tail.y) / L}, n = {-d.y, d.x};
    const sct_point neck = ahead(tip, d, -HEAD);
    if (L > HEAD) sct_sheet_line(sheet, tail, ahead(neck, d, 1), role, weight);
    const sct_point head[3] = {tip, ahead(neck, n, 0.5 * HEAD_WIDTH), ahead(neck, n, -0.5 * HEAD_WIDTH)};
    sct_sheet_polygon(sheet, head, 3, role, ROLE_NONE, 0);
}

/* ---- which way a support opens -------------------------------------------------------------------------------------
 */

/* The largest reaction of a joint over all combinations, as a unit vector; straight up when there is none. */
static void main_reaction(const sct_result *r, int joint, double unit[3])
{
    const double *most = NULL;
    double size = 0;
    for (int c = 0; c < r->n_combinations; c++) {
        const double *R = r->reaction + ((size_t)c * (size_t)r->n_joints + (size_t)joint) * 3;
        const double length = sqrt(sct_dot3(R, R));
        if (length > size * (1 + 1e-9)) {
            size = length;
            most = R;
        }
    }
    for (int i = 0; i < 3; i++) unit[i] = most != NULL ? most[i] / size : i == r->dimensions - 1;
}

/* How badly a support at `way` from the joint sits: members in its way weigh most. A plane support lies on the line of
 * the main reaction, rather pushing than pulling; a pyramid in space stands below its joint. */
static double badness(const sct_scene *scene, int joint, const double reaction[3], const double way[3])
{
    const sct_result *r = scene->result;
    double worst = 0;
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++) {
        const sct_member_result *m = &r->members[scene->near[i]];
        const double *p = r->joints[joint].at, *q = r->joints[m->from == joint ? m->to : m->from].at;
        const double d[3] = {q[0] - p[0], q[1] - p[1], q[2] - p[2]};
        worst = fmax(worst, sct_dot3(d, way) / sqrt(sct_dot3(d, d)));
    }
    const double push = -sct_dot3(reaction, way), members = (worst > COLLIDES ? 10 : 0) + 1.2 * worst;
    return members + (r->dimensions == 3 ? 1 + way[2] : 1.5 * (1 - fabs(push)) + 0.5 * (1 - push));
}

static void support_way(const sct_scene *scene, int joint, double way[3])
{
    const sct_result *r = scene->result;
    const sct_joint_result *j = &r->joints[joint];
    const bool along_held = j->n_held == 1;
    const int n_axes = along_held ? 1 : r->dimensions;
    double reaction[3], least = INFINITY;
    main_reaction(r, joint, reaction);
    for (int i = 0; i < 2 * n_axes; i++) {
        /* the upright axis first and downwards first, so that ties open downwards */
        const int axis = r->dimensions - 1 - i / 2;
        const double sign = i % 2 == 0 ? -1 : 1;
        double d[3] = {0};
        for (int k = 0; k < 3; k++) d[k] = sign * (along_held ? j->held[0][k] : k == axis);
        const double bad = badness(scene, joint, reaction, d);
        if (bad < least - 1e-9) {
            least = bad;
            for (int k = 0; k < 3; k++) way[k] = d[k];
        }
    }
}

/* ---- plane supports ------------------------------------------------------------------------------------------------
 */

static sct_point plane_way(const sct_scene *scene, int joint)
{
    double way[3] = {0};
    support_way(scene, joint, way);
    const double L = hypot(way[0], way[1]);
    return L > 1e-9 ? (sct_point){way[0] / L, -way[1] / L} : (sct_point){0, 1};
}

/* Straight across the one member of a column's foot; else as any support. */
static sct_point fixed_way(const sct_scene *scene, int joint)
{
    const int i = scene->near_start[joint];
    if (scene->near_start[joint + 1] != i + 1) return plane_way(scene, joint);
    const sct_member_result *m = &scene->result->members[scene->near[i]];
    const sct_point p = scene->at[joint], q = scene->at[m->from == joint ? m->to : m->from];
    const double L = fmax(hypot(q.x - p.x, q.y - p.y), 1e-9);
    return (sct_point){(p.x - q.x) / L, (p.y - q.y) / L};
}

static void plane_support(sct_scene *scene, int joint)
{
    sct_sheet *sheet = &scene->sheet;
    const sct_point p = scene->at[joint], d = plane_way(scene, joint);
    const sct_point n = d.y < -1e-9 || (fabs(d.y) <= 1e-9 && d.x > 0) ? (sct_point){-d.y, d.x} : (sct_point){d.y, -d.x};
    const bool slides = scene->result->joints[joint].n_held == 1;
    const double pin = 2.8, ground = pin + SIZE + (slides ? SLIDE_GAP : 0);
    const sct_point top = ahead(p, d, pin - 0.6), foot = ahead(p, d, pin + SIZE);
    const sct_point corners[3] = {top, ahead(foot, n, 0.62 * SIZE), ahead(foot, n, -0.62 * SIZE)};
    sct_sheet_polygon(sheet, corners, 3, ROLE_PAGE, ROLE_INK, MEDIUM);
    const sct_point middle = ahead(p, d, ground);
    sct_sheet_line(sheet, ahead(middle, n, -0.95 * SIZE), ahead(middle, n, 0.95 * SIZE), ROLE_INK, MEDIUM);
    sct_sheet_path_open(sheet);
    for (int i = 0; i < 4; i++) {
        const sct_point start = ahead(middle, n, -0.95 * SIZE + 4 + GROUND_PITCH * i);
        sct_sheet_stroke(sheet, start, ahead(ahead(start, n, -GROUND_STROKE), d, GROUND_STROKE));
    }
    sct_sheet_path_close(sheet, ROLE_INK, HAIR);
}

/* ---- supports in space ---------------------------------------------------------------------------------------------
 */

/* The directions in which a joint is free to slide: 3 - n_held of them. */
static int free_directions(const sct_joint_result *j, double out[2][3])
{
    if (j->n_held == 2) {
        sct_cross3(j->held[0], j->held[1], out[0]);
        return sct_dot3(out[0], out[0]) > 1e-12;
    }
    if (j->n_held != 1) return 0;
    int least = 0;
    for (int k = 1; k < 3; k++)
        if (fabs(j->held[0][k]) < fabs(j->held[0][least]) - 1e-9) least = k;
    const double axis[3] = {least == 0, least == 1, least == 2};
    sct_cross3(j->held[0], axis, out[1]);
    sct_cross3(out[1], j->held[0], out[0]);
    return 2;
}

/* Two level-most unit vectors across `way`: the sides of the pyramid's base. */
static void base_axes(const double way[3], double e[2][3])
{
    const double along[3] = {fabs(way[0]) < 0.9, fabs(way[0]) >= 0.9, 0};
    sct_cross3(way, along, e[1]);
    double L = sqrt(sct_dot3(e[1], e[1]));
    for (int k = 0; k < 3; k++) e[1][k] /= L;
    sct_cross3(e[1], way, e[0]);
    L = sqrt(sct_dot3(e[0], e[0]));
    for (int k = 0; k < 3; k++) e[0][k] /= L;
}

/* Where the double-headed arrows of a sliding support start and end. */
static int slide_arrows(const sct_scene *scene, int joint, sct_point foot, sct_point ends[2][2])
{
    double slides[2][3];
    const int n = free_directions(&scene->result->joints[joint], slides);
    for (int i = 0; i < n; i++) {
        const sct_point along = sct_project_direction(scene, slides[i]), middle = ahead(foot, (sct_point){0, 1}, 8);
        ends[i][0] = ahead(middle, along, -17);
        ends[i][1] = ahead(middle, along, 17);
    }
    return n;
}

static sct_point space_foot(const sct_scene *scene, int joint, double way[3])
{
    support_way(scene, joint, way);
    return ahead(scene->at[joint], sct_project_direction(scene, way), SIZE + 2.8);
}

/* A foot that holds everything: a plate under the joint. */
static void space_plate(sct_scene *scene, int joint)
{
    double way[3], e[2][3];
    sct_point base[4];
    support_way(scene, joint, way);
    base_axes(way, e);
    const sct_point a = sct_project_direction(scene, e[0]), b = sct_project_direction(scene, e[1]);
    for (int i = 0; i < 4; i++)
        base[i] = ahead(ahead(scene->at[joint], a, i == 0 || i == 3 ? -10 : 10), b, i < 2 ? -10 : 10);
    sct_sheet_polygon(&scene->sheet, base, 4, ROLE_PAGE, ROLE_INK, THICK);
}

static void space_support(sct_scene *scene, int joint)
{
    sct_sheet *sheet = &scene->sheet;
    double way[3], e[2][3];
    sct_point base[4], ends[2][2];
    const sct_point foot = space_foot(scene, joint, way),
                    apex = ahead(scene->at[joint], sct_project_direction(scene, way), 2);
    base_axes(way, e);
    const sct_point a = sct_project_direction(scene, e[0]), b = sct_project_direction(scene, e[1]);
    for (int i = 0; i < 4; i++) base[i] = ahead(ahead(foot, a, i == 0 || i == 3 ? -8.5 : 8.5), b, i < 2 ? -8.5 : 8.5);
    sct_sheet_polygon(sheet, base, 4, ROLE_PAGE, ROLE_INK, THIN);
    sct_sheet_path_open(sheet);
    for (int i = 0; i < 4; i++) sct_sheet_stroke(sheet, apex, base[i]);
    sct_sheet_path_close(sheet, ROLE_INK, THIN);
    const int n = slide_arrows(scene, joint, foot, ends);
    for (int i = 0; i < n; i++) {
        sct_arrow(sheet, ends[i][0], ends[i][1], ROLE_INK, THIN);
        sct_arrow(sheet, ends[i][1], ends[i][0], ROLE_INK, THIN);
    }
}

void sct_support_draw(sct_scene *scene, int joint)
{
    const int turns = sct_support_turns_held(scene->result, joint), n_held = scene->result->joints[joint].n_held;
    const bool in_space = scene->result->dimensions == 3;
    if (in_space && turns == 3 && n_held == 3) {
        space_plate(scene, joint);
    } else if (in_space) {
        if (n_held > 0) space_support(scene, joint);
        if (turns > 0) sct_turns_draw(scene, joint);
    } else if (turns > 0) {
        sct_fixed_draw(scene, joint, fixed_way(scene, joint));
    } else if (n_held > 0) {
        plane_support(scene, joint);
    }
    sct_springs_draw(scene, joint);
}

void sct_support_block(sct_scene *scene, int joint)
{
    sct_held_block(scene, joint);
    if (scene->result->joints[joint].n_held == 0) return;
    const sct_point p = scene->at[joint];
    if (scene->result->dimensions == 3) {
        double way[3];
        sct_point ends[2][2];
        const sct_point foot = space_foot(scene, joint, way);
        sct_labels_block(scene->labels, sct_box_about(p, ahead(foot, (sct_point){0, 1}, 4), 13), SCT_SOLID, -1);
        const int n = slide_arrows(scene, joint, foot, ends);
        for (int i = 0; i < n; i++)
            sct_labels_block(scene->labels, sct_box_about(ends[i][0], ends[i][1], 3), SCT_SOLID, -1);
        return;
    }
    const sct_point d = plane_way(scene, joint);
    const double deep = 2.8 + SIZE + GROUND_STROKE + (scene->result->joints[joint].n_held == 1 ? SLIDE_GAP : 0);
    sct_labels_block(scene->labels, sct_box_about(p, ahead(p, d, deep), 0.95 * SIZE), SCT_SOLID, -1);
}

/* ---- dimensions ----------------------------------------------------------------------------------------------------
 */

/* To the left of the reading direction: y points down. */
static sct_point left_of(sct_point along)
{
    return (sct_point){along.y, -along.x};
}

void sct_dimension(sct_sheet *sheet, const sct_point at[], int n, sct_point along)
{
    const sct_point up = left_of(along);
    sct_sheet_line(sheet, at[0], at[n - 1], ROLE_SOFT, HAIR);
    for (int i = 0; i < n; i++)
        sct_sheet_line(sheet, ahead(ahead(at[i], along, -TICK), up, -TICK), ahead(ahead(at[i], along, TICK), up, TICK),
                       ROLE_SOFT, MEDIUM);
}

void sct_dimension_words(sct_sheet *sheet, sct_point p, sct_point q, sct_point along, const char *words)
{
    static const double DEGREES = 57.29577951308232;
    const sct_point middle = {0.5 * (p.x + q.x), 0.5 * (p.y + q.y)};
    sct_sheet_runs(sheet, ahead(middle, left_of(along), 5), TEXT, ANCHOR_MIDDLE, atan2(along.y, along.x) * DEGREES,
                   &(sct_word_run){words, ROLE_SOFT, false}, 1);
}

void sct_line_round_labels(sct_sheet *sheet, const sct_labels *labels, sct_point p, sct_point q, sct_role role)
{
    enum { MOST = 64 };
    sct_gap gaps[MOST];
    const double L = hypot(q.x - p.x, q.y - p.y);
    const int n = sct_labels_gaps(labels, p, q, 3, gaps, MOST);
    double from = 0;
    for (int i = 0; i <= n; i++) {
        const double to = i < n ? gaps[i].from : 1;
        if ((to - from) * L > 2)
            sct_sheet_line(sheet, (sct_point){p.x + from * (q.x - p.x), p.y + from * (q.y - p.y)},
                           (sct_point){p.x + to * (q.x - p.x), p.y + to * (q.y - p.y)}, role, HAIR);
        if (i < n) from = gaps[i].to;
    }
}

/* ---- scale bar -----------------------------------------------------------------------------------------------------
 */

double sct_scale_bar(sct_sheet *sheet, sct_point at, double scale, bool us_customary)
{
    const double unit = sct_length_unit(us_customary) * scale; /* [u] one metre or foot */
    const double power = pow(10, floor(log10(SCALE_BAR_MOST / unit)));
    const double times = SCALE_BAR_MOST / unit / power;
    const int first = times >= 5 ? 5 : times >= 2 ? 2 : 1;
    const double length = first * power, drawn = length * unit;
    if (sheet == NULL) return drawn;
    const int fields = first == 2 ? 2 : 5;
    for (int i = 0; i < fields; i++)
        sct_sheet_rect(sheet, (sct_point){at.x + drawn * i / fields, at.y}, drawn / fields, 5,
                       i % 2 == 0 ? ROLE_INK : ROLE_PAGE, ROLE_INK, HAIR);
    char words[48];
    sct_number_format(words, sizeof words, "%.10g\xE2\x80\xAF%s", length, sct_length_unit_name(us_customary));
    sct_sheet_words(sheet, (sct_point){at.x, at.y - 4}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, "0");
    sct_sheet_words(sheet, (sct_point){at.x + drawn, at.y - 4}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, words);
    return drawn;
}

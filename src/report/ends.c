#include "ends.h"

#include <math.h>

#include "base/number.h"
#include "marks.h"
#include "model/model.h"
#include "quantity.h"

static const double TRIM = 5;                       /* [u] short of a ring */
static const double RELEASE_OFF = 7, RELEASE = 3.6; /* [u] from the joint, radius */
static const double SPRING = 12, SPRING_ACROSS = 4; /* [u] length along the member, half width */
static const double STRAIGHT = 0.996;               /* cosine of 5 degrees: one line goes on as the other */

typedef struct ray { /* from a joint along a member */
    sct_point p, d;
    double length, depth;
} ray;

static ray ray_of(const sct_scene *scene, int member, int end)
{
    const sct_stick *s = &scene->sticks[member];
    const sct_point p = end == 0 ? s->from : s->to, q = end == 0 ? s->to : s->from;
    const double L = fmax(s->length, 1e-9);
    return (ray){p, {(q.x - p.x) / L, (q.y - p.y) / L}, s->length, s->depth};
}

static int joint_of(const sct_scene *scene, int member, int end)
{
    const sct_member_result *m = &scene->result->members[member];
    return end == 0 ? m->from : m->to;
}

static int end_at(const sct_scene *scene, int member, int joint)
{
    return scene->result->members[member].from == joint ? 0 : 1;
}

/* The deepest other member at the joint that crosses the line of this one, measured along this one. */
static double depth_met(const sct_scene *scene, int member, int end)
{
    const int joint = joint_of(scene, member, end);
    const ray own = ray_of(scene, member, end);
    double most = 0;
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++) {
        const int other = scene->near[i];
        if (other == member) continue;
        const ray its = ray_of(scene, other, end_at(scene, other, joint));
        const double sine = fabs(own.d.x * its.d.y - own.d.y * its.d.x);
        if (sine > 0.12) most = fmax(most, its.depth / sine);
    }
    return most;
}

static bool go_on_straight(const ray *p, const ray *q)
{
    return p->d.x * q->d.x + p->d.y * q->d.y < -STRAIGHT;
}

/* Some line of members passes through the joint. */
static bool is_passed(const sct_scene *scene, int joint)
{
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++)
        for (int k = scene->near_start[joint]; k < i; k++) {
            const ray p = ray_of(scene, scene->near[i], end_at(scene, scene->near[i], joint));
            const ray q = ray_of(scene, scene->near[k], end_at(scene, scene->near[k], joint));
            if (go_on_straight(&p, &q)) return true;
        }
    return false;
}

/* How far the outer edge of a member goes until it meets the outer edge of another. */
static double mitre(const ray *own, const ray *its)
{
    const double sine = fabs(own->d.x * its->d.y - own->d.y * its->d.x),
                 cosine = own->d.x * its->d.x + own->d.y * its->d.y;
    return sine > 0.05 ? 0.5 * fmax(its->depth + own->depth * cosine, 0) / sine : 0;
}

/* A corner is filled by its deeper member, the first of equals; where a line of members passes there is none. */
static double corner(const sct_scene *scene, int member, int end)
{
    const int joint = joint_of(scene, member, end);
    const ray own = ray_of(scene, member, end);
    double most = 0;
    if (is_passed(scene, joint)) return 0;
    for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1]; i++) {
        const int other = scene->near[i], its_end = end_at(scene, other, joint);
        const ray its = ray_of(scene, other, its_end);
        if (other == member || scene->sticks[other].end[its_end] != END_RIGID) continue;
        if (its.depth > own.depth || (its.depth == own.depth && other < member)) return 0;
        most = fmax(most, mitre(&own, &its));
    }
    return fmin(most, own.depth);
}

double sct_end_reach(const sct_scene *scene, int member, int end)
{
    const sct_stick *s = &scene->sticks[member];
    if (s->end[end] == END_AT_RING) return -fmin(TRIM, 0.2 * s->length);
    return s->end[end] == END_RIGID ? corner(scene, member, end) : 0;
}

/* ---- marks on members ----------------------------------------------------------------------------------------------
 */

/* The middle of a release or of a spring: beyond half the depth of what the member meets. */
static sct_point mark_at(const sct_scene *scene, int member, int end)
{
    const ray r = ray_of(scene, member, end);
    const bool is_spring = scene->sticks[member].end[end] == END_SPRUNG;
    const double off =
        fmax(RELEASE_OFF, 0.5 * depth_met(scene, member, end) + RELEASE + 1) + (is_spring ? 0.5 * SPRING - RELEASE : 0);
    const double at = fmin(off, 0.35 * r.length);
    return (sct_point){r.p.x + at * r.d.x, r.p.y + at * r.d.y};
}

/* Three zigzags along the member over a gap in it. */
static void draw_spring(sct_scene *scene, int member, int end)
{
    const ray r = ray_of(scene, member, end);
    const sct_point middle = mark_at(scene, member, end), n = {-r.d.y, r.d.x};
    const double half = 0.5 * SPRING, across = fmax(SPRING_ACROSS, 0.5 * r.depth);
    sct_point at[8];
    for (int i = 0; i < 8; i++) {
        const double along = -half + SPRING * i / 7, side = i == 0 || i == 7 ? 0 : i % 2 == 0 ? across : -across;
        at[i] = (sct_point){middle.x + along * r.d.x + side * n.x, middle.y + along * r.d.y + side * n.y};
    }
    sct_sheet_line(&scene->sheet, at[0], at[7], ROLE_PAGE, 2 * across + 3);
    sct_sheet_polyline(&scene->sheet, at, 8, ROLE_INK, MEDIUM);
}

void sct_ends_draw(sct_scene *scene)
{
    const sct_result *r = scene->result;
    for (int j = 0; j < r->n_joints; j++)
        if (!scene->is_rigid[j]) sct_sheet_circle(&scene->sheet, scene->at[j], scene->ring, ROLE_PAGE, ROLE_INK, THIN);
    if (scene->detail == DETAIL_OVERVIEW) return;
    for (int m = 0; m < r->n_members; m++)
        for (int end = 0; end < 2; end++) {
            const sct_stick *s = &scene->sticks[m];
            if (s->end[end] == END_RELEASED)
                sct_sheet_circle(&scene->sheet, mark_at(scene, m, end), fmin(RELEASE, 0.12 * s->length), ROLE_PAGE,
                                 ROLE_INK, MEDIUM);
            else if (s->end[end] == END_SPRUNG)
                draw_spring(scene, m, end);
        }
}

static bool is_marked(const sct_scene *scene, int member, int end)
{
    const sct_end e = scene->sticks[member].end[end];
    return scene->detail != DETAIL_OVERVIEW && (e == END_RELEASED || e == END_SPRUNG);
}

void sct_ends_block(sct_scene *scene)
{
    for (int m = 0; m < scene->result->n_members; m++)
        for (int end = 0; end < 2; end++)
            if (is_marked(scene, m, end))
                sct_labels_block(scene->labels, sct_box_level(mark_at(scene, m, end), RELEASE + 1, RELEASE + 1),
                                 SCT_SOLID, -1);
}

void sct_ends_words(sct_scene *scene)
{
    const sct_result *r = scene->result;
    if (r->model == NULL || scene->detail != DETAIL_FULL) return;
    for (int m = 0; m < r->n_members; m++)
        for (int end = 0; end < 2; end++) {
            if (scene->sticks[m].end[end] != END_SPRUNG) continue;
            const sct_member_end *of = &r->model->members[m].end[end];
            sct_quantity words;
            sct_quantity_stiffness(words, of->stiffness[of->fixity[0] == SCT_SPRUNG ? 0 : 1], true, r->us_customary);
            const sct_point at = mark_at(scene, m, end), d = ray_of(scene, m, end).d;
            bool done = false;
            for (double along = 0; along < 90 && !done; along += 25) /* beside the spring, or further into the member */
                done = sct_marks_near(scene, (sct_point){at.x + along * d.x, at.y + along * d.y}, 8, (sct_point){0, 0},
                                      &(sct_word_run){words, ROLE_SOFT, false}, 1);
        }
}

void sct_ends_key(const sct_scene *scene, sct_text *out)
{
    bool released = false, sprung = false;
    for (int m = 0; m < scene->result->n_members; m++)
        for (int end = 0; end < 2; end++) {
            released |= is_marked(scene, m, end) && scene->sticks[m].end[end] == END_RELEASED;
            sprung |= is_marked(scene, m, end) && scene->sticks[m].end[end] == END_SPRUNG;
        }
    if (released) sct_text_add(out, "A ring on a member: its end turns freely. ");
    if (sprung) sct_text_add(out, "A zigzag in a member: its end is held by a spring. ");
}

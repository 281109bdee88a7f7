/* One member as a band. */
#include "band.h"

#include <math.h>

#include "ends.h"
#include "quantity.h"

static const double CASING = 1.6, CASING_TRIM = 6; /* [u] */
static const double EDGE_GAP = 0.9, EDGE_GAP_OF_DEPTH = 0.14, CORE_LEAST = 1.6;
static const double HATCH_PITCH = 5, OVER_GROW = 1;

/* The band's own axes: s along from p, t across. */
typedef struct axes {
    sct_point p;
    double c, s, length;
} axes;

static sct_point place(const axes *a, double along, double across)
{
    return (sct_point){a->p.x + along * a->c - across * a->s, a->p.y + along * a->s + across * a->c};
}

static void body(sct_sheet *sheet, const axes *a, double depth, sct_role fill, sct_role stroke, double weight)
{
    const double h = 0.5 * depth;
    const sct_point corners[4] = {place(a, 0, h), place(a, a->length, h), place(a, a->length, -h), place(a, 0, -h)};
    sct_sheet_polygon(sheet, corners, 4, fill, stroke, weight);
}

/* Lines at 45 degrees to the axis, clipped to the band. */
static void hatch(sct_sheet *sheet, const axes *a, double depth, sct_role role, double weight)
{
    if (!(a->length > 1e-6)) return;
    sct_sheet_path_open(sheet);
    for (double start = 0.5 * HATCH_PITCH - depth; start < a->length; start += HATCH_PITCH) {
        const double from = fmax(start, 0), to = fmin(start + depth, a->length);
        if (to - from > 0.05)
            sct_sheet_stroke(sheet, place(a, from, from - start - 0.5 * depth), place(a, to, to - start - 0.5 * depth));
    }
    sct_sheet_path_close(sheet, role, weight);
}

static void tube(sct_sheet *sheet, const axes *a, double depth, sct_role role)
{
    const double h = 0.5 * (depth - THIN);
    const double core = depth - 2 * (THIN + fmax(EDGE_GAP, EDGE_GAP_OF_DEPTH * depth));
    body(sheet, a, depth, ROLE_PAGE, ROLE_NONE, 0);
    sct_sheet_line(sheet, place(a, 0, h), place(a, a->length, h), ROLE_INK, THIN);
    sct_sheet_line(sheet, place(a, 0, -h), place(a, a->length, -h), ROLE_INK, THIN);
    body(sheet, a, fmin(fmax(core, CORE_LEAST), depth), role, ROLE_NONE, 0);
}

/* One edge as of a tube, the other solid: one is in tension, one in compression, and the place decides which. */
static void half_tube(sct_sheet *sheet, const axes *a, double depth, sct_role role)
{
    const double h = 0.5 * depth, gap = fmin(THIN + fmax(EDGE_GAP, EDGE_GAP_OF_DEPTH * depth), 0.6 * depth);
    const axes core = {place(a, 0, 0.5 * gap), a->c, a->s, a->length};
    body(sheet, a, depth, ROLE_PAGE, ROLE_NONE, 0);
    sct_sheet_line(sheet, place(a, 0, 0.5 * THIN - h), place(a, a->length, 0.5 * THIN - h), ROLE_INK, THIN);
    body(sheet, &core, depth - gap, role, ROLE_NONE, 0);
}

void sct_band_draw(sct_sheet *sheet, sct_point p, sct_point q, double depth, sct_sense sense, double utilisation)
{
    const double length = hypot(q.x - p.x, q.y - p.y);
    if (!(length > 1e-6)) return;
    const axes a = {p, (q.x - p.x) / length, (q.y - p.y) / length, length};
    const sct_role role = sct_ramp(utilisation);
    const bool is_tension = sense == SENSE_TENSION || sense == SENSE_BENT;
    if (role == ROLE_OVER) { /* also without force: a slenderness that is not kept must be seen */
        body(sheet, &a, depth + OVER_GROW, is_tension ? ROLE_OVER : ROLE_PAGE, ROLE_OVER, MEDIUM);
        hatch(sheet, &a, depth + OVER_GROW, is_tension ? ROLE_PAGE : ROLE_OVER, is_tension ? MEDIUM : THIN);
    } else if (sense == SENSE_NONE) {
        sct_sheet_dots(sheet, p, q);
    } else if (sense == SENSE_BENT) {
        half_tube(sheet, &a, depth, role);
    } else if (is_tension) {
        body(sheet, &a, depth, role, ROLE_NONE, 0);
    } else {
        tube(sheet, &a, depth, role);
    }
}

/* "T1, top chord, SHS 100x100x5, utilisation 0.93, buckling in plane under strength 1" */
static void write_title(const sct_result *r, const sct_member_result *m, sct_text *title)
{
    const sct_group_result *group = &r->groups[m->group];
    sct_quantity words;
    sct_text_format(title, "%s, %s, ", m->name, group->name);
    if (group->section != NULL) {
        sct_text_add(title, group->section);
    } else {
        sct_quantity_area(words, group->A, r->us_customary);
        sct_text_format(title, "area %s", words);
    }
    sct_quantity_utilisation(words, m->utilisation);
    sct_text_format(title, ", utilisation %s, %s", words, sct_check_text(m->check));
    if (m->combination >= 0 && m->combination < r->n_combinations)
        sct_text_format(title, " under %s", r->combinations[m->combination]);
}

static sct_point between(sct_point p, sct_point q, double t)
{
    return (sct_point){p.x + t * (q.x - p.x), p.y + t * (q.y - p.y)};
}

void sct_band_member(sct_scene *scene, int member)
{
    const sct_result *r = scene->result;
    const sct_stick *s = &scene->sticks[member];
    if (!(s->length > 1e-6)) return;
    if (r->dimensions == 3) {
        const double bare = fmin(CASING_TRIM / s->length, 0.25);
        sct_sheet_line(&scene->sheet, between(s->from, s->to, bare), between(s->from, s->to, 1 - bare), ROLE_PAGE,
                       s->depth + 2 * CASING);
    }
    sct_text title = {0};
    write_title(r, &r->members[member], &title);
    if (title.failed) scene->sheet.body.failed = true;
    sct_sheet_group_open(&scene->sheet, title.failed || title.data == NULL ? "" : title.data);
    sct_text_free(&title);
    const double before = sct_end_reach(scene, member, 0) / s->length,
                 behind = sct_end_reach(scene, member, 1) / s->length;
    sct_band_draw(&scene->sheet, between(s->from, s->to, -before), between(s->from, s->to, 1 + behind), s->depth,
                  s->sense, r->members[member].utilisation);
    sct_sheet_group_close(&scene->sheet);
}

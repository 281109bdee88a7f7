/* Diagrams along members. */
#include "diagram.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/number.h"
#include "diagram_curves.h"
#include "ends.h"
#include "marks.h"
#include "quantity.h"
#include "shown.h"
#include "symbols.h"

static const double LARGEST_OF_MEMBER = 0.6; /* of the mean length: storeys stay apart */
static const double LARGEST_OF_WIDTH = 0.07, LEAST_OF_LARGEST = 0.02, SAME = 1e-6; /* of the sheet; of the largest */
static const double HATCH_PITCH = 6, HATCH_LEAST = 1, DOT = 2.2, SIGN_RADIUS = 6, SIGN_FIELD = 16; /* [u] */
enum { LABELS_PER_MEMBER = 8, LABELS_IN_OVERVIEW = 20, LABELS_SELECTED = 60, WORDS = 96 };

typedef struct figure {
    sct_scene *scene;
    const sct_diagram_of *of;
    double unit; /* [u] of one N or N m */
    double largest;
} figure;

/* A value that wants a label. */
typedef struct value {
    int member, joint; /* joint -1: inside */
    double x, v;
    int combination; /* of an envelope; else -1 */
    bool is_level;   /* stands for the whole member */
    int order;
} value;

/* ---- places --------------------------------------------------------------------------------------------------------
 */

static sct_point on_axis(const figure *f, int member, double x)
{
    const sct_stick *s = &f->scene->sticks[member];
    const double t = x / f->scene->result->members[member].L;
    return (sct_point){s->from.x + t * (s->to.x - s->from.x), s->from.y + t * (s->to.y - s->from.y)};
}

/* Where positive values are drawn from the member: moments against the local axis, where the fibres are in tension. */
static sct_point positive(const figure *f, int member)
{
    const sct_member_result *m = &f->scene->result->members[member];
    const sct_stick *s = &f->scene->sticks[member];
    sct_point n = {(s->to.y - s->from.y) / fmax(s->length, 1e-9), -(s->to.x - s->from.x) / fmax(s->length, 1e-9)};
    if (m->is_bent && f->scene->result->dimensions == 3) n = sct_project_direction(f->scene, m->axes[1 + f->of->plane]);
    return f->of->kind == DIAGRAM_MOMENT ? (sct_point){-n.x, -n.y} : n;
}

static sct_point ordinate(const figure *f, int member, double x, double v)
{
    const sct_point p = on_axis(f, member, x), n = positive(f, member);
    return (sct_point){p.x + f->unit * v * n.x, p.y + f->unit * v * n.y};
}

/* ---- curves --------------------------------------------------------------------------------------------------------
 */

static void hatch(const figure *f, int member, const sct_curve *c)
{
    const sct_stick *s = &f->scene->sticks[member];
    const int n = (int)(s->length / HATCH_PITCH);
    bool open = false;
    for (int i = 1; i < n; i++) {
        const double x = f->scene->result->members[member].L * i / n, v = sct_curve_at(c, x);
        if (!(f->unit * fabs(v) > HATCH_LEAST)) continue;
        if (!open) sct_sheet_path_open(&f->scene->sheet);
        open = true;
        sct_sheet_stroke(&f->scene->sheet, on_axis(f, member, x), ordinate(f, member, x, v));
    }
    if (open) sct_sheet_path_close(&f->scene->sheet, ROLE_U0, HAIR);
}

static sct_status contour(const figure *f, int member, const sct_curve *c)
{
    sct_point *at = sct_arena_array(f->scene->arena, (size_t)c->n + 2, sizeof *at);
    if (at == NULL) return SCT_NO_MEMORY;
    for (int i = 0; i < c->n; i++) at[i + 1] = ordinate(f, member, c->x[i], c->v[i]);
    at[0] = on_axis(f, member, c->x[0]);
    at[c->n + 1] = on_axis(f, member, c->x[c->n - 1]);
    for (int i = 0; i <= c->n; i++)
        sct_labels_block(f->scene->labels, sct_box_about(at[i], at[i + 1], 1), SCT_BAND, member);
    sct_sheet_polyline(&f->scene->sheet, at, c->n + 2, ROLE_U2, MEDIUM);
    return SCT_OK;
}

/* + or - in a ring where each sign's field is highest; a level field shows it at a third, beside its value. */
static void signs(const figure *f, int member, const sct_curve *c)
{
    static const char *const WORDS_OF[2] = {"+", "\xE2\x88\x92"};
    const bool is_level = fabs(c->v[0] - c->v[c->n - 1]) <= LEAST_OF_LARGEST * f->largest;
    const double L = f->scene->result->members[member].L;
    for (int side = 0; side < 2; side++) {
        double most = 0, at = 0;
        for (int i = 0; i <= 12; i++) {
            const double x = L * (0.14 + 0.06 * i), v = sct_curve_at(c, x) * (side == 0 ? 1 : -1);
            if (!(v > most)) continue;
            most = v;
            at = x;
        }
        if (!(f->unit * most >= SIGN_FIELD) || f->scene->sticks[member].length < 4 * SIGN_RADIUS) continue;
        if (is_level) at = 0.3 * L;
        const double v = (side == 0 ? 0.5 : -0.5) * most;
        const sct_point p = ordinate(f, member, at, v);
        sct_sheet_circle(&f->scene->sheet, p, SIGN_RADIUS, ROLE_PAGE, ROLE_SOFT, HAIR);
        sct_labels_block(f->scene->labels, sct_box_level(p, SIGN_RADIUS, SIGN_RADIUS), SCT_SOLID, -1);
        sct_sheet_words(&f->scene->sheet, (sct_point){p.x, p.y + BASELINE * LABEL}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT,
                        WORDS_OF[side]);
    }
}

static sct_status draw_curves(const figure *f, const sct_member_curves *curves)
{
    for (int m = 0; m < f->scene->result->n_members; m++) {
        const sct_curve *c = curves[m].curve;
        for (int side = 0; side < 2; side++) {
            if (c[side].n == 0) continue;
            if (!f->of->is_envelope) hatch(f, m, &c[side]);
            const sct_status status = contour(f, m, &c[side]);
            if (status != SCT_OK) return status;
        }
        if (c[0].n > 0 && f->of->kind != DIAGRAM_MOMENT && !f->of->is_envelope) signs(f, m, &c[0]);
    }
    return SCT_OK;
}

/* ---- values --------------------------------------------------------------------------------------------------------
 */

static void want(const figure *f, const value *wanted, value values[], int *n)
{
    if (!(fabs(wanted->v) >= LEAST_OF_LARGEST * f->largest)) return;
    values[*n] = *wanted;
    values[*n].order = *n;
    ++*n;
}

/* +1 or -1 at the first place of a peak or of a valley, which may be level or have two sides; else 0. */
static int turn_at(const sct_curve *c, int i, double same)
{
    int next = i + 1;
    while (next < c->n && fabs(c->v[next] - c->v[i]) <= same) next++;
    if (i == 0 || next == c->n) return 0;
    const double before = c->v[i] - c->v[i - 1], behind = c->v[i] - c->v[next];
    return before > same && behind > same ? 1 : before < -same && behind < -same ? -1 : 0;
}

/* Ends, jumps and inner extremes; a level force once, in its middle. At most LABELS_PER_MEMBER. */
static void values_of_curve(const figure *f, int member, const sct_curve *c, value values[], int *n)
{
    const sct_member_result *m = &f->scene->result->members[member];
    const double same = SAME * f->largest, *v = c->v;
    const int last = c->n - 1, most = *n + LABELS_PER_MEMBER;
    value wanted = {.member = member, .joint = -1, .combination = -1};
    double low = v[0], high = v[0];
    for (int i = 0; i <= last; i++) {
        low = fmin(low, v[i]);
        high = fmax(high, v[i]);
    }
    if (f->of->kind != DIAGRAM_MOMENT && high - low <= LEAST_OF_LARGEST * f->largest) {
        wanted.is_level = true;
        wanted.x = 0.5 * m->L;
        wanted.v = sct_curve_at(c, wanted.x);
        want(f, &wanted, values, n);
        return;
    }
    for (int end = 0; end < 2; end++)
        want(f,
             &(value){.member = member,
                      .joint = end == 0 ? m->from : m->to,
                      .x = end == 0 ? 0 : m->L,
                      .v = v[end == 0 ? 0 : last],
                      .combination = -1},
             values, n);
    for (int i = 1; i < last && *n < most; i++) {
        const bool jumps = (c->x[i] == c->x[i - 1] && fabs(v[i] - v[i - 1]) > LEAST_OF_LARGEST * f->largest) ||
                           (c->x[i] == c->x[i + 1] && fabs(v[i] - v[i + 1]) > LEAST_OF_LARGEST * f->largest);
        const bool is_inner = c->x[i] > 0 && c->x[i] < m->L;
        wanted.x = c->x[i];
        wanted.v = v[i];
        if (is_inner && (jumps || turn_at(c, i, same) != 0)) want(f, &wanted, values, n);
    }
}

static bool is_level(const figure *f, int member, const sct_curve *c)
{
    const double L = f->scene->result->members[member].L;
    for (int i = 0; i < c->n; i++)
        if (fabs(c->v[i] - sct_curve_at(c, 0.5 * L)) > SAME * f->largest) return false;
    return true;
}

/* Largest and smallest of a member, where they are a tension and a compression, or a moment of either sign. */
static void values_of_envelope(const figure *f, int member, const sct_member_curves *c, value values[], int *n)
{
    const sct_member_result *m = &f->scene->result->members[member];
    for (int side = 0; side < 2; side++) {
        const sct_extreme *e = &c->extreme[side];
        if (e->combination < 0 || (side == 0 ? e->v <= 0 : e->v >= 0)) continue;
        value wanted = {.member = member, .joint = -1, .x = e->x, .v = e->v, .combination = e->combination};
        wanted.is_level = is_level(f, member, &c->curve[side]);
        if (wanted.is_level) wanted.x = 0.5 * m->L;
        if (wanted.x <= SAME * m->L) wanted.joint = m->from;
        if (wanted.x >= (1 - SAME) * m->L) wanted.joint = m->to;
        want(f, &wanted, values, n);
    }
}

static int largest_first(const void *left, const void *right)
{
    const value *p = left, *q = right;
    if (fabs(p->v) != fabs(q->v)) return fabs(p->v) > fabs(q->v) ? -1 : 1;
    return p->order - q->order;
}

static void write_size(const figure *f, double v, sct_quantity out)
{
    const bool us = f->scene->result->us_customary;
    if (f->of->kind == DIAGRAM_MOMENT)
        sct_quantity_moment(out, v, us);
    else
        sct_quantity_force(out, v, us);
}

/* " at 2.49 m, full" */
static void write_place(const figure *f, const value *w, char out[2 * WORDS])
{
    const sct_result *r = f->scene->result;
    sct_quantity x;
    char name[WORDS] = "";
    out[0] = '\0';
    sct_quantity_length(x, w->x, 2, r->us_customary);
    if (w->combination >= 0) sct_words_fit(r->combinations[w->combination], 110, LABEL, false, name, sizeof name);
    if (w->joint < 0 && !w->is_level)
        sct_number_format(out, 2 * WORDS, "at %s\xE2\x80\xAF%s%s%s", x, sct_length_unit_name(r->us_customary),
                          name[0] != '\0' ? ", " : "", name);
    else
        sct_number_format(out, 2 * WORDS, "%s", name);
}

/* The same value was written at this joint already. */
static bool is_written(const figure *f, const value values[], int i)
{
    sct_quantity own, other;
    if (values[i].joint < 0) return false;
    write_size(f, values[i].v, own);
    for (int k = 0; k < i; k++) {
        if (values[k].joint != values[i].joint) continue;
        write_size(f, values[k].v, other);
        if (strcmp(own, other) == 0) return true;
    }
    return false;
}

static void write_value(const figure *f, const value *w)
{
    sct_quantity size;
    char place[2 * WORDS];
    const sct_point tip = ordinate(f, w->member, w->x, w->v), foot = on_axis(f, w->member, w->x);
    const double length = fmax(hypot(tip.x - foot.x, tip.y - foot.y), 1e-9);
    write_size(f, w->v, size);
    write_place(f, w, place);
    const sct_word_run runs[2] = {{size, ROLE_INK, true}, {place, ROLE_SOFT, false}};
    bool done = false;
    for (int n = place[0] != '\0' ? 2 : 1; n > 0 && !done; n--) /* without its place where that has no room */
        done = sct_marks_near(f->scene, tip, 4, (sct_point){(tip.x - foot.x) / length, (tip.y - foot.y) / length}, runs,
                              n);
    if (done) sct_sheet_circle(&f->scene->sheet, tip, DOT, ROLE_U2, ROLE_PAGE, HAIR);
}

static sct_status write_values(const figure *f, const sct_member_curves *curves)
{
    const int n_members = f->scene->result->n_members;
    int n = 0;
    value *values = sct_arena_array(f->scene->arena, (size_t)n_members * (LABELS_PER_MEMBER + 2), sizeof *values);
    if (values == NULL) return SCT_NO_MEMORY;
    for (int m = 0; m < n_members; m++) {
        if (curves[m].curve[0].n == 0) continue;
        if (f->of->is_envelope)
            values_of_envelope(f, m, &curves[m], values, &n);
        else
            values_of_curve(f, m, &curves[m].curve[0], values, &n);
    }
    if (n > 0) qsort(values, (size_t)n, sizeof *values, largest_first);
    if (f->scene->detail == DETAIL_OVERVIEW && n > LABELS_IN_OVERVIEW) n = LABELS_IN_OVERVIEW;
    if (f->scene->detail == DETAIL_SELECTIVE && n > LABELS_SELECTED) n = LABELS_SELECTED;
    for (int i = 0; i < n; i++)
        if (!is_written(f, values, i)) write_value(f, &values[i]);
    return SCT_OK;
}

/* ---- all -----------------------------------------------------------------------------------------------------------
 */

/* A free place for a bar of this height with its words: at the right, at the left, below everything. */
static sct_point place_of_bar(const figure *f, double width, double half)
{
    enum { ROWS = 9 };
    sct_choice choices[2 * ROWS + 1];
    sct_point corner, opposite;
    int n = 0;
    sct_labels_bounds(f->scene->labels, &corner, &opposite);
    for (int side = 0; side < 2; side++)
        for (int row = 0; row < ROWS; row++) {
            const double x = side == 0 ? fmin(opposite.x + 40, width - 76) : corner.x + 32;
            const double y = 0.5 * (corner.y + opposite.y) +
                             (row % 2 == 0 ? 0.5 : -0.5) * (row + 1) / 2 * (opposite.y - corner.y) / (ROWS + 1);
            choices[n] = (sct_choice){sct_box_level((sct_point){x, y}, 30, half + 2), n};
            n++;
        }
    choices[n] = (sct_choice){sct_box_level((sct_point){width - 76, opposite.y + half + 8}, 30, half + 2), n};
    const int label = sct_labels_ask(f->scene->labels, choices, n + 1);
    sct_labels_settle(f->scene->labels);
    const int choice = sct_labels_choice(f->scene->labels, label);
    const sct_box *box = &choices[choice < 0 ? n : choice].box;
    if (choice < 0) sct_labels_block(f->scene->labels, *box, SCT_SOLID, -1);
    return (sct_point){box->x - 26, box->y};
}

/* A bar as long as a round value. */
static void value_bar(const figure *f, double width)
{
    const bool us = f->scene->result->us_customary;
    const sct_display shown = f->of->kind == DIAGRAM_MOMENT ? SCT_SHOWN_MOMENT : SCT_SHOWN_FORCE;
    const double si = sct_shown_size(shown, us);
    const double most = 0.9 * f->largest / si, power = pow(10, floor(log10(most))), times = most / power;
    const double round = power * (times >= 5 ? 5 : times >= 2 ? 2 : 1), half = 0.5 * round * si * f->unit;
    const sct_point p = place_of_bar(f, width, half);
    char words[48];
    sct_sheet_line(&f->scene->sheet, (sct_point){p.x, p.y - half}, (sct_point){p.x, p.y + half}, ROLE_U2, MEDIUM);
    for (int end = -1; end <= 1; end += 2)
        sct_sheet_line(&f->scene->sheet, (sct_point){p.x - 4, p.y + end * half}, (sct_point){p.x + 4, p.y + end * half},
                       ROLE_U2, MEDIUM);
    sct_number_format(words, sizeof words, "%.10g\xE2\x80\xAF%s", round, sct_shown_unit(shown, us));
    sct_sheet_words(&f->scene->sheet, (sct_point){p.x + 8, p.y + BASELINE * LABEL}, LABEL, ANCHOR_START, ROLE_SOFT,
                    words);
}

static double mean_length(const sct_scene *scene)
{
    double sum = 0;
    for (int m = 0; m < scene->result->n_members; m++) sum += scene->sticks[m].length;
    return scene->result->n_members > 0 ? sum / scene->result->n_members : 0;
}

sct_status sct_diagram_draw(sct_scene *scene, const sct_diagram_of *of, double width, bool *drawn)
{
    const sct_result *r = scene->result;
    figure f = {.scene = scene, .of = of};
    sct_member_curves *curves;
    sct_status status = sct_curves_of(scene, of, &curves, &f.largest);
    *drawn = false;
    if (status != SCT_OK || !(f.largest > 0) || !isfinite(f.largest)) return status;
    *drawn = true;
    f.unit = fmin(LARGEST_OF_WIDTH * width, LARGEST_OF_MEMBER * mean_length(scene)) / f.largest;
    for (int m = 0; m < r->n_members; m++) {
        const sct_stick *s = &scene->sticks[m];
        sct_labels_block(scene->labels, sct_box_about(s->from, s->to, 2), SCT_BAND, m);
    }
    for (int j = 0; j < r->n_joints; j++) sct_support_block(scene, j);
    for (int j = 0; j < r->n_joints; j++) sct_support_draw(scene, j);
    status = draw_curves(&f, curves);
    if (status != SCT_OK) return status;
    for (int m = 0; m < r->n_members; m++)
        sct_sheet_line(&scene->sheet, scene->sticks[m].from, scene->sticks[m].to, ROLE_INK, THICK);
    sct_ends_draw(scene);
    sct_ends_block(scene);
    status = write_values(&f, curves);
    value_bar(&f, width);
    return status;
}

void sct_diagram_words(const sct_scene *scene, const sct_diagram_of *of, char *out, size_t room)
{
    static const char *const KINDS[] = {"Bending moment", "Shear force", "Axial force"};
    static const char *const SIDES[2][3] = {
        {"on the side in tension", "positive to the left of the member's direction",
         "tension to the left of the member's direction"},
        {"on the side in tension", "positive along the local axis of that plane", "tension along local axis 1"}};
    const sct_result *r = scene->result;
    const sct_display shown = of->kind == DIAGRAM_MOMENT ? SCT_SHOWN_MOMENT : SCT_SHOWN_FORCE;
    const char *plane = r->dimensions == 2 || of->kind == DIAGRAM_AXIAL ? ""
                        : of->plane == 0                                ? " in plane"
                                                                        : " out of plane";
    char which[160] = "envelope of the combinations for strength";
    if (!of->is_envelope && r->n_combinations > 0)
        sct_words_fit(r->combinations[scene->options.combination], 300, TEXT, false, which, sizeof which);
    sct_number_format(out, room, "%s%s (%s), %s, %s", KINDS[of->kind], plane, which,
                      sct_shown_unit(shown, r->us_customary), SIDES[r->dimensions - 2][of->kind]);
}

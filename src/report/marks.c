/* Marks, values and names: candidates for the placing algorithm. */
#include "marks.h"

#include <math.h>
#include <string.h>

#include "quantity.h"

static const double OFF_BAND = 3.3, BAND_MARGIN = 1, HALF_HEIGHT = 0.5 * 11; /* [u] */
static const double OFF_PREFERRED = 2.5, OFF_PREFERRED_LEVEL = 1.5;
static const double LEADER_DOT = 1.9, LEADER_CASING = 3, LEADER_GAP = 3;
static const double DEGREES = 57.29577951308232, TURN = 6.283185307179586;
enum { MARK_ROOM = 96, NAME_WIDTH = 110, DIRECTIONS = 36, WAYS = 12, LEFT_NAMED = 12 };

typedef struct mark {
    char name[MARK_ROOM];
    sct_quantity value;
    sct_word_run runs[2];
    double half; /* half width [u] */
} mark;

static void write_mark(const sct_scene *scene, int member, mark *out)
{
    const sct_member_result *m = &scene->result->members[member];
    sct_words_fit(m->name, NAME_WIDTH, LABEL, false, out->name, sizeof out->name);
    sct_quantity_utilisation(out->value, m->utilisation);
    out->runs[0] = (sct_word_run){out->name, ROLE_SOFT, false};
    out->runs[1] = (sct_word_run){out->value, m->utilisation > 1 ? ROLE_OVER : ROLE_INK, true};
    out->half = 0.5 * sct_runs_width(out->runs, 2, LABEL);
}

static sct_point along(const sct_stick *s, double t)
{
    return (sct_point){s->from.x + t * (s->to.x - s->from.x), s->from.y + t * (s->to.y - s->from.y)};
}

void sct_marks_block(sct_scene *scene)
{
    const sct_result *r = scene->result;
    for (int m = 0; m < r->n_members; m++) {
        const sct_stick *s = &scene->sticks[m];
        sct_labels_block(scene->labels, sct_box_about(s->from, s->to, 0.5 * s->depth + BAND_MARGIN), SCT_BAND, m);
    }
    for (int j = 0; j < r->n_joints; j++)
        sct_labels_block(scene->labels, sct_box_level(scene->at[j], scene->ring + 0.6, scene->ring + 0.6), SCT_SOLID,
                         -1);
}

/* ---- along members -------------------------------------------------------------------------------------------------
 */

/* The unit vector in which text along a member reads: to the right, upwards when upright. */
static sct_point reading(const sct_stick *s)
{
    const double dx = (s->to.x - s->from.x) / s->length, dy = (s->to.y - s->from.y) / s->length;
    if (fabs(dx) < 1e-3) return (sct_point){0, -1};
    return dx > 0 ? (sct_point){dx, dy} : (sct_point){-dx, -dy};
}

/* Webs are written on the side of the nearer support, chords on their free side: +1 or -1 along (-d.y, d.x). */
static double preferred_side(const sct_scene *scene, const sct_stick *s, sct_point d)
{
    const sct_result *r = scene->result;
    const double turned = d.x * (s->to.x - s->from.x) + d.y * (s->to.y - s->from.y) < 0 ? -1 : 1;
    if (s->outside != 0) return s->outside * turned;
    const sct_point middle = along(s, 0.5);
    double nearest = INFINITY, side = -1;
    for (int j = 0; j < r->n_joints; j++) {
        if (r->joints[j].n_held == 0) continue;
        const double x = scene->at[j].x - middle.x, y = scene->at[j].y - middle.y;
        if (!(hypot(x, y) < nearest - 1e-6)) continue;
        nearest = hypot(x, y);
        side = -d.y * x + d.x * y > 0 ? 1 : -1;
    }
    return side;
}

static const double ALIGNED_AT[] = {0.5, 0.44, 0.56, 0.38, 0.62, 0.32, 0.68, 0.26, 0.74, 0.2, 0.8};
static const double LEVEL_AT[] = {0.5, 0.4, 0.6, 0.3, 0.7};
enum { N_ALIGNED = 11, N_LEVEL = 5, N_ALONG = 2 * (N_ALIGNED + N_LEVEL) };

static int candidates_along(const sct_scene *scene, const sct_stick *s, double half, sct_choice out[N_ALONG])
{
    if (!(s->length > 1)) return 0;
    const sct_point d = reading(s), n = {-d.y, d.x};
    const double preferred = preferred_side(scene, s, d);
    const double off = 0.5 * s->depth + OFF_BAND + HALF_HEIGHT;
    const double level_off = 0.5 * s->depth + OFF_BAND + fabs(n.x) * half + fabs(n.y) * HALF_HEIGHT;
    int k = 0;
    for (int i = 0; i < N_ALIGNED; i++)
        for (int turn = 0; turn < 2; turn++) {
            const double side = turn == 0 ? preferred : -preferred;
            const sct_point p = along(s, ALIGNED_AT[i]);
            out[k++] = (sct_choice){{p.x + side * off * n.x, p.y + side * off * n.y, d.x, d.y, half, HALF_HEIGHT},
                                    14 * fabs(ALIGNED_AT[i] - 0.5) + turn * OFF_PREFERRED};
        }
    if (fabs(d.y) < 1e-3) return k; /* a level member: level is aligned */
    for (int i = 0; i < N_LEVEL; i++)
        for (int turn = 0; turn < 2; turn++) {
            const double side = turn == 0 ? preferred : -preferred;
            const sct_point p = along(s, LEVEL_AT[i]);
            const sct_point middle = {p.x + side * level_off * n.x, p.y + side * level_off * n.y};
            out[k++] = (sct_choice){sct_box_level(middle, half, HALF_HEIGHT),
                                    7 + 10 * fabs(LEVEL_AT[i] - 0.5) + turn * OFF_PREFERRED_LEVEL};
        }
    return k;
}

/* Words in the middle of a box. */
static void ink(sct_scene *scene, const sct_box *box, const sct_word_run runs[], int n)
{
    const double down = BASELINE * LABEL;
    sct_sheet_runs(&scene->sheet, (sct_point){box->x - down * box->s, box->y + down * box->c}, LABEL, ANCHOR_MIDDLE,
                   atan2(box->s, box->c) * DEGREES, runs, n);
}

void sct_marks_members(sct_scene *scene)
{
    const sct_result *r = scene->result;
    sct_choice choices[N_ALONG];
    mark m;
    int first = -1, label = 0;
    for (int i = 0; i < r->n_members; i++) {
        if (!scene->sticks[i].is_labelled) continue;
        write_mark(scene, i, &m);
        const int asked =
            sct_labels_ask(scene->labels, choices, candidates_along(scene, &scene->sticks[i], m.half, choices));
        if (first < 0) first = asked;
    }
    sct_labels_settle(scene->labels);
    if (first < 0 || sct_labels_failed(scene->labels)) return;
    label = first;
    for (int i = 0; i < r->n_members; i++) {
        if (!scene->sticks[i].is_labelled) continue;
        const int choice = sct_labels_choice(scene->labels, label++);
        if (choice < 0) continue;
        write_mark(scene, i, &m);
        candidates_along(scene, &scene->sticks[i], m.half, choices);
        ink(scene, &choices[choice].box, m.runs, 2);
        scene->sticks[i].is_labelled = false; /* done: what is left gets leaders */
    }
}

/* ---- near points ---------------------------------------------------------------------------------------------------
 */

/* Twelve directions from up, five distances. */
enum { N_NEAR = WAYS * 5 };

static int candidates_near(sct_point at, double distance, sct_point towards, double half, sct_choice out[N_NEAR])
{
    const bool anywhere = towards.x == 0 && towards.y == 0;
    static const double COST[WAYS] = {0, 0.5, 1, 2, 1, 0.5, 0, 0.5, 1, 2, 1, 0.5};
    int k = 0;
    for (int ring = 0; ring < 5; ring++)
        for (int way = 0; way < WAYS; way++) {
            const double x = sin(TURN * way / WAYS), y = -cos(TURN * way / WAYS), off = distance + 3 * ring;
            const double cost = anywhere ? COST[way] : 2 - 2 * (x * towards.x + y * towards.y);
            /* as far along the way as brings the box's nearest edge to `off` */
            const double reach = fmin(half / fmax(fabs(x), 1e-9), HALF_HEIGHT / fmax(fabs(y), 1e-9));
            const sct_point middle = {at.x + x * (off + reach), at.y + y * (off + reach)};
            out[k++] = (sct_choice){sct_box_level(middle, half, HALF_HEIGHT), cost + 0.6 * 3 * ring};
        }
    return k;
}

bool sct_marks_near(sct_scene *scene, sct_point at, double distance, sct_point way, const sct_word_run runs[], int n)
{
    sct_choice choices[N_NEAR];
    const int n_choices = candidates_near(at, distance, way, 0.5 * sct_runs_width(runs, n, LABEL), choices);
    const int label = sct_labels_ask(scene->labels, choices, n_choices);
    sct_labels_settle(scene->labels);
    const int choice = sct_labels_choice(scene->labels, label);
    if (choice < 0) return false;
    ink(scene, &choices[choice].box, runs, n);
    return true;
}

static void name_joint(sct_scene *scene, int joint)
{
    char name[MARK_ROOM];
    sct_words_fit(scene->result->joints[joint].name, NAME_WIDTH, LABEL, false, name, sizeof name);
    sct_marks_near(scene, scene->at[joint], scene->ring + 2.5, (sct_point){0, 0},
                   &(sct_word_run){name, ROLE_SOFT, false}, 1);
}

void sct_marks_joints(sct_scene *scene)
{
    for (int held = 1; held >= 0; held--) /* supports first */
        for (int j = 0; j < scene->result->n_joints; j++)
            if (scene->is_named[j] && (scene->result->joints[j].n_held > 0) == (held == 1)) name_joint(scene, j);
}

/* ---- leaders -------------------------------------------------------------------------------------------------------
 */

typedef struct leader {
    sct_point from, to;
    sct_box line, words;
    bool to_right;
    double cost;
} leader;

static leader leader_at(const sct_stick *s, double t, int direction, double length, double half)
{
    const double x = cos(TURN * direction / DIRECTIONS), y = sin(TURN * direction / DIRECTIONS);
    leader l = {.from = along(s, t), .to_right = x > -1e-9};
    l.to = (sct_point){l.from.x + length * x, l.from.y + length * y};
    l.line = sct_box_about(l.from, l.to, 1.5);
    l.words =
        sct_box_level((sct_point){l.to.x + (l.to_right ? 1 : -1) * (LEADER_GAP + half), l.to.y}, half, HALF_HEIGHT);
    l.cost = 18 + 0.16 * length + 24 * fabs(t - 0.5);
    return l;
}

/* The cheapest free leader of a member; a start on another band counts as crossing three. */
static bool find_leader(sct_scene *scene, int member, double half, leader *best)
{
    static const double STARTS[] = {0.5, 0.42, 0.58, 0.34, 0.66, 0.26, 0.74, 0.18, 0.82};
    static const double LENGTHS[] = {20, 30, 42, 56, 72, 90, 112, 140};
    const sct_stick *s = &scene->sticks[member];
    *best = (leader){.cost = INFINITY};
    for (size_t i = 0; i < sizeof STARTS / sizeof *STARTS; i++)
        for (size_t k = 0; k < sizeof LENGTHS / sizeof *LENGTHS; k++)
            for (int direction = 0; direction < DIRECTIONS; direction++) {
                leader l = leader_at(s, STARTS[i], direction, LENGTHS[k], half);
                if (l.cost >= best->cost || !sct_labels_are_clear_of(scene->labels, &l.words, SCT_SOLID | SCT_BAND) ||
                    !sct_labels_are_clear_of(scene->labels, &l.line, SCT_SOLID))
                    continue;
                const sct_box dot = sct_box_level(l.from, LEADER_DOT + 0.5, LEADER_DOT + 0.5);
                l.cost += 26 * sct_labels_crossed(scene->labels, &l.line, SCT_BAND, member);
                l.cost += 78 * sct_labels_crossed(scene->labels, &dot, SCT_BAND, member);
                if (l.cost < best->cost) *best = l;
            }
    return best->cost < INFINITY;
}

static void lead(sct_scene *scene, int member)
{
    sct_stick *s = &scene->sticks[member];
    mark m;
    leader l;
    if (!s->is_labelled || !(s->length > 1)) return;
    write_mark(scene, member, &m);
    if (!find_leader(scene, member, m.half, &l)) return;
    sct_labels_block(scene->labels, l.words, SCT_SOLID, -1);
    sct_labels_block(scene->labels, l.line, SCT_SOLID, -1);
    sct_sheet_line(&scene->sheet, l.from, l.to, ROLE_PAGE, LEADER_CASING);
    sct_sheet_line(&scene->sheet, l.from, l.to, ROLE_SOFT, HAIR);
    sct_sheet_circle(&scene->sheet, l.from, LEADER_DOT, ROLE_SOFT, ROLE_PAGE, HAIR);
    const double x = l.to.x + (l.to_right ? LEADER_GAP : -LEADER_GAP);
    sct_sheet_runs(&scene->sheet, (sct_point){x, l.to.y + BASELINE * LABEL}, LABEL,
                   l.to_right ? ANCHOR_START : ANCHOR_END, 0, m.runs, 2);
    s->is_labelled = false;
}

void sct_marks_leaders(sct_scene *scene)
{
    const sct_result *r = scene->result;
    int worst = 0;
    for (int i = 0; i < r->n_members; i++)
        if (r->members[i].utilisation > r->members[worst].utilisation) worst = i;
    lead(scene, worst); /* the heading names it: it takes its place first */
    for (int i = 0; i < r->n_members; i++) lead(scene, i);
}

void sct_marks_left(const sct_scene *scene, sct_text *out)
{
    int n = 0;
    for (int i = 0; i < scene->result->n_members; i++) {
        if (!scene->sticks[i].is_labelled || n++ >= LEFT_NAMED) continue;
        char name[MARK_ROOM];
        sct_words_fit(scene->result->members[i].name, NAME_WIDTH, LABEL, false, name, sizeof name);
        sct_text_format(out, "%s%s", n == 1 ? "Not labelled: " : ", ", name);
    }
    if (n > LEFT_NAMED) sct_text_format(out, " and %d more", n - LEFT_NAMED);
    if (n > 0) sct_text_add(out, " (see schedule).");
}

/* What a plane truss has of its own. */
#include "drawing_plane.h"

#include <math.h>
#include <stdlib.h>

#include "band.h"
#include "base/number.h"
#include "quantity.h"
#include "symbols.h"

void sct_plane_members(sct_scene *scene)
{
    for (int layer = 0; layer < 3; layer++)
        for (int m = 0; m < scene->result->n_members; m++) {
            const sct_stick *s = &scene->sticks[m];
            if (layer == (s->outside == 0 ? 0 : s->sense == SENSE_TENSION ? 2 : 1)) sct_band_member(scene, m);
        }
}

/* ---- slope ---------------------------------------------------------------------------------------------------------
 */

static bool is_pitched(const sct_stick *s)
{
    const double dx = s->to.x - s->from.x, dy = s->to.y - s->from.y;
    /* its free side is up; steeper than 35 degrees it is more likely an end post */
    return s->outside * dx < 0 && fabs(dy) < 0.7 * fabs(dx) && fabs(dy) > 0.03 * fabs(dx);
}

/* The one slope of all pitched top chords, rise to run; 0 when they differ or there are none. */
static double common_slope(const sct_scene *scene)
{
    double slope = 0;
    for (int m = 0; m < scene->result->n_members; m++) {
        const sct_stick *s = &scene->sticks[m];
        if (!is_pitched(s)) continue;
        const double its = fabs((s->to.y - s->from.y) / (s->to.x - s->from.x));
        if (slope != 0 && fabs(its - slope) > 1e-3 * slope) return 0;
        if (slope == 0) slope = its;
    }
    return slope;
}

/* Two whole numbers up to 20 whose ratio is the slope; false when it is not simple. */
static bool simple_ratio(double slope, int *rise, int *run)
{
    for (*rise = 1; *rise <= 5; ++*rise) {
        const double exact = *rise / slope;
        *run = (int)(exact + 0.5);
        if (*run >= 1 && *run <= 20 && fabs(exact - *run) < 0.004 * exact) return true;
    }
    return false;
}

static void draw_slope(sct_scene *scene, sct_point corner, double height, bool rises_right, int rise, int run)
{
    char words[16];
    const double x0 = corner.x, x1 = corner.x + 30, y = corner.y;
    const sct_point triangle[3] = {{x0, y}, {x1, y}, {rises_right ? x1 : x0, y - height}};
    sct_sheet_polygon(&scene->sheet, triangle, 3, ROLE_NONE, ROLE_SOFT, THIN);
    sct_number_format(words, sizeof words, "%d", run);
    sct_sheet_words(&scene->sheet, (sct_point){x0 + 15, y + 12}, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, words);
    sct_number_format(words, sizeof words, "%d", rise);
    sct_sheet_words(&scene->sheet, (sct_point){rises_right ? x1 + 4 : x0 - 4, y - 0.5 * height + 4}, LABEL,
                    rises_right ? ANCHOR_START : ANCHOR_END, ROLE_SOFT, words);
}

void sct_plane_slope(sct_scene *scene)
{
    enum { MOST = 240 };
    static const double OFF[] = {26, 34, 44, 56};
    sct_choice choices[MOST];
    bool rises_right[MOST];
    int n = 0, rise, run;
    const double slope = common_slope(scene);
    if (slope == 0 || !simple_ratio(slope, &rise, &run)) return;
    const double height = fmin(fmax(30 * slope, 6), 22), half_height = 0.5 * height + 8;
    for (int m = 0; m < scene->result->n_members && n + 4 <= MOST; m++) {
        const sct_stick *s = &scene->sticks[m];
        if (!is_pitched(s)) continue;
        const sct_point middle = {0.5 * (s->from.x + s->to.x), 0.5 * (s->from.y + s->to.y)};
        const bool right = (s->to.y - s->from.y) * (s->to.x - s->from.x) < 0;
        for (int i = 0; i < 4; i++) {
            rises_right[n] = right;
            const sct_point at = {middle.x + (right ? -10 : 10), middle.y - 0.5 * s->depth - OFF[i]};
            choices[n++] = (sct_choice){sct_box_level(at, 24, half_height), OFF[i] + 0.01 * fabs(at.x - scene->low.x)};
        }
    }
    const int label = sct_labels_ask(scene->labels, choices, n);
    sct_labels_settle(scene->labels);
    const int choice = sct_labels_choice(scene->labels, label);
    if (choice < 0) return;
    const sct_box *box = &choices[choice].box;
    draw_slope(scene, (sct_point){box->x - 15, box->y + half_height - 14}, height, rises_right[choice], rise, run);
}

/* ---- dimensions ----------------------------------------------------------------------------------------------------
 */

static const double OFF_OBJECT = 24, NEXT_LINE = 22, PAST_LINE = 4, OFF_JOINT = 8, SAME = 5e-4; /* [u], last one [m] */
enum { POINTS_MOST = 64, RUNS_MOST = 24 };

typedef struct chain {
    double at[POINTS_MOST]; /* [m] along the axis, rising */
    int n;
} chain;

static int by_size(const void *left, const void *right)
{
    const double p = *(const double *)left, q = *(const double *)right;
    return p < q ? -1 : p > q;
}

/* Where a joint lies along an axis of the view: 0 to the right, 1 upwards. */
static double place(const sct_scene *scene, int joint, int axis)
{
    return scene->result->joints[joint].at[scene->axis[axis]];
}

/* The places along `axis` of the joints that lie at `level` across it (NAN: of all joints), with both ends of the
 * truss. Too many: the ends only. */
static chain chain_at(const sct_scene *scene, int axis, double level)
{
    const sct_result *r = scene->result;
    chain c = {.n = 0};
    double low = INFINITY, high = -INFINITY;
    bool full = false;
    for (int j = 0; j < r->n_joints; j++) {
        const double at = place(scene, j, axis);
        low = fmin(low, at);
        high = fmax(high, at);
        if (!isnan(level) && fabs(place(scene, j, 1 - axis) - level) > SAME) continue;
        bool known = false;
        for (int i = 0; i < c.n; i++) known |= fabs(c.at[i] - at) <= SAME;
        if (known) continue;
        if (c.n >= POINTS_MOST - 2) {
            full = true;
            continue;
        }
        c.at[c.n++] = at;
    }
    if (full) c.n = 0;
    const double ends[2] = {low, high};
    for (int e = 0; e < 2; e++) {
        bool known = false;
        for (int i = 0; i < c.n; i++) known |= fabs(c.at[i] - ends[e]) <= SAME;
        if (!known) c.at[c.n++] = ends[e];
    }
    qsort(c.at, (size_t)c.n, sizeof *c.at, by_size);
    return c;
}

/* The joints that tell the panels best: those of the bottom chord, of the top chord, or all. */
static chain panels(const sct_scene *scene, int axis)
{
    const sct_result *r = scene->result;
    double low = INFINITY, high = -INFINITY;
    for (int j = 0; j < r->n_joints; j++) {
        low = fmin(low, place(scene, j, 1 - axis));
        high = fmax(high, place(scene, j, 1 - axis));
    }
    chain c = chain_at(scene, axis, low);
    if (c.n >= 4 || (c.n == 3 && r->n_joints <= 6)) return c;
    c = chain_at(scene, axis, high);
    return c.n >= 4 ? c : chain_at(scene, axis, NAN);
}

typedef struct run {
    int from, to;
    char words[3 * SCT_QUANTITY_ROOM];
} run;

/* Equal panels written as one; whole: with the sum behind. */
static void write_run(const sct_result *r, const chain *c, run *out, bool whole)
{
    const int n = out->to - out->from;
    const double total = c->at[out->to] - c->at[out->from], unit = sct_length_unit(r->us_customary);
    /* two decimals when they recompute, three otherwise */
    const double rounded = n * (floor(total / n / unit * 100 + 0.5) / 100);
    const int digits = fabs(rounded - total / unit) < 0.005 ? 2 : 3;
    sct_quantity one, all;
    sct_quantity_length(one, total / n, n > 1 ? digits : 2, r->us_customary);
    sct_quantity_length(all, total, 2, r->us_customary);
    if (n == 1)
        sct_number_format(out->words, sizeof out->words, "%s", one);
    else if (whole)
        sct_number_format(out->words, sizeof out->words, "%d \xC3\x97 %s = %s", n, one, all);
    else
        sct_number_format(out->words, sizeof out->words, "%d \xC3\x97 %s", n, one);
}

/* Runs of equal panels; -1 when some words would not fit or ticks would touch. */
static int find_runs(const sct_scene *scene, const chain *c, run runs[RUNS_MOST])
{
    int n = 0;
    for (int i = 0; i + 1 < c->n; n++) {
        if (n == RUNS_MOST) return -1;
        int to = i + 1;
        const double panel = c->at[to] - c->at[i];
        if (panel * scene->scale < 7) return -1;
        while (to + 1 < c->n && fabs(c->at[to + 1] - c->at[to] - panel) <= SAME) to++;
        runs[n] = (run){.from = i, .to = to};
        i = to;
    }
    for (int i = 0; i < n; i++) {
        write_run(scene->result, c, &runs[i], n == 1);
        const double drawn = (c->at[runs[i].to] - c->at[runs[i].from]) * scene->scale;
        if (sct_words_width(runs[i].words, TEXT, false) + 6 > drawn) return -1;
    }
    return n;
}

/* A point of the dimension line: `across` is the line's y for widths, its x for heights [u]. */
static sct_point on_line(const sct_scene *scene, const chain *c, int i, int axis, double across)
{
    const double from_low = (c->at[i] - c->at[0]) * scene->scale;
    return axis == 0 ? (sct_point){scene->low.x + from_low, across} : (sct_point){across, scene->high.y - from_low};
}

static void one_line(sct_scene *scene, const chain *c, const run runs[], int n, int axis, double across)
{
    const sct_point along = axis == 0 ? (sct_point){1, 0} : (sct_point){0, -1};
    sct_point at[POINTS_MOST] = {0};
    for (int i = 0; i < c->n; i++) at[i] = on_line(scene, c, i, axis, across);
    sct_dimension(&scene->sheet, at, c->n, along);
    for (int i = 0; i < n; i++) {
        const sct_point p = at[runs[i].from], q = at[runs[i].to];
        if (axis == 1 && sct_words_width(runs[i].words, TEXT, false) + 8 > p.y - q.y) { /* too short to write along */
            sct_sheet_words(&scene->sheet, (sct_point){q.x, q.y - 8}, TEXT, ANCHOR_MIDDLE, ROLE_SOFT, runs[i].words);
            continue;
        }
        sct_dimension_words(&scene->sheet, p, q, along, runs[i].words);
        const sct_point middle = {0.5 * (p.x + q.x) + 9 * along.y, 0.5 * (p.y + q.y) - 9 * along.x};
        const double half = 0.5 * sct_words_width(runs[i].words, TEXT, false);
        sct_labels_block(scene->labels, (sct_box){middle.x, middle.y, along.x, along.y, half, 6}, SCT_SOLID, -1);
    }
    sct_labels_block(scene->labels, sct_box_about(at[0], at[c->n - 1], 4), SCT_BAND, -1);
}

/* The joint nearest to the dimension line among those at one end: extension lines start there. */
static sct_point end_joint(const sct_scene *scene, const chain *c, int i, int axis)
{
    const sct_result *r = scene->result;
    sct_point best = {0, 0};
    double nearest = -INFINITY;
    for (int j = 0; j < r->n_joints; j++) {
        if (fabs(place(scene, j, axis) - c->at[i]) > SAME) continue;
        const double towards = axis == 0 ? scene->at[j].y : scene->at[j].x;
        if (towards > nearest) {
            nearest = towards;
            best = scene->at[j];
        }
    }
    return best;
}

static void extension(sct_scene *scene, const chain *c, int i, int axis, double across)
{
    const sct_point from = end_joint(scene, c, i, axis);
    const sct_point start =
        axis == 0 ? (sct_point){from.x, from.y + OFF_JOINT} : (sct_point){from.x + OFF_JOINT, from.y};
    const sct_point end = axis == 0 ? (sct_point){from.x, across + PAST_LINE} : (sct_point){across + PAST_LINE, from.y};
    sct_line_round_labels(&scene->sheet, scene->labels, start, end, ROLE_LINE);
}

/* Chains along one axis; the extension lines are drawn before the words of the lines block them. */
static void dimension_axis(sct_scene *scene, int axis, bool in_panels, double across)
{
    const sct_result *r = scene->result;
    chain ends = chain_at(scene, axis, INFINITY), c = in_panels ? panels(scene, axis) : ends;
    if (!((ends.at[ends.n - 1] - ends.at[0]) * scene->scale > 7)) return;
    run runs[RUNS_MOST], whole = {.from = 0, .to = ends.n - 1};
    int n = find_runs(scene, &c, runs);
    if (n <= 0) {
        c = ends;
        runs[0] = whole;
        write_run(r, &c, &runs[0], true);
        n = 1;
    }
    const double last = across + (n > 1 ? NEXT_LINE : 0);
    extension(scene, &c, 0, axis, last);
    extension(scene, &c, c.n - 1, axis, last);
    for (int i = 1; i < n; i++) extension(scene, &c, runs[i].from, axis, across);
    one_line(scene, &c, runs, n, axis, across);
    if (n == 1) return;
    write_run(r, &ends, &whole, true);
    one_line(scene, &ends, &whole, 1, axis, last);
}

void sct_plane_dimensions(sct_scene *scene)
{
    sct_point corner, opposite;
    const bool is_tall = scene->high.y - scene->low.y > scene->high.x - scene->low.x;
    sct_labels_bounds(scene->labels, &corner, &opposite);
    dimension_axis(scene, 0, true, opposite.y + OFF_OBJECT);
    dimension_axis(scene, 1, is_tall, opposite.x + OFF_OBJECT);
}

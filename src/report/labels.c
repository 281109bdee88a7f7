/* Placing labels: a grid of rectangles, candidates with costs, and greedy passes. */
#include "labels.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const double CLEAR = 1.5; /* [u] between a label and anything else */
static const double CELL = 40;   /* [u] side of a cell of the grid */
enum { PASSES = 3 };

typedef struct blocker {
    sct_box box;
    sct_point low, high; /* upright bounds */
    int kind, owner;
    int seen; /* number of the last query that met it */
} blocker;

typedef struct entry {
    int blocker, next;
} entry;

typedef struct candidate {
    sct_choice choice;
    int number; /* in the order they were given */
    bool alive; /* keeps clear of what is fixed */
} candidate;

typedef struct wish {
    int first, n; /* of the candidates */
    int n_alive, chosen;
} wish;

struct sct_labels {
    sct_point corner, opposite;
    int columns, rows, query;
    int *heads; /* first entry of each cell, -1: none */
    entry *entries;
    blocker *blockers;
    candidate *candidates;
    wish *wishes;
    int n_entries, n_blockers, n_candidates, n_wishes, n_settled;
    int room_entries, room_blockers, room_candidates, room_wishes;
    bool failed;
};

/* ---- rectangles ----------------------------------------------------------------------------------------------------
 */

sct_box sct_box_level(sct_point middle, double a, double b)
{
    return (sct_box){middle.x, middle.y, 1, 0, a, b};
}

sct_box sct_box_about(sct_point p, sct_point q, double b)
{
    const double dx = q.x - p.x, dy = q.y - p.y, L = hypot(dx, dy);
    const bool flat = !(L > 1e-9);
    return (sct_box){0.5 * (p.x + q.x), 0.5 * (p.y + q.y), flat ? 1 : dx / L, flat ? 0 : dy / L, 0.5 * L, b};
}

sct_point sct_box_reach(const sct_box *box)
{
    return (sct_point){fabs(box->c) * box->a + fabs(box->s) * box->b, fabs(box->s) * box->a + fabs(box->c) * box->b};
}

/* Apart along one of the two axes of p? */
static bool apart(const sct_box *p, const sct_box *q, double clear)
{
    const double dx = q->x - p->x, dy = q->y - p->y;
    const double cosine = fabs(p->c * q->c + p->s * q->s), sine = fabs(p->c * q->s - p->s * q->c);
    return fabs(dx * p->c + dy * p->s) >= p->a + q->a * cosine + q->b * sine + clear ||
           fabs(dy * p->c - dx * p->s) >= p->b + q->a * sine + q->b * cosine + clear;
}

bool sct_boxes_meet(const sct_box *p, const sct_box *q, double clear)
{
    return !apart(p, q, clear) && !apart(q, p, clear);
}

/* ---- the grid ------------------------------------------------------------------------------------------------------
 */

sct_labels *sct_labels_new(sct_point corner, sct_point opposite)
{
    sct_labels *labels = calloc(1, sizeof *labels);
    if (labels == NULL) return NULL;
    labels->corner = corner;
    labels->opposite = opposite;
    labels->columns = 1 + (int)((opposite.x - corner.x) / CELL);
    labels->rows = 1 + (int)((opposite.y - corner.y) / CELL);
    const size_t n = (size_t)labels->columns * (size_t)labels->rows;
    labels->heads = malloc(n * sizeof *labels->heads);
    if (labels->heads == NULL) {
        sct_labels_free(labels);
        return NULL;
    }
    for (size_t i = 0; i < n; i++) labels->heads[i] = -1;
    return labels;
}

void sct_labels_free(sct_labels *labels)
{
    if (labels == NULL) return;
    free(labels->heads);
    free(labels->entries);
    free(labels->blockers);
    free(labels->candidates);
    free(labels->wishes);
    free(labels);
}

bool sct_labels_failed(const sct_labels *labels)
{
    return labels->failed;
}

/* Room for `more` items behind n; false when memory is out. */
static bool make_room(sct_labels *labels, void **items, int n, int more, int *room, size_t size)
{
    if (labels->failed) return false;
    if (n + more <= *room) return true;
    const int wanted = n + more > 2 * *room ? n + more + 64 : 2 * *room;
    void *bigger = realloc(*items, (size_t)wanted * size);
    if (bigger == NULL) {
        labels->failed = true;
        return false;
    }
    *items = bigger;
    *room = wanted;
    return true;
}

static int cell_of(double at, double from, int n)
{
    const double i = floor((at - from) / CELL);
    return i < 0 ? 0 : i > n - 1 ? n - 1 : (int)i;
}

typedef struct cells {
    int left, right, top, bottom;
} cells;

static cells cells_of(const sct_labels *labels, sct_point low, sct_point high)
{
    return (cells){cell_of(low.x, labels->corner.x, labels->columns),
                   cell_of(high.x, labels->corner.x, labels->columns), cell_of(low.y, labels->corner.y, labels->rows),
                   cell_of(high.y, labels->corner.y, labels->rows)};
}

void sct_labels_block(sct_labels *labels, sct_box box, int kind, int owner)
{
    const sct_point reach = sct_box_reach(&box);
    const blocker b = {.box = box,
                       .low = {box.x - reach.x, box.y - reach.y},
                       .high = {box.x + reach.x, box.y + reach.y},
                       .kind = kind,
                       .owner = owner};
    const cells at = cells_of(labels, b.low, b.high);
    const int n_cells = (at.right - at.left + 1) * (at.bottom - at.top + 1);
    if (!make_room(labels, (void **)&labels->blockers, labels->n_blockers, 1, &labels->room_blockers, sizeof b) ||
        !make_room(labels, (void **)&labels->entries, labels->n_entries, n_cells, &labels->room_entries,
                   sizeof *labels->entries))
        return;
    labels->blockers[labels->n_blockers] = b;
    for (int row = at.top; row <= at.bottom; row++)
        for (int column = at.left; column <= at.right; column++) {
            int *head = &labels->heads[row * labels->columns + column];
            labels->entries[labels->n_entries] = (entry){labels->n_blockers, *head};
            *head = labels->n_entries++;
        }
    labels->n_blockers++;
}

/* Counts what the box meets, up to `most`. */
static int meets(sct_labels *labels, const sct_box *box, int kinds, int owner, double clear, int most)
{
    const sct_point reach = sct_box_reach(box);
    const sct_point low = {box->x - reach.x - clear, box->y - reach.y - clear};
    const sct_point high = {box->x + reach.x + clear, box->y + reach.y + clear};
    const cells at = cells_of(labels, low, high);
    const int query = ++labels->query;
    int n = 0;
    for (int row = at.top; row <= at.bottom; row++)
        for (int column = at.left; column <= at.right; column++)
            for (int e = labels->heads[row * labels->columns + column]; e >= 0; e = labels->entries[e].next) {
                blocker *b = &labels->blockers[labels->entries[e].blocker];
                if (b->seen == query) continue;
                b->seen = query;
                if ((b->kind & kinds) == 0 || (owner >= 0 && b->owner == owner)) continue;
                if (b->low.x >= high.x || b->high.x <= low.x || b->low.y >= high.y || b->high.y <= low.y) continue;
                if (sct_boxes_meet(box, &b->box, clear) && ++n >= most) return n;
            }
    return n;
}

static bool is_inside(const sct_labels *labels, const sct_box *box)
{
    const sct_point reach = sct_box_reach(box);
    return box->x - reach.x >= labels->corner.x && box->x + reach.x <= labels->opposite.x &&
           box->y - reach.y >= labels->corner.y && box->y + reach.y <= labels->opposite.y;
}

bool sct_labels_are_clear_of(sct_labels *labels, const sct_box *box, int kinds)
{
    return is_inside(labels, box) && meets(labels, box, kinds, -1, CLEAR, 1) == 0;
}

int sct_labels_crossed(sct_labels *labels, const sct_box *box, int kinds, int owner)
{
    return meets(labels, box, kinds, owner, 0, 1 << 20);
}

/* ---- wishes --------------------------------------------------------------------------------------------------------
 */

int sct_labels_ask(sct_labels *labels, const sct_choice choices[], int n)
{
    if (!make_room(labels, (void **)&labels->wishes, labels->n_wishes, 1, &labels->room_wishes,
                   sizeof *labels->wishes) ||
        !make_room(labels, (void **)&labels->candidates, labels->n_candidates, n, &labels->room_candidates,
                   sizeof *labels->candidates))
        return -1;
    labels->wishes[labels->n_wishes] = (wish){labels->n_candidates, n, 0, -1};
    for (int i = 0; i < n; i++) labels->candidates[labels->n_candidates++] = (candidate){choices[i], i, false};
    return labels->n_wishes++;
}

static int by_cost(const void *left, const void *right)
{
    const candidate *p = left, *q = right;
    if (p->choice.cost != q->choice.cost) return p->choice.cost < q->choice.cost ? -1 : 1;
    return p->number - q->number;
}

static void drop_hopeless(sct_labels *labels, wish *w)
{
    candidate *mine = labels->candidates + w->first;
    if (w->n > 0) qsort(mine, (size_t)w->n, sizeof *mine, by_cost);
    for (int i = 0; i < w->n; i++) {
        mine[i].alive = sct_labels_are_clear_of(labels, &mine[i].choice.box, SCT_SOLID | SCT_BAND);
        w->n_alive += mine[i].alive;
    }
}

static bool is_free_of_others(const sct_labels *labels, int self, const sct_box *box)
{
    for (int i = labels->n_settled; i < labels->n_wishes; i++) {
        const wish *w = &labels->wishes[i];
        if (i != self && w->chosen >= 0 && sct_boxes_meet(box, &labels->candidates[w->chosen].choice.box, CLEAR))
            return false;
    }
    return true;
}

static void take_cheapest(sct_labels *labels, int self)
{
    wish *w = &labels->wishes[self];
    w->chosen = -1;
    for (int i = w->first; i < w->first + w->n; i++)
        if (labels->candidates[i].alive && is_free_of_others(labels, self, &labels->candidates[i].choice.box)) {
            w->chosen = i;
            return;
        }
}

/* Wishes in the order of their number of candidates left; those with none are left out. */
static int order_of_choice(const sct_labels *labels, int order[])
{
    int n = 0, most = 0;
    for (int i = labels->n_settled; i < labels->n_wishes; i++)
        if (labels->wishes[i].n_alive > most) most = labels->wishes[i].n_alive;
    for (int left = 1; left <= most; left++)
        for (int i = labels->n_settled; i < labels->n_wishes; i++)
            if (labels->wishes[i].n_alive == left) order[n++] = i;
    return n;
}

void sct_labels_settle(sct_labels *labels)
{
    const int n_open = labels->n_wishes - labels->n_settled;
    if (labels->failed || n_open == 0) return;
    int *order = malloc((size_t)n_open * sizeof *order);
    if (order == NULL) {
        labels->failed = true;
        return;
    }
    for (int i = labels->n_settled; i < labels->n_wishes; i++) drop_hopeless(labels, &labels->wishes[i]);
    const int n = order_of_choice(labels, order);
    for (int pass = 0; pass < PASSES; pass++)
        for (int i = 0; i < n; i++) take_cheapest(labels, order[i]);
    free(order);
    for (int i = labels->n_settled; i < labels->n_wishes; i++)
        if (labels->wishes[i].chosen >= 0)
            sct_labels_block(labels, labels->candidates[labels->wishes[i].chosen].choice.box, SCT_SOLID, -1);
    labels->n_settled = labels->n_wishes;
}

int sct_labels_choice(const sct_labels *labels, int label)
{
    if (label < 0 || labels->wishes[label].chosen < 0) return -1;
    return labels->candidates[labels->wishes[label].chosen].number;
}

/* ---- lines broken round labels -------------------------------------------------------------------------------------
 */

/* Clips the parameter range of p + t (q - p) to |coordinate| <= half along one axis of a box. */
static void clip(double at, double step, double half, sct_gap *range)
{
    if (fabs(step) < 1e-12) {
        if (fabs(at) > half) range->to = -1;
        return;
    }
    const double t1 = (-half - at) / step, t2 = (half - at) / step;
    range->from = fmax(range->from, fmin(t1, t2));
    range->to = fmin(range->to, fmax(t1, t2));
}

int sct_labels_gaps(const sct_labels *labels, sct_point p, sct_point q, double clear, sct_gap gaps[], int most)
{
    int n = 0;
    for (int i = 0; i < labels->n_blockers; i++) {
        if (labels->blockers[i].kind != SCT_SOLID) continue;
        const sct_box *box = &labels->blockers[i].box;
        const double x = p.x - box->x, y = p.y - box->y, dx = q.x - p.x, dy = q.y - p.y;
        sct_gap range = {0, 1};
        clip(x * box->c + y * box->s, dx * box->c + dy * box->s, box->a + clear, &range);
        clip(y * box->c - x * box->s, dy * box->c - dx * box->s, box->b + clear, &range);
        if (!(range.from < range.to) || n == most) continue;
        int k = n++;
        for (; k > 0 && gaps[k - 1].from > range.from; k--) gaps[k] = gaps[k - 1];
        gaps[k] = range;
    }
    int kept = 0;
    for (int i = 0; i < n; i++) {
        if (kept > 0 && gaps[i].from <= gaps[kept - 1].to) {
            gaps[kept - 1].to = fmax(gaps[kept - 1].to, gaps[i].to);
        } else {
            gaps[kept++] = gaps[i];
        }
    }
    return kept;
}

void sct_labels_bounds(const sct_labels *labels, sct_point *corner, sct_point *opposite)
{
    *corner = (sct_point){INFINITY, INFINITY};
    *opposite = (sct_point){-INFINITY, -INFINITY};
    for (int i = 0; i < labels->n_blockers; i++) {
        const blocker *b = &labels->blockers[i];
        *corner = (sct_point){fmin(corner->x, b->low.x), fmin(corner->y, b->low.y)};
        *opposite = (sct_point){fmax(opposite->x, b->high.x), fmax(opposite->y, b->high.y)};
    }
}

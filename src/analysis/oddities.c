/* What is odd about a geometry but can be analysed. */
#include <stdlib.h>

#include "analysis/structure_parts.h"
#include "base/text.h"
#include "base/vector.h"

/* At most so many pairs of a joint and a member are looked at for members that pass through a joint: about 0.1 s. */
static const long long MOST_PAIRS = 20 * 1000 * 1000;

/* A thing with a number to sort by; equal numbers keep the order of the indices. */
typedef struct keyed {
    double key;
    int index;
} keyed;

static int by_key(const void *a, const void *b)
{
    const keyed *p = a, *q = b;
    if (p->key != q->key) return p->key < q->key ? -1 : 1;
    return (p->index > q->index) - (p->index < q->index);
}

static double distance(const sct_joint *a, const sct_joint *b)
{
    double d[3];
    sct_subtract3(a->at, b->at, d);
    return sct_length3(d);
}

/* `sorted`: joints by their place along the longest axis of the model. */
static void find_coincident_joints(const sct_model *m, const keyed sorted[], double tol, sct_issues *issues)
{
    for (int i = 0; i < m->n_joints; i++) {
        for (int k = i + 1; k < m->n_joints && sorted[k].key - sorted[i].key <= tol; k++) {
            const int a = sorted[i].index < sorted[k].index ? sorted[i].index : sorted[k].index;
            const int b = sorted[i].index + sorted[k].index - a;
            if (distance(&m->joints[a], &m->joints[b]) > tol) continue;
            sct_issue_add(issues, SCT_WARNING, m->joints[b].where,
                          "joints \"%s\" and \"%s\" are at the same place and not connected with each other; use one "
                          "joint if they "
                          "are meant to be one",
                          sct_show(m->joints[a].name).text, sct_show(m->joints[b].name).text);
            break; /* one message per joint is enough, and many joints at one place stay cheap */
        }
    }
}

/* Distance of joint p from the inside of a bar; INFINITY when p lies beyond its ends. */
static double distance_from_bar(const sct_structure *st, const sct_bar *bar, int p, double tol)
{
    const sct_joint *joints = st->model->joints;
    double d[3];
    sct_subtract3(joints[p].at, joints[bar->from].at, d);
    const double along = sct_dot3(d, bar->axes[0]);
    if (!(along > tol && along < bar->L - tol)) return INFINITY;
    for (int i = 0; i < 3; i++) d[i] -= along * bar->axes[0][i];
    return sct_length3(d);
}

static int first_at_least(const keyed sorted[], int n, double key)
{
    int low = 0, high = n;
    while (low < high) {
        const int mid = low + (high - low) / 2;
        if (sorted[mid].key < key)
            low = mid + 1;
        else
            high = mid;
    }
    return low;
}

static void find_passing_bars(const sct_structure *st, const keyed sorted[], int axis, double tol, sct_issues *issues)
{
    const sct_model *m = st->model;
    long long pairs = 0;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const double a = m->joints[bar->from].at[axis], b = m->joints[bar->to].at[axis];
        const double low = fmin(a, b) - tol, high = fmax(a, b) + tol;
        for (int k = first_at_least(sorted, m->n_joints, low); k < m->n_joints && sorted[k].key <= high; k++) {
            const int p = sorted[k].index;
            if (++pairs > MOST_PAIRS) return;
            if (p == bar->from || p == bar->to || distance_from_bar(st, bar, p, tol) > tol) continue;
            sct_issue_add(issues, SCT_WARNING, m->members[e].where,
                          "member \"%s\" passes through joint \"%s\" without being connected to it",
                          sct_show(m->members[e].name).text, sct_show(m->joints[p].name).text);
        }
    }
}

static int longest_axis(const sct_model *m)
{
    double low[3], high[3];
    int axis = 0;
    for (int i = 0; i < 3; i++) {
        low[i] = high[i] = m->joints[0].at[i];
        for (int j = 1; j < m->n_joints; j++) {
            low[i] = fmin(low[i], m->joints[j].at[i]);
            high[i] = fmax(high[i], m->joints[j].at[i]);
        }
        if (high[i] - low[i] > high[axis] - low[axis]) axis = i;
    }
    return axis;
}

/* Members by their two joints, to find those that share both. */
typedef struct ends {
    int low, high, member;
} ends;

static int by_ends(const void *a, const void *b)
{
    const ends *p = a, *q = b;
    if (p->low != q->low) return p->low < q->low ? -1 : 1;
    if (p->high != q->high) return p->high < q->high ? -1 : 1;
    return (p->member > q->member) - (p->member < q->member);
}

static bool find_parallel_members(const sct_model *m, sct_issues *issues)
{
    ends *list = calloc((size_t)m->n_members + 1, sizeof *list);
    if (list == NULL) return false;
    for (int e = 0; e < m->n_members; e++) {
        const int a = m->members[e].from, b = m->members[e].to;
        list[e] = (ends){.low = a < b ? a : b, .high = a < b ? b : a, .member = e};
    }
    qsort(list, (size_t)m->n_members, sizeof *list, by_ends);
    for (int k = 1; k < m->n_members; k++) {
        if (list[k].low != list[k - 1].low || list[k].high != list[k - 1].high) continue;
        const sct_member *first = &m->members[list[k - 1].member], *second = &m->members[list[k].member];
        sct_issue_add(issues, SCT_WARNING, second->where,
                      "members \"%s\" and \"%s\" join the same two joints; they act side by side",
                      sct_show(first->name).text, sct_show(second->name).text);
    }
    free(list);
    return true;
}

/* Things that are odd but can be analysed. False when out of memory. */
bool sct_find_oddities(const sct_structure *st, double tol, sct_issues *issues)
{
    const sct_model *m = st->model;
    const int axis = longest_axis(m);
    keyed *sorted = calloc((size_t)m->n_joints + 1, sizeof *sorted);
    if (sorted == NULL) return false;
    for (int j = 0; j < m->n_joints; j++) sorted[j] = (keyed){.key = m->joints[j].at[axis], .index = j};
    qsort(sorted, (size_t)m->n_joints, sizeof *sorted, by_key);
    find_coincident_joints(m, sorted, tol, issues);
    find_passing_bars(st, sorted, axis, tol, issues);
    free(sorted);
    return find_parallel_members(m, issues);
}

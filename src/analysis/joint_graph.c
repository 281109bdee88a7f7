/* Which bars and supports each joint has, and which joints hang together. */
#include <stdlib.h>
#include <string.h>

#include "analysis/connectivity_parts.h"
#include "analysis/structure_parts.h"

/* Sine of an angle: axes so near to each other are one (as in freedoms.c). */
static const double SAME_AXIS = 1e-6;

void sct_graph_free(sct_graph *g)
{
    free(g->part_of);
    free(g->joints);
    free(g->at);
    free(g->bars);
    free(g->support);
    free(g->parts);
    free(g->loose);
    free(g->rows);
    free(g->motion);
}

int sct_graph_unknowns(const sct_graph *g, int j)
{
    return g->st->n_free[j] + g->st->n_turns[j];
}

void sct_graph_turn(const sct_graph *g, const sct_spring *spring, int joint, double a[3])
{
    const sct_mode_shape shape = sct_mode_shape_of(g->st, spring);
    memcpy(a, shape.turn[g->st->bars[spring->bar].from == joint ? 0 : 1], 3 * sizeof *a);
}

const sct_spring *sct_graph_spring(const sct_graph *g, int e, int k)
{
    const sct_bar *bar = &g->st->bars[e];
    if (k > bar->n) return NULL;
    return &g->st->springs[k == 0 ? e : bar->first + k - 1];
}

static int root(int parent[], int j)
{
    while (parent[j] != j) j = parent[j] = parent[parent[j]];
    return j;
}

static bool graph_allocate(sct_graph *g)
{
    const size_t n = (size_t)g->st->n_joints, m = (size_t)g->st->n_bars, n_dof = (size_t)g->st->n_dof;
    const size_t n_springs = (size_t)g->st->n_springs;
    size_t held = 0;
    for (size_t j = 0; j < n; j++) held += (size_t)g->st->model->joints[j].n_held;
    g->part_of = malloc((n + 1) * sizeof *g->part_of);
    g->joints = malloc((n + 1) * sizeof *g->joints);
    g->at = calloc(n + 2, sizeof *g->at);
    g->bars = malloc((2 * m + 1) * sizeof *g->bars);
    g->support = malloc((n + 1) * sizeof *g->support);
    g->parts = calloc(n + 1, sizeof *g->parts);
    g->loose = calloc(n + 1, sizeof *g->loose);
    g->rows = malloc((2 * n_springs + held + 1) * sizeof *g->rows);
    g->motion = malloc((SCT_ROW * n_dof + 1) * sizeof *g->motion);
    return g->part_of != NULL && g->joints != NULL && g->at != NULL && g->bars != NULL && g->support != NULL &&
           g->parts != NULL && g->loose != NULL && g->rows != NULL && g->motion != NULL;
}

/* Bars by joint, by a counting sort. */
static void list_bars(sct_graph *g)
{
    const sct_structure *st = g->st;
    int *at = g->at + 1; /* shifted by one while counting, so that it ends in place */
    for (int e = 0; e < st->n_bars; e++) {
        at[st->bars[e].from + 1]++;
        at[st->bars[e].to + 1]++;
    }
    for (int j = 0; j < st->n_joints; j++) at[j + 1] += at[j];
    for (int e = 0; e < st->n_bars; e++) {
        g->bars[at[st->bars[e].from]++] = e;
        g->bars[at[st->bars[e].to]++] = e;
    }
}

/* Elastic supports are the last springs, joint by joint; a joint without unknowns has none. */
static void list_supports(sct_graph *g)
{
    const sct_structure *st = g->st;
    int next = st->n_springs;
    for (int j = st->n_joints; j >= 0; j--) {
        const bool has_some = j < st->n_joints && sct_graph_unknowns(g, j) > 0;
        next -= has_some ? st->model->joints[j].n_springs : 0;
        g->support[j] = next;
    }
}

/* Counts what the supports of a joint hold. */
static void add_holds(sct_graph *g, int j, sct_part *p)
{
    const sct_structure *st = g->st;
    const sct_joint *joint = &st->model->joints[j];
    sct_row N[SCT_ROW];
    int m = 0;
    p->n_held += joint->n_held;
    for (int i = g->support[j]; i < g->support[j + 1]; i++) {
        if (st->springs[i].n_dof == 0) continue; /* against a rotation that no member takes part in */
        if (joint->springs[i - g->support[j]].is_turn)
            p->n_turns++;
        else
            p->n_held++;
    }
    if (joint->n_turns_held == 0) return;
    for (int i = g->at[j]; i < g->at[j + 1]; i++) {
        const sct_spring *spring;
        for (int k = 0; (spring = sct_graph_spring(g, g->bars[i], k)) != NULL; k++)
            sct_graph_turn(g, spring, j, g->rows[m++]);
    }
    const int rank = 3 - sct_span_null(m, 3, g->rows, SAME_AXIS, N);
    p->n_turns += rank - st->n_turns[j]; /* what members take part in and is no unknown */
}

/* Parts in the order of their first joints: union-find, then a counting sort. */
static void list_parts(sct_graph *g)
{
    const sct_structure *st = g->st;
    int *parent = g->joints; /* free until the lists are made */
    for (int j = 0; j < st->n_joints; j++) parent[j] = j;
    for (int e = 0; e < st->n_bars; e++) {
        const int a = root(parent, st->bars[e].from), b = root(parent, st->bars[e].to);
        if (a < b) parent[b] = a;
        if (b < a) parent[a] = b;
    }
    for (int j = 0; j < st->n_joints; j++) {
        if (g->at[j] == g->at[j + 1]) {
            g->part_of[j] = -1;
            continue;
        }
        const int top = root(parent, j);
        g->part_of[j] = top == j ? g->n_parts++ : g->part_of[top];
        g->parts[g->part_of[j]].count++;
        add_holds(g, j, &g->parts[g->part_of[j]]);
    }
    for (int p = 0, next = 0; p < g->n_parts; p++) {
        g->parts[p].first = next;
        next += g->parts[p].count;
        g->parts[p].count = 0;
    }
    for (int j = 0; j < st->n_joints; j++) {
        if (g->part_of[j] < 0) continue;
        sct_part *p = &g->parts[g->part_of[j]];
        g->joints[p->first + p->count++] = j;
    }
}

bool sct_graph_build(sct_graph *g, const sct_structure *st)
{
    g->st = st;
    if (!graph_allocate(g)) return false;
    list_bars(g);
    list_supports(g);
    list_parts(g);
    return true;
}

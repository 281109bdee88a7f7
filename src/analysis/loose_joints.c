/* Joints that their own members and supports do not hold. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/connectivity_parts.h"
#include "analysis/motion.h"

/* What a spring at joint j feels of its unknowns, as a row in which 1 is a good hold; the next row. */
static sct_row *add_row(const sct_graph *g, int j, const sct_spring *spring, sct_row *row)
{
    const sct_structure *st = g->st;
    memset(row, 0, sizeof *row);
    for (int i = 0; i < spring->n_dof; i++) {
        const int k = spring->dof[i] - st->first_dof[j];
        if (k < 0 || k >= sct_graph_unknowns(g, j)) continue;
        (*row)[k] = spring->b[i] * spring->span / (k < st->n_free[j] ? 1.0 : st->lever);
    }
    return row + 1;
}

/* Fills g->loose[j]: what moves the joint and stretches no spring there. A rotation alone always stretches one: only
 * those are unknowns that a spring takes part in. */
static void find_loose(sct_graph *g, int j)
{
    const int n = sct_graph_unknowns(g, j), n_free = g->st->n_free[j];
    sct_loose *l = &g->loose[j];
    sct_row N[SCT_ROW], *next = g->rows;
    for (int i = g->at[j]; i < g->at[j + 1]; i++) {
        const sct_spring *spring;
        for (int k = 0; (spring = sct_graph_spring(g, g->bars[i], k)) != NULL; k++) next = add_row(g, j, spring, next);
    }
    for (int i = g->support[j]; i < g->support[j + 1]; i++) next = add_row(g, j, &g->st->springs[i], next);
    const int n_null = sct_span_null((int)(next - g->rows), n, g->rows, SCT_NO_HOLD, N);
    l->n = sct_span_reduce(n_null, n, 0, 0, n_free, N, SCT_NO_HOLD, l->pivot);
    for (int i = 0; i < l->n; i++) memcpy(l->h[i], N[i], sizeof N[i]);
}

/* The directions of a loose joint in the model's axes, as simple as they come. */
static void loose_directions(const sct_graph *g, int j, sct_row D[3])
{
    const sct_loose *l = &g->loose[j];
    memset(D, 0, 3 * sizeof(sct_row));
    for (int i = 0; i < l->n; i++) {
        for (int k = 0; k < g->st->n_free[j]; k++) {
            for (int axis = 0; axis < 3; axis++) D[i][axis] += l->h[i][k] * g->st->basis[j][k][axis];
        }
    }
    sct_span_reduce(l->n, 3, 0, 0, 3, D, SCT_NO_HOLD, NULL);
}

static void add_directions(const sct_graph *g, int j, sct_text *text)
{
    sct_row D[3];
    loose_directions(g, j, D);
    for (int i = 0; i < g->loose[j].n; i++) {
        if (i > 0) sct_text_add(text, " and ");
        sct_motion_direction(text, g->st->dim, D[i], false);
    }
}

/* Why the members of a loose joint do not hold it. */
static const char *how_they_lie(const sct_graph *g, int j)
{
    const int rank = g->st->n_free[j] - g->loose[j].n;
    const bool is_supported = g->st->n_free[j] < g->st->dim || g->support[j] < g->support[j + 1];
    if (is_supported || g->st->n_turns[j] > 0) return "do not hold it there"; /* it is not their directions alone */
    return rank == 1 ? "lie in one line" : "lie in one plane";
}

static bool tell_loose_joint(const sct_graph *g, int j)
{
    const sct_structure *st = g->st;
    const int n_bars = g->at[j + 1] - g->at[j];
    sct_text text = {0};
    sct_text_add(&text, "joint ");
    sct_motion_name(&text, st->model->joints[j].name);
    sct_text_add(&text, " can move in ");
    add_directions(g, j, &text);
    sct_text_add(&text, ": ");
    if (n_bars == 1) {
        sct_text_add(&text, "only member ");
        sct_motion_name(&text, st->model->members[g->bars[g->at[j]]].name);
        sct_text_add(&text, " ends there");
    } else {
        sct_text_format(&text, "its %d members %s", n_bars, how_they_lie(g, j));
    }
    sct_text_add(&text, sct_motion_is_frame(st->model) ? "; fix a pinned end, add a member or a support"
                                                       : "; add a member or a support");
    return sct_motion_tell(&text, SCT_ERROR, st->model->joints[j].where, g->issues);
}

/* Many loose joints at once: those that are loose in the same directions as joint `first` share one message. */
static bool tell_loose_joints(const sct_graph *g, int first, bool told[])
{
    const sct_structure *st = g->st;
    sct_text words = {0}, text = {0};
    add_directions(g, first, &words);
    int n = 0;
    bool enough = true;
    for (int j = first; j < st->n_joints && enough; j++) {
        if (g->loose[j].n == 0 || told[j]) continue;
        sct_text other = {0};
        add_directions(g, j, &other);
        enough = !other.failed && !words.failed;
        if (enough && strcmp(other.data, words.data) == 0) {
            told[j] = true;
            if (n < 10) {
                if (n > 0) sct_text_add(&text, ", ");
                sct_motion_name(&text, st->model->joints[j].name);
            }
            n++;
        }
        sct_text_free(&other);
    }
    if (n > 10) sct_text_format(&text, " and %d more", n - 10);
    sct_text line = {0};
    if (enough && !text.failed) {
        sct_text_format(&line, "%s %s can %smove in %s: ", n == 1 ? "joint" : "joints", text.data,
                        n == 1 ? "" : "each ", words.data);
        sct_text_format(&line, "the members of %s do not hold it there; %sadd members or supports",
                        n == 1 ? "the joint" : "each such joint",
                        sct_motion_is_frame(st->model) ? "fix pinned ends, " : "");
    }
    sct_text_free(&words);
    sct_text_free(&text);
    return sct_motion_tell(&line, SCT_ERROR, st->model->joints[first].where, g->issues);
}

/* Tells the n_loose loose joints. */
static bool tell_all(sct_graph *g, int n_loose, bool told[])
{
    bool enough = true;
    for (int j = 0; j < g->st->n_joints && enough && g->n_told < SCT_MOTIONS_TOLD; j++) {
        if (g->loose[j].n == 0 || told[j]) continue;
        enough = n_loose <= SCT_MOTIONS_TOLD ? tell_loose_joint(g, j) : tell_loose_joints(g, j, told);
        g->n_told++;
    }
    return enough;
}

sct_status sct_check_loose_joints(sct_graph *g)
{
    const sct_structure *st = g->st;
    int n_loose = 0;
    for (int j = 0; j < st->n_joints; j++) {
        if (g->part_of[j] < 0 || sct_graph_unknowns(g, j) == 0) continue;
        const sct_part *p = &g->parts[g->part_of[j]];
        if (p->n_held + p->n_turns == 0) continue;
        find_loose(g, j);
        n_loose += g->loose[j].n > 0;
        g->n_found += g->loose[j].n;
        for (int i = 0; i < g->loose[j].n; i++) g->ground[st->first_dof[j] + g->loose[j].pivot[i]] = true;
    }
    if (n_loose == 0) return SCT_OK;
    bool *told = calloc((size_t)st->n_joints, sizeof *told);
    const bool enough = told != NULL && tell_all(g, n_loose, told);
    free(told);
    return enough ? SCT_OK : SCT_NO_MEMORY;
}

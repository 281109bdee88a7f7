#include "member_loads.h"

#include <math.h>
#include <stdlib.h>

#include "base/vector.h"
#include "model/model.h"

/* A load of a case times its factor, in the order of members. */
typedef struct scaled {
    const sct_member_load *load;
    double factor;
    int number; /* in the order of the model */
} scaled;

typedef struct sums {
    const sct_result *r;
    const double *factor; /* of the cases */
    sct_drawn_loads *out;
} sums;

static int by_member(const void *left, const void *right)
{
    const scaled *p = left, *q = right;
    return p->load->member != q->load->member ? p->load->member - q->load->member : p->number - q->number;
}

static int by_size(const void *left, const void *right)
{
    const double p = *(const double *)left, q = *(const double *)right;
    return p < q ? -1 : p > q;
}

/* Adds factor times a vector, given in the axes of the load, to `sum` in the model's axes. */
static void add(const sums *s, const scaled *l, const double v[3], double part, double sum[3])
{
    double(*e)[3] = s->r->members[l->load->member].axes;
    double scale = l->factor * part;
    if (l->load->axes == SCT_AXES_MEMBER) {
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++) sum[k] += scale * v[i] * e[i][k];
        return;
    }
    const double length = sct_length3(v), along = length > 0 ? sct_dot3(v, e[0]) / length : 0;
    if (l->load->axes == SCT_AXES_PROJECTED && !l->load->is_point) scale *= sqrt(fmax(1 - along * along, 0));
    for (int k = 0; k < 3; k++) sum[k] += scale * v[k];
}

/* What the line loads of one member add up to between two neighbouring places of change. */
static void add_piece(const sums *s, const scaled loads[], int n, double a, double b)
{
    sct_line_load piece = {.member = loads[0].load->member, .a = a, .b = b};
    for (int i = 0; i < n; i++) {
        const sct_member_load *l = loads[i].load;
        if (l->is_point || l->a > a || l->b < b) continue;
        const double ta = (a - l->a) / (l->b - l->a), tb = (b - l->a) / (l->b - l->a);
        add(s, &loads[i], l->qa, 1 - ta, piece.qa);
        add(s, &loads[i], l->qb, ta, piece.qa);
        add(s, &loads[i], l->qa, 1 - tb, piece.qb);
        add(s, &loads[i], l->qb, tb, piece.qb);
    }
    if (sct_length3(piece.qa) + sct_length3(piece.qb) > 0) s->out->lines[s->out->n_lines++] = piece;
}

static void add_member(const sums *s, const scaled loads[], int n, double places[])
{
    int n_places = 0;
    for (int i = 0; i < n; i++) {
        const sct_member_load *l = loads[i].load;
        if (l->is_point) {
            sct_point_load *p = &s->out->points[s->out->n_points++];
            *p = (sct_point_load){.member = l->member, .joint = -1, .x = l->a};
            add(s, &loads[i], l->F, 1, p->F);
            add(s, &loads[i], l->M, 1, p->M);
        } else if (l->b > l->a) {
            places[n_places++] = l->a;
            places[n_places++] = l->b;
        }
    }
    if (n_places == 0) return;
    qsort(places, (size_t)n_places, sizeof *places, by_size);
    for (int i = 0; i + 1 < n_places; i++)
        if (places[i + 1] > places[i]) add_piece(s, loads, n, places[i], places[i + 1]);
}

static void add_joints(const sums *s, const sct_model *model, double (*at_joint)[6])
{
    for (int k = 0; k < model->n_cases; k++)
        for (int i = 0; i < model->cases[k].n_loads; i++) {
            const sct_joint_load *l = &model->cases[k].loads[i];
            for (int x = 0; x < 3; x++) {
                at_joint[l->joint][x] += s->factor[k] * l->F[x];
                at_joint[l->joint][3 + x] += s->factor[k] * l->M[x];
            }
        }
    for (int j = 0; j < model->n_joints; j++) {
        const double *v = at_joint[j];
        if (sct_length3(v) + sct_length3(v + 3) > 0)
            s->out->points[s->out->n_points++] =
                (sct_point_load){.member = -1, .joint = j, .F = {v[0], v[1], v[2]}, .M = {v[3], v[4], v[5]}};
    }
}

sct_status sct_drawn_loads_of(const sct_result *r, int combination, sct_arena *arena, sct_drawn_loads *out)
{
    const sct_model *model = r->model;
    const sums s = {r, model->combinations[combination].factor, out};
    size_t most = 0;
    *out = (sct_drawn_loads){0};
    for (int k = 0; k < model->n_cases; k++) most += (size_t)model->cases[k].n_member_loads;
    scaled *loads = sct_arena_array(arena, most, sizeof *loads);
    double *places = sct_arena_array(arena, 2 * most, sizeof *places);
    double(*at_joint)[6] = sct_arena_array(arena, (size_t)model->n_joints, sizeof *at_joint);
    out->lines = sct_arena_array(arena, 2 * most, sizeof *out->lines);
    out->points = sct_arena_array(arena, most + (size_t)model->n_joints, sizeof *out->points);
    if (loads == NULL || places == NULL || at_joint == NULL || out->lines == NULL || out->points == NULL)
        return SCT_NO_MEMORY;
    int n = 0;
    for (int k = 0; k < model->n_cases; k++) {
        if (s.factor[k] == 0) continue;
        out->has_weight |= model->cases[k].self_weight != 0;
        for (int i = 0; i < model->cases[k].n_member_loads; i++, n++)
            loads[n] = (scaled){&model->cases[k].member_loads[i], s.factor[k], n};
    }
    add_joints(&s, model, at_joint);
    if (n > 0) qsort(loads, (size_t)n, sizeof *loads, by_member);
    for (int i = 0, end; i < n; i = end) {
        for (end = i + 1; end < n && loads[end].load->member == loads[i].load->member;) end++;
        add_member(&s, loads + i, end - i, places);
    }
    return SCT_OK;
}

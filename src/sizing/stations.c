/* The diagrams of one member of a finished result. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "sizing/result.h"

/* A place, and from which piece it is seen: at a jump there are two. */
typedef struct place {
    double x;
    int piece;
} place;

static int by_place(const void *a, const void *b)
{
    const place *p = a, *q = b;
    if (p->piece != q->piece) return p->piece - q->piece;
    return (p->x > q->x) - (p->x < q->x);
}

/* The member whose stations are made. */
typedef struct member {
    const sct_result *r;
    const sct_bar *bar;
    int combination;
    sct_beam_line line;
    sct_beam_state state;
    sct_beam_bending bending[2];
    bool bends[2]; /* E I is known */
} member;

static member member_of(const sct_result_memory *memory, int combination, int index)
{
    const sct_structure *st = memory->st;
    member m = {.r = &memory->open, .bar = &st->bars[index], .combination = combination};
    const double *S = memory->S + (size_t)combination * (size_t)st->n_springs;
    m.line = sct_member_line(memory->lines, index, combination, memory->A[m.bar->group]);
    m.state = sct_member_state(st, S, index);
    for (int plane = 0; plane < 2; plane++) {
        const double EI = m.bar->E * memory->I[m.bar->group][plane];
        m.bends[plane] = EI > 0.0;
        m.bending[plane] =
            (sct_beam_bending){.plane = plane, .EI = EI, .kappa = sct_free_curvature(st, combination, index, plane)};
    }
    return m;
}

static void add(place places[], int *n, double x, int piece)
{
    places[(*n)++] = (place){x, piece};
}

/* Ends and inner places of every piece. */
static void list_pieces(const member *m, int between, place places[], int *n)
{
    for (int k = 0; k < m->line.n; k++) {
        const sct_beam_piece *p = &m->line.piece[k];
        for (int i = 0; i <= between + 1; i++) add(places, n, p->x + p->h * i / (between + 1), k);
    }
}

/* Extremes between: of both moments, both shear forces, both bows. */
static void list_extremes(const member *m, place places[], int *n)
{
    for (int what = SCT_BEAM_V; what < SCT_BEAM_T; what++) {
        for (int sign = -1; sign <= 1; sign += 2) {
            double c[SCT_BEAM_QUANTITIES] = {0.0};
            c[what] = sign;
            const sct_beam_extreme most = sct_beam_largest_inside(&m->line, &m->state, c);
            if (most.value > -INFINITY) add(places, n, most.x, most.piece);
        }
    }
    for (int plane = 0; plane < 2; plane++) {
        if (!m->bends[plane]) continue;
        const sct_beam_extreme most = sct_beam_largest_bow(&m->line, &m->state, &m->bending[plane]);
        add(places, n, most.x, most.piece);
    }
}

static sct_station station_at(const member *m, place p)
{
    double value[SCT_BEAM_QUANTITIES];
    sct_station s = {.x = p.x};
    sct_beam_values(&m->line, &m->state, p.piece, p.x, value);
    s.N = value[SCT_BEAM_N];
    s.T = value[SCT_BEAM_T];
    const double *u = m->r->u + (size_t)m->combination * (size_t)m->r->n_joints * 3, t = p.x / m->bar->L;
    for (int i = 0; i < 3; i++) s.d[i] = (1.0 - t) * u[3 * m->bar->from + i] + t * u[3 * m->bar->to + i];
    for (int plane = 0; plane < 2; plane++) {
        s.V[plane] = value[SCT_BEAM_V + plane];
        s.M[plane] = value[SCT_BEAM_M + plane];
        if (m->bends[plane]) s.bow[plane] = sct_beam_deflection(&m->line, &m->state, &m->bending[plane], p.x);
        for (int i = 0; i < 3; i++) s.d[i] += s.bow[plane] * m->bar->axes[1 + plane][i];
    }
    return s;
}

static bool is_same(const sct_station *a, const sct_station *b)
{
    return a->x == b->x && a->N == b->N && a->T == b->T && memcmp(a->V, b->V, sizeof a->V) == 0 &&
           memcmp(a->M, b->M, sizeof a->M) == 0;
}

/* A truss: straight members with constant force. */
static sct_status straight(const sct_result *r, int combination, int index, sct_station **stations, int *n)
{
    const sct_member_result *m = &r->members[index];
    const double *u = r->u + (size_t)combination * (size_t)r->n_joints * 3;
    const double N = r->N[(size_t)combination * (size_t)r->n_members + (size_t)index];
    *stations = calloc(2, sizeof **stations);
    if (*stations == NULL) return SCT_NO_MEMORY;
    for (int end = 0; end < 2; end++) {
        sct_station *s = &(*stations)[end];
        s->x = end == 0 ? 0.0 : m->L;
        s->N = N;
        memcpy(s->d, u + 3 * (size_t)(end == 0 ? m->from : m->to), sizeof s->d);
    }
    *n = 2;
    return SCT_OK;
}

sct_status sct_result_stations(const sct_result *r, int combination, int index, int between, sct_station **stations,
                               int *n)
{
    enum { EXTREMES = 10 };
    const sct_result_memory *memory = (const sct_result_memory *)r;
    *n = 0;
    if (!r->has_bent) return straight(r, combination, index, stations, n);
    const member m = member_of(memory, combination, index);
    const size_t most = (size_t)m.line.n * (size_t)(between + 2) + EXTREMES;
    place *places = calloc(most, sizeof *places);
    *stations = calloc(most, sizeof **stations);
    if (places == NULL || *stations == NULL) {
        free(places);
        free(*stations);
        *stations = NULL;
        return SCT_NO_MEMORY;
    }
    int n_places = 0;
    list_pieces(&m, between, places, &n_places);
    list_extremes(&m, places, &n_places);
    qsort(places, (size_t)n_places, sizeof *places, by_place);
    for (int k = 0; k < n_places; k++) {
        const sct_station s = station_at(&m, places[k]);
        if (*n == 0 || !is_same(&s, &(*stations)[*n - 1])) (*stations)[(*n)++] = s;
    }
    free(places);
    return SCT_OK;
}

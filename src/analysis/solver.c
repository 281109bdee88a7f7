/* Stiffness method for bars: a scatter map from bars to matrix entries, one factor, all cases at once. */
#include "solver.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/pairs.h"

/* A bar of a case whose prescribed elongation is not zero. */
typedef struct stretched {
    int k, bar;
} stretched;

/* Bars are kept as flat arrays of `width` = 2 dim numbers, padded with b = 0 at unknown 0, so that inner loops have
 * constant length. Nothing is allocated after the first analysis. */
struct sct_solver {
    const sct_structure *st;
    sct_factor *factor;
    sct_pattern pattern;
    int *column, *row; /* of the pattern */
    double *K;         /* values of the pattern */
    int *entry_start;  /* n_bars + 1: entries of each bar in the two arrays below */
    int *entry;        /* place in K */
    double *per_area;  /* what the entry gains per unit area: E / L b_i b_j */
    int width;
    int *dof;        /* n_bars x width */
    double *b;       /* n_bars x width */
    double *EL;      /* n_bars: E / L */
    double *k;       /* n_bars: E A / L */
    int *group;      /* n_bars */
    bool has_weight; /* some case has self-weight */
    double *weight;  /* n_dof */
    int n_stretched;
    stretched *stretched; /* by case */
    double *A;            /* n_groups */
    int analyses;
};

static void *array(size_t n, size_t size)
{
    return calloc(n + 1, size); /* + 1: nothing is a pointer too, and unknown 0 of the padding always exists */
}

/* ---- setting up -------------------------------------------------------------------------------------------------- */

/* The entries of the upper triangle that bars and the diagonal have a part in, with scratch to sort them. */
typedef struct pair_list {
    int count, *row, *column, *order, *work;
} pair_list;

static bool pairs_allocate(pair_list *p, size_t most, size_t n)
{
    p->row = array(most, sizeof *p->row);
    p->column = array(most, sizeof *p->column);
    p->order = array(most, sizeof *p->order);
    p->work = array(most + n + 1, sizeof *p->work);
    return p->row != NULL && p->column != NULL && p->order != NULL && p->work != NULL;
}

static void pairs_free(pair_list *p)
{
    free(p->row);
    free(p->column);
    free(p->order);
    free(p->work);
}

/* All pairs of unknowns of all bars, pair p being entry p of per_area, then the diagonal. */
static void list_pairs(sct_solver *s, pair_list *list)
{
    const sct_structure *st = s->st;
    int n = 0;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        s->entry_start[e] = n;
        for (int j = 0; j < bar->n_dof; j++) {
            for (int i = 0; i <= j; i++) {
                const int p = bar->dof[i], q = bar->dof[j];
                list->row[n] = p < q ? p : q;
                list->column[n] = p < q ? q : p;
                s->per_area[n++] = s->EL[e] * bar->b[i] * bar->b[j];
            }
        }
    }
    s->entry_start[st->n_bars] = n;
    for (int i = 0; i < st->n_dof; i++, n++) list->row[n] = list->column[n] = i;
    list->count = n;
}

/* The pattern from the sorted pairs; entry: where each pair went. Returns the number of entries. */
static size_t merge_pairs(sct_solver *s, const pair_list *list)
{
    const int n_of_bars = s->entry_start[s->st->n_bars];
    int last = -1, row = -1, column = -1;
    for (int k = 0; k < list->count; k++) {
        const int p = list->order[k];
        if (list->row[p] != row || list->column[p] != column) {
            row = list->row[p];
            column = list->column[p];
            s->row[++last] = row;
            s->column[column + 1]++;
        }
        if (p < n_of_bars) s->entry[p] = last;
    }
    for (int j = 0; j < s->st->n_dof; j++) s->column[j + 1] += s->column[j];
    return (size_t)last + 1;
}

static sct_status build_pattern(sct_solver *s)
{
    const sct_structure *st = s->st;
    size_t most = (size_t)st->n_dof;
    for (int e = 0; e < st->n_bars; e++) most += (size_t)(st->bars[e].n_dof * (st->bars[e].n_dof + 1) / 2);
    pair_list list = {0};
    s->entry = array(most, sizeof *s->entry);
    s->per_area = array(most, sizeof *s->per_area);
    s->row = array(most, sizeof *s->row);
    if (pairs_allocate(&list, most, (size_t)st->n_dof) && s->entry != NULL && s->per_area != NULL && s->row != NULL) {
        list_pairs(s, &list);
        sct_sort_pairs(st->n_dof, list.count, list.row, list.column, list.order, list.work);
        s->K = array(merge_pairs(s, &list), sizeof *s->K);
        s->pattern = (sct_pattern){.n = st->n_dof, .column = s->column, .row = s->row};
    }
    pairs_free(&list);
    return s->K != NULL ? SCT_OK : SCT_NO_MEMORY;
}

static void copy_bars(sct_solver *s)
{
    const sct_structure *st = s->st;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        s->EL[e] = bar->E / bar->L;
        s->group[e] = bar->group;
        for (int i = 0; i < bar->n_dof; i++) {
            s->dof[e * s->width + i] = bar->dof[i];
            s->b[e * s->width + i] = bar->b[i];
        }
    }
    for (int k = 0; k < st->n_cases; k++) s->has_weight = s->has_weight || st->model->cases[k].self_weight != 0.0;
}

static sct_status list_stretched(sct_solver *s)
{
    const sct_structure *st = s->st;
    const size_t n = (size_t)st->n_cases * (size_t)st->n_bars;
    size_t count = 0;
    for (size_t i = 0; i < n; i++) count += st->stretch[i] != 0.0;
    s->stretched = array(count, sizeof *s->stretched);
    if (s->stretched == NULL) return SCT_NO_MEMORY;
    for (int k = 0; k < st->n_cases; k++) {
        for (int e = 0; e < st->n_bars; e++) {
            if (st->stretch[(size_t)k * (size_t)st->n_bars + (size_t)e] == 0.0) continue;
            s->stretched[s->n_stretched++] = (stretched){.k = k, .bar = e};
        }
    }
    return SCT_OK;
}

static sct_status set_up(sct_solver *s, sct_engine engine)
{
    const sct_structure *st = s->st;
    const size_t bars = (size_t)st->n_bars, width = (size_t)s->width;
    s->column = array((size_t)st->n_dof + 1, sizeof *s->column);
    s->entry_start = array(bars + 1, sizeof *s->entry_start);
    s->dof = array(bars * width, sizeof *s->dof);
    s->b = array(bars * width, sizeof *s->b);
    s->EL = array(bars, sizeof *s->EL);
    s->k = array(bars, sizeof *s->k);
    s->group = array(bars, sizeof *s->group);
    s->weight = array((size_t)st->n_dof, sizeof *s->weight);
    s->A = array((size_t)st->n_groups, sizeof *s->A);
    if (!s->column || !s->entry_start || !s->dof || !s->b || !s->EL || !s->k || !s->group || !s->weight || !s->A) {
        return SCT_NO_MEMORY;
    }
    copy_bars(s);
    sct_status status = list_stretched(s);
    if (status == SCT_OK) status = build_pattern(s);
    if (status == SCT_OK) s->factor = sct_factor_new(&s->pattern, engine, &status);
    return status;
}

sct_solver *sct_solver_new(const sct_structure *st, sct_engine engine, sct_status *status)
{
    sct_solver *s = calloc(1, sizeof *s);
    *status = SCT_NO_MEMORY;
    if (s == NULL) return NULL;
    s->st = st;
    s->width = 2 * st->dim;
    *status = set_up(s, engine);
    if (*status == SCT_OK) return s;
    sct_solver_free(s);
    return NULL;
}

void sct_solver_free(sct_solver *s)
{
    if (s == NULL) return;
    sct_factor_free(s->factor);
    free(s->column);
    free(s->row);
    free(s->K);
    free(s->entry_start);
    free(s->entry);
    free(s->per_area);
    free(s->dof);
    free(s->b);
    free(s->EL);
    free(s->k);
    free(s->group);
    free(s->weight);
    free(s->stretched);
    free(s->A);
    free(s);
}

sct_status sct_response_new(const sct_structure *st, sct_response *response)
{
    const size_t cases = (size_t)st->n_cases;
    response->u = array(cases * (size_t)st->n_dof, sizeof *response->u);
    response->N = array(cases * (size_t)st->n_bars, sizeof *response->N);
    response->u_error = array(cases * (size_t)st->n_dof, sizeof *response->u_error);
    response->N_error = array(cases * (size_t)st->n_bars, sizeof *response->N_error);
    if (response->u && response->N && response->u_error && response->N_error) return SCT_OK;
    sct_response_free(response);
    return SCT_NO_MEMORY;
}

void sct_response_free(sct_response *response)
{
    free(response->u);
    free(response->N);
    free(response->u_error);
    free(response->N_error);
    *response = (sct_response){0};
}

/* ---- analysis ---------------------------------------------------------------------------------------------------- */

/* K = sum over bars of E A / L b b'. False when an axial stiffness is not positive and finite. */
static bool fill(sct_solver *s, const double A[])
{
    bool sound = true;
    memset(s->K, 0, (size_t)s->column[s->st->n_dof] * sizeof *s->K);
    for (int e = 0; e < s->st->n_bars; e++) {
        const double A_e = A[s->group[e]];
        s->k[e] = s->EL[e] * A_e;
        sound = sound && s->k[e] > 0.0 && s->k[e] <= DBL_MAX;
        for (int p = s->entry_start[e]; p < s->entry_start[e + 1]; p++) s->K[s->entry[p]] += A_e * s->per_area[p];
    }
    return sound;
}

/* Right-hand sides of all cases: joint loads, self-weight, and what prescribed elongations push with. */
static void load(sct_solver *s, const double A[], double u[])
{
    const sct_structure *st = s->st;
    const size_t n = (size_t)st->n_dof;
    memcpy(u, st->f, (size_t)st->n_cases * n * sizeof *u);
    if (s->has_weight) {
        sct_structure_weight(st, A, s->weight);
        for (int k = 0; k < st->n_cases; k++) {
            const double factor = st->model->cases[k].self_weight;
            for (size_t i = 0; i < n && factor != 0.0; i++) u[(size_t)k * n + i] += factor * s->weight[i];
        }
    }
    for (int p = 0; p < s->n_stretched; p++) {
        const int k = s->stretched[p].k, e = s->stretched[p].bar;
        const double N = s->k[e] * st->stretch[(size_t)k * (size_t)st->n_bars + (size_t)e];
        for (int i = 0; i < s->width; i++)
            u[(size_t)k * n + (size_t)s->dof[e * s->width + i]] -= s->b[e * s->width + i] * N;
    }
}

/* N = E A / L (b'u + stretch) of every bar in one case. False when one is not finite; every unknown belongs to some
 * bar, so that finite forces mean finite displacements. */
static inline bool recover(const int width, const sct_solver *s, const double u[], const double stretch[], double N[])
{
    double finite = 0.0;
    const int *dof = s->dof;
    const double *b = s->b;
    for (int e = 0; e < s->st->n_bars; e++, dof += width, b += width) {
        double elongation = b[0] * u[dof[0]] + b[1] * u[dof[1]] + b[2] * u[dof[2]] + b[3] * u[dof[3]];
        if (width > 4) elongation += b[4] * u[dof[4]] + b[5] * u[dof[5]];
        N[e] = s->k[e] * (elongation + stretch[e]);
        finite += N[e] * 0.0; /* NaN as soon as one N is NaN or infinite */
    }
    return finite == 0.0;
}

sct_status sct_solver_analyse(sct_solver *s, const double A[], sct_response *response)
{
    const sct_structure *st = s->st;
    memcpy(s->A, A, (size_t)st->n_groups * sizeof *s->A);
    s->analyses++;
    if (!fill(s, A)) return SCT_NOT_ACCURATE;
    const sct_status factored = sct_factor_update(s->factor, s->K, NULL);
    if (factored != SCT_OK) return factored == SCT_NOT_CONVEX ? SCT_MECHANISM : factored;
    load(s, A, response->u);
    sct_factor_solve(s->factor, st->n_cases, response->u);
    bool finite = true;
    for (int k = 0; k < st->n_cases; k++) {
        const double *u = response->u + (size_t)k * (size_t)st->n_dof;
        const double *stretch = st->stretch + (size_t)k * (size_t)st->n_bars;
        double *N = response->N + (size_t)k * (size_t)st->n_bars;
        finite = (s->width == 4 ? recover(4, s, u, stretch, N) : recover(6, s, u, stretch, N)) && finite;
    }
    return finite ? SCT_OK : SCT_NOT_ACCURATE;
}

int sct_solver_analyses(const sct_solver *s)
{
    return s->analyses;
}

void sct_solver_solve(sct_solver *s, int count, double b[])
{
    sct_factor_solve(s->factor, count, b);
}

sct_factor *sct_solver_factor(sct_solver *s)
{
    return s->factor;
}

const double *sct_solver_areas(const sct_solver *s)
{
    return s->A;
}

const sct_structure *sct_solver_structure(const sct_solver *s)
{
    return s->st;
}

const double *sct_solver_stiffness(const sct_solver *s, const sct_pattern **pattern)
{
    *pattern = &s->pattern;
    return s->K;
}

const int *sct_solver_places(const sct_solver *s, int e)
{
    return s->entry + s->entry_start[e];
}

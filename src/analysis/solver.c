/* Stiffness method: a scatter map from springs to matrix entries, one factor, all cases at once. */
#include "solver.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "numerics/pairs.h"

/* A spring of a case whose prescribed elongation is not zero. */
typedef struct stretched {
    int k, spring;
} stretched;

/* Springs are kept as flat arrays of `width` numbers, padded with b = 0 at unknown 0, so that inner loops have constant
 * length. Nothing is allocated after the first analysis. */
enum {
    WIDTH_PLANE = 4,
    WIDTH_SPACE = 6,
    WIDTH_BEAM = 12
}; /* bars in plane; bars in space, beams in plane; beams in space */

struct sct_solver {
    const sct_structure *st;
    sct_factor *factor;
    sct_pattern pattern;
    int *column, *row; /* of the pattern */
    double *K;         /* values of the pattern */
    int *entry_start;  /* n_springs + 1: entries of each spring in the two arrays below */
    int *entry;        /* place in K */
    double *per_unit;  /* what the entry gains per unit of the spring's property: E / L b_i b_j */
    int width;
    int *dof;        /* n_springs x width */
    double *b;       /* n_springs x width */
    double *k;       /* n_springs: E P / L */
    bool has_weight; /* some case has self-weight */
    double *weight;  /* n_dof */
    int n_stretched;
    stretched *stretched;  /* by case */
    double *A;             /* n_groups */
    sct_properties *sizes; /* n_groups */
    int analyses;
};

static void *array(size_t n, size_t size)
{
    return calloc(n + 1, size); /* + 1: nothing is a pointer too, and unknown 0 of the padding always exists */
}

/* ---- setting up -------------------------------------------------------------------------------------------------- */

/* The entries of the upper triangle that springs and the diagonal have a part in, with scratch to sort them. */
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

/* All pairs of unknowns of all springs, pair p being entry p of per_unit, then the diagonal. */
static void list_pairs(sct_solver *s, pair_list *list)
{
    const sct_structure *st = s->st;
    int n = 0;
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        const double per_unit = spring->E / spring->L;
        s->entry_start[e] = n;
        for (int j = 0; j < spring->n_dof; j++) {
            for (int i = 0; i <= j; i++) {
                const int p = spring->dof[i], q = spring->dof[j];
                list->row[n] = p < q ? p : q;
                list->column[n] = p < q ? q : p;
                s->per_unit[n++] = per_unit * spring->b[i] * spring->b[j];
            }
        }
    }
    s->entry_start[st->n_springs] = n;
    for (int i = 0; i < st->n_dof; i++, n++) list->row[n] = list->column[n] = i;
    list->count = n;
}

/* The pattern from the sorted pairs; entry: where each pair went. Returns the number of entries. */
static size_t merge_pairs(sct_solver *s, const pair_list *list)
{
    const int n_of_springs = s->entry_start[s->st->n_springs];
    int last = -1, row = -1, column = -1;
    for (int k = 0; k < list->count; k++) {
        const int p = list->order[k];
        if (list->row[p] != row || list->column[p] != column) {
            row = list->row[p];
            column = list->column[p];
            s->row[++last] = row;
            s->column[column + 1]++;
        }
        if (p < n_of_springs) s->entry[p] = last;
    }
    for (int j = 0; j < s->st->n_dof; j++) s->column[j + 1] += s->column[j];
    return (size_t)last + 1;
}

static sct_status build_pattern(sct_solver *s)
{
    const sct_structure *st = s->st;
    size_t most = (size_t)st->n_dof;
    for (int e = 0; e < st->n_springs; e++) most += (size_t)(st->springs[e].n_dof * (st->springs[e].n_dof + 1) / 2);
    pair_list list = {0};
    s->entry = array(most, sizeof *s->entry);
    s->per_unit = array(most, sizeof *s->per_unit);
    s->row = array(most, sizeof *s->row);
    if (pairs_allocate(&list, most, (size_t)st->n_dof) && s->entry != NULL && s->per_unit != NULL && s->row != NULL) {
        list_pairs(s, &list);
        sct_sort_pairs(st->n_dof, list.count, list.row, list.column, list.order, list.work);
        s->K = array(merge_pairs(s, &list), sizeof *s->K);
        s->pattern = (sct_pattern){.n = st->n_dof, .column = s->column, .row = s->row};
    }
    pairs_free(&list);
    return s->K != NULL ? SCT_OK : SCT_NO_MEMORY;
}

static void copy_springs(sct_solver *s)
{
    const sct_structure *st = s->st;
    for (int e = 0; e < st->n_springs; e++) {
        const sct_spring *spring = &st->springs[e];
        for (int i = 0; i < spring->n_dof; i++) {
            s->dof[e * s->width + i] = spring->dof[i];
            s->b[e * s->width + i] = spring->b[i];
        }
    }
    for (int k = 0; k < st->n_cases; k++) s->has_weight = s->has_weight || st->self_weight[k] != 0.0;
}

static sct_status list_stretched(sct_solver *s)
{
    const sct_structure *st = s->st;
    const size_t n = (size_t)st->n_cases * (size_t)st->n_springs;
    size_t count = 0;
    for (size_t i = 0; i < n; i++) count += st->stretch[i] != 0.0;
    s->stretched = array(count, sizeof *s->stretched);
    if (s->stretched == NULL) return SCT_NO_MEMORY;
    for (int k = 0; k < st->n_cases; k++) {
        for (int e = 0; e < st->n_springs; e++) {
            if (st->stretch[(size_t)k * (size_t)st->n_springs + (size_t)e] == 0.0) continue;
            s->stretched[s->n_stretched++] = (stretched){.k = k, .spring = e};
        }
    }
    return SCT_OK;
}

static sct_status set_up(sct_solver *s, sct_engine engine)
{
    const sct_structure *st = s->st;
    const size_t springs = (size_t)st->n_springs, width = (size_t)s->width;
    s->column = array((size_t)st->n_dof + 1, sizeof *s->column);
    s->entry_start = array(springs + 1, sizeof *s->entry_start);
    s->dof = array(springs * width, sizeof *s->dof);
    s->b = array(springs * width, sizeof *s->b);
    s->k = array(springs, sizeof *s->k);
    s->weight = array((size_t)st->n_dof, sizeof *s->weight);
    s->A = array((size_t)st->n_groups, sizeof *s->A);
    s->sizes = array((size_t)st->n_groups, sizeof *s->sizes);
    if (!s->column || !s->entry_start || !s->dof || !s->b || !s->k || !s->weight || !s->A || !s->sizes)
        return SCT_NO_MEMORY;
    copy_springs(s);
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
    s->width = st->most_dof <= WIDTH_PLANE ? WIDTH_PLANE : st->most_dof <= WIDTH_SPACE ? WIDTH_SPACE : WIDTH_BEAM;
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
    free(s->per_unit);
    free(s->dof);
    free(s->b);
    free(s->k);
    free(s->weight);
    free(s->stretched);
    free(s->A);
    free(s->sizes);
    free(s);
}

sct_status sct_response_new(const sct_structure *st, sct_response *response)
{
    const size_t cases = (size_t)st->n_cases;
    response->u = array(cases * (size_t)st->n_dof, sizeof *response->u);
    response->N = array(cases * (size_t)st->n_springs, sizeof *response->N);
    response->u_error = array(cases * (size_t)st->n_dof, sizeof *response->u_error);
    response->N_error = array(cases * (size_t)st->n_springs, sizeof *response->N_error);
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

/* K = sum over springs of k b b'. False when a stiffness is not positive and finite. */
static bool fill(sct_solver *s)
{
    bool sound = true;
    memset(s->K, 0, (size_t)s->column[s->st->n_dof] * sizeof *s->K);
    for (int e = 0; e < s->st->n_springs; e++) {
        const sct_spring *spring = &s->st->springs[e];
        const double P = spring->group < 0 ? 1.0 : s->sizes[spring->group].P[spring->property];
        s->k[e] = spring->E / spring->L * P;
        sound = sound && s->k[e] > 0.0 && s->k[e] <= DBL_MAX;
        for (int p = s->entry_start[e]; p < s->entry_start[e + 1]; p++) s->K[s->entry[p]] += P * s->per_unit[p];
    }
    return sound;
}

/* Right-hand sides of all cases: loads, self-weight, and what prescribed elongations push with. */
static void load(sct_solver *s, double u[])
{
    const sct_structure *st = s->st;
    const size_t n = (size_t)st->n_dof;
    memcpy(u, st->f, (size_t)st->n_cases * n * sizeof *u);
    if (s->has_weight) {
        sct_structure_weight(st, s->A, s->weight);
        for (int k = 0; k < st->n_cases; k++) {
            const double factor = st->self_weight[k];
            for (size_t i = 0; i < n && factor != 0.0; i++) u[(size_t)k * n + i] += factor * s->weight[i];
        }
    }
    for (int p = 0; p < s->n_stretched; p++) {
        const int k = s->stretched[p].k, e = s->stretched[p].spring;
        const double S = s->k[e] * st->stretch[(size_t)k * (size_t)st->n_springs + (size_t)e];
        for (int i = 0; i < s->width; i++)
            u[(size_t)k * n + (size_t)s->dof[e * s->width + i]] -= s->b[e * s->width + i] * S;
    }
}

/* S = k (b'u + stretch) of every spring in one case. False when one is not finite; every unknown belongs to some
 * spring, so that finite forces mean finite displacements. */
static inline bool recover(const int width, const sct_solver *s, const double u[], const double stretch[], double S[])
{
    double finite = 0.0;
    const int *dof = s->dof;
    const double *b = s->b;
    for (int e = 0; e < s->st->n_springs; e++, dof += width, b += width) {
        double elongation = b[0] * u[dof[0]] + b[1] * u[dof[1]] + b[2] * u[dof[2]] + b[3] * u[dof[3]];
        if (width > WIDTH_PLANE) elongation += b[4] * u[dof[4]] + b[5] * u[dof[5]];
        for (int i = WIDTH_SPACE; i < width; i++) elongation += b[i] * u[dof[i]];
        S[e] = s->k[e] * (elongation + stretch[e]);
        finite += S[e] * 0.0; /* NaN as soon as one S is NaN or infinite */
    }
    return finite == 0.0;
}

static bool recover_case(const sct_solver *s, int k, sct_response *response)
{
    const size_t n_springs = (size_t)s->st->n_springs, at = (size_t)k * n_springs;
    const double *u = response->u + (size_t)k * (size_t)s->st->n_dof, *stretch = s->st->stretch + at;
    double *S = response->N + at;
    if (s->width == WIDTH_PLANE) return recover(WIDTH_PLANE, s, u, stretch, S);
    if (s->width == WIDTH_SPACE) return recover(WIDTH_SPACE, s, u, stretch, S);
    return recover(WIDTH_BEAM, s, u, stretch, S);
}

sct_status sct_solver_analyse_sizes(sct_solver *s, const sct_properties sizes[], sct_response *response)
{
    const sct_structure *st = s->st;
    memmove(s->sizes, sizes, (size_t)st->n_groups * sizeof *s->sizes);
    for (int g = 0; g < st->n_groups; g++) s->A[g] = sizes[g].P[SCT_OF_AREA];
    s->analyses++;
    if (!fill(s)) return SCT_NOT_ACCURATE;
    const sct_status factored = sct_factor_update(s->factor, s->K, NULL);
    if (factored != SCT_OK) return factored == SCT_NOT_CONVEX ? SCT_MECHANISM : factored;
    load(s, response->u);
    sct_factor_solve(s->factor, st->n_cases, response->u);
    bool finite = true;
    for (int k = 0; k < st->n_cases; k++) finite = recover_case(s, k, response) && finite;
    return finite ? SCT_OK : SCT_NOT_ACCURATE;
}

sct_status sct_solver_analyse(sct_solver *s, const double A[], sct_response *response)
{
    const bool are_bars = s->st->n_springs == s->st->n_bars;
    for (int g = 0; g < s->st->n_groups; g++)
        s->sizes[g] = are_bars ? (sct_properties){.P = {A[g]}, .d1 = {A[g]}, .d2 = {A[g]}}
                               : sct_properties_at_area(s->st->model, g, A[g]);
    return sct_solver_analyse_sizes(s, s->sizes, response);
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

const sct_properties *sct_solver_sizes(const sct_solver *s)
{
    return s->sizes;
}

const double *sct_solver_stiffnesses(const sct_solver *s)
{
    return s->k;
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

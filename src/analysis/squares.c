#include "analysis/squares.h"

#include <stdlib.h>
#include <string.h>

#include "base/vector.h"

/* ---- linear functions of the unknowns of a member -----------------------------------------------------------------
 */

/* Zero before the first term. */
typedef struct row {
    int n, dof[SCT_MOST_SPRING_DOF];
    double b[SCT_MOST_SPRING_DOF];
} row;

static void row_add(row *r, int dof, double b)
{
    int i = 0;
    while (i < r->n && r->dof[i] != dof) i++;
    if (i == r->n) r->dof[r->n++] = dof;
    r->b[i] += b;
}

/* Adds factor times the displacement of a joint along a direction. */
static void row_add_displacement(const sct_structure *st, int joint, const double direction[3], double factor, row *r)
{
    for (int i = 0; i < st->n_free[joint]; i++)
        row_add(r, st->first_dof[joint] + i, factor * sct_dot3(st->basis[joint][i], direction));
}

/* Adds from * (displacement of the start) + to * (that of the end) along a local axis. */
static void row_add_ends(const sct_structure *st, const sct_bar *bar, int axis, double from, double to, row *r)
{
    row_add_displacement(st, bar->from, bar->axes[axis], from, r);
    row_add_displacement(st, bar->to, bar->axes[axis], to, r);
}

/* What the elongation of a spring of bending is in s and a. */
static void parts_of_bow(sct_mode mode, double *s, double *a)
{
    *s = mode == SCT_MODE_SYMMETRIC ? 1.0 : mode == SCT_MODE_TO ? 1.5 : mode == SCT_MODE_FROM ? -1.5 : 0.0;
    *a = mode == SCT_MODE_ANTISYMMETRIC ? 1.0 : mode == SCT_MODE_TO || mode == SCT_MODE_FROM ? 0.5 : 0.0;
}

static bool bends_in(const sct_spring *spring, int plane)
{
    double s, a;
    parts_of_bow(spring->mode, &s, &a);
    return spring->plane == plane && (s != 0.0 || a != 0.0);
}

/* Adds of_s * s + of_a * a of one plane. */
static void row_add_bow(const sct_structure *st, const sct_bar *bar, int plane, double of_s, double of_a, row *r)
{
    for (int e = bar->first; e < bar->first + bar->n; e++) {
        const sct_spring *spring = &st->springs[e];
        double s, a;
        if (!bends_in(spring, plane)) continue;
        parts_of_bow(spring->mode, &s, &a);
        for (int i = 0; i < spring->n_dof; i++) row_add(r, spring->dof[i], (of_s * s + of_a * a) * spring->b[i]);
    }
}

/* ---- lists of squares -------------------------------------------------------------------------------------------- */

static bool make_room(sct_squares *q)
{
    if (q->count == q->room) {
        const int room = q->room == 0 ? 64 : 2 * q->room;
        sct_square *square = realloc(q->square, (size_t)room * sizeof *square);
        if (square == NULL) return false;
        q->square = square;
        q->room = room;
    }
    if (q->n_pool + SCT_MOST_SPRING_DOF > q->pool_room) {
        const int room = q->pool_room == 0 ? 512 : 2 * q->pool_room;
        int *dof = realloc(q->dof, (size_t)room * sizeof *dof);
        if (dof == NULL) return false;
        q->dof = dof;
        double *b = realloc(q->b, (size_t)room * sizeof *b);
        if (b == NULL) return false;
        q->b = b;
        q->pool_room = room;
    }
    return true;
}

/* Held joints leave nothing to square. */
static bool add_square(int bar, double g, double g1, const row *r, sct_squares *q)
{
    if (!make_room(q)) return false;
    sct_square *square = &q->square[q->count];
    *square = (sct_square){.bar = bar, .g = g, .g1 = g1, .first = q->n_pool};
    for (int i = 0; i < r->n; i++) {
        if (r->b[i] == 0.0) continue;
        q->dof[q->n_pool] = r->dof[i];
        q->b[q->n_pool++] = r->b[i];
        square->n++;
    }
    if (square->n > 0) q->count++;
    return true;
}

void sct_squares_free(sct_squares *q)
{
    free(q->square);
    free(q->dof);
    free(q->b);
    *q = (sct_squares){0};
}

/* What a slope of the force works on: (s + sign w)^2. */
static bool add_slope(const sct_structure *st, int e, int plane, double sign, sct_squares *q)
{
    const sct_bar *bar = &st->bars[e];
    row r = {0};
    row_add_ends(st, bar, 1 + plane, -sign / (3.0 * bar->L), sign / (3.0 * bar->L), &r);
    row_add_bow(st, bar, plane, 1.0, sign / 15.0, &r);
    return add_square(e, 0.0, sign * bar->L / 4.0, &r, q);
}

static bool add_geometry(const sct_structure *st, int e, int plane, sct_squares *q)
{
    const sct_bar *bar = &st->bars[e];
    row chord = {0};
    row_add_ends(st, bar, 1 + plane, -1.0 / bar->L, 1.0 / bar->L, &chord);
    if (!add_square(e, bar->L, 0.0, &chord, q)) return false;
    bool is_bent = false;
    for (int i = bar->first; i < bar->first + bar->n; i++) {
        const sct_spring *spring = &st->springs[i];
        if (!bends_in(spring, plane)) continue;
        row bow = {0};
        double s, a;
        parts_of_bow(spring->mode, &s, &a);
        for (int k = 0; k < spring->n_dof; k++) row_add(&bow, spring->dof[k], spring->b[k]);
        if (!add_square(e, bar->L * (s * s / 12.0 + a * a / 20.0), 0.0, &bow, q)) return false;
        is_bent = true;
    }
    return !is_bent || (add_slope(st, e, plane, 1.0, q) && add_slope(st, e, plane, -1.0, q));
}

sct_status sct_squares_of_geometry(const sct_structure *st, sct_squares *q)
{
    q->n_dof = st->n_dof;
    for (int e = 0; e < st->n_bars; e++)
        for (int plane = 0; plane < st->dim - 1; plane++)
            if (!add_geometry(st, e, plane, q)) return SCT_NO_MEMORY;
    return SCT_OK;
}

/* The Legendre terms 0 and 1 along `axis`, less of_s s and of_a a of the bow in `plane`. */
static bool add_straight(const sct_structure *st, int e, int axis, double of_s, double of_a, sct_squares *q)
{
    const sct_bar *bar = &st->bars[e];
    const double g = bar->density * bar->L;
    row mean = {0}, slope = {0};
    row_add_ends(st, bar, axis, 0.5, 0.5, &mean);
    row_add_ends(st, bar, axis, -0.5, 0.5, &slope);
    row_add_bow(st, bar, axis - 1, -of_s, 0.0, &mean); /* axis 0: no plane bends along it */
    row_add_bow(st, bar, axis - 1, 0.0, -of_a, &slope);
    return add_square(e, g, 0.0, &mean, q) && add_square(e, g / 3.0, 0.0, &slope, q);
}

static bool add_mass(const sct_structure *st, int e, sct_squares *q)
{
    const sct_bar *bar = &st->bars[e];
    const double g = bar->density * bar->L, of_s = bar->L / 12.0, of_a = bar->L / 20.0;
    if (!add_straight(st, e, 0, 0.0, 0.0, q)) return false;
    for (int plane = 0; plane < st->dim - 1; plane++) {
        row second = {0}, third = {0};
        row_add_bow(st, bar, plane, of_s, 0.0, &second);
        row_add_bow(st, bar, plane, 0.0, of_a, &third);
        if (!add_straight(st, e, 1 + plane, of_s, of_a, q)) return false;
        if (!add_square(e, g / 5.0, 0.0, &second, q) || !add_square(e, g / 7.0, 0.0, &third, q)) return false;
    }
    return true;
}

sct_status sct_squares_of_mass(const sct_structure *st, sct_squares *q)
{
    q->n_dof = st->n_dof;
    for (int e = 0; e < st->n_bars; e++)
        if (!add_mass(st, e, q)) return SCT_NO_MEMORY;
    return SCT_OK;
}

sct_status sct_squares_add_joint(const sct_structure *st, int joint, double c, sct_squares *q)
{
    for (int i = 0; i < st->n_free[joint]; i++) { /* the basis is orthonormal */
        const row r = {.n = 1, .dof = {st->first_dof[joint] + i}, .b = {1.0}};
        if (!add_square(-1, 0.0, 0.0, &r, q)) return SCT_NO_MEMORY;
        q->square[q->count - 1].c = c;
    }
    return SCT_OK;
}

/* ---- products ---------------------------------------------------------------------------------------------------- */

void sct_squares_multiply(void *squares, int count, const double X[], double Y[])
{
    const sct_squares *q = squares;
    const size_t n = (size_t)q->n_dof;
    memset(Y, 0, (size_t)count * n * sizeof *Y);
    for (int j = 0; j < q->count; j++) {
        const sct_square *square = &q->square[j];
        if (square->c == 0.0) continue;
        for (size_t k = 0; k < (size_t)count; k++) {
            const double part = square->c * sct_square_value(q, square, X + k * n);
            for (int i = square->first; i < square->first + square->n; i++)
                Y[k * n + (size_t)q->dof[i]] += part * q->b[i];
        }
    }
}

/* Place of an entry of the upper triangle, which is there: rows ascend within a column. */
static int place_of(const sct_pattern *pattern, int p, int q)
{
    const int i = p < q ? p : q, column = p < q ? q : p;
    int low = pattern->column[column], high = pattern->column[column + 1] - 1;
    while (low < high) {
        const int middle = low + (high - low) / 2;
        if (pattern->row[middle] < i)
            low = middle + 1;
        else
            high = middle;
    }
    return low;
}

void sct_squares_assemble(const sct_squares *q, double factor, const sct_pattern *pattern, double values[])
{
    for (int j = 0; j < q->count; j++) {
        const sct_square *square = &q->square[j];
        const int *dof = q->dof + square->first;
        const double *b = q->b + square->first;
        for (int k = 0; k < square->n && square->c != 0.0; k++)
            for (int i = 0; i <= k; i++) values[place_of(pattern, dof[i], dof[k])] += factor * square->c * b[i] * b[k];
    }
}

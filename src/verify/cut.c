#include "verify/cut.h"

#include <math.h>
#include <stdlib.h>

int sct_cut_loads_at_most(const sct_element *x)
{
    return x->n_loads + 1;
}

int sct_cut_breaks_at_most(const sct_element *x)
{
    return 2 * x->n_loads + 2;
}

/* ---- the combination ----------------------------------------------------------------------------------------------
 */

static void add_scaled(long double factor, const sct_element_load *load, sct_cut_line *line)
{
    sct_element_load *to = &line->loads[line->n++];
    *to = *load;
    for (int i = 0; i < 3; i++) {
        to->qa[i] *= factor;
        to->qb[i] *= factor;
        to->F[i] *= factor;
        to->M[i] *= factor;
    }
}

static void add_case(const sct_model *m, const sct_statics *s, int element, int k, double factor, sct_cut_line *line)
{
    const sct_element *x = &s->elements[element];
    const sct_case *c = &m->cases[k];
    const double *end = s->end[(size_t)k * (size_t)s->n_elements + (size_t)element];
    for (int i = 0; i < 6; i++) line->start[i] += (long double)factor * end[i];
    for (int i = 0; i < 3; i++) {
        line->loads[0].qa[i] += (long double)factor * c->self_weight * x->weight[i];
        line->loads[0].qb[i] = line->loads[0].qa[i];
    }
    for (int i = 0; i < x->n_loads; i++)
        if (x->loads[i].k == k) add_scaled(factor, &x->loads[i], line);
    for (int i = 0; i < c->n_bar_actions; i++) {
        const sct_bar_action *action = &c->bar_actions[i];
        if (action->member != x->member) continue;
        const double expansion = m->materials[m->groups[m->members[x->member].group].material].expansion;
        for (int plane = 0; plane < 2; plane++)
            if (action->gradient[plane] != 0.0)
                line->kappa[plane] -= (long double)factor * expansion * action->gradient[plane];
    }
}

static int compare_places(const void *a, const void *b)
{
    const long double p = *(const long double *)a, q = *(const long double *)b;
    return (p > q) - (p < q);
}

sct_cut_line sct_cut_line_make(const sct_model *model, const sct_statics *statics, int element, int combination,
                               sct_element_load loads[], long double breaks[])
{
    const sct_element *x = &statics->elements[element];
    sct_cut_line line = {.element = x, .loads = loads, .n = 1, .breaks = breaks, .n_breaks = 0};
    loads[0] = (sct_element_load){.b = x->L};
    for (int k = 0; k < model->n_cases; k++) {
        const double factor = model->combinations[combination].factor[k];
        if (factor != 0.0) add_case(model, statics, element, k, factor, &line);
    }
    for (int i = 0; i < line.n; i++) { /* the first load is that over the whole length */
        breaks[line.n_breaks++] = loads[i].a;
        breaks[line.n_breaks++] = loads[i].b < x->L ? loads[i].b : x->L;
    }
    qsort(breaks, (size_t)line.n_breaks, sizeof *breaks, compare_places);
    return line;
}

/* ---- one place ----------------------------------------------------------------------------------------------------
 */

/* Force of a load left of x and its moment about x: int q ds, int q (x - s) ds. */
static void left_of(const sct_element_load *load, int i, long double x, long double *force, long double *moment)
{
    const long double h = load->b - load->a, t = (x < load->b ? x : load->b) - load->a;
    const long double q = load->qa[i], slope = (load->qb[i] - load->qa[i]) / h;
    *force = q * t + slope * t * t / 2.0L;
    *moment = (x - load->a) * *force - (q * t * t / 2.0L + slope * t * t * t / 3.0L);
}

static void add_point(const sct_element_load *load, long double x, sct_cut *cut)
{
    cut->N -= load->F[0];
    cut->T -= load->M[0];
    for (int plane = 0; plane < 2; plane++) {
        cut->V[plane] += load->F[1 + plane];
        cut->M[plane] += load->F[1 + plane] * (x - load->a);
    }
    cut->M[SCT_IN_PLANE] -= load->M[2];
    cut->M[SCT_OUT_OF_PLANE] += load->M[1];
}

sct_cut sct_cut_at(const sct_cut_line *line, long double x, bool right)
{
    const long double *f = line->start;
    sct_cut cut = {.N = -f[0], .V = {f[1], f[2]}, .M = {f[1] * x - f[5], f[2] * x + f[4]}, .T = -f[3]};
    for (int i = 0; i < line->n; i++) {
        const sct_element_load *load = &line->loads[i];
        const bool is_left = load->a < x || (right && load->a == x);
        if (load->is_point && is_left) add_point(load, x, &cut);
        if (load->is_point || !is_left || !(load->b > load->a)) continue;
        for (int axis = 0; axis < 3; axis++) {
            long double force, moment;
            left_of(load, axis, x, &force, &moment);
            if (axis == 0) {
                cut.N -= force;
            } else {
                cut.V[axis - 1] += force;
                cut.M[axis - 1] += moment;
            }
        }
    }
    return cut;
}

/* ---- bow ----------------------------------------------------------------------------------------------------------
 */

/* Moment at s of a simple beam under a unit load at x. */
static long double unit_moment(long double L, long double x, long double s)
{
    return s < x ? s * (L - x) / L : x * (L - s) / L;
}

/* int m (M/EI + kappa) ds over a stretch without breaks: degree 4, where Boole's rule is exact. */
static long double bend(const sct_cut_line *line, int plane, long double x, long double a, long double b)
{
    static const long double WEIGHT[5] = {7.0L / 90, 32.0L / 90, 12.0L / 90, 32.0L / 90, 7.0L / 90};
    const sct_element *e = line->element;
    long double sum = 0.0L;
    for (int g = 0; g < 5; g++) {
        const long double s = g == 4 ? b : a + (b - a) * g / 4.0L;
        const long double M = sct_cut_at(line, s, g != 4).M[plane];
        sum += WEIGHT[g] * (M / e->EI[plane] + line->kappa[plane]) * unit_moment(e->L, x, s);
    }
    return sum * (b - a);
}

long double sct_cut_bow(const sct_cut_line *line, int plane, long double x)
{
    long double v = 0.0L;
    for (int i = 0; i + 1 < line->n_breaks; i++) {
        const long double a = line->breaks[i], b = line->breaks[i + 1];
        if (!(b > a)) continue;
        if (a < x && x < b) {
            v -= bend(line, plane, x, a, x) + bend(line, plane, x, x, b);
        } else {
            v -= bend(line, plane, x, a, b);
        }
    }
    return v;
}

/* ---- extremes -----------------------------------------------------------------------------------------------------
 */

/* Golden section between a and b; the value there is seen from inside. */
static long double climb(const sct_cut_line *line, sct_cut_value *value, const void *what, long double a, long double b)
{
    enum { STEPS = 32 }; /* to 2e-7 of the stretch: to 1e-13 of a smooth top */
    static const long double PART = 0.61803398874989484820L;
    long double p = b - PART * (b - a), q = a + PART * (b - a);
    long double at_p = value(line, what, p, true), at_q = value(line, what, q, true);
    for (int i = 0; i < STEPS; i++) {
        if (at_p > at_q) {
            b = q;
            q = p;
            at_q = at_p;
            p = b - PART * (b - a);
            at_p = value(line, what, p, true);
        } else {
            a = p;
            p = q;
            at_p = at_q;
            q = a + PART * (b - a);
            at_q = value(line, what, q, true);
        }
    }
    return at_p > at_q ? at_p : at_q;
}

long double sct_cut_largest(const sct_cut_line *line, sct_cut_value *value, const void *what)
{
    enum { PARTS = 8 }; /* of a stretch without breaks: values are of the fifth degree at most */
    long double most = -INFINITY;
    for (int k = 0; k + 1 < line->n_breaks; k++) {
        const long double a = line->breaks[k], h = (line->breaks[k + 1] - a) / PARTS;
        long double v[PARTS + 1];
        if (!(h > 0.0L)) continue;
        for (int i = 0; i <= PARTS; i++) {
            v[i] = value(line, what, i < PARTS ? a + i * h : line->breaks[k + 1], i < PARTS);
            most = fmaxl(most, v[i]);
        }
        for (int i = 0; i <= PARTS; i++) {
            const bool rises = i == 0 || v[i] > v[i - 1], falls = i == PARTS || v[i] >= v[i + 1];
            if (!rises || !falls) continue;
            const int from = i > 0 ? i - 1 : 0, to = i < PARTS ? i + 1 : PARTS;
            most = fmaxl(most, climb(line, value, what, a + from * h, a + to * h));
        }
    }
    return most;
}

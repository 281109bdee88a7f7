#include "analysis/beam_diagram.h"

#include <math.h>

#include "numerics/polynomial.h"

int sct_beam_pieces_at_most(int n_loads)
{
    return 2 * n_loads + 1;
}

/* ---- the held member --------------------------------------------------------------------------------------- */

/* Keeps the starts of n pieces ascending and different. */
static int add_break(double x, double L, int n, sct_beam_piece piece[])
{
    if (!(x > 0) || !(x < L)) return n;
    int at = n;
    while (piece[at - 1].x > x) --at; /* stops at piece 0, which starts at 0 */
    if (piece[at - 1].x == x) return n;
    for (int k = n; k > at; --k) piece[k].x = piece[k - 1].x;
    piece[at].x = x;
    return n + 1;
}

/* The pieces' places, and nothing on them yet. */
static int cut(double L, int n, const sct_beam_load loads[], sct_beam_piece piece[])
{
    int n_pieces = 1;
    piece[0].x = 0;
    for (int i = 0; i < n; ++i) {
        n_pieces = add_break(loads[i].a, L, n_pieces, piece);
        if (!loads[i].is_point) n_pieces = add_break(loads[i].b, L, n_pieces, piece);
    }
    for (int k = 0; k < n_pieces; ++k) {
        const double x = piece[k].x, to = k + 1 < n_pieces ? piece[k + 1].x : L;
        piece[k] = (sct_beam_piece){.x = x, .h = to - x};
    }
    return n_pieces;
}

/* A load's intensity at x, taken from the nearer end. */
static double intensity(const sct_beam_load *load, int axis, double x)
{
    const double h = load->b - load->a, t = (x - load->a) / h, u = (load->b - x) / h;
    return load->qa[axis] * u + load->qb[axis] * t;
}

/* Jumps at the start of the piece, and the load over it. */
static void apply(const sct_beam_load *load, sct_beam_piece *p)
{
    if (load->is_point && load->a == p->x) {
        p->N -= load->F[0];
        p->T -= load->M[0];
        p->V[0] += load->F[1];
        p->V[1] += load->F[2];
        p->M[0] -= load->M[2];
        p->M[1] += load->M[1];
    } else if (!load->is_point && load->a <= p->x && p->x < load->b) {
        for (int axis = 0; axis < 3; ++axis) {
            p->q[0][axis] += intensity(load, axis, p->x);
            p->q[1][axis] += intensity(load, axis, p->x + p->h);
        }
    }
}

/* The integrals of q over t: once, twice, three and four times, from 0 to h. */
static void integrals(const sct_beam_piece *p, int axis, double I[5])
{
    const double h = p->h, q = p->q[0][axis], dq = p->q[1][axis] - q;
    I[1] = h * (q + dq / 2);
    I[2] = h * h * (q / 2 + dq / 6);
    I[3] = h * h * h * (q / 6 + dq / 24);
    I[4] = h * h * h * h * (q / 24 + dq / 120);
}

/* The same quantities at the end of the piece, left of what acts there. */
static sct_beam_piece advanced(const sct_beam_piece *p)
{
    const double h = p->h;
    double I[5];
    integrals(p, 0, I);
    sct_beam_piece next = {.x = p->x + h, .N = p->N - I[1], .T = p->T, .EAu = p->EAu + p->N * h - I[2]};
    for (int i = 0; i < 2; ++i) {
        integrals(p, 1 + i, I);
        next.V[i] = p->V[i] + I[1];
        next.M[i] = p->M[i] + p->V[i] * h + I[2];
        next.EIslope[i] = p->EIslope[i] + p->M[i] * h + p->V[i] * h * h / 2 + I[3];
        next.EIv[i] = p->EIv[i] + p->EIslope[i] * h + p->M[i] * h * h / 2 + p->V[i] * h * h * h / 6 + I[4];
    }
    return next;
}

/* March from the start: the faces at x = 0 carry what the member puts on its joint there. */
static void integrate(double L, const double end[6], int n, const sct_beam_load loads[], int n_pieces,
                      sct_beam_piece piece[])
{
    sct_beam_piece at = {.N = end[0], .T = end[3], .V = {-end[1], -end[2]}, .M = {end[5], -end[4]}};
    for (int k = 0; k < n_pieces; ++k) {
        at.x = piece[k].x;
        at.h = piece[k].h;
        piece[k] = at;
        for (int i = 0; i < n; ++i) apply(&loads[i], &piece[k]);
        at = advanced(&piece[k]);
    }
    /* v = 0 at both ends: the chord of what came out is taken off. */
    for (int i = 0; i < 2; ++i) {
        const double tilt = at.EIv[i] / L;
        for (int k = 0; k < n_pieces; ++k) {
            piece[k].EIv[i] -= tilt * piece[k].x;
            piece[k].EIslope[i] -= tilt;
        }
    }
}

sct_beam_line sct_beam_line_make(double L, const sct_beam_hinges *hinges, int n, const sct_beam_load loads[],
                                 sct_beam_piece piece[])
{
    double end[2][6];
    sct_beam_fixed_ends(L, hinges, n, loads, end);
    const int n_pieces = cut(L, n, loads, piece);
    integrate(L, end[0], n, loads, n_pieces, piece);
    return (sct_beam_line){.L = L, .n = n_pieces, .piece = piece};
}

/* ---- values ------------------------------------------------------------------------------------------------ */

int sct_beam_piece_at(const sct_beam_line *line, double x, int side)
{
    int lo = 0, hi = line->n - 1; /* the last piece that starts before x, or at x */
    while (lo < hi) {
        const int mid = lo + (hi - lo + 1) / 2;
        const double start = line->piece[mid].x;
        if (start < x || (start == x && side >= 0))
            lo = mid;
        else
            hi = mid - 1;
    }
    return lo;
}

/* The quantity in powers of s = t/h over the piece, state included: p has 4 entries. */
static void quantity(const sct_beam_line *line, const sct_beam_state *state, int k, int what, double p[4])
{
    const sct_beam_piece *b = &line->piece[k];
    const double h = b->h;
    p[0] = p[1] = p[2] = p[3] = 0;
    if (what == SCT_BEAM_T) {
        p[0] = state->T + b->T;
    } else if (what == SCT_BEAM_N) {
        p[0] = state->N + b->N;
        p[1] = -b->q[0][0] * h;
        p[2] = -(b->q[1][0] - b->q[0][0]) * h / 2;
    } else {
        const int plane = (what - SCT_BEAM_V) % 2;
        const double *m = state->M[plane], q = b->q[0][1 + plane], dq = b->q[1][1 + plane] - q;
        const double V = (m[1] - m[0]) / line->L + b->V[plane];
        if (what < SCT_BEAM_M) {
            p[0] = V;
            p[1] = q * h;
            p[2] = dq * h / 2;
        } else {
            p[0] = sct_beam_mode_moment(line->L, m, b->x) + b->M[plane];
            p[1] = V * h;
            p[2] = q * h * h / 2;
            p[3] = dq * h * h / 6;
        }
    }
}

void sct_beam_values(const sct_beam_line *line, const sct_beam_state *state, int piece, double x,
                     double value[SCT_BEAM_QUANTITIES])
{
    const double s = (x - line->piece[piece].x) / line->piece[piece].h;
    for (int what = 0; what < SCT_BEAM_QUANTITIES; ++what) {
        double p[4];
        quantity(line, state, piece, what, p);
        value[what] = sct_polynomial_value(3, p, s);
    }
}

/* v in powers of s over the piece: p has 6 entries. */
static void bow(const sct_beam_line *line, const sct_beam_state *state, const sct_beam_bending *bending, int k,
                double p[6])
{
    const sct_beam_piece *b = &line->piece[k];
    const int plane = bending->plane;
    const double L = line->L, x = b->x, y = L - x, h = b->h, EI = bending->EI, kappa = bending->kappa;
    const double *m = state->M[plane], *d = bending->offset;
    double M[4];
    quantity(line, state, k, SCT_BEAM_M + plane, M);
    p[0] = (sct_beam_mode_bow(L, m, x) + b->EIv[plane]) / EI - kappa * x * y / 2 + d[0] * (y / L) + d[1] * (x / L);
    p[1] = h * ((sct_beam_mode_slope(L, m, x) + b->EIslope[plane]) / EI - kappa * (y - x) / 2 + (d[1] - d[0]) / L);
    p[2] = h * h * (M[0] / EI + kappa) / 2;
    p[3] = h * h * M[1] / (6 * EI);
    p[4] = h * h * M[2] / (12 * EI);
    p[5] = h * h * M[3] / (20 * EI);
}

double sct_beam_deflection(const sct_beam_line *line, const sct_beam_state *state, const sct_beam_bending *bending,
                           double x)
{
    const int k = sct_beam_piece_at(line, x, -1);
    double p[6];
    bow(line, state, bending, k, p);
    return sct_polynomial_value(5, p, (x - line->piece[k].x) / line->piece[k].h);
}

double sct_beam_slope(const sct_beam_line *line, const sct_beam_state *state, const sct_beam_bending *bending, double x)
{
    const int k = sct_beam_piece_at(line, x, -1);
    double p[6], dp[5];
    bow(line, state, bending, k, p);
    sct_polynomial_derivative(5, p, dp);
    return sct_polynomial_value(4, dp, (x - line->piece[k].x) / line->piece[k].h) / line->piece[k].h;
}

double sct_beam_N_slope(const sct_beam_line *line, int piece, double x)
{
    const sct_beam_piece *b = &line->piece[piece];
    return -(b->q[0][0] + (b->q[1][0] - b->q[0][0]) * (x - b->x) / b->h);
}

double sct_beam_held_EAu(const sct_beam_line *line, double x)
{
    const sct_beam_piece *b = &line->piece[sct_beam_piece_at(line, x, -1)];
    const double t = x - b->x, s = t / b->h, q = b->q[0][0], dq = b->q[1][0] - q;
    return b->EAu + t * (b->N - t * (q / 2 + dq * s / 6));
}

/* ---- extremes ---------------------------------------------------------------------------------------------- */

/* Places count as equal when their values differ by less than this part of the polynomial's terms: rounding of its
 * coefficients and of Horner's rule. The first of them is told. */
static const double TIE = 16 * 0x1p-52;

typedef struct search {
    const sct_beam_line *line;
    bool is_magnitude;   /* |value| counts */
    bool leaves_ends;    /* the ends of the member do not count */
    double top;          /* the largest so far; NAN stays */
    double top_at_place; /* at the place kept, less than top by rounding at most */
    sct_beam_extreme best;
} search;

static search search_new(const sct_beam_line *line, bool is_magnitude)
{
    return (search){.line = line, .is_magnitude = is_magnitude, .top = -INFINITY, .top_at_place = -INFINITY};
}

/* One candidate at s of piece k; places come in ascending order. */
static void consider(search *f, int k, int degree, const double p[], double s, bool is_root, double tie)
{
    const double value = sct_polynomial_value(degree, p, s), top = f->is_magnitude ? fabs(value) : value;
    if (isnan(f->top)) return;
    if (!(top <= f->top)) {
        f->top = top;
        f->best.value = value;
    }
    if (top <= f->top_at_place + tie) return;
    double dp[SCT_POLYNOMIAL_DEGREE], ddp[SCT_POLYNOMIAL_DEGREE];
    sct_polynomial_derivative(degree, p, dp);
    sct_polynomial_derivative(degree - 1, dp, ddp);
    const sct_beam_piece *b = &f->line->piece[k];
    const double end = k + 1 < f->line->n ? b[1].x : f->line->L, x = s < 1 ? b->x + s * b->h : end;
    f->top_at_place = top;
    f->best.x = x;
    f->best.piece = k;
    f->best.is_inside = is_root || (x > 0 && x < f->line->L && fabs(sct_polynomial_value(degree - 1, dp, s)) <= tie);
    f->best.curvature = sct_polynomial_value(degree - 2, ddp, s) / (b->h * b->h);
}

/* The ends of a piece and every place of slope 0 between. */
static void search_piece(search *f, int k, int degree, const double p[])
{
    double dp[SCT_POLYNOMIAL_DEGREE], roots[SCT_POLYNOMIAL_DEGREE], terms = 0;
    for (int i = 0; i <= degree; ++i) terms += fabs(p[i]);
    sct_polynomial_derivative(degree, p, dp);
    const int n = sct_polynomial_roots(degree - 1, dp, roots);
    if (k > 0 || !f->leaves_ends) consider(f, k, degree, p, 0, false, TIE * terms);
    for (int i = 0; i < n; ++i) consider(f, k, degree, p, roots[i], true, TIE * terms);
    if (k + 1 < f->line->n || !f->leaves_ends) consider(f, k, degree, p, 1, false, TIE * terms);
}

static sct_beam_extreme largest(const sct_beam_line *line, const sct_beam_state *state,
                                const double c[SCT_BEAM_QUANTITIES], bool leaves_ends)
{
    search f = search_new(line, false);
    f.leaves_ends = leaves_ends;
    for (int k = 0; k < line->n; ++k) {
        double sum[4] = {0};
        for (int what = 0; what < SCT_BEAM_QUANTITIES; ++what) {
            if (c[what] == 0) continue;
            double p[4];
            quantity(line, state, k, what, p);
            for (int i = 0; i < 4; ++i) sum[i] += c[what] * p[i];
        }
        search_piece(&f, k, 3, sum);
    }
    if (!(f.top > -INFINITY) && !isnan(f.top)) f.best.value = -INFINITY;
    return f.best;
}

sct_beam_extreme sct_beam_largest(const sct_beam_line *line, const sct_beam_state *state,
                                  const double c[SCT_BEAM_QUANTITIES])
{
    return largest(line, state, c, false);
}

sct_beam_extreme sct_beam_largest_inside(const sct_beam_line *line, const sct_beam_state *state,
                                         const double c[SCT_BEAM_QUANTITIES])
{
    return largest(line, state, c, true);
}

sct_beam_extreme sct_beam_largest_bow(const sct_beam_line *line, const sct_beam_state *state,
                                      const sct_beam_bending *bending)
{
    search f = search_new(line, true);
    for (int k = 0; k < line->n; ++k) {
        double p[6];
        bow(line, state, bending, k, p);
        search_piece(&f, k, 5, p);
    }
    return f.best;
}

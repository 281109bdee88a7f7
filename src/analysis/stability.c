#include "analysis/stability.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/member_line.h"
#include "analysis/recovery.h"
#include "base/vector.h"

static const double NO_FORCE = 1e-11;  /* of the largest force: smaller ones are rounding, not compression */
static const double NO_BUCKLING = 1e4; /* a load factor; far ones crowd and hide each other */
static const double FAR = 1e-6;        /* least / alpha of a mode that was not found */
static const double SWAYS = 0.05;      /* part of the loads' work: less is not called sway */

/* A force along a piece: mean + slope t, t from -1 to 1. */
typedef struct course {
    double mean, slope;
} course;

struct sct_stability {
    sct_fine *fine;
    const sct_structure *coarse;
    sct_member_lines *lines;
    sct_squares geometry;
    sct_mode_finder *finder;
    int wanted, combination;
    double *S;    /* springs of the structure */
    course *N;    /* pieces: their force */
    course *held; /* pieces: dN/dA by own weight along the member with its ends held */
    course *gain; /* pieces: what the eigenvalue gains by the force, sum of g (b'x)(b'y) */
    double *w;    /* bars of the structure: d lambda / d force, relative */
    double *wN;   /* n_cases x springs of the structure; 0 beyond the axial ones */
    sct_slack *slack;
    bool *left_out;     /* bars of the structure */
    double *q, *lambda; /* n_ties */
};

static sct_status set_up(sct_stability *s, int wanted)
{
    const sct_structure *fine = sct_fine_structure(s->fine);
    const size_t springs = (size_t)s->coarse->n_springs, pieces = (size_t)fine->n_bars;
    s->lines = sct_member_lines_new(s->coarse);
    s->S = calloc(springs + 1, sizeof *s->S);
    s->N = calloc(pieces + 1, sizeof *s->N);
    s->held = calloc(pieces + 1, sizeof *s->held);
    s->gain = calloc(pieces + 1, sizeof *s->gain);
    s->wN = calloc((size_t)s->coarse->n_cases * springs + 1, sizeof *s->wN);
    s->w = calloc((size_t)s->coarse->n_bars + 1, sizeof *s->w);
    s->left_out = calloc((size_t)s->coarse->n_bars + 1, sizeof *s->left_out);
    s->q = calloc((size_t)s->coarse->n_ties + 1, sizeof *s->q);
    s->lambda = calloc((size_t)s->coarse->n_ties + 1, sizeof *s->lambda);
    if (!s->w || !s->left_out || !s->q || !s->lambda) return SCT_NO_MEMORY;
    if (!s->lines || !s->S || !s->N || !s->held || !s->gain || !s->wN) return SCT_NO_MEMORY;
    sct_status status = sct_squares_of_geometry(fine, &s->geometry);
    if (status == SCT_OK) s->finder = sct_mode_finder_new(s->fine, &s->geometry, wanted, NO_BUCKLING, &status);
    return status;
}

sct_stability *sct_stability_new(sct_fine *fine, int wanted, sct_status *status)
{
    sct_stability *s = calloc(1, sizeof *s);
    *status = SCT_NO_MEMORY;
    if (s == NULL) return NULL;
    s->fine = fine;
    s->coarse = sct_fine_coarse(fine);
    s->wanted = wanted;
    *status = set_up(s, wanted);
    if (*status == SCT_OK) return s;
    sct_stability_free(s);
    return NULL;
}

void sct_stability_free(sct_stability *s)
{
    if (s == NULL) return;
    sct_mode_finder_free(s->finder);
    sct_squares_free(&s->geometry);
    sct_member_lines_free(s->lines);
    free(s->S);
    free(s->N);
    free(s->held);
    free(s->gain);
    free(s->wN);
    free(s->w);
    free(s->left_out);
    free(s->q);
    free(s->lambda);
    free(s);
}

void sct_stability_set_slack(sct_stability *s, sct_slack *slack)
{
    s->slack = slack;
}

/* ---- forces of the pieces ---------------------------------------------------------------------------------------- */

/* N_F over the pieces first .. first + n - 1 of a member: the straight line nearest to it, exact for uniform loads. */
static void follow(const sct_beam_line *line, int first, int n, course N[])
{
    const double h = line->L / n;
    double before = 0.0;
    for (int k = 0; k < n; k++) {
        const double middle = sct_beam_held_EAu(line, (k + 0.5) * h);
        const double after = k + 1 < n ? sct_beam_held_EAu(line, (k + 1) * h) : 0.0;
        N[first + k].mean = (after - before) / h;
        N[first + k].slope = 2.0 * (before - 2.0 * middle + after) / h; /* 3/h int N_F t dx by Simpson's rule */
        before = after;
    }
}

/* N and held of all pieces. */
static void find_forces(sct_stability *s, const sct_response *response)
{
    const double *A = sct_solver_areas(sct_fine_solver(s->fine));
    const double factor = sct_weight_factor(s->coarse, s->combination);
    sct_combine_springs(s->coarse, response, s->combination, s->S);
    for (int e = 0; e < s->coarse->n_bars; e++)
        if (s->left_out[e]) s->S[e] = 0.0;
    for (int e = 0; e < s->coarse->n_bars; e++) {
        int first;
        const int n = sct_fine_pieces(s->fine, e, &first);
        const sct_beam_line line = sct_member_line(s->lines, e, s->combination, A[s->coarse->bars[e].group]);
        follow(&line, first, n, s->N);
        const sct_beam_line own = sct_member_weight_line(s->lines, e);
        follow(&own, first, n, s->held);
        for (int p = first; p < first + n; p++) {
            s->N[p].mean += s->S[e];
            s->held[p].mean *= factor;
            s->held[p].slope *= factor;
        }
    }
}

/* Rounding off: 0 where the force is none beside the largest. */
static double real_force(double N, double largest)
{
    return fabs(N) > NO_FORCE * largest ? N : 0.0;
}

/* The greatest compression along a piece, > 0; else 0 or less. */
static double compression(course N)
{
    return fabs(N.slope) - N.mean;
}

/* B = -K_geo. False: nothing is compressed. */
static bool set_geometry(sct_stability *s)
{
    const int n_pieces = sct_fine_structure(s->fine)->n_bars;
    double largest = 0.0, most = 0.0;
    for (int p = 0; p < n_pieces; p++) {
        largest = fmax(largest, fabs(s->N[p].mean) + fabs(s->N[p].slope));
        most = fmax(most, compression(s->N[p]));
    }
    for (int j = 0; j < s->geometry.count; j++) {
        sct_square *square = &s->geometry.square[j];
        const course N = s->N[square->bar];
        square->c = -real_force(N.mean, largest) * square->g - real_force(N.slope, largest) * square->g1;
    }
    return most > NO_FORCE * largest;
}

sct_status sct_stability_find(sct_stability *s, const sct_response *response, int combination, sct_mode_search how,
                              sct_modes *modes)
{
    s->combination = combination;
    for (int i = 0; s->slack != NULL && i < s->coarse->n_ties; i++)
        s->left_out[s->coarse->ties[i]] = sct_slack_is(s->slack, combination, i);
    sct_fine_leave_out(s->fine, s->left_out);
    find_forces(s, response);
    *modes = (sct_modes){0};
    if (!set_geometry(s)) return SCT_OK;
    return sct_mode_finder_run(s->finder, how, modes);
}

/* ---- derivatives ------------------------------------------------------------------------------------------------- */

static void find_gains(sct_stability *s, const double x[], const double y[])
{
    const sct_squares *q = &s->geometry;
    memset(s->gain, 0, (size_t)sct_fine_structure(s->fine)->n_bars * sizeof *s->gain);
    for (int j = 0; j < q->count; j++) {
        const sct_square *square = &q->square[j];
        const double part = sct_square_value(q, square, x) * sct_square_value(q, square, y);
        s->gain[square->bar].mean += square->g * part;
        s->gain[square->bar].slope += square->g1 * part;
    }
}

/* The gain by all forces as weights of the springs' forces; adds what own weight between the ends gains to D. */
static void weigh(sct_stability *s, double alpha, double D[])
{
    const sct_structure *st = s->coarse;
    const double *factor = sct_factors(st, s->combination);
    const sct_properties *sizes = sct_solver_sizes(sct_fine_solver(s->fine));
    const size_t springs = (size_t)st->n_springs;
    for (int e = 0; e < st->n_bars; e++) {
        int first;
        const int n = sct_fine_pieces(s->fine, e, &first), var = st->var_of_group[st->bars[e].group];
        double sum = 0.0, own = 0.0;
        for (int p = first; p < first + n; p++) {
            sum += s->gain[p].mean;
            own += s->gain[p].mean * s->held[p].mean + s->gain[p].slope * s->held[p].slope;
        }
        if (var >= 0) D[var] += alpha * own * sizes[st->bars[e].group].d1[SCT_OF_AREA];
        s->w[e] = alpha * sum;
        for (int k = 0; k < st->n_cases; k++) s->wN[(size_t)k * springs + (size_t)e] = factor[k] * s->w[e];
    }
}

/* What slack bars lack changes with the sizes, and the other forces with that: sct_slack_weights. */
static void weigh_slack(sct_stability *s, const sct_response *response)
{
    const sct_structure *st = s->coarse;
    const double *factor = sct_factors(st, s->combination);
    const size_t springs = (size_t)st->n_springs;
    if (s->slack == NULL || st->n_ties == 0) return;
    for (int i = 0; i < st->n_ties; i++) {
        const double *S = response->N + (size_t)(st->n_cases - st->n_ties + i) * springs;
        s->q[i] = 0.0;
        for (int e = 0; e < st->n_bars; e++) s->q[i] += s->w[e] * S[e];
    }
    sct_slack_weights(s->slack, s->combination, s->q, s->lambda);
    for (int k = 0; k < st->n_cases; k++)
        for (int i = 0; i < st->n_ties; i++)
            s->wN[(size_t)k * springs + (size_t)st->ties[i]] += factor[k] * s->lambda[i];
}

sct_status sct_stability_derivative(sct_stability *s, sct_solver *solver, const sct_response *response,
                                    const sct_modes *modes, int i, int j, double D[])
{
    const int n_vars = s->coarse->n_vars, n = sct_fine_structure(s->fine)->n_dof;
    const double *x = modes->X + (size_t)i * (size_t)n, *y = modes->X + (size_t)j * (size_t)n;
    const double alpha = i == j ? modes->lambda[i] : (modes->lambda[i] + modes->lambda[j]) / 2.0;
    const sct_weights q = {.wN = s->wN};
    find_gains(s, x, y);
    memset(D, 0, (size_t)n_vars * sizeof *D);
    sct_status status = SCT_OK;
    double *work = calloc(2 * (size_t)n_vars + 1, sizeof *work);
    if (work == NULL) return SCT_NO_MEMORY;
    weigh(s, alpha, D);
    weigh_slack(s, response);
    sct_fine_stiffness_derivative(s->fine, x, y, work);
    status = sct_sensitivity_adjoint(solver, response, 1, &q, work + n_vars);
    for (int v = 0; v < n_vars; v++) D[v] += work[v] + work[n_vars + v];
    free(work);
    return status;
}

sct_status sct_stability_limits(sct_stability *s, sct_solver *solver, const sct_response *response,
                                const sct_modes *modes, double least, int count, double g[], double dg[])
{
    const size_t n_vars = (size_t)s->coarse->n_vars;
    for (int i = 0; i < count; i++) {
        double *row = dg + (size_t)i * n_vars;
        memset(row, 0, n_vars * sizeof *row);
        g[i] = log(FAR);
        if (i >= modes->n) continue;
        g[i] = log(least / modes->lambda[i]);
        const sct_status status = sct_stability_derivative(s, solver, response, modes, i, i, row);
        if (status != SCT_OK) return status;
        for (size_t v = 0; v < n_vars; v++) row[v] = -row[v];
    }
    return SCT_OK;
}

/* ---- sway -------------------------------------------------------------------------------------------------------- */

double sct_stability_sway(const sct_stability *s, const sct_modes *modes, int i)
{
    const sct_structure *fine = sct_fine_structure(s->fine);
    const double *x = modes->X + (size_t)i * (size_t)fine->n_dof;
    double sum = 0.0;
    for (int e = 0; e < s->coarse->n_bars; e++) {
        const sct_bar *bar = &s->coarse->bars[e];
        double from[3], to[3], d[3];
        sct_joint_displacement(fine, x, NULL, bar->from, from);
        sct_joint_displacement(fine, x, NULL, bar->to, to);
        sct_subtract3(to, from, d);
        for (int plane = 0; plane < s->coarse->dim - 1; plane++) {
            const double across = sct_dot3(d, bar->axes[1 + plane]);
            sum -= s->S[e] * across * across / bar->L;
        }
    }
    return modes->lambda[i] * sum;
}

double sct_sway_factor(const sct_stability *s, const sct_modes *modes, bool *is_bound)
{
    *is_bound = false;
    for (int i = 0; i < modes->n; i++)
        if (sct_stability_sway(s, modes, i) >= SWAYS) return modes->lambda[i];
    if (modes->n < s->wanted) return (double)INFINITY;
    *is_bound = true;
    return modes->lambda[modes->n - 1];
}

/* ---- members ----------------------------------------------------------------------------------------------------- */

/* Energy of bending in pieces first .. first + n - 1; plane < 0: both. */
static double bending_energy(const sct_fine *fine, const double x[], int first, int n, int plane)
{
    const sct_structure *st = sct_fine_structure(fine);
    const double *k = sct_solver_stiffnesses(sct_fine_solver(fine));
    double sum = 0.0;
    for (int p = first; p < first + n; p++) {
        for (int i = st->bars[p].first; i < st->bars[p].first + st->bars[p].n; i++) {
            const sct_spring *spring = &st->springs[i];
            double e = 0.0;
            if (spring->mode == SCT_MODE_TWIST || spring->mode == SCT_MODE_END) continue;
            if (plane >= 0 && spring->plane != plane) continue;
            for (int d = 0; d < spring->n_dof; d++) e += spring->b[d] * x[spring->dof[d]];
            sum += k[i] * e * e;
        }
    }
    return sum;
}

sct_member_mode sct_stability_member(const sct_stability *s, const sct_modes *modes, int mode, int member, int plane)
{
    const sct_structure *st = sct_fine_structure(s->fine);
    const sct_bar *bar = &s->coarse->bars[member];
    const double *x = modes->X + (size_t)mode * (size_t)st->n_dof;
    const double I = sct_solver_sizes(sct_fine_solver(s->fine))[bar->group].P[SCT_OF_INERTIA_IN + plane];
    int first;
    const int n = sct_fine_pieces(s->fine, member, &first);
    const double all = bending_energy(s->fine, x, 0, st->n_bars, -1);
    const double own = bending_energy(s->fine, x, first, n, plane);
    double most = 0.0;
    for (int p = first; p < first + n; p++) most = fmax(most, compression(s->N[p]));
    sct_member_mode result = {.share = all > 0.0 ? own / all : 0.0, .Lcr = (double)INFINITY};
    if (most > 0.0) result.Lcr = acos(-1.0) * sqrt(bar->E * I / (modes->lambda[mode] * most));
    return result;
}

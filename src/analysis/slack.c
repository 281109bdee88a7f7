/* With k_e the stiffness of the bars that carry tension only, everything is scaled to
 *
 *     w = q + M z,   w_e = N_e / sqrt(k_e),   z_e = d_e sqrt(k_e),   M_ef = G_ef / sqrt(k_e k_f)
 *
 * where M is the part of a projection (I - D^1/2 b'K^-1 b D^1/2) that belongs to these bars: what is left of a pivot is
 * how much stiffer the bar is held without it than it is itself, 0 where without it the structure is a mechanism. */
#include "analysis/slack.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/sensitivity.h"
#include "base/text.h"
#include "numerics/dense.h"

static const double NO_FORCE = 1e-9; /* of the largest force with all bars acting: no compression yet */
/* Rounding, relative to the largest d k: of forces, which are differences of such, and of d. */
static const double ROUNDING = 1e-12, ROUNDING_OF_D = 1e-10;
static const double SOFT = 1e-9;       /* a pivot that is none */
static const double TAKES_PART = 1e-4; /* of the largest entry of a motion */

typedef enum fault { NO_FAULT, NOT_CARRIED, NOT_FOUND } fault;

struct sct_slack {
    const sct_structure *st;
    int n;          /* bars that carry tension only */
    bool *is_slack; /* n_combinations x n */
    double *root;   /* n: sqrt(k) */
    double *M;      /* n x n */
    /* the combination at hand */
    double *q, *w, *z; /* n */
    double force;      /* largest with all bars acting */
    bool *in;          /* n: the slack set */
    int n_in, *set;    /* the same as a list */
    double *L;         /* n x n, n_in of each are used: Cholesky factor of M in the set */
    double *c;         /* n: M_TT^-1 M_Tk, and other right-hand sides */
    double *dd, *part; /* n_combinations x n x n_vars; n_vars */
    /* of the latest failure: its combination, and the bars that it is about */
    fault fault;
    int combination;
    bool *is_named;
};

/* ---- memory ------------------------------------------------------------------------------------------------------ */

void sct_slack_free(sct_slack *s)
{
    if (s == NULL) return;
    free(s->is_slack);
    free(s->root);
    free(s->M);
    free(s->q);
    free(s->w);
    free(s->z);
    free(s->in);
    free(s->set);
    free(s->L);
    free(s->c);
    free(s->dd);
    free(s->part);
    free(s->is_named);
    free(s);
}

sct_slack *sct_slack_new(const sct_structure *st)
{
    sct_slack *s = calloc(1, sizeof *s);
    if (s == NULL) return NULL;
    const size_t n = (size_t)st->n_ties, room = n + 1; /* nothing is a pointer too */
    s->st = st;
    s->n = st->n_ties;
    s->is_slack = calloc((size_t)st->n_combinations * n + 1, sizeof *s->is_slack);
    s->root = calloc(room, sizeof *s->root);
    s->M = calloc(n * n + 1, sizeof *s->M);
    s->q = calloc(room, sizeof *s->q);
    s->w = calloc(room, sizeof *s->w);
    s->z = calloc(room, sizeof *s->z);
    s->in = calloc(room, sizeof *s->in);
    s->set = calloc(room, sizeof *s->set);
    s->L = calloc(n * n + 1, sizeof *s->L);
    s->c = calloc(room, sizeof *s->c);
    s->is_named = calloc(room, sizeof *s->is_named);
    s->dd = calloc((size_t)st->n_combinations * n * (size_t)st->n_vars + 1, sizeof *s->dd);
    s->part = calloc((size_t)st->n_vars + 1, sizeof *s->part);
    if (s->dd && s->part && s->is_slack && s->root && s->M && s->q && s->w && s->z && s->in && s->set && s->L && s->c &&
        s->is_named)
        return s;
    sct_slack_free(s);
    return NULL;
}

/* ---- the problem ------------------------------------------------------------------------------------------------- */

static const double *forces_of_case(const sct_slack *s, const sct_response *response, int k)
{
    return response->N + (size_t)k * (size_t)s->st->n_springs;
}

static int hidden_case(const sct_slack *s, int i)
{
    return s->st->n_cases - s->n + i;
}

static void fill_matrix(sct_slack *s, const sct_solver *solver, const sct_response *response)
{
    const double *k = sct_solver_stiffnesses(solver);
    for (int i = 0; i < s->n; i++) s->root[i] = sqrt(k[s->st->ties[i]]);
    for (int f = 0; f < s->n; f++) {
        const double *N = forces_of_case(s, response, hidden_case(s, f));
        for (int e = 0; e < s->n; e++) s->M[e * s->n + f] = N[s->st->ties[e]] / (s->root[e] * s->root[f]);
    }
}

/* The forces of a combination with all bars acting. */
static void begin(sct_slack *s, const sct_response *response, int combination)
{
    const sct_structure *st = s->st;
    const double *factor = sct_factors(st, combination);
    s->force = 0.0;
    for (int i = 0; i < s->n; i++) {
        s->in[i] = false;
        s->q[i] = 0.0;
    }
    for (int e = 0, i = 0; e < st->n_bars; e++) {
        double N = 0.0;
        for (int k = 0; k < st->n_cases - s->n; k++)
            if (factor[k] != 0.0) N += factor[k] * forces_of_case(s, response, k)[e];
        s->force = fmax(s->force, fabs(N));
        if (i < s->n && st->ties[i] == e) {
            s->q[i] = N / s->root[i];
            i++;
        }
    }
}

/* ---- one set ----------------------------------------------------------------------------------------------------- */

/* The factor of M in the slack set; false: without these bars the structure is a mechanism. */
static bool factor_set(sct_slack *s)
{
    s->n_in = 0;
    for (int i = 0; i < s->n; i++)
        if (s->in[i]) s->set[s->n_in++] = i;
    const int n = s->n_in;
    for (int a = 0; a < n; a++)
        for (int b = 0; b <= a; b++) s->L[a * n + b] = s->M[s->set[a] * s->n + s->set[b]];
    if (!sct_cholesky(n, s->L)) return false;
    for (int a = 0; a < n; a++)
        if (!(s->L[a * n + a] * s->L[a * n + a] > SOFT)) return false;
    return true;
}

/* Solves M_TT x = b for `width` right-hand sides at once, in place: x is n_in x width. */
static void solve_set(const sct_slack *s, int width, double x[])
{
    const int n = s->n_in;
    for (int a = 0; a < n; a++) {
        for (int b = 0; b < a; b++) sct_axpy(width, -s->L[a * n + b], x + b * width, x + a * width);
        for (int v = 0; v < width; v++) x[a * width + v] /= s->L[a * n + a];
    }
    for (int a = n - 1; a >= 0; a--) {
        for (int b = a + 1; b < n; b++) sct_axpy(width, -s->L[b * n + a], x + b * width, x + a * width);
        for (int v = 0; v < width; v++) x[a * width + v] /= s->L[a * n + a];
    }
}

static void find_forces(sct_slack *s)
{
    for (int e = 0; e < s->n; e++) {
        s->w[e] = s->q[e];
        for (int a = 0; a < s->n_in; a++) s->w[e] += s->M[e * s->n + s->set[a]] * s->z[s->set[a]];
    }
}

/* w and z of the set: w = 0 in it, z = 0 outside. The second round takes the rounding of the first out. */
static bool look(sct_slack *s)
{
    enum { ROUNDS = 2 };
    if (!factor_set(s)) return false;
    for (int i = 0; i < s->n; i++) s->z[i] = 0.0;
    for (int round = 0; round < ROUNDS; round++) {
        find_forces(s);
        for (int a = 0; a < s->n_in; a++) s->c[a] = s->w[s->set[a]];
        solve_set(s, 1, s->c);
        for (int a = 0; a < s->n_in; a++) s->z[s->set[a]] -= s->c[a];
    }
    find_forces(s);
    return true;
}

/* Must bar i change sides? */
static bool is_wrong(const sct_slack *s, int i)
{
    double most = 0.0; /* d k */
    for (int a = 0; a < s->n_in; a++) most = fmax(most, fabs(s->z[s->set[a]]) * s->root[s->set[a]]);
    if (s->in[i]) return s->z[i] * s->root[i] < -(NO_FORCE * s->force + ROUNDING_OF_D * most);
    return s->w[i] * s->root[i] < -(NO_FORCE * s->force + ROUNDING * most);
}

/* ---- the search -------------------------------------------------------------------------------------------------- */

/* All wrong bars change sides together, from none slack. False: no end, or a set without which the rest moves. */
static bool change_all(sct_slack *s)
{
    enum { MOST_ROUNDS = 12 };
    for (int round = 0; round < MOST_ROUNDS; round++) {
        bool any = false;
        if (!look(s)) return false;
        for (int i = 0; i < s->n; i++) { /* is_wrong looks at the list, which stays */
            s->is_named[i] = is_wrong(s, i);
            any = any || s->is_named[i];
        }
        for (int i = 0; i < s->n; i++) s->in[i] = s->in[i] != s->is_named[i];
        if (!any) return true;
    }
    return false;
}

/* Bar k, compressed, goes slack. Where without it the rest would move, a slack bar that holds that motion comes back
 * for it; false: none does. */
static bool slacken(sct_slack *s, int k)
{
    double left = s->M[k * s->n + k], most = 1.0;
    for (int a = 0; a < s->n_in; a++) s->c[a] = s->M[s->set[a] * s->n + k];
    solve_set(s, 1, s->c);
    for (int a = 0; a < s->n_in; a++) {
        left -= s->c[a] * s->M[s->set[a] * s->n + k];
        most = fmax(most, fabs(s->c[a]));
    }
    s->in[k] = true;
    if (left > SOFT) return true;
    for (int a = 0; a < s->n_in; a++) {
        if (!(s->c[a] > TAKES_PART * most)) continue;
        s->in[s->set[a]] = false;
        return true;
    }
    memset(s->is_named, 0, (size_t)s->n * sizeof *s->is_named);
    s->is_named[k] = true; /* the motion: k shortens by 1, the bars of the set by -c */
    for (int a = 0; a < s->n_in; a++) s->is_named[s->set[a]] = s->c[a] < -TAKES_PART * most;
    return false;
}

/* The criss-cross method: the first wrong bar changes sides. */
static fault change_first(sct_slack *s)
{
    const int most_rounds = 200 + 20 * s->n; /* usually n or so */
    for (int i = 0; i < s->n; i++) s->in[i] = false;
    for (int round = 0; round < most_rounds; round++) {
        if (!look(s)) break;
        int k = 0;
        while (k < s->n && !is_wrong(s, k)) k++;
        if (k == s->n) return NO_FAULT;
        if (s->in[k])
            s->in[k] = false;
        else if (!slacken(s, k))
            return NOT_CARRIED;
    }
    for (int i = 0; i < s->n; i++) s->is_named[i] = s->in[i];
    return NOT_FOUND;
}

sct_status sct_slack_find(sct_slack *s, const sct_solver *solver, const sct_response *response)
{
    const sct_structure *st = s->st;
    s->fault = NO_FAULT;
    if (s->n == 0) return SCT_OK;
    fill_matrix(s, solver, response);
    for (int c = 0; c < st->n_combinations; c++) {
        double *d = st->factor + (size_t)c * (size_t)st->n_cases + hidden_case(s, 0);
        begin(s, response, c);
        if (!change_all(s)) s->fault = change_first(s);
        s->combination = c;
        if (s->fault != NO_FAULT) return s->fault == NOT_CARRIED ? SCT_MECHANISM : SCT_NOT_ACCURATE;
        for (int i = 0; i < s->n; i++) d[i] = s->in[i] ? fmax(s->z[i], 0.0) / s->root[i] : 0.0;
        memcpy(s->is_slack + (size_t)c * (size_t)s->n, s->in, (size_t)s->n * sizeof *s->in);
    }
    return SCT_OK;
}

bool sct_slack_is(const sct_slack *s, int combination, int i)
{
    return s->is_slack[(size_t)combination * (size_t)s->n + (size_t)i];
}

bool sct_slack_failed(const sct_slack *s)
{
    return s->fault != NO_FAULT;
}

void sct_slack_tell(const sct_slack *s, sct_issues *issues)
{
    enum { MOST_NAMED = 8 };
    const sct_model *m = s->st->model;
    const sct_where where =
        m->n_combinations > 0 ? m->combinations[s->combination].where : (sct_where){.file = m->file};
    sct_text names = {0};
    int n = 0;
    if (s->fault == NO_FAULT) return;
    for (int i = 0; i < s->n; i++) {
        if (!s->is_named[i] || n++ >= MOST_NAMED) continue;
        sct_text_format(&names, "%s\"%s\"", n > 1 ? ", " : "", sct_show(m->members[s->st->ties[i]].name).text);
    }
    if (n > MOST_NAMED) sct_text_format(&names, " and %d more", n - MOST_NAMED);
    const char *text = names.failed || names.data == NULL ? "" : names.data;
    if (s->fault == NOT_CARRIED)
        sct_issue_add(issues, SCT_ERROR, where,
                      "combination \"%s\" is not carried: it compresses members that carry tension only (%s), and when "
                      "they are slack the structure moves without resistance",
                      sct_show(m->combinations[s->combination].name).text, text);
    else
        sct_issue_add(issues, SCT_ERROR, where,
                      "combination \"%s\": no set of slack members was found that agrees with the forces; the last one "
                      "tried: %s",
                      sct_show(m->combinations[s->combination].name).text, n > 0 ? text : "none");
    sct_text_free(&names);
}

/* ---- derivatives ------------------------------------------------------------------------------------------------- */

/* The slack set of a combination as it was found, with its factor, which was good then. */
static void take_set(sct_slack *s, int combination)
{
    memcpy(s->in, s->is_slack + (size_t)combination * (size_t)s->n, (size_t)s->n * sizeof *s->in);
    (void)factor_set(s);
}

static double *change_of(const sct_slack *s, int combination, int i)
{
    return s->dd + ((size_t)combination * (size_t)s->n + (size_t)i) * (size_t)s->st->n_vars;
}

/* M_TT (root d')_T = -(N' at fixed d)_T / root */
void sct_slack_derive(sct_slack *s, const sct_solver *solver, const sct_response *response, const double *du)
{
    const sct_structure *st = s->st;
    const int vars = st->n_vars;
    memset(s->dd, 0, (size_t)st->n_combinations * (size_t)s->n * (size_t)vars * sizeof *s->dd);
    for (int c = 0; c < st->n_combinations && s->n > 0; c++) {
        const double *factor = sct_factors(st, c);
        take_set(s, c);
        for (int a = 0; a < s->n_in; a++) {
            for (int k = 0; k < st->n_cases; k++) {
                if (factor[k] == 0.0) continue;
                sct_sensitivity_force(solver, response, du, st->ties[s->set[a]], k, s->part);
                sct_axpy(vars, -factor[k] / s->root[s->set[a]], s->part, change_of(s, c, a));
            }
        }
        solve_set(s, vars, change_of(s, c, 0));
        for (int a = s->n_in - 1; a >= 0; a--) { /* to its place; set[a] >= a: from behind, nothing is overwritten */
            double *from = change_of(s, c, a), *to = change_of(s, c, s->set[a]);
            for (int v = 0; v < vars; v++) s->part[v] = from[v] / s->root[s->set[a]];
            memset(from, 0, (size_t)vars * sizeof *from);
            memcpy(to, s->part, (size_t)vars * sizeof *to);
        }
    }
}

const double *sct_slack_change(const sct_slack *s, int combination, int i)
{
    return sct_slack_is(s, combination, i) ? change_of(s, combination, i) : NULL;
}

/* lambda_T = -G_TT^-1 q_T */
void sct_slack_weights(sct_slack *s, int combination, const double q[], double lambda[])
{
    take_set(s, combination);
    for (int a = 0; a < s->n_in; a++) s->c[a] = -q[s->set[a]] / s->root[s->set[a]];
    solve_set(s, 1, s->c);
    for (int i = 0; i < s->n; i++) lambda[i] = 0.0;
    for (int a = 0; a < s->n_in; a++) lambda[s->set[a]] = s->c[a] / s->root[s->set[a]];
}

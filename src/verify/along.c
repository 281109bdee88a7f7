/* What a result tells of members between their joints. */
#include <math.h>
#include <string.h>

#include "verify/strength.h"
#include "verify/verifier.h"

static const double AXES = 1e-9;  /* between unit vectors */
static const double PLACE = 1e-9; /* of the length: nearer places are one */

static sct_cut_line line_of(sct_verifier *v, int member, int combination)
{
    const sct_statics *s = sct_statics_of(v, combination);
    return sct_cut_line_make(v->m, s, s->element_of[member], combination, v->loads, v->breaks);
}

static bool is_for_strength(const sct_verifier *v, int c)
{
    return v->m->combinations[c].basis == SCT_ALLOWABLE;
}

/* ---- ends ---------------------------------------------------------------------------------------------------------
 */

static void compare_cut(sct_verifier *v, int e, int c, const sct_cut *cut, const double said[6])
{
    static const char *const WHAT[6] = {
        "force at an end",           "shear force in plane at an end", "shear force out of plane at an end",
        "moment in plane at an end", "moment out of plane at an end",  "torque at an end"};
    const sct_open *open = &v->open_of[c];
    const long double found[6] = {cut->N, cut->V[0], cut->V[1], cut->M[0], cut->M[1], cut->T};
    for (int i = 0; i < 6; i++) {
        const double allowed = i == 0 ? sct_verify_N_open(v, e, c) : open->end[i >= 3];
        sct_compare(v, WHAT[i], v->r->members[e].name, v->r->combinations[c], said[i], (double)found[i], allowed);
    }
}

void sct_verify_ends(sct_verifier *v, int c)
{
    const sct_result *r = v->r;
    for (int e = 0; e < r->n_members && r->has_bent; e++) {
        const double *said = r->ends + ((size_t)c * (size_t)r->n_members + (size_t)e) * 12;
        sct_cut at[2] = {{.N = 0.0L}, {.N = 0.0L}};
        if (v->statics->element_of[e] < 0) {
            at[0].N = at[1].N = v->N[(size_t)c * (size_t)r->n_members + (size_t)e];
        } else {
            const sct_cut_line line = line_of(v, e, c);
            at[0] = sct_cut_at(&line, 0.0L, true);
            at[1] = sct_cut_at(&line, line.element->L, false);
        }
        for (int end = 0; end < 2; end++) compare_cut(v, e, c, &at[end], said + 6 * end);
    }
}

static void compare_axes(sct_verifier *v, int e)
{
    const sct_member_result *said = &v->r->members[e];
    const sct_element *x = &v->statics->elements[v->statics->element_of[e]];
    for (int i = 0; i < 9; i++)
        sct_compare(v, "local axis of member", said->name, NULL, said->axes[i / 3][i % 3],
                    (double)x->axes[i / 3][i % 3], AXES);
    for (int i = 0; i < 2 * SCT_TURNS; i++) {
        const sct_fixity fixity = v->m->members[e].end[i / SCT_TURNS].fixity[i % SCT_TURNS];
        const bool is_hinged = fixity == SCT_PINNED;
        const bool is_sprung = fixity == SCT_SPRUNG && sct_element_turns(v->m, e, i / SCT_TURNS, i % SCT_TURNS);
        if (said->hinged[i / SCT_TURNS][i % SCT_TURNS] != is_hinged)
            sct_differ(v, "hinge of member", said->name, NULL, !is_hinged, is_hinged);
        if (said->sprung[i / SCT_TURNS][i % SCT_TURNS] != is_sprung)
            sct_differ(v, "sprung end of member", said->name, NULL, !is_sprung, is_sprung);
    }
}

/* ---- values along a member ----------------------------------------------------------------------------------------
 */

/* sign[0] N + sign[1] M_in + sign[2] M_out */
static long double some_force(const sct_cut_line *line, const void *what, long double x, bool right)
{
    const int *sign = what;
    const sct_cut cut = sct_cut_at(line, x, right);
    return sign[0] * cut.N + sign[1] * cut.M[0] + sign[2] * cut.M[1];
}

/* A check; N counts where it is, or (column) as `N` everywhere. */
typedef struct check {
    sct_verify_capacities capacity;
    bool is_column;
    long double N;
} check;

static long double utilisation_at(const sct_cut_line *line, const void *what, long double x, bool right)
{
    const check *k = what;
    const sct_cut cut = sct_cut_at(line, x, right);
    return (k->is_column ? k->N : cut.N) / k->capacity.force + fabsl(cut.M[0]) / k->capacity.moment[0] +
           fabsl(cut.M[1]) / k->capacity.moment[1];
}

/* A displacement across the member, off a line that is offset[0], offset[1] away at its ends. */
typedef struct bow {
    int plane, sign;
    double offset[2];
} bow;

static long double bow_at(const sct_cut_line *line, const void *what, long double x, bool right)
{
    const bow *b = what;
    const long double t = x / line->element->L;
    (void)right;
    return b->sign * (sct_cut_bow(line, b->plane, x) + (1.0L - t) * b->offset[0] + t * b->offset[1]);
}

/* Is the value at x, from one side or the other, `said`? Then nothing is told; else the nearer one. */
static void compare_at(sct_verifier *v, const char *what, int e, int c, const sct_cut_line *line, sct_cut_value *value,
                       const void *of, double x, double said, double open)
{
    const double left = (double)value(line, of, x, false), right = (double)value(line, of, x, true);
    sct_compare(v, what, v->r->members[e].name, v->r->combinations[c], said,
                fabs(left - said) < fabs(right - said) ? left : right, open);
}

static bool is_place(const sct_cut_line *line, double x)
{
    return x >= 0.0 && x <= (double)line->element->L * (1.0 + PLACE);
}

/* ---- strength -----------------------------------------------------------------------------------------------------
 */

/* The worst of one kind of check in a combination; 0: it does not apply. */
static double worst_of(const sct_verifier *v, int e, int c, const sct_cut_line *line, sct_verify_kind kind, check *k)
{
    static const int COMPRESSION[3] = {-1, 0, 0};
    *k = (check){.is_column = kind == SCT_BENT_COLUMN};
    if (!sct_verify_bending(v->m, e, (double)line->element->L, kind, &k->capacity)) return 0.0;
    for (int axis = 0; axis < 2; axis++) k->capacity.moment[axis] /= sct_verify_amplification(v, c);
    if (k->is_column) k->N = -sct_cut_largest(line, some_force, COMPRESSION);
    if (k->is_column && !(k->N < 0.0L)) return 0.0;
    return (double)sct_cut_largest(line, utilisation_at, k);
}

static double open_of(const sct_verifier *v, int e, int c, const check *k)
{
    const double M = v->open_of[c].end[1];
    return sct_verify_N_open(v, e, c) / fabs(k->capacity.force) + M / k->capacity.moment[0] + M / k->capacity.moment[1];
}

static int kind_of(sct_check_kind kind)
{
    return kind == SCT_CHECK_BENT_TENSION       ? SCT_FIBRE_TENSION
           : kind == SCT_CHECK_BENT_COMPRESSION ? SCT_FIBRE_COMPRESSION
           : kind == SCT_CHECK_BENT_BUCKLING    ? SCT_BENT_COLUMN
                                                : -1;
}

/* The governing check with the forces that are told of it. */
static void compare_governing(sct_verifier *v, int e)
{
    static const int M_IN[3] = {0, 1, 0}, M_OUT[3] = {0, 0, 1}, N[3] = {1, 0, 0};
    const sct_member_result *said = &v->r->members[e];
    const int kind = kind_of(said->check), c = said->combination;
    if (kind < 0) return; /* slenderness, or nothing */
    if (c < 0 || c >= v->r->n_combinations || !is_for_strength(v, c)) {
        sct_differ(v, "governing combination of member", said->name, NULL, c, NAN);
        return;
    }
    const sct_cut_line line = line_of(v, e, c);
    const sct_open *open = &v->open_of[c];
    if (!is_place(&line, said->x)) {
        sct_differ(v, "governing place on member", said->name, v->r->combinations[c], said->x, NAN);
        return;
    }
    check k;
    worst_of(v, e, c, &line, (sct_verify_kind)kind, &k);
    compare_at(v, "utilisation at the governing place of member", e, c, &line, utilisation_at, &k, said->x,
               said->utilisation, open_of(v, e, c, &k));
    compare_at(v, "moment in plane at the governing place of member", e, c, &line, some_force, M_IN, said->x,
               said->M[0], open->end[1]);
    compare_at(v, "moment out of plane at the governing place of member", e, c, &line, some_force, M_OUT, said->x,
               said->M[1], open->end[1]);
    if (kind == SCT_BENT_COLUMN)
        sct_compare(v, "governing force of member", said->name, v->r->combinations[c], said->N, (double)k.N,
                    sct_verify_N_open(v, e, c));
    else
        compare_at(v, "governing force of member", e, c, &line, some_force, N, said->x, said->N,
                   sct_verify_N_open(v, e, c));
}

/* ---- extremes -----------------------------------------------------------------------------------------------------
 */

/* Largest of the combinations, and what is open of it. */
typedef struct most {
    double N[2], M[2], bow[2]; /* N: largest, minus smallest; M and bow: largest size */
    double N_open, M_open, bow_open[2];
} most;

static double bow_open(const sct_verifier *v, const sct_cut_line *line, int c, int plane)
{
    static const double ROUNDING =
        1e-3; /* of what is open of moments, which a weak member among stiff ones magnifies */
    const double L = (double)line->element->L;
    return L * v->open_of[c].turn + ROUNDING * v->open_of[c].end[1] * L * L / (double)line->element->EI[plane];
}

static bool bends(const sct_verifier *v, int e, int plane)
{
    return v->sections[v->m->members[e].group].I[plane] > 0.0;
}

static void add_combination(const sct_verifier *v, int e, int c, const sct_cut_line *line, most *of)
{
    for (int sign = -1; sign <= 1; sign += 2) {
        const int N[3] = {sign, 0, 0};
        double *N_most = &of->N[sign < 0];
        *N_most = fmax(*N_most, (double)sct_cut_largest(line, some_force, N));
        for (int plane = 0; plane < 2; plane++) {
            const int M[3] = {0, plane == 0 ? sign : 0, plane == 1 ? sign : 0};
            const bow b = {.plane = plane, .sign = sign};
            of->M[plane] = fmax(of->M[plane], (double)sct_cut_largest(line, some_force, M));
            if (!bends(v, e, plane)) continue;
            of->bow[plane] = fmax(of->bow[plane], (double)sct_cut_largest(line, bow_at, &b));
            of->bow_open[plane] = fmax(of->bow_open[plane], bow_open(v, line, c, plane));
        }
    }
    of->N_open = fmax(of->N_open, sct_verify_N_open(v, e, c));
    of->M_open = fmax(of->M_open, v->open_of[c].end[1]);
}

static void compare_extremes(sct_verifier *v, int e, const most *of)
{
    static const char *const M[2] = {"largest moment in plane of member", "largest moment out of plane of member"};
    static const char *const BOW[2] = {"bow in plane of member", "bow out of plane of member"};
    const sct_member_result *said = &v->r->members[e];
    sct_compare(v, "largest force of member", said->name, NULL, said->N_max, of->N[0], of->N_open);
    sct_compare(v, "smallest force of member", said->name, NULL, said->N_min, -of->N[1], of->N_open);
    for (int plane = 0; plane < 2; plane++) {
        sct_compare(v, M[plane], said->name, NULL, fabs(said->M_most[plane]), of->M[plane], of->M_open);
        sct_compare(v, BOW[plane], said->name, NULL, fabs(said->bow[plane]), of->bow[plane], of->bow_open[plane]);
    }
}

/* The largest moment is where it is said to be, with that sign. */
static void compare_places(sct_verifier *v, int e)
{
    const sct_member_result *said = &v->r->members[e];
    for (int plane = 0; plane < 2; plane++) {
        const int M[3] = {0, plane == 0, plane == 1}, c = said->M_most_in[plane];
        if (said->M_most[plane] == 0.0) continue;
        if (c < 0 || c >= v->r->n_combinations) {
            sct_differ(v, "combination of the largest moment of member", said->name, NULL, c, NAN);
            continue;
        }
        const sct_cut_line line = line_of(v, e, c);
        if (!is_place(&line, said->M_most_at[plane]))
            sct_differ(v, "place of the largest moment of member", said->name, NULL, said->M_most_at[plane], NAN);
        else
            compare_at(v, "moment at the place of the largest of member", e, c, &line, some_force, M,
                       said->M_most_at[plane], said->M_most[plane], v->open_of[c].end[1]);
    }
}

double sct_verify_bent(sct_verifier *v, int e, double *open)
{
    most of = {.N = {-INFINITY, -INFINITY}};
    double worst = 0.0;
    for (int c = 0; c < v->r->n_combinations; c++) {
        const sct_cut_line line = line_of(v, e, c);
        add_combination(v, e, c, &line, &of);
        for (int kind = 0; kind < SCT_VERIFY_KINDS && is_for_strength(v, c); kind++) {
            check k;
            worst = fmax(worst, worst_of(v, e, c, &line, (sct_verify_kind)kind, &k));
            *open = fmax(*open, isfinite(k.capacity.force) ? open_of(v, e, c, &k) : 0.0);
        }
    }
    compare_axes(v, e);
    compare_extremes(v, e, &of);
    compare_places(v, e);
    compare_governing(v, e);
    return worst;
}

/* ---- limits on bows -----------------------------------------------------------------------------------------------
 */

static double run_length(const sct_verifier *v, const sct_run *run)
{
    double L = 0.0;
    for (int e = run->first; e < run->first + run->n; e++) L += sct_verify_length(v->m, e);
    return L;
}

/* How far a joint is off the chord of a run, at a distance x from its start. */
static double off_chord(const sct_verifier *v, int c, const sct_run *run, int joint, double x,
                        const long double axis[3])
{
    const double *u = v->u + (size_t)c * (size_t)v->m->n_joints * 3, t = x / run_length(v, run);
    const int start = v->m->members[run->first].from, end = v->m->members[run->first + run->n - 1].to;
    double off = 0.0;
    for (int i = 0; i < 3; i++)
        off += (double)axis[i] * (u[3 * joint + i] - (1.0 - t) * u[3 * start + i] - t * u[3 * end + i]);
    return off;
}

static void find_offsets(const sct_verifier *v, int e, int c, const sct_run *run, bow *b)
{
    const long double *axis = v->statics->elements[v->statics->element_of[e]].axes[1 + b->plane];
    double before = 0.0;
    b->offset[0] = b->offset[1] = 0.0;
    if (run == NULL) return;
    for (int k = run->first; k < e; k++) before += sct_verify_length(v->m, k);
    b->offset[0] = off_chord(v, c, run, v->m->members[e].from, before, axis);
    b->offset[1] = off_chord(v, c, run, v->m->members[e].to, before + sct_verify_length(v->m, e), axis);
}

/* One limit on one member, all combinations. Returns its utilisation. */
static double compare_bow(sct_verifier *v, const sct_bow_limit *limit, int e, const sct_run *run,
                          const sct_bow_result *said)
{
    const double L = run != NULL ? run_length(v, run) : sct_verify_length(v->m, e);
    const double at_most = limit->at_most > 0.0 ? limit->at_most : limit->part * L;
    const char *name = v->r->members[e].name;
    double farthest = 0.0, open = 0.0;
    bow b = {.plane = limit->axis};
    for (int c = 0; c < v->r->n_combinations; c++) {
        if (!limit->in[c]) continue;
        const sct_cut_line line = line_of(v, e, c);
        find_offsets(v, e, c, run, &b);
        for (b.sign = -1; b.sign <= 1; b.sign += 2)
            farthest = fmax(farthest, (double)sct_cut_largest(&line, bow_at, &b));
        open = fmax(open, bow_open(v, &line, c, b.plane) + (run != NULL ? v->open_of[c].u : 0.0));
        b.sign = 1;
        if (c == said->combination && is_place(&line, said->x))
            compare_at(v, "bow at the governing place of member", e, c, &line, bow_at, &b, said->x, said->v, open);
        else if (c == said->combination)
            sct_differ(v, "governing place of the bow of member", name, v->r->combinations[c], said->x, NAN);
    }
    v->open = fmax(v->open, open / at_most);
    sct_compare(v, "allowed bow of member", name, NULL, said->at_most, at_most, 0.0);
    sct_compare(v, "bow of limited member", name, NULL, fabs(said->v), farthest, open);
    sct_compare(v, "bow over its limit of member", name, NULL, said->utilisation, farthest / at_most, open / at_most);
    return farthest / at_most;
}

/* What the result tells of a limit on a member; NULL: nothing. */
static const sct_bow_result *told_of(const sct_verifier *v, int limit, int e, const sct_run *run)
{
    for (int k = 0; k < v->r->n_bows; k++) {
        const sct_bow_result *said = &v->r->bows[k];
        const bool is_same = run == NULL ? said->run == NULL : said->run != NULL && strcmp(said->run, run->name) == 0;
        if (said->limit == limit && said->member == e && is_same) return said;
    }
    return NULL;
}

static double one_bow(sct_verifier *v, int limit, int e, const sct_run *run)
{
    const sct_bow_limit *l = &v->m->bows[limit];
    const sct_bow_result *said = told_of(v, limit, e, run);
    bool holds = false;
    for (int c = 0; c < v->m->n_combinations; c++) holds = holds || l->in[c];
    if (!holds || v->statics->element_of[e] < 0) return 0.0; /* a bar without loads stays straight */
    if (said != NULL) return compare_bow(v, l, e, run, said);
    sct_differ(v, "bow limit on member", v->r->members[e].name, NULL, 0, 1);
    return 0.0;
}

double sct_verify_bows(sct_verifier *v)
{
    double worst = 0.0;
    for (int k = 0; k < v->m->n_bows; k++) {
        const sct_bow_limit *limit = &v->m->bows[k];
        for (int i = 0; i < limit->n_members; i++) worst = fmax(worst, one_bow(v, k, limit->members[i], NULL));
        for (int i = 0; i < limit->n_runs; i++) {
            const sct_run *run = &v->m->runs[limit->runs[i]];
            for (int e = run->first; e < run->first + run->n; e++) worst = fmax(worst, one_bow(v, k, e, run));
        }
    }
    return worst;
}

/* A finished result against a second analysis of the written model: every number that a report shows is looked at. */
#include <math.h>
#include <string.h>

#include "base/arena.h"
#include "base/issues.h"
#include "base/text.h"
#include "verify/slack.h"
#include "verify/strength.h"

/* Numbers agree when they differ by at most RELATIVE of themselves and ABSOLUTE of the largest of their kind, and
 * what the accuracy of both analyses leaves open. Rounding alone leaves 1e-13. */
static const double RELATIVE = 1e-7, ABSOLUTE = 1e-11;
static const double NO_FORCE = 1e-9;   /* of the largest force in a combination: below, results give 0 */
static const double SMALL_PART = 1e-3; /* what sct_accuracy is relative to, see scantling.h */
static const double SHAKES = 100.0;    /* one random shake stands for the worst of all */

void sct_differ(sct_verifier *v, const char *what, const char *name, const char *combination, double said, double found)
{
    v->n_wrong++;
    sct_issue_add(
        v->issues, SCT_ERROR, (sct_where){.file = v->m->file},
        "internal check failed: %s%s%s%s%s%s%s: the result says %.17g, a second analysis of the written model %.17g",
        what, name != NULL ? " of \"" : "", name != NULL ? sct_show(name).text : "", name != NULL ? "\"" : "",
        combination != NULL ? " in \"" : "", combination != NULL ? sct_show(combination).text : "",
        combination != NULL ? "\"" : "", said, found);
}

void sct_compare(sct_verifier *v, const char *what, const char *name, const char *combination, double said,
                 double found, double open)
{
    if (fabs(said - found) <= (RELATIVE + v->accuracy) * fabs(found) + open) return; /* false for NAN and infinities */
    sct_differ(v, what, name, combination, said, found);
}

static double largest(size_t n, const double a[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(a[i]));
    return most;
}

double sct_verify_length(const sct_model *m, int member)
{
    const double *a = m->joints[m->members[member].from].at, *b = m->joints[m->members[member].to].at;
    return sqrt((b[0] - a[0]) * (b[0] - a[0]) + (b[1] - a[1]) * (b[1] - a[1]) + (b[2] - a[2]) * (b[2] - a[2]));
}

/* ---- the second numbers -------------------------------------------------------------------------------------------
 */

/* to (size n) = sum of factor * case of one combination; from: n_cases x n. */
static void combine(const sct_verifier *v, int c, size_t n, const double from[], double to[])
{
    memset(to, 0, n * sizeof *to);
    for (int k = 0; k < v->m->n_cases; k++) {
        const double factor = v->m->combinations[c].factor[k];
        for (size_t i = 0; i < n && factor != 0.0; i++) to[i] += factor * from[(size_t)k * n + i];
    }
}

/* Adds what is open of one case. */
static void add_open(const sct_verifier *v, const sct_statics *s, int k, double factor, sct_open *open)
{
    const size_t members = (size_t)v->m->n_members, n3 = 3 * (size_t)v->m->n_joints, n = (size_t)s->n_elements;
    const double part = ABSOLUTE + SMALL_PART * v->accuracy;
    const sct_shaky *shaky = &s->shaky[k];
    const double N = largest(members, s->N + (size_t)k * members);
    double end[2] = {N, 0.0};
    for (size_t b = 0; b < n; b++) {
        const double *all = s->end[(size_t)k * n + b], L = (double)s->elements[b].L;
        for (int at = 0; at < 12; at += 6) {
            end[0] = fmax(end[0], largest(3, all + at));
            end[1] = fmax(end[1], fmax(largest(3, all + at + 3), L * largest(3, all + at)));
        }
    }
    open->N += factor * (part * N + SHAKES * shaky->N);
    open->u += factor * (part * largest(n3, s->u + (size_t)k * n3) + SHAKES * shaky->u);
    if (s->has_turns) open->turn += factor * (part * largest(n3, s->turn + (size_t)k * n3) + SHAKES * shaky->turn);
    for (int i = 0; i < 2; i++) open->end[i] += factor * (part * end[i] + SHAKES * shaky->end[i]);
}

static void combine_all(sct_verifier *v)
{
    const size_t members = (size_t)v->m->n_members, n3 = 3 * (size_t)v->m->n_joints;
    for (int c = 0; c < v->m->n_combinations; c++) {
        const sct_statics *s = sct_statics_of(v, c);
        double *N = v->N + (size_t)c * members;
        combine(v, c, members, s->N, N);
        combine(v, c, n3, s->u, v->u + (size_t)c * n3);
        if (s->has_turns) combine(v, c, n3, s->turn, v->turn + (size_t)c * n3);
        v->open_of[c].N_none = NO_FORCE * largest(members, N);
        for (int k = 0; k < v->m->n_cases; k++) { /* of the cases: what is relative to them stays when they cancel */
            const double factor = fabs(v->m->combinations[c].factor[k]);
            if (factor != 0.0) add_open(v, s, k, factor, &v->open_of[c]);
        }
    }
}

double sct_verify_N_open(const sct_verifier *v, int e, int c)
{
    const double N = v->N[(size_t)c * (size_t)v->m->n_members + (size_t)e], none = 1.5 * v->open_of[c].N_none;
    return v->open_of[c].N + (fabs(N) <= none ? none : 0.0);
}

/* ---- comparing ----------------------------------------------------------------------------------------------------
 */

static void compare_groups(sct_verifier *v)
{
    const sct_result *r = v->r;
    double mass = 0.0;
    for (int e = 0; e < r->n_members; e++) v->L[v->m->members[e].group] += sct_verify_length(v->m, e);
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group_result *group = &r->groups[g];
        const double A = v->sections[g].A, *I = v->sections[g].I, *W = v->sections[g].W;
        const double unit_mass = v->m->materials[v->m->groups[g].material].density * A;
        sct_compare(v, "area", group->name, NULL, group->A, A, 0.0);
        for (int axis = 0; axis < 2; axis++) {
            if (isnan(I[axis]) && isnan(group->I[axis])) continue; /* not stated */
            sct_compare(v, "second moment of area", group->name, NULL, group->I[axis], I[axis], 0.0);
        }
        for (int axis = 0; axis < 2; axis++) {
            if (isnan(W[axis]) && isnan(group->W[axis])) continue;
            sct_compare(v, "section modulus", group->name, NULL, group->W[axis], W[axis], 0.0);
        }
        if (!isnan(v->sections[g].J) || !isnan(group->J))
            sct_compare(v, "torsion constant", group->name, NULL, group->J, v->sections[g].J, 0.0);
        sct_compare(v, "mass", group->name, NULL, group->mass, unit_mass * v->L[g], 0.0);
        mass += unit_mass * v->L[g];
    }
    sct_compare(v, "mass", NULL, NULL, r->mass, mass, 0.0);
}

static void compare_forces(sct_verifier *v, int c)
{
    const sct_result *r = v->r;
    const double *N = v->N + (size_t)c * (size_t)r->n_members, *said = r->N + (size_t)c * (size_t)r->n_members;
    for (int e = 0; e < r->n_members; e++) {
        const double open = v->open_of[c].N + (said[e] == 0.0 ? 1.5 * v->open_of[c].N_none : 0.0);
        sct_compare(v, "force", r->members[e].name, r->combinations[c], said[e], N[e], open);
    }
}

/* What supports must give: minus the loads at joints and what members pull. Of forces along members the result's own
 * are taken, which are compared by themselves: small ones are given as 0. R: n_joints x 3 of forces and of moments. */
static void find_reactions(const sct_verifier *v, int c, double *R[2])
{
    const size_t n3 = 3 * (size_t)v->m->n_joints, members = (size_t)v->m->n_members;
    const sct_statics *s = sct_statics_of(v, c);
    const bool has_elements = s->n_elements > 0;
    combine(v, c, n3, has_elements ? s->given : s->load, R[0]);
    if (s->has_turns) combine(v, c, n3, s->moment_given, R[1]);
    for (size_t i = 0; i < n3; i++) {
        R[0][i] = -R[0][i];
        R[1][i] = -R[1][i];
    }
    for (size_t e = 0; e < members; e++) {
        const sct_member *m = &v->m->members[e];
        const double *a = v->m->joints[m->from].at, *b = v->m->joints[m->to].at, L = sct_verify_length(v->m, (int)e);
        const double own = s->element_of[e] >= 0 ? v->N[(size_t)c * members + e] : 0.0;
        const double N = v->r->N[(size_t)c * members + e] - own;
        for (int i = 0; i < 3; i++) {
            R[0][3 * m->from + i] -= N * (b[i] - a[i]) / L;
            R[0][3 * m->to + i] += N * (b[i] - a[i]) / L;
        }
    }
    for (int b = 0; b < s->n_elements; b++) {
        const sct_element *x = &s->elements[b];
        const int joint[2] = {v->m->members[x->member].from, v->m->members[x->member].to};
        long double local[12] = {0}, end[2][6];
        for (int k = 0; k < v->m->n_cases; k++) {
            const double factor = v->m->combinations[c].factor[k];
            const double *of_case = s->end[(size_t)k * (size_t)s->n_elements + (size_t)b];
            for (int i = 0; i < 12 && factor != 0.0; i++) local[i] += factor * of_case[i];
        }
        sct_element_to_model(x, local, end);
        for (int i = 0; i < 12; i++) R[i % 6 / 3][3 * joint[i / 6] + i % 3] += (double)end[i / 6][i % 6];
    }
}

/* Forces and displacements (kind 0), moments and rotations (kind 1) of joints. */
typedef struct joint_words {
    const char *moved[3], *held[3], *loaded[3];
} joint_words;
static const joint_words WORDS[2] = {
    {{"displacement in x", "displacement in y", "displacement in z"},
     {"reaction in x", "reaction in y", "reaction in z"},
     {"load in x", "load in y", "load in z"}},
    {{"rotation about x", "rotation about y", "rotation about z"},
     {"moment of support about x", "moment of support about y", "moment of support about z"},
     {"moment load about x", "moment load about y", "moment load about z"}},
};

/* Rounding is relative to the largest load, or to `scale` where that is more; returns which. Leaves the loads in
 * `load`.
 */
static double compare_loads(sct_verifier *v, int c, int kind, double load[], double scale)
{
    const size_t n3 = 3 * (size_t)v->r->n_joints;
    const sct_statics *s = sct_statics_of(v, c);
    const double *from = kind == 0 ? s->load : s->moment_load, *said = kind == 0 ? v->r->load : v->r->moment_load;
    memset(load, 0, n3 * sizeof *load);
    if (from != NULL) combine(v, c, n3, from, load);
    scale = fmax(scale, largest(n3, load));
    for (size_t i = 0; i < n3; i++) {
        sct_compare(v, WORDS[kind].loaded[i % 3], v->r->joints[i / 3].name, v->r->combinations[c],
                    said[(size_t)c * n3 + i], load[i], ABSOLUTE * scale);
    }
    return scale;
}

/* Elastic supports give something along free directions, too. */
static double given_by_support(const sct_verifier *v, int kind, int j, int i, const double R[3])
{
    if (v->m->joints[j].n_springs > 0) return R[i];
    if (v->statics->supports.held[kind] == NULL) return 0.0;
    const double *H = v->statics->supports.held[kind][j][i];
    return H[0] * R[0] + H[1] * R[1] + H[2] * R[2];
}

static void compare_joints(sct_verifier *v, int c, int kind, const double R[], double open)
{
    const sct_result *r = v->r;
    const size_t at = (size_t)c * 3 * (size_t)r->n_joints;
    const double *said = (kind == 0 ? r->reaction : r->moment) + at, *moved = (kind == 0 ? r->u : r->turn) + at;
    const double *found = (kind == 0 ? v->u : v->turn) + at;
    for (int j = 0; j < r->n_joints; j++) {
        for (int i = 0; i < 3; i++) {
            const int p = 3 * j + i;
            const double held = given_by_support(v, kind, j, i, R + (size_t)3 * (size_t)j);
            sct_compare(v, WORDS[kind].held[i], r->joints[j].name, r->combinations[c], said[p], held, open);
            sct_compare(v, WORDS[kind].moved[i], r->joints[j].name, r->combinations[c], moved[p], found[p],
                        kind == 0 ? v->open_of[c].u : v->open_of[c].turn);
        }
    }
}

static void compare_combination(sct_verifier *v, int c, double *R[2])
{
    const size_t n3 = 3 * (size_t)v->r->n_joints;
    const sct_open *open = &v->open_of[c];
    compare_forces(v, c);
    const double load_scale = compare_loads(v, c, 0, R[0], 0.0);
    compare_loads(v, c, 1, R[1], load_scale * v->longest);
    memset(R[1], 0, n3 * sizeof *R[1]);
    find_reactions(v, c, R);
    compare_joints(v, c, 0, R[0], (v->statics->n_elements > 0 ? open->end[0] : open->N) + ABSOLUTE * load_scale);
    compare_joints(v, c, 1, R[1], open->end[1]);
    sct_verify_slack(v, c);
    sct_verify_ends(v, c);
}

/* In compression in some strength combination? -1: too near to none to be said. */
static int is_compressed(const sct_verifier *v, int e)
{
    int answer = 0;
    for (int c = 0; c < v->m->n_combinations; c++) {
        const double N = v->N[(size_t)c * (size_t)v->m->n_members + (size_t)e], none = v->open_of[c].N_none;
        if (v->m->combinations[c].basis != SCT_ALLOWABLE) continue;
        if (N < -1.5 * none - v->open_of[c].N) return 1;
        if (N < -0.5 * none + v->open_of[c].N && N != 0.0) answer = -1;
    }
    return answer;
}

/* A member with a force alone. Returns its utilisation in strength and adds to *open. */
static double compare_bar(sct_verifier *v, int e, double L, double *open)
{
    const sct_result *r = v->r;
    const sct_member_result *said = &r->members[e];
    double most = 0.0, N_max = -INFINITY, N_min = INFINITY, N_open = 0.0;
    for (int c = 0; c < r->n_combinations; c++) {
        const double N = v->N[(size_t)c * (size_t)r->n_members + (size_t)e], here = sct_verify_N_open(v, e, c);
        N_max = fmax(N_max, N);
        N_min = fmin(N_min, N);
        N_open = fmax(N_open, here);
        if (v->m->combinations[c].basis != SCT_ALLOWABLE) continue;
        const double capacity = sct_verify_capacity(v->m, e, L, N > 0.0);
        most = fmax(most, fabs(N) / capacity);
        *open = fmax(*open, here / capacity);
    }
    sct_compare(v, "largest force of member", said->name, NULL, said->N_max, N_max, N_open);
    sct_compare(v, "smallest force of member", said->name, NULL, said->N_min, N_min, N_open);
    return most;
}

/* Returns the member's utilisation. */
static double compare_member(sct_verifier *v, int e)
{
    const sct_member_result *said = &v->r->members[e];
    const bool is_bent = v->statics->element_of[e] >= 0;
    const double L = sct_verify_length(v->m, e);
    double open = 0.0, most = is_bent ? sct_verify_bent(v, e, &open) : compare_bar(v, e, L, &open);
    const int compressed = is_compressed(v, e);
    most = fmax(most, sct_verify_slenderness(v->m, e, L, compressed < 0 ? said->compressed : compressed));
    v->open = fmax(v->open, open);
    sct_compare(v, "length of member", said->name, NULL, said->L, L, 0.0);
    sct_compare(v, "utilisation of member", said->name, NULL, said->utilisation, most, open);
    if (said->is_bent != is_bent)
        sct_differ(v, "\"carries moments\" of member", said->name, NULL, said->is_bent, is_bent);
    if (compressed >= 0 && said->compressed != (compressed == 1)) {
        sct_differ(v, "\"in compression\" of member", said->name, NULL, said->compressed, compressed);
    }
    return most;
}

/* Results come by limit, then by its joints. */
static void compare_deflected(sct_verifier *v, int k)
{
    const sct_deflection_result *said = &v->r->deflections[k];
    const sct_deflection_limit *limit = &v->m->deflections[said->limit];
    int i = 0;
    while (k - i > 0 && v->r->deflections[k - i - 1].limit == said->limit) i++;
    const int joint = limit->joints[i], from = limit->from != NULL ? limit->from[i] : -1;
    if (said->joint != joint) sct_differ(v, "joint of a deflection", limit->label, NULL, said->joint, joint);
    if (said->from != from) sct_differ(v, "base of a deflection", limit->label, NULL, said->from, from);
}

/* Deflection k of the result: the worst combination of its limit at its joint. Returns its utilisation. */
static double compare_deflection(sct_verifier *v, int k)
{
    const sct_result *r = v->r;
    const sct_deflection_result *said = &r->deflections[k];
    const sct_deflection_limit *limit = &v->m->deflections[said->limit];
    double most = 0.0, open = 0.0;
    compare_deflected(v, k);
    for (int c = 0; c < r->n_combinations; c++) {
        if (!limit->in[c]) continue;
        const double *u = v->u + (size_t)c * (size_t)r->n_joints * 3;
        double moved = 0.0;
        for (int i = 0; i < 3; i++) {
            const double base = said->from >= 0 ? u[3 * said->from + i] : 0.0;
            moved += (u[3 * said->joint + i] - base) * limit->direction[i];
        }
        most = fmax(most, fabs(moved) / limit->at_most);
        open = fmax(open, v->open_of[c].u);
        if (c == said->combination)
            sct_compare(v, "deflection of joint", r->joints[said->joint].name, r->combinations[c], said->u, moved,
                        v->open_of[c].u);
    }
    v->open = fmax(v->open, open / limit->at_most);
    sct_compare(v, "deflection over its limit at joint", r->joints[said->joint].name, NULL, said->utilisation, most,
                open / limit->at_most);
    return most;
}

static void compare_verdict(sct_verifier *v, double most, bool has_verdict)
{
    const sct_result *r = v->r;
    const double open = v->open + (RELATIVE + v->accuracy) * most;
    sct_compare(v, "largest utilisation", NULL, NULL, r->utilisation, most, v->open);
    if (r->kept ? most > 1.0 + open || !has_verdict : most < 1.0 - open && has_verdict)
        sct_differ(v, "\"every limit is kept\"", NULL, NULL, r->kept, most <= 1.0 && has_verdict);
}

static void compare_all(sct_verifier *v, double *R[2])
{
    double most = 0.0;
    compare_groups(v);
    for (int c = 0; c < v->r->n_combinations; c++) compare_combination(v, c, R);
    for (int e = 0; e < v->r->n_members; e++) most = fmax(most, compare_member(v, e));
    for (int k = 0; k < v->r->n_deflections; k++) most = fmax(most, compare_deflection(v, k));
    most = fmax(most, sct_verify_bows(v));
    bool has_verdict;
    most = fmax(most, sct_verify_whole(v, &has_verdict));
    compare_verdict(v, most, has_verdict);
}

/* ---- the call -----------------------------------------------------------------------------------------------------
 */

/* Is the written model the result's own, with every size held? */
static bool matches(const sct_model *m, const sct_result *r)
{
    if (m->n_joints != r->n_joints || m->n_members != r->n_members || m->n_groups != r->n_groups ||
        m->n_cases != r->n_cases || m->n_combinations != r->n_combinations || m->dimensions != r->dimensions)
        return false;
    int n_deflections = 0;
    for (int k = 0; k < m->n_deflections; k++) n_deflections += m->deflections[k].n_joints;
    if (n_deflections != r->n_deflections) return false;
    for (int g = 0; g < m->n_groups; g++) {
        const sct_group *group = &m->groups[g];
        const bool held = group->kind == SCT_HELD_AREA || group->kind == SCT_HELD_SECTION;
        if (!held || strcmp(group->name, r->groups[g].name) != 0) return false;
        const char *section =
            group->kind == SCT_HELD_SECTION ? m->families[group->family].sections[group->held].name : "";
        if (strcmp(section, r->groups[g].section != NULL ? r->groups[g].section : "") != 0) return false;
    }
    for (int e = 0; e < m->n_members; e++) {
        const sct_member *a = &m->members[e];
        const sct_member_result *b = &r->members[e];
        if (a->group != b->group || a->from != b->from || a->to != b->to || strcmp(a->name, b->name) != 0) return false;
    }
    return true;
}

static bool allocate(sct_verifier *v, sct_arena *arena)
{
    const size_t members = (size_t)v->m->n_members, n3 = 3 * (size_t)v->m->n_joints, n = (size_t)v->m->n_combinations;
    const size_t groups = (size_t)v->m->n_groups;
    v->sections = sct_arena_array(arena, groups, sizeof *v->sections);
    v->L = sct_arena_array(arena, groups, sizeof *v->L);
    v->N = sct_arena_array(arena, n * members, sizeof *v->N);
    v->u = sct_arena_array(arena, n * n3, sizeof *v->u);
    v->turn = sct_arena_array(arena, n * n3, sizeof *v->turn);
    v->open_of = sct_arena_array(arena, n, sizeof *v->open_of);
    v->n_statics = sct_verify_analyses(v->m);
    v->statics = sct_arena_array(arena, (size_t)v->n_statics, sizeof *v->statics);
    return v->statics && v->sections && v->L && v->N && v->u && v->turn && v->open_of;
}

/* Room for the line of any element. */
static bool allocate_line(sct_verifier *v, sct_arena *arena)
{
    int loads = 1, breaks = 1;
    for (int b = 0; b < v->statics->n_elements; b++) {
        const sct_element *x = &v->statics->elements[b];
        v->longest = fmax(v->longest, (double)x->L);
        if (sct_cut_loads_at_most(x) > loads) loads = sct_cut_loads_at_most(x);
        if (sct_cut_breaks_at_most(x) > breaks) breaks = sct_cut_breaks_at_most(x);
    }
    v->loads = sct_arena_array(arena, (size_t)loads, sizeof *v->loads);
    v->breaks = sct_arena_array(arena, (size_t)breaks, sizeof *v->breaks);
    return v->loads != NULL && v->breaks != NULL;
}

static double largest_error(const sct_verifier *v)
{
    double most = 0.0;
    for (int i = 0; i < v->n_statics; i++)
        most = v->statics[i].error <= most ? most : v->statics[i].error; /* keeps a NAN */
    return most;
}

static sct_status run(sct_verifier *v, sct_arena *arena)
{
    const size_t n3 = 3 * (size_t)v->m->n_joints;
    double *R[2] = {sct_arena_array(arena, n3, sizeof **R), sct_arena_array(arena, n3, sizeof **R)};
    if (R[0] == NULL || R[1] == NULL || !allocate(v, arena)) return SCT_NO_MEMORY;
    for (int g = 0; g < v->m->n_groups; g++) v->sections[g] = sct_verify_section_of(v->m, g);
    sct_status status = SCT_OK;
    for (int i = 0; i < v->n_statics && status == SCT_OK; i++)
        status = sct_statics_solve(v->m, v->sections, sct_verify_left_out(v, i), &v->statics[i]);
    if (status != SCT_OK) {
        if (status == SCT_SELF_CHECK)
            sct_issue_add(
                v->issues, SCT_ERROR, (sct_where){.file = v->m->file},
                "internal check failed: a second analysis of the written model finds no factor of its stiffness");
        return status;
    }
    if (!allocate_line(v, arena)) return SCT_NO_MEMORY;
    v->accuracy = 10.0 * v->r->accuracy.bound + 10.0 * largest_error(v);
    combine_all(v);
    compare_all(v, R);
    return v->n_wrong > 0 ? SCT_SELF_CHECK : SCT_OK;
}

sct_status sct_verify(const sct_model *sized, const sct_result *result, sct_issues *issues)
{
    sct_verifier v = {.m = sized, .r = result, .issues = issues};
    if (!matches(sized, result)) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = sized->file},
                      "internal check failed: the written model is not the one of the result, or leaves a size open");
        return SCT_SELF_CHECK;
    }
    sct_arena *arena = sct_arena_new();
    const sct_status status = arena != NULL ? run(&v, arena) : SCT_NO_MEMORY;
    for (int i = 0; v.statics != NULL && i < v.n_statics; i++) sct_statics_free(&v.statics[i]);
    sct_arena_free(arena);
    return status;
}

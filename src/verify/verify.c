/* A finished result against a second analysis of the written model: every number that a report shows is looked at. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/arena.h"
#include "base/issues.h"
#include "base/text.h"
#include "verify/statics.h"
#include "verify/strength.h"

/* Numbers agree when they differ by at most RELATIVE of themselves and ABSOLUTE of the largest of their kind, and
 * what the accuracy of both analyses leaves open. Rounding alone leaves 1e-13. */
static const double RELATIVE = 1e-7, ABSOLUTE = 1e-11;
static const double NO_FORCE = 1e-9;   /* of the largest force in a combination: below, results give 0 */
static const double SMALL_PART = 1e-3; /* what sct_accuracy is relative to, see scantling.h */
static const double SHAKES = 100.0;    /* one random shake stands for the worst of all */

typedef struct verifier {
    const sct_model *m;
    const sct_result *r;
    sct_issues *issues;
    sct_statics s;
    sct_verify_section *sections; /* n_groups */
    double *L;                    /* n_groups: of all its members, [m] */
    double *N;                    /* n_combinations x n_members */
    double *N_open;               /* n_combinations: what is left open of any force, [N] */
    double *N_none;               /* n_combinations: forces below about this are given as 0, [N] */
    double *u;                    /* n_combinations x n_joints x 3 */
    double *u_open;               /* n_combinations [m] */
    double accuracy;              /* relative, of the first analysis and of this one */
    double open;                  /* of any utilisation */
    int n_wrong;
} verifier;

static void differ(verifier *v, const char *what, const char *name, const char *combination, double said, double found)
{
    v->n_wrong++;
    sct_issue_add(
        v->issues, SCT_ERROR, (sct_where){.file = v->m->file},
        "internal check failed: %s%s%s%s%s%s%s: the result says %.17g, a second analysis of the written model %.17g",
        what, name != NULL ? " of \"" : "", name != NULL ? sct_show(name).text : "", name != NULL ? "\"" : "",
        combination != NULL ? " in \"" : "", combination != NULL ? sct_show(combination).text : "",
        combination != NULL ? "\"" : "", said, found);
}

/* open: absolute difference that is allowed beside RELATIVE. */
static void compare(verifier *v, const char *what, const char *name, const char *combination, double said, double found,
                    double open)
{
    if (fabs(said - found) <= (RELATIVE + v->accuracy) * fabs(found) + open) return; /* false for NAN and infinities */
    differ(v, what, name, combination, said, found);
}

static double largest(size_t n, const double a[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(a[i]));
    return most;
}

static double length(const sct_model *m, int member)
{
    const double *a = m->joints[m->members[member].from].at, *b = m->joints[m->members[member].to].at;
    return sqrt((b[0] - a[0]) * (b[0] - a[0]) + (b[1] - a[1]) * (b[1] - a[1]) + (b[2] - a[2]) * (b[2] - a[2]));
}

/* ---- the second numbers -------------------------------------------------------------------------------------------
 */

/* to (size n) = sum of factor * case of one combination; from: n_cases x n. */
static void combine(const verifier *v, int c, size_t n, const double from[], double to[])
{
    memset(to, 0, n * sizeof *to);
    for (int k = 0; k < v->m->n_cases; k++) {
        const double factor = v->m->combinations[c].factor[k];
        for (size_t i = 0; i < n && factor != 0.0; i++) to[i] += factor * from[(size_t)k * n + i];
    }
}

static void combine_all(verifier *v)
{
    const size_t members = (size_t)v->m->n_members, n3 = 3 * (size_t)v->m->n_joints;
    for (int c = 0; c < v->m->n_combinations; c++) {
        double *N = v->N + (size_t)c * members, *u = v->u + (size_t)c * n3, shaky_N = 0.0, shaky_u = 0.0;
        double N_scale = 0.0, u_scale = 0.0; /* of the cases: what is relative to them stays when they cancel */
        combine(v, c, members, v->s.N, N);
        v->N_none[c] = NO_FORCE * largest(members, N);
        combine(v, c, n3, v->s.u, u);
        for (int k = 0; k < v->m->n_cases; k++) {
            const double factor = fabs(v->m->combinations[c].factor[k]);
            if (factor == 0.0) continue;
            N_scale += factor * largest(members, v->s.N + (size_t)k * members);
            u_scale += factor * largest(n3, v->s.u + (size_t)k * n3);
            shaky_N += factor * v->s.shaky[k].N;
            shaky_u += factor * v->s.shaky[k].u;
        }
        v->N_open[c] = (ABSOLUTE + SMALL_PART * v->accuracy) * N_scale + SHAKES * shaky_N;
        v->u_open[c] = (ABSOLUTE + SMALL_PART * v->accuracy) * u_scale + SHAKES * shaky_u;
    }
}

/* ---- comparing ----------------------------------------------------------------------------------------------------
 */

static void compare_groups(verifier *v)
{
    const sct_result *r = v->r;
    double mass = 0.0;
    for (int e = 0; e < r->n_members; e++) v->L[v->m->members[e].group] += length(v->m, e);
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group_result *group = &r->groups[g];
        const double A = v->sections[g].A, *I = v->sections[g].I;
        const double unit_mass = v->m->materials[v->m->groups[g].material].density * A;
        compare(v, "area", group->name, NULL, group->A, A, 0.0);
        for (int axis = 0; axis < 2; axis++) {
            if (isnan(I[axis]) && isnan(group->I[axis])) continue; /* not stated */
            compare(v, "second moment of area", group->name, NULL, group->I[axis], I[axis], 0.0);
        }
        compare(v, "mass", group->name, NULL, group->mass, unit_mass * v->L[g], 0.0);
        mass += unit_mass * v->L[g];
    }
    compare(v, "mass", NULL, NULL, r->mass, mass, 0.0);
}

static void compare_forces(verifier *v, int c)
{
    const sct_result *r = v->r;
    const double *N = v->N + (size_t)c * (size_t)r->n_members, *said = r->N + (size_t)c * (size_t)r->n_members;
    for (int e = 0; e < r->n_members; e++) {
        const double open = v->N_open[c] + (said[e] == 0.0 ? 1.5 * v->N_none[c] : 0.0);
        compare(v, "force", r->members[e].name, r->combinations[c], said[e], N[e], open);
    }
}

static void compare_joints(verifier *v, int c, double R[])
{
    static const char *const MOVED[] = {"displacement in x", "displacement in y", "displacement in z"};
    static const char *const HELD[] = {"reaction in x", "reaction in y", "reaction in z"};
    static const char *const LOADED[] = {"load in x", "load in y", "load in z"};
    const sct_result *r = v->r;
    const size_t n3 = 3 * (size_t)r->n_joints, at = (size_t)c * n3;
    /* the result's own forces, which are compared by themselves: small ones are given as 0 */
    const double *N = r->N + (size_t)c * (size_t)r->n_members;
    combine(v, c, n3, v->s.load, R);
    const double load_scale = largest(n3, R);
    for (size_t i = 0; i < n3; i++) {
        compare(v, LOADED[i % 3], r->joints[i / 3].name, r->combinations[c], r->load[at + i], R[i],
                ABSOLUTE * load_scale);
        R[i] = -R[i];
    }
    for (int e = 0; e < r->n_members; e++) {
        const sct_member *m = &v->m->members[e];
        const double *a = v->m->joints[m->from].at, *b = v->m->joints[m->to].at, L = length(v->m, e);
        for (int i = 0; i < 3; i++) {
            R[3 * m->from + i] -= N[e] * (b[i] - a[i]) / L;
            R[3 * m->to + i] += N[e] * (b[i] - a[i]) / L;
        }
    }
    const double open = v->N_open[c] + ABSOLUTE * load_scale;
    for (int j = 0; j < r->n_joints; j++) {
        for (int i = 0; i < 3; i++) {
            double held = 0.0;
            for (int k = 0; k < 3; k++) held += v->s.supports.held[0][j][i][k] * R[3 * j + k];
            const size_t p = at + 3 * (size_t)j + (size_t)i;
            compare(v, HELD[i], r->joints[j].name, r->combinations[c], r->reaction[p], held, open);
            compare(v, MOVED[i], r->joints[j].name, r->combinations[c], r->u[p], v->u[p], v->u_open[c]);
        }
    }
}

/* In compression in some strength combination? -1: too near to none to be said. */
static int is_compressed(const verifier *v, int e)
{
    int answer = 0;
    for (int c = 0; c < v->m->n_combinations; c++) {
        const double N = v->N[(size_t)c * (size_t)v->m->n_members + (size_t)e], none = v->N_none[c];
        if (v->m->combinations[c].basis != SCT_ALLOWABLE) continue;
        if (N < -1.5 * none - v->N_open[c]) return 1;
        if (N < -0.5 * none + v->N_open[c] && N != 0.0) answer = -1;
    }
    return answer;
}

/* Returns the member's utilisation. */
static double compare_member(verifier *v, int e)
{
    const sct_result *r = v->r;
    const sct_member_result *said = &r->members[e];
    const double L = length(v->m, e);
    double most = 0.0, open = 0.0, N_max = -INFINITY, N_min = INFINITY, N_open = 0.0;
    for (int c = 0; c < r->n_combinations; c++) {
        const double N = v->N[(size_t)c * (size_t)r->n_members + (size_t)e], none = 1.5 * v->N_none[c];
        N_max = fmax(N_max, N);
        N_min = fmin(N_min, N);
        N_open = fmax(N_open, v->N_open[c] + none);
        if (v->m->combinations[c].basis != SCT_ALLOWABLE) continue;
        const double capacity = sct_verify_capacity(v->m, e, L, N > 0.0);
        most = fmax(most, fabs(N) / capacity);
        open = fmax(open, (v->N_open[c] + (fabs(N) <= none ? none : 0.0)) / capacity);
    }
    const int compressed = is_compressed(v, e);
    most = fmax(most, sct_verify_slenderness(v->m, e, L, compressed < 0 ? said->compressed : compressed));
    v->open = fmax(v->open, open);
    compare(v, "length of member", said->name, NULL, said->L, L, 0.0);
    compare(v, "utilisation of member", said->name, NULL, said->utilisation, most, open);
    compare(v, "largest force of member", said->name, NULL, said->N_max, N_max, N_open);
    compare(v, "smallest force of member", said->name, NULL, said->N_min, N_min, N_open);
    if (compressed >= 0 && said->compressed != (compressed == 1)) {
        differ(v, "\"in compression\" of member", said->name, NULL, said->compressed, compressed);
    }
    return most;
}

/* Deflection k of the result: the worst combination of its limit at its joint. Returns its utilisation. */
static double compare_deflection(verifier *v, int k)
{
    const sct_result *r = v->r;
    const sct_deflection_result *said = &r->deflections[k];
    const sct_deflection_limit *limit = &v->m->deflections[said->limit];
    double most = 0.0, open = 0.0;
    for (int c = 0; c < r->n_combinations; c++) {
        if (!limit->in[c]) continue;
        const double *u = v->u + ((size_t)c * (size_t)r->n_joints + (size_t)said->joint) * 3;
        const double moved = u[0] * limit->direction[0] + u[1] * limit->direction[1] + u[2] * limit->direction[2];
        most = fmax(most, fabs(moved) / limit->at_most);
        open = fmax(open, v->u_open[c]);
        if (c == said->combination)
            compare(v, "deflection of joint", r->joints[said->joint].name, r->combinations[c], said->u, moved,
                    v->u_open[c]);
    }
    v->open = fmax(v->open, open / limit->at_most);
    compare(v, "deflection over its limit at joint", r->joints[said->joint].name, NULL, said->utilisation, most,
            open / limit->at_most);
    return most;
}

static void compare_verdict(verifier *v, double most)
{
    const sct_result *r = v->r;
    const double open = v->open + (RELATIVE + v->accuracy) * most;
    compare(v, "largest utilisation", NULL, NULL, r->utilisation, most, v->open);
    if (r->kept ? most > 1.0 + open : most < 1.0 - open)
        differ(v, "\"every limit is kept\"", NULL, NULL, r->kept, most <= 1.0);
}

static void compare_all(verifier *v, double R[])
{
    double most = 0.0;
    compare_groups(v);
    for (int c = 0; c < v->r->n_combinations; c++) {
        compare_forces(v, c);
        compare_joints(v, c, R);
    }
    for (int e = 0; e < v->r->n_members; e++) most = fmax(most, compare_member(v, e));
    for (int k = 0; k < v->r->n_deflections; k++) most = fmax(most, compare_deflection(v, k));
    compare_verdict(v, most);
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

static sct_status run(verifier *v, sct_arena *arena)
{
    const size_t members = (size_t)v->m->n_members, n3 = 3 * (size_t)v->m->n_joints, n = (size_t)v->m->n_combinations;
    double *R = sct_arena_array(arena, n3, sizeof *R);
    v->sections = sct_arena_array(arena, (size_t)v->m->n_groups, sizeof *v->sections);
    v->L = sct_arena_array(arena, (size_t)v->m->n_groups, sizeof *v->L);
    v->N = sct_arena_array(arena, n * members, sizeof *v->N);
    v->N_open = sct_arena_array(arena, n, sizeof *v->N_open);
    v->N_none = sct_arena_array(arena, n, sizeof *v->N_none);
    v->u = sct_arena_array(arena, n * n3, sizeof *v->u);
    v->u_open = sct_arena_array(arena, n, sizeof *v->u_open);
    if (!R || !v->sections || !v->L || !v->N || !v->N_open || !v->N_none || !v->u || !v->u_open) return SCT_NO_MEMORY;
    for (int g = 0; g < v->m->n_groups; g++) v->sections[g] = sct_verify_section_of(v->m, g);
    const sct_status status = sct_statics_solve(v->m, v->sections, &v->s);
    if (status != SCT_OK) {
        if (status == SCT_SELF_CHECK)
            sct_issue_add(
                v->issues, SCT_ERROR, (sct_where){.file = v->m->file},
                "internal check failed: a second analysis of the written model finds no factor of its stiffness");
        return status;
    }
    v->accuracy = 10.0 * v->r->accuracy.bound + 10.0 * v->s.error;
    combine_all(v);
    compare_all(v, R);
    return v->n_wrong > 0 ? SCT_SELF_CHECK : SCT_OK;
}

sct_status sct_verify(const sct_model *sized, const sct_result *result, sct_issues *issues)
{
    verifier v = {.m = sized, .r = result, .issues = issues};
    if (!matches(sized, result)) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = sized->file},
                      "internal check failed: the written model is not the one of the result, or leaves a size open");
        return SCT_SELF_CHECK;
    }
    sct_arena *arena = sct_arena_new();
    const sct_status status = arena != NULL ? run(&v, arena) : SCT_NO_MEMORY;
    sct_statics_free(&v.s);
    sct_arena_free(arena);
    return status;
}

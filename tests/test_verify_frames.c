/* The second analysis of frames against the first: other elements, another matrix, loads worked out another way. */
#include "support.h"

#include "analysis/accuracy.h"
#include "analysis/member_line.h"
#include "random_frames.h"
#include "truss_shapes.h"
#include "verify/cut.h"

/* ---- frames -------------------------------------------------------------------------------------------------------
 */

/* A joint that only bars hold: its rotations concern nobody. */
static void hang_by_bars(sct_random *r, sct_model *m)
{
    const int n = m->n_joints, j = rf_joint(r, m), dim = m->dimensions;
    double dir[3][3] = {{0}};
    int other[3];
    for (int tries = 0; tries < 100; tries++) {
        for (int i = 0; i < dim; i++) {
            other[i] = below(r, n);
            for (int k = 0; k < 3; k++)
                dir[i][k] = (m->joints[j].at[k] - m->joints[other[i]].at[k]) / rf_distance(m, j, other[i]);
        }
        if (ts_spread(dim, (const double(*)[3])dir) < 0.2) continue;
        for (int i = 0; i < dim; i++) mb_bar(m, other[i], j, below(r, m->n_groups));
        return;
    }
    m->n_joints--;
}

/* Frame number `seed` with every size held. */
static sct_model *frame(uint64_t seed)
{
    sct_random r = {seed};
    sct_model *m = rf_any(seed, 0);
    for (int g = 0; g < m->n_groups; g++) m->groups[g].kind = SCT_HELD_AREA;
    for (int i = 0; i < 2; i++) hang_by_bars(&r, m);
    return m;
}

/* ---- both paths ---------------------------------------------------------------------------------------------------
 */

typedef struct both {
    solved first;
    sct_statics second;
} both;

static both analyse(sct_model *m)
{
    both b;
    sct_verify_section sections[16];
    sct_accuracy accuracy;
    b.first = solve(m);
    ck_assert_int_eq(sct_accuracy_refine(b.first.solver, &b.first.r, &accuracy, b.first.issues), SCT_OK);
    for (int g = 0; g < m->n_groups; g++) sections[g] = sct_verify_section_of(m, g);
    ck_assert_int_eq(sct_statics_solve(m, sections, NULL, &b.second), SCT_OK);
    return b;
}

static void both_free(both *b)
{
    sct_statics_free(&b->second);
    solved_free(&b->first);
}

/* Largest difference of n numbers over the largest of the first. */
static double apart(int n, const double a[], const double b[])
{
    double largest = 0.0, most = 0.0;
    for (int i = 0; i < n; i++) {
        largest = fmax(largest, fabs(a[i]));
        most = fmax(most, fabs(a[i] - b[i]));
        if (isnan(a[i]) || isnan(b[i])) return INFINITY;
    }
    return most > 0.0 ? most / largest : 0.0;
}

/* ---- joints -------------------------------------------------------------------------------------------------------
 */

/* The first path's numbers of all cases, as sct_statics has them. */
typedef struct told {
    double *u, *turn, *load, *moment_load, *N;
} told;

static void split(int n_joints, const double six[], double first[], double second[])
{
    for (int i = 0; i < 6 * n_joints; i++) (i % 6 < 3 ? first : second)[3 * (i / 6) + i % 3] = six[i];
}

static told first_joints(const both *b, sct_arena *arena)
{
    const sct_structure *st = b->first.st;
    const size_t n3 = 3 * (size_t)st->n_joints, n = (size_t)st->n_cases, bars = (size_t)st->n_bars;
    double *six = sct_arena_array(arena, 2 * n3, sizeof *six);
    told t;
    double **const list[] = {&t.u, &t.turn, &t.load, &t.moment_load};
    for (int i = 0; i < 4; i++) *list[i] = sct_arena_array(arena, n * n3, sizeof *six);
    t.N = sct_arena_array(arena, n * bars, sizeof *t.N);
    for (int k = 0; k < st->n_cases; k++) {
        const size_t at = (size_t)k * n3;
        sct_combine_displacements(st, &b->first.r, k, t.u + at);
        sct_combine_rotations(st, &b->first.r, k, t.turn + at);
        sct_combine_loads(st, b->first.A, k, six);
        split(st->n_joints, six, t.load + at, t.moment_load + at);
        memcpy(t.N + (size_t)k * bars, b->first.r.N + k * st->n_springs, bars * sizeof *t.N);
    }
    return t;
}

static double joints_apart(const both *b, sct_arena *arena)
{
    const sct_structure *st = b->first.st;
    const int n = 3 * st->n_joints * st->n_cases;
    const sct_statics *s = &b->second;
    const told t = first_joints(b, arena);
    const double each[] = {apart(n, t.u, s->u), apart(n, t.turn, s->turn), apart(n, t.load, s->load),
                           apart(n, t.moment_load, s->moment_load), apart(st->n_bars * st->n_cases, t.N, s->N)};
    double most = 0.0;
    for (int i = 0; i < 5; i++) most = fmax(most, each[i]);
    return most;
}

/* ---- members between their joints ---------------------------------------------------------------------------------
 */

enum { PLACES = 7, QUANTITIES = 8 };

/* Quantity q at place i of all n, place n of a case after the other. */
static double *value_at(const both *b, double *value, int q, int k, int i)
{
    const int n = b->second.n_elements * PLACES;
    return value + ((size_t)q * (size_t)b->first.st->n_cases + (size_t)k) * (size_t)n + i;
}

/* N, V, M, T and the bows at PLACES places of every element. */
static void first_places(const both *b, int k, double *value)
{
    const sct_structure *st = b->first.st;
    sct_member_lines *lines = sct_member_lines_new(st);
    double *S = calloc((size_t)st->n_springs, sizeof *S);
    sct_combine_springs(st, &b->first.r, k, S);
    for (int i = 0; i < b->second.n_elements * PLACES; i++) {
        const int e = b->second.elements[i / PLACES].member;
        const sct_bar *bar = &st->bars[e];
        const sct_properties size = sct_properties_at_area(st->model, bar->group, b->first.A[bar->group]);
        const sct_beam_line line = sct_member_line(lines, e, k, b->first.A[bar->group]);
        const sct_beam_state state = sct_member_state(st, S, e);
        const double x = bar->L * (i % PLACES) / (PLACES - 1);
        double all[SCT_BEAM_QUANTITIES];
        sct_beam_values(&line, &state, sct_beam_piece_at(&line, x, i % PLACES == 0 ? 1 : -1), x, all);
        for (int q = 0; q < 6; q++) *value_at(b, value, q, k, i) = all[q];
        for (int plane = 0; plane < 2; plane++) {
            const sct_beam_bending bending = {.plane = plane,
                                              .EI =
                                                  bar->E * size.P[plane == 0 ? SCT_OF_INERTIA_IN : SCT_OF_INERTIA_OUT],
                                              .kappa = sct_free_curvature(st, k, e, plane)};
            *value_at(b, value, 6 + plane, k, i) = sct_beam_deflection(&line, &state, &bending, x);
        }
    }
    free(S);
    sct_member_lines_free(lines);
}

static void second_places(const both *b, int k, double *value, sct_arena *arena)
{
    const sct_statics *s = &b->second;
    for (int i = 0; i < s->n_elements * PLACES; i++) {
        const sct_element *x = &s->elements[i / PLACES];
        sct_element_load *loads = sct_arena_array(arena, (size_t)sct_cut_loads_at_most(x), sizeof *loads);
        long double *breaks = sct_arena_array(arena, (size_t)sct_cut_breaks_at_most(x), sizeof *breaks);
        const sct_cut_line line = sct_cut_line_make(b->first.model, s, i / PLACES, k, loads, breaks);
        const long double at = x->L * (i % PLACES) / (PLACES - 1);
        const sct_cut cut = sct_cut_at(&line, at, i % PLACES == 0);
        const long double all[QUANTITIES] = {
            cut.N, cut.V[0], cut.V[1], cut.M[0], cut.M[1], cut.T, sct_cut_bow(&line, 0, at), sct_cut_bow(&line, 1, at)};
        for (int q = 0; q < QUANTITIES; q++) *value_at(b, value, q, k, i) = (double)all[q];
    }
}

static double members_apart(const both *b, sct_arena *arena)
{
    static const int KIND[] = {0, 3, 6, QUANTITIES}; /* forces, moments, bows */
    const int n_cases = b->first.st->n_cases, n = b->second.n_elements * PLACES * n_cases;
    double *first = sct_arena_array(arena, (size_t)(QUANTITIES * n), sizeof *first), most = 0.0;
    double *second = sct_arena_array(arena, (size_t)(QUANTITIES * n), sizeof *second);
    for (int k = 0; k < n_cases; k++) {
        first_places(b, k, first);
        second_places(b, k, second, arena);
    }
    for (int q = 0; q < 3; q++)
        most = fmax(most, apart((KIND[q + 1] - KIND[q]) * n, first + KIND[q] * n, second + KIND[q] * n));
    return most;
}

START_TEST(both_analyses_agree_on_random_frames)
{
    const int n = getenv("SCT_TEST_FULL") != NULL ? 5000 : 50;
    double at_joints = 0.0, along = 0.0;
    for (int i = 1; i <= n; i++) {
        sct_arena *arena = sct_arena_new();
        both b = analyse(frame((uint64_t)i));
        const double joints = joints_apart(&b, arena), members = members_apart(&b, arena);
        at_joints = fmax(at_joints, joints);
        along = fmax(along, members);
        ck_assert_msg(joints < 1e-9 && members < 1e-9, "seed %d: %g at joints, %g along members", i, joints, members);
        both_free(&b);
        sct_arena_free(arena);
    }
    printf("measured: second path: %d random frames agree to %.1e at joints, %.1e along members\n", n, at_joints,
           along);
}
END_TEST

/* ---- whole results ------------------------------------------------------------------------------------------------
 */

static sct_status verify(const sct_model *m, const sct_result *result, bool print)
{
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_verify(m, result, issues);
    for (int i = 0; print && i < sct_issues_count(issues); i++) printf("%s\n", sct_issues_get(issues, i)->message);
    sct_issues_free(issues);
    return status;
}

static void set_rules(sct_random *r, sct_model *m)
{
    for (int k = 0; k < m->n_materials; k++) m->materials[k].yield = 355e6;
    for (int g = 0; g < m->n_groups; g++) {
        sct_group *group = &m->groups[g];
        group->allowable[0] = 200e6;
        group->allowable[1] = 160e6;
        group->buckling = g % 3 == 0 ? SCT_BUCKLING_EULER : g % 3 == 1 ? SCT_BUCKLING_EULER_JOHNSON : SCT_BUCKLING_NONE;
        group->safety = 1.67;
        group->slenderness_any = 400.0;
        group->slenderness_compression = g % 2 == 0 ? 250.0 : INFINITY;
        for (int axis = 0; axis < 2; axis++) group->W[axis] = (sct_power){between(r, 0.5, 2.0), 1.5};
    }
    mb_combination(m, 3, (double[]){1.0, 0.0, 0.0});
    mb_combination(m, 3, (double[]){1.35, -0.7, 0.4});
    const int service = mb_combination(m, 3, (double[]){0.9, 1.0, 1.0});
    m->combinations[service].basis = SCT_SERVICE;
}

/* A displacement relative to another joint, and the bow of two members in the service combination. */
static void set_limits(sct_random *r, sct_model *m)
{
    sct_deflection_limit *d = sct_arena_array(m->arena, 1, sizeof *d);
    *d = (sct_deflection_limit){.n_joints = 2, .direction = {0.6, 0.8, 0.0}, .at_most = 0.02, .label = "20 mm"};
    d->joints = sct_arena_array(m->arena, 2, sizeof(int));
    d->from = sct_arena_array(m->arena, 2, sizeof(int));
    d->in = sct_arena_array(m->arena, 3, sizeof(bool));
    for (int i = 0; i < 2; i++) d->joints[i] = 1 + below(r, m->n_joints - 1);
    d->from[0] = -1;
    d->in[1] = d->in[2] = true;
    sct_bow_limit *b = sct_arena_array(m->arena, 2, sizeof *b);
    for (int i = 0; i < 2; i++) {
        b[i] = (sct_bow_limit){.n_members = 1, .axis = m->dimensions == 3 ? i : 0, .at_most = NAN, .part = 1.0 / 300.0};
        b[i].label = "L/300";
        b[i].members = sct_arena_array(m->arena, 1, sizeof(int));
        b[i].members[0] = below(r, m->n_members);
        b[i].in = sct_arena_array(m->arena, 3, sizeof(bool));
        b[i].in[1] = b[i].in[2] = true;
    }
    m->deflections = d;
    m->n_deflections = 1;
    m->bows = b;
    m->n_bows = 2;
}

static sct_model *limited_frame(uint64_t seed)
{
    sct_random r = {seed};
    sct_model *m = frame(seed);
    set_rules(&r, m);
    set_limits(&r, m);
    return m;
}

static sct_result *check(const sct_model *m)
{
    sct_result *result = NULL;
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_check(m, NULL, &result, issues);
    for (int i = 0; status != SCT_OK && i < sct_issues_count(issues); i++)
        printf("%s\n", sct_issues_get(issues, i)->message);
    ck_assert_int_eq(status, SCT_OK);
    sct_issues_free(issues);
    return result;
}

START_TEST(both_paths_agree_on_results_of_random_frames)
{
    const int n = getenv("SCT_TEST_FULL") != NULL ? 5000 : 50;
    for (int i = 1; i <= n; i++) {
        sct_model *m = limited_frame((uint64_t)i);
        sct_result *result = check(m);
        ck_assert_msg(verify(m, result, true) == SCT_OK, "seed %d", i);
        sct_result_free(result);
        mb_free(m);
    }
    printf("measured: second path: both agree on the results of %d random frames\n", n);
}
END_TEST

/* ---- wrong numbers ------------------------------------------------------------------------------------------------
 */

static const double SMALL = 100.0; /* [N], [N m], beside 1e5 and more */

/* Changes every number of n that is at least `least` by a millionth, one after the other. */
static void change_from(const char *what, const sct_model *m, const sct_result *result, size_t n, double x[],
                        double least, int *tried)
{
    for (size_t i = 0; i < n; i++) {
        const double right = x[i];
        if (!(fabs(right) > least)) continue;
        x[i] = right * (1.0 + 1e-6);
        ck_assert_msg(verify(m, result, false) == SCT_SELF_CHECK, "%s, number %zu: %g", what, i, right);
        x[i] = right;
        (*tried)++;
    }
}

/* Those that are at least 1e-4 of the largest. */
static void change_each(const char *what, const sct_model *m, const sct_result *result, size_t n, double x[],
                        int *tried)
{
    double largest = 0.0;
    for (size_t i = 0; i < n; i++) largest = fmax(largest, fabs(x[i]));
    change_from(what, m, result, n, x, 1e-4 * largest, tried);
}

static void change_joints(const sct_model *m, sct_result *r, int *tried)
{
    const size_t n3 = 3 * (size_t)r->n_joints, members = (size_t)r->n_members;
    for (size_t c = 0; c < (size_t)r->n_combinations; c++) {
        change_each("displacement", m, r, n3, r->u + c * n3, tried);
        change_each("rotation", m, r, n3, r->turn + c * n3, tried);
        change_each("load", m, r, n3, r->load + c * n3, tried);
        change_each("moment load", m, r, n3, r->moment_load + c * n3, tried);
        change_each("reaction", m, r, n3, r->reaction + c * n3, tried);
        change_each("moment of support", m, r, n3, r->moment + c * n3, tried);
        change_each("force", m, r, members, r->N + c * members, tried);
        change_from("force or moment at an end", m, r, 12 * members, r->ends + c * 12 * members, SMALL, tried);
    }
}

static double most_moved(const sct_result *r)
{
    double most = 0.0;
    for (int i = 0; i < 3 * r->n_joints * r->n_combinations; i++) most = fmax(most, fabs(r->u[i]));
    return most;
}

static void change_members(const sct_model *m, sct_result *r, int *tried)
{
    for (int e = 0; e < r->n_members; e++) {
        sct_member_result *member = &r->members[e];
        change_each("utilisation", m, r, 1, &member->utilisation, tried);
        change_from("largest force", m, r, 1, &member->N_max, SMALL, tried);
        change_from("smallest force", m, r, 1, &member->N_min, SMALL, tried);
        if (!member->is_bent) continue;
        change_from("largest moments", m, r, 2, member->M_most, SMALL, tried);
        change_from("bows", m, r, 2, member->bow, 1e-4 * most_moved(r), tried);
        if (member->check != SCT_CHECK_SLENDERNESS) change_from("moments", m, r, 2, member->M, SMALL, tried);
        member->is_bent = false;
        ck_assert_int_eq(verify(m, r, false), SCT_SELF_CHECK);
        member->is_bent = true;
    }
}

static void change_limits(const sct_model *m, sct_result *r, int *tried)
{
    for (int g = 0; g < r->n_groups; g++) {
        change_each("section modulus", m, r, 2, r->groups[g].W, tried);
        change_each("torsion constant", m, r, 1, &r->groups[g].J, tried);
    }
    for (int k = 0; k < r->n_deflections; k++) {
        change_each("deflection", m, r, 1, &r->deflections[k].u, tried);
        change_each("deflection over its limit", m, r, 1, &r->deflections[k].utilisation, tried);
    }
    for (int k = 0; k < r->n_bows; k++) {
        if (!r->members[r->bows[k].member].is_bent) continue;
        change_from("bow", m, r, 1, &r->bows[k].v, 1e-4 * most_moved(r), tried);
        change_each("allowed bow", m, r, 1, &r->bows[k].at_most, tried);
        change_each("bow over its limit", m, r, 1, &r->bows[k].utilisation, tried);
    }
    change_each("utilisation", m, r, 1, &r->utilisation, tried);
}

START_TEST(every_number_of_a_frame_changed_by_a_millionth_is_caught)
{
    const bool is_full = getenv("SCT_TEST_FULL") != NULL;
    int tried = 0;
    for (uint64_t seed = 1; seed <= (is_full ? 8 : 1); seed++) {
        sct_model *m = limited_frame(seed);
        sct_result *r = check(m);
        ck_assert_int_eq(verify(m, r, true), SCT_OK);
        change_joints(m, r, &tried);
        change_members(m, r, &tried);
        change_limits(m, r, &tried);
        sct_result_free(r);
        mb_free(m);
    }
    printf("measured: second path: all %d numbers of frames changed by a millionth are caught\n", tried);
    ck_assert_int_ge(tried, is_full ? 2000 : 200);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("verify frames");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, both_analyses_agree_on_random_frames);
    tcase_add_test(tests, both_paths_agree_on_results_of_random_frames);
    tcase_add_test(tests, every_number_of_a_frame_changed_by_a_millionth_is_caught);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

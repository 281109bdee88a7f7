/* The second analysis of frames against the first: other elements, another matrix, loads worked out another way. */
#include "support.h"

#include "analysis/member_line.h"
#include "frame_shapes.h"
#include "solved.h"
#include "verify/cut.h"

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
    b.first = solve(m);
    for (int g = 0; g < m->n_groups; g++) sections[g] = sct_verify_section_of(m, g);
    ck_assert_int_eq(sct_statics_solve(m, sections, &b.second), SCT_OK);
    return b;
}

static void both_free(both *b)
{
    sct_statics_free(&b->second);
    solved_free(&b->first);
}

/* Largest difference of n numbers over the largest of the first, `stride` apart. */
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

static double joints_apart(const both *b, int k)
{
    const sct_structure *st = b->first.st;
    const int n3 = 3 * st->n_joints;
    double *u = calloc(4 * (size_t)n3, sizeof *u), *load = u + n3, most = 0.0;
    sct_combine_displacements(st, &b->first.r, k, u);
    most = fmax(most, apart(n3, u, b->second.u + k * n3));
    sct_combine_rotations(st, &b->first.r, k, u);
    if (b->second.has_turns) most = fmax(most, apart(n3, u, b->second.turn + k * n3));
    double *six = calloc(2 * (size_t)n3, sizeof *six);
    sct_combine_loads(st, b->first.A, k, six);
    for (int kind = 0; kind < 2; kind++) {
        for (int i = 0; i < n3; i++) load[i] = six[6 * (i / 3) + 3 * kind + i % 3];
        const double *second = kind == 0 ? b->second.load : b->second.moment_load;
        if (second != NULL) most = fmax(most, apart(n3, load, second + k * n3));
    }
    most = fmax(most, apart(st->n_bars, b->first.r.N + k * st->n_springs, b->second.N + k * st->n_bars));
    free(six);
    free(u);
    return most;
}

/* ---- members between their joints ---------------------------------------------------------------------------------
 */

enum { PLACES = 7, QUANTITIES = 8 };

/* N, V, M, T and the bows at PLACES places of every element, by quantity. */
static void first_places(const both *b, int k, double *value)
{
    const sct_structure *st = b->first.st;
    const int n = b->second.n_elements * PLACES;
    sct_member_lines *lines = sct_member_lines_new(st);
    double *S = calloc((size_t)st->n_springs, sizeof *S);
    sct_combine_springs(st, &b->first.r, k, S);
    for (int i = 0; i < n; i++) {
        const int e = b->second.elements[i / PLACES].member;
        const sct_bar *bar = &st->bars[e];
        const sct_beam_line line = sct_member_line(lines, e, k, b->first.A[bar->group]);
        const sct_beam_state state = sct_member_state(st, S, e);
        const double x = bar->L * (i % PLACES) / (PLACES - 1);
        double all[SCT_BEAM_QUANTITIES];
        sct_beam_values(&line, &state, sct_beam_piece_at(&line, x, i % PLACES == 0 ? 1 : -1), x, all);
        for (int q = 0; q < 6; q++) value[q * n + i] = all[q];
        for (int plane = 0; plane < 2; plane++) {
            const sct_properties size = sct_properties_at_area(st->model, bar->group, b->first.A[bar->group]);
            const sct_beam_bending bending = {.plane = plane,
                                              .EI = bar->E * size.P[plane == 0 ? SCT_INERTIA_IN : SCT_INERTIA_OUT],
                                              .kappa = sct_free_curvature(st, k, e, plane)};
            value[(6 + plane) * n + i] = sct_beam_deflection(&line, &state, &bending, x);
        }
    }
    free(S);
    sct_member_lines_free(lines);
}

static void second_places(const both *b, int k, double *value)
{
    const sct_statics *s = &b->second;
    const int n = s->n_elements * PLACES;
    for (int i = 0; i < n; i++) {
        const sct_element *x = &s->elements[i / PLACES];
        sct_element_load *loads = calloc((size_t)sct_cut_loads_at_most(x), sizeof *loads);
        long double *breaks = calloc((size_t)sct_cut_breaks_at_most(x), sizeof *breaks);
        const sct_cut_line line = sct_cut_line_make(b->first.model, s, i / PLACES, k, loads, breaks);
        const long double at = x->L * (i % PLACES) / (PLACES - 1);
        const sct_cut cut = sct_cut_at(&line, at, i % PLACES == 0);
        const long double all[QUANTITIES] = {
            cut.N, cut.V[0], cut.V[1], cut.M[0], cut.M[1], cut.T, sct_cut_bow(&line, 0, at), sct_cut_bow(&line, 1, at)};
        for (int q = 0; q < QUANTITIES; q++) value[q * n + i] = (double)all[q];
        free(loads);
        free(breaks);
    }
}

static double members_apart(const both *b, int k)
{
    static const int KIND[] = {0, 1, 3, 5, 6, QUANTITIES}; /* both planes of V, M and bow together */
    const int n = b->second.n_elements * PLACES;
    double *first = calloc((size_t)(QUANTITIES * n), sizeof *first), most = 0.0;
    double *second = calloc((size_t)(QUANTITIES * n), sizeof *second);
    first_places(b, k, first);
    second_places(b, k, second);
    for (int q = 0; q < 5; q++)
        most = fmax(most, apart((KIND[q + 1] - KIND[q]) * n, first + KIND[q] * n, second + KIND[q] * n));
    free(first);
    free(second);
    return most;
}

START_TEST(both_analyses_agree_on_random_frames)
{
    const int n = getenv("SCT_TEST_FULL") != NULL ? 5000 : 300;
    double at_joints = 0.0, along = 0.0;
    for (int i = 1; i <= n; i++) {
        both b = analyse(fs_random(2 + i % 2, 3 + i % 8, i % 7, (uint64_t)i));
        for (int k = 0; k < 3; k++) {
            const double joints = joints_apart(&b, k), members = members_apart(&b, k);
            at_joints = fmax(at_joints, joints);
            along = fmax(along, members);
            ck_assert_msg(joints < 1e-9 && members < 1e-9, "seed %d, case %d: %g at joints, %g along members", i, k,
                          joints, members);
        }
        both_free(&b);
    }
    printf("measured: second path: %d random frames agree to %.1e at joints, %.1e along members\n", n, at_joints,
           along);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("verify frames");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, both_analyses_agree_on_random_frames);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

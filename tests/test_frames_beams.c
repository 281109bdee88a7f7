/* Continuous beams of equal spans against tables of coefficients (steel-design handbooks, from memory; recalculated to
 * the digits shown by a separate stiffness calculation), against fractions, and with settlement. L 6, w 10, P 20, E I
 * 21000 (kN, m). */
#include "frame_tables.h"

enum { MOST_SPANS = 5 };
static const double L = 6, w = 10, P = 20, EI = 21000;

/* Joints 0 .. n, spans 0 .. n-1; case 0: w on all spans, case 1: P in the middle of each. */
static sct_model *continuous(int n)
{
    sct_model *m = ft_plane();
    mb_frame_group(m, 1e-2, 1e-4, 1e-4);
    mb_case(m, 0.0);
    for (int j = 0; j <= n; j++) {
        mb_joint(m, L * j, 0, 0);
        if (j == 0) mb_hold(m, 0, 1, 0, 0);
        mb_hold(m, j, 0, 1, 0);
    }
    for (int i = 0; i < n; i++) {
        mb_beam(m, i, i + 1, 0);
        mb_uniform(m, 0, i, -w, L);
        mb_point(m, 1, i, L / 2, 0, -P, 0);
    }
    return m;
}

/* Coefficients up to the middle of the beam. */
typedef struct table {
    int n;
    double support[2]; /* moments over inner supports, - */
    double span[3];    /* largest moments within spans (P: at midspan) */
    double reaction[3];
    double midspan[3]; /* deflections */
} table;

/* Of w L^2, w L^2, w L, w L^4/EI. */
static const table UNIFORM[] = {
    {2, {0.125}, {0.07031}, {0.375, 1.25}, {0.005208}},
    {3, {0.100}, {0.080, 0.025}, {0.4, 1.1}, {0.006771, 0.000521}},
    {4, {0.10714, 0.07143}, {0.07717, 0.03635}, {0.39286, 1.14286, 0.92857}, {0.006324, 0.001860}},
    {5, {0.10526, 0.07895}, {0.07791, 0.03324, 0.04605}, {0.39474, 1.13158, 0.97368}, {0.006442, 0.001508, 0.003152}}};
/* Of P L, P L, P, P L^3/EI. */
static const table POINT[] = {
    {2, {0.1875}, {0.15625}, {0.3125, 1.375}, {0.009115}},
    {3, {0.150}, {0.175, 0.100}, {0.35, 1.15}, {0.011458, 0.002083}},
    {4, {0.16071, 0.10714}, {0.16964, 0.11607}, {0.33929, 1.21429, 0.89286}, {0.010789, 0.004092}},
    {5, {0.15789, 0.11842}, {0.17105, 0.11184, 0.13158}, {0.34211, 1.19737, 0.96053}, {0.010965, 0.003564, 0.006031}}};

/* Equal to the printed digits: half of the last one. */
static void check_printed(double value, double printed, double digit)
{
    ck_assert_double_eq_tol(value, printed, 0.501 * digit);
}

static double largest_in_span(const frame *f, int k, int span)
{
    const sct_beam_line line = frame_line(f, k, span);
    const sct_beam_state state = frame_state(f, k, span);
    return sct_beam_largest(&line, &state, (double[SCT_BEAM_QUANTITIES]){[SCT_BEAM_M] = 1.0}).value;
}

static void check_table(const frame *f, int k, const table *t, double unit_M, double unit_R, double unit_v)
{
    for (int i = 0; i < t->n; i++) {
        const int mirrored = i < t->n - 1 - i ? i : t->n - 1 - i;
        check_printed(largest_in_span(f, k, i) / unit_M, t->span[mirrored], 1e-5);
        check_printed(-frame_bow(f, k, i, 0, L / 2) / unit_v, t->midspan[mirrored], 1e-6);
    }
    for (int j = 0; j <= t->n; j++) {
        const int mirrored = j < t->n - j ? j : t->n - j;
        check_printed(frame_reaction(f, k, j, 1) / unit_R, t->reaction[mirrored], 1e-5);
        if (j == 0 || j == t->n) continue;
        check_printed(-frame_M(f, k, j - 1, L) / unit_M, t->support[mirrored - 1], 1e-5);
        ck_close(frame_M(f, k, j, 0), frame_M(f, k, j - 1, L), 1e-12);
    }
}

START_TEST(continuous_beams_have_the_moments_reactions_and_deflections_of_tables)
{
    for (int i = 0; i < MOST_SPANS - 1; i++) {
        frame f = frame_solve(continuous(i + 2));
        check_table(&f, 0, &UNIFORM[i], w * L * L, w * L, w * L * L * L * L / EI);
        check_table(&f, 1, &POINT[i], P * L, P, P * L * L * L / EI);
        frame_free(&f);
    }
}
END_TEST

/* Largest deflections, in the end span. Printed ones (0.0054, 0.0069, 0.0065 in tables; recalculated 0.005416,
 * 0.006884, 0.006456, 0.006569, for P 0.009316, 0.011561, 0.010919) are the largest of some places: just below the true
 * ones. */
START_TEST(the_largest_deflection_lies_in_the_end_span)
{
    static const double OF_W[] = {0.005416, 0.006884, 0.006456, 0.006569}, OF_P[] = {0.009316, 0.011561, 0.010919};
    for (int i = 0; i < MOST_SPANS - 1; i++) {
        frame f = frame_solve(continuous(i + 2));
        for (int k = 0; k < (i < 3 ? 2 : 1); k++) {
            const sct_beam_line line = frame_line(&f, k, 0);
            const sct_beam_state state = frame_state(&f, k, 0);
            const sct_beam_bending bending = frame_bending(&f, k, 0, SCT_IN_PLANE);
            const double v = -sct_beam_largest_bow(&line, &state, &bending).value;
            const double c = k == 0 ? v * EI / (w * pow(L, 4)) : v * EI / (P * pow(L, 3));
            const double printed = k == 0 ? OF_W[i] : OF_P[i];
            ck_assert_double_ge(c, printed - 0.5e-6);
            ck_assert_double_le(c, printed * 1.002);
        }
        frame_free(&f);
    }
}
END_TEST

/* Three spans, P in the middle of each, reaction 0.35 P: E I v = P (0.35 x^3/6 - 0.0375 L^2 x), v' = 0 at x^2 = 0.0375
 * L^2 / 0.175. */
START_TEST(the_largest_deflection_is_the_true_one)
{
    frame f = frame_solve(continuous(3));
    const sct_beam_line line = frame_line(&f, 1, 0);
    const sct_beam_state state = frame_state(&f, 1, 0);
    const sct_beam_bending bending = frame_bending(&f, 1, 0, SCT_IN_PLANE);
    const sct_beam_extreme most = sct_beam_largest_bow(&line, &state, &bending);
    const double x = sqrt(0.0375 / 0.175) * L;
    ck_close(most.x, x, 1e-9);
    ck_close(most.value, P * (0.35 * x * x * x / 6 - 0.0375 * L * L * x) / EI, 1e-12);
    frame_free(&f);
}
END_TEST

/* The three-moment equation (Clapeyron) for spans of L and w: M0 + 4 M1 + M2 = -w L^2/2; for P: -3 P L/4. */
START_TEST(inner_supports_obey_the_three_moment_equation)
{
    for (int n = 2; n <= MOST_SPANS; n++) {
        frame f = frame_solve(continuous(n));
        for (int k = 0; k < 2; k++)
            for (int j = 1; j < n; j++) {
                const double sum = frame_M(&f, k, j - 1, 0) + 4 * frame_M(&f, k, j, 0) + frame_M(&f, k, j, L);
                ck_close(sum, k == 0 ? -w * L * L / 2 : -3 * P * L / 4, 1e-12);
            }
        frame_free(&f);
    }
}
END_TEST

/* Two spans, w on the left one: 7/16, 10/16, -1/16 w L; M = w L^2/16. */
START_TEST(one_loaded_span_of_two)
{
    sct_model *m = continuous(2);
    m->cases[0].n_member_loads = 1;
    frame f = frame_solve(m);
    static const double REACTION[] = {7.0 / 16, 10.0 / 16, -1.0 / 16};
    for (int j = 0; j < 3; j++) ck_close(frame_reaction(&f, 0, j, 1), REACTION[j] * w * L, 1e-12);
    ck_close(frame_M(&f, 0, 1, 0), -w * L * L / 16, 1e-12);
    frame_free(&f);
}
END_TEST

/* Middle support 0.010 down: M = 3 E I d/L^2 = 17.5, reactions 2.916667, -5.833333, 2.916667. */
START_TEST(a_middle_support_that_settles)
{
    sct_model *m = continuous(2);
    m->cases[0].n_member_loads = 0;
    mb_settle(m, 0, 1, 0, -0.010, 0);
    frame f = frame_solve(m);
    ck_close(frame_M(&f, 0, 1, 0), 17.5, 1e-12);
    ck_close(frame_reaction(&f, 0, 0, 1), 17.5 / 6, 1e-12);
    ck_close(frame_reaction(&f, 0, 1, 1), -35 / 6.0, 1e-12);
    ck_close(frame_moved(&f, 0, 1, 1), -0.010, 1e-15);
    frame_free(&f);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("continuous beams");
    TCase *c = tcase_create("beams");
    tcase_add_test(c, continuous_beams_have_the_moments_reactions_and_deflections_of_tables);
    tcase_add_test(c, the_largest_deflection_lies_in_the_end_span);
    tcase_add_test(c, the_largest_deflection_is_the_true_one);
    tcase_add_test(c, inner_supports_obey_the_three_moment_equation);
    tcase_add_test(c, one_loaded_span_of_two);
    tcase_add_test(c, a_middle_support_that_settles);
    suite_add_tcase(s, c);
    return run_suite(s);
}

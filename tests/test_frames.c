#define _DEFAULT_SOURCE /* M_PI */
/* Frames and beams by hand: space, temperature, inclined members, ends and supports that are easily told wrongly. kN, m
 * unless said otherwise: E = 210e6 kN/m2. Portals: test_frames_portals.c; continuous beams: test_frames_beams.c. */
#include "frame_tables.h"

/* ---- one beam ---------------------------------------------------------------------------------------------------- */

/* L 6, E I 21000 (beam tables, from memory). */
static sct_model *beam(bool is_fixed, bool is_fixed_at_end)
{
    sct_model *m = ft_plane();
    mb_frame_group(m, 1e-2, 1e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 6, 0, 0);
    ft_foot(m, 0, is_fixed);
    ft_foot(m, 1, is_fixed_at_end);
    mb_beam(m, 0, 1, 0);
    return m;
}

/* Cantilever, tip load 20: M = P L = 120, tip P L^3/3EI = 6.857143e-2; w = 10: w L^2/2 = 180, w L^4/8EI. */
START_TEST(a_cantilever)
{
    sct_model *m = beam(true, false);
    m->joints[1].n_held = 0;
    mb_case(m, 0.0);
    mb_load(m, 0, 1, 0, -20, 0);
    mb_uniform(m, 1, 0, -10, 6);
    frame f = frame_solve(m);
    ck_assert_int_eq(f.s.st->n_dof, 3);
    ck_close(frame_moved(&f, 0, 1, 1), -6.857142857142857e-2, 1e-12);
    ck_close(frame_M(&f, 0, 0, 0.0), -120.0, 1e-12);
    ck_close(frame_moved(&f, 1, 1, 1), -7.714285714285714e-2, 1e-12);
    ck_close(frame_M(&f, 1, 0, 0.0), -180.0, 1e-12);
    frame_free(&f);
}
END_TEST

/* Simple beam: w L^2/8 = 45, 5 w L^4/384EI; P in the middle: P L/4 = 30, P L^3/48EI; P at a: P a b/L, P a^2 b^2/3EIL.
 */
START_TEST(a_simple_beam)
{
    sct_model *m = beam(false, false);
    for (int k = 1; k < 3; k++) mb_case(m, 0.0);
    mb_uniform(m, 0, 0, -10, 6);
    mb_point(m, 1, 0, 3, 0, -20, 0);
    mb_point(m, 2, 0, 2, 0, -20, 0);
    frame f = frame_solve(m);
    ck_close(frame_M(&f, 0, 0, 3), 45.0, 1e-12);
    ck_close(frame_bow(&f, 0, 0, 0, 3), -8.035714285714286e-3, 1e-12);
    ck_close(frame_M(&f, 1, 0, 3), 30.0, 1e-12);
    ck_close(frame_bow(&f, 1, 0, 0, 3), -4.285714285714286e-3, 1e-12);
    ck_close(frame_M(&f, 2, 0, 2), 20.0 * 2 * 4 / 6, 1e-12);
    ck_close(frame_bow(&f, 2, 0, 0, 2), -20.0 * 4 * 16 / (3 * 21000.0 * 6), 1e-12);
    frame_free(&f);
}
END_TEST

/* Fixed-fixed: w L^2/12 = 30, w L^2/24 = 15, w L^4/384EI; P L/8 = 15, P L^3/192EI. */
START_TEST(a_beam_fixed_at_both_ends)
{
    sct_model *m = beam(true, true);
    mb_case(m, 0.0);
    mb_uniform(m, 0, 0, -10, 6);
    mb_point(m, 1, 0, 3, 0, -20, 0);
    frame f = frame_solve(m);
    ck_assert_int_eq(f.s.st->n_dof, 0);
    ck_close(frame_M(&f, 0, 0, 0), -30.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 6), -30.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 3), 15.0, 1e-12);
    ck_close(frame_bow(&f, 0, 0, 0, 3), -1.607142857142857e-3, 1e-12);
    ck_close(frame_M(&f, 1, 0, 0), -15.0, 1e-12);
    ck_close(frame_M(&f, 1, 0, 3), 15.0, 1e-12);
    ck_close(frame_bow(&f, 1, 0, 0, 3), -1.071428571428571e-3, 1e-12);
    frame_free(&f);
}
END_TEST

/* Propped cantilever: -w L^2/8, largest 9 w L^2/128, reactions 5 w L/8, 3 w L/8; largest deflection (39 + 55 sqrt 33)
 * /65536 w L^4/EI at L (1 + sqrt 33)/16 from the prop; P in the middle: -3PL/16, 5PL/32, 5P/16, 7PL^3/768EI there. */
START_TEST(a_propped_cantilever)
{
    sct_model *m = beam(true, false);
    mb_case(m, 0.0);
    mb_uniform(m, 0, 0, -10, 6);
    mb_point(m, 1, 0, 3, 0, -20, 0);
    frame f = frame_solve(m);
    const sct_beam_line line = frame_line(&f, 0, 0);
    const sct_beam_state state = frame_state(&f, 0, 0);
    const sct_beam_bending bending = frame_bending(&f, 0, 0, SCT_IN_PLANE);
    const sct_beam_extreme most = sct_beam_largest_bow(&line, &state, &bending);
    ck_close(most.value, -(39 + 55 * sqrt(33.0)) / 65536 * 10 * 1296 / 21000, 1e-12);
    ck_close(most.x, 6 - 6 * (1 + sqrt(33.0)) / 16, 1e-9);
    ck_close(frame_M(&f, 0, 0, 0), -45.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 6 * 5 / 8.0), 25.3125, 1e-12);
    ck_close(frame_reaction(&f, 0, 0, 1), 37.5, 1e-12);
    ck_close(frame_reaction(&f, 0, 0, 5), 45.0, 1e-12);
    ck_close(frame_reaction(&f, 0, 1, 1), 22.5, 1e-12);
    ck_close(frame_M(&f, 1, 0, 0), -22.5, 1e-12);
    ck_close(frame_M(&f, 1, 0, 3), 18.75, 1e-12);
    ck_close(frame_reaction(&f, 1, 1, 1), 6.25, 1e-12);
    ck_close(frame_bow(&f, 1, 0, 0, 3), -1.875e-3, 1e-12);
    frame_free(&f);
}
END_TEST

/* Fixed-fixed, one end 0.010 down: M = 6EI d/L^2 = 35, V = 12EI d/L^3 = 11.66667. */
START_TEST(a_fixed_end_that_settles)
{
    sct_model *m = beam(true, true);
    mb_settle(m, 0, 1, 0, -0.010, 0);
    frame f = frame_solve(m);
    ck_close(frame_M(&f, 0, 0, 0), -35.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 6), 35.0, 1e-12);
    ck_close(frame_reaction(&f, 0, 0, 1), 35.0 / 3, 1e-12);
    ck_close(frame_moved(&f, 0, 1, 1), -0.010, 1e-15);
    frame_free(&f);
}
END_TEST

/* One end turned by theta: 4EI theta/L there, half of it at the other (slope deflection, from memory). */
START_TEST(a_fixed_end_that_turns)
{
    sct_model *m = beam(true, true);
    mb_settle(m, 0, 1, 0, 0, 0);
    m->cases[0].settlements[0].turn[2] = 1e-3;
    frame f = frame_solve(m);
    ck_close(frame_M(&f, 0, 0, 6), 14.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 0), -7.0, 1e-12);
    ck_close(frame_moved(&f, 0, 1, 5), 1e-3, 1e-15);
    frame_free(&f);
}
END_TEST

/* ---- temperature ------------------------------------------------------------------------------------------------- */

/* Fixed at both ends, E A = 210e3, +30 K: N = -E A alpha dT = -75.6; a gradient g bends nothing: M = E I alpha g
 * throughout, tension on the colder side, no deflection. */
START_TEST(a_fixed_beam_that_is_warmed)
{
    sct_model *m = beam(true, true);
    m->groups[0].A_held = 1e-3;
    mb_stiffen(m, 0, 1e-4, 1e-4, 1e-4);
    mb_case(m, 0.0);
    mb_act(m, 0, 0, 30, 0);
    mb_act(m, 1, 0, 0, 0);
    m->cases[1].bar_actions[0].gradient[0] = 100;
    frame f = frame_solve(m);
    ck_close(force(&f.s, 0, 0), -75.6, 1e-12);
    for (double x = 0; x <= 6; x += 1.5) {
        ck_close(frame_M(&f, 1, 0, x), 21000 * 12e-6 * 100, 1e-12); /* the side of +axis 1 is warm: compressed */
        ck_assert_double_eq_tol(frame_bow(&f, 1, 0, 0, x), 0.0, 1e-15);
    }
    frame_free(&f);
}
END_TEST

/* A cantilever is free to bend: v = -alpha g x^2/2 (away from the warm side), no moment; a simple beam alpha g L^2/8.
 */
START_TEST(a_gradient_bends_what_is_free_to)
{
    const double kappa = 12e-6 * 100;
    for (int is_simple = 0; is_simple < 2; is_simple++) {
        sct_model *m = beam(!is_simple, false);
        if (!is_simple) m->joints[1].n_held = 0;
        mb_act(m, 0, 0, 0, 0);
        m->cases[0].bar_actions[0].gradient[0] = 100;
        frame f = frame_solve(m);
        ck_assert_double_eq_tol(frame_M(&f, 0, 0, 2), 0.0, 1e-12);
        ck_close(frame_bow(&f, 0, 0, 0, 3), kappa * 36 / 8, 1e-12);
        if (!is_simple) ck_close(frame_moved(&f, 0, 1, 1), -kappa * 36 / 2, 1e-12);
        if (!is_simple) ck_close(frame_moved(&f, 0, 1, 5), -kappa * 6, 1e-12);
        frame_free(&f);
    }
}
END_TEST

/* ---- inclined ---------------------------------------------------------------------------------------------------- */

/* L 4 at 30 degrees, A 3e-3, I 1e-4, 10 down at the tip (by statics and P L^3/3EI; printed digits calculated). */
START_TEST(an_inclined_cantilever)
{
    sct_model *m = ft_plane();
    mb_frame_group(m, 3e-3, 1e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 4 * cos(M_PI / 6), 2, 0);
    mb_fix(m, 0);
    mb_beam(m, 0, 1, 0);
    mb_load(m, 0, 1, 0, -10, 0);
    frame f = frame_solve(m);
    const double c = cos(M_PI / 6), shortening = 5 * 4 / (ft_E * 3e-3), v = 10 * c * 64 / (3 * 21000);
    ck_close(force(&f.s, 0, 0), -5.0, 1e-12);
    ck_close(frame_M(&f, 0, 0, 0), -10 * 4 * c, 1e-12);
    ck_close(frame_moved(&f, 0, 1, 0), v / 2 - shortening * c, 1e-10);
    ck_close(frame_moved(&f, 0, 1, 1), -v * c - shortening / 2, 1e-10);
    ck_close(frame_moved(&f, 0, 1, 0), 4.371366e-3, 1e-6);
    ck_close(frame_moved(&f, 0, 1, 1), -7.634921e-3, 1e-6);
    ck_close(frame_moved(&f, 0, 1, 5), -3.299144e-3, 1e-6);
    frame_free(&f);
}
END_TEST

/* ---- space ------------------------------------------------------------------------------------------------------- */

static sct_model *space(double E, double G)
{
    sct_model *m = mb_new(3);
    mb_material(m, E, 1e-9, NAN);
    m->materials[0].G = G;
    mb_case(m, 0.0);
    return m;
}

/* An L-shaped cantilever with torsion (N, mm), tube 114.3 x 5: drop at the tip P L1^3/3EI + P L2^3/3EI + P L2^2 L1/GJ =
 * 252.27605, drop at the corner 83.40555 (beam formulas; tube from its dimensions). */
START_TEST(a_cantilever_round_a_corner_twists)
{
    const double I = 2.569202e6, EI = 210000 * I, GJ = 81000 * 2 * I, P = 5000, L1 = 3000, L2 = 2000;
    sct_model *m = space(210000, 81000);
    mb_frame_group(m, 1e4, I, 2 * I);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, L1, 0, 0);
    mb_joint(m, L1, L2, 0);
    mb_fix(m, 0);
    mb_beam(m, 0, 1, 0);
    mb_beam(m, 1, 2, 0);
    mb_load(m, 0, 2, 0, 0, -P);
    frame f = frame_solve(m);
    double value[SCT_BEAM_QUANTITIES];
    ck_assert_int_eq(f.s.st->n_dof, 12);
    ck_close(frame_moved(&f, 0, 2, 2), -(L1 * L1 * L1 + L2 * L2 * L2) * P / (3 * EI) - P * L2 * L2 * L1 / GJ, 1e-12);
    ck_close(frame_moved(&f, 0, 2, 2), -252.27605, 1e-7);
    ck_close(frame_moved(&f, 0, 1, 2), -83.40555, 1e-7);
    ck_close(frame_moved(&f, 0, 1, 3), -P * L2 * L1 / GJ, 1e-12);      /* twist 0.07207887 */
    ck_close(frame_moved(&f, 0, 1, 4), P * L1 * L1 / (2 * EI), 1e-12); /* slope 0.04170278 */
    ck_close(frame_moved(&f, 0, 2, 3), -0.09061344, 1e-6);
    ck_close(frame_reaction(&f, 0, 0, 3), 10.0e6, 1e-12); /* torque */
    ck_close(frame_reaction(&f, 0, 0, 4), -15.0e6, 1e-12);
    frame_forces(&f, 0, 0, 0.0, 1, value);
    ck_close(value[SCT_BEAM_M], -15.0e6, 1e-12); /* axis 1 is z: bends down */
    ck_close(value[SCT_BEAM_T], -10.0e6, 1e-12);
    frame_free(&f);
}
END_TEST

/* ---- ends and supports ------------------------------------------------------------------------------------------- */

/* A beam of which one end hangs on a spring k, the other is fixed: M_sprung = (w L^2/12) / (1 + 4EI/(k L)) (slope
 * deflection, from memory). Nothing but that end turns; a free joint elsewhere stays where it is, and all is proven. */
START_TEST(a_sprung_end_may_be_all_that_moves)
{
    const double k = 7000;
    sct_model *m = beam(true, true);
    m->members[0].end[1].fixity[SCT_IN_PLANE] = SCT_SPRUNG;
    m->members[0].end[1].stiffness[SCT_IN_PLANE] = k;
    mb_joint(m, 3, 3, 0);
    mb_beam(m, 0, 2, 0);
    mb_uniform(m, 0, 0, -10, 6);
    frame f = frame_solve(m);
    ck_assert_int_eq(f.s.st->n_dof, 4);
    ck_close(frame_M(&f, 0, 0, 6), -30 / (1 + 4 * 21000 / (k * 6)), 1e-12);
    ck_assert_double_eq(frame_moved(&f, 0, 2, 1), 0.0);
    frame_free(&f);
}
END_TEST

/* A cantilever on a spring at its tip: the force w L^4/8EI / (L^3/3EI + 1/k) (superposition). */
START_TEST(an_elastic_support_takes_its_part)
{
    const double k = 500, y[3] = {0, 1, 0};
    sct_model *m = beam(true, false);
    m->joints[1].n_held = 0;
    mb_spring(m, 1, false, y, k);
    mb_uniform(m, 0, 0, -10, 6);
    frame f = frame_solve(m);
    const double R = 10 * 1296 / (8 * 21000.0) / (216 / (3 * 21000.0) + 1 / k);
    ck_close(frame_reaction(&f, 0, 1, 1), R, 1e-12);
    ck_close(frame_reaction(&f, 0, 0, 1), 60 - R, 1e-12);
    ck_close(frame_moved(&f, 0, 1, 1), -R / k, 1e-12);
    frame_free(&f);
}
END_TEST

static const char *refusal(const sct_model *m, sct_issues *issues)
{
    sct_structure *st = NULL;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_errors(issues), 1);
    ck_assert_ptr_null(st);
    return sct_issues_get(issues, sct_issues_count(issues) - 1)->message;
}

/* Free to twist at the support, it would hand the torque to a joint that nothing else holds against twist. */
START_TEST(a_torque_that_no_joint_takes_is_refused)
{
    sct_issues *issues = sct_issues_new();
    sct_model *m = space(210000, 81000);
    mb_frame_group(m, 1e4, 1e6, 1e6);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 3000, 0, 0);
    mb_fix(m, 0);
    mb_beam(m, 0, 1, 0);
    m->members[0].end[0].fixity[SCT_TWIST] = SCT_PINNED;
    sct_member_load *load = mb_member_load(m, 0, 0);
    *load = (sct_member_load){.is_point = true, .a = 1000, .b = 1000, .M = {5, 1, 0}};
    mb_each_case(m);
    ck_assert_ptr_nonnull(strstr(refusal(m, issues), "is loaded by a twist that neither of its ends takes"));
    sct_issues_free(issues);
    m->members[0].end[0].fixity[SCT_TWIST] = SCT_FIXED; /* free at the other end: the support takes it */
    m->members[0].end[1].fixity[SCT_TWIST] = SCT_PINNED;
    frame f = frame_solve(m);
    ck_close(frame_reaction(&f, 0, 0, 3), -5.0, 1e-14);
    frame_free(&f);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("frames");
    TCase *c = tcase_create("frames");
    tcase_add_test(c, a_cantilever);
    tcase_add_test(c, a_simple_beam);
    tcase_add_test(c, a_beam_fixed_at_both_ends);
    tcase_add_test(c, a_propped_cantilever);
    tcase_add_test(c, a_fixed_end_that_settles);
    tcase_add_test(c, a_fixed_end_that_turns);
    tcase_add_test(c, a_fixed_beam_that_is_warmed);
    tcase_add_test(c, a_gradient_bends_what_is_free_to);
    tcase_add_test(c, an_inclined_cantilever);
    tcase_add_test(c, a_cantilever_round_a_corner_twists);
    tcase_add_test(c, a_sprung_end_may_be_all_that_moves);
    tcase_add_test(c, an_elastic_support_takes_its_part);
    tcase_add_test(c, a_torque_that_no_joint_takes_is_refused);
    suite_add_tcase(s, c);
    return run_suite(s);
}

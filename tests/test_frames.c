/* Tests of the analysis of frames against closed forms and tables. kN, m throughout: E = 210e6 kN/m2. */
#include "support.h"

#include "analysis/member_line.h"
#include "analysis/recovery.h"
#include "model_build.h"
#include "solved.h"

static const double E = 210e6, RIGID = 1e4; /* areas so large that members keep their lengths */

/* ---- building blocks ----------------------------------------------------------------------------------------------
 */

static sct_model *plane(void)
{
    sct_model *m = mb_new(2);
    mb_material(m, E, 7850e-3, 12e-6);
    mb_case(m, 0.0);
    return m;
}

/* Bending moment in plane of a member at x in case 0. */
static double moment(const solved *s, int member, double x)
{
    sct_member_lines *lines = sct_member_lines_new(s->st);
    const sct_beam_line line = sct_member_line(lines, member, 0, s->A[s->st->bars[member].group]);
    const sct_beam_state state = sct_member_state(s->st, s->r.N, member);
    double value[SCT_BEAM_QUANTITIES];
    sct_beam_values(&line, &state, sct_beam_piece_at(&line, x, -1), x, value);
    sct_member_lines_free(lines);
    return value[SCT_BEAM_M];
}

/* ---- one beam -------------------------------------------------------------------------------------------------------
 */

/* Cantilever L = 6, E I = 21000, tip load 20: M = P L = 120, tip P L^3/3EI = 6.857143e-2 (beam tables, from memory). */
START_TEST(a_cantilever_with_a_tip_load)
{
    sct_model *m = plane();
    mb_frame_group(m, 1e-2, 1e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 6, 0, 0);
    mb_fix(m, 0);
    mb_beam(m, 0, 1, 0);
    mb_load(m, 0, 1, 0, -20, 0);
    solved s = solve(m);
    ck_assert_int_eq(s.st->n_dof, 3);
    ck_close(moved(&s, 0, 1, 1), -20 * 216.0 / (3 * 21000), 1e-12);
    ck_close(moment(&s, 0, 0.0), -120.0, 1e-12);
    solved_free(&s);
}
END_TEST

/* ---- portals
 * --------------------------------------------------------------------------------------------------------- */

/* h 4, L 8, Ic 1e-4, Ib 2e-4: members 0, 1 the columns upwards, 2 the beam; axial deformation out of the way. */
static sct_model *portal(bool has_fixed_feet)
{
    sct_model *m = plane();
    mb_frame_group(m, RIGID, 1e-4, 1e-4);
    mb_frame_group(m, RIGID, 2e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 0, 4, 0);
    mb_joint(m, 8, 4, 0);
    mb_joint(m, 8, 0, 0);
    for (int foot = 0; foot <= 3; foot += 3) {
        if (has_fixed_feet)
            mb_fix(m, foot);
        else
            mb_pin(m, foot);
    }
    mb_beam(m, 0, 1, 0);
    mb_beam(m, 3, 2, 0);
    mb_beam(m, 1, 2, 1);
    for (int e = 0; e < 2 && !has_fixed_feet; e++) mb_pin_end(m, e, 0);
    return m;
}

/* Kleinlogel, Rigid Frame Formulas (from memory), k = 1: uniform load w on the beam. */
START_TEST(portals_under_a_uniform_load)
{
    for (int is_fixed = 0; is_fixed < 2; is_fixed++) {
        sct_model *m = portal(is_fixed);
        mb_uniform(m, 0, 2, -10, 8);
        solved s = solve(m);
        double *reaction = reactions_of(&s, 0);
        ck_close(reaction[0], is_fixed ? 640 / 48.0 : 640 / 80.0, 1e-6);
        ck_close(reaction[1], 40.0, 1e-9);
        ck_close(moment(&s, 2, 0.0), is_fixed ? -640 / 18.0 : -640 / 20.0, 1e-6);
        ck_close(moment(&s, 2, 4.0), is_fixed ? 80 - 640 / 18.0 : 80 - 32.0, 1e-6);
        free(reaction);
        solved_free(&s);
    }
}
END_TEST

START_TEST(portals_under_a_sway_force)
{
    for (int is_fixed = 0; is_fixed < 2; is_fixed++) {
        sct_model *m = portal(is_fixed);
        mb_load(m, 0, 1, 20, 0, 0);
        solved s = solve(m);
        const double Ph3 = 20 * 64 / (12 * E * 1e-4);
        ck_close(moved(&s, 0, 1, 0), is_fixed ? Ph3 * 5 / 7.0 : Ph3 * 3.0, 1e-6);
        ck_close(fabs(moment(&s, 0, 4.0)), is_fixed ? 120 / 7.0 : 40.0, 1e-6);
        solved_free(&s);
    }
}
END_TEST

/* ---- space
 * ----------------------------------------------------------------------------------------------------------- */

/* An L-shaped cantilever with torsion (N, mm), tube 114.3 x 5: drop at the tip P L1^3/3EI + P L2^3/3EI + P L2^2 L1/GJ =
 * 252.27605, drop at the corner 83.40555 (beam formulas; tube from its dimensions). */
START_TEST(a_cantilever_round_a_corner_twists)
{
    sct_model *m = mb_new(3);
    const double I = 2.569202e6;
    mb_material(m, 210000, 1e-9, NAN);
    m->materials[0].G = 81000;
    mb_frame_group(m, 1e4, I, 2 * I);
    mb_case(m, 0.0);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 3000, 0, 0);
    mb_joint(m, 3000, 2000, 0);
    mb_fix(m, 0);
    mb_beam(m, 0, 1, 0);
    mb_beam(m, 1, 2, 0);
    mb_load(m, 0, 2, 0, 0, -5000);
    solved s = solve(m);
    ck_assert_int_eq(s.st->n_dof, 12);
    ck_close(moved(&s, 0, 2, 2), -252.27605, 1e-7);
    ck_close(moved(&s, 0, 1, 2), -83.40555, 1e-7);
    solved_free(&s);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("frames");
    TCase *c = tcase_create("frames");
    tcase_add_test(c, a_cantilever_with_a_tip_load);
    tcase_add_test(c, portals_under_a_uniform_load);
    tcase_add_test(c, portals_under_a_sway_force);
    tcase_add_test(c, a_cantilever_round_a_corner_twists);
    suite_add_tcase(s, c);
    return run_suite(s);
}

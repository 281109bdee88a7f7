/* Tests of the analysis of frames against closed forms and tables. kN, m throughout: E = 210e6 kN/m2. */
#include "support.h"

#include "analysis/member_line.h"
#include "analysis/recovery.h"
#include "model_build.h"
#include "solved.h"

static const double E = 210e6, RIGID = 1e4; /* areas so large that members keep their lengths */

/* ---- building blocks ----------------------------------------------------------------------------------------------
 */

/* A group with held area and stated I (both axes) and J. */
static int group(sct_model *m, double A, double I, double J)
{
    const int g = mb_group(m, 0, A, false);
    m->groups[g].c[0] = m->groups[g].c[1] = I / (A * A);
    m->groups[g].J = (sct_power){J / (A * A), 2.0};
    return g;
}

static void fix(sct_model *m, int joint)
{
    mb_pin(m, joint);
    sct_joint *j = &m->joints[joint];
    const int turns = m->dimensions == 2 ? 1 : 3;
    for (int i = 0; i < turns; i++) j->turns_held[j->n_turns_held++][m->dimensions == 2 ? 2 : i] = 1.0;
}

/* A beam, fixed to both joints unless pinned below. */
static int beam(sct_model *m, int from, int to, int g)
{
    const int e = mb_bar(m, from, to, g);
    for (int s = 0; s < 2; s++)
        for (int r = 0; r < SCT_TURNS; r++) m->members[e].end[s].fixity[r] = SCT_FIXED;
    return e;
}

static void pin_end(sct_model *m, int member, int end)
{
    for (int r = 0; r < SCT_TURNS; r++) m->members[member].end[end].fixity[r] = SCT_PINNED;
}

static sct_member_load *member_load(sct_model *m, int k, int member)
{
    sct_case *c = &m->cases[k];
    c->member_loads = mb_grow(m->arena, c->member_loads, c->n_member_loads, sizeof *c->member_loads);
    sct_member_load *load = &c->member_loads[c->n_member_loads++];
    *load = (sct_member_load){.member = member};
    return load;
}

/* A uniform load along y of the model over a whole member. */
static void uniform(sct_model *m, int k, int member, double q, double L)
{
    sct_member_load *load = member_load(m, k, member);
    load->b = L;
    load->qa[1] = load->qb[1] = q;
}

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
    group(m, 1e-2, 1e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 6, 0, 0);
    fix(m, 0);
    beam(m, 0, 1, 0);
    mb_load(m, 0, 1, 0, -20, 0);
    solved s = solve(m);
    ck_assert_int_eq(s.st->n_dof, 3);
    ck_close(moved(&s, 0, 1, 1), -20 * 216.0 / (3 * 21000), 1e-12);
    ck_close(moment(&s, 0, 0.0), -120, 1e-12);
    solved_free(&s);
}
END_TEST

/* ---- portals
 * --------------------------------------------------------------------------------------------------------- */

/* h 4, L 8, Ic 1e-4, Ib 2e-4: members 0, 1 the columns upwards, 2 the beam; axial deformation out of the way. */
static sct_model *portal(bool has_fixed_feet)
{
    sct_model *m = plane();
    group(m, RIGID, 1e-4, 1e-4);
    group(m, RIGID, 2e-4, 1e-4);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 0, 4, 0);
    mb_joint(m, 8, 4, 0);
    mb_joint(m, 8, 0, 0);
    for (int foot = 0; foot <= 3; foot += 3) {
        if (has_fixed_feet)
            fix(m, foot);
        else
            mb_pin(m, foot);
    }
    beam(m, 0, 1, 0);
    beam(m, 3, 2, 0);
    beam(m, 1, 2, 1);
    for (int e = 0; e < 2 && !has_fixed_feet; e++) pin_end(m, e, 0);
    return m;
}

/* Kleinlogel, Rigid Frame Formulas (from memory), k = 1: uniform load w on the beam. */
START_TEST(portals_under_a_uniform_load)
{
    for (int is_fixed = 0; is_fixed < 2; is_fixed++) {
        sct_model *m = portal(is_fixed);
        uniform(m, 0, 2, -10, 8);
        solved s = solve(m);
        double *reaction = reactions_of(&s, 0);
        ck_close(reaction[0], is_fixed ? 640 / 48.0 : 640 / 80.0, 1e-6);
        ck_close(reaction[1], 40, 1e-9);
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
    group(m, 1e4, I, 2 * I);
    mb_case(m, 0.0);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 3000, 0, 0);
    mb_joint(m, 3000, 2000, 0);
    fix(m, 0);
    beam(m, 0, 1, 0);
    beam(m, 1, 2, 0);
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

/* Tests of analysis/structure.c: numbering, supports, loads, and every message it gives. */
#include "support.h"

#include "analysis/structure.h"
#include "model_build.h"

/* ---- a sound model to spoil ----------------------------------------------------------------------------------------
 */

/* A triangle: J0 pinned, J1 on a roller, J2 on top; M0 0-1, M1 0-2, M2 1-2; one case with a load at J2. */
static sct_model *triangle(void)
{
    sct_model *m = mb_new(2);
    mb_group(m, mb_material(m, 210e9, 7850, 12e-6), 1e-3, true);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 4, 0, 0);
    mb_joint(m, 2, 3, 0);
    mb_pin(m, 0);
    mb_hold(m, 1, 0, 1, 0);
    mb_bar(m, 0, 1, 0);
    mb_bar(m, 0, 2, 0);
    mb_bar(m, 1, 2, 0);
    mb_case(m, 0.0);
    mb_load(m, 0, 2, 1e3, -5e3, 0);
    return m;
}

/* Builds, expects the status and the first message (NULL: no message at all), and frees everything. */
static void expect(sct_model *m, sct_status status, const char *line)
{
    sct_issues *issues = sct_issues_new();
    sct_structure *st = NULL;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), status);
    ck_assert((st != NULL) == (status == SCT_OK));
    if (line == NULL) {
        ck_assert_int_eq(sct_issues_count(issues), 0);
    } else {
        ck_assert_int_ge(sct_issues_count(issues), 1);
        char *first = sct_issue_line(sct_issues_get(issues, 0));
        ck_assert_str_eq(first, line);
        free(first);
    }
    sct_structure_free(st);
    sct_issues_free(issues);
    mb_free(m);
}

START_TEST(a_sound_model_gives_no_message)
{
    expect(triangle(), SCT_OK, NULL);
    sct_structure_free(NULL);
}
END_TEST

/* ---- errors --------------------------------------------------------------------------------------------------------
 */

START_TEST(a_member_from_a_joint_to_itself_is_an_error)
{
    sct_model *m = triangle();
    mb_bar(m, 2, 2, 0);
    expect(m, SCT_BAD_INPUT, "test.json:2003:1: error: /members/M3: member \"M3\" goes from joint \"J2\" to itself");
}
END_TEST

START_TEST(a_member_between_joints_at_one_place_is_an_error)
{
    sct_model *m = triangle();
    mb_joint(m, 2, 3 + 4e-9, 0);
    mb_bar(m, 2, 3, 0);
    expect(
        m, SCT_BAD_INPUT,
        "test.json:2003:1: error: /members/M3: member \"M3\" has no length: joints \"J2\" and \"J3\" are at one place");
}
END_TEST

START_TEST(a_short_member_is_accepted)
{
    sct_model *m = triangle();
    mb_joint(m, 2, 3 + 1e-6, 0);
    mb_bar(m, 2, 3, 0);
    mb_bar(m, 0, 3, 0);
    expect(m, SCT_OK, NULL);
}
END_TEST

START_TEST(coordinates_that_overflow_are_an_error)
{
    sct_model *m = triangle();
    m->joints[1].at[0] = 1e308;
    m->joints[2].at[0] = -1e308;
    expect(m, SCT_BAD_INPUT, "test.json:2000:1: error: /members/M0: member \"M0\" has no finite length");
}
END_TEST

START_TEST(all_errors_of_a_model_are_told_together)
{
    sct_model *m = triangle();
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    mb_joint(m, 9, 9, 0);
    mb_load(m, 0, 3, 1, 0, 0);
    mb_settle(m, 0, 2, 0, -0.01, 0);
    mb_settle(m, 0, 1, 0.01, 0, 0);
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_errors(issues), 3);
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

START_TEST(a_load_at_a_joint_without_members_is_an_error)
{
    sct_model *m = triangle();
    mb_joint(m, 9, 9, 0);
    mb_load(m, 0, 3, 1, 0, 0);
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_count(issues), 2);
    const sct_issue *second = sct_issues_get(issues, 1);
    ck_assert_int_eq(second->severity, SCT_ERROR);
    ck_assert_int_eq(second->line, 5001);
    ck_assert_str_eq(second->message, "joint \"J3\" carries a load but has no members");
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

START_TEST(a_settlement_where_nothing_is_held_is_an_error)
{
    sct_model *m = triangle();
    mb_settle(m, 0, 2, 0, -0.01, 0);
    expect(m, SCT_BAD_INPUT,
           "test.json:6000:1: error: /settlements/0: settlement of joint \"J2\" in a direction that is not held; only "
           "held "
           "directions can be moved");
}
END_TEST

START_TEST(a_settlement_partly_in_a_free_direction_is_an_error)
{
    sct_model *m = triangle();
    mb_settle(m, 0, 1, 1e-7, -0.01, 0);
    expect(m, SCT_BAD_INPUT,
           "test.json:6000:1: error: /settlements/0: settlement of joint \"J1\" in a direction that is not held; only "
           "held "
           "directions can be moved");
}
END_TEST

START_TEST(a_settlement_of_an_inclined_roller_may_be_off_by_rounding)
{
    sct_model *m = triangle();
    m->joints[1].n_held = 0;
    mb_hold(m, 1, -0.6, 0.8, 0);
    mb_settle(m, 0, 1, 0.006 * (1 + 1e-12), -0.008, 0);
    expect(m, SCT_OK, NULL);
}
END_TEST

START_TEST(a_warmed_member_needs_an_expansion_coefficient)
{
    sct_model *m = triangle();
    m->materials[0].expansion = NAN;
    mb_act(m, 0, 1, 20, 0);
    expect(m, SCT_BAD_INPUT,
           "test.json:7000:1: error: /actions/0: member \"M1\" is warmed but its material \"S0\" has no \"expansion\"");
}
END_TEST

START_TEST(a_model_without_members_is_an_error)
{
    sct_model *m = triangle();
    m->n_members = 0;
    expect(m, SCT_BAD_INPUT, "test.json: error: the model has no members");
}
END_TEST

START_TEST(a_model_without_any_load_is_an_error)
{
    sct_model *m = triangle();
    m->cases[0].n_loads = 0;
    mb_case(m, 0.0);
    mb_load(m, 1, 2, 0, 0, 0);
    mb_act(m, 1, 0, 0, 0);
    expect(m, SCT_BAD_INPUT, "test.json:4000:1: error: /cases/C0: no case has a load: there is nothing to carry");
}
END_TEST

START_TEST(a_model_without_cases_is_an_error)
{
    sct_model *m = triangle();
    m->n_cases = 0;
    expect(m, SCT_BAD_INPUT, "test.json: error: no case has a load: there is nothing to carry");
}
END_TEST

/* Refused before anything of what is counted is looked at. */
static void is_too_large(sct_model *m)
{
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_TOO_LARGE);
    ck_assert_int_eq(sct_issues_errors(issues), 1);
    sct_issues_free(issues);
    mb_free(m);
}

START_TEST(a_model_beyond_the_index_limits_is_too_large)
{
    sct_model *m = triangle();
    m->n_members = 200 * 1000 * 1000;
    is_too_large(m);
    m = triangle();
    m->dimensions = 3; /* where a member has more entries than in the plane */
    m->n_members = 6 * 1000 * 1000;
    is_too_large(m);
    m = triangle();
    m->n_joints = 400 * 1000 * 1000;
    is_too_large(m);
    m = triangle();
    m->n_joints = 1000 * 1000;
    m->n_cases = 1000;
    is_too_large(m);
    m = triangle();
    m->n_combinations = 3000;
    m->n_deflections = 1;
    m->deflections = sct_arena_array(m->arena, 1, sizeof *m->deflections);
    m->deflections[0].n_joints = 1000 * 1000;
    is_too_large(m);
}
END_TEST

/* ---- warnings ------------------------------------------------------------------------------------------------------
 */

START_TEST(a_case_without_load_is_warned_about)
{
    sct_model *m = triangle();
    mb_case(m, 0.0);
    expect(m, SCT_OK, "test.json:4001:1: warning: /cases/C1: the case has no load; its results are zero");
}
END_TEST

START_TEST(self_weight_settlement_temperature_and_lack_of_fit_each_count_as_load)
{
    for (int i = 0; i < 4; i++) {
        sct_model *m = triangle();
        m->cases[0].n_loads = 0;
        if (i == 0) m->cases[0].self_weight = 1.0;
        if (i == 1) mb_settle(m, 0, 1, 0, -0.01, 0);
        if (i == 2) mb_act(m, 0, 0, 10, 0);
        if (i == 3) mb_act(m, 0, 0, 0, 1e-3);
        expect(m, SCT_OK, NULL);
    }
}
END_TEST

START_TEST(a_joint_without_members_is_left_out_with_a_warning)
{
    sct_model *m = triangle();
    mb_joint(m, 9, 9, 0);
    expect(m, SCT_OK, "test.json:1003:1: warning: /joints/J3: joint \"J3\" has no members; it is left out");
}
END_TEST

START_TEST(joints_at_one_place_are_warned_about)
{
    sct_model *m = triangle();
    mb_joint(m, 2 + 1e-9, 3, 0);
    mb_bar(m, 0, 3, 0);
    mb_bar(m, 1, 3, 0);
    expect(m, SCT_OK,
           "test.json:1003:1: warning: /joints/J3: joints \"J2\" and \"J3\" are at the same place and not connected "
           "with each "
           "other; use one joint if they are meant to be one");
}
END_TEST

START_TEST(two_members_between_the_same_joints_are_warned_about)
{
    sct_model *m = triangle();
    mb_bar(m, 2, 1, 0); /* M2 the other way round */
    expect(m, SCT_OK,
           "test.json:2003:1: warning: /members/M3: members \"M2\" and \"M3\" join the same two joints; they act side "
           "by side");
}
END_TEST

START_TEST(a_member_through_a_joint_that_it_is_not_tied_to_is_warned_about)
{
    sct_model *m = triangle();
    const int middle = mb_joint(m, 2, 0, 0);
    mb_bar(m, middle, 2, 0); /* M0 passes through J3 */
    expect(m, SCT_OK,
           "test.json:2000:1: warning: /members/M0: member \"M0\" passes through joint \"J3\" without being connected "
           "to it");
}
END_TEST

START_TEST(crossing_members_and_joints_in_line_with_a_member_are_no_oddity)
{
    sct_model *m = triangle();
    mb_joint(m, 6, 0, 0); /* in line with M0, beyond its end */
    mb_bar(m, 1, 3, 0);
    mb_bar(m, 2, 3, 0);
    mb_joint(m, 4, 3, 0); /* M0..: 0-4 crosses 1-2 between their ends */
    mb_bar(m, 0, 4, 0);
    mb_bar(m, 2, 4, 0);
    expect(m, SCT_OK, NULL);
}
END_TEST

START_TEST(a_load_on_a_support_is_told_once_for_each_joint)
{
    sct_model *m = triangle();
    mb_load(m, 0, 0, 100, -200, 0);
    mb_load(m, 0, 1, 0, -200, 0);
    mb_load(m, 0, 0, 100, -200, 0);
    mb_load(m, 0, 1, 50, -200, 0); /* partly along the roller: carried by the truss as well */
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_OK);
    ck_assert_int_eq(sct_issues_count(issues), 2);
    char *line = sct_issue_line(sct_issues_get(issues, 0));
    ck_assert_str_eq(line,
                     "test.json:5001:1: warning: /loads/1: the load at joint \"J0\" goes straight to its support");
    free(line);
    ck_assert_int_eq(sct_issues_get(issues, 1)->line, 5002);
    sct_structure_free(st);
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

START_TEST(a_large_grid_is_checked_in_little_time)
{
    sct_model *m = mb_new(2);
    enum { N = 150 }; /* 22 500 joints; a test of every pair would take hundreds of millions of steps */
    mb_group(m, mb_material(m, 210e9, 7850, NAN), 1e-3, true);
    for (int i = 0; i < N * N; i++) {
        mb_joint(m, i % N, i / N, 0);
        if (i < N) mb_pin(m, i);
        if (i >= N) mb_bar(m, i - N, i, 0);
        if (i >= N && i % N > 0) mb_bar(m, i - N - 1, i, 0);
    }
    mb_case(m, 1.0);
    expect(m, SCT_OK, NULL);
}
END_TEST

/* ---- what is built -------------------------------------------------------------------------------------------------
 */

/* A structure with its model; for tests of what was built. */
static sct_structure *built(const sct_model *m)
{
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_OK);
    sct_issues_free(issues);
    return st;
}

START_TEST(only_free_directions_are_numbered)
{
    sct_model *m = triangle();
    mb_joint(m, 9, 9, 0); /* no members: no unknowns */
    sct_structure *st = built(m);
    static const int FREE[] = {0, 1, 2, 0}, FIRST[] = {0, 0, 1, 3};
    ck_assert_int_eq(st->n_dof, 3);
    for (int j = 0; j < 4; j++) {
        ck_assert_int_eq(st->n_free[j], FREE[j]);
        ck_assert_int_eq(st->first_dof[j], FIRST[j]);
    }
    ck_assert_double_eq(st->basis[1][0][0], 1.0);
    ck_assert_double_eq(st->basis[2][0][0], 1.0);
    ck_assert_double_eq(st->basis[2][1][1], 1.0);
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

START_TEST(bars_know_their_length_direction_and_elongation)
{
    sct_model *m = triangle();
    sct_structure *st = built(m);
    const sct_bar *bar = &st->bars[2]; /* from (4, 0) to (2, 3): roller to top */
    const double L = sqrt(13.0), c = -2 / L, d = 3 / L;
    ck_close(bar->L, L, 1e-15);
    ck_close(bar->axes[0][0], c, 1e-15);
    ck_close(bar->axes[0][1], d, 1e-15);
    ck_assert_int_eq(bar->n_dof, 3);
    static const int DOF[] = {0, 1, 2};
    const double b[] = {-c, c, d};
    for (int i = 0; i < 3; i++) {
        ck_assert_int_eq(bar->dof[i], DOF[i]);
        ck_close(st->springs[2].b[i], b[i], 1e-15);
    }
    ck_close(bar->half_weight, 7850 * 9.80665 * L / 2, 1e-15);
    ck_assert_double_eq(bar->w[0], 0.0);
    ck_assert_double_eq(bar->w[1], 0.0);
    ck_close(bar->w[2], -bar->half_weight, 1e-15);
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

START_TEST(free_directions_are_orthonormal_and_at_right_angles_to_what_is_held)
{
    static const double HELD[][3][3] = {
        {{1, 2, 3}},  {{0, 0, 1}}, {{1, 0, 0}, {1, 1, 0}}, {{1, 2, 3}, {1, 2, 2.9}}, {{1, 1, 0}, {0, 1, 1}},
        {{0, -1, 0}},
    };
    static const int N_HELD[] = {1, 1, 2, 2, 2, 1};
    for (int i = 0; i < 6; i++) {
        sct_model *m = mb_new(3);
        mb_group(m, mb_material(m, 210e9, 7850, NAN), 1e-3, true);
        mb_joint(m, 0, 0, 0);
        mb_joint(m, 1, 2, 3);
        for (int h = 0; h < N_HELD[i]; h++) mb_hold(m, 0, HELD[i][h][0], HELD[i][h][1], HELD[i][h][2]);
        mb_bar(m, 0, 1, 0);
        mb_case(m, 1.0);
        sct_structure *st = built(m);
        ck_assert_int_eq(st->n_free[0], 3 - N_HELD[i]);
        for (int a = 0; a < st->n_free[0]; a++) {
            for (int b = 0; b < st->n_free[0]; b++) {
                double dot = 0.0;
                for (int x = 0; x < 3; x++) dot += st->basis[0][a][x] * st->basis[0][b][x];
                ck_assert_double_eq_tol(dot, a == b ? 1.0 : 0.0, 1e-14);
            }
            for (int h = 0; h < N_HELD[i]; h++) {
                double dot = 0.0;
                for (int x = 0; x < 3; x++) dot += st->basis[0][a][x] * m->joints[0].held[h][x];
                ck_assert_double_eq_tol(dot, 0.0, 1e-14);
            }
        }
        sct_structure_free(st);
        mb_free(m);
    }
}
END_TEST

START_TEST(held_axes_leave_the_other_axes_exactly)
{
    sct_model *m = mb_new(3);
    mb_group(m, mb_material(m, 210e9, 7850, NAN), 1e-3, true);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 1, 2, 3);
    mb_hold(m, 0, 0, -1, 0);
    mb_bar(m, 0, 1, 0);
    mb_case(m, 1.0);
    sct_structure *st = built(m);
    static const double X[] = {1, 0, 0}, Z[] = {0, 0, 1};
    for (int i = 0; i < 3; i++) {
        ck_assert_double_eq(st->basis[0][0][i], X[i]);
        ck_assert_double_eq(st->basis[0][1][i], Z[i]);
    }
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

START_TEST(groups_that_are_held_have_no_variable)
{
    sct_model *m = triangle();
    mb_group(m, 0, 2e-3, false);
    mb_group(m, 0, 2e-3, true);
    m->groups[2].kind = SCT_LADDER;
    mb_group(m, 0, 2e-3, false);
    m->groups[3].kind = SCT_HELD_SECTION;
    sct_structure *st = built(m);
    static const int VARIABLE[] = {0, -1, 1, -1};
    ck_assert_int_eq(st->n_vars, 2);
    for (int g = 0; g < 4; g++) ck_assert_int_eq(st->var_of_group[g], VARIABLE[g]);
    ck_assert_int_eq(st->group_of_var[0], 0);
    ck_assert_int_eq(st->group_of_var[1], 2);
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

START_TEST(loads_go_to_the_unknowns_and_prescribed_elongations_to_the_bars)
{
    sct_model *m = triangle();
    mb_load(m, 0, 2, 500, 0, 0);
    mb_load(m, 0, 1, 70, -200, 0);
    mb_case(m, 0.0);
    mb_settle(m, 1, 1, 0, -0.03, 0);
    mb_settle(m, 1, 1, 0, 0.01, 0);
    mb_act(m, 1, 2, 25, 1e-3);
    mb_act(m, 1, 2, 5, 0);
    sct_structure *st = built(m);
    static const double F[] = {70, 1500, -5000};
    for (int i = 0; i < 3; i++) {
        ck_assert_double_eq(st->f[i], F[i]);
        ck_assert_double_eq(st->f[3 + i], 0.0);
    }
    const double L = sqrt(13.0);
    for (int e = 0; e < 3; e++) ck_assert_double_eq(st->stretch[e], 0.0);
    ck_assert_double_eq(st->stretch[3], 0.0);
    ck_close(st->stretch[3 + 2], 0.02 * 3 / L - 12e-6 * 30 * L - 1e-3, 1e-12);
    double d[3];
    const double u[] = {1, 2, 3};
    sct_joint_displacement(st, u, st->settled + 9, 1, d);
    ck_assert_double_eq(d[0], 1.0);
    ck_close(d[1], -0.02, 1e-15);
    sct_joint_displacement(st, u, NULL, 2, d);
    ck_assert_double_eq(d[0], 2.0);
    ck_assert_double_eq(d[1], 3.0);
    ck_assert_double_eq(d[2], 0.0);
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

START_TEST(weight_is_the_sum_over_bars)
{
    sct_model *m = triangle();
    sct_structure *st = built(m);
    const double A = 2e-3;
    double weight[3];
    sct_structure_weight(st, &A, weight);
    ck_assert_double_eq(weight[0], 0.0);
    ck_assert_double_eq(weight[1], 0.0);
    ck_close(weight[2], -A * 7850 * 9.80665 * sqrt(13.0), 1e-14); /* two sloping bars, half of each */
    sct_structure_free(st);
    mb_free(m);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("structure");
    TCase *errors = tcase_create("errors"), *warnings = tcase_create("warnings"), *numbers = tcase_create("numbers");
    tcase_add_test(errors, a_sound_model_gives_no_message);
    tcase_add_test(errors, a_member_from_a_joint_to_itself_is_an_error);
    tcase_add_test(errors, a_member_between_joints_at_one_place_is_an_error);
    tcase_add_test(errors, a_short_member_is_accepted);
    tcase_add_test(errors, coordinates_that_overflow_are_an_error);
    tcase_add_test(errors, all_errors_of_a_model_are_told_together);
    tcase_add_test(errors, a_load_at_a_joint_without_members_is_an_error);
    tcase_add_test(errors, a_settlement_where_nothing_is_held_is_an_error);
    tcase_add_test(errors, a_settlement_partly_in_a_free_direction_is_an_error);
    tcase_add_test(errors, a_settlement_of_an_inclined_roller_may_be_off_by_rounding);
    tcase_add_test(errors, a_warmed_member_needs_an_expansion_coefficient);
    tcase_add_test(errors, a_model_without_members_is_an_error);
    tcase_add_test(errors, a_model_without_any_load_is_an_error);
    tcase_add_test(errors, a_model_without_cases_is_an_error);
    tcase_add_test(errors, a_model_beyond_the_index_limits_is_too_large);
    tcase_add_test(warnings, a_case_without_load_is_warned_about);
    tcase_add_test(warnings, self_weight_settlement_temperature_and_lack_of_fit_each_count_as_load);
    tcase_add_test(warnings, a_joint_without_members_is_left_out_with_a_warning);
    tcase_add_test(warnings, joints_at_one_place_are_warned_about);
    tcase_add_test(warnings, two_members_between_the_same_joints_are_warned_about);
    tcase_add_test(warnings, a_member_through_a_joint_that_it_is_not_tied_to_is_warned_about);
    tcase_add_test(warnings, crossing_members_and_joints_in_line_with_a_member_are_no_oddity);
    tcase_add_test(warnings, a_load_on_a_support_is_told_once_for_each_joint);
    tcase_add_test(warnings, a_large_grid_is_checked_in_little_time);
    tcase_add_test(numbers, only_free_directions_are_numbered);
    tcase_add_test(numbers, bars_know_their_length_direction_and_elongation);
    tcase_add_test(numbers, free_directions_are_orthonormal_and_at_right_angles_to_what_is_held);
    tcase_add_test(numbers, held_axes_leave_the_other_axes_exactly);
    tcase_add_test(numbers, groups_that_are_held_have_no_variable);
    tcase_add_test(numbers, loads_go_to_the_unknowns_and_prescribed_elongations_to_the_bars);
    tcase_add_test(numbers, weight_is_the_sum_over_bars);
    suite_add_tcase(suite, errors);
    suite_add_tcase(suite, warnings);
    suite_add_tcase(suite, numbers);
    return run_suite(suite);
}

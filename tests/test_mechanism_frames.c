/* Mechanisms of frames are told by joints, directions and turns, in these words. */
#include "null_motion.h"
#include "truss_shapes.h"

static sct_model *frame(int dimensions)
{
    sct_model *m = mb_new(dimensions);
    mb_material(m, 210e9, 7850.0, 12e-6);
    m->materials[0].G = 81e9;
    mb_frame_group(m, 5e-3, 5e-5, 1e-6);
    return m;
}

/* n beams of 4 m in a row along x, continuous: joints 0 .. n, beam i from joint i. */
static sct_model *row(int dimensions, int n)
{
    sct_model *m = frame(dimensions);
    for (int i = 0; i <= n; i++) mb_joint(m, 4.0 * i, 0.0, 0.0);
    for (int i = 0; i < n; i++) mb_beam(m, i, i + 1, 0);
    return m;
}

static void roller(sct_model *m, int joint)
{
    mb_hold(m, joint, 0.0, 1.0, 0.0);
}

/* Frees the bending of an end, not its twist. */
static void free_bending(sct_model *m, int member, int end)
{
    m->members[member].end[end].fixity[SCT_IN_PLANE] = m->members[member].end[end].fixity[SCT_OUT_OF_PLANE] =
        SCT_PINNED;
}

static void spring_end(sct_model *m, int member, int end, int turn, double stiffness)
{
    m->members[member].end[end].fixity[turn] = SCT_SPRUNG;
    m->members[member].end[end].stiffness[turn] = stiffness;
}

static const double X[3] = {1, 0, 0}, Y[3] = {0, 1, 0}, Z[3] = {0, 0, 1};

/* ---- turns ----------------------------------------------------------------------------------------------------------
 */

#define HOLD_IT                                                                                                        \
    ": nothing holds this rotation; hold it by a support, fix another member there, or release the twist of the "      \
    "members that turn"

START_TEST(a_member_released_for_bending_at_both_ends_spins_about_itself)
{
    sct_model *m = row(3, 1);
    mb_pin(m, 0);
    mb_pin(m, 1);
    free_bending(m, 0, 0);
    free_bending(m, 0, 1);
    ck_only(m, 0, "joints \"J0\" and \"J1\" can turn together about x" HOLD_IT);
}
END_TEST

START_TEST(a_spinning_member_is_released_or_held)
{
    for (int cure = 0; cure < 3; cure++) {
        sct_model *m = row(3, 1);
        mb_pin(m, 0);
        mb_pin(m, 1);
        free_bending(m, 0, 0);
        free_bending(m, 0, 1);
        if (cure == 0) mb_pin_end(m, 0, 1);
        if (cure == 1) mb_hold_turn(m, 0, 1.0, 0.0, 0.0);
        if (cure == 2) mb_spring(m, 1, true, X, 1e3);
        ck_stable(m);
    }
}
END_TEST

/* A strut askew between two joints that only bars hold. */
START_TEST(a_spinning_strut_in_a_space_truss_is_told_by_its_direction)
{
    sct_model *m = frame(3);
    const double feet[4][2] = {{0, 0}, {6, 0}, {6, 6}, {0, 6}};
    for (int i = 0; i < 4; i++) mb_pin(m, mb_joint(m, feet[i][0], feet[i][1], 0.0));
    const int a = mb_joint(m, 1.0, 2.0, 4.0), b = mb_joint(m, 4.0, 2.0, 8.0);
    for (int foot = 0; foot < 3; foot++) {
        mb_bar(m, foot, a, 0);
        mb_bar(m, foot + 1, b, 0);
    }
    const int strut = mb_beam(m, a, b, 0);
    free_bending(m, strut, 0);
    free_bending(m, strut, 1);
    ck_only(m, a, "joints \"J4\" and \"J5\" can turn together about (0.60, 0.00, 0.80)" HOLD_IT);
}
END_TEST

START_TEST(a_straight_beam_in_space_on_pins_spins_as_a_whole)
{
    sct_model *m = row(3, 3);
    mb_pin(m, 0);
    mb_pin(m, 3);
    ck_only(m, 0, "joints \"J0\", \"J1\", \"J2\" and \"J3\" can turn together about x" HOLD_IT);
    m = row(3, 3);
    mb_pin(m, 0);
    mb_hold_turn(m, 0, 1.0, 0.0, 0.0);
    mb_pin(m, 3);
    ck_stable(m);
}
END_TEST

START_TEST(joints_whose_members_are_all_released_have_no_rotation_to_lose)
{
    for (int dimensions = 2; dimensions <= 3; dimensions++) {
        sct_model *m = frame(dimensions);
        const double feet[4][2] = {{0, 0}, {6, 0}, {6, 6}, {0, 6}};
        const int top = mb_joint(m, 2.0, 1.0, dimensions == 3 ? 5.0 : 0.0);
        for (int i = 0; i < 4; i++) {
            const int foot = mb_joint(m, feet[i][0], feet[i][1], 0.0);
            mb_fix(m, foot);
            mb_pin_end(m, mb_beam(m, foot, top, 0), 1);
        }
        ck_stable(m);
    }
}
END_TEST

/* ---- hinges
 * ---------------------------------------------------------------------------------------------------------- */

START_TEST(a_storey_without_sway_resistance_moves_in_x)
{
    for (int weak = 0; weak < 3; weak++) {
        sct_model *m = frame(2);
        for (int i = 0; i < 4; i++) {
            mb_joint(m, 0.0, 3.0 * i, 0.0);
            mb_joint(m, 5.0, 3.0 * i, 0.0);
        }
        mb_fix(m, 0);
        mb_fix(m, 1);
        for (int i = 0; i < 3; i++) {
            for (int side = 0; side < 2; side++) {
                const int e = mb_beam(m, 2 * i + side, 2 * i + 2 + side, 0);
                for (int end = 0; end < 2 && i == weak; end++) mb_pin_end(m, e, end);
            }
            mb_beam(m, 2 * i + 2, 2 * i + 3, 0);
        }
        static const char *const JOINTS[] = {"\"J2\", \"J3\", \"J4\", \"J5\", \"J6\" and \"J7\"",
                                             "\"J4\", \"J5\", \"J6\" and \"J7\"", "\"J6\" and \"J7\""};
        char words[300];
        snprintf(words, sizeof words,
                 "joints %s can move together in x: no member resists this; fix a pinned end, add a member (a "
                 "diagonal) or a support",
                 JOINTS[weak]);
        ck_only(m, 2 * weak + 2, words);
    }
}
END_TEST

/* Feet 0 and 4 pinned, eaves 1 and 3, ridge 2; hinged at so many of ridge, eaves, other eaves. */
static sct_model *gable(int n_hinges)
{
    sct_model *m = frame(2);
    const double at[5][2] = {{0, 0}, {0, 4}, {4, 6}, {8, 4}, {8, 0}};
    for (int j = 0; j < 5; j++) mb_joint(m, at[j][0], at[j][1], 0.0);
    for (int j = 0; j < 4; j++) mb_beam(m, j, j + 1, 0);
    mb_pin(m, 0);
    mb_pin(m, 4);
    if (n_hinges > 0) mb_pin_end(m, 1, 1);
    if (n_hinges > 1) mb_pin_end(m, 0, 1);
    if (n_hinges > 2) mb_pin_end(m, 3, 0);
    return m;
}

START_TEST(a_gable_frame_bears_one_hinge_beside_those_of_its_feet)
{
    ck_stable(gable(0));
    ck_stable(gable(1));
    ck_only(gable(2), 1,
            "joints \"J1\" in x, \"J2\" in (0.83, 0.55) and \"J3\" in x can move together: no member resists this; fix "
            "a pinned end, add a member (a diagonal) or a support"); /* J2 - J1 = (4, 2), J2 - J3 = (-4, 2), 3 turns
                                                                        about the foot: (3, 2) */
    finding f = find(gable(3));
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    drop(&f);
}
END_TEST

START_TEST(a_continuous_beam_bears_as_many_hinges_as_inner_supports)
{
    sct_model *m;
    for (int n_hinges = 0; n_hinges <= 2; n_hinges++) {
        m = row(2, 4);
        mb_pin(m, 0);
        roller(m, 2);
        roller(m, 4);
        if (n_hinges > 0) mb_pin_end(m, 0, 1);
        if (n_hinges > 1) break;
        ck_stable(m);
    }
    mb_pin_end(m, 2, 1);
    ck_only(
        m, 1,
        "joints \"J1\" and \"J3\" can move together in y: no member resists this; fix a pinned end, add a member (a "
        "diagonal) or a support");
}
END_TEST

START_TEST(a_beam_hinged_at_its_support_swings)
{
    sct_model *m = row(2, 1);
    mb_fix(m, 0);
    mb_pin_end(m, 0, 0);
    ck_only(m, 1,
            "joint \"J1\" can move in y: only member \"M0\" ends there; fix a pinned end, add a member or a support");
    m = row(3, 1);
    mb_fix(m, 0);
    m->members[0].end[0].fixity[SCT_OUT_OF_PLANE] = SCT_PINNED; /* local axis 2 is -y */
    ck_only(m, 1,
            "joint \"J1\" can move in y: only member \"M0\" ends there; fix a pinned end, add a member or a support");
}
END_TEST

/* A girder with two arms on a fixed foot; its root is free to twist. */
START_TEST(a_girder_released_for_twist_turns_about_itself)
{
    for (int has_tie = 0; has_tie < 2; has_tie++) {
        sct_model *m = row(3, 1);
        mb_fix(m, 0);
        mb_joint(m, 4.0, 2.0, 0.0);
        mb_joint(m, 4.0, -1.0, 0.0);
        mb_beam(m, 1, 2, 0);
        mb_beam(m, 1, 3, 0);
        m->members[0].end[0].fixity[SCT_TWIST] = SCT_PINNED;
        if (has_tie) { /* a mast of its own, and a bar to it that does not help */
            const int foot = mb_joint(m, 8.0, 2.0, 0.0);
            mb_fix(m, foot);
            mb_bar(m, 2, foot, 0);
            ck_only(m, 2,
                    "joints \"J2\" and \"J3\" can move together in z: no member resists this; fix a pinned end, add a "
                    "member (a diagonal) or a support");
            continue;
        }
        ck_only(m, 0,
                "the frame can turn about an axis through (0, 0, 0) m along x: its supports hold 3 directions and 2 "
                "rotations, at least 6 are needed");
    }
}
END_TEST

/* ---- supports
 * -------------------------------------------------------------------------------------------------------- */

START_TEST(a_beam_on_one_pinned_support_turns)
{
    sct_model *m = row(2, 2);
    mb_pin(m, 1);
    ck_only(m, 1, "the frame can turn about (4, 0) m: its supports hold 2 directions, at least 3 are needed");
    m = row(2, 2);
    mb_fix(m, 1);
    ck_stable(m);
}
END_TEST

START_TEST(held_rotations_count_among_the_supports)
{
    sct_model *m = row(2, 2);
    roller(m, 0);
    mb_hold_turn(m, 0, 0.0, 0.0, 1.0);
    ck_only(m, 0, "the frame can shift in x: its supports hold 1 direction and 1 rotation, at least 3 are needed");
    m = row(2, 2);
    roller(m, 0);
    roller(m, 2);
    mb_hold_turn(m, 1, 0.0, 0.0, 1.0);
    ck_only(m, 0, "the frame can shift in x: its supports hold 2 directions and 1 rotation, but none that stops this");
    m = row(2, 2);
    mb_hold_turn(m, 1, 0.0, 0.0, 1.0);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    ck_assert(says(&f, "the frame can shift in x: its supports hold 1 rotation, at least 3 are needed"));
    ck_assert(says(&f, "the frame can shift in y: "));
    drop(&f);
    m = row(3, 1);
    mb_pin(m, 0);
    mb_hold_turn(m, 0, 1.0, 0.0, 0.0);
    mb_hold_turn(m, 0, 0.0, 1.0, 0.0);
    ck_only(m, 0,
            "the frame can turn about an axis through (0, 0, 0) m along z: its supports hold 3 directions and 2 "
            "rotations, at least 6 are needed");
}
END_TEST

/* No member's end takes part in the rotation that the support holds. */
START_TEST(a_rotation_held_where_no_member_turns_holds_nothing)
{
    sct_model *m = row(2, 2);
    mb_fix(m, 0);
    mb_pin_end(m, 0, 0);
    ck_only(m, 0, "the frame can turn about (0, 0) m: its supports hold 2 directions, at least 3 are needed");
}
END_TEST

START_TEST(a_frame_without_support_is_told_so)
{
    ck_only(row(2, 2), 0, "the structure has no support; hold at least 3 directions");
    ck_only(row(3, 2), 0, "the structure has no support; hold at least 6 directions");
}
END_TEST

START_TEST(a_part_without_support_is_named)
{
    sct_model *m = row(2, 1);
    mb_fix(m, 0);
    const int a = mb_joint(m, 10.0, 0.0, 0.0), b = mb_joint(m, 12.0, 0.0, 0.0);
    mb_beam(m, a, b, 0);
    ck_only(m, a, "the part with joint \"J2\" has no support and no connection to the rest; connect it or support it");
}
END_TEST

START_TEST(a_part_on_two_rollers_is_named)
{
    sct_model *m = row(2, 1);
    mb_fix(m, 0);
    const int a = mb_joint(m, 10.0, 0.0, 0.0), b = mb_joint(m, 12.0, 0.0, 0.0);
    mb_beam(m, a, b, 0);
    roller(m, a);
    roller(m, b);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_errors(f.issues), 1);
    ck_assert(says(&f, "the part with joint \"J2\" can shift in x: its supports hold 2 directions, at least 3 are "
                       "needed"));
    drop(&f);
}
END_TEST

/* ---- elastic supports
 * ------------------------------------------------------------------------------------------------ */

START_TEST(elastic_supports_hold)
{
    sct_model *m = row(2, 2); /* three springs */
    mb_spring(m, 0, false, X, 1e5);
    mb_spring(m, 0, false, Y, 1e5);
    mb_spring(m, 2, false, Y, 1e6);
    ck_stable(m);
    m = row(2, 2); /* a foot that turns elastically */
    mb_pin(m, 0);
    mb_spring(m, 0, true, Z, 1e6);
    ck_stable(m);
    m = ts_beam(4, 2.0, 2.0, -1); /* a truss */
    m->joints[0].n_held = 0;
    mb_spring(m, 0, false, X, 1e6);
    mb_spring(m, 0, false, Y, 1e6);
    ck_stable(m);
    m = row(3, 2); /* six springs at one joint */
    for (int i = 0; i < 6; i++) mb_spring(m, 1, i > 2, i % 3 == 0 ? X : i % 3 == 1 ? Y : Z, 1e6);
    ck_stable(m);
}
END_TEST

START_TEST(elastic_supports_in_the_wrong_place_do_not)
{
    sct_model *m = row(2, 2);
    mb_spring(m, 0, false, Y, 1e5);
    mb_spring(m, 2, false, Y, 1e6);
    ck_only(m, 0, "the frame can shift in x: its supports hold 2 directions, at least 3 are needed");
    m = ts_beam(4, 2.0, 2.0, -1);
    m->joints[0].n_held = 0;
    mb_spring(m, 0, false, Y, 1e6);
    ck_only(m, 0, "the truss can shift in x: its supports hold 2 directions, at least 3 are needed");
    m = row(3, 2);
    for (int i = 0; i < 5; i++) mb_spring(m, 1, i > 2, i % 3 == 0 ? X : i % 3 == 1 ? Y : Z, 1e6);
    ck_only(m, 1,
            "the frame can turn about an axis through (4, 0, 0) m along z: its supports hold 3 directions and 2 "
            "rotations, at least 6 are needed");
}
END_TEST

/* ---- almost a mechanism
 * ---------------------------------------------------------------------------------------------- */

/* Answered, with one warning that begins and goes on like this, at joint `at`. */
static void ck_warned(sct_model *m, int at, const char *words, const char *softness)
{
    finding f = find(m);
    const char *text = message(&f, 0);
    ck_assert_int_eq(f.status, SCT_OK);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert_msg(strncmp(text, words, strlen(words)) == 0, "%s", text);
    ck_assert_msg(strstr(text, softness) != NULL, "%s", text);
    ck_assert_int_eq(sct_issues_get(f.issues, 0)->line, 1000 + at);
    drop(&f);
}

/* 3 E I / L^3 = 492187.5 of the beam that is the only one, and of half of them: 1e-7 / 4^2 is 1.3e-14 of it. */
START_TEST(what_only_a_hardly_stiff_spring_holds_is_warned_about)
{
    const double soft = 1e-7;
    sct_model *m = row(2, 1);
    mb_pin(m, 0);
    mb_spring(m, 0, true, Z, soft);
    ck_warned(m, 1,
              "joint \"J1\" can move in y almost without resistance: what resists is as soft as the spring support of "
              "joint \"J0\", with 1e-14 of the stiffness (E I / L^3)",
              " of most members; make them more alike");
    m = row(2, 1);
    mb_pin(m, 0);
    mb_spring(m, 1, false, Y, soft); /* E A / L = 2.625e8 */
    ck_warned(m, 1,
              "joint \"J1\" can move in y almost without resistance: what resists is as soft as the spring support of "
              "joint \"J1\", with 4e-16 of the stiffness (E A / L)",
              " of most members; make them more alike");
    m = row(2, 1);
    mb_fix(m, 0);
    spring_end(m, 0, 0, SCT_IN_PLANE, soft);
    ck_warned(m, 1,
              "joint \"J1\" can move in y almost without resistance: what resists is as soft as the sprung end of "
              "member \"M0\" at joint \"J0\"",
              " of the stiffness (E I / L^3) of most members");
}
END_TEST

/* The foot itself is held: what turns there is the end of the member. */
START_TEST(the_turn_of_a_sprung_end_is_told_as_that_of_its_joint)
{
    sct_model *m = row(3, 1);
    mb_fix(m, 0);
    mb_pin(m, 1);
    free_bending(m, 0, 1);
    spring_end(m, 0, 0, SCT_TWIST, 1e-8);
    ck_warned(
        m, 0,
        "joints \"J0\" and \"J1\" can turn together about x almost without resistance: what resists is as soft as "
        "the sprung end of member \"M0\" at joint \"J0\"",
        " of the stiffness (E I / L^3) of most members");
}
END_TEST

START_TEST(a_joint_in_the_plane_that_only_a_soft_beam_turns_is_told_without_an_axis)
{
    sct_model *m = row(2, 2);
    mb_pin(m, 0);
    mb_pin(m, 1);
    mb_fix(m, 2);
    mb_frame_group(m, 5e-3, 5e-19, 1e-6);
    m->members[0].group = 1;
    ck_warned(m, 0,
              "joint \"J0\" can turn almost without resistance: what resists is as soft as member \"M0\" in bending",
              " of the stiffness (E I / L^3) of most members");
}
END_TEST

START_TEST(soft_springs_beside_firm_ones_are_no_news)
{
    sct_model *m = row(2, 2);
    mb_fix(m, 0);
    mb_fix(m, 2);
    spring_end(m, 0, 0, SCT_IN_PLANE, 1e-8);
    mb_spring(m, 1, false, Y, 1e-6);
    ck_stable(m);
}
END_TEST

/* Of bending 1e-4 and less is left beside E A / L in a slender frame; 1e-10 where areas are made large on purpose. */
START_TEST(slender_members_raise_no_alarm)
{
    for (int power = -2; power <= 4; power++) {
        for (int n = 1; n <= 64; n *= 4) {
            sct_model *m = row(3, n);
            mb_fix(m, 0);
            m->groups[0].A_held = pow(10.0, power);
            mb_stiffen(m, 0, 5e-5, 5e-6, 1e-7);
            ck_stable(m);
        }
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mechanisms of frames");
    TCase *tests = tcase_create("all");
    tcase_add_test(tests, a_member_released_for_bending_at_both_ends_spins_about_itself);
    tcase_add_test(tests, a_spinning_member_is_released_or_held);
    tcase_add_test(tests, a_spinning_strut_in_a_space_truss_is_told_by_its_direction);
    tcase_add_test(tests, a_straight_beam_in_space_on_pins_spins_as_a_whole);
    tcase_add_test(tests, joints_whose_members_are_all_released_have_no_rotation_to_lose);
    tcase_add_test(tests, a_storey_without_sway_resistance_moves_in_x);
    tcase_add_test(tests, a_gable_frame_bears_one_hinge_beside_those_of_its_feet);
    tcase_add_test(tests, a_continuous_beam_bears_as_many_hinges_as_inner_supports);
    tcase_add_test(tests, a_beam_hinged_at_its_support_swings);
    tcase_add_test(tests, a_girder_released_for_twist_turns_about_itself);
    tcase_add_test(tests, a_beam_on_one_pinned_support_turns);
    tcase_add_test(tests, held_rotations_count_among_the_supports);
    tcase_add_test(tests, a_rotation_held_where_no_member_turns_holds_nothing);
    tcase_add_test(tests, a_frame_without_support_is_told_so);
    tcase_add_test(tests, a_part_without_support_is_named);
    tcase_add_test(tests, a_part_on_two_rollers_is_named);
    tcase_add_test(tests, elastic_supports_hold);
    tcase_add_test(tests, elastic_supports_in_the_wrong_place_do_not);
    tcase_add_test(tests, what_only_a_hardly_stiff_spring_holds_is_warned_about);
    tcase_add_test(tests, the_turn_of_a_sprung_end_is_told_as_that_of_its_joint);
    tcase_add_test(tests, a_joint_in_the_plane_that_only_a_soft_beam_turns_is_told_without_an_axis);
    tcase_add_test(tests, soft_springs_beside_firm_ones_are_no_news);
    tcase_add_test(tests, slender_members_raise_no_alarm);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

/* Mechanisms are found, told by the right joints, and never seen where there are none. */
#include "support.h"

#include "analysis/accuracy.h"
#include "analysis/mechanism.h"
#include "null_motion.h"
#include "truss_shapes.h"

/* ---- inside: panels, joints
 * ------------------------------------------------------------------------------------------ */

START_TEST(a_panel_without_diagonal_moves_exactly_the_joints_behind_it)
{
    ck_only(ts_cantilever(10, 1.0, 1.0, 7), 16,
            "joints \"J16\", \"J17\", \"J18\", \"J19\", \"J20\" and \"J21\" can move together in y: no member resists "
            "this; add a member (a diagonal) or a support");
    ck_only(
        ts_cantilever(10, 1.0, 1.0, 4), 10,
        "joints \"J10\", \"J11\", \"J12\", \"J13\", \"J14\", \"J15\", \"J16\", \"J17\", \"J18\", \"J19\" and 2 more "
        "can move together in y: no member resists this; add a member (a diagonal) or a support");
    ck_stable(ts_cantilever(10, 1.0, 1.0, -1));
}
END_TEST

/* Turns a plane model by an angle: every number gets rounding. */
static sct_model *turned(sct_model *m, double angle)
{
    const double c = cos(angle), s = sin(angle);
    for (int j = 0; j < m->n_joints; j++) {
        double *at = m->joints[j].at;
        memcpy(at, (double[2]){c * at[0] - s * at[1], s * at[0] + c * at[1]}, 2 * sizeof *at);
        for (int k = 0; k < m->joints[j].n_held; k++) {
            double *h = m->joints[j].held[k];
            memcpy(h, (double[2]){c * h[0] - s * h[1], s * h[0] + c * h[1]}, 2 * sizeof *h);
        }
    }
    return m;
}

START_TEST(every_diagonal_taken_out_of_standard_trusses_is_found)
{
    for (int n = 3; n <= 14; n++) {
        for (int k = 0; k < n; k++) {
            ck_assert(ck_one_mechanism(ts_cantilever(n, 1.0, 0.8, k)));
            ck_assert(ck_one_mechanism(ts_beam(n, 3.0, 2.0, k)));
            ck_assert(ck_one_mechanism(turned(ts_cantilever(n, 1.0, 1.3, k), 0.3 + n)));
            ck_assert(ck_one_mechanism(turned(ts_beam(n, 1.7, 2.0, k), 0.1 + k)));
        }
    }
}
END_TEST

START_TEST(every_member_of_a_determinate_beam_is_missed)
{
    const int n = 6;
    for (int e = 0; e < 4 * n + 1; e++) {
        sct_model *m = ts_beam(n, 2.0, 1.5, -1);
        remove_member(m, e);
        ck_one_mechanism(m);
    }
}
END_TEST

START_TEST(a_known_removed_bar_of_random_trusses_is_found)
{
    int n = 0, as_joints = 0;
    for (uint64_t seed = 1; seed <= 300; seed++) {
        const int dimensions = 2 + (int)(seed % 2);
        sct_model *m = ts_random(dimensions, 8 + (int)(seed % 33), 0, seed);
        sct_random r = {seed};
        remove_member(m, ts_pick(&r, m->n_members));
        as_joints += ck_one_mechanism(m);
        n++;
    }
    ck_assert_int_eq(n, 300);
    ck_assert_int_ge(as_joints, 270);
}
END_TEST

START_TEST(six_mechanisms_at_once_are_told_apart)
{
    const int n = 26, without[] = {2, 6, 10, 14, 18, 22};
    sct_model *m = ts_cantilever(n, 1.0, 1.0, -1);
    for (int i = 5; i >= 0; i--) remove_member(m, 4 * without[i] + 3);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 6);
    for (int i = 0; i < 6; i++) { /* the joints between two weak panels move by themselves */
        char words[200];
        const int j = 2 * without[i] + 2;
        snprintf(
            words, sizeof words,
            "joints \"J%d\", \"J%d\", \"J%d\", \"J%d\", \"J%d\", \"J%d\", \"J%d\" and \"J%d\" can move together in y",
            j, j + 1, j + 2, j + 3, j + 4, j + 5, j + 6, j + 7);
        ck_assert_msg(says(&f, words), "%s", words);
    }
    drop(&f);
}
END_TEST

START_TEST(eight_mechanisms_give_six_messages)
{
    sct_model *m = ts_cantilever(26, 1.0, 1.0, -1);
    for (int i = 8; i >= 1; i--) remove_member(m, 4 * 3 * i + 3);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 6);
    drop(&f);
}
END_TEST

START_TEST(a_joint_on_one_bar_is_loose_across_it)
{
    sct_model *m = ts_beam(4, 2.0, 2.0, -1);
    mb_bar(m, 9, mb_joint(m, 9.0, 3.0, 0.0), 0);
    ck_only(m, 10,
            "joint \"J10\" can move in (0.71, -0.71): only member \"M17\" ends there; add a member or a support");
}
END_TEST

START_TEST(a_joint_on_two_bars_in_one_line_is_loose_across_it)
{
    for (int i = 0; i < 3; i++) { /* in line exactly, to rounding, to 1e-13 */
        const double t = 0.1 * i, off = i < 2 ? 0.0 : 1e-13;
        sct_model *m = ts_beam(4, 2.0, 2.0, -1);
        const int top = mb_joint(m, 2.0 + 6.0 * t + (i == 0), 5.0, 0.0), mid = mb_joint(m, 0.0, 0.0, 0.0);
        mb_bar(m, 3, top, 0);
        mb_bar(m, 5, top, 0);
        mb_bar(m, 3, mid, 0);
        mb_bar(m, mid, 7, 0);
        memcpy(m->joints[mid].at, (double[3]){2.0 + 4.0 * 0.3, 2.0 + off, 0.0}, sizeof(double[3]));
        ck_only(m, mid, "joint \"J11\" can move in y: its 2 members lie in one line; add a member or a support");
    }
}
END_TEST

START_TEST(a_joint_on_a_roller_may_be_loose_along_it)
{
    sct_model *m = ts_beam(4, 2.0, 2.0, -1);
    const int j = mb_joint(m, 5.0, 5.0, 0.0);
    mb_bar(m, 7, j, 0); /* along (-1, 3): the roller rolls across it */
    mb_hold(m, j, -1.0, 3.0, 0.0);
    ck_only(m, j, "joint \"J10\" can move in (0.95, 0.32): only member \"M17\" ends there; add a member or a support");
}
END_TEST

START_TEST(a_tripod_with_a_missing_leg_is_loose)
{
    for (int legs = 1; legs <= 3; legs++) {
        sct_model *m = ts_new(3, 1e-3);
        const double feet[3][2] = {{3.0, 0.0}, {0.0, 4.0}, {-2.0, -2.0}};
        const int top = mb_joint(m, 0.0, 0.0, 5.0);
        for (int i = 0; i < legs; i++) {
            const int foot = mb_joint(m, feet[i][0], feet[i][1], 0.0);
            mb_pin(m, foot);
            mb_bar(m, foot, top, 0);
        }
        if (legs == 3) ck_stable(m);
        if (legs == 2) {
            ck_only(m, top,
                    "joint \"J0\" can move in (0.72, 0.54, 0.43): its 2 members lie in one plane; add a member or a "
                    "support"); /* (3, 0, -5) x (0, 4, -5) = (20, 15, 12) */
        }
        if (legs == 1) {
            ck_only(
                m, top,
                "joint \"J0\" can move in y and (0.86, 0.00, 0.51): only member \"M0\" ends there; add a member or a "
                "support");
        }
    }
}
END_TEST

START_TEST(a_flat_truss_in_space_is_loose_sideways)
{
    sct_model *m = ts_new(3, 1e-3);
    ts_strip(m, 6, 1.0, 1.0, -1);
    mb_pin(m, 0);
    mb_pin(m, 12);
    ck_only(
        m, 1,
        "joints \"J1\", \"J2\", \"J3\", \"J4\", \"J5\", \"J6\", \"J7\", \"J8\", \"J9\", \"J10\" and 2 more can each "
        "move in z: the members of each such joint do not hold it there; add members or supports");
    m = ts_new(3, 1e-3);
    ts_strip(m, 1, 1.0, 1.0, -1);
    mb_pin(m, 0);
    mb_pin(m, 2);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    ck_assert(says(&f, "joint \"J1\" can move in z: its 2 members lie in one plane"));
    ck_assert(says(&f, "joint \"J3\" can move in z: its 3 members lie in one plane"));
    drop(&f);
}
END_TEST

/* Two triangles that meet in a hinge on the line of their supports: the count of bars is right, the place is not. */
START_TEST(a_mechanism_that_rounding_hides_is_found)
{
    for (int i = 0; i < 4; i++) {
        const double off = (const double[]){0.0, 1e-16, 1e-13, -3e-11}[i], turn = 0.7 * i;
        sct_model *m = ts_new(2, 1e-3);
        const double at[5][2] = {{0.0, 0.0}, {2.5, 2.0}, {5.0, off}, {7.5, 2.0}, {10.0, 0.0}};
        for (int j = 0; j < 5; j++) mb_joint(m, at[j][0], at[j][1], 0.0);
        const int bars[6][2] = {{0, 1}, {1, 2}, {0, 2}, {2, 3}, {3, 4}, {2, 4}};
        for (int e = 0; e < 6; e++) mb_bar(m, bars[e][0], bars[e][1], 0);
        mb_pin(m, 0);
        mb_pin(m, 4);
        finding f = find(turned(m, turn));
        ck_assert_int_eq(f.status, SCT_MECHANISM);
        ck_assert_int_eq(sct_issues_count(f.issues), 1);
        ck_assert(strncmp(message(&f, 0), "joints \"J2\" in ", 15) == 0);
        ck_assert(says(&f, "\"J1\" in ") && says(&f, "\"J3\" in ") && says(&f, " can move together"));
        if (i == 0) ck_assert(says(&f, "\"J2\" in y, \"J1\" in (-0.62, 0.78) and \"J3\" in (0.62, 0.78)"));
        drop(&f);
    }
}
END_TEST

/* ---- supports
 * --------------------------------------------------------------------------------------------------------- */

static sct_model *bare_strip(void)
{
    sct_model *m = ts_new(2, 1e-3);
    ts_strip(m, 6, 1.0, 1.0, -1);
    return m;
}

START_TEST(a_structure_without_support_is_told_so)
{
    ck_only(bare_strip(), 0, "the structure has no support; hold at least 3 directions");
    sct_model *m = ts_new(3, 1e-3);
    for (int j = 0; j < 4; j++) mb_joint(m, j == 1, j == 2, j == 3);
    for (int j = 0; j < 4; j++) {
        for (int i = 0; i < j; i++) mb_bar(m, i, j, 0);
    }
    ck_only(m, 0, "the structure has no support; hold at least 6 directions");
}
END_TEST

START_TEST(two_rollers_let_a_truss_shift)
{
    sct_model *m = bare_strip();
    mb_hold(m, 2, 0.0, 1.0, 0.0);
    mb_hold(m, 12, 0.0, 1.0, 0.0);
    ck_only(m, 2, "the truss can shift in x: its supports hold 2 directions, at least 3 are needed");
}
END_TEST

START_TEST(three_parallel_rollers_let_a_truss_shift)
{
    sct_model *m = bare_strip();
    for (int j = 0; j <= 12; j += 6) mb_hold(m, j, 1.0, 1.0, 0.0);
    ck_only(m, 0, "the truss can shift in (0.71, -0.71): its supports hold 3 directions, but none that stops this");
}
END_TEST

START_TEST(three_rollers_through_one_point_let_a_truss_turn)
{
    for (int i = 0; i < 2; i++) { /* exactly, and to rounding */
        sct_model *m = bare_strip();
        const double off = i == 0 ? 0.0 : 1e-13;
        mb_hold(m, 0, 1.0, 1.0 + off, 0.0);
        mb_hold(m, 6, 0.0, 1.0, 0.0);
        mb_hold(m, 12, -1.0, 1.0, 0.0);
        ck_only(m, 0, "the truss can turn about (3, 3) m: its supports hold 3 directions, but none that stops this");
    }
    sct_model *m = bare_strip();
    m->us_customary = true;
    mb_pin(m, 6);
    m->joints[6].at[0] = 3.048;
    ck_only(m, 6, "the truss can turn about (10, 0) ft: its supports hold 2 directions, at least 3 are needed");
}
END_TEST

START_TEST(one_roller_leaves_two_motions)
{
    sct_model *m = bare_strip();
    mb_hold(m, 4, 0.0, 1.0, 0.0);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    ck_assert(says(&f, "the truss can shift in x: its supports hold 1 direction, at least 3 are needed"));
    ck_assert(says(&f, "the truss can turn about (2, 0) m: "));
    drop(&f);
}
END_TEST

START_TEST(bad_supports_do_not_hide_a_weak_panel)
{
    sct_model *m = ts_new(2, 1e-3);
    ts_strip(m, 6, 1.0, 1.0, 3);
    mb_hold(m, 0, 0.0, 1.0, 0.0);
    mb_hold(m, 12, 0.0, 1.0, 0.0);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    ck_assert(says(&f, "the truss can shift in x"));
    ck_assert(says(&f, "can move together"));
    drop(&f);
}
END_TEST

/* A tetrahedron on legs of its own: joints 0, 1, 2 in the plane z = 0. */
static sct_model *tetrahedron(void)
{
    sct_model *m = ts_new(3, 1e-3);
    mb_joint(m, 0.0, 0.0, 0.0);
    mb_joint(m, 4.0, 0.0, 0.0);
    mb_joint(m, 0.0, 3.0, 0.0);
    mb_joint(m, 1.0, 1.0, 5.0);
    for (int j = 0; j < 4; j++) {
        for (int i = 0; i < j; i++) mb_bar(m, i, j, 0);
    }
    return m;
}

START_TEST(supports_in_space_are_judged_by_their_rank)
{
    sct_model *m = tetrahedron();
    for (int j = 0; j < 3; j++) mb_hold(m, j, 0.0, 0.0, 1.0);
    mb_hold(m, 0, 1.0, 0.0, 0.0);
    mb_hold(m, 0, 0.0, 1.0, 0.0);
    mb_hold(m, 1, 0.0, 1.0, 0.0);
    ck_stable(m);

    m = tetrahedron(); /* six, but none along y */
    for (int j = 0; j < 3; j++) mb_hold(m, j, 0.0, 0.0, 1.0);
    for (int j = 0; j < 3; j++) mb_hold(m, j, 1.0, 0.0, 0.0);
    ck_only(m, 0, "the truss can shift in y: its supports hold 6 directions, but none that stops this");

    m = tetrahedron(); /* a ball and a second one: a door on its hinges */
    mb_pin(m, 0);
    mb_pin(m, 1);
    ck_only(
        m, 0,
        "the truss can turn about an axis through (0, 0, 0) m along x: its supports hold 6 directions, but none that "
        "stops this");

    m = tetrahedron(); /* one ball */
    mb_pin(m, 1);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_count(f.issues), 3);
    ck_assert(says(&f,
                   "the truss can turn about an axis through (4, 0, 0) m along x: its supports hold 3 directions, at "
                   "least 6 are needed"));
    ck_assert(says(&f, "through (4, 0, 0) m along y"));
    ck_assert(says(&f, "through (4, 0, 0) m along z"));
    drop(&f);
}
END_TEST

START_TEST(a_straight_strut_in_space_needs_five_directions)
{
    sct_model *m = ts_new(3, 1e-3);
    mb_joint(m, 0.0, 0.0, 0.0);
    mb_joint(m, 2.0, 1.0, 3.0);
    mb_bar(m, 0, 1, 0);
    mb_pin(m, 0);
    mb_pin(m, 1);
    ck_stable(m);
    m = ts_new(3, 1e-3);
    mb_joint(m, 0.0, 0.0, 0.0);
    mb_joint(m, 0.0, 0.0, 3.0);
    mb_bar(m, 0, 1, 0);
    mb_pin(m, 0);
    mb_hold(m, 1, 1.0, 0.0, 0.0);
    mb_hold(m, 1, 0.0, 1.0, 0.0);
    ck_stable(m);
}
END_TEST

/* ---- parts
 * ------------------------------------------------------------------------------------------------------------ */

static void add_triangle(sct_model *m, double x)
{
    const int a = mb_joint(m, x, 0.0, 0.0), b = mb_joint(m, x + 2.0, 0.0, 0.0), c = mb_joint(m, x + 1.0, 1.0, 0.0);
    mb_bar(m, a, b, 0);
    mb_bar(m, b, c, 0);
    mb_bar(m, a, c, 0);
}

static void support_triangle(sct_model *m, int first)
{
    mb_pin(m, first);
    mb_hold(m, first + 1, 0.0, 1.0, 0.0);
}

START_TEST(two_stable_parts_are_a_warning)
{
    sct_model *m = ts_new(2, 1e-3);
    add_triangle(m, 0.0);
    add_triangle(m, 10.0);
    support_triangle(m, 0);
    support_triangle(m, 3);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_OK);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert_int_eq(sct_issues_get(f.issues, 0)->severity, SCT_WARNING);
    ck_assert_str_eq(message(&f, 0),
                     "the structure falls into 2 parts without connection to each other: those with joints "
                     "\"J0\", \"J3\"");
    drop(&f);
}
END_TEST

START_TEST(each_part_without_support_is_named)
{
    sct_model *m = ts_new(2, 1e-3);
    for (int i = 0; i < 3; i++) add_triangle(m, 10.0 * i);
    support_triangle(m, 3);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 2);
    ck_assert_str_eq(message(&f, 0),
                     "the part with joint \"J0\" has no support and no connection to the rest; connect it "
                     "or support it");
    ck_assert(says(&f, "the part with joint \"J6\" has no support"));
    drop(&f);
}
END_TEST

START_TEST(a_part_on_two_rollers_is_named)
{
    sct_model *m = ts_new(2, 1e-3);
    add_triangle(m, 0.0);
    add_triangle(m, 10.0);
    support_triangle(m, 0);
    mb_hold(m, 3, 0.0, 1.0, 0.0);
    mb_hold(m, 4, 0.0, 1.0, 0.0);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert(
        says(&f, "the part with joint \"J3\" can shift in x: its supports hold 2 directions, at least 3 are needed"));
    ck_assert_int_eq(sct_issues_errors(f.issues), 1);
    drop(&f);
}
END_TEST

START_TEST(all_kinds_at_once_are_told)
{
    sct_model *m = ts_cantilever(8, 1.0, 1.0, 4);
    const int n = m->n_joints;
    mb_bar(m, 0, mb_joint(m, -1.0, 0.5, 0.0), 0);
    add_triangle(m, 20.0);
    add_triangle(m, 30.0);
    mb_pin(m, n + 5);
    finding f = find(m);
    ck_assert_int_eq(sct_issues_errors(f.issues), 4);
    ck_assert(says(&f, "joint \"J18\" can move in (0.45, 0.89): only member \"M32\" ends there"));
    ck_assert(says(&f, "the part with joint \"J19\" has no support"));
    ck_assert(says(&f, "the part with joint \"J22\" can turn about (32, 0) m"));
    ck_assert(
        says(&f, "joints \"J10\", \"J11\", \"J12\", \"J13\", \"J14\", \"J15\", \"J16\" and \"J17\" can move together"));
    drop(&f);
}
END_TEST

START_TEST(long_and_odd_names_are_cut_and_escaped)
{
    sct_model *m = ts_beam(4, 2.0, 2.0, -1);
    mb_bar(m, 9, mb_joint(m, 9.0, 3.0, 0.0), 0);
    m->joints[10].name = "a\nb";
    ck_only(m, 10,
            "joint \"a\\x0ab\" can move in (0.71, -0.71): only member \"M17\" ends there; add a member or a support");
}
END_TEST

/* ---- no false alarms
 * -------------------------------------------------------------------------------------------------- */

START_TEST(six_hundred_random_stable_trusses_raise_no_alarm)
{
    for (uint64_t seed = 1; seed <= 600; seed++) {
        const int dimensions = 2 + (int)(seed % 2);
        ck_stable(ts_random(dimensions, 6 + (int)(seed % 61), (int)(seed % 9), 1000 + seed));
    }
}
END_TEST

START_TEST(slender_trusses_raise_no_alarm)
{
    const int panels[] = {50, 200, 400, 1250};
    for (int i = 0; i < 4; i++) {
        ck_stable(ts_cantilever(panels[i], 1.0, 1.0, -1));
        ck_stable(ts_beam(panels[i], 1.0, 1.0, -1));
        if (i < 2) ck_stable(ts_cantilever(panels[i], 4.0, 1.0, -1));
    }
    sct_model *m = ts_new(3, 1e-3); /* a mast of 100 storeys on three legs */
    for (int i = 0; i <= 100; i++) {
        for (int k = 0; k < 3; k++) {
            const int j = mb_joint(m, cos(2.1 * k), sin(2.1 * k), 1.0 * i);
            if (i == 0) {
                mb_pin(m, j);
                continue;
            }
            mb_bar(m, j - 3, j, 0);
            mb_bar(m, j - 3, 3 * i + (k + 1) % 3, 0);
            if (k > 0) mb_bar(m, j - 1, j, 0);
            if (k == 2) mb_bar(m, j - 2, j, 0);
        }
    }
    ck_stable(m);
}
END_TEST

START_TEST(a_weak_panel_is_found_in_a_slender_truss_too)
{
    finding f = find(ts_cantilever(1250, 1.0, 1.0, 700));
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert(says(&f, "joints \"J1402\", \"J1403\", "));
    ck_assert(says(&f, " and 1090 more can move together in y")); /* 2 (1250 - 700) = 1100 joints */
    drop(&f);
}
END_TEST

START_TEST(soft_bars_are_no_mechanism)
{
    for (int power = -9; power <= 9; power++) {
        for (int e = 1; e < 41; e += 2) {
            sct_model *m = ts_cantilever(10, 1.0, 1.0, -1);
            mb_group(m, 0, 1e-3 * pow(10.0, power), false);
            m->members[e].group = 1;
            ck_stable(m);
        }
    }
}
END_TEST

START_TEST(a_bar_of_1e_17_of_the_rest_is_too_soft_to_tell)
{
    sct_model *m = ts_cantilever(10, 1.0, 1.0, -1);
    mb_group(m, 0, 1e-20, false);
    m->members[19].group = 1; /* the diagonal of panel 4 */
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_NOT_ACCURATE);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert(says(&f, "can move together in y almost without resistance"));
    ck_assert(says(&f, "member \"M0\" is 1.4e+17 times as stiff (E A / L) as member \"M19\"; make them more alike"));
    drop(&f);
}
END_TEST

/* Along the axes such a joint makes no ill-conditioned matrix: the numbers are good, the structure is not. */
START_TEST(what_only_a_hardly_stiff_bar_holds_is_warned_about)
{
    sct_model *m = ts_beam(4, 2.0, 2.0, -1);
    const int j = mb_joint(m, 10.0, 2.0, 0.0), foot = mb_joint(m, 10.0, 0.0, 0.0);
    const int soft = mb_group(m, 0, 1e-17, false);
    mb_pin(m, foot);
    mb_bar(m, foot, j, 0);
    const int across = mb_bar(m, 9, j, soft);
    finding f = find(m);
    char words[200];
    snprintf(words, sizeof words,
             "joint \"J10\" can move in x almost without resistance: what resists is as soft as member \"M%d\", with "
             "1e-14 of the stiffness (E A / L) of most members; make them more alike",
             across);
    ck_assert_int_eq(f.status, SCT_OK);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert_int_eq(sct_issues_get(f.issues, 0)->severity, SCT_WARNING);
    ck_assert_int_eq(sct_issues_get(f.issues, 0)->line, 1010);
    ck_assert_str_eq(message(&f, 0), words);
    drop(&f);
}
END_TEST

START_TEST(a_bar_whose_stiffness_vanishes_is_a_mechanism)
{
    sct_model *m = ts_beam(4, 2.0, 2.0, -1);
    const int j = mb_joint(m, 9.0, 3.0, 0.0);
    mb_group(m, 0, 1e-323, false); /* E A / L b b underflows or is at its smallest */
    mb_group(m, 0, 1e-323, false);
    m->materials[0].E = 1e-10;
    mb_bar(m, 9, j, 1);
    mb_bar(m, 7, j, 2);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert(says(&f, "joint \"J10\" can move in x: nothing holds it there; add a member or a support"));
    drop(&f);
}
END_TEST

/* An angle of 1e-7: either answered, with what is lost stated, or refused. Forces: P / (2 sin angle). */
START_TEST(a_joint_on_two_bars_almost_in_line_is_answered_or_refused)
{
    const double rise = 1e-7;
    sct_model *m = ts_new(2, 1e-3);
    mb_joint(m, 0.0, 0.0, 0.0);
    mb_joint(m, 1.0, rise, 0.0);
    mb_joint(m, 2.0, 0.0, 0.0);
    mb_pin(m, 0);
    mb_pin(m, 2);
    mb_bar(m, 0, 1, 0);
    mb_bar(m, 1, 2, 0);
    mb_load(m, mb_case(m, 0.0), 1, 0.0, -1e-3, 0.0);
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_OK);
    sct_status status;
    sct_solver *solver = sct_solver_new(f.st, SCT_ENGINE_AUTO, &status);
    sct_response response;
    sct_accuracy accuracy;
    sct_response_new(f.st, &response);
    ck_assert_int_eq(sct_solver_analyse(solver, (double[]){1e-3}, &response), SCT_OK);
    ck_assert_int_eq(sct_accuracy_refine(solver, &response, &accuracy, f.issues), SCT_OK);
    ck_close(response.N[0], -1e-3 / (2.0 * rise), 1e-9);
    ck_assert_double_le(accuracy.error, SCT_ERROR_WARN);
    sct_response_free(&response);
    sct_solver_free(solver);
    drop(&f);
}
END_TEST

/* Turning about itself moves nothing: five motions of a straight part are all. */
START_TEST(a_straight_part_in_space_is_held_by_five_directions)
{
    for (int bars = 1; bars <= 2; bars++) {
        sct_model *m = ts_new(3, 1e-3);
        for (int j = 0; j <= bars; j++) {
            mb_joint(m, 2.0 * j, 3.0 * j, 6.0 * j);
            if (j > 0) mb_bar(m, j - 1, j, 0);
            mb_hold(m, j, 3.0, -2.0, 0.0); /* at right angles to the line */
            mb_hold(m, j, 0.0, 2.0, -1.0);
        }
        mb_hold(m, 0, 2.0, 3.0, 6.0);
        mb_load(m, mb_case(m, 0.0), bars, 20.0, 30.0, 60.0);
        ck_stable(m);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mechanism");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 120);
    tcase_add_test(tests, a_panel_without_diagonal_moves_exactly_the_joints_behind_it);
    tcase_add_test(tests, every_diagonal_taken_out_of_standard_trusses_is_found);
    tcase_add_test(tests, every_member_of_a_determinate_beam_is_missed);
    tcase_add_test(tests, a_known_removed_bar_of_random_trusses_is_found);
    tcase_add_test(tests, six_mechanisms_at_once_are_told_apart);
    tcase_add_test(tests, eight_mechanisms_give_six_messages);
    tcase_add_test(tests, a_joint_on_one_bar_is_loose_across_it);
    tcase_add_test(tests, a_joint_on_two_bars_in_one_line_is_loose_across_it);
    tcase_add_test(tests, a_joint_on_a_roller_may_be_loose_along_it);
    tcase_add_test(tests, a_tripod_with_a_missing_leg_is_loose);
    tcase_add_test(tests, a_flat_truss_in_space_is_loose_sideways);
    tcase_add_test(tests, a_mechanism_that_rounding_hides_is_found);
    tcase_add_test(tests, a_structure_without_support_is_told_so);
    tcase_add_test(tests, two_rollers_let_a_truss_shift);
    tcase_add_test(tests, three_parallel_rollers_let_a_truss_shift);
    tcase_add_test(tests, three_rollers_through_one_point_let_a_truss_turn);
    tcase_add_test(tests, one_roller_leaves_two_motions);
    tcase_add_test(tests, bad_supports_do_not_hide_a_weak_panel);
    tcase_add_test(tests, supports_in_space_are_judged_by_their_rank);
    tcase_add_test(tests, a_straight_strut_in_space_needs_five_directions);
    tcase_add_test(tests, two_stable_parts_are_a_warning);
    tcase_add_test(tests, each_part_without_support_is_named);
    tcase_add_test(tests, a_part_on_two_rollers_is_named);
    tcase_add_test(tests, all_kinds_at_once_are_told);
    tcase_add_test(tests, long_and_odd_names_are_cut_and_escaped);
    tcase_add_test(tests, six_hundred_random_stable_trusses_raise_no_alarm);
    tcase_add_test(tests, slender_trusses_raise_no_alarm);
    tcase_add_test(tests, a_weak_panel_is_found_in_a_slender_truss_too);
    tcase_add_test(tests, soft_bars_are_no_mechanism);
    tcase_add_test(tests, a_bar_of_1e_17_of_the_rest_is_too_soft_to_tell);
    tcase_add_test(tests, what_only_a_hardly_stiff_bar_holds_is_warned_about);
    tcase_add_test(tests, a_bar_whose_stiffness_vanishes_is_a_mechanism);
    tcase_add_test(tests, a_joint_on_two_bars_almost_in_line_is_answered_or_refused);
    tcase_add_test(tests, a_straight_part_in_space_is_held_by_five_directions);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

/* Bars that carry tension only: closed forms, solves with the slack bars left out by hand, what no set fits. */
#include "slack_solved.h"

#include "analysis/stability.h"

static void sway(sct_model *m, int joint, double P)
{
    const int k = mb_case(m, 0.0);
    mb_load(m, k, joint, P, 0, 0);
}

/* Statics of the panel without one diagonal: the other carries P / cos. */
START_TEST(one_diagonal_carries_the_sway_force_and_the_other_is_slack)
{
    const double w = 4, h = 3, P = 1e4, L = 5;
    sct_model *m = tower(1, w, h, false);
    sway(m, 2, P);
    sway(m, 2, -P);
    slackened x = slacken(m);
    ck_assert_int_eq(x.status, SCT_OK);
    for (int k = 0; k < 2; k++) {
        const int taut = k == 0 ? UP : DOWN, loose = k == 0 ? DOWN : UP;
        ck_close(combined(&x, k, taut), P * L / w, 1e-12);
        ck_assert(fabs(combined(&x, k, loose)) < 1e-9 * P);
        ck_close(combined(&x, k, k == 0 ? RIGHT : LEFT), -P * h / w, 1e-12);
        ck_assert(is_slack(&x, k, loose) && !is_slack(&x, k, taut));
        ck_assert(lacks(&x, k, loose) > 0.0 && lacks(&x, k, taut) == 0.0);
    }
    ck_close(combined(&x, 0, ACROSS), -P, 1e-12);
    slackened_free(&x);
}
END_TEST

/* Columns shorten under weight and compress both diagonals; statics does not need more than one of them. */
START_TEST(weight_does_not_hide_which_diagonal_holds_a_small_sway)
{
    for (int storeys = 1; storeys <= 4; storeys++) {
        sct_model *m = tower(storeys, 4, 3, false);
        for (int k = 0; k < 3; k++) {
            sway(m, 2 * storeys, 10.0 * (k - 1));
            for (int j = 2; j < m->n_joints; j++) mb_load(m, k, j, 0, -2e5, 0);
        }
        slackened x = slacken(m);
        ck_assert_int_eq(x.status, SCT_OK);
        for (int k = 0; k < 3; k++) {
            for (int i = 0; i < storeys; i++) {
                const double up = combined(&x, k, i * PER_STOREY + UP), down = combined(&x, k, i * PER_STOREY + DOWN);
                ck_assert_double_eq_tol(up, k == 2 ? 10.0 * 5 / 4 : 0.0, 1e-4);
                ck_assert_double_eq_tol(down, k == 0 ? 10.0 * 5 / 4 : 0.0, 1e-4);
                ck_assert(is_slack(&x, k, i * PER_STOREY + UP) || is_slack(&x, k, i * PER_STOREY + DOWN));
            }
        }
        slackened_free(&x);
    }
}
END_TEST

/* Both diagonals too short by 2 mm: they pull against the frame and neither goes slack before the sway takes the pull
 * away. Until then forces add up as if bars took compression. */
START_TEST(prestress_keeps_both_diagonals_acting)
{
    for (int is_large = 0; is_large < 2; is_large++) {
        sct_model *m = tower(1, 4, 3, false);
        sway(m, 2, is_large ? 2e5 : 1e4);
        mb_act(m, 0, UP, 0.0, -2e-3);
        mb_act(m, 0, DOWN, 0.0, -2e-3);
        slackened x = slacken(m);
        ck_assert_int_eq(x.status, SCT_OK);
        ck_assert_int_eq(is_slack(&x, 0, DOWN), is_large);
        ck_assert(!is_slack(&x, 0, UP));
        if (!is_large) {
            ck_assert_double_eq(combined(&x, 0, DOWN), alone(&x, 0, DOWN));
            ck_assert(alone(&x, 0, DOWN) > 0.0);
        } else {
            ck_close(combined(&x, 0, UP), 2e5 * 5 / 4, 1e-12);
        }
        slackened_free(&x);
    }
}
END_TEST

/* The model without the bars that are slack in a combination: their weight stays, as loads; what acts on the others
 * goes with them. */
static sct_model *without(const slackened *x, int combination, sct_model *m)
{
    int at[64] = {0}, n = 0;
    ck_assert_int_eq(m->n_members, x->s.st->n_bars);
    for (int e = 0; e < x->s.st->n_bars; e++) {
        const sct_bar *bar = &x->s.st->bars[e];
        at[e] = is_slack(x, combination, e) ? -1 : n;
        for (int k = 0; k < m->n_cases && at[e] < 0; k++) {
            const double half = m->cases[k].self_weight * bar->half_weight * x->s.A[bar->group];
            mb_load(m, k, bar->from, 0, -half, 0);
            mb_load(m, k, bar->to, 0, -half, 0);
        }
        if (at[e] < 0) continue;
        m->members[n] = m->members[e];
        m->members[n++].tension_only = false;
    }
    m->n_members = n;
    for (int k = 0; k < m->n_cases; k++) {
        for (int i = 0; i < m->cases[k].n_bar_actions; i++) {
            sct_bar_action *action = &m->cases[k].bar_actions[i];
            const int where = at[action->member]; /* member 0, a column, stays */
            *action = where < 0 ? (sct_bar_action){.member = 0} : *action;
            action->member = where < 0 ? 0 : where;
        }
    }
    return m;
}

/* Forces and displacements of combination c, which is case c alone, are those of the structure without its slack bars.
 */
static void compare_with_left_out(const slackened *x, int c, sct_model *again)
{
    solved left = solve(without(x, c, again));
    double N_most = 0.0, u_most = 0.0;
    for (int e = 0; e < left.st->n_bars; e++) N_most = fmax(N_most, fabs(left.r.N[c * left.st->n_springs + e]));
    for (int i = 0; i < left.st->n_dof; i++) u_most = fmax(u_most, fabs(left.r.u[c * left.st->n_dof + i]));
    for (int e = 0, n = 0; e < x->s.st->n_bars; e++) {
        const double N = is_slack(x, c, e) ? 0.0 : left.r.N[c * left.st->n_springs + n++];
        ck_assert_double_eq_tol(combined(x, c, e), N, 1e-9 * N_most);
    }
    for (int j = 0; j < x->s.st->n_joints; j++) {
        double d[3];
        sct_joint_moved(x->s.st, &x->s.r, c, j, d);
        for (int i = 0; i < 2; i++) ck_assert_double_eq_tol(d[i], moved(&left, c, j, i), 1e-9 * u_most);
    }
    solved_free(&left);
}

static void load_tower(sct_model *m, int k, double wind, double weight)
{
    mb_case(m, 0.0);
    for (int j = 2; j < m->n_joints; j++) mb_load(m, k, j, j % 2 == 0 ? wind * (j / 2) : 0.0, -weight, 0);
}

static sct_model *windy_tower(void)
{
    sct_model *m = tower(3, 4, 3.2, true);
    load_tower(m, 0, 6e3, 0);
    load_tower(m, 1, -6e3, 0);
    load_tower(m, 2, 6e3, 8e4);
    load_tower(m, 3, -1e2, 1e5);
    return m;
}

START_TEST(a_braced_tower_is_the_one_with_its_slack_diagonals_left_out)
{
    slackened x = slacken(windy_tower());
    ck_assert_int_eq(x.status, SCT_OK);
    for (int i = 0; i < 3; i++) {
        ck_assert(is_slack(&x, 0, i * PER_STOREY + DOWN) && !is_slack(&x, 0, i * PER_STOREY + UP));
        ck_assert(is_slack(&x, 1, i * PER_STOREY + UP) && !is_slack(&x, 1, i * PER_STOREY + DOWN));
    }
    for (int c = 0; c < 4; c++) compare_with_left_out(&x, c, windy_tower());
    slackened_free(&x);
}
END_TEST

/* Storeys of different sizes, ties of different areas, loads, temperature and lack of fit of any sign. */
static sct_model *random_tower(unsigned seed)
{
    sct_random r = {seed};
    const int storeys = 1 + below(&r, 5);
    sct_model *m = tower(storeys, between(&r, 2, 6), between(&r, 2, 5), true);
    for (int g = 0; g < 3; g++) mb_group(m, 0, pow(10, between(&r, -4.5, -2.5)), false);
    for (int j = 2; j < m->n_joints; j++)
        for (int i = 0; i < 2; i++) m->joints[j].at[i] += between(&r, -0.3, 0.3);
    for (int e = 0; e < m->n_members; e++)
        if (m->members[e].tension_only) m->members[e].group = 2 + below(&r, 3);
    for (int i = below(&r, 4); i > 0; i--) {
        const int a = below(&r, m->n_joints), b = below(&r, m->n_joints);
        if (a / 2 != b / 2 && abs(a / 2 - b / 2) > 1) tie(m, a, b, 2 + below(&r, 3)); /* through storeys */
    }
    for (int k = 0; k < 3; k++) {
        mb_case(m, k == 0);
        for (int j = 2; j < m->n_joints; j++) mb_load(m, k, j, between(&r, -1e4, 1e4), between(&r, -1e5, 2e4), 0);
        for (int i = 0; i < 2 && k == 2; i++)
            mb_act(m, k, below(&r, m->n_members), between(&r, -30, 30), between(&r, -2e-3, 2e-3));
    }
    return m;
}

START_TEST(random_towers_are_complementary_and_solved_without_their_slack_bars)
{
    int n_slack = 0, n_taut = 0;
    for (unsigned seed = 1; seed <= 300; seed++) {
        slackened x = slacken(random_tower(seed));
        ck_assert_int_eq(x.status, SCT_OK);
        for (int c = 0; c < 3; c++) {
            double most = 0.0;
            for (int e = 0; e < x.s.st->n_bars; e++) most = fmax(most, fabs(alone(&x, c, e)));
            for (int i = 0; i < x.s.st->n_ties; i++) {
                const int e = x.s.st->ties[i];
                const double N = combined(&x, c, e), d = lacks(&x, c, e);
                ck_assert(N >= -2e-9 * most && d >= 0.0);
                ck_assert(is_slack(&x, c, e) ? fabs(N) <= 2e-9 * most : d == 0.0);
                if (is_slack(&x, c, e))
                    n_slack++;
                else
                    n_taut++;
            }
            compare_with_left_out(&x, c, random_tower(seed));
        }
        slackened_free(&x);
    }
    ck_assert(n_slack > 1000 && n_taut > 1000);
}
END_TEST

/* The lowest critical load factor of combination c. */
static double buckles_at(const solved *s, sct_slack *slack, int c)
{
    sct_status status;
    sct_modes modes;
    sct_fine *fine = sct_fine_new(s->st, SCT_PIECES, SCT_ENGINE_AUTO, &status);
    sct_stability *stability = sct_stability_new(fine, 2, &status);
    sct_stability_set_slack(stability, slack);
    ck_assert_int_eq(sct_fine_update(fine, sct_solver_sizes(s->solver)), SCT_OK);
    for (int other = s->st->n_combinations - 1; other >= c; other--) /* what was left out before comes back */
        ck_assert_int_eq(sct_stability_find(stability, &s->r, other, SCT_MODES_COLD, &modes), SCT_OK);
    const double factor = sct_critical_factor(&modes);
    sct_stability_free(stability);
    sct_fine_free(fine);
    return factor;
}

START_TEST(a_braced_tower_buckles_as_the_one_without_its_slack_diagonals)
{
    slackened x = slacken(windy_tower());
    for (int c = 0; c < 4; c++) {
        solved left = solve(without(&x, c, windy_tower()));
        ck_close(buckles_at(&x.s, x.slack, c), buckles_at(&left, NULL, c), 1e-7);
        solved_free(&left);
    }
    slackened_free(&x);
}
END_TEST

/* Both ties of the upper storey go the same way: the wrong one for this load. */
START_TEST(a_load_that_only_slack_bars_would_hold_is_refused_by_name)
{
    sct_model *m = tower(2, 4, 3, false);
    m->members[PER_STOREY + DOWN] = m->members[PER_STOREY + UP];
    m->members[PER_STOREY + DOWN].name = "twin";
    sway(m, 4, -1e4);
    sway(m, 4, 1e4);
    slackened x = slacken(m);
    ck_assert_int_eq(x.status, SCT_MECHANISM);
    ck_assert(sct_slack_failed(x.slack));
    sct_slack_tell(x.slack, x.s.issues);
    const char *said = sct_issues_get(x.s.issues, sct_issues_count(x.s.issues) - 1)->message;
    ck_assert_msg(strstr(said, "\"K0\" is not carried") != NULL && strstr(said, "\"M8\"") != NULL &&
                      strstr(said, "\"twin\"") != NULL && strstr(said, "\"M3\"") == NULL,
                  "%s", said);
    slackened_free(&x);
}
END_TEST

START_TEST(a_load_between_the_ends_of_a_tie_is_refused)
{
    sct_model *m = tower(1, 4, 3, true);
    sct_structure *st;
    sct_issues *issues = sct_issues_new();
    mb_case(m, 0.0);
    mb_uniform(m, 0, UP, -10, 5);
    mb_each_case(m);
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_BAD_INPUT);
    ck_assert_ptr_nonnull(strstr(sct_issues_get(issues, 0)->message, "\"M3\" carries tension only"));
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("slack");
    TCase *c = tcase_create("slack");
    tcase_set_timeout(c, 120);
    tcase_add_test(c, one_diagonal_carries_the_sway_force_and_the_other_is_slack);
    tcase_add_test(c, weight_does_not_hide_which_diagonal_holds_a_small_sway);
    tcase_add_test(c, prestress_keeps_both_diagonals_acting);
    tcase_add_test(c, a_braced_tower_is_the_one_with_its_slack_diagonals_left_out);
    tcase_add_test(c, random_towers_are_complementary_and_solved_without_their_slack_bars);
    tcase_add_test(c, a_braced_tower_buckles_as_the_one_without_its_slack_diagonals);
    tcase_add_test(c, a_load_that_only_slack_bars_would_hold_is_refused_by_name);
    tcase_add_test(c, a_load_between_the_ends_of_a_tie_is_refused);
    suite_add_tcase(s, c);
    return run_suite(s);
}

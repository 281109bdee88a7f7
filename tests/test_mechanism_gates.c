/* Many random structures: a bar taken out or a support freed is told by the right joints each time, stable ones raise
 * no alarm, and a bar that hardly holds is never passed over in silence. */
#include "told_motion.h"
#include "truss_shapes.h"

/* ---- one bar or support less ----------------------------------------------------------------------------------------
 */

START_TEST(a_bar_taken_out_of_determinate_trusses_is_told_by_its_joints)
{
    tally t = {0};
    for (int seed = 1; seed <= count(100, 600); seed++) {
        sct_model *m = ts_random(2 + seed % 2, 6 + seed % 37, 0, 50000u + (uint64_t)seed);
        sct_random r = {(uint64_t)seed};
        remove_member(m, ts_pick(&r, m->n_members));
        ck_as_null_space(m, 1, &t);
    }
    tell("a bar taken out", &t);
}
END_TEST

/* Leaves a pinned joint one direction less: the others may point anywhere. */
static void free_one_direction(sct_model *m, int joint, sct_random *r)
{
    m->joints[joint].n_held = 0;
    for (int i = 0; i < m->dimensions - 1; i++) {
        mb_hold(m, joint, ts_between(r, -1.0, 1.0), ts_between(r, -1.0, 1.0) + 0.01,
                m->dimensions == 3 ? ts_between(r, -1.0, 1.0) : 0.0);
    }
}

START_TEST(a_support_freed_under_determinate_trusses_is_told_by_its_joints)
{
    tally t = {0};
    for (int seed = 1; seed <= count(100, 600); seed++) {
        sct_model *m = ts_random(2 + seed % 2, 6 + seed % 37, 0, 60000u + (uint64_t)seed);
        sct_random r = {(uint64_t)seed};
        int joint = ts_pick(&r, m->dimensions);
        for (int e = 0, used = 0; e < m->n_members; e++) { /* one that bears something */
            used += m->members[e].to == joint;
            if (e == m->n_members - 1 && used == 0) joint = m->members[0].to;
        }
        free_one_direction(m, joint, &r);
        ck_as_null_space(m, 1, &t);
    }
    tell("a support freed", &t);
}
END_TEST

/* A rigid body of bars, grown from a bar (a triangle in space), on three (six) supports of random directions. */
static sct_model *random_body(int dimensions, int n_joints, sct_random *r)
{
    sct_model *m = ts_new(dimensions, 1e-3);
    for (int j = 0; j < n_joints; j++) {
        int to[3] = {0, 1, 2};
        double d[3][3] = {{0}};
        const int ties = j < dimensions ? j : dimensions;
        for (bool found = false; !found;) {
            const double at[3] = {ts_between(r, 0.0, 8.0), ts_between(r, 0.0, 8.0),
                                  dimensions == 3 ? ts_between(r, 0.0, 8.0) : 0.0};
            found = true;
            for (int k = 0; k < ties; k++) {
                if (j > dimensions) to[k] = ts_pick(r, j);
                double L = 0.0;
                for (int i = 0; i < 3; i++) {
                    d[k][i] = at[i] - m->joints[to[k]].at[i];
                    L = hypot(L, d[k][i]);
                }
                for (int i = 0; i < 3; i++) d[k][i] /= L;
                found = found && L > 0.5;
            }
            if (ties == dimensions) found = found && ts_spread(dimensions, (const double(*)[3])d) > 0.2;
            if (dimensions == 3 && ties == 2) found = found && apart(d[0], d[1]) > 0.3;
            if (found) mb_joint(m, at[0], at[1], at[2]);
        }
        for (int k = 0; k < ties; k++) mb_bar(m, to[k], j, 0);
    }
    return m;
}

static void hold_at_random(sct_model *m, int n, sct_random *r)
{
    while (n > 0) {
        const int j = ts_pick(r, m->n_joints);
        if (m->joints[j].n_held > 0) continue;
        mb_hold(m, j, ts_between(r, -1.0, 1.0), ts_between(r, -1.0, 1.0),
                m->dimensions == 3 ? ts_between(r, -1.0, 1.0) : 0.0);
        n--;
    }
}

START_TEST(a_support_less_than_a_body_needs_is_told_as_its_motion)
{
    tally t = {0};
    for (int seed = 1; seed <= count(100, 600); seed++) {
        const int dimensions = 2 + seed % 2, needed = dimensions == 2 ? 3 : 6;
        sct_random r = {70000u + (uint64_t)seed};
        sct_model *m = random_body(dimensions, needed + seed % 17, &r);
        hold_at_random(m, needed - 1, &r);
        ck_as_null_space(m, 1, &t);
    }
    ck_assert_int_eq(t.as_part, t.structures);
    tell("a body with a support too few", &t);
}
END_TEST

START_TEST(bars_and_supports_taken_out_at_will_are_judged_as_the_null_space_says)
{
    tally t = {0};
    for (int seed = 1; seed <= count(150, 1500); seed++) {
        sct_model *m = ts_random(2 + seed % 2, 6 + seed % 23, seed % 7, 80000u + (uint64_t)seed);
        sct_random r = {(uint64_t)seed};
        m->cases[0].n_loads = 0; /* a load at a joint that lost its last member is another error */
        for (int k = seed % 3; k >= 0; k--) remove_member(m, ts_pick(&r, m->n_members));
        if (seed % 5 == 0) free_one_direction(m, ts_pick(&r, m->dimensions), &r);
        ck_as_null_space(m, -1, &t);
    }
    ck_assert_int_ge(t.stable, t.structures / 20);
    tell("bars and supports taken out at will", &t);
}
END_TEST

/* ---- no false alarm
 * -------------------------------------------------------------------------------------------------- */

START_TEST(stable_trusses_raise_no_alarm)
{
    int n = 0;
    for (int seed = 1; seed <= count(400, 4000); seed++, n++) {
        ck_stable(ts_random(2 + seed % 2, 5 + seed % 80, seed % 11, 90000u + (uint64_t)seed));
    }
    for (int seed = 1; seed <= count(100, 1000); seed++, n++) {
        const int dimensions = 2 + seed % 2, needed = dimensions == 2 ? 3 : 6;
        sct_random r = {100000u + (uint64_t)seed};
        sct_model *m = random_body(dimensions, needed + seed % 30, &r);
        double *v;
        int nullity;
        hold_at_random(m, needed, &r);
        finding f = find(m);
        v = calloc((size_t)f.st->n_dof, sizeof *v);
        nullity = null_motion(f.st, v);
        ck_assert_msg(f.status == SCT_OK && nullity == 0, "seed %d: %d motions: %s", seed, nullity, message(&f, 0));
        free(v);
        drop(&f);
    }
    printf("measured: no false alarm on %d stable structures\n", n);
    fflush(stdout);
}
END_TEST

/* ---- almost a mechanism
 * ---------------------------------------------------------------------------------------------- */

/* A determinate truss in which one bar has `part` of the smallest area of the others; with that bar and without. */
static sct_model *with_soft_bar(int seed, double part, sct_model **without)
{
    sct_model *m[2];
    for (int k = 0; k < 2; k++) {
        m[k] = ts_random(2 + seed % 2, 6 + seed % 29, 0, 110000u + (uint64_t)seed);
        sct_random r = {(uint64_t)seed};
        const int e = ts_pick(&r, m[k]->n_members);
        double least = INFINITY;
        for (int g = 0; g < m[k]->n_groups; g++) least = fmin(least, m[k]->groups[g].A_held);
        const int soft = mb_group(m[k], 0, part * least, false);
        for (int g = 0; g < m[k]->n_groups; g++) {
            m[k]->groups[g].allowable[0] = m[k]->groups[g].allowable[1] = 200e6;
        }
        if (k == 0)
            m[k]->members[e].group = soft;
        else
            remove_member(m[k], e);
        mb_combination(m[k], 1, (double[]){1.0});
    }
    *without = m[1];
    return m[0];
}

/* Does some message name the joints that move when the bar is gone? */
static bool names_the_joints(const sct_issues *issues, sct_model *without)
{
    finding f = find(without);
    double *v = calloc((size_t)f.st->n_dof, sizeof *v);
    bool named = false;
    ck_assert_int_eq(null_motion(f.st, v), 1);
    for (int i = 0; i < sct_issues_count(issues) && !named; i++) {
        const char *text = sct_issues_get(issues, i)->message;
        if (strncmp(text, "joint", 5) != 0 || strstr(text, " can move") == NULL) continue;
        ck_joints(f.st, v, text);
        named = true;
    }
    free(v);
    drop(&f);
    return named;
}

START_TEST(a_bar_of_1e_14_of_the_rest_is_never_passed_over_in_silence)
{
    static const double PARTS[] = {1e-14, 1e-15, 1e-16, 1e-18, 1e-25};
    const int n = count(60, 500);
    int refused = 0, warned = 0, named = 0;
    for (int p = 0; p < 5; p++) {
        for (int seed = 1; seed <= n; seed++) {
            sct_model *without, *m = with_soft_bar(seed, PARTS[p], &without);
            sct_issues *issues = sct_issues_new();
            sct_result *result = NULL;
            const sct_status status = sct_check(m, NULL, &result, issues);
            ck_assert_msg(status == SCT_OK || status == SCT_NOT_ACCURATE || status == SCT_MECHANISM, "seed %d", seed);
            ck_assert((status == SCT_OK) == (result != NULL));
            ck_assert_msg(status != SCT_OK || sct_issues_count(issues) > 0, "seed %d, %g: silent", seed, PARTS[p]);
            refused += status != SCT_OK;
            warned += status == SCT_OK;
            named += names_the_joints(issues, without);
            sct_result_free(result);
            sct_issues_free(issues);
            mb_free(m);
        }
    }
    printf("measured: a bar of 1e-14 to 1e-25 of the rest: %d structures, %d refused, %d answered with a warning, 0 "
           "silent; "
           "the right joints named in %d\n",
           5 * n, refused, warned, named);
    fflush(stdout);
    ck_assert_int_eq(named, 5 * n);
}
END_TEST

/* A soft bar beside one that holds is no news. */
START_TEST(a_soft_bar_that_is_redundant_raises_no_alarm)
{
    for (int seed = 1; seed <= count(50, 300); seed++) {
        sct_model *m = ts_random(2 + seed % 2, 6 + seed % 29, 0, 120000u + (uint64_t)seed);
        const int soft = mb_group(m, 0, 1e-18, false), a = m->n_joints - 1;
        int b = 0;
        for (int e = 0; e < m->n_members; e++) {
            if (m->members[e].to != b && m->members[e].from == a) b = m->members[e].to;
        }
        mb_bar(m, a, b, soft);
        ck_stable(m);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mechanism gates");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, a_bar_taken_out_of_determinate_trusses_is_told_by_its_joints);
    tcase_add_test(tests, a_support_freed_under_determinate_trusses_is_told_by_its_joints);
    tcase_add_test(tests, a_support_less_than_a_body_needs_is_told_as_its_motion);
    tcase_add_test(tests, bars_and_supports_taken_out_at_will_are_judged_as_the_null_space_says);
    tcase_add_test(tests, stable_trusses_raise_no_alarm);
    tcase_add_test(tests, a_bar_of_1e_14_of_the_rest_is_never_passed_over_in_silence);
    tcase_add_test(tests, a_soft_bar_that_is_redundant_raises_no_alarm);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

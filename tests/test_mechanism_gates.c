/* Many random structures: a bar taken out or a support freed is told by the right joints each time, stable ones raise
 * no alarm, and a bar that hardly holds is never passed over in silence. */
#include "null_motion.h"
#include "truss_shapes.h"

static int count(int few, int many)
{
    return getenv("SCT_TEST_FULL") != NULL ? many : few;
}

/* ---- what the words say -------------------------------------------------------------------------------------------
 */

/* Reads "x", "-y" or "(0.71, -0.71)"; returns whether there is a direction. */
static bool read_direction(const char *text, double d[3])
{
    memset(d, 0, 3 * sizeof *d);
    const double sign = *text == '-' ? -1.0 : 1.0;
    if (*text == '-') text++;
    if (*text >= 'x' && *text <= 'z') {
        d[*text - 'x'] = sign;
        return true;
    }
    return sscanf(text, "(%lf, %lf, %lf)", &d[0], &d[1], &d[2]) >= 2;
}

static double length(const double a[3])
{
    return hypot(hypot(a[0], a[1]), a[2]);
}

static void cross(const double a[3], const double b[3], double c[3])
{
    for (int i = 0; i < 3; i++) c[i] = a[(i + 1) % 3] * b[(i + 2) % 3] - a[(i + 2) % 3] * b[(i + 1) % 3];
}

/* Sine of the angle between two vectors. */
static double apart(const double a[3], const double b[3])
{
    double c[3];
    cross(a, b, c);
    return length(c) / (length(a) * length(b));
}

/* Two decimals are shown: each component within 0.005, two or three of them. */
static const double SHOWN_APART = 0.01;

/* Every direction in the message of joints is that of the joint in v. */
static int ck_directions(const sct_structure *st, const double v[], const char *text)
{
    const char *verb = strstr(text, " can move"), *all = verb + strlen(" can move");
    double common[3], d[3], u[3];
    if (strncmp(all, " together", 9) == 0) all += 9;
    const bool has_common = strncmp(all, " in ", 4) == 0 && read_direction(all + 4, common);
    int n = 0;
    for (int j = 0; j < st->n_joints; j++) {
        char name[40];
        snprintf(name, sizeof name, "\"%s\"", st->model->joints[j].name);
        const char *at = strstr(text, name);
        if (at == NULL || at > verb) continue;
        at += strlen(name);
        const bool own = strncmp(at, " in ", 4) == 0 && read_direction(at + 4, d);
        ck_assert_msg(own || has_common, "%s", text);
        sct_joint_displacement(st, v, NULL, j, u);
        ck_assert_msg(apart(u, own ? d : common) < SHOWN_APART, "%s: %s", name, text);
        n++;
    }
    return n;
}

/* "shift in D", "turn about P", "turn about an axis through P along D": v is that motion at every joint. */
static void ck_motion_of_part(const sct_structure *st, const double v[], const char *text)
{
    const char *shift = strstr(text, " can shift in "), *turn = strstr(text, " can turn about ");
    const char *at = strchr(text, '('), *along = strstr(text, " along ");
    double d[3], P[3] = {0}, size = 0.0;
    ck_assert_msg((shift == NULL) != (turn == NULL), "%s", text);
    if (shift != NULL) ck_assert(read_direction(shift + strlen(" can shift in "), d));
    if (turn != NULL) ck_assert_msg(sscanf(at, "(%lf, %lf, %lf)", &P[0], &P[1], &P[2]) == st->dim, "%s", text);
    if (turn != NULL && st->dim == 3) ck_assert(read_direction(along + strlen(" along "), d));
    if (turn != NULL && st->dim == 2) memcpy(d, (double[3]){0, 0, 1}, sizeof d);
    for (int j = 0; j < st->n_joints; j++) size = fmax(size, size_at(st, v, j));
    for (int j = 0; j < st->n_joints; j++) {
        double u[3], arm[3], around[3];
        sct_joint_displacement(st, v, NULL, j, u);
        if (length(u) < 0.05 * size) continue;
        for (int i = 0; i < 3; i++) arm[i] = st->model->joints[j].at[i] - P[i];
        cross(d, arm, around);
        if (shift != NULL) ck_assert_msg(apart(u, d) < SHOWN_APART, "%s", text);
        if (turn == NULL || strstr(text, "sliding") != NULL) continue;
        /* an axis of two decimals is off by up to 0.01 of the arm */
        const double off = SHOWN_APART * length(arm) / length(around);
        if (off < 0.3) ck_assert_msg(apart(u, around) < 2.0 * off, "%s", text);
    }
}

typedef struct tally {
    int structures, as_joints, as_part, stable, several;
} tally;

static void ck_place(const finding *f)
{
    const sct_issue *issue = sct_issues_get(f->issues, 0);
    const char *name = strchr(message(f, 0), '"');
    if (name != NULL && name < strstr(message(f, 0), " can ")) ck_assert_int_eq(issue->line, 1000 + atoi(name + 2));
}

/* What is said of a model is what its null space says: nothing where it is empty; one motion: its joints, directions or
 * the motion of the part; more: refused, and who is named moves. Takes the model over. */
static void ck_as_null_space(sct_model *m, int expected, tally *t)
{
    finding f = find(m);
    double *v = calloc((size_t)f.st->n_dof + 1, sizeof *v);
    const int nullity = null_motion(f.st, v);
    const char *text = message(&f, 0);
    if (expected >= 0) ck_assert_int_eq(nullity, expected);
    t->structures++;
    ck_assert_msg(f.status == (nullity > 0 ? SCT_MECHANISM : SCT_OK), "%d motions, but: %s", nullity, text);
    if (nullity == 0) {
        ck_assert_msg(sct_issues_count(f.issues) == 0, "%s", text);
        t->stable++;
    } else if (nullity > 1) {
        t->several++;
    } else if (strncmp(text, "joint", 5) == 0) {
        ck_assert_int_eq(sct_issues_count(f.issues), 1);
        ck_joints(f.st, v, text);
        ck_assert_int_ge(ck_directions(f.st, v, text), 1);
        ck_place(&f);
        t->as_joints++;
    } else {
        ck_assert_int_eq(sct_issues_count(f.issues), 1);
        ck_assert_msg(is_rigid(f.st, v), "%s", text);
        ck_motion_of_part(f.st, v, text);
        t->as_part++;
    }
    free(v);
    drop(&f);
}

static void tell(const char *what, const tally *t)
{
    printf("measured: %s: %d structures, each as its null space says (%d by joints, %d as a part, %d with several "
           "motions, "
           "%d stable)\n",
           what, t->structures, t->as_joints, t->as_part, t->several, t->stable);
    fflush(stdout);
}

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

/* Many random frames of beams and bars: what is released, taken out or freed is told by the right joints and directions
 * each time, stable ones raise no alarm, and what hardly holds is never passed over in silence. */
#include "random_frames.h"
#include "told_motion.h"
#include "truss_shapes.h"

/* ---- frames with just as many ends, bars and supports as they need --------------------------------------------------
 */

typedef struct grown {
    sct_model *m;
    bool holds_rotation[64]; /* by joint: a beam may grow out of it */
} grown;

static void grow_beam(grown *g, sct_random *r, int from, bool is_hinged)
{
    const int j = rf_joint(r, g->m);
    rf_member(r, g->m, from, j, 0.0, 0);
    if (is_hinged) mb_pin_end(g->m, g->m->n_members - 1, 1);
    g->holds_rotation[j] = !is_hinged;
}

static void fix_end(sct_model *m, int e, int end, int turn)
{
    m->members[e].end[end].fixity[turn] = SCT_FIXED;
}

/* A joint on bars that are well apart; false: where it stands there are none. */
static bool grow_tripod(grown *g, sct_random *r)
{
    sct_model *m = g->m;
    const int n = m->n_joints, j = rf_joint(r, m);
    for (int tries = 0; tries < 100; tries++) {
        double d[3][3] = {{0}};
        int to[3];
        for (int i = 0; i < m->dimensions; i++) {
            to[i] = ts_pick(r, n);
            const double L = rf_distance(m, to[i], j);
            for (int x = 0; x < 3; x++) d[i][x] = (m->joints[to[i]].at[x] - m->joints[j].at[x]) / L;
        }
        if (ts_spread(m->dimensions, (const double(*)[3])d) < 0.2) continue;
        for (int i = 0; i < m->dimensions; i++) mb_bar(m, to[i], j, ts_pick(r, m->n_groups));
        return true;
    }
    m->n_joints--;
    return false;
}

/* The bars become beams whose ends bend with the joints, which adds rotations and as many springs for them. */
static void bend_some(sct_model *m, int first, sct_random *r)
{
    for (int e = first; e < m->n_members; e++) {
        if (ts_pick(r, 2) == 0) continue;
        for (int end = 0; end < 2; end++) fix_end(m, e, end, ts_pick(r, 2));
    }
}

/* Joint 0 is fixed; all else hangs on it, and nothing is there twice. */
static grown determinate(int dimensions, int n, sct_random *r)
{
    grown g = {.m = mb_new(dimensions), .holds_rotation = {true}};
    mb_material(g.m, 210e9, 7850.0, 12e-6);
    g.m->materials[0].G = 81e9;
    for (int i = 0; i < 3; i++) {
        const double A = ts_between(r, 1e-3, 6e-3);
        mb_frame_group(g.m, A, ts_between(r, 0.5, 4.0) * A * A, ts_between(r, 0.1, 3.0) * A * A);
    }
    mb_joint(g.m, 0.0, 0.0, 0.0);
    mb_fix(g.m, 0);
    while (g.m->n_joints < n) {
        int from = ts_pick(r, g.m->n_joints);
        while (!g.holds_rotation[from]) from--;
        const int first = g.m->n_members;
        if (g.m->n_joints > dimensions && ts_pick(r, 3) == 0 && grow_tripod(&g, r))
            bend_some(g.m, first, r);
        else
            grow_beam(&g, r, from, ts_pick(r, 4) == 0);
    }
    return g;
}

/* Releases one rotation of an end that is not pinned. */
static void release(sct_model *m, sct_random *r)
{
    for (;;) {
        sct_member_end *end = &m->members[ts_pick(r, m->n_members)].end[ts_pick(r, 2)];
        const int turn = m->dimensions == 2 ? SCT_IN_PLANE : ts_pick(r, SCT_TURNS);
        if (end->fixity[turn] == SCT_PINNED) continue;
        end->fixity[turn] = SCT_PINNED;
        return;
    }
}

static void free_support(sct_model *m, sct_random *r)
{
    sct_joint *j = &m->joints[0];
    int *n = ts_pick(r, 2) == 0 ? &j->n_held : &j->n_turns_held;
    double(*held)[3] = n == &j->n_held ? j->held : j->turns_held;
    memcpy(held[ts_pick(r, *n)], held[*n - 1], sizeof held[0]);
    --*n;
}

START_TEST(stable_by_their_making)
{
    tally t = {0};
    for (int seed = 1; seed <= count(200, 2000); seed++) {
        sct_random r = {130000u + (uint64_t)seed};
        ck_as_null_space(determinate(2 + seed % 2, 3 + seed % 15, &r).m, 0, &t);
    }
    tell("frames without a hold too many", &t);
}
END_TEST

START_TEST(a_release_or_support_too_many_is_told_by_its_joints)
{
    tally t = {0};
    for (int seed = 1; seed <= count(1200, 4000); seed++) {
        sct_random r = {140000u + (uint64_t)seed};
        sct_model *m = determinate(2 + seed % 2, 3 + seed % 15, &r).m;
        if (seed % 4 == 0)
            free_support(m, &r);
        else if (seed % 4 == 1)
            remove_member(m, ts_pick(&r, m->n_members));
        else
            release(m, &r);
        ck_as_null_space(m, -1, &t);
    }
    tell("a release, a member or a support less", &t);
    ck_assert_int_ge(t.as_joints + t.as_part, 2 * t.structures / 5);
}
END_TEST

/* A strut between two joints on bars, fixed to both for twist alone. */
START_TEST(a_spinning_strut_is_told_by_its_joints_and_its_direction)
{
    tally t = {0};
    for (int seed = 1; seed <= count(100, 1000); seed++) {
        sct_random r = {150000u + (uint64_t)seed};
        grown g = determinate(3, 4 + seed % 10, &r);
        for (int k = 0; k < 2;) k += grow_tripod(&g, &r);
        const int strut = mb_bar(g.m, g.m->n_joints - 2, g.m->n_joints - 1, 0);
        for (int end = 0; end < 2; end++) fix_end(g.m, strut, end, SCT_TWIST);
        ck_as_null_space(g.m, 1, &t);
    }
    ck_assert_int_eq(t.as_joints, t.structures);
    tell("a spinning strut", &t);
}
END_TEST

START_TEST(releases_and_supports_taken_at_will_are_judged_as_the_null_space_says)
{
    tally t = {0};
    for (int seed = 1; seed <= count(150, 1500); seed++) {
        sct_random r = {160000u + (uint64_t)seed};
        sct_model *m = rf_frame(&r, 2 + seed % 2, 3 + seed % 9, seed % 5, 0);
        m->n_cases = 0; /* a load on what is released now is another error */
        for (int k = 1 + seed % 3; k > 0; k--) release(m, &r);
        if (seed % 3 == 0) remove_member(m, ts_pick(&r, m->n_members));
        if (seed % 5 == 0) free_support(m, &r);
        ck_as_null_space(m, -1, &t);
    }
    ck_assert_int_ge(t.stable, t.structures / 20);
    tell("releases, members and supports taken at will", &t);
}
END_TEST

/* ---- no false alarm
 * -------------------------------------------------------------------------------------------------- */

START_TEST(stable_frames_raise_no_alarm)
{
    int n = 0;
    for (int seed = 1; seed <= count(500, 5000); seed++, n++) {
        sct_random r = {170000u + (uint64_t)seed};
        ck_stable(rf_frame(&r, 2 + seed % 2, 2 + seed % 29, seed % 13, 0));
    }
    printf("measured: no false alarm on %d stable frames\n", n);
    fflush(stdout);
}
END_TEST

/* ---- almost a mechanism
 * ---------------------------------------------------------------------------------------------- */

/* Stiffnesses of the springs at the areas that the groups hold. */
static void stiffnesses(const sct_structure *st, double k[])
{
    sct_properties sizes[8];
    for (int g = 0; g < st->n_groups; g++) sizes[g] = sct_properties_at_area(st->model, g, st->model->groups[g].A_held);
    for (int e = 0; e < st->n_springs; e++)
        k[e] = sct_spring_stiffness(&st->springs[e], sizes) / pow(st->springs[e].span, 2);
}

/* Softens one sprung end or one member of a frame without a hold too many. */
static sct_model *with_soft_spring(int seed, double part)
{
    sct_random r = {180000u + (uint64_t)seed};
    sct_model *m = determinate(2 + seed % 2, 3 + seed % 12, &r).m;
    int e = ts_pick(&r, m->n_members);
    while (m->members[e].end[0].fixity[SCT_IN_PLANE] == SCT_PINNED) e = ts_pick(&r, m->n_members);
    if (seed % 3 > 0) {
        m->members[e].end[0].fixity[SCT_IN_PLANE] = SCT_SPRUNG;
        m->members[e].end[0].stiffness[SCT_IN_PLANE] = part * 1e6;
        return m;
    }
    const sct_group *like = &m->groups[m->members[e].group];
    const double A = like->A_held;
    m->members[e].group = mb_frame_group(m, A, part * A * A, A * A);
    return m;
}

START_TEST(a_spring_of_1e_14_of_the_rest_is_never_passed_over_in_silence)
{
    static const double PARTS[] = {1e-14, 1e-16, 1e-20};
    const int n = count(100, 500);
    int refused = 0, warned = 0, named = 0, single = 0, moving = 0;
    for (int i = 0; i < 3 * n; i++) {
        finding f = find(with_soft_spring(1 + i % n, PARTS[i / n]));
        double *v = calloc((size_t)f.st->n_dof + 1, sizeof *v), *k = calloc((size_t)f.st->n_springs + 1, sizeof *k);
        stiffnesses(f.st, k);
        const int nullity = null_motion_without(f.st, k, 1e-4, v);
        const char *text = message(&f, 0);
        moving += nullity > 0;
        ck_assert_msg(nullity == 0 || sct_issues_count(f.issues) > 0, "%d: silent", i);
        ck_assert_msg(nullity > 0 || sct_issues_count(f.issues) == 0, "%d: %s", i, text);
        refused += f.status != SCT_OK;
        warned += f.status == SCT_OK && nullity > 0;
        single += nullity == 1;
        if (nullity == 1) ck_joints(f.st, v, text);
        named += nullity == 1;
        free(v);
        free(k);
        drop(&f);
    }
    printf(
        "measured: a spring of 1e-14 to 1e-20 of the rest: %d frames that it alone holds, %d refused, %d warned of, 0 "
        "silent; the right joints named in %d of %d with one motion\n",
        moving, refused, warned, named, single);
    fflush(stdout);
    ck_assert_int_ge(single, n);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mechanism gates of frames");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 600);
    tcase_add_test(tests, stable_by_their_making);
    tcase_add_test(tests, a_release_or_support_too_many_is_told_by_its_joints);
    tcase_add_test(tests, a_spinning_strut_is_told_by_its_joints_and_its_direction);
    tcase_add_test(tests, releases_and_supports_taken_at_will_are_judged_as_the_null_space_says);
    tcase_add_test(tests, stable_frames_raise_no_alarm);
    tcase_add_test(tests, a_spring_of_1e_14_of_the_rest_is_never_passed_over_in_silence);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

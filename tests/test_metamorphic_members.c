/* What may be told otherwise within a frame: members in pieces, sections that are round, ends and supports that are
 * very stiff or very soft, beams that are bars. */
#define _DEFAULT_SOURCE
#include "frame_relations.h"

/* ---- members in pieces ------------------------------------------------------------------------------------------- */

static double straight(double a, double b, double t)
{
    return a + t * (b - a);
}

/* The part of a distributed load that lies on [low, high] of its member; false: none does. */
static bool cut_load(sct_member_load *load, double low, double high)
{
    const double a = fmax(load->a, low), b = fmin(load->b, high), h = load->b - load->a;
    if (!(b > a)) return false;
    for (int x = 0; x < 3; x++) {
        const double qa = load->qa[x], qb = load->qb[x];
        load->qa[x] = straight(qa, qb, (a - load->a) / h);
        load->qb[x] = straight(qa, qb, (b - load->a) / h);
    }
    load->a = a;
    load->b = b;
    return true;
}

/* Cuts load i of case k at x; what lies beyond becomes a load of `beyond`, x further back. */
static void split_load(sct_model *m, int k, int i, double x, int beyond)
{
    const sct_member_load whole = m->cases[k].member_loads[i];
    sct_member_load far = whole, *near = &m->cases[k].member_loads[i];
    if (whole.is_point ? whole.a >= x : cut_load(&far, x, INFINITY)) {
        far.member = beyond;
        if (beyond != whole.member) {
            far.a -= x;
            far.b -= x;
        }
        if (whole.is_point || whole.a >= x) {
            *near = far;
            return;
        }
        *mb_member_load(m, k, 0) = far;
        cut_load(&m->cases[k].member_loads[i], -INFINITY, x);
    }
}

RELATION(a_load_on_a_member_may_be_told_in_two_pieces, 1e-11)
{
    sct_model *m = rf_any(seed, 0);
    for (int i = 0, n = m->cases[1].n_member_loads; i < n; i++) {
        const sct_member_load *load = &m->cases[1].member_loads[i];
        if (!load->is_point) split_load(m, 1, i, straight(load->a, load->b, 0.4), load->member);
    }
    frame a = frame_solve(rf_any(seed, 0)), b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){0});
}

/* Cuts member e at the part t of its length; returns the new member beyond. */
static int split_member(sct_model *m, int e, double t)
{
    const sct_joint *from = &m->joints[m->members[e].from], *to = &m->joints[m->members[e].to];
    const double x = t * rf_distance(m, m->members[e].from, m->members[e].to);
    const double at[3] = {straight(from->at[0], to->at[0], t), straight(from->at[1], to->at[1], t),
                          straight(from->at[2], to->at[2], t)};
    const int joint = mb_joint(m, at[0], at[1], at[2]), beyond = mb_beam(m, joint, m->members[e].to, 0);
    sct_member *near = &m->members[e], *far = &m->members[beyond];
    const char *name = far->name;
    *far = *near;
    far->name = name;
    far->from = near->to = joint;
    mb_fixity(m, e, 1, SCT_FIXED);
    mb_fixity(m, beyond, 0, SCT_FIXED);
    for (int k = 0; k < m->n_cases; k++) {
        for (int i = 0, n = m->cases[k].n_member_loads; i < n; i++)
            if (m->cases[k].member_loads[i].member == e) split_load(m, k, i, x, beyond);
        for (int i = 0, n = m->cases[k].n_bar_actions; i < n; i++) {
            if (m->cases[k].bar_actions[i].member != e) continue;
            mb_act(m, k, beyond, 0, 0);
            sct_bar_action *action = m->cases[k].bar_actions, *more = &action[m->cases[k].n_bar_actions - 1];
            *more = action[i];
            more->member = beyond;
            action[i].lack *= t;
            more->lack *= 1 - t;
        }
    }
    return beyond;
}

/* Own weight bends a bar's pieces, which it does not do to the bar: beams only. Everywhere but in the member that was
 * cut the comparison is the common one. (Where a joint does not turn about the member's axis, the new one would spin.)
 */
RELATION(a_joint_within_a_member_changes_nothing, 1e-11)
{
    sct_random r = {seed};
    frame a = frame_solve(rf_any(seed, RF_NO_HUNG));
    const int e = below(&r, a.s.st->n_bars);
    const double t = between(&r, 0.1, 0.9), L = a.s.st->bars[e].L;
    if (a.s.st->bars[e].n == 0) {
        frame_free(&a);
        return DOES_NOT_APPLY;
    }
    sct_model *m = rf_any(seed, RF_NO_HUNG);
    const int beyond = split_member(m, e, t);
    frame b = frame_solve(m);
    double most = 0.0;
    for (int k = 0; k < 3; k++) {
        for (double x = 0.05; x < 1.0; x += 0.13) {
            double p[FRAME_QUANTITIES], q[FRAME_QUANTITIES];
            member_values(&a, k, e, x * L, -1, p);
            member_values(&b, k, x < t ? e : beyond, x < t ? x * L : (x - t) * L, -1, q);
            for (int i = SCT_BEAM_QUANTITIES; i < FRAME_QUANTITIES; i++) p[i] = q[i] = 0.0; /* other chords */
            most = fmax(most, values_missed(p, q, 1.0, frame_F_scale(&a, k), a.s.st->lever));
        }
    }
    for (int k = 0; k < 3; k++) {
        const frame_change same = {0};
        for (int j = 0; j < a.s.st->n_joints; j++) most = fmax(most, joint_missed(&a, &b, k, j, &same));
        for (int i = 0; i < a.s.st->n_bars; i++)
            if (i != e) most = fmax(most, member_missed(&a, &b, k, i, &same));
    }
    frame_free(&a);
    frame_free(&b);
    return most;
}

/* ---- sections and ends ------------------------------------------------------------------------------------------- */

/* Loads told in local axes turn with them, so there are none here; nor gradients. */
RELATION(a_round_section_may_be_rolled, 1e-11)
{
    if (seed % 2 == 1) return DOES_NOT_APPLY;
    sct_random r = {seed};
    sct_model *m[2];
    for (int i = 0; i < 2; i++) {
        m[i] = rf_any(seed, RF_ROUND | RF_NO_ELASTIC);
        for (int e = 0; e < m[i]->n_members; e++)
            for (int end = 0; end < 2; end++) {
                sct_fixity *fixity = m[i]->members[e].end[end].fixity;
                fixity[SCT_OUT_OF_PLANE] = fixity[SCT_IN_PLANE];
            }
        for (int n = 0; n < m[i]->cases[1].n_member_loads; n++)
            if (m[i]->cases[1].member_loads[n].axes == SCT_AXES_MEMBER)
                m[i]->cases[1].member_loads[n].axes = SCT_AXES_MODEL;
        for (int n = 0; n < m[i]->cases[2].n_bar_actions; n++)
            m[i]->cases[2].bar_actions[n].gradient[0] = m[i]->cases[2].bar_actions[n].gradient[1] = 0.0;
    }
    for (int e = 0; e < m[1]->n_members; e++) m[1]->members[e].roll += between(&r, -2, 2);
    frame a = frame_solve(m[0]), b = frame_solve(m[1]);
    double most = 0.0;
    for (int k = 0; k < 3; k++) {
        for (int j = 0; j < a.s.st->n_joints; j++) most = fmax(most, joint_missed(&a, &b, k, j, &(frame_change){0}));
        for (int e = 0; e < a.s.st->n_bars; e++) {
            double p[FRAME_QUANTITIES], q[FRAME_QUANTITIES];
            const double x = 0.4 * a.s.st->bars[e].L, of_u = member_u_scale(&a, k, e, frame_u_scale(&a, k));
            member_values(&a, k, e, x, -1, p);
            member_values(&b, k, e, x, -1, q);
            for (int i = 1; i < FRAME_QUANTITIES; i += i == 3 ? 3 : 2) { /* the sizes of V, M and the deflection */
                p[i] = hypot(p[i], p[i + 1]);
                q[i] = hypot(q[i], q[i + 1]);
                p[i + 1] = q[i + 1] = 0.0;
            }
            most = fmax(most, values_missed(p, q, of_u, frame_F_scale(&a, k), a.s.st->lever));
        }
    }
    frame_free(&a);
    frame_free(&b);
    return most;
}

/* Every sprung end and others, those of the tree that holds the frame up only when they are not to be pinned, get the
 * stiffness k, or what it tends to. Own weight bends no bar: there is none. */
static sct_model *with_ends(uint64_t seed, double k, sct_fixity instead)
{
    sct_random r = {seed};
    sct_model *m = rf_any(seed, RF_WEIGHTLESS | RF_NO_HUNG);
    for (int e = 0; e < m->n_members; e++) {
        const bool is_of_tree = e < m->n_joints - 1;
        for (int end = 0; end < 2; end++)
            for (int i = 0; i < (m->dimensions == 2 ? 1 : 2); i++) {
                sct_member_end *at = &m->members[e].end[end];
                const bool picked = below(&r, 3) == 0;
                if (at->fixity[i] != SCT_SPRUNG && !picked) continue;
                if (is_of_tree && instead == SCT_PINNED) continue;
                at->fixity[i] = k > 0.0 ? SCT_SPRUNG : instead;
                at->stiffness[i] = k;
            }
    }
    return m;
}

RELATION(a_very_stiff_sprung_end_is_fixed, 1e-3)
{
    frame a = frame_solve(with_ends(seed, 0.0, SCT_FIXED)), b = frame_solve(with_ends(seed, 1e13, SCT_FIXED));
    return frames_missed(&a, &b, &(frame_change){0});
}

RELATION(a_very_soft_sprung_end_is_pinned, 1e-3)
{
    frame a = frame_solve(with_ends(seed, 0.0, SCT_PINNED)), b = frame_solve(with_ends(seed, 1e-2, SCT_PINNED));
    return frames_missed(&a, &b, &(frame_change){0});
}

/* Joint 1 of a frame: held, hung on springs, or free along a direction and about an axis. */
static sct_model *with_support(uint64_t seed, double k, bool is_held)
{
    sct_random r = {seed};
    sct_model *m = rf_any(seed, 0);
    double dir[3], axis[3] = {0, 0, 1};
    m->joints[1].n_held = m->joints[1].n_turns_held = m->joints[1].n_springs = 0;
    rf_direction(&r, m->dimensions, dir);
    if (m->dimensions == 3) rf_direction(&r, 3, axis);
    if (is_held) {
        mb_hold(m, 1, dir[0], dir[1], dir[2]);
        mb_hold_turn(m, 1, axis[0], axis[1], axis[2]);
    } else if (k > 0.0) {
        mb_spring(m, 1, false, dir, k);
        mb_spring(m, 1, true, axis, k);
    }
    return m;
}

RELATION(a_very_stiff_elastic_support_holds, 1e-3)
{
    frame a = frame_solve(with_support(seed, 0.0, true)), b = frame_solve(with_support(seed, 1e15, false));
    return frames_missed(&a, &b, &(frame_change){0});
}

RELATION(a_very_soft_elastic_support_does_nothing, 1e-3)
{
    frame a = frame_solve(with_support(seed, 0.0, false)), b = frame_solve(with_support(seed, 1e-2, false));
    return frames_missed(&a, &b, &(frame_change){0});
}

/* ---- trusses ----------------------------------------------------------------------------------------------------- */

/* A random truss whose members are beams with hinged ends (kind 0), or fixed ends and almost no second moment (1). */
static sct_model *truss_of_beams(uint64_t seed, int kind)
{
    sct_random r = {seed};
    sct_model *m = random_truss(&r, 2 + (int)(seed % 2), 5 + (int)(seed % 6), (int)(seed % 4));
    for (int i = 0; i < m->n_materials; i++) m->materials[i].G = m->materials[i].E / 2.6;
    for (int g = 0; g < m->n_groups; g++) {
        const double A = m->groups[g].A_held, I = kind == 1 ? 1e-9 * A * A : A * A;
        mb_stiffen(m, g, I, I, I);
    }
    for (int e = 0; e < m->n_members && kind == 1; e++)
        for (int end = 0; end < 2; end++) mb_fixity(m, e, end, SCT_FIXED);
    return m;
}

/* Own weight bends beams: it is left out. Moments and shears there are of the order of I. */
RELATION(fixed_ends_of_members_without_bending_stiffness_make_a_truss, 1e-5)
{
    sct_model *m[2] = {truss_of_beams(seed, 0), truss_of_beams(seed, 1)};
    for (int i = 0; i < 2; i++) m[i]->cases[0].self_weight = 0.0;
    frame a = frame_solve(m[0]), b = frame_solve(m[1]);
    double most = 0.0;
    for (int k = 0; k < 3; k++) {
        const double of_u = frame_u_scale(&a, k), of_F = frame_F_scale(&a, k);
        for (int j = 0; j < a.s.st->n_joints; j++)
            for (int i = 0; i < 3; i++)
                most = fmax(most, fabs(frame_moved(&a, k, j, i) - frame_moved(&b, k, j, i)) / of_u);
        for (int e = 0; e < a.s.st->n_bars; e++)
            most = fmax(most, fabs(a.S[k * a.s.st->n_springs + e] - b.S[k * b.s.st->n_springs + e]) / of_F);
    }
    frame_free(&a);
    frame_free(&b);
    return most;
}

int main(void)
{
    Suite *suite = suite_create("metamorphic members");
    TCase *tests = tcase_create("frames");
    tcase_set_timeout(tests, 120);
    open_frames();
    tcase_add_test(tests, a_load_on_a_member_may_be_told_in_two_pieces);
    tcase_add_test(tests, a_joint_within_a_member_changes_nothing);
    tcase_add_test(tests, a_round_section_may_be_rolled);
    tcase_add_test(tests, a_very_stiff_sprung_end_is_fixed);
    tcase_add_test(tests, a_very_soft_sprung_end_is_pinned);
    tcase_add_test(tests, a_very_stiff_elastic_support_holds);
    tcase_add_test(tests, a_very_soft_elastic_support_does_nothing);
    tcase_add_test(tests, fixed_ends_of_members_without_bending_stiffness_make_a_truss);
    suite_add_tcase(suite, tests);
    const int code = run_suite(suite);
    tell_frames("relations");
    return code;
}

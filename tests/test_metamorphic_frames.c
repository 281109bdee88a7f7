/* What must stay the same, or change in a known way, when a frame is told otherwise. */
#define _DEFAULT_SOURCE
#include "base/vector.h"
#include "frame_relations.h"

/* ---- moving the whole model -------------------------------------------------------------------------------------- */

/* R v in place; turn: v is an axis of rotation or a moment, which a mirror turns the other way. */
static void map(const double R[3][3], bool turn, double v[3])
{
    const double det = R[0][0] * (R[1][1] * R[2][2] - R[1][2] * R[2][1]) -
                       R[0][1] * (R[1][0] * R[2][2] - R[1][2] * R[2][0]) +
                       R[0][2] * (R[1][0] * R[2][1] - R[1][1] * R[2][0]);
    const double w[3] = {sct_dot3(R[0], v), sct_dot3(R[1], v), sct_dot3(R[2], v)};
    for (int i = 0; i < 3; i++) v[i] = turn && det < 0.0 ? -w[i] : w[i];
}

static void map_joint(sct_joint *j, const double R[3][3])
{
    map(R, false, j->at);
    for (int i = 0; i < j->n_held; i++) map(R, false, j->held[i]);
    for (int i = 0; i < j->n_turns_held; i++) map(R, true, j->turns_held[i]);
    for (int i = 0; i < j->n_springs; i++) map(R, j->springs[i].is_turn, j->springs[i].dir);
}

static void map_case(sct_case *c, const double R[3][3])
{
    for (int i = 0; i < c->n_loads; i++) {
        map(R, false, c->loads[i].F);
        map(R, true, c->loads[i].M);
    }
    for (int i = 0; i < c->n_settlements; i++) {
        map(R, false, c->settlements[i].d);
        map(R, true, c->settlements[i].turn);
    }
    for (int i = 0; i < c->n_member_loads; i++) {
        sct_member_load *load = &c->member_loads[i];
        if (load->axes == SCT_AXES_MEMBER) continue;
        map(R, false, load->qa);
        map(R, false, load->qb);
        map(R, false, load->F);
        map(R, true, load->M);
    }
}

/* Moves everything; in space local axis 1 of every member goes along, with the axes of the model before. */
static void map_model(sct_model *m, const double R[3][3], const sct_structure *before)
{
    for (int j = 0; j < m->n_joints; j++) map_joint(&m->joints[j], R);
    for (int k = 0; k < m->n_cases; k++) map_case(&m->cases[k], R);
    for (int e = 0; e < m->n_members; e++) {
        memcpy(m->members[e].up, before->bars[e].axes[1], sizeof m->members[e].up);
        map(R, false, m->members[e].up);
        m->members[e].roll = 0.0;
    }
}

/* The local axis whose sense a mirror or a swap of ends changes against the model, beside others: axis 1 in the plane,
 * axis 2 in space. Loads, moments and gradients told in local axes follow: components along axes[] change their sign
 * by `sense`, moments by `turn_sense`. */
static void flip_local(sct_model *m, const double sense[3], const double turn_sense[3])
{
    for (int k = 0; k < m->n_cases; k++) {
        for (int i = 0; i < m->cases[k].n_member_loads; i++) {
            sct_member_load *load = &m->cases[k].member_loads[i];
            for (int x = 0; x < 3 && load->axes == SCT_AXES_MEMBER; x++) {
                load->qa[x] *= sense[x];
                load->qb[x] *= sense[x];
                load->F[x] *= sense[x];
                load->M[x] *= turn_sense[x];
            }
        }
        for (int i = 0; i < m->cases[k].n_bar_actions; i++)
            for (int p = 0; p < 2; p++) m->cases[k].bar_actions[i].gradient[p] *= sense[1 + p];
    }
}

/* A random rotation: about z, or about any axis. */
static void random_rotation(sct_random *r, int dim, double R[3][3])
{
    double axis[3] = {0, 0, 1}, angle = between(r, -3, 3);
    if (dim == 3) rf_direction(r, 3, axis);
    const double c = cos(angle), s = sin(angle);
    for (int i = 0; i < 3; i++) {
        double e[3] = {0}, cross[3];
        e[i] = 1.0;
        sct_cross3(axis, e, cross);
        for (int x = 0; x < 3; x++) R[x][i] = c * e[x] + s * cross[x] + (1 - c) * axis[x] * axis[i];
    }
}

RELATION(a_frame_may_be_turned, 1e-11)
{
    sct_random r = {seed};
    double R[3][3];
    frame a = frame_solve(rf_any(seed, RF_WEIGHTLESS));
    sct_model *m = rf_any(seed, RF_WEIGHTLESS);
    random_rotation(&r, m->dimensions, R);
    map_model(m, (const double(*)[3])R, a.s.st);
    frame b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.R = (const double(*)[3])R});
}

RELATION(a_frame_may_be_mirrored, 1e-11)
{
    static const double R[3][3] = {{-1, 0, 0}, {0, 1, 0}, {0, 0, 1}};
    static const double SENSE[2][3] = {{1, -1, 1}, {1, 1, -1}}, TURN[2][3] = {{1, 1, -1}, {-1, -1, 1}};
    frame a = frame_solve(rf_any(seed, 0));
    sct_model *m = rf_any(seed, 0);
    const int space = m->dimensions == 3;
    map_model(m, R, a.s.st);
    flip_local(m, SENSE[space], TURN[space]);
    frame b = frame_solve(m);
    const frame_change plane = {.R = R, .is_mirrored = true, .sign = {1, -1, 1, -1, 1, 1, -1, 1}};
    const frame_change spatial = {.R = R, .is_mirrored = true, .sign = {1, 1, -1, 1, -1, -1, 1, -1}};
    return frames_missed(&a, &b, space ? &spatial : &plane);
}

static void reverse_member(sct_member *e)
{
    const sct_member_end end = e->end[0];
    const int from = e->from;
    e->end[0] = e->end[1];
    e->end[1] = end;
    e->from = e->to;
    e->to = from;
    e->roll = -e->roll;
}

static void reverse_load(const sct_model *m, sct_member_load *load)
{
    const double L = rf_distance(m, m->members[load->member].from, m->members[load->member].to);
    const double a = load->a;
    load->a = L - load->b;
    load->b = L - a;
    for (int x = 0; x < 3; x++) {
        const double q = load->qa[x];
        load->qa[x] = load->qb[x];
        load->qb[x] = q;
    }
}

RELATION(members_may_be_told_from_the_other_end, 1e-11)
{
    static const double SENSE[2][3] = {{-1, -1, 1}, {-1, 1, -1}};
    frame a = frame_solve(rf_any(seed, 0));
    sct_model *m = rf_any(seed, 0);
    const int space = m->dimensions == 3;
    for (int e = 0; e < m->n_members; e++) reverse_member(&m->members[e]);
    for (int k = 0; k < m->n_cases; k++)
        for (int i = 0; i < m->cases[k].n_member_loads; i++) reverse_load(m, &m->cases[k].member_loads[i]);
    flip_local(m, SENSE[space], SENSE[space]);
    frame b = frame_solve(m);
    const frame_change plane = {.is_reversed = true, .sign = {1, 1, 1, -1, 1, 1, -1, 1}};
    const frame_change spatial = {.is_reversed = true, .sign = {1, -1, 1, 1, -1, 1, 1, -1}};
    return frames_missed(&a, &b, space ? &spatial : &plane);
}

/* A plane frame stands in the plane y = 0 of space: the turn about x that keeps "downwards". */
RELATION(a_plane_frame_is_a_frame_in_space_that_is_held_in_its_plane, 1e-11)
{
    static const double R[3][3] = {{1, 0, 0}, {0, 0, -1}, {0, 1, 0}};
    if (seed % 2 == 0) return DOES_NOT_APPLY;
    frame a = frame_solve(rf_any(seed, 0));
    sct_model *m = rf_any(seed, 0);
    map_model(m, R, a.s.st);
    m->dimensions = 3;
    for (int e = 0; e < m->n_members; e++) /* out of plane nothing moves */
        for (int end = 0; end < 2; end++)
            m->members[e].end[end].fixity[SCT_OUT_OF_PLANE] = m->members[e].end[end].fixity[SCT_TWIST] = SCT_PINNED;
    for (int j = 0; j < m->n_joints; j++) {
        mb_hold(m, j, 0, 1, 0);
        mb_hold_turn(m, j, 1, 0, 0);
        mb_hold_turn(m, j, 0, 0, 1);
    }
    frame b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.R = R});
}

/* ---- numbering --------------------------------------------------------------------------------------------------- */

static void shuffle(sct_random *r, int n, int to[])
{
    for (int i = 0; i < n; i++) to[i] = i;
    for (int i = n - 1; i > 0; i--) {
        const int j = below(r, i + 1), t = to[i];
        to[i] = to[j];
        to[j] = t;
    }
}

static void renumber_case(sct_case *c, const int joint[], const int member[])
{
    for (int i = 0; i < c->n_loads; i++) c->loads[i].joint = joint[c->loads[i].joint];
    for (int i = 0; i < c->n_settlements; i++) c->settlements[i].joint = joint[c->settlements[i].joint];
    for (int i = 0; i < c->n_bar_actions; i++) c->bar_actions[i].member = member[c->bar_actions[i].member];
    for (int i = 0; i < c->n_member_loads; i++) c->member_loads[i].member = member[c->member_loads[i].member];
}

RELATION(joints_and_members_may_stand_in_any_order, 1e-11)
{
    sct_random r = {seed};
    int joint[64], member[64];
    sct_joint joints[64];
    sct_member members[64];
    sct_model *m = rf_any(seed, 0);
    shuffle(&r, m->n_joints, joint);
    shuffle(&r, m->n_members, member);
    memcpy(joints, m->joints, (size_t)m->n_joints * sizeof *joints);
    memcpy(members, m->members, (size_t)m->n_members * sizeof *members);
    for (int j = 0; j < m->n_joints; j++) m->joints[joint[j]] = joints[j];
    for (int e = 0; e < m->n_members; e++) {
        members[e].from = joint[members[e].from];
        members[e].to = joint[members[e].to];
        m->members[member[e]] = members[e];
    }
    for (int k = 0; k < m->n_cases; k++) renumber_case(&m->cases[k], joint, member);
    frame a = frame_solve(rf_any(seed, 0)), b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.joint = joint, .member = member});
}

/* ---- sizes and units --------------------------------------------------------------------------------------------- */

static void scale3(double k, double v[3])
{
    for (int i = 0; i < 3; i++) v[i] *= k;
}

static void scale_actions(sct_case *c, double k)
{
    for (int i = 0; i < c->n_settlements; i++) {
        scale3(k, c->settlements[i].d);
        scale3(k, c->settlements[i].turn);
    }
    for (int i = 0; i < c->n_bar_actions; i++) {
        c->bar_actions[i].dT *= k;
        c->bar_actions[i].lack *= k;
        for (int p = 0; p < 2; p++) c->bar_actions[i].gradient[p] *= k;
    }
}

static void scale_loads(sct_case *c, double k)
{
    c->self_weight *= k;
    for (int i = 0; i < c->n_loads; i++) {
        scale3(k, c->loads[i].F);
        scale3(k, c->loads[i].M);
    }
    for (int i = 0; i < c->n_member_loads; i++) {
        scale3(k, c->member_loads[i].qa);
        scale3(k, c->member_loads[i].qb);
        scale3(k, c->member_loads[i].F);
        scale3(k, c->member_loads[i].M);
    }
}

RELATION(answers_grow_with_the_actions, 1e-11)
{
    const double c = -2.5;
    sct_model *m = rf_any(seed, 0);
    for (int k = 0; k < m->n_cases; k++) {
        scale_loads(&m->cases[k], c);
        scale_actions(&m->cases[k], c);
    }
    frame a = frame_solve(rf_any(seed, 0)), b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.ku = c, .kF = c});
}

RELATION(a_stiffer_frame_moves_less_and_carries_the_same, 1e-11)
{
    const double c = 3.7;
    sct_model *m = rf_any(seed, 0);
    for (int i = 0; i < m->n_materials; i++) {
        m->materials[i].E *= c;
        m->materials[i].G *= c;
    }
    for (int j = 0; j < m->n_joints; j++)
        for (int i = 0; i < m->joints[j].n_springs; i++) m->joints[j].springs[i].stiffness *= c;
    for (int e = 0; e < m->n_members; e++)
        for (int end = 0; end < 2; end++)
            for (int i = 0; i < SCT_TURNS; i++) m->members[e].end[end].stiffness[i] *= c;
    scale_actions(&m->cases[2], 1.0 / c); /* prescribed movements: these strain with the same forces, too */
    frame a = frame_solve(rf_any(seed, 0)), b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.ku = 1.0 / c});
}

/* The same frame in other units of length: k of them in a metre. */
static void change_unit(sct_model *m, double k)
{
    for (int i = 0; i < m->n_materials; i++) {
        m->materials[i].E /= k * k;
        m->materials[i].G /= k * k;
    }
    for (int g = 0; g < m->n_groups; g++) {
        m->groups[g].A_held *= k * k;
        m->groups[g].A_min *= k * k;
        m->groups[g].A_max *= k * k;
        m->groups[g].J.c *= pow(k, 4.0 - 2.0 * m->groups[g].J.p);
    }
    for (int j = 0; j < m->n_joints; j++) {
        scale3(k, m->joints[j].at);
        for (int i = 0; i < m->joints[j].n_springs; i++)
            m->joints[j].springs[i].stiffness *= m->joints[j].springs[i].is_turn ? k : 1.0 / k;
    }
    for (int e = 0; e < m->n_members; e++)
        for (int end = 0; end < 2; end++)
            for (int i = 0; i < SCT_TURNS; i++) m->members[e].end[end].stiffness[i] *= k;
    for (int n = 0; n < m->n_cases; n++) {
        sct_case *c = &m->cases[n];
        for (int i = 0; i < c->n_loads; i++) scale3(k, c->loads[i].M);
        for (int i = 0; i < c->n_settlements; i++) scale3(k, c->settlements[i].d);
        for (int i = 0; i < c->n_bar_actions; i++) {
            c->bar_actions[i].lack *= k;
            for (int p = 0; p < 2; p++) c->bar_actions[i].gradient[p] /= k;
        }
        for (int i = 0; i < c->n_member_loads; i++) {
            sct_member_load *load = &c->member_loads[i];
            load->a *= k;
            load->b *= k;
            scale3(1.0 / k, load->qa);
            scale3(1.0 / k, load->qb);
            scale3(k, load->M);
        }
    }
}

RELATION(any_unit_of_length_gives_the_same_frame, 1e-11)
{
    const double k = 39.37;
    sct_model *m = rf_any(seed, RF_WEIGHTLESS);
    change_unit(m, k);
    frame a = frame_solve(rf_any(seed, RF_WEIGHTLESS)), b = frame_solve(m);
    return frames_missed(&a, &b, &(frame_change){.ku = k, .kl = k});
}

/* ---- cases ------------------------------------------------------------------------------------------------------- */

/* Adds everything of case k to case 0, times a factor. */
static void merge_case(sct_model *m, int k, double factor)
{
    sct_case *from = &m->cases[k], *to = &m->cases[0];
    scale_loads(from, factor);
    scale_actions(from, factor);
    to->self_weight += from->self_weight;
    for (int i = 0; i < from->n_loads; i++) {
        mb_load(m, 0, from->loads[i].joint, 0, 0, 0);
        to->loads[to->n_loads - 1] = from->loads[i];
    }
    for (int i = 0; i < from->n_member_loads; i++) *mb_member_load(m, 0, 0) = from->member_loads[i];
    for (int i = 0; i < from->n_bar_actions; i++) {
        mb_act(m, 0, 0, 0, 0);
        to->bar_actions[to->n_bar_actions - 1] = from->bar_actions[i];
    }
    for (int i = 0; i < from->n_settlements; i++) {
        mb_settle(m, 0, 0, 0, 0, 0);
        to->settlements[to->n_settlements - 1] = from->settlements[i];
    }
}

RELATION(a_combination_is_the_case_of_all_its_actions, 1e-11)
{
    static const double FACTOR[3] = {1.35, -0.7, 1.5};
    sct_model *m = rf_any(seed, 0), *one = rf_any(seed, 0);
    mb_combination(m, 3, FACTOR);
    scale_loads(&one->cases[0], FACTOR[0]);
    for (int k = 1; k < 3; k++) merge_case(one, k, FACTOR[k]);
    one->n_cases = 1;
    frame a = frame_solve(m), b = frame_solve(one);
    return frames_missed(&a, &b, &(frame_change){0});
}

int main(void)
{
    Suite *suite = suite_create("metamorphic frames");
    TCase *tests = tcase_create("frames");
    tcase_set_timeout(tests, 120);
    open_frames();
    tcase_add_test(tests, a_frame_may_be_turned);
    tcase_add_test(tests, a_frame_may_be_mirrored);
    tcase_add_test(tests, members_may_be_told_from_the_other_end);
    tcase_add_test(tests, a_plane_frame_is_a_frame_in_space_that_is_held_in_its_plane);
    tcase_add_test(tests, joints_and_members_may_stand_in_any_order);
    tcase_add_test(tests, answers_grow_with_the_actions);
    tcase_add_test(tests, a_stiffer_frame_moves_less_and_carries_the_same);
    tcase_add_test(tests, any_unit_of_length_gives_the_same_frame);
    tcase_add_test(tests, a_combination_is_the_case_of_all_its_actions);
    suite_add_tcase(suite, tests);
    const int code = run_suite(suite);
    tell_frames("relations");
    return code;
}

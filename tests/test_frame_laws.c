/* Laws that every linear frame obeys, on random ones: agreement with a second analysis by element matrices, equilibrium
 * of joints and members, reciprocity, energy. */
#define _DEFAULT_SOURCE
#include "base/vector.h"
#include "dense_frame.h"
#include "frame_relations.h"

/* ---- a second analysis ------------------------------------------------------------------------------------------- */

static double ends_missed(const frame *f, const dense_frame *d, int k, int e)
{
    const double L = f->s.st->bars[e].L, of = frame_F_scale(f, k), lever = f->s.st->lever;
    double value[SCT_BEAM_QUANTITIES], ends[2][6], most = 0.0;
    dense_end_forces(d, e, k, ends);
    for (int end = 0; end < 2; end++) {
        frame_forces(f, k, e, end == 0 ? 0.0 : L, end == 0 ? 1 : -1, value);
        for (int q = 0; q < SCT_BEAM_QUANTITIES; q++)
            most = fmax(most, fabs(value[q] - ends[end][q]) / (q < SCT_BEAM_M ? of : of * lever));
    }
    return most;
}

/* Rotations that no member's end takes part in are unknown to one of the two. */
static double joints_missed(const frame *f, const dense_frame *d, int k, int j)
{
    const sct_structure *st = f->s.st;
    const double of = frame_u_scale(f, k);
    double most = 0.0;
    for (int i = 0; i < 3; i++) most = fmax(most, fabs(frame_moved(f, k, j, i) - d->f[6 * j + i]) / of);
    for (int t = 0; t < st->n_turns[j]; t++) {
        const double *axis = st->turn_basis[j][t];
        double off = 0.0;
        for (int i = 0; i < 3; i++) off += axis[i] * (frame_moved(f, k, j, 3 + i) - d->f[6 * j + 3 + i]);
        most = fmax(most, fabs(off) * st->lever / of);
    }
    return most;
}

/* Element matrices lose more digits the softer a frame is: those that would lose too many are left out. */
RELATION(displacements_and_end_forces_are_those_of_element_matrices, 1e-9)
{
    frame f = frame_solve(rf_any(seed, 0));
    double most = 0.0, rcond = 1.0;
    for (int k = 0; k < 3; k++) {
        dense_frame d = dense_solve(f.s.st, f.s.A, k);
        rcond = fmin(rcond, d.rcond);
        for (int j = 0; j < f.s.st->n_joints; j++) most = fmax(most, joints_missed(&f, &d, k, j));
        for (int e = 0; e < f.s.st->n_bars; e++) most = fmax(most, ends_missed(&f, &d, k, e));
        dense_free(&d);
    }
    frame_free(&f);
    return rcond > 1e-9 ? most : DOES_NOT_APPLY;
}

/* ---- equilibrium ------------------------------------------------------------------------------------------------- */

/* Adds a force at a place, and a moment, to the resultant about the origin. */
static void add_force(double sum[6], const double at[3], const double F[3], const double M[3])
{
    double arm[3];
    sct_cross3(at, F, arm);
    for (int i = 0; i < 3; i++) {
        sum[i] += F[i];
        sum[3 + i] += arm[i] + M[i];
    }
}

static void along_member(const frame *f, int e, double x, double at[3])
{
    const sct_bar *bar = &f->s.st->bars[e];
    for (int i = 0; i < 3; i++) at[i] = f->s.model->joints[bar->from].at[i] + x * bar->axes[0][i];
}

/* From local axes to the model's. */
static void to_model(const sct_bar *bar, const double local[3], double v[3])
{
    for (int i = 0; i < 3; i++)
        v[i] = local[0] * bar->axes[0][i] + local[1] * bar->axes[1][i] + local[2] * bar->axes[2][i];
}

static const double NONE[3] = {0};

/* A load on a member as forces: a trapezium by Simpson's rule, exact for its resultant. */
static void add_member_load(const frame *f, const sct_member_load *load, double sum[6])
{
    static const double AT[3] = {0.0, 0.5, 1.0}, WEIGHT[3] = {1.0 / 6, 4.0 / 6, 1.0 / 6};
    const sct_bar *bar = &f->s.st->bars[load->member];
    const sct_beam_load local = sct_local_load(bar, load);
    const double h = local.b - local.a;
    double at[3], F[3], M[3];
    for (int i = 0; i < 3 && !local.is_point; i++) {
        double q[3];
        for (int n = 0; n < 3; n++) q[n] = WEIGHT[i] * h * ((1 - AT[i]) * local.qa[n] + AT[i] * local.qb[n]);
        to_model(bar, q, F);
        along_member(f, load->member, local.a + AT[i] * h, at);
        add_force(sum, at, F, NONE);
    }
    if (!local.is_point) return;
    to_model(bar, local.F, F);
    to_model(bar, local.M, M);
    along_member(f, load->member, local.a, at);
    add_force(sum, at, F, M);
}

/* Resultant of everything that acts in case k, straight from the model. */
static void resultant(const frame *f, int k, double sum[6])
{
    const sct_structure *st = f->s.st;
    const sct_case *c = &st->model->cases[k];
    double at[3], F[3] = {0};
    memset(sum, 0, 6 * sizeof *sum);
    for (int i = 0; i < c->n_loads; i++)
        add_force(sum, st->model->joints[c->loads[i].joint].at, c->loads[i].F, c->loads[i].M);
    for (int i = 0; i < c->n_member_loads; i++) add_member_load(f, &c->member_loads[i], sum);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        F[st->dim - 1] = -c->self_weight * bar->density * SCT_GRAVITY * bar->L * f->s.A[bar->group];
        along_member(f, e, bar->L / 2, at);
        add_force(sum, at, F, NONE);
    }
}

RELATION(reactions_balance_all_loads, 1e-9)
{
    frame f = frame_solve(rf_any(seed, 0));
    double most = 0.0;
    for (int k = 0; k < 3; k++) {
        double sum[6];
        resultant(&f, k, sum);
        for (int j = 0; j < f.s.st->n_joints; j++) {
            const double *R = f.reaction + 6 * (k * f.s.st->n_joints + j);
            add_force(sum, f.s.model->joints[j].at, R, R + 3);
        }
        for (int i = 0; i < 6; i++) most = fmax(most, fabs(sum[i]) / (frame_F_scale(&f, k) * (i < 3 ? 1 : 10)));
    }
    frame_free(&f);
    return most;
}

/* What a member does to its joint at one end, by its diagrams there. */
static void add_end(const frame *f, int k, int e, int end, double sum[6])
{
    const sct_bar *bar = &f->s.st->bars[e];
    const double sign = end == 0 ? 1.0 : -1.0;
    double v[SCT_BEAM_QUANTITIES], F[3], M[3];
    frame_forces(f, k, e, end == 0 ? 0.0 : bar->L, end == 0 ? 1 : -1, v);
    to_model(bar, (double[3]){sign * v[SCT_BEAM_N], -sign * v[SCT_BEAM_V], -sign * v[SCT_BEAM_V + 1]}, F);
    to_model(bar, (double[3]){sign * v[SCT_BEAM_T], -sign * v[SCT_BEAM_M + 1], sign * v[SCT_BEAM_M]}, M);
    for (int i = 0; i < 3; i++) {
        sum[i] += F[i];
        sum[3 + i] += M[i];
    }
}

/* Own weight of bars goes to their joints. */
static void add_joint_loads(const frame *f, int k, int j, double sum[6])
{
    const sct_structure *st = f->s.st;
    const sct_case *c = &st->model->cases[k];
    for (int i = 0; i < c->n_loads; i++)
        if (c->loads[i].joint == j) add_force(sum, NONE, c->loads[i].F, c->loads[i].M);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        if (bar->n == 0 && (bar->from == j || bar->to == j))
            sum[st->dim - 1] -= c->self_weight * bar->density * SCT_GRAVITY * bar->L / 2 * f->s.A[bar->group];
    }
}

RELATION(every_joint_is_in_equilibrium_with_the_ends_of_its_members, 1e-9)
{
    frame f = frame_solve(rf_any(seed, 0));
    const sct_structure *st = f.s.st;
    double most = 0.0;
    for (int k = 0; k < 3; k++)
        for (int j = 0; j < st->n_joints; j++) {
            const double *R = f.reaction + 6 * (k * st->n_joints + j), of = frame_F_scale(&f, k);
            double sum[6] = {R[0], R[1], R[2], R[3], R[4], R[5]};
            add_joint_loads(&f, k, j, sum);
            for (int e = 0; e < st->n_bars; e++) {
                if (st->bars[e].from == j) add_end(&f, k, e, 0, sum);
                if (st->bars[e].to == j) add_end(&f, k, e, 1, sum);
            }
            for (int i = 0; i < 6; i++) most = fmax(most, fabs(sum[i]) / (of * (i < 3 ? 1 : st->lever)));
        }
    frame_free(&f);
    return most;
}

RELATION(hinged_ends_carry_no_moment_and_sprung_ends_their_spring_s, 1e-9)
{
    frame f = frame_solve(rf_any(seed, 0));
    const sct_structure *st = f.s.st;
    double most = 0.0;
    for (int k = 0; k < 3; k++)
        for (int e = 0; e < st->n_bars; e++)
            for (int end = 0; end < 2; end++) {
                double v[SCT_BEAM_QUANTITIES];
                frame_forces(&f, k, e, end == 0 ? 0.0 : st->bars[e].L, end == 0 ? 1 : -1, v);
                const double of = frame_F_scale(&f, k) * st->lever, M[3] = {v[SCT_BEAM_M], v[SCT_BEAM_M + 1], v[5]};
                for (int r = 0; r < (st->dim == 2 ? 1 : 3); r++)
                    if (st->bars[e].hinges.free_turn[r][end]) most = fmax(most, fabs(M[r]) / of);
                for (int i = st->bars[e].first; i < st->bars[e].first + st->bars[e].n; i++) {
                    const sct_spring *s = &st->springs[i]; /* its force is the moment on the member's end */
                    if (s->mode != SCT_MODE_END || s->end != end) continue;
                    const double S = f.S[k * st->n_springs + i] * (end == 0 ? -1.0 : 1.0);
                    most = fmax(most, fabs(S - M[s->plane]) / of);
                }
            }
    frame_free(&f);
    return most;
}

/* ---- reciprocity and energy -------------------------------------------------------------------------------------- */

/* Displacement of a place on a member along a local axis: that of its chord, and off it. */
static double moved_along(const frame *f, int k, int e, double x, int axis)
{
    const sct_bar *bar = &f->s.st->bars[e];
    const double t = x / bar->L;
    double sum = 0.0;
    for (int i = 0; i < 3; i++) {
        const double from = frame_moved(f, k, bar->from, i), to = frame_moved(f, k, bar->to, i);
        sum += ((1 - t) * from + t * to) * bar->axes[axis][i];
    }
    if (axis > 0) return sum + frame_bow(f, k, e, axis - 1, x);
    const sct_beam_line line = frame_line(f, k, e);
    return sum + sct_beam_held_EAu(&line, x) / (bar->E * f->s.A[bar->group]);
}

/* Maxwell: what a unit force here moves there, a unit force there moves here. */
RELATION(forces_and_displacements_are_reciprocal_anywhere_along_members, 1e-9)
{
    sct_random r = {seed};
    sct_model *m = rf_any(seed, RF_FORCES_ONLY | RF_WEIGHTLESS);
    const int dim = m->dimensions;
    int at[2], axis[2];
    double x[2];
    for (int k = 0; k < 2; k++) {
        m->cases[k].n_loads = m->cases[k].n_member_loads = 0;
        at[k] = below(&r, m->n_members);
        axis[k] = below(&r, dim);
        x[k] = between(&r, 0.05, 0.95) * rf_distance(m, m->members[at[k]].from, m->members[at[k]].to);
        sct_member_load *load = mb_member_load(m, k, at[k]);
        load->is_point = true;
        load->axes = SCT_AXES_MEMBER;
        load->a = load->b = x[k];
        load->F[axis[k]] = 1.0;
    }
    frame f = frame_solve(m);
    const double a = moved_along(&f, 0, at[1], x[1], axis[1]), b = moved_along(&f, 1, at[0], x[0], axis[0]);
    const double of = fmax(frame_u_scale(&f, 0), frame_u_scale(&f, 1));
    frame_free(&f);
    return fabs(a - b) / of;
}

typedef double of_place(const frame *f, int e, double x);

/* int g(x) dx over a member, case 0: five Gauss points per piece, exact to degree 9. */
static double integral(const frame *f, int e, of_place *g)
{
    static const double AT[5] = {0.5, 0.2307653449471584544819, 0.7692346550528415455181, 0.0469100770306680036012,
                                 0.9530899229693319963988};
    static const double WEIGHT[5] = {0.2844444444444444444444, 0.2393143352496832340206, 0.2393143352496832340206,
                                     0.1184634425280945437571, 0.1184634425280945437571};
    double x[64], h[64], sum = 0.0;
    const sct_beam_line line = frame_line(f, 0, e);
    for (int p = 0; p < line.n; p++) {
        x[p] = line.piece[p].x;
        h[p] = line.piece[p].h;
    }
    for (int p = 0, n = line.n; p < n; p++)
        for (int i = 0; i < 5; i++) sum += WEIGHT[i] * h[p] * g(f, e, x[p] + AT[i] * h[p]);
    return sum;
}

/* N^2/EA + M^2/EI + T^2/GJ, zero stiffness where zero force. */
static double strain_energy_density(const frame *f, int e, double x)
{
    const sct_structure *st = f->s.st;
    const sct_bar *bar = &st->bars[e];
    const sct_properties size = sct_properties_at_area(st->model, bar->group, f->s.A[bar->group]);
    const double G = st->model->materials[st->model->groups[bar->group].material].G;
    double v[SCT_BEAM_QUANTITIES];
    frame_forces(f, 0, e, x, -1, v);
    return v[0] * v[0] / (bar->E * size.P[SCT_OF_AREA]) + v[3] * v[3] / (bar->E * size.P[SCT_OF_INERTIA_IN]) +
           v[4] * v[4] / (bar->E * size.P[SCT_OF_INERTIA_OUT]) + v[5] * v[5] / (G * size.P[SCT_OF_TORSION]);
}

/* q . displacement */
static double work_density(const frame *f, int e, double x)
{
    const sct_beam_line line = frame_line(f, 0, e);
    const sct_beam_piece *p = &line.piece[sct_beam_piece_at(&line, x, -1)];
    const double t = (x - p->x) / p->h;
    double q[3], sum = 0.0;
    for (int i = 0; i < 3; i++) q[i] = p->q[0][i] + t * (p->q[1][i] - p->q[0][i]);
    for (int axis = 0; axis < 3; axis++) sum += q[axis] * moved_along(f, 0, e, x, axis);
    return sum;
}

/* Clapeyron: loads that grow from nothing do as much work as is stored. Joints, members, their ends, supports. */
RELATION(the_work_of_the_loads_is_stored_in_members_ends_and_supports, 1e-9)
{
    sct_model *m = rf_any(seed, RF_NO_MOMENTS | RF_FORCES_ONLY);
    m->cases[0].member_loads = m->cases[1].member_loads;
    m->cases[0].n_member_loads = m->cases[1].n_member_loads;
    frame f = frame_solve(m);
    const sct_structure *st = f.s.st;
    const sct_case *c = &st->model->cases[0];
    double work = 0.0, stored = 0.0;
    for (int i = 0; i < c->n_loads; i++)
        for (int x = 0; x < 6; x++)
            work += (x < 3 ? c->loads[i].F[x] : c->loads[i].M[x - 3]) * frame_moved(&f, 0, c->loads[i].joint, x);
    for (int i = 0; i < c->n_member_loads; i++) {
        const sct_member_load *load = &c->member_loads[i];
        const sct_beam_load local = sct_local_load(&st->bars[load->member], load);
        for (int x = 0; x < 3 && local.is_point; x++) work += local.F[x] * moved_along(&f, 0, load->member, local.a, x);
    }
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const double lump = c->self_weight * bar->density * SCT_GRAVITY * bar->L / 2 * f.s.A[bar->group];
        stored += integral(&f, e, strain_energy_density);
        work += integral(&f, e, work_density);
        if (bar->n == 0)
            work -= lump * (frame_moved(&f, 0, bar->from, st->dim - 1) + frame_moved(&f, 0, bar->to, st->dim - 1));
    }
    for (int i = 0; i < st->n_springs; i++) {
        const sct_spring *s = &st->springs[i];
        if (s->group < 0) stored += f.S[i] * f.S[i] / (s->E / s->L);
    }
    frame_free(&f);
    return stored > 0.0 ? fabs(work - stored) / stored : fabs(work);
}

int main(void)
{
    Suite *suite = suite_create("frame laws");
    TCase *tests = tcase_create("laws");
    tcase_set_timeout(tests, 120);
    open_frames();
    tcase_add_test(tests, displacements_and_end_forces_are_those_of_element_matrices);
    tcase_add_test(tests, reactions_balance_all_loads);
    tcase_add_test(tests, every_joint_is_in_equilibrium_with_the_ends_of_its_members);
    tcase_add_test(tests, hinged_ends_carry_no_moment_and_sprung_ends_their_spring_s);
    tcase_add_test(tests, forces_and_displacements_are_reciprocal_anywhere_along_members);
    tcase_add_test(tests, the_work_of_the_loads_is_stored_in_members_ends_and_supports);
    suite_add_tcase(suite, tests);
    const int code = run_suite(suite);
    tell_frames("laws");
    return code;
}

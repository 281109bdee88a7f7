/* What loads on a member put on its joints, and its modes of bending. Sources: "tables" = the tables of fixed-end
 * moments in Roark's Formulas for Stress and Strain and in Kleinlogel, from memory; each checked by hand against the
 * integral of load times Hermite polynomial. Loads act along +1, so a fixed start takes +, a fixed end -, where the
 * tables print magnitudes. */
#include "support.h"

#include "beam_loads.h"

enum { R0, M0, RL, ML };
static const double L = 6, w = 10, P = 20, m = 7;

/* Forces and moments in plane on both joints. */
static void in_plane(bool from, bool to, int n, const sct_beam_load load[], double r[4])
{
    const sct_beam_hinges hinges = hinged(from, to);
    double end[2][6];
    sct_beam_fixed_ends(L, &hinges, n, load, end);
    r[R0] = end[0][1];
    r[M0] = end[0][5];
    r[RL] = end[1][1];
    r[ML] = end[1][5];
}

static void one(bool from, bool to, sct_beam_load load, double r[4])
{
    in_plane(from, to, 1, &load, r);
}

static void near4(const double r[4], double r0, double m0, double rl, double ml)
{
    const double expected[4] = {r0, m0, rl, ml};
    for (int i = 0; i < 4; ++i) ck_assert_double_eq_tol(r[i], expected[i], 1e-14 * (fabs(expected[i]) + 1e-300));
}

/* tables: w L2/12, w L/2 | 5 w L/8, w L2/8, 3 w L/8 | w L/2 */
START_TEST(uniform_load)
{
    double r[4];
    one(false, false, across(0, L, w, w), r);
    near4(r, w * L / 2, w * L * L / 12, w * L / 2, -w * L * L / 12);
    one(false, true, across(0, L, w, w), r);
    near4(r, 5 * w * L / 8, w * L * L / 8, 3 * w * L / 8, 0);
    one(true, false, across(0, L, w, w), r);
    near4(r, 3 * w * L / 8, 0, 5 * w * L / 8, -w * L * L / 8);
    one(true, true, across(0, L, w, w), r);
    near4(r, w * L / 2, 0, w * L / 2, 0);
}
END_TEST

/* tables: P a b2/L2, P a2 b/L2, P b2 (3a + b)/L3 | P b (L2 - b2)/(2 L2), b from the hinge | P b/L */
START_TEST(point_force_anywhere)
{
    for (int i = 0; i <= 12; ++i) {
        const double a = L * i / 12, b = L - a;
        double r[4];
        one(false, false, force_at(a, P), r);
        near4(r, P * b * b * (3 * a + b) / (L * L * L), P * a * b * b / (L * L), P * a * a * (a + 3 * b) / (L * L * L),
              -P * a * a * b / (L * L));
        one(false, true, force_at(a, P), r);
        near4(r, P * b * (3 * L * L - b * b) / (2 * L * L * L), P * b * (L - b) * (L + b) / (2 * L * L),
              P * a * a * (3 * L - a) / (2 * L * L * L), 0);
        one(true, true, force_at(a, P), r);
        near4(r, P * b / L, 0, P * a / L, 0);
    }
}
END_TEST

/* tables: m b (2a - b)/L2, m a (2b - a)/L2, 6 m a b/L3 on the member | m (3 b2 - L2)/(2 L2), 3 m (L2 - b2)/(2 L3) | m/L
 */
START_TEST(point_moment_anywhere)
{
    for (int i = 0; i <= 12; ++i) {
        const double a = i * 0.5, b = L - a;
        double r[4];
        one(false, false, moment_at(a, m), r);
        near4(r, -6 * m * a * b / (L * L * L), -m * b * (2 * a - b) / (L * L), 6 * m * a * b / (L * L * L),
              -m * a * (2 * b - a) / (L * L));
        one(false, true, moment_at(a, m), r);
        const double R = 3 * m * (L * L - b * b) / (2 * L * L * L);
        near4(r, -R, m * (3 * b * b - L * L) / (2 * L * L), R, 0);
        one(true, true, moment_at(a, m), r);
        near4(r, -m / L, 0, m / L, 0);
    }
}
END_TEST

/* A moment at the very end: a fixed end hands it to the joint; a hinged end is turned by it, and half is carried over.
 */
START_TEST(moment_at_an_end_acts_on_the_joint_only_where_it_is_fixed)
{
    double r[4];
    one(false, false, moment_at(0, m), r);
    near4(r, 0, m, 0, 0);
    one(true, false, moment_at(0, m), r);
    near4(r, -1.5 * m / L, 0, 1.5 * m / L, -m / 2);
    one(false, true, moment_at(L, m), r);
    near4(r, -1.5 * m / L, -m / 2, 1.5 * m / L, 0);
    one(false, true, moment_at(0, m), r);
    near4(r, 0, m, 0, 0);
}
END_TEST

/* tables, c loaded: at the start w c2 (6 L2 - 8 L c + 3 c2)/(12 L2), w c3 (4 L - 3 c)/(12 L2); in the middle
 * w c (3 L2 - c2)/(24 L); propped: w c2 (2 L - c)2/(8 L2) beside the fixed end, w c2 (2 L2 - c2)/(8 L2) beside the prop
 */
START_TEST(partial_uniform_load)
{
    for (int i = 1; i <= 6; ++i) {
        const double c = i;
        double r[4];
        one(false, false, across(0, c, w, w), r);
        ck_close(r[M0], w * c * c * (6 * L * L - 8 * L * c + 3 * c * c) / (12 * L * L), 1e-14);
        ck_close(r[ML], -w * c * c * c * (4 * L - 3 * c) / (12 * L * L), 1e-14);
        one(false, false, across((L - c) / 2, (L + c) / 2, w, w), r);
        near4(r, w * c / 2, w * c * (3 * L * L - c * c) / (24 * L), w * c / 2, -w * c * (3 * L * L - c * c) / (24 * L));
        one(false, true, across(0, c, w, w), r);
        ck_close(r[M0], w * c * c * (2 * L - c) * (2 * L - c) / (8 * L * L), 1e-14);
        one(false, true, across(L - c, L, w, w), r);
        ck_close(r[M0], w * c * c * (2 * L * L - c * c) / (8 * L * L), 1e-14);
    }
}
END_TEST

/* tables: w L2/30, w L2/20, 3 w L/20, 7 w L/20 | largest at the fixed end w L2/15, prop w L/10; at the prop 7 w L2/120,
 * prop 11 w L/40 | w L/6, w L/3 */
START_TEST(triangular_load)
{
    double r[4];
    one(false, false, across(0, L, 0, w), r);
    near4(r, 3 * w * L / 20, w * L * L / 30, 7 * w * L / 20, -w * L * L / 20);
    one(false, true, across(0, L, w, 0), r);
    near4(r, 2 * w * L / 5, w * L * L / 15, w * L / 10, 0);
    one(false, true, across(0, L, 0, w), r);
    near4(r, 9 * w * L / 40, 7 * w * L * L / 120, 11 * w * L / 40, 0);
    one(true, true, across(0, L, 0, w), r);
    near4(r, w * L / 6, 0, w * L / 3, 0);
}
END_TEST

/* tables: symmetric trapezoid with ramps c: w L2/12 (1 - 2 (c/L)2 + (c/L)3); the triangle (c = L/2): 5 w L2/96 */
START_TEST(trapezoidal_load)
{
    for (int i = 1; i <= 3; ++i) {
        const double c = i, k = c / L;
        const sct_beam_load load[3] = {across(0, c, 0, w), across(c, L - c, w, w), across(L - c, L, w, 0)};
        double r[4];
        in_plane(false, false, 3, load, r);
        const double M = w * L * L / 12 * (1 - 2 * k * k + k * k * k);
        near4(r, w * (L - c) / 2, M, w * (L - c) / 2, -M);
        if (i == 3) ck_close(M, 5 * w * L * L / 96, 1e-14);
    }
}
END_TEST

/* tables: a bar held at both ends: F b/L, F a/L; triangular q: q L/6, q L/3 */
START_TEST(load_along_the_member)
{
    const sct_beam_hinges hinges = hinged(false, true);
    const sct_beam_load load[2] = {{.is_point = true, .a = 1.5, .b = 1.5, .F = {P, 0, 0}},
                                   {.a = 0, .b = L, .qb = {w, 0, 0}}};
    double end[2][6];
    sct_beam_fixed_ends(L, &hinges, 1, load, end);
    ck_close(end[0][0], P * 4.5 / L, 1e-15);
    ck_close(end[1][0], P * 1.5 / L, 1e-15);
    sct_beam_fixed_ends(L, &hinges, 1, load + 1, end);
    ck_close(end[0][0], w * L / 6, 1e-14);
    ck_close(end[1][0], w * L / 3, 1e-14);
}
END_TEST

/* statics: T b/L, T a/L; free to twist at one end: all to the other */
START_TEST(torque_goes_to_the_ends_that_hold_it)
{
    const sct_beam_load load = {.is_point = true, .a = 1.5, .b = 1.5, .M = {m, 0, 0}};
    double end[2][6];
    sct_beam_hinges hinges = hinged(true, false);
    sct_beam_fixed_ends(L, &hinges, 1, &load, end);
    ck_close(end[0][3], m * 4.5 / L, 1e-15);
    ck_close(end[1][3], m * 1.5 / L, 1e-15);
    for (int e = 0; e < 2; ++e) {
        hinges.free_turn[2][e] = true;
        hinges.free_turn[2][1 - e] = false;
        sct_beam_fixed_ends(L, &hinges, 1, &load, end);
        ck_assert(end[e][3] == 0 && end[1 - e][3] == m);
    }
}
END_TEST

/* Out of plane with its own hinges: the same numbers, moments about axis 1 with the other sign. */
START_TEST(out_of_plane_is_in_plane_turned)
{
    const sct_beam_hinges hinges = {{{true, true}, {true, false}, {false, false}}};
    const sct_beam_load load[2] = {{.a = 1, .b = 4, .qa = {0, 0, 2}, .qb = {0, 0, 5}},
                                   {.is_point = true, .a = 2, .b = 2, .F = {0, 0, P}, .M = {0, -m, 0}}};
    const sct_beam_load same[3] = {across(1, 4, 2, 5), force_at(2, P), moment_at(2, m)};
    double end[2][6], r[4];
    sct_beam_fixed_ends(L, &hinges, 2, load, end);
    in_plane(true, false, 3, same, r);
    ck_close(end[0][2], r[R0], 1e-14);
    ck_assert(end[0][4] == 0);
    ck_close(end[1][2], r[RL], 1e-14);
    ck_close(end[1][4], -r[ML], 1e-14);
    for (int e = 0; e < 2; ++e) ck_assert(end[e][1] == 0 && end[e][5] == 0);
}
END_TEST

/* Forces and moments about the start of what the loads are. */
static void resultant(int n, const sct_beam_load load[], double F[3], double M[3])
{
    for (int i = 0; i < n; ++i) {
        const sct_beam_load *l = &load[i];
        const double h = l->b - l->a;
        double f[3], xf[3];
        for (int j = 0; j < 3; ++j) {
            f[j] = l->is_point ? l->F[j] : h * (l->qa[j] + l->qb[j]) / 2;
            xf[j] =
                l->is_point ? l->a * l->F[j] : h * (l->qa[j] * (2 * l->a + l->b) + l->qb[j] * (l->a + 2 * l->b)) / 6;
            F[j] += f[j];
            M[j] += l->is_point ? l->M[j] : 0;
        }
        M[1] -= xf[2];
        M[2] += xf[1];
    }
}

START_TEST(joints_receive_the_resultant_of_the_loads)
{
    unsigned long long seed = 1;
    for (int i = 0; i < ALL_HINGES; ++i) {
        const sct_beam_hinges hinges = hinges_number(i);
        sct_beam_load load[9];
        double end[2][6], F[3] = {0}, M[3] = {0};
        random_loads(&seed, L, 9, load);
        sct_beam_fixed_ends(L, &hinges, 9, load, end);
        resultant(9, load, F, M);
        for (int j = 0; j < 3; ++j) ck_assert_double_eq_tol(end[0][j] + end[1][j], F[j], 1e-13);
        ck_assert_double_eq_tol(end[0][3] + end[1][3], M[0], 1e-13);
        ck_assert_double_eq_tol(end[0][4] + end[1][4] - L * end[1][2], M[1], 1e-13);
        ck_assert_double_eq_tol(end[0][5] + end[1][5] + L * end[1][1], M[2], 1e-13);
    }
}
END_TEST

/* Turn the hinged ends of the fixed member until they carry no moment: EI/L (4, 2; 2, 4), forces 6 EI/L2. */
static void release(bool from, bool to, double r[4])
{
    const double a = from ? (to ? (2 * r[M0] - r[ML]) / 6 : r[M0] / 4) : 0;
    const double b = to ? (from ? (2 * r[ML] - r[M0]) / 6 : r[ML] / 4) : 0; /* EI/L times the rotations */
    r[R0] -= 6 * (a + b) / L;
    r[RL] += 6 * (a + b) / L;
    r[M0] -= 4 * a + 2 * b;
    r[ML] -= 2 * a + 4 * b;
}

START_TEST(hinges_are_the_static_condensation_of_fixed_ends)
{
    unsigned long long seed = 2;
    for (int i = 0; i < 200; ++i) {
        sct_beam_load load[7];
        random_loads(&seed, L, 7, load);
        double r[4], fixed[4];
        in_plane(i & 1, (i & 2) != 0, 7, load, r);
        in_plane(false, false, 7, load, fixed);
        release(i & 1, (i & 2) != 0, fixed);
        for (int j = 0; j < 4; ++j) ck_assert_double_eq_tol(r[j], fixed[j], 1e-13);
    }
}
END_TEST

START_TEST(cutting_a_load_in_two_changes_nothing)
{
    unsigned long long seed = 3;
    for (int i = 0; i < 200; ++i) {
        const double a = 0.3, b = 5.2, x = a + (b - a) * (random_unit(&seed) + 1) / 2;
        const double qa = 2 + random_unit(&seed), qb = 2 + random_unit(&seed), qx = qa + (qb - qa) * (x - a) / (b - a);
        const sct_beam_load parts[2] = {across(a, x, qa, qx), across(x, b, qx, qb)};
        double r[4], cut[4];
        one(i & 1, (i & 2) != 0, across(a, b, qa, qb), r);
        in_plane(i & 1, (i & 2) != 0, 2, parts, cut);
        for (int j = 0; j < 4; ++j) ck_close(cut[j], r[j], 1e-14);
    }
}
END_TEST

/* The far moment of h loaded beside the end is w h3 (4 L - 3 h)/(12 L2),
 * the table's above, all digits of which must survive; a load of no length is none. */
START_TEST(short_loads_keep_their_digits)
{
    const double h = 0x1p-30;
    double r[4];
    one(false, false, across(L - h, L, w, w), r);
    ck_close(r[M0], w * h * h * h * (4 * L - 3 * h) / (12 * L * L), 1e-14);
    ck_close(r[RL], w * h, 1e-14);
    one(false, false, across(3, 3 + h, w, w), r);
    ck_close(r[M0], w * h * L / 8, 1e-9); /* tables: P L/8 */
    ck_close(r[R0] + r[RL], w * h, 1e-15);
    one(false, false, across(3, 3, w, w), r);
    near4(r, 0, 0, 0, 0);
}
END_TEST

START_TEST(scaled_loads_answer_scaled)
{
    unsigned long long seed = 4;
    const sct_beam_hinges hinges = hinged(false, true);
    sct_beam_load load[6], scaled[6];
    double end[2][6], twice[2][6];
    random_loads(&seed, L, 6, load);
    sct_beam_loads_scaled(-2, 6, load, scaled);
    sct_beam_fixed_ends(L, &hinges, 6, load, end);
    sct_beam_fixed_ends(L, &hinges, 6, scaled, twice);
    for (int e = 0; e < 2; ++e) {
        for (int j = 0; j < 6; ++j) ck_assert_double_eq_tol(twice[e][j], -2 * end[e][j], 1e-15);
    }
}
END_TEST

/* Natural modes: S_s = EI/L (phi2 - phi1), S_a = 3 EI/L (phi1 + phi2); one hinge: S = 3 EI/L phi of the fixed end
 * (beam stiffnesses 4, 2 and 3 EI/L of every textbook). So a unit S turns the ends as below. */
START_TEST(modes_carry_a_unit_of_their_spring)
{
    const double phi[4][2][2] = {/* by hinges: from + 2 to; EI times the rotations of both ends under S_k = 1 */
                                 {{-L / 2, L / 2}, {L / 6, L / 6}},
                                 {{NAN, L / 3}, {0}},
                                 {{L / 3, NAN}, {0}},
                                 {{0}, {0}}};
    for (int i = 0; i < 4; ++i) {
        const sct_beam_hinges hinges = hinged(i & 1, i >= 2);
        const int n = sct_beam_mode_count(&hinges, 1);
        ck_assert_int_eq(n, i == 0 ? 2 : i < 3 ? 1 : 0);
        for (int k = 0; k < n; ++k) {
            double mode[2];
            sct_beam_mode(&hinges, 1, k, mode);
            for (int e = 0; e < 2; ++e) {
                const double turn = sct_beam_mode_slope(L, mode, e * L);
                if (!isnan(phi[i][k][e])) ck_close(turn, phi[i][k][e], 1e-15);
                if (hinges.free_turn[1][e]) ck_assert(mode[e] == 0);
                ck_assert(sct_beam_mode_bow(L, mode, e * L) == 0);
                ck_assert(sct_beam_mode_moment(L, mode, e * L) == mode[e]);
            }
        }
    }
}
END_TEST

/* definition: E I v'' = m, differences of a cubic are exact but for rounding */
START_TEST(bow_and_slope_of_a_mode_are_its_integrals)
{
    const double mode[2] = {3, -5}, d = 0x1p-8;
    for (int i = 1; i < 24; ++i) {
        const double x = L * i / 24, left = sct_beam_mode_bow(L, mode, x - d),
                     right = sct_beam_mode_bow(L, mode, x + d);
        ck_assert_double_eq_tol((left - 2 * sct_beam_mode_bow(L, mode, x) + right) / (d * d),
                                sct_beam_mode_moment(L, mode, x), 1e-8);
        ck_assert_double_eq_tol((sct_beam_mode_slope(L, mode, x + d) - sct_beam_mode_slope(L, mode, x - d)) / (2 * d),
                                sct_beam_mode_moment(L, mode, x), 1e-12);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("beam");
    TCase *tc = tcase_create("beam");
    tcase_add_test(tc, uniform_load);
    tcase_add_test(tc, point_force_anywhere);
    tcase_add_test(tc, point_moment_anywhere);
    tcase_add_test(tc, moment_at_an_end_acts_on_the_joint_only_where_it_is_fixed);
    tcase_add_test(tc, partial_uniform_load);
    tcase_add_test(tc, triangular_load);
    tcase_add_test(tc, trapezoidal_load);
    tcase_add_test(tc, load_along_the_member);
    tcase_add_test(tc, torque_goes_to_the_ends_that_hold_it);
    tcase_add_test(tc, out_of_plane_is_in_plane_turned);
    tcase_add_test(tc, joints_receive_the_resultant_of_the_loads);
    tcase_add_test(tc, hinges_are_the_static_condensation_of_fixed_ends);
    tcase_add_test(tc, cutting_a_load_in_two_changes_nothing);
    tcase_add_test(tc, short_loads_keep_their_digits);
    tcase_add_test(tc, scaled_loads_answer_scaled);
    tcase_add_test(tc, modes_carry_a_unit_of_their_spring);
    tcase_add_test(tc, bow_and_slope_of_a_mode_are_its_integrals);
    suite_add_tcase(suite, tc);
    return run_suite(suite);
}

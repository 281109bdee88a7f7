/* The diagrams of one member. Sources: "tables" = the beam tables of Roark's Formulas for Stress and Strain and of
 * Timoshenko and Gere, from memory. Loads act along +1, so M and v have the signs of E I v'' = M, M'' = q: a simple
 * member under w > 0 has M = -w x (L - x)/2 < 0 and v > 0. */
#include "support.h"

#include "analysis/beam_diagram.h"
#include "beam_loads.h"

enum { MOST = 16 };
static const double L = 6, w = 10, P = 20, EI = 21000;
static const sct_beam_state AT_REST = {0};
static const sct_beam_bending IN_PLANE = {.plane = 0, .EI = 21000};

typedef struct member {
    sct_beam_piece piece[2 * MOST + 1];
    sct_beam_line line;
} member;

static void make(member *b, bool from, bool to, int n, const sct_beam_load load[])
{
    const sct_beam_hinges hinges = hinged(from, to);
    ck_assert_int_le(n, MOST);
    b->line = sct_beam_line_make(L, &hinges, n, load, b->piece);
    ck_assert_int_le(b->line.n, sct_beam_pieces_at_most(n));
}

static void make_one(member *b, bool from, bool to, sct_beam_load load)
{
    make(b, from, to, 1, &load);
}

static double value_at(const member *b, const sct_beam_state *state, int what, double x, int side)
{
    double value[SCT_BEAM_QUANTITIES];
    sct_beam_values(&b->line, state, sct_beam_piece_at(&b->line, x, side), x, value);
    return value[what];
}

static double moment(const member *b, double x)
{
    return value_at(b, &AT_REST, SCT_BEAM_M, x, -1);
}

static double deflection(const member *b, double x)
{
    return sct_beam_deflection(&b->line, &AT_REST, &IN_PLANE, x);
}

static sct_beam_extreme largest(const member *b, int what, double sign)
{
    double c[SCT_BEAM_QUANTITIES] = {0};
    c[what] = sign;
    return sct_beam_largest(&b->line, &AT_REST, c);
}

static void extreme_is(sct_beam_extreme e, double value, double x, bool is_inside)
{
    ck_close(e.value, value, 1e-14);
    ck_assert_double_eq_tol(e.x, x, 1e-8 * L); /* where a curve is flat, half of the digits tell */
    ck_assert(e.is_inside == is_inside);
}

/* ---- tables ------------------------------------------------------------------------------------------------ */

/* tables: w L2/8, 5 w L4/(384 EI) = 45, 8.035714e-3 */
START_TEST(simple_member_uniform_load)
{
    member b;
    make_one(&b, true, true, across(0, L, w, w));
    extreme_is(largest(&b, SCT_BEAM_M, -1), w * L * L / 8, L / 2, true);
    extreme_is(largest(&b, SCT_BEAM_M, 1), 0, 0, false);
    extreme_is(largest(&b, SCT_BEAM_V, 1), w * L / 2, L, false);
    extreme_is(largest(&b, SCT_BEAM_V, -1), w * L / 2, 0, false);
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), 5 * w * L * L * L * L / (384 * EI), L / 2, true);
    ck_assert_double_eq_tol(deflection(&b, L / 2), 8.035714e-3, 5e-10);
}
END_TEST

/* tables: P a b/L and P a2 b2/(3 L EI) at the load; P b (L2 - b2)^1.5/(9 sqrt3 L EI) at sqrt((L2 - b2)/3), a >= b */
START_TEST(simple_member_point_force)
{
    for (int i = 6; i < 12; ++i) {
        const double a = i * 0.5, b = L - a;
        member beam;
        make_one(&beam, true, true, force_at(a, P));
        extreme_is(largest(&beam, SCT_BEAM_M, -1), P * a * b / L, a, false);
        ck_close(deflection(&beam, a), P * a * a * b * b / (3 * L * EI), 1e-14);
        extreme_is(sct_beam_largest_bow(&beam.line, &AT_REST, &IN_PLANE),
                   P * b * pow(L * L - b * b, 1.5) / (9 * sqrt(3) * L * EI), sqrt((L * L - b * b) / 3), true);
    }
}
END_TEST

/* tables: M = w L2/(9 sqrt3) at L/sqrt3; v = w x (7 L4 - 10 L2 x2 + 3 x4)/(360 L EI), largest where
 * (x/L)2 = 1 - sqrt(8/15), 0.00652 w L4/EI at 0.519 L */
START_TEST(simple_member_triangular_load)
{
    member b;
    make_one(&b, true, true, across(0, L, 0, w));
    extreme_is(largest(&b, SCT_BEAM_M, -1), w * L * L / (9 * sqrt(3)), L / sqrt(3), true);
    const double k = sqrt(1 - sqrt(8.0 / 15)), v = w * L * L * L * L / (360 * EI) * k * (7 - k * k * (10 - 3 * k * k));
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), v, k * L, true);
    ck_assert_double_eq_tol(v / (w * L * L * L * L / EI), 0.00652, 5e-6);
    for (int i = 1; i < 12; ++i) {
        const double xi = i / 12.0;
        ck_close(deflection(&b, xi * L), w * L * L * L * L / (360 * EI) * xi * (7 - xi * xi * (10 - 3 * xi * xi)),
                 1e-13);
    }
}
END_TEST

/* tables: -m x/L left of it, m (L - x)/L right of it; v at the middle of a moment at the start m L2/(16 EI), largest
 * m L2/(9 sqrt3 EI) at L (1 - 1/sqrt3) */
START_TEST(simple_member_point_moment)
{
    const double m = 7;
    member b;
    make_one(&b, true, true, moment_at(2, m));
    ck_close(value_at(&b, &AT_REST, SCT_BEAM_M, 2, -1), m * 2 / L, 1e-15);
    ck_close(value_at(&b, &AT_REST, SCT_BEAM_M, 2, 1), -m * 4 / L, 1e-15);
    extreme_is(largest(&b, SCT_BEAM_M, 1), m * 2 / L, 2, false);
    extreme_is(largest(&b, SCT_BEAM_M, -1), m * 4 / L, 2, false);
    ck_assert_int_eq(largest(&b, SCT_BEAM_M, 1).piece, 0);
    ck_assert_int_eq(largest(&b, SCT_BEAM_M, -1).piece, 1);
    make_one(&b, true, true, moment_at(0, m));
    extreme_is(largest(&b, SCT_BEAM_M, -1), m, 0, false);
    ck_close(deflection(&b, L / 2), m * L * L / (16 * EI), 1e-14);
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), m * L * L / (9 * sqrt(3) * EI),
               L * (1 - 1 / sqrt(3)), true);
}
END_TEST

/* tables: w L2/12 at the ends (the first is told), w L2/24 and w L4/(384 EI) = 1.607143e-3 in the middle */
START_TEST(fixed_member_uniform_load)
{
    member b;
    make_one(&b, false, false, across(0, L, w, w));
    extreme_is(largest(&b, SCT_BEAM_M, 1), w * L * L / 12, 0, false);
    extreme_is(largest(&b, SCT_BEAM_M, -1), w * L * L / 24, L / 2, true);
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), w * L * L * L * L / (384 * EI), L / 2, true);
    ck_assert_double_eq_tol(deflection(&b, L / 2), 1.607143e-3, 5e-10);
}
END_TEST

/* tables: P L/8, P L3/(192 EI) = 1.071429e-3; P at a >= b: largest 2 P a3 b2/(3 EI (3a + b)2) at 2 a L/(3a + b) */
START_TEST(fixed_member_point_force)
{
    for (int i = 6; i < 12; ++i) {
        const double a = i * 0.5, b = L - a;
        member beam;
        make_one(&beam, false, false, force_at(a, P));
        ck_close(moment(&beam, a), -2 * P * a * a * b * b / (L * L * L), 1e-14);
        extreme_is(sct_beam_largest_bow(&beam.line, &AT_REST, &IN_PLANE),
                   2 * P * a * a * a * b * b / (3 * EI * (3 * a + b) * (3 * a + b)), 2 * a * L / (3 * a + b), true);
        if (i == 6) ck_assert_double_eq_tol(deflection(&beam, a), 1.071429e-3, 5e-10);
    }
}
END_TEST

/* tables: -w L2/8, 9 w L2/128 at 3L/8 from the prop; (39 + 55 sqrt33)/65536 w L4/EI = 3.342521e-3 at L (1 + sqrt33)/16
 */
START_TEST(propped_member_uniform_load)
{
    const double x = L * (1 + sqrt(33)) / 16, v = (39 + 55 * sqrt(33)) / 65536 * w * L * L * L * L / EI;
    ck_assert_double_eq_tol(v, 3.342521e-3, 5e-10);
    for (int from = 0; from < 2; ++from) {
        member b;
        make_one(&b, from, !from, across(0, L, w, w));
        extreme_is(largest(&b, SCT_BEAM_M, 1), w * L * L / 8, from ? L : 0, false);
        extreme_is(largest(&b, SCT_BEAM_M, -1), 9 * w * L * L / 128, from ? 3 * L / 8 : 5 * L / 8, true);
        extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), v, from ? x : L - x, true);
    }
}
END_TEST

/* tables: -3 P L/16, 5 P L/32; 7 P L3/(768 EI) = 1.875e-3 at the load, P L3/(48 sqrt5 EI) = 1.916630e-3 at L/sqrt5 */
START_TEST(propped_member_point_force_in_the_middle)
{
    member b;
    make_one(&b, true, false, force_at(L / 2, P));
    extreme_is(largest(&b, SCT_BEAM_M, 1), 3 * P * L / 16, L, false);
    extreme_is(largest(&b, SCT_BEAM_M, -1), 5 * P * L / 32, L / 2, false);
    ck_close(deflection(&b, L / 2), 7 * P * L * L * L / (768 * EI), 1e-14);
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &IN_PLANE), P * L * L * L / (48 * sqrt(5) * EI), L / sqrt(5),
               true);
}
END_TEST

/* tables: P L, P x2 (3L - x)/(6 EI), P L3/(3 EI) = 6.857143e-2; w L2/2, w x2 (6 L2 - 4 L x + x2)/(24 EI), w L4/(8 EI) =
 * 7.714286e-2. The free end moves: its chord is the offset, and the springs carry what the held end carried there. */
START_TEST(cantilever_by_its_springs)
{
    member b;
    const sct_beam_bending tip = {.EI = EI, .offset = {0, P * L * L * L / (3 * EI)}};
    const sct_beam_state pulled = {.M = {{P * L, 0}}};
    make(&b, false, false, 0, NULL);
    const sct_beam_bending heavy = {.EI = EI, .offset = {0, w * L * L * L * L / (8 * EI)}};
    const sct_beam_state held = {.M = {{w * L * L / 2 - w * L * L / 12, -w * L * L / 12}}};
    member u;
    make_one(&u, false, false, across(0, L, w, w));
    for (int i = 0; i <= 12; ++i) {
        const double x = L * i / 12, to_tip = L - x;
        ck_assert_double_eq_tol(value_at(&b, &pulled, SCT_BEAM_M, x, -1), P * to_tip, 1e-13);
        ck_assert_double_eq_tol(value_at(&u, &held, SCT_BEAM_M, x, -1), w * to_tip * to_tip / 2, 1e-12);
        ck_assert_double_eq_tol(sct_beam_deflection(&b.line, &pulled, &tip, x), P * x * x * (3 * L - x) / (6 * EI),
                                1e-16);
        ck_assert_double_eq_tol(sct_beam_deflection(&u.line, &held, &heavy, x),
                                w * x * x * (6 * L * L - 4 * L * x + x * x) / (24 * EI), 1e-16);
    }
    ck_assert_double_eq_tol(value_at(&u, &held, SCT_BEAM_V, L, -1), 0, 1e-13);
    extreme_is(sct_beam_largest_bow(&b.line, &pulled, &tip), 6.857142857142857e-2, L, false);
    extreme_is(sct_beam_largest_bow(&u.line, &held, &heavy), 7.714285714285714e-2, L, false);
}
END_TEST

/* hand: simple member: kappa L2/8; one end fixed: S = -(3 EI/L) kappa L/2, v = -kappa x (L - x)2/(4 L) from the fixed
 * end's far side: largest kappa L2/27 at L/3; both fixed: M = -EI kappa, v = 0 */
START_TEST(warm_member_bows_against_its_ends)
{
    const double kappa = 1e-3;
    const sct_beam_bending warm = {.EI = EI, .kappa = kappa};
    const sct_beam_state propped = {.M = {{0, -1.5 * EI * kappa}}}, fixed = {.M = {{-EI * kappa, -EI * kappa}}};
    member b;
    make(&b, true, true, 0, NULL);
    extreme_is(sct_beam_largest_bow(&b.line, &AT_REST, &warm), -kappa * L * L / 8, L / 2, true);
    make(&b, true, false, 0, NULL);
    extreme_is(sct_beam_largest_bow(&b.line, &propped, &warm), -kappa * L * L / 27, L / 3, true);
    make(&b, false, false, 0, NULL);
    for (int i = 0; i <= 12; ++i) {
        ck_assert_double_eq_tol(sct_beam_deflection(&b.line, &fixed, &warm, L * i / 12), 0, 1e-17);
    }
}
END_TEST

/* hand: a hanging bar held at both ends: N = q (L/2 - x), EA u = q x (L - x)/2 */
START_TEST(bar_under_its_weight)
{
    member b;
    make_one(&b, false, false, (sct_beam_load){.b = L, .qa = {w, 0, 0}, .qb = {w, 0, 0}});
    for (int i = 0; i <= 12; ++i) {
        const double x = L * i / 12;
        ck_assert_double_eq_tol(value_at(&b, &AT_REST, SCT_BEAM_N, x, -1), w * (L / 2 - x), 1e-14);
        ck_assert_double_eq_tol(sct_beam_held_EAu(&b.line, x), w * x * (L - x) / 2, 1e-13);
    }
    make_one(&b, false, false, (sct_beam_load){.b = L, .qb = {w, 0, 0}});
    for (int i = 0; i <= 12; ++i) { /* q = w x/L: N = w L/6 - w x2/(2L) */
        const double x = L * i / 12;
        ck_assert_double_eq_tol(sct_beam_held_EAu(&b.line, x), w * x * (L * L - x * x) / (6 * L), 1e-13);
    }
    make_one(&b, false, false, (sct_beam_load){.b = L, .qa = {w, 0, 0}, .qb = {w, 0, 0}});
    const sct_beam_state pulled = {.N = 5, .T = 3};
    ck_assert(value_at(&b, &pulled, SCT_BEAM_T, 1, 1) == 3);
    ck_close(value_at(&b, &pulled, SCT_BEAM_N, 1, 1), 5 + w * 2, 1e-15);
    extreme_is(largest(&b, SCT_BEAM_N, 1), w * L / 2, 0, false);
}
END_TEST

/* ---- facts of every member ---------------------------------------------------------------------------------- */

static sct_beam_state random_state(unsigned long long *seed)
{
    sct_beam_state s = {.N = random_unit(seed), .T = random_unit(seed)};
    for (int i = 0; i < 4; ++i) s.M[i / 2][i % 2] = random_unit(seed);
    return s;
}

/* A member with hinges by number and random loads. */
static void make_random(member *b, unsigned long long *seed, int i, int n, sct_beam_load load[])
{
    const sct_beam_hinges hinges = hinges_number(i % ALL_HINGES);
    random_loads(seed, L, n, load);
    b->line = sct_beam_line_make(L, &hinges, n, load, b->piece);
}

START_TEST(pieces_cover_the_member_without_gaps)
{
    unsigned long long seed = 10;
    for (int i = 0; i < 100; ++i) {
        sct_beam_load load[MOST];
        member b;
        make_random(&b, &seed, i, i % (MOST + 1), load);
        double x = 0;
        for (int k = 0; k < b.line.n; ++k) {
            ck_assert(b.piece[k].x == x || k > 0);
            ck_assert(b.piece[k].h > 0);
            ck_assert_double_eq_tol(b.piece[k].x, x, 1e-15 * L);
            ck_assert_int_eq(sct_beam_piece_at(&b.line, b.piece[k].x, 1), k);
            ck_assert_int_eq(sct_beam_piece_at(&b.line, b.piece[k].x, 0), k);
            ck_assert_int_eq(sct_beam_piece_at(&b.line, b.piece[k].x, -1), k > 0 ? k - 1 : 0);
            x = b.piece[k].x + b.piece[k].h;
        }
        ck_assert_double_eq_tol(x, L, 1e-15 * L);
    }
}
END_TEST

/* Faces at both ends carry what the member puts on its joints, less what acts on the joints' side of the end. */
START_TEST(diagram_ends_where_the_other_joint_takes_over)
{
    unsigned long long seed = 11;
    for (int i = 0; i < ALL_HINGES; ++i) {
        sct_beam_load load[8];
        member b;
        make_random(&b, &seed, i, 8, load);
        const sct_beam_hinges hinges = hinges_number(i);
        double end[2][6], at[SCT_BEAM_QUANTITIES];
        sct_beam_fixed_ends(L, &hinges, 8, load, end);
        sct_beam_values(&b.line, &AT_REST, b.line.n - 1, L, at);
        double beyond[6] = {0};
        for (int j = 0; j < 8; ++j) {
            if (!load[j].is_point || load[j].a < L) continue;
            for (int d = 0; d < 3; ++d) {
                beyond[d] += load[j].F[d];
                beyond[3 + d] += load[j].M[d];
            }
        }
        ck_assert_double_eq_tol(at[SCT_BEAM_N], -end[1][0] + beyond[0], 1e-13);
        ck_assert_double_eq_tol(at[SCT_BEAM_V], end[1][1] - beyond[1], 1e-13);
        ck_assert_double_eq_tol(at[SCT_BEAM_V + 1], end[1][2] - beyond[2], 1e-13);
        ck_assert_double_eq_tol(at[SCT_BEAM_M], -end[1][5] + beyond[5], 1e-13);
        ck_assert_double_eq_tol(at[SCT_BEAM_M + 1], end[1][4] - beyond[4], 1e-13);
        ck_assert_double_eq_tol(at[SCT_BEAM_T], -end[1][3] + beyond[3], 1e-13);
    }
}
END_TEST

/* int f over a piece by three Gauss points: exact to degree 5. weight: 1 or a linear function. */
static double integral(const member *b, const sct_beam_state *s, int what, double x0, double x1, const double weight[2])
{
    const double h = x1 - x0, g[3] = {0.5 - sqrt(0.15), 0.5, 0.5 + sqrt(0.15)}, c[3] = {5, 8, 5};
    const int k = sct_beam_piece_at(&b->line, (x0 + x1) / 2, 1);
    double sum = 0;
    for (int i = 0; i < 3; ++i) {
        const double x = x0 + g[i] * h;
        double value[SCT_BEAM_QUANTITIES];
        sct_beam_values(&b->line, s, k, x, value);
        sum += c[i] / 18 * h * value[what] * (weight[0] + weight[1] * x);
    }
    return sum;
}

/* No work with the modes of the springs: int N_F = int T_F = 0, int M_F m_k = 0. */
START_TEST(held_part_is_orthogonal_to_the_springs)
{
    unsigned long long seed = 12;
    for (int i = 0; i < ALL_HINGES; ++i) {
        sct_beam_load load[8];
        member b;
        make_random(&b, &seed, i, 8, load);
        const sct_beam_hinges hinges = hinges_number(i);
        const double one[2] = {1, 0};
        double N = 0, T = 0, M[2][2] = {{0}};
        for (int k = 0; k < b.line.n; ++k) {
            const double x0 = b.piece[k].x, x1 = x0 + b.piece[k].h;
            N += integral(&b, &AT_REST, SCT_BEAM_N, x0, x1, one);
            T += integral(&b, &AT_REST, SCT_BEAM_T, x0, x1, one);
            for (int j = 0; j < 4; ++j) {
                double mode[2];
                if (j % 2 >= sct_beam_mode_count(&hinges, j / 2)) continue;
                sct_beam_mode(&hinges, j / 2, j % 2, mode);
                const double line[2] = {mode[0], (mode[1] - mode[0]) / L};
                M[j / 2][j % 2] += integral(&b, &AT_REST, SCT_BEAM_M + j / 2, x0, x1, line);
            }
        }
        ck_assert_double_eq_tol(N, 0, 1e-12);
        if (i < 16) ck_assert_double_eq_tol(T, 0, 1e-12);
        for (int j = 0; j < 4; ++j) ck_assert_double_eq_tol(M[j / 2][j % 2], 0, 1e-12);
    }
}
END_TEST

/* dM = int V, dV = int q, dN = -int q0 over every piece; jumps are the point loads there. */
START_TEST(diagrams_follow_the_loads)
{
    unsigned long long seed = 13;
    for (int i = 0; i < 100; ++i) {
        sct_beam_load load[9];
        member b;
        make_random(&b, &seed, i, 9, load);
        const sct_beam_state s = random_state(&seed);
        const double one[2] = {1, 0};
        for (int k = 0; k < b.line.n; ++k) {
            const double x0 = b.piece[k].x, x1 = k + 1 < b.line.n ? b.piece[k + 1].x : L;
            double at[SCT_BEAM_QUANTITIES], to[SCT_BEAM_QUANTITIES], next[SCT_BEAM_QUANTITIES], jump[6] = {0};
            sct_beam_values(&b.line, &s, k, x0, at);
            sct_beam_values(&b.line, &s, k, x1, to);
            for (int p = 0; p < 2; ++p) {
                ck_assert_double_eq_tol(to[SCT_BEAM_M + p] - at[SCT_BEAM_M + p],
                                        integral(&b, &s, SCT_BEAM_V + p, x0, x1, one), 1e-13);
            }
            if (k + 1 == b.line.n) break;
            sct_beam_values(&b.line, &s, k + 1, x1, next);
            for (int j = 0; j < 9; ++j) {
                if (!load[j].is_point || load[j].a != x1) continue;
                const double here[6] = {-load[j].F[0], load[j].F[1], load[j].F[2],
                                        -load[j].M[2], load[j].M[1], -load[j].M[0]};
                for (int d = 0; d < 6; ++d) jump[d] += here[d];
            }
            for (int d = 0; d < 6; ++d) ck_assert_double_eq_tol(next[d] - to[d], jump[d], 1e-13);
        }
    }
}
END_TEST

/* v(x) = -int G(x, y) (M(y)/EI + kappa) dy, G = min(x, y)(L - max(x, y))/L: the unit-load integral (Mohr). */
static double mohr(const member *b, const sct_beam_state *s, const sct_beam_bending *bend, double x)
{
    double v = -bend->kappa * x * (L - x) / 2;
    for (int k = 0; k < b->line.n; ++k) {
        const double x0 = b->piece[k].x, x1 = x0 + b->piece[k].h, mid = fmin(fmax(x, x0), x1);
        const double rising[2] = {0, (L - x) / L}, falling[2] = {x, -x / L};
        const int what = SCT_BEAM_M + bend->plane;
        if (mid > x0) v -= integral(b, s, what, x0, mid, rising) / bend->EI;
        if (mid < x1) v -= integral(b, s, what, mid, x1, falling) / bend->EI;
    }
    return v + bend->offset[0] * (1 - x / L) + bend->offset[1] * x / L;
}

START_TEST(deflection_is_the_integral_of_the_moments)
{
    unsigned long long seed = 14;
    for (int i = 0; i < 100; ++i) {
        sct_beam_load load[8];
        member b;
        make_random(&b, &seed, i, 8, load);
        const sct_beam_state s = random_state(&seed);
        const sct_beam_bending bend = {i % 2, 3, random_unit(&seed), {random_unit(&seed), random_unit(&seed)}};
        for (int j = 0; j <= 10; ++j) {
            const double x = L * j / 10;
            ck_assert_double_eq_tol(sct_beam_deflection(&b.line, &s, &bend, x), mohr(&b, &s, &bend, x), 1e-13);
        }
    }
}
END_TEST

START_TEST(cutting_a_load_in_two_leaves_the_diagrams)
{
    unsigned long long seed = 15;
    for (int i = 0; i < 100; ++i) {
        const double a = 0.3, c = 5.2, x = a + (c - a) * (random_unit(&seed) + 1) / 2;
        const double qa = random_unit(&seed), qc = random_unit(&seed), qx = qa + (qc - qa) * (x - a) / (c - a);
        const sct_beam_load parts[2] = {across(a, x, qa, qx), across(x, c, qx, qc)};
        member whole, cut;
        make_one(&whole, i & 1, (i & 2) != 0, across(a, c, qa, qc));
        make(&cut, i & 1, (i & 2) != 0, 2, parts);
        for (int j = 0; j <= 20; ++j) {
            const double at = L * j / 20;
            ck_assert_double_eq_tol(moment(&cut, at), moment(&whole, at), 1e-14);
            ck_assert_double_eq_tol(deflection(&cut, at), deflection(&whole, at), 1e-14 * 20 / EI);
        }
        for (int sign = -1; sign <= 1; sign += 2) {
            const sct_beam_extreme e = largest(&whole, SCT_BEAM_M, sign), f = largest(&cut, SCT_BEAM_M, sign);
            ck_assert_double_eq_tol(f.value, e.value, 1e-14);
        }
    }
}
END_TEST

/* ---- extremes ----------------------------------------------------------------------------------------------- */

static double weighted(const member *b, const sct_beam_state *s, const double c[], int piece, double x)
{
    double value[SCT_BEAM_QUANTITIES], sum = 0;
    sct_beam_values(&b->line, s, piece, x, value);
    for (int i = 0; i < SCT_BEAM_QUANTITIES; ++i) sum += c[i] * value[i];
    return sum;
}

/* An end of the member or of a piece, to the bit. */
static bool is_break(const member *b, double x)
{
    for (int k = 0; k < b->line.n; ++k) {
        if (b->piece[k].x == x) return true;
    }
    return x == L;
}

START_TEST(largest_is_never_below_a_sample_and_is_met_at_its_place)
{
    unsigned long long seed = 16;
    for (int i = 0; i < 300; ++i) {
        sct_beam_load load[7];
        member b;
        make_random(&b, &seed, i, i % 8, load);
        const sct_beam_state s = random_state(&seed);
        double c[SCT_BEAM_QUANTITIES] = {0};
        if (i % 3 == 0) {
            c[i / 3 % SCT_BEAM_QUANTITIES] = 1;
        } else {
            for (int j = 0; j < SCT_BEAM_QUANTITIES; ++j) c[j] = random_unit(&seed);
        }
        const sct_beam_extreme e = sct_beam_largest(&b.line, &s, c);
        ck_assert_double_eq_tol(weighted(&b, &s, c, e.piece, e.x), e.value, 1e-13);
        ck_assert(e.is_inside || is_break(&b, e.x));
        for (int k = 0; k < b.line.n; ++k) {
            for (int j = 0; j <= 300; ++j) {
                const double x = b.piece[k].x + b.piece[k].h * j / 300;
                ck_assert_double_le(weighted(&b, &s, c, k, x), e.value + 1e-14);
            }
        }
    }
}
END_TEST

START_TEST(largest_bow_is_never_below_a_sample_and_is_met_at_its_place)
{
    unsigned long long seed = 17;
    for (int i = 0; i < 300; ++i) {
        sct_beam_load load[7];
        member b;
        make_random(&b, &seed, i, i % 8, load);
        const sct_beam_state s = random_state(&seed);
        sct_beam_bending bend = {.plane = i % 2, .EI = 3, .kappa = random_unit(&seed) / 2};
        if (i % 5 == 0) bend.offset[1] = random_unit(&seed);
        const sct_beam_extreme e = sct_beam_largest_bow(&b.line, &s, &bend);
        ck_assert_double_eq_tol(sct_beam_deflection(&b.line, &s, &bend, e.x), e.value, 1e-14);
        ck_assert(e.is_inside || is_break(&b, e.x));
        for (int j = 0; j <= 1000; ++j) {
            ck_assert_double_le(fabs(sct_beam_deflection(&b.line, &s, &bend, L * j / 1000)), fabs(e.value) + 1e-15);
        }
    }
}
END_TEST

/* The envelope theorem, first and second order, against differences in the antisymmetric spring. */
START_TEST(curvature_tells_how_a_moving_maximum_bends)
{
    const double c[SCT_BEAM_QUANTITIES] = {[SCT_BEAM_M] = -1}, dS = 1e-3;
    member b;
    make_one(&b, false, false, across(0, L, w, 2 * w));
    double value[3];
    sct_beam_extreme e[3];
    for (int i = 0; i < 3; ++i) {
        const double S = 2 + (i - 1) * dS;
        const sct_beam_state s = {.M = {{-S, S}}};
        e[i] = sct_beam_largest(&b.line, &s, c);
        value[i] = e[i].value;
    }
    const double antisymmetric[2] = {-1, 1}, f = -sct_beam_mode_moment(L, antisymmetric, e[1].x), df = -2 / L;
    ck_assert(e[1].is_inside);
    ck_assert_double_eq_tol((value[2] - value[0]) / (2 * dS), f, 1e-9);
    ck_assert_double_eq_tol((value[2] - 2 * value[1] + value[0]) / (dS * dS), -df * df / e[1].curvature, 1e-6);
}
END_TEST

/* A maximum just where two loads meet smoothly still moves; a kink and an end stay. */
START_TEST(a_smooth_break_counts_as_inside)
{
    const sct_beam_load halves[2] = {across(0, L / 2, w, w), across(L / 2, L, w, w)};
    member b;
    make(&b, true, true, 2, halves);
    extreme_is(largest(&b, SCT_BEAM_M, -1), w * L * L / 8, L / 2, true);
    ck_close(largest(&b, SCT_BEAM_M, -1).curvature, -w, 1e-14);
    make_one(&b, true, true, force_at(L / 2, P));
    ck_assert(!largest(&b, SCT_BEAM_M, -1).is_inside);
}
END_TEST

START_TEST(of_equal_places_the_first_is_told)
{
    const sct_beam_load pair[2] = {force_at(2, P), force_at(4, P)};
    member b;
    make(&b, true, true, 2, pair);
    extreme_is(largest(&b, SCT_BEAM_M, -1), 2 * P, 2, false);
    make(&b, false, false, 0, NULL);
    extreme_is(largest(&b, SCT_BEAM_T, 1), 0, 0, false);
    unsigned long long seed = 19;
    for (int i = 0; i < 100; ++i) { /* symmetric loads, equal moments at both ends but for rounding */
        const double a = 1 + random_unit(&seed), q = 2 + random_unit(&seed);
        const sct_beam_load both[3] = {across(0, L, q, q), force_at(a, q), force_at(L - a, q)};
        make(&b, false, false, 3, both);
        ck_assert(largest(&b, SCT_BEAM_M, 1).x == 0);
    }
}
END_TEST

START_TEST(a_number_that_is_none_comes_back)
{
    const double c[SCT_BEAM_QUANTITIES] = {[SCT_BEAM_N] = 1};
    member b;
    make(&b, true, true, 0, NULL);
    const sct_beam_state bad = {.N = NAN, .M = {{NAN, 0}}};
    ck_assert(isnan(sct_beam_largest(&b.line, &bad, c).value));
    ck_assert(isnan(sct_beam_largest_bow(&b.line, &bad, &IN_PLANE).value));
    make_one(&b, true, true, (sct_beam_load){.is_point = true, .a = 3, .b = 3, .F = {NAN, 0, 0}});
    ck_assert(isnan(largest(&b, SCT_BEAM_N, 1).value));
    const sct_beam_piece half[2] = {{.x = 0, .h = L / 2, .N = NAN}, {.x = L / 2, .h = L / 2, .N = 1}};
    const sct_beam_line line = {.L = L, .n = 2, .piece = half};
    ck_assert(isnan(sct_beam_largest(&line, &AT_REST, c).value));
}
END_TEST

/* hand: dv/dS = mode_bow / EI, dM/dS = mode_moment, dV/dS = (m1 - m0)/L, all linear in S */
START_TEST(influence_of_a_spring_is_what_its_unit_changes)
{
    unsigned long long seed = 18;
    sct_beam_load load[5];
    member b;
    make_random(&b, &seed, 0, 5, load);
    const sct_beam_hinges hinges = hinged(false, false);
    for (int k = 0; k < 2; ++k) {
        double mode[2];
        sct_beam_mode(&hinges, 0, k, mode);
        const sct_beam_state with = {.M = {{mode[0], mode[1]}}};
        for (int j = 0; j <= 10; ++j) {
            const double x = L * j / 10;
            ck_assert_double_eq_tol(value_at(&b, &with, SCT_BEAM_M, x, 1) - value_at(&b, &AT_REST, SCT_BEAM_M, x, 1),
                                    sct_beam_mode_moment(L, mode, x), 1e-14);
            ck_assert_double_eq_tol(value_at(&b, &with, SCT_BEAM_V, x, 1) - value_at(&b, &AT_REST, SCT_BEAM_V, x, 1),
                                    (mode[1] - mode[0]) / L, 1e-14);
            ck_assert_double_eq_tol(sct_beam_deflection(&b.line, &with, &IN_PLANE, x) - deflection(&b, x),
                                    sct_beam_mode_bow(L, mode, x) / EI, 1e-18);
        }
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("beam diagram");
    TCase *tc = tcase_create("beam diagram");
    tcase_add_test(tc, simple_member_uniform_load);
    tcase_add_test(tc, simple_member_point_force);
    tcase_add_test(tc, simple_member_triangular_load);
    tcase_add_test(tc, simple_member_point_moment);
    tcase_add_test(tc, fixed_member_uniform_load);
    tcase_add_test(tc, fixed_member_point_force);
    tcase_add_test(tc, propped_member_uniform_load);
    tcase_add_test(tc, propped_member_point_force_in_the_middle);
    tcase_add_test(tc, cantilever_by_its_springs);
    tcase_add_test(tc, warm_member_bows_against_its_ends);
    tcase_add_test(tc, bar_under_its_weight);
    tcase_add_test(tc, pieces_cover_the_member_without_gaps);
    tcase_add_test(tc, diagram_ends_where_the_other_joint_takes_over);
    tcase_add_test(tc, held_part_is_orthogonal_to_the_springs);
    tcase_add_test(tc, diagrams_follow_the_loads);
    tcase_add_test(tc, deflection_is_the_integral_of_the_moments);
    tcase_add_test(tc, cutting_a_load_in_two_leaves_the_diagrams);
    tcase_add_test(tc, largest_is_never_below_a_sample_and_is_met_at_its_place);
    tcase_add_test(tc, largest_bow_is_never_below_a_sample_and_is_met_at_its_place);
    tcase_add_test(tc, curvature_tells_how_a_moving_maximum_bends);
    tcase_add_test(tc, a_smooth_break_counts_as_inside);
    tcase_add_test(tc, of_equal_places_the_first_is_told);
    tcase_add_test(tc, a_number_that_is_none_comes_back);
    tcase_add_test(tc, influence_of_a_spring_is_what_its_unit_changes);
    suite_add_tcase(suite, tc);
    return run_suite(suite);
}

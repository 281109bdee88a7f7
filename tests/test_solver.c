/* Tests of analysis/solver.c and recovery.c: closed forms, published answers, and facts true of every truss.
 * Printed numbers are compared within half a unit of their last digit; everything that can be written as a closed
 * expression, and all bar forces of determinate trusses (from the equilibrium of the joints by LAPACK), to 1e-9. */
#include "solved.h"

#include <cholmod.h>

#include "analysis/sensitivity.h"
#include "count_memory.h"

/* LAPACK: dense LU and Cholesky solvers; the independent paths. */
void dgesv_(const int *n, const int *nrhs, double *a, const int *lda, int *pivots, double *b, const int *ldb,
            int *info);
void dposv_(const char *uplo, const int *n, const int *nrhs, double *a, const int *lda, double *b, const int *ldb,
            int *info);

/* ---- building plane and space trusses from tables --------------------------------------------------------------- */

/* One material and one group with the axial stiffness EA. */
static sct_model *truss(int dim, int n_joints, double at[][3], int n_bars, int ends[][2], double EA)
{
    sct_model *m = mb_new(dim);
    mb_group(m, mb_material(m, 1.0, 0.0, 12e-6), EA, true);
    for (int j = 0; j < n_joints; j++) mb_joint(m, at[j][0], at[j][1], at[j][2]);
    for (int e = 0; e < n_bars; e++) mb_bar(m, ends[e][0], ends[e][1], 0);
    mb_case(m, 0.0);
    return m;
}

/* Pin at one joint, roller on a horizontal floor at another. */
static void on_pin_and_roller(sct_model *m, int pin, int roller)
{
    mb_pin(m, pin);
    mb_hold(m, roller, 0, 1, 0);
}

/* Half a unit of the last printed digit, for numbers of `digits` significant digits. */
static double printed(double value, int digits)
{
    return 0.51 * pow(10.0, floor(log10(fabs(value))) + 1 - digits);
}
#define ck_printed(value, number, digits) ck_assert_double_eq_tol(value, number, printed(number, digits))

/* The size of forces in case k: the largest, or what the prescribed elongations would take in a rigid frame. */
static double largest_force(const solved *s, int k)
{
    double largest = 0.0;
    for (int e = 0; e < s->st->n_bars; e++) {
        const sct_bar *bar = &s->st->bars[e];
        const double prescribed = s->st->stretch[k * s->st->n_bars + e] * bar->E * s->A[bar->group] / bar->L;
        largest = fmax(largest, fmax(fabs(force(s, k, e)), fabs(prescribed)));
    }
    return largest;
}

/* Bar forces of case k of a determinate truss from joint equilibrium alone: sum over bars of B N = -f. */
static void check_statics(const solved *s, int k)
{
    const sct_structure *st = s->st;
    const int n = st->n_dof, one = 1;
    ck_assert_int_eq(st->n_bars, n);
    double *B = calloc((size_t)(n * n), sizeof *B), *N = calloc((size_t)n, sizeof *N);
    int *pivots = calloc((size_t)n, sizeof *pivots), info;
    for (int e = 0; e < n; e++) {
        const sct_spring *bar = &st->springs[e];
        for (int i = 0; i < bar->n_dof; i++) B[e * n + bar->dof[i]] = bar->b[i]; /* B N = f: pull back what is loaded */
    }
    memcpy(N, st->f + (size_t)k * (size_t)n, (size_t)n * sizeof *N);
    dgesv_(&n, &one, B, &n, pivots, N, &n, &info);
    ck_assert_int_eq(info, 0);
    for (int e = 0; e < n; e++) ck_assert_double_eq_tol(force(s, k, e), N[e], 1e-9 * largest_force(s, k));
    free(B);
    free(N);
    free(pivots);
}

/* Loads and reactions balance in forces and moments, every joint is in equilibrium, and f'u = 2 x strain energy. */
static void check_balance(const solved *s, int combination, bool by_loads_only)
{
    const sct_structure *st = s->st;
    const int n = st->n_joints;
    double *load = loads_of(s, combination), *reaction = reactions_of(s, combination);
    double *N = calloc((size_t)st->n_bars, sizeof *N), *u = calloc((size_t)(3 * n), sizeof *u);
    double *joint = calloc((size_t)(3 * n), sizeof *joint);
    sct_combine_forces(st, &s->r, combination, N);
    sct_combine_displacements(st, &s->r, combination, u);
    double sum[6] = {0}, largest = by_loads_only ? 0.0 : largest_force(s, combination), reach = 0.0, work = 0.0,
           energy = 0.0;
    for (int j = 0; j < n; j++) {
        const double *x = st->model->joints[j].at;
        double F[3];
        for (int i = 0; i < 3; i++) {
            F[i] = load[3 * j + i] + reaction[3 * j + i];
            sum[i] += F[i];
            joint[3 * j + i] += F[i];
            largest = fmax(largest, fmax(fabs(load[3 * j + i]), fabs(reaction[3 * j + i])));
            reach = fmax(reach, fabs(x[i]));
            work += load[3 * j + i] * u[3 * j + i];
        }
        sum[3] += x[1] * F[2] - x[2] * F[1];
        sum[4] += x[2] * F[0] - x[0] * F[2];
        sum[5] += x[0] * F[1] - x[1] * F[0];
    }
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        largest = fmax(largest, fabs(N[e]));
        energy += N[e] * N[e] * bar->L / (bar->E * s->A[bar->group]);
        for (int i = 0; i < 3; i++) {
            joint[3 * bar->from + i] += N[e] * bar->axes[0][i];
            joint[3 * bar->to + i] -= N[e] * bar->axes[0][i];
        }
    }
    for (int i = 0; i < 3; i++) ck_assert_double_eq_tol(sum[i], 0.0, 1e-9 * largest);
    for (int i = 3; i < 6; i++) ck_assert_double_eq_tol(sum[i], 0.0, 1e-9 * largest * (reach + 1e-300));
    for (int i = 0; i < 3 * n; i++) ck_assert_double_eq_tol(joint[i], 0.0, 1e-9 * largest);
    if (by_loads_only) ck_assert_double_eq_tol(work, energy, 1e-9 * fabs(energy));
    free(load);
    free(reaction);
    free(N);
    free(u);
    free(joint);
}

/* Compares the first n bars with a list; NAN: not stated. */
static void check_forces(const solved *s, int k, int n, const double N[], double tol)
{
    const double largest = largest_force(s, k);
    for (int e = 0; e < n; e++) {
        if (!isnan(N[e])) ck_assert_double_eq_tol(force(s, k, e), N[e], tol * largest);
    }
}

/* ---- textbook answers [doc: Beer and Johnston, Vector Mechanics: Statics, chapter 6 solutions] --------------------
 */

START_TEST(bracket_with_short_link_T1)
{
    sct_model *m = truss(2, 3, (double[][3]){{3, 7.2}, {0, 3.2}, {0, 0}}, 3, (int[][2]){{0, 1}, {1, 2}, {0, 2}}, 1e5);
    mb_pin(m, 1);
    mb_hold(m, 2, 1, 0, 0);
    mb_load(m, 0, 0, 48, 0, 0);
    solved s = solve(m);
    check_forces(&s, 0, 3, (double[]){180, 144, -156}, 1e-12);
    check_statics(&s, 0);
    double *reaction = reactions_of(&s, 0);
    ck_close(reaction[3], -108.0, 1e-12);
    ck_close(reaction[6], 60.0, 1e-12);
    free(reaction);
    solved_free(&s);
}
END_TEST

START_TEST(bracket_with_strut_T2)
{
    sct_model *m =
        truss(2, 3, (double[][3]){{0, 0}, {3, -1.25}, {0, -5.25}}, 3, (int[][2]){{0, 1}, {0, 2}, {1, 2}}, 1e5);
    mb_pin(m, 0);
    mb_hold(m, 2, 1, 0, 0);
    mb_load(m, 0, 1, 0, -84, 0);
    solved s = solve(m);
    check_forces(&s, 0, 3, (double[]){52, 64, -80}, 1e-12);
    check_statics(&s, 0);
    double *reaction = reactions_of(&s, 0);
    ck_close(reaction[6], 48.0, 1e-12);
    free(reaction);
    solved_free(&s);
}
END_TEST

/* ---- roof forms [calc: joint equilibrium; deflections by a separate direct-stiffness calculation] -----------------
 */

START_TEST(king_post)
{
    sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {8, 0}, {4, 2}, {4, 0}}, 5,
                         (int[][2]){{0, 3}, {3, 1}, {0, 2}, {2, 1}, {2, 3}}, 210e3);
    on_pin_and_roller(m, 0, 1);
    mb_load(m, 0, 2, 0, -10, 0);
    mb_load(m, 0, 3, 0, -4, 0);
    solved s = solve(m);
    const double rafter = -7.0 * sqrt(5.0); /* -15.6525 */
    check_forces(&s, 0, 5, (double[]){14, 14, rafter, rafter, 4}, 1e-12);
    check_statics(&s, 0);
    solved_free(&s);
}
END_TEST

/* Six panels of 2 m, rise 3: L0..L6 are joints 0..6, U1..U5 joints 7..11. Bars: bottom 0-5, top 6-11, posts 12-16, then
 * four diagonals. 10 down at U1..U5. */
static solved solve_pitched(bool is_howe)
{
    double at[12][3] = {{0}};
    int ends[21][2], n = 0;
    for (int i = 0; i <= 6; i++) at[i][0] = 2.0 * i;
    for (int i = 1; i <= 5; i++) memcpy(at[6 + i], (double[3]){2.0 * i, i <= 3 ? i : 6 - i, 0}, sizeof at[0]);
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i, i + 1}, sizeof ends[0]);
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i == 0 ? 0 : 6 + i, i == 5 ? 6 : 7 + i}, sizeof ends[0]);
    for (int i = 1; i <= 5; i++) memcpy(ends[n++], (int[2]){i, 6 + i}, sizeof ends[0]);
    static const int HOWE[4][2] = {{7, 2}, {8, 3}, {10, 3}, {11, 4}}, PRATT[4][2] = {{1, 8}, {2, 9}, {4, 9}, {5, 10}};
    for (int i = 0; i < 4; i++) memcpy(ends[n++], is_howe ? HOWE[i] : PRATT[i], sizeof ends[0]);
    sct_model *m = truss(2, 12, at, n, ends, 210e3);
    on_pin_and_roller(m, 0, 6);
    for (int i = 1; i <= 5; i++) mb_load(m, 0, 6 + i, 0, -10, 0);
    return solve(m);
}

START_TEST(howe_pitched)
{
    solved s = solve_pitched(true);
    const double r5 = sqrt(5.0), r2 = sqrt(2.0);
    check_forces(&s, 0, 21, (double[]){50,       50, 40, 40, 50, 50, -25 * r5, -20 * r5, -15 * r5, -15 * r5, -20 * r5,
                                       -25 * r5, 0,  5,  20, 5,  0,  -5 * r5,  -10 * r2, -10 * r2, -5 * r5},
                 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 3, 1), -6.146764e-3, 7);
    solved_free(&s);
}
END_TEST

START_TEST(pratt_pitched)
{
    solved s = solve_pitched(false);
    const double r5 = sqrt(5.0), r2 = sqrt(2.0), r13 = sqrt(13.0);
    check_forces(&s, 0, 21,
                 (double[]){50,       40,  30,  30, 40,  50,  -25 * r5, -25 * r5, -20 * r5, -20 * r5, -25 * r5,
                            -25 * r5, -10, -15, 0,  -15, -10, 10 * r2,  5 * r13,  5 * r13,  10 * r2},
                 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 3, 1), -6.012494e-3, 7);
    solved_free(&s);
}
END_TEST

START_TEST(pratt_parallel)
{
    double at[14][3] = {{0}}; /* L0..L6 joints 0..6, U0..U6 joints 7..13 */
    int ends[25][2], n = 0;
    for (int i = 0; i <= 6; i++) {
        at[i][0] = at[7 + i][0] = 3.0 * i;
        at[7 + i][1] = 3.0;
    }
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i, i + 1}, sizeof ends[0]);
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){7 + i, 8 + i}, sizeof ends[0]);
    for (int i = 0; i <= 6; i++) memcpy(ends[n++], (int[2]){i, 7 + i}, sizeof ends[0]);
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i < 3 ? 7 + i : 8 + i, i < 3 ? i + 1 : i}, sizeof ends[0]);
    sct_model *m = truss(2, 14, at, n, ends, 210e3);
    on_pin_and_roller(m, 0, 6);
    for (int i = 0; i <= 6; i++) mb_load(m, 0, 7 + i, 0, i == 0 || i == 6 ? -10 : -20, 0);
    solved s = solve(m);
    const double r2 = sqrt(2.0);
    check_forces(&s, 0, 25,
                 (double[]){0,   50,  80,  80,  50,  0,   -50,     -80,     -90,     -90,     -80,     -50,    -60,
                            -50, -30, -20, -30, -50, -60, 50 * r2, 30 * r2, 10 * r2, 10 * r2, 30 * r2, 50 * r2},
                 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 3, 1), -1.549369e-2, 7);
    solved_free(&s);
}
END_TEST

START_TEST(warren)
{
    double at[9][3] = {{0}}; /* bottom joints 0..4, top joints 5..8 */
    int ends[15][2], n = 0;
    for (int i = 0; i <= 4; i++) at[i][0] = 2.5 * i;
    for (int i = 0; i < 4; i++) memcpy(at[5 + i], (double[3]){2.5 * i + 1.25, 1.25, 0}, sizeof at[0]);
    for (int i = 0; i < 4; i++) memcpy(ends[n++], (int[2]){i, i + 1}, sizeof ends[0]);
    for (int i = 0; i < 3; i++) memcpy(ends[n++], (int[2]){5 + i, 6 + i}, sizeof ends[0]);
    for (int i = 0; i < 4; i++) {
        memcpy(ends[n++], (int[2]){i, 5 + i}, sizeof ends[0]);
        memcpy(ends[n++], (int[2]){5 + i, i + 1}, sizeof ends[0]);
    }
    sct_model *m = truss(2, 9, at, n, ends, 210e3);
    on_pin_and_roller(m, 0, 4);
    for (int i = 0; i < 4; i++) mb_load(m, 0, 5 + i, 0, -20, 0);
    solved s = solve(m);
    const double d = 20 * sqrt(2.0);
    check_forces(&s, 0, 15, (double[]){40, 80, 80, 40, -60, -80, -60, -2 * d, d, -d, 0, 0, -d, d, -2 * d}, 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 2, 1), -8.013537e-3, 7);
    double *reaction = reactions_of(&s, 0);
    ck_close(reaction[1], 40.0, 1e-12);
    ck_close(reaction[3 * 4 + 1], 40.0, 1e-12);
    free(reaction);
    solved_free(&s);
}
END_TEST

START_TEST(fink_under_full_half_and_uplift_loads)
{
    enum { A, B, C, D, E, F, G };
    sct_model *m = truss(
        2, 7, (double[][3]){{0, 0}, {3, 0}, {6, 0}, {9, 0}, {2.25, 1.125}, {4.5, 2.25}, {6.75, 1.125}}, 11,
        (int[][2]){{A, B}, {B, C}, {C, D}, {A, E}, {E, F}, {F, G}, {G, D}, {E, B}, {B, F}, {F, C}, {C, G}}, 210e3);
    const double r5 = sqrt(5.0), r13 = sqrt(13.0);
    on_pin_and_roller(m, A, D);
    for (int j = E; j <= G; j++) mb_load(m, 0, j, 0, -6, 0);
    mb_case(m, 0.0);
    mb_load(m, 1, E, 0, -6, 0);
    mb_load(m, 1, F, 0, -3, 0);
    mb_case(m, 0.0); /* 3 normal to the slope at E and G, half at A, D and twice half at F */
    mb_load(m, 2, A, -1.5 / r5, 3 / r5, 0);
    mb_load(m, 2, E, -3 / r5, 6 / r5, 0);
    mb_load(m, 2, F, 0, 6 / r5, 0);
    mb_load(m, 2, G, 3 / r5, 6 / r5, 0);
    mb_load(m, 2, D, 1.5 / r5, 3 / r5, 0);
    solved s = solve(m);
    check_forces(
        &s, 0, 11,
        (double[]){18, 12, 18, -9 * r5, -7.5 * r5, -7.5 * r5, -9 * r5, -1.5 * r13, 1.5 * r13, 1.5 * r13, -1.5 * r13},
        1e-9);
    check_forces(&s, 1, 11, (double[]){12, 6, 6, -6 * r5, -4.5 * r5, -3 * r5, -3 * r5, -1.5 * r13, 1.5 * r13, 0, 0},
                 1e-9);
    static const double UPLIFT[] = {-7.3790, -4.0249, NAN, 9.0, 8.625, NAN, NAN, 3.0233, -3.0233};
    for (int e = 0; e < 9; e++) {
        if (!isnan(UPLIFT[e])) ck_assert_double_eq_tol(force(&s, 2, e), UPLIFT[e], 0.51e-4);
    }
    for (int k = 0; k < 3; k++) check_statics(&s, k);
    double *reaction = reactions_of(&s, 2);
    ck_printed(reaction[3 * A + 1], -5.366563, 7);
    ck_printed(reaction[3 * D + 1], -5.366563, 7);
    free(reaction);
    solved_free(&s);
}
END_TEST

START_TEST(bowstring_of_a_parabola_has_idle_webs_under_uniform_load)
{
    double at[12][3] = {{0}}; /* L0..L6 joints 0..6, U1..U5 joints 7..11 */
    int ends[21][2], n = 0;
    for (int i = 0; i <= 6; i++) at[i][0] = 2.0 * i;
    for (int i = 1; i <= 5; i++) {
        const double x = 2.0 * i, t = (x - 6.0) / 6.0;
        memcpy(at[6 + i], (double[3]){x, 2.0 * (1.0 - t * t), 0}, sizeof at[0]);
    }
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i, i + 1}, sizeof ends[0]);
    for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i == 0 ? 0 : 6 + i, i == 5 ? 6 : 7 + i}, sizeof ends[0]);
    for (int i = 1; i <= 5; i++) memcpy(ends[n++], (int[2]){i, 6 + i}, sizeof ends[0]);
    static const int WEBS[4][2] = {{7, 2}, {8, 3}, {10, 3}, {11, 4}};
    for (int i = 0; i < 4; i++) memcpy(ends[n++], WEBS[i], sizeof ends[0]);
    sct_model *m = truss(2, 12, at, n, ends, 210e3);
    on_pin_and_roller(m, 0, 6);
    for (int i = 1; i <= 5; i++) mb_load(m, 0, 6 + i, 0, -10, 0);
    mb_case(m, 0.0);
    for (int i = 1; i <= 3; i++) mb_load(m, 1, 6 + i, 0, i == 3 ? -5 : -10, 0);
    solved s = solve(m);
    static const double TOP[] = {-51.4782, -47.4342, -45.2769};
    for (int e = 0; e < 6; e++) {
        ck_close(force(&s, 0, e), 45.0, 1e-9);
        ck_close(force(&s, 0, 6 + e), -45.0 * s.st->bars[6 + e].L / 2.0, 1e-9); /* horizontal component 45 */
        ck_printed(force(&s, 0, 6 + e), TOP[e < 3 ? e : 5 - e], 6);
    }
    for (int e = 12; e < 21; e++) ck_assert_double_eq_tol(force(&s, 0, e), 0.0, 45e-9);
    static const double HALF[] = {31.5,     31.5,     28.125,   16.875,   13.5,     13.5,   -36.0347,
                                  -29.6464, -22.6385, -22.6385, -17.7878, -15.4434, NAN,    1.875,
                                  NAN,      -1.875,   NAN,      -3.8609,  -7.5260,  7.5260, 3.8609};
    for (int e = 0; e < 21; e++) {
        if (!isnan(HALF[e])) ck_assert_double_eq_tol(force(&s, 1, e), HALF[e], 0.51e-4);
    }
    for (int k = 0; k < 2; k++) check_statics(&s, k);
    solved_free(&s);
}
END_TEST

START_TEST(north_light)
{
    enum { A, B, C, D, E, F, G };
    sct_model *m = truss(
        2, 7, (double[][3]){{0, 0}, {2, 0}, {4, 0}, {6, 0}, {2, 1}, {4, 2}, {6, 3}}, 11,
        (int[][2]){{A, B}, {B, C}, {C, D}, {A, E}, {E, F}, {F, G}, {D, G}, {E, B}, {F, C}, {B, F}, {C, G}}, 210e3);
    const double r5 = sqrt(5.0);
    on_pin_and_roller(m, A, D);
    mb_load(m, 0, E, 0, -4, 0);
    mb_load(m, 0, F, 0, -4, 0);
    mb_load(m, 0, G, 0, -2, 0);
    solved s = solve(m);
    check_forces(&s, 0, 11, (double[]){8, 4, 0, -4 * r5, -4 * r5, -2 * r5, -6, -4, -6, 4 * sqrt(2.0), 2 * sqrt(13.0)},
                 1e-9);
    check_statics(&s, 0);
    solved_free(&s);
}
END_TEST

START_TEST(scissor_spreads_at_its_roller)
{
    enum { A, B, C, D, E, F };
    sct_model *m = truss(2, 6, (double[][3]){{0, 0}, {8, 0}, {4, 3}, {2, 1.5}, {6, 1.5}, {4, 1}}, 9,
                         (int[][2]){{A, D}, {D, C}, {C, E}, {E, B}, {A, F}, {F, B}, {F, C}, {D, F}, {E, F}}, 210e3);
    const double r17 = sqrt(17.0);
    on_pin_and_roller(m, A, B);
    for (int j = C; j <= E; j++) mb_load(m, 0, j, 0, -5, 0);
    solved s = solve(m);
    check_forces(&s, 0, 9,
                 (double[]){-18.75, -12.5, -12.5, -18.75, 3.75 * r17, 3.75 * r17, 10, -1.25 * r17, -1.25 * r17}, 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, B, 0), 1.475201e-3, 7);
    ck_printed(moved(&s, 0, C, 1), -1.603507e-3, 7);
    solved_free(&s);
}
END_TEST

/* ---- statically indeterminate -------------------------------------------------------------------------------------
 */

START_TEST(braced_square_under_load_and_heat)
{
    const double EA = 1e5;
    sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {3, 0}, {3, 3}, {0, 3}}, 6,
                         (int[][2]){{0, 1}, {1, 2}, {2, 3}, {3, 0}, {0, 2}, {1, 3}}, EA);
    on_pin_and_roller(m, 0, 1);
    mb_load(m, 0, 3, 10, 0, 0);
    mb_case(m, 0.0);
    mb_act(m, 1, 4, 40, 0); /* diagonal 1-3 heated 40 K */
    mb_case(m, 0.0);
    mb_act(m, 2, 4, 0, 12e-6 * 40 * 3 * sqrt(2.0)); /* and made longer by as much */
    solved s = solve(m);
    const double d = 5 * sqrt(2.0), heated = -EA * 12e-6 * 40 / (2 + sqrt(2.0)), side = -heated / sqrt(2.0);
    check_forces(&s, 0, 6, (double[]){5, -5, -5, 5, d, -d}, 1e-9);
    ck_printed(moved(&s, 0, 3, 0), 7.242641e-4, 7);
    ck_printed(moved(&s, 0, 3, 1), 1.5e-4, 2);
    ck_printed(heated, -14.05887, 7);
    for (int k = 1; k < 3; k++) check_forces(&s, k, 6, (double[]){side, side, side, side, heated, heated}, 1e-9);
    for (int k = 0; k < 3; k++) check_balance(&s, k, k == 0);
    solved_free(&s);
}
END_TEST

START_TEST(three_bars_under_load_settlement_and_heat)
{
    const double EA = 105e3, c = 0.8;
    sct_model *m =
        truss(2, 4, (double[][3]){{0, 0}, {-3, 4}, {0, 4}, {3, 4}}, 3, (int[][2]){{0, 1}, {0, 2}, {0, 3}}, EA);
    for (int j = 1; j < 4; j++) mb_pin(m, j);
    mb_load(m, 0, 0, 0, -100, 0);
    mb_case(m, 0.0);
    mb_settle(m, 1, 2, 0, -0.005, 0);
    mb_case(m, 0.0);
    mb_act(m, 2, 1, 50, 0);
    solved s = solve(m);
    const double middle = 100 / (1 + 2 * c * c * c), side = middle * c * c;
    check_forces(&s, 0, 3, (double[]){side, middle, side}, 1e-12);
    ck_close(moved(&s, 0, 0, 1), -middle * 4 / EA, 1e-12);
    ck_printed(moved(&s, 0, 0, 1), -1.882176e-3, 7);
    static const double MIDDLE[] = {49.40711, -66.40316, -31.87352}, SIDE[] = {31.62055, 41.50198, 19.92095};
    for (int k = 0; k < 3; k++) {
        ck_printed(force(&s, k, 1), MIDDLE[k], 7);
        ck_printed(force(&s, k, 0), SIDE[k], 7);
        ck_close(force(&s, k, 2), force(&s, k, 0), 1e-12);
        check_balance(&s, k, k == 0);
    }
    ck_printed(moved(&s, 1, 0, 1), -2.470356e-3, 7);
    ck_close(moved(&s, 1, 2, 1), -0.005, 1e-15);
    solved_free(&s);
}
END_TEST

/* ---- three dimensions ---------------------------------------------------------------------------------------------
 */

START_TEST(tripod)
{
    const double h = 1.5 * sqrt(3.0);
    sct_model *m = truss(3, 4, (double[][3]){{0, 0, 4}, {3, 0, 0}, {-1.5, h, 0}, {-1.5, -h, 0}}, 3,
                         (int[][2]){{0, 1}, {0, 2}, {0, 3}}, 210e3);
    for (int j = 1; j < 4; j++) mb_pin(m, j);
    mb_load(m, 0, 0, 10, 0, -30);
    solved s = solve(m);
    check_forces(&s, 0, 3, (double[]){-425.0 / 18, -125.0 / 18, -125.0 / 18}, 1e-9); /* -23.61111, -6.944444 */
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 0, 0), 4.409171e-4, 7);
    ck_printed(moved(&s, 0, 0, 2), -3.720238e-4, 7);
    ck_assert_double_eq_tol(moved(&s, 0, 0, 1), 0.0, 1e-12);
    solved_free(&s);
}
END_TEST

START_TEST(skew_tripod)
{
    sct_model *m = truss(3, 4, (double[][3]){{1, 2, 3}, {0, 0, 0}, {4, 0, 0}, {0, 4, 0}}, 3,
                         (int[][2]){{0, 1}, {0, 2}, {0, 3}}, 210e3);
    for (int j = 1; j < 4; j++) mb_pin(m, j);
    mb_load(m, 0, 0, 0, 0, -12);
    solved s = solve(m);
    check_forces(&s, 0, 3, (double[]){-sqrt(14.0), -sqrt(22.0), -2 * sqrt(14.0)}, 1e-9);
    check_statics(&s, 0);
    static const double REACTION[] = {1, 2, 3, -3, 2, 3, 2, -4, 6};
    double *reaction = reactions_of(&s, 0);
    for (int i = 0; i < 9; i++) ck_close(reaction[3 + i], REACTION[i], 1e-9);
    free(reaction);
    solved_free(&s);
}
END_TEST

START_TEST(cone_of_six_ribs)
{
    double at[7][3] = {{0, 0, 2}};
    int ends[6][2];
    const double turn = 2 * acos(-1.0) / 6;
    for (int i = 0; i < 6; i++) {
        memcpy(at[1 + i], (double[3]){5 * cos(i * turn), 5 * sin(i * turn), 0}, sizeof at[0]);
        memcpy(ends[i], (int[2]){0, 1 + i}, sizeof ends[0]);
    }
    sct_model *m = truss(3, 7, at, 6, ends, 1e5);
    for (int j = 1; j < 7; j++) mb_pin(m, j);
    mb_load(m, 0, 0, 0, 0, -60);
    solved s = solve(m);
    double *reaction = reactions_of(&s, 0);
    for (int i = 0; i < 6; i++) {
        ck_close(force(&s, 0, i), -5 * sqrt(29.0), 1e-9);
        ck_close(reaction[3 * (i + 1) + 2], 10.0, 1e-9);
        ck_close(hypot(reaction[3 * (i + 1)], reaction[3 * (i + 1) + 1]), 25.0, 1e-9);
    }
    ck_printed(moved(&s, 0, 0, 2), -3.904244e-3, 7);
    free(reaction);
    solved_free(&s);
}
END_TEST

START_TEST(one_bay_square_tower)
{
    double at[8][3];
    int ends[12][2], n = 0;
    static const double CORNER[4][2] = {{-1, -1}, {1, -1}, {1, 1}, {-1, 1}};
    for (int i = 0; i < 8; i++)
        memcpy(at[i], (double[3]){CORNER[i % 4][0], CORNER[i % 4][1], i < 4 ? 0 : 2}, sizeof at[0]);
    for (int i = 0; i < 4; i++) memcpy(ends[n++], (int[2]){i, 4 + i}, sizeof ends[0]);               /* legs */
    for (int i = 0; i < 4; i++) memcpy(ends[n++], (int[2]){4 + i, 4 + (i + 1) % 4}, sizeof ends[0]); /* ring */
    for (int i = 0; i < 4; i++) memcpy(ends[n++], (int[2]){i, 4 + (i + 1) % 4}, sizeof ends[0]);     /* diagonals */
    sct_model *m = truss(3, 8, at, n, ends, 1e5);
    for (int j = 0; j < 4; j++) mb_pin(m, j);
    mb_load(m, 0, 4, 10, 0, 0);
    solved s = solve(m);
    check_forces(&s, 0, 12, (double[]){0, -10, 0, 0, -10, 0, 0, 0, 10 * sqrt(2.0), 0, 0, 0}, 1e-9);
    check_statics(&s, 0);
    solved_free(&s);
}
END_TEST

/* ---- published worked examples ------------------------------------------------------------------------------------
 */

/* T. R. Chandrupatla and A. D. Belegundu, Introduction to Finite Elements in Engineering, truss example (numbers from
 * memory; in, lb, psi). */
START_TEST(four_bar_truss_of_Chandrupatla_and_Belegundu)
{
    sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {40, 0}, {40, 30}, {0, 30}}, 4,
                         (int[][2]){{0, 1}, {2, 1}, {0, 2}, {3, 2}}, 29.5e6);
    mb_pin(m, 0);
    mb_hold(m, 1, 0, 1, 0);
    mb_pin(m, 3);
    mb_load(m, 0, 1, 20000, 0, 0);
    mb_load(m, 0, 2, 0, -25000, 0);
    solved s = solve(m);
    check_forces(&s, 0, 4, (double[]){20000, -21875, -62500.0 / 12, 12500.0 / 3}, 1e-9); /* 20000 -21880 -5208 4167 */
    ck_printed(moved(&s, 0, 1, 0), 0.02712, 4);
    ck_printed(moved(&s, 0, 2, 0), 0.00565, 3);
    ck_printed(moved(&s, 0, 2, 1), -0.02225, 4);
    solved_free(&s);
}
END_TEST

/* D. L. Logan, A First Course in the Finite Element Method, plane-truss example 3.5 (from memory; in, lb, psi). The
 * printed middle stress 1471 comes from rounded displacements; exact is 1464.466. */
START_TEST(three_bar_truss_of_Logan)
{
    sct_model *m = mb_new(2);
    mb_group(m, mb_material(m, 3e7, 0, NAN), 2.0, true);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 0, 120, 0);
    mb_joint(m, 120, 120, 0);
    mb_joint(m, 120, 0, 0);
    for (int j = 1; j < 4; j++) {
        mb_pin(m, j);
        mb_bar(m, 0, j, 0);
    }
    mb_case(m, 0.0);
    mb_load(m, 0, 0, 0, -10000, 0);
    solved s = solve(m);
    ck_printed(moved(&s, 0, 0, 0), 0.00414, 3);
    ck_printed(moved(&s, 0, 0, 1), -0.0159, 3);
    static const double STRESS[] = {3964.466, 1464.466, -1035.534};
    for (int e = 0; e < 3; e++) ck_printed(force(&s, 0, e) / 2.0, STRESS[e], 7);
    solved_free(&s);
}
END_TEST

/* A. Kassimali, Matrix Analysis of Structures, plane-truss example (displacements from memory; in, kip, ksi); forces
 * recomputed by a separate direct-stiffness calculation. */
START_TEST(three_bar_truss_of_Kassimali)
{
    sct_model *m = mb_new(2);
    const int steel = mb_material(m, 29000, 0, NAN);
    mb_group(m, steel, 8.0, true);
    mb_group(m, steel, 6.0, true);
    mb_joint(m, 144, 192, 0);
    for (int j = 1; j < 4; j++) {
        mb_joint(m, 144.0 * (j - 1), 0, 0);
        mb_pin(m, j);
        mb_bar(m, j, 0, j == 2);
    }
    mb_case(m, 0.0);
    mb_load(m, 0, 0, 150, -300, 0);
    solved s = solve(m);
    ck_printed(moved(&s, 0, 0, 0), 0.21552, 5);
    ck_printed(moved(&s, 0, 0, 1), -0.13995, 5);
    static const double N[] = {16.770, -126.832, -233.230};
    for (int e = 0; e < 3; e++) ck_assert_double_eq_tol(force(&s, 0, e), N[e], 0.51e-3);
    solved_free(&s);
}
END_TEST

/* J. E. Hurtado, Analisis matricial de estructuras, example 2.1 (geometry); forces recomputed by a separate
 * direct-stiffness calculation (m, kN). */
START_TEST(nine_bar_truss_of_Hurtado)
{
    sct_model *m = truss(2, 6, (double[][3]){{0, 0}, {4, 0}, {4, 3}, {8, 0}, {8, 3}, {12, 0}}, 9,
                         (int[][2]){{0, 1}, {0, 2}, {1, 2}, {1, 3}, {2, 3}, {2, 4}, {3, 4}, {3, 5}, {4, 5}}, 1e6);
    mb_pin(m, 0);
    mb_pin(m, 5);
    mb_load(m, 0, 2, 4, -20, 0);
    mb_load(m, 0, 4, 0, -20, 0);
    solved s = solve(m);
    check_forces(&s, 0, 9, (double[]){4.0 / 9, -95.0 / 3, 0, 4.0 / 9, -5.0 / 3, -28, 1, -8.0 / 9, -35}, 1e-7);
    solved_free(&s);
}
END_TEST

/* J. Uribe Escamilla, Analisis estructural, 2nd ed., example 11.3 (geometry); displacements recomputed by a separate
 * direct-stiffness calculation (cm, tonne-force). */
START_TEST(five_bar_truss_of_Uribe)
{
    sct_model *m = mb_new(2);
    const int steel = mb_material(m, 2040, 0, NAN);
    static const double A[] = {100, 40, 150, 40, 30};
    static const int ENDS[5][2] = {{0, 2}, {0, 3}, {2, 1}, {3, 1}, {2, 3}};
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 800, 0, 0);
    mb_joint(m, 400, 300, 0);
    mb_joint(m, 400, 0, 0);
    for (int e = 0; e < 5; e++) mb_bar(m, ENDS[e][0], ENDS[e][1], mb_group(m, steel, A[e], true));
    on_pin_and_roller(m, 0, 1);
    mb_case(m, 0.0);
    mb_load(m, 0, 3, 0, -20, 0);
    mb_load(m, 0, 2, 4, 3, 0);
    solved s = solve(m);
    check_forces(&s, 0, 5, (double[]){-35.0 / 3, 40.0 / 3, -50.0 / 3, 40.0 / 3, 20}, 1e-9);
    check_statics(&s, 0);
    ck_printed(moved(&s, 0, 2, 0), 0.064508, 5);
    ck_printed(moved(&s, 0, 2, 1), -0.133669, 6);
    ck_printed(moved(&s, 0, 1, 0), 0.130719, 6);
    ck_printed(moved(&s, 0, 3, 1), -0.231708, 6);
    solved_free(&s);
}
END_TEST

/* Closed form by the method of joints; the coefficients stand in roof-truss handbook tables (from memory): rafters 3 P
 * and 2.5 P in compression, tie 2.598 P and 1.732 P in tension, struts and inner webs 0.866 P. */
START_TEST(fink_of_four_panels_at_30_degrees)
{
    const double r3 = sqrt(3.0), h = r3 / 2;
    sct_model *m =
        truss(2, 7, (double[][3]){{0, 0}, {3, r3}, {6, 2 * r3}, {9, r3}, {12, 0}, {8, 0}, {4, 0}}, 11,
              (int[][2]){{0, 1}, {1, 2}, {2, 3}, {3, 4}, {0, 6}, {6, 5}, {5, 4}, {1, 6}, {6, 2}, {2, 5}, {5, 3}}, 1.0);
    on_pin_and_roller(m, 0, 4);
    for (int j = 1; j <= 3; j++) mb_load(m, 0, j, 0, -1, 0);
    solved s = solve(m);
    check_forces(&s, 0, 11, (double[]){-3, -2.5, -2.5, -3, 3 * h, 2 * h, 3 * h, -h, h, h, -h}, 1e-9);
    check_statics(&s, 0);
    solved_free(&s);
}
END_TEST

/* Closed forms: chord = M / h, web diagonal = V / sin 45 deg; six panels, height equal to a panel. */
START_TEST(pratt_and_howe_of_six_square_panels)
{
    static const double BARS[2][21] = {
        {2.5, 2.5, 4, 4, 2.5, 2.5, -4, -4.5, -4.5, -4, 1, -0.5, 0, -0.5, 1, -2.5, -2.5, 1.5, 0.5, 0.5, 1.5},
        {2.5, 4, 4.5, 4.5, 4, 2.5, -2.5, -4, -4, -2.5, 2.5, 1.5, 1, 1.5, 2.5, -2.5, -2.5, -1.5, -0.5, -0.5, -1.5},
    }; /* diagonals without their factor sqrt 2 */
    static const int WEBS[2][4][2] = {{{7, 2}, {8, 3}, {10, 3}, {11, 4}}, {{1, 8}, {2, 9}, {4, 9}, {5, 10}}};
    for (int form = 0; form < 2; form++) {
        double at[12][3] = {{0}}, N[21];
        int ends[21][2], n = 0;
        for (int i = 0; i <= 6; i++) at[i][0] = 4.0 * i;
        for (int i = 1; i <= 5; i++) memcpy(at[6 + i], (double[3]){4.0 * i, 4, 0}, sizeof at[0]);
        for (int i = 0; i < 6; i++) memcpy(ends[n++], (int[2]){i, i + 1}, sizeof ends[0]);
        for (int i = 1; i < 5; i++) memcpy(ends[n++], (int[2]){6 + i, 7 + i}, sizeof ends[0]);
        for (int i = 1; i <= 5; i++) memcpy(ends[n++], (int[2]){i, 6 + i}, sizeof ends[0]);
        memcpy(ends[n++], (int[2]){0, 7}, sizeof ends[0]);
        memcpy(ends[n++], (int[2]){6, 11}, sizeof ends[0]);
        for (int i = 0; i < 4; i++) memcpy(ends[n++], WEBS[form][i], sizeof ends[0]);
        for (int e = 0; e < n; e++) N[e] = BARS[form][e] * (e >= 15 ? sqrt(2.0) : 1.0);
        sct_model *m = truss(2, 12, at, n, ends, 1.0);
        on_pin_and_roller(m, 0, 6);
        for (int j = 1; j <= 5; j++) mb_load(m, 0, j, 0, -1, 0);
        solved s = solve(m);
        check_forces(&s, 0, n, N, 1e-9);
        check_statics(&s, 0);
        solved_free(&s);
    }
}
END_TEST

/* Force method, any structures textbook: redundant X = -sum(N0 n1 L) / sum(n1^2 L), all EA equal. */
START_TEST(braced_square_panel_by_the_force_method)
{
    sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {1, 0}, {1, 1}, {0, 1}}, 6,
                         (int[][2]){{0, 1}, {1, 2}, {2, 3}, {0, 3}, {0, 2}, {1, 3}}, 7.0);
    const double r2 = sqrt(2.0);
    on_pin_and_roller(m, 0, 1);
    mb_load(m, 0, 3, 1, 0, 0);
    solved s = solve(m);
    static const double N0[] = {1, -1, 0, 0, 0, 0}; /* without bar 5: bars 0, 1, 4 carry it; 4: -(-r2) below */
    double top = 0.0, bottom = 0.0;
    for (int e = 0; e < 6; e++) {
        const double n1 = e >= 4 ? 1.0 : -1.0 / r2, L = e >= 4 ? r2 : 1.0;
        double n0 = N0[e];
        if (e == 2) n0 = -1.0; /* 3-4 pushes the load to joint 3 */
        if (e == 1) n0 = -1.0;
        if (e == 4) n0 = r2;
        if (e == 0) n0 = 0.0;
        top += n0 * n1 * L;
        bottom += n1 * n1 * L;
    }
    ck_close(force(&s, 0, 5), -top / bottom, 1e-12);
    check_forces(&s, 0, 6, (double[]){0.5, -0.5, -0.5, 0.5, 1 / r2, -1 / r2}, 1e-9);
    solved_free(&s);
}
END_TEST

/* ---- supports, self-weight, edges ---------------------------------------------------------------------------------
 */

START_TEST(inclined_roller_gives_the_answer_of_the_turned_truss)
{
    /* King post on a plane at 25 degrees, roller held normal to it; then the same drawing level, loads turned. */
    const double a = 25 * acos(-1.0) / 180, c = cos(a), d = sin(a);
    solved s[2];
    for (int turned = 0; turned < 2; turned++) {
        const double C = turned ? c : 1.0, D = turned ? d : 0.0;
        double at[4][3] = {{0, 0}, {8, 0}, {4, 2}, {4, 0}};
        for (int j = 0; j < 4; j++) {
            const double x = at[j][0], y = at[j][1];
            at[j][0] = C * x - D * y;
            at[j][1] = D * x + C * y;
        }
        sct_model *m = truss(2, 4, at, 5, (int[][2]){{0, 3}, {3, 1}, {0, 2}, {2, 1}, {2, 3}}, 210e3);
        mb_pin(m, 0);
        mb_hold(m, 1, -D, C, 0);
        mb_load(m, 0, 2, C * 3 + D * 10, D * 3 - C * 10, 0);
        mb_case(m, 0.0);
        mb_settle(m, 1, 1, D * 0.01, -C * 0.01, 0);
        s[turned] = solve(m);
    }
    double *reaction = reactions_of(&s[1], 0);
    for (int e = 0; e < 5; e++) ck_assert_double_eq_tol(force(&s[1], 0, e), force(&s[0], 0, e), 1e-9);
    for (int k = 0; k < 2; k++) {
        for (int j = 0; j < 4; j++) {
            const double x = moved(&s[0], k, j, 0), y = moved(&s[0], k, j, 1);
            ck_assert_double_eq_tol(moved(&s[1], k, j, 0), c * x - d * y, 1e-12);
            ck_assert_double_eq_tol(moved(&s[1], k, j, 1), d * x + c * y, 1e-12);
        }
    }
    ck_assert_double_eq_tol(c * reaction[3] + d * reaction[4], 0.0, 1e-12); /* nothing along the plane */
    check_balance(&s[1], 0, true);
    free(reaction);
    solved_free(&s[0]);
    solved_free(&s[1]);
}
END_TEST

START_TEST(held_directions_need_not_be_at_right_angles)
{
    /* A joint of a space truss held along x and along (1, 1, 0): z stays free, and x, y are both held. */
    sct_model *m = truss(3, 4, (double[][3]){{0, 0, 3}, {3, 0, 0}, {-2, 2, 0}, {-2, -2, 0}}, 3,
                         (int[][2]){{0, 1}, {0, 2}, {0, 3}}, 210e3);
    for (int j = 1; j < 4; j++) mb_pin(m, j);
    mb_hold(m, 0, 1, 0, 0);
    mb_hold(m, 0, 1, 1, 0);
    mb_load(m, 0, 0, 5, -7, -9);
    solved s = solve(m);
    ck_assert_int_eq(s.st->n_dof, 1);
    ck_assert_double_eq_tol(moved(&s, 0, 0, 0), 0.0, 1e-18);
    ck_assert_double_eq_tol(moved(&s, 0, 0, 1), 0.0, 1e-18);
    ck_assert(moved(&s, 0, 0, 2) < 0.0);
    check_balance(&s, 0, true);
    solved_free(&s);
}
END_TEST

START_TEST(settlement_temperature_and_lack_of_fit_move_a_determinate_truss_without_force)
{
    sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {8, 0}, {4, 2}, {4, 0}}, 5,
                         (int[][2]){{0, 3}, {3, 1}, {0, 2}, {2, 1}, {2, 3}}, 210e3);
    on_pin_and_roller(m, 0, 1);
    mb_settle(m, 0, 1, 0, -0.02, 0);
    mb_settle(m, 0, 0, 0.003, 0, 0);
    mb_case(m, 0.0);
    for (int e = 0; e < 5; e++) mb_act(m, 1, e, 30, 0);
    mb_case(m, 0.0);
    mb_act(m, 2, 2, 0, 0.004);
    solved s = solve(m);
    for (int k = 0; k < 3; k++) {
        for (int e = 0; e < 5; e++) ck_assert_double_eq_tol(force(&s, k, e), 0.0, 1e-9 * 210e3 * 1e-3);
    }
    ck_close(moved(&s, 0, 0, 0), 0.003, 1e-15);
    ck_close(moved(&s, 0, 1, 1), -0.02, 1e-15);
    ck_close(moved(&s, 0, 1, 0), 0.003, 1e-9);
    ck_close(moved(&s, 1, 1, 0), 8 * 12e-6 * 30, 1e-9); /* free expansion keeps the shape */
    ck_close(moved(&s, 1, 2, 1), 2 * 12e-6 * 30, 1e-9);
    solved_free(&s);
}
END_TEST

START_TEST(heated_bar_between_two_pins_has_no_unknowns_and_N_of_minus_EA_alpha_dT)
{
    sct_model *m = truss(2, 2, (double[][3]){{0, 0}, {5, 0}}, 1, (int[][2]){{0, 1}}, 210e3);
    mb_pin(m, 0);
    mb_pin(m, 1);
    mb_act(m, 0, 0, 30, 0);
    for (int e = SCT_ENGINE_AUTO; e <= SCT_ENGINE_SPARSE; e++) {
        sct_model copy = *m;
        solved s = solve_with(&copy, (sct_engine)e);
        ck_assert_int_eq(s.st->n_dof, 0);
        ck_close(force(&s, 0, 0), -75.6, 1e-12);
        double *reaction = reactions_of(&s, 0);
        ck_close(reaction[0], 75.6, 1e-12);
        ck_close(reaction[3], -75.6, 1e-12);
        free(reaction);
        s.model = NULL;
        solved_free(&s);
    }
    mb_free(m);
}
END_TEST

START_TEST(self_weight_goes_half_to_each_joint_and_the_held_part_to_the_reactions)
{
    for (int dim = 2; dim <= 3; dim++) {
        sct_model *m = mb_new(dim);
        const int down = dim - 1;
        mb_group(m, mb_material(m, 210e9, 7850, NAN), 2e-3, true);
        mb_joint(m, 0, 0, 0);
        mb_joint(m, 4, 0, 0);
        mb_joint(m, 2, dim == 2 ? 3 : 0.5, dim == 2 ? 0 : 3);
        if (dim == 3) mb_joint(m, 2, 2, 0);
        for (int j = 0; j < m->n_joints; j++) {
            if (j == 2) continue;
            mb_pin(m, j);
            mb_bar(m, j, 2, 0);
        }
        mb_case(m, 1.35);
        solved s = solve(m);
        double weight = 0.0, up = 0.0, *reaction = reactions_of(&s, 0), *load = loads_of(&s, 0);
        for (int e = 0; e < s.st->n_bars; e++) weight += 1.35 * 7850 * SCT_GRAVITY * 2e-3 * s.st->bars[e].L;
        for (int j = 0; j < m->n_joints; j++) up += reaction[3 * j + down];
        ck_close(up, weight, 1e-12);
        ck_close(load[3 * 2 + down], -weight / 2, 1e-12);
        check_balance(&s, 0, true);
        free(reaction);
        free(load);
        solved_free(&s);
    }
}
END_TEST

START_TEST(mechanisms_and_values_that_are_not_finite_are_told_apart)
{
    for (int e = SCT_ENGINE_SMALL; e <= SCT_ENGINE_SPARSE; e++) {
        /* A square without diagonal; a free-free bar would do as well. */
        sct_model *m = truss(2, 4, (double[][3]){{0, 0}, {3, 0}, {3, 3}, {0, 3}}, 4,
                             (int[][2]){{0, 1}, {1, 2}, {2, 3}, {3, 0}}, 1e5);
        sct_issues *issues = sct_issues_new();
        sct_structure *st;
        sct_status status;
        sct_response r;
        on_pin_and_roller(m, 0, 1);
        mb_load(m, 0, 3, 10, 0, 0);
        mb_each_case(m);
        ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_OK);
        sct_solver *solver = sct_solver_new(st, (sct_engine)e, &status);
        ck_assert_int_eq(sct_response_new(st, &r), SCT_OK);
        static const double BAD[] = {0.0, -1.0, NAN, INFINITY};
        const double good = 1e5;
        ck_assert_int_eq(sct_solver_analyse(solver, &good, &r), SCT_MECHANISM);
        for (int i = 0; i < 4; i++) ck_assert_int_eq(sct_solver_analyse(solver, &BAD[i], &r), SCT_NOT_ACCURATE);
        ck_assert_int_eq(sct_solver_analyses(solver), 5);
        sct_response_free(&r);
        sct_solver_free(solver);
        sct_structure_free(st);
        sct_issues_free(issues);
        mb_free(m);
    }
}
END_TEST

START_TEST(overflow_of_a_load_is_not_an_answer)
{
    sct_model *m = truss(2, 3, (double[][3]){{0, 0}, {1, 0}, {0.5, 1e-3}}, 2, (int[][2]){{0, 2}, {1, 2}}, 1.0);
    sct_issues *issues = sct_issues_new();
    sct_structure *st;
    sct_status status;
    sct_response r;
    mb_pin(m, 0);
    mb_pin(m, 1);
    mb_load(m, 0, 2, 0, -1e307, 0);
    ck_assert_int_eq(sct_structure_build(m, &st, issues), SCT_OK);
    sct_solver *solver = sct_solver_new(st, SCT_ENGINE_AUTO, &status);
    ck_assert_int_eq(sct_response_new(st, &r), SCT_OK);
    const double A = 1.0;
    ck_assert_int_eq(sct_solver_analyse(solver, &A, &r), SCT_NOT_ACCURATE);
    sct_response_free(&r);
    sct_solver_free(solver);
    sct_structure_free(st);
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

/* ---- facts true of every truss, on seeded random ones ---------------------------------------------------------------
 */

enum { TRIALS = 60 };

/* The i-th random truss: plane and space in turn, determinate every third time. */
static sct_model *trial_truss(int i)
{
    sct_random r = {.state = 1000u + (unsigned)i};
    const int dim = 2 + i % 2, n = dim + 1 + below(&r, 14);
    return random_truss(&r, dim, n, i % 3 == 0 ? 0 : 1 + below(&r, 2 * n));
}

static double largest_of(const double x[], int n)
{
    double largest = 0.0;
    for (int i = 0; i < n; i++) largest = fmax(largest, fabs(x[i]));
    return largest;
}

static void check_same(const double x[], const double y[], int n, double tol)
{
    const double largest = largest_of(y, n);
    for (int i = 0; i < n; i++) ck_assert_double_eq_tol(x[i], y[i], tol * largest + 1e-300);
}

START_TEST(random_trusses_are_in_equilibrium_and_their_energies_agree)
{
    for (int i = 0; i < TRIALS; i++) {
        solved s = solve(trial_truss(i));
        for (int k = 0; k < 3; k++) check_balance(&s, k, k < 2);
        if (s.st->n_bars == s.st->n_dof) check_statics(&s, 1);
        solved_free(&s);
    }
}
END_TEST

START_TEST(both_engines_and_dense_LAPACK_agree)
{
    for (int i = 0; i < TRIALS; i++) {
        solved small = solve_with(trial_truss(i), SCT_ENGINE_SMALL),
               sparse = solve_with(trial_truss(i), SCT_ENGINE_SPARSE);
        const sct_structure *st = small.st;
        const int n = st->n_dof, cases = 2;
        double *K = calloc((size_t)(n * n), sizeof *K), *u = calloc((size_t)(n * cases), sizeof *u);
        double *weight = calloc((size_t)n, sizeof *weight);
        for (int e = 0; e < st->n_bars; e++) { /* assembled bar by bar, sharing nothing with the solver */
            const sct_spring *bar = &st->springs[e];
            for (int p = 0; p < bar->n_dof; p++) {
                for (int q = 0; q < bar->n_dof; q++) {
                    K[bar->dof[p] * n + bar->dof[q]] += bar->E * small.A[bar->group] / bar->L * bar->b[p] * bar->b[q];
                }
            }
        }
        sct_structure_weight(st, small.A, weight);
        for (int p = 0; p < n; p++) {
            u[p] = st->f[p] + weight[p];
            u[n + p] = st->f[n + p];
        }
        const sct_pattern *pattern;
        const double *values = sct_solver_stiffness(small.solver, &pattern);
        for (int j = 0; j < n; j++) {
            for (int p = pattern->column[j]; p < pattern->column[j + 1]; p++) {
                ck_assert_double_eq_tol(values[p], K[j * n + pattern->row[p]], 1e-12 * K[j * n + j]);
            }
        }
        int info;
        dposv_("U", &n, &cases, K, &n, u, &n, &info);
        ck_assert_int_eq(info, 0);
        for (int k = 0; k < 2; k++) check_same(small.r.u + k * n, u + k * n, n, 1e-9);
        for (int k = 0; k < 3; k++) {
            check_same(sparse.r.u + k * n, small.r.u + k * n, n, 1e-9);
            for (int e = 0; e < st->n_bars; e++) {
                ck_assert_double_eq_tol(force(&sparse, k, e), force(&small, k, e), 1e-9 * largest_force(&small, k));
            }
        }
        free(K);
        free(u);
        free(weight);
        solved_free(&small);
        solved_free(&sparse);
    }
}
END_TEST

START_TEST(displacements_are_reciprocal)
{
    /* Maxwell-Betti: f1'u2 = f2'u1 for two sets of loads. */
    for (int i = 0; i < TRIALS; i++) {
        solved s = solve(trial_truss(i));
        const int n = s.st->n_dof;
        double *u1 = calloc((size_t)(2 * n), sizeof *u1), *u2 = u1 + n;
        sct_random r = {.state = (unsigned)i};
        double f1u2 = 0.0, f2u1 = 0.0, size = 0.0;
        double *f = calloc((size_t)(2 * n), sizeof *f);
        for (int p = 0; p < 2 * n; p++) f[p] = u1[p] = between(&r, -1e4, 1e4);
        sct_solver_solve(s.solver, 2, u1);
        for (int p = 0; p < n; p++) {
            f1u2 += f[p] * u2[p];
            f2u1 += f[n + p] * u1[p];
            size += fabs(f[p] * u2[p]);
        }
        ck_assert_double_eq_tol(f1u2, f2u1, 1e-9 * size);
        free(f);
        free(u1);
        solved_free(&s);
    }
}
END_TEST

/* Loads of the model in all cases; `how` is applied to each vector. */
static void for_all_vectors(sct_model *m, void (*how)(double v[3], const void *with), const void *with)
{
    for (int j = 0; j < m->n_joints; j++) {
        how(m->joints[j].at, with);
        for (int h = 0; h < m->joints[j].n_held; h++) how(m->joints[j].held[h], with);
    }
    for (int k = 0; k < m->n_cases; k++) {
        for (int p = 0; p < m->cases[k].n_loads; p++) how(m->cases[k].loads[p].F, with);
        for (int p = 0; p < m->cases[k].n_settlements; p++) how(m->cases[k].settlements[p].d, with);
    }
}

static void rotate(double v[3], const void *with)
{
    const double *R = with, x = v[0], y = v[1], z = v[2];
    for (int i = 0; i < 3; i++) v[i] = R[3 * i] * x + R[3 * i + 1] * y + R[3 * i + 2] * z;
}

START_TEST(turning_the_model_turns_the_answer)
{
    for (int i = 0; i < TRIALS; i++) {
        const double a = 0.1 + i, b = 0.7 * i, c = cos(a), d = sin(a), C = cos(b), D = sin(b);
        const double plane[] = {c, -d, 0, d, c, 0, 0, 0, 1};
        const double space[] = {c, -d * C, d * D, d, c * C, -c * D, 0, D, C};
        sct_model *m[2] = {trial_truss(i), trial_truss(i)};
        const double *R = m[0]->dimensions == 2 ? plane : space;
        for (int t = 0; t < 2; t++) m[t]->cases[0].self_weight = 0.0; /* the weight does not turn */
        for_all_vectors(m[1], rotate, R);
        solved s = solve(m[0]), turned = solve(m[1]);
        for (int k = 0; k < 2; k++) {
            check_same(turned.r.N + k * s.st->n_bars, s.r.N + k * s.st->n_bars, s.st->n_bars, 1e-9);
        }
        double *u = calloc((size_t)(3 * s.st->n_joints), sizeof *u),
               *v = calloc((size_t)(3 * s.st->n_joints), sizeof *v);
        for (int k = 0; k < 3; k++) {
            sct_combine_displacements(s.st, &s.r, k, u);
            sct_combine_displacements(turned.st, &turned.r, k, v);
            for (int j = 0; j < s.st->n_joints; j++) rotate(u + 3 * j, R);
            check_same(v, u, 3 * s.st->n_joints, 1e-9);
        }
        free(u);
        free(v);
        solved_free(&s);
        solved_free(&turned);
    }
}
END_TEST

START_TEST(renumbering_joints_and_swapping_ends_changes_nothing)
{
    for (int i = 0; i < TRIALS; i++) {
        sct_model *m = trial_truss(i);
        const int n = m->n_joints;
        for (int e = 1; e < m->n_members; e += 2) {
            const int from = m->members[e].from;
            m->members[e].from = m->members[e].to;
            m->members[e].to = from;
        }
        for (int a = 0, b = n - 1; a < b; a++, b--) { /* joints in reverse order */
            const sct_joint joint = m->joints[a];
            m->joints[a] = m->joints[b];
            m->joints[b] = joint;
        }
        for (int e = 0; e < m->n_members; e++) {
            m->members[e].from = n - 1 - m->members[e].from;
            m->members[e].to = n - 1 - m->members[e].to;
        }
        for (int k = 0; k < m->n_cases; k++) {
            for (int p = 0; p < m->cases[k].n_loads; p++)
                m->cases[k].loads[p].joint = n - 1 - m->cases[k].loads[p].joint;
            for (int p = 0; p < m->cases[k].n_settlements; p++) {
                m->cases[k].settlements[p].joint = n - 1 - m->cases[k].settlements[p].joint;
            }
        }
        solved s = solve(trial_truss(i)), other = solve(m);
        for (int k = 0; k < 2; k++) {
            check_same(other.r.N + k * s.st->n_bars, s.r.N + k * s.st->n_bars, s.st->n_bars, 1e-9);
        }
        for (int j = 0; j < n; j++) {
            for (int x = 0; x < 3; x++) {
                ck_assert_double_eq_tol(moved(&other, 0, n - 1 - j, x), moved(&s, 0, j, x),
                                        1e-9 * largest_of(s.r.u, s.st->n_dof));
            }
        }
        solved_free(&s);
        solved_free(&other);
    }
}
END_TEST

static void scale_vector(double v[3], const void *with)
{
    for (int i = 0; i < 3; i++) v[i] *= *(const double *)with;
}

START_TEST(other_units_give_the_same_forces)
{
    /* Millimetres: lengths, settlements and lack of fit x 1000, E / 1e6, areas x 1e6, density / 1e9 and g x 1000 cannot
     * change here, so without self-weight. Loads stay in newtons: the held vectors and loads are scaled back. */
    for (int i = 0; i < TRIALS; i++) {
        const double mm = 1000.0, back = 1e-3;
        sct_model *m = trial_truss(i), *original = trial_truss(i);
        m->cases[0].self_weight = original->cases[0].self_weight = 0.0;
        for_all_vectors(m, scale_vector, &mm);
        for (int j = 0; j < m->n_joints; j++) {
            for (int h = 0; h < m->joints[j].n_held; h++) scale_vector(m->joints[j].held[h], &back);
        }
        for (int k = 0; k < m->n_cases; k++) {
            for (int p = 0; p < m->cases[k].n_loads; p++) scale_vector(m->cases[k].loads[p].F, &back);
            for (int p = 0; p < m->cases[k].n_bar_actions; p++) m->cases[k].bar_actions[p].lack *= mm;
        }
        for (int g = 0; g < m->n_groups; g++) m->groups[g].A_held *= 1e6;
        for (int p = 0; p < m->n_materials; p++) m->materials[p].E *= 1e-6;
        solved s = solve(original), other = solve(m);
        for (int k = 0; k < 3; k++) {
            for (int p = 0; p < s.st->n_dof; p++) {
                ck_assert_double_eq_tol(other.r.u[k * s.st->n_dof + p], 1000 * s.r.u[k * s.st->n_dof + p],
                                        1e-9 * 1000 * largest_of(s.r.u + k * s.st->n_dof, s.st->n_dof));
            }
            if (k < 2) check_same(other.r.N + k * s.st->n_bars, s.r.N + k * s.st->n_bars, s.st->n_bars, 1e-9);
        }
        solved_free(&s);
        solved_free(&other);
    }
}
END_TEST

START_TEST(cases_superpose_reverse_and_scale)
{
    for (int i = 0; i < TRIALS; i++) {
        sct_model *m = trial_truss(i), *sum = trial_truss(i), *reversed = trial_truss(i);
        static const double FACTORS[] = {1.35, -1.5, 0.6}, MINUS_TWO = -2.0;
        mb_combination(m, 3, FACTORS);
        sct_case *c = &sum->cases[0]; /* everything factored and put into one case */
        c->self_weight *= FACTORS[0];
        for (int p = 0; p < c->n_loads; p++) scale_vector(c->loads[p].F, &FACTORS[0]);
        for (int p = 0; p < sum->cases[1].n_loads; p++) {
            const sct_joint_load *l = &sum->cases[1].loads[p];
            mb_load(sum, 0, l->joint, -1.5 * l->F[0], -1.5 * l->F[1], -1.5 * l->F[2]);
        }
        for (int p = 0; p < 2; p++) {
            const sct_bar_action *a = &sum->cases[2].bar_actions[p];
            mb_act(sum, 0, a->member, 0.6 * a->dT, 0.6 * a->lack);
        }
        mb_settle(sum, 0, 0, 0.6 * sum->cases[2].settlements[0].d[0], 0.6 * sum->cases[2].settlements[0].d[1], 0);
        for (int p = 0; p < reversed->cases[1].n_loads; p++) scale_vector(reversed->cases[1].loads[p].F, &MINUS_TWO);
        solved s = solve(m), t = solve(sum), v = solve(reversed);
        const int bars = s.st->n_bars, joints = s.st->n_joints;
        double *N = calloc((size_t)bars, sizeof *N), *u = calloc((size_t)(3 * joints), sizeof *u);
        double *w = calloc((size_t)(3 * joints), sizeof *w);
        sct_combine_forces(s.st, &s.r, 0, N);
        check_same(N, t.r.N, bars, 1e-9);
        sct_combine_displacements(s.st, &s.r, 0, u);
        sct_combine_displacements(t.st, &t.r, 0, w);
        check_same(u, w, 3 * joints, 1e-9);
        double *load = loads_of(&s, 0), *other = loads_of(&t, 0);
        check_same(load, other, 3 * joints, 1e-12);
        for (int e = 0; e < bars; e++) { /* -2 is exact in binary: every bit but the sign and exponent stays */
            ck_assert_double_eq(v.r.N[bars + e], -2.0 * s.r.N[bars + e]);
        }
        free(load);
        free(other);
        free(N);
        free(u);
        free(w);
        solved_free(&s);
        solved_free(&t);
        solved_free(&v);
    }
}
END_TEST

START_TEST(stiffness_times_c_divides_displacements_by_c_and_keeps_forces)
{
    for (int i = 0; i < TRIALS; i++) {
        sct_model *m = trial_truss(i);
        for (int p = 0; p < m->n_materials; p++) m->materials[p].E *= 4.0;
        solved s = solve(trial_truss(i)), stiff = solve(m);
        const int n = s.st->n_dof, bars = s.st->n_bars;
        for (int p = 0; p < 2 * n; p++) ck_close(stiff.r.u[p], s.r.u[p] / 4.0, 1e-12);
        for (int e = 0; e < 2 * bars; e++) ck_close(stiff.r.N[e], s.r.N[e], 1e-12);
        solved_free(&s);
        solved_free(&stiff);
    }
}
END_TEST

START_TEST(survey_coordinates_give_the_answer_of_the_shifted_model)
{
    for (int i = 0; i < TRIALS; i += 4) {
        sct_model *m = trial_truss(i);
        for (int j = 0; j < m->n_joints; j++) m->joints[j].at[0] += 1048576.0; /* 2^20 m away: 2e-10 m are lost */
        solved s = solve(trial_truss(i)), far = solve(m);
        check_same(far.r.N, s.r.N, s.st->n_bars, 1e-6);
        solved_free(&s);
        solved_free(&far);
    }
}
END_TEST

START_TEST(the_error_of_a_combination_covers_the_rounding_of_its_sum)
{
    sct_random r = {.state = 79};
    sct_model *m = random_truss(&r, 3, 20, 20);
    mb_combination(m, 3, (double[]){1.35, -0.7, 0.9});
    solved s = solve(m);
    double *N = calloc((size_t)s.st->n_bars, sizeof *N);
    sct_combine_forces(s.st, &s.r, 0, N);
    memset(s.r.N_error, 0, (size_t)(3 * s.st->n_springs) * sizeof *s.r.N_error); /* as if each case were exact */
    memset(s.r.u_error, 0, (size_t)(3 * s.st->n_dof) * sizeof *s.r.u_error);
    for (int e = 0; e < s.st->n_bars; e++) {
        long double exact = 0.0L;
        for (int k = 0; k < 3; k++) exact += (long double)m->combinations[0].factor[k] * force(&s, k, e);
        const double error = sct_combined_force_error(s.st, &s.r, 0, e);
        ck_assert(error > 0.0 && fabsl(exact - N[e]) <= error && error <= 1e-13 * (fabs(N[e]) + 1e6));
    }
    for (int j = 3; j < m->n_joints; j++) /* those before are held */
        ck_assert_double_gt(sct_combined_displacement_error(s.st, &s.r, 0, j, (double[]){0.6, 0.8, 0.0}), 0.0);
    free(N);
    solved_free(&s);
}
END_TEST

START_TEST(the_requests_of_CHOLMOD_itself_are_counted_and_can_fail)
{
    if (!COUNTS_MEMORY) return;
    cholmod_common common;
    cholmod_start(&common);
    common.print = 0;
    const long requests = memory.requests, live = memory.live;
    cholmod_dense *x = cholmod_zeros(3, 3, CHOLMOD_REAL, &common);
    const long asked = memory.requests - requests, kept = memory.live - live;
    cholmod_free_dense(&x, &common);
    const long left = memory.live - live;
    memory.fail_at = memory.requests;
    x = cholmod_zeros(3, 3, CHOLMOD_REAL, &common);
    memory.fail_at = -1;
    ck_assert(x == NULL && common.status == CHOLMOD_OUT_OF_MEMORY);
    ck_assert_int_ge(asked, 2); /* the matrix and its numbers */
    ck_assert_int_eq(kept, asked);
    ck_assert_int_eq(left, 0);
    cholmod_finish(&common);
}
END_TEST

START_TEST(an_analysis_allocates_nothing)
{
    for (int e = SCT_ENGINE_SMALL; e <= SCT_ENGINE_SPARSE; e++) {
        sct_random r = {.state = 77};
        solved s = solve_with(random_truss(&r, 3, 40, 60), (sct_engine)e);
        double *b = calloc((size_t)(40 * s.st->n_dof), sizeof *b);
        bool ok = true; /* Check's own assertions allocate */
        const long before = memory.requests;
        for (int i = 0; i < 5; i++) {
            for (int g = 0; g < s.st->n_groups; g++) s.A[g] *= 1.1;
            ok = sct_solver_analyse(s.solver, s.A, &s.r) == SCT_OK && ok;
            sct_solver_solve(s.solver, 40, b);
        }
        const long after = memory.requests;
        ck_assert(ok);
        if (COUNTS_MEMORY) ck_assert_int_gt(before, 0);
        ck_assert_int_eq(after - before, 0);
        free(b);
        solved_free(&s);
    }
}
END_TEST

/* Structure, solver, analysis and a gradient from beginning to end, once; everything freed again. No assertion inside:
 * Check allocates. */
static sct_status whole_job(const sct_model *m, sct_engine engine, const double A[], sct_issues *issues)
{
    sct_structure *st = NULL;
    sct_solver *solver = NULL;
    sct_response r = {0};
    double dq[8] = {0};
    const sct_weights none = {0};
    sct_status status = sct_structure_build(m, &st, issues);
    if (status == SCT_OK) solver = sct_solver_new(st, engine, &status);
    if (status == SCT_OK) status = sct_response_new(st, &r);
    if (status == SCT_OK) status = sct_solver_analyse(solver, A, &r);
    if (status == SCT_OK) status = sct_sensitivity_adjoint(solver, &r, 1, &none, dq);
    sct_response_free(&r);
    sct_solver_free(solver);
    sct_structure_free(st);
    return status;
}

START_TEST(every_allocation_may_fail_once_or_for_good_without_a_leak)
{
    for (int mode = 0; COUNTS_MEMORY && mode < 4; mode++) {
        const sct_engine engine = mode % 2 == 0 ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE;
        sct_random r = {.state = 78};
        sct_model *m = random_truss(&r, 3, 12, 10);
        sct_issues *issues = sct_issues_new();
        double A[8];
        for (int g = 0; g < m->n_groups; g++) A[g] = m->groups[g].A_held;
        sct_status status = whole_job(m, engine, A, issues); /* the libraries' own lasting memory is there now */
        const long first = memory.requests;
        const sct_status again = whole_job(m, engine, A, issues);
        const long points = memory.requests - first;
        ck_assert(status == SCT_OK && again == SCT_OK && points > 25);
        for (long point = 0; point < points; point++) {
            const long before = memory.live;
            memory.fail_at = memory.requests + point;
            memory.for_good = mode >= 2;
            status = whole_job(m, engine, A, issues);
            memory.fail_at = -1;
            const long leaked = memory.live - before;
            ck_assert_int_eq(leaked, 0);
            /* qsort and CHOLMOD can do without some of their memory, once */
            ck_assert(status == SCT_NO_MEMORY || (status == SCT_OK && !memory.for_good));
        }
        sct_issues_free(issues);
        mb_free(m);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("solver");
    TCase *closed = tcase_create("closed forms"), *facts = tcase_create("facts true of every truss");
    tcase_set_timeout(facts, 60);
    tcase_add_test(closed, bracket_with_short_link_T1);
    tcase_add_test(closed, bracket_with_strut_T2);
    tcase_add_test(closed, king_post);
    tcase_add_test(closed, howe_pitched);
    tcase_add_test(closed, pratt_pitched);
    tcase_add_test(closed, pratt_parallel);
    tcase_add_test(closed, warren);
    tcase_add_test(closed, fink_under_full_half_and_uplift_loads);
    tcase_add_test(closed, bowstring_of_a_parabola_has_idle_webs_under_uniform_load);
    tcase_add_test(closed, north_light);
    tcase_add_test(closed, scissor_spreads_at_its_roller);
    tcase_add_test(closed, braced_square_under_load_and_heat);
    tcase_add_test(closed, three_bars_under_load_settlement_and_heat);
    tcase_add_test(closed, tripod);
    tcase_add_test(closed, skew_tripod);
    tcase_add_test(closed, cone_of_six_ribs);
    tcase_add_test(closed, one_bay_square_tower);
    tcase_add_test(closed, four_bar_truss_of_Chandrupatla_and_Belegundu);
    tcase_add_test(closed, three_bar_truss_of_Logan);
    tcase_add_test(closed, three_bar_truss_of_Kassimali);
    tcase_add_test(closed, nine_bar_truss_of_Hurtado);
    tcase_add_test(closed, five_bar_truss_of_Uribe);
    tcase_add_test(closed, fink_of_four_panels_at_30_degrees);
    tcase_add_test(closed, pratt_and_howe_of_six_square_panels);
    tcase_add_test(closed, braced_square_panel_by_the_force_method);
    tcase_add_test(closed, inclined_roller_gives_the_answer_of_the_turned_truss);
    tcase_add_test(closed, held_directions_need_not_be_at_right_angles);
    tcase_add_test(closed, settlement_temperature_and_lack_of_fit_move_a_determinate_truss_without_force);
    tcase_add_test(closed, heated_bar_between_two_pins_has_no_unknowns_and_N_of_minus_EA_alpha_dT);
    tcase_add_test(closed, self_weight_goes_half_to_each_joint_and_the_held_part_to_the_reactions);
    tcase_add_test(closed, mechanisms_and_values_that_are_not_finite_are_told_apart);
    tcase_add_test(closed, overflow_of_a_load_is_not_an_answer);
    tcase_add_test(facts, random_trusses_are_in_equilibrium_and_their_energies_agree);
    tcase_add_test(facts, both_engines_and_dense_LAPACK_agree);
    tcase_add_test(facts, displacements_are_reciprocal);
    tcase_add_test(facts, turning_the_model_turns_the_answer);
    tcase_add_test(facts, renumbering_joints_and_swapping_ends_changes_nothing);
    tcase_add_test(facts, other_units_give_the_same_forces);
    tcase_add_test(facts, cases_superpose_reverse_and_scale);
    tcase_add_test(facts, stiffness_times_c_divides_displacements_by_c_and_keeps_forces);
    tcase_add_test(facts, survey_coordinates_give_the_answer_of_the_shifted_model);
    tcase_add_test(facts, the_error_of_a_combination_covers_the_rounding_of_its_sum);
    tcase_add_test(facts, the_requests_of_CHOLMOD_itself_are_counted_and_can_fail);
    tcase_add_test(facts, an_analysis_allocates_nothing);
    tcase_add_test(facts, every_allocation_may_fail_once_or_for_good_without_a_leak);
    suite_add_tcase(suite, closed);
    suite_add_tcase(suite, facts);
    return run_suite(suite);
}

/* Tests of analysis/sensitivity.c: direct against adjoint against differences, and hand solutions. Trusses, and frames
 * with everything that they can have. */
#include "random_frames.h"

#include "analysis/sensitivity.h"

enum { TRIALS = 40, FRAMES = 200 };

static sct_model *trial_truss(int i)
{
    sct_random r = {.state = 5000u + (unsigned)i};
    const int dim = 2 + i % 2, n = dim + 1 + below(&r, 10);
    return random_truss(&r, dim, n, i % 3 == 0 ? 0 : 1 + below(&r, n));
}

/* TRIALS trusses, then FRAMES frames. Second moments grow with A^2, torsion constants with other powers. */
static sct_model *trial(int i)
{
    sct_random r = {.state = 7000u + (unsigned)i};
    return i < TRIALS ? trial_truss(i) : rf_frame(&r, 2 + i % 2, 3 + below(&r, 5), below(&r, 4), 0);
}

/* Response at areas times exp(z) of the sized groups; z n_vars. */
static void analyse_at(solved *s, const double z[])
{
    double *A = calloc((size_t)s->st->n_groups, sizeof *A);
    for (int g = 0; g < s->st->n_groups; g++) {
        const int v = s->st->var_of_group[g];
        A[g] = s->A[g] * (v >= 0 ? exp(z[v]) : 1.0);
    }
    ck_assert_int_eq(sct_solver_analyse(s->solver, A, &s->r), SCT_OK);
    free(A);
}

static double *zeros(int n)
{
    return calloc((size_t)n + 1, sizeof(double));
}

static double largest_of(const double x[], int n)
{
    double largest = 0.0;
    for (int i = 0; i < n; i++) largest = fmax(largest, fabs(x[i]));
    return largest;
}

/* What a spring of case k would feel from its prescribed elongation in a rigid structure, or feels, as a force: scale
 * of tolerances. */
static double scale_of_forces(const solved *s, int k)
{
    double largest = 0.0;
    const double *stiffness = sct_solver_stiffnesses(s->solver);
    for (int e = 0; e < s->st->n_springs; e++) {
        const int at = k * s->st->n_springs + e;
        const double S = fmax(fabs(s->r.N[at]), fabs(s->st->stretch[at]) * stiffness[e]);
        largest = fmax(largest, S / s->st->springs[e].span);
    }
    return largest;
}

START_TEST(derivatives_of_displacements_and_forces_are_those_of_central_differences)
{
    const double h = 2e-3; /* fourth order: h^4 = 2e-11, rounding less */
    static const double STEPS[] = {-2, -1, 1, 2}, WEIGHTS[] = {1.0 / 12, -8.0 / 12, 8.0 / 12, -1.0 / 12};
    for (int i = 0; i < TRIALS + FRAMES; i++) {
        solved s = solve(trial(i));
        const sct_structure *st = s.st;
        const int n = st->n_dof, vars = st->n_vars, springs = st->n_springs;
        double *du = zeros(3 * vars * n), *dN = zeros(3 * vars), *z = zeros(vars);
        double *u_h = zeros(3 * n), *N_h = zeros(3 * springs), *N_scale = zeros(3), *u_scale = zeros(3);
        for (int k = 0; k < 3; k++) {
            N_scale[k] = scale_of_forces(&s, k);
            u_scale[k] = largest_of(s.r.u + k * n, n);
        }
        sct_sensitivity_direct(s.solver, &s.r, du);
        for (int v = 0; v < vars; v++) {
            double *Nv = zeros(3 * springs);
            analyse_at(&s, z);
            for (int e = 0; e < springs; e++) {
                for (int k = 0; k < 3; k++) {
                    sct_sensitivity_force(s.solver, &s.r, du, e, k, dN);
                    Nv[k * springs + e] = dN[v];
                }
            }
            memset(u_h, 0, (size_t)(3 * n) * sizeof *u_h);
            memset(N_h, 0, (size_t)(3 * springs) * sizeof *N_h);
            for (int p = 0; p < 4; p++) {
                z[v] = STEPS[p] * h;
                analyse_at(&s, z);
                for (int j = 0; j < 3 * n; j++) u_h[j] += WEIGHTS[p] * s.r.u[j] / h;
                for (int e = 0; e < 3 * springs; e++) N_h[e] += WEIGHTS[p] * s.r.N[e] / h;
            }
            z[v] = 0.0;
            for (int k = 0; k < 3; k++) {
                for (int j = 0; j < n; j++) {
                    ck_assert_double_eq_tol(du[(k * n + j) * vars + v], u_h[k * n + j], 1e-7 * u_scale[k] + 1e-300);
                }
                for (int e = 0; e < springs; e++) {
                    const double size = N_scale[k] * st->springs[e].span;
                    ck_assert_double_eq_tol(Nv[k * springs + e], N_h[k * springs + e], 1e-7 * size + 1e-300);
                }
            }
            free(Nv);
        }
        free(du);
        free(dN);
        free(z);
        free(u_h);
        free(N_h);
        free(N_scale);
        free(u_scale);
        solved_free(&s);
    }
}
END_TEST

START_TEST(displacement_derivatives_follow_the_direction_asked_for)
{
    for (int i = 0; i < TRIALS + FRAMES; i++) {
        solved s = solve(trial(i));
        const sct_structure *st = s.st;
        const int vars = st->n_vars, n = st->n_dof;
        double *du = zeros(3 * vars * n), *d = zeros(3 * vars);
        sct_sensitivity_direct(s.solver, &s.r, du);
        for (int j = 0; j < st->n_joints; j++) {
            const double direction[] = {0.6, -0.8, 0.0};
            for (int k = 0; k < 3; k++) sct_sensitivity_displacement(s.solver, du, j, direction, k, d + k * vars);
            for (int c = 0; c < 3 * vars; c++) {
                double expected = 0.0;
                for (int f = 0; f < st->n_free[j]; f++) {
                    const double *v = st->basis[j][f];
                    expected += (0.6 * v[0] - 0.8 * v[1]) * du[(c / vars * n + st->first_dof[j] + f) * vars + c % vars];
                }
                ck_assert_double_eq_tol(d[c], expected, 1e-14 * fabs(expected) + 1e-300);
            }
        }
        free(du);
        free(d);
        solved_free(&s);
    }
}
END_TEST

/* Random weights on all cases: count sets of n_cases x (n_springs + n_dof). */
static double *random_weights(const solved *s, int count, sct_weights q[], unsigned seed)
{
    const int springs = 3 * s->st->n_springs, n = 3 * s->st->n_dof;
    sct_random r = {.state = seed};
    double *w = zeros(count * (springs + n));
    for (int i = 0; i < count; i++) {
        double *wN = w + i * (springs + n), *wu = wN + springs;
        for (int e = 0; e < springs; e++) wN[e] = i % 4 == 1 ? 0.0 : between(&r, -1, 1);
        for (int j = 0; j < n; j++) wu[j] = i % 4 == 2 ? 0.0 : between(&r, -1e8, 1e8);
        q[i] = (sct_weights){.wN = i % 8 == 1 ? NULL : wN, .wu = i % 8 == 2 ? NULL : wu};
    }
    return w;
}

/* q of the response at hand. */
static double value_of(const solved *s, sct_weights q)
{
    double sum = 0.0;
    for (int e = 0; q.wN != NULL && e < 3 * s->st->n_springs; e++) sum += q.wN[e] * s->r.N[e];
    for (int j = 0; q.wu != NULL && j < 3 * s->st->n_dof; j++) sum += q.wu[j] * s->r.u[j];
    return sum;
}

/* Sum of |terms|: scale of what q may lose to rounding. */
static double size_of(const solved *s, sct_weights q)
{
    double sum = 0.0;
    for (int e = 0; q.wN != NULL && e < 3 * s->st->n_springs; e++) sum += fabs(q.wN[e] * s->r.N[e]);
    for (int j = 0; q.wu != NULL && j < 3 * s->st->n_dof; j++) sum += fabs(q.wu[j] * s->r.u[j]);
    return sum;
}

/* dq (vars) by the direct derivatives. */
static void direct_gradient(const solved *s, const double du[], sct_weights q, double dq[])
{
    const sct_structure *st = s->st;
    const int vars = st->n_vars, n = st->n_dof, springs = st->n_springs;
    double *dN = zeros(3 * vars);
    for (int v = 0; v < vars; v++) dq[v] = 0.0;
    for (int e = 0; q.wN != NULL && e < springs; e++) {
        for (int k = 0; k < 3; k++) {
            sct_sensitivity_force(s->solver, &s->r, du, e, k, dN + k * vars);
            for (int v = 0; v < vars; v++) dq[v] += q.wN[k * springs + e] * dN[k * vars + v];
        }
    }
    for (int k = 0; q.wu != NULL && k < 3; k++) {
        for (int v = 0; v < vars; v++) {
            for (int j = 0; j < n; j++) dq[v] += q.wu[k * n + j] * du[(k * n + j) * vars + v];
        }
    }
    free(dN);
}

START_TEST(adjoint_and_direct_gradients_agree)
{
    enum { COUNT = 40 }; /* with three cases: 120 right-hand sides, several batches */
    for (int i = 0; i < TRIALS + FRAMES; i++) {
        solved s = solve(trial(i));
        const int vars = s.st->n_vars;
        sct_weights q[COUNT];
        double *w = random_weights(&s, COUNT, q, (unsigned)i);
        double *du = zeros(3 * vars * s.st->n_dof), *dq = zeros(COUNT * vars), *expected = zeros(vars);
        sct_sensitivity_direct(s.solver, &s.r, du);
        ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, COUNT, q, dq), SCT_OK);
        for (int p = 0; p < COUNT; p++) {
            direct_gradient(&s, du, q[p], expected);
            for (int v = 0; v < vars; v++)
                ck_assert_double_eq_tol(dq[p * vars + v], expected[v], 1e-9 * size_of(&s, q[p]));
        }
        free(w);
        free(du);
        free(dq);
        free(expected);
        solved_free(&s);
    }
}
END_TEST

START_TEST(gradient_of_nothing_is_zero)
{
    solved s = solve(trial_truss(0));
    double *dq = zeros(s.st->n_vars);
    const sct_weights none = {0};
    dq[0] = 5.0;
    ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 1, &none, dq), SCT_OK);
    ck_assert_double_eq(largest_of(dq, s.st->n_vars), 0.0);
    ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 0, NULL, dq), SCT_OK);
    free(dq);
    solved_free(&s);
}
END_TEST

START_TEST(curvature_is_that_of_differences_of_the_gradient_and_symmetric)
{
    const double h = 2e-3;
    static const double STEPS[] = {-2, -1, 1, 2}, WEIGHTS[] = {1.0 / 12, -8.0 / 12, 8.0 / 12, -1.0 / 12};
    for (int i = 0; i < TRIALS + FRAMES; i++) {
        solved s = solve(trial(i));
        const int vars = s.st->n_vars, n = s.st->n_dof;
        sct_weights q[8];
        double *w = random_weights(&s, 8, q, 100u + (unsigned)i);
        double *du = zeros(3 * vars * n), *work = zeros(3 * n), *H = zeros(8 * vars * vars);
        double *dq = zeros(8 * vars), *H_h = zeros(8 * vars * vars), *z = zeros(vars), size[8];
        sct_sensitivity_direct(s.solver, &s.r, du);
        for (int p = 0; p < 8; p++) {
            size[p] = size_of(&s, q[p]);
            sct_sensitivity_curvature(s.solver, &s.r, du, q[p], work, H + p * vars * vars);
        }
        for (int v = 0; v < vars; v++) {
            for (int step = 0; step < 4; step++) {
                z[v] = STEPS[step] * h;
                analyse_at(&s, z);
                ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 8, q, dq), SCT_OK);
                for (int p = 0; p < 8; p++) {
                    for (int g = 0; g < vars; g++) {
                        H_h[(p * vars + g) * vars + v] += WEIGHTS[step] * dq[p * vars + g] / h;
                    }
                }
            }
            z[v] = 0.0;
        }
        for (int p = 0; p < 8; p++) {
            for (int g = 0; g < vars; g++) {
                for (int v = 0; v < vars; v++) {
                    const double a = H[(p * vars + g) * vars + v];
                    ck_assert_double_eq_tol(a, H_h[(p * vars + g) * vars + v], 1e-6 * size[p]);
                    ck_assert_double_eq_tol(a, H[(p * vars + v) * vars + g], 1e-12 * size[p]);
                }
            }
        }
        free(w);
        free(du);
        free(work);
        free(H);
        free(H_h);
        free(dq);
        free(z);
        solved_free(&s);
    }
}
END_TEST

START_TEST(curvature_is_added_to_what_is_there)
{
    solved s = solve(trial_truss(4));
    const int vars = s.st->n_vars, n = s.st->n_dof;
    sct_weights q[1];
    double *w = random_weights(&s, 1, q, 9u);
    double *du = zeros(3 * vars * n), *work = zeros(3 * n), *H = zeros(2 * vars * vars);
    sct_sensitivity_direct(s.solver, &s.r, du);
    sct_sensitivity_curvature(s.solver, &s.r, du, q[0], work, H);
    for (int i = 0; i < 2; i++) sct_sensitivity_curvature(s.solver, &s.r, du, q[0], work, H + vars * vars);
    for (int i = 0; i < vars * vars; i++)
        ck_assert_double_eq_tol(H[vars * vars + i], 2.0 * H[i], 1e-12 * size_of(&s, q[0]));
    free(w);
    free(du);
    free(work);
    free(H);
    solved_free(&s);
}
END_TEST

START_TEST(one_bar_by_hand)
{
    /* A hanging bar, F at its end and its own weight W A / 2 there: u = -(F + s W A / 2) L / (E A) downwards, N = F +
     * ... so du/dz = F L / (E A), d2u/dz2 = -F L / (E A); dN/dz = d2N/dz2 = s W A / 2. */
    const double E = 200e9, A = 1e-3, L = 3.0, F = 5e4, s_w = 1.35;
    sct_model *m = mb_new(2);
    mb_group(m, mb_material(m, E, 7850, NAN), A, true);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 0, -L, 0);
    mb_pin(m, 0);
    mb_hold(m, 1, 1, 0, 0);
    mb_bar(m, 0, 1, 0);
    mb_case(m, s_w);
    mb_load(m, 0, 1, 0, -F, 0);
    solved s = solve(m);
    const double half = s_w * 7850 * SCT_GRAVITY * A * L / 2, one = 1.0;
    double du, dN, dq, work, H = 0.0;
    ck_close(moved(&s, 0, 1, 1), -(F + half) * L / (E * A), 1e-14);
    sct_sensitivity_direct(s.solver, &s.r, &du);
    ck_close(du, F * L / (E * A), 1e-12);
    sct_sensitivity_force(s.solver, &s.r, &du, 0, 0, &dN);
    ck_close(dN, half, 1e-9);
    ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 1, &(sct_weights){.wu = &one}, &dq), SCT_OK);
    ck_close(dq, F * L / (E * A), 1e-12);
    sct_sensitivity_curvature(s.solver, &s.r, &du, (sct_weights){.wu = &one}, &work, &H);
    ck_close(H, -F * L / (E * A), 1e-12);
    H = 0.0;
    sct_sensitivity_curvature(s.solver, &s.r, &du, (sct_weights){.wN = &one}, &work, &H);
    ck_close(H, half, 1e-9);
    solved_free(&s);
}
END_TEST

/* A cantilever with I = c A^2 under a load at its tip: u = P L^3/3EI, so du/dz = -2 u, d2u/dz2 = 4 u; its rotation
 * likewise. Determinate: the moments stay. Own weight w A instead: u = w A L^4/8EI, du/dz = -u. */
START_TEST(one_cantilever_by_hand)
{
    for (int is_weight = 0; is_weight < 2; is_weight++) {
        const double p = is_weight ? -1.0 : -2.0;
        sct_model *m = mb_new(2);
        const int g = mb_group(m, mb_material(m, 200e9, 7850, NAN), 1e-2, true);
        mb_stiffen(m, g, 1e-5, 1e-5, 1e-5);
        mb_joint(m, 0, 0, 0);
        mb_joint(m, 3, 0, 0);
        mb_fix(m, 0);
        mb_beam(m, 0, 1, 0);
        mb_case(m, is_weight);
        if (!is_weight) mb_load(m, 0, 1, 0, -1e4, 0);
        solved s = solve(m);
        double du[3], dS, work[3];
        sct_sensitivity_direct(s.solver, &s.r, du);
        for (int i = 1; i < 3; i++) { /* displacement and rotation */
            double H = 0.0, dq, wu[3] = {0};
            wu[i] = 1.0;
            ck_close(du[i], p * s.r.u[i], 1e-12);
            ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 1, &(sct_weights){.wu = wu}, &dq), SCT_OK);
            ck_close(dq, p * s.r.u[i], 1e-12);
            sct_sensitivity_curvature(s.solver, &s.r, du, (sct_weights){.wu = wu}, work, &H);
            ck_close(H, p * p * s.r.u[i], 1e-11);
        }
        for (int i = 1; i < 3; i++) {
            sct_sensitivity_force(s.solver, &s.r, du, i, 0, &dS);
            ck_assert_double_eq_tol(dS, is_weight ? s.r.N[i] : 0.0, 1e-10 * fabs(s.r.N[i]));
        }
        solved_free(&s);
    }
}
END_TEST

START_TEST(determinate_forces_do_not_depend_on_sizes)
{
    for (int i = 0; i < TRIALS; i += 3) { /* every third truss is determinate */
        sct_model *m = trial_truss(i);
        m->cases[0].self_weight = 0.0;
        solved s = solve(m);
        const int vars = s.st->n_vars;
        double *du = zeros(3 * vars * s.st->n_dof), *dN = zeros(3 * vars);
        ck_assert_int_eq(s.st->n_bars, s.st->n_dof);
        sct_sensitivity_direct(s.solver, &s.r, du);
        for (int e = 0; e < s.st->n_bars; e++) {
            for (int k = 0; k < 3; k++) {
                sct_sensitivity_force(s.solver, &s.r, du, e, k, dN + k * vars);
                for (int v = 0; v < vars; v++) {
                    ck_assert_double_eq_tol(dN[k * vars + v], 0.0, 1e-9 * scale_of_forces(&s, k));
                }
            }
        }
        free(du);
        free(dN);
        solved_free(&s);
    }
}
END_TEST

START_TEST(weighted_sums_are_what_the_gradient_is_of)
{
    /* q(z + h) - q(z - h) over 2 h for the values themselves, not only through du. */
    for (int i = 0; i < TRIALS + FRAMES; i += 5) {
        solved s = solve(trial(i));
        const int vars = s.st->n_vars;
        const double h = 1e-4;
        sct_weights q[1];
        double *w = random_weights(&s, 1, q, 77u), *dq = zeros(vars), *z = zeros(vars);
        const double size = size_of(&s, q[0]);
        ck_assert_int_eq(sct_sensitivity_adjoint(s.solver, &s.r, 1, q, dq), SCT_OK);
        for (int v = 0; v < vars; v++) {
            z[v] = h;
            analyse_at(&s, z);
            const double up = value_of(&s, q[0]);
            z[v] = -h;
            analyse_at(&s, z);
            z[v] = 0.0;
            ck_assert_double_eq_tol(dq[v], (up - value_of(&s, q[0])) / (2 * h), 1e-6 * size);
        }
        free(w);
        free(dq);
        free(z);
        solved_free(&s);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("sensitivity");
    TCase *tests = tcase_create("sensitivity");
    tcase_set_timeout(tests, 60);
    tcase_add_test(tests, derivatives_of_displacements_and_forces_are_those_of_central_differences);
    tcase_add_test(tests, displacement_derivatives_follow_the_direction_asked_for);
    tcase_add_test(tests, adjoint_and_direct_gradients_agree);
    tcase_add_test(tests, gradient_of_nothing_is_zero);
    tcase_add_test(tests, curvature_is_that_of_differences_of_the_gradient_and_symmetric);
    tcase_add_test(tests, curvature_is_added_to_what_is_there);
    tcase_add_test(tests, one_bar_by_hand);
    tcase_add_test(tests, one_cantilever_by_hand);
    tcase_add_test(tests, determinate_forces_do_not_depend_on_sizes);
    tcase_add_test(tests, weighted_sums_are_what_the_gradient_is_of);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

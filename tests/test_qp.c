/* The dense kernels and the dual active set QP. */
#include "base/random.h"
#include "numerics/dense.h"
#include "numerics/reduced_qp.h"
#include "support.h"
#include <string.h>

enum { N_MOST = 40, M_MOST = 160 };

static double uniform(sct_random *r, double from, double to)
{
    return from + (to - from) * sct_random_unit(r);
}

static int integer(sct_random *r, int from, int to)
{
    return from + (int)(sct_random_unit(r) * (to - from + 1));
}

/* ---- dense ----------------------------------------------------------------------------------------------------- */

/* A = B B' + shift I, n x n */
static void random_spd(sct_random *r, int n, int rank, double shift, double A[])
{
    double *B = malloc((size_t)(n * rank) * sizeof *B);
    for (int i = 0; i < n * rank; ++i) B[i] = uniform(r, -1, 1);
    for (int i = 0; i < n; ++i) {
        for (int k = 0; k < n; ++k) {
            A[i * n + k] = i == k ? shift : 0;
            for (int j = 0; j < rank; ++j) A[i * n + k] += B[i * rank + j] * B[k * rank + j];
        }
    }
    free(B);
}

/* Largest entry of A - sum lambda q q' and of Q'Q - I. */
static double eigen_error(int n, const double A[], const double Q[], const double lambda[])
{
    double error = 0;
    for (int i = 0; i < n; ++i) {
        for (int k = 0; k < n; ++k) {
            double a = -A[i * n + k], unit = i == k ? -1 : 0;
            for (int j = 0; j < n; ++j) {
                a += lambda[j] * Q[j * n + i] * Q[j * n + k];
                unit += Q[i * n + j] * Q[k * n + j];
            }
            error = fmax(error, fmax(fabs(a), fabs(unit)));
        }
    }
    return error;
}

static void check_eigen(int n, const double A[])
{
    double *Q = malloc((size_t)(n * n) * sizeof *Q), *lambda = malloc((size_t)n * sizeof *lambda);
    double *work = malloc((size_t)(n * (n + 2)) * sizeof *work);
    double size = 1;
    for (int i = 0; i < n * n; ++i) size = fmax(size, fabs(A[i]));
    memcpy(Q, A, (size_t)(n * n) * sizeof *Q);
    ck_assert(sct_eigen(n, Q, lambda, work));
    ck_assert_double_le(eigen_error(n, A, Q, lambda), 1e-14 * n * size);
    free(Q);
    free(lambda);
    free(work);
}

START_TEST(eigenvectors_rebuild_random_symmetric_matrices)
{
    sct_random r = {1};
    for (int n = 1; n <= 100; n += n < 12 ? 1 : 17) {
        double *A = malloc((size_t)(n * n) * sizeof *A);
        for (int i = 0; i < n; ++i)
            for (int k = 0; k <= i; ++k) A[i * n + k] = A[k * n + i] = uniform(&r, -1, 1);
        check_eigen(n, A);
        random_spd(&r, n, n > 1 ? n / 2 : 1, 0, A); /* n - n/2 eigenvalues are 0 */
        check_eigen(n, A);
        for (int i = 0; i < n * n; ++i) A[i] = i % (n + 1) == 0 ? 3 : 0; /* all equal */
        check_eigen(n, A);
        for (int i = 0; i < n; ++i) /* graded over 16 powers of ten */
            for (int k = 0; k < n; ++k) A[i * n + k] = pow(10, -8.0 * (i + k) / n);
        check_eigen(n, A);
        free(A);
    }
}
END_TEST

/* The matrix with 2 on the diagonal and -1 beside it: eigenvalues 2 - 2 cos(k pi/(n + 1)). */
START_TEST(eigenvalues_of_the_second_difference_are_the_known_cosines)
{
    enum { N = 9 };
    double A[N * N] = {0}, lambda[N], work[N * (N + 2)];
    for (int i = 0; i < N; ++i) {
        A[i * N + i] = 2;
        if (i > 0) A[i * N + i - 1] = A[(i - 1) * N + i] = -1;
    }
    ck_assert(sct_eigen(N, A, lambda, work));
    for (int k = 1; k <= N; ++k) {
        const double expected = 2 - 2 * cos(k * acos(-1) / (N + 1));
        double nearest = INFINITY;
        for (int i = 0; i < N; ++i) nearest = fmin(nearest, fabs(lambda[i] - expected));
        ck_assert_double_le(nearest, 1e-14);
    }
}
END_TEST

START_TEST(a_matrix_with_nan_has_no_eigenvalues_and_no_factor)
{
    double A[9] = {1, 0, NAN, 0, 1, 0, NAN, 0, 1}, L[9], lambda[3], work[15];
    memcpy(L, A, sizeof A);
    ck_assert(!sct_eigen(3, A, lambda, work));
    ck_assert(!sct_cholesky(3, L));
}
END_TEST

START_TEST(cholesky_tells_definite_from_semidefinite_and_indefinite)
{
    double definite[4] = {4, NAN, 2, 3}, semidefinite[4] = {1, 1, 1, 1}, indefinite[4] = {1, 2, 2, 1};
    ck_assert(sct_cholesky(2, definite)); /* L = [2 0; 1 sqrt 2]; the upper triangle is not read */
    ck_close(definite[0], 2.0, 1e-15);
    ck_close(definite[2], 1.0, 1e-15);
    ck_close(definite[3], sqrt(2), 1e-15);
    ck_assert(!sct_cholesky(2, semidefinite));
    ck_assert(!sct_cholesky(2, indefinite));
}
END_TEST

/* ---- qp: published problems ------------------------------------------------------------------------------------ */

typedef struct problem {
    int n, m, m_eq;
    bool has_bounds;
    double G[N_MOST * N_MOST], a[N_MOST], rows[M_MOST * N_MOST], b[M_MOST], lower[N_MOST], upper[N_MOST];
} problem;

typedef struct solution {
    double x[N_MOST], mu[M_MOST], mu_bound[N_MOST];
} solution;

static sct_status solve(const problem *p, solution *s)
{
    sct_qp *qp = sct_qp_new(p->n, p->m);
    ck_assert_ptr_nonnull(qp);
    const sct_qp_data data = {p->n,
                              p->m,
                              p->m_eq,
                              p->n,
                              p->G,
                              p->a,
                              p->rows,
                              p->b,
                              p->has_bounds ? p->lower : NULL,
                              p->has_bounds ? p->upper : NULL};
    const sct_status status = sct_qp_solve(qp, &data, s->x, s->mu, s->mu_bound);
    sct_qp_free(qp);
    return status;
}

/* Largest of: stationarity, violation, complementarity, multipliers of the wrong sign; relative to the data. */
static double kkt_error(const problem *p, const solution *s)
{
    double error = 0, size = 1;
    for (int i = 0; i < p->n; ++i) size = fmax(size, fmax(fabs(p->a[i]), fabs(s->x[i])));
    for (int j = 0; j < p->m; ++j) size = fmax(size, fabs(s->mu[j]));
    for (int i = 0; i < p->n; ++i) {
        double L = p->a[i] + s->mu_bound[i];
        for (int k = 0; k < p->n; ++k) L += p->G[i * p->n + k] * s->x[k];
        for (int j = 0; j < p->m; ++j) L += s->mu[j] * p->rows[j * p->n + i];
        error = fmax(error, fabs(L));
        if (!p->has_bounds) continue;
        error = fmax(error, fmax(p->lower[i] - s->x[i], s->x[i] - p->upper[i]));
        if (s->mu_bound[i] > 0) error = fmax(error, s->mu_bound[i] * fabs(p->upper[i] - s->x[i]));
        if (s->mu_bound[i] < 0) error = fmax(error, -s->mu_bound[i] * fabs(s->x[i] - p->lower[i]));
    }
    for (int j = 0; j < p->m; ++j) {
        double g = -p->b[j];
        for (int k = 0; k < p->n; ++k) g += p->rows[j * p->n + k] * s->x[k];
        error = fmax(error, j < p->m_eq ? fabs(g) : g);
        if (j < p->m_eq) continue;
        error = fmax(error, fmax(-s->mu[j], fabs(s->mu[j] * g)));
    }
    return error / size;
}

/* Goldfarb and Idnani 1983, the worked example (from memory): minimise 6 x1 + 2 (x1^2 - x1 x2 + x2^2), x >= 0,
 * x1 + x2 >= 2. Solution (1/2, 3/2), f = 6.5. */
START_TEST(the_example_of_goldfarb_and_idnani)
{
    problem p = {.n = 2,
                 .m = 1,
                 .G = {4, -2, -2, 4},
                 .a = {6, 0},
                 .rows = {-1, -1},
                 .b = {-2},
                 .has_bounds = true,
                 .upper = {INFINITY, INFINITY}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_OK);
    ck_close(s.x[0], 0.5, 1e-14);
    ck_close(s.x[1], 1.5, 1e-14);
    ck_assert_double_le(kkt_error(&p, &s), 1e-14);
}
END_TEST

/* Hock and Schittkowski 1981, problem 21 (from memory): minimise 0.01 x1^2 + x2^2 - 100, 10 x1 - x2 >= 10,
 * 2 <= x1 <= 50, -50 <= x2 <= 50. Solution (2, 0). */
START_TEST(hock_and_schittkowski_21)
{
    problem p = {.n = 2,
                 .m = 1,
                 .G = {0.02, 0, 0, 2},
                 .rows = {-10, 1},
                 .b = {-10},
                 .has_bounds = true,
                 .lower = {2, -50},
                 .upper = {50, 50}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_OK);
    ck_assert(s.x[0] == 2);
    ck_assert_double_eq_tol(s.x[1], 0, 1e-15);
    ck_close(s.mu_bound[0], -0.04, 1e-13);
}
END_TEST

/* Hock and Schittkowski 1981, problem 35 (Beale; from memory): solution (4/3, 7/9, 4/9), f = 1/9. */
START_TEST(hock_and_schittkowski_35)
{
    problem p = {.n = 3,
                 .m = 1,
                 .G = {4, 2, 2, 2, 4, 0, 2, 0, 2},
                 .a = {-8, -6, -4},
                 .rows = {1, 1, 2},
                 .b = {3},
                 .has_bounds = true,
                 .upper = {INFINITY, INFINITY, INFINITY}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_OK);
    ck_close(s.x[0], 4.0 / 3, 1e-14);
    ck_close(s.x[1], 7.0 / 9, 1e-14);
    ck_close(s.x[2], 4.0 / 9, 1e-14);
    ck_close(s.mu[0], 2.0 / 9, 1e-13);
}
END_TEST

/* Hock and Schittkowski 1981, problem 76 (from memory): f = -4.681818... = -103/22. */
START_TEST(hock_and_schittkowski_76)
{
    problem p = {.n = 4,
                 .m = 3,
                 .G = {2, 0, -1, 0, 0, 1, 0, 0, -1, 0, 2, 1, 0, 0, 1, 1},
                 .a = {-1, -3, 1, -1},
                 .rows = {1, 2, 1, 1, 3, 1, 2, -1, 0, -1, -4, 0},
                 .b = {5, 4, -1.5},
                 .has_bounds = true,
                 .upper = {INFINITY, INFINITY, INFINITY, INFINITY}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_OK);
    const double *x = s.x;
    const double f = x[0] * x[0] + 0.5 * x[1] * x[1] + x[2] * x[2] + 0.5 * x[3] * x[3] - x[0] * x[2] + x[2] * x[3] -
                     x[0] - 3 * x[1] + x[2] - x[3];
    ck_close(f, -103.0 / 22, 1e-14);
    ck_assert_double_le(kkt_error(&p, &s), 1e-14);
}
END_TEST

/* Hock and Schittkowski 1981, problem 28 (from memory): (x1 + x2)^2 + (x2 + x3)^2 with x1 + 2 x2 + 3 x3 = 1; the
 * Hessian is singular, 1e-6 on its diagonal hardly moves the solution (1/2, -1/2, 1/2). */
START_TEST(hock_and_schittkowski_28_nearly_singular)
{
    const double e = 1e-6;
    problem p = {.n = 3, .m = 1, .m_eq = 1, .G = {2 + e, 2, 0, 2, 4 + e, 2, 0, 2, 2 + e}, .rows = {1, 2, 3}, .b = {1}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_OK);
    ck_close(s.x[0], 0.5, 1e-5);
    ck_close(s.x[1], -0.5, 1e-5);
    ck_close(s.x[2], 0.5, 1e-5);
    ck_assert_double_le(kkt_error(&p, &s), 1e-12);
}
END_TEST

/* ---- qp: random problems --------------------------------------------------------------------------------------- */

/* Feasible at a random point inside the bounds. With `copies`, rows repeat (scaled) and sum up, through one vertex. */
static void random_problem(sct_random *r, problem *p, double *inside, bool copies)
{
    *p = (problem){.n = integer(r, 1, N_MOST)};
    const int n = p->n;
    p->m_eq = integer(r, 0, n / 3);
    p->m = p->m_eq + integer(r, 0, 3 * n);
    p->has_bounds = sct_random_unit(r) < 0.7;
    random_spd(r, n, integer(r, 1, n), pow(10, uniform(r, -3, 0)), p->G);
    for (int i = 0; i < n; ++i) {
        p->a[i] = uniform(r, -10, 10);
        inside[i] = uniform(r, -1, 1);
        p->lower[i] = sct_random_unit(r) < 0.3 ? -INFINITY : inside[i] - uniform(r, 0, 1);
        p->upper[i] = sct_random_unit(r) < 0.3 ? INFINITY : inside[i] + uniform(r, 0, 1);
        if (copies && sct_random_unit(r) < 0.2) p->lower[i] = p->upper[i] = inside[i];
    }
    for (int j = 0; j < p->m; ++j) {
        double *row = p->rows + j * n;
        const double factor = uniform(r, 0.1, 10);
        for (int i = 0; i < n; ++i) row[i] = sct_random_unit(r) < 0.4 ? 0 : uniform(r, -1, 1);
        if (copies && j > 0 && sct_random_unit(r) < 0.5) {
            const double *first = p->rows + integer(r, 0, j - 1) * n, *second = p->rows + integer(r, 0, j - 1) * n;
            const double share = sct_random_unit(r) < 0.5 ? 0 : 1;
            for (int i = 0; i < n; ++i) row[i] = first[i] + share * second[i];
        }
        const double norm = sqrt(sct_dot(n, row, row));
        for (int i = 0; i < n && norm > 0; ++i) row[i] *= factor / norm;
        const double gap = j < p->m_eq || (copies && sct_random_unit(r) < 0.8) ? 0 : uniform(r, 0, 1);
        p->b[j] = sct_dot(n, row, inside) + gap;
    }
}

static void check_random(uint64_t seed, int count, bool copies)
{
    static problem p;
    static solution s;
    double inside[N_MOST];
    sct_random r = {seed};
    for (int k = 0; k < count; ++k) {
        random_problem(&r, &p, inside, copies);
        const sct_status status = solve(&p, &s);
        ck_assert_msg(status == SCT_OK, "problem %d (n %d, m %d, m_eq %d): %d", k, p.n, p.m, p.m_eq, (int)status);
        const double error = kkt_error(&p, &s);
        ck_assert_msg(error <= 1e-9, "problem %d (n %d, m %d, m_eq %d): KKT error %g", k, p.n, p.m, p.m_eq, error);
    }
}

START_TEST(four_hundred_random_problems_end_at_kkt_points)
{
    check_random(1, 400, false);
}
END_TEST

START_TEST(four_hundred_degenerate_problems_end_at_kkt_points)
{
    check_random(2, 400, true);
}
END_TEST

/* The same answer whatever is guessed of the sides: nothing, the truth, something at random. */
START_TEST(guessed_bounds_change_nothing_but_the_way)
{
    static problem p;
    static solution whole, guessed;
    double inside[N_MOST];
    sct_random r = {5};
    for (int k = 0; k < 600; ++k) {
        random_problem(&r, &p, inside, k % 4 == 3);
        ck_assert_int_eq(solve(&p, &whole), SCT_OK);
        const sct_qp_data data = {
            p.n, p.m, p.m_eq, p.n, p.G, p.a, p.rows, p.b, p.has_bounds ? p.lower : NULL, p.has_bounds ? p.upper : NULL};
        signed char side[N_MOST];
        for (int i = 0; i < p.n; ++i) {
            const signed char truth = (signed char)((whole.mu_bound[i] > 0) - (whole.mu_bound[i] < 0));
            const double u = sct_random_unit(&r);
            side[i] = k % 3 == 0 || u < 0.5 ? truth : k % 3 == 1 ? 0 : (signed char)(u < 0.75 ? -1 : 1);
        }
        sct_reduced_qp *qp = sct_reduced_qp_new(p.n, p.m);
        ck_assert_int_eq(sct_reduced_qp_solve(qp, &data, side, guessed.x, guessed.mu, guessed.mu_bound), SCT_OK);
        sct_reduced_qp_free(qp);
        const double error = kkt_error(&p, &guessed);
        ck_assert_msg(error <= 1e-9, "problem %d (n %d, m %d, m_eq %d): KKT error %g", k, p.n, p.m, p.m_eq, error);
        for (int i = 0; i < p.n; ++i) { /* G is definite: one solution */
            ck_assert_double_eq_tol(guessed.x[i], whole.x[i], 1e-6);
            ck_assert_int_eq(side[i], (guessed.mu_bound[i] > 0) - (guessed.mu_bound[i] < 0));
        }
    }
}
END_TEST

START_TEST(guesses_that_leave_no_room_are_given_up)
{
    /* x1 + x2 >= 1.5 in the unit square: with both at 0 there is nothing */
    const double G[4] = {1, 0, 0, 1}, a[2] = {0, 0}, row[2] = {-1, -1}, b[1] = {-1.5}, lower[2] = {0, 0},
                 upper[2] = {1, 1};
    const sct_qp_data data = {2, 1, 0, 2, G, a, row, b, lower, upper};
    signed char side[2] = {-1, 0};
    double x[2], mu[1], mu_bound[2];
    sct_reduced_qp *qp = sct_reduced_qp_new(2, 1);
    ck_assert_int_eq(sct_reduced_qp_solve(qp, &data, side, x, mu, mu_bound), SCT_OK);
    ck_close(x[0], 0.75, 1e-14);
    ck_close(x[1], 0.75, 1e-14);
    ck_assert_int_eq(side[0], 0);
    sct_reduced_qp_free(qp);
    sct_reduced_qp_free(NULL);
}
END_TEST

/* A nonnegative combination of rows that must be <= b, and its negative that must be <= -b - gap. */
START_TEST(contradictory_rows_are_reported_infeasible)
{
    static problem p;
    static solution s;
    double inside[N_MOST];
    sct_random r = {3};
    int n_tried = 0;
    for (int k = 0; k < 300; ++k) {
        random_problem(&r, &p, inside, k % 2 == 1);
        if (p.m - p.m_eq < 1 || p.m >= M_MOST) continue;
        double *last = p.rows + p.m * p.n;
        p.b[p.m] = -0.1;
        for (int j = p.m_eq; j < p.m; ++j) {
            const double weight = uniform(&r, 0, 1);
            for (int i = 0; i < p.n; ++i) last[i] -= weight * p.rows[j * p.n + i];
            p.b[p.m] -= weight * p.b[j];
        }
        ++p.m;
        ++n_tried;
        ck_assert_int_eq(solve(&p, &s), SCT_INFEASIBLE);
    }
    ck_assert_int_gt(n_tried, 200);
}
END_TEST

START_TEST(bounds_that_cross_and_rows_of_zeros_are_infeasible)
{
    solution s;
    problem crossed = {.n = 1, .G = {1}, .a = {0}, .has_bounds = true, .lower = {1}, .upper = {0}};
    ck_assert_int_eq(solve(&crossed, &s), SCT_INFEASIBLE);
    problem zeros = {.n = 2, .m = 1, .G = {1, 0, 0, 1}, .b = {-1}};
    ck_assert_int_eq(solve(&zeros, &s), SCT_INFEASIBLE);
    zeros.b[0] = 0;
    ck_assert_int_eq(solve(&zeros, &s), SCT_OK);
    problem equal = {.n = 2, .m = 2, .m_eq = 2, .G = {1, 0, 0, 1}, .rows = {1, 1, 2, 2}, .b = {1, 3}};
    ck_assert_int_eq(solve(&equal, &s), SCT_INFEASIBLE);
    equal.b[1] = 2;
    ck_assert_int_eq(solve(&equal, &s), SCT_OK);
    ck_close(s.x[0], 0.5, 1e-14);
}
END_TEST

START_TEST(an_indefinite_matrix_is_not_convex)
{
    problem p = {.n = 2, .G = {1, 2, 2, 1}};
    solution s;
    ck_assert_int_eq(solve(&p, &s), SCT_NOT_CONVEX);
}
END_TEST

/* Scaling of the variables by 1e-6 ... 1e6 changes nothing but rounding. */
START_TEST(badly_scaled_variables_are_solved_too)
{
    static problem p;
    static solution s;
    double inside[N_MOST], size[N_MOST];
    sct_random r = {5};
    for (int k = 0; k < 100; ++k) {
        random_problem(&r, &p, inside, false);
        for (int i = 0; i < p.n; ++i) size[i] = pow(10, uniform(&r, -6, 6));
        for (int i = 0; i < p.n; ++i) {
            for (int l = 0; l < p.n; ++l) p.G[i * p.n + l] *= size[i] * size[l];
            for (int j = 0; j < p.m; ++j) p.rows[j * p.n + i] *= size[i];
            p.a[i] *= size[i];
            p.lower[i] /= size[i];
            p.upper[i] /= size[i];
        }
        ck_assert_int_eq(solve(&p, &s), SCT_OK);
        for (int i = 0; i < p.n; ++i) { /* judged in the old variables */
            for (int l = 0; l < p.n; ++l) p.G[i * p.n + l] /= size[i] * size[l];
            for (int j = 0; j < p.m; ++j) p.rows[j * p.n + i] /= size[i];
            p.a[i] /= size[i];
            p.lower[i] *= size[i];
            p.upper[i] *= size[i];
            s.x[i] *= size[i];
            s.mu_bound[i] /= size[i];
        }
        ck_assert_double_le(kkt_error(&p, &s), 1e-8);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("qp");
    TCase *dense = tcase_create("dense"), *known = tcase_create("published"), *random = tcase_create("random");
    tcase_set_timeout(random, 60);
    tcase_add_test(dense, eigenvectors_rebuild_random_symmetric_matrices);
    tcase_add_test(dense, eigenvalues_of_the_second_difference_are_the_known_cosines);
    tcase_add_test(dense, a_matrix_with_nan_has_no_eigenvalues_and_no_factor);
    tcase_add_test(dense, cholesky_tells_definite_from_semidefinite_and_indefinite);
    tcase_add_test(known, the_example_of_goldfarb_and_idnani);
    tcase_add_test(known, hock_and_schittkowski_21);
    tcase_add_test(known, hock_and_schittkowski_35);
    tcase_add_test(known, hock_and_schittkowski_76);
    tcase_add_test(known, hock_and_schittkowski_28_nearly_singular);
    tcase_add_test(random, four_hundred_random_problems_end_at_kkt_points);
    tcase_add_test(random, four_hundred_degenerate_problems_end_at_kkt_points);
    tcase_add_test(random, guessed_bounds_change_nothing_but_the_way);
    tcase_add_test(random, guesses_that_leave_no_room_are_given_up);
    tcase_add_test(random, contradictory_rows_are_reported_infeasible);
    tcase_add_test(random, bounds_that_cross_and_rows_of_zeros_are_infeasible);
    tcase_add_test(random, an_indefinite_matrix_is_not_convex);
    tcase_add_test(random, badly_scaled_variables_are_solved_too);
    suite_add_tcase(suite, dense);
    suite_add_tcase(suite, known);
    suite_add_tcase(suite, random);
    return run_suite(suite);
}

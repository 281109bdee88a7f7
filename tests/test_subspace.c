/* Tests of numerics/subspace.h: K x = lambda B x against closed forms, constructed spectra and LAPACK. */
#include "support.h"

#include <stdbool.h>
#include <string.h>

#include "base/random.h"
#include "numerics/dense.h"
#include "numerics/subspace.h"

/* LAPACK: A x = mu B x for symmetric A and positive definite B, all pairs, mu ascending; the independent path. */
void dsygv_(const int *itype, const char *jobz, const char *uplo, const int *n, double *a, const int *lda, double *b,
            const int *ldb, double *w, double *work, const int *lwork, int *info);

static const double PI = 3.14159265358979323846;

/* ---- pencils ---------------------------------------------------------------------------------------------------- */

/* Either dense (K and B full, column-major) or a chain: K = tridiagonal (-1 2 -1) and B diagonal. */
typedef struct pencil {
    int n;
    sct_pattern pattern;
    int *column, *row;
    double *values; /* upper triangle of K */
    double *K, *B;  /* n x n; of a chain K is NULL and B its diagonal */
    sct_factor *factor;
} pencil;

static double *copy_of(const double x[], size_t count)
{
    double *copy = malloc((count + 1) * sizeof *copy);
    memcpy(copy, x, count * sizeof *copy);
    return copy;
}

static void pencil_factor(pencil *p, sct_engine engine)
{
    sct_status status;
    p->pattern = (sct_pattern){.n = p->n, .column = p->column, .row = p->row};
    sct_factor_free(p->factor);
    p->factor = sct_factor_new(&p->pattern, engine, &status);
    ck_assert_int_eq(status, SCT_OK);
    ck_assert_int_eq(sct_factor_update(p->factor, p->values, NULL), SCT_OK);
}

/* Takes K and B. */
static pencil dense_pencil(int n, double *K, double *B)
{
    pencil p = {.n = n, .K = K, .B = B};
    p.column = calloc((size_t)n + 1, sizeof *p.column);
    p.row = calloc((size_t)(n * n) + 1, sizeof *p.row);
    p.values = calloc((size_t)(n * n) + 1, sizeof *p.values);
    int k = 0;
    for (int j = 0; j < n; j++) {
        p.column[j] = k;
        for (int i = 0; i <= j; i++) {
            p.row[k] = i;
            p.values[k++] = K[i + j * n];
        }
    }
    p.column[n] = k;
    pencil_factor(&p, SCT_ENGINE_AUTO);
    return p;
}

/* B = b I. */
static pencil chain(int n, double b)
{
    pencil p = {.n = n};
    p.column = calloc((size_t)n + 1, sizeof *p.column);
    p.row = calloc(2 * (size_t)n, sizeof *p.row);
    p.values = calloc(2 * (size_t)n, sizeof *p.values);
    p.B = calloc((size_t)n, sizeof *p.B);
    int k = 0;
    for (int j = 0; j < n; j++) {
        p.column[j] = k;
        for (int i = j > 0 ? j - 1 : 0; i <= j; i++) {
            p.row[k] = i;
            p.values[k++] = i < j ? -1.0 : 2.0;
        }
        p.B[j] = b;
    }
    p.column[n] = k;
    pencil_factor(&p, SCT_ENGINE_AUTO);
    return p;
}

static double chain_eigenvalue(int n, int k) /* of K, k from 1: closed form */
{
    return 4.0 * pow(sin(0.5 * k * PI / (n + 1)), 2.0);
}

static void pencil_free(pencil *p)
{
    sct_factor_free(p->factor);
    free(p->column);
    free(p->row);
    free(p->values);
    free(p->K);
    free(p->B);
}

static void times_B(void *user, int count, const double X[], double Y[])
{
    const pencil *p = user;
    const int n = p->n;
    for (int k = 0; k < count; k++) {
        for (int i = 0; i < n; i++) {
            double sum = 0.0;
            if (p->K != NULL) {
                for (int j = 0; j < n; j++) sum += p->B[i + j * n] * X[j + k * n];
            } else {
                sum = p->B[i] * X[i + k * n];
            }
            Y[i + k * n] = sum;
        }
    }
}

/* x'K y */
static double inner(const pencil *p, const double x[], const double y[])
{
    double sum = 0.0;
    for (int j = 0; j < p->n; j++) {
        for (int k = p->column[j]; k < p->column[j + 1]; k++) {
            const int i = p->row[k];
            sum += p->values[k] * (i == j ? x[i] * y[i] : x[i] * y[j] + x[j] * y[i]);
        }
    }
    return sum;
}

static double uniform(sct_random *r)
{
    return 2.0 * sct_random_unit(r) - 1.0;
}

/* C'D C; D may be NULL for I. */
static double *congruent(int n, const double C[], const double D[])
{
    double *A = calloc((size_t)(n * n) + 1, sizeof *A);
    for (int j = 0; j < n; j++) {
        for (int i = 0; i <= j; i++) {
            double sum = 0.0;
            for (int k = 0; k < n; k++) sum += C[k + i * n] * (D != NULL ? D[k] : 1.0) * C[k + j * n];
            A[i + j * n] = A[j + i * n] = sum;
        }
    }
    return A;
}

/* A pencil with mu as its spectrum: K = C'C, B = C'diag(mu) C, C = a random orthogonal matrix, columns scaled. */
static pencil pencil_of_spectrum(sct_random *r, int n, const double mu[])
{
    double *C = calloc((size_t)(n * n), sizeof *C);
    for (int i = 0; i < n; i++) C[i + i * n] = 1.0;
    for (int turn = 0; turn < 3; turn++) { /* reflections I - 2 v v' / v'v */
        double v[100], square = 0.0;
        for (int i = 0; i < n; i++) v[i] = uniform(r);
        for (int i = 0; i < n; i++) square += v[i] * v[i];
        for (int j = 0; j < n; j++) {
            double dot = 0.0;
            for (int i = 0; i < n; i++) dot += v[i] * C[i + j * n];
            for (int i = 0; i < n; i++) C[i + j * n] -= 2.0 * dot / square * v[i];
        }
    }
    for (int j = 0; j < n; j++) {
        const double scale = 1.0 + sct_random_unit(r);
        for (int i = 0; i < n; i++) C[i + j * n] *= scale;
    }
    pencil p = dense_pencil(n, congruent(n, C, NULL), congruent(n, C, mu));
    free(C);
    return p;
}

/* All mu of B x = mu K x by LAPACK, ascending. */
static void lapack_spectrum(const pencil *p, double mu[])
{
    const int n = p->n, itype = 1, lwork = 64 * n;
    double *A = copy_of(p->B, (size_t)(n * n)), *K = copy_of(p->K, (size_t)(n * n));
    double *work = malloc((size_t)lwork * sizeof *work);
    int info;
    dsygv_(&itype, "N", "U", &n, A, &n, K, &n, mu, work, &lwork, &info);
    ck_assert_int_eq(info, 0);
    free(A);
    free(K);
    free(work);
}

/* ---- runs ------------------------------------------------------------------------------------------------------- */

static sct_subspace *subspace(int n, int wanted)
{
    sct_status status;
    sct_subspace *s = sct_subspace_new(n, wanted, &status);
    ck_assert_int_eq(status, SCT_OK);
    return s;
}

/* What holds of every run that converged: order, X'K X = I, ||B x - mu K x|| as small as asked. */
static void check_pairs(pencil *p, const sct_eigenpairs *pairs)
{
    const int n = p->n;
    double *Bx = malloc(((size_t)n + 1) * sizeof *Bx);
    for (int k = 0; k < pairs->found; k++) {
        const double *x = pairs->X + k * n;
        ck_assert(pairs->lambda[k] > 0.0);
        ck_assert(k == 0 || pairs->lambda[k] >= pairs->lambda[k - 1]);
        ck_assert(pairs->error[k] <= 1e-8);
        for (int j = 0; j < k; j++) ck_assert_double_eq_tol(inner(p, x, pairs->X + j * n), 0.0, 1e-9);
        ck_close(inner(p, x, x), 1.0, 1e-9);
        times_B(p, 1, x, Bx);
        double sum = 0.0;
        for (int i = 0; i < n; i++) sum += x[i] * Bx[i];
        ck_close(sum * pairs->lambda[k], 1.0, 1e-10);
    }
    free(Bx);
}

static sct_eigenpairs run(pencil *p, sct_subspace *s, const sct_subspace_settings *settings)
{
    sct_eigenpairs pairs;
    ck_assert_int_eq(sct_subspace_run(s, p->factor, times_B, p, settings, &pairs), SCT_OK);
    check_pairs(p, &pairs);
    return pairs;
}

/* The pencil has just these lowest positive eigenvalues, 1 / mu[0 ... found), mu falling. */
static void check_spectrum(pencil *p, int wanted, int found, const double mu[], double tolerance)
{
    sct_subspace *s = subspace(p->n, wanted);
    const sct_eigenpairs pairs = run(p, s, NULL);
    ck_assert_int_eq(pairs.found, found);
    for (int k = 0; k < found; k++) ck_close(pairs.lambda[k] * mu[k], 1.0, tolerance);
    sct_subspace_free(s);
}

/* ---- spectra ---------------------------------------------------------------------------------------------------- */

START_TEST(a_chain_of_a_thousand_has_its_closed_form_frequencies_after_a_few_blocks)
{
    static const int SIZES[] = {2, 3, 7, 30, 200, 1000};
    for (int t = 0; t < 6; t++) {
        pencil p = chain(SIZES[t], 1.0);
        sct_subspace *s = subspace(p.n, 6);
        const sct_eigenpairs pairs = run(&p, s, NULL);
        ck_assert_int_eq(pairs.found, p.n < 6 ? p.n : 6);
        for (int k = 0; k < pairs.found; k++) ck_close(pairs.lambda[k], chain_eigenvalue(p.n, k + 1), 1e-11);
        ck_assert_int_le(pairs.blocks, 8);
        sct_subspace_free(s);
        pencil_free(&p);
    }
}
END_TEST

START_TEST(unknowns_without_mass_have_no_frequency)
{
    /* every third mass only: a chain of stiffness 1/3 between masses 1, 33 of them and ends at distance 3 */
    pencil p = chain(101, 0.0);
    for (int i = 2; i < p.n; i += 3) p.B[i] = 1.0;
    double mu[33];
    for (int k = 0; k < 33; k++) mu[k] = 3.0 / chain_eigenvalue(33, k + 1);
    check_spectrum(&p, 5, 5, mu, 1e-11);
    check_spectrum(&p, 40, 33, mu, 1e-9);
    pencil_free(&p);
}
END_TEST

START_TEST(negative_mu_of_any_size_do_not_hide_positive_ones)
{
    enum { N = 60 };
    sct_random r = {.state = 1};
    for (int trial = 0; trial < 6; trial++) {
        double mu[N];
        const int positive = trial; /* fewer than wanted, or more */
        for (int k = 0; k < positive; k++) mu[k] = 1.0 / (k + 1);
        for (int k = positive; k < N; k++) mu[k] = -pow(10.0, 3.0 * sct_random_unit(&r));
        pencil p = pencil_of_spectrum(&r, N, mu);
        check_spectrum(&p, 3, positive < 3 ? positive : 3, mu, 1e-9);
        pencil_free(&p);
    }
}
END_TEST

START_TEST(a_repeated_eigenvalue_comes_with_an_orthonormal_basis)
{
    enum { N = 50 };
    sct_random r = {.state = 2};
    static const int TIMES[] = {2, 3, 5, 7, 50};
    for (int trial = 0; trial < 5; trial++) {
        double mu[N];
        for (int k = 0; k < N; k++) mu[k] = k < TIMES[trial] ? 2.0 : 1.5 - 0.1 * k; /* then negative ones too */
        pencil p = pencil_of_spectrum(&r, N, mu);
        check_spectrum(&p, 5, 5, mu, 1e-10);
        check_spectrum(&p, 1, 1, mu, 1e-10);
        pencil_free(&p);
    }
}
END_TEST

START_TEST(random_pencils_have_the_eigenvalues_that_LAPACK_finds)
{
    sct_random r = {.state = 3};
    for (int trial = 0; trial < 80; trial++) {
        const int n = 1 + (int)(sct_random_bits(&r) % 80), wanted = 1 + (int)(sct_random_bits(&r) % 6);
        double *C = calloc((size_t)(n * n), sizeof *C), *B = calloc((size_t)(n * n), sizeof *B), mu[80], falling[80];
        for (int i = 0; i < n * n; i++) C[i] = uniform(&r);
        for (int i = 0; i < n; i++) C[i + i * n] += 3.0;
        for (int j = 0; j < n; j++) {
            for (int i = 0; i <= j; i++) B[i + j * n] = B[j + i * n] = uniform(&r);
        }
        pencil p = dense_pencil(n, congruent(n, C, NULL), B);
        pencil_factor(&p, trial % 2 == 0 ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE);
        lapack_spectrum(&p, mu);
        int positive = 0;
        for (int k = 0; k < n; k++) {
            falling[k] = mu[n - 1 - k];
            positive += mu[k] > 0.0;
        }
        check_spectrum(&p, wanted, positive < wanted ? positive : wanted, falling, 1e-7);
        free(C);
        pencil_free(&p);
    }
}
END_TEST

START_TEST(where_nothing_is_compressed_nothing_is_found)
{
    static const double B[] = {0.0, -1.0};
    for (int t = 0; t < 2; t++) {
        for (int n = 1; n <= 300; n = 2 * n + 1) {
            pencil p = chain(n, B[t]);
            check_spectrum(&p, 4, 0, NULL, 0.0);
            pencil_free(&p);
        }
    }
    sct_subspace *s = subspace(0, 3); /* no unknowns at all */
    sct_eigenpairs pairs;
    ck_assert_int_eq(sct_subspace_run(s, NULL, times_B, NULL, NULL, &pairs), SCT_OK);
    ck_assert_int_eq(pairs.found, 0);
    sct_subspace_free(s);
    sct_subspace_free(NULL);
}
END_TEST

START_TEST(a_product_of_rank_one_has_one_eigenvalue)
{
    pencil p = chain(40, 0.0);
    p.B[19] = 5.0;
    const double mu[] = {5.0 * 20.0 * 21.0 / 41.0}; /* flexibility of a string at 20 of 41: a b / (a + b) */
    check_spectrum(&p, 4, 1, mu, 1e-12);
    pencil_free(&p);
}
END_TEST

START_TEST(eigenvalues_above_the_largest_asked_for_are_left_out)
{
    pencil p = chain(300, 1.0);
    sct_subspace *s = subspace(p.n, 5);
    sct_subspace_settings settings = sct_subspace_defaults();
    settings.largest = 0.5 * (chain_eigenvalue(300, 2) + chain_eigenvalue(300, 3));
    const sct_eigenpairs pairs = run(&p, s, &settings);
    ck_assert_int_eq(pairs.found, 2);
    ck_close(pairs.lambda[1], chain_eigenvalue(300, 2), 1e-11);
    sct_subspace_free(s);
    pencil_free(&p);
}
END_TEST

START_TEST(a_shift_finds_the_one_positive_eigenvalue_beside_a_million_times_larger_negative_ones)
{
    pencil p = chain(1000, -1.0);
    p.B[500] = 1.0;
    sct_subspace *s = subspace(p.n, 1);
    sct_eigenpairs pairs;
    ck_assert_int_eq(sct_subspace_run(s, p.factor, times_B, &p, NULL, &pairs), SCT_NOT_CONVERGED);
    const double sigma = 1.0;
    for (int j = 0; j < p.n; j++) p.values[p.column[j + 1] - 1] -= sigma * p.B[j];
    ck_assert_int_eq(sct_factor_update(p.factor, p.values, NULL), SCT_OK); /* none in (0, 1] */
    pairs = run(&p, s, NULL);
    ck_assert_int_eq(pairs.found, 1);
    ck_assert_int_le(pairs.blocks, 20);
    /* x_i = t^|i - 500|: t + 1/t = 2 + lambda beside the middle, 2 - 2 t = lambda in it. With t = 1 - lambda/2:
     * (lambda/2)^2 = lambda (1 - lambda/2), so lambda = 4/3 (ends are 500 links away: t = 1/3) */
    ck_close(pairs.lambda[0] + sigma, 4.0 / 3.0, 1e-12);
    sct_subspace_free(s);
    pencil_free(&p);
}
END_TEST

/* ---- runs that start, stop and fail ----------------------------------------------------------------------------- */

START_TEST(a_warm_start_takes_fewer_blocks)
{
    pencil p = chain(500, 1.0);
    sct_subspace *s = subspace(p.n, 4);
    sct_subspace_settings settings = sct_subspace_defaults();
    settings.is_warm_start = true; /* nothing there yet: a cold start */
    const int cold = run(&p, s, &settings).blocks;
    for (int i = 0; i < p.n; i++) p.B[i] *= 1.0 + 1e-3 * sin(i);
    const sct_eigenpairs warm = run(&p, s, &settings);
    ck_assert_int_le(2 * warm.blocks, cold);
    double lambda[4];
    memcpy(lambda, warm.lambda, sizeof lambda);
    ck_assert_int_eq(run(&p, s, &settings).blocks, 3); /* nothing changed */
    settings.is_warm_start = false;
    const sct_eigenpairs again = run(&p, s, &settings);
    for (int k = 0; k < 4; k++) ck_close(lambda[k], again.lambda[k], 1e-12);
    sct_subspace_free(s);
    pencil_free(&p);
}
END_TEST

START_TEST(a_warm_start_from_eigenvectors_of_other_eigenvalues_finds_the_lowest)
{
    enum { N = 40 };
    double mu[N];
    for (int k = 0; k < N; k++) mu[k] = 1.0 / (k + 1);
    sct_random r = {.state = 4}, same = r;
    pencil p = pencil_of_spectrum(&r, N, mu);
    sct_subspace *s = subspace(N, 2);
    run(&p, s, NULL);
    mu[20] = 1.7; /* the same vectors, of which three are known, in another order */
    mu[30] = 1.4;
    pencil q = pencil_of_spectrum(&same, N, mu);
    sct_subspace_settings settings = sct_subspace_defaults();
    settings.is_warm_start = true;
    const sct_eigenpairs pairs = run(&q, s, &settings);
    ck_assert_int_eq(pairs.found, 2);
    ck_close(pairs.lambda[0], 1.0 / 1.7, 1e-12);
    ck_close(pairs.lambda[1], 1.0 / 1.4, 1e-12);
    sct_subspace_free(s);
    pencil_free(&p);
    pencil_free(&q);
}
END_TEST

START_TEST(a_run_that_is_stopped_gives_intervals_that_hold_an_eigenvalue)
{
    enum { N = 400 };
    pencil p = chain(N, 1.0);
    sct_subspace *s = subspace(N, 6);
    for (int blocks = 1; blocks <= 5; blocks++) {
        sct_eigenpairs pairs;
        sct_subspace_settings settings = sct_subspace_defaults();
        settings.most_blocks = blocks;
        ck_assert_int_eq(sct_subspace_run(s, p.factor, times_B, &p, &settings, &pairs), SCT_NOT_CONVERGED);
        ck_assert_int_eq(pairs.blocks, blocks);
        ck_assert_int_gt(pairs.found, 0);
        for (int k = 0; k < pairs.found; k++) {
            bool holds = false;
            ck_assert(pairs.error[k] < 1.0);
            for (int j = 1; j <= N; j++) {
                const double ratio = pairs.lambda[k] / chain_eigenvalue(N, j); /* mu exact / mu */
                holds = holds || fabs(ratio - 1.0) <= pairs.error[k] + 1e-12;
            }
            ck_assert(holds);
        }
    }
    sct_subspace_free(s);
    pencil_free(&p);
}
END_TEST

START_TEST(products_that_are_not_finite_are_refused_and_do_no_harm)
{
    pencil p = chain(30, 1.0);
    sct_subspace *s = subspace(30, 2);
    sct_eigenpairs pairs;
    static const double BAD[] = {NAN, INFINITY};
    sct_subspace_settings settings = sct_subspace_defaults();
    settings.is_warm_start = true;
    for (int t = 0; t < 2; t++) {
        p.B[7] = BAD[t];
        ck_assert_int_eq(sct_subspace_run(s, p.factor, times_B, &p, &settings, &pairs), SCT_NOT_ACCURATE);
        ck_assert_int_eq(pairs.found, 0);
        p.B[7] = 1.0;
        ck_close(run(&p, s, &settings).lambda[0], chain_eigenvalue(30, 1), 1e-12);
    }
    sct_subspace_free(s);
    pencil_free(&p);
}
END_TEST

START_TEST(the_same_pencil_gives_the_same_bits)
{
    pencil p = chain(300, 1.0);
    sct_subspace *s[] = {subspace(300, 3), subspace(300, 3)};
    sct_eigenpairs a = run(&p, s[0], NULL);
    a = run(&p, s[0], NULL);
    const sct_eigenpairs b = run(&p, s[1], NULL);
    ck_assert_mem_eq(a.lambda, b.lambda, 3 * sizeof(double));
    ck_assert_mem_eq(a.X, b.X, 900 * sizeof(double));
    sct_subspace_free(s[0]);
    sct_subspace_free(s[1]);
    pencil_free(&p);
}
END_TEST

/* ---- derivatives, as the header states them --------------------------------------------------------------------- */

START_TEST(the_derivatives_of_simple_and_repeated_eigenvalues_are_as_stated)
{
    enum { N = 12 };
    sct_random r = {.state = 5};
    double mu[N], dK[N * N], dB[N * N];
    for (int k = 0; k < N; k++) mu[k] = k == 0 ? 2.0 : k <= 3 ? 1.0 : 0.1 - 0.1 * k; /* one simple, three equal */
    pencil p = pencil_of_spectrum(&r, N, mu);
    for (int j = 0; j < N; j++) {
        for (int i = 0; i <= j; i++) {
            dK[i + j * N] = dK[j + i * N] = uniform(&r);
            dB[i + j * N] = dB[j + i * N] = uniform(&r);
        }
    }
    sct_subspace *s = subspace(N, 4);
    const sct_eigenpairs pairs = run(&p, s, NULL);
    double A[16]; /* lambda X'(K' - lambda B') X, of the simple one and of the cluster */
    for (int a = 0; a < 4; a++) {
        for (int b = 0; b < 4; b++) {
            const double lambda = a == 0 ? 0.5 : 1.0;
            A[4 * a + b] = 0.0;
            for (int i = 0; i < N; i++) {
                for (int j = 0; j < N; j++)
                    A[4 * a + b] +=
                        lambda * pairs.X[i + a * N] * (dK[i + j * N] - lambda * dB[i + j * N]) * pairs.X[j + b * N];
            }
        }
    }
    double cluster[9], slope[3], work[15];
    for (int a = 0; a < 9; a++) cluster[a] = A[4 * (a / 3 + 1) + a % 3 + 1];
    ck_assert(sct_eigen(3, cluster, slope, work));
    double sum = slope[0] + slope[1] + slope[2], product = slope[0] * slope[1] * slope[2];

    const double h = 1e-6;
    double *K = copy_of(p.K, N * N), *B = copy_of(p.B, N * N), moved[N];
    for (int i = 0; i < N * N; i++) {
        K[i] += h * dK[i];
        B[i] += h * dB[i];
    }
    pencil q = dense_pencil(N, K, B);
    lapack_spectrum(&q, moved);
    double d[4];
    for (int k = 0; k < 4; k++) d[k] = (1.0 / moved[N - 1 - k] - (k == 0 ? 0.5 : 1.0)) / h;
    ck_assert_double_eq_tol(d[0], A[0], 1e-4 * (1.0 + fabs(A[0])));
    ck_assert_double_eq_tol(d[1] + d[2] + d[3], sum, 1e-4 * (1.0 + fabs(sum)));
    ck_assert_double_eq_tol(d[1] * d[2] * d[3], product, 1e-4 * (1.0 + fabs(product)));
    sct_subspace_free(s);
    pencil_free(&p);
    pencil_free(&q);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("subspace");
    TCase *tests = tcase_create("subspace");
    tcase_add_test(tests, a_chain_of_a_thousand_has_its_closed_form_frequencies_after_a_few_blocks);
    tcase_add_test(tests, unknowns_without_mass_have_no_frequency);
    tcase_add_test(tests, negative_mu_of_any_size_do_not_hide_positive_ones);
    tcase_add_test(tests, a_repeated_eigenvalue_comes_with_an_orthonormal_basis);
    tcase_add_test(tests, random_pencils_have_the_eigenvalues_that_LAPACK_finds);
    tcase_add_test(tests, where_nothing_is_compressed_nothing_is_found);
    tcase_add_test(tests, a_product_of_rank_one_has_one_eigenvalue);
    tcase_add_test(tests, eigenvalues_above_the_largest_asked_for_are_left_out);
    tcase_add_test(tests, a_shift_finds_the_one_positive_eigenvalue_beside_a_million_times_larger_negative_ones);
    tcase_add_test(tests, a_warm_start_takes_fewer_blocks);
    tcase_add_test(tests, a_warm_start_from_eigenvectors_of_other_eigenvalues_finds_the_lowest);
    tcase_add_test(tests, a_run_that_is_stopped_gives_intervals_that_hold_an_eigenvalue);
    tcase_add_test(tests, products_that_are_not_finite_are_refused_and_do_no_harm);
    tcase_add_test(tests, the_same_pencil_gives_the_same_bits);
    tcase_add_test(tests, the_derivatives_of_simple_and_repeated_eigenvalues_are_as_stated);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

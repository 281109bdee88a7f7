/* Tests of the two factorizations behind numerics/factor.h. */
#include "support.h"

#include <string.h>

#include "base/random.h"
#include "numerics/factor.h"
#include "numerics/pairs.h"

/* LAPACK: solves A X = B for a dense positive definite A; the independent path. */
void dposv_(const char *uplo, const int *n, const int *nrhs, double *a, const int *lda, double *b, const int *ldb,
            int *info);

static const sct_engine ENGINES[] = {SCT_ENGINE_SMALL, SCT_ENGINE_SPARSE};

typedef struct matrix {
    sct_pattern pattern;
    int column[1400], *row;
    double *values, *dense;
} matrix;

/* A random pattern of density `density`, diagonally dominant by a little, rows and columns scaled over `decades`. */
static void random_matrix(matrix *a, sct_random *r, int n, double density, double decades)
{
    a->row = calloc((size_t)(n * n + 1), sizeof *a->row);
    a->values = calloc((size_t)(n * n + 1), sizeof *a->values);
    a->dense = calloc((size_t)(n * n + 1), sizeof *a->dense);
    double *scale = calloc((size_t)n + 1, sizeof *scale);
    for (int i = 0; i < n; i++) scale[i] = pow(10.0, decades * (sct_random_unit(r) - 0.5));
    for (int j = 0; j < n; j++) {
        for (int i = 0; i < j; i++) {
            if (sct_random_unit(r) >= density) continue;
            const double v = 2.0 * sct_random_unit(r) - 1.0;
            a->dense[i + j * n] = a->dense[j + i * n] = v;
            a->dense[i + i * n] += fabs(v) * 1.01;
            a->dense[j + j * n] += fabs(v) * 1.01;
        }
        a->dense[j + j * n] += 0.01;
    }
    int k = 0;
    for (int j = 0; j < n; j++) {
        a->column[j] = k;
        for (int i = 0; i <= j; i++) {
            if (a->dense[i + j * n] == 0.0) continue;
            a->dense[i + j * n] *= scale[i] * scale[j];
            a->dense[j + i * n] = a->dense[i + j * n];
            a->row[k] = i;
            a->values[k++] = a->dense[i + j * n];
        }
    }
    a->column[n] = k;
    a->pattern = (sct_pattern){.n = n, .column = a->column, .row = a->row};
    free(scale);
}

static void matrix_free(matrix *a)
{
    free(a->row);
    free(a->values);
    free(a->dense);
}

static sct_factor *factor_of(const matrix *a, sct_engine engine)
{
    sct_status status;
    sct_factor *f = sct_factor_new(&a->pattern, engine, &status);
    ck_assert_int_eq(status, SCT_OK);
    ck_assert_int_eq(sct_factor_engine(f), engine);
    return f;
}

START_TEST(both_engines_solve_what_dense_LAPACK_solves)
{
    sct_random r = {.state = 1};
    for (int trial = 0; trial < 120; trial++) {
        static const int COUNTS[] = {1, 2, 3, 4, 5, 9, 33, 70};
        const int n = 1 + (int)(sct_random_bits(&r) % 60), count = COUNTS[trial % 8];
        matrix a;
        random_matrix(&a, &r, n, sct_random_unit(&r) * sct_random_unit(&r), trial % 3 == 0 ? 6.0 : 0.0);
        double *b = calloc((size_t)(n * count), sizeof *b), *x = calloc((size_t)(n * count), sizeof *x);
        for (int i = 0; i < n * count; i++) b[i] = 2.0 * sct_random_unit(&r) - 1.0;
        memcpy(x, b, (size_t)(n * count) * sizeof *x);
        int info;
        double *dense = calloc((size_t)(n * n), sizeof *dense);
        memcpy(dense, a.dense, (size_t)(n * n) * sizeof *dense);
        dposv_("U", &n, &count, dense, &n, x, &n, &info);
        ck_assert_int_eq(info, 0);
        for (int e = 0; e < 2; e++) {
            sct_factor *f = factor_of(&a, ENGINES[e]);
            for (int again = 0; again < 2; again++) { /* values may be renewed any number of times */
                double *y = calloc((size_t)(n * count), sizeof *y);
                memcpy(y, b, (size_t)(n * count) * sizeof *y);
                ck_assert_int_eq(sct_factor_update(f, a.values, NULL), SCT_OK);
                sct_factor_solve(f, count, y);
                for (int c = 0; c < count; c++) {
                    double largest = 0.0;
                    for (int i = 0; i < n; i++) largest = fmax(largest, fabs(x[c * n + i]));
                    for (int i = 0; i < n; i++) ck_assert_double_eq_tol(y[c * n + i], x[c * n + i], 1e-9 * largest);
                }
                free(y);
            }
            sct_factor_free(f);
        }
        free(dense);
        free(b);
        free(x);
        matrix_free(&a);
    }
}
END_TEST

/* 2 x 2 with an off-diagonal, and a third unknown by itself. */
static const int BLOCK_COLUMN[] = {0, 1, 3, 4}, BLOCK_ROW[] = {0, 0, 1, 2};
static const matrix BLOCK = {.pattern = {.n = 3, .column = BLOCK_COLUMN, .row = BLOCK_ROW}};

START_TEST(matrices_that_are_not_positive_definite_or_not_finite_are_refused_and_do_no_harm)
{
    static const struct {
        double values[4];
        int stopped_at; /* -1: 0 or 1, whichever is eliminated last */
    } BAD[] = {
        {{4, 1, 3, 0}, 2},         {{4, 1, 3, -1}, 2},        {{-4, 1, 3, 2}, -1},
        {{0, 0, 3, 2}, 0},         {{1, 1, 1, 2}, -1},        {{1, 2, 1, 2}, -1},
        {{NAN, 1, 3, 2}, -1},      {{4, NAN, 3, 2}, -1},      {{4, 1, 3, NAN}, 2},
        {{INFINITY, 1, 3, 2}, -1}, {{4, INFINITY, 3, 2}, -1}, {{4, -INFINITY, 3, 2}, -1},
        {{4, 1, 3, INFINITY}, 2},  {{4, 1, 3, -INFINITY}, 2}, {{1e300, 1e300, 1e-300, 2}, -1},
    };
    static const double GOOD[] = {4, 1, 3, 2};
    for (int e = 0; e < 2; e++) {
        sct_factor *f = factor_of(&BLOCK, ENGINES[e]);
        for (size_t i = 0; i < sizeof BAD / sizeof *BAD; i++) {
            int stopped_at = -7;
            ck_assert_int_eq(sct_factor_update(f, BAD[i].values, &stopped_at), SCT_NOT_CONVEX);
            if (BAD[i].stopped_at >= 0)
                ck_assert_int_eq(stopped_at, BAD[i].stopped_at);
            else
                ck_assert(stopped_at == 0 || stopped_at == 1);
            ck_assert_int_eq(sct_factor_update(f, BAD[i].values, NULL), SCT_NOT_CONVEX);
            double b[] = {11, 11, 4}; /* 4 x + y = 11, x + 3 y = 11: x = 2, y = 3 */
            ck_assert_int_eq(sct_factor_update(f, GOOD, NULL), SCT_OK);
            sct_factor_solve(f, 1, b);
            ck_close(b[0], 2.0, 1e-15);
            ck_close(b[1], 3.0, 1e-15);
            ck_close(b[2], 2.0, 1e-15);
        }
        sct_factor_free(f);
    }
}
END_TEST

START_TEST(very_large_and_very_small_values_are_no_obstacle)
{
    static const double SCALES[] = {1e-290, 1e-150, 1e150, 1e290};
    for (int e = 0; e < 2; e++) {
        sct_factor *f = factor_of(&BLOCK, ENGINES[e]);
        for (int i = 0; i < 4; i++) {
            const double s = SCALES[i], values[] = {4 * s, s, 3 * s, 2 * s};
            double b[] = {11 * s, 11 * s, 4 * s};
            ck_assert_int_eq(sct_factor_update(f, values, NULL), SCT_OK);
            sct_factor_solve(f, 1, b);
            ck_close(b[0], 2.0, 1e-14);
            ck_close(b[1], 3.0, 1e-14);
        }
        sct_factor_free(f);
    }
}
END_TEST

START_TEST(no_unknowns_is_a_matrix_too)
{
    static const int COLUMN[] = {0};
    static const sct_engine ALL[] = {SCT_ENGINE_AUTO, SCT_ENGINE_SMALL, SCT_ENGINE_SPARSE};
    const sct_pattern nothing = {.n = 0, .column = COLUMN, .row = COLUMN};
    for (int e = 0; e < 3; e++) {
        sct_status status;
        double b[1] = {5.0};
        sct_factor *f = sct_factor_new(&nothing, ALL[e], &status);
        ck_assert_int_eq(status, SCT_OK);
        ck_assert_int_eq(sct_factor_update(f, b, NULL), SCT_OK);
        sct_factor_solve(f, 3, b);
        ck_assert_double_eq(b[0], 5.0);
        sct_factor_free(f);
    }
    sct_factor_free(NULL);
}
END_TEST

START_TEST(auto_takes_the_small_engine_for_little_work_and_CHOLMOD_for_much)
{
    matrix a;
    sct_random r = {.state = 3};
    sct_status status;
    random_matrix(&a, &r, 40, 0.2, 0.0);
    sct_factor *f = sct_factor_new(&a.pattern, SCT_ENGINE_AUTO, &status);
    ck_assert_int_eq(sct_factor_engine(f), SCT_ENGINE_SMALL);
    sct_factor_free(f);
    matrix_free(&a);

    random_matrix(&a, &r, 500, 1.0, 0.0); /* full: 500^3 / 18 = 7 million updates */
    f = sct_factor_new(&a.pattern, SCT_ENGINE_AUTO, &status);
    ck_assert_int_eq(sct_factor_engine(f), SCT_ENGINE_SPARSE);
    sct_factor_free(f);
    matrix_free(&a);
}
END_TEST

START_TEST(the_small_engine_refuses_tables_beyond_its_limit)
{
    enum { N = 1200 }; /* full: 1200^3 / 18 = 96 million updates */
    matrix a = {.row = calloc((size_t)N * N, sizeof(int))};
    int k = 0;
    sct_status status;
    for (int j = 0; j < N; j++) {
        a.column[j] = k;
        for (int i = 0; i <= j; i++) a.row[k++] = i;
    }
    a.column[N] = k;
    a.pattern = (sct_pattern){.n = N, .column = a.column, .row = a.row};
    ck_assert_ptr_null(sct_factor_new(&a.pattern, SCT_ENGINE_SMALL, &status));
    ck_assert_int_eq(status, SCT_TOO_LARGE);
    free(a.row);
}
END_TEST

START_TEST(pairs_are_sorted_by_column_then_row_and_equal_ones_keep_their_order)
{
    enum { N = 7, COUNT = 200 };
    int row[COUNT], column[COUNT], order[COUNT], work[N + 1 + COUNT];
    sct_random r = {.state = 11};
    for (int p = 0; p < COUNT; p++) {
        row[p] = (int)(sct_random_bits(&r) % N);
        column[p] = (int)(sct_random_bits(&r) % N);
    }
    sct_sort_pairs(N, COUNT, row, column, order, work);
    for (int k = 1; k < COUNT; k++) {
        const int a = order[k - 1], b = order[k], A = (column[a] * N + row[a]) * COUNT + a,
                  B = (column[b] * N + row[b]) * COUNT + b;
        ck_assert_int_lt(A, B);
    }
    sct_sort_pairs(N, 0, row, column, order, work);
}
END_TEST

START_TEST(the_size_of_a_factor_is_known_before_its_numbers)
{
    enum { N = 200 }; /* full: N (N + 1) / 2 entries */
    matrix a;
    sct_random r = {.state = 12};
    random_matrix(&a, &r, N, 1.0, 0.0);
    for (int e = 0; e < 2; e++) {
        sct_factor *f = factor_of(&a, ENGINES[e]);
        ck_assert_double_eq(sct_factor_entries(f), N * (N + 1) / 2.0);
        ck_assert_double_eq(sct_factor_bytes(f), ENGINES[e] == SCT_ENGINE_SPARSE ? 12.0 * N * (N + 1) / 2.0 : 0.0);
        sct_factor_free(f);
    }
    matrix_free(&a);
}
END_TEST

START_TEST(the_same_values_give_the_same_bits)
{
    sct_random r = {.state = 5};
    matrix a;
    random_matrix(&a, &r, 50, 0.2, 3.0);
    for (int e = 0; e < 2; e++) {
        double x[2][50];
        for (int run = 0; run < 2; run++) {
            sct_factor *f = factor_of(&a, ENGINES[e]);
            for (int i = 0; i < 50; i++) x[run][i] = i - 20.0;
            for (int again = 0; again <= run; again++) ck_assert_int_eq(sct_factor_update(f, a.values, NULL), SCT_OK);
            sct_factor_solve(f, 1, x[run]);
            sct_factor_free(f);
        }
        ck_assert_mem_eq(x[0], x[1], sizeof x[0]);
    }
    matrix_free(&a);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("factor");
    TCase *tests = tcase_create("factor");
    tcase_add_test(tests, both_engines_solve_what_dense_LAPACK_solves);
    tcase_add_test(tests, matrices_that_are_not_positive_definite_or_not_finite_are_refused_and_do_no_harm);
    tcase_add_test(tests, very_large_and_very_small_values_are_no_obstacle);
    tcase_add_test(tests, no_unknowns_is_a_matrix_too);
    tcase_add_test(tests, auto_takes_the_small_engine_for_little_work_and_CHOLMOD_for_much);
    tcase_add_test(tests, the_small_engine_refuses_tables_beyond_its_limit);
    tcase_add_test(tests, pairs_are_sorted_by_column_then_row_and_equal_ones_keep_their_order);
    tcase_add_test(tests, the_size_of_a_factor_is_known_before_its_numbers);
    tcase_add_test(tests, the_same_values_give_the_same_bits);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

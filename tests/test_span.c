/* Null spaces and Gauss-Jordan of short rows. */
#include "support.h"

#include "base/random.h"
#include "numerics/span.h"
#include "base/vector.h"

START_TEST(null_space_is_orthonormal_and_orthogonal_to_the_rows)
{
    sct_random r = {5};
    for (int n = 1; n <= SCT_ROW; n++) {
        for (int m = 0; m <= n; m++) { /* random rows have full rank */
            sct_row rows[SCT_ROW], kept[SCT_ROW], N[SCT_ROW];
            for (int i = 0; i < m; i++) {
                for (int j = 0; j < n; j++) rows[i][j] = kept[i][j] = sct_random_unit(&r) - 0.5;
            }
            ck_assert_int_eq(sct_span_null(m, n, rows, 1e-9, N), n - m);
            for (int a = 0; a < n - m; a++) {
                for (int i = 0; i < m; i++) ck_assert_double_eq_tol(sct_dot(n, N[a], kept[i]), 0.0, 1e-14);
                for (int b = 0; b <= a; b++) ck_assert_double_eq_tol(sct_dot(n, N[a], N[b]), a == b, 1e-14);
            }
        }
    }
}
END_TEST

START_TEST(rows_that_differ_by_less_than_the_tolerance_count_once)
{
    for (int i = 0; i < 2; i++) {
        const double off = i == 0 ? 1e-10 : 1e-8;
        sct_row rows[2] = {{0.6, 0.8}, {0.6 + off, 0.8 - off}}, N[SCT_ROW];
        ck_assert_int_eq(sct_span_null(2, 2, rows, 1e-9, N), i == 0 ? 1 : 0);
    }
}
END_TEST

START_TEST(reduced_rows_span_the_same_with_pivots_of_their_own)
{
    sct_row V[2] = {{1.0, 1.0, 0.0}, {1.0, -1.0, 0.0}};
    int pivot[2];
    ck_assert_int_eq(sct_span_reduce(2, 3, 0, 0, 3, V, 1e-9, pivot), 2);
    const double expected[2][3] = {{1.0, 0.0, 0.0}, {0.0, 1.0, 0.0}};
    for (int i = 0; i < 2; i++) {
        ck_assert_int_eq(pivot[i], i);
        for (int j = 0; j < 3; j++) ck_assert_double_eq(V[i][j], expected[i][j]);
    }
    sct_row W[2] = {{1.0, 2.0, 3.0}, {2.0, 4.0, 6.0}};
    ck_assert_int_eq(sct_span_reduce(2, 3, 0, 0, 3, W, 1e-9, NULL), 1);
}
END_TEST

START_TEST(the_cross_product_is_right_handed)
{
    double c[3];
    sct_cross3((double[]){1.0, 0.0, 0.0}, (double[]){0.0, 2.0, 0.0}, c);
    ck_assert(c[0] == 0.0 && c[1] == 0.0 && c[2] == 2.0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("span");
    TCase *tests = tcase_create("all");
    tcase_add_test(tests, null_space_is_orthonormal_and_orthogonal_to_the_rows);
    tcase_add_test(tests, rows_that_differ_by_less_than_the_tolerance_count_once);
    tcase_add_test(tests, reduced_rows_span_the_same_with_pivots_of_their_own);
    tcase_add_test(tests, the_cross_product_is_right_handed);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

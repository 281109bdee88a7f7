/* Roots of low polynomials on the unit interval. */
#include "support.h"

#include "beam_loads.h"
#include "numerics/polynomial.h"

/* p = lead * product of (s - root[i]) */
static void from_roots(int degree, const double root[], double lead, double p[])
{
    p[0] = lead;
    for (int d = 0; d < degree; ++d) {
        p[d + 1] = p[d];
        for (int i = d; i > 0; --i) p[i] = p[i - 1] - root[d] * p[i];
        p[0] *= -root[d];
    }
}

START_TEST(roots_inside_come_back_in_order)
{
    static const double root[5][5] = {{0.7, 0.1, 0.35, 0.93, 0.5},
                                      {0.2, -3, 0.8, 7, 0.21},
                                      {0.25, 1.5, 2, 3, 4},
                                      {-1, -2, 5, 3, 8},
                                      {1e-6, 0.5, 0.999, -0.1, 1.1}};
    for (int c = 0; c < 5; ++c) {
        for (int degree = 1; degree <= 5; ++degree) {
            double p[6], found[5];
            from_roots(degree, root[c], -3, p);
            const int n = sct_polynomial_roots(degree, p, found);
            int inside = 0;
            for (int i = 0; i < degree; ++i) {
                if (!(root[c][i] > 0 && root[c][i] < 1)) continue;
                ++inside;
                double nearest = 1;
                for (int j = 0; j < n; ++j) nearest = fmin(nearest, fabs(found[j] - root[c][i]));
                ck_assert_double_lt(nearest, 1e-12);
            }
            ck_assert_int_eq(n, inside);
            for (int j = 1; j < n; ++j) ck_assert_double_lt(found[j - 1], found[j]);
        }
    }
}
END_TEST

/* Many steep and flat ways between the turns: each bracket keeps its own root. */
START_TEST(five_roots_anywhere_stay_in_their_brackets)
{
    unsigned long long seed = 1;
    for (int c = 0; c < 300; ++c) {
        double root[5], p[6], found[5];
        for (int i = 0; i < 5; ++i) root[i] = (i + 0.5 + 0.45 * random_unit(&seed)) / 5;
        from_roots(5, root, 1, p);
        ck_assert_int_eq(sct_polynomial_roots(5, p, found), 5);
        for (int i = 0; i < 5; ++i) ck_assert_double_eq_tol(found[i], root[i], 1e-9);
    }
}
END_TEST

/* b^2 >> 4ac: the small root keeps its digits */
START_TEST(small_root_of_a_quadratic_keeps_its_digits)
{
    const double p[3] = {-1e-12, 1, 1e-3};
    double root[2];
    ck_assert_int_eq(sct_polynomial_roots(2, p, root), 1);
    ck_close(root[0], 1e-12, 1e-14); /* 1e-12 (1 - 1e-15) */
}
END_TEST

/* Leading coefficients that vanish: the lower polynomial's roots; constants have none. */
START_TEST(lower_polynomials_in_higher_clothes)
{
    const double p[6] = {-1, 2, 0, 0, 0, 0}, q[6] = {-1, 0, 4, 0, 0, 0}, none[6] = {3}, zero[6] = {0};
    double root[5];
    for (int degree = 2; degree <= 5; ++degree) {
        ck_assert_int_eq(sct_polynomial_roots(degree, p, root), 1);
        ck_assert(root[0] == 0.5);
        ck_assert_int_eq(sct_polynomial_roots(degree, q, root), 1);
        ck_assert(root[0] == 0.5);
        ck_assert_int_eq(sct_polynomial_roots(degree, none, root), 0);
        ck_assert_int_eq(sct_polynomial_roots(degree, zero, root), 0);
    }
}
END_TEST

START_TEST(changes_of_sign_are_found_over_a_flat_place)
{
    static const double triple[4] = {0.5, 0.5, 0.5, -2}, touch[4] = {0.25, 0.25, 0.75, 3};
    double p[5], root[4];
    from_roots(4, triple, 1, p);
    ck_assert_int_eq(sct_polynomial_roots(4, p, root), 1);
    ck_assert_double_eq_tol(root[0], 0.5, 1e-5);
    from_roots(4, touch, 1, p);
    const int n = sct_polynomial_roots(4, p, root);
    ck_assert_int_ge(n, 1);
    ck_close(root[n - 1], 0.75, 1e-14);
}
END_TEST

/* (s - 1/2)^3 and (s - 1/2)^2, exact in binary: the turn itself is the root. */
START_TEST(root_just_at_a_turn)
{
    const double cube[4] = {-0.125, 0.75, -1.5, 1}, square[3] = {0.25, -1, 1};
    double root[3];
    ck_assert_int_eq(sct_polynomial_roots(3, cube, root), 1);
    ck_assert(root[0] == 0.5);
    ck_assert_int_eq(sct_polynomial_roots(2, square, root), 1);
    ck_assert(root[0] == 0.5);
}
END_TEST

START_TEST(numbers_that_are_none_have_no_roots)
{
    const double p[3] = {NAN, 1, 1}, q[3] = {-1, INFINITY, 1}, r[2] = {NAN, 1};
    double root[2];
    ck_assert_int_eq(sct_polynomial_roots(2, p, root), 0);
    ck_assert_int_eq(sct_polynomial_roots(2, q, root), 0);
    ck_assert_int_eq(sct_polynomial_roots(1, r, root), 0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("polynomial");
    TCase *tc = tcase_create("polynomial");
    tcase_add_test(tc, roots_inside_come_back_in_order);
    tcase_add_test(tc, five_roots_anywhere_stay_in_their_brackets);
    tcase_add_test(tc, small_root_of_a_quadratic_keeps_its_digits);
    tcase_add_test(tc, lower_polynomials_in_higher_clothes);
    tcase_add_test(tc, changes_of_sign_are_found_over_a_flat_place);
    tcase_add_test(tc, root_just_at_a_turn);
    tcase_add_test(tc, numbers_that_are_none_have_no_roots);
    suite_add_tcase(suite, tc);
    return run_suite(suite);
}

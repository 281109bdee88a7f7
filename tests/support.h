/* What every test program shares: one suite, run in fork mode, judged by its summary. */
#ifndef TESTS_SUPPORT_H
#define TESTS_SUPPORT_H

#include <check.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

/* Relative comparison with an absolute floor; fails on NAN. */
#define ck_close(value, expected, tol)                                                                                 \
    ck_assert_double_eq_tol((value), (expected), (tol) * (fabs((double)(expected)) + 1e-300))

/** Runs one suite; the exit code of main. Check prints its summary line. */
static inline int run_suite(Suite *suite)
{
    SRunner *runner = srunner_create(suite);
    srunner_run_all(runner, CK_ENV);
    const int failed = srunner_ntests_failed(runner);
    srunner_free(runner);
    return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
#endif

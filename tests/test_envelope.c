/* The envelope of a ladder, and the area that a force needs. */
#include "support.h"

#include <string.h>

#include "base/random.h"
#include "sizing/need.h"

enum { N = 60 };

/* A random ladder: areas grow, radii scatter about a trend. */
static sct_family random_family(sct_random *r, sct_section sections[N])
{
    double A = 1e-4;
    for (int k = 0; k < N; k++) {
        A *= 1.01 + 0.15 * sct_random_unit(r);
        const double i = 0.3 * sqrt(A) * (0.6 + 0.8 * sct_random_unit(r));
        sections[k] = (sct_section){.name = "s", .A = A, .I = {i * i * A, 0.5 * i * i * A}};
    }
    return (sct_family){.name = "random", .n = N, .sections = sections};
}

START_TEST(no_section_is_above_the_envelope_which_is_smooth_and_never_falls)
{
    sct_random r = {7};
    int all[N];
    for (int k = 0; k < N; k++) all[k] = k;
    for (int trial = 0; trial < 200; trial++) {
        sct_section sections[N];
        const sct_family family = random_family(&r, sections);
        sct_arena *arena = sct_arena_new();
        sct_envelope e;
        ck_assert_int_eq(sct_envelope_ladder(arena, &family, N, all, 0, &e), SCT_OK);
        for (int k = 0; k < N; k++)
            ck_assert_double_ge(sct_envelope_at(&e, log(sections[k].A)).h + 1e-12,
                                0.5 * log(sections[k].I[0] / sections[k].A));
        for (int k = 0; k < e.n; k++) { /* C1 at the knots */
            const sct_curve a = sct_envelope_at(&e, e.s[k] - 1e-13), b = sct_envelope_at(&e, e.s[k] + 1e-13);
            ck_assert_double_eq_tol(a.h, b.h, 1e-11);
            ck_assert_double_eq_tol(a.h1, b.h1, 1e-9 * (1 + fabs(a.h2) + fabs(b.h2)));
        }
        for (double s = e.s[0] - 1; s < e.s[e.n - 1] + 1; s += 0.01) {
            const sct_curve c = sct_envelope_at(&e, s);
            const double h = 1e-6;
            ck_assert_double_ge(c.h1, -1e-12);
            ck_assert_double_eq_tol(c.h1, (sct_envelope_at(&e, s + h).h - sct_envelope_at(&e, s - h).h) / (2 * h),
                                    1e-4 * (1 + c.h1));
        }
        sct_arena_free(arena);
    }
}
END_TEST

START_TEST(a_ladder_of_one_section_passes_through_it)
{
    sct_section one = {.name = "s", .A = 2e-3, .I = {3e-6, 1e-6}};
    const sct_family family = {.n = 1, .sections = &one};
    sct_arena *arena = sct_arena_new();
    sct_envelope e;
    const int zero = 0;
    ck_assert_int_eq(sct_envelope_ladder(arena, &family, 1, &zero, 1, &e), SCT_OK);
    ck_assert_double_eq_tol(sct_envelope_at(&e, log(2e-3)).h, 0.5 * log(1e-6 / 2e-3), 1e-14);
    sct_arena_free(arena);
}
END_TEST

static sct_bar_rule rule(sct_buckling buckling)
{
    return (sct_bar_rule){.E = 210e9,
                          .yield = 355e6,
                          .f_t = 212e6,
                          .f_c = 212e6,
                          .buckling = buckling,
                          .safety = 1.92,
                          .Lcr = {3.0, 5.0},
                          .slenderness_any = INFINITY,
                          .slenderness_compression = INFINITY};
}

START_TEST(the_area_needed_is_just_enough)
{
    sct_random r = {3};
    sct_section sections[N];
    const sct_family family = random_family(&r, sections);
    int all[N];
    for (int k = 0; k < N; k++) all[k] = k;
    sct_arena *arena = sct_arena_new();
    sct_envelope e[2];
    for (int axis = 0; axis < 2; axis++)
        ck_assert_int_eq(sct_envelope_ladder(arena, &family, N, all, axis, &e[axis]), SCT_OK);
    const sct_bar_rule rules[2] = {rule(SCT_BUCKLING_EULER), rule(SCT_BUCKLING_EULER_JOHNSON)};
    for (int which = 0; which < 2; which++)
        for (double p = log(1e2); p < log(1e7); p += 0.05) {
            const sct_need need = sct_area_needed(&rules[which], e, false, p, log(1e-3));
            const double A = exp(need.s);
            const double i[2] = {exp(sct_envelope_at(&e[0], need.s).h), exp(sct_envelope_at(&e[1], need.s).h)};
            sct_bar_check c[SCT_MOST_BAR_CHECKS];
            const int n = sct_bar_checks(&rules[which], -exp(p), A, i, c);
            double most = 0.0;
            for (int k = 0; k < n; k++) most = fmax(most, c[k].utilisation);
            ck_assert_double_eq_tol(most, 1.0, 1e-10);
        }
    sct_arena_free(arena);
}
END_TEST

START_TEST(derivatives_of_the_area_needed_agree_with_differences)
{
    sct_arena *arena = sct_arena_new();
    sct_envelope e[2];
    for (int axis = 0; axis < 2; axis++) ck_assert_int_eq(sct_envelope_relation(arena, 0.8, 2.0, &e[axis]), SCT_OK);
    sct_bar_rule q = rule(SCT_BUCKLING_EULER_JOHNSON);
    for (double p = log(1e3); p < log(3e6); p += 0.11) {
        const double h = 1e-4;
        const sct_need a = sct_area_needed(&q, e, false, p - h, -7), b = sct_area_needed(&q, e, false, p, -7),
                       c = sct_area_needed(&q, e, false, p + h, -7);
        if (a.kind != c.kind) continue;
        const bool one_curve = fabs(a.s2 - c.s2) < 0.01; /* the second derivative jumps where Johnson meets Euler */
        ck_assert_double_eq_tol(b.s1, (c.s - a.s) / (2 * h), one_curve ? 1e-7 : 1e-3);
        if (one_curve) ck_assert_double_eq_tol(b.s2, (c.s - 2 * b.s + a.s) / (h * h), 1e-5);
        const double sL = b.sL;
        q.Lcr[0] *= 1 + 1e-6;
        q.Lcr[1] *= 1 + 1e-6;
        const double moved = (sct_area_needed(&q, e, false, p, -7).s - b.s) / 1e-6;
        q.Lcr[0] /= 1 + 1e-6;
        q.Lcr[1] /= 1 + 1e-6;
        ck_assert_double_eq_tol(sL, moved, 1e-4);
    }
    sct_arena_free(arena);
}
END_TEST

/* Bare Euler on I = c A^2: |N| = pi^2 E c A^2 / (n L^2), so A = sqrt(n N L^2 / (pi^2 E c)). */
START_TEST(euler_on_a_free_area_has_the_closed_form)
{
    sct_arena *arena = sct_arena_new();
    sct_envelope e[2];
    for (int axis = 0; axis < 2; axis++) ck_assert_int_eq(sct_envelope_relation(arena, 0.8, 2.0, &e[axis]), SCT_OK);
    sct_bar_rule q = rule(SCT_BUCKLING_EULER);
    q.f_c = 1e12;
    const double NN = 40e3, PI = 3.14159265358979323846;
    ck_close(exp(sct_area_needed(&q, e, false, log(NN), -5).s), sqrt(1.92 * NN * 25.0 / (PI * PI * 210e9 * 0.8)),
             1e-12);
    sct_arena_free(arena);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("envelope and area needed");
    TCase *c = tcase_create("envelope");
    tcase_add_test(c, no_section_is_above_the_envelope_which_is_smooth_and_never_falls);
    tcase_add_test(c, a_ladder_of_one_section_passes_through_it);
    tcase_add_test(c, the_area_needed_is_just_enough);
    tcase_add_test(c, derivatives_of_the_area_needed_agree_with_differences);
    tcase_add_test(c, euler_on_a_free_area_has_the_closed_form);
    suite_add_tcase(s, c);
    return run_suite(s);
}

/* The proven error bounds of frames: never below the true error, on random frames, storeys, and beams cut into many
 * pieces, with sizes badly mixed; what the proof costs. */
#define _POSIX_C_SOURCE 200809L
#include "quad_reference.h"
#include "random_frames.h"

/* ---- models ------------------------------------------------------------------------------------------------------ */

/* Groups of very unlike areas for a third of the members. */
static void mix_sizes(sct_model *m, sct_random *r, double low, double high)
{
    const int first = m->n_groups, n = 8;
    for (int i = 0; i < n; i++) {
        const double A = 1e-2 * pow(10.0, between(r, low, high)), I = between(r, 0.2, 3.0) * A * A;
        const int g = mb_group(m, 0, A, false);
        mb_stiffen(m, g, I, between(r, 0.2, 1.0) * I, between(r, 0.2, 2.0) * I);
    }
    for (int e = 0; e < m->n_members; e++)
        if (below(r, 3) == 0) m->members[e].group = first + below(r, n);
}

static sct_model *steel(int dim)
{
    sct_model *m = mb_new(dim);
    mb_material(m, 210e9, 7850, 12e-6);
    m->materials[0].G = 81e9;
    const int g = mb_group(m, 0, 5e-3, false);
    mb_stiffen(m, g, 4e-5, 1e-5, 5e-5);
    mb_case(m, 1.0);
    return m;
}

/* A plane frame of `bays` and `storeys`, fixed feet, wind and floors. */
static sct_model *storeys(int bays, int storeys)
{
    sct_model *m = steel(2);
    mb_case(m, 0.0);
    for (int s = 0; s <= storeys; s++)
        for (int b = 0; b <= bays; b++) {
            const int j = mb_joint(m, 6.0 * b, 3.5 * s, 0);
            if (s == 0) {
                mb_fix(m, j);
                continue;
            }
            mb_beam(m, j - bays - 1, j, 0);
            if (b > 0) mb_uniform(m, 0, mb_beam(m, j - 1, j, 0), -2e4, 6.0);
            mb_load(m, 1, j, 1e4 * s, 0, 0);
        }
    return m;
}

/* A space frame of n x n bays and storeys. */
static sct_model *building(int n, int storeys)
{
    sct_model *m = steel(3);
    const int row = n + 1, floor = row * row;
    for (int s = 0; s <= storeys; s++)
        for (int y = 0; y <= n; y++)
            for (int x = 0; x <= n; x++) {
                const int j = mb_joint(m, 6.0 * x, 6.0 * y, 3.5 * s);
                if (s == 0) {
                    mb_fix(m, j);
                    continue;
                }
                mb_beam(m, j - floor, j, 0);
                if (x > 0) mb_beam(m, j - 1, j, 0);
                if (y > 0) mb_beam(m, j - row, j, 0);
                mb_load(m, 0, j, 2e3, 1e3, -1e4);
            }
    return m;
}

/* A cantilever cut into n pieces. */
static sct_model *pieces(int n, double L)
{
    sct_model *m = steel(2);
    for (int j = 0; j <= n; j++) mb_joint(m, L * j, 0, 0);
    mb_fix(m, 0);
    for (int e = 0; e < n; e++) mb_beam(m, e, e + 1, 0);
    mb_load(m, 0, n, 0, -1e3, 0);
    return m;
}

static sct_model *any_frame(uint64_t seed)
{
    sct_random r = {seed};
    sct_model *m;
    const int kind = (int)(seed % 5);
    const double largest = pow(sct_random_unit(&r), 3.0); /* many small ones, some up to 300 unknowns */
    if (kind < 3) {
        const int dim = 2 + kind % 2, n = 3 + (int)(largest * (dim == 2 ? 90 : 45));
        m = rf_frame(&r, dim, n, below(&r, n), 0);
    } else if (kind == 3) {
        m = storeys(1 + below(&r, 4), 1 + (int)(largest * 25));
    } else {
        m = pieces(1 + (int)(largest * 90), between(&r, 0.2, 3.0));
    }
    if (seed % 3 != 0) mix_sizes(m, &r, seed % 3 == 1 ? -1.0 : -3.0, seed % 3 == 1 ? 1.0 : 2.0);
    return m;
}

/* ---- tests ------------------------------------------------------------------------------------------------------- */

START_TEST(no_error_is_above_its_bound_on_random_frames)
{
    const int n = getenv("SCT_TEST_FULL") != NULL ? 2000 : 200;
    tally t = {0};
    for (int i = 1; i <= n; i++) take(any_frame((uint64_t)i), i % 2 == 0 ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE, &t);
    printf(
        "measured: error bounds: %d random frames of 3 to 300 unknowns, %d certified (%d with a warning), %d refused "
        "(%d for want of a proof), %d violations, bound / true error of displacements %.0f in the (geometric) mean, "
        "largest bound %.0e\n",
        t.n, t.certified, t.warned, t.refused, t.unproven, t.violations, exp(t.log_ratio / t.n_ratio), t.worst_bound);
    ck_assert_int_eq(t.violations, 0);
    ck_assert_int_ge(t.certified, n * 8 / 10);
}
END_TEST

START_TEST(bounds_of_frames_stay_small_and_cheap)
{
    tell("frame of 10 bays and 10 storeys", storeys(10, 10), 1e-9);
    tell("frame of 40 bays and 80 storeys", storeys(40, 80), 1e-7);
    tell("frame of 4 x 4 bays and 8 storeys", building(4, 8), 1e-9);
    tell("cantilever of 200 pieces", pieces(200, 0.5), SCT_ERROR_WARN);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("certificate of frames");
    TCase *tests = tcase_create("all");
    tcase_set_timeout(tests, 1800);
    tcase_add_test(tests, no_error_is_above_its_bound_on_random_frames);
    tcase_add_test(tests, bounds_of_frames_stay_small_and_cheap);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

/* One analysis of a new design against bare CHOLMOD with the same matrix, the same engine and settings; the small
 * engine against CHOLMOD's; many right-hand sides; adjoint gradients; growth with size. */
#include <sys/resource.h>

#include "bench_side.h"

/* ---- models ---------------------------------------------------------------------------------------------------- */

/* A lattice of nx x ny (x nz) square panels, crossed in every face, held along its base, with `cases` load cases. */
static sct_model *lattice(int nx, int ny, int nz, int cases)
{
    const int dim = nz > 0 ? 3 : 2, rows = nx + 1, layer = rows * (ny + 1);
    sct_model *m = mb_new(dim);
    mb_group(m, mb_material(m, 210e9, 7850.0, 12e-6), 1e-3, true);
    mb_group(m, 0, 2e-3, true);
    for (int z = 0; z <= nz; z++)
        for (int y = 0; y <= ny; y++)
            for (int x = 0; x <= nx; x++) {
                const int j = mb_joint(m, x, y, z);
                if (dim == 2 ? y == 0 : z == 0) mb_pin(m, j);
            }
    const int step[3] = {1, rows, layer};
    for (int z = 0; z <= nz; z++)
        for (int y = 0; y <= ny; y++)
            for (int x = 0; x <= nx; x++) {
                const int j = x + rows * y + layer * z, room[3] = {x < nx, y < ny, z < nz};
                for (int a = 0; a < dim; a++) {
                    if (room[a]) mb_bar(m, j, j + step[a], 0);
                    for (int b = a + 1; b < dim; b++) {
                        if (!room[a] || !room[b]) continue;
                        mb_bar(m, j, j + step[a] + step[b], 1);
                        mb_bar(m, j + step[a], j + step[b], 1);
                    }
                }
            }
    for (int k = 0; k < cases; k++) {
        mb_case(m, 0.0);
        for (int j = k; j < m->n_joints; j += 1 + k)
            mb_load(m, k, j, 1e3, dim == 2 ? -1e4 : 1e3, dim == 3 ? -1e4 : 0.0);
    }
    mb_each_case(m);
    return m;
}

/* ---- what is measured ---------------------------------------------------------------------------------------------
 */

typedef struct family {
    const char *name;
    int nx, ny, nz;
} family;

static double log_ratio(double a, double b)
{
    return log(a / b);
}

static void large_analyses(bool full)
{
    bench_section("analysis",
                  "One analysis (fill, factor, solve, forces) / bare CHOLMOD (fill, factor, solve), simplicial LL'");
    const double t2[3] = {against_bare("plane", lattice(22, 22, 0, 1), 9),
                          against_bare("plane", lattice(70, 70, 0, 1), 5),
                          against_bare("plane", lattice(223, 223, 0, 1), 3)};
    const double t3[2] = {against_bare("space", lattice(6, 6, 7, 1), 9),
                          against_bare("space", lattice(14, 14, 15, 1), 3)};
    double t3_large = NAN, t2_large = NAN;
    if (full) {
        t3_large = against_bare("space", lattice(31, 31, 32, 1), 1);
        t2_large = against_bare("plane", lattice(707, 707, 0, 1), 1);
    }
    bench_section("growth", "Time of one factorization ~ unknowns ^ exponent (aims for supernodal factors)");
    bench_figure("plane, 1e3 to 1e4", log_ratio(t2[1], t2[0]) / log_ratio(2 * 70 * 71, 2 * 22 * 23), "exponent", 1.2,
                 false);
    bench_figure("plane, 1e4 to 1e5", log_ratio(t2[2], t2[1]) / log_ratio(2 * 223 * 224, 2 * 70 * 71), "exponent", 1.2,
                 false);
    bench_figure("space, 1e3 to 1e4", log_ratio(t3[1], t3[0]) / log_ratio(3 * 15 * 225, 3 * 7 * 49), "exponent", 1.7,
                 false);
    if (!full) return;
    bench_figure("plane, 1e5 to 1e6", log_ratio(t2_large, t2[2]) / log_ratio(2.0 * 707 * 708, 2 * 223 * 224),
                 "exponent", 1.2, false);
    bench_figure("space, 1e4 to 1e5", log_ratio(t3_large, t3[1]) / log_ratio(3 * 32 * 1024, 3 * 15 * 225), "exponent",
                 NAN, false);
    struct rusage usage;
    getrusage(RUSAGE_SELF, &usage);
    bench_figure("peak memory up to here", (double)usage.ru_maxrss / 1024.0, "MB", NAN, false);
}

static void small_analyses(void)
{
    static const family SIZES[] = {{"plane", 3, 1, 0},  {"plane", 7, 1, 0}, {"plane", 15, 1, 0}, {"plane", 7, 4, 0},
                                   {"plane", 19, 5, 0}, {"space", 1, 1, 2}, {"space", 2, 2, 2},  {"space", 3, 3, 4}};
    bench_section("small", "The small engine / CHOLMOD simplicial LDL' (fill, factor, solve, forces)");
    for (size_t k = 0; k < sizeof SIZES / sizeof *SIZES; k++)
        for (int cases = 1; cases <= 5; cases += 4) {
            side s;
            char text[100];
            open_side(&s, lattice(SIZES[k].nx, SIZES[k].ny, SIZES[k].nz, cases), SCT_ENGINE_SMALL);
            open_cholmod(&s, false);
            s.with_forces = true;
            bench_racer racers[] = {{.run = analyse, .arg = &s}, {.run = analyse_bare, .arg = &s}};
            bench_race(2, racers, 15);
            snprintf(text, sizeof text, "%s, %d unknowns, %d case%s (%.3g us)", SIZES[k].name, s.st->n_dof, cases,
                     cases > 1 ? "s" : "", 1e6 * racers[0].seconds);
            bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", cases > 1 ? 0.7 : 0.5, false);
            close_cholmod(&s);
            close_side(&s);
        }
}

static void solve_many(void *arg)
{
    side *s = arg;
    sct_solver_solve(s->solver, s->count, s->b);
}

static void solve_many_bare(void *arg)
{
    side *s = arg;
    cholmod_solve2(CHOLMOD_A, s->L, s->many, NULL, &s->many_x, NULL, &s->Y, &s->E, &s->common);
}

static void fifty_gradients(void *arg)
{
    side *s = arg;
    if (sct_sensitivity_adjoint(s->solver, &s->r, 50, s->weights, s->dq) != SCT_OK) abort();
}

static void many_right_hand_sides(const char *name, sct_model *m, sct_engine engine)
{
    static const int COUNTS[] = {1, 8, 32, 64};
    side s;
    char text[100];
    double one = NAN;
    open_side(&s, m, engine);
    open_cholmod(&s, true);
    const size_t n = (size_t)s.st->n_dof;
    analyse(&s);
    analyse_bare(&s);
    s.b = calloc(64 * n, sizeof *s.b);
    for (size_t k = 0; k < 4; k++) {
        s.count = COUNTS[k];
        s.many = cholmod_ones(n, (size_t)s.count, CHOLMOD_REAL, &s.common);
        bench_racer racers[] = {{.run = solve_many, .arg = &s}, {.run = solve_many_bare, .arg = &s}};
        bench_race(2, racers, 7);
        const double each = racers[0].seconds / s.count;
        if (k == 0) one = each;
        snprintf(text, sizeof text, "%s, %zu unknowns, %d at once: each / one alone", name, n, s.count);
        if (k > 0) bench_figure(text, each / one, "ratio", NAN, false);
        snprintf(text, sizeof text, "%s, %zu unknowns, %d at once / CHOLMOD", name, n, s.count);
        bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", NAN, false);
        cholmod_free_dense(&s.many, &s.common);
        cholmod_free_dense(&s.many_x, &s.common);
    }
    free(s.b);
    s.weights = calloc(50, sizeof *s.weights);
    s.dq = calloc(50 * 2, sizeof *s.dq);
    double *wu = calloc(50 * n, sizeof *wu);
    for (size_t i = 0; i < 50; i++) {
        wu[i * n + i * n / 50] = 1.0;
        s.weights[i].wu = wu + i * n;
    }
    bench_racer racers[] = {{.run = fifty_gradients, .arg = &s}, {.run = factor_only, .arg = &s}};
    bench_race(2, racers, 7);
    snprintf(text, sizeof text, "%s, %zu unknowns: 50 adjoint gradients / one factor", name, n);
    bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", 1.5, false);
    free(wu);
    free(s.weights);
    free(s.dq);
    close_cholmod(&s);
    close_side(&s);
}

void bench_analysis(bool full)
{
    small_analyses();
    bench_section("right_hand_sides", "Many right-hand sides, and gradients of 50 limits");
    many_right_hand_sides("plane, small engine", lattice(22, 22, 0, 1), SCT_ENGINE_SMALL);
    many_right_hand_sides("plane", lattice(22, 22, 0, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("space", lattice(6, 6, 7, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("plane", lattice(70, 70, 0, 1), SCT_ENGINE_SPARSE);
    many_right_hand_sides("space", lattice(14, 14, 15, 1), SCT_ENGINE_SPARSE);
    large_analyses(full);
}

/* Frames: one analysis of a new design against bare CHOLMOD; the diagrams of all members on top of it. */
#include "analysis/member_line.h"
#include "bench_side.h"

static sct_model *steel(int dim)
{
    sct_model *m = mb_new(dim);
    mb_material(m, 210e9, 7850.0, 12e-6);
    m->materials[0].G = 81e9;
    for (int g = 0; g < 2; g++) {
        mb_group(m, 0, 1e-3 * (1 + g), true);
        mb_stiffen(m, g, 4e-6, 1e-6, 2e-6);
    }
    mb_case(m, 0.0);
    return m;
}

/* A frame of nx (x ny) bays and as many storeys, fixed feet, loads on beams and at joints; ny = 0: plane. */
static sct_model *storeys(int nx, int ny, int n)
{
    const int dim = ny > 0 ? 3 : 2, row = nx + 1, floor = row * (ny + 1);
    sct_model *m = steel(dim);
    for (int s = 0; s <= n; s++)
        for (int y = 0; y <= ny; y++)
            for (int x = 0; x <= nx; x++) {
                const int j = dim == 2 ? mb_joint(m, 6.0 * x, 3.5 * s, 0) : mb_joint(m, 6.0 * x, 6.0 * y, 3.5 * s);
                if (s == 0) {
                    mb_fix(m, j);
                    continue;
                }
                mb_beam(m, j - floor, j, 0);
                mb_load(m, 0, j, 1e3, dim == 2 ? -1e4 : 1e3, dim == 2 ? 0.0 : -1e4);
                for (int a = 0; a < 2; a++) {
                    if (a == 0 ? x == 0 : y == 0) continue;
                    sct_member_load *load = mb_member_load(m, 0, mb_beam(m, j - (a == 0 ? 1 : row), j, 1));
                    load->b = 6.0;
                    load->qa[dim - 1] = load->qb[dim - 1] = -1e4;
                }
            }
    mb_each_case(m);
    return m;
}

/* ---- diagrams ---------------------------------------------------------------------------------------------------- */

typedef struct drawer {
    side *s;
    sct_member_lines *lines;
    double *S; /* n_springs of the combination */
    double sum;
} drawer;

/* Largest and smallest moment and largest deflection in each plane, for every member, in one combination. */
static void draw(void *arg)
{
    drawer *d = arg;
    const sct_structure *st = d->s->st;
    const sct_properties *sizes = sct_solver_sizes(d->s->solver);
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const sct_properties *size = &sizes[bar->group];
        const sct_beam_line line = sct_member_line(d->lines, e, 0, size->P[SCT_OF_AREA]);
        const sct_beam_state state = sct_member_state(st, d->s->r.N, e);
        for (int p = 0; p < st->dim - 1; p++) {
            double c[SCT_BEAM_QUANTITIES] = {0};
            c[SCT_BEAM_M + p] = 1.0;
            d->sum += sct_beam_largest(&line, &state, c).value;
            c[SCT_BEAM_M + p] = -1.0;
            d->sum += sct_beam_largest(&line, &state, c).value;
            const sct_beam_bending bending = {.plane = p, .EI = bar->E * size->P[SCT_OF_INERTIA_IN + p]};
            d->sum += sct_beam_largest_bow(&line, &state, &bending).value;
        }
    }
}

static void analyse_and_draw(void *arg)
{
    drawer *d = arg;
    analyse(d->s);
    draw(d);
}

static void with_diagrams(const char *name, sct_model *m, int rounds)
{
    side s;
    char text[100];
    open_side(&s, m, SCT_ENGINE_SPARSE);
    open_cholmod(&s, true);
    drawer d = {.s = &s, .lines = sct_member_lines_new(s.st)};
    if (d.lines == NULL) abort();
    bench_racer racers[] = {
        {.run = analyse_and_draw, .arg = &d}, {.run = analyse_bare, .arg = &s}, {.run = draw, .arg = &d}};
    bench_race(3, racers, rounds);
    snprintf(text, sizeof text, "%s, %d unknowns: analysis and diagrams / bare", name, s.st->n_dof);
    bench_figure(text, racers[0].seconds / racers[1].seconds, "ratio", 1.5, false);
    snprintf(text, sizeof text, "%s, %d unknowns: diagrams of one member", name, s.st->n_dof);
    bench_figure(text, 1e6 * racers[2].seconds / s.st->n_bars, "us", NAN, false);
    sct_member_lines_free(d.lines);
    close_cholmod(&s);
    close_side(&s);
}

void bench_frames(bool full)
{
    bench_section("frames",
                  "Frames: one analysis (fill, factor, solve, forces), and the diagrams of all members / bare "
                  "CHOLMOD (fill, factor, solve), simplicial LL'");
    against_bare("plane", storeys(18, 0, 18), 9);
    against_bare("plane", storeys(57, 0, 58), 5);
    against_bare("space", storeys(4, 4, 7), 9);
    against_bare("space", storeys(11, 11, 12), 3);
    with_diagrams("plane", storeys(18, 0, 18), 9);
    with_diagrams("plane", storeys(57, 0, 58), 5);
    with_diagrams("space", storeys(4, 4, 7), 9);
    with_diagrams("space", storeys(11, 11, 12), 3);
    if (!full) return;
    against_bare("plane", storeys(182, 0, 183), 3);
    against_bare("space", storeys(25, 25, 25), 1);
    with_diagrams("plane", storeys(182, 0, 183), 3);
    with_diagrams("space", storeys(25, 25, 25), 1);
}

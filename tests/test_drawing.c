/* The drawing of a finished result: well-formed, labels apart, honest, the same bytes each time. */
#include "support.h"

#include <stdbool.h>
#include <string.h>

#include "count_memory.h"
#include "report/drawing.h"
#include "report/labels.h"
#include "report/quantity.h"
#include "report/sheet.h"
#include "report/shown.h"
#include "scantling.h"
#include "svg_read.h"

/* ---- hand-made results ------------------------------------------------------------------------------------------- */

enum { NAME = 24, COMBINATIONS = 4, GROUPS_MOST = 8 };

typedef struct truss {
    sct_result r;
    char (*joint_names)[NAME], (*member_names)[NAME];
    sct_group_result groups[GROUPS_MOST];
    sct_deflection_result deflections[2];
} truss;

static const char *COMBINATION_NAMES[COMBINATIONS] = {"strength 1", "strength 2", "uplift", "service"};

static void *zeroed(size_t n, size_t size)
{
    void *p = calloc(n > 0 ? n : 1, size);
    if (p == NULL) abort();
    return p;
}

static truss *truss_new(const char *title, int dimensions, int joints_most, int members_most)
{
    truss *t = zeroed(1, sizeof *t);
    const size_t nj = (size_t)joints_most, nm = (size_t)members_most;
    t->joint_names = zeroed(nj, sizeof *t->joint_names);
    t->member_names = zeroed(nm, sizeof *t->member_names);
    t->r = (sct_result){.title = title,
                        .dimensions = dimensions,
                        .n_combinations = COMBINATIONS,
                        .kept = true,
                        .outcome = SCT_CHECKED,
                        .combinations = COMBINATION_NAMES,
                        .groups = t->groups,
                        .deflections = t->deflections};
    t->r.joints = zeroed(nj, sizeof *t->r.joints);
    t->r.members = zeroed(nm, sizeof *t->r.members);
    t->r.u = zeroed(COMBINATIONS * 3 * nj, sizeof(double));
    t->r.reaction = zeroed(COMBINATIONS * 3 * nj, sizeof(double));
    t->r.load = zeroed(COMBINATIONS * 3 * nj, sizeof(double));
    t->r.N = zeroed(COMBINATIONS * nm, sizeof(double));
    return t;
}

static void truss_free(truss *t)
{
    free(t->joint_names);
    free(t->member_names);
    free(t->r.joints);
    free(t->r.members);
    free(t->r.u);
    free(t->r.reaction);
    free(t->r.load);
    free(t->r.N);
    free(t);
}

static int add_group(truss *t, const char *name, const char *section, double depth)
{
    t->groups[t->r.n_groups] = (sct_group_result){.name = name,
                                                  .material = "S355",
                                                  .section = section,
                                                  .A = 1.2345e-3,
                                                  .depth = depth,
                                                  .is_held = true,
                                                  .worst_member = -1};
    return t->r.n_groups++;
}

static int add_joint(truss *t, const char *letter, int number, double x, double y, double z)
{
    const int j = t->r.n_joints++;
    snprintf(t->joint_names[j], NAME, "%s%d", letter, number);
    t->r.joints[j] = (sct_joint_result){.name = t->joint_names[j], .at = {x, y, z}};
    return j;
}

static void hold(truss *t, int joint, double x, double y, double z)
{
    sct_joint_result *j = &t->r.joints[joint];
    const double held[3] = {x, y, z};
    memcpy(j->held[j->n_held++], held, sizeof held);
}

/* Tension positive [kN]; the check follows from the sign. */
static int add_member(truss *t, const char *letter, int number, int from, int to, int group, double N_kN, double u)
{
    const int m = t->r.n_members++;
    const double *p = t->r.joints[from].at, *q = t->r.joints[to].at;
    const double L =
        sqrt((q[0] - p[0]) * (q[0] - p[0]) + (q[1] - p[1]) * (q[1] - p[1]) + (q[2] - p[2]) * (q[2] - p[2]));
    snprintf(t->member_names[m], NAME, "%s%d", letter, number);
    t->r.members[m] = (sct_member_result){.name = t->member_names[m],
                                          .group = group,
                                          .from = from,
                                          .to = to,
                                          .L = L,
                                          .N = N_kN * 1e3,
                                          .utilisation = u,
                                          .check = N_kN > 0   ? SCT_CHECK_TENSION
                                                   : N_kN < 0 ? SCT_CHECK_BUCKLING_IN
                                                              : SCT_CHECK_SLENDERNESS,
                                          .combination = N_kN == 0 ? -1 : 0};
    sct_group_result *g = &t->groups[group];
    g->n_members++;
    if (g->worst_member < 0 || u > t->r.members[g->worst_member].utilisation) g->worst_member = m;
    t->r.utilisation = fmax(t->r.utilisation, u);
    if (u > 1) t->r.kept = false;
    t->r.mass += 9.5 * L;
    return m;
}

static void load_all(truss *t, int joint, double x, double y, double z)
{
    for (int c = 0; c < COMBINATIONS; c++) {
        double *F = t->r.load + ((size_t)c * (size_t)t->r.n_joints + (size_t)joint) * 3;
        F[0] = x;
        F[1] = y;
        F[2] = z;
    }
}

static void react(truss *t, int joint, double x, double y, double z)
{
    for (int c = 0; c < COMBINATIONS; c++) {
        double *R = t->r.reaction + ((size_t)c * (size_t)t->r.n_joints + (size_t)joint) * 3;
        R[0] = x;
        R[1] = y;
        R[2] = z;
    }
}

/* A parabola of displacements, `most` downwards in the middle of the span. */
static void sag(truss *t, double span, double most)
{
    const int down = t->r.dimensions - 1;
    for (int c = 0; c < COMBINATIONS; c++)
        for (int j = 0; j < t->r.n_joints; j++) {
            const double x = t->r.joints[j].at[0] / span;
            t->r.u[((size_t)c * (size_t)t->r.n_joints + (size_t)j) * 3 + (size_t)down] = -4 * most * x * (1 - x);
        }
}

/* A pitched Howe truss of 24 m span, rise 4 m, end posts, 29 members; `peak` is the utilisation of D3 and D4. */
static truss *howe(double peak)
{
    static const double TOP[8] = {0.93, 0.80, 0.67, 0.54, 0.54, 0.67, 0.80, 0.93};
    static const double BOTTOM[8] = {0.96, 0.96, 0.87, 0.87, 0.87, 0.87, 0.96, 0.96};
    static const double POST[7] = {0.10, 0.41, 0.62, 0.82, 0.62, 0.41, 0.10};
    const double diagonal[6] = {0.65, 0.74, peak, peak, 0.74, 0.65};
    truss *t = truss_new("Grain store, truss line 4", 2, 16, 29);
    const int top = add_group(t, "top chord", "SHS 100×5", 0.1),
              bottom = add_group(t, "bottom chord", "SHS 100×5", 0.1);
    const int posts = add_group(t, "posts", "SHS 70×3.2", 0.07), webs = add_group(t, "diagonals", "SHS 70×3.2", 0.07);
    for (int i = 0; i <= 8; i++) add_joint(t, "L", i, 3 * i, 0, 0);
    for (int i = 1; i <= 7; i++) add_joint(t, "U", i, 3 * i, i <= 4 ? i : 8 - i, 0);
    for (int i = 0; i < 8; i++) add_member(t, "T", i + 1, i == 0 ? 0 : 8 + i, i == 7 ? 8 : 9 + i, top, -300, TOP[i]);
    for (int i = 0; i < 8; i++) add_member(t, "B", i + 1, i, i + 1, bottom, 300, BOTTOM[i]);
    for (int i = 0; i < 7; i++) add_member(t, "V", i + 1, i + 1, 9 + i, posts, i == 0 || i == 6 ? 0 : 40, POST[i]);
    for (int i = 0; i < 6; i++)
        add_member(t, "D", i + 1, i < 3 ? 9 + i : 10 + i, i < 3 ? i + 2 : i + 1, webs, -60, diagonal[i]);
    hold(t, 0, 1, 0, 0);
    hold(t, 0, 0, 1, 0);
    hold(t, 8, 0, 1, 0);
    for (int j = 9; j < 16; j++) load_all(t, j, 0, -34.4e3, 0);
    load_all(t, 0, 0, -17.2e3, 0);
    load_all(t, 8, 0, -17.2e3, 0);
    for (int j = 1; j < 8; j++) load_all(t, j, 0, -0.3e3, 0);
    react(t, 0, 0, 137.5e3, 0);
    react(t, 8, 0, 137.5e3, 0);
    sag(t, 24, 0.0312);
    t->deflections[0] = (sct_deflection_result){.limit = 0,
                                                .joint = 4,
                                                .from = -1,
                                                .combination = 3,
                                                .direction = {0, 1, 0},
                                                .u = -0.0312,
                                                .at_most = 0.08,
                                                .utilisation = 0.39,
                                                .label = "L/300"};
    t->r.n_deflections = 1;
    return t;
}

/* A Warren girder with level chords, `panels` of `width`; no posts. */
static truss *warren(int panels, double width, double height)
{
    truss *t = truss_new("Warren girder", 2, 2 * panels + 1, 4 * panels - 1);
    const int chords = add_group(t, "chords", "RHS 200×120×8", 0.2), webs = add_group(t, "webs", NULL, 0);
    t->groups[webs].depth = 0.08;
    for (int i = 0; i <= panels; i++) add_joint(t, "L", i, width * i, 0, 0);
    for (int i = 0; i < panels; i++) add_joint(t, "U", i, width * (i + 0.5), height, 0);
    for (int i = 0; i < panels; i++) {
        const double x = (i + 0.5) / panels, M = 4 * x * (1 - x), V = 1 - 2 * x;
        add_member(t, "B", i, i, i + 1, chords, 500 * M, 0.97 * M);
        if (i + 1 < panels) add_member(t, "T", i, panels + 1 + i, panels + 2 + i, chords, -500 * M, 0.9 * M);
        add_member(t, "W", 2 * i, i, panels + 1 + i, webs, -200 * V, 0.05 + 0.9 * fabs(V));
        add_member(t, "W", 2 * i + 1, panels + 1 + i, i + 1, webs, 200 * V, 0.05 + 0.7 * fabs(V));
    }
    hold(t, 0, 1, 0, 0);
    hold(t, 0, 0, 1, 0);
    hold(t, panels, 0, 1, 0);
    for (int i = 0; i < panels; i++) load_all(t, panels + 1 + i, 0, -20e3, 0);
    sag(t, panels * width, 0.05);
    return t;
}

/* A cantilever on a wall: pinned above, an inclined roller below. */
static truss *cantilever(void)
{
    truss *t = truss_new("Canopy bracket", 2, 8, 13);
    const int all = add_group(t, "all", "L 60×6", 0.06);
    for (int i = 0; i < 4; i++) add_joint(t, "U", i, 1.2 * i, 1.2, 0);
    for (int i = 0; i < 4; i++) add_joint(t, "L", i, 1.2 * i, 0.3 * i, 0);
    for (int i = 0; i < 3; i++) {
        add_member(t, "T", i + 1, i, i + 1, all, 20, 0.8 - 0.25 * i);
        add_member(t, "B", i + 1, 4 + i, 5 + i, all, -20, 0.9 - 0.3 * i);
        add_member(t, "D", i + 1, i + 1, 4 + i, all, -8, 0.5);
    }
    for (int i = 0; i < 4; i++) add_member(t, "V", i, i, 4 + i, all, 5, 0.2);
    hold(t, 0, 1, 0, 0);
    hold(t, 0, 0, 1, 0);
    hold(t, 4, 0.8, 0.6, 0);
    react(t, 0, -20e3, 3e3, 0);
    react(t, 4, 20e3, 15e3, 0);
    for (int i = 1; i < 4; i++) load_all(t, i, 0, -6e3, 0);
    return t;
}

/* A square mast of 52 members: four storeys of legs, X-less bracing, horizontals and one plan brace each. */
static truss *mast(void)
{
    static const double Z[5] = {0, 4, 8, 11.5, 15};
    truss *t = truss_new("Lattice mast 15 m", 3, 20, 52);
    const int lower = add_group(t, "legs, lower", "SHS 80×4", 0.08),
              rings = add_group(t, "horizontals", "SHS 40×3.2", 0.04);
    const int braces = add_group(t, "diagonals", "SHS 80×3.2", 0.08),
              plan = add_group(t, "plan braces", "SHS 70×3.2", 0.07);
    const int upper = add_group(t, "legs, upper", "SHS 70×3.2", 0.07);
    for (int k = 0; k < 5; k++) {
        static const char *const CORNERS[4] = {"A", "B", "C", "D"};
        const double h = 1.8 - 1.1 * Z[k] / 15;
        for (int i = 0; i < 4; i++) add_joint(t, CORNERS[i], k, i == 1 || i == 2 ? h : -h, i >= 2 ? h : -h, Z[k]);
    }
    for (int k = 0; k < 4; k++)
        for (int i = 0; i < 4; i++) {
            const int j = 4 * k + i, next = 4 * k + (i + 1) % 4;
            add_member(t, "Q", j, j, j + 4, k < 2 ? lower : upper, i == 0 || i == 3 ? 60 : -90,
                       0.3 + 0.1 * i + 0.05 * k);
            add_member(t, "X", j, j, next + 4, braces, i % 2 == 0 ? -20 : 15, 0.4 + 0.13 * i);
            add_member(t, "H", j, j + 4, next + 4, rings, i == 1 ? 0 : -4, 0.23 + 0.16 * i);
        }
    for (int k = 0; k < 4; k++) add_member(t, "K", k, 4 * k + 4, 4 * k + 6, plan, k == 1 ? 0 : -3, 0.88 - 0.2 * k);
    for (int i = 0; i < 4; i++) {
        hold(t, i, 1, 0, 0);
        hold(t, i, 0, 1, 0);
        if (i != 2) hold(t, i, 0, 0, 1);
        load_all(t, 16 + i, 7.5e3, 0, -22e3);
    }
    for (int c = 0; c < COMBINATIONS; c++)
        for (int j = 0; j < 20; j++)
            t->r.u[(c * 20 + j) * 3] = 0.03 * t->r.joints[j].at[2] * t->r.joints[j].at[2] / 225;
    return t;
}

/* A plane tower in feet whose names are hostile: markup, quotes, a control character, marks that turn writing. */
static truss *hostile_tower(void)
{
    truss *t = truss_new("<b>Tower</b> & \"mast\" ]]> Gr\xC3\xB6\xC3\x9F"
                         "e \xE4\xB8\xAD\xE6\x96\x87, a title that does not end",
                         2, 18, 40);
    const int legs = add_group(t, "legs <script>alert(1)</script>",
                               "CHS 114.3\xC3\x97"
                               "6.3",
                               0.1143);
    const int webs = add_group(t, "webs", NULL, 0.05);
    for (int k = 0; k < 9; k++)
        for (int i = 0; i < 2; i++) add_joint(t, i == 1 ? "R'" : "L\x01", k, 1.5 * i, 2.0 * k, 0);
    for (int k = 0; k < 8; k++) {
        add_member(t, "leg&", 2 * k, 2 * k, 2 * k + 2, legs, 100 - 12 * k, 1.3 - 0.1 * k);
        add_member(t, "St\xC3\xBCtze_lang_lang", k, 2 * k + 1, 2 * k + 3, legs, -100 + 12 * k, 1.1 - 0.1 * k);
        add_member(t, "\xE2\x80\xAE", k, 2 * k, 2 * k + 3, webs, k % 2 == 1 ? -10 : 10, 0.3);
        add_member(t, "<&\"'>", k, 2 * k + 2, 2 * k + 3, webs, 0, 0.05);
    }
    hold(t, 0, 1, 0, 0);
    hold(t, 0, 0, 1, 0);
    hold(t, 1, 0, 1, 0);
    for (int k = 1; k < 9; k++) load_all(t, 2 * k, 3e3, 0, 0);
    t->r.us_customary = true;
    return t;
}

/* Two bars under a ceiling, sizes and depths unknown. */
static truss *two_bars(double u)
{
    truss *t = truss_new("", 2, 3, 2);
    const int bars = add_group(t, "bars", NULL, 0);
    add_joint(t, "A", 0, 0, 0, 0);
    add_joint(t, "B", 0, 4, 0, 0);
    add_joint(t, "C", 0, 2, -1.5, 0);
    add_member(t, "a", 1, 0, 2, bars, 10, 0.5);
    add_member(t, "b", 1, 1, 2, bars, 10, u);
    for (int i = 0; i < 2; i++) {
        hold(t, i, 1, 0, 0);
        hold(t, i, 0, 1, 0);
        react(t, i, i == 1 ? 8e3 : -8e3, 6e3, 0);
    }
    load_all(t, 2, 0, -12e3, 0);
    return t;
}

static sct_text draw(const truss *t, bool loads, bool deflected)
{
    sct_text out = {0};
    const sct_write_options options = {.combination = -1, .draw_loads = loads, .draw_deflected = deflected};
    ck_assert_int_eq(sct_drawing_svg(&t->r, &options, &out), SCT_OK);
    ck_assert(!out.failed && out.size > 0);
    return out;
}

static void check_drawing(truss *t, bool loads, bool deflected)
{
    sct_text svg = draw(t, loads, deflected);
    check_well_formed(&svg);
    check_labels(&svg);
    check_decimals(&svg);
    ck_assert(holds(&svg, "role=\"img\"") && holds(&svg, "prefers-color-scheme:dark"));
    ck_assert(holds(&svg, "Preliminary sizing only."));
    sct_text again = draw(t, loads, deflected);
    ck_assert(again.size == svg.size && memcmp(again.data, svg.data, svg.size) == 0);
    sct_text_free(&again);
    sct_text_free(&svg);
    truss_free(t);
}

/* ---- tests
 * -------------------------------------------------------------------------------------------------------------- */

START_TEST(every_drawing_is_well_formed_with_labels_apart)
{
    for (int loads = 0; loads < 2; loads++) {
        check_drawing(howe(1.1345), loads, loads);
        check_drawing(warren(6, 3, 2.5), loads, loads);
        check_drawing(warren(12, 3, 2.5), loads, loads);
        check_drawing(warren(28, 3, 2.5), loads, false);
        check_drawing(warren(75, 1.5, 2.5), loads, loads);
        check_drawing(warren(2, 0.75, 0.6), loads, false);
        check_drawing(cantilever(), loads, loads);
        check_drawing(mast(), loads, loads);
        check_drawing(two_bars(1.2), loads, false);
        check_drawing(hostile_tower(), loads, false);
    }
}
END_TEST

START_TEST(five_thousand_members_make_one_sheet)
{
    check_drawing(warren(1250, 1.5, 2.5), true, true);
}
END_TEST

START_TEST(the_slightest_excess_never_reads_as_a_pass)
{
    truss *t = two_bars(1 + 1e-9);
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "One of 2 members is above 1"));
    ck_assert(holds(&svg, ">1.01<"));
    ck_assert(holds(&svg, "sc-s-over"));
    sct_text_free(&svg);
    truss_free(t);
    t = two_bars(0.9901);
    svg = draw(t, false, false);
    ck_assert(holds(&svg, "Every limit is kept; b1 governs at 1.00"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(a_limit_of_size_alone_is_not_called_kept)
{
    truss *t = two_bars(0.5);
    t->r.kept = false;
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "Not every limit is kept"));
    ck_assert(!holds(&svg, "Every limit is kept"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(roof_truss_shows_its_finding_dimensions_and_slope)
{
    truss *t = howe(1.1345);
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "Two of 29 members are above 1"));
    ck_assert(
        holds(&svg, "D3: 1.14 in buckling in plane under strength 1. Also above 1: D4 (1.14). Deflections are kept."));
    ck_assert(holds(&svg, "8 \xC3\x97 3.00 = 24.00"));
    ck_assert(holds(&svg, ">4.00<"));
    ck_assert(holds(&svg, "Utilisation, worst of 4 combinations"));
    ck_assert(holds(&svg, "Depths drawn \xC3\x97"
                          "3"));
    ck_assert(holds(&svg, "<g><title>T1, top chord, SHS 100\xC3\x97"
                          "5, utilisation 0.93, buckling in plane under strength 1</title>"));
    ck_assert(!holds(&svg, "Not labelled"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(deflected_shape_tells_movement_limit_and_factor)
{
    truss *t = howe(0.94);
    sct_text svg = draw(t, true, true);
    /* 0.08 of 24 m over 31.2 mm is 61.5: the next lower of 1, 2, 5 is 50 */
    ck_assert(holds(&svg, "Deflected shape (service), displacements \xC3\x97"
                          "50"));
    ck_assert(holds(&svg, "31.2 of 80.0\xE2\x80\xAFmm"));
    ck_assert(holds(&svg, ">34.4<") && holds(&svg, ">17.2<"));
    ck_assert(holds(&svg, "below 1.7\xE2\x80\xAFkN not drawn")); /* 5 % of 34.4 */
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(free_areas_and_unknown_depths_are_said)
{
    truss *t = two_bars(0.5);
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "a1, bars, area 1234\xE2\x80\xAFmm\xC2\xB2, utilisation 0.50"));
    ck_assert(holds(&svg, "Depths not to scale"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(a_stocky_model_is_drawn_with_slimmer_members_and_says_so)
{
    truss *t = warren(2, 0.75, 0.6); /* chords 200 mm deep in panels of 750 mm */
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "Depths drawn \xC3\x97"
                          "0.2"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(us_models_are_drawn_in_feet_and_kips)
{
    truss *t = hostile_tower();
    sct_text svg = draw(t, true, false);
    ck_assert(holds(&svg, "lengths in ft"));
    ck_assert(holds(&svg, "8 \xC3\x97 6.562 = 52.49")); /* 8 x 2 m = 16 m = 52.49 ft; 8 x 6.56 would be 52.48 */
    ck_assert(holds(&svg, "), kip") && !holds(&svg, "kN"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(names_cannot_become_markup_or_turn_the_numbers)
{
    truss *t = hostile_tower();
    sct_text svg = draw(t, false, false);
    ck_assert(!holds(&svg, "<script") && !holds(&svg, "<b>"));
    for (const char *p = svg.data; (p = strstr(p, "\xE2\x80\xAE")) != NULL; p++) { /* only in hover titles */
        const char *tag = p;
        while (*tag != '<') tag--;
        ck_assert(strncmp(tag, "<title>", 7) == 0);
    }
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(an_inclined_roller_lies_across_the_direction_held)
{
    truss *t = cantilever();
    sct_text svg = draw(t, false, false);
    /* Held along (0.8, 0.6): the ground line, 22.8 u long, runs along (0.6, -0.8), on the sheet (0.6, 0.8). */
    bool found = false;
    for (const char *p = svg.data; (p = strstr(p, "<line ")) != NULL && !found; p++) {
        const double dx = attribute_of(p, "x2=\"") - attribute_of(p, "x1=\"");
        const double dy = attribute_of(p, "y2=\"") - attribute_of(p, "y1=\"");
        found = fabs(fabs(dx) - 0.6 * 22.8) < 0.02 && fabs(fabs(dy) - 0.8 * 22.8) < 0.02 && dx * dy > 0;
    }
    ck_assert(found);
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(space_towers_carry_levels_axes_and_tables)
{
    truss *t = mast();
    sct_text svg = draw(t, false, false);
    ck_assert(holds(&svg, "+11.50") && holds(&svg, "\xC2\xB1"
                                                   "0.00"));
    ck_assert(holds(&svg, ">x<") && holds(&svg, ">y<") && holds(&svg, ">z<"));
    ck_assert(holds(&svg, "Every member on the utilisation scale"));
    ck_assert(holds(&svg, "3.60 \xC3\x97 3.60 \xC3\x97 15.00\xE2\x80\xAFm"));
    sct_text_free(&svg);
    truss_free(t);
}
END_TEST

START_TEST(a_failed_allocation_is_told_or_changes_nothing)
{
    truss *(*const make[])(void) = {cantilever, mast, hostile_tower};
    for (size_t i = 0; COUNTS_MEMORY && i < sizeof make / sizeof *make; i++) {
        truss *t = make[i]();
        sct_text whole = draw(t, true, true);
        const sct_write_options options = {.combination = -1, .draw_loads = true, .draw_deflected = true};
        for (long n = 0, failed = 1; failed; n++) {
            const long before = memory.live;
            sct_text out = {0};
            const long point = memory.requests + n;
            memory.fail_at = point;
            const sct_status status = sct_drawing_svg(&t->r, &options, &out);
            failed = memory.requests > point; /* the C library's sort may lose its scratch and sort without */
            memory.fail_at = -1;
            must(status == SCT_NO_MEMORY || (out.size == whole.size && memcmp(out.data, whole.data, out.size) == 0));
            sct_text_free(&out);
            must(memory.live == before);
        }
        sct_text_free(&whole);
        truss_free(t);
    }
}
END_TEST

START_TEST(boxes_meet_by_their_true_shape)
{
    const sct_box level = sct_box_level((sct_point){0, 0}, 10, 5);
    const sct_box turned = sct_box_about((sct_point){12, 3}, (sct_point){18, 9}, 2); /* upright bounds would touch */
    const sct_box inside = sct_box_level((sct_point){1, 1}, 1, 1);
    ck_assert(!sct_boxes_meet(&level, &turned, 0));
    ck_assert(sct_boxes_meet(&level, &turned, 3));
    ck_assert(sct_boxes_meet(&level, &inside, 0));
    ck_assert(!sct_boxes_meet(&level, &(sct_box){20, 0, 1, 0, 10, 5}, 0)); /* touching is not meeting */
}
END_TEST

START_TEST(labels_take_the_cheapest_free_place_fewest_choices_first)
{
    sct_labels *labels = sct_labels_new((sct_point){0, 0}, (sct_point){200, 100});
    const sct_box at[3] = {sct_box_level((sct_point){50, 50}, 10, 5), sct_box_level((sct_point){100, 50}, 10, 5),
                           sct_box_level((sct_point){150, 50}, 10, 5)};
    const sct_choice many[3] = {{at[0], 0}, {at[1], 1}, {at[2], 2}}, one[1] = {{at[0], 5}};
    const sct_choice outside[1] = {{sct_box_level((sct_point){198, 50}, 10, 5), 0}};
    sct_labels_block(labels, sct_box_level((sct_point){100, 50}, 3, 3), SCT_BAND, 7);
    const int first = sct_labels_ask(labels, many, 3), second = sct_labels_ask(labels, one, 1);
    const int third = sct_labels_ask(labels, outside, 1);
    sct_labels_settle(labels);
    ck_assert_int_eq(sct_labels_choice(labels, second), 0); /* it had no other */
    ck_assert_int_eq(sct_labels_choice(labels, first), 2);  /* 0 is taken, 1 is blocked */
    ck_assert_int_eq(sct_labels_choice(labels, third), -1); /* it leaves the frame */
    ck_assert_int_eq(sct_labels_crossed(labels, &at[1], SCT_BAND, -1), 1);
    ck_assert_int_eq(sct_labels_crossed(labels, &at[1], SCT_BAND, 7), 0);
    sct_gap gaps[4];
    ck_assert_int_eq(sct_labels_gaps(labels, (sct_point){0, 50}, (sct_point){200, 50}, 0, gaps, 4), 2);
    ck_assert_double_eq_tol(gaps[0].from, 0.2, 1e-12);
    ck_assert_double_eq_tol(gaps[1].to, 0.8, 1e-12);
    sct_labels_free(labels);
}
END_TEST

START_TEST(numbers_are_grouped_and_signed_as_in_print)
{
    sct_quantity q;
    sct_quantity_number(q, 1284, 0);
    ck_assert_str_eq(q, "1284");
    sct_quantity_number(q, 12840.04, 1);
    ck_assert_str_eq(q, "12\xE2\x80\xAF"
                        "840.0");
    sct_quantity_number(q, -1234567, 0);
    ck_assert_str_eq(q, "\xE2\x88\x92"
                        "1\xE2\x80\xAF"
                        "234\xE2\x80\xAF"
                        "567");
    sct_quantity_number(q, -0.004, 2);
    ck_assert_str_eq(q, "0.00");
    sct_quantity_force(q, 99.96e3, false);
    ck_assert_str_eq(q, "100");
    sct_quantity_utilisation(q, INFINITY);
    ck_assert_str_eq(q, "\xE2\x88\x9E");
}
END_TEST

START_TEST(utilisations_read_as_in_the_tables)
{
    for (double u = 0; u < 2; u += 0.000437) {
        sct_quantity drawn;
        sct_text table = {0};
        sct_quantity_utilisation(drawn, u);
        sct_text_utilisation(&table, u);
        must(strcmp(drawn, table.data) == 0);
        sct_text_free(&table);
    }
}
END_TEST

START_TEST(words_are_cut_between_characters)
{
    char out[64];
    sct_words_fit("\xC3\xA4\xC3\xB6\xC3\xBC\xC3\xA4\xC3\xB6\xC3\xBC", 40, 11, false, out, sizeof out);
    ck_assert_str_eq(out, "\xC3\xA4\xC3\xB6\xC3\xBC\xE2\x80\xA6");
    sct_words_fit("abcdef", 1e9, 11, false, out, 6);
    ck_assert_str_eq(out, "ab\xE2\x80\xA6");
    ck_assert_uint_eq(sct_words_line("one two three", 48, 11), 7);
    ck_assert_uint_eq(sct_words_line("unbreakable", 5, 11), 11);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("drawing");
    TCase *tests = tcase_create("drawing");
    tcase_set_timeout(tests, 60);
    tcase_add_test(tests, every_drawing_is_well_formed_with_labels_apart);
    tcase_add_test(tests, five_thousand_members_make_one_sheet);
    tcase_add_test(tests, the_slightest_excess_never_reads_as_a_pass);
    tcase_add_test(tests, a_limit_of_size_alone_is_not_called_kept);
    tcase_add_test(tests, roof_truss_shows_its_finding_dimensions_and_slope);
    tcase_add_test(tests, deflected_shape_tells_movement_limit_and_factor);
    tcase_add_test(tests, free_areas_and_unknown_depths_are_said);
    tcase_add_test(tests, a_stocky_model_is_drawn_with_slimmer_members_and_says_so);
    tcase_add_test(tests, us_models_are_drawn_in_feet_and_kips);
    tcase_add_test(tests, names_cannot_become_markup_or_turn_the_numbers);
    tcase_add_test(tests, an_inclined_roller_lies_across_the_direction_held);
    tcase_add_test(tests, space_towers_carry_levels_axes_and_tables);
    tcase_add_test(tests, a_failed_allocation_is_told_or_changes_nothing);
    tcase_add_test(tests, boxes_meet_by_their_true_shape);
    tcase_add_test(tests, labels_take_the_cheapest_free_place_fewest_choices_first);
    tcase_add_test(tests, numbers_are_grouped_and_signed_as_in_print);
    tcase_add_test(tests, utilisations_read_as_in_the_tables);
    tcase_add_test(tests, words_are_cut_between_characters);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

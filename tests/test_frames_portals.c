/* Portal frames against closed forms, which leave axial deformation out (areas here are very large), and with ordinary
 * areas against element matrices (dense_frame.h). Source: Kleinlogel, Rigid Frame Formulas, from memory, recalculated
 * by a separate stiffness calculation. kN, m; signs: moments positive with tension inside the frame. */
#include "dense_frame.h"
#include "frame_tables.h"

/* Joints A (foot), B, C, D (foot); members 0 A-B and 1 D-C upwards, 2 B-C, k = (Ib/Ic)(h/L). */
typedef struct portal {
    double h, L, Ic, Ib, A;
    bool is_fixed;
} portal;

static const portal FIRST = {4, 8, 1e-4, 2e-4, 1e4, false};  /* k = 1 */
static const portal SECOND = {4, 6, 2e-4, 3e-4, 1e4, false}; /* k = 1 */
static const portal THIRD = {5, 7, 3e-4, 4e-4, 1e4, false};

enum { A, B, C, D, LEFT = 0, RIGHT, BEAM };

static double k_of(const portal *p)
{
    return p->Ib / p->Ic * p->h / p->L;
}

static sct_model *portal_model(const portal *p)
{
    sct_model *m = ft_plane();
    mb_frame_group(m, p->A, p->Ic, p->Ic);
    mb_frame_group(m, p->A, p->Ib, p->Ib);
    mb_joint(m, 0, 0, 0);
    mb_joint(m, 0, p->h, 0);
    mb_joint(m, p->L, p->h, 0);
    mb_joint(m, p->L, 0, 0);
    ft_foot(m, A, p->is_fixed);
    ft_foot(m, D, p->is_fixed);
    mb_beam(m, A, B, 0);
    mb_beam(m, D, C, 0);
    mb_beam(m, B, C, 1);
    return m;
}

/* Moments with tension inside. M > 0 is tension against local axis 1, which points to -x for columns: away from the
 * inside on the left, towards it on the right; the beam's points upwards. */
static double left(const frame *f, double x)
{
    return frame_M(f, 0, LEFT, x);
}

static double right(const frame *f, double x)
{
    return -frame_M(f, 0, RIGHT, x);
}

static double beam(const frame *f, double x)
{
    return frame_M(f, 0, BEAM, x);
}

static double H(const frame *f, int foot)
{
    return frame_reaction(f, 0, foot, 0);
}

static void wind(sct_model *m, const portal *p, double w)
{
    sct_member_load *load = mb_member_load(m, 0, LEFT);
    load->b = p->h;
    load->qa[0] = load->qb[0] = w;
}

#define TOL 1e-6 /* what leaving axial deformation out allows */

/* Each formula on three frames; with the numbers of an example where some were printed. */
static const portal *frames(int i)
{
    static const portal *const ALL[] = {&FIRST, &SECOND, &THIRD};
    return ALL[i];
}

START_TEST(uniform_load_on_the_beam)
{
    const double w = 10;
    for (int i = 0; i < 6; i++) {
        portal p = *frames(i / 2);
        p.is_fixed = i % 2 == 1;
        const double k = k_of(&p), wL2 = w * p.L * p.L,
                     knee = p.is_fixed ? wL2 / (6 * (k + 2)) : wL2 / (4 * (2 * k + 3));
        sct_model *m = portal_model(&p);
        mb_uniform(m, 0, BEAM, -w, p.L);
        frame f = frame_solve(m);
        ck_close(left(&f, p.h), -knee, TOL);
        ck_close(right(&f, p.h), -knee, TOL);
        ck_close(beam(&f, 0), -knee, TOL);
        ck_close(beam(&f, p.L / 2), wL2 / 8 - knee, TOL);
        ck_close(H(&f, A), p.is_fixed ? wL2 / (4 * p.h * (k + 2)) : knee / p.h, TOL);
        ck_close(frame_reaction(&f, 0, A, 1), w * p.L / 2, 1e-9);
        if (p.is_fixed) ck_close(left(&f, 0), wL2 / (12 * (k + 2)), TOL);
        if (p.is_fixed) ck_close(right(&f, 0), wL2 / (12 * (k + 2)), TOL);
        const double EIb = ft_E * p.Ib;
        ck_close(-frame_bow(&f, 0, BEAM, 0, p.L / 2), 5 * wL2 * p.L * p.L / (384 * EIb) - knee * p.L * p.L / (8 * EIb),
                 TOL);
        frame_free(&f);
    }
}
END_TEST

START_TEST(point_load_in_the_middle_of_the_beam)
{
    const double P = 30;
    for (int i = 0; i < 6; i++) {
        portal p = *frames(i / 2);
        p.is_fixed = i % 2 == 1;
        const double k = k_of(&p), foot = P * p.L / (8 * (k + 2));
        sct_model *m = portal_model(&p);
        mb_point(m, 0, BEAM, p.L / 2, 0, -P, 0);
        frame f = frame_solve(m);
        ck_close(left(&f, p.h), p.is_fixed ? -2 * foot : -3 * P * p.L / (8 * (2 * k + 3)), TOL);
        ck_close(H(&f, A), p.is_fixed ? 3 * foot / p.h : 3 * P * p.L / (8 * p.h * (2 * k + 3)), TOL);
        if (p.is_fixed) ck_close(left(&f, 0), foot, TOL);
        frame_free(&f);
    }
}
END_TEST

START_TEST(sway_force_at_a_knee)
{
    const double P = 20;
    for (int i = 0; i < 6; i++) {
        portal p = *frames(i / 2);
        p.is_fixed = i % 2 == 1;
        const double k = k_of(&p), Ph = P * p.h, sway = Ph * p.h * p.h / (12 * ft_E * p.Ic);
        const double knee = p.is_fixed ? Ph / 2 * 3 * k / (6 * k + 1) : Ph / 2;
        const double foot = p.is_fixed ? Ph / 2 * (3 * k + 1) / (6 * k + 1) : 0.0;
        sct_model *m = portal_model(&p);
        mb_load(m, 0, B, P, 0, 0);
        frame f = frame_solve(m);
        ck_close(left(&f, p.h), knee, TOL);
        ck_close(right(&f, p.h), -knee, TOL);
        ck_assert_double_eq_tol(left(&f, 0), -foot, TOL * Ph);
        ck_assert_double_eq_tol(right(&f, 0), foot, TOL * Ph);
        ck_close(H(&f, A), -P / 2, TOL);
        ck_close(frame_reaction(&f, 0, D, 1), p.is_fixed ? 3 * Ph * k / (p.L * (6 * k + 1)) : Ph / p.L, TOL);
        ck_close(frame_moved(&f, 0, C, 0), sway * (p.is_fixed ? (3 * k + 2) / (6 * k + 1) : (2 * k + 1) / k), TOL);
        frame_free(&f);
    }
}
END_TEST

START_TEST(uniform_wind_on_the_left_column)
{
    const double w = 10;
    for (int i = 0; i < 6; i++) {
        portal p = *frames(i / 2);
        p.is_fixed = i % 2 == 1;
        const double k = k_of(&p), h = p.h, N1 = k + 2, N2 = 6 * k + 1, wh2 = w * h * h;
        sct_model *m = portal_model(&p);
        wind(m, &p, w);
        frame f = frame_solve(m);
        const double HD = p.is_fixed ? w * h * (2 * k + 3) / (8 * N1) : w * h * (5 * k + 6) / (8 * (2 * k + 3));
        ck_close(-H(&f, D), HD, TOL);
        ck_close(-H(&f, A), w * h - HD, TOL);
        const double MB = p.is_fixed ? wh2 / 4 * (-k / (6 * N1) + 2 * k / N2) : (w * h - HD) * h - wh2 / 2;
        const double MC = p.is_fixed ? wh2 / 4 * (-k / (6 * N1) - 2 * k / N2) : -HD * h;
        ck_close(left(&f, h), MB, TOL);
        ck_close(right(&f, h), MC, TOL);
        if (p.is_fixed) {
            ck_close(left(&f, 0), -wh2 / 4 * ((k + 3) / (6 * N1) + (4 * k + 1) / N2), TOL);
            ck_close(right(&f, 0), wh2 / 4 * (-(k + 3) / (6 * N1) + (4 * k + 1) / N2), TOL);
        }
        frame_free(&f);
    }
}
END_TEST

START_TEST(heated_beam)
{
    for (int i = 0; i < 6; i++) {
        portal p = *frames(i / 2);
        p.is_fixed = i % 2 == 1;
        const double k = k_of(&p), h = p.h, L = p.L, EId = ft_E * p.Ib * 12e-6 * 30 * L;
        sct_model *m = portal_model(&p);
        mb_act(m, 0, BEAM, 30, 0);
        frame f = frame_solve(m);
        ck_close(H(&f, A),
                 p.is_fixed ? 3 * EId * (2 * k + 1) / (h * h * L * k * (k + 2)) : 3 * EId / (h * h * L * (2 * k + 3)),
                 TOL);
        ck_close(fabs(left(&f, h)), p.is_fixed ? 3 * EId / (h * L * (k + 2)) : 3 * EId / (h * L * (2 * k + 3)), TOL);
        if (p.is_fixed) ck_close(fabs(left(&f, 0)), 3 * EId * (k + 1) / (h * L * k * (k + 2)), TOL);
        frame_free(&f);
    }
}
END_TEST

/* Examples with printed numbers: foot moment, knee moment (absolute values), H. */
typedef struct example {
    const portal *p;
    bool is_fixed;
    int load; /* 0 w = 10 on the beam; 1 P = 30 in its middle; 2 sway 20, 3 sway 30 at B; 4 wind 10; 5 beam +30 K */
    double foot, knee, H;
} example;

static void load_example(sct_model *m, const portal *p, int load)
{
    if (load == 0) mb_uniform(m, 0, BEAM, -10, p->L);
    if (load == 1) mb_point(m, 0, BEAM, p->L / 2, 0, -30, 0);
    if (load == 2 || load == 3) mb_load(m, 0, B, load == 2 ? 20 : 30, 0, 0);
    if (load == 4) wind(m, p, 10);
    if (load == 5) mb_act(m, 0, BEAM, 30, 0);
}

START_TEST(examples_have_their_printed_numbers)
{
    static const example ALL[] = {{&FIRST, false, 0, 0, 32, 8},
                                  {&FIRST, false, 2, 0, 40, 10},
                                  {&FIRST, true, 0, 17.77778, 35.55556, 13.33333},
                                  {&FIRST, true, 2, 22.85714, 17.14286, 10},
                                  {&FIRST, false, 5, 0, 2.268, 0.567},
                                  {&FIRST, true, 5, 7.56, 3.78, 2.835},
                                  {&SECOND, false, 0, 0, 18, 4.5},
                                  {&SECOND, false, 1, 0, 13.5, 3.375},
                                  {&SECOND, false, 3, 0, 60, 15},
                                  {&SECOND, false, 4, 0, 36, 29},
                                  {&SECOND, true, 0, 10, 20, 7.5},
                                  {&SECOND, true, 1, 7.5, 15, 5.625},
                                  {&SECOND, true, 3, 34.285714, 25.714286, 15},
                                  {&SECOND, true, 4, 37.460317, 9.206349, 31.666667}};
    for (size_t i = 0; i < sizeof ALL / sizeof *ALL; i++) {
        portal p = *ALL[i].p;
        p.is_fixed = ALL[i].is_fixed;
        sct_model *m = portal_model(&p);
        load_example(m, &p, ALL[i].load);
        frame f = frame_solve(m);
        ck_assert_double_eq_tol(fabs(left(&f, 0)), ALL[i].foot, 1e-6 * ALL[i].knee);
        ck_close(fabs(left(&f, p.h)), ALL[i].knee, 1e-6);
        ck_close(fabs(H(&f, A)), ALL[i].H, 1e-6);
        frame_free(&f);
    }
}
END_TEST

/* Fixed feet, columns a, span 2 a, Ib = 5 Ic, w on the beam: largest moment (19/54) w a^2 at midspan, knees turn by
 * w a^3/(27 E Ic). (Attributed from memory to Hoff, The Analysis of Structures; recalculated.) */
START_TEST(a_published_portal)
{
    const double a = 3, w = 10;
    const portal p = {a, 2 * a, 1e-4, 5e-4, 1e4, true};
    sct_model *m = portal_model(&p);
    mb_uniform(m, 0, BEAM, -w, 2 * a);
    frame f = frame_solve(m);
    ck_close(beam(&f, a), 19.0 / 54 * w * a * a, TOL);
    ck_close(frame_moved(&f, 0, C, 5), w * a * a * a / (27 * ft_E * 1e-4), TOL);
    ck_close(frame_moved(&f, 0, B, 5), -w * a * a * a / (27 * ft_E * 1e-4), TOL);
    frame_free(&f);
}
END_TEST

/* Two equal bays, fixed feet: h 4, bays 6, Ic 1e-4, Ib 2e-4. Sway 30 at the first knee; 10 on both beams. */
START_TEST(two_bays)
{
    sct_model *m = ft_plane();
    mb_frame_group(m, ft_rigid, 1e-4, 1e-4);
    mb_frame_group(m, ft_rigid, 2e-4, 2e-4);
    mb_case(m, 0.0);
    for (int j = 0; j < 3; j++) {
        mb_fix(m, mb_joint(m, 6 * j, 0, 0));
        mb_joint(m, 6 * j, 4, 0);
        mb_beam(m, 2 * j, 2 * j + 1, 0);
    }
    for (int i = 0; i < 2; i++) mb_uniform(m, 1, mb_beam(m, 2 * i + 1, 2 * i + 3, 1), -10, 6);
    mb_load(m, 0, 1, 30, 0, 0);
    frame f = frame_solve(m);
    static const double SHEAR[] = {9.1549, 11.6901, 9.1549}, BASE[] = {20.8451, 24.2254, 20.8451};
    static const double TOP[] = {15.7746, 22.5352, 15.7746};
    for (int j = 0; j < 3; j++) {
        ck_close(-frame_reaction(&f, 0, 2 * j, 0), SHEAR[j], 1e-5);
        ck_close(-frame_M(&f, 0, j, 0), BASE[j], 1e-5);
        ck_close(frame_M(&f, 0, j, 4), TOP[j], 1e-5);
    }
    ck_close(frame_moved(&f, 0, 1, 0), 3.290857e-3, 1e-6);
    ck_close(frame_reaction(&f, 1, 0, 0), 4.8214, 2e-5);
    ck_close(frame_reaction(&f, 1, 0, 1), 25.7143, 1e-5);
    ck_close(frame_reaction(&f, 1, 2, 1), 68.5714, 1e-5);
    ck_close(frame_M(&f, 1, 0, 0), 6.4286, 1e-5);
    ck_close(frame_M(&f, 1, 3, 0), -12.8571, 1e-5);
    ck_close(frame_M(&f, 1, 3, 6), -38.5714, 1e-5);
    frame_free(&f);
}
END_TEST

/* h 5, L 20, rise 2, Ic = Ir = 3e-4; case 0: 10 per plan length, case 1: 20 at the left knee. */
static sct_model *pitched(bool is_fixed)
{
    static const double AT[5][2] = {{0, 0}, {0, 5}, {10, 7}, {20, 5}, {20, 0}};
    sct_model *m = ft_plane();
    mb_frame_group(m, ft_rigid, 3e-4, 3e-4);
    mb_case(m, 0.0);
    for (int j = 0; j < 5; j++) mb_joint(m, AT[j][0], AT[j][1], 0);
    ft_foot(m, 0, is_fixed);
    ft_foot(m, 4, is_fixed);
    for (int e = 0; e < 4; e++) mb_beam(m, e, e + 1, 0);
    for (int e = 1; e < 3; e++) {
        mb_uniform(m, 0, e, -10, hypot(10, 2));
        m->cases[0].member_loads[e - 1].axes = SCT_AXES_PROJECTED;
    }
    mb_load(m, 1, 1, 20, 0, 0);
    return m;
}

/* k = (Ir/Ic)(h/s), phi = f/h, m = 1 + phi, B = 2(k + 1) + m, C = 1 + 2m, N = B + mC: knee -w L^2 (3 + 5m)/(16N), apex
 * w L^2/8 + m knee; sway: far knee -P h (B + C)/(2N). */
START_TEST(pitched_portal_on_pinned_feet)
{
    const double h = 5, L = 20, s = hypot(10, 2), k = h / s, e = 1 + 2 / h;
    const double b = 2 * (k + 1) + e, c = 1 + 2 * e, N = b + e * c;
    const double knee = -10 * L * L * (3 + 5 * e) / (16 * N), far = -20 * h * (b + c) / (2 * N);
    frame f = frame_solve(pitched(false));
    ck_close(frame_M(&f, 0, 0, h), knee, TOL);
    ck_close(frame_M(&f, 0, 1, s), 10 * L * L / 8 + e * knee, TOL);
    ck_close(H(&f, 0), -knee / h, TOL);
    ck_close(frame_reaction(&f, 0, 0, 1), 100.0, 1e-9);
    ck_close(frame_M(&f, 1, 3, 0), far, TOL);
    ck_close(frame_M(&f, 1, 0, h), 20 * h + far, TOL);
    ck_close(frame_M(&f, 1, 1, s), 20 * h / 2 + e * far, TOL);
    ck_close(frame_reaction(&f, 1, 4, 1), 20 * h / L, 1e-9);
    ck_close(frame_moved(&f, 1, 1, 0), 2.065514e-2, 1e-6);
    frame_free(&f);
}
END_TEST

/* Recalculated only. */
START_TEST(pitched_portal_on_fixed_feet)
{
    frame f = frame_solve(pitched(true));
    ck_close(H(&f, 0), 86.75278, 1e-6);
    ck_close(fabs(frame_M(&f, 0, 0, 0)), 196.9539, 1e-6);
    ck_close(fabs(frame_M(&f, 0, 0, 5)), 236.8100, 1e-6);
    ck_close(fabs(frame_M(&f, 0, 1, hypot(10, 2))), 89.6844, 1e-6);
    frame_free(&f);
}
END_TEST

/* With areas as they are built nothing is left out: exact answers are those of element matrices. */
START_TEST(with_ordinary_areas_portals_agree_with_element_matrices)
{
    for (int i = 0; i < 6; i++)
        for (int load = 0; load <= 5; load++) {
            portal p = *frames(i / 2);
            p.is_fixed = i % 2 == 1;
            p.A = 5e-3;
            sct_model *m = portal_model(&p);
            load_example(m, &p, load);
            frame f = frame_solve(m);
            dense_frame d = dense_solve(f.s.st, f.s.A, 0);
            for (int j = 0; j < 4; j++)
                for (int n = 0; n < 6; n++)
                    ck_assert_double_eq_tol(frame_moved(&f, 0, j, n), d.f[6 * j + n], 1e-9 * fabs(d.f[6 * B]) + 1e-15);
            for (int e = 0; e < 3; e++) {
                double ends[2][6];
                dense_end_forces(&d, e, 0, ends);
                ck_assert_double_eq_tol(frame_M(&f, 0, e, 0), ends[0][3], 1e-9 * 100);
                ck_assert_double_eq_tol(frame_M(&f, 0, e, f.s.st->bars[e].L), ends[1][3], 1e-9 * 100);
            }
            dense_free(&d);
            frame_free(&f);
        }
}
END_TEST

int main(void)
{
    Suite *s = suite_create("portals");
    TCase *c = tcase_create("portals");
    tcase_add_test(c, uniform_load_on_the_beam);
    tcase_add_test(c, point_load_in_the_middle_of_the_beam);
    tcase_add_test(c, sway_force_at_a_knee);
    tcase_add_test(c, uniform_wind_on_the_left_column);
    tcase_add_test(c, heated_beam);
    tcase_add_test(c, examples_have_their_printed_numbers);
    tcase_add_test(c, a_published_portal);
    tcase_add_test(c, two_bays);
    tcase_add_test(c, pitched_portal_on_pinned_feet);
    tcase_add_test(c, pitched_portal_on_fixed_feet);
    tcase_add_test(c, with_ordinary_areas_portals_agree_with_element_matrices);
    suite_add_tcase(s, c);
    return run_suite(s);
}

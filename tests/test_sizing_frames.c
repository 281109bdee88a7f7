/* Sizing of frames: derivatives of the problem, a portal with published section relations, the demo frames. */
#include <math.h>

#include "base/text.h"
#include "sized.h"

/* ---- derivatives ----------------------------------------------------------------------------------------------------
 */

/* A two-bay frame with a bit of everything: free areas with relations of their own, a hinge, a sprung foot, an elastic
 * support, self-weight, loads between joints of several kinds, a gradient, bow of members and of a run, drift. */
static const char FRAME[] =
    "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\" },"
    "\"materials\": { \"S\": { \"E\": 210000, \"density\": \"7850 kg/m3\", \"yield\": 355, \"expansion\": \"12e-6 "
    "1/K\","
    " \"allowable\": { \"tension\": 200, \"compression\": 190 } } },"
    "\"joints\": { \"A\": { \"at\": [0, 0], \"support\": \"fixed\" }, \"B\": { \"at\": [6, 0], \"support\": [\"x\", "
    "\"y\"] },"
    " \"C\": { \"at\": [11, 0.5], \"support\": [\"x\"], \"springs\": { \"y\": \"20000 kN/m\" } }, \"D\": { \"at\": [0, "
    "4] },"
    " \"E\": { \"at\": [6, 4.5] }, \"F\": { \"at\": [11, 4.2] } },"
    "\"groups\": { \"columns\": { \"material\": \"S\", \"area\": { \"at_least\": \"20 cm2\", \"at_most\": \"300 cm2\" "
    "},"
    " \"shape\": { \"kind\": \"square tube\", \"width_to_wall\": 25 } },"
    " \"beams\": { \"material\": \"S\", \"area\": { \"at_least\": \"20 cm2\", \"at_most\": \"300 cm2\" },"
    " \"second_moment\": { \"at\": \"84.5 cm2\", \"value\": \"23130 cm4\", \"power\": 2.3 }, \"section_modulus\": { \"at\": \"84.5 cm2\", \"value\": \"1160 cm3\", "
    "\"power\": 1.3 } },"
    " \"brace\": { \"material\": \"S\", \"area\": { \"at_least\": \"2 cm2\", \"at_most\": \"60 cm2\" }, "
    "\"second_moment\": { \"c\": 3 } } },"
    "\"members\": { \"a\": { \"from\": \"A\", \"to\": \"D\", \"group\": \"columns\", \"ends\": [{ \"in_plane\": \"9000 "
    "kN m/rad\" }, \"fixed\"] },"
    " \"b\": { \"from\": \"B\", \"to\": \"E\", \"group\": \"columns\", \"ends\": [\"pinned\", \"fixed\"] },"
    " \"c\": { \"from\": \"C\", \"to\": \"F\", \"group\": \"columns\", \"ends\": \"fixed\" },"
    " \"top\": { \"through\": [\"D\", \"E\", \"F\"], \"group\": \"beams\", \"ends\": [\"fixed\", \"pinned\"] },"
    " \"x\": { \"from\": \"A\", \"to\": \"E\", \"group\": \"brace\" } },"
    "\"cases\": { \"G\": { \"self_weight\": 1.1, \"loads\": [ { \"on\": \"top\", \"line\": [0, -12] },"
    " { \"on\": \"top 1\", \"at\": \"2 m\", \"force\": [0, -30], \"moment\": \"8 kN m\" } ] },"
    " \"W\": { \"joints\": { \"D\": [14, 0] }, \"loads\": [ { \"on\": \"a\", \"line\": [[2, 0], [5, 0]], \"from\": \"1 "
    "m\" },"
    " { \"on\": \"top 2\", \"line\": [0, 3], \"axes\": \"member\" } ] },"
    " \"T\": { \"members\": { \"top 1\": { \"gradient\": \"60 K/m\", \"temperature\": \"15 K\" } } } },"
    "\"combinations\": { \"1\": { \"for\": \"allowable\", \"sum\": { \"G\": 1, \"T\": 1 } },"
    " \"2\": { \"for\": \"allowable\", \"sum\": { \"G\": 1, \"W\": 1 } }, \"3\": { \"for\": \"allowable\", \"sum\": { "
    "\"G\": 0.7, \"W\": -1.2, \"T\": -0.5 } } },"
    "\"limits\": { \"buckling\": { \"by\": \"Euler and Johnson\", \"safety\": 1.8 },"
    " \"deflection\": [ { \"joints\": [\"E\"], \"direction\": \"y\", \"at_most\": \"10 mm\" } ],"
    " \"drift\": [ { \"along\": [\"A\", \"D\"], \"direction\": \"x\", \"at_most\": \"h/200\" } ],"
    " \"bow\": [ { \"members\": [\"top 1\", \"a\"], \"at_most\": \"L/300\" }, { \"members\": [\"top\"], \"at_most\": "
    "\"L/400\" } ] } }";

/* The same with more limits; free for free(). */
static char *frame_with(const char *limits)
{
    static const char BEFORE[] = "\"buckling\": { \"by\"";
    const char *at = strstr(FRAME, BEFORE);
    sct_text t = {0};
    sct_text_format(&t, "%.*s%s, %s", (int)(at - FRAME), FRAME, limits, at);
    return sct_text_take(&t, NULL);
}

/* Load factors, their amplification of moments, and the frequency; no curvature is claimed for these. */
START_TEST(derivatives_of_limits_on_the_whole_agree_with_differences)
{
    static const char *const LIMITS[] = {
        "\"critical_factor\": { \"at_least\": 10 }",
        "\"frequency\": { \"at_least\": \"4 Hz\", \"mass\": { \"G\": 1 } }",
        "\"amplify_sway\": true",
    };
    char *text = frame_with(LIMITS[_i]);
    sct_model *model = parse(text);
    for (unsigned seed = 1; seed <= 3; seed++) check_gradients(model, seed);
    sct_model_free(model);
    free(text);
}
END_TEST

START_TEST(derivatives_of_frames_agree_with_differences)
{
    sct_model *model = parse(FRAME);
    for (unsigned seed = 1; seed <= 4; seed++) check_derivatives(model, false, seed, 1e-5);
    sct_model_free(model);
}
END_TEST

START_TEST(derivatives_of_frames_on_ladders_agree_with_differences)
{
    static const char *const FILES[] = {"models/demo_frame.json", "models/demo_chords.json"};
    sct_model *model = read_file(FILES[_i]);
    for (unsigned seed = 1; seed <= 2; seed++) check_derivatives(model, false, seed, 1e-4); /* curves have knots */
    sct_model_free(model);
}
END_TEST

/* ---- a portal with section relations --------------------------------------------------------------------------------
 */

/* Fixed-base portal of 480 by 180 in. Wide-flange relations of D. M. Brown and A. H.-S. Ang, Structural optimization by
 * nonlinear programming, J. Struct. Div. ASCE 92, 1966 (from memory): A = 0.465 sqrt(I), S = sqrt(60.6 I + 84100) - 290
 * for I <= 9000 in4. Loads and limits are ours; optima found independently by SLSQP from six random starts. */
static sct_model *portal(double sway)
{
    sct_text t = {0};
    sct_text_add(
        &t, "{ \"scantling\": 1, \"dimensions\": 2, \"units\": { \"length\": \"in\", \"force\": \"kip\", \"stress\": "
            "\"ksi\", \"density\": \"lb/in3\" }, \"materials\": { \"S\": { \"E\": 30000, \"density\": 0.2836, "
            "\"allowable\": { \"tension\": 24, \"compression\": 24 } } }, \"families\": { \"W\": { \"sections\": {");
    enum { SECTIONS = 240 };
    for (int k = 0; k < SECTIONS; k++) {
        const double I = 100.0 * pow(90.0, k / (SECTIONS - 1.0));
        sct_text_format(&t, "%s \"S%d\": { \"A\": %.17g, \"I\": %.17g, \"W\": %.17g }", k > 0 ? "," : "", k,
                        0.465 * sqrt(I), I, sqrt(60.6 * I + 84100.0) - 290.0);
    }
    sct_text_format(
        &t,
        "} } }, \"groups\": { \"columns\": { \"material\": \"S\", \"family\": \"W\" }, \"beam\": { \"material\": "
        "\"S\", "
        "\"family\": \"W\" } }, \"joints\": { \"A\": { \"at\": [0, 0], \"support\": \"fixed\" }, \"B\": { \"at\": [0, "
        "180] "
        "}, \"C\": { \"at\": [480, 180] }, \"D\": { \"at\": [480, 0], \"support\": \"fixed\" } }, \"members\": { "
        "\"1\": { "
        "\"from\": \"A\", \"to\": \"B\", \"group\": \"columns\", \"ends\": \"fixed\" }, \"2\": { \"from\": \"B\", "
        "\"to\": "
        "\"C\", \"group\": \"beam\", \"ends\": \"fixed\" }, \"3\": { \"from\": \"D\", \"to\": \"C\", \"group\": "
        "\"columns\", \"ends\": \"fixed\" } }, \"cases\": { \"v\": { \"loads\": [ { \"on\": \"2\", \"line\": [0, "
        "-0.25] } ] "
        "}, \"h\": { \"joints\": { \"B\": [20, 0] }, \"loads\": [ { \"on\": \"2\", \"line\": [0, -0.10] } ] } }, "
        "\"combinations\": { \"v\": { \"for\": \"allowable\", \"sum\": { \"v\": 1 } }, \"h\": { \"for\": "
        "\"allowable\", "
        "\"sum\": { \"h\": 1 } } }, \"limits\": { \"buckling\": { \"by\": \"none\" }, \"deflection\": [ { \"joints\": "
        "[\"B\"], \"direction\": \"x\", \"at_most\": %g } ] } }",
        sway);
    char *text = sct_text_take(&t, NULL);
    sct_model *model = parse(text);
    free(text);
    return model;
}

START_TEST(a_portal_with_section_relations_reaches_the_published_mass)
{
    static const double SWAY[] = {0.15, 0.10, 0.06}, MASS[] = {5343.0873, 6126.0554, 7659.9245}; /* [in], [lb] */
    static const double POUND = 0.45359237;
    sct_model *model = portal(SWAY[_i]);
    sct_settings settings = sct_settings_defaults();
    settings.starts = 23;
    sct_result *r = size_with(model, &settings);
    int worst = 0;
    for (int k = 0; k < r->n_starts; k++) {
        ck_assert_int_eq(r->starts[k].outcome, SCT_OPTIMUM);
        ck_assert_double_le(r->starts[k].violation, 1e-6);
        ck_close(r->starts[k].mass, MASS[_i] * POUND, 1e-5);
        if (r->starts[k].analyses > worst) worst = r->starts[k].analyses;
    }
    ck_assert_int_le(worst, 15);
    ck_assert(r->kept && r->mass >= r->mass_continuous);
    printf("measured: portal, sway limit %.2f in: 23 starts, worst %d analyses\n", SWAY[_i], worst);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

/* ---- the demos
 * ------------------------------------------------------------------------------------------------------- */

/* A plane or space frame of bays (by bays) and storeys, rigid throughout, fixed feet; columns and beams in groups of
 * two storeys each. Loads on every beam, wind at every floor. Invented. */
static void write_joints(int dimensions, int bays, int rows, int storeys, sct_text *t)
{
    for (int z = 0; z <= storeys; z++)
        for (int y = 0; y <= rows; y++)
            for (int x = 0; x <= bays; x++) {
                sct_text_format(t, "%s \"J%d.%d.%d\": { \"at\": [%g, ", z + y + x > 0 ? "," : "", x, y, z, 6.0 * x);
                if (dimensions == 3) sct_text_format(t, "%g, ", 5.0 * y);
                sct_text_format(t, "%g]%s }", 3.5 * z, z == 0 ? ", \"support\": \"fixed\"" : "");
            }
}

static void write_groups(int tiers, sct_text *t)
{
    static const char GROUP[] =
        "%s \"%s %d\": { \"material\": \"S\", \"area\": { \"at_least\": \"20 cm2\", \"at_most\": \"900 cm2\" "
        "}, \"shape\": { \"kind\": \"%s\", \"%s\": %d } }";
    for (int k = 0; k < tiers; k++) {
        sct_text_format(t, GROUP, k > 0 ? "," : "", "columns", k, "square tube", "width_to_wall", 24);
        sct_text_format(t, GROUP, ",", "beams", k, "rectangle", "depth_to_width", 3);
    }
}

static void write_members(int dimensions, int bays, int rows, int storeys, sct_text *t)
{
    int n = 0;
    for (int z = 1; z <= storeys; z++)
        for (int y = 0; y <= rows; y++)
            for (int x = 0; x <= bays; x++) {
                sct_text_format(
                    t,
                    "%s \"C%d.%d.%d\": { \"from\": \"J%d.%d.%d\", \"to\": \"J%d.%d.%d\", \"group\": \"columns %d\", "
                    "\"ends\": \"fixed\" }",
                    n++ > 0 ? "," : "", x, y, z, x, y, z - 1, x, y, z, (z - 1) / 2);
                for (int along = 0; along < dimensions - 1; along++) {
                    const int to_x = x + (along == 0), to_y = y + (along == 1);
                    if (to_x > bays || to_y > rows) continue;
                    sct_text_format(
                        t,
                        ", \"B%d.%d.%d.%d\": { \"from\": \"J%d.%d.%d\", \"to\": \"J%d.%d.%d\", \"group\": \"beams "
                        "%d\", \"ends\": \"fixed\" }",
                        along, x, y, z, x, y, z, to_x, to_y, z, (z - 1) / 2);
                }
            }
}

static void write_cases(int dimensions, int bays, int rows, int storeys, sct_text *t)
{
    int n = 0;
    sct_text_add(t, "\"G\": { \"self_weight\": true, \"loads\": [");
    for (int z = 1; z <= storeys; z++)
        for (int y = 0; y <= rows; y++)
            for (int x = 0; x < bays; x++)
                sct_text_format(t, "%s { \"on\": \"B0.%d.%d.%d\", \"line\": %s }", n++ > 0 ? "," : "", x, y, z,
                                dimensions == 3 ? "[0, 0, -18]" : "[0, -18]");
    sct_text_add(t, "] }, \"W\": { \"joints\": {");
    for (int z = 1; z <= storeys; z++)
        sct_text_format(t, "%s \"J0.0.%d\": [%d, 0%s]", z > 1 ? "," : "", z, 12 + z, dimensions == 3 ? ", 0" : "");
    sct_text_add(t, " } }");
}

static sct_model *building(int dimensions, int bays, int storeys)
{
    const int rows = dimensions == 3 ? bays : 0;
    sct_text t = {0};
    sct_text_format(
        &t,
        "{ \"scantling\": 1, \"dimensions\": %d, \"units\": { \"length\": \"m\", \"force\": \"kN\", \"stress\": "
        "\"MPa\" "
        "}, \"materials\": { \"S\": { \"E\": 210000, \"G\": 81000, \"density\": \"7850 kg/m3\", \"yield\": 355, "
        "\"allowable\": { \"tension\": 210, \"compression\": 210 } } }, \"joints\": {",
        dimensions);
    write_joints(dimensions, bays, rows, storeys, &t);
    sct_text_add(&t, " }, \"groups\": {");
    write_groups((storeys + 1) / 2, &t);
    sct_text_add(&t, " }, \"members\": {");
    write_members(dimensions, bays, rows, storeys, &t);
    sct_text_add(&t, " }, \"cases\": {");
    write_cases(dimensions, bays, rows, storeys, &t);
    sct_text_add(
        &t, " }, \"combinations\": { \"G\": { \"for\": \"allowable\", \"sum\": { \"G\": 1 } }, \"GW\": { \"for\": "
            "\"allowable\", \"sum\": { \"G\": 1, \"W\": 1 } } }, \"limits\": { \"buckling\": { \"by\": \"Euler and "
            "Johnson\", \"safety\": 1.8 }, \"drift\": [ { \"along\": [");
    for (int z = 0; z <= storeys; z++) sct_text_format(&t, "%s\"J0.0.%d\"", z > 0 ? ", " : "", z);
    sct_text_add(&t, "], \"direction\": \"x\", \"at_most\": \"h/300\" } ] } }");
    char *text = sct_text_take(&t, NULL);
    sct_model *model = parse(text);
    free(text);
    return model;
}

START_TEST(frames_are_sized_in_at_most_fifteen_analyses)
{
    static const int SIZES[][3] = {{2, 1, 1}, {2, 2, 3},  {2, 4, 5}, {3, 1, 2},
                                   {2, 6, 8}, {2, 9, 15}, {3, 2, 2}, {3, 2, 4}};
    sct_model *model = building(SIZES[_i][0], SIZES[_i][1], SIZES[_i][2]);
    sct_settings settings = sct_settings_defaults();
    settings.starts = 23;
    sct_result *r = size_with(model, &settings);
    int worst = 0;
    for (int k = 0; k < r->n_starts; k++) {
        ck_assert_int_eq(r->starts[k].outcome, SCT_OPTIMUM);
        if (r->starts[k].analyses > worst) worst = r->starts[k].analyses;
    }
    printf(
        "measured: frame in %d dimensions, %d bays, %d storeys, %d members, %d groups: 23 starts, worst %d analyses\n",
        SIZES[_i][0], SIZES[_i][1], SIZES[_i][2], r->n_members, r->n_groups, worst);
    ck_assert_int_le(worst, 15);
    ck_assert(r->kept || r->n_criticals > 0);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

START_TEST(demo_frames_are_sized_from_every_start)
{
    static const char *const FILES[] = {"models/demo_frame.json", "models/demo_chords.json"};
    sct_model *model = read_file(FILES[_i]);
    sct_settings settings = sct_settings_defaults();
    settings.starts = 23;
    sct_result *r = size_with(model, &settings);
    for (int k = 0; k < r->n_starts; k++) {
        ck_assert_int_eq(r->starts[k].outcome, SCT_OPTIMUM);
        ck_close(r->starts[k].mass, r->mass_continuous, 1e-5);
        ck_assert_int_le(r->starts[k].analyses, 15);
    }
    ck_assert(r->kept && r->has_bent);
    ck_assert_double_le(r->utilisation_at_most, 1.0);
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

/* Stations are the member: they begin and end at its joints, M' = V, and the extremes told of the member are among
 * them. */
START_TEST(stations_tell_the_whole_member)
{
    sct_model *model = parse(FRAME);
    sct_settings settings = sct_settings_defaults();
    sct_result *r = size_with(model, &settings);
    for (int e = 0; e < r->n_members; e++) {
        const sct_member_result *m = &r->members[e];
        double most = 0.0;
        for (int c = 0; c < r->n_combinations; c++) {
            sct_station *s = NULL;
            int n = 0;
            ck_assert_int_eq(sct_result_stations(r, c, e, 3, &s, &n), SCT_OK);
            ck_assert_int_ge(n, 2);
            ck_assert_double_eq(s[0].x, 0.0);
            ck_close(s[n - 1].x, m->L, 1e-15);
            const double *u = r->u + 3 * (c * r->n_joints + m->to);
            for (int i = 0; i < 2; i++) ck_assert_double_eq_tol(s[n - 1].d[i], u[i], 1e-12);
            const double *ends = r->ends + (size_t)(c * r->n_members + e) * 12;
            ck_assert_double_eq(s[0].M[0], ends[3]);
            ck_assert_double_eq(s[n - 1].M[0], ends[9]);
            for (int k = 0; k < n; k++) {
                if (fabs(s[k].M[0]) > fabs(most)) most = s[k].M[0];
                if (k == 0 || s[k].x == s[k - 1].x) continue;
                const double h = s[k].x - s[k - 1].x; /* V is linear or quadratic between: the trapezoid is near */
                ck_assert_double_eq_tol(s[k].M[0] - s[k - 1].M[0], h * (s[k].V[0] + s[k - 1].V[0]) / 2,
                                        1e-9 * fabs(m->M_most[0]) + 500.0 * h * h * h);
            }
            free(s);
        }
        ck_assert_double_eq(most, m->M_most[0]);
    }
    sct_result_free(r);
    sct_model_free(model);
}
END_TEST

/* A slender two-storey frame sways: a limit on the load factor makes it heavier and holds to the end. */
START_TEST(a_limit_on_the_load_factor_is_kept)
{
    static const char *const LIMITS[] = {
        "\"slenderness\": { \"any\": 300 }",
        "\"slenderness\": { \"any\": 300 }, \"critical_factor\": { \"at_least\": 25 }"};
    double mass[2];
    for (int k = 0; k < 2; k++) {
        char *text = frame_with(LIMITS[k]);
        sct_model *model = parse(text);
        sct_result *r = size_with(model, NULL);
        mass[k] = r->mass;
        ck_assert(r->kept);
        ck_assert_int_eq(r->n_criticals, 3);
        for (int c = 0; c < 3; c++) {
            ck_assert(r->criticals[c].is_proven);
            if (k == 1) ck_assert_double_ge(r->criticals[c].factor, 25.0);
        }
        sct_result_free(r);
        sct_model_free(model);
        free(text);
    }
    ck_assert_double_gt(mass[1], 1.01 * mass[0]);
}
END_TEST

int main(void)
{
    Suite *s = suite_create("sizing of frames");
    TCase *c = tcase_create("frames");
    tcase_add_test(c, derivatives_of_frames_agree_with_differences);
    tcase_add_loop_test(c, derivatives_of_limits_on_the_whole_agree_with_differences, 0, 3);
    tcase_add_loop_test(c, derivatives_of_frames_on_ladders_agree_with_differences, 0, 2);
    tcase_add_loop_test(c, a_portal_with_section_relations_reaches_the_published_mass, 0, 3);
    tcase_add_loop_test(c, frames_are_sized_in_at_most_fifteen_analyses, 0, 8);
    tcase_add_loop_test(c, demo_frames_are_sized_from_every_start, 0, 2);
    tcase_add_test(c, a_limit_on_the_load_factor_is_kept);
    tcase_add_test(c, stations_tell_the_whole_member);
    suite_add_tcase(s, c);
    return run_suite(s);
}

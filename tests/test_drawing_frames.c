/* Drawings and explanations of frames, from model text to the page: closed forms of elementary beam theory. */
#include "support.h"

#include <string.h>

#include "base/text.h"
#include "count_memory.h"
#include "scantling.h"
#include "svg_read.h"

/* ---- models ------------------------------------------------------------------------------------------------------ */

#define HEAD                                                                                                           \
    "{'scantling': 1, 'title': 'Beams', 'units': {'length': 'm', 'force': 'kN', 'stress': 'MPa'},\n"                   \
    " 'materials': {'S': {'E': 210000, 'G': 81000, 'density': '7850 kg/m3', 'yield': 235,\n"                           \
    "  'allowable': {'tension': 150, 'compression': 150}}},\n"                                                         \
    " 'families': {'own': {'sections': {'H': {'A': '5000 mm2', 'I': {'in_plane': '5e7 mm4', 'out_of_plane': '1e7 "     \
    "mm4'},\n"                                                                                                         \
    "  'W': {'in_plane': '4e5 mm3', 'out_of_plane': '2e5 mm3'}, 'J': '4e5 mm4', 'depth': '250 mm'}}}},\n"              \
    " 'groups': {'beams': {'material': 'S', 'family': 'own', 'section': 'H'}},\n"
#define LIMITS " 'limits': {'buckling': {'by': 'Euler', 'safety': 2}"

/* Built in at both ends, 6 m, 12 kN/m: q L2/12 = 36 kNm at the ends, q L2/24 = 18 kNm in the middle, q L/2 = 36 kN. */
static const char BUILT_IN[] =
    HEAD " 'dimensions': 2, 'joints': {'A': {'at': [0, 0], 'support': 'fixed'}, 'B': {'at': [6, 0], 'support': "
         "'fixed'}},\n"
         " 'members': {'b': {'from': 'A', 'to': 'B', 'group': 'beams', 'ends': 'fixed'}},\n"
         " 'cases': {'G': {'loads': [{'on': 'b', 'line': [0, -12]}]}, 'U': {'loads': [{'on': 'b', 'line': [0, 5]}]}},\n"
         " 'combinations': {'full': {'for': 'allowable', 'sum': {'G': 1}}, 'up': {'for': 'allowable', 'sum': {'U': "
         "1}}},\n" LIMITS ", 'bow': [{'members': ['b'], 'axis': 'in_plane', 'at_most': '10 mm'}]}}\n";

/* A storey with a release, sprung ends, elastic supports, a guide, and every kind of load. */
static const char STOREY[] =
    HEAD " 'dimensions': 2, 'joints': {'A': {'at': [0, 0], 'support': 'fixed'}, 'B': {'at': [5, 0], 'support': ['x', "
         "'y'],\n"
         "  'springs': {'rotation': '5000 kN m/rad'}}, 'C': {'at': [9, 0], 'support': ['x'], 'springs': {'y': '20000 "
         "kN/m'}},\n"
         "  'D': {'at': [13, 0], 'support': ['y', 'rotation']}, 'a': {'at': [0, 4]}, 'b': {'at': [5, 4]}, 'c': {'at': "
         "[9, 4]},\n"
         "  'd': {'at': [13, 4]}},\n"
         " 'members': {'C1': {'from': 'A', 'to': 'a', 'group': 'beams', 'ends': 'fixed'}, 'C2': {'from': 'B', 'to': "
         "'b',\n"
         "  'group': 'beams', 'ends': 'fixed'}, 'C3': {'from': 'C', 'to': 'c', 'group': 'beams', 'ends': 'fixed'},\n"
         "  'C4': {'from': 'D', 'to': 'd', 'group': 'beams', 'ends': 'fixed'},\n"
         "  'B1': {'from': 'a', 'to': 'b', 'group': 'beams', 'ends': 'fixed'},\n"
         "  'B2': {'from': 'b', 'to': 'c', 'group': 'beams', 'ends': ['fixed', 'pinned']},\n"
         "  'B3': {'from': 'c', 'to': 'd', 'group': 'beams', 'ends': ['fixed', {'in_plane': '9000 kN m/rad'}]}},\n"
         " 'cases': {'G': {'self_weight': true, 'joints': {'a': [7, 0]}, 'moments': {'d': '15 kN m'}, 'loads': [\n"
         "   {'on': ['B1', 'B2'], 'line': [0, -12]}, {'on': 'B3', 'line': [[0, -3], [0, -9]]},\n"
         "   {'on': 'B1', 'at': 2, 'force': [0, -21]}, {'on': 'C4', 'line': [1.5, 0]}]}},\n"
         " 'combinations': {'full': {'for': 'allowable', 'sum': {'G': 1}}},\n" LIMITS
         ", 'drift': [{'along': ['A', 'a'], 'direction': 'x', 'at_most': 'h/300'}]}}\n";

/* A portal of tubes in space with one pinned foot. */
static const char SPACE[] =
    HEAD " 'dimensions': 3, 'joints': {'A': {'at': [0, 0, 0], 'support': 'fixed'}, 'B': {'at': [6, 0, 0], 'support': "
         "'fixed'},\n"
         "  'C': {'at': [0, 4, 0], 'support': ['x', 'y', 'z']}, 'a': {'at': [0, 0, 3]}, 'b': {'at': [6, 0, 3]}, 'c': "
         "{'at': [0, 4, 3]}},\n"
         " 'members': {'P': {'from': 'A', 'to': 'a', 'group': 'beams', 'ends': 'fixed'}, 'Q': {'from': 'B', 'to': "
         "'b', 'group':\n"
         "  'beams', 'ends': 'fixed'}, 'R': {'from': 'C', 'to': 'c', 'group': 'beams', 'ends': 'fixed'},\n"
         "  'X': {'from': 'a', 'to': 'b', 'group': 'beams', 'ends': 'fixed'}, 'Y': {'from': 'a', 'to': 'c', 'group': "
         "'beams', 'ends': 'fixed'}},\n"
         " 'cases': {'G': {'loads': [{'on': ['X', 'Y'], 'line': [0, 0, -8]}, {'on': 'P', 'line': [0, 2, 0]}]}},\n"
         " 'combinations': {'full': {'for': 'allowable', 'sum': {'G': 1}}},\n" LIMITS "}}\n";

typedef struct checked {
    sct_issues *issues;
    sct_model *model;
    sct_result *result;
} checked;

static checked check(const char *model)
{
    char text[6000];
    checked c = {.issues = sct_issues_new()};
    ck_assert(strlen(model) < sizeof text);
    strcpy(text, model);
    for (char *p = text; *p != '\0'; p++)
        if (*p == '\'') *p = '"';
    sct_status status = sct_model_parse("f", text, strlen(text), &c.model, c.issues);
    if (status == SCT_OK) status = sct_check(c.model, NULL, &c.result, c.issues);
    ck_assert_msg(status == SCT_OK, "%s",
                  sct_issues_count(c.issues) > 0 ? sct_issues_get(c.issues, 0)->message : "refused");
    return c;
}

static void checked_free(checked *c)
{
    sct_result_free(c->result);
    sct_model_free(c->model);
    sct_issues_free(c->issues);
}

static sct_text draw(const checked *c, const sct_write_options *options)
{
    sct_text out = {0};
    ck_assert_int_eq(sct_write(c->result, SCT_DRAWING_SVG, options, &out.data, &out.size), SCT_OK);
    return out;
}

static sct_text draw_model(const char *model, const sct_write_options *options)
{
    checked c = check(model);
    const sct_text svg = draw(&c, options);
    checked_free(&c);
    return svg;
}

/* Circles of this radius. */
static int count_circles(const sct_text *svg, const char *radius)
{
    int n = 0;
    for (const char *p = svg->data; (p = strstr(p, "<circle")) != NULL; p++) {
        const char *r = strstr(p, " r=\"");
        n += r != NULL && strncmp(r + 4, radius, strlen(radius)) == 0 && r[4 + strlen(radius)] == '"';
    }
    return n;
}

static const sct_write_options EVERYTHING = {.combination = 0,
                                             .draw_loads = true,
                                             .draw_deflected = true,
                                             .draw_moment = SCT_DIAGRAM_OF_COMBINATION,
                                             .draw_shear = SCT_DIAGRAM_ENVELOPE,
                                             .draw_axial = SCT_DIAGRAM_OF_COMBINATION};

/* ---- drawings ---------------------------------------------------------------------------------------------------- */

START_TEST(every_frame_is_well_formed_with_labels_apart)
{
    static const char *const MODELS[] = {BUILT_IN, STOREY, SPACE};
    const sct_write_options OPTIONS[] = {
        {.combination = -1},
        {.combination = 0, .draw_loads = true},
        {.combination = 0, .draw_moment = SCT_DIAGRAM_ENVELOPE, .draw_axial = SCT_DIAGRAM_ENVELOPE},
        {.combination = 0, .draw_shear = SCT_DIAGRAM_OF_COMBINATION, .draw_deflected = true},
        EVERYTHING,
    };
    for (size_t i = 0; i < sizeof MODELS / sizeof *MODELS; i++)
        for (size_t k = 0; k < sizeof OPTIONS / sizeof *OPTIONS; k++) {
            sct_text svg = draw_model(MODELS[i], &OPTIONS[k]), again = draw_model(MODELS[i], &OPTIONS[k]);
            check_well_formed(&svg);
            check_labels(&svg);
            check_decimals(&svg);
            ck_assert(again.size == svg.size && memcmp(again.data, svg.data, svg.size) == 0);
            sct_text_free(&again);
            sct_text_free(&svg);
        }
}
END_TEST

START_TEST(rigid_joints_have_no_ring_and_releases_stand_on_their_members)
{
    sct_text svg = draw_model(STOREY, NULL);
    ck_assert_int_eq(count_circles(&svg, "2.8"), 0);
    ck_assert_int_eq(count_circles(&svg, "3.6"), 1);
    ck_assert(holds(&svg, "A ring on a member: its end turns freely."));
    ck_assert(holds(&svg, "A zigzag in a member: its end is held by a spring."));
    sct_text_free(&svg);
}
END_TEST

START_TEST(elastic_supports_and_sprung_ends_tell_their_stiffness)
{
    sct_text svg = draw_model(STOREY, NULL);
    ck_assert(holds(&svg, ">5000\xE2\x80\xAFkNm/rad<"));
    ck_assert(holds(&svg, ">9000\xE2\x80\xAFkNm/rad<"));
    ck_assert(holds(&svg, ">20\xE2\x80\xAF"
                          "000\xE2\x80\xAFkN/m<"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(loads_along_members_are_drawn_with_their_values)
{
    const sct_write_options options = {.combination = 0, .draw_loads = true};
    sct_text svg = draw_model(STOREY, &options);
    ck_assert(holds(&svg, ">12.0\xE2\x80\xAFkN/m<"));
    ck_assert(holds(&svg, ">3.0 to 9.0\xE2\x80\xAFkN/m<"));
    ck_assert(holds(&svg, ">21.0<") && holds(&svg, ">7.0<") && holds(&svg, ">15.0\xE2\x80\xAFkNm<"));
    ck_assert(holds(&svg, "own weight not drawn"));
    sct_text_free(&svg);
}
END_TEST

/* The y of the dot on the curve nearest to x on the sheet, among those behind `from`. */
static double dot_near(const char *from, double x)
{
    double nearest = INFINITY, y = NAN;
    for (const char *p = from; (p = strstr(p, "<circle")) != NULL; p++) {
        if (attribute_of(p, " r=\"") != 2.2) continue;
        const double off = fabs(attribute_of(p, "cx=\"") - x);
        if (off >= nearest) continue;
        nearest = off;
        y = attribute_of(p, "cy=\"");
    }
    return y;
}

START_TEST(moments_stand_on_the_side_in_tension_with_the_values_of_closed_forms)
{
    const sct_write_options options = {.combination = 0, .draw_moment = SCT_DIAGRAM_OF_COMBINATION};
    sct_text svg = draw_model(BUILT_IN, &options);
    ck_assert(holds(&svg, "Bending moment (full), kNm, on the side in tension"));
    ck_assert(holds(&svg, ">36.0<") && holds(&svg, ">18.0<") && holds(&svg, ">at 3.00\xE2\x80\xAFm<"));
    const char *figure = strstr(svg.data, "Bending moment (full)");
    const char *axis = strstr(figure, "stroke-width=\"2.2\"");
    while (axis[-1] != '<') axis--;
    double end[2] = {0}, middle[2] = {0};
    /* the thick line of the member: the last of that weight is the axis, the first ones are supports */
    for (const char *p = axis; p != NULL; p = strstr(p + 1, "<line")) {
        const char *weight = strstr(p, "stroke-width=\"");
        if (weight == NULL || strncmp(weight + 14, "2.2\"", 4) != 0) continue;
        end[0] = attribute_of(p, "x1=\""), end[1] = attribute_of(p, "y1=\"");
        middle[0] = 0.5 * (end[0] + attribute_of(p, "x2=\"")), middle[1] = 0.5 * (end[1] + attribute_of(p, "y2=\""));
    }
    const double at_end = dot_near(figure, end[0]) - end[1], at_middle = dot_near(figure, middle[0]) - middle[1];
    ck_assert(at_end < 0 && at_middle > 0); /* y downwards: tension above the supports, below in the span */
    ck_assert(fabs(at_end + 2 * at_middle) < 0.05);
    sct_text_free(&svg);
}
END_TEST

START_TEST(shear_forces_carry_their_signs)
{
    const sct_write_options options = {.combination = 0, .draw_shear = SCT_DIAGRAM_OF_COMBINATION};
    sct_text svg = draw_model(BUILT_IN, &options);
    ck_assert(holds(&svg, "Shear force (full), kN") && holds(&svg, ">36.0<"));
    ck_assert(holds(&svg, ">+<") && holds(&svg, ">\xE2\x88\x92<"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(an_envelope_names_the_combinations_of_its_extremes)
{
    const sct_write_options options = {.combination = -1, .draw_moment = SCT_DIAGRAM_ENVELOPE};
    sct_text svg = draw_model(BUILT_IN, &options);
    ck_assert(holds(&svg, "Bending moment (envelope of the combinations for strength), kNm"));
    ck_assert(holds(&svg, ">36.0<") && holds(&svg, ">full<")); /* q L2/12 of 12 kN/m */
    ck_assert(holds(&svg, ">18.0<") && holds(&svg, ">at 3.00\xE2\x80\xAFm, full<"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(a_bow_stands_beside_its_limit)
{
    /* q L4/(384 E I) = 12 x 6^4/(384 x 210e6 x 5e-5) = 3.9 mm */
    const sct_write_options options = {.combination = 0, .draw_deflected = true};
    sct_text svg = draw_model(BUILT_IN, &options);
    ck_assert(holds(&svg, ">3.9 of 10.0\xE2\x80\xAFmm<") && holds(&svg, ">bow<"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(a_relative_deflection_tells_what_it_counts_against)
{
    const sct_write_options options = {.combination = 0, .draw_deflected = true};
    sct_text svg = draw_model(STOREY, &options);
    ck_assert(holds(&svg, "relative to A (h/300)"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(space_structures_are_seen_from_three_sides)
{
    sct_text svg = draw_model(SPACE, NULL);
    ck_assert(holds(&svg, "Seen along y") && holds(&svg, "Seen along \xE2\x88\x92x") && holds(&svg, "From above"));
    sct_text_free(&svg);
    const sct_write_options options = {.combination = 0, .draw_moment = SCT_DIAGRAM_OF_COMBINATION};
    svg = draw_model(SPACE, &options);
    ck_assert(holds(&svg, "Bending moment in plane (full)") && holds(&svg, "Bending moment out of plane (full)"));
    sct_text_free(&svg);
}
END_TEST

START_TEST(a_failed_allocation_is_told_or_changes_nothing)
{
    static const char *const MODELS[] = {STOREY, SPACE};
    for (size_t i = 0; COUNTS_MEMORY && i < sizeof MODELS / sizeof *MODELS; i++) {
        checked c = check(MODELS[i]);
        sct_text whole = draw(&c, &EVERYTHING);
        for (long n = 0, failed = 1; failed; n += 1 + n / 50) { /* every one at first, then fewer */
            const long before = memory.live, point = memory.requests + n;
            sct_text out = {0};
            memory.fail_at = point;
            const sct_status status = sct_write(c.result, SCT_DRAWING_SVG, &EVERYTHING, &out.data, &out.size);
            failed = memory.requests > point; /* the C library's sort may lose its scratch and sort without */
            memory.fail_at = -1;
            must(status == SCT_NO_MEMORY || (out.size == whole.size && memcmp(out.data, whole.data, out.size) == 0));
            sct_text_free(&out);
            must(memory.live == before);
        }
        sct_text_free(&whole);
        checked_free(&c);
    }
}
END_TEST

/* ---- words ------------------------------------------------------------------------------------------------------- */

START_TEST(a_bent_member_is_worked_out_so_that_each_line_recomputes)
{
    checked c = check(BUILT_IN);
    char *text = NULL;
    ck_assert_int_eq(sct_explain(c.result, "b", &text, c.issues), SCT_OK);
    /* sigma = M/W = 36e6/4e5 = 90 MPa of 150 */
    ck_assert(strstr(text, "full: N from 0 to 0 N") != NULL);
    ck_assert(strstr(text, "from -36000000 to 18000000 N mm") != NULL);
    ck_assert(strstr(text, "N/(A f) + |M_in|/(W_in f), f = 150 MPa") != NULL);
    ck_assert(strstr(text, "= 0/(5000 x 150) + 36000000/(400000 x 150)") != NULL);
    ck_assert(strstr(text, "= 0 + 0.6 = 0.60  passes") != NULL);
    ck_assert(strstr(text, "Bow, |v|/limit") != NULL && strstr(text, "3.8571/10 = 0.39  passes") != NULL);
    free(text);
    checked_free(&c);
}
END_TEST

START_TEST(the_summary_shows_where_bending_governs)
{
    checked c = check(BUILT_IN);
    char *text = NULL;
    ck_assert_int_eq(sct_write(c.result, SCT_SUMMARY, NULL, &text, NULL), SCT_OK);
    ck_assert(strstr(text, "Bending, at the place that governs") != NULL);
    ck_assert(strstr(text, "-36.0  400000  0.60") != NULL);
    ck_assert(strstr(text, "Bows") != NULL && strstr(text, "its ends") != NULL);
    ck_assert(strstr(text, "Moments of supports") != NULL && strstr(text, "+36.0  full") != NULL);
    free(text);
    checked_free(&c);
}
END_TEST

START_TEST(the_schedule_of_a_frame_has_a_record_for_each_end)
{
    checked c = check(BUILT_IN);
    char *text = NULL;
    int ends = 0, commas = -1;
    ck_assert_int_eq(sct_write(c.result, SCT_SCHEDULE_CSV, NULL, &text, NULL), SCT_OK);
    for (char *line = strtok(text, "\r\n"); line != NULL; line = strtok(NULL, "\r\n")) {
        int n = 0;
        const bool is_words = strncmp(line, "warning", 7) == 0 || strncmp(line, "caution", 7) == 0;
        for (const char *p = line; *p != '\0'; p++) n += *p == ',';
        if (commas < 0) commas = n;
        ck_assert(is_words || n == commas);
        ends += strncmp(line, "end,b,beams,", 12) == 0;
        if (strncmp(line, "end,b,beams,", 12) == 0 && strstr(line, ",full,A,") != NULL)
            ck_assert(strstr(line, ",full,A,0.0,36.0,0.0,-36.0,0.0,0.0") != NULL);
    }
    ck_assert_int_eq(ends, 4); /* two ends in two combinations */
    free(text);
    checked_free(&c);
}
END_TEST

START_TEST(the_result_file_of_a_frame_has_moments_and_ends)
{
    checked c = check(BUILT_IN);
    char *text = NULL;
    ck_assert_int_eq(sct_write(c.result, SCT_RESULT_JSON, NULL, &text, NULL), SCT_OK);
    static const char *const KEYS[] = {"\"place_m\"", "\"moment_Nm\"",     "\"largest_moment_in\"", "\"at_from\"",
                                       "\"bows\"",    "\"moments_Nm\"",    "\"rotations_rad\"",     "\"local_axes\"",
                                       "\"bow_m\"",   "\"is_bent\": true", "\"section_modulus_m3\""};
    for (size_t i = 0; i < sizeof KEYS / sizeof *KEYS; i++) ck_assert_msg(strstr(text, KEYS[i]) != NULL, "%s", KEYS[i]);
    free(text);
    checked_free(&c);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("drawing of frames");
    TCase *tests = tcase_create("drawing of frames");
    tcase_set_timeout(tests, 120);
    tcase_add_test(tests, every_frame_is_well_formed_with_labels_apart);
    tcase_add_test(tests, rigid_joints_have_no_ring_and_releases_stand_on_their_members);
    tcase_add_test(tests, elastic_supports_and_sprung_ends_tell_their_stiffness);
    tcase_add_test(tests, loads_along_members_are_drawn_with_their_values);
    tcase_add_test(tests, moments_stand_on_the_side_in_tension_with_the_values_of_closed_forms);
    tcase_add_test(tests, shear_forces_carry_their_signs);
    tcase_add_test(tests, an_envelope_names_the_combinations_of_its_extremes);
    tcase_add_test(tests, a_bow_stands_beside_its_limit);
    tcase_add_test(tests, a_relative_deflection_tells_what_it_counts_against);
    tcase_add_test(tests, space_structures_are_seen_from_three_sides);
    tcase_add_test(tests, a_failed_allocation_is_told_or_changes_nothing);
    tcase_add_test(tests, a_bent_member_is_worked_out_so_that_each_line_recomputes);
    tcase_add_test(tests, the_summary_shows_where_bending_governs);
    tcase_add_test(tests, the_schedule_of_a_frame_has_a_record_for_each_end);
    tcase_add_test(tests, the_result_file_of_a_frame_has_moments_and_ends);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}

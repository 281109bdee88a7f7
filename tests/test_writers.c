/* The writers: digits and units, the schedule, the result file, the summary, and names that bite. */
#include "support.h"

#include <string.h>

#include "model/document.h"
#include "report/csv.h"
#include "report/json.h"
#include "report/shown.h"
#include "report/summary.h"
#include "synthetic_result.h"

static synthetic made;

/* ---- digits and units ---- */

static const char *utilisation(double value)
{
    static sct_text text;
    sct_text_free(&text);
    sct_text_utilisation(&text, value);
    sct_text_add(&text, "");
    return text.data;
}

START_TEST(a_utilisation_is_rounded_up_and_never_to_a_pass)
{
    ck_assert_str_eq(utilisation(0.07), "0.07"); /* 0.07 * 100 is above 7 in doubles */
    ck_assert_str_eq(utilisation(0.9301), "0.94");
    ck_assert_str_eq(utilisation(0.991), "1.00");
    ck_assert_str_eq(utilisation(1.0), "1.00");
    ck_assert_str_eq(utilisation(nextafter(1.0, 2.0)), "1.01");
    ck_assert_str_eq(utilisation(1.004), "1.01");
    ck_assert_str_eq(utilisation(1.011), "1.02");
    ck_assert_str_eq(utilisation(0), "0.00");
    ck_assert_str_eq(utilisation(NAN), "");
    ck_assert_str_eq(utilisation(INFINITY), "inf");
}
END_TEST

static const char *shown(double value, sct_display quantity, bool us_customary)
{
    static sct_text text;
    sct_text_free(&text);
    sct_text_shown(&text, value, quantity, us_customary);
    sct_text_add(&text, "");
    return text.data;
}

START_TEST(quantities_follow_the_unit_system)
{
    ck_assert_str_eq(shown(-45.26e3, SCT_SHOWN_FORCE, false), "-45.3");
    ck_assert_str_eq(shown(-4448.2216152605, SCT_SHOWN_FORCE, true), "-1.00"); /* 1 lbf = 4.4482216152605 N exactly */
    ck_assert_str_eq(shown(0.3048, SCT_SHOWN_LENGTH, true), "1.00");
    ck_assert_str_eq(shown(0.0183, SCT_SHOWN_DEFLECTION, false), "18.3");
    ck_assert_str_eq(shown(0.0254, SCT_SHOWN_DEFLECTION, true), "1.000");
    ck_assert_str_eq(shown(6894757.2931683617, SCT_SHOWN_STRESS, true), "1.0");
    ck_assert_str_eq(shown(0.45359237, SCT_SHOWN_MASS, true), "1.00");
    ck_assert_str_eq(shown(0.45359237 / 0.3048, SCT_SHOWN_UNIT_MASS, true), "1.00");
    ck_assert_str_eq(shown(-1e-9, SCT_SHOWN_FORCE, false), "0.0");
    ck_assert_str_eq(shown(NAN, SCT_SHOWN_FORCE, false), "");
}
END_TEST

START_TEST(small_masses_and_areas_keep_their_digits)
{
    ck_assert_str_eq(shown(2.638958e-4, SCT_SHOWN_MASS, false), "0.000264");
    ck_assert_str_eq(shown(1284.4, SCT_SHOWN_MASS, false), "1284");
    ck_assert_str_eq(shown(128.44, SCT_SHOWN_MASS, false), "128.4");
    ck_assert_str_eq(shown(707.5e-6, SCT_SHOWN_AREA, false), "707.5");
    ck_assert_str_eq(shown(0.551356 * 6.4516e-4, SCT_SHOWN_AREA, true), "0.5514");
}
END_TEST

START_TEST(a_character_cut_at_the_end_is_left_out)
{
    ck_assert_uint_eq(sct_whole_characters("abc"), 3);
    ck_assert_uint_eq(sct_whole_characters(""), 0);
    ck_assert_uint_eq(sct_whole_characters("\xC3\x97"), 2);
    ck_assert_uint_eq(sct_whole_characters("ab\xC3"), 2);
    ck_assert_uint_eq(sct_whole_characters("ab\xE2\x88"), 2);
    ck_assert_uint_eq(sct_whole_characters("ab\xE2\x88\x92"), 5);
}
END_TEST

/* ---- schedule ---- */

static char *schedule(const sct_result *result)
{
    sct_text text = {0};
    ck_assert_int_eq(sct_schedule_csv(result, &text), SCT_OK);
    return sct_text_take(&text, NULL);
}

static const char HEAD[] =
    "record,mark,group,from,to,section,area [mm2],material,length [m],count,unit mass [kg/m],total mass [kg],"
    "governing combination,governing check,force [kN],max tension [kN],max tension in,max compression [kN],"
    "max compression in,Lcr in plane [m],Lcr out of plane [m],slenderness,utilisation\r\n";

START_TEST(schedule_is_the_kept_copy)
{
    char *csv = schedule(synthetic_result(&made));
    sct_text expected = {0};
    sct_text_add(&expected, HEAD);
    sct_text_add(&expected,
                 "member,R1,rafter,A,C,CHS 60.3x4,707.5,S355H,3.250,1,5.55,18.1,W,buckling in plane,-45.3,12.0,"
                 "S1,-45.3,W,3.250,1.500,164,0.94\r\n"
                 "member,R2,strut,C,B,,1000,S355H,3.000,1,7.85,23.6,S1,tension,8.0,8.0,S1,,,3.000,3.000,,0.25"
                 "\r\n"
                 "section,,,,,CHS 60.3x4,707.5,S355H,3.250,1,5.55,18.1,,,,,,,,,,,\r\n"
                 "section,,,,,,1000,S355H,3.000,1,7.85,23.6,,,,,,,,,,,\r\n"
                 "material,,,,,,,S355H,6.250,2,,41.6,,,,,,,,,,,\r\n"
                 "total,,,,,,,,6.250,2,,41.6,,,,,,,,,,,\r\n"
                 "caution,\"" SCT_CAUTION "\",,,,,,,,,,,,,,,,,,,,,\r\n");
    ck_assert_str_eq(csv, expected.data);
    free(csv);
    sct_text_free(&expected);
}
END_TEST

START_TEST(schedule_joins_groups_of_one_section)
{
    sct_result *r = synthetic_result(&made);
    made.groups[1].section = "CHS 60.3x4";
    char *csv = schedule(r);
    ck_assert_ptr_nonnull(strstr(csv, "section,,,,,CHS 60.3x4,707.5,S355H,6.250,2,5.55,41.6,"));
    free(csv);
    made.groups[1].material = "S235"; /* the same size of another steel is ordered apart */
    csv = schedule(r);
    ck_assert_ptr_nonnull(strstr(csv, "section,,,,,CHS 60.3x4,707.5,S355H,3.250,1,"));
    ck_assert_ptr_nonnull(strstr(csv, "material,,,,,,,S235,3.000,1,,23.6,"));
    free(csv);
}
END_TEST

START_TEST(schedule_in_us_customary_units)
{
    sct_result *r = synthetic_result(&made);
    r->us_customary = true;
    char *csv = schedule(r);
    ck_assert_ptr_nonnull(strstr(csv, "length [ft],count,unit mass [lb/ft],total mass [lb]"));
    ck_assert_ptr_nonnull(
        strstr(csv, ",10.66,1,3.73,39.8,W,buckling in plane,-10.17,2.71,S1,-10.17,W,10.66,4.92,164,0.94"));
    free(csv);
}
END_TEST

/* Field `index` of record `line`, read back by RFC 4180. */
static void read_field(const char *csv, int line, int index, char out[512])
{
    int row = 0, column = 0;
    bool quoted = false;
    size_t n = 0;
    for (const char *p = csv; *p != '\0'; p++) {
        const bool is_wanted = row == line && column == index;
        if (*p == '"') {
            if (quoted && p[1] == '"')
                p++;
            else {
                quoted = !quoted;
                continue;
            }
        } else if (!quoted && *p == ',') {
            column++;
            continue;
        } else if (!quoted && *p == '\r' && p[1] == '\n') {
            row++, column = 0, p++;
            continue;
        }
        if (is_wanted && n < 511) out[n++] = *p;
    }
    out[n] = '\0';
}

static int records_of_full_width(const char *csv)
{
    int rows = 0, fields = 1;
    bool quoted = false;
    for (const char *p = csv; *p != '\0'; p++) {
        if (*p == '"')
            quoted = !quoted;
        else if (!quoted && *p == ',')
            fields++;
        else if (!quoted && *p == '\r' && p[1] == '\n') {
            ck_assert_int_eq(fields, 23);
            rows++, fields = 1;
        }
    }
    return rows;
}

/* bad-name list: markup, links, formulas, separators, terminal escapes, paths, formats */
static const char *const BITING[] = {
    "<script>alert(1)</script>",
    "\"><img src=x onerror=alert(1)>",
    "</svg>",
    "]]>",
    "&lt;",
    "javascript:alert(1)",
    "=cmd|' /C calc'!A0",
    "+1",
    "-1",
    "@x",
    "\tx",
    "\rx",
    "\nx",
    "  =1+1",
    "'=x",
    "a,b;c\"d\ne",
    "a|b",
    "back\\slash \"quote\"",
    "\x1b]0;title\x07",
    "\x1b[2J",
    "x\ry\bz",
    "\xC2\x9B"
    "2J",
    "../../x",
    "/etc/x",
    "CON",
    ".",
    "%s%n",
    "%d",
    " blanks ",
    "CHS 60.3\xC3\x97"
    "4",
};
enum { N_BITING = (int)(sizeof BITING / sizeof BITING[0]) };

static sct_result *with_name(const char *name)
{
    sct_result *r = synthetic_result(&made);
    made.members[0].name = made.groups[0].name = made.groups[0].section = made.groups[0].material = name;
    made.joints[0].name = made.combinations[1] = made.deflections[0].label = name;
    r->title = name;
    snprintf(r->verdict, sizeof r->verdict, "%s", name);
    snprintf(made.prices[0].words, sizeof made.prices[0].words, "%s", name);
    return r;
}

START_TEST(biting_names_come_back_from_the_schedule)
{
    const char *name = BITING[_i];
    char field[512];
    char *csv = schedule(with_name(name));
    ck_assert_int_eq(records_of_full_width(csv), 9);
    read_field(csv, 1, 1, field);
    ck_assert_msg(strchr("=+-@\t\r\n", field[strspn(field, " ")]) == NULL, "a formula: %s", field);
    ck_assert_str_eq(field[0] == '\'' ? field + 1 : field, name);
    read_field(csv, 1, 14, field);
    ck_assert_str_eq(field, "-45.3"); /* a number that begins with '-' stays a number */
    free(csv);
}
END_TEST

/* ---- result file ---- */

static char *result_file(const sct_result *result)
{
    sct_text text = {0};
    ck_assert_int_eq(sct_result_json(result, &text), SCT_OK);
    return sct_text_take(&text, NULL);
}

static sct_document *parsed(const char *json)
{
    sct_document *document = NULL;
    sct_issues *issues = sct_issues_new();
    const sct_status status = sct_document_parse("result.json", json, strlen(json), &document, issues);
    if (status != SCT_OK) ck_abort_msg("%s in\n%s", sct_issue_line(sct_issues_get(issues, 0)), json);
    sct_issues_free(issues);
    return document;
}

static const sct_node *child(const sct_node *node, const char *key)
{
    const sct_node *found = sct_node_find(node, key);
    ck_assert_msg(found != NULL, "no key %s", key);
    return found;
}

START_TEST(result_file_begins_with_the_caution_and_the_version)
{
    char *json = result_file(synthetic_result(&made));
    const char begin[] =
        "{\n  \"caution\": \"" SCT_CAUTION "\",\n  \"format\": \"scantling result\",\n  \"version\": 1,\n";
    ck_assert_int_eq(strncmp(json, begin, strlen(begin)), 0);
    ck_assert_ptr_nonnull(strstr(json,
                                 "\n    {\"outcome\": \"optimum\", \"is_best\": true, \"mass_kg\": 41.6, \"kkt\": "
                                 "1e-09, \"violation\": 0, \"iterations\": 8, \"analyses\": 9},\n"));
    free(json);
}
END_TEST

START_TEST(result_file_holds_every_number_in_full)
{
    sct_result *r = synthetic_result(&made);
    r->mass = 0.1 + 0.2;
    char *json = result_file(r);
    sct_document *d = parsed(json);
    const sct_node *root = sct_document_root(d);
    ck_assert(sct_node_number(child(root, "mass_kg")) == 0.1 + 0.2);
    ck_assert_str_eq(sct_node_string(child(root, "outcome")), "sections");
    ck_assert_int_eq(sct_node_kind_of(child(root, "kept")), SCT_TRUE);
    const sct_node *member = sct_node_first(child(root, "members"));
    ck_assert_str_eq(sct_node_string(child(member, "from")), "A");
    ck_assert(sct_node_number(child(member, "force_N")) == -45.26e3);
    ck_assert_int_eq(sct_node_count(child(member, "forces_N")), 2);
    ck_assert_int_eq(sct_node_kind_of(child(child(sct_node_next(member), "slenderness"), "in_plane")), SCT_NULL);
    const sct_node *strut = sct_node_next(sct_node_first(child(root, "groups")));
    ck_assert_int_eq(sct_node_kind_of(child(strut, "section")), SCT_NULL);
    ck_assert_int_eq(sct_node_count(child(root, "reactions")), 2);
    const sct_node *moved =
        sct_node_first(child(sct_node_next(sct_node_next(sct_node_first(child(root, "joints")))), "displacements_m"));
    ck_assert_int_eq(sct_node_count(moved), 2);
    ck_assert(sct_node_number(sct_node_next(sct_node_first(moved))) == -0.0183);
    ck_assert_str_eq(sct_node_string(child(sct_node_first(child(root, "deflections")), "joint")), "C");
    sct_document_free(d);
    free(json);
}
END_TEST

START_TEST(biting_names_come_back_from_the_result_file)
{
    char *json = result_file(with_name(BITING[_i]));
    sct_document *d = parsed(json);
    const sct_node *root = sct_document_root(d);
    ck_assert_str_eq(sct_node_string(child(root, "title")), BITING[_i]);
    ck_assert_str_eq(sct_node_string(child(root, "verdict")), BITING[_i]);
    ck_assert_str_eq(sct_node_string(child(sct_node_first(child(root, "members")), "name")), BITING[_i]);
    sct_document_free(d);
    free(json);
}
END_TEST

START_TEST(a_verdict_cut_in_a_character_leaves_the_result_file_well_formed)
{
    sct_result *r = synthetic_result(&made);
    memset(r->verdict, 'x', sizeof r->verdict - 1);
    memcpy(r->verdict + sizeof r->verdict - 3, "\xE2\x88", 3);
    char *json = result_file(r);
    sct_document_free(parsed(json));
    free(json);
}
END_TEST

START_TEST(an_empty_result_is_written_too)
{
    const sct_result empty = {.title = "", .dimensions = 3, .mass_continuous = NAN, .kkt = NAN, .violation = NAN};
    sct_text text = {0};
    char *json = result_file(&empty), *csv = schedule(&empty);
    sct_document_free(parsed(json));
    ck_assert_int_eq(records_of_full_width(csv), 3);
    ck_assert_int_eq(sct_summary(&empty, false, &text), SCT_OK);
    sct_text_free(&text);
    free(json);
    free(csv);
}
END_TEST

/* ---- summary ---- */

static char *summary(const sct_result *result, bool colour)
{
    sct_text text = {0};
    ck_assert_int_eq(sct_summary(result, colour, &text), SCT_OK);
    return sct_text_take(&text, NULL);
}

START_TEST(summary_is_the_kept_copy)
{
    char *text = summary(synthetic_result(&made), false);
    ck_assert_str_eq(
        text, "41.6 kg: sections found that keep every limit in both combinations.\n"
              "Grain store, truss line 4\n"
              "\n"
              "Groups\n"
              "  group   size           members  length m  kg/m  mass kg  used  governed by            member  in\n"
              "  rafter  CHS 60.3x4           1     3.250  5.55     18.1  0.94  buckling in plane      R1      W\n"
              "  strut   1000 mm2 held        1     3.000  7.85     23.6  0.25  tension                R2      S1\n"
              "  total                        2     6.250           41.6  0.94  largest of all checks\n"
              "\n"
              "Deflections\n"
              "  joint  along  moves mm  at most mm  limit  in  used\n"
              "  C      y         -18.3        20.0  L/300  S1  0.92\n"
              "\n"
              "What the limits cost (at the continuous sizes)\n"
              "  1 mm more deflection (L/300 at C) saves 3.1 kg\n"
              "\n"
              "How it was found\n"
              "  3 starts over continuous sizes: 2 ended at the best, 41.6 kg; 1 ended without convergence. 121\n"
              "  analyses in all. Best: KKT residual 1e-09, every limit met. The design shown weighs 41.6 kg;\n"
              "  38.2 kg is where the continuous search ended, not a bound.\n"
              "\n"
              "Reactions\n"
              "  support  along  smallest kN  in  largest kN  in\n"
              "  A        x             -3.0  S1         0.0  W\n"
              "  A        y             -5.0  W        +20.0  S1\n"
              "  B        y              0.0  W        +20.0  S1\n"
              "\n"
              "Accuracy: joints balance to 3e-16 of the largest force; displacements and forces are good to\n"
              "about 2e-13, proven to 4e-12 of each (of 1/1000 of the largest where they are smaller).\n"
              "\n"
              "Preliminary sizing only. A licensed engineer must review it; local codes govern. Connections are not "
              "covered.\n");
    free(text);
}
END_TEST

/* A structure that sways, with a limit on its factor and on its frequency. */
static sct_result *with_limits_on_the_whole(sct_critical_result criticals[2])
{
    sct_result *r = synthetic_result(&made);
    criticals[0] = (sct_critical_result){.combination = 0,
                                         .factor = 4.2,
                                         .sway = 4.2,
                                         .is_proven = true,
                                         .amplification = 1.3125,
                                         .has_verdict = true,
                                         .words = "sway is amplified"};
    criticals[1] = (sct_critical_result){.combination = 1,
                                         .factor = INFINITY,
                                         .sway = 25,
                                         .is_sway_bound = true,
                                         .amplification = 1,
                                         .has_verdict = true};
    criticals[1].words = "it holds";
    r->n_criticals = 2;
    r->criticals = criticals;
    r->least_factor = 4;
    r->least_frequency = 3;
    r->frequency = 2.5;
    r->vibrating_mass = 1200;
    return r;
}

START_TEST(summary_tells_critical_load_factors_and_frequency)
{
    sct_critical_result criticals[2];
    char *text = summary(with_limits_on_the_whole(criticals), false);
    ck_assert_ptr_nonnull(strstr(text, "4.20         4.20     1.3125  0.96  sway is amplified\n"));
    ck_assert_ptr_nonnull(strstr(text, "none  above 25.00             0.00  it holds\n"));
    ck_assert_ptr_nonnull(strstr(text, "Lowest frequency 2.50 Hz, at least 3 Hz, with 1200 kg: 1.20 FAILS.\n"));
    free(text);
}
END_TEST

START_TEST(the_result_file_has_critical_load_factors_and_frequency)
{
    sct_critical_result criticals[2];
    char *json = result_file(with_limits_on_the_whole(criticals));
    ck_assert_ptr_nonnull(strstr(json, "\"critical_load_factor_at_least\": 4"));
    ck_assert_ptr_nonnull(strstr(json, "{\"combination\": \"S1\", \"factor\": 4.2"));
    ck_assert_ptr_nonnull(strstr(json, "\"combination\": \"W\", \"factor\": null")); /* nothing buckles */
    ck_assert_ptr_nonnull(strstr(json, "\"frequency_Hz\": 2.5"));
    free(json);
}
END_TEST

START_TEST(summary_says_fails_without_colour)
{
    sct_result *r = synthetic_result(&made);
    made.members[0].utilisation = 1.0000001;
    r->kept = false;
    char *text = summary(r, false);
    ck_assert_ptr_nonnull(strstr(text, "1.01  FAILS buckling in plane"));
    ck_assert_ptr_null(strchr(text, '\x1b'));
    free(text);
}
END_TEST

static char *without_colours(const char *text)
{
    char *plain = malloc(strlen(text) + 1), *to = plain;
    for (const char *p = text; *p != '\0'; p++) {
        if (*p == '\x1b')
            p = strchr(p, 'm');
        else
            *to++ = *p;
    }
    *to = '\0';
    return plain;
}

START_TEST(colour_changes_nothing_but_colour)
{
    sct_result *r = synthetic_result(&made);
    char *coloured = summary(r, true), *plain = summary(r, false), *stripped = without_colours(coloured);
    ck_assert_str_ne(coloured, plain);
    ck_assert_str_eq(stripped, plain);
    free(coloured);
    free(plain);
    free(stripped);
}
END_TEST

START_TEST(biting_names_reach_the_terminal_escaped)
{
    char *text = summary(with_name(BITING[_i]), false);
    for (const char *p = text; *p != '\0'; p++) {
        const unsigned char c = (unsigned char)*p;
        ck_assert_msg(c >= 0x20 || c == '\n', "control character %02x", c);
        ck_assert_msg(c != 0x7f && !(c == 0xC2 && (unsigned char)p[1] < 0xA0), "control character");
    }
    free(text);
}
END_TEST

START_TEST(a_summary_of_eight_groups_fits_sixty_lines)
{
    static sct_group_result groups[8];
    static sct_deflection_result deflections[20];
    static sct_price prices[20];
    sct_result *r = synthetic_result(&made);
    for (int i = 0; i < 8; i++) groups[i] = made.groups[i % 2];
    for (int i = 0; i < 20; i++) deflections[i] = made.deflections[0], prices[i] = made.prices[0];
    r->groups = groups, r->n_groups = 8;
    r->deflections = deflections, r->n_deflections = 20;
    r->prices = prices, r->n_prices = 20;
    char *text = summary(r, false);
    int lines = 0;
    for (const char *p = text; *p != '\0'; p++) lines += *p == '\n';
    ck_assert_int_le(lines, 60);
    ck_assert_ptr_nonnull(strstr(text, "... and 14 more in result.json"));
    free(text);
}
END_TEST

START_TEST(a_group_without_members_and_a_result_without_combinations_leave_cells_empty)
{
    sct_result *r = synthetic_result(&made);
    made.groups[1].n_members = 0;
    made.groups[1].worst_member = -1;
    made.deflections[0].label = NULL;
    r->n_combinations = 0;
    r->n_deflections = 0;
    r->accuracy.equilibrium = NAN;
    char *text = summary(r, false), *csv = schedule(r);
    ck_assert_ptr_nonnull(strstr(text, "\n  strut   1000 mm2 held        0     3.000  7.85     23.6\n"));
    ck_assert_ptr_null(strstr(text, "Accuracy"));
    ck_assert_ptr_nonnull(strstr(csv, "section,,,,,CHS 60.3x4,707.5,"));
    ck_assert_ptr_null(strstr(csv, "section,,,,,,1000,"));
    free(text);
    free(csv);
}
END_TEST

START_TEST(a_slanted_deflection_shows_its_direction_and_a_failing_group_fails)
{
    sct_result *r = synthetic_result(&made);
    made.deflections[0].label = NULL;
    memcpy(made.deflections[0].direction, (double[3]){0.6, -0.8, 0.0}, sizeof made.deflections[0].direction);
    made.members[0].utilisation = 1.2;
    char *text = summary(r, false);
    ck_assert_ptr_nonnull(strstr(text, "  C      (0.6, -0.8) "));
    ck_assert_ptr_nonnull(strstr(text, "FAILS buckling in plane"));
    free(text);
}
END_TEST

START_TEST(names_with_blanks_at_their_ends_are_quoted_and_formulas_guarded)
{
    static const char *const NAMES[][2] = {{" x", "\" x\""},      {"x ", "\"x \""}, {"x y", "x y"}, {"'x", "''x"},
                                           {"  =x", "\"'  =x\""}, {"-x", "'-x"},    {"", ""},       {"a;b", "\"a;b\""}};
    for (size_t i = 0; i < sizeof NAMES / sizeof *NAMES; i++) {
        char expected[80], *csv = schedule(with_name(NAMES[i][0]));
        snprintf(expected, sizeof expected, "\r\nmember,%s,", NAMES[i][1]);
        ck_assert_msg(strstr(csv, expected) != NULL, "%s in\n%s", expected, csv);
        free(csv);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("writers");
    TCase *t = tcase_create("writers");
    tcase_add_test(t, a_utilisation_is_rounded_up_and_never_to_a_pass);
    tcase_add_test(t, quantities_follow_the_unit_system);
    tcase_add_test(t, small_masses_and_areas_keep_their_digits);
    tcase_add_test(t, a_character_cut_at_the_end_is_left_out);
    tcase_add_test(t, schedule_is_the_kept_copy);
    tcase_add_test(t, schedule_joins_groups_of_one_section);
    tcase_add_test(t, schedule_in_us_customary_units);
    tcase_add_loop_test(t, biting_names_come_back_from_the_schedule, 0, N_BITING);
    tcase_add_test(t, result_file_begins_with_the_caution_and_the_version);
    tcase_add_test(t, result_file_holds_every_number_in_full);
    tcase_add_loop_test(t, biting_names_come_back_from_the_result_file, 0, N_BITING);
    tcase_add_test(t, a_verdict_cut_in_a_character_leaves_the_result_file_well_formed);
    tcase_add_test(t, an_empty_result_is_written_too);
    tcase_add_test(t, summary_is_the_kept_copy);
    tcase_add_test(t, summary_tells_critical_load_factors_and_frequency);
    tcase_add_test(t, the_result_file_has_critical_load_factors_and_frequency);
    tcase_add_test(t, summary_says_fails_without_colour);
    tcase_add_test(t, colour_changes_nothing_but_colour);
    tcase_add_loop_test(t, biting_names_reach_the_terminal_escaped, 0, N_BITING);
    tcase_add_test(t, a_group_without_members_and_a_result_without_combinations_leave_cells_empty);
    tcase_add_test(t, a_slanted_deflection_shows_its_direction_and_a_failing_group_fails);
    tcase_add_test(t, names_with_blanks_at_their_ends_are_quoted_and_formulas_guarded);
    tcase_add_test(t, a_summary_of_eight_groups_fits_sixty_lines);
    suite_add_tcase(suite, t);
    return run_suite(suite);
}

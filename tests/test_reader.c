/* The reader of model files: what a model says, and what is said of every mistake in one. */
#include "model/model.h"

#include <string.h>

#include "base/text.h"
#include "support.h"

/* A small model that uses every key. The mistakes are made in it by replacing one text by another. */
static const char GOOD[] =
    "{\n"
    "  \"scantling\": 1,\n"
    "  \"title\": \"Test truss\",\n"
    "  \"dimensions\": 2,\n"
    "  \"units\": {\"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\", \"temperature\": \"K\", "
    "\"displacement\": \"mm\"},\n"
    "  \"materials\": {\n"
    "    \"S355H\": {\"E\": 210000, \"density\": \"7850 kg/m3\", \"yield\": 355, \"expansion\": \"12e-6 1/K\", "
    "\"allowable\": {\"tension\": 213, \"compression\": 200}}\n"
    "  },\n"
    "  \"families\": {\n"
    "    \"yard stock\": {\"sections\": {\n"
    "      \"P2\": {\"A\": \"900 mm2\", \"I\": {\"in_plane\": \"4e5 mm4\", \"out_of_plane\": \"3e5 mm4\"}, \"depth\": "
    "\"70 mm\"},\n"
    "      \"P1\": {\"A\": \"707.5 mm2\", \"I\": \"2.8173e5 mm4\", \"depth\": \"60.3 mm\"}\n"
    "    }}\n"
    "  },\n"
    "  \"joints\": {\n"
    "    \"L0\": {\"at\": [0, 0], \"support\": [\"x\", \"y\"]},\n"
    "    \"L1\": {\"at\": [3, 0]},\n"
    "    \"L2\": {\"at\": [6, 0], \"support\": [\"y\"]},\n"
    "    \"U1\": {\"at\": [3, 1.5]}\n"
    "  },\n"
    "  \"groups\": {\n"
    "    \"tie\": {\"material\": \"S355H\", \"area\": {\"at_least\": \"100 mm2\", \"at_most\": 0.01, \"start\": \"500 "
    "mm2\"}, \"second_moment\": {\"c\": 0.5}, \"length_factor\": {\"in_plane\": 0.9}},\n"
    "    \"rafter\": {\"material\": \"S355H\", \"family\": \"CHS\", \"sections\": [\"CHS 60.3x4\", \"CHS 48.3x3.2\"], "
    "\"restraint\": {\"in_plane\": \"1.5 m\", \"out_of_plane\": 3}},\n"
    "    \"web\": {\"material\": \"S355H\", \"family\": \"yard stock\", \"section\": \"P1\", \"allowable\": "
    "{\"compression\": \"100 MPa\"}, \"buckling\": {\"by\": \"Euler\", \"safety\": 2}, \"slenderness\": "
    "{\"compression\": 180}}\n"
    "  },\n"
    "  \"members\": {\n"
    "    \"T1\": {\"from\": \"L0\", \"to\": \"L1\", \"group\": \"tie\"},\n"
    "    \"T2\": {\"from\": \"L1\", \"to\": \"L2\", \"group\": \"tie\", \"restraint\": {\"in_plane\": 2}},\n"
    "    \"R1\": {\"from\": \"L0\", \"to\": \"U1\", \"group\": \"rafter\"},\n"
    "    \"R2\": {\"from\": \"U1\", \"to\": \"L2\", \"group\": \"rafter\", \"length_factor\": {\"in_plane\": 0.8}},\n"
    "    \"D1\": {\"from\": \"L1\", \"to\": \"U1\", \"group\": \"web\"}\n"
    "  },\n"
    "  \"cases\": {\n"
    "    \"G\": {\"action\": \"permanent\", \"self_weight\": true, \"joints\": {\"U1\": [0, -4.2]}},\n"
    "    \"S\": {\"action\": \"snow\", \"joints\": {\"U1\": [0, \"-9.6 kN\"], \"L1\": [0, -1]}},\n"
    "    \"T\": {\"settlements\": {\"L2\": [0, -5]}, \"members\": {\"T1\": {\"temperature\": 30, \"lack_of_fit\": \"2 "
    "mm\"}}}\n"
    "  },\n"
    "  \"combinations\": {\n"
    "    \"A1\": {\"for\": \"allowable\", \"sum\": {\"G\": 1, \"S\": 1, \"T\": 1}},\n"
    "    \"S1\": {\"for\": \"service\", \"sum\": {\"G\": 1, \"S\": 0.5}}\n"
    "  },\n"
    "  \"limits\": {\n"
    "    \"buckling\": {\"by\": \"Euler and Johnson\", \"safety\": 1.92},\n"
    "    \"slenderness\": {\"any\": 300},\n"
    "    \"deflection\": [\n"
    "      {\"joints\": [\"L1\"], \"direction\": \"y\", \"at_most\": \"L/300\", \"span\": [\"L0\", \"L2\"], \"in\": "
    "\"service\"},\n"
    "      {\"joints\": \"all\", \"direction\": [3, 4], \"at_most\": 20, \"in\": [\"A1\"]}\n"
    "    ]\n"
    "  }\n"
    "}\n";

static char *edited(const char *from, const char *to)
{
    const char *at = strstr(GOOD, from);
    ck_assert_msg(at != NULL, "the model has no %s", from);
    sct_text text = {0};
    sct_text_bytes(&text, GOOD, (size_t)(at - GOOD));
    sct_text_add(&text, to);
    sct_text_add(&text, at + strlen(from));
    return sct_text_take(&text, NULL);
}

static sct_model *read_good(void)
{
    sct_model *model;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_model_parse("f", GOOD, sizeof GOOD - 1, &model, issues), SCT_OK);
    ck_assert_int_eq(sct_issues_count(issues), 0);
    sct_issues_free(issues);
    return model;
}

static sct_status parse(const char *text, sct_issues *issues)
{
    sct_model *model;
    const sct_status status = sct_model_parse("f", text, strlen(text), &model, issues);
    ck_assert((status == SCT_OK) == (model != NULL));
    sct_model_free(model);
    return status;
}

/* ---- what a model says
 * ----------------------------------------------------------------------------------------------- */

START_TEST(materials_and_joints_are_in_SI)
{
    sct_model *m = read_good();
    ck_assert_str_eq(m->title, "Test truss");
    ck_assert_int_eq(m->dimensions, 2);
    ck_assert(!m->us_customary);
    ck_assert_str_eq(m->materials[0].name, "S355H");
    ck_assert(m->materials[0].E == 210e9);
    ck_assert(m->materials[0].density == 7850);
    ck_assert(m->materials[0].yield == 355e6);
    ck_assert(m->materials[0].expansion == 12e-6);
    ck_assert(m->materials[0].allowable[1] == 200e6);
    ck_assert_int_eq(m->n_joints, 4);
    ck_assert_str_eq(m->joints[3].name, "U1");
    ck_assert(m->joints[3].at[0] == 3 && m->joints[3].at[1] == 1.5 && m->joints[3].at[2] == 0);
    ck_assert_int_eq(m->joints[0].n_held, 2);
    ck_assert(m->joints[2].n_held == 1 && m->joints[2].held[0][1] == 1);
    ck_assert_str_eq(m->joints[3].where.pointer, "/joints/U1");
    ck_assert_int_eq(m->joints[3].where.line, 19);
    sct_model_free(m);
}
END_TEST

START_TEST(groups_are_free_ladders_or_held)
{
    sct_model *m = read_good();
    const sct_group *tie = &m->groups[0], *rafter = &m->groups[1], *web = &m->groups[2];
    ck_assert_int_eq(tie->kind, SCT_FREE_AREA);
    ck_assert(tie->A_min == 1e-4 && tie->A_max == 0.01 && tie->A_start == 5e-4);
    ck_assert(tie->I[0].c == 0.5 && tie->I[1].c == 0.5);
    ck_assert(tie->buckling == SCT_BUCKLING_EULER_JOHNSON && tie->safety == 1.92);
    ck_assert(tie->slenderness_any == 300 && isinf(tie->slenderness_compression));
    ck_assert(tie->allowable[0] == 213e6 && tie->allowable[1] == 200e6);
    ck_assert_int_eq(rafter->kind, SCT_LADDER);
    ck_assert_int_eq(rafter->n_ladder, 2);
    const sct_family *chs = &m->families[rafter->family];
    ck_assert_str_eq(chs->name, "CHS");
    ck_assert_str_eq(chs->sections[rafter->ladder[0]].name, "CHS 48.3x3.2"); /* lightest first, not as listed */
    ck_assert_str_eq(chs->sections[rafter->ladder[1]].name, "CHS 60.3x4");
    ck_assert_int_eq(web->kind, SCT_HELD_SECTION);
    ck_assert_str_eq(m->families[web->family].sections[web->held].name, "P1");
    ck_assert(web->allowable[0] == 213e6 && web->allowable[1] == 100e6);
    ck_assert(web->buckling == SCT_BUCKLING_EULER && web->safety == 2);
    ck_assert(web->slenderness_any == 300 && web->slenderness_compression == 180);
    sct_model_free(m);
}
END_TEST

START_TEST(own_families_are_sorted_by_area)
{
    sct_model *m = read_good();
    const sct_family *stock = &m->families[m->groups[2].family];
    ck_assert_int_eq(stock->n, 2);
    ck_assert_str_eq(stock->sections[0].name, "P1");
    ck_assert(stock->sections[0].A == 707.5e-6 && stock->sections[0].I[1] == 2.8173e5 / 1e12);
    ck_assert(stock->sections[1].I[0] == 4e-7 && stock->sections[1].I[1] == 3e-7 && stock->sections[1].depth == 0.07);
    sct_model_free(m);
}
END_TEST

START_TEST(effective_lengths_are_the_members_own_or_its_groups)
{
    sct_model *m = read_good();
    const sct_member *T1 = &m->members[0], *T2 = &m->members[1], *R1 = &m->members[2], *R2 = &m->members[3];
    ck_assert(T1->source[0] == SCT_LENGTH_FACTOR && T1->length[0] == 0.9 && T1->source[1] == SCT_LENGTH_SYSTEM);
    ck_assert(T2->source[0] == SCT_LENGTH_RESTRAINT && T2->length[0] == 2 && T2->source[1] == SCT_LENGTH_SYSTEM);
    ck_assert(R1->source[0] == SCT_LENGTH_RESTRAINT && R1->length[0] == 1.5 && R1->length[1] == 3);
    ck_assert(R2->source[0] == SCT_LENGTH_FACTOR && R2->length[0] == 0.8 && R2->source[1] == SCT_LENGTH_RESTRAINT);
    ck_assert(m->members[4].from == 1 && m->members[4].to == 3 && m->members[4].group == 2);
    sct_model_free(m);
}
END_TEST

START_TEST(cases_and_combinations_refer_by_index)
{
    sct_model *m = read_good();
    ck_assert_int_eq(m->n_cases, 3);
    ck_assert_str_eq(m->cases[0].action, "permanent");
    ck_assert_str_eq(m->cases[2].action, "other");
    ck_assert(m->cases[0].self_weight == 1 && m->cases[1].self_weight == 0);
    ck_assert_int_eq(m->cases[1].n_loads, 2);
    ck_assert(m->cases[1].loads[0].joint == 3 && m->cases[1].loads[0].F[1] == -9600);
    ck_assert(m->cases[2].settlements[0].joint == 2 && m->cases[2].settlements[0].d[1] == -0.005);
    const sct_bar_action *action = &m->cases[2].bar_actions[0];
    ck_assert(action->member == 0 && action->dT == 30 && action->lack == 0.002);
    ck_assert_str_eq(action->where.pointer, "/cases/T/members/T1");
    ck_assert(m->combinations[1].basis == SCT_SERVICE);
    ck_assert(m->combinations[1].factor[0] == 1 && m->combinations[1].factor[1] == 0.5 &&
              m->combinations[1].factor[2] == 0);
    sct_model_free(m);
}
END_TEST

START_TEST(deflection_limits_are_lengths_in_some_combinations)
{
    sct_model *m = read_good();
    const sct_deflection_limit *a = &m->deflections[0], *b = &m->deflections[1];
    ck_assert(a->n_joints == 1 && a->joints[0] == 1 && a->direction[1] == 1 && a->at_most == 0.02);
    ck_assert_str_eq(a->label, "L/300");
    ck_assert_str_eq(a->direction_label, "y");
    ck_assert(!a->in[0] && a->in[1]);
    ck_assert_int_eq(b->n_joints, 3); /* all but L0, which cannot move */
    ck_assert(b->direction[0] == 0.6 && b->direction[1] == 0.8 && b->at_most == 0.02);
    ck_assert_str_eq(b->label, "20 mm");
    ck_assert_str_eq(b->direction_label, "along (0.6, 0.8)");
    ck_assert(b->in[0] && !b->in[1]);
    sct_model_free(m);
}
END_TEST

START_TEST(the_source_is_kept_for_rewriting)
{
    sct_model *m = read_good();
    ck_assert_uint_eq(m->source_size, sizeof GOOD - 1);
    ck_assert_str_eq(m->source, GOOD);
    sct_model_free(m);
}
END_TEST

START_TEST(customary_files_are_known_by_their_length_unit)
{
    char *text = edited("\"length\": \"m\"", "\"length\": \"ft\"");
    sct_model *m;
    ck_assert_int_eq(sct_model_parse("f", text, strlen(text), &m, NULL), SCT_OK);
    ck_assert(m->us_customary);
    ck_close(m->joints[1].at[0], 3 * 0.3048, 1e-15);
    ck_close(m->groups[0].A_max, 0.01 * 0.3048 * 0.3048, 1e-15); /* areas are in ft2 then */
    sct_model_free(m);
    free(text);
}
END_TEST

/* ---- mistakes
 * ---------------------------------------------------------------------------------------------------------- */

typedef struct mistake {
    const char *from, *to, *message; /* "": read without a word */
} mistake;
static const mistake MISTAKES[] = {
    {"\"scantling\": 1", "\"scantling\": 2",
     "2:16: error: /scantling: found format 2; this version of scantling reads format 1"},
    {"\"scantling\": 1", "\"scantling\": \"1\"",
     "2:16: error: /scantling: found a string; expected 1, the number of the file's format"},
    {"  \"scantling\": 1,", "", "1:1: error: no \"scantling\"; expected 1, the number of the file's format"},
    {"\"dimensions\": 2", "\"dimensions\": 2.5", "4:17: error: /dimensions: found 2.5; expected 2 or 3"},
    {"\"dimensions\": 2", "\"dimensions\": 3",
     "16:18: error: /joints/L0/at: found 2 entries; expected 3: a coordinate along x, y and z"},
    {"  \"dimensions\": 2,", "", "1:1: error: no \"dimensions\"; expected 2 or 3"},
    {"\"force\": \"kN\"", "\"force\": \"KN\"", "5:37: error: /units/force: no unit \"KN\"; did you mean \"kN\"?"},
    {"\"force\": \"kN\"", "\"force\": \"mm\"",
     "5:37: error: /units/force: mm is the unit of a length; expected a force in one of N, kN, MN, lbf, kip"},
    {"\"length\": \"m\"", "\"lenght\": \"m\"",
     "5:13: error: /units/lenght: unknown key \"lenght\"; did you mean \"length\"?"},
    {"\"stress\": \"MPa\"", "\"stress\": \"mPa\"",
     "5:53: error: /units/stress: no unit \"mPa\"; did you mean \"MPa\"?"},
    {"  \"units\": {\"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\", \"temperature\": \"K\", "
     "\"displacement\": \"mm\"},",
     "",
     "1:1: error: no \"units\"; expected the units of bare numbers, such as {\"length\": \"m\", \"force\": \"kN\", "
     "\"stress\": \"MPa\"}"},
    {"\"title\": \"Test truss\"", "\"title\": 5", "3:12: error: /title: found a number; expected a string: a title"},
    {"\"title\"", "\"tilte\"", "3:3: error: /tilte: unknown key \"tilte\"; did you mean \"title\"?"},
    {"\"E\": 210000", "\"E\": 210", ""},
    {"\"E\": 210000", "\"E\": \"210000 Pa\"",
     "7:20: error: /materials/S355H/E: found 210000 Pa; expected Young's modulus from 1e+06 to 2e+12 Pa; did you mean "
     "MPa?"},
    {"\"E\": 210000", "\"E\": 2.1e11",
     "7:20: error: /materials/S355H/E: found 210000000000 MPa; expected Young's modulus from 1e+06 to 2e+12 Pa; did "
     "you "
     "mean Pa?"},
    {"\"E\": 210000", "\"e\": 210000", "7:15: error: /materials/S355H/e: unknown key \"e\"; did you mean \"E\"?"},
    {"\"E\": 210000", "\"E\": null",
     "7:20: error: /materials/S355H/E: found null; expected Young's modulus: a number in MPa or a string such as \"210 "
     "GPa\""},
    {"\"E\": 210000", "\"E\": \"210,5 MPa\"",
     "7:20: error: /materials/S355H/E: found \"210,5 MPa\"; the decimal mark is a point, such as in \"210 MPa\""},
    {"\"E\": 210000", "\"E\": \"210000\"",
     "7:20: error: /materials/S355H/E: found the string \"210000\" without a unit; expected a stress such as \"210 "
     "MPa\", or a number without quotes"},
    {"\"E\": 210000", "\"E\": [1]",
     "7:20: error: /materials/S355H/E: found an array; expected Young's modulus: a number in MPa or a string such as "
     "\"210 GPa\""},
    {"\"E\": 210000", "\"E\": -1",
     "7:20: error: /materials/S355H/E: found -1 MPa; expected Young's modulus above zero"},
    {"\"7850 kg/m3\"", "\"7850 kN/m3\"",
     "7:39: error: /materials/S355H/density: kN/m3 is a weight per volume, not a density; expected one of kg/m3, t/m3, "
     "g/cm3, lb/in3, lb/ft3"},
    {"\"7850 kg/m3\"", "\"78.5 kN/m3\"",
     "7:39: error: /materials/S355H/density: kN/m3 is a weight per volume, not a density; expected one of kg/m3, t/m3, "
     "g/cm3, lb/in3, lb/ft3"},
    {"\"density\": \"7850 kg/m3\"", "\"density\": 7850",
     "7:39: error: /materials/S355H/density: found a number without a unit; expected a density such as \"7850 kg/m3\", "
     "or a unit in /units/density"},
    {"\"7850 kg/m3\"", "\"7850 t/m3\"",
     "7:39: error: /materials/S355H/density: found 7850 t/m3; expected a density from 1 to 30000 kg/m3; did you mean "
     "kg/m3?"},
    {"\"7850 kg/m3\"", "\"7850 kg/m³\"",
     "7:39: error: /materials/S355H/density: no unit \"kg/m³\"; did you mean \"kg/m3\"?"},
    {"\"7850 kg/m3\"", "\"7850kg/m3\"",
     "7:39: error: /materials/S355H/density: found \"7850kg/m3\"; expected a blank between the number and its unit"},
    {"\"tension\": 213, \"compression\": 200", "\"tension\": 213, \"compression\": -200",
     "7:138: error: /materials/S355H/allowable/compression: found -200 MPa; expected an allowable stress above zero"},
    {"\"tension\": 213, \"compression\": 200", "\"tension\": 213",
     "22:12: error: /groups/tie: no allowable stress in compression; expected \"allowable\": {\"compression\": ...} "
     "here or in material \"S355H\""},
    {"\"yield\": 355, ", "",
     "22:12: error: /groups/tie: the buckling rule \"Euler and Johnson\" needs the yield stress; expected \"yield\" in "
     "material \"S355H\""},
    {"\"expansion\": \"12e-6 1/K\", ", "",
     "36:77: error: /cases/T/members/T1/temperature: material \"S355H\" has no \"expansion\"; expected such as \"12e-6 "
     "1/K\" there"},
    {"\"at\": [3, 0]", "\"at\": [3, 0, 0]",
     "17:18: error: /joints/L1/at: found 3 entries; expected 2: a coordinate along x and y (a plane model has no third "
     "component)"},
    {"\"at\": [3, 0]", "\"at\": [3]",
     "17:18: error: /joints/L1/at: found 1 entry; expected 2: a coordinate along x and y"},
    {"\"at\": [3, 0]", "\"at\": [1e9, 0]",
     "17:19: error: /joints/L1/at/0: found 1000000000 m; expected a coordinate from -100000 to 100000 m"},
    {"\"at\": [3, 0]", "\"at\": \"3 m\"",
     "17:18: error: /joints/L1/at: found a string; expected an array of two components"},
    {"\"at\": [3, 0]", "\"at\": [\"3 m\", null]",
     "17:26: error: /joints/L1/at/1: found null; expected a coordinate: a number in m or a string such as \"3 m\""},
    {"\"at\": [3, 0]", "\"at\": [3000000, 0]",
     "17:19: error: /joints/L1/at/0: found 3000000 m; expected a coordinate from -100000 to 100000 m"},
    {"\"support\": [\"y\"]", "\"support\": [\"z\"]",
     "18:38: error: /joints/L2/support/0: found \"z\"; expected a direction: \"x\", \"y\", \"rotation\", or a vector "
     "such "
     "as [0.6, 0.8]"},
    {"\"support\": [\"y\"]", "\"support\": [\"y\", \"y\"]",
     "18:43: error: /joints/L2/support/1: the directions before this one hold it already; expected independent "
     "directions"},
    {"\"support\": [\"y\"]", "\"support\": [\"y\", \"x\", [1,1]]",
     "18:37: error: /joints/L2/support: found 3 directions; at most 2 can be held"},
    {"\"support\": [\"y\"]", "\"support\": \"y\"",
     "18:37: error: /joints/L2/support: found \"y\"; expected \"fixed\", or an array of the directions held, such as "
     "[\"x\", \"y\"]"},
    {"\"support\": [\"y\"]", "\"support\": [[0,0]]",
     "18:38: error: /joints/L2/support/0: found a direction of length zero; expected a vector that points somewhere"},
    {"\"support\": [\"x\", \"y\"]", "\"support\": [[1,1],[2,2]]",
     "16:44: error: /joints/L0/support/1: the directions before this one hold it already; expected independent "
     "directions"},
    {"\"area\": {\"at_least\": \"100 mm2\"", "\"area\": {\"at_least\": 100",
     "22:55: error: /groups/tie/area/at_least: 100 m2 is above \"at_most\", 0.01 m2, at 22:71; expected bounds in "
     "order"},
    {"\"area\": {\"at_least\": \"100 mm2\",", "\"area\": {\"at_least\": \"0.02 m2\",",
     "22:55: error: /groups/tie/area/at_least: 0.02 m2 is above \"at_most\", 0.01 m2, at 22:77; expected bounds in "
     "order"},
    {"\"at_least\": \"100 mm2\",", "", "22:42: error: /groups/tie/area: no \"at_least\"; expected the smallest area"},
    {"\"at_most\": 0.01", "\"at_most\": \"100 mm2\"",
     "22:97: error: /groups/tie/area/start: found 500 mm2; expected an area within the bounds, 100 mm2 to 100 mm2"},
    {"\"start\": \"500 mm2\"", "\"start\": 0.5",
     "22:92: error: /groups/tie/area/start: found 0.5 m2; expected an area within the bounds, 100 mm2 to 0.01 m2"},
    {"\"second_moment\": {\"c\": 0.5}, ", "",
     "22:12: error: /groups/tie: no \"second_moment\"; the buckling rule needs it: expected {\"c\": ...} for I = c "
     "A^2, or a \"shape\""},
    {"\"c\": 0.5", "\"c\": {\"in_plane\": 1}",
     "22:127: error: /groups/tie/second_moment/c: no \"out_of_plane\"; expected a value for bending out of the plane "
     "of the truss"},
    {"\"family\": \"CHS\"", "\"family\": \"CSH\"",
     "23:47: error: /groups/rafter/family: no family \"CSH\"; did you mean \"CHS\"?"},
    {"\"family\": \"CHS\"", "\"family\": \"CHS\", \"area\": 0.01",
     "23:37: error: /groups/rafter/family: \"family\" stands beside \"area\" at 23:54; a group has one of them"},
    {"\"family\": \"CHS\", \"sections\": [\"CHS 60.3x4\", \"CHS 48.3x3.2\"],", "",
     "23:15: error: /groups/rafter: no size; expected \"family\" (sections to pick from) or \"area\" (held, or with "
     "bounds)"},
    {"\"CHS 48.3x3.2\"", "\"CHS 60.3x4\"",
     "23:81: error: /groups/rafter/sections/1: \"CHS 60.3x4\" stands in this list already"},
    {"\"CHS 48.3x3.2\"", "\"CHS 60.3x44\"",
     "23:81: error: /groups/rafter/sections/1: no section \"CHS 60.3x44\"; did you mean \"CHS 60.3x4\"?"},
    {"\"sections\": [\"CHS 60.3x4\", \"CHS 48.3x3.2\"]", "\"sections\": []",
     "23:66: error: /groups/rafter/sections: found no section; expected at least one"},
    {"\"section\": \"P1\"", "\"section\": \"P3\"",
     "24:69: error: /groups/web/section: no section \"P3\"; did you mean \"P1\"?"},
    {"\"yard stock\": {\"sections", "\"CHS\": {\"sections",
     "10:5: error: /families/CHS: \"CHS\" is a family that comes with the program; give yours another name"},
    {"\"depth\": \"60.3 mm\"", "\"depth\": \"10 mm\"",
     "12:37: warning: /families/yard stock/sections/P1/I: I = 2.8173e-07 m4 in plane is more than A depth^2 / 4 = "
     "1.76875e-08 m4, the most that a section of this area and depth can have"},
    {"\"by\": \"Euler\",", "\"by\": \"euler\",",
     "24:135: error: /groups/web/buckling/by: found \"euler\"; did you mean \"Euler\"?"},
    {"\"by\": \"Euler\", \"safety\": 2", "\"by\": \"Euler\"",
     "24:128: error: /groups/web/buckling: no \"safety\"; expected a factor of 1 or more on the buckling strength"},
    {"\"by\": \"Euler\", \"safety\": 2", "\"by\": \"none\"",
     "24:135: warning: /groups/web/buckling/by: buckling is not checked; compression is held by the allowable stress "
     "alone"},
    {"\"by\": \"Euler\", \"safety\": 2", "\"by\": \"Euler\", \"safety\": 0.5",
     "24:154: error: /groups/web/buckling/safety: found 0.5; expected a safety factor from 1 to 100"},
    {"\"by\": \"Euler\",", "\"by\": \"EN 1993\",",
     "24:135: error: /groups/web/buckling/by: found \"EN 1993\"; expected a buckling rule: one of \"none\", \"Euler\", "
     "\"Euler and Johnson\""},
    {"    \"buckling\": {\"by\": \"Euler and Johnson\", \"safety\": 1.92},", "",
     "22:12: error: /groups/tie: no \"buckling\", nor one in /limits; expected such as {\"by\": \"Euler and Johnson\", "
     "\"safety\": 1.92}, or {\"by\": \"none\"} where compression is held by a fixed allowable stress only"},
    {"\"in_plane\": \"1.5 m\", \"out_of_plane\": 3}",
     "\"in_plane\": \"1.5 m\", \"out_of_plane\": 3}, \"length_factor\": {\"in_plane\": 1}",
     "23:183: error: /groups/rafter/length_factor/in_plane: the effective length is given twice; \"restraint\" at "
     "23:124 gives it too"},
    {"\"restraint\": {\"in_plane\": 2}", "\"restraint\": 2",
     "28:67: error: /members/T2/restraint: found a number; expected an object: a restraint"},
    {"\"from\": \"L0\", \"to\": \"L1\"", "\"from\": \"L0\", \"to\": \"L0\"",
     "27:32: error: /members/T1/to: the member begins and ends at joint \"L0\"; expected two joints"},
    {"\"from\": \"L0\", \"to\": \"L1\"", "\"from\": \"L0\", \"to\": \"L11\"",
     "27:32: error: /members/T1/to: no joint \"L11\"; did you mean \"L1\"?"},
    {"\"from\": \"L0\", \"to\": \"L1\"", "\"from\": 0, \"to\": \"L1\"",
     "27:20: error: /members/T1/from: found a number; expected the name of a joint"},
    {"\"group\": \"web\"", "\"group\": \"wbe\"",
     "31:47: error: /members/D1/group: no group \"wbe\"; did you mean \"web\"?"},
    {"\"group\": \"web\"", "\"group\": \"tie\"",
     "24:12: error: /groups/web: no member is in this group; give it one or leave the group out"},
    {"\"D1\": {", "\" \": {",
     "31:5: error: /members/ : found a blank name; expected a name with at least one visible character"},
    {"\"action\": \"snow\"", "\"action\": \"Snow\"",
     "35:21: error: /cases/S/action: found \"Snow\"; did you mean \"snow\"?"},
    {"\"self_weight\": true", "\"self_weight\": \"yes\"",
     "34:49: error: /cases/G/self_weight: found a string; expected true, false or a factor"},
    {"\"self_weight\": true", "\"self_weight\": -1",
     "34:49: error: /cases/G/self_weight: found -1; expected a factor on the self-weight above zero"},
    {"\"U1\": [0, -4.2]", "\"U9\": [0, -4.2]",
     "34:66: error: /cases/G/joints/U9: no joint \"U9\"; did you mean \"U1\"?"},
    {"\"U1\": [0, -4.2]", "\"U1\": [0, -4.2, 1]",
     "34:72: error: /cases/G/joints/U1: found 3 entries; expected 2: a force along x and y (moments stand in "
     "\"moments\")"},
    {"\"U1\": [0, -4.2]", "\"U1\": [0, -1e30]",
     "34:76: error: /cases/G/joints/U1/1: found -1e+30 kN; expected a force from -1e+12 to 1e+12 N"},
    {"\"U1\": [0, -4.2]", "\"U1\": [0, \"4.2 kg\"]",
     "34:76: error: /cases/G/joints/U1/1: kg is a mass, not a force; expected one of N, kN, MN, lbf, kip"},
    {"\"L2\": [0, -5]", "\"L2\": [1, -5]",
     "36:33: error: /cases/T/settlements/L2: joint \"L2\" is not held in the direction of this settlement; expected "
     "one along its supports"},
    {"\"L2\": [0, -5]", "\"L1\": [0, -5]",
     "36:33: error: /cases/T/settlements/L1: joint \"L1\" is not held in the direction of this settlement; expected "
     "one along its supports"},
    {"\"temperature\": 30", "\"temperature\": 300000",
     "36:77: error: /cases/T/members/T1/temperature: found 300000 K; expected a temperature difference from -2000 to "
     "2000 K"},
    {"{\"temperature\": 30, \"lack_of_fit\": \"2 mm\"}", "{}",
     "36:61: error: /cases/T/members/T1: found neither \"temperature\", \"gradient\" nor \"lack_of_fit\"; expected "
     "one of them (loads on members stand in \"loads\")"},
    {"\"T1\": {\"temperature\": 30", "\"T9\": {\"temperature\": 30",
     "36:55: error: /cases/T/members/T9: no member \"T9\"; did you mean \"T1\"?"},
    {"{\"temperature\": 30", "{\"load\": 3, \"temperature\": 30",
     "36:62: error: /cases/T/members/T1/load: unknown key \"load\"; an action on a member has \"temperature\", "
     "\"lack_of_fit\", \"gradient\""},
    {"\"for\": \"allowable\"", "\"for\": \"strength\"",
     "39:19: error: /combinations/A1/for: found \"strength\", which has factored actions; the allowable stress checks "
     "of this version work on unfactored ones: expected \"allowable\" or \"service\""},
    {"\"for\": \"allowable\"", "\"for\": \"service\"",
     "38:19: error: /combinations: no combination is for \"allowable\"; expected at least one, for the stresses"},
    {"{\"G\": 1, \"S\": 1, \"T\": 1}", "{}",
     "39:39: error: /combinations/A1/sum: found no load case; expected at least one with its factor"},
    {"{\"G\": 1, \"S\": 1, \"T\": 1}", "{\"G\": 0, \"S\": 1, \"T\": 1}",
     "39:45: warning: /combinations/A1/sum/G: the factor is 0: the case has no part in this combination"},
    {"{\"G\": 1, \"S\": 1, \"T\": 1}", "{\"G\": 1, \"S\": 1}",
     "36:10: warning: /cases/T: the case has no part in any combination"},
    {"{\"G\": 1, \"S\": 1, \"T\": 1}", "{\"G\": 1, \"S\": 1, \"W\": 1}",
     "39:56: error: /combinations/A1/sum/W: no load case \"W\"; expected one of \"G\", \"S\", \"T\""},
    {"\"joints\": [\"L1\"]", "\"joints\": [\"L1\", \"L1\"]",
     "46:25: error: /limits/deflection/0/joints/1: joint \"L1\" stands in this list already"},
    {"\"joints\": [\"L1\"]", "\"joints\": []",
     "46:18: error: /limits/deflection/0/joints: found no joint; expected at least one"},
    {"\"joints\": \"all\"", "\"joints\": \"every\"",
     "47:18: error: /limits/deflection/1/joints: found \"every\"; expected \"all\" or an array with the names of "
     "joints"},
    {"\"at_most\": \"L/300\", \"span\": [\"L0\", \"L2\"],", "\"at_most\": \"L/300\",",
     "46:7: error: /limits/deflection/0: no \"span\"; \"L/300\" needs it: expected two joints such as [\"L0\", "
     "\"L8\"], or a length"},
    {"\"at_most\": \"L/300\"", "\"at_most\": \"20 mm\"",
     "46:64: error: /limits/deflection/0/span: \"span\" goes with a limit such as \"L/300\" only; leave it out"},
    {"\"at_most\": \"L/300\"", "\"at_most\": \"L/0\"",
     "46:55: error: /limits/deflection/0/at_most: found \"L/0\"; expected a fraction of the span from L/1 to L/100000, "
     "such as \"L/300\""},
    {"\"at_most\": 20", "\"at_most\": 0",
     "47:57: error: /limits/deflection/1/at_most: found 0 mm; expected a displacement above zero"},
    {"\"at_most\": 20", "\"at_most\": \"20 kN\"",
     "47:57: error: /limits/deflection/1/at_most: kN is the unit of a force; expected a length in one of m, cm, mm, "
     "km, in, ft, yd"},
    {"\"span\": [\"L0\", \"L2\"]", "\"span\": [\"L0\", \"L0\"]",
     "46:72: error: /limits/deflection/0/span: the two joints stand at one place; expected the ends of a span"},
    {"\"span\": [\"L0\", \"L2\"]", "\"span\": [\"L0\"]",
     "46:72: error: /limits/deflection/0/span: expected the names of two joints; found 1"},
    {"\"in\": \"service\"", "\"in\": \"strength\"",
     "46:92: error: /limits/deflection/0/in: found \"strength\"; expected a kind of combination: one of \"allowable\", "
     "\"service\""},
    {"\"in\": [\"A1\"]", "\"in\": [\"A1\", \"A1\"]",
     "47:74: error: /limits/deflection/1/in/1: combination \"A1\" stands in this list already"},
    {"\"in\": [\"A1\"]", "\"in\": [\"B1\"]",
     "47:68: error: /limits/deflection/1/in/0: no combination \"B1\"; did you mean \"A1\"?"},
    {"\"direction\": \"y\"", "\"direction\": \"z\"",
     "46:39: error: /limits/deflection/0/direction: found \"z\"; expected a direction: \"x\", \"y\", or a vector such "
     "as [0.6, 0.8]"},
    {"\"direction\": [3, 4]", "\"direction\": [0, 0]",
     "47:38: error: /limits/deflection/1/direction: found a direction of length zero; expected a vector that points "
     "somewhere"},
};

START_TEST(every_mistake_is_told_with_its_place_and_what_to_do)
{
    const mistake *x = &MISTAKES[_i];
    char *text = edited(x->from, x->to);
    sct_issues *issues = sct_issues_new();
    const sct_status status = parse(text, issues);
    char *line = sct_issues_count(issues) == 0 ? NULL : sct_issue_line(sct_issues_get(issues, 0));
    ck_assert_str_eq(line == NULL ? "" : line + 2, x->message);
    ck_assert_int_eq(status, strstr(x->message, " error: ") != NULL ? SCT_BAD_INPUT : SCT_OK);
    free(line);
    sct_issues_free(issues);
    free(text);
}
END_TEST

START_TEST(notes_are_taken_in_every_object)
{
    static const char *const OBJECTS[] = {
        "\"units\": {",         "\"S355H\": {",         "\"L0\": {", "\"tie\": {", "\"T1\": {", "\"area\": {",
        "\"buckling\": {",      "\"limits\": {",        "\"A1\": {", "\"G\": {",   "\"P1\": {", "\"yard stock\": {",
        "\"second_moment\": {", "{\"joints\": [\"L1\"]"};
    for (size_t i = 0; i < sizeof OBJECTS / sizeof *OBJECTS; i++) {
        char with[128];
        const char *brace = strchr(OBJECTS[i], '{');
        snprintf(with, sizeof with, "%.*s\"notes\": \"n\", %s", (int)(brace - OBJECTS[i]) + 1, OBJECTS[i], brace + 1);
        char *text = edited(OBJECTS[i], with);
        ck_assert_msg(parse(text, NULL) == SCT_OK, "%s", with);
        free(text);
    }
    char *text = edited("\"tie\": {", "\"tie\": {\"notes\": 5, ");
    ck_assert_int_eq(parse(text, NULL), SCT_BAD_INPUT);
    free(text);
}
END_TEST

START_TEST(the_top_must_be_an_object)
{
    static const char *const TOPS[] = {"[]", "5", "\"x\"", "null"};
    for (int i = 0; i < 4; i++) ck_assert_int_eq(parse(TOPS[i], NULL), SCT_BAD_INPUT);
    sct_issues *issues = sct_issues_new();
    parse("[]", issues);
    ck_assert_str_eq(sct_issues_get(issues, 0)->message, "found an array; expected an object: a model");
    sct_issues_free(issues);
}
END_TEST

START_TEST(every_needed_key_is_missed)
{
    static const char *const NEEDED[] = {
        "\"scantling\"", "\"dimensions\"", "\"units\"",        "\"length\"",  "\"force\"",     "\"stress\"",
        "\"materials\"", "\"E\"",          "\"density\"",      "\"joints\"",  "\"at\"",        "\"groups\"",
        "\"material\"",  "\"at_least\"",   "\"at_most\"",      "\"members\"", "\"from\"",      "\"to\"",
        "\"group\"",     "\"cases\"",      "\"combinations\"", "\"for\"",     "\"sum\"",       "\"sections\"",
        "\"A\"",         "\"I\"",          "\"by\"",           "\"safety\"",  "\"direction\"", "\"c\""};
    for (size_t i = 0; i < sizeof NEEDED / sizeof *NEEDED; i++) {
        char missed[64];
        sct_issues *issues = sct_issues_new();
        char *text = edited(NEEDED[i], "\"zzzzzzzz\""); /* nothing is near it */
        ck_assert_int_eq(parse(text, issues), SCT_BAD_INPUT);
        snprintf(missed, sizeof missed, "no %s", NEEDED[i]);
        bool told = false;
        for (int k = 0; k < sct_issues_count(issues); k++)
            told |= strncmp(sct_issues_get(issues, k)->message, missed, strlen(missed)) == 0;
        ck_assert_msg(told, "%s", missed);
        sct_issues_free(issues);
        free(text);
    }
}
END_TEST

/* Every value of the good model, replaced in turn by one of every other kind: never read as if nothing were wrong. */
START_TEST(every_value_of_another_kind_is_refused)
{
    static const char *const OTHERS[] = {"null", "[]", "{}", "[{}]", "true", "\"zzzzzzzz\"", "-7e7", "1e300"};
    for (const char *p = GOOD; (p = strchr(p, ':')) != NULL;) {
        p++;
        if (p[0] != ' ') continue;
        const char *begin = p + 1, *end = begin;
        int depth = 0;
        bool in_string = false;
        do { /* one value: to the comma or bracket behind it */
            if (*end == '"') in_string = !in_string;
            if (!in_string && (*end == '{' || *end == '[')) depth++;
            if (!in_string && (*end == '}' || *end == ']')) depth--;
            end++;
        } while (in_string || depth > 0 || strchr(",}]\n", *end) == NULL);
        for (size_t i = 0; i < sizeof OTHERS / sizeof *OTHERS; i++) {
            const bool is_title = strncmp(begin, "\"Test truss\"", 12) == 0;
            const bool may_be_empty = strcmp(OTHERS[i], "{}") == 0 || strcmp(OTHERS[i], "[]") == 0;
            const bool is_weight = strncmp(begin, "true", 4) == 0 && strcmp(OTHERS[i], "true") == 0;
            sct_text text = {0};
            sct_text_bytes(&text, GOOD, (size_t)(begin - GOOD));
            sct_text_add(&text, OTHERS[i]);
            sct_text_add(&text, end);
            const sct_status status = parse(text.data, NULL);
            if (!is_title && !may_be_empty && !is_weight)
                ck_assert_msg(status == SCT_BAD_INPUT, "%s for %.*s", OTHERS[i], (int)(end - begin), begin);
            sct_text_free(&text);
        }
    }
}
END_TEST

START_TEST(a_name_is_quoted_escaped_and_cut)
{
    sct_text to = {0};
    sct_text_add(&to, "\"group\": \"\\u001b[2J%s%n");
    for (int i = 0; i < 100; i++) sct_text_add(&to, "x");
    sct_text_add(&to, "\"");
    char *text = edited("\"group\": \"web\"", to.data);
    sct_issues *issues = sct_issues_new();
    parse(text, issues);
    ck_assert_str_eq(sct_issues_get(issues, 0)->message,
                     "no group \"\\x1b[2J%s%nxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx...\"; expected "
                     "one of \"tie\", "
                     "\"rafter\", \"web\"");
    sct_issues_free(issues);
    free(text);
    sct_text_free(&to);
}
END_TEST

START_TEST(strange_names_are_taken_and_long_ones_refused)
{
    static const char *const NAMES[] = {"../../x", "a\\\\b", "\xCE\xB1\xCE\xB2", "\xF0\x9F\x98\x80", "<script>",
                                        "%s%n",    "-1"};
    char to[512];
    for (size_t i = 0; i < sizeof NAMES / sizeof *NAMES; i++) {
        snprintf(to, sizeof to, "\"%s\": {\"from\": \"L1\"", NAMES[i]);
        char *text = edited("\"D1\": {\"from\": \"L1\"", to);
        ck_assert_int_eq(parse(text, NULL), SCT_OK);
        free(text);
    }
    for (int length = 200; length <= 201; length++) {
        snprintf(to, sizeof to, "\"%0*d\": {\"from\": \"L1\"", length, 7);
        char *text = edited("\"D1\": {\"from\": \"L1\"", to);
        ck_assert_int_eq(parse(text, NULL), length == 200 ? SCT_OK : SCT_BAD_INPUT);
        free(text);
    }
}
END_TEST

START_TEST(a_section_twice_or_without_loads_is_refused)
{
    char *text = edited("\"U1\": [0, -4.2]", "\"U1\": [0, -4.2], \"U1\": [0, 1]");
    ck_assert_int_eq(parse(text, NULL), SCT_BAD_INPUT);
    free(text);
    const char *from = strstr(GOOD, "    \"G\": {\"action\""), *to = strstr(GOOD, "  \"combinations\"");
    sct_issues *issues = sct_issues_new();
    sct_text bare = {0};
    sct_text_bytes(&bare, GOOD, (size_t)(from - GOOD));
    sct_text_add(&bare, "\"G\": {}, \"S\": {\"joints\": {\"U1\": [0, 0]}}, \"T\": {}},\n");
    sct_text_add(&bare, to);
    ck_assert_int_eq(parse(bare.data, issues), SCT_BAD_INPUT);
    ck_assert_str_eq(sct_issues_get(issues, 0)->message,
                     "no case has a load that is not zero; there is nothing to size for");
    sct_issues_free(issues);
    sct_text_free(&bare);
}
END_TEST

START_TEST(equal_bounds_hold_the_area_with_a_note)
{
    char *text = edited("\"at_most\": 0.01, \"start\": \"500 mm2\"", "\"at_most\": \"1 cm2\"");
    sct_model *m;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_model_parse("f", text, strlen(text), &m, issues), SCT_OK);
    ck_assert_int_eq(m->groups[0].kind, SCT_HELD_AREA);
    ck_assert(m->groups[0].A_held == 1e-4);
    ck_assert_int_eq(sct_issues_get(issues, 0)->severity, SCT_NOTE);
    sct_model_free(m);
    sct_issues_free(issues);
    free(text);
}
END_TEST

START_TEST(twenty_faults_are_told_and_all_are_counted)
{
    enum { N = 20000 };
    sct_text members = {0};
    sct_issues *issues = sct_issues_new();
    sct_text_add(&members, "\"members\": {");
    for (int i = 0; i < N; i++)
        sct_text_format(&members, "\"M%d\": {\"from\": \"M%d\", \"to\": \"L1\", \"group\": \"web\"},\n", i, i);
    char *text = edited("\"members\": {", members.data);
    ck_assert_int_eq(parse(text, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_errors(issues), N);
    int n = 0;
    for (int i = 0; i < sct_issues_count(issues); i++) n += sct_issues_get(issues, i)->severity == SCT_ERROR;
    ck_assert_int_eq(n, 20);
    sct_issues_free(issues);
    sct_text_free(&members);
    free(text);
}
END_TEST

START_TEST(too_many_cases_are_too_large)
{
    sct_text cases = {0};
    sct_text_add(&cases, "\"cases\": {");
    for (int i = 0; i < 10000; i++) sct_text_format(&cases, "\"C%d\": {\"self_weight\": true},", i);
    char *text = edited("\"cases\": {", cases.data);
    ck_assert_int_eq(parse(text, NULL), SCT_TOO_LARGE);
    sct_text_free(&cases);
    free(text);
}
END_TEST

START_TEST(space_models_have_three_components)
{
    static const char SPACE[] =
        "{\"scantling\": 1, \"dimensions\": 3, \"units\": {\"length\": \"in\", \"force\": \"kip\", \"stress\": "
        "\"ksi\"},"
        "\"materials\": {\"Al\": {\"E\": 1e4, \"density\": \"0.1 lb/in3\", \"allowable\": {\"tension\": 25, "
        "\"compression\": 25}}},"
        "\"joints\": {\"A\": {\"at\": [0, 0, 0], \"support\": [\"x\", \"y\", \"z\"]}, \"B\": {\"at\": [0, 100, 50], "
        "\"support\": "
        "[[1, 1, 0]]}}, \"groups\": {\"g\": {\"material\": \"Al\", \"area\": 2, \"buckling\": {\"by\": \"none\"}}},"
        "\"members\": {\"m\": {\"from\": \"A\", \"to\": \"B\", \"group\": \"g\"}},"
        "\"cases\": {\"P\": {\"joints\": {\"B\": [1, 2, 3]}}}, \"combinations\": {\"P\": {\"for\": \"allowable\", "
        "\"sum\": {\"P\": 1}}},"
        "\"limits\": {\"deflection\": [{\"joints\": \"all\", \"direction\": \"z\", \"at_most\": 0.35}]}}";
    sct_model *m;
    ck_assert_int_eq(sct_model_parse("f", SPACE, sizeof SPACE - 1, &m, NULL), SCT_OK);
    ck_close(m->joints[1].at[2], 50 * 0.0254, 1e-15);
    ck_close(m->joints[1].held[0][0], sqrt(0.5), 1e-15);
    ck_close(m->groups[0].A_held, 2 * 0.0254 * 0.0254, 1e-15);
    ck_assert_int_eq(m->groups[0].kind, SCT_HELD_AREA);
    ck_assert(isnan(m->groups[0].I[0].c));
    ck_close(m->cases[0].loads[0].F[2], 3 * 4448.2216152605, 1e-15);
    ck_assert(m->deflections[0].direction[2] == 1);
    ck_assert_str_eq(m->deflections[0].label, "0.35 in");
    sct_model_free(m);
}
END_TEST

START_TEST(a_file_that_cannot_be_opened_is_told)
{
    sct_model *m;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_model_read("/nonexistent/model.json", &m, issues), SCT_CANNOT_READ);
    ck_assert_ptr_null(m);
    ck_assert_int_eq(sct_issues_errors(issues), 1);
    sct_issues_free(issues);
}
END_TEST

START_TEST(a_name_of_any_blanks_is_none_and_of_a_neighbour_of_them_is_one)
{
    static const struct {
        const char *name;
        sct_status status;
    } CASES[] = {{" ", SCT_BAD_INPUT},
                 {"\\t\\r\\n", SCT_BAD_INPUT},
                 {"\xC2\xA0", SCT_BAD_INPUT},      /* no-break space */
                 {"\xE2\x80\x80", SCT_BAD_INPUT},  /* en quad, the first of a row of blanks */
                 {"\xE2\x80\x8B ", SCT_BAD_INPUT}, /* zero width space, the last of it */
                 {"\xE3\x80\x80", SCT_BAD_INPUT},  /* ideographic space */
                 {"\xEF\xBB\xBF", SCT_BAD_INPUT},  /* byte order mark */
                 {"\xC2\xA1", SCT_OK},
                 {"\xE2\x80\x90", SCT_OK}, /* hyphen */
                 {"\xE2\x82\x80", SCT_OK}, /* subscript zero */
                 {"\xE3\x80\x81", SCT_OK},
                 {"\xE3\x81\x82", SCT_OK},
                 {"\xEF\xBB\xBC", SCT_OK},
                 {"\xEF\xBC\xA1", SCT_OK},
                 {" x", SCT_OK}};
    for (size_t i = 0; i < sizeof CASES / sizeof *CASES; i++) {
        char key[40];
        snprintf(key, sizeof key, "\"%s\": {\"for\": \"service\"", CASES[i].name);
        char *text = edited("\"S1\": {\"for\": \"service\"", key);
        sct_issues *issues = sct_issues_new();
        ck_assert_msg(parse(text, issues) == CASES[i].status, "case %zu", i);
        if (CASES[i].status != SCT_OK) ck_assert_ptr_nonnull(strstr(sct_issues_get(issues, 0)->message, "blank name"));
        sct_issues_free(issues);
        free(text);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("reader");
    TCase *c = tcase_create("reader");
    tcase_set_timeout(c, 60);
    tcase_add_test(c, materials_and_joints_are_in_SI);
    tcase_add_test(c, groups_are_free_ladders_or_held);
    tcase_add_test(c, own_families_are_sorted_by_area);
    tcase_add_test(c, effective_lengths_are_the_members_own_or_its_groups);
    tcase_add_test(c, cases_and_combinations_refer_by_index);
    tcase_add_test(c, deflection_limits_are_lengths_in_some_combinations);
    tcase_add_test(c, the_source_is_kept_for_rewriting);
    tcase_add_test(c, customary_files_are_known_by_their_length_unit);
    tcase_add_loop_test(c, every_mistake_is_told_with_its_place_and_what_to_do, 0,
                        (int)(sizeof MISTAKES / sizeof *MISTAKES));
    tcase_add_test(c, notes_are_taken_in_every_object);
    tcase_add_test(c, the_top_must_be_an_object);
    tcase_add_test(c, every_needed_key_is_missed);
    tcase_add_test(c, every_value_of_another_kind_is_refused);
    tcase_add_test(c, a_name_is_quoted_escaped_and_cut);
    tcase_add_test(c, strange_names_are_taken_and_long_ones_refused);
    tcase_add_test(c, a_section_twice_or_without_loads_is_refused);
    tcase_add_test(c, equal_bounds_hold_the_area_with_a_note);
    tcase_add_test(c, twenty_faults_are_told_and_all_are_counted);
    tcase_add_test(c, too_many_cases_are_too_large);
    tcase_add_test(c, space_models_have_three_components);
    tcase_add_test(c, a_file_that_cannot_be_opened_is_told);
    tcase_add_test(c, a_name_of_any_blanks_is_none_and_of_a_neighbour_of_them_is_one);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}

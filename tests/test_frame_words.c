/* What a model file says of frames: ends, runs, axes, springs, loads on members, limits. */
#include "model/reader.h"

#include <string.h>

#include "base/text.h"
#include "frame_texts.h"
#include "model/axes.h"
#include "model/rewrite.h"
#include "support.h"

/* A model text with `from` replaced by `to`, its quotes set right. */
static char *edited(const char *model, const char *from, const char *to)
{
    const char *at = strstr(model, from);
    ck_assert_msg(at != NULL, "the model has no %s", from);
    sct_text text = {0};
    sct_text_bytes(&text, model, (size_t)(at - model));
    sct_text_add(&text, to);
    sct_text_add(&text, at + strlen(from));
    for (char *p = text.data; *p != '\0'; p++)
        if (*p == '\'') *p = '"';
    return sct_text_take(&text, NULL);
}

static sct_model *read_edited(const char *model, const char *from, const char *to)
{
    sct_model *m;
    sct_issues *issues = sct_issues_new();
    char *text = edited(model, from, to);
    const sct_status status = sct_model_parse("f", text, strlen(text), &m, issues);
    ck_assert_msg(status == SCT_OK, "%s", sct_issues_get(issues, 0) ? sct_issues_get(issues, 0)->message : "");
    ck_assert_int_eq(sct_issues_count(issues), 0);
    sct_issues_free(issues);
    free(text);
    return m;
}

static sct_model *read_model(const char *model)
{
    return read_edited(model, "", "");
}

static const sct_member *member(const sct_model *m, const char *name)
{
    for (int i = 0; i < m->n_members; i++)
        if (strcmp(m->members[i].name, name) == 0) return &m->members[i];
    ck_abort_msg("no member %s", name);
}

static void check_end(const sct_member_end *end, sct_fixity in_plane, sct_fixity out_of_plane, sct_fixity twist)
{
    ck_assert_int_eq(end->fixity[SCT_IN_PLANE], in_plane);
    ck_assert_int_eq(end->fixity[SCT_OUT_OF_PLANE], out_of_plane);
    ck_assert_int_eq(end->fixity[SCT_TWIST], twist);
}

/* ---- members --------------------------------------------------------------------------------------------------------
 */

START_TEST(ends_of_a_plane_frame_turn_in_plane_only)
{
    sct_model *m = read_model(PLANE);
    const sct_member *L = member(m, "L"), *R = member(m, "R"), *tie = member(m, "tie");
    check_end(&L->end[0], SCT_FIXED, SCT_PINNED, SCT_PINNED);
    check_end(&L->end[1], SCT_FIXED, SCT_PINNED, SCT_PINNED);
    check_end(&R->end[0], SCT_SPRUNG, SCT_PINNED, SCT_PINNED);
    check_end(&R->end[1], SCT_PINNED, SCT_PINNED, SCT_PINNED);
    ck_assert(R->end[0].stiffness[SCT_IN_PLANE] == 200e3);
    check_end(&tie->end[0], SCT_PINNED, SCT_PINNED, SCT_PINNED);
    ck_assert(tie->tension_only && !L->tension_only);
    sct_model_free(m);
}
END_TEST

START_TEST(ends_in_space_are_fixed_where_an_object_is_silent)
{
    sct_model *m = read_model(SPACE);
    check_end(&member(m, "post")->end[0], SCT_FIXED, SCT_PINNED, SCT_FIXED);
    check_end(&member(m, "post")->end[1], SCT_PINNED, SCT_PINNED, SCT_PINNED);
    check_end(&member(m, "side")->end[0], SCT_FIXED, SCT_FIXED, SCT_FIXED);
    sct_model_free(m);
}
END_TEST

START_TEST(a_run_becomes_pieces_that_go_on_over_its_inner_joints)
{
    sct_model *m = read_model(PLANE);
    ck_assert_int_eq(m->n_runs, 1);
    ck_assert_str_eq(m->runs[0].name, "top");
    ck_assert(m->runs[0].first == 2 && m->runs[0].n == 2);
    ck_assert_int_eq(m->n_members, 5);
    const sct_member *first = member(m, "top 1"), *second = member(m, "top 2");
    ck_assert(first->from == 2 && first->to == 3 && second->from == 3 && second->to == 4);
    ck_assert(first->run == 0 && second->run == 0 && member(m, "L")->run == -1);
    check_end(&first->end[0], SCT_FIXED, SCT_PINNED, SCT_PINNED);
    check_end(&first->end[1], SCT_FIXED, SCT_PINNED, SCT_PINNED);
    check_end(&second->end[0], SCT_FIXED, SCT_PINNED, SCT_PINNED);
    check_end(&second->end[1], SCT_PINNED, SCT_PINNED, SCT_PINNED);
    ck_assert(first->length[0] == 0.8 && second->length[0] == 0.8);
    ck_assert_str_eq(second->where.pointer, "/members/top");
    sct_model_free(m);
}
END_TEST

START_TEST(a_straight_run_that_may_spin_has_no_torsion)
{
    sct_model *m = read_model(SPACE);
    check_end(&member(m, "straight 1")->end[0], SCT_PINNED, SCT_PINNED, SCT_PINNED);
    check_end(&member(m, "straight 1")->end[1], SCT_FIXED, SCT_FIXED, SCT_PINNED);
    check_end(&member(m, "straight 2")->end[0], SCT_FIXED, SCT_FIXED, SCT_PINNED);
    check_end(&member(m, "bent 1")->end[0], SCT_FIXED, SCT_FIXED, SCT_PINNED);
    check_end(&member(m, "bent 1")->end[1], SCT_FIXED, SCT_FIXED, SCT_FIXED);
    sct_model_free(m);
    m = read_edited(SPACE, "['A', 'B', 'C'], 'group': 'g'",
                    "['A', 'B', 'C'], 'group': 'g', 'ends': ['fixed', 'pinned']");
    check_end(&member(m, "straight 2")->end[0], SCT_FIXED, SCT_FIXED, SCT_FIXED);
    sct_model_free(m);
}
END_TEST

START_TEST(local_axes_follow_up_and_roll)
{
    sct_model *m = read_model(SPACE);
    double e[3][3];
    ck_assert(sct_member_axes(m, member(m, "straight 1"), e)); /* level: bends in the vertical plane */
    ck_assert(e[0][0] == 1 && e[1][2] == 1 && e[2][1] == -1);
    ck_assert(sct_member_axes(m, member(m, "post"), e)); /* vertical: towards x */
    ck_assert(e[0][2] == 1 && e[1][0] == 1 && e[2][1] == 1);
    ck_assert(sct_member_axes(m, member(m, "side"), e)); /* along y; (1, 0, 1) turned by 90 degrees about y */
    ck_close(e[1][0], sqrt(0.5), 1e-15);
    ck_close(e[1][2], -sqrt(0.5), 1e-15);
    ck_close(e[2][0], -sqrt(0.5), 1e-15);
    sct_model_free(m);
    m = read_model(PLANE);
    ck_assert(sct_member_axes(m, member(m, "L"), e)); /* upwards: +90 degrees is to the left */
    ck_assert(e[0][1] == 1 && e[1][0] == -1 && e[2][2] == 1);
    sct_model_free(m);
}
END_TEST

/* ---- joints ---------------------------------------------------------------------------------------------------------
 */

START_TEST(supports_hold_rotations_and_springs_stand_beside_them)
{
    sct_model *m = read_model(PLANE);
    ck_assert(m->joints[0].n_held == 2 && m->joints[0].n_turns_held == 1 && m->joints[0].turns_held[0][2] == 1);
    ck_assert(m->joints[1].n_held == 2 && m->joints[1].n_turns_held == 1);
    const sct_joint *C = &m->joints[2];
    ck_assert_int_eq(C->n_springs, 2);
    ck_assert(!C->springs[0].is_turn && C->springs[0].dir[1] == 1 && C->springs[0].stiffness == 5e6);
    ck_assert(C->springs[1].is_turn && C->springs[1].dir[2] == 1 && C->springs[1].stiffness == 200e3);
    sct_model_free(m);
    m = read_model(SPACE);
    ck_assert(m->joints[0].n_held == 3 && m->joints[0].n_turns_held == 3 && m->joints[0].turns_held[1][1] == 1);
    ck_assert(m->joints[2].n_held == 3 && m->joints[2].n_turns_held == 1 && m->joints[2].turns_held[0][0] == 1);
    const sct_joint *D = &m->joints[3];
    ck_assert(D->springs[0].dir[2] == 1 && D->springs[0].stiffness == 7e3);
    ck_assert(D->springs[1].is_turn && D->springs[1].dir[1] == 1 && D->springs[1].stiffness == 3e3);
    sct_model_free(m);
}
END_TEST

/* ---- sections -------------------------------------------------------------------------------------------------------
 */

START_TEST(sections_bring_moduli_and_torsion_constants)
{
    sct_model *m = read_model(PLANE);
    ck_assert(m->materials[0].G == 81e9);
    const sct_section *H = &m->families[m->groups[2].family].sections[0];
    ck_assert(H->W[0] == 6e4 / 1e9 && H->W[1] == 5e-5 && H->J == 4e4 / 1e12);
    const sct_group *post = &m->groups[0], *said = &m->groups[3];
    ck_assert(post->W[0].p == 1.5 && post->J.p == 2 && post->I[0].c > 0 && post->I[0].c == post->I[1].c);
    ck_assert(said->W[0].c == 0.1 && said->W[1].c == 0.2 && said->W[1].p == 1.5 && said->I[1].c == 2);
    ck_assert(said->J.p == 1.8);
    ck_close(said->J.c * pow(5000e-6, 1.8), 7.1e-6, 1e-14);
    sct_model_free(m);
}
END_TEST

/* ---- actions --------------------------------------------------------------------------------------------------------
 */

START_TEST(loads_on_a_run_are_split_at_its_joints)
{
    sct_model *m = read_model(PLANE);
    const sct_case *G = &m->cases[0];
    const sct_member_load *q = G->member_loads;
    ck_assert_int_eq(G->n_member_loads, 7);
    ck_assert(q[0].member == 2 && q[0].a == 0 && q[0].b == 2 && q[0].qa[1] == -5e3 && q[0].qb[1] == -5e3);
    ck_assert(q[0].axes == SCT_AXES_PROJECTED && !q[0].is_point);
    ck_assert(q[1].member == 3 && q[1].a == 0 && q[1].b == 4);
    ck_assert(q[2].member == 0 && q[2].a == 1 && q[2].b == 4 && q[2].qa[1] == -6e3 && q[2].qb[1] == -12e3);
    ck_assert(q[3].member == 2 && q[3].a == 1 && q[3].b == 2 && q[3].qa[1] == -6e3);
    ck_close(q[3].qb[1], -8e3, 1e-14);
    ck_assert(q[4].member == 3 && q[4].a == 0 && q[4].b == 2 && q[4].qb[1] == -12e3);
    ck_close(q[4].qa[1], -8e3, 1e-14);
    ck_assert(q[5].is_point && q[5].member == 3 && q[5].a == 1 && q[5].b == 1); /* half of 6 m, behind the first 2 m */
    ck_assert(q[5].F[1] == -10e3 && q[5].M[2] == 3e3 && q[5].axes == SCT_AXES_MEMBER);
    ck_assert(q[6].member == 3 && q[6].a == 4 && q[6].axes == SCT_AXES_MODEL);
    sct_model_free(m);
}
END_TEST

START_TEST(moments_and_rotations_stand_beside_forces_and_settlements)
{
    sct_model *m = read_model(PLANE);
    ck_assert_int_eq(m->cases[0].n_loads, 2);
    ck_assert(m->cases[0].loads[0].F[1] == -4e3 && m->cases[0].loads[0].M[2] == 0);
    ck_assert(m->cases[0].loads[1].joint == 2 && m->cases[0].loads[1].M[2] == 12e3);
    ck_assert_int_eq(m->cases[1].n_settlements, 2);
    ck_assert(m->cases[1].settlements[0].d[1] == -5e-3 && m->cases[1].settlements[1].turn[2] == 2e-3);
    sct_model_free(m);
    m = read_model(SPACE);
    ck_assert(m->cases[0].loads[0].M[0] == 1e3 && m->cases[0].loads[0].M[2] == 3e3);
    sct_model_free(m);
}
END_TEST

START_TEST(the_lack_of_fit_of_a_run_is_shared_by_length)
{
    sct_model *m = read_model(PLANE);
    const sct_bar_action *a = m->cases[1].bar_actions;
    ck_assert_int_eq(m->cases[1].n_bar_actions, 3);
    ck_assert(a[0].member == 0 && a[0].gradient[0] == 10 && a[0].gradient[1] == 0 && a[0].dT == 0);
    ck_assert(a[1].member == 2 && a[1].dT == 20 && a[2].member == 3 && a[2].dT == 20);
    ck_close(a[1].lack, 1e-3, 1e-14);
    ck_close(a[2].lack, 2e-3, 1e-14);
    sct_model_free(m);
}
END_TEST

/* By hand: 30 kN uniform on the beam, 27 kN on its middle and 27 kN up the post, the forces of 10 kN across the beam
 * at 3 m, 1 kN at D and 4 kN on D; simple beams of 2 and 4 m between the joints. */
START_TEST(notional_loads_are_a_part_of_what_comes_down_at_each_joint)
{
    sct_model *m = read_model(PLANE);
    const sct_case *N = &m->cases[2];
    /* the post from 1 to 4 m: 6 and 12 kN/m, moment about its foot 3/6 (6 (2 + 4) + 12 (1 + 8)) = 72 kNm */
    const double at_C = 72.0 / 4, at_A = 27 - at_C;
    /* the beam, first piece: 6 to 8 kN/m from 1 to 2 m, about C 1/6 (6 (2 + 2) + 8 (1 + 4)) = 32/3 kNm */
    const double first = 7.0, first_at_M = 32.0 / 3 / 2;
    /* second: 8 to 12 kN/m from 0 to 2 m, about M 2/6 (8 x 2 + 12 x 4) = 64/3 kNm */
    const double second = 20.0, second_at_D = 64.0 / 3 / 4;
    const double down[5] = {at_A, 0, at_C + 5 + first - first_at_M,
                            5 + 10 + first_at_M + second - second_at_D + 10 * 3.0 / 4,
                            4 + 10 + second_at_D + 10 * 1.0 / 4 + 1};
    ck_assert_int_eq(N->n_loads, 4);
    for (int i = 0; i < 4; i++) {
        ck_close(N->loads[i].F[0], down[N->loads[i].joint] * 1e3 / 200, 1e-13);
        ck_assert(N->loads[i].F[1] == 0);
        ck_assert_str_eq(N->loads[i].where.pointer, "/cases/N/notional");
    }
    sct_model_free(m);
}
END_TEST

/* ---- limits ---------------------------------------------------------------------------------------------------------
 */

START_TEST(movements_between_joints_are_limited)
{
    sct_model *m = read_model(PLANE);
    ck_assert_int_eq(m->n_deflections, 3);
    const sct_deflection_limit *relative = &m->deflections[0], *between = &m->deflections[1],
                               *drift = &m->deflections[2];
    ck_assert(relative->n_joints == 2 && relative->joints[0] == 4 && relative->from[0] == 2 && relative->from[1] == 2);
    ck_assert(between->n_joints == 2 && between->joints[1] == 4 && between->from[1] == 1 && between->at_most == 0.02);
    ck_assert(drift->n_joints == 1 && drift->joints[0] == 4 && drift->from[0] == 1 && drift->at_most == 0.01);
    ck_assert_str_eq(drift->label, "h/400");
    ck_assert(drift->direction[0] == 1 && drift->in[0]);
    sct_model_free(m);
}
END_TEST

START_TEST(bow_sway_and_frequency_are_limited)
{
    sct_model *m = read_model(PLANE);
    ck_assert_int_eq(m->n_bows, 1);
    const sct_bow_limit *bow = &m->bows[0];
    ck_assert(bow->n_members == 1 && bow->members[0] == 0 && bow->n_runs == 1 && bow->runs[0] == 0);
    ck_assert(bow->axis == SCT_IN_PLANE && isnan(bow->at_most) && bow->part == 1.0 / 300 && bow->in[0]);
    ck_assert(m->least_factor == 10 && m->amplifies && m->least_frequency == 3);
    ck_assert(m->mass_factor[0] == 1 && m->mass_factor[1] == 0);
    sct_model_free(m);
    m = read_model(SPACE);
    ck_assert(m->bows[0].axis == SCT_OUT_OF_PLANE && m->bows[0].at_most == 0.009 && isnan(m->bows[0].part));
    ck_assert(isnan(m->least_factor) && !m->amplifies && isnan(m->least_frequency) && m->mass_factor == NULL);
    sct_model_free(m);
}
END_TEST

/* ---- the rest -------------------------------------------------------------------------------------------------------
 */

START_TEST(bare_numbers_of_derived_kinds_follow_length_force_and_temperature)
{
    char *bare = edited(PLANE, "'4 m'", "4");
    char *text = edited(bare, "\"length\": \"m\", \"force\": \"kN\"", "'length': 'ft', 'force': 'kip'");
    const double ft = 0.3048, kip = 4448.2216152605;
    sct_model *m;
    ck_assert_int_eq(sct_model_parse("f", text, strlen(text), &m, NULL), SCT_OK);
    ck_close(m->joints[2].springs[1].stiffness, 200 * kip * ft, 1e-15);
    ck_close(m->families[m->groups[2].family].sections[0].W[1], 5e-5 * ft * ft * ft, 1e-15);
    ck_close(m->cases[0].member_loads[0].qa[1], -5 * kip / ft, 1e-15);
    ck_close(m->cases[0].member_loads[5].M[2], 3 * kip * ft, 1e-15);
    sct_model_free(m);
    free(text);
    free(bare);
}
END_TEST

START_TEST(the_sized_model_keeps_runs_as_they_are_written)
{
    sct_model *m = read_edited(PLANE, "'area': '4000 mm2'", "'area': {'at_least': '100 mm2', 'at_most': '9000 mm2'}");
    const sct_size_choice choice[4] = {[0] = {.A = 2e-3}, [1] = {.section = "IPE 200"}, [2] = {.section = "H"}};
    sct_text text = {0};
    ck_assert_int_eq(sct_model_rewrite(m, choice, &text), SCT_OK);
    ck_assert_ptr_nonnull(strstr(text.data, "\"through\": [\"C\", \"M\", \"D\"]"));
    ck_assert_ptr_nonnull(strstr(text.data, "\"shape\": {\"kind\": \"square tube\", \"width_to_wall\": 20}"));
    sct_model *again;
    ck_assert_int_eq(sct_model_parse("again", text.data, text.size, &again, NULL), SCT_OK);
    ck_assert(again->groups[0].kind == SCT_HELD_AREA && again->groups[0].A_held == 2e-3);
    ck_assert(again->groups[0].W[0].c == m->groups[0].W[0].c && again->groups[3].J.c == m->groups[3].J.c);
    ck_assert_int_eq(again->groups[1].kind, SCT_HELD_SECTION);
    ck_assert(again->n_members == m->n_members && again->n_runs == 1 && again->runs[0].n == 2);
    for (int i = 0; i < m->n_members; i++) {
        ck_assert_str_eq(again->members[i].name, m->members[i].name);
        ck_assert_mem_eq(again->members[i].end, m->members[i].end, sizeof m->members[i].end);
    }
    sct_model_free(again);
    sct_model_free(m);
    sct_text_free(&text);
}
END_TEST

typedef struct remark {
    const char *from, *to, *pointer, *words;
} remark;
static const remark REMARKS[] = {
    {"'in_plane': '200 kN m/rad'", "'in_plane': 'pinned'", "/joints/B",
     "the rotation is held or sprung, but every member is pinned here: it holds nothing; a member that shall feel it "
     "needs \"ends\""},
    {"'J': '4e4 mm4'", "'J': '4e4 mm4', 'depth': '200 mm'", "/families/own/sections/H/W",
     "W = 6e-05 m3 in plane is more than 2 I / depth = 3e-05 m3, the most that a section of this second moment and "
     "depth can have"},
    {"'G': '81 GPa'", "'G': '106 GPa'", "/materials/S/G",
     "G is 0.505 times E; expected at most E/2, as of metals and wood"},
    {"'joints': {'D'", "'self_weight': true, 'joints': {'D'", "/cases/N/notional",
     "the self-weight of case \"G\" is not known before the sizes are: these loads are a part of its other loads only"},
};

START_TEST(what_is_likely_a_slip_is_warned_of)
{
    const remark *x = &REMARKS[_i];
    sct_model *m;
    sct_issues *issues = sct_issues_new();
    char *text = edited(PLANE, x->from, x->to);
    ck_assert_int_eq(sct_model_parse("f", text, strlen(text), &m, issues), SCT_OK);
    ck_assert_int_eq(sct_issues_count(issues), 1);
    ck_assert_int_eq(sct_issues_get(issues, 0)->severity, SCT_WARNING);
    ck_assert_str_eq(sct_issues_get(issues, 0)->pointer, x->pointer);
    ck_assert_str_eq(sct_issues_get(issues, 0)->message, x->words);
    sct_model_free(m);
    sct_issues_free(issues);
    free(text);
}
END_TEST

/* A run of 1000 pieces, and an entry written n times in the place of the loads, the drift or the bows. */
static sct_status read_many(const char *before, const char *entry, int n, const char *behind)
{
    enum { PIECES = 1000 };
    sct_text text = {0};
    sct_text_add(&text, "{'scantling': 1, 'dimensions': 2, 'units': {'length': 'm', 'force': 'kN', 'stress': 'MPa'},"
                        "'materials': {'S': {'E': 210000, 'density': '7850 kg/m3', 'allowable': {'tension': 140, "
                        "'compression': 140}}}, 'groups': {'g': {'material': 'S', 'family': 'IPE'}},"
                        "'joints': {'0': {'at': [0, 0], 'support': 'fixed'}");
    for (int i = 1; i <= PIECES; i++) sct_text_format(&text, ", '%d': {'at': [%d, 0]}", i, i);
    sct_text_add(&text, "}, 'members': {'run': {'group': 'g', 'through': ['0'");
    for (int i = 1; i <= PIECES; i++) sct_text_format(&text, ", '%d'", i);
    sct_text_format(&text, "]}}, 'combinations': {'c': {'for': 'allowable', 'sum': {'G': 1}}}, %s%s", before, entry);
    for (int i = 1; i < n; i++) sct_text_format(&text, ", %s", entry);
    sct_text_add(&text, behind);
    for (char *p = text.data; *p != '\0'; p++)
        if (*p == '\'') *p = '"';
    sct_model *m;
    const sct_status status = sct_model_parse("f", text.data, text.size, &m, NULL);
    ck_assert((status == SCT_OK) == (m != NULL));
    sct_model_free(m);
    sct_text_free(&text);
    return status;
}

START_TEST(what_a_few_words_multiply_has_an_end)
{
    static const char LIMITS[] = "'cases': {'G': {'joints': {'1': [0, -1]}}}, 'limits': {'buckling': {'by': 'Euler', "
                                 "'safety': 2}, ",
                      LOADS[] = "'limits': {'buckling': {'by': 'Euler', 'safety': 2}}, 'cases': {'G': {'loads': [";
    char before[256];
    ck_assert_int_eq(read_many(LOADS, "{'on': 'run', 'line': [0, -1]}", 100, "]}}}"), SCT_OK);
    ck_assert_int_eq(read_many(LOADS, "{'on': 'run', 'line': [0, -1]}", 10001, "]}}}"), SCT_TOO_LARGE);
    snprintf(before, sizeof before, "%s%s", LIMITS, "'bow': [");
    ck_assert_int_eq(read_many(before, "{'members': ['run'], 'at_most': 1}", 2, "]}}"), SCT_OK);
    ck_assert_int_eq(read_many(before, "{'members': ['run'], 'at_most': 1}", 10001, "]}}"), SCT_TOO_LARGE);
    snprintf(before, sizeof before, "%s%s", LIMITS, "'deflection': [");
    ck_assert_int_eq(read_many(before, "{'joints': ['1'], 'direction': 'y', 'at_most': 1}", 10001, "]}}"),
                     SCT_TOO_LARGE);
}
END_TEST

/* Every value of a frame, replaced in turn by one of every other kind: read or refused, never a fault. */
START_TEST(every_value_of_another_kind_is_met)
{
    static const char *const MODELS[] = {PLANE, SPACE}, *const OTHERS[] = {
                                                            "null",     "[]",    "{}",         "[{}]",
                                                            "[[], []]", "true",  "'zzzzzzzz'", "'fixed'",
                                                            "-7e7",     "1e300", "['A']",      "['A', 'A', 'A', 'A']"};
    const char *model = MODELS[_i];
    int n_refused = 0;
    for (const char *p = model; (p = strchr(p, ':')) != NULL;) {
        const char *begin = ++p + 1, *end = begin;
        int depth = 0;
        bool in_string = false;
        do { /* one value: to the comma or bracket behind it */
            if (*end == '\'') in_string = !in_string;
            if (!in_string && (*end == '{' || *end == '[')) depth++;
            if (!in_string && (*end == '}' || *end == ']')) depth--;
            end++;
        } while (in_string || depth > 0 || strchr(",}]\n", *end) == NULL);
        for (size_t i = 0; i < sizeof OTHERS / sizeof *OTHERS; i++) {
            sct_text start = {0};
            sct_text_bytes(&start, model, (size_t)(begin - model));
            sct_text_add(&start, OTHERS[i]);
            sct_text_add(&start, end);
            char *text = edited(start.data, "", "");
            sct_model *m;
            const sct_status status = sct_model_parse("f", text, strlen(text), &m, NULL);
            ck_assert(status == SCT_OK || status == SCT_BAD_INPUT);
            n_refused += status == SCT_BAD_INPUT;
            sct_model_free(m);
            sct_text_free(&start);
            free(text);
        }
    }
    ck_assert_int_gt(n_refused, 100);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("frame words");
    TCase *c = tcase_create("frame words");
    tcase_set_timeout(c, 60);
    tcase_add_test(c, ends_of_a_plane_frame_turn_in_plane_only);
    tcase_add_test(c, ends_in_space_are_fixed_where_an_object_is_silent);
    tcase_add_test(c, a_run_becomes_pieces_that_go_on_over_its_inner_joints);
    tcase_add_test(c, a_straight_run_that_may_spin_has_no_torsion);
    tcase_add_test(c, local_axes_follow_up_and_roll);
    tcase_add_test(c, supports_hold_rotations_and_springs_stand_beside_them);
    tcase_add_test(c, sections_bring_moduli_and_torsion_constants);
    tcase_add_test(c, loads_on_a_run_are_split_at_its_joints);
    tcase_add_test(c, moments_and_rotations_stand_beside_forces_and_settlements);
    tcase_add_test(c, the_lack_of_fit_of_a_run_is_shared_by_length);
    tcase_add_test(c, notional_loads_are_a_part_of_what_comes_down_at_each_joint);
    tcase_add_test(c, movements_between_joints_are_limited);
    tcase_add_test(c, bow_sway_and_frequency_are_limited);
    tcase_add_test(c, bare_numbers_of_derived_kinds_follow_length_force_and_temperature);
    tcase_add_test(c, the_sized_model_keeps_runs_as_they_are_written);
    tcase_add_loop_test(c, what_is_likely_a_slip_is_warned_of, 0, (int)(sizeof REMARKS / sizeof *REMARKS));
    tcase_add_test(c, what_a_few_words_multiply_has_an_end);
    tcase_add_loop_test(c, every_value_of_another_kind_is_met, 0, 2);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}

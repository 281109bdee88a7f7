/* Models built by C calls, so that tests of the analysis need no file. All memory is the model's arena's. */
#ifndef TESTS_MODEL_BUILD_H
#define TESTS_MODEL_BUILD_H

#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "model/model.h"

/* Room for one more thing behind n: the array itself, or a larger copy. */
static inline void *mb_grow(sct_arena *arena, void *list, int n, size_t size)
{
    if (n > 0 && (n & (n - 1)) != 0) return list;
    void *larger = sct_arena_array(arena, n == 0 ? 1 : 2 * (size_t)n, size);
    if (larger == NULL) abort();
    if (n > 0) memcpy(larger, list, (size_t)n * size);
    return larger;
}

static inline const char *mb_text(sct_arena *arena, const char *prefix, int i)
{
    char text[64];
    const int length = snprintf(text, sizeof text, "%s%d", prefix, i);
    return sct_arena_string(arena, text, (size_t)length);
}

static inline sct_where mb_where(sct_model *m, int line, const char *prefix, int i)
{
    return (sct_where){.file = m->file, .line = line + i, .column = 1, .pointer = mb_text(m->arena, prefix, i)};
}

/* An empty model of 2 or 3 dimensions. Joint i is "J<i>" on line 1000 + i, member i "M<i>" on line 2000 + i, group
 * "G<i>" on 3000 + i, case "C<i>" on 4000 + i; loads, settlements, bar actions stand on 5000, 6000, 7000 + i. */
static inline sct_model *mb_new(int dimensions)
{
    sct_arena *arena = sct_arena_new();
    if (arena == NULL) abort();
    sct_model *m = sct_arena_array(arena, 1, sizeof *m);
    m->arena = arena;
    m->file = "test.json";
    m->source = "";
    m->title = "";
    m->dimensions = dimensions;
    return m;
}

static inline void mb_free(sct_model *m)
{
    if (m != NULL) sct_arena_free(m->arena);
}

static inline int mb_material(sct_model *m, double E, double density, double expansion)
{
    m->materials = mb_grow(m->arena, m->materials, m->n_materials, sizeof *m->materials);
    m->materials[m->n_materials] = (sct_material){.name = mb_text(m->arena, "S", m->n_materials),
                                                  .E = E,
                                                  .density = density,
                                                  .expansion = expansion,
                                                  .yield = NAN,
                                                  .allowable = {NAN, NAN}};
    return m->n_materials++;
}

/* A group with a free area around A (sized) or with A held. */
static inline int mb_group(sct_model *m, int material, double A, bool is_sized)
{
    m->groups = mb_grow(m->arena, m->groups, m->n_groups, sizeof *m->groups);
    m->groups[m->n_groups] = (sct_group){.name = mb_text(m->arena, "G", m->n_groups),
                                         .where = mb_where(m, 3000, "/groups/G", m->n_groups),
                                         .material = material,
                                         .kind = is_sized ? SCT_FREE_AREA : SCT_HELD_AREA,
                                         .A_min = is_sized ? A * 1e-3 : NAN,
                                         .A_max = is_sized ? A * 1e3 : NAN,
                                         .A_start = is_sized ? A : NAN,
                                         .A_held = A,
                                         .I = {{NAN, 2.0}, {NAN, 2.0}},
                                         .family = -1,
                                         .held = -1,
                                         .allowable = {NAN, NAN},
                                         .safety = 1.0,
                                         .slenderness_any = INFINITY,
                                         .slenderness_compression = INFINITY};
    return m->n_groups++;
}

static inline int mb_joint(sct_model *m, double x, double y, double z)
{
    m->joints = mb_grow(m->arena, m->joints, m->n_joints, sizeof *m->joints);
    m->joints[m->n_joints] = (sct_joint){.name = mb_text(m->arena, "J", m->n_joints),
                                         .where = mb_where(m, 1000, "/joints/J", m->n_joints),
                                         .at = {x, y, z}};
    return m->n_joints++;
}

/* Holds one more direction of a joint. */
static inline void mb_hold(sct_model *m, int joint, double x, double y, double z)
{
    sct_joint *j = &m->joints[joint];
    const double length = sqrt(x * x + y * y + z * z);
    memcpy(j->held[j->n_held++], (double[3]){x / length, y / length, z / length}, sizeof j->held[0]);
}

/* Holds all directions of a joint. */
static inline void mb_pin(sct_model *m, int joint)
{
    mb_hold(m, joint, 1.0, 0.0, 0.0);
    mb_hold(m, joint, 0.0, 1.0, 0.0);
    if (m->dimensions == 3) mb_hold(m, joint, 0.0, 0.0, 1.0);
}

static inline int mb_bar(sct_model *m, int from, int to, int group)
{
    m->members = mb_grow(m->arena, m->members, m->n_members, sizeof *m->members);
    m->members[m->n_members] = (sct_member){.name = mb_text(m->arena, "M", m->n_members),
                                            .where = mb_where(m, 2000, "/members/M", m->n_members),
                                            .from = from,
                                            .to = to,
                                            .group = group,
                                            .length = {NAN, NAN}};
    return m->n_members++;
}

static inline int mb_case(sct_model *m, double self_weight)
{
    m->cases = mb_grow(m->arena, m->cases, m->n_cases, sizeof *m->cases);
    m->cases[m->n_cases] = (sct_case){.name = mb_text(m->arena, "C", m->n_cases),
                                      .where = mb_where(m, 4000, "/cases/C", m->n_cases),
                                      .action = "other",
                                      .self_weight = self_weight};
    return m->n_cases++;
}

static inline void mb_load(sct_model *m, int k, int joint, double Fx, double Fy, double Fz)
{
    sct_case *c = &m->cases[k];
    c->loads = mb_grow(m->arena, c->loads, c->n_loads, sizeof *c->loads);
    c->loads[c->n_loads] =
        (sct_joint_load){.joint = joint, .F = {Fx, Fy, Fz}, .where = mb_where(m, 5000, "/loads/", c->n_loads)};
    c->n_loads++;
}

static inline void mb_settle(sct_model *m, int k, int joint, double dx, double dy, double dz)
{
    sct_case *c = &m->cases[k];
    c->settlements = mb_grow(m->arena, c->settlements, c->n_settlements, sizeof *c->settlements);
    c->settlements[c->n_settlements] = (sct_settlement){
        .joint = joint, .d = {dx, dy, dz}, .where = mb_where(m, 6000, "/settlements/", c->n_settlements)};
    c->n_settlements++;
}

static inline void mb_act(sct_model *m, int k, int member, double dT, double lack)
{
    sct_case *c = &m->cases[k];
    c->bar_actions = mb_grow(m->arena, c->bar_actions, c->n_bar_actions, sizeof *c->bar_actions);
    c->bar_actions[c->n_bar_actions] = (sct_bar_action){
        .member = member, .dT = dT, .lack = lack, .where = mb_where(m, 7000, "/actions/", c->n_bar_actions)};
    c->n_bar_actions++;
}

/* ---- frames ------------------------------------------------------------------------------------------------------ */

/* A group with held area, I about both axes and J, which are c A^2. */
static inline int mb_frame_group(sct_model *m, double A, double I, double J)
{
    const int g = mb_group(m, 0, A, false);
    m->groups[g].I[0].c = m->groups[g].I[1].c = I / (A * A);
    m->groups[g].J = (sct_power){J / (A * A), 2.0};
    return g;
}

/* Holds all displacements and rotations of a joint. */
static inline void mb_fix(sct_model *m, int joint)
{
    mb_pin(m, joint);
    sct_joint *j = &m->joints[joint];
    const int turns = m->dimensions == 2 ? 1 : 3;
    for (int i = 0; i < turns; i++) j->turns_held[j->n_turns_held++][m->dimensions == 2 ? 2 : i] = 1.0;
}

/* A beam, fixed to both joints until its ends are pinned. */
static inline int mb_beam(sct_model *m, int from, int to, int group)
{
    const int e = mb_bar(m, from, to, group);
    for (int s = 0; s < 2; s++)
        for (int r = 0; r < SCT_TURNS; r++) m->members[e].end[s].fixity[r] = SCT_FIXED;
    return e;
}

static inline void mb_pin_end(sct_model *m, int member, int end)
{
    for (int r = 0; r < SCT_TURNS; r++) m->members[member].end[end].fixity[r] = SCT_PINNED;
}

/* A new load on a member, of nothing yet. */
static inline sct_member_load *mb_member_load(sct_model *m, int k, int member)
{
    sct_case *c = &m->cases[k];
    c->member_loads = mb_grow(m->arena, c->member_loads, c->n_member_loads, sizeof *c->member_loads);
    sct_member_load *load = &c->member_loads[c->n_member_loads];
    *load = (sct_member_load){.member = member, .where = mb_where(m, 8000, "/member_loads/", c->n_member_loads)};
    c->n_member_loads++;
    return load;
}

/* A uniform load along y of the model over a whole member. */
static inline void mb_uniform(sct_model *m, int k, int member, double q, double L)
{
    sct_member_load *load = mb_member_load(m, k, member);
    load->b = L;
    load->qa[1] = load->qb[1] = q;
}

/* An elastic support along (about: is_turn) a unit vector. */
static inline void mb_spring(sct_model *m, int joint, bool is_turn, const double dir[3], double stiffness)
{
    sct_joint *j = &m->joints[joint];
    j->springs = mb_grow(m->arena, j->springs, j->n_springs, sizeof *j->springs);
    j->springs[j->n_springs++] = (sct_joint_spring){
        .is_turn = is_turn, .dir = {dir[0], dir[1], dir[2]}, .stiffness = stiffness, .where = j->where};
}

/* States a group's second moments (in plane, out of plane) and its torsion constant [m4] at its area A_held. */
static inline void mb_stiffen(sct_model *m, int group, double I_in, double I_out, double J)
{
    sct_group *g = &m->groups[group];
    const double A2 = g->A_held * g->A_held;
    g->I[0].c = I_in / A2;
    g->I[1].c = I_out / A2;
    g->J = (sct_power){J / A2, 2.0};
}

/* Holds one more rotation of a joint. */
static inline void mb_hold_turn(sct_model *m, int joint, double x, double y, double z)
{
    sct_joint *j = &m->joints[joint];
    const double length = sqrt(x * x + y * y + z * z);
    memcpy(j->turns_held[j->n_turns_held++], (double[3]){x / length, y / length, z / length}, sizeof j->turns_held[0]);
}

static inline void mb_fixity(sct_model *m, int member, int end, sct_fixity fixity)
{
    for (int r = 0; r < SCT_TURNS; r++) m->members[member].end[end].fixity[r] = fixity;
}

static inline void mb_moment(sct_model *m, int k, int joint, double Mx, double My, double Mz)
{
    mb_load(m, k, joint, 0.0, 0.0, 0.0);
    memcpy(m->cases[k].loads[m->cases[k].n_loads - 1].M, (double[3]){Mx, My, Mz}, sizeof(double[3]));
}

/* A force on a member at `a` from its start, in the model's axes. */
static inline void mb_point(sct_model *m, int k, int member, double a, double Fx, double Fy, double Fz)
{
    sct_member_load *load = mb_member_load(m, k, member);
    load->is_point = true;
    load->a = load->b = a;
    memcpy(load->F, (double[3]){Fx, Fy, Fz}, sizeof load->F);
}

/* A combination with the factors of the cases (at most 64; one for each case that the model will have). */
static inline int mb_combination(sct_model *m, int n_factors, const double factor[])
{
    m->combinations = mb_grow(m->arena, m->combinations, m->n_combinations, sizeof *m->combinations);
    sct_combination *c = &m->combinations[m->n_combinations];
    *c = (sct_combination){.name = mb_text(m->arena, "K", m->n_combinations), .basis = SCT_ALLOWABLE};
    c->factor = sct_arena_array(m->arena, 64, sizeof *c->factor);
    memcpy(c->factor, factor, (size_t)n_factors * sizeof *factor);
    return m->n_combinations++;
}

/* A combination of each case by itself. */
static inline void mb_each_case(sct_model *m)
{
    for (int k = 0; k < m->n_cases; k++) {
        double factor[64] = {0};
        factor[k] = 1.0;
        mb_combination(m, 64, factor);
    }
}
#endif

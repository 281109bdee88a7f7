/* Loads of the cases: on joints, on members between their joints, and what stretches members. */
#include <stdlib.h>
#include <string.h>

#include "analysis/beam.h"
#include "analysis/structure_parts.h"
#include "base/text.h"
#include "base/vector.h"

/* ---- empty cases ---------------------------------------------------------------------------------------------------
 */

static bool load_is_zero(const sct_member_load *load)
{
    return load->is_point ? sct_is_zero3(load->F) && sct_is_zero3(load->M)
                          : sct_is_zero3(load->qa) && sct_is_zero3(load->qb);
}

static bool action_is_zero(const sct_bar_action *a)
{
    return a->dT == 0.0 && a->lack == 0.0 && a->gradient[0] == 0.0 && a->gradient[1] == 0.0;
}

static bool case_is_empty(const sct_case *c)
{
    bool empty = c->self_weight == 0.0;
    for (int i = 0; i < c->n_loads && empty; i++) empty = sct_is_zero3(c->loads[i].F) && sct_is_zero3(c->loads[i].M);
    for (int i = 0; i < c->n_settlements && empty; i++)
        empty = sct_is_zero3(c->settlements[i].d) && sct_is_zero3(c->settlements[i].turn);
    for (int i = 0; i < c->n_bar_actions && empty; i++) empty = action_is_zero(&c->bar_actions[i]);
    for (int i = 0; i < c->n_member_loads && empty; i++) empty = load_is_zero(&c->member_loads[i]);
    return empty;
}

static void find_empty_cases(const sct_model *m, sct_issues *issues)
{
    int n_empty = 0;
    for (int k = 0; k < m->n_cases; k++) n_empty += case_is_empty(&m->cases[k]);
    if (n_empty == m->n_cases) {
        const sct_where where = m->n_cases > 0 ? m->cases[0].where : (sct_where){.file = m->file};
        sct_issue_add(issues, SCT_ERROR, where, "no case has a load: there is nothing to carry");
        return;
    }
    for (int k = 0; k < m->n_cases; k++) {
        if (!case_is_empty(&m->cases[k])) continue;
        sct_issue_add(issues, SCT_WARNING, m->cases[k].where, "the case has no load; its results are zero");
    }
}

/* ---- joints --------------------------------------------------------------------------------------------------------
 */

static double *joint_load(sct_structure *st, int k, int joint)
{
    return st->joint_load + ((size_t)k * (size_t)st->n_joints + (size_t)joint) * 6;
}

/* Adds a vector's parts along n orthonormal ones to f; returns the largest. */
static double add_parts(int n, const double basis[][3], const double v[3], double f[])
{
    double largest = 0.0;
    for (int i = 0; i < n; i++) {
        const double along = sct_dot3(basis[i], v);
        f[i] += along;
        largest = fmax(largest, fabs(along));
    }
    return largest;
}

/* A moment must find a member's end or a support that takes it. */
static bool is_taken(const sct_structure *st, int joint, const double M[3])
{
    const sct_joint *j = &st->model->joints[joint];
    double span[3][3], left[3];
    memcpy(left, M, sizeof left);
    const int n = sct_span_of(j->n_turns_held, j->turns_held, span);
    sct_project_off3(left, n, (const double(*)[3])span);
    sct_project_off3(left, st->n_turns[joint], (const double(*)[3])st->turn_basis[joint]);
    return sct_length3(left) <= SCT_TOL_DIRECTION * sct_length3(M);
}

/* warned: per joint, that a load there goes to the support. */
static void add_joint_load(sct_structure *st, int k, const sct_joint_load *load, const bool has_member[], bool warned[],
                           sct_issues *issues)
{
    const int j = load->joint;
    const sct_joint *joint = &st->model->joints[j];
    if (sct_is_zero3(load->F) && sct_is_zero3(load->M)) return;
    if (!has_member[j]) {
        sct_issue_add(issues, SCT_ERROR, load->where, "joint \"%s\" carries a load but has no members",
                      sct_show(joint->name).text);
        return;
    }
    if (!is_taken(st, j, load->M)) {
        sct_issue_add(issues, SCT_ERROR, load->where,
                      "no member's end at joint \"%s\" takes the moment there: they are pinned to it",
                      sct_show(joint->name).text);
        return;
    }
    double *f = st->f + (size_t)k * (size_t)st->n_dof + st->first_dof[j], *whole = joint_load(st, k, j);
    const double F = add_parts(st->n_free[j], (const double(*)[3])st->basis[j], load->F, f);
    const double M = add_parts(st->n_turns[j], (const double(*)[3])st->turn_basis[j], load->M, f + st->n_free[j]);
    for (int i = 0; i < 3; i++) {
        whole[i] += load->F[i];
        whole[3 + i] += load->M[i];
    }
    const bool acts = F > SCT_TOL_DIRECTION * sct_length3(load->F) || M > SCT_TOL_DIRECTION * sct_length3(load->M);
    if (acts || warned[j]) return;
    warned[j] = true;
    sct_issue_add(issues, SCT_WARNING, load->where, "the load at joint \"%s\" goes straight to its support",
                  sct_show(joint->name).text);
}

/* Is v within the span of the held directions? */
static bool is_held(int n_held, const double held[][3], const double v[3])
{
    double span[3][3], outside[3];
    const int n = sct_span_of(n_held, held, span);
    memcpy(outside, v, sizeof outside);
    sct_project_off3(outside, n, (const double(*)[3])span);
    return sct_length3(outside) <= SCT_TOL_DIRECTION * sct_length3(v);
}

static void add_settlement(sct_structure *st, int k, const sct_settlement *settlement, sct_issues *issues)
{
    const sct_joint *joint = &st->model->joints[settlement->joint];
    if (!is_held(joint->n_held, (const double(*)[3])joint->held, settlement->d) ||
        !is_held(joint->n_turns_held, (const double(*)[3])joint->turns_held, settlement->turn)) {
        sct_issue_add(issues, SCT_ERROR, settlement->where,
                      "settlement of joint \"%s\" in a direction that is not held; only held directions can be moved",
                      sct_show(joint->name).text);
        return;
    }
    const size_t at = ((size_t)k * (size_t)st->n_joints + (size_t)settlement->joint) * 3;
    for (int i = 0; i < 3; i++) {
        st->settled[at + (size_t)i] += settlement->d[i];
        st->turned[at + (size_t)i] += settlement->turn[i];
    }
}

/* ---- members -------------------------------------------------------------------------------------------------------
 */

/* Takes the free elongations of a member's springs off. A gradient g gives the curvature -expansion g towards the
 * warmer side: over the length L the ends turn by curvature L against one another, each by half of it from the chord.
 */
static void add_bar_action(sct_structure *st, int k, const sct_bar_action *action, sct_issues *issues)
{
    const sct_bar *bar = &st->bars[action->member];
    double *stretch = st->stretch + (size_t)k * (size_t)st->n_springs;
    const bool is_warmed = action->dT != 0.0 || action->gradient[0] != 0.0 || action->gradient[1] != 0.0;
    if (is_warmed && isnan(bar->expansion)) {
        const sct_group *group = &st->model->groups[bar->group];
        sct_issue_add(issues, SCT_ERROR, action->where,
                      "member \"%s\" is warmed but its material \"%s\" has no \"expansion\"",
                      sct_show(st->model->members[action->member].name).text,
                      sct_show(st->model->materials[group->material].name).text);
        return;
    }
    if (action->dT != 0.0) stretch[action->member] -= bar->expansion * action->dT * bar->L;
    stretch[action->member] -= action->lack;
    for (int i = bar->first; i < bar->first + bar->n && is_warmed; i++) {
        const sct_spring *s = &st->springs[i];
        if (s->plane == SCT_TWIST || action->gradient[s->plane] == 0.0) continue;
        const double turn = -bar->expansion * action->gradient[s->plane] * bar->L;
        if (s->mode == SCT_MODE_SYMMETRIC) stretch[i] -= turn;
        if (s->mode == SCT_MODE_TO) stretch[i] -= turn / 2.0;
        if (s->mode == SCT_MODE_FROM) stretch[i] += turn / 2.0;
    }
}

/* Length of a member's projection square to a direction, as a part of its length. */
static double projected(const sct_bar *bar, const double q[3])
{
    const double length = sct_length3(q), along = length > 0.0 ? sct_dot3(q, bar->axes[0]) / length : 0.0;
    return sqrt(fmax(1.0 - along * along, 0.0));
}

static void to_local(const sct_bar *bar, const double v[3], double factor, double local[3])
{
    for (int i = 0; i < 3; i++) local[i] = factor * sct_dot3(bar->axes[i], v);
}

sct_beam_load sct_local_load(const sct_bar *bar, const sct_member_load *load)
{
    sct_beam_load local = {.is_point = load->is_point, .a = load->a, .b = load->b};
    if (load->axes == SCT_AXES_MEMBER) {
        memcpy(local.qa, load->qa, sizeof local.qa);
        memcpy(local.qb, load->qb, sizeof local.qb);
        memcpy(local.F, load->F, sizeof local.F);
        memcpy(local.M, load->M, sizeof local.M);
        return local;
    }
    const bool is_projected = load->axes == SCT_AXES_PROJECTED;
    to_local(bar, load->qa, is_projected ? projected(bar, load->qa) : 1.0, local.qa);
    to_local(bar, load->qb, is_projected ? projected(bar, load->qb) : 1.0, local.qb);
    to_local(bar, load->F, 1.0, local.F);
    to_local(bar, load->M, 1.0, local.M);
    return local;
}

/* end: 3 forces and 3 moments per end, from local to the model's axes. */
static void to_model(const sct_bar *bar, const double local[2][6], double end[2][6])
{
    for (int s = 0; s < 2; s++)
        for (int i = 0; i < 6; i++) {
            const double *v = local[s] + 3 * (i / 3);
            end[s][i] = v[0] * bar->axes[0][i % 3] + v[1] * bar->axes[1][i % 3] + v[2] * bar->axes[2][i % 3];
        }
}

/* A member that is free to twist at one end hands all of it to the joint at the other. */
static bool twist_is_taken(const sct_structure *st, const sct_bar *bar)
{
    const bool *is_free = bar->hinges.free_turn[SCT_TWIST];
    if (is_free[0] && is_free[1]) return false;
    return (!is_free[0] || is_taken(st, bar->to, bar->axes[0])) &&
           (!is_free[1] || is_taken(st, bar->from, bar->axes[0]));
}

static void add_member_load(sct_structure *st, int k, const sct_member_load *load, sct_issues *issues)
{
    sct_bar *bar = &st->bars[load->member];
    if (st->model->members[load->member].tension_only) {
        sct_issue_add(issues, SCT_ERROR, load->where,
                      "member \"%s\" carries tension only: it takes no load between its joints",
                      sct_show(st->model->members[load->member].name).text);
        return;
    }
    const sct_beam_load local = sct_local_load(bar, load);
    bar->is_bent = true;
    if (fabs(local.M[0]) > SCT_TOL_DIRECTION * sct_length3(local.M) && !twist_is_taken(st, bar)) {
        sct_issue_add(issues, SCT_ERROR, load->where,
                      "member \"%s\" is loaded by a twist that neither of its ends takes",
                      sct_show(st->model->members[load->member].name).text);
        return;
    }
    double ends[2][6], end[2][6], on[SCT_MOST_BAR_DOF];
    sct_beam_fixed_ends(bar->L, &bar->hinges, 1, &local, ends);
    to_model(bar, (const double(*)[6])ends, end);
    sct_project_ends(st, bar, end, on);
    for (int i = 0; i < bar->n_dof; i++) st->f[(size_t)k * (size_t)st->n_dof + (size_t)bar->dof[i]] += on[i];
    for (int s = 0; s < 2; s++)
        for (int i = 0; i < 6; i++) joint_load(st, k, s == 0 ? bar->from : bar->to)[i] += end[s][i];
}

void sct_bar_weight(const sct_structure *st, int e, double end[2][6])
{
    const sct_bar *bar = &st->bars[e];
    double down[3] = {0};
    memset(end, 0, sizeof(double[2][6]));
    down[st->dim - 1] = -1.0;
    if (bar->n == 0) {
        for (int s = 0; s < 2; s++) end[s][st->dim - 1] = -bar->half_weight;
        return;
    }
    sct_beam_load own = {.b = bar->L};
    double ends[2][6];
    to_local(bar, down, bar->density * SCT_GRAVITY, own.qa);
    memcpy(own.qb, own.qa, sizeof own.qb);
    sct_beam_fixed_ends(bar->L, &bar->hinges, 1, &own, ends);
    to_model(bar, (const double(*)[6])ends, end);
}

/* ---- settlements ---------------------------------------------------------------------------------------------------
 */

/* Elongation that the settlements of case k force on every spring of a member. */
static void stretch_by_settlement(sct_structure *st, int k)
{
    const size_t joints = (size_t)st->n_joints * 3;
    const double *settled = st->settled + (size_t)k * joints, *turned = st->turned + (size_t)k * joints;
    double *stretch = st->stretch + (size_t)k * (size_t)st->n_springs;
    for (int i = 0; i < st->n_springs; i++) {
        const sct_spring *s = &st->springs[i];
        if (s->bar < 0) continue; /* a support's spring counts what is free */
        const size_t from = 3 * (size_t)st->bars[s->bar].from, to = 3 * (size_t)st->bars[s->bar].to;
        const sct_mode_shape shape = sct_mode_shape_of(st, s);
        double d[3];
        sct_subtract3(settled + to, settled + from, d);
        stretch[i] +=
            sct_dot3(shape.move, d) + sct_dot3(shape.turn[0], turned + from) + sct_dot3(shape.turn[1], turned + to);
    }
}

sct_status sct_add_actions(sct_structure *st, const bool has_member[], bool warned[], sct_issues *issues)
{
    const sct_model *m = st->model;
    const size_t n_cases = (size_t)st->n_cases;
    st->f = calloc(n_cases * (size_t)st->n_dof + 1, sizeof *st->f);
    st->joint_load = calloc(n_cases * (size_t)st->n_joints * 6 + 1, sizeof *st->joint_load);
    st->stretch = calloc(n_cases * (size_t)st->n_springs + 1, sizeof *st->stretch);
    if (st->f == NULL || st->joint_load == NULL || st->stretch == NULL) return SCT_NO_MEMORY;
    find_empty_cases(m, issues);
    for (int k = 0; k < m->n_cases; k++) {
        const sct_case *c = &m->cases[k];
        for (int i = 0; i < c->n_loads; i++) add_joint_load(st, k, &c->loads[i], has_member, warned, issues);
        for (int i = 0; i < c->n_settlements; i++) add_settlement(st, k, &c->settlements[i], issues);
        for (int i = 0; i < c->n_bar_actions; i++) add_bar_action(st, k, &c->bar_actions[i], issues);
        for (int i = 0; i < c->n_member_loads; i++) add_member_load(st, k, &c->member_loads[i], issues);
        if (c->n_settlements > 0) stretch_by_settlement(st, k);
    }
    for (int i = 0; i < st->n_ties; i++)
        st->stretch[(size_t)(m->n_cases + i) * (size_t)st->n_springs + (size_t)st->ties[i]] = 1.0;
    return SCT_OK;
}

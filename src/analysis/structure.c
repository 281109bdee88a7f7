/* From model to numbered structure: geometry and loads are checked here, all faults of a model in one go. */
#include "structure.h"

#include <assert.h>
#include <limits.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/text.h"

static const double TOL_PLACE = 1e-9;     /* of the model's size: nearer joints are at one place */
static const double TOL_DIRECTION = 1e-9; /* relative: part of a vector outside the directions it may have */

static const double LEAST_SIZE =
    1e-6; /* [m] of a whole model: below, lengths squared leave the range of good numbers */

/* At most so many pairs of a joint and a member are looked at for members that pass through a joint: about 0.1 s. */
static const long long MOST_PAIRS = 20 * 1000 * 1000;

static double dot(const double a[3], const double b[3])
{
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

static double length(const double a[3])
{
    return hypot(hypot(a[0], a[1]), a[2]);
}

static void subtract(const double a[3], const double b[3], double d[3])
{
    for (int i = 0; i < 3; i++) d[i] = a[i] - b[i];
}

static bool is_zero(const double a[3])
{
    return a[0] == 0.0 && a[1] == 0.0 && a[2] == 0.0;
}

/* What is left of a outside the span of n orthonormal vectors. */
static void project_off(double a[3], const double v[][3], int n)
{
    for (int pass = 0; pass < 2; pass++) { /* twice is enough (Kahan; Parlett) */
        for (int k = 0; k < n; k++) {
            const double along = dot(a, v[k]);
            for (int i = 0; i < 3; i++) a[i] -= along * v[k][i];
        }
    }
}

static void *array(size_t n, size_t size)
{
    return calloc(n + 1, size); /* + 1: nothing is a pointer too */
}

/* ---- memory ---------------------------------------------------------------------------------------------------- */

void sct_structure_free(sct_structure *st)
{
    if (st == NULL) return;
    free(st->var_of_group);
    free(st->group_of_var);
    free(st->bars);
    free(st->first_dof);
    free(st->n_free);
    free(st->basis);
    free(st->f);
    free(st->stretch);
    free(st->settled);
    free(st);
}

static sct_structure *structure_new(const sct_model *m)
{
    sct_structure *st = calloc(1, sizeof *st);
    if (st == NULL) return NULL;
    const size_t joints = (size_t)m->n_joints, bars = (size_t)m->n_members, groups = (size_t)m->n_groups;
    st->model = m;
    st->dim = m->dimensions;
    st->n_joints = m->n_joints;
    st->n_bars = m->n_members;
    st->n_groups = m->n_groups;
    st->n_cases = m->n_cases;
    st->n_combinations = m->n_combinations;
    st->var_of_group = array(groups, sizeof *st->var_of_group);
    st->group_of_var = array(groups, sizeof *st->group_of_var);
    st->bars = array(bars, sizeof *st->bars);
    st->first_dof = array(joints, sizeof *st->first_dof);
    st->n_free = array(joints, sizeof *st->n_free);
    st->basis = array(joints, sizeof *st->basis);
    st->stretch = array((size_t)m->n_cases * bars, sizeof *st->stretch);
    st->settled = array((size_t)m->n_cases * joints * 3, sizeof *st->settled);
    if (st->var_of_group && st->group_of_var && st->bars && st->first_dof && st->n_free && st->basis && st->stretch &&
        st->settled) {
        return st;
    }
    sct_structure_free(st);
    return NULL;
}

/* ---- geometry -------------------------------------------------------------------------------------------------- */

/* Diagonal of the box around all joints. */
static double model_size(const sct_model *m)
{
    double low[3] = {INFINITY, INFINITY, INFINITY}, high[3] = {-INFINITY, -INFINITY, -INFINITY}, d[3];
    for (int j = 0; j < m->n_joints; j++) {
        for (int i = 0; i < 3; i++) {
            low[i] = fmin(low[i], m->joints[j].at[i]);
            high[i] = fmax(high[i], m->joints[j].at[i]);
        }
    }
    subtract(high, low, d);
    return m->n_joints > 0 ? length(d) : 0.0;
}

static void measure_bars(sct_structure *st, double size, sct_issues *issues)
{
    const sct_model *m = st->model;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_member *member = &m->members[e];
        const sct_joint *from = &m->joints[member->from], *to = &m->joints[member->to];
        const sct_material *material = &m->materials[m->groups[member->group].material];
        sct_bar *bar = &st->bars[e];
        double d[3];
        subtract(to->at, from->at, d);
        *bar = (sct_bar){.from = member->from, .to = member->to, .group = member->group, .L = length(d)};
        bar->E = material->E;
        bar->density = material->density;
        bar->expansion = material->expansion;
        bar->half_weight = bar->density * SCT_GRAVITY * bar->L / 2.0;
        if (!isfinite(size)) {
            sct_issue_add(issues, SCT_ERROR, member->where, "member \"%s\" has no finite length",
                          sct_show(member->name).text);
        } else if (member->from == member->to) {
            sct_issue_add(issues, SCT_ERROR, member->where, "member \"%s\" goes from joint \"%s\" to itself",
                          sct_show(member->name).text, sct_show(from->name).text);
        } else if (!(bar->L > TOL_PLACE * size)) {
            sct_issue_add(issues, SCT_ERROR, member->where,
                          "member \"%s\" has no length: joints \"%s\" and \"%s\" are at one place",
                          sct_show(member->name).text, sct_show(from->name).text, sct_show(to->name).text);
        }
        for (int i = 0; i < 3 && bar->L > 0.0; i++) bar->dir[i] = d[i] / bar->L;
    }
}

/* A thing with a number to sort by; equal numbers keep the order of the indices. */
typedef struct keyed {
    double key;
    int index;
} keyed;

static int by_key(const void *a, const void *b)
{
    const keyed *p = a, *q = b;
    if (p->key != q->key) return p->key < q->key ? -1 : 1;
    return (p->index > q->index) - (p->index < q->index);
}

static double distance(const sct_joint *a, const sct_joint *b)
{
    double d[3];
    subtract(a->at, b->at, d);
    return length(d);
}

/* `sorted`: joints by their place along the longest axis of the model. */
static void find_coincident_joints(const sct_model *m, const keyed sorted[], double tol, sct_issues *issues)
{
    for (int i = 0; i < m->n_joints; i++) {
        for (int k = i + 1; k < m->n_joints && sorted[k].key - sorted[i].key <= tol; k++) {
            const int a = sorted[i].index < sorted[k].index ? sorted[i].index : sorted[k].index;
            const int b = sorted[i].index + sorted[k].index - a;
            if (distance(&m->joints[a], &m->joints[b]) > tol) continue;
            sct_issue_add(issues, SCT_WARNING, m->joints[b].where,
                          "joints \"%s\" and \"%s\" are at the same place and not connected with each other; use one "
                          "joint if they "
                          "are meant to be one",
                          sct_show(m->joints[a].name).text, sct_show(m->joints[b].name).text);
            break; /* one message per joint is enough, and many joints at one place stay cheap */
        }
    }
}

/* Distance of joint p from the inside of a bar; INFINITY when p lies beyond its ends. */
static double distance_from_bar(const sct_structure *st, const sct_bar *bar, int p, double tol)
{
    const sct_joint *joints = st->model->joints;
    double d[3];
    subtract(joints[p].at, joints[bar->from].at, d);
    const double along = dot(d, bar->dir);
    if (!(along > tol && along < bar->L - tol)) return INFINITY;
    for (int i = 0; i < 3; i++) d[i] -= along * bar->dir[i];
    return length(d);
}

static int first_at_least(const keyed sorted[], int n, double key)
{
    int low = 0, high = n;
    while (low < high) {
        const int mid = low + (high - low) / 2;
        if (sorted[mid].key < key)
            low = mid + 1;
        else
            high = mid;
    }
    return low;
}

static void find_passing_bars(const sct_structure *st, const keyed sorted[], int axis, double tol, sct_issues *issues)
{
    const sct_model *m = st->model;
    long long pairs = 0;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        const double a = m->joints[bar->from].at[axis], b = m->joints[bar->to].at[axis];
        const double low = fmin(a, b) - tol, high = fmax(a, b) + tol;
        for (int k = first_at_least(sorted, m->n_joints, low); k < m->n_joints && sorted[k].key <= high; k++) {
            const int p = sorted[k].index;
            if (++pairs > MOST_PAIRS) return;
            if (p == bar->from || p == bar->to || distance_from_bar(st, bar, p, tol) > tol) continue;
            sct_issue_add(issues, SCT_WARNING, m->members[e].where,
                          "member \"%s\" passes through joint \"%s\" without being connected to it",
                          sct_show(m->members[e].name).text, sct_show(m->joints[p].name).text);
        }
    }
}

static int longest_axis(const sct_model *m)
{
    double low[3], high[3];
    int axis = 0;
    for (int i = 0; i < 3; i++) {
        low[i] = high[i] = m->joints[0].at[i];
        for (int j = 1; j < m->n_joints; j++) {
            low[i] = fmin(low[i], m->joints[j].at[i]);
            high[i] = fmax(high[i], m->joints[j].at[i]);
        }
        if (high[i] - low[i] > high[axis] - low[axis]) axis = i;
    }
    return axis;
}

/* Members by their two joints, to find those that share both. */
typedef struct ends {
    int low, high, member;
} ends;

static int by_ends(const void *a, const void *b)
{
    const ends *p = a, *q = b;
    if (p->low != q->low) return p->low < q->low ? -1 : 1;
    if (p->high != q->high) return p->high < q->high ? -1 : 1;
    return (p->member > q->member) - (p->member < q->member);
}

static bool find_parallel_members(const sct_model *m, sct_issues *issues)
{
    ends *list = array((size_t)m->n_members, sizeof *list);
    if (list == NULL) return false;
    for (int e = 0; e < m->n_members; e++) {
        const int a = m->members[e].from, b = m->members[e].to;
        list[e] = (ends){.low = a < b ? a : b, .high = a < b ? b : a, .member = e};
    }
    qsort(list, (size_t)m->n_members, sizeof *list, by_ends);
    for (int k = 1; k < m->n_members; k++) {
        if (list[k].low != list[k - 1].low || list[k].high != list[k - 1].high) continue;
        const sct_member *first = &m->members[list[k - 1].member], *second = &m->members[list[k].member];
        sct_issue_add(issues, SCT_WARNING, second->where,
                      "members \"%s\" and \"%s\" join the same two joints; they act side by side",
                      sct_show(first->name).text, sct_show(second->name).text);
    }
    free(list);
    return true;
}

/* Things that are odd but can be analysed. False when out of memory. */
static bool find_oddities(const sct_structure *st, double size, sct_issues *issues)
{
    const sct_model *m = st->model;
    const int axis = longest_axis(m);
    keyed *sorted = array((size_t)m->n_joints, sizeof *sorted);
    if (sorted == NULL) return false;
    for (int j = 0; j < m->n_joints; j++) sorted[j] = (keyed){.key = m->joints[j].at[axis], .index = j};
    qsort(sorted, (size_t)m->n_joints, sizeof *sorted, by_key);
    find_coincident_joints(m, sorted, TOL_PLACE * size, issues);
    find_passing_bars(st, sorted, axis, TOL_PLACE * size, issues);
    free(sorted);
    return find_parallel_members(m, issues);
}

/* ---- unknowns -------------------------------------------------------------------------------------------------- */

/* Orthonormal vectors of the same span as the held directions; returns how many. */
static int held_span(const sct_joint *joint, double span[3][3])
{
    int n = 0;
    for (int k = 0; k < joint->n_held; k++) {
        memcpy(span[n], joint->held[k], sizeof span[n]);
        project_off(span[n], (const double(*)[3])span, n);
        const double left = length(span[n]);
        if (!(left > TOL_DIRECTION)) continue; /* says nothing new; the reader refuses it */
        for (int i = 0; i < 3; i++) span[n][i] /= left;
        n++;
    }
    return n;
}

/* The free directions: what the axes leave outside the held span, farthest axis first, so that a support along axes
 * keeps the axes themselves. */
static int free_directions(const sct_joint *joint, int dim, double basis[3][3])
{
    double all[3][3] = {{0}};
    const int n_held = held_span(joint, all);
    for (int n = n_held; n < dim; n++) {
        double best[3] = {0}, best_length = 0.0;
        for (int axis = 0; axis < dim; axis++) {
            double e[3] = {0};
            e[axis] = 1.0;
            project_off(e, (const double(*)[3])all, n);
            const double left = length(e);
            if (!(left > best_length * (1.0 + 1e-12))) continue; /* ties go to the first axis */
            best_length = left;
            memcpy(best, e, sizeof best);
        }
        for (int i = 0; i < 3; i++) all[n][i] = best[i] / best_length;
        memcpy(basis[n - n_held], all[n], sizeof all[n]);
    }
    return dim - n_held;
}

/* Numbers the unknowns in the order of the joints; `has_member` per joint. */
static void number_unknowns(sct_structure *st, const bool has_member[])
{
    for (int j = 0; j < st->n_joints; j++) {
        st->first_dof[j] = st->n_dof;
        st->n_free[j] = has_member[j] ? free_directions(&st->model->joints[j], st->dim, st->basis[j]) : 0;
        st->n_dof += st->n_free[j];
    }
}

/* Adds the unknowns of one joint of a bar; sign -1 at `from`, +1 at `to`. */
static void add_end(const sct_structure *st, sct_bar *bar, int joint, double sign)
{
    for (int i = 0; i < st->n_free[joint]; i++) {
        const double *v = st->basis[joint][i];
        bar->dof[bar->n_dof] = st->first_dof[joint] + i;
        bar->b[bar->n_dof] = sign * dot(v, bar->dir);
        bar->w[bar->n_dof] = -bar->half_weight * v[st->dim - 1];
        bar->n_dof++;
    }
}

static void number_groups(sct_structure *st)
{
    for (int g = 0; g < st->n_groups; g++) {
        const sct_sizing_kind kind = st->model->groups[g].kind;
        const bool is_sized = kind == SCT_FREE_AREA || kind == SCT_LADDER;
        st->var_of_group[g] = is_sized ? st->n_vars : -1;
        if (is_sized) st->group_of_var[st->n_vars++] = g;
    }
}

/* ---- loads ----------------------------------------------------------------------------------------------------- */

static bool case_is_empty(const sct_case *c)
{
    bool empty = c->self_weight == 0.0;
    for (int i = 0; i < c->n_loads && empty; i++) empty = is_zero(c->loads[i].F);
    for (int i = 0; i < c->n_settlements && empty; i++) empty = is_zero(c->settlements[i].d);
    for (int i = 0; i < c->n_bar_actions && empty; i++) {
        empty = c->bar_actions[i].dT == 0.0 && c->bar_actions[i].lack == 0.0;
    }
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

/* warned: per joint, that a load there goes to the support. */
static void add_joint_load(sct_structure *st, int k, const sct_joint_load *load, const bool has_member[], bool warned[],
                           sct_issues *issues)
{
    const sct_joint *joint = &st->model->joints[load->joint];
    if (is_zero(load->F)) return;
    if (!has_member[load->joint]) {
        sct_issue_add(issues, SCT_ERROR, load->where, "joint \"%s\" carries a load but has no members",
                      sct_show(joint->name).text);
        return;
    }
    double *f = st->f + (size_t)k * (size_t)st->n_dof;
    double largest = 0.0;
    for (int i = 0; i < st->n_free[load->joint]; i++) {
        const double along = dot(st->basis[load->joint][i], load->F);
        f[st->first_dof[load->joint] + i] += along;
        largest = fmax(largest, fabs(along));
    }
    if (largest > TOL_DIRECTION * length(load->F) || warned[load->joint]) return;
    warned[load->joint] = true;
    sct_issue_add(issues, SCT_WARNING, load->where, "the load at joint \"%s\" goes straight to its support",
                  sct_show(joint->name).text);
}

static void add_settlement(sct_structure *st, int k, const sct_settlement *settlement, sct_issues *issues)
{
    const sct_joint *joint = &st->model->joints[settlement->joint];
    double span[3][3], outside[3];
    const int n = held_span(joint, span);
    memcpy(outside, settlement->d, sizeof outside);
    project_off(outside, (const double(*)[3])span, n);
    if (length(outside) > TOL_DIRECTION * length(settlement->d)) {
        sct_issue_add(issues, SCT_ERROR, settlement->where,
                      "settlement of joint \"%s\" in a direction that is not held; only held directions can be moved",
                      sct_show(joint->name).text);
        return;
    }
    double *settled = st->settled + ((size_t)k * (size_t)st->n_joints + (size_t)settlement->joint) * 3;
    for (int i = 0; i < 3; i++) settled[i] += settlement->d[i];
}

static void add_bar_action(sct_structure *st, int k, const sct_bar_action *action, sct_issues *issues)
{
    const sct_bar *bar = &st->bars[action->member];
    double *stretch = st->stretch + (size_t)k * (size_t)st->n_bars + action->member;
    if (action->dT != 0.0 && isnan(bar->expansion)) {
        const sct_group *group = &st->model->groups[bar->group];
        sct_issue_add(issues, SCT_ERROR, action->where,
                      "member \"%s\" is warmed but its material \"%s\" has no \"expansion\"",
                      sct_show(st->model->members[action->member].name).text,
                      sct_show(st->model->materials[group->material].name).text);
    } else if (action->dT != 0.0) {
        *stretch -= bar->expansion * action->dT * bar->L;
    }
    *stretch -= action->lack;
}

/* Elongation that the settlements of case k force on every bar. */
static void stretch_by_settlement(sct_structure *st, int k)
{
    const double *settled = st->settled + (size_t)k * (size_t)st->n_joints * 3;
    double *stretch = st->stretch + (size_t)k * (size_t)st->n_bars;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        double d[3];
        subtract(settled + 3 * (size_t)bar->to, settled + 3 * (size_t)bar->from, d);
        stretch[e] += dot(bar->dir, d);
    }
}

static sct_status add_loads(sct_structure *st, const bool has_member[], bool warned[], sct_issues *issues)
{
    const sct_model *m = st->model;
    st->f = array((size_t)st->n_cases * (size_t)st->n_dof, sizeof *st->f);
    if (st->f == NULL) return SCT_NO_MEMORY;
    find_empty_cases(m, issues);
    for (int k = 0; k < st->n_cases; k++) {
        const sct_case *c = &m->cases[k];
        for (int i = 0; i < c->n_loads; i++) add_joint_load(st, k, &c->loads[i], has_member, warned, issues);
        for (int i = 0; i < c->n_settlements; i++) add_settlement(st, k, &c->settlements[i], issues);
        for (int i = 0; i < c->n_bar_actions; i++) add_bar_action(st, k, &c->bar_actions[i], issues);
        if (c->n_settlements > 0) stretch_by_settlement(st, k);
    }
    return SCT_OK;
}

/* ---- building -------------------------------------------------------------------------------------------------- */

/* Joints without members are left out of the equations; said once for each. */
static void find_lonely_joints(const sct_model *m, bool has_member[], sct_issues *issues)
{
    for (int e = 0; e < m->n_members; e++) has_member[m->members[e].from] = has_member[m->members[e].to] = true;
    for (int j = 0; j < m->n_joints; j++) {
        if (has_member[j]) continue;
        sct_issue_add(issues, SCT_WARNING, m->joints[j].where, "joint \"%s\" has no members; it is left out",
                      sct_show(m->joints[j].name).text);
    }
}

/* flags: 2 x n_joints, false. */
static sct_status build(sct_structure *st, bool flags[], sct_issues *issues)
{
    const sct_model *m = st->model;
    bool *has_member = flags, *warned = flags + m->n_joints;
    const double size = model_size(m);
    const int errors_before = sct_issues_errors(issues);
    if (size > 0.0 && size < LEAST_SIZE)
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = m->file},
                      "all joints lie within %.3g m of each other; is \"length\" in /units the right unit?", size);
    measure_bars(st, size, issues);
    if (sct_issues_errors(issues) > errors_before) return SCT_BAD_INPUT; /* no directions to go on with */
    if (!find_oddities(st, size, issues)) return SCT_NO_MEMORY;
    find_lonely_joints(m, has_member, issues);
    number_unknowns(st, has_member);
    number_groups(st);
    for (int e = 0; e < st->n_bars; e++) {
        add_end(st, &st->bars[e], st->bars[e].from, -1.0);
        add_end(st, &st->bars[e], st->bars[e].to, 1.0);
    }
    const sct_status loaded = add_loads(st, has_member, warned, issues);
    if (loaded != SCT_OK) return loaded;
    return sct_issues_errors(issues) > errors_before ? SCT_BAD_INPUT : SCT_OK;
}

/* SCT_TOO_LARGE when indices of the stiffness matrix or of the results would not fit an int. */
static sct_status check_size(const sct_model *m, sct_issues *issues)
{
    const double entries = 21.0 * m->n_members + 3.0 * m->n_joints;
    const double results = ((double)m->n_cases + m->n_combinations) * (3.0 * m->n_joints + m->n_members);
    double checks = (double)m->n_combinations * m->n_members;
    for (int i = 0; i < m->n_deflections; i++) checks += (double)m->n_combinations * m->deflections[i].n_joints;
    if (entries < INT_MAX && results < INT_MAX && checks < INT_MAX) return SCT_OK;
    sct_issue_add(issues, SCT_ERROR, (sct_where){.file = m->file},
                  "the model is too large: %d members and %d joints with %d cases and %d combinations", m->n_members,
                  m->n_joints, m->n_cases, m->n_combinations);
    return SCT_TOO_LARGE;
}

sct_status sct_structure_build(const sct_model *model, sct_structure **structure, sct_issues *issues)
{
    *structure = NULL;
    assert(issues != NULL); /* its errors are the verdict */
    if (model->n_members == 0) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = model->file}, "the model has no members");
        return SCT_BAD_INPUT;
    }
    sct_status status = check_size(model, issues);
    if (status != SCT_OK) return status;
    sct_structure *st = structure_new(model);
    bool *flags = array(2 * (size_t)model->n_joints, sizeof *flags);
    status = st != NULL && flags != NULL ? build(st, flags, issues) : SCT_NO_MEMORY;
    free(flags);
    if (status == SCT_OK)
        *structure = st;
    else
        sct_structure_free(st);
    return status;
}

void sct_structure_weight(const sct_structure *st, const double A[], double weight[])
{
    for (int i = 0; i < st->n_dof; i++) weight[i] = 0.0;
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        for (int i = 0; i < bar->n_dof; i++) weight[bar->dof[i]] += A[bar->group] * bar->w[i];
    }
}

void sct_joint_displacement(const sct_structure *st, const double u[], const double *settled, int joint, double d[3])
{
    for (int i = 0; i < 3; i++) d[i] = settled != NULL ? settled[3 * (size_t)joint + (size_t)i] : 0.0;
    for (int k = 0; k < st->n_free[joint]; k++) {
        for (int i = 0; i < 3; i++) d[i] += st->basis[joint][k][i] * u[st->first_dof[joint] + k];
    }
}

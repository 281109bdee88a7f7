/* From model to numbered structure: geometry and loads are checked on the way, all faults of a model in one go. */
#include "structure.h"

#include <assert.h>
#include <limits.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/structure_parts.h"
#include "base/text.h"
#include "base/vector.h"
#include "model/axes.h"

static const double TOL_PLACE = 1e-9; /* of the model's size: nearer joints are at one place */

static const double LEAST_SIZE =
    1e-6; /* [m] of a whole model: below, lengths squared leave the range of good numbers */

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
    free(st->springs);
    free(st->n_turns);
    free(st->turn_basis);
    free(st->dof_pool);
    free(st->b_pool);
    free(st->ties);
    free(st->factor);
    free(st->self_weight);
    free(st->f);
    free(st->joint_load);
    free(st->stretch);
    free(st->settled);
    free(st->turned);
    free(st);
}

static int count_ties(const sct_model *m)
{
    int n = 0;
    for (int e = 0; e < m->n_members; e++) n += m->members[e].tension_only;
    return n;
}

static sct_structure *structure_new(const sct_model *m)
{
    sct_structure *st = calloc(1, sizeof *st);
    if (st == NULL) return NULL;
    const size_t joints = (size_t)m->n_joints, bars = (size_t)m->n_members, groups = (size_t)m->n_groups;
    st->n_ties = count_ties(m);
    st->model = m;
    st->dim = m->dimensions;
    st->n_joints = m->n_joints;
    st->n_bars = m->n_members;
    st->n_groups = m->n_groups;
    st->n_cases = m->n_cases + st->n_ties;
    st->n_combinations = m->n_combinations;
    const size_t cases = (size_t)st->n_cases;
    st->ties = array((size_t)st->n_ties, sizeof *st->ties);
    st->factor = array((size_t)m->n_combinations * cases, sizeof *st->factor);
    st->self_weight = array(cases, sizeof *st->self_weight);
    st->var_of_group = array(groups, sizeof *st->var_of_group);
    st->group_of_var = array(groups, sizeof *st->group_of_var);
    st->bars = array(bars, sizeof *st->bars);
    st->first_dof = array(joints, sizeof *st->first_dof);
    st->n_free = array(joints, sizeof *st->n_free);
    st->basis = array(joints, sizeof *st->basis);
    st->n_turns = array(joints, sizeof *st->n_turns);
    st->turn_basis = array(joints, sizeof *st->turn_basis);
    st->settled = array(cases * joints * 3, sizeof *st->settled);
    st->turned = array(cases * joints * 3, sizeof *st->turned);
    if (st->var_of_group && st->group_of_var && st->bars && st->first_dof && st->n_free && st->basis && st->n_turns &&
        st->turn_basis && st->settled && st->turned && st->ties && st->factor && st->self_weight) {
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
    sct_subtract3(high, low, d);
    return m->n_joints > 0 ? sct_length3(d) : 0.0;
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
        sct_subtract3(to->at, from->at, d);
        *bar = (sct_bar){.from = member->from, .to = member->to, .group = member->group, .L = sct_length3(d)};
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
        for (int s = 0; s < 2; s++)
            for (int r = 0; r < SCT_TURNS; r++) bar->hinges.free_turn[r][s] = member->end[s].fixity[r] == SCT_PINNED;
    }
}

static void find_axes(sct_structure *st, int e, sct_issues *issues)
{
    const sct_member *member = &st->model->members[e];
    if (sct_member_axes(st->model, member, st->bars[e].axes)) return;
    sct_issue_add(issues, SCT_ERROR, member->where,
                  "\"up\" of member \"%s\" points along the member; it must point across it",
                  sct_show(member->name).text);
}

static void find_lever(sct_structure *st)
{
    double sum = 0.0;
    for (int e = 0; e < st->n_bars; e++) sum += st->bars[e].L;
    st->lever = sum / st->n_bars;
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

static void number_cases(sct_structure *st)
{
    const sct_model *m = st->model;
    for (int k = 0; k < m->n_cases; k++) st->self_weight[k] = m->cases[k].self_weight;
    for (int c = 0; c < m->n_combinations; c++)
        memcpy(st->factor + (size_t)c * (size_t)st->n_cases, m->combinations[c].factor,
               (size_t)m->n_cases * sizeof *st->factor);
    for (int e = 0, n = 0; e < m->n_members; e++)
        if (m->members[e].tension_only) st->ties[n++] = e;
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
    for (int e = 0; e < st->n_bars; e++) find_axes(st, e, issues);
    if (!sct_find_oddities(st, TOL_PLACE * size, issues)) return SCT_NO_MEMORY;
    find_lonely_joints(m, has_member, issues);
    sct_number_freedoms(st, has_member);
    number_groups(st);
    number_cases(st);
    find_lever(st);
    sct_status status = sct_list_springs(st, issues);
    if (status == SCT_OK) status = sct_add_actions(st, has_member, warned, issues);
    if (status != SCT_OK) return status;
    return sct_issues_errors(issues) > errors_before ? SCT_BAD_INPUT : SCT_OK;
}

/* SCT_TOO_LARGE when indices of the stiffness matrix or of the results would not fit an int. */
static sct_status check_size(const sct_model *m, sct_issues *issues)
{
    const double entries = (m->dimensions == 2 ? 52.0 : 411.0) * m->n_members + 6.0 * m->n_joints;
    const double row = 3.0 * m->n_joints + m->n_members, results = ((double)m->n_cases + m->n_combinations) * row;
    double checks = (double)m->n_combinations * m->n_members;
    for (int i = 0; i < m->n_deflections; i++) checks += (double)m->n_combinations * m->deflections[i].n_joints;
    if (entries < INT_MAX && results < INT_MAX && checks < INT_MAX && results + count_ties(m) * row < INT_MAX)
        return SCT_OK;
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

void sct_joint_rotation(const sct_structure *st, const double u[], const double *turned, int joint, double theta[3])
{
    const int first = st->first_dof[joint] + st->n_free[joint];
    for (int i = 0; i < 3; i++) theta[i] = turned != NULL ? turned[3 * (size_t)joint + (size_t)i] : 0.0;
    for (int k = 0; k < st->n_turns[joint]; k++) {
        for (int i = 0; i < 3; i++) theta[i] += st->turn_basis[joint][k][i] * u[first + k];
    }
}

void sct_bar_pull(const sct_structure *st, const double S[], int e, double end[2][6])
{
    const sct_bar *bar = &st->bars[e];
    memset(end, 0, sizeof(double[2][6]));
    for (int k = -1; k < bar->n; k++) {
        const int i = k < 0 ? e : bar->first + k;
        const sct_mode_shape shape = sct_mode_shape_of(st, &st->springs[i]);
        for (int s = 0; s < 2; s++) {
            for (int x = 0; x < 3; x++) {
                end[s][x] -= S[i] * (s == 0 ? -shape.move[x] : shape.move[x]);
                end[s][3 + x] -= S[i] * shape.turn[s][x];
            }
        }
    }
}

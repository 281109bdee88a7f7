/* A second model, its beams in pieces, and its stiffness. */
#include "analysis/fine.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

struct sct_fine {
    const sct_structure *coarse;
    sct_arena *arena; /* of the model and the arrays below */
    sct_model *model;
    int *first; /* n_bars + 1: pieces of member e are first[e] .. first[e + 1] - 1 */
    int *inner; /* n_bars: the first joint inside a member */
    sct_structure *st;
    sct_solver *solver;
    sct_response response; /* not used, but analysing is the way to fill and factor */
    bool is_factored;      /* the factor is that of the stiffness */
    bool has_left_out;
    bool *left_out; /* pieces */
    double *K;      /* values on the pattern, where some are left out */
};

/* ---- dividing --------------------------------------------------------------------------------------------------- */

static bool states_inertia(const sct_model *m, int group, int plane)
{
    const sct_group *g = &m->groups[group];
    const bool is_area = g->kind == SCT_FREE_AREA || g->kind == SCT_HELD_AREA;
    return !is_area || g->I[plane].c > 0.0; /* sections have both */
}

static int count_pieces(const sct_structure *st, int e, int pieces)
{
    if (st->bars[e].n == 0) return 1;
    for (int plane = 0; plane < st->dim - 1; plane++)
        if (!states_inertia(st->model, st->bars[e].group, plane)) return 1;
    return pieces;
}

/* Inside, a member is continuous; it passes twist on unless an end lets it go. */
static sct_member_end inner_end(const sct_member *member)
{
    sct_member_end end = {.fixity = {SCT_FIXED, SCT_FIXED, SCT_FIXED}};
    for (int s = 0; s < 2; s++)
        if (member->end[s].fixity[SCT_TWIST] == SCT_PINNED) end.fixity[SCT_TWIST] = SCT_PINNED;
    return end;
}

/* Both ends let twist go as soon as one does, so that no piece ends in a twist of its own. */
static sct_member_end outer_end(const sct_member *member, int s)
{
    sct_member_end end = member->end[s];
    if (inner_end(member).fixity[SCT_TWIST] == SCT_PINNED) end.fixity[SCT_TWIST] = SCT_PINNED;
    return end;
}

static void add_joints(sct_fine *f, int e)
{
    const sct_member *member = &f->coarse->model->members[e];
    const sct_joint *joints = f->coarse->model->joints;
    const double *a = joints[member->from].at, *b = joints[member->to].at;
    const int n = f->first[e + 1] - f->first[e];
    f->inner[e] = f->model->n_joints;
    for (int k = 1; k < n; k++) {
        sct_joint *joint = &f->model->joints[f->model->n_joints++];
        *joint = (sct_joint){.name = member->name, .where = member->where};
        for (int i = 0; i < 3; i++) joint->at[i] = a[i] + (b[i] - a[i]) * k / n;
    }
}

static void add_pieces(sct_fine *f, int e)
{
    const sct_member *member = &f->coarse->model->members[e];
    const int n = f->first[e + 1] - f->first[e];
    for (int k = 0; k < n; k++) {
        sct_member *piece = &f->model->members[f->model->n_members++];
        *piece = *member;
        piece->from = sct_fine_joint(f, e, k);
        piece->to = sct_fine_joint(f, e, k + 1);
        memcpy(piece->up, f->coarse->bars[e].axes[1], sizeof piece->up);
        piece->roll = 0.0;
        piece->tension_only = false; /* no combinations here */
        if (n == 1) continue;
        piece->end[0] = k == 0 ? outer_end(member, 0) : inner_end(member);
        piece->end[1] = k == n - 1 ? outer_end(member, 1) : inner_end(member);
    }
}

/* Everything but joints and members is shared with the structure's model. One case: own weight, since a structure
 * without loads is refused. */
static sct_model *new_model(sct_arena *arena, const sct_model *m, size_t n_joints, size_t n_members)
{
    sct_model *fine = sct_arena_array(arena, 1, sizeof *fine);
    sct_case *weight = sct_arena_array(arena, 1, sizeof *weight);
    sct_joint *joints = sct_arena_array(arena, n_joints, sizeof *joints);
    sct_member *members = sct_arena_array(arena, n_members, sizeof *members);
    if (fine == NULL || weight == NULL || joints == NULL || members == NULL) return NULL;
    *weight = (sct_case){.name = "", .action = "permanent", .self_weight = 1.0};
    memcpy(joints, m->joints, (size_t)m->n_joints * sizeof *joints);
    *fine = *m;
    fine->arena = arena;
    fine->joints = joints;
    fine->members = members;
    fine->n_members = 0;
    fine->cases = weight;
    fine->n_cases = 1;
    fine->n_combinations = fine->n_deflections = fine->n_runs = fine->n_bows = 0;
    return fine;
}

static sct_status divide(sct_fine *f, int pieces)
{
    const sct_structure *coarse = f->coarse;
    const size_t bars = (size_t)coarse->n_bars;
    f->first = sct_arena_array(f->arena, bars + 1, sizeof *f->first);
    f->inner = sct_arena_array(f->arena, bars, sizeof *f->inner);
    if (f->first == NULL || f->inner == NULL) return SCT_NO_MEMORY;
    for (int e = 0; e < coarse->n_bars; e++) f->first[e + 1] = f->first[e] + count_pieces(coarse, e, pieces);
    const size_t members = (size_t)f->first[bars], joints = (size_t)coarse->n_joints + members - bars;
    f->model = new_model(f->arena, coarse->model, joints, members);
    if (f->model == NULL) return SCT_NO_MEMORY;
    for (int e = 0; e < coarse->n_bars; e++) add_joints(f, e);
    for (int e = 0; e < coarse->n_bars; e++) add_pieces(f, e);
    return SCT_OK;
}

/* What there is to say about the model has been said about the structure: these issues are dropped. */
static sct_status build(sct_fine *f)
{
    sct_issues *issues = sct_issues_new();
    if (issues == NULL) return SCT_NO_MEMORY;
    const sct_status status = sct_structure_build(f->model, &f->st, issues);
    sct_issues_free(issues);
    return status;
}

/* For what is left out: nothing where no bar can be. */
static sct_status make_room(sct_fine *f)
{
    const sct_pattern *pattern;
    if (f->coarse->n_ties == 0) return SCT_OK;
    sct_solver_stiffness(f->solver, &pattern);
    f->left_out = sct_arena_array(f->arena, (size_t)f->st->n_bars, sizeof *f->left_out);
    f->K = sct_arena_array(f->arena, (size_t)pattern->column[pattern->n], sizeof *f->K);
    return f->left_out != NULL && f->K != NULL ? SCT_OK : SCT_NO_MEMORY;
}

sct_fine *sct_fine_new(const sct_structure *coarse, int pieces, sct_engine engine, sct_status *status)
{
    sct_fine *f = calloc(1, sizeof *f);
    *status = SCT_NO_MEMORY;
    if (f == NULL) return NULL;
    f->coarse = coarse;
    f->arena = sct_arena_new();
    if (f->arena != NULL) *status = divide(f, pieces);
    if (*status == SCT_OK) *status = build(f);
    if (*status == SCT_OK) f->solver = sct_solver_new(f->st, engine, status);
    if (*status == SCT_OK) *status = sct_response_new(f->st, &f->response);
    if (*status == SCT_OK) *status = make_room(f);
    if (*status == SCT_OK) return f;
    sct_fine_free(f);
    return NULL;
}

void sct_fine_free(sct_fine *f)
{
    if (f == NULL) return;
    sct_response_free(&f->response);
    sct_solver_free(f->solver);
    sct_structure_free(f->st);
    sct_arena_free(f->arena);
    free(f);
}

/* ---- stiffness -------------------------------------------------------------------------------------------------- */

sct_status sct_fine_update(sct_fine *f, const sct_properties sizes[])
{
    const sct_status status = sct_solver_analyse_sizes(f->solver, sizes, &f->response);
    f->is_factored = status == SCT_OK;
    f->has_left_out = false;
    return status;
}

/* K once more, without what is left out. */
static void assemble(sct_fine *f)
{
    const sct_pattern *pattern;
    const double *stiffness = sct_solver_stiffnesses(f->solver);
    sct_solver_stiffness(f->solver, &pattern);
    memset(f->K, 0, (size_t)pattern->column[pattern->n] * sizeof *f->K);
    for (int s = 0; s < f->st->n_springs; s++) {
        const sct_spring *spring = &f->st->springs[s];
        const int *place = sct_solver_places(f->solver, s);
        if (s < f->st->n_bars && f->left_out[s]) continue;
        for (int j = 0; j < spring->n_dof; j++)
            for (int i = 0; i <= j; i++) f->K[*place++] += stiffness[s] * spring->b[i] * spring->b[j];
    }
}

void sct_fine_leave_out(sct_fine *f, const bool left_out[])
{
    bool any = false;
    for (int e = 0; left_out != NULL && e < f->coarse->n_bars; e++) any = any || left_out[e];
    if (!any && !f->has_left_out) return;
    f->has_left_out = any;
    f->is_factored = false;
    for (int e = 0; e < f->coarse->n_bars; e++) f->left_out[f->first[e]] = any && left_out[e];
    if (any) assemble(f);
}

const double *sct_fine_stiffness(const sct_fine *f, const sct_pattern **pattern)
{
    const double *K = sct_solver_stiffness(f->solver, pattern);
    return f->has_left_out ? f->K : K;
}

sct_factor *sct_fine_factor(sct_fine *f, sct_status *status)
{
    const sct_pattern *pattern;
    const double *K = sct_fine_stiffness(f, &pattern);
    *status = f->is_factored ? SCT_OK : sct_factor_update(sct_fine_factor_now(f), K, NULL);
    f->is_factored = *status == SCT_OK;
    return f->is_factored ? sct_fine_factor_now(f) : NULL;
}

sct_status sct_fine_factor_other(sct_fine *f, const double values[])
{
    f->is_factored = false;
    return sct_factor_update(sct_fine_factor_now(f), values, NULL);
}

sct_factor *sct_fine_factor_now(sct_fine *f)
{
    return sct_solver_factor(f->solver);
}

void sct_fine_stiffness_derivative(const sct_fine *f, const double x[], const double y[], double D[])
{
    const sct_properties *sizes = sct_solver_sizes(f->solver);
    const double *k = sct_solver_stiffnesses(f->solver);
    for (int v = 0; v < f->st->n_vars; v++) D[v] = 0.0;
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *s = &f->st->springs[e];
        const int var = s->group < 0 ? -1 : f->st->var_of_group[s->group];
        if (var < 0 || (f->has_left_out && e < f->st->n_bars && f->left_out[e])) continue;
        double bx = 0.0, by = 0.0;
        for (int i = 0; i < s->n_dof; i++) {
            bx += s->b[i] * x[s->dof[i]];
            by += s->b[i] * y[s->dof[i]];
        }
        D[var] += k[e] * sizes[s->group].d1[s->property] / sizes[s->group].P[s->property] * bx * by;
    }
}

/* ---- its parts -------------------------------------------------------------------------------------------------- */

const sct_structure *sct_fine_structure(const sct_fine *f)
{
    return f->st;
}

const sct_structure *sct_fine_coarse(const sct_fine *f)
{
    return f->coarse;
}

const sct_solver *sct_fine_solver(const sct_fine *f)
{
    return f->solver;
}

int sct_fine_pieces(const sct_fine *f, int member, int *first)
{
    *first = f->first[member];
    return f->first[member + 1] - f->first[member];
}

int sct_fine_joint(const sct_fine *f, int member, int k)
{
    const sct_member *m = &f->coarse->model->members[member];
    if (k == 0) return m->from;
    return k == f->first[member + 1] - f->first[member] ? m->to : f->inner[member] + k - 1;
}

void sct_fine_shape(const sct_fine *f, const double x[], double shape[])
{
    double largest = 0.0;
    for (int j = 0; j < f->st->n_joints; j++) {
        double *d = shape + 3 * (size_t)j;
        sct_joint_displacement(f->st, x, NULL, j, d);
        for (int i = 0; i < 3; i++)
            if (fabs(d[i]) > fabs(largest)) largest = d[i];
    }
    for (size_t i = 0; i < 3 * (size_t)f->st->n_joints && largest != 0.0; i++) shape[i] /= largest;
}

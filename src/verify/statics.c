/* A second analysis of a model.
 *
 * With P the projection of a joint onto what its support leaves free, the displacements (and rotations) are u =
 * settlement + P x, and x solves (P K P + c (I - P)) x = P (load - forces of the settlement). */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/random.h"
#include "verify/work.h"

static const long double GRAVITY = 9.80665L; /* [m/s2] standard value, ISO 80000-3 */
static const double COSINE = 4e-16;          /* rounding of a direction cosine: four units */

static void work_free(sct_work *w)
{
    free(w->dir);
    free(w->L);
    free(w->k);
    free(w->c[0]);
    free(w->c[1]);
    sct_matrix_free(w->matrix);
    free(w->b);
    free(w->step);
    free(w->u);
    free(w->settled);
    free(w->load);
    free(w->r);
    free(w->free_part);
    free(w->held);
}

/* ---- geometry -----------------------------------------------------------------------------------------------------
 */

static bool allocate_members(sct_work *w)
{
    const size_t members = (size_t)w->m->n_members + 1;
    w->dir = calloc(members, sizeof *w->dir);
    w->L = calloc(members, sizeof *w->L);
    w->k = calloc(members, sizeof *w->k);
    w->free_part = calloc(members, sizeof *w->free_part);
    w->out->element_of = calloc(members, sizeof *w->out->element_of);
    return w->dir && w->L && w->k && w->free_part && w->out->element_of;
}

static void measure_members(sct_work *w)
{
    for (int e = 0; e < w->m->n_members; e++) {
        const sct_member *member = &w->m->members[e];
        const double *a = w->m->joints[member->from].at, *b = w->m->joints[member->to].at;
        long double square = 0.0L;
        for (int i = 0; i < 3; i++) {
            w->dir[e][i] = (long double)b[i] - a[i];
            square += w->dir[e][i] * w->dir[e][i];
        }
        w->L[e] = sqrtl(square);
        for (int i = 0; i < 3; i++) w->dir[e][i] /= w->L[e];
        const int g = member->group;
        w->k[e] = (long double)w->m->materials[w->m->groups[g].material].E * w->sections[g].A / w->L[e];
        if (w->left_out != NULL && w->left_out[e]) w->k[e] = 0.0L;
        w->lever += (double)w->L[e] / w->m->n_members;
    }
}

/* Which members are elements, and how many loads they carry; true: some joint turns. */
static bool count_elements(sct_work *w, size_t *n_loads)
{
    sct_statics *out = w->out;
    bool has_turns = false;
    for (int e = 0; e < w->m->n_members; e++) {
        out->element_of[e] = sct_element_is_beam(w->m, e) ? 0 : -1;
        has_turns = has_turns || out->element_of[e] == 0;
    }
    for (int k = 0; k < w->m->n_cases; k++) {
        const sct_case *c = &w->m->cases[k];
        *n_loads += (size_t)c->n_member_loads;
        for (int i = 0; i < c->n_member_loads; i++) out->element_of[c->member_loads[i].member] = 0;
    }
    for (int e = 0; e < w->m->n_members; e++)
        if (out->element_of[e] == 0) out->element_of[e] = out->n_elements++;
    return has_turns;
}

/* The loads of each element, one behind the other: first counted, then put in. */
static void list_loads(sct_work *w)
{
    sct_element *elements = w->out->elements;
    sct_element_load *next = w->out->element_loads;
    for (int pass = 0; pass < 2; pass++) {
        for (int k = 0; k < w->m->n_cases; k++) {
            const sct_case *c = &w->m->cases[k];
            for (int i = 0; i < c->n_member_loads; i++) {
                sct_element *x = &elements[w->out->element_of[c->member_loads[i].member]];
                if (pass == 1) x->loads[x->n_loads] = sct_element_load_of(x, k, &c->member_loads[i]);
                x->n_loads++;
            }
        }
        for (int b = 0; b < w->out->n_elements && pass == 0; b++) {
            elements[b].loads = next;
            next += elements[b].n_loads;
            elements[b].n_loads = 0;
        }
    }
}

static bool make_elements(sct_work *w)
{
    sct_statics *out = w->out;
    size_t n_loads = 0;
    out->has_turns = count_elements(w, &n_loads);
    out->elements = calloc((size_t)out->n_elements + 1, sizeof *out->elements);
    out->element_loads = calloc(n_loads + 1, sizeof *out->element_loads);
    w->held = calloc((size_t)out->n_elements + 1, sizeof *w->held);
    if (out->elements == NULL || out->element_loads == NULL || w->held == NULL) return false;
    for (int e = 0; e < w->m->n_members; e++) {
        if (out->element_of[e] < 0) continue;
        out->elements[out->element_of[e]] = sct_element_make(w->m, e, &w->sections[w->m->members[e].group]);
    }
    list_loads(w);
    return true;
}

static void choose_unknowns(sct_work *w)
{
    w->stride = w->out->has_turns ? 6 : 3;
    w->n = (size_t)w->stride * (size_t)w->m->n_joints;
    for (int i = 0; i < w->d; i++) w->at[w->size++] = i;
    for (int i = w->d == 2 ? 5 : 3; i < w->stride; i++) w->at[w->size++] = i;
}

/* ---- one case -----------------------------------------------------------------------------------------------------
 */

static long double along(const sct_work *w, int e, const long double u[])
{
    const sct_member *member = &w->m->members[e];
    long double sum = 0.0L;
    for (int i = 0; i < 3; i++) sum += w->dir[e][i] * (u[w->stride * member->to + i] - u[w->stride * member->from + i]);
    return sum;
}

/* Adds sign * v (3 forces, 3 moments at each end of a member) to r. */
static void push(const sct_work *w, int e, long double sign, const long double v[2][6], long double r[])
{
    const int end[2] = {w->m->members[e].from, w->m->members[e].to};
    for (int s = 0; s < 2; s++) {
        for (int i = 0; i < w->stride; i++) r[w->stride * end[s] + i] += sign * v[s][i];
    }
}

/* The force along the member and, of elements, the twelve forces at its ends, when the joints are at u. */
static void pull(const sct_work *w, int e, const long double u[], long double v[2][6])
{
    const int b = w->out->element_of[e], end[2] = {w->m->members[e].from, w->m->members[e].to};
    memset(v, 0, sizeof(long double[2][6]));
    if (b >= 0 && w->stride == 6) {
        long double at[2][6], f[12];
        for (int s = 0; s < 2; s++) memcpy(at[s], u + w->stride * end[s], sizeof at[s]);
        sct_element_pull(&w->out->elements[b], (const long double(*)[6])at, f);
        sct_element_to_model(&w->out->elements[b], f, v);
    }
    const long double N = w->k[e] * (along(w, e, u) - w->free_part[e]);
    for (int i = 0; i < 3; i++) {
        v[0][i] -= N * w->dir[e][i];
        v[1][i] += N * w->dir[e][i];
    }
}

/* A bar's own weight goes to its joints; a beam's acts along it. */
static void add_weight(sct_work *w, const sct_case *c, int e)
{
    const sct_member *member = &w->m->members[e];
    if (sct_element_is_beam(w->m, e)) return;
    const double density = w->m->materials[w->m->groups[member->group].material].density;
    const long double half = 0.5L * c->self_weight * density * GRAVITY * w->sections[member->group].A * w->L[e];
    w->load[w->stride * member->from + w->d - 1] -= half;
    w->load[w->stride * member->to + w->d - 1] -= half;
}

/* Settlements, loads at joints. */
static void load_joints(sct_work *w, const sct_case *c)
{
    memset(w->settled, 0, w->n * sizeof *w->settled);
    memset(w->load, 0, w->n * sizeof *w->load);
    for (int i = 0; i < c->n_settlements; i++) {
        const sct_settlement *s = &c->settlements[i];
        for (int k = 0; k < w->stride; k++) w->settled[w->stride * s->joint + k] += k < 3 ? s->d[k] : s->turn[k - 3];
    }
    for (int i = 0; i < c->n_loads; i++) {
        const sct_joint_load *l = &c->loads[i];
        for (int k = 0; k < w->stride; k++) w->load[w->stride * l->joint + k] += k < 3 ? l->F[k] : l->M[k - 3];
    }
    memcpy(w->u, w->settled, w->n * sizeof *w->u);
}

static void stretch_members(sct_work *w, const sct_case *c)
{
    memset(w->free_part, 0, (size_t)w->m->n_members * sizeof *w->free_part);
    for (int i = 0; i < c->n_bar_actions; i++) {
        const sct_bar_action *action = &c->bar_actions[i];
        const sct_material *material = &w->m->materials[w->m->groups[w->m->members[action->member].group].material];
        if (action->dT != 0.0)
            w->free_part[action->member] += material->expansion * (long double)action->dT * w->L[action->member];
        w->free_part[action->member] += action->lack;
    }
}

/* Copies a joint's first or last three numbers of each stride. */
static void copy_joints(const sct_work *w, int kind, const long double from[], double to[])
{
    for (size_t i = 0; i < 3 * (size_t)w->m->n_joints; i++)
        to[i] = (double)from[i / 3 * (size_t)w->stride + 3 * (size_t)kind + i % 3];
}

/* Everything that acts; reports see what acts on sprung ends apart from the loads at the joints. */
static void begin_case(sct_work *w, int k)
{
    const sct_case *c = &w->m->cases[k];
    const size_t n3 = 3 * (size_t)w->m->n_joints;
    sct_statics *out = w->out;
    load_joints(w, c);
    stretch_members(w, c);
    for (int e = 0; e < w->m->n_members; e++) add_weight(w, c, e);
    memcpy(w->r, w->load, w->n * sizeof *w->r);
    if (out->given != NULL) copy_joints(w, 0, w->load, out->given + (size_t)k * n3);
    if (out->moment_given != NULL) copy_joints(w, 1, w->load, out->moment_given + (size_t)k * n3);
    for (int b = 0; b < out->n_elements; b++) {
        const sct_element *x = &out->elements[b];
        long double at[12], end[2][6];
        sct_element_held(w->m, x, k, w->held[b], at);
        sct_element_to_model(x, at, end);
        push(w, x->member, 1.0L, (const long double(*)[6])end, w->r);
        sct_element_to_model(x, w->held[b], end);
        push(w, x->member, 1.0L, (const long double(*)[6])end, w->load);
    }
    copy_joints(w, 0, w->r, out->load + (size_t)k * n3);
    if (out->has_turns) copy_joints(w, 1, w->r, out->moment_load + (size_t)k * n3);
}

/* r = load - what members and springs take at u */
static void find_residual(sct_work *w)
{
    memcpy(w->r, w->load, w->n * sizeof *w->r);
    for (int e = 0; e < w->m->n_members; e++) {
        long double v[2][6];
        pull(w, e, w->u, v);
        push(w, e, -1.0L, (const long double(*)[6])v, w->r);
    }
    for (int j = 0; j < w->m->n_joints; j++) {
        const sct_joint *joint = &w->m->joints[j];
        for (int k = 0; k < joint->n_springs; k++) {
            const sct_joint_spring *s = &joint->springs[k];
            const int at = w->stride * j + 3 * s->is_turn;
            long double moved = 0.0L;
            if (3 * s->is_turn >= w->stride) continue;
            for (int i = 0; i < 3; i++) moved += s->dir[i] * (w->u[at + i] - w->settled[at + i]);
            for (int i = 0; i < 3; i++) w->r[at + i] -= s->stiffness * moved * s->dir[i];
        }
    }
}

/* The ends of an element hold what joints pull less what loads put on them. */
static void find_end(const sct_work *w, int b, const long double N, double end[12])
{
    const sct_element *x = &w->out->elements[b];
    const int joint[2] = {w->m->members[x->member].from, w->m->members[x->member].to};
    long double f[12] = {0}, moved[12], at[2][6];
    for (int pass = 0; pass < 2 && w->stride == 6; pass++) {
        for (int i = 0; i < 12; i++) {
            const int p = w->stride * joint[i / 6] + i % 6;
            at[i / 6][i % 6] = pass == 0 ? w->u[p] : w->step[p];
        }
        sct_element_pull(x, (const long double(*)[6])at, moved);
        for (int i = 0; i < 12; i++) f[i] += moved[i];
    }
    f[0] = -N;
    f[6] = N;
    for (int i = 0; i < 12; i++) end[i] = (double)(f[i] - w->held[b][i]);
}

/* Forces from the displacements and the step that is about to be added to them: before the sum is rounded, as a stiff
 * member hardly stretches. */
static void find_forces(sct_work *w, int k)
{
    sct_statics *out = w->out;
    double *N = out->N + (size_t)k * (size_t)w->m->n_members;
    for (size_t i = 0; i < w->n; i++) w->r[i] = w->step[i];
    for (int e = 0; e < w->m->n_members; e++) {
        const long double force = w->k[e] * (along(w, e, w->u) - w->free_part[e]) + w->k[e] * along(w, e, w->r);
        const int b = out->element_of[e];
        N[e] = (double)force;
        if (b >= 0) find_end(w, b, force, out->end[(size_t)k * (size_t)out->n_elements + (size_t)b]);
    }
}

/* The largest displacement, or rotation times the lever. */
static double largest(const sct_work *w, const long double v[])
{
    double most = 0.0;
    for (size_t i = 0; i < w->n; i++)
        most = fmax(most, fabs((double)v[i]) * (i % (size_t)w->stride < 3 ? 1.0 : w->lever));
    return most;
}

static double largest_of(size_t n, const double a[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(a[i]));
    return most;
}

/* What errors of COSINE in the directions do: forces push joints sideways a little, one way or the other, and turn
 * them. */
static sct_shaky shake(sct_work *w, int k)
{
    sct_random random = {1};
    sct_shaky shaky = {0};
    const double *N = w->out->N + (size_t)k * (size_t)w->m->n_members;
    const size_t at = (size_t)k * (size_t)w->out->n_elements;
    memset(w->r, 0, w->n * sizeof *w->r);
    for (int e = 0; e < w->m->n_members; e++) {
        const int joint[2] = {w->m->members[e].from, w->m->members[e].to}, b = w->out->element_of[e];
        for (int i = 0; i < 2 * w->size; i++) {
            const int s = i / w->size, kind = w->at[i % w->size] / 3;
            const double *end = b >= 0 ? w->out->end[at + (size_t)b] + 6 * s + 3 * kind : NULL;
            const double size = end != NULL ? largest_of(3, end) : kind == 0 ? fabs(N[e]) : 0.0;
            w->r[w->stride * joint[s] + w->at[i % w->size]] +=
                COSINE * size * (sct_random_unit(&random) < 0.5 ? -1.0 : 1.0);
        }
    }
    sct_work_solve(w, w->r);
    for (size_t i = 0; i < w->n; i++) {
        double *most = i % (size_t)w->stride < 3 ? &shaky.u : &shaky.turn;
        w->r[i] = w->step[i];
        *most = fmax(*most, fabs(w->step[i]));
    }
    memset(w->free_part, 0, (size_t)w->m->n_members * sizeof *w->free_part);
    for (int e = 0; e < w->m->n_members; e++) {
        long double v[2][6];
        shaky.N = fmax(shaky.N, fabs((double)(w->k[e] * along(w, e, w->r))));
        if (w->out->element_of[e] < 0) continue;
        pull(w, e, w->r, v);
        for (int i = 0; i < 12; i++) shaky.end[i % 6 / 3] = fmax(shaky.end[i % 6 / 3], fabs((double)v[i / 6][i % 6]));
    }
    return shaky;
}

static void solve_case(sct_work *w, int k)
{
    enum { MOST_STEPS = 12 };
    static const double SMALL = 1e-14;
    const size_t n3 = 3 * (size_t)w->m->n_joints;
    double size = INFINITY;
    begin_case(w, k);
    for (int s = 0; s < MOST_STEPS && size > SMALL; s++) {
        find_residual(w);
        sct_work_solve(w, w->r);
        find_forces(w, k); /* leaves the step in r */
        const double moved = largest(w, w->r), before = size;
        for (size_t i = 0; i < w->n; i++) w->u[i] += w->r[i];
        size = moved > 0.0 ? moved / largest(w, w->u) : 0.0;
        if (s > 1 && !(size < 0.5 * before)) break;
    }
    copy_joints(w, 0, w->u, w->out->u + (size_t)k * n3);
    if (w->out->has_turns) copy_joints(w, 1, w->u, w->out->turn + (size_t)k * n3);
    w->out->error = size <= w->out->error ? w->out->error : size; /* keeps a NAN */
    w->out->shaky[k] = shake(w, k);
}

/* ---- all ----------------------------------------------------------------------------------------------------------
 */

static bool allocate_joints(sct_work *w)
{
    const size_t joints = (size_t)w->m->n_joints + 1;
    w->c[0] = calloc(joints, sizeof *w->c[0]);
    w->c[1] = calloc(joints, sizeof *w->c[1]);
    w->b = calloc((size_t)w->size * joints, sizeof *w->b);
    w->step = calloc(w->n + 1, sizeof *w->step);
    w->u = calloc(w->n + 1, sizeof *w->u);
    w->settled = calloc(w->n + 1, sizeof *w->settled);
    w->load = calloc(w->n + 1, sizeof *w->load);
    w->r = calloc(w->n + 1, sizeof *w->r);
    return w->c[0] && w->c[1] && w->b && w->step && w->u && w->settled && w->load && w->r;
}

static bool allocate_results(const sct_work *w)
{
    sct_statics *out = w->out;
    const size_t cases = (size_t)w->m->n_cases, members = (size_t)w->m->n_members, n3 = 3 * (size_t)w->m->n_joints;
    out->u = calloc(cases * n3 + 1, sizeof *out->u);
    out->N = calloc(cases * members + 1, sizeof *out->N);
    out->load = calloc(cases * n3 + 1, sizeof *out->load);
    out->shaky = calloc(cases + 1, sizeof *out->shaky);
    out->end = calloc(cases * (size_t)out->n_elements + 1, sizeof *out->end);
    if (!out->u || !out->N || !out->load || !out->shaky || !out->end) return false;
    if (out->n_elements > 0) out->given = calloc(cases * n3 + 1, sizeof *out->given);
    if (!out->has_turns) return out->n_elements == 0 || out->given != NULL;
    out->turn = calloc(cases * n3 + 1, sizeof *out->turn);
    out->moment_load = calloc(cases * n3 + 1, sizeof *out->moment_load);
    out->moment_given = calloc(cases * n3 + 1, sizeof *out->moment_given);
    return out->given && out->turn && out->moment_load && out->moment_given;
}

static sct_status run(sct_work *w)
{
    sct_statics *out = w->out;
    if (!allocate_members(w)) return SCT_NO_MEMORY;
    measure_members(w);
    if (!make_elements(w)) return SCT_NO_MEMORY;
    choose_unknowns(w);
    if (!allocate_joints(w) || !allocate_results(w)) return SCT_NO_MEMORY;
    sct_status status = sct_supports_find(w->m, out->n_elements, out->elements, out->has_turns, &out->supports);
    if (status == SCT_OK) status = sct_work_factor(w);
    for (int k = 0; k < w->m->n_cases && status == SCT_OK; k++) solve_case(w, k);
    return status;
}

sct_status sct_statics_solve(const sct_model *model, const sct_verify_section sections[], const bool left_out[],
                             sct_statics *statics)
{
    sct_work w = {.m = model, .sections = sections, .left_out = left_out, .out = statics, .d = model->dimensions};
    *statics = (sct_statics){0};
    const sct_status status = run(&w);
    work_free(&w);
    return status;
}

void sct_statics_free(sct_statics *s)
{
    free(s->u);
    free(s->turn);
    free(s->N);
    free(s->load);
    free(s->moment_load);
    free(s->given);
    free(s->moment_given);
    free(s->shaky);
    free(s->element_of);
    free(s->elements);
    free(s->element_loads);
    free(s->end);
    sct_supports_free(&s->supports);
    *s = (sct_statics){0};
}

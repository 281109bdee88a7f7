/* A truss laid out on a sheet, before ink. */
#include "scene.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const double DEPTH_MOST = 14, DEPTH_MOST_OF_LENGTH = 0.22;                   /* [u], - */
static const double TENSION_LEAST = 1.8, COMPRESSION_LEAST = 4.6, FAR_WIDTH = 0.62; /* [u], [u], - */
static const double NO_FORCE = 1e-9, NO_FORCE_MOST = 50;                            /* of the largest load; [N] */
static const double FULL_LENGTH = 60, SELECTIVE_LENGTH = 25;                        /* [u] median drawn length */
enum {
    FULL_MEMBERS = 60,
    FULL_MEMBERS_IN_SPACE = 24,
    SELECTIVE_MEMBERS = 150,
    OVERVIEW_WORST = 20,
    LABELS_MOST = 80,
    NAMES_MOST = 40
};

/* ---- projection ----------------------------------------------------------------------------------------------------
 */

static sct_point project(const double r[3], double turn, double tilt, bool in_space, double *away)
{
    if (!in_space) {
        *away = 0;
        return (sct_point){r[0], -r[1]};
    }
    const double back = r[0] * sin(turn) + r[1] * cos(turn); /* level distance behind the origin */
    *away = back * cos(tilt) - r[2] * sin(tilt);
    return (sct_point){r[0] * cos(turn) - r[1] * sin(turn), -(r[2] * cos(tilt) + back * sin(tilt))};
}

void sct_project(const sct_result *result, double turn, double tilt, sct_point at[], double away[])
{
    for (int j = 0; j < result->n_joints; j++)
        at[j] = project(result->joints[j].at, turn, tilt, result->dimensions == 3, &away[j]);
}

void sct_project_flat(sct_scene *scene, int across, int up)
{
    const int along = 3 - across - up;
    const double towards = along == 1 ? 1 : -1; /* seen from below y, from above x and z */
    scene->is_flat = true;
    scene->axis[0] = across;
    scene->axis[1] = up;
    for (int j = 0; j < scene->result->n_joints; j++) {
        const double *r = scene->result->joints[j].at;
        scene->at[j] = (sct_point){r[across], -r[up]};
        scene->away[j] = towards * r[along];
    }
}

sct_point sct_project_direction(const sct_scene *scene, const double direction[3])
{
    double away;
    if (scene->is_flat) return (sct_point){direction[scene->axis[0]], -direction[scene->axis[1]]};
    return project(direction, scene->turn, scene->tilt, scene->result->dimensions == 3, &away);
}

/* ---- what does not depend on the scale -----------------------------------------------------------------------------
 */

static void list_members_at_joints(sct_scene *scene)
{
    const sct_result *r = scene->result;
    int *start = scene->near_start;
    for (int m = 0; m < r->n_members; m++) {
        start[r->members[m].from + 1]++;
        start[r->members[m].to + 1]++;
    }
    for (int j = 0; j < r->n_joints; j++) start[j + 1] += start[j];
    for (int m = r->n_members - 1; m >= 0; m--) { /* from the ends of the ranges down; start[] ends one joint ahead */
        scene->near[--start[r->members[m].from + 1]] = m;
        scene->near[--start[r->members[m].to + 1]] = m;
    }
    for (int j = 0; j < r->n_joints; j++) start[j] = start[j + 1];
    start[r->n_joints] = 2 * r->n_members;
}

/* Largest component of the loads of each combination. */
static void find_largest_loads(const sct_result *r, double largest[])
{
    for (int c = 0; c < r->n_combinations; c++) {
        const double *load = r->load + (size_t)c * (size_t)r->n_joints * 3;
        largest[c] = 0;
        for (int i = 0; i < 3 * r->n_joints; i++) largest[c] = fmax(largest[c], fabs(load[i]));
    }
}

/* The moments at the place that governs stress the member more than the force does. */
static bool is_mainly_bent(const sct_result *r, const sct_member_result *m)
{
    const sct_group_result *g = &r->groups[m->group];
    double sigma = 0;
    for (int axis = 0; axis < 2; axis++)
        if (g->W[axis] > 0) sigma += fabs(m->M[axis]) / g->W[axis];
    return m->is_bent && sigma > fabs(m->N) / g->A;
}

static sct_sense sense_of(const sct_result *r, const double largest_load[], int member)
{
    const sct_member_result *m = &r->members[member];
    double N = m->N;
    if (m->combination < 0 && N == 0) N = fabs(m->N_max) >= fabs(m->N_min) ? m->N_max : m->N_min;
    const double largest = m->combination >= 0 ? largest_load[m->combination] : fmax(fabs(m->N_max), fabs(m->N_min));
    if (is_mainly_bent(r, m)) return SENSE_BENT;
    if (fabs(N) <= NO_FORCE_MOST && fabs(N) <= NO_FORCE * largest) return SENSE_NONE;
    return N > 0 ? SENSE_TENSION : SENSE_COMPRESSION;
}

static bool turns_freely(const sct_result *r, const sct_member_result *m, int end)
{
    return !m->is_bent || (m->hinged[end][0] && (r->dimensions == 2 || m->hinged[end][1]));
}

static bool is_sprung(const sct_result *r, const sct_member_result *m, int end)
{
    return m->is_bent && (m->sprung[end][0] || (r->dimensions == 3 && m->sprung[end][1]));
}

/* Which joints are rigid, and how each end meets its joint. */
static void find_ends(sct_scene *scene)
{
    const sct_result *r = scene->result;
    for (int m = 0; m < r->n_members; m++)
        for (int end = 0; end < 2; end++)
            if (!turns_freely(r, &r->members[m], end))
                scene->is_rigid[end == 0 ? r->members[m].from : r->members[m].to] = true;
    for (int m = 0; m < r->n_members; m++)
        for (int end = 0; end < 2; end++) {
            const int joint = end == 0 ? r->members[m].from : r->members[m].to;
            scene->sticks[m].end[end] = !scene->is_rigid[joint]                ? END_AT_RING
                                        : is_sprung(r, &r->members[m], end)    ? END_SPRUNG
                                        : turns_freely(r, &r->members[m], end) ? END_RELEASED
                                                                               : END_RIGID;
        }
}

static int worst_for_deflection(const sct_result *r)
{
    int worst = 0;
    double most = -1;
    for (int i = 0; i < r->n_deflections; i++)
        if (r->deflections[i].utilisation > most) {
            most = r->deflections[i].utilisation;
            worst = r->deflections[i].combination;
        }
    if (most >= 0 && worst >= 0 && worst < r->n_combinations) return worst;
    worst = 0;
    for (int c = 0; c < r->n_combinations; c++)
        for (int i = 0; i < 3 * r->n_joints; i++) {
            const double u = fabs(r->u[(size_t)c * (size_t)r->n_joints * 3 + (size_t)i]);
            if (u > most) {
                most = u;
                worst = c;
            }
        }
    return worst;
}

sct_status sct_scene_open(sct_scene *scene, const sct_result *result, const sct_write_options *options)
{
    *scene = (sct_scene){
        .result = result, .options = {.combination = -1}, .is_flat = result->dimensions == 2, .axis = {0, 1}};
    if (options != NULL) scene->options = *options;
    scene->arena = sct_arena_new();
    if (scene->arena == NULL) return SCT_NO_MEMORY;
    const size_t n_joints = (size_t)result->n_joints, n_members = (size_t)result->n_members;
    scene->at = sct_arena_array(scene->arena, n_joints, sizeof *scene->at);
    scene->away = sct_arena_array(scene->arena, n_joints, sizeof *scene->away);
    scene->is_named = sct_arena_array(scene->arena, n_joints, sizeof *scene->is_named);
    scene->is_rigid = sct_arena_array(scene->arena, n_joints, sizeof *scene->is_rigid);
    scene->near_start = sct_arena_array(scene->arena, n_joints + 1, sizeof *scene->near_start);
    scene->near = sct_arena_array(scene->arena, 2 * n_members, sizeof *scene->near);
    scene->sticks = sct_arena_array(scene->arena, n_members, sizeof *scene->sticks);
    scene->lengths = sct_arena_array(scene->arena, n_members, sizeof *scene->lengths);
    double *largest_load = sct_arena_array(scene->arena, (size_t)result->n_combinations, sizeof *largest_load);
    if (largest_load == NULL || scene->lengths == NULL || scene->at == NULL || scene->away == NULL ||
        scene->is_named == NULL || scene->is_rigid == NULL || scene->near_start == NULL || scene->near == NULL ||
        scene->sticks == NULL)
        return SCT_NO_MEMORY;
    if (scene->options.combination < 0 || scene->options.combination >= result->n_combinations)
        scene->options.combination = worst_for_deflection(result);
    list_members_at_joints(scene);
    find_largest_loads(result, largest_load);
    for (int m = 0; m < result->n_members; m++) scene->sticks[m].sense = sense_of(result, largest_load, m);
    find_ends(scene);
    return SCT_OK;
}

void sct_scene_close(sct_scene *scene)
{
    sct_labels_free(scene->labels);
    sct_arena_free(scene->arena);
    sct_text_free(&scene->sheet.body);
}

/* ---- layout --------------------------------------------------------------------------------------------------------
 */

static int by_size(const void *left, const void *right)
{
    const double p = *(const double *)left, q = *(const double *)right;
    return p < q ? -1 : p > q;
}

/* The median drawn length for joints in scene->at [same unit]; 0 without members. */
static double median_length(const sct_scene *scene)
{
    const sct_result *r = scene->result;
    const size_t n = (size_t)r->n_members;
    if (n == 0) return 0;
    for (size_t m = 0; m < n; m++) {
        const sct_point p = scene->at[r->members[m].from], q = scene->at[r->members[m].to];
        scene->lengths[m] = hypot(q.x - p.x, q.y - p.y);
    }
    qsort(scene->lengths, n, sizeof *scene->lengths, by_size);
    return scene->lengths[n / 2];
}

/* A view in space shows members before members: fewer marks keep it readable, the table has the rest. */
static sct_detail detail_for(const sct_result *r, double median)
{
    const int n_members = r->n_members, most = r->dimensions == 3 ? FULL_MEMBERS_IN_SPACE : FULL_MEMBERS;
    if (n_members <= most && median >= FULL_LENGTH) return DETAIL_FULL;
    return n_members <= SELECTIVE_MEMBERS && median >= SELECTIVE_LENGTH ? DETAIL_SELECTIVE : DETAIL_OVERVIEW;
}

sct_detail sct_scene_detail(const sct_scene *scene, double scale)
{
    return detail_for(scene->result, scale * median_length(scene));
}

static void find_bounds(sct_scene *scene)
{
    scene->low = (sct_point){INFINITY, INFINITY};
    scene->high = (sct_point){-INFINITY, -INFINITY};
    for (int j = 0; j < scene->result->n_joints; j++) {
        const sct_point p = scene->at[j];
        scene->low = (sct_point){fmin(scene->low.x, p.x), fmin(scene->low.y, p.y)};
        scene->high = (sct_point){fmax(scene->high.x, p.x), fmax(scene->high.y, p.y)};
    }
}

/* On which side of member m all its neighbours lie: the chord's free side is the other one. */
static double free_side(const sct_scene *scene, int m)
{
    const sct_result *r = scene->result;
    const sct_stick *s = &scene->sticks[m];
    bool left = false, right = false;
    for (int end = 0; end < 2; end++) {
        const int joint = end == 0 ? r->members[m].from : r->members[m].to;
        for (int i = scene->near_start[joint]; i < scene->near_start[joint + 1] && !(left && right); i++) {
            const sct_member_result *other = &r->members[scene->near[i]];
            const sct_point q = scene->at[other->from == joint ? other->to : other->from], p = scene->at[joint];
            const double L = hypot(q.x - p.x, q.y - p.y) * s->length;
            const double sine = (s->to.x - s->from.x) * (q.y - p.y) - (s->to.y - s->from.y) * (q.x - p.x);
            if (sine > 0.02 * L) right = true;
            if (sine < -0.02 * L) left = true;
        }
    }
    return left == right ? 0 : right ? -1 : 1;
}

/* The largest factor that keeps every band slim: at most 14 u and 0.22 of its length. Where even true depths are much
 * wider, as in a model of a few feet, a fraction. 0 when a depth is unknown. */
static double choose_depth_factor(const sct_scene *scene)
{
    static const double FACTORS[] = {5, 4, 3, 2, 1.5, 1}, FRACTIONS[] = {0.5, 0.2, 0.1};
    const sct_result *r = scene->result;
    double deepest = 0, slim = INFINITY;
    for (int m = 0; m < r->n_members; m++) {
        const double depth = r->groups[r->members[m].group].depth * scene->scale;
        if (!(depth > 0)) return 0;
        deepest = fmax(deepest, depth);
        if (scene->sticks[m].length < 1) continue; /* seen along its axis */
        slim = fmin(slim, fmax(DEPTH_MOST_OF_LENGTH * scene->sticks[m].length, TENSION_LEAST) / depth);
    }
    for (size_t i = 0; i < sizeof FACTORS / sizeof *FACTORS; i++)
        if (FACTORS[i] <= fmin(slim, DEPTH_MOST / deepest)) return FACTORS[i];
    if (deepest <= 1.5 * DEPTH_MOST) return 1;
    for (size_t i = 0; i < sizeof FRACTIONS / sizeof *FRACTIONS; i++)
        if (FRACTIONS[i] * deepest <= DEPTH_MOST) return FRACTIONS[i];
    return 0;
}

static void set_depths(sct_scene *scene)
{
    const sct_result *r = scene->result;
    scene->depth_factor = scene->given_factor > 0 ? scene->given_factor : choose_depth_factor(scene);
    for (int m = 0; m < r->n_members; m++) {
        sct_stick *s = &scene->sticks[m];
        const double least =
            s->sense == SENSE_COMPRESSION || scene->depth_factor == 0 ? COMPRESSION_LEAST : TENSION_LEAST;
        s->depth = r->groups[r->members[m].group].depth * scene->scale * scene->depth_factor;
        if (s->is_far) s->depth *= FAR_WIDTH;
        if (!(s->depth >= least)) {
            scene->is_widened |= s->sense != SENSE_NONE && scene->depth_factor > 0;
            s->depth = least;
        }
    }
}

static void label(sct_scene *scene, int member, int *n)
{
    if (member < 0 || scene->sticks[member].is_labelled || *n >= LABELS_MOST) return;
    scene->sticks[member].is_labelled = true;
    ++*n;
}

/* The worst member above 1 that has no label yet; -1 when none. */
static int worst_above_one(const sct_scene *scene)
{
    const sct_result *r = scene->result;
    int worst = -1;
    for (int m = 0; m < r->n_members; m++)
        if (!scene->sticks[m].is_labelled && r->members[m].utilisation > 1 &&
            (worst < 0 || r->members[m].utilisation > r->members[worst].utilisation))
            worst = m;
    return worst;
}

static void choose_labelled(sct_scene *scene)
{
    const sct_result *r = scene->result;
    int n = 0;
    if (scene->detail == DETAIL_OVERVIEW) {
        for (int i = 0; i < OVERVIEW_WORST; i++) label(scene, worst_above_one(scene), &n);
    } else {
        for (int m = 0; m < r->n_members; m++)
            if (scene->detail == DETAIL_FULL || r->members[m].utilisation > 0.9) label(scene, m, &n);
    }
    for (int g = 0; g < r->n_groups; g++)
        if (r->groups[g].n_members > 0) label(scene, r->groups[g].worst_member, &n);
}

static void choose_named(sct_scene *scene)
{
    const sct_result *r = scene->result;
    int top = 0, left = 0, right = 0, n = 0;
    for (int j = 0; j < r->n_joints; j++) {
        if (scene->at[j].y < scene->at[top].y - 1e-6) top = j;
        if (scene->at[j].x < scene->at[left].x - 1e-6) left = j;
        if (scene->at[j].x > scene->at[right].x + 1e-6) right = j;
        if (scene->detail == DETAIL_FULL || r->joints[j].n_held > 0)
            scene->is_named[j] = scene->detail == DETAIL_FULL || n++ < NAMES_MOST;
    }
    double most = 0;
    for (int i = 0; i < r->n_deflections; i++) { /* the heading may name it */
        if (!(r->deflections[i].utilisation > most)) continue;
        most = r->deflections[i].utilisation;
        n = r->deflections[i].joint;
    }
    if (most > 0) scene->is_named[n] = true;
    if (scene->detail == DETAIL_SELECTIVE && r->n_joints > 0)
        scene->is_named[top] = scene->is_named[left] = scene->is_named[right] = true;
}

void sct_scene_lay(sct_scene *scene, sct_point corner, double width, double height)
{
    find_bounds(scene);
    const double across = scene->high.x - scene->low.x, down = scene->high.y - scene->low.y;
    /* A lone small frame is not blown up: 6 m fill the sheet, unless members would come out short. */
    const double reasonable = fmax(width / 6, 110 / fmax(median_length(scene), 1e-9));
    const double scale = fmin(fmin(width / fmax(across, 1e-9), height / fmax(down, 1e-9)), reasonable);
    sct_scene_lay_to_scale(scene, (sct_point){corner.x + 0.5 * (width - scale * across), corner.y}, scale);
}

void sct_scene_lay_to_scale(sct_scene *scene, sct_point corner, double scale)
{
    const sct_result *r = scene->result;
    scene->scale = scale;
    find_bounds(scene);
    const sct_point shift = {corner.x - scale * scene->low.x, corner.y - scale * scene->low.y};
    for (int j = 0; j < r->n_joints; j++)
        scene->at[j] = (sct_point){shift.x + scene->scale * scene->at[j].x, shift.y + scene->scale * scene->at[j].y};
    find_bounds(scene);
    double nearest = INFINITY, farthest = -INFINITY;
    for (int j = 0; j < r->n_joints; j++) {
        nearest = fmin(nearest, scene->away[j]);
        farthest = fmax(farthest, scene->away[j]);
    }
    for (int m = 0; m < r->n_members; m++) {
        sct_stick *s = &scene->sticks[m];
        const int from = r->members[m].from, to = r->members[m].to;
        s->from = scene->at[from];
        s->to = scene->at[to];
        s->length = hypot(s->to.x - s->from.x, s->to.y - s->from.y);
        s->away = 0.5 * (scene->away[from] + scene->away[to]);
        s->is_far = r->dimensions == 3 && s->away > 0.5 * (nearest + farthest) + 1e-9 * (farthest - nearest);
    }
    for (int m = 0; m < r->n_members; m++) scene->sticks[m].outside = free_side(scene, m);
    scene->detail = detail_for(r, median_length(scene));
    scene->ring = scene->detail == DETAIL_OVERVIEW ? 1.8 : 2.8;
    set_depths(scene);
    choose_labelled(scene);
    choose_named(scene);
}

sct_role sct_ramp(double utilisation)
{
    static const double EDGES[] = {0.25, 0.5, 0.75, 0.9, 1};
    for (int i = 0; i < 5; i++)
        if (utilisation <= EDGES[i]) return (sct_role)(ROLE_U0 + i);
    return ROLE_OVER;
}

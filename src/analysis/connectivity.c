/* Mechanisms that geometry alone shows: parts, their supports, and joints that their own members do not hold. */
#include "analysis/connectivity.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/motion.h"
#include "numerics/span.h"

/* Sine of the angle (or lever arm as a fraction of the part's size) below which a bar or a support is no hold: it would
 * give 1e-18 of a good one's stiffness, below the rounding of any coordinate that a person measures. */
static const double NO_HOLD = 1e-9;

/* ---- the graph -------------------------------------------------------------------------------------------------- */

/* Directions in which one joint is not held by its members or supports. h in its unknowns, Gauss-Jordan form. */
typedef struct loose {
    int n, pivot[3];
    double h[3][3];
} loose;

typedef struct part {
    int first, count; /* its joints: graph.joints[first ... first + count - 1] */
    int n_held;       /* directions held, all its joints together */
    double centre[3]; /* [m] */
    double size;      /* [m] largest distance of a joint from the centre */
} part;

typedef struct graph {
    const sct_structure *st;
    int *part_of;   /* n_joints; -1: no member ends there */
    int *joints;    /* joints by part */
    int *at, *bars; /* bars at joint j: bars[at[j] ... at[j + 1] - 1] */
    int n_parts;
    part *parts;
    loose *loose;   /* n_joints */
    sct_row *rows;  /* scratch: most bars at a joint, or most held directions + 1 */
    double *motion; /* scratch: SCT_ROW x n_dof */
} graph;

static void graph_free(graph *g)
{
    free(g->part_of);
    free(g->joints);
    free(g->at);
    free(g->bars);
    free(g->parts);
    free(g->loose);
    free(g->rows);
    free(g->motion);
}

static int root(int parent[], int j)
{
    while (parent[j] != j) j = parent[j] = parent[parent[j]];
    return j;
}

static bool graph_allocate(graph *g)
{
    const size_t n = (size_t)g->st->n_joints, m = (size_t)g->st->n_bars, n_dof = (size_t)g->st->n_dof;
    size_t held = 0;
    for (size_t j = 0; j < n; j++) held += (size_t)g->st->model->joints[j].n_held;
    g->part_of = malloc((n + 1) * sizeof *g->part_of);
    g->joints = malloc((n + 1) * sizeof *g->joints);
    g->at = calloc(n + 2, sizeof *g->at);
    g->bars = malloc((2 * m + 1) * sizeof *g->bars);
    g->parts = calloc(n + 1, sizeof *g->parts);
    g->loose = calloc(n + 1, sizeof *g->loose);
    g->rows = malloc((2 * m + held + 1) * sizeof *g->rows);
    g->motion = malloc((SCT_ROW * n_dof + 1) * sizeof *g->motion);
    return g->part_of != NULL && g->joints != NULL && g->at != NULL && g->bars != NULL && g->parts != NULL &&
           g->loose != NULL && g->rows != NULL && g->motion != NULL;
}

/* Bars by joint, by a counting sort. */
static void list_bars(graph *g)
{
    const sct_structure *st = g->st;
    int *at = g->at + 1; /* shifted by one while counting, so that it ends in place */
    for (int e = 0; e < st->n_bars; e++) {
        at[st->bars[e].from + 1]++;
        at[st->bars[e].to + 1]++;
    }
    for (int j = 0; j < st->n_joints; j++) at[j + 1] += at[j];
    for (int e = 0; e < st->n_bars; e++) {
        g->bars[at[st->bars[e].from]++] = e;
        g->bars[at[st->bars[e].to]++] = e;
    }
}

/* Parts in the order of their first joints: union-find, then a counting sort. */
static void list_parts(graph *g)
{
    const sct_structure *st = g->st;
    int *parent = g->joints; /* free until the lists are made */
    for (int j = 0; j < st->n_joints; j++) parent[j] = j;
    for (int e = 0; e < st->n_bars; e++) {
        const int a = root(parent, st->bars[e].from), b = root(parent, st->bars[e].to);
        if (a < b) parent[b] = a;
        if (b < a) parent[a] = b;
    }
    for (int j = 0; j < st->n_joints; j++) {
        if (g->at[j] == g->at[j + 1]) {
            g->part_of[j] = -1;
            continue;
        }
        const int top = root(parent, j);
        g->part_of[j] = top == j ? g->n_parts++ : g->part_of[top];
        g->parts[g->part_of[j]].count++;
        g->parts[g->part_of[j]].n_held += st->model->joints[j].n_held;
    }
    for (int p = 0, next = 0; p < g->n_parts; p++) {
        g->parts[p].first = next;
        next += g->parts[p].count;
        g->parts[p].count = 0;
    }
    for (int j = 0; j < st->n_joints; j++) {
        if (g->part_of[j] < 0) continue;
        part *p = &g->parts[g->part_of[j]];
        g->joints[p->first + p->count++] = j;
    }
}

static void measure_part(const graph *g, part *p)
{
    const sct_joint *joints = g->st->model->joints;
    for (int i = 0; i < p->count; i++) {
        for (int k = 0; k < 3; k++) p->centre[k] += joints[g->joints[p->first + i]].at[k] / p->count;
    }
    for (int i = 0; i < p->count; i++) {
        const double *at = joints[g->joints[p->first + i]].at;
        p->size = fmax(p->size, hypot(hypot(at[0] - p->centre[0], at[1] - p->centre[1]), at[2] - p->centre[2]));
    }
}

/* ---- loose joints ----------------------------------------------------------------------------------------------- */

/* Fills g->loose[j]: the free directions of the joint that no bar there has a part along. */
static void find_loose(graph *g, int j)
{
    const sct_structure *st = g->st;
    const int n = st->n_free[j], m = g->at[j + 1] - g->at[j];
    loose *l = &g->loose[j];
    for (int i = 0; i < m; i++) {
        const double *dir = st->bars[g->bars[g->at[j] + i]].axes[0];
        for (int k = 0; k < n; k++) g->rows[i][k] = sct_dot(3, st->basis[j][k], dir);
    }
    sct_row N[SCT_ROW];
    l->n = sct_span_null(m, n, g->rows, NO_HOLD, N);
    sct_span_reduce(l->n, n, 0, 0, n, N, NO_HOLD, l->pivot);
    for (int i = 0; i < l->n; i++) memcpy(l->h[i], N[i], (size_t)n * sizeof(double));
}

/* The directions of a loose joint in the model's axes, as simple as they come. */
static void loose_directions(const graph *g, int j, sct_row D[3])
{
    const loose *l = &g->loose[j];
    memset(D, 0, 3 * sizeof(sct_row));
    for (int i = 0; i < l->n; i++) {
        for (int k = 0; k < g->st->n_free[j]; k++) {
            for (int axis = 0; axis < 3; axis++) D[i][axis] += l->h[i][k] * g->st->basis[j][k][axis];
        }
    }
    sct_span_reduce(l->n, 3, 0, 0, 3, D, NO_HOLD, NULL);
}

static void add_directions(const graph *g, int j, sct_text *text)
{
    sct_row D[3];
    loose_directions(g, j, D);
    for (int i = 0; i < g->loose[j].n; i++) {
        if (i > 0) sct_text_add(text, " and ");
        sct_motion_direction(text, g->st->dim, D[i], false);
    }
}

/* Why the members of a loose joint do not hold it. */
static const char *how_they_lie(const graph *g, int j)
{
    const int rank = g->st->n_free[j] - g->loose[j].n;
    if (g->st->n_free[j] < g->st->dim) return "do not hold it there"; /* a support takes part */
    return rank == 1 ? "lie in one line" : "lie in one plane";
}

static bool tell_loose_joint(const graph *g, int j, sct_issues *issues)
{
    const sct_structure *st = g->st;
    const int n_bars = g->at[j + 1] - g->at[j];
    sct_text text = {0};
    sct_text_add(&text, "joint ");
    sct_motion_name(&text, st->model->joints[j].name);
    sct_text_add(&text, " can move in ");
    add_directions(g, j, &text);
    sct_text_add(&text, ": ");
    if (n_bars == 1) {
        sct_text_add(&text, "only member ");
        sct_motion_name(&text, st->model->members[g->bars[g->at[j]]].name);
        sct_text_add(&text, " ends there");
    } else {
        sct_text_format(&text, "its %d members %s", n_bars, how_they_lie(g, j));
    }
    sct_text_add(&text, "; add a member or a support");
    return sct_motion_tell(&text, SCT_ERROR, st->model->joints[j].where, issues);
}

/* Many loose joints at once: those that are loose in the same directions as joint `first` share one message. */
static bool tell_loose_joints(const graph *g, int first, bool told[], sct_issues *issues)
{
    const sct_structure *st = g->st;
    sct_text words = {0}, text = {0};
    add_directions(g, first, &words);
    int n = 0;
    bool enough = true;
    for (int j = first; j < st->n_joints && enough; j++) {
        if (g->loose[j].n == 0 || told[j]) continue;
        sct_text other = {0};
        add_directions(g, j, &other);
        enough = !other.failed && !words.failed;
        if (enough && strcmp(other.data, words.data) == 0) {
            told[j] = true;
            if (n < 10) {
                if (n > 0) sct_text_add(&text, ", ");
                sct_motion_name(&text, st->model->joints[j].name);
            }
            n++;
        }
        sct_text_free(&other);
    }
    if (n > 10) sct_text_format(&text, " and %d more", n - 10);
    sct_text line = {0};
    if (enough && !text.failed) {
        sct_text_format(&line, "%s %s can %smove in %s: ", n == 1 ? "joint" : "joints", text.data,
                        n == 1 ? "" : "each ", words.data);
        sct_text_format(&line, "the members of %s do not hold it there; add members or supports",
                        n == 1 ? "the joint" : "each such joint");
    }
    sct_text_free(&words);
    sct_text_free(&text);
    return sct_motion_tell(&line, SCT_ERROR, st->model->joints[first].where, issues);
}

/* Finds and tells all loose joints of parts that have a support (without one, that is the thing to say). */
static sct_status check_joints(graph *g, bool ground[], int *n_found, int *n_told, sct_issues *issues)
{
    const sct_structure *st = g->st;
    int n_loose = 0;
    for (int j = 0; j < st->n_joints; j++) {
        if (g->part_of[j] < 0 || st->n_free[j] == 0 || g->parts[g->part_of[j]].n_held == 0) continue;
        find_loose(g, j);
        n_loose += g->loose[j].n > 0;
        *n_found += g->loose[j].n;
        for (int i = 0; i < g->loose[j].n; i++) ground[st->first_dof[j] + g->loose[j].pivot[i]] = true;
    }
    if (n_loose == 0) return SCT_OK;
    bool *told = calloc((size_t)st->n_joints, sizeof *told);
    bool enough = told != NULL;
    for (int j = 0; j < st->n_joints && enough && *n_told < SCT_MOTIONS_TOLD; j++) {
        if (g->loose[j].n == 0 || told[j]) continue;
        enough = n_loose <= SCT_MOTIONS_TOLD ? tell_loose_joint(g, j, issues) : tell_loose_joints(g, j, told, issues);
        ++*n_told;
    }
    free(told);
    return enough ? SCT_OK : SCT_NO_MEMORY;
}

/* ---- rigid motions of a part --------------------------------------------------------------------------------- */

/* A rigid motion is (t, w): a joint at q = (at - centre) / size moves by t + w x q. In the plane t = (tx, ty) and
 * w = wz only: `room` numbers of a row, 3 or 6. */
static int room(const graph *g)
{
    return g->st->dim == 2 ? 3 : 6;
}

static void unpack(const graph *g, const double r[], double t[3], double w[3])
{
    const bool plane = g->st->dim == 2;
    t[0] = r[0];
    t[1] = r[1];
    t[2] = plane ? 0.0 : r[2];
    w[0] = plane ? 0.0 : r[3];
    w[1] = plane ? 0.0 : r[4];
    w[2] = plane ? r[2] : r[5];
}

static void place(const graph *g, const part *p, int joint, double q[3])
{
    for (int k = 0; k < 3; k++) q[k] = (g->st->model->joints[joint].at[k] - p->centre[k]) / p->size;
}

static void displacement(const double t[3], const double w[3], const double q[3], double u[3])
{
    sct_cross(w, q, u);
    for (int k = 0; k < 3; k++) u[k] += t[k];
}

/* Directions that a part needs held: a straight part in space cannot be seen to turn about itself. */
static int directions_needed(const graph *g, const part *p, double axis[3])
{
    if (g->st->dim == 2) return 3;
    double far = 0.0;
    for (int i = 0; i < p->count; i++) {
        double q[3];
        place(g, p, g->joints[p->first + i], q);
        const double length = sqrt(sct_dot(3, q, q));
        if (length <= far) continue;
        far = length;
        for (int k = 0; k < 3; k++) axis[k] = q[k] / length;
    }
    for (int i = 0; i < p->count; i++) {
        double q[3], off[3];
        place(g, p, g->joints[p->first + i], q);
        sct_cross(q, axis, off);
        if (sct_dot(3, off, off) > NO_HOLD * NO_HOLD) return 6;
    }
    return 5;
}

/* Rigid motions that the supports of a part leave free; returns their number, 0 to 6. */
static int free_motions(graph *g, const part *p, int needed, const double axis[3], sct_row R[SCT_ROW])
{
    int m = 0;
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i];
        const sct_joint *joint = &g->st->model->joints[j];
        double q[3], arm[3];
        place(g, p, j, q);
        for (int k = 0; k < joint->n_held; k++, m++) {
            const double *h = joint->held[k];
            sct_cross(q, h, arm); /* h . (t + w x q) = h . t + w . (q x h) */
            double *r = g->rows[m];
            if (g->st->dim == 2) {
                r[0] = h[0];
                r[1] = h[1];
                r[2] = arm[2];
            } else {
                memcpy(r, h, 3 * sizeof(double));
                memcpy(r + 3, arm, 3 * sizeof(double));
            }
        }
    }
    if (needed == 5) { /* turning about its own line moves no joint: take it out */
        memset(g->rows[m], 0, sizeof(sct_row));
        memcpy(g->rows[m] + 3, axis, 3 * sizeof(double));
        m++;
    }
    return sct_span_null(m, room(g), g->rows, NO_HOLD, R);
}

/* Turns k free motions into ones that can be said: turns first (simple axes), then shifts; returns the number of turns.
 * A turn's axis goes through a held joint where the shifts that are free as well allow it. */
static int simplify(const graph *g, const part *p, int k, sct_row R[SCT_ROW])
{
    const int n = room(g), n_t = g->st->dim;
    const int n_turns = sct_span_reduce(k, n, 0, n_t, n, R, NO_HOLD, NULL);
    sct_row T[3];
    for (int i = n_turns; i < k; i++) {
        for (int c = n_t; c < n; c++) R[i][c] = 0.0;
    }
    sct_span_reduce(k, n, n_turns, 0, n_t, R, NO_HOLD, NULL);
    for (int i = n_turns; i < k; i++) {
        memcpy(T[i - n_turns], R[i], (size_t)n_t * sizeof(double));
        sct_span_remove(n_t, i - n_turns, T, T[i - n_turns]);
        sct_span_normalise(n_t, T[i - n_turns]);
    }
    for (int i = 0; i < n_turns; i++) {
        double t[3], w[3];
        bool through_support = false;
        unpack(g, R[i], t, w);
        for (int s = 0; s < p->count && !through_support; s++) {
            const int j = g->joints[p->first + s];
            double q[3];
            sct_row u = {0.0};
            if (g->st->model->joints[j].n_held == 0) continue;
            place(g, p, j, q);
            displacement(t, w, q, u);
            sct_span_remove(n_t, k - n_turns, T, u);
            through_support = sct_dot(n_t, u, u) <= NO_HOLD * NO_HOLD * sct_dot(3, w, w);
            if (!through_support) continue;
            sct_cross(q, w, t);
            memcpy(R[i], t, (size_t)n_t * sizeof(double));
        }
        if (!through_support) sct_span_remove(n_t, k - n_turns, T, R[i]);
    }
    return n_turns;
}

/* One unknown is held per motion that is new: forward elimination of the motions in terms of the unknowns. false: the
 * motion is a sum of motions already found (of loose joints, say). */
static bool ground_motion(graph *g, const part *p, const double r[], int k, int pivots[], bool ground[])
{
    const sct_structure *st = g->st;
    const size_t n = (size_t)st->n_dof;
    double *v = g->motion + (size_t)k * n, t[3], w[3], before = 0.0, left = 0.0;
    int pivot = -1;
    unpack(g, r, t, w);
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i], dof = st->first_dof[j];
        const loose *l = &g->loose[j];
        double q[3], u[3];
        place(g, p, j, q);
        displacement(t, w, q, u);
        for (int c = 0; c < st->n_free[j]; c++) {
            v[dof + c] = sct_dot(3, st->basis[j][c], u);
            before = fmax(before, fabs(v[dof + c]));
        }
        for (int h = 0; h < l->n; h++) {
            const double factor = v[dof + l->pivot[h]];
            for (int c = 0; c < st->n_free[j]; c++) v[dof + c] -= factor * l->h[h][c];
        }
    }
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i];
        for (int dof = st->first_dof[j]; dof < st->first_dof[j] + st->n_free[j]; dof++) {
            if (fabs(v[dof]) > left * (1.0 + 1e-9)) {
                left = fabs(v[dof]);
                pivot = dof;
            }
        }
    }
    for (int earlier = 0; earlier < k && pivot >= 0; earlier++) {
        const double *e = g->motion + (size_t)earlier * n, factor = v[pivots[earlier]];
        left = 0.0;
        for (int i = 0; i < p->count; i++) {
            const int j = g->joints[p->first + i];
            for (int dof = st->first_dof[j]; dof < st->first_dof[j] + st->n_free[j]; dof++) {
                v[dof] -= factor * e[dof];
                if (fabs(v[dof]) > left * (1.0 + 1e-9)) {
                    left = fabs(v[dof]);
                    pivot = dof;
                }
            }
        }
    }
    if (pivot < 0 || !(left > 1e-7 * before)) return false; /* 1e-7: well above rounding, well below a real motion */
    const double top = v[pivot];
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i];
        for (int dof = st->first_dof[j]; dof < st->first_dof[j] + st->n_free[j]; dof++) v[dof] /= top;
    }
    pivots[k] = pivot;
    ground[pivot] = true;
    return true;
}

static void add_turn(const graph *g, const part *p, const double t[3], const double w[3], sct_text *text)
{
    const double w2 = sct_dot(3, w, w), pitch = sct_dot(3, t, w) / w2;
    double at[3];
    sct_cross(w, t, at); /* the point of the axis nearest to the centre */
    for (int k = 0; k < 3; k++) at[k] = p->centre[k] + p->size * at[k] / w2;
    const int *joints = g->joints + p->first;
    for (int i = 0; i < p->count; i++) { /* better: a held joint on the axis */
        double q[3], u[3], along = 0.0;
        if (g->st->model->joints[joints[i]].n_held == 0) continue;
        place(g, p, joints[i], q);
        displacement(t, w, q, u);
        for (int k = 0; k < 3; k++) along = fmax(along, fabs(u[k] - pitch * w[k]));
        if (along > 1e-9 * sqrt(w2)) continue;
        memcpy(at, g->st->model->joints[joints[i]].at, sizeof at);
        break;
    }
    for (int k = 0; k < 3; k++) {
        if (fabs(at[k]) < 1e-12 * p->size) at[k] = 0.0;
    }
    sct_text_add(text, g->st->dim == 2 ? "turn about " : "turn about an axis through ");
    sct_motion_point(text, g->st->model, at);
    if (g->st->dim == 2) return;
    sct_text_add(text, " along ");
    sct_motion_direction(text, 3, w, false);
    if (fabs(pitch) > 1e-6) sct_text_add(text, ", sliding along it at the same time");
}

static void add_part(const graph *g, const part *p, sct_text *text)
{
    if (g->n_parts == 1) {
        sct_text_add(text, "the truss ");
        return;
    }
    sct_text_add(text, "the part with joint ");
    sct_motion_name(text, g->st->model->joints[g->joints[p->first]].name);
    sct_text_add(text, " ");
}

static sct_where part_where(const graph *g, const part *p)
{
    const sct_joint *joints = g->st->model->joints;
    int named = g->joints[p->first];
    if (g->n_parts > 1) return joints[named].where;
    for (int i = p->count - 1; i >= 0; i--) {
        if (joints[g->joints[p->first + i]].n_held > 0) named = g->joints[p->first + i];
    }
    return joints[named].where;
}

static bool tell_rigid(const graph *g, const part *p, const double r[], bool is_turn, int needed, sct_issues *issues)
{
    double t[3], w[3];
    sct_text text = {0};
    unpack(g, r, t, w);
    add_part(g, p, &text);
    sct_text_add(&text, "can ");
    if (is_turn) {
        add_turn(g, p, t, w, &text);
    } else {
        sct_text_add(&text, "shift in ");
        sct_motion_direction(&text, g->st->dim, t, false);
    }
    if (p->n_held < needed) {
        sct_text_format(&text, ": its supports hold %d direction%s, at least %d are needed", p->n_held,
                        p->n_held == 1 ? "" : "s", needed);
    } else {
        sct_text_format(&text, ": its supports hold %d directions, but none that stops this", p->n_held);
    }
    return sct_motion_tell(&text, SCT_ERROR, part_where(g, p), issues);
}

static bool tell_unsupported(const graph *g, const part *p, sct_issues *issues)
{
    sct_text text = {0};
    sct_text_add(&text, "the part with joint ");
    sct_motion_name(&text, g->st->model->joints[g->joints[p->first]].name);
    sct_text_add(&text, " has no support and no connection to the rest; connect it or support it");
    return sct_motion_tell(&text, SCT_ERROR, part_where(g, p), issues);
}

static sct_status check_part(graph *g, part *p, bool ground[], int *n_found, int *n_told, bool name_unsupported,
                             sct_issues *issues)
{
    double axis[3] = {0.0, 0.0, 0.0};
    sct_row R[SCT_ROW];
    measure_part(g, p);
    const int needed = directions_needed(g, p, axis);
    const int k = free_motions(g, p, needed, axis, R);
    const int n_turns = simplify(g, p, k, R);
    int pivots[SCT_ROW], n_new = 0;
    bool enough = true;
    for (int i = 0; i < k && enough; i++) {
        const int s = (i + n_turns) % k; /* shifts first: they are easier to picture */
        if (!ground_motion(g, p, R[s], n_new, pivots, ground)) continue;
        n_new++;
        if (p->n_held == 0 || *n_told >= SCT_MOTIONS_TOLD) continue;
        enough = tell_rigid(g, p, R[s], s < n_turns, needed, issues);
        ++*n_told;
    }
    if (p->n_held == 0 && name_unsupported && *n_told < SCT_MOTIONS_TOLD) {
        enough = tell_unsupported(g, p, issues);
        ++*n_told;
    }
    *n_found += n_new;
    return enough ? SCT_OK : SCT_NO_MEMORY;
}

/* ---- all of it -------------------------------------------------------------------------------------------------- */

static bool warn_of_parts(const graph *g, sct_issues *issues)
{
    const sct_joint *joints = g->st->model->joints;
    sct_text text = {0};
    sct_text_format(&text, "the structure falls into %d parts without connection to each other: those with joints ",
                    g->n_parts);
    for (int p = 0; p < g->n_parts && p < 10; p++) {
        if (p > 0) sct_text_add(&text, ", ");
        sct_motion_name(&text, joints[g->joints[g->parts[p].first]].name);
    }
    if (g->n_parts > 10) sct_text_format(&text, " and %d more", g->n_parts - 10);
    return sct_motion_tell(&text, SCT_WARNING, joints[g->joints[g->parts[0].first]].where, issues);
}

static sct_status check_graph(graph *g, bool ground[], int *n_found, int *n_told, sct_issues *issues)
{
    const sct_structure *st = g->st;
    int n_supported = 0;
    list_bars(g);
    list_parts(g);
    for (int p = 0; p < g->n_parts; p++) n_supported += g->parts[p].n_held > 0;
    const bool some_support = n_supported > 0;
    if (g->n_parts > 0 && !some_support) {
        sct_issue_add(issues, SCT_ERROR, st->model->joints[g->joints[0]].where,
                      "the structure has no support; hold at least %d directions", st->dim == 2 ? 3 : 6);
        ++*n_told;
    }
    sct_status status = check_joints(g, ground, n_found, n_told, issues);
    for (int p = 0; p < g->n_parts && status == SCT_OK; p++) {
        status = check_part(g, &g->parts[p], ground, n_found, n_told, some_support, issues);
    }
    const bool unsaid = n_supported == g->n_parts || !some_support; /* else the errors name the parts */
    if (status == SCT_OK && g->n_parts > 1 && unsaid && !warn_of_parts(g, issues)) status = SCT_NO_MEMORY;
    return status;
}

sct_status sct_connectivity_check(const sct_structure *st, bool ground[], int *n_found, int *n_told, sct_issues *issues)
{
    graph g = {.st = st};
    *n_found = *n_told = 0;
    memset(ground, 0, (size_t)st->n_dof * sizeof *ground);
    const sct_status status = graph_allocate(&g) ? check_graph(&g, ground, n_found, n_told, issues) : SCT_NO_MEMORY;
    graph_free(&g);
    return status;
}

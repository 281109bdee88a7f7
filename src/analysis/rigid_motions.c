/* Motions of a part as a whole that its supports leave free. */
#include <math.h>
#include <string.h>

#include "analysis/connectivity_parts.h"
#include "analysis/motion.h"
#include "base/vector.h"

static void measure_part(const sct_graph *g, sct_part *p)
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

/* A rigid motion is (t, w): a joint at q = (at - centre) / size moves by t + w x q. In the plane t = (tx, ty) and
 * w = wz only: `room` numbers of a row, 3 or 6. */
static int room(const sct_graph *g)
{
    return g->st->dim == 2 ? 3 : 6;
}

static void unpack(const sct_graph *g, const double r[], double t[3], double w[3])
{
    const bool plane = g->st->dim == 2;
    t[0] = r[0];
    t[1] = r[1];
    t[2] = plane ? 0.0 : r[2];
    w[0] = plane ? 0.0 : r[3];
    w[1] = plane ? 0.0 : r[4];
    w[2] = plane ? r[2] : r[5];
}

static void place(const sct_graph *g, const sct_part *p, int joint, double q[3])
{
    for (int k = 0; k < 3; k++) q[k] = (g->st->model->joints[joint].at[k] - p->centre[k]) / p->size;
}

static void displacement(const double t[3], const double w[3], const double q[3], double u[3])
{
    sct_cross3(w, q, u);
    for (int k = 0; k < 3; k++) u[k] += t[k];
}

/* A rotation w of the part turns the unknowns of joint j by M w. Where supports hold a rotation about an axis that lies
 * askew to those that members take part in, the rest follows from what members feel: least squares over them. */
static void rotation_map(const sct_graph *g, int j, double M[3][3])
{
    const sct_structure *st = g->st;
    const double(*B)[3] = (const double(*)[3])st->turn_basis[j];
    const int n = st->n_turns[j];
    memcpy(M, B, sizeof(double[3][3]));
    if (st->model->joints[j].n_turns_held == 0 || n == 0) return;
    double felt[3][3] = {{0}}; /* sum of a a' */
    for (int i = g->at[j]; i < g->at[j + 1]; i++) {
        const sct_spring *spring;
        for (int k = 0; (spring = sct_graph_spring(g, g->bars[i], k)) != NULL; k++) {
            double a[3];
            sct_graph_turn(g, spring, j, a);
            for (int x = 0; x < 9; x++) felt[x / 3][x % 3] += a[x / 3] * a[x % 3];
        }
    }
    sct_row V[3] = {{0}}; /* [B felt B', B felt]: reduced to [1, M], rows in the order of the pivots */
    int pivot[3];
    for (int r = 0; r < n; r++) {
        for (int c = 0; c < 3; c++) {
            for (int x = 0; x < 3; x++) V[r][n + c] += B[r][x] * felt[x][c];
        }
        for (int c = 0; c < n; c++) V[r][c] = sct_dot(3, V[r] + n, B[c]);
    }
    const int rank = sct_span_reduce(n, n + 3, 0, 0, n, V, 0.0, pivot);
    for (int r = 0; r < rank; r++) memcpy(M[pivot[r]], V[r] + n, sizeof M[0]);
}

/* The row of a hold h . (t + w x q), q = NULL: h . w */
static void hold_row(const sct_graph *g, const double h[3], const double *q, sct_row row)
{
    double arm[3] = {h[0], h[1], h[2]};
    memset(row, 0, sizeof(sct_row));
    if (q != NULL) {
        sct_cross3(q, h, arm); /* h . (t + w x q) = h . t + w . (q x h) */
        memcpy(row, h, (size_t)g->st->dim * sizeof *row);
    }
    if (g->st->dim == 2)
        row[2] = arm[2];
    else
        memcpy(row + 3, arm, sizeof arm);
}

/* a loses a' B M: what is left of a share a in an elongation when the joint turns as its unknowns allow. */
static void take_unknowns(const sct_graph *g, int j, double M[3][3], double a[3])
{
    const int n = g->st->n_turns[j];
    double share[3];
    for (int i = 0; i < n; i++) share[i] = sct_dot(3, g->st->turn_basis[j][i], a);
    for (int i = 0; i < n; i++) {
        for (int x = 0; x < 3; x++) a[x] -= share[i] * M[i][x];
    }
}

/* Rows of the rotations that supports of joint j hold: springs of members that would be strained. */
static int add_held_turns(sct_graph *g, int j, double M[3][3], int m)
{
    if (g->st->model->joints[j].n_turns_held == 0) return m;
    for (int i = g->at[j]; i < g->at[j + 1]; i++) {
        const sct_spring *spring;
        for (int k = 0; (spring = sct_graph_spring(g, g->bars[i], k)) != NULL; k++) {
            double a[3];
            sct_graph_turn(g, spring, j, a);
            take_unknowns(g, j, M, a);
            hold_row(g, a, NULL, g->rows[m++]);
        }
    }
    return m;
}

static int add_elastic(sct_graph *g, int j, const double q[3], double M[3][3], int m)
{
    for (int i = g->support[j]; i < g->support[j + 1]; i++) {
        const sct_joint_spring *support = &g->st->model->joints[j].springs[i - g->support[j]];
        const double *dir = support->dir;
        double rest[3] = {dir[0], dir[1], dir[2]};
        take_unknowns(g, j, M, rest);
        const double turned[3] = {dir[0] - rest[0], dir[1] - rest[1], dir[2] - rest[2]};
        if (support->is_turn)
            hold_row(g, turned, NULL, g->rows[m++]);
        else
            hold_row(g, dir, q, g->rows[m++]);
    }
    return m;
}

/* Are all joints of a part on one line, in space? axis: along it. */
static bool is_straight(const sct_graph *g, const sct_part *p, double axis[3])
{
    if (g->st->dim == 2) return false;
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
        sct_cross3(q, axis, off);
        if (sct_dot(3, off, off) > SCT_NO_HOLD * SCT_NO_HOLD) return false;
    }
    return true;
}

/* Directions and rotations that a part needs held: a straight part in space without a joint that turns about its line
 * cannot be seen to do so. */
static int holds_needed(const sct_graph *g, const sct_part *p, bool on_one_line, const double axis[3])
{
    if (g->st->dim == 2) return 3;
    for (int i = 0; i < p->count && on_one_line; i++) {
        const int j = g->joints[p->first + i];
        for (int k = 0; k < g->st->n_turns[j]; k++) {
            if (fabs(sct_dot(3, g->st->turn_basis[j][k], axis)) > SCT_NO_HOLD) return 6;
        }
    }
    return on_one_line ? 5 : 6;
}

/* Rigid motions that the supports of a part leave free; returns their number, 0 to 6. line: of a straight part that is
 * not asked whether it turns about it, which moves no joint; else NULL. */
static int free_motions(sct_graph *g, const sct_part *p, const double *line, sct_row R[SCT_ROW])
{
    int m = 0;
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i];
        const sct_joint *joint = &g->st->model->joints[j];
        double q[3], M[3][3];
        place(g, p, j, q);
        rotation_map(g, j, M);
        for (int k = 0; k < joint->n_held; k++) hold_row(g, joint->held[k], q, g->rows[m++]);
        m = add_held_turns(g, j, M, m);
        m = add_elastic(g, j, q, M, m);
    }
    if (line != NULL) hold_row(g, line, NULL, g->rows[m++]);
    return sct_span_null(m, room(g), g->rows, SCT_NO_HOLD, R);
}

static bool is_support(const sct_graph *g, int j)
{
    const sct_joint *joint = &g->st->model->joints[j];
    return joint->n_held + joint->n_turns_held + joint->n_springs > 0;
}

/* Turns k free motions into ones that can be said: turns first (simple axes), then shifts; returns the number of turns.
 * A turn's axis goes through a held joint where the shifts that are free as well allow it. */
static int simplify(const sct_graph *g, const sct_part *p, int k, sct_row R[SCT_ROW])
{
    const int n = room(g), n_t = g->st->dim;
    const int n_turns = sct_span_reduce(k, n, 0, n_t, n, R, SCT_NO_HOLD, NULL);
    sct_row T[3];
    for (int i = n_turns; i < k; i++) {
        for (int c = n_t; c < n; c++) R[i][c] = 0.0;
    }
    sct_span_reduce(k, n, n_turns, 0, n_t, R, SCT_NO_HOLD, NULL);
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
            if (!is_support(g, j)) continue;
            place(g, p, j, q);
            displacement(t, w, q, u);
            sct_span_remove(n_t, k - n_turns, T, u);
            through_support = sct_dot(n_t, u, u) <= SCT_NO_HOLD * SCT_NO_HOLD * sct_dot(3, w, w);
            if (!through_support) continue;
            sct_cross3(q, w, t);
            memcpy(R[i], t, (size_t)n_t * sizeof(double));
        }
        if (!through_support) sct_span_remove(n_t, k - n_turns, T, R[i]);
    }
    return n_turns;
}

/* v, of the unknowns of a part's joints (rotations times the lever): its rigid motion r, without what loose joints do
 * by themselves. Returns the largest entry before that. */
static double spread(const sct_graph *g, const sct_part *p, const double r[], double v[])
{
    const sct_structure *st = g->st;
    double t[3], w[3], largest = 0.0;
    unpack(g, r, t, w);
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i], dof = st->first_dof[j], n = sct_graph_unknowns(g, j);
        const sct_loose *l = &g->loose[j];
        double q[3], u[3], M[3][3];
        place(g, p, j, q);
        displacement(t, w, q, u);
        rotation_map(g, j, M);
        for (int c = 0; c < n; c++) {
            const int turn = c - st->n_free[j];
            v[dof + c] = turn < 0 ? sct_dot(3, st->basis[j][c], u) : st->lever / p->size * sct_dot(3, M[turn], w);
            largest = fmax(largest, fabs(v[dof + c]));
        }
        for (int h = 0; h < l->n; h++) {
            const double factor = v[dof + l->pivot[h]];
            for (int c = 0; c < n; c++) v[dof + c] -= factor * l->h[h][c];
        }
    }
    return largest;
}

/* v, of the unknowns of a part's joints, loses factor times e (NULL: nothing). *pivot: the largest entry that is left
 * over, returned. */
static double take(const sct_graph *g, const sct_part *p, double v[], double factor, const double e[], int *pivot)
{
    double left = 0.0;
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i], first = g->st->first_dof[j];
        for (int dof = first; dof < first + sct_graph_unknowns(g, j); dof++) {
            if (e != NULL) v[dof] -= factor * e[dof];
            if (!(fabs(v[dof]) > left * (1.0 + 1e-9))) continue;
            left = fabs(v[dof]);
            *pivot = dof;
        }
    }
    return left;
}

/* One unknown is held per motion that is new: forward elimination of the motions in terms of the unknowns. false: the
 * motion is a sum of motions already found (of loose joints, say). */
static bool ground_motion(sct_graph *g, const sct_part *p, const double r[], int k, int pivots[])
{
    const size_t n = (size_t)g->st->n_dof;
    double *v = g->motion + (size_t)k * n;
    int pivot = -1;
    const double before = spread(g, p, r, v);
    double left = take(g, p, v, 0.0, NULL, &pivot);
    for (int earlier = 0; earlier < k && pivot >= 0; earlier++)
        left = take(g, p, v, v[pivots[earlier]], g->motion + (size_t)earlier * n, &pivot);
    if (pivot < 0 || !(left > 1e-7 * before)) return false; /* 1e-7: well above rounding, well below a real motion */
    const double top = v[pivot];
    for (int i = 0; i < p->count; i++) {
        const int j = g->joints[p->first + i], first = g->st->first_dof[j];
        for (int dof = first; dof < first + sct_graph_unknowns(g, j); dof++) v[dof] /= top;
    }
    pivots[k] = pivot;
    g->ground[pivot] = true;
    return true;
}

static void add_turn(const sct_graph *g, const sct_part *p, const double t[3], const double w[3], sct_text *text)
{
    const double w2 = sct_dot(3, w, w), pitch = sct_dot(3, t, w) / w2;
    double at[3];
    sct_cross3(w, t, at); /* the point of the axis nearest to the centre */
    for (int k = 0; k < 3; k++) at[k] = p->centre[k] + p->size * at[k] / w2;
    const int *joints = g->joints + p->first;
    for (int i = 0; i < p->count; i++) { /* better: a held joint on the axis */
        double q[3], u[3], along = 0.0;
        if (!is_support(g, joints[i])) continue;
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

static void add_part(const sct_graph *g, const sct_part *p, sct_text *text)
{
    if (g->n_parts == 1) {
        sct_text_add(text, sct_motion_is_frame(g->st->model) ? "the frame " : "the truss ");
        return;
    }
    sct_text_add(text, "the part with joint ");
    sct_motion_name(text, g->st->model->joints[g->joints[p->first]].name);
    sct_text_add(text, " ");
}

static sct_where part_where(const sct_graph *g, const sct_part *p)
{
    const sct_joint *joints = g->st->model->joints;
    int named = g->joints[p->first];
    if (g->n_parts > 1) return joints[named].where;
    for (int i = p->count - 1; i >= 0; i--) {
        if (is_support(g, g->joints[p->first + i])) named = g->joints[p->first + i];
    }
    return joints[named].where;
}

/* "2 directions and 1 rotation" */
static void add_holds(const sct_part *p, sct_text *text)
{
    if (p->n_held > 0 || p->n_turns == 0) sct_text_format(text, "%d direction%s", p->n_held, p->n_held == 1 ? "" : "s");
    if (p->n_held > 0 && p->n_turns > 0) sct_text_add(text, " and ");
    if (p->n_turns > 0) sct_text_format(text, "%d rotation%s", p->n_turns, p->n_turns == 1 ? "" : "s");
}

static bool tell_rigid(const sct_graph *g, const sct_part *p, const double r[], bool is_turn, int needed)
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
    sct_text_add(&text, ": its supports hold ");
    add_holds(p, &text);
    if (p->n_held + p->n_turns < needed)
        sct_text_format(&text, ", at least %d are needed", needed);
    else
        sct_text_add(&text, ", but none that stops this");
    return sct_motion_tell(&text, SCT_ERROR, part_where(g, p), g->issues);
}

static bool tell_unsupported(const sct_graph *g, const sct_part *p)
{
    sct_text text = {0};
    sct_text_add(&text, "the part with joint ");
    sct_motion_name(&text, g->st->model->joints[g->joints[p->first]].name);
    sct_text_add(&text, " has no support and no connection to the rest; connect it or support it");
    return sct_motion_tell(&text, SCT_ERROR, part_where(g, p), g->issues);
}

sct_status sct_check_rigid_motions(sct_graph *g, sct_part *p, bool name_unsupported)
{
    double axis[3] = {0.0, 0.0, 0.0};
    sct_row R[SCT_ROW];
    measure_part(g, p);
    const bool on_one_line = is_straight(g, p, axis), is_held = p->n_held + p->n_turns > 0;
    const int needed = holds_needed(g, p, on_one_line, axis);
    /* where there are supports, what the joints then do is told instead */
    const bool spin_counts = !on_one_line || (needed == 6 && !is_held);
    const int k = free_motions(g, p, spin_counts ? NULL : axis, R);
    const int n_turns = simplify(g, p, k, R);
    int pivots[SCT_ROW], n_new = 0;
    bool enough = true;
    for (int i = 0; i < k && enough; i++) {
        const int s = (i + n_turns) % k; /* shifts first: they are easier to picture */
        if (!ground_motion(g, p, R[s], n_new, pivots)) continue;
        n_new++;
        if (!is_held || g->n_told >= SCT_MOTIONS_TOLD) continue;
        enough = tell_rigid(g, p, R[s], s < n_turns, needed);
        g->n_told++;
    }
    if (!is_held && name_unsupported && g->n_told < SCT_MOTIONS_TOLD) {
        enough = tell_unsupported(g, p);
        g->n_told++;
    }
    g->n_found += n_new;
    return enough ? SCT_OK : SCT_NO_MEMORY;
}

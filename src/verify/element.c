#include "verify/element.h"

#include <math.h>
#include <string.h>

static const long double GRAVITY = 9.80665L; /* [m/s2] standard value, ISO 80000-3 */
static const long double VERTICAL = 1e-3L;   /* sine: a member nearer to z has x for its `up` */

/* Where the unknowns of a part are among the twelve, and with which sign: a slope w' along axis 2 is a rotation about
 * axis 1 backwards. */
typedef struct place {
    int n, at[4], sign[4];
    int turn[2]; /* which unknowns are the rotations of the ends */
} place;
static const place PLACE[SCT_TURNS] = {
    {4, {1, 5, 7, 11}, {1, 1, 1, 1}, {1, 3}},
    {4, {2, 4, 8, 10}, {1, -1, 1, -1}, {1, 3}},
    {2, {3, 9}, {1, 1}, {0, 1}},
};

/* ---- geometry -----------------------------------------------------------------------------------------------------
 */

static long double dot(const long double a[3], const long double b[3])
{
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

static void cross(const long double a[3], const long double b[3], long double c[3])
{
    for (int i = 0; i < 3; i++) c[i] = a[(i + 1) % 3] * b[(i + 2) % 3] - a[(i + 2) % 3] * b[(i + 1) % 3];
}

static long double norm(const long double a[3])
{
    return sqrtl(dot(a, a));
}

/* Axis 2 is square to axis 0 and `up`, axis 1 square to both; then both are turned by `roll`. */
static void find_axes(const sct_model *m, const sct_member *member, sct_element *x)
{
    const double *a = m->joints[member->from].at, *b = m->joints[member->to].at;
    long double(*axes)[3] = x->axes, up[3], side[3];
    for (int i = 0; i < 3; i++) {
        axes[0][i] = (long double)b[i] - a[i];
        up[i] = member->up[i];
    }
    x->L = norm(axes[0]);
    for (int i = 0; i < 3; i++) axes[0][i] /= x->L;
    if (m->dimensions == 2) {
        memcpy(axes[2], (long double[3]){0.0L, 0.0L, 1.0L}, sizeof axes[2]);
        cross(axes[2], axes[0], axes[1]);
        return;
    }
    if (dot(up, up) == 0.0L) up[hypotl(axes[0][0], axes[0][1]) > VERTICAL ? 2 : 0] = 1.0L;
    cross(axes[0], up, side);
    const long double length = norm(side);
    for (int i = 0; i < 3; i++) side[i] /= length;
    cross(side, axes[0], up);
    const long double c = cosl(member->roll), s = sinl(member->roll);
    for (int i = 0; i < 3; i++) {
        axes[1][i] = c * up[i] + s * side[i];
        axes[2][i] = c * side[i] - s * up[i];
    }
}

void sct_element_to_model(const sct_element *x, const long double local[12], long double end[2][6])
{
    for (int i = 0; i < 12; i++) {
        const long double *v = local + i - i % 3;
        end[i / 6][i % 6] = v[0] * x->axes[0][i % 3] + v[1] * x->axes[1][i % 3] + v[2] * x->axes[2][i % 3];
    }
}

int sct_element_rows(const sct_element *x, int part, double row[4][2][6])
{
    const place *p = &PLACE[part];
    for (int i = 0; i < p->n; i++) {
        long double local[12] = {0}, end[2][6];
        local[p->at[i]] = p->sign[i];
        sct_element_to_model(x, local, end);
        for (int k = 0; k < 12; k++) row[i][k / 6][k % 6] = (double)end[k / 6][k % 6];
    }
    return p->n;
}

/* ---- ends ---------------------------------------------------------------------------------------------------------
 */

bool sct_element_turns(const sct_model *m, int member, int end, int turn)
{
    const sct_member_end *ends = m->members[member].end;
    if (m->dimensions == 2 && turn != SCT_IN_PLANE) return false;
    if (ends[end].fixity[turn] == SCT_PINNED) return false;
    return turn != SCT_TWIST || ends[1 - end].fixity[turn] != SCT_PINNED;
}

void sct_element_turn_axis(const sct_element *x, int turn, double axis[3])
{
    const int along = turn == SCT_TWIST ? 0 : 2 - turn;
    for (int i = 0; i < 3; i++) axis[i] = (double)x->axes[along][i];
}

bool sct_element_is_beam(const sct_model *m, int member)
{
    for (int i = 0; i < 2 * SCT_TURNS; i++)
        if (sct_element_turns(m, member, i / SCT_TURNS, i % SCT_TURNS)) return true;
    return false;
}

/* Takes rotation `at` from the joint: only a spring ties them, 0 for a hinge. */
static void release(sct_element_part *part, int n, int at, long double spring)
{
    sct_element_release *r = &part->release[part->n_releases++];
    long double(*K)[4] = part->K;
    const long double sum = K[at][at] + spring;
    *r = (sct_element_release){.at = at, .is_sprung = spring > 0.0L};
    if (!(sum > 0.0L)) return; /* free to twist at both ends: nothing is left to release */
    r->kept = spring / sum;
    for (int i = 0; i < n; i++) r->taken[i] = i != at ? K[i][at] / sum : 0.0L;
    for (int i = 0; i < n; i++) {
        for (int j = 0; j < n && i != at; j++) K[i][j] -= j != at ? r->taken[i] * K[at][j] : 0.0L;
    }
    for (int i = 0; i < n; i++) {
        K[at][i] *= r->kept;
        if (i != at) K[i][at] = K[at][i];
    }
}

/* What acts on the unknowns of a part, as the joints feel it. Without springs: sprung ends stay held. */
static void condense(const sct_element_part *part, int n, bool with_springs, long double f[4])
{
    for (int k = 0; k < part->n_releases; k++) {
        const sct_element_release *r = &part->release[k];
        const long double x = f[r->at];
        if (r->is_sprung && !with_springs) {
            f[r->at] = 0.0L;
            continue;
        }
        for (int i = 0; i < n; i++) f[i] -= r->taken[i] * x;
        f[r->at] = r->kept * x;
    }
}

/* ---- stiffness ----------------------------------------------------------------------------------------------------
 */

static void set_bending(sct_element_part *part, long double EI, long double L)
{
    const long double a = 12.0L * EI / (L * L * L), b = 6.0L * EI / (L * L), c = 4.0L * EI / L, d = 2.0L * EI / L;
    const long double K[4][4] = {{a, b, -a, b}, {b, c, -b, d}, {-a, -b, a, -b}, {b, d, -b, c}};
    memcpy(part->K, K, sizeof K);
}

static void set_twist(sct_element_part *part, long double GJ, long double L)
{
    const long double k = GJ / L;
    part->K[0][0] = part->K[1][1] = k;
    part->K[0][1] = part->K[1][0] = -k;
}

/* Hinges before springs; a part with two hinges has no stiffness. */
static void release_ends(const sct_member *member, int turn, sct_element_part *part)
{
    const place *p = &PLACE[turn];
    for (int end = 0; end < 2; end++)
        if (member->end[end].fixity[turn] == SCT_PINNED) release(part, p->n, p->turn[end], 0.0L);
    if (part->n_releases == 2) memset(part->K, 0, sizeof part->K);
    for (int end = 0; end < 2; end++)
        if (member->end[end].fixity[turn] == SCT_SPRUNG)
            release(part, p->n, p->turn[end], member->end[end].stiffness[turn]);
}

/* A property that is not stated matters to nothing that is left after the releases, but for how they share. */
static double stated(double value)
{
    return value > 0.0 ? value : 1.0;
}

sct_element sct_element_make(const sct_model *m, int e, const sct_verify_section *section)
{
    const sct_member *member = &m->members[e];
    const sct_material *material = &m->materials[m->groups[member->group].material];
    sct_element x = {.member = e};
    find_axes(m, member, &x);
    for (int plane = 0; plane < 2; plane++) {
        x.EI[plane] = (long double)material->E * stated(section->I[plane]);
        set_bending(&x.part[plane], x.EI[plane], x.L);
    }
    set_twist(&x.part[SCT_TWIST], (long double)stated(material->G) * stated(section->J), x.L);
    for (int turn = 0; turn < SCT_TURNS; turn++) release_ends(member, turn, &x.part[turn]);
    for (int i = 0; i < 3 && sct_element_is_beam(m, e); i++)
        x.weight[i] = -GRAVITY * material->density * section->A * x.axes[i][m->dimensions - 1];
    return x;
}

void sct_element_pull(const sct_element *x, const long double u[2][6], long double f[12])
{
    long double moved[12] = {0}; /* the displacement of the start is taken off both */
    for (int i = 0; i < 3; i++) {
        for (int k = 0; k < 3; k++) {
            moved[6 + i] += x->axes[i][k] * (u[1][k] - u[0][k]);
            moved[3 + i] += x->axes[i][k] * u[0][3 + k];
            moved[9 + i] += x->axes[i][k] * u[1][3 + k];
        }
    }
    memset(f, 0, 12 * sizeof *f);
    for (int part = 0; part < SCT_TURNS; part++) {
        const place *p = &PLACE[part];
        for (int i = 0; i < p->n; i++) {
            for (int j = 0; j < p->n; j++)
                f[p->at[i]] += p->sign[i] * p->sign[j] * x->part[part].K[i][j] * moved[p->at[j]];
        }
        f[p->at[0]] = part == SCT_TWIST ? -f[p->at[1]] : -f[p->at[2]]; /* equilibrium to the last digit */
    }
}

/* ---- loads --------------------------------------------------------------------------------------------------------
 */

/* Into local axes; projected: per metre square to the vector. */
static void to_local(const sct_element *x, const double v[3], sct_load_axes kind, long double local[3])
{
    const long double w[3] = {v[0], v[1], v[2]};
    long double square[3];
    cross(x->axes[0], w, square);
    const long double size = norm(w), part = kind == SCT_AXES_PROJECTED && size > 0.0L ? norm(square) / size : 1.0L;
    for (int i = 0; i < 3; i++) local[i] = kind == SCT_AXES_MEMBER ? w[i] : part * dot(x->axes[i], w);
}

sct_element_load sct_element_load_of(const sct_element *x, int k, const sct_member_load *load)
{
    sct_element_load local = {.k = k, .is_point = load->is_point, .a = load->a, .b = load->b};
    const sct_load_axes unprojected = load->axes == SCT_AXES_MEMBER ? SCT_AXES_MEMBER : SCT_AXES_MODEL;
    to_local(x, load->qa, load->axes, local.qa);
    to_local(x, load->qb, load->axes, local.qb);
    to_local(x, load->F, unprojected, local.F);
    to_local(x, load->M, unprojected, local.M);
    return local;
}

/* A force and a moment at s from the start, to the fixed ends: Hermite's shapes across, straight ones along. */
static void add_at(long double L, long double s, const long double F[3], const long double M[3], long double q[12])
{
    const long double xi = s / L, eta = (L - s) / L;
    const long double N[4] = {eta * eta * (1.0L + 2.0L * xi), s * eta * eta, xi * xi * (1.0L + 2.0L * eta),
                              -(L - s) * xi * xi};
    const long double slope[4] = {-6.0L * xi * eta / L, eta * (eta - 2.0L * xi), 6.0L * xi * eta / L,
                                  xi * (xi - 2.0L * eta)};
    q[0] += eta * F[0];
    q[6] += xi * F[0];
    q[3] += eta * M[0];
    q[9] += xi * M[0];
    for (int plane = 0; plane < 2; plane++) {
        const place *p = &PLACE[plane];
        const long double couple = plane == SCT_IN_PLANE ? M[2] : -M[1];
        for (int i = 0; i < 4; i++) q[p->at[i]] += p->sign[i] * (F[1 + plane] * N[i] + couple * slope[i]);
    }
}

/* Boole's rule, exact to the fifth degree: the load is linear, the shapes cubic. */
static void add_load(long double L, const sct_element_load *load, long double q[12])
{
    static const long double WEIGHT[5] = {7.0L / 90, 32.0L / 90, 12.0L / 90, 32.0L / 90, 7.0L / 90};
    static const long double NONE[3];
    if (load->is_point) {
        add_at(L, load->a, load->F, load->M, q);
        return;
    }
    const long double h = load->b - load->a;
    for (int g = 0; g < 5; g++) {
        const long double t = g / 4.0L;
        long double F[3];
        for (int i = 0; i < 3; i++) F[i] = WEIGHT[g] * h * ((1.0L - t) * load->qa[i] + t * load->qb[i]);
        add_at(L, load->a + t * h, F, NONE, q);
    }
}

/* Held against the curvature that warming would give it, the ends feel E I times that. */
static void add_curvature(const sct_model *m, const sct_element *x, int k, long double q[12])
{
    const sct_case *c = &m->cases[k];
    const double expansion = m->materials[m->groups[m->members[x->member].group].material].expansion;
    for (int i = 0; i < c->n_bar_actions; i++) {
        if (c->bar_actions[i].member != x->member) continue;
        for (int plane = 0; plane < 2; plane++) {
            const double gradient = c->bar_actions[i].gradient[plane];
            const place *p = &PLACE[plane];
            if (gradient == 0.0) continue;
            const long double moment = -x->EI[plane] * expansion * gradient;
            q[p->at[1]] -= p->sign[1] * moment;
            q[p->at[3]] += p->sign[3] * moment;
        }
    }
}

void sct_element_held(const sct_model *m, const sct_element *x, int k, long double q[12], long double at[12])
{
    const sct_case *c = &m->cases[k];
    sct_element_load own = {.b = x->L};
    memset(q, 0, 12 * sizeof *q);
    for (int i = 0; i < 3; i++) own.qa[i] = own.qb[i] = c->self_weight * x->weight[i];
    add_load(x->L, &own, q);
    for (int i = 0; i < x->n_loads; i++)
        if (x->loads[i].k == k) add_load(x->L, &x->loads[i], q);
    long double warmed[12] = {0};
    add_curvature(m, x, k, warmed);
    memcpy(at, q, 12 * sizeof *q);
    for (int part = 0; part < SCT_TURNS; part++) {
        const place *p = &PLACE[part];
        long double felt[4], told[4];
        for (int i = 0; i < p->n; i++) {
            told[i] = p->sign[i] * q[p->at[i]];
            felt[i] = told[i] + p->sign[i] * warmed[p->at[i]];
        }
        condense(&x->part[part], p->n, false, told);
        condense(&x->part[part], p->n, true, felt);
        for (int i = 0; i < p->n; i++) {
            q[p->at[i]] = p->sign[i] * felt[i];
            at[p->at[i]] = p->sign[i] * told[i];
        }
    }
}

/* Seeded random trusses as plain values in SI, and as model files: in any units, order of keys, blanks and spelling.
 *
 * A test copies a model by assignment, changes one thing and compares what the library makes of both. */
#ifndef TESTS_RANDOM_MODELS_H
#define TESTS_RANDOM_MODELS_H

#include "support.h"

#include <stdbool.h>
#include <string.h>

#include "base/number.h"
#include "base/random.h"
#include "base/text.h"
#include "scantling.h"

enum { RM_JOINTS = 32, RM_BARS = 128, RM_GROUPS = 12, RM_CASES = 5, RM_SUMS = 6, RM_LIMITS = 4, RM_SECTIONS = 16 };

typedef struct rm_joint {
    double at[3];
    int n_held;
    double held[3][3];
} rm_joint;

typedef struct rm_bar {
    int from, to, group;
} rm_bar;

typedef enum rm_size { RM_HELD, RM_FREE, RM_LADDER, RM_SECTION } rm_size;

typedef struct rm_group {
    rm_size size;
    int material, section; /* section: of RM_SECTION */
    double A, A_min, A_max;
    double start;    /* 0: none */
    double c;        /* I = c A^2; 0: not stated, and buckling is not checked */
    double f_t, f_c; /* [Pa] allowable */
} rm_group;

typedef struct rm_case {
    double self_weight;
    double F[RM_JOINTS][3], d[RM_JOINTS][3]; /* loads, settlements */
    double dT[RM_BARS], lack[RM_BARS];
} rm_case;

typedef struct rm_sum {
    double factor[RM_CASES];
} rm_sum;

typedef struct rm_limit {
    int joint;
    double direction[3], at_most;
} rm_limit;

typedef struct rm_material {
    double E, density, expansion, yield;
} rm_material;

typedef struct rm_section {
    double A, I;
} rm_section;

typedef struct rm_model {
    int dim, n_joints, n_bars, n_groups, n_cases, n_sums, n_limits, n_sections;
    int base;   /* joints 0 .. base - 1 are the pinned ones it grew from */
    int needed; /* bars 0 .. needed - 1 hold it; the others are redundant */
    rm_material material[2];
    rm_joint joint[RM_JOINTS];
    rm_bar bar[RM_BARS];
    rm_group group[RM_GROUPS];
    rm_case load_case[RM_CASES];
    rm_sum sum[RM_SUMS];
    rm_limit limit[RM_LIMITS];
    rm_section section[RM_SECTIONS];
} rm_model;

static inline double rm_between(sct_random *r, double low, double high)
{
    return low + (high - low) * sct_random_unit(r);
}

static inline int rm_below(sct_random *r, int n)
{
    return (int)(sct_random_bits(r) % (uint64_t)n);
}

/* ---- random models ---------------------------------------------------------------------------------------------- */

enum {
    RM_PLANE = 1,       /* never in space */
    RM_DETERMINATE = 2, /* no bar and no support more than it takes */
    RM_NO_WEIGHT = 4,
    RM_LOADS_ONLY = 8, /* joint loads and nothing else */
    RM_SIZED = 16,     /* groups with free areas; else all are held */
    RM_BUCKLES = 32,   /* groups state I = c A^2, Euler is checked */
    RM_LADDERS = 64,   /* groups pick from a family */
    RM_DEFLECTS = 128, /* one or two deflection limits */
};

/* Coordinates are multiples of 2^-10 m: sums with whole numbers are exact. */
static inline double rm_place(sct_random *r, double low, double high)
{
    return floor(1024.0 * rm_between(r, low, high)) / 1024.0;
}

static inline void rm_unit(sct_random *r, int dim, double d[3])
{
    double length = 0.0;
    while (!(length > 0.3 && length < 1.0)) {
        length = 0.0;
        for (int i = 0; i < 3; i++) {
            d[i] = i < dim ? rm_between(r, -1.0, 1.0) : 0.0;
            length = hypot(length, d[i]);
        }
    }
    for (int i = 0; i < 3; i++) d[i] /= length;
}

static inline double rm_direction(const rm_model *m, int from, int to, double d[3])
{
    double L = 0.0;
    for (int i = 0; i < 3; i++) {
        d[i] = m->joint[to].at[i] - m->joint[from].at[i];
        L = hypot(L, d[i]);
    }
    for (int i = 0; i < 3; i++) d[i] /= L;
    return L;
}

/* Sine of the angle of two unit vectors, or volume of three. */
static inline double rm_spread(int dim, double d[3][3])
{
    if (dim == 2) return fabs(d[0][0] * d[1][1] - d[0][1] * d[1][0]);
    return fabs(d[0][0] * (d[1][1] * d[2][2] - d[1][2] * d[2][1]) - d[0][1] * (d[1][0] * d[2][2] - d[1][2] * d[2][0]) +
                d[0][2] * (d[1][0] * d[2][1] - d[1][1] * d[2][0]));
}

static inline bool rm_has_bar(const rm_model *m, int a, int b)
{
    for (int e = 0; e < m->n_bars; e++) {
        if ((m->bar[e].from == a && m->bar[e].to == b) || (m->bar[e].from == b && m->bar[e].to == a)) return true;
    }
    return false;
}

/* Adds a joint that is held by bars to joints below `reach` and, now and then, by an inclined roller in place of one.
 */
static inline void rm_add_joint(rm_model *m, sct_random *r, int reach, bool may_roll)
{
    const int j = m->n_joints++;
    rm_joint *joint = &m->joint[j];
    *joint = (rm_joint){0};
    const bool rolls = may_roll && m->dim == 2 && rm_below(r, 6) == 0;
    for (;;) {
        double d[3][3] = {{0}};
        int to[3];
        bool good = true;
        for (int i = 0; i < m->dim; i++) joint->at[i] = rm_place(r, 0.0, i == m->dim - 1 ? 7.0 : 10.0);
        for (int i = 0; i < j; i++) good = good && rm_direction(m, i, j, d[0]) > 1.0;
        for (int i = 0; i < m->dim; i++) {
            to[i] = rm_below(r, reach);
            for (int k = 0; k < i; k++) good = good && to[k] != to[i];
        }
        if (!good) continue;
        for (int i = 0; i < m->dim; i++) rm_direction(m, to[i], j, d[i]);
        if (rolls) rm_unit(r, 2, d[1]); /* only in the plane */
        if (!(rm_spread(m->dim, d) > (m->dim == 2 ? 0.4 : 0.3))) continue;
        for (int i = 0; i < m->dim - rolls; i++) m->bar[m->n_bars++] = (rm_bar){to[i], j, rm_below(r, m->n_groups)};
        if (rolls) memcpy(joint->held[joint->n_held++], d[1], sizeof joint->held[0]);
        return;
    }
}

static inline void rm_add_groups(rm_model *m, sct_random *r, unsigned kind)
{
    m->n_groups = 2 + rm_below(r, 3);
    for (int p = 0; p < 2; p++) {
        m->material[p] = (rm_material){rm_between(r, 70e9, 210e9), rm_between(r, 2500, 8000), 12e-6, 300e6};
    }
    for (int g = 0; g < m->n_groups; g++) {
        m->group[g] = (rm_group){
            .size = RM_HELD,
            .material = rm_below(r, 2),
            .A = pow(10.0, rm_between(r, -3.5, -2.5)),
            .A_min = pow(10.0, rm_between(r, -5.0, -3.9)),
            .A_max = 0.5,
            .c = kind & RM_BUCKLES ? rm_between(r, 0.2, 2.0) : 0.0,
            .f_t = rm_between(r, 100e6, 250e6),
            .f_c = rm_between(r, 80e6, 200e6),
        };
        if (kind & RM_SIZED) m->group[g].size = RM_FREE;
        if (kind & RM_LADDERS) m->group[g].size = RM_LADDER;
    }
    m->n_sections = kind & RM_LADDERS ? 12 : 0;
    for (int k = 0; k < m->n_sections; k++) {
        const double A = 1e-4 * pow(1.5, k) * rm_between(r, 0.9, 1.1);
        m->section[k] = (rm_section){A, rm_between(r, 0.5, 1.5) * A * A};
    }
}

static inline void rm_add_loads(rm_model *m, sct_random *r, unsigned kind)
{
    m->n_cases = 3;
    m->load_case[0].self_weight = kind & (RM_NO_WEIGHT | RM_LOADS_ONLY) ? 0.0 : 1.0;
    for (int k = 0; k < 3; k++) {
        rm_case *c = &m->load_case[k];
        for (int j = m->base; j < m->n_joints; j++) {
            for (int i = 0; i < m->dim; i++) c->F[j][i] = rm_below(r, 3) > 0 ? rm_between(r, -3e4, 3e4) : 0.0;
        }
    }
    m->load_case[0].F[m->n_joints - 1][m->dim - 1] = -2e4;
    if (!(kind & RM_LOADS_ONLY)) {
        rm_case *c = &m->load_case[2];
        for (int e = 0; e < m->n_bars; e++) {
            if (rm_below(r, 3) == 0) c->dT[e] = rm_between(r, -40.0, 40.0);
            if (rm_below(r, 4) == 0) c->lack[e] = rm_between(r, -2e-3, 2e-3);
        }
        for (int j = 0; j < m->n_joints; j++) {
            const double by = rm_between(r, -5e-3, 5e-3);
            if (m->joint[j].n_held == m->dim) {
                for (int i = 0; i < m->dim; i++) c->d[j][i] = rm_between(r, -5e-3, 5e-3);
            } else if (m->joint[j].n_held == 1) {
                for (int i = 0; i < m->dim; i++) c->d[j][i] = by * m->joint[j].held[0][i];
            }
        }
    }
    m->n_sums = 3;
    m->sum[0] = (rm_sum){{1.0, 1.0}};
    m->sum[1] = (rm_sum){{1.0, 0.0, 0.8}};
    m->sum[2] = (rm_sum){{0.9, -0.7, 0.5}};
}

/* A stable truss: pinned joints, then each joint tied to earlier ones in wide angles, then redundant bars and rollers,
 * as the kind allows. Three cases, three combinations. */
static inline rm_model rm_random(unsigned kind, uint64_t seed)
{
    sct_random r = {seed * 2654435761u + kind};
    rm_model m = {.dim = kind & RM_PLANE || seed % 2 == 0 ? 2 : 3};
    rm_add_groups(&m, &r, kind);
    for (int j = 0; j < m.dim; j++) {
        rm_joint *joint = &m.joint[m.n_joints++];
        for (int i = 0; i < m.dim; i++) joint->at[i] = rm_place(&r, 0.0, 1.0) + (j == 1 && i == 0 ? 8.0 : 0.0);
        if (m.dim == 3 && j == 2) joint->at[1] += 7.0;
        joint->n_held = m.dim;
        for (int i = 0; i < m.dim; i++) joint->held[i][i] = 1.0;
    }
    m.base = m.dim;
    const int n_joints = m.dim + 2 + rm_below(&r, m.dim == 2 ? 9 : 7);
    while (m.n_joints < n_joints) rm_add_joint(&m, &r, m.n_joints, m.n_joints > m.dim + 1);
    for (int g = 0; g < m.n_groups; g++) m.bar[rm_below(&r, m.n_bars)].group = g; /* may undo one before it */
    m.needed = m.n_bars;
    for (int i = rm_below(&r, 7); i >= 0 && !(kind & RM_DETERMINATE); i--) {
        const int a = rm_below(&r, m.n_joints), b = rm_below(&r, m.n_joints);
        if (a != b && (a >= m.base || b >= m.base) && !rm_has_bar(&m, a, b)) {
            m.bar[m.n_bars++] = (rm_bar){a, b, rm_below(&r, m.n_groups)};
        }
    }
    if (!(kind & RM_DETERMINATE)) {
        rm_joint *joint = &m.joint[m.base + rm_below(&r, m.n_joints - m.base)];
        if (joint->n_held == 0 && rm_below(&r, 2) == 0) rm_unit(&r, m.dim, joint->held[joint->n_held++]);
    }
    for (int g = 0, n = 0; g < m.n_groups; g++) { /* a group that lost its last bar takes one */
        int used = 0;
        for (int e = 0; e < m.n_bars; e++) used += m.bar[e].group == g;
        while (used == 0) {
            int others = 0;
            for (int e = 0; e < m.n_bars; e++) others += m.bar[e].group == m.bar[n].group;
            if (others > 1) {
                m.bar[n].group = g;
                used = 1;
            }
            n++;
        }
    }
    rm_add_loads(&m, &r, kind);
    for (int i = 0; kind & RM_DEFLECTS && i < 2; i++) {
        rm_limit *limit = &m.limit[m.n_limits];
        *limit = (rm_limit){.joint = m.base + rm_below(&r, m.n_joints - m.base), .at_most = rm_between(&r, 3e-3, 2e-2)};
        limit->direction[rm_below(&r, m.dim)] = 1.0;
        if (m.joint[limit->joint].n_held == 0 && (m.n_limits == 0 || limit->joint != m.limit[0].joint)) m.n_limits++;
    }
    return m;
}

/* ---- changes ---------------------------------------------------------------------------------------------------- */

static inline void rm_map(const double R[9], double v[3])
{
    const double x = v[0], y = v[1], z = v[2];
    for (int i = 0; i < 3; i++) v[i] = R[3 * i] * x + R[3 * i + 1] * y + R[3 * i + 2] * z;
}

/* Applies R (row-major) to every place and every vector of the model. */
static inline void rm_turn(rm_model *m, const double R[9])
{
    for (int j = 0; j < m->n_joints; j++) {
        rm_map(R, m->joint[j].at);
        for (int h = 0; h < m->joint[j].n_held; h++) rm_map(R, m->joint[j].held[h]);
        for (int k = 0; k < m->n_cases; k++) {
            rm_map(R, m->load_case[k].F[j]);
            rm_map(R, m->load_case[k].d[j]);
        }
    }
    for (int i = 0; i < m->n_limits; i++) rm_map(R, m->limit[i].direction);
}

/* A random rotation of the model's dimensions. */
static inline void rm_rotation(sct_random *r, int dim, double R[9])
{
    const double a = rm_between(r, 0.0, 6.0), b = dim == 3 ? rm_between(r, 0.0, 6.0) : 0.0;
    const double e = dim == 3 ? rm_between(r, 0.0, 6.0) : 0.0;
    const double Z[9] = {cos(a), -sin(a), 0, sin(a), cos(a), 0, 0, 0, 1};
    const double X[9] = {1, 0, 0, 0, cos(b), -sin(b), 0, sin(b), cos(b)};
    const double W[9] = {cos(e), -sin(e), 0, sin(e), cos(e), 0, 0, 0, 1};
    for (int i = 0; i < 3; i++) {
        double column[3] = {i == 0, i == 1, i == 2};
        rm_map(W, column);
        rm_map(X, column);
        rm_map(Z, column);
        for (int k = 0; k < 3; k++) R[3 * k + i] = column[k];
    }
}

/* Every action of a case times k. */
static inline void rm_scale_case(rm_case *c, double k)
{
    c->self_weight *= k;
    for (int j = 0; j < RM_JOINTS; j++) {
        for (int i = 0; i < 3; i++) {
            c->F[j][i] *= k;
            c->d[j][i] *= k;
        }
    }
    for (int e = 0; e < RM_BARS; e++) {
        c->dT[e] *= k;
        c->lack[e] *= k;
    }
}

static inline void rm_add_case(rm_case *c, const rm_case *other, double k)
{
    c->self_weight += k * other->self_weight;
    for (int j = 0; j < RM_JOINTS; j++) {
        for (int i = 0; i < 3; i++) {
            c->F[j][i] += k * other->F[j][i];
            c->d[j][i] += k * other->d[j][i];
        }
    }
    for (int e = 0; e < RM_BARS; e++) {
        c->dT[e] += k * other->dT[e];
        c->lack[e] += k * other->lack[e];
    }
}

/* Every length times k: places, settlements, lacks of fit, deflection limits. */
static inline void rm_scale_lengths(rm_model *m, double k)
{
    for (int j = 0; j < m->n_joints; j++) {
        for (int i = 0; i < 3; i++) m->joint[j].at[i] *= k;
        for (int c = 0; c < m->n_cases; c++) {
            for (int i = 0; i < 3; i++) m->load_case[c].d[j][i] *= k;
        }
    }
    for (int c = 0; c < m->n_cases; c++) {
        for (int e = 0; e < m->n_bars; e++) m->load_case[c].lack[e] *= k;
    }
    for (int i = 0; i < m->n_limits; i++) m->limit[i].at_most *= k;
}

/* perm[i]: the place that thing i moves to. */
static inline void rm_permutation(sct_random *r, int n, int perm[])
{
    for (int i = 0; i < n; i++) perm[i] = i;
    for (int i = n - 1; i > 0; i--) {
        const int k = rm_below(r, i + 1), swap = perm[i];
        perm[i] = perm[k];
        perm[k] = swap;
    }
}

static inline void rm_move_joints(rm_model *m, const int perm[])
{
    const rm_model old = *m;
    for (int j = 0; j < m->n_joints; j++) {
        m->joint[perm[j]] = old.joint[j];
        for (int k = 0; k < m->n_cases; k++) {
            memcpy(m->load_case[k].F[perm[j]], old.load_case[k].F[j], sizeof old.load_case[k].F[j]);
            memcpy(m->load_case[k].d[perm[j]], old.load_case[k].d[j], sizeof old.load_case[k].d[j]);
        }
    }
    for (int e = 0; e < m->n_bars; e++) {
        m->bar[e].from = perm[old.bar[e].from];
        m->bar[e].to = perm[old.bar[e].to];
    }
    for (int i = 0; i < m->n_limits; i++) m->limit[i].joint = perm[old.limit[i].joint];
}

static inline void rm_move_bars(rm_model *m, const int perm[])
{
    const rm_model old = *m;
    for (int e = 0; e < m->n_bars; e++) {
        m->bar[perm[e]] = old.bar[e];
        for (int k = 0; k < m->n_cases; k++) {
            m->load_case[k].dT[perm[e]] = old.load_case[k].dT[e];
            m->load_case[k].lack[perm[e]] = old.load_case[k].lack[e];
        }
    }
}

/* ---- files ------------------------------------------------------------------------------------------------------ */

typedef struct rm_units {
    const char *length, *force, *stress, *area, *density, *displacement, *second_moment;
    double m, N, Pa, m2, kg_m3, d, m4; /* SI value of each */
} rm_units;

static const rm_units RM_UNITS[] = {
    {"m", "N", "Pa", "m2", "kg/m3", "m", "m4", 1, 1, 1, 1, 1, 1, 1},
    {"mm", "N", "N/mm2", "mm2", "t/m3", "mm", "mm4", 1e-3, 1, 1e6, 1e-6, 1e3, 1e-3, 1e-12},
    {"m", "kN", "MPa", "cm2", "kg/m3", "mm", "cm4", 1, 1e3, 1e6, 1e-4, 1, 1e-3, 1e-8},
    {"in", "lbf", "psi", "in2", "lb/in3", "in", "in4", 0.0254, 4.4482216152605, 4.4482216152605 / 0.00064516,
     0.00064516, 0.45359237 / 0.000016387064, 0.0254, 4.162314256e-7},
    {"ft", "kip", "ksi", "in2", "lb/ft3", "in", "in4", 0.3048, 4448.2216152605, 4448.2216152605 / 0.00064516,
     0.00064516, 0.45359237 / 0.028316846592, 0.0254, 4.162314256e-7},
};
enum { RM_UNIT_SETS = sizeof RM_UNITS / sizeof *RM_UNITS };

/* How a model is written down. All zero: SI, in order, compact. */
typedef struct rm_style {
    int units;
    sct_random *order;               /* keys of objects whose order says nothing are shuffled; NULL: not */
    sct_random *blanks;              /* random blanks between tokens; NULL: none */
    bool crlf;                       /* a line per entry, ended as on other systems */
    bool exponents;                  /* numbers as 1.25000000000000000e-03 */
    bool reversed;                   /* the sections of the family the other way round */
    const char *joint, *bar, *thing; /* prefixes of names; NULL: "J", "M", "" */
} rm_style;

typedef struct rm_list {
    int n;
    char *item[RM_BARS * 2];
} rm_list;

static inline void rm_blank(sct_text *t, const rm_style *s)
{
    static const char *const BLANKS[] = {"", " ", "\n", "\t", "\r\n", "    "};
    if (s->crlf) sct_text_add(t, "\r\n");
    if (s->blanks != NULL) sct_text_add(t, BLANKS[rm_below(s->blanks, 6)]);
}

static inline void rm_number(sct_text *t, const rm_style *s, double value)
{
    if (s->exponents)
        sct_text_format(t, "%.17e", value);
    else
        sct_text_number(t, value);
}

/* Puts `"<thing><key><i>": value` into the list (i < 0: without); takes the value over. */
static inline void rm_put_thing(rm_list *list, const rm_style *s, const char *thing, const char *key, int i,
                                char *value)
{
    sct_text t = {0};
    sct_text_format(&t, "\"%s%s", thing != NULL ? thing : "", key);
    if (i >= 0) sct_text_format(&t, "%d", i);
    sct_text_add(&t, "\"");
    rm_blank(&t, s);
    sct_text_add(&t, ":");
    rm_blank(&t, s);
    sct_text_add(&t, value);
    free(value);
    list->item[list->n++] = sct_text_take(&t, NULL);
}

static inline void rm_put(rm_list *list, const rm_style *s, const char *key, int i, char *value)
{
    rm_put_thing(list, s, NULL, key, i, value);
}

__attribute__((format(printf, 1, 2))) static inline char *rm_words(const char *format, ...)
{
    char text[120];
    va_list args;
    va_start(args, format);
    vsnprintf(text, sizeof text, format, args);
    va_end(args);
    sct_text t = {0};
    sct_text_add(&t, text);
    return sct_text_take(&t, NULL);
}

static inline char *rm_value(const rm_style *s, double value)
{
    sct_text t = {0};
    rm_number(&t, s, value);
    return sct_text_take(&t, NULL);
}

static inline char *rm_vector(const rm_style *s, int n, const double v[], double unit)
{
    sct_text t = {0};
    sct_text_add(&t, "[");
    for (int i = 0; i < n; i++) {
        if (i > 0) sct_text_add(&t, ",");
        rm_blank(&t, s);
        rm_number(&t, s, v[i] / unit);
    }
    sct_text_add(&t, "]");
    return sct_text_take(&t, NULL);
}

/* The object of a list; `fixed`: the order of its keys is the order of the things. Empties the list. */
static inline char *rm_object(rm_list *list, const rm_style *s, bool fixed)
{
    sct_text t = {0};
    int perm[RM_BARS * 2];
    for (int i = 0; i < list->n; i++) perm[i] = i;
    if (s->order != NULL && !fixed) rm_permutation(s->order, list->n, perm);
    sct_text_add(&t, "{");
    for (int i = 0; i < list->n; i++) {
        if (i > 0) sct_text_add(&t, ",");
        rm_blank(&t, s);
        sct_text_add(&t, list->item[perm[i]]);
    }
    rm_blank(&t, s);
    sct_text_add(&t, "}");
    for (int i = 0; i < list->n; i++) free(list->item[i]);
    list->n = 0;
    return sct_text_take(&t, NULL);
}

static inline char *rm_units_text(const rm_style *s, const rm_units *u)
{
    rm_list list = {0};
    rm_put(&list, s, "length", -1, rm_words("\"%s\"", u->length));
    rm_put(&list, s, "force", -1, rm_words("\"%s\"", u->force));
    rm_put(&list, s, "stress", -1, rm_words("\"%s\"", u->stress));
    rm_put(&list, s, "area", -1, rm_words("\"%s\"", u->area));
    rm_put(&list, s, "density", -1, rm_words("\"%s\"", u->density));
    rm_put(&list, s, "displacement", -1, rm_words("\"%s\"", u->displacement));
    rm_put(&list, s, "second_moment", -1, rm_words("\"%s\"", u->second_moment));
    rm_put(&list, s, "temperature", -1, rm_words("\"K\""));
    return rm_object(&list, s, false);
}

static inline char *rm_materials_text(const rm_model *m, const rm_style *s, const rm_units *u)
{
    rm_list list = {0}, one = {0};
    for (int p = 0; p < 2; p++) {
        rm_put(&one, s, "E", -1, rm_value(s, m->material[p].E / u->Pa));
        rm_put(&one, s, "density", -1, rm_value(s, m->material[p].density / u->kg_m3));
        rm_put(&one, s, "expansion", -1, rm_value(s, m->material[p].expansion));
        rm_put(&one, s, "yield", -1, rm_value(s, m->material[p].yield / u->Pa));
        rm_put(&list, s, "S", p, rm_object(&one, s, false));
    }
    return rm_object(&list, s, true);
}

static inline char *rm_joints_text(const rm_model *m, const rm_style *s, const rm_units *u)
{
    rm_list list = {0}, one = {0};
    for (int j = 0; j < m->n_joints; j++) {
        const rm_joint *joint = &m->joint[j];
        rm_put(&one, s, "at", -1, rm_vector(s, m->dim, joint->at, u->m));
        sct_text t = {0};
        sct_text_add(&t, "[");
        for (int h = 0; h < joint->n_held; h++) {
            char *d = rm_vector(s, m->dim, joint->held[h], 1.0);
            if (h > 0) sct_text_add(&t, ",");
            sct_text_add(&t, d);
            free(d);
        }
        sct_text_add(&t, "]");
        rm_put(&one, s, "support", -1, sct_text_take(&t, NULL));
        rm_put(&list, s, s->joint != NULL ? s->joint : "J", j, rm_object(&one, s, false));
    }
    return rm_object(&list, s, true);
}

static inline char *rm_groups_text(const rm_model *m, const rm_style *s, const rm_units *u)
{
    const char *thing = s->thing != NULL ? s->thing : "";
    rm_list list = {0}, one = {0}, in = {0};
    for (int g = 0; g < m->n_groups; g++) {
        const rm_group *group = &m->group[g];
        rm_put(&one, s, "material", -1, rm_words("\"S%d\"", group->material));
        if (group->size == RM_HELD) {
            rm_put(&one, s, "area", -1, rm_value(s, group->A / u->m2));
        } else if (group->size == RM_FREE) {
            rm_put(&in, s, "at_least", -1, rm_value(s, group->A_min / u->m2));
            rm_put(&in, s, "at_most", -1, rm_value(s, group->A_max / u->m2));
            if (group->start > 0.0) rm_put(&in, s, "start", -1, rm_value(s, group->start / u->m2));
            rm_put(&one, s, "area", -1, rm_object(&in, s, false));
        } else {
            rm_put(&one, s, "family", -1, rm_words("\"%sfamily\"", thing));
            if (group->size == RM_SECTION) rm_put(&one, s, "section", -1, rm_words("\"P%d\"", group->section));
        }
        if (group->c > 0.0 && group->size <= RM_FREE) {
            rm_put(&in, s, "c", -1, rm_value(s, group->c));
            rm_put(&one, s, "second_moment", -1, rm_object(&in, s, false));
        }
        rm_put(&in, s, "tension", -1, rm_value(s, group->f_t / u->Pa));
        rm_put(&in, s, "compression", -1, rm_value(s, group->f_c / u->Pa));
        rm_put(&one, s, "allowable", -1, rm_object(&in, s, false));
        rm_put(&in, s, "by", -1, rm_words(group->c > 0.0 ? "\"Euler\"" : "\"none\""));
        if (group->c > 0.0) rm_put(&in, s, "safety", -1, rm_value(s, 2.0));
        rm_put(&one, s, "buckling", -1, rm_object(&in, s, false));
        rm_put_thing(&list, s, thing, "G", g, rm_object(&one, s, false));
    }
    return rm_object(&list, s, true);
}

static inline char *rm_families_text(const rm_model *m, const rm_style *s, const rm_units *u)
{
    rm_list family = {0}, sections = {0}, one = {0};
    for (int i = 0; i < m->n_sections; i++) {
        const int k = s->reversed ? m->n_sections - 1 - i : i;
        rm_put(&one, s, "A", -1, rm_value(s, m->section[k].A / u->m2));
        rm_put(&one, s, "I", -1, rm_value(s, m->section[k].I / u->m4));
        rm_put(&sections, s, "P", k, rm_object(&one, s, false));
    }
    rm_put(&one, s, "sections", -1, rm_object(&sections, s, !s->reversed));
    rm_put_thing(&family, s, s->thing, "family", -1, rm_object(&one, s, false));
    return rm_object(&family, s, false);
}

static inline char *rm_bars_text(const rm_model *m, const rm_style *s)
{
    const char *joint = s->joint != NULL ? s->joint : "J", *thing = s->thing != NULL ? s->thing : "";
    rm_list list = {0}, one = {0};
    for (int e = 0; e < m->n_bars; e++) {
        rm_put(&one, s, "from", -1, rm_words("\"%s%d\"", joint, m->bar[e].from));
        rm_put(&one, s, "to", -1, rm_words("\"%s%d\"", joint, m->bar[e].to));
        rm_put(&one, s, "group", -1, rm_words("\"%sG%d\"", thing, m->bar[e].group));
        rm_put(&list, s, s->bar != NULL ? s->bar : "M", e, rm_object(&one, s, false));
    }
    return rm_object(&list, s, true);
}

static inline bool rm_is_zero(const double v[3])
{
    return v[0] == 0.0 && v[1] == 0.0 && v[2] == 0.0;
}

static inline char *rm_case_text(const rm_model *m, const rm_case *c, const rm_style *s, const rm_units *u)
{
    const char *joint = s->joint != NULL ? s->joint : "J", *bar = s->bar != NULL ? s->bar : "M";
    rm_list one = {0}, in = {0}, action = {0};
    if (c->self_weight > 0.0) rm_put(&one, s, "self_weight", -1, rm_value(s, c->self_weight));
    for (int j = 0; j < m->n_joints; j++) {
        if (!rm_is_zero(c->F[j])) rm_put(&in, s, joint, j, rm_vector(s, m->dim, c->F[j], u->N));
    }
    rm_put(&one, s, "joints", -1, rm_object(&in, s, false));
    for (int j = 0; j < m->n_joints; j++) {
        if (!rm_is_zero(c->d[j])) rm_put(&in, s, joint, j, rm_vector(s, m->dim, c->d[j], u->d));
    }
    rm_put(&one, s, "settlements", -1, rm_object(&in, s, false));
    for (int e = 0; e < m->n_bars; e++) {
        if (c->dT[e] == 0.0 && c->lack[e] == 0.0) continue;
        if (c->dT[e] != 0.0) rm_put(&action, s, "temperature", -1, rm_value(s, c->dT[e]));
        if (c->lack[e] != 0.0) rm_put(&action, s, "lack_of_fit", -1, rm_value(s, c->lack[e] / u->d));
        rm_put(&in, s, bar, e, rm_object(&action, s, false));
    }
    rm_put(&one, s, "members", -1, rm_object(&in, s, false));
    return rm_object(&one, s, false);
}

static inline char *rm_sums_text(const rm_model *m, const rm_style *s)
{
    const char *thing = s->thing != NULL ? s->thing : "";
    rm_list list = {0}, one = {0}, in = {0};
    for (int k = 0; k < m->n_sums; k++) {
        for (int c = 0; c < m->n_cases; c++) {
            if (m->sum[k].factor[c] != 0.0) rm_put_thing(&in, s, thing, "C", c, rm_value(s, m->sum[k].factor[c]));
        }
        rm_put(&one, s, "for", -1, rm_words("\"allowable\""));
        rm_put(&one, s, "sum", -1, rm_object(&in, s, false));
        rm_put_thing(&list, s, thing, "K", k, rm_object(&one, s, false));
    }
    return rm_object(&list, s, true);
}

static inline char *rm_limits_text(const rm_model *m, const rm_style *s, const rm_units *u)
{
    rm_list one = {0};
    sct_text t = {0};
    sct_text_add(&t, "[");
    for (int i = 0; i < m->n_limits; i++) {
        const rm_limit *limit = &m->limit[i];
        if (i > 0) sct_text_add(&t, ",");
        rm_put(&one, s, "joints", -1, rm_words("[\"%s%d\"]", s->joint != NULL ? s->joint : "J", limit->joint));
        rm_put(&one, s, "direction", -1, rm_vector(s, m->dim, limit->direction, 1.0));
        rm_put(&one, s, "at_most", -1, rm_value(s, limit->at_most / u->d));
        char *text = rm_object(&one, s, false);
        sct_text_add(&t, text);
        free(text);
    }
    sct_text_add(&t, "]");
    rm_put(&one, s, "deflection", -1, sct_text_take(&t, NULL));
    return rm_object(&one, s, false);
}

/* The model as a file, for free(). */
static inline char *rm_text(const rm_model *m, const rm_style *s)
{
    const rm_units *u = &RM_UNITS[s->units];
    rm_list list = {0}, cases = {0};
    rm_put(&list, s, "scantling", -1, rm_words("1"));
    rm_put(&list, s, "dimensions", -1, rm_words("%d", m->dim));
    rm_put(&list, s, "units", -1, rm_units_text(s, u));
    rm_put(&list, s, "materials", -1, rm_materials_text(m, s, u));
    rm_put(&list, s, "joints", -1, rm_joints_text(m, s, u));
    rm_put(&list, s, "groups", -1, rm_groups_text(m, s, u));
    if (m->n_sections > 0) rm_put(&list, s, "families", -1, rm_families_text(m, s, u));
    rm_put(&list, s, "members", -1, rm_bars_text(m, s));
    for (int k = 0; k < m->n_cases; k++) {
        rm_put_thing(&cases, s, s->thing, "C", k, rm_case_text(m, &m->load_case[k], s, u));
    }
    rm_put(&list, s, "cases", -1, rm_object(&cases, s, true));
    rm_put(&list, s, "combinations", -1, rm_sums_text(m, s));
    if (m->n_limits > 0) rm_put(&list, s, "limits", -1, rm_limits_text(m, s, u));
    return rm_object(&list, s, false);
}

/* ---- runs ------------------------------------------------------------------------------------------------------- */

/* What the library made of a file. */
typedef struct rm_run {
    sct_model *model;
    sct_result *r;
} rm_run;

static int rm_seed; /* of the model at hand, for messages */

static inline void rm_refused(const char *text, sct_status status, const sct_issues *issues)
{
    printf("%s\n", text);
    for (int i = 0; i < sct_issues_count(issues); i++) printf("%s\n", sct_issues_get(issues, i)->message);
    fflush(stdout);
    ck_abort_msg("seed %d: %s", rm_seed, sct_status_text(status));
}

static inline rm_run rm_run_text(const char *text, const sct_settings *settings, bool sizes)
{
    rm_run run = {0};
    sct_issues *issues = sct_issues_new();
    sct_status status = sct_model_parse("test.json", text, strlen(text), &run.model, issues);
    if (status == SCT_OK) {
        status = sizes ? sct_size(run.model, settings, &run.r, issues) : sct_check(run.model, settings, &run.r, issues);
    }
    if (status != SCT_OK) rm_refused(text, status, issues);
    sct_issues_free(issues);
    return run;
}

static inline rm_run rm_check_as(const rm_model *m, const rm_style *style)
{
    char *text = rm_text(m, style);
    const rm_run run = rm_run_text(text, NULL, false);
    free(text);
    return run;
}

static inline rm_run rm_check(const rm_model *m)
{
    return rm_check_as(m, &(rm_style){0});
}

static inline void rm_drop(rm_run *run)
{
    sct_result_free(run->r);
    sct_model_free(run->model);
}

static inline char *rm_write(const rm_run *run, sct_format format)
{
    char *text = NULL;
    ck_assert_int_eq(sct_write(run->r, format, NULL, &text, NULL), SCT_OK);
    return text;
}

static inline double rm_largest(size_t n, const double v[])
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) most = fmax(most, fabs(v[i]));
    return most;
}

/* The largest of |a - b| over `scale`. NAN comes out as INFINITY. */
static inline double rm_apart(size_t n, const double a[], const double b[], double scale)
{
    double most = 0.0;
    for (size_t i = 0; i < n; i++) {
        const double apart = fabs(a[i] - b[i]);
        if (apart == 0.0) continue;
        if (!(apart / scale <= most)) most = isnan(apart / scale) ? INFINITY : apart / scale;
    }
    return most;
}
#endif

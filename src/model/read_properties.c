/* The other properties of a section that an area stands for: I = c A^2 and the like, or a shape that grows in
 * proportion. */
#include <math.h>

#include "reader.h"
#include "shapes.h"

/* A property that goes with a power of the area: by a constant without dimension, or by one known value. */
typedef struct relation {
    const char *what, *example; /* "a section modulus", of a value */
    double p;                   /* the power for which c has no dimension */
    double least_p;             /* above 1 for I: radii of gyration grow with the area */
    sct_range c, value;
} relation;

static const relation MODULUS = {"a section modulus",
                                 "{\"c\": 0.12}, or {\"at\": \"5000 mm2\", \"value\": \"2.5e5 mm3\"}",
                                 1.5,
                                 0.5,
                                 {"a factor c of W = c A^1.5", -1, 1e-6, 1e6, 0, 0, NULL},
                                 {"a section modulus", SCT_SECTION_MODULUS, 1e-15, 10, 1e-8, 1e-2, NULL}};
static const relation INERTIA = {"a second moment of area",
                                 "{\"c\": 2}, or {\"at\": \"5000 mm2\", \"value\": \"5e7 mm4\", \"power\": 2.2}",
                                 2.0,
                                 1.1,
                                 {"a factor c of I = c A^2", -1, 1e-6, 1e6, 0, 0, NULL},
                                 {"a second moment of area", SCT_SECOND_MOMENT, 1e-18, 1e2, 1e-10, 1e-3, NULL}};
static const relation TORSION = {"a torsion constant",
                                 "{\"c\": 0.14}, or {\"at\": \"5000 mm2\", \"value\": \"1.2e6 mm4\"}",
                                 2.0,
                                 0.5,
                                 {"a factor c of J = c A^2", -1, 1e-9, 1e6, 0, 0, NULL},
                                 {"a torsion constant", SCT_SECOND_MOMENT, 1e-18, 1e2, 1e-11, 1e-3, NULL}};

/* One value for both axes or one for each; with `n` of 1 a value alone. */
static bool read_values(sct_reader *r, const sct_node *node, const sct_range *range, int n, double v[2])
{
    return n == 1 ? sct_fields_value(&r->f, node, range, v) : sct_read_both_axes(r, node, range, v);
}

/* {"c": ...}, or {"at": ..., "value": ..., "power": ...}, as n powers of the area. */
static void read_relation(sct_reader *r, const sct_node *node, const relation *of, int n, sct_power power[])
{
    const sct_range POWER = {"a power of the area", -1, of->least_p, 4, 0, 0, NULL};
    enum { K_C, K_AT, K_VALUE, K_POWER, N };
    static const sct_key KEYS[N] = {{"c", NULL}, {"at", NULL}, {"value", NULL}, {"power", NULL}};
    const sct_node *found[N];
    double p = of->p, A, v[2];
    if (!sct_fields_keys(&r->f, node, of->what, KEYS, N, found)) return;
    if (of == &INERTIA && found[K_C] == NULL && found[K_AT] == NULL && found[K_VALUE] == NULL) {
        sct_fields_error(&r->f, node, "no \"c\"; expected the factor c of I = c A^2, or one for each axis");
        return;
    }
    if (found[K_C] == NULL && (found[K_AT] == NULL || found[K_VALUE] == NULL)) {
        sct_fields_error(&r->f, node, "found no \"%s\"; expected %s",
                         found[K_AT] != NULL      ? "value"
                         : found[K_VALUE] != NULL ? "at"
                                                  : "c",
                         of->example);
        return;
    }
    for (int i = K_AT; i < N && found[K_C] != NULL; i++) {
        if (found[i] == NULL) continue;
        if (i == K_POWER)
            sct_fields_key_error(&r->f, found[i],
                                 "\"c\" is of the power %g alone, where it has no dimension; for another power give "
                                 "\"at\" and \"value\"",
                                 of->p);
        else
            sct_fields_key_error(&r->f, found[i], "\"%s\" stands beside \"c\"; expected one of them", KEYS[i].name);
        return;
    }
    if (found[K_C] != NULL) {
        if (!read_values(r, found[K_C], &of->c, n, v)) return;
        for (int i = 0; i < n; i++) power[i] = (sct_power){v[i], p};
        return;
    }
    if (found[K_POWER] != NULL && !sct_fields_value(&r->f, found[K_POWER], &POWER, &p)) return;
    const bool has_value = read_values(r, found[K_VALUE], &of->value, n, v);
    if (!sct_fields_value(&r->f, found[K_AT], &SCT_AREAS, &A) || !has_value) return;
    for (int i = 0; i < n; i++) power[i] = (sct_power){v[i] / pow(A, p), p};
}

static void read_shape(sct_reader *r, const sct_node *node, sct_group *g)
{
    static const char *const KINDS[SCT_SHAPES] = {"rectangle", "square bar", "round bar", "square tube", "round tube"};
    static const struct {
        int key; /* 0: none */
        sct_range range;
    } RATIO[SCT_SHAPES] = {[SCT_SHAPE_RECTANGLE] = {1, {"a depth to width", -1, 0.01, 100, 0, 0, NULL}},
                           [SCT_SHAPE_SQUARE_TUBE] = {2, {"a width to wall", -1, 4, 1000, 0, 0, NULL}},
                           [SCT_SHAPE_ROUND_TUBE] = {3, {"a diameter to wall", -1, 3, 1000, 0, 0, NULL}}};
    enum { N = 4 };
    static const sct_key KEYS[N] = {{"kind", "such as \"rectangle\" or \"round tube\""},
                                    {"depth_to_width", NULL},
                                    {"width_to_wall", NULL},
                                    {"diameter_to_wall", NULL}};
    const sct_node *found[N];
    int kind;
    double ratio = 1.0;
    if (!sct_fields_keys(&r->f, node, "a shape", KEYS, N, found)) return;
    if (!sct_fields_word(&r->f, found[0], "a shape", KINDS, SCT_SHAPES, &kind)) return;
    for (int i = 1; i < N; i++)
        if (found[i] != NULL && i != RATIO[kind].key) {
            sct_fields_key_error(&r->f, found[i], "\"%s\" is not of a %s; leave it out", KEYS[i].name, KINDS[kind]);
            return;
        }
    const int key = RATIO[kind].key;
    if (key != 0 && found[key] == NULL) {
        sct_fields_error(&r->f, node, "no \"%s\"; a %s needs it: expected a number such as 20", KEYS[key].name,
                         KINDS[kind]);
        return;
    }
    if (key != 0 && !sct_fields_value(&r->f, found[key], &RATIO[kind].range, &ratio)) return;
    const sct_shape shape = sct_shape_of((sct_shape_kind)kind, ratio);
    for (int i = 0; i < 2; i++) {
        g->I[i] = (sct_power){shape.c_I[i], 2.0};
        g->W[i] = (sct_power){shape.c_W[i], 1.5};
    }
    g->J = (sct_power){shape.c_J, 2.0};
}

void sct_read_properties(sct_reader *r, const sct_node *const said[SCT_SAYINGS], sct_group *group)
{
    bool is_contradicted = false;
    for (int i = 0; i < SCT_SAYS_SHAPE; i++) {
        if (said[i] == NULL || said[SCT_SAYS_SHAPE] == NULL) continue;
        sct_fields_key_error(&r->f, said[i], "\"%s\" stands beside \"shape\", which gives it too; leave one out",
                             sct_node_key(said[i]));
        is_contradicted = true;
    }
    if (is_contradicted) return;
    if (said[SCT_SAYS_SECOND_MOMENT] != NULL) read_relation(r, said[SCT_SAYS_SECOND_MOMENT], &INERTIA, 2, group->I);
    if (said[SCT_SAYS_SECTION_MODULUS] != NULL) read_relation(r, said[SCT_SAYS_SECTION_MODULUS], &MODULUS, 2, group->W);
    if (said[SCT_SAYS_TORSION] != NULL) read_relation(r, said[SCT_SAYS_TORSION], &TORSION, 1, &group->J);
    if (said[SCT_SAYS_SHAPE] != NULL) read_shape(r, said[SCT_SAYS_SHAPE], group);
}

/* The groups of a model file: what their members are made of, which sizes they may take, and how they are checked. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/number.h"
#include "reader.h"

/* ---- stresses and stability ----------------------------------------------------------------------------------------
 */

void sct_read_allowable(sct_reader *r, const sct_node *node, double allowable[2])
{
    static const sct_range ALLOWABLE = {"an allowable stress", SCT_STRESS, 1e3, 1e11, 1e5, 5e9, NULL};
    static const sct_key KEYS[] = {{"tension", NULL}, {"compression", NULL}};
    const sct_node *found[2];
    if (!sct_fields_keys(&r->f, node, "allowable stresses", KEYS, 2, found)) return;
    for (int i = 0; i < 2; i++) sct_fields_value(&r->f, found[i], &ALLOWABLE, &allowable[i]);
}

static void read_buckling(sct_reader *r, const sct_node *node, sct_buckling_words *words)
{
    static const sct_range SAFETY = {"a safety factor", -1, 1, 100, 0, 0, NULL};
    static const char *const BY[] = {[SCT_BUCKLING_NONE] = "none",
                                     [SCT_BUCKLING_EULER] = "Euler",
                                     [SCT_BUCKLING_EULER_JOHNSON] = "Euler and Johnson"};
    static const sct_key KEYS[] = {{"by", "\"Euler and Johnson\", \"Euler\" or \"none\""}, {"safety", NULL}};
    const sct_node *found[2];
    int by;
    if (!sct_fields_keys(&r->f, node, "a buckling rule", KEYS, 2, found)) {
        words->is_given = words->is_given || node != NULL; /* given, though wrongly: told already */
        return;
    }
    *words = (sct_buckling_words){.is_given = true, .by = SCT_BUCKLING_NONE, .safety = 1.0};
    if (!sct_fields_word(&r->f, found[0], "a buckling rule", BY, 3, &by)) return;
    words->by = (sct_buckling)by;
    if (found[1] != NULL)
        sct_fields_value(&r->f, found[1], &SAFETY, &words->safety);
    else if (words->by != SCT_BUCKLING_NONE)
        sct_fields_error(&r->f, node, "no \"safety\"; expected a factor of 1 or more on the buckling strength");
    if (words->by == SCT_BUCKLING_NONE)
        sct_fields_remark(&r->f, SCT_WARNING, found[0],
                          "buckling is not checked; compression is held by the allowable stress alone");
}

static void read_slenderness(sct_reader *r, const sct_node *node, double *any, double *compression)
{
    static const sct_range SLENDERNESS = {"a slenderness", -1, 1, 1e4, 0, 0, NULL};
    static const sct_key KEYS[] = {{"any", NULL}, {"compression", NULL}};
    const sct_node *found[2];
    if (!sct_fields_keys(&r->f, node, "slenderness limits", KEYS, 2, found)) return;
    sct_fields_value(&r->f, found[0], &SLENDERNESS, any);
    sct_fields_value(&r->f, found[1], &SLENDERNESS, compression);
}

void sct_read_limit_defaults(sct_reader *r, const sct_node *buckling, const sct_node *slenderness)
{
    read_buckling(r, buckling, &r->buckling);
    read_slenderness(r, slenderness, &r->slenderness_any, &r->slenderness_compression);
}

/* ---- sizes ----------------------------------------------------------------------------------------------------------
 */

enum {
    K_MATERIAL,
    K_AREA,
    K_FAMILY,
    K_SECTIONS,
    K_SECTION,
    K_SECOND_MOMENT, /* and the three behind it, in the order of sct_saying */
    K_SECTION_MODULUS,
    K_TORSION_CONSTANT,
    K_SHAPE,
    K_ALLOWABLE,
    K_BUCKLING,
    K_SLENDERNESS,
    K_RESTRAINT,
    K_FACTOR,
    N_KEYS
};
static const sct_key GROUP_KEYS[N_KEYS] = {{"material", "the name of a material"},
                                           {"area", NULL},
                                           {"family", NULL},
                                           {"sections", NULL},
                                           {"section", NULL},
                                           {"second_moment", NULL},
                                           {"section_modulus", NULL},
                                           {"torsion_constant", NULL},
                                           {"shape", NULL},
                                           {"allowable", NULL},
                                           {"buckling", NULL},
                                           {"slenderness", NULL},
                                           {"restraint", NULL},
                                           {"length_factor", NULL}};

/* An area that was read, as the file says it. */
static sct_shown said(const sct_reader *r, const sct_node *node)
{
    char number[SCT_NUMBER_ROOM], words[SCT_NUMBER_ROOM + 16];
    if (sct_node_kind_of(node) == SCT_STRING) return sct_show(sct_node_string(node));
    sct_number_write(sct_node_number(node), number);
    snprintf(words, sizeof words, "%s %s", number, r->f.unit[SCT_AREA]->name);
    return sct_show(words);
}

static void read_area_bounds(sct_reader *r, const sct_node *node, sct_group *g)
{
    enum { K_LEAST, K_MOST, K_START, N };
    static const sct_key BOUNDS[N] = {
        {"at_least", "the smallest area"}, {"at_most", "the largest area"}, {"start", NULL}};
    const sct_node *found[N];
    g->kind = SCT_FREE_AREA;
    if (!sct_fields_keys(&r->f, node, "bounds of an area", BOUNDS, N, found)) return;
    const bool has_least = sct_fields_value(&r->f, found[K_LEAST], &SCT_AREAS, &g->A_min);
    const bool has_most = sct_fields_value(&r->f, found[K_MOST], &SCT_AREAS, &g->A_max);
    const bool has_start = sct_fields_value(&r->f, found[K_START], &SCT_AREAS, &g->A_start);
    if (!has_least || !has_most) return;
    if (g->A_min > g->A_max) {
        const sct_where other = sct_node_where(r->f.document, found[K_MOST]);
        sct_fields_error(&r->f, found[K_LEAST], "%s is above \"at_most\", %s, at %d:%d; expected bounds in order",
                         said(r, found[K_LEAST]).text, said(r, found[K_MOST]).text, other.line, other.column);
        return;
    }
    if (has_start && (g->A_start < g->A_min || g->A_start > g->A_max))
        sct_fields_error(&r->f, found[K_START], "found %s; expected an area within the bounds, %s to %s",
                         said(r, found[K_START]).text, said(r, found[K_LEAST]).text, said(r, found[K_MOST]).text);
    if (g->A_min < g->A_max) return;
    sct_fields_remark(&r->f, SCT_NOTE, node, "both bounds are %s: the area is held there",
                      said(r, found[K_LEAST]).text);
    g->kind = SCT_HELD_AREA;
    g->A_held = g->A_min;
}

static void read_area(sct_reader *r, const sct_node *const found[], sct_group *g)
{
    static const int FOR_FAMILIES[] = {K_SECTIONS, K_SECTION};
    const sct_node *area = found[K_AREA];
    if (sct_node_kind_of(area) == SCT_OBJECT) {
        read_area_bounds(r, area, g);
    } else {
        g->kind = SCT_HELD_AREA;
        if (sct_node_kind_of(area) == SCT_NUMBER || sct_node_kind_of(area) == SCT_STRING)
            sct_fields_value(&r->f, area, &SCT_AREAS, &g->A_held);
        else
            sct_fields_error(&r->f, area, "found %s; expected an area, or {\"at_least\": ..., \"at_most\": ...}",
                             sct_node_kind_words(area));
    }
    for (int i = 0; i < 2; i++)
        if (found[FOR_FAMILIES[i]] != NULL && found[K_FAMILY] == NULL)
            sct_fields_key_error(&r->f, found[FOR_FAMILIES[i]], "\"%s\" goes with \"family\", not with \"area\"",
                                 GROUP_KEYS[FOR_FAMILIES[i]].name);
    sct_read_properties(r, &found[K_SECOND_MOMENT], g);
}

static int compare_ints(const void *a, const void *b)
{
    const int *x = a, *y = b;
    return (*x > *y) - (*x < *y);
}

/* "sections": the ladder is narrowed to a list of names. */
static void read_sections(sct_reader *r, const sct_node *node, sct_group *g)
{
    const sct_family *family = &r->model->families[g->family];
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array with the names of sections")) return;
    if (sct_node_count(node) == 0) sct_fields_error(&r->f, node, "found no section; expected at least one");
    bool *is_taken = sct_fields_array(&r->f, family->n, sizeof *is_taken);
    if (is_taken == NULL) return;
    g->n_ladder = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        int i;
        if (!sct_fields_reference(&r->f, c, "section", r->sections[g->family], &i)) continue;
        if (is_taken[i]) {
            sct_fields_error(&r->f, c, "\"%s\" stands in this list already", sct_show(family->sections[i].name).text);
            continue;
        }
        is_taken[i] = true;
        g->ladder[g->n_ladder++] = i;
    }
    qsort(g->ladder, (size_t)g->n_ladder, sizeof *g->ladder, compare_ints); /* the family is sorted: lightest first */
}

static void read_family_choice(sct_reader *r, const sct_node *const found[], sct_group *g)
{
    g->kind = SCT_LADDER;
    for (int i = K_SECOND_MOMENT; i <= K_SHAPE; i++)
        if (found[i] != NULL)
            sct_fields_key_error(&r->f, found[i], "\"%s\" goes with \"area\"; the sections of a family bring their own",
                                 GROUP_KEYS[i].name);
    g->family = sct_reader_family(r, found[K_FAMILY]);
    if (g->family < 0) return;
    const sct_family *family = &r->model->families[g->family];
    g->ladder = sct_fields_array(&r->f, family->n, sizeof *g->ladder);
    if (g->ladder == NULL) return;
    for (int i = 0; i < family->n; i++) g->ladder[g->n_ladder++] = i;
    if (found[K_SECTIONS] != NULL) read_sections(r, found[K_SECTIONS], g);
    if (found[K_SECTION] == NULL) return;
    g->kind = SCT_HELD_SECTION;
    sct_fields_reference(&r->f, found[K_SECTION], "section", r->sections[g->family], &g->held);
}

static void read_size(sct_reader *r, const sct_node *node, const sct_node *const found[], sct_group *g)
{
    if (found[K_AREA] != NULL && found[K_FAMILY] != NULL) {
        const sct_where other = sct_node_key_where(r->f.document, found[K_AREA]);
        sct_fields_key_error(&r->f, found[K_FAMILY],
                             "\"family\" stands beside \"area\" at %d:%d; a group has one of them", other.line,
                             other.column);
    }
    if (found[K_AREA] != NULL)
        read_area(r, found, g);
    else if (found[K_FAMILY] != NULL)
        read_family_choice(r, found, g);
    else
        sct_fields_error(&r->f, node,
                         "no size; expected \"family\" (sections to pick from) or \"area\" (held, or with "
                         "bounds)");
}

/* ---- groups
 * ----------------------------------------------------------------------------------------------------------- */

static void read_stability(sct_reader *r, const sct_node *node, const sct_node *const found[], sct_group *g)
{
    sct_buckling_words words = {0};
    read_buckling(r, found[K_BUCKLING], &words);
    if (!words.is_given) words = r->buckling;
    g->slenderness_any = r->slenderness_any;
    g->slenderness_compression = r->slenderness_compression;
    read_slenderness(r, found[K_SLENDERNESS], &g->slenderness_any, &g->slenderness_compression);
    if (!words.is_given) {
        sct_fields_error(
            &r->f, node,
            "no \"buckling\", nor one in /limits; expected such as {\"by\": \"Euler and Johnson\", "
            "\"safety\": 1.92}, or {\"by\": \"none\"} where compression is held by a fixed allowable stress only");
        return;
    }
    g->buckling = words.by;
    g->safety = words.safety;
    const bool is_slender = isfinite(g->slenderness_any) || isfinite(g->slenderness_compression);
    const bool has_area = found[K_AREA] != NULL;
    if (has_area && found[K_SECOND_MOMENT] == NULL && found[K_SHAPE] == NULL &&
        (g->buckling != SCT_BUCKLING_NONE || is_slender))
        sct_fields_error(&r->f, node,
                         "no \"second_moment\"; %s needs it: expected {\"c\": ...} for I = c A^2, or a \"shape\"",
                         g->buckling != SCT_BUCKLING_NONE ? "the buckling rule" : "the slenderness limit");
}

/* Stresses that the rules need, from the group or its material. */
static void check_stresses(sct_reader *r, const sct_node *node, sct_group *g)
{
    static const char *const SENSE[] = {"tension", "compression"};
    if (g->material < 0 || r->material_is_wrong[g->material]) return;
    const sct_material *m = &r->model->materials[g->material];
    for (int i = 0; i < 2; i++) {
        if (isnan(g->allowable[i])) g->allowable[i] = m->allowable[i];
        if (isnan(g->allowable[i]))
            sct_fields_error(&r->f, node,
                             "no allowable stress in %s; expected \"allowable\": {\"%s\": ...} here or in "
                             "material \"%s\"",
                             SENSE[i], SENSE[i], sct_show(m->name).text);
    }
    if (g->buckling == SCT_BUCKLING_EULER_JOHNSON && isnan(m->yield))
        sct_fields_error(&r->f, node,
                         "the buckling rule \"Euler and Johnson\" needs the yield stress; expected \"yield\" in "
                         "material \"%s\"",
                         sct_show(m->name).text);
}

static void read_group(sct_reader *r, const sct_node *node, sct_group *g, sct_lengths *lengths)
{
    const sct_node *found[N_KEYS];
    const int errors_before = r->f.n_errors;
    *g = (sct_group){.material = -1, .family = -1, .held = -1, .where = sct_fields_where(&r->f, node)};
    g->A_min = g->A_max = g->A_start = g->A_held = g->allowable[0] = g->allowable[1] = (double)NAN;
    g->I[0] = g->I[1] = g->W[0] = g->W[1] = g->J = (sct_power){(double)NAN, (double)NAN};
    sct_fields_name(&r->f, node, &g->name);
    if (!sct_fields_keys(&r->f, node, "a group", GROUP_KEYS, N_KEYS, found)) return;
    sct_fields_reference(&r->f, found[K_MATERIAL], "material", r->materials, &g->material);
    read_size(r, node, found, g);
    sct_read_allowable(r, found[K_ALLOWABLE], g->allowable);
    sct_read_lengths(r, found[K_RESTRAINT], found[K_FACTOR], lengths);
    read_stability(r, node, found, g);
    /* a material or a stress that is wrong was told; only a group without such errors is told what it lacks */
    if (r->f.n_errors == errors_before) check_stresses(r, node, g);
}

void sct_read_groups(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "group", SCT_MOST_MEMBERS);
    m->groups = sct_fields_array(&r->f, n, sizeof *m->groups);
    r->group_lengths = sct_fields_array(&r->f, n, sizeof *r->group_lengths);
    r->groups = sct_reader_names(r, node);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c)) {
        read_group(r, c, &m->groups[m->n_groups], &r->group_lengths[m->n_groups]);
        m->n_groups++;
    }
}

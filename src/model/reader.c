/* The reader of model files: the public calls, the head of the file, its materials. */
#include "reader.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/save.h"
#include "families.h"
#include "gate.h"

static bool failed(const sct_reader *r)
{
    return r->f.failure != SCT_OK;
}

sct_names *sct_reader_names(sct_reader *r, const sct_node *object)
{
    const bool is_object = object != NULL && sct_node_kind_of(object) == SCT_OBJECT;
    sct_names *names = sct_names_new(is_object ? sct_node_count(object) : 0);
    bool has_memory = names != NULL;
    int i = 0;
    for (const sct_node *c = is_object ? sct_node_first(object) : NULL; has_memory && c != NULL; c = sct_node_next(c))
        has_memory = sct_names_put(names, sct_node_key(c), i++);
    if (has_memory) return names;
    sct_names_free(names);
    r->f.failure = SCT_NO_MEMORY;
    return NULL;
}

int sct_reader_count(sct_reader *r, const sct_node *node, const char *what, int most)
{
    char expected[96];
    snprintf(expected, sizeof expected, "an object with at least one %s, keyed by name", what);
    if (!sct_fields_is(&r->f, node, SCT_OBJECT, expected)) return 0;
    const int n = sct_node_count(node);
    if (n == 0) sct_fields_error(&r->f, node, "found no %s; expected at least one", what);
    if (n > most) {
        sct_fields_error(&r->f, node, "found %d entries; at most %d are read", n, most);
        r->f.failure = SCT_TOO_LARGE;
        return 0;
    }
    return n;
}

bool sct_reader_has_room(sct_reader *r, const sct_node *node, long long more)
{
    r->n_placed += more;
    if (r->n_placed <= SCT_MOST_TABLE) return true;
    sct_fields_error(&r->f, node, "too many actions, counted on every piece of a run; at most %d are kept",
                     SCT_MOST_TABLE);
    r->f.failure = SCT_TOO_LARGE;
    return false;
}

/* ---- the head -----------------------------------------------------------------------------------------------------
 */

/* False: another format, of which nothing can be said. */
static bool read_version(sct_reader *r, const sct_node *node)
{
    if (node == NULL) return true; /* told as missing */
    const double version = sct_node_number(node);
    if (sct_node_kind_of(node) != SCT_NUMBER) {
        sct_fields_error(&r->f, node, "found %s; expected %d, the number of the file's format",
                         sct_node_kind_words(node), SCT_MODEL_FORMAT);
        return true;
    }
    if (version == SCT_MODEL_FORMAT) return true;
    sct_fields_error(&r->f, node, "found format %.15g; this version of scantling reads format %d", version,
                     SCT_MODEL_FORMAT);
    return false;
}

static void read_dimensions(sct_reader *r, const sct_node *node)
{
    if (node == NULL) return;
    const double n = sct_node_number(node);
    if (n == 2 || n == 3)
        r->f.dimensions = r->model->dimensions = (int)n;
    else if (sct_node_kind_of(node) == SCT_NUMBER)
        sct_fields_error(&r->f, node, "found %.15g; expected 2 or 3", n);
    else
        sct_fields_error(&r->f, node, "found %s; expected 2 or 3", sct_node_kind_words(node));
}

/* A power of the length unit, for areas and second moments; NULL when out of memory. */
static const sct_unit *power_of(sct_reader *r, const sct_unit *length, int power, sct_quantity quantity)
{
    char name[24];
    snprintf(name, sizeof name, "%s%d", length->name, power);
    sct_unit *unit = sct_fields_array(&r->f, 1, sizeof *unit);
    if (unit == NULL) return NULL;
    *unit = (sct_unit){sct_fields_copy(&r->f, name), quantity, 1, 1};
    for (int i = 0; i < power; i++) {
        unit->numerator *= length->numerator;
        unit->denominator *= length->denominator;
    }
    return unit;
}

/* The product (join " ") or ratio (join "/") of two units as the unit of a slot; without one of them there is none. */
static void derive(sct_reader *r, int slot, const sct_unit *a, const char *join, const sct_unit *b, const char *behind)
{
    char name[48];
    const bool is_product = join[0] == ' ';
    if (a == NULL || b == NULL) return;
    snprintf(name, sizeof name, "%s%s%s%s", a->name, join, b->name, behind);
    sct_unit *unit = sct_fields_array(&r->f, 1, sizeof *unit);
    if (unit == NULL) return;
    *unit = (sct_unit){sct_fields_copy(&r->f, name), (sct_quantity)slot,
                       a->numerator * (is_product ? b->numerator : b->denominator),
                       a->denominator * (is_product ? b->denominator : b->numerator)};
    r->f.unit[slot] = unit;
}

/* Units that follow from those of length, force and temperature. Angles and frequencies have none: they are written. */
static void derive_units(sct_reader *r)
{
    sct_fields *f = &r->f;
    const sct_unit *length = f->unit[SCT_LENGTH], *force = f->unit[SCT_FORCE];
    const bool is_wrong = length == NULL || force == NULL;
    f->unit_is_wrong[SCT_SECTION_MODULUS] = length == NULL;
    f->unit_is_wrong[SCT_MOMENT] = f->unit_is_wrong[SCT_FORCE_PER_LENGTH] = f->unit_is_wrong[SCT_TURN_STIFFNESS] =
        is_wrong;
    f->unit_is_wrong[SCT_GRADIENT] = length == NULL || f->unit_is_wrong[SCT_TEMPERATURE];
    if (length != NULL) f->unit[SCT_SECTION_MODULUS] = power_of(r, length, 3, SCT_SECTION_MODULUS);
    derive(r, SCT_MOMENT, force, " ", length, "");
    derive(r, SCT_TURN_STIFFNESS, force, " ", length, "/rad");
    derive(r, SCT_FORCE_PER_LENGTH, force, "/", length, "");
    derive(r, SCT_GRADIENT, f->unit[SCT_TEMPERATURE], "/", length, "");
}

static void read_units(sct_reader *r, const sct_node *node)
{
    static const sct_key KEYS[] = {{"length", "the unit of bare lengths, such as \"m\""},
                                   {"force", "the unit of bare forces, such as \"kN\""},
                                   {"stress", "the unit of bare stresses, such as \"MPa\""},
                                   {"area", NULL},
                                   {"density", NULL},
                                   {"displacement", NULL},
                                   {"temperature", NULL},
                                   {"second_moment", NULL}};
    static const int SLOTS[] = {SCT_LENGTH,  SCT_FORCE,        SCT_STRESS,      SCT_AREA,
                                SCT_DENSITY, SCT_DISPLACEMENT, SCT_TEMPERATURE, SCT_SECOND_MOMENT};
    enum { N = sizeof KEYS / sizeof *KEYS };
    const sct_node *found[N];
    sct_fields *f = &r->f;
    f->unit[SCT_EXPANSION] = sct_unit_find("1/K");
    if (!sct_fields_keys(f, node, "units", KEYS, N, found)) {
        for (int i = 0; i < SCT_UNIT_SLOTS; i++) f->unit_is_wrong[i] = true;
        return;
    }
    for (int i = 0; i < N; i++) {
        const sct_quantity quantity = SLOTS[i] == SCT_DISPLACEMENT ? SCT_LENGTH : (sct_quantity)SLOTS[i];
        const char *name;
        char fault[SCT_UNIT_FAULT_ROOM];
        if (sct_fields_string(f, found[i], "the name of a unit", &name)) {
            f->unit[SLOTS[i]] = sct_unit_read(name, quantity, fault);
            if (f->unit[SLOTS[i]] == NULL) sct_fields_error(f, found[i], "%s", fault);
        }
        f->unit_is_wrong[SLOTS[i]] = f->unit[SLOTS[i]] == NULL && (found[i] != NULL || KEYS[i].required != NULL);
    }
    const sct_unit *length = f->unit[SCT_LENGTH];
    derive_units(r);
    if (length == NULL) {
        f->unit_is_wrong[SCT_AREA] = f->unit_is_wrong[SCT_SECOND_MOMENT] = f->unit_is_wrong[SCT_DISPLACEMENT] = true;
        return;
    }
    if (f->unit[SCT_DISPLACEMENT] == NULL && !f->unit_is_wrong[SCT_DISPLACEMENT]) f->unit[SCT_DISPLACEMENT] = length;
    if (f->unit[SCT_AREA] == NULL && !f->unit_is_wrong[SCT_AREA]) f->unit[SCT_AREA] = power_of(r, length, 2, SCT_AREA);
    if (f->unit[SCT_SECOND_MOMENT] == NULL && !f->unit_is_wrong[SCT_SECOND_MOMENT])
        f->unit[SCT_SECOND_MOMENT] = power_of(r, length, 4, SCT_SECOND_MOMENT);
    r->model->us_customary = strcmp(length->name, "in") == 0 || strcmp(length->name, "ft") == 0;
}

/* ---- materials ----------------------------------------------------------------------------------------------------
 */

static void read_material(sct_reader *r, const sct_node *node, sct_material *m)
{
    static const sct_range E = {"Young's modulus", SCT_STRESS, 1e6, 2e12, 1e9, 1e12, "210 GPa"};
    static const sct_range DENSITY = {"a density", SCT_DENSITY, 1, 3e4, 100, 2.5e4, NULL};
    static const sct_range YIELD = {"a yield stress", SCT_STRESS, 1e3, 1e11, 1e7, 5e9, NULL};
    static const sct_range EXPANSION = {"an expansion coefficient", SCT_EXPANSION, 0, 1e-3, 1e-6, 1e-4, NULL};
    static const sct_range G = {"a shear modulus", SCT_STRESS, 1e5, 2e12, 1e8, 1e12, "81 GPa"};
    enum { K_E, K_DENSITY, K_YIELD, K_EXPANSION, K_ALLOWABLE, K_G, N };
    static const sct_key KEYS[N] = {{"E", "Young's modulus"}, {"density", "the density, such as \"7850 kg/m3\""},
                                    {"yield", NULL},          {"expansion", NULL},
                                    {"allowable", NULL},      {"G", NULL}};
    const sct_node *found[N];
    m->G = m->expansion = m->yield = m->allowable[0] = m->allowable[1] = (double)NAN;
    m->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &m->name);
    if (!sct_fields_keys(&r->f, node, "a material", KEYS, N, found)) return;
    sct_fields_value(&r->f, found[K_E], &E, &m->E);
    sct_fields_value(&r->f, found[K_DENSITY], &DENSITY, &m->density);
    sct_fields_value(&r->f, found[K_YIELD], &YIELD, &m->yield);
    sct_fields_value(&r->f, found[K_EXPANSION], &EXPANSION, &m->expansion);
    sct_read_allowable(r, found[K_ALLOWABLE], m->allowable);
    if (sct_fields_value(&r->f, found[K_G], &G, &m->G) && m->E > 0 && m->G > m->E / 2)
        sct_fields_remark(&r->f, SCT_WARNING, found[K_G],
                          "G is %.3g times E; expected at most E/2, as of metals and wood", m->G / m->E);
}

static void read_materials(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "material", SCT_MOST_MEMBERS);
    m->materials = sct_fields_array(&r->f, n, sizeof *m->materials);
    r->material_is_wrong = sct_fields_array(&r->f, n, sizeof *r->material_is_wrong);
    r->materials = sct_reader_names(r, node);
    if (failed(r) || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        const int errors_before = r->f.n_errors;
        read_material(r, c, &m->materials[m->n_materials]);
        r->material_is_wrong[m->n_materials++] = r->f.n_errors > errors_before || r->f.unit_is_wrong[SCT_STRESS];
    }
}

/* ---- the whole ------------------------------------------------------------------------------------------------------
 */

/* A group without members has nothing to size. `node` is /groups. */
static void check_groups_used(sct_reader *r, const sct_node *node)
{
    const sct_model *m = r->model;
    if (r->f.n_errors > 0) return; /* a member may have lost its group to an error */
    bool *is_used = sct_fields_array(&r->f, m->n_groups, sizeof *is_used);
    if (is_used == NULL) return;
    for (int i = 0; i < m->n_members; i++) is_used[m->members[i].group] = true;
    int g = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c), g++)
        if (!is_used[g]) sct_fields_error(&r->f, c, "no member is in this group; give it one or leave the group out");
}

static void read_root(sct_reader *r, const sct_node *root)
{
    enum {
        K_FORMAT,
        K_SCHEMA,
        K_TITLE,
        K_DIMENSIONS,
        K_UNITS,
        K_MATERIALS,
        K_FAMILIES,
        K_JOINTS,
        K_GROUPS,
        K_MEMBERS,
        K_CASES,
        K_COMBINATIONS,
        K_LIMITS,
        N
    };
    static const sct_key KEYS[N] = {
        [K_FORMAT] = {"scantling", "1, the number of the file's format"},
        [K_SCHEMA] = {"$schema", NULL},
        [K_TITLE] = {"title", NULL},
        [K_DIMENSIONS] = {"dimensions", "2 or 3"},
        [K_UNITS] = {"units", "the units of bare numbers, such as {\"length\": \"m\", \"force\": \"kN\", \"stress\": "
                              "\"MPa\"}"},
        [K_MATERIALS] = {"materials", "an object with at least one material, keyed by name"},
        [K_FAMILIES] = {"families", NULL},
        [K_JOINTS] = {"joints", "an object with at least one joint, keyed by name"},
        [K_GROUPS] = {"groups", "an object with at least one group, keyed by name"},
        [K_MEMBERS] = {"members", "an object with at least one member, keyed by name"},
        [K_CASES] = {"cases", "an object with at least one load case, keyed by name"},
        [K_COMBINATIONS] = {"combinations", "an object with at least one combination, keyed by name"},
        [K_LIMITS] = {"limits", NULL}};
    static const sct_key LIMITS[SCT_LIMITS] = {[SCT_LIMITS_DEFLECTION] = {"deflection", NULL},
                                               [SCT_LIMITS_BUCKLING] = {"buckling", NULL},
                                               [SCT_LIMITS_SLENDERNESS] = {"slenderness", NULL},
                                               [SCT_LIMITS_DRIFT] = {"drift", NULL},
                                               [SCT_LIMITS_BOW] = {"bow", NULL},
                                               [SCT_LIMITS_CRITICAL_FACTOR] = {"critical_factor", NULL},
                                               [SCT_LIMITS_AMPLIFY_SWAY] = {"amplify_sway", NULL},
                                               [SCT_LIMITS_FREQUENCY] = {"frequency", NULL}};
    const sct_node *found[N], *limit[SCT_LIMITS];
    const char *text;
    /* another format has other keys: its number is looked at first */
    if (sct_node_kind_of(root) == SCT_OBJECT && !read_version(r, sct_node_find(root, KEYS[K_FORMAT].name))) return;
    if (!sct_fields_keys(&r->f, root, "a model", KEYS, N, found)) return;
    sct_fields_keys(&r->f, found[K_LIMITS], "limits", LIMITS, SCT_LIMITS, limit);
    if (found[K_LIMITS] != NULL && sct_node_kind_of(found[K_LIMITS]) != SCT_OBJECT) r->buckling.is_given = true;
    sct_fields_string(&r->f, found[K_SCHEMA], "the address of the schema", &text);
    if (sct_fields_string(&r->f, found[K_TITLE], "a title", &text)) r->model->title = sct_fields_copy(&r->f, text);
    read_dimensions(r, found[K_DIMENSIONS]);
    read_units(r, found[K_UNITS]);
    read_materials(r, found[K_MATERIALS]);
    if (!failed(r)) sct_read_families(r, found[K_FAMILIES]);
    if (!failed(r)) sct_read_joints(r, found[K_JOINTS]);
    if (!failed(r)) sct_read_limit_defaults(r, limit[SCT_LIMITS_BUCKLING], limit[SCT_LIMITS_SLENDERNESS]);
    if (!failed(r)) sct_read_groups(r, found[K_GROUPS]);
    if (!failed(r)) sct_read_members(r, found[K_MEMBERS]);
    if (!failed(r)) sct_read_cases(r, found[K_CASES]);
    if (!failed(r)) sct_read_combinations(r, found[K_COMBINATIONS]);
    if (!failed(r)) sct_read_limits(r, limit);
    if (!failed(r)) check_groups_used(r, found[K_GROUPS]);
    if (!failed(r) && r->f.n_errors == 0) sct_check_needs(r);
}

static void release(sct_reader *r)
{
    sct_names_free(r->materials);
    sct_names_free(r->joints);
    sct_names_free(r->groups);
    sct_names_free(r->members);
    sct_names_free(r->cases);
    sct_names_free(r->combinations);
    sct_names_free(r->families);
    for (int i = 0; r->sections != NULL && i < r->families_room; i++) sct_names_free(r->sections[i]);
}

/* An empty model with a copy of its text. */
static sct_model *new_model(const char *name, const char *bytes, size_t size)
{
    sct_arena *arena = sct_arena_new();
    if (arena == NULL) return NULL;
    sct_model *model = sct_arena_array(arena, 1, sizeof *model);
    if (model != NULL) {
        model->arena = arena;
        model->file = sct_arena_string(arena, name, strlen(name));
        model->source = sct_arena_string(arena, bytes, size);
        model->source_size = size;
        model->title = "";
        model->least_factor = model->least_frequency = (double)NAN;
    }
    if (model != NULL && model->file != NULL && model->source != NULL) return model;
    sct_arena_free(arena);
    return NULL;
}

static sct_status read_model(sct_model *model, sct_issues *issues)
{
    sct_document *document;
    const sct_status status = sct_document_parse(model->file, model->source, model->source_size, &document, issues);
    if (status != SCT_OK) return status;
    sct_reader r = {.f = {.document = document, .issues = issues, .arena = model->arena},
                    .model = model,
                    .slenderness_any = (double)INFINITY,
                    .slenderness_compression = (double)INFINITY};
    read_root(&r, sct_document_root(document));
    release(&r);
    sct_document_free(document);
    if (failed(&r)) return r.f.failure;
    return r.f.n_errors > 0 ? SCT_BAD_INPUT : SCT_OK;
}

sct_status sct_model_parse(const char *name, const char *bytes, size_t size, sct_model **model, sct_issues *issues)
{
    *model = NULL;
    if (size > SCT_MOST_BYTES) { /* before a copy of it is made */
        sct_issue_add(issues, SCT_ERROR, (sct_where){.file = name},
                      "the file is larger than %d bytes, the most that is read", SCT_MOST_BYTES);
        return SCT_TOO_LARGE;
    }
    sct_model *m = new_model(name, bytes, size);
    if (m == NULL) return SCT_NO_MEMORY;
    const sct_status status = read_model(m, issues);
    if (status == SCT_OK)
        *model = m;
    else
        sct_model_free(m);
    return status;
}

sct_status sct_model_read(const char *path, sct_model **model, sct_issues *issues)
{
    char *bytes;
    size_t size;
    *model = NULL;
    sct_status status = sct_read_file(path, SCT_MOST_BYTES, &bytes, &size, issues);
    if (status != SCT_OK) return status;
    status = sct_model_parse(strcmp(path, "-") == 0 ? "<stdin>" : path, bytes, size, model, issues);
    free(bytes);
    return status;
}

void sct_model_free(sct_model *model)
{
    if (model != NULL) sct_arena_free(model->arena); /* the model itself is in it */
}

int sct_model_combination(const sct_model *model, const char *name, const char **nearest)
{
    const int n = model->n_combinations;
    *nearest = NULL;
    for (int c = 0; c < n; c++)
        if (strcmp(model->combinations[c].name, name) == 0) return c;
    const char **names = malloc(((size_t)n + 1) * sizeof *names);
    if (names == NULL) return -1;
    for (int c = 0; c < n; c++) names[c] = model->combinations[c].name;
    *nearest = sct_nearest(names, n, name);
    free(names);
    return -1;
}

/* The reader of model files: the public calls, the head of the file, its materials, joints and members. */
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
    int i = 0;
    for (const sct_node *c = is_object ? sct_node_first(object) : NULL; names != NULL && c != NULL;
         c = sct_node_next(c)) {
        if (sct_names_put(names, sct_node_key(c), i++)) continue;
        sct_names_free(names);
        names = NULL;
    }
    if (names == NULL) r->f.failure = SCT_NO_MEMORY;
    return names;
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
    enum { K_E, K_DENSITY, K_YIELD, K_EXPANSION, K_ALLOWABLE, N };
    static const sct_key KEYS[N] = {{"E", "Young's modulus"},
                                    {"density", "the density, such as \"7850 kg/m3\""},
                                    {"yield", NULL},
                                    {"expansion", NULL},
                                    {"allowable", NULL}};
    const sct_node *found[N];
    m->expansion = m->yield = m->allowable[0] = m->allowable[1] = (double)NAN;
    m->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &m->name);
    if (!sct_fields_keys(&r->f, node, "a material", KEYS, N, found)) return;
    sct_fields_value(&r->f, found[K_E], &E, &m->E);
    sct_fields_value(&r->f, found[K_DENSITY], &DENSITY, &m->density);
    sct_fields_value(&r->f, found[K_YIELD], &YIELD, &m->yield);
    sct_fields_value(&r->f, found[K_EXPANSION], &EXPANSION, &m->expansion);
    sct_read_allowable(r, found[K_ALLOWABLE], m->allowable);
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

/* ---- joints ---------------------------------------------------------------------------------------------------------
 */

/* The part of d that is not along the directions held so far, by Gram and Schmidt, as a length. */
static double length_apart(const double d[3], const double basis[][3], int n, double apart[3])
{
    memcpy(apart, d, 3 * sizeof *apart);
    for (int pass = 0; pass < 2; pass++) /* twice is enough (Kahan) */
        for (int i = 0; i < n; i++) {
            const double along = apart[0] * basis[i][0] + apart[1] * basis[i][1] + apart[2] * basis[i][2];
            for (int k = 0; k < 3; k++) apart[k] -= along * basis[i][k];
        }
    return sqrt(apart[0] * apart[0] + apart[1] * apart[1] + apart[2] * apart[2]);
}

static void read_support(sct_reader *r, const sct_node *node, sct_joint *joint)
{
    static const double APART = 1e-6; /* sine of the least angle between a direction and those before it */
    double basis[3][3], apart[3];
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array of the directions held, such as [\"x\", \"y\"]")) return;
    if (r->f.dimensions > 0 && sct_node_count(node) > r->f.dimensions) {
        sct_fields_error(&r->f, node, "found %d directions; at most %d can be held", sct_node_count(node),
                         r->f.dimensions);
        return;
    }
    for (const sct_node *c = sct_node_first(node); c != NULL && joint->n_held < 3; c = sct_node_next(c)) {
        double *d = joint->held[joint->n_held];
        if (!sct_fields_direction(&r->f, c, d, NULL)) continue;
        const double length = length_apart(d, (const double(*)[3])basis, joint->n_held, apart);
        if (!(length > APART)) {
            sct_fields_error(&r->f, c,
                             "the directions before this one hold it already; expected independent directions");
            continue;
        }
        for (int k = 0; k < 3; k++) basis[joint->n_held][k] = apart[k] / length;
        joint->n_held++;
    }
}

static void read_joint(sct_reader *r, const sct_node *node, sct_joint *joint)
{
    static const sct_range COORDINATE = {"a coordinate", SCT_LENGTH, -1e5, 1e5, 0.01, 1e3, NULL};
    static const sct_key KEYS[] = {{"at", "its coordinates, such as [0, 0]"}, {"support", NULL}};
    const sct_node *found[2];
    joint->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &joint->name);
    if (!sct_fields_keys(&r->f, node, "a joint", KEYS, 2, found)) return;
    sct_fields_vector(&r->f, found[0], &COORDINATE, joint->at);
    read_support(r, found[1], joint);
}

static void read_joints(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "joint", SCT_MOST_JOINTS);
    m->joints = sct_fields_array(&r->f, n, sizeof *m->joints);
    r->joint_is_wrong = sct_fields_array(&r->f, n, sizeof *r->joint_is_wrong);
    r->joints = sct_reader_names(r, node);
    if (failed(r) || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        const int errors_before = r->f.n_errors;
        read_joint(r, c, &m->joints[m->n_joints]);
        r->joint_is_wrong[m->n_joints++] = r->f.n_errors > errors_before || r->f.unit_is_wrong[SCT_LENGTH];
    }
}

/* ---- members --------------------------------------------------------------------------------------------------------
 */

void sct_read_lengths(sct_reader *r, const sct_node *restraint, const sct_node *factor, sct_lengths *lengths)
{
    static const sct_range RESTRAINT = {"an effective length", SCT_LENGTH, 1e-6, 1e5, 0.1, 1e3, NULL};
    static const sct_range FACTOR = {"a length factor", -1, 0.01, 10, 0, 0, NULL};
    static const sct_key AXES[] = {{"in_plane", NULL}, {"out_of_plane", NULL}};
    const sct_node *distance[2] = {NULL, NULL}, *times[2] = {NULL, NULL};
    *lengths = (sct_lengths){0};
    sct_fields_keys(&r->f, restraint, "a restraint", AXES, 2, distance);
    sct_fields_keys(&r->f, factor, "a length factor", AXES, 2, times);
    for (int axis = 0; axis < 2; axis++) {
        if (distance[axis] != NULL && times[axis] != NULL) {
            const sct_where other = sct_node_where(r->f.document, distance[axis]);
            sct_fields_error(&r->f, times[axis],
                             "the effective length is given twice; \"restraint\" at %d:%d gives it too", other.line,
                             other.column);
            continue;
        }
        const bool by_distance = distance[axis] != NULL;
        lengths->source[axis] = by_distance ? SCT_LENGTH_RESTRAINT : SCT_LENGTH_FACTOR;
        lengths->is_given[axis] = sct_fields_value(&r->f, by_distance ? distance[axis] : times[axis],
                                                   by_distance ? &RESTRAINT : &FACTOR, &lengths->length[axis]);
    }
}

static void resolve_lengths(const sct_lengths *own, const sct_lengths *of_group, sct_member *member)
{
    for (int axis = 0; axis < 2; axis++) {
        const sct_lengths *said = own->is_given[axis] ? own : of_group;
        const bool is_given = said != NULL && said->is_given[axis];
        member->source[axis] = is_given ? said->source[axis] : SCT_LENGTH_SYSTEM;
        member->length[axis] = is_given ? said->length[axis] : (double)NAN;
    }
}

static void read_member(sct_reader *r, const sct_node *node, sct_member *member)
{
    enum { K_FROM, K_TO, K_GROUP, K_RESTRAINT, K_FACTOR, N };
    static const sct_key KEYS[N] = {{"from", "the name of a joint"},
                                    {"to", "the name of a joint"},
                                    {"group", "the name of a group"},
                                    {"restraint", NULL},
                                    {"length_factor", NULL}};
    const sct_node *found[N];
    sct_lengths own;
    member->from = member->to = member->group = -1;
    member->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &member->name);
    if (!sct_fields_keys(&r->f, node, "a member", KEYS, N, found)) return;
    const bool has_from = sct_fields_reference(&r->f, found[K_FROM], "joint", r->joints, &member->from);
    const bool has_to = sct_fields_reference(&r->f, found[K_TO], "joint", r->joints, &member->to);
    if (has_from && has_to && member->from == member->to)
        sct_fields_error(&r->f, found[K_TO], "the member begins and ends at joint \"%s\"; expected two joints",
                         sct_show(sct_node_string(found[K_TO])).text);
    sct_fields_reference(&r->f, found[K_GROUP], "group", r->groups, &member->group);
    sct_read_lengths(r, found[K_RESTRAINT], found[K_FACTOR], &own);
    resolve_lengths(&own, member->group < 0 || r->group_lengths == NULL ? NULL : &r->group_lengths[member->group],
                    member);
}

static void read_members(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "member", SCT_MOST_MEMBERS);
    m->members = sct_fields_array(&r->f, n, sizeof *m->members);
    r->members = sct_reader_names(r, node);
    if (failed(r) || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c))
        read_member(r, c, &m->members[m->n_members++]);
}

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

/* ---- the whole ------------------------------------------------------------------------------------------------------
 */

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
    enum { L_DEFLECTION, L_BUCKLING, L_SLENDERNESS, L };
    static const sct_key LIMITS[L] = {{"deflection", NULL}, {"buckling", NULL}, {"slenderness", NULL}};
    const sct_node *found[N], *limit[L];
    const char *text;
    /* another format has other keys: its number is looked at first */
    if (sct_node_kind_of(root) == SCT_OBJECT && !read_version(r, sct_node_find(root, KEYS[K_FORMAT].name))) return;
    if (!sct_fields_keys(&r->f, root, "a model", KEYS, N, found)) return;
    sct_fields_keys(&r->f, found[K_LIMITS], "limits", LIMITS, L, limit);
    if (found[K_LIMITS] == NULL) limit[L_DEFLECTION] = limit[L_BUCKLING] = limit[L_SLENDERNESS] = NULL;
    if (found[K_LIMITS] != NULL && sct_node_kind_of(found[K_LIMITS]) != SCT_OBJECT) r->buckling.is_given = true;
    sct_fields_string(&r->f, found[K_SCHEMA], "the address of the schema", &text);
    if (sct_fields_string(&r->f, found[K_TITLE], "a title", &text)) r->model->title = sct_fields_copy(&r->f, text);
    read_dimensions(r, found[K_DIMENSIONS]);
    read_units(r, found[K_UNITS]);
    read_materials(r, found[K_MATERIALS]);
    if (!failed(r)) sct_read_families(r, found[K_FAMILIES]);
    if (!failed(r)) read_joints(r, found[K_JOINTS]);
    if (!failed(r)) sct_read_limit_defaults(r, limit[L_BUCKLING], limit[L_SLENDERNESS]);
    if (!failed(r)) sct_read_groups(r, found[K_GROUPS]);
    if (!failed(r)) read_members(r, found[K_MEMBERS]);
    if (!failed(r)) sct_read_cases(r, found[K_CASES]);
    if (!failed(r)) sct_read_combinations(r, found[K_COMBINATIONS]);
    if (!failed(r)) sct_read_deflections(r, limit[L_DEFLECTION]);
    if (!failed(r)) check_groups_used(r, found[K_GROUPS]);
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

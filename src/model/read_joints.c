/* The joints of a model file: where they stand, how they are held, and the springs under them. */
#include <math.h>
#include <string.h>

#include "reader.h"

static const char ROTATION[] = "rotation";
static const double APART = 1e-6; /* sine of the least angle between a direction and those before it */

double sct_length_apart(const double d[3], const double basis[][3], int n, double apart[3])
{
    memcpy(apart, d, 3 * sizeof *apart);
    for (int pass = 0; pass < 2; pass++) /* twice is enough (Kahan) */
        for (int i = 0; i < n; i++) {
            const double along = apart[0] * basis[i][0] + apart[1] * basis[i][1] + apart[2] * basis[i][2];
            for (int k = 0; k < 3; k++) apart[k] -= along * basis[i][k];
        }
    return sqrt(apart[0] * apart[0] + apart[1] * apart[1] + apart[2] * apart[2]);
}

/* ---- supports -------------------------------------------------------------------------------------------------------
 */

/* Directions or axes of rotation that are held: as given, and orthonormal. */
typedef struct held_set {
    double (*given)[3];
    int n, most;
    double basis[3][3];
} held_set;

/* False: those before hold it already. */
static bool hold(held_set *set, const double d[3])
{
    double apart[3];
    const double length = sct_length_apart(d, (const double(*)[3])set->basis, set->n, apart);
    if (set->n >= set->most || !(length > APART)) return false;
    memcpy(set->given[set->n], d, 3 * sizeof *d);
    for (int k = 0; k < 3; k++) set->basis[set->n][k] = apart[k] / length;
    set->n++;
    return true;
}

/* Is the text "rotation" in a plane model, "rotation x", "rotation y" or "rotation z" in space? */
static bool turn_axis(int dimensions, const char *text, double axis[3])
{
    static const char AXES[] = "xyz";
    const size_t length = sizeof ROTATION - 1;
    memset(axis, 0, 3 * sizeof *axis);
    axis[2] = 1.0;
    if (strncmp(text, ROTATION, length) != 0) return false;
    if (text[length] == '\0') return dimensions != 3;
    if (dimensions == 2 || text[length] != ' ' || text[length + 1] == '\0' || text[length + 2] != '\0') return false;
    const char *at = strchr(AXES, text[length + 1]);
    if (at == NULL) return false;
    axis[2] = 0.0;
    axis[at - AXES] = 1.0;
    return true;
}

/* One entry of a support: a direction, or an axis of rotation (is_turn). */
static bool read_held(sct_reader *r, const sct_node *node, double d[3], bool *is_turn)
{
    const char *text = sct_node_string(node);
    *is_turn = text != NULL && turn_axis(r->f.dimensions, text, d);
    if (*is_turn) return true;
    if (text == NULL || (strlen(text) == 1 && strchr(r->f.dimensions == 2 ? "xy" : "xyz", text[0]) != NULL))
        return sct_fields_direction(&r->f, node, d, NULL);
    if (strcmp(text, "fixed") == 0)
        sct_fields_error(&r->f, node,
                         "found \"fixed\" in a list; it stands alone, for everything held: \"support\": \"fixed\"");
    else
        sct_fields_error(&r->f, node, "found \"%s\"; expected a direction: %s, or a vector such as %s",
                         sct_show(text).text,
                         r->f.dimensions == 2 ? "\"x\", \"y\", \"rotation\""
                                              : "\"x\", \"y\", \"z\", \"rotation x\", \"rotation y\", \"rotation z\"",
                         r->f.dimensions == 2 ? "[0.6, 0.8]" : "[0.6, 0, 0.8]");
    return false;
}

static bool too_many_held(sct_reader *r, const sct_node *node)
{
    int n = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        const char *text = sct_node_string(c);
        n += text == NULL || strncmp(text, ROTATION, sizeof ROTATION - 1) != 0;
    }
    if (r->f.dimensions == 0 || n <= r->f.dimensions) return false;
    sct_fields_error(&r->f, node, "found %d directions; at most %d can be held", n, r->f.dimensions);
    return true;
}

static void read_support(sct_reader *r, const sct_node *node, held_set *shifts, held_set *turns)
{
    static const double AXES[3][3] = {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}};
    static const char EXPECTED[] = "\"fixed\", or an array of the directions held, such as [\"x\", \"y\"]";
    if (node == NULL) return;
    const char *text = sct_node_string(node);
    if (text != NULL && strcmp(text, "fixed") == 0) {
        for (int i = 0; i < shifts->most; i++) hold(shifts, AXES[i]);
        for (int i = 3 - turns->most; i < 3; i++) hold(turns, AXES[i]);
        return;
    }
    if (text != NULL) sct_fields_error(&r->f, node, "found \"%s\"; expected %s", sct_show(text).text, EXPECTED);
    if (text != NULL || !sct_fields_is(&r->f, node, SCT_ARRAY, EXPECTED)) return;
    if (too_many_held(r, node)) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        double d[3];
        bool is_turn;
        if (!read_held(r, c, d, &is_turn) || hold(is_turn ? turns : shifts, d)) continue;
        sct_fields_error(&r->f, c, "the %s before this one hold it already; expected independent %s",
                         is_turn ? "rotations" : "directions", is_turn ? "rotations" : "directions");
    }
}

/* ---- springs --------------------------------------------------------------------------------------------------------
 */

static void read_springs(sct_reader *r, const sct_node *node, const held_set *shifts, const held_set *turns,
                         sct_joint *joint)
{
    static const sct_range STIFFNESS[2] = {
        {"a spring stiffness", SCT_FORCE_PER_LENGTH, 1e-3, 1e15, 1e3, 1e11, "5000 kN/m"},
        {"a rotational stiffness", SCT_TURN_STIFFNESS, 1e-3, 1e15, 1e2, 1e11, NULL}};
    static const sct_key IN_PLANE[] = {{"x", NULL}, {"y", NULL}, {"rotation", NULL}},
                         IN_SPACE[] = {{"x", NULL},          {"y", NULL},          {"z", NULL},
                                       {"rotation x", NULL}, {"rotation y", NULL}, {"rotation z", NULL}};
    const bool is_plane = r->f.dimensions == 2;
    const int n_shifts = is_plane ? 2 : 3, n = is_plane ? 3 : 6;
    const sct_node *found[6];
    if (node == NULL || r->f.dimensions == 0) return; /* what the keys are is not known */
    if (!sct_fields_keys(&r->f, node, "springs", is_plane ? IN_PLANE : IN_SPACE, n, found)) return;
    joint->springs = sct_fields_array(&r->f, n, sizeof *joint->springs);
    if (joint->springs == NULL) return;
    for (int i = 0; i < n; i++) {
        sct_joint_spring spring = {.is_turn = i >= n_shifts};
        const held_set *held = spring.is_turn ? turns : shifts;
        double apart[3];
        spring.dir[is_plane && spring.is_turn ? 2 : i % 3] = 1.0;
        if (!sct_fields_value(&r->f, found[i], &STIFFNESS[spring.is_turn], &spring.stiffness)) continue;
        if (!(sct_length_apart(spring.dir, (const double(*)[3])held->basis, held->n, apart) > APART)) {
            sct_fields_key_error(&r->f, found[i],
                                 "\"support\" holds this already; a spring stands where the joint can move");
            continue;
        }
        spring.where = sct_fields_where(&r->f, found[i]);
        joint->springs[joint->n_springs++] = spring;
    }
}

/* ---- joints ---------------------------------------------------------------------------------------------------------
 */

static void read_joint(sct_reader *r, const sct_node *node, sct_joint *joint)
{
    static const sct_range COORDINATE = {"a coordinate", SCT_LENGTH, -1e5, 1e5, 0.01, 1e3, NULL};
    enum { K_AT, K_SUPPORT, K_SPRINGS, N };
    static const sct_key KEYS[N] = {{"at", "its coordinates, such as [0, 0]"}, {"support", NULL}, {"springs", NULL}};
    const sct_node *found[N];
    held_set shifts = {.given = joint->held, .most = r->f.dimensions == 2 ? 2 : 3},
             turns = {.given = joint->turns_held, .most = r->f.dimensions == 2 ? 1 : 3};
    joint->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &joint->name);
    if (!sct_fields_keys(&r->f, node, "a joint", KEYS, N, found)) return;
    sct_fields_vector(&r->f, found[K_AT], &COORDINATE, joint->at);
    read_support(r, found[K_SUPPORT], &shifts, &turns);
    read_springs(r, found[K_SPRINGS], &shifts, &turns, joint);
    joint->n_held = shifts.n;
    joint->n_turns_held = turns.n;
}

void sct_read_joints(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "joint", SCT_MOST_JOINTS);
    m->joints = sct_fields_array(&r->f, n, sizeof *m->joints);
    r->joint_is_wrong = sct_fields_array(&r->f, n, sizeof *r->joint_is_wrong);
    r->joints = sct_reader_names(r, node);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        const int errors_before = r->f.n_errors;
        read_joint(r, c, &m->joints[m->n_joints]);
        r->joint_is_wrong[m->n_joints++] = r->f.n_errors > errors_before || r->f.unit_is_wrong[SCT_LENGTH];
    }
}

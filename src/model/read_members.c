/* The members of a model file: which joints they join or run through, how their ends hang on these, how they lie. */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "axes.h"
#include "reader.h"

/* ---- effective lengths ----------------------------------------------------------------------------------------------
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

/* ---- ends -----------------------------------------------------------------------------------------------------------
 */

static const char *const FIXITIES[] = {[SCT_PINNED] = "pinned", [SCT_FIXED] = "fixed"};

/* Every rotation that the model has; what it has not stays pinned. */
static void set_end(const sct_reader *r, sct_fixity fixity, sct_member_end *end)
{
    *end = (sct_member_end){.fixity = {fixity, SCT_PINNED, SCT_PINNED}};
    if (r->f.dimensions != 2) end->fixity[SCT_OUT_OF_PLANE] = end->fixity[SCT_TWIST] = fixity;
}

/* "fixed", "pinned" or a stiffness. */
static void read_fixity(sct_reader *r, const sct_node *node, sct_fixity *fixity, double *stiffness)
{
    static const sct_range STIFFNESS = {"a rotational stiffness", SCT_TURN_STIFFNESS, 1e-3, 1e15, 1e2, 1e11, NULL};
    const char *text = sct_node_string(node);
    int word = SCT_FIXED;
    if (text != NULL && strspn(text, "0123456789+-.") == 0) {
        if (sct_fields_word(&r->f, node, "a kind of end (or a stiffness such as \"200 kN m/rad\")", FIXITIES, 2, &word))
            *fixity = (sct_fixity)word;
    } else if (sct_fields_value(&r->f, node, &STIFFNESS, stiffness)) {
        *fixity = SCT_SPRUNG;
    }
}

/* "fixed", "pinned", or an object with one of these, or a stiffness, for each rotation. */
static void read_end(sct_reader *r, const sct_node *node, sct_member_end *end)
{
    static const sct_key KEYS[SCT_TURNS] = {{"in_plane", NULL}, {"out_of_plane", NULL}, {"torsion", NULL}};
    const sct_node *found[SCT_TURNS];
    int word = SCT_PINNED;
    if (sct_node_kind_of(node) == SCT_STRING) {
        if (sct_fields_word(&r->f, node, "a kind of end (or an object such as {\"in_plane\": \"200 kN m/rad\"})",
                            FIXITIES, 2, &word))
            set_end(r, (sct_fixity)word, end);
        return;
    }
    if (!sct_fields_keys(&r->f, node, "an end of a member (or \"fixed\", or \"pinned\")", KEYS, SCT_TURNS, found))
        return;
    set_end(r, SCT_FIXED, end);
    for (int i = 0; i < SCT_TURNS; i++) {
        if (found[i] == NULL) continue;
        if (r->f.dimensions == 2 && i != SCT_IN_PLANE)
            sct_fields_key_error(&r->f, found[i], "the members of a plane model turn in plane only; leave \"%s\" out",
                                 KEYS[i].name);
        else
            read_fixity(r, found[i], &end->fixity[i], &end->stiffness[i]);
    }
}

/* One word for both ends, or a list of two. */
static void read_ends(sct_reader *r, const sct_node *node, sct_member_end end[2])
{
    set_end(r, SCT_PINNED, &end[0]);
    set_end(r, SCT_PINNED, &end[1]);
    if (node == NULL) return;
    if (sct_node_kind_of(node) != SCT_ARRAY) {
        read_end(r, node, &end[0]);
        end[1] = end[0];
        return;
    }
    if (sct_node_count(node) != 2) {
        sct_fields_error(&r->f, node, "found %d ends; expected two, at the start and at the end of the member",
                         sct_node_count(node));
        return;
    }
    read_end(r, sct_node_first(node), &end[0]);
    read_end(r, sct_node_next(sct_node_first(node)), &end[1]);
}

static bool is_pinned(const sct_member_end *end)
{
    for (int i = 0; i < SCT_TURNS; i++)
        if (end->fixity[i] != SCT_PINNED) return false;
    return true;
}

/* ---- how it lies ----------------------------------------------------------------------------------------------------
 */

static bool is_in_space(sct_reader *r, const sct_node *node)
{
    if (node == NULL) return false;
    if (r->f.dimensions != 2) return true;
    sct_fields_key_error(&r->f, node, "\"%s\" turns the section of a member in space; in a plane model leave it out",
                         sct_node_key(node));
    return false;
}

static void read_orientation(sct_reader *r, const sct_node *up, const sct_node *roll, sct_member *member)
{
    static const sct_range ROLL = {"an angle", SCT_ANGLE, -6.3, 6.3, 0, 0, NULL};
    if (is_in_space(r, up)) sct_fields_direction(&r->f, up, member->up, NULL);
    if (is_in_space(r, roll)) sct_fields_value(&r->f, roll, &ROLL, &member->roll);
}

/* `up` must point away from the member. */
static void check_up(sct_reader *r, const sct_node *up, int index)
{
    const sct_member *member = &r->model->members[index];
    double axes[3][3];
    if (up == NULL || r->f.dimensions != 3 || !(sct_reader_length(r, index) > 0)) return; /* told elsewhere */
    if (!sct_member_axes(r->model, member, axes))
        sct_fields_error(
            &r->f, up, "points along the member itself, from \"%s\" to \"%s\"; expected a direction across it",
            sct_show(r->model->joints[member->from].name).text, sct_show(r->model->joints[member->to].name).text);
}

static void read_tension_only(sct_reader *r, const sct_node *node, bool is_bar, bool *tension_only)
{
    if (node == NULL) return;
    const sct_node_kind kind = sct_node_kind_of(node);
    if (kind != SCT_TRUE && kind != SCT_FALSE) {
        sct_fields_error(&r->f, node, "found %s; expected true or false", sct_node_kind_words(node));
        return;
    }
    *tension_only = kind == SCT_TRUE;
    if (*tension_only && !is_bar)
        sct_fields_error(&r->f, node,
                         "a member that goes slack carries tension alone; expected one with pinned ends "
                         "between two joints");
}

/* ---- members and runs -----------------------------------------------------------------------------------------------
 */

enum { K_FROM, K_TO, K_GROUP, K_RESTRAINT, K_FACTOR, K_THROUGH, K_ENDS, K_UP, K_ROLL, K_TENSION_ONLY, N_KEYS };

static void read_keys(sct_reader *r, const sct_node *node, bool is_run, const sct_node *found[N_KEYS])
{
    static const sct_key KEYS[N_KEYS] = {{"from", "the name of a joint"},
                                         {"to", "the name of a joint"},
                                         {"group", "the name of a group"},
                                         {"restraint", NULL},
                                         {"length_factor", NULL},
                                         {"through", NULL},
                                         {"ends", NULL},
                                         {"up", NULL},
                                         {"roll", NULL},
                                         {"tension_only", NULL}};
    sct_key keys[N_KEYS];
    memcpy(keys, KEYS, sizeof keys);
    if (is_run) keys[K_FROM].required = keys[K_TO].required = NULL;
    sct_fields_keys(&r->f, node, "a member", keys, N_KEYS, found);
    for (int i = K_FROM; is_run && i <= K_TO; i++)
        if (found[i] != NULL)
            sct_fields_key_error(&r->f, found[i],
                                 "\"%s\" stands beside \"through\", which names all joints; leave it out",
                                 KEYS[i].name);
}

/* The joints of a run; `pieces` members, all like the first, which holds what was said of the whole. */
static void read_through(sct_reader *r, const sct_node *node, sct_member pieces[], int n)
{
    const sct_node *c = sct_node_first(node);
    int before = -1;
    for (int i = 0; i <= n; i++, c = sct_node_next(c)) {
        int joint = -1;
        sct_fields_reference(&r->f, c, "joint", r->joints, &joint);
        if (joint >= 0 && joint == before)
            sct_fields_error(&r->f, c, "joint \"%s\" stands here twice in a row; expected the next joint of the run",
                             sct_show(sct_node_string(c)).text);
        if (i < n) pieces[i].from = joint;
        if (i > 0) pieces[i - 1].to = joint;
        before = joint;
    }
}

/* No piece turns from the direction of the one before it. */
static bool is_straight(const sct_reader *r, const sct_member pieces[], int n)
{
    static const double TURNED = 1e-3; /* sine */
    double before[3] = {0};
    for (int i = 0; i < n; i++) {
        if (pieces[i].from < 0 || pieces[i].to < 0) return false;
        const double *p = r->model->joints[pieces[i].from].at, *q = r->model->joints[pieces[i].to].at;
        const double L = sct_joint_distance(r->model, pieces[i].from, pieces[i].to);
        if (!(L > 0)) return false;
        const double t[3] = {(q[0] - p[0]) / L, (q[1] - p[1]) / L, (q[2] - p[2]) / L};
        const double across = hypot(hypot(t[1] * before[2] - t[2] * before[1], t[2] * before[0] - t[0] * before[2]),
                                    t[0] * before[1] - t[1] * before[0]);
        if (i > 0 && across > TURNED) return false;
        memcpy(before, t, sizeof t);
    }
    return true;
}

/* The pieces of a run go on through its inner joints; only its own two ends hang as `ends` says. */
static void join_pieces(const sct_reader *r, const sct_member_end ends[2], sct_member pieces[], int n)
{
    sct_member_end inner;
    set_end(r, SCT_FIXED, &inner);
    for (int i = 0; i < n; i++) {
        pieces[i].end[0] = i == 0 ? ends[0] : inner;
        pieces[i].end[1] = i == n - 1 ? ends[1] : inner;
    }
    if (ends[0].fixity[SCT_TWIST] != SCT_PINNED || ends[1].fixity[SCT_TWIST] != SCT_PINNED) return;
    if (!is_straight(r, pieces, n)) return;
    for (int i = 0; i < n; i++) /* nothing holds it: it would spin */
        pieces[i].end[0].fixity[SCT_TWIST] = pieces[i].end[1].fixity[SCT_TWIST] = SCT_PINNED;
}

/* The names of the pieces, which must be nobody else's. */
static void name_pieces(sct_reader *r, const sct_node *through, const sct_run *run)
{
    sct_model *m = r->model;
    for (int i = 0; i < run->n && run->name != NULL; i++) {
        char name[256];
        snprintf(name, sizeof name, "%s %d", run->name, i + 1);
        m->members[run->first + i].name = sct_fields_copy(&r->f, name);
        if (r->f.failure != SCT_OK) return;
        if (sct_names_find(r->members, name) >= 0)
            sct_fields_error(&r->f, through,
                             "a piece of this run is called \"%s\", as another member is; rename one of them",
                             sct_show(name).text);
        else if (!sct_names_put(r->members, m->members[run->first + i].name, run->first + i))
            r->f.failure = SCT_NO_MEMORY;
    }
}

/* How many members an entry makes. */
static int count_pieces(const sct_node *through)
{
    const int n = through == NULL ? 0 : sct_node_count(through);
    return n > 2 ? n - 1 : 1;
}

static bool is_run(sct_reader *r, const sct_node *through)
{
    if (!sct_fields_is(&r->f, through, SCT_ARRAY, "an array with the names of the joints that it runs through"))
        return false;
    if (sct_node_count(through) >= 2) return true;
    sct_fields_error(&r->f, through, "found %d joint%s; expected at least two", sct_node_count(through),
                     sct_node_count(through) == 1 ? "" : "s");
    return false;
}

/* One entry: a member, or the `n` pieces of a run. */
static void read_member(sct_reader *r, const sct_node *node, const sct_node *through, sct_member pieces[], int n)
{
    const sct_node *found[N_KEYS];
    sct_lengths own;
    sct_member_end ends[2];
    sct_member *member = &pieces[0];
    *member = (sct_member){.from = -1, .to = -1, .group = -1, .run = -1, .where = sct_fields_where(&r->f, node)};
    sct_fields_name(&r->f, node, &member->name);
    read_keys(r, node, through != NULL, found);
    const bool has_from = sct_fields_reference(&r->f, found[K_FROM], "joint", r->joints, &member->from);
    const bool has_to = sct_fields_reference(&r->f, found[K_TO], "joint", r->joints, &member->to);
    if (has_from && has_to && member->from == member->to)
        sct_fields_error(&r->f, found[K_TO], "the member begins and ends at joint \"%s\"; expected two joints",
                         sct_show(sct_node_string(found[K_TO])).text);
    sct_fields_reference(&r->f, found[K_GROUP], "group", r->groups, &member->group);
    sct_read_lengths(r, found[K_RESTRAINT], found[K_FACTOR], &own);
    resolve_lengths(&own, member->group < 0 || r->group_lengths == NULL ? NULL : &r->group_lengths[member->group],
                    member);
    read_ends(r, found[K_ENDS], ends);
    read_orientation(r, found[K_UP], found[K_ROLL], member);
    read_tension_only(r, found[K_TENSION_ONLY], through == NULL && is_pinned(&ends[0]) && is_pinned(&ends[1]),
                      &member->tension_only);
    for (int i = 1; i < n; i++) pieces[i] = *member;
    if (through == NULL || is_run(r, through)) {
        if (through != NULL) read_through(r, through, pieces, n);
        join_pieces(r, ends, pieces, n);
    }
    for (int i = 0; i < n; i++) check_up(r, found[K_UP], (int)(pieces - r->model->members) + i);
}

/* Makes a run of the members just read. */
static void add_run(sct_reader *r, const sct_node *through, int n)
{
    sct_model *m = r->model;
    sct_run *run = &m->runs[m->n_runs];
    *run = (sct_run){m->members[m->n_members].name, m->members[m->n_members].where, m->n_members, n};
    for (int i = 0; i < n; i++) m->members[run->first + i].run = m->n_runs;
    m->n_runs++;
    name_pieces(r, through, run);
}

/* How many members and runs the entries make. */
static int count_members(const sct_node *node, int *n_runs)
{
    int n = 0;
    *n_runs = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL && n <= SCT_MOST_MEMBERS; c = sct_node_next(c)) {
        const sct_node *through = sct_node_find(c, "through");
        n += count_pieces(through);
        *n_runs += through != NULL;
    }
    return n;
}

/* The table of names: of the entries first, in their order; runs have the numbers behind those of the members. */
static void put_names(sct_reader *r, const sct_node *node, int n_members, int n_runs)
{
    int member = 0, run = n_members;
    r->members = sct_names_new(n_members + n_runs);
    bool put = r->members != NULL;
    for (const sct_node *c = node == NULL ? NULL : sct_node_first(node); put && c != NULL; c = sct_node_next(c)) {
        const sct_node *through = sct_node_find(c, "through");
        put = sct_names_put(r->members, sct_node_key(c), through != NULL ? run++ : member);
        member += count_pieces(through);
    }
    if (!put) r->f.failure = SCT_NO_MEMORY;
}

void sct_read_members(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    int n_runs = 0;
    const int n_entries = sct_reader_count(r, node, "member", SCT_MOST_MEMBERS);
    const int n = n_entries == 0 ? 0 : count_members(node, &n_runs);
    if (n > SCT_MOST_MEMBERS) {
        sct_fields_error(&r->f, node, "found more members than are read: with the pieces of runs at most %d",
                         SCT_MOST_MEMBERS);
        r->f.failure = SCT_TOO_LARGE;
    }
    if (r->f.failure != SCT_OK) return;
    m->members = sct_fields_array(&r->f, n, sizeof *m->members);
    m->runs = sct_fields_array(&r->f, n_runs, sizeof *m->runs);
    put_names(r, n_entries == 0 ? NULL : node, n, n_runs);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c)) {
        const sct_node *through = sct_node_find(c, "through");
        const int pieces = count_pieces(through);
        read_member(r, c, through, &m->members[m->n_members], pieces);
        if (through != NULL) add_run(r, through, pieces);
        m->n_members += pieces;
    }
}

void sct_reader_pieces(const sct_reader *r, int number, int *first, int *n)
{
    const sct_model *m = r->model;
    const bool is_member = number < m->n_members;
    *first = is_member ? number : m->runs[number - m->n_members].first;
    *n = is_member ? 1 : m->runs[number - m->n_members].n;
}

double sct_reader_length(const sct_reader *r, int member)
{
    const sct_member *m = &r->model->members[member];
    if (m->from < 0 || m->to < 0 || r->joint_is_wrong[m->from] || r->joint_is_wrong[m->to]) return 0;
    return sct_joint_distance(r->model, m->from, m->to);
}

/* What acts on a model: load cases, and their combinations. */
#include <math.h>
#include <string.h>

#include "axes.h"
#include "reader.h"

/* ---- load cases
 * ------------------------------------------------------------------------------------------------------ */

/* The number of entries of an optional object, and whether it is one. */
static bool open_object(sct_reader *r, const sct_node *node, const char *expected, int *n)
{
    *n = 0;
    if (!sct_fields_is(&r->f, node, SCT_OBJECT, expected)) return false;
    *n = sct_node_count(node);
    return true;
}

/* The part of v that n directions held do not span, relative to its length. */
static double part_not_held(const double held[][3], int n, const double v[3])
{
    double basis[3][3], rest[3];
    const double length = hypot(hypot(v[0], v[1]), v[2]);
    if (!(length > 0)) return 0.0;
    for (int i = 0; i < n; i++) {
        const double apart = sct_length_apart(held[i], (const double(*)[3])basis, i, rest);
        for (int k = 0; k < 3; k++) basis[i][k] = rest[k] / apart;
    }
    return sct_length_apart(v, (const double(*)[3])basis, n, rest) / length;
}

bool sct_read_turn(sct_reader *r, const sct_node *node, const sct_range *range, double v[3])
{
    v[0] = v[1] = v[2] = 0.0;
    if (r->f.dimensions == 3) return sct_fields_vector(&r->f, node, range, v);
    return r->f.dimensions == 2 && sct_fields_value(&r->f, node, range, &v[2]);
}

/* "joints" and "moments": forces and moments by joint. */
static void read_joint_loads(sct_reader *r, const sct_node *forces, const sct_node *moments, sct_case *c)
{
    static const sct_range FORCE = {"a force", SCT_FORCE, -1e12, 1e12, 1, 1e8, NULL};
    static const sct_range MOMENT = {"a moment", SCT_MOMENT, -1e12, 1e12, 1, 1e8, NULL};
    int n, n_moments;
    const bool has_forces = open_object(r, forces, "an object of forces, keyed by joint", &n);
    const bool has_moments = open_object(r, moments, "an object of moments, keyed by joint", &n_moments);
    c->loads = sct_fields_array(&r->f, n + n_moments, sizeof *c->loads);
    if (c->loads == NULL) return;
    for (const sct_node *entry = has_forces ? sct_node_first(forces) : NULL; entry != NULL;
         entry = sct_node_next(entry)) {
        sct_joint_load *load = &c->loads[c->n_loads++];
        load->where = sct_fields_where(&r->f, entry);
        sct_fields_key_reference(&r->f, entry, "joint", r->joints, &load->joint);
        sct_fields_vector(&r->f, entry, &FORCE, load->F);
    }
    for (const sct_node *entry = has_moments ? sct_node_first(moments) : NULL; entry != NULL;
         entry = sct_node_next(entry)) {
        sct_joint_load *load = &c->loads[c->n_loads++];
        load->where = sct_fields_where(&r->f, entry);
        sct_fields_key_reference(&r->f, entry, "joint", r->joints, &load->joint);
        sct_read_turn(r, entry, &MOMENT, load->M);
    }
}

/* One entry of "settlements" (is_turn: of "rotations"); it must go along what the joint's supports hold. */
static void read_settlement(sct_reader *r, const sct_node *entry, bool is_turn, sct_settlement *s)
{
    static const sct_range SETTLEMENT = {"a settlement", SCT_DISPLACEMENT, -1e4, 1e4, 1e-5, 1, "5 mm"};
    static const sct_range ROTATION = {"a rotation", SCT_ANGLE, -6.3, 6.3, 0, 0, "2 mrad"};
    static const double TOL_HELD = 1e-6; /* of its length may point away from the held directions, by rounding */
    s->where = sct_fields_where(&r->f, entry);
    const bool known = sct_fields_key_reference(&r->f, entry, "joint", r->joints, &s->joint);
    const bool read =
        is_turn ? sct_read_turn(r, entry, &ROTATION, s->turn) : sct_fields_vector(&r->f, entry, &SETTLEMENT, s->d);
    if (!read || !known || r->joint_is_wrong[s->joint]) return;
    const sct_joint *joint = &r->model->joints[s->joint];
    const double free = is_turn ? part_not_held((const double(*)[3])joint->turns_held, joint->n_turns_held, s->turn)
                                : part_not_held((const double(*)[3])joint->held, joint->n_held, s->d);
    if (free > TOL_HELD)
        sct_fields_error(&r->f, entry, "joint \"%s\" is not held %s; expected one along its supports",
                         sct_show(joint->name).text,
                         is_turn ? "against this rotation" : "in the direction of this settlement");
}

static void read_settlements(sct_reader *r, const sct_node *shifts, const sct_node *turns, sct_case *c)
{
    int n, n_turns;
    const bool has_shifts = open_object(r, shifts, "an object of displacements, keyed by joint", &n);
    const bool has_turns = open_object(r, turns, "an object of rotations, keyed by joint", &n_turns);
    c->settlements = sct_fields_array(&r->f, n + n_turns, sizeof *c->settlements);
    if (c->settlements == NULL) return;
    for (const sct_node *entry = has_shifts ? sct_node_first(shifts) : NULL; entry != NULL;
         entry = sct_node_next(entry))
        read_settlement(r, entry, false, &c->settlements[c->n_settlements++]);
    for (const sct_node *entry = has_turns ? sct_node_first(turns) : NULL; entry != NULL; entry = sct_node_next(entry))
        read_settlement(r, entry, true, &c->settlements[c->n_settlements++]);
}

/* One number in plane, or one for each axis. */
static bool read_gradient(sct_reader *r, const sct_node *node, double gradient[2])
{
    static const sct_range GRADIENT = {"a temperature gradient", SCT_GRADIENT, -1e5, 1e5, 0, 0, NULL};
    static const sct_key AXES[] = {{"in_plane", NULL}, {"out_of_plane", NULL}};
    const sct_node *found[2];
    if (node == NULL) return false;
    if (sct_node_kind_of(node) != SCT_OBJECT) return sct_fields_value(&r->f, node, &GRADIENT, &gradient[0]);
    if (!sct_fields_keys(&r->f, node, "a temperature gradient", AXES, 2, found)) return false;
    const bool first = sct_fields_value(&r->f, found[0], &GRADIENT, &gradient[0]);
    if (found[1] != NULL && r->f.dimensions == 2) {
        sct_fields_key_error(&r->f, found[1], "the members of a plane model bend in plane only; leave it out");
        return false;
    }
    return sct_fields_value(&r->f, found[1], &GRADIENT, &gradient[1]) || first;
}

static void need_expansion(sct_reader *r, const sct_node *node, int member)
{
    const int group = r->model->members[member].group;
    const int material = group < 0 ? -1 : r->model->groups[group].material;
    if (material >= 0 && !r->material_is_wrong[material] && isnan(r->model->materials[material].expansion))
        sct_fields_error(&r->f, node, "material \"%s\" has no \"expansion\"; expected such as \"12e-6 1/K\" there",
                         sct_show(r->model->materials[material].name).text);
}

/* The action on a member, or on every piece of a run: the lack of fit of a run is shared by length. */
static void read_bar_action(sct_reader *r, const sct_node *node, sct_case *c)
{
    static const sct_range TEMPERATURE = {"a temperature difference", SCT_TEMPERATURE, -2000, 2000, 0, 0, NULL};
    static const sct_range LACK = {"a lack of fit", SCT_DISPLACEMENT, -1e4, 1e4, 1e-5, 1, "2 mm"};
    enum { K_TEMPERATURE, K_LACK, K_GRADIENT, N };
    static const sct_key KEYS[N] = {{"temperature", NULL}, {"lack_of_fit", NULL}, {"gradient", NULL}};
    const sct_node *found[N];
    sct_bar_action action = {.where = sct_fields_where(&r->f, node)};
    int number, first = 0, n = 0;
    double length = 0;
    if (sct_fields_key_reference(&r->f, node, "member", r->members, &number)) sct_reader_pieces(r, number, &first, &n);
    if (!sct_fields_keys(&r->f, node, "an action on a member", KEYS, N, found)) return;
    if (found[K_TEMPERATURE] == NULL && found[K_LACK] == NULL && found[K_GRADIENT] == NULL)
        sct_fields_error(&r->f, node,
                         "found neither \"temperature\", \"gradient\" nor \"lack_of_fit\"; expected one of them (loads "
                         "on members stand in \"loads\")");
    sct_fields_value(&r->f, found[K_LACK], &LACK, &action.lack);
    if (sct_fields_value(&r->f, found[K_TEMPERATURE], &TEMPERATURE, &action.dT) && n > 0)
        need_expansion(r, found[K_TEMPERATURE], first);
    if (read_gradient(r, found[K_GRADIENT], action.gradient) && n > 0) need_expansion(r, found[K_GRADIENT], first);
    for (int i = 0; i < n; i++) length += sct_reader_length(r, first + i);
    for (int i = 0; i < n; i++) {
        sct_bar_action *of_piece = &c->bar_actions[c->n_bar_actions++];
        *of_piece = action;
        of_piece->member = first + i;
        if (n > 1) of_piece->lack *= length > 0 ? sct_reader_length(r, first + i) / length : 0;
    }
}

static void read_bar_actions(sct_reader *r, const sct_node *node, sct_case *c)
{
    int n, n_pieces = 0, first, of_entry;
    if (!open_object(r, node, "an object of temperatures and lacks of fit, keyed by member", &n)) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        const int number = sct_names_find(r->members, sct_node_key(entry));
        if (number < 0) continue;
        sct_reader_pieces(r, number, &first, &of_entry);
        n_pieces += of_entry;
        if (!sct_reader_has_room(r, entry, of_entry)) return;
    }
    c->bar_actions = sct_fields_array(&r->f, n_pieces, sizeof *c->bar_actions);
    if (c->bar_actions == NULL) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry))
        read_bar_action(r, entry, c);
}

static void read_self_weight(sct_reader *r, const sct_node *node, double *factor)
{
    static const sct_range FACTOR = {"a factor on the self-weight", -1, 1e-3, 100, 0, 0, NULL};
    if (node == NULL) return;
    switch (sct_node_kind_of(node)) {
    case SCT_TRUE: *factor = 1.0; break;
    case SCT_FALSE: *factor = 0.0; break;
    case SCT_NUMBER: sct_fields_value(&r->f, node, &FACTOR, factor); break;
    default: sct_fields_error(&r->f, node, "found %s; expected true, false or a factor", sct_node_kind_words(node));
    }
}

static bool is_zero(const double v[3])
{
    return !(fabs(v[0]) > 0 || fabs(v[1]) > 0 || fabs(v[2]) > 0);
}

static bool acts(const sct_reader *r, int index)
{
    const sct_case *c = &r->model->cases[index];
    bool any = c->self_weight > 0 || (r->notional[index].node != NULL && r->f.n_errors > 0); /* then none were made */
    for (int i = 0; i < c->n_loads && !any; i++) any = !is_zero(c->loads[i].F) || !is_zero(c->loads[i].M);
    for (int i = 0; i < c->n_settlements && !any; i++)
        any = !is_zero(c->settlements[i].d) || !is_zero(c->settlements[i].turn);
    for (int i = 0; i < c->n_bar_actions && !any; i++) {
        const sct_bar_action *a = &c->bar_actions[i];
        any = fabs(a->dT) > 0 || fabs(a->lack) > 0 || fabs(a->gradient[0]) > 0 || fabs(a->gradient[1]) > 0;
    }
    for (int i = 0; i < c->n_member_loads && !any; i++) {
        const sct_member_load *load = &c->member_loads[i];
        any = !is_zero(load->qa) || !is_zero(load->qb) || !is_zero(load->F) || !is_zero(load->M);
    }
    return any;
}

static void read_case(sct_reader *r, const sct_node *node, sct_case *c)
{
    enum {
        K_ACTION,
        K_SELF_WEIGHT,
        K_JOINTS,
        K_SETTLEMENTS,
        K_MEMBERS,
        K_MOMENTS,
        K_LOADS,
        K_ROTATIONS,
        K_NOTIONAL,
        N
    };
    static const sct_key KEYS[N] = {{"action", NULL},      {"self_weight", NULL}, {"joints", NULL},
                                    {"settlements", NULL}, {"members", NULL},     {"moments", NULL},
                                    {"loads", NULL},       {"rotations", NULL},   {"notional", NULL}};
    static const char *const ACTIONS[] = {"permanent", "imposed", "snow", "wind", "temperature", "other"};
    enum { N_ACTIONS = sizeof ACTIONS / sizeof *ACTIONS };
    const sct_node *found[N];
    int action = N_ACTIONS - 1;
    c->where = sct_fields_where(&r->f, node);
    sct_fields_name(&r->f, node, &c->name);
    c->action = ACTIONS[action];
    if (!sct_fields_keys(&r->f, node, "a load case", KEYS, N, found)) return;
    if (sct_fields_word(&r->f, found[K_ACTION], "an action", ACTIONS, N_ACTIONS, &action)) c->action = ACTIONS[action];
    read_self_weight(r, found[K_SELF_WEIGHT], &c->self_weight);
    read_joint_loads(r, found[K_JOINTS], found[K_MOMENTS], c);
    read_settlements(r, found[K_SETTLEMENTS], found[K_ROTATIONS], c);
    read_bar_actions(r, found[K_MEMBERS], c);
    sct_read_member_loads(r, found[K_LOADS], c);
    if (found[K_NOTIONAL] != NULL) sct_read_notional(r, found[K_NOTIONAL], (int)(c - r->model->cases));
}

void sct_read_cases(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "load case", SCT_MOST_CASES), errors_before = r->f.n_errors;
    m->cases = sct_fields_array(&r->f, n, sizeof *m->cases);
    r->notional = sct_fields_array(&r->f, n, sizeof *r->notional);
    r->cases = sct_reader_names(r, node);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_case(r, c, &m->cases[m->n_cases++]);
    if (r->f.failure == SCT_OK && r->f.n_errors == 0) sct_add_notional_loads(r);
    const bool *is_wrong = r->f.unit_is_wrong; /* then nothing was read that could act */
    if (r->f.failure != SCT_OK || r->f.n_errors > errors_before || is_wrong[SCT_FORCE] || is_wrong[SCT_DISPLACEMENT] ||
        is_wrong[SCT_TEMPERATURE])
        return;
    int n_acting = 0;
    for (int i = 0; i < n; i++) n_acting += acts(r, i);
    if (n_acting == 0) {
        sct_fields_error(&r->f, node, "no case has a load that is not zero; there is nothing to size for");
        return;
    }
    int i = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c))
        if (!acts(r, i++)) sct_fields_remark(&r->f, SCT_WARNING, c, "the case has no load; its results are zero");
}

/* ---- combinations
 * ---------------------------------------------------------------------------------------------------- */

static void read_sum(sct_reader *r, const sct_node *node, sct_combination *combination)
{
    static const sct_range FACTOR = {"a factor on a load case", -1, -1e3, 1e3, 0, 0, NULL};
    int n;
    if (!open_object(r, node, "an object of factors, keyed by load case", &n)) return;
    if (n == 0) sct_fields_error(&r->f, node, "found no load case; expected at least one with its factor");
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        int i;
        double factor;
        const bool known = sct_fields_key_reference(&r->f, entry, "load case", r->cases, &i);
        if (!sct_fields_value(&r->f, entry, &FACTOR, &factor) || !known) continue;
        if (!(fabs(factor) > 0))
            sct_fields_remark(&r->f, SCT_WARNING, entry, "the factor is 0: the case has no part in this combination");
        combination->factor[i] = factor;
    }
}

static void read_combination(sct_reader *r, const sct_node *node, sct_combination *combination)
{
    static const sct_key KEYS[] = {{"for", "\"allowable\" or \"service\""},
                                   {"sum", "the load cases with their factors, such as {\"G\": 1}"}};
    static const char *const BASES[] = {"allowable", "service"};
    const sct_node *found[2];
    int word = 1;
    combination->where = sct_fields_where(&r->f, node);
    combination->factor = sct_fields_array(&r->f, r->model->n_cases, sizeof *combination->factor);
    sct_fields_name(&r->f, node, &combination->name);
    if (combination->factor == NULL || !sct_fields_keys(&r->f, node, "a combination", KEYS, 2, found)) return;
    const char *text = found[0] == NULL ? NULL : sct_node_string(found[0]);
    if (text != NULL && strcmp(text, "strength") == 0)
        sct_fields_error(&r->f, found[0],
                         "found \"strength\", which has factored actions; the allowable stress checks of this "
                         "version work on unfactored ones: expected \"allowable\" or \"service\"");
    else
        sct_fields_word(&r->f, found[0], "what the combination is for", BASES, 2, &word);
    combination->basis = word == 0 ? SCT_ALLOWABLE : SCT_SERVICE;
    read_sum(r, found[1], combination);
}

/* Every case should count somewhere; some combination must be one for strength. */
static void check_combinations(sct_reader *r, const sct_node *node)
{
    const sct_model *m = r->model;
    bool has_allowable = false;
    for (int i = 0; i < m->n_combinations; i++) has_allowable |= m->combinations[i].basis == SCT_ALLOWABLE;
    if (!has_allowable)
        sct_fields_error(&r->f, node, "no combination is for \"allowable\"; expected at least one, for the stresses");
    for (int c = 0; c < m->n_cases; c++) {
        bool is_used = false;
        for (int i = 0; i < m->n_combinations && !is_used; i++) is_used = fabs(m->combinations[i].factor[c]) > 0;
        if (!is_used)
            sct_issue_add(r->f.issues, SCT_WARNING, m->cases[c].where, "the case has no part in any combination");
    }
}

void sct_read_combinations(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "combination", SCT_MOST_CASES), errors_before = r->f.n_errors;
    if (r->f.failure == SCT_OK && (double)n * m->n_cases > SCT_MOST_TABLE) {
        sct_fields_error(&r->f, node, "%d combinations of %d load cases; at most %d factors are kept", n, m->n_cases,
                         SCT_MOST_TABLE);
        r->f.failure = SCT_TOO_LARGE;
    }
    m->combinations = sct_fields_array(&r->f, n, sizeof *m->combinations);
    r->combinations = sct_reader_names(r, node);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_combination(r, c, &m->combinations[m->n_combinations++]);
    if (r->f.failure == SCT_OK && r->f.n_errors == errors_before) check_combinations(r, node);
}

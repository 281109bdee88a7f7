/* What acts on a model and what is asked of it: load cases, combinations, deflection limits. */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/number.h"
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

/* The part of v that the supports of a joint do not hold, relative to its length. */
static double part_not_held(const sct_joint *joint, const double v[3])
{
    double basis[3][3], rest[3] = {v[0], v[1], v[2]};
    const double length = hypot(hypot(v[0], v[1]), v[2]);
    if (!(length > 0)) return 0.0;
    int n = 0;
    for (int i = 0; i < joint->n_held; i++) { /* an orthonormal basis of the directions held: Gram and Schmidt */
        double d[3] = {joint->held[i][0], joint->held[i][1], joint->held[i][2]};
        for (int k = 0; k < n; k++) {
            const double along = d[0] * basis[k][0] + d[1] * basis[k][1] + d[2] * basis[k][2];
            for (int c = 0; c < 3; c++) d[c] -= along * basis[k][c];
        }
        const double norm = sqrt(d[0] * d[0] + d[1] * d[1] + d[2] * d[2]);
        for (int c = 0; c < 3; c++) basis[n][c] = d[c] / norm;
        n++;
    }
    for (int k = 0; k < n; k++) {
        const double along = rest[0] * basis[k][0] + rest[1] * basis[k][1] + rest[2] * basis[k][2];
        for (int c = 0; c < 3; c++) rest[c] -= along * basis[k][c];
    }
    return hypot(hypot(rest[0], rest[1]), rest[2]) / length;
}

static void read_loads(sct_reader *r, const sct_node *node, sct_case *c)
{
    static const sct_range LOAD = {"a force", SCT_FORCE, -1e12, 1e12, 1, 1e8, NULL};
    int n;
    if (!open_object(r, node, "an object of forces, keyed by joint", &n)) return;
    c->loads = sct_fields_array(&r->f, n, sizeof *c->loads);
    if (c->loads == NULL) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        sct_joint_load *load = &c->loads[c->n_loads++];
        load->where = sct_fields_where(&r->f, entry);
        sct_fields_key_reference(&r->f, entry, "joint", r->joints, &load->joint);
        sct_fields_vector(&r->f, entry, &LOAD, load->F);
    }
}

static void read_settlements(sct_reader *r, const sct_node *node, sct_case *c)
{
    static const sct_range SETTLEMENT = {"a settlement", SCT_DISPLACEMENT, -1e4, 1e4, 1e-5, 1, "5 mm"};
    static const double TOL_HELD = 1e-6; /* of its length may point away from the held directions, by rounding */
    int n;
    if (!open_object(r, node, "an object of displacements, keyed by joint", &n)) return;
    c->settlements = sct_fields_array(&r->f, n, sizeof *c->settlements);
    if (c->settlements == NULL) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        sct_settlement *s = &c->settlements[c->n_settlements++];
        s->where = sct_fields_where(&r->f, entry);
        const bool known = sct_fields_key_reference(&r->f, entry, "joint", r->joints, &s->joint);
        if (!sct_fields_vector(&r->f, entry, &SETTLEMENT, s->d) || !known) continue;
        const double free = part_not_held(&r->model->joints[s->joint], s->d);
        if (free > TOL_HELD && !r->joint_is_wrong[s->joint])
            sct_fields_error(&r->f, entry,
                             "joint \"%s\" is not held in the direction of this settlement; expected one along "
                             "its supports",
                             sct_show(r->model->joints[s->joint].name).text);
    }
}

static void read_bar_action(sct_reader *r, const sct_node *node, sct_bar_action *action)
{
    static const sct_range TEMPERATURE = {"a temperature difference", SCT_TEMPERATURE, -2000, 2000, 0, 0, NULL};
    static const sct_range LACK = {"a lack of fit", SCT_DISPLACEMENT, -1e4, 1e4, 1e-5, 1, "2 mm"};
    static const sct_key KEYS[] = {{"temperature", NULL}, {"lack_of_fit", NULL}};
    const sct_node *found[2];
    action->where = sct_fields_where(&r->f, node);
    const bool known = sct_fields_key_reference(&r->f, node, "member", r->members, &action->member);
    if (!sct_fields_keys(&r->f, node, "an action on a member", KEYS, 2, found)) return;
    if (found[0] == NULL && found[1] == NULL)
        sct_fields_error(&r->f, node,
                         "found neither \"temperature\" nor \"lack_of_fit\"; expected one of them (loads act on "
                         "joints)");
    sct_fields_value(&r->f, found[1], &LACK, &action->lack);
    if (!sct_fields_value(&r->f, found[0], &TEMPERATURE, &action->dT) || !known) return;
    const int group = r->model->members[action->member].group;
    const int material = group < 0 ? -1 : r->model->groups[group].material;
    if (material >= 0 && !r->material_is_wrong[material] && isnan(r->model->materials[material].expansion))
        sct_fields_error(&r->f, found[0], "material \"%s\" has no \"expansion\"; expected such as \"12e-6 1/K\" there",
                         sct_show(r->model->materials[material].name).text);
}

static void read_bar_actions(sct_reader *r, const sct_node *node, sct_case *c)
{
    int n;
    if (!open_object(r, node, "an object of temperatures and lacks of fit, keyed by member", &n)) return;
    c->bar_actions = sct_fields_array(&r->f, n, sizeof *c->bar_actions);
    if (c->bar_actions == NULL) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry))
        read_bar_action(r, entry, &c->bar_actions[c->n_bar_actions++]);
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

static bool acts(const sct_case *c)
{
    bool any = c->self_weight > 0;
    for (int i = 0; i < c->n_loads; i++)
        for (int k = 0; k < 3; k++) any |= fabs(c->loads[i].F[k]) > 0;
    for (int i = 0; i < c->n_settlements; i++)
        for (int k = 0; k < 3; k++) any |= fabs(c->settlements[i].d[k]) > 0;
    for (int i = 0; i < c->n_bar_actions; i++)
        any |= fabs(c->bar_actions[i].dT) > 0 || fabs(c->bar_actions[i].lack) > 0;
    return any;
}

static void read_case(sct_reader *r, const sct_node *node, sct_case *c)
{
    enum { K_ACTION, K_SELF_WEIGHT, K_JOINTS, K_SETTLEMENTS, K_MEMBERS, N };
    static const sct_key KEYS[N] = {
        {"action", NULL}, {"self_weight", NULL}, {"joints", NULL}, {"settlements", NULL}, {"members", NULL}};
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
    read_loads(r, found[K_JOINTS], c);
    read_settlements(r, found[K_SETTLEMENTS], c);
    read_bar_actions(r, found[K_MEMBERS], c);
}

void sct_read_cases(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    const int n = sct_reader_count(r, node, "load case", SCT_MOST_CASES), errors_before = r->f.n_errors;
    m->cases = sct_fields_array(&r->f, n, sizeof *m->cases);
    r->cases = sct_reader_names(r, node);
    if (r->f.failure != SCT_OK || n == 0) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_case(r, c, &m->cases[m->n_cases++]);
    const bool *is_wrong = r->f.unit_is_wrong; /* then nothing was read that could act */
    if (r->f.failure != SCT_OK || r->f.n_errors > errors_before || is_wrong[SCT_FORCE] || is_wrong[SCT_DISPLACEMENT] ||
        is_wrong[SCT_TEMPERATURE])
        return;
    int n_acting = 0;
    for (int i = 0; i < n; i++) n_acting += acts(&m->cases[i]);
    if (n_acting == 0) {
        sct_fields_error(&r->f, node, "no case has a load that is not zero; there is nothing to size for");
        return;
    }
    int i = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c))
        if (!acts(&m->cases[i++]))
            sct_fields_remark(&r->f, SCT_WARNING, c, "the case has no load; its results are zero");
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

/* ---- deflection limits
 * ------------------------------------------------------------------------------------------------ */

static void read_limited_joints(sct_reader *r, const sct_node *node, sct_deflection_limit *limit)
{
    const sct_model *m = r->model;
    if (node == NULL) return;
    const char *text = sct_node_string(node);
    const bool all = text != NULL && strcmp(text, "all") == 0;
    if (!all && sct_node_kind_of(node) != SCT_ARRAY) {
        sct_fields_error(&r->f, node, "found %s%s%s; expected \"all\" or an array with the names of joints",
                         text != NULL ? "\"" : "", text != NULL ? sct_show(text).text : sct_node_kind_words(node),
                         text != NULL ? "\"" : "");
        return;
    }
    limit->joints = sct_fields_array(&r->f, all ? m->n_joints : sct_node_count(node), sizeof *limit->joints);
    bool *is_taken = all ? NULL : sct_fields_array(&r->f, m->n_joints, sizeof *is_taken);
    if (r->f.failure != SCT_OK) return;
    for (int j = 0; all && j < m->n_joints; j++)
        if (m->joints[j].n_held < m->dimensions) limit->joints[limit->n_joints++] = j;
    for (const sct_node *c = all ? NULL : sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        int j;
        if (!sct_fields_reference(&r->f, c, "joint", r->joints, &j)) continue;
        if (is_taken[j])
            sct_fields_error(&r->f, c, "joint \"%s\" stands in this list already", sct_show(m->joints[j].name).text);
        else
            limit->joints[limit->n_joints++] = j;
        is_taken[j] = true;
    }
    if (!all && sct_node_count(node) == 0) sct_fields_error(&r->f, node, "found no joint; expected at least one");
    if (all && limit->n_joints == 0 && m->n_joints > 0 && r->f.dimensions > 0)
        sct_fields_error(&r->f, node, "found no joint that can move; expected at least one");
}

/* The span: the distance of two joints, or a length. */
static bool read_span(sct_reader *r, const sct_node *node, double *span)
{
    static const sct_range SPAN = {"a span", SCT_LENGTH, 1e-6, 1e6, 0.1, 1e3, NULL};
    if (node == NULL || sct_node_kind_of(node) != SCT_ARRAY) return sct_fields_value(&r->f, node, &SPAN, span);
    if (sct_node_count(node) != 2) {
        sct_fields_error(&r->f, node, "expected the names of two joints; found %d", sct_node_count(node));
        return false;
    }
    const sct_node *first = sct_node_first(node);
    int a, b;
    const bool has_a = sct_fields_reference(&r->f, first, "joint", r->joints, &a);
    if (!sct_fields_reference(&r->f, sct_node_next(first), "joint", r->joints, &b) || !has_a) return false;
    const double *p = r->model->joints[a].at, *q = r->model->joints[b].at;
    *span = hypot(hypot(p[0] - q[0], p[1] - q[1]), p[2] - q[2]);
    if (*span > 0) return true;
    if (r->joint_is_wrong[a] || r->joint_is_wrong[b]) return false;
    sct_fields_error(&r->f, node, "the two joints stand at one place; expected the ends of a span");
    return false;
}

/* "L/300" as a fraction of the span. */
static void read_span_fraction(sct_reader *r, const sct_node *node, const sct_node *at_most, const sct_node *span,
                               sct_deflection_limit *limit)
{
    const char *text = sct_node_string(at_most);
    double n, L;
    limit->label = sct_fields_copy(&r->f, text);
    if (!sct_number_read(text + 2, strlen(text + 2), &n) || !(n >= 1 && n <= 1e5)) {
        sct_fields_error(&r->f, at_most,
                         "found \"%s\"; expected a fraction of the span from L/1 to L/100000, such as \"L/300\"",
                         sct_show(text).text);
        return;
    }
    if (span == NULL) {
        sct_fields_error(&r->f, node,
                         "no \"span\"; \"%s\" needs it: expected two joints such as [\"L0\", \"L8\"], or a length",
                         sct_show(text).text);
        return;
    }
    if (read_span(r, span, &L)) limit->at_most = L / n;
}

static void read_at_most(sct_reader *r, const sct_node *node, const sct_node *at_most, const sct_node *span,
                         sct_deflection_limit *limit)
{
    static const sct_range AT_MOST = {"a displacement", SCT_DISPLACEMENT, 1e-9, 1e4, 1e-5, 1, "20 mm"};
    if (at_most == NULL) return;
    const char *text = sct_node_string(at_most);
    if (text != NULL && strncmp(text, "L/", 2) == 0) {
        read_span_fraction(r, node, at_most, span, limit);
        return;
    }
    if (text != NULL && strchr(text, '/') != NULL) {
        sct_fields_error(&r->f, at_most,
                         "found \"%s\"; expected a displacement, or a fraction of the span such as \"L/300\"",
                         sct_show(text).text);
        return;
    }
    if (!sct_fields_value(&r->f, at_most, &AT_MOST, &limit->at_most)) return;
    if (span != NULL)
        sct_fields_key_error(&r->f, span, "\"span\" goes with a limit such as \"L/300\" only; leave it out");
    if (text == NULL) { /* a bare number: with its unit */
        char number[SCT_NUMBER_ROOM], words[SCT_NUMBER_ROOM + 16];
        sct_number_write(sct_node_number(at_most), number);
        snprintf(words, sizeof words, "%s %s", number, r->f.unit[SCT_DISPLACEMENT]->name);
        limit->label = sct_fields_copy(&r->f, words);
    } else {
        limit->label = sct_fields_copy(&r->f, text);
    }
}

/* The combinations in which a limit holds: all, those for one basis, or some by name. */
static void read_limited_combinations(sct_reader *r, const sct_node *node, sct_deflection_limit *limit)
{
    static const char *const BASES[] = {"allowable", "service"};
    const sct_model *m = r->model;
    limit->in = sct_fields_array(&r->f, m->n_combinations, sizeof *limit->in);
    if (limit->in == NULL) return;
    if (node == NULL) {
        for (int i = 0; i < m->n_combinations; i++) limit->in[i] = true;
        return;
    }
    if (sct_node_kind_of(node) == SCT_STRING) {
        int word, n = 0;
        if (!sct_fields_word(&r->f, node, "a kind of combination", BASES, 2, &word)) return;
        const sct_basis basis = word == 0 ? SCT_ALLOWABLE : SCT_SERVICE;
        for (int i = 0; i < m->n_combinations; i++) n += limit->in[i] = m->combinations[i].basis == basis;
        if (n == 0 && r->f.n_errors == 0) /* a combination may have lost its kind to an error */
            sct_fields_error(&r->f, node, "no combination is for \"%s\"; expected one, or the limit never holds",
                             BASES[word]);
        return;
    }
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "\"allowable\", \"service\" or an array with the names of combinations"))
        return;
    if (sct_node_count(node) == 0) sct_fields_error(&r->f, node, "found no combination; expected at least one");
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        int i;
        if (!sct_fields_reference(&r->f, c, "combination", r->combinations, &i)) continue;
        if (limit->in[i])
            sct_fields_error(&r->f, c, "combination \"%s\" stands in this list already",
                             sct_show(m->combinations[i].name).text);
        limit->in[i] = true;
    }
}

static void read_deflection(sct_reader *r, const sct_node *node, sct_deflection_limit *limit)
{
    enum { K_JOINTS, K_DIRECTION, K_AT_MOST, K_SPAN, K_IN, N };
    static const sct_key KEYS[N] = {{"joints", "\"all\" or an array with the names of joints"},
                                    {"direction", "\"x\", \"y\", \"z\" or a vector"},
                                    {"at_most", "a displacement such as \"20 mm\", or a fraction such as \"L/300\""},
                                    {"span", NULL},
                                    {"in", NULL}};
    const sct_node *found[N];
    limit->where = sct_fields_where(&r->f, node);
    if (!sct_fields_keys(&r->f, node, "a deflection limit", KEYS, N, found)) return;
    read_limited_joints(r, found[K_JOINTS], limit);
    sct_fields_direction(&r->f, found[K_DIRECTION], limit->direction, &limit->direction_label);
    read_at_most(r, node, found[K_AT_MOST], found[K_SPAN], limit);
    read_limited_combinations(r, found[K_IN], limit);
}

void sct_read_deflections(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array of deflection limits")) return;
    const int n = sct_node_count(node);
    if ((double)n * (m->n_joints + m->n_combinations) > SCT_MOST_TABLE) {
        sct_fields_error(&r->f, node, "%d deflection limits on up to %d joints; at most %d pairs are kept", n,
                         m->n_joints, SCT_MOST_TABLE);
        r->f.failure = SCT_TOO_LARGE;
        return;
    }
    m->deflections = sct_fields_array(&r->f, n, sizeof *m->deflections);
    if (m->deflections == NULL) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_deflection(r, c, &m->deflections[m->n_deflections++]);
}

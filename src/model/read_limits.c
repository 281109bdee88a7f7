/* What is asked of the whole: limits on the movement of joints, and more. */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "axes.h"
#include "base/number.h"
#include "reader.h"

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

/* How far: a displacement, or one n-th of a length. */
typedef struct sct_reach {
    double at_most;    /* [m]; NAN: a part */
    double n;          /* 300 of "L/300"; NAN: at_most holds */
    const char *label; /* as written */
} sct_reach;

/* "L/300": the letter, and what it stands for. */
typedef struct part_words {
    char letter;
    const char *whole;
} part_words;

static bool read_reach(sct_reader *r, const sct_node *node, part_words words, sct_reach *reach)
{
    static const sct_range AT_MOST = {"a displacement", SCT_DISPLACEMENT, 1e-9, 1e4, 1e-5, 1, "20 mm"};
    *reach = (sct_reach){(double)NAN, (double)NAN, ""};
    if (node == NULL) return false;
    const char *text = sct_node_string(node);
    if (text != NULL && text[0] == words.letter && text[1] == '/') {
        reach->label = sct_fields_copy(&r->f, text);
        if (sct_number_read(text + 2, strlen(text + 2), &reach->n) && reach->n >= 1 && reach->n <= 1e5) return true;
        sct_fields_error(&r->f, node,
                         "found \"%s\"; expected a fraction of %s from %c/1 to %c/100000, such as \"%c/300\"",
                         sct_show(text).text, words.whole, words.letter, words.letter, words.letter);
        return false;
    }
    if (text != NULL && strchr(text, '/') != NULL) {
        sct_fields_error(&r->f, node, "found \"%s\"; expected a displacement, or a fraction of %s such as \"%c/300\"",
                         sct_show(text).text, words.whole, words.letter);
        return false;
    }
    if (!sct_fields_value(&r->f, node, &AT_MOST, &reach->at_most)) return false;
    if (text == NULL) { /* a bare number: with its unit */
        char number[SCT_NUMBER_ROOM], shown[SCT_NUMBER_ROOM + 16];
        sct_number_write(sct_node_number(node), number);
        snprintf(shown, sizeof shown, "%s %s", number, r->f.unit[SCT_DISPLACEMENT]->name);
        reach->label = sct_fields_copy(&r->f, shown);
    } else {
        reach->label = sct_fields_copy(&r->f, text);
    }
    return true;
}

/* The limit of a deflection, which may be a part of a span. `node`: the whole entry. */
static void read_at_most(sct_reader *r, const sct_node *node, const sct_node *at_most, const sct_node *span,
                         sct_deflection_limit *limit)
{
    sct_reach far;
    double L;
    if (!read_reach(r, at_most, (part_words){'L', "the span"}, &far)) return;
    limit->label = far.label;
    limit->at_most = far.at_most;
    if (isnan(far.n) && span != NULL) {
        sct_fields_key_error(&r->f, span, "\"span\" goes with a limit such as \"L/300\" only; leave it out");
    } else if (!isnan(far.n) && span == NULL) {
        sct_fields_error(&r->f, node,
                         "no \"span\"; \"%s\" needs it: expected two joints such as [\"L0\", \"L8\"], or a length",
                         sct_show(far.label).text);
    } else if (!isnan(far.n) && read_span(r, span, &L)) {
        limit->at_most = L / far.n;
    }
}

/* The combinations in which a limit holds: all, those for one basis, or some by name. */
static void read_limited_combinations(sct_reader *r, const sct_node *node, bool **in)
{
    static const char *const BASES[] = {"allowable", "service"};
    const sct_model *m = r->model;
    bool *holds = *in = sct_fields_array(&r->f, m->n_combinations, sizeof *holds);
    if (holds == NULL) return;
    if (node == NULL) {
        for (int i = 0; i < m->n_combinations; i++) holds[i] = true;
        return;
    }
    if (sct_node_kind_of(node) == SCT_STRING) {
        int word, n = 0;
        if (!sct_fields_word(&r->f, node, "a kind of combination", BASES, 2, &word)) return;
        const sct_basis basis = word == 0 ? SCT_ALLOWABLE : SCT_SERVICE;
        for (int i = 0; i < m->n_combinations; i++) n += holds[i] = m->combinations[i].basis == basis;
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
        if (holds[i])
            sct_fields_error(&r->f, c, "combination \"%s\" stands in this list already",
                             sct_show(m->combinations[i].name).text);
        holds[i] = true;
    }
}

/* The distance of two joints; 0 where it is not known, as one is wrong. */
static double distance(const sct_reader *r, int a, int b)
{
    return a < 0 || b < 0 || r->joint_is_wrong[a] || r->joint_is_wrong[b] ? 0.0 : sct_joint_distance(r->model, a, b);
}

/* Movements relative to one joint. */
static void read_relative_to(sct_reader *r, const sct_node *node, const sct_node *joints, sct_deflection_limit *limit)
{
    int reference, n = 0;
    if (!sct_fields_reference(&r->f, node, "joint", r->joints, &reference)) return;
    limit->from = sct_fields_array(&r->f, limit->n_joints, sizeof *limit->from);
    if (limit->from == NULL) return;
    for (int i = 0; i < limit->n_joints; i++) {
        limit->from[n] = reference;
        if (limit->joints[i] != reference) limit->joints[n++] = limit->joints[i];
    }
    if (n < limit->n_joints && (n == 0 || sct_node_kind_of(joints) == SCT_ARRAY))
        sct_fields_error(&r->f, node, "joint \"%s\" is among \"joints\"; it never moves relative to itself",
                         sct_show(sct_node_string(node)).text);
    limit->n_joints = n;
}

/* Pairs of joints: the movement of the first relative to the second. */
static void read_between(sct_reader *r, const sct_node *node, sct_deflection_limit *limit)
{
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array of pairs of joints, such as [[\"A1\", \"A0\"]]")) return;
    const int n = sct_node_count(node);
    if (n == 0) sct_fields_error(&r->f, node, "found no pair of joints; expected at least one");
    limit->joints = sct_fields_array(&r->f, n, sizeof *limit->joints);
    limit->from = sct_fields_array(&r->f, n, sizeof *limit->from);
    if (r->f.failure != SCT_OK) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        int a, b;
        if (!sct_fields_is(&r->f, c, SCT_ARRAY, "a pair of joints")) continue;
        if (sct_node_count(c) != 2) {
            sct_fields_error(&r->f, c, "expected the names of two joints; found %d", sct_node_count(c));
            continue;
        }
        const bool has_a = sct_fields_reference(&r->f, sct_node_first(c), "joint", r->joints, &a);
        if (!sct_fields_reference(&r->f, sct_node_next(sct_node_first(c)), "joint", r->joints, &b) || !has_a) continue;
        if (a == b)
            sct_fields_error(&r->f, c, "joint \"%s\" stands here twice; expected two joints",
                             sct_show(r->model->joints[a].name).text);
        limit->joints[limit->n_joints] = a;
        limit->from[limit->n_joints++] = b;
    }
}

static void read_deflection(sct_reader *r, const sct_node *node, sct_deflection_limit *limit)
{
    enum { K_JOINTS, K_DIRECTION, K_AT_MOST, K_SPAN, K_IN, K_RELATIVE_TO, K_BETWEEN, N };
    static const sct_key KEYS[N] = {{"joints", "\"all\" or an array with the names of joints"},
                                    {"direction", "\"x\", \"y\", \"z\" or a vector"},
                                    {"at_most", "a displacement such as \"20 mm\", or a fraction such as \"L/300\""},
                                    {"span", NULL},
                                    {"in", NULL},
                                    {"relative_to", NULL},
                                    {"between", NULL}};
    static const int BESIDE[] = {K_JOINTS, K_RELATIVE_TO};
    const sct_node *found[N];
    sct_key keys[N];
    memcpy(keys, KEYS, sizeof keys);
    if (sct_node_find(node, KEYS[K_BETWEEN].name) != NULL) keys[K_JOINTS].required = NULL;
    limit->where = sct_fields_where(&r->f, node);
    if (!sct_fields_keys(&r->f, node, "a deflection limit", keys, N, found)) return;
    for (int i = 0; i < 2; i++)
        if (found[K_BETWEEN] != NULL && found[BESIDE[i]] != NULL)
            sct_fields_key_error(&r->f, found[BESIDE[i]],
                                 "\"%s\" stands beside \"between\", which names all joints; "
                                 "leave one out",
                                 KEYS[BESIDE[i]].name);
    if (found[K_BETWEEN] != NULL)
        read_between(r, found[K_BETWEEN], limit);
    else
        read_limited_joints(r, found[K_JOINTS], limit);
    if (found[K_RELATIVE_TO] != NULL && found[K_BETWEEN] == NULL && found[K_JOINTS] != NULL)
        read_relative_to(r, found[K_RELATIVE_TO], found[K_JOINTS], limit);
    sct_fields_direction(&r->f, found[K_DIRECTION], limit->direction, &limit->direction_label);
    read_at_most(r, node, found[K_AT_MOST], found[K_SPAN], limit);
    read_limited_combinations(r, found[K_IN], &limit->in);
}

/* ---- drift: one deflection limit for each storey --------------------------------------------------------------------
 */

/* The storeys between the joints of `along`, all with what was read into `like`. */
static void add_storeys(sct_reader *r, const sct_node *along, const sct_reach *reach, const sct_deflection_limit *like)
{
    sct_model *m = r->model;
    int lower = -1;
    for (const sct_node *c = sct_node_first(along); c != NULL; c = sct_node_next(c)) {
        int upper = -1;
        const bool known = sct_fields_reference(&r->f, c, "joint", r->joints, &upper);
        const double h = distance(r, lower, upper);
        if (known && upper == lower)
            sct_fields_error(&r->f, c, "joint \"%s\" stands here twice in a row; expected the next joint",
                             sct_show(sct_node_string(c)).text);
        else if (known && lower >= 0 && !(h > 0) && !r->joint_is_wrong[lower] && !r->joint_is_wrong[upper])
            sct_fields_error(&r->f, c,
                             "stands at the place of the joint before it; expected joints one above the other");
        if (known && lower >= 0) {
            sct_deflection_limit *limit = &m->deflections[m->n_deflections++];
            int *pair = sct_fields_array(&r->f, 2, sizeof *pair);
            if (pair == NULL) return;
            pair[0] = upper;
            pair[1] = lower;
            *limit = *like;
            limit->n_joints = 1;
            limit->joints = &pair[0];
            limit->from = &pair[1];
            limit->at_most = isnan(reach->n) ? reach->at_most : h / reach->n;
            limit->label = reach->label;
        }
        lower = upper;
    }
}

static void read_drift(sct_reader *r, const sct_node *node)
{
    enum { K_ALONG, K_DIRECTION, K_AT_MOST, K_IN, N };
    static const sct_key KEYS[N] = {{"along", "an array with the names of joints, from the bottom up"},
                                    {"direction", "\"x\", \"y\", \"z\" or a vector"},
                                    {"at_most", "a displacement such as \"20 mm\", or a fraction such as \"h/300\""},
                                    {"in", NULL}};
    const sct_node *found[N];
    sct_deflection_limit like = {.where = sct_fields_where(&r->f, node)};
    sct_reach far;
    if (!sct_fields_keys(&r->f, node, "a drift limit", KEYS, N, found)) return;
    sct_fields_direction(&r->f, found[K_DIRECTION], like.direction, &like.direction_label);
    const bool has_reach = read_reach(r, found[K_AT_MOST], (part_words){'h', "the height of a storey"}, &far);
    read_limited_combinations(r, found[K_IN], &like.in);
    if (!sct_fields_is(&r->f, found[K_ALONG], SCT_ARRAY, KEYS[K_ALONG].required)) return;
    if (sct_node_count(found[K_ALONG]) < 2)
        sct_fields_error(&r->f, found[K_ALONG], "found %d joint%s; expected at least two, from the bottom up",
                         sct_node_count(found[K_ALONG]), sct_node_count(found[K_ALONG]) == 1 ? "" : "s");
    if (has_reach && r->f.failure == SCT_OK) add_storeys(r, found[K_ALONG], &far, &like);
}

static void read_deflections(sct_reader *r, const sct_node *deflection, const sct_node *drift)
{
    sct_model *m = r->model;
    const bool has_deflection = sct_fields_is(&r->f, deflection, SCT_ARRAY, "an array of deflection limits");
    const bool has_drift = sct_fields_is(&r->f, drift, SCT_ARRAY, "an array of drift limits");
    const int n = has_deflection ? sct_node_count(deflection) : 0;
    long long n_storeys = 0;
    for (const sct_node *c = has_drift ? sct_node_first(drift) : NULL; c != NULL; c = sct_node_next(c)) {
        const sct_node *along = sct_node_find(c, "along");
        n_storeys += along != NULL ? sct_node_count(along) : 0;
    }
    if ((double)n * (m->n_joints + m->n_combinations) > SCT_MOST_TABLE) {
        sct_fields_error(&r->f, deflection, "%d deflection limits on up to %d joints; at most %d pairs are kept", n,
                         m->n_joints, SCT_MOST_TABLE);
        r->f.failure = SCT_TOO_LARGE;
        return;
    }
    if (has_drift && (double)sct_node_count(drift) * m->n_combinations + (double)n_storeys > SCT_MOST_TABLE) {
        sct_fields_error(&r->f, drift, "%d drift limits in up to %d combinations; at most %d pairs are kept",
                         sct_node_count(drift), m->n_combinations, SCT_MOST_TABLE);
        r->f.failure = SCT_TOO_LARGE;
        return;
    }
    m->deflections = sct_fields_array(&r->f, n + (int)n_storeys, sizeof *m->deflections);
    if (m->deflections == NULL) return;
    for (const sct_node *c = n > 0 ? sct_node_first(deflection) : NULL; c != NULL && r->f.failure == SCT_OK;
         c = sct_node_next(c))
        read_deflection(r, c, &m->deflections[m->n_deflections++]);
    for (const sct_node *c = has_drift ? sct_node_first(drift) : NULL; c != NULL && r->f.failure == SCT_OK;
         c = sct_node_next(c))
        read_drift(r, c);
}

/* ---- bow ------------------------------------------------------------------------------------------------------------
 */

/* The members and runs of a limit, each once. */
static void read_bowed(sct_reader *r, const sct_node *node, sct_bow_limit *limit)
{
    const sct_model *m = r->model;
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array with the names of members and runs")) return;
    const int n = sct_node_count(node);
    if (n == 0) sct_fields_error(&r->f, node, "found no member; expected at least one");
    limit->members = sct_fields_array(&r->f, n, sizeof *limit->members);
    limit->runs = sct_fields_array(&r->f, n, sizeof *limit->runs);
    bool *is_taken = sct_fields_array(&r->f, m->n_members + m->n_runs, sizeof *is_taken);
    if (r->f.failure != SCT_OK) return;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        int number;
        if (!sct_fields_reference(&r->f, c, "member", r->members, &number)) continue;
        if (is_taken[number])
            sct_fields_error(&r->f, c, "\"%s\" stands in this list already", sct_show(sct_node_string(c)).text);
        else if (number < m->n_members)
            limit->members[limit->n_members++] = number;
        else
            limit->runs[limit->n_runs++] = number - m->n_members;
        is_taken[number] = true;
    }
}

static void read_bow(sct_reader *r, const sct_node *node, sct_bow_limit *limit)
{
    enum { K_MEMBERS, K_AXIS, K_AT_MOST, K_IN, N };
    static const sct_key KEYS[N] = {{"members", "an array with the names of members and runs"},
                                    {"axis", NULL},
                                    {"at_most", "a displacement such as \"20 mm\", or a fraction such as \"L/300\""},
                                    {"in", NULL}};
    static const char *const AXES[] = {[SCT_IN_PLANE] = "in_plane", [SCT_OUT_OF_PLANE] = "out_of_plane"};
    const sct_node *found[N];
    sct_reach far;
    *limit = (sct_bow_limit){.where = sct_fields_where(&r->f, node), .axis = SCT_IN_PLANE};
    if (!sct_fields_keys(&r->f, node, "a limit of bow", KEYS, N, found)) return;
    read_bowed(r, found[K_MEMBERS], limit);
    if (found[K_AXIS] != NULL && sct_fields_word(&r->f, found[K_AXIS], "an axis of bending", AXES, 2, &limit->axis) &&
        limit->axis == SCT_OUT_OF_PLANE && r->f.dimensions == 2)
        sct_fields_error(&r->f, found[K_AXIS], "the members of a plane model bow in plane only; leave \"axis\" out");
    if (read_reach(r, found[K_AT_MOST], (part_words){'L', "the length"}, &far)) {
        limit->at_most = far.at_most;
        limit->part = 1 / far.n;
        limit->label = far.label;
    }
    read_limited_combinations(r, found[K_IN], &limit->in);
}

static void read_bows(sct_reader *r, const sct_node *node)
{
    sct_model *m = r->model;
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array of limits of bow")) return;
    const int n = sct_node_count(node);
    if ((double)n * ((double)m->n_members + m->n_runs + m->n_combinations) > SCT_MOST_TABLE) {
        sct_fields_error(&r->f, node, "%d limits of bow on up to %d members; at most %d pairs are kept", n,
                         m->n_members, SCT_MOST_TABLE);
        r->f.failure = SCT_TOO_LARGE;
        return;
    }
    m->bows = sct_fields_array(&r->f, n, sizeof *m->bows);
    if (m->bows == NULL) return;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_bow(r, c, &m->bows[m->n_bows++]);
}

/* ---- the whole ------------------------------------------------------------------------------------------------------
 */

static void read_frequency(sct_reader *r, const sct_node *node)
{
    static const sct_range FREQUENCY = {"a frequency", SCT_FREQUENCY, 1e-3, 1e4, 0.1, 100, NULL};
    static const sct_range PART = {"a part of the loads of a case", -1, 0, 10, 0, 0, NULL};
    static const sct_key KEYS[] = {{"at_least", "a frequency such as \"3 Hz\""}, {"mass", NULL}};
    sct_model *m = r->model;
    const sct_node *found[2];
    if (!sct_fields_keys(&r->f, node, "a limit of the frequency", KEYS, 2, found)) return;
    sct_fields_value(&r->f, found[0], &FREQUENCY, &m->least_frequency);
    if (!sct_fields_is(&r->f, found[1], SCT_OBJECT, "an object of parts, keyed by load case")) return;
    m->mass_factor = sct_fields_array(&r->f, m->n_cases, sizeof *m->mass_factor);
    if (m->mass_factor == NULL) return;
    for (const sct_node *entry = sct_node_first(found[1]); entry != NULL; entry = sct_node_next(entry)) {
        int c;
        double part;
        const bool known = sct_fields_key_reference(&r->f, entry, "load case", r->cases, &c);
        if (sct_fields_value(&r->f, entry, &PART, &part) && known) m->mass_factor[c] = part;
    }
}

static void read_critical_factor(sct_reader *r, const sct_node *node)
{
    static const sct_range FACTOR = {"a critical load factor", -1, 1, 1e4, 0, 0, NULL};
    static const sct_key KEYS[] = {{"at_least", "a factor such as 10"}};
    const sct_node *found[1];
    if (sct_fields_keys(&r->f, node, "a limit of the critical load factor", KEYS, 1, found))
        sct_fields_value(&r->f, found[0], &FACTOR, &r->model->least_factor);
}

static void read_amplify_sway(sct_reader *r, const sct_node *node)
{
    if (node == NULL) return;
    const sct_node_kind kind = sct_node_kind_of(node);
    if (kind != SCT_TRUE && kind != SCT_FALSE)
        sct_fields_error(&r->f, node, "found %s; expected true or false", sct_node_kind_words(node));
    r->model->amplifies = kind == SCT_TRUE;
}

void sct_read_limits(sct_reader *r, const sct_node *const limit[SCT_LIMITS])
{
    read_deflections(r, limit[SCT_LIMITS_DEFLECTION], limit[SCT_LIMITS_DRIFT]);
    if (r->f.failure == SCT_OK) read_bows(r, limit[SCT_LIMITS_BOW]);
    if (r->f.failure != SCT_OK) return;
    read_critical_factor(r, limit[SCT_LIMITS_CRITICAL_FACTOR]);
    read_amplify_sway(r, limit[SCT_LIMITS_AMPLIFY_SWAY]);
    read_frequency(r, limit[SCT_LIMITS_FREQUENCY]);
}

/* Loads on members between their joints, and notional loads that are made of other loads. */
#include <math.h>
#include <string.h>

#include "axes.h"
#include "base/number.h"
#include "reader.h"

/* ---- where on a member ----------------------------------------------------------------------------------------------
 */

/* A distance from the start of a member or run: a length, or a part of L. */
typedef struct station {
    const sct_node *node; /* NULL: not given */
    double s;
    bool is_part;
} station;

static bool read_station(sct_reader *r, const sct_node *node, station *at)
{
    static const sct_range DISTANCE = {"a distance along the member", SCT_LENGTH, 0, 1e5, 1e-2, 1e3, "2 m"};
    if (node == NULL) return true;
    const char *text = sct_node_string(node);
    const size_t length = text == NULL ? 0 : strlen(text);
    at->node = node;
    at->is_part = length > 2 && strcmp(text + length - 2, " L") == 0;
    if (!at->is_part) return sct_fields_value(&r->f, node, &DISTANCE, &at->s);
    if (sct_number_read(text, length - 2, &at->s) && at->s >= 0 && at->s <= 1) return true;
    sct_fields_error(&r->f, node, "found \"%s\"; expected a part of the length from \"0 L\" to \"1 L\", or a distance",
                     sct_show(text).text);
    return false;
}

/* The distance on a member or run of length L; false: it lies beyond the end. */
static bool station_at(sct_reader *r, const station *at, double otherwise, double L, const char *name, double *s)
{
    static const double ROUNDED = 1e-9; /* of the length may be beyond its end */
    *s = at->node == NULL ? otherwise : at->is_part ? at->s * L : at->s;
    if (*s > L * (1 + ROUNDED)) {
        const sct_unit *unit = r->f.unit[SCT_LENGTH];
        sct_fields_error(&r->f, at->node, "found %.10g %s; expected a distance on \"%s\", which is %.10g %s long",
                         sct_unit_from_SI(unit, *s), unit->name, sct_show(name).text, sct_unit_from_SI(unit, L),
                         unit->name);
        return false;
    }
    *s = fmin(*s, L);
    return true;
}

/* ---- what a load says -----------------------------------------------------------------------------------------------
 */

typedef struct load_words {
    sct_member_load load; /* qa, qb at `from`, `to`; member, a, b are not set */
    station from, to;     /* a point load: from */
} load_words;

enum { K_ON, K_LINE, K_FROM, K_TO, K_AT, K_FORCE, K_MOMENT, K_AXES, N_KEYS };
static const sct_key KEYS[N_KEYS] = {{"on", "the name of a member or run, or a list of names"},
                                     {"line", NULL},
                                     {"from", NULL},
                                     {"to", NULL},
                                     {"at", NULL},
                                     {"force", NULL},
                                     {"moment", NULL},
                                     {"axes", NULL}};

static int count_components(const double v[3])
{
    return (fabs(v[0]) > 0) + (fabs(v[1]) > 0) + (fabs(v[2]) > 0);
}

/* One vector, or two: at the start and at the end. */
static bool read_line(sct_reader *r, const sct_node *node, sct_member_load *load)
{
    static const sct_range LINE = {"a force per length", SCT_FORCE_PER_LENGTH, -1e12, 1e12, 1, 1e7, NULL};
    const sct_node *first = sct_node_kind_of(node) == SCT_ARRAY ? sct_node_first(node) : NULL;
    if (first == NULL || sct_node_kind_of(first) != SCT_ARRAY) {
        const bool read = sct_fields_vector(&r->f, node, &LINE, load->qa);
        memcpy(load->qb, load->qa, sizeof load->qb);
        return read;
    }
    if (sct_node_count(node) != 2) {
        sct_fields_error(&r->f, node, "found %d vectors; expected two, at the start and at the end of the load",
                         sct_node_count(node));
        return false;
    }
    const bool has_a = sct_fields_vector(&r->f, first, &LINE, load->qa);
    return sct_fields_vector(&r->f, sct_node_next(first), &LINE, load->qb) && has_a;
}

static bool read_point(sct_reader *r, const sct_node *const found[], sct_member_load *load)
{
    static const sct_range FORCE = {"a force", SCT_FORCE, -1e12, 1e12, 1, 1e8, NULL};
    static const sct_range MOMENT = {"a moment", SCT_MOMENT, -1e12, 1e12, 1, 1e8, NULL};
    load->is_point = true;
    const bool has_force = found[K_FORCE] == NULL || sct_fields_vector(&r->f, found[K_FORCE], &FORCE, load->F);
    return (found[K_MOMENT] == NULL || sct_read_turn(r, found[K_MOMENT], &MOMENT, load->M)) && has_force;
}

static bool read_axes(sct_reader *r, const sct_node *node, sct_member_load *load)
{
    static const char *const AXES[] = {
        [SCT_AXES_MODEL] = "model", [SCT_AXES_MEMBER] = "member", [SCT_AXES_PROJECTED] = "projected"};
    int axes = SCT_AXES_MODEL;
    if (node == NULL) return true;
    if (!sct_fields_word(&r->f, node, "the axes of the load", AXES, 3, &axes)) return false;
    load->axes = (sct_load_axes)axes;
    if (load->axes != SCT_AXES_PROJECTED) return true;
    if (load->is_point) {
        sct_fields_error(&r->f, node, "a load at one point has no projection; expected \"model\" or \"member\"");
        return false;
    }
    const double both[3] = {fabs(load->qa[0]) + fabs(load->qb[0]), fabs(load->qa[1]) + fabs(load->qb[1]),
                            fabs(load->qa[2]) + fabs(load->qb[2])};
    if (count_components(both) < 2) return true;
    sct_fields_error(&r->f, node,
                     "a projected load has one component, as each has a projection of its own; expected one load for "
                     "each direction");
    return false;
}

/* Either "line" with "from" and "to", or "at" with "force" and "moment"; false: told. */
static bool sort_keys(sct_reader *r, const sct_node *node, const sct_node *const found[])
{
    static const int OF_POINTS[] = {K_AT, K_FORCE, K_MOMENT}, OF_LINES[] = {K_FROM, K_TO};
    const bool is_line = found[K_LINE] != NULL;
    if (is_line) {
        for (int i = 0; i < 3; i++) {
            if (found[OF_POINTS[i]] == NULL) continue;
            sct_fields_key_error(&r->f, found[OF_POINTS[i]],
                                 "\"%s\" is of a load at one point and stands beside \"line\"; write two loads",
                                 KEYS[OF_POINTS[i]].name);
            return false;
        }
        return true;
    }
    for (int i = 0; i < 2; i++) {
        if (found[OF_LINES[i]] == NULL) continue;
        sct_fields_key_error(&r->f, found[OF_LINES[i]], "\"%s\" goes with \"line\"; expected \"at\" with \"force\"",
                             KEYS[OF_LINES[i]].name);
        return false;
    }
    if (found[K_AT] != NULL && (found[K_FORCE] != NULL || found[K_MOMENT] != NULL)) return true;
    sct_fields_error(&r->f, node,
                     "found no load; expected \"line\": [0, \"-5 kN/m\"], or \"at\" with \"force\" or \"moment\"");
    return false;
}

static bool read_load(sct_reader *r, const sct_node *node, const sct_node *found[], load_words *words)
{
    *words = (load_words){.load = {.where = sct_fields_where(&r->f, node)}};
    if (!sct_fields_keys(&r->f, node, "a load on members", KEYS, N_KEYS, found)) return false;
    if (!sort_keys(r, node, found)) return false;
    const bool is_line = found[K_LINE] != NULL;
    bool read = is_line ? read_line(r, found[K_LINE], &words->load) : read_point(r, found, &words->load);
    read = read_station(r, is_line ? found[K_FROM] : found[K_AT], &words->from) && read;
    read = read_station(r, found[K_TO], &words->to) && read;
    return read && read_axes(r, found[K_AXES], &words->load);
}

/* ---- onto the pieces ------------------------------------------------------------------------------------------------
 */

/* The part of a line load from a to b that lies on a piece from s to s + L. */
static void place_line(const sct_member_load *whole, double a, double b, double s, double L, int member, sct_case *c)
{
    const double low = fmax(a, s), high = fmin(b, s + L);
    if (!(high > low)) return;
    sct_member_load *load = &c->member_loads[c->n_member_loads++];
    *load = *whole;
    load->member = member;
    load->a = fmin(low - s, L);
    load->b = high >= s + L ? L : fmin(high - s, L);
    for (int k = 0; k < 3; k++) {
        const double q = whole->qb[k] - whole->qa[k];
        if (low > a) load->qa[k] = whole->qa[k] + q * ((low - a) / (b - a));
        if (high < b) load->qb[k] = whole->qa[k] + q * ((high - a) / (b - a));
    }
}

static void place_point(const sct_member_load *whole, double at, double s, double L, int member, sct_case *c)
{
    sct_member_load *load = &c->member_loads[c->n_member_loads++];
    *load = *whole;
    load->member = member;
    load->a = load->b = fmin(fmax(at - s, 0.0), L);
}

/* On the members first ... first + n - 1 one behind the other; false: it has no place there (told). */
static bool place(sct_reader *r, const load_words *words, const char *name, int first, int n, sct_case *c)
{
    double total = 0, a, b = 0, s = 0;
    for (int i = 0; i < n; i++) {
        const double L = sct_reader_length(r, first + i);
        if (!(L > 0)) return true; /* told elsewhere */
        total += L;
    }
    if (!station_at(r, &words->from, 0.0, total, name, &a)) return false;
    if (!words->load.is_point && !station_at(r, &words->to, total, total, name, &b)) return false;
    if (!words->load.is_point && !(b > a)) {
        sct_fields_error(&r->f, words->to.node != NULL ? words->to.node : words->from.node,
                         "the load has no length on \"%s\"; expected \"from\" before \"to\"", sct_show(name).text);
        return false;
    }
    for (int i = 0; i < n; i++) {
        const double L = sct_reader_length(r, first + i);
        if (!words->load.is_point) {
            place_line(&words->load, a, b, s, L, first + i, c);
        } else if (a <= s + L || i == n - 1) {
            place_point(&words->load, a, s, L, first + i, c);
            break;
        }
        s += L;
    }
    return true;
}

/* Has this load been put on one of the pieces already? */
static bool stands_twice(sct_reader *r, int first, int n)
{
    bool twice = false;
    for (int i = 0; i < n; i++) {
        twice |= r->loaded[first + i] == r->n_loaded;
        r->loaded[first + i] = r->n_loaded;
    }
    return twice;
}

static bool place_on(sct_reader *r, const sct_node *name, const load_words *words, sct_case *c)
{
    int number, first, n;
    if (!sct_fields_reference(&r->f, name, "member", r->members, &number)) return false;
    sct_reader_pieces(r, number, &first, &n);
    if (!stands_twice(r, first, n)) return words == NULL || place(r, words, sct_node_string(name), first, n, c);
    sct_fields_error(&r->f, name, "the load stands on \"%s\" already; expected every member once",
                     sct_show(sct_node_string(name)).text);
    return false;
}

/* words NULL: the load is wrong, only its names are looked at. */
static void place_on_all(sct_reader *r, const sct_node *on, const load_words *words, sct_case *c)
{
    if (on == NULL) return;
    r->n_loaded++;
    if (sct_node_kind_of(on) != SCT_ARRAY) {
        place_on(r, on, words, c);
        return;
    }
    if (sct_node_count(on) == 0) sct_fields_error(&r->f, on, "found no member; expected at least one");
    for (const sct_node *name = sct_node_first(on); name != NULL; name = sct_node_next(name))
        if (!place_on(r, name, words, c)) words = NULL; /* one word on where it fails is enough */
}

/* At most so many loads on single pieces; -1: too many (told). */
static int count_pieces(sct_reader *r, const sct_node *list)
{
    long long n = 0;
    for (const sct_node *entry = sct_node_first(list); entry != NULL; entry = sct_node_next(entry)) {
        const sct_node *on = sct_node_find(entry, "on");
        const bool is_list = on != NULL && sct_node_kind_of(on) == SCT_ARRAY;
        for (const sct_node *name = is_list ? sct_node_first(on) : on; name != NULL;
             name = is_list ? sct_node_next(name) : NULL) {
            const char *text = sct_node_string(name);
            const int number = text == NULL ? -1 : sct_names_find(r->members, text);
            int first, pieces = 0;
            if (number >= 0) sct_reader_pieces(r, number, &first, &pieces);
            n += pieces;
            if (!sct_reader_has_room(r, entry, pieces)) return -1;
        }
    }
    return (int)n;
}

void sct_read_member_loads(sct_reader *r, const sct_node *node, sct_case *c)
{
    if (!sct_fields_is(&r->f, node, SCT_ARRAY, "an array of loads on members")) return;
    const int n = count_pieces(r, node);
    if (n < 0) return;
    c->member_loads = sct_fields_array(&r->f, n, sizeof *c->member_loads);
    if (r->loaded == NULL) r->loaded = sct_fields_array(&r->f, r->model->n_members, sizeof *r->loaded);
    if (r->f.failure != SCT_OK) return;
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        const sct_node *found[N_KEYS] = {NULL};
        load_words words;
        const bool read = read_load(r, entry, found, &words);
        place_on_all(r, found[K_ON], read ? &words : NULL, c);
    }
}

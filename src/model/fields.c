/* The values of a model file, one kind each. Every message says what was found and what was expected. */
#include "fields.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

#include "base/number.h"

enum { ENOUGH_ERRORS = 20, MOST_NAME_BYTES = 200 };

static const char AXES[] = "xyz";

/* ---- messages --------------------------------------------------------------------------------------------------- */

bool sct_fields_enough(const sct_fields *f)
{
    return f->n_errors >= ENOUGH_ERRORS;
}

static void add_issue(sct_fields *f, sct_severity severity, const sct_node *node, sct_where where, const char *format,
                      va_list args)
{
    char message[1024];
    sct_text pointer = {0};
    sct_number_vformat(message, sizeof message, format, args);
    sct_node_pointer(node, &pointer);
    if (pointer.failed) f->failure = SCT_NO_MEMORY;
    where.pointer = pointer.data != NULL ? pointer.data : "";
    sct_issue_add(f->issues, severity, where, "%s", message);
    sct_text_free(&pointer);
}

/* Counts an error. True when it is still worth writing. */
static bool count_error(sct_fields *f)
{
    if (!sct_fields_enough(f)) {
        f->n_errors++;
        return true;
    }
    f->n_errors++;
    sct_issue_add(f->issues, SCT_ERROR, (sct_where){0}, "one of many"); /* only counted there */
    return false;
}

void sct_fields_error(sct_fields *f, const sct_node *node, const char *format, ...)
{
    if (!count_error(f)) return;
    va_list args;
    va_start(args, format);
    add_issue(f, SCT_ERROR, node, sct_node_where(f->document, node), format, args);
    va_end(args);
}

void sct_fields_key_error(sct_fields *f, const sct_node *node, const char *format, ...)
{
    if (!count_error(f)) return;
    va_list args;
    va_start(args, format);
    add_issue(f, SCT_ERROR, node, sct_node_key_where(f->document, node), format, args);
    va_end(args);
}

void sct_fields_error_at(sct_fields *f, sct_where where, const char *format, ...)
{
    char message[1024];
    if (!count_error(f)) return;
    va_list args;
    va_start(args, format);
    sct_number_vformat(message, sizeof message, format, args);
    va_end(args);
    sct_issue_add(f->issues, SCT_ERROR, where, "%s", message);
}

void sct_fields_remark(sct_fields *f, sct_severity severity, const sct_node *node, const char *format, ...)
{
    va_list args;
    va_start(args, format);
    add_issue(f, severity, node, sct_node_where(f->document, node), format, args);
    va_end(args);
}

/* ---- memory ------------------------------------------------------------------------------------------------------ */

void *sct_fields_array(sct_fields *f, int n, size_t size)
{
    void *p = sct_arena_array(f->arena, (size_t)n, size);
    if (p == NULL) f->failure = SCT_NO_MEMORY;
    return p;
}

const char *sct_fields_copy(sct_fields *f, const char *text)
{
    const char *copy = sct_arena_string(f->arena, text, strlen(text));
    if (copy == NULL) f->failure = SCT_NO_MEMORY;
    return copy;
}

sct_where sct_fields_where(sct_fields *f, const sct_node *node)
{
    sct_where where = sct_node_where(f->document, node);
    sct_text pointer = {0};
    sct_node_pointer(node, &pointer);
    if (pointer.failed) f->failure = SCT_NO_MEMORY;
    where.pointer = sct_fields_copy(f, pointer.data != NULL ? pointer.data : "");
    sct_text_free(&pointer);
    return where;
}

/* ---- objects ----------------------------------------------------------------------------------------------------- */

bool sct_fields_is(sct_fields *f, const sct_node *node, sct_node_kind kind, const char *expected)
{
    if (node == NULL) return false;
    if (sct_node_kind_of(node) == kind) return true;
    sct_fields_error(f, node, "found %s; expected %s", sct_node_kind_words(node), expected);
    return false;
}

/* Adds `"word"` to a list; false when the list is full. */
static bool add_word(char *list, size_t room, const char *word)
{
    const size_t used = strlen(list);
    const int more = snprintf(list + used, room - used, "%s\"%s\"", used == 0 ? "" : ", ", word);
    return (size_t)more < room - used;
}

static void unknown_key(sct_fields *f, const sct_node *entry, const char *what, const sct_key keys[], int n)
{
    enum { MOST_KEYS = 32 }; /* of an object: the tables of keys are ours */
    const char *list[MOST_KEYS], *key = sct_node_key(entry);
    if (sct_fields_enough(f)) { /* only counted */
        sct_fields_key_error(f, entry, "unknown key");
        return;
    }
    char known[512] = "";
    for (int i = 0; i < n; i++) {
        list[i] = keys[i].name;
        add_word(known, sizeof known, keys[i].name);
    }
    const char *near = sct_nearest(list, n, key);
    if (near != NULL)
        sct_fields_key_error(f, entry, "unknown key \"%s\"; did you mean \"%s\"?", sct_show(key).text, near);
    else
        sct_fields_key_error(f, entry, "unknown key \"%s\"; %s has %s", sct_show(key).text, what, known);
}

bool sct_fields_keys(sct_fields *f, const sct_node *node, const char *what, const sct_key keys[], int n,
                     const sct_node *found[])
{
    for (int i = 0; i < n; i++) found[i] = NULL;
    if (node == NULL) return false;
    if (sct_node_kind_of(node) != SCT_OBJECT) {
        sct_fields_error(f, node, "found %s; expected an object: %s", sct_node_kind_words(node), what);
        return false;
    }
    for (const sct_node *entry = sct_node_first(node); entry != NULL; entry = sct_node_next(entry)) {
        const char *key = sct_node_key(entry), *text;
        int i = 0;
        while (i < n && strcmp(keys[i].name, key) != 0) i++;
        if (i < n)
            found[i] = entry;
        else if (strcmp(key, "notes") == 0)
            sct_fields_string(f, entry, "notes", &text);
        else
            unknown_key(f, entry, what, keys, n);
    }
    for (int i = 0; i < n; i++)
        if (found[i] == NULL && keys[i].required != NULL)
            sct_fields_error(f, node, "no \"%s\"; expected %s", keys[i].name, keys[i].required);
    return true;
}

/* Blanks of ASCII, the no-break and ideographic blanks, the blanks of U+2000 to U+200B, the byte order mark. */
static bool is_blank(const char *name)
{
    const unsigned char *p = (const unsigned char *)name;
    while (*p != '\0') {
        if (*p == ' ' || (*p >= '\t' && *p <= '\r'))
            p++;
        else if (p[0] == 0xC2 && p[1] == 0xA0)
            p += 2;
        else if ((p[0] == 0xE2 && p[1] == 0x80 && p[2] <= 0x8B) || (p[0] == 0xE3 && p[1] == 0x80 && p[2] == 0x80) ||
                 (p[0] == 0xEF && p[1] == 0xBB && p[2] == 0xBF))
            p += 3;
        else
            return false;
    }
    return true;
}

bool sct_fields_name(sct_fields *f, const sct_node *entry, const char **name)
{
    const char *key = sct_node_key(entry);
    const size_t length = strlen(key);
    *name = key;
    if (length > MOST_NAME_BYTES) {
        sct_fields_key_error(f, entry, "a name of %zu bytes; at most %d are allowed", length, MOST_NAME_BYTES);
        return false;
    }
    if (is_blank(key)) {
        sct_fields_key_error(f, entry, "found a blank name; expected a name with at least one visible character");
        return false;
    }
    *name = sct_fields_copy(f, key);
    return *name != NULL;
}

/* ---- texts ------------------------------------------------------------------------------------------------------ */

bool sct_fields_string(sct_fields *f, const sct_node *node, const char *what, const char **text)
{
    if (node == NULL) return false;
    *text = sct_node_string(node);
    if (*text != NULL) return true;
    sct_fields_error(f, node, "found %s; expected a string: %s", sct_node_kind_words(node), what);
    return false;
}

bool sct_fields_word(sct_fields *f, const sct_node *node, const char *what, const char *const words[], int n,
                     int *index)
{
    const char *text;
    if (!sct_fields_string(f, node, what, &text)) return false;
    for (int i = 0; i < n; i++) {
        if (strcmp(words[i], text) != 0) continue;
        *index = i;
        return true;
    }
    const char *near = sct_nearest(words, n, text);
    if (near != NULL) {
        sct_fields_error(f, node, "found \"%s\"; did you mean \"%s\"?", sct_show(text).text, near);
        return false;
    }
    char list[256] = "";
    for (int i = 0; i < n; i++) add_word(list, sizeof list, words[i]);
    sct_fields_error(f, node, "found \"%s\"; expected %s: one of %s", sct_show(text).text, what, list);
    return false;
}

/* `"G", "S", "W"`, where the names are few and short; else false. */
static bool list_names(const sct_names *names, char *list, size_t room)
{
    enum { FEW = 12 };
    const int n = sct_names_count(names);
    list[0] = '\0';
    for (int i = 0; i < n && i < FEW; i++) {
        if (!add_word(list, room, sct_show(sct_names_at(names, i)).text)) return false;
    }
    return n <= FEW;
}

/* What to say of a name that is not known. The nearest known one is looked for only where it will be shown. */
static const char *unknown_name(const sct_fields *f, const char *what, const sct_names *names, const char *name,
                                char *message, size_t room)
{
    if (sct_fields_enough(f)) return "unknown name";
    const char *near = sct_names_nearest(names, name);
    char list[200];
    if (near == NULL && list_names(names, list, sizeof list))
        snprintf(message, room, "no %s \"%s\"; expected one of %s", what, sct_show(name).text, list);
    else if (near != NULL)
        snprintf(message, room, "no %s \"%s\"; did you mean \"%s\"?", what, sct_show(name).text, sct_show(near).text);
    else
        snprintf(message, room, "no %s \"%s\"; expected the name of a known %s", what, sct_show(name).text, what);
    return message;
}

bool sct_fields_reference(sct_fields *f, const sct_node *node, const char *what, const sct_names *names, int *index)
{
    if (node == NULL) return false;
    const char *name = sct_node_string(node);
    if (name == NULL) {
        sct_fields_error(f, node, "found %s; expected the name of a %s", sct_node_kind_words(node), what);
        return false;
    }
    *index = sct_names_find(names, name);
    if (*index >= 0) return true;
    if (sct_names_count(names) == 0) return false; /* that there are none was told where they should stand */
    char message[640];
    sct_fields_error(f, node, "%s", unknown_name(f, what, names, name, message, sizeof message));
    return false;
}

bool sct_fields_key_reference(sct_fields *f, const sct_node *entry, const char *what, const sct_names *names,
                              int *index)
{
    const char *name = sct_node_key(entry);
    *index = sct_names_find(names, name);
    if (*index >= 0) return true;
    if (sct_names_count(names) == 0) return false;
    char message[640];
    sct_fields_key_error(f, entry, "%s", unknown_name(f, what, names, name, message, sizeof message));
    return false;
}

/* ---- numbers ---------------------------------------------------------------------------------------------------- */

static sct_quantity quantity_of(int slot)
{
    return slot == SCT_DISPLACEMENT ? SCT_LENGTH : (sct_quantity)slot;
}

/* The key of /units that gives a slot its unit; NULL: none does. */
static const char *slot_key(int slot)
{
    static const char *const KEYS[SCT_UNIT_SLOTS] = {[SCT_LENGTH] = "length",
                                                     [SCT_FORCE] = "force",
                                                     [SCT_STRESS] = "stress",
                                                     [SCT_AREA] = "area",
                                                     [SCT_SECOND_MOMENT] = "second_moment",
                                                     [SCT_DENSITY] = "density",
                                                     [SCT_TEMPERATURE] = "temperature",
                                                     [SCT_GRADIENT] = "temperature",
                                                     [SCT_DISPLACEMENT] = "displacement"};
    return KEYS[slot];
}

/* The number of a node and the unit that it is in. */
static bool read_quantity(sct_fields *f, const sct_node *node, const sct_range *range, double *value,
                          const sct_unit **unit)
{
    const sct_quantity quantity = quantity_of(range->slot);
    const char *example = range->example != NULL ? range->example : sct_quantity_example(quantity);
    if (sct_node_kind_of(node) == SCT_NUMBER) {
        *value = sct_node_number(node);
        *unit = f->unit[range->slot];
        if (*unit != NULL || f->unit_is_wrong[range->slot]) return *unit != NULL;
        const char *key = slot_key(range->slot);
        sct_fields_error(f, node, "found a number without a unit; expected %s such as \"%s\"%s%s", range->what, example,
                         key != NULL ? ", or a unit in /units/" : "", key != NULL ? key : "");
        return false;
    }
    const char *text = sct_node_string(node);
    char fault[SCT_UNIT_FAULT_ROOM];
    if (text == NULL) {
        const sct_unit *bare = f->unit[range->slot];
        if (bare != NULL)
            sct_fields_error(f, node, "found %s; expected %s: a number in %s or a string such as \"%s\"",
                             sct_node_kind_words(node), range->what, bare->name, example);
        else
            sct_fields_error(f, node, "found %s; expected %s: a string such as \"%s\"", sct_node_kind_words(node),
                             range->what, example);
        return false;
    }
    if (sct_quantity_read(text, quantity, value, unit, fault)) return true;
    sct_fields_error(f, node, "%s", fault);
    return false;
}

/* The unit that makes a value usual, where the one it is in does not: the likely slip. Of several, the one that brings
 * it nearest to the middle of what is usual. */
static const sct_unit *unit_meant(const sct_range *range, double value)
{
    const sct_unit *unit, *best = NULL;
    const double middle = 0.5 * (log(range->usual_least) + log(range->usual_most));
    double least = INFINITY;
    for (int i = 0; (unit = sct_unit_of(quantity_of(range->slot), i)) != NULL; i++) {
        const double x = sct_unit_to_SI(unit, range->least < 0 ? fabs(value) : value);
        if (!(x >= range->usual_least && x <= range->usual_most && x > 0) || fabs(log(x) - middle) >= least) continue;
        least = fabs(log(x) - middle);
        best = unit;
    }
    return best;
}

static bool out_of_range(sct_fields *f, const sct_node *node, const sct_range *range, double value,
                         const sct_unit *unit)
{
    const char *name = unit == NULL ? "" : unit->name, *gap = unit == NULL ? "" : " ";
    if (range->least > 0 && !(value > 0)) {
        sct_fields_error(f, node, "found %.15g%s%s; expected %s above zero", value, gap, name, range->what);
        return false;
    }
    const char *si = unit == NULL ? "" : sct_unit_of(unit->quantity, 0)->name;
    const sct_unit *meant = unit == NULL ? NULL : unit_meant(range, value);
    char hint[64] = "";
    if (meant != NULL && meant != unit) snprintf(hint, sizeof hint, "; did you mean %s?", meant->name);
    sct_fields_error(f, node, "found %.15g%s%s; expected %s from %g to %g%s%s%s", value, gap, name, range->what,
                     range->least, range->most, gap, si, hint);
    return false;
}

bool sct_fields_value(sct_fields *f, const sct_node *node, const sct_range *range, double *value)
{
    double x;
    const sct_unit *unit = NULL;
    if (node == NULL) return false;
    if (range->slot >= 0) {
        if (!read_quantity(f, node, range, &x, &unit)) return false;
    } else if (sct_node_kind_of(node) == SCT_NUMBER) {
        x = sct_node_number(node);
    } else {
        sct_fields_error(f, node, "found %s; expected a number: %s", sct_node_kind_words(node), range->what);
        return false;
    }
    const double si = unit == NULL ? x : sct_unit_to_SI(unit, x);
    if (!(si >= range->least && si <= range->most)) return out_of_range(f, node, range, x, unit);
    *value = si;
    return true;
}

/* ---- vectors ---------------------------------------------------------------------------------------------------- */

static bool has_dimensions(sct_fields *f, const sct_node *node, const sct_range *range)
{
    const int n = sct_node_count(node);
    if (f->dimensions == 0 ? n == 2 || n == 3 : n == f->dimensions) return true;
    const char *hint = "";
    if (f->dimensions == 2 && n == 3)
        hint = range->slot == SCT_FORCE ? " (moments stand in \"moments\")" : " (a plane model has no third component)";
    sct_fields_error(f, node, "found %d entr%s; expected %d: %s along %s%s", n, n == 1 ? "y" : "ies",
                     f->dimensions == 0 ? 2 : f->dimensions, range->what, f->dimensions == 3 ? "x, y and z" : "x and y",
                     hint);
    return false;
}

bool sct_fields_vector(sct_fields *f, const sct_node *node, const sct_range *range, double v[3])
{
    v[0] = v[1] = v[2] = 0.0;
    if (node == NULL) return false;
    if (sct_node_kind_of(node) != SCT_ARRAY) {
        sct_fields_error(f, node, "found %s; expected an array of %s", sct_node_kind_words(node),
                         f->dimensions == 3 ? "three components" : "two components");
        return false;
    }
    if (!has_dimensions(f, node, range)) return false;
    bool right = true;
    int i = 0;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c))
        right &= sct_fields_value(f, c, range, &v[i++]);
    return right;
}

bool sct_fields_direction(sct_fields *f, const sct_node *node, double d[3], const char **label)
{
    static const sct_range COMPONENT = {"a component of a direction", -1, -1e100, 1e100, 0, 0, NULL};
    d[0] = d[1] = d[2] = 0.0;
    if (node == NULL) return false;
    const char *text = sct_node_string(node);
    if (text != NULL) {
        const char *axis = text[0] != '\0' && text[1] == '\0' ? strchr(AXES, text[0]) : NULL;
        if (axis == NULL || (f->dimensions == 2 && *axis == 'z')) {
            sct_fields_error(f, node, "found \"%s\"; expected a direction: %s, or a vector such as %s",
                             sct_show(text).text, f->dimensions == 2 ? "\"x\", \"y\"" : "\"x\", \"y\", \"z\"",
                             f->dimensions == 2 ? "[0.6, 0.8]" : "[0.6, 0, 0.8]");
            return false;
        }
        d[axis - AXES] = 1.0;
        if (label != NULL) *label = sct_fields_copy(f, text);
        return true;
    }
    if (sct_node_kind_of(node) != SCT_ARRAY) {
        sct_fields_error(f, node, "found %s; expected a direction: \"x\", \"y\"%s or a vector",
                         sct_node_kind_words(node), f->dimensions == 2 ? "" : ", \"z\"");
        return false;
    }
    if (!sct_fields_vector(f, node, &COMPONENT, d)) return false;
    const double scale = fmax(fabs(d[0]), fmax(fabs(d[1]), fabs(d[2])));
    if (!(scale > 1e-100)) {
        sct_fields_error(f, node, "found a direction of length zero; expected a vector that points somewhere");
        return false;
    }
    for (int i = 0; i < 3; i++) d[i] /= scale;
    const double length = sqrt(d[0] * d[0] + d[1] * d[1] + d[2] * d[2]);
    for (int i = 0; i < 3; i++) d[i] /= length;
    if (label == NULL) return true;
    char words[96];
    if (f->dimensions == 3)
        sct_number_format(words, sizeof words, "along (%.3g, %.3g, %.3g)", d[0], d[1], d[2]);
    else
        sct_number_format(words, sizeof words, "along (%.3g, %.3g)", d[0], d[1]);
    *label = sct_fields_copy(f, words);
    return true;
}

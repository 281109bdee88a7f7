/* The values of a model file, one kind each: read, converted to SI, held against their range, and told of when wrong.
 *
 * Every reader gives true and fills its result, or gives false after it has added an error at the place of the value.
 * A NULL node gives false without a word: who asked for a required key has been told by sct_fields_keys. */
#ifndef SCT_MODEL_FIELDS_H
#define SCT_MODEL_FIELDS_H

#include "base/arena.h"
#include "base/names.h"
#include "model/document.h"
#include "model/units.h"

/* Slots of /units: the quantities, and the displacements, which are lengths with a unit of their own. */
enum { SCT_DISPLACEMENT = SCT_QUANTITIES, SCT_UNIT_SLOTS };

/* What the readers need to know and to remember. */
typedef struct sct_fields {
    const sct_document *document;
    sct_issues *issues;
    sct_arena *arena;
    int dimensions;                       /* 0 while unknown: then vectors of 2 and 3 entries pass */
    const sct_unit *unit[SCT_UNIT_SLOTS]; /* of bare numbers; NULL: none */
    bool unit_is_wrong[SCT_UNIT_SLOTS];   /* told already: bare numbers fail without a word */
    int n_errors;
    sct_status failure; /* SCT_OK, or SCT_NO_MEMORY, SCT_TOO_LARGE: reading makes no sense any more */
} sct_fields;

/* Plausible values of one number, in SI. Outside `least` to `most` it is refused; `usual` finds the unit that was
 * meant. */
typedef struct sct_range {
    const char *what; /* "a density" */
    int slot;         /* of /units; -1: a plain number */
    double least, most, usual_least, usual_most;
    const char *example; /* of a value, or NULL for that of its kind */
} sct_range;

/** Adds an error (warning, note) at a value, or at its key. */
__attribute__((format(printf, 3, 4))) void sct_fields_error(sct_fields *f, const sct_node *node, const char *format,
                                                            ...);
__attribute__((format(printf, 3, 4))) void sct_fields_key_error(sct_fields *f, const sct_node *node, const char *format,
                                                                ...);
__attribute__((format(printf, 4, 5))) void sct_fields_remark(sct_fields *f, sct_severity severity, const sct_node *node,
                                                             const char *format, ...);
/** An error at a place that was kept: for what shows only when all has been read. */
__attribute__((format(printf, 3, 4))) void sct_fields_error_at(sct_fields *f, sct_where where, const char *format, ...);
/** So many errors that no more will be shown: hints that cost time can be left out. */
bool sct_fields_enough(const sct_fields *f);
/** The place of a value with its pointer, both kept in the arena. */
sct_where sct_fields_where(sct_fields *f, const sct_node *node);
/** n zeroed things in the arena; never NULL: when memory runs out, f->failure is set and NULL comes back. */
void *sct_fields_array(sct_fields *f, int n, size_t size);
const char *sct_fields_copy(sct_fields *f, const char *text);

/* One key of an object. */
typedef struct sct_key {
    const char *name;
    const char *required; /* what to write where it is missing; NULL: the key is optional */
} sct_key;

/**
 * Sorts the entries of an object by its table of keys: found[i] is the value of keys[i], NULL where it is missing.
 * Errors: not an object (false; what: "a member"), keys that are not in the table, required keys that are missing.
 * "notes" is taken everywhere.
 */
bool sct_fields_keys(sct_fields *f, const sct_node *node, const char *what, const sct_key keys[], int n,
                     const sct_node *found[]);

/** An object or array of any number of entries. */
bool sct_fields_is(sct_fields *f, const sct_node *node, sct_node_kind kind, const char *expected);
/** The key of an entry as a name: not blank, at most 200 bytes. Copied to the arena. */
bool sct_fields_name(sct_fields *f, const sct_node *entry, const char **name);
bool sct_fields_string(sct_fields *f, const sct_node *node, const char *what, const char **text);
/** A number in its range: plain (slot -1), or a quantity as a number or a text with its unit. */
bool sct_fields_value(sct_fields *f, const sct_node *node, const sct_range *range, double *value);
/** `dimensions` values; the rest of v[3] is 0. */
bool sct_fields_vector(sct_fields *f, const sct_node *node, const sct_range *range, double v[3]);
/** "x", "y", "z" or a vector of plain numbers: a unit vector. label: copied to the arena; may be NULL. */
bool sct_fields_direction(sct_fields *f, const sct_node *node, double d[3], const char **label);
/** One of n words: its index. */
bool sct_fields_word(sct_fields *f, const sct_node *node, const char *what, const char *const words[], int n,
                     int *index);
/** The name of a thing in a table: its index. what: "joint". */
bool sct_fields_reference(sct_fields *f, const sct_node *node, const char *what, const sct_names *names, int *index);
/** The same for the key of an entry. */
bool sct_fields_key_reference(sct_fields *f, const sct_node *entry, const char *what, const sct_names *names,
                              int *index);
#endif

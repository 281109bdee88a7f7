/* The reader of model files, in parts: what they share while one file is read. The public calls are in scantling.h.
 *
 * Each part reads one section of the file into the model. A fault becomes an error and reading goes on: references that
 * were not found are -1 until the end, when a model with errors is dropped. Where r->f.failure is set, all parts stop.
 */
#ifndef SCT_MODEL_READER_H
#define SCT_MODEL_READER_H

#include "model/fields.h"
#include "model/model.h"

enum { SCT_MOST_JOINTS = 1000000, SCT_MOST_MEMBERS = 1000000, SCT_MOST_CASES = 10000, SCT_MOST_TABLE = 10000000 };

/* Effective lengths as said in one place: in a group, or in a member. */
typedef struct sct_lengths {
    bool is_given[2];
    sct_length_source source[2];
    double length[2];
} sct_lengths;

/* What was said of buckling in one place. */
typedef struct sct_buckling_words {
    bool is_given;
    sct_buckling by;
    double safety;
} sct_buckling_words;

typedef struct sct_reader {
    sct_fields f;
    sct_model *model;
    sct_names *materials, *joints, *groups, *members, *cases, *combinations; /* names to indices */
    sct_names *families;                                                     /* those in the model so far */
    sct_names **sections;                                                    /* of each of them */
    int families_room;
    bool families_are_wrong;                         /* told already, as below */
    bool *material_is_wrong, *joint_is_wrong;        /* told already: what follows from it is not told again */
    sct_lengths *group_lengths;                      /* n_groups */
    sct_buckling_words buckling;                     /* of /limits */
    double slenderness_any, slenderness_compression; /* of /limits; INFINITY: none */
} sct_reader;

/* A table of the names in an object (NULL is an empty one); NULL: out of memory, r->f.failure is set. */
sct_names *sct_reader_names(sct_reader *r, const sct_node *object);
/* How many things a needed section holds; 0 with an error where it is no object, empty, or longer than `most`. */
int sct_reader_count(sct_reader *r, const sct_node *node, const char *what, int most);
/* "allowable": stresses in tension and compression; what is not given (or node NULL) stays as it is. */
void sct_read_allowable(sct_reader *r, const sct_node *node, double allowable[2]);
/* "restraint" and "length_factor" of a group or member; both may be NULL. */
void sct_read_lengths(sct_reader *r, const sct_node *restraint, const sct_node *factor, sct_lengths *lengths);

void sct_read_families(sct_reader *r, const sct_node *node);
/** The index of a family by name, taken from the shipped ones where the file has none; -1 with an error. */
int sct_reader_family(sct_reader *r, const sct_node *node);
void sct_read_limit_defaults(sct_reader *r, const sct_node *buckling, const sct_node *slenderness);
void sct_read_groups(sct_reader *r, const sct_node *node);
void sct_read_cases(sct_reader *r, const sct_node *node);
void sct_read_combinations(sct_reader *r, const sct_node *node);
void sct_read_deflections(sct_reader *r, const sct_node *node);
#endif

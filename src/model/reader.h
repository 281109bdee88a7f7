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

/* Loads of a case that are a part of the downward loads of another one. */
typedef struct sct_notional {
    const sct_node *node; /* NULL: none */
    int of;               /* case */
    double part, direction[3];
} sct_notional;

typedef struct sct_reader {
    sct_fields f;
    sct_model *model;
    sct_names *materials, *joints, *groups, *cases, *combinations; /* names to indices */
    sct_names *members;                                            /* members and runs by number: sct_reader_pieces */
    sct_names *families;                                           /* those in the model so far */
    sct_names **sections;                                          /* of each of them */
    int families_room;
    bool families_are_wrong;                  /* told already, as below */
    bool *material_is_wrong, *joint_is_wrong; /* told already: what follows from it is not told again */
    sct_notional *notional;                   /* one per case */
    long long n_placed;    /* actions on the pieces of members, and notional loads: what a few words can multiply */
    int *loaded, n_loaded; /* n_members: the last load on a member of those read so far */
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

extern const sct_range SCT_AREAS;
/** One number for both axes, or an object with one for each. */
bool sct_read_both_axes(sct_reader *r, const sct_node *node, const sct_range *range, double v[2]);
/* What a group with an area says of the other properties of its sections. */
typedef enum sct_saying {
    SCT_SAYS_SECOND_MOMENT,
    SCT_SAYS_SECTION_MODULUS,
    SCT_SAYS_TORSION,
    SCT_SAYS_SHAPE,
    SCT_SAYINGS
} sct_saying;
void sct_read_properties(sct_reader *r, const sct_node *const said[SCT_SAYINGS], sct_group *group);
void sct_read_families(sct_reader *r, const sct_node *node);
/** The index of a family by name, taken from the shipped ones where the file has none; -1 with an error. */
int sct_reader_family(sct_reader *r, const sct_node *node);
void sct_read_limit_defaults(sct_reader *r, const sct_node *buckling, const sct_node *slenderness);
void sct_read_joints(sct_reader *r, const sct_node *node);
/** The part of d square to n orthonormal vectors; its length. */
double sct_length_apart(const double d[3], const double basis[][3], int n, double apart[3]);
void sct_read_groups(sct_reader *r, const sct_node *node);
void sct_read_members(sct_reader *r, const sct_node *node);
/** The members behind a number of r->members: the member itself, or all pieces of a run, in order. */
void sct_reader_pieces(const sct_reader *r, int number, int *first, int *n);
/** The length of a member; 0 where it is not known, as a joint is wrong. */
double sct_reader_length(const sct_reader *r, int member);
/** Counts `more` things that the words of one entry make; false with an error where they become too many. */
bool sct_reader_has_room(sct_reader *r, const sct_node *node, long long more);
/** One number about z in a plane model, a vector in space. False, untold, while the dimensions are not known. */
bool sct_read_turn(sct_reader *r, const sct_node *node, const sct_range *range, double v[3]);
void sct_read_member_loads(sct_reader *r, const sct_node *node, sct_case *c);
void sct_read_notional(sct_reader *r, const sct_node *node, int c);
/** Makes the loads of all notional cases, when every case has been read. */
void sct_add_notional_loads(sct_reader *r);
void sct_read_cases(sct_reader *r, const sct_node *node);
void sct_read_combinations(sct_reader *r, const sct_node *node);
/* The entries of /limits. */
enum {
    SCT_LIMITS_DEFLECTION,
    SCT_LIMITS_BUCKLING,
    SCT_LIMITS_SLENDERNESS,
    SCT_LIMITS_DRIFT,
    SCT_LIMITS_BOW,
    SCT_LIMITS_CRITICAL_FACTOR,
    SCT_LIMITS_AMPLIFY_SWAY,
    SCT_LIMITS_FREQUENCY,
    SCT_LIMITS
};
/** All but buckling and slenderness, which groups need before. */
void sct_read_limits(sct_reader *r, const sct_node *const limit[SCT_LIMITS]);
/** What members that bend and twist need of their groups, their material and their joints; of a model without errors.
 */
void sct_check_needs(sct_reader *r);
#endif

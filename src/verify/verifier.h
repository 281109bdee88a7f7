/* A result under comparison: what the files of the second path share. */
#ifndef SCT_VERIFY_VERIFIER_H
#define SCT_VERIFY_VERIFIER_H

#include "verify/cut.h"

/* What both analyses leave open of numbers of one kind in one combination. */
typedef struct sct_open {
    double N, u, turn;
    double end[2]; /* of any force or moment inside a beam or at its ends */
    double N_none; /* forces below about this are given as 0, [N] */
} sct_open;

typedef struct sct_verifier {
    const sct_model *m;
    const sct_result *r;
    sct_issues *issues;
    int n_statics;
    sct_statics *statics;         /* one for all combinations, or one for each: slack.h */
    sct_verify_section *sections; /* n_groups */
    double *L;                    /* n_groups: of all its members, [m] */
    double *N;                    /* n_combinations x n_members */
    double *u, *turn;             /* n_combinations x n_joints x 3 */
    sct_open *open_of;            /* n_combinations */
    double accuracy;              /* relative, of the first analysis and of this one */
    double open;                  /* of any utilisation */
    double longest;               /* [m] element */
    int n_wrong;
    sct_element_load *loads; /* room for one line */
    long double *breaks;
} sct_verifier;

/** The analysis that a combination is made of. */
static inline const sct_statics *sct_statics_of(const sct_verifier *v, int combination)
{
    return &v->statics[v->n_statics > 1 ? combination : 0];
}

/** Adds an issue with both numbers. name, combination: NULL: none. */
void sct_differ(sct_verifier *v, const char *what, const char *name, const char *combination, double said,
                double found);
/** The same when the numbers differ by more than rounding and `open` explain. */
void sct_compare(sct_verifier *v, const char *what, const char *name, const char *combination, double said,
                 double found, double open);

double sct_verify_length(const sct_model *model, int member);

/** [N] what is open of the force along a member: more where it is so small that results may give it as 0. */
double sct_verify_N_open(const sct_verifier *v, int member, int combination);

/** The ends of all members in a combination. */
void sct_verify_ends(sct_verifier *v, int combination);

/** A member that carries moments: what its result tells of places along it. Returns its largest utilisation in strength
 * and adds to *open what is open of that. */
double sct_verify_bent(sct_verifier *v, int member, double *open);

/** What moments in a combination are multiplied by, from the result's factor of sway. */
double sct_verify_amplification(const sct_verifier *v, int combination);

/** Limits on the whole, with the result's critical load factors and frequency. Returns the largest utilisation;
 * has_verdict: first-order results hold, or were amplified, in every combination for strength. */
double sct_verify_whole(sct_verifier *v, bool *has_verdict);

/** All bow limits. Returns the largest utilisation. */
double sct_verify_bows(sct_verifier *v);
#endif

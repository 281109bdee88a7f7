/**
 * Allowable stress with bending: linear in N and M at a place along a member, so that every check reads
 *
 *     utilisation = c_N N + c_in M_in + c_out M_out
 *
 *     extreme fibre, tension       N / (A f_t) + |M_in| / (W_in f_t) + |M_out| / (W_out f_t) <= 1
 *     extreme fibre, compression  -N / (A f_c) + |M_in| / (W_in f_c) + |M_out| / (W_out f_c) <= 1
 *     buckling with bending        |N| / (A sigma_cr / n) + |M_in| / (W_in f_c) + |M_out| / (W_out f_c) <= 1
 *
 * The last is the linear interaction, with the largest compression along the member for N and the column strength about
 * its worse axis (allowable.h); first-order moments, not amplified. Elementary bending theory; the linear interaction
 * is common to allowable stress rules (from memory). Basis: allowable (unfactored actions).
 */
#ifndef SCT_RULES_BENDING_H
#define SCT_RULES_BENDING_H

#include "rules/allowable.h"

/* What checks need of a size. NAN: not stated. */
typedef struct sct_shape {
    double A, i[2], W[2];
} sct_shape;

typedef enum sct_bent_kind { SCT_BENT_TENSION, SCT_BENT_COMPRESSION, SCT_BENT_BUCKLING, SCT_BENT_KINDS } sct_bent_kind;

/* The coefficients of a check for moments that are not negative; a negative one turns the sign of its own. */
typedef struct sct_bent_coefficients {
    double c[3];   /* of N, M_in, M_out; 0 where W is not stated */
    double lambda; /* slenderness about the worse axis, of buckling */
    int axis;
    sct_column column;
} sct_bent_coefficients;

/** false: the check does not apply (buckling "none", or no radius is stated). */
bool sct_bent_coefficients_of(const sct_bar_rule *rule, sct_bent_kind kind, const sct_shape *shape,
                              sct_bent_coefficients *out);
sct_check_kind sct_bent_check_kind(sct_bent_kind kind);
#endif

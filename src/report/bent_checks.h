/* The checks of a bent member in one combination at the places where they are worst: what explain shows. */
#ifndef SCT_REPORT_BENT_CHECKS_H
#define SCT_REPORT_BENT_CHECKS_H

#include "rules/bending.h"
#include "scantling.h"

typedef struct sct_bent_check {
    sct_check_kind kind;
    sct_bent_coefficients by; /* of moments amplified as the combination asks for */
    double amplification;
    double f;           /* [Pa] allowable stress of the extreme fibre */
    double x;           /* [m] from the start of the member */
    double N, M[2];     /* [N], [N m] there; of buckling N is the largest compression along the member */
    double utilisation; /* the sum of the coefficients times these */
} sct_bent_check;

typedef struct sct_bent_checks {
    int n;
    sct_bent_check check[SCT_BENT_KINDS];
    double N[2], M[2][2]; /* smallest and largest along the member: N, M[axis] */
} sct_bent_checks;

/** All checks that apply. Where one governs the member, place and forces are those of the result; elsewhere the worst
 * of the member's stations. SCT_NO_MEMORY. */
sct_status sct_bent_checks_of(const sct_result *result, int combination, int member, sct_bent_checks *out);
#endif

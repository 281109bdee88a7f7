/* Members that carry moments: where along them the checks of rules/bending.h may govern, in one combination. */
#ifndef SCT_SIZING_BENT_H
#define SCT_SIZING_BENT_H

#include "analysis/member_line.h"
#include "rules/bending.h"
#include "sizing/envelope.h"
#include "sizing/form.h"

/* Both ends, and the worst place between them: kept apart, so that each varies smoothly with the sizes. */
enum { SCT_BENT_FROM, SCT_BENT_TO, SCT_BENT_INSIDE, SCT_BENT_PLACES };

typedef struct sct_bent_place {
    double utilisation; /* 0: no check applies there */
    sct_bent_kind kind;
    sct_bent_coefficients rule;
    double c[3]; /* with the signs of the moments: utilisation = c[0] N(x_N) + c[1] M_in(x) + c[2] M_out(x) */
    double q[3]; /* these N, M_in, M_out */
    double x, x_N;
    int piece, piece_N; /* of the member's line */
    double q_xx;        /* second derivative by x where the place moves with the sizes; else 0 */
} sct_bent_place;

/* One member in one combination. */
typedef struct sct_bent_member {
    sct_member_lines *lines;
    const sct_structure *st;
    int bar, combination;
    const double *S;      /* n_springs, of the combination */
    double A;             /* [m2] for its own weight */
    double amplification; /* of moments, in checks */
} sct_bent_member;

void sct_bent_places(const sct_bent_member *member, const sct_bar_rule *rule, const sct_shape *shape,
                     sct_bent_place places[SCT_BENT_PLACES]);

/* The size of a group as functions of z = ln A: value, first and second derivative of ln i, ln W, ln I, ln J. */
typedef struct sct_shape_slopes {
    sct_curve i[2], W[2];
} sct_shape_slopes;

/** The utilisation at a place as a form; own: variable of the member's group or -1, then slopes may be NULL. */
sct_form sct_bent_form(const sct_bent_member *member, const sct_bent_place *place, int own,
                       const sct_shape_slopes *slopes);
#endif

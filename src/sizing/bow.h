/* Limits on how far members bow off the straight line between their ends, or pieces of a run off the line between the
 * run's ends. */
#ifndef SCT_SIZING_BOW_H
#define SCT_SIZING_BOW_H

#include "sizing/bent.h"

/* One limit on one member in one combination. */
typedef struct sct_bow_row {
    int limit, bar, run, combination; /* run: its index, or -1 */
    double at_most;                   /* [m] */
} sct_bow_row;

/** Lists the rows of all limits by limit, combination, member; rows may be NULL. Returns how many. */
int sct_bow_rows(const sct_structure *st, sct_bow_row *rows);

/* The place of a member that is farthest off. */
typedef struct sct_bow_place {
    double v, x;     /* [m] along local axis 1 or 2; place */
    double v_bend;   /* the part of v that goes with 1/(E I) */
    double v_bend_x; /* its derivative by x */
    double q_xx;     /* as in sct_form */
} sct_bow_place;

/** E I about the limit's axis, [N m2]. */
sct_bow_place sct_bow_farthest(const sct_bent_member *member, const sct_response *response, const sct_bow_row *row,
                               double EI);

/** v as a form; I: ln I of the member's own size over z (own >= 0). */
sct_form sct_bow_form(const sct_bent_member *member, const sct_bow_row *row, const sct_bow_place *place, double EI,
                      int own, const sct_curve *I);
#endif

/**
 * What a critical load factor alpha says about first-order results.
 *
 *     alpha >= 10        they hold as they are
 *     3 <= alpha < 10    moments of sway are to be amplified by 1/(1 - 1/alpha)
 *     1 < alpha < 3      a second-order analysis would be needed: no verdict
 *     alpha <= 1         the structure buckles under its loads
 * Source: EN 1993-1-1:2005, 5.2.1 (3) and 5.2.2 (5), elastic analysis (from memory); alpha there is that of sway.
 */
#ifndef SCT_RULES_SECOND_ORDER_H
#define SCT_RULES_SECOND_ORDER_H

#include <stdbool.h>

static const double SCT_FIRST_ORDER_HOLDS = 10.0, SCT_AMPLIFYING_HOLDS = 3.0;

typedef enum sct_order_kind {
    SCT_FIRST_ORDER, /* as they are */
    SCT_AMPLIFIED,   /* moments of sway times `factor` */
    SCT_UNAMPLIFIED, /* the model does not ask for it: to be warned about */
    SCT_NO_VERDICT,  /* neither kept nor broken */
    SCT_BUCKLED      /* broken */
} sct_order_kind;

typedef struct sct_second_order {
    sct_order_kind kind;
    double factor;     /* of moments of sway: 1/(1 - 1/alpha) where AMPLIFIED, else 1 */
    double slope;      /* d ln factor / d ln alpha */
    const char *words; /* for an issue, after "combination "A": critical load factor 4.2: "; never NULL */
} sct_second_order;

/** alpha: a lower bound rather than an estimate; INFINITY: nothing buckles; NAN, unknown: no verdict. amplifies: does
 * the model ask for it? */
sct_second_order sct_second_order_of(double alpha, bool amplifies);
#endif

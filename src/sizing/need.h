/**
 * The area that a bar needs for a force: s = ln A as a function of p = ln |N|, with two derivatives. It is the inverse
 * of the rules' resistance over the envelope of the group, so that a check reads "area needed <= area".
 */
#ifndef SCT_SIZING_NEED_H
#define SCT_SIZING_NEED_H

#include "rules/allowable.h"
#include "sizing/envelope.h"

typedef struct sct_need {
    double s, s1, s2;    /* ln of the area needed, ds/dp, d2s/dp2 */
    double sL;           /* ds/dln Lcr of the governing axis; 0 unless a column check governs */
    sct_check_kind kind; /* the governing check */
} sct_need;

/** tension: N > 0. p = ln |N|. near: a guess for s (any finite number). */
sct_need sct_area_needed(const sct_bar_rule *rule, const sct_envelope envelope[2], bool tension, double p, double near);
#endif

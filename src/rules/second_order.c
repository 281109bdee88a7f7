#include "rules/second_order.h"

#include <math.h>

#include "scantling.h"

sct_second_order sct_second_order_of(double alpha, bool amplifies)
{
    const double raised = alpha * (1.0 + SCT_KEPT_TO);
    if (isnan(alpha))
        return (sct_second_order){SCT_NO_VERDICT, 1.0, 0.0, "it is not known whether first-order results hold"};
    if (alpha <= 1.0) return (sct_second_order){SCT_BUCKLED, 1.0, 0.0, "the structure buckles under its loads"};
    if (raised >= SCT_FIRST_ORDER_HOLDS)
        return (sct_second_order){SCT_FIRST_ORDER, 1.0, 0.0, "at least 10: first-order results hold"};
    if (!(raised >= SCT_AMPLIFYING_HOLDS))
        return (sct_second_order){SCT_NO_VERDICT, 1.0, 0.0,
                                  "below 3 first-order results say too little: no verdict without a second-order "
                                  "analysis; stiffen or brace the structure"};
    if (!amplifies)
        return (sct_second_order){SCT_UNAMPLIFIED, 1.0, 0.0,
                                  "below 10 sway adds to the moments, and it is left out; set \"amplify_sway\", or "
                                  "stiffen or brace the structure"};
    return (sct_second_order){SCT_AMPLIFIED, 1.0 / (1.0 - 1.0 / alpha), -1.0 / (alpha - 1.0),
                              "below 10: moments of sway are amplified by 1/(1 - 1/factor)"};
}

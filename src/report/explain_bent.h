/* What explain works out for a member that carries moments. */
#ifndef SCT_REPORT_EXPLAIN_BENT_H
#define SCT_REPORT_EXPLAIN_BENT_H

#include "report/worked.h"

/** Its forces and checks in one combination. SCT_NO_MEMORY. */
sct_status sct_explain_bent(sct_worked *s, int combination, int member);
/** The limits on its bow. */
void sct_explain_bows(sct_worked *s, int member);
#endif

/* Members that carry tension only: each combination is analysed with those left out that its result calls slack. */
#ifndef SCT_VERIFY_SLACK_H
#define SCT_VERIFY_SLACK_H

#include "verify/verifier.h"

/** How many analyses a model needs: one for all its combinations, or one for each. */
int sct_verify_analyses(const sct_model *model);

/** The members that analysis i leaves out (n_members); NULL: none. */
const bool *sct_verify_left_out(const sct_verifier *v, int i);

/** Were the slack members of a combination shortened, and are the others in tension? */
void sct_verify_slack(sct_verifier *v, int combination);
#endif

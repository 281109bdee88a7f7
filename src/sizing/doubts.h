/* What a person must know although every number is right: warnings on models and results, kept in the result so that
 * every report can carry them. */
#ifndef SCT_SIZING_DOUBTS_H
#define SCT_SIZING_DOUBTS_H

#include "sizing/duty.h"

/** Deflection limits that hold in a combination with settlements. */
void sct_doubt_settlements(const sct_model *model, sct_issues *issues);

/** Held groups that break the slenderness limit of every member. */
void sct_doubt_held_slenderness(const sct_duty *duty, const sct_design *design, sct_issues *issues);

/** Displacements that are large against the structure. */
void sct_doubt_movement(const sct_result *result, sct_issues *issues);

/** Copies the warnings into the result. SCT_OK, SCT_NO_MEMORY. */
sct_status sct_doubts_keep(sct_result *result, const sct_issues *issues);

/** Warns of combinations in which sway adds to the moments and is left out. */
void sct_doubt_sway(const sct_result *result, sct_issues *issues);
/** Slack members that leave a combination with a low critical load factor. */
void sct_doubt_slack(const sct_result *result, sct_issues *issues);
#endif

/* The whole result as JSON. */
#ifndef SCT_REPORT_JSON_H
#define SCT_REPORT_JSON_H

#include "base/text.h"
#include "scantling.h"

/**
 * Appends result.json, "format": "scantling result", "version": SCT_RESULT_FORMAT. The first key is "caution".
 *
 * SI, with the unit in the key; numbers are the shortest that read back to the same double; null stands for "none" and
 * "not known". Joints, members, groups and combinations are named, never numbered. Arrays "by combination" have one
 * entry per entry of "combinations", in that order; vectors have "dimensions" entries. Within a version keys are only
 * added.
 *
 * SCT_NO_MEMORY.
 */
sct_status sct_result_json(const sct_result *result, sct_text *out);
#endif

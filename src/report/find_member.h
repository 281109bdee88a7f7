/* A member by its name. */
#ifndef SCT_REPORT_FIND_MEMBER_H
#define SCT_REPORT_FIND_MEMBER_H

#include "scantling.h"

/** Its index; -1 when there is none: issues then name the nearest. */
int sct_find_member(const sct_result *result, const char *member, sct_issues *issues);
#endif

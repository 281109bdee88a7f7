/* What a summary says of members that carry tension only. */
#ifndef SCT_REPORT_SUMMARY_SLACK_H
#define SCT_REPORT_SUMMARY_SLACK_H

#include "report/page.h"

/** The slack members of each combination; nothing where no member carries tension only. */
void sct_summary_slack(const sct_page *p);
#endif
